"""Rows of correlations and regressions."""

import numpy as np
from scipy import special

from tests.benchmarks.formula_rows.row import Column, Row


def _third(low12: Column, high12: Column, low13: Column, high13: Column) -> tuple[Column, Column]:
    a, b = np.arccos(high12), np.arccos(low13)
    return np.cos(np.arccos(low12) + b), np.cos(a - np.arccos(high13))


def _partial(a: Column, b: Column, c: Column) -> Column:
    return (a - b * c) / np.sqrt((1 - b * b) * (1 - c * c))


def _partial_ends(a: Column, b: Column, c: Column, d: Column, e: Column, f: Column) -> tuple[Column, ...]:
    return tuple(_partial(x, y, z) for x in (a, b) for y in (c, d) for z in (e, f))


def _adjusted(share: Column, df1: Column, df2: Column) -> Column:
    return 1 - (1 - share) * (df1 + df2) / df2


def _stein(share: Column, df1: Column, df2: Column) -> Column:
    n = df1 + df2 + 1
    return 1 - (1 - share) * ((n - 1) * (n - 2) * (n + 1) / (df2 * (df2 - 1) * n))


ROWS = {
    "correlations.partial_r": Row("r share r", _partial),
    "correlations.semipartial_r": Row("r r share", lambda a, b, c: (a - b * c) / np.sqrt(1 - c * c)),
    "correlations.partial_r_bounds": Row("r- r+ r- r+ share- share+", _partial_ends),
    "matrices.third_correlation_bounds": Row("r- r+ share- share+", _third),
    "matrices.triple_excess": Row("r- r+ share- share+ r- r+", lambda a, b, c, d, e, f: _third(a, b, c, d)),
    "regressions.F_from_r2": Row("share df1 df2", lambda r2, a, b: r2 * b / ((1 - r2) * a)),
    "regressions.r2_from_F": Row("F df1 df2", lambda F, a, b: a * F / (a * F + b)),
    "regressions.r2_from_F_bounds": Row(
        "F- F+ df1 df1 df2 df2", lambda F, G, a, _, b, __: (a * F / (a * F + b), a * G / (a * G + b))
    ),
    "regressions.adjusted_r2": Row("share df1 df2", _adjusted),
    "regressions.adjusted_r2_wherry": Row("share df1 df2", _adjusted),
    "regressions.adjusted_r2_olkin_pratt": Row(
        "share df1 df2", lambda r2, a, b: special.hyp2f1(1.0, 1.0, b / 2 + 1, 1 - r2)
    ),
    "regressions.adjusted_r2_stein": Row("share df1 df2", _stein),
    "regressions.r2_from_adjusted": Row("share df1 df2", _adjusted),
    "regressions.r2_change_from_F": Row("F df1 df2 share", lambda F, a, b, r2: (1 - r2) * F * a / b),
    "regressions.beta_from_b": Row("d sd1 sd2", lambda b, x, y: b * x / y),
    "regressions.r2_from_betas": Row("r r", lambda b, r: (b * r).sum(axis=-1), groups=4),
}
EXEMPT = {
    "matrices.smallest_eigenvalue": "one call of the library for all matrices",
    "matrices.worst_triples": "all triples of one matrix by `triple_excess`",
    "matrices.entry_bounds": "one matrix at a time",
    "matrices.within_box": "one matrix at a time, by iteration: tests/checks/test_matrices.py times it",
    "matrices.most_over_box": "exact fractions, one matrix at a time",
    "matrices.still_proved": "one matrix at a time, by `most_over_box`",
    "matrices.fewest_at_fault": "one matrix at a time",
}
