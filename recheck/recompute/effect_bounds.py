"""Ranges of standardized mean differences over boxes of means and SDs.

Differences are group 1 minus group 2; SDs are sample SDs (n - 1), cut at 0; ns are exact.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Bounds, Floats, difference_bounds, floats, quotient_bounds, spread_bounds
from recheck.recompute.effect_sizes import population_sd
from recheck.recompute.two_groups import pooled_sd

Denominator = Literal["pooled", "sd1", "sd2", "mean", "rms", "population", "welch-average"]


def d_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike,
    denominator: Denominator = "pooled",
) -> Bounds:  # fmt: skip
    """Range of d over a box of means and SDs, with one of the denominators of `DENOMINATORS`.

    The difference and the denominator vary by themselves and each denominator rises with either SD,
    so both ends are corners (see `quotient_bounds`); infinite where the denominator may be 0.
    """
    (sd1_low, sd1_high), (sd2_low, sd2_high) = (
        spread_bounds(sd1_low, sd1_high),
        spread_bounds(sd2_low, sd2_high),
    )
    spread = DENOMINATORS[denominator]
    least, most = spread(*floats(sd1_low, n1, sd2_low, n2)), spread(*floats(sd1_high, n1, sd2_high, n2))
    return quotient_bounds(*difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high), least, most)


def _crossed_sd(sd1: Floats, n1: Floats, sd2: Floats, n2: Floats) -> Floats:
    return np.asarray(np.sqrt((n2 * sd1**2 + n1 * sd2**2) / (n1 + n2)))


DENOMINATORS: dict[Denominator, Callable[[Floats, Floats, Floats, Floats], Floats]] = {
    "pooled": pooled_sd,
    "sd1": lambda sd1, n1, sd2, n2: sd1,
    "sd2": lambda sd1, n1, sd2, n2: sd2,
    "mean": lambda sd1, n1, sd2, n2: np.asarray((sd1 + sd2) / 2),
    "rms": lambda sd1, n1, sd2, n2: np.asarray(np.hypot(sd1, sd2) / np.sqrt(2)),
    "population": population_sd,
    "welch-average": _crossed_sd,
}
"""What d is divided by, from sd1, n1, sd2, n2. `welch-average` is the Welch SE over sqrt(1/n1 + 1/n2),
sqrt((n2 sd1² + n1 sd2²) / (n1 + n2)): what `d_from_t` of a Welch t amounts to."""
