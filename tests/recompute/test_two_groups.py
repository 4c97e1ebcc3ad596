"""t from summaries against published results, scipy and statsmodels on raw data, and searches over boxes."""

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy import stats
from scipy.optimize import minimize_scalar
from statsmodels.stats.weightstats import ttest_ind

from recheck.recompute import two_groups as tg
from recheck.recompute.tails import t_two_sided
from tests.recompute.boxes import SHARES, at, holds, intervals
from tests.reference import rows

SAMPLE = st.lists(st.floats(-1e4, 1e4).map(lambda x: round(x, 3)), min_size=2, max_size=12)
SD = intervals(0, 9, 0.5)
MEAN = intervals(-9, 9, 0.5)
N = st.integers(2, 40)
BOX = settings(max_examples=150, deadline=None)
RAW = settings(max_examples=80, deadline=None)


@pytest.mark.parametrize("row", rows("two_sample_t"), ids=lambda row: row["label"])
def test_published_two_sample_results(row):
    m1, s1, n1, m2, s2, n2 = row.numbers("mean1", "sd1", "n1", "mean2", "sd2", "n2")
    pooled, welch = tg.t_pooled(m1, s1, n1, m2, s2, n2), tg.t_welch(m1, s1, n1, m2, s2, n2)
    df = tg.satterthwaite_df(s1, n1, s2, n2)
    assert pooled == pytest.approx(row.number("t_pooled"), rel=1e-12)
    assert welch == pytest.approx(row.number("t_welch"), rel=1e-12)
    assert df == pytest.approx(row.number("df_welch"), rel=1e-12)
    assert t_two_sided(pooled, n1 + n2 - 2) == pytest.approx(row.number("p_pooled"), rel=1e-10)
    assert t_two_sided(welch, df) == pytest.approx(row.number("p_welch"), rel=1e-10)


@RAW
@given(a=SAMPLE, b=SAMPLE)
def test_summaries_give_the_t_of_the_raw_data(a, b):
    summary = (np.mean(a), np.std(a, ddof=1), len(a), np.mean(b), np.std(b, ddof=1), len(b))
    assume(min(summary[1], summary[4]) > 1e-2)
    t, p, df = ttest_ind(a, b)
    assert tg.t_pooled(*summary) == pytest.approx(t, rel=1e-6, abs=1e-6)
    t, p, df = ttest_ind(a, b, usevar="unequal")
    assert tg.t_welch(*summary) == pytest.approx(t, rel=1e-6, abs=1e-6)
    assert tg.satterthwaite_df(summary[1], len(a), summary[4], len(b)) == pytest.approx(df, rel=1e-6)
    assert t_two_sided(tg.t_welch(*summary), df) == pytest.approx(p, rel=1e-5, abs=1e-12)
    ours = stats.ttest_ind_from_stats(*summary, equal_var=False)
    assert tg.t_welch(*summary) == pytest.approx(ours.statistic, rel=1e-12)


@BOX
@given(m1=MEAN, s1=SD, n1=N, m2=MEAN, s2=SD, n2=N, shares=st.tuples(*[SHARES] * 4))
def test_independent_t_bounds(m1, s1, n1, m2, s2, n2, shares):
    for single, box in ((tg.t_pooled, tg.pooled_t_bounds), (tg.t_welch, tg.welch_t_bounds)):
        low, high = box(*m1, *s1, n1, *m2, *s2, n2)
        points = [at(x, share) for x, share in zip((m1, s1, m2, s2), shares, strict=True)]
        t = float(single(points[0], points[1], n1, points[2], points[3], n2))
        assert np.isnan(t) or holds((low, high), t)
        corners = [float(single(a, b, n1, c, d, n2)) for a in m1 for b in s1 for c in m2 for d in s2]
        if not np.isnan(corners).any():
            # means a millionth apart lose digits, and the bounds widen by as much
            assert (low, high) == pytest.approx((min(corners), max(corners)), rel=5e-9)


def test_t_bounds_of_spreads_that_may_be_zero():
    low, high = tg.pooled_t_bounds(1.0, 1.2, 0.0, 0.1, 5, 0.9, 1.1, 0.0, 0.1, 5)
    assert (low, high) == (-np.inf, np.inf)
    low, high = tg.welch_t_bounds(2.0, 2.2, 0.0, 0.1, 5, 0.9, 1.1, 0.0, 0.1, 5)
    assert high == np.inf
    assert low == pytest.approx(float(tg.t_welch(2.0, 0.1, 5, 1.1, 0.1, 5)))


def test_t_bounds_keep_the_decimal_corner_of_large_means():
    # 9614255.48 and 9614255.47: the means differ by at most 0.02, the doubles by 2e-8 of that less.
    box = (9614255.475, 9614255.485, 0.525, 0.535, 10, 9614255.465, 9614255.475, 0.525, 0.535, 10)
    assert 9614255.485 - 9614255.465 < 0.02
    exact = 0.02 / float(tg.pooled_se(0.525, 10, 0.525, 10))
    for bounds in (tg.pooled_t_bounds, tg.welch_t_bounds):
        low, high = bounds(*box)
        assert low == 0
        assert exact * (1 - 1e-9) <= high <= exact * (1 + 1e-6)


def test_negative_ends_of_spreads_are_cut():
    low, high = tg.pooled_t_bounds(1.0, 1.0, -0.005, 0.005, 5, 0.5, 0.5, -0.005, 0.005, 5)
    assert high == np.inf
    assert low == pytest.approx(float(tg.t_pooled(1.0, 0.005, 5, 0.5, 0.005, 5)))
    assert tg.welch_df_bounds(-0.1, 0.1, 5, 1, 1, 9)[0] == pytest.approx(8)


@BOX
@given(s1=SD, n1=N, s2=SD, n2=N, u=SHARES, v=SHARES)
def test_welch_df_bounds(s1, n1, s2, n2, u, v):
    low, high = tg.welch_df_bounds(*s1, n1, *s2, n2)
    df = float(tg.satterthwaite_df(at(s1, u), n1, at(s2, v), n2))
    assert np.isnan(df) or holds((low, high), df)
    assert min(n1, n2) - 1 - 1e-9 <= low <= high <= n1 + n2 - 2 + 1e-9
    if max(s1[0], s2[0]) > 0:
        corners = [float(tg.satterthwaite_df(a, n1, b, n2)) for a in s1 for b in s2]
        assert low == pytest.approx(np.nanmin(corners), rel=1e-12)
    if min(s1[0], s2[0]) > 0:
        # Only the ratio counts: a search along the edges of the box meets every ratio.
        edges = [_greatest(lambda x, b=b: tg.satterthwaite_df(x, n1, b, n2), *s1) for b in s2]
        edges += [_greatest(lambda x, a=a: tg.satterthwaite_df(a, n1, x, n2), *s2) for a in s1]
        assert high == pytest.approx(max(edges), rel=1e-9)


def _greatest(curve, low, high):
    """Greatest value of a curve with one peak, by Brent's method, and the ends."""
    ends = max(float(curve(low)), float(curve(high)))
    if low == high:
        return ends
    found = minimize_scalar(
        lambda x: -float(curve(x)), bounds=(low, high), method="bounded", options={"xatol": 1e-10}
    )
    return max(ends, -found.fun)


def test_satterthwaite_df_where_the_welch_df_is_largest():
    n1, n2 = 12.0, 30.0
    ratio = np.sqrt(n1 * (n1 - 1) / (n2 * (n2 - 1)))
    assert tg.satterthwaite_df(ratio, n1, 1.0, n2) == pytest.approx(n1 + n2 - 2, rel=1e-14)
    _, high = tg.welch_df_bounds(ratio - 0.1, ratio + 0.2, n1, 0.9, 1.1, n2)
    assert high == pytest.approx(n1 + n2 - 2, rel=1e-14)
    assert np.isnan(tg.satterthwaite_df(0.0, n1, 0.0, n2))
    assert tg.satterthwaite_df(0.0, n1, 1.0, n2) == pytest.approx(n2 - 1)


def test_two_groups_broadcast():
    t = tg.t_pooled(np.array([[5.0], [6.0]]), 1.0, np.array([10, 20, 30]), 4.0, 1.2, 12)
    assert t.shape == (2, 3)
    low, high = tg.pooled_t_bounds(5, 5.1, [1.0, 2.0], [1.1, 2.1], 10, 4, 4.1, 1, 1.1, 12)
    assert low.shape == high.shape == (2,)
    assert isinstance(tg.t_welch(5, 1, 10, 4, 1, 10), np.ndarray)


@RAW
@given(a=SAMPLE, b=SAMPLE)
def test_the_pooled_sd_is_that_of_the_residuals(a, b):
    residuals = np.concatenate([np.array(a) - np.mean(a), np.array(b) - np.mean(b)])
    expected = np.sqrt(np.sum(residuals**2) / (len(a) + len(b) - 2)) if len(a) + len(b) > 2 else np.nan
    found = tg.pooled_sd(np.std(a, ddof=1), len(a), np.std(b, ddof=1), len(b))
    assert float(found) == pytest.approx(expected, rel=1e-9, abs=1e-9)
