"""Standardised coefficients beside b and SDs, R² beside the correlations of its predictors, partial correlations."""

from __future__ import annotations

import pytest

import recheck
from recheck.checks.examples import table
from recheck.model import Finding

# R 4.2.2: sapply(stackloss, sd); coef(lm(stack.loss ~ ., stackloss)); the same of scale(stackloss); cor(stackloss)[1:3, 4];
# summary(lm(stack.loss ~ ., stackloss)): R² 0.9136, F 59.9 on 3 and 17 df. Brownlee (1960), named as loaves here.
SDS = table(
    "Table 1. Means and standard deviations.",
    "Variable | M | SD",
    "Height | 17.52 | 10.172",
    "Air | 60.43 | 9.168",
    "Water | 21.10 | 3.161",
    "Acid | 86.29 | 5.359",
)
COEFFICIENTS = (
    "Air | .920 | 0.7156 | 0.1349 | .645",
    "Water | .876 | 1.2953 | 0.3680 | .403",
    "Acid | .400 | −0.1521 | 0.1563 | −.080",
)


def model(*rows: str, r2: str = ".914") -> str:
    note = f"Note. R² = {r2}, F(3, 17) = 59.90."
    return (
        SDS + "\n" + table("Table 2. Regression of height.", "Predictor | r | b | SE | β", *rows, note=note)
    )


def findings(text: str, check: str) -> list[Finding]:
    return [f for f in recheck.audit_text(text).findings if f.check == check]


def test_a_known_model_agrees() -> None:
    text = model(*COEFFICIENTS)
    betas = findings(text, "beta-from-b")
    assert [f.verdict for f in betas] == ["agrees"] * 3
    assert all("SD of the outcome = 10.172" in f.message for f in betas)
    (r2,) = findings(text, "r2-from-predictors")
    assert r2.verdict == "agrees" and "β of predictor 3" in r2.message


@pytest.mark.parametrize(("now", "then"), [("| .645", "| .465"), ("| .403", "| −.403"), ("1.2953", "12.953")])
def test_a_misprint_in_b_or_beta_is_found(now: str, then: str) -> None:
    text = model(*(row.replace(now, then) for row in COEFFICIENTS))
    assert "conditional" in [f.verdict for f in findings(text, "beta-from-b")]


def test_r2_below_the_square_of_a_correlation() -> None:
    (found,) = findings(model(*COEFFICIENTS, r2=".814"), "r2-from-predictors")
    # .9195² = .8455: more than .8145.
    assert found.verdict == "conditional" and "plain correlation with the outcome" in found.message


def test_without_sds_the_sign_is_compared() -> None:
    rows = ("Air | 0.72 | 0.13 | .65", "Water | 1.30 | 0.37 | .40", "Acid | −0.15 | 0.16 | .08")
    text = table("Table 2. Regression of height.", "Predictor | b | SE | β", *rows)
    assert sorted(f.verdict for f in findings(text, "beta-from-b")) == ["agrees", "agrees", "conditional"]


THREE = "Height went with crumb score (r = .50), height with salt (r = .40), and crumb score with salt (r = .60). "


@pytest.mark.parametrize(
    ("partial", "verdict"),
    [
        # (.5 - .24) / sqrt(.84 * .64) = .355; (.4 - .3) / sqrt(.75 * .64) = .144; (.6 - .2) / sqrt(.75 * .84) = .504
        (".35", "agrees"), (".36", "agrees"), (".14", "agrees"), (".50", "agrees"),
        # semipartial: .26 / .8 = .325 and .26 / sqrt(.84) = .284
        (".32", "conditional"), (".28", "conditional"), (".62", "conditional"),
    ],
)  # fmt: skip
def test_partial_correlations(partial: str, verdict: str) -> None:
    (found,) = findings(
        f"{THREE}The partial correlation of height and crumb score was r = {partial}.", "partial-r"
    )
    assert found.verdict == verdict


def test_four_correlations_leave_open_which_are_meant() -> None:
    text = (
        f"{THREE}Age went with salt (r = .10). The partial correlation of height and crumb score was r = .62."
    )
    assert not findings(text, "partial-r")
