"""The noncentral F and chi-square distributions, and the noncentrality of which an F or a chi-square is an observation.

Both are mixtures of central ones, with df1 + 2 j numerator df for j from a Poisson distribution of mean lambda / 2.
`poisson_rules` sums them. The t with delta² = lambda is the case df1 = 1, two-sided.
"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy import special

from recheck.recompute.arrays import Floats, together
from recheck.recompute.poisson_rules import Mixture, central, mixture, nodes_needed

CELLS = 1 << 15
"""Rows times terms at a time, so that the temporaries stay in the cache."""
LARGEST_STEPS = 80
LARGEST = 1e100
"""Size of F beyond which nothing is told."""
MOST_PASSES = 60
"""Times that a row may leave the range of its nodes; one that still does is beyond what can be told, and nan."""
CLOSE = 3e-5
"""A step from so near (in the log of the tail) is the last one, as convergence is cubic."""


def noncentral_F_cdf(F: ArrayLike, df1: ArrayLike, df2: ArrayLike, noncentrality: ArrayLike) -> Floats:
    """P(F' <= F) for F' noncentral with df1, df2 > 0, fractional or df2 infinite, and noncentrality lambda >= 0.

    Arguments broadcast; 0 where F <= 0, nan where a df or lambda is not allowed. Absolute error 1e-12.
    Source: Patnaik (1949), Biometrika 36:202-232; Johnson, Kotz & Balakrishnan (1995), Continuous Univariate
    Distributions 2, ch. 30.
    """
    F, df1, df2, noncentrality = together(F, df1, df2, noncentrality)
    shape = F.shape
    F, df1, df2, mean = (np.ravel(part) for part in (F, df1, df2, noncentrality / 2))
    allowed = (df1 > 0) & np.isfinite(df1) & (df2 > 0) & (mean >= 0) & np.isfinite(mean) & ~np.isnan(F)
    below = np.where(allowed, np.where(np.isinf(F) & (F > 0), 1.0, 0.0), np.nan)
    todo = np.flatnonzero(allowed & (F > 0) & np.isfinite(F))
    for rows, rule in _blocks(todo, F, df1, df2, mean):
        below[rows] = rule(mean[rows])[0]
    return below.reshape(shape)


def noncentral_chi2_cdf(x: ArrayLike, df: ArrayLike, noncentrality: ArrayLike) -> Floats:
    """P(X <= x) for X noncentral chi-square with df > 0 and noncentrality lambda >= 0; absolute error 1e-12.

    Source: Fisher (1928), Proceedings of the Royal Society A 121:654-673; Patnaik (1949), as above.
    """
    x, df, noncentrality = together(x, df, noncentrality)
    return noncentral_F_cdf(x / df, df, np.inf, noncentrality)


def noncentral_F_lambda(F: ArrayLike, df1: ArrayLike, df2: ArrayLike, probability: ArrayLike) -> Floats:
    """The lambda for which P(F' <= F) is `probability` (0 to 1); 0 where even the central F has no more below.

    P falls as lambda rises. Absolute error 1e-8, relative 1e-10 for lambda of thousands; for probabilities
    from 1e-6 to 1 - 1e-6; infinite at 0. P and 1 - P are log-concave in lambda: so are the central ones in df1
    (Finner & Roters 1997, Statistica Sinica 7:771-787, from memory), and mixing by a Poisson distribution keeps
    that (Karlin 1968, Total Positivity, ch. 3). So Newton's method on the log of the smaller one cannot diverge;
    Halley's correction, at most a doubling of the step, makes it cubic.
    """
    F, df1, df2, probability = together(F, df1, df2, probability)
    shape = F.shape
    F, df1, df2, wanted = (np.ravel(part) for part in (F, df1, df2, probability))
    allowed = (df1 > 0) & np.isfinite(df1) & (df2 > 0) & (np.abs(F) < LARGEST) & (wanted >= 0) & (wanted <= 1)
    most = central(np.where(allowed, np.maximum(F, 0.0), np.nan), df1, df2)
    mean = np.where(most <= wanted, 0.0, np.where(allowed & (wanted == 0), np.inf, np.nan))
    todo = np.flatnonzero(allowed & (most > wanted) & (wanted > 0))
    mean[todo] = _start(F[todo], df1[todo], df2[todo], wanted[todo])
    for _ in range(MOST_PASSES):
        if not todo.size:
            break
        left = [rows[_approach(rule, rows, wanted, mean)] for rows, rule in _blocks(todo, F, df1, df2, mean)]
        todo = np.concatenate(left)
    mean[todo] = np.nan
    return (2 * mean).reshape(shape)


def noncentral_chi2_lambda(x: ArrayLike, df: ArrayLike, probability: ArrayLike) -> Floats:
    """The lambda for which P(X <= x) is `probability`, as `noncentral_F_lambda`."""
    x, df, probability = together(x, df, probability)
    return noncentral_F_lambda(x / df, df, np.inf, probability)


def _blocks(
    rows: NDArray[np.intp], F: Floats, df1: Floats, df2: Floats, mean: Floats
) -> Iterator[tuple[NDArray[np.intp], Mixture]]:
    """Rows that need about as many terms, some at a time, each with its mixture."""
    needed = nodes_needed(mean[rows])
    for count in np.unique(needed):
        for endless in (False, True):
            alike = rows[(needed == count) & (np.isinf(df2[rows]) == endless)]
            step = max(CELLS // abs(int(count)), 1)
            for start in range(0, alike.size, step):
                block = alike[start : start + step]
                yield block, mixture(F[block], df1[block], df2[block], mean[block], int(count))


def _start(F: Floats, df1: Floats, df2: Floats, wanted: Floats) -> Floats:
    """A first lambda / 2: the root of a noncentral chi-square less (df1 - 1)/2 is about normal with SD 1."""
    squares, loss = df1 * F, (df1 - 1) / 2
    root = np.sqrt(np.maximum(squares - loss, 0.2))
    root = root - np.sqrt(1 + squares / (2 * df2)) * special.ndtri(wanted)
    return np.asarray(np.maximum(np.maximum(root, 0.0) ** 2 - loss, 0.1) / 2)


def _approach(rule: Mixture, rows: NDArray[np.intp], wanted: Floats, mean: Floats) -> NDArray[np.bool_]:
    """Improve the means in place; tells which rows have left the range for which the mixture has terms enough."""
    at, aim = mean[rows], wanted[rows]
    sign = np.where(aim > 0.5, -1.0, 1.0)
    target = np.log(np.minimum(aim, 1 - aim))
    open_ = np.arange(rows.size)
    for _ in range(LARGEST_STEPS):
        below, slope, bend = rule.at(open_)(at[open_])
        with np.errstate(divide="ignore", invalid="ignore"):
            tail = np.where(sign[open_] > 0, below, 1 - below)
            excess, rate = np.log(tail) - target[open_], sign[open_] * slope / tail
            curve = sign[open_] * bend / tail - rate * rate
            step = -excess / rate / np.clip(1 - excess * curve / (2 * rate * rate), 0.5, 2.0)
        step = np.where(np.isfinite(step), step, np.where(below < aim[open_], -0.5, 1.0) * (at[open_] + 1))
        step = np.maximum(step, -0.9 * at[open_])
        at[open_] += step
        open_ = open_[~(np.abs(excess) <= CLOSE)]
        open_ = open_[~rule.left(open_, at[open_])]
        if not open_.size:
            break
    mean[rows] = at
    return rule.left(np.arange(rows.size), at)
