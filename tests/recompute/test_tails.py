"""Tails against mpmath, the published tables and each other."""

import numpy as np
import pytest
from mpmath import mp, mpf

from recheck.recompute import tails
from tests.recompute import exact
from tests.reference import Reference, half_unit, rows

T_DF = (0.05, 0.3, 0.5, 0.97, 1, 1.37, 2, 3, 7.7, 22, 30, 55.309, 326, 2955.1, 1e4, 1e6, 3.3e7, 1e10)
T = np.r_[0, 10.0 ** np.arange(-9, 0), 0.4, 1, 1.96, 3.3, 8, 15, 26, 37, 50, 1e3, 1e5, 1e10, 1e60, 1e149]
F_DF = (0.1, 0.7, 1, 1.37, 2, 4.6, 8, 11, 32, 100, 707.5, 1e4, 1e6)
RATIOS = (1e-16, 1e-6, 0.02, 0.6, 1, 1.06, 1.4, 3, 10, 25, 60, 1e3, 1e7, 1e30)
AREA = {
    "t": lambda row, x: tails.t_tail(x, row.number("df1")),
    "z": lambda row, x: tails.z_tail(x),
    "r": lambda row, x: tails.r_tail(x, row.number("df1")),
    "chi2": lambda row, x: tails.chi2_tail(x, row.number("df1")),
    "F": lambda row, x: tails.f_tail(x, *row.numbers("df1", "df2")),
}


def error(value: float, true: mpf) -> float:
    """Relative error; 0 where the true value is below double range."""
    return 0.0 if true < mpf("1e-300") else abs(float(mpf(float(value)) / true - 1))


@pytest.mark.parametrize("df", T_DF)
def test_t_tail_keeps_twelve_digits_down_to_1e_300(df):
    assert max(error(tails.t_tail(t, df), exact.t_tail(t, df)) for t in T[1:]) < 1e-12


@pytest.mark.parametrize("df1", F_DF)
def test_f_tail_keeps_ten_digits_down_to_1e_300(df1):
    pairs = [(F, df2) for df2 in F_DF for F in RATIOS]
    assert max(error(tails.f_tail(F, df1, df2), exact.f_tail(F, df1, df2)) for F, df2 in pairs) < 1e-10


@pytest.mark.parametrize(
    ("df1", "df2", "F"),
    # Where scipy 1.17 alone is off by 22%, 12%, 1.2%, 6e-9, 3e-9 and 2e-11.
    [(46, 36852184.9, 32.64444242439445), (77, 100936.8, 19.46642621254021), (60, 10879176.2, 24.968094593),
     (32, 97557.97, 46.35305903038415), (66.35548381974249, 1494.98, 37.14203492125641), (8, 1e6, 10)],
)  # fmt: skip
def test_f_tail_where_finite_sums_lose_digits(df1, df2, F):
    assert error(tails.f_tail(F, df1, df2), exact.f_tail(F, df1, df2)) < 1e-11


@pytest.mark.parametrize("df", (0.1, 0.5, 1, 2, 3.7, 33.3, 100, 1e3, 18427.05, 1e6))
def test_chi2_tail_keeps_ten_digits_down_to_1e_300(df):
    xs = df * np.array([1.02, 1.05, 1.3, 2, 5, 13, 600, 13000]) + 2
    true = [exact.chi2_tail(x, df) for x in xs]
    assert max(error(tails.chi2_tail(x, df), p) for x, p in zip(xs, true, strict=True)) < 1e-10


@pytest.mark.parametrize("z", (-30, -2, 0, 1e-9, 1.96, 8, 20, 37))
def test_z_tail_keeps_twelve_digits(z):
    with mp.workdps(330):
        assert error(tails.z_tail(z), mp.erfc(mpf(z) / mp.sqrt(2)) / 2) < 1e-12


@pytest.mark.parametrize("r", (0.3, 0.999, 1 - 1e-6, 1 - 1e-10, 1 - 2**-52))
def test_r_tail_keeps_its_digits_near_one(r):
    true = exact.beta_tail(mpf(7) / 2, mpf(1) / 2, 1 - mpf(r) ** 2)
    assert error(tails.r_two_sided(-r, 7), true) < 1e-12


def test_the_exact_tails_agree_with_mpmaths_own_functions():
    for a, b, x in ((0.5, 3.5, 0.2), (12, 0.5, 0.9), (40, 7, 0.5)):
        own = mp.betainc(a, b, 0, mpf(x), regularized=True)
        assert abs(exact.beta_tail(mpf(a), mpf(b), mpf(x)) / own - 1) < 1e-25
    own = mp.gammainc(mpf(3.5), mpf(10), mp.inf, regularized=True)
    assert abs(exact.chi2_tail(20.0, 7.0) / own - 1) < 1e-25


@pytest.mark.parametrize(
    "row", [r for r in rows("tail_areas") if r["kind"] == "extreme"], ids=lambda r: r["stat"]
)
def test_extreme_tails_of_the_reference_table(row: Reference):
    sides = 2 if row["tail"] == "two-sided" else 1
    p = sides * AREA[row["dist"]](row, row.number("stat"))
    # The statistic as a double is within 1e-16 of the decimal; p moves by its square times that.
    assert p == pytest.approx(row.number("p"), rel=1e-9, abs=1e-308)


@pytest.mark.parametrize(
    "row", [r for r in rows("tail_areas") if r["kind"] == "published"], ids=lambda r: r["stat"]
)
def test_published_critical_values(row: Reference):
    sides = 2 if row["tail"] == "two-sided" else 1
    value, p = row.number("exact_value"), row.number("p")
    assert sides * AREA[row["dist"]](row, value) == pytest.approx(p, rel=1e-9)
    agrees = abs(value - row.number("printed_value")) <= half_unit(row["printed_value"])
    assert agrees == (row["agrees"] == "yes")  # four figures of the t table are misprints
    if row["dist"] in "tz":
        df = row.number("df1") if row["dist"] == "t" else np.inf
        assert tails.t_quantile(p / sides, df) == pytest.approx(value, rel=1e-12)


@pytest.mark.parametrize("df", T_DF)
def test_t_quantile_is_the_inverse_of_the_tail(df):
    p = np.array([1e-300, 1e-200, 1e-30, 1e-10, 1e-5, 0.001, 0.025, 0.3, 0.4999, 0.499999999, 0.7, 0.999])
    t = tails.t_quantile(p, df)
    within = np.isfinite(t)
    assert np.allclose(tails.t_tail(t[within], df), p[within], rtol=1e-12, atol=0)
    assert np.all(p[~within] < tails.t_tail(1e307, df))  # the true t is beyond the doubles


def test_edges():
    assert tails.t_quantile([0.0, 0.5, 1.0], 5.0).tolist() == [np.inf, 0.0, -np.inf]
    assert tails.t_tail([np.inf, -np.inf, 0.0], [3, 3, np.inf]).tolist() == [0.0, 1.0, 0.5]
    assert np.isnan(tails.t_tail([1.0, 1.0, np.nan], [0, -2, 3])).all()
    assert tails.r_two_sided([-1.0, 0.0, 1.0], 5).tolist() == [0.0, 1.0, 0.0]
    assert np.isnan(tails.r_two_sided(1.01, 5))
    assert tails.chi2_tail([0.0, -1.0, np.inf], 3).tolist() == [1.0, 1.0, 0.0]
    assert np.isnan(tails.chi2_tail(1.0, 0))
    assert tails.f_tail([0.0, -1.0, np.inf], 2, 7).tolist() == [1.0, 1.0, 0.0]
    assert np.isnan(tails.f_tail(3.0, [0, 2], [5, 0])).all()
    assert tails.f_tail(3.0, 4, np.inf) == pytest.approx(float(tails.chi2_tail(12.0, 4)), rel=1e-15)


def test_arrays_broadcast_and_scalars_give_scalars():
    for value in (
        tails.t_tail(2, 5),
        tails.f_tail(200, 2, 50),
        tails.t_quantile(0.025, 9),
        tails.z_two_sided(1),
    ):
        assert isinstance(value, np.ndarray)
        assert value.shape == ()
    assert tails.t_tail(np.ones((3, 1)), np.array([1, 2, 5, 9])).shape == (3, 4)
    assert tails.f_tail(np.array([[3.0], [900.0]]), 2, np.array([5, 50, 500])).shape == (2, 3)


def test_two_sided_p_of_the_same_result_agree():
    t, df = np.array([-12.0, -0.3, 1e-6, 2.1, 30]), np.array([3, 326, 9, 22.4, 58])
    p = tails.t_two_sided(t, df)
    assert np.allclose(p, tails.f_tail(t**2, 1, df), rtol=1e-12)
    assert np.allclose(p, tails.r_two_sided(t / np.sqrt(t**2 + df), df), rtol=1e-11)
    assert np.allclose(tails.z_two_sided(t[1:4]), tails.chi2_tail(t[1:4] ** 2, 1), rtol=1e-11)
