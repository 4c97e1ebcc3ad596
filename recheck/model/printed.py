"""A number as it is printed, and the interval of true values that it can stand for."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from decimal import Decimal
from typing import Literal

Relation = Literal["=", "<", ">", "≤", "≥", "≈"]
Box = tuple[float, float, float, float]
"""Left, top, right, bottom in points, from the top left corner of the page."""


@dataclass(frozen=True, slots=True)
class Interval:
    """All values from `low` to `high`, both ends included; an end may be infinite."""

    low: float
    high: float

    def holds(self, value: float) -> bool:
        """Tell whether `value` lies in the interval."""
        return self.low <= value <= self.high

    def meets(self, other: Interval) -> bool:
        """Tell whether the two intervals share a point."""
        return self.low <= other.high and other.low <= self.high

    def guarded(self, relative: float = 1e-9) -> Interval:
        """Widen outward by the relative error of a computed end, never by more."""
        low = self.low if math.isinf(self.low) else self.low - abs(self.low) * relative
        high = self.high if math.isinf(self.high) else self.high + abs(self.high) * relative
        return Interval(low, high)

    def within(self, low: float, high: float) -> Interval:
        """Cut both ends to the range that the quantity can have."""
        return Interval(min(max(self.low, low), high), min(max(self.high, low), high))

    def absolute(self) -> Interval:
        """Give the interval of the absolute values."""
        if self.low >= 0:
            return self
        if self.high <= 0:
            return Interval(-self.high, -self.low)
        return Interval(0.0, max(-self.low, self.high))

    def times(self, factor: float) -> Interval:
        """Give the interval of the values times a factor that is not negative."""
        return Interval(self.low * factor, self.high * factor)

    def minus(self, other: Interval) -> Interval:
        """Give the interval of all differences of a point of this one and a point of the other."""
        return Interval(self.low - other.high, self.high - other.low)

    def distance(self, other: Interval) -> float:
        """Give the width of the space between two intervals, 0 where they meet."""
        return max(0.0, other.low - self.high, self.low - other.high)


@dataclass(frozen=True, slots=True)
class Printed:
    """A number exactly as it stands in the manuscript.

    `text` is the printed text of the number alone; `value` its exact decimal value;
    `decimals` the place of its last printed digit (−2 for 1.2e3 × 10 units of a hundred).
    `box` and `page` say where it stands; they take no part in comparisons.
    """

    text: str
    value: Decimal
    decimals: int
    relation: Relation = "="
    percent: bool = False
    page: int | None = field(default=None, compare=False)
    box: Box | None = field(default=None, compare=False)

    @property
    def unit(self) -> Decimal:
        """One unit of the last printed digit."""
        return Decimal(1).scaleb(-self.decimals)

    @property
    def number(self) -> float:
        """The printed value as a float."""
        return float(self.value)

    def interval(self) -> Interval:
        """All true values that the printed number can stand for, rounded half up or half to even.

        Half a unit of the last digit each way; `<` and `>` are read as one-sided, ends included.
        """
        if self.relation in ("<", "≤"):
            return Interval(-math.inf, float(self.value))
        if self.relation in (">", "≥"):
            return Interval(float(self.value), math.inf)
        half = self.unit / 2
        return Interval(float(self.value - half), float(self.value + half))
