"""Medians with what stands behind them: quartiles, an interquartile range, a range."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import Confidence
from recheck.reading.groups import number_before
from recheck.reading.intervals import ends_at
from recheck.reading.items import MEDIAN, Assignment
from recheck.reading.numerals import Line, number_at
from recheck.reading.symbols import Symbol
from recheck.reading.views import TIMEOUT

QUARTILES = Symbol("iqr", "interval")
RANGE = Symbol("range", "interval")
_KINDS = {"iqr": QUARTILES, "range": RANGE}
_UNLABELLED = "the numbers in brackets behind the median are not labelled: they are taken for its quartiles"


@cache
def _announcing() -> regex.Pattern[str]:
    return regex.compile(
        r"""\bmedians?\b [^.;()\[\]±]{0,24} [(\[,±]+\ ? (?:
            (?P<iqr>iqrs?\b|inter-?\ ?quartile|quartiles|25th|25%|q1\b|first\ quartile|1st\ quartile|lower\ quartile|p25) | (?P<range>range\b|min|full\ range))""",
        regex.VERBOSE,
    )


def announced_ends(low: str) -> str:
    """What a text in lower case says stands in brackets behind a median: `iqr`, `range` or ""."""
    if "median" not in low:
        return ""
    found = {match.lastgroup or "" for match in _announcing().finditer(low, timeout=TIMEOUT)}
    return found.pop() if len(found) == 1 else ""


def with_medians(items: Sequence[Assignment], line: Line, sentence: str, document: str) -> list[Assignment]:
    """Add the numbers in brackets behind medians, and the medians that stand without a symbol before their quartiles.

    `sentence` and `document` are what each of them announces for such brackets.
    """
    found: list[Assignment] = []
    for item in items:
        if item.quantity in ("iqr", "range") and not _has_centre(found, item, line):
            median = number_before(line, item, found[-1].after if found else 0)
            if median and (item.quantity == "iqr" or _named_before(line, median)):
                found.append(replace(median, symbol=MEDIAN))
        found.append(item)
        if item.quantity == "median" and not item.several and item.printed.relation in ("=", "≈"):
            announced = _announced(item) or sentence or document
            interval = _ends_behind(line, item.after, announced)
            if interval:
                found.append(interval)
    if document and not sentence:
        found += _behind_means(line, found, document)
        found.sort(key=lambda item: item.first)
    if sentence:
        found += _pairs(line, found, sentence)
        found.sort(key=lambda item: item.first)
    return found


def _named_before(line: Line, number: Assignment) -> bool:
    """Whether the words right before a number call it a median: `median follow-up 5.2 years (range …)`."""
    for token in reversed(line.tokens[max(0, number.first - 14) : number.first]):
        if token.low == "median":
            return True
        if token.kind != "word" and token.text not in ("-", "("):
            return False
    return False


def _announced(item: Assignment) -> str:
    """What the brackets between `median` and its number say: `Median [IQR] = …`."""
    told = item.announced.split()
    return "iqr" if {"iqr", "interquartile"} & set(told) else "range" if "range" in told else ""


def _has_centre(found: Sequence[Assignment], interval: Assignment, line: Line) -> bool:
    if not found or found[-1].part not in ("centre", "spread", "interval", "size"):
        return False
    return not any(t.kind == "num" for t in line.tokens[found[-1].after : interval.first])


def _ends_behind(line: Line, index: int, announced: str) -> Assignment | None:
    """The ends in the brackets at `index`, a unit passed over; unlabelled square ones are taken for quartiles."""
    index += line.at(index).kind == "word" and line.at(index + 1).text in ("(", "[")
    opened = line.at(index).text
    if opened not in ("(", "[") or not (announced or opened == "["):
        return None
    ends = ends_at(line, index)
    if ends is None:
        return _single(line, index, announced)
    low, high, after = ends
    if low.value > high.value or low.percent != high.percent:
        return None
    extra = (("ci_low", low.printed(line)), ("ci_high", high.printed(line)))
    doubt: Confidence = "high" if announced else "medium"
    notes = () if announced else (_UNLABELLED,)
    return Assignment(
        _KINDS[announced or "iqr"], extra[0][1], index, after, extra, doubt=doubt, notes=notes, loose=True
    )


def _single(line: Line, index: int, announced: str) -> Assignment | None:
    """An interquartile range told as its width: `median (IQR) 4.2 (2.5)`."""
    number = number_at(line, index + 1)
    if (
        announced != "iqr"
        or number is None
        or number.value < 0
        or line.at(number.after).text not in (")", "]")
    ):
        return None
    return Assignment(QUARTILES, number.printed(line), index, number.after + 1, loose=True)


def _behind_means(line: Line, items: Sequence[Assignment], announced: str) -> list[Assignment]:
    """`5.0 ± 0.6, 4.2 (3.1–5.6)`: the median that follows the mean of the same units, in a document that announces such brackets."""
    found: list[Assignment] = []
    for item in items:
        at = item.after + 1
        number = number_at(line, at) if item.part == "spread" and line.at(item.after).text == "," else None
        interval = (
            _ends_behind(line, number.after, announced) if number and line.at(at).kind == "num" else None
        )
        if number and interval and interval.extra:
            low, high = (value.value for _, value in interval.extra)
            if low <= number.value <= high:
                found += (Assignment(MEDIAN, number.printed(line), at, number.after, loose=True), interval)
    return found


def _pairs(line: Line, items: Sequence[Assignment], announced: str) -> list[Assignment]:
    """Every `4.2 (3.1–5.6)` of a sentence that says `median (IQR)`."""
    taken = {k for item in items for k in range(item.first, item.after)}
    pairs: list[Assignment] = []
    for at, token in enumerate(line.tokens):
        if token.kind != "num" or at in taken or line.at(at - 1).kind == "rel":
            continue
        number = number_at(line, at)
        if number is None or number.percent or line.at(at - 1).text in ("-", "/", ","):
            continue
        interval = _ends_behind(line, number.after, announced)
        if interval is None or not interval.extra or number.after in taken:
            continue
        low, high = (value.value for _, value in interval.extra)
        if low <= number.value <= high:
            pairs += (Assignment(MEDIAN, number.printed(line), at, number.after, loose=True), interval)
            taken |= set(range(at, interval.after))
    return pairs
