"""Confidence intervals against published ones, scipy, and searches over boxes."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.recompute import effect_intervals, intervals, tails, two_groups
from tests.recompute.boxes import SHARES, at, holds
from tests.recompute.boxes import intervals as boxes
from tests.reference import Reference, rows

LEVEL = st.sampled_from((0.9, 0.95, 0.99))


@pytest.mark.parametrize("row", rows("two_sample_t"), ids=lambda row: row["label"])
def test_published_intervals_of_a_mean_difference(row: Reference):
    m1, s1, n1, m2, s2, n2 = row.numbers("mean1", "sd1", "n1", "mean2", "sd2", "n2")
    for kind, se, df in (
        ("pooled", two_groups.pooled_se(s1, n1, s2, n2), n1 + n2 - 2),
        ("welch", two_groups.welch_se(s1, n1, s2, n2), row.number("df_welch")),
    ):
        ends = row.numbers(f"ci_low_{kind}", f"ci_high_{kind}")
        assert intervals.ci_from_estimate(m1 - m2, se, 0.95, df) == pytest.approx(ends, rel=1e-10)
        assert intervals.se_from_ci(*ends, 0.95, df) == pytest.approx(float(se), rel=1e-10)
        t = intervals.t_from_ci(*ends, 0.95, df)
        assert t == pytest.approx(row.number(f"t_{kind}"), rel=1e-9)
        assert tails.t_two_sided(t, df) == pytest.approx(row.number(f"p_{kind}"), rel=1e-7)


@pytest.mark.parametrize("row", rows("one_sample_paired_t"), ids=lambda row: row["label"])
def test_published_intervals_of_one_mean(row: Reference):
    mean, spread, n, df = row.numbers("mean_diff", "sd_diff", "n", "df")
    ends = intervals.ci_from_estimate(mean, spread / np.sqrt(n), 0.95, df)
    assert ends == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-9)


@pytest.mark.parametrize("row", rows("correlations"), ids=lambda row: row["label"])
def test_published_correlations(row: Reference):
    r, n, df = row.numbers("r", "n", "df")
    # r as printed to 17 digits: 1 - r keeps fewer of them near 1.
    assert effect_intervals.r_ci(r, n, 0.95) == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-10)
    assert tails.r_two_sided(r, df) == pytest.approx(row.number("p"), rel=1e-9)


@settings(max_examples=150, deadline=None)
@given(low=boxes(-5, 5, 0.3), high=boxes(-5, 8, 0.3), level=LEVEL, df=st.integers(1, 200), u=SHARES, v=SHARES)
def test_t_from_ci_bounds(low, high, level, df, u, v):
    box = intervals.t_from_ci_bounds(*low, *high, level, df)
    a, b = at(low, u), at(high, v)
    if a < b:
        assert holds(box, float(intervals.t_from_ci(a, b, level, df)))
    if low[1] < high[0]:
        corners = [float(intervals.t_from_ci(a, b, level, df)) for a in low for b in high]
        assert box == pytest.approx((min(corners), max(corners)), rel=1e-12)


def test_t_from_ci_bounds_where_the_ends_may_meet():
    low, high = intervals.t_from_ci_bounds(1.0, 2.0, 1.5, 3.0, 0.95, 10)
    assert high == np.inf
    assert low == pytest.approx(float(intervals.t_from_ci(1.0, 3.0, 0.95, 10)))
    low, high = intervals.t_from_ci_bounds(-0.1, 0.1, -0.1, 0.1, 0.95, 10)
    assert (low, high) == (-np.inf, np.inf)
    assert np.isnan(intervals.t_from_ci_bounds(2.0, 3.0, 1.0, 1.5, 0.95, 10)).all()


def test_intervals_broadcast():
    assert intervals.t_from_ci_bounds([1, 2], [1.1, 2.1], 3, 3.1, 0.95, 20)[0].shape == (2,)
    assert isinstance(effect_intervals.r_ci(0.3, 20)[0], np.ndarray)
