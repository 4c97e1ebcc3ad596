"""Lines of a table's body, cut into the columns in which their words stand."""

from __future__ import annotations

from dataclasses import dataclass

from recheck.documents.pdf.tables.edges import NARROWEST, Columns
from recheck.documents.pdf.tables.text_rows import Row, is_numeric


@dataclass(frozen=True, slots=True, eq=False)
class Line:
    """One line of a body: its text in each column that it stands in."""

    row: Row
    cells: dict[int, str]
    left: float

    @property
    def numbers(self) -> frozenset[int]:
        """The columns, the first left out, that hold numbers."""
        return frozenset(at for at, text in self.cells.items() if at and is_numeric(text))

    @property
    def label(self) -> str:
        """What stands in the first column."""
        return self.cells.get(0, "")


def line_of(row: Row, columns: Columns) -> Line:
    """The cells of one line."""
    column = columns.of(row)
    if len(row.chunks(NARROWEST)) == 1 and sum(map(str.isalpha, row.text)) > sum(map(str.isdigit, row.text)):
        # A label that is longer than those beside numbers.
        column = [min(column)] * len(column)
    cells: dict[int, list[str]] = {}
    for at, text in zip(column, row.texts, strict=True):
        cells.setdefault(at, []).append(text)
    return Line(row, {at: " ".join(texts) for at, texts in cells.items()}, row.left)
