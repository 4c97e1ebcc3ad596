"""The text of a page as a browser sets it: blocks one after another, inline elements within them."""

from __future__ import annotations

from collections.abc import Callable

from lxml import etree

from recheck.documents.markup.assembly import Assembly
from recheck.documents.markup.html_math import add_drawn, add_tex, is_drawn, is_picture, is_tex
from recheck.documents.markup.html_tables import (
    DraftCell,
    DraftTable,
    cells_of,
    is_layout,
    rows_of,
    span,
    trimmed,
)
from recheck.documents.markup.mathml import add_math
from recheck.documents.markup.names import LOCAL, whole_text
from recheck.documents.markup.shown import BLOCK, MARGINS, NEVER, is_furniture, is_hidden, mark_of, part_of
from recheck.documents.markup.stubs import moved_in
from recheck.documents.runs import BASE, LOWERED, RAISED, Runs
from recheck.documents.sections import captioned, closes_references, is_named_section, opens_references
from recheck.model import PassageKind

DEEPEST = 100
"""Elements within elements that are followed; what lies deeper is read as bare text."""

_PLAIN = frozenset(
    ("a", "em", "i", "b", "strong", "u", "small", "cite", "abbr", "code", "q", "var", "mark", "font")
)
"""Elements that change nothing but the looks of their text."""

_LOWEST = 7
_LONGEST_NAME = 60
"""Characters of a paragraph that may be the name of a section and nothing else: "Abstract", "Methods"."""

_BYLINE = frozenset(("author", "authors", "date", "affiliation", "institute", "byline"))
_HEADINGS = {"h1": 1, "h2": 2, "h3": 3, "h4": 4, "h5": 5, "h6": 6}
_ALWAYS = 9
"""The level of a list of references that its container ends, not the next heading."""


class Flow:
    """Walks through a page; passages go to the assembly, tables wait in `drafts`."""

    def __init__(self, assembly: Assembly, whole: int) -> None:
        self.assembly = assembly
        self.drafts: list[DraftTable] = []
        self._captions: dict[etree._Element, int] = {}
        self._whole = whole
        self._runs = Runs()
        self._kind: PassageKind = "body"
        self._in_cell = False
        self._references = 0
        self._held = ("", "")

    def run(self, element: etree._Element) -> None:
        """Put down everything that an element holds."""
        self._fill(element, BASE, 0)
        self._end()
        self._put_held()

    def _fill(self, element: etree._Element, mark: str, depth: int) -> None:
        if depth > DEEPEST:
            self._runs.add(whole_text(element), mark)
            return
        text = element.text
        if text:
            self._say(text, mark)
        for child in element:
            if child.tag not in _PLAIN:
                self._add(child, mark, depth)
            elif not (child.attrib and is_hidden(child)):
                if len(child):
                    self._fill(child, mark, depth + 1)
                elif child.text:
                    self._runs.add(child.text, mark)
            text = child.tail
            if text:
                self._say(text, mark)

    def _say(self, text: str, mark: str) -> None:
        """Append text; white space between blocks begins no paragraph."""
        runs = self._runs
        if runs.parts or not text.isspace():
            runs.add(text, mark)

    def _add(self, child: etree._Element, mark: str, depth: int) -> None:
        name = LOCAL[child.tag]
        if name in NEVER:
            if name == "script" and is_tex(child):
                add_tex(child.text or "", self._runs, mark)
            return
        if child.attrib and is_hidden(child):
            return
        way = _WAYS.get(name)
        if way is not None:
            way(self, child, mark, depth + 1)
        elif name in BLOCK:
            self._block(child, depth + 1)
        else:
            self._inline(child, mark, depth + 1)

    def _end(self) -> None:
        """End a block: a passage in the flow, a line in a cell."""
        if self._in_cell:
            self._runs.line_break()
            return
        if not self._runs.parts:
            return
        text, marks = self._runs.finished()
        self._runs = Runs()
        if text and self._held[0]:
            text, marks = self._with_held(text, marks)
        if text and self._kind == "body" and len(text) < _LONGEST_NAME and is_named_section(text):
            self._open_section(text, marks, _LOWEST)
        elif text:
            kind = self._kind
            if kind == "body" and self._references:
                kind = "references"
            self.assembly.add_text(text, marks, kind)

    def _block(self, child: etree._Element, depth: int) -> None:
        """Put down a block: ordinary text, or one of the parts that its class or role names."""
        self._end()
        if self._in_cell:
            self._fill(child, BASE, depth)
            self._end()
            return
        if not child.attrib and child.tag not in MARGINS:
            self._fill(child, BASE, depth)
            self._end()
        elif (part := part_of(child)) == "table note":
            self._note_of_table(child, depth)
        elif part == "entry":
            self._entry(child, depth)
        else:
            self._part(child, part, depth)

    def _part(self, child: etree._Element, part: str, depth: int) -> None:
        """Put down a block in the kind that it has; what follows it has the kind of before."""
        outer, kind, references = self.assembly.aside, self._kind, self._references
        if not outer and not part and is_furniture(child, self._whole):
            self.assembly.aside = True
        if part == "notes":
            self._kind, self._references = "note", 0
        elif part == "references":
            self._references = self._references or _ALWAYS
        self._fill(child, BASE, depth)
        self._end()
        self.assembly.aside, self._kind = outer, kind
        if self._references == _ALWAYS or references:
            self._references = references

    def _entry(self, child: etree._Element, depth: int) -> None:
        """Put down one entry of a list of references, number and text as one passage."""
        text, marks = self._cell_runs(child, depth).finished()
        if text:
            self.assembly.add_text(text.replace("\n", " "), marks, "references")

    def _note_of_table(self, child: etree._Element, depth: int) -> None:
        """Put down notes that the page itself puts below the last table."""
        first, kind = len(self.assembly.passages), self._kind
        self._kind = "note"
        self._fill(child, BASE, depth)
        self._end()
        self._kind = kind
        if self.drafts and not self._in_cell:
            self.drafts[-1].notes += range(first, len(self.assembly.passages))

    def _inline(self, child: etree._Element, mark: str, depth: int) -> None:
        if not child.attrib:
            self._fill(child, mark, depth)
            return
        split = (child.get("class") or "").split()
        if "math" in split and not len(child):
            add_tex(child.text or "", self._runs, mark)
        elif is_drawn(split):
            self._drawn(child, mark, depth)
        else:
            self._fill(child, mark_of(child.get("style")) or mark, depth)

    def _math(self, child: etree._Element, mark: str, depth: int) -> None:
        add_math(child, self._runs, mark)

    def _drawn(self, child: etree._Element, mark: str, depth: int) -> None:
        if not add_drawn(child, self._runs, mark):
            self.assembly.pictures += 1

    def _picture(self, child: etree._Element, mark: str, depth: int) -> None:
        self.assembly.pictures += is_picture(child)

    def _raised(self, child: etree._Element, mark: str, depth: int) -> None:
        self._fill(child, RAISED, depth)

    def _lowered(self, child: etree._Element, mark: str, depth: int) -> None:
        self._fill(child, LOWERED, depth)

    def _break(self, child: etree._Element, mark: str, depth: int) -> None:
        """Begin a line; a second break after the first ends the paragraph."""
        if not self._in_cell and self._runs.ends_line():
            self._end()
        else:
            self._runs.line_break()

    def _term(self, child: etree._Element, mark: str, depth: int) -> None:
        """Hold a term, or the mark of a note, for the text that explains it."""
        self._end()
        if self._in_cell:
            self._block(child, depth)
            return
        self._put_held()
        self._held = self._cell_runs(child, depth).finished()

    def _with_held(self, text: str, marks: str) -> tuple[str, str]:
        runs, held = Runs(), self._held
        self._held = ("", "")
        for piece in (held, (" ", ""), (text, marks)):
            runs.add_marked(*piece)
        return runs.finished()

    def _put_held(self) -> None:
        if self._held[0]:
            self._runs.add_marked(*self._held)
            self._held = ("", "")
            self._end()

    def _source(self, child: etree._Element, mark: str, depth: int) -> None:
        """A formula that the page gives as TeX for a script to set."""
        add_tex(whole_text(child), self._runs, mark)

    def _heading(self, child: etree._Element, mark: str, depth: int) -> None:
        self._end()
        if self._in_cell:
            self._block(child, depth)
            return
        self._fill(child, BASE, depth)
        runs, self._runs = self._runs, Runs()
        text, marks = runs.finished()
        names = child.get("class")
        if captioned(text):
            self.assembly.add_text(text, marks, "caption")
        elif names is not None and not _BYLINE.isdisjoint(names.split()):
            self.assembly.add_text(text, marks)
        else:
            self._open_section(text, marks, _HEADINGS[LOCAL[child.tag]])

    def _open_section(self, text: str, marks: str, level: int) -> None:
        self.assembly.head_text(text, marks)
        section = self.assembly.section or ""
        if opens_references(section):
            self._references = level
        elif level <= self._references or closes_references(section):
            self._references = 0

    def _code(self, child: etree._Element, mark: str, depth: int) -> None:
        """Programs and their output stand beside the text."""
        if self._in_cell:
            self._block(child, depth)
            return
        self._end()
        text = whole_text(child).strip("\n")
        if text.strip():
            self.assembly.add_text(text, kind="aside")

    def _caption(self, child: etree._Element, mark: str, depth: int) -> None:
        """Put down the caption of a figure, or of the only table that stands in it."""
        self._end()
        if self._in_cell:
            self._block(child, depth)
            return
        at = self._put_caption(child, depth)
        figure = child.getparent()
        tables = list(figure.iter("table")) if figure is not None else []
        if len(tables) == 1 and at is not None:
            self._captions[tables[0]] = at
            if self.drafts and self.drafts[-1].element is tables[0] and self.drafts[-1].caption is None:
                self.drafts[-1].caption = at

    def _put_caption(self, child: etree._Element, depth: int) -> int | None:
        """Put down a caption as one passage; gives its number."""
        text, marks = self._cell_runs(child, depth).finished()
        if not text.strip():
            return None
        self.assembly.add_text(text.replace("\n", " "), marks, "caption")
        return len(self.assembly.passages) - 1

    def _table(self, child: etree._Element, mark: str, depth: int) -> None:
        self._end()
        found = [(cells_of(row), part) for row, part in rows_of(child)]
        if self._in_cell or is_layout(child, [cells for cells, _ in found]):
            self._block(child, depth)
            return
        caption = self._own_caption(child, depth)
        rows, header_rows, notes = self._rows(found, depth)
        if caption is None and header_rows > 1 and len(rows[0]) == 1:
            # A title that spans the head is no heading of columns.
            caption = len(self.assembly.passages)
            self.assembly.add_text(rows[0][0].text.replace("\n", " "), rows[0][0].marks, "caption")
            rows, header_rows = rows[1:], header_rows - 1
        draft = DraftTable(
            trimmed(rows),
            header_rows,
            self.assembly.section,
            len(self.assembly.passages),
            caption,
            element=child,
        )
        for text, marks in notes:
            draft.notes.append(len(self.assembly.passages))
            self.assembly.add_text(text, marks, "note")
        if any(cell.text for row in rows for cell in row) and not self.assembly.aside:
            self.drafts.append(draft)

    def _own_caption(self, table: etree._Element, depth: int) -> int | None:
        for part in table:
            if LOCAL[part.tag] == "caption" and not is_hidden(part):
                return self._put_caption(part, depth)
        return self._captions.get(table)

    def _rows(
        self, found: list[tuple[list[etree._Element], str]], depth: int
    ) -> tuple[list[list[DraftCell]], int, list[tuple[str, str]]]:
        """Rows, the number of head rows, and the notes that stand in the table's foot."""
        rows: list[list[DraftCell]] = []
        notes: list[tuple[str, str]] = []
        head = 0
        for elements, part in found:
            cells = [self._cell(cell, part == "thead", at == 0, depth) for at, cell in enumerate(elements)]
            if part == "tfoot":
                filled = [cell for cell in cells if cell.text]
                if len(filled) == 1 and (len(cells) == 1 or filled[0].column_span > 1):
                    notes.append((filled[0].text, filled[0].marks))
                    continue
            if not cells:
                continue
            if len(rows) == head and (part == "thead" or (len(cells) > 1 and all(c.heading for c in cells))):
                head += 1
            rows.append(cells)
        return rows, head, notes

    def _cell(self, cell: etree._Element, head: bool, first: bool, depth: int) -> DraftCell:
        if len(cell):
            runs = self._cell_runs(cell, depth)
            text, marks = runs.finished()
            blank = runs.leading() if first else ""
        else:
            blank = cell.text or ""
            text, marks = " ".join(blank.split()), ""
        moved = moved_in(cell, blank) if first and text and not head else 0
        return DraftCell(
            text, marks, span(cell, "rowspan"), span(cell, "colspan"), head or LOCAL[cell.tag] == "th", moved
        )

    def _cell_runs(self, cell: etree._Element, depth: int) -> Runs:
        outer, self._runs = self._runs, Runs()
        inside, self._in_cell = self._in_cell, True
        self._fill(cell, BASE, depth)
        runs, self._runs, self._in_cell = self._runs, outer, inside
        return runs


_Way = Callable[[Flow, etree._Element, str, int], None]
_WAYS: dict[str, _Way] = {
    "sup": Flow._raised, "sub": Flow._lowered, "br": Flow._break, "math": Flow._math, "mjx-container": Flow._drawn,
    "img": Flow._picture, "dt": Flow._term, **dict.fromkeys(("d-math", "dt-math", "tex-math", "math-tex"), Flow._source), "pre": Flow._code, "figcaption": Flow._caption, "table": Flow._table,
    **dict.fromkeys(_HEADINGS, Flow._heading),
}  # fmt: skip
