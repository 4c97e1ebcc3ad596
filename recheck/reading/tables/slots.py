"""A cell at its place in the grid, with its text as the grammar reads it."""

from __future__ import annotations

from dataclasses import dataclass, replace

from recheck.model import Cell, Passage
from recheck.reading.views import View, view_of


@dataclass(frozen=True, slots=True, eq=False)
class Slot:
    """A cell at a place of the grid, with its text as the grammar reads it (raised letters left out)."""

    cell: Cell
    view: View
    row: int
    column: int


def slot_view(passage: Passage) -> View:
    """The text of a cell as the grammar reads it, raised letters (footnotes) and the marks of lists left out."""
    text = passage.text
    if "^" in passage.marks:
        text = "".join(
            " " if mark == "^" and (char.isalpha() or char in ",; ") else char
            for char, mark in zip(text, passage.marks, strict=True)
        )
    return view_of(passage if text == passage.text else replace(passage, text=text))


_SIGNS = frozenset("-'~≈*·")


def printed_text(view: View) -> str:
    """The text of a name as the manuscript prints it: its own dashes and quotation marks, no footnote letters."""
    raw = view.passage.text
    chars = (
        raw[at] if char in _SIGNS and not raw[at].isalnum() else char
        for char, at in zip(view.text, view.at, strict=False)
    )
    return " ".join("".join(chars).split())
