"""Quadratures for W = t U - Z, Z standard normal, U² an independent chi-square(df) / df; t >= 0.

Both are trapezoid rules over the whole line for integrands that are analytic and die out at both ends: their
error falls exponentially with the number of nodes (Trefethen & Weideman 2014, SIAM Review 56:385-458). Over
y = ln U the density exp(df (y - (exp(2 y) - 1) / 2)) is entire, whatever df is, and meets Φ(t U - delta);
over z the normal density meets the chi distribution at (z + delta) / t, which has a kink at z = -delta
and so serves for delta > 9 alone. The node counts come from the growth of the integrands off the real line, and
were set by comparison with quadratures of 30 digits.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy import special

from recheck.recompute.arrays import Floats

CUT = 40.0
"""Nodes end where the density has fallen by exp(-40)."""
FAR = 9.0
"""Where the normal density is 1e-18 of its peak."""
COUNTS = np.array([24, 32, 40, 48, 64, 80, 96, 128, 192, 256, 384, 512, 768, 1024, 2048, 4096])
SPREAD_COST, NORMAL_COST = 1.0, 8.0
"""What a node costs: one normal distribution, or one incomplete gamma function."""
SLACK = 1.0
"""How far delta may move beyond the one for which the nodes were counted."""


@dataclass(frozen=True, slots=True)
class Rule:
    """A quadrature for some rows: nodes t U and their weights, or nodes of Z; `reach` is the largest delta it serves for."""

    t: Floats
    df: Floats
    points: Floats
    weights: Floats
    reach: Floats
    normal: bool

    def at(self, rows: NDArray[np.intp]) -> Rule:
        """The rule for some of its rows."""
        if rows.size == self.t.size:
            return self
        points, weights = (p if self.normal else p[rows] for p in (self.points, self.weights))
        return Rule(self.t[rows], self.df[rows], points, weights, self.reach[rows], self.normal)

    def left(self, rows: NDArray[np.intp], delta: Floats) -> NDArray[np.bool_]:
        """Tell where a delta lies out of the range that the rule of those rows serves for."""
        return np.asarray(delta < FAR if self.normal else delta > self.reach[rows])

    def __call__(self, delta: Floats, sign: Floats) -> tuple[Floats, Floats, Floats]:
        """The tail beyond delta on the side of `sign`, the density of W there and the slope of the density."""
        if self.normal:
            return self._over_normal(delta, sign)
        x = self.points - delta[:, None]
        tail = np.einsum("ij,ij->i", self.weights, special.ndtr(sign[:, None] * x))
        mass = self.weights * np.exp(-0.5 * x * x)
        scale = 1 / np.sqrt(2 * np.pi)
        return tail, scale * mass.sum(-1), scale * np.einsum("ij,ij->i", mass, x)

    def _over_normal(self, delta: Floats, sign: Floats) -> tuple[Floats, Floats, Floats]:
        t, half = self.t[:, None], self.df[:, None] / 2
        u = np.maximum((self.points + delta[:, None]) / t, 1e-300)
        square = half * u * u
        upper = sign > 0
        inside = np.empty_like(u)
        inside[upper] = special.gammaincc(half[upper], square[upper])
        inside[~upper] = special.gammainc(half[~upper], square[~upper])
        with np.errstate(under="ignore", over="ignore"):
            log_chi = half * np.log(square) - square - special.gammaln(half) + np.log(2 / u)
            mass = self.weights * np.exp(log_chi) / t
            slope = mass * ((2 * half - 1) / u - 2 * half * u) / t
        return inside @ self.weights, mass.sum(-1), slope.sum(-1)


def nodes_needed(t: Floats, df: Floats, delta: Floats) -> tuple[NDArray[np.intp], NDArray[np.intp]]:
    """How many nodes each row needs over ln U and over Z; 0 for the rule that is not to be taken."""
    low, high = _ends(df)
    reach = np.minimum(np.maximum(delta, 0.0) + SLACK, t * np.exp(high))
    width = np.minimum(0.74 / np.sqrt(2 * df + reach**2), 8.8 / (72 + df + reach**2 / 2))
    spread = (high - low) / width + 1
    with np.errstate(divide="ignore", over="ignore"):
        normal = 2 * FAR / 0.74 * np.sqrt(1 + 2 * df / t**2) + 1
    serves = (delta > FAR + SLACK) & (normal < 100) & (NORMAL_COST * normal < SPREAD_COST * spread)
    return np.where(serves, 0, _count(spread)), np.where(serves, _count(normal), 0)


def _count(nodes: Floats) -> NDArray[np.intp]:
    return COUNTS[np.minimum(np.searchsorted(COUNTS, nodes), COUNTS.size - 1)]


def _ends(df: Floats) -> tuple[Floats, Floats]:
    """Values of ln U beyond which the density is less than exp(-CUT) of its peak.

    There exp(2 y) - 1 - 2 y = 2 q², q² = CUT / df: below, y >= -q² - 1/2, and for q < 1 y > -q - q²/2; above,
    y <= q, so exp(2 y) <= 1 + 2 q + 2 q².
    """
    q = np.sqrt(CUT / df)
    low = np.where(q < 1, -q - q * q / 2, -q * q - 0.5)
    return low, np.log1p(2 * q + 2 * q * q) / 2


def over_spread(t: Floats, df: Floats, delta: Floats, count: int) -> Rule:
    """The rule over ln U for rows of t, df."""
    low, high = _ends(df)
    y = low[:, None] + ((high - low) / (count - 1))[:, None] * np.arange(count)
    mass = np.exp(df[:, None] * (y - np.expm1(2 * y) / 2))
    mass /= mass.sum(-1, keepdims=True)
    width = (high - low) / (count - 1)
    # The largest delta for which this width is fine, by the rule in `nodes_needed`.
    wide = np.minimum((0.74 / width) ** 2 - 2 * df, 2 * (8.8 / width - 72 - df))
    reach = np.where(wide >= (t * np.exp(high)) ** 2, np.inf, np.sqrt(np.maximum(wide, 0.0)))
    return Rule(t, df, t[:, None] * np.exp(y), mass, np.maximum(reach, delta + SLACK), normal=False)


def over_normal(t: Floats, df: Floats, delta: Floats, count: int) -> Rule:
    """The rule over Z for rows of t, df."""
    z = np.linspace(-FAR, FAR, count)
    weights = np.exp(-z * z / 2)
    return Rule(t, df, z, weights / weights.sum(), np.full(t.size, np.inf), normal=True)
