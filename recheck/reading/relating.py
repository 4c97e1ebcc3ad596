"""Relating the claims of a document to each other: tests to their groups, a result to itself told elsewhere."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from recheck.model import Claim, Document, Passage, SameResult
from recheck.reading.caption_links import with_captions
from recheck.reading.linking import in_prose
from recheck.reading.placed import Placed
from recheck.reading.risk_links import all_crude, with_counts
from recheck.reading.table_links import linked_further, unlinked_others
from recheck.reading.told import Item, items_of, names_of
from recheck.reading.twice import same_results


def related(
    placed: Sequence[Placed], document: Document, passages: Sequence[Passage], texts: Sequence[str]
) -> tuple[tuple[Claim, ...], tuple[SameResult, ...]]:
    """All claims in their order, tests with the ids of their groups and all with their names, and pairs that tell one result.

    `passages` and their `texts`, as the grammar reads them, are what `passage` of a claim of the text counts.
    """
    prose = [item for item in placed if item.passage >= 0]
    claims = {item.claim.id: item.claim for item in placed}
    linked = in_prose(prose)
    claims |= linked
    names = names_of((item.claim for item in placed if item.passage < 0), document.tables, texts)
    current = [replace(p, claim=linked[p.claim.id]) if p.claim.id in linked else p for p in prose]
    items = unlinked_others(items_of(current, passages, names))
    claims |= {item.claim.id: item.claim for item in items}
    claims |= linked_further(items, texts, names)
    if document.tables:
        cells = [item.claim for item in placed if item.passage < 0]
        claims |= with_captions(items, cells, document.tables, claims)
    claims |= {i.claim.id: _named(i, claims[i.claim.id]) for i in items if i.about.outcome or i.about.group}
    claims |= with_counts(placed, claims, crude=all_crude(texts))
    order = {item.claim.id: at for at, item in enumerate(placed)}
    same = same_results(items, passages, names, order)
    return tuple(claims[item.claim.id] for item in placed), same


def _named(item: Item, claim: Claim) -> Claim:
    """The claim with the names that its sentence surely gives it."""
    outcome, group = item.about.outcome, item.about.group
    if claim.kind not in ("group-summary", "count"):
        group = None
    return replace(
        claim,
        outcome=claim.outcome or (outcome.text if outcome and outcome.sure else None),
        group=claim.group or (group.text if group and group.sure else None),
    )
