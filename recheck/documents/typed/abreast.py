"""Two columns that stand abreast in plain text, as a page printed to a terminal has them."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass

import regex

_GAP = regex.compile(r"(?<=\S)[ \t]{3,}(?=\S)")
_WORD = regex.compile(r"\p{L}{2,}")
_LEAST_ROWS = 8
_MOST_BETWEEN = 12


@dataclass(frozen=True, slots=True)
class Stretch:
    """Lines of one column: `lines` as they are read, the first of them line `first` of the file, from 0."""

    lines: list[str]
    first: int


def stretches(lines: list[str]) -> Iterator[Stretch]:
    """Cut a text where columns begin and end; the left column comes before the right one."""
    at = 0
    for start, end, edge in _abreast(lines):
        if start > at:
            yield Stretch(lines[at:start], at)
        yield Stretch([line[: edge - 1].rstrip() for line in lines[start:end]], start)
        yield Stretch([line[edge - 1 :].strip() for line in lines[start:end]], start)
        at = end
    if at < len(lines):
        yield Stretch(lines[at:], at)


def _abreast(lines: list[str]) -> Iterator[tuple[int, int, int]]:
    """First line, line after the last, and edge of the right column for each run of lines in two columns."""
    edges = [_edges(line) for line in lines]
    at = 0
    while at < len(lines):
        if not edges[at]:
            at += 1
            continue
        best = max((_run(lines, edges, at, edge) for edge in edges[at]), key=lambda run: run[1])
        end, rows, edge = best
        if rows >= _LEAST_ROWS and _is_prose(lines[at:end], edge):
            yield at, end, edge
        # A long run that is no prose is a table, and no part of it is looked at again.
        at = end if rows >= _LEAST_ROWS else at + 1


def _edges(line: str) -> tuple[int, ...]:
    """Where text begins again after a gap; lines with several gaps are rows of a table."""
    found = tuple(match.end() for match in _GAP.finditer(line))
    return found if len(found) == 1 else ()


def _run(lines: list[str], edges: list[tuple[int, ...]], start: int, edge: int) -> tuple[int, int, int]:
    """How far lines keep the edge of a right column: the line after the last row, the number of rows."""
    rows, end, seen = 0, start, Counter[int]()
    for at in range(start, len(lines)):
        near = [found for found in edges[at] if abs(found - edge) <= 1]
        if near:
            rows, end = rows + 1, at + 1
            seen.update(near)
        elif lines[at][max(edge - 3, 0) : edge - 1].strip() or at - end >= _MOST_BETWEEN:
            break
    return end, rows, min(seen, default=edge)


def _is_prose(lines: list[str], edge: int) -> bool:
    """Whether most lines have words on both sides, as columns of text have and rows of a table have not."""
    rows = [line for line in lines if line[: edge - 1].strip() and line[edge - 1 :].strip()]
    worded = sum(
        len(_WORD.findall(line[: edge - 1])) >= 3 and len(_WORD.findall(line[edge - 1 :])) >= 3
        for line in rows
    )
    return worded >= 0.6 * len(rows)
