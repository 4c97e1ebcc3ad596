"""Equations of Word documents (OMML, ISO/IEC 29500-1 clause 22.1) as a line of text with marks."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from typing import Any
from unicodedata import normalize

import regex

from recheck.documents.runs import BASE, LOWERED, RAISED, Runs

_M = "{http://schemas.openxmlformats.org/officeDocument/2006/math}"
_W = "{http://schemas.openxmlformats.org/wordprocessingml/2006/main}"
_ACCENTS = {
    "^": "\u0302", "ˆ": "\u0302", "\u0302": "\u0302", "¯": "\u0304", "‾": "\u0304", "ˉ": "\u0304", "_": "\u0304", "―": "\u0304",
    "\u0304": "\u0304", "\u0305": "\u0304", "~": "\u0303", "˜": "\u0303", "\u0303": "\u0303", "˙": "\u0307", "\u0307": "\u0307",
    "¨": "\u0308", "\u0308": "\u0308", "→": "\u20d7", "\u20d7": "\u20d7",
}  # fmt: skip
"""Signs that stand over a letter, as their combining characters."""
_RELATION = regex.compile(r" *([=<>≤≥≈≠∼≅]+) *")
_COMMA = regex.compile(r"([,;])(?=[^\W\d_])")
_SIMPLE = regex.compile(r"[\w.%\u0300-\u036f]*")
_DROPPED = frozenset(
    [f"{_W}del", f"{_W}moveFrom", f"{_W}rPr", f"{_W}instrText", f"{_W}delText", f"{_M}ctrlPr", f"{_M}argPr"]
)

_Pieces = list[tuple[str, str]]
_BREAK = ("\n", BASE)


def add_math(element: Any, runs: Runs) -> None:
    """Append the text of an `m:oMath` or `m:oMathPara` to `runs`, with space around relations as print has it."""
    for text, mark in _spaced(_joined(_pieces(element, BASE))):
        for at, line in enumerate(text.split("\n")):
            if at:
                runs.line_break()
            runs.add(line, mark)


def _joined(pieces: _Pieces) -> _Pieces:
    """Neighbours of one mark as one piece."""
    found: _Pieces = []
    for text, mark in pieces:
        if found and found[-1][1] == mark:
            found[-1] = (found[-1][0] + text, mark)
        else:
            found.append((text, mark))
    return found


def _spaced(pieces: _Pieces) -> Iterator[tuple[str, str]]:
    for text, mark in pieces:
        yield (_COMMA.sub(r"\1 ", _RELATION.sub(r" \1 ", text)), mark) if mark == BASE else (text, mark)


def _pieces(element: Any, mark: str) -> _Pieces:
    """The pieces of all that an element holds."""
    found: _Pieces = []
    for child in element:
        if not isinstance(child.tag, str) or child.tag in _DROPPED:
            continue
        if child.tag in (f"{_M}t", f"{_W}t"):
            found.append((child.text or "", mark))
        elif child.tag in (f"{_M}br", f"{_W}br"):
            found.append(_BREAK)
        elif child.tag == f"{_M}oMath" and element.tag == f"{_M}oMathPara" and found:
            found += [_BREAK, *_pieces(child, mark)]
        elif not child.tag.endswith("Pr"):
            form = _FORMS.get(child.tag)
            found += _pieces(child, mark) if form is None else form(child, mark)
    return found


def _part(element: Any, name: str, mark: str) -> _Pieces:
    part = element.find(_M + name)
    return [] if part is None else _pieces(part, mark)


def _setting(element: Any, name: str, default: str) -> str:
    """A value from the element's properties; an empty one is kept."""
    found = element.find(f"{element.tag}Pr/{_M}{name}")
    return default if found is None else str(found.get(f"{_M}val", default))


def _text(pieces: _Pieces) -> str:
    return "".join(text for text, _ in pieces)


def _scripts(element: Any, mark: str) -> _Pieces:
    return [
        *_part(element, "e", mark),
        *_part(element, "sub", LOWERED),
        *_part(element, "sup", RAISED),
    ]


def _before(element: Any, mark: str) -> _Pieces:
    return [*_part(element, "sub", LOWERED), *_part(element, "sup", RAISED), *_part(element, "e", mark)]


def _bracketed(pieces: _Pieces, mark: str) -> _Pieces:
    """Put brackets around what is more than one number or name."""
    return pieces if _SIMPLE.fullmatch(_text(pieces).strip()) else [("(", mark), *pieces, (")", mark)]


def _fraction(element: Any, mark: str) -> _Pieces:
    over, under = _part(element, "num", mark), _part(element, "den", mark)
    if _setting(element, "type", "bar") == "noBar":
        return [*over, (" ", mark), *under]
    return [*_bracketed(over, mark), ("/", mark), *_bracketed(under, mark)]


def _delimited(element: Any, mark: str) -> _Pieces:
    separator = _setting(element, "sepChr", "|")
    found: _Pieces = [(_setting(element, "begChr", "("), mark)]
    for at, part in enumerate(element.findall(f"{_M}e")):
        if at:
            found.append((separator, mark))
        found += _pieces(part, mark)
    return [*found, (_setting(element, "endChr", ")"), mark)]


def _accented(pieces: _Pieces, sign: str) -> _Pieces:
    """Set a combining sign over each letter."""
    return [
        (normalize("NFC", "".join(c + sign if c.isalnum() else c for c in text)), mark)
        for text, mark in pieces
    ]


def _accent(element: Any, mark: str) -> _Pieces:
    sign = _setting(element, "chr", "\u0302")
    return _accented(_part(element, "e", mark), _ACCENTS.get(sign, sign))


def _bar(element: Any, mark: str) -> _Pieces:
    pieces = _part(element, "e", mark)
    return _accented(pieces, "\u0304") if _setting(element, "pos", "bot") == "top" else pieces


def _upper_limit(element: Any, mark: str) -> _Pieces:
    limit = _text(_part(element, "lim", mark)).strip()
    if limit in _ACCENTS:
        return _accented(_part(element, "e", mark), _ACCENTS[limit])
    return [*_part(element, "e", mark), *_part(element, "lim", RAISED)]


def _lower_limit(element: Any, mark: str) -> _Pieces:
    return [*_part(element, "e", mark), *_part(element, "lim", LOWERED)]


def _root(element: Any, mark: str) -> _Pieces:
    return [*_part(element, "deg", RAISED), ("√", mark), *_bracketed(_part(element, "e", mark), mark)]


def _operator(element: Any, mark: str) -> _Pieces:
    sign = _setting(element, "chr", "∫")
    return [
        (sign, mark), *_part(element, "sub", LOWERED), *_part(element, "sup", RAISED), *_part(element, "e", mark)
    ]  # fmt: skip


def _function(element: Any, mark: str) -> _Pieces:
    return [*_part(element, "fName", mark), (" ", mark), *_part(element, "e", mark)]


def _lines(element: Any, mark: str) -> _Pieces:
    found: _Pieces = []
    for at, part in enumerate(element.findall(f"{_M}e")):
        # An ampersand aligns the lines of an array and is not printed.
        found += [_BREAK] * bool(at) + [(text.replace("&", ""), own) for text, own in _pieces(part, mark)]
    return found


def _matrix(element: Any, mark: str) -> _Pieces:
    found: _Pieces = []
    for at, row in enumerate(element.findall(f"{_M}mr")):
        found += [_BREAK] * bool(at)
        for column, part in enumerate(row.findall(f"{_M}e")):
            found += [(" ", mark)] * bool(column) + _pieces(part, mark)
    return found


def _phantom(element: Any, mark: str) -> _Pieces:
    shown = _setting(element, "show", "1") not in ("0", "off", "false")
    return _part(element, "e", mark) if shown else []


_FORMS: dict[str, Callable[[Any, str], _Pieces]] = {
    _M + name: form
    for name, form in {
        "sSub": _scripts, "sSup": _scripts, "sSubSup": _scripts, "sPre": _before, "f": _fraction, "d": _delimited,
        "acc": _accent, "bar": _bar, "limUpp": _upper_limit, "limLow": _lower_limit, "rad": _root, "nary": _operator,
        "func": _function, "eqArr": _lines, "m": _matrix, "phant": _phantom,
    }.items()
}  # fmt: skip
