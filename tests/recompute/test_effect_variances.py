"""Variances of effect sizes against published values, exact moments, a reference library, and samples drawn."""

import numpy as np
import pytest
from scipy import stats
from statsmodels.stats import meta_analysis

from recheck.recompute import conversions, effect_sizes, two_groups, variance_explained
from recheck.recompute import effect_variances as variances
from tests.reference import Reference, half_unit, rows

EFFECTS = {
    "mean_difference": lambda row: row.number("mean1") - row.number("mean2"),
    "d_s": lambda row: effect_sizes.cohens_d(*row.numbers("mean1", "sd1", "n1", "mean2", "sd2", "n2")),
    "g": lambda row: effect_sizes.hedges_g(*row.numbers("mean1", "sd1", "n1", "mean2", "sd2", "n2")),
    "g_approximate": lambda row: EFFECTS["d_s"](row) * _factor(row),
    "d_z": lambda row: effect_sizes.d_z(EFFECTS["mean_difference"](row), row.number("sd_difference")),
    "d_rm": lambda row: effect_sizes.d_rm(
        EFFECTS["mean_difference"](row), *row.numbers("sd_difference", "r")
    ),
    "g_rm_by_pairs": lambda row: EFFECTS["d_rm"](row) * _factor(row),
    "g_rm_by_scores": lambda row: EFFECTS["d_rm"](row) * _factor(row),
    "d_root_mean_square_sd": lambda row: effect_sizes.d_root_mean_square_sd(
        *row.numbers("mean1", "sd1", "mean2", "sd2")
    ),
}


def _factor(row: Reference) -> float:
    """The factor of the correction of g that a row uses."""
    df = row.number("n1") - 1 if row["effect"] == "g_rm_by_pairs" else sum(row.numbers("n1", "n2")) - 2
    exact, rough = effect_sizes.hedges_correction(df), effect_sizes.hedges_correction_approximate(df)
    return float(exact if row["effect"] == "g" else rough)


def _variance(row: Reference) -> float:
    value, n1, n2, r = row.numbers("value", "n1", "n2", "r")
    sd1, sd2, sd_difference = row.numbers("sd1", "sd2", "sd_difference")
    match row["variance_by"]:
        case "pooled_se":
            return float(two_groups.pooled_se(sd1, n1, sd2, n2) ** 2)
        case "paired_se":
            return float((sd1**2 + sd2**2 - 2 * r * sd1 * sd2) / n1)
        case "sd_difference":
            return sd_difference**2 / n1
        case "d_variance":
            return float(variances.d_variance(value, n1, n2))
        case "d_z_variance":
            return float(variances.d_z_variance(value, n1))
        case "d_rm_variance":
            return float(variances.d_rm_variance(value, r, n1))
        case "J2" if row["effect"] == "g":
            return float(variances.g_variance(value / _factor(row), n1, n2))
        case "J2" if row["effect"] == "g_approximate":
            return float(_factor(row) ** 2 * variances.d_variance(value / _factor(row), n1, n2))
        case "J2":
            return float(_factor(row) ** 2 * variances.d_rm_variance(value / _factor(row), r, n1))
    raise ValueError(row["variance_by"])


@pytest.mark.parametrize("row", rows("effect_variances"), ids=lambda row: row["label"])
def test_published_effects_and_variances(row: Reference):
    value = EFFECTS[row["effect"]](row)
    assert value == pytest.approx(row.number("value"), rel=1e-10)
    if row["printed"]:
        assert abs(value - row.number("printed")) <= half_unit(row["printed"])
    if row["variance_by"]:
        assert _variance(row) == pytest.approx(row.number("variance"), rel=1e-10)
    if row["variance_printed"]:
        assert abs(_variance(row) - row.number("variance_printed")) <= half_unit(row["variance_printed"])


@pytest.mark.parametrize(
    "row", [r for r in rows("r_effects") if r["quantity"].startswith("variance")], ids=lambda r: r["call"]
)
def test_variances_against_r(row: Reference):
    function = {
        "variance_unbiased": variances.g_variance_unbiased,
        "variance_exact": variances.d_variance_exact,
    }
    assert function[row["quantity"]](**_named(row)) == pytest.approx(row.number("value"), rel=1e-12)


def _named(row: Reference) -> dict[str, float]:
    given = row.given()
    return {
        ("delta" if row["quantity"] == "variance_exact" and name == "g" else name): x
        for name, x in given.items()
    }


@pytest.mark.parametrize(("n1", "n2", "delta"), [(6, 9, 0.4), (12, 12, -1.3), (40, 15, 0.0)])
def test_exact_and_unbiased_variance_by_the_moments_of_noncentral_t(n1, n2, delta):
    """scipy's moments of t give those of d = t sqrt(1/n1 + 1/n2) and of g = J d."""
    df, scale = n1 + n2 - 2, np.sqrt(1 / n1 + 1 / n2)
    t = stats.nct(df, delta / scale)
    mean, spread = t.stats("mv")
    assert variances.d_variance_exact(delta, n1, n2) == pytest.approx(spread * scale**2, rel=1e-9)
    factor = effect_sizes.hedges_correction(df)
    assert factor * mean * scale == pytest.approx(delta, abs=1e-9)
    # What is unbiased is right on average; the variance of g is linear in g².
    square = factor**2 * scale**2 * (spread + mean**2)
    expected = variances.g_variance_unbiased(np.sqrt(square), n1, n2)
    assert expected == pytest.approx(factor**2 * scale**2 * spread, rel=1e-9)


def test_revised_variance_against_statsmodels():
    g, variance = meta_analysis.effectsize_smd(103, 5.5, 50, 100, 4.5, 41)
    assert g == pytest.approx(
        float(effect_sizes.cohens_d(103, 5.5, 50, 100, 4.5, 41)) * (1 - 3 / (4 * 91 - 9))
    )
    assert variances.g_variance_revised(g, 50, 41) == pytest.approx(variance, rel=1e-12)


def test_variances_meet_as_samples_grow():
    """All formulas of one effect agree to first order in 1/n."""
    d, n1, n2 = 0.6, 40_000, 60_000
    same = variances.d_variance(d, n1, n2)
    for other in (variances.d_variance_by_df, variances.d_variance_exact, variances.g_variance_revised, variances.g_variance,
                  variances.g_variance_unbiased):  # fmt: skip
        assert other(d, n1, n2) == pytest.approx(float(same), rel=1e-4)
    assert np.isnan(variances.d_variance_exact(0.3, 2, 2))
    assert np.isnan(variances.fisher_z_variance(3))


def _drawn(rng, sd1=1.0, sd2=1.0, r=0.0, shift=0.8, n=150, times=6000):
    one = rng.standard_normal((times, n))
    two = r * one + np.sqrt(1 - r * r) * rng.standard_normal((times, n))
    return sd1 * one + shift, sd2 * two


def _close(found, drawn):
    # 6000 draws tell a variance to about 2% (one standard error).
    assert float(found) == pytest.approx(drawn.var(), rel=0.08)


def test_variances_of_two_groups_against_samples():
    one, two = _drawn(np.random.default_rng(5), 1.6, 1.0)
    s1, s2, D = one.std(1, ddof=1), two.std(1, ddof=1), one.mean(1) - two.mean(1)
    _close(variances.glass_delta_variance_unequal(0.8, 1.6, 150, 1.0, 150), D / s2)
    rms = np.sqrt((s1**2 + s2**2) / 2)
    _close(variances.d_average_variance(0.8 / np.sqrt(1.78), 1.6, 150, 1.0, 150), D / rms)
    one, two = _drawn(np.random.default_rng(6))
    _close(variances.glass_delta_variance(0.8, 150, 150), (one.mean(1) - two.mean(1)) / two.std(1, ddof=1))


def test_variances_of_pairs_against_samples():
    one, two = _drawn(np.random.default_rng(7), r=0.6)
    D, s1, s2 = one.mean(1) - two.mean(1), one.std(1, ddof=1), two.std(1, ddof=1)
    sd, r = (one - two).std(1, ddof=1), 0.6
    d_z = 0.8 / np.sqrt(2 * (1 - r))
    _close(variances.d_z_variance(d_z, 150), D / sd)
    _close(variances.d_z_variance_by_df(d_z, 150), D / sd)
    # The published formula of d_rm has its own square where that of d_z would be right, so it is a little small.
    assert variances.d_rm_variance(0.8, r, 150) < (D / sd * np.sqrt(2 * (1 - r))).var()
    _close(variances.d_change_variance(0.8, r, 150), D / s1)
    _close(variances.d_average_variance_paired(0.8, 1, 1, r, 150), D / np.sqrt((s1**2 + s2**2) / 2))


def test_variances_of_correlations_against_samples():
    one, two = _drawn(np.random.default_rng(8), r=0.5, n=100)
    r = np.array([np.corrcoef(a, b)[0, 1] for a, b in zip(one, two, strict=True)])
    _close(variances.r_variance(0.5, 100), r)
    _close(variances.fisher_z_variance(100), np.arctanh(r))
    _close(variances.r2_variance(0.25, 100, 1), r**2)
    ranks = [a.argsort(1).argsort(1) for a in (one, two)]
    rho = np.array([np.corrcoef(a, b)[0, 1] for a, b in zip(*ranks, strict=True)])
    # The population rho of r = .5 is .483 (Pearson 1907).
    _close(variances.fisher_z_variance_spearman(0.483, 100), np.arctanh(rho))


def test_variances_after_conversions():
    """The delta method by a numeric slope: var(f(x)) = f'(x)² var(x)."""
    step, variance = 1e-5, 0.04
    for function, found, x in (
        (lambda d: variance_explained.r_from_d(d, 20, 33), variances.r_variance_from_d(0.7, variance, 20, 33), 0.7),
        (variance_explained.d_from_r, variances.d_variance_from_r(0.4, variance), 0.4),
        (conversions.log_odds_ratio_from_d, variances.log_odds_ratio_variance_from_d(variance), 0.4),
        (conversions.d_from_log_odds_ratio, variances.d_variance_from_log_odds_ratio(variance), 0.4),
    ):  # fmt: skip
        slope = (function(x + step) - function(x - step)) / (2 * step)
        assert found == pytest.approx(float(slope**2 * variance), rel=1e-7)
