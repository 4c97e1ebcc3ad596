"""What a generator hands over: a text that is honest by construction, and what stands in it."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from decimal import Decimal

import numpy as np

Told = tuple[str, Decimal]
"""The relation and the value as printed."""


@dataclass(frozen=True, slots=True)
class Piece:
    """A stretch of text and the printed numbers in it, by the names that claims use."""

    text: str
    values: Mapping[str, Told] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Sample:
    """A text of one or more paragraphs with the results that it tells.

    `facts` hold one mapping for each test. `alone` marks a text that says something of the whole
    document (a correction, a design), which must not colour the neighbours in a batch.
    """

    text: str
    facts: tuple[Mapping[str, Told], ...] = ()
    alone: bool = False
    name: str = ""
    seed: int = 0


Generator = Callable[[np.random.Generator], Sample]


def make(name: str, generator: Generator, seed: int) -> Sample:
    """Draw one sample; the same name and seed give the same text."""
    rng = np.random.default_rng([seed, *name.encode()])
    sample = generator(rng)
    return Sample(sample.text, sample.facts, sample.alone, name, seed)
