"""The noncentral t against quadratures of 25 digits, scipy, and identities."""

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from mpmath import mp, mpf
from scipy import special, stats

from recheck.recompute import noncentral

HARD = (
    (100.0, 1.0), (-100.0, 1.0), (100.0, 1.5), (100.0, 1e6), (2611.28, 194.0), (3.0, 1.0), (0.5, 1.2), (5000.0, 3.0),
    (20.0, 4.0), (-7.5, 22.0),
)  # fmt: skip


def _true(t: float, df: float, delta: float) -> mpf:
    """P(T <= t) as the mean of Φ(t U - delta) over the chi distribution of U, piecewise."""
    with mp.workdps(25):
        t, df, delta = mpf(t), mpf(df), mpf(delta)
        scale = 2 * (df / 2) ** (df / 2) / mp.gamma(df / 2)
        steps = {delta / t + k / abs(t) for k in range(-10, 11, 2)}
        width = 1 / mp.sqrt(2 * df)
        steps |= {1 + k * width for k in range(-12, 13, 2)} | {mpf(0)}
        points = sorted(p for p in steps if p >= 0)
        return mp.quad(
            lambda u: scale * u ** (df - 1) * mp.exp(-df * u * u / 2) * mp.ncdf(t * u - delta), points
        )


@pytest.mark.parametrize(("t", "df"), HARD)
def test_cdf_and_root_against_mpmath(t, df):
    probability = 0.975 if df < 10 else 0.05
    delta = float(noncentral.noncentrality(t, df, probability))
    step = 1e-6 * max(1.0, abs(delta))
    at, beyond = _true(t, df, delta), _true(t, df, delta + step)
    assert abs(float((at - mpf(probability)) / (at - beyond) * step)) < 1e-8
    assert float(noncentral.noncentral_t_cdf(t, df, delta)) == pytest.approx(float(at), abs=1e-12)


@settings(max_examples=60, deadline=None)
@given(t=st.floats(-60, 60).map(lambda x: round(x, 2)), df=st.floats(1, 5000), shift=st.floats(-6, 6))
def test_cdf_against_scipy(t, df, shift):
    delta = t + shift * (1 + abs(t) / np.sqrt(2 * df))
    below = special.nctdtr(df, delta, t)
    # Version 1.17 has no value at t = -6, df = 1, delta = 9.7.
    assume(not np.isnan(below))
    assert noncentral.noncentral_t_cdf(t, df, delta) == pytest.approx(below, abs=1e-10)


def test_cdf_by_identities():
    # Owen's identity: with t = 0 the noncentral t is below 0 with probability Φ(-delta).
    assert noncentral.noncentral_t_cdf(0.0, 1.0, 1.2) == pytest.approx(stats.norm.cdf(-1.2), abs=1e-12)
    assert noncentral.noncentral_t_cdf(1.5, np.inf, 0.7) == pytest.approx(stats.norm.cdf(0.8), abs=1e-12)
    central = noncentral.noncentral_t_cdf([-2.0, 0.3, 9.0], 7.0, 0.0)
    assert central == pytest.approx(stats.t.cdf([-2.0, 0.3, 9.0], 7), abs=1e-12)


def test_root_inverts_the_cdf_over_a_wide_field():
    rng = np.random.default_rng(3)
    t = np.concatenate([rng.uniform(-8, 8, 800), rng.uniform(-150, 150, 200)])
    df = np.exp(rng.uniform(0, np.log(1e6), 1000))
    for probability in (0.995, 0.95, 0.5, 0.025, 1e-5):
        delta = noncentral.noncentrality(t, df, probability)
        assert noncentral.noncentral_t_cdf(t, df, delta) == pytest.approx(
            np.full(1000, probability), abs=1e-11
        )


def test_far_arguments_give_a_root_or_nan():
    # For t this large W is t |Z|, so delta is t times the quantile of |Z| with .025 below: .0313379…
    assert noncentral.noncentrality(1e8, 1.0, 0.975) == pytest.approx(
        1e8 * stats.halfnorm.ppf(0.025), rel=1e-8
    )
    assert np.isnan(noncentral.noncentrality(1e300, 5.0, 0.5))


def test_root_rises_with_t():
    """The proof of the bounds of d over an interval of t rests on it."""
    t = np.linspace(-30, 30, 301)
    for df in (1.0, 2.5, 40.0, 1e5):
        assert (np.diff(noncentral.noncentrality(t, df, 0.975)) > 0).all()


def test_where_there_is_no_root_and_how_arrays_broadcast():
    delta = noncentral.noncentrality(
        [1.0, 1.0, np.nan, 1.0, np.inf], [5.0, 5.0, 5.0, 0.4, 5.0], [0.0, 1.0, 0.5, 0.5, 0.5]
    )
    assert delta[:2].tolist() == [np.inf, -np.inf]
    assert np.isnan(delta[2:]).all()
    assert noncentral.noncentrality(1.5, np.inf, 0.025) == pytest.approx(1.5 + stats.norm.ppf(0.975))
    assert noncentral.noncentrality([[1.0], [2.0]], [5.0, 50.0, np.inf], 0.5).shape == (2, 3)
    assert noncentral.noncentral_t_cdf(1.0, 5.0, 0.0).shape == ()
    assert noncentral.noncentrality(np.empty(0), 5.0, 0.5).shape == (0,)
