"""The scale of a summary in a table: its heading's own, that of its name, or the one that the caption tells for all."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import Claim, Document, Passage, Table
from recheck.reading.matching import Key, terms
from recheck.reading.scales.by_name import Attached, may_be, merged, name_of, one_of
from recheck.reading.scales.described import Scale, joined, may_tell, sentence_scales
from recheck.reading.scales.guards import changes, has_unit
from recheck.reading.scales.labels import label_scales
from recheck.reading.scales.whose import canonical
from recheck.reading.tokens import sentences
from recheck.reading.views import TIMEOUT, view_of


def captions_of(document: Document) -> dict[int, tuple[Scale, ...]]:
    """The scales that caption and notes of each table tell."""
    found: dict[int, tuple[Scale, ...]] = {}
    for number, table in enumerate(document.tables):
        told: list[Scale] = []
        for passage in (*((table.caption,) if table.caption else ()), *table.notes):
            if may_tell(passage.text):
                told += _told_in(passage, -2 - number)
        if told:
            found[number] = tuple(told)
    return found


def _told_in(passage: Passage, number: int) -> list[Scale]:
    view = view_of(passage)
    own = tuple(sentences(view))
    texts = [view.text[start:end] for start, end in own]
    found: list[Scale] = []
    for order, (start, _) in enumerate(own):
        for scale in sentence_scales(view, texts, start, order, number):
            for other, text in enumerate(texts):
                if other != order:
                    scale = joined(scale, view, text, own[other][0])
            found.append(scale)
    return found


def of_everything(scales: Sequence[Scale]) -> Scale | None:
    """The one scale that the text says of all attributes or ratings of the document."""
    general = [scale for scale in scales if scale.of_all and not scale.of_items]
    alone = len({scale.ends for scale in general}) == 1
    return one_of(general) if alone else None


def speaks_of_ratings(table: Table) -> bool:
    """Whether the caption of a table says that it holds ratings."""
    text = table.caption.text.lower() if table.caption else ""
    return any(
        word in text
        for word in ("rating", "rated", "score", "attribute", "sensory", "hedonic", "tasting", "panel")
    )


def of_cell(
    claim: Claim,
    index: Mapping[Key, Scale | None],
    captions: Sequence[Scale],
    general: Scale | None = None,
    title: Key = (),
    *,
    scored: bool = False,
) -> Attached | None:
    """The scale of a summary of a table: its own heading's, that of its name, or the one that caption or text tell for all."""
    names = [text for text in (claim.outcome, claim.group) if text]
    if any(changes(text) for text in names) or any(has_unit(text) for text in names):
        return None
    keys = [key for text in (claim.outcome, claim.group) if (key := name_of(text)) in index]
    named = index[keys[0]] if len(keys) == 1 else None
    if named is not None and named.asked:
        return Attached(named, sure=True, beside=True)
    if told := next(label_scales(claim), None):
        own = replace(told.scale, names=())
        whole = merged(own, named) if named and (named.ends == own.ends or may_be(own, named)) else own
        return Attached(whole, sure=told.own or not told.bare, beside=not told.bare)
    if named is not None:
        return Attached(named, sure=True)
    if keys:
        return None
    unnamed = {scale.ends: scale for scale in captions if not scale.names}
    if len(unnamed) == 1 and len(captions) == 1:
        return Attached(captions[0], sure=False, of_all=captions[0].of_all)
    if len(captions) == 1 and not claim.outcome and len(captions[0].names) == 1:
        return Attached(captions[0], sure=True)
    if len(captions) == 1 and scored:
        return Attached(captions[0], sure=False)
    if not claim.outcome and title and (titled := index.get(title)) is not None:
        return Attached(titled, sure=True)
    if general is not None and not captions and claim.outcome:
        return Attached(general, sure=False)
    return None


@cache
def _title() -> regex.Pattern[str]:
    """`Table 1. Satisfaction with the training by group`: what stands before `by`, `in`, `after` is the outcome."""
    return regex.compile(
        r"^(?:tab(?:le|\.) ?[\p{L}\d.]{1,6}[.:] ?)?(?:(?:mean|average|descriptive statistics (?:of|for)|means? (?:and|with) (?:standard deviations?|SDs?) (?:of|for)|the|ratings? of|scores? (?:of|for|on)) )*"
        r"(?P<name>[\p{L}][\p{L}\d' -]{2,60}?)(?:,? (?:by|in|across|among|before|after|as a function|according|per|scores?|ratings?)\b[^.]*)?[.;:]?$",
        regex.IGNORECASE,
    )


def title_of(table: Table) -> Key:
    """The key of the one outcome that the caption of a table names, () where it is longer than a name."""
    text = " ".join(table.caption.text.split()) if table.caption else ""
    match = _title().match(text, timeout=TIMEOUT) if len(text) < 160 else None
    return canonical(terms(match["name"])) if match else ()


@cache
def _scores_of() -> regex.Pattern[str]:
    return regex.compile(
        r"^(?:tab(?:le|\.) ?[\p{L}\d.]{1,6}[.:] ?)?(?:[\w-]+ ){0,2}(?:scores?|ratings?|marks|grades) (?:of|for|given to|by)\b(?!.* and )",
        regex.IGNORECASE,
    )


def tells_scores_of(table: Table) -> bool:
    """Whether a caption tells the scale of all scores of a table: `Scores of the breads (1-9 scale)`."""
    return table.caption is not None and _scores_of().match(table.caption.text, timeout=TIMEOUT) is not None
