"""Outcomes that are counts: `number of loaves returned`, whole by what they are called."""

from __future__ import annotations

from dataclasses import replace
from functools import cache

import regex

from recheck.model import LEVELS, SCALE_INFERRED, Claim
from recheck.reading.placed import Placed
from recheck.reading.scales.guards import apart, changes
from recheck.reading.views import TIMEOUT

_UNCOUNTED = (
    r"(?:years?|hours?|minutes?|seconds?|days?|weeks?|months?|nights?|km|kilomet\w+|met(?:er|re)s|steps|calories|kcal|drinks|units|grams|cigarettes|points|percent\w*|copies|cells|colon(?:y|ies)|events|"
    r"observations|participants|patients|subjects|people|persons|cases|respondents|studies)"
)


@cache
def _counted() -> regex.Pattern[str]:
    """What is counted behind `number of`, with the words up to the next number or bracket."""
    return regex.compile(
        rf"(?:\b(?:numbers?|counts?) of|\b[Nn]os?\.? of|# of|#) (?P<what>(?!{_UNCOUNTED}\b)\p{{L}}[\p{{L}}' -]{{2,90}})",
        regex.IGNORECASE,
    )


@cache
def _spread_out() -> regex.Pattern[str]:
    """Words that make an average of a count: `per day`, `daily`, `averaged`, `rate`."""
    return regex.compile(
        r"\b(?:per|daily|weekly|monthly|annual\w*|each|every|averag\w+|rates?|proportion|percent\w*|log|ratio|estimated|adjusted|mean number)\b|/|%|×|10\^|\bmillions?\b|\bthousands?\b|\b1000\b",
        regex.IGNORECASE,
    )


@cache
def _several_rounds() -> regex.Pattern[str]:
    """Words of a document in which one person may be counted several times."""
    return regex.compile(
        r"\b(?:two|three|four|five|six|seven|eight|nine|ten|twelve|\d{1,3}|several|all|each|every|across|over) (?:\w+ ){0,2}?(?:lists|trials|blocks|sessions|rounds|days|weeks|occasions|tests|tasks|batches|bakes|runs|repetitions|replicates|visits|periods|trial|block|session|round|list)\b|\baverag(?:ed|ing)\b",
        regex.IGNORECASE,
    )


def counted_rounds(text: str) -> bool:
    """Whether a text speaks of several rounds in which something is counted."""
    return _several_rounds().search(text, timeout=TIMEOUT) is not None


def count_said(claim: Claim, placed: Placed) -> str | None:
    """The words that make the outcome of a summary a count, None where it may be none."""
    if placed.passage < 0:
        return _named_so(claim)
    return _told_before(placed)


def _counts(text: str) -> bool:
    """Whether a text may name a count, looked at quickly."""
    return any(sign in text for sign in (" of ", "#")) and any(
        sign in text for sign in ("umber", "ount", "o. of", "os. of", "o of", "#")
    )


def _named_so(claim: Claim) -> str | None:
    """The name of a row or column that counts."""
    place = claim.place
    whole = " ".join(text for text in (claim.outcome, claim.group, place.row, place.column) if text)
    if not _counts(whole) or changes(whole) or _spread_out().search(whole, timeout=TIMEOUT):
        return None
    labels = [text.split(LEVELS)[-1].strip() for text in (claim.outcome, place.row, place.column) if text]
    return next((label for label in labels if _counted().match(label, timeout=TIMEOUT)), None)


def _told_before(placed: Placed) -> str | None:
    """The count that the text names before the numbers of a summary."""
    start = max(0, placed.start - placed.at)
    before = placed.text[:start]
    if not _counts(before):
        return None
    match = next(reversed(list(_counted().finditer(before, timeout=TIMEOUT))), None)
    if match is None:
        return None
    tail = before[max(0, match.start() - _LEAD) :]
    outside = _bracketed().sub("", before[match.start() :], timeout=TIMEOUT)
    digits = any(char.isdigit() for char in outside)
    personal = _of_persons().search(match[0], timeout=TIMEOUT)
    said = match[0][: personal.end()] if personal else match[0]
    foreign = apart(placed.text, said if personal else match[0][: len("number of")], start)
    if (
        digits
        or foreign
        or _spread_out().search(_of_persons().sub("", tail, timeout=TIMEOUT), timeout=TIMEOUT)
        or _changed().search(tail, timeout=TIMEOUT)
    ):
        return None
    return said.strip() if personal else _verb().split(said, maxsplit=1, timeout=TIMEOUT)[0].strip()


@cache
def _of_persons() -> regex.Pattern[str]:
    """`that each apprentice baked`: counted once for each person, in so many words."""
    return regex.compile(
        r"\b(?:that |which )?(?:each|every) (?:participant|apprentice|baker|taster|panell?ist|patient|student|pupil|child|person|respondent|subject|judge) (?:had |has )?(?!was|were|is|per\b)\p{L}+\b",
        regex.IGNORECASE,
    )


_LEAD = 24
"""Characters before `number of` in which `daily` or `the change in` stands."""


@cache
def _bracketed() -> regex.Pattern[str]:
    return regex.compile(r"[(\[][^()\[\]]*[)\]]")


@cache
def _verb() -> regex.Pattern[str]:
    return regex.compile(r" (?:was|were|did|in|is|are|had|rose|fell|differed)\b")


@cache
def _changed() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:change|difference|increase|decrease|improvement|reduction)s? (?:in|of|from|between)\b",
        regex.IGNORECASE,
    )


def as_count(claim: Claim, said: str, rounds: bool) -> Claim:
    """A summary of counts: its scores are whole, surely where nothing was counted in several rounds."""
    notes = (*claim.notes, f"count: “{said}”", *((SCALE_INFERRED,) if rounds else ()))
    once = ("single-item",) if _of_persons().search(said, timeout=TIMEOUT) else ()
    stated = dict.fromkeys((*claim.stated, "whole-scores", *(("averaged-scores",) if rounds else once)))
    return replace(claim, stated=tuple(stated), notes=notes)
