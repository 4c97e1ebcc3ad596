"""Tables drawn on PDF pages for the tests, in the bakery scenario, and the grids that are read from them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from reportlab.lib.colors import Color
from reportlab.pdfgen.canvas import Canvas

from recheck.model import Document, Table
from tests.documents.pdf.making import BOLD, ROMAN, line

Cells = Sequence[str | None]


@dataclass
class Drawn:
    """How a table is drawn: a column for each letter of `align` (l, c, r or d for decimal points).

    `edges` are the places of the columns: left, middle, right edge or decimal point. `rules` are
    the numbers of rows above which a rule runs across; -1 is the one under the last row.
    """

    edges: Sequence[float]
    align: str
    rules: Sequence[int] = (0, 1, -1)
    size: float = 9
    leading: float = 12
    left: float = 60
    right: float = 535
    bold: Sequence[int] = ()
    indents: dict[int, float] = field(default_factory=dict)

    def draw(self, canvas: Canvas, y: float, rows: Sequence[Cells]) -> float:
        """Draw rows from a height (points from the top) on; gives the height under the last."""
        for at, row in enumerate(rows):
            base = y + self.leading * at
            if at in self.rules:
                self.rule(canvas, base - 0.8 * self.leading)
            for column, text in enumerate(row):
                if text:
                    shift = self.indents.get(at, 0.0) if column == 0 else 0.0
                    self.cell(canvas, column, base, text, shift, BOLD if at in self.bold else ROMAN)
        end = y + self.leading * (len(rows) - 1)
        if -1 in self.rules:
            self.rule(canvas, end + 0.4 * self.leading)
        return end + self.leading

    def cell(
        self, canvas: Canvas, column: int, y: float, text: str, shift: float = 0.0, font: str = ROMAN
    ) -> None:
        """One cell at its column's edge."""
        x, width = self.edges[column] + shift, canvas.stringWidth(text, font, self.size)
        how = self.align[column]
        if how == "c":
            x -= width / 2
        elif how == "r":
            x -= width
        elif how == "d":
            before = text.partition(".")[0].partition(" ")[0]
            x -= canvas.stringWidth(before, font, self.size)
        line(canvas, x, y, text, font, self.size)

    def rule(
        self,
        canvas: Canvas,
        y: float,
        left: float | None = None,
        right: float | None = None,
        width: float = 0.6,
    ) -> None:
        """A rule across the table, or a part of it."""
        height = canvas._pagesize[1] - y
        canvas.setLineWidth(width)
        canvas.line(
            self.left if left is None else left, height, self.right if right is None else right, height
        )


def band(canvas: Canvas, left: float, top: float, right: float, bottom: float, grey: float = 0.9) -> None:
    """A shaded band."""
    canvas.saveState()
    canvas.setFillColor(Color(grey, grey, grey))
    canvas.rect(left, canvas._pagesize[1] - bottom, right - left, bottom - top, stroke=0, fill=1)
    canvas.restoreState()


def the_table(document: Document) -> Table:
    """The only table of a document."""
    assert len(document.tables) == 1, [grid(table) for table in document.tables]
    return document.tables[0]


def grid(table: Table) -> list[list[str]]:
    """The texts of a table's cells; a cell over several columns stands at its first."""
    rows = [["" for _ in range(table.columns)] for _ in range(table.rows)]
    for cell in table.cells:
        assert not rows[cell.row][cell.column], "two cells at one place"
        rows[cell.row][cell.column] = cell.text
    return rows


def wanted(rows: Sequence[Cells]) -> list[list[str]]:
    """The texts that were drawn, as `grid` gives them."""
    return [[text or "" for text in row] for row in rows]


def spans(table: Table) -> dict[str, int]:
    """How many columns the cells over several columns cover."""
    return {cell.text: cell.column_span for cell in table.cells if cell.column_span > 1}
