"""Tests beside several rows: which categories or which groups one test speaks of."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import lru_cache

from recheck.model import Confidence, Printed
from recheck.reading.tables.bundles import Bundle
from recheck.reading.tables.compared import SAME_ROW, SAME_ROWS, Link, everyone
from recheck.reading.tables.frame import Found, Frame
from recheck.reading.tables.grid import Sheet

OPEN_ROWS = "whether the test compares the columns or the rows below is not sure"
_OPEN_BLOCK = "which categories the test is about is not sure"
_OTHER_DF = "the rows and columns beside the test are not as many as its df say"
_WHOLE = (98.5, 101.5)
"""What the percentages of categories that exclude each other add up to, rounded."""


def rows_of_test(frame: Frame, row: int, bundle: Bundle) -> tuple[int, ...]:
    """The rows that a test stands beside: those of its merged cell, those under its sub-heading, or those below without a test.

    A row with a test or a dash of its own ends the block, as does a row under another name.
    """
    sheet = frame.sheet
    tall = spanned_rows(frame, row, bundle)
    if len(tall) > 1:
        return tall
    own = sheet.row_header(row).path
    over = own if sheet.is_subheading(row) else own[:-1]
    rows = [row]
    for below in range(row + 1, sheet.rows.stop):
        path = sheet.row_header(below).path
        if (
            sheet.is_subheading(below)
            or path[: len(over)] != over
            or any(frame.pieces(below, column) for column in bundle.columns)
        ):
            break
        rows.append(below)
    return tuple(rows)


def spanned_rows(frame: Frame, row: int, bundle: Bundle) -> tuple[int, ...]:
    """The rows over which the cells of a test are merged."""
    slots = [slot for column in bundle.columns if (slot := frame.sheet.slot(row, column)) is not None]
    tall = max((slot.cell.row_span for slot in slots), default=1)
    return tuple(r for r in range(row, row + tall) if r in frame.sheet.rows)


# -- groups in rows -------------------------------------------------------------------------------------


def rows_are_groups(
    frame: Frame, members: Sequence[Found], row: int, bundle: Bundle, values: Mapping[str, Printed]
) -> bool:
    """Whether rows with one summary each are the groups that the test beside the first of them compares.

    Sure where its cell is merged over them, where the column of their names says so, where the same names
    come again under other outcomes, or where their ns give its df; a variable that was not tested leaves
    its place empty too.
    """
    spanned = len(spanned_rows(frame, row, bundle)) == len(members)
    if spanned or frame.sheet.is_subheading(row) or frame.groups_in_rows:
        return True
    path = frame.sheet.row_header(row).path
    names = tuple(frame.sheet.row_header(member.row).last for member in members)
    if len(path) > 1 and _again(frame, path[:-1], names):
        return True
    return sizes_give_df(members, values)


def sizes_give_df(members: Sequence[Found], values: Mapping[str, Printed]) -> bool:
    """Whether the ns of groups give the df of their test."""
    sizes = [member.claim.values.get("n") for member in members]
    df = values.get("df2") or values.get("df")
    if df is None or any(size is None for size in sizes):
        return False
    return sum(int(size.value) for size in sizes if size is not None) - len(members) == df.value


def _again(frame: Frame, over: tuple[str, ...], names: tuple[str, ...]) -> bool:
    """Whether rows of the same names stand under another heading."""
    return any(own == names for heading, own in _names_under(frame.sheet).items() if heading != over)


@lru_cache(maxsize=4)
def _names_under(sheet: Sheet) -> Mapping[tuple[str, ...], tuple[str, ...]]:
    """The names of the rows under each heading of a block."""
    found: dict[tuple[str, ...], list[str]] = {}
    for row in sheet.rows:
        path = sheet.row_header(row).path
        if not sheet.is_subheading(row) and len(path) > 1:
            found.setdefault(path[:-1], []).append(path[-1])
    return {heading: tuple(own) for heading, own in found.items()}


# -- counts ---------------------------------------------------------------------------------------------


def link_to_counts(
    frame: Frame, members: Sequence[Found], row: int, bundle: Bundle, values: Mapping[str, Printed]
) -> Link:
    """Link a test to the counts of its row, or of all rows of its block; none where the block is not sure."""
    counts = [m for m in members if m.claim.kind == "count" and not everyone(m.claim)]
    if len(counts) < 2:
        return Link()
    filled = sorted({member.row for member in counts})
    groups = len({member.columns for member in counts})
    if groups < 2 or len(counts) != groups * len(filled):
        return Link(note=_OPEN_BLOCK)
    df = values.get("df")
    if (
        df is not None
        and "chi2" in values
        and df.decimals <= 0
        and df.value != max(len(filled) - 1, 1) * (groups - 1)
    ):
        return Link(note=_OTHER_DF)
    whole = frame.sheet.is_subheading(row) or len(spanned_rows(frame, row, bundle)) > 1
    if len(filled) > 1 and not whole and not _partition(frame, counts):
        return Link(note=_OPEN_BLOCK)
    confidence: Confidence = "high" if frame.confidence == "high" else "medium"
    return Link(
        tuple(member.claim.id for member in counts),
        SAME_ROW if len(filled) == 1 else SAME_ROWS,
        confidence,
        of_counts=True,
    )


def _partition(frame: Frame, counts: Sequence[Found]) -> bool:
    """Whether the counts of each column add up to the size of its group, or their shares to 100%."""
    for columns in {member.columns for member in counts}:
        held = [member.claim.values for member in counts if member.columns == columns]
        size = frame.sizes.get(columns[0])
        added = sum(values["count"].value for values in held if "count" in values)
        shares = sum(values["percent"].number for values in held if "percent" in values)
        if (size is None or added != size.value) and not _WHOLE[0] <= shares <= _WHOLE[1]:
            return False
    return True
