"""Glyphs from pdfminer.six, by a device of our own: no layout analysis, no reading order."""

from __future__ import annotations

import io
import logging
import unicodedata
from collections.abc import Collection
from typing import Any

import numpy as np
from pdfminer.pdfdevice import PDFTextDevice
from pdfminer.pdfdocument import PDFDocument, PDFPasswordIncorrect
from pdfminer.pdffont import PDFUnicodeNotDefined
from pdfminer.pdfinterp import PDFPageInterpreter, PDFResourceManager
from pdfminer.pdfpage import PDFPage
from pdfminer.pdfparser import PDFParser
from pdfminer.utils import apply_matrix_pt

from recheck.documents.pdf.glyphs import UNKNOWN, Engine, Glyphs, Unopened, as_glyphs, style_of, turn_of
from recheck.documents.pdf.rules import MOST_PATHS, MOST_SEGMENTS, Point, sides

# Warnings about colours and fonts of a page would land on the user's terminal.
logging.getLogger("pdfminer").setLevel(logging.CRITICAL)

_SYMBOL = dict(
    zip(
        "abcdefghijklmnopqrstuvwxyzABCDEFGHIKLMNOPQRSTUWXYZ@-~",
        "αβχδεφγηιϕκλμνοπθρστυϖωξψζΑΒΧΔΕΦΓΗΙΚΛΜΝΟΠΘΡΣΤΥΩΞΨΖ≅−∼",
        strict=True,
    )
)
_SYMBOL |= dict(zip("¢£¥±³´¶¹º»Öå×", "′≤∞±≥×∂≠≡≈√∑⋅", strict=True))
"""The built-in encoding of the font Symbol (ISO 32000-1, annex D.5), which the library does not know:
its code written in Latin-1, and the character shown. Digits and brackets stand where they do in ASCII."""


def read(data: bytes, pages: Collection[int] | None = None) -> Engine:
    """Read the glyphs of all pages, or of those asked for (from 1); raises `Unopened`."""
    try:
        document = PDFDocument(PDFParser(io.BytesIO(data)), password="")
        listed = list(PDFPage.create_pages(document))
    except PDFPasswordIncorrect:
        raise Unopened(locked=True) from None
    except Exception as error:  # a damaged file fails anywhere in the library
        raise Unopened(locked=False) from error
    device = _Device()
    interpreter = PDFPageInterpreter(device.rsrcmgr, device)
    found, failed = [], []
    for number, page in enumerate(listed, start=1):
        if pages is not None and number not in pages:
            continue
        device.open(number, page)
        try:
            interpreter.process_page(page)
        except Exception:  # one damaged page does not lose the others
            failed.append(number)
        found.append(device.glyphs())
    return Engine(len(listed), _title(document), found, tuple(failed))


def _title(document: PDFDocument) -> str:
    raw = document.info[0].get("Title", b"") if document.info else b""
    if not isinstance(raw, bytes):
        return ""
    if raw.startswith((b"\xfe\xff", b"\xff\xfe")):
        return raw.decode("utf-16", "replace")
    return raw.decode("utf-8" if raw.startswith(b"\xef\xbb\xbf") else "latin-1", "replace").lstrip("\ufeff")


class _Device(PDFTextDevice):
    """Collects characters as they are shown, and lines and boxes; forms inside the page are followed."""

    def __init__(self) -> None:
        super().__init__(PDFResourceManager())
        self._styles: dict[str, int] = {}
        self._outer: list[Any] = []
        self._rows: list[tuple[float, ...]] = []
        self._drawn: list[tuple[float, ...]] = []
        self._paths = 0
        self._number, self._crop = 0, (0.0, 0.0, 0.0, 0.0)

    def open(self, number: int, page: PDFPage) -> None:
        """Begin a page: what follows is collected for it."""
        self._number, self._rows, self._outer = number, [], []
        self._drawn, self._paths = [], 0

    def begin_page(self, page: PDFPage, ctm: Any) -> None:
        x0, y0, x1, y1 = page.mediabox
        cut = page.cropbox or page.mediabox
        inner = (
            max(x0, min(cut[0], cut[2])),
            max(y0, min(cut[1], cut[3])),
            min(x1, max(cut[0], cut[2])),
            min(y1, max(cut[1], cut[3])),
        )
        if inner[0] >= inner[2] or inner[1] >= inner[3]:
            inner = (x0, y0, x1, y1)
        (ax, ay), (bx, by) = apply_matrix_pt(ctm, inner[:2]), apply_matrix_pt(ctm, inner[2:])
        self._crop = (min(ax, bx), min(ay, by), max(ax, bx), max(ay, by))

    def begin_figure(self, name: str, bbox: Any, matrix: Any) -> None:
        self._outer.append((self.ctm, self._paths, len(self._drawn)))
        self._paths = 0

    def end_figure(self, name: str) -> None:
        ctm, paths, drawn = self._outer.pop()
        if self._paths > MOST_PATHS:
            del self._drawn[drawn:]
        self._paths = paths
        self.set_ctm(ctm)

    def paint_path(self, graphicstate: Any, stroke: bool, fill: bool, evenodd: bool, path: Any) -> None:
        self._paths += 1
        if len(path) > MOST_SEGMENTS:
            return
        matrix: Any = self.ctm
        x0, y1 = self._crop[0], self._crop[3]
        line: list[Point] = []
        for kind, *points in (*path, ("m",)):
            if kind == "h" and line:
                line.append(line[0])
            elif kind in "cvy":
                return
            elif kind == "m":
                self._drawn += sides(line, stroked=stroke, filled=fill)
                line = []
            if points:
                x, y = apply_matrix_pt(matrix, points[-2:])
                line.append((x - x0, y1 - y))

    def render_char(
        self,
        matrix: Any,
        font: Any,
        fontsize: float,
        scaling: float,
        rise: float,
        cid: int,
        ncs: Any,
        graphicstate: Any,
    ) -> float:
        text = _character(font, cid)
        advance = _width(font, cid, text) * fontsize * scaling
        a, b, c, d, _, _ = matrix
        if font.is_vertical():
            left, low, right, high = -fontsize / 2, -fontsize, fontsize / 2, 0.0
        else:
            low = font.get_descent() * fontsize + rise
            left, right, high = 0.0, advance, low + fontsize
        corners = [
            apply_matrix_pt(matrix, corner)
            for corner in ((left, low), (left, high), (right, low), (right, high))
        ]
        x, y = apply_matrix_pt(matrix, (0.0, rise))
        x0, y1 = self._crop[0], self._crop[3]
        xs, ys = [corner[0] - x0 for corner in corners], [y1 - corner[1] for corner in corners]
        size = abs(fontsize) * float(np.hypot(c, d))
        sign = -1 if fontsize * scaling < 0 else 1
        facts = (
            min(xs), min(ys), max(xs), max(ys), x - x0, y1 - y, size,
            self._style(font), turn_of(sign * a, -sign * b),
        )  # fmt: skip
        for piece, char in enumerate(_expanded(text)):
            self._rows.append((ord(char), *facts, piece > 0))
        return advance

    def _style(self, font: Any) -> int:
        name = str(getattr(font, "fontname", ""))
        if name not in self._styles:
            self._styles[name] = style_of(name)
        return self._styles[name]

    def glyphs(self) -> Glyphs:
        """What was collected since `open`."""
        x0, y0, x1, y1 = self._crop
        return as_glyphs(self._number, x1 - x0, y1 - y0, self._rows, self._drawn)


def _character(font: Any, cid: int) -> str:
    name = str(getattr(font, "fontname", "")).split("+")[-1]
    if name.startswith("Symbol") and font.unicode_map is None and cid < 256:
        return _SYMBOL.get(chr(cid), chr(cid))
    try:
        return str(font.to_unichr(cid))
    except PDFUnicodeNotDefined:
        return chr(cid) if 0 < cid < 0xD800 else UNKNOWN


def _width(font: Any, cid: int, text: str) -> float:
    known = font.widths.get(cid, font.widths.get(text))
    return float(known * font.hscale if isinstance(known, (int, float)) else font.char_width(cid))


def _expanded(text: str) -> str:
    """Ligatures as the characters that they join, as the other engine gives them; nothing else."""
    return "".join(unicodedata.normalize("NFKC", c) if "\ufb00" <= c <= "\ufb06" else c for c in text)
