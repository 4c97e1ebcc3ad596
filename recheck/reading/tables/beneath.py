"""Tests in rows of their own beneath the groups: `F`, `df` and `P` below the means of each column."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace

from recheck.model import ClaimKind, Printed
from recheck.reading.tables.bundles import DEGREES, EFFECTS, STATISTICS, Bundle
from recheck.reading.tables.compared import SAME_COLUMN, SAME_COLUMNS, Link, link_of
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
            over = [item for c in _under(frame, rows, column) for item in by_column.get(c, [])]
            test = _of_column(frame, over, rows, column, range(start, rows[0]))
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


def _under(frame: Frame, rows: Sequence[int], column: int) -> range:
    """The columns that the cells of a test span, if all do: `t` printed once below two groups."""
    spans = {
        slot.cell.column_span
        for row in rows
        if (slot := frame.sheet.slot(row, column)) and slot.cell.column == column
    }
    return range(column, column + (spans.pop() if len(spans) == 1 else 1))


def _only_one(frame: Frame, rows: Sequence[int], column: int) -> bool:
    """Whether the columns beside have numbers above but no test: the one test may be of all columns, whose cell nobody marked."""
    others = [c for c in frame.sheet.columns if c != column]
    tested = any(piece.numbers for row in rows for c in others for piece in frame.pieces(row, c))
    above = range(frame.sheet.rows.start, rows[0])
    return not tested and any(
        piece.numbers for row in above for c in others for piece in frame.pieces(row, c)
    )


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
    spanned = len(_under(frame, rows, column)) > 1
    link = (_link_across if spanned else _link)(frame, members, values, kind)
    supported = values.keys() & (DEGREES | {"p"}) or _marked(frame, rows)
    if not (link.groups if kind == "estimate" else supported):
        return None
    name = frame.group(column).name or frame.sheet.column_header(column).last
    outcome = None if spanned or (members and _only_one(frame, rows, column)) else name
    return claim_of(
        frame, kind, values, rows[0], (column,), rows=tuple(rows), outcome=outcome,
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


def _link_across(frame: Frame, members: Sequence[Found], values: dict[str, Printed], kind: ClaimKind) -> Link:
    """The summaries above a test that spans their columns: one in each, all of one row."""
    if len({item.row for item in members}) != 1 or len({item.columns for item in members}) != len(members):
        return Link()
    named = [
        replace(item, claim=replace(item.claim, group=item.claim.group or item.claim.outcome))
        for item in members
    ]
    return link_of(frame, named, Bundle((), ()), values, kind, SAME_COLUMNS)
