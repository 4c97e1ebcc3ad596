"""A table as a reader sees it: headings over columns, names before rows, numbers between them."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field

from recheck.model import LEVELS, Table
from recheck.reading.tables.columns import Columns
from recheck.reading.tables.flat_heads import parted
from recheck.reading.tables.headings import told
from recheck.reading.tables.row_names import RowNames
from recheck.reading.tables.shapes import (
    PERCENT,
    YEAR,
    compound,
    kind_of,
    size_only,
)
from recheck.reading.tables.slots import Slot, printed_text, slot_view
from recheck.reading.views import TIMEOUT

__all__ = ["Header", "Sheet", "Slot", "sheet_of", "sheets_of", "slot_view"]


@dataclass(frozen=True, slots=True)
class Header:
    """What stands over a column or before a row, outermost first."""

    path: tuple[str, ...] = ()

    @property
    def text(self) -> str:
        """All levels in one text."""
        return LEVELS.join(self.path)

    @property
    def last(self) -> str:
        """The innermost level, "" where there is none."""
        return self.path[-1] if self.path else ""


_NO_HEADER = Header()
_ANSWERS = frozenset(("yes", "no", "x", "✓", "✔", "included", "not included"))


@dataclass(frozen=True, slots=True, eq=False)
class Sheet:
    """One block of a table: rows that share their headings.

    `rows` are the numbers of its rows below the headings, `columns` those of the columns that hold
    numbers; `stubs` those of the columns that name rows; `names` gives the printed form of
    names whose dashes the grammar writes alike; `folds` the columns at which a list of rows starts (two
    where two lists stand side by side). A table whose headings change further down
    is several sheets.
    """

    table: Table
    rows: range
    columns: tuple[int, ...]
    stubs: tuple[int, ...]
    slots: Mapping[tuple[int, int], Slot]
    column_headers: Mapping[int, Header]
    row_headers: Mapping[tuple[int, int], Header]
    subheadings: frozenset[int]
    folds: tuple[int, ...] = (0,)
    names: Mapping[str, str] = field(default_factory=dict)

    def slot(self, row: int, column: int) -> Slot | None:
        """The cell that covers this place, None where nothing is printed."""
        found = self.slots.get((row, column))
        return found if found is not None and found.view.text.strip() else None

    def starts(self, row: int, column: int) -> bool:
        """Whether a cell starts here, so that a spanned one is read once."""
        found = self.slots.get((row, column))
        return found is not None and found.cell.column == column and found.cell.row == row

    def row_header(self, row: int, column: int | None = None) -> Header:
        """The name of a row, sub-headings above it as outer levels.

        In a table that is folded (two lists side by side) `column` tells which of the two lists is meant.
        """
        fold = self.folds[0]
        if column is not None and len(self.folds) > 1:
            fold = max((start for start in self.folds if start <= column), default=fold)
        return self.row_headers.get((row, fold), _NO_HEADER)

    def column_header(self, column: int) -> Header:
        """The headings over a column."""
        return self.column_headers.get(column, _NO_HEADER)

    def is_subheading(self, row: int) -> bool:
        """Whether a row only names the rows below it."""
        return row in self.subheadings


def sheet_of(table: Table) -> Sheet | None:
    """The first block of a table, None where it holds no numbers in a grid."""
    return next(iter(sheets_of(table)), None)


def sheets_of(table: Table) -> tuple[Sheet, ...]:
    """The blocks of a table, from its top; none where it is a text in boxes."""
    grid = _Grid(table)
    if not grid.numeric:
        return ()
    return tuple(grid.sheets())


class _Grid:
    """The cells of a table by place, and what can be told from their shapes alone."""

    def __init__(self, table: Table) -> None:
        self.table = table
        self.slots: dict[tuple[int, int], Slot] = {}
        for cell in table.cells:
            view = slot_view(cell.passage)
            for row in range(cell.row, cell.row + cell.row_span):
                for column in range(cell.column, cell.column + cell.column_span):
                    self.slots[row, column] = Slot(cell, view, row, column)
        self.texts = {place: slot.view.text.strip() for place, slot in self.slots.items()}
        self.kinds = {place: kind_of(text) for place, text in self.texts.items()}
        self.head = self._head()
        self.stubs, self.columns = Columns(self).told()
        self.numeric = self._has_numbers(range(self.head, table.rows))

    # -- rows of headings

    def _head(self) -> int:
        """How many rows from the top are headings."""
        rows = self.table.rows
        marked = min(self.table.header_rows, rows)
        if not marked:
            while marked < rows and self._marked(marked):
                marked += 1
        if marked:
            while marked > 1 and self._body_like(marked - 1):
                marked -= 1
            marked = 0 if self._body_like(0) and self.table.columns > 1 else marked
        else:
            marked = self._guessed()
        while 0 < marked < rows and (self._continues(marked) or self._spanned_into(marked)):
            marked += 1
        return marked if marked < rows else 0

    def _spanned_into(self, row: int) -> bool:
        """Whether headings over columns of numbers reach down into a row that holds no results: it is one of theirs."""
        reaching = [s for s in self._row(row) if s.cell.row < row and s.column > 0 and s.view.text.strip()]
        own = [s for s in self._row(row) if s.cell.row == row and s.view.text.strip()]
        return bool(reaching and own) and all(
            self.kinds[row, s.column] == "words" for s in own if s.column > 0
        )

    def _marked(self, row: int) -> bool:
        cells = [slot.cell for slot in self._row(row) if slot.view.text.strip()]
        return bool(cells) and all(cell.heading for cell in cells)

    def _row(self, row: int) -> list[Slot]:
        return [slot for column in range(self.table.columns) if (slot := self.slots.get((row, column)))]

    def _body_like(self, row: int) -> bool:
        """Whether most cells of a row behind its first hold numbers that no heading has."""
        texts = [self.texts.get((row, column), "") for column in range(1, self.table.columns)]
        filled = [text for text in texts if text and not PERCENT.fullmatch(text)]
        results = [t for t in filled if kind_of(t) == "number" and compound().search(t, timeout=TIMEOUT)]
        return len(filled) > 0 and 2 * len(results) > len(filled)

    def _guessed(self) -> int:
        """The rows before the first that holds a number behind its first column."""
        for row in range(min(self.table.rows, 6)):
            texts = [self.texts.get((row, column), "") for column in range(1, self.table.columns)]
            numbers = [text for text in texts if kind_of(text) == "number"]
            if numbers and not self._numbers_as_headings(row, numbers):
                while row > 1 and self._names_alone(row - 1):
                    row -= 1
                return row
        return 0

    def _names_alone(self, row: int) -> bool:
        """Whether a row holds nothing behind its first cell: a name over the rows below it."""
        return bool(self.texts.get((row, 0))) and not any(
            self.texts.get((row, c)) for c in range(1, self.table.columns)
        )

    def _numbers_as_headings(self, row: int, numbers: Sequence[str]) -> bool:
        """Years, or the numbers 1, 2, 3 … of a matrix, over columns whose first cell names nothing or the rows."""
        if row > 1:
            return False
        plain = [text.rstrip(". )") for text in numbers]
        years = all(YEAR.fullmatch(text) for text in plain)
        counted = plain == [str(k) for k in range(1, len(plain) + 1)] and len(plain) > 1
        return years or counted

    def _continues(self, row: int) -> bool:
        """`n = 24` in all its filled cells: a row under the names of the groups."""
        texts = [text for column in range(self.table.columns) if (text := self.texts.get((row, column), ""))]
        if self.texts.get((row, 0)) and not size_only().match(texts[0], timeout=TIMEOUT):
            return False
        return bool(texts) and all(size_only().match(text, timeout=TIMEOUT) for text in texts)

    # -- sheets

    def sheets(self) -> Iterator[Sheet]:
        """Each run of rows below its own headings."""
        base = tuple(range(self.head))
        start, levels = self.head, base
        row = self.head
        while row < self.table.rows:
            if self._new_heading(row):
                if row > start and self._has_numbers(range(start, row)):
                    yield self._sheet(range(start, row), levels)
                over = [row]
                while row + 1 < self.table.rows and (self._new_heading(row + 1) or self._continues(row + 1)):
                    row += 1
                    over.append(row)
                levels = (*self._kept(base, over), *over)
                start = row + 1
            elif levels != base and self._ends_inner_head(base, levels, start, row):
                if self._has_numbers(range(start, row)):
                    yield self._sheet(range(start, row), levels)
                levels, start = base, row
            row += 1
        if start < self.table.rows and self._has_numbers(range(start, self.table.rows)):
            yield self._sheet(range(start, self.table.rows), levels)

    def _ends_inner_head(self, base: Sequence[int], levels: Sequence[int], start: int, row: int) -> bool:
        """Whether a row begins a new section behind one that had headings of its own.

        Only where sections were named so before the inner headings came, and the inner headings name their section.
        """
        inner = [level for level in levels if level not in base]
        before = range(self.head, min(inner))
        return (
            row > start
            and row + 1 < self.table.rows
            and self._names_alone(row)
            and not self._names_alone(start)
            and all(self.texts.get((level, 0)) for level in inner)
            and any(self._names_alone(above) for above in before)
        )

    def _has_numbers(self, rows: range) -> bool:
        return any(
            self.kinds.get((row, column)) == "number"
            or compound().search(self.texts.get((row, column), ""), timeout=TIMEOUT)
            for row in rows
            for column in self.columns
        )

    def _new_heading(self, row: int) -> bool:
        """Whether a row below the top gives new headings: words in its columns of numbers, numbers below them."""
        if row <= 0 or row < self.head or row + 1 >= self.table.rows:
            return False
        if (
            self._marked(row)
            and len({id(slot.cell) for slot in self._row(row) if slot.view.text.strip()}) > 1
        ):
            return any(self.kinds.get((row, column)) == "words" for column in self.columns)
        filled = {
            id(s.cell): self.kinds[row, c]
            for c in self.columns
            if (s := self.slots.get((row, c))) and self.kinds[row, c]
        }
        if not filled or any(kind != "words" for kind in filled.values()) or self._answers(row):
            return False
        if len(filled) == 1 and (len(self.columns) > 1 or self.texts.get((row, 0))):
            return False
        if 2 * sum(1 for c in self.columns if self.kinds.get((row, c))) < len(
            self.columns
        ) and self.texts.get((row, 0)):
            return False
        below = range(row + 1, min(row + 3, self.table.rows))
        return any(
            self.kinds.get((r, c)) == "number"
            for r in below
            for c in self.columns
            if self.kinds.get((row, c)) == "words"
        )

    def _answers(self, row: int) -> bool:
        """Whether a row tells of each column that something is so or not: `Controls | No | No | Yes`."""
        told_ = [self.texts[row, c].lower() for c in self.columns if self.texts.get((row, c))]
        return bool(self.texts.get((row, 0))) and set(told_) <= _ANSWERS and len(set(told_)) < len(told_)

    def _kept(self, base: tuple[int, ...], over: Sequence[int]) -> tuple[int, ...]:
        """The rows of the first headings that still hold: none where the new ones name every column anew."""
        renamed = all(
            any(self.kinds.get((row, column)) for row in over)
            for column in self.columns
            if any(self.texts.get((row, column)) for row in base)
        )
        # Groups with their sizes are not renamed by a row of words: `Oven | Deck | Rack`.
        sized = self._sized(base) and not self._sized(over)
        return () if renamed and not sized and any(self.texts.get((row, 0)) for row in over) else base

    def _sized(self, rows: Sequence[int]) -> bool:
        return any(
            told(self.texts.get((row, column), "")).n is not None for row in rows for column in self.columns
        )

    def _sheet(self, rows: range, levels: Sequence[int]) -> Sheet:
        names = RowNames(self, rows)
        return Sheet(
            self.table, rows, self.columns, self.stubs, self.slots,
            {column: Header(path) for column, path in self._column_paths(levels).items()},
            {place: Header(path) for place, path in names.paths.items()}, frozenset(names.subheadings), names.folds,
            self._printed(),
        )  # fmt: skip

    def _printed(self) -> dict[str, str]:
        words_ = [slot for place, slot in self.slots.items() if self.kinds[place] == "words"]
        pairs = ((" ".join(slot.view.text.split()), printed_text(slot.view)) for slot in words_)
        return {text: printed for text, printed in pairs if text != printed}

    def _column_paths(self, levels: Sequence[int]) -> dict[int, tuple[str, ...]]:
        return parted({column: self._column_path(column, levels) for column in range(self.table.columns)})

    def _column_path(self, column: int, levels: Sequence[int]) -> tuple[str, ...]:
        path: list[str] = []
        for index, row in enumerate(levels):
            text = self.texts.get((row, column), "") or self._from_left(row, column, levels[index + 1 :])
            if text and (not path or path[-1] != text):
                path.append(text)
        return tuple(path)

    def _from_left(self, row: int, column: int, below: Sequence[int]) -> str:
        """A heading over several columns that is printed over the first of them alone, as text files do.

        Only where nothing in its row is marked to span, and the headings below come again and again.
        """
        if not below or any(slot.cell.column_span > 1 for slot in self._row(row)):
            return ""
        under = [self.texts.get((below[0], c), "") for c in range(self.table.columns)]
        owner = column
        while owner > 0 and not self.texts.get((row, owner)):
            owner -= 1
        if owner == 0 or not under[column] or not under[owner] or under[column] in under[owner:column]:
            return ""
        repeated = under.count(under[column]) > 1 and under.count(under[owner]) > 1
        return self.texts[row, owner] if repeated else ""
