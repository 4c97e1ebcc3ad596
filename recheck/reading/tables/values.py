"""What one cell of a table prints, in one piece or in several."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from functools import cache

import regex

from recheck.reading.context import mostly_commas
from recheck.reading.tables.cell_text import LineReader, Piece
from recheck.reading.tables.plain_cells import plain_piece
from recheck.reading.tables.slots import Slot
from recheck.reading.tokens import DIGITS

__all__ = ["Piece", "decimal_comma_of", "pieces"]


def decimal_comma_of(texts: Iterable[str], *, default: bool) -> bool:
    """Whether cells write their decimals with a comma: as most of them do, else as the document does."""
    return mostly_commas(texts, _decimals(), default=default)


@cache
def _decimals() -> regex.Pattern[str]:
    return regex.compile(
        r"(?<![\d.,])(?:(?P<comma>0,\d+|\d{1,6},(?:\d{1,2}|\d{4,}))|(?P<point>\d*[.·]\d+))(?![.,·]?\d)"
    )


def pieces(slot: Slot, comma: bool) -> tuple[Piece, ...]:
    """The values of a cell in reading order; one that says why there is none where nothing is read.

    `comma` tells that decimals are written with a comma.
    """
    plain = plain_piece(slot, comma)
    if plain is not None:
        return (plain,)
    if len(slot.view.text) > _LONGEST:
        return (
            Piece(
                "unread" if not DIGITS.isdisjoint(slot.view.text) else "words",
                text=slot.view.text,
                end=len(slot.view.text),
            ),
        )
    found: list[Piece] = []
    for start, end in _lines(slot):
        found += LineReader(slot, start, end, comma).pieces()
    return tuple(found)


_LONGEST = 400
"""Characters of a cell; longer ones are prose."""


def _lines(slot: Slot) -> Iterator[tuple[int, int]]:
    """Start and end in the view of each line of the cell."""
    view = slot.view
    raw = view.passage.text
    if "\n" not in raw:
        yield 0, len(view.text)
        return
    start = 0
    for at in range(len(view.text)):
        if raw[view.at[at]] == "\n" and not _goes_on(view.text[start:at], view.text[at:]):
            yield start, at
            start = at + 1
    yield start, len(view.text)


def _goes_on(before: str, after: str) -> bool:
    """Whether a line's end falls within a value: `11.2` over `(1.3)`."""
    return after.lstrip().startswith(("(", "[", "±")) or before.rstrip().endswith(("±", "(", "[", ",", " to"))
