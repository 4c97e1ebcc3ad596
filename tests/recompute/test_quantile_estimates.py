"""Estimators from quantiles: constants that are published elsewhere, and samples of normal data."""

import numpy as np
import pytest

from recheck.recompute import quantile_estimates as estimates

# Expected range of n normal values in SDs. Source: d2 of control charts, ASTM Manual on Presentation of Data
# (from memory).
D2 = {5: 2.326, 10: 3.078, 25: 3.931}


@pytest.mark.parametrize(("n", "d2"), D2.items())
def test_the_divisor_of_the_range_is_that_of_control_charts(n, d2):
    assert 1 / estimates.sd_from_range_wan(0.0, 1.0, n) == pytest.approx(d2, rel=0.015)


def test_large_samples_have_the_quartiles_of_the_normal_distribution():
    # 1.349 is twice the upper quartile of the standard normal distribution (any table of it).
    assert 1 / estimates.sd_from_quartiles_wan(0.0, 1.0, 1e9) == pytest.approx(1.34898, rel=1e-5)
    assert 1 / estimates.sd_from_iqr(1.0) == pytest.approx(1.349, rel=1e-3)


def test_examples_worked_by_hand():
    # Closed forms of the formulas at simple points.
    assert estimates.mean_from_range_hozo(1, 3, 9) == 4
    assert estimates.sd_from_range_hozo(2, 5, 8, [10, 50, 100]) == pytest.approx([np.sqrt(3), 1.5, 1.0])
    assert estimates.mean_from_five_bland(0, 2, 3, 6, 10) == pytest.approx(4.0)
    assert estimates.mean_from_quartiles_wan(2, 3, 7) == 4
    assert estimates.mean_from_range_luo(0, 3, 10, 16) == pytest.approx(5 / 3 + 2)  # w = 4 / (4 + 8)
    assert estimates.mean_from_quartiles_luo(2, 3, 8, 39) == pytest.approx(0.71 * 5 + 0.29 * 3)
    assert estimates.mean_from_five_luo(0, 2, 3, 8, 10, 1) == pytest.approx(
        2.2 / 3.2 * 5 - 0.02 * 5 + (1 - 2.2 / 3.2 + 0.02) * 3
    )


@pytest.fixture(scope="module")
def normal():
    """Five-number summaries of 4000 samples with mean 10 and SD 2, by n."""
    rng = np.random.default_rng(20)
    return {
        n: np.quantile(rng.normal(10, 2, (4000, n)), (0, 0.25, 0.5, 0.75, 1), axis=1) for n in (15, 45, 201)
    }


@pytest.mark.parametrize("n", (15, 45, 201))
def test_normal_samples_are_estimated_without_much_bias(normal, n):
    a, q1, m, q3, b = normal[n]
    sds = {
        "range": estimates.sd_from_range_wan(a, b, n), "quartiles": estimates.sd_from_quartiles_wan(q1, q3, n),
        "five": estimates.sd_from_five_wan(a, q1, q3, b, n), "best": estimates.sd_from_five_shi(a, q1, q3, b, n),
        "rule": estimates.sd_from_range_hozo(a, m, b, n),
    }  # fmt: skip
    assert {
        k: abs(v.mean() / 2 - 1) < (0.25 if k == "rule" else 0.07) for k, v in sds.items()
    } == dict.fromkeys(sds, True)
    means = (
        estimates.mean_from_range_hozo(a, m, b), estimates.mean_from_five_bland(a, q1, m, q3, b),
        estimates.mean_from_quartiles_wan(q1, m, q3), estimates.mean_from_range_luo(a, m, b, n),
        estimates.mean_from_quartiles_luo(q1, m, q3, n), estimates.mean_from_five_luo(a, q1, m, q3, b, n),
    )  # fmt: skip
    assert all(abs(x.mean() - 10) < 0.04 for x in means)


@pytest.mark.parametrize("n", (45, 201))
def test_the_later_estimators_err_less(normal, n):
    """What their papers claim: less squared error for normal data than the ones they replace."""
    a, q1, m, q3, b = normal[n]

    def error(values, truth):
        return float(np.mean((values - truth) ** 2))

    best = error(estimates.sd_from_five_shi(a, q1, q3, b, n), 2)
    assert best <= error(estimates.sd_from_five_wan(a, q1, q3, b, n), 2)
    assert best <= error(estimates.sd_from_range_wan(a, b, n), 2)
    luo = error(estimates.mean_from_five_luo(a, q1, m, q3, b, n), 10)
    assert luo <= error(estimates.mean_from_five_bland(a, q1, m, q3, b), 10)
    assert luo <= error(estimates.mean_from_quartiles_luo(q1, m, q3, n), 10)


def test_one_value_has_no_sd():
    n = np.array([1.0, np.nan, 2.0])
    for sds in (
        estimates.sd_from_range_hozo(1, 2, 4, n),
        estimates.sd_from_range_wan(1, 4, n),
        estimates.sd_from_quartiles_wan(2, 3, n),
        estimates.sd_from_five_shi(1, 2, 3, 4, n),
    ):
        assert np.isnan(sds).tolist() == [True, True, False]
