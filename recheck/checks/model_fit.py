"""Checks of R², adjusted R² and the change of R² against F, t, r and each other."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator, Sequence

import numpy as np

from recheck.checks.compare import Comparison, judge
from recheck.checks.p_values import as_interval
from recheck.checks.registry import Case, check
from recheck.model import N_OF_GROUP, STATED, Claim, Finding, Interval, Printed
from recheck.recompute import regressions
from recheck.recompute.arrays import Floats
from recheck.reconcile.readings import Box, Numbers, Way, box_of

SHARE = Interval(0.0, 1.0)
ADJUSTED = Interval(-math.inf, 1.0)

LEAST_SQUARES = (
    "F and R² are those of one model fitted by least squares with ordinary standard errors and an intercept"
)
STEP = "F is that of one step or predictor, R² that of the whole model"
GAIN = "what is called R² is what one step or predictor adds"
CALLED_R2 = "what is called R² is the adjusted one"
OTHER_MODELS = (
    "pseudo-r2",
    "mixed-model",
    "robust",
    "imputed",
    "weighted",
    "bootstrap",
    "permutation",
    "bayesian",
    "rank-test",
    "disattenuated",
)
"""Models whose R² and F need not come from the same sums of squares."""


def _excuses(claim: Claim) -> tuple[str, ...]:
    said = [word for word in OTHER_MODELS if claim.says(word)]
    said += [word for word in ("mixed-model", "robust", "imputed", "weighted") if claim.suggests(word)]
    return tuple(f"R² may be that of {STATED[word]}" for word in said[:1])


def _tested(claim: Claim) -> Numbers | None:
    """F with its df, or t, which is the F of one predictor; None where df are missing or not positive."""
    for names in (("F", "df1", "df2"), ("t", "df")):
        if set(names) <= claim.values.keys() and all(claim.values[n].number > 0 for n in names[1:]):
            return {name: claim.values[name] for name in names}
    return None


def _as_F(box: Box) -> tuple[Interval, Interval, Interval]:
    """F, df1 and df2 over the box, those of t where it holds a t."""
    if "t" in box:
        t = box["t"].absolute()
        return Interval(t.low**2, t.high**2), Interval(1.0, 1.0), box["df"]
    return box["F"].within(0.0, math.inf), box["df1"], box["df2"]


def _share(box: Box) -> Interval:
    """R² of the model that F tests as a whole."""
    F, df1, df2 = _as_F(box)
    return as_interval(regressions.r2_from_F_bounds(F.low, F.high, df1.low, df1.high, df2.low, df2.high))


def _of_whole_model(claim: Claim, numbers: Numbers) -> bool:
    """Tell whether the df of F use up a printed n of its own: then F is that of the whole model."""
    n = next((claim.values[name] for name in ("N", "n") if name in claim.values), None)
    if n is None or "df1" not in numbers or N_OF_GROUP in claim.notes:
        return False
    return n.value == numbers["df1"].value + numbers["df2"].value + 1


def _fits_whole_model(numbers: Numbers) -> bool:
    """Tell whether R² as printed is that of the model that F tests as a whole."""
    box = box_of(numbers)
    return box["r2"].meets(_share(box))


# -- R² and F ---------------------------------------------------------------------------------------------


@check(
    "r2-from-F",
    title="R² of a regression against its F and df",
    kinds=("F-test", "t-test", "regression"),
    quantity="r2",
    needs=("r2",),
    beside="F with both df, or t with df",
    formula="R² = df1 F / (df1 F + df2), F = t² with one predictor; adjusted R² = 1 − (1 − R²)(df1 + df2) / df2",
    source="Fisher (1924) Philosophical Transactions B 213:89-142; Ezekiel (1930) Methods of Correlation Analysis",
    limits="Conditional at most: F may be that of one step or predictor, or rest on robust standard errors. Pseudo-R², mixed and weighted models are not rebuilt.",
    agrees=(
        "The model predicted loaf height, R² = .34, F(3, 96) = 16.5, p < .001.",
        "Proofing time predicted loaf height, b = 0.84, t(98) = 2.71, p = .008, R² = .07.",
    ),
    conditional=(
        "The model predicted loaf height, R² = .43, F(3, 96) = 16.5, p < .001.",
        "The model predicted loaf height, R² = .24, F(3, 96) = 16.5, p < .001.",
    ),
    unchecked=("The linear mixed model predicted loaf height, R² = .43, F(3, 96) = 16.5, p < .001.",),
)
def r2_from_F(case: Case) -> Iterable[Finding]:
    """Compare R² with F; one step of a model has less of it, which is no contradiction."""
    tested = _tested(case.claim)
    if tested is None or _beyond(case.claim.values["r2"]):
        return
    numbers = {"r2": case.claim.values["r2"], **tested}
    if "delta_r2" in case.claim.values and not _fits_whole_model(numbers):
        return
    yield _judged(case, "r2-from-F", "r2", numbers, tuple(_r2_ways(case.claim, numbers)), SHARE)


def _r2_ways(claim: Claim, numbers: Numbers) -> Iterator[Way]:
    yield Way(lambda box: (_share(box),))
    if "adjusted_r2" not in claim.values and not claim.says("pseudo-r2"):
        yield Way(_adjusted_share, (CALLED_R2,), alone=True)
    if not _of_whole_model(claim, numbers):
        # Beside the t of one coefficient stands the R² of its whole model as a rule.
        told = "t" in numbers or claim.says("model-step")
        unstated, given = ((), (STEP,)) if told else ((STEP,), ())
        yield Way(lambda box: (Interval(_share(box).low, 1.0),), unstated, given, alone=True)
        yield Way(lambda box: (Interval(0.0, _share(box).high),), (GAIN,), alone=True)


def _adjusted_share(box: Box) -> tuple[Interval, ...]:
    """The adjusted R² of the model that F tests: rises with F and df2, whichever df1."""
    r2, (_, df1, df2) = _share(box), _as_F(box)
    low = regressions.adjusted_r2(r2.low, df1.high, df2.low)
    return (as_interval((low, regressions.adjusted_r2(r2.high, df1.low, df2.high))),)


@check(
    "adjusted-r2-from-F",
    title="adjusted R² of a regression against its F and df",
    kinds=("F-test",),
    quantity="adjusted_r2",
    needs=("adjusted_r2", "F", "df1", "df2"),
    beside="no R², with which it is compared instead",
    formula="adjusted R² = 1 − (1 − R²)(df1 + df2) / df2 with R² = df1 F / (df1 F + df2)",
    source="Ezekiel (1930) Methods of Correlation Analysis; Yin & Fan (2001) Journal of Experimental Education 69:203-224",
    limits="Conditional at most, as R² from F.",
    agrees=("The model predicted loaf height, adjusted R² = .32, F(3, 96) = 16.5, p < .001.",),
    conditional=("The model predicted loaf height, adjusted R² = .52, F(3, 96) = 16.5, p < .001.",),
)
def adjusted_r2_from_F(case: Case) -> Iterable[Finding]:
    """Compare an adjusted R² that stands without R² with F."""
    claim = case.claim
    tested = _tested(claim)
    if tested is None or {"r2", "delta_r2"} & claim.values.keys() or _beyond(claim.values["adjusted_r2"]):
        return
    numbers = {"adjusted_r2": claim.values["adjusted_r2"], **tested}
    ways = [Way(_adjusted_share)]
    ways += [Way(_by(formula), (words,), alone=True) for words, formula in OTHER_FORMULAS]
    if not _of_whole_model(claim, numbers):
        unstated, given = ((), (STEP,)) if claim.says("model-step") else ((STEP,), ())
        ways.append(
            Way(lambda box: (Interval(_adjusted_share(box)[0].low, 1.0),), unstated, given, alone=True)
        )
        ways.append(Way(lambda box: (Interval(-math.inf, _share(box).high),), (GAIN,), alone=True))
    yield _judged(case, "adjusted-r2-from-F", "adjusted_r2", numbers, ways, ADJUSTED)


def _by(formula: Callable[[Floats, Floats, Floats], Floats]) -> Callable[[Box], tuple[Interval, ...]]:
    """The adjusted R² of another formula, from F."""

    def implied(box: Box) -> tuple[Interval, ...]:
        r2, (_, df1, df2) = _share(box), _as_F(box)
        return (_over(formula, r2, df1, df2),)

    return implied


def _over(
    formula: Callable[[Floats, Floats, Floats], Floats], r2: Interval, df1: Interval, df2: Interval
) -> Interval:
    """A formula that rises with R² and df2 and falls with df1, over a box."""
    low = formula(np.asarray(r2.low), np.asarray(df1.high), np.asarray(df2.low))
    return as_interval((low, formula(np.asarray(r2.high), np.asarray(df1.low), np.asarray(df2.high))))


def _beyond(printed: Printed) -> bool:
    """Tell whether a share lies above 1, of which another check tells."""
    return printed.interval().low > 1


def _judged(
    case: Case, name: str, quantity: str, numbers: Numbers, ways: Sequence[Way], bounds: Interval,
    doubts: tuple[str, ...] = (LEAST_SQUARES,),
) -> Finding:  # fmt: skip
    return judge(
        case,
        Comparison(name, quantity, numbers, ways, bounds=bounds, doubts=doubts, excuses=_excuses(case.claim)),
    )


# -- the change of R² -------------------------------------------------------------------------------------


@check(
    "r2-change-from-F",
    title="change of R² against the F of the change",
    kinds=("F-test",),
    quantity="delta_r2",
    needs=("delta_r2", "F", "df1", "df2"),
    beside="R² with the step, where it is printed",
    formula="ΔR² = (1 − R²) df1 F / df2, at most df1 F / (df1 F + df2), as R² is no less than its change",
    source="Cohen & Cohen (1983) Applied Multiple Regression/Correlation Analysis, 4.4",
    limits="Conditional at most: the SE behind F may be robust ones. Without R² the change is only bounded above.",
    agrees=(
        "Step 2 added to the model, R² = .39, ΔR² = .05, F change (1, 95) = 7.9, p = .006.",
        "Step 2 added to the model, ΔR² = .05, ΔF(1, 95) = 7.9, p = .006.",
    ),
    conditional=("Step 2 added to the model, ΔR² = .15, ΔF(1, 95) = 7.9, p = .006.",),
)
def r2_change_from_F(case: Case) -> Iterable[Finding]:
    """Compare what a step adds with its F; an F of the whole model only bounds it."""
    claim = case.claim
    tested = _tested(claim)
    if tested is None or _beyond(claim.values["delta_r2"]):
        return
    numbers = {"delta_r2": claim.values["delta_r2"], **tested}
    at_most = "the change of R² is at most the R² that F alone would give"
    ways = [Way(lambda box: (Interval(0.0, _share(box).high),), (), (at_most,))]
    if "r2" in claim.values and not _beyond(claim.values["r2"]):
        numbers["r2"] = claim.values["r2"]
        other = "R² is not that of the model with this step, or F not that of the change"
        ways = [Way(_change), Way(ways[0].implied, (other,), alone=True)]
        if _fits_whole_model(numbers):
            whole = "F is that of the whole model, as R² shows; what a step adds is at most R²"
            ways = [Way(lambda box: (Interval(0.0, box["r2"].high),), (), (whole,)), *ways]
    yield _judged(case, "r2-change-from-F", "delta_r2", numbers, ways, SHARE)


def _change(box: Box) -> tuple[Interval, ...]:
    """(1 − R²) df1 F / df2: rises with F and df1, falls with R² and df2."""
    F, df1, df2 = _as_F(box)
    r2 = box["r2"].within(0.0, 1.0)
    low = regressions.r2_change_from_F(F.low, df1.low, df2.high, r2.high)
    return (as_interval((low, regressions.r2_change_from_F(F.high, df1.high, df2.low, r2.low))),)


# -- R² and adjusted R² -----------------------------------------------------------------------------------

OTHER_FORMULAS: tuple[tuple[str, Callable[[Floats, Floats, Floats], Floats]], ...] = (
    ("R² is adjusted by Wherry's formula with n − k", regressions.adjusted_r2_wherry),
    ("R² is adjusted by the formula of Olkin and Pratt", regressions.adjusted_r2_olkin_pratt),
    ("R² is adjusted by Stein's formula for new cases", regressions.adjusted_r2_stein),
)
MOST_EARLIER = 20
"""Predictors of earlier steps that are expected at most beside those of one step; more are an assumption."""
EARLIER = "df1 counts the predictors of this step alone, the model has those of earlier steps too"
MORE_PREDICTORS = "the model has more predictors than F tests, or a larger penalty was used"
OTHER_DF = "the df of F are not those of the residual (clustered standard errors, one predictor of several)"


@check(
    "adjusted-r2",
    title="adjusted R² against R²",
    kinds=("F-test", "t-test", "regression", "estimate", "correlation"),
    quantity="adjusted_r2",
    needs=("r2", "adjusted_r2"),
    beside="F with both df, where they are printed",
    formula="adjusted R² = 1 − (1 − R²)(n − 1) / (n − k − 1) = 1 − (1 − R²)(df1 + df2) / df2, at most R²",
    source="Ezekiel (1930) Methods of Correlation Analysis; Olkin & Pratt (1958) Annals of Mathematical Statistics 29:201-211; Yin & Fan (2001) Journal of Experimental Education 69:203-224",
    limits="A smaller or larger one than the usual formula gives is conditional, as there are others and df may be those of a step; one above R² is not. Pseudo-R² and mixed models are not rebuilt.",
    agrees=(
        "The model predicted loaf height, R² = .34, adjusted R² = .32, F(3, 96) = 16.5, p < .001.",
        "The model predicted loaf height (R² = .34, adjusted R² = .32).",
    ),
    conditional=("The model predicted loaf height, R² = .34, adjusted R² = .22, F(3, 96) = 16.5, p < .001.",),
    inconsistent=("The model predicted loaf height, R² = .34, adjusted R² = .38, F(3, 96) = 16.5, p < .001.",),
)  # fmt: skip
def adjusted_r2(case: Case) -> Iterable[Finding]:
    """Compare both R² by the usual formula where df are known, else by their order."""
    claim = case.claim
    if any(_beyond(claim.values[name]) for name in ("r2", "adjusted_r2")):
        return
    numbers = {name: claim.values[name] for name in ("adjusted_r2", "r2")}
    below = Way(_at_most_r2, (), ("an adjusted R² is at most R²",))
    unbiased = Way(_at_most_unbiased, (OTHER_FORMULAS[1][0],), alone=True)
    ways = [below, unbiased]
    tested = _tested(claim)
    if tested is not None and "df1" in tested:
        numbers |= {name: tested[name] for name in ("df1", "df2")}
        ways = [_of_step()] if _is_of_step(claim, tested) else [Way(_usual)]
        ways += [Way(_beside(formula), (words,), alone=True) for words, formula in OTHER_FORMULAS]
        ways.append(
            Way(lambda box: (Interval(-math.inf, _usual(box)[0].high),), (MORE_PREDICTORS,), alone=True)
        )
        ways.append(Way(below.implied, (OTHER_DF,), alone=True))
    yield _judged(case, "adjusted-r2", "adjusted_r2", numbers, ways, ADJUSTED, doubts=())


def _is_of_step(claim: Claim, tested: Numbers) -> bool:
    """Tell whether F and its df are those of what a step adds: the model has the predictors of earlier steps besides."""
    if "delta_r2" in claim.values and "r2" in claim.values:
        return not _fits_whole_model({"r2": claim.values["r2"], **tested})
    return claim.says("model-step")


def _of_step() -> Way:
    """The usual formula where df1 counts the predictors of one step alone."""

    def implied(box: Box) -> tuple[Interval, ...]:
        df1 = box["df1"]
        with_earlier = {**box, "df1": Interval(df1.low, df1.high + MOST_EARLIER)}
        return _usual(with_earlier)

    return Way(implied, (), (EARLIER,))


def _at_most_r2(box: Box) -> tuple[Interval, ...]:
    return (Interval(-math.inf, box["r2"].high),) if box["r2"].low <= 1 else ()


FEWEST_RESIDUAL_DF = 4.0
"""With fewer than these the unbiased estimate is hardly ever used; it exceeds R² most with one predictor and few df."""


def _at_most_unbiased(box: Box) -> tuple[Interval, ...]:
    r2 = box["r2"].within(0.0, 1.0).high
    return (Interval(-math.inf, float(regressions.adjusted_r2_olkin_pratt(r2, 1.0, FEWEST_RESIDUAL_DF))),)


def _usual(box: Box) -> tuple[Interval, ...]:
    return (_over(regressions.adjusted_r2, box["r2"].within(0.0, 1.0), box["df1"], box["df2"]),)


def _beside(formula: Callable[[Floats, Floats, Floats], Floats]) -> Callable[[Box], tuple[Interval, ...]]:
    return lambda box: (_over(formula, box["r2"].within(0.0, 1.0), box["df1"], box["df2"]),)


# -- R² and r ---------------------------------------------------------------------------------------------


@check(
    "r2-from-r",
    title="R² against the correlation that is printed with it",
    kinds=("correlation", "F-test", "t-test"),
    quantity="r2",
    needs=("r2", "r"),
    formula="R² = r² with one predictor, or r the multiple correlation",
    source="Cohen & Cohen (1983) Applied Multiple Regression/Correlation Analysis, 2.6 and 3.5",
    limits="Conditional at most: R² may be adjusted, or that of a model with further predictors, which is larger. Rank correlations are not squared.",
    agrees=("Height rose with hydration (r = .58, R² = .34, p < .001).",),
    conditional=("Height rose with hydration (r = .58, R² = .43, p < .001).",),
    unchecked=("Height rose with hydration (Spearman’s ρ = .58, R² = .43, p < .001).",),
)
def r2_from_r(case: Case) -> Iterable[Finding]:
    """Compare R² with the square of r."""
    claim = case.claim
    if _beyond(claim.values["r2"]) or claim.values["r"].interval().absolute().low > 1:
        return
    numbers = {name: claim.values[name] for name in ("r2", "r")}
    more = "R² is that of a model with further predictors"
    less = "R² is adjusted, or r not the correlation of the model's own cases"
    ways = (
        Way(lambda box: (_square(box),)),
        Way(lambda box: (Interval(_square(box).low, 1.0),), (more,), alone=True),
        Way(lambda box: (Interval(0.0, _square(box).high),), (less,), alone=True),
    )
    ranks = claim.suggests("spearman", "rank-test")
    excuses = (f"r may be {STATED['spearman']}",) if ranks else _excuses(claim)
    yield judge(case, Comparison("r2-from-r", "r2", numbers, ways, bounds=SHARE, excuses=excuses))


def _square(box: Box) -> Interval:
    r = box["r"].absolute().within(0.0, 1.0)
    return Interval(r.low**2, r.high**2)
