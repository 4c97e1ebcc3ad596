"""Samples close to the widest: all but a few scores stand at an end of the scale, and those few are tried out."""

from __future__ import annotations

from collections import Counter

from recheck.recompute.granularity.extremes import Sample
from recheck.recompute.granularity.problem import TooLarge

Inside = dict[tuple[int, int], int]
"""(sum, loss) of scores inside the scale, with the last of them."""


def near_widest(count: int, total: int, squares: range, top: int, most_pairs: int = 20_000) -> Sample | None:
    """Numbers from 0 to `top` with that sum and one of these sums of squares, or None where there are none.

    A number v loses v (top - v) against the ends: Σ v (top - v) = top Σ v - Σ v². What is lost is
    known, and each number inside loses top - 1 at least, so there are few of them. All their sums and
    losses are tried. Raises `TooLarge` where these are more than `most_pairs`.
    """
    losses = range(top * total - squares[-1], top * total - squares[0] + 1, 2)
    layers: list[Inside] = [{(0, 0): 0}]
    tried = 0
    while layers[-1]:
        inside = len(layers) - 1
        for within, loss in layers[-1]:
            at_top, rest = divmod(total - within, top)
            if not rest and 0 <= at_top <= count - inside and loss in losses:
                ends = Counter({0: count - inside - at_top, top: at_top})
                return +(ends + _way_back(layers, within, loss, top))
        if inside == count:
            break
        layers.append(_one_more(layers[-1], top, losses.stop - 1))
        tried += len(layers[-1])
        if tried > most_pairs:
            raise TooLarge
    return None


def _one_more(layer: Inside, top: int, most: int) -> Inside:
    grown: Inside = {}
    for within, loss in layer:
        for value in range(1, top):
            more = loss + value * (top - value)
            if more <= most:
                grown.setdefault((within + value, more), value)
    return grown


def _way_back(layers: list[Inside], within: int, loss: int, top: int) -> Sample:
    sample: Sample = Counter()
    for layer in reversed(layers[1:]):
        value = layer[within, loss]
        sample[value] += 1
        within, loss = within - value, loss - value * (top - value)
    return sample
