"""The rows of the table: arguments by name, and the bare calls that a formula cannot do without."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from functools import cache

import numpy as np
from numpy.typing import NDArray

Column = NDArray[np.float64]
Draw = Callable[[np.random.Generator, int], Column]

SIZE = 10**6

COLUMNS: dict[str, Draw] = {
    "mean1": lambda rng, size: rng.uniform(4, 6, size),
    "mean2": lambda rng, size: rng.uniform(4, 6, size),
    "sd1": lambda rng, size: rng.uniform(0.5, 2, size),
    "sd2": lambda rng, size: rng.uniform(0.5, 2, size),
    "n1": lambda rng, size: rng.integers(5, 200, size).astype(float),
    "n2": lambda rng, size: rng.integers(5, 200, size).astype(float),
    "n": lambda rng, size: rng.integers(5, 200, size).astype(float),
    "N": lambda rng, size: rng.integers(40, 400, size).astype(float),
    "k": lambda rng, size: rng.integers(2, 6, size).astype(float),
    "t": lambda rng, size: rng.uniform(-4, 4, size),
    "df": lambda rng, size: rng.integers(5, 200, size).astype(float),
    "F": lambda rng, size: rng.uniform(0, 12, size),
    "df1": lambda rng, size: rng.integers(1, 6, size).astype(float),
    "df2": lambda rng, size: rng.integers(10, 200, size).astype(float),
    "z": lambda rng, size: rng.uniform(-4, 4, size),
    "chi2": lambda rng, size: rng.uniform(0, 20, size),
    "p": lambda rng, size: rng.uniform(1e-4, 0.999, size),
    "r": lambda rng, size: rng.uniform(-0.9, 0.9, size),
    "d": lambda rng, size: rng.uniform(-1.5, 1.5, size),
    "se": lambda rng, size: rng.uniform(0.1, 0.6, size),
    "low": lambda rng, size: rng.uniform(-2, 0.5, size),
    "high": lambda rng, size: rng.uniform(0.6, 3, size),
    "share": lambda rng, size: rng.uniform(0.01, 0.9, size),
    "level": lambda rng, size: np.full(size, 0.95),
    "ratio": lambda rng, size: rng.uniform(0.2, 5, size),
}
"""Columns of numbers as papers print them, by name; `mean1+` is `mean1` half a hundredth higher, `mean1-` lower."""


@cache
def column(name: str, size: int) -> Column:
    """One column; the same name gives the same numbers."""
    if name[-1] in "+-":
        return column(name[:-1], size) + (0.005 if name[-1] == "+" else -0.005)
    seed = sum(ord(letter) << 7 * i for i, letter in enumerate(name))
    return COLUMNS[name](np.random.default_rng(seed), size)


@dataclass(frozen=True, slots=True)
class Row:
    """One function in the table.

    `columns` names the arguments, in order, by columns of numbers ("mean1 sd1 n1"); those of `options` are
    handed over by keyword as they are. `bare` is called with the same columns and does only what the
    formula cannot do without: its calls of scipy.special, or, where it has none, its bare numpy expression.
    `groups` > 0 hands over arrays of so many groups along the last axis instead. `at_most` is the ratio that is wanted.
    """

    columns: str
    bare: Callable[..., object]
    options: Mapping[str, object] = field(default_factory=dict)
    groups: int = 0
    size: int = SIZE
    at_most: float = 4.0

    def arguments(self, size: int | None = None) -> tuple[Column, ...]:
        """The columns themselves."""
        rows = size or self.size
        if self.groups:
            shape = (rows // self.groups, self.groups)
            return tuple(column(name, shape[0] * self.groups).reshape(shape) for name in self.columns.split())
        return tuple(column(name, rows) for name in self.columns.split())
