"""What the checks of a p share: numbers of tails, excuses, adjustments, the reading of a smallest p."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace

from recheck.checks.compare import Comparison, judge
from recheck.checks.registry import Case
from recheck.model import P_IN_WORDS, Claim, Finding, Interval, Printed
from recheck.recompute.tails import z_quantile
from recheck.reconcile.readings import Box, Numbers, Way, box_of

P_RANGE = Interval(0.0, 1.0)
UNIT_DF = 1e9
"""Degrees of freedom at which t is normal to double precision."""

ONE_TAILED = "p is one-tailed"
WRONG_DIRECTION = "the effect goes against the predicted direction"
ROUNDED_DF = "the printed df are a rounded or floored fractional df"
NORMAL_P = "p comes from the normal distribution"
NORMAL_F = "p comes from the χ² distribution, as if df2 had no limit"
FLOOR = "p is the smallest that the program prints, so smaller ones are printed alike"
ANY_DF = "p rests on another approximation to the df, as mixed models allow"


def tails_tried(claim: Claim) -> tuple[tuple[int, bool], ...]:
    """Numbers of tails to try, each with whether it is stated."""
    if claim.says("one-tailed"):
        return ((1, True), (2, False))
    if _of_equivalence(claim) or (claim.suggests("one-tailed") and not claim.says("two-tailed")):
        return ((2, True), (1, True))
    return ((2, True),) if claim.suggests("two-tailed") else ((2, True), (1, False))


def _of_equivalence(claim: Claim) -> bool:
    """Tests of equivalence are one-tailed by definition; a heading may say that they are ones."""
    section = (claim.place.section or "").lower()
    return claim.says("equivalence") or "equivalence" in section or "inferiority" in section


def with_p(claim: Claim, *names: str) -> Numbers:
    """The named numbers of a claim together with its p."""
    return {name: claim.values[name] for name in (*names, "p")}


def _floor_of(p: Printed) -> bool:
    """Tell whether p is a power of ten with its last digit alone: .001, .0001."""
    return p.relation == "=" and p.decimals >= 3 and p.value == p.unit


RARE = frozenset((NORMAL_P, NORMAL_F, "p is two-tailed", WRONG_DIRECTION))
"""Readings that are not combined with another rare one: two of them soften true discrepancies."""


def _with_floor(ways: list[Way], p: Printed) -> list[Way]:
    """Add the reading that a program prints no smaller p than this one."""
    if not _floor_of(p):
        return ways
    top = float(p.value + p.unit / 2)
    floored = []
    for way in ways:
        if len(way.unstated) <= 1 and not RARE.intersection(way.unstated):

            def implied(
                box: Box, inner: Callable[[Box], tuple[Interval, ...]] = way.implied
            ) -> tuple[Interval, ...]:
                return tuple(Interval(i.low, max(i.high, top)) for i in inner(box) if i.low <= top)

            floored.append(replace(way, implied=implied, unstated=(*way.unstated, FLOOR)))
    return [*ways, *floored]


def tail_ways(
    claim: Claim, signed: bool, p_of: Callable[[Box, int], Interval], *, words: tuple[str, ...] = ()
) -> Iterator[Way]:
    """Ways by number of tails: `p_of(box, tails)` gives the p in the direction of the statistic."""
    printed = claim.values["p"]
    for tails_used, stated in tails_tried(claim):
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

            # Two assumptions where the text states neither: rarely what is meant.
            yield Way(against, (*words, *mark, WRONG_DIRECTION))


def _excuses(claim: Claim) -> tuple[str, ...]:
    """Why p cannot be rebuilt from the statistic at all."""
    reasons = []
    if claim.values["p"].interval().low > 1:
        reasons.append("p lies outside 0 to 1")
    if claim.suggests("permutation"):
        reasons.append("p comes from a permutation or exact test")
    if claim.kind == "chi2-test" and claim.says("fisher-exact"):
        reasons.append("p is that of Fisher's exact test")
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


def judge_p(
    case: Case, name: str, ways: list[Way], numbers: Numbers, *, omnibus: bool = False,
    claims: tuple[Claim, ...] = (), doubts: tuple[str, ...] = (), excuses: tuple[str, ...] = (),
) -> Finding:  # fmt: skip
    """Judge p by the given ways; `omnibus` says that adjusted post hoc comparisons are not meant."""
    told = P_IN_WORDS in case.claim.notes
    words = ("the words “significant” or “not significant” speak of this test",) if told else ()
    return judge(
        case,
        Comparison(
            check=name,
            quantity="p",
            numbers=numbers,
            ways=_with_floor(ways, numbers["p"]),
            claims=claims,
            bounds=P_RANGE,
            excuses=(*_excuses(case.claim), *excuses),
            excess=_adjusted(case.claim, omnibus),
            doubts=(*words, *doubts),
        ),
    )


def loosely(p: Printed, numbers: Numbers, ways: Sequence[Way], *, skewed: bool = False) -> bool:
    """Tell whether p may be that of another sensible test of the same groups: of ranks, or of fewer cases.

    Compared as normal deviates, around those of the plain ways. Drawn around samples of 8 to 200 from
    normal, rating and (`skewed`) lognormal scores: tests of ranks lie within these distances.
    """
    box = box_of(numbers)
    plain = [i.within(0.0, 1.0) for way in ways if not way.unstated for i in way.implied(box)]
    if not plain:
        return True
    printed = p.interval().within(0.0, 1.0)
    low = min(float(z_quantile(i.high / 2)) for i in plain)
    high = max(float(z_quantile(i.low / 2)) for i in plain)
    least, most, step = (0.25, 2.5, 2.0) if skewed else (0.65, 1.45, 1.0)
    loose = Interval(least * low - step, most * high + step)
    return loose.meets(Interval(float(z_quantile(printed.high / 2)), float(z_quantile(printed.low / 2))))


def as_interval(pair: tuple[object, object]) -> Interval:
    """The interval of two 0-d arrays."""
    low, high = pair
    return Interval(float(low), float(high))  # type: ignore[arg-type]


def rounded_df1(df1: Interval) -> Interval:
    """The corrected numerator df, never below 1, that may have been rounded to these."""
    return Interval(max(df1.low - 0.5, 1.0), df1.high + 0.5)


def rounded_df(df: Interval) -> Interval:
    """The fractional df that may have been rounded or floored to these."""
    return Interval(max(df.low - 0.5, 0.01), df.high + 1.0)
