"""A table: cells in rows and columns, with what its caption and its notes say of them."""

from __future__ import annotations

from dataclasses import dataclass, field

from recheck.model.passage import Passage


@dataclass(frozen=True, slots=True, eq=False)
class Cell:
    """One cell. A merged cell stands at its first row and column; both are counted from 0.

    `heading` says that the format itself marks the cell as one; `indent` is the depth to which its
    text is moved in, 0 for the outermost. Lines of a cell are divided by `\\n`.
    """

    passage: Passage
    row: int
    column: int
    row_span: int = 1
    column_span: int = 1
    heading: bool = False
    indent: int = 0

    @property
    def text(self) -> str:
        """The printed text."""
        return self.passage.text


@dataclass(frozen=True, slots=True, eq=False)
class Table:
    """A table as it is printed.

    `cells` are in reading order and do not overlap; a place without a cell is empty. `header_rows`
    counts the rows that the format marks as the table's head, 0 where it does not say. `before` is
    the number of the document's passages that stand before the table; its caption and its notes are
    among those passages too. `doubts` say what is unsure about rows and columns that were inferred from a page.
    """

    cells: tuple[Cell, ...]
    rows: int
    columns: int
    label: str = ""
    caption: Passage | None = None
    notes: tuple[Passage, ...] = ()
    header_rows: int = 0
    section: str | None = None
    before: int = 0
    doubts: tuple[str, ...] = field(default=())
