"""Confidence interval and p of the difference of two independent means, and their ranges over boxes.

Differences are group 1 minus group 2; SDs are sample SDs (n - 1); ns are exact, each at least 2. In a box
each mean and SD has a low and a high end and varies by itself; SDs are cut at 0.

**Welch's p and half width over a box of SDs.** Let v = sd²/n. Where group 1 has the share w of v1 + v2, df
depend on w alone and the SE on w and scale, so along a ray of constant w both p (by t = D / SE) and the half
width c(df) SE rise with the SE: the least ones lie on the two edges with a lowest SD, the greatest on the two
edges with a highest one. On an edge, say v2 fixed and x = v1/v2 growing, SE² = v2 (1 + x) and
df = (1 + x)² / (a x² + b), a = 1/(n1 - 1), b = 1/(n2 - 1).

- From x = b/a on, SE grows and df fall: both rise.
- Below, ln df grows and ln SE is convex in it, since d ln SE / d ln df = (a x² + b) / (4 (b - a x)) rises
  with x. The t with a given tail area is ln-convex too: ln t_p is convex in ln df. So ln t less
  ln t_p, with ln t = const - ln SE, is concave, and is positive, where p lies below its given
  value, on one stretch at most: p falls and then rises. The half width, ln c + ln SE, is convex
  in ln df: it too falls and then rises.

So the greatest values are at corners, and the least at a corner or at the one valley of an edge, which is
sought by golden section. That ln t_p is convex in ln df is not proved here: the tests verify it on a grid
from 1 to 10^6 df and for tail areas down to 1e-12.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np
from numpy.typing import ArrayLike, NDArray

from recheck.recompute.arrays import (
    Bounds,
    Floats,
    absolute_bounds,
    difference_bounds,
    floats,
    quotient,
    spread_bounds,
    together,
    where_known,
)
from recheck.recompute.f_shape import valley_floor
from recheck.recompute.tails import t_quantile, t_two_sided
from recheck.recompute.two_groups import pooled_se, satterthwaite_df, welch_se


def pooled_ci(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike,
    level: ArrayLike = 0.95,
) -> Bounds:  # fmt: skip
    """Interval of the mean difference with the pooled SE and n1 + n2 - 2 df; `level` from 0 to 1.

    Source: Altman, Machin, Bryant & Gardner (2000), Statistics with Confidence, ch. 4.
    """
    n1, n2, level = floats(n1, n2, level)
    half = t_quantile((1 - level) / 2, n1 + n2 - 2) * pooled_se(sd1, n1, sd2, n2)
    difference = np.subtract(mean1, mean2)
    return np.asarray(difference - half), np.asarray(difference + half)


def welch_ci(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike,
    level: ArrayLike = 0.95,
) -> Bounds:  # fmt: skip
    """Interval of the mean difference with Welch's SE and Satterthwaite's df; nan where both SDs are 0.

    Source: Welch (1938), Biometrika 29:350-362.
    """
    (level,) = floats(level)
    half = _half_width(*floats(sd1, sd2, n1, n2, (1 - level) / 2))
    difference = np.subtract(mean1, mean2)
    return np.asarray(difference - half), np.asarray(difference + half)


def pooled_ci_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike,
    level: ArrayLike = 0.95,
) -> tuple[Bounds, Bounds]:  # fmt: skip
    """Ranges of the lower and of the upper end of `pooled_ci`.

    Corners: difference and half width vary by themselves, and the half width rises with either SD.
    """
    (sd1_low, sd1_high), (sd2_low, sd2_high) = spread_bounds(sd1_low, sd1_high), spread_bounds(sd2_low, sd2_high)  # fmt: skip
    n1, n2, level = floats(n1, n2, level)
    c = t_quantile((1 - level) / 2, n1 + n2 - 2)
    half = c * pooled_se(sd1_low, n1, sd2_low, n2), c * pooled_se(sd1_high, n1, sd2_high, n2)
    return _ends(difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high), half)


def welch_ci_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike,
    level: ArrayLike = 0.95,
) -> tuple[Bounds, Bounds]:  # fmt: skip
    """Ranges of the lower and of the upper end of `welch_ci`.

    Difference and half width vary by themselves; the half width has its least value at a corner or in
    the valley of an edge, its greatest at a corner (see the module).
    """
    difference = difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high)
    (level,) = floats(level)
    *box, miss = _sd_box(sd1_low, sd1_high, n1, sd2_low, sd2_high, n2, (1 - level) / 2)
    half = _least(_half_width, box, miss), _greatest(_half_width, box, miss)
    return _ends(difference, where_known(half, *box))


def welch_p_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of Welch's two-sided p, of `t_welch` with its df, over a box of means and SDs.

    p falls with |D|: its least value has the greatest |D| and a point of an edge with a lowest SD,
    its greatest the least |D| and a corner (see the module). Where both SDs may be 0 the least p is 0.
    """
    near, far = absolute_bounds(*difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high))
    box = list(_sd_box(sd1_low, sd1_high, n1, sd2_low, sd2_high, n2))
    *box, near, far = together(*box, near, far)
    return where_known((_least(_p, box, far), _greatest(_p, box, near)), *box, near, far)


def _ends(difference: Bounds, half: Bounds) -> tuple[Bounds, Bounds]:
    """Ranges of difference ∓ half width, each with its own range."""
    (low, high), (narrow, broad) = difference, half
    return (
        (np.asarray(low - broad), np.asarray(high - narrow)),
        (np.asarray(low + narrow), np.asarray(high + broad)),
    )


def _sd_box(
    sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike, *others: ArrayLike,
) -> tuple[Floats, ...]:  # fmt: skip
    """Low and high SDs, cut at 0, and both ns, of one shape."""
    low1, high1 = spread_bounds(sd1_low, sd1_high)
    low2, high2 = spread_bounds(sd2_low, sd2_high)
    return together(low1, high1, low2, high2, n1, n2, *others)


Curve = Callable[..., Floats]


def _half_width(sd1: Floats, sd2: Floats, n1: Floats, n2: Floats, miss: Floats) -> Floats:
    return np.asarray(t_quantile(miss, satterthwaite_df(sd1, n1, sd2, n2)) * welch_se(sd1, n1, sd2, n2))


def _p(sd1: Floats, sd2: Floats, n1: Floats, n2: Floats, difference: Floats) -> Floats:
    t = quotient(difference, welch_se(sd1, n1, sd2, n2))
    return t_two_sided(t, satterthwaite_df(sd1, n1, sd2, n2))


def _greatest(curve: Curve, box: Sequence[Floats], other: Floats) -> Floats:
    """The greatest value, at one of the three corners with a highest SD; nan where both SDs are 0."""
    low1, high1, low2, high2, n1, n2 = box
    corners = ((low1, high2), (high1, high2), (high1, low2))
    return np.asarray(np.fmax.reduce([curve(sd1, sd2, n1, n2, other) for sd1, sd2 in corners]))


def _least(curve: Curve, box: Sequence[Floats], other: Floats) -> Floats:
    """The least value, at a corner with a lowest SD or in the valley of an edge; 0 where both SDs may be 0."""
    low1, high1, low2, high2, n1, n2 = box
    corners = ((low1, high2), (low1, low2), (high1, low2))
    least = np.array(np.fmin.reduce([curve(sd1, sd2, n1, n2, other) for sd1, sd2 in corners]))
    # Below x = b/a, that is v1 (n2 - 1) < v2 (n1 - 1), a growing SD of group 1 may lower the curve.
    inside = (low1 < high1) & (low1**2 * n2 * (n2 - 1) < low2**2 * n1 * (n1 - 1))
    _dig(least, inside, lambda x, sd2, *rest: curve(x, sd2, *rest), low1, high1, low2, n1, n2, other)
    inside = (low2 < high2) & (low2**2 * n1 * (n1 - 1) < low1**2 * n2 * (n2 - 1))
    _dig(least, inside, lambda x, sd1, *rest: curve(sd1, x, *rest), low2, high2, low1, n1, n2, other)
    return np.where((low1 == 0) & (low2 == 0), 0.0, least)


NEXT = 1e-6
"""A relative step from an end, to tell whether a curve that falls and then rises falls there."""


def _dig(
    least: Floats, inside: NDArray[np.bool_], curve: Curve, low: Floats, high: Floats, *fixed: Floats
) -> None:
    """Lower `least` to the valley floor of a curve from `low` to `high`, where there may be one."""
    if not np.any(inside):
        return
    step = NEXT * (high - low)
    inside = inside & (curve(low + step, *fixed) < curve(low, *fixed))
    inside = inside & (curve(high - step, *fixed) < curve(high, *fixed))
    if np.any(inside):
        others = [part[inside] for part in fixed]
        found = valley_floor(lambda x: curve(x, *others), low[inside], high[inside])
        least[inside] = np.minimum(least[inside], found)
