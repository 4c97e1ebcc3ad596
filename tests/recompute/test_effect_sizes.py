"""Effect sizes against published values, and d over boxes."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mpmath import mp, mpf

from recheck.recompute import effect_bounds, effect_intervals, effect_sizes, two_groups, variance_explained
from tests.recompute.boxes import SHARES, at, holds
from tests.recompute.boxes import intervals as boxes
from tests.reference import Reference, half_unit, rows

GROUPS = ("mean1", "sd1", "n1", "mean2", "sd2", "n2")
FORMULAS = {
    "d_s": lambda row: effect_sizes.cohens_d(*row.numbers(*GROUPS)),
    "g": lambda row: effect_sizes.hedges_g(*row.numbers(*GROUPS)),
    "g_approximate": lambda row: (
        effect_sizes.cohens_d(*row.numbers(*GROUPS))
        * effect_sizes.hedges_correction_approximate(sum(row.numbers("n1", "n2")) - 2)
    ),
    "J": lambda row: effect_sizes.hedges_correction(row.number("df1")),
    "glass_delta": lambda row: effect_sizes.glass_delta(*row.numbers("mean1", "mean2", "sd2")),
    "d_average_sd": lambda row: effect_sizes.d_average_sd(*row.numbers("mean1", "sd1", "mean2", "sd2")),
    "d_root_mean_square_sd": lambda row: (
        effect_sizes.d_root_mean_square_sd(*row.numbers("mean1", "sd1", "mean2", "sd2"))
    ),
    "d_z": lambda row: effect_sizes.d_z_from_t(*row.numbers("t", "n1")),
    "g_z": lambda row: effect_sizes.d_z_from_t(*row.numbers("t", "n1")) * effect_sizes.hedges_correction(row.number("n1") - 1),
    "r_pb": lambda row: variance_explained.r_from_t(*row.numbers("t", "df1")),
    "partial_eta2": lambda row: variance_explained.partial_eta2_from_F(*row.numbers("F", "df1", "df2")),
    "omega2": lambda row: variance_explained.omega2_from_F(
        *row.numbers("F", "df1", "df2"), sum(row.numbers("df1", "df2")) + 1
    ),
}  # fmt: skip
MEAN, SD, N = boxes(-9, 9, 0.5), boxes(0.05, 9, 0.5), st.integers(2, 40)
SINGLE = {
    "pooled": lambda a, b, n, c, d, m: effect_sizes.cohens_d(a, b, n, c, d, m),
    "sd1": lambda a, b, n, c, d, m: effect_sizes.glass_delta(a, c, b),
    "sd2": lambda a, b, n, c, d, m: effect_sizes.glass_delta(a, c, d),
    "mean": lambda a, b, n, c, d, m: effect_sizes.d_average_sd(a, b, c, d),
    "rms": lambda a, b, n, c, d, m: effect_sizes.d_root_mean_square_sd(a, b, c, d),
    "population": lambda a, b, n, c, d, m: effect_sizes.d_population_sd(a, b, n, c, d, m),
    "welch-average": lambda a, b, n, c, d, m: effect_sizes.d_from_t(
        two_groups.t_welch(a, b, n, c, d, m), n, m
    ),
}


@pytest.mark.parametrize("row", rows("effect_sizes"), ids=lambda row: row["label"])
def test_published_effect_sizes(row: Reference):
    value = FORMULAS[row["effect"]](row)
    assert value == pytest.approx(row.number("value"), rel=1e-11)
    if row["printed"]:
        assert abs(value - row.number("printed")) <= half_unit(row["printed"])


@pytest.mark.parametrize("row", rows("two_sample_t"), ids=lambda row: row["label"])
def test_published_d_and_g_of_two_samples(row: Reference):
    assert effect_sizes.cohens_d(*row.numbers(*GROUPS)) == pytest.approx(row.number("d_s"), rel=1e-12)
    assert effect_sizes.hedges_g(*row.numbers(*GROUPS)) == pytest.approx(row.number("g"), rel=1e-12)
    from_t = effect_sizes.d_from_t(*row.numbers("t_pooled", "n1", "n2"))
    assert from_t == pytest.approx(row.number("d_s"), rel=1e-12)


@pytest.mark.parametrize(
    "row", [r for r in rows("effect_sizes") if r["ci_low"]], ids=lambda row: row["label"]
)
def test_published_noncentral_intervals(row: Reference):
    t, df, level = row.numbers("t", "df1", "ci_level")
    scale = 1 / np.sqrt(row.number("n1"))
    if row["effect"] in ("d_s", "g"):
        n1, n2 = row.numbers("n1", "n2")
        t, df = two_groups.t_pooled(*row.numbers(*GROUPS)), n1 + n2 - 2
        scale = np.sqrt(1 / n1 + 1 / n2)
    elif np.isnan(df):
        df = row.number("n1") - 1
    if row["effect"].startswith("g"):
        scale *= effect_sizes.hedges_correction(df)
    low, high = effect_intervals.noncentral_t_ci(t, df, level)
    # Limits that come from R packages are good to about six digits.
    assert (low * scale, high * scale) == pytest.approx(row.numbers("ci_low", "ci_high"), rel=1e-6, abs=1e-7)


@pytest.mark.parametrize("df", (1.001, 1.5, 2, 10, 50.5, 326, 1e5, 1e9))
def test_hedges_correction_against_mpmath(df):
    with mp.workdps(40):
        m = mpf(df)
        true = mp.exp(mp.loggamma(m / 2) - mp.loggamma((m - 1) / 2)) / mp.sqrt(m / 2)
        assert abs(mpf(float(effect_sizes.hedges_correction(df))) / true - 1) < 1e-12


def test_hedges_correction_where_it_is_not_defined_and_at_its_limit():
    values = effect_sizes.hedges_correction([0.5, 1.0, np.nan, np.inf])
    assert np.isnan(values[:3]).all()
    assert values[3] == 1


def test_relations_between_effects():
    """Identities: the rough d is exact for equal groups, f² = eta² / (1 - eta²), phi = V of a 2 x 2 table."""
    t = effect_sizes.d_from_t(2.4, 15, 15)
    assert effect_sizes.d_rough_total(2.4, 30) == pytest.approx(float(t), rel=1e-14)
    assert effect_sizes.d_rough(2.4, 28) > t
    eta2 = variance_explained.partial_eta2_from_F(4.2, 2, 57)
    assert variance_explained.f_from_F(4.2, 2, 57) ** 2 == pytest.approx(float(eta2 / (1 - eta2)), rel=1e-14)
    # Olejnik & Algina (2003), Psychological Methods 8:434-447: omega² < epsilon² < eta² for F > 1.
    assert (
        variance_explained.omega2_from_F(4.2, 2, 57, 60)
        < variance_explained.epsilon2_from_F(4.2, 2, 57)
        < eta2
    )
    assert (
        variance_explained.phi_from_chi2(5.0, 80)
        == variance_explained.cramers_v(5.0, 80, 2)
        == pytest.approx(0.25)
    )
    assert variance_explained.r_from_t(-3.0, 16) == pytest.approx(-0.6)


@settings(max_examples=120, deadline=None)
@given(
    m1=MEAN, s1=SD, n1=N, m2=MEAN, s2=SD, n2=N,
    name=st.sampled_from(tuple(effect_bounds.DENOMINATORS)), shares=st.tuples(*[SHARES] * 4),
)  # fmt: skip
def test_d_bounds(m1, s1, n1, m2, s2, n2, name, shares):
    low, high = effect_bounds.d_bounds(*m1, *s1, n1, *m2, *s2, n2, denominator=name)
    a, b, c, d = (at(x, share) for x, share in zip((m1, s1, m2, s2), shares, strict=True))
    assert holds((low, high), float(SINGLE[name](a, b, n1, c, d, n2)))
    a, b, c, d = np.meshgrid(m1, s1, m2, s2)
    corners = SINGLE[name](a, b, n1, c, d, n2)
    assert (low, high) == pytest.approx((corners.min(), corners.max()), rel=1e-12)


def test_d_bounds_of_a_spread_that_may_be_zero():
    low, high = effect_bounds.d_bounds(5, 5.1, 0, 0.05, 10, 4, 4.1, 0, 0.05, 10)
    assert high == np.inf
    assert low == pytest.approx(18)
    assert effect_bounds.d_bounds([5, 6], [5.1, 6.1], 1, 1, 10, 4, 4.1, 1, 1, 10, "sd1")[0].shape == (2,)
