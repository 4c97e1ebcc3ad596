"""Bounds of the SD by range, quartiles and median, against all small samples and against raw data."""

from itertools import combinations_with_replacement, product

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.recompute import spread_limits


def squares(x):
    return float(np.sum((x - np.mean(x)) ** 2))


@pytest.mark.parametrize("n", range(3, 8))
def test_all_samples_of_whole_numbers_keep_to_the_bounds_of_range_and_mean(n):
    seen = {}
    for x in combinations_with_replacement(range(7), n):
        key = (x[0], x[-1], sum(x))
        low, high = seen.get(key, (np.inf, 0.0))
        seen[key] = (min(low, squares(x)), max(high, squares(x)))
    for (a, b, total), (least, most) in seen.items():
        m = total / n
        low, high = spread_limits.ss_limits_of_range_and_mean(a, a, b, b, m, m, n)
        assert low <= least + 1e-9
        assert most == pytest.approx(
            high, abs=1e-9
        )  # the values at the ends and one between: whole numbers have it
        low, high = spread_limits.ss_limits_of_range(b - a, n)
        assert low <= least + 1e-9 and most <= high + 1e-9


def test_the_least_is_attained():
    x = np.array([2.0, 9.0, 4.0, 4.0, 4.0])
    low, _ = spread_limits.ss_limits_of_range_and_mean(2, 2, 9, 9, x.mean(), x.mean(), 5)
    # One value at either end, the others at one point.
    assert low == pytest.approx(squares(x), rel=1e-12)
    low, high = spread_limits.ss_limits_of_range(7.0, 4)
    assert (low, high) == pytest.approx(
        (squares(np.array([0, 7, 3.5, 3.5])), squares(np.array([0, 0, 7, 7])))
    )
    _, high = spread_limits.ss_limits_of_range(7.0, 5)
    assert high == pytest.approx(squares(np.array([0, 0, 7, 7, 7])))


@settings(max_examples=200, deadline=None)
@given(seed=st.integers(0, 10**6), n=st.integers(3, 60), decimals=st.integers(-1, 2))
def test_rounded_range_and_mean_hold_the_sum_of_squares(seed, n, decimals):
    rng = np.random.default_rng(seed)
    x = rng.choice([rng.normal(50, 12, n), rng.exponential(9, n), rng.choice([0.0, 40.0], n, p=[0.9, 0.1])])
    half = 0.5 * 10.0**-decimals
    ends = [(v - half, v + half) for v in np.round([x.min(), x.max(), x.mean()], decimals)]
    low, high = spread_limits.ss_limits_of_range_and_mean(*ends[0], *ends[1], *ends[2], n)
    assert low - 1e-9 <= squares(x) <= high + 1e-9
    assert spread_limits.ss_limits_of_range(np.ptp(x), n)[0] <= squares(x) + 1e-9


def test_no_data_have_a_mean_that_far_out():
    assert np.isnan(spread_limits.ss_limits_of_range_and_mean(0, 0, 10, 10, 9.9, 9.9, 5)).all()


METHODS = (
    "inverted_cdf", "averaged_inverted_cdf", "closest_observation", "interpolated_inverted_cdf", "hazen", "weibull",
    "linear", "median_unbiased", "normal_unbiased",
)  # fmt: skip


def _hinges(x):
    """Quartiles as the medians of both halves, without the middle value. Source: Moore & McCabe's textbook rule (from memory)."""
    h = len(x) // 2
    return np.median(x[:h]), np.median(x[len(x) - h :])


@settings(max_examples=150, deadline=None)
@given(x=st.lists(st.integers(0, 12), min_size=4, max_size=14).map(sorted))
def test_quartiles_by_every_definition_bound_the_sum_of_squares(x):
    x = np.array(x, dtype=float)
    pairs = [np.quantile(x, (0.25, 0.75), method=method) for method in METHODS]
    for q1, q3 in (*pairs, _hinges(x)):
        assert spread_limits.ss_least_of_quartiles(q3 - q1, len(x)) <= squares(x) + 1e-9


@pytest.mark.parametrize("n", range(2, 8))
def test_mean_and_median_of_all_small_samples(n):
    nearest = 0.0
    for x in combinations_with_replacement(range(6), n):
        if x[0] == x[-1]:
            continue
        sd = float(np.std(x, ddof=1))
        gap = abs(np.mean(x) - np.median(x))
        most = float(spread_limits.most_mean_less_median(sd, n))
        assert gap <= most + 1e-9
        assert most < sd
        nearest = max(nearest, gap / most if most else 1.0)
    assert nearest == pytest.approx(1.0)  # attained


def test_limits_broadcast():
    grid = list(product((4, 9), (1.0, 2.0)))
    n, spread = np.array(grid).T
    assert spread_limits.ss_limits_of_range(spread, n)[1].shape == (4,)
    assert spread_limits.ss_limits_of_range_and_mean(0, 0, 5, 5, [2.0, 3.0], [2.1, 3.1], 7)[0].shape == (2,)
