"""Words, numbers and signs of a passage, and its sentences."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from functools import cache
from typing import NamedTuple

import regex

from recheck.reading.views import TIMEOUT, View


class Token(NamedTuple):
    """A word, number or sign; `start` and `end` count characters of the view."""

    kind: str
    text: str
    low: str
    start: int
    end: int
    spaced: bool


def words(text: str) -> frozenset[str]:
    """The words of a text as a set: for lists that read better without quotes."""
    return frozenset(text.split())


DIGITS = frozenset("0123456789")
NOTHING = Token("end", "", "", -1, -1, True)
"""Stands for what is before the first and after the last token."""


@cache
def _pattern() -> regex.Pattern[str]:
    return regex.compile(
        r"""(?P<num>\d+\.\d+(?=,9[059]%)        # 0.66 of 0.66,95%CI
              |\d+(?:[.,·]\d+)*            # 12  1.71  1,234.5  0·03
              |(?<![\d\p{L})])[.·]\d+(?!\.?\d)  # .03
              |(?<=^|[=<>≤≥≈(\[-][ ]?),\d+(?![.,·]?\d))   # ,030 after a sign
        |(?P<word>\p{L}(?:\.\p{L}){1,4}\b\.?    # s.d.  n.s.
              |[\p{L}\p{M}]+(?:'\p{L}+)*)
        |(?P<sup>[²³¹⁰⁴-⁹⁺⁻]+)
        |(?P<sub>[₀-₉]+(?:[.,·;][ ]?[₀-₉]+)*)
        |(?P<rel>[=<>≤≥≈≠]+)
        |(?P<sign>\S)""",
        regex.VERBOSE,
    )


def tokens(view: View, start: int, end: int) -> list[Token]:
    """The tokens of the view from `start` up to `end`."""
    found = []
    last = start
    for match in _pattern().finditer(view.text, start, end, timeout=TIMEOUT):
        first, after = match.span()
        text = match[0]
        kind = match.lastgroup or "sign"
        low = text.lower().replace(".", "") if kind == "word" else text
        found.append(Token(kind, text, low, first, after, first > last))
        last = after
    return found


_ABBREVIATED = words(
    "vs e.g i.e fig figs al approx cf dr no nos eq eqs exp expt ca resp st mr mrs ms prof tab sec vol pp p "
    "et std dev diff min max incl excl stat sig conf int adj"
)


@cache
def _stop() -> regex.Pattern[str]:
    """A full stop that may end a sentence: the next one starts with a capital, a digit or a bracket."""
    return regex.compile(r"[.!?][\"'”)\]]{0,3}[²³¹⁰⁴-⁹]{0,6} (?=[\p{Lu}\p{N}(\[“\"*]|[a-z] ?[(=<>])")


Spans = Sequence[tuple[int, int]]
"""Start and end of each sentence of a view."""

LONGEST = 2500
"""Characters of the longest sentence; what is longer is no prose (tables run together) and is cut."""


def sentences(view: View) -> Iterator[tuple[int, int]]:
    """Start and end of each sentence of the view."""
    for start, end in _whole_sentences(view.text):
        while end - start > LONGEST:
            cut = view.text.rfind("; ", start + LONGEST // 2, start + LONGEST) + 1
            cut = cut or view.text.rfind(" ", start + LONGEST // 2, start + LONGEST) or start + LONGEST
            cut = cut if cut > start else start + LONGEST
            yield start, cut
            start = cut
        yield start, end


def _whole_sentences(text: str) -> Iterator[tuple[int, int]]:
    start = 0
    for match in _stop().finditer(text, timeout=TIMEOUT):
        if match[0][0] == "." and _abbreviates(text, match.start()):
            continue
        yield start, match.end()
        start = match.end()
    if start < len(text):
        yield start, len(text)


def _abbreviates(text: str, stop: int) -> bool:
    """Tell whether the full stop at `stop` belongs to an abbreviation."""
    first = stop
    while first > 0 and stop - first < 10 and (text[first - 1].isalpha() or text[first - 1] == "."):
        first -= 1
    word = text[first:stop].lower()
    return "." in word or word in _ABBREVIATED or (len(word) == 1 and word.isalpha())
