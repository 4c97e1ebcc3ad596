"""Checks of a confidence interval against its own estimate, and against t and p."""

from __future__ import annotations

import math
from collections.abc import Iterable

from recheck.checks.compare import Comparison, impossible, judge, unchecked
from recheck.checks.registry import Case, check
from recheck.model import RATIOS, STANDARDIZED, Claim, Finding, Interval, Printed, Remedy, shown
from recheck.reconcile.readings import Box, Way

ALL_KINDS = (
    "t-test", "F-test", "chi2-test", "correlation", "z-test", "rank-test", "group-summary", "comparison", "estimate", "regression",
)  # fmt: skip

NONCENTRAL = (
    "eta2",
    "partial_eta2",
    "generalized_eta2",
    "omega2",
    "epsilon2",
    "f",
    "f2",
    "phi",
    "cramers_v",
    "r2",
    "adjusted_r2",
)
"""Effects whose honest (noncentral) interval may leave out the estimate: η² = .048, CI [0, 0]."""

ESTIMATES = (
    "mean_difference", "mean", "b", "beta", "d", "g", "delta", "d_z", "d_av", "d_rm", "r", "r_pb",
    "or", "rr", "hr", "rd", "percent", "estimate", "intercept", "median",
)  # fmt: skip

BY_HAND = "the interval was worked out by hand from rounded figures"
OTHER_METHOD = "the interval was made by another method than the test (bootstrap, simultaneous, robust)"


def ends(claim: Claim) -> tuple[Printed, Printed]:
    """The two ends of a claim's interval."""
    return claim.values["ci_low"], claim.values["ci_high"]


def level_of(claim: Claim) -> tuple[float, bool]:
    """The level of the interval as a share, and whether it is printed."""
    printed = claim.values.get("ci_level")
    if printed is None:
        return 0.95, False
    level = printed.number / 100 if printed.number > 1 else printed.number
    return (level, True) if 0.5 <= level < 1 else (0.95, False)


TOO_COARSE = "the ends of the interval are the same number to their printed decimals, so they do not tell p"


def too_coarse(claim: Claim) -> bool:
    """Tell whether both printed ends may be one number: then any test agrees with them."""
    low, high = ends(claim)
    return low.interval().high >= high.interval().low


@check(
    "ci-order",
    title="ends of a confidence interval",
    kinds=ALL_KINDS,  # type: ignore[arg-type]
    quantity="ci_low",
    needs=("ci_low", "ci_high"),
    formula="lower end ≤ upper end",
    source="by definition",
    limits="A dash between two numbers can be read as a minus; then the reading is in doubt and the verdict conditional.",
    impossible=("The difference was 4.1 mm, 95% CI [6.3, 1.9].",),
)
def ci_order(case: Case) -> Iterable[Finding]:
    """Find intervals whose lower end lies above the upper one."""
    low, high = ends(case.claim)
    if low.interval().low <= high.interval().high:
        return
    swapped = Remedy(
        "slip",
        "ci_low",
        f"if the ends were swapped, the interval would run from {high.text} to {low.text}",
        change="ends swapped",
    )
    text = f"The interval runs from {low.text} to {high.text}: its lower end lies above its upper end."
    yield impossible(
        case, "ci-order", "ci_low", text, Interval(-math.inf, high.interval().high), remedies=(swapped,)
    )


@check(
    "ci-holds-estimate",
    title="confidence interval and its own estimate",
    kinds=ALL_KINDS,  # type: ignore[arg-type]
    quantity="ci_low",
    needs=("ci_low", "ci_high"),
    beside="the estimate that the interval belongs to",
    formula="lower end ≤ estimate ≤ upper end",
    source="common practice, no source: Wald, t, score, profile and Fisher z intervals all hold their estimate",
    limits="Noncentral intervals of η², R², V and the like may leave out their estimate; bootstrap and credible intervals too.",
    agrees=("The mean difference was 4.1 mm, 95% CI [1.9, 6.3].",),
    inconsistent=("The mean difference was 7.1 mm, 95% CI [1.9, 6.3].",),
)
def ci_holds_estimate(case: Case) -> Iterable[Finding]:
    """Find intervals that leave out the estimate that they belong to."""
    claim = case.claim
    low, high = ends(claim)
    printed = [name for name in ESTIMATES if name in claim.values]
    name = claim.interval_of or (printed[0] if len(printed) == 1 else None)
    if name is None or name not in claim.values:
        if printed:
            yield unchecked(
                case, "ci-holds-estimate", "ci_low", "it is not clear which number the interval belongs to"
            )
        return
    if low.interval().low > high.interval().high:
        return
    others = [n for n in printed if n != name and _inside(claim.values[n], low, high)]

    def implied(box: Box) -> tuple[Interval, ...]:
        return (Interval(box["ci_low"].low, box["ci_high"].high),)

    numbers = {name: claim.values[name], "ci_low": low, "ci_high": high}
    doubts, excuse = _belonging(case, name, low, high, others)
    if name in RATIOS and claim.suggests("covariate-adjusted", "multi-regression"):
        doubts.append("ratio and interval come from the same model")
    if claim.suggests("bayesian", "bootstrap"):
        excuse = (
            f"a bootstrap or credible interval, of which the text speaks, may leave out its own {shown(name)}"
        )
    if name in NONCENTRAL:
        excuse = f"a noncentral interval may leave out its own {shown(name)}"
    excuses = (excuse,) if excuse else ()
    ways = (Way(implied),)
    yield judge(
        case, Comparison("ci-holds-estimate", name, numbers, ways, doubts=tuple(doubts), excuses=excuses)
    )


def _belonging(
    case: Case, name: str, low: Printed, high: Printed, others: list[str]
) -> tuple[list[str], str]:
    """Doubts whether an interval belongs to an estimate, and the reason where it seems not to."""
    claim, named = case.claim, shown(name)
    doubts = [f"the interval belongs to {named}, not to {shown(other)}" for other in others]
    if name in STANDARDIZED and claim.kind != "estimate":
        if len(case.groups) != 2:
            return [f"the interval belongs to {named}, not to a mean or difference told elsewhere"], ""
        if not _surely_of_effect(case, low, high):
            return [], f"the interval may be that of a mean or of the difference, not of {named}"
    if claim.interval_of is None and not doubts:
        doubts.append(f"the interval belongs to {named}")
    return doubts, ""


def _surely_of_effect(case: Case, low: Printed, high: Printed) -> bool:
    """Tell whether an interval beside a test and its effect can be that of no mean or difference."""
    means = [group.values["mean"].interval() for group in case.groups if "mean" in group.values]
    interval = Interval(low.interval().low, high.interval().high)
    if len(means) != 2:
        return False
    told = (*means, means[0].minus(means[1]), means[1].minus(means[0]))
    return not any(interval.meets(other) for other in told)


def _inside(printed: Printed, low: Printed, high: Printed) -> bool:
    return low.interval().low <= printed.number <= high.interval().high


NEED_NOT_BE_SYMMETRIC = "the interval may be a profile-likelihood one, which need not be symmetric"
OFF_CENTRE = 0.35
"""How far from its centre, in half widths, an honest interval by another method may have its estimate."""


@check(
    "ci-centre",
    title="mean difference in the middle of its confidence interval",
    kinds=("t-test", "comparison"),
    quantity="mean_difference",
    needs=("mean_difference", "ci_low", "ci_high"),
    formula="mean difference = (lower end + upper end) / 2",
    source="Neyman (1937) Philosophical Transactions A 236:333-380: a t interval is the difference ± c SE",
    limits="Bootstrap and profile intervals are not symmetric: a little off the centre is conditional.",
    agrees=("The mean difference was 4.1 mm, 95% CI [1.9, 6.3].",),
    conditional=("The mean difference was 4.4 mm, 95% CI [1.9, 6.3].",),
)
def ci_centre(case: Case) -> Iterable[Finding]:
    """Compare a mean difference with the middle of its interval; outside it another check speaks."""
    claim = case.claim
    low, high = ends(claim)
    printed = claim.values["mean_difference"]
    inside = low.interval().low <= printed.interval().high and printed.interval().low <= high.interval().high
    if claim.interval_of != "mean_difference" or not inside or low.value > high.value:
        return
    if any(group.kind == "count" for group in case.groups):
        return  # the intervals of a difference of two shares are mostly not symmetric

    def centre(box: Box, off: float = 0.0, units: float = 0.0) -> tuple[Interval, ...]:
        a, b = box["ci_low"], box["ci_high"]
        more = off * (b.high - a.low) / 2 + units * float(low.unit)
        return (Interval((a.low + b.low) / 2 - more, (a.high + b.high) / 2 + more),)

    ways = (
        Way(centre),
        Way(lambda box: centre(box, 0.0, 1.0), (BY_HAND,)),
        Way(lambda box: centre(box, OFF_CENTRE), (OTHER_METHOD,)),
    )
    numbers = {"mean_difference": printed, "ci_low": low, "ci_high": high}
    foreign = claim.suggests("bootstrap", "bayesian")
    excuses = ("an interval of this kind need not be symmetric",) if foreign else ()
    doubts = ("the interval is a symmetric one, from t or z; a bootstrap or profile interval need not be",)
    yield judge(
        case, Comparison("ci-centre", "mean_difference", numbers, ways, excuses=excuses, doubts=doubts)
    )


def exponential(interval: Interval) -> Interval:
    """The exponential of an interval, cut where doubles end."""
    return Interval(math.exp(min(interval.low, 700.0)), math.exp(min(interval.high, 700.0)))


def log_middle(low: Interval, high: Interval, off: float = 0.0) -> Interval | None:
    """The geometric middle of an interval, or what lies off it by a share of half its width in logarithms."""
    if high.low <= 0 or low.high <= 0:
        return None
    logs = [math.log(max(x, 1e-300)) for x in (low.low, low.high, high.low, high.high)]
    more = off * (logs[3] - logs[0]) / 2
    return exponential(Interval((logs[0] + logs[2]) / 2 - more, (logs[1] + logs[3]) / 2 + more))
