"""Percentages of counts, and the counts that a printed percentage can be: exact, in whole numbers."""

from __future__ import annotations

from typing import TypeAlias

import numpy as np
from numpy.typing import ArrayLike, NDArray

from recheck.recompute.arrays import Floats, floats, quotient

Integers: TypeAlias = NDArray[np.int64]


def percent_of(count: ArrayLike, total: ArrayLike) -> Floats:
    """Percentage 100 count / total; nan of nothing at all. By definition."""
    count, total = floats(count, total)
    return quotient(100 * count, total)


def counts_of_percent(
    units: ArrayLike, decimals: ArrayLike, total: ArrayLike, *, cut: bool = False
) -> tuple[Integers, Integers]:
    """First and last count out of `total` whose percentage is printed as `units` of its last digit.

    12.5 is 125 units of 1 decimal. A percentage x is printed so where |x - printed| is at most half a unit (half
    up or half to even: a tie goes either way); with `cut` also where digits were cut off, x < printed + 1 unit.
    The first lies above the last where no count will do. Whole numbers throughout, so nothing is lost at ties;
    exact up to 200 total 10^decimals = 2^63. By definition; the counts between the two all do.
    """
    units, decimals, total = (np.asarray(value, dtype=np.int64) for value in (units, decimals, total))
    whole = 200 * 10**decimals
    first = np.maximum(-((-(2 * units - 1) * total) // whole), 0)
    last = (2 * units + 1) * total // whole
    if cut:
        last = np.maximum(last, -((-(2 * units + 2) * total) // whole) - 1)
    return np.asarray(first), np.asarray(np.minimum(last, total))


def total_that_allows(
    units: ArrayLike, decimals: ArrayLike, total: ArrayLike, *, cut: bool = False
) -> NDArray[np.bool_]:
    """Tell whether some count out of `total` is printed as this percentage; arguments as for `counts_of_percent`."""
    first, last = counts_of_percent(units, decimals, total, cut=cut)
    return np.asarray(first <= last)
