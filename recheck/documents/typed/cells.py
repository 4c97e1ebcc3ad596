"""Cells of tables that are typed as text: their words, their lines, what is ruled off."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import regex

from recheck.documents.grids import Spanned, depths
from recheck.documents.pieces import Grid
from recheck.documents.typed.inline import without_markup
from recheck.model import Passage

_HARD_SPACE = regex.compile(r"&(?:nbsp|ensp|emsp|#160);|[\u00a0\u2002\u2003\u2007]")
_HARD_SPACES = regex.compile(rf"(?:{_HARD_SPACE.pattern})+")
_LINE_BREAK = regex.compile(r"\s*<br\s*/?>\s*", regex.IGNORECASE)
_SPACES = regex.compile(r"[ \t]+")


@dataclass(frozen=True, slots=True)
class Typed:
    """A cell as it is typed: its text with markup, the line on which it begins, how many columns it spans, its indent."""

    text: str
    line: int
    span: int = 1
    indent: int = 0


def typed_grid(rows: Sequence[Sequence[Typed]], header_rows: int = 0, doubts: tuple[str, ...] = ()) -> Grid:
    """Make a grid of typed cells; indents of the first column are numbered."""
    known = depths((row[0].indent for row in rows[header_rows:] if row and row[0].text.strip()), step=0)
    made = []
    for at, row in enumerate(rows):
        cells = [_spanned(cell, heading=at < header_rows) for cell in row]
        if cells and at >= header_rows:
            depth = known.get(row[0].indent, 0)
            cells[0] = Spanned(cells[0].passage, 1, row[0].span, cells[0].heading, depth)
        made.append(tuple(cells))
    return Grid(tuple(made), header_rows, doubts)


def _spanned(cell: Typed, *, heading: bool) -> Spanned:
    text, marks = cell_text(cell.text)
    return Spanned(Passage(text, "table", line=cell.line, marks=marks), 1, cell.span, heading)


def cell_text(typed: str) -> tuple[str, str]:
    """The text of a cell without its markup, and its marks."""
    text = _HARD_SPACES.sub(" ", typed.strip())
    text = _SPACES.sub(" ", _LINE_BREAK.sub("\n", text)).strip()
    if "|" in text:
        text = text.replace("\\|", "|")
    text, marks = without_markup(text)
    return text, marks if marks.strip() else ""


def hard_indent(typed: str) -> int:
    """How many hard spaces a cell begins with."""
    match = _HARD_SPACES.match(typed.lstrip(" "))
    return 0 if match is None else len(_HARD_SPACE.findall(match[0]))
