"""Checks of odds ratio, risk ratio and risk difference against the counts of two groups."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import replace

import numpy as np

from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge
from recheck.checks.examples import table
from recheck.checks.groups import unsigned
from recheck.checks.registry import Case, check
from recheck.checks.risk_tables import (
    Cells,
    Measure,
    Values,
    as_given,
    by_hand,
    cells_of,
    doubts_of,
    excuses_of,
    other_event,
    range_of,
    risk_layout,
    spelled_out,
    transposed,
    turned,
)
from recheck.checks.tabulated import Layout
from recheck.model import DISCREPANT, Finding, Interval, Printed, Remedy, shown
from recheck.recompute import risks
from recheck.reconcile.readings import Box, Numbers, Way, agrees_as_printed

TURNED = "the second group is compared with the first"
HALF = "½ is added to each count"
BY_HAND = "it was worked out from the rounded percentages"
OTHER_EVENT = "it compares the cases without the event"
TRANSPOSED = "it compares the shares of the groups among cases with and without the event"
CONDITIONAL = "it is the conditional estimate of Fisher's exact test"
MEDIAN = "it is the median-unbiased estimate of the mid-P method"
RISKS = "it is a ratio of risks, not of rates"
PER_CENT = "in percentage points"
RATIO_MEASURES: dict[str, Measure] = {"or": risks.odds_ratio, "rr": risks.risk_ratio}


def _over(
    layout: Layout, measure: Measure, of: Callable[[Cells], Cells]
) -> Callable[[Box], tuple[Interval, ...]]:
    """The range of a measure over all tables that the printed counts can stand for, rearranged first."""

    def implied(box: Box) -> tuple[Interval, ...]:
        cells = cells_of(box, layout)
        return () if cells is None else range_of(measure(*of(cells)))

    return implied


REARRANGED = {OTHER_EVENT: other_event, TRANSPOSED: transposed}
"""What an RR may compare instead; an OR is the same, or turned round."""


def _both(first: Callable[[Cells], Cells], second: Callable[[Cells], Cells]) -> Callable[[Cells], Cells]:
    return lambda cells: second(first(cells))


def arrangement(way: Way) -> Callable[[Cells], Cells]:
    """How the counts stand in a way: as given, turned, or rearranged first."""
    first = next((REARRANGED[words] for words in way.unstated if words in REARRANGED), as_given)
    return _both(first, turned if TURNED in way.given else as_given)


def _always(implied: tuple[Interval, ...]) -> Callable[[Box], tuple[Interval, ...]]:
    return lambda _: implied


def ratio_ways(case: Case, layout: Layout, name: str) -> Iterator[Way]:
    """A ratio by each formula that goes by its name, either group compared with the other."""
    measure, shares = RATIO_MEASURES[name], by_hand(case)

    def with_half(a: Values, b: Values, c: Values, d: Values) -> Values:
        return measure(*risks.with_half(a, b, c, d))

    for of, given in ((as_given, ()), (turned, (TURNED,))):
        yield Way(_over(layout, measure, of), (), given)
        yield Way(_over(layout, with_half, of), (HALF,), given)
        if name == "rr":
            for words, rearranged in REARRANGED.items():
                yield Way(_over(layout, measure, _both(rearranged, of)), (words,), given)
        else:
            yield Way(_over(layout, _exact, of), (CONDITIONAL,), given, costly=True)
            yield Way(_over(layout, _median, of), (MEDIAN,), given, costly=True)
        if shares is not None:
            yield Way(_always(range_of(measure(*of(shares)))), (BY_HAND,), given)


def _exact(a: Values, b: Values, c: Values, d: Values) -> Values:
    from recheck.recompute.exact_tests import conditional_odds_ratio

    return conditional_odds_ratio(np.stack((a, b, c, d), axis=-1).reshape(-1, 2, 2))


def _median(a: Values, b: Values, c: Values, d: Values) -> Values:
    from recheck.recompute.exact_tests import median_unbiased_odds_ratio

    return median_unbiased_odds_ratio(np.stack((a, b, c, d), axis=-1).reshape(-1, 2, 2))


@check(
    "ratio-from-counts",
    title="odds or risk ratio against the counts of its two groups",
    kinds=("estimate",),
    quantity="or",
    needs=(),
    beside="OR or RR, linked to the counts of two groups",
    formula="OR = (a/b) / (c/d), RR = (a/(a + b)) / (c/(c + d)), a and c the cases with the event, b and d those without it",
    source="Cornfield (1951) J. Natl. Cancer Inst. 11:1269-1275; Haldane (1956) Ann. Hum. Genet. 20:309-311; Fisher (1935) J. R. Stat. Soc. 98:39-82",
    limits="Conditional at most where the text does not call the ratio crude (unadjusted, univariate), the link is one of prose, or no other row of the table shows that its ratios are those of its counts. Which group is the reference is the authors' choice. Adjusted, matched, weighted and rate ratios are not rebuilt.",
    agrees=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | Crude OR (95% CI)",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | 0.49 (0.26 to 0.93)",
        ),
    ),
    conditional=(
        "A split crust was found in 17/139 (12.2%) steamed and 31/140 (22.1%) dry loaves (RR = 0.65, 95% CI 0.32 to 0.95).",
    ),
    inconsistent=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | Crude OR (95% CI)",
            "Dark crust, n/N (%) | 40/139 (28.8) | 52/140 (37.1) | 0.68 (0.41 to 1.13)",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | 0.55 (0.26 to 0.93)",
        ),
    ),
    unchecked=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | Adjusted OR (95% CI)",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | 0.55 (0.26 to 0.93)",
        ),
    ),
)
def ratio_from_counts(case: Case) -> Iterable[Finding]:
    """Compare a printed odds or risk ratio with that of the counts, either group first."""
    layout = risk_layout(case)
    if layout is None:
        return
    for name in RATIO_MEASURES:
        if name not in case.claim.values:
            continue
        numbers = {name: case.claim.values[name], **layout.numbers}
        doubts = doubts_of(case, layout)
        if name == "rr" and not spelled_out(case.claim, "risk ratio", "relative risk", "prevalence ratio"):
            doubts = (*doubts, RISKS)
        found = judge(
            case,
            Comparison(
                "ratio-from-counts", name, numbers, tuple(ratio_ways(case, layout, name)), (case.claim, *case.groups),
                bounds=NOT_NEGATIVE, doubts=doubts, excuses=excuses_of(case),
            ),
        )  # fmt: skip
        yield _with_label_slip(case, layout, name, numbers, found)


def _with_label_slip(case: Case, layout: Layout, name: str, numbers: Numbers, found: Finding) -> Finding:
    """Add the slip that the other of both ratios was printed under this name."""
    other = "rr" if name == "or" else "or"
    if found.verdict not in (*DISCREPANT, "conditional") or other in case.claim.values:
        return found
    ways = [way for way in ratio_ways(case, layout, other) if not way.unstated]
    if not agrees_as_printed(other, {**layout.numbers, other: numbers[name]}, ways):
        return found
    text = f"if what is printed as {shown(name)} were {shown(other)}, the numbers would agree"
    slip = Remedy("slip", name, text, change=f"{shown(name)} → {shown(other)}")
    return replace(found, reconciled_by=(slip, *found.reconciled_by))


def difference_of(case: Case) -> tuple[str, Printed] | None:
    """The printed difference of two risks, under the name that it has."""
    for name in ("rd", "mean_difference", "estimate"):
        if name in case.claim.values:
            return name, case.claim.values[name]
    return None


def units_of(printed: Printed) -> tuple[float, ...]:
    """What a difference of risks is multiplied by as printed: 100 for percentage points; either where it may be one."""
    if printed.percent or abs(printed.value) > 1:
        return (100.0,)
    return (1.0, 100.0)


def difference_ways(case: Case, layout: Layout, printed: Printed) -> Iterator[Way]:
    """The absolute difference of both risks, as a share or in percentage points."""
    shares = by_hand(case)
    for unit in units_of(printed):
        measure = _in_units(unit)
        given = (PER_CENT,) if unit != 1 and not printed.percent else ()
        yield Way(_over(layout, measure, as_given), (), given)
        if shares is not None:
            yield Way(_always(range_of(measure(*shares))), (BY_HAND,), given)


def _in_units(unit: float) -> Measure:
    return lambda a, b, c, d: np.asarray(unit * np.abs(risks.risk_difference(a, b, c, d)))


@check(
    "risk-difference-from-counts",
    title="difference of two risks against the counts of its two groups",
    kinds=("estimate", "comparison"),
    quantity="rd",
    needs=(),
    beside="RD, or a difference in percentage points, linked to the counts of two groups",
    formula="RD = a/(a + b) − c/(c + d), a and c the cases with the event, b and d those without it",
    source="Fleiss (1981) Statistical Methods for Rates and Proportions, 2nd ed.",
    limits="Conditional at most where the text does not call the difference crude or the link is one of prose. The sign is the authors' choice. Adjusted, stratified and weighted differences are not rebuilt.",
    agrees=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | Risk difference (95% CI)",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | −9.9% (−18.7% to −1.1%)",
        ),
    ),
    conditional=(
        "A split crust was found in 17/139 (12.2%) steamed and 31/140 (22.1%) dry loaves (risk difference −8.8%, 95% CI −18.7% to −1.1%).",
    ),
)
def difference_from_counts(case: Case) -> Iterable[Finding]:
    """Compare a printed difference of risks with that of the counts."""
    layout, told = risk_layout(case), difference_of(case)
    if layout is None or told is None:
        return
    name, printed = told
    numbers = {name: unsigned(printed), **layout.numbers}
    yield judge(
        case,
        Comparison(
            "risk-difference-from-counts", name, numbers, tuple(difference_ways(case, layout, unsigned(printed))),
            (case.claim, *case.groups), bounds=NOT_NEGATIVE, doubts=doubts_of(case, layout), excuses=excuses_of(case),
        ),
    )  # fmt: skip
