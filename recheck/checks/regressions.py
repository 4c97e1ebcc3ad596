"""Checks of a coefficient against its SE, test, p, confidence interval and ratio."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator, Sequence
from dataclasses import replace

import numpy as np

from recheck.checks.coefficients import coefficient, coefficient_doubts, ratio_of
from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge
from recheck.checks.examples import table
from recheck.checks.groups import unsigned
from recheck.checks.interval_methods import NORMAL, USUAL_LEVEL, other_widths
from recheck.checks.interval_tests import OPEN_DF
from recheck.checks.intervals import (
    OFF_CENTRE,
    OTHER_METHOD,
    ends,
    level_of,
)
from recheck.checks.p_values import ONE_TAILED, UNIT_DF, as_interval, judge_p
from recheck.checks.registry import Case, check
from recheck.model import DISCREPANT, RATIOS, Claim, Finding, Interval
from recheck.recompute import bounds
from recheck.recompute.arrays import quotient_bounds
from recheck.recompute.tails import t_quantile, z_quantile
from recheck.reconcile.readings import Box, Numbers, Way, first_agreement

WALD = "the statistic is Wald's, (b / SE)²"
SAME_SE = "the printed SE is the one that the test rests on, neither robust nor from a bootstrap"
FEWEST_DF = 5.0


def _t_of(box: Box, names: tuple[str, str]) -> Interval:
    """|b| / SE over the box, by the names of the two numbers."""
    b, se = box[names[0]].absolute(), box[names[1]].within(0.0, math.inf)
    return as_interval(quotient_bounds(*(np.asarray(x) for x in (b.low, b.high, se.low, se.high))))


def _square(interval: Interval) -> Interval:
    return Interval(interval.low**2, interval.high**2)


def _se_doubts(claim: Claim) -> tuple[str, ...]:
    return (SAME_SE,) if claim.suggests("robust", "bootstrap") else ()


@check(
    "t-from-b",
    title="t, z, F or Wald's χ² of a coefficient or difference against it and its SE",
    kinds=("regression", "t-test", "z-test", "comparison"),
    quantity="t",
    needs=(),
    beside="b or β with SE, or a mean difference with its SE; t, z, F or χ²",
    formula="t = b / SE; F = Wald's χ² = (b / SE)²",
    source="Wald (1943) Transactions of the American Mathematical Society 54:426-482; Fisher (1925) Statistical Methods for Research Workers",
    limits="Likelihood-ratio and score tests have statistics of their own; so have tests on another (robust) SE than the printed one. A β is compared only where other rows of its table show that the SE is its own.",
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
    claim, names = case.claim, _tested(case.claim)
    if names is None:
        return
    for name in ("t", "z", "chi2", "F"):
        if name not in claim.values or (name == "F" and not _of_one_df(claim)):
            continue
        numbers = {n: claim.values[n] for n in (name, *names)}
        numbers[name] = unsigned(numbers[name])
        squared = Way(lambda box: (_square(_t_of(box, names)),))
        plain = Way(lambda box: (_t_of(box, names),))
        wald = (replace(squared, unstated=(WALD,), alone=True),) if claim.kind == "regression" else ()
        ways = (squared,) if name in ("chi2", "F") else (plain, *wald)
        doubts = [*_se_doubts(claim), *coefficient_doubts(claim, names[0])]
        if name == "chi2":
            doubts.append("χ² is that of Wald's test, not of the likelihood ratio or the score")
        yield judge(
            case, Comparison("t-from-b", name, numbers, ways, bounds=NOT_NEGATIVE, doubts=tuple(doubts))
        )


def _tested(claim: Claim) -> tuple[str, str] | None:
    """Names of what is tested and of its SE: a mean difference with its own, else a coefficient."""
    if {"mean_difference", "se_difference"} <= claim.values.keys():
        return "mean_difference", "se_difference"
    name = coefficient(claim)
    return (name, "se") if name and "se" in claim.values else None


def _of_one_df(claim: Claim) -> bool:
    """Tell whether F is that of one coefficient, so the square of its t."""
    return claim.kind == "regression" and ("df1" not in claim.values or claim.values["df1"].value == 1)


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
    if values.keys() & {"z", "chi2", "F"} or {"t", "df"} <= values.keys():
        return
    name = coefficient(claim) or ""
    names = ("t",) if "t" in values else (name, "se")
    if not set(names) <= values.keys():
        return
    logistic = ratio_of(claim, name) is not None
    df = values.get("df")
    known = df is not None and df.number > 0
    dfs = Interval(df.number, df.number) if known and df is not None else Interval(FEWEST_DF, OPEN_DF[-1])
    if logistic:
        dfs = Interval(UNIT_DF, UNIT_DF)

    def implied(box: Box, factor: float = 1.0) -> tuple[Interval, ...]:
        t = box["t"].absolute() if "t" in box else _t_of(box, (name, "se"))
        p = as_interval(bounds.p_from_t_bounds(t.low, t.high, dfs.low, dfs.high, 2))
        return (Interval(factor * p.low, factor * p.high),)

    ways = [Way(implied)]
    if not claim.suggests("two-tailed"):
        ways.append(Way(lambda box: implied(box, 0.5), (ONE_TAILED,)))
    doubts = [*_se_doubts(claim), *(() if "t" in values else coefficient_doubts(claim, name))]
    if logistic:
        doubts.append("p is that of Wald's test of this coefficient, not of the likelihood ratio")
    elif not known:
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
    needs=("se", "ci_low", "ci_high"),
    beside="b, or β",
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
    claim, name = case.claim, coefficient(case.claim)
    if name is None or claim.interval_of not in (None, name):
        return
    if claim.interval_of is None and any(name in claim.values for name in RATIOS):
        return
    low, high = ends(claim)
    if low.value > high.value:
        return
    df = claim.values.get("df")
    known = df is not None and df.number > 0
    doubts = [*_se_doubts(claim), *coefficient_doubts(claim, name)]
    if "z" in claim.values:
        doubts.append("the interval is Wald's, as the test is")
    elif not known:
        doubts.append("the interval is Wald's (no df are printed; those from 5 up were tried)")
    dfs = UNIT_DF if "z" in claim.values else df.number if known and df is not None else None
    sides = (("ci_low", low, -1.0), ("ci_high", high, 1.0))
    told = [{end: printed, name: claim.values[name], "se": claim.values["se"]} for end, printed, _ in sides]
    ways = [tuple(_end_ways(claim, name, dfs, side)) for _, _, side in sides]
    alike = _by_one_way(told, ways)
    found = [
        judge(
            case,
            Comparison(
                "ci-from-b", end, numbers, tuple(w for w, fits in zip(by, alike, strict=True) if fits),
                doubts=tuple(doubts), excuses=_resampled(claim),
            ),
        )
        for (end, _, _), numbers, by in zip(sides, told, ways, strict=True)
    ]  # fmt: skip
    yield min(found, key=lambda finding: WORST_FIRST.index(finding.verdict))


WORST_FIRST = (*DISCREPANT, "conditional", "unchecked", "agrees")


def _resampled(claim: Claim) -> tuple[str, ...]:
    if claim.suggests("bootstrap"):
        return ("the interval may come from a bootstrap, of which the text speaks",)
    return ("the interval may be a credible one",) if claim.suggests("bayesian") else ()


def _by_one_way(told: Sequence[Numbers], ways: Sequence[Sequence[Way]]) -> list[bool]:
    """Which ways may be followed: those that are stated, and those by which both ends fit."""
    ends_fit = [
        [first_agreement(next(iter(numbers)), numbers, (way,)) is not None for way in by]
        for numbers, by in zip(told, ways, strict=True)
    ]
    return [not way.unstated or (low and high) for way, low, high in zip(ways[0], *ends_fit, strict=True)]


def _end_ways(claim: Claim, name: str, df: float | None, side: float) -> Iterator[Way]:
    """Ways to one end of the interval: `side` −1 for the lower, 1 for the upper."""
    level, printed = level_of(claim)
    given = () if printed else (USUAL_LEVEL,)
    for tried in (level,) if printed else (level, 0.90, 0.99):
        tail = (1 - tried) / 2
        normal, fewest = float(z_quantile(tail)), float(t_quantile(tail, df or FEWEST_DF))
        words = () if tried == level else (f"the interval is a {tried:.0%} one",)
        yield Way(_end(name, side, fewest if df else normal, fewest), words, () if words else given)
        if df and tried == level and df < UNIT_DF:
            yield Way(_end(name, side, normal, normal), (NORMAL,), given)
    c = float(t_quantile((1 - level) / 2, df or FEWEST_DF))
    narrower, wider = other_widths(level, df or FEWEST_DF)
    shift = OFF_CENTRE * c
    yield Way(_end(name, side, narrower * c - shift, wider * c + shift), (OTHER_METHOD,), given)


def _end(name: str, side: float, least: float, most: float) -> Callable[[Box], tuple[Interval, ...]]:
    """The coefficient with a half width from `least` to `most` SEs to one side."""

    def implied(box: Box) -> tuple[Interval, ...]:
        b, se = box[name], box["se"].within(0.0, math.inf)
        narrow, broad = least * se.low, most * se.high
        if side > 0:
            return (Interval(b.low + narrow, b.high + broad),)
        return (Interval(b.low - broad, b.high - narrow),)

    return implied
