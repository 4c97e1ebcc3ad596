"""Confidence intervals against published ones, scipy, and searches over boxes."""

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy import stats

from recheck.recompute import intervals, noncentral, tails, two_groups
from tests.recompute.boxes import SHARES, at, holds
from tests.recompute.boxes import intervals as boxes
from tests.reference import Reference, half_unit, rows

LEVEL = st.sampled_from((0.9, 0.95, 0.99))


@pytest.mark.parametrize("row", rows("two_sample_t"), ids=lambda row: row["label"])
def test_published_intervals_of_a_mean_difference(row: Reference):
    m1, s1, n1, m2, s2, n2 = row.numbers("mean1", "sd1", "n1", "mean2", "sd2", "n2")
    for kind, se, df in (
        ("pooled", two_groups.pooled_se(s1, n1, s2, n2), n1 + n2 - 2),
        ("welch", two_groups.welch_se(s1, n1, s2, n2), row.number("df_welch")),
    ):
        ends = row.numbers(f"ci_low_{kind}", f"ci_high_{kind}")
        assert intervals.ci_from_estimate(m1 - m2, se, 0.95, df) == pytest.approx(ends, rel=1e-10)
        assert intervals.se_from_ci(*ends, 0.95, df) == pytest.approx(float(se), rel=1e-10)
        t = intervals.t_from_ci(*ends, 0.95, df)
        assert t == pytest.approx(row.number(f"t_{kind}"), rel=1e-9)
        assert tails.t_two_sided(t, df) == pytest.approx(row.number(f"p_{kind}"), rel=1e-7)


@pytest.mark.parametrize("row", rows("one_sample_paired_t"), ids=lambda row: row["label"])
def test_published_intervals_of_one_mean(row: Reference):
    mean, spread, n, df = row.numbers("mean_diff", "sd_diff", "n", "df")
    ends = intervals.ci_from_estimate(mean, spread / np.sqrt(n), 0.95, df)
    assert ends == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-9)


def _converted(row: Reference) -> float:
    """The output of one conversion, by the exact quantiles."""
    given, output, ratio = row.given(), row["output"], row["kind"].endswith("_ratio")
    level, value = given.get("level", 0.95), {}
    match row["kind"].removesuffix("_ratio"):
        case "p_to_ci":
            estimate = np.log(given["est"]) if ratio else given["est"]
            value["z"] = tails.z_quantile(given["p"] / 2)
            value["se"] = value["se_log"] = abs(estimate / value["z"])
            ends = intervals.ci_from_estimate(estimate, value["se"], level, np.inf)
            value["ci_low"], value["ci_high"] = np.exp(ends) if ratio else ends
        case "ci_to_p":
            low, high = np.log(given["ci_low"]), np.log(given["ci_high"])
            value["se_log"] = intervals.se_from_ci(low, high, level, np.inf)
            value["z"] = abs(np.log(given["est"])) / value["se_log"]
            value["p"] = tails.z_two_sided(value["z"])
        case "ci_to_sd":
            value["divisor"] = 2 * intervals.critical_t(level, given["n"] - 1)
            se = intervals.se_from_ci(given["ci_low"], given["ci_high"], level, given["n"] - 1)
            value["sd"] = se * np.sqrt(given["n"])
        case "p_to_sd":
            value["t"] = tails.t_quantile(given["p"] / 2, given["n1"] + given["n2"] - 2)
            value["se"] = given["est"] / value["t"]
            value["sd"] = value["se"] / np.sqrt(1 / given["n1"] + 1 / given["n2"])
        case "multiplier":
            value["divisor"] = 2 * intervals.critical_t(level, np.inf)
        case "mean_sd_to_ci":
            value["se"] = given["sd"] / np.sqrt(given["n"])
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
    return float(value[output])


@pytest.mark.parametrize(
    "row",
    [r for r in rows("conversions") if r["kind"] != "sd_to_r"],
    ids=lambda r: f"{r['label']}: {r['output']}",
)
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


@pytest.mark.parametrize("row", rows("correlations"), ids=lambda row: row["label"])
def test_published_correlations(row: Reference):
    r, n, df = row.numbers("r", "n", "df")
    # r as printed to 17 digits: 1 - r keeps fewer of them near 1.
    assert intervals.r_ci(r, n, 0.95) == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-10)
    assert tails.r_two_sided(r, df) == pytest.approx(row.number("p"), rel=1e-9)


@settings(max_examples=150, deadline=None)
@given(low=boxes(-5, 5, 0.3), high=boxes(-5, 8, 0.3), level=LEVEL, df=st.integers(1, 200), u=SHARES, v=SHARES)
def test_t_from_ci_bounds(low, high, level, df, u, v):
    box = intervals.t_from_ci_bounds(*low, *high, level, df)
    a, b = at(low, u), at(high, v)
    if a < b:
        assert holds(box, float(intervals.t_from_ci(a, b, level, df)))
    if low[1] < high[0]:
        corners = [float(intervals.t_from_ci(a, b, level, df)) for a in low for b in high]
        assert box == pytest.approx((min(corners), max(corners)), rel=1e-12)


def test_t_from_ci_bounds_where_the_ends_may_meet():
    low, high = intervals.t_from_ci_bounds(1.0, 2.0, 1.5, 3.0, 0.95, 10)
    assert high == np.inf
    assert low == pytest.approx(float(intervals.t_from_ci(1.0, 3.0, 0.95, 10)))
    low, high = intervals.t_from_ci_bounds(-0.1, 0.1, -0.1, 0.1, 0.95, 10)
    assert (low, high) == (-np.inf, np.inf)
    assert np.isnan(intervals.t_from_ci_bounds(2.0, 3.0, 1.0, 1.5, 0.95, 10)).all()


@settings(max_examples=60, deadline=None)
@given(t=st.floats(-60, 60).map(lambda x: round(x, 2)), df=st.floats(1, 5000), shift=st.floats(-6, 6))
def test_noncentral_t_against_scipy(t, df, shift):
    delta = t + shift * (1 + abs(t) / np.sqrt(2 * df))
    assert noncentral.noncentral_t_cdf(t, df, delta) == pytest.approx(_scipy(t, df, delta), abs=2e-9)


def _scipy(t, df, delta):
    """The library's P, where it has one: version 1.17 has none at t = -6, df = 1, delta = 9.7."""
    below = stats.nct.cdf(t, df, float(delta))
    assume(not np.isnan(below))
    return below


def test_noncentral_t_of_a_published_table():
    # Owen's identity: with df = 1 and t = 0 the noncentral t is below 0 with probability Φ(-delta).
    assert noncentral.noncentral_t_cdf(0.0, 1.0, 1.2) == pytest.approx(stats.norm.cdf(-1.2), abs=1e-10)
    assert noncentral.noncentral_t_cdf(1.5, np.inf, 0.7) == pytest.approx(stats.norm.cdf(0.8), abs=1e-12)
    central = noncentral.noncentral_t_cdf([-2.0, 0.3, 9.0], 7.0, 0.0)
    assert central == pytest.approx(stats.t.cdf([-2.0, 0.3, 9.0], 7), abs=1e-10)


@settings(max_examples=25, deadline=None)
@given(t=st.floats(-40, 40), df=st.floats(1, 500), level=LEVEL)
def test_noncentral_interval_inverts_the_tests(t, df, level):
    low, high = intervals.noncentral_t_ci(t, df, level)
    assert low < high
    assert _scipy(t, df, low) == pytest.approx((1 + level) / 2, abs=1e-7)
    assert _scipy(t, df, high) == pytest.approx((1 - level) / 2, abs=1e-7)


def test_noncentral_interval_of_a_huge_t():
    # NIST heat flow against 5: t = 2611, df = 194; for df this large delta is about t (1 ∓ z / sqrt(2 df)).
    low, high = intervals.noncentral_t_ci(2611.2838, 194.0, 0.95)
    rough = 2611.2838 * (1 + np.array([-1, 1]) * 1.96 / np.sqrt(388))
    assert np.allclose([low, high], rough, rtol=0.002)


def test_intervals_broadcast():
    low, high = intervals.noncentral_t_ci(np.array([[1.0], [2.0]]), np.array([5.0, 50.0, np.inf]), 0.95)
    assert low.shape == high.shape == (2, 3)
    assert intervals.t_from_ci_bounds([1, 2], [1.1, 2.1], 3, 3.1, 0.95, 20)[0].shape == (2,)
    assert isinstance(intervals.r_ci(0.3, 20)[0], np.ndarray)
