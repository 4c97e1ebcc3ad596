"""The scale of a summary in the text: told beside it, by the name of its outcome, or alone in its paragraph."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import LEVELS, Claim
from recheck.reading.matching import Key, Vocabulary, terms
from recheck.reading.placed import Placed
from recheck.reading.scales.by_name import Attached, one_of
from recheck.reading.scales.described import Scale
from recheck.reading.scales.guards import apart, has_unit, of_change, stands_alone, tells_beside, units_of
from recheck.reading.scales.whose import OF_SCORES, canonical
from recheck.reading.told import Item, Names, items_of
from recheck.reading.views import TIMEOUT, View


def of_prose(
    placed: Sequence[Placed],
    claims: Sequence[Claim],
    wanted: Sequence[int],
    scales: Sequence[Scale],
    index: Mapping[Key, Scale | None],
    views: Sequence[View],
) -> dict[int, Attached]:
    """The scales of summaries in the text: told beside them, by the name of the outcome, or alone in their paragraph."""
    if not wanted or not (index or scales):
        return {}
    passages = [view.passage for view in views]
    numbers = {(placed[at].passage, placed[at].sentence) for at in wanted}
    around = [
        replace(item, claim=claim)
        for item, claim in zip(placed, claims, strict=True)
        if (item.passage, item.sentence) in numbers
    ]
    items = {
        item.claim.id: item
        for item in items_of(around, passages, Names(_vocabulary(index, claims), Vocabulary((), {})))
    }
    found: dict[int, Attached] = {}
    for at in wanted:
        item = items[claims[at].id]
        if of_change(claims[at]):
            continue
        attached = (
            _beside(item, scales, index)
            or _named(item, index, scales)
            or _alone(item, scales)
            or _by_verb(item, scales, views)
        )
        unit = has_unit(item.placed.text[_start(item) :], claims[at])
        if attached and not (unit and unit not in units_of(attached.scale.quote)):
            found[at] = attached
    return found


def _start(item: Item) -> int:
    return max(0, item.placed.start - item.placed.at)


_NOUNS = sorted(OF_SCORES - {"rated", "scored", "self", "reported", "likert", "point", "variable"})
"""Words that may stand beside a name of the text and belong to it."""


def _vocabulary(index: Mapping[Key, Scale | None], claims: Sequence[Claim]) -> Vocabulary:
    """All names of outcomes with a scale, in every form, and those of tables."""
    keys: list[Key] = []
    for key in index:
        keys.append(key)
        keys += [(*key, word) for word in _NOUNS]
    keys += [
        key
        for claim in claims
        if claim.place.table and (key := terms((claim.outcome or "").split(LEVELS)[-1]))
    ]
    return Vocabulary(keys, {})


def _beside(item: Item, scales: Sequence[Scale], index: Mapping[Key, Scale | None]) -> Attached | None:
    """A scale that the sentence itself tells, right before or behind the numbers."""
    here = [s for s in scales if (s.passage, s.sentence) == (item.placed.passage, item.placed.sentence)]
    if len(here) != 1:
        return None
    scale, placed = here[0], item.placed
    outcome = item.about.outcome
    own = index.get(canonical(outcome.key)) if outcome is not None else None
    foreign = outcome is not None and scale.names and canonical(outcome.key) not in scale.names
    if foreign or (own is not None and own.asked):
        return None
    first, last = scale.span[0] - placed.at, scale.span[1] - placed.at
    sure = tells_beside(placed.text, (first, last), (_start(item), placed.end - placed.at))
    named = (
        outcome is not None
        and _surely(item)
        and canonical(outcome.key) in scale.names
        and not apart(placed.text, outcome.text, _start(item))
    )
    return Attached(scale, sure=sure or named, beside=True) if sure or named or scale.names else None


def _named(item: Item, index: Mapping[Key, Scale | None], scales: Sequence[Scale]) -> Attached | None:
    """The scale of the outcome that the sentence names."""
    outcome = item.about.outcome
    if outcome is None:
        return None
    if not stands_alone(item.placed.text, outcome.text, _start(item)):
        return None
    key = canonical(outcome.key)
    own = canonical(terms(item.claim.outcome or ""))
    if own and own[: len(key)] != key:
        # `response times for confidence` are no ratings of confidence.
        return None
    scale = index.get(key)
    if scale is None:
        # Told of two outcomes of one name in two ways, it may still be told in one way in this paragraph.
        here = [s for s in scales if key in s.names and s.passage == item.placed.passage]
        scale = one_of(here) if here else None
    if scale is None or of_change(item.claim, item.placed.text[: _start(item)]):
        return None
    return Attached(scale, sure=_surely(item) and not apart(item.placed.text, outcome.text, _start(item)))


def _surely(item: Item) -> bool:
    """Whether the outcome of a summary is surely the one named: by its place, or because its sentence names no other."""
    outcome = item.about.outcome
    alone = (
        outcome is not None
        and item.about.named <= frozenset(outcome.key)
        and "respectively" not in item.placed.text
    )
    return outcome is not None and (outcome.sure or alone)


def _alone(item: Item, scales: Sequence[Scale]) -> Attached | None:
    """The only scale of the paragraph, for a summary whose sentence names no outcome and speaks of no age."""
    here = [s for s in scales if s.passage == item.placed.passage and s.sentence < item.placed.sentence]
    ends = {s.ends for s in here}
    if (
        item.about.outcome is not None
        or item.claim.outcome
        or len(ends) != 1
        or len({s.names for s in here}) != 1
    ):
        return None
    if of_change(item.claim, item.placed.text) or apart(item.placed.text, "", _start(item)):
        return None
    scale = here[0]
    low, high = scale.ends
    mean = item.claim.values["mean"].number
    return (
        Attached(scale, sure=False) if low is not None and high is not None and low <= mean <= high else None
    )


_VERBS = r"(?P<verb>rated|scored|judged|graded|evaluated|marked)"


@cache
def _thing_rated() -> regex.Pattern[str]:
    """`The class was rated higher`: what stands at the beginning is the thing, not the outcome."""
    return regex.compile(
        rf"^(?:[^,;.()]{{1,40}}, )?[^,;.()=]{{2,50}}? (?:was|were) (?:\w+ )?{_VERBS}\b", regex.IGNORECASE
    )


def _by_verb(item: Item, scales: Sequence[Scale], views: Sequence[View]) -> Attached | None:
    """The one scale on which things are rated as the sentence says that one was: `apprentices rated the course from 1 to 7`."""
    outcome = item.about.outcome
    if outcome is not None and any(canonical(outcome.key) in scale.names for scale in scales):
        return None
    match = _thing_rated().match(item.placed.text[: _start(item)], timeout=TIMEOUT)
    if match is None or of_change(item.claim, item.placed.text):
        return None
    verb = match["verb"].lower()
    told = [scale for scale in scales if scale.names and _by_whom(scale, verb, views)]
    if not any(_of_thing(scale, verb, views) for scale in told):
        return None
    scale = one_of(told) if len({scale.ends for scale in told}) == 1 else None
    return Attached(scale, sure=False) if scale is not None else None


def _before(scale: Scale, views: Sequence[View]) -> str:
    return views[scale.passage].text[max(0, scale.span[0] - _REACH) : scale.span[1]].lower()


_REACH = 120
"""Characters before a scale in which its verb stands."""


def _by_whom(scale: Scale, verb: str, views: Sequence[View]) -> bool:
    """Whether a scale of the text is told with a verb."""
    return scale.passage >= 0 and verb in _before(scale, views)


def _of_thing(scale: Scale, verb: str, views: Sequence[View]) -> bool:
    """Whether a scale is that on which somebody rated a thing: `rated the course`."""
    said = _before(scale, views).rpartition(verb + " ")[2]
    return said.startswith(("the ", "each ", "every ", "their ", "a ", "both "))
