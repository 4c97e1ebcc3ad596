"""How the upper tail of F depends on its df, and its extrema along them.

**As df2 grows** (F and df1 fixed). Let G be the tail of chi-square(df1) / df1 and Y a gamma variable
of mean 1 and shape df2 / 2, so that p = E G(F Y). The density of Y is exp((ln y - y) df2 / 2) / y up
to a constant. Fold y at 1: each s = ln y - y below -1 has one y1 < 1 and one y2 > 1, and p is the mean,
over an exponential family in s with parameter df2 / 2, of w(s), the height above 1 of the chord of
G(F y) from y1 to y2. Such families diminish variation: p - c changes sign in df2 at most as often as
w - c does in s, and if as often, in the same order (Karlin 1968, Total Positivity, ch. 5). Let
h = -dG(F y)/dy and m its mean from y1 to y2. As ln y2 - ln y1 = y2 - y1, h(y2) = h(y1) exp(k (y2 - y1))
with k = df1 / 2 - 1 - F df1 / 2; and with q = ((y2 - 1) / (1 - y1))² the slope of w in s has the sign of
y2 (h(y2) - m) + q y1 (m - h(y1)). The logarithmic mean of y1 and y2 is 1, so y1 y2 < 1, so q y1 < y2.

1. k <= 0, that is F >= 1 - 2 / df1: p decreases with df2. For h has no valley, so m >= h(y2); where
   m <= h(y1) both terms are negative, where m > h(y1) >= h(y2) their sum is at most
   (m - h(y1)) (q y1 - y2) < 0.
2. k > 0: p decreases, and from some df2 on may increase. For fixed s the sign turns from - to + once as
   k grows (h enters linearly, with a measure that is negative below y2 and positive at y2). That the k
   at which it turns falls as s rises is not proved: the tests verify it on a grid of s and df1.

**As df1 grows**: 1 / F has df2, df1, so p increases where df2 <= 2 or F <= df2 / (df2 - 2), and elsewhere
increases and from some df1 on may decrease.

**As epsilon grows** (both df multiplied by it). z = df1 F / (df1 F + df2) has a beta distribution, an
exponential family in epsilon with s = df1 ln z + df2 ln(1 - z), which peaks at z0 = df1 / (df1 + df2),
where F = 1. Fold there: of each s, z2 > z0 has the share R(s) = (z0 - z1) / (z2 - z1). R rises with s where
z0 < 1/2: its slope has the sign of Q(z2) - Q(z1), Q(z) = z (1 - z) / (z - z0)², and of two z with equal Q
the upper has the lower s. R falls where z0 > 1/2. Now p is the mean, for F >= 1, of R as long as z2 is
beyond F, then 0; for F <= 1 of R as long as z1 is below F, then 1. Hence, again by diminishing variation:

3. F >= 1: p decreases with epsilon, or, where df2 > df1, may first increase.
4. F <= 1: p increases with epsilon, or, where df2 < df1, may first decrease.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from recheck.recompute.arrays import Floats
from recheck.recompute.tails import f_tail

GOLDEN = (5**0.5 - 1) / 2
STEPS = 42
"""Narrow the place of an extremum to 2e-9 of the interval, its value to about the square of that."""

Curve = Callable[..., Floats]


def least_over_df2(F: Floats, df1: Floats, low: Floats, high: Floats) -> Floats:
    """Least tail for df2 from `low` to `high`; arrays of one shape."""
    least = np.minimum(f_tail(F, df1, low), f_tail(F, df1, high))
    inside = (low < high) & (F + 2 / df1 < 1)
    return _mended(least, inside, lambda x, F, df1: f_tail(F, df1, x), low, high, F, df1, least=True)


def greatest_over_df1(F: Floats, low: Floats, high: Floats, df2: Floats) -> Floats:
    """Greatest tail for df1 from `low` to `high`; arrays of one shape."""
    greatest = np.maximum(f_tail(F, low, df2), f_tail(F, high, df2))
    inside = (low < high) & (F * (1 - 2 / df2) > 1)
    return _mended(greatest, inside, lambda x, F, df2: f_tail(F, x, df2), low, high, F, df2, least=False)


def least_over_epsilon(F: Floats, df1: Floats, df2: Floats) -> Floats:
    """Least tail when both df are multiplied by epsilon from 1 / df1 to 1; arrays of one shape."""
    low = np.minimum(1 / df1, 1.0)
    least = np.minimum(_corrected(low, F, df1, df2), f_tail(F, df1, df2))
    inside = (df1 > 1) & (F < 1) & (df2 < df1)
    return _mended(least, inside, _corrected, low, np.ones_like(low), F, df1, df2, least=True)


def greatest_over_epsilon(F: Floats, df1: Floats, df2: Floats) -> Floats:
    """Greatest tail when both df are multiplied by epsilon from 1 / df1 to 1; arrays of one shape."""
    low = np.minimum(1 / df1, 1.0)
    greatest = np.maximum(_corrected(low, F, df1, df2), f_tail(F, df1, df2))
    inside = (df1 > 1) & (F > 1) & (df2 > df1)
    return _mended(greatest, inside, _corrected, low, np.ones_like(low), F, df1, df2, least=False)


def _corrected(epsilon: Floats, F: Floats, df1: Floats, df2: Floats) -> Floats:
    return f_tail(F, epsilon * df1, epsilon * df2)


def _mended(
    ends: Floats,
    inside: NDArray[np.bool_],
    curve: Curve,
    low: Floats,
    high: Floats,
    *fixed: Floats,
    least: bool,
) -> Floats:
    """The better of the value at the ends and the extremum between them, where there may be one."""
    if not np.any(inside):
        return ends
    sign = 1.0 if least else -1.0
    others = [part[inside] for part in fixed]
    found = sign * valley_floor(lambda x: sign * curve(x, *others), low[inside], high[inside])
    mended = np.array(ends)
    mended[inside] = np.minimum(mended[inside], found) if least else np.maximum(mended[inside], found)
    return mended


def valley_floor(curve: Callable[[Floats], Floats], low: Floats, high: Floats) -> Floats:
    """Least value of a curve that falls and then rises, by golden section."""
    left, right = high - GOLDEN * (high - low), low + GOLDEN * (high - low)
    at_left, at_right = curve(left), curve(right)
    for _ in range(STEPS):
        lower = at_left < at_right
        low, high = np.where(lower, low, left), np.where(lower, right, high)
        new = np.where(lower, high - GOLDEN * (high - low), low + GOLDEN * (high - low))
        at_new = curve(new)
        left, right = np.where(lower, new, right), np.where(lower, left, new)
        at_left, at_right = np.where(lower, at_new, at_right), np.where(lower, at_left, at_new)
    return np.asarray(np.minimum(at_left, at_right))
