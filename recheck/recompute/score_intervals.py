"""Score and likelihood intervals of odds ratio, risk ratio and risk difference from the counts of two groups.

Counts as in `risks`; everything broadcasts. An interval holds the values that a test at 1 - `level` keeps: their
chance of the counts is the largest that they allow ("restricted"). As a statistic falls with the value that is
tested, its ends are found by halving, to 1e-12 of the scale (of the logarithm, for ratios).
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Bounds, Floats, quotient, together
from recheck.recompute.proportions import critical_z

FARTHEST = 45.0
"""Logarithm of the largest ratio that is looked for."""
HALVINGS = 60


@dataclass(frozen=True, slots=True)
class _Table:
    a: Floats
    b: Floats
    c: Floats
    d: Floats

    @property
    def n1(self) -> Floats:
        return np.asarray(self.a + self.b)

    @property
    def n2(self) -> Floats:
        return np.asarray(self.c + self.d)

    @property
    def spread(self) -> Floats:
        """N / (N - 1), by which Miettinen and Nurminen enlarge the variance."""
        whole = self.n1 + self.n2
        return quotient(whole, whole - 1)


Restricted = Callable[[_Table, Floats], tuple[Floats, Floats]]
Statistic = Callable[[_Table, Floats, Floats, Floats], Floats]


def odds_ratio_score(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95, *, unbiased: bool = True
) -> Bounds:
    """Score interval of the odds ratio.

    Source: Miettinen & Nurminen (1985), Statistics in Medicine 4:213-226; without the factor N/(N - 1) (`unbiased`
    false) it is that of Cornfield (1956), Proc. Third Berkeley Symposium 4:135-148, without continuity correction.
    """

    def z(table: _Table, value: Floats, p1: Floats, p2: Floats) -> Floats:
        precision = quotient(1, table.n1 * p1 * (1 - p1)) + quotient(1, table.n2 * p2 * (1 - p2))
        scale = np.sqrt(precision / (table.spread if unbiased else 1.0))
        return np.asarray((table.a - table.n1 * p1) * scale)

    return _ratio(_restricted_odds, z, (a, b, c, d), level, odds=True)


def risk_ratio_score(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95, *, unbiased: bool = True
) -> Bounds:
    """Score interval of the risk ratio; without `unbiased` it is Koopman's.

    Source: Miettinen & Nurminen (1985), Statistics in Medicine 4:213-226; Koopman (1984), Biometrics 40:513-517.
    """

    def z(table: _Table, value: Floats, p1: Floats, p2: Floats) -> Floats:
        ratio = np.exp(value)
        variance = quotient(p1 * (1 - p1), table.n1) + ratio**2 * quotient(p2 * (1 - p2), table.n2)
        gap = quotient(table.a, table.n1) - ratio * quotient(table.c, table.n2)
        return quotient(gap, np.sqrt(variance * (table.spread if unbiased else 1.0)))

    return _ratio(_restricted_risks, z, (a, b, c, d), level, odds=False)


def difference_score(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95, *, unbiased: bool = True
) -> Bounds:
    """Score interval of the risk difference; without `unbiased` it is Mee's.

    Source: Miettinen & Nurminen (1985), Statistics in Medicine 4:213-226; Mee (1984), Biometrics 40:1175-1176.
    """

    def z(table: _Table, value: Floats, p1: Floats, p2: Floats) -> Floats:
        variance = quotient(p1 * (1 - p1), table.n1) + quotient(p2 * (1 - p2), table.n2)
        gap = quotient(table.a, table.n1) - quotient(table.c, table.n2) - value
        return quotient(gap, np.sqrt(variance * (table.spread if unbiased else 1.0)))

    return _difference(z, (a, b, c, d), level)


def odds_ratio_likelihood(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """Profile-likelihood interval of the odds ratio, as a logistic regression on the group gives it.

    Source: Venzon & Moolgavkar (1988), Applied Statistics 37:87-94.
    """
    return _ratio(_restricted_odds, _signed_root, (a, b, c, d), level, odds=True)


def risk_ratio_likelihood(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """Profile-likelihood interval of the risk ratio. Source: Venzon & Moolgavkar (1988), Applied Statistics 37:87-94."""
    return _ratio(_restricted_risks, _signed_root, (a, b, c, d), level, odds=False)


def difference_likelihood(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """Profile-likelihood interval of the risk difference. Source: Venzon & Moolgavkar (1988), Applied Statistics 37:87-94."""
    return _difference(_signed_root, (a, b, c, d), level)


def _restricted_odds(table: _Table, value: Floats) -> tuple[Floats, Floats]:
    """The likeliest risks whose odds ratio is exp(value): the root of a quadratic, written so that it never cancels."""
    psi, events = np.exp(value), table.a + table.c
    square = table.n2 * (psi - 1)
    linear = table.n1 * psi + table.n2 - events * (psi - 1)
    p2 = quotient(2 * events, linear + np.sqrt(np.maximum(linear**2 + 4 * square * events, 0.0)))
    p2 = np.clip(p2, 0.0, 1.0)
    return np.asarray(quotient(p2 * psi, 1 + p2 * (psi - 1))), p2


def _restricted_risks(table: _Table, value: Floats) -> tuple[Floats, Floats]:
    """The likeliest risks whose ratio is exp(value)."""
    theta, events = np.exp(value), table.a + table.c
    square = (table.n1 + table.n2) * theta
    linear = table.n1 * theta + table.a + table.n2 + table.c * theta
    p2 = quotient(2 * events, linear + np.sqrt(np.maximum(linear**2 - 4 * square * events, 0.0)))
    p2 = np.minimum(p2, np.minimum(1.0, quotient(1.0, theta)))
    return np.asarray(np.minimum(p2 * theta, 1.0)), np.asarray(p2)


def _restricted_difference(table: _Table, value: Floats) -> tuple[Floats, Floats]:
    """The likeliest risks with p1 - p2 = value: the middle root of the cubic of Miettinen and Nurminen."""
    a, b, c, d, delta = table.a, table.b, table.c, table.d, value
    cube = a + b + c + d
    square = -a * (2 - delta) - b * (1 - delta) - c * (2 - 2 * delta) - d * (1 - 2 * delta)
    linear = a * (1 - delta) - b * delta + c * (1 - 3 * delta + delta**2) - d * delta * (1 - delta)
    constant = c * delta * (1 - delta)
    third = square / (3 * cube)
    q = third**3 - linear * square / (6 * cube**2) + constant / (2 * cube)
    radius = np.copysign(np.sqrt(np.maximum(third**2 - linear / (3 * cube), 0.0)), q)
    angle = (np.pi + np.arccos(np.clip(quotient(q, radius**3), -1.0, 1.0))) / 3
    p2 = np.clip(2 * radius * np.cos(angle) - third, np.maximum(-delta, 0.0), np.minimum(1 - delta, 1.0))
    return np.asarray(np.clip(p2 + delta, 0.0, 1.0)), np.asarray(p2)


def _log_likelihood(table: _Table, p1: Floats, p2: Floats) -> Floats:
    return np.asarray(
        special.xlogy(table.a, p1) + special.xlog1py(table.b, -p1)
        + special.xlogy(table.c, p2) + special.xlog1py(table.d, -p2)
    )  # fmt: skip


def _signed_root(table: _Table, value: Floats, p1: Floats, p2: Floats) -> Floats:
    """The signed root of the likelihood ratio: positive where the restricted first risk lies below the observed one."""
    own1, own2 = quotient(table.a, table.n1), quotient(table.c, table.n2)
    deviance = 2 * (_log_likelihood(table, own1, own2) - _log_likelihood(table, p1, p2))
    return np.asarray(np.sign(own1 - p1 - (own2 - p2)) * np.sqrt(np.maximum(deviance, 0.0)))


def _ratio(
    restricted: Restricted, z: Statistic, counts: tuple[ArrayLike, ...], level: ArrayLike, *, odds: bool
) -> Bounds:
    *cells, levels = together(*counts, level)
    table = _Table(*cells)
    low, high = (np.exp(end) for end in _ends(table, restricted, z, levels, FARTHEST))
    none_low = table.a == 0 if not odds else (table.a == 0) | (table.d == 0)
    none_high = table.c == 0 if not odds else (table.b == 0) | (table.c == 0)
    empty = ~((table.n1 > 0) & (table.n2 > 0))
    low, high = np.where(none_low, 0.0, low), np.where(none_high, np.inf, high)
    return np.where(empty, np.nan, low), np.where(empty, np.nan, high)


def _difference(z: Statistic, counts: tuple[ArrayLike, ...], level: ArrayLike) -> Bounds:
    *cells, levels = together(*counts, level)
    table = _Table(*cells)
    low, high = _ends(table, _restricted_difference, z, levels, 1.0)
    empty = ~((table.n1 > 0) & (table.n2 > 0))
    return np.where(empty, np.nan, low), np.where(empty, np.nan, high)


def _ends(table: _Table, restricted: Restricted, z: Statistic, level: Floats, farthest: float) -> Bounds:
    """Where a falling statistic passes z and -z."""
    critical = critical_z(level)
    found = []
    for target in (critical, -critical):
        low, high = np.full(level.shape, -farthest), np.full(level.shape, farthest)
        for _ in range(HALVINGS):
            middle = (low + high) / 2
            with np.errstate(invalid="ignore", divide="ignore", over="ignore"):
                value = z(table, middle, *restricted(table, middle))
            # No gap over no variance, as of two groups without events at a difference of 0, is no evidence.
            above = np.where(np.isnan(value), 0.0, value) > target
            low, high = np.where(above, middle, low), np.where(above, high, middle)
        found.append(np.asarray((low + high) / 2))
    return found[0], found[1]
