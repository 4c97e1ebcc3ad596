"""Counts: people, loaves or answers in a category, with their share and the total that it is of."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from recheck.model import TOTAL_OF_GROUP
from recheck.reading.tables.frame import Found, Frame, claim_of
from recheck.reading.tables.summaries import names_of
from recheck.reading.tables.totals import count_of, is_total, totals_of
from recheck.reading.tables.units import Unit
from recheck.reading.tables.values import Piece


def counts_of(frame: Frame, units: Sequence[Unit]) -> Iterator[Found]:
    """The counts among the units of a block."""
    people = [unit for unit in units if unit.family == "people"]
    totals = totals_of(frame, people)
    for at, unit in enumerate(people):
        values = {name: value for name, value in unit.values.items() if name in ("count", "percent", "total")}
        count = count_of(unit.values)
        if count is None or is_total(frame, unit) or ("count" not in values and "percent" not in values):
            continue
        values["count"] = count
        notes: tuple[str, ...] = ()
        if "total" not in values and at in totals:
            values["total"], notes = totals[at], (TOTAL_OF_GROUP,)
        if "percent" not in values and "total" not in values:
            continue
        outcome, group = names_of(frame, unit)
        yield claim_of(
            frame, "count", values, unit.rows[0], unit.columns, rows=unit.rows, outcome=outcome, group=group,
            stated=[word for cell in unit.cells for word in cell.stated], notes=notes, sure=unit.sure, spans=unit.spans,
        )  # fmt: skip


def whole_numbers(frame: Frame, found: Sequence[Found]) -> Iterator[Found]:
    """Counts that are printed alone: rows of one variable whose whole numbers add up to the n of every group.

    Nothing else in the table says that they are counts, so the sums have to be exact in at least two groups.
    """
    taken = {cell for item in found for cell in item.cells}
    columns = [c for c in frame.sheet.columns if c in frame.sizes and c not in frame.roles]
    if len(columns) < _GROUPS:
        return
    for rows in _variables(frame):
        cells = {
            (row, c): piece
            for row in rows
            for c in columns
            if (piece := frame.piece(row, c)) and (row, c) not in taken
        }
        if len(cells) != len(rows) * len(columns) or not all(_counted(piece) for piece in cells.values()):
            continue
        sums = {c: sum(cells[row, c].numbers[0].value for row in rows) for c in columns}
        if all(sums[c] == frame.sizes[c].value for c in columns):
            for (row, column), piece in cells.items():
                values = {"count": piece.numbers[0], "total": frame.sizes[column]}
                yield claim_of(
                    frame,
                    "count",
                    values,
                    row,
                    (column,),
                    outcome=frame.row_name(row, column),
                    group=frame.group(column).name,
                    notes=(TOTAL_OF_GROUP,),
                )


_GROUPS = 2


def _counted(piece: Piece) -> bool:
    return (
        piece.shape == "number"
        and piece.numbers[0].decimals == 0
        and not piece.numbers[0].percent
        and piece.numbers[0].value >= 0
    )


def _variables(frame: Frame) -> Iterator[tuple[int, ...]]:
    """Neighbouring rows that stand under the same sub-heading or outer name."""
    rows: list[int] = []
    for row in frame.sheet.rows:
        outer = frame.sheet.row_header(row).path[:-1]
        if rows and outer != frame.sheet.row_header(rows[-1]).path[:-1]:
            if len(rows) > 1:
                yield tuple(rows)
            rows = []
        if outer and not frame.sheet.is_subheading(row):
            rows.append(row)
    if len(rows) > 1:
        yield tuple(rows)
