"""Linking a test of the text to the rows of a table that tells one outcome of several groups, which its caption alone names."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Mapping, Sequence
from dataclasses import replace

from recheck.model import LEVELS, Claim, Table
from recheck.reading.linking import alike, groups_compared, has_spread
from recheck.reading.matching import CONDITIONS, GENERIC_STEMS, terms, words_of
from recheck.reading.table_links import WHOLE
from recheck.reading.told import Item

BASIS = "the groups of {}, whose caption names the outcome, and whose sizes the df fit"
_SHORTEST = 5
"""Letters that a word shared by a caption and a sentence must have to name an outcome."""


def with_captions(
    items: Sequence[Item], cells: Sequence[Claim], tables: Sequence[Table], claims: Mapping[str, Claim]
) -> dict[str, Claim]:
    """Each t or F without groups, by its id, with all rows of the only table that can be its own; `claims` as they stand now.

    Such a table has one mean, spread and n in each row and names what was measured in its caption alone; its ns leave the
    df of the test, and no other test of the text fits it. Never sure.
    """
    groups = _groups_of(cells, tables)
    fits: dict[str, list[Item]] = defaultdict(list)
    of_test: dict[str, list[str]] = defaultdict(list)
    for item in items:
        if claims[item.claim.id].groups:
            continue
        for label, (rows, caption) in groups.items():
            if _may_be_of(item, rows, caption):
                fits[label].append(item)
                of_test[item.claim.id].append(label)
    found = {}
    for label, tests in fits.items():
        if len(tests) == 1 and len(of_test[tests[0].claim.id]) == 1:
            claim = claims[tests[0].claim.id]
            ids = tuple(row.id for row in groups[label][0])
            found[claim.id] = replace(claim, groups=ids, link=BASIS.format(label), link_confidence="medium")
    return found


def _groups_of(
    cells: Sequence[Claim], tables: Sequence[Table]
) -> dict[str, tuple[list[Claim], frozenset[str]]]:
    """The rows of each table of one outcome, and the stems of its caption."""
    captions = {table.label: table.caption.text for table in tables if table.label and table.caption}
    rows: dict[str, list[Claim]] = defaultdict(list)
    for claim in cells:
        if claim.kind == "group-summary" and claim.place.table in captions and not _of_everyone(claim):
            rows[claim.place.table].append(claim)
    return {
        label: (own, frozenset(word.stem for word in words_of(captions[label])))
        for label, own in rows.items()
        if len(own) > 1 and _one_outcome(own)
    }


def _of_everyone(claim: Claim) -> bool:
    names = (claim.group, claim.outcome, claim.place.row)
    return any(name and terms(name.rpartition(LEVELS)[2]) in WHOLE for name in names)


def _one_outcome(rows: Sequence[Claim]) -> bool:
    whole = all(has_spread(row) and "n" in row.values for row in rows)
    places = {row.place.row for row in rows}, {row.place.column for row in rows}
    return whole and len(places[0]) == len(rows) and len(places[1]) == 1 and alike(rows)


def _may_be_of(item: Item, rows: Sequence[Claim], caption: frozenset[str]) -> bool:
    """Whether a test compares so many groups, has the df of their sizes, and its sentence shares a word that names something."""
    claim = item.claim
    df = claim.values.get("df2") or claim.values.get("df")
    if groups_compared(claim) != len(rows) or df is None or claim.says("paired", "repeated", "one-sample"):
        return False
    if df.value != sum(row.values["n"].value for row in rows) - len(rows):
        return False
    shared = (item.sentence.foreign & caption) - GENERIC_STEMS
    return any(len(stem) >= _SHORTEST for stem in shared) and not (item.sentence.stems & CONDITIONS) - caption
