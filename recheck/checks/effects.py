"""Checks of d and g against the groups, or against t and the group sizes."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from typing import Literal

import numpy as np

from recheck.checks.compare import Comparison, judge, unchecked
from recheck.checks.designs import SE_READING, Fit, Groups, known, sds, whole
from recheck.checks.groups import fit_of, link_doubts, linked_groups, unsigned
from recheck.checks.models import foreign_model
from recheck.checks.registry import Case, check
from recheck.model import STANDARDIZED, Claim, Finding, Interval
from recheck.recompute import effect_bounds, effect_sizes
from recheck.reconcile.readings import Box, Way

INFINITY = float("inf")
Denominator = Literal["pooled", "sd1", "sd2", "mean", "rms", "population"]

DENOMINATORS: dict[Denominator, str] = {
    "pooled": "",
    "sd1": "d is divided by the SD of the first group",
    "sd2": "d is divided by the SD of the second group",
    "mean": "d is divided by the mean of the two SDs",
    "rms": "d is divided by the root mean square of the two SDs",
    "population": "the pooled SD has N, not N − 2, in its denominator",
}
ONE_GROUP: tuple[Denominator, ...] = ("sd1", "sd2")
CORRECTIONS = {
    "none": "d is not corrected for small samples",
    "exact": "d is corrected for small samples (g)",
    "approximate": "the small-sample correction is the approximate one",
}


def effect_of(claim: Claim) -> str | None:
    """The standardized mean difference that a claim prints, if it is one."""
    return next((name for name in STANDARDIZED if name in claim.values), None)


def correction(kind: str, df: float) -> float:
    """The factor of the small-sample correction."""
    if kind == "none" or df <= 1:
        return 1.0
    return float(
        effect_sizes.hedges_correction(df)
        if kind == "exact"
        else effect_sizes.hedges_correction_approximate(df)
    )


def _corrections(name: str) -> Iterator[tuple[str, tuple[str, ...]]]:
    """Corrections to try, the one that the symbol stands for first."""
    usual = "exact" if name == "g" else "none"
    yield usual, ()
    for kind, words in CORRECTIONS.items():
        if kind != usual:
            yield kind, (words,)


def _from_box(
    box: Box, groups: Groups, n1: float, n2: float, denominator: Denominator, *, as_se: bool
) -> Interval:
    s, a, b = sds(box, groups, n1, n2, as_se=as_se), box["mean1"], box["mean2"]
    with np.errstate(divide="ignore", invalid="ignore"):
        low, high = effect_bounds.d_bounds(
            a.low, a.high, s.low1, s.high1, n1, b.low, b.high, s.low2, s.high2, n2, denominator=denominator
        )
    return known(float(low), float(high)).absolute()


def _independent_ways(name: str, groups: Groups, n1: float, n2: float) -> Iterator[Way]:
    for as_se in (False, True) if groups.unlabelled else (False,):
        for denominator, words in DENOMINATORS.items():
            for kind, more in _corrections(name):
                usual = denominator == "pooled" or (name == "delta" and denominator in ("sd1", "sd2"))
                unstated = (*((SE_READING,) if as_se else ()), *(() if usual else (words,)), *more)

                def implied(
                    box: Box, d: Denominator = denominator, k: str = kind, as_se: bool = as_se
                ) -> tuple[Interval, ...]:
                    factor = correction(k, n1 + n2 - 2)
                    return (_from_box(box, groups, n1, n2, d, as_se=as_se).times(factor),)

                yield Way(implied, unstated)


def _paired_way(groups: Groups, name: str, n: float, *, stated: bool) -> Way:
    """d_z, d_av or d_rm with a correlation that is not printed: bounded above alone.

    d_z is t/√n; d_av and d_rm divide the difference by at least the smaller SD, since the variance
    of the differences is at least 2 s1 s2 (1 − r). As r nears 1, d_rm goes to 0; the rough 2t/√df of
    two groups, worked out for pairs, is the largest.
    """

    def implied(box: Box) -> tuple[Interval, ...]:
        s, a, b = sds(box, groups, n, n, as_se=False), box["mean1"], box["mean2"]
        if "t" not in box or n < 2:
            return (Interval(0.0, INFINITY),)
        D = a.minus(b).absolute()
        smallest = min(s.low1, s.low2)
        by_sd = D.high / smallest if smallest > 0 else INFINITY
        return (Interval(0.0, max(2 * box["t"].absolute().high / math.sqrt(n - 1), by_sd)),)

    open_ = name in ("d", "g") and not stated
    return Way(implied, (PAIRS,) if open_ else (), () if open_ else (PAIRS,))


@check(
    "d-from-groups",
    title="d or g against the means, SDs and ns of its two groups",
    kinds=("t-test", "F-test", "estimate", "comparison"),
    quantity="d",
    needs=(),
    beside="d or g; two linked groups, each with mean and SD or SE; n of each, else whole df",
    formula="d = (M1 − M2) / s, s pooled; g = J d, J = Γ(m/2) / (√(m/2) Γ((m − 1)/2)), m = n1 + n2 − 2",
    source="Hedges (1981) Journal of Educational Statistics 6:107-128; Cohen (1988) Statistical Power Analysis",
    limits="Other denominators are readings. Adjusted effects are not rebuilt. Without a test beside it d is conditional at most.",
    agrees=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23, d = 1.08.",
    ),
    conditional=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), d = 1.80.",
    ),
    inconsistent=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23, d = 1.80.",
    ),
)
def d_from_groups(case: Case) -> Iterable[Finding]:
    """Compare |d| or |g| with the two groups, the pooled SD first."""
    name, linked, fit = effect_of(case.claim), linked_groups(case), fit_of(case)
    if name is None or linked is None or fit is None:
        return
    groups, claims = linked
    # Of pairs d_z and d_rm have no bound as long as neither t nor the correlation of both measures is known.
    of_pairs = case.claim.says("paired", "repeated") and not {"t", "F"} & case.claim.values.keys()
    if groups.impossible or of_pairs:
        return
    if fit.reason:
        yield unchecked(case, "d-from-groups", name, fit.reason, claims)
        return
    foreign = foreign_model(claims, fitted=fit.sure)
    numbers = {name: unsigned(case.claim.values[name]), **groups.numbers}
    if "t" in case.claim.values:
        numbers["t"] = unsigned(case.claim.values["t"])
    sized = groups.n1 is not None and groups.n2 is not None
    tested = case.claim.kind.endswith("-test")
    doubts = (
        *link_doubts(case),
        *(() if case.claim.values.keys() & {"df", "df2"} else fit.doubts if tested else (UNADJUSTED,)),
        *(() if sized else ("the effect is that of these two groups (their sizes are not printed)",)),
    )
    comparison = Comparison(
        check="d-from-groups",
        quantity=name,
        numbers=numbers,
        ways=tuple(_group_ways(case.claim, name, groups, fit)),
        claims=claims,
        bounds=Interval(0.0, INFINITY),
        doubts=doubts,
        excuses=(foreign,) if foreign else (),
    )
    yield judge(case, comparison)


def _group_ways(claim: Claim, name: str, groups: Groups, fit: Fit) -> Iterator[Way]:
    """Ways from the two groups to d: as independent groups, as pairs, by rough formulas from t."""
    if fit.design != "paired" and not claim.says("paired", "repeated", "one-sample"):
        if groups.n1 is None or groups.n2 is None:
            df = whole(claim.values.get("df")) or whole(claim.values.get("df2")) or 0
            yield from _split_ways(name, groups, df + 2)
        else:
            yield from _independent_ways(name, groups, groups.n1, groups.n2)
            yield from _rough_ways(claim, name, groups.n1 + groups.n2)
    if fit.design != "independent" or claim.says("paired", "repeated"):
        pairs = groups.n1 or (whole(claim.values.get("df")) or 1) + 1
        yield _paired_way(groups, name, float(pairs), stated=claim.says("paired"))


def _rough_ways(claim: Claim, name: str, total: int) -> Iterator[Way]:
    """d from the printed t by a formula for equal groups, whatever the sizes are."""
    if "t" not in claim.values or total <= 2:
        return
    for words, factor in ((BY_DF, 2 / math.sqrt(total - 2)), (BY_TOTAL, 2 / math.sqrt(total))):
        for kind, more in _corrections(name):
            c = correction(kind, total - 2)
            yield Way(_times_t(factor * c, factor * c), (words, *more))


def _split_ways(name: str, groups: Groups, total: int) -> Iterator[Way]:
    """d without group sizes: the pooled SD lies between the two SDs, whatever the split."""
    for kind, words in _corrections(name):

        def implied(box: Box, k: str = kind) -> tuple[Interval, ...]:
            parts = [_from_box(box, groups, 2.0, 2.0, which, as_se=False) for which in ONE_GROUP]
            factor = correction(k, max(total - 2, 2))
            return (Interval(min(p.low for p in parts), max(p.high for p in parts)).times(factor),)

        if "se" not in groups.spreads:
            yield Way(implied, words)


@dataclass(frozen=True, slots=True)
class Sizes:
    """What is known of the group sizes behind a t: both, or their total with all splits."""

    n1: int | None
    n2: int | None
    total: int


HAND = "d was worked out by hand from rounded means and SDs"
SPLIT = "the groups are of unequal size"
UNADJUSTED = "d is that of these very scores, unadjusted"
BY_DF = "d = 2t/√df"
BY_TOTAL = "d = 2t/√N"
PAIRS = "the effect is that of paired differences (d_z, d_av or d_rm)"
OTHER_SD = "d has another denominator than the pooled SD"


def _by_hand(inner: Callable[[Box], tuple[Interval, ...]]) -> Callable[[Box], tuple[Interval, ...]]:
    """Widen d by what rounded means and SDs can do to it.

    With SDs of two significant digits the half units of two means and of the SD are each at most
    a twentieth of the SD: |Δd| ≤ .1 + .05 d.
    """

    def implied(box: Box) -> tuple[Interval, ...]:
        return tuple(Interval(max(i.low * 0.95 - 0.1, 0.0), i.high * 1.05 + 0.1) for i in inner(box))

    return implied


def _times_t(low: float, high: float) -> Callable[[Box], tuple[Interval, ...]]:
    def implied(box: Box) -> tuple[Interval, ...]:
        t = box["t"].absolute()
        return (Interval(t.low * low, t.high * high),)

    return implied


def _factor(n1: float, n2: float) -> float:
    return math.sqrt(1.0 / n1 + 1.0 / n2)


def t_ways(claim: Claim, name: str, sizes: Sizes) -> Iterator[Way]:
    """Ways from t to d: two groups (sizes printed, equal or any), pairs, rough formulas."""
    paired_only = claim.says("paired", "repeated", "one-sample")
    independent_only = claim.says("independent", "pooled", "welch", "between-groups") or (
        sizes.n1 is not None and not paired_only
    )
    df = sizes.total - 2
    for kind, words in _corrections(name):
        c = correction(kind, df if not paired_only else df + 1)
        for unstated, low, high in _factors(
            sizes, paired_only=paired_only, independent_only=independent_only, name=name
        ):
            inner = _times_t(low * c, high * c)
            yield Way(inner, (*unstated, *words))
            yield Way(_by_hand(inner), (*unstated, *words, HAND))


def _factors(
    sizes: Sizes, *, paired_only: bool, independent_only: bool, name: str
) -> Iterator[tuple[tuple[str, ...], float, float]]:
    """Factors d/|t| with the assumptions of each."""
    total = sizes.total
    if not paired_only and name != "d_z":
        if sizes.n1 is not None and sizes.n2 is not None:
            exact = _factor(sizes.n1, sizes.n2)
            yield (), exact, exact
            yield (OTHER_SD,), *_other_denominators(sizes.n1, sizes.n2, exact)
        else:
            half = total // 2
            exact = _factor(half, total - half)
            yield (), exact, exact
            yield (SPLIT,), exact, _factor(2, total - 2) if total >= 4 else INFINITY
            yield (OTHER_SD,), *_other_denominators(half, total - half, exact)
        yield (BY_DF,), 2 / math.sqrt(total - 2), 2 / math.sqrt(total - 2)
        yield (BY_TOTAL,), 2 / math.sqrt(total), 2 / math.sqrt(total)
    if not independent_only:
        n = total - 1
        yield (), 1 / math.sqrt(n), 1 / math.sqrt(n)
        yield (PAIRS,), 0.0, 2 / math.sqrt(max(n - 1, 1))


def _other_denominators(n1: int, n2: int, exact: float) -> tuple[float, float]:
    """Range of d/t when d is divided by one group's SD, or by a mean of the two.

    The pooled variance is a weighted mean of the two variances, so one SD exceeds the pooled SD by
    at most √(m/(n − 1)), m = n1 + n2 − 2. Below there is no bound; SDs are taken to differ by no
    more than a factor of four.
    """
    m = n1 + n2 - 2
    smallest = min(n1, n2) - 1
    return (exact * math.sqrt(smallest / m) if smallest > 0 else 0.0), exact * 3.0


@check(
    "d-from-t",
    title="d or g against t and the group sizes",
    kinds=("t-test",),
    quantity="d",
    needs=("t", "df"),
    beside="d or g",
    formula="d = t √(1/n1 + 1/n2) for two groups, d_z = t/√n for pairs; g = J d",
    source="Hedges (1981) Journal of Educational Statistics 6:107-128; Rosenthal (1991) Meta-Analytic Procedures for Social Research, from memory",
    limits="Welch's t, adjusted means and mixed models give another ratio of d to t.",
    agrees=(
        "An independent-samples t test showed a difference, t(34) = 3.23, p = .003, d = 1.08.",
        "The apprentices improved, paired t(23) = 2.94, d = 0.60.",
    ),
    inconsistent=("An independent-samples t test showed a difference, t(34) = 3.23, p = .003, d = 0.28.",),
)
def d_from_t(case: Case) -> Iterable[Finding]:
    """Compare |d| or |g| with |t| and the group sizes, where the groups themselves are not linked."""
    claim, name = case.claim, effect_of(case.claim)
    if name is None or (len(case.groups) == 2 and linked_groups(case)):
        return
    sizes = _sizes(case)
    if sizes is None:
        yield unchecked(
            case, "d-from-t", name, "the df are not whole, so group sizes cannot be told from them"
        )
        return
    named = claim.says("independent", "pooled", "paired", "one-sample")
    foreign = foreign_model((claim,), fitted=named)
    printed = unsigned(claim.values[name])
    numbers = {name: printed, "t": unsigned(claim.values["t"]), "df": claim.values["df"]}
    doubts = () if named else ("t is that of two groups or of pairs (the design is not stated)",)
    yield judge(
        case,
        Comparison(
            "d-from-t", name, numbers, tuple(t_ways(claim, name, sizes)), bounds=Interval(0.0, INFINITY),
            doubts=doubts, excuses=(foreign,) if foreign else (),
        ),
    )  # fmt: skip


def _sizes(case: Case) -> Sizes | None:
    df = whole(case.claim.values["df"])
    if df is None or df < 2 or case.claim.says("welch"):
        return None
    sizes = [whole(group.values.get("n")) for group in case.groups]
    if len(sizes) == 2 and sizes[0] and sizes[1] and sizes[0] + sizes[1] - 2 == df:
        return Sizes(sizes[0], sizes[1], df + 2)
    return Sizes(None, None, df + 2)
