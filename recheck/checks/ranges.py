"""Checks of single numbers against the range that their quantity can have at all."""

from __future__ import annotations

import math
from collections.abc import Iterable

from recheck.checks.compare import impossible, unchecked
from recheck.checks.intervals import ALL_KINDS
from recheck.checks.registry import Case, check
from recheck.model import Finding, Interval, Printed, Remedy, shown
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
    "cramers_v": Interval(0.0, 1.0),
    "or": Interval(0.0, math.inf),
    "rr": Interval(0.0, math.inf),
    "hr": Interval(0.0, math.inf),
    "rd": Interval(-1.0, 1.0),
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
    limits="Percentages are left out; so are adjusted R² and ω² below 0, and disattenuated correlations.",
    impossible=(
        "Height and crumb score went together, r(48) = 1.30, p = .034.",
        "The panel agreed (M = 5.2, SD = −1.1).",
    ),
    unchecked=("The disattenuated correlation was r = 1.04.",),
)
def in_range(case: Case) -> Iterable[Finding]:
    """Find printed numbers that their quantity cannot have; nothing is said of those that it can."""
    for name, printed in case.claim.values.items():
        allowed = RANGES.get(name)
        if allowed is None or printed.percent or _possible(printed, allowed):
            continue
        word, reason = EXCUSES.get(name, ("", ""))
        if word and case.claim.suggests(word):
            yield unchecked(case, "range", name, reason)
            continue
        text = f"{shown(name)} {printed_text(printed)} lies outside what it can be, {span(allowed.low, allowed.high)}."
        yield impossible(case, "range", name, text, allowed, remedies=_misprints(name, printed, allowed))


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
