"""The list of checks: each declared once, with its formula, source, limits and examples."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass, field
from functools import cache
from importlib import import_module

from recheck.errors import UnknownCheck
from recheck.model import Claim, ClaimKind, Finding, Settings

FAMILIES = (
    "tails",
    "correlations",
    "matrices",
    "groups",
    "group_p",
    "anova",
    "variances",
    "one_group",
    "slopes",
    "rank_tests",
    "variance_shares",
    "effects",
    "effect_intervals",
    "share_intervals",
    "association_intervals",
    "other_shares",
    "effect_conversions",
    "intervals",
    "interval_tests",
    "counts",
    "count_tests",
    "regressions",
    "model_fit",
    "predictors",
    "ratios",
    "stars",
    "sizes",
    "totals",
    "granularity",
    "scale_limits",
    "ranges",
    "spreads",
    "mean_intervals",
    "spread_limits",
    "unions",
    "change_scores",
    "repeats",
    "power",
    "risks",
    "risk_intervals",
    "shares",
    "paired_counts",
)
"""Modules of checks, in the order in which they are listed and run."""


@dataclass(frozen=True, slots=True, eq=False)
class Twin:
    """Another claim that tells the same result; `basis` says on what ground, `sure` how firmly."""

    claim: Claim
    sure: bool
    basis: str


@dataclass(frozen=True, slots=True, eq=False)
class Case:
    """A claim with what a check may need beside it.

    `groups` are those that it is linked to, `twins` the same result elsewhere, `block` all counts of the
    categories of one variable of a table, or all correlations of a table, its own among them; for an
    estimate the counts of its row; for a group summary all of its table or passage;
    for correlations and regressions what `beside` says.
    """

    claim: Claim
    groups: tuple[Claim, ...] = ()
    settings: Settings = field(default_factory=Settings)
    twins: tuple[Twin, ...] = ()
    block: tuple[Claim, ...] = ()


@dataclass(frozen=True, slots=True, eq=False)
class Check:
    """One relation between printed numbers.

    `needs` names the quantities without which the check does not run, `beside` what else must be
    read with them, in words, and `uses` which quantities a finding rests on where they are printed; the
    examples are whole passages with the verdict that each must get.
    """

    name: str
    title: str
    kinds: tuple[ClaimKind, ...]
    quantity: str
    needs: tuple[str, ...]
    formula: str
    source: str
    limits: str
    run: Callable[[Case], Iterable[Finding]]
    beside: str = ""
    uses: tuple[str, ...] = ()
    agrees: tuple[str, ...] = ()
    conditional: tuple[str, ...] = ()
    inconsistent: tuple[str, ...] = ()
    impossible: tuple[str, ...] = ()
    unchecked: tuple[str, ...] = ()


_CHECKS: dict[str, Check] = {}


def check(
    name: str,
    *,
    title: str,
    kinds: tuple[ClaimKind, ...],
    quantity: str,
    needs: tuple[str, ...],
    formula: str,
    source: str,
    limits: str,
    beside: str = "",
    uses: tuple[str, ...] = (),
    **examples: tuple[str, ...],
) -> Callable[[Callable[[Case], Iterable[Finding]]], Callable[[Case], Iterable[Finding]]]:
    """Declare a check; the decorated function yields its findings for one case."""

    def declare(run: Callable[[Case], Iterable[Finding]]) -> Callable[[Case], Iterable[Finding]]:
        if name in _CHECKS:
            raise ValueError(f"two checks are named {name!r}")
        _CHECKS[name] = Check(
            name=name, title=title, kinds=kinds, quantity=quantity, needs=needs,
            formula=formula, source=source, limits=limits, run=run, beside=beside, uses=uses, **examples,
        )  # fmt: skip
        return run

    return declare


@cache
def all_checks() -> tuple[Check, ...]:
    """All checks in the order in which they are listed and run."""
    for family in FAMILIES:
        import_module(f"recheck.checks.{family}")
    return tuple(_CHECKS.values())


def find_check(name: str) -> Check:
    """The check of that name; raises `UnknownCheck` with the nearest names."""
    checks = {check.name: check for check in all_checks()}
    if name not in checks:
        from difflib import get_close_matches

        near = get_close_matches(name, checks, n=3, cutoff=0.5)
        hint = f"; did you mean {' or '.join(near)}?" if near else "; `recheck methods` lists all."
        raise UnknownCheck(f"there is no check named {name!r}{hint}")
    return checks[name]
