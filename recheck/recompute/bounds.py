"""Ranges of p over a box of a statistic and its df: exact, each end attained by a point of the box.

The ends are those of the tails in `tails`, so good to the relative error given there. Low ends must
not exceed high ends; infinite ends are allowed.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Bounds, Floats, floats, together
from recheck.recompute.f_shape import (
    greatest_over_df1,
    greatest_over_epsilon,
    least_over_df2,
    least_over_epsilon,
)
from recheck.recompute.tails import chi2_tail, f_tail, r_tail, t_tail, z_tail


def p_from_t_bounds(
    t_low: ArrayLike, t_high: ArrayLike, df_low: ArrayLike, df_high: ArrayLike, tails: ArrayLike = 2
) -> Bounds:
    """Range of p, by `t_tail`, over a box of t and df.

    `tails` 2: the box is of |t|, what lies below 0 is cut off; 1: t is signed, p the upper tail.
    Corners: the tail falls as t rises; as df rises it falls where t > 0 and rises where t < 0 (the
    tail of t² = F(1, df) falls with df, see `f_shape`).
    """
    t_low, t_high, df_low, df_high, tails = floats(t_low, t_high, df_low, df_high, tails)
    t_low, t_high = _cut(t_low, tails), _cut(t_high, tails)
    low = t_tail(t_high, np.where(t_high >= 0, df_high, df_low))
    high = t_tail(t_low, np.where(t_low >= 0, df_low, df_high))
    return np.asarray(tails * low), np.asarray(tails * high)


def p_from_z_bounds(z_low: ArrayLike, z_high: ArrayLike, tails: ArrayLike = 2) -> Bounds:
    """Range of p, by `z_tail`, over an interval of z: `tails` 2 of |z|, 1 of the signed z with p its upper tail."""
    z_low, z_high, tails = floats(z_low, z_high, tails)
    low, high = z_tail(_cut(z_high, tails)), z_tail(_cut(z_low, tails))
    return np.asarray(tails * low), np.asarray(tails * high)


def p_from_chi2_bounds(
    chi2_low: ArrayLike, chi2_high: ArrayLike, df_low: ArrayLike, df_high: ArrayLike
) -> Bounds:
    """Range of the upper tail, `chi2_tail`, over a box of chi-square and df.

    Corners: the tail falls as chi-square rises, and rises with df, since an independent chi-square
    variable is added to the first.
    """
    return chi2_tail(chi2_high, df_low), chi2_tail(chi2_low, df_high)


def p_from_r_bounds(
    r_low: ArrayLike, r_high: ArrayLike, df_low: ArrayLike, df_high: ArrayLike, tails: ArrayLike = 2
) -> Bounds:
    """Range of p, by `r_tail`, over a box of r and df = n - 2; r is cut to its range.

    `tails` 2: the box is of |r|; 1: r is signed, p the upper tail. Corners: t = r sqrt(df / (1 - r²))
    rises with r and moves away from 0 with df, and so does its tail (see `p_from_t_bounds`).
    """
    r_low, r_high, df_low, df_high, tails = floats(r_low, r_high, df_low, df_high, tails)
    r_low, r_high = (np.clip(_cut(r, tails), -1.0, 1.0) for r in (r_low, r_high))
    low = r_tail(r_high, np.where(r_high >= 0, df_high, df_low))
    high = r_tail(r_low, np.where(r_low >= 0, df_low, df_high))
    return np.asarray(tails * low), np.asarray(tails * high)


def p_from_F_bounds(
    F_low: ArrayLike, F_high: ArrayLike,
    df1_low: ArrayLike, df1_high: ArrayLike, df2_low: ArrayLike, df2_high: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of the upper tail, `f_tail`, over a box of F, df1 and df2.

    The tail falls as F rises. In df1 it rises, or rises and then falls: the least value has df1 at an
    end. In df2 it falls, or falls and then rises: the greatest value has df2 at an end. The other
    extremum along such an edge is sought by golden section where it can lie inside (see `f_shape`).
    With exact df this takes two tails.
    """
    F_low, F_high, *dfs = together(F_low, F_high, df1_low, df1_high, df2_low, df2_high)
    df1_low, df1_high, df2_low, df2_high = dfs
    if np.array_equal(df1_low, df1_high) and np.array_equal(df2_low, df2_high):
        return f_tail(F_high, df1_low, df2_low), f_tail(F_low, df1_low, df2_low)
    low = [least_over_df2(F_high, df1, df2_low, df2_high) for df1 in (df1_low, df1_high)]
    high = [greatest_over_df1(F_low, df1_low, df1_high, df2) for df2 in (df2_low, df2_high)]
    return np.asarray(np.minimum(*low)), np.asarray(np.maximum(*high))


def p_corrected_F_bounds(F_low: ArrayLike, F_high: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Bounds:
    """Range of p when both nominal df are multiplied by some sphericity epsilon from 1 / df1 to 1.

    p is monotone in epsilon or has one extremum, which is located (see `f_shape`); so the
    uncorrected p and the p at 1 / df1 need not be the ends. Source: Box (1954), Annals of Mathematical
    Statistics 25:484-498; Greenhouse & Geisser (1959), Psychometrika 24:95-112.
    """
    F_low, F_high, df1, df2 = together(F_low, F_high, df1, df2)
    return least_over_epsilon(F_high, df1, df2), greatest_over_epsilon(F_low, df1, df2)


def _cut(statistic: Floats, tails: Floats) -> Floats:
    """Cut an end of an interval of absolute values at 0."""
    return np.where(tails == 2, np.maximum(statistic, 0.0), statistic)
