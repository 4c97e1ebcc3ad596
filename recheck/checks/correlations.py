"""Checks of the p that is printed with a correlation."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator

from recheck.checks.compare import unchecked
from recheck.checks.p_values import (
    NORMAL_P,
    as_interval,
    judge_p,
    tail_ways,
    with_p,
)
from recheck.checks.registry import Case, check
from recheck.model import Claim, Finding, Interval
from recheck.recompute import bounds, ranks, tails
from recheck.reconcile.readings import Box, Way


@check(
    "p-from-r",
    title="p that is printed with a correlation",
    kinds=("correlation",),
    quantity="p",
    needs=("r", "p"),
    beside="df or n",
    formula="t = r √(df / (1 − r²)) with df = n − 2; p = 2 P(T > |t|)",
    source="Fisher (1915) Biometrika 10:507-521; Best & Roberts (1975) Applied Statistics 24:377-379 for rank correlations",
    limits="Needs df or n. Partial correlations have fewer df than n − 2.",
    agrees=("Height rose with proofing time, r(48) = .30, p = .034.",),
    conditional=("Height rose with proofing time, r(48) = .30, p = .017.",),
    inconsistent=("Height rose with proofing time, r(48) = .30, p = .34.",),
    unchecked=("Height rose with proofing time, r = .30, p = .034.",),
)
def p_from_r(case: Case) -> Iterable[Finding]:
    """Compare the printed p with the p that r and its df (or n) imply."""
    claim = case.claim
    size = next((name for name in ("df", "n", "N") if name in claim.values), None)
    if size is None:
        yield unchecked(case, "p-from-r", "p", "neither df nor n is printed with r")
        return
    if claim.values["r"].interval().absolute().low > 1:
        yield unchecked(case, "p-from-r", "p", "r lies outside −1 to 1")
        return
    numbers = with_p(claim, "r", size)
    off = 0.0 if size == "df" else 2.0

    def p_of(box: Box, used: int, less: float = off) -> Interval:
        r = box["r"].absolute().within(0.0, 1.0)
        df_low, df_high = box[size].low - less, box[size].high - less
        return as_interval(bounds.p_from_r_bounds(r.low, r.high, max(df_low, 1.0), max(df_high, 1.0), used))

    ways = list(tail_ways(claim, True, p_of))
    if size == "df":
        words = "the number in brackets is n, not df"
        ways += tail_ways(claim, True, lambda box, used: p_of(box, used, 2.0), words=(words,))
    n = int(numbers[size].value) + (2 if size == "df" else 0)
    ways += _rank_ways(claim, n)
    ways.append(Way(lambda box: _normal_r(box, n), (NORMAL_P,)))
    if claim.suggests("partial"):
        ways += tail_ways(
            claim, True, lambda box, used: _fewer_df(box, used, n), words=("covariates take up df",)
        )
    yield judge_p(case, "p-from-r", ways, numbers)


def _rank_ways(claim: Claim, n: int) -> Iterator[Way]:
    """The p of Spearman's rank correlation, exact or by its Edgeworth series.

    Without ties r moves in steps of 12/(n³ − n); ties put it between two steps.
    """
    if n < 4:
        return
    said = claim.suggests("spearman")

    def p_of(box: Box, used: int) -> Interval:
        r = box["r"].absolute().within(0.0, 1.0)
        step = 12.0 / (n**3 - n)
        at_high = float(ranks.spearman_two_sided(min(r.high + step, 1.0), n))
        at_low = float(ranks.spearman_two_sided(max(r.low - step, 0.0), n))
        return Interval(min(at_high, at_low) * used / 2, max(at_high, at_low) * used / 2)

    words = "p is that of Spearman's rank correlation"
    yield from tail_ways(claim, True, p_of, words=() if said else (words,))
    if n < TIED_BELOW:
        yield Way(lambda box: (_with_ties(p_of(box, 2)),), (f"{words}, exact with many ties",))


TIED_BELOW = 10


def _with_ties(p: Interval) -> Interval:
    """p of few pairs with many ties, taken over all orders: within a factor of three of the untied one."""
    return Interval(p.low / 3, min(3 * p.high, 1.0))


def _normal_r(box: Box, n: int) -> tuple[Interval, ...]:
    """Two normal approximations: Fisher's z with n − 3, and r √(n − 1)."""
    r = box["r"].absolute().within(0.0, 1.0)
    if n < 4:
        return ()
    low = min(math.atanh(min(r.low, 1 - 1e-15)) * math.sqrt(n - 3), r.low * math.sqrt(n - 1))
    high = max(math.atanh(min(r.high, 1 - 1e-15)) * math.sqrt(n - 3), r.high * math.sqrt(n - 1))
    return (Interval(float(tails.z_two_sided(high)), float(tails.z_two_sided(low))),)


def _fewer_df(box: Box, used: int, n: int) -> Interval:
    r = box["r"].absolute().within(0.0, 1.0)
    return as_interval(bounds.p_from_r_bounds(r.low, r.high, max(1.0, (n - 2) / 2), max(1.0, n - 2), used))
