"""Ranges of p: every point of the box is inside, and each end is attained.

A point far away in a tail is compared relatively, so nothing hides behind a small p.
"""

from itertools import pairwise

import numpy as np
import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st
from scipy.optimize import minimize_scalar
from scipy.special import lambertw

from recheck.recompute import bounds, tails
from tests.recompute.boxes import SHARES, at, holds, intervals

DF = intervals(0.5, 300, 2)
TAILS = st.sampled_from((1, 2))
BOX = settings(max_examples=150, deadline=None)


@BOX
@given(t=intervals(-9, 9, 2), df=DF, sides=TAILS, u=SHARES, v=SHARES)
@example(t=(-2.0, -1.0), df=(3.0, 5.0), sides=1, u=1.0, v=0.0)
def test_p_from_t(t, df, sides, u, v):
    box = bounds.p_from_t_bounds(*t, *df, sides)
    t_here = at(t, u) if sides == 1 else max(at(t, u), 0.0)
    assert holds(box, sides * float(tails.t_tail(t_here, at(df, v))))
    corners = [sides * float(tails.t_tail(x if sides == 1 else max(x, 0), y)) for x in t for y in df]
    assert [float(box[0]), float(box[1])] == [min(corners), max(corners)]


@BOX
@given(z=intervals(-9, 9, 2), sides=TAILS, u=SHARES)
def test_p_from_z(z, sides, u):
    box = bounds.p_from_z_bounds(*z, sides)
    absolute = [max(x, 0.0) if sides == 2 else x for x in (*z, at(z, u))]
    high, low, inside = (sides * float(tails.z_tail(x)) for x in absolute)
    assert (float(box[0]), float(box[1])) == (low, high)
    assert holds(box, inside)


@BOX
@given(chi2=intervals(0, 90, 2), df=DF, u=SHARES, v=SHARES)
def test_p_from_chi2(chi2, df, u, v):
    box = bounds.p_from_chi2_bounds(*chi2, *df)
    assert holds(box, float(tails.chi2_tail(at(chi2, u), at(df, v))))
    corners = [float(tails.chi2_tail(x, y)) for x in chi2 for y in df]
    assert [float(box[0]), float(box[1])] == [min(corners), max(corners)]


@BOX
@given(r=intervals(-1, 1, 0.3), df=DF, sides=TAILS, u=SHARES, v=SHARES)
@example(r=(-0.5, -0.2), df=(3.0, 5.0), sides=1, u=1.0, v=0.0)
@example(r=(0.98, 1.02), df=(3.0, 3.0), sides=2, u=1.0, v=0.0)
def test_p_from_r(r, df, sides, u, v):
    box = bounds.p_from_r_bounds(*r, *df, sides)
    floor = 0.0 if sides == 2 else -1.0
    assert holds(box, sides * float(tails.r_tail(np.clip(at(r, u), floor, 1.0), at(df, v))))
    corners = [sides * float(tails.r_tail(np.clip(x, floor, 1.0), y)) for x in r for y in df]
    assert [float(box[0]), float(box[1])] == [min(corners), max(corners)]


@BOX
@given(
    F=intervals(0, 3, 0.2) | intervals(0, 60, 1),
    df1=intervals(0.5, 12, 12) | intervals(0.5, 60, 0.1),
    df2=intervals(0.5, 30, 60) | intervals(1, 500, 0.1),
    u=SHARES, v=SHARES, w=SHARES,
)  # fmt: skip
def test_p_from_F(F, df1, df2, u, v, w):
    box = bounds.p_from_F_bounds(*F, *df1, *df2)
    assert holds(box, float(tails.f_tail(at(F, u), at(df1, v), at(df2, w))))


@pytest.mark.parametrize("seed", range(6))
def test_p_from_F_ends_are_those_of_another_search(seed):
    rng = np.random.default_rng(seed)
    F, df1, df2 = 10 ** rng.uniform((-1, -0.3, -0.3), (0.7, 1.5, 2.5))
    wide1, wide2 = df1 * 10 ** rng.uniform(0, 1), df2 * 10 ** rng.uniform(0, 1)
    low, high = bounds.p_from_F_bounds(F, F, df1, wide1, df2, wide2)
    grid = np.meshgrid(np.linspace(df1, wide1, 60), np.linspace(df2, wide2, 60))
    sampled = tails.f_tail(F, *grid)
    assert low <= sampled.min() * (1 + 1e-12)
    assert high >= sampled.max() * (1 - 1e-12)
    along = [_searched(lambda x, a=a: tails.f_tail(F, a, x), df2, wide2) for a in (df1, wide1)]
    across = [_searched(lambda x, b=b: -tails.f_tail(F, x, b), df1, wide1) for b in (df2, wide2)]
    assert low == pytest.approx(min(along), rel=1e-9)
    assert high == pytest.approx(-min(across), rel=1e-9)


def _searched(curve, low, high):
    """Least value by Brent's method from 40 starting brackets, and the ends."""
    edges = np.linspace(low, high, 40)
    inner = [
        minimize_scalar(curve, bounds=(a, b), method="bounded", options={"xatol": 1e-11}).fun
        for a, b in pairwise(edges)
    ]
    return float(min(*inner, curve(low), curve(high)))


def test_p_from_F_has_extrema_inside_the_box():
    # With F = 0.5 and df1 = 10 the tail first falls and then rises with df2.
    low, _ = bounds.p_from_F_bounds(0.5, 0.5, 10, 10, 1, 1000)
    assert low < 0.999 * min(tails.f_tail(0.5, 10, 1), tails.f_tail(0.5, 10, 1000))
    _, high = bounds.p_from_F_bounds(1.3, 1.3, 1, 1000, 20, 20)
    assert high > 1.1 * max(tails.f_tail(1.3, 1, 20), tails.f_tail(1.3, 1000, 20))


def test_the_turning_point_in_df2_is_the_only_one():
    """The one step of the argument in `f_shape` that is not proved there: k falls as s rises."""
    nodes, weights = np.polynomial.legendre.leggauss(120)
    depth = np.geomspace(1e-3, 12, 60)
    y1, y2 = (-lambertw(-np.exp(-1 - depth), branch).real[:, None] for branch in (0, -1))
    y, q = y1 + (nodes + 1) / 2 * (y2 - y1), ((y2 - 1) / (1 - y1)) ** 2
    for shape in (1e-3, 0.1, 0.5, 1, 2, 5, 14):  # df1 / 2 - 1
        low, high = np.zeros_like(y1), np.full_like(y1, 4.0 * shape + 1)
        for _ in range(60):
            k = (low + high) / 2
            h = np.exp(shape * (np.log(y) - y + 1 + depth[:, None]) + k * (y - y2))
            mean = (weights * h).sum(1, keepdims=True) / 2
            rising = y2 * (1 - mean) + q * y1 * (mean - np.exp(k * (y1 - y2))) > 0
            low, high = np.where(rising, low, k), np.where(rising, k, high)
        assert np.all(np.diff(k[:, 0]) > 0)  # depth falls as s rises


@BOX
@given(
    F=intervals(0, 3, 0.2) | intervals(0, 40, 1),
    df1=st.integers(1, 30),
    df2=st.floats(0.5, 300),
    u=SHARES,
    v=SHARES,
)
def test_p_of_a_corrected_F(F, df1, df2, u, v):
    box = bounds.p_corrected_F_bounds(*F, df1, df2)
    epsilon = at((1 / df1, 1.0), u)
    assert holds(box, float(tails.f_tail(at(F, v), epsilon * df1, epsilon * df2)))


@pytest.mark.parametrize(
    ("F", "df1", "df2"), [(1.2, 2, 40), (1.6, 3, 60), (0.7, 12, 3), (4.1, 3, 87), (1.0, 4, 20)]
)
def test_p_of_a_corrected_F_ends_are_those_of_another_search(F, df1, df2):
    low, high = bounds.p_corrected_F_bounds(F, F, df1, df2)
    curve = lambda e: float(tails.f_tail(F, e * df1, e * df2))  # noqa: E731
    assert low == pytest.approx(_searched(curve, 1 / df1, 1), rel=1e-9)
    assert high == pytest.approx(-_searched(lambda e: -curve(e), 1 / df1, 1), rel=1e-9)


def test_a_correction_can_raise_p_beyond_both_ends():
    _, high = bounds.p_corrected_F_bounds(1.2, 1.2, 6, 120)
    assert high > 1.001 * max(tails.f_tail(1.2, 6, 120), tails.f_tail(1.2, 1, 20))


def test_bounds_broadcast():
    F, df2 = np.array([[0.4], [3.0]]), np.array([5.0, 20.0, 80.0])
    low, high = bounds.p_from_F_bounds(F, F + 0.1, 3, 3.4, df2, df2 + 1)
    assert low.shape == high.shape == (2, 3)
    assert np.all(low < high)
    low, high = bounds.p_corrected_F_bounds(F, F + 0.1, 3, df2)
    assert low.shape == high.shape == (2, 3)
    assert bounds.p_from_t_bounds(1, 2, [5, 6], [6, 7])[0].shape == (2,)
