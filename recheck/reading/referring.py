"""Which tables a sentence refers to, and whether it surely speaks of their numbers."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache

import regex

from recheck.reading.views import TIMEOUT

_NUMBER = r"(?:[A-Z]{0,2}[.-]?\d{1,3}(?:[.-]\d{1,2})?[a-zA-Z]?(?![\p{L}\d])|[IVX]{1,5}(?![\p{L}\d]))"
_PREFIX = r"(?P<prefix>(?:[Ss]upplement(?:ary|al)?|[Ss]upporting|[Ee]xtended [Dd]ata|[Aa]ppendix|[Oo]nline|[Ww]eb|[Ss]upp\.) )?"


@dataclass(frozen=True, slots=True)
class Reference:
    """A table that a text refers to: its key, where it stands, and whether nothing but the reference stands there.

    `plain` is true of `(Table 2)`, `(see Table 2)`, `as shown in Table 2`, `Table 2 shows`; not of
    `(baseline values are given in Table 2)` nor of `unlike in Table 2`.
    """

    key: str
    start: int
    end: int
    plain: bool


@cache
def _reference() -> regex.Pattern[str]:
    return regex.compile(
        rf"\b{_PREFIX}(?:[Tt]ables?|TABLES?|[Tt]abs?\.) ?(?P<numbers>{_NUMBER}"
        rf"(?P<more>(?: ?(?:,|and|&|, and|-|to|or) ?{_NUMBER}){{0,4}}))"
    )


@cache
def _each() -> regex.Pattern[str]:
    return regex.compile(_NUMBER)


def key_of(label: str) -> str:
    """The key of a table's label: `Table 2.` is 2, `Supplementary Table 2` is supplementary 2; else the label itself, which no text refers to."""
    match = _reference().match(label.strip(), timeout=TIMEOUT)
    if match is None:
        return label
    first = _each().match(match["numbers"], timeout=TIMEOUT)
    return _key(match["prefix"], first[0]) if first else label


def _key(prefix: str | None, number: str) -> str:
    return f"{(prefix or '').lower()}{number.rstrip('.')}".lower()


def references(text: str) -> Iterator[Reference]:
    """Every table that a text refers to, in order; tables of other works are left out."""
    if "able" not in text and "ABLE" not in text and "ab." not in text:
        return
    for match in _reference().finditer(text, timeout=TIMEOUT):
        start, end = match.span()
        if _elsewhere().match(text, end, timeout=TIMEOUT):
            continue
        several = (
            match["numbers"] if "ables" not in match[0].lower() else match["numbers"].replace("-", " to ")
        )
        numbers = [m[0] for m in _each().finditer(several, timeout=TIMEOUT)]
        plain = _plain(text, start, end)
        for number in _filled(numbers, several):
            yield Reference(_key(match["prefix"], number), start, end, plain)


@cache
def _figure() -> regex.Pattern[str]:
    return regex.compile(
        r"\b[Ff]ig(?:ure)?s?\.? ?[A-Z]?\d{1,2}[A-Za-z]?(?:(?:, | and |-| & )[A-Z]?\d{0,2}[A-Za-z]?(?![\p{L}\d]))*"
    )


def figures(text: str) -> Iterator[tuple[int, int]]:
    """Where a text refers to figures."""
    if "ig" in text:
        yield from (match.span() for match in _figure().finditer(text, timeout=TIMEOUT))


def _filled(numbers: list[str], text: str) -> list[str]:
    """The tables of a range: `Tables 1-3` are three."""
    if len(numbers) == 2 and all(n.isdigit() for n in numbers) and "to" in text:
        first, last = int(numbers[0]), int(numbers[1])
        return [str(n) for n in range(first, last + 1)] if 0 < last - first < 10 else numbers
    return numbers


@cache
def _elsewhere() -> regex.Pattern[str]:
    """A table of another work: `Table 2 of Baker (2012)`, `Table 3 in [7]`."""
    return regex.compile(
        r"\)?,? (?:of|in|from|by) (?:\[\d|\p{Lu}[\p{L}'-]+(?: et al| and | &|,)? ?(?:\p{Lu}\p{L}+ )?[(\[,.]? ?\d?)"
    )


@cache
def _alone() -> regex.Pattern[str]:
    """The rest of a bracket that holds a reference: figures and other tables may stand beside it."""
    return regex.compile(
        r"(?:(?:[,;]| and| &) ?(?:see )?(?:also )?(?:[Ff]ig(?:ure|s?\.?)s? ?[A-Z]?\d{1,2}[a-zA-Z]?|[Pp]anel [A-Z]|row \d))*[)\].;,]"
    )


def _plain(text: str, start: int, end: int) -> bool:
    """Whether the words around a reference only refer."""
    opened = _open_bracket(text, start)
    if opened >= 0:
        *others, own = text[opened + 1 : start].replace(";", ",").split(",")
        numbers = all(any(char.isdigit() for char in other) for other in others if other.strip())
        return numbers and own.strip().lower() in _BEFORE and bool(_alone().match(text, end, timeout=TIMEOUT))
    before = text[max(0, start - _REACH) : start].rstrip()
    if not before and start < _REACH:
        return bool(_verb().match(text, end, timeout=TIMEOUT))
    return bool(_said().search(before.lower(), timeout=TIMEOUT))


_REACH = 40
"""Characters before a reference in which the words that lead it in are looked for."""
_LONGEST = 400
"""Characters within which the bracket around a reference opens."""


def _open_bracket(text: str, at: int) -> int:
    """Where the bracket opens that holds a place of a text, -1 where none does."""
    depth = 0
    for here in range(at - 1, max(-1, at - _LONGEST), -1):
        depth += (text[here] in ")]") - (text[here] in "([")
        if depth < 0:
            return here
    return -1


_BEFORE = frozenset(
    (
        "",
        "see",
        "see also",
        "cf",
        "cf.",
        "in",
        "as shown in",
        "shown in",
        "as given in",
        "as in",
        "also",
        "as seen in",
    )
)


@cache
def _verb() -> regex.Pattern[str]:
    return regex.compile(
        r",? (?:also )?(?:shows?|gives?|presents?|reports?|lists?|summari[sz]es?|displays?|contains?)\b"
    )


@cache
def _said() -> regex.Pattern[str]:
    """`as Table 2 shows` and `as shown in` before a table; `unlike in` is neither."""
    return regex.compile(
        r"(?:^|[ ,;])(?:as (?:is |are )?(?:shown |given |seen |reported |presented |listed |displayed |summari[sz]ed )in|as can be seen in|as)$|(?:^|[,;:] ?)(?:see|see also|cf\.?)$|[\d)\]%],$"
    )
