"""Checks of the confidence interval of a ratio or a difference of risks against the counts of its two groups."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator

import numpy as np

from recheck.checks.examples import table
from recheck.checks.groups import unsigned
from recheck.checks.interval_choice import Ends, Method, judge_interval
from recheck.checks.intervals import ends, level_of
from recheck.checks.registry import Case, check
from recheck.checks.risk_tables import (
    Cells,
    Values,
    as_given,
    cells_of,
    doubts_of,
    excuses_of,
    range_of,
    risk_layout,
    turned,
)
from recheck.checks.risks import (
    RATIO_MEASURES,
    arrangement,
    difference_of,
    difference_ways,
    ratio_ways,
    units_of,
)
from recheck.checks.tabulated import Layout
from recheck.model import Finding, Interval, Printed
from recheck.recompute import risk_intervals as simple
from recheck.recompute.risks import risk_difference
from recheck.reconcile.readings import Box, Way, box_of, first_agreement

Pair = tuple[Values, Values]
Formula = Callable[..., Pair]

WALD, HALF = "Wald's", "Wald's with ½ added to each count"
SCORE, KOOPMAN = "Miettinen and Nurminen's score interval", "the score interval without N/(N − 1)"
PROFILE, EXACT, MID_P = "the profile likelihood", "the exact one", "the mid-P one"
KINDS = (
    "Wald's, with and without ½, score, likelihood, exact; or for differences Newcombe's, Agresti and Caffo's"
)


def _ratio_formulas(name: str) -> Iterator[tuple[str, Formula]]:
    """All formulas for the interval of a ratio, the commonest first."""
    from recheck.recompute import score_intervals as score

    if name == "or":
        yield WALD, simple.odds_ratio_wald
        yield PROFILE, score.odds_ratio_likelihood
        yield EXACT, _exact_odds(1.0)
        yield SCORE, score.odds_ratio_score
        yield HALF, simple.odds_ratio_wald_half
        yield MID_P, _exact_odds(0.5)
        yield KOOPMAN, _biased(score.odds_ratio_score)
        return
    yield WALD, simple.risk_ratio_wald
    yield KOOPMAN, _biased(score.risk_ratio_score)
    yield SCORE, score.risk_ratio_score
    yield PROFILE, score.risk_ratio_likelihood
    yield HALF, simple.risk_ratio_wald_half
    yield "that of a ratio of rates", simple.risk_ratio_rates


def _difference_formulas() -> Iterator[tuple[str, Formula]]:
    from recheck.recompute import score_intervals as score

    yield WALD, simple.difference_wald
    yield "Newcombe's", simple.difference_newcombe
    yield SCORE, score.difference_score
    yield "Wald's with continuity correction", simple.difference_wald_corrected
    yield "Newcombe's with continuity correction", _corrected(simple.difference_newcombe)
    yield "Agresti and Caffo's", simple.difference_agresti_caffo
    yield KOOPMAN, _biased(score.difference_score)
    yield PROFILE, score.difference_likelihood


def _biased(formula: Formula) -> Formula:
    return lambda *counts: formula(*counts, unbiased=False)


def _corrected(formula: Formula) -> Formula:
    return lambda *counts: formula(*counts, corrected=True)


def _exact_odds(own: float) -> Formula:
    def interval(a: Values, b: Values, c: Values, d: Values, level: float) -> Pair:
        from recheck.recompute.exact_tests import odds_ratio_exact

        return odds_ratio_exact(np.stack((a, b, c, d), axis=-1).reshape(-1, 2, 2), level, own=own)

    return interval


def _methods(
    formulas: Iterable[tuple[str, Formula]],
    layout: Layout,
    level: float,
    of: Callable[[Cells], Cells],
    unit: float,
) -> Iterator[Method]:
    for words, formula in formulas:

        def both(box: Box, formula: Formula = formula) -> Ends:
            cells = cells_of(box, layout)
            if cells is None:
                return (), ()
            low, high = formula(*of(cells), level)
            return range_of(unit * low), range_of(unit * high)

        yield Method(words, both)


@check(
    "ratio-ci-from-counts",
    title="confidence interval of an odds or risk ratio against the counts of its two groups",
    kinds=("estimate",),
    quantity="ci_low",
    needs=("ci_low", "ci_high"),
    beside="OR or RR that the counts of two groups give",
    formula="ln OR ∓ z √(1/a + 1/b + 1/c + 1/d), ln RR ∓ z √(1/a − 1/(a + b) + 1/c − 1/(c + d)); score, profile-likelihood, exact and mid-P intervals by root finding",
    source="Woolf (1955) Ann. Hum. Genet. 19:251-253; Katz et al. (1978) Biometrics 34:469-474; Miettinen & Nurminen (1985) Stat. Med. 4:213-226; Koopman (1984) Biometrics 40:513-517; Cornfield (1956) Proc. Third Berkeley Symp. 4:135-148",
    limits="Conditional at most: the method is seldom named, and there are others (bootstrap, robust, clustered). Nothing is said where the counts give another ratio.",
    agrees=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | Crude OR (95% CI)",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | 0.49 (0.26 to 0.93)",
        ),
    ),
    conditional=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | Crude OR (95% CI)",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | 0.49 (0.36 to 0.66)",
        ),
    ),
)
def ratio_interval_from_counts(case: Case) -> Iterable[Finding]:
    """Compare an interval with those of the counts, the groups in the order that gives the ratio."""
    claim, layout = case.claim, risk_layout(case)
    name = claim.interval_of
    if layout is None or name not in RATIO_MEASURES or name not in claim.values or _reversed(case):
        return
    fitting = _agreement(name, claim.values[name], tuple(ratio_ways(case, layout, name)), layout)
    if fitting is None:
        return
    level, _ = level_of(claim)

    of = arrangement(fitting)
    methods = tuple(_methods(_ratio_formulas(name), layout, level, of, 1.0))
    yield _judged(case, "ratio-ci-from-counts", layout, methods, Interval(0.0, math.inf))


@check(
    "risk-difference-ci-from-counts",
    title="confidence interval of a difference of risks against the counts of its two groups",
    kinds=("estimate", "comparison"),
    quantity="ci_low",
    needs=("ci_low", "ci_high"),
    beside="RD, or a difference in percentage points, that the counts of two groups give",
    formula="RD ∓ z √(p1(1 − p1)/n1 + p2(1 − p2)/n2); Newcombe's from two Wilson intervals; score and profile-likelihood intervals by root finding",
    source="Newcombe (1998) Stat. Med. 17:873-890; Miettinen & Nurminen (1985) Stat. Med. 4:213-226; Agresti & Caffo (2000) Am. Stat. 54:280-288; Mee (1984) Biometrics 40:1175-1176",
    limits="Conditional at most: the method is seldom named, and there are others. Nothing is said where the counts give another difference.",
    agrees=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | Risk difference (95% CI)",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | −9.9% (−18.7% to −1.1%)",
        ),
    ),
    conditional=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | Risk difference (95% CI)",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | −9.9% (−14.1% to −5.8%)",
        ),
    ),
)
def difference_interval_from_counts(case: Case) -> Iterable[Finding]:
    """Compare an interval with those of the counts, the groups in the order that gives the sign."""
    claim, layout, told = case.claim, risk_layout(case), difference_of(case)
    if layout is None or told is None or claim.interval_of != told[0] or _reversed(case):
        return
    name, printed = told
    found = _agreement(
        name, unsigned(printed), tuple(difference_ways(case, layout, unsigned(printed))), layout
    )
    if found is None:
        return
    level, _ = level_of(claim)
    unit = _unit(case, printed)
    of = as_given if _same_side(case, layout) else turned
    methods = tuple(_methods(_difference_formulas(), layout, level, of, unit))
    yield _judged(case, "risk-difference-ci-from-counts", layout, methods, Interval(-100.0, 100.0))


def told_by_counts(case: Case) -> bool:
    """Tell whether the counts of a ratio give it, so that its interval is compared with theirs."""
    claim, layout = case.claim, risk_layout(case)
    name = claim.interval_of
    if layout is None or name not in RATIO_MEASURES or name not in claim.values or excuses_of(case):
        return False
    return _agreement(name, claim.values[name], tuple(ratio_ways(case, layout, name)), layout) is not None


def _same_side(case: Case, layout: Layout) -> bool:
    """Tell whether the interval lies on the side of zero on which the first group less the second does."""
    cells = cells_of(box_of(layout.numbers), layout)
    low, high = ends(case.claim)
    difference = 0.0 if cells is None else float(risk_difference(*cells).mean())
    return difference * (low.number + high.number) >= 0


def _reversed(case: Case) -> bool:
    low, high = case.claim.values["ci_low"], case.claim.values["ci_high"]
    return low.value > high.value


def _unit(case: Case, printed: Printed) -> float:
    """100 where the ends are percentage points: one of them, or the difference, lies beyond 1."""
    ends = (case.claim.values["ci_low"], case.claim.values["ci_high"])
    return 100.0 if len(units_of(printed)) == 1 or any(len(units_of(end)) == 1 for end in ends) else 1.0


def _agreement(name: str, printed: Printed, ways: tuple[Way, ...], layout: Layout) -> Way | None:
    """The way in which the counts give the estimate itself."""
    found = first_agreement(name, {name: printed, **layout.numbers}, ways)
    return found.way if found else None


def _judged(case: Case, name: str, layout: Layout, methods: Iterable[Method], bounds: Interval) -> Finding:
    claim = case.claim
    numbers = {"ci_low": claim.values["ci_low"], "ci_high": claim.values["ci_high"], **layout.numbers}
    foreign = ("bootstrap",) if claim.suggests("bootstrap") else ()
    excuses = (*excuses_of(case), *("the interval may come from a bootstrap" for _ in foreign))
    return judge_interval(
        case, name, numbers, tuple(methods), claims=(claim, *case.groups), bounds=bounds, kinds=KINDS,
        doubts=doubts_of(case, layout), excuses=excuses,
    )  # fmt: skip
