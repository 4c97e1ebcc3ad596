"""A finding from a PDF stands only if a second, independent engine reads the same numbers."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace

from recheck.checks.registry import find_check
from recheck.errors import RecheckError
from recheck.model import DISCREPANT, Claim, Finding, Printed, Reading

GROUP_QUANTITIES = frozenset(("mean", "sd", "se", "n", "count", "total", "percent"))
SecondReader = Callable[[Sequence[int] | None], Reading]


def confirm(
    findings: Sequence[Finding], claims: Sequence[Claim], second: SecondReader
) -> tuple[Finding, ...]:
    """Turn findings that hang on numbers read differently by the second engine into `unchecked`.

    The pages of the findings are read again first, the whole document only where they do not
    confirm a finding: context from other pages may be needed to read one.
    """
    by_id = {claim.id: claim for claim in claims}
    flagged = [f for f in findings if f.verdict in (*DISCREPANT, "conditional")]
    if not flagged:
        return tuple(findings)
    pages = sorted({page for f in flagged for c in f.claims for page in _pages(by_id[c])})
    open_ = {f.id: f for f in flagged}
    seen: tuple[Claim, ...] = ()
    for wanted in (pages, None):
        try:
            seen = second(wanted).claims
        except RecheckError:
            continue
        open_ = {
            i: f for i, f in open_.items() if not all(_found(by_id[c], _used(f, c), seen) for c in f.claims)
        }
        if not any(f.verdict in DISCREPANT for f in open_.values()):
            break
    return tuple(_unconfirmed(f, by_id, seen) if f.id in open_ else f for f in findings)


def _pages(claim: Claim) -> Iterable[int]:
    """The page of a claim with its neighbours: a passage may run over a page's end."""
    pages = {claim.place.page, *(printed.page for printed in claim.values.values())}
    return (near for page in pages if page for near in (page - 1, page, page + 1))


def _used(finding: Finding, claim: str) -> frozenset[str]:
    """The numbers of a claim that a finding rests on."""
    if claim != finding.claims[0]:
        return GROUP_QUANTITIES | {finding.quantity}
    check = find_check(finding.check)
    return frozenset((finding.quantity, *check.needs, *check.uses))


def _found(claim: Claim, used: frozenset[str], seen: Iterable[Claim]) -> bool:
    """Tell whether the second reading holds a claim with the same numbers."""
    names = used & claim.values.keys() or claim.values.keys()
    return any(other.kind == claim.kind and _same(claim, other, names) for other in seen)


def _same(claim: Claim, other: Claim, names: Iterable[str]) -> bool:
    return all(_alike(claim.values[name], other.values.get(name)) for name in names)


def _alike(printed: Printed, other: Printed | None) -> bool:
    """The same number with the same decimals; the engines may differ in the kind of dash or space."""
    if other is None:
        return False
    return (printed.value, printed.decimals, printed.relation) == (
        other.value,
        other.decimals,
        other.relation,
    )


def _nearest(claim: Claim, seen: Iterable[Claim]) -> Claim | None:
    """The claim of the second reading that shares most numbers with this one."""
    best, shared = None, 0
    for other in seen:
        alike = sum(_alike(p, other.values.get(n)) for n, p in claim.values.items())
        if other.kind == claim.kind and alike > shared:
            best, shared = other, alike
    return best


def _unconfirmed(finding: Finding, by_id: dict[str, Claim], seen: Sequence[Claim]) -> Finding:
    first = by_id[finding.claims[0]]
    other = _nearest(first, seen)
    read = f"“{other.place.quote}”" if other else "no such result"
    return replace(
        finding,
        verdict="unchecked",
        reversal=False,
        reconciled_by=(),
        question="",
        message=f"Not checked: read differently by two readers: “{first.place.quote}” by one, {read} by the other.",
    )
