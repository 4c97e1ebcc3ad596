"""Checks of the confidence interval of η², ω² and f against the F that it stands beside."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from functools import lru_cache

import numpy as np
from scipy import special

from recheck.checks.effect_ends import (
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
from recheck.checks.source_rows import from_source
from recheck.checks.variance_shares import OTHER_MODELS
from recheck.model import Claim, Finding, Interval
from recheck.reconcile.readings import Box, Way

SHARES = ("partial_eta2", "eta2", "omega2", "epsilon2", "f", "f2")
OTHER_TOTAL = "the interval counts subjects, not observations"
ASYMPTOTIC = "the interval is the normal one in large samples"
FAR_ENDS = 1.5
"""How far, in half widths, ends by a bootstrap may be from the exact ones or the quantiles of draws about the estimate."""


@check(
    "ci-of-eta2",
    title="confidence interval of η², ω² or f against F and its df",
    kinds=("F-test",),
    quantity="ci_low",
    needs=("F", "df1", "df2", "ci_low", "ci_high"),
    beside="partial η², η², ω², ε², f or f²",
    formula="ends λ/(λ + df1 + df2 + 1), P(F' ≤ F | df1, df2, λ) = (1 ± level)/2; of f √(λ/(df1 + df2 + 1))",
    source="Steiger (2004) Psychological Methods 9:164-182; Smithson (2003) Confidence Intervals, ch. 5",
    limits="λ over df2, or over N of repeated measures, and one-sided intervals are conditional. An interval that leaves out its estimate, or is [0, 0], is no error.",
    agrees=("Flour mattered, F(2, 57) = 4.20, p = .020, ηp2 = .13, 90% CI [.01, .25].",),
    conditional=("Flour mattered, F(2, 57) = 4.20, p = .020, ηp2 = .13, 95% CI [.01, 1.00].",),
    inconsistent=("Flour mattered, F(2, 57) = 4.20, p = .020, ηp2 = .13, 90% CI [.11, .52].",),
)  # fmt: skip
def ci_of_eta2(case: Case) -> Iterable[Finding]:
    """Compare both ends with F; the end that fits worse is told."""
    claim, name = case.claim, case.claim.interval_of
    if name not in SHARES or name not in claim.values or from_source(claim):
        return
    low, high = ends(claim)
    df1, df2 = claim.values["df1"].number, claim.values["df2"].number
    if low.interval().low > high.interval().high or df1 <= 0 or df2 < 2 or claim.values["F"].relation != "=":
        return
    doubts = beside(claim, name, low)
    if name in ("eta2", "omega2", "epsilon2", "f", "f2") and not claim.says("between-groups"):
        doubts = (*doubts, "the effect is the only one of its analysis, or a partial one")
    if any(claim.values[n].decimals > 0 for n in ("df1", "df2")):
        doubts = (*doubts, "the interval rests on the same (corrected) df as F")
    yield worse(
        case, "ci-of-eta2", name, ("F", "df1", "df2"), lambda end: _share_ways(claim, name, df1, df2, end),
        bounds=Interval(0.0, math.inf if name in ("f", "f2") else 1.0), doubts=doubts, excuses=excuses(claim, OTHER_MODELS),
    )  # fmt: skip


def _share_ways(claim: Claim, name: str, df1: float, df2: float, end: str) -> Iterator[Way]:
    total = df1 + df2 + 1
    most = math.inf if name in ("f", "f2") else 1.0
    for level, words, given in order(claim, 0.90):
        yield way(_from_lambda(name, df1, df2, level, total, total), end, words, given)
        yield way(_from_lambda(name, df1, df2, level, df2, df2), end, (*words, OTHER_FORMULA), given)
        yield way(
            _from_lambda(name, df1, df2, level, total, total, less=True), end, (*words, OTHER_FORMULA), given
        )
        yield way(
            _from_lambda(name, df1, df2, level, df2, df2, less=True), end, (*words, OTHER_FORMULA), given
        )
        if not claim.says("between-groups", "independent"):
            least = df2 / max(df1, 1.0)
            yield way(_from_lambda(name, df1, df2, level, least, total), end, (*words, OTHER_TOTAL), given)
            one = _from_lambda(name, df1, df2, 2 * level - 1, least, total)
            yield way(open_above(one, most), end, (*words, OTHER_TOTAL, ONE_SIDED), given)
        for kept in (total, df2):
            one = _from_lambda(name, df1, df2, 2 * level - 1, kept, kept)
            yield way(open_above(one, most), end, (*words, ONE_SIDED), given)
        if name not in ("f", "f2"):
            yield way(_olkin_finn(name, df1, df2, level), end, (*words, ASYMPTOTIC), given)
    level = level_of(claim)[0]
    yield way(_from_lambda(name, df1, df2, level, df2, total), end, (OTHER_METHOD,), (), near=FAR_ENDS)
    yield way(_drawn_again(name, df1, df2, level), end, (OTHER_METHOD,), (), near=FAR_ENDS)


@lru_cache(maxsize=256)
def _lambdas(low: float, high: float, df1: float, df2: float, level: float) -> tuple[float, ...]:
    """Lower ends of λ at both ends of F, then upper ends; kept, as the readings of one claim ask for the same ones."""
    from recheck.recompute.noncentral_f import noncentral_F_lambda

    F, p = np.array([low, high, low, high]), np.repeat([(1 + level) / 2, (1 - level) / 2], 2)
    return tuple(float(x) for x in noncentral_F_lambda(F, df1, df2, p))


def _from_lambda(
    name: str, df1: float, df2: float, level: float, least: float, most: float, *, less: bool = False
) -> Callable[[Box], Corners]:
    """Ends from λ over λ plus a total from `least` to `most`; `less` takes df1 off λ, as ω² and ε² of an F do.

    λ rises with F (see `recompute.effect_intervals`), the share with λ, and falls as the total rises.
    """

    def ranges(box: Box) -> Corners:
        F = box["F"].within(0.0, math.inf)
        a, b, c, d = _lambdas(F.low, F.high, df1, df2, level)
        return Interval(share(a, most), share(b, least)), Interval(share(c, most), share(d, least))

    def share(noncentrality: float, total: float) -> float:
        over = max(noncentrality - df1, 0.0) if less else noncentrality
        if name == "f":
            return math.sqrt(over / total)
        return over / total if name == "f2" else over / (over + total)

    return ranges


def _drawn_again(name: str, df1: float, df2: float, level: float) -> Callable[[Box], Corners]:
    """Where a percentile bootstrap has its ends: quantiles of F at λ = df1 F, which lie above those of the exact interval."""

    def ranges(box: Box) -> Corners:
        F = box["F"].within(0.0, math.inf)
        return tuple(  # type: ignore[return-value]
            Interval(
                *(share(float(special.ncfdtri(df1, df2, df1 * x, p)) * df1 / df2) for x in (F.low, F.high))
            )
            for p in ((1 - level) / 2, (1 + level) / 2)
        )

    def share(f2: float) -> float:
        return {"f": math.sqrt(f2), "f2": f2}.get(name, f2 / (1 + f2))

    return ranges


def _olkin_finn(name: str, df1: float, df2: float, level: float) -> Callable[[Box], Corners]:
    """The estimate ∓ z SE by the large-sample variance of R², cut to [0, 1]; the estimate with its rounding."""

    def ranges(box: Box) -> Corners:
        from recheck.recompute.effect_intervals import normal_ci
        from recheck.recompute.effect_variances import r2_variance

        share = box[name].within(0.0, 1.0)
        at = np.array([share.low, share.high])
        low, high = normal_ci(at, r2_variance(at, df1 + df2 + 1, df1), level)
        return (
            Interval(max(float(low.min()), 0.0), max(float(low.max()), 0.0)),
            Interval(min(float(high.min()), 1.0), min(float(high.max()), 1.0)),
        )

    return ranges
