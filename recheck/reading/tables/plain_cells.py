"""The cells that most tables are made of, read at once: `12.3`, `12.3 (4.5)`, `12.3 ± 4.5`, `12 (34%)`, `1.4 [1.1, 1.8]`."""

from __future__ import annotations

from decimal import Decimal
from functools import cache

import regex

from recheck.model import Printed
from recheck.reading.tables.cell_text import Piece
from recheck.reading.tables.slots import Slot
from recheck.reading.views import TIMEOUT, View


@cache
def _plain() -> regex.Pattern[str]:
    number = r"(?:\d{1,6}(?:\.\d{1,6})?|\.\d{1,6})"
    second = rf"(?P<low>-?{number})(?P<share>%)?(?:(?: ?- ?(?=[\d.])| to |[,;] )(?P<high>-?{number}))?"
    return regex.compile(
        rf"(?P<first>-?{number})(?: ?(?:(?P<open>\()(?:{second})\)|(?P<open>\[)(?:{second})\]|± ?(?P<spread>{number})))?(?P<stars>\*{{0,4}})"
    )


def plain_piece(slot: Slot, comma: bool) -> Piece | None:
    """The one value of such a cell; None for every other cell, and where a comma may be a decimal sign."""
    view = slot.view
    match = None if comma else _plain().fullmatch(view.text, timeout=TIMEOUT)
    if match is None:
        return None
    first = _number(view, *match.span("first"))
    text = view.printed_text(0, len(view.text))
    made = (match["stars"], text, "", 0, len(view.text))
    if match["spread"] is not None:
        return Piece("pair±", (first, _number(view, *match.span("spread"))), *made)
    if match["low"] is None:
        return Piece("number", (first,), *made)
    return _in_brackets(match, view, first, made)


_Made = tuple[str, str, str, int, int]


def _in_brackets(match: regex.Match[str], view: View, first: Printed, made: _Made) -> Piece | None:
    percent = match["share"] is not None
    low = _number(view, *match.span("low"), percent=percent)
    if match["high"] is not None:
        # A share in an interval, and shares of numbers with thousands, are for the longer way.
        return None if percent else Piece("triple", (first, low, _number(view, *match.span("high"))), *made)
    if percent:
        return Piece("count%", (first, low), *made) if first.decimals == 0 else None
    return Piece(f"pair{match['open']}", (first, low), *made)


def _number(view: View, start: int, end: int, *, percent: bool = False) -> Printed:
    digits = view.text[start:end]
    page, box = view.box(start, end)
    return Printed(
        view.printed_text(start, end), Decimal(digits), len(digits.partition(".")[2]), "=", percent, page, box
    )
