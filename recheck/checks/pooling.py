"""Whether it matters that variances are pooled: told by what both tests imply, never by a test of the variances."""

from __future__ import annotations

from recheck.checks.designs import Groups, sds, t_interval, welch_df
from recheck.model import Interval
from recheck.model.figures import span
from recheck.recompute.variances import variance_ratio_bounds
from recheck.reconcile.readings import Box


def pooled_or_welch(box: Box, groups: Groups) -> str:
    """One sentence that compares |t| and df of both tests over the box; '' where a size is not printed."""
    n1, n2 = groups.n1, groups.n2
    if n1 is None or n2 is None or min(n1, n2) < 2:
        return ""
    pooled = t_interval(box, groups, n1, n2, as_se=False, welch=False)
    welch = t_interval(box, groups, n1, n2, as_se=False, welch=True)
    df = welch_df(box, groups)
    said = "makes no difference to t" if pooled.meets(welch) else "makes a difference to t"
    return (
        f"Pooling {said} here: |t| {_told(pooled)} with {n1 + n2 - 2} df, or {_told(welch)} with {_told(df)} df "
        f"by Welch, at a variance ratio of {_told(_ratio(box, groups, n1, n2))}."
    )


def _told(interval: Interval) -> str:
    return span(interval.low, interval.high, 3)


def _ratio(box: Box, groups: Groups, n1: int, n2: int) -> Interval:
    """The larger variance over the smaller one, over the box."""
    s = sds(box, groups, n1, n2, as_se=False)
    low, high = (float(end) for end in variance_ratio_bounds(s.low1, s.high1, s.low2, s.high2))
    if low + high >= 2 or low >= 1:
        return Interval(low, high)
    low, high = (float(end) for end in variance_ratio_bounds(s.low2, s.high2, s.low1, s.high1))
    return Interval(low, high)
