"""Which number of a claim is its coefficient, and what surely belongs to it."""

from __future__ import annotations

import math

from recheck.checks.intervals import ends, exponential, level_of
from recheck.model import RATIOS, Claim, Interval
from recheck.recompute.tails import z_quantile

SAME_COEFFICIENT = "β and SE are those of one coefficient (β may be standardized beside the SE of b)"
"""Said of a row whose β is not proved to be the coefficient of its SE; other rows of the table tell."""


def coefficient(claim: Claim) -> str | None:
    """The name of the coefficient that a printed SE may belong to: b, else β."""
    return next((name for name in ("b", "beta") if name in claim.values), None)


def coefficient_doubts(claim: Claim, name: str) -> tuple[str, ...]:
    """What must hold for β to be the coefficient of the SE: nothing where the ratio is its exponential."""
    return (SAME_COEFFICIENT,) if name == "beta" and not ratio_of(claim, name) else ()


def ratio_of(claim: Claim, name: str) -> str | None:
    """The odds, risk or hazard ratio that is the exponential of the coefficient, if one is printed."""
    fitting = exponential(claim.values[name].interval()) if name in claim.values else None
    return next(
        (r for r in RATIOS if fitting and r in claim.values and fitting.meets(claim.values[r].interval())),
        None,
    )


def is_wald(claim: Claim) -> bool:
    """Tell whether coefficient and SE show that the interval of a ratio is Wald's: ln ends = b ∓ z SE."""
    name = coefficient(claim)
    if name is None or "se" not in claim.values or ratio_of(claim, name) != claim.interval_of:
        return False
    b, se = claim.values[name].interval(), claim.values["se"].interval().within(0.0, math.inf)
    z = float(z_quantile((1 - level_of(claim)[0]) / 2))
    low, high = ends(claim)
    lower = Interval(b.low - z * se.high, b.high - z * se.low)
    upper = Interval(b.low + z * se.low, b.high + z * se.high)
    return all(
        exponential(implied).meets(printed.interval()) for implied, printed in ((lower, low), (upper, high))
    )
