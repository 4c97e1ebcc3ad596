"""Checks of stars beside a printed p."""

from __future__ import annotations

from collections.abc import Iterable
from typing import get_args

from recheck.checks.compare import Comparison, judge
from recheck.checks.examples import table
from recheck.checks.p_values import P_RANGE
from recheck.checks.registry import Case, check
from recheck.model import ClaimKind, Finding, Interval
from recheck.reconcile.readings import Box, Way

ONE_TAILED_STARS = "the stars are those of the one-tailed p"


@check(
    "p-from-stars",
    title="p against the stars beside it",
    kinds=get_args(ClaimKind),
    quantity="p",
    needs=("p", "stars"),
    formula="p < the threshold that the note gives for these stars",
    source="common practice, no source",
    limits="Too many stars alone: fewer than p would allow are honest. Stars may belong to an adjusted p: then conditional.",
    inconsistent=(
        table(
            "Table 5. Bench scores of trained and untrained apprentices.",
            "Score | t | df | p",
            "Height | 2.23 | 34 | .032**",
            note="** p < .01.",
        ),
    ),
    agrees=(
        table(
            "Table 5. Bench scores of trained and untrained apprentices.",
            "Score | t | df | p",
            "Height | 3.23 | 34 | .003**",
            note="** p < .01.",
        ),
    ),
)
def p_from_stars(case: Case) -> Iterable[Finding]:
    """Compare a printed p with the threshold of the stars that stand beside it."""
    claim = case.claim
    p, stars = claim.values["p"], claim.values["stars"]
    if p.text == stars.text:
        return

    def implied(box: Box, factor: float = 1.0) -> tuple[Interval, ...]:
        return (Interval(0.0, factor * box["stars"].high),)

    ways = [Way(implied)]
    if not claim.suggests("two-tailed"):
        ways.append(Way(lambda box: implied(box, 2.0), (ONE_TAILED_STARS,)))
    adjusted = claim.suggests("adjusted-p", "adjusted-p-post-hoc")
    doubts = ("p and stars are both adjusted for several tests, or neither is",) if adjusted else ()
    numbers = {"p": p, "stars": stars}
    yield judge(case, Comparison("p-from-stars", "p", numbers, ways, bounds=P_RANGE, doubts=doubts))
