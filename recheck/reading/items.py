"""The assignment: one quantity with its printed number and where it stands in its line."""

from __future__ import annotations

from dataclasses import dataclass, field

from recheck.model import Confidence, Printed
from recheck.reading.symbols import Symbol


@dataclass(frozen=True, slots=True)
class Assignment:
    """One quantity with its printed number, on the tokens from `first` up to `after` of its line.

    `extra` holds what stands in its brackets (df, n, the ends of an interval); `several` marks a
    number that tells of more than one result; `loose` one without a relation sign.
    """

    symbol: Symbol
    printed: Printed
    first: int
    after: int
    extra: tuple[tuple[str, Printed], ...] = ()
    label: str = ""
    stated: tuple[str, ...] = ()
    several: bool = False
    loose: bool = False
    announced: str = ""
    doubt: Confidence = "high"
    notes: tuple[str, ...] = field(default=())

    @property
    def quantity(self) -> str:
        """The name of the quantity."""
        return self.symbol.quantity

    @property
    def part(self) -> str:
        """What the quantity does in a claim."""
        return self.symbol.part


NEXT_TO_INTERVAL = "the number before the interval is taken for its estimate"
"""The note of an estimate that nobody names."""

P = Symbol("p", "p")
MEAN = Symbol("mean", "centre")
MEDIAN = Symbol("median", "centre")
ESTIMATE = Symbol("estimate", "estimate")
CI = Symbol("ci", "interval")
COUNT = Symbol("count", "count")
DF = Symbol("df", "df")
SPREADS = {"sd": Symbol("sd", "spread"), "se": Symbol("se", "spread"), "": Symbol("spread", "spread")}
