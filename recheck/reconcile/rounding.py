"""What a printed number can stand for when it was not simply rounded."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal

from recheck.model import Interval, Printed


@dataclass(frozen=True, slots=True)
class Rounding:
    """One way in which a true value may have become the printed digits.

    `words` is empty for plain rounding. Every interval contains the plain one: the reading says
    that some of the numbers were treated so, not that all were.
    """

    name: str
    words: str
    interval: Callable[[Printed], Interval]


def _plain(printed: Printed) -> Interval:
    return printed.interval()


def _units_away(printed: Printed, toward_zero: Decimal, from_zero: Decimal) -> Interval:
    """Widen a printed value by so many units of its last digit; exact before it becomes a float."""
    if printed.relation not in ("=", "≈"):
        return printed.interval()
    value, unit = printed.value, printed.unit
    if value == 0:
        return Interval(-float(from_zero * unit), float(from_zero * unit))
    below, above = (toward_zero, from_zero) if value > 0 else (from_zero, toward_zero)
    return Interval(float(value - below * unit), float(value + above * unit))


HALF, WHOLE, TWICE_HALF = Decimal("0.5"), Decimal(1), Decimal("0.55")


def _truncated(printed: Printed) -> Interval:
    return _units_away(printed, HALF, WHOLE)


def _twice(printed: Printed) -> Interval:
    return _units_away(printed, TWICE_HALF, TWICE_HALF)


def _padded(printed: Printed) -> Interval:
    if printed.relation not in ("=", "≈") or printed.decimals <= 0:
        return printed.interval()
    decimals = printed.decimals
    shown = int(printed.value.scaleb(decimals))
    if shown % 10 == 0:
        decimals -= 1
    half = HALF.scaleb(-decimals)
    return Interval(float(printed.value - half), float(printed.value + half))


PLAIN = Rounding("rounded", "", _plain)
TRUNCATED = Rounding("truncated", "a number was cut off, not rounded", _truncated)
TWICE = Rounding("rounded twice", "a number was rounded twice", _twice)
PADDED = Rounding("padded", "a number of fewer decimals was filled up with zeros", _padded)
ROUNDINGS = (PLAIN, TWICE, TRUNCATED, PADDED)
"""Plain first, then by how little each widens the interval."""
