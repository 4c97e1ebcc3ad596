"""Checks of the confidence interval of a mean difference against its t and p."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator, Sequence

from recheck.checks.coefficients import is_wald
from recheck.checks.compare import Comparison, judge, unchecked
from recheck.checks.designs import TWO_GROUPS, Groups, sds
from recheck.checks.groups import fit_of, link_doubts, linked_groups, unsigned
from recheck.checks.interval_methods import NORMAL, USUAL_LEVEL, Slack, hand_slack, other_widths
from recheck.checks.intervals import (
    BY_HAND,
    ESTIMATES,
    OFF_CENTRE,
    OTHER_METHOD,
    TOO_COARSE,
    ends,
    level_of,
    log_middle,
    too_coarse,
)
from recheck.checks.models import foreign_model
from recheck.checks.p_values import ONE_TAILED, P_RANGE, UNIT_DF, as_interval
from recheck.checks.registry import Case, check
from recheck.model import RATIOS, STATED, VERDICTS, Claim, Finding, Interval
from recheck.recompute import bounds, intervals, two_groups
from recheck.recompute.tails import t_quantile, z_quantile
from recheck.reconcile.readings import Box, Way, first_agreement


def _t_of_ci(level: float, df: float) -> Callable[[Box], tuple[Interval, ...]]:
    """|t| from the ends of an interval: crit (low + high)/(high − low), over the box of both ends."""

    def implied(box: Box) -> tuple[Interval, ...]:
        low, high = box["ci_low"], box["ci_high"]
        if low.high >= high.low:
            return ()
        least, most = intervals.t_from_ci_bounds(low.low, low.high, high.low, high.high, level, df)
        return (Interval(float(least), float(most)).absolute(),)

    return implied


def _loose_t(
    level: float, df: float, slack: Slack, shift_by_width: float = 0.0
) -> Callable[[Box], tuple[Interval, ...]]:
    """|t| where centre and width of the interval are known but for some slack."""
    c = float(t_quantile((1 - level) / 2, df))

    def implied(box: Box) -> tuple[Interval, ...]:
        low, high = box["ci_low"], box["ci_high"]
        narrow, broad = (high.low - low.high) / 2, (high.high - low.low) / 2
        if narrow <= 0:
            return (Interval(0.0, math.inf),)
        shift = slack.shift + shift_by_width * broad
        centre = Interval((low.low + high.low) / 2 - shift, (low.high + high.high) / 2 + shift).absolute()
        return (Interval(c * centre.low / broad * slack.narrower, c * centre.high / narrow * slack.wider),)

    return implied


@check(
    "t-from-ci",
    title="t against the confidence interval of the mean difference",
    kinds=("t-test",),
    quantity="t",
    needs=("t", "df", "ci_low", "ci_high"),
    formula="t = c (low + high)/(high − low), c the critical value of t with df at the level of the interval",
    source="Neyman (1937) Philosophical Transactions A 236:333-380; after Altman & Bland (2011) BMJ 343:d2304, with t in place of z",
    limits="Same method, two-sided, unadjusted only. Bootstrap, profile and simultaneous intervals are not rebuilt.",
    agrees=(
        "Steamed loaves rose higher, mean difference = 6.4 mm, 95% CI [2.37, 10.43], t(34) = 3.23, p = .003.",
    ),
    inconsistent=(
        "Steamed loaves rose higher, mean difference = 6.4 mm, 95% CI [5.9, 6.9], t(34) = 3.23, p = .003.",
    ),
)
def t_from_ci(case: Case) -> Iterable[Finding]:
    """Compare |t| with the interval of the mean difference that it belongs to."""
    claim = case.claim
    bare = (
        claim.interval_of is None and len(case.groups) == 2 and not any(n in claim.values for n in ESTIMATES)
    )
    if not (claim.interval_of in ("mean_difference", "b") or bare):
        return
    low, high = ends(claim)
    df = claim.values["df"].number
    if low.interval().low > high.interval().high or df <= 0:
        return
    if too_coarse(claim):
        yield unchecked(case, "t-from-ci", "t", TOO_COARSE)
        return
    numbers = {"t": unsigned(claim.values["t"]), "ci_low": low, "ci_high": high, "df": claim.values["df"]}
    doubts = ["the interval is that of the mean difference"] if bare else []
    if claim.values["df"].decimals <= 0 and claim.suggests("mixed-model"):
        doubts.append("the interval and t rest on the same df, which a mixed model need not")
    comparison = Comparison(
        check="t-from-ci",
        quantity="t",
        numbers=numbers,
        ways=_ci_ways(claim, df, hand_slack(case)),
        bounds=Interval(0, math.inf),
        excuses=_ci_excuses(claim),
        doubts=tuple(doubts),
    )
    yield judge(case, comparison)


def _ci_excuses(claim: Claim) -> tuple[str, ...]:
    foreign = {
        "bootstrap": "the interval may come from a bootstrap", "adjusted-p": "the interval may be simultaneous",
        "adjusted-p-post-hoc": "the interval may be simultaneous", "permutation": "the test is by permutation",
        "equivalence": "the interval of an equivalence test has another level", "robust": "the interval may rest on a robust standard error",
        "bayesian": "the interval may be a credible one",
    }  # fmt: skip
    return tuple(reason for word, reason in foreign.items() if claim.suggests(word))[:1]


def _ci_ways(claim: Claim, df: float, slack: Slack) -> tuple[Way, ...]:
    level, printed = level_of(claim)
    given = () if printed else (USUAL_LEVEL,)
    normal = float(z_quantile((1 - level) / 2)) / float(t_quantile((1 - level) / 2, df))
    ways = [Way(_t_of_ci(level, df), (), given)]
    other_method = Slack(0.0, *other_widths(level, df))
    if claim.interval_of in RATIOS:
        # The interval of a ratio rests on the normal distribution anyway.
        if is_wald(claim):
            return tuple(ways)
        ways.append(Way(_loose_t(level, df, other_method, OFF_CENTRE), (PROFILE,), given))
        return tuple(ways)
    ways.insert(1, Way(_loose_t(level, df, Slack(0.0, normal, normal)), (NORMAL,), given))
    by_hand = Slack(slack.shift, slack.narrower * min(normal, 1.0), slack.wider)
    ways.append(Way(_loose_t(level, df, by_hand), (BY_HAND,), given))
    for other in () if printed else (0.90, 0.99):
        if other != level:
            ways.append(Way(_t_of_ci(other, df), (f"the interval is a {other:.0%} one",)))
    ways.append(Way(_loose_t(level, df, other_method, OFF_CENTRE), (OTHER_METHOD,), given))
    return tuple(ways)


PROFILE = "the interval is a profile-likelihood or bootstrap one, or p is not that of its Wald test"
LINEAR = ("mean_difference", "b", "rd")
OPEN_DF = (5.0, 8.0, 15.0, 40.0, UNIT_DF)
"""df that are tried where none are printed; p moves steadily from one to the next."""


@check(
    "p-from-ci",
    title="p against the confidence interval of a difference, slope or ratio",
    kinds=("t-test", "comparison", "estimate", "regression"),
    quantity="p",
    needs=("p", "ci_low", "ci_high"),
    formula="|t| = c |low + high|/(high − low), ends of ratios as logarithms; p = 2 P(T > |t|)",
    source="after Altman & Bland (2011) How to obtain the P value from a confidence interval, BMJ 343:d2304, with t in place of z",
    limits="Same method, two-sided, unadjusted only. Without df, and for ratios, the verdict is conditional at most.",
    agrees=(
        "Steamed loaves rose higher, mean difference = 6.4 mm, 95% CI [2.4, 10.4], p = .003.",
        "Steam halved collapse (OR = 0.50, 95% CI 0.28 to 0.90, p = .02).",
    ),
    conditional=(
        "Steamed loaves rose higher, mean difference = 6.4 mm, 95% CI [2.4, 10.4], p = .30.",
        "Steam halved collapse (OR = 0.50, 95% CI 0.28 to 0.90, p = .38).",
    ),
)
def p_from_ci(case: Case) -> Iterable[Finding]:
    """Compare p with the interval of its estimate, over all df where none are printed."""
    claim, ratio = case.claim, case.claim.interval_of in RATIOS
    low, high = ends(claim)
    if claim.interval_of not in (*LINEAR, *RATIOS) or low.interval().low > high.interval().high:
        return
    if ratio and low.interval().low <= 0:
        yield unchecked(case, "p-from-ci", "p", "the lower end of the ratio's interval may be 0")
        return
    if too_coarse(claim):
        yield unchecked(case, "p-from-ci", "p", TOO_COARSE)
        return
    df = claim.values.get("df")
    known = df is not None and df.number > 0 and not ratio
    doubts = (
        ()
        if known
        else (
            "p and the interval come from one and the same test (no df are printed; df from 5 up were tried)",
        )
    )
    if ratio:
        doubts = (
            "p is the Wald test of the interval, not that of another test (log-rank, likelihood ratio)",
        )
    adjusted = claim.suggests("adjusted-p", "adjusted-p-post-hoc")
    dfs = (UNIT_DF,) if ratio else (df.number,) if known and df is not None else OPEN_DF
    numbers = {"p": claim.values["p"], "ci_low": low, "ci_high": high}
    ways = _p_ways(case, dfs, ratio=ratio)
    excuses = _ci_excuses(claim) + (_other_test(claim) if claim.interval_of != "mean_difference" else ())
    if ratio and _off_middle(claim) and first_agreement("p", numbers, ways):
        excuses = (
            *excuses,
            "the interval is not symmetric about its ratio (a profile or exact one), so it does not tell p",
        )
    comparison = Comparison(
        check="p-from-ci",
        quantity="p",
        numbers=numbers,
        ways=ways,
        bounds=P_RANGE,
        doubts=doubts,
        excuses=excuses,
        excess="p may be adjusted for several tests" if adjusted else "",
    )
    yield judge(case, comparison)


_OTHER_TESTS = ("fisher-exact", "yates", "uncorrected-chi2", "chi2-named", "likelihood-ratio", "permutation")


def _other_test(claim: Claim) -> tuple[str, ...]:
    """Why p is not told by the interval of a ratio or of a difference of risks: another test is named for it."""
    named = next((word for word in _OTHER_TESTS if claim.says(word)), None)
    return () if named is None else (f"p is that of {STATED[named]}, not of the interval",)


def _off_middle(claim: Claim) -> bool:
    """Tell whether a ratio surely lies off the geometric middle of its interval."""
    low, high = ends(claim)
    ratio = claim.values.get(claim.interval_of or "")
    middle = log_middle(low.interval(), high.interval())
    return ratio is not None and middle is not None and not middle.meets(ratio.interval())


def _p_ways(case: Case, dfs: Sequence[float], *, ratio: bool) -> tuple[Way, ...]:
    """Each way from the interval to t, carried on to p: over all df, two- and one-tailed."""
    slack = Slack() if ratio else hand_slack(case)
    by_df = [_ci_ways(case.claim, df, slack) for df in dfs]
    tails_used = (2,) if case.claim.suggests("two-tailed") else (2, 1)
    return tuple(
        _carried_on(same, dfs, used, ratio=ratio) for used in tails_used for same in zip(*by_df, strict=True)
    )


def _carried_on(same: Sequence[Way], dfs: Sequence[float], used: int, *, ratio: bool) -> Way:
    """One way from the interval to t at each df, carried on to p."""

    def implied(box: Box) -> tuple[Interval, ...]:
        if ratio:
            box = {**box, "ci_low": _logs(box["ci_low"]), "ci_high": _logs(box["ci_high"])}
        found = [
            as_interval(bounds.p_from_t_bounds(t.low, t.high, df, df, 2))
            for way, df in zip(same, dfs, strict=True)
            for t in way.implied(box)
        ]
        if not found:
            return ()
        return (Interval(used / 2 * min(p.low for p in found), used / 2 * max(p.high for p in found)),)

    unstated = same[0].unstated
    return Way(implied, unstated if used == 2 else (*unstated, ONE_TAILED), same[0].given)


def _logs(interval: Interval) -> Interval:
    return Interval(math.log(max(interval.low, 1e-300)), math.log(max(interval.high, 1e-300)))


@check(
    "ci-from-groups",
    title="confidence interval of a mean difference against its two groups",
    kinds=("t-test", "comparison"),
    quantity="ci_low",
    needs=("ci_low", "ci_high"),
    beside="two linked groups, each with mean, SD and n; df of a t that is printed",
    formula="(M1 − M2) ∓ c SE, SE pooled or Welch, c the critical value of t with df at the level of the interval",
    source="Welch (1938) Biometrika 29:350-362; Altman, Machin, Bryant & Gardner (2000) Statistics with Confidence, ch. 4, from memory",
    limits="Independent groups of printed size only; otherwise as for t against its interval.",
    agrees=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23, mean difference = 6.4, 95% CI [2.37, 10.43].",
    ),
    conditional=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23, mean difference = 6.4, 95% CI [3.07, 9.73].",
        "Steamed loaves rose higher (M = 92.4, SD = 6.1, n = 18) than dry ones (M = 86.0, SD = 5.8, n = 20), a mean difference of 6.4 (95% CI 5.4 to 7.4).",
    ),
)
def ci_from_groups(case: Case) -> Iterable[Finding]:
    """Compare both ends with the two groups; the end that fits worse is told."""
    claim, linked, fit = case.claim, linked_groups(case), fit_of(case)
    if claim.interval_of != "mean_difference" or linked is None or fit is None:
        return
    groups, claims = linked
    alone = claim.kind == "comparison"
    if fit.reason or groups.unlabelled or groups.n1 is None or groups.n2 is None:
        return
    if not (fit.design == "independent" or (alone and not fit.design)) or (
        "df" not in claim.values and not alone
    ):
        return
    low, high = ends(claim)
    if low.value > high.value:
        return
    own = (() if fit.design else (TWO_GROUPS,)) if alone else fit.doubts
    foreign = foreign_model(claims, fitted=fit.sure)
    excuses = (foreign,) if foreign else _ci_excuses(claim)
    found = []
    for name, printed, side in (("ci_low", low, -1.0), ("ci_high", high, 1.0)):
        ways = tuple(_end_ways(claim, groups, side))
        numbers = {name: printed, **groups.numbers}
        doubts = (*own, *link_doubts(case))
        found.append(
            judge(
                case,
                Comparison("ci-from-groups", name, numbers, ways, claims, doubts=doubts, excuses=excuses),
            )
        )
    yield min(found, key=lambda finding: VERDICTS.index(finding.verdict))


def _end_ways(claim: Claim, groups: Groups, side: float) -> Iterator[Way]:
    """Ways to one end of the interval: `side` −1 for the lower, 1 for the upper."""
    level, printed = level_of(claim)
    given = () if printed else (USUAL_LEVEL,)
    n1, n2 = groups.n1 or 2, groups.n2 or 2
    df = claim.values["df"].number if "df" in claim.values else n1 + n2 - 2.0
    # Without a printed df Welch's may be any between those of the smaller group and the pooled ones.
    fewest = df if "df" in claim.values else max(min(n1, n2) - 1.0, 1.0)
    exact, normal = (float(q) for q in (t_quantile((1 - level) / 2, df), z_quantile((1 - level) / 2)))
    for welch in (claim.says("welch"), not claim.says("welch")):
        words = (
            ()
            if welch == claim.says("welch")
            else ("the interval is Welch's" if welch else "the interval is pooled",)
        )
        most = float(t_quantile((1 - level) / 2, fewest)) if welch else exact
        yield Way(_end(groups, side, exact, most, welch=welch), words, given)
        yield Way(_end(groups, side, normal, normal, welch=welch), (*words, NORMAL), given)
    for other in () if printed else (0.90, 0.99):
        if other != level:
            c = float(t_quantile((1 - other) / 2, df))
            yield Way(
                _end(groups, side, c, c, welch=claim.says("welch")), (f"the interval is a {other:.0%} one",)
            )
    shift = OFF_CENTRE * exact
    narrower, wider = other_widths(level, df)
    wide = _end(groups, side, narrower * exact - shift, wider * exact + shift, welch=claim.says("welch"))
    yield Way(wide, (OTHER_METHOD,), given)


def _end(
    groups: Groups, side: float, least: float, most: float, *, welch: bool
) -> Callable[[Box], tuple[Interval, ...]]:
    """One end of the interval for either order of the groups, its half width from `least` to `most` SEs."""

    def implied(box: Box) -> tuple[Interval, ...]:
        n1, n2 = float(groups.n1 or 0), float(groups.n2 or 0)
        s = sds(box, groups, n1, n2, as_se=False)
        se = two_groups.welch_se if welch else two_groups.pooled_se
        narrow, broad = least * float(se(s.low1, n1, s.low2, n2)), most * float(se(s.high1, n1, s.high2, n2))
        a, b = box["mean1"], box["mean2"]
        found = []
        for d in (a.minus(b), b.minus(a)):
            half = Interval(narrow, broad) if side > 0 else Interval(-broad, -narrow)
            found.append(Interval(d.low + half.low, d.high + half.high))
        return tuple(found)

    return implied
