"""Paired and one-sample t against published results, R, scipy on raw data, and searches over boxes."""

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy import stats
from scipy.optimize import minimize_scalar

from recheck.recompute import one_sample
from recheck.recompute import paired as pd
from tests.recompute.boxes import SHARES, at, holds, intervals
from tests.reference import rows

SD = intervals(0, 9, 0.5)
POSITIVE_SD = intervals(0.05, 9, 0.5)
MEAN = intervals(-9, 9, 0.5)
T_SIZE = intervals(0.01, 30, 0.5)
R = intervals(-1, 0.9, 0.1)
N = st.integers(2, 40)
BOX = settings(max_examples=150, deadline=None)
RAW = settings(max_examples=80, deadline=None)


def _greatest(curve, low, high):
    """Greatest value of a curve with one peak, by Brent's method, and the ends."""
    ends = max(float(curve(low)), float(curve(high)))
    if low == high:
        return ends
    found = minimize_scalar(
        lambda x: -float(curve(x)), bounds=(low, high), method="bounded", options={"xatol": 1e-10}
    )
    return max(ends, -found.fun)


def test_paired_t_of_r():
    for row in (row for row in rows("r_designs") if row["kind"] == "paired"):
        x = row.given()
        t = pd.t_paired(x["mean1"], x["sd1"], x["mean2"], x["sd2"], x["r"], x["n"])
        assert t == pytest.approx(row.number("statistic"), rel=1e-9)
        assert one_sample.p_one_sample(x["mean_difference"], x["sd_difference"], x["n"]) == pytest.approx(
            row.number("p"), rel=1e-9
        )
        ends = one_sample.mean_ci(x["mean_difference"], x["sd_difference"], x["n"], x["level"])
        assert [float(end) for end in ends] == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-9)


def test_one_sample_t_of_r():
    for row in (row for row in rows("r_designs") if row["kind"] == "one_sample"):
        x = row.given()
        summary = x["mean"], x["sd"], x["n"]
        assert one_sample.t_one_sample(*summary, x["value"]) == pytest.approx(
            row.number("statistic"), rel=1e-9
        )
        assert one_sample.p_one_sample(*summary, x["value"]) == pytest.approx(row.number("p"), rel=1e-9)
        ends = one_sample.mean_ci(*summary)
        assert [float(end) for end in ends] == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-9)


@BOX
@given(m=MEAN, s=SD, n=N, value=MEAN, shares=st.tuples(*[SHARES] * 3))
def test_one_sample_bounds(m, s, n, value, shares):
    bounds = one_sample.one_sample_t_bounds(*m, *s, n, *value)
    inside = [at(x, share) for x, share in zip((m, s, value), shares, strict=True)]
    t = float(one_sample.t_one_sample(inside[0], inside[1], n, inside[2]))
    assert np.isnan(t) or holds(bounds, t)
    p_bounds = one_sample.one_sample_p_bounds(*m, *s, n, *value)
    p = float(one_sample.p_one_sample(inside[0], inside[1], n, inside[2]))
    assert np.isnan(p) or holds(p_bounds, p, slack=1e-15)
    corners = [float(one_sample.t_one_sample(a, b, n, c)) for a in m for b in s for c in value]
    if not np.isnan(corners).any():
        assert [float(end) for end in bounds] == pytest.approx([min(corners), max(corners)], rel=5e-9)
    lower, upper = one_sample.mean_ci_bounds(*m, *s, n)
    ends = one_sample.mean_ci(inside[0], inside[1], n)
    assert holds(lower, float(ends[0])) and holds(upper, float(ends[1]))


@BOX
@given(s1=SD, s2=SD, r=R, shares=st.tuples(*[SHARES] * 3))
def test_bounds_of_the_sd_of_differences(s1, s2, r, shares):
    low, high = pd.sd_of_differences_bounds(*s1, *s2, *r)
    a, b, c = (at(x, share) for x, share in zip((s1, s2, r), shares, strict=True))
    assert holds((low, high), float(pd.sd_of_differences(a, b, c)), slack=1e-9)
    corners = [float(pd.sd_of_differences(x, y, r[0])) for x in s1 for y in s2]
    assert high == pytest.approx(max(corners), rel=1e-12)
    floor = [-_greatest(lambda x, y=y: -pd.sd_of_differences(x, y, r[1]), *s1) for y in s2]
    floor += [-_greatest(lambda y, x=x: -pd.sd_of_differences(x, y, r[1]), *s2) for x in s1]
    assert low == pytest.approx(min(floor), rel=1e-7, abs=1e-6)


@pytest.mark.parametrize("row", rows("one_sample_paired_t"), ids=lambda row: row["label"])
def test_published_paired_and_one_sample_results(row):
    difference, spread, n, t, value = row.numbers("mean_diff", "sd_diff", "n", "t", "mu0")
    assert one_sample.t_one_sample(difference, spread, n, value) == pytest.approx(t, rel=1e-12)
    p = one_sample.p_one_sample(difference, spread, n, value)
    assert p == pytest.approx(row.number("p"), rel=1e-10, abs=1e-300)
    ends = [float(end) for end in one_sample.mean_ci(difference, spread, n)]
    assert ends == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-10)
    if row["type"] == "paired":
        s1, s2, r = row.numbers("sd1", "sd2", "r")
        assert pd.sd_of_differences(s1, s2, r) == pytest.approx(spread, rel=1e-12)
        assert pd.t_paired(difference, s1, 0.0, s2, r, n) == pytest.approx(t, rel=1e-10)
        assert pd.implied_correlation(difference, s1, s2, n, t) == pytest.approx(r, rel=1e-11)


def test_change_score_correlation_of_the_handbook():
    # Cochrane Handbook 6.5.2.8 (from memory): SDs 6.4, 7.1, of changes 4.5, n = 129: r = 0.78.
    (row,) = (row for row in rows("conversions") if row["kind"] == "sd_to_r")
    given = row.given()
    t = 2.0 / (given["sd_change"] / np.sqrt(given["n"]))
    r = pd.implied_correlation(2.0, given["sd_baseline"], given["sd_final"], given["n"], t)
    assert r == pytest.approx(row.number("value"), rel=1e-12)


@RAW
@given(pairs=st.lists(st.tuples(st.integers(1, 70), st.integers(1, 70)), min_size=3, max_size=15))
def test_paired_summaries_give_the_t_of_the_raw_data(pairs):
    a, b = np.array(pairs, dtype=float).T
    s1, s2, spread = np.std(a, ddof=1), np.std(b, ddof=1), np.std(a - b, ddof=1)
    assume(min(s1, s2, spread) > 0)
    r = np.corrcoef(a, b)[0, 1]
    t = stats.ttest_rel(a, b).statistic
    assert (a.mean() - b.mean()) / pd.paired_se(s1, s2, r, len(a)) == pytest.approx(t, rel=1e-6, abs=1e-9)
    low, high = pd.paired_t_bounds(*[a.mean()] * 2, s1, s1, *[b.mean()] * 2, s2, s2, len(a))
    assert low * (1 - 1e-9) <= abs(t) <= high * (1 + 1e-9)
    if abs(t) > 1e-6:
        assert pd.implied_correlation(a.mean() - b.mean(), s1, s2, len(a), t) == pytest.approx(r, abs=1e-6)


@BOX
@given(
    m1=MEAN,
    s1=SD,
    m2=MEAN,
    s2=SD,
    n=N,
    r=st.floats(-1, 1) | st.sampled_from((-1.0, 1.0)),
    shares=st.tuples(*[SHARES] * 4),
)
def test_paired_t_bounds(m1, s1, m2, s2, n, r, shares):
    low, high = pd.paired_t_bounds(*m1, *s1, *m2, *s2, n)
    a, b, c, d = (at(x, share) for x, share in zip((m1, s1, m2, s2), shares, strict=True))
    se = float(pd.paired_se(b, d, r, n))
    assume(se > 1e-6)
    assert holds((low, high), abs(a - c) / se, slack=1e-12)
    distances = [abs(x - y) for x in m1 for y in m2]
    if s1[0] > s2[1]:
        assert high == pytest.approx(max(distances) / float(pd.paired_se(s1[0], s2[1], 1.0, n)), rel=1e-9)
    if m1[0] > m2[1] and s1[1] + s2[1] > 0:
        assert low == pytest.approx(min(distances) / float(pd.paired_se(s1[1], s2[1], -1.0, n)), rel=1e-9)


@BOX
@given(m1=MEAN, s1=POSITIVE_SD, m2=MEAN, s2=POSITIVE_SD, n=N, t=T_SIZE, shares=st.tuples(*[SHARES] * 5))
def test_implied_correlation_bounds(m1, s1, m2, s2, n, t, shares):
    low, high = pd.implied_correlation_bounds(*m1, *s1, *m2, *s2, n, *t)
    a, b, c, d, e = (at(x, share) for x, share in zip((m1, s1, m2, s2, t), shares, strict=True))
    assert holds((low, high), float(pd.implied_correlation(a - c, b, d, n, e)), slack=1e-9)
    distances = [abs(x - y) for x in m1 for y in m2]
    near = 0.0 if m1[0] <= m2[1] and m2[0] <= m1[1] else min(distances)
    top = [float(pd.implied_correlation(near, x, y, n, t[1])) for x in s1 for y in s2]
    assert high == pytest.approx(max(top), rel=1e-9, abs=1e-9)
    floor = [
        _greatest(lambda x, y=y: -pd.implied_correlation(max(distances), x, y, n, t[0]), *s1) for y in s2
    ]
    floor += [
        _greatest(lambda y, x=x: -pd.implied_correlation(max(distances), x, y, n, t[0]), *s2) for x in s1
    ]
    assert low == pytest.approx(-max(floor), rel=1e-9, abs=1e-9)


def test_a_t_of_zero_leaves_the_correlation_free_below():
    low, high = pd.implied_correlation_bounds(4.9, 5.1, 1.0, 1.1, 4.9, 5.1, 1.0, 1.1, 20, 0.0, 0.05)
    assert low == -np.inf
    assert high >= 1.0


def test_spreads_below_zero_and_arrays():
    assert pd.paired_t_bounds(1, 1, -0.2, 0.1, 0, 0, 0.5, 0.6, 4)[1] == pytest.approx(1 / 0.4 * 2)
    low, high = pd.implied_correlation_bounds(5, 5.1, [1.0, 2.0], [1.1, 2.1], 4, 4.1, 1, 1.1, 12, 2, 2.1)
    assert low.shape == high.shape == (2,)
