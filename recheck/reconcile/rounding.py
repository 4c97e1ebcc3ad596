"""What a printed number can stand for when it was not simply rounded."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

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


def _exact_side(printed: Printed, below: float, above: float) -> Interval:
    """Widen a printed value by so many units of its last digit toward and away from zero."""
    if printed.relation not in ("=", "≈"):
        return printed.interval()
    value, unit = printed.value, float(printed.unit)
    if value == 0:
        return Interval(-above * unit, above * unit)
    near, away = (below, above) if value > 0 else (above, below)
    return Interval(float(value) - near * unit, float(value) + away * unit)


def _truncated(printed: Printed) -> Interval:
    return _exact_side(printed, 0.5, 1.0)


def _twice(printed: Printed) -> Interval:
    return _exact_side(printed, 0.55, 0.55)


def _padded(printed: Printed) -> Interval:
    if printed.relation not in ("=", "≈") or printed.decimals <= 0:
        return printed.interval()
    decimals = printed.decimals
    shown = int(printed.value.scaleb(decimals))
    while decimals > 0 and shown and shown % 10 == 0:
        shown //= 10
        decimals -= 1
    half = 0.5 * 10.0**-decimals
    return Interval(float(printed.value) - half, float(printed.value) + half)


PLAIN = Rounding("rounded", "", _plain)
TRUNCATED = Rounding("truncated", "a number was cut off, not rounded", _truncated)
TWICE = Rounding("rounded twice", "a number was rounded twice", _twice)
PADDED = Rounding("padded", "a number of fewer decimals was filled up with zeros", _padded)
ROUNDINGS = (PLAIN, TWICE, TRUNCATED, PADDED)
"""Plain first, then by how little each widens the interval."""
