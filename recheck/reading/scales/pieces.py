"""The expressions that tell a scale: `a 7-point scale`, `from 1 (poor) to 5 (excellent)`, `possible range 0-63`."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from decimal import Decimal, InvalidOperation
from functools import cache

import regex

from recheck.reading.scales.patterns import (
    COUNTED,
    Span,
    analogue,
    anchors,
    before_scale,
    ends,
    lead,
    named_ends,
    out_of,
    points,
)
from recheck.reading.views import TIMEOUT


@dataclass(frozen=True, slots=True)
class Piece:
    """One expression: where it stands, where its lowest and highest value are printed, how many points it names.

    `rated` says that it speaks of answers on a scale, `scored` of a score and its possible range.
    """

    start: int
    end: int
    low: Span | None = None
    high: Span | None = None
    points: Span | None = None
    rated: bool = False
    scored: bool = False


_OBSERVED = (
    "observed",
    "actual",
    "in our sample",
    "in this sample",
    "in the sample",
    "sample ranged",
    "in the present sample",
    "obtained range",
)


@cache
def _no_scores() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:ages?|aged|years?|months?|weeks?|days?|hours?|minutes?|seconds?|kg|km|temperatures?|°|Hz|dB|ranged|p-?values?|correlations?|coefficients?|VIF|df|pages?|sample sizes?|prices?|"
        r"frequenc(?:y|ies) (?:between|from)|participants per|trial (?:numbers?|\d))\b",
        regex.IGNORECASE,
    )


def value_of(text: str) -> Decimal:
    """The value of a number of a scale, written in digits or as a word. Raises `ValueError` for anything else."""
    word = COUNTED.get(text.lower())
    try:
        return Decimal(text if word is None else word)
    except InvalidOperation:
        raise ValueError(text) from None


def pieces_of(text: str) -> list[Piece]:
    """All expressions of a sentence, those that belong together put together, in order."""
    found = sorted(_found(text), key=lambda piece: (piece.start, piece.start - piece.end))
    kept: list[Piece] = []
    for piece in found:
        if kept and piece.start < kept[-1].end:
            kept[-1] = _overlapping(kept[-1], piece)
        elif kept and _continues(text, kept[-1], piece):
            kept[-1] = _together(kept[-1], piece)
        else:
            kept.append(piece)
    return kept


def _found(text: str) -> Iterator[Piece]:
    low = text.lower()
    if any(sign in low for sign in ("point", "step", "categor", "level", "pt")):
        for match in points().finditer(text, timeout=TIMEOUT):
            yield Piece(*match.span(), points=match.span("points"), rated=True)
    if any(sign in low for sign in _LEADS):
        yield from _spoken(text)
    simple = [before_scale] if any(sign in low for sign in ("scale", "likert", "nrs", "vas")) else []
    simple += [anchors] if named_number().search(text, timeout=TIMEOUT) else []
    simple += [named_ends] if len(_in_or_before_brackets().findall(text, timeout=TIMEOUT)) > 1 else []
    for pattern in simple:
        for match in pattern().finditer(text, timeout=TIMEOUT):
            if _rising(text, match.span("low"), match.span("high")):
                yield Piece(*match.span(), match.span("low"), match.span("high"), rated=True)
    if any(sign in low for sign in ("mm", "cm", "met")):
        for match in analogue().finditer(text, timeout=TIMEOUT):
            yield Piece(*match.span(), high=match.span("high"), rated=True)
    if any(sign in low for sign in ("out of", "max", "highest")):
        for match in out_of().finditer(text, timeout=TIMEOUT):
            yield Piece(*match.span(), high=match.span("high"), scored=True)


_LEADS = ("scale", "likert", "continuum", "slider", "nrs", "vas", "analog", "rat", "scor", "judged", "grade", "grading", "evaluat", "assess", "answer", "anchor", "coded", "item", "question", "award", "gave", "assign", "marked", "respon", "possibl", "theoretic", "potential", "rang", "total", "value", "points", "run", "var", "may", "can")  # fmt: skip
_REACH = 110
"""Characters before two numbers in which the words that lead them in stand."""


@cache
def named_number() -> regex.Pattern[str]:
    """A number with what it stands for, looked for quickly: `1 = `, `7: `."""
    return regex.compile(
        r"(?<![\d.,])\d{1,3}[\"']? ?(?:[=:] ?[\p{L}\"'“]|- [\p{L}\"'“]|(?:indicat|repres|mean|denot|corres|being|is |was )\w* ?[\p{L}\"'“])"
    )


@cache
def _in_or_before_brackets() -> regex.Pattern[str]:
    return regex.compile(r"\(\d{1,3}\)|\[\d{1,3}\]|\d ?[(\[][\p{L}\"'“]")


def _spoken(text: str) -> Iterator[Piece]:
    """Ranges behind words of scales and scores."""
    for match in ends().finditer(text, timeout=TIMEOUT):
        first = max(0, match.start() - _REACH)
        said = lead().search(text, first, match.start(), timeout=TIMEOUT)
        if said is not None and _of_scale(text, match, said):
            rated = said["rated"] is not None
            yield Piece(
                said.start(),
                match.end(),
                match.span("low"),
                match.span("high"),
                rated=rated,
                scored=not rated,
            )


def _rising(text: str, low: Span, high: Span, most: int = 5) -> bool:
    try:
        first, last = (value_of(text[slice(*span)]) for span in (low, high))
    except ValueError:
        return False
    # Borg (1970): perceived exertion goes from 6 to 20.
    return first < last and (first <= most or (first == 6 and last == 20)) and last <= 999


def _of_scale(text: str, match: regex.Match[str], said: regex.Match[str]) -> bool:
    """Whether a range is that of the scale, not one that was observed, and not one of ages or times."""
    # A sum of items begins at their number.
    if not _rising(text, match.span("low"), match.span("high"), 5 if said["rated"] else 60):
        return False
    around = text[max(0, said.start() - 60) : match.end() + 40].lower()
    if any(word in around for word in _OBSERVED):
        return False
    near = text[max(0, said.start() - 40) : match.start("low")]
    if said["rated"] is not None:
        past = near.rstrip("( ").endswith(("ranged from", "ranged between", "range from", "range between"))
        return not (past and "ranged" in near[-18:] and "scale" not in near and match["said"] is None)
    if _no_scores().search(near) or _no_scores().match(text[match.end() : match.end() + 16].lstrip()):
        return False
    opening = said["scored"].lower()
    plain = opening.lstrip().startswith(("rang", "run", "var")) and "can" not in near and "could" not in near
    if not plain:
        return True
    # `with scores ranging from 2 to 9` may be what was observed.
    told = match["said"] is not None and any(char.isalpha() for char in match["said"])
    return told or any(word in text.lower() for word in _INSTRUMENTS)


_INSTRUMENTS = (
    "questionnaire", "inventory", "scale", "instrument", "index", "checklist", "total score", "sum score", "higher score", "higher values",
    "higher total", "indicating", "subscale", "possible", "rated", "rating", "test consists", "knowledge test", "items", "-item ", "questions", "correct answer",
)  # fmt: skip


def _overlapping(first: Piece, second: Piece) -> Piece:
    """Two views of one expression: what each knows."""
    low, high = (first.low, first.high) if first.low else (second.low, second.high or first.high)
    return Piece(
        first.start, max(first.end, second.end), low, high or second.high, first.points or second.points,
        first.rated or second.rated, first.scored or second.scored,
    )  # fmt: skip


def _together(first: Piece, second: Piece) -> Piece:
    """Two expressions of one scale: `a 7-point scale (1 = poor, 7 = good)`."""
    ends = first if first.low else second
    return replace(_overlapping(first, second), low=ends.low, high=ends.high or first.high or second.high)


@cache
def _linking() -> regex.Pattern[str]:
    return regex.compile(
        r"[ ,(:;\[-]*(?:(?:likert|scales?|rating|response|numeric\w*|type|format|hedonic|semantic|differentials?|visual|analog(?:ue)?|continuum|options?|items?|verbal|"
        r"VAS|NRS|ranging|ranged|range|running|going|from|between|with|anchors?|anchored|at|by|labell?ed|labels|end|endpoints?|points|where|whereby|which|that|and|the|of|on|a|an|in|each|"
        r"was|were|is|are|values?|scores?|scored|coded|agreement|answers?|categor(?:y|ies)|poles?|extremes?|i\.e\.|e\.g\.|mm|cm)[ ,(:;\[\"'-]*){0,12}",
        regex.IGNORECASE,
    )


@cache
def _first_name() -> regex.Pattern[str]:
    return regex.compile(r" (?:from|between) [\"'“]?\p{L}[\p{L} '-]{1,40}[\"'”]? ?$")


def _continues(text: str, first: Piece, second: Piece) -> bool:
    """Whether the second expression only says more of the scale of the first."""
    if first.points and second.points:
        return False
    if first.low and second.low and not _same_ends(text, first, second):
        return False
    gap = text[first.end : second.start]
    if text[second.start : second.start + 1] in ("(", "["):
        # `from not at all (1) to …`: the name of the first end stands before its number.
        gap = _first_name().sub(" from ", gap, timeout=TIMEOUT)
    return len(gap) <= 90 and _linking().fullmatch(gap, timeout=TIMEOUT) is not None


def _same_ends(text: str, first: Piece, second: Piece) -> bool:
    """Whether two expressions print the same two numbers: `from 1 to 4 (1 = never, 4 = always)`."""
    both = [[text[slice(*span)] for span in (piece.low, piece.high) if span] for piece in (first, second)]
    return both[0] == both[1]
