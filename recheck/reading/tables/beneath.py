"""Tests in rows of their own beneath the groups: `F`, `df` and `P` below the means of each column."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace

from recheck.model import ClaimKind, Printed
from recheck.reading.tables.bundles import DEGREES, EFFECTS, STATISTICS, Bundle
from recheck.reading.tables.compared import SAME_COLUMN, Link, link_of
from recheck.reading.tables.frame import Found, Frame, claim_of, star_of
from recheck.reading.tables.headings import Told, told
from recheck.reading.tables.links import as_group
from recheck.reading.tables.roles import Role
from recheck.reading.tables.row_numbers import Numbers, cell_numbers, complete, kind_of
from recheck.reading.tables.saying import said_of
from recheck.reading.tables.shelf import without

_HELD = STATISTICS | DEGREES | EFFECTS | {"p"}


def claims_of(frame: Frame, found: Sequence[Found]) -> list[Found]:
    """The claims of a block with those of its rows of tests."""
    by_column: dict[int, list[Found]] = {}
    for item in found:
        for column in item.columns:
            by_column.setdefault(column, []).append(item)
    made: list[Found] = []
    start = frame.sheet.rows.start
    for rows in _rows_of_tests(frame):
        for column in frame.sheet.columns:
            test = _of_column(frame, by_column.get(column, []), rows, column, range(start, rows[0]))
            made += [test] if test is not None else []
        start = rows[-1] + 1
    compared = {one for test in made for one in test.claim.groups}
    return without([as_group(frame, item) if item.claim.id in compared else item for item in found], made)


def _rows_of_tests(frame: Frame) -> Iterator[tuple[int, ...]]:
    """Neighbouring rows that are named for parts of one test, each part once."""
    run: list[int] = []
    held: set[str] = set()
    for row in frame.sheet.rows:
        label = _label(frame, row)
        parts = set(label.quantities) if label is not None and label.whole else set()
        fits = bool(parts) and parts <= _HELD and not frame.sheet.is_subheading(row)
        if run and (not fits or parts & held or (parts & STATISTICS and held & STATISTICS)):
            yield tuple(run)
            run, held = [], set()
        if fits:
            run.append(row)
            held |= parts
    if run:
        yield tuple(run)


def _label(frame: Frame, row: int) -> Told | None:
    path = frame.sheet.row_header(row).path
    return told(path[-1]) if path else None


def _of_column(
    frame: Frame, over: Sequence[Found], rows: Sequence[int], column: int, above: range
) -> Found | None:
    """The test beneath one column; `over` are the claims that stand in the column."""
    role = frame.roles.get(column)
    beside = {item.claim.kind for item in over}
    if "correlation" in beside or (role is not None and set(role.quantities) <= _HELD | {"n", "N", "other"}):
        return None
    numbers = _numbers(frame, rows, column)
    values = numbers.values
    kind = kind_of(values, (*numbers.stated, *frame.legend.stated))
    if kind is None or kind == "correlation":
        return None
    fitted = "regression" in beside
    if fitted and kind not in ("F-test", "chi2-test"):
        return None
    members = [
        item for item in over if item.claim.kind == "group-summary" and item.row in above and not fitted
    ]
    link = _link(frame, members, values, kind)
    supported = values.keys() & (DEGREES | {"p"}) or _marked(frame, rows)
    if not (link.groups if kind == "estimate" else supported):
        return None
    return claim_of(
        frame, kind, values, rows[0], (column,), rows=tuple(rows), outcome=frame.group(column).name or frame.sheet.column_header(column).last,
        stated=said_of(kind, numbers.stated, frame.legend.stated, several=len(link.groups) > 2), notes=(link.note,) if link.note else (),
        groups=link.groups, link=link.basis, link_confidence=link.confidence,
    )  # fmt: skip


def _marked(frame: Frame, rows: Sequence[int]) -> bool:
    """Whether some number of these rows has a mark: those without are not significant."""
    pieces = (piece for row in rows for column in frame.sheet.columns for piece in frame.pieces(row, column))
    return any(star_of(piece, frame.legend) for piece in pieces)


def _numbers(frame: Frame, rows: Sequence[int], column: int) -> Numbers:
    """The parts of the test, one from each row."""
    found = Numbers()
    roles: list[Role] = []
    for row in rows:
        label = _label(frame, row)
        if label is None or not frame.sheet.starts(row, column):
            continue
        role = Role(label.quantities, df=label.df, stated=label.stated, n=label.n)
        given = cell_numbers(frame, row, column, role)
        if given:
            found.put(given, column)
            found.stated += label.stated
            roles.append(role)
    complete(found, tuple(roles), frame)
    return found


def _link(frame: Frame, members: Sequence[Found], values: dict[str, Printed], kind: ClaimKind) -> Link:
    """The summaries above, where each row is a group: their names stand once each, under one heading at most."""
    if len(members) < 2 or len({item.columns for item in members}) != 1:
        return Link()
    paths = [frame.sheet.row_header(item.row).path for item in members]
    if len({path[:-1] for path in paths}) != 1 or len({path[-1:] for path in paths}) != len(paths):
        return Link()
    renamed = [
        replace(item, claim=replace(item.claim, group=path[-1]))
        for item, path in zip(members, paths, strict=True)
    ]
    return link_of(frame, renamed, Bundle((), ()), values, kind, SAME_COLUMN)
