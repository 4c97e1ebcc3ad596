"""The tables of the prose: rows of cells with their spans, written by every format in its own way."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass


@dataclass(frozen=True)
class Box:
    """A cell with its spans; its text keeps the inline markup of the prose."""

    text: str
    rows: int = 1
    columns: int = 1


@dataclass(frozen=True)
class Grid:
    """A caption with its label, the rows of the head, the rows of the body."""

    label: str
    caption: str
    head: list[list[Box]]
    body: list[list[Box]]


def grid_of(block: str) -> Grid:
    """Read `Table 1. Caption` and rows of cells divided by `|`.

    The head ends at a line `=`, else after one row. An empty cell in a head of two rows belongs to
    the cell before it, or to the one above where that has nothing beside it; `#` starts a row that is one cell.
    """
    caption, *lines = block.split("\n")
    number = caption.split(". ", 1)[0]
    end = lines.index("=") if "=" in lines else 1
    head = [line.split("|") for line in lines[:end]]
    width = max(len(row) for row in head)
    body = [_row(line, width) for line in lines[end:] if line != "="]
    return Grid(number, caption.removeprefix(f"{number}. "), _head(head), body)


def _row(line: str, width: int) -> list[Box]:
    if line.startswith("#"):
        return [Box(line[1:], columns=width)]
    return [Box(text.removeprefix("= ")) for text in line.split("|")]


def _head(rows: Sequence[Sequence[str]]) -> list[list[Box]]:
    if len(rows) == 1:
        return [[Box(text) for text in rows[0]]]
    upper, lower = rows
    first: list[Box] = []
    at = 0
    while at < len(upper):
        after = at + 1
        while after < len(upper) and not upper[after] and lower[after]:
            after += 1
        first.append(Box(upper[at], rows=1 if any(lower[at:after]) else 2, columns=after - at))
        at = after
    return [first, [Box(text) for text in lower if text]]
