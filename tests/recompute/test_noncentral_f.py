"""The noncentral F and chi-square against sums of 30 digits, scipy, and the noncentral t."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mpmath import mp, mpf
from scipy import special

from recheck.recompute import noncentral, noncentral_f
from recheck.recompute.tails import chi2_tail, f_tail

HARD = (
    (1e4, 3, 1e6, 30000.0), (60.0, 10, 9000.0, 430.0), (60.0, 10, 9000.0, 445.0), (3.0, 2, 30.0, 5.0), (5.0, 4, 1e6, 12.0),
    (1000.0, 5, 500.0, 4600.0), (2.5, 40, 20.0, 80.0), (0.5, 3, 7.0, 1e-3), (4.0, 2.4, 33.7, 6.5),
)  # fmt: skip


def _true(F: float, df1: float, df2: float, noncentrality: float) -> mpf:
    """The Poisson mixture, from far above the mean downward; what lies above adds up term by term."""
    with mp.workdps(30):
        a, b, mean = mpf(df1) / 2, mpf(df2) / 2, mpf(noncentrality) / 2
        x = df1 * mpf(F) / (df1 * mpf(F) + df2)
        spread = 12 * mp.sqrt(mean) + 40
        j, least = int(mean + spread), max(0, int(mean - spread))
        weight = mp.exp(j * mp.log(mean) - mean - mp.loggamma(j + 1))
        front = mp.loggamma(a + j + b) - mp.loggamma(a + j + 1) - mp.loggamma(b)
        drop = mp.exp((a + j) * mp.log(x) + b * mp.log(1 - x) + front)
        share, k, further = mpf(0), j, drop
        while k == j or further > share * mpf(10) ** -25:
            further *= x * (a + b + k) / (a + k + 1)
            share, k = share + further, k + 1
        total = mpf(0)
        while j >= least:
            share += drop
            total += weight * share
            drop *= (a + j) / (x * (a + b + j - 1))
            weight *= j / mean
            j -= 1
        return total


@pytest.mark.parametrize(("F", "df1", "df2", "noncentrality"), HARD)
def test_cdf_against_mpmath(F, df1, df2, noncentrality):
    below = float(noncentral_f.noncentral_F_cdf(F, df1, df2, noncentrality))
    assert below == pytest.approx(float(_true(F, df1, df2, noncentrality)), abs=1e-12)


@settings(max_examples=80, deadline=None)
@given(
    F=st.floats(0.01, 80), df1=st.integers(1, 12), df2=st.floats(1, 5000), factor=st.floats(0.2, 3),
    probability=st.sampled_from((0.975, 0.95, 0.05, 0.025, 0.005)),
)  # fmt: skip
def test_cdf_and_root_against_scipy(F, df1, df2, factor, probability):
    noncentrality = factor * F * df1
    below = noncentral_f.noncentral_F_cdf(F, df1, df2, noncentrality)
    assert below == pytest.approx(special.ncfdtr(df1, df2, noncentrality, F), abs=1e-10)
    root = float(noncentral_f.noncentral_F_lambda(F, df1, df2, probability))
    if root == 0:
        assert special.fdtr(df1, df2, F) <= probability + 1e-12
    else:
        assert special.ncfdtr(df1, df2, root, F) == pytest.approx(probability, abs=1e-10)


@settings(max_examples=40, deadline=None)
@given(x=st.floats(0.01, 300), df=st.floats(0.5, 40), probability=st.sampled_from((0.975, 0.5, 0.025)))
def test_chi2_against_scipy(x, df, probability):
    assert noncentral_f.noncentral_chi2_cdf(x, df, x) == pytest.approx(special.chndtr(x, df, x), abs=1e-10)
    root = float(noncentral_f.noncentral_chi2_lambda(x, df, probability))
    below = special.chndtr(x, df, root) if root else special.chdtr(df, x)
    assert below == pytest.approx(probability, abs=1e-10) if root else below <= probability


def test_f_of_one_df_is_the_two_sided_t():
    t, df, delta = np.array([0.5, 2.0, 6.0]), np.array([4.0, 22.0, 500.0]), np.array([0.3, 2.5, 5.0])
    two_sided = noncentral.noncentral_t_cdf(t, df, delta) - noncentral.noncentral_t_cdf(-t, df, delta)
    assert noncentral_f.noncentral_F_cdf(t**2, 1, df, delta**2) == pytest.approx(two_sided, abs=1e-12)


def test_without_noncentrality_it_is_central():
    assert noncentral_f.noncentral_F_cdf(3.3, 2, 40, 0.0) == pytest.approx(1 - float(f_tail(3.3, 2, 40)))
    assert noncentral_f.noncentral_chi2_cdf(3.3, 2, 0.0) == pytest.approx(1 - float(chi2_tail(3.3, 2)))


def test_ends_at_zero_and_what_is_not_allowed():
    roots = noncentral_f.noncentral_F_lambda(
        [0.9, 0.01, 5.0, 5.0, -1.0], [2, 2, 2, -2, 2], 28, [0.95, 0.05, 0.0, 0.5, 0.5]
    )
    assert roots[:3].tolist() == [0.0, 0.0, np.inf]
    assert np.isnan(roots[3])
    assert roots[4] == 0
    below = noncentral_f.noncentral_F_cdf([0.0, np.inf, np.nan], 2, 28, 3.0)
    assert below[:2].tolist() == [0.0, 1.0]
    assert np.isnan(below[2])
    assert noncentral_f.noncentral_F_lambda(np.empty((0, 3)), 2, 20, 0.5).shape == (0, 3)


def test_far_arguments_give_a_root_or_nan():
    assert np.isnan(noncentral_f.noncentral_chi2_lambda(1e300, 4, 0.5))
    far = noncentral_f.noncentral_F_lambda(4.57, 4, 177, 1e-300)
    assert np.isnan(far) or far > 100


def test_root_rises_with_F():
    """The proof of the bounds of eta squared over an interval of F rests on it."""
    F = np.linspace(0.1, 300, 400)
    for df2 in (5.0, 80.0, np.inf):
        lower = noncentral_f.noncentral_F_lambda(F, 3, df2, 0.95)
        assert (np.diff(lower) >= 0).all()
        assert (np.diff(lower[lower > 0]) > 0).all()
