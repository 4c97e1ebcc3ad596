"""Running every check on every claim that it is for."""

from __future__ import annotations

import logging
from collections.abc import Hashable, Iterable, Iterator, Mapping, Sequence
from dataclasses import replace
from typing import TypeVar

from recheck.checks.beside import beside
from recheck.checks.columns import by_columns
from recheck.checks.compare import unchecked
from recheck.checks.missing_cases import with_fewer_cases
from recheck.checks.registry import Case, Check, Twin, all_checks
from recheck.model import LEVELS, Claim, Finding, Place, SameResult, Settings, shown

logger = logging.getLogger("recheck")
_Key = TypeVar("_Key", bound=Hashable)


def run_checks(
    claims: Sequence[Claim], settings: Settings, *, same: Sequence[SameResult] = ()
) -> tuple[Finding, ...]:
    """Give the findings of all checks on all claims, in reading order; one fault loses one check only.

    `same` are pairs of claims that tell one result.
    """
    claims = with_fewer_cases([_as_shares(claim) for claim in claims])
    by_id = {claim.id: claim for claim in claims}
    twins, blocks, rows = _twins(by_id, same), _blocks(claims), _counts_of_rows(claims)
    summaries, near = _summaries(claims), beside(claims)
    findings: list[Finding] = []
    for claim in claims:
        groups = tuple(by_id[g] for g in claim.groups if g in by_id)
        block = blocks.get(_block_of(claim), ())
        if claim.kind == "estimate":
            block = rows.get((claim.place.table, claim.place.row), ())
        elif claim.kind == "group-summary":
            block = summaries[_told_together(claim.place)]
        block = near.get(claim.id, block)
        case = Case(claim, groups, settings, twins=twins.get(claim.id, ()), block=block)
        for check in all_checks():
            if claim.kind in check.kinds:
                findings += _run(check, case)
    return by_columns(findings)


def _twins(by_id: Mapping[str, Claim], same: Sequence[SameResult]) -> dict[str, tuple[Twin, ...]]:
    """The other claims of the same result, by the id of the first."""
    twins: dict[str, tuple[Twin, ...]] = {}
    for pair in same:
        first, second = pair.claims
        if first in by_id and second in by_id and first != second:
            twins[first] = (*twins.get(first, ()), Twin(by_id[second], pair.sure, pair.basis))
    return twins


def _block_of(claim: Claim) -> tuple[str, str]:
    """Table and variable of a count that is one category of several (`Crust | dark`), or table of an r without n; empty for all else."""
    values, label = claim.values, claim.place.table or ""
    if claim.kind == "correlation" and {"r", "p"} <= values.keys() and not values.keys() & {"df", "n", "N"}:
        return (label, "r") if claim.place.row else ("", "")
    variable, divided, _ = (claim.outcome or "").rpartition(LEVELS)
    return (label, variable) if claim.kind == "count" and divided and label else ("", "")


def _blocks(claims: Sequence[Claim]) -> dict[tuple[str, str], tuple[Claim, ...]]:
    """Counts of all categories of one variable, or all correlations of a table, by table and variable."""
    return _by_key((key, claim) for claim in claims if (key := _block_of(claim)) != ("", ""))


def _counts_of_rows(claims: Sequence[Claim]) -> dict[tuple[str | None, str | None], tuple[Claim, ...]]:
    """All counts of each row of each table."""
    return _by_key(
        ((place.table, place.row), claim)
        for claim in claims
        if claim.kind == "count" and (place := claim.place).table and place.row
    )


def _told_together(place: Place) -> tuple[object, ...]:
    """What is the same for all that stands in one table, or in one passage."""
    if place.table:
        return (place.table,)
    return place.section, place.paragraph, place.line if place.paragraph is None else None


def _summaries(claims: Sequence[Claim]) -> dict[tuple[object, ...], tuple[Claim, ...]]:
    """All group summaries of each table and of each passage."""
    return _by_key((_told_together(claim.place), claim) for claim in claims if claim.kind == "group-summary")


def _by_key(pairs: Iterable[tuple[_Key, Claim]]) -> dict[_Key, tuple[Claim, ...]]:
    """The claims of each key, in their order."""
    together: dict[_Key, list[Claim]] = {}
    for key, claim in pairs:
        together.setdefault(key, []).append(claim)
    return {key: tuple(claims) for key, claims in together.items()}


SHARES = frozenset(
    (
        "p",
        "alpha",
        "power",
        "r2",
        "adjusted_r2",
        "delta_r2",
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
