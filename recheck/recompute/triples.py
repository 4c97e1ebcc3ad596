"""Very many printed t, df and p at once, as a meta-analyst has them in columns."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from recheck.recompute.arrays import Floats, together
from recheck.recompute.tails import t_tail

AGREES, ONE_TAILED, NEITHER, NOT_COMPARABLE = range(4)
GUARD = 1e-9
"""Implied ends are widened by this much, relatively, before they are compared."""
CHUNK = 1 << 14
"""Rows at a time, so that the temporaries stay in the cache."""


def check_t_triples(
    t_low: ArrayLike, t_high: ArrayLike, df: ArrayLike, p_low: ArrayLike, p_high: ArrayLike
) -> tuple[Floats, Floats, NDArray[np.uint8]]:
    """Compare printed p with the two-sided p of t and df, twice `t_tail`, each printed number as its interval.

    Arguments broadcast to one shape; t is signed or not, df exact. Gives the ends of the implied
    two-sided p and a code: 0 they agree; 1 only a one-tailed p does (p / 2, or 1 - p / 2 against the
    expected direction); 2 neither does; 3 not comparable (nan, or df <= 0).
    """
    rows = together(t_low, t_high, df, p_low, p_high)
    shape = rows[0].shape
    flat = [np.ravel(row) for row in rows]
    low, high = np.empty(flat[0].size), np.empty(flat[0].size)
    codes = np.empty(flat[0].size, dtype=np.uint8)
    for start in range(0, flat[0].size, CHUNK):
        part = slice(start, start + CHUNK)
        low[part], high[part], codes[part] = _checked(*(row[part] for row in flat))
    return low.reshape(shape), high.reshape(shape), codes.reshape(shape)


def _checked(
    t_low: Floats, t_high: Floats, df: Floats, p_low: Floats, p_high: Floats
) -> tuple[Floats, Floats, NDArray[np.uint8]]:
    one_low = t_tail(np.maximum(-t_low, t_high), df)
    one_high = t_tail(np.maximum(np.maximum(t_low, -t_high), 0.0), df)
    low, high = one_low * (1 - GUARD), one_high * (1 + GUARD)
    two = (2 * low <= p_high) & (2 * high >= p_low)
    one = (low <= p_high) & (high >= p_low) | (1 - high <= p_high) & (1 - low >= p_low)
    codes = np.where(two, AGREES, np.where(one, ONE_TAILED, NEITHER)).astype(np.uint8)
    codes[np.isnan(one_low + one_high + p_low + p_high)] = NOT_COMPARABLE
    return 2 * one_low, 2 * one_high, codes
