"""Summaries beside a test whose df tell that not all of the n cases that are printed have a value."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace

from recheck.checks.designs import whole
from recheck.model import FEWER_CASES, Claim
from recheck.recompute.two_groups import welch_df_bounds


def with_fewer_cases(claims: Sequence[Claim]) -> list[Claim]:
    """All claims; summaries whose test has fewer df than their n give, by whatever plain design, say so in a note."""
    by_id = {claim.id: claim for claim in claims}
    fewer = {claim.id for test in claims for claim in _fewer(test, by_id)}
    return [
        replace(claim, notes=(*claim.notes, FEWER_CASES)) if claim.id in fewer else claim for claim in claims
    ]


def _fewer(test: Claim, by_id: Mapping[str, Claim]) -> Sequence[Claim]:
    """The summaries of a test that cannot all have a value in it."""
    df = whole(test.values.get("df2") or test.values.get("df"))
    if df is None or test.kind not in ("t-test", "F-test"):
        return ()
    groups = [by_id[name] for name in test.groups if name in by_id]
    sizes = [n for group in groups if (n := whole(group.values.get("n"))) is not None]
    if len(sizes) < 2 or len(sizes) != len(groups):
        return ()
    most = sum(sizes) - len(sizes)
    return groups if df < most and not any(low <= df <= high for low, high in _designs(groups, sizes)) else ()


def _designs(groups: Sequence[Claim], sizes: Sequence[int]) -> Iterator[tuple[float, float]]:
    """The df of plain designs other than independent groups of equal variance: measured repeatedly, or Welch's t."""
    if len(set(sizes)) == 1:
        yield sizes[0] - 1, sizes[0] - 1
        repeated = (sizes[0] - 1) * (len(sizes) - 1)
        yield repeated, repeated
    spreads = [group.values.get("sd") for group in groups]
    if len(sizes) == 2 and all(spread is not None and spread.value > 0 for spread in spreads):
        ends = [spread.interval() for spread in spreads if spread is not None]
        low, high = welch_df_bounds(
            max(ends[0].low, 0.0), ends[0].high, sizes[0], max(ends[1].low, 0.0), ends[1].high, sizes[1]
        )
        yield math.floor(float(low)), math.ceil(float(high))
