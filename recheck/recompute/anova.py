"""One-way analysis of variance from the groups' means, SDs and ns, and its range over boxes of means and SDs.

Groups lie along the last axis. SDs are sample SDs (n - 1); ns are exact, each at least 2. In a box each
mean and SD has a low and a high end and varies by itself; SDs are cut at 0.
"""

from __future__ import annotations

from functools import cache
from itertools import combinations, product

import numpy as np
from numpy.typing import ArrayLike, NDArray

from recheck.recompute.arrays import HALF_ULP, Bounds, Floats, quotient, spread_bounds, together

MOST_GROUPS = 12
"""Groups above which the corners of a box are too many to visit."""
CHUNK = 1 << 15
"""Numbers at a time, so that temporaries stay in the cache."""


def ss_between(means: ArrayLike, weights: ArrayLike) -> Floats:
    """Weighted sum of squares of means about their weighted mean, sum w (m - m̄)².

    Source: Fisher (1925), Statistical Methods for Research Workers.
    """
    means, weights = together(means, weights)
    means = means - means[..., :1]
    centre = np.sum(weights * means, axis=-1, keepdims=True) / np.sum(weights, axis=-1, keepdims=True)
    return np.asarray(np.sum(weights * (means - centre) ** 2, axis=-1))


def f_one_way(means: ArrayLike, sds: ArrayLike, ns: ArrayLike) -> Floats:
    """F of a one-way ANOVA with k - 1 and N - k df; infinite where all SDs are 0 and means differ.

    F = (sum n (m - m̄)² / (k - 1)) / (sum (n - 1) sd² / (N - k)). Source: Fisher (1925), Statistical
    Methods for Research Workers.
    """
    means, sds, ns = together(means, sds, ns)
    k, within = means.shape[-1], _within(sds, ns)
    return quotient(ss_between(means, ns) / (k - 1), within)


def f_welch(means: ArrayLike, sds: ArrayLike, ns: ArrayLike) -> tuple[Floats, Floats]:
    """Welch's F for unequal variances and its second df (the first is k - 1).

    With w = n / sd², L = sum (1 - w / sum w)² / (n - 1): F = (sum w (m - m̄_w)² / (k - 1)) /
    (1 + 2 (k - 2) L / (k² - 1)), df2 = (k² - 1) / (3 L); nan where an SD is 0. Source: Welch (1951), Biometrika 38:330-336.
    """
    means, sds, ns = together(means, sds, ns)
    k, weights = means.shape[-1], quotient(ns, sds**2)
    loss = _loss(weights / np.sum(weights, axis=-1, keepdims=True), ns)
    F = ss_between(means, weights) / (k - 1) / (1 + 2 * (k - 2) * loss / (k**2 - 1))
    return np.asarray(F), quotient(k**2 - 1, 3 * loss)


def f_brown_forsythe(means: ArrayLike, sds: ArrayLike, ns: ArrayLike) -> tuple[Floats, Floats]:
    """F* for unequal variances, sum n (m - m̄)² / sum (1 - n/N) sd², and its second df.

    df2 = 1 / sum (c² / (n - 1)), c the share of a group in the denominator. Source: Brown & Forsythe
    (1974), Technometrics 16:129-132.
    """
    means, sds, ns = together(means, sds, ns)
    parts = (1 - ns / np.sum(ns, axis=-1, keepdims=True)) * sds**2
    whole = np.sum(parts, axis=-1)
    shares = quotient(parts, whole[..., None])
    return quotient(ss_between(means, ns), whole), quotient(1.0, np.sum(shares**2 / (ns - 1), axis=-1))


def ss_between_bounds(low: ArrayLike, high: ArrayLike, weights: ArrayLike) -> Bounds:
    """Range of `ss_between` over a box of means, both ends attained.

    As the minimum over c of sum w (m - c)² it is convex in the means (a minimum over some arguments of
    a jointly convex function), so its maximum is at a corner of the box: all 2^k are visited, k up to
    `MOST_GROUPS`. Its minimum over the box is the minimum over c of h(c) = sum w dist(c, [low, high])²,
    each mean being the point of its interval nearest to c. h is convex with a slope that is linear
    between neighbouring ends of intervals. Between the last end at which the slope is not positive and
    the first at which it is not negative the intervals below c (high ends) and above c (low ends) are
    known, and the slope vanishes at the weighted mean of those ends; where no interval lies to one side
    of c there is none to the other, all meet, and the minimum is 0. Ends are widened by what they may
    have lost when they became doubles. Raises ValueError for more than `MOST_GROUPS` groups.
    """
    low, high, weights = together(low, high, weights)
    k = low.shape[-1]
    if k > MOST_GROUPS:
        raise ValueError(f"at most {MOST_GROUPS} groups (got {k})")
    origin = low[..., :1]
    lost = HALF_ULP * (np.abs(origin) + np.maximum(np.abs(low), np.abs(high)))
    lost = np.where(lost < 1e-9 * (high - low), 0.0, lost)
    low, high = low - origin - lost, high - origin + lost
    return _least_ss(low, high, weights), _most_ss(low, high, weights)


def _most_ss(low: Floats, high: Floats, weights: Floats) -> Floats:
    """The greatest weighted sum of squares at a corner of each box; see `ss_between_bounds`.

    With W the sum of weights it is the sum of w_i w_j / W (m_i - m_j)² over pairs, each of which takes one
    of four values at a corner: no difference is lost in a larger sum.
    """
    k = low.shape[-1]
    pairs = list(combinations(range(k), 2))
    rows = [np.ascontiguousarray(np.reshape(part, (-1, k)).T) for part in (low, high, weights)]
    most = np.zeros(rows[0].shape[1])
    step = max(1, CHUNK // 2**k)
    for start in range(0, len(most) if pairs else 0, step):
        a, b, w = (part[:, start : start + step] for part in rows)
        share = w / np.sum(w, axis=0)
        terms = np.stack([
            w[i] * share[j] * (x[i] - y[j]) ** 2 for i, j in pairs for x in (a, b) for y in (a, b)
        ])  # fmt: skip
        most[start : start + step] = np.max(_corners(k) @ terms, axis=0)
    return most.reshape(low.shape[:-1])


@cache
def _corners(k: int) -> Floats:
    """Which of the four values each pair of groups takes at each corner of a box, as zeros and ones."""
    upper: NDArray[np.bool_] = np.array(list(product((False, True), repeat=k)), dtype=np.bool_)
    columns = [
        (upper[:, i] == x) & (upper[:, j] == y)
        for i, j in combinations(range(k), 2) for x in (False, True) for y in (False, True)
    ]  # fmt: skip
    return np.stack(columns, axis=1).astype(np.float64)


def _least_ss(low: Floats, high: Floats, weights: Floats) -> Floats:
    """The least weighted sum of squares of means within their intervals; see `ss_between_bounds`."""
    means = nearest_to_their_mean(low, high, weights)
    meet = np.max(low, axis=-1) <= np.min(high, axis=-1)
    return np.where(meet, 0.0, ss_between(means, weights))


def nearest_to_their_mean(low: Floats, high: Floats, weights: Floats) -> Floats:
    """The point of each interval that is nearest to the weighted mean c of these very points.

    It solves sum w (nearest - c) = 0, whose left side falls with c and is linear between the ends of
    intervals: see `ss_between_bounds`. Intervals lie along the last axis.
    """
    k = low.shape[-1]
    # Groups lie along the first axis here, where sums are quick; rows go by chunks that stay in the cache.
    rows = [np.ascontiguousarray(np.reshape(part, (-1, k)).T) for part in (low, high, weights)]
    found: Floats = np.empty(rows[0].shape)
    step = max(1, CHUNK // (2 * k * k))
    for start in range(0, found.shape[1], step):
        part = slice(start, start + step)
        found[:, part] = _nearest(*(row[:, part] for row in rows))
    return np.asarray(found.T.reshape(low.shape))


def _nearest(low: Floats, high: Floats, weights: Floats) -> Floats:
    ends = np.concatenate([low, high])
    gaps = ends - np.minimum(np.maximum(ends, low[:, None]), high[:, None])
    gaps *= weights[:, None]
    slope = np.sum(gaps, axis=0)
    left = np.max(np.where(slope <= 0, ends, -np.inf), axis=0)
    right = np.min(np.where(slope >= 0, ends, np.inf), axis=0)
    below, above = high <= left, low >= right
    pull = np.where(below | above, weights, 0.0)
    fixed = np.where(below, high, np.where(above, low, 0.0))
    centre = quotient(np.sum(pull * fixed, axis=0), np.sum(pull, axis=0))
    return np.clip(np.where(np.isnan(centre), left, centre), low, high)


def f_one_way_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, sd_low: ArrayLike, sd_high: ArrayLike, ns: ArrayLike
) -> Bounds:
    """Range of `f_one_way` over a box of means and SDs.

    The numerator depends on the means alone, the denominator rises with each SD: the least F has the
    least sum of squares between groups and the largest SDs, the greatest F the opposite.
    """
    mean_low, mean_high, sd_low, sd_high, ns = together(mean_low, mean_high, sd_low, sd_high, ns)
    sd_low, sd_high = spread_bounds(sd_low, sd_high)
    k = mean_low.shape[-1]
    least, most = ss_between_bounds(mean_low, mean_high, ns)
    return quotient(least / (k - 1), _within(sd_high, ns)), quotient(most / (k - 1), _within(sd_low, ns))


def f_brown_forsythe_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, sd_low: ArrayLike, sd_high: ArrayLike, ns: ArrayLike
) -> Bounds:
    """Range of F* over a box of means and SDs, with ends as in `f_one_way_bounds`."""
    mean_low, mean_high, sd_low, sd_high, ns = together(mean_low, mean_high, sd_low, sd_high, ns)
    sd_low, sd_high = spread_bounds(sd_low, sd_high)
    rest = 1 - ns / np.sum(ns, axis=-1, keepdims=True)
    least, most = ss_between_bounds(mean_low, mean_high, ns)
    narrow, broad = np.sum(rest * sd_low**2, axis=-1), np.sum(rest * sd_high**2, axis=-1)
    return quotient(least, broad), quotient(most, narrow)


def f_welch_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, sd_low: ArrayLike, sd_high: ArrayLike, ns: ArrayLike
) -> tuple[Bounds, Bounds]:
    """Certified enclosures of Welch's F and of its df2 over a box of means and SDs; not attained.

    sum w (m - m̄_w)² rises with each weight (it is a minimum over c of sums that do), so it lies
    between its least value at the smallest weights and its greatest at the largest. A share
    w / sum w is largest beside the smallest other weights, so each (1 - share)² has its ends there;
    their sum, the loss L, is enclosed term by term.
    """
    mean_low, mean_high, sd_low, sd_high, ns = together(mean_low, mean_high, sd_low, sd_high, ns)
    sd_low, sd_high = spread_bounds(sd_low, sd_high)
    k, light, heavy = mean_low.shape[-1], quotient(ns, sd_high**2), quotient(ns, sd_low**2)
    least = ss_between_bounds(mean_low, mean_high, light)[0]
    endless = np.isinf(heavy)
    most = ss_between_bounds(mean_low, mean_high, np.where(endless, 1.0, heavy))[1]
    most = np.where(np.any(endless, axis=-1), np.inf, most)
    others_light = np.sum(light, axis=-1, keepdims=True) - light
    with np.errstate(invalid="ignore"):
        others_heavy = np.sum(heavy, axis=-1, keepdims=True) - heavy
    small = quotient(light, light + others_heavy)
    large = np.where(np.isinf(heavy), 1.0, quotient(heavy, heavy + others_light))
    small = np.where(np.isnan(small), 0.0, small)
    loss_low, loss_high = _loss(large, ns), _loss(small, ns)
    factor = 2 * (k - 2) / (k**2 - 1)
    F = quotient(least / (k - 1), 1 + factor * loss_high), quotient(most / (k - 1), 1 + factor * loss_low)
    df2 = quotient(k**2 - 1, 3 * loss_high), quotient(k**2 - 1, 3 * loss_low)
    return F, df2


def _within(sds: Floats, ns: Floats) -> Floats:
    """Mean square within groups."""
    return quotient(np.sum((ns - 1) * sds**2, axis=-1), np.sum(ns, axis=-1) - ns.shape[-1])


def _loss(shares: Floats, ns: Floats) -> Floats:
    """Welch's sum of (1 - share)² / (n - 1)."""
    return np.asarray(np.sum((1 - shares) ** 2 / (ns - 1), axis=-1))
