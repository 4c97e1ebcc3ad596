"""Glyphs from pypdfium2: as few calls for a character as can be, the rest once a run."""

from __future__ import annotations

import ctypes
from collections import deque
from collections.abc import Collection
from itertools import repeat
from typing import Any

import numpy as np
import pypdfium2
import pypdfium2.raw as raw
from numpy.typing import NDArray

from recheck.documents.pdf.drawings import addressed, boxes_drawn
from recheck.documents.pdf.glyphs import UNKNOWN, Engine, Glyphs, Unopened, as_glyphs, style_of, turn_of

_HYPHEN_MARK = 0xFFFE
_POINTER, _INT = ctypes.c_void_p, ctypes.c_int


_loose_box = addressed(raw.FPDFText_GetLooseCharBox, _INT, _POINTER, _INT, _POINTER)
_text_object = addressed(raw.FPDFText_GetTextObject, ctypes.c_size_t, _POINTER, _INT)
_matrix = addressed(raw.FPDFText_GetMatrix, _INT, _POINTER, _INT, _POINTER)
_origin = addressed(raw.FPDFText_GetCharOrigin, _INT, _POINTER, _INT, _POINTER, _POINTER)
_font_size = addressed(raw.FPDFText_GetFontSize, ctypes.c_double, _POINTER, _INT)
_font = addressed(raw.FPDFTextObj_GetFont, ctypes.c_size_t, _POINTER)
_unicode = addressed(raw.FPDFText_GetUnicode, ctypes.c_uint, _POINTER, _INT)


def read(data: bytes, pages: Collection[int] | None = None) -> Engine:
    """Read the glyphs of all pages, or of those asked for (from 1); raises `Unopened`."""
    document = _opened(data)
    try:
        count = len(document)
        asked = [at for at in range(count) if pages is None or at + 1 in pages]
        found = [_page(document.raw, at) for at in asked]
        title = document.get_metadata_value("Title") or ""
        failed = tuple(at + 1 for at, glyphs in zip(asked, found, strict=True) if not glyphs.width)
        return Engine(count, title, found, failed)
    finally:
        document.close()


def _opened(data: bytes) -> Any:
    try:
        return pypdfium2.PdfDocument(data)
    except pypdfium2.PdfiumError as error:
        code = getattr(error, "err_code", None)
        raise Unopened(locked=code == raw.FPDF_ERR_PASSWORD or "password" in str(error).lower()) from None


def _page(document: Any, index: int) -> Glyphs:
    page = raw.FPDF_LoadPage(document, index)
    if not page:
        return as_glyphs(index + 1, 0.0, 0.0, ())
    try:
        text = raw.FPDFText_LoadPage(page)
        if not text:
            return as_glyphs(index + 1, 0.0, 0.0, ())
        try:
            return _glyphs(index + 1, page, text)
        finally:
            raw.FPDFText_ClosePage(text)
    finally:
        raw.FPDF_ClosePage(page)


def _glyphs(number: int, page: Any, text: Any) -> Glyphs:
    count = max(raw.FPDFText_CountChars(text), 0)
    address = ctypes.cast(text, ctypes.c_void_p).value
    boxes = np.zeros((count, 4), np.float32)
    start = boxes.ctypes.data
    deque(map(_loose_box, repeat(address), range(count), range(start, start + 16 * count, 16)), maxlen=0)
    objects = np.fromiter(map(_text_object, repeat(address), range(count)), np.uint64, count)
    codes, second = _codes(text, address, count)
    # The engine's own spaces and line ends have no width; ours are decided later.
    blank = (codes == 32) | (codes == 10) | (codes == 13)
    kept = np.flatnonzero((objects != 0) & ~second & ~(blank & (boxes[:, 2] - boxes[:, 0] <= 0.01)))
    return _placed(number, page, text, kept, codes[kept], boxes[kept], objects[kept])


def _codes(text: Any, address: int | None, count: int) -> tuple[NDArray[np.uint32], NDArray[np.bool_]]:
    """Code points of the characters, and which of them only complete a surrogate pair."""
    buffer = np.zeros(count + 1, np.uint16)
    got = raw.FPDFText_GetText(text, 0, count, buffer.ctypes.data_as(ctypes.POINTER(ctypes.c_ushort)))
    if got == count + 1:
        codes = buffer[:count].astype(np.uint32)
    else:
        # Characters without a code are left out of the bulk text: then its places do not match.
        codes = np.fromiter(map(_unicode, repeat(address), range(count)), np.uint32, count)
        for at in np.flatnonzero(codes == 2).tolist():
            if raw.FPDFText_IsHyphen(text, at) == 1:
                codes[at] = _HYPHEN_MARK
    codes[codes == _HYPHEN_MARK] = ord("-")
    codes[codes == 0] = ord(UNKNOWN)
    second = np.zeros(count, dtype=bool)
    high = (codes >= 0xD800) & (codes < 0xDC00)
    if high.any():
        pairs = np.flatnonzero(high[:-1] & (codes[1:] >= 0xDC00) & (codes[1:] < 0xE000))
        codes[pairs] = 0x10000 + ((codes[pairs] - 0xD800) << 10) + (codes[pairs + 1] - 0xDC00)
        second[pairs + 1] = True
    return codes, second


def _placed(
    number: int, page: Any, text: Any, kept: NDArray[np.intp], codes: NDArray[np.uint32],
    boxes: NDArray[np.float32], objects: NDArray[np.uint64],
) -> Glyphs:  # fmt: skip
    """Ask each run (a text object) for what its characters share; turn page space into the page as shown."""
    matrix, width, height = _view(page)
    if not len(kept):
        return as_glyphs(number, width, height, ())
    changes = np.concatenate(([True], objects[1:] != objects[:-1]))
    runs = np.cumsum(changes) - 1
    size, style, dx, dy, base = _run_facts(text, kept[changes].tolist(), objects[changes].tolist())
    corners = boxes[:, [0, 3, 2, 1]].astype(np.float64)
    origins = np.column_stack((corners[:, 0], base[runs]))
    for at in np.flatnonzero(((dx <= 0) | (dy != 0))[runs]).tolist():
        corners[at], origins[at] = _turned(text, int(kept[at]), corners[at])
    along = np.column_stack((dx, dy)) @ matrix[:2]
    turns = np.array([turn_of(x, y) for x, y in along.tolist()], np.int8)
    pieces = np.zeros(len(kept), dtype=bool)
    pieces[1:] = (boxes[1:] == boxes[:-1]).all(axis=1) & ~changes[1:]
    drawn = np.array(boxes_drawn(page), np.float64).reshape(-1, 5)
    drawn[:, :4] = _shown(drawn[:, :4], matrix)
    return Glyphs(
        number, width, height, codes, _shown(corners, matrix), (_with_one(origins) @ matrix).astype(np.float32),
        size[runs].astype(np.float32), style[runs].astype(np.uint8), turns[runs], pieces, drawn.astype(np.float32),
    )  # fmt: skip


def _run_facts(text: Any, firsts: list[int], objects: list[int]) -> tuple[NDArray[np.float64], ...]:
    """Size, style, direction and base line of each run, asked of its first character."""
    address, count = ctypes.cast(text, ctypes.c_void_p).value, len(firsts)
    matrices = np.zeros((count, 6), np.float32)
    points = np.zeros((count, 2), np.float64)
    start, point = matrices.ctypes.data, points.ctypes.data
    deque(map(_matrix, repeat(address), firsts, range(start, start + 24 * count, 24)), maxlen=0)
    ends = range(point, point + 16 * count, 16), range(point + 8, point + 8 + 16 * count, 16)
    deque(map(_origin, repeat(address), firsts, *ends), maxlen=0)
    sizes = np.fromiter(map(_font_size, repeat(address), firsts), np.float64, count)
    styles: dict[int, int] = {}
    style = np.zeros(count)
    for run, (first, font) in enumerate(zip(firsts, map(_font, objects), strict=True)):
        if font not in styles:
            styles[font] = _style(text, first)
        style[run] = styles[font]
    a, b, c, d = matrices[:, :4].astype(np.float64).T
    # Slightly slanted scans count as level: their loose boxes are still right.
    level = np.abs(b) < 0.02 * np.abs(a)
    return sizes * np.hypot(c, d), style, a, np.where(level, 0.0, b), points[:, 1]


def _style(text: Any, at: int) -> int:
    name, flags = ctypes.create_string_buffer(200), ctypes.c_int()
    length = raw.FPDFText_GetFontInfo(text, at, name, len(name), flags)
    return style_of(name.raw[: max(min(length, len(name)) - 1, 0)].decode("utf-8", "replace"))


def _turned(
    text: Any, at: int, loose: NDArray[np.float64]
) -> tuple[NDArray[np.float64], tuple[float, float]]:
    """Box and origin of a character whose line is not level: older engines give it a flat loose box."""
    left, right, bottom, top = (ctypes.c_double() for _ in range(4))
    if abs(loose[2] - loose[0]) < 0.1 or abs(loose[3] - loose[1]) < 0.1:
        raw.FPDFText_GetCharBox(text, at, left, right, bottom, top)
        loose = np.array((left.value, bottom.value, right.value, top.value))
    raw.FPDFText_GetCharOrigin(text, at, left, right)
    return loose, (left.value, right.value)


def _view(page: Any) -> tuple[NDArray[np.float64], float, float]:
    """The matrix (3, 2) from page space to the page as shown, crop box and rotation included."""
    width, height = float(raw.FPDF_GetPageWidthF(page)), float(raw.FPDF_GetPageHeightF(page))
    x, y = ctypes.c_double(), ctypes.c_double()
    corners = []
    for across, down in ((0, 0), (1000, 0), (0, 1000)):
        raw.FPDF_DeviceToPage(page, 0, 0, 1000, 1000, 0, across, down, x, y)
        corners.append((x.value, y.value, 1.0))
    shown = np.array([(0.0, 0.0), (width, 0.0), (0.0, height)])
    return np.linalg.solve(np.array(corners), shown), width, height


def _with_one(points: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.column_stack((points, np.ones(len(points))))


def _shown(corners: NDArray[np.float64], matrix: NDArray[np.float64]) -> NDArray[np.float32]:
    one, other = _with_one(corners[:, :2]) @ matrix, _with_one(corners[:, 2:]) @ matrix
    return np.column_stack((np.minimum(one, other), np.maximum(one, other))).astype(np.float32)
