"""Counts laid out as a table: its cells from the box of printed counts, percentages and totals."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import product

import numpy as np
from numpy.typing import NDArray

from recheck.checks.designs import whole
from recheck.model import TOTAL_OF_GROUP, Claim, Interval, Printed
from recheck.reconcile.readings import Box, Numbers

MOST_CELLS = 40
MOST_TABLES = 4000
"""Tables of counts that may stand behind printed percentages; where there are more, nothing is compared."""

Tables = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Layout:
    """Count claims as a table of categories and groups, with numbers named `count1`, `total1`, `percent1` …

    `cells` hold the number of each claim, categories down and groups across. With one category alone the
    others of each group (total less count) make the second row. `exact` says that all counts are printed,
    `complete` that all cases of the test are surely in the table.
    """

    numbers: Numbers
    cells: tuple[tuple[int, ...], ...]
    exact: bool
    complete: bool
    sizes: tuple[int, ...]

    @property
    def shape(self) -> tuple[int, int]:
        """Rows and columns of the table that is tested."""
        return max(len(self.cells), 2), len(self.cells[0])


def laid_out(claims: Sequence[Claim]) -> Layout | str | None:
    """Lay counts out as a table; a reason in words where they overlap, None where they make no table."""
    if not 2 <= len(claims) <= MOST_CELLS:
        return None
    if len(claims) == 2 and not any(claim.place.table for claim in claims):
        # Two counts of a sentence are those of two groups, whatever their names.
        claims = [replace(claim, outcome="", group=str(i)) for i, claim in enumerate(claims)]
    rows = list(dict.fromkeys(_category(claim) for claim in claims))
    columns = list(dict.fromkeys(_group(claim) for claim in claims))
    at = {(_category(claim), _group(claim)): i for i, claim in enumerate(claims, 1)}
    if len(columns) < 2 or len(at) != len(claims) or len(at) != len(rows) * len(columns):
        return None
    numbers: dict[str, Printed] = {}
    for i, claim in enumerate(claims, 1):
        told = [name for name in ("count", "percent", "total") if name in claim.values]
        if "count" in told:
            told = [name for name in told if name != "percent"]
        if "count" not in told and not {"percent", "total"} <= set(told):
            return None
        numbers |= {f"{name}{i}": claim.values[name] for name in told}
    cells = tuple(tuple(at[row, column] for column in columns) for row in rows)
    if any(whole(number) is None for name, number in numbers.items() if not name.startswith("percent")):
        return None
    layout = _sized(numbers, cells, own=not any(TOTAL_OF_GROUP in claim.notes for claim in claims))
    if isinstance(layout, Layout) and len(cells) > 1 and layout.exact and _sum_to_hundred(claims, cells):
        return replace(layout, complete=True)
    return layout


def _sum_to_hundred(claims: Sequence[Claim], cells: tuple[tuple[int, ...], ...]) -> bool:
    """Tell whether the percentages of each group sum to 100, as rounded: then its categories are all there."""
    for column in zip(*cells, strict=True):
        told = [claims[i - 1].values.get("percent") for i in column]
        intervals = [percent.interval() for percent in told if percent is not None]
        if len(intervals) < len(told):
            return False
        if not sum(i.low for i in intervals) <= 100 <= sum(i.high for i in intervals):
            return False
    return True


def _category(claim: Claim) -> str:
    return claim.outcome or claim.place.row or ""


def _group(claim: Claim) -> str:
    return claim.group or claim.place.column or ""


def _sized(numbers: Numbers, cells: tuple[tuple[int, ...], ...], *, own: bool) -> Layout | str | None:
    """Find the groups' sizes, and whether the categories make them up."""
    exact = all(f"count{i}" in numbers for row in cells for i in row)
    totals = [_one_total(numbers, column) for column in zip(*cells, strict=True)]
    if len(cells) == 1:
        if any(total is None for total in totals):
            return None
        sizes = tuple(total or 0 for total in totals)
        return Layout(numbers, cells, exact, own, sizes)
    if not exact:
        known = all(total is not None for total in totals)
        return Layout(numbers, cells, False, False, tuple(t or 0 for t in totals)) if known else None
    sums = tuple(sum(int(numbers[f"count{i}"].value) for i in column) for column in zip(*cells, strict=True))
    if any(total is not None and made > total for made, total in zip(sums, totals, strict=True)):
        return "the categories overlap: their counts exceed the groups"
    complete = all(made == total for made, total in zip(sums, totals, strict=True))
    return Layout(numbers, cells, exact, complete, sums)


def _one_total(numbers: Numbers, column: Sequence[int]) -> int | None:
    """The size of a group, where all its counts name one and the same."""
    totals = {whole(numbers.get(f"total{i}")) for i in column}
    return totals.pop() if len(totals) == 1 else None


def counts_behind(percent: Interval, total: int) -> range:
    """All counts that are such a percentage of the total; empty where none is."""
    low = max(math.ceil(total * percent.low / 100 - 1e-9), 0)
    return range(low, min(math.floor(total * percent.high / 100 + 1e-9), total) + 1)


def tables_of(box: Box, layout: Layout) -> Tables | None:
    """All tables that the printed numbers can stand for, shape (tables, rows, columns); None where too many."""
    choices = [[_choices(box, i) for i in row] for row in layout.cells]
    flat = [choice for row in choices for choice in row]
    if any(not choice for choice in flat) or math.prod(map(len, flat)) > MOST_TABLES:
        return None
    tables = np.array(list(product(*flat)), dtype=float).reshape(-1, *np.shape(layout.cells))
    if len(layout.cells) == 1:
        totals = np.array([box[f"total{i}"].low for i in layout.cells[0]])
        tables = np.concatenate([tables, totals - tables], axis=1)
    return tables if np.all(tables >= 0) else None


def _choices(box: Box, i: int) -> Sequence[int]:
    if f"count{i}" in box:
        return (int(box[f"count{i}"].low),)
    return counts_behind(box[f"percent{i}"], int(box[f"total{i}"].low))
