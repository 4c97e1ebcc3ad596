"""Checks of standardised coefficients against b and SDs, and of R² against the predictors of its model."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence

from recheck.checks.beside import variable_of
from recheck.checks.compare import Comparison, judge
from recheck.checks.examples import table
from recheck.checks.registry import Case, check
from recheck.model import STATED, Claim, Finding, Interval
from recheck.reconcile.readings import Box, Way, agrees_as_printed

PREDICTOR, OUTCOME = "SD of the predictor", "SD of the outcome"
FEWEST_OTHERS = 2
"""Coefficients that must agree with the SDs of one table before another is held against them."""


# -- β, b and SDs -----------------------------------------------------------------------------------------


@check(
    "beta-from-b",
    title="standardised coefficient against the unstandardised one",
    kinds=("regression",),
    quantity="beta",
    needs=("b", "beta"),
    beside="the SDs of its predictor and of the outcome, where two other coefficients show that they belong to the model",
    formula="β = b SD(predictor) / SD(outcome), so β has the sign of b",
    source="Cohen & Cohen (1983) Applied Multiple Regression/Correlation Analysis, 3.5",
    limits="Conditional at most: b and β may be of two models, and SDs of other cases than the model's.",
    agrees=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | b | SE | β | t | p",
            "Proofing time | 0.84 | 0.31 | .28 | 2.71 | .008",
        ),
    ),
    conditional=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | b | SE | β | t | p",
            "Proofing time | 0.84 | 0.31 | −.28 | 2.71 | .008",
        ),
    ),
)
def beta_from_b(case: Case) -> Iterable[Finding]:
    """Compare the sign of β with that of b, and its size where the SDs are known."""
    claim = case.claim
    numbers = {name: claim.values[name] for name in ("beta", "b")}
    doubts = ["b and β are coefficients of one model, none of them of a standardised predictor's product"]
    outcome = _outcome(claim, case.block)
    own = _summary(claim, case.block)
    way = Way(_sign, (), ("only the signs are compared, as no SDs are known",))
    if outcome is not None and own is not None:
        numbers |= {PREDICTOR: own.values["sd"], OUTCOME: outcome.values["sd"]}
        doubts.append(f"both SDs are those of the model's cases (of “{own.outcome}” and “{outcome.outcome}”)")
        way = Way(_beta)
    yield judge(case, Comparison("beta-from-b", "beta", numbers, (way,), doubts=tuple(doubts)))


def _sign(box: Box) -> tuple[Interval, ...]:
    b = box["b"]
    return (Interval(0.0 if b.low > 0 else -math.inf, 0.0 if b.high < 0 else math.inf),)


def _beta(box: Box) -> tuple[Interval, ...]:
    """b SD(predictor) / SD(outcome): it grows away from 0 with the first SD and shrinks with the second."""
    b, one, two = box["b"], box[PREDICTOR].within(0.0, math.inf), box[OUTCOME].within(0.0, math.inf)
    if two.low <= 0:
        return _sign(box)
    low = b.low * one.high / two.low if b.low < 0 else b.low * one.low / two.high
    high = b.high * one.high / two.low if b.high > 0 else b.high * one.low / two.high
    return (Interval(low, high),)


def _summary(claim: Claim, block: Sequence[Claim]) -> Claim | None:
    """The only summary with an SD that is called as the predictor is."""
    named = [
        s
        for s in block
        if s.kind == "group-summary" and "sd" in s.values and variable_of(s) == variable_of(claim)
    ]
    return named[0] if len(named) == 1 else None


def _outcome(claim: Claim, block: Sequence[Claim]) -> Claim | None:
    """The variable whose SD fits all other coefficients of the table, if two or more tell, and only one does."""
    pairs = [(other, _summary(other, block)) for other in block if other.kind == "regression"]
    told = [(other, own) for other, own in pairs if own is not None]
    if len(told) < FEWEST_OTHERS:
        return None
    used = {variable_of(claim), *(variable_of(other) for other, _ in told)}
    free = [s for s in block if s.kind == "group-summary" and "sd" in s.values and variable_of(s) not in used]
    fitting = [y for y in free if all(_fits(other, own, y) for other, own in told)]
    return fitting[0] if len(fitting) == 1 else None


def _fits(coefficient: Claim, own: Claim, outcome: Claim) -> bool:
    numbers = {
        "beta": coefficient.values["beta"], "b": coefficient.values["b"],
        PREDICTOR: own.values["sd"], OUTCOME: outcome.values["sd"],
    }  # fmt: skip
    return agrees_as_printed("beta", numbers, (Way(_beta),))


# -- R² and the correlations of predictors ----------------------------------------------------------------


@check(
    "r2-from-predictors",
    title="R² of a model against its predictors' correlations with the outcome",
    kinds=("F-test", "estimate"),
    quantity="r2",
    needs=("r2",),
    beside="a table of the model's coefficients with their correlations, or with correlations and β",
    formula="R² is at least the greatest r²; with β of all predictors it is the sum of β r",
    source="Cohen & Cohen (1983) Applied Multiple Regression/Correlation Analysis, 3.5",
    limits="Conditional at most: correlations may be partial ones or of other cases, and predictors may be left out of the table. Adjusted R² can be smaller.",
    agrees=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | r | b | SE | β",
            "Proofing time | .30 | 0.84 | 0.31 | .28",
            "Hydration | .22 | 0.44 | 0.21 | .19",
            note="Note. R² = .13, F(2, 81) = 6.05, p = .004.",
        ),
    ),
    conditional=(
        table(
            "Table 3. Regression of loaf height in mm.",
            "Predictor | r | b | SE | β",
            "Proofing time | .60 | 0.84 | 0.31 | .58",
            "Hydration | .22 | 0.44 | 0.21 | .19",
            note="Note. R² = .13, F(2, 81) = 6.05, p = .004.",
        ),
    ),
)
def r2_from_predictors(case: Case) -> Iterable[Finding]:
    """Hold R² against the predictors of its table."""
    claim = case.claim
    told = [c for c in case.block if "r" in c.values and c.values["r"].interval().absolute().low <= 1]
    if not told or claim.says("pseudo-r2") or claim.values["r2"].interval().low > 1:
        return
    printed = {"r2": claim.values["r2"]}
    for i, predictor in enumerate(told, 1):
        printed[f"r of predictor {i}"] = predictor.values["r"]
    size = len(told)
    ways = [
        Way(
            lambda box: (Interval(_greatest(box, size), 1.0),),
            (),
            ("predictors may be left out of the table",),
        )
    ]
    if size == len(_predictors(case.block)) and all("beta" in c.values for c in told):
        for i, predictor in enumerate(told, 1):
            printed[f"β of predictor {i}"] = predictor.values["beta"]
        further = "further predictors are left out of the table, or β is that of another model"
        ways = [Way(lambda box: (_sum(box, size),)), Way(ways[0].implied, (further,), alone=True)]
    doubts = (
        "each r is the plain correlation with the outcome among the cases of the model, and R² is not adjusted",
    )
    said = [word for word in ("mixed-model", "weighted", "imputed", "partial") if claim.suggests(word)]
    excuses = tuple(f"R² may be that of {STATED[word]}" for word in said[:1])
    bounds = Interval(0.0, 1.0)
    yield judge(
        case,
        Comparison(
            "r2-from-predictors", "r2", printed, ways, (claim, *told), bounds, doubts=doubts, excuses=excuses
        ),
    )


def _predictors(block: Sequence[Claim]) -> list[Claim]:
    """The coefficients without that of the constant."""
    return [c for c in block if not variable_of(c).startswith(("const", "intercept"))]


def _greatest(box: Box, size: int) -> float:
    """The least that the greatest r² can be."""
    return max(box[f"r of predictor {i}"].absolute().low ** 2 for i in range(1, size + 1))


def _sum(box: Box, size: int) -> Interval:
    """The range of the sum of β r: each product has its ends at corners."""
    low = high = 0.0
    for i in range(1, size + 1):
        r, beta = box[f"r of predictor {i}"].within(-1.0, 1.0), box[f"β of predictor {i}"]
        ends = [a * b for a in (r.low, r.high) for b in (beta.low, beta.high)]
        low, high = low + min(ends), high + max(ends)
    return Interval(low, high)
