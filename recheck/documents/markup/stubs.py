"""How far the names of rows are moved in."""

from __future__ import annotations

import re

from lxml import etree

_EM = {
    "\u00a0": 25, "\u2000": 50, "\u2001": 100, "\u2002": 50, "\u2003": 100, "\u2004": 33, "\u2005": 25, "\u2006": 17,
    "\u2007": 50, "\u2008": 25, "\u2009": 20, "\u200a": 10, "\u202f": 20, "\u3000": 100,
}  # fmt: skip
"""Widths of hard spaces in hundredths of an em."""

LEAST_STEP = 19
"""Hundredths of an em by which rows of different depth differ more: a single hard space is a quarter of an em."""

_PADDING = re.compile(
    r"(?:padding-left|text-indent|margin-left)\s*:\s*(\d{1,3}(?:\.\d{1,3})?|\.\d{1,3})\s*(em|rem|px|pt|ch|%)?",
    re.IGNORECASE,
)
_UNITS = {"em": 100.0, "rem": 100.0, "ch": 50.0, "px": 6.25, "pt": 8.33, "%": 50.0, "": 6.25}
_INDENTED = re.compile(r"(?:^|[\s_-])indent(?:ed|level)?[\s_-]?(\d{0,2})", re.IGNORECASE)


def moved_in(cell: etree._Element, text: str) -> int:
    """How far the text of a cell is moved in, in hundredths of an em.

    What counts are hard spaces at its start, padding, and a class that says so.
    """
    width = _leading(text) if text[:1].isspace() else 0
    style = cell.get("style")
    if style is not None and (match := _PADDING.search(style)):
        width += round(float(match[1]) * _UNITS[(match[2] or "").lower()])
    names = cell.get("class")
    if names is not None and (match := _INDENTED.search(names)):
        width += 100 * int(match[1] or 1)
    return width


def _leading(text: str) -> int:
    """The width of the spaces on the line on which a text begins; plain ones count where there are two."""
    blank = text[: len(text) - len(text.lstrip())]
    wrapped = "\n" in blank
    blank = blank[blank.rfind("\n") + 1 :]
    if wrapped:
        blank = blank.lstrip(" \t")
    plain = blank.count(" ")
    return sum(_EM.get(char, 0) for char in blank) + (25 * plain if plain > 1 or plain < len(blank) else 0)
