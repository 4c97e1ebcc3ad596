"""Columns of a page, found before its lines: gutters, and what runs across them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from recheck.documents.pdf.words import Words

_LEAST_GUTTER = 5.0
_LEAST_ROWS = 6
_FILLED = 0.55
_ALIKE = 0.72


@dataclass(frozen=True, slots=True)
class Gutter:
    """A vertical strip that text keeps clear of; `rows` is the number of lines that say so.

    `ruled` tells that tables side by side show it by their rules.
    """

    left: float
    right: float
    rows: int
    ruled: bool = False

    @property
    def middle(self) -> float:
        """Its centre line."""
        return (self.left + self.right) / 2


@dataclass(frozen=True, slots=True, eq=False)
class Arrangement:
    """`regions` (words,) numbers the blocks of columns in reading order; `bounds` and `columns` give
    the edges and the column of each. Region `around` holds what surrounds the text."""

    regions: NDArray[np.intp]
    bounds: tuple[tuple[float, float], ...]
    columns: tuple[int, ...]
    around: int = -2

    def with_surroundings(self, mask: NDArray[np.bool_], width: float) -> Arrangement:
        """The same with one region more, the last, for the words of the mask."""
        regions = np.where(mask, len(self.bounds), self.regions)
        return Arrangement(regions, (*self.bounds, (0.0, width)), (*self.columns, 0), len(self.bounds))


def gutters_of(words: Words, chosen: NDArray[np.intp]) -> list[Gutter]:
    """The gutters that a page shows by itself: none, one, or two."""
    first = _best_gutter(words, chosen)
    if first is None:
        return []
    sides = chosen[words.x1[chosen] <= first.left + 2], chosen[words.x0[chosen] >= first.right - 2]
    more = [gutter for side in sides if (gutter := _best_gutter(words, side)) is not None]
    widths = _widths(words, chosen, first)
    if min(widths) < _ALIKE * max(widths) and not (more or _is_side_note(words, sides)):
        return []
    kept = [gutter for gutter in more if gutter.rows >= 0.5 * first.rows]
    return sorted([first, *kept], key=lambda gutter: gutter.left)[:2]


def _widths(words: Words, chosen: NDArray[np.intp], gutter: Gutter) -> tuple[float, float]:
    left, right = float(np.percentile(words.x0[chosen], 1)), float(np.percentile(words.x1[chosen], 99))
    return gutter.left - left, right - gutter.right


def _is_side_note(words: Words, sides: Sequence[NDArray[np.intp]]) -> bool:
    """Whether the text on one side is set smaller: side notes, not the first column of a table."""
    small, large = sorted(float(np.median(words.size[side])) for side in sides)
    return small < 0.93 * large


def agreed_gutters(pages: Sequence[list[Gutter]]) -> list[Gutter]:
    """Gutters that the document as a whole vouches for."""
    every = sorted((gutter for page in pages for gutter in page), key=lambda gutter: gutter.middle)
    groups: list[list[Gutter]] = []
    for gutter in every:
        if groups and gutter.middle - groups[-1][-1].middle < 6:
            groups[-1].append(gutter)
        else:
            groups.append([gutter])
    agreed = []
    for group in groups:
        rows = sum(gutter.rows for gutter in group)
        if rows >= 8 or len(group) > 1:
            left = float(np.median([gutter.left for gutter in group]))
            right = float(np.median([gutter.right for gutter in group]))
            agreed.append(Gutter(left, right, rows))
    return agreed


def _best_gutter(words: Words, chosen: NDArray[np.intp]) -> Gutter | None:
    if len(chosen) < 20:
        return None
    x0, x1 = words.x0[chosen], words.x1[chosen]
    left, right = float(np.percentile(x0, 1)), float(np.percentile(x1, 99))
    width = right - left
    if width < 150:
        return None
    cover = _cover(x0 - left, x1 - left, int(width) + 2)
    reach = int(0.18 * width)
    inner = np.arange(reach, int(width) - reach)
    windows = np.lib.stride_tricks.sliding_window_view(cover, reach)
    before, after = (
        windows[inner - reach].max(axis=1),
        windows[np.minimum(inner + 1, len(windows) - 1)].max(axis=1),
    )
    depth = np.minimum(before, after) - cover[inner]
    if depth.max() < _LEAST_ROWS:
        return None
    deepest = inner[depth >= depth.max() - 1]
    at = left + float(deepest[len(deepest) // 2]) + 0.5
    # What runs across is set apart first: then the strip is seen whole, ragged edges and all.
    clear = chosen[_runs_clear(words, chosen, Gutter(at - 1.5, at + 1.5, 0))]
    if len(clear) < 20:
        return None
    cover = _cover(words.x0[clear] - left, words.x1[clear] - left, int(width) + 2)
    free = cover <= 0.02 * len(np.unique(words.rows[clear]))
    start = end = int(at - left)
    while start > 0 and free[start - 1]:
        start -= 1
    while end < len(free) - 1 and free[end + 1]:
        end += 1
    gutter = Gutter(left + start, left + end + 1, 0)
    if not _LEAST_GUTTER <= gutter.right - gutter.left < 0.3 * width:
        return None
    rows = _column_rows(words, chosen, gutter, left, right)
    return Gutter(gutter.left, gutter.right, rows) if rows >= _LEAST_ROWS else None


def _cover(x0: NDArray[np.float32], x1: NDArray[np.float32], width: int) -> NDArray[np.int64]:
    """How many words lie over each point across the page."""
    starts = np.clip(np.round(x0).astype(np.intp), 0, width - 1)
    ends = np.clip(np.round(x1).astype(np.intp), 0, width - 1)
    change = np.bincount(starts, minlength=width + 1) - np.bincount(ends, minlength=width + 1)
    return np.cumsum(change)[:width]


def _column_rows(words: Words, chosen: NDArray[np.intp], gutter: Gutter, left: float, right: float) -> int:
    """Rows of running text on the poorer side of a gutter; 0 if a side is no column of text."""
    clear = chosen[_runs_clear(words, chosen, gutter)]
    widths = (gutter.left - left, right - gutter.right)
    sides = clear[words.x1[clear] <= gutter.left + 1], clear[words.x0[clear] >= gutter.right - 1]
    counts = []
    for side, width in zip(sides, widths, strict=True):
        fill = _fill(words, side) / width
        if not len(fill) or np.median(fill) < _FILLED:
            return 0
        counts.append(int((fill > _FILLED).sum()))
    if min(widths) < _ALIKE * max(widths) and min(counts) < 8:
        return 0
    return min(counts)


def _runs_clear(words: Words, chosen: NDArray[np.intp], gutter: Gutter) -> NDArray[np.bool_]:
    """Which words stand in rows that keep clear of a gutter, at least four such rows in a run."""
    rows, place = np.unique(words.rows[chosen], return_inverse=True)
    inside = (words.x0[chosen] < gutter.right - 1) & (words.x1[chosen] > gutter.left + 1)
    crossed = np.bincount(place, weights=inside, minlength=len(rows)) > 0
    run = np.cumsum(np.diff(crossed, prepend=crossed[0]))
    long = np.bincount(run)[run] >= 4
    clear: NDArray[np.bool_] = (long & ~crossed)[place]
    return clear


def _fill(words: Words, chosen: NDArray[np.intp]) -> NDArray[np.float64]:
    """The width that the words of each row cover."""
    if not len(chosen):
        return np.zeros(0)
    _, row = np.unique(words.rows[chosen], return_inverse=True)
    widths = (words.x1[chosen] - words.x0[chosen]).astype(np.float64)
    return np.bincount(row, weights=widths).astype(np.float64)


def arranged(words: Words, chosen: NDArray[np.intp], own: list[Gutter], agreed: list[Gutter]) -> Arrangement:
    """Put the chosen words of a page into regions: full width and columns, in reading order.

    Words that are not chosen get region -1.
    """
    regions = np.full(len(words), -1, np.intp)
    if not len(chosen):
        return Arrangement(regions, (), ())
    left, right = float(np.percentile(words.x0[chosen], 1)), float(np.percentile(words.x1[chosen], 99))
    gutters = [gutter for gutter in own if any(abs(gutter.middle - other.middle) < 6 for other in agreed)]
    gutters = gutters or [gutter for gutter in agreed if _seen(words, chosen, gutter, left, right)][:2]
    if not gutters:
        regions[chosen] = 0
        return Arrangement(regions, ((left, right),), (0,))
    pieces = _pieces(words, chosen, gutters, left, right)
    edges = [left, *(x for gutter in gutters for x in (gutter.left, gutter.right)), right]
    bounds: list[tuple[float, float]] = []
    columns: list[int] = []
    ruled = any(gutter.ruled for gutter in gutters)
    for members, column in _in_order(pieces, len(gutters) + 1, ruled):
        for piece in members:
            regions[pieces.words[piece]] = len(bounds)
        bounds.append((left, right) if column < 0 else (edges[2 * column], edges[2 * column + 1]))
        columns.append(max(column, 0))
    return Arrangement(regions, tuple(bounds), tuple(columns))


@dataclass(frozen=True, slots=True, eq=False)
class _Pieces:
    """Rows cut at the gutters; `column` is -1 for what runs across."""

    words: list[NDArray[np.intp]]
    base: NDArray[np.float64]
    column: NDArray[np.intp]
    fill: NDArray[np.float64]


def _pieces(
    words: Words, chosen: NDArray[np.intp], gutters: list[Gutter], left: float, right: float
) -> _Pieces:
    before, after = words.x1[chosen[:-1]], words.x0[chosen[1:]]
    cut = words.rows[chosen[1:]] != words.rows[chosen[:-1]]
    for gutter in gutters:
        core = (gutter.right - gutter.left) / 4
        cut |= (
            (before <= gutter.middle - core)
            & (after >= gutter.middle + core)
            & (
                after - before
                >= np.maximum(0.6 * (gutter.right - gutter.left), 0.75 * words.size[chosen[1:]])
            )
        )
    parts = np.split(chosen, np.flatnonzero(cut) + 1)
    x0 = np.array([words.x0[part[0]] for part in parts])
    x1 = np.array([words.x1[part].max() for part in parts])
    column = np.searchsorted([gutter.middle for gutter in gutters], (x0 + x1) / 2)
    for gutter in gutters:
        core = (gutter.right - gutter.left) / 4
        crosses = (x0 < gutter.middle - core) & (x1 > gutter.middle + core)
        # A long address or formula that juts out of its column is not set across the page.
        wide = (x1 - x0 > 0.55 * (right - left)) | (np.abs(x0 + x1 - left - right) < 30)
        column[crosses & wide] = -1
    widths = np.array([(words.x1[part] - words.x0[part]).sum() for part in parts])
    base = np.array([float(words.base[part].max()) for part in parts])
    return _Pieces(parts, base, column, widths / ((right - left) / (len(gutters) + 1)))


def _in_order(pieces: _Pieces, count: int, ruled: bool) -> list[tuple[NDArray[np.intp], int]]:
    """Regions in reading order: what runs across, then the columns down to what runs across next."""
    order = np.argsort(pieces.base, kind="stable")
    across = pieces.column[order] == -1
    found: list[tuple[NDArray[np.intp], int]] = []
    for part in np.split(order, np.flatnonzero(np.diff(across)) + 1):
        if pieces.column[part[0]] == -1 or (not ruled and _is_spread(pieces, part, found)):
            if found and found[-1][1] == -1:
                found[-1] = (np.concatenate((found[-1][0], part)), -1)
            else:
                found.append((part, -1))
            continue
        for column in range(count):
            members = part[pieces.column[part] == column]
            if len(members):
                found.append((members, column))
    return found


def _is_spread(pieces: _Pieces, part: NDArray[np.intp], found: list[tuple[NDArray[np.intp], int]]) -> bool:
    """Whether a band is the sparse middle of a table or figure that runs across the page."""
    if not found or found[-1][1] != -1:
        return False
    fill = pieces.fill[part]
    return len(part) < 60 and float(np.median(fill)) < 0.5 and int((fill > 0.75).sum()) < 4


def _seen(words: Words, chosen: NDArray[np.intp], gutter: Gutter, left: float, right: float) -> bool:
    """Whether a gutter that other pages have is kept on this page by a few rows at least."""
    if not left + 60 < gutter.middle < right + 200:
        return False
    clear = chosen[_runs_clear(words, chosen, gutter)]
    sides = clear[words.x1[clear] <= gutter.left + 1], clear[words.x0[clear] >= gutter.right - 1]
    filled = [int((_fill(words, side) > 0.4 * (gutter.left - left)).sum()) for side in sides]
    return min(filled) >= 3 or (len(clear) == len(chosen) and max(filled) >= 2)
