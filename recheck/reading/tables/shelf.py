"""The claims of a block by row: a reader of tests looks at those of a few rows alone, however long the table is."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from recheck.reading.tables.frame import Found


class Shelf:
    """Claims by the row that they begin in."""

    __slots__ = ("_rows",)

    def __init__(self, found: Iterable[Found]) -> None:
        self._rows: dict[int, list[Found]] = {}
        self._put(found)

    def of(self, rows: Iterable[int]) -> list[Found]:
        """The claims of some rows."""
        return [item for row in rows for item in self._rows.get(row, ())]

    def replace(self, rows: Sequence[int], found: Iterable[Found]) -> None:
        """Put claims in the place of all those of some rows."""
        for row in rows:
            self._rows.pop(row, None)
        self._put(found)

    def all(self) -> list[Found]:
        """All claims, row by row."""
        return [item for row in sorted(self._rows) for item in self._rows[row]]

    def _put(self, found: Iterable[Found]) -> None:
        for item in found:
            self._rows.setdefault(item.row, []).append(item)


def without(
    found: Sequence[Found], made: Sequence[Found], cells: Iterable[tuple[int, int]] = ()
) -> list[Found]:
    """Claims with new ones in the place of those that took the same cells, or some others."""
    taken = {cell for item in made for cell in item.cells} | set(cells)
    return [*(item for item in found if taken.isdisjoint(item.cells)), *made]
