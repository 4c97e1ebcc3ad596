"""Finds the tables in lines of Markdown or plain text, whatever divides their columns."""

from __future__ import annotations

from collections.abc import Sequence

from recheck.documents.pieces import Grid
from recheck.documents.typed.drawn_tables import drawn_table
from recheck.documents.typed.inserted_tables import Inserted
from recheck.documents.typed.pipe_tables import pipe_table
from recheck.documents.typed.spaced_tables import spaced_table

_MOST_FAILURES = 4


class Tables:
    """The tables of some lines; `first` is the number of the first of them, from 1."""

    def __init__(self, lines: Sequence[str], first: int) -> None:
        self._lines = lines
        self._first = first
        self._inserted = Inserted(lines, first)
        self._searched = 0
        self._failures = 0

    def begins(self, at: int) -> bool:
        """Tell whether a table that is surely one, divided by pipes, drawn or in HTML, begins on a line."""
        return self._sure(at) is not None

    def at(self, at: int) -> tuple[Grid, int] | None:
        """The table that begins on line `at`, from 0, and the line after it."""
        return self._sure(at) or self._spaced(at)

    def _sure(self, at: int) -> tuple[Grid, int] | None:
        line = self._lines[at]
        if "<" in line and (inserted := self._inserted.at(at)) is not None:
            return inserted
        if "|" in line or "+" in line or "─" in line or "━" in line or "═" in line:
            return pipe_table(self._lines, at, self._first) or drawn_table(self._lines, at, self._first)
        return None

    def _spaced(self, at: int) -> tuple[Grid, int] | None:
        # Lines that look like rows and make no table are not tried from each of them: that takes time
        # with the square of their number.
        if at >= self._searched:
            self._failures = 0
        elif self._failures >= _MOST_FAILURES:
            return None
        grid, end = spaced_table(self._lines, at, self._first)
        if grid is not None:
            return grid, end
        self._searched = max(self._searched, end)
        self._failures += 1
        return None
