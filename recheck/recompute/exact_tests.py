"""Exact inference from 2 x 2 tables with both margins fixed, and Fisher's test of larger ones.

Tables lie along the last two axes, as in `contingency`; all others are looped over in blocks that the cache holds.
nan where a count is no whole number, or below 0.
The first cell follows the noncentral hypergeometric distribution, weights w(k) ψ^k with ψ the odds ratio.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import lru_cache
from math import lgamma
from typing import TypeAlias

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy import special

from recheck.recompute.arrays import Bounds, Floats, floats

SAME_LIKELIHOOD = 1e-7
"""Relative distance within which two tables count as equally likely, as in R's fisher.test."""
BLOCK = 1 << 17
"""Numbers of a block: rows times the length of the longest distribution among them."""
FARTHEST = 60.0
"""Logarithm of the largest odds ratio that is looked for."""
HALVINGS = 70


@dataclass(frozen=True, slots=True)
class _Rows:
    """Tables as rows: `cell` the first count, `counts` what it may be (padded), `logs` its log weights (-inf for padding)."""

    cell: Floats
    counts: Floats
    logs: Floats

    @property
    def least(self) -> NDArray[np.bool_]:
        return np.asarray(self.cell <= self.counts[:, 0])

    @property
    def most(self) -> NDArray[np.bool_]:
        return np.asarray(~np.any(np.isfinite(self.logs) & (self.counts > self.cell[:, None]), axis=1))

    def weights(self, log_psi: Floats) -> Floats:
        """Weights at an odds ratio of each row, the largest 1."""
        logs = self.logs + self.counts * log_psi[:, None]
        return np.asarray(np.exp(logs - np.max(logs, axis=1, keepdims=True)))


def fisher_p(counts: ArrayLike) -> Floats:
    """Two-sided p of Fisher's exact test of 2 x 2 tables: all tables that are no likelier, margins fixed.

    Source: Fisher (1935), J. R. Stat. Soc. 98:39-82; two-sided as Freeman & Halton (1951), Biometrika 38:141-149.
    """

    def p(rows: _Rows) -> Floats:
        weights = rows.weights(np.zeros(len(rows.cell)))
        own = weights[np.arange(len(rows.cell)), (rows.cell - rows.counts[:, 0]).astype(int)]
        kept = np.where(weights <= own[:, None] * (1 + SAME_LIKELIHOOD), weights, 0.0)
        return np.asarray(np.minimum(kept.sum(axis=1) / weights.sum(axis=1), 1.0))

    return _by_blocks(counts, p)


def fisher_one_sided_p(counts: ArrayLike) -> Floats:
    """One-sided p of Fisher's exact test, the smaller of both tails. Source: Fisher (1935), J. R. Stat. Soc. 98:39-82."""

    def p(rows: _Rows) -> Floats:
        zero = np.zeros(len(rows.cell))
        return np.asarray(np.minimum(_tail(rows, zero, upper=True), _tail(rows, zero, upper=False)))

    return _by_blocks(counts, p)


def fisher_mid_p(counts: ArrayLike) -> Floats:
    """Twice the smaller tail with half of the observed table's chance, 1 at most. Source: Lancaster (1961), J. Am. Stat. Assoc. 56:223-234."""

    def p(rows: _Rows) -> Floats:
        zero = np.zeros(len(rows.cell))
        upper, lower = _tail(rows, zero, upper=True, own=0.5), _tail(rows, zero, upper=False, own=0.5)
        return np.asarray(np.minimum(2 * np.minimum(upper, lower), 1.0))

    return _by_blocks(counts, p)


def conditional_odds_ratio(counts: ArrayLike) -> Floats:
    """The odds ratio that makes the first count likeliest, margins fixed: 0 or infinite where that is at its end.

    Its expected first count is the observed one, and rises with ψ. Source: Fisher (1935), J. R. Stat. Soc. 98:39-82.
    """

    def ratio(rows: _Rows) -> Floats:
        def mean(log_psi: Floats) -> Floats:
            weights = rows.weights(log_psi)
            return np.asarray(np.sum(weights * rows.counts, axis=1) / weights.sum(axis=1))

        found = _rising_to(mean, rows.cell)
        return _at_ends(rows, np.exp(found))

    return _by_blocks(counts, ratio)


def median_unbiased_odds_ratio(counts: ArrayLike) -> Floats:
    """The odds ratio at which the observed first count is the median, by mid-P. Source: Rothman & Greenland (1998), Modern Epidemiology, 14."""
    low, high = odds_ratio_exact(counts, 0.0, own=0.5)
    # 0 where the first count is the least that it may be, infinite where the greatest, unknown where it is both.
    return np.asarray(np.where(np.isinf(high), np.where(low == 0, np.nan, high), low))


def odds_ratio_exact(counts: ArrayLike, level: float = 0.95, *, own: float = 1.0) -> Bounds:
    """Interval of the odds ratio from both tails of the conditional distribution; with `own` = 0.5 the mid-P one.

    Source: Cornfield (1956), Proc. Third Berkeley Symposium 4:135-148; mid-P: Berry & Armitage (1995), The Statistician 44:417-423.
    """
    tail = (1 - level) / 2

    def low(rows: _Rows) -> Floats:
        found = _rising_to(lambda x: _tail(rows, x, upper=True, own=own), np.full(len(rows.cell), tail))
        return np.asarray(np.where(rows.least, 0.0, np.exp(found)))

    def high(rows: _Rows) -> Floats:
        found = _rising_to(lambda x: -_tail(rows, x, upper=False, own=own), np.full(len(rows.cell), -tail))
        return np.asarray(np.where(rows.most, np.inf, np.exp(found)))

    return _by_blocks(counts, low), _by_blocks(counts, high)


def _tail(rows: _Rows, log_psi: Floats, *, upper: bool, own: float = 1.0) -> Floats:
    """P(count ≥ observed), or ≤, with the observed count weighed by `own`."""
    weights = rows.weights(log_psi)
    cell = rows.cell[:, None]
    beyond = rows.counts > cell if upper else rows.counts < cell
    kept = np.where(beyond, weights, np.where(rows.counts == cell, own * weights, 0.0))
    return np.asarray(kept.sum(axis=1) / weights.sum(axis=1))


def _at_ends(rows: _Rows, ratio: Floats) -> Floats:
    both = rows.least & rows.most
    return np.asarray(np.where(both, np.nan, np.where(rows.least, 0.0, np.where(rows.most, np.inf, ratio))))


def _rising_to(function: Callable[[Floats], Floats], target: Floats) -> Floats:
    low, high = np.full(target.shape, -FARTHEST), np.full(target.shape, FARTHEST)
    for _ in range(HALVINGS):
        middle = (low + high) / 2
        below = function(middle) < target
        low, high = np.where(below, middle, low), np.where(below, high, middle)
    return np.asarray((low + high) / 2)


def _by_blocks(counts: ArrayLike, function: Callable[[_Rows], Floats]) -> Floats:
    (counts,) = floats(counts)
    flat = counts.reshape(-1, 2, 2)
    whole = _are_counts(flat)
    tables = np.where(whole[:, None, None], flat, 1.0)
    found = np.empty(len(flat))
    for part in _blocks(tables):
        found[part] = function(_rows(tables[part]))
    return np.asarray(np.where(whole, found, np.nan).reshape(counts.shape[:-2]))


def _are_counts(tables: Floats) -> NDArray[np.bool_]:
    """Tell which tables hold whole numbers from 0 alone."""
    return np.asarray(
        np.all((tables >= 0) & np.isfinite(tables) & (tables == np.rint(tables)), axis=(-2, -1))
    )


def _blocks(flat: Floats) -> Iterator[slice]:
    """Runs of tables, short enough for their distributions to fit a block together."""
    widths = np.min([flat.sum(axis=2), flat.sum(axis=1)], axis=(0, 2)) + 1
    start = 0
    while start < len(flat):
        stop = min(len(flat), start + 1024)
        widest = np.maximum.accumulate(widths[start:stop]) * np.arange(1, stop - start + 1)
        stop = start + max(1, int(np.searchsorted(widest, BLOCK)))
        yield slice(start, stop)
        start = stop


def _rows(tables: Floats) -> _Rows:
    a, b, c, d = tables[:, 0, 0], tables[:, 0, 1], tables[:, 1, 0], tables[:, 1, 1]
    first, second, column = a + b, c + d, a + c
    low, high = np.maximum(0.0, column - second), np.minimum(first, column)
    counts: Floats = low[:, None] + np.arange(int(np.max(high - low)) + 1, dtype=np.float64)
    inside = np.minimum(counts, high[:, None])
    first, second, column = first[:, None], second[:, None], column[:, None]
    logs = -sum(
        special.gammaln(cell + 1)
        for cell in (inside, first - inside, column - inside, second - column + inside)
    )
    logs = np.where(counts <= high[:, None], logs - np.max(logs, axis=1, keepdims=True), -np.inf)
    return _Rows(a, counts, logs)


def freeman_halton_p(counts: ArrayLike, *, most: int = 2_000_000) -> float:
    """p of Fisher's exact test of one table of any size; nan where it takes more than `most` steps.

    All tables of the same margins that are no likelier are summed, column by column: tables that leave the same
    numbers to the rows, in any order, and are equally likely so far go on together.
    Source: Freeman & Halton (1951), Biometrika 38:141-149; the merging as in Mehta & Patel (1983), J. Am. Stat. Assoc. 78:427-434.
    """
    (counts,) = floats(counts)
    if not _are_counts(counts):
        return float("nan")
    table = counts[counts.sum(axis=1) > 0][:, counts.sum(axis=0) > 0].astype(int)
    table = table.T if table.shape[0] > table.shape[1] else table
    if min(table.shape, default=0) < 2:
        return 1.0 if table.size else float("nan")
    columns = sorted(table.sum(axis=0).tolist())
    own = -float(special.gammaln(table + 1.0).sum())
    stage: _Stage = {tuple(sorted(table.sum(axis=1).tolist())): (np.zeros(1), np.ones(1))}
    for column in columns[:-1]:
        following = _next_stage(stage, column, most)
        if following is None:
            return float("nan")
        stage, most = following
    ends = [(past - _log_factorials(rows), ways) for rows, (past, ways) in stage.items()]
    logs, ways = (np.concatenate(parts) for parts in zip(*ends, strict=True))
    weights = ways * np.exp(logs - np.max(logs))
    return float(min(weights[logs <= own + SAME_LIKELIHOOD].sum() / weights.sum(), 1.0))


_Stage: TypeAlias = dict[tuple[int, ...], tuple[Floats, Floats]]
"""What the rows have left, with the log weights of the tables so far and their numbers."""


def _next_stage(stage: _Stage, column: int, most: int) -> tuple[_Stage, int] | None:
    """All tables one column further, and the steps left; None where there are too many."""
    parts: dict[tuple[int, ...], list[tuple[Floats, Floats]]] = {}
    for rows, (past, ways) in stage.items():
        for cells in _fillings(rows, column):
            most -= len(past) + 20
            if most < 0:
                return None
            left = tuple(sorted(row - cell for row, cell in zip(rows, cells, strict=True)))
            parts.setdefault(left, []).append((past - _log_factorials(cells), ways))
    return {rows: _merged(found) for rows, found in parts.items()}, most


def _merged(found: list[tuple[Floats, Floats]]) -> tuple[Floats, Floats]:
    logs, ways = (np.concatenate(parts) for parts in zip(*found, strict=True))
    # Equally likely tables differ by rounding in the last bits.
    _, first, which = np.unique(np.round(logs, 9), return_index=True, return_inverse=True)
    merged = np.bincount(which.ravel(), weights=ways).astype(np.float64)
    return np.asarray(logs[first]), np.asarray(merged)


@lru_cache(maxsize=4096)
def _log_factorials(counts: tuple[int, ...]) -> float:
    return sum(lgamma(count + 1) for count in counts)


def _fillings(rows: tuple[int, ...], column: int) -> Iterator[tuple[int, ...]]:
    """All ways to share a column among rows, none above what its row has left."""
    if len(rows) == 1:
        if column <= rows[0]:
            yield (column,)
        return
    rest = sum(rows[1:])
    for cell in range(max(0, column - rest), min(rows[0], column) + 1):
        for others in _fillings(rows[1:], column - cell):
            yield (cell, *others)
