"""Checks of the p that is printed with a test statistic."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from dataclasses import replace

from recheck.checks.compare import Comparison, judge, unchecked
from recheck.checks.registry import Case, check
from recheck.model import Claim, Finding, Interval, Printed
from recheck.recompute import bounds, ranks, tails
from recheck.reconcile.readings import Box, Numbers, Way

P_RANGE = Interval(0.0, 1.0)
UNIT_DF = 1e9
"""Degrees of freedom at which t is normal to double precision."""

ONE_TAILED = "p is one-tailed"
WRONG_DIRECTION = "p is one-tailed and the effect goes against the stated direction"
ROUNDED_DF = "the printed df are a rounded or floored fractional df"
NORMAL_P = "p comes from the normal distribution"
FLOOR = "p is the smallest that the program prints, so smaller ones are printed alike"
ANY_DF = "p rests on another approximation to the df, as mixed models allow"


def _tailed(claim: Claim) -> tuple[tuple[int, bool], ...]:
    """Numbers of tails to try, each with whether it is stated."""
    if claim.suggests("one-tailed") and not claim.says("two-tailed"):
        return ((1, claim.says("one-tailed")), (2, not claim.says("one-tailed")))
    if claim.suggests("two-tailed") and not claim.says("equivalence"):
        return ((2, True),)
    return ((2, True), (1, False))


def _p_numbers(claim: Claim, *names: str) -> Numbers:
    return {name: claim.values[name] for name in (*names, "p")}


def _floor_of(p: Printed) -> bool:
    """Tell whether p is a power of ten with its last digit alone: .001, .0001."""
    return p.relation == "=" and p.decimals >= 3 and p.value == p.unit


def _with_floor(ways: list[Way], p: Printed) -> list[Way]:
    """Add the reading that a program prints no smaller p than this one."""
    if not _floor_of(p):
        return ways
    top = float(p.value + p.unit / 2)
    floored = []
    for way in ways:
        if len(way.unstated) <= 1:

            def implied(
                box: Box, inner: Callable[[Box], tuple[Interval, ...]] = way.implied
            ) -> tuple[Interval, ...]:
                return tuple(Interval(i.low, max(i.high, top)) for i in inner(box) if i.low <= top)

            floored.append(replace(way, implied=implied, unstated=(*way.unstated, FLOOR)))
    return [*ways, *floored]


def _tail_ways(
    claim: Claim, signed: bool, p_of: Callable[[Box, int], Interval], *, words: tuple[str, ...] = ()
) -> Iterator[Way]:
    """Ways by number of tails: `p_of(box, tails)` gives the p in the direction of the statistic."""
    printed = claim.values["p"]
    for tails_used, stated in _tailed(claim):
        said = tails_used == 1 and stated
        given = ("one-tailed, as stated",) if said else ()
        mark = () if stated else (ONE_TAILED if tails_used == 1 else "p is two-tailed",)

        def implied(box: Box, used: int = tails_used) -> tuple[Interval, ...]:
            return (p_of(box, used),)

        yield Way(implied, (*words, *mark), given)
        if tails_used == 1 and signed and (printed.interval().high >= 0.5 or said):

            def against(box: Box) -> tuple[Interval, ...]:
                p = p_of(box, 1)
                return (Interval(1.0 - p.high, 1.0 - p.low),)

            yield Way(against, (*words, WRONG_DIRECTION))


def _excuses(claim: Claim) -> tuple[str, ...]:
    """Why p cannot be rebuilt from the statistic at all."""
    reasons = []
    if claim.suggests("permutation"):
        reasons.append("p comes from a permutation or exact test")
    if claim.says("bootstrap"):
        reasons.append("p may come from a bootstrap")
    if claim.says("bayesian"):
        reasons.append("the analysis is Bayesian")
    if claim.says("imputed"):
        reasons.append("estimates and df are pooled over imputed data sets")
    return tuple(reasons)


def _adjusted(claim: Claim, omnibus: bool = False) -> str:
    """Why p may lie above what the statistic implies: adjusting for several tests only enlarges it."""
    if claim.suggests("adjusted-p") or (claim.suggests("adjusted-p-post-hoc") and not omnibus):
        return "p may be adjusted for several tests, which enlarges it by an amount that the statistic does not tell"
    return ""


def _judge_p(case: Case, name: str, ways: list[Way], numbers: Numbers, *, omnibus: bool = False) -> Finding:
    return judge(
        case,
        Comparison(
            check=name,
            quantity="p",
            numbers=numbers,
            ways=_with_floor(ways, numbers["p"]),
            bounds=P_RANGE,
            excuses=_excuses(case.claim),
            excess=_adjusted(case.claim, omnibus),
        ),
    )


def _interval(pair: tuple[object, object]) -> Interval:
    low, high = pair
    return Interval(float(low), float(high))  # type: ignore[arg-type]


def _about(df1: Interval) -> Interval:
    """The corrected numerator df, never below 1, that may have been rounded to these."""
    return Interval(max(df1.low - 0.5, 1.0), df1.high + 0.5)


def _around(df: Interval) -> Interval:
    """The fractional df that may have been rounded or floored to these."""
    return Interval(max(df.low - 0.5, 0.01), df.high + 1.0)


@check(
    "p-from-t",
    title="p that is printed with a t statistic",
    kinds=("t-test",),
    quantity="p",
    needs=("t", "df", "p"),
    formula="p = 2 P(T > |t|), T with df degrees of freedom; one-tailed P(T > |t|)",
    source="Student (1908) The probable error of a mean, Biometrika 6:1-25",
    limits="A p from a permutation test, a bootstrap or an adjustment for several tests does not follow from t.",
    agrees=("The loaves differed, t(28) = 2.20, p = .036.", "The loaves differed, t(28) = −2.20, p < .05."),
    conditional=("The loaves differed, t(28) = 2.20, p = .018.",),
    inconsistent=("The loaves differed, t(28) = 2.20, p = .010.",),
)
def p_from_t(case: Case) -> Iterable[Finding]:
    """Compare the printed p with the p that t and df imply, by the number of tails."""
    claim = case.claim
    numbers = _p_numbers(claim, "t", "df")

    def p_of(box: Box, used: int, df: Interval | None = None) -> Interval:
        t, around = box["t"].absolute(), df or box["df"]
        return _interval(bounds.p_from_t_bounds(t.low, t.high, around.low, around.high, used))

    ways = list(_tail_ways(claim, True, p_of))
    if numbers["df"].decimals <= 0:
        ways += _tail_ways(
            claim, True, lambda box, used: p_of(box, used, _around(box["df"])), words=(ROUNDED_DF,)
        )
    normal = Interval(UNIT_DF, UNIT_DF)
    ways += _tail_ways(claim, True, lambda box, used: p_of(box, used, normal), words=(NORMAL_P,))
    if claim.suggests("mixed-model"):
        ways += _tail_ways(
            claim, True, lambda box, used: p_of(box, used, Interval(1.0, UNIT_DF)), words=(ANY_DF,)
        )
    yield _judge_p(case, "p-from-t", ways, numbers)


@check(
    "p-from-z",
    title="p that is printed with a z statistic",
    kinds=("z-test", "rank-test"),
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
    numbers = _p_numbers(claim, "z")

    def p_of(box: Box, used: int, exact: bool = False) -> Interval:
        z = _exact_z(box["z"].absolute()) if exact else box["z"].absolute()
        return _interval(bounds.p_from_z_bounds(z.low, z.high, used))

    ways = list(_tail_ways(claim, True, p_of))
    if claim.kind == "rank-test" or claim.suggests("rank-test"):
        words = "p of the rank test is exact or continuity-corrected"
        ways += _tail_ways(claim, True, lambda box, used: p_of(box, used, True), words=(words,))
    yield _judge_p(case, "p-from-z", ways, numbers)


def _exact_z(z: Interval) -> Interval:
    """Where the z of the exact p of a rank test may lie beside its normal z.

    Bounds drawn around U for groups of 3 to 12 and W for 5 to 20 pairs, all values of the statistic;
    the exact tail is lighter far out, so the upper bound grows with z.
    """
    return Interval(max(z.low - 0.35, 0.0), z.high + 0.15 + 0.45 * max(z.high - 1.75, 0.0))


@check(
    "p-from-chi2",
    title="p that is printed with a χ² statistic",
    kinds=("chi2-test",),
    quantity="p",
    needs=("chi2", "df", "p"),
    formula="p = P(X > χ²), X chi-squared with df degrees of freedom",
    source="Pearson (1900) Philosophical Magazine 50:157-175",
    limits="Exact, permutation or robust versions of the test have a p of their own.",
    agrees=("Collapse depended on the oven, χ²(1, N = 120) = 4.50, p = .034.",),
    inconsistent=("Collapse depended on the oven, χ²(3) = 4.50, p = .004.",),
    conditional=("Collapse depended on the oven, χ²(1, N = 120) = 4.50, p = .051.",),
)
def p_from_chi2(case: Case) -> Iterable[Finding]:
    """Compare the printed p with the upper tail at χ²."""
    claim = case.claim
    numbers = _p_numbers(claim, "chi2", "df")

    def p_of(chi2: Interval, df: Interval) -> tuple[Interval, ...]:
        low, high = max(chi2.low, 0.0), max(chi2.high, 0.0)
        return (_interval(bounds.p_from_chi2_bounds(low, high, df.low, df.high)),)

    ways = [Way(lambda box: p_of(box["chi2"], box["df"]))]
    one_df = numbers["df"].value == 1 and numbers["df"].decimals <= 0
    if not claim.suggests("model-fit") and not claim.suggests("uncorrected-chi2"):
        ways.append(Way(lambda box: p_of(_other_chi2(box["chi2"], one_df), box["df"]), (OTHER_CHI2,)))
    if one_df and not claim.suggests("two-tailed"):
        halved = (
            Way(
                lambda box: tuple(Interval(i.low / 2, i.high / 2) for i in p_of(box["chi2"], box["df"])),
                (ONE_TAILED,),
            ),
        )
        ways += halved
    yield _judge_p(case, "p-from-chi2", ways, numbers, omnibus=not one_df)


OTHER_CHI2 = "p belongs to another statistic of the same table (Yates, N − 1, likelihood ratio or Fisher)"


def _other_chi2(chi2: Interval, one_df: bool) -> Interval:
    """Where the other statistics of a table with this Pearson χ² may lie.

    Bounds drawn around 2×2 tables of 10 to 300 cases with expected counts from 1 up: the likelihood
    ratio lies within 0.55 and 1.9 times χ²; the continuity correction and Fisher's p lie at most
    1.4 below √χ². The like for tables of 2×3 to 3×3 and their exact p: 0.55, 1.7 and 0.7.
    """
    step = 1.4 if one_df else 0.7
    low = min(0.55 * chi2.low, max(math.sqrt(max(chi2.low, 0.0)) - step, 0.0) ** 2)
    return Interval(low, (1.9 if one_df else 1.7) * chi2.high)


@check(
    "p-from-F",
    title="p that is printed with an F statistic",
    kinds=("F-test",),
    quantity="p",
    needs=("F", "df1", "df2", "p"),
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
    numbers = _p_numbers(claim, "F", "df1", "df2")

    def p_of(box: Box, df1: Interval | None = None, df2: Interval | None = None) -> tuple[Interval, ...]:
        F, a, b = box["F"], df1 or box["df1"], df2 or box["df2"]
        low, high = max(F.low, 0.0), max(F.high, 0.0)
        return (_interval(bounds.p_from_F_bounds(low, high, a.low, a.high, b.low, b.high)),)

    def corrected(box: Box) -> tuple[Interval, ...]:
        F = box["F"]
        low, high = max(F.low, 0.0), max(F.high, 0.0)
        return (_interval(bounds.p_corrected_F_bounds(low, high, box["df1"].low, box["df2"].high)),)

    ways = [Way(p_of)]
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
                lambda box: p_of(box, _about(box["df1"]) if both else None, _around(box["df2"])),
                (ROUNDED_DF,),
            )
        )
    if claim.suggests("mixed-model"):
        ways.append(Way(lambda box: p_of(box, None, Interval(1.0, UNIT_DF)), (ANY_DF,)))
    yield _judge_p(case, "p-from-F", ways, numbers, omnibus=numbers["df1"].value > 1)


def _halved(claim: Claim, p_of: Callable[[Box], tuple[Interval, ...]]) -> list[Way]:
    """With df1 = 1, F is a squared t, so its p may be one-tailed."""
    tried = dict(_tailed(claim))
    if 1 not in tried:
        return []
    words = "p is that of a one-tailed t with t² = F"

    def implied(box: Box) -> tuple[Interval, ...]:
        return tuple(Interval(i.low / 2, i.high / 2) for i in p_of(box))

    return [Way(implied, () if tried[1] else (words,), (words,) if tried[1] else ())]


@check(
    "p-from-r",
    title="p that is printed with a correlation",
    kinds=("correlation",),
    quantity="p",
    needs=("r", "p"),
    formula="t = r √(df / (1 − r²)) with df = n − 2; p = 2 P(T > |t|)",
    source="Fisher (1915) Biometrika 10:507-521; Best & Roberts (1975) Applied Statistics 24:377-379 for rank correlations",
    limits="Needs df or n. Partial correlations have fewer df than n − 2.",
    agrees=("Height rose with proofing time, r(48) = .30, p = .034.",),
    conditional=("Height rose with proofing time, r(48) = .30, p = .017.",),
    inconsistent=("Height rose with proofing time, r(48) = .30, p = .34.",),
    unchecked=("Height rose with proofing time, r = .30, p = .034.",),
)
def p_from_r(case: Case) -> Iterable[Finding]:
    """Compare the printed p with the p that r and its df (or n) imply."""
    claim = case.claim
    size = next((name for name in ("df", "n", "N") if name in claim.values), None)
    if size is None:
        yield unchecked(case, "p-from-r", "p", "neither df nor n is printed with r")
        return
    if claim.values["r"].interval().absolute().low > 1:
        yield unchecked(case, "p-from-r", "p", "r lies outside −1 to 1")
        return
    numbers = _p_numbers(claim, "r", size)
    off = 0.0 if size == "df" else 2.0

    def p_of(box: Box, used: int, less: float = off) -> Interval:
        r = box["r"].absolute().within(0.0, 1.0)
        df_low, df_high = box[size].low - less, box[size].high - less
        return _interval(bounds.p_from_r_bounds(r.low, r.high, max(df_low, 1.0), max(df_high, 1.0), used))

    ways = list(_tail_ways(claim, True, p_of))
    if size == "df":
        words = "the number in brackets is n, not df"
        ways += _tail_ways(claim, True, lambda box, used: p_of(box, used, 2.0), words=(words,))
    n = int(numbers[size].value) + (2 if size == "df" else 0)
    ways += _rank_ways(claim, n)
    ways.append(Way(lambda box: _normal_r(box, n), (NORMAL_P,)))
    if claim.suggests("partial"):
        ways += _tail_ways(
            claim, True, lambda box, used: _fewer_df(box, used, n), words=("covariates take up df",)
        )
    yield _judge_p(case, "p-from-r", ways, numbers)


def _rank_ways(claim: Claim, n: int) -> Iterator[Way]:
    """The p of Spearman's rank correlation, exact or by its Edgeworth series.

    Without ties r moves in steps of 12/(n³ − n); ties put it between two steps.
    """
    if n < 4:
        return
    said = claim.suggests("spearman")

    def p_of(box: Box, used: int) -> Interval:
        r = box["r"].absolute().within(0.0, 1.0)
        step = 12.0 / (n**3 - n)
        at_high = float(ranks.spearman_two_sided(min(r.high + step, 1.0), n))
        at_low = float(ranks.spearman_two_sided(max(r.low - step, 0.0), n))
        return Interval(min(at_high, at_low) * used / 2, max(at_high, at_low) * used / 2)

    words = "p is that of Spearman's rank correlation"
    yield from _tail_ways(claim, True, p_of, words=() if said else (words,))
    if n < TIED_BELOW:
        yield Way(lambda box: (_with_ties(p_of(box, 2)),), (f"{words}, exact with many ties",))


TIED_BELOW = 10


def _with_ties(p: Interval) -> Interval:
    """p of few pairs with many ties, taken over all orders: within a factor of three of the untied one."""
    return Interval(p.low / 3, min(3 * p.high, 1.0))


def _normal_r(box: Box, n: int) -> tuple[Interval, ...]:
    """Two normal approximations: Fisher's z with n − 3, and r √(n − 1)."""
    r = box["r"].absolute().within(0.0, 1.0)
    if n < 4:
        return ()
    low = min(math.atanh(min(r.low, 1 - 1e-15)) * math.sqrt(n - 3), r.low * math.sqrt(n - 1))
    high = max(math.atanh(min(r.high, 1 - 1e-15)) * math.sqrt(n - 3), r.high * math.sqrt(n - 1))
    return (Interval(float(tails.z_two_sided(high)), float(tails.z_two_sided(low))),)


def _fewer_df(box: Box, used: int, n: int) -> Interval:
    r = box["r"].absolute().within(0.0, 1.0)
    return _interval(bounds.p_from_r_bounds(r.low, r.high, max(1.0, (n - 2) / 2), max(1.0, n - 2), used))
