"""Running every check on every claim that it is for."""

from __future__ import annotations

import logging
from collections.abc import Iterator, Sequence
from dataclasses import replace

from recheck.checks.compare import unchecked
from recheck.checks.registry import Case, Check, all_checks
from recheck.model import Claim, Finding, Settings, shown

logger = logging.getLogger("recheck")


def run_checks(claims: Sequence[Claim], settings: Settings) -> tuple[Finding, ...]:
    """Give the findings of all checks on all claims, in reading order; one fault loses one check only."""
    claims = [_as_shares(claim) for claim in claims]
    by_id = {claim.id: claim for claim in claims}
    findings: list[Finding] = []
    for claim in claims:
        groups = tuple(by_id[g] for g in claim.groups if g in by_id)
        case = Case(claim=claim, groups=groups, settings=settings)
        for check in all_checks():
            if claim.kind in check.kinds:
                findings += _run(check, case)
    return tuple(findings)


SHARES = frozenset(
    (
        "p",
        "alpha",
        "power",
        "r2",
        "adjusted_r2",
        "eta2",
        "partial_eta2",
        "generalized_eta2",
        "omega2",
        "epsilon2",
    )
)
"""Quantities between 0 and 1 that are sometimes printed as percentages."""


def _as_shares(claim: Claim) -> Claim:
    """The claim with `p = 3.6%` as .036, to as many decimals more."""
    percents = {n: v for n, v in claim.values.items() if v.percent and n in SHARES}
    if not percents:
        return claim
    shares = {
        n: replace(
            v, text=v.text.rstrip("% ") + "%", value=v.value / 100, decimals=v.decimals + 2, percent=False
        )
        for n, v in percents.items()
    }
    return replace(claim, values={**claim.values, **shares})


def _run(check: Check, case: Case) -> Iterator[Finding]:
    values = case.claim.values
    if check.quantity in check.needs and check.quantity not in values:
        return
    missing = [name for name in check.needs if name not in values]
    if missing:
        if check.quantity in values and all(name.startswith("df") for name in missing):
            yield unchecked(
                case, check.name, check.quantity, f"{', '.join(shown(m) for m in missing)} not printed"
            )
        return
    try:
        yield from check.run(case)
    except Exception as fault:
        logger.exception("check %s failed on %r", check.name, case.claim.place.quote)
        yield unchecked(
            case,
            check.name,
            check.quantity,
            f"recheck failed here ({type(fault).__name__}: {fault}); please report it",
        )
