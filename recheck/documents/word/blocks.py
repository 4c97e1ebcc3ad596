"""The text of a Word document as paragraphs and grids in reading order."""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from recheck.documents.characters import plain_text
from recheck.documents.word.inline import Inline, Line, Paragraph, chosen, is_prompt
from recheck.documents.word.merging import Block, framed, grid_of, rows_of
from recheck.documents.word.numbering import Numbers
from recheck.documents.word.package import MC, Element, M, W
from recheck.documents.word.styles import Style

_HOLDERS = frozenset(W + name for name in ("sdtContent", "customXml", "ins", "moveTo", "smartTag"))
_DELETED_MARKS = (f"{W}pPr/{W}rPr/{W}del", f"{W}pPr/{W}rPr/{W}moveFrom")


class Blocks:
    """Reads the containers of a document: its body, cells, notes, text boxes.

    `notes` maps "footnote 2" to its element; a footnote comes after the paragraph or the table that refers to it.
    `unread` counts what was inserted from other files.
    """

    def __init__(self, styles: Mapping[str, Style], notes: Mapping[str, Element], numbers: Numbers) -> None:
        self.inline = Inline(styles, numbers)
        self.unread = 0
        self._notes = dict(notes)
        self._line: Line | None = None

    def of(self, container: Element, *, note: bool = False) -> Iterator[Block]:
        """Yield all that a container holds, text boxes and footnotes after what they hang on."""
        held, self._line = self._line, None
        yield from self._children(container, note=note)
        if self._line is not None:
            yield from self._finished(self._line, note=note)
        self._line = held

    def endnotes(self) -> Iterator[Block]:
        """Yield the notes that have not been yielded with what refers to them."""
        for key in list(self._notes):
            yield from self._note(key)

    def _children(self, container: Element, *, note: bool) -> Iterator[Block]:
        for child in container:
            tag = child.tag
            if tag == f"{W}p":
                yield from self._paragraph(child, note=note)
            elif tag == f"{W}tbl":
                yield from self._table(child, note=note)
            elif tag in _HOLDERS or (tag == f"{W}sdt" and not is_prompt(child)):
                yield from self._children(child, note=note)
            elif tag == f"{MC}AlternateContent":
                inner = chosen(child)
                yield from () if inner is None else self._children(inner, note=note)
            elif tag in (f"{M}oMath", f"{M}oMathPara"):
                yield from self._equation(child, note=note)
            elif tag == f"{W}altChunk":
                self.unread += 1

    def _paragraph(self, element: Element, *, note: bool) -> Iterator[Block]:
        line = self.inline.begin(element, self._line)
        self.inline.read(element, line)
        if any(element.find(path) is not None for path in _DELETED_MARKS):
            # With its mark deleted a paragraph runs on into the next one, whose style it takes.
            self._line = line
            return
        self._line = None
        yield from self._finished(line, note=note)

    def _equation(self, element: Element, *, note: bool) -> Iterator[Block]:
        line = Line()
        self.inline.equation(element, line)
        yield from self._finished(line, note=note)

    def _finished(self, line: Line, *, note: bool) -> Iterator[Block]:
        text, marks = plain_text(*line.runs.finished())
        if text.strip() or line.before:
            marks = marks and " " * len(line.before) + marks
            text = line.before + text
            bold = line.letters > 0 and line.bold == line.letters
            yield Paragraph(text, marks, line.style, line.level, line.indent, bold, line.size, note)
        for box in line.boxes:
            yield from self.of(box, note=note)
        for key in line.notes:
            if key.startswith("footnote"):
                yield from self._note(key)

    def _note(self, key: str) -> Iterator[Block]:
        element = self._notes.pop(key, None)
        if element is not None:
            yield from self.of(element, note=True)

    def _table(self, element: Element, *, note: bool) -> Iterator[Block]:
        below: list[Block] = []

        def read(cell: Element) -> tuple[Block, ...]:
            blocks = tuple(self.of(cell, note=note))
            hung = [] if note else [b for b in blocks if isinstance(b, Paragraph) and b.note]
            below.extend(hung)
            return tuple(block for block in blocks if block not in hung)

        rows, header_rows = rows_of(element, read)
        if framed(rows):
            yield from (block for row in rows for cell in row for block in cell.blocks)
        else:
            yield from grid_of(rows, header_rows)
        yield from below


def numbered(root: Element | None, what: str) -> dict[str, Element]:
    """The notes of a part by kind and number, without the lines that separate them from the text."""
    found = {}
    for element in () if root is None else root.findall(f"{W}{what}"):
        if element.get(f"{W}type") in (None, "normal"):
            found[f"{what} {element.get(f'{W}id')}"] = element
    return found
