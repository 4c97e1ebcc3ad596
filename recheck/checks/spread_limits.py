"""Checks of an SD against what range, quartiles and median of the same scores allow at all."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, replace
from functools import cache

import regex

from recheck.checks.compare import impossible
from recheck.checks.examples import table
from recheck.checks.registry import Case, check
from recheck.checks.surroundings import OWN_SCORES, exact, model_of, of_group, printed_n
from recheck.model import Claim, Finding, Interval, Remedy, shown
from recheck.model.figures import printed_text, span
from recheck.recompute import spread_limits

OBSERVED = "minimum and maximum are values that occurred, not the ends of the scale"
LABELLED = "the spread is an SD or SE, which the text does not say"
PLAIN_SCORES = "all these numbers describe the same scores, unweighted and untransformed"
ONE_UNIT = "all these numbers are in one unit"


@cache
def _units() -> regex.Pattern[str]:
    """Units behind numbers: `1.2 h (SD = 40 min)`."""
    return regex.compile(
        r"\d\s*(h|hr|hrs|hours?|min|mins|minutes?|s|sec|secs|seconds?|ms|days?|weeks?|wk|wks|months?|mo|years?|yr|yrs|"
        r"mm|cm|m|km|kg|g|mg|µg|μg|ng|l|ml|dl|°C|%)(?![\w-])",
        regex.IGNORECASE,
    )


@cache
def _geometric() -> regex.Pattern[str]:
    """What tells of means made in logarithms."""
    return regex.compile(r"\bgeometric\b|\blog", regex.IGNORECASE)


ALL_CASES = "all n cases have a value of this variable"


@dataclass(frozen=True, slots=True)
class Allowed:
    """What a printed SD or SE can be at all, what says so in words, and what would have to hold."""

    quantity: str
    interval: Interval
    because: str
    doubts: tuple[str, ...] = ()


def _told(case: Case, check_name: str, allowed: Allowed) -> Iterator[Finding]:
    """The finding where the printed spread cannot be; nothing is said of those that can."""
    claim, quantity = case.claim, allowed.quantity
    printed, possible = claim.values[quantity], allowed.interval.guarded()
    if printed.interval().meets(possible):
        return
    text = (
        f"{shown(quantity)} {printed_text(printed)} is printed, but {allowed.because} "
        f"allows {span(possible.low, possible.high)} alone, whatever the scores are."
    )
    found = impossible(case, check_name, quantity, text, possible, remedies=_other_label(claim, allowed))
    doubts = (*found.assumptions, *allowed.doubts, *_doubts(claim, quantity))
    if doubts:
        text += f" That is a contradiction only if {'; and if '.join(doubts)}."
        found = replace(found, verdict="conditional", message=text, assumptions=doubts)
    yield found


def _doubts(claim: Claim, quantity: str) -> Iterator[str]:
    """What has to hold for a spread to be that of the scores whose quantiles are told."""
    if claim.says("spread-unlabelled"):
        yield LABELLED
    if quantity == "se":
        yield OWN_SCORES.format("the SE")
    if model_of(claim) or _geometric().search(claim.place.quote, timeout=1.0):
        yield PLAIN_SCORES
    if len({unit.lower() for unit in _units().findall(claim.place.quote, timeout=1.0)}) > 1:
        yield ONE_UNIT


def _other_label(claim: Claim, allowed: Allowed) -> tuple[Remedy, ...]:
    """The slip of an SE labelled SD, where the SD that belongs to it would be possible."""
    n, printed = printed_n(claim), claim.values[allowed.quantity].interval()
    if n is None or allowed.quantity != "sd" or printed.high >= allowed.interval.low:
        return ()
    if not Interval(printed.low * math.sqrt(n), printed.high * math.sqrt(n)).meets(allowed.interval):
        return ()
    return (Remedy("slip", "sd", "if what is printed as SD were SE, it would be possible", change="SD → SE"),)


def _spreads(claim: Claim, sd: Interval) -> Iterator[tuple[str, Interval]]:
    """What a range of the SD says of each spread that is printed: of an SE too, which is SD/√n of as many cases as have a value."""
    n = printed_n(claim)
    if exact(claim, "sd"):
        yield "sd", sd
    if exact(claim, "se"):
        low = sd.low / math.sqrt(n) if n else 0.0
        yield "se", Interval(low, sd.high / math.sqrt(n if n and not of_group(claim) else 2))


@check(
    "spread-in-range",
    title="SD and SE against minimum and maximum",
    kinds=("group-summary",),
    quantity="",
    needs=("min", "max"),
    beside="SD or SE; the mean, where it is printed",
    formula="(maximum − minimum)/√(2n) ≤ SD ≤ √((maximum − mean)(mean − minimum) n/(n − 1)), exact for n",
    source="Popoviciu (1935) Mathematica (Cluj) 9:129-145; Thomson (1955) Biometrika 42:268-269; Bhatia & Davis (2000) American Mathematical Monthly 107:353-357",
    limits="Nothing is said of an SD that is possible. Too small an SD is conditional: the range may be that of the scale.",
    impossible=("The mean height was 92.4 mm (SD = 26.1, range 80–101, n = 18).",),
    conditional=("The mean height was 92.4 mm (SD = 1.44, range 80–101, n = 18).",),
)
def spread_in_range(case: Case) -> Iterable[Finding]:
    """Find spreads larger than a range allows, or smaller than its two ends alone make them."""
    claim = case.claim
    names = ("min", "max", *(("mean",) if "mean" in claim.values else ()))
    if not exact(claim, *names) or claim.values["min"].value > claim.values["max"].value:
        return
    sd = _sd_of_range(claim)
    if sd is None:
        return
    because = "the range" + (" with this mean" if "mean" in claim.values else "")
    because += f" of n = {printed_n(claim)}" if printed_n(claim) else ""
    for quantity, interval in _spreads(claim, sd):
        low = claim.values[quantity].interval().high < interval.low
        yield from _told(case, "spread-in-range", Allowed(quantity, interval, because, (OBSERVED,) if low else ()))  # fmt: skip


def _sd_of_range(claim: Claim) -> Interval | None:
    """The SDs that the range allows, with n or n − 1 in the denominator; None where its mean is not possible either.

    Where the n is that of the group, or none is printed, fewer cases may have a value, down to two.
    """
    a, b = claim.values["min"].interval(), claim.values["max"].interval()
    n, mean = printed_n(claim), claim.values.get("mean")
    widest, narrowest = b.high - a.low, max(b.low - a.high, 0.0)
    low = narrowest / math.sqrt(2 * n) if n else 0.0
    if mean is None:
        high = widest / math.sqrt(2)
        if n and not of_group(claim):
            high = math.sqrt(float(spread_limits.ss_limits_of_range(widest, n)[1]) / (n - 1))
        return Interval(low, high)
    m = mean.interval()
    if n and n > 2 and not of_group(claim):
        least, most = spread_limits.ss_limits_of_range_and_mean(
            a.low, a.high, b.low, b.high, m.low, m.high, n
        )
        if math.isnan(float(least)):
            return None
        return Interval(math.sqrt(float(least) / n), math.sqrt(float(most) / (n - 1)))
    middle = min(max((a.low + b.high) / 2, m.low), m.high)
    if not a.low < middle < b.high:
        return None
    above, below = b.high - middle, middle - a.low
    fewest = 1 + max(above / below, below / above)  # n values have their mean no nearer to an end than this
    return Interval(low, math.sqrt(above * below * fewest / (fewest - 1)))


@check(
    "spread-from-quartiles",
    title="SD and SE against the quartiles",
    kinds=("group-summary",),
    quantity="",
    needs=("n",),
    beside="SD or SE; quartiles or IQR",
    formula="SD ≥ IQR √(⌊n/4⌋/(2n))",
    source="by definition of quartiles, for all nine of Hyndman & Fan (1996) The American Statistician 50:361-365",
    limits="A lower bound only: tails can make an SD as large as one likes. Conditional where n is that of the whole group.",
    impossible=(
        table(
            "Table 1. Height of loaves in mm.",
            " | n | Mean | SD | Median | Q1 | Q3",
            "Rye | 40 | 92.4 | 0.9 | 92 | 88 | 97",
        ),
    ),
)
def spread_from_quartiles(case: Case) -> Iterable[Finding]:
    """Find spreads that are too small for half of the scores to lie as far apart as the quartiles."""
    claim, n = case.claim, printed_n(case.claim)
    iqr = _least_iqr(claim)
    if n is None or iqr <= 0:
        return
    least = math.sqrt(float(spread_limits.ss_least_of_quartiles(iqr, n)) / n)
    doubts = (ALL_CASES,) if of_group(claim) else ()
    because = f"the distance of the quartiles of n = {n}"
    for quantity, interval in _spreads(claim, Interval(least, math.inf)):
        yield from _told(case, "spread-from-quartiles", Allowed(quantity, interval, because, doubts))


def _least_iqr(claim: Claim) -> float:
    """The least distance of the quartiles that the printed ones allow."""
    if exact(claim, "q1", "q3"):
        return claim.values["q3"].interval().low - claim.values["q1"].interval().high
    return claim.values["iqr"].interval().low if exact(claim, "iqr") else 0.0


@check(
    "mean-and-median",
    title="SD and SE against the distance of mean and median",
    kinds=("group-summary",),
    quantity="",
    needs=("mean", "median"),
    beside="SD, or SE and n",
    formula="|mean − median| ≤ SD; with n odd and h = (n + 1)/2, ≤ SD √((n − 1)/n · (n − h)/h)",
    source="Hotelling & Solomons (1932) Annals of Mathematical Statistics 3:141-142",
    limits="Nothing is said of a mean and a median that are near enough to each other.",
    impossible=(
        table(
            "Table 1. Time of proofing in min.", " | n | Mean | SD | Median", "Rye | 18 | 84.0 | 6.1 | 62.0"
        ),
    ),
)
def mean_and_median(case: Case) -> Iterable[Finding]:
    """Find means and medians further apart than one SD, which no scores allow."""
    claim, n = case.claim, printed_n(case.claim)
    if not exact(claim, "mean", "median"):
        return
    mean, median = claim.values["mean"].interval(), claim.values["median"].interval()
    least = mean.distance(median)
    if n is not None and n > 2 and n % 2 and not of_group(claim):
        # The median of an odd number of values is beyond doubt; of the two denominators of the SD, n asks for less.
        least /= float(spread_limits.most_mean_less_median(math.sqrt(n / (n - 1)), n))
    for quantity, interval in _spreads(claim, Interval(least, math.inf)):
        if quantity == "sd" or n is not None:
            yield from _told(
                case, "mean-and-median", Allowed(quantity, interval, "the distance of mean and median")
            )
