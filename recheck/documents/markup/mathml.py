"""MathML as text, with marks for what is raised and lowered."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from itertools import islice

from lxml import etree

from recheck.documents.markup.names import LOCAL, whole_text
from recheck.documents.runs import BASE, LOWERED, RAISED, Runs

Pieces = list[tuple[str, str]]
"""Pieces of text, each with its mark."""

_DEEPEST = 120
_RELATIONS = frozenset("=<>≤≥≈≠∼≃≅≪≫±×∝")
_INVISIBLE = dict.fromkeys(map(ord, "\u2061\u2062\u2063\u2064\u200b\u200c\u200d\u2060\ufeff"))
_HATS = {"^": "\u0302", "ˆ": "\u0302", "\u0302": "\u0302", "~": "\u0303", "˜": "\u0303", "\u0303": "\u0303"}
_BARS = dict.fromkeys("¯ˉ‾_-−–—―─\u0304\u0305", "\u0304")
_ACCENTS = _HATS | _BARS


def add_math(element: etree._Element, runs: Runs, mark: str = BASE) -> None:
    """Append a `math` element to a text; inside raised or lowered text all of it is so."""
    for text, own in pieces_of(element):
        runs.add(text, own if mark == BASE else mark)


def pieces_of(element: etree._Element, depth: int = 0) -> Pieces:
    """The pieces of an element and what it holds."""
    if depth > _DEEPEST:
        return [(whole_text(element), BASE)]
    name = LOCAL[element.tag]
    if name in _TOKENS:
        return _TOKENS[name](element)
    if name in _SHAPES:
        return _SHAPES[name](element, depth + 1)
    return [] if name in _DROPPED else _row(element, depth + 1)


def _row(element: etree._Element, depth: int) -> Pieces:
    return _joined(pieces_of(child, depth) for child in element)


def _joined(parts: Iterable[Pieces]) -> Pieces:
    return [piece for part in parts for piece in part]


def _words(element: etree._Element) -> str:
    text = whole_text(element) if len(element) else element.text or ""
    return text.translate(_INVISIBLE)


def _token(element: etree._Element) -> Pieces:
    text = _words(element).strip()
    return [(text, BASE)] if text else []


def _operator(element: etree._Element) -> Pieces:
    text = _words(element).strip()
    if not text:
        return []
    return [(f" {text} " if text in _RELATIONS else text, BASE)]


def _said(element: etree._Element) -> Pieces:
    """Words within a formula, whose outer spaces count."""
    text = _words(element)
    return [(text, BASE)] if text else []


def _space(element: etree._Element) -> Pieces:
    width = (element.get("width") or "").strip()
    return [] if width.startswith(("-", "0em", "0pt")) or width in ("", "0") else [(" ", BASE)]


def _marked(pieces: Pieces, mark: str) -> Pieces:
    return [(text.strip(), mark) for text, _ in pieces if text.strip()]


def _children(element: etree._Element, depth: int, count: int) -> list[Pieces]:
    parts = [pieces_of(child, depth) for child in element]
    return [*parts, *[[] for _ in range(count - len(parts))]]


def _lowered(element: etree._Element, depth: int) -> Pieces:
    base, under, *_ = _children(element, depth, 2)
    return base + _marked(under, LOWERED)


def _raised(element: etree._Element, depth: int) -> Pieces:
    base, over, *_ = _children(element, depth, 2)
    return base + _marked(over, RAISED)


def _both(element: etree._Element, depth: int) -> Pieces:
    base, under, over, *_ = _children(element, depth, 3)
    return base + _marked(under, LOWERED) + _marked(over, RAISED)


def _accented(element: etree._Element, depth: int) -> Pieces:
    """A letter under a hat or a bar keeps it as a combining sign; anything else above is raised."""
    base, over, *_ = _children(element, depth, 2)
    sign = _plain(over).strip()
    if sign in _ACCENTS:
        letter = _plain(base).strip()
        return [(letter + _ACCENTS[sign], BASE)] if len(letter) == 1 else base
    return base if sign in _STRETCHED else base + _marked(over, RAISED)


def _under(element: etree._Element, depth: int) -> Pieces:
    base, under, *_ = _children(element, depth, 2)
    return base if _plain(under).strip() in _STRETCHED else base + _marked(under, LOWERED)


_STRETCHED = frozenset(("→", "⃗", "˙", "¨", ".", "..", "⏞", "⏟", "︷", "︸", "_", "¯", "̲"))


def _plain(pieces: Pieces) -> str:
    return "".join(text for text, _ in pieces)


def _grouped(pieces: Pieces) -> Pieces:
    """Pieces in brackets, unless they are one number or letter, or bracketed already."""
    text = _plain(pieces).strip()
    whole = text.replace(".", "").isalnum() or (text[:1] == "(" and text.find(")") == len(text) - 1)
    return pieces if whole else [("(", BASE), *pieces, (")", BASE)]


def _fraction(element: etree._Element, depth: int) -> Pieces:
    above, below, *_ = _children(element, depth, 2)
    return [*_grouped(above), ("/", BASE), *_grouped(below)]


def _root(element: etree._Element, depth: int) -> Pieces:
    return [("√", BASE), *_grouped(_row(element, depth))]


def _degree(element: etree._Element, depth: int) -> Pieces:
    base, degree, *_ = _children(element, depth, 2)
    return [*_marked(degree, RAISED), ("√", BASE), *_grouped(base)]


def _fenced(element: etree._Element, depth: int) -> Pieces:
    signs = "".join((element.get("separators", ",") or "").split())
    found: Pieces = [(element.get("open", "("), BASE)]
    for at, child in enumerate(element):
        if at and signs:
            found.append((signs[min(at, len(signs)) - 1], BASE))
        found += pieces_of(child, depth)
    return [*found, (element.get("close", ")"), BASE)]


def _first(element: etree._Element, depth: int) -> Pieces:
    """The first child alone: what follows says the same in another language."""
    return pieces_of(element[0], depth) if len(element) else []


def _multiscripts(element: etree._Element, depth: int) -> Pieces:
    found = _first(element, depth)
    for at, child in enumerate(islice(element, 1, None)):
        if LOCAL[child.tag] == "mprescripts":
            break
        found += _marked(pieces_of(child, depth), RAISED if at % 2 else LOWERED)
    return found


def _table(element: etree._Element, depth: int) -> Pieces:
    rows = [[pieces_of(cell, depth) for cell in row] for row in element]
    found: Pieces = []
    for row in rows:
        found += [("\x0b", BASE)] if found else []
        for at, cell in enumerate(row):
            found += [*([(" ", BASE)] if at else []), *cell]
    return found


_TOKENS: dict[str, Callable[[etree._Element], Pieces]] = {
    "mi": _token, "mn": _token, "mo": _operator, "mtext": _said, "ms": _said, "mspace": _space,
}  # fmt: skip
_SHAPES: dict[str, Callable[[etree._Element, int], Pieces]] = {
    "msub": _lowered, "msup": _raised, "msubsup": _both, "munderover": _both, "mover": _accented, "munder": _under,
    "mfrac": _fraction, "msqrt": _root, "mroot": _degree, "mfenced": _fenced, "semantics": _first, "maction": _first,
    "mmultiscripts": _multiscripts, "mtable": _table,
}  # fmt: skip
_DROPPED = frozenset(
    ("mphantom", "annotation", "annotation-xml", "none", "mprescripts", "malignmark", "maligngroup", "mglyph")
)
