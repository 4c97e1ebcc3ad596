"""Lines of a table's body joined to its rows: labels and cells that run on over several lines."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise

import numpy as np
import regex

from recheck.documents.pdf.tables.body_lines import Line
from recheck.documents.pdf.tables.row_kinds import ends, is_open
from recheck.documents.pdf.tables.spacing import are_torn, rows_by_spacing

JOINED = "which lines make up one row is not sure"

_CLOSE = 0.86
_SAME = 0.85
_UNFINISHED = regex.compile(
    r"(?:[,;/&(\[]|\p{L}[–-]|\b(?:and|or|of|the|for|in|to|with|by|on|at|from|per|via|a|an|vs\.?|than|as|is))$",
    regex.IGNORECASE,
)

_VALUE_AND_BRACKET = regex.compile(r"[-−–+]?[\d.,]+\s*[(\[]")


def rows_joined(lines: Sequence[Line], parted: Sequence[float]) -> tuple[list[list[int]], bool]:
    """The lines of each row, and whether some were joined by guess.

    `parted` are the heights of rules and band edges; where nearly each line or few lines stand
    between two of them they tell the rows.
    """
    if _tell_rows(lines, parted):
        return _between(lines, parted), False
    spaced = rows_by_spacing(lines)
    if spaced is not None:
        return spaced, are_torn(lines, spaced, False) or _is_label_lower(lines, spaced)
    usual = _usual(lines)
    apart, errors = _headings_apart(lines, usual), _has_error_rows(lines)
    rows: list[list[int]] = []
    guessed = False
    for at, line in enumerate(lines):
        if rows and not _between_rules(lines[at - 1], line, parted):
            verdict = _runs_on([lines[i] for i in rows[-1]], line, lines[at + 1 : at + 3], usual)
            first = lines[rows[-1][0]]
            if (
                not verdict
                and apart
                and first.label
                and first.numbers
                and _plain_label(lines[at - 1], line, usual)
                and not _is_outdented(lines[at - 1], line, lines[at + 1 : at + 2])
            ):
                verdict = "sure"
            if not verdict and not errors and _completes(lines[at - 1], line):
                close = line.row.base - lines[at - 1].row.base < (0.86 if line.label else 1.05) * usual
                verdict = "sure" if close or _are_brackets_of(lines[at - 1], line) else "guess"
            if verdict:
                rows[-1].append(at)
                guessed |= verdict == "guess"
                continue
        rows.append([at])
    nameless = (row for row in rows if _is_nameless([lines[i] for i in row], errors))
    guessed |= any(_step_beside(lines, row) < 0.93 * usual for row in nameless)
    return rows, guessed or are_torn(lines, rows, errors) or _is_label_lower(lines, rows)


def _in_brackets(line: Line) -> bool:
    """Whether all that stands in a line are numbers in brackets, without a label."""
    return not line.label and all(
        text.startswith(("(", "[")) and any(map(str.isdigit, text)) for text in line.cells.values()
    )


def _has_error_rows(lines: Sequence[Line]) -> bool:
    """Whether numbers in brackets stand under most rows, as standard errors do in tables of regressions.

    Where other rows have them behind the number, in one line, the cells were too narrow for both.
    """
    named = sum(bool(line.label and line.numbers) for line in lines)
    below = sum(map(_in_brackets, lines))
    beside = sum(any(_VALUE_AND_BRACKET.match(line.cells[at]) for at in line.numbers) for line in lines)
    return below >= 0.5 * named and not beside


def _completes(before: Line, line: Line) -> bool:
    """Whether each cell of a line is the rest of the one above it: "10.0" and "(1.8)", "0.43 ±" and "0.02"."""
    rest = [at for at in line.cells if at]
    if line.label and not (before.label and _continues(line.label.lstrip())):
        return False
    return bool(rest) and all(at in before.cells and ends(before.cells[at], line.cells[at]) for at in rest)


def _is_label_lower(lines: Sequence[Line], rows: Sequence[Sequence[int]]) -> bool:
    """Whether the first row of numbers has no label and later ones have: labels may stand in the middle of theirs."""
    with_numbers = [[lines[at] for at in row] for row in rows if any(lines[at].numbers for at in row)]
    named = [any(line.label for line in row) for row in with_numbers]
    return bool(named) and not named[0] and any(named)


def _are_brackets_of(before: Line, line: Line) -> bool:
    """Whether a line has a bracket for each number of the line before, and nothing else."""
    columns = before.cells.keys() - {0}
    return columns == line.cells.keys() - {0} and all(line.cells[at][0] in "([" for at in columns)


def _step_beside(lines: Sequence[Line], row: Sequence[int]) -> float:
    """How close the nearest line above or below a row stands."""
    first, last = row[0], row[-1]
    above = lines[first].row.base - lines[first - 1].row.base if first else float("inf")
    below = lines[last + 1].row.base - lines[last].row.base if last + 1 < len(lines) else float("inf")
    return min(above, below)


def _is_nameless(row: Sequence[Line], errors: bool) -> bool:
    """Whether a row of numbers has no name: it may belong to the row above it or below."""
    if any(line.label or len(line.numbers) < len(line.cells) for line in row):
        return False
    return not (errors and all(map(_in_brackets, row)))


def _headings_apart(lines: Sequence[Line], usual: float) -> bool:
    """Whether some lines with a label alone are set apart as sub-headings: bold, or with room above."""
    alone = [
        (one, two) for one, two in pairwise(lines) if set(two.cells) == {0} and one.numbers and one.label
    ]  # fmt: skip
    plain = [_plain_label(one, two, usual) for one, two in alone]
    return any(plain) and not all(plain)


def _plain_label(before: Line, line: Line, usual: float) -> bool:
    """Whether a label alone follows a row of numbers directly, and is not set apart from its label."""
    close = line.row.base - before.row.base < 1.06 * usual
    return set(line.cells) == {0} and bool(before.label) and close and line.row.bold == before.row.bold


def _is_outdented(before: Line, line: Line, after: Sequence[Line]) -> bool:
    """Whether a line begins left of those before and after it, as sub-headings do."""
    if not before.label or not after or not after[0].label or _continues(line.label.lstrip()):
        return False
    return line.left < min(before.left, after[0].left) - 0.4 * line.row.size


def _usual(lines: Sequence[Line]) -> float:
    """The usual distance of two rows that both have numbers; the smallest of the frequent ones."""
    steps = sorted(
        two.row.base - one.row.base
        for one, two in pairwise(lines)
        if one.numbers and two.numbers and one.label and two.label and not _completes(one, two)
    )
    if steps:
        return steps[len(steps) // 4]
    return max((two.row.base - one.row.base for one, two in pairwise(lines)), default=0.0)


def _between_rules(one: Line, two: Line, parted: Sequence[float]) -> bool:
    return any(one.row.base < at < two.row.base - 0.3 * two.row.size for at in parted)


def _tell_rows(lines: Sequence[Line], parted: Sequence[float]) -> bool:
    """Whether rules or bands part the rows: most of them hold one line of numbers, none of them many."""
    inner = [at for at in parted if lines[0].row.base < at < lines[-1].row.base]
    if len(inner) < 2:
        return False
    groups = _between(lines, parted)
    with_numbers = [sum(bool(lines[at].numbers) for at in group) for group in groups]
    return len(groups) >= 0.55 * len(lines) and float(np.mean(np.array(with_numbers) <= 1)) > 0.9


def _between(lines: Sequence[Line], parted: Sequence[float]) -> list[list[int]]:
    place = np.searchsorted(
        np.sort(np.array(parted)), [line.row.base - 0.25 * line.row.size for line in lines]
    )
    groups: list[list[int]] = []
    for at, number in enumerate(place.tolist()):
        if at and number == place[at - 1]:
            groups[-1].append(at)
        else:
            groups.append([at])
    return groups


def _runs_on(row: Sequence[Line], line: Line, after: Sequence[Line], usual: float) -> str:
    """Whether a line goes on with the row before it: "" for no, "sure", or "guess"."""
    last = row[-1]
    step = line.row.base - last.row.base
    close = step < _CLOSE * usual
    have = frozenset().union(*(one.numbers for one in row))
    label = " ".join(one.label for one in row if one.label)
    if 0.25 * line.row.size < step < _SAME * line.row.size and last.cells.keys().isdisjoint(line.cells):
        # Lines of one column never stand so close: these are cells side by side, one set lower.
        return "sure"
    if have & line.numbers:
        return "sure" if _halves(last, line) else ""
    if step > 1.25 * usual and step > 1.6 * line.row.size:
        return ""
    if not line.label:
        return _without_label(row, line, have, close)
    if not label:
        # The label's first line stands higher or lower than the numbers in the middle of it.
        return (
            "guess"
            if close and not (have and line.numbers) and len(row) == 1 and _centred(last, line, after)
            else ""
        )
    return _wrapped_label(label, row, line, after, close)


def _without_label(row: Sequence[Line], line: Line, have: frozenset[int], close: bool) -> str:
    if line.numbers:
        # Numbers in the middle of a label of two lines, or a cell that was set lower.
        return "guess" if close and not (have & line.numbers) else ""
    return "" if _in_brackets(line) else "sure"


def _halves(last: Line, line: Line) -> bool:
    """Whether every number of a line completes one that the line before leaves open: "(0.83," and "0.99)"."""
    return all(is_open(last.cells.get(at, "")) for at in line.numbers)


def _centred(last: Line, line: Line, after: Sequence[Line]) -> bool:
    return bool(line.label) and not line.numbers and bool(last.numbers)


def _wrapped_label(label: str, row: Sequence[Line], line: Line, after: Sequence[Line], close: bool) -> str:
    """Whether a label goes on in the first column of the next line."""
    start = line.label.lstrip()
    open_ = label.count("(") > label.count(")") or label.count("[") > label.count("]")
    runs_on = bool(_UNFINISHED.search(label)) or open_ or _continues(start)
    have = any(one.numbers for one in row)
    if have and (line.numbers or _is_outdented(row[0], line, after)):
        return ""
    if close:
        return "sure"
    if have:
        deeper = after and after[0].label and after[0].left > line.left + 0.6 * line.row.size
        return "sure" if runs_on and not line.cells.keys() - {0} and not deeper else ""
    if line.numbers or line.cells.keys() - {0}:
        return "sure" if open_ or (bool(_UNFINISHED.search(label)) and _continues(start)) else ""
    return "sure" if runs_on else ""


def _continues(start: str) -> bool:
    return start[:1] in tuple("([{") or (start[:1].islower() and len(start.split()[0]) > 1)
