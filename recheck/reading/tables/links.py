"""Linking the tests of a table to the summaries and counts of their row or their block of rows."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace

from recheck.model import LEVELS, ClaimKind, Printed
from recheck.reading.tables.bundles import Bundle
from recheck.reading.tables.compared import SAME_ROW, SAME_ROWS, Link, everyone, link_of
from recheck.reading.tables.contingency import (
    OPEN_ROWS,
    link_to_counts,
    rows_are_groups,
    rows_of_test,
    sizes_give_df,
    spanned_rows,
)
from recheck.reading.tables.frame import Found, Frame


def linked(
    frame: Frame,
    kept: Sequence[Found],
    row: int,
    bundle: Bundle,
    values: Mapping[str, Printed],
    kind: ClaimKind,
) -> tuple[Link, tuple[Found, ...]]:
    """The summaries or the counts that a test compares, and those summaries whose rows show to be groups."""
    if kind in ("correlation", "regression") or ("p" not in values and kind == "estimate"):
        return Link(), ()
    rows = rows_of_test(frame, row, bundle)
    members = [item for item in kept if item.row in rows and not set(item.columns) & set(bundle.columns)]
    summaries = [item for item in members if item.claim.kind == "group-summary"]
    if not summaries:
        return (
            link_to_counts(frame, members, row, bundle, values)
            if kind in ("chi2-test", "estimate")
            else Link()
        ), ()
    in_row = [item for item in summaries if item.row == row]
    if len(in_row) > 1:
        link = link_of(frame, in_row, bundle, values, kind, SAME_ROW)
        # Below a common name the test may compare the rows, not the columns: only the ns can tell.
        shared = len(summaries) > len(in_row) and not sizes_give_df(in_row, values)
        if (
            shared
            and len(frame.sheet.row_header(row).path) < _NAMED_TWICE
            and len(spanned_rows(frame, row, bundle)) < _SEVERAL_ROWS
        ):
            shared = not _tested_elsewhere(frame, row, bundle)
        return (Link(note=OPEN_ROWS) if shared and link.groups else link), ()
    if frame.sheet.is_subheading(row):
        in_row = [item for item in summaries if item.row == rows[1]] if len(rows) > 1 else []
        if kind == "estimate" and len(summaries) != 2:
            return Link(), ()
    if not _all_read(frame, rows, members, values):
        return Link(note=_UNREAD), ()
    one_each = len(in_row) == 1 and len({item.columns for item in summaries}) == 1 and len(summaries) > 1
    single = [item for item in summaries if not everyone(as_group(frame, item).claim)]
    if one_each and rows_are_groups(frame, single, row, bundle, values):
        link = link_of(frame, [as_group(frame, item) for item in single], bundle, values, kind, SAME_ROWS)
        return link, tuple(summaries) if link.groups else ()
    return Link(), ()


_UNREAD = "a row beside the test was not read, so its groups are not sure"


def _all_read(
    frame: Frame, rows: Sequence[int], members: Sequence[Found], values: Mapping[str, Printed]
) -> bool:
    """Whether each of the rows beside a test gave a claim, or df tell how many groups there are."""
    if {"df", "df1"} & set(values):
        return True
    columns = {column for item in members for column in item.columns}
    read = {row for item in members for row in item.rows or (item.row,)} | frame.size_rows
    return not any(
        piece.numbers
        for row in rows
        if row not in read
        for column in columns
        for piece in frame.pieces(row, column)
    )


_NAMED_TWICE = 2
_SEVERAL_ROWS = 2


def _tested_elsewhere(frame: Frame, row: int, bundle: Bundle) -> bool:
    """Whether other rows have tests of their own, so that one without is a variable that was not tested."""
    return any(
        piece.numbers or piece.shape == "p"
        for other in frame.sheet.rows
        for column in bundle.columns
        for piece in frame.pieces(other, column)
        if other != row
    )


def as_group(frame: Frame, item: Found) -> Found:
    """A summary whose row is the name of a group: the last level of its outcome names whom it is about."""
    claim = item.claim
    if frame.groups_in_rows:
        return item
    outer, _, last = (claim.outcome or "").rpartition(LEVELS)
    outcome = LEVELS.join(name for name in (outer, claim.group) if name) or None
    return replace(item, claim=replace(claim, outcome=outcome, group=last or claim.group))
