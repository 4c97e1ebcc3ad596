"""The range of a one-way F over one box in plain floats, some twenty times as quick as one call on arrays.

For a flagged F every misprint of every mean, SD and n is tried, one small box after the other. The
formulas and their proofs are those of `anova`, and the tests hold the two together.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from functools import lru_cache

from recheck.recompute.arrays import HALF_ULP

Ends = tuple[tuple[float, float], ...]
"""Low and high end of each group's mean or SD."""


def f_one_way_range(means: Ends, sds: Ends, ns: tuple[float, ...]) -> tuple[float, float]:
    """Ends of `anova.f_one_way_bounds` for one box; nan where no difference stands over no spread."""
    k, total = len(ns), sum(ns)
    least, most = ss_between_range(means, ns)
    narrow, broad = (
        sum((n - 1) * max(sd[end], 0.0) ** 2 for sd, n in zip(sds, ns, strict=True)) / (total - k)
        for end in (0, 1)
    )
    return _over(least / (k - 1), broad), _over(most / (k - 1), narrow)


def _over(top: float, bottom: float) -> float:
    if bottom:
        return top / bottom
    return math.inf if top else math.nan


@lru_cache(maxsize=16)
def ss_between_range(means: Ends, weights: tuple[float, ...]) -> tuple[float, float]:
    """Ends of `anova.ss_between_bounds` for one box; kept for the boxes that differ in their SDs alone."""
    origin = means[0][0]
    moved = []
    for low, high in means:
        lost = HALF_ULP * (abs(origin) + max(abs(low), abs(high)))
        lost = 0.0 if lost < 1e-9 * (high - low) else lost
        moved.append((low - origin - lost, high - origin + lost))
    return _least(tuple(moved), weights), _greatest(tuple(moved), weights)


def _about_mean(points: Sequence[float], weights: Sequence[float]) -> float:
    """Weighted sum of squares about the weighted mean."""
    centre = sum(w * x for w, x in zip(weights, points, strict=True)) / sum(weights)
    return sum(w * (x - centre) ** 2 for w, x in zip(weights, points, strict=True))


def _greatest(ends: Ends, weights: Sequence[float]) -> float:
    """The greatest value of all corners: sums of x and x² grow one group at a time, two ends each."""
    corners = [(0.0, 0.0)]
    for (low, high), w in zip(ends, weights, strict=True):
        by_low, by_high = (w * low, w * low * low), (w * high, w * high * high)
        corners = [(s + a, q + b) for s, q in corners for a, b in (by_low, by_high)]
    total = sum(weights)
    best = max(range(len(corners)), key=lambda i: corners[i][1] - corners[i][0] ** 2 / total)
    # The digits of that sum may have cancelled; those of the corner itself have not.
    last = len(ends) - 1
    return _about_mean([end[best >> (last - i) & 1] for i, end in enumerate(ends)], weights)


def _least(ends: Ends, weights: Sequence[float]) -> float:
    """The least value: every mean nearest to a centre c at which the pull of all of them vanishes."""
    if max(low for low, _ in ends) <= min(high for _, high in ends):
        return 0.0
    left, right = _around_centre(ends, weights)
    pull = weight = 0.0
    for (low, high), w in zip(ends, weights, strict=True):
        if high <= left or low >= right:
            pull += w * (high if high <= left else low)
            weight += w
    centre = pull / weight if weight else left
    return _about_mean([min(max(centre, low), high) for low, high in ends], weights)


def _around_centre(ends: Ends, weights: Sequence[float]) -> tuple[float, float]:
    """The neighbouring ends of intervals between which the pull vanishes; it grows with c, so by halving."""
    points = sorted(end for pair in ends for end in pair)
    first, last = 0, len(points) - 1
    while last - first > 1:
        middle = (first + last) // 2
        c, slope = points[middle], 0.0
        for (low, high), w in zip(ends, weights, strict=True):
            if c > high:
                slope += w * (c - high)
            elif c < low:
                slope += w * (c - low)
        if slope == 0:
            return c, c
        if slope < 0:
            first = middle
        else:
            last = middle
    return points[first], points[last]
