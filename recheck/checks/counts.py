"""Checks of counts and percentages."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace

from recheck.checks.compare import NOT_NEGATIVE, Comparison, doubted, impossible, judge
from recheck.checks.designs import whole
from recheck.checks.examples import table
from recheck.checks.registry import Case, check
from recheck.model import LEVELS, STATED, TOTAL_OF_GROUP, Claim, Finding, Interval, Printed, Remedy
from recheck.reconcile.readings import Box, Way

OF_GROUP = "the percentage is one of the whole group, none of whose cases is missing"
UNWEIGHTED = "the percentage is that of the printed counts, not of weighted ones"
TO_HUNDRED = "the percentages were adjusted so that they sum to 100"


@check(
    "percent-from-count",
    title="percentage against its count and total",
    kinds=("count",),
    quantity="percent",
    needs=("percent", "count", "total"),
    formula="percentage = 100 count / total",
    source="by definition",
    limits="Where the total is not printed in the same cell, cases may be missing: conditional at most, and unchecked where all categories of the variable are percentages of one smaller number. Weighted percentages are not rebuilt.",
    agrees=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | χ²(1) | p",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | 4.81 | .028",
        ),
    ),
    inconsistent=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | χ²(1) | p",
            "Split crust, n/N (%) | 17/139 (21.2) | 31/140 (22.1) | 4.81 | .028",
        ),
    ),
    conditional=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed (n = 139) | Dry (n = 140)",
            "Split crust, n (%) | 17 (12.6) | 31 (22.1)",
            "Dark crust, n (%) | 40 (28.8) | 52 (37.1)",
        ),
    ),
)
def percent_from_count(case: Case) -> Iterable[Finding]:
    """Compare a percentage, to its own decimals, with its count and total."""
    claim = case.claim
    count, total = whole(claim.values["count"]), whole(claim.values["total"])
    if count is None or not total:
        return
    own = TOTAL_OF_GROUP not in claim.notes
    numbers = {name: claim.values[name] for name in ("percent", "count", "total")}
    numbers["percent"] = replace(numbers["percent"], percent=True)
    unit = float(numbers["percent"].unit)

    def implied(box: Box, units: float = 0.0) -> tuple[Interval, ...]:
        if box["total"].low <= 0:
            return ()
        share = 100 * box["count"].low / box["total"].low
        return (Interval(share - units * unit, share + units * unit),)

    ways = [Way(implied)]
    if not own:
        ways.append(Way(lambda box: implied(box, 1.0), (TO_HUNDRED,), alone=True))
    foreign = [word for word in ("weighted", "marginal", "covariate-adjusted") if claim.says(word)]
    excuses = tuple(f"the percentage may be that of {STATED[word]}" for word in foreign[:1])
    if not own and not excuses and (answered := _answered(case, total)):
        excuses = (f"all percentages of this variable are those of {answered} cases: the others are missing",)
    found = judge(
        case,
        Comparison(
            "percent-from-count", "percent", numbers, ways, bounds=NOT_NEGATIVE,
            doubts=() if own else (OF_GROUP,), excuses=excuses,
        ),
    )  # fmt: skip
    if found.verdict in ("conditional", "inconsistent"):
        if claim.suggests("weighted"):
            found = doubted(found, UNWEIGHTED)
        found = replace(found, reconciled_by=(*found.reconciled_by, *_other_totals(claim)))
    yield found


def _totals(claim: Claim) -> tuple[int, int] | None:
    """The least and the greatest total of which a count is its printed percentage; None where any, or none, will do."""
    count, percent = whole(claim.values.get("count")), claim.values["percent"].interval()
    if not count or percent.low <= 0:
        return None
    low, high = math.ceil(100 * count / percent.high - 1e-9), math.floor(100 * count / percent.low + 1e-9)
    return (max(low, count), high) if max(low, count) <= high else None


def _answered(case: Case, total: int) -> str:
    """How many cases all categories of the variable are percentages of, in this group; '' where no number fits all."""
    column = [c for c in case.block if c.group == case.claim.group and "percent" in c.values]
    # A share that rounds to nought fits any large total; those who did not answer are not among the answers.
    telling = [c for c in column if c.values["percent"].interval().low > 0 and not _left_out(c)]
    ranges = [_totals(claim) for claim in telling if claim.values["count"].value > 0]
    if len(ranges) < 2 or any(r is None for r in ranges):
        return ""
    low, high = max(r[0] for r in ranges if r), min(r[1] for r in ranges if r)
    high = min(high, total)
    return "" if low > high else str(low) if low == high else f"{low} to {high}"


NO_ANSWER = (
    "unknown",
    "missing",
    "not available",
    "no answer",
    "not reported",
    "n missing",
    "not recorded",
    "no data",
)


def _left_out(claim: Claim) -> bool:
    """Tell whether a category holds the cases without an answer."""
    return (claim.outcome or "").rpartition(LEVELS)[2].strip().lower().startswith(NO_ANSWER)


def _other_totals(claim: Claim) -> tuple[Remedy, ...]:
    """The totals of which the count would be the printed percentage."""
    found = _totals(claim)
    if found is None:
        return ()
    low, high = found
    told = str(low) if low == high else f"{low} to {high}"
    share = f"{claim.values['percent'].text.rstrip('% ')}%"
    text = f"total would have to be {told}: {claim.values['count'].text} of {told} is {share}"
    return (Remedy("number", "total", text, low, high),)


@check(
    "count-in-total",
    title="count against its total",
    kinds=("count",),
    quantity="count",
    needs=("count", "total"),
    formula="count ≤ total",
    source="by definition",
    limits="Where the total is the size of the group, what is counted may be events, several to a case: conditional.",
    impossible=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | χ²(1) | p",
            "Split crust, n/N (%) | 179/139 (12.2) | 31/140 (22.1) | 4.81 | .028",
        ),
    ),
)
def count_in_total(case: Case) -> Iterable[Finding]:
    """Find counts above their total; nothing is said of the others."""
    claim = case.claim
    count, total = whole(claim.values["count"]), whole(claim.values["total"])
    if count is None or total is None or count <= total:
        return
    if TOTAL_OF_GROUP not in claim.notes:
        text = f"The count {count} lies above its total {total}."
        yield impossible(case, "count-in-total", "count", text, Interval(0.0, float(total)))
        return
    numbers = {name: claim.values[name] for name in ("count", "total")}
    doubts = ("what is counted are cases of this group, not events",)
    ways = (Way(lambda box: (Interval(0.0, box["total"].low),)),)
    yield judge(case, Comparison("count-in-total", "count", numbers, ways, doubts=doubts))


ONE_EACH = "each case belongs to one category alone, as in the other groups"


@check(
    "categories-in-group",
    title="counts or percentages of all categories against their group",
    kinds=("count",),
    quantity="count",
    needs=("count",),
    beside="the other categories of its block of a table, which make up at least one other group exactly",
    formula="Σ counts ≤ n of the group",
    source="by definition",
    limits="Conditional at most: several answers may have been possible. Nothing is said where the categories make up no other group either.",
    conditional=(
        table(
            "Table 4. Crusts by oven, n (%).",
            " | Steamed (n = 40) | Dry (n = 38)",
            "Crust |  | ",
            "  Dark | 21 (30) | 14 (37)",
            "  Medium | 18 (45) | 13 (34)",
            "  Light | 10 (25) | 11 (29)",
        ),
    ),
)
def categories_in_group(case: Case) -> Iterable[Finding]:
    """Find groups whose categories hold more cases than the group, where they make up another group exactly."""
    columns: dict[str, list[Claim]] = {}
    for claim in case.block:
        columns.setdefault(claim.group or "", []).append(claim)
    sums = {name: _summed(column) for name, column in columns.items()}
    if case.claim is not columns.get(case.claim.group or "", [None])[0]:
        return
    own = sums.pop(case.claim.group or "", None)
    column = columns[case.claim.group or ""]
    if own is None or not any(total == n for total, n in filter(None, sums.values())):
        return
    if own[0] <= own[1] + len(column) / 2:  # weighted counts are rounded one by one
        return
    numbers: Mapping[str, Printed] = {
        "count": case.claim.values["count"],
        **{f"count{i}": claim.values["count"] for i, claim in enumerate(column[1:], 2)},
        "total": case.claim.values["total"],
    }

    def implied(box: Box) -> tuple[Interval, ...]:
        others = sum(box[f"count{i}"].low for i in range(2, len(column) + 1))
        return (Interval(0.0, box["total"].low - others),) if others <= box["total"].low else ()

    yield judge(
        case,
        Comparison(
            "categories-in-group", "count", numbers, (Way(implied),), tuple(column), doubts=(ONE_EACH,)
        ),
    )


def _summed(column: Sequence[Claim]) -> tuple[int, int] | None:
    """The sum of the counts of a group and its size; None where they are not all printed."""
    counts = [whole(claim.values.get("count")) for claim in column]
    totals = {whole(claim.values.get("total")) for claim in column}
    if len(column) < 2 or len(totals) != 1 or None in totals or None in counts:
        return None
    return sum(count or 0 for count in counts), totals.pop() or 0
