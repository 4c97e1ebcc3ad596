"""Linking a test of the text to its group summaries in the row of a table, or elsewhere in its paragraph."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache

from recheck.model import LEVELS, Claim, Confidence
from recheck.reading.linking import alike, groups_compared, has_spread, of_two_shares, same_difference
from recheck.reading.matching import CONDITIONS, Key
from recheck.reading.referring import references
from recheck.reading.told import Entry, Item, Names

WHOLE = frozenset(
    (
        ("total",),
        ("all",),
        ("overall",),
        ("sample",),
        ("whole", "sample"),
        ("total", "sample"),
        ("all", "loave"),
        ("both", "group"),
    )
)
"""Names of columns that hold everyone."""


@dataclass(frozen=True, slots=True)
class Link:
    """The summaries of a test, on what ground, and how surely they are its own."""

    groups: tuple[Claim, ...]
    basis: str
    confidence: Confidence


def unlinked_others(items: Sequence[Item]) -> list[Item]:
    """The claims, without the links to summaries of a neighbouring sentence that names another outcome than the test's."""
    by_id = {item.claim.id: item for item in items}
    return [_unlinked(item) if _of_another(item, by_id) else item for item in items]


def _unlinked(item: Item) -> Item:
    claim = replace(item.claim, groups=(), link=None, link_confidence="high")
    return replace(item, placed=replace(item.placed, claim=claim))


def _of_another(item: Item, by_id: Mapping[str, Item]) -> bool:
    mine = item.about.outcome
    if item.claim.link_confidence == "high" or mine is None or not mine.sure:
        return False
    theirs = [by_id[g].about.outcome for g in item.claim.groups if g in by_id]
    return any(name is not None and name.sure and name.key != mine.key for name in theirs)


def linked_further(items: Sequence[Item], texts: Sequence[str], names: Names) -> dict[str, Claim]:
    """Tests without groups in their sentence, by their ids, with those that their table or paragraph gives them.

    `texts` are the passages as the grammar reads them. Two tests with the same groups cannot both be sure of them.
    """
    open_ = [item for item in items if _to_link(item.claim) and _outcome_sure(item)]
    paragraphs = _paragraphs(items)
    found = []
    for item in open_:
        near = () if item.here or not names.entries else _named(texts[item.placed.passage])
        link = _in_table(item, near, names) or _in_paragraph(item, paragraphs)
        if link:
            found.append((item, link))
    times: dict[tuple[str, ...], int] = defaultdict(int)
    for _, link in found:
        times[_ids(link)] += 1
    return {
        item.claim.id: replace(
            item.claim, groups=_ids(link), link=link.basis,
            link_confidence=link.confidence if times[_ids(link)] == 1 else "medium",
        )
        for item, link in found
    }  # fmt: skip


def _to_link(claim: Claim) -> bool:
    """Whether a claim is a test of groups that has none yet."""
    return not claim.groups and (groups_compared(claim) > 0 or claim.kind == "chi2-test")


def _outcome_sure(item: Item) -> bool:
    return item.about.outcome is not None and item.about.outcome.sure


def _ids(link: Link) -> tuple[str, ...]:
    return tuple(claim.id for claim in link.groups)


@lru_cache(maxsize=64)
def _named(text: str) -> tuple[str, ...]:
    """Keys of the tables that a paragraph plainly refers to."""
    try:
        return tuple(dict.fromkeys(r.key for r in references(text) if r.plain))
    except TimeoutError:
        return ()


def _in_table(item: Item, near: tuple[str, ...], names: Names) -> Link | None:
    """The summaries of the one row that the outcome names, in the one table that the sentence or paragraph refers to."""
    here = tuple(dict.fromkeys(r.key for r in item.here if r.plain))
    keys = here or near
    row = _row(item, [e for key in keys for e in names.entries.get(key, ())])
    if not row or of_other_condition(item, row[0], names):
        return None
    chosen = _compared(item, row)
    claims = [entry.claim for entry in chosen]
    of_scores = item.claim.kind != "chi2-test"
    if not chosen or (of_scores and not (alike(claims) and same_difference(item.claim, claims))):
        return None
    place = chosen[0].claim.place
    where = "sentence" if here else "paragraph"
    basis = f"the row “{(place.row or '').split(LEVELS)[-1]}” of {place.table}, which the {where} names"
    sure = len(chosen) == len(row) and surely_of_table(item, row, names)
    return Link(tuple(claims), basis, "high" if sure else "medium")


def _row(item: Item, entries: Sequence[Entry]) -> list[Entry]:
    """The summaries of the only row that the outcome names; of several rows, the one whose other headings the sentence has."""
    outcome = item.about.outcome
    rows: dict[tuple[str, str | None], list[Entry]] = defaultdict(list)
    for entry in entries:
        if (
            outcome
            and entry.outcome
            and entry.outcome[-1] == outcome.key
            and _may_enter(entry.claim, item.claim)
        ):
            rows[entry.row].append(entry)
    if len(rows) > 1:
        rows = {row: own for row, own in rows.items() if _heading(own[0]) <= item.sentence.stems}
    return next(iter(rows.values())) if len(rows) == 1 else []


def _may_enter(summary: Claim, test: Claim) -> bool:
    """Whether a claim of a table is of the kind that a test compares: counts for χ², means with a spread for the others."""
    if test.kind == "chi2-test":
        return summary.kind == "count" and {"count", "total"} <= summary.values.keys()
    return has_spread(summary)


def _heading(entry: Entry) -> set[str]:
    return {stem for key in entry.outcome for stem in key}


def _compared(item: Item, row: Sequence[Entry]) -> Sequence[Entry]:
    """The summaries of a row that a test compares: all, all but that of everyone, or those of the groups that are named."""
    parts = [entry for entry in row if entry.group and entry.group[-1] not in WHOLE]
    named = [entry for entry in parts if any(level in item.about.groups for level in entry.group)]
    return next((few for few in (row, parts, named) if _compares(item.claim, len(few))), ())


def _compares(test: Claim, groups: int) -> bool:
    return groups > 1 and (groups_compared(test) == groups or of_two_shares(test, groups))


def of_other_condition(item: Item, entry: Entry, names: Names) -> bool:
    """Whether a sentence names a time, a condition or a subgroup that the headings of a table's entry do not."""
    return bool((item.sentence.stems & CONDITIONS) - names.known(entry))


def surely_of_table(item: Item, entries: Sequence[Entry], names: Names) -> bool:
    """Whether a sentence surely speaks of the numbers of a table: it does nothing but refer to it, names the outcome,
    and says nothing that neither the table nor any report of a result says; the headings say nothing that the sentence does not."""
    outcome = item.about.outcome
    table = entries[0].table
    at = item.placed.start - item.placed.at
    if outcome is None or not outcome.sure or table not in names.words or not item.sentence.refers(at, table):
        return False
    known = names.known(entries[0])
    high = all(claim.confidence == "high" for claim in (item.claim, *(e.claim for e in entries)))
    row = _heading(entries[0])
    named = item.about.named.union(outcome.key)
    return (
        high
        and table not in names.modelled
        and item.sentence.foreign <= known | named
        and row <= item.sentence.stems | named
    )


_Paragraphs = Mapping[tuple[int, Key], Sequence[Item]]


def _paragraphs(items: Sequence[Item]) -> _Paragraphs:
    """Summaries and tests of each paragraph by the outcome that they name."""
    found: dict[tuple[int, Key], list[Item]] = defaultdict(list)
    for item in items:
        if item.about.outcome and (has_spread(item.claim) or groups_compared(item.claim)):
            found[item.placed.passage, item.about.outcome.key].append(item)
    return found


def _in_paragraph(item: Item, paragraphs: _Paragraphs) -> Link | None:
    """The summaries of the paragraph that name the outcome of its only test, each a group of its own."""
    outcome = item.about.outcome
    if outcome is None or not groups_compared(item.claim):
        return None
    about = paragraphs[item.placed.passage, outcome.key]
    summaries = [other for other in about if has_spread(other.claim)]
    alone = len(about) == len(summaries) + 1
    sure = all(other.about.outcome and other.about.outcome.sure and other.about.group for other in summaries)
    named = {other.about.group.key for other in summaries if other.about.group}
    claims = [other.claim for other in summaries]
    if not (alone and sure and len(named) == len(claims) == groups_compared(item.claim)):
        return None
    told = frozenset(outcome.key).union(*(other.sentence.stems for other in summaries))
    if not (alike(claims) and same_difference(item.claim, claims) and item.sentence.foreign <= told):
        return None
    return Link(tuple(claims), f"the only group summaries of {outcome.text} in the same paragraph", "medium")
