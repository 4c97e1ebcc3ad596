"""Which designs the printed df of a two-group test fit, and what each implies for t.

Summaries are compared with a test only where the df fit the design that is assumed; else they
belong to another model (a covariate, an omnibus error term, missing cases), and nothing is said.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from recheck.model import N_OF_GROUP, Claim, Interval, Printed
from recheck.recompute import two_groups
from recheck.recompute.paired import paired_t_bounds
from recheck.reconcile.readings import Box, Numbers, Way

MOST_SPLITS = 2000
"""Totals above which splits of unknown group sizes are not listed one by one."""

SE_READING = "the spread is a standard error"
N_BELOW = "the SD has n, not n − 1, in its denominator"
POOLED, WELCH, PAIRED = (
    "two independent groups, pooled variance",
    "two independent groups, Welch",
    "the same units measured twice",
)

TWO_GROUPS = "the two groups are different units, not the same ones measured twice"


@dataclass(frozen=True, slots=True)
class Groups:
    """Two linked group summaries as numbers named `mean1`, `sd1`, `n1`, `mean2` …

    `of_whole` says that the sizes are those of the whole groups, of which some cases may be missing.
    """

    numbers: Numbers
    spreads: tuple[str, str]
    unlabelled: bool
    n1: int | None
    n2: int | None
    of_whole: bool = False

    @property
    def impossible(self) -> bool:
        """Whether a spread is printed that cannot be."""
        return any(
            self.numbers[name + i].interval().high < 0 for name, i in zip(self.spreads, "12", strict=True)
        )


def whole(printed: Printed | None) -> int | None:
    """A printed count as an integer, None where it is none."""
    if printed is None or printed.relation != "=" or printed.value != printed.value.to_integral_value():
        return None
    return int(printed.value)


def groups_of(first: Claim, second: Claim) -> Groups | None:
    """Gather two summaries; None where a mean or a spread is missing."""
    numbers: dict[str, Printed] = {}
    spreads = []
    for i, claim in (("1", first), ("2", second)):
        spread = "sd" if "sd" in claim.values else "se"
        if "mean" not in claim.values or spread not in claim.values:
            return None
        spreads.append(spread)
        numbers |= {f"mean{i}": claim.values["mean"], f"{spread}{i}": claim.values[spread]}
        if "n" in claim.values:
            numbers[f"n{i}"] = claim.values["n"]
    unlabelled = first.says("spread-unlabelled") or second.says("spread-unlabelled")
    n1, n2 = whole(numbers.get("n1")), whole(numbers.get("n2"))
    of_whole = N_OF_GROUP in (*first.notes, *second.notes)
    return Groups(numbers, (spreads[0], spreads[1]), unlabelled, n1, n2, of_whole)


@dataclass(frozen=True, slots=True)
class Spreads:
    """SD intervals of both groups, made from what is printed for given group sizes."""

    low1: float
    high1: float
    low2: float
    high2: float


def sds(box: Box, groups: Groups, n1: float, n2: float, *, as_se: bool) -> Spreads:
    """SD intervals: printed SDs as they are, SEs (and unlabelled spreads read as SE) times √n."""
    ends = []
    for i, n, spread in (("1", n1, groups.spreads[0]), ("2", n2, groups.spreads[1])):
        interval = box[spread + i]
        factor = math.sqrt(n) if spread == "se" or as_se else 1.0
        ends += [max(interval.low, 0.0) * factor, max(interval.high, 0.0) * factor]
    return Spreads(*ends)


def t_interval(box: Box, groups: Groups, n1: float, n2: float, *, as_se: bool, welch: bool) -> Interval:
    """|t| over the box of means and spreads."""
    s, a, b = sds(box, groups, n1, n2, as_se=as_se), box["mean1"], box["mean2"]
    bounds = two_groups.welch_t_bounds if welch else two_groups.pooled_t_bounds
    with np.errstate(divide="ignore", invalid="ignore"):
        low, high = bounds(a.low, a.high, s.low1, s.high1, n1, b.low, b.high, s.low2, s.high2, n2)
    return known(float(low), float(high)).absolute()


def known(low: float, high: float) -> Interval:
    """An interval of which an end that cannot be computed (no difference over no spread) is open."""
    return Interval(-math.inf if math.isnan(low) else low, math.inf if math.isnan(high) else high)


def _paired_interval(box: Box, groups: Groups, n: float, *, as_se: bool) -> Interval:
    """|t| that some correlation from −1 to 1 between the two measures allows."""
    s, a, b = sds(box, groups, n, n, as_se=as_se), box["mean1"], box["mean2"]
    with np.errstate(divide="ignore", invalid="ignore"):
        low, high = paired_t_bounds(a.low, a.high, s.low1, s.high1, b.low, b.high, s.low2, s.high2, n)
    return known(float(low), float(high)).absolute()


def _splits(total: int) -> list[tuple[int, int]]:
    """All group sizes of at least two that sum to the total."""
    firsts = (
        range(2, total - 1)
        if total <= MOST_SPLITS
        else (*range(2, 200), *range(200, total - 200, total // 500), *range(total - 200, total - 1))
    )
    return [(n, total - n) for n in firsts]


def _split_intervals(box: Box, groups: Groups, total: int, *, as_se: bool) -> tuple[Interval, ...]:
    """|t| over all splits of the total, each split with the box of means and spreads; none below 4."""
    pairs = np.array(_splits(total), dtype=float).reshape(-1, 2)
    if not len(pairs):
        return ()
    n1, n2 = pairs[:, 0], pairs[:, 1]
    factor1 = np.sqrt(n1) if groups.spreads[0] == "se" or as_se else np.ones_like(n1)
    factor2 = np.sqrt(n2) if groups.spreads[1] == "se" or as_se else np.ones_like(n2)
    a, b, s1, s2 = box["mean1"], box["mean2"], box[groups.spreads[0] + "1"], box[groups.spreads[1] + "2"]
    with np.errstate(divide="ignore", invalid="ignore"):
        low, high = two_groups.pooled_t_bounds(
            a.low, a.high, max(s1.low, 0.0) * factor1, s1.high * factor1, n1,
            b.low, b.high, max(s2.low, 0.0) * factor2, s2.high * factor2, n2,
        )  # fmt: skip
    parts = [
        known(float(x), float(y)).absolute()
        for x, y in zip(np.atleast_1d(low), np.atleast_1d(high), strict=True)
    ]
    return (Interval(min(p.low for p in parts), max(p.high for p in parts)),)


@dataclass(frozen=True, slots=True)
class Fit:
    """Ways to understand the test, or why there is none.

    `sure` says that the df are those of the design for printed group sizes, or that the sentence
    names the plain test.
    """

    ways: tuple[Way, ...]
    reason: str = ""
    doubts: tuple[str, ...] = ()
    design: str = ""
    sure: bool = False


def welch_df(box: Box, groups: Groups, *, as_se: bool = False) -> Interval:
    """Satterthwaite df over the box of spreads."""
    n1, n2 = float(groups.n1 or 0), float(groups.n2 or 0)
    s = sds(box, groups, n1, n2, as_se=as_se)
    with np.errstate(divide="ignore", invalid="ignore"):
        low, high = two_groups.welch_df_bounds(s.low1, s.high1, n1, s.low2, s.high2, n2)
    return Interval(float(low), float(high))


def _fits_welch(df: Printed, box: Box, groups: Groups) -> bool:
    """Tell whether df may be Satterthwaite's: as printed, rounded, floored, or the smaller n − 1."""
    if groups.n1 is None or groups.n2 is None:
        return False
    printed = df.interval() if df.decimals > 0 else Interval(df.number - 0.5, df.number + 1.0)
    fits = any(
        printed.meets(welch_df(box, groups, as_se=as_se).guarded(1e-6))
        for as_se in {False, groups.unlabelled}
    )
    return fits or df.number == min(groups.n1, groups.n2) - 1


def fit_designs(claim: Claim, groups: Groups, box: Box) -> Fit:
    """Find the designs that the printed df fit, and the ways in which t follows from the groups."""
    df = claim.values.get("df") or claim.values.get("df2")
    if df is not None and df.relation != "=":
        df = None
    if groups.n1 is not None and groups.n2 is not None:
        return _fit_known(claim, groups, box, df, groups.n1, groups.n2)
    return _fit_unknown(claim, groups, df)


def _fit_known(claim: Claim, groups: Groups, box: Box, df: Printed | None, n1: int, n2: int) -> Fit:
    pooled = df is None or df.value == n1 + n2 - 2
    welch = df is None or _fits_welch(df, box, groups)
    paired = n1 == n2 and (df is None or df.value == n1 - 1)
    if claim.says("paired", "repeated"):
        pooled = welch = False
    elif claim.says("independent", "pooled", "welch", "between-groups"):
        paired = False
    if not (pooled or welch or paired):
        return Fit((), f"these df belong to another model than two groups of {n1} and {n2}")
    ways = tuple(
        _known_ways(claim, groups, n1, n2, pooled=pooled, welch=welch, paired=paired, same_df=df is not None)
    )
    named = claim.says("independent", "pooled", "welch", "paired")
    telling = df is not None and df.decimals > 0 and _telling(welch_df(box, groups))
    stated = claim.says("welch") or (telling and claim.suggests("welch"))
    by_welch_df = not (pooled or paired or stated)
    doubt = WELCH_DF if by_welch_df else "" if df is not None or named else UNNAMED
    missing = (MISSING,) if df is None and groups.of_whole else ()
    doubts = (doubt, *missing) if doubt else missing
    design = "" if paired and (pooled or welch) else "paired" if paired else "independent"
    return Fit(ways, "", doubts, design, sure=not doubts)


def _telling(df: Interval) -> bool:
    """Tell whether Satterthwaite df are known closely enough for a printed one to show the design."""
    return df.high - df.low <= 1.0


WELCH_DF = "these df are Welch's, not those of a model with covariates, of fewer cases or of more groups"
MISSING = "no case is missing (n is that of the whole group)"
UNNAMED_SIZES = (
    "this is the plain test of two independent groups (it is not named, and group sizes are not printed)"
)
UNNAMED_PAIRS = "this is the plain test of the same units measured twice (their number is not printed)"
UNNAMED = "this is the plain test of two groups (neither its df nor its name is printed)"


def _known_ways(
    claim: Claim, groups: Groups, n1: int, n2: int, *, pooled: bool, welch: bool, paired: bool, same_df: bool
) -> Iterator[Way]:
    for as_se in (False, True) if groups.unlabelled else (False,):
        extra = (SE_READING,) if as_se else ()

        def by_pooled(box: Box, as_se: bool = as_se) -> tuple[Interval, ...]:
            return (t_interval(box, groups, n1, n2, as_se=as_se, welch=False),)

        def by_welch(box: Box, as_se: bool = as_se) -> tuple[Interval, ...]:
            return (t_interval(box, groups, n1, n2, as_se=as_se, welch=True),)

        def by_pairs(box: Box, as_se: bool = as_se) -> tuple[Interval, ...]:
            return (_paired_interval(box, groups, n1, as_se=as_se),)

        if pooled:
            yield Way(by_pooled, extra, (POOLED,))
        if welch or (pooled and n1 != n2):
            open_ = () if welch and (claim.says("welch") or not pooled) else (WELCH,)
            yield Way(by_welch, (*extra, *open_), () if open_ else (WELCH,))
        if paired:
            open_ = () if same_df or claim.says("paired", "repeated") else (PAIRED,)
            yield Way(by_pairs, (*extra, *open_), () if open_ else (PAIRED,))


def _fit_unknown(claim: Claim, groups: Groups, df: Printed | None) -> Fit:
    """Group sizes are not printed: all splits that the df allow, or pairs."""
    if df is None or df.decimals > 0 or df.value < 1:
        return Fit((), "neither group sizes nor whole df are printed")
    if claim.says("welch"):
        return Fit((), "Welch's test is said, but group sizes are not printed")
    total = int(df.value) + 2
    two_groups_fit = whole(claim.values.get("N")) == total
    named, pairs = claim.says("independent", "pooled"), claim.says("paired")
    ways = []
    for as_se in (False, True) if groups.unlabelled else (False,):
        extra = (SE_READING,) if as_se else ()

        def by_splits(box: Box, as_se: bool = as_se) -> tuple[Interval, ...]:
            return _split_intervals(box, groups, total, as_se=as_se)

        def by_pairs(box: Box, as_se: bool = as_se) -> tuple[Interval, ...]:
            return (_paired_interval(box, groups, total - 1, as_se=as_se),)

        if not claim.says("paired", "repeated", "one-sample"):
            ways.append(
                Way(by_splits, extra, (f"{POOLED}, group sizes not printed: all splits of {total} tried",))
            )
        if not (two_groups_fit or claim.says("independent", "pooled", "welch", "between-groups")):
            # One sample measured twice is as natural here as two groups: neither size is printed.
            ways.append(Way(by_pairs, extra, (f"{PAIRED}, with a correlation that is not printed",)))
    doubt = UNNAMED_PAIRS if claim.says("repeated", "one-sample") else UNNAMED_SIZES
    design = "independent" if named else "paired" if pairs else ""
    return Fit(tuple(ways), "", () if named or pairs else (doubt,), design, sure=named or pairs)
