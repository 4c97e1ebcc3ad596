"""Cells such as `12/40` whose column does not say that they are counts of a total."""

from __future__ import annotations

import regex

from recheck.model import EFFECTS_OF_COUNTS, Printed
from recheck.reading.tables.frame import Frame
from recheck.reading.tables.values import Piece
from recheck.reading.views import TIMEOUT

_SAID = regex.compile(r"\bn ?/ ?N\b|\b(?:no\.?|events?|number) ?/ ?(?:total|no\.|number|N)", regex.IGNORECASE)
SMALLEST = 5
"""A total up to here may be part of a fraction, a date or a score."""


def bare_share(frame: Frame, row: int, column: int, piece: Piece) -> tuple[dict[str, Printed], bool] | None:
    """Count and total of a cell beside another such cell in its row, and whether the table says that they are.

    Where nothing says so, a ratio or a difference of risks in the table has to.
    """
    if not _fraction(piece):
        return None
    others = [p for c in frame.sheet.columns if c != column and (p := frame.piece(row, c)) and _fraction(p)]
    said = frame.once("fractions are said", _said)
    if not others or not (said or frame.once("risks are compared", _compares_risks)):
        return None
    count, total = piece.numbers
    return {"count": count, "total": total}, said


def _fraction(piece: Piece) -> bool:
    if piece.shape != "fraction" or len(piece.numbers) != 2:
        return False
    count, total = piece.numbers
    plain = not any(number.decimals > 0 or number.percent for number in piece.numbers)
    return plain and 0 <= count.value <= total.value > SMALLEST


def _said(frame: Frame) -> bool:
    sheet = frame.sheet
    heads = [sheet.column_header(column).text for column in sheet.columns]
    texts = (frame.legend.text, *heads, *(sheet.row_header(row).text for row in sheet.rows))
    return any(_SAID.search(text, timeout=TIMEOUT) for text in texts)


def _compares_risks(frame: Frame) -> bool:
    return any(EFFECTS_OF_COUNTS & set(role.quantities) for role in frame.roles.values())
