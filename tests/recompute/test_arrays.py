"""Arithmetic of intervals against fractions and random points: no point leaves them, and each end is one."""

from fractions import Fraction

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from recheck.recompute import arrays
from tests.recompute.boxes import SHARES, at, holds, intervals


def test_arrays_are_of_one_shape_or_of_their_own():
    column, row = np.arange(3)[:, None], [1, 2]
    assert [part.shape for part in arrays.floats(column, row, 5)] == [(3, 1), (2,), ()]
    assert [part.shape for part in arrays.together(column, row, 5)] == [(3, 2)] * 3
    assert all(part.dtype == np.float64 for part in arrays.together(column, row, 5))


def test_quotients_of_nothing():
    with np.errstate(all="raise"):
        assert arrays.quotient([3.0, -3.0, 1e300], [0.0, 0.0, 1e-300]).tolist() == [np.inf, -np.inf, np.inf]
        assert np.isnan(arrays.quotient([0.0, np.nan], [0.0, 1.0])).all()


@given(units=st.lists(st.integers(-(10**9), 10**9), min_size=2, max_size=2), decimals=st.integers(0, 6))
def test_a_difference_of_decimals_never_leaves_its_bounds(units, decimals):
    """The ends are those of the decimals, which the doubles may miss; equal decimals differ by nothing."""
    first, second = (Fraction(unit, 10**decimals) for unit in units)
    low, high = arrays.difference_bounds(float(first), float(first), float(second), float(second))
    assert Fraction(float(low)) <= first - second <= Fraction(float(high))
    assert first != second or low == high == 0
    assert high - low <= 1e-15 * (abs(first) + abs(second))


@given(top=intervals(-3, 3), bottom=intervals(0, 3), u=SHARES, v=SHARES)
def test_quotients_of_a_box(top, bottom, u, v):
    ends = arrays.quotient_bounds(*arrays.floats(*top, *bottom))
    if at(bottom, v) > 0:
        assert holds(ends, at(top, u) / at(bottom, v))
    if bottom[0] > 0:
        corners = [a / b for a in top for b in bottom]
        assert (float(ends[0]), float(ends[1])) == pytest.approx((min(corners), max(corners)), rel=1e-15)


@given(ends=intervals(-3, 3, 4.0), u=SHARES)
def test_sizes_and_cut_spreads_of_an_interval(ends, u):
    inside = at(ends, u)
    assert holds(arrays.absolute_bounds(*ends), abs(inside))
    least = 0.0 if ends[0] <= 0 <= ends[1] else min(map(abs, ends))
    assert [float(end) for end in arrays.absolute_bounds(*ends)] == [least, max(map(abs, ends))]
    assert [float(end) for end in arrays.spread_bounds(*ends)] == [max(end, 0.0) for end in ends]


def test_bounds_are_unknown_where_an_end_of_the_box_is():
    low, high = arrays.where_known((np.zeros(3), np.ones(3)), [1.0, np.nan, 2.0], 4.0)
    assert np.isnan(low).tolist() == np.isnan(high).tolist() == [False, True, False]
    assert np.isnan(arrays.where_known((np.zeros(3), np.ones(3)), 1.0, np.nan)).all()
