"""The sizes of the two groups of a test of ranks, where its sentence tells them without any mean or median."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cache

import regex

from recheck.model import N_OF_GROUP, SIZES_IN_WORDS, Printed
from recheck.reading.group_sizes import Told
from recheck.reading.numerals import Line, printed
from recheck.reading.views import TIMEOUT

_BESIDE = 24
"""Characters behind the numbers of a test within which sizes are still its own: `U = 53, p = .291, n1 = 12, n2 = 14`."""


def with_rank_sizes(told: Sequence[Told], text: str, start: int) -> list[Told]:
    """The drafts of a sentence; its only test of ranks gets the sizes of the two groups as `n1` and `n2`.

    `text` is the sentence, `start` where it begins. Nothing is added where a mean or median of the sentence
    has its own n, or the test is one of pairs.
    """
    found = list(told)
    tests = [at for at, (_, name) in enumerate(told) if name is not None and name.kind == "rank-test"]
    sized = any(name is not None and name.kind == "group-summary" and "n" in name.values for _, name in told)
    if (
        len(tests) != 1
        or sized
        or any(
            name is not None and name.kind.endswith("-test") and at != tests[0]
            for at, (_, name) in enumerate(told)
        )
    ):
        return found
    draft, name = told[tests[0]]
    if name is None or not {"u", "w"} & name.values.keys() or {"n", "N"} & name.values.keys():
        return found
    line = draft.line
    own = line.at(draft.first).start - start, line.at(draft.after - 1).end - start
    sizes = _sizes(text, own)
    one, two = (None, None) if sizes is None else (_at(line, start, span) for span in sizes.spans)
    if sizes is not None and one is not None and two is not None:
        values = {**name.values, "n1": one, "n2": two}
        found[tests[0]] = draft, replace(name, values=values, notes=(*name.notes, *sizes.notes))
    return found


def _at(line: Line, start: int, span: tuple[int, int]) -> Printed | None:
    """The number in a span of the sentence, with its place."""
    first, after = start + span[0], start + span[1]
    number = printed(line.view.text[first:after])
    page, box = line.view.box(first, after)
    return replace(number, page=page, box=box) if number is not None and number.value > 0 else None


@dataclass(frozen=True, slots=True)
class _Sizes:
    spans: tuple[tuple[int, int], tuple[int, int]]
    notes: tuple[str, ...]


@cache
def _numbered() -> regex.Pattern[str]:
    """`n1 = 14`, `n₂ = 11`, `n_A = 9`."""
    return regex.compile(
        r"(?<![\w.])[nN](?:_\{?(?P<which>\w{1,14})\}?| ?(?P<which>[12₁₂AB])) ?= ?(?P<n>\d{1,4})(?![\d.,]*\d)"
    )


@cache
def _named() -> regex.Pattern[str]:
    """`n = 9`, and the second of two: `n = 9 and 8`, `ns = 12, 14`."""
    return regex.compile(
        r"(?<![\w.])[nN]s? ?= ?(?P<n>\d{1,4})(?![\d.,]*\d)(?:(?: and | vs\.? | versus |/|, | & )(?P<second>\d{1,4})(?![\d.,]*\d|%| ?[\p{L}]))?(?P<each> (?:each|per (?:group|arm|condition)|in each|in both))?"
    )


_UNITS = (
    "minutes|hours|days|weeks|months|years|seconds|points|items|times|degrees|grams|cases|trials|sessions|questions|percent|ranks|pairs|"
    "tests|visits|stages|levels|steps|rounds|variables|measures|scores|studies|experiments|groups|conditions|loci|genes|units"
)


@cache
def _in_words() -> regex.Pattern[str]:
    """`24 growers and 21 buyers`, `24 trained growers with 21 untrained ones`."""
    noun = (
        rf"(?!(?:{_UNITS})\b)(?:\p{{L}}{{3,}}s|ones|people|men|women|children|mice|plants|untreated|treated)"
    )
    words = r"(?:\p{L}[\p{L}-]+ ){0,2}"
    return regex.compile(
        rf"(?<![\d.,=<>±–-] ?)\b(?P<n>\d{{1,4}}) {words}{noun} (?:and|with|to|vs\.?|versus|from|than) (?:the |(?:those|that) of )?(?P<second>\d{{1,4}}) {words}{noun}\b"
    )


def _sizes(text: str, own: tuple[int, int]) -> _Sizes | None:
    """Two sizes and only two; with a note where they stand apart from the test, or are told in words."""
    numbered = list(_numbered().finditer(text, timeout=TIMEOUT))
    if numbered:
        one, two = numbered[0], numbered[-1]
        if len(numbered) != 2 or one["which"] == two["which"]:
            return None
        return _of_test(text, own, one.span("n"), two.span("n"))
    named = list(_named().finditer(text, timeout=TIMEOUT))
    if len(named) == 1:
        match = named[0]
        second = "n" if match["each"] else "second"
        return _of_test(text, own, match.span("n"), match.span(second)) if match[second] else None
    if named:
        plain = len(named) == 2 and not any(m["second"] or m["each"] for m in named)
        return _of_test(text, own, named[0].span("n"), named[1].span("n")) if plain else None
    told = list(_in_words().finditer(text, timeout=TIMEOUT))
    spans = (told[0].span("n"), told[0].span("second")) if len(told) == 1 else None
    return _Sizes(spans, (N_OF_GROUP, SIZES_IN_WORDS)) if spans else None


def _of_test(text: str, own: tuple[int, int], first: tuple[int, int], second: tuple[int, int]) -> _Sizes:
    """Two printed n: those of the test where they stand among its numbers, else those of whole groups."""
    beside = own[0] <= first[0] and second[1] <= own[1] + _BESIDE and ")" not in text[own[1] : second[0]]
    return _Sizes((first, second), () if beside else (N_OF_GROUP,))
