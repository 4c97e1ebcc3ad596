"""R², adjusted R², F and r of regressions: verdicts on single sentences."""

from __future__ import annotations

import pytest

import recheck
from recheck.checks.examples import table
from recheck.model import Finding
from tests.reference import rows

MODELS = [row for row in rows("r_regressions") if row["adjusted_r2"]]


def findings(text: str) -> dict[str, Finding]:
    return {f.check: f for f in recheck.audit_text(text).findings}


@pytest.mark.parametrize("row", MODELS, ids=[row["label"] for row in MODELS])
@pytest.mark.parametrize("places", [2, 3, 4])
def test_models_of_known_data_agree(row, places: int) -> None:
    r2, adjusted, F = (round(row.number(name), places) for name in ("r2", "adjusted_r2", "F"))
    text = f"The model was fitted, R² = {r2:.{places}f}, adjusted R² = {adjusted:.{places}f}, F({row['df1']}, {row['df2']}) = {F:.{places}f}."
    found = findings(text)
    assert [found[name].verdict for name in ("r2-from-F", "adjusted-r2")] == ["agrees", "agrees"]


@pytest.mark.parametrize(
    ("text", "check", "verdict", "said"),
    [
        ("R² = .43, F(3, 96) = 16.5", "r2-from-F", "conditional", "F is that of one step"),
        ("R² = .24, F(3, 96) = 16.5", "r2-from-F", "conditional", "what one step or predictor adds"),
        ("R² = .32, F(3, 96) = 16.5", "r2-from-F", "conditional", "is the adjusted one"),
        ("R² = .43, F(3, 96) = 16.5, p < .001, N = 100", "r2-from-F", "conditional", "least squares"),
        ("R² = 34%, F(3, 96) = 16.5", "r2-from-F", "agrees", ""),
        ("R² = .34, adjusted R² = .38", "adjusted-r2", "inconsistent", ""),
        ("R² = .84, adjusted R² = .86", "adjusted-r2", "conditional", "Olkin and Pratt"),
        ("R² = .3412, adjusted R² = .3276, F(3, 96) = 16.57", "adjusted-r2", "conditional", "Wherry"),
        ("R² = .3412, adjusted R² = .2211, F(3, 96) = 16.57", "adjusted-r2", "conditional", "more predictors"),
        ("R² = .39, ΔR² = .05, F change (1, 95) = 7.9, p = .006", "r2-change-from-F", "agrees", ""),
        ("R² = .39, ΔR² = .07, F change (1, 95) = 7.9, p = .006", "r2-change-from-F", "conditional", "R² is not that"),
        ("ΔR² = .09, F change (1, 95) = 7.9, p = .006", "r2-change-from-F", "conditional", "least squares"),
        ("R² = .077, ΔR² = .04, F(1, 95) = 7.9, p = .006", "r2-change-from-F", "agrees", "whole model"),
        ("R² = .25, t(98) = 2.71, p = .008", "r2-from-F", "agrees", "whole model"),
        ("R² = .02, t(98) = 2.71, p = .008", "r2-from-F", "conditional", "adds"),
    ],
)  # fmt: skip
def test_verdicts(text: str, check: str, verdict: str, said: str) -> None:
    found = findings(f"The model predicted loaf height, {text}.")[check]
    assert found.verdict == verdict and said in found.message


@pytest.mark.parametrize(
    "text",
    [
        "The logistic model fitted well, Nagelkerke R² = .34, F(3, 96) = 11.5, p < .001.",
        "The linear mixed model predicted loaf height, R² = .43, F(3, 96) = 16.5, p < .001.",
        "With robust standard errors, the model predicted loaf height, R² = .43, F(3, 96) = 16.5, p < .001.",
        "By weighted least squares, loaf height was predicted, R² = .43, F(3, 96) = 16.5, p < .001.",
    ],
)
def test_other_models_are_not_rebuilt(text: str) -> None:
    assert findings(text)["r2-from-F"].verdict == "unchecked"


def test_a_share_above_one_is_told_by_another_check() -> None:
    found = findings("The model predicted loaf height, R² = 1.34, adjusted R² = .32, F(3, 96) = 16.5.")
    assert not {"r2-from-F", "adjusted-r2"} & found.keys() and found["range"].verdict == "impossible"


def test_ends_of_the_implied_range_are_attained() -> None:
    """F from 16.45 to 16.55 with 3 and 96 df: R² from 3 F / (3 F + 96)."""
    (implied, *_) = findings("It was fitted, R² = .34, F(3, 96) = 16.5.")["r2-from-F"].implied
    assert implied.low == pytest.approx(49.35 / 145.35) and implied.high == pytest.approx(49.65 / 145.65)


STEPS = (
    "Step 1 | .21 | .20 | .21 | 18.9 | 18.9 | 2, 143 | <.001",
    "Step 2 | .35 | .33 | .14 | 25.6 | 30.1 | 1, 142 | <.001",
)


@pytest.mark.parametrize(
    ("last", "verdict"),
    [
        # Four predictors in all: 1 − .65 · 145/141 = .332.
        ("Step 3 | .35 | .33 | .00 | 18.9 | 0.07 | 1, 141 | .788", "agrees"),
        ("Step 3 | .35 | .38 | .00 | 18.9 | 0.07 | 1, 141 | .788", "inconsistent"),
        ("Step 3 | .35 | .13 | .00 | 18.9 | 0.07 | 1, 141 | .788", "conditional"),
    ],
)
def test_df_of_a_step_do_not_count_the_predictors_of_its_model(last: str, verdict: str) -> None:
    head = "Step | R2 | Adjusted R2 | ΔR2 | F | F change | df | p"
    text = table("Table 2. Regression of loaf height.", head, *STEPS, last)
    found = [f.verdict for f in recheck.audit_text(text).findings if f.check == "adjusted-r2"]
    assert sorted(found) == sorted(["agrees", "agrees", verdict])


def test_an_adjusted_r2_beside_the_f_of_a_step_is_that_of_the_model() -> None:
    found = findings("Step 2 added to the model, adjusted R² = .37, F change (1, 95) = 7.9, p = .006.")
    assert found["adjusted-r2-from-F"].verdict == "agrees"
