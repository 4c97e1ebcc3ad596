"""Tables of plain text whose columns are set by tabs or by spaces, with or without ruled lines."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import islice

import regex

from recheck.documents.pieces import Grid, is_note_text
from recheck.documents.sections import captioned
from recheck.documents.typed.aligned import (
    Column,
    Token,
    columns_of,
    cut_at,
    flush_right,
    row_of,
    spread,
    tokens_of,
)
from recheck.documents.typed.cells import Typed, typed_grid

_RULED = regex.compile(r"\s*[-=_─━═]{3,}(?:\s+[-=_─━═]{2,})*\s*")
_GROUPS = regex.compile(r"[-=_─━═]{2,}")
_CAPTION = regex.compile(r"\s*(?:[Tt]able)?:\s")
_DIGIT = regex.compile(r"\d")
_TWO_NUMBERS = regex.compile(r"\d\.\d+[*†]* +[-−+<>=]?\d*\.\d")
_BY_SPACES = ("its columns were inferred from the spaces between them",)
_BY_TABS = ("its rows have different numbers of cells",)
_LONGEST = 300
_TRIES = 3
_SHORT = 40
_WAYS = 3
_HEAD_INDENT = 6


def spaced_table(lines: Sequence[str], at: int, first: int) -> tuple[Grid | None, int]:
    """The table that begins on line `at`, and the line after it; without one, the line up to which it was looked for.

    `first` is added to count lines from 1.
    """
    if "\t" in lines[at].strip():
        return _tabbed(lines, at, first)
    if not _may_begin(lines, at):
        return None, at
    end = last = _end(lines, at)
    for _ in range(_TRIES):
        grid = _grid(lines, at, end, first) if end > at + 1 else None
        if grid is not None:
            return grid, end
        end = _shorter(lines, at, end)
    return None, last


def _tabbed(lines: Sequence[str], at: int, first: int) -> tuple[Grid | None, int]:
    end = at
    while end < len(lines) and "\t" in lines[end].strip():
        end += 1
    rows = [lines[row].rstrip().split("\t") for row in range(at, end)]
    widths = {len(row) for row in rows}
    if len(rows) < 2 or (max(widths) < 3 and len(rows) < 3) or not any(map(_DIGIT.search, lines[at:end])):
        return None, end
    typed = [
        [Typed(text, at + number + first, indent=len(text) - len(text.lstrip(" "))) for text in row]
        for number, row in enumerate(rows)
    ]
    return typed_grid(typed, 0, _BY_TABS if len(widths) > 1 else ()), end


def _may_begin(lines: Sequence[str], at: int) -> bool:
    """Whether a line is a rule, a row, or a heading over several columns with one of these under it."""
    line = lines[at]
    tokens = len(tokens_of(line))
    if _is_rule(line) or tokens > 2 or at + 1 >= len(lines):
        return _is_rule(line) or tokens > 2
    indent = len(line) - len(line.lstrip(" "))
    return (indent >= _HEAD_INDENT and _is_row(lines[at + 1])) or (tokens == 2 and _is_rule(lines[at + 1]))


def _is_rule(line: str) -> bool:
    return _RULED.fullmatch(line) is not None


def _is_row(line: str) -> bool:
    return _is_rule(line) or len(tokens_of(line)) > 1


def _groups(line: str) -> list[Column]:
    return [match.span() for match in _GROUPS.finditer(line.expandtabs(8))]


def _end(lines: Sequence[str], at: int) -> int:
    """The line after the last that can belong: rows, single words at their left, rules, single blank lines between."""
    grouped = any(len(_groups(line)) > 1 for line in lines[at : at + 6] if _is_rule(line))
    # Under dashes that mark each column the table ends with a blank line, or a last rule where it began with one.
    closed = grouped and not _is_rule(lines[at])
    end = row = at
    while row < len(lines) and row - at < _LONGEST:
        line = lines[row]
        if not line.strip():
            if closed or row + 1 >= len(lines) or not _is_row(lines[row + 1]):
                break
            if grouped and row > at + 1 and _is_rule(lines[row - 1]):
                break
        elif _CAPTION.match(line) or captioned(line.strip()):
            break
        elif _is_row(line) or len(line.strip()) < _SHORT:
            end = row + 1
        else:
            break
        row += 1
    while end > at + 1 and (not _is_row(lines[end - 1]) or is_note_text(lines[end - 1].strip(), "")):
        end -= 1
    return end


def _shorter(lines: Sequence[str], at: int, end: int) -> int:
    """The end of the table without its last part after a blank line; `at` if it has but one."""
    return next((row for row in range(end - 1, at, -1) if not lines[row].strip()), at)


@dataclass(frozen=True, slots=True)
class _Block:
    """Lines that may be a table: which of them are rules, which are rows, and where the columns stand."""

    lines: Sequence[str]
    rules: list[int]
    kept: list[int]
    tokens: list[list[Token]]
    columns: list[Column]
    sure: bool


def _blocks(lines: Sequence[str], at: int, end: int) -> Iterator[_Block]:
    """The ways to see columns in some lines, the best first."""
    rules = [row for row in range(at, end) if _is_rule(lines[row])]
    kept = [row for row in range(at, end) if lines[row].strip() and row not in rules]
    tokens = [tokens_of(lines[row]) for row in kept]
    most = max(map(len, tokens), default=0)
    for rule in rules:
        groups = _groups(lines[rule])
        if len(groups) > 1 and len(groups) >= most - 1:
            cut = [cut_at(lines[row], groups) for row in kept]
            if max(map(len, cut), default=0) == len(groups):
                yield _Block(lines, rules, kept, cut, groups, sure=True)
    if 3 * sum(_DIGIT.search(lines[row]) is not None for row in kept) < len(kept):
        return
    for columns in islice(columns_of(tokens), _WAYS):
        yield _Block(lines, rules, kept, tokens, columns, sure=False)


def _grid(lines: Sequence[str], at: int, end: int, first: int) -> Grid | None:
    for block in _blocks(lines, at, end):
        if len(block.kept) < 2 or len(block.columns) < (2 if block.rules else 3):
            return None
        rows = _rows(block, first)
        if rows is None or not (block.sure or _holds_numbers(rows)):
            continue
        heads = _heads(block)
        if block.sure and block.rules[0] == at and not all(line.strip() for line in lines[at:end]):
            rows, heads = _stacked(rows, block.kept), min(heads, 1)
        return typed_grid(rows, heads, () if block.sure else _BY_SPACES)
    return None


def _rows(block: _Block, first: int) -> list[list[Typed]] | None:
    """The cells of each line; None where they cannot be put into columns, or one of the body stands over several."""
    indented = not flush_right(block.tokens, block.columns[0])
    full = next((n for n, row in enumerate(block.tokens) if len(row) >= len(block.columns) - 1), 0)
    found = []
    for n, (row, tokens) in enumerate(zip(block.kept, block.tokens, strict=True)):
        if n < full and not block.sure:
            tokens = spread(tokens, block.columns, _ruled_under(block, row), block.tokens[n + 1])
        made = row_of(tokens, block.columns, row + first, indented=indented)
        if made is None or (n > full and len(tokens) > 1 and any(cell.span > 1 for cell in made)):
            return None
        found.append(made)
    return found


def _ruled_under(block: _Block, row: int) -> list[Column]:
    """The lines ruled right under a row that do not go over the whole table."""
    if row + 1 not in block.rules:
        return []
    groups = _groups(block.lines[row + 1])
    return groups if groups[0][0] >= block.columns[0][1] else []


def _heads(block: _Block) -> int:
    """How many rows stand over the first rule over the whole table that has rows on both sides."""
    for rule in block.rules:
        above = sum(row < rule for row in block.kept)
        if _groups(block.lines[rule])[0][0] < block.columns[0][1] and 0 < above < len(block.kept):
            return above if above <= 4 else 0
    return 0


def _stacked(rows: Sequence[Sequence[Typed]], kept: Sequence[int]) -> list[list[Typed]]:
    """Rows of a table with a blank line after each: the lines between are of one row."""
    stacks: list[list[Sequence[Typed]]] = []
    for at, row in enumerate(rows):
        if at and kept[at] == kept[at - 1] + 1 and len(row) == len(stacks[-1][0]):
            stacks[-1].append(row)
        else:
            stacks.append([row])
    return [[_one(cells) for cells in zip(*stack, strict=True)] for stack in stacks]


def _one(cells: Sequence[Typed]) -> Typed:
    printing = [cell for cell in cells if cell.text]
    first = printing[0] if printing else cells[0]
    return replace(first, text="\n".join(cell.text for cell in printing))


def _holds_numbers(rows: Sequence[Sequence[Typed]]) -> bool:
    """Whether a third of the cells after the first column have a digit, and none two decimal numbers side by side."""
    cells = [cell.text for row in rows for cell in row[1:] if cell.text]
    if any(map(_TWO_NUMBERS.search, cells)):
        return False
    return 3 * sum(_DIGIT.search(text) is not None for text in cells) >= len(cells) > 1
