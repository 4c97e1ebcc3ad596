"""Scores that are whole numbers, or averages of so many: the grid they lie on, and what printed figures say of their sums."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from math import ceil, floor
from typing import Literal, TypeAlias

Number: TypeAlias = int | float | Decimal | Fraction
Ends: TypeAlias = tuple[Number, Number]
"""Lowest and highest true value that a printed number can stand for, both included."""
Spread: TypeAlias = Literal["sd", "sd of all", "se", "se of all"]
"""An SD with n - 1 or, "of all", with n in its denominator; an SE is that SD over the root of n."""


def exact(value: Number) -> Fraction:
    """Give a number as a fraction; a float is the shortest decimal that reads back as it (5.185, not 5.18499…)."""
    return Fraction(repr(float(value))) if isinstance(value, float) else Fraction(value)


@dataclass(frozen=True, slots=True)
class Scores:
    """`n` scores from `low` to `high` (None: no limit), each a whole number divided by `items`.

    One answer a person: `items` 1. A mean of several answers on the same scale: their number. Shares
    of 0 and 1: low 0, high 1. Differences of two scores from a to b: low a - b, high b - a.
    Raises ValueError for no scores, no items, or a scale without a score on it.
    """

    n: int
    low: Number | None = None
    high: Number | None = None
    items: int = 1

    def __post_init__(self) -> None:
        if self.n < 1 or self.items < 1:
            raise ValueError(f"n and items must be 1 or more (got n = {self.n}, items = {self.items})")
        first, last = self.grid
        if first is not None and last is not None and first > last:
            raise ValueError(f"the scale from {self.low} to {self.high} holds no score of {self.items} items")

    @property
    def grid(self) -> tuple[int | None, int | None]:
        """Lowest and highest score times `items`, whole numbers."""
        first = None if self.low is None else ceil(exact(self.low) * self.items)
        last = None if self.high is None else floor(exact(self.high) * self.items)
        return first, last

    def score(self, steps: int) -> Fraction:
        """The score that is so many steps of 1/items."""
        return Fraction(steps, self.items)

    def sums(self, mean: Ends) -> range:
        """All sums of scores times items whose mean lies in `mean`; every whole sum on the scale is reached."""
        first, last = self.grid
        per_mean = self.n * self.items
        low, high = ceil(exact(mean[0]) * per_mean), floor(exact(mean[1]) * per_mean)
        if first is not None:
            low = max(low, self.n * first)
        if last is not None:
            high = min(high, self.n * last)
        return range(low, high + 1)

    def factor(self, spread: Spread) -> int:
        """What the squared spread is multiplied by to give the sum of squared deviations."""
        return {
            "sd": self.n - 1, "sd of all": self.n, "se": self.n * (self.n - 1), "se of all": self.n**2,
        }[spread]  # fmt: skip

    def squares(self, total: int, spread: Ends, kind: Spread) -> range:
        """The sums of squares (in steps) that go with a sum and a spread: whole, of the parity of the sum.

        A whole number and its square are both even or both odd, and so are their sums (Anaya 2016).
        """
        to_steps = self.factor(kind) * self.items**2
        middle = Fraction(total * total, self.n)
        low = ceil(max(exact(spread[0]), Fraction(0)) ** 2 * to_steps + middle)
        high = floor(exact(spread[1]) ** 2 * to_steps + middle) if spread[1] >= 0 else low - 1
        return range(low + (low - total) % 2, high + 1, 2)


def outward(values: range, middle: Fraction) -> Iterator[int]:
    """Give the members of a range, those nearest to `middle` first."""
    if not values:
        return
    right = min(max(ceil(middle), values.start), values.stop - 1)
    left = right - 1
    while left >= values.start or right < values.stop:
        if right >= values.stop or (left >= values.start and middle - left < right - middle):
            yield left
            left -= 1
        else:
            yield right
            right += 1
