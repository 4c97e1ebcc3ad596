"""Checks of a result that is told in two places."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from dataclasses import replace
from typing import get_args

from recheck.checks.compare import Comparison, judge
from recheck.checks.groups import unsigned
from recheck.checks.p_values import P_RANGE
from recheck.checks.registry import Case, Twin, check
from recheck.model import P_IN_WORDS, RATIOS, Claim, ClaimKind, Finding, Interval, Printed, shown
from recheck.model.figures import printed_text, whereabouts
from recheck.reconcile.readings import ELSEWHERE, Box, Way, agrees_as_printed

COMPARED = (
    "t", "F", "chi2", "z", "r", "u", "w", "df", "df1", "df2", "p", "mean", "sd", "se", "median", "q1", "q3", "iqr", "min", "max",
    "mean_difference", "se_difference", "ci_low", "ci_high", "d", "g", "delta", "d_z", "d_av", "d_rm", "r_pb",
    "eta2", "partial_eta2", "generalized_eta2", "omega2", "epsilon2", "f", "f2", "phi", "cramers_v",
    "b", "beta", "intercept", "estimate", "r2", "adjusted_r2", "delta_r2", "or", "rr", "rd", "hr", "count", "percent", "total",
    "ss", "ms", "ss_error", "ms_error", "n", "N",
)  # fmt: skip
"""Quantities that must be the same wherever one result is told, in the order in which they are compared."""

EITHER_ORDER = frozenset(
    ("t", "z", "d", "g", "delta", "d_z", "d_av", "d_rm", "r_pb", "mean_difference", "rd", "phi")
)
"""Quantities whose sign is the authors' choice of what is subtracted."""
EITHER_CODING = frozenset(("r", "b", "beta", "estimate"))
SIZES = frozenset(("n", "N", "total"))
SPREADS = frozenset(("sd", "se"))

TURNED = "a variable is coded the other way round in one of the two places"
INVERTED = "the ratio is turned round in one of the two places"
TIE = "a number that ends in 5 was rounded up in one place and down in the other"
HALVED = "p is one-tailed in one of the two places"
SAME_CASES = "the same cases entered in both places"


@check(
    "told-twice",
    title="the same result in two places",
    kinds=get_args(ClaimKind),
    quantity="",
    needs=(),
    beside="the same result told again elsewhere (same outcome, groups and statistic)",
    formula="every quantity that is printed in both places stands for one true value",
    source="common practice, no source",
    limits="Conditional where it is not sure that both are one result, or that the same cases entered; another number of decimals is no difference.",
    agrees=(
        "Abstract\n\nSteamed loaves rose higher than dry ones, t(34) = 3.23, p = .003.\n\n"
        "Results\n\nSteamed loaves rose higher than dry ones, t(34) = 3.2, p < .01.",
    ),
    conditional=(
        "Abstract\n\nSteamed loaves rose higher than dry ones, t(34) = 3.23, p = .003.\n\n"
        "Results\n\nSteamed loaves rose higher than dry ones, t(34) = 3.18, p = .003.",
    ),
)
def told_twice(case: Case) -> Iterable[Finding]:
    """Compare all numbers that one result has in two places."""
    for twin in case.twins:
        yield from _both_places(case, twin)


def _both_places(case: Case, twin: Twin) -> Iterator[Finding]:
    pairs = list(_comparisons(case.claim, twin.claim))
    differing = [p for p in pairs if not agrees_as_printed(p.quantity, p.numbers, p.ways)]
    if pairs and not differing:
        found = judge(case, pairs[0])
        alike = ", ".join(shown(pair.quantity) for pair in pairs)
        text = f"Printed alike in two places, here and in {_told(twin.claim)}: {alike}."
        yield replace(found, message=text)
        return
    for pair in differing:
        doubts = (*pair.doubts, *_doubts(case.claim, twin, pair.quantity, len(differing) == len(pairs) > 1))
        found = judge(case, replace(pair, doubts=doubts))
        yield _worded(found, case.claim, twin.claim, pair)


def _doubts(claim: Claim, twin: Twin, quantity: str, none_agrees: bool) -> Iterator[str]:
    """What must hold for a difference between the two places to be a contradiction."""
    other = twin.claim
    if not twin.sure:
        yield f"both tell the same result ({twin.basis})"
    elif none_agrees:
        yield "both tell the same result, though none of its numbers agrees"
    sizes = SIZES & claim.values.keys() & other.values.keys()
    if quantity in SIZES or any(claim.values[n].value != other.values[n].value for n in sizes):
        yield SAME_CASES
    if quantity in SPREADS and (claim.says("spread-unlabelled") or other.says("spread-unlabelled")):
        yield "the spread is of one kind (SD or SE) in both places"
    if quantity.startswith("df") and claim.values[quantity].decimals != other.values[quantity].decimals:
        yield "df belong to one version of the test, corrected or not, in both places"
    if quantity == "p":
        yield from _p_doubts(claim, other)


def _p_doubts(claim: Claim, other: Claim) -> Iterator[str]:
    if P_IN_WORDS in (*claim.notes, *other.notes):
        yield "the words “significant” or “not significant” speak of this test"
    if any(c.suggests("adjusted-p", "adjusted-p-post-hoc") for c in (claim, other)):
        yield "p is adjusted for several tests in both places or in neither"


def _comparisons(claim: Claim, other: Claim) -> Iterator[Comparison]:
    """One comparison for each quantity that both claims print."""
    levels = [c.values["ci_level"].value for c in (claim, other) if "ci_level" in c.values]
    one_interval = len(set(levels)) < 2 and _one_owner(claim, other)
    for quantity in COMPARED:
        if quantity not in claim.values or quantity not in other.values:
            continue
        if quantity.startswith("ci_") and not one_interval:
            continue
        mine, theirs = claim.values[quantity], other.values[quantity]
        if mine.percent != theirs.percent and quantity != "percent":
            continue
        if quantity in EITHER_ORDER:
            mine, theirs = unsigned(mine), unsigned(theirs)
        numbers = {quantity: mine, quantity + ELSEWHERE: theirs}
        mirror = None
        if quantity.startswith("ci_"):
            mirror = "ci_high" if quantity == "ci_low" else "ci_low"
            numbers |= {mirror + ELSEWHERE: other.values[mirror]} if mirror in other.values else {}
        ways = tuple(_ways(claim, quantity, mirror, (TIE,) if _touching(mine, theirs) else ()))
        bounds = P_RANGE if quantity == "p" else Interval(-math.inf, math.inf)
        yield Comparison("told-twice", quantity, numbers, ways, (claim, other), bounds=bounds)


def _one_owner(claim: Claim, other: Claim) -> bool:
    """Tell whether the intervals of both claims may belong to the same quantity."""
    owners = {c.interval_of for c in (claim, other) if c.interval_of}
    return len(owners) < 2


def _touching(mine: Printed, theirs: Printed) -> bool:
    """Tell whether two numbers differ by one unit of the same last digit: their intervals share an end."""
    return (
        mine.relation == theirs.relation == "="
        and mine.decimals == theirs.decimals
        and abs(mine.value - theirs.value) == mine.unit
    )


def _ways(claim: Claim, quantity: str, mirror: str | None, tie: tuple[str, ...]) -> Iterator[Way]:
    """The number elsewhere as it stands, and as another order, coding or direction would print it."""
    name = quantity + ELSEWHERE
    yield Way(lambda box: (box[name],), tie, alone=bool(tie))
    ratio = quantity in RATIOS or (mirror is not None and claim.interval_of in RATIOS)
    if ratio:
        inverse = f"{mirror}{ELSEWHERE}" if mirror else name
        yield Way(lambda box: _inverted(box, inverse), (INVERTED,))
    elif mirror is not None:
        given = claim.interval_of in EITHER_ORDER or claim.interval_of is None
        yield Way(lambda box: _negated(box, f"{mirror}{ELSEWHERE}"), () if given else (TURNED,))
    elif quantity in EITHER_CODING:
        yield Way(lambda box: _negated(box, name), (TURNED,))
    elif quantity == "p" and not claim.suggests("two-tailed"):
        yield Way(lambda box: (box[name].times(0.5), box[name].times(2.0)), (HALVED,))


def _negated(box: Box, name: str) -> tuple[Interval, ...]:
    return (Interval(-box[name].high, -box[name].low),) if name in box else ()


def _inverted(box: Box, name: str) -> tuple[Interval, ...]:
    if name not in box or box[name].low <= 0:
        return ()
    return (Interval(1 / box[name].high, 1 / box[name].low),)


def _worded(found: Finding, claim: Claim, other: Claim, pair: Comparison) -> Finding:
    """The finding in words of its own: both numbers, both quotes, both places."""
    here, there = _number(claim, pair.quantity), _number(other, pair.quantity)
    text = (
        f"{here} is printed in {_told(claim)}, {there} in {_told(other)}: printed differently in two places."
    )
    if found.verdict == "conditional":
        readings = [
            r.text.removeprefix("the numbers agree if ") for r in found.reconciled_by if r.kind == "reading"
        ]
        if readings:
            text += f" The numbers agree if {'; and if '.join(readings)}, which the text does not say."
        else:
            text += f" That is a contradiction only if {'; and if '.join(found.assumptions)}."
    question = (
        f"Could you check {here} in {_told(claim)} and {there} in {_told(other)}: which of the two holds?"
    )
    return replace(found, message=text, question=question if found.question else "")


def _number(claim: Claim, quantity: str) -> str:
    return f"{shown(quantity)} {printed_text(claim.values[quantity])}"


def _told(claim: Claim) -> str:
    return f"“{claim.place.quote}” ({whereabouts(claim.place)})"
