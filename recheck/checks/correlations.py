"""Checks of the p that is printed with a correlation."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator

import numpy as np
from numpy.typing import NDArray

from recheck.checks.compare import Comparison, judge, unchecked
from recheck.checks.examples import table
from recheck.checks.p_values import (
    NORMAL_P,
    as_interval,
    judge_p,
    tail_ways,
    with_p,
)
from recheck.checks.registry import Case, check
from recheck.model import N_OF_GROUP, Claim, Finding, Interval
from recheck.recompute import bounds, ranks, tails
from recheck.recompute.correlations import partial_r_bounds
from recheck.reconcile.readings import Box, Way, agrees_as_printed


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
    whole = size != "df" and N_OF_GROUP in claim.notes
    doubts = ("no case is missing for these two variables (n is that of the whole group)",) if whole else ()
    yield judge_p(case, "p-from-r", ways, numbers, doubts=doubts)


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
        yield Way(lambda box: (_with_ties(p_of(box, 2), box["r"], n),), (f"{words}, exact with many ties",))


TIED_BELOW = 10


def _with_ties(p: Interval, r: Interval, n: int) -> Interval:
    """p of few pairs with many ties, taken over all orders.

    Whatever the ties, a correlation over all orders has mean 0 and variance 1/(n − 1), so by Cantelli's
    inequality twice its one-tailed p is at most 2 / (1 + (n − 1) r²). In simulation it is seldom below a third of the untied p.
    """
    least = r.absolute().within(0.0, 1.0).low
    return Interval(p.low / 3, max(3 * p.high, 2 / (1 + (n - 1) * least**2))).within(0.0, 1.0)


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


FEWEST_R = 4
"""Correlations of one table from which on they can tell a common number of cases."""
MOST_AGREE = 0.6
N_GRID = 4.0 * 1.1 ** np.arange(115)
"""Numbers of cases that are tried: from 4 to about 200,000, a tenth apart."""


@check(
    "p-among-correlations",
    title="p of a correlation against the other correlations of its table",
    kinds=("correlation",),
    quantity="p",
    needs=("r", "p"),
    beside="three or more other correlations of the same table with p, none with n",
    formula="r and p tell n; pairs of one sample have much the same n",
    source="Fisher (1915) Biometrika 10:507-521",
    limits="Conditional at most, and only where n would have to be less than half or more than twice that of most others: answers may be missing for some pairs.",
    conditional=(
        table(
            "Table 5. Correlations with loaf height.",
            "Measure | r | p",
            "Age | .15 | .09",
            "Hydration | -.07 | .43",
            "Oven heat | .17 | .05",
            "Proofing time | .02 | .82",
            "Rye share | .06 | .02",
        ),
    ),
)
def p_among_correlations(case: Case) -> Iterable[Finding]:
    """Find a p that asks for quite another number of cases than the other correlations of the table."""
    claim = case.claim
    others = [other for other in case.block if other.id != claim.id]
    if len(others) + 1 < FEWEST_R or claim not in case.block:
        return
    fitting = np.array([_fitting(other) for other in others])
    found = fitting.sum(axis=0)
    if found.max() < max(FEWEST_R - 1, MOST_AGREE * len(others)):
        return
    common = N_GRID[found == found.max()]
    n = Interval(float(common.min()) / 2, 2 * float(common.max()))

    def p_of(box: Box, used: int) -> Interval:
        r = box["r"].absolute().within(0.0, 1.0)
        return as_interval(
            bounds.p_from_r_bounds(r.low, r.high, max(n.low - 2, 1.0), max(n.high - 2, 1.0), used)
        )

    numbers = with_p(claim, "r")
    ways = list(tail_ways(claim, True, p_of))
    if agrees_as_printed("p", numbers, ways):
        return
    doubts = (f"much the same cases entered as in the other correlations of the table (n of about {common.min():.0f} to {common.max():.0f})",)  # fmt: skip
    yield judge_p(case, "p-among-correlations", ways, numbers, doubts=doubts)


def _fitting(claim: Claim) -> NDArray[np.bool_]:
    """Which numbers of cases r and p of a correlation allow."""
    r, p = claim.values["r"].interval().absolute().within(0.0, 1.0), claim.values["p"].interval()
    low, high = bounds.p_from_r_bounds(r.low, r.high, N_GRID - 2, N_GRID - 2)
    return np.asarray((low <= p.high) & (high >= p.low))


@check(
    "partial-r",
    title="partial correlation against the three correlations told with it",
    kinds=("correlation",),
    quantity="r",
    needs=("r",),
    beside="just three plain correlations in the same passage",
    formula="partial r = (r12 − r13 r23) / √((1 − r13²)(1 − r23²)); semipartial r = (r12 − r13 r23) / √(1 − r23²)",
    source="Yule (1907) Proceedings of the Royal Society A 79:182-193; Cohen & Cohen (1983), 3.4",
    limits="Conditional at most: which three variables are meant, and that one alone is held constant, is taken from the passage.",
    agrees=(
        "Height went with crumb score (r = .50), height with hydration (r = .40), and crumb score with hydration (r = .60). "
        "The partial correlation of height and crumb score was r(81) = .35, p = .001.",
    ),
    conditional=(
        "Height went with crumb score (r = .50), height with hydration (r = .40), and crumb score with hydration (r = .60). "
        "The partial correlation of height and crumb score was r(81) = .53, p < .001.",
    ),
)
def partial_r(case: Case) -> Iterable[Finding]:
    """Compare a partial correlation with the one that three correlations of its passage imply, whichever of them is which."""
    claim = case.claim
    if not claim.says("partial") or len(case.block) != len(ORDERS) or claim in case.block:
        return
    numbers = {"r": claim.values["r"]}
    numbers |= {f"r of pair {i}": other.values["r"] for i, other in enumerate(case.block, 1)}
    if any(printed.interval().absolute().low > 1 for printed in numbers.values()):
        return
    ways = [Way(lambda box: tuple(i for order in ORDERS for i in _partial(box, order)))]
    ways.append(
        Way(lambda box: tuple(i for order in ORDERS for i in _semipartial(box, order)), (SEMI,), alone=True)
    )
    three = "the three correlations are those of its two variables with each other and with the only one held constant, of the same cases"
    yield judge(
        case,
        Comparison(
            "partial-r", "r", numbers, ways, (claim, *case.block), Interval(-1.0, 1.0), doubts=(three,)
        ),
    )


ORDERS = ((1, 2, 3), (2, 1, 3), (3, 1, 2))
"""Which of three pairs is the one whose partial correlation is told; the other two have the same part in it."""
SEMI = "the coefficient is a semipartial (part) correlation"


def _three(box: Box, order: tuple[int, int, int]) -> list[Interval]:
    return [box[f"r of pair {i}"].within(-1.0, 1.0) for i in order]


def _partial(box: Box, order: tuple[int, int, int]) -> Iterator[Interval]:
    """The range of the partial correlation; none where no data have these three."""
    low, high = partial_r_bounds(*(end for r in _three(box, order) for end in (r.low, r.high)))
    if not np.isnan(low):
        yield Interval(float(low), float(high))


def _semipartial(box: Box, order: tuple[int, int, int]) -> Iterator[Interval]:
    """The range of both semipartial correlations, from that of the partial one: each is √(1 − r²) of it."""
    for whole in _partial(box, order):
        for other in _three(box, order)[1:]:
            size = other.absolute()
            least, most = math.sqrt(1 - size.high**2), math.sqrt(1 - size.low**2)
            low = whole.low * (most if whole.low < 0 else least)
            yield Interval(low, whole.high * (most if whole.high > 0 else least))
