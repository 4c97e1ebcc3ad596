"""The names of the rows of a table, with the sub-headings over them."""

from __future__ import annotations

from functools import cache
from typing import Protocol

import regex

from recheck.model import LEVELS, Table
from recheck.reading.tables.headings import told
from recheck.reading.tables.shapes import MARKS, kind_of
from recheck.reading.tables.slots import Slot
from recheck.reading.views import TIMEOUT


class Grid(Protocol):
    """What the names of rows are read from: the cells of a table by place, their texts and kinds."""

    table: Table
    head: int
    stubs: tuple[int, ...]
    columns: tuple[int, ...]
    slots: dict[tuple[int, int], Slot]
    texts: dict[tuple[int, int], str]
    kinds: dict[tuple[int, int], str]


@cache
def _bullet() -> regex.Pattern[str]:
    return regex.compile(r"^(?:[•·‣▪–—*-]+[ ]|[ ]+)+")


class RowNames:
    """The names of the rows of one block, with the sub-headings over them."""

    def __init__(self, grid: Grid, rows: range) -> None:
        self.grid = grid
        self.rows = rows
        self.subheadings: set[int] = set()
        self.paths: dict[tuple[int, int], tuple[str, ...]] = {}
        self.tests = tuple(c for c in grid.columns if _is_test(grid, c))
        self.folds = self._folds()
        self.indented = len({self._indent(row) for row in rows if self._label(row)}) > 1
        self._read()

    def _label(self, row: int) -> str:
        column = self.grid.stubs[0] if self.grid.stubs else 0
        return self.grid.texts.get((row, column), "") if self.grid.stubs else ""

    def _indent(self, row: int) -> int:
        slot = self.grid.slots.get((row, self.grid.stubs[0] if self.grid.stubs else 0))
        if slot is None:
            return 0
        raw = slot.cell.passage.text
        lead = len(raw) - len(raw.lstrip("\u00a0\u2002\u2003\u2007 \t"))
        bullet = bool(_bullet().match(raw.lstrip(), timeout=TIMEOUT))
        return 4 * slot.cell.indent + lead + 2 * bullet

    def _read(self) -> None:
        over: list[tuple[int, str, int]] = []
        filled: dict[int, str] = {}
        for row in self.rows:
            label = self._subheading(row)
            if label is not None:
                self.subheadings.add(row)
                over = self._under(over, row, label)
                filled = {}
                self.paths[row, self._first] = tuple(text for _, text, _ in over)
                continue
            over = self._ended(over, row)
            names = self._named(row, filled)
            levels = tuple(text for _, text, _ in over)
            self._folded(row, levels, names)

    @property
    def _first(self) -> int:
        return self.grid.stubs[0] if self.grid.stubs else 0

    def _folded(self, row: int, levels: tuple[str, ...], names: dict[int, str]) -> None:
        folds = self.folds
        for index, fold in enumerate(folds):
            end = folds[index + 1] if index + 1 < len(folds) else self.grid.table.columns
            own = tuple(name for column, name in names.items() if fold <= column < end and name)
            self.paths[row, fold] = (*levels, *own) if index == 0 else own

    def _starts(self, row: int, column: int) -> bool:
        """Whether a name is not that of the stub before it, spread over both."""
        slot = self.grid.slots.get((row, column))
        return slot is not None and (slot.cell.column == column or slot.cell.column not in self.grid.stubs)

    def _folds(self) -> tuple[int, ...]:
        """Columns at which a list starts anew: its names stand under the same heading as the first."""
        grid, first = self.grid, self._first
        head = grid.texts.get((grid.head - 1, first), "") if grid.head else ""
        again = [c for c in grid.stubs if c > first and head and self._heads_anew(c, head)]
        return (first, *again)

    def _heads_anew(self, column: int, head: str) -> bool:
        slot = self.grid.slots.get((self.grid.head - 1, column))
        return slot is not None and slot.cell.column == column and slot.view.text.strip() == head

    def _subheading(self, row: int) -> str | None:
        """The text of a row that holds nothing but a name, or a name and the test of what stands below it."""
        grid = self.grid
        cells = {
            id(s.cell): s
            for c in range(grid.table.columns)
            if (s := grid.slots.get((row, c))) and s.view.text.strip()
        }
        if not cells:
            return None
        slots = list(cells.values())
        text = slots[0].view.text.strip()
        wide = slots[0].cell.column_span >= max(2, grid.table.columns - len(self.tests) - 1)
        if len(slots) == 1 and wide and kind_of(text) != "number":
            return _plain_label(text)
        values = [c for c in grid.columns if grid.texts.get((row, c)) and grid.kinds[row, c] != "none"]
        labels = [c for c in grid.stubs if grid.texts.get((row, c))]
        if not labels or any(c not in self.tests for c in values):
            return None
        if values and not (row + 1 < self.rows.stop and self._only_numbers(row + 1)):
            return None
        if any(
            grid.kinds.get((row, c)) == "none" and not MARKS.issuperset(grid.texts[row, c])
            for c in grid.columns
        ):
            return None
        return LEVELS.join(_plain_label(grid.texts[row, c]) for c in labels)

    def _only_numbers(self, row: int) -> bool:
        """Whether a row has numbers outside the columns of tests and none in them."""
        grid = self.grid
        mine = any(grid.kinds.get((row, c)) == "number" for c in grid.columns if c not in self.tests)
        return mine and not any(grid.kinds.get((row, c)) == "number" for c in self.tests)

    def _under(self, over: list[tuple[int, str, int]], row: int, label: str) -> list[tuple[int, str, int]]:
        """The sub-headings that hold from this one on."""
        indent = self._indent(row)
        if self.indented:
            kept = [
                level for level in over if level[0] < indent or (level[2] == row - 1 and level[0] <= indent)
            ]
        else:
            kept = [level for level in over if level[2] == row - 1]
        return [*kept, (indent, label, row)]

    def _ended(self, over: list[tuple[int, str, int]], row: int) -> list[tuple[int, str, int]]:
        """Leave the sub-headings that a row is no longer under."""
        if not over:
            return over
        indent = self._indent(row)
        if self._named_anew(over[-1][2], row):
            return []
        if self.indented and self._indents_below(over[-1][2]):
            return [level for level in over if level[0] < indent]
        label = told(self._label(row))
        own = label.quantities if not label.percent_unit or "count" in label.quantities else ()
        first = told(self._label(over[-1][2] + 1)).quantities if over[-1][2] + 1 in self.rows else ()
        return [] if own and not first and len(label.name) > 1 else over

    def _named_anew(self, over: int, row: int) -> bool:
        """Whether a row names its own outer level, where the row after the sub-heading took it from that: `Minor`, `Major`."""
        deeper = self.grid.stubs[1:]
        own = bool(self._label(row)) and any(self.grid.texts.get((row, c)) for c in deeper)
        return own and over + 1 in self.rows and not self._label(over + 1) and row != over + 1

    def _indents_below(self, row: int) -> bool:
        """Whether the row after a sub-heading is moved in."""
        return row + 1 in self.rows and self._indent(row + 1) > self._indent(row)

    def _named(self, row: int, filled: dict[int, str]) -> dict[int, str]:
        """The names of a row by column; an outer name is printed once for the rows below it."""
        grid = self.grid
        names: dict[int, str] = {}
        own = {c: _plain_label(grid.texts[row, c]) if self._starts(row, c) else "" for c in grid.stubs}
        for position, column in enumerate(grid.stubs):
            deeper = any(own[c] for c in grid.stubs[position + 1 :])
            if own[column]:
                if filled.get(column) != own[column]:
                    for c in grid.stubs[position + 1 :]:
                        filled.pop(c, None)
                filled[column] = own[column]
            elif (deeper or not any(own.values())) and column in filled:
                own[column] = filled[column]
            names[column] = own[column]
        return names


def _plain_label(text: str) -> str:
    return " ".join(_bullet().sub("", text, timeout=TIMEOUT).split())


_TESTS = frozenset(
    ("p", "t", "F", "chi2", "z", "u", "w", "r", "df", "df1", "df2", "d", "g", "partial_eta2", "eta2", "other")
)


def _is_test(grid: Grid, column: int) -> bool:
    """Whether the heading of a column names a test: its number may stand beside the name of the variable."""
    for row in range(grid.head - 1, -1, -1):
        text = grid.texts.get((row, column), "")
        if text:
            quantities = told(text).quantities
            if quantities:
                return set(quantities) <= _TESTS
    return False
