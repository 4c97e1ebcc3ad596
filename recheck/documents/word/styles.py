"""Styles of a Word document: what a paragraph or a run is by its style, inherited ones followed."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import Literal

import regex

from recheck.documents.runs import BASE, LOWERED, RAISED
from recheck.documents.word.package import Element, W

Role = Literal["", "title", "heading", "caption", "note", "contents", "code", "references"]

_TAG = {name: W + name for name in (
    "rPr", "pPr", "vertAlign", "position", "vanish", "rFonts", "b", "sz", "outlineLvl", "ind", "basedOn", "name", "val",
    "styleId", "type", "ascii", "hAnsi", "left", "start", "firstLine", "hanging", "default", "jc", "rStyle",
)}  # fmt: skip
VAL = _TAG["val"]
_USUAL_SIZE = 20
"""Half points of text for which a document states no size."""
_LIST_STEP = 360
_OFF = ("0", "false", "off", "none")
_HEADING = regex.compile(
    r"(?:heading|überschrift|titre|título|titolo|kop|rubrik|overskrift|otsikko|nagłówek|nadpis|заголовок|標題|见出し|見出し|标题|제목)"
    r"\s*(\d)|.*heading\s*_?(\d)\b.*",
    regex.IGNORECASE,
)
_NAMES: dict[Role, str] = {
    "title": r"(?:(?:article|paper|manuscript|document)[ _-]?)?(?:title|titel)(?: ?[a-z])?|\w+_\d[\d.]*_title",
    "caption": r"caption|beschriftung|légende|legende|didascalia|epígrafe|.*(?:table|image|figure)[ _-]?(?:caption|title|heading)"
               r"|(?:caption|legend)[ _-]?(?:table|figure)?",
    "note": r".*table[ _-]?(?:foot ?note|note|footer|legend).*|footnote text|endnote text|fußnotentext",
    "contents": r"toc \d|toc heading|table of figures|index \d",
    "references": r".*bibliograph.*|references?(?: (?:text|list))?|literature",
    "code": r"source code|html preformatted|code(?: block)?|preformatted text",
}  # fmt: skip
_ROLES = {role: regex.compile(pattern, regex.IGNORECASE) for role, pattern in _NAMES.items()}


@dataclass(frozen=True, slots=True)
class Type:
    """What run properties say: `mark` of raised or lowered text, hidden, bold, font and size (half points)."""

    mark: str = BASE
    hidden: bool = False
    bold: bool = False
    font: str = ""
    size: int = 0


@dataclass(frozen=True, slots=True)
class Style:
    """A style with all that it inherits.

    `level` counts headings from 1; `indent` is in twentieths of a point; `numbered` is its `w:numPr`.
    """

    role: Role = ""
    level: int = 0
    indent: int = 0
    type: Type = Type()
    numbered: Element | None = None


PLAIN = Style()


def typed(properties: Element | None, base: Type, styles: Mapping[str, Style]) -> Type:
    """The type of a run or a style: its `w:rPr` over what it inherits."""
    if properties is None or not len(properties):
        return base
    found = base
    named = properties.find(_TAG["rStyle"])
    if named is not None:
        style = styles.get(named.get(VAL) or "")
        if style is not None and style.type != Type():
            own = style.type
            found = Type(
                own.mark if own.mark != BASE else base.mark,
                own.hidden or base.hidden,
                own.bold or base.bold,
                own.font or base.font,
                own.size or base.size,
            )
    for child in properties:
        change = _CHANGES.get(child.tag)
        if change is not None:
            found = change(child, found)
    return found


def _aligned(child: Element, found: Type) -> Type:
    value = child.get(VAL)
    mark = RAISED if value == "superscript" else LOWERED if value == "subscript" else BASE
    return replace(found, mark=mark)


def _positioned(child: Element, found: Type) -> Type:
    """Text moved by two points or more is raised or lowered; less is a matter of looks."""
    rise = number_of(child.get(VAL))
    if abs(rise) < 4 or found.mark != BASE:
        return found
    return replace(found, mark=RAISED if rise > 0 else LOWERED)


def _font(child: Element, found: Type) -> Type:
    font = child.get(_TAG["ascii"]) or child.get(_TAG["hAnsi"])
    return replace(found, font=font) if font else found


def is_on(child: Element | None) -> bool:
    """Tell whether a property that is there or not, such as bold, is there and not switched off."""
    return child is not None and (child.get(VAL) or "1") not in _OFF


_CHANGES: dict[str, Callable[[Element, Type], Type]] = {
    _TAG["vertAlign"]: _aligned,
    _TAG["position"]: _positioned,
    _TAG["vanish"]: lambda child, found: replace(found, hidden=is_on(child)),
    _TAG["b"]: lambda child, found: replace(found, bold=is_on(child)),
    _TAG["rFonts"]: _font,
    _TAG["sz"]: lambda child, found: replace(found, size=number_of(child.get(VAL))),
}


def number_of(text: str | None) -> int:
    """The number that an attribute states, rounded; 0 for none."""
    try:
        return round(float(text or 0))
    except (ValueError, OverflowError):
        return 0


def indent_of(properties: Element | None, default: int) -> int:
    """How far the first line of a paragraph is moved in, in twentieths of a point; an item of a list by its level."""
    moved = None if properties is None else properties.find(_TAG["ind"])
    if moved is None:
        listed = None if properties is None else properties.find(f"{W}numPr/{W}ilvl")
        return default if listed is None else default + _LIST_STEP * (1 + number_of(listed.get(VAL)))
    left = number_of(moved.get(_TAG["left"]) or moved.get(_TAG["start"]))
    return left + number_of(moved.get(_TAG["firstLine"])) - number_of(moved.get(_TAG["hanging"]))


def outline_level(properties: Element | None) -> int:
    """The level of a heading, from 1, that paragraph properties state; 0 for none."""
    stated = None if properties is None else properties.find(_TAG["outlineLvl"])
    level = 9 if stated is None else number_of(stated.get(VAL))
    return level + 1 if 0 <= level < 9 else 0


def styles_of(root: Element | None) -> dict[str, Style]:
    """All styles by their id; `""` is that of a paragraph which names none."""
    if root is None:
        return {"": PLAIN}
    elements = {element.get(_TAG["styleId"]) or "": element for element in root.findall(f"{W}style")}
    stated = root.find(f"{W}docDefaults/{W}rPrDefault/{W}rPr")
    basis = Style(type=replace(typed(stated, Type(size=_USUAL_SIZE), {}), mark=BASE, hidden=False))
    found: dict[str, Style] = {}
    for key in elements:
        _resolve(key, elements, found, basis)
    found[""] = basis
    for key, element in elements.items():
        if element.get(_TAG["default"]) in ("1", "true", "on") and element.get(_TAG["type"]) == "paragraph":
            found[""] = found[key]
    return found


def _resolve(key: str, elements: Mapping[str, Element], found: dict[str, Style], basis: Style) -> None:
    """Resolve a style after those that it is based on; a chain that runs in a circle is cut."""
    chain: list[str] = []
    while key in elements and key not in found and key not in chain and len(chain) < 50:
        chain.append(key)
        based = elements[key].find(_TAG["basedOn"])
        key = "" if based is None else based.get(VAL) or ""
    for name in reversed(chain):
        # A style of characters adds to that of its paragraph and has no size of its own unless it says so.
        plain = basis if elements[name].get(_TAG["type"]) == "paragraph" else PLAIN
        found[name] = _own_style(elements[name], found.get(key, plain), found)
        key = name


def _own_style(element: Element, parent: Style, found: Mapping[str, Style]) -> Style:
    named = element.find(_TAG["name"])
    name = "" if named is None else named.get(VAL) or ""
    paragraph = element.find(_TAG["pPr"])
    role, level = _role_of(name, element.get(_TAG["styleId"]) or "")
    level = level or outline_level(paragraph)
    if level and not role:
        role = "heading"
    if not role:
        role, level = parent.role, parent.level
    return Style(
        role,
        level,
        indent_of(paragraph, parent.indent),
        typed(element.find(_TAG["rPr"]), parent.type, found),
        parent.numbered if paragraph is None else first_of(paragraph.find(f"{W}numPr"), parent.numbered),
    )


def first_of(own: Element | None, inherited: Element | None) -> Element | None:
    """A property of its own, or the one inherited."""
    return inherited if own is None else own


def _role_of(name: str, key: str) -> tuple[Role, int]:
    for word in (name, key):
        if match := _HEADING.fullmatch(word.strip(), timeout=1.0):
            return "heading", int(match[1] or match[2]) or 1
        for role, pattern in _ROLES.items():
            if pattern.fullmatch(word.strip(), timeout=1.0):
                return role, 0
    return "", 0
