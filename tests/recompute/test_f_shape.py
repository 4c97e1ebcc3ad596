"""Extrema of the F tail along its df against dense grids of scipy's tail."""

import numpy as np
import pytest
from scipy import stats

from recheck.recompute import f_shape

CASES = [
    (F, df1, df2) for F in (0.02, 0.3, 0.9, 1.1, 1.6, 4.0) for df1 in (1.0, 2.0, 5.0, 30.0) for df2 in (1.0, 4.0, 40.0)
]  # fmt: skip
F, DF1, DF2 = (np.array(column) for column in zip(*CASES, strict=True))
GRID = np.linspace(0, 1, 2001)[:, None]


def test_least_over_df2_and_greatest_over_df1():
    dfs = 0.5 * (400 / 0.5) ** GRID
    low, high = np.full(F.shape, 0.5), np.full(F.shape, 400.0)
    least = np.min(stats.f.sf(F, DF1, dfs), axis=0)
    assert f_shape.least_over_df2(F, DF1, low, high) == pytest.approx(least, rel=1e-5)
    assert np.all(f_shape.least_over_df2(F, DF1, low, high) <= least * (1 + 1e-9))
    greatest = np.max(stats.f.sf(F, dfs, DF2), axis=0)
    assert f_shape.greatest_over_df1(F, low, high, DF2) == pytest.approx(greatest, rel=1e-5)
    assert np.all(f_shape.greatest_over_df1(F, low, high, DF2) >= greatest * (1 - 1e-9))


def test_extrema_over_epsilon():
    epsilon = 1 / DF1 + GRID * (1 - 1 / DF1)
    tails = stats.f.sf(F, epsilon * DF1, epsilon * DF2)
    least, greatest = f_shape.least_over_epsilon(F, DF1, DF2), f_shape.greatest_over_epsilon(F, DF1, DF2)
    assert least == pytest.approx(tails.min(axis=0), rel=1e-5)
    assert greatest == pytest.approx(tails.max(axis=0), rel=1e-5)
    assert np.all(least <= tails.min(axis=0) * (1 + 1e-9))
    assert np.all(greatest >= tails.max(axis=0) * (1 - 1e-9))


def test_the_floor_of_a_valley_is_found():
    bottom = np.array([0.0, 0.3, 0.999, 1.0])
    found = f_shape.valley_floor(lambda x: np.abs(x - bottom) ** 1.5 + 2, np.zeros(4), np.ones(4))
    assert found == pytest.approx(2.0, rel=1e-9)
