"""A table drawn on a page, with the rules that journals use."""

from __future__ import annotations

import regex
from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.pdfgen.canvas import Canvas

from tests.documents.pdf.making import PROSE, ROMAN, line, pdf, wrapped
from tests.reading.tables.cases import Spot, TableCase

_PIECE = regex.compile(r"\^\{(?P<up>[^}]*)\}|_\{(?P<down>[^}]*)\}|(?P<text>(?:(?!\^\{|_\{).)+)")
SIZE, LEADING, GAP, LEFT = 8.5, 12.0, 14.0, 60.0


def pdf_file(case: TableCase) -> bytes:
    """One page: running text, the caption, the table between three rules, the notes, running text."""
    return pdf(lambda canvas: _page(canvas, case))


def _page(canvas: Canvas, case: TableCase) -> None:
    y = wrapped(canvas, LEFT, 70, 475, PROSE) + 20
    y = wrapped(canvas, LEFT, y, 475, case.caption, size=9)
    y = _grid(canvas, case, y + 2)
    for note in case.notes:
        y = wrapped(canvas, LEFT, y, 475, _flat(note), size=8, leading=10)
    wrapped(canvas, LEFT, y + 30, 475, PROSE)


def _grid(canvas: Canvas, case: TableCase, y: float) -> float:
    widths = _widths(case)
    starts = [LEFT + sum(widths[:column]) + GAP * column for column in range(case.columns)]
    right = starts[-1] + widths[-1]
    assert right < 560, (case.name, right)
    _rule(canvas, LEFT, right, y)
    for row in range(case.rows):
        y += LEADING
        for spot in (spot for spot in case.spots if spot.row == row and spot.text):
            _spot(canvas, spot, starts, widths, y)
        if row == case.head - 1:
            _rule(canvas, LEFT, right, y + 4)
            y += 4
    _rule(canvas, LEFT, right, y + 4)
    return y + 18


def _spot(canvas: Canvas, spot: Spot, starts: list[float], widths: list[float], y: float) -> None:
    """Stubs stand left; all else is centred over what it spans, with a rule below a spanning head."""
    last = spot.column + spot.columns - 1
    left, right = starts[spot.column], starts[last] + widths[last]
    width = _width(spot.text)
    x = left + 8 * spot.indent if spot.column == 0 else (left + right - width) / 2
    if spot.columns > 1 and spot.column:
        _rule(canvas, left, right, y + 3)
    for what, text in _parts(spot.text):
        small = what != "text"
        size = SIZE * 0.7 if small else SIZE
        rise = {"up": -3.0, "down": 1.5}.get(what, 0.0)
        line(canvas, x, y + rise, text, size=size)
        x += stringWidth(text, ROMAN, size)


def _widths(case: TableCase) -> list[float]:
    widths = [8.0] * case.columns
    for spot in case.spots:
        if spot.columns == 1:
            widths[spot.column] = max(widths[spot.column], _width(spot.text) + 8 * spot.indent)
    for spot in case.spots:
        span = range(spot.column, spot.column + spot.columns)
        lack = _width(spot.text) - sum(widths[c] for c in span) - GAP * (spot.columns - 1)
        for column in span if lack > 0 and spot.columns > 1 else ():
            widths[column] += lack / spot.columns
    return widths


def _width(text: str) -> float:
    return sum(
        stringWidth(part, ROMAN, SIZE if what == "text" else SIZE * 0.7) for what, part in _parts(text)
    )


def _parts(text: str) -> list[tuple[str, str]]:
    return [(match.lastgroup or "", match[match.lastgroup or 0]) for match in _PIECE.finditer(text)]


def _flat(text: str) -> str:
    return "".join(part for _, part in _parts(text))


def _rule(canvas: Canvas, left: float, right: float, y: float) -> None:
    height = canvas._pagesize[1]
    canvas.setLineWidth(0.5)
    canvas.line(left, height - y, right, height - y)
