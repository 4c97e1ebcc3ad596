"""The correlation of two measures that a paired t implies, told beside it."""

from __future__ import annotations

import math

from recheck.checks.designs import PAIRED, Groups, sds, whole
from recheck.model import Claim, Finding, Interval
from recheck.model.figures import span
from recheck.recompute.paired import implied_correlation_bounds
from recheck.reconcile.readings import box_of


def correlation_told(finding: Finding, claim: Claim, groups: Groups) -> str:
    """One sentence on the correlation with which a paired t follows from both SDs; '' where pairs are not what agrees."""
    df, t = whole(claim.values.get("df")), claim.values.get("t")
    n = groups.n1 if groups.n1 is not None else None if df is None else df + 1
    paired = any(words.startswith(PAIRED) for words in finding.assumptions)
    if (
        not paired
        or n is None
        or n < 2
        or t is None
        or t.relation != "="
        or finding.verdict == "inconsistent"
    ):
        return ""
    box = box_of(groups.numbers)
    a, b, s, size = box["mean1"], box["mean2"], sds(box, groups, n, n, as_se=False), t.interval().absolute()
    ends = implied_correlation_bounds(
        a.low, a.high, s.low1, s.high1, b.low, b.high, s.low2, s.high2, n, size.low, size.high
    )
    low, high = (float(end) for end in ends)
    if math.isnan(low) or math.isnan(high) or low > 1 or high < -1:
        return ""
    r = Interval(low, high).within(-1.0, 1.0)
    return f"The two measures would correlate at {span(r.low, r.high, 2)}."
