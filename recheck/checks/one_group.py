"""Checks of a one-sample or paired t against the mean and SD of its one group, or of the differences."""

from __future__ import annotations

import math
from collections.abc import Iterable

from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge, unchecked
from recheck.checks.designs import SE_READING, known, whole
from recheck.checks.groups import link_doubts, unsigned
from recheck.checks.models import foreign_model
from recheck.checks.registry import Case, check
from recheck.model import EXACT_VALUE, N_OF_GROUP, OF_DIFFERENCES, Claim, Finding, Interval, Printed
from recheck.recompute.one_sample import one_sample_t_bounds
from recheck.reconcile.readings import Box, Numbers, Way

AGAINST_ZERO = "t tests the mean of the differences against 0"
ROUNDED_VALUE = "the comparison value is rounded"
N_FROM_DF = "n is df + 1"
PAIRS_IN_WORDS = "t tests these differences against 0, and n is df + 1"
NAMED_VALUE = "the mean is tested against the value that the sentence names"
OTHER_DF = "df and n do not belong to a test of one sample or of pairs"


@check(
    "t-from-one-group",
    title="t of one sample against its mean, SD, n and comparison value",
    kinds=("t-test",),
    quantity="t",
    needs=("t",),
    beside="df; one linked group with mean and SD or SE; the value that it is compared with, or words that it is one of differences",
    formula="t = (M − value) / (SD / √n), df = n − 1",
    source="Student (1908) Biometrika 6:1-25",
    limits="Conditional at most where the sentence does not say that the test is one of one sample or of pairs, or does not print n.",
    agrees=(
        "The loaves (M = 503.2 g, SD = 8.1, n = 24) were heavier than the target of 500 g in a one-sample t test, t(23) = 1.94, p = .065.",
    ),
    conditional=("The loaves (M = 503.2 g, SD = 8.1) were heavier than the target of 500 g, t(23) = 2.94.",),
    inconsistent=(
        "The loaves (M = 503.2 g, SD = 8.1, n = 24) were heavier than the target of 500 g in a one-sample t test, t(23) = 2.94, p = .007.",
    ),
)
def t_from_one_group(case: Case) -> Iterable[Finding]:
    """Compare |t| with what the mean of one group implies, tested against the printed value or against 0."""
    claim = case.claim
    if len(case.groups) != 1 or "df" not in claim.values:
        return
    group = case.groups[0]
    value = claim.values.get("comparison_value")
    spread = "sd" if "sd" in group.values else "se"
    of_differences = OF_DIFFERENCES in claim.notes
    if "mean" not in group.values or spread not in group.values or (value is None and not of_differences):
        return
    numbers = {"mean": group.values["mean"], spread: group.values[spread]}
    if value is not None:
        numbers["comparison_value"] = value
    n = whole(group.values.get("n"))
    if n is not None:
        numbers["n"] = group.values["n"]
    doubts = (
        []
        if claim.says("one-sample") and value is not None
        else [AGAINST_ZERO if value is None else NAMED_VALUE]
    )
    if n is None or N_OF_GROUP in group.notes:
        doubts.append(N_FROM_DF)
    yield from _judged(case, "t-from-one-group", numbers, spread, n, (claim, group), doubts)


@check(
    "t-from-difference",
    title="paired t against the mean and SD of the differences",
    kinds=("t-test",),
    quantity="t",
    needs=("t", "sd"),
    beside="df; the mean difference",
    formula="t = difference / (SD / √n), df = n − 1",
    source="Student (1908) Biometrika 6:1-25",
    limits="Only where words or n say that the test is one of pairs: else the SD may be that of groups. Conditional at most where neither n nor the kind of test is told.",
    agrees=(
        "Bench scores rose in a paired t test (mean difference = 3.2, SD = 4.1, n = 24), t(23) = 3.82, p < .001.",
    ),
    inconsistent=(
        "Bench scores rose in a paired t test (mean difference = 3.2, SD = 4.1, n = 24), t(23) = 2.82, p = .010.",
    ),
)
def t_from_difference(case: Case) -> Iterable[Finding]:
    """Compare |t| with the mean and SD of differences that are printed with it."""
    claim, values = case.claim, case.claim.values
    of_differences = OF_DIFFERENCES in claim.notes
    mean = next(
        (
            name
            for name in ("mean_difference", "estimate")
            if name in values and (of_differences or name != "estimate")
        ),
        None,
    )
    if "df" not in values or mean is None:
        return
    sizes = [name for name in ("n", "N") if whole(values.get(name)) is not None]
    n = whole(values[sizes[0]]) if sizes else None
    numbers = {"mean_difference": values[mean], "sd": values["sd"]}
    if sizes:
        numbers["n"] = values[sizes[0]]
    told = claim.says("paired", "one-sample") or (n is not None and whole(values["df"]) == n - 1)
    if (told or of_differences) and not claim.says("independent", "welch", "pooled", "between-groups"):
        doubts = [] if told else [PAIRS_IN_WORDS]
        yield from _judged(case, "t-from-difference", numbers, "sd", n, (claim,), doubts)


def _judged(
    case: Case, name: str, numbers: Numbers, spread: str, n: int | None, claims: tuple[Claim, ...], doubts: list[str]
) -> Iterable[Finding]:  # fmt: skip
    """Judge |t| where df fit the design: n − 1, n being df + 1 where it is not printed."""
    df = whole(case.claim.values["df"])
    if df is None or df < 1:
        return
    if n is not None and n != df + 1:
        yield unchecked(case, name, "t", OTHER_DF, claims)
        return
    if numbers[spread].interval().high < 0:
        return
    mean = "mean" if "mean" in numbers else "mean_difference"
    foreign = foreign_model(claims, fitted=n is not None)
    unlabelled = any(c.says("spread-unlabelled") for c in claims)
    ways = list(
        _ways(
            mean,
            spread,
            df + 1,
            numbers.get("comparison_value"),
            unlabelled=unlabelled,
            told_exact=EXACT_VALUE in case.claim.notes,
        )
    )
    told = {"t": unsigned(case.claim.values["t"]), "df": case.claim.values["df"], **numbers}
    yield judge(
        case,
        Comparison(
            name, "t", told, ways, claims, bounds=NOT_NEGATIVE, doubts=(*doubts, *link_doubts(case)),
            excuses=(foreign,) if foreign else (),
        ),
    )  # fmt: skip


def _ways(
    mean: str, spread: str, n: int, value: Printed | None, *, unlabelled: bool, told_exact: bool
) -> Iterable[Way]:
    """|t| with the spread as labelled, an unlabelled one also as SE; the comparison value as it stands, or rounded."""
    for as_se in (False, True) if unlabelled else (False,):
        factor = math.sqrt(n) if as_se or spread == "se" else 1.0
        words = (SE_READING,) if as_se else ()
        for exact in (True,) if value is None or told_exact else (True, False):

            def implied(box: Box, factor: float = factor, exact: bool = exact) -> tuple[Interval, ...]:
                m, s = box[mean], box[spread]
                fixed = Interval(0.0, 0.0) if value is None else box["comparison_value"]
                if value is not None and exact:
                    fixed = Interval(value.number, value.number)
                ends = one_sample_t_bounds(
                    m.low, m.high, s.low * factor, s.high * factor, n, fixed.low, fixed.high
                )
                return (known(float(ends[0]), float(ends[1])).absolute(),)

            yield Way(implied, words if exact else (*words, ROUNDED_VALUE))
