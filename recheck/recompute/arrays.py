"""What the other modules share: array types, and arithmetic of intervals that has its ends at corners."""

from __future__ import annotations

from typing import TypeAlias

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats: TypeAlias = NDArray[np.float64]
Bounds: TypeAlias = tuple[Floats, Floats]
"""Lower and upper ends, each of the shape to which the arguments broadcast on which that end depends."""
HALF_ULP = 2.0**-53
"""Relative error of the double nearest to a decimal number, at most."""


def floats(*values: ArrayLike) -> tuple[Floats, ...]:
    """Give the arguments as float arrays of their own shapes (0-d for scalars)."""
    return tuple(np.asarray(value, dtype=np.float64) for value in values)


def together(*values: ArrayLike) -> tuple[Floats, ...]:
    """Give the arguments as float arrays broadcast to one shape (views: not to be written to)."""
    return tuple(np.broadcast_arrays(*floats(*values)))


def quotient(top: ArrayLike, bottom: ArrayLike) -> Floats:
    """Divide without complaint: x/0 is infinite, 0/0 is nan."""
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        return np.asarray(np.divide(top, bottom), dtype=np.float64)


def difference_bounds(low1: ArrayLike, high1: ArrayLike, low2: ArrayLike, high2: ArrayLike) -> Bounds:
    """Range of a - b over a box, outward by what the ends may have lost when they became doubles.

    Between large means that loss can exceed every relative guard. Equal doubles come from equal
    decimals (of up to 15 digits), so a difference of 0 stays 0.
    """
    low1, high1, low2, high2 = floats(low1, high1, low2, high2)
    low, high = low1 - high2, high1 - low2
    low = low - np.where(low == 0, 0.0, HALF_ULP * (np.abs(low1) + np.abs(high2)))
    high = high + np.where(high == 0, 0.0, HALF_ULP * (np.abs(high1) + np.abs(low2)))
    return np.asarray(low), np.asarray(high)


def spread_bounds(low: ArrayLike, high: ArrayLike) -> Bounds:
    """Cut an interval of SDs at 0: a printed 0.00 stands for nothing negative."""
    low, high = floats(low, high)
    return np.maximum(low, 0.0), np.maximum(high, 0.0)


def quotient_bounds(top_low: Floats, top_high: Floats, bottom_low: Floats, bottom_high: Floats) -> Bounds:
    """Range of a/b over a box with b >= 0: both ends are corners.

    a/b rises with a, and for fixed a moves towards 0 as b rises. So the upper end has the largest a,
    with the smallest b if that a is positive, else with the largest; the lower end mirrors it. A b
    that may be 0 gives an infinite end; nan where a and b can be nothing but 0.
    """
    high = quotient(top_high, np.where(top_high > 0, bottom_low, bottom_high))
    low = quotient(top_low, np.where(top_low < 0, bottom_low, bottom_high))
    return low, high


def where_known(bounds: Bounds, *ends: ArrayLike) -> Bounds:
    """The bounds, nan where an end of the box is nan: minima and maxima of corners may have passed it over."""
    unknown: NDArray[np.bool_] = np.zeros((), dtype=bool)
    for end in floats(*ends):
        unknown = unknown | np.isnan(end)
    if not np.any(unknown):
        return bounds
    return np.where(unknown, np.nan, bounds[0]), np.where(unknown, np.nan, bounds[1])


def absolute_bounds(low: ArrayLike, high: ArrayLike) -> Bounds:
    """Range of |x| where x runs from `low` to `high`."""
    low, high = floats(low, high)
    return np.maximum(np.maximum(low, -high), 0.0), np.asarray(np.maximum(-low, high))
