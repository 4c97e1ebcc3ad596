"""Power of F, χ², r and two proportions against R, statsmodels, Cohen's tables and direct quadrature."""

from collections.abc import Callable

import mpmath
import numpy as np
import pytest
from scipy import integrate, special, stats
from statsmodels.stats.power import FTestAnovaPower, GofChisquarePower, NormalIndPower

from recheck.recompute.power import chi2_tests, correlations, f_tests, normal, proportions, t_tests
from tests.reference import Reference, rows

FUNCTIONS: dict[str, Callable[..., object]] = {
    name: function
    for module in (chi2_tests, correlations, f_tests, normal, proportions, t_tests)
    for name, function in vars(module).items()
    if callable(function)
}


def called(row: Reference, **more: float) -> float:
    inputs: dict[str, float] = {**row.given(), **more}
    options = {key: bool(inputs.pop(key)) for key in ("far_tail",) if key in inputs}
    if "tails" in inputs:
        options["tails"] = int(inputs.pop("tails"))
    return float(FUNCTIONS[row["function"]](**inputs, **options))


@pytest.mark.parametrize("row", rows("r_power"), ids=lambda row: row["call"])
def test_power_as_r_computes_it(row: Reference):
    # R's own search for n of power.anova.test stops after four or five digits.
    loose = "anova" in row["call"] and row["function"].endswith("_n")
    assert called(row) == pytest.approx(row.number("value"), rel=1e-5 if loose else 1e-7)


@pytest.mark.parametrize("row", rows("power_tables"), ids=lambda row: f"{row['function']} {row['inputs']}")
def test_tables_of_the_primer(row: Reference):
    # Cohen's tables rest on approximations: an n differs by 1 or by 1%, that of f² by two or three cases.
    printed = row.number("printed")
    slack = {"fixed_effects_n": 4, "r_n": 2}.get(row["function"], 1)
    assert called(row, power=0.8) == pytest.approx(printed, abs=slack + 0.6)


@pytest.mark.parametrize("k", [2, 3, 5])
@pytest.mark.parametrize("f", [0.1, 0.25, 0.6])
def test_anova_matches_statsmodels(k: int, f: float):
    for n in (5, 20, 90):
        other = FTestAnovaPower().power(f, n * k, 0.05, k_groups=k)
        assert float(f_tests.anova_power(f, n, k)) == pytest.approx(other, abs=1e-9)


def test_two_groups_are_a_t_test():
    d = np.array([0.2, 0.5, 1.0])
    assert f_tests.anova_power(d / 2, 30, 2) == pytest.approx(t_tests.two_sample_t_power(d, 30, 30), rel=1e-8)
    assert (
        f_tests.anova_n(d / 2, 0.8, 2, whole=True).tolist()
        == t_tests.two_sample_t_n(d, 0.8, whole=True).tolist()
    )


def test_three_groups_with_power_95():
    # Faul, Erdfelder, Lang & Buchner (2007), Behav. Res. Methods 39:175-191 (from memory): 252 cases for f = .25, three groups.
    each = float(f_tests.anova_n(0.25, 0.95, 3, whole=True))
    assert 3 * each == 252
    assert float(f_tests.fixed_effects_n(0.0625, 0.95, 2, 3, whole=True)) == 251


@pytest.mark.parametrize(("shift", "df1", "df2"), [(0.5, 1, 10), (9.75, 2, 62), (30.0, 6, 500)])
def test_noncentral_f_is_a_poisson_mixture(shift: float, df1: int, df2: int):
    critical = special.fdtri(df1, df2, 0.95)
    half = mpmath.mpf(shift) / 2

    def term(j: int) -> mpmath.mpf:
        share = mpmath.betainc(
            df1 / 2 + j, df2 / 2, 0, df1 * critical / (df1 * critical + df2), regularized=True
        )
        return mpmath.exp(-half) * half**j / mpmath.factorial(j) * share

    below = sum(term(j) for j in range(150))
    assert float(f_tests.f_power(shift, df1, df2)) == pytest.approx(float(1 - below), abs=1e-9)


def test_effects_lead_back():
    N = f_tests.fixed_effects_n(0.08, 0.85, 3, 8)
    assert float(f_tests.fixed_effects_detectable(N, 0.85, 3, 8)) == pytest.approx(0.08, rel=1e-7)
    N = chi2_tests.chi2_n(0.21, 0.9, 4, 0.01)
    assert float(chi2_tests.chi2_detectable(N, 0.9, 4, 0.01)) == pytest.approx(0.21, rel=1e-7)
    for method in ("exact", "fixed", "fisher"):
        n = correlations.r_n(0.24, 0.8, method=method)
        assert float(correlations.r_detectable(n, 0.8, method=method)) == pytest.approx(0.24, rel=1e-6)


def test_chi2_matches_statsmodels():
    for w, N, df in ((0.1, 100, 1), (0.3, 88, 1), (0.5, 40, 5)):
        other = GofChisquarePower().power(w, N, 0.05, n_bins=df + 1)
        assert float(chi2_tests.chi2_power(w, N, df)) == pytest.approx(other, abs=1e-9)


def hotelling(rho: float, n: int) -> Callable[[float], float]:
    """The density of r, Hotelling (1953), JRSS B 15:193-232, formula 25 (from memory); it integrates to 1 below."""
    log = np.log(n - 2) + special.gammaln(n - 1) - 0.5 * np.log(2 * np.pi) - special.gammaln(n - 0.5)

    def density(r: float) -> float:
        scale = (
            (n - 1) / 2 * np.log1p(-rho * rho)
            + (n - 4) / 2 * np.log1p(-r * r)
            - (n - 1.5) * np.log1p(-rho * r)
        )
        return float(np.exp(log + scale) * special.hyp2f1(0.5, 0.5, n - 0.5, (1 + rho * r) / 2))

    return density


@pytest.mark.parametrize(("rho", "n"), [(0.0, 8), (0.3, 84), (0.5, 20), (0.8, 6), (0.1, 500)])
def test_exact_power_of_r_is_the_integral_of_its_density(rho: float, n: int):
    density = hotelling(rho, n)
    t = special.stdtrit(n - 2, 0.975)
    critical = t / np.sqrt(n - 2 + t * t)
    total = integrate.quad(density, -1, 1, epsabs=1e-12, limit=200, points=[rho])[0]
    inside = integrate.quad(density, -critical, critical, epsabs=1e-12, limit=200)[0]
    assert total == pytest.approx(1, abs=1e-8)
    assert float(correlations.exact_r_power(rho, n)) == pytest.approx(1 - inside, abs=1e-8)


def test_n_for_a_correlation_of_30():
    # 84 by the exact distribution and 85 by Fisher's z, as tables and programs print (common practice, no source).
    assert float(correlations.r_n(0.3, 0.8, whole=True)) == 84
    assert float(correlations.r_n(0.3, 0.8, method="fisher", whole=True)) == 85
    # The sum of two normal quantiles over atanh(r), squared, plus 3.
    assert float(correlations.r_n(0.3, 0.8, method="fisher", far_tail=False)) == pytest.approx(
        ((1.959963985 + 0.841621234) / np.arctanh(0.3)) ** 2 + 3, abs=1e-5
    )


def test_proportions_by_arcsine_match_statsmodels():
    h = float(proportions.cohens_h(0.5, 0.3))
    for n1, n2 in ((40, 40), (30, 90)):
        other = NormalIndPower().power(h, n1, 0.05, ratio=n2 / n1)
        assert float(proportions.arcsine_power(h, n1, n2)) == pytest.approx(other, abs=1e-9)
    n = proportions.arcsine_n(h, 0.8)
    assert float(proportions.arcsine_power(h, n, n, far_tail=False)) == pytest.approx(0.8, abs=1e-9)


def test_proportions_with_continuity_correction():
    # Fleiss (1981), Table A.3 (from memory): 30% against 50%, two-sided 5%, power 80%: 93 without, 103 with correction.
    plain = proportions.proportions_n(0.3, 0.5, 0.8)
    assert np.ceil(plain) == 93
    assert np.ceil(proportions.continuity_corrected_n(plain, 0.2)) == 103


@pytest.mark.parametrize("spread", ["mixed", "unpooled", "pooled"])
def test_power_of_proportions_leads_back(spread: proportions.Spread):
    n = proportions.proportions_n(0.2, 0.35, 0.9, ratio=2, spread=spread)
    power = proportions.proportions_power(0.2, 0.35, n, 2 * n, spread=spread)
    assert float(power) == pytest.approx(0.9, abs=1e-9)


def test_exact_binomial_power_lies_between_the_approximations():
    # The power of Pearson's χ² test by adding up all outcomes: no approximation of ours is far from it.
    n, p1, p2 = 93, 0.3, 0.5
    x, y = np.meshgrid(np.arange(n + 1), np.arange(n + 1))
    mean = (x + y) / (2 * n)
    with np.errstate(divide="ignore", invalid="ignore"):
        z = np.abs(x - y) / n / np.sqrt(2 * mean * (1 - mean) / n)
    weight = stats.binom.pmf(x, n, p1) * stats.binom.pmf(y, n, p2)
    exact = float(weight[np.nan_to_num(z) > 1.959964].sum())
    assert float(proportions.proportions_power(p1, p2, n, n)) == pytest.approx(exact, abs=0.02)


def test_z_of_nothing_is_alpha():
    assert float(normal.z_power(0.0, 0.05)) == pytest.approx(0.05, rel=1e-12)
    assert float(normal.z_power(0.0, 0.05, far_tail=False)) == pytest.approx(0.025, rel=1e-12)


@pytest.mark.parametrize(("rho", "n"), [(0.3, 30), (-0.3, 30), (0.05, 4000), (0.9, 6)])
def test_approximate_powers_of_r(rho: float, n: int):
    """The fixed predictor by scipy's noncentral t, Fisher's z by its normal distribution; both near the exact one for n of 30 and more."""
    critical, shift = stats.t.isf(0.025, n - 2), rho / np.sqrt(1 - rho**2) * np.sqrt(n)
    fixed = stats.nct.sf(critical, n - 2, shift) + stats.nct.cdf(-critical, n - 2, shift)
    assert float(correlations.fixed_r_power(rho, n)) == pytest.approx(fixed, abs=1e-9)
    z = abs(np.arctanh(rho)) * np.sqrt(n - 3)
    fisher = stats.norm.sf(1.959963985, z) + stats.norm.cdf(-1.959963985, z)
    assert float(correlations.fisher_r_power(rho, n)) == pytest.approx(fisher, abs=1e-9)
    exact = float(correlations.exact_r_power(rho, n))
    assert n < 30 or (fixed, fisher) == pytest.approx((exact, exact), abs=0.02)


def test_power_of_some_predictors_of_a_regression():
    # f² = 0.15, N = 77, three of three predictors: power .80 (Cohen's table; 77 as programs print, common practice, no source).
    power = float(f_tests.fixed_effects_power(0.15, 77, 3, 4))
    assert 0.8 <= power < 0.81
    assert float(f_tests.fixed_effects_power(0.15, 76, 3, 4)) < 0.8
    assert power == pytest.approx(stats.ncf.sf(stats.f.isf(0.05, 3, 73), 3, 73, 0.15 * 77), abs=1e-9)


def test_shift_and_n_by_the_normal_quantiles():
    shift = stats.norm.ppf(0.9) + stats.norm.ppf(0.975)
    assert float(normal.z_shift(0.9)) == pytest.approx(shift, rel=1e-12)
    assert float(normal.normal_n_one_sample(0.4, 0.9)) == pytest.approx((shift / 0.4) ** 2, rel=1e-12)
    assert 2 * normal.normal_n_one_sample(0.4, 0.9) == pytest.approx(
        float(normal.normal_n(0.4, 0.9)), rel=1e-12
    )
    assert float(normal.z_shift(0.01)) == 0
