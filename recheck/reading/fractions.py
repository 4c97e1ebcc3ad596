"""Counts that stand without their percentage, and percentages without their count.

`12/40 against 20/41 (OR = 0.45)`, `12 of 40`: beside a ratio, a difference of percentages, a χ² of two shares or a p of Fisher's
test alone, as fractions are common.
`31.3% of the 40 bakers`, `Of the 40 bakers, 31.3% came`. `12 changed from sour to sweet and 3 back`, for McNemar's test.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from decimal import Decimal

from recheck.model import EFFECTS_OF_COUNTS
from recheck.reading.frequencies import (
    PARTLY,
    may_count,
    measured,
    no_fraction,
    number_in_words,
    past_words,
    total_behind,
)
from recheck.reading.items import COUNT, Assignment
from recheck.reading.numerals import Line, Number, number_at, whole
from recheck.reading.symbols import Symbol
from recheck.reading.tokens import words

SHARE = Symbol("percent", "count")
_REPEATED = words(
    "trial trials item items question questions word words response responses answer answers choice choices attempt attempts time times "
    "occasion occasions stimuli images pairs points observations measurements"
)
"""What one person has several of: a percentage of so many may be an average over persons."""
_AVERAGED = words(
    "average averaged mean median weighted adjusted standardized standardised estimated imputed projected approximately about roughly "
    "around nearly almost increase decrease reduction variance confidence power"
)
_CHANGED = words(
    "changed change switched moved shifted went turned converted improved worsened deteriorated reversed progressed regressed"
)


def with_fractions(items: Sequence[Assignment], line: Line) -> list[Assignment]:
    """The assignments of a line with those counts and percentages, in their order."""
    taken = {k for item in items for k in range(item.first, item.after)}
    found = list(items)
    by_fisher = any(_is_fisher(line, index) for index in range(len(line.tokens)))
    if any(
        item.quantity in EFFECTS_OF_COUNTS
        or _of_two(item)
        or _of_points(item)
        or (by_fisher and item.quantity == "p")
        for item in items
    ):
        fractions = list(_fractions(line, taken))
        counted = sum(any(name == "total" for name, _ in item.extra) for item in items)
        if counted + len(fractions) > 1:
            found += fractions
    if line.shares:
        found += _shares(line, taken)
    if any(token.low.startswith("mcnemar") for token in line.tokens):
        changes = list(_changes(line, taken))
        found += changes if len(changes) == 2 else []
    return sorted(found, key=lambda item: item.first)


def _of_two(item: Assignment) -> bool:
    """Whether a χ² may compare two shares: its df are 1, or not told with it."""
    df = dict(item.extra).get("df")
    return item.quantity == "chi2" and (df is None or df.value == 1)


def _is_fisher(line: Line, index: int) -> bool:
    """Whether Fisher's exact test is named here, not his z or his least significant difference."""
    if not line.at(index).low.startswith("fisher"):
        return False
    return any(token.low in ("exact", "test") for token in line.tokens[index + 1 : index + 5])


def _of_points(item: Assignment) -> bool:
    """Whether a difference is one of percentages."""
    return item.quantity in ("estimate", "mean_difference") and item.printed.percent


def _whole_at(line: Line, index: int) -> Number | None:
    """A whole number that may count something, in digits or in words."""
    token = line.at(index)
    told = number_in_words(line, index) if token.kind == "word" else None
    if told is not None:
        return Number(Decimal(told[0]), 0, token.start, line.at(told[1] - 1).end, told[1])
    number = number_at(line, index) if token.kind == "num" else None
    if number is None or number.percent:
        return None
    number = whole(number)
    return number if not number.decimals and may_count(line, index, number) else None


def _fractions(line: Line, taken: set[int]) -> Iterator[Assignment]:
    """`12/40`, `12 of 40 loaves`, `twelve of the 40`."""
    index = 0
    while index < len(line.tokens):
        count = _whole_at(line, index) if index not in taken else None
        total = total_behind(line, count.after) if count else None
        if count and total and 5 < total[0].value >= count.value and not _no_count(line, index, total[1]):
            printed = replace(count.printed(line), percent=False)
            extra = (("total", total[0].printed(line)),)
            yield Assignment(COUNT, printed, index, total[1], extra, loose=True)
            index = total[1]
        else:
            index += 1


def _no_count(line: Line, index: int, after: int) -> bool:
    return measured(line, after) or no_fraction(line, index) or line.at(after).text == "/"


def _shares(line: Line, taken: set[int]) -> Iterator[Assignment]:
    if any(token.low in _AVERAGED for token in line.tokens):
        return
    opening = _opened(line)
    for index in range(len(line.tokens)):
        percent = number_at(line, index) if line.at(index).kind == "num" and index not in taken else None
        if percent is None or not percent.percent or not 0 <= percent.value <= 100:
            continue
        total = total_behind(line, percent.after) if line.at(percent.after).low == "of" else None
        behind = total is not None
        if total is None and opening and 0 <= index - opening[1] <= 1:
            total = opening[0], percent.after
        if total is None or total[0].value < 2 or not _of_cases(line, total[1], behind=behind):
            continue
        extra = (("total", total[0].printed(line)),)
        yield Assignment(SHARE, percent.printed(line), index, max(total[1], percent.after), extra, loose=True)


def _of_cases(line: Line, after: int, *, behind: bool) -> bool:
    """Whether a total behind a percentage is one of cases, which a word names: no measure, nothing that one has several of."""
    if not behind:
        return line.at(after).kind == "word" and line.at(after).low not in ("of", "ci")
    named = line.at(after).kind == "word" and not measured(line, after)
    near = {token.low for token in line.tokens[after : after + 4]}
    return named and not near & _REPEATED


def _opened(line: Line) -> tuple[Number, int] | None:
    """The total that opens a sentence, `Of the 40 bakers,`, and the index after its comma."""
    if line.at(0).low not in ("of", "among"):
        return None
    at = 1 + (line.at(1).low in ("the", "all", "these", "our"))
    number = number_at(line, at) if line.at(at).kind == "num" else None
    number = whole(number) if number else None
    if number is None or number.percent or number.decimals or measured(line, number.after):
        return None
    end = past_words(line, number.after, 6)
    named = line.tokens[number.after : end]
    plain = named and not any(token.low in PARTLY or token.low in _REPEATED for token in named)
    return (number, end + 1) if plain and line.at(end).text == "," else None


def _changes(line: Line, taken: set[int]) -> Iterator[Assignment]:
    """Numbers of those who changed: `12 tasters changed from sour to sweet and 3 from sweet to sour`, `… and 3 to sour`."""
    told = False
    for index in range(len(line.tokens)):
        number = _whole_at(line, index) if index not in taken else None
        if number is None or (measured(line, number.after) and line.at(number.after).low != "to"):
            continue
        words_ = [token.low for token in line.tokens[number.after : past_words(line, number.after, 7)]]
        other_way = words_[:1] == ["from"] and "to" in words_
        other_way = other_way or (told and words_[:1] == ["to"] and len(words_) > 1)
        if _CHANGED.intersection(words_) or other_way:
            told = True
            yield Assignment(COUNT, number.printed(line), index, number.after, loose=True)
