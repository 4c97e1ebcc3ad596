"""Rows of a table that has no rules: those that follow one another under or over its caption."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise

from recheck.documents.pdf.tables.notes import starts_note
from recheck.documents.pdf.tables.row_kinds import ends_cells, has_prose, is_tabular
from recheck.documents.pdf.tables.text_rows import Ground, Row, is_wordy

TALLEST_TITLE = 9
"""Lines of a caption."""


def run_of(rows: Sequence[Row], ground: Ground, width: float, captions: set[int]) -> list[Row]:
    """The rows of a table that follow one another after a title of a few lines."""
    found: list[Row] = []
    base: float | None = None
    title = 0
    for row in rows:
        if round(row.base) in captions:
            break
        step = 0.0 if base is None else abs(row.base - base)
        tabular = is_tabular(row)
        if not any(is_tabular(other) for other in found):
            if not tabular:
                title += 1
                found = [] if is_wordy(row, width) or title > TALLEST_TITLE else found
                if title > TALLEST_TITLE or step > 5 * row.size:
                    return []
                base = row.base
                continue
        elif starts_note(row, ground) or step > 2.9 * row.size:
            break
        if has_prose(row) or (is_wordy(row, width) and not row.chunks(0.5)[-1].numeric):
            break
        found.append(row)
        base = row.base
    return _trimmed(found)


def _trimmed(rows: list[Row]) -> list[Row]:
    """The rows up to the last with cells, and what its label still has on lines set closer than rows."""
    last = max((at for at, row in enumerate(rows) if is_tabular(row)), default=-1)
    steps = sorted(
        abs(two.base - one.base)
        for one, two in pairwise(rows[: last + 1])
        if is_tabular(one) and is_tabular(two)
    )
    close = 0.86 * steps[len(steps) // 2] if steps else 0.0
    while 0 <= last < len(rows) - 1 and _goes_on(rows[last], rows[last + 1], close):
        last += 1
    return rows[: last + 1]


def _goes_on(last: Row, row: Row, close: float) -> bool:
    """Whether a line holds the rest of the last row: as large, and closer than rows or ends of its cells."""
    step = abs(row.base - last.base)
    if abs(row.size - last.size) > 0.06 * last.size:
        return False
    return step < close or (step < 1.6 * row.size and ends_cells(last, row))
