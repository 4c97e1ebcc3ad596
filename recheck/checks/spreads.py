"""Checks of the SE of one group's mean against its SD and n."""

from __future__ import annotations

import math
from collections.abc import Iterable

from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge
from recheck.checks.designs import N_BELOW
from recheck.checks.examples import table
from recheck.checks.registry import Case, check
from recheck.checks.surroundings import (
    FEWEST_LEFT,
    OWN_SCORES,
    SOME_MISSING,
    beside,
    exact,
    model_of,
    of_group,
    printed_n,
    shown_by,
)
from recheck.model import Claim, Finding, Interval
from recheck.recompute import combining, conversions
from recheck.reconcile.readings import Numbers, Way

POOLED = "SE or interval comes from the SD pooled over the groups that are told beside this one"
RESAMPLED = "the SE was made by bootstrap"
CHANCE = 1.12
"""How much wider than the plain formula chance makes a bootstrap SE or interval, at most; narrower it is by √((n − 1)/n) too."""
MOST_POOLED = 12
"""Groups above which a table of summaries is no set of groups of one analysis."""


@check(
    "se-from-sd",
    title="SE of a mean against SD and n",
    kinds=("group-summary",),
    quantity="se",
    needs=("se", "sd", "n"),
    formula="SE = SD/√n",
    source="Student (1908) Biometrika 6:1-25",
    limits="Conditional unless other summaries beside it show that SEs are those of the plain scores: marginal means, clusters and repeated measures have other SEs.",
    agrees=("Rye loaves rose to 92.4 mm (SD = 6.1, SE = 1.44, n = 18).",),
    conditional=("Rye loaves rose to 92.4 mm (SD = 6.1, SE = 1.94, n = 18).",),
    inconsistent=(
        table(
            "Table 1. Height of loaves in mm.",
            " | n | Mean | SD | SE",
            "Rye | 18 | 92.4 | 6.12 | 1.44",
            "Wheat | 20 | 90.1 | 5.43 | 1.21",
            "Spelt | 25 | 88.7 | 7.05 | 4.11",
        ),
    ),
)
def se_from_sd(case: Case) -> Iterable[Finding]:
    """Compare a printed SE with that of the printed SD and n."""
    told = _se_told(case.claim)
    if told is None:
        return
    (numbers, plain), claim = told, case.claim
    around = shown_by(beside(case, "se", "sd", "n"), "se", _se_told)
    n = float(numbers["n"].number)
    ways = [
        plain,
        Way(lambda box: (_scaled(box["sd"], 1 / math.sqrt(n - 1)),), (N_BELOW,)),
        Way(lambda box: (_resampled(box["sd"], n),), (RESAMPLED,)),
    ]
    together = pooled_beside(case)
    if together is not None and all(_se_fits(c, together[0]) for c in together[1] if exact(c, "se")):
        ways.append(Way(lambda box: (_scaled(together[0], 1 / math.sqrt(n)),), (POOLED,)))
    would = _n_told(numbers)
    left = max(n / 4 if of_group(claim) else n * FEWEST_LEFT, 2.0)
    ways.append(
        Way(
            lambda box: (Interval(box["sd"].low / math.sqrt(n), box["sd"].high / math.sqrt(left)),),
            (f"{SOME_MISSING} ({would})",) if would else (SOME_MISSING,),
        )
    )
    foreign = model_of(claim, proved=around.proved)
    yield judge(
        case,
        Comparison(
            "se-from-sd", "se", numbers, ways, bounds=NOT_NEGATIVE, excuses=(foreign,) if foreign else (),
            doubts=() if around.proved else (OWN_SCORES.format("the SE") + (f"; else {would}" if would else ""),),
        ),
    )  # fmt: skip


def _n_told(numbers: Numbers) -> str:
    """The whole n that would go with SE and SD, "" where there is none."""
    se, sd = numbers["se"].interval(), numbers["sd"].interval()
    if se.low <= 0 or sd.low <= 0:
        return ""
    least, most = math.ceil((sd.low / se.high) ** 2), math.floor((sd.high / se.low) ** 2)
    if least > most or most < 2:
        return ""
    return f"n would be {least}" if least == most else f"n would be {least} to {most}"


def _se_told(claim: Claim) -> tuple[Numbers, Way] | None:
    """SE, SD and n of a summary with the plain way from the two to the SE."""
    n = printed_n(claim)
    if n is None or not exact(claim, "se", "sd"):
        return None
    numbers = {name: claim.values[name] for name in ("se", "sd", "n")}
    return numbers, Way(lambda box: (_of_sd(box["sd"], n),))


def _of_sd(sd: Interval, n: int) -> Interval:
    """The SE that goes with an SD: it rises with it."""
    low, high = conversions.se_from_sd([max(sd.low, 0.0), sd.high], n)
    return Interval(float(low), float(high))


def _scaled(interval: Interval, factor: float) -> Interval:
    return Interval(max(interval.low, 0.0) * factor, interval.high * factor)


def _se_fits(claim: Claim, pooled: Interval) -> bool:
    n = printed_n(claim)
    return n is not None and claim.values["se"].interval().meets(_scaled(pooled, 1 / math.sqrt(n)))


def _resampled(sd: Interval, n: float) -> Interval:
    """Bootstrap SEs that go with an SD."""
    return Interval(max(sd.low, 0.0) * math.sqrt(n - 1) / n / CHANCE, sd.high / math.sqrt(n) * CHANCE)


def pooled_beside(case: Case) -> tuple[Interval, tuple[Claim, ...]] | None:
    """The SD pooled over all groups of one outcome, or of one column of groups, that are told together, and these groups."""
    claim = case.claim
    groups = tuple(
        c for c in case.block if exact(c, "sd", "n") and printed_n(c) and _of_one_analysis(c, claim)
    )
    if not 2 <= len(groups) <= MOST_POOLED:
        return None
    sds = [c.values["sd"].interval() for c in groups]
    ns = [c.values["n"].number for c in groups]
    low, high = combining.pooled_sd_of_bounds([s.low for s in sds], [s.high for s in sds], ns)
    return Interval(float(low), float(high)), groups


def _of_one_analysis(one: Claim, other: Claim) -> bool:
    return one.outcome == other.outcome or not (one.group and other.group)
