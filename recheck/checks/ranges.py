"""Checks of single numbers against the range that their quantity can have at all."""

from __future__ import annotations

import math
from collections.abc import Iterable
from itertools import combinations

from recheck.checks.compare import doubted, impossible, unchecked
from recheck.checks.examples import table
from recheck.checks.intervals import ALL_KINDS, ends
from recheck.checks.registry import Case, check
from recheck.model import RATIOS, Claim, Finding, Interval, Printed, Remedy, shown
from recheck.model.figures import printed_text, span
from recheck.reconcile.slips import candidates

RANGES: dict[str, Interval] = {
    "p": Interval(0.0, 1.0),
    "r": Interval(-1.0, 1.0),
    "r_pb": Interval(-1.0, 1.0),
    "sd": Interval(0.0, math.inf),
    "se": Interval(0.0, math.inf),
    "se_difference": Interval(0.0, math.inf),
    "F": Interval(0.0, math.inf),
    "chi2": Interval(0.0, math.inf),
    "eta2": Interval(0.0, 1.0),
    "partial_eta2": Interval(0.0, 1.0),
    "generalized_eta2": Interval(0.0, 1.0),
    "r2": Interval(0.0, 1.0),
    "omega2": Interval(-math.inf, 1.0),
    "epsilon2": Interval(-math.inf, 1.0),
    "adjusted_r2": Interval(-math.inf, 1.0),
    "delta_r2": Interval(-1.0, 1.0),
    "cramers_v": Interval(0.0, 1.0),
    "or": Interval(0.0, math.inf),
    "rr": Interval(0.0, math.inf),
    "hr": Interval(0.0, math.inf),
    "rd": Interval(-1000.0, 1000.0),  # printed as a share, in percentage points or per thousand
    "n": Interval(0.0, math.inf),
    "N": Interval(0.0, math.inf),
    "power": Interval(0.0, 1.0),
}
"""What each quantity can be; those that estimates may honestly leave (ω², adjusted R²) have no lower end."""

EXCUSES = {
    "r": (
        "disattenuated",
        "a correlation corrected for unreliability, or between latent variables, may exceed 1",
    ),
    "chi2": ("model-fit", "a difference of scaled χ² values may be negative"),
    "r2": ("mixed-model", "an R² of this kind of model may be negative"),
}


@check(
    "range",
    title="numbers outside the range of their quantity",
    kinds=ALL_KINDS,  # type: ignore[arg-type]
    quantity="",
    needs=(),
    formula="0 ≤ p ≤ 1; −1 ≤ r ≤ 1; SD, SE, F, χ², OR, RR, HR ≥ 0; 0 ≤ η², R² ≤ 1",
    source="by definition of each quantity",
    limits="Percentages are left out; so are adjusted R² and ω² below 0, and disattenuated correlations. R² of predictions for other data may be negative: conditional.",
    conditional=("The model did not carry over to the second bakery, R² = −.05.",),
    impossible=(
        "Height and crumb score went together, r(48) = 1.30, p = .034.",
        "The panel agreed (M = 5.2, SD = −1.1).",
    ),
    unchecked=("The disattenuated correlation was r = 1.04.",),
)
def in_range(case: Case) -> Iterable[Finding]:
    """Find printed numbers that their quantity cannot have; nothing is said of those that it can."""
    yield from _ends_of_ratio(case)
    for name, printed in case.claim.values.items():
        allowed = RANGES.get(name)
        if allowed is None or printed.percent or _possible(printed, allowed):
            continue
        word, reason = EXCUSES.get(name, ("", ""))
        if word and case.claim.suggests(word):
            yield unchecked(case, "range", name, reason)
            continue
        text = f"{shown(name)} {printed_text(printed)} lies outside what it can be, {span(allowed.low, allowed.high)}."
        found = impossible(case, "range", name, text, allowed, remedies=_misprints(name, printed, allowed))
        below = name == "r2" and printed.value < 0 and found.verdict == "impossible"
        yield doubted(found, OF_ITS_OWN_DATA) if below else found


OF_ITS_OWN_DATA = "the R² is that of a least-squares fit to the same data, not of predictions for other data"
OWN_SCALE = "the interval is one of the ratio itself made in logarithms, neither ratio ± c SE nor that of a difference"


def _ends_of_ratio(case: Case) -> Iterable[Finding]:
    """A negative end of a ratio's interval: only a method that does not suit ratios, or another quantity, has one."""
    claim = case.claim
    if claim.interval_of not in RATIOS or not {"ci_low", "ci_high"} <= claim.values.keys():
        return
    allowed = RANGES[claim.interval_of]
    for name, printed in zip(("ci_low", "ci_high"), ends(claim), strict=True):
        if not _possible(printed, allowed):
            text = f"{shown(name)} {printed_text(printed)} lies outside what a ratio can be, {span(allowed.low, allowed.high)}."
            found = impossible(
                case, "range", name, text, allowed, remedies=_misprints(name, printed, allowed)
            )
            yield doubted(found, OWN_SCALE) if found.verdict == "impossible" else found


def _possible(printed: Printed, allowed: Interval) -> bool:
    """Tell whether any true value behind the printed number lies in the range."""
    return printed.interval().meets(allowed)


def _misprints(name: str, printed: Printed, allowed: Interval) -> tuple[Remedy, ...]:
    """Slips with a lost or moved decimal point that lead back into the range."""
    rows = []
    if printed.value < 0 <= allowed.low:
        text = f"if {shown(name)} were {printed.text[1:]} (a dash for a minus), it would be possible"
        rows.append(Remedy("slip", name, text, change=f"{printed.text} → {printed.text[1:]}"))
    for number, words in candidates(printed):
        if words == "decimal point moved" and _possible(number, allowed):
            rows.append(
                Remedy(
                    "slip",
                    name,
                    f"if {shown(name)} were {number.text} instead of {printed.text} ({words}), it would be possible",
                    change=f"{printed.text} → {number.text}",
                )
            )
    return tuple(rows[:1])


ORDERED = ("min", "q1", "median", "q3", "max")
"""Quantiles of one sample, each at least as large as those before it."""


@check(
    "quantile-order",
    title="minimum, quartiles, median and maximum in their order",
    kinds=("group-summary",),
    quantity="",
    needs=(),
    beside="two or more of minimum, quartiles, median, maximum; or mean with minimum or maximum",
    formula="minimum ≤ first quartile ≤ median ≤ third quartile ≤ maximum; minimum ≤ mean ≤ maximum",
    source="by definition",
    limits="Nothing is said of numbers in order. A dash between two numbers can be read as a minus, and adjusted means may leave the range of the data: conditional.",
    impossible=(
        table(
            "Table 1. Loaves by flour, median (IQR).",
            " | Rye (n = 30) | Wheat (n = 31)",
            "Height, mm | 41 (46, 52) | 44 (40, 49)",
        ),
    ),
)
def quantile_order(case: Case) -> Iterable[Finding]:
    """Find the first pair of quantiles that cannot stand in this order."""
    values = case.claim.values
    pairs = [*combinations((n for n in ORDERED if n in values), 2)]
    pairs += [(a, b) for a, b in (("min", "mean"), ("mean", "max")) if a in values and b in values]
    for lower, upper in pairs:
        low, high = values[lower], values[upper]
        if low.percent != high.percent or low.interval().low <= high.interval().high:
            continue
        text = (
            f"{shown(lower)} {printed_text(low)} is printed beside {shown(upper)} {printed_text(high)}: "
            "the first cannot lie above the second."
        )
        name = "median" if "median" in (lower, upper) else "mean" if "mean" in (lower, upper) else lower
        implied = (
            Interval(-math.inf, high.interval().high)
            if name == lower
            else Interval(low.interval().low, math.inf)
        )
        found = impossible(
            case, "quantile-order", name, text, implied, remedies=_swapped(lower, upper, low, high)
        )
        doubt = _order_doubt(case.claim, upper, high)
        yield doubted(found, doubt) if doubt and found.verdict == "impossible" else found
        return


def _swapped(lower: str, upper: str, low: Printed, high: Printed) -> tuple[Remedy, ...]:
    """The remedy of two ends that changed places, for ends of one range alone."""
    if (lower, upper) not in (("q1", "q3"), ("min", "max")):
        return ()
    text = f"if the two were swapped, the range would run from {high.text} to {low.text}"
    return (Remedy("slip", lower, text, change="ends swapped"),)


def _order_doubt(claim: Claim, upper: str, high: Printed) -> str:
    if upper in ("q3", "max") and high.value < 0:
        return "the sign of the larger end is a minus, not the dash between the two"
    if claim.says("covariate-adjusted", "marginal", "imputed", "transformed", "weighted"):
        return "all these numbers describe the same scores, unadjusted"
    return ""


@check(
    "df-positive",
    title="degrees of freedom that cannot be",
    kinds=("t-test", "F-test", "chi2-test", "correlation"),
    quantity="df",
    needs=(),
    formula="df > 0",
    source="by definition of each test",
    limits="Satterthwaite df below 1 and fractional corrected df are honest.",
    impossible=("The loaves differed, t(0) = 2.20, p = .036.",),
)
def df_positive(case: Case) -> Iterable[Finding]:
    """Find df of nought or less."""
    for name in ("df", "df1", "df2"):
        printed = case.claim.values.get(name)
        if printed is not None and printed.relation == "=" and printed.interval().high <= 0.5:
            if printed.decimals > 0 and printed.interval().high > 0:
                continue
            text = f"{shown(name)} {printed_text(printed)}: no test has as few degrees of freedom."
            yield impossible(
                case, "df-positive", name, text, Interval(1.0 if printed.decimals <= 0 else 0.0, math.inf)
            )
