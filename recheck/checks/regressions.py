"""Checks of a coefficient against its SE, test, p, confidence interval and ratio."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from dataclasses import replace

import numpy as np

from recheck.checks.compare import Comparison, judge
from recheck.checks.examples import table
from recheck.checks.groups import unsigned
from recheck.checks.interval_tests import NORMAL, OPEN_DF, USUAL_LEVEL, level_of, other_widths
from recheck.checks.intervals import OFF_CENTRE, OTHER_METHOD, RATIOS, ends, exponential, log_middle
from recheck.checks.p_values import ONE_TAILED, as_interval, judge_p
from recheck.checks.registry import Case, check
from recheck.model import VERDICTS, Claim, Finding, Interval, Printed
from recheck.recompute import bounds
from recheck.recompute.arrays import quotient_bounds
from recheck.recompute.tails import t_quantile, z_quantile
from recheck.reconcile.readings import Box, Way, box_of

POSITIVE = Interval(0.0, math.inf)
WALD = "the statistic is Wald's, (b / SE)²"
SAME_SE = "the printed SE is the one that the test rests on, neither robust nor from a bootstrap"
FEWEST_DF = 5.0


def _t_of_b(box: Box) -> Interval:
    """|b| / SE over the box."""
    b, se = box["b"].absolute(), box["se"].within(0.0, math.inf)
    return as_interval(quotient_bounds(*(np.asarray(x) for x in (b.low, b.high, se.low, se.high))))


def _square(interval: Interval) -> Interval:
    return Interval(interval.low**2, interval.high**2)


def _se_doubts(claim: Claim) -> tuple[str, ...]:
    return (SAME_SE,) if claim.suggests("robust", "bootstrap") else ()


@check(
    "t-from-b",
    title="t, z or Wald's χ² of a coefficient against the coefficient and its SE",
    kinds=("regression",),
    quantity="t",
    needs=("b", "se"),
    beside="t, z or χ²",
    formula="t = b / SE; Wald's χ² = (b / SE)²",
    source="Wald (1943) Transactions of the American Mathematical Society 54:426-482; Fisher (1925) Statistical Methods for Research Workers",
    limits="Likelihood-ratio and score tests have statistics of their own; so have tests on another (robust) SE than the printed one.",
    agrees=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | b | SE | t | p",
            "Proofing time | 0.84 | 0.31 | 2.71 | .008",
        ),
    ),
    inconsistent=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | b | SE | t | p",
            "Proofing time | 0.84 | 0.31 | 2.17 | .008",
        ),
    ),
)
def t_from_b(case: Case) -> Iterable[Finding]:
    """Compare the test statistic of a coefficient with the coefficient over its SE."""
    claim = case.claim
    for name in ("t", "z", "chi2"):
        if name not in claim.values:
            continue
        numbers = {n: claim.values[n] for n in (name, "b", "se")}
        numbers[name] = unsigned(numbers[name])
        squared = Way(lambda box: (_square(_t_of_b(box)),))
        plain = Way(lambda box: (_t_of_b(box),))
        ways = (squared,) if name == "chi2" else (plain, replace(squared, unstated=(WALD,)))
        doubts = list(_se_doubts(claim))
        if name == "chi2":
            doubts.append("χ² is that of Wald's test, not of the likelihood ratio or the score")
        yield judge(case, Comparison("t-from-b", name, numbers, ways, bounds=POSITIVE, doubts=tuple(doubts)))


@check(
    "p-from-b",
    title="p of a coefficient against its t, or the coefficient and its SE",
    kinds=("regression",),
    quantity="p",
    needs=("p",),
    beside="t without df, or b and SE",
    formula="p = 2 P(T > |b / SE|), normal where df are not printed",
    source="Wald (1943) Transactions of the American Mathematical Society 54:426-482",
    limits="Conditional at most without df: then all from 5 up are tried. Likelihood-ratio and score tests are not rebuilt.",
    agrees=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | b | SE | t | p",
            "Proofing time | 0.84 | 0.31 | 2.71 | .008",
        ),
    ),
    conditional=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | b | SE | t | p",
            "Proofing time | 0.84 | 0.31 | 2.71 | .08",
        ),
    ),
)
def p_from_b(case: Case) -> Iterable[Finding]:
    """Compare p with the test of the coefficient where its own statistic and df do not tell."""
    claim = case.claim
    values = claim.values
    if values.keys() & {"z", "chi2"} or {"t", "df"} <= values.keys():
        return
    names = ("t",) if "t" in values else ("b", "se")
    if not set(names) <= values.keys():
        return
    df = values.get("df")
    known = df is not None and df.number > 0
    dfs = Interval(df.number, df.number) if known and df is not None else Interval(FEWEST_DF, OPEN_DF[-1])

    def implied(box: Box, factor: float = 1.0) -> tuple[Interval, ...]:
        t = box["t"].absolute() if "t" in box else _t_of_b(box)
        p = as_interval(bounds.p_from_t_bounds(t.low, t.high, dfs.low, dfs.high, 2))
        return (Interval(factor * p.low, factor * p.high),)

    ways = [Way(implied)]
    if not claim.suggests("two-tailed"):
        ways.append(Way(lambda box: implied(box, 0.5), (ONE_TAILED,)))
    doubts = list(_se_doubts(claim))
    if not known:
        doubts.append(
            "p is that of Wald's test of this coefficient (no df are printed; those from 5 up were tried)"
        )
    numbers = {n: values[n] for n in (*names, "p")}
    yield judge_p(case, "p-from-b", ways, numbers, doubts=tuple(doubts))


@check(
    "ci-from-b",
    title="confidence interval of a coefficient against the coefficient and its SE",
    kinds=("regression",),
    quantity="ci_low",
    needs=("b", "se", "ci_low", "ci_high"),
    formula="b ∓ c SE, c the critical value of t with df, or of the normal distribution",
    source="Neyman (1937) Philosophical Transactions A 236:333-380",
    limits="Conditional at most without df. Profile, bootstrap and robust intervals are not rebuilt.",
    agrees=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | b | SE | 95% CI | p",
            "Proofing time | 0.84 | 0.31 | 0.22 to 1.46 | .008",
        ),
    ),
    conditional=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | b | SE | 95% CI | p",
            "Proofing time | 0.84 | 0.31 | 0.02 to 1.46 | .008",
        ),
    ),
)
def ci_from_b(case: Case) -> Iterable[Finding]:
    """Compare both ends with the coefficient and its SE; the end that fits worse is told."""
    claim = case.claim
    if claim.interval_of not in (None, "b") or (
        claim.interval_of is None and RATIO_NAMES & claim.values.keys()
    ):
        return
    low, high = ends(claim)
    if low.value > high.value:
        return
    df = claim.values.get("df")
    known = df is not None and df.number > 0
    doubts = list(_se_doubts(claim))
    if not known:
        doubts.append("the interval is Wald's (no df are printed; those from 5 up were tried)")
    found = []
    for name, printed, side in (("ci_low", low, -1.0), ("ci_high", high, 1.0)):
        numbers = {name: printed, "b": claim.values["b"], "se": claim.values["se"]}
        ways = tuple(_end_ways(claim, df.number if known and df is not None else None, side))
        found.append(judge(case, Comparison("ci-from-b", name, numbers, ways, doubts=tuple(doubts))))
    yield min(found, key=lambda finding: VERDICTS.index(finding.verdict))


RATIO_NAMES = frozenset(RATIOS)


def _end_ways(claim: Claim, df: float | None, side: float) -> Iterator[Way]:
    """Ways to one end of the interval: `side` −1 for the lower, 1 for the upper."""
    level, printed = level_of(claim)
    given = () if printed else (USUAL_LEVEL,)
    for tried in (level,) if printed else (level, 0.90, 0.99):
        tail = (1 - tried) / 2
        normal, fewest = float(z_quantile(tail)), float(t_quantile(tail, df or FEWEST_DF))
        words = () if tried == level else (f"the interval is a {tried:.0%} one",)
        yield Way(_end(side, fewest if df else normal, fewest), words, () if words else given)
        if df and tried == level:
            yield Way(_end(side, normal, normal), (NORMAL,), given)
    c = float(t_quantile((1 - level) / 2, df or FEWEST_DF))
    narrower, wider = other_widths(level, df or FEWEST_DF)
    shift = OFF_CENTRE * c
    yield Way(_end(side, narrower * c - shift, wider * c + shift), (OTHER_METHOD,), given)


def _end(side: float, least: float, most: float) -> Callable[[Box], tuple[Interval, ...]]:
    """b with a half width from `least` to `most` SEs to one side."""

    def implied(box: Box) -> tuple[Interval, ...]:
        b, se = box["b"], box["se"].within(0.0, math.inf)
        narrow, broad = least * se.low, most * se.high
        if side > 0:
            return (Interval(b.low + narrow, b.high + broad),)
        return (Interval(b.low - broad, b.high - narrow),)

    return implied


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
        yield judge(case, Comparison("ratio-from-b", name, numbers, ways, bounds=POSITIVE, doubts=doubts))


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
    limits="Exact, profile and bootstrap intervals are not symmetric about ln ratio: a ratio somewhat off the middle is unchecked, one far off conditional.",
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
    if not _inside(claim.values[name], low, high):
        return

    def implied(box: Box, off: float = 0.0) -> tuple[Interval, ...]:
        middle = log_middle(box["ci_low"], box["ci_high"], off)
        return () if middle is None else (middle,)

    numbers = {name: claim.values[name], "ci_low": low, "ci_high": high}
    foreign = claim.suggests("bootstrap", "bayesian")
    near = any(i.meets(numbers[name].interval()) for i in implied(box_of(numbers), OFF_CENTRE))
    excuses = (
        ("the interval may be a profile-likelihood one, which need not be symmetric",)
        if foreign or near
        else ()
    )
    doubts = ("the interval is a symmetric one of the logarithm; an exact or profile interval need not be",)
    yield judge(
        case,
        Comparison(
            "ratio-centre", name, numbers, (Way(implied),), bounds=POSITIVE, doubts=doubts, excuses=excuses
        ),
    )


def _inside(printed: Printed, low: Printed, high: Printed) -> bool:
    interval = printed.interval()
    return low.interval().low <= interval.high and interval.low <= high.interval().high
