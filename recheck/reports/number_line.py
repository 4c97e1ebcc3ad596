"""A number line in text: printed and implied intervals on one axis."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import product

from recheck.model import Interval
from recheck.model.figures import figure

PRINTED, IMPLIED, TRACK, MARK = "█", "░", "·", "│"
BEYOND_LEFT, BEYOND_RIGHT = "◄", "►"
NARROWEST_TRACK = 16
SPAN_FOR_LOGARITHM = 30.0
"""Largest over smallest value from which a p is drawn on a logarithmic axis."""

Bar = tuple[Interval, ...]
"""What one row shows: an interval, or several."""


@dataclass(frozen=True, slots=True)
class Drawing:
    """One track for each bar, the printed one first, and below them the axis and its values."""

    tracks: tuple[str, ...]
    axis: str
    values: str
    logarithmic: bool = False


@dataclass(frozen=True, slots=True)
class _Axis:
    """`low` and `high` are powers of ten where the axis is logarithmic."""

    low: float
    high: float
    columns: int
    logarithmic: bool

    def column(self, value: float) -> int:
        """Column of a value; −1 or `columns` where it lies beyond the axis."""
        if self.logarithmic:
            value = math.log10(value) if value > 0 else -math.inf
        if not self.low <= value <= self.high:
            return -1 if value < self.low else self.columns
        return min(math.floor((value - self.low) / (self.high - self.low) * self.columns), self.columns - 1)

    def cells(self, part: Interval) -> tuple[int, int]:
        """First and last column of an interval."""
        return self.column(part.low), self.column(part.high)


def number_line(
    printed: Bar, implied: Sequence[Bar], *, columns: int, alpha: float | None = None, decades: bool = False
) -> Drawing | None:
    """Draw the bars in so many columns; None where a gap between them could not be seen.

    `alpha` is marked in every row where it lies near; a bar that goes on beyond the axis ends in an
    arrow. `decades` allows a logarithmic axis, for values that span several powers of ten.
    """
    if columns < NARROWEST_TRACK or not implied:
        return None
    nearest = min(implied, key=lambda bar: min(a.distance(b) for a, b in product(printed, bar)))
    for shown in (implied, [nearest]):
        axis = _axis([printed, *shown], alpha, columns, decades)
        if axis and _gaps_are_seen(axis, printed, implied):
            return _drawing(axis, printed, implied, alpha)
    return None


def _axis(bars: Sequence[Bar], alpha: float | None, columns: int, decades: bool) -> _Axis | None:
    ends = [end for bar in bars for part in bar for end in (part.low, part.high) if math.isfinite(end)]
    if not ends:
        return None
    low, high = min(ends), max(ends)
    if alpha is not None and low - 2 * (high - low) <= alpha <= high + 2 * (high - low):
        ends.append(alpha)
        low, high = min(low, alpha), max(high, alpha)
    positive = [end for end in ends if end > 0]
    logarithmic = decades and low >= 0 and bool(positive) and high / SPAN_FOR_LOGARITHM > min(positive)
    if logarithmic:
        low, high = math.log10(min(positive)), math.log10(high)
    margin = 0.05 * (high - low) or 0.5 * abs(high) or 1.0
    return _Axis(low - margin, high + margin, columns, logarithmic)


def _gaps_are_seen(axis: _Axis, printed: Bar, implied: Sequence[Bar]) -> bool:
    """Tell whether intervals that do not meet share no column."""
    for one, other in product(printed, (part for bar in implied for part in bar)):
        (a, b), (c, d) = axis.cells(one), axis.cells(other)
        if not one.meets(other) and a <= d and c <= b:
            return False
    return True


def _drawing(axis: _Axis, printed: Bar, implied: Sequence[Bar], alpha: float | None) -> Drawing:
    mark = -1 if alpha is None else axis.column(alpha)
    tracks = [_track(axis, printed, PRINTED, mark), *(_track(axis, bar, IMPLIED, mark) for bar in implied)]
    line, values = _scale(axis, alpha if 0 <= mark < axis.columns else None)
    return Drawing(tuple(tracks), line, values, axis.logarithmic)


def _track(axis: _Axis, bar: Bar, sign: str, mark: int) -> str:
    cells = [MARK if column == mark else TRACK for column in range(axis.columns)]
    for part in bar:
        first, last = axis.cells(part)
        for column in range(max(first, 0), min(last, axis.columns - 1) + 1):
            cells[column] = sign
        if first < 0:
            cells[0] = BEYOND_LEFT
        if last >= axis.columns:
            cells[-1] = BEYOND_RIGHT
    return "".join(cells)


def _scale(axis: _Axis, alpha: float | None) -> tuple[str, str]:
    """The axis with its ticks, and the line of their values; alpha goes before the others."""
    line, values = ["─"] * axis.columns, [" "] * axis.columns
    named = [] if alpha is None else [(alpha, f"alpha {figure(alpha)}")]
    for value, name in [*named, *((tick, figure(tick)) for tick in _ticks(axis))]:
        column = axis.column(value)
        start = min(max(column - len(name) // 2, 0), axis.columns - len(name))
        around = values[max(start - 2, 0) : start + len(name) + 2]
        if 0 <= column < axis.columns and set(around) == {" "}:
            line[column] = "┴"
            values[start : start + len(name)] = name
    return "".join(line), "".join(values).rstrip()


def _ticks(axis: _Axis) -> list[float]:
    """Round values on the axis."""
    if not axis.logarithmic:
        return _round_values(axis.low, axis.high, axis.columns // 12)
    powers = range(math.floor(axis.low), math.ceil(axis.high) + 1)
    step = -(-len(powers) * 8 // axis.columns)
    between = [m * 10.0**k for k in powers for m in (2, 5)] if len(powers) <= 4 else []
    return [*(10.0**k for k in powers if k % step == 0), *between]


def _round_values(low: float, high: float, wanted: int) -> list[float]:
    rough = (high - low) / max(wanted, 2)
    power = 10.0 ** math.floor(math.log10(rough))
    step = next(step for step in (1.0, 2.0, 5.0, 10.0, 20.0) if step * power >= rough) * power
    return [float(f"{k * step:.12g}") for k in range(math.ceil(low / step), math.floor(high / step) + 1)]
