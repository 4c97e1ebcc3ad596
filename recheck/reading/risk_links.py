"""Linking odds ratios, risk ratios and risk differences to the counts that they compare.

In prose these are the two counts told with them. In a table they are two counts of the row, one for each group; or,
where another row of its block has counts and no ratio, the row's counts and those of that row, the reference.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import EFFECTS_ON_RISK, LEVELS, TOTAL_OF_GROUP, Claim, Confidence
from recheck.reading.placed import Placed
from recheck.reading.views import TIMEOUT

IN_SENTENCE = "the two counts told with it in the same sentence"
OF_CHANGES = "the two numbers of changes told with McNemar's test in the same sentence"
IN_ROW = "the two counts of its row"
AGAINST_REFERENCE = "the counts of its row and those of “{}”, the only row of its block without a ratio"


@cache
def _crude() -> regex.Pattern[str]:
    """What calls a ratio crude."""
    return regex.compile(r"[cC]rude|(?i:un-?adjusted|non-?adjusted|univaria|bivaria)|\b[cu](?:OR|RR)\b")


@cache
def _adjusted() -> regex.Pattern[str]:
    """What calls a ratio adjusted, matched or stratified."""
    return regex.compile(
        r"(?<!(?i:non|un)-?)(?i:adjust)|(?i:multivaria|controll(?:ed|ing) for|stratified|propensity|mantel)"
        r"|\b[aA](?:OR|RR)\b|\b[mM]ultiple logistic|\bOR ?adj"
    )


@cache
def _rates() -> regex.Pattern[str]:
    """What tells of a ratio of rates."""
    return regex.compile(r"(?i)\brate ratio|incidence rate|\bIRR\b|person.(?:year|month|week|day|time)")


@cache
def _points() -> regex.Pattern[str]:
    """What tells of percentage points."""
    return regex.compile(r"(?i)percentage.points?|%.points?|per.?cent.points?|\bpp\b")


_EVERYONE = frozenset(
    ("total", "all", "overall", "whole sample", "total sample", "everyone", "both groups", "entire sample")
)
_BEFORE = 40
"""Characters before a result that may say of what kind it is, where a sentence holds several."""


@cache
def _all_crude() -> regex.Pattern[str]:
    """What says once that all ratios are crude."""
    return regex.compile(
        r"""(?i)\b(?:all|odds|risk|relative|reported|these|ratios?|differences?|associations?|estimates?)\b[^.;]{0,60}\b(?:are|were|is)\ (?:all\ |reported\ |given\ |presented\ |shown\ )*
        (?:as\ )?(?:crude|un-?adjusted|non-?adjusted|univaria\w+)(?!\s+(?:p\b|for\ multip))
        | \bwe\ (?:report|present|give|calculated|computed|estimated)\ (?:only\ )?(?:crude|un-?adjusted)\b""",
        regex.VERBOSE,
    )


@cache
def _no_adjustment() -> regex.Pattern[str]:
    """What speaks of adjusting and does not mean the ratios."""
    return regex.compile(
        r"(?i)\b(?:not|no|without)\ (?:any\ |further\ )?adjust\w*|\bp[ -]values?[^.;]{0,30}\badjust\w*|\badjust\w*\ (?:p[ -]values?|for\ multipl\w+)"
    )


def all_crude(texts: Sequence[str]) -> bool:
    """Whether a document says once that its ratios are crude, and nowhere speaks of adjusted ones."""
    said = False
    for text in texts:
        low = text.lower()
        if "djust" not in low and "crude" not in low and "univaria" not in low and "multivaria" not in low:
            continue
        if _adjusted().search(_no_adjustment().sub("", text, timeout=TIMEOUT), timeout=TIMEOUT):
            return False
        said = said or _all_crude().search(text, timeout=TIMEOUT) is not None
    return said


def with_counts(
    placed: Sequence[Placed], claims: Mapping[str, Claim], *, crude: bool = False
) -> dict[str, Claim]:
    """Each ratio or difference of risks with the ids of its counts, by its own id.

    `claims` are all as they stand now; `crude` tells that the document calls all its ratios so.
    """
    linked = dict(_with_counts(placed, claims))
    if not crude:
        return linked
    return {
        name: _called_crude(claim) if EFFECTS_ON_RISK & claim.values.keys() else claim
        for name, claim in linked.items()
    }


def _called_crude(claim: Claim) -> Claim:
    if claim.says("crude", "covariate-adjusted"):
        return claim
    return replace(claim, stated=(*claim.stated, "crude"))


def _with_counts(placed: Sequence[Placed], claims: Mapping[str, Claim]) -> dict[str, Claim]:
    found = {}
    sentences: dict[tuple[int, int], list[Placed]] = defaultdict(list)
    for item in placed:
        if item.passage >= 0:
            sentences[item.passage, item.sentence].append(item)
    for items in sentences.values():
        for item, counts, said in _in_sentence(sorted(items, key=lambda item: item.start), claims):
            basis = OF_CHANGES if said == OF_CHANGES else IN_SENTENCE
            found[item.claim.id] = _linked(claims[item.claim.id], counts, basis, "medium", said)
    for claim, groups, basis, confidence in _in_tables(
        [claims[item.claim.id] for item in placed if item.passage < 0]
    ):
        said = f"{claim.place.column or ''} {claim.place.quote}"
        found[claim.id] = _linked(claim, groups, basis, confidence, said)
    return found


def _of_risks(claim: Claim, text: str = "") -> bool:
    """Whether a claim compares two risks: OR, RR or RD, or a difference in points of a percentage."""
    if claim.groups or "hr" in claim.values:
        return False
    if claim.kind == "comparison" and "mean_difference" in claim.values:
        return claim.values["mean_difference"].percent or bool(_points().search(text))
    told = claim.values.get("estimate")
    if claim.kind == "estimate" and told is not None:
        # A number above 1 is no share: it is read as an estimate of its own.
        quote = f"{claim.place.quote} {claim.place.column or ''}".lower()
        return "risk difference" in quote or (
            "difference" in quote and (told.percent or "%" in quote or bool(_points().search(text)))
        )
    return claim.kind == "estimate" and bool(EFFECTS_ON_RISK & claim.values.keys())


def _countable(claim: Claim) -> bool:
    """Whether a count tells how many of how many, or the share of how many."""
    return (
        claim.kind == "count" and "total" in claim.values and bool({"count", "percent"} & claim.values.keys())
    )


def _linked(claim: Claim, groups: Sequence[Claim], basis: str, confidence: Confidence, said: str) -> Claim:
    """The claim with its counts, and with what its heading or its sentence says of the analysis."""
    stated = list(claim.stated)
    if _crude().search(said):
        stated = [word for word in stated if word not in ("covariate-adjusted", "adjusted-p")] + ["crude"]
    elif _adjusted().search(said):
        stated.append("covariate-adjusted")
    if said == OF_CHANGES:
        stated.append("paired")
    if _rates().search(said):
        stated.append("rates")
    stated = list(dict.fromkeys(stated))
    return replace(
        claim,
        groups=tuple(group.id for group in groups),
        link=basis,
        link_confidence=confidence,
        stated=tuple(stated),
        background=tuple(word for word in claim.background if word not in stated),
    )


def _in_sentence(
    items: Sequence[Placed], claims: Mapping[str, Claim]
) -> Iterator[tuple[Placed, list[Claim], str]]:
    """Each result of a sentence with the two counts before it, or with the only two where it is the only one."""
    changed = [item for item in items if set(item.claim.values) == {"count"}]
    tests = [item for item in items if item.claim.kind == "chi2-test"]
    if len(changed) == 2 and len(tests) == 1 and "mcnemar" in items[0].text.lower():
        yield tests[0], [item.claim for item in changed], OF_CHANGES
        return
    lone = [item for item in items if set(item.claim.values) == {"p"} and not item.claim.groups]
    results = [item for item in items if _of_risks(claims[item.claim.id], item.text)]
    counts = [item for item in items if _countable(item.claim)]
    if not results and len(lone) == 1 and len(items) == 3:
        # A p without a statistic: whether it is that of the two shares is for the checks to doubt.
        results = lone
    if len(results) == 1 and len(counts) == 2 and not _of_one_whole(counts):
        yield results[0], [item.claim for item in counts], _beside(results[0], 0)
        return
    near: list[Placed] = []
    told: Placed | None = None
    for item in items:
        if item in counts:
            near = [item] if told else [*near, item]
            told = None
        elif item in results:
            if len(near) == 2 and not _of_one_whole(near):
                yield item, [other.claim for other in near], _beside(item, told.end if told else near[-1].end)
            told = item


def _of_one_whole(pair: Sequence[Placed]) -> bool:
    """Whether two counts make up their common total: answers of one sample, not two groups."""
    counts = [item.claim.values["count"].value for item in pair if "count" in item.claim.values]
    totals = {item.claim.values["total"].value for item in pair}
    return len(counts) == 2 and totals == {sum(counts)}


def _beside(item: Placed, since: int) -> str:
    """What says of which kind a result is: its own words where they do, else those before it."""
    quote = item.claim.place.quote
    if _crude().search(quote) or _adjusted().search(quote):
        return quote
    if not since:
        return item.text
    return item.text[max(item.start - _BEFORE, since) - item.at : item.end - item.at]


def _in_tables(claims: Sequence[Claim]) -> Iterator[tuple[Claim, list[Claim], str, Confidence]]:
    """Each result of a table with its two or four counts."""
    counts: dict[tuple[str, str], list[Claim]] = defaultdict(list)
    rated: dict[tuple[str, str], set[str]] = defaultdict(set)
    for claim in claims:
        table, row = claim.place.table, claim.place.row
        if table and row and claim.kind == "count":
            if (claim.group or "").rpartition(LEVELS)[2].strip().lower() not in _EVERYONE:
                counts[table, row].append(claim)
        elif table and row and _of_risks(claim):
            rated[table, claim.place.column or ""].add(row)
    for claim in claims:
        key = claim.place.table or "", claim.place.row or ""
        if _of_risks(claim) and key in counts:
            own, rows = counts[key], rated[key[0], claim.place.column or ""]
            link = _against_reference(claim, own, counts, rows) or _across(key[0], own, counts, rows)
            if link:
                yield claim, *link


def _block(claim: Claim) -> str:
    """The variable of which a row is one category: `Crust` of `Crust | dark`."""
    return (claim.outcome or "").rpartition(LEVELS)[0]


_Counts = Mapping[tuple[str, str], list[Claim]]
_Link = tuple[list[Claim], str, Confidence]


def _against_reference(claim: Claim, own: Sequence[Claim], counts: _Counts, rated: set[str]) -> _Link | None:
    """The counts of a row and of the only row of its block that has none of these results.

    Never sure: the row without a ratio may be one that was left out. One count with its total a row tells the events of a group; two, in columns, events and others, or cases and controls.
    """
    block, table = _block(claim), claim.place.table or ""
    if not block or len(own) > 2:
        return None
    rows = [
        held for (label, row), held in counts.items()
        if label == table and row not in rated and held and _block(held[0]) == block
    ]  # fmt: skip
    if len(rows) != 1 or [c.group for c in rows[0]] != [c.group for c in own]:
        return None
    reference = rows[0]
    basis = AGAINST_REFERENCE.format((reference[0].outcome or "").rpartition(LEVELS)[2])
    if len(own) == 1:
        each = all(_countable(count) and TOTAL_OF_GROUP not in count.notes for count in (*own, *reference))
        return ([*own, *reference], basis, "medium") if each else None
    if not all("count" in count.values for count in (*own, *reference)):
        return None
    return [own[0], reference[0], own[1], reference[1]], basis, "medium"


def _across(table: str, own: Sequence[Claim], counts: _Counts, rated: set[str]) -> _Link | None:
    """Two counts of a row with their totals, one for each group; unsure where other rows have counts and no such result."""
    if len(own) != 2 or not all(_countable(count) for count in own) or len({c.group for c in own}) != 2:
        return None
    others = [row for label, row in counts if label == table and row not in rated]
    return list(own), IN_ROW, "medium" if others else "high"
