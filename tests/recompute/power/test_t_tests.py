"""Power of t tests against published tables, R, statsmodels and the noncentral t density itself."""

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import special
from statsmodels.stats.power import TTestIndPower, TTestPower

from recheck.recompute.power.normal import guenther_n, normal_n
from recheck.recompute.power.t_tests import (
    one_sample_t_detectable,
    one_sample_t_n,
    one_sample_t_power,
    t_power,
    two_sample_t_detectable,
    two_sample_t_n,
    two_sample_t_power,
)
from tests.reference import Reference, half_unit, rows

TABLE = rows("power")


def name(row: Reference) -> str:
    return row["label"]


def power_of(row: Reference, n1: float, *, far_tail: bool) -> float:
    d, alpha = row.numbers("d", "alpha")
    tails = int(row["tails"])
    if row["design"] == "two-sample":
        n2 = row.number("n2") if n1 == row.number("n1") else n1
        return float(two_sample_t_power(d, n1, n2, alpha, tails=tails, far_tail=far_tail))
    return float(one_sample_t_power(d, n1, alpha, tails=tails, far_tail=far_tail))


@pytest.mark.parametrize("row", TABLE, ids=name)
def test_published_power(row: Reference):
    if row.has("power"):
        assert power_of(row, row.number("n1"), far_tail=True) == pytest.approx(row.number("power"), rel=1e-8)
    if row.has("power_near_tail"):
        near = power_of(row, row.number("n1"), far_tail=False)
        assert near == pytest.approx(row.number("power_near_tail"), rel=1e-8)
    if row.has("printed_power") and row["agrees"] == "yes":
        powers = [power_of(row, row.number("n1"), far_tail=far) for far in (True, False)]
        assert any(abs(p - row.number("printed_power")) <= half_unit(row["printed_power"]) for p in powers)


@pytest.mark.parametrize("row", [row for row in TABLE if row.has("n")], ids=name)
def test_published_n(row: Reference):
    d, target, alpha = row.numbers("d", "target", "alpha")
    find = two_sample_t_n if row["design"] == "two-sample" else one_sample_t_n
    real = float(find(d, target, alpha, tails=int(row["tails"])))
    whole = float(find(d, target, alpha, tails=int(row["tails"]), whole=True))
    assert real == pytest.approx(row.number("n"), rel=1e-7)
    assert whole == row.number("whole_n")
    if row.has("power_at_whole_n"):
        assert power_of(row, whole, far_tail=True) == pytest.approx(row.number("power_at_whole_n"), rel=1e-8)
    # Cohen's entries are approximations: some are one short, none is more than that.
    if row["source"].startswith("Cohen"):
        assert whole - row.number("printed_n") == (0 if row["agrees"] == "yes" else 1)


@pytest.mark.parametrize(("d", "n"), [(0.1, 10), (0.5, 64), (1.2, 6), (2.5, 4), (0.02, 1000)])
@pytest.mark.parametrize("alpha", [0.05, 0.001])
def test_power_is_the_integral_of_the_noncentral_density(d: float, n: int, alpha: float):
    # T = (Z + delta) / U, so that the power is a mean over U² = S / df, S chi-square: by mpmath at 30 digits.
    df, delta = 2 * n - 2, d * (n / 2) ** 0.5
    with mpmath.workdps(30):
        half = mpmath.mpf(df) / 2

        def beyond(t: mpmath.mpf) -> mpmath.mpf:
            return mpmath.betainc(half, 0.5, 0, df / (df + t * t), regularized=True) - alpha

        critical = mpmath.findroot(beyond, float(special.stdtrit(df, 1 - alpha / 2)))

        def rejected(s: mpmath.mpf) -> mpmath.mpf:
            density = mpmath.exp(
                (half - 1) * mpmath.log(s) - s / 2 - half * mpmath.log(2) - mpmath.loggamma(half)
            )
            bound = critical * mpmath.sqrt(s / df)
            return density * (mpmath.ncdf(delta - bound) + mpmath.ncdf(-delta - bound))

        steps = {max(df + k * (2 * df) ** 0.5, 0.01) for k in (-3, -1, 0, 1, 3, 8, 60)}
        expected = float(mpmath.quad(rejected, [1e-30, *sorted(steps)]))
    assert float(two_sample_t_power(d, n, n, alpha)) == pytest.approx(expected, abs=1e-9)


@settings(max_examples=40, deadline=None)
@given(
    d=st.floats(0.1, 2),
    n=st.integers(3, 200),
    ratio=st.sampled_from((0.5, 1.0, 2.0)),
    alpha=st.sampled_from((0.01, 0.05)),
)
def test_power_matches_statsmodels(d: float, n: int, ratio: float, alpha: float):
    for tails, alternative in ((2, "two-sided"), (1, "larger")):
        two = TTestIndPower().power(d, n, alpha, ratio=ratio, alternative=alternative)
        one = TTestPower().power(d, n, alpha, alternative=alternative)
        # Near 1 its two-sided power is nan, for want of the far tail.
        for other, ours in (
            (two, two_sample_t_power(d, n, n * ratio, alpha, tails=tails)), (one, one_sample_t_power(d, n, alpha, tails=tails))
        ):  # fmt: skip
            assert float(ours) == pytest.approx(other, abs=1e-8) if np.isfinite(other) else ours > 0.99


@settings(max_examples=30, deadline=None)
@given(
    d=st.floats(0.05, 3), power=st.floats(0.3, 0.99), ratio=st.floats(0.3, 4), tails=st.sampled_from((1, 2))
)
def test_n_and_effect_lead_back_to_the_power(d: float, power: float, ratio: float, tails: int):
    n = two_sample_t_n(d, power, 0.05, ratio=ratio, tails=tails)
    reached = two_sample_t_power(d, n, ratio * n, 0.05, tails=tails)
    assert reached >= power - 1e-9
    if n > 3 / (1 + ratio) * 1.001 and n > 2.001:
        assert float(reached) == pytest.approx(power, abs=1e-8)
        back = two_sample_t_detectable(n, ratio * n, power, 0.05, tails=tails)
        assert float(back) == pytest.approx(d, rel=1e-6)
    whole = two_sample_t_n(d, power, 0.05, tails=tails, whole=True)
    assert two_sample_t_power(d, whole, whole, 0.05, tails=tails) >= power - 1e-12
    assert whole == 2 or two_sample_t_power(d, whole - 1, whole - 1, 0.05, tails=tails) < power


def test_arrays_broadcast_and_what_is_no_test_is_nan():
    found = two_sample_t_n([[0.2], [0.5], [0.8]], [0.8, 0.9], whole=True)
    # Exact noncentral t: Cohen (1988), Table 2.4.1, has 393, 526, 64, 85, 26, 34.
    assert found.tolist() == [[394, 527], [64, 86], [26, 34]]
    assert np.isnan(two_sample_t_n(0.0, 0.8)) and np.isnan(t_power(1.0, 0))
    assert one_sample_t_power(0.5, [1, 34]).shape == (2,)
    assert np.isnan(one_sample_t_power(0.5, 1))
    assert float(two_sample_t_power(-0.5, 64, 64)) == float(two_sample_t_power(0.5, 64, 64))
    assert float(two_sample_t_power(-0.5, 64, 64, tails=1)) < 0.001


def test_a_far_tail_that_the_library_cannot_give_is_0_not_nan():
    assert np.all(np.isfinite(t_power(np.linspace(0, 12, 50)[:, None], [1, 2, 5, 40, 1e5], 1e-4)))


def test_facts_of_the_trade_for_twelve_a_group():
    # Common practice, no source: with 12 a group a d of 0.7 is not significant, and 80% power takes 33 to 34 a group.
    t = 0.7 * (12 / 2) ** 0.5
    assert t < 2.0739  # the two-tailed 5% point of t with 22 df
    assert float(two_sample_t_power(0.7, 33, 33)) == pytest.approx(0.7997, abs=5e-5)
    assert float(two_sample_t_n(0.7, 0.8, whole=True)) == 34
    # Power tables give n per group, and one-tailed ones are smaller.
    assert float(two_sample_t_n(0.7, 0.8, tails=1, whole=True)) == 26


def test_normal_approximation_and_its_correction():
    # 2 (1.959964 + 0.841621)² / 0.5² and 1.959964² / 4 more.
    assert float(normal_n(0.5, 0.8)) == pytest.approx(62.79104, abs=1e-5)
    assert float(guenther_n(0.5, 0.8)) == pytest.approx(62.79104 + 1.959964**2 / 4, abs=1e-5)
    exact = two_sample_t_n([0.3, 0.5, 0.8], 0.9)
    assert np.all(np.abs(guenther_n([0.3, 0.5, 0.8], 0.9) - exact) < 0.05)


def test_detectable_effect_of_one_sample():
    n = one_sample_t_n(0.4, 0.9, 0.01)
    assert float(one_sample_t_detectable(n, 0.9, 0.01)) == pytest.approx(0.4, rel=1e-7)
