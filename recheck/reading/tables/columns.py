"""Which columns of a table name its rows, and which hold numbers."""

from __future__ import annotations

from typing import Protocol

from recheck.model import Table
from recheck.reading.tables.headings import told
from recheck.reading.tables.shapes import JUDGES, NAMES_LEVELS, NAMES_TESTS, compound, kind_of
from recheck.reading.tables.slots import Slot
from recheck.reading.views import TIMEOUT


class Grid(Protocol):
    """What columns are told from: the cells of a table by place, their texts and kinds, the rows of headings."""

    table: Table
    head: int
    slots: dict[tuple[int, int], Slot]
    texts: dict[tuple[int, int], str]
    kinds: dict[tuple[int, int], str]


class Columns:
    """The columns of one table."""

    def __init__(self, grid: Grid) -> None:
        self.grid = grid

    def told(self) -> tuple[tuple[int, ...], tuple[int, ...]]:
        """The columns that name the rows, and those that hold numbers."""
        stubs: list[int] = []
        columns: list[int] = []
        for column in range(self.grid.table.columns):
            kinds = [
                kind
                for row in range(self.grid.head, self.grid.table.rows)
                if (kind := self.grid.kinds.get((row, column)))
                and self.grid.slots[row, column].cell.column_span < max(2, self.grid.table.columns - 1)
            ]
            numbers = sum(kind == "number" for kind in kinds)
            named = sum(kind == "words" for kind in kinds)
            if (column == 0 and not self._numbers_first()) or (
                column == len(stubs) and ((named and self._unheaded(column)) or self._names_levels(column))
            ):
                stubs.append(column)
            elif numbers == 0 or named > 1.5 * numbers:
                # A column of words among numbers names rows only where a list of its own begins with it.
                results = numbers or self._with_words(column)
                if self._says_nothing(column) or (
                    columns and named and not results and not self._list(column)
                ):
                    continue
                if named and not (self._quantity_over(column) and results) and not self._names_tests(column):
                    stubs.append(column)
                elif self._quantity_over(column):
                    columns.append(column)
            else:
                columns.append(column)
        last = max(columns, default=-1)
        return tuple(s for s in stubs if s < last or s == 0), tuple(columns)

    def _unheaded(self, column: int) -> bool:
        """Whether nothing of its own stands over a column, and no number in it has decimals or brackets."""
        head = [self.grid.slots.get((row, column)) for row in range(self.grid.head)]
        own = any(slot and slot.view.text.strip() and slot.cell.column == column for slot in head)
        body = (self.grid.texts.get((row, column), "") for row in range(self.grid.head, self.grid.table.rows))
        return (
            self.grid.head > 0
            and not own
            and not any(compound().search(text, timeout=TIMEOUT) for text in body)
        )

    def _names_levels(self, column: int) -> bool:
        """Whether a column behind the names tells which level or time each row is about: `Level`, `Month`."""
        heads = [text for row in range(self.grid.head) if (text := self.grid.texts.get((row, column), ""))]
        body = [
            text
            for row in range(self.grid.head, self.grid.table.rows)
            if (text := self.grid.texts.get((row, column), ""))
        ]
        return (
            column > 0
            and bool(heads and body)
            and bool(NAMES_LEVELS.fullmatch(heads[-1].strip(" .*†"), timeout=TIMEOUT))
            and not any(compound().search(text, timeout=TIMEOUT) for text in body)
        )

    def _list(self, column: int) -> bool:
        """Whether a second list of rows may begin with a column: under the heading of the first, or under none."""
        heads = [self.grid.texts.get((row, column), "") for row in range(self.grid.head)]
        return not any(heads) or self.grid.texts.get((self.grid.head - 1, 0), "") in ("", heads[-1])

    def _with_words(self, column: int) -> bool:
        """Whether a column under a quantity holds words with results: `RR 0.77 (0.25 to 2.38)`."""
        body = (self.grid.texts.get((row, column), "") for row in range(self.grid.head, self.grid.table.rows))
        return self._quantity_over(column) and any(compound().search(text, timeout=TIMEOUT) for text in body)

    def _says_nothing(self, column: int) -> bool:
        """Whether a column of words behind the first judges what stands in its row: it is no part of the name."""
        heads = [text for row in range(self.grid.head) if (text := self.grid.texts.get((row, column), ""))]
        return column > 0 and bool(heads) and bool(JUDGES.search(heads[-1], timeout=TIMEOUT))

    def _numbers_first(self) -> bool:
        """Whether the first column holds results, not names: no column of names at all."""
        texts = [
            text
            for row in range(self.grid.head, self.grid.table.rows)
            if (text := self.grid.texts.get((row, 0), ""))
        ]
        results = [t for t in texts if kind_of(t) == "number" and compound().search(t, timeout=TIMEOUT)]
        return (
            bool(texts)
            and len(results) == len(texts)
            and bool(told(self.grid.texts.get((max(self.grid.head - 1, 0), 0), "")).quantities)
        )

    def _names_tests(self, column: int) -> bool:
        """Whether a column behind others names the test of each row: that is no part of the row's name."""
        heads = [text for row in range(self.grid.head) if (text := self.grid.texts.get((row, column), ""))]
        return (
            column > 0
            and bool(heads)
            and bool(NAMES_TESTS.fullmatch(heads[-1].strip(" .*†"), timeout=TIMEOUT))
        )

    def _quantity_over(self, column: int) -> bool:
        return any(told(self.grid.texts.get((row, column), "")).quantities for row in range(self.grid.head))
