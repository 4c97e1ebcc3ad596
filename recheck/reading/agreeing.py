"""How far two claims print the same numbers: whether they may be one result told twice."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal

from recheck.model import Claim, Interval, Printed

SIZES = frozenset(("n", "N", "total", "df", "df1", "df2"))
"""Numbers that all results of one sample share: that they agree tells nothing of the result."""
_SET = frozenset(("ci_level", "alpha", "stars", "scale_min", "scale_max", "items_per_score"))
_UNSIGNED = frozenset(("t", "z", "d", "g", "delta", "d_z", "d_av", "d_rm", "mean_difference"))
_FAMILIES = {"estimate": "estimate", "comparison": "estimate", "regression": "estimate"}


def family(claim: Claim) -> str:
    """Kinds of claims between which one result may be told."""
    return _FAMILIES.get(claim.kind, claim.kind)


@dataclass(frozen=True, slots=True)
class Agreement:
    """What two claims both print: what agrees, what differs, and how many digits of the result itself agree.

    `telling` are quantities that agree and belong to the result alone; `digits` sums their significant
    digits, in the coarser print of each.
    """

    agreeing: tuple[str, ...]
    differing: tuple[str, ...]
    telling: tuple[str, ...]
    digits: int

    @property
    def full(self) -> bool:
        """Whether all shared numbers agree, enough of them to know the result by them."""
        return not self.differing and self.digits >= FULL

    @property
    def same_df(self) -> bool:
        """Whether degrees of freedom are printed in both and agree."""
        return bool({"df", "df2"} & set(self.agreeing)) and not {"df", "df1", "df2"} & set(self.differing)


FULL = 4
"""Significant digits in all by which a result is known again where all its numbers agree."""


def agreement(one: Claim, two: Claim) -> Agreement:
    """Compare all numbers that two claims share; signs that the order of two groups gives are left out."""
    agreeing: list[str] = []
    differing: list[str] = []
    telling: list[str] = []
    digits = 0
    for quantity, mine, theirs in _shared(one, two):
        if not _agree(quantity, mine, theirs):
            differing.append(quantity)
            continue
        agreeing.append(quantity)
        common = min(_digits(quantity, mine), _digits(quantity, theirs))
        if quantity not in SIZES and common >= 2:
            telling.append(quantity)
            digits += common
    return Agreement(tuple(agreeing), tuple(differing), tuple(telling), digits)


def _shared(one: Claim, two: Claim) -> Iterator[tuple[str, Printed, Printed]]:
    for quantity, mine in one.values.items():
        theirs = two.values.get(_called(quantity, one, two))
        if theirs is not None and quantity not in _SET and mine.percent == theirs.percent:
            yield quantity, mine, theirs


_ESTIMATES = ("mean_difference", "b", "beta", "or", "rr", "hr", "rd", "estimate")


def _called(quantity: str, one: Claim, two: Claim) -> str:
    """What a number is called in the other claim: an estimate that the text does not name has a name in a table."""
    if quantity not in _ESTIMATES or quantity in two.values or "estimate" not in (*one.values, *two.values):
        return quantity
    mine, theirs = ([name for name in _ESTIMATES if name in claim.values] for claim in (one, two))
    return theirs[0] if len(mine) == len(theirs) == 1 and "estimate" in (mine[0], theirs[0]) else quantity


def _agree(quantity: str, mine: Printed, theirs: Printed) -> bool:
    """Whether two printed numbers may be one: the same, or one of them rounded further."""
    if mine.relation == theirs.relation == "=" and mine.decimals == theirs.decimals:
        return mine.value == theirs.value or (quantity in _UNSIGNED and mine.value == -theirs.value)
    return _interval(quantity, mine).meets(_interval(quantity, theirs))


def _interval(quantity: str, printed: Printed) -> Interval:
    interval = printed.interval()
    return interval.absolute() if quantity in _UNSIGNED else interval


def significant(printed: Printed) -> int:
    """Significant digits of a number that is printed as a value; 0 for a bound, a word or zero."""
    if printed.relation != "=" or printed.text[:1].isalpha() or printed.value == 0:
        return 0
    return len(printed.value.as_tuple().digits)


def _digits(quantity: str, printed: Printed) -> int:
    """Significant digits; a p with three decimals tells as much as two of them, though it is `.003`."""
    digits = significant(printed)
    return 2 if digits == 1 and quantity == "p" and printed.decimals >= 3 else digits


def rough(quantity: str, printed: Printed) -> tuple[Decimal, ...]:
    """Keys by which equal numbers are found however many decimals each has: the first two digits, and their neighbours."""
    if _digits(quantity, printed) < 2 or quantity in SIZES or quantity in _SET:
        return ()
    value = abs(printed.value)
    unit = Decimal(1).scaleb(value.adjusted() - 1)
    first = (value / unit).to_integral_value()
    return tuple((first + k) * unit for k in (-1, 0, 1))
