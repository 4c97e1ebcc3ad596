"""The n of a group that is told as a number of people or things right before the brackets of its mean."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal

from recheck.model import N_OF_GROUP, SUM_OF_GROUPS, Printed
from recheck.reading.claims import Draft
from recheck.reading.frequencies import NUMBER_WORDS, may_count, measured, number_in_words
from recheck.reading.group_sizes import Told
from recheck.reading.naming import Named
from recheck.reading.numerals import Line, number_at, whole
from recheck.reading.tokens import words

_PEOPLE = words(
    "participants subjects patients people persons individuals volunteers adults children students respondents apprentices bakers tasters "
    "women men females males girls boys mothers fathers parents teachers pupils infants adolescents teenagers swimmers athletes nurses "
    "physicians doctors workers employees drivers players controls learners speakers twins siblings adopters smokers users "
    "novices experts beginners loaves animals mice rats dogs cats horses cows calves pigs sheep birds plants seedlings trees farms schools "
    "classes households families hospitals villages panellists panelists judges"
)
"""What groups are made of; of other nouns two groups have to be told alike."""
_NO_CASES = words(
    "sessions session trials trial items item questions question words times time days day weeks week months month years year hours hour "
    "minutes min seconds points point steps levels categories blocks runs lessons visits meetings errors attempts responses answers scores "
    "percent measurements measures scales subscales tests tasks experiments studies study sites occasions waves cups doses units pages "
    "factors dimensions conditions groups arms cells grams kilograms metres meters litres degrees euros dollars"
)
"""What is counted without being the cases of a mean."""
_MOST_WORDS = 4
FEWEST = 2
FEWEST_OF_OTHERS = 5


def with_counted_groups(told: Sequence[Told]) -> list[Told]:
    """The drafts of a sentence with their names; summaries without n get the number before their brackets.

    `40 women (M = 22.1, SD = 3.0) and 30 men (M = 23.4, SD = 3.1)`. Some of a group's cases may be missing of a variable.
    """
    before = [_before(draft) if name is not None and _open(name) else None for draft, name in told]
    alike = sum(size is not None for size in before)
    found = []
    for (draft, name), size in zip(told, before, strict=True):
        if name is not None and size is not None:
            printed, sure = size
            if sure or (alike > 1 and printed.value >= FEWEST_OF_OTHERS):
                values = {**name.values, "n": printed}
                name = replace(name, values=values, notes=(*name.notes, N_OF_GROUP))
        found.append((draft, name))
    return [_with_parts(found, at) for at in range(len(found))]


_OF_WHOM = words(": whom which comprising including consisting namely thereof i.e")
_WHOLE = words(
    "total overall all whole entire sample together altogether tested recruited took participated enrolled enroled comprised consisted included "
    "studied examined analysed analyzed interviewed surveyed baked"
)
_MOST_PARTS = 5


def _with_parts(told: Sequence[Told], at: int) -> Told:
    """A summary, with a note where its n is the sum of those that follow it and the words say that they are its parts."""
    draft, name = told[at]
    n = None if name is None else name.values.get("n")
    if name is None or n is None or at + 2 >= len(told):
        return draft, name
    total = 0
    for count, (_, part) in enumerate(told[at + 1 : at + 1 + _MOST_PARTS], 1):
        size = part.values.get("n") if part is not None and part.kind == "group-summary" else None
        if size is None:
            break
        total += int(size.value)
        if count > 1 and total == n.value and _says_whole(draft, told[at + 1][0]):
            return draft, replace(name, notes=(*name.notes, SUM_OF_GROUPS))
    return draft, name


def _says_whole(draft: Draft, following: Draft) -> bool:
    """Whether the words before a summary speak of all, or those behind it of its parts."""
    line = draft.line
    between = {line.at(at).low for at in range(draft.after, following.first)}
    before = {line.at(at).low for at in range(draft.first)}
    return bool(between & _OF_WHOM or (before | between) & _WHOLE)


def _open(name: Named) -> bool:
    """Whether a summary of a mean has no n yet."""
    return name.kind == "group-summary" and "mean" in name.values and not {"n", "N"} & set(name.values)


def _before(draft: Draft) -> tuple[Printed, bool] | None:
    """The number before the brackets that hold a draft, and whether it surely counts cases."""
    line = draft.line
    opened = draft.first - 1
    while line.at(opened).kind == "word" and opened > draft.first - 4:
        opened -= 1
    if line.at(opened).text not in ("(", "["):
        return None
    at, named = opened - 1, list[str]()
    while line.at(at).kind == "word" and len(named) < _MOST_WORDS and line.at(at).low not in NUMBER_WORDS:
        named.append(line.at(at).low)
        at -= 1
    if (
        not named
        or _NO_CASES.intersection(named)
        or {"of", "in", "for", "with", "and", "to", "than"} & set(named)
    ):
        return None
    size = _size(line, at)
    return None if size is None else (size, named[0] in _PEOPLE)


def _size(line: Line, at: int) -> Printed | None:
    """The whole number that ends at a token, in digits or in words."""
    token = line.at(at)
    if token.kind == "word":
        first = at - 2 if line.at(at - 1).text == "-" else at
        told = number_in_words(line, first) if first >= 0 else None
        if told is None or told[1] != at + 1:
            return None
        text = line.view.text[line.at(first).start : token.end]
        return Printed(text, Decimal(told[0]), 0) if told[0] >= FEWEST else None
    number = number_at(line, at) if token.kind == "num" else None
    if number is None or number.percent or number.after != at + 1:
        return None
    number = whole(number)
    if (
        number.decimals
        or number.value < FEWEST
        or measured(line, number.after)
        or not may_count(line, at, number)
    ):
        return None
    return number.printed(line)
