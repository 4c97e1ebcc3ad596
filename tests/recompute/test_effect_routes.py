"""Every route to an effect size on drawn raw data: scipy and statsmodels give the statistics and the shares."""

import numpy as np
import pandas as pd
import pytest
import statsmodels.formula.api as smf
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats
from statsmodels.stats.anova import anova_lm

from recheck.recompute import effect_sizes, variance_explained

SEED, SIZE = st.integers(0, 10**6), st.integers(4, 40)


def _two(seed: int, n: int, m: int):
    rng = np.random.default_rng(seed)
    return rng.standard_normal(n) * 2 + 10.5, rng.standard_normal(m) * 2 + 9


@settings(max_examples=40, deadline=None)
@given(seed=SEED, n=SIZE, m=SIZE)
def test_d_by_every_route(seed, n, m):
    a, b = _two(seed, n, m)
    d = effect_sizes.cohens_d(a.mean(), a.std(ddof=1), n, b.mean(), b.std(ddof=1), m)
    test = stats.ttest_ind(a, b)
    low, high = test.confidence_interval(0.9)
    assert effect_sizes.d_from_t(test.statistic, n, m) == pytest.approx(float(d), rel=1e-9)
    assert effect_sizes.d_from_F(stats.f_oneway(a, b).statistic, n, m) == pytest.approx(
        abs(float(d)), rel=1e-9
    )
    assert effect_sizes.d_from_p(test.pvalue, n, m) == pytest.approx(abs(float(d)), rel=1e-8)
    assert effect_sizes.d_from_p(test.pvalue / 2, n, m, tails=1) == pytest.approx(abs(float(d)), rel=1e-8)
    assert effect_sizes.d_from_ci(low, high, 0.9, n, m) == pytest.approx(float(d), rel=1e-8, abs=1e-12)
    r = stats.pearsonr(np.concatenate([a, b]), np.repeat([1.0, 0.0], [n, m])).statistic
    assert variance_explained.r_pb_from_d(d, n, m) == pytest.approx(r, rel=1e-9)
    assert variance_explained.d_from_r_pb(r, n, m) == pytest.approx(float(d), rel=1e-9)
    biased = np.sqrt((np.var(a) * n + np.var(b) * m) / (n + m))
    assert effect_sizes.population_sd(a.std(ddof=1), n, b.std(ddof=1), m) == pytest.approx(biased, rel=1e-12)


@settings(max_examples=30, deadline=None)
@given(seed=SEED, n=SIZE)
def test_d_z_by_every_route(seed, n):
    a, b = _two(seed, n, n)
    test, change = stats.ttest_rel(a, b), a - b
    d_z = effect_sizes.d_z(change.mean(), change.std(ddof=1))
    low, high = test.confidence_interval(0.95)
    assert effect_sizes.d_z_from_t(test.statistic, n) == pytest.approx(float(d_z), rel=1e-9)
    assert effect_sizes.d_z_from_p(test.pvalue, n) == pytest.approx(abs(float(d_z)), rel=1e-8)
    assert effect_sizes.d_z_from_ci(low, high, 0.95, n) == pytest.approx(float(d_z), rel=1e-8, abs=1e-12)
    r = np.corrcoef(a, b)[0, 1]
    # With equal SDs d_rm is the difference over that SD: Lakens (2013), formula 9.
    scaled = (b - b.mean()) / b.std(ddof=1) * a.std(ddof=1) + b.mean()
    d_rm = effect_sizes.d_rm((a - scaled).mean(), (a - scaled).std(ddof=1), r)
    assert d_rm == pytest.approx((a.mean() - b.mean()) / a.std(ddof=1), rel=1e-8)


@settings(max_examples=20, deadline=None)
@given(seed=SEED, n=st.integers(4, 20))
def test_shares_of_a_one_way_design(seed, n):
    rng = np.random.default_rng(seed)
    frame = pd.DataFrame(
        {"y": rng.standard_normal(3 * n) + np.repeat([0, 0.5, 1], n), "g": np.repeat(list("abc"), n)}
    )
    fit = smf.ols("y ~ g", frame).fit()
    effect, error = anova_lm(fit).iloc
    F, df1, df2 = effect.F, 2, 3 * n - 3
    total, ms = effect.sum_sq + error.sum_sq, error.sum_sq / df2
    share = variance_explained.eta2_from_ss(effect.sum_sq, total)
    assert share == pytest.approx(fit.rsquared, rel=1e-9)
    assert variance_explained.partial_eta2_from_ss(effect.sum_sq, error.sum_sq) == pytest.approx(
        fit.rsquared, rel=1e-9
    )
    # Kelley's epsilon² of one factor is the adjusted R².
    assert variance_explained.epsilon2_from_share(share, df1, df2) == pytest.approx(
        fit.rsquared_adj, rel=1e-8, abs=1e-12
    )
    assert variance_explained.epsilon2_from_F(F, df1, df2) == pytest.approx(
        fit.rsquared_adj, rel=1e-8, abs=1e-12
    )
    omega2 = variance_explained.omega2_from_F(F, df1, df2, 3 * n)
    assert variance_explained.omega2_from_ss(effect.sum_sq, df1, ms, total) == pytest.approx(
        float(omega2), rel=1e-8, abs=1e-12
    )
    f2 = variance_explained.f2_from_share(share)
    assert f2 == pytest.approx(float(variance_explained.f_from_F(F, df1, df2)) ** 2, rel=1e-9)
    assert variance_explained.share_from_f2(f2) == pytest.approx(float(share), rel=1e-12)


def test_conversions_of_a_published_example():
    # Borenstein et al. (2009), Introduction to Meta-Analysis, ch. 7 (from memory): r = .50 is d = 1.1547; d = .5 with
    # equal groups is r = .2425.
    assert variance_explained.d_from_r(0.5) == pytest.approx(1.1547, abs=5e-5)
    assert variance_explained.r_from_d(0.5, 50, 50) == pytest.approx(0.2425, abs=5e-5)
    # Fisher (1921): z of r = .5 is .5493, as in every table of the transformation.
    assert variance_explained.fisher_z(0.5) == pytest.approx(0.5493, abs=5e-5)
    assert variance_explained.r_from_fisher_z(variance_explained.fisher_z([-0.9, 0.0, 0.3])) == pytest.approx(
        [-0.9, 0, 0.3]
    )
    assert variance_explained.fisher_z(1.0) == np.inf


def test_shares_of_infinite_statistics_are_whole():
    """Where no spread is left, t and F are infinite and all the variance is explained."""
    assert variance_explained.r_from_t([np.inf, -np.inf, 0.0], 10).tolist() == [1.0, -1.0, 0.0]
    assert variance_explained.partial_eta2_from_F([np.inf, 0.0], 2, 10).tolist() == [1.0, 0.0]
    assert variance_explained.omega2_from_F([np.inf, 1.0], 2, 10, 13).tolist() == [1.0, 0.0]
    assert variance_explained.share_from_f2([np.inf, 0.0]).tolist() == [1.0, 0.0]
