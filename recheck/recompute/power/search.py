"""Looking for the n or the effect at which an increasing function reaches a target."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Floats, together

STEPS = 60
"""At most; some ten do, unless the function is a step."""
CLOSE = 2e-13
"""Relative width of an interval that counts as a point."""
MOST = 1e12


def root(rises: Callable[[Floats], Floats], target: ArrayLike, least: ArrayLike, most: ArrayLike) -> Floats:
    """The x between `least` and `most` (both > 0) at which `rises` reaches `target`.

    `rises` must be increasing and take arrays of the common shape of all arguments. x is doubled from `least` until
    the target is reached, so that `rises` is asked for nothing beyond twice the root. `least` where the
    target is reached there already; nan where it is not reached at `most`, or where the target is no number.
    """
    target, least, most = together(target, least, most)
    with np.errstate(all="ignore"):
        low, high, above = np.array(least), np.array(least), rises(least) - target
        begins, below = above >= 0, np.array(above)
        reached = np.array(begins)
        while not np.all(reached | (high >= most) | np.isnan(target)):
            low, below = np.where(reached, low, high), np.where(reached, below, above)
            high = np.where(reached, high, np.minimum(high * 2, most))
            above = np.where(reached, above, rises(high) - target)
            reached = reached | (above >= 0)
        found = _between(lambda x: rises(x) - target, low, high, below, above)
    return np.asarray(np.where(begins, least, np.where(reached, found, np.nan)))


def _between(
    function: Callable[[Floats], Floats], low: Floats, high: Floats, below: Floats, above: Floats
) -> Floats:
    """A zero between two ends of different sign, by inverse quadratic interpolation or, where that is no good, halving.

    Source: Chandrupatla (1997), Advances in Engineering Software 28:145-149.
    """
    x1, x2, f1, f2 = low, high, below, above
    part = np.full(low.shape, 0.5)
    for _ in range(STEPS):
        x = x1 + part * (x2 - x1)
        f = function(x)
        same = np.sign(f) == np.sign(f1)
        x3, f3 = np.where(same, x1, x2), np.where(same, f1, f2)
        x2, f2 = np.where(same, x2, x1), np.where(same, f2, f1)
        x1, f1 = x, f
        least = CLOSE * np.abs(x1) / np.abs(x2 - x1)
        if np.all((least > 0.5) | (f1 == 0) | ~np.isfinite(f1)):
            break
        part = np.clip(
            _interpolated(x1, x2, x3, f1, f2, f3), np.minimum(least, 0.5), np.maximum(1 - least, 0.5)
        )
    return np.asarray(np.where(np.abs(f1) <= np.abs(f2), x1, x2))


def _interpolated(x1: Floats, x2: Floats, x3: Floats, f1: Floats, f2: Floats, f3: Floats) -> Floats:
    """The part of the way from x1 to x2 at which a parabola through the three points says that the zero is."""
    along, up = (x1 - x2) / (x3 - x2), (f1 - f2) / (f3 - f2)
    good = (1 - np.sqrt(1 - along) < up) & (up < np.sqrt(along))
    curve = f1 / (f1 - f2) * f3 / (f3 - f2) - (x3 - x1) / (x2 - x1) * f1 / (f3 - f1) * f2 / (f2 - f3)
    return np.where(good & np.isfinite(curve), curve, 0.5)


def whole_from(rises: Callable[[Floats], Floats], target: ArrayLike, found: Floats) -> Floats:
    """The smallest whole number at which `rises` reaches `target`, from the real one that `root` found."""
    candidate = np.ceil(found * (1 - 1e-9))
    with np.errstate(all="ignore"):
        enough = rises(np.where(np.isnan(candidate), 1.0, candidate)) >= np.asarray(target) * (1 - 1e-12)
    return np.asarray(np.where(enough | np.isnan(candidate), candidate, candidate + 1))
