"""OR, RR, RD and their intervals against published tables, R and statsmodels."""

import numpy as np
import pytest
from scipy import optimize, stats
from statsmodels.stats.proportion import confint_proportions_2indep
from statsmodels.stats.proportion import test_proportions_2indep as z_of_proportions
from statsmodels.stats.rates import confint_poisson_2indep

from recheck.recompute import risk_intervals, risks, score_intervals
from tests.reference import rows

TABLES = rows("two_by_two")
WALD = {
    "or": (risks.odds_ratio, risks.log_odds_ratio_se, "log_or_se", risk_intervals.odds_ratio_wald),
    "rr": (risks.risk_ratio, risks.log_risk_ratio_se, "log_rr_se", risk_intervals.risk_ratio_wald),
    "rd": (risks.risk_difference, risks.risk_difference_se, "rd_se", risk_intervals.difference_wald),
}


@pytest.mark.parametrize("row", TABLES, ids=lambda row: row["label"])
@pytest.mark.parametrize("name", WALD)
def test_published_two_by_two_tables(row, name):
    estimate, error, column, interval = WALD[name]
    counts = row.numbers("a", "b", "c", "d")
    if not row.has(name):
        pytest.skip("not defined: a count of 0")
    assert estimate(*counts) == pytest.approx(row.number(name), rel=1e-12)
    assert error(*counts) == pytest.approx(row.number(column), rel=1e-12)
    # The differences of the tea tasting run beyond 1 and are cut there.
    low, high = (np.clip(row.number(f"{name}_{end}"), -1, None) for end in ("low", "high"))
    assert interval(*counts) == pytest.approx((low, high if name != "rd" else min(high, 1.0)), rel=1e-11)


def test_a_count_of_zero_has_the_ratio_with_a_half_added():
    # tests/reference/two_by_two.csv, "zero cell": "with 0.5 added to all cells OR = 0.047619047619"
    assert risks.odds_ratio(*risks.with_half(0, 10, 5, 5)) == pytest.approx(0.047619047619)
    assert risks.odds_ratio(0, 10, 5, 5) == 0 and np.isnan(risk_intervals.odds_ratio_wald(0, 10, 5, 5)[0])


def test_the_number_needed_to_treat_is_one_over_the_difference():
    assert risks.number_needed_to_treat(12, 28, 20, 21) == pytest.approx(1 / (20 / 41 - 12 / 40))


STATSMODELS = {
    ("diff", "wald"): risk_intervals.difference_wald,
    ("diff", "newcomb"): risk_intervals.difference_newcombe,
    ("diff", "agresti-caffo"): risk_intervals.difference_agresti_caffo,
    ("ratio", "log"): risk_intervals.risk_ratio_wald,
    ("ratio", "log-adjusted"): risk_intervals.risk_ratio_wald_half,
    ("ratio", "score"): score_intervals.risk_ratio_score,
    ("odds-ratio", "logit"): risk_intervals.odds_ratio_wald,
    ("odds-ratio", "logit-adjusted"): risk_intervals.odds_ratio_wald_half,
    ("odds-ratio", "score"): score_intervals.odds_ratio_score,
}


@pytest.mark.parametrize(("compare", "method"), STATSMODELS)
def test_intervals_match_statsmodels(compare, method):
    a, b, c, d = np.random.default_rng(2).integers(1, 80, (4, 12)).astype(float)
    low, high = STATSMODELS[compare, method](a, b, c, d)
    for i in range(12):
        counts = a[i], a[i] + b[i], c[i], c[i] + d[i]
        found = confint_proportions_2indep(*counts, method=method, compare=compare)
        assert (low[i], high[i]) == pytest.approx(found, rel=1e-9)


def _mee(a, b, c, d, delta, factor):
    """z of a difference, its restricted risks by root finding in the likelihood's own derivative."""
    least, most = max(0.0, -delta) + 1e-13, min(1.0, 1 - delta) - 1e-13
    p = optimize.brentq(
        lambda p: a / (p + delta) - b / (1 - p - delta) + c / p - d / (1 - p), least, most, xtol=1e-15
    )
    variance = (p + delta) * (1 - p - delta) / (a + b) + p * (1 - p) / (c + d)
    return (a / (a + b) - c / (c + d) - delta) / np.sqrt(variance * factor)


@pytest.mark.parametrize("unbiased", [True, False])
def test_the_ends_of_a_score_interval_of_the_difference_are_where_its_test_turns(unbiased):
    counts = np.random.default_rng(3).integers(1, 60, (4, 40)).astype(float)
    low, high = score_intervals.difference_score(*counts, unbiased=unbiased)
    for i in range(40):
        whole = counts[:, i].sum()
        factor = whole / (whole - 1) if unbiased else 1.0
        assert _mee(*counts[:, i], low[i], factor) == pytest.approx(1.959963984540054, abs=1e-8)
        assert _mee(*counts[:, i], high[i], factor) == pytest.approx(-1.959963984540054, abs=1e-8)


PROFILES = {
    "logit": lambda *counts: np.log(score_intervals.odds_ratio_likelihood(*counts)),
    "log": lambda *counts: np.log(score_intervals.risk_ratio_likelihood(*counts)),
    "identity": score_intervals.difference_likelihood,
}


@pytest.mark.parametrize(
    "row", [r for r in rows("r_counts") if "profile" in r["what"]], ids=lambda r: r["call"]
)
def test_profile_intervals_match_r(row):
    _, link, end = row["what"].split()
    found = PROFILES[link](*(float(x) for x in row["counts"].split()))
    # R interpolates the profile by a spline.
    assert found[int(end) - 1] == pytest.approx(row.number("value"), abs=4e-4)


@pytest.mark.parametrize(
    "row", [r for r in rows("r_counts") if "difference" in r["what"]], ids=lambda r: r["call"]
)
def test_intervals_of_a_difference_match_r(row):
    corrected = "TRUE" in row["what"]
    interval = risk_intervals.difference_wald_corrected if corrected else risk_intervals.difference_wald
    found = interval(*(float(x) for x in row["counts"].split()))
    assert found["[2]" in row["what"]] == pytest.approx(row.number("value"), rel=1e-12)


def test_newcombe_found_these_intervals():
    # Newcombe (1998), Statistics in Medicine 17:873-890, Table II: 56/70 - 48/80 (from memory).
    counts = (56, 14, 48, 32)
    assert np.round(risk_intervals.difference_newcombe(*counts), 4) == pytest.approx((0.0524, 0.3339))
    assert np.round(risk_intervals.difference_newcombe(*counts, corrected=True), 4) == pytest.approx(
        (0.0428, 0.3422)
    )
    assert np.round(score_intervals.difference_score(*counts, unbiased=False), 4) == pytest.approx(
        (0.0533, 0.3377), abs=1e-3
    )
    assert np.round(risk_intervals.difference_wald(*counts), 4) == pytest.approx((0.0575, 0.3425))


def test_intervals_of_empty_cells_end_at_the_limits():
    assert score_intervals.odds_ratio_score(0, 10, 5, 5)[0] == 0
    assert score_intervals.risk_ratio_likelihood(5, 5, 0, 10)[1] == np.inf
    assert score_intervals.difference_score(10, 0, 0, 5)[1] == pytest.approx(1.0)


def test_z_squared_is_pearsons_chi2():
    row = TABLES[0]
    assert risks.z_pooled(*row.numbers("a", "b", "c", "d")) ** 2 == pytest.approx(row.number("chi2"))


@pytest.mark.parametrize("counts", [(12, 88, 5, 95), (3, 17, 9, 71), (1, 1, 400, 9600)])
def test_ratios_of_rates_and_unpooled_z_match_statsmodels(counts):
    a, b, c, d = counts
    low, high = risk_intervals.risk_ratio_rates(a, b, c, d, 0.9)
    expected = confint_poisson_2indep(a, a + b, c, c + d, method="wald-log", compare="ratio", alpha=0.1)
    assert (low, high) == pytest.approx(expected, rel=1e-9)
    test = z_of_proportions(a, a + b, c, c + d, method="wald")
    assert risks.z_unpooled(a, b, c, d) == pytest.approx(test.statistic, rel=1e-9)


def test_score_intervals_of_two_groups_alike_without_events():
    """At a difference of 0 there is no gap over no variance. The ends in closed form, k = N / (N - 1):

    with p2 = 0, z² = delta n1 / ((1 - delta) k), and so in the other direction; for the ratio of two groups with events alone
    z² = (theta - 1) n2 / k above 1 and (1 / theta - 1) n1 / k below.
    """
    k, z2 = 15 / 14, stats.norm.isf(0.025) ** 2
    first, second = (z2 * k / n for n in (10, 5))
    expected = -second / (1 + second), first / (1 + first)
    assert score_intervals.difference_score(0, 10, 0, 5) == pytest.approx(expected, abs=1e-10)
    assert score_intervals.difference_score(5, 0, 10, 0) == pytest.approx(expected, abs=1e-10)
    assert score_intervals.risk_ratio_score(10, 0, 5, 0) == pytest.approx(
        (1 / (1 + first), 1 + second), rel=1e-10
    )


@pytest.mark.parametrize("name", ["odds_ratio_score", "risk_ratio_likelihood", "difference_score"])
def test_unknown_counts_give_unknown_intervals(name):
    assert np.isnan(getattr(score_intervals, name)(3, np.nan, 2, 5)).all()
