"""From the tables of a document to their claims."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

from recheck.model import Table
from recheck.reading.context import Setting
from recheck.reading.tables import beneath, matrices, model_fit, regression, row_tests, sources
from recheck.reading.tables.counts import counts_of, whole_numbers
from recheck.reading.tables.estimates import estimates_of
from recheck.reading.tables.folding import folded
from recheck.reading.tables.foreign import of_other_studies
from recheck.reading.tables.frame import Found, Frame, frame_of
from recheck.reading.tables.grid import sheets_of
from recheck.reading.tables.legend import legend_of
from recheck.reading.tables.results import ReadText, told_in_cells
from recheck.reading.tables.summaries import summaries_of
from recheck.reading.tables.unfolding import unfolded
from recheck.reading.tables.units import bands_of, units_of

AFTER: tuple[Callable[[Frame, Sequence[Found]], list[Found]], ...] = (
    sources.claims_of, matrices.claims_of, regression.claims_of, row_tests.claims_of, beneath.claims_of,
    model_fit.claims_of,
)  # fmt: skip
"""Readers of tests and coefficients; each gives all claims of the block, those it was given completed, replaced or left out."""


MOST_PLACES = 20_000
"""Places of the largest table that is read: a thousand rows of twenty columns take about a second."""


@dataclass(frozen=True, slots=True, eq=False)
class TableReading:
    """The claims of one table, how many of its numbers nothing names, and whether it is too large to be read."""

    found: tuple[Found, ...]
    unnamed: int = 0
    too_large: bool = False


def read_table(table: Table, setting: Setting, read_text: ReadText | None = None) -> TableReading:
    """The claims of one table, in the order of its rows.

    `read_text` reads cells that hold whole results, as prose. A pattern that takes too long raises TimeoutError.
    """
    if table.rows * table.columns > MOST_PLACES:
        return TableReading((), too_large=True)
    legend = legend_of(table)
    found: list[Found] = []
    unnamed = 0
    for sheet in sheets_of(folded(unfolded(table), legend)):
        frame = frame_of(sheet, legend, setting)
        claims = _block(frame, read_text)
        found += claims
        unnamed += _unnamed(frame, claims)
    return TableReading(tuple(found), unnamed)


def _block(frame: Frame, read_text: ReadText | None) -> list[Found]:
    found: list[Found] = []
    if of_other_studies(frame):
        return found
    units = [unit for band in bands_of(frame) for unit in units_of(frame, band)]
    for unit in units:
        found += summaries_of(frame, unit)
        found += estimates_of(frame, unit)
    found += counts_of(frame, units)
    found += list(whole_numbers(frame, found))
    if read_text is not None:
        found += told_in_cells(frame, found, read_text)
    for reader in AFTER:
        found = reader(frame, found)
    return sorted(found, key=lambda item: (item.row, item.columns))


def _unnamed(frame: Frame, found: Sequence[Found]) -> int:
    """How many cells with numbers no claim took, although nothing says that they are something else."""
    taken = {cell for item in found for cell in item.cells}
    return sum(
        (row, column) not in taken
        and column not in frame.roles
        and any(piece.has_value for piece in frame.pieces(row, column))
        for row in frame.sheet.rows
        for column in frame.sheet.columns
        if row not in frame.size_rows
    )
