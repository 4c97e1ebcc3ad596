"""The quadratures and sums inside the noncentral t and F against scipy and against each other."""

import numpy as np
import pytest
from scipy import special, stats

from recheck.recompute import noncentral_rules, poisson_rules

T, DF, DELTA = np.array([12.0, 15.0, 9.0]), np.array([8.0, 60.0, 2.5]), np.array([12.0, 14.0, 11.0])


@pytest.mark.parametrize("build", ["over_spread", "over_normal"])
def test_both_quadratures_give_the_noncentral_t(build):
    rule = getattr(noncentral_rules, build)(T, DF, DELTA, 256)
    below, density, slope = rule(DELTA, np.ones(3))
    assert below == pytest.approx(special.nctdtr(DF, DELTA, T), abs=1e-11)
    step = 1e-4
    ends = [special.nctdtr(DF, DELTA + move, T) for move in (-step, step)]
    assert density == pytest.approx((ends[0] - ends[1]) / (2 * step), rel=1e-6)
    near = [rule(DELTA + move, np.ones(3))[1] for move in (-step, step)]
    assert slope == pytest.approx((near[1] - near[0]) / (2 * step), abs=1e-7)


def test_one_of_both_quadratures_is_chosen():
    t, df = np.array([0.5, 3.0, 40.0, 900.0]), np.array([1.0, 30.0, 1e6, 4.0])
    spread, normal = noncentral_rules.nodes_needed(t, df, t)
    assert np.all((spread > 0) != (normal > 0))
    assert set(spread) | set(normal) <= {0, *noncentral_rules.COUNTS}


def test_sums_are_central_without_noncentrality():
    F, df1, df2 = np.array([0.4, 2.0, 9.0]), np.array([1.0, 3.5, 12.0]), np.array([2.0, 30.0, 8.0])
    assert poisson_rules.central(F, df1, df2) == pytest.approx(stats.f.cdf(F, df1, df2), rel=1e-12)
    endless = poisson_rules.central(F, df1, np.full(3, np.inf))
    assert endless == pytest.approx(stats.chi2.cdf(F * df1, df1), rel=1e-12)


@pytest.mark.parametrize("mean", [0.7, 30.0, 300.0, 5000.0])
def test_sums_give_the_noncentral_f(mean):
    means, df1, df2 = np.full(2, mean), np.array([2.0, 7.0]), np.array([25.0, 600.0])
    F = 2 * means / df1 * np.array([0.9, 1.1])
    count = int(poisson_rules.nodes_needed(means)[0])
    assert (count < 0) == (mean > poisson_rules.FEW)
    rule = poisson_rules.mixture(F, df1, df2, means, count)
    below, slope, _ = rule(means)
    assert below == pytest.approx(special.ncfdtr(df1, df2, 2 * means, F), abs=1e-10)
    step = 1e-3 * mean
    ends = [special.ncfdtr(df1, df2, 2 * (means + move), F) for move in (-step, step)]
    assert slope == pytest.approx((ends[1] - ends[0]) / (2 * step), rel=1e-3, abs=1e-9)
