"""Mean and SD of a sample from its range, its quartiles, or both: published estimators for normal data.

Letters as in the papers: a minimum, q1 and q3 quartiles, m median, b maximum, n the sample size. None
of these is exact; what the printed numbers prove is told by `spread_limits`. SDs are nan for n < 2.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Floats, floats, quotient
from recheck.recompute.tails import z_quantile


def mean_from_range_hozo(a: ArrayLike, m: ArrayLike, b: ArrayLike) -> Floats:
    """(a + 2 m + b) / 4. Source: Hozo, Djulbegovic & Hozo (2005), BMC Med. Res. Methodol. 5:13, for n up to 25."""
    a, m, b = floats(a, m, b)
    return np.asarray((a + 2 * m + b) / 4)


def sd_from_range_hozo(a: ArrayLike, m: ArrayLike, b: ArrayLike, n: ArrayLike) -> Floats:
    """SD by the rules for n up to 15, up to 70 and above: sqrt(((a - 2m + b)²/4 + (b - a)²) / 12), range / 4, range / 6.

    Source: Hozo, Djulbegovic & Hozo (2005), as above.
    """
    a, m, b, n = floats(a, m, b, n)
    few = np.sqrt(((a - 2 * m + b) ** 2 / 4 + (b - a) ** 2) / 12)
    sd = np.where(n <= 15, few, (b - a) / np.where(n <= 70, 4.0, 6.0))
    return np.where(n >= 2, sd, np.nan)


def mean_from_five_bland(a: ArrayLike, q1: ArrayLike, m: ArrayLike, q3: ArrayLike, b: ArrayLike) -> Floats:
    """(a + 2 q1 + 2 m + 2 q3 + b) / 8. Source: Bland (2015), Int. J. Stat. Med. Res. 4:57-64, as in Wan et al. (2014), formula 10."""
    a, q1, m, q3, b = floats(a, q1, m, q3, b)
    return np.asarray((a + 2 * q1 + 2 * m + 2 * q3 + b) / 8)


def mean_from_quartiles_wan(q1: ArrayLike, m: ArrayLike, q3: ArrayLike) -> Floats:
    """(q1 + m + q3) / 3. Source: Wan, Wang, Liu & Tong (2014), BMC Med. Res. Methodol. 14:135, formula 14."""
    q1, m, q3 = floats(q1, m, q3)
    return np.asarray((q1 + m + q3) / 3)


def sd_from_range_wan(a: ArrayLike, b: ArrayLike, n: ArrayLike) -> Floats:
    """(b - a) / (2 Φ⁻¹((n - 0.375) / (n + 0.25))). Source: Wan et al. (2014), as above, formula 9."""
    a, b, n = floats(a, b, n)
    return quotient(b - a, 2 * _extreme(n))


def sd_from_quartiles_wan(q1: ArrayLike, q3: ArrayLike, n: ArrayLike) -> Floats:
    """(q3 - q1) / (2 Φ⁻¹((0.75 n - 0.125) / (n + 0.25))). Source: Wan et al. (2014), as above, formula 16."""
    q1, q3, n = floats(q1, q3, n)
    return quotient(q3 - q1, 2 * _quartile(n))


def sd_from_five_wan(a: ArrayLike, q1: ArrayLike, q3: ArrayLike, b: ArrayLike, n: ArrayLike) -> Floats:
    """The mean of the SDs from the range and from the quartiles. Source: Wan et al. (2014), as above, formula 13."""
    return np.asarray((sd_from_range_wan(a, b, n) + sd_from_quartiles_wan(q1, q3, n)) / 2)


def sd_from_iqr(iqr: ArrayLike) -> Floats:
    """IQR / 1.35, for large samples.

    Source: Higgins, Li & Deeks, Cochrane Handbook for Systematic Reviews of Interventions, 6.5.2.5.
    """
    (iqr,) = floats(iqr)
    return np.asarray(iqr / 1.35)


def mean_from_range_luo(a: ArrayLike, m: ArrayLike, b: ArrayLike, n: ArrayLike) -> Floats:
    """w (a + b) / 2 + (1 - w) m with w = 4 / (4 + n^0.75).

    Source: Luo, Wan, Liu & Tong (2018), Statistical Methods in Medical Research 27:1785-1805.
    """
    a, m, b, n = floats(a, m, b, n)
    w = 4 / (4 + n**0.75)
    return np.asarray(w * (a + b) / 2 + (1 - w) * m)


def mean_from_quartiles_luo(q1: ArrayLike, m: ArrayLike, q3: ArrayLike, n: ArrayLike) -> Floats:
    """w (q1 + q3) / 2 + (1 - w) m with w = 0.7 + 0.39 / n. Source: Luo et al. (2018), as above."""
    q1, m, q3, n = floats(q1, m, q3, n)
    w = 0.7 + 0.39 / n
    return np.asarray(w * (q1 + q3) / 2 + (1 - w) * m)


def mean_from_five_luo(
    a: ArrayLike, q1: ArrayLike, m: ArrayLike, q3: ArrayLike, b: ArrayLike, n: ArrayLike
) -> Floats:
    """w1 (a + b) / 2 + w2 (q1 + q3) / 2 + (1 - w1 - w2) m.

    w1 = 2.2 / (2.2 + n^0.75), w2 = 0.7 - 0.72 / n^0.55. Source: Luo et al. (2018), as above.
    """
    a, q1, m, q3, b, n = floats(a, q1, m, q3, b, n)
    w1, w2 = 2.2 / (2.2 + n**0.75), 0.7 - 0.72 / n**0.55
    return np.asarray(w1 * (a + b) / 2 + w2 * (q1 + q3) / 2 + (1 - w1 - w2) * m)


def sd_from_five_shi(a: ArrayLike, q1: ArrayLike, q3: ArrayLike, b: ArrayLike, n: ArrayLike) -> Floats:
    """(b - a) / θ1 + (q3 - q1) / θ2, weighted so as to have the least error.

    θ1 = (2 + 0.14 n^0.6) Φ⁻¹((n - 0.375) / (n + 0.25)), θ2 = (2 + 2 / (0.07 n^0.6)) Φ⁻¹((0.75 n - 0.125) /
    (n + 0.25)). Source: Shi, Luo, Weng, Zeng, Lin, Chu & Tong (2020), Research Synthesis Methods 11:641-654.
    """
    a, q1, q3, b, n = floats(a, q1, q3, b, n)
    power = n**0.6
    theta1, theta2 = (2 + 0.14 * power) * _extreme(n), (2 + 2 / (0.07 * power)) * _quartile(n)
    return np.asarray(quotient(b - a, theta1) + quotient(q3 - q1, theta2))


def _extreme(n: Floats) -> Floats:
    """Blom's (1958) approximation to the expected largest of n normal values."""
    return z_quantile(0.625 / (np.where(n >= 2, n, np.nan) + 0.25))


def _quartile(n: Floats) -> Floats:
    """Blom's approximation to the expected upper quartile of n normal values."""
    return z_quantile((0.25 * n + 0.375) / (np.where(n >= 2, n, np.nan) + 0.25))
