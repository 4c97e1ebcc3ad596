"""How far an honest interval may be from the t interval: worked out by hand, or by another method."""

from __future__ import annotations

import math
from dataclasses import dataclass

from scipy import special

from recheck.checks.intervals import ends
from recheck.checks.registry import Case
from recheck.model import Claim
from recheck.recompute.tails import t_quantile, z_quantile


def other_widths(level: float, df: float) -> tuple[float, float]:
    """How much narrower and wider than the t interval an honest one by another method may be.

    A percentile bootstrap of few cases is narrower by √(df/(df + 1)) z/t, and a tenth more by
    chance; simultaneous intervals are wider, Bonferroni's of 25 comparisons (Dunn 1961, J. Am.
    Stat. Assoc. 56:52-64) or Scheffé's of 8 groups (1953, Biometrika 40:87-104).
    """
    tail = (1 - level) / 2
    t = float(t_quantile(tail, df))
    narrower = 0.9 * math.sqrt(df / (df + 1)) * float(z_quantile(tail)) / t
    bonferroni = float(t_quantile(tail / 25, df)) / t
    scheffe = math.sqrt(7 * float(special.fdtri(7, min(df, 1e7), level))) / t
    return narrower, max(bonferroni, scheffe)


USUAL_LEVEL = "taken for a 95% interval, as no level is printed"
NORMAL = "the interval uses the normal, not the t distribution"


@dataclass(frozen=True, slots=True)
class Slack:
    """How far an interval may be from the t interval: its centre in its own unit, its width by a factor."""

    shift: float = 0.0
    narrower: float = 1.0
    wider: float = 1.0


def hand_slack(case: Case) -> Slack:
    """What working the interval out from rounded means and SDs can do to it.

    Two rounded means move the centre by at most one unit of their last digit, a rounded SD the
    width by its own half unit. Without the groups, the difference and the ends tell the unit; an SD of
    two significant digits is taken for granted, or fewer where the difference is printed too coarsely for that.
    """
    printed = [case.claim.values[n] for n in ("mean_difference", "ci_low") if n in case.claim.values]
    printed += [group.values["mean"] for group in case.groups if "mean" in group.values]
    shift = max(float(number.unit) for number in printed)
    spreads = [group.values[n] for group in case.groups for n in ("sd", "se") if n in group.values]
    shares = [float(spread.unit) / 2 / max(abs(spread.number), float(spread.unit) / 2) for spread in spreads]
    if not spreads:
        shares.append(_coarseness(case.claim, shift))
    relative = min(max((0.05, *shares)), 0.95)
    return Slack(shift, 1 - relative, 1 + relative)


def _coarseness(claim: Claim, unit: float) -> float:
    """Half a unit as a share of the SD that the width of an interval tells of two groups of about one size.

    The SE is at least 2 SD/√N, whatever the sizes of the groups, and 2 SE are about half the width; where
    nothing tells N, 20 are assumed. Groups of unlike sizes are allowed for by four fifths.
    """
    low, high = ends(claim)
    df = claim.values.get("df")
    total = df.number + 2 if df is not None else 20.0
    sd = 0.8 * (high.number - low.number) / 4 * math.sqrt(max(total, 2.0)) / 2
    return unit / 2 / max(sd, unit / 2)
