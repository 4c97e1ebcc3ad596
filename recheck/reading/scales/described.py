"""The scales that a document describes, each with the outcomes that it is said of and how the scores come about."""

from __future__ import annotations

from collections.abc import Container, Iterator, Sequence
from dataclasses import dataclass, replace
from functools import cache

import regex

from recheck.model import Printed
from recheck.reading.context import tells
from recheck.reading.matching import Key, terms, words_of
from recheck.reading.scales.hints import NOTHING, SIGNS, Hints, hints_of
from recheck.reading.scales.patterns import Span
from recheck.reading.scales.pieces import Piece, named_number, pieces_of, value_of
from recheck.reading.scales.whose import canonical, measure_told, named_before, whose
from recheck.reading.tokens import DIGITS, Spans
from recheck.reading.views import TIMEOUT, View

MOST_STEPS = 20
"""Steps up to which a rating is taken for one of whole steps where the points are not told: a rating from 0 to 100 may be a slider's."""


@dataclass(frozen=True, slots=True)
class Scale:
    """One scale as a sentence tells it.

    `names` are keys of the outcomes it is said of, () where it names none. `stepped` tells that answers go in whole steps,
    `of_items` that it is the scale of single items, not of the score; `hints` is all that is said of how the score comes
    about, `counts` how many judges are spoken of there, 0 for several, `of_all` that it is said of all attributes or ratings,
    `asked` that it was not read but stated with the request. `span` counts characters of the view.
    """

    names: tuple[Key, ...]
    low: Printed | None
    high: Printed | None
    stepped: bool
    of_items: bool
    hints: Hints
    items: Printed | None
    quote: str
    passage: int
    sentence: int
    span: Span
    ends_inferred: bool = False
    counts: tuple[int, ...] = ()
    of_all: bool = False
    asked: bool = False

    @property
    def ends(self) -> tuple[float | None, float | None]:
        """The lowest and the highest value."""
        return (self.low.number if self.low else None, self.high.number if self.high else None)


_SIGNS = (
    "scale", "point", "score", "range", "rate", "rating", "likert", "max", "ranging", "respon", "assessed", "scoring", "possible", "out of", "analog", "vas", "nrs",
    "slider", "grade", "judged", "evaluated", "answer", "coded", "anchor", "step", "how ", "item", "question", "awarded", "continuum", " runs ", " ran ",
)  # fmt: skip
"""One of them stands in every sentence that tells a scale by more than the names of its ends, in lower case."""


def may_tell(text: str) -> bool:
    """Whether a text may tell a scale, by its words and signs alone."""
    if DIGITS.isdisjoint(text):
        return ("scale" in text or "-point" in text) and _worded().search(text, timeout=TIMEOUT) is not None
    low = text.lower()
    for sign in _SIGNS:
        if sign in low:
            break
    else:
        return (
            ("(" in text or ":" in text)
            and "=" in text
            and named_number().search(text, timeout=TIMEOUT) is not None
        )
    numbers = len(_short_numbers().findall(text, timeout=TIMEOUT))
    single = any(sign in low for sign in ("point", "step", "out of", "max", "mm", "cm", "highest"))
    return (
        numbers > 1
        or (numbers == 1 and single)
        or "-point" in low
        or ("scale" in low and _worded().search(low) is not None)
    )


@cache
def _worded() -> regex.Pattern[str]:
    """Two numbers written as words: `from one to seven`."""
    return regex.compile(r"\b(?:zero|one|two)\b.{1,60}\b(?:to|and)\b|[a-z]-point|[a-z] point")


@cache
def _short_numbers() -> regex.Pattern[str]:
    """Whole numbers that may end a scale."""
    return regex.compile(r"(?<![\d.,])\d{1,3}(?![\d.,]*\d|%)")


def scales_of(views: Sequence[View], spans: Sequence[Spans], beside: Container[int] = ()) -> list[Scale]:
    """All scales that are told in passages that speak of the document's own study, and in those `beside` which there are means.

    A sentence that takes longer than its patterns may tells none.
    """
    found: list[Scale] = []
    for number, view in enumerate(views):
        own = tells(view)
        if (own or number in beside) and view.passage.kind != "heading":
            found += _passage(view, spans[number], number, own)
    return [_with_mentions(scale, views, spans, found) for scale in found]


def _passage(view: View, spans: Spans, number: int, own: bool) -> Iterator[Scale]:
    sentences = [view.text[start:end] for start, end in spans]
    for order, (start, _) in enumerate(spans):
        try:
            scales = list(sentence_scales(view, sentences, start, order, number))
        except TimeoutError:
            continue
        # An introduction tells of other studies: there only what stands beside its numbers counts.
        yield from scales if own else (replace(scale, names=()) for scale in scales)


def sentence_scales(
    view: View, sentences: Sequence[str], start: int, order: int, number: int
) -> Iterator[Scale]:
    """The scales of one sentence; `sentences` are all of its passage, `start` is where it begins in the view."""
    text = sentences[order]
    if not may_tell(text):
        return
    last = 0
    pieces = pieces_of(text)
    plain = _unlabelled(text, pieces) if pieces else text
    for piece in pieces:
        said = whose(text, piece, last)
        last = piece.end
        names = said.names
        if said.before and order:
            names = _inherited(sentences[:order])
        keys = tuple(dict.fromkeys(alias for key, name in names for alias in _aliases(key, name)))
        hints = _landed(hints_of(plain) if len(pieces) == 1 else _own_hints(plain, piece), text, piece)
        yield _scale(view, text, piece, start, keys, hints, (number, order))


def _own_hints(text: str, piece: Piece) -> Hints:
    """What a sentence with several scales says beside one of them."""
    return hints_of(text[max(0, piece.start - 60) : piece.end + 40])


@cache
def _label() -> regex.Pattern[str]:
    return regex.compile(r"[(\[][^()\[\]]*[)\]]?|[=:] ?[^,;()\d]+")


def _unlabelled(text: str, pieces: Sequence[Piece]) -> str:
    """A sentence with blanks for what the ends of its scales are called: `5 (daily)` tells of no diary."""
    for piece in pieces:
        if piece.low is not None:
            first = piece.low[1]
            inside = _label().sub(lambda match: " " * len(match[0]), text[first : piece.end], timeout=TIMEOUT)
            text = text[:first] + inside + text[piece.end :]
    return text


def _landed(hints: Hints, text: str, piece: Piece) -> Hints:
    """The hints of a scale to which scores were converted: they lie on it, in fractions."""
    if hints.moved and _onto().search(text[max(0, piece.start - 60) : piece.end], timeout=TIMEOUT):
        return replace(hints, moved=False, uneven=True)
    return hints


@cache
def _onto() -> regex.Pattern[str]:
    """`converted to a scale from`, `rescaled to range from`, `transformed into a 0-100 scale`."""
    return regex.compile(
        r"\b(?:converted|rescaled|re-scaled|normali[sz]ed|transformed|standardi[sz]ed)(?: linearly)? (?:to|into|onto|so as to) "
        r"(?:(?:a|an|the|range|lie|run|go|from|between|scores?|values|with|common|on|new) ){0,5}(?:\d|scale|range|percent)",
        regex.IGNORECASE,
    )


def _inherited(before: Sequence[str]) -> tuple[tuple[Key, str], ...]:
    """The outcome of the sentences before, looked for in the last two."""
    for text in reversed(before[-2:]):
        if names := named_before(text):
            return names
    return ()


def _aliases(key: Key, name: str) -> Iterator[Key]:
    """A key, and the head alone of `sourness of the crumb`."""
    yield key
    head, of, _ = name.partition(" of ")
    short = canonical(terms(head)) if of else ()
    if short and short != key:
        yield short


def _scale(
    view: View, text: str, piece: Piece, start: int, names: tuple[Key, ...], hints: Hints, at: tuple[int, int]
) -> Scale:
    low, high = (_printed(view, span, start) for span in (piece.low, piece.high))
    points = int(value_of(text[slice(*piece.points)])) if piece.points else 0
    stepped = piece.rated and not hints.uneven
    inferred = False
    if low and high:
        steps = high.value - low.value
        fits = steps + 1 == points if points else steps <= MOST_STEPS
        stepped = stepped and fits and low.decimals == high.decimals == 0
    elif points and piece.points and not high and 2 <= points <= 101 and stepped:
        high = _printed(view, piece.points, start)
        low = Printed("1", high.value * 0 + 1, 0) if high else None
        inferred = True
    elif not points:
        stepped = False
    if _counts_correct(text):
        hints = replace(hints, summed=True)
    summed = piece.scored and not piece.rated and hints.summed
    return Scale(
        names=names, low=low, high=high, stepped=stepped or (summed and not hints.uneven), of_items=piece.rated and not piece.scored and hints.multiple, hints=hints,
        items=_items(view, hints, start), quote=_quote(text, piece), passage=at[0], sentence=at[1],
        span=(start + piece.start, start + piece.end), ends_inferred=inferred, counts=_counts(hints), of_all=not names and _of_all().search(text, timeout=TIMEOUT) is not None,
    )  # fmt: skip


def _quote(text: str, piece: Piece) -> str:
    """The words of a scale, with the bracket that closes one opened in them."""
    words = " ".join(text[piece.start : piece.end].split()).rstrip(" ,;:")
    opened, closed = sum(words.count(sign) for sign in "(["), sum(words.count(sign) for sign in ")]")
    return words + ")" * (opened > closed) if opened >= closed else words.rstrip(")]")


@cache
def _of_all() -> regex.Pattern[str]:
    """`All attributes were rated`, `Ratings range from`: a scale of everything in a table."""
    return regex.compile(
        r"\b(?:all|each|every) (?:\w+ ){0,2}?(?:attributes?|ratings?|scores?|measures?|variables?|outcomes?|dimensions?|aspects?|characteristics?|questions?|scales?)\b"
        r"|^(?:notes?[.:]? ?)?(?:the )?(?:ratings?|scores?|values)(?: \w+)? (?:are|were|is|was|rang(?:e|es|ed)|could|can|run)\b",
        regex.IGNORECASE,
    )


_CORRECT = ("correct answer", "correctly answered", "number of correct", "correct response", "one point for each", "one point per", "worth one point", "worth 1 point", "worth a point", "worth one mark", "one point each", "one mark each", "one mark for each", "one mark per", "1 point for each", "1 point per", "number correct", "points for each correct")  # fmt: skip


def _counts_correct(text: str) -> bool:
    low = text.lower()
    return any(word in low for word in _CORRECT)


def _counts(hints: Hints) -> tuple[int, ...]:
    try:
        return (int(value_of(hints.judges)),) if hints.judges else ()
    except ValueError:
        return (0,)


def _items(view: View, hints: Hints, start: int) -> Printed | None:
    return _printed(view, hints.number, start) if hints.number else None


def _printed(view: View, span: Span | None, start: int) -> Printed | None:
    if span is None:
        return None
    first, last = start + span[0], start + span[1]
    text = view.text[first:last]
    value = value_of(text)
    page, box = view.box(first, last)
    decimals = len(text.partition(".")[2])
    return Printed(view.printed_text(first, last), value, decimals, page=page, box=box)


# -- what other sentences say of a scale --------------------------------------------------------------


def _with_mentions(
    scale: Scale, views: Sequence[View], spans: Sequence[Spans], others: Sequence[Scale]
) -> Scale:
    """The scale with what the sentences behind it say of its scores."""
    view, own = views[scale.passage], spans[scale.passage]
    behind = range(scale.sentence + 1, min(scale.sentence + 4, len(own)))
    taken = {
        other.sentence
        for other in others
        if other.passage == scale.passage and other.names and other.names != scale.names
    }
    before = scale.sentence - 1
    near = [*([before] if before >= 0 and before not in taken else [])]
    for k in behind:
        if k in taken:
            break
        near.append(k)
    for k in near:
        start, end = own[k]
        if _of_another(scale, view.text[start:end]):
            continue
        scale = joined(scale, view, view.text[start:end], start, behind=k > scale.sentence)
    return scale


def _of_another(scale: Scale, text: str) -> bool:
    """Whether a sentence speaks of the measure of another outcome."""
    named = [key for key, _ in (*named_before(text), *measure_told(text))]
    return (
        bool(named)
        and bool(scale.names)
        and not any(set(key) <= set(name) or set(name) <= set(key) for key in named for name in scale.names)
    )


def joined(
    scale: Scale, view: View, text: str, start: int, *, behind: bool = True, beside: bool = True
) -> Scale:
    """A scale with the hints of one more sentence; of a sentence before it only what tells of several answers counts.

    What is averaged in a sentence that does not stand `beside` it need not be its items.
    """
    hints = said_in(text)
    if not beside:
        hints = replace(hints, near=False)
    if not hints:
        return scale
    old = scale.hints
    of_items = hints.of_items or (
        beside and not old.judges and not hints.judges and hints.averaged and (old.multiple or hints.multiple)
    )
    items = scale.items or (_items(view, hints, start) if beside or hints.of_items else None)
    if scale.items is not None and hints.number and items is not None:
        other = _items(view, hints, start)
        items = items if other is not None and other.value == items.value else None
    merged = Hints(
        averaged=old.averaged or hints.averaged, summed=old.summed or hints.summed, multiple=old.multiple or hints.multiple,
        single=old.single or hints.single, prorated=old.prorated or hints.prorated, uneven=old.uneven or (hints.uneven and behind),
        of_items=old.of_items or of_items, number=old.number, judges=old.judges, near=old.near or hints.near,
        moved=old.moved or (hints.moved and behind and beside), why=old.why or (hints.why if _averages(hints) else ""),
    )  # fmt: skip
    return replace(
        scale, hints=merged, items=items, stepped=scale.stepped and not merged.uneven,
        of_items=scale.of_items or (hints.multiple and not scale.hints.single and not hints.single and scale.stepped and not scale.hints.summed),
        counts=(*scale.counts, *_counts(hints)),
    )  # fmt: skip


def _averages(hints: Hints) -> bool:
    return hints.averaged or hints.near or hints.of_items or hints.multiple


def said_in(text: str) -> Hints:
    """What a sentence says of how scores come about."""
    low = text.lower()
    if not any(sign in low for sign in SIGNS):
        return NOTHING
    try:
        return hints_of(text)
    except TimeoutError:
        return Hints(averaged=True)


def stems_of(text: str) -> frozenset[str]:
    """The stems of a sentence."""
    return frozenset(word.stem for word in words_of(text))
