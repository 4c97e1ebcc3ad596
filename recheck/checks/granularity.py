"""Checks of means and spreads of whole scores: can any such scores have them at all?"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace
from typing import TYPE_CHECKING

from recheck.checks.compare import doubted, impossible, unchecked
from recheck.checks.registry import Case, check
from recheck.checks.whole_questions import (
    Question,
    asked,
    next_spread,
    other_items,
    other_sizes,
    readings,
    slips,
    step_between,
)
from recheck.checks.whole_scores import named, scores_words
from recheck.checks.wording import stands_for
from recheck.model import Finding, Implied, Interval, Printed, Remedy, shown
from recheck.model.figures import figure

if TYPE_CHECKING:
    from recheck.recompute.granularity import Answer
    from recheck.recompute.granularity.scores import Spread


@check(
    "mean-of-whole-scores",
    title="mean against the number of whole scores",
    kinds=("group-summary",),
    quantity="mean",
    needs=("mean",),
    uses=("n", "N"),
    beside="n; scores that are said to be whole numbers, or averages of so many",
    formula="mean = whole number / (n × items), on the scale",
    source="Brown & Heathers (2017) Social Psychological and Personality Science 8:363-369 (GRIM)",
    limits="Conditional where an average of several answers to a score would do and no words rule it out, where words elsewhere tell of several things rated, or where n may be that of more people than answered. Blind where n × items is as large as the means that the decimals tell apart.",
    impossible=(
        "Sourness was rated with a single item from 1 (none) to 7 (strong). The sourness of the rye loaves was fair (M = 5.19, SD = 1.10, n = 28).",
    ),
    agrees=(
        "Sourness was rated with a single item from 1 (none) to 7 (strong). The sourness of the rye loaves was fair (M = 5.21, SD = 1.10, n = 28).",
    ),
    conditional=(
        "Sourness was rated on a scale from 1 (none) to 7 (strong). Sourness was fair in the rye loaves (M = 5.19, SD = 1.10, n = 28).",
    ),
    unchecked=(
        "Sourness was rated with a single item from 1 (none) to 7 (strong). The sourness of the rye loaves was fair (M = 5.21, SD = 1.10, n = 250).",
    ),
)
def mean_of_whole_scores(case: Case) -> Iterable[Finding]:
    """Tell whether any whole scores have the printed mean, with the scores that do or the nearest means."""
    question = asked(case.claim, "mean")
    if question is None:
        return
    told, name = question.told, "mean-of-whole-scores"
    if told.excuse:
        yield unchecked(case, name, "mean", told.excuse)
        return
    answer = question.answer()
    if answer.possible:
        yield _possible_mean(case, question, answer)
    elif answer.ground == "no sum":
        yield _ruled(case, name, question, _no_mean(question))


@check(
    "sd-of-whole-scores",
    title="SD or SE against mean and number of whole scores",
    kinds=("group-summary",),
    quantity="",
    needs=("mean",),
    uses=("n", "N"),
    beside="n; SD or SE; scores that are said to be whole numbers, or averages of so many",
    formula="Σ(x − mean)² = (n − 1) SD² for n whole numbers x on the scale: all pairs of sum and sum of squares are tried",
    source="Anaya (2016) PeerJ Preprints 4:e2400v1 (GRIMMER); Heathers & Brown (2019) DEBIT, preprint, OSF; sufficient by trying all samples by their sums",
    limits="As for the mean, which must be possible by itself. Unchecked where there are too many samples to try.",
    impossible=(
        "Sourness was rated with a single item from 1 (none) to 5 (strong). The sourness of the rye loaves was fair (M = 3.00, SD = 0.87, n = 5).",
    ),
    agrees=(
        "Sourness was rated with a single item from 1 (none) to 7 (strong). The sourness of the rye loaves was fair (M = 5.21, SD = 1.10, n = 28).",
    ),
)
def sd_of_whole_scores(case: Case) -> Iterable[Finding]:
    """Tell whether any whole scores have the printed mean and spread, with the scores that do or the nearest spreads."""
    quantity = "sd" if "sd" in case.claim.values else "se"
    question, mean = asked(case.claim, quantity), asked(case.claim, "mean")
    if question is None or mean is None or question.told.excuse or not mean.answer().possible:
        return
    name = "sd-of-whole-scores"
    answer = question.answer()
    if answer.ground == "unknown":
        yield unchecked(case, name, quantity, "there are too many samples with this mean to try them all")
    elif answer.possible:
        yield _possible_spread(case, question, answer)
    elif answer.ground != "undefined" and not _beyond_scale(question):
        yield _ruled(case, name, question, _no_spread(question, answer))


def _possible_mean(case: Case, question: Question, answer: Answer) -> Finding:
    from recheck.recompute.granularity import share_of_means_detectable

    told, printed = question.told, question.numbers["mean"]
    share = float(share_of_means_detectable(told.n or 0, printed.decimals, told.items))
    if share == 0:
        scores = f"n = {told.n}" + (f", {told.items} items" if told.items > 1 else "")
        return unchecked(
            case, "mean-of-whole-scores", "mean",
            f"with {scores} and {_decimals(printed)} every mean is possible, so this check cannot find anything",
        )  # fmt: skip
    text = f"{named(printed, 'mean')} can be the mean of {scores_words(told, told.items)}: {_sample(answer)}."
    return _agreeing(
        case, "mean-of-whole-scores", question, text,
        f"; {share:.0%} of all means with {_decimals(printed)} could be told to be impossible",
    )  # fmt: skip


def _possible_spread(case: Case, question: Question, answer: Answer) -> Finding:
    told, quantity = question.told, question.quantity
    mean, printed = question.numbers["mean"], question.numbers[quantity]
    text = (
        f"{named(printed, quantity)} with {named(mean, 'mean').lower()} can be that of {scores_words(told, told.items)}: "
        f"{_sample(answer)}."
    )
    step = step_between(question)
    blind = step <= float(printed.unit)
    power = f"; {shown(quantity)}s of such scores lie about {figure(step, 2)} apart" + (
        ", so hardly any could be told to be impossible" if blind else ""
    )
    return _agreeing(case, "sd-of-whole-scores", question, text, power)


def _agreeing(case: Case, name: str, question: Question, text: str, power: str) -> Finding:
    base = impossible(case, name, question.quantity, text, question.numbers[question.quantity].interval())
    return replace(
        base, verdict="agrees", implied=(), gap=None, question="", assumptions=(),
        tolerance=stands_for(question.numbers) + power,
    )  # fmt: skip


def _ruled(
    case: Case, name: str, question: Question, told: tuple[str, tuple[Implied, ...], tuple[Remedy, ...]]
) -> Finding:
    """The verdict on numbers that no scores have as printed: a reading that mends them, doubts, or impossible."""
    message, implied, remedies = told
    nearest = min(implied, key=lambda row: _distance(question, row), default=Implied(0.0, 0.0))
    found = impossible(
        case, name, question.quantity, message, Interval(nearest.low, nearest.high), remedies=remedies
    )
    gap = _distance(question, nearest) if implied else None
    found = replace(found, implied=implied, gap=gap, tolerance=stands_for(question.numbers))
    for words, other in readings(question, case.claim.says("spread-unlabelled")):
        answer = other.answer()
        if answer.ground == "unknown":
            return unchecked(
                case, name, question.quantity, "there are too many samples with this mean to try them all"
            )
        if answer.possible:
            reading = Remedy("reading", question.quantity, f"the numbers agree if {words}")
            text = f"{message} The numbers agree if {words}, which the text does not say."
            return replace(
                found, verdict="conditional", message=text, assumptions=(*found.assumptions, words),
                reconciled_by=(reading, *remedies),
            )  # fmt: skip
    told_of = question.told
    doubts = (*told_of.doubts, *told_of.of_size, *told_of.of_items)
    return doubted(found, "; and if ".join(doubts)) if doubts else found


def _distance(question: Question, row: Implied) -> float:
    printed = question.numbers[question.quantity]
    return printed.interval().distance(Interval(row.low, row.high)) / float(printed.unit)


def _no_mean(question: Question) -> tuple[str, tuple[Implied, ...], tuple[Remedy, ...]]:
    """What is told of a mean that no scores have: the two nearest, and what else would do."""
    told, printed = question.told, question.numbers["mean"]
    answers = (told.n or 1) * told.items
    below = int(printed.value * answers // 1)
    sums = [total for total in (below, below + 1) if _on_scale(question, total / answers)]
    implied = tuple(Implied(total / answers, total / answers) for total in sums)
    options = [f"{total / answers:.{max(printed.decimals, 1)}f} ({total}/{answers})" for total in sums]
    text = (
        f"{named(printed, 'mean')} is printed, but no {scores_words(told, told.items)} have a mean that rounds to {printed.text}: "
        f"the nearest are {' and '.join(options)}."
    )
    number = Remedy("number", "mean", f"mean would have to be {' or '.join(options)}")
    return text, implied, (*slips(question), number, *other_sizes(question), *other_items(question))


def _on_scale(question: Question, mean: float) -> bool:
    low, high = question.told.low, question.told.high
    inside = (low is None or mean >= low.number) and (high is None or mean <= high.number)
    return inside or not question.on_scale


def _no_spread(question: Question, answer: Answer) -> tuple[str, tuple[Implied, ...], tuple[Remedy, ...]]:
    """What is told of a spread that no scores with this mean have: why, the nearest, and what else would do."""
    told, quantity = question.told, question.quantity
    mean, printed = question.numbers["mean"], question.numbers[quantity]
    near = [number for number in (next_spread(question, -1), next_spread(question, 1)) if number]
    implied = tuple(Implied(float(p.value), float(p.value)) for p in near)
    shown_near = " or ".join(p.text for p in near)
    text = (
        f"{named(printed, quantity)} is printed with {named(mean, 'mean').lower()}, but no {scores_words(told, told.items)} "
        f"have both: {_why(answer, quantity)}."
        + (
            f" The nearest {'is' if len(near) == 1 else 'are'} {' and '.join(p.text for p in near)}."
            if near
            else ""
        )
    )
    rows = [Remedy("number", quantity, f"{shown(quantity)} would have to be {shown_near}")] if near else []
    if quantity == "sd" and replace(question, kind="se").answer().possible and not _hardly(question, "se"):
        words = "if what is printed as SD were an SE, the numbers would agree"
        rows.insert(0, Remedy("slip", "sd", words, change="SD → SE"))
    return text, implied, (*slips(question), *rows, *other_sizes(question), *other_items(question))


def _hardly(question: Question, kind: Spread) -> bool:
    """Tell whether nearly every spread of a kind is possible, so that a possible one says nothing."""
    return step_between(replace(question, kind=kind)) <= float(question.numbers[question.quantity].unit)


def _why(answer: Answer, quantity: str) -> str:
    return {
        "no sum of squares": f"no whole sum of squares, even or odd as the sum is, gives that {shown(quantity)}",
        "too small": "scores with that mean differ more, for the mean is not a whole number",
        "too large": "with that mean the ends of the scale do not lie far enough apart",
    }.get(answer.ground, "all samples with that mean were tried by their sums of squares")


def _beyond_scale(question: Question) -> bool:
    """Tell whether the spread is too large for any scores on the scale, whole or not: the check of scales says so."""
    from recheck.recompute.granularity import sd_most

    told, sd = question.told, question.numbers[question.quantity].interval()
    if not (told.low and told.high and question.on_scale):
        return False
    mean = question.numbers["mean"].interval()
    most = float(sd_most(mean.low, mean.high, told.n or 1, told.low.number, told.high.number))
    return sd.low > most * (1 + 1e-9) / ((told.n or 1) ** 0.5 if question.kind == "se" else 1.0)


def _decimals(printed: Printed) -> str:
    return {0: "no decimals", 1: "one decimal", 2: "two decimals", 3: "three decimals"}.get(
        printed.decimals, f"{printed.decimals} decimals"
    )


def _sample(answer: Answer) -> str:
    """Scores in words: `5 (22 times) and 6 (once)`."""
    parts = [
        f"{figure(float(score), 4)} ({f'{times} times' if times > 1 else 'once'})"
        for score, times in answer.sample
    ]
    return f"{', '.join(parts[:-1])} and {parts[-1]}" if len(parts) > 1 else parts[0]
