"""Checks of a p, printed without its statistic, against the summaries of its groups."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Sequence

from recheck.checks.compare import unchecked
from recheck.checks.designs import MISSING, PAIRED, POOLED, SE_READING, WELCH, known, sds
from recheck.checks.designs import Groups as Pair
from recheck.checks.examples import table
from recheck.checks.groups import link_doubts, linked_groups
from recheck.checks.models import foreign_model
from recheck.checks.p_values import NORMAL_P, ONE_TAILED, UNIT_DF, as_interval, judge_p, loosely
from recheck.checks.registry import Case, check
from recheck.checks.several import ONE_WAY, WELCH_F, Several, one_way_F, several_of, welch_F
from recheck.model import Claim, Finding, Interval
from recheck.recompute import bounds, two_groups
from recheck.recompute.anova import MOST_GROUPS
from recheck.recompute.mean_differences import welch_p_bounds
from recheck.recompute.paired import paired_t_bounds
from recheck.reconcile.readings import Box, Numbers, Way

STATISTICS = frozenset(("t", "F", "z", "chi2", "u", "w", "r", "or", "rr", "hr", "b", "beta"))
UNNAMED = "p is that of the plain test of these groups (no test is named)"


@check(
    "p-from-groups",
    title="p, printed without a statistic, against the means, SDs and ns of its groups",
    kinds=("estimate", "comparison", "t-test", "F-test"),
    quantity="p",
    needs=("p",),
    beside="two or more linked groups, each with mean, SD or SE, and n",
    formula="p of the t test of two groups, pooled or Welch, or of the one-way analysis of variance of more",
    source="Student (1908) Biometrika 6:1-25; Welch (1938) Biometrika 29:350-362; Welch (1951) Biometrika 38:330-336",
    limits="Conditional at most where the test is not named; tests of ranks, adjusted, paired and longitudinal tests are not rebuilt.",
    agrees=(
        table(
            "Table 1. Age of the apprentices in years, mean (SD).",
            " | Trained (n = 40) | Untrained (n = 38) | p",
            "Age | 24.1 (4.2) | 29.0 (4.9) | < .001",
        ),
    ),
    conditional=(
        table(
            "Table 1. Age of the apprentices in years, mean (SD).",
            " | Trained (n = 40) | Untrained (n = 38) | p",
            "Age | 24.1 (4.2) | 29.0 (4.9) | .85",
        ),
    ),
    unchecked=(
        table(
            "Table 1. Age of the apprentices in years, mean (SD).",
            " | Trained (n = 40) | Untrained (n = 38) | p",
            "Age | 24.1 (4.2) | 29.0 (4.9) | .04",
        ),
    ),
)
def p_from_groups(case: Case) -> Iterable[Finding]:
    """Compare a p that stands alone with those of the plain tests of its groups."""
    claim = case.claim
    if STATISTICS & claim.values.keys() or any(group.kind != "group-summary" for group in case.groups):
        return
    claims = (claim, *case.groups)
    if len(case.groups) == 2:
        linked = linked_groups(case)
        if (
            linked is None
            or linked[0].n1 is None
            or linked[0].n2 is None
            or min(linked[0].n1, linked[0].n2) < 2
        ):
            return
        pair = linked[0]
        numbers, of_whole, bad = pair.numbers, pair.of_whole, pair.impossible
        ways = list(_pair_ways(claim, pair))
    else:
        several = several_of(case.groups) if 3 <= len(case.groups) <= MOST_GROUPS else None
        if several is None:
            return
        numbers, of_whole, bad = several.numbers, several.of_whole, several.impossible
        ways = list(_several_ways(claim, several))
    if bad:
        yield unchecked(
            case, "p-from-groups", "p", "a spread below 0 is printed for one of the groups", claims
        )
        return
    yield _judged(case, ways, {"p": claim.values["p"], **numbers}, of_whole=of_whole)


NAMED = ("independent", "pooled", "welch", "paired", "between-groups")


def _judged(case: Case, ways: list[Way], numbers: Numbers, *, of_whole: bool) -> Finding:
    """Judge p; where test or cases are not sure, a p that another sensible test may give is not compared."""
    claim, claims = case.claim, (case.claim, *case.groups)
    named = claim.says(*NAMED) or claim.kind in ("t-test", "F-test")
    doubts = list(link_doubts(case))
    excuses = [reason for reason in (foreign_model(claims, fitted=named),) if reason]
    if not named:
        doubts.append(UNNAMED)
    if of_whole:
        doubts.append(MISSING)
    if claim.values.keys() & {"mean_difference", "estimate", "ci_low"}:
        doubts.append("p and the difference beside it are those of the means as printed, unadjusted")
    if len(case.groups) > 2 and claim.says("paired", "repeated"):
        excuses.append("the same units are measured several times, so p depends on correlations")
    if (not named or of_whole) and loosely(
        claim.values["p"], numbers, ways, skewed=not named and _skewed(case.groups)
    ):
        excuses.append(
            "some cases may be missing"
            if named
            else "no test is named, so p may be that of another one, such as a test of ranks"
        )
    return judge_p(
        case, "p-from-groups", ways, numbers, claims=claims, doubts=tuple(doubts), excuses=tuple(excuses)
    )


def _skewed(groups: Sequence[Claim]) -> bool:
    """Tell whether a spread is so large beside its mean that scores above 0 are surely skewed."""
    return any(
        2 * group.values["sd"].number > abs(group.values["mean"].number)
        for group in groups
        if "sd" in group.values and "mean" in group.values
    )


def _pair_ways(claim: Claim, pair: Pair) -> Iterator[Way]:
    """p by each test of two groups: the named one first, else pooled and Welch alike."""
    n1, n2 = float(pair.n1 or 0), float(pair.n2 or 0)
    paired = claim.says("paired", "repeated")
    unequal = claim.says("welch")
    equal = not unequal and (claim.says("pooled", "independent") or claim.kind == "t-test")
    for as_se in (False, True) if pair.unlabelled else (False,):
        extra = (SE_READING,) if as_se else ()
        for words, welch in ((POOLED, False), (WELCH, True)):
            if paired:
                continue
            open_ = equal if welch else unequal
            mark = (words,) if open_ else ()
            p_of = _p_of_pair(pair, n1, n2, as_se=as_se, welch=welch)
            costly = welch and not unequal
            yield Way(_tails(p_of, 1.0), (*extra, *mark), () if mark else (words,), costly)
            if not claim.suggests("two-tailed"):
                yield Way(_tails(p_of, 0.5), (*extra, *mark, ONE_TAILED))
        if n1 == n2 and not claim.says("independent", "pooled", "welch", "between-groups"):
            mark = () if paired else (PAIRED,)
            yield Way(_p_of_pairs(pair, n1, as_se=as_se), (*extra, *mark), (PAIRED,) if paired else ())
    if not paired:
        yield Way(_tails(_p_of_pair(pair, n1, n2, as_se=False, welch=True, normal=True), 1.0), (NORMAL_P,))


def _tails(p_of: Callable[[Box], Interval], factor: float) -> Callable[[Box], tuple[Interval, ...]]:
    def implied(box: Box) -> tuple[Interval, ...]:
        p = p_of(box)
        return (Interval(factor * p.low, factor * p.high),)

    return implied


def _p_of_pair(
    pair: Pair, n1: float, n2: float, *, as_se: bool, welch: bool, normal: bool = False
) -> Callable[[Box], Interval]:
    """Two-sided p over the box: of Welch's test by its own range, else by that of |t|."""
    t_bounds = two_groups.welch_t_bounds if welch else two_groups.pooled_t_bounds
    df = UNIT_DF if normal else n1 + n2 - 2

    def p_of(box: Box) -> Interval:
        s, a, b = sds(box, pair, n1, n2, as_se=as_se), box["mean1"], box["mean2"]
        corners = (a.low, a.high, s.low1, s.high1, n1, b.low, b.high, s.low2, s.high2, n2)
        if welch and not normal and max(s.high1, s.high2) > 0:
            return as_interval(welch_p_bounds(*corners))
        t = known(*(float(end) for end in t_bounds(*corners))).absolute()
        return as_interval(bounds.p_from_t_bounds(t.low, t.high, df, df, 2))

    return p_of


def _p_of_pairs(pair: Pair, n: float, *, as_se: bool) -> Callable[[Box], tuple[Interval, ...]]:
    """p that some correlation between the two measures allows."""

    def implied(box: Box) -> tuple[Interval, ...]:
        s, a, b = sds(box, pair, n, n, as_se=as_se), box["mean1"], box["mean2"]
        ends = paired_t_bounds(a.low, a.high, s.low1, s.high1, b.low, b.high, s.low2, s.high2, n)
        t = known(float(ends[0]), float(ends[1])).absolute()
        return (as_interval(bounds.p_from_t_bounds(t.low, t.high, n - 1, n - 1, 2)),)

    return implied


def _several_ways(claim: Claim, several: Several) -> Iterator[Way]:
    """p by the classical and by Welch's analysis of variance."""
    k, within = several.size - 1.0, float(several.total - several.size)
    for as_se in (False, True) if several.unlabelled else (False,):
        extra = (SE_READING,) if as_se else ()

        def classical(box: Box, as_se: bool = as_se) -> tuple[Interval, ...]:
            F = one_way_F(box, several, as_se=as_se)
            return (as_interval(bounds.p_from_F_bounds(F.low, F.high, k, k, within, within)),)

        def welch(box: Box, as_se: bool = as_se) -> tuple[Interval, ...]:
            F, df2 = welch_F(box, several, as_se=as_se)
            return (as_interval(bounds.p_from_F_bounds(F.low, F.high, k, k, df2.low, df2.high)),)

        costly = several.size > 4
        unequal = claim.says("welch")
        yield Way(classical, (*extra, "F is the classical one") if unequal else extra, (ONE_WAY,), costly)
        open_ = (WELCH_F,) if claim.says("between-groups", "independent") and not unequal else ()
        yield Way(welch, (*extra, *open_), () if open_ else (WELCH_F,), True)
