"""Means and SDs that no scores have, planted into honest summaries of single items."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import replace
from decimal import Decimal

import numpy as np

from tests.recompute.granularity.brute import printed_pairs
from tests.soundness import honest_granularity as honest
from tests.soundness.hand import draw_hand
from tests.soundness.honest_granularity import Shown
from tests.soundness.samples import Sample

Rng = np.random.Generator


def planted(rng: Rng, n: int, low: int, high: int, wrong: Callable[[Shown], Shown]) -> tuple[Sample, Shown]:
    """A summary of one group of a single item, to two decimals, with its planted error."""
    hand = honest.printer(rng, draw_hand(rng))
    hand = replace(hand, places={**hand.places, "mean": 2, "sd": 2}, comma=False)
    shown = wrong(honest.summary(rng, hand, honest.scores(rng, n, low, high)))
    outcome = honest.one(rng, honest.OUTCOMES)
    method = f"The tasters rated {outcome} with a single item from {low} (not at all) to {high} (very)."
    return honest.told(rng, hand, outcome, method, [shown]), shown


def mean_off_the_grid(rng: Rng) -> tuple[Sample, bool]:
    """A mean some hundredths off, to one that no sum of so many whole numbers rounds to."""
    while True:
        n, off = int(rng.integers(6, 45)), Decimal(int(rng.integers(1, 30))) / 100

        def wrong(shown: Shown, off: Decimal = off) -> Shown:
            return replace(shown, mean=shown.mean + off if shown.mean < 5 else shown.mean - off)

        sample, shown = planted(rng, n, 1, 7, wrong)
        if not any(abs(total - shown.mean * n) * 200 <= n for total in range(n, 7 * n + 1)):
            return sample, True


def sd_off_the_grid(rng: Rng) -> tuple[Sample, bool]:
    """An SD some hundredths off, of few scores; wrong where a list of all samples has none with both figures."""
    n, off = int(rng.integers(3, 7)), Decimal(int(rng.integers(2, 9))) / 100
    sample, shown = planted(rng, n, 1, 5, lambda s: replace(s, sd=s.sd + off))
    return sample, (int(100 * (shown.mean - 1)), int(100 * shown.sd)) not in printed_pairs(n, 4, 2, n - 1)


def sd_too_large(rng: Rng) -> tuple[Sample, bool]:
    """An SD beyond half the scale times √(n / (n − 1)): no scores have it (Popoviciu 1935)."""
    n = int(rng.integers(5, 80))
    sd = Decimal(str(round(3 * (n / (n - 1)) ** 0.5 + float(rng.uniform(0.02, 2)), 2)))
    sample, shown = planted(rng, n, 1, 7, lambda s: replace(s, sd=sd))
    return sample, float(shown.sd) - 0.005 > 3 * (n / (n - 1)) ** 0.5


GRANULARITY_PLANTS: Mapping[str, Callable[[Rng], tuple[Sample, bool]]] = {
    "whole scores: mean off the grid": mean_off_the_grid, "whole scores: SD off the grid": sd_off_the_grid,
    "whole scores: SD too large": sd_too_large,
}  # fmt: skip
