"""A sample with a given sum and sum of squares, by search with bounds: finds one at once where there are many."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from math import isqrt

from recheck.recompute.granularity.extremes import Sample, greatest_squares, least_squares
from recheck.recompute.granularity.problem import Problem, TooLarge, near_ones


def search(problem: Problem, steps: int = 20_000) -> Sample | None:
    """A sample that solves the problem, or None where none exists; raises `TooLarge` after so many choices.

    Numbers beyond ±1 are chosen largest first, each only if the rest can still reach its sum and sums
    of squares by the exact least and greatest of both; -1, 0 and 1 fill up without further search.
    """
    size = max(-problem.low, problem.high)
    if not _open(problem, size):
        return None
    if (found := _filled(problem)) is not None:
        return found
    if (found := _in_pairs(problem)) is not None:
        return found
    path: list[int] = []
    seen = {_key(problem, size)}
    stack = [_choices(problem, size)]
    while stack:
        value = next(stack[-1][1], 0)
        if not value:
            stack.pop()
            del path[-1:]
            continue
        steps -= 1
        if steps < 0:
            raise TooLarge
        rest, key = _after(stack[-1][0], value), abs(value)
        if not _open(rest, key) or _key(rest, key) in seen:
            continue
        path.append(value)
        if (found := _filled(rest)) is not None:
            return found + Counter(path)
        seen.add(_key(rest, key))
        stack.append(_choices(rest, key))
    return None


def _key(rest: Problem, size: int) -> tuple[int, int, int, int]:
    return rest.count, rest.total, rest.most, size


def _choices(rest: Problem, size: int) -> tuple[Problem, Iterator[int]]:
    """What one number beyond ±1 can be, no larger than the last one; that which brings the sum nearer first."""
    sizes = range(min(size, isqrt(rest.most)), 1, -1) if rest.count > 2 else ()
    turn = 1 if rest.total > 0 else -1
    return rest, (turn * v for a in sizes for v in (a, -a) if rest.low <= turn * v <= rest.high)


def _after(rest: Problem, value: int) -> Problem:
    """What is left to find after one number."""
    square = value * value
    return Problem(
        rest.count - 1, rest.total - value, rest.least - square, rest.most - square, rest.low, rest.high
    )


def _open(rest: Problem, size: int) -> bool:
    """Tell whether numbers no larger than `size` can still bring the sum, and squares within reach."""
    low, high = max(rest.low, -size), min(rest.high, size)
    if not rest.count * low <= rest.total <= rest.count * high:
        return False
    reach = greatest_squares(rest.count, rest.total, low, high)
    return least_squares(rest.count, rest.total) <= rest.most and reach >= rest.least


def _in_pairs(problem: Problem) -> Sample | None:
    """A sample of many equal pairs beside -1, 0 and 1: a short way to one of thousands of numbers."""
    sizes = range(2, min(-problem.low, problem.high) + 1)
    for lower, upper in [*((-a, a) for a in reversed(sizes)), (problem.low, problem.high)]:
        each = lower * lower + upper * upper
        # A pair brings its squares and takes the place of two numbers whose squares are 2 at most.
        pairs = -((problem.count - problem.least) // (each - 2)) if each > 2 else 0
        if not 0 < 2 * pairs <= problem.count:
            continue
        rest = near_ones(
            problem.count - 2 * pairs, problem.total - pairs * (lower + upper),
            problem.least - pairs * each, problem.most - pairs * each,
        )  # fmt: skip
        if rest is not None:
            return rest + Counter({lower: pairs, upper: pairs})
    return None


def _filled(rest: Problem) -> Sample | None:
    """The last numbers: one or two of any size, or any number of -1, 0 and 1."""
    if rest.count == 2:
        return _pair(rest)
    if rest.count == 1:
        fits = rest.low <= rest.total <= rest.high and rest.least <= rest.total**2 <= rest.most
        return Counter((rest.total,)) if fits else None
    return near_ones(rest.count, rest.total, rest.least, rest.most)


def _pair(rest: Problem) -> Sample | None:
    """Two numbers: for a difference e, e² = 2 squares - total²; the smallest that will do is the innermost pair."""
    square = max(2 * rest.least - rest.total**2, 0)
    apart = isqrt(square - 1) + 1 if square else 0
    apart += (apart - rest.total) % 2
    if apart * apart > 2 * rest.most - rest.total**2:
        return None
    lower, upper = (rest.total - apart) // 2, (rest.total + apart) // 2
    return Counter((lower, upper)) if rest.low <= lower and upper <= rest.high else None
