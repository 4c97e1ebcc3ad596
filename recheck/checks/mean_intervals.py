"""Checks of the interval of one group's mean against its SD, its SE and the mean itself."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from dataclasses import replace

import numpy as np

from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge
from recheck.checks.designs import SE_READING
from recheck.checks.interval_methods import NORMAL, other_widths
from recheck.checks.intervals import BY_HAND, OFF_CENTRE, OTHER_METHOD, ends, level_of, log_middle
from recheck.checks.registry import Case, check
from recheck.checks.spreads import CHANCE, POOLED, pooled_beside
from recheck.checks.surroundings import (
    FEWEST_LEFT,
    OWN_SCORES,
    SOME_MISSING,
    beside,
    exact,
    model_of,
    of_group,
    printed_n,
    shown_by,
)
from recheck.model import DISCREPANT, Claim, Finding, Interval, Remedy, shown
from recheck.recompute import conversions
from recheck.recompute.intervals import critical_t
from recheck.reconcile.readings import Box, Numbers, Way, agrees_as_printed

HALF_WIDTH = "the spread is half the width of the interval"
TWO_SE = "the interval is the mean ∓ 2 SE"
FEWER_DF = "the interval has fewer degrees of freedom than that (few clusters, few cases)"
FEWEST_DF = 2.0
"""Degrees of freedom of three clusters, the fewest with which an interval is worth printing."""
LOGARITHMS = "the interval was made in logarithms"
SKEWED = 2.2
"""How much larger than the SE that an interval made in logarithms tells the plain SE of skewed scores is, at most."""
OUTLIERS = 1.35
"""How much of that outliers make where the scores vary little beside their mean."""


@check(
    "spread-from-ci",
    title="SD or SE of a group against the confidence interval of its mean",
    kinds=("group-summary",),
    quantity="",
    needs=("mean", "ci_low", "ci_high"),
    beside="SE, or SD and n",
    formula="SE = (upper end − lower end)/(2 c), SD = SE √n, c the critical value of t with n − 1 df",
    source="Higgins, Li & Deeks, Cochrane Handbook for Systematic Reviews of Interventions, 6.5.2.2",
    limits="An SD is conditional unless other summaries beside it show that intervals are those of the plain scores; a bootstrap, log or model interval is not rebuilt.",
    agrees=("Rye loaves rose to 92.4 mm (SD = 6.1, n = 18, 95% CI [89.4, 95.4]).",),
    conditional=("Rye loaves rose to 92.4 mm (SD = 6.1, n = 18, 95% CI [90.9, 93.9]).",),
    inconsistent=("Rye loaves rose to 92.4 mm (SE = 2.14, 95% CI [91.0, 93.8]).",),
)
def spread_from_ci(case: Case) -> Iterable[Finding]:
    """Compare SE and SD with those that the width of the interval implies."""
    claim = case.claim
    if not _of_mean(claim):
        return
    for quantity in ("se", "sd"):
        told = _width_told(claim, quantity)
        if told is not None:
            yield _spread_of_width(case, quantity, *told)


def _of_mean(claim: Claim) -> bool:
    """Tell whether a summary prints its mean with an interval that is, or may be, that of the mean."""
    if claim.interval_of not in ("mean", None) or ("median" in claim.values and claim.interval_of is None):
        return False
    return exact(claim, "mean", "ci_low", "ci_high") and ends(claim)[0].value <= ends(claim)[1].value


def _width_told(claim: Claim, quantity: str) -> tuple[Numbers, Way] | None:
    """Spread, ends and n of a summary with the plain way from the width to the spread; None where it lacks one."""
    n = printed_n(claim)
    if not _of_mean(claim) or not exact(claim, quantity, "ci_low") or (quantity == "sd" and n is None):
        return None
    names = (
        quantity,
        "ci_low",
        "ci_high",
        *(("n",) if n else ()),
        *(("ci_level",) if "ci_level" in claim.values else ()),
    )
    numbers = {name: claim.values[name] for name in names}
    return numbers, Way(_of_width(claim, quantity, *_usual_df(n)))


def _se_told(claim: Claim) -> tuple[Numbers, Way] | None:
    return _width_told(claim, "se")


def _sd_told(claim: Claim) -> tuple[Numbers, Way] | None:
    return _width_told(claim, "sd")


def _usual_df(n: int | None) -> tuple[float, float]:
    """n - 1 df, or from 4 up where no n is printed."""
    return (4.0, math.inf) if n is None else (n - 1.0, n - 1.0)


def _of_width(
    claim: Claim,
    quantity: str,
    least_df: float,
    most_df: float,
    *,
    n: int | None = None,
    level: float | None = None,
) -> Callable[[Box], tuple[Interval, ...]]:
    """The spread that goes with an interval by t with `least_df` to `most_df`, of n cases and a level that are not the printed ones."""
    size = 1 if quantity == "se" else n or printed_n(claim) or 1
    share = level_of(claim)[0] if level is None else level

    def implied(box: Box) -> tuple[Interval, ...]:
        a, b = box["ci_low"], box["ci_high"]
        low, high = conversions.sd_from_ci_bounds(
            a.low, a.high, b.low, b.high, share, size, np.array((least_df, most_df))
        )
        return (Interval(float(low.min()), float(high.max())),)

    return implied


def _scaled_way(
    implied: Callable[[Box], tuple[Interval, ...]], least: float, most: float
) -> Callable[[Box], tuple[Interval, ...]]:
    """The spread where the interval is from `least` to `most` times as wide as another kind of it."""
    return lambda box: tuple(Interval(i.low / most, i.high / least) for i in implied(box))


def _spread_of_width(case: Case, quantity: str, numbers: Numbers, plain: Way) -> Finding:
    claim, n = case.claim, printed_n(case.claim)
    others = beside(case, quantity, "ci_low", "ci_high")
    around = shown_by(others, quantity, _se_told if quantity == "se" else _sd_told)
    ways = [plain, *_other_ways(case, quantity, n, proved=around.proved)]
    relabelled = _relabelled(claim, quantity, numbers, plain)
    alike = [c for c in others if (told := _width_told(c, quantity)) and _relabelled(c, quantity, *told)]
    all_alike = bool(relabelled) and bool(others) and len(alike) == len(others)
    doubts = (
        [OWN_SCORES.format("the interval")]
        if quantity == "sd" and not around.proved and not all_alike
        else []
    )
    if claim.interval_of is None and not _held(claim) and not around.proved:
        doubts.append("the interval belongs to the mean")
    if not _centred(claim):
        doubts.append(
            "the interval is symmetric, from t or z, not made in logarithms, by bootstrap or by counts"
        )
    foreign = model_of(claim, proved=around.proved)
    comparison = Comparison(
        "spread-from-ci", quantity, numbers, ways, bounds=NOT_NEGATIVE, doubts=tuple(doubts), excuses=(foreign,) if foreign else (),
    )  # fmt: skip
    finding = judge(case, comparison)
    if relabelled and finding.verdict in (*DISCREPANT, "conditional"):
        finding = replace(finding, reconciled_by=(*relabelled, *finding.reconciled_by))
    return finding


def _other_ways(case: Case, quantity: str, n: int | None, *, proved: bool) -> Iterator[Way]:
    """Other honest intervals: by z, of another level, with cases missing, pooled, simultaneous, by hand."""
    claim = case.claim
    dfs = _usual_df(n)
    level, printed = level_of(claim)
    plain, normal = _of_width(claim, quantity, *dfs), _of_width(claim, quantity, math.inf, math.inf)
    z = float(critical_t(level, math.inf))
    yield Way(normal, (NORMAL,))
    yield Way(_scaled_way(normal, 2 / z, 2 / z), (TWO_SE,))
    if quantity == "se" and not proved:
        yield Way(_of_width(claim, quantity, FEWEST_DF, dfs[1]), (FEWER_DF,))
    if quantity == "sd" and n is not None:
        yield Way(
            _with_missing(claim, n, 2 if of_group(claim) else max(2, math.floor(n * FEWEST_LEFT))),
            (SOME_MISSING,),
        )
    for other in () if printed else (0.90, 0.99):
        yield Way(_of_width(claim, quantity, *dfs, level=other), (f"the interval is a {other:.0%} one",))
    low, high = ends(claim)
    middle = log_middle(low.interval(), high.interval())
    if middle is not None and middle.meets(claim.values["mean"].interval()):
        yield Way(_scaled_way(plain, 1 / _skewed(claim, n), CHANCE), (LOGARITHMS,))
    if claim.says("spread-unlabelled"):
        yield Way(_of_width(claim, "se", *dfs), (SE_READING,))
        yield Way(_scaled_way(_of_width(claim, "se", math.inf, math.inf), 1 / z, 1 / z), (HALF_WIDTH,))
    together = pooled_beside(case) if quantity == "sd" else None
    if together is not None and all(_width_fits(c, together[0]) for c in together[1] if _of_mean(c)):
        yield Way(lambda box: (NOT_NEGATIVE,), (POOLED,))
    narrower, wider = other_widths(level, dfs[0] if n else 20.0)
    yield Way(_scaled_way(plain, narrower, CHANCE if proved else wider), (OTHER_METHOD,))


def _skewed(claim: Claim, n: int | None) -> float:
    """How much larger the plain SE may be than the one that an interval made in logarithms tells.

    For log-normal scores with the SD s of their logarithms √(exp(s²) − 1)/s (Aitchison & Brown 1957, The
    Lognormal Distribution), and more by chance; s is told by the width of the interval and n.
    """
    low, high = ends(claim)
    if n is None or low.value <= 0:
        return SKEWED
    s = math.log(high.number / low.number) / 2 / float(critical_t(level_of(claim)[0], n - 1.0)) * math.sqrt(n)
    return (
        min(SKEWED, OUTLIERS * math.sqrt(math.expm1(min(s, 2.0) ** 2)) / min(s, 2.0)) if s > 0 else OUTLIERS
    )


def _with_missing(claim: Claim, n: int, fewest: int) -> Callable[[Box], tuple[Interval, ...]]:
    """The SD where `fewest` to n cases have a value: √n/c rises with n, so both ends are known."""
    few, full = (_of_width(claim, "sd", size - 1.0, size - 1.0, n=size) for size in (fewest, n))
    return lambda box: (Interval(few(box)[0].low, full(box)[0].high),)


def _width_fits(claim: Claim, pooled: Interval) -> bool:
    """Tell whether an interval may be one by a pooled SD, with t of at least its own n − 1 df."""
    n, level = printed_n(claim), level_of(claim)[0]
    if n is None:
        return False
    low, high = (end.interval() for end in ends(claim))
    half = Interval((high.low - low.high) / 2, (high.high - low.low) / 2)
    t, z = float(critical_t(level, n - 1.0)), float(critical_t(level, math.inf))
    return half.meets(Interval(z * pooled.low / math.sqrt(n), t * pooled.high / math.sqrt(n)))


def _relabelled(claim: Claim, quantity: str, numbers: Numbers, plain: Way) -> tuple[Remedy, ...]:
    """The slip of a wrong label: an SE printed as SD (or an interval of single scores as one of the mean), or the other way round."""
    n = printed_n(claim)
    if (
        n is None
        or n < 4
        or claim.says("spread-unlabelled")
        or agrees_as_printed(quantity, numbers, (plain,))
    ):
        return ()
    other = "sd" if quantity == "se" else "se"
    meant = Way(_of_width(claim, other, n - 1.0, n - 1.0))
    if not agrees_as_printed(quantity, numbers, (meant,)):
        return ()
    text = f"if what is printed as {shown(quantity)} were {shown(other)}, it would agree with the interval"
    if quantity == "sd":
        text += "; so it would if the interval were one of single scores (mean ∓ c SD), not of the mean"
    return (Remedy("slip", quantity, text, change=f"{shown(quantity)} → {shown(other)}"),)


def _held(claim: Claim) -> bool:
    """Tell whether the mean lies in the interval: then that is hardly one of something else."""
    low, high = (end.interval() for end in ends(claim))
    return claim.values["mean"].interval().meets(Interval(low.low, high.high))


def _centred(claim: Claim) -> bool:
    """Tell whether the mean may be the middle of its interval."""
    low, high = (end.interval() for end in ends(claim))
    return (
        claim.values["mean"].interval().meets(Interval((low.low + high.low) / 2, (low.high + high.high) / 2))
    )


@check(
    "mean-centre",
    title="mean in the middle of its confidence interval",
    kinds=("group-summary",),
    quantity="mean",
    needs=("mean", "ci_low", "ci_high"),
    formula="mean = (lower end + upper end)/2",
    source="Neyman (1937) Philosophical Transactions A 236:333-380: a t interval is the mean ± c SE",
    limits="Bootstrap, log, count and back-transformed intervals are not symmetric: conditional at most.",
    agrees=("The mean height was 92.4 mm (95% CI [89.4, 95.4]).",),
    conditional=("The mean height was 94.2 mm (95% CI [89.4, 95.4]).",),
)
def mean_centre(case: Case) -> Iterable[Finding]:
    """Compare a mean with the middle of its interval; outside it another check speaks."""
    claim = case.claim
    if not _of_mean(claim):
        return
    low, high = ends(claim)
    mean = claim.values["mean"]
    inside = low.interval().low <= mean.interval().high and mean.interval().low <= high.interval().high
    if not inside:
        return

    def centre(box: Box, off: float = 0.0, units: float = 0.0) -> tuple[Interval, ...]:
        a, b = box["ci_low"], box["ci_high"]
        more = off * (b.high - a.low) / 2 + units * float(low.unit)
        return (Interval((a.low + b.low) / 2 - more, (a.high + b.high) / 2 + more),)

    def geometric(box: Box) -> tuple[Interval, ...]:
        found = log_middle(box["ci_low"], box["ci_high"])
        return () if found is None else (found,)

    ways = (
        Way(centre), Way(geometric, (LOGARITHMS,)), Way(lambda box: centre(box, 0.0, 1.0), (BY_HAND,)),
        Way(lambda box: centre(box, OFF_CENTRE), (OTHER_METHOD,)),
    )  # fmt: skip
    foreign = model_of(claim)
    numbers = {"mean": mean, "ci_low": low, "ci_high": high}
    doubts = ("the interval is a symmetric one, from t or z; a bootstrap, log or count interval need not be",)
    yield judge(
        case,
        Comparison(
            "mean-centre", "mean", numbers, ways, excuses=(foreign,) if foreign else (), doubts=doubts
        ),
    )
