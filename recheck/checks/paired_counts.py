"""Checks of McNemar's test against the numbers of those who changed."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable

import numpy as np

from recheck.checks.compare import Comparison, judge
from recheck.checks.designs import whole
from recheck.checks.groups import link_doubts
from recheck.checks.p_values import ONE_TAILED, judge_p
from recheck.checks.registry import Case, check
from recheck.model import Claim, Finding, Interval, Printed
from recheck.recompute import paired_counts
from recheck.recompute.tails import chi2_tail
from recheck.reconcile.readings import Box, Way

PLAIN, CORRECTED = "χ² has no continuity correction", "χ² has the continuity correction"
EXACT, MID_P = "p is the exact one of the binomial", "p is the mid-P one"


def _changes(case: Case) -> dict[str, Printed] | None:
    """The two numbers of changes that a test is linked to; None where it is linked to anything else."""
    groups = case.groups
    if len(groups) != 2 or not case.claim.says("paired") or any(set(g.values) != {"count"} for g in groups):
        return None
    numbers = {f"count{i}": group.values["count"] for i, group in enumerate(groups, 1)}
    counts = [whole(number) for number in numbers.values()]
    return numbers if all(c is not None for c in counts) and sum(c or 0 for c in counts) > 0 else None


def _value(formula: Callable[[float, float], np.ndarray]) -> Callable[[Box], tuple[Interval, ...]]:
    def implied(box: Box) -> tuple[Interval, ...]:
        b, c = box["count1"].low, box["count2"].low
        if b < 0 or c < 0 or b + c == 0:
            return ()
        value = float(formula(b, c))
        return (Interval(value, value),)

    return implied


@check(
    "chi2-from-changes",
    title="McNemar's χ² against the numbers of those who changed",
    kinds=("chi2-test",),
    quantity="chi2",
    needs=("chi2",),
    beside="the two numbers of changes, told with it",
    formula="χ² = (b − c)² / (b + c), or (|b − c| − 1)² / (b + c) with continuity correction",
    source="McNemar (1947) Psychometrika 12:153-157; Edwards (1948) Psychometrika 13:185-187",
    limits="Conditional at most: which numbers are those of the changes is inferred from the sentence.",
    agrees=(
        "In all, 12 tasters changed from sour to sweet and 3 from sweet to sour (McNemar's test, χ²(1) = 5.40, p = .020).",
    ),
    conditional=(
        "In all, 12 tasters changed from sour to sweet and 3 from sweet to sour (McNemar's test, χ²(1) = 4.50, p = .034).",
    ),
)
def chi2_from_changes(case: Case) -> Iterable[Finding]:
    """Compare χ² with that of the two numbers, with and without continuity correction."""
    changes = _changes(case)
    if changes is None:
        return
    ways = (
        Way(_value(paired_counts.mcnemar_chi2), (), (PLAIN,)),
        Way(_value(paired_counts.mcnemar_chi2_corrected), (), (CORRECTED,)),
    )
    yield judge(
        case,
        Comparison(
            "chi2-from-changes", "chi2", {"chi2": case.claim.values["chi2"], **changes}, ways,
            (case.claim, *case.groups), bounds=Interval(0.0, math.inf), doubts=link_doubts(case),
        ),
    )  # fmt: skip


@check(
    "p-from-changes",
    title="p of McNemar's test against the numbers of those who changed",
    kinds=("chi2-test",),
    quantity="p",
    needs=("p",),
    beside="the two numbers of changes, told with it",
    formula="p = P(X > χ²) with 1 df, with and without continuity correction; exact: 2 P(X ≤ min(b, c)), X binomial (b + c, ½); mid-P: less P(X = b)",
    source="McNemar (1947) Psychometrika 12:153-157; Edwards (1948) Psychometrika 13:185-187; Fagerland, Lydersen & Laake (2013) BMC Med. Res. Methodol. 13:91",
    limits="Conditional at most: which numbers are those of the changes is inferred from the sentence.",
    agrees=(
        "In all, 12 tasters changed from sour to sweet and 3 from sweet to sour (McNemar's test, χ²(1) = 5.40, p = .020).",
    ),
    conditional=(
        "In all, 12 tasters changed from sour to sweet and 3 from sweet to sour (McNemar's test, χ²(1) = 5.40, p = .200).",
    ),
)
def p_from_changes(case: Case) -> Iterable[Finding]:
    """Compare p with that of each form of McNemar's test."""
    changes = _changes(case)
    if changes is None:
        return
    numbers = {"p": case.claim.values["p"], **changes}
    ways = [
        Way(_value(lambda b, c: chi2_tail(paired_counts.mcnemar_chi2(b, c), 1)), (), (PLAIN,)),
        Way(_value(lambda b, c: chi2_tail(paired_counts.mcnemar_chi2_corrected(b, c), 1)), (), (CORRECTED,)),
        Way(_value(paired_counts.mcnemar_exact_p), (), (EXACT,)),
        Way(_value(paired_counts.mcnemar_mid_p), (), (MID_P,)),
    ]
    ways += [Way(_halved(way.implied), (ONE_TAILED,), way.given) for way in ways] if _open(case.claim) else []
    yield judge_p(
        case, "p-from-changes", ways, numbers, claims=(case.claim, *case.groups), doubts=link_doubts(case)
    )


def _open(claim: Claim) -> bool:
    return not claim.suggests("two-tailed")


def _halved(implied: Callable[[Box], tuple[Interval, ...]]) -> Callable[[Box], tuple[Interval, ...]]:
    return lambda box: tuple(Interval(i.low / 2, i.high / 2) for i in implied(box))
