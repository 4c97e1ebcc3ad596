"""Confidence intervals of odds ratio, risk ratio and risk difference from the counts of two groups.

Counts as in `risks`: a, b with and without the event in the first group, c, d in the second; `level` from 0 to 1.
Everything broadcasts; each function gives the lower and the upper end. Ratios run from 0 to infinity, differences
from -1 to 1. The exact intervals of the odds ratio stand in `exact_tests`, score and likelihood ones in
`score_intervals`.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute import proportions, risks
from recheck.recompute.arrays import Bounds, Floats, floats, quotient
from recheck.recompute.proportions import critical_z


def odds_ratio_wald(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """OR exp(∓ z SE of ln OR); nan where a count is 0. Source: Woolf (1955), Annals of Human Genetics 19:251-253."""
    return _log_wald(risks.odds_ratio(a, b, c, d), risks.log_odds_ratio_se(a, b, c, d), level)


def odds_ratio_wald_half(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """As `odds_ratio_wald` with ½ added to each count. Source: Gart & Zweifel (1967), Biometrika 54:181-187."""
    return odds_ratio_wald(*risks.with_half(a, b, c, d), level)


def risk_ratio_wald(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """RR exp(∓ z SE of ln RR); nan where an event count is 0. Source: Katz et al. (1978), Biometrics 34:469-474."""
    return _log_wald(risks.risk_ratio(a, b, c, d), risks.log_risk_ratio_se(a, b, c, d), level)


def risk_ratio_wald_half(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """As `risk_ratio_wald` with ½ added to the events and to the groups. Source: Walter (1975), Biometrika 62:371-374; Pettigrew, Gart & Thomas (1986), Biometrika 73:425-435."""
    a, b, c, d = floats(a, b, c, d)
    n1, n2 = a + b + 0.5, c + d + 0.5
    ratio = quotient((a + 0.5) * n2, (c + 0.5) * n1)
    with np.errstate(invalid="ignore"):
        se = np.sqrt(1 / (a + 0.5) - 1 / n1 + 1 / (c + 0.5) - 1 / n2)
    return _log_wald(ratio, se, level)


def risk_ratio_rates(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """The Poisson interval of a ratio of rates, RR exp(∓ z √(1/a + 1/c)). Source: Rothman & Greenland (1998), Modern Epidemiology, 14."""
    a, b, c, d = floats(a, b, c, d)
    se = np.sqrt(quotient(1, a) + quotient(1, c))
    return _log_wald(risks.risk_ratio(a, b, c, d), np.asarray(se), level)


def difference_wald(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """RD ∓ z SE. Source: Fleiss (1981), Statistical Methods for Rates and Proportions, 2.1."""
    return _cut(risks.risk_difference(a, b, c, d), critical_z(level) * risks.risk_difference_se(a, b, c, d))


def difference_wald_corrected(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """Wald's interval, wider by (1/n1 + 1/n2)/2 but not by more than |RD|, as R's prop.test has it. Source: Fleiss (1981), 2.1; Newcombe (1998), Statistics in Medicine 17:873-890, method 2."""
    a, b, c, d = floats(a, b, c, d)
    difference = risks.risk_difference(a, b, c, d)
    more = np.minimum((quotient(1, a + b) + quotient(1, c + d)) / 2, np.abs(difference))
    return _cut(difference, critical_z(level) * risks.risk_difference_se(a, b, c, d) + more)


def difference_agresti_caffo(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """Wald's interval with one case of either kind added to both groups. Source: Agresti & Caffo (2000), American Statistician 54:280-288."""
    a, b, c, d = floats(a, b, c, d)
    return difference_wald(a + 1, b + 1, c + 1, d + 1, level)


def difference_newcombe(
    a: ArrayLike,
    b: ArrayLike,
    c: ArrayLike,
    d: ArrayLike,
    level: ArrayLike = 0.95,
    *,
    corrected: bool = False,
) -> Bounds:
    """From Wilson's intervals of both proportions, with the continuity correction where asked.

    Source: Newcombe (1998), Statistics in Medicine 17:873-890, methods 10 and 11.
    """
    a, b, c, d = floats(a, b, c, d)
    single = proportions.wilson_corrected if corrected else proportions.wilson
    p1, p2 = quotient(a, a + b), quotient(c, c + d)
    (l1, u1), (l2, u2) = single(a, a + b, level), single(c, c + d, level)
    low = p1 - p2 - np.hypot(p1 - l1, u2 - p2)
    high = p1 - p2 + np.hypot(u1 - p1, p2 - l2)
    return np.asarray(np.maximum(low, -1.0)), np.asarray(np.minimum(high, 1.0))


def _log_wald(ratio: Floats, se: Floats, level: ArrayLike) -> Bounds:
    half = np.where(np.isfinite(se), critical_z(level) * se, np.nan)
    with np.errstate(invalid="ignore", over="ignore"):
        return np.asarray(ratio * np.exp(-half)), np.asarray(ratio * np.exp(half))


def _cut(difference: Floats, half: Floats) -> Bounds:
    return np.asarray(np.maximum(difference - half, -1.0)), np.asarray(np.minimum(difference + half, 1.0))
