"""The ways to understand a power statement: which test, which tails, whose size, which effect."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from itertools import product

from recheck.checks.power_designs import (
    Effect,
    PowerDesign,
    correlation,
    frequencies,
    linear_model,
    one_mean,
    two_means,
    two_proportions,
)
from recheck.checks.registry import Case
from recheck.model import STATED, Claim, Interval, Printed
from recheck.reconcile.readings import MOST_UNSTATED, Box

FOREIGN = (
    "repeated", "covariate-adjusted", "mixed-model", "clustered", "simulated", "sequential", "equivalence", "survival",
    "bayesian", "bootstrap", "permutation", "rank-test", "imputed", "weighted", "robust", "transformed", "model-fit", "adjusted-p",
    "adjusted-p-post-hoc", "other-effect", "contrast", "marginal", "partial", "spearman", "likelihood-ratio",
)  # fmt: skip
"""Models whose power does not follow from one effect size and one n."""


@dataclass(frozen=True, slots=True)
class Test:
    """A design with how the effect is got from the printed numbers, and what was assumed to take it.

    `swapped` says that the text names another test, so that only a size that fits closely speaks for this
    one; `two_means` that it is the t test of two groups of equal size.
    """

    design: PowerDesign
    effect: Callable[[Box], tuple[Effect, Effect]]
    numbers: tuple[str, ...]
    unstated: tuple[str, ...] = ()
    swapped: bool = False
    two_means: bool = False


@dataclass(frozen=True, slots=True)
class Taken:
    """One understanding: a test, its tails, its level where the text prints none, and whose size n is."""

    test: Test
    tails: int
    alpha: float | None
    times: float
    rounded: bool
    unstated: tuple[str, ...]
    given: tuple[str, ...]
    close: bool

    def level(self, box: Box) -> float:
        """The level: as printed, else as assumed."""
        return middle(box["alpha"]) if self.alpha is None else self.alpha

    def effect(self, box: Box) -> Effect:
        """The effect as printed, or the largest that was rounded to it."""
        return self.test.effect(box)[1 if self.rounded else 0]


def middle(interval: Interval) -> float:
    """The printed value of a rounded number."""
    return (interval.low + interval.high) / 2


def exact(printed: Printed) -> Printed:
    """A number of the plan without its relation: `power of at least 80%` plans with 80%."""
    return replace(printed, relation="=")


def foreign(claim: Claim) -> str:
    """Why a power statement cannot be rebuilt; empty where it can."""
    for word in FOREIGN:
        # The level of a test among several is printed as it was used, or n is larger for it.
        if claim.says(word) and not (word.startswith("adjusted-p") and claim.says("n-required")):
            return f"the power of {STATED[word]} does not follow from one effect and one n"
    if claim.says("multi-regression") and not {"f2"} & claim.values.keys():
        return f"the power of {STATED['multi-regression']} needs f² and the number of predictors"
    if "r" in claim.values and claim.values.keys() & {"d", "mean_difference", "effect_size"}:
        return "the effect depends on the correlation of the measurements too"
    return ""


def tests_of(claim: Claim) -> tuple[Test, ...] | str:
    """The tests that the statement may be about, the likeliest first; else what is missing."""
    values = claim.values
    if "d_z" in values:
        return (Test(one_mean("the same units measured twice"), _single("d_z"), ("d_z",)),)
    if {"mean_difference", "sd"} <= values.keys() and "d" not in values:
        return _of_means(claim, _quotient, ("mean_difference", "sd"))
    if {"proportion1", "proportion2"} <= values.keys():
        shares = tuple(values[name].percent for name in ("proportion1", "proportion2"))
        return (Test(two_proportions(_ratio(claim)), _proportions(shares), ("proportion1", "proportion2")),)
    for name, found in _BY_EFFECT.items():
        if name in values:
            return found(claim, name)
    return "no effect size is printed with it"


def _single(name: str, function: Callable[[float], float] = float) -> Callable[[Box], tuple[Effect, Effect]]:
    def effect(box: Box) -> tuple[Effect, Effect]:
        return (function(middle(box[name])),), (function(box[name].high),)

    return effect


def _quotient(box: Box) -> tuple[Effect, Effect]:
    top, bottom = box["mean_difference"], box["sd"]
    return (middle(top) / middle(bottom),), (top.high / max(bottom.low, 1e-12),)


def _proportions(percent: tuple[bool, ...]) -> Callable[[Box], tuple[Effect, Effect]]:
    scales = [100 if share else 1 for share in percent]

    def effect(box: Box) -> tuple[Effect, Effect]:
        first, second = box["proportion1"], box["proportion2"]
        low, high = (first, second) if middle(first) < middle(second) else (second, first)
        by = scales if low is first else scales[::-1]
        return (middle(low) / by[0], middle(high) / by[1]), (
            max(low.low, 0) / by[0],
            min(high.high / by[1], 1.0),
        )

    return effect


def _ratio(claim: Claim) -> float:
    ratio = claim.values.get("ratio")
    value = 1.0 if ratio is None else ratio.number
    return max(value, 1 / value)


def _of_means(
    claim: Claim, effect: Callable[[Box], tuple[Effect, Effect]], names: tuple[str, ...]
) -> tuple[Test, ...]:
    """A t test by d: of two groups, of pairs or of one sample, as the text says."""
    ratio = _ratio(claim)
    two = Test(two_means(ratio), effect, names, two_means=ratio == 1)
    pairs = Test(one_mean("the same units measured twice"), effect, names)
    one = Test(one_mean("one sample against a fixed value"), effect, names)
    if claim.says("paired") and not claim.says("independent"):
        return (pairs, replace(two, unstated=("two independent groups are meant",), swapped=True))
    if claim.says("one-sample") and not claim.says("independent"):
        return (one, replace(two, unstated=("two independent groups are meant",), swapped=True))
    said = claim.says("independent") or "n" in claim.values
    assumed = "the same units are measured twice (d_z)"
    if claim.says("paired"):
        return (two, replace(pairs, unstated=(assumed,)))
    return (two, replace(pairs, unstated=(assumed,), swapped=said))


def _d(claim: Claim, name: str) -> tuple[Test, ...] | str:
    return _of_means(claim, _single(name), (name,))


def _squared(value: float) -> float:
    return value * value


def _from_eta2(value: float) -> float:
    return value / max(1 - value, 1e-12)


def _f(claim: Claim, name: str) -> tuple[Test, ...] | str:
    """An analysis of variance; one factor unless the numerator's df says otherwise."""
    values = claim.values
    function = _from_eta2 if name == "partial_eta2" else _squared
    groups = values.get("k")
    k = int(groups.value) if groups is not None else 2 if claim.says("t-test-named") else 0
    if not k:
        return "the number of groups is not printed with it"
    df1 = int(values["df1"].value) if "df1" in values else k - 1
    if claim.says("interaction") and "df1" not in values:
        return "with several factors the df of the effect must be printed"
    words = f"{k} independent groups" + (f", {df1} df of the effect" if "df1" in values else "")
    return (Test(linear_model(words, df1, k, k), _single(name, function), (name,)),)


def _f2(claim: Claim, name: str) -> tuple[Test, ...] | str:
    """A regression: all predictors tested together, or as many as the numerator's df says."""
    values = claim.values
    if "predictors" not in values:
        return "the number of predictors is not printed with it"
    p = int(values["predictors"].value)
    effect = _single(name)
    if "df1" in values:
        df1 = int(values["df1"].value)
        return (Test(linear_model(f"{df1} of {p} predictors tested", df1, p + 1, 1), effect, (name,)),)
    every = Test(linear_model(f"{p} predictors tested together", p, p + 1, 1), effect, (name,))
    single = linear_model(f"one of {p} predictors tested", 1, p + 1, 1)
    return (every, Test(single, effect, (name,), ("one of the predictors is tested",) if p > 1 else ()))


def _r(_: Claim, name: str) -> tuple[Test, ...] | str:
    return (Test(correlation(), _single(name), (name,)),)


def _w(claim: Claim, name: str) -> tuple[Test, ...] | str:
    if "df" not in claim.values:
        return "the degrees of freedom are not printed with it"
    return (Test(frequencies(int(claim.values["df"].value)), _single(name), (name,)),)


def _unnamed(claim: Claim, name: str) -> tuple[Test, ...] | str:
    """An effect size without a symbol: that of the test which the statement names."""
    for word, found in (
        ("anova-named", _f),
        ("correlation-named", _r),
        ("regression-named", _f2),
        ("chi2-named", _w),
    ):
        if claim.says(word) and not claim.says("t-test-named"):
            return found(claim, name)
    return _d(claim, name)


_BY_EFFECT: dict[str, Callable[[Claim, str], tuple[Test, ...] | str]] = {
    "d": _d, "f2": _f2, "f": _f, "partial_eta2": _f, "cohens_w": _w, "r": _r, "effect_size": _unnamed,
}  # fmt: skip


def understandings(case: Case, tests: tuple[Test, ...]) -> Iterator[Taken]:
    """Every way to take the statement with at most two unstated assumptions."""
    claim = case.claim
    for test, (alpha, no_level, level), rounded in product(tests, _levels(case), (False, True)):
        for (tails, sided), (times, size, swapped) in product(_tails(claim, test), _sizes(claim, test)):
            effect = ("the effect was rounded",) if rounded else ()
            unstated = (*test.unstated, *sided, *size, *no_level, *effect)
            close = test.swapped or swapped
            if len(unstated) <= MOST_UNSTATED and not (close and rounded):
                yield Taken(test, tails, alpha, times, rounded, unstated, (test.design.words, *level), close)


def _levels(case: Case) -> list[tuple[float | None, tuple[str, ...], tuple[str, ...]]]:
    if "alpha" in case.claim.values:
        return [(None, (), ())]
    alpha = case.settings.alpha
    source = "taken as" if case.settings.alpha_source == "default" else "as for the tests,"
    return [(alpha, (), (f"α {source} {alpha:g}",))]


def _tails(claim: Claim, test: Test) -> list[tuple[int, tuple[str, ...]]]:
    if not test.design.sided or claim.says("two-tailed"):
        return [(2, ())]
    if claim.says("one-tailed"):
        return [(1, ())]
    return [(2, ()), (1, ("the test is one-sided",))]


def _sizes(claim: Claim, test: Test) -> list[tuple[float, tuple[str, ...], bool]]:
    """How many times the size of one group the printed size is."""
    groups = test.design.groups
    if "n" in claim.values or groups == 1:
        return [(1.0, (), False)]
    if claim.says("in-total"):
        return [(groups, (), False), (1.0, ("N is the size of each group, not of all",), True)]
    return [(groups, (), False), (1.0, ("N is the size of each group",), False)]


def left_open(case: Case) -> tuple[str, ...]:
    """What the statement does not say; without it a contradiction is no more than conditional."""
    claim, values = case.claim, case.claim.values
    means = values.keys() & {"d", "d_z", "mean_difference", "effect_size"}
    named = {
        "t-test-named": means, "anova-named": values.keys() & {"f", "partial_eta2"}, "correlation-named": values.keys() & {"r"},
        "regression-named": values.keys() & {"f2"}, "chi2-named": values.keys() & {"cohens_w", "proportion1"},
    }  # fmt: skip
    open_: list[str] = []
    if not any(effects and claim.says(word) for word, effects in named.items()):
        open_.append("the test")
    if means and not (claim.says("independent", "paired", "one-sample") or values.keys() & {"d_z", "n"}):
        open_.append("the design")
    if values.keys() & {"f", "partial_eta2"} and not claim.says("between-groups", "t-test-named"):
        open_.append("that no factor is repeated")
    sided = values.keys() & {"r", "proportion1"} or means
    if sided and not claim.says("two-tailed", "one-tailed"):
        open_.append("whether the test is one- or two-sided")
    if "alpha" not in values:
        open_.append("α")
    one_group = claim.says("paired", "one-sample") or "d_z" in values
    if means and not one_group and "n" not in values and not claim.says("in-total"):
        open_.append("whether N is the size of each group or of all")
    if "effect_size" in values:
        open_.append("which effect size is meant")
    return (f"no other analysis was meant; the text does not say {', '.join(open_)}",) if open_ else ()
