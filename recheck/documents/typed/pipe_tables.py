"""Tables of Markdown whose columns are divided by pipes."""

from __future__ import annotations

from collections.abc import Sequence

import regex

from recheck.documents.pieces import Grid
from recheck.documents.typed.cells import Typed, hard_indent, typed_grid

_RULE = regex.compile(r"\s*+\|?+\s*+:?-++:?\s*+(?:[|+]\s*+:?-++:?\s*+)*+\|?\s*+")
_PIPE = regex.compile(r"(?<!\\)(?:\\\\)*+\K\|")
_NO_RULE = ("no line rules off the head of the table",)


def pipe_table(lines: Sequence[str], at: int, first: int) -> tuple[Grid, int] | None:
    """The table that begins on line `at`, and the line after it; `first` is added to count lines from 1."""
    if "|" not in lines[at]:
        return None
    ruled = at + 1 < len(lines) and _is_rule(lines[at + 1], len(_cells(lines[at])))
    bare = not ruled and _is_rule(lines[at], 2)
    if not ruled and not bare:
        return _unruled(lines, at, first)
    start = at if ruled else at + 1
    end = _end(lines, at + (2 if ruled else 1))
    kept = [row for row in range(start, end) if row != at + 1 or not ruled]
    width = max(len(_cells(lines[row])) for row in (kept or [at]))
    if width < 2 or len(kept) < 1 + ruled:
        return None
    heads = int(ruled and any(cell.strip() for cell in _cells(lines[at])))
    return typed_grid(_rows(lines, kept, first), heads), end


def _unruled(lines: Sequence[str], at: int, first: int) -> tuple[Grid, int] | None:
    """Lines with pipes at both ends and equally many between, without a line that rules off their head."""
    width, end = len(_cells(lines[at])), at
    while end < len(lines) and _is_framed(lines[end]) and len(_cells(lines[end])) == width:
        end += 1
    kept = [row for row in range(at, end) if not _is_rule(lines[row], 1)]
    if len(kept) < 2 or width < 2:
        return None
    return typed_grid(_rows(lines, kept, first), 0, _NO_RULE), end


def _is_framed(line: str) -> bool:
    inner = line.strip()
    return len(inner) > 1 and inner.startswith("|") and inner.endswith("|")


def _is_rule(line: str, width: int) -> bool:
    """Whether a line is nothing but dashes, with as many cells as the head needs."""
    return _RULE.fullmatch(line) is not None and "|" in line and len(_cells(line.replace("+", "|"))) >= width


def _end(lines: Sequence[str], at: int) -> int:
    while at < len(lines) and lines[at].strip() and _PIPE.search(lines[at]):
        at += 1
    return at


def _cells(line: str) -> list[str]:
    inner = line.strip()
    parts = _PIPE.split(inner)
    if inner.startswith("|"):
        parts = parts[1:]
    if parts and not parts[-1].strip() and inner.endswith("|"):
        parts = parts[:-1]
    return parts


def _rows(lines: Sequence[str], kept: Sequence[int], first: int) -> list[list[Typed]]:
    rows = [[Typed(text, row + first) for text in _cells(lines[row])] for row in kept]
    indents = _indents([row[0].text for row in rows[1:]])
    for row, indent in zip(rows[1:], indents, strict=True):
        row[0] = Typed(row[0].text, row[0].line, indent=indent)
    return rows


def _indents(stubs: Sequence[str]) -> list[int]:
    """How far each cell of the first column is moved in; spaces that only set a column flush right are none."""
    ends = {len(stub.rstrip()) for stub in stubs if stub.strip()}
    flush = len(ends) == 1 and len({len(stub.strip()) for stub in stubs if stub.strip()}) > 1
    spaces = [0 if flush else len(stub) - len(stub.lstrip(" ")) for stub in stubs]
    usual = min((count for count, stub in zip(spaces, stubs, strict=True) if stub.strip()), default=0)
    return [
        hard_indent(stub) + (count - usual if count - usual > 1 else 0)
        for stub, count in zip(stubs, spaces, strict=True)
    ]
