"""The n of a group that stands in brackets of its own behind the group's name, not beside its numbers."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from recheck.model import N_OF_GROUP, Printed
from recheck.reading.claims import Draft
from recheck.reading.naming import Named
from recheck.reading.numerals import Line
from recheck.reading.tokens import words

Told = tuple[Draft, Named | None]

_OTHERS = words(
    "and or than versus vs v whereas while but compared both together all overall total combined respectively except "
    "without excluding including of from"
)
"""Words between an n and a mean after which the mean may be of somebody else."""
_FARTHEST = 14
"""Tokens between the n of a group and its mean."""


def with_group_sizes(told: Sequence[Told]) -> list[Told]:
    """The drafts of a sentence with their names; summaries without n get that of their group, where the sentence tells it.

    `The class (n = 28) rated it high (M = 5.19, SD = 1.10)`; where all groups are named first, in their order:
    `In the class (n = 28) and the shop (n = 30) heights were 92.4 (SD = 6.1) and 86.0 (SD = 5.8)`. Some of a group's cases may be missing of a variable.
    """
    lone = [at for at, (draft, _) in enumerate(told) if _lone(draft)]
    if not lone:
        return list(told)
    found = list(told)
    bare = [at for at, (_, name) in enumerate(told) if name is not None and _without_n(name)]
    if len(lone) == len(bare) > 1 and lone[-1] < bare[0]:
        for size, at in zip(lone, bare, strict=True):
            found[at] = _sized(told[at], told[size][0])
        return found
    for at in bare:
        if at - 1 in lone and at - 2 not in lone and _of_whom(told[at - 1][0], told[at][0]):
            found[at] = _sized(told[at], told[at - 1][0])
    return found


def _lone(draft: Draft) -> bool:
    """Whether a draft is one whole n that brackets hold alone."""
    item, line = draft.items[0], draft.line
    if len(draft.items) > 1 or item.part != "size" or item.quantity != "n" or item.several:
        return False
    value: Printed = item.printed
    alone = line.at(item.first - 1).text in ("(", "[") and line.at(item.after).text in (")", "]")
    return (
        alone and value.relation == "=" and value.value == value.value.to_integral_value() and value.value > 0
    )


def _without_n(name: Named) -> bool:
    return (
        name.kind == "group-summary"
        and not {"n", "N"} & set(name.values)
        and bool({"mean", "median"} & set(name.values))
    )


def _of_whom(size: Draft, summary: Draft) -> bool:
    """Whether nothing between an n and a mean names another group."""
    between = _between(size.line, size.after + 1, summary.first)
    return len(between) <= _FARTHEST and not any(
        word in _OTHERS or word in (",", ";", ":") for word in between
    )


def _between(line: Line, first: int, after: int) -> list[str]:
    return [line.at(at).low for at in range(first, after)]


def _sized(told: Told, size: Draft) -> Told:
    draft, name = told
    if name is None:
        return told
    values = {**name.values, "n": size.items[0].printed}
    return draft, replace(name, values=values, notes=(*name.notes, N_OF_GROUP))
