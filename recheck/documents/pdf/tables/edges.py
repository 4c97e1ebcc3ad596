"""Columns of a table: the strips that the rows of its body keep clear of."""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from math import ceil

import numpy as np
import regex
from numpy.typing import NDArray

from recheck.documents.pdf.tables.text_rows import Row, is_numeric

NARROWEST = 0.44
"""A strip of this share of the font size parts columns: word spaces stay below 0.4 em where text is not justified."""

_SURE = 0.55
_TOUCHING = 0.12
_STEP = 0.25
"""Points from one sample to the next across the page."""

_JOINS_RIGHT = regex.compile(r"(?:[±%)\]]|\+/)")
_JOINS_LEFT = regex.compile(r"(?:[±(\[<>=≤≥]|\+/[-−–])$")


@dataclass(frozen=True, slots=True, eq=False)
class Columns:
    """`cuts` are the middles of the strips between columns, `lefts` and `rights` the edges of what stands in them.

    `crossing` holds the numbers of the rows that run across a strip; `narrow` tells that a strip is so
    narrow that it may be a space.
    """

    cuts: NDArray[np.float64]
    lefts: NDArray[np.float64]
    rights: NDArray[np.float64]
    crossing: frozenset[int] = frozenset()
    narrow: bool = False

    def __len__(self) -> int:
        return len(self.cuts) + 1

    def of(self, row: Row) -> list[int]:
        """The column in which the middle of each word stands; stars and indices go with their number."""
        cuts = self.cuts.tolist()
        places = [bisect_right(cuts, (a + b) / 2) for a, b in zip(row.x0, row.x1, strict=True)]
        return [places[anchor] for anchor in row.anchors]


def columns_of(rows: Sequence[Row], upright: Sequence[float] = ()) -> Columns | None:
    """Find the columns that the rows of a table's body stand in; None where there is only one.

    `upright` are places of rules between columns.
    """
    rows = [row for row in rows if len(row.words)]
    if not rows:
        return None
    left, right = min(row.left for row in rows) - 1, max(row.right for row in rows) + 1
    size = float(np.median([row.size for row in rows]))
    covers = np.stack([_cover(row, left, right) for row in rows])
    crossing = _crossing(rows, covers, size)
    kept = np.array([at not in crossing for at in range(len(rows))])
    strips = _strips(covers[kept].sum(axis=0) == 0, NARROWEST * size)
    strips = [strip for strip in strips if not _inside_numbers(rows, left, strip)]
    spans = [(left + a * _STEP, left + b * _STEP) for a, b in strips]
    cuts = _with_rules([(a + b) / 2 for a, b in spans], spans, upright, rows, left, right)
    if not len(cuts):
        return None
    narrow = any(b - a < _SURE * size for a, b in spans)
    chosen = [row for at, row in enumerate(rows) if at not in crossing]
    return _with_edges(cuts, chosen, frozenset(crossing), narrow)


def _cover(row: Row, left: float, right: float) -> NDArray[np.bool_]:
    cover = np.zeros(int((right - left) / _STEP) + 2, dtype=bool)
    own = row.own
    for at in own:
        cover[int((row.x0[at] - left) / _STEP) : ceil((row.x1[at] - left) / _STEP)] = True
    for one, two in pairwise(own):
        # An index inside a cell, "9.6b (1.5)" or "(h-1)", keeps it together; stars at its end may hang out of the column.
        room = row.x0[two] - row.x1[two - 1]
        if two > one + 1 and room < (NARROWEST if row.texts[two][0] in "([" else _TOUCHING) * row.size:
            cover[int((row.x0[one] - left) / _STEP) : ceil((row.x0[two] - left) / _STEP)] = True
    return cover


def _strips(free: NDArray[np.bool_], width: float) -> list[tuple[int, int]]:
    """First and last sample of the inner runs that are free and at least so wide."""
    change = np.flatnonzero(np.diff(free.astype(np.int8), prepend=0, append=0))
    runs = list(zip(change[::2].tolist(), change[1::2].tolist(), strict=True))
    return [(a, b) for a, b in runs if (b - a) * _STEP >= width and a > 8 and b < len(free) - 8]


def _crossing(rows: Sequence[Row], covers: NDArray[np.bool_], size: float) -> set[int]:
    """Rows whose words alone fill a strip that the others keep clear of: labels that run on into empty columns."""
    found: set[int] = set()
    most = max(1, len(rows) // 8) if len(rows) >= 3 else 0
    width = NARROWEST * size
    for _ in range(most):
        total = covers[[at not in found for at in range(len(rows))]].sum(axis=0)
        before = len(_strips(total == 0, width))
        gains = [
            (len(_strips((total - covers[at]) == 0, width)) - before, at)
            for at in range(len(rows))
            if at not in found and not is_numeric(rows[at].text)
        ]
        gain, at = max(gains, default=(0, 0))
        if gain <= 0 or not _runs_on(rows[at]):
            break
        found.add(at)
    return found


def _runs_on(row: Row) -> bool:
    """Whether a row is mostly words: one chunk of text, and fewer numbers than words."""
    numbers = sum(is_numeric(text) for text in row.texts)
    return numbers <= 0.5 * len(row.texts)


def _inside_numbers(rows: Sequence[Row], left: float, strip: tuple[int, int]) -> bool:
    """Whether a strip parts what belongs to one number: all that stands right of it is `±` or a bracket's end."""
    a, b = left + strip[0] * _STEP, left + strip[1] * _STEP
    before, after = [], []
    for row in rows:
        own = row.own
        right = [at for at in own if row.x0[at] >= b - 0.3]
        lower = [at for at in own if row.x1[at] <= a + 0.3]
        if right and lower:
            after.append(row.texts[right[0]])
            before.append(row.texts[lower[-1]])
    if not after:
        return False
    joins = sum(
        _JOINS_RIGHT.match(text) is not None or _JOINS_LEFT.search(other) is not None
        for text, other in zip(after, before, strict=True)
    )
    return joins > 0.8 * len(after)


def _with_rules(
    cuts: list[float], spans: list[tuple[float, float]], upright: Sequence[float], rows: Sequence[Row],
    left: float, right: float,
) -> NDArray[np.float64]:  # fmt: skip
    """Put in the rules between columns that no strip tells of: words of neighbours that touch the rule."""
    found = list(cuts)
    for at in upright:
        if not left + 2 < at < right - 2 or any(a - 1 <= at <= b + 1 for a, b in spans):
            continue
        crossed = sum(
            any(a < at - 1 and b > at + 1 for a, b in zip(row.x0, row.x1, strict=True)) for row in rows
        )
        if crossed <= 0.1 * len(rows):
            found.append(at)
    return np.array(sorted(found))


def _with_edges(
    cuts: NDArray[np.float64], rows: Sequence[Row], crossing: frozenset[int], narrow: bool
) -> Columns:
    count = len(cuts) + 1
    lefts, rights, places = [np.inf] * count, [-np.inf] * count, cuts.tolist()
    for row in rows:
        for at in row.own:
            column = bisect_right(places, (row.x0[at] + row.x1[at]) / 2)
            lefts[column] = min(lefts[column], row.x0[at])
            rights[column] = max(rights[column], row.x1[at])
    return Columns(cuts, np.array(lefts), np.array(rights), crossing, narrow)
