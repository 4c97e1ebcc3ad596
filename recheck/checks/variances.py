"""Checks of tests of equal variances against the SDs and ns of their groups."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping, Sequence

import numpy as np

from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge, unchecked
from recheck.checks.designs import MISSING, SE_READING, known, whole
from recheck.checks.groups import link_doubts
from recheck.checks.models import foreign_model
from recheck.checks.registry import Case, check
from recheck.model import N_OF_GROUP, STATED, Claim, Finding, Interval, Printed
from recheck.recompute import variances
from recheck.recompute.anova import MOST_GROUPS
from recheck.reconcile.readings import Box, Numbers, Way

OTHER_DF = (
    "these df are not n − 1 of both groups, so F is another test's of equal variances, such as Levene's"
)
NO_CORRECTION = "the statistic lacks Bartlett's correction"
LISTED = "the SDs in the text are those of the groups that this test compares"


class _Spreads:
    """SDs or SEs of groups with their ns, as numbers named `sd1`, `n1`, `sd2` …; those of linked groups, else those told with the test."""

    def __init__(self, claim: Claim, groups: Sequence[Claim]) -> None:
        rows = [group.values for group in groups] or _told(claim)
        self.size = len(rows)
        self.told = not groups
        self.spread = "sd" if all("sd" in row for row in rows) else "se"
        self.ns = [whole(row.get("n")) or 0 for row in rows]
        self.complete = min(self.ns, default=0) >= 2 and all(self.spread in row for row in rows)
        self.unlabelled = any(group.says("spread-unlabelled") for group in groups)
        self.of_whole = any(N_OF_GROUP in group.notes for group in groups)
        numbers: dict[str, Printed] = {}
        for i, row in enumerate(rows, 1):
            numbers |= {f"{name}{i}": row[name] for name in (self.spread, "n") if name in row}
        self.numbers: Numbers = numbers

    def ends(self, box: Box, *, as_se: bool) -> tuple[list[float], list[float]]:
        """Low and high SDs; SEs, and unlabelled spreads read as SE, times √n."""
        turned = as_se or self.spread == "se"
        factors = [math.sqrt(n) if turned else 1.0 for n in self.ns]
        found = [box[f"{self.spread}{i}"] for i in range(1, len(self.ns) + 1)]
        return (
            [max(s.low, 0.0) * f for s, f in zip(found, factors, strict=True)],
            [max(s.high, 0.0) * f for s, f in zip(found, factors, strict=True)],
        )

    def readings(self) -> tuple[tuple[bool, tuple[str, ...]], ...]:
        """Whether the spreads are read as SE, each with the assumptions that takes."""
        return ((False, ()), (True, (SE_READING,))) if self.unlabelled else ((False, ()),)


def _told(claim: Claim) -> list[Mapping[str, Printed]]:
    """The SDs and ns of all groups, as they are listed beside the test."""
    rows: list[Mapping[str, Printed]] = []
    while {f"sd{len(rows) + 1}", f"n{len(rows) + 1}"} <= claim.values.keys():
        i = len(rows) + 1
        rows.append({"sd": claim.values[f"sd{i}"], "n": claim.values[f"n{i}"]})
    return rows


@check(
    "F-of-variances",
    title="F ratio of two variances against the SDs of its groups",
    kinds=("F-test",),
    quantity="F",
    needs=("F",),
    beside="df1 and df2; two linked groups, each with SD and n, in a sentence that names a test of variances",
    formula="F = SD1² / SD2² with n1 − 1 and n2 − 1 df, or the other way round",
    source="Fisher (1924) Proceedings of the International Congress of Mathematics, Toronto, 2:805-813",
    limits="Levene's test and Brown and Forsythe's need the single scores: unchecked.",
    agrees=(
        "Rye loaves (M = 92.4, SD = 6.1, n = 18) and wheat loaves (M = 86.0, SD = 4.8, n = 20) had equal variances, F(17, 19) = 1.61, p = .31.",
    ),
    inconsistent=(
        "Rye loaves (M = 92.4, SD = 6.1, n = 18) and wheat loaves (M = 86.0, SD = 4.8, n = 20) had equal variances, F(17, 19) = 1.16, p = .75.",
    ),
    unchecked=(
        "Rye loaves (M = 92.4, SD = 6.1, n = 18) and wheat loaves (M = 86.0, SD = 4.8, n = 20) had equal variances (Levene’s test, F(1, 36) = 1.16, p = .29).",
    ),
)
def f_of_variances(case: Case) -> Iterable[Finding]:
    """Compare F with the ratio of the two printed variances."""
    claim, groups = case.claim, case.groups
    spreads = _Spreads(claim, groups)
    if not claim.says("variance-test") or spreads.size < 2 or not {"df1", "df2"} <= claim.values.keys():
        return
    claims = (claim, *groups)
    if claim.says("levene"):
        yield unchecked(case, "F-of-variances", "F", f"summaries cannot rebuild {STATED['levene']}", claims)
        return
    if spreads.size != 2 or not spreads.complete:
        return
    df1, df2 = (whole(claim.values[name]) for name in ("df1", "df2"))
    own = tuple(n - 1 for n in spreads.ns)
    orders = [order for order in ((0, 1), (1, 0)) if (df1, df2) == (own[order[0]], own[order[1]])]
    if not orders:
        yield unchecked(case, "F-of-variances", "F", OTHER_DF, claims)
        return
    yield _judged(case, "F-of-variances", "F", spreads, list(_ratios(spreads, orders)))


def _ratios(spreads: _Spreads, orders: Sequence[tuple[int, int]]) -> Iterable[Way]:
    for as_se, words in spreads.readings():
        for first, second in orders:

            def implied(
                box: Box, a: int = first, b: int = second, as_se: bool = as_se
            ) -> tuple[Interval, ...]:
                low, high = spreads.ends(box, as_se=as_se)
                ends = variances.variance_ratio_bounds(low[a], high[a], low[b], high[b])
                return (known(float(ends[0]), float(ends[1])),)

            yield Way(implied, words)


@check(
    "bartlett-from-groups",
    title="Bartlett's test against the SDs of its groups",
    kinds=("chi2-test",),
    quantity="chi2",
    needs=("chi2",),
    beside="two or more linked groups, each with SD and n, in a sentence that names Bartlett's test",
    formula="K² = ((N − k) ln s² − Σ (n − 1) ln SD²) / C, s² the pooled variance, C = 1 + (Σ 1/(n − 1) − 1/(N − k)) / (3 (k − 1)), with k − 1 df",
    source="Bartlett (1937) Proceedings of the Royal Society A 160:268-282",
    limits="Bartlett's test of sphericity is another one.",
    agrees=(
        "Rye loaves (M = 92.4, SD = 6.1, n = 18) and wheat loaves (M = 86.0, SD = 4.8, n = 20) had equal variances (Bartlett’s K² = 1.00, df = 1, p = .32).",
    ),
    inconsistent=(
        "Rye loaves (M = 92.4, SD = 6.1, n = 18) and wheat loaves (M = 86.0, SD = 4.8, n = 20) had equal variances (Bartlett’s K² = 3.00, df = 1, p = .08).",
    ),
)
def bartlett_from_groups(case: Case) -> Iterable[Finding]:
    """Compare Bartlett's statistic with that of the printed SDs."""
    claim, groups = case.claim, case.groups
    spreads = _Spreads(claim, groups)
    if not claim.says("bartlett") or not 2 <= spreads.size <= MOST_GROUPS:
        return
    df = claim.values.get("df")
    if not spreads.complete or (df is not None and df.value != spreads.size - 1):
        return
    yield _judged(case, "bartlett-from-groups", "chi2", spreads, list(_bartlett_ways(spreads)))


def _bartlett_ways(spreads: _Spreads) -> Iterable[Way]:
    """The statistic with its correction, and without it."""
    dfs = np.array(spreads.ns, dtype=float) - 1
    correction = 1 + (np.sum(1 / dfs) - 1 / np.sum(dfs)) / (3 * (len(dfs) - 1))
    for as_se, words in spreads.readings():
        for factor, more in ((1.0, ()), (float(correction), (NO_CORRECTION,))):

            def implied(box: Box, factor: float = factor, as_se: bool = as_se) -> tuple[Interval, ...]:
                low, high = variances.bartlett_bounds(*spreads.ends(box, as_se=as_se), spreads.ns)
                found = known(float(low), float(high))
                return (Interval(max(factor * found.low, 0.0), factor * found.high),)

            yield Way(implied, (*words, *more), costly=len(dfs) > 6)


def _judged(case: Case, name: str, quantity: str, spreads: _Spreads, ways: list[Way]) -> Finding:
    claims = (case.claim, *case.groups)
    foreign = foreign_model(claims, fitted=True)
    listed = (LISTED,) if spreads.told else ()
    doubts = (*link_doubts(case), *listed, *((MISSING,) if spreads.of_whole else ()))
    numbers = {quantity: case.claim.values[quantity], **spreads.numbers}
    return judge(
        case,
        Comparison(
            name, quantity, numbers, ways, claims, bounds=NOT_NEGATIVE, doubts=doubts,
            excuses=(foreign,) if foreign else (),
        ),
    )  # fmt: skip
