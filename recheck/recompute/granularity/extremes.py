"""Least and greatest sum of squares of whole numbers with a given sum."""

from __future__ import annotations

from collections import Counter
from typing import TypeAlias

Sample: TypeAlias = Counter[int]
"""How often each whole number occurs."""


def evenest(count: int, total: int) -> Sample:
    """The `count` whole numbers of that sum that are as equal as can be: their sum of squares is least.

    If two differ by 2 or more, moving one step from the larger to the smaller lowers the sum of squares.
    """
    each, more = divmod(total, count)
    return +Counter({each: count - more, each + 1: more})


def widest(count: int, total: int, low: int, high: int) -> Sample:
    """The `count` whole numbers on [low, high] of that sum with the greatest sum of squares.

    All but one stand at an end: of two that do not, moving one step outward each raises it.
    """
    if low == high:
        return Counter({low: count})
    at_top, rest = divmod(total - count * low, high - low)
    between = Counter({low + rest: 1}) if rest else Counter[int]()
    return +(Counter({low: count - at_top - bool(rest), high: at_top}) + between)


def least_squares(count: int, total: int) -> int:
    """Sum of squares of the `evenest` numbers."""
    each, more = divmod(total, count)
    return count * each * each + more * (2 * each + 1)


def greatest_squares(count: int, total: int, low: int, high: int) -> int:
    """Sum of squares of the `widest` numbers."""
    if low == high:
        return count * low * low
    at_top, rest = divmod(total - count * low, high - low)
    squares = at_top * high * high + (count - at_top) * low * low
    return squares + (2 * low * rest + rest * rest if rest else 0)


def sum_of_squares(sample: Sample) -> int:
    """Sum of the squares of a sample."""
    return sum(times * value * value for value, times in sample.items())
