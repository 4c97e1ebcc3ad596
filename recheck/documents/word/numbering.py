"""Words that Word itself puts before a numbered paragraph: "Table 2." or "Experiment 1:"."""

from __future__ import annotations

from collections import Counter

import regex

from recheck.documents.word.package import Element, W
from recheck.documents.word.styles import VAL, number_of

_WORDED = regex.compile(r"\p{L}{3,}")
_PLACE = regex.compile(r"%([1-9])")
_ROMAN = (("x", 10), ("ix", 9), ("v", 5), ("iv", 4), ("i", 1))


class Numbers:
    """Counts the paragraphs of the lists whose numbers stand with words; others are not told."""

    def __init__(self, root: Element | None) -> None:
        self._levels = _levels(root)
        self._counts: Counter[tuple[str, int]] = Counter()

    def before(self, properties: Element | None) -> str:
        """What is printed before the text of a paragraph with such `w:numPr`; empty for all other paragraphs."""
        if properties is None or not self._levels:
            return ""
        number, level = properties.find(f"{W}numId"), properties.find(f"{W}ilvl")
        key = (
            "" if number is None else number.get(VAL) or "",
            0 if level is None else number_of(level.get(VAL)),
        )
        known = self._levels.get(key)
        if known is None:
            return ""
        text, own, start, form = known
        self._counts[own] += 1
        return _PLACE.sub(lambda match: _written(start - 1 + self._counts[own], form), text).strip() + " "


_Level = tuple[str, tuple[str, int], int, str]


def _levels(root: Element | None) -> dict[tuple[str, int], _Level]:
    """By list and level: the text, what is counted, the first number, how it is written."""
    if root is None:
        return {}
    abstract = {element.get(f"{W}abstractNumId"): element for element in root.findall(f"{W}abstractNum")}
    found: dict[tuple[str, int], _Level] = {}
    for number in root.findall(f"{W}num"):
        link = number.find(f"{W}abstractNumId")
        basis = abstract.get("" if link is None else link.get(VAL))
        for level in () if basis is None else basis.findall(f"{W}lvl"):
            depth = number_of(level.get(f"{W}ilvl"))
            text = _said(level, "lvlText", "")
            if _WORDED.search(text) and len(_PLACE.findall(text)) == 1:
                start = number_of(_said(level, "start", "1"))
                own = (_said(number, "abstractNumId", ""), depth)
                found[number.get(f"{W}numId") or "", depth] = (
                    text,
                    own,
                    start,
                    _said(level, "numFmt", "decimal"),
                )
    return found


def _said(element: Element, name: str, default: str) -> str:
    found = element.find(W + name)
    return default if found is None else found.get(VAL) or default


def _written(number: int, form: str) -> str:
    if form in ("upperLetter", "lowerLetter") and 1 <= number <= 26:
        letter = chr(ord("a") + number - 1)
        return letter.upper() if form == "upperLetter" else letter
    if form in ("upperRoman", "lowerRoman") and 1 <= number < 40:
        text, rest = "", number
        for sign, value in _ROMAN:
            text += sign * (rest // value)
            rest %= value
        return text.upper() if form == "upperRoman" else text
    return str(number)
