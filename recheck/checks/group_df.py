"""The df that linked groups allow, where a test prints none."""

from __future__ import annotations

from recheck.checks.designs import whole
from recheck.checks.registry import Case
from recheck.checks.tabulated import Layout, laid_out
from recheck.model import N_OF_GROUP, Interval

FEWEST = 4.0
"""df below which no test of groups goes, however many cases are missing."""


def df_of_groups(case: Case, statistic: str) -> tuple[Interval, ...] | None:
    """The ranges of df, two for F; None where the groups do not tell.

    t: from the smaller n less 1 (Welch, pairs) to n1 + n2 - 2; F of k groups: k - 1, and up to N - k;
    χ²: that of the table of counts. Where n is that of the whole group, half of the cases may be missing.
    """
    if statistic == "chi2":
        layout = laid_out(case.groups) if all(g.kind == "count" for g in case.groups) else None
        if not isinstance(layout, Layout):
            return None
        df = float((layout.shape[0] - 1) * (layout.shape[1] - 1))
        return (Interval(df, df),)
    ns = [whole(group.values.get("n")) for group in case.groups]
    known = [n for n in ns if n is not None and n > 1]
    k = len(known)
    if k < 2 or k != len(ns) or (statistic == "t" and k != 2):
        return None
    share = 2.0 if any(N_OF_GROUP in group.notes for group in case.groups) else 1.0
    most = float(sum(known) - k)
    least = max(min((min(known) - 1) / share, most), min(FEWEST, most))
    within = Interval(least, most)
    return (within,) if statistic == "t" else (Interval(k - 1.0, k - 1.0), within)
