"""Glyphs of a page gathered into words: runs on one base line without a gap."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from recheck.documents.pdf.glyphs import ITALIC, Glyphs

GAP = 0.12
"""A gap of this share of the font size is a space: thin spaces of mathematics are 1/6 em and word
spaces of tightly set lines go down to 1/7; kerning in running text stays below 1/12."""

SLANTED_GAP = 0.18
"""The same after a slanted character before an upright one: its overhang is made up for by up to 1/7 em."""


_OVERHANG_GAP = 0.09
"""The same after an f, whose hook hangs over the space."""


def space_gap(
    codes: NDArray[np.uint32], styles: NDArray[np.uint8], sizes: NDArray[np.float32]
) -> NDArray[np.float32]:
    """For successive characters the gap in points that is a space before each but the first."""
    slanted = ((styles[:-1] & ITALIC) > 0) & ((styles[1:] & ITALIC) == 0)
    share = np.where(slanted, SLANTED_GAP, np.where(codes[:-1] == ord("f"), _OVERHANG_GAP, GAP))
    return share.astype(np.float32) * np.maximum(sizes[1:], sizes[:-1])


@dataclass(frozen=True, slots=True, eq=False)
class Words:
    """The words of one page, ordered by row and then from left to right; n is their number.

    `order` (glyphs,) indices of the inked glyphs sorted as the words are; word i has the glyphs
    `order[starts[i]:ends[i]]`. `spaced` (glyphs,) tells where a space glyph stands before. `rows` (n,) numbers the base lines from the top. Lengths in points.
    """

    glyphs: Glyphs
    order: NDArray[np.intp]
    spaced: NDArray[np.bool_]
    starts: NDArray[np.intp]
    ends: NDArray[np.intp]
    x0: NDArray[np.float32]
    x1: NDArray[np.float32]
    base: NDArray[np.float32]
    size: NDArray[np.float32]
    rows: NDArray[np.intp]

    def __len__(self) -> int:
        return len(self.starts)

    def codes(self, word: int) -> NDArray[np.uint32]:
        """The code points of one word."""
        return self.glyphs.codes[self.order[self.starts[word] : self.ends[word]]]


def words_of(glyphs: Glyphs) -> Words:
    """Gather the level glyphs of a page into words; space glyphs only part them."""
    rows = _rows(glyphs)
    order = np.lexsort((glyphs.boxes[:, 0], rows))
    codes = glyphs.codes[order]
    blank = np.isin(codes, (0x20, 0x09, 0x0A, 0x0D, 0xA0, 0x3000)) | ((codes >= 0x2000) & (codes <= 0x200B))
    seen = np.cumsum(blank)[~blank]
    order = order[~blank]
    spaced = np.concatenate((seen[:1] >= 0, seen[1:] > seen[:-1]))
    left, right = glyphs.boxes[order, 0], glyphs.boxes[order, 2]
    size, row = glyphs.sizes[order], rows[order]
    new = spaced.copy()
    if len(order):
        small, large = np.minimum(size[1:], size[:-1]), np.maximum(size[1:], size[:-1])
        gap = left[1:] - right[:-1]
        new[1:] |= (
            (row[1:] != row[:-1])
            | (gap > space_gap(codes[~blank], glyphs.styles[order], size))
            | (small < 0.88 * large)
        )
    starts = np.flatnonzero(new)
    ends = np.append(starts[1:], len(order)) if len(order) else starts
    if not len(starts):
        none = np.zeros(0, np.float32)
        return Words(glyphs, order, spaced, starts, ends, none, none, none, none, starts)
    return Words(
        glyphs, order, spaced, starts, ends,
        np.minimum.reduceat(left, starts), np.maximum.reduceat(right, starts),
        np.maximum.reduceat(glyphs.origins[order, 1], starts), np.maximum.reduceat(size, starts), row[starts],
    )  # fmt: skip


def _rows(glyphs: Glyphs) -> NDArray[np.intp]:
    """Number the base lines from the top; heights that differ by less than 0.7 points are one."""
    base = glyphs.origins[:, 1]
    order = np.argsort(base, kind="stable")
    steps = np.diff(base[order], prepend=base[order[:1]]) > 0.7
    rows = np.empty(len(base), np.intp)
    rows[order] = np.cumsum(steps)
    return rows
