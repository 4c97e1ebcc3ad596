"""The same result told in several places: in the abstract, the text, a table.

Two results that merely resemble each other are told apart by their names, their sentences and their
numbers: a pair is sure only where the text refers to the table and says nothing but its result.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterator, Mapping, Sequence
from collections.abc import Set as AbstractSet
from dataclasses import dataclass
from decimal import Decimal

from recheck.model import LEVELS, Claim, Passage, SameResult
from recheck.reading.agreeing import SIZES, Agreement, agreement, family, rough
from recheck.reading.matching import Key
from recheck.reading.table_links import of_other_condition, surely_of_table
from recheck.reading.told import Entry, Item, Names

_RETELLING = ("abstract", "summary", "author summary", "highlights", "key points", "discussion", "general discussion", "conclusion",
              "significance", "plain language", "lay summary", "editor")  # fmt: skip
"""Sections that tell again what the results tell."""


@dataclass(frozen=True, slots=True)
class _Pair:
    """Two claims that may be one result."""

    one: Claim
    two: Claim
    sure: bool
    basis: str


def same_results(
    items: Sequence[Item], passages: Sequence[Passage], names: Names, order: Mapping[str, int]
) -> tuple[SameResult, ...]:
    """Pairs of claims that tell one result, at most two for each claim of the text; `order` is that of reading."""
    again = _again(items, passages)
    tabled = _with_tables(items, names, again)
    prose = _in_prose(items, again)
    found: dict[tuple[str, str], _Pair] = {}
    for pair in (*tabled, *prose):
        first, second = sorted((pair.one.id, pair.two.id), key=order.__getitem__)
        found.setdefault((first, second), pair)
    return tuple(SameResult(ids, pair.sure, pair.basis) for ids, pair in found.items())


# -- text and table ---------------------------------------------------------------------------------


def _with_tables(items: Sequence[Item], names: Names, again: AbstractSet[str]) -> list[_Pair]:
    """Claims of the text that a table prints too."""
    if not names.entries:
        return []
    by_name, by_value = _by_outcome(names), _by_value(names)
    full: dict[str, _Pair] = {}
    near: list[tuple[Item, Entry, Agreement]] = []
    for item in items:
        candidates = _candidates(item, names, by_name)
        judged = [(entry, agreement(item.claim, entry.claim)) for entry in candidates]
        alike = [entry for entry, found in judged if found.full]
        if alike:
            full[item.claim.id] = _Pair(item.claim, alike[0].claim, False, _basis(item, alike[0]))
        elif len(judged) == 1 and _may_be(item, *judged[0], names):
            near.append((item, *judged[0]))
        elif not judged:
            full |= _unnamed(item, by_value)
    taken = {pair.two.id for pair in full.values()}
    # A cell that another sentence tells in full has its own result: what only resembles it is another.
    found = [
        _Pair(item.claim, entry.claim, entry.claim.id not in taken and _sure(item, entry, told, names), _basis(item, entry))
        for item, entry, told in near
        if entry.claim.id not in taken or item.claim.id in again
    ]  # fmt: skip
    return [*full.values(), *found]


_ByName = Mapping[tuple[str, Key], Sequence[Entry]]


def _by_outcome(names: Names) -> _ByName:
    found: dict[tuple[str, Key], list[Entry]] = defaultdict(list)
    for entries in names.entries.values():
        for entry in entries:
            if entry.outcome:
                found[family(entry.claim), entry.outcome[-1]].append(entry)
    return found


def _candidates(item: Item, names: Names, by_name: _ByName) -> list[Entry]:
    """Claims of tables with the outcome of a claim, its kind and its group; of the tables that its sentence refers to, if any."""
    outcome, group = item.about.outcome, item.about.group
    if outcome is None:
        return []
    here = {r.key for r in item.here}
    found = [e for e in by_name.get((family(item.claim), outcome.key), ()) if not here or e.table in here]
    if item.claim.kind not in ("group-summary", "count"):
        return found
    return [e for e in found if group is not None and group.key in e.group]


_ByValue = Mapping[tuple[str, str, Decimal], Sequence[Entry]]


def _by_value(names: Names) -> _ByValue:
    """Claims of tables by table, kind and each of their numbers."""
    found: dict[tuple[str, str, Decimal], list[Entry]] = defaultdict(list)
    for table, entries in names.entries.items():
        for entry in entries:
            kind = family(entry.claim)
            for printed in entry.claim.values.values():
                found[table, kind, printed.value].append(entry)
    return found


def _unnamed(item: Item, by_value: _ByValue) -> dict[str, _Pair]:
    """A claim without names that the table of its sentence prints in full."""
    kind = family(item.claim)
    values = {printed.value for quantity, printed in item.claim.values.items() if quantity not in SIZES}
    near = (e for r in item.here for value in values for e in by_value.get((r.key, kind, value), ()))
    entries = list({id(entry): entry for entry in near}.values())
    judged = [(e, agreement(item.claim, e.claim)) for e in entries]
    alike = [
        e for e, found in judged if not found.differing and len(found.agreeing) > 1 and found.digits >= 3
    ]
    if len(alike) != 1:
        return {}
    basis = f"all numbers that both print, in {alike[0].claim.place.table}, which the sentence names"
    return {item.claim.id: _Pair(item.claim, alike[0].claim, False, basis)}


def _may_be(item: Item, entry: Entry, found: Agreement, names: Names) -> bool:
    """Whether a claim of the text may be that of the only entry with its name, though not all numbers agree."""
    outcome = item.about.outcome
    named = outcome is not None and outcome.sure and all(r.plain for r in item.here)
    if not named or of_other_condition(item, entry, names):
        return False
    return (
        found.digits >= 3
        or (bool(found.telling) and not found.differing)
        or (bool(item.here) and found.same_df)
        or (bool(found.differing) and _says_only(item, entry, names))
    )


def _resembles(found: Agreement, *, named: bool) -> bool:
    """Whether two claims share numbers that only one result would have, though others differ."""
    if not found.telling:
        return False
    if named or found.same_df:
        return True
    return len(found.telling) >= 2 and len(found.differing) == 1


def _says_only(item: Item, entry: Entry, names: Names) -> bool:
    """Whether the sentence refers to the table, names the entry's outcome and group and all that its headings say, and nothing more."""
    outcome, group = item.about.outcome, item.about.group
    if outcome is None or not surely_of_table(item, [entry], names):
        return False
    if item.claim.kind in ("group-summary", "count") and not (group and group.sure):
        return False
    return entry.words <= item.sentence.stems | set(outcome.key) | set(group.key if group else ())


def _sure(item: Item, entry: Entry, found: Agreement, names: Names) -> bool:
    """Whether a claim of the text and one of a table surely are one result, by their names and by numbers that agree."""
    known_again = found.digits >= 3 or len(found.telling) >= 2
    return (
        known_again
        and "total" not in found.differing
        and _says_only(item, entry, names)
        and _one_model(item.claim, entry.claim)
    )


_MODELS = ("covariate-adjusted", "multi-regression", "marginal", "transformed", "imputed", "weighted", "robust", "bootstrap", "permutation",
           "mixed-model", "contrast", "rank-test", "paired", "repeated", "partial", "spearman", "yates", "welch", "pooled",
           "one-tailed", "corrected-df")  # fmt: skip


def _one_model(one: Claim, two: Claim) -> bool:
    """Whether both are said to come from the same kind of analysis; estimates where no other model is spoken of."""
    if family(one) == "estimate" and any(
        c.suggests("covariate-adjusted", "multi-regression") for c in (one, two)
    ):
        return False
    return all(one.says(word) == two.says(word) for word in _MODELS)


def _basis(item: Item, entry: Entry) -> str:
    outcome = item.about.outcome
    named = f"“{outcome.text}”" if outcome else "the numbers"
    group = f" of “{item.about.group.text}”" if item.about.group else ""
    row = (entry.claim.place.row or "").split(LEVELS)[-1]
    where = ", which the sentence names" if any(r.key == entry.table for r in item.here) else ""
    return f"{named}{group} and the row “{row}” of {entry.claim.place.table}{where}"


# -- text and text ----------------------------------------------------------------------------------


def _again(items: Sequence[Item], passages: Sequence[Passage]) -> frozenset[str]:
    """Ids of claims in an abstract, a discussion or the caption of a figure: they tell again what the results tell.

    What stands before the introduction is an abstract, whatever its parts are called.
    """
    start = next((k for k, p in enumerate(passages) if _section(p).startswith("introduction")), 0)
    return frozenset(
        i.claim.id
        for i in items
        if _section(i.passage).startswith(_RETELLING)
        or i.passage.kind == "caption"
        or i.placed.passage < start
    )


def _section(passage: Passage) -> str:
    return (passage.section or "").lower().lstrip("0123456789.: ")


def _in_prose(items: Sequence[Item], again: AbstractSet[str]) -> Iterator[_Pair]:
    """Claims of abstract, discussion and captions that the body of the text tells too.

    Each is paired with the one claim that has all its numbers; else with the only one that has so many of
    them that they may be the same result.
    """
    retold = [item for item in items if item.claim.id in again]
    if not retold:
        return
    kinds = {family(item.claim) for item in retold}
    body = _by_number([item for item in items if family(item.claim) in kinds and item.claim.id not in again])
    for item in retold:
        near = _near(item, body)
        judged = [(other, agreement(item.claim, other.claim)) for other in near]
        whole = [other for other, found in judged if found.full]
        if whole:
            yield _Pair(item.claim, whole[0].claim, False, "the numbers that both print")
            continue
        close = [
            (other, found) for other, found in judged if _resembles(found, named=_same_names(item, other))
        ]
        if len(close) == 1 and not _apart(item, close[0][0]):
            yield _Pair(item.claim, close[0][0].claim, False, _shared(close[0][1]))


def _shared(found: Agreement) -> str:
    if not found.differing:
        return "the numbers that both print"
    return f"{len(found.agreeing)} of the {len(found.agreeing) + len(found.differing)} numbers that both print agree"


_Numbers = Mapping[tuple[str, str, Decimal], Sequence[Item]]


def _by_number(items: Sequence[Item]) -> _Numbers:
    """Claims by the first digits of each of their numbers."""
    found: dict[tuple[str, str, Decimal], list[Item]] = defaultdict(list)
    for item in items:
        for quantity, printed in item.claim.values.items():
            keys = rough(quantity, printed)
            if keys:
                found[family(item.claim), quantity, keys[1]].append(item)
    return found


_MOST = 25
"""Claims of the body that are looked at for one of the abstract: a number that more of them share tells nothing."""


def _near(item: Item, body: _Numbers) -> list[Item]:
    """Claims of the body that share the first digits of a number with a claim."""
    kind = family(item.claim)
    found: dict[str, Item] = {}
    for quantity, printed in item.claim.values.items():
        for key in rough(quantity, printed):
            own = body.get((kind, quantity, key), ())
            found |= {other.claim.id: other for other in own[:_MOST]}
    return list(found.values())


def _same_names(one: Item, two: Item) -> bool:
    """Whether both name the same outcome and the same group."""
    mine, theirs = one.about, two.about
    if not (mine.outcome and theirs.outcome and mine.outcome.key == theirs.outcome.key):
        return False
    if one.claim.kind not in ("group-summary", "count"):
        return True
    return bool(mine.group and theirs.group and mine.group.key == theirs.group.key)


def _apart(one: Item, two: Item) -> bool:
    """Whether both name an outcome or a group, and not the same."""
    pairs = ((one.about.outcome, two.about.outcome), (one.about.group, two.about.group))
    return any(a and b and a.sure and b.sure and not set(a.key) & set(b.key) for a, b in pairs)
