"""CI and p of a mean difference against published results, R, and searches over boxes; facts of the trade."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from recheck.recompute import mean_differences as md
from recheck.recompute import two_groups as tg
from recheck.recompute import variances
from recheck.recompute.tails import t_quantile, t_two_sided
from tests.recompute.boxes import SHARES, at, holds, intervals
from tests.reference import rows

SD = intervals(0, 9, 0.5)
MEAN = intervals(-9, 9, 0.5)
N = st.integers(2, 40)
BOX = settings(max_examples=120, deadline=None)
GROUPS = ("mean1", "sd1", "n1", "mean2", "sd2", "n2")


@pytest.mark.parametrize("row", rows("two_sample_t"), ids=lambda row: row["label"])
def test_published_intervals(row):
    summary = row.numbers(*GROUPS)
    for ci, name in ((md.pooled_ci, "pooled"), (md.welch_ci, "welch")):
        ends = [float(end) for end in ci(*summary)]
        assert ends == pytest.approx(row.numbers(f"ci_low_{name}", f"ci_high_{name}"), rel=1e-10)


def test_two_groups_of_r():
    seen = 0
    for row in rows("r_designs"):
        if row["kind"] not in ("pooled", "welch"):
            continue
        seen += 1
        x, pooled = row.given(), row["kind"] == "pooled"
        summary = [x[name] for name in GROUPS]
        t = (tg.t_pooled if pooled else tg.t_welch)(*summary)
        df = x["n1"] + x["n2"] - 2 if pooled else tg.satterthwaite_df(x["sd1"], x["n1"], x["sd2"], x["n2"])
        assert (float(t), float(df)) == pytest.approx(row.numbers("statistic", "df"), rel=1e-9)
        assert t_two_sided(t, df) == pytest.approx(row.number("p"), rel=1e-9)
        ends = (md.pooled_ci if pooled else md.welch_ci)(*summary, x["level"])
        assert [float(end) for end in ends] == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-9)
    assert seen == 28


def test_slope_on_a_binary_predictor_of_r():
    for row in (row for row in rows("r_designs") if row["kind"] == "binary_slope"):
        x = row.given()
        found = tg.binary_slope(*(x[name] for name in GROUPS), x["code1"], x["code2"])
        assert [float(y) for y in found] == pytest.approx(
            [x["b"], x["se"], row.number("statistic")], rel=1e-9
        )


@BOX
@given(m1=MEAN, s1=SD, n1=N, m2=MEAN, s2=SD, n2=N, shares=st.tuples(*[SHARES] * 4))
def test_points_of_the_box_lie_in_the_bounds(m1, s1, n1, m2, s2, n2, shares):
    box = (*m1, *s1, n1, *m2, *s2, n2)
    a, b, c, d = (at(x, share) for x, share in zip((m1, s1, m2, s2), shares, strict=True))
    for bounds, ci in ((md.pooled_ci_bounds, md.pooled_ci), (md.welch_ci_bounds, md.welch_ci)):
        for ends, end in zip(bounds(*box), ci(a, b, n1, c, d, n2), strict=True):
            assert np.isnan(end) or holds(ends, float(end), slack=1e-12)
    p = float(t_two_sided(tg.t_welch(a, b, n1, c, d, n2), tg.satterthwaite_df(b, n1, d, n2)))
    assert np.isnan(p) or holds(md.welch_p_bounds(*box), p, slack=1e-14)


@settings(max_examples=60, deadline=None)
@given(s1=intervals(0.1, 9, 0.5), n1=N, s2=intervals(0.1, 9, 0.5), n2=N, gap=intervals(0, 9, 0.5))
def test_ends_of_welch_are_attained(s1, n1, s2, n2, gap):
    first, second = np.meshgrid(np.linspace(*s1, 61), np.linspace(*s2, 61))
    df, se = tg.satterthwaite_df(first, n1, second, n2), tg.welch_se(first, n1, second, n2)
    low, high = md.welch_p_bounds(*gap, *s1, n1, 0, 0, *s2, n2)
    assert low == pytest.approx(t_two_sided(gap[1] / se, df).min(), rel=5e-3)
    assert high == pytest.approx(t_two_sided(gap[0] / se, df).max(), rel=1e-9)
    _, upper = md.welch_ci_bounds(0, 0, *s1, n1, 0, 0, *s2, n2)
    half = t_quantile(0.025, df) * se
    assert float(upper[0]) == pytest.approx(half.min(), rel=2e-3)
    assert float(upper[0]) <= half.min() * (1 + 1e-9)
    assert float(upper[1]) == pytest.approx(half.max(), rel=1e-9)


def test_p_of_welch_has_a_valley_in_an_sd():
    # n = 2 and 60: as the SD of the larger group grows, df climb from 1 and p falls at first.
    p = [float(md.welch_p_bounds(3, 3, s, s, 60, 0, 0, 1, 1, 2)[0]) for s in (0.0, 2.0, 40.0)]
    assert p[1] < p[0] and p[1] < p[2]
    low, _ = md.welch_p_bounds(3, 3, 0.0, 40.0, 60, 0, 0, 1, 1, 2)
    grid = np.linspace(0, 40, 40001)
    exact = t_two_sided(3 / tg.welch_se(grid, 60, 1, 2), tg.satterthwaite_df(grid, 60, 1, 2))
    assert low == pytest.approx(exact.min(), rel=1e-7)


def test_log_t_with_a_given_tail_is_convex_in_log_df():
    # The lemma of the module, on a grid: df from 1 to a million, tails from .49 to 1e-12.
    logs = np.linspace(0, np.log(1e6), 700)
    for tail in (0.49, 0.4, 0.25, 0.1, 0.05, 0.025, 0.005, 1e-4, 1e-6, 1e-9, 1e-12):
        y = np.log(t_quantile(tail, np.exp(logs)))
        assert np.all(np.diff(y, 2) >= -2e-12)


def test_facts_of_the_trade():
    # Common practice, no source.
    for df in (20, 22, 30, 60, 200):
        assert 1.96 < float(t_quantile(0.025, df)) < 2.1
    _, df, _ = 0, *tg.welch_df_bounds(1.0, 1.0, 12, 1.0, 1.0, 12)
    assert df == pytest.approx(12 + 12 - 2)
    sds = np.linspace(1, 6, 50)
    falling = tg.satterthwaite_df(sds, 15, 1.0, 15)
    assert np.all(falling <= 28 + 1e-9) and np.all(np.diff(falling) < 0)
    # Variances of 1 and 5 are not roughly equal: a fifth of one is outside the usual halves and doubles.
    assert float(variances.variance_ratio(np.sqrt(5), 1)) == pytest.approx(5)
    assert variances.variance_ratio_p(5.0, 30, 30) < 0.001


@settings(max_examples=80, deadline=None)
@given(gap=st.floats(-3, 3), s1=st.floats(0.3, 4), n1=N, s2=st.floats(0.3, 4), n2=N)
def test_interval_holds_zero_exactly_where_p_is_above_alpha(gap, s1, n1, s2, n2):
    # Common practice, no source: same method, two-sided, unadjusted.
    for ci, equal in ((md.pooled_ci, True), (md.welch_ci, False)):
        low, high = ci(gap, s1, n1, 0.0, s2, n2)
        p = stats.ttest_ind_from_stats(gap, s1, n1, 0.0, s2, n2, equal_var=equal).pvalue
        if abs(p - 0.05) > 1e-9:
            assert (low <= 0 <= high) == (p > 0.05)


@settings(max_examples=60, deadline=None)
@given(m1=st.floats(-9, 9), s1=st.floats(0.1, 5), n1=N, m2=st.floats(-9, 9), s2=st.floats(0.1, 5), n2=N)
def test_binary_regression_gives_the_pooled_t(m1, s1, n1, m2, s2, n2):
    # Common practice, no source: which group is subtracted only turns the sign.
    t = float(tg.t_pooled(m1, s1, n1, m2, s2, n2))
    for code1, code2, sign in ((1, 0, 1), (0, 1, -1), (0.5, -0.5, 1), (2, 1, 1), (-1, 1, -1)):
        assert float(tg.binary_slope(m1, s1, n1, m2, s2, n2, code1, code2)[2]) == pytest.approx(sign * t)
