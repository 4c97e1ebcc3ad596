"""Can n whole scores have this mean and this spread? Answered with a sample, or with a proof that there is none."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass
from fractions import Fraction
from math import isqrt
from typing import Literal

from recheck.recompute.granularity.bitsets import exhaust
from recheck.recompute.granularity.edges import near_widest
from recheck.recompute.granularity.extremes import (
    Sample,
    evenest,
    greatest_squares,
    least_squares,
    sum_of_squares,
    widest,
)
from recheck.recompute.granularity.problem import Problem, TooLarge
from recheck.recompute.granularity.scores import Ends, Scores, Spread, exact, outward
from recheck.recompute.granularity.search import search

Ground = Literal[
    "sample", "off the scale", "no sum", "no sum of squares", "too small", "too large", "no sample", "undefined", "unknown",
]  # fmt: skip
"""Why the answer is what it is. Nothing was proved where it is `unknown`: the table would be too large."""

WORK = 2_000_000_000
"""Bytes that one answer may shift, about half a second."""
FEW_INSIDE = 8
"""Scores inside the scale, the others at its ends, up to which all of them are tried out first."""
MOST_UNKNOWN = 8
"""Sums left undecided after which an answer is given up."""
MOST_SUMS = 20_000
"""Sums that one answer tries; so many fit a mean of few decimals and thousands of scores."""


@dataclass(frozen=True, slots=True)
class Answer:
    """Whether such scores exist: `possible` is None where that is not known.

    `sample` holds (score, how often) in rising order where they do; `ground` says why they do not.
    """

    possible: bool | None
    ground: Ground
    sample: tuple[tuple[Fraction, int], ...] = ()


def find_scores(
    scores: Scores, mean: Ends, spread: Ends | None = None, kind: Spread = "sd", *, work: int = WORK
) -> Answer:
    """Tell whether such scores can have a mean within `mean` and a spread within `spread`, ends included.

    With no spread this is the GRIM test, exact, with the limits of the scale (Brown & Heathers 2017,
    Soc. Psychol. Personal. Sci. 8:363-369); with one, GRIMMER (Anaya 2016, PeerJ Preprints 4:e2400v1)
    and for scores of 0 and 1 DEBIT, but sufficient as well as necessary: yes comes with a sample, no
    from bounds that are attained or from trying all samples by their sums. `work` limits what is
    tried. Raises ValueError where an unlimited scale meets a spread without upper end.
    """
    sums = scores.sums(mean)
    if not sums:
        return Answer(False, "off the scale" if _beyond(scores, mean) else "no sum")
    middle = (exact(mean[0]) + exact(mean[1])) / 2 * scores.n * scores.items
    if spread is None:
        return _shown(scores, evenest(scores.n, next(outward(sums, middle))))
    if scores.factor(kind) == 0:
        return Answer(None, "undefined")
    grounds: Counter[Ground] = Counter()
    for tried, total in enumerate(outward(sums, middle)):
        if tried == MOST_SUMS or grounds["unknown"] == MOST_UNKNOWN:
            return Answer(None, "unknown")
        found, ground = _sample(
            scores, total, scores.squares(total, _finite(scores, spread), kind), work // len(sums)
        )
        if found:
            return _shown(scores, found)
        grounds[ground] += 1
    if grounds["unknown"]:
        return Answer(None, "unknown")
    # The ground that says most is told: all samples were tried before it was found that there is none.
    order: tuple[Ground, ...] = ("no sample", "no sum of squares", "too large", "too small")
    return Answer(False, next(ground for ground in order if grounds[ground]))


def _finite(scores: Scores, spread: Ends) -> Ends:
    """A spread whose upper end is not infinite: on a scale no spread exceeds the root of n times its width."""
    if spread[1] != float("inf"):
        return spread
    if scores.low is None or scores.high is None:
        raise ValueError("a spread without upper end needs a scale with both ends")
    return spread[0], max(exact(spread[0]), scores.n * (exact(scores.high) - exact(scores.low)))


def _beyond(scores: Scores, mean: Ends) -> bool:
    low, high = scores.low, scores.high
    above = high is not None and exact(mean[0]) > exact(high)
    return above or (low is not None and exact(mean[1]) < exact(low))


def _shown(scores: Scores, sample: Sample) -> Answer:
    return Answer(True, "sample", tuple((scores.score(v), sample[v]) for v in sorted(sample) if sample[v]))


def _sample(scores: Scores, total: int, squares: range, work: int) -> tuple[Sample | None, Ground]:
    """Scores in steps with that sum and one of these sums of squares; or why not, and the work that took."""
    n, (low, high) = scores.n, scores.grid
    if not squares:
        return None, "no sum of squares"
    least, most = squares[0], squares[-1]
    if most < least_squares(n, total):
        return None, "too small"
    if low is not None and high is not None:
        if least > greatest_squares(n, total, low, high):
            return None, "too large"
        if high - low < 2:
            return widest(n, total, low, high), "sample"
    for end in (
        evenest(n, total),
        widest(n, total, low, high) if low is not None and high is not None else None,
    ):
        if end is not None and least <= sum_of_squares(end) <= most:
            return end, "sample"
    if low is not None and high is not None and high - low > 1:
        loss = (high - low) * (total - n * low) - (squares[0] - low * (2 * total - n * low))
        if loss <= FEW_INSIDE * (high - low):
            return _from_widest(n, total, squares, low, high, work)
    return _tried(n, total, squares, (low, high), work)


def _from_widest(
    n: int, total: int, squares: range, low: int, high: int, work: int
) -> tuple[Sample | None, Ground]:
    """Close to the widest scores: few stand inside the scale."""
    apart = low * (2 * total - n * low)
    shifted = range(squares.start - apart, squares.stop - apart, 2)
    try:
        found = near_widest(n, total - n * low, shifted, high - low)
    except TooLarge:
        return _tried(n, total, squares, (low, high), work)
    if found is None:
        return None, "no sample"
    return Counter({low + v: times for v, times in found.items()}), "sample"


def _tried(
    n: int, total: int, squares: range, grid: tuple[int | None, int | None], work: int
) -> tuple[Sample | None, Ground]:
    """Both engines in turn, on deviations from the whole number nearest to the mean that has room on both sides."""
    low, high = grid
    centre = (2 * total + n) // (2 * n)
    if low is not None:
        centre = max(centre, low + 1)
    if high is not None:
        centre = min(centre, high - 1)
    apart = n * centre * centre - 2 * centre * total
    most = squares[-1] + apart
    reach = max(isqrt(most), 1)
    problem = Problem(
        n, total - n * centre, squares[0] + apart, most,
        -reach if low is None else max(low - centre, -reach),
        reach if high is None else min(high - centre, reach),
    )  # fmt: skip
    try:
        found = search(problem)
    except TooLarge:
        try:
            found = exhaust(problem, work)
        except TooLarge:
            return None, "unknown"
    if found is None:
        return None, "no sample"
    return Counter({centre + v: times for v, times in found.items()}), "sample"
