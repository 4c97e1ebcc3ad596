"""Checks of odds, risk and hazard ratios against their coefficient and within their interval."""

from __future__ import annotations

import math
from collections.abc import Iterable

from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge
from recheck.checks.examples import table
from recheck.checks.intervals import NEED_NOT_BE_SYMMETRIC, OFF_CENTRE, ends, exponential, log_middle
from recheck.checks.registry import Case, check
from recheck.checks.risk_intervals import told_by_counts
from recheck.model import RATIOS, Claim, Finding, Interval, Printed
from recheck.reconcile.readings import Box, Way, box_of


@check(
    "ratio-from-b",
    title="odds, risk or hazard ratio against its coefficient",
    kinds=("regression", "estimate"),
    quantity="or",
    needs=("b",),
    beside="OR, RR or HR",
    formula="ratio = exp(b)",
    source="Cox (1958) J. R. Stat. Soc. B 20:215-242; Cox (1972) J. R. Stat. Soc. B 34:187-220",
    limits="Conditional where the ratio may be one of another unit (per 10 units, per SD) than the coefficient.",
    agrees=(
        table(
            "Table 3. Logistic regression of a split crust.",
            "Predictor | b | SE | OR | 95% CI",
            "Steam | −0.69 | 0.30 | 0.50 | 0.28 to 0.90",
        ),
    ),
    inconsistent=(
        table(
            "Table 3. Logistic regression of a split crust.",
            "Predictor | b | SE | OR | 95% CI",
            "Steam | −0.69 | 0.30 | 0.55 | 0.28 to 0.90",
        ),
    ),
    conditional=(
        table(
            "Table 3. Logistic regression of a split crust.",
            "Predictor | b | SE | OR | 95% CI",
            "Steam | −0.96 | 0.30 | 0.55 | 0.28 to 0.90",
        ),
    ),
)
def ratio_from_b(case: Case) -> Iterable[Finding]:
    """Compare a ratio with the exponential of its coefficient."""
    claim = case.claim
    for name in RATIOS:
        if name not in claim.values:
            continue
        numbers = {name: claim.values[name], "b": claim.values["b"]}
        same_unit = _interval_around(claim, name)
        ways = (
            Way(lambda box: (exponential(box["b"]),)),
            Way(
                lambda box: (exponential(Interval(-box["b"].high, -box["b"].low)),),
                ("the ratio is turned round",),
            ),
        )
        doubts = () if same_unit else ("ratio and coefficient are those of one unit of the predictor",)
        yield judge(case, Comparison("ratio-from-b", name, numbers, ways, bounds=NOT_NEGATIVE, doubts=doubts))


def _interval_around(claim: Claim, name: str) -> bool:
    """Tell whether the interval of the ratio has the exponential of b in its middle: both are of one unit."""
    if claim.interval_of != name:
        return False
    low, high = ends(claim)
    middle = log_middle(low.interval(), high.interval())
    return middle is not None and middle.meets(exponential(claim.values["b"].interval()))


@check(
    "ratio-centre",
    title="odds, risk or hazard ratio in the middle of its confidence interval",
    kinds=("estimate", "regression"),
    quantity="or",
    needs=("ci_low", "ci_high"),
    beside="OR, RR or HR with its interval",
    formula="ratio = √(lower end × upper end)",
    source="Woolf (1955) Annals of Human Genetics 19:251-253; Altman & Bland (2011) BMJ 343:d2090",
    limits="Exact, profile and bootstrap intervals are not symmetric about ln ratio: a ratio somewhat off the middle is unchecked, one far off conditional. Where counts give the ratio, its interval is compared with theirs instead.",
    agrees=("Steam halved collapse (OR = 0.50, 95% CI 0.28 to 0.90).",),
    conditional=("Steam halved collapse (OR = 0.80, 95% CI 0.28 to 0.90).",),
    unchecked=("Steam halved collapse (OR = 0.55, 95% CI 0.28 to 0.90).",),
)
def ratio_centre(case: Case) -> Iterable[Finding]:
    """Compare a ratio with the geometric middle of its interval; outside it another check speaks."""
    claim = case.claim
    name = claim.interval_of
    if name not in RATIOS or name not in claim.values:
        return
    low, high = ends(claim)
    if low.value > high.value or high.interval().low <= 0 or low.interval().high <= 0:
        return
    if not _inside(claim.values[name], low, high) or told_by_counts(case):
        return

    def implied(box: Box, off: float = 0.0) -> tuple[Interval, ...]:
        middle = log_middle(box["ci_low"], box["ci_high"], off)
        return () if middle is None else (middle,)

    numbers = {name: claim.values[name], "ci_low": low, "ci_high": high}
    foreign = claim.suggests("bootstrap", "bayesian")
    off = _most_off(low, high) if len(case.block) > 1 else OFF_CENTRE
    near = any(i.meets(numbers[name].interval()) for i in implied(box_of(numbers), off))
    excuses = (NEED_NOT_BE_SYMMETRIC,) if foreign or near else ()
    doubts = ("the interval is a symmetric one of the logarithm; an exact or profile interval need not be",)
    yield judge(
        case,
        Comparison(
            "ratio-centre",
            name,
            numbers,
            (Way(implied),),
            bounds=NOT_NEGATIVE,
            doubts=doubts,
            excuses=excuses,
        ),
    )


SKEW = 0.2
"""The share of its half width, for each unit of that in logarithms, by which a ratio of groups may be off.

Profile and exact intervals are skewed as they are wide. Drawn around 2×2 tables of 8 to 200 cases a group with
cells from 1 up, OR and RR lie at most 0.17 off.
"""


def _most_off(low: Printed, high: Printed) -> float:
    """How far off its middle, in half widths, the ratio of two groups of counts may lie."""
    ends_of = [max(end.number, float(end.unit) / 2) for end in (low, high)]
    return min(OFF_CENTRE, SKEW * math.log(ends_of[1] / ends_of[0]) / 2)


def _inside(printed: Printed, low: Printed, high: Printed) -> bool:
    interval = printed.interval()
    return low.interval().low <= interval.high and interval.low <= high.interval().high
