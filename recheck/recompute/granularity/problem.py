"""The question that both engines answer: so many whole numbers near 0, of this sum and one of these sums of squares."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass

from recheck.recompute.granularity.extremes import Sample


class TooLarge(Exception):
    """The answer would take more than the budget allows."""


@dataclass(frozen=True, slots=True)
class Problem:
    """Find `count` whole numbers from `low` (at most -1) to `high` (at least 1) with sum `total`.

    Their sum of squares must lie from `least` to `most`; both have the parity of `total`.
    """

    count: int
    total: int
    least: int
    most: int
    low: int
    high: int


def near_ones(count: int, total: int, least: int, most: int) -> Sample | None:
    """A sample of -1, 0 and 1 alone, if there is one.

    With `plus` ones and `minus` minus ones the sum is plus - minus and the sum of squares plus + minus: any
    number from |total| to `count` of the parity of the total.
    """
    squares = max(least, abs(total))
    if squares > min(most, count):
        return None
    plus, minus = (squares + total) // 2, (squares - total) // 2
    return +Counter({-1: minus, 0: count - squares, 1: plus})
