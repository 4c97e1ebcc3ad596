"""A sample with a given sum and sum of squares, or the proof that there is none: dynamic programming on bit sets.

Layer r is the set of all pairs (sum, sum of squares) of r numbers beyond ±1, one bit a pair, in one long
integer: adding a number to all of them is one shift. -1, 0 and 1 need no layers: how many of them reach
what is missing is known (`near_ones`).
"""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass

from recheck.recompute.granularity.extremes import Sample
from recheck.recompute.granularity.problem import Problem, TooLarge, near_ones

MOST_STORED = 150_000_000
"""Bytes of layers kept for the way back to a sample."""


@dataclass(frozen=True, slots=True)
class Layout:
    """Where the bit of a pair stands: a row for each sum from `first`, in it (squares + sum) / 2.

    Σ v² and Σ v have the same parity, so the half of their sum is whole, Σ v(v + 1)/2, and never
    negative. `width` is a whole number of bytes and leaves room for one number more.
    """

    first: int
    rows: int
    width: int
    allowed: int

    def at(self, total: int, half: int) -> int:
        """The number of the bit."""
        return (total - self.first) * self.width + half


def exhaust(problem: Problem, work: int = 2_000_000_000) -> Sample | None:
    """A sample that solves the problem, or None: then every sample was tried, by its sums.

    Raises `TooLarge` where more than `work` bytes would have to be shifted, or too much be stored.
    """
    values = [v for v in range(problem.low, problem.high + 1) if abs(v) > 1 and v * v <= problem.most]
    layout = _layout(problem, values)
    _afford(problem, layout, len(values), work)
    whole = (1 << layout.rows * layout.width) - 1
    allowed = _rows([layout.allowed] * layout.rows, layout.width)
    layers = [1 << layout.at(0, 0)]
    while True:
        r = len(layers) - 1
        hit = layers[-1] & _accepted(problem, layout, r)
        if hit:
            return _way_back(problem, layout, layers, values, hit.bit_length() - 1)
        if r == problem.count or not values or not layers[-1]:
            return None
        grown = 0
        for value in values:
            shift = value * layout.width + value * (value + 1) // 2
            grown |= layers[-1] << shift if shift >= 0 else layers[-1] >> -shift
        layers.append(grown & whole & allowed)


def _afford(problem: Problem, layout: Layout, values: int, work: int) -> None:
    """Raise `TooLarge` at once where a proof would: each number beyond ±1 takes 4 of the squares at least."""
    most_layers = min(problem.count, problem.most // 4)
    stored = most_layers * layout.rows * layout.width // 8
    if stored > MOST_STORED or 2 * values * stored > work:
        raise TooLarge


def _layout(problem: Problem, values: list[int]) -> Layout:
    """The sums and squares that can lead to a solution.

    With numbers beyond ±1 squares are at least 2 |sum|, and what is missing of the total is at most
    what is missing of the squares: so 3 |sum| <= |total| + most. The numbers of a sample can be put
    in an order in which no partial sum leaves the span from 0 to their sum by more than one number.
    """
    reach = (abs(problem.total) + problem.most) // 3
    low = max(problem.total - problem.count, -reach)
    high = min(problem.total + problem.count, reach)
    first = min(0, low) + min([0, *values])
    last = max(0, high) + max([0, *values])
    halves = (problem.most + max(0, high)) // 2 + 1
    # Partial sums may be larger than the last one while their squares are not.
    halves = max(halves, (problem.most + last) // 2 + 1)
    room = max([0, *(v * (v + 1) // 2 for v in values)])
    return Layout(first, last - first + 1, -(-(halves + room) // 8) * 8, (1 << halves) - 1)


def _rows(rows: list[int], width: int) -> int:
    """Put rows of bits behind each other."""
    return int.from_bytes(b"".join(row.to_bytes(width // 8, "little") for row in rows), "little")


def _accepted(problem: Problem, layout: Layout, r: int) -> int:
    """The pairs of r numbers that -1, 0 and 1 can complete: squares missing from |sum missing| to the number left."""
    left = problem.count - r
    rows = []
    for total in range(layout.first, layout.first + layout.rows):
        missing = abs(problem.total - total)
        # From (squares + sum) / 2 rounded inward, at least 0.
        low = max(0, -((left - problem.least - total) // 2))
        high = (problem.most - missing + total) // 2
        fits = missing <= left and low <= high
        rows.append(((1 << high + 1) - 1 >> low << low) & layout.allowed if fits else 0)
    return _rows(rows, layout.width)


def _way_back(problem: Problem, layout: Layout, layers: list[int], values: list[int], bit: int) -> Sample:
    """The sample behind one bit: from layer to layer a number whose removal leaves a pair of the layer before."""
    row, half = divmod(bit, layout.width)
    total = row + layout.first
    squares = 2 * half - total
    filling = near_ones(
        problem.count - len(layers) + 1, problem.total - total, problem.least - squares, problem.most - squares
    )  # fmt: skip
    sample: Sample = Counter(filling or ())
    for layer in reversed(layers[:-1]):
        packed = layer.to_bytes(layer.bit_length() // 8 + 1, "little")
        for value in values:
            before = layout.at(total - value, half - value * (value + 1) // 2)
            inside = half >= value * (value + 1) // 2 and 0 <= before < 8 * len(packed)
            if inside and packed[before // 8] >> before % 8 & 1:
                total, half = total - value, half - value * (value + 1) // 2
                sample[value] += 1
                break
    return sample
