"""What a summary says of its scores: whether they are whole numbers, on which scale, and what leaves that open."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache

import regex

from recheck.checks.designs import whole
from recheck.checks.models import FOREIGN
from recheck.model import (
    AVERAGED_BY,
    FEWER_CASES,
    N_OF_GROUP,
    SCALE_ENDS_INFERRED,
    SCALE_INFERRED,
    SCORES_ASKED,
    STATED,
    Claim,
    Printed,
    shown,
)

MOST_ANSWERS = 12
"""Answers to a score that are tried where the text does not say how many there are."""
PATTERN_SECONDS = 1.0


@dataclass(frozen=True, slots=True)
class Scored:
    """How the scores behind a summary came about, as far as it is told.

    `low` and `high` are the ends of the scale, where both what they are and whose they are is told; `width` also where
    it is told by its points alone. `single` says that a score is one answer or a sum, not perhaps an average. The doubts
    are what a contradiction hangs on, `of_size` and `of_items` where it is one that the number of answers decides.
    """

    n: int | None
    items: int
    low: Printed | None
    high: Printed | None
    width: Printed | None
    single: bool
    doubts: tuple[str, ...]
    of_size: tuple[str, ...]
    of_items: tuple[str, ...]
    excuse: str


OF_THESE = "N = {n} is the number of these scores"
ANSWERED = "all {n} of the group answered"
NEAR_BY = "the scale told near by is that of these scores"
ONE_ANSWER = "each score is one answer and no average, although the manuscript says {words}"
COMPLETE = "everyone answered all {items} items, and no score was rounded before the mean was taken"
LABEL = "the spread is the one that it is taken for"
APART = "these numbers describe the same scores"


def scored(claim: Claim) -> Scored:
    """Gather what is told; the excuse says why nothing can be checked."""
    values = claim.values
    size = values.get("n") or values.get("N")
    low, high = values.get("scale_min"), values.get("scale_max")
    width = high if low and high else None
    if SCALE_ENDS_INFERRED in claim.notes:
        low = high = None
    items = whole(values.get("items_per_score")) or 1
    told = claim.says("single-item", "summed-scores") or SCORES_ASKED in claim.notes
    return Scored(
        n=whole(size), items=items, low=low, high=high, width=width,
        single=(told or items > 1) and not (items == 1 and (claim.says("averaged-scores") or _averaged_by(claim))),
        doubts=tuple(_doubts(claim)), excuse=_excuse(claim),
        of_size=tuple(_of_size(claim)),
        of_items=(COMPLETE.format(items=items),) if items > 1 else (),
    )  # fmt: skip


def are_whole(claim: Claim) -> bool:
    """Tell whether a summary says that its scores, or the answers averaged in them, are whole numbers."""
    return claim.says("whole-scores", "single-item")


def _of_size(claim: Claim) -> Iterable[str]:
    if "n" not in claim.values and "N" in claim.values:
        yield OF_THESE.format(n=claim.values["N"].text)
    elif (N_OF_GROUP in claim.notes or FEWER_CASES in claim.notes) and "n" in claim.values:
        yield ANSWERED.format(n=claim.values["n"].text)


def _doubts(claim: Claim) -> Iterable[str]:
    if SCALE_INFERRED in claim.notes:
        yield NEAR_BY
    if (words := _averaged_by(claim)) and not claim.says("averaged-scores"):
        yield ONE_ANSWER.format(words=words)
    if claim.says("spread-unlabelled"):
        yield LABEL
    if claim.says("inferred"):
        yield APART
    for word in ("averaged-scores", "prorated", "imputed", "weighted", "covariate-adjusted", "marginal"):
        if word in claim.background and word not in claim.stated:
            yield f"these are not figures of {STATED[word]}, which the document speaks of elsewhere"


def _excuse(claim: Claim) -> str:
    if claim.says("averaged-scores") and "items_per_score" not in claim.values:
        return f"each score may be an average over a number of answers that is not told{_told_by(claim)}"
    said = [word for word in ("prorated", *FOREIGN) if claim.says(word)]
    return f"summaries cannot rebuild {STATED[said[0]]}" if said else ""


def _averaged_by(claim: Claim) -> str:
    """The quoted words for which scores may be averages, "" for none."""
    return next((note.removeprefix(AVERAGED_BY) for note in claim.notes if note.startswith(AVERAGED_BY)), "")


def _told_by(claim: Claim) -> str:
    """The words for which scores may be averages, and how to say that they are not."""
    quoted = _averaged_by(claim)
    return f": the manuscript says {quoted}; --scores can say that each is one whole number" if quoted else ""


@cache
def _changes() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:chang|differen|gain|improv|increas|decreas|reduc|declin|loss|minus|delta|residual|cent(?:er|re)d|standardi[sz]ed"
        r"|z-?scor|log|percent|ratio|deviat|baseline-adjusted|contrast|slope|bias)|[ΔδΣ%]",
        regex.IGNORECASE,
    )


def is_change(claim: Claim) -> bool:
    """Tell whether a summary may be one of changes, or of another figure made from scores, by its own words."""
    words = " ".join(
        filter(None, (claim.outcome, claim.group, claim.place.quote, claim.place.row, claim.place.column))
    )
    return bool(_changes().search(words, timeout=PATTERN_SECONDS))


def plain(printed: Printed | None) -> Printed | None:
    """A number that stands for one value on the scale of the scores; None for bounds, percentages, rounded thousands."""
    if printed is None or printed.relation not in ("=", "≈") or printed.percent or printed.decimals < 0:
        return None
    return printed


def scale_words(told: Scored) -> str:
    """The scale in words: ` from 1 to 7`, or nothing where it is not told."""
    if told.low and told.high:
        return f" from {told.low.text} to {told.high.text}"
    if told.low:
        return f" of {told.low.text} or more"
    return f" of {told.high.text} or less" if told.high else ""


def scores_words(told: Scored, items: int) -> str:
    """The scores in words: `28 whole numbers from 1 to 7`, `28 averages of 3 whole numbers …`."""
    kind = "whole numbers" if items == 1 else f"averages of {items} whole numbers"
    return f"{told.n} {kind}{scale_words(told)}"


def numbers_of(claim: Claim, *quantities: str) -> dict[str, Printed]:
    """Those of the quantities that are printed; N stands for n where that is not."""
    values = (
        claim.values
        if "n" in claim.values or "N" not in claim.values
        else {**claim.values, "n": claim.values["N"]}
    )
    return {name: values[name] for name in quantities if name in values}


def named(printed: Printed, quantity: str) -> str:
    """`Mean = 5.19`."""
    name = shown(quantity)
    return f"{name[0].upper()}{name[1:]} {printed.relation} {printed.text}"
