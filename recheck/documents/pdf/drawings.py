"""Lines and boxes that pdfium finds drawn on a page."""

from __future__ import annotations

import ctypes
from collections.abc import Callable, Iterable, Iterator
from typing import Any

import pypdfium2.raw as raw

from recheck.documents.pdf.rules import MOST_PATHS, MOST_SEGMENTS, Point, sides

_POINTER, _INT = ctypes.c_void_p, ctypes.c_int
_MOST_OBJECTS = 20_000
_DEEPEST = 4


def addressed(function: Any, result: Any, *arguments: Any) -> Callable[..., Any]:
    """The same function of the library, called by addresses: half the cost of a call with pointers."""
    address = ctypes.cast(function, ctypes.c_void_p).value or 0
    return ctypes.PYFUNCTYPE(result, *arguments)(address)


_count = addressed(raw.FPDFPage_CountObjects, _INT, _POINTER)
_object = addressed(raw.FPDFPage_GetObject, ctypes.c_size_t, _POINTER, _INT)
_type = addressed(raw.FPDFPageObj_GetType, _INT, _POINTER)
_form_count = addressed(raw.FPDFFormObj_CountObjects, _INT, _POINTER)
_form_object = addressed(raw.FPDFFormObj_GetObject, ctypes.c_size_t, _POINTER, ctypes.c_ulong)
_object_matrix = addressed(raw.FPDFPageObj_GetMatrix, _INT, _POINTER, _POINTER)
_draw_mode = addressed(raw.FPDFPath_GetDrawMode, _INT, _POINTER, _POINTER, _POINTER)
_segment_count = addressed(raw.FPDFPath_CountSegments, _INT, _POINTER)
_segment = addressed(raw.FPDFPath_GetPathSegment, ctypes.c_size_t, _POINTER, _INT)
_segment_type = addressed(raw.FPDFPathSegment_GetType, _INT, _POINTER)
_segment_point = addressed(raw.FPDFPathSegment_GetPoint, _INT, _POINTER, _POINTER, _POINTER)
_segment_close = addressed(raw.FPDFPathSegment_GetClose, _INT, _POINTER)

_Matrix = tuple[float, float, float, float, float, float]
_PLAIN: _Matrix = (1.0, 0.0, 0.0, 1.0, 0.0, 0.0)


def boxes_drawn(page: Any) -> list[tuple[float, ...]]:
    """Level and upright lines and boxes in page space: two corners each, and 1 if filled."""
    address = ctypes.cast(page, ctypes.c_void_p).value
    objects = (_object(address, at) for at in range(min(_count(address), _MOST_OBJECTS)))
    return list(_drawn(objects, _PLAIN, 0))


def _drawn(objects: Iterable[int], outer: _Matrix, depth: int) -> Iterator[tuple[float, ...]]:
    for item in objects:
        kind = _type(item)
        if kind == raw.FPDF_PAGEOBJ_PATH:
            yield from _path(item, outer)
        elif kind == raw.FPDF_PAGEOBJ_FORM and depth < _DEEPEST:
            inner = [_form_object(item, at) for at in range(min(_form_count(item), _MOST_OBJECTS))]
            if sum(_type(one) == raw.FPDF_PAGEOBJ_PATH for one in inner) <= MOST_PATHS:
                yield from _drawn(inner, _times(_matrix_of(item), outer), depth + 1)


def _path(item: int, outer: _Matrix) -> Iterator[tuple[float, ...]]:
    count = _segment_count(item)
    if not 2 <= count <= MOST_SEGMENTS:
        return
    fill, stroke = _INT(), _INT()
    _draw_mode(item, ctypes.addressof(fill), ctypes.addressof(stroke))
    stroked, filled = bool(stroke.value), bool(fill.value)
    for corners in _lines(item, count, _times(_matrix_of(item), outer)):
        yield from sides(corners, stroked=stroked, filled=filled)


def _lines(item: int, count: int, matrix: _Matrix) -> Iterator[list[Point]]:
    """The points of each line of a path, up to its first curve: rules and bands have none."""
    x, y = ctypes.c_float(), ctypes.c_float()
    at_x, at_y = ctypes.addressof(x), ctypes.addressof(y)
    a, b, c, d, e, f = matrix
    line: list[Point] = []
    for at in range(count):
        segment = _segment(item, at)
        kind = _segment_type(segment)
        if kind == raw.FPDF_SEGMENT_BEZIERTO:
            return
        if kind == raw.FPDF_SEGMENT_MOVETO:
            yield line
            line = []
        _segment_point(segment, at_x, at_y)
        line.append((a * x.value + c * y.value + e, b * x.value + d * y.value + f))
        if _segment_close(segment):
            yield [*line, line[0]]
            line = []
    yield line


def _matrix_of(item: int) -> _Matrix:
    found = raw.FS_MATRIX()
    if not _object_matrix(item, ctypes.addressof(found)):
        return _PLAIN
    return (found.a, found.b, found.c, found.d, found.e, found.f)


def _times(inner: _Matrix, outer: _Matrix) -> _Matrix:
    """The matrix that applies `inner` first."""
    a, b, c, d, e, f = inner
    g, h, i, j, k, m = outer
    return (a * g + b * i, a * h + b * j, c * g + d * i, c * h + d * j, e * g + f * i + k, e * h + f * j + m)
