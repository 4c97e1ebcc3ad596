"""Intervals of a proportion against R, statsmodels and published figures."""

import numpy as np
import pytest
from scipy import stats
from statsmodels.stats.proportion import proportion_confint

from recheck.recompute import proportions
from tests.reference import rows

METHODS = {
    "normal": proportions.wald, "wilson": proportions.wilson, "beta": proportions.clopper_pearson,
    "agresti_coull": proportions.agresti_coull, "jeffreys": proportions.jeffreys,
}  # fmt: skip


@pytest.mark.parametrize("method", METHODS)
def test_intervals_match_statsmodels(method):
    rng = np.random.default_rng(4)
    total = rng.integers(2, 300, 60)
    count = rng.integers(1, total)
    for level in (0.9, 0.95, 0.99):
        expected = proportion_confint(count, total, alpha=1 - level, method=method)
        found = METHODS[method](count, total, level)
        assert found[0] == pytest.approx(np.maximum(expected[0], 0), abs=1e-12)
        assert found[1] == pytest.approx(np.minimum(expected[1], 1), abs=1e-12)


R = {
    "binom": proportions.clopper_pearson, "jeffreys": proportions.jeffreys,
    "prop TRUE": proportions.wilson_corrected, "prop FALSE": proportions.wilson,
}  # fmt: skip
ONE = [r for r in rows("r_counts") if r["what"].rpartition(" ")[0] in R]


@pytest.mark.parametrize("row", ONE, ids=lambda row: row["call"])
def test_intervals_match_r(row):
    name, _, end = row["what"].rpartition(" ")
    count, total = (float(x) for x in row["counts"].split())
    assert R[name](count, total)["[2]" in end] == pytest.approx(row.number("value"), abs=1e-12)


def test_newcombe_found_these_intervals():
    # Newcombe (1998), Statistics in Medicine 17:857-872, Table I: 81/263, 15/148, 0/20, 1/29 (from memory).
    expected = {
        proportions.wald: ((0.2522, 0.3638), (0.0527, 0.1500), (0.0, 0.0), (0.0, 0.1009)),
        proportions.wald_corrected: ((0.2503, 0.3657), (0.0494, 0.1534), (0.0, 0.0250), (0.0, 0.1181)),
        proportions.wilson: ((0.2553, 0.3662), (0.0624, 0.1605), (0.0, 0.1611), (0.0061, 0.1718)),
        proportions.wilson_corrected: ((0.2535, 0.3682), (0.0598, 0.1644), (0.0, 0.2005), (0.0018, 0.1963)),
        proportions.clopper_pearson: ((0.2527, 0.3676), (0.0578, 0.1617), (0.0, 0.1684), (0.0009, 0.1776)),
        proportions.mid_p: ((0.2544, 0.3658), (0.0601, 0.1581), (0.0, 0.1391), (0.0017, 0.1585)),
    }
    for method, ends in expected.items():
        low, high = method([81, 15, 0, 1], [263, 148, 20, 29])
        assert list(zip(low, high, strict=True)) == [pytest.approx(pair, abs=6e-5) for pair in ends]


def test_the_mid_p_interval_ends_where_the_binomial_says():
    low, high = proportions.mid_p(7, 40, 0.9)
    assert stats.binom.sf(7, 40, low) + stats.binom.pmf(7, 40, low) / 2 == pytest.approx(0.05)
    assert stats.binom.cdf(6, 40, high) + stats.binom.pmf(7, 40, high) / 2 == pytest.approx(0.05)


def test_the_logit_interval_is_walds_of_a_logistic_regression():
    # R 4.2.2: plogis(confint.default(glm(cbind(12, 28) ~ 1, binomial)))
    assert proportions.logit(12, 40) == pytest.approx((0.1789394053, 0.4573424413), rel=1e-9)


@pytest.mark.parametrize(
    "method", [*METHODS.values(), proportions.wilson_corrected, proportions.mid_p, proportions.logit]
)
def test_of_no_cases_there_is_no_interval(method):
    assert np.all(np.isnan(method(0, 0)))
    assert np.all(np.isnan(method([3, np.nan], [np.nan, 5])))


def test_the_normal_quantile_of_an_interval():
    # Abramowitz & Stegun (1964), table 26.5 and below.
    assert proportions.critical_z([0.9, 0.95, 0.99]) == pytest.approx(
        [1.644854, 1.959964, 2.575829], abs=5e-7
    )
