"""Claims written by hand for tests of single checks."""

from __future__ import annotations

from decimal import Decimal

from recheck.checks.registry import Case, find_check
from recheck.model import Claim, Finding, Place, Printed, Settings


def printed(text: str) -> Printed:
    """`2.20`, `< .05`, `−1.3`."""
    relation, _, number = text.rpartition(" ")
    plain = number.replace("−", "-")
    return Printed(number, Decimal(plain), len(plain.partition(".")[2]), relation or "=")


def claim(
    kind: str,
    *stated: str,
    name: str = "c",
    groups: tuple[str, ...] = (),
    interval_of: str | None = None,
    **values: str,
) -> Claim:
    return Claim(
        id=name, kind=kind, place=Place(quote=" ".join(f"{k} {v}" for k, v in values.items())),
        values={k: printed(v) for k, v in values.items()}, stated=stated, groups=groups, interval_of=interval_of,
    )  # fmt: skip


def finding(check: str, of: Claim, *groups: Claim, alpha: float = 0.05) -> Finding:
    """The one finding of a check on a claim."""
    (found,) = find_check(check).run(Case(claim=of, groups=groups, settings=Settings(alpha=alpha)))
    return found
