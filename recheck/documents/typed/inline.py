"""Inline markup of Markdown taken away, raised and lowered characters marked."""

from __future__ import annotations

import html
from contextlib import suppress

import numpy as np
import regex
from numpy.typing import NDArray

from recheck.documents.characters import LOWERED, RAISED, as_codes, as_text, made_plain, mark_string

_PATIENCE = 2.0
_INNER = r"[^\s{0}](?:[^{0}\n]|\n(?!\n)){{0,200}}?(?<![\s{0}])|[^\s{0}]"
_PAIRS = (
    # **p**, *p* and Δ*M*, but not the stars of a legend ("*p < .05, **p < .01") or of a product.
    (rf"(?:(?<![\w*\\])|(?<=\p{{Greek}}))(\*{{1,3}})(?:{_INNER.format('*')})(\*{{1,3}})(?![\w*])", None),
    (rf"(?<![\w_\\])(_{{1,3}})(?:{_INNER.format('_')})(_{{1,3}})(?![\w_])", None),
    (r"(?<![`\\])(`+)[^`\n]{1,200}(`+)(?!`)", None),
    (r"(\^)[^\s^~]{1,20}(\^)", RAISED),
    (r"(?<!~)(~)[^\s~^]{1,20}(~)(?!~)", LOWERED),
    (r"(<sup>)[^<]{1,40}(</sup>)", RAISED),
    (r"(<sub>)[^<]{1,40}(</sub>)", LOWERED),
    (r"(?<!!)(\[)[^\[\]\n]{1,200}(\]\([^()\s]{1,300}\))", None),
)
_TAGS = r"</?(?:i|b|em|strong|u|span|font|p|br|div|center)(?:\s[^<>]{0,200})?/?>"
_ENTITY = r"&(?:[a-zA-Z]{2,10}|#\d{2,6}|#x[0-9a-fA-F]{2,5});"
_ESCAPE = r"\\(?=[*_<>#~^`|&$%=+.]|-\d)"
_COMPILED = tuple((regex.compile(pattern), mark) for pattern, mark in _PAIRS)
_DELETED = tuple(regex.compile(pattern, regex.IGNORECASE) for pattern in (_TAGS, _ESCAPE))
_ENTITIES = regex.compile(_ENTITY)
_ANY = regex.compile(r"[*_`^~<\[\\&\u0080-\U0010ffff\x00]")


def without_markup(text: str) -> tuple[str, str]:
    """Give the text without its inline markup, and its marks; line ends are never touched."""
    if _ANY.search(text) is None:
        return text, ""
    codes = as_codes(text)
    marks = np.zeros(len(codes), dtype=np.uint8)
    keep = np.ones(len(codes), dtype=bool)
    with suppress(TimeoutError):  # megabytes of stars in one paragraph are no markup
        _mark_deleted(text, codes, keep, marks)
    plain_codes, plain_marks, _ = made_plain(codes[keep], marks[keep])
    return as_text(plain_codes), mark_string(plain_marks)


def _mark_deleted(
    text: str, codes: NDArray[np.uint32], keep: NDArray[np.bool_], marks: NDArray[np.uint8]
) -> None:
    for pattern, mark in _COMPILED:
        for match in pattern.finditer(text, timeout=_PATIENCE, overlapped=False):
            _take_pair(match, mark, keep, marks)
    for pattern in _DELETED:
        for match in pattern.finditer(text, timeout=_PATIENCE):
            keep[match.start() : match.end()] &= codes[match.start() : match.end()] == 0x0A
    for match in _ENTITIES.finditer(text, timeout=_PATIENCE):
        became = html.unescape(match[0])
        if len(became) == 1 and became != "\n":
            codes[match.start()] = ord(became)
            keep[match.start() + 1 : match.end()] = False


def _take_pair(
    match: regex.Match[str], mark: int | None, keep: NDArray[np.bool_], marks: NDArray[np.uint8]
) -> None:
    opening, closing = match[1], match[2]
    if opening[0] in "*_`" and len(opening) != len(closing):
        return
    if mark is not None:
        inside = slice(match.end(1), match.start(2))
        marks[inside] = mark
    keep[match.start(1) : match.end(1)] = False
    keep[match.start(2) : match.end(2)] = False
