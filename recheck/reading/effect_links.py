"""Linking effects and differences that are told without a test to the two group summaries of their sentence."""

from __future__ import annotations

from collections import Counter, defaultdict
from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace

from recheck.model import Claim
from recheck.reading.placed import Placed

BASIS = "the only two group summaries in the same sentence"
STANDARDIZED = ("d", "g", "delta")


def with_pairs(
    placed: Iterable[Placed], sums_up: Callable[[Claim], bool], alike: Callable[[Sequence[Placed]], bool]
) -> dict[str, Claim]:
    """Each effect told without a test, by its id, with the two summaries that stand before it in its sentence.

    Never sure: a difference may be adjusted, or one of changes. What stands behind a semicolon may be about something
    else, and of two effects of one kind each may be.
    """
    sentences: dict[tuple[int, int], list[Placed]] = defaultdict(list)
    for item in placed:
        if item.passage >= 0:
            sentences[item.passage, item.sentence].append(item)
    found = {}
    for items in sentences.values():
        effects = [item for item in items if _effect(item.claim)]
        if not effects or max(Counter(_effect(item.claim) for item in effects).values()) > 1:
            continue
        pair = [item for item in items if sums_up(item.claim)]
        if len(pair) != 2 or not alike(pair):
            continue
        last = max(item.end for item in pair)
        for item in effects:
            if item.start > last and ";" not in item.text[last - item.at : item.start - item.at]:
                ids = tuple(summary.claim.id for summary in pair)
                found[item.claim.id] = replace(item.claim, groups=ids, link=BASIS, link_confidence="medium")
    return found


def _effect(claim: Claim) -> str:
    """The effect that a claim tells without a test, "" where it tells none of two means."""
    if claim.groups or claim.kind not in ("comparison", "estimate"):
        return ""
    if claim.kind == "comparison" and "mean_difference" in claim.values:
        return "" if claim.values["mean_difference"].percent else "mean_difference"
    return next((name for name in STANDARDIZED if name in claim.values), "")
