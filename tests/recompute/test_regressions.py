"""R², F and their kin against R, certified values, statsmodels, and each other."""

from __future__ import annotations

import numpy as np
import pytest
import statsmodels.api as sm  # type: ignore[import-untyped]
from hypothesis import given, settings
from hypothesis import strategies as st
from mpmath import mp

from recheck.recompute import regressions
from recheck.recompute.tails import f_tail
from tests.recompute.boxes import intervals
from tests.reference import Reference, rows

MODELS, STEPS = rows("r_regressions"), rows("r_steps")
# R 4.2.2: coef(lm(stack.loss ~ ., as.data.frame(scale(stackloss)))), sapply(stackloss, sd), cor(stackloss)[1:3, 4]
STACK_BETAS = (0.645047662682183, 0.402502491464383, -0.0801405433495473)
STACK_SDS = (9.16826825835408, 3.16077145495782, 5.35857123814602, 10.17162252356549)
STACK_RS = (0.919663452905855, 0.875504404419447, 0.399829587099311)


@pytest.mark.parametrize("row", MODELS, ids=[row["label"] for row in MODELS])
def test_models_of_known_data(row: Reference) -> None:
    r2, F, df1, df2 = row.numbers("r2", "F", "df1", "df2")
    # 1 - R² of Norris keeps nine of its digits.
    assert float(regressions.F_from_r2(r2, df1, df2)) == pytest.approx(F, rel=1e-10 if r2 < 0.9999 else 1e-8)
    assert float(regressions.r2_from_F(F, df1, df2)) == pytest.approx(r2, rel=1e-12)
    assert float(f_tail(F, df1, df2)) == pytest.approx(row.number("p"), rel=1e-8)
    if row.has("adjusted_r2"):
        adjusted = row.number("adjusted_r2")
        assert float(regressions.adjusted_r2(r2, df1, df2)) == pytest.approx(adjusted, rel=1e-13)
        assert float(regressions.r2_from_adjusted(adjusted, df1, df2)) == pytest.approx(r2, rel=1e-13)


@pytest.mark.parametrize("row", STEPS, ids=[row["label"] for row in STEPS])
def test_steps_of_known_data(row: Reference) -> None:
    F, df1, df2, before, r2 = row.numbers("F", "df1", "df2", "r2_before", "r2")
    assert float(regressions.r2_change_from_F(F, df1, df2, r2)) == pytest.approx(r2 - before, rel=1e-11)
    assert r2 - before < regressions.r2_from_F(F, df1, df2)


def test_standardised_coefficients() -> None:
    (row,) = (row for row in MODELS if row["label"] == "stack loss")
    b = [float(x) for x in row["b"].split(";")][1:]
    assert regressions.beta_from_b(b, STACK_SDS[:3], STACK_SDS[3]) == pytest.approx(STACK_BETAS, rel=1e-12)
    assert float(regressions.r2_from_betas(STACK_BETAS, STACK_RS)) == pytest.approx(
        row.number("r2"), rel=1e-12
    )


def test_r2_is_no_less_than_the_square_of_any_correlation() -> None:
    rng = np.random.default_rng(2)
    for _ in range(20):
        x = rng.normal(size=(30, 4)) + rng.normal(size=(30, 1))
        fit = sm.OLS(x[:, 0], sm.add_constant(x[:, 1:])).fit()
        assert max(np.corrcoef(x.T)[0, 1:] ** 2) <= fit.rsquared + 1e-12
        assert float(regressions.adjusted_r2(fit.rsquared, 3, 26)) == pytest.approx(fit.rsquared_adj)
        assert float(regressions.F_from_r2(fit.rsquared, 3, 26)) == pytest.approx(fit.fvalue)


def test_other_adjustments() -> None:
    """Olkin and Pratt's series by mpmath; the others by hand: R² = .5, k = 2, n = 13."""
    exact = 1 - mp.mpf(10) / 10 * mp.mpf("0.5") * mp.hyp2f1(1, 1, 6, mp.mpf("0.5"))
    assert float(regressions.adjusted_r2_olkin_pratt(0.5, 2, 10)) == pytest.approx(float(exact), rel=1e-13)
    for df2 in (3, 9, 97, 99, 2000):
        for r2 in (0.0, 0.01, 0.07, 0.5, 0.99, 1.0):
            series = mp.hyp2f1(1, 1, mp.mpf(df2) / 2 + 1, 1 - mp.mpf(r2))
            exact = 1 - mp.mpf(df2 + 1) / df2 * (1 - mp.mpf(r2)) * series
            found = float(regressions.adjusted_r2_olkin_pratt(r2, 3, df2))
            assert found == pytest.approx(float(exact), rel=1e-11, abs=1e-13)
    assert float(regressions.adjusted_r2(0.5, 2, 10)) == pytest.approx(1 - 0.5 * 12 / 10)
    assert float(regressions.adjusted_r2_wherry(0.5, 2, 10)) == pytest.approx(1 - 0.5 * 12 / 11)
    assert float(regressions.adjusted_r2_stein(0.5, 2, 10)) == pytest.approx(
        1 - 0.5 * (12 / 10) * (11 / 9) * (14 / 13)
    )


def test_ends_of_the_scale() -> None:
    assert regressions.F_from_r2(1.0, 3, 20) == np.inf and regressions.r2_from_F(np.inf, 3, 20) == 1
    assert regressions.r2_from_F(0.0, 3, 20) == 0 == regressions.F_from_r2(0.0, 3, 20)


@settings(max_examples=100, deadline=None)
@given(intervals(0, 50), st.integers(1, 8), st.integers(2, 300), st.floats(0, 1), st.floats(0, 1))
def test_ranges_hold_every_point(F: tuple[float, float], df1: int, df2: int, a: float, b: float) -> None:
    low, high = regressions.r2_from_F_bounds(*F, df1, df1, df2 - 0.5, df2 + 0.5)
    point = regressions.r2_from_F(F[0] + a * (F[1] - F[0]), df1, df2 - 0.5 + b)
    assert low - 1e-12 <= point <= high + 1e-12


@settings(max_examples=100, deadline=None)
@given(st.floats(0, 1), st.integers(1, 10), st.integers(4, 300))
def test_order_of_the_adjustments(r2: float, df1: int, df2: int) -> None:
    """Stein's is the smallest; none is above R², and each falls with more predictors beside the same residual."""
    formulas = (
        regressions.adjusted_r2_stein, regressions.adjusted_r2, regressions.adjusted_r2_wherry,
    )  # fmt: skip
    values = [float(f(r2, df1, df2)) for f in formulas]
    assert values == sorted(values) and values[-1] <= r2 + 1e-12
    for formula in formulas:
        assert formula(r2, df1, df2) <= formula(r2, df1, df2 + 1) + 1e-12
    for formula in (*formulas, regressions.adjusted_r2_olkin_pratt):
        assert formula(r2, df1 + 1, df2) <= formula(r2, df1, df2) + 1e-12
        assert formula(r2, df1, df2) <= formula(min(r2 + 0.01, 1), df1, df2) + 1e-12


def test_the_r2_of_a_small_F_keeps_its_digits():
    assert float(regressions.r2_from_F(1e-10, 1, 100)) == pytest.approx(1e-12 / (1 + 1e-12), rel=1e-14)
    assert regressions.r2_from_F([0.0, np.inf], 3, 50).tolist() == [0.0, 1.0]
