"""A run of text with its place: every character knows where it stands."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from recheck.model.printed import Box

PassageKind = Literal["body", "heading", "caption", "note", "table", "figure", "references", "aside"]
"""`aside` is what surrounds the text: running heads, page and line numbers, banners."""

LEVELS = " | "
"""What divides the levels of a heading, the outermost first, in the row and column of a place, and in what claims name."""


@dataclass(frozen=True, slots=True)
class Place:
    """Where something stands, always with a quote."""

    quote: str
    page: int | None = None
    box: Box | None = None
    section: str | None = None
    paragraph: int | None = None
    line: int | None = None
    table: str | None = None
    row: str | None = None
    column: str | None = None


@dataclass(frozen=True, slots=True, eq=False)
class Layout:
    """Where each character of a text stands on its pages.

    `pages` has shape (n,), counted from 1; `boxes` shape (n, 4) in points: left, top, right,
    bottom from the top left corner of the page as it is shown. A character that the reader put in
    itself (a space at a line's end) has the page of its neighbour and a box of zero width.
    """

    pages: NDArray[np.int32]
    boxes: NDArray[np.float32]

    def box(self, start: int, end: int) -> tuple[int | None, Box | None]:
        """Page on which the characters start, and the box around those that stand on that page."""
        end = max(end, start + 1)
        pages = self.pages[start:end]
        if not len(pages):
            return None, None
        page = int(pages[0])
        boxes = self.boxes[start:end][pages == page]
        solid = boxes[boxes[:, 2] > boxes[:, 0]]
        if len(solid):
            boxes = solid
        low, high = boxes.min(axis=0), boxes.max(axis=0)
        left, top, right, bottom = (round(float(x), 2) for x in (low[0], low[1], high[2], high[3]))
        return page, (left, top, right, bottom)


@dataclass(frozen=True, slots=True, eq=False)
class Passage:
    """A run of text with one place: a paragraph, a heading, a caption, a note, a cell.

    `marks`, where given, has one character for each of `text`: `^` raised, `_` lowered, a space
    for the base line. `layout` is there for paged documents, `line` for plain text.
    """

    text: str
    kind: PassageKind = "body"
    section: str | None = None
    paragraph: int | None = None
    line: int | None = None
    marks: str = ""
    layout: Layout | None = None
    table: str | None = None
    row: str | None = None
    column: str | None = None

    def place(self, start: int, end: int, quote: str | None = None) -> Place:
        """Give the place of the characters from `start` up to `end`."""
        page, box = self.layout.box(start, end) if self.layout else (None, None)
        line = None if self.line is None else self.line + self.text.count("\n", 0, start)
        return Place(
            quote=" ".join(self.text[start:end].split()) if quote is None else quote,
            page=page,
            box=box,
            section=self.section,
            paragraph=self.paragraph,
            line=line,
            table=self.table,
            row=self.row,
            column=self.column,
        )
