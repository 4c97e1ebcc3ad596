"""Are the ends of an implied interval attained? Recomputed with mpmath at the corners of the box."""

from __future__ import annotations

from itertools import product

import mpmath  # type: ignore[import-untyped]

from recheck.model import Claim, Finding, Interval
from tests.soundness.deciding import Figures, Range, group_ranges

mpmath.mp.dps = 30
HAIR = 2.1e-9
"""Ends are widened outward by 1e-9 relative for the error of special functions."""


def tail(kind: str, statistic: float, df: tuple[float, ...]) -> mpmath.mpf:
    """The plain p of a statistic: both tails of t, z and r, the upper tail of F and χ².

    Incomplete beta and gamma functions: Abramowitz & Stegun (1964) 26.4.19, 26.5.27, 26.6.2.
    """
    x = mpmath.mpf(statistic)
    if kind == "t-test":
        return mpmath.betainc(mpmath.mpf(df[0]) / 2, 0.5, 0, df[0] / (df[0] + x**2), regularized=True)
    if kind == "correlation":
        return mpmath.betainc(mpmath.mpf(df[0]) / 2, 0.5, 0, 1 - x**2, regularized=True)
    if kind == "F-test":
        share = df[1] / (df[1] + df[0] * x)
        return mpmath.betainc(mpmath.mpf(df[1]) / 2, mpmath.mpf(df[0]) / 2, 0, share, regularized=True)
    if kind == "chi2-test":
        return mpmath.gammainc(mpmath.mpf(df[0]) / 2, x / 2, mpmath.inf, regularized=True)
    return mpmath.erfc(abs(x) / mpmath.sqrt(2))


STATISTICS = {
    "t-test": ("t", ("df",)), "correlation": ("r", ("df",)), "F-test": ("F", ("df1", "df2")),
    "chi2-test": ("chi2", ("df",)), "z-test": ("z", ()),
}  # fmt: skip


def df_box(claim: Claim, name: str) -> Range:
    """Whole df are exact, those with decimals an interval."""
    printed = claim.values[name]
    if printed.decimals <= 0:
        return printed.number, printed.number
    interval = printed.interval()
    return interval.low, interval.high


def statistic_corners(claim: Claim) -> list[float]:
    """The ends of |statistic|, with 0 where the box spans it and 1 at most for r."""
    name, _ = STATISTICS[claim.kind]
    interval = claim.values[name].interval().absolute()
    top = min(interval.high, 1.0) if name == "r" else interval.high
    return [interval.low, top]


def plain_p(claim: Claim) -> Interval:
    """The range of the plain p over the printed box: p is monotone, so corners bound it."""
    _, names = STATISTICS[claim.kind]
    boxes = [statistic_corners(claim), *(df_box(claim, name) for name in names)]
    values = [tail(claim.kind, x, tuple(df)) for x, *df in product(*boxes)]
    return Interval(float(min(values)), float(max(values)))


def unattained(claim: Claim, finding: Finding) -> str:
    """Say which end of the plain implied p no point of the box attains; '' where both are."""
    row = next((r for r in finding.implied if not r.assuming), None)
    if row is None:
        return ""
    expected = plain_p(claim)
    return _missed(Interval(row.low, row.high), (expected.low, expected.high), claim)


def _missed(ours: Interval, theirs: Range, claim: Claim) -> str:
    for name, end, attained in (("low", ours.low, theirs[0]), ("high", ours.high, theirs[1])):
        if abs(end - attained) > HAIR * max(abs(attained), 1e-300):
            return f"{name} end {end!r} is not attained, {attained!r} is: {claim.place.quote}"
    return ""


GROUP_CHECKS = {"t-from-groups": "pooled", "d-from-groups": "d"}
"""Checks whose first implied interval is |t| or |d| of two independent groups, pooled."""


def unattained_by_groups(claim: Claim, groups: tuple[Claim, Claim], finding: Finding) -> str:
    """The same for what two groups with printed M, SD and n imply; '' also where they do not apply.

    |t| and |d| grow with the distance of the means and shrink with either SD, so the corners of the
    box (and equal means, where it has any) hold both ends.
    """
    numbers = {}
    for i, group in enumerate(groups, start=1):
        for short, name in (("m", "mean"), ("s", "sd"), ("n", "n")):
            if name not in group.values:
                return ""
            numbers[f"{short}{i}"] = group.values[name].value
    row = finding.implied[0] if finding.implied else None
    if row is None or row.assuming not in ("", "two independent groups, pooled variance"):
        return ""
    theirs = group_ranges(Figures("t", numbers))[GROUP_CHECKS[finding.check]]
    # A range of |t| or |d| is told on the side of the printed sign.
    turned = row.high <= 0 and claim.values[finding.quantity].value < 0
    ends = (-row.high, -row.low) if turned else (row.low, row.high)
    return _missed(Interval(*ends), theirs, claim)
