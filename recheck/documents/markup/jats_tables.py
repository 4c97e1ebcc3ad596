"""Tables of JATS: `table-wrap` with its label, caption, grid and notes."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import islice

from lxml import etree

from recheck.documents.grids import Spanned, depths, table_of
from recheck.documents.markup.assembly import Assembly
from recheck.documents.markup.jats_text import BLOCKS, Inline
from recheck.documents.markup.names import LOCAL, pieces
from recheck.documents.markup.stubs import LEAST_STEP, moved_in
from recheck.documents.runs import Runs
from recheck.model import Passage

_SKIPPED = frozenset((
    "label", "caption", "table", "object-id", "alternatives", "graphic", "permissions", "alt-text", "long-desc", "array", "tgroup",
    "table-wrap", "fig", "media", "supplementary-material",
))  # fmt: skip
_FEET = frozenset(("table-wrap-foot", "fn-group", "notes", "list"))
_GRIDS = ("table", "array")


def add_table(wrap: etree._Element, assembly: Assembly, group: etree._Element | None = None) -> None:
    """Put the caption, the tables and the notes of a `table-wrap` at the end; a bare `table` has neither.

    A wrap in a `group` has the group's label, caption and notes as well as its own.
    """
    inline = Inline(assembly)
    bare = LOCAL[wrap.tag] in _GRIDS
    parts = [] if bare else list(wrap) if group is None else [*group, *wrap]
    label, caption = _caption(parts, inline)
    grids = [wrap] if bare else list(_grids(wrap))
    name = assembly.table_name(label) if grids or caption else label
    passage = assembly.add(caption, "caption", name) if caption else None
    before = len(assembly.passages)
    bodies = [_rows(grid, name, inline) for grid in grids]
    notes = tuple(_notes([*parts, *inline.floats], name, inline))
    for rows, header_rows in bodies:
        if rows and not assembly.aside:
            table = table_of(
                rows, label=label, caption=passage, notes=notes, header_rows=header_rows, section=assembly.section, before=before,
            )  # fmt: skip
            assembly.tables.append(table)
    if not grids and not assembly.aside and any(LOCAL[e.tag] == "graphic" for e in wrap.iter()):
        assembly.pictured_tables.append(label or "one without a label")


def _caption(parts: Sequence[etree._Element], inline: Inline) -> tuple[str, Runs | None]:
    """The label as printed, and label and caption as one text."""
    runs, label = Runs(), Runs()
    for part in parts:
        if LOCAL[part.tag] == "label":
            inline.fill(part, label)
            label.add(" ")
        elif LOCAL[part.tag] == "caption":
            inline.fill(part, runs)
            runs.add(" ")
    return captioned_text(label, runs)


def captioned_text(label: Runs, caption: Runs) -> tuple[str, Runs | None]:
    """A label without its final stop, and the whole of a caption: `Table 1. Heights of loaves`."""
    named = label.finished()[0]
    short = named.rstrip(".: ")
    text, marks = caption.finished()
    if not named and not text:
        return "", None
    whole = Runs()
    if named:
        whole.add(named if named[-1] in ".:" or not text else named + ".")
        whole.add(" ")
    whole.add_marked(text, marks)
    return short, whole


def _grids(wrap: etree._Element) -> Iterator[etree._Element]:
    """The tables of a wrap, outermost only."""
    for child in wrap:
        name = LOCAL[child.tag]
        if name in _GRIDS:
            yield child
        elif name in ("alternatives", "p"):
            yield from _grids(child)


def _rows(grid: etree._Element, name: str, inline: Inline) -> tuple[list[list[Spanned]], int]:
    """The rows of a table, and how many of them are its head."""
    rows: list[list[Spanned]] = []
    header_rows = 0
    columns: dict[str, int] = {}
    for part in _parts(grid):
        kind = LOCAL[part.tag]
        if kind == "tr":
            rows.append(_row(part, name, inline, head=False))
        elif kind == "colspec":
            columns[part.get("colname") or ""] = len(columns)
        elif kind in ("thead", "tbody", "tfoot"):
            head = kind == "thead"
            found = [
                _row(row, name, inline, head=head) if LOCAL[row.tag] == "tr" else _entries(row, name, inline, columns, head=head)
                for row in part
                if LOCAL[row.tag] in ("tr", "row")
            ]  # fmt: skip
            header_rows += len(found) * (head and len(rows) == header_rows)
            rows += found
    return _indented(rows), header_rows


def _parts(grid: etree._Element) -> Iterator[etree._Element]:
    """The parts of a table, those of a group of columns (CALS) among them."""
    for part in grid:
        if LOCAL[part.tag] == "tgroup":
            yield from part
        else:
            yield part


def _entries(
    row: etree._Element, name: str, inline: Inline, columns: dict[str, int], *, head: bool
) -> list[Spanned]:
    """A row of the exchange table model (CALS), whose entries span named columns and further rows."""
    found = []
    for cell in row:
        if LOCAL[cell.tag] != "entry":
            continue
        first, last = columns.get(cell.get("namest") or ""), columns.get(cell.get("nameend") or "")
        width = last - first + 1 if first is not None and last is not None else 1
        text, marks = _cell_text(cell, inline)
        passage = Passage(text, "table", inline.assembly.section, None, None, marks, None, name)
        found.append(Spanned(passage, 1 + _span(cell.get("morerows") or "0"), max(width, 1), head))
    return found


def _indented(rows: list[list[Spanned]]) -> list[list[Spanned]]:
    """Rows whose first cells say how deep they stand instead of how far they are moved in."""
    if not any(row and row[0].indent for row in rows):
        return rows
    ranks = depths((row[0].indent for row in rows if row), step=LEAST_STEP)
    return [[row[0]._replace(indent=ranks[row[0].indent]), *row[1:]] if row else row for row in rows]


def _row(row: etree._Element, name: str, inline: Inline, *, head: bool) -> list[Spanned]:
    found = []
    section = inline.assembly.section
    for cell in row:
        kind = LOCAL[cell.tag]
        if kind != "td" and kind != "th":
            continue
        if len(cell):
            text, marks = _cell_text(cell, inline)
        else:
            text, marks = cell.text or "", ""
            if not text.isascii() or " " in text or "\n" in text:
                text = " ".join(text.split())
        # Most cells span nothing, and saying so takes no work.
        down, right = cell.get("rowspan"), cell.get("colspan")
        found.append(
            Spanned(
                Passage(text, "table", section, None, None, marks, None, name),
                1 if down is None or down == "1" else _span(down),
                1 if right is None or right == "1" else _span(right),
                head or kind == "th",
            )
        )
    if found and not head and (width := moved_in(row[0], "".join(islice(pieces(row[0]), 2)))):
        found[0] = found[0]._replace(indent=width)
    return found


def _span(text: str) -> int:
    return int(text) if text.strip().isdecimal() and len(text) < 6 else 1


def _cell_text(cell: etree._Element, inline: Inline) -> tuple[str, str]:
    runs = Runs()
    _fill_cell(cell, runs, inline)
    return runs.finished()


def _fill_cell(cell: etree._Element, runs: Runs, inline: Inline) -> None:
    """Paragraphs and rules of a cell divide its lines."""
    runs.add(cell.text or "")
    for child in cell:
        name = LOCAL[child.tag]
        if name in BLOCKS:
            runs.line_break()
            inline.fill(child, runs)
            runs.line_break()
            runs.add(child.tail or "")
        elif name in ("table", "table-wrap"):
            runs.line_break()
            runs.add(" ".join(pieces(child)))
            runs.line_break()
            runs.add(child.tail or "")
        elif name == "hr":
            runs.line_break()
            runs.add(child.tail or "")
        else:
            inline.add(child, runs)


def _notes(parts: Sequence[etree._Element], name: str, inline: Inline) -> Iterator[Passage]:
    """The notes below a table, each footnote and each paragraph one passage."""
    for part in parts:
        kind = LOCAL[part.tag]
        if kind in _FEET:
            yield from _notes(list(part), name, inline)
        elif kind not in _SKIPPED:
            passage = inline.assembly.add(inline.note(part), "note", name)
            if passage is not None:
                yield passage
