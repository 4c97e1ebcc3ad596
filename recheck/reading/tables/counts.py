"""Counts: people, loaves or answers in a category, with their share and the total that it is of."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from recheck.model import TOTAL_OF_GROUP, Printed
from recheck.reading.tables.frame import Found, Frame, claim_of
from recheck.reading.tables.summaries import group_size, names_of
from recheck.reading.tables.units import Unit
from recheck.reading.tables.values import Piece

_MEASURED = 3
"""Cells of a column from which it shows whether its shares are those of the group's n."""


def counts_of(frame: Frame, units: Sequence[Unit]) -> Iterator[Found]:
    """The counts among the units of a block."""
    people = [unit for unit in units if unit.family == "people"]
    refuted = frozenset(frame.sheet.columns) if _of_those_who_answered(frame) else _refuted(frame, people)
    for unit in people:
        values = {name: value for name, value in unit.values.items() if name in ("count", "percent", "total")}
        if "count" not in values and {"n", "N"} & set(unit.values) and "percent" in values:
            values["count"] = unit.values.get("n") or unit.values["N"]
        if "count" not in values:
            continue
        notes: tuple[str, ...] = ()
        column = unit.columns[0]
        total = group_size(frame, unit)
        if (
            "total" not in values
            and total is not None
            and column not in refuted
            and values["count"].value <= total.value
        ):
            values["total"], notes = total, (TOTAL_OF_GROUP,)
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


def _refuted(frame: Frame, units: Sequence[Unit]) -> frozenset[int]:
    """Columns whose shares are of something else than the group's n: of the row, or of those who answered.

    Honest tables print both kinds; a total that most cells contradict is no total.
    """
    fitting: dict[int, list[bool]] = {}
    for unit in units:
        values, total = unit.values, group_size(frame, unit)
        count = values.get("count") or values.get("n")
        percent = values.get("percent")
        if total is None or count is None or percent is None or "total" in values or total.value == 0:
            continue
        fitting.setdefault(unit.columns[0], []).append(_fits(count, percent, total))
    return frozenset(
        column
        for column, fits in fitting.items()
        if 2 * sum(fits) < len(fits) or (len(fits) < _MEASURED and not any(fits))
    )


def _of_those_who_answered(frame: Frame) -> bool:
    """Whether the legend says that shares leave out missing answers, whose number is not printed."""
    text = frame.legend.text
    return any(
        words in text
        for words in (
            "non-missing",
            "nonmissing",
            "valid response",
            "valid percent",
            "available data",
            "missing data excluded",
            "excluding missing",
        )
    )


def _fits(count: Printed, percent: Printed, total: Printed) -> bool:
    return abs(100 * count.value / total.value - percent.value) <= percent.unit
