"""Checks of the confidence interval of a mean difference against its t and p."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable

from recheck.checks.compare import Comparison, judge
from recheck.checks.groups import unsigned
from recheck.checks.intervals import ESTIMATES, OTHER_METHOD, ends
from recheck.checks.registry import Case, check
from recheck.model import Claim, Finding, Interval
from recheck.recompute import bounds, intervals
from recheck.recompute.tails import t_quantile, z_quantile
from recheck.reconcile.readings import Box, Way

WIDER, NARROWER = 1.6, 0.6
"""How much wider or narrower than the t interval an honest one by another method may be.

Percentile bootstraps of a few cases are narrower by √((n − 1)/n) z/t, .63 at n = 5; Bonferroni
intervals of six comparisons are wider by 1.35, of twenty-five by 1.6 (Dunn 1961, J. Am. Stat. Assoc. 56:52-64)."""

BY_HAND = "the interval was worked out by hand from rounded figures"
NORMAL = "the interval uses the normal, not the t distribution"


def level_of(claim: Claim) -> tuple[float, bool]:
    """The level of the interval as a share, and whether it is printed."""
    printed = claim.values.get("ci_level")
    if printed is None:
        return 0.95, False
    level = printed.number / 100 if printed.number > 1 else printed.number
    return (level, True) if 0.5 <= level < 1 else (0.95, False)


def _t_of_ci(
    level: float, df: float, width: float = 1.0, width_high: float | None = None, by_hand: float = 0.0
) -> Callable[[Box], tuple[Interval, ...]]:
    """|t| from the ends of an interval: crit (low + high)/(high − low), over the box of both ends."""

    def implied(box: Box) -> tuple[Interval, ...]:
        low, high = box["ci_low"], box["ci_high"]
        half = by_hand * (high.high - low.low) / 2
        a, b = Interval(low.low - half, low.high + half), Interval(high.low - half, high.high + half)
        if a.high >= b.low:
            return ()
        least, most = intervals.t_from_ci_bounds(a.low, a.high, b.low, b.high, level, df)
        t = Interval(float(least), float(most)).absolute()
        return (Interval(t.low * width, t.high * (width_high or width)),)

    return implied


@check(
    "t-from-ci",
    title="t against the confidence interval of the mean difference",
    kinds=("t-test",),
    quantity="t",
    needs=("t", "df", "ci_low", "ci_high"),
    formula="t = c (low + high)/(high − low), c the critical value of t with df at the level of the interval",
    source="Neyman (1937) Philosophical Transactions A 236:333-380; Altman & Bland (2011) BMJ 343:d2090",
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
    bare = claim.interval_of is None and not any(name in claim.values for name in ESTIMATES)
    if not (claim.interval_of == "mean_difference" or bare):
        return
    low, high = ends(claim)
    df = claim.values["df"].number
    if low.interval().low > high.interval().high or df <= 0:
        return
    numbers = {"t": unsigned(claim.values["t"]), "ci_low": low, "ci_high": high, "df": claim.values["df"]}
    doubts = ["the interval is that of the mean difference"] if bare else []
    if claim.values["df"].decimals <= 0 and claim.suggests("mixed-model"):
        doubts.append("the interval and t rest on the same df, which a mixed model need not")
    comparison = Comparison(
        check="t-from-ci",
        quantity="t",
        numbers=numbers,
        ways=_ci_ways(claim, df),
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


def _ci_ways(claim: Claim, df: float) -> tuple[Way, ...]:
    level, printed = level_of(claim)
    unstated = () if printed else (f"the interval is a {level:.0%} one",)
    normal = float(z_quantile((1 - level) / 2)) / float(t_quantile((1 - level) / 2, df))
    ways = [Way(_t_of_ci(level, df), unstated), Way(_t_of_ci(level, df, normal), (*unstated, NORMAL))]
    ways.append(Way(_t_of_ci(level, df, min(normal, 0.95), 1.05, 0.1), (*unstated, BY_HAND)))
    for other in (0.90, 0.95, 0.99):
        if other != level:
            ways.append(Way(_t_of_ci(other, df), (f"the interval is a {other:.0%} one",)))
    ways.append(Way(_t_of_ci(level, df, NARROWER, WIDER, 0.35), (*unstated, OTHER_METHOD)))
    return tuple(ways)


@check(
    "p-from-ci",
    title="p against the confidence interval of the mean difference",
    kinds=("t-test", "comparison"),
    quantity="p",
    needs=("p", "ci_low", "ci_high"),
    formula="|t| = c |low + high|/(high − low); p = 2 P(T > |t|)",
    source="Altman & Bland (2011) How to obtain the P value from a confidence interval, BMJ 343:d2304",
    limits="Same method, two-sided, unadjusted only. Without df the verdict is conditional at most.",
    agrees=("Steamed loaves rose higher, mean difference = 6.4 mm, 95% CI [2.4, 10.4], p = .003.",),
    conditional=("Steamed loaves rose higher, mean difference = 6.4 mm, 95% CI [2.4, 10.4], p = .30.",),
)
def p_from_ci(case: Case) -> Iterable[Finding]:
    """Compare p with the interval of the mean difference, over all df where none are printed."""
    claim = case.claim
    if claim.interval_of != "mean_difference" or {"t", "df"} <= claim.values.keys():
        return
    low, high = ends(claim)
    if low.interval().low > high.interval().high:
        return
    df = claim.values.get("df")
    known = df is not None and df.number > 0
    numbers = {"p": claim.values["p"], "ci_low": low, "ci_high": high}
    ways = _p_ways(claim, df.number if known and df is not None else None)
    doubts = () if known else ("p and the interval come from one and the same test (no df are printed)",)
    excess = (
        "p may be adjusted for several tests" if claim.suggests("adjusted-p", "adjusted-p-post-hoc") else ""
    )
    yield judge(
        case,
        Comparison(
            "p-from-ci",
            "p",
            numbers,
            ways,
            bounds=Interval(0.0, 1.0),
            doubts=doubts,
            excuses=_ci_excuses(claim),
            excess=excess,
        ),
    )


def _p_ways(claim: Claim, df: float | None) -> tuple[Way, ...]:
    ways = []
    for way in _ci_ways(claim, df if df is not None else 1e9):

        def implied(
            box: Box, inner: Callable[[Box], tuple[Interval, ...]] = way.implied
        ) -> tuple[Interval, ...]:
            out = []
            for t in inner(box):
                least, most = (df, df) if df is not None else (5.0, 1e9)
                if df is None:
                    t = Interval(t.low, t.high * float(t_quantile(0.025, 5.0)) / 1.959963984540054)
                p_low, p_high = bounds.p_from_t_bounds(t.low, t.high, least, most, 2)
                out.append(Interval(float(p_low), float(p_high)))
            return tuple(out)

        halved = way.unstated
        ways.append(Way(implied, halved))
        if not claim.suggests("two-tailed") and len(halved) <= 1:

            def one(box: Box, inner: Callable[[Box], tuple[Interval, ...]] = implied) -> tuple[Interval, ...]:
                return tuple(Interval(i.low / 2, i.high / 2) for i in inner(box))

            ways.append(Way(one, (*halved, "p is one-tailed")))
    return tuple(ways)
