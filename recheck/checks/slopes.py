"""Checks of the slope on a predictor of two groups against their means and SDs."""

from __future__ import annotations

from collections.abc import Callable, Iterable

from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge
from recheck.checks.designs import Groups, sds
from recheck.checks.groups import fit_of, link_doubts, linked_groups, unsigned
from recheck.checks.models import foreign_model
from recheck.checks.registry import Case, check
from recheck.model import Finding, Interval
from recheck.recompute.arrays import difference_bounds
from recheck.recompute.two_groups import binary_slope
from recheck.reconcile.readings import Box, Way

ONE_APART = "b is in the units of the means, its groups coded one unit apart (0 and 1)"
TWO_APART = "the groups are coded −1 and 1"
STEPS: tuple[tuple[float, tuple[str, ...]], ...] = ((1.0, ()), (2.0, (TWO_APART,)))


@check(
    "slope-from-groups",
    title="slope and SE of a predictor of two groups against their means and SDs",
    kinds=("t-test",),
    quantity="b",
    needs=("b", "df"),
    beside="two linked groups with mean, SD or SE and n, whose df are n1 + n2 − 2",
    formula="b = (M1 − M2) / step, SE = s √(1/n1 + 1/n2) / step, s the pooled SD, step the distance of both codes",
    source="Cohen (1968) Psychological Bulletin 70:426-443",
    limits="Never worse than conditional: codes and units are the authors' choice, and so is the sign.",
    agrees=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), b = 6.4, SE = 1.98, t(34) = 3.23.",
    ),
    conditional=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), b = 3.2, SE = 0.99, t(34) = 3.23.",
    ),
)
def slope_from_groups(case: Case) -> Iterable[Finding]:
    """Compare b, and its SE where it is printed, with the difference of both means and its pooled SE."""
    linked, fit, values = linked_groups(case), fit_of(case), case.claim.values
    if linked is None or fit is None or fit.reason or linked[0].impossible:
        return
    groups, claims = linked
    n1, n2 = groups.n1, groups.n2
    if n1 is None or n2 is None or values["df"].value != n1 + n2 - 2 or case.claim.says("paired", "welch"):
        return
    foreign = foreign_model(claims, fitted=True)
    for name, of in (("b", _slope), ("se", _error)):
        if name in values:
            ways = [Way(of(groups, n1, n2, step), words) for step, words in STEPS]
            printed = unsigned(values[name])
            yield judge(
                case,
                Comparison(
                    "slope-from-groups", name, {name: printed, **groups.numbers}, ways, claims, bounds=NOT_NEGATIVE,
                    doubts=(ONE_APART, *link_doubts(case)), excuses=(foreign,) if foreign else (),
                ),
            )  # fmt: skip


Implied = Callable[[Box], tuple[Interval, ...]]


def _slope(groups: Groups, n1: int, n2: int, step: float) -> Implied:
    """|b| over the box of both means."""

    def implied(box: Box) -> tuple[Interval, ...]:
        a, b = box["mean1"], box["mean2"]
        low, high = (float(end) / step for end in difference_bounds(a.low, a.high, b.low, b.high))
        return (Interval(low, high).absolute(),)

    return implied


def _error(groups: Groups, n1: int, n2: int, step: float) -> Implied:
    """SE of b over the box of both SDs: it rises with either."""

    def implied(box: Box) -> tuple[Interval, ...]:
        s = sds(box, groups, n1, n2, as_se=False)
        ends = [
            binary_slope(0, low, n1, 0, high, n2, step, 0)[1]
            for low, high in ((s.low1, s.low2), (s.high1, s.high2))
        ]
        return (Interval(float(ends[0]), float(ends[1])),)

    return implied
