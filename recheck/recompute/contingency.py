"""Tests of tables of counts, rows and columns along the last two axes.

nan where a row or a column of a table is empty. Counts may be any numbers that are not negative.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, floats, quotient


def expected_counts(counts: ArrayLike) -> Floats:
    """Counts expected from the margins, row total times column total over the whole. Source: Pearson (1904), On the Theory of Contingency."""
    (counts,) = floats(counts)
    rows, columns = counts.sum(axis=-1, keepdims=True), counts.sum(axis=-2, keepdims=True)
    return quotient(rows * columns, _whole(counts)[..., None, None])


def pearson_chi2(counts: ArrayLike) -> Floats:
    """Pearson's chi-square of independence, df (rows - 1)(columns - 1).

    Source: Pearson (1900), Philosophical Magazine 50:157-175; Fisher (1922), J. R. Stat. Soc. 85:87-94.
    """
    (counts,) = floats(counts)
    expected = expected_counts(counts)
    return np.asarray(np.sum(quotient((counts - expected) ** 2, expected), axis=(-2, -1)))


def n_minus_one_chi2(counts: ArrayLike) -> Floats:
    """Pearson's chi-square times (N - 1) / N; for 2 x 2 tables as E. S. Pearson (1947), Biometrika 34:139-167."""
    (counts,) = floats(counts)
    whole = _whole(counts)
    return np.asarray(pearson_chi2(counts) * (whole - 1) / whole)


def likelihood_ratio_chi2(counts: ArrayLike) -> Floats:
    """Likelihood-ratio chi-square, 2 sum observed ln(observed / expected).

    Source: Wilks (1938), Annals of Mathematical Statistics 9:60-62.
    """
    (counts,) = floats(counts)
    terms = special.xlogy(counts, quotient(counts, expected_counts(counts)))
    return np.asarray(2 * np.sum(terms, axis=(-2, -1)))


def yates_chi2(counts: ArrayLike) -> Floats:
    """Chi-square of a 2 x 2 table with the continuity correction, each deviation less 1/2 but not below 0.

    Source: Yates (1934), Supplement to J. R. Stat. Soc. 1:217-235.
    """
    (counts,) = floats(counts)
    expected = expected_counts(counts)
    deviation = np.maximum(np.abs(counts - expected) - 0.5, 0.0)
    return np.asarray(np.sum(quotient(deviation**2, expected), axis=(-2, -1)))


def _whole(counts: Floats) -> Floats:
    return np.asarray(counts.sum(axis=(-2, -1)))
