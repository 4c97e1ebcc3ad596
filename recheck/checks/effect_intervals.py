"""Checks of the confidence interval of a standardized mean difference against the effect, its t and the group sizes."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from recheck.checks.compare import Comparison, judge, unchecked
from recheck.checks.designs import TWO_GROUPS, whole
from recheck.checks.effect_ends import UNSTATED_KIND, beside, worst
from recheck.checks.effect_interval_methods import Method, Setting, others, swapped, usual
from recheck.checks.effects import OTHER_SD, correction
from recheck.checks.groups import link_doubts, linked_groups, unsigned
from recheck.checks.interval_methods import USUAL_LEVEL
from recheck.checks.intervals import OTHER_METHOD, ends, level_of
from recheck.checks.models import foreign_model
from recheck.checks.registry import Case, check
from recheck.model import STANDARDIZED, Claim, Finding, Interval, Printed, shown
from recheck.recompute.intervals import t_from_ci_bounds
from recheck.reconcile.readings import Box, Numbers, Way

INFINITY = math.inf
OTHER_FORMULA = "the interval is by another published formula (of the variance; t in place of z; the interval of the difference over the SD)"
OTHER_CORRECTION = "the interval is that of {other}, not of {name}"
OF_DIFFERENCE = "the interval may be that of the mean difference, which t fits as well"
OF_A_MEAN = "the interval may be that of a mean, told beside the effect"
SAME_SD = "the interval and the effect rest on the same SD (the variances are unequal, or the test is one for unequal ones)"


def slack_of(end: str, d: float, k: float, setting: Setting) -> tuple[float, float]:
    """How far, in half widths, an end by a bootstrap may lie nearer to 0 and further from it than the exact one.

    Draws of few cases repeat some of them, which makes the SD small and d large; and what the SD adds to the
    variance of d, d²/(2 N) for normal scores, is up to 16 times that for log-normal ones and next to nothing for
    scores at two points. The samples of `tests.soundness` lie within it.
    """
    added = d * d / (2 * setting.total)
    share = added / (k * k + added)
    wider, narrower = math.sqrt(1 + 15 * share) - 1, 1 - math.sqrt(1 - share)
    towards, away = 0.5 + 4 / max(setting.df, 2.0), 0.7 + 16 / max(setting.df, 2.0)
    inner = (end == "ci_low") == (d > 0)
    return (towards + wider, away + narrower) if inner else (towards + narrower, away + wider)


@check(
    "ci-of-d",
    title="confidence interval of d or g against the effect, t and df",
    kinds=("t-test", "F-test", "estimate", "comparison"),
    quantity="ci_low",
    needs=("ci_low", "ci_high"),
    beside="d, g, Δ, d_z or d_av; t and df, or F(1, df), or two linked groups with n",
    formula="ends k δ with P(T ≤ d/k | df, δ) = (1 ± level)/2, k = √(1/n1 + 1/n2), 1/√n or d/t; or d ∓ z √V",
    source="Steiger & Fouladi (1997) in What If There Were No Significance Tests? ch. 9; Hedges & Olkin (1985) Statistical Methods for Meta-Analysis, ch. 5",
    limits="Noncentral and normal intervals agree; other published formulas and bootstraps that come near are conditional.",
    agrees=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23, p = .003, d = 1.08, 95% CI [0.37, 1.77].",
    ),
    conditional=(
        "The apprentices improved, paired t(23) = 2.94, p = .007, dz = 0.60, 95% CI [0.11, 1.01].",
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), d = 1.08, 95% CI [1.02, 1.14].",
    ),
    inconsistent=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23, p = .003, d = 1.08, 95% CI [1.02, 1.14].",
    ),
)  # fmt: skip
def ci_of_d(case: Case) -> Iterable[Finding]:
    """Compare both ends with the effect; the end that fits worse is told."""
    claim, name = case.claim, case.claim.interval_of
    statistic = "t" if "t" in claim.values else "F" if _of_two_groups(claim) else ""
    if name not in STANDARDIZED or name not in claim.values:
        return
    df = claim.values["df2" if statistic == "F" else "df"].number if statistic else _df_of_groups(case, name)
    low, high = ends(claim)
    d = claim.values[name]
    if (
        low.interval().low > high.interval().high
        or not low.interval().low <= d.number <= high.interval().high
    ):
        return
    if df < 2 or d.relation not in ("=", "≈"):
        return
    setting = _setting(case, name, df)
    if setting.factor is None and d.interval().low <= 0 <= d.interval().high:
        yield unchecked(
            case, "ci-of-d", "ci_low", f"{shown(name)} may be 0, and the group sizes are not printed"
        )
        return
    if statistic:
        numbers = {name: d, statistic: unsigned(claim.values[statistic])}
    else:
        numbers = {name: d, **{f"n{i}": group.values["n"] for i, group in enumerate(case.groups, 1)}}
    doubts = [*beside(claim, name, low), *(() if statistic else (*link_doubts(case), *_maybe_pairs(case)))]
    if (
        claim.says("welch")
        or df != round(df)
        or _spreads_apart(case)
        or _another_sd(claim, numbers, statistic, setting)
    ):
        doubts.append(SAME_SD)
    excuses = _excuses(case, numbers.get(statistic), low, high, df)
    found = []
    for end, printed in (("ci_low", low), ("ci_high", high)):
        ways = tuple(_ways(claim, name, statistic, setting, end))
        told = {end: printed, **numbers}
        found.append(
            judge(case, Comparison("ci-of-d", end, told, ways, doubts=tuple(doubts), excuses=excuses))
        )
    yield worst(found)


def _spreads_apart(case: Case) -> bool:
    """Tell whether one group's SD is so much larger that a bootstrap, or another SD below d, gives quite another interval."""
    spreads = [
        abs(group.values[n].number) for group in case.groups for n in ("sd", "se") if n in group.values
    ]
    return len(spreads) == 2 and max(spreads) > _APART * min(spreads)


def _another_sd(claim: Claim, numbers: Numbers, statistic: str, setting: Setting) -> bool:
    """Tell whether d, beside t, shows that it may be divided by an SD quite unlike the pooled one.

    With equal groups d is 2 t / √N; sizes that are not printed may part the two as well.
    """
    if not statistic or not setting.total > 2 or claim.says("paired", "one-sample"):
        return False
    name = next(iter(numbers))
    t = numbers[statistic].number if statistic == "t" else math.sqrt(max(numbers[statistic].number, 0.0))
    factor = setting.factor or 2 / math.sqrt(setting.total)
    ratio = abs(numbers[name].number) / (factor * t) if t > 0 else 1.0
    return name in ("d", "g", "delta") and not 1 / _APART < ratio < _APART


_APART = 1.8
"""How many times one SD is the other where a bootstrap, or the choice of the SD below d, gives quite another interval."""


def _of_two_groups(claim: Claim) -> bool:
    return {"F", "df1", "df2"} <= claim.values.keys() and claim.values["df1"].number == 1


def _setting(case: Case, name: str, df: float) -> Setting:
    """The df, total and sizes behind an effect, as far as they are printed."""
    corrected = name == "g"
    if name in ("d_z", "d_av", "d_rm") or case.claim.says("paired", "one-sample"):
        factor = 1 / math.sqrt(df + 1) if name == "d_z" else None
        return Setting(df, df + 1, factor, (df,), correction("exact", df), corrected)
    sizes = [whole(group.values.get("n")) or 0 for group in case.groups] if linked_groups(case) else []
    if len(sizes) == 2 and min(sizes) > 1 and df <= sum(sizes) - 1.5:
        pooled, factor = sum(sizes) - 2.0, math.sqrt(1 / sizes[0] + 1 / sizes[1])
        smaller = (sizes[0] - 1.0, sizes[1] - 1.0)
        known = None if name == "delta" else factor
        return Setting(pooled, pooled + 2, known, smaller, correction("exact", pooled), corrected)
    return Setting(df, df + 2, None, (df / 2,), correction("exact", df), corrected)


def _df_of_groups(case: Case, name: str) -> float:
    """n1 + n2 − 2 of two linked groups behind a d or g that is told without a test; 0 where there are none."""
    sizes = [whole(group.values.get("n")) or 0 for group in case.groups] if linked_groups(case) else []
    usable = len(sizes) == 2 and min(sizes) > 1 and name in ("d", "g")
    return sum(sizes) - 2.0 if usable and not case.claim.says("paired", "repeated", "one-sample") else 0.0


def _maybe_pairs(case: Case) -> tuple[str, ...]:
    """A doubt where two groups of one size, told without a test, may be the same units measured twice."""
    sizes = {group.values["n"].value for group in case.groups}
    told = case.claim.says("independent", "between-groups", "pooled", "welch")
    return () if told or len(sizes) > 1 else (TWO_GROUPS,)


def _excuses(
    case: Case, statistic: Printed | None, low: Printed, high: Printed, df: float
) -> tuple[str, ...]:
    claim = case.claim
    said = [words for word, words in UNSTATED_KIND.items() if claim.suggests(word)]
    foreign = foreign_model((claim, *case.groups), fitted=bool(case.groups))
    if _of_raw_scores(case, low, high):
        said.append(OF_A_MEAN)
    if statistic is None:
        return tuple(said[:1] or ([foreign] if foreign else []))
    t = statistic.interval().absolute()
    if "t" not in claim.values:
        t = Interval(math.sqrt(t.low), math.sqrt(t.high))
    if _fits_difference(t, low.interval(), high.interval(), level_of(claim)[0], df) and _may_be_centre(
        case, low, high
    ):
        said.append(OF_DIFFERENCE)
    return tuple(said[:1] or ([foreign] if foreign else []))


def _of_raw_scores(case: Case, low: Printed, high: Printed) -> bool:
    """Tell whether an interval holds a mean of its groups, or is far too wide for a standardized difference."""
    interval = Interval(low.interval().low, high.interval().high)
    means = [group.values["mean"].interval() for group in case.groups if "mean" in group.values]
    effect = abs(case.claim.values[case.claim.interval_of or ""].number)
    return interval.high - interval.low > _WIDEST * (1 + effect) or any(
        interval.meets(mean) for mean in means
    )


_WIDEST = 15
"""Intervals of d from two groups of two are at most so wide, in units of 1 + |d|."""


def _fits_difference(t: Interval, low: Interval, high: Interval, level: float, df: float) -> bool:
    """Tell whether an interval gives the printed t as that of a mean difference would, by t or z, rounded figures allowed for."""
    if low.high >= high.low:
        return False
    for freedom in (df, INFINITY):
        least, most = t_from_ci_bounds(low.low, low.high, high.low, high.high, level, freedom)
        found = Interval(float(least), float(most)).absolute()
        if found.low * 0.99 <= t.high and t.low <= found.high * 1.01:
            return True
    return False


def _may_be_centre(case: Case, low: Printed, high: Printed) -> bool:
    """Tell whether the difference of the two means, where they are known, can be the middle of the interval."""
    if linked_groups(case) is None:
        return True
    first, second = (group.values["mean"].interval() for group in case.groups)
    a, b = low.interval(), high.interval()
    middle = Interval((a.low + b.low) / 2, (a.high + b.high) / 2)
    return middle.meets(first.minus(second)) or middle.meets(second.minus(first))


def _ways(claim: Claim, name: str, statistic: str, setting: Setting, end: str) -> Iterator[Way]:
    """Ways to one end: exact and normal of the effect as named, then by other formulas, corrections and levels."""
    level, printed = level_of(claim)
    given = () if printed else (USUAL_LEVEL,)
    other_name = OTHER_CORRECTION.format(name=shown(name), other="d" if setting.corrected else "g")
    factors: list[tuple[float | None, tuple[str, ...]]] = [(setting.factor, ())]
    if setting.factor and statistic and name in ("d", "g"):
        factors.append((None, (OTHER_SD,)))
    for factor, words in factors:
        base = _Base(name, statistic, factor, setting.correction if setting.corrected else 1.0, end)
        yield Way(_end(base, usual(setting), level), words, given)
        yield Way(_end(base, others(setting), level), (*words, OTHER_FORMULA), given)
        if name in ("d", "g", "d_z"):
            yield Way(_end(base, swapped(setting), level), (*words, other_name), given)
        for other in () if printed else (0.90, 0.99):
            yield Way(_end(base, usual(setting), other), (*words, f"the interval is a {other:.0%} one"))
    base = _Base(name, statistic, setting.factor, setting.correction if setting.corrected else 1.0, end)
    yield Way(_end(base, usual(setting)[:1], level, setting), (OTHER_METHOD,), given)


@dataclass(frozen=True, slots=True)
class _Base:
    """Which end is sought, of which effect, beside which statistic; `factor` d / t where sizes tell it; J of g, else 1."""

    name: str
    statistic: str
    factor: float | None
    correction: float
    end: str

    def factors(self, box: Box) -> tuple[float, ...] | None:
        """The factor d / t: known by the sizes, else over the box of d and t."""
        if self.factor is not None:
            return (self.factor,)
        d, t = box[self.name].absolute(), box[self.statistic].absolute()
        if self.statistic == "F":
            t = Interval(math.sqrt(t.low), math.sqrt(t.high))
        if d.low <= 0 or t.low <= 0:
            return None
        return d.low / t.high / self.correction, d.high / t.low / self.correction


def _end(
    base: _Base, methods: Sequence[Method], level: float, resampled: Setting | None = None
) -> Callable[[Box], tuple[Interval, ...]]:
    """One end by each method over the box of d and of the factor d / t; `resampled` widens it
    by what a bootstrap may do.

    All ends rise with d for a fixed factor; as the factor k rises they part, since the ends are quantiles of
    d U - k Z, or d ∓ c √(k² + …): the corners of the box bound them.
    """
    side = 0 if base.end == "ci_low" else 1

    def implied(box: Box) -> tuple[Interval, ...]:
        d, factors = box[base.name], base.factors(box)
        if factors is None:
            return ()
        corners = np.array([(x, k) for x in (d.low, d.high) for k in factors])
        found = []
        for method in methods:
            both = method(corners[:, 0], corners[:, 1], level)
            low, high = float(np.min(both[side])), float(np.max(both[side]))
            if resampled:
                half, middle = float(np.max(both[1] - both[0])) / 2, (d.low + d.high) / 2
                near = slack_of(base.end, middle, float(np.min(corners[:, 1])), resampled)
                below, above = near if middle > 0 else near[::-1]
                low, high = low - below * half, high + above * half
            found.append(Interval(low, high))
        return tuple(i for i in found if not (math.isnan(i.low) or math.isnan(i.high)))

    return implied
