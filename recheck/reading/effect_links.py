"""Linking effects and differences that are told without a test to the two group summaries beside them."""

from __future__ import annotations

from collections import Counter, defaultdict
from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import Claim
from recheck.reading.placed import Placed
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

IN_SENTENCE = "the only two group summaries in the same sentence"
BEFORE = "the only two group summaries in the sentence before"
STANDARDIZED = ("d", "g", "delta")

_ELSE = words(
    "after before baseline follow followup adjusted adjusting adjustment controlling controlled covariates change changes changed "
    "gain gains week weeks month months day days year years when while among within whereas but under model modelled estimated marginal "
    "least squares slope interaction weighted pooled matched"
)
"""Words between two groups and an effect after which it may be one of other scores than those of the groups."""

_Sentences = dict[tuple[int, int], list[Placed]]


def with_pairs(
    placed: Iterable[Placed], sums_up: Callable[[Claim], bool], alike: Callable[[Sequence[Placed]], bool]
) -> dict[str, Claim]:
    """Each effect told without a test, by its id, with the two summaries that stand before it in its sentence or in the one before.

    Never sure: a difference may be adjusted, or one of changes. Of two effects of one kind each may be about something else.
    """
    sentences: _Sentences = defaultdict(list)
    for item in placed:
        if item.passage >= 0:
            sentences[item.passage, item.sentence].append(item)
    found = {}
    for place, items in sentences.items():
        effects = [item for item in items if _effect(item.claim)]
        if not effects or max(Counter(_effect(item.claim) for item in effects).values()) > 1:
            continue
        pair = [item for item in items if sums_up(item.claim)]
        near = bool(pair)
        if not near and len(items) == len(effects):
            pair = _of_sentence_before(place, sentences, sums_up)
        if len(pair) != 2 or not alike(pair):
            continue
        last = max(item.end - item.at for item in pair) if near else 0
        ids, basis = tuple(item.claim.id for item in pair), IN_SENTENCE if near else BEFORE
        for item in effects:
            start = item.start - item.at
            if start >= last and not _ELSE.intersection(_plain(item.text[last:start])):
                twice = ("repeated",) if _measured_twice(pair) and not item.claim.says("independent") else ()
                found[item.claim.id] = replace(
                    item.claim, groups=ids, link=basis, link_confidence="medium",
                    stated=tuple(dict.fromkeys((*item.claim.stated, *twice))),
                )  # fmt: skip
    return found


@cache
def _twice() -> regex.Pattern[str]:
    """`before … after`, `at baseline … at the end` of a sentence with two means."""
    return regex.compile(
        r"\b(?:before|baseline|pre(?:test|treatment|training)?|initially|(?:at|from) (?:the )?(?:start|outset|beginning|admission))\b"
        r".*\b(?:after(?:wards)?|post(?:test|treatment|training)?|end|follow-?up|discharge|finally|weeks?|months?|days?)\b",
        regex.IGNORECASE | regex.DOTALL,
    )


def _measured_twice(pair: Sequence[Placed]) -> bool:
    """Whether two means are those of the same units at two times: `from 4.1 (SD 1.0) to 5.2 (SD 1.1)`, or a time is told of each."""
    first, second = sorted(pair, key=lambda item: item.start)
    between = first.text[first.end - first.at : second.start - second.at].strip(" ()[],")
    return between == "to" or bool(_twice().search(first.text, timeout=TIMEOUT))


def _of_sentence_before(
    place: tuple[int, int], sentences: _Sentences, sums_up: Callable[[Claim], bool]
) -> list[Placed]:
    """The summaries of the sentence before, where nothing else is told there."""
    before = sentences.get((place[0], place[1] - 1), [])
    return before if all(sums_up(item.claim) for item in before) else []


def _plain(text: str) -> set[str]:
    return {word.strip("(),;:.[]") for word in text.lower().replace("-", " ").split()}


def _effect(claim: Claim) -> str:
    """The effect that a claim tells without a test, "" where it tells none of two means."""
    if claim.groups or claim.kind not in ("comparison", "estimate"):
        return ""
    if claim.kind == "comparison" and "mean_difference" in claim.values:
        return "" if claim.values["mean_difference"].percent else "mean_difference"
    return next((name for name in STANDARDIZED if name in claim.values), "")
