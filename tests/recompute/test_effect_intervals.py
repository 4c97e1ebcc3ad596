"""Intervals of effect sizes against published values, R, coverage by the distributions of scipy, and facts of the trade."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from recheck.recompute import effect_intervals, effect_sizes, effect_variances, tails
from tests.reference import Reference, rows

LEVEL = st.sampled_from((0.9, 0.95, 0.99))


@pytest.mark.parametrize(
    "row", [r for r in rows("effect_variances") if r["interval_by"]], ids=lambda r: r["label"]
)
def test_published_intervals_by_other_methods(row: Reference):
    value, n1 = row.numbers("value", "n1")
    if row["interval_by"] == "normal":
        ends = effect_intervals.normal_ci(value, row.number("variance"), 0.95)
    else:
        ends = effect_intervals.d_average_noncentral_ci(value, *row.numbers("sd1", "sd2", "r"), n1, 0.95)
    # The normal ones were made with 1.96 as it stands; those of a package are good to six digits.
    assert ends == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-4)


@pytest.mark.parametrize(
    "row",
    [r for r in rows("r_effects") if "_low" in r["quantity"] or "_high" in r["quantity"]],
    ids=lambda r: r["call"],
)
def test_ends_against_r(row: Reference):
    given, side = row.given(), int(row["quantity"].endswith("_high"))
    function = {
        "delta": effect_intervals.noncentral_t_ci, "lambda_F": effect_intervals.noncentral_F_ci,
        "lambda_chi2": lambda chi2, df, level: [v**2 * 50 for v in effect_intervals.cramers_v_ci(chi2, df, 50, 2, level)],
        "r": effect_intervals.r_ci,
    }[row["quantity"].rpartition("_")[0]]  # fmt: skip
    assert function(**given)[side] == pytest.approx(row.number("value"), rel=1e-7, abs=1e-7)


@settings(max_examples=25, deadline=None)
@given(t=st.floats(-40, 40), df=st.floats(1, 500), level=LEVEL)
def test_noncentral_interval_inverts_the_tests(t, df, level):
    low, high = effect_intervals.noncentral_t_ci(t, df, level)
    assert low < high
    for end, share in ((low, (1 + level) / 2), (high, (1 - level) / 2)):
        below = stats.nct.cdf(t, df, float(end))
        assert np.isnan(below) or below == pytest.approx(share, abs=1e-9)


def test_d_g_and_d_z_are_the_rescaled_interval():
    low, high = effect_intervals.noncentral_t_ci(3.23, 34, 0.95)
    d = effect_sizes.d_from_t(3.23, 18, 18)
    assert effect_intervals.d_noncentral_ci(d, 18, 18) == pytest.approx((low / 3, high / 3))
    factor = float(effect_sizes.hedges_correction(34))
    assert effect_intervals.g_noncentral_ci(d, 18, 18) == pytest.approx((low / 3 * factor, high / 3 * factor))
    d_z = effect_sizes.d_z_from_t(3.23, 35)
    assert effect_intervals.d_z_noncentral_ci(d_z, 35) == pytest.approx(
        (low / np.sqrt(35), high / np.sqrt(35))
    )


def test_glass_delta_interval_covers_as_often_as_it_says():
    rng = np.random.default_rng(11)
    other, control = rng.standard_normal((4000, 14)) + 0.9, rng.standard_normal((4000, 10))
    delta = (other.mean(1) - control.mean(1)) / control.std(1, ddof=1)
    low, high = effect_intervals.glass_delta_noncentral_ci(delta, 14, 10, 0.9)
    # 4000 draws tell a share of .9 to .0047 (one standard error).
    assert ((low <= 0.9) & (high >= 0.9)).mean() == pytest.approx(0.9, abs=0.02)


def test_eta2_interval_covers_as_often_as_it_says():
    rng = np.random.default_rng(12)
    noncentrality, df1, df2 = 12.0, 3, 56
    F = stats.ncf.rvs(df1, df2, noncentrality, size=4000, random_state=rng)
    low, high = effect_intervals.partial_eta2_ci(F, df1, df2, 0.9)
    true = noncentrality / (noncentrality + 60)
    assert ((low <= true) & (high >= true)).mean() == pytest.approx(0.9, abs=0.02)


def test_an_honest_interval_may_leave_out_its_estimate_or_be_nothing_but_zero():
    # F = 0.4 with 3 and 56 df is so small that even the central F exceeds it 95 times in 100 less often.
    low, high = effect_intervals.partial_eta2_ci([0.05, 1.2, 12.0], 3, 56)
    assert low[:2].tolist() == [0.0, 0.0]
    assert high[0] == 0.0
    assert high[1] > 0
    assert low[2] < 36 / 92 < high[2]
    by_df = effect_intervals.partial_eta2_ci_by_df(12.0, 3, 56)
    assert by_df[0] > low[2]
    f_low, f_high = effect_intervals.f_ci(12.0, 3, 56)
    assert (f_low**2 / (1 + f_low**2), f_high**2 / (1 + f_high**2)) == pytest.approx((low[2], high[2]))


def test_cramers_v():
    low, high = effect_intervals.cramers_v_ci(12.4, 1, 80, 2)
    assert low < np.sqrt(12.4 / 80) < high
    shifted = effect_intervals.cramers_v_ci_shifted(12.4, 1, 80, 2)
    assert shifted == pytest.approx((np.sqrt(low**2 + 1 / 80), np.sqrt(high**2 + 1 / 80)))


def test_with_twelve_a_group_a_d_of_seven_tenths_is_not_significant():
    """Common practice, no source."""
    t = effect_sizes.d_from_t(1.0, 12, 12)
    assert tails.t_two_sided(0.7 / t, 22) > 0.05
    assert (
        effect_intervals.d_noncentral_ci(0.7, 12, 12)[0]
        < 0
        < effect_intervals.d_noncentral_ci(0.7, 12, 12)[1]
    )
    assert effect_intervals.normal_ci(0.7, effect_variances.d_variance(0.7, 12, 12))[0] < 0


@settings(max_examples=60, deadline=None)
@given(
    low=st.floats(-3, 3), width=st.floats(0, 0.2), n1=st.integers(3, 60), n2=st.integers(3, 60), level=LEVEL
)
def test_normal_ends_rise_with_d(low, width, n1, n2, level):
    """d ∓ c sqrt(a + d²/(2 N)) rises with d as long as c² < 2 N: its slope is at least 1 - c / sqrt(2 N)."""
    d = np.linspace(low, low + width, 9)
    if stats.norm.ppf((1 + level) / 2) ** 2 < 2 * (n1 + n2):
        for end in effect_intervals.normal_ci(d, effect_variances.d_variance(d, n1, n2), level):
            assert (np.diff(end) >= 0).all()


def test_t_interval_is_wider_than_the_normal_one():
    narrow, wide = effect_intervals.normal_ci(0.7, 0.1), effect_intervals.t_ci(0.7, 0.1, 22)
    assert wide[0] < narrow[0] < narrow[1] < wide[1]
    assert effect_intervals.t_ci(0.7, 0.1, np.inf) == pytest.approx(tuple(map(float, narrow)))


def test_interval_of_a_huge_t():
    # NIST heat flow against 5: t = 2611, df = 194; for df this large delta is about t (1 ∓ z / sqrt(2 df)).
    low, high = effect_intervals.noncentral_t_ci(2611.2838, 194.0, 0.95)
    rough = 2611.2838 * (1 + np.array([-1, 1]) * 1.96 / np.sqrt(388))
    assert np.allclose([low, high], rough, rtol=0.002)


def test_the_share_of_a_noncentrality_is_that_of_its_effect():
    """With lambda = N f² (Cohen 1988, 8.3) the share is f² / (1 + f²)."""
    f2, N = np.array([0.0, 0.01, 0.0625, 0.16, 9.0]), 60
    assert effect_intervals.share_of_lambda(N * f2, N) == pytest.approx(f2 / (1 + f2), rel=1e-14)
    assert effect_intervals.share_of_lambda(0.0, 60) == 0
