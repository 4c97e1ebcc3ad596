"""Notes under a table: how they begin, and how far they go."""

from __future__ import annotations

from collections.abc import Sequence

import regex

from recheck.documents.pdf.lines import Line
from recheck.documents.pdf.tables.text_rows import Ground, Row
from recheck.documents.sections import captioned

_NOTE = regex.compile(
    r"(?:notes?\b\s*[.:—–-]?|\*|†|‡|§|¶|#|\((?:[a-z]|\d|\*)\)\s+\S|[a-z]\)\s*\S|abbreviations?\b|values?\s+(?:are|in|represent|given)|"
    r"data\s+(?:are|were|represent)|sources?\s*:|significan(?:t|ce)|statistical(?:ly)?\s+sig|legend\s*:|"
    r"ps?(?:[ -]?values?)?\s+(?:(?:are|is|were|was)\s+)?(?:(?:obtained|calculated|computed)\s+)?(?:by|from|with|using|according\s+to|based\s+on|those\s+of)\b|"
    r"standard\s+(?:errors?|deviations?)\b|numbers?\s+in\s+(?:parentheses|brackets)|(?-i:\p{Lu}{2,6})\s*[,:=])",
    regex.IGNORECASE,
)

_DEEPEST, _MOST_ROWS = 320.0, 25

Edges = tuple[float, float, float, float]
"""Left, top, right and bottom of a table."""


def starts_note(row: Row, ground: Ground) -> bool:
    """Whether a row begins as a note under a table does."""
    if any(chunk.numeric for chunk in row.chunks(1.2)[1:]) and not row.text.lower().startswith("note"):
        return False
    if _NOTE.match(row.text) is not None:
        return True
    return ground.is_raised(row.words[0]) and len(row.texts) > 2


def note_rows(edges: Edges, cells: Sequence[Row], ground: Ground, lines: Sequence[Line]) -> list[Row]:
    """The rows of the notes that follow a table: smaller than its cells, or begun as notes are."""
    left, right = _window(edges, lines)
    bottom, sizes = edges[3], sorted(row.size for row in cells)
    found: list[Row] = []
    base = bottom
    for row in ground.rows(left, right, bottom, bottom + _DEEPEST)[:_MOST_ROWS]:
        step, starts = row.base - base, starts_note(row, ground)
        if captioned(row.text, sure=True) or (not starts and _has_cells(row)):
            break
        if not found:
            if step > 2.6 * row.size or not (starts or row.size < 0.95 * sizes[len(sizes) // 2]):
                break
        elif (abs(row.size - found[0].size) > 0.8 and not _is_mark(found[-1], row)) or step > (
            2.2 if starts else 1.5
        ) * row.size:
            break
        found.append(row)
        base = row.base
    return found


def _is_mark(mark: Row, row: Row) -> bool:
    """Whether a row is but the raised mark of the note on the line below it."""
    return len(mark.text) < 3 and mark.right < row.left + 2 and row.base - mark.base < 0.6 * row.size


def _window(edges: Edges, lines: Sequence[Line]) -> tuple[float, float]:
    """The width of the notes: the table's, or that of the column of text in which they stand."""
    left, _, right, bottom = edges
    below = [line for line in lines if 0 < line.base - bottom < 3 * line.size and left - 12 < line.x0 < right]
    first = min(below, key=lambda line: line.base, default=None)
    if first is None:
        return left, right
    return min(left, first.x0), max(right, first.x1, first.right)


def _has_cells(row: Row) -> bool:
    chunks = row.chunks(1.2)
    return len(chunks) > 2 or any(chunk.numeric for chunk in chunks[1:])
