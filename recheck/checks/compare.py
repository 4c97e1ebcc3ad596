"""From printed numbers and the ways to understand them to a finding: the only giver of verdicts."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from hashlib import sha256

from recheck.checks.registry import Case
from recheck.checks.wording import question_for, stands_for, tell
from recheck.model import (
    EXACT_VALUE,
    OF_DIFFERENCES,
    Claim,
    Confidence,
    Finding,
    Implied,
    Interval,
    Printed,
    Remedy,
    Verdict,
    shown,
)
from recheck.model.figures import interval_text, printed_text
from recheck.reconcile.readings import Attempt, Numbers, Way, attempts, mender
from recheck.reconcile.slips import slip_remedies

_ORDER: tuple[Confidence, ...] = ("low", "medium", "high")


EVERYTHING = Interval(-math.inf, math.inf)
NOT_NEGATIVE = Interval(0.0, math.inf)


@dataclass(frozen=True, slots=True)
class Comparison:
    """What a check hands over to be judged.

    `doubts` are reasons why a contradiction is no more than `conditional`; `excuses` reasons why
    it is `unchecked` instead. `excess` excuses only a printed number above what is implied. `bounds` is the range that the quantity can have at all.
    """

    check: str
    quantity: str
    numbers: Numbers
    ways: Sequence[Way]
    claims: tuple[Claim, ...] = ()
    bounds: Interval = EVERYTHING
    doubts: tuple[str, ...] = ()
    excuses: tuple[str, ...] = ()
    excess: str = ""


def lowest(claims: Sequence[Claim]) -> Confidence:
    """The least confidence of several claims."""
    return min((claim.confidence for claim in claims), key=_ORDER.index)


def finding_id(check: str, claims: Sequence[Claim], quantity: str) -> str:
    """An id made from the check and the claims alone: the same manuscript gives the same ids."""
    return sha256("|".join((check, quantity, *(claim.id for claim in claims))).encode()).hexdigest()[:12]


def judge(case: Case, comparison: Comparison) -> Finding:
    """Give the verdict on one comparison.

    `agrees` where the numbers meet as printed; `conditional` where they meet under at most two
    unstated assumptions, or where the reading itself is in doubt; else `inconsistent`, unless an
    excuse says that this model cannot be rebuilt.
    """
    claims = comparison.claims or (case.claim,)
    tried: list[Attempt] = []
    match = None
    for attempt in attempts(comparison.quantity, comparison.numbers, comparison.ways):
        attempt = _within(attempt, comparison.bounds)
        tried.append(attempt)
        if attempt.agrees:
            match = attempt
            break
    if not any(attempt.implied for attempt in tried):
        return unchecked(
            case,
            comparison.check,
            comparison.quantity,
            "the numbers do not fit any design that they could be checked against",
            claims,
        )
    if match and not match.unstated:
        return _finding(case, comparison, claims, "agrees", [match], match)
    excuse = _excuse(comparison, tried)
    if excuse:
        implied = _implied([a for a in tried if not a.unstated and a.implied])
        _, turned = _as_printed(case.claim, comparison)
        return replace(
            unchecked(case, comparison.check, comparison.quantity, excuse, claims),
            implied=_turned(implied) if turned else implied,
        )
    if match:
        plain = [a for a in tried if not a.unstated and a.implied]
        return _finding(case, comparison, claims, "conditional", [*plain, match], match)
    doubts = (*comparison.doubts, *reading_doubts(claims))
    if doubts:
        return _finding(case, comparison, claims, "conditional", _listed(tried), None, doubts=doubts)
    return _finding(
        case,
        comparison,
        claims,
        "inconsistent",
        _listed(tried),
        None,
        reversal=_reverses(case, comparison, tried),
    )


def unchecked(case: Case, check: str, quantity: str, reason: str, claims: Sequence[Claim] = ()) -> Finding:
    """A finding that says why nothing could be checked."""
    claims = tuple(claims) or (case.claim,)
    printed = case.claim.values.get(quantity)
    return Finding(
        id=finding_id(check, claims, quantity), check=check, verdict="unchecked", claims=tuple(c.id for c in claims),
        quantity=quantity, printed=printed_text(printed) if printed else "", implied=(), place=case.claim.place,
        message=f"Not checked: {reason}.", confidence=lowest(claims),
    )  # fmt: skip


def impossible(
    case: Case,
    check: str,
    quantity: str,
    message: str,
    implied: Interval,
    *,
    remedies: tuple[Remedy, ...] = (),
) -> Finding:
    """A printed value that no data can have; `conditional` where it was read with doubt."""
    printed = case.claim.values[quantity]
    doubts = reading_doubts((case.claim,))
    verdict: Verdict = "conditional" if doubts else "impossible"
    gap = printed.interval().distance(implied) / float(printed.unit)
    return Finding(
        id=finding_id(check, (case.claim,), quantity), check=check, verdict=verdict, claims=(case.claim.id,),
        quantity=quantity, printed=printed_text(printed), implied=(Implied(implied.low, implied.high),),
        message=message, place=case.claim.place, tolerance=stands_for({quantity: printed}), gap=gap,
        confidence=case.claim.confidence, assumptions=doubts, reconciled_by=remedies,
        question=question_for(case.claim, quantity, printed),
    )  # fmt: skip


def doubted(finding: Finding, doubt: str) -> Finding:
    """A discrepancy as a conditional one: it holds only if something does that other findings put in doubt."""
    return replace(
        finding,
        verdict="conditional",
        reversal=False,
        message=f"{finding.message.removesuffix('.')}; and if {doubt}."
        if finding.verdict == "conditional"
        else f"{finding.message} That is a contradiction only if {doubt}.",
        assumptions=(*finding.assumptions, doubt),
    )


def _within(attempt: Attempt, bounds: Interval) -> Attempt:
    implied = tuple(
        interval.guarded().within(bounds.low, bounds.high)
        for interval in attempt.implied
        if not (math.isnan(interval.low) or math.isnan(interval.high))
    )
    return replace(attempt, printed=attempt.printed.within(bounds.low, bounds.high), implied=implied)


_NO_DOUBTS = (OF_DIFFERENCES, EXACT_VALUE)
"""Notes that say what was read, not why it may be wrong."""


def reading_doubts(claims: Sequence[Claim]) -> tuple[str, ...]:
    """Say of each claim that was read with doubt that it was read rightly, and why it may not have been."""
    doubts = []
    for claim in claims:
        if claim.confidence != "high":
            why = (
                "; ".join(note for note in claim.notes if note not in _NO_DOUBTS)
                or "a number was read with doubt"
            )
            doubts.append(f"“{claim.place.quote}” was read rightly ({why})")
    return tuple(dict.fromkeys(doubts))


def _excuse(comparison: Comparison, tried: Sequence[Attempt]) -> str:
    if comparison.excuses:
        return "; ".join(comparison.excuses)
    plain = [i for a in tried if not a.unstated for i in a.implied]
    printed = next(a.printed for a in tried)
    if comparison.excess and all(printed.low > i.high for i in plain):
        return comparison.excess
    return ""


def _listed(tried: Sequence[Attempt]) -> list[Attempt]:
    """The ways worth showing: each under plain rounding, those without implied values left out."""
    return [a for a in tried if not a.rounding.words and a.implied and len(a.way.unstated) <= 1]


def _implied(listed: Sequence[Attempt]) -> tuple[Implied, ...]:
    """One row for each range; readings that imply the same one to four digits share a row."""
    rows: dict[str, tuple[Interval, list[str]]] = {}
    for attempt in listed:
        words = "; ".join((*attempt.way.given, *attempt.unstated))
        for interval in attempt.implied:
            _, assuming = rows.setdefault(interval_text(interval), (interval, []))
            if words not in assuming:
                assuming.append(words)
    return tuple(
        Implied(interval.low, interval.high, "" if "" in assuming else ", or ".join(assuming))
        for interval, assuming in rows.values()
    )


def _gap(printed: Printed, interval: Interval, implied: Sequence[Interval]) -> float | None:
    """Distance to the nearest implied interval in units of the last printed digit."""
    if not implied:
        return None
    return min(interval.distance(other) for other in implied) / float(printed.unit)


def _reverses(case: Case, comparison: Comparison, tried: Sequence[Attempt]) -> bool:
    """Tell whether printed and implied p lie on opposite sides of alpha under every reading tried.

    Pairs of unstated assumptions were tried for an agreement, and gave none.
    """
    if comparison.quantity != "p":
        return False
    alpha = case.settings.alpha
    printed = comparison.numbers["p"]
    interval = next(iter(tried)).printed
    implied = [i for a in tried if len(a.unstated) <= 1 for i in a.implied]
    strict = printed.relation in ("<", ">")
    below = interval.high < alpha or (strict and interval.high <= alpha)
    above = interval.low > alpha or (strict and interval.low >= alpha)
    return (below and all(i.low > alpha for i in implied)) or (above and all(i.high < alpha for i in implied))


def _finding(
    case: Case, comparison: Comparison, claims: tuple[Claim, ...], verdict: Verdict, listed: Sequence[Attempt],
    match: Attempt | None, *, doubts: tuple[str, ...] = (), reversal: bool = False,
) -> Finding:  # fmt: skip
    numbers, turned = _as_printed(case.claim, comparison)
    printed = comparison.numbers[comparison.quantity]
    implied = _turned(_implied(listed)) if turned else _implied(listed)
    plain = [i for a in listed if not a.unstated for i in a.implied] or [i for a in listed for i in a.implied]
    interval = printed.interval().within(comparison.bounds.low, comparison.bounds.high)
    given = match.way.given if match else ()
    unstated = match.unstated if match else ()
    return Finding(
        id=finding_id(comparison.check, claims, comparison.quantity),
        check=comparison.check,
        verdict=verdict,
        claims=tuple(claim.id for claim in claims),
        quantity=comparison.quantity,
        printed=printed_text(printed),
        implied=implied,
        message=tell(
            comparison.quantity,
            comparison.numbers,
            verdict,
            implied,
            given,
            unstated,
            doubts,
        ),
        place=case.claim.place,
        tolerance=stands_for(numbers),
        question=""
        if verdict == "agrees"
        else question_for(case.claim, comparison.quantity, printed, implied, comparison.numbers),
        gap=None if verdict == "agrees" else _gap(printed, interval, plain),
        reversal=reversal,
        confidence=lowest(claims),
        assumptions=(*given, *unstated, *doubts),
        reconciled_by=_remedies(comparison, verdict, match, _mirrored(plain) if turned else plain),
    )


def _as_printed(claim: Claim, comparison: Comparison) -> tuple[Numbers, bool]:
    """The numbers with the sign of the checked one as printed, and whether it was compared without it."""
    quantity = comparison.quantity
    printed, compared = claim.values.get(quantity), comparison.numbers[quantity]
    if printed is None or not (printed.value < 0 < compared.value and printed.text == compared.text):
        return comparison.numbers, False
    return {**comparison.numbers, quantity: printed}, True


def _mirrored(intervals: Sequence[Interval]) -> list[Interval]:
    return [Interval(-i.high, -i.low) for i in intervals]


def _turned(implied: Sequence[Implied]) -> tuple[Implied, ...]:
    """Ranges of an absolute value on the side of the printed sign."""
    return tuple(replace(row, low=-row.high, high=-row.low) for row in implied)


def _remedies(
    comparison: Comparison, verdict: Verdict, match: Attempt | None, plain: Sequence[Interval]
) -> tuple[Remedy, ...]:
    """What would reconcile the numbers: the reading that does, single slips, single numbers."""
    if verdict == "agrees":
        return ()
    if match:
        return tuple(
            Remedy("reading", comparison.quantity, f"the numbers agree if {words}")
            for words in match.unstated
        )
    rows = [
        Remedy("number", comparison.quantity, f"{shown(comparison.quantity)} would have to be {interval_text(i)}", i.low, i.high)
        for i in plain[:1]
    ]  # fmt: skip
    slips = slip_remedies(
        comparison.numbers, mender(comparison.quantity, comparison.numbers, comparison.ways)
    )
    return (*slips, *rows)
