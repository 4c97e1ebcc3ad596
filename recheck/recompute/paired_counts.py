"""Counts of pairs: the same units judged twice, `b` and `c` those that changed one way and the other.

Arguments broadcast; nan where no pair changed.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Bounds, Floats, floats, quotient
from recheck.recompute.proportions import clopper_pearson, critical_z


def mcnemar_chi2(b: ArrayLike, c: ArrayLike) -> Floats:
    """χ² with 1 df, (b - c)² / (b + c). Source: McNemar (1947), Psychometrika 12:153-157."""
    b, c = floats(b, c)
    return quotient((b - c) ** 2, b + c)


def mcnemar_chi2_corrected(b: ArrayLike, c: ArrayLike) -> Floats:
    """χ² with the continuity correction, (|b - c| - 1)² / (b + c), 0 where b = c, as in R.

    Source: Edwards (1948), Psychometrika 13:185-187.
    """
    b, c = floats(b, c)
    return quotient(np.maximum(np.abs(b - c) - 1, 0.0) ** 2, b + c)


def mcnemar_exact_p(b: ArrayLike, c: ArrayLike) -> Floats:
    """Two-sided p of the sign test: twice the smaller tail of the binomial (b + c, ½), 1 at most.

    Source: Mosteller (1952), Biometrics 8:220-226.
    """
    b, c = floats(b, c)
    total, less = b + c, np.minimum(b, c)
    p = np.minimum(2 * _smaller_tail(less, total), 1.0)
    return np.asarray(np.where(total > 0, p, np.nan))


def mcnemar_mid_p(b: ArrayLike, c: ArrayLike) -> Floats:
    """The exact p less the probability of the observed split, less half of it where b = c. Source: Fagerland, Lydersen & Laake (2013), BMC Medical Research Methodology 13:91."""
    b, c = floats(b, c)
    total, less = b + c, np.minimum(b, c)
    logs = special.gammaln(total + 1) - special.gammaln(less + 1) - special.gammaln(total - less + 1)
    point = np.exp(logs - total * np.log(2.0))
    # Equal numbers: every split is no likelier, and the observed one counts half.
    p = np.where(b == c, 1 - point / 2, 2 * _smaller_tail(less, total) - point)
    return np.asarray(np.where(total > 0, np.minimum(p, 1.0), np.nan))


def matched_odds_ratio(b: ArrayLike, c: ArrayLike) -> Floats:
    """Odds ratio of matched pairs, b / c. Source: Mantel & Haenszel (1959), J. National Cancer Institute 22:719-748."""
    return quotient(*floats(b, c))


def matched_log_se(b: ArrayLike, c: ArrayLike) -> Floats:
    """SE of ln(b / c), √(1/b + 1/c). Source: Breslow & Day (1980), Statistical Methods in Cancer Research I, 5.2."""
    b, c = floats(b, c)
    return np.asarray(np.sqrt(quotient(1, b) + quotient(1, c)))


def matched_wald(b: ArrayLike, c: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Wald interval of the matched odds ratio on the log scale; nan where b or c is 0. Source: as for `matched_log_se`."""
    ratio, se = matched_odds_ratio(b, c), matched_log_se(b, c)
    half = critical_z(level) * np.where(np.isfinite(se), se, np.nan)
    return np.asarray(ratio * np.exp(-half)), np.asarray(ratio * np.exp(half))


def matched_exact(b: ArrayLike, c: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Exact interval of the matched odds ratio, p / (1 - p) of Clopper and Pearson's of b out of b + c.

    Source: Breslow & Day (1980), Statistical Methods in Cancer Research I, 5.2; as R's mcnemar in `exact2x2` and `binom.test`.
    """
    b, c = floats(b, c)
    low, high = clopper_pearson(b, b + c, level)
    return quotient(low, 1 - low), quotient(high, 1 - high)


def paired_difference_se(b: ArrayLike, c: ArrayLike, n: ArrayLike) -> Floats:
    """SE of the difference of two paired proportions, (b - c) / n: √(b + c - (b - c)²/n) / n.

    Source: Fleiss (1981), Statistical Methods for Rates and Proportions, 8.1.
    """
    b, c, n = floats(b, c, n)
    return quotient(np.sqrt(np.maximum(b + c - quotient((b - c) ** 2, n), 0.0)), n)


def _smaller_tail(less: Floats, total: Floats) -> Floats:
    """P(X ≤ less) of the binomial (total, ½) by the incomplete beta function."""
    with np.errstate(invalid="ignore"):
        return np.asarray(special.betainc(total - less, less + 1, 0.5))
