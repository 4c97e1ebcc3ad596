"""Misprints planted into honest correlation matrices and fits of regressions, each with the brute-force decision on it."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal

import numpy as np
import statsmodels.api as sm  # type: ignore[import-untyped]
from scipy import special

from tests.soundness.planted_tables import Planted, apart, box, misprint
from tests.soundness.rounding import rounded
from tests.soundness.samples import Sample
from tests.soundness.tabling import markdown

Rng = np.random.Generator


def coefficients(rng: Rng, k: int) -> np.ndarray:
    """Correlations of complete data with a common part, to two decimals."""
    n = int(rng.integers(30, 120))
    x = rng.normal(size=(n, k)) + 1.6 * rng.normal(size=(n, 1))
    return np.round(np.corrcoef(x.T), 2)


def triangle(matrix: np.ndarray) -> Sample:
    """The lower triangle as a table."""
    k = len(matrix)
    names = ["Height", "Crumb", "Crust", "Time", "Salt", "Heat", "Rye", "Age"]
    rows = [
        [f"{i + 1}. {names[i]}", *(f"{matrix[i, j]:.2f}" for j in range(i)), "–", *([""] * (k - i - 1))]
        for i in range(k)
    ]
    return Sample(
        markdown("Table 1. Correlations of the scores.", ["", *(str(i + 1) for i in range(k))], rows)
    )


def surely_indefinite(matrix: np.ndarray) -> bool:
    """By Weyl's inequality: the smallest eigenvalue is below what all roundings together can lift it by."""
    return bool(np.linalg.eigvalsh(matrix)[0] < -0.005 * (len(matrix) - 1) - 1e-9)


def changed(rng: Rng, k: int, sign: bool) -> tuple[Sample, bool]:
    """A matrix with one coefficient of lost sign, or with a misprint in it."""
    matrix = coefficients(rng, k)
    i, j = sorted(rng.choice(k, 2, replace=False), reverse=True)
    value = Decimal(f"{matrix[i, j]:.2f}")
    value = -value if sign else misprint(rng, value)
    if abs(value) > 1:
        return changed(rng, k, sign)
    matrix[i, j] = matrix[j, i] = float(value)
    return triangle(matrix), surely_indefinite(matrix)


def sign_of_three(rng: Rng) -> tuple[Sample, bool]:
    """The sign of one of three coefficients is lost."""
    return changed(rng, 3, True)


def sign_of_many(rng: Rng) -> tuple[Sample, bool]:
    """The sign of one of many coefficients is lost."""
    return changed(rng, int(rng.integers(5, 9)), True)


def digit_of_many(rng: Rng) -> tuple[Sample, bool]:
    """A digit of one of many coefficients is wrong."""
    return changed(rng, int(rng.integers(4, 9)), False)


def fitted(rng: Rng) -> tuple[float, float, float, int, int]:
    """R², adjusted R², F and df of a linear regression."""
    n, k = int(rng.integers(30, 200)), int(rng.integers(2, 6))
    x = rng.normal(size=(n, k))
    fit = sm.OLS(x @ rng.normal(0, 0.4, size=k) + rng.normal(size=n), sm.add_constant(x)).fit()
    return float(fit.rsquared), float(fit.rsquared_adj), float(fit.fvalue), k, n - k - 1


def r2_of_F(rng: Rng) -> tuple[Sample, bool]:
    """R² beside F with a misprint in R²."""
    r2, _, F, df1, df2 = fitted(rng)
    told, shown = misprint(rng, rounded(r2, 2)), rounded(F, 2)
    text = f"The model predicted loaf height, R² = {told}, F({df1}, {df2}) = {shown}."
    low, high = (df1 * f / (df1 * f + df2) for f in box(shown))
    return Sample(text), apart(box(told), (low, high)) and 0 <= told <= 1


def adjusted_of_r2(rng: Rng) -> tuple[Sample, bool]:
    """R² and adjusted R² beside F with a misprint in the adjusted one."""
    r2, adjusted, F, df1, df2 = fitted(rng)
    plain, told = rounded(r2, 2), misprint(rng, rounded(adjusted, 2))
    text = f"The model predicted loaf height, R² = {plain}, adjusted R² = {told}, F({df1}, {df2}) = {rounded(F, 2)}."
    low, high = (1 - (1 - r) * (df1 + df2) / df2 for r in box(plain))
    return Sample(text), apart(box(told), (low, high)) and told <= 1


def adjusted_above(rng: Rng) -> tuple[Sample, bool]:
    """R² and adjusted R² have changed places."""
    r2, adjusted, _, _, _ = fitted(rng)
    plain, told = rounded(adjusted, 3), rounded(r2, 3)
    text = f"The model predicted loaf height (R² = {plain}, adjusted R² = {told})."
    # The unbiased estimate can lie above R², most so with one predictor and few cases.
    x = 1 - box(plain)[1]
    most = max(1 - 0.75 * x * float(special.hyp2f1(1, 1, 3, x)), 1 - x)
    return Sample(text), adjusted > 0 and box(told)[0] > most + 1e-6


def change_of_F(rng: Rng) -> tuple[Sample, bool]:
    """What a step adds beside R² and F of the change, with a misprint in it."""
    n = int(rng.integers(40, 150))
    x = rng.normal(size=(n, 3))
    y = x @ np.array([0.5, 0.4, 0.5]) + rng.normal(size=n)
    first, full = sm.OLS(y, sm.add_constant(x[:, :2])).fit(), sm.OLS(y, sm.add_constant(x)).fit()
    F = rounded(float(full.compare_f_test(first)[0]), 2)
    r2, told = rounded(full.rsquared, 3), misprint(rng, rounded(full.rsquared - first.rsquared, 3))
    text = f"Step 2 added to it, R² = {r2}, ΔR² = {told}, ΔF(1, {n - 4}) = {F}."
    low, high = (1 - box(r2)[1]) * box(F)[0] / (n - 4), (1 - box(r2)[0]) * box(F)[1] / (n - 4)
    return Sample(text), apart(box(told), (low, high)) and 0 <= told <= 1


def beta_sign(rng: Rng) -> tuple[Sample, bool]:
    """The sign of β is lost beside b."""
    n = int(rng.integers(30, 150))
    x = rng.normal(size=(n, 2)) * rng.uniform(0.5, 5, size=2)
    y = x @ rng.normal(0, 0.4, size=2) + rng.normal(size=n)
    fit = sm.OLS(y, sm.add_constant(x)).fit()
    rows = []
    for j, name in enumerate(("Hydration", "Salt"), 1):
        beta = rounded(float(fit.params[j] * x[:, j - 1].std() / y.std()), 2)
        b, se = rounded(float(fit.params[j]), 2), rounded(float(fit.bse[j]), 2)
        rows.append([name, str(b), str(se), str(-beta if j == 1 else beta)])
    text = markdown("Table 2. Regression of loaf height.", ["Predictor", "b", "SE", "β"], rows)
    b, beta = Decimal(rows[0][1]), Decimal(rows[0][3])
    return Sample(text), b * beta < 0


def partial_misprint(rng: Rng) -> tuple[Sample, bool]:
    """A partial correlation with a misprint, after the three that it comes from."""
    x = rng.normal(size=(60, 3)) + rng.normal(size=(60, 1))
    r12, r13, r23 = (rounded(float(np.corrcoef(x.T)[i, j]), 2) for i, j in ((0, 1), (0, 2), (1, 2)))
    three = [float(r) for r in (r12, r13, r23)]

    def partial(a: float, b: float, c: float) -> float:
        return (a - b * c) / float(np.sqrt((1 - b * b) * (1 - c * c)))

    told = misprint(rng, rounded(partial(*three), 2))
    orders = (three, (three[1], three[0], three[2]), (three[2], three[0], three[1]))
    # A box of half a hundredth each way moves a partial correlation of such sizes by less than .05.
    near = min(abs(float(told) - partial(a, b, c)) for a, b, c in orders)
    text = (
        f"Height went with crumb score (r = {r12}), height with hydration (r = {r13}), and crumb score with hydration "
        f"(r = {r23}). The partial correlation of height and crumb score was r = {told}."
    )
    return Sample(text), near > 0.06 and abs(told) <= 1 and max(map(abs, three)) < 0.8


MATRIX_PLANTS: Mapping[str, Planted] = {
    "three correlations: sign lost": sign_of_three, "matrix: sign lost": sign_of_many, "matrix: misprint": digit_of_many,
    "R² beside F: misprint": r2_of_F, "adjusted R²: misprint": adjusted_of_r2, "R² and adjusted R² swapped": adjusted_above,
    "ΔR² beside F: misprint": change_of_F, "β beside b: sign lost": beta_sign, "partial r: misprint": partial_misprint,
}  # fmt: skip
