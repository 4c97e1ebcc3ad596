"""Rules and shaded bands of a page, from what either engine says is drawn on it."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

Point = tuple[float, float]

MOST_SEGMENTS = 250
"""Of one path: a table drawn as a single path stays below, a curve in a figure has many thousand."""

MOST_PATHS = 1000
"""Of a form inside a page: one with more is a figure, and none of its lines is a rule."""

_THIN = 3.2
"""A filled box up to this high, in points, is a rule: the heavy ones of journals have 2 to 3."""

_JOINED = 1.6
"""Pieces of a rule are drawn cell by cell without a gap; rules under two headers stand further apart."""


@dataclass(frozen=True, slots=True, eq=False)
class Rules:
    """`level` (n, 3): left, right, height from the top of rules that run across, from the top;
    `upright` (n, 3): place, top, bottom; `bands` (n, 4): left, top, right, bottom of filled boxes.
    Points, in the frame in which lines are level."""

    level: NDArray[np.float64]
    upright: NDArray[np.float64]
    bands: NDArray[np.float64]


def sides(corners: Sequence[Point], *, stroked: bool, filled: bool) -> Iterable[tuple[float, ...]]:
    """The boxes (left, top, right, bottom, filled) that one line of a path draws, where they are level.

    `corners` are its points one after another. Curves and slanted lines give none.
    """
    xs, ys = [x for x, _ in corners], [y for _, y in corners]
    if filled and len(corners) >= 4 and _is_box(corners):
        yield (min(xs), min(ys), max(xs), max(ys), 1.0)
    if stroked:
        for (ax, ay), (bx, by) in pairwise(corners):
            if abs(ax - bx) < 0.5 or abs(ay - by) < 0.5:
                yield (min(ax, bx), min(ay, by), max(ax, bx), max(ay, by), 0.0)


def _is_box(corners: Sequence[Point]) -> bool:
    left, right = min(x for x, _ in corners), max(x for x, _ in corners)
    top, bottom = min(y for _, y in corners), max(y for _, y in corners)
    return all(
        min(abs(x - left), abs(x - right)) < 0.5 and min(abs(y - top), abs(y - bottom)) < 0.5
        for x, y in corners
    )


def rules_of(drawn: NDArray[np.float32]) -> Rules:
    """Sort what is drawn on a page (n, 5) into rules and bands; pieces of one rule are joined."""
    boxes = drawn[:, :4].astype(np.float64)
    filled = drawn[:, 4] > 0
    wide, high = boxes[:, 2] - boxes[:, 0], boxes[:, 3] - boxes[:, 1]
    level = (high <= _THIN) & (wide > 3 * np.maximum(high, 1.0))
    upright = (wide <= _THIN) & (high > 3 * np.maximum(wide, 1.0))
    across = _joined(boxes[level][:, [0, 2, 1, 3]])
    down = _joined(boxes[upright][:, [1, 3, 0, 2]])
    bands = boxes[filled & ~level & ~upright]
    return Rules(across, down[:, [2, 0, 1]], bands)


def _joined(pieces: NDArray[np.float64]) -> NDArray[np.float64]:
    """Join pieces (start, end, near side, far side) that follow one another on one line: start, end, place."""
    place = (pieces[:, 2] + pieces[:, 3]) / 2
    order = np.lexsort((pieces[:, 0], np.round(place)))
    found: list[list[float]] = []
    for start, end, at in zip(
        pieces[order, 0].tolist(), pieces[order, 1].tolist(), place[order].tolist(), strict=True
    ):
        last = found[-1] if found else None
        if last is not None and abs(last[2] - at) < 1.2 and start <= last[1] + _JOINED:
            last[0], last[1] = min(last[0], start), max(last[1], end)
        else:
            found.append([start, end, at])
    return np.array(sorted(found, key=lambda rule: (rule[2], rule[0])), np.float64).reshape(-1, 3)


def side_by_side(bands: NDArray[np.float64]) -> NDArray[np.float64]:
    """Bands (n, 4), those that were drawn cell by cell in one row joined."""
    order = np.lexsort((bands[:, 0], np.round(bands[:, 3]), np.round(bands[:, 1])))
    found: list[list[float]] = []
    for left, top, right, bottom in bands[order].tolist():
        last = found[-1] if found else None
        same = last is not None and abs(last[1] - top) < 1 and abs(last[3] - bottom) < 1
        if last is not None and same and left <= last[2] + _JOINED:
            last[2] = max(last[2], right)
        else:
            found.append([left, top, right, bottom])
    return np.array(found, np.float64).reshape(-1, 4)
