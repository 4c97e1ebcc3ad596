"""Least and greatest SD of scores on a scale, for a mean known to lie in an interval."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Floats, floats, quotient
from recheck.recompute.granularity.extremes import Sample, evenest, sum_of_squares, widest
from recheck.recompute.granularity.scores import Ends, Scores, Spread


@dataclass(frozen=True, slots=True)
class Limit:
    """A squared spread that some scores reach, with such a sample; None where there is no limit or no spread."""

    squared: Fraction | None
    sample: tuple[tuple[Fraction, int], ...] = ()

    @property
    def spread(self) -> float:
        """The spread; infinite where it has no limit."""
        return float("inf") if self.squared is None else float(self.squared) ** 0.5


def spread_limits(scores: Scores, mean: Ends, kind: Spread = "sd") -> tuple[Limit, Limit] | None:
    """Least and greatest spread of whole scores with a mean within `mean`; None where there are no such scores.

    Both are attained, by the samples given. n² times the least variance for a sum S is r(n - r), r the
    remainder of S by n: concave between multiples of n, where it is 0, so an end of the sums or such a
    multiple has the least. The greatest is, with all scores but one at the ends of the scale, convex
    in S between sums that leave none inside and concave over these: an end of the sums, or of the
    sums that leave none inside the two nearest to the middle of the scale, has it.
    """
    sums = scores.sums(mean)
    if not sums or scores.factor(kind) == 0:
        return None
    n, (low, high) = scores.n, scores.grid
    ends = (sums[0], sums[-1])
    multiple = -(-sums[0] // n) * n
    evenly = min((_deviations(evenest(n, s), n), s) for s in {*ends, multiple} if s in sums)[1]
    least = _limit(scores, evenest(n, evenly), kind)
    if low is None or high is None:
        return least, Limit(None)
    candidates = {*ends}
    if high > low:
        at_top = {
            n // 2,
            (n + 1) // 2,
            (sums[0] - n * low) // (high - low) + 1,
            (sums[-1] - n * low) // (high - low),
        }
        candidates |= {n * low + p * (high - low) for p in at_top}
    widely = max((_deviations(widest(n, s, low, high), n), s) for s in candidates if s in sums)[1]
    return least, _limit(scores, widest(n, widely, low, high), kind)


def _deviations(sample: Sample, n: int) -> int:
    """n times the sum of squared deviations from the mean."""
    total = sum(v * times for v, times in sample.items())
    return n * sum_of_squares(sample) - total * total


def _limit(scores: Scores, sample: Sample, kind: Spread) -> Limit:
    squared = Fraction(_deviations(sample, scores.n), scores.n * scores.factor(kind) * scores.items**2)
    return Limit(squared, tuple((scores.score(v), sample[v]) for v in sorted(sample)))


def sd_most(
    mean_low: ArrayLike, mean_high: ArrayLike, n: ArrayLike, low: ArrayLike, high: ArrayLike
) -> Floats:
    """Greatest SD (n - 1) of n scores, whole or not, on the scale from `low` to `high`, for means in an interval.

    Arguments broadcast; nan where no mean lies on the scale, or n < 2. Attained: all scores but one
    stand at an end. With u = n (mean - low) / (high - low), p its whole part and f the rest, the sum
    of squared deviations is (high - low)² (p + f² - u²/n), convex in u between whole u and concave
    over these; so the best u is an end, or the whole one on either side of n/2 cut to the interval.
    """
    mean_low, mean_high, n, low, high = floats(mean_low, mean_high, n, low, high)
    width = high - low
    first = np.maximum(n * quotient(mean_low - low, width), 0.0)
    last = np.minimum(n * quotient(mean_high - low, width), n)
    best = np.full(np.broadcast_shapes(first.shape, last.shape), np.nan)
    for u in (
        first, last, np.ceil(first), np.floor(last),
        np.clip(np.floor(n / 2), np.ceil(first), np.floor(last)), np.clip(np.ceil(n / 2), np.ceil(first), np.floor(last)),
    ):  # fmt: skip
        inside = (first <= u) & (u <= last)
        whole = np.floor(u)
        squares = whole + (u - whole) ** 2 - quotient(u * u, n)
        best = np.fmax(best, np.where(inside, squares, np.nan))
    with np.errstate(invalid="ignore"):
        return np.asarray(np.where(n >= 2, width * np.sqrt(quotient(np.maximum(best, 0.0), n - 1)), np.nan))


def sd_most_any_mean(n: ArrayLike, low: ArrayLike, high: ArrayLike) -> Floats:
    """Popoviciu's bound of an SD (n - 1) on a scale: (high - low) / 2 × √(n / (n - 1)), attained for even n.

    Arguments broadcast. Popoviciu (1935) Mathematica (Cluj) 9:129-145.
    """
    n, low, high = floats(n, low, high)
    return np.asarray((high - low) / 2 * np.sqrt(quotient(n, n - 1)))


def sd_most_for_mean(mean: ArrayLike, n: ArrayLike, low: ArrayLike, high: ArrayLike) -> Floats:
    """Bhatia and Davis's bound of an SD (n - 1): √((high - mean)(mean - low) n / (n - 1)).

    Arguments broadcast; attained where n (mean - low) / (high - low) is whole. nan off the scale.
    Bhatia & Davis (2000) American Mathematical Monthly 107:353-357.
    """
    mean, n, low, high = floats(mean, n, low, high)
    with np.errstate(invalid="ignore"):
        return np.asarray(np.sqrt((high - mean) * (mean - low) * quotient(n, n - 1)))
