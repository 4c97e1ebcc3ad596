"""Rows of cells, as markup lists them, put into the grid that a reader sees."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import NamedTuple

from recheck.model import Cell, Passage, Table

MOST_PLACES = 200_000
"""Places of the largest grid that is built; spans in a file can ask for any number."""
_WIDEST = 1000


class Spanned(NamedTuple):
    """A cell as markup gives it: what it holds and how far it reaches; its place follows from its row."""

    passage: Passage
    row_span: int = 1
    column_span: int = 1
    heading: bool = False
    indent: int = 0


def table_of(
    rows: Sequence[Sequence[Spanned]],
    *,
    label: str = "",
    caption: Passage | None = None,
    notes: tuple[Passage, ...] = (),
    header_rows: int = 0,
    section: str | None = None,
    before: int = 0,
) -> Table:
    """Place each cell in the first free column of its row, as HTML does; spans end with the table.

    A row span of 0 reaches to the last row. Cells beyond the limits of the grid are left out, and the table says so.
    """
    cells, columns, whole = _placed(rows)
    return Table(
        cells, len(rows), columns, label=label, caption=caption, notes=notes, header_rows=header_rows,
        section=section, before=before, doubts=() if whole else ("the table is larger than recheck reads; the rest was left out",),
    )  # fmt: skip


def _placed(rows: Sequence[Sequence[Spanned]]) -> tuple[tuple[Cell, ...], int, bool]:
    taken: set[tuple[int, int]] = set()
    cells: list[Cell] = []
    columns, whole, places, last = 0, True, 0, len(rows)
    for row, given in enumerate(rows):
        column = 0
        for cell in given:
            while (row, column) in taken:
                column += 1
            height = 1 if cell.row_span == 1 else min(cell.row_span or last, last - row)
            width = 1 if cell.column_span == 1 else min(max(cell.column_span, 1), _WIDEST)
            places += height * width
            if places > MOST_PLACES:
                whole = False
                continue
            if height > 1:
                taken.update(
                    (row + down, column + right) for down in range(1, height) for right in range(width)
                )
            cells.append(Cell(cell.passage, row, column, height, width, cell.heading, cell.indent))
            column += width
            if column > columns:
                columns = column
    return tuple(cells), columns, whole


def depths(indents: Iterable[int], *, step: int) -> dict[int, int]:
    """Number indents from the outermost, 0; those that differ by no more than `step` are one depth."""
    found: dict[int, int] = {}
    last: int | None = None
    for indent in sorted(set(indents)):
        found[indent] = 0 if last is None else found[last] + (indent - last > step)
        last = indent
    return found
