"""Columns of a page that its rules tell of: tables side by side, where there is little running text."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from recheck.documents.pdf.columns import Gutter
from recheck.documents.pdf.rules import rules_of
from recheck.documents.pdf.words import Words

_NARROWEST, _WIDEST = 6.0, 45.0
"""Of a gutter, in points."""

_ALIKE = 0.8
_TOLD = 8
"""As many rows of text would make sure of a gutter."""

_MOST_ACROSS = 3
"""Rows that may run across, such as a title."""


def ruled_gutters(words: Words, chosen: NDArray[np.intp]) -> list[Gutter]:
    """The gutter beside which rules end or begin on both sides, and that nearly all rows keep clear of; or none."""
    drawn = words.glyphs.drawn
    if not len(drawn) or len(chosen) < 20:
        return []
    level = rules_of(drawn).level
    left, right = float(words.x0[chosen].min()), float(words.x1[chosen].max())
    for one in _repeated(level):
        for two in _repeated(level):
            gutter = Gutter(one[1], two[0], _TOLD, ruled=True)
            widths = gutter.left - left, right - gutter.right
            if (
                _NARROWEST < gutter.right - gutter.left < _WIDEST
                and min(widths) > _ALIKE * max(widths)
                and one[0] < left + 10
                and two[1] > right - 10
                and not ((level[:, 0] < gutter.middle) & (level[:, 1] > gutter.middle)).any()
                and _is_clear(words, chosen, gutter)
            ):
                return [gutter]
    return []


def _repeated(level: NDArray[np.float64]) -> list[tuple[float, float]]:
    """Left and right edges that two rules or more have in common."""
    edges, counts = np.unique(np.round(level[:, :2]), axis=0, return_counts=True)
    return [(a, b) for (a, b), count in zip(edges.tolist(), counts.tolist(), strict=True) if count > 1]


def _is_clear(words: Words, chosen: NDArray[np.intp], gutter: Gutter) -> bool:
    across = (words.x0[chosen] < gutter.middle) & (words.x1[chosen] > gutter.middle)
    return len(np.unique(words.rows[chosen][across])) <= _MOST_ACROSS
