"""Checks of the confidence interval of r against n, and of φ and V against χ²."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from functools import lru_cache

import numpy as np
from scipy import special

from recheck.checks.effect_ends import (
    NEAR,
    NOT_BESIDE,
    ONE_SIDED,
    OTHER_FORMULA,
    Corners,
    beside,
    excuses,
    open_above,
    order,
    way,
    worse,
)
from recheck.checks.intervals import OTHER_METHOD, ends, level_of
from recheck.checks.registry import Case, check
from recheck.model import N_OF_GROUP, Claim, Finding, Interval, Printed
from recheck.recompute.tails import t_quantile, z_quantile
from recheck.reconcile.readings import Box, Way


@check(
    "ci-of-r",
    title="confidence interval of a correlation",
    kinds=("correlation",),
    quantity="ci_low",
    needs=("r", "ci_low", "ci_high"),
    beside="df, n or N",
    formula="tanh(atanh r ∓ z/√(n − 3)), n = df + 2",
    source="Fisher (1921) Metron 1:3-32; for ranks Bonett & Wright (2000) Psychometrika 65:23-28",
    limits="Bootstrap, partial and disattenuated correlations are not rebuilt. Intervals by other formulas that come near are conditional.",
    agrees=("Height and crumb were related, r(55) = .42, p = .001, 95% CI [.18, .61].",),
    conditional=(
        "Height and crumb were related, r(55) = .42, p = .001, 95% CI [.20, .64].",
        "Height and crumb were related, r = .42, 95% CI [.38, .46], N = 57.",
    ),
    inconsistent=("Height and crumb were related, r(55) = .42, p = .001, 95% CI [.41, .43].",),
)
def ci_of_r(case: Case) -> Iterable[Finding]:
    """Compare both ends with r and n; the end that fits worse is told."""
    claim = case.claim
    low, high = ends(claim)
    sizes = _sizes_of_r(claim)
    r = claim.values["r"]
    if claim.interval_of not in (None, "r") or not sizes or low.interval().low > high.interval().high:
        return
    if abs(r.number) >= 1 or r.relation != "=" or not low.interval().low <= r.number <= high.interval().high:
        return
    size = next(name for name in SIZES_OF_R if name in claim.values)
    missing = (NONE_MISSING,) if size == "N" or N_OF_GROUP in claim.notes else ()
    yield worse(
        case, "ci-of-r", "r", (size,), lambda end: _r_ways(claim, sizes, end), bounds=Interval(-1.0, 1.0),
        doubts=(*_beside_r(claim, low), *missing), excuses=excuses(claim, ("partial", "disattenuated", "mixed-model", "imputed", "multi-regression")),
    )  # fmt: skip


def _beside_r(claim: Claim, low: Printed) -> tuple[str, ...]:
    """A doubt for intervals of tables alone: beside a correlation there is nothing else that they could belong to."""
    return (NOT_BESIDE.format(name="r"),) if claim.place.table or low.text not in claim.place.quote else ()


SIZES_OF_R = ("n", "df", "N")
"""What tells the n behind r, the surest first."""
NONE_MISSING = "no case is missing for these two variables (the number of cases is that of all)"


def _sizes_of_r(claim: Claim) -> list[tuple[float, tuple[str, ...]]]:
    """The n behind r, with what is assumed of it."""
    size = next((name for name in SIZES_OF_R if name in claim.values), None)
    number = claim.values[size].number if size else 0.0
    if number <= 4:
        return []
    return [(number + 2, ()), (number, ("what is printed as df is n",))] if size == "df" else [(number, ())]


def _r_ways(claim: Claim, sizes: list[tuple[float, tuple[str, ...]]], end: str) -> Iterator[Way]:
    for level, words, given in order(claim, 0.90, 0.99):
        z = float(z_quantile((1 - level) / 2))
        for n, more in sizes:
            t = float(t_quantile((1 - level) / 2, n - 2))
            unstated = (*words, *more)
            yield way(_fisher(z / math.sqrt(n - 3)), end, unstated, given)
            for half in (
                t / math.sqrt(n - 3),
                z / math.sqrt(n - 2),
                z / math.sqrt(n - 1),
                z * math.sqrt(1.06 / (n - 3)),
            ):
                yield way(_fisher(half), end, (*unstated, OTHER_FORMULA), given)
            yield way(_fisher(z / math.sqrt(n - 3), ranks=True), end, (*unstated, OTHER_FORMULA), given)
            for c in (z, t):
                yield way(_linear(c / math.sqrt(n - 2), 0.5), end, (*unstated, OTHER_FORMULA), given)
                yield way(_linear(c / math.sqrt(n - 1), 1.0), end, (*unstated, OTHER_FORMULA), given)
    n = sizes[0][0]
    half = float(z_quantile((1 - level_of(claim)[0]) / 2)) / math.sqrt(n - 3)
    yield way(_about(half), end, (OTHER_METHOD,), ())


def _about(half: float) -> Callable[[Box], Corners]:
    """Where a bootstrap may have its ends on Fisher's scale: from a fifth of the usual half width to four of them.

    The variance of r grows with the kurtosis of the scores: of log-normal ones to sixteen times the normal one.
    """

    def ranges(box: Box) -> Corners:
        r = box["r"].within(-0.999999, 0.999999)
        low, high = math.atanh(r.low), math.atanh(r.high)
        return (
            Interval(math.tanh(low - 4 * half), math.tanh(high - half / 5)),
            Interval(math.tanh(low + half / 5), math.tanh(high + 4 * half)),
        )

    return ranges


def _fisher(half: float, *, ranks: bool = False) -> Callable[[Box], Corners]:
    """Fisher's interval over the box of r: both ends rise with r; `ranks` has √(1 + r²/2) for Spearman's rho."""

    def ranges(box: Box) -> Corners:
        r = box["r"].within(-0.999999, 0.999999)
        values = [
            (math.atanh(x), half * (math.sqrt(1 + x * x / 2) if ranks else 1.0)) for x in (r.low, r.high)
        ]
        low, high = ([math.tanh(middle + side * h) for middle, h in values] for side in (-1, 1))
        return Interval(min(low), max(low)), Interval(min(high), max(high))

    return ranges


def _linear(half: float, power: float) -> Callable[[Box], Corners]:
    """r ∓ c (1 - r²)^power: symmetric about r, with the SE of r (power 1) or that of its t (power 1/2)."""

    def ranges(box: Box) -> Corners:
        r = box["r"].within(-1.0, 1.0)
        pairs = [(x, half * (1 - x * x) ** power) for x in (r.low, r.high)]
        low, high = [x - h for x, h in pairs], [x + h for x, h in pairs]
        return Interval(min(low), max(low)), Interval(min(high), max(high))

    return ranges


@check(
    "ci-of-v",
    title="confidence interval of φ or Cramér's V against χ²",
    kinds=("chi2-test",),
    quantity="ci_low",
    needs=("chi2", "df", "ci_low", "ci_high"),
    beside="φ or V, and N",
    formula="ends √(λ/(N (k − 1))) or √((λ + df)/(N (k − 1))), P(χ'² ≤ χ² | df, λ) = (1 ± level)/2",
    source="Steiger (2004) Psychological Methods 9:164-182; Smithson (2003) Confidence Intervals, ch. 4",
    limits="Bias-corrected V and bootstraps that come near are conditional. An interval that leaves out its estimate is no error.",
    agrees=("Collapse differed, χ2(1, N = 80) = 12.4, p < .001, φ = .39, 95% CI [.17, .61].",),
    inconsistent=("Collapse differed, χ2(1, N = 80) = 12.4, p < .001, φ = .39, 95% CI [.34, .44].",),
)
def ci_of_v(case: Case) -> Iterable[Finding]:
    """Compare both ends with χ² and N; the end that fits worse is told."""
    claim = case.claim
    name = claim.interval_of
    N = claim.values.get("N", claim.values.get("n"))
    if name not in ("phi", "cramers_v") or name not in claim.values or N is None or N.number < 5:
        return
    low, high = ends(claim)
    if (
        low.interval().low > high.interval().high
        or claim.values["df"].number < 1
        or claim.values["chi2"].relation != "="
    ):
        return
    inputs = ("chi2", "df", "N" if "N" in claim.values else "n")
    yield worse(
        case, "ci-of-v", name, inputs, lambda end: _v_ways(claim, name, N.number, end), bounds=Interval(-1.0, 1.0),
        doubts=beside(claim, name, low), excuses=excuses(claim, ("fisher-exact", "weighted", "likelihood-ratio")),
    )  # fmt: skip


def _v_ways(claim: Claim, name: str, N: float, end: str) -> Iterator[Way]:
    df = claim.values["df"].number
    sides = _sides(claim, name, N, df)
    for level, words, given in order(claim, 0.90, 0.99):
        for side in sides:
            yield way(_from_chi2(df, N * side, level, 0.0), end, words, given)
            yield way(_from_chi2(df, N * side, level, df), end, words, given)
            yield way(
                open_above(_from_chi2(df, N * side, 2 * level - 1, 0.0), 1.0),
                end,
                (*words, ONE_SIDED),
                given,
            )
            if N > 4:
                z = float(z_quantile((1 - level) / 2))
                yield way(_fisher_of(name, z / math.sqrt(N - 3)), end, (*words, OTHER_FORMULA), given)
    for side in sides:
        usual = _from_chi2(df, N * side, level_of(claim)[0], 0.0)
        yield way(usual, end, (OTHER_METHOD,), (), near=NEAR)
        yield way(_v_drawn_again(df, N * side, level_of(claim)[0]), end, (OTHER_METHOD,), (), near=NEAR)


def _sides(claim: Claim, name: str, N: float, df: float) -> list[int]:
    """The smaller side of the table less one, as far as df (which it divides) and V itself tell it; 1 for φ."""
    if name == "phi":
        return [1]
    open_ = [s for s in range(1, math.isqrt(int(df)) + 1) if df % s == 0]
    chi2, v = claim.values["chi2"].number, claim.values[name].interval()
    fitting = [
        s
        for s in open_
        if v.low <= 1.1 * math.sqrt(chi2 / (N * s)) and math.sqrt(chi2 / (N * s)) <= 1.1 * v.high
    ]
    return fitting or open_


@lru_cache(maxsize=256)
def _lambdas(low: float, high: float, df: float, level: float) -> tuple[float, ...]:
    """Lower ends of λ at both ends of χ², then upper ends; kept, as the readings of one claim ask for the same ones."""
    from recheck.recompute.noncentral_f import noncentral_chi2_lambda

    chi2, p = np.array([low, high, low, high]), np.repeat([(1 + level) / 2, (1 - level) / 2], 2)
    return tuple(float(x) for x in noncentral_chi2_lambda(chi2, df, p))


def _from_chi2(df: float, scale: float, level: float, shift: float) -> Callable[[Box], Corners]:
    """√((λ + shift)/(N (k - 1))) over the box of χ²: λ rises with χ²."""

    def ranges(box: Box) -> Corners:
        chi2 = box["chi2"].within(0.0, math.inf)
        a, b, c, d = (math.sqrt((x + shift) / scale) for x in _lambdas(chi2.low, chi2.high, df, level))
        return Interval(a, b), Interval(c, d)

    return ranges


def _v_drawn_again(df: float, scale: float, level: float) -> Callable[[Box], Corners]:
    """Where a percentile bootstrap of V has its ends: quantiles of χ² at λ = χ²."""

    def ranges(box: Box) -> Corners:
        chi2 = box["chi2"].within(0.0, math.inf)
        return tuple(  # type: ignore[return-value]
            Interval(*(math.sqrt(float(special.chndtrix(p, df, x)) / scale) for x in (chi2.low, chi2.high)))
            for p in ((1 - level) / 2, (1 + level) / 2)
        )

    return ranges


def _fisher_of(name: str, half: float) -> Callable[[Box], Corners]:
    inner = _fisher(half)
    return lambda box: inner({"r": box[name]})
