"""What the checks of intervals of effect sizes share: both ends judged, levels tried, doubts and excuses."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence

import regex

from recheck.checks.compare import Comparison, judge
from recheck.checks.interval_methods import USUAL_LEVEL
from recheck.checks.intervals import ends, level_of
from recheck.checks.registry import Case
from recheck.model import STATED, Claim, Finding, Interval, Printed, Verdict, shown
from recheck.reconcile.readings import Box, Way

NOT_BESIDE = "the interval belongs to {name}, beside which it does not directly stand"
UNSTATED_KIND = {
    "bootstrap": "the interval may come from a bootstrap",
    "bayesian": "the interval may be a credible one",
    "robust": "the interval may rest on a robust standard error",
    "adjusted-p": "the interval may be simultaneous",
    "adjusted-p-post-hoc": "the interval may be simultaneous",
    "permutation": "the interval may come from a permutation test",
    "equivalence": "the interval of an equivalence test has another level",
}
ONE_SIDED = "the interval is one-sided, its upper end the largest value there is"
OTHER_FORMULA = "the interval is by another published formula"
NEAR = 0.5
"""How far, in half widths, an end by a bootstrap may be from the exact one or from the quantiles of draws about the estimate."""
Corners = tuple[Interval, Interval]
"""Where the lower and where the upper end may lie."""


def beside(claim: Claim, name: str, low: Printed) -> tuple[str, ...]:
    """A doubt where the interval does not stand directly beside the effect, or stands in a table."""
    value, end = regex.escape(claim.values[name].text), regex.escape(low.text)
    directly = rf"(?<![\d.]){value}\b[^=]{{0,24}}(?:CI[^\d]{{0,12}}(?:\d\d\.?\d?\s*%)?[^\d]{{0,8}})?{end}"
    found = regex.search(directly, claim.place.quote, timeout=1.0)
    return () if found and not claim.place.table else (NOT_BESIDE.format(name=shown(name)),)


def excuses(claim: Claim, models: tuple[str, ...] = ()) -> tuple[str, ...]:
    """The first of the kinds of interval, or of these models, that the text speaks of and nothing can rebuild."""
    said = [words for word, words in UNSTATED_KIND.items() if claim.suggests(word)]
    said += [f"the interval may be that of {STATED[word]}" for word in models if claim.says(word)]
    return tuple(said[:1])


def worse(case: Case, check_name: str, name: str, inputs: tuple[str, ...], ways: Callable[[str], Iterable[Way]], *,
           bounds: Interval, doubts: tuple[str, ...], excuses: tuple[str, ...]) -> Finding:  # fmt: skip
    """Judge both ends; the one that fits worse is told."""
    numbers = {n: case.claim.values[n] for n in (name, *inputs)}
    found = []
    for end, printed in zip(("ci_low", "ci_high"), ends(case.claim), strict=True):
        comparison = Comparison(
            check_name, end, {end: printed, **numbers}, tuple(ways(end)), bounds=bounds, doubts=doubts, excuses=excuses
        )  # fmt: skip
        found.append(judge(case, comparison))
    return worst(found)


def worst(found: Sequence[Finding]) -> Finding:
    """The finding on the end that fits worse; one that could not be compared comes before one that agrees."""
    order_: tuple[Verdict, ...] = ("impossible", "inconsistent", "conditional", "unchecked", "agrees")
    return min(found, key=lambda finding: order_.index(finding.verdict))


def way(
    ranges: Callable[[Box], Corners | None],
    end: str,
    words: tuple[str, ...],
    given: tuple[str, ...],
    near: float = 0.0,
) -> Way:
    """The way to one end; `near` widens it by so many half widths."""

    def implied(box: Box) -> tuple[Interval, ...]:
        found = ranges(box)
        if found is None:
            return ()
        more = near * (found[1].high - found[0].low) / 2
        chosen = found[0] if end == "ci_low" else found[1]
        return (Interval(chosen.low - more, chosen.high + more),)

    return Way(implied, words, given)


def order(claim: Claim, *others: float) -> list[tuple[float, tuple[str, ...], tuple[str, ...]]]:
    """Levels to try, each with what it leaves unstated and what is given."""
    level, printed = level_of(claim)
    if printed:
        return [(level, (), ())]
    return [(level, (), (USUAL_LEVEL,))] + [
        (other, (f"the interval is a {other:.0%} one",), ()) for other in others if other != level
    ]


def open_above(ranges: Callable[[Box], Corners], most: float) -> Callable[[Box], Corners]:
    """The lower end as it is, the upper one the largest value there is."""
    return lambda box: (ranges(box)[0], Interval(most, most))
