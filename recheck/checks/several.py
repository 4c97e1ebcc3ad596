"""Three or more linked group summaries: whether df fit a one-way analysis of variance, and what it implies for F."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from recheck.checks.designs import MISSING, SE_READING, UNNAMED, Fit, whole
from recheck.model import N_OF_GROUP, Claim, Interval, Printed
from recheck.recompute import anova, anova_box
from recheck.reconcile.readings import Box, Numbers, Way

ONE_WAY = "one-way analysis of variance"
WELCH_F = "F is Welch's, for unequal variances"
BROWN_FORSYTHE = "F is Brown and Forsythe's, for unequal variances"
CHEAP_GROUPS = 6
"""Groups up to which F is quick enough to be tried with many corrections of a number."""


@dataclass(frozen=True, slots=True)
class Several:
    """Group summaries as numbers named `mean1`, `sd1`, `n1`, `mean2` …, all ns known."""

    numbers: Numbers
    spread: str
    unlabelled: bool
    ns: tuple[int, ...]
    of_whole: bool

    @property
    def size(self) -> int:
        """The number of groups."""
        return len(self.ns)

    @property
    def total(self) -> int:
        """The number of cases in all groups."""
        return sum(self.ns)

    @property
    def impossible(self) -> bool:
        """Whether a spread is printed that cannot be."""
        return any(n.startswith(self.spread) and p.interval().high < 0 for n, p in self.numbers.items())


def several_of(groups: Sequence[Claim]) -> Several | None:
    """Gather summaries; None where a mean, a spread or an n is missing, or spreads are of two kinds."""
    numbers: dict[str, Printed] = {}
    ns = []
    spread = "sd" if all("sd" in group.values for group in groups) else "se"
    for i, group in enumerate(groups, 1):
        n = whole(group.values.get("n"))
        if n is None or n < 2 or "mean" not in group.values or spread not in group.values:
            return None
        ns.append(n)
        numbers |= {f"{name}{i}": group.values[name] for name in ("mean", spread, "n")}
    unlabelled = any(group.says("spread-unlabelled") for group in groups)
    of_whole = any(N_OF_GROUP in group.notes for group in groups)
    return Several(numbers, spread, unlabelled, tuple(ns), of_whole)


Arrays = tuple[NDArray[np.float64], ...]


def box_arrays(box: Box, several: Several, *, as_se: bool) -> Arrays:
    """Low and high means, low and high SDs, ns; SEs (and unlabelled spreads read as SE) times √n."""
    ns = np.array(several.ns, dtype=float)
    factor = np.sqrt(ns) if as_se or several.spread == "se" else np.ones_like(ns)
    means = [box[f"mean{i}"] for i in range(1, several.size + 1)]
    spreads = [box[f"{several.spread}{i}"] for i in range(1, several.size + 1)]
    return (
        np.array([m.low for m in means]), np.array([m.high for m in means]),
        np.array([s.low for s in spreads]) * factor, np.array([s.high for s in spreads]) * factor, ns,
    )  # fmt: skip


def _known(low: object, high: object) -> Interval:
    """An interval of F; an end that cannot be computed (no difference over no spread) is open."""
    a, b = float(low), float(high)  # type: ignore[arg-type]
    return Interval(0.0 if math.isnan(a) else a, math.inf if math.isnan(b) else b)


def one_way_F(box: Box, several: Several, *, as_se: bool = False) -> Interval:
    """F of the one-way analysis of variance over the box."""
    factors = [math.sqrt(n) if as_se or several.spread == "se" else 1.0 for n in several.ns]
    spreads = [box[f"{several.spread}{i}"] for i in range(1, several.size + 1)]
    means = tuple((m.low, m.high) for m in (box[f"mean{i}"] for i in range(1, several.size + 1)))
    sds = tuple((s.low * factor, s.high * factor) for s, factor in zip(spreads, factors, strict=True))
    return _known(*anova_box.f_one_way_range(means, sds, several.ns))


def brown_forsythe_F(box: Box, several: Several, *, as_se: bool = False) -> Interval:
    """F* for unequal variances over the box."""
    return _known(*anova.f_brown_forsythe_bounds(*box_arrays(box, several, as_se=as_se)))


def welch_F(box: Box, several: Several, *, as_se: bool = False) -> tuple[Interval, Interval]:
    """Enclosures of Welch's F and of its second df."""
    F, df2 = anova.f_welch_bounds(*box_arrays(box, several, as_se=as_se))
    return _known(*F), _known(*df2)


def fit_one_way(claim: Claim, several: Several, box: Box) -> Fit:
    """Tell whether the printed df are those of a one-way analysis of variance, and give the ways to F."""
    k, total = several.size, several.total
    if claim.says("paired", "repeated"):
        return Fit((), "the same units are measured several times, so F depends on correlations")
    df1, df2 = claim.values.get("df1"), claim.values.get("df2")
    if df1 is not None and df1.value != k - 1:
        return Fit((), f"df1 {df1.text} is not that of a comparison of {k} groups ({k - 1})")
    classical = df2 is None or df2.value == total - k
    open_ = df2 is not None and not classical and (df2.decimals > 0 or claim.says("welch"))
    unequal = open_ and df2 is not None and _fits_unequal(df2, box, several)
    if not (classical or unequal):
        return Fit((), f"these df belong to another model than {k} groups of {total} in all")
    named = claim.says("between-groups", "independent", "welch")
    doubts = _doubts(
        several, known_df=df2 is not None, named=named, unequal=unequal and not claim.says("welch")
    )
    ways = tuple(_ways(claim, several, unequal=unequal))
    return Fit(ways, "", doubts, "independent", sure=not doubts)


def _doubts(several: Several, *, known_df: bool, named: bool, unequal: bool) -> tuple[str, ...]:
    if unequal:
        return ("these df are those of Welch's F, not of a model with covariates or of fewer cases",)
    if known_df:
        return ()
    missing = (MISSING,) if several.of_whole else ()
    return missing if named else (UNNAMED.replace("two groups", "these groups"), *missing)


def _fits_unequal(df2: Printed, box: Box, several: Several) -> bool:
    """Tell whether df2 may be that of a test for unequal variances: as printed, rounded or floored."""
    printed = df2.interval() if df2.decimals > 0 else Interval(df2.number - 0.5, df2.number + 1.0)
    return any(
        printed.meets(welch_F(box, several, as_se=as_se)[1].guarded(1e-6))
        or printed.meets(_brown_forsythe_df(box, several, as_se=as_se))
        for as_se in {False, several.unlabelled}
    )


def _brown_forsythe_df(box: Box, several: Several, *, as_se: bool) -> Interval:
    """The second df of F* at the middle of the box, with a twentieth either way for the box."""
    m_low, m_high, s_low, s_high, ns = box_arrays(box, several, as_se=as_se)
    _, df2 = anova.f_brown_forsythe((m_low + m_high) / 2, (np.maximum(s_low, 0.0) + s_high) / 2, ns)
    return Interval(0.95 * float(df2), 1.05 * float(df2))


def _ways(claim: Claim, several: Several, *, unequal: bool) -> Iterator[Way]:
    stated = unequal or claim.says("welch")
    costly = several.size > CHEAP_GROUPS
    for as_se in (False, True) if several.unlabelled else (False,):
        extra = (SE_READING,) if as_se else ()
        if not unequal:
            open_ = (*extra, "F is the classical one") if claim.says("welch") else extra
            yield Way(_followed(one_way_F, several, as_se), open_, (ONE_WAY,), costly)
        for words, f in ((WELCH_F, _welch_alone), (BROWN_FORSYTHE, brown_forsythe_F)):
            given = (words,) if stated else ()
            yield Way(_followed(f, several, as_se), extra if stated else (*extra, words), given, costly)


def _welch_alone(box: Box, several: Several, *, as_se: bool = False) -> Interval:
    return welch_F(box, several, as_se=as_se)[0]


def _followed(
    f: Callable[..., Interval], several: Several, as_se: bool
) -> Callable[[Box], tuple[Interval, ...]]:
    return lambda box: (f(box, several, as_se=as_se),)


def turned(several: Several) -> Several | None:
    """The same groups with SDs taken for SEs or the other way round; None where that is open anyway."""
    if several.unlabelled:
        return None
    now, then = several.spread, {"sd": "se", "se": "sd"}[several.spread]
    numbers = {(then + k[2:] if k.startswith(now) else k): v for k, v in several.numbers.items()}
    return replace(several, numbers=numbers, spread=then)
