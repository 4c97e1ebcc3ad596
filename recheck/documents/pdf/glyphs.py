"""A page as arrays of characters, as either engine gives it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, fields, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

BOLD, ITALIC = 1, 2
ASKEW = -1
"""`turns` of a character that runs in none of the four directions."""

UNKNOWN = "\ufffd"
"""A character that the font gives no code for at all."""

_FEWEST = 60
"""Characters of a table that is set sideways; stamps in the margin have fewer or no caption."""

_BOLD_NAMES = ("bold", "black", "heavy", "demi", "cmbx", "-b", ",b", "sfbx", "ecbx")
_ITALIC_NAMES = ("italic", "oblique", "cmmi", "cmti", "-it", "slanted", "sfti", "ecti")


@dataclass(frozen=True, slots=True, eq=False)
class Glyphs:
    """All characters of one page in the order of the file; n is their number.

    `codes` (n,) code points; `boxes` (n, 4) left, top, right, bottom and `origins` (n, 2) the point
    on the base line where the character starts, both in points from the top left of the page as it
    is shown; `sizes` (n,) font size times matrix scale; `styles` (n,) bits BOLD and ITALIC;
    `turns` (n,) quarter turns clockwise in which the text runs, 0 upright, ASKEW for others;
    `pieces` (n,) true for the second and later characters of a ligature. `drawn` (m, 5) are the level
    and upright boxes that are drawn on the page: left, top, right, bottom, 1 if filled and 0 if lines.
    """

    page: int
    width: float
    height: float
    codes: NDArray[np.uint32]
    boxes: NDArray[np.float32]
    origins: NDArray[np.float32]
    sizes: NDArray[np.float32]
    styles: NDArray[np.uint8]
    turns: NDArray[np.int8]
    pieces: NDArray[np.bool_]
    drawn: NDArray[np.float32] = field(default_factory=lambda: np.zeros((0, 5), np.float32))

    def __len__(self) -> int:
        return len(self.codes)

    def only(self, chosen: NDArray[Any]) -> Glyphs:
        """The glyphs that a mask or an index array chooses."""
        arrays = (f.name for f in fields(self) if f.name not in ("page", "width", "height", "drawn"))
        return replace(self, **{name: getattr(self, name)[chosen] for name in arrays})


@dataclass(frozen=True, slots=True)
class Engine:
    """What an engine read of a file: its number of pages, the title it states, the glyphs of the
    pages asked for, and the numbers of pages that failed."""

    count: int
    title: str
    pages: list[Glyphs]
    failed: tuple[int, ...] = ()


class Unopened(Exception):
    """The engine cannot open the file; `locked` if for want of a password."""

    def __init__(self, *, locked: bool) -> None:
        self.locked = locked
        super().__init__(locked)


def as_glyphs(
    page: int, width: float, height: float, rows: Sequence[Sequence[float]], drawn: Sequence[Sequence[float]] = ()
) -> Glyphs:  # fmt: skip
    """Glyphs from one row each: code, left, top, right, bottom, x, y, size, style, turn, piece."""
    table = np.array(rows, np.float64).reshape(-1, 11)
    return Glyphs(
        page, width, height, table[:, 0].astype(np.uint32), table[:, 1:5].astype(np.float32),
        table[:, 5:7].astype(np.float32), table[:, 7].astype(np.float32), table[:, 8].astype(np.uint8),
        table[:, 9].astype(np.int8), table[:, 10].astype(bool), as_drawn(drawn),
    )  # fmt: skip


def as_drawn(boxes: Sequence[Sequence[float]]) -> NDArray[np.float32]:
    """Boxes (left, top, right, bottom, filled) as an array."""
    return np.array(boxes, np.float32).reshape(-1, 5)


def style_of(font: str) -> int:
    """Whether a font's name says bold or italic."""
    name = font.lower().split("+")[-1]
    bold = BOLD if any(word in name for word in _BOLD_NAMES) else 0
    return bold | (ITALIC if any(word in name for word in _ITALIC_NAMES) else 0)


def turn_of(dx: float, dy: float) -> int:
    """Quarter turns clockwise of text that runs along (dx, dy), y downward."""
    if abs(dx) < 20 * abs(dy) and abs(dy) < 20 * abs(dx):
        return ASKEW
    if abs(dx) >= abs(dy):
        return 0 if dx >= 0 else 2
    return 1 if dy > 0 else 3


def upright(glyphs: Glyphs) -> tuple[Glyphs, Glyphs]:
    """Drop rotated text, or turn a page that is mostly rotated, and overlaid duplicates.

    Gives the glyphs as they are shown, and the same in the frame in which their lines are level.
    """
    shown = (glyphs.boxes[:, 2] > 0) & (glyphs.boxes[:, 0] < glyphs.width)
    shown &= (glyphs.boxes[:, 3] > 0) & (glyphs.boxes[:, 1] < glyphs.height)
    inked = shown & (glyphs.codes != 32)
    counts = np.bincount(glyphs.turns[inked & (glyphs.turns >= 0)], minlength=4)
    turn = int(counts.argmax()) if 2 * counts.max() > counts.sum() else 0
    kept = glyphs.only(shown & (glyphs.turns == turn))
    kept = kept.only(~_overlaid(kept))
    return kept, (kept if turn == 0 else _turned(kept, turn))


def sideways(glyphs: Glyphs) -> list[tuple[Glyphs, Glyphs]]:
    """The parts of a page that stand turned against the rest, as `upright` gives the rest."""
    counts = np.bincount(glyphs.turns[(glyphs.turns >= 0) & (glyphs.codes != 32)], minlength=4)
    main = int(counts.argmax())
    found = []
    for turn in np.flatnonzero(counts >= _FEWEST).tolist():
        if turn != main:
            kept = glyphs.only(glyphs.turns == turn)
            kept = kept.only(~_overlaid(kept))
            found.append((kept, kept if turn == 0 else _turned(kept, turn)))
    return found


def _turned(glyphs: Glyphs, turn: int) -> Glyphs:
    width, height = glyphs.width, glyphs.height
    x, y = glyphs.origins.T
    origins = ((y, width - x), (width - x, height - y), (height - y, x))[turn - 1]
    size = (width, height) if turn == 2 else (height, width)
    drawn = np.column_stack((_turned_boxes(glyphs.drawn[:, :4], turn, width, height), glyphs.drawn[:, 4:]))
    return Glyphs(
        glyphs.page, *size, glyphs.codes, _turned_boxes(glyphs.boxes, turn, width, height),
        np.column_stack(origins), glyphs.sizes, glyphs.styles, np.zeros_like(glyphs.turns), glyphs.pieces, drawn,
    )  # fmt: skip


def _turned_boxes(boxes: NDArray[np.float32], turn: int, width: float, height: float) -> NDArray[np.float32]:
    left, top, right, bottom = boxes.T
    if turn == 1:
        return np.column_stack((top, width - right, bottom, width - left))
    if turn == 2:
        return np.column_stack((width - right, height - bottom, width - left, height - top))
    return np.column_stack((height - bottom, left, height - top, right))


def _overlaid(glyphs: Glyphs) -> NDArray[np.bool_]:
    """Mark a character that stands on its own double: bold made by printing twice, layered text."""
    overlaid = np.zeros(len(glyphs), dtype=bool)
    if len(glyphs) < 2:
        return overlaid
    x, y = glyphs.origins.T
    # The second f of a ligature has the box of the first and is no double of it.
    order = np.lexsort((np.arange(len(x)), x, glyphs.pieces, glyphs.codes))
    codes, pieces, x, y = glyphs.codes[order], glyphs.pieces[order], x[order], y[order]
    reach = 0.15 * glyphs.sizes[order]
    for step in range(1, 8):
        near = (codes[step:] == codes[:-step]) & (pieces[step:] == pieces[:-step])
        near &= x[step:] - x[:-step] < reach[step:]
        if not near.any():
            break
        near &= np.abs(y[step:] - y[:-step]) < reach[step:]
        overlaid[np.maximum(order[step:], order[:-step])[near]] = True
    return overlaid
