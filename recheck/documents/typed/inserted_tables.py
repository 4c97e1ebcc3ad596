"""Tables that are written in HTML within Markdown."""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Sequence
from typing import TYPE_CHECKING

import regex

from recheck.documents.grids import Spanned, depths
from recheck.documents.pieces import Grid
from recheck.documents.typed.cells import cell_text, hard_indent
from recheck.model import Passage

if TYPE_CHECKING:
    from lxml import etree

_BEGINS = regex.compile(r"\s{0,3}<table[\s>]", regex.IGNORECASE)
_OPENS = regex.compile(r"<table[\s>]", regex.IGNORECASE)
_CLOSES = regex.compile(r"</table\s*>", regex.IGNORECASE)


class Inserted:
    """The tables in HTML among some lines; `first` is the number of the first of these, from 1."""

    def __init__(self, lines: Sequence[str], first: int) -> None:
        self._lines = lines
        self._first = first
        marked = [row for row, line in enumerate(lines) if "<" in line]
        self._opens = [row for row in marked if _OPENS.search(lines[row])]
        self._closes = [row for row in marked if _CLOSES.search(lines[row])]

    def at(self, at: int) -> tuple[Grid, int] | None:
        """The table that begins on line `at`, and the line after it; one within another is none."""
        opens = bisect_left(self._opens, at)
        if self._opens[opens : opens + 1] != [at] or not _BEGINS.match(self._lines[at]):
            return None
        closes = bisect_left(self._closes, at)
        end = next(iter(self._closes[closes : closes + 1]), None)
        inner = next(iter(self._opens[opens + 1 : opens + 2]), None)
        if end is None or (inner is not None and inner <= end):
            return None
        # Parsing markup is rare in Markdown, and importing its parser takes longer than reading most texts.
        from recheck.documents.markup.html import parsed_html

        root, _ = parsed_html("\n".join(self._lines[at : end + 1]).encode("utf-8", "replace"))
        table = None if root is None else next(root.iter("table"), None)
        grid = None if table is None else _grid(table, at + self._first - 1)
        return None if grid is None else (grid, end + 1)


def _grid(table: etree._Element, before: int) -> Grid | None:
    from recheck.documents.markup.html_tables import cells_of, rows_of, span

    rows: list[list[Spanned]] = []
    moved: list[int] = []
    heads = 0
    for row, part in rows_of(table):
        cells = cells_of(row)
        headings = [cell.tag == "th" for cell in cells]
        if heads == len(rows) and (part == "thead" or (cells and all(headings))):
            heads += 1
        rows.append(
            [
                Spanned(_passage(cell, before), span(cell, "rowspan"), span(cell, "colspan"), heading)
                for cell, heading in zip(cells, headings, strict=True)
            ]
        )
        moved.append(hard_indent(_inner(cells[0])) if cells else 0)
    if not rows or max(map(len, rows)) < 2:
        return None
    heads = heads if heads < len(rows) else 0
    known = depths(moved[heads:], step=0)
    for made, indent in list(zip(rows, moved, strict=True))[heads:]:
        made[:1] = [cell._replace(indent=known[indent]) for cell in made[:1]]
    caption = table.find("caption")
    said = "" if caption is None else cell_text(_inner(caption))[0]
    return Grid(tuple(map(tuple, rows)), heads, caption=said)


def _passage(cell: etree._Element, before: int) -> Passage:
    text, marks = cell_text(" ".join(_inner(cell).split()))
    line: int = getattr(cell, "sourceline", None) or 1
    return Passage(text, "table", line=before + line, marks=marks)


def _inner(element: etree._Element) -> str:
    """The markup within an element."""
    from lxml import etree

    parts = [etree.tostring(child, encoding="unicode", method="html") for child in element]
    return (element.text or "") + "".join(parts)
