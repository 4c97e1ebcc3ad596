"""Tests of ranks from their sizes: ranges, the normal approximation with its inverse, and exact tails.

U counts the pairs of one case of group 1 and one of group 2 in which the first is larger, ties as halves;
the rank sum of group 1 is U + n1 (n1 + 1) / 2. W (also V, T) of the signed-rank test is the sum of the ranks
of the positive differences of n pairs; pairs without difference are left out of n. ns are exact.

`ties` is the sum of t³ - t over all sets of t tied ranks, 0 without ties. It only lowers the variance, so at a
given U or W it only enlarges |z|, and lowers the normal p.
"""

from __future__ import annotations

from functools import cache

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Bounds, Floats, floats, quotient, together

MOST_EXACT = 100
"""Size of a group, or number of pairs, up to which exact tails are counted; beyond the normal one is close."""


def u_range(n1: ArrayLike, n2: ArrayLike) -> Bounds:
    """The least and the greatest U, 0 and n1 n2. Source: Mann & Whitney (1947), Ann. Math. Stat. 18:50-60."""
    n1, n2 = together(n1, n2)
    return np.zeros_like(n1), np.asarray(n1 * n2)


def rank_sum_range(n1: ArrayLike, n2: ArrayLike) -> Bounds:
    """The least and the greatest rank sum of group 1. Source: Wilcoxon (1945), Biometrics Bull. 1:80-83."""
    n1, n2 = floats(n1, n2)
    least = n1 * (n1 + 1) / 2
    return least, np.asarray(least + n1 * n2)


def signed_rank_range(n: ArrayLike) -> Bounds:
    """The least and the greatest W of n pairs, 0 and n (n + 1) / 2. Source: Wilcoxon (1945)."""
    (n,) = floats(n)
    return np.zeros_like(n), np.asarray(n * (n + 1) / 2)


def rank_sum_from_u(u: ArrayLike, n1: ArrayLike) -> Floats:
    """Rank sum of group 1 from its U. Source: Mann & Whitney (1947), Ann. Math. Stat. 18:50-60."""
    u, n1 = floats(u, n1)
    return np.asarray(u + n1 * (n1 + 1) / 2)


def u_from_rank_sum(rank_sum: ArrayLike, n1: ArrayLike) -> Floats:
    """U of group 1 from its rank sum, the inverse of `rank_sum_from_u`."""
    rank_sum, n1 = floats(rank_sum, n1)
    return np.asarray(rank_sum - n1 * (n1 + 1) / 2)


def u_sd(n1: ArrayLike, n2: ArrayLike, ties: ArrayLike = 0.0) -> Floats:
    """SD of U where both groups are alike, sqrt(n1 n2 / 12 (N + 1 - ties / (N (N - 1)))).

    Source: Lehmann (1975), Nonparametrics: Statistical Methods Based on Ranks, 1.4.
    """
    n1, n2, ties = floats(n1, n2, ties)
    N = n1 + n2
    return np.asarray(np.sqrt(n1 * n2 / 12 * (N + 1 - quotient(ties, N * (N - 1)))))


def signed_rank_sd(n: ArrayLike, ties: ArrayLike = 0.0) -> Floats:
    """SD of W where no difference is expected, sqrt(n (n + 1) (2n + 1) / 24 - ties / 48). Source: Lehmann (1975), 3.2."""
    n, ties = floats(n, ties)
    return np.asarray(np.sqrt(n * (n + 1) * (2 * n + 1) / 24 - ties / 48))


def z_from_u(
    u: ArrayLike, n1: ArrayLike, n2: ArrayLike, ties: ArrayLike = 0.0, *, continuity: bool = False
) -> Floats:
    """z of the normal approximation, (U - n1 n2 / 2) / SD; with `continuity` U is moved half a unit to its mean.

    z rises with U. Source: Mann & Whitney (1947), Annals of Mathematical Statistics 18:50-60.
    """
    u, n1, n2 = floats(u, n1, n2)
    return quotient(_moved(u - n1 * n2 / 2, continuity), u_sd(n1, n2, ties))


def z_from_signed_rank(
    w: ArrayLike, n: ArrayLike, ties: ArrayLike = 0.0, *, continuity: bool = False
) -> Floats:
    """z of the normal approximation, (W - n (n + 1) / 4) / SD, as in `z_from_u`. Source: Wilcoxon (1945)."""
    w, n = floats(w, n)
    return quotient(_moved(w - n * (n + 1) / 4, continuity), signed_rank_sd(n, ties))


def u_from_z(
    z: ArrayLike, n1: ArrayLike, n2: ArrayLike, ties: ArrayLike = 0.0, *, continuity: bool = False
) -> Floats:
    """The U whose z this is, the inverse of `z_from_u`; beside n1 n2 / 2, where a corrected z is 0, that very value."""
    z, n1, n2 = floats(z, n1, n2)
    step = np.sign(z) / 2 if continuity else 0.0
    return np.asarray(n1 * n2 / 2 + z * u_sd(n1, n2, ties) + step)


def signed_rank_from_z(
    z: ArrayLike, n: ArrayLike, ties: ArrayLike = 0.0, *, continuity: bool = False
) -> Floats:
    """The W whose z this is, the inverse of `z_from_signed_rank`, as in `u_from_z`."""
    z, n = floats(z, n)
    step = np.sign(z) / 2 if continuity else 0.0
    return np.asarray(n * (n + 1) / 4 + z * signed_rank_sd(n, ties) + step)


def _moved(deviation: Floats, continuity: bool) -> Floats:
    """A deviation, half a unit nearer to 0 where asked: a step of U is one."""
    if not continuity:
        return deviation
    return np.asarray(np.sign(deviation) * np.maximum(np.abs(deviation) - 0.5, 0.0))


def u_exact_p(u: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Two-sided p of U without ties: twice the tail at U or beyond, at most 1.

    A step function; U is taken as it stands, so between whole numbers the tail beyond counts. nan where
    U leaves its range or a group has more than `MOST_EXACT` cases. Source: Mann & Whitney (1947),
    Annals of Mathematical Statistics 18:50-60.
    """
    u, n1, n2 = together(u, n1, n2)
    small, large = np.minimum(n1, n2), np.maximum(n1, n2)
    return _exact_p(u, n1 * n2, np.stack([small, large], axis=-1), _u_tail, large)


def signed_rank_exact_p(w: ArrayLike, n: ArrayLike) -> Floats:
    """Two-sided p of W without ties, as in `u_exact_p`. Source: Wilcoxon (1945), Biometrics Bulletin 1:80-83."""
    w, n = together(w, n)
    return _exact_p(w, n * (n + 1) / 2, n[..., None], _signed_rank_tail, n)


def _exact_p(statistic: Floats, most: Floats, sizes: Floats, tail_of: object, largest: Floats) -> Floats:
    """Two-sided p from the tails of each combination of sizes that occurs."""
    valid = (statistic >= 0) & (statistic <= most) & (largest <= MOST_EXACT) & (np.min(sizes, axis=-1) >= 1)
    p = np.full(statistic.shape, np.nan)
    nearest = np.minimum(statistic, most - statistic)
    for key in {tuple(row) for row in sizes[valid].astype(int).tolist()}:
        tail = tail_of(*key)  # type: ignore[operator]
        here = valid & np.all(sizes == np.array(key), axis=-1)
        at = np.floor(nearest[here] + 1e-9).astype(np.intp)
        p[here] = np.minimum(2 * tail[at], 1.0)
    return p


@cache
def _u_tail(n1: int, n2: int) -> Floats:
    """P(U <= k) for k = 0, 1, …, n1 n2: sets of n1 ranks among N by their sum, one rank after the other."""
    ways = np.zeros((n1 + 1, n1 * n2 + 1))
    ways[0, 0] = 1.0
    for rank in range(n1 + n2):
        for chosen in range(min(n1, rank + 1), 0, -1):
            # The rank less the number already chosen is what it adds to U.
            step = rank - (chosen - 1)
            if step <= n1 * n2:
                ways[chosen, step:] += ways[chosen - 1, : ways.shape[1] - step]
    counts = ways[n1]
    return np.asarray(np.cumsum(counts) / counts.sum())


@cache
def _signed_rank_tail(n: int) -> Floats:
    """P(W <= k) for k = 0, 1, …: sets of ranks by their sum."""
    most = n * (n + 1) // 2
    shares = np.zeros(most + 1)
    shares[0] = 1.0
    for rank in range(1, n + 1):
        shares[rank:] = (shares[rank:] + shares[: most + 1 - rank]) / 2
        shares[:rank] /= 2
    return np.asarray(np.cumsum(shares))
