"""What stands beside a claim of correlation or regression that a check needs: the three coefficients behind a partial one, the predictors of a model."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Hashable, Mapping, Sequence

from recheck.model import LEVELS, Claim

Beside = dict[str, tuple[Claim, ...]]

_OUTSIDE_PARTIAL = 3


def beside(claims: Sequence[Claim]) -> Beside:
    """The claims beside a partial correlation, the fit of a model, and a standardised coefficient, by its id."""
    return {**_of_partials(claims), **_of_fits(claims), **_of_coefficients(claims)}


def _of_partials(claims: Sequence[Claim]) -> Beside:
    """Exactly three plain correlations in the passage of the only partial one."""
    passages: dict[Hashable, list[Claim]] = defaultdict(list)
    for claim in claims:
        if claim.kind == "correlation" and not claim.place.table:
            place = claim.place
            passages[place.section, place.paragraph, place.page if place.paragraph is None else None].append(
                claim
            )
    found: Beside = {}
    for told in passages.values():
        partial = [claim for claim in told if claim.says("partial")]
        plain = tuple(claim for claim in told if not claim.says("partial"))
        if len(partial) == 1 and len(plain) == _OUTSIDE_PARTIAL:
            found[partial[0].id] = plain
    return found


def _by_table(claims: Sequence[Claim], kind: str) -> Mapping[str, list[Claim]]:
    tables: dict[str, list[Claim]] = defaultdict(list)
    for claim in claims:
        if claim.place.table and claim.kind == kind:
            tables[claim.place.table].append(claim)
    return tables


def _of_fits(claims: Sequence[Claim]) -> Beside:
    """The coefficients of a table that tells the fit of one model."""
    coefficients = _by_table(claims, "regression")
    fits: dict[str, list[Claim]] = defaultdict(list)
    for claim in claims:
        if claim.place.table and "r2" in claim.values:
            fits[claim.place.table].append(claim)
    return {
        told[0].id: tuple(coefficients[table])
        for table, told in fits.items()
        if len(told) == 1 and len({claim.group for claim in coefficients.get(table, ())}) == 1
    }


def _of_coefficients(claims: Sequence[Claim]) -> Beside:
    """The other coefficients of the table with the summaries of the table where the predictor is described."""
    described: dict[str, list[str]] = defaultdict(list)
    summaries = _by_table(claims, "group-summary")
    for table, told in summaries.items():
        for claim in told:
            if "sd" in claim.values and claim.group is None:
                described[variable_of(claim)].append(table)
    found: Beside = {}
    for told in _by_table(claims, "regression").values():
        both = [claim for claim in told if {"b", "beta"} <= claim.values.keys()]
        for claim in both:
            tables = described.get(variable_of(claim), [])
            rest = tuple(other for other in both if other is not claim and other.group == claim.group)
            found[claim.id] = (*rest, *(summaries[tables[0]] if len(tables) == 1 else ()))
    return found


def variable_of(claim: Claim) -> str:
    """The name of a variable without its number and its unit, for comparing."""
    name = (claim.outcome or "").rpartition(LEVELS)[2].lower()
    name = name.lstrip("0123456789.)( ").partition("(")[0].partition(",")[0]
    return "".join(letter for letter in name if letter.isalnum())
