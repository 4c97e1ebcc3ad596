"""Checks of the p that is printed with a t, z, χ² or F statistic."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable
from dataclasses import replace

from recheck.checks.compare import unchecked
from recheck.checks.designs import whole
from recheck.checks.group_df import df_of_groups
from recheck.checks.p_values import (
    ANY_DF,
    NORMAL_F,
    NORMAL_P,
    ONE_TAILED,
    ROUNDED_DF,
    UNIT_DF,
    as_interval,
    judge_p,
    rounded_df,
    rounded_df1,
    tail_ways,
    tails_tried,
    with_p,
)
from recheck.checks.registry import Case, check
from recheck.checks.source_rows import OTHER_ERROR, PRINTED_ERROR, F_fits_error, alone_in_table, from_source
from recheck.model import Claim, Finding, Interval, shown
from recheck.recompute import bounds
from recheck.recompute.variances import p_of_ratio_bounds
from recheck.reconcile.readings import Box, Way


@check(
    "p-from-t",
    title="p that is printed with a t statistic",
    kinds=("t-test", "regression"),
    quantity="p",
    needs=("t", "p"),
    beside="df, else two linked groups with n",
    formula="p = 2 P(T > |t|), T with df degrees of freedom; one-tailed P(T > |t|)",
    source="Student (1908) Biometrika 6:1-25; Fisher (1925) Applications of Student's distribution, Metron 5:90-104",
    limits="A p from a permutation test, a bootstrap or an adjustment for several tests does not follow from t.",
    agrees=("The loaves differed, t(28) = 2.20, p = .036.", "The loaves differed, t(28) = −2.20, p < .05."),
    conditional=("The loaves differed, t(28) = 2.20, p = .018.",),
    inconsistent=("The loaves differed, t(28) = 2.20, p = .010.",),
)
def p_from_t(case: Case) -> Iterable[Finding]:
    """Compare the printed p with the p that t and df imply, by the number of tails."""
    claim = case.claim
    if "df" not in claim.values:
        yield from _without_df(case, "p-from-t", "t")
        return
    numbers = with_p(claim, "t", "df")

    def p_of(box: Box, used: int, df: Interval | None = None) -> Interval:
        t, around = box["t"].absolute(), df or box["df"]
        return as_interval(bounds.p_from_t_bounds(t.low, t.high, around.low, around.high, used))

    ways = list(tail_ways(claim, True, p_of))
    if numbers["df"].decimals <= 0:
        ways += tail_ways(
            claim, True, lambda box, used: p_of(box, used, rounded_df(box["df"])), words=(ROUNDED_DF,)
        )
    normal = Interval(UNIT_DF, UNIT_DF)
    ways += tail_ways(claim, True, lambda box, used: p_of(box, used, normal), words=(NORMAL_P,))
    if claim.says("mixed-model"):
        ways += tail_ways(
            claim, True, lambda box, used: p_of(box, used, Interval(1.0, UNIT_DF)), words=(ANY_DF,)
        )
    yield judge_p(case, "p-from-t", ways, numbers)


@check(
    "p-from-z",
    title="p that is printed with a z statistic",
    kinds=("z-test", "rank-test", "regression"),
    quantity="p",
    needs=("z", "p"),
    formula="p = 2 P(Z > |z|), Z standard normal; one-tailed P(Z > |z|)",
    source="Abramowitz & Stegun (1964) Handbook of Mathematical Functions, 26.2",
    limits="The exact p of a rank test does not follow from its z.",
    agrees=("Crumb scores rose, z = 2.14, p = .032.",),
    conditional=("Crumb scores rose, z = 2.14, p = .016.",),
    inconsistent=("Crumb scores rose, z = 2.14, p = .23.",),
)
def p_from_z(case: Case) -> Iterable[Finding]:
    """Compare the printed p with the p that z implies, by the number of tails."""
    claim = case.claim
    numbers = with_p(claim, "z")

    def p_of(box: Box, used: int, exact: bool = False) -> Interval:
        z = _exact_z(box["z"].absolute()) if exact else box["z"].absolute()
        return as_interval(bounds.p_from_z_bounds(z.low, z.high, used))

    ways = list(tail_ways(claim, True, p_of))
    if claim.kind == "rank-test" or claim.suggests("rank-test"):
        words = "p of the rank test is exact or continuity-corrected"
        exact = tail_ways(claim, True, lambda box, used: p_of(box, used, True), words=(words,))
        ways += (replace(way, likely=True) for way in exact)
    if claim.kind == "rank-test" and _may_be_tiny(case):
        ways.append(Way(_of_few_ranks, ("p is the exact one of a test of a few ranks",)))
    yield judge_p(case, "p-from-z", ways, numbers)


LEAST_OF_FEW = 0.02
"""Below any two-sided exact p of seven ranks or fewer: that of 3 and 4 is 2/35 at least, of 6 pairs 2/64."""


def _may_be_tiny(case: Case) -> bool:
    """Tell whether groups so small may stand behind a test of ranks that its z says little of its exact p."""
    sizes = [whole(group.values.get("n")) for group in case.groups]
    sizes += [whole(case.claim.values[name]) for name in ("n", "N") if name in case.claim.values]
    return sum(n for n in sizes if n is not None) <= 12


def _of_few_ranks(box: Box) -> tuple[Interval, ...]:
    """An exact p, by Chebyshev's inequality at most 1/z²."""
    z = box["z"].absolute()
    most = min(1.0, 1 / z.low**2) if z.low else 1.0
    return (Interval(LEAST_OF_FEW, most),) if most > LEAST_OF_FEW else ()


def _exact_z(z: Interval) -> Interval:
    """Where the z of the exact p of a rank test may lie beside its normal z.

    Bounds drawn around U for groups of 3 to 12 and W for 5 to 20 pairs, all values of the statistic;
    the exact tail is lighter far out, so the upper bound grows with z.
    """
    return Interval(max(z.low - 0.35, 0.0), z.high + 0.15 + 0.45 * max(z.high - 1.75, 0.0))


@check(
    "p-from-chi2",
    title="p that is printed with a χ² statistic",
    kinds=("chi2-test", "regression"),
    quantity="p",
    needs=("chi2", "p"),
    beside="df, else the linked counts of two or more groups",
    formula="p = P(X > χ²), X chi-squared with df degrees of freedom",
    source="Pearson (1900) Philosophical Magazine 50:157-175; Fisher (1922) J. R. Stat. Soc. 85:87-94 for df",
    limits="Exact, permutation or robust versions of the test have a p of their own.",
    agrees=("Collapse depended on the oven, χ²(1, N = 120) = 4.50, p = .034.",),
    inconsistent=("Collapse depended on the oven, χ²(3) = 4.50, p = .004.",),
    conditional=("Collapse depended on the oven, χ²(1, N = 120) = 4.50, p = .051.",),
)
def p_from_chi2(case: Case) -> Iterable[Finding]:
    """Compare the printed p with the upper tail at χ²."""
    claim = case.claim
    if "df" not in claim.values:
        yield from _without_df(case, "p-from-chi2", "chi2")
        return
    numbers = with_p(claim, "chi2", "df")

    def p_of(chi2: Interval, df: Interval) -> tuple[Interval, ...]:
        low, high = max(chi2.low, 0.0), max(chi2.high, 0.0)
        return (as_interval(bounds.p_from_chi2_bounds(low, high, df.low, df.high)),)

    ways = [Way(lambda box: p_of(box["chi2"], box["df"]))]
    one_df = numbers["df"].value == 1 and numbers["df"].decimals <= 0
    if not claim.suggests("model-fit", "uncorrected-chi2") and not _of_heterogeneity(claim):
        ways.append(
            Way(lambda box: p_of(other_chi2(box["chi2"], one_df), box["df"]), (_other_words(claim, one_df),))
        )
    if one_df and not claim.suggests("two-tailed"):
        halved = (
            Way(
                lambda box: tuple(Interval(i.low / 2, i.high / 2) for i in p_of(box["chi2"], box["df"])),
                (ONE_TAILED,),
            ),
        )
        ways += halved
    yield judge_p(case, "p-from-chi2", ways, numbers, omnibus=not one_df)


def _of_heterogeneity(claim: Claim) -> bool:
    """Tell whether χ² is that of heterogeneity (Cochran's Q), which no table of counts lies behind."""
    quote = claim.place.quote.lower()
    return claim.says("heterogeneity") or "phet" in quote or "heterogen" in quote


def _other_words(claim: Claim, one_df: bool) -> str:
    """The reading of a p that is not Pearson's, in the words of what it can be."""
    if claim.says("rank-test"):
        return "p of the rank test is exact, or the statistic is corrected for ties"
    if one_df:
        return "p belongs to another statistic of the same table (Yates, N − 1, likelihood ratio or Fisher)"
    return "p is an exact one or that of the likelihood ratio"


def other_chi2(chi2: Interval, one_df: bool) -> Interval:
    """Where the other statistics of a table with this Pearson χ² may lie.

    Bounds drawn around 2×2 tables of 10 to 300 cases with expected counts from 1 up: the likelihood
    ratio lies within 0.55 and 1.9 times χ²; the continuity correction and Fisher's p lie at most
    1.4 below √χ². The like for tables of 2×3 to 3×3 and their exact p: 0.55, 1.7 and 1.0.
    """
    step = 1.4 if one_df else 1.0
    low = min(0.55 * chi2.low, max(math.sqrt(max(chi2.low, 0.0)) - step, 0.0) ** 2)
    return Interval(low, (1.9 if one_df else 1.7) * chi2.high)


@check(
    "p-from-F",
    title="p that is printed with an F statistic",
    kinds=("F-test",),
    quantity="p",
    needs=("F", "p"),
    beside="df1 and df2, else the linked groups with n",
    formula="p = P(X > F), X with df1 and df2 degrees of freedom",
    source="Fisher (1925) Statistical Methods for Research Workers; Greenhouse & Geisser (1959) Psychometrika 24:95-112",
    limits="With repeated measures p may be corrected for sphericity while the nominal df are printed.",
    agrees=("Flour mattered, F(2, 57) = 3.40, p = .040.",),
    conditional=("Flour mattered, F(2, 57) = 3.40, p = .055.",),
    inconsistent=("Flour mattered, F(2, 57) = 3.40, p = .240.",),
)
def p_from_F(case: Case) -> Iterable[Finding]:
    """Compare the printed p with the upper tail at F."""
    claim = case.claim
    if not {"df1", "df2"} <= claim.values.keys():
        yield from _without_df(case, "p-from-F", "F")
        return
    numbers = with_p(claim, "F", "df1", "df2")

    def p_of(box: Box, df1: Interval | None = None, df2: Interval | None = None) -> tuple[Interval, ...]:
        F, a, b = box["F"], df1 or box["df1"], df2 or box["df2"]
        low, high = max(F.low, 0.0), max(F.high, 0.0)
        return (as_interval(bounds.p_from_F_bounds(low, high, a.low, a.high, b.low, b.high)),)

    def corrected(box: Box) -> tuple[Interval, ...]:
        F = box["F"]
        low, high = max(F.low, 0.0), max(F.high, 0.0)
        return (as_interval(bounds.p_corrected_F_bounds(low, high, box["df1"].low, box["df2"].high)),)

    ways = [Way(p_of)]
    if claim.says("variance-test") and not claim.says("levene"):
        ways.append(Way(_both_tails, (), ("twice the smaller tail of the ratio of two variances",)))
    whole = numbers["df1"].decimals <= 0, numbers["df2"].decimals <= 0
    between = claim.says("between-groups", "independent")
    if all(whole) and numbers["df1"].value > 1 and not between:
        stated = claim.suggests("corrected-df")
        words = "p is corrected for sphericity beside the uncorrected df"
        ways.append(Way(corrected, () if stated else (words,), (words,) if stated else (), costly=True))
    if numbers["df1"].value == 1:
        ways += _halved(claim, p_of)
    if whole[1]:
        both = whole[0] and not between
        ways.append(
            Way(
                lambda box: p_of(box, rounded_df1(box["df1"]) if both else None, rounded_df(box["df2"])),
                (ROUNDED_DF,),
            )
        )
    ways.append(Way(lambda box: p_of(box, None, Interval(UNIT_DF, UNIT_DF)), (NORMAL_F,)))
    if claim.says("mixed-model"):
        ways.append(Way(lambda box: p_of(box, None, Interval(1.0, UNIT_DF)), (ANY_DF,)))
    doubts: tuple[str, ...] = ()
    if from_source(claim) and not alone_in_table(claim):
        ways.append(Way(lambda box: p_of(box, None, Interval(1.0, box["df2"].high)), (OTHER_ERROR,)))
        doubts = () if F_fits_error(claim) else (PRINTED_ERROR,)
    yield judge_p(case, "p-from-F", ways, numbers, omnibus=numbers["df1"].value > 1, doubts=doubts)


def _both_tails(box: Box) -> tuple[Interval, ...]:
    """Two-sided p of a ratio of two variances."""
    F, n1, n2 = box["F"].within(0.0, math.inf), box["df1"].low + 1, box["df2"].low + 1
    return (as_interval(p_of_ratio_bounds(F.low, F.high, n1, n2)),)


def _without_df(case: Case, name: str, statistic: str) -> Iterable[Finding]:
    """p where no df are printed: over all df that the groups allow, conditional at most."""
    claim = case.claim
    missing = [n for n in ("df1", "df2") if n not in claim.values] if statistic == "F" else ["df"]
    dfs = df_of_groups(case, statistic)
    if dfs is None:
        if claim.kind != "regression":
            yield unchecked(case, name, "p", f"{', '.join(shown(n) for n in missing)} not printed")
        return
    doubts = ("df are those that the groups allow (they are not printed)",)
    yield judge_p(
        case, name, list(_open_ways(claim, statistic, dfs)), with_p(claim, statistic), doubts=doubts
    )


def _open_ways(claim: Claim, statistic: str, dfs: tuple[Interval, ...]) -> Iterable[Way]:
    def p_of(box: Box, factor: float = 1.0) -> tuple[Interval, ...]:
        x = box[statistic].absolute()
        if statistic == "t":
            p = as_interval(bounds.p_from_t_bounds(x.low, x.high, dfs[0].low, dfs[0].high, 2))
        elif statistic == "chi2":
            p = as_interval(bounds.p_from_chi2_bounds(x.low, x.high, dfs[0].low, dfs[0].high))
        else:
            (a, b) = dfs
            p = as_interval(bounds.p_from_F_bounds(x.low, x.high, a.low, a.high, b.low, b.high))
        return (Interval(factor * p.low, factor * p.high),)

    yield Way(p_of)
    if statistic == "chi2":
        one_df = dfs[0].high == 1
        loose = _other_words(claim, one_df)
        yield Way(lambda box: p_of({**box, statistic: other_chi2(box[statistic], one_df)}), (loose,))
    if dfs[0].high == 1 or statistic == "t":
        yield Way(lambda box: p_of(box, 0.5), (ONE_TAILED,))


def _halved(claim: Claim, p_of: Callable[[Box], tuple[Interval, ...]]) -> list[Way]:
    """With df1 = 1, F is a squared t, so its p may be one-tailed."""
    tried = dict(tails_tried(claim))
    if 1 not in tried:
        return []
    words = "p is that of a one-tailed t with t² = F"

    def implied(box: Box) -> tuple[Interval, ...]:
        return tuple(Interval(i.low / 2, i.high / 2) for i in p_of(box))

    return [Way(implied, () if tried[1] else (words,), (words,) if tried[1] else ())]
