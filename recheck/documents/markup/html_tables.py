"""Tables of a page: rows and cells as the markup gives them, before captions and notes are found."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from typing import NamedTuple

from lxml import etree

from recheck.documents.markup.names import LOCAL, whole_text
from recheck.documents.markup.shown import is_hidden

_NUMBER = re.compile(r"\s*\+?(\d{1,6})")
_CELLS = ("td", "th")
_LAYOUT_ROLES = frozenset(("presentation", "none"))
_LONG = 600
"""Characters of a cell beyond which a table with few cells holds the layout of a page."""


class DraftCell(NamedTuple):
    """One cell: text, marks, how far it reaches, whether it is a heading, how far it is moved in (hundredths of an em)."""

    text: str
    marks: str
    row_span: int
    column_span: int
    heading: bool
    moved: int = 0


@dataclass(slots=True)
class DraftTable:
    """A table that was met: its rows, the rows of its head, and the numbers of the passages about it."""

    rows: list[list[DraftCell]]
    header_rows: int
    section: str | None
    before: int
    caption: int | None = None
    notes: list[int] = field(default_factory=list)
    element: etree._Element | None = None


def rows_of(table: etree._Element) -> Iterator[tuple[etree._Element, str]]:
    """The rows of a table with the part in which each stands, as they are shown: foot rows last."""
    last: list[tuple[etree._Element, str]] = []
    for part in table:
        name = LOCAL[part.tag]
        if name == "tr":
            yield part, "tbody"
        elif name in ("thead", "tbody", "tfoot"):
            found = [(row, name) for row in part if LOCAL[row.tag] == "tr" and not is_hidden(row)]
            if name == "tfoot":
                last += found
            else:
                yield from found
    yield from last


def cells_of(row: etree._Element) -> list[etree._Element]:
    """The cells of a row that are shown."""
    return [cell for cell in row if cell.tag in _CELLS and not (cell.attrib and is_hidden(cell))]


def is_layout(table: etree._Element, rows: Sequence[Sequence[etree._Element]]) -> bool:
    """Tell whether a table only arranges a page: parts of text, other tables, or one cell with everything."""
    if table.get("role") in _LAYOUT_ROLES or next(table.iterdescendants("table"), None) is not None:
        return True
    for heading in table.iterdescendants("h1", "h2", "h3", "h4"):
        parent = heading.getparent()
        if parent is not None and len(whole_text(parent)) > _LONG:
            return True
    count = sum(map(len, rows))
    if count <= 1 or all(len(row) <= 1 for row in rows):
        return not any(LOCAL[cell.tag] == "th" for row in rows for cell in row) or count <= 1
    return count <= 6 and any(len(whole_text(cell)) > _LONG for row in rows for cell in row)


def span(cell: etree._Element, name: str) -> int:
    """How far a cell reaches; `colspan="100%"` is read as a browser reads it, and a row span of 0 kept."""
    text = cell.get(name)
    if text is None or text == "1":
        return 1
    match = _NUMBER.match(text)
    value = int(match[1]) if match else 1
    return value if name == "rowspan" else max(value, 1)


def trimmed(rows: list[list[DraftCell]]) -> list[list[DraftCell]]:
    """Rows whose only cell spans more columns than the table has, cut to its width."""
    if all(len(row) != 1 for row in rows):
        return rows
    width = max((sum(cell.column_span for cell in row) for row in rows if len(row) > 1), default=0)
    if not width:
        return rows
    return [
        [_narrowed(row[0], width)] if len(row) == 1 and row[0].column_span > width else row for row in rows
    ]


def _narrowed(cell: DraftCell, width: int) -> DraftCell:
    return cell._replace(column_span=width)
