"""Numbers of a row that belong together: neighbouring cells of one group, and rows that print parts of one thing."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import Literal

from recheck.model import Printed
from recheck.reading.tables.blocks import COEFFICIENTS, COMPARISONS
from recheck.reading.tables.cells import TESTS, Cell, named_cell
from recheck.reading.tables.frame import Frame
from recheck.reading.tables.sizes import measured_again

Family = Literal["summary", "people", "estimate", ""]

_SUMMARY = frozenset(("mean", "median", "sd", "se", "q1", "q3", "iqr", "min", "max", "mode"))
_PEOPLE = frozenset(("count", "percent", "total"))


@dataclass(frozen=True, slots=True)
class Unit:
    """Cells of one group in one row (or in several) that tell of the same thing, with all their numbers."""

    cells: tuple[Cell, ...]
    family: Family
    group: str
    values: Mapping[str, Printed]
    rows: tuple[int, ...]
    columns: tuple[int, ...]

    @property
    def spans(self) -> dict[tuple[int, int], tuple[int, int]]:
        """The characters that each of its cells' values take."""
        found: dict[tuple[int, int], tuple[int, int]] = {}
        for cell in self.cells:
            start, end = found.get((cell.row, cell.column), (cell.piece.start, cell.piece.end))
            found[cell.row, cell.column] = (min(start, cell.piece.start), max(end, cell.piece.end))
        return found

    @property
    def sure(self) -> bool:
        """Whether headings or the legend name all its numbers."""
        return all(cell.source != "shape" for cell in self.cells)


def _unit(opened: _Open) -> Unit:
    cells = tuple(opened.cells)
    values = {name: value for cell in cells for name, value in cell.values.items()}
    rows, columns = {cell.row for cell in cells}, {cell.column for cell in cells}
    return Unit(cells, opened.family, opened.group, values, tuple(sorted(rows)), tuple(sorted(columns)))


def family_of(values: Mapping[str, Printed]) -> Family:
    """What kind of thing numbers tell of; "" for an n, an interval or a p alone."""
    names = set(values)
    if names & (COMPARISONS | COEFFICIENTS):
        return "estimate"
    if names & _PEOPLE:
        return "people"
    if names & (_SUMMARY - {"se"}):
        return "summary"
    return ""


@dataclass(slots=True)
class _Open:
    cells: list[Cell] = field(default_factory=list)
    family: Family = ""
    group: str = ""

    def takes(self, cell: Cell, family: Family, group: str) -> bool:
        """Whether a cell belongs to the unit."""
        held = {name for c in self.cells for name in c.values}
        if held & set(cell.values):
            return False
        if self.group and group and self.group != group:
            return False
        if "p" in cell.values:
            return self.family == "estimate" and len(cell.values) <= 2
        if family and self.family and family != self.family:
            return False
        if not family and set(cell.values) <= {"n", "N"} and self.family == "people" and "count" in held:
            return False
        return not (
            group
            and not self.group
            and self.family
            and self.cells[-1].column != cell.column
            and family != ""
            and self.family == family
        )

    def add(self, cell: Cell, family: Family, group: str) -> None:
        self.cells.append(cell)
        self.family = self.family or family
        self.group = self.group or group


def units_of(frame: Frame, rows: Sequence[int]) -> list[Unit]:
    """The units of a row, or of rows that print the parts of one thing one below the other (`Mean`, `SD`)."""
    return _with_n_of_row(frame, list(_runs(frame, rows)))


def _with_n_of_row(frame: Frame, units: list[Unit]) -> list[Unit]:
    """Give the n that a column of no group prints for the whole row to all summaries of that row.

    Two groups share it only where they are the same units measured again; else it is the sum of theirs.
    """
    named = [unit for unit in units if unit.family == "summary"]
    sized = [unit for unit in units if {"n", "N"} & set(unit.values)]
    if len(named) < _SEVERAL or len(sized) != 1:
        return units
    name, value = next((name, value) for name, value in sized[0].values.items() if name in ("n", "N"))
    own = next(cell for cell in sized[0].cells if name in cell.values)
    if len(own.values) > 1 or frame.group(own.column).name:
        return units
    groups = {frame.group(unit.columns[-1]).name for unit in named}
    if len(groups) > 1 and not measured_again(groups) and not _paired(frame, own.row, value):
        return [replace(unit, values=_without(unit.values, name)) for unit in units]
    return [
        replace(unit, values={name: value, **unit.values}) if unit.family == "summary" else unit
        for unit in units
    ]


_SEVERAL = 2


def _without(values: Mapping[str, Printed], name: str) -> dict[str, Printed]:
    return {quantity: value for quantity, value in values.items() if quantity != name}


def _paired(frame: Frame, row: int, n: Printed) -> bool:
    """Whether the test of a row has the df of pairs: one less than the n printed for the row."""
    for column, role in frame.roles.items():
        own = frame.piece(row, column) if role.quantities == ("df",) else None
        degrees = own.numbers if own is not None else role.df
        if len(degrees) == 1 and degrees[0].value == n.value - 1:
            return True
    return False


def _runs(frame: Frame, rows: Sequence[int]) -> Iterator[Unit]:
    current = _Open()
    for column in frame.sheet.columns:
        for row in rows:
            if _from_above(frame, row, column):
                continue
            for piece in frame.pieces(row, column):
                cell = named_cell(frame, row, column, piece)
                if cell is None or (set(cell.values) <= TESTS and not (set(cell.values) <= {"p", "stars"})):
                    continue
                family, group = family_of(cell.values), frame.group(column).name
                if not current.cells or not current.takes(cell, family, group):
                    if current.cells:
                        yield _unit(current)
                    current = _Open()
                    if "p" in cell.values:
                        continue
                current.add(cell, family, group)
    if current.cells:
        yield _unit(current)


def _from_above(frame: Frame, row: int, column: int) -> bool:
    """Whether a cell reaches down from a row above, where it has been read."""
    slot = frame.sheet.slot(row, column)
    return slot is not None and slot.cell.row < row and slot.cell.row in frame.sheet.rows


def bands_of(frame: Frame) -> Iterator[tuple[int, ...]]:
    """The rows of a block; those that print parts of one variable (`Mean`, `SD` below each other) together."""
    band: list[int] = []
    for row in frame.sheet.rows:
        if frame.sheet.is_subheading(row) or row in frame.size_rows:
            continue
        if band and not _goes_on(frame, band, row):
            yield tuple(band)
            band = []
        band.append(row)
    if band:
        yield tuple(band)


_PARTS = frozenset(("mean", "sd", "se", "n", "N", "median", "q1", "q3", "min", "max", "count", "percent"))


def _goes_on(frame: Frame, band: Sequence[int], row: int) -> bool:
    """Whether a row prints a further part of what the rows before it are about."""
    if row != band[-1] + 1:
        return False
    before, here = frame.labels(band[-1]), frame.labels(row)
    if not before or not here or not before[-1].whole or not here[-1].whole:
        return False
    if frame.sheet.row_header(row).path[:-1] != frame.sheet.row_header(band[-1]).path[:-1]:
        return False
    told = [set(frame.labels(r)[-1].quantities) for r in band]
    mine = set(here[-1].quantities)
    return mine <= _PARTS and all(t <= _PARTS and not t & mine for t in told)
