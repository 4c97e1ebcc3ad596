"""The noncentral t distribution and the noncentrality of which a t is an observation.

T = (Z + delta) / U, Z standard normal, U² an independent chi-square(df) / df. With W = t U - Z, P(T <= t) is
P(W >= delta). `noncentral_rules` holds the quadratures over U and over Z.
"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy import special

from recheck.recompute.arrays import Floats, together
from recheck.recompute.noncentral_rules import Rule, nodes_needed, over_normal, over_spread

CELLS = 1 << 15
"""Rows times nodes at a time, so that the temporaries stay in the cache."""
LARGEST_STEPS = 80
LARGEST = 1e100
"""Size of t beyond which nothing is told."""
MOST_PASSES = 60
"""Times that a row may leave the range of its nodes; one that still does is beyond what can be told, and nan."""
CLOSE = 3e-5
"""A step from so near (in the log of the tail) is the last one: convergence is cubic, so the next would be of 1e-13."""


def noncentral_t_cdf(t: ArrayLike, df: ArrayLike, delta: ArrayLike) -> Floats:
    """P(T <= t) for T noncentral with df >= 1, fractional or infinite, and noncentrality delta.

    Arguments broadcast; nan where df < 1. Absolute error 1e-12, for t and delta of thousands too. The upper
    tail is `noncentral_t_cdf(-t, df, -delta)`. Source: Johnson & Welch (1940), Biometrika 31:362-389.
    """
    t, df, delta = together(t, df, delta)
    shape = t.shape
    mirror = np.ravel(t < 0)
    size, shift = np.ravel(np.abs(t)), np.where(mirror, -np.ravel(delta), np.ravel(delta))
    sign, df = np.where(mirror, -1.0, 1.0), np.ravel(df)
    with np.errstate(invalid="ignore"):
        below = np.where(np.isinf(df), special.ndtr(sign * (size - shift)), np.nan)
    proper = np.flatnonzero((size < LARGEST) & np.isfinite(df) & (df >= 1) & np.isfinite(shift))
    for rows, rule in _blocks(proper, size, df, shift):
        below[rows] = rule(shift[rows], sign[rows])[0]
    return below.reshape(shape)


def noncentrality(t: ArrayLike, df: ArrayLike, probability: ArrayLike) -> Floats:
    """The delta for which P(T <= t) is `probability` (0 to 1); infinite at 0 and 1, nan where df < 1.

    P falls as delta rises. Absolute error 1e-9, relative 1e-11 for delta of thousands; for probabilities from
    1e-6 to 1 - 1e-6. U and Z have log-concave densities for df >= 1, so W has one, and both its tails
    are log-concave (Prékopa 1973, Acta Sci. Math. 34:335-343): Newton's method on the log of the smaller tail
    cannot diverge. Halley's correction, at most a doubling of the step, makes it cubic.
    """
    t, df, probability = together(t, df, probability)
    shape = t.shape
    turn = np.where(np.ravel(t) < 0, -1.0, 1.0)
    size, df = np.ravel(np.abs(t)), np.ravel(df)
    above = np.where(turn < 0, 1 - np.ravel(probability), np.ravel(probability))
    with np.errstate(invalid="ignore"):
        delta = np.where(np.isinf(df), size - special.ndtri(above), np.nan)
        certain = (above == 0) | (above == 1)
        delta = np.where(certain, np.where(above == 0, np.inf, -np.inf), delta)
        inside = (above > 0) & (above < 1) & (size < LARGEST) & np.isfinite(df) & (df >= 1)
    todo = np.flatnonzero(inside)
    delta[todo] = _start(size[todo], df[todo], above[todo])
    for _ in range(MOST_PASSES):
        if not todo.size:
            break
        left = [
            rows[_approach(rule, rows, size, above, delta)] for rows, rule in _blocks(todo, size, df, delta)
        ]
        todo = np.concatenate(left)
    delta[todo] = np.nan
    return (turn * delta).reshape(shape)


def _blocks(
    rows: NDArray[np.intp], size: Floats, df: Floats, delta: Floats
) -> Iterator[tuple[NDArray[np.intp], Rule]]:
    """Rows that need about as many nodes, some at a time, each with its quadrature."""
    spread, normal = nodes_needed(size[rows], df[rows], delta[rows])
    for nodes, build in ((spread, over_spread), (normal, over_normal)):
        for count in np.unique(nodes[nodes > 0]):
            alike = rows[nodes == count]
            for start in range(0, alike.size, max(CELLS // int(count), 1)):
                block = alike[start : start + max(CELLS // int(count), 1)]
                yield block, build(size[block], df[block], delta[block], int(count))


def _start(t: Floats, df: Floats, above: Floats) -> Floats:
    """A first delta: the normal quantile shared out between Z and U, U by Wilson & Hilferty's cube root."""
    z = -special.ndtri(above)
    part = t * np.sqrt(0.5 / df)
    whole = np.hypot(part, 1.0)
    cube = 1 - 2 / (9 * df) + z * part / whole * np.sqrt(2 / (9 * df))
    return np.asarray(t * np.maximum(cube, 0.0) ** 1.5 + z / whole)


def _approach(
    rule: Rule, rows: NDArray[np.intp], size: Floats, above: Floats, delta: Floats
) -> NDArray[np.bool_]:
    """Improve delta in place; tells which rows have left the range for which the rule has nodes enough."""
    at, wanted = delta[rows], above[rows]
    sign = np.where(wanted > 0.5, -1.0, 1.0)
    target = np.log(np.minimum(wanted, 1 - wanted))
    open_ = np.arange(rows.size)
    for _ in range(LARGEST_STEPS):
        tail, density, slope = rule.at(open_)(at[open_], sign[open_])
        with np.errstate(divide="ignore", invalid="ignore"):
            excess, rate = np.log(tail) - target[open_], -sign[open_] * density / tail
            newton = -excess / rate
            bend = -sign[open_] * slope / tail - rate * rate
            step = newton / np.clip(1 - excess * bend / (2 * rate * rate), 0.5, 2.0)
        at[open_] += np.where(np.isfinite(step), step, np.sign(size[rows][open_] - at[open_]))
        open_ = open_[~(np.abs(excess) <= CLOSE)]
        open_ = open_[~rule.left(open_, at[open_])]
        if not open_.size:
            break
    delta[rows] = at
    return rule.left(np.arange(rows.size), at)
