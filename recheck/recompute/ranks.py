"""p of Spearman's rho without ties: exact for up to nine pairs, the Edgeworth series beyond."""

from __future__ import annotations

from functools import cache

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, together

EXACT_UP_TO = 9
CHUNK = 1 << 14
"""Rows at a time, so that the temporaries stay in the cache."""


def spearman_two_sided(r: ArrayLike, n: ArrayLike) -> Floats:
    """Two-sided p of a rank correlation of n pairs without ties: P(|R| >= |r|) under independence.

    Arguments broadcast; nan where |r| > 1 or n < 2. A step function of |r|, since the sum of squared
    rank differences is an even integer. Exact for n <= 9; beyond, the series is off by at most 1.2e-3 at
    n = 10, 4e-4 at 12, 1e-4 at 15 (a tenth to a quarter of p where p is about .005), and its far tails
    come out as 0: so programs print them, so they are kept. Source: Kendall (1948), Rank
    Correlation Methods; Best & Roberts (1975), Applied Statistics 24:377-379 (algorithm AS 89).
    """
    r, n = together(r, n)
    rows, tails = (np.ravel(r), np.ravel(n)), np.empty(r.size)
    for start in range(0, r.size, CHUNK):
        part = slice(start, start + CHUNK)
        tails[part] = _two_sided(rows[0][part], rows[1][part])
    return tails.reshape(r.shape)


def _two_sided(r: Floats, n: Floats) -> Floats:
    valid = (np.abs(r) <= 1) & (n >= 2)
    size, count = np.where(valid, np.abs(r), 0.0), np.where(valid, n, 2.0)
    span = (count**3 - count) / 12
    # r is a rounded double: a sum of squares a little below an even number is meant to be that number.
    squares = 2 * np.floor((1 - size) * span + 1e-9 + 1e-15 * span)
    tail = _edgeworth_tail(squares, count)
    for small in np.unique(count[count <= EXACT_UP_TO]):
        sums = _exact_tail(int(small))
        places = np.clip(squares / 2, 0, len(sums) - 1).astype(np.intp)
        tail = np.where(count == small, sums[places], tail)
    return np.where(valid, np.minimum(2 * tail, 1.0), np.nan)


@cache
def _exact_tail(n: int) -> Floats:
    """P(sum of squared rank differences <= 2 k) for k = 0, 1, …; by sets of ranks already given away."""
    most = n * (n + 1) * (2 * n + 1) // 6
    ways: dict[int, Floats] = {0: np.eye(1, most + 1)[0]}
    for place in range(1, n + 1):
        following: dict[int, Floats] = {}
        for given, counts in ways.items():
            for rank in range(1, n + 1):
                if given >> rank & 1:
                    continue
                moved = np.roll(counts, place * rank)
                key = given | 1 << rank
                following[key] = following[key] + moved if key in following else moved
        ways = following
    (products,) = ways.values()
    return np.asarray(np.cumsum(products[::-1]) / products.sum())


def _edgeworth_tail(squares: Floats, n: Floats) -> Floats:
    """P(sum of squares <= `squares`) by the series, with its continuity correction of one.

    The constants are those of the algorithm, from memory; exact counts for n = 10 to 12 confirm them.
    """
    b = 1 / n
    x = (1 - 6 * (squares + 1) / (n**3 - n)) * np.sqrt(n - 1)
    y = x * x
    inner = 0.0879 + 0.0151 * b - y * (0.0072 - 0.0831 * b + y * b * (0.0131 - 4.6e-4 * y))
    series = 0.2274 + b * (0.2531 + 0.1745 * b) + y * (-0.0758 + b * (0.1033 + 0.3932 * b) - y * b * inner)
    return np.asarray(np.clip(x * b * series * np.exp(-y / 2) + special.ndtr(-x), 0.0, 1.0))
