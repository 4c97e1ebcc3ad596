"""The 2 × 2 table behind a ratio or a difference of risks, and what makes it another model's."""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np
from numpy.typing import NDArray

from recheck.checks.designs import whole
from recheck.checks.groups import link_doubts
from recheck.checks.registry import Case
from recheck.checks.tabulated import Layout, tables_of
from recheck.model import STATED, TOTAL_OF_GROUP, Claim, Interval, Printed
from recheck.reconcile.readings import Box

Values = NDArray[np.float64]
Cells = tuple[Values, Values, Values, Values]
"""Arrays of a, b, c, d: cases with and without the event in the first group and in the second."""
Measure = Callable[[Values, Values, Values, Values], Values]

ADJUSTING = (
    "covariate-adjusted", "multi-regression", "mixed-model", "marginal", "survival", "rates", "weighted", "imputed",
    "bayesian", "paired", "repeated", "robust",
)  # fmt: skip
"""What gives a ratio that the counts of two groups do not, where it is said of this result."""
IN_DOCUMENT = (
    "covariate-adjusted",
    "multi-regression",
    "mixed-model",
    "survival",
    "marginal",
    "weighted",
    "imputed",
    "bayesian",
)
"""Of those, what a document that speaks of it elsewhere may mean for this result too."""
OF_ALL_RESULTS = ("weighted", "imputed", "mixed-model")
"""Of those, what a result that is called crude may have as well."""
CRUDE = "no covariates, strata, pairs or weights entered it (the text does not say so)"
NOT_MATCHED = "the two groups are not matched pairs"
NONE_MISSING = "no case of the groups is missing (their sizes are those of whole groups)"


def risk_layout(case: Case) -> Layout | None:
    """The counts that a result is linked to: two groups, with totals or with the counts of the other category."""
    groups = case.groups
    if len(groups) not in (2, 4) or any(group.kind != "count" for group in groups):
        return None
    numbers: dict[str, Printed] = {}
    for i, claim in enumerate(groups, 1):
        told = ["count"] if "count" in claim.values else ["percent"]
        told += ["total"] * (len(groups) == 2)
        if not set(told) <= claim.values.keys():
            return None
        numbers |= {f"{name}{i}": claim.values[name] for name in told}
    if any(whole(number) is None for name, number in numbers.items() if not name.startswith("percent")):
        return None
    if len(groups) == 4:
        columns = tuple(_sum(numbers, pair) for pair in ((1, 3), (2, 4)))
        return Layout(numbers, ((1, 2), (3, 4)), True, False, columns) if all(columns) else None
    sizes = tuple(whole(numbers[f"total{i}"]) or 0 for i in (1, 2))
    counted = all(f"count{i}" in numbers for i in (1, 2))
    own = not any(TOTAL_OF_GROUP in group.notes for group in groups)
    above = any((whole(numbers.get(f"count{i}")) or 0) > size for i, size in enumerate(sizes, 1))
    return Layout(numbers, ((1, 2),), counted, own, sizes) if all(sizes) and not above else None


def _sum(numbers: dict[str, Printed], cells: Sequence[int]) -> int:
    return sum(int(numbers[f"count{i}"].value) for i in cells)


def cells_of(box: Box, layout: Layout) -> Cells | None:
    """The cells of every table that the printed numbers can stand for; None where there are too many."""
    tables = tables_of(box, layout)
    if tables is None:
        return None
    return tables[:, 0, 0], tables[:, 1, 0], tables[:, 0, 1], tables[:, 1, 1]


def as_given(cells: Cells) -> Cells:
    """The counts as they stand."""
    return cells


def turned(cells: Cells) -> Cells:
    """The counts with the groups exchanged."""
    a, b, c, d = cells
    return c, d, a, b


def transposed(cells: Cells) -> Cells:
    """The counts with groups and event exchanged: the cases with the event as one group, those without it as the other."""
    a, b, c, d = cells
    return a, c, b, d


def other_event(cells: Cells) -> Cells:
    """The counts with the event and its absence exchanged."""
    a, b, c, d = cells
    return b, a, d, c


def range_of(values: Values) -> tuple[Interval, ...]:
    """The interval from the least to the greatest; none where one of them is no finite number."""
    if not len(values) or not np.all(np.isfinite(values)):
        return ()
    return (Interval(float(values.min()), float(values.max())),)


def by_hand(case: Case) -> Cells | None:
    """The shares in per cent as printed, as if they were counts out of 100."""
    percents = [group.values.get("percent") for group in case.groups]
    if len(percents) != 2 or any(percent is None for percent in percents):
        return None
    shares = [np.array([percent.number]) for percent in percents if percent is not None]
    return shares[0], 100 - shares[0], shares[1], 100 - shares[1]


def excuses_of(case: Case) -> tuple[str, ...]:
    """Why the counts cannot rebuild the result."""
    claim = case.claim
    claims = (claim, *case.groups)
    said = [word for word in ADJUSTING if claim.says(word) or any(c.says(word) for c in claims[1:])]
    if said and not (claim.says("crude") and said[0] in ("multi-regression", "robust")):
        return (f"counts alone cannot rebuild {_words(said[0])}",)
    spoken = [
        word for word in (OF_ALL_RESULTS if claim.says("crude") else IN_DOCUMENT) if word in claim.background
    ]
    return (f"the document speaks of {_words(spoken[0])}, which counts cannot rebuild",) if spoken else ()


def _words(word: str) -> str:
    return "results adjusted for covariates" if word == "covariate-adjusted" else STATED[word]


def doubts_of(case: Case, layout: Layout) -> tuple[str, ...]:
    """What must hold beside the counts for a difference to be a contradiction."""
    claim = case.claim
    doubts = list(link_doubts(case))
    if not claim.says("crude"):
        doubts.append(CRUDE)
    if not layout.complete:
        doubts.append(NONE_MISSING)
    if not layout.exact:
        doubts.append("counts are those behind the printed percentages")
    if _maybe_matched(case, layout):
        doubts.append(NOT_MATCHED)
    return tuple(doubts)


def _maybe_matched(case: Case, layout: Layout) -> bool:
    """Tell whether the groups may be matched: one a multiple of the other, cases and controls, or said of the document."""
    small, large = sorted(layout.sizes[:2])
    heads = " ".join(f"{group.group or ''} {group.place.column or ''}" for group in case.groups).lower()
    named = any(word in heads for word in ("case", "control", "match"))
    multiple = large % small == 0 and not case.claim.says("independent", "between-groups")
    return multiple or named or case.claim.suggests("matched", "paired", "repeated")


def spelled_out(claim: Claim, *names: str) -> bool:
    """Tell whether a heading or the result itself spells its name out."""
    told = f"{claim.place.column or ''} {claim.place.quote}".lower()
    return any(name in told for name in names)
