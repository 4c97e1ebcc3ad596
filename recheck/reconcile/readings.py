"""Trying the ways in which a claim can be understood, the stated ones first.

A way is a formula with the assumptions that it needs and the text does not state. Each is tried
under each rounding; at most two unstated assumptions are combined, or everything reconciles.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass

from recheck.model import Interval, Printed
from recheck.reconcile.rounding import PLAIN, ROUNDINGS, Rounding

MOST_UNSTATED = 2

Numbers = Mapping[str, Printed]
Box = Mapping[str, Interval]


@dataclass(frozen=True, slots=True)
class Way:
    """One understanding of a claim.

    `implied` maps the intervals of all numbers to the intervals that the checked quantity may lie
    in; an empty tuple says that this way cannot be followed with these numbers. `unstated` holds
    the assumptions that the text leaves open, `given` those that it states or the numbers fit.
    A `costly` way is left out where many corrections of a number are tried; one that stands `alone`
    is rare, and is not combined with a reading of the rounding. One that is `likely` is told before any
    reading of the rounding, with as many assumptions.
    """

    implied: Callable[[Box], tuple[Interval, ...]]
    unstated: tuple[str, ...] = ()
    given: tuple[str, ...] = ()
    costly: bool = False
    alone: bool = False
    likely: bool = False


@dataclass(frozen=True, slots=True)
class Attempt:
    """One way under one rounding, with what it implies and whether the printed number meets it."""

    way: Way
    rounding: Rounding
    printed: Interval
    implied: tuple[Interval, ...]

    @property
    def agrees(self) -> bool:
        """Tell whether the printed and the implied intervals share a point."""
        return any(self.printed.meets(interval) for interval in self.implied)

    @property
    def unstated(self) -> tuple[str, ...]:
        """All assumptions that the text does not state."""
        return (*self.way.unstated, self.rounding.words) if self.rounding.words else self.way.unstated


COUNTED = frozenset(("n", "N", "count", "total", "ci_level"))
ELSEWHERE = " elsewhere"
"""What the name of a number ends in that is printed in another place: `t elsewhere`."""


def is_exact(name: str, printed: Printed) -> bool:
    """Tell whether a printed number is exact: a count, a group size, or whole degrees of freedom."""
    base = name.removesuffix(ELSEWHERE).rstrip("0123456789")
    counted = base in COUNTED or (base == "df" and printed.decimals <= 0)
    return counted and printed.relation == "="


def box_of(numbers: Numbers, rounding: Rounding = PLAIN) -> dict[str, Interval]:
    """The interval of each printed number under a rounding; exact numbers are points."""
    return {
        name: Interval(printed.number, printed.number)
        if is_exact(name, printed)
        else rounding.interval(printed)
        for name, printed in numbers.items()
    }


def attempts(quantity: str, numbers: Numbers, ways: Sequence[Way]) -> Iterator[Attempt]:
    """Yield every way under every rounding, fewest unstated assumptions first."""
    tried = [
        (len(way.unstated) + bool(r.words), not way.likely or bool(r.words), i, j, way, r)
        for i, way in enumerate(ways)
        for j, r in enumerate(ROUNDINGS)
        if not (way.alone and r.words)
    ]
    boxes: dict[str, dict[str, Interval]] = {}
    for unstated, _, _, _, way, rounding in sorted(tried, key=lambda item: item[:4]):
        if unstated > MOST_UNSTATED:
            return
        if rounding.name not in boxes:
            boxes[rounding.name] = box_of(numbers, rounding)
        box = boxes[rounding.name]
        if rounding is not PLAIN and box == boxes[PLAIN.name]:
            continue
        yield Attempt(way, rounding, box[quantity], way.implied(box))


def first_agreement(quantity: str, numbers: Numbers, ways: Sequence[Way]) -> Attempt | None:
    """The agreement that needs the fewest unstated assumptions, if there is one."""
    return next((attempt for attempt in attempts(quantity, numbers, ways) if attempt.agrees), None)


def mender(quantity: str, numbers: Numbers, ways: Sequence[Way]) -> Callable[[str, Printed], bool]:
    """A test whether all numbers agree, as printed and by a cheap way, with one of them corrected."""
    box = box_of(numbers)
    plain = [way for way in ways if not (way.unstated or way.costly)]
    implied = [interval for way in plain for interval in way.implied(box)]

    def mended(name: str, number: Printed) -> bool:
        corrected = box_of({name: number})[name]
        if name == quantity:
            return any(corrected.meets(interval) for interval in implied)
        other = {**box, name: corrected}
        return any(box[quantity].meets(interval) for way in plain for interval in way.implied(other))

    return mended


def agrees_as_printed(quantity: str, numbers: Numbers, ways: Sequence[Way]) -> bool:
    """Tell whether the numbers agree with nothing assumed that the text does not state, by a cheap way."""
    box = box_of(numbers)
    plain = (way for way in ways if not (way.unstated or way.costly))
    return any(box[quantity].meets(interval) for way in plain for interval in way.implied(box))
