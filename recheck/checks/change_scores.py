"""Checks of a change that is printed beside the two measures that it is the difference of."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache

import regex

from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge
from recheck.checks.examples import table
from recheck.checks.groups import unsigned
from recheck.checks.registry import Case, check
from recheck.checks.surroundings import exact, model_of
from recheck.model import LEVELS, Claim, Finding, Interval, Printed
from recheck.recompute.arrays import absolute_bounds, difference_bounds
from recheck.recompute.paired import sd_of_differences_bounds
from recheck.reconcile.readings import Box, Way

_TIME = r"(?:\s*[-–]?\s*(?:test|training|treatment|intervention|program(?:me)?|score|measure(?:ment)?|assessment|course))?"


@cache
def _first() -> regex.Pattern[str]:
    """Names of the first of two measures."""
    return regex.compile(
        rf"(?:before|baseline|pre|initial|start|(?:time|day|week|month|year)\s*[01]|[tT][01]){_TIME}",
        regex.IGNORECASE,
    )


@cache
def _last() -> regex.Pattern[str]:
    """Names of the last of two measures."""
    return regex.compile(
        rf"(?:after|post|follow[\s-]?up|final|end|endline|time\s*[12]|[tT][12]){_TIME}"
        r"|(?:day|week|month|year)\s*\d+|\d+[\s-]*(?:days?|weeks?|months?|years?)",
        regex.IGNORECASE,
    )


@cache
def _change() -> regex.Pattern[str]:
    """Names of the change between them."""
    return regex.compile(
        r"(?:mean\s+)?(?:change|gain|Δ|delta|improvement|increase|decrease|reduction|difference|diff\.?)(?:\s+scores?)?"
        r"(?:\s*(?:from|since)\s+baseline)?|(?:post|after)\s*[-–−]\s*(?:pre|before)",
        regex.IGNORECASE,
    )


SAME_CASES = "the same cases entered both measures and the change, unadjusted"


@dataclass(frozen=True, slots=True)
class Course:
    """A change with the first and the last of the two measures that it lies between."""

    first: Claim
    last: Claim
    change: Claim


def course_of(case: Case, *names: str) -> Course | None:
    """The two measures beside a change: all of their names but the time is the same, and there are only two."""
    change = case.claim
    key = _key(change, _change())
    if key is None or not change.place.table or not exact(change, *names):
        return None
    times = [c for c in case.block if _key(c, _first()) == key or _key(c, _last()) == key]
    changes = [c for c in case.block if _key(c, _change()) == key]
    if len(times) != 2 or len(changes) != 1 or not all(exact(claim, *names) for claim in times):
        return None
    first, last = times
    return Course(first, last, change) if _key(first, _first()) == _key(last, _last()) == key else None


def _key(claim: Claim, time: regex.Pattern[str]) -> tuple[str, ...] | None:
    """All levels of what a summary is called but the time; None where that is not told exactly once."""
    levels = [level.strip() for name in (claim.outcome, claim.group) for level in (name or "").split(LEVELS)]
    told = [level for level in levels if time.fullmatch(level, timeout=1.0)]
    return None if len(told) != 1 else tuple(sorted(level for level in levels if level and level not in told))


def _judged(case: Case, course: Course, name: str, quantity: str, way: Way) -> Finding:
    claims = (course.change, course.first, course.last)
    numbers: dict[str, Printed] = {
        quantity: unsigned(course.change.values[quantity]),
        f"{quantity}1": course.first.values[quantity],
        f"{quantity}2": course.last.values[quantity],
    }
    models = [model for claim in claims if (model := model_of(claim))]
    comparison = Comparison(
        name,
        quantity,
        numbers,
        (way,),
        claims,
        bounds=NOT_NEGATIVE,
        doubts=(SAME_CASES,),
        excuses=tuple(models[:1]),
    )
    return judge(case, comparison)


def _bench_scores(change: str) -> str:
    """An example: scores before and after, the trained apprentices' change as given."""
    return table(
        "Table 1. Bench scores, mean (SD).",
        " | Before | After | Change",
        f"Trained (n = 18) | 4.2 (1.1) | 5.0 (1.2) | {change}",
        "Untrained (n = 20) | 4.1 (1.1) | 4.3 (1.2) | 0.2 (0.9)",
    )


@check(
    "change-from-measures",
    title="mean change against the means before and after",
    kinds=("group-summary",),
    quantity="mean",
    needs=("mean",),
    beside="the same measure before and after in the same table",
    formula="change = M after − M before",
    source="by definition",
    limits="Conditional at most: some cases may lack one of the measures. The sign is the authors' choice.",
    agrees=(_bench_scores("0.8 (0.9)"),),
    conditional=(_bench_scores("1.8 (0.9)"),),
)
def change_from_measures(case: Case) -> Iterable[Finding]:
    """Compare a mean change with the difference of the two means."""
    course = course_of(case, "mean")
    if course is None:
        return

    def implied(box: Box) -> tuple[Interval, ...]:
        a, b = box["mean2"], box["mean1"]
        low, high = absolute_bounds(*difference_bounds(a.low, a.high, b.low, b.high))
        return (Interval(float(low), float(high)),)

    yield _judged(case, course, "change-from-measures", "mean", Way(implied))


@check(
    "sd-of-change",
    title="SD of a change against the SDs before and after",
    kinds=("group-summary",),
    quantity="sd",
    needs=("sd",),
    beside="the same measure before and after in the same table",
    formula="|SD after − SD before| ≤ SD of the change ≤ SD before + SD after (correlations from 1 to −1)",
    source="Higgins, Li & Deeks, Cochrane Handbook for Systematic Reviews of Interventions, 6.5.2.8",
    limits="Conditional at most: some cases may lack one of the measures. The bounds are wide.",
    agrees=(_bench_scores("0.8 (0.9)"),),
    conditional=(_bench_scores("0.8 (2.9)"),),
)
def sd_of_change(case: Case) -> Iterable[Finding]:
    """Find SDs of a change that no correlation of the two measures allows."""
    course = course_of(case, "sd")
    if course is None or any(c.says("spread-unlabelled") for c in (course.first, course.last, course.change)):
        return

    def implied(box: Box) -> tuple[Interval, ...]:
        a, b = box["sd1"], box["sd2"]
        low, high = sd_of_differences_bounds(a.low, a.high, b.low, b.high, -1.0, 1.0)
        return (Interval(float(low), float(high)),)

    yield _judged(case, course, "sd-of-change", "sd", Way(implied))
