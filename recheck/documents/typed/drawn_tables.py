"""Tables of plain text that are drawn with plus signs, dashes and pipes, or with the characters for boxes."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise

import regex

from recheck.documents.pieces import Grid
from recheck.documents.typed.cells import Typed, typed_grid

_BOXES = (
    dict.fromkeys(map(ord, "│┃║┆┊"), "|")
    | dict.fromkeys(map(ord, "─━┄╌"), "-")
    | dict.fromkeys(map(ord, "═"), "=")
    | dict.fromkeys([*range(0x250C, 0x254C), *range(0x2552, 0x2571)], "+")
)
_BORDER = regex.compile(r"\+(?:[-=:]+\+)+")
_PART = regex.compile(r"\+[-=:]+\+")


def drawn_table(lines: Sequence[str], at: int, first: int) -> tuple[Grid, int] | None:
    """The table that begins on line `at`, and the line after it; `first` is added to count lines from 1."""
    drawn = _drawn(lines[at])
    if _BORDER.fullmatch(drawn) is None:
        return None
    end = at
    block: list[str] = []
    while end < len(lines) and (line := _drawn(lines[end])).startswith(("|", "+")):
        block.append(line)
        end += 1
    borders = [row for row, line in enumerate(block) if _BORDER.fullmatch(line)]
    edges = sorted({spot for row in borders for spot, char in enumerate(block[row]) if char == "+"})
    if len(borders) < 2 or borders[-1] != len(block) - 1 or len(edges) < 3:
        return None
    rows: list[list[Typed]] = []
    heads = 0
    # A frame with one line under its head has a row on each line; Markdown rules off every row.
    ruled_off = [row for row in borders[1:-1] if "=" in block[row] and "=" not in block[0]]
    by_line = len(borders) <= 3 and not ruled_off
    for low, high in pairwise(borders):
        made = _rows(block[low + 1 : high], edges, at + low + 1 + first, by_line=by_line and low > 0)
        if made is None:
            return None
        rows += made
        if high in ruled_off or (by_line and len(borders) == 3 and low == 0):
            heads = len(rows)
    return typed_grid(rows, heads), end


def is_border(line: str) -> bool:
    """Tell whether a line is nothing but a drawn border."""
    return _BORDER.fullmatch(_drawn(line)) is not None


def _drawn(line: str) -> str:
    return line.strip().translate(_BOXES)


def _rows(
    block: Sequence[str], edges: Sequence[int], line: int, *, by_line: bool
) -> list[list[Typed]] | None:
    """The rows between two borders: one, or one on each line; None where a border ends midway, or pipes stand apart from it."""
    if any(map(_PART.search, block)):
        return None
    cut = [_cut(text, edges) for text in block]
    if any(cells is None for cells in cut) or len({tuple(c[1] for c in cells) for cells in cut if cells}) > 1:
        return None
    found = [[Typed(text, line + at, span) for text, span in cells] for at, cells in enumerate(cut) if cells]
    if by_line or not found:
        return found
    return [
        [
            Typed(
                "\n".join(cell.text.strip() for cell in stack).strip("\n"),
                line + _blank(stack),
                stack[0].span,
            )
            for stack in zip(*found, strict=True)
        ]
    ]


def _blank(stack: Sequence[Typed]) -> int:
    """The number of lines before the first on which a cell prints something."""
    return next((at for at, cell in enumerate(stack) if cell.text.strip()), 0)


def _cut(text: str, edges: Sequence[int]) -> list[tuple[str, int]] | None:
    """The cells of a line, each with the number of columns that it spans."""
    text = text.ljust(edges[-1] + 1)
    bars = [spot for spot in edges if text[spot] in "|+"]
    if bars[:1] != [edges[0]] or bars[-1:] != [edges[-1]]:
        return None
    return [(text[low + 1 : high], sum(low < edge <= high for edge in edges)) for low, high in pairwise(bars)]
