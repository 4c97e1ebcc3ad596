"""Sums of central F or chi-square distributions over a Poisson distribution of the numerator df.

P(mean) = sum over j of pois(j; mean) I(a + j), I the incomplete beta function at x with b (F) or the incomplete
gamma function at x (chi-square), a = df1 / 2, b = df2 / 2. For small means all terms are taken, from the last I
downward by I(a + j) = I(a + j + 1) + D(j), which adds positive numbers alone. For large means both factors are
smooth in j, and the sum is the trapezoid rule of an integral over j: a wider step serves as well
(Trefethen & Weideman 2014, SIAM Review 56:385-458).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy import special

from recheck.recompute.arrays import Floats

COUNTS = np.array([24, 32, 40, 48, 64, 80, 96, 128, 160, 192, 256, 320, 384, 512])
EDGE = 10
FEW = 220.0
"""Means up to this one are summed term by term."""
SAMPLED = 48
"""Terms of the wider rule, 0.52 SDs of the Poisson distribution apart."""
STEP = 0.52
SLACK = 3.0
"""How many SDs a mean may move before the wider rule leaves out too much."""


@dataclass(frozen=True, slots=True)
class Mixture:
    """The sum for some rows: `terms` are j, `shares` I(a + j), `drops` D(j) (none in the wider rule)."""

    terms: Floats
    shares: Floats
    drops: Floats | None
    low: Floats
    high: Floats

    def at(self, rows: NDArray[np.intp]) -> Mixture:
        """The mixture for some of its rows."""
        if rows.size == self.low.size:
            return self
        drops = None if self.drops is None else self.drops[rows]
        terms = self.terms if drops is not None else self.terms[rows]
        return Mixture(terms, self.shares[rows], drops, self.low[rows], self.high[rows])

    def left(self, rows: NDArray[np.intp], mean: Floats) -> NDArray[np.bool_]:
        """Tell where a mean lies out of the range that the terms of those rows serve for."""
        return np.asarray((mean < self.low[rows]) | (mean > self.high[rows]))

    def __call__(self, mean: Floats) -> tuple[Floats, Floats, Floats]:
        """P at these means, and its first two derivatives by the mean."""
        mean = mean[:, None]
        if self.drops is None:
            return self._sampled(mean)
        j = self.terms
        weights = np.exp(j * np.log(np.maximum(mean, 1e-300)) - mean - special.gammaln(j + 1))
        below = np.einsum("ij,ij->i", weights, self.shares)
        slope = -np.einsum("ij,ij->i", weights, self.drops)
        next_drop = np.einsum("ij,ij->i", weights[:, :-1], self.drops[:, 1:])
        return below, slope, -next_drop - slope

    def _sampled(self, mean: Floats) -> tuple[Floats, Floats, Floats]:
        j, off = self.terms, mean / self.terms - 1
        weights = np.exp(j * (np.log1p(off) - off) - np.log(j) / 2 - 1 / (12 * j) + 1 / (360 * j**3))
        weights /= weights.sum(-1, keepdims=True)
        lean = j / mean - 1
        slope = np.einsum("ij,ij,ij->i", weights, lean, self.shares)
        bend = np.einsum("ij,ij,ij->i", weights, lean * lean - j / mean**2, self.shares)
        return np.einsum("ij,ij->i", weights, self.shares), slope, bend


def nodes_needed(mean: Floats) -> NDArray[np.intp]:
    """How many terms each row needs, with room to move; -SAMPLED for the wider rule."""
    most = _roomy(mean)
    terms = most + 9 * np.sqrt(most) + EDGE
    counted = COUNTS[np.minimum(np.searchsorted(COUNTS, terms), COUNTS.size - 1)]
    return np.where(mean <= FEW, counted, -SAMPLED)


def _roomy(mean: Floats) -> Floats:
    """The mean up to which terms are taken for a row that starts at `mean`."""
    return np.asarray(1.2 * mean + 1)


def central(F: Floats, df1: Floats, df2: Floats) -> Floats:
    """P of the central F, or of chi-square / df1 where df2 is infinite."""
    with np.errstate(invalid="ignore"):
        x = df1 * F / (df1 * F + df2)
    finite = np.where(np.isinf(df2), 1.0, df2)
    return np.where(
        np.isinf(df2),
        special.gammainc(df1 / 2, df1 * F / 2),
        special.betainc(df1 / 2, finite / 2, np.where(np.isinf(df2), 0.5, x)),
    )


def mixture(F: Floats, df1: Floats, df2: Floats, mean: Floats, count: int) -> Mixture:
    """The mixture for rows whose df2 are all finite or all infinite; `count` as `nodes_needed` gives it."""
    if count < 0:
        return _wide(F, df1, df2, mean)
    j = np.arange(count, dtype=np.float64)
    a = (df1 / 2)[:, None] + j
    first, x = a[:, 0], df1 * F / 2
    if np.isinf(df2[0]):
        start = first * np.log(x) - x - special.gammaln(first + 1)
        drops = _by_ratios(start, x[:, None] / (a[:, :-1] + 1))
        last = special.gammainc(a[:, -1] + 1, x)
    else:
        drops, last = _beta_drops(F, df1, df2, a)
    shares = last[:, None] + np.cumsum(drops[:, ::-1], axis=-1)[:, ::-1]
    # The largest mean whose distribution leaves nothing beyond the last term.
    reach = (np.sqrt(20.25 + count - EDGE) - 4.5) ** 2
    high = np.full(F.shape, max(reach, 0.0))
    return Mixture(j, shares, drops, np.zeros(F.shape), np.maximum(high, _roomy(mean)))


def _beta_drops(F: Floats, df1: Floats, df2: Floats, a: Floats) -> tuple[Floats, Floats]:
    """D(j) = x^(a+j) (1-x)^b / ((a+j) B(a+j, b)), the first and then by their ratios, and I after the last one."""
    b, whole = df2 / 2, df1 * F + df2
    x = df1 * F / whole
    first = a[:, 0]
    start = first * np.log(x) - b * np.log1p(df1 * F / df2) - np.log(first) + _log_beta_inverse(first, b)
    ratios = x[:, None] * (a[:, :-1] + b[:, None]) / (a[:, :-1] + 1)
    return _by_ratios(start, ratios), np.asarray(special.betainc(a[:, -1] + 1, b, x))


def _by_ratios(start: Floats, ratios: Floats) -> Floats:
    """A sequence from the logarithm of its first member and the ratios of neighbours; early members may be 0."""
    logs = np.empty((ratios.shape[0], ratios.shape[1] + 1))
    logs[:, 0] = start
    np.log(ratios, out=logs[:, 1:])
    return np.asarray(np.exp(np.cumsum(logs, axis=-1)))


def _log_beta_inverse(a: Floats, b: Floats) -> Floats:
    """-ln B(a, b); for large b by Stirling's series, in which no digits cancel, good to 1e-15 from 100 on."""
    large = b > 100
    z = np.where(large, b, 100.0)
    grown = (z + a - 0.5) * np.log1p(a / z) + a * np.log(z) - a + _stirling(z + a) - _stirling(z)
    plain = -special.betaln(a, np.where(large, 1.0, b))
    return np.where(large, grown - special.gammaln(a), plain)


def _stirling(z: Floats) -> Floats:
    """The corrections to Stirling's formula for ln gamma(z)."""
    w = 1 / (z * z)
    return np.asarray((1 / 12 - w * (1 / 360 - w / 1260)) / z)


def _wide(F: Floats, df1: Floats, df2: Floats, mean: Floats) -> Mixture:
    sd = np.sqrt(mean)
    j = mean[:, None] + STEP * sd[:, None] * (np.arange(SAMPLED) - (SAMPLED - 1) / 2)
    a = (df1 / 2)[:, None] + j
    if np.isinf(df2[0]):
        shares = np.asarray(special.gammainc(a, (df1 * F / 2)[:, None]))
    else:
        shares = np.asarray(special.betainc(a, (df2 / 2)[:, None], (df1 * F / (df1 * F + df2))[:, None]))
    return Mixture(j, shares, None, mean - SLACK * sd, mean + SLACK * sd)
