"""Odds ratio, risk ratio and risk difference of two groups, with their standard errors.

Counts `a` and `b` are the cases with and without the event in the first group, `c` and `d` in the second; they
may be any numbers that are not negative, and broadcast. x/0 is infinite, 0/0 nan.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Floats, floats, quotient


def odds_ratio(a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike) -> Floats:
    """Odds ratio (a/b) / (c/d). Source: Cornfield (1951), J. National Cancer Institute 11:1269-1275."""
    a, b, c, d = floats(a, b, c, d)
    return quotient(a * d, b * c)


def log_odds_ratio_se(a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike) -> Floats:
    """SE of ln OR, √(1/a + 1/b + 1/c + 1/d). Source: Woolf (1955), Annals of Human Genetics 19:251-253."""
    return np.asarray(np.sqrt(sum(quotient(1, count) for count in floats(a, b, c, d))))


def risk_ratio(a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike) -> Floats:
    """Risk ratio, a/(a + b) over c/(c + d). By definition."""
    a, b, c, d = floats(a, b, c, d)
    return quotient(a * (c + d), c * (a + b))


def log_risk_ratio_se(a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike) -> Floats:
    """SE of ln RR, √(1/a - 1/(a + b) + 1/c - 1/(c + d)). Source: Katz, Baptista, Azen & Pike (1978), Biometrics 34:469-474."""
    a, b, c, d = floats(a, b, c, d)
    variance = quotient(b, a * (a + b)) + quotient(d, c * (c + d))
    return np.asarray(np.sqrt(variance))


def risk_difference(a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike) -> Floats:
    """Risk difference, a/(a + b) less c/(c + d). By definition."""
    a, b, c, d = floats(a, b, c, d)
    return np.asarray(quotient(a, a + b) - quotient(c, c + d))


def risk_difference_se(a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike) -> Floats:
    """SE of the risk difference, √(p1(1 - p1)/n1 + p2(1 - p2)/n2). Source: Fleiss (1981), Statistical Methods for Rates and Proportions, 2.1."""
    a, b, c, d = floats(a, b, c, d)
    n1, n2 = a + b, c + d
    return np.asarray(np.sqrt(quotient(a * b, n1**3) + quotient(c * d, n2**3)))


def number_needed_to_treat(a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike) -> Floats:
    """1 over the absolute risk difference. Source: Laupacis, Sackett & Roberts (1988), N. Engl. J. Med. 318:1728-1733."""
    return quotient(1.0, np.abs(risk_difference(a, b, c, d)))


def with_half(
    a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike
) -> tuple[Floats, Floats, Floats, Floats]:
    """The four counts with ½ added to each. Source: Haldane (1956), Annals of Human Genetics 20:309-311; Anscombe (1956), Biometrika 43:461-464."""
    a, b, c, d = floats(a, b, c, d)
    return a + 0.5, b + 0.5, c + 0.5, d + 0.5


def z_pooled(a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike) -> Floats:
    """z of two proportions with the pooled error; its square is Pearson's χ². Source: Fleiss (1981), 2.1."""
    a, b, c, d = floats(a, b, c, d)
    n1, n2 = a + b, c + d
    share = quotient(a + c, n1 + n2)
    error = np.sqrt(share * (1 - share) * (quotient(1, n1) + quotient(1, n2)))
    return quotient(risk_difference(a, b, c, d), error)


def z_unpooled(a: ArrayLike, b: ArrayLike, c: ArrayLike, d: ArrayLike) -> Floats:
    """z of two proportions with the unpooled error. Source: Fleiss (1981), 2.1."""
    return quotient(risk_difference(a, b, c, d), risk_difference_se(a, b, c, d))
