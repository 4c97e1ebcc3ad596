"""SDs, SEs, intervals and p turned into each other: published conversions, R, raw data, searches over boxes."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from recheck.recompute import ci_and_p, conversions, intervals, tails
from tests.recompute.boxes import SHARES, at, holds
from tests.recompute.boxes import intervals as boxes
from tests.reference import Reference, half_unit, rows

GROUPED = ("union_mean", "union_sd", "pooled_sd", "rest_mean", "rest_sd")
"""Rows of groups put together, which `test_combining` holds."""
LEVEL = st.sampled_from((0.8, 0.9, 0.95, 0.99))


def _converted(row: Reference) -> float:
    """The output of one conversion, by the exact quantiles."""
    given, output, ratio = row.given(), row["output"], row["kind"].endswith("_ratio")
    level, value = given.get("level", 0.95), {}
    match row["kind"].removesuffix("_ratio"):
        case "p_to_ci":
            estimate = np.log(given["est"]) if ratio else given["est"]
            value["z"] = tails.z_quantile(given["p"] / 2)
            value["se"] = value["se_log"] = ci_and_p.se_from_p(estimate, given["p"])
            ends = ci_and_p.ci_from_p_ratio if ratio else ci_and_p.ci_from_p
            value["ci_low"], value["ci_high"] = ends(given["est"], given["p"], level)
        case "ci_to_p":
            low, high = np.log(given["ci_low"]), np.log(given["ci_high"])
            value["se_log"] = intervals.se_from_ci(low, high, level, np.inf)
            value["z"] = abs(np.log(given["est"])) / value["se_log"]
            value["p"] = tails.z_two_sided(value["z"])
        case "ci_to_sd":
            value["divisor"] = 2 * intervals.critical_t(level, given["n"] - 1)
            ends = given["ci_low"], given["ci_high"]
            value["sd"] = conversions.sd_from_ci(*ends, level, given["n"], given["n"] - 1)
        case "p_to_sd":
            value["t"] = tails.t_quantile(given["p"] / 2, given["n1"] + given["n2"] - 2)
            value["se"] = given["est"] / value["t"]
            value["sd"] = conversions.sd_from_p(given["est"], given["p"], given["n1"], given["n2"])
        case "sd_to_r":
            sds = given["sd_baseline"], given["sd_final"], given["sd_change"]
            value["r"] = conversions.correlation_from_change(*sds)
        case "multiplier":
            value["divisor"] = 2 * intervals.critical_t(level, np.inf)
        case "se_to_sd":
            value["sd"] = conversions.sd_from_se(given["se"], given["n"])
        case "mean_sd_to_ci":
            value["se"] = conversions.se_from_sd(given["sd"], given["n"])
            ends = intervals.ci_from_estimate(given["mean"], value["se"], level, given["n"] - 1)
            value["ci_low"], value["ci_high"] = ends
        case "t_to_F":
            value["F"] = given["t"] ** 2
            value["p"] = tails.f_tail(value["F"], 1, given["df"])
        case "t_to_p":
            value["p"] = tails.t_two_sided(given["t"], given["df"])
        case "r_to_t_to_p":
            value["t"] = given["r"] * np.sqrt((given["n"] - 2) / (1 - given["r"] ** 2))
            value["p"] = tails.r_two_sided(given["r"], given["n"] - 2)
        case "z_to_chi2":
            value["chi2"] = given["z"] ** 2
            assert tails.chi2_tail(value["chi2"], 1) == pytest.approx(tails.z_two_sided(given["z"]))
        case "d_to_lnOR":
            value["lnOR"] = conversions.log_odds_ratio_from_d(given["d"])
            value["V_lnOR"] = conversions.log_odds_ratio_from_d(np.sqrt(given["V_d"])) ** 2
        case "lnOR_to_d":
            value["d"] = conversions.d_from_log_odds_ratio(given["lnOR"])
            value["V_d"] = conversions.d_from_log_odds_ratio(np.sqrt(given["V_lnOR"])) ** 2
        case "lnOR_se_to_ci":
            ends = intervals.ci_from_estimate(given["lnOR"], given["se"], 0.95, np.inf)
            value["ci_low_log"], value["ci_high_log"] = ends
            value["ci_low"], value["ci_high"] = np.exp(ends)
    return float(value[output])


@pytest.mark.parametrize("row", rows("conversions"), ids=lambda r: f"{r['label']}: {r['output']}")
def test_published_conversions(row: Reference):
    value = _converted(row)
    # The ratio's figures are computed with 1.96 in place of the quantile.
    assert value == pytest.approx(row.number("exact"), rel=3e-4 if row["kind"] == "ci_to_p_ratio" else 1e-9)
    if row["exact"] == row["value"] and (row["label"], row["output"]) not in {
        # Printed from values that were rounded before: SE 1.37, and limits to three decimals.
        ("Cochrane difference in means, P = 0.008", "sd"),
        ("ratio 0.81 (0.70 to 0.94)", "se_log"),
    }:
        assert abs(value - row.number("printed")) <= half_unit(row["printed"])


def test_approximations_of_altman_and_bland_as_they_print_them():
    assert ci_and_p.z_from_p_approximate([0.032, 0.034]) == pytest.approx([2.141, 2.117], abs=5e-4)
    assert ci_and_p.p_from_z_approximate(2.802) == pytest.approx(0.0051173654, rel=1e-4)


def test_what_is_said_of_the_approximations_holds():
    p = np.logspace(-4, -1, 200)
    z = stats.norm.isf(p / 2)
    off = np.abs(ci_and_p.z_from_p_approximate(p) - z)
    assert np.max(off) < 0.04
    assert np.max(off[p >= 0.001]) < 0.013
    kept = p >= 0.001
    assert ci_and_p.p_from_z_approximate(-z[kept]) == pytest.approx(p[kept], rel=0.05)


@pytest.mark.parametrize(
    "row",
    [row for row in rows("r_spreads") if row["output"] not in GROUPED],
    ids=lambda r: f"{r['label']}: {r['call']}",
)
def test_conversions_as_r_computes_them_from_the_data(row: Reference):
    given = row.given()
    n = given.get("n", 0.0)
    match row["output"]:
        case "ci_low" | "ci_high":
            se = conversions.se_from_sd(given["sd"], n)
            ends = intervals.ci_from_estimate(given["mean"], se, given["level"], n - 1)
            value = ends[row["output"] == "ci_high"]
        case "sd_from_ci":
            value = conversions.sd_from_ci(given["low"], given["high"], given["level"], n, n - 1)
        case "correlation":
            value = conversions.correlation_from_change(given["sd1"], given["sd2"], given["sd_change"])
        case "sd_from_t" | "sd_from_p" | "sd_from_F":
            statistic = given[row["output"][-1]]
            convert = getattr(conversions, row["output"])
            value = convert(given["difference"], statistic, given["n1"], given["n2"])
    assert value == pytest.approx(row.number("value"), rel=1e-10)


@settings(max_examples=100, deadline=None)
@given(seed=st.integers(0, 10**6), n1=st.integers(3, 40), n2=st.integers(3, 40), level=LEVEL)
def test_every_route_leads_back_to_the_sd_of_the_data(seed, n1, n2, level):
    rng = np.random.default_rng(seed)
    x, y = rng.normal(5, 2, n1), rng.normal(6, 2, n2)
    test = stats.ttest_ind(x, y)
    pooled = np.sqrt(((n1 - 1) * x.var(ddof=1) + (n2 - 1) * y.var(ddof=1)) / (n1 + n2 - 2))
    gap = x.mean() - y.mean()
    assert conversions.sd_from_t(gap, test.statistic, n1, n2) == pytest.approx(pooled, rel=1e-9)
    assert conversions.sd_from_F(gap, test.statistic**2, n1, n2) == pytest.approx(pooled, rel=1e-9)
    if test.pvalue > 1e-8:
        assert conversions.sd_from_p(gap, test.pvalue, n1, n2) == pytest.approx(pooled, rel=1e-6)
    assert conversions.sd_from_se(stats.sem(x), n1) == pytest.approx(x.std(ddof=1), rel=1e-12)
    ends = stats.t.interval(level, n1 - 1, x.mean(), stats.sem(x))
    assert conversions.sd_from_ci(*ends, level, n1, n1 - 1) == pytest.approx(x.std(ddof=1), rel=1e-8)
    assert conversions.coefficient_of_variation(x.mean(), x.std(ddof=1)) == pytest.approx(
        stats.variation(x, ddof=1), rel=1e-12
    )


@settings(max_examples=150, deadline=None)
@given(
    gap=boxes(-3, 3), t=boxes(-4, 4), p=boxes(0.0001, 0.9, 0.1), n=st.tuples(st.integers(2, 60), st.integers(2, 60)),
    u=SHARES, v=SHARES,
)  # fmt: skip
def test_boxes_of_the_common_sd(gap, t, p, n, u, v):
    n1, n2 = n
    found = float(conversions.sd_from_t(at(gap, u), at(t, v), n1, n2))
    if not np.isnan(found):
        assert holds(conversions.sd_from_t_bounds(*gap, *t, n1, n2), found)
    p = (p[0], min(p[1], 1.0))
    found = float(conversions.sd_from_p(at(gap, u), at(p, v), n1, n2))
    if not np.isnan(found):
        assert holds(conversions.sd_from_p_bounds(*gap, *p, n1, n2), found)


@settings(max_examples=150, deadline=None)
@given(
    low=boxes(-5, 0),
    high=boxes(0.5, 6),
    mean=boxes(-3, 3),
    sd=boxes(0, 3),
    n=st.integers(2, 90),
    level=LEVEL,
    u=SHARES,
    v=SHARES,
)
def test_boxes_of_intervals_of_a_mean(low, high, mean, sd, n, level, u, v):
    box = conversions.sd_from_ci_bounds(*low, *high, level, n, n - 1)
    assert holds(box, max(float(conversions.sd_from_ci(at(low, u), at(high, v), level, n, n - 1)), 0.0))
    corners = [float(conversions.sd_from_ci(a, b, level, n, n - 1)) for a in low for b in high]
    assert box == pytest.approx((max(min(corners), 0.0), max(corners)), rel=1e-9, abs=1e-12)
    m, s = at(mean, u), at(sd, v)
    ends = intervals.ci_from_estimate(m, s / np.sqrt(n), level, n - 1)
    for bounds, end in zip(conversions.ci_of_mean_bounds(*mean, *sd, level, n, n - 1), ends, strict=True):
        assert holds(bounds, float(end), slack=1e-12)


@settings(max_examples=150, deadline=None)
@given(estimate=boxes(-3, 3), p=boxes(0.0001, 0.95, 0.04), level=LEVEL, u=SHARES, v=SHARES)
def test_boxes_of_an_interval_from_p(estimate, p, level, u, v):
    lower, upper = ci_and_p.ci_from_p_bounds(*estimate, *p, level)
    low, high = ci_and_p.ci_from_p(at(estimate, u), at(p, v), level)
    assert holds(lower, float(low), slack=1e-9) and holds(upper, float(high), slack=1e-9)
    at_corners = [ci_and_p.ci_from_p(e, q, level) for e in (*estimate, np.clip(0.0, *estimate)) for q in p]
    for bounds, ends in zip((lower, upper), np.array(at_corners).T, strict=True):
        assert np.array(bounds) == pytest.approx(np.array((ends.min(), ends.max())), rel=1e-9, abs=1e-12)


@settings(max_examples=150, deadline=None)
@given(low=boxes(-5, 5, 0.3), high=boxes(-5, 8, 0.3), level=LEVEL, u=SHARES, v=SHARES)
def test_boxes_of_p_from_an_interval(low, high, level, u, v):
    a, b = at(low, u), at(high, v)
    if a < b:
        assert holds(ci_and_p.p_from_ci_bounds(*low, *high, level), float(ci_and_p.p_from_ci(a, b, level)))


@given(
    estimate=st.floats(0.05, 20).filter(lambda x: abs(np.log(x)) > 0.01), p=st.floats(0.001, 0.9), level=LEVEL
)
def test_interval_and_p_of_a_ratio_invert_each_other(estimate, p, level):
    ends = ci_and_p.ci_from_p_ratio(estimate, p, level)
    assert np.sqrt(ends[0] * ends[1]) == pytest.approx(estimate, rel=1e-9)
    assert ci_and_p.p_from_ci_ratio(*ends, level) == pytest.approx(p, rel=1e-6)


def test_conversions_broadcast():
    assert conversions.sd_from_p([[1.0], [2.0]], [0.01, 0.02, 0.5], 10, 12).shape == (2, 3)
    assert isinstance(conversions.sd_from_se(1.2, 16), np.ndarray)
