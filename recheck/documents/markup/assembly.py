"""Passages and tables of a marked-up article, gathered in reading order."""

from __future__ import annotations

from recheck.documents.runs import Runs
from recheck.documents.sections import unlabelled
from recheck.model import Passage, PassageKind, Table


class Assembly:
    """What was gathered so far, and where the reader stands: the section and the number of the paragraph.

    With `aside` set, everything that is added stands beside the article. `pictures` counts formulas
    that are images, `pictured_tables` names tables that are, `absent_tables` those of which only the caption is there.
    """

    def __init__(self) -> None:
        self.passages: list[Passage] = []
        self.tables: list[Table] = []
        self.section: str | None = None
        self.aside = False
        self.pictures = 0
        self.pictured_tables: list[str] = []
        self.absent_tables: list[str] = []
        self.unlabelled = 0
        self._paragraph = 0

    def add(self, runs: Runs, kind: PassageKind = "body", table: str | None = None) -> Passage | None:
        """Put a passage at the end; None where the text is empty."""
        text, marks = runs.finished()
        return self.add_text(text, marks, kind, table) if text else None

    def add_text(
        self, text: str, marks: str = "", kind: PassageKind = "body", table: str | None = None
    ) -> Passage:
        """Put a passage with its finished text at the end."""
        if self.aside:
            kind = "aside"
        if kind != "heading":
            self._paragraph += 1
        passage = Passage(text, kind, self.section, self._paragraph or None, None, marks, None, table)
        self.passages.append(passage)
        return passage

    def head(self, runs: Runs) -> None:
        """Put a heading at the end; what follows stands in its section."""
        self.head_text(*runs.finished())

    def head_text(self, text: str, marks: str) -> None:
        """Put a heading with its finished text at the end."""
        if text.strip():
            if not self.aside:
                self.section = " ".join(text.split())
            self.add_text(text, marks, "heading")

    def table_name(self, label: str) -> str:
        """The name under which the place of a cell is given: the label, or a number for a table without one."""
        if label:
            return label
        self.unlabelled += 1
        return unlabelled(self.unlabelled)

    def words(self) -> int:
        """The number of words in all passages and cells."""
        texts = [passage.text for passage in self.passages]
        for table in self.tables:
            texts += [cell.passage.text for cell in table.cells]
        return "".join(texts).count(" ") + len(texts) - texts.count("")

    def notes(self) -> tuple[str, ...]:
        """What a reader should know of that was left out."""
        found = []
        if self.pictures:
            found.append(
                f"{_are(self.pictures, 'formula', 'an image', 'images')} and {_was(self.pictures)} not read."
            )
        if self.pictured_tables:
            count = len(self.pictured_tables)
            found.append(
                f"{_are(count, 'table', 'an image', 'images')} and {_was(count)} not read: {_named(self.pictured_tables)}."
            )
        if self.absent_tables:
            found.append(f"The file holds the caption but not the cells of {_named(self.absent_tables)}.")
        return tuple(found)


def _are(count: int, what: str, one: str, many: str) -> str:
    return f"1 {what} is {one}" if count == 1 else f"{count} {what}s are {many}"


def _was(count: int) -> str:
    return "was" if count == 1 else "were"


def _named(names: list[str]) -> str:
    shown = list(dict.fromkeys(names))
    return ", ".join(shown[:12]) + (", …" if len(shown) > 12 else "")
