"""Rows of a file that hold several rows of the reader: names and values on lines of one cell each."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace

from recheck.model import Cell, Layout, Passage, Table
from recheck.reading.tables.shapes import kind_of
from recheck.reading.tables.slots import slot_view


def unfolded(table: Table) -> Table:
    """The table with each such row as the rows that it shows: `Rye\\nWheat | 12 (40%)\\n18 (60%)` is two."""
    if not any("\n" in cell.text for cell in table.cells):
        return table
    rows: dict[int, list[Cell]] = {}
    for cell in table.cells:
        rows.setdefault(cell.row, []).append(cell)
    tall = {r for cell in table.cells if cell.row_span > 1 for r in range(cell.row, cell.row + cell.row_span)}
    added = 0
    cells: list[Cell] = []
    for row in range(table.rows):
        own = rows.get(row, [])
        lines = _lines_of_row(own) if row >= table.header_rows and row not in tall else 1
        for cell in own:
            cells += _split(cell, lines, added)
        added += lines - 1
    return (
        table
        if not added
        else replace(table, cells=tuple(sorted(cells, key=_place)), rows=table.rows + added)
    )


def _place(cell: Cell) -> tuple[int, int]:
    return cell.row, cell.column


def _lines_of_row(cells: Sequence[Cell]) -> int:
    """How many rows a row shows; 1 where its lines are those of wrapped text.

    The names have as many lines as the values, or one more that stands over them; each line of values is one.
    """
    names = [cell for cell in cells if cell.column == 0]
    count = len(_lines(names[0].passage)) if names else 0
    values = [_lines(cell.passage) for cell in cells if cell.column > 0 and cell.text.strip()]
    several = [lines for lines in values if len(lines) > 1]
    if count < _SEVERAL or not several or any(len(lines) not in (1, count, count - 1) for lines in values):
        return 1
    whole = all(_is_value(passage) for lines in several for passage in lines)
    return count if whole else 1


_SEVERAL = 2


def _is_value(passage: Passage) -> bool:
    text = slot_view(passage).text.strip()
    opens = text.startswith(("(", "[", "±", "-)"))
    return (
        kind_of(text) in ("number", "none")
        and not opens
        and text.count("(") == text.count(")")
        and not text.endswith(("±", "-", ","))
    )


def _split(cell: Cell, lines: int, added: int) -> Iterator[Cell]:
    """The cell on the rows that it shows; values with a line less than the names stand beside the later ones."""
    parts = _lines(cell.passage)
    if lines == 1 or len(parts) == 1:
        yield replace(cell, row=cell.row + added)
        return
    first = lines - len(parts)
    for index, passage in enumerate(parts):
        yield replace(cell, row=cell.row + added + first + index, passage=passage)


def _lines(passage: Passage) -> list[Passage]:
    """The lines of a cell, each with its own marks and its own place on the page."""
    found: list[Passage] = []
    start = 0
    for line in passage.text.split("\n"):
        end = start + len(line)
        if line.strip():
            layout = passage.layout
            found.append(
                replace(
                    passage, text=line, marks=passage.marks[start:end],
                    layout=None if layout is None else Layout(layout.pages[start:end], layout.boxes[start:end]),
                )
            )  # fmt: skip
        start = end + 1
    return found or [passage]
