"""Rows told by the room between them: lines of one row stand closer than rows do, wherever its cells are aligned."""

from __future__ import annotations

from collections.abc import Sequence

from recheck.documents.pdf.tables.body_lines import Line
from recheck.documents.pdf.tables.row_kinds import ends
from recheck.documents.pdf.tables.text_rows import is_numeric

_SHIFTED = 0.85
"""Two lines of type never stand closer than this, in em: what does is an index or a cell set lower."""

_WIDEST_LEADING = 1.5
_SAME, _WIDER = 1.08, 1.17


def rows_by_spacing(lines: Sequence[Line]) -> list[list[int]] | None:
    """The lines of each row, where two distances of lines tell rows from lines within; None where they do not.

    Each row must have a name, and each cell of several lines be one value: so blocks of rows that
    are set apart from one another are not taken for rows.
    """
    steps = _steps(lines)
    sizes = [line.row.size for line in lines[1:]]
    real = [step for step, size in zip(steps, sizes, strict=True) if step >= _SHIFTED * size]
    if len(real) < 2 or min(real) > _WIDEST_LEADING * max(sizes):
        return None
    least = min(real)
    if any(_SAME * least < step < _WIDER * least for step in real):
        return None
    groups = [[0]]
    for at, step in enumerate(steps, start=1):
        if step < _WIDER * least:
            groups[-1].append(at)
        else:
            groups.append([at])
    if not 1 < len(groups) < len(lines) or not all(_is_row([lines[at] for at in group]) for group in groups):
        return None
    return groups


def _steps(lines: Sequence[Line]) -> list[float]:
    """How far below the one before each line stands; an index that is lowered does not count."""
    usual = sorted(line.row.size for line in lines)[len(lines) // 2]
    steps, base = [], lines[0].row.base
    for line in lines[1:]:
        step = line.row.base - base
        if line.row.size < 0.87 * usual and step < _SHIFTED * usual:
            steps.append(0.0)
            continue
        steps.append(step)
        base = line.row.base
    return steps


def _is_row(lines: Sequence[Line]) -> bool:
    if any(line.numbers for line in lines) and not any(line.label for line in lines):
        return False
    return all(_is_value(texts) for texts in _columns(lines).values())


def _columns(lines: Sequence[Line]) -> dict[int, list[str]]:
    """What stands in each column, the first left out, line by line."""
    found: dict[int, list[str]] = {}
    for line in lines:
        for at, text in line.cells.items():
            if at:
                found.setdefault(at, []).append(text)
    return found


def _is_value(texts: Sequence[str]) -> bool:
    """Whether the lines of a cell go on one in the other, so far as they are numbers."""
    so_far = texts[0]
    for text in texts[1:]:
        if (is_numeric(text) or is_numeric(so_far)) and not ends(so_far, text):
            return False
        so_far = f"{so_far} {text}"
    return True


def are_torn(lines: Sequence[Line], rows: Sequence[Sequence[int]], errors: bool) -> bool:
    """Whether cells look like parts of values: brackets without their other half, or that stand under a number."""
    above: dict[int, str] = {}
    for row in rows:
        cells = {at: " ".join(texts) for at, texts in _columns([lines[i] for i in row]).items()}
        for at, text in cells.items():
            before = above.get(at, "")
            if any(map(str.isdigit, text)) and _brackets(text):
                return True
            if not errors and text.startswith(("(", "[")) and is_numeric(before) and before[0] not in "([":
                return True
        above = cells
    return False


def _brackets(text: str) -> int:
    """How many more brackets are opened than closed, or the other way; half-open intervals have one of each."""
    return sum(map(text.count, "([")) - sum(map(text.count, ")]"))
