"""Tests that are written out in a cell, `t(90) = 1.21`, alone or beside a column of p."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from recheck.model import ClaimKind
from recheck.reading.tables.bundles import Bundle
from recheck.reading.tables.compared import generic
from recheck.reading.tables.contingency import rows_of_test
from recheck.reading.tables.frame import Found, Frame, claim_of
from recheck.reading.tables.links import linked
from recheck.reading.tables.row_numbers import Numbers
from recheck.reading.tables.saying import said_of
from recheck.reading.tables.shelf import Shelf


def result_beside(kept: Sequence[Found], row: int, bundle: Bundle, numbers: Numbers) -> Found | None:
    """The test that is written out in the cell before a column of p: `t(90) = 1.21` | `.230`."""
    if set(numbers.values) - {"p", "stars", "d", "eta2", "partial_eta2"}:
        return None
    before = bundle.columns[0] - 1
    tests = [
        item for item in kept
        if item.row == row and before in item.columns and {"t", "F", "chi2", "z", "u", "r"} & set(item.claim.values)
    ]  # fmt: skip
    return tests[0] if len(tests) == 1 and "p" not in tests[0].claim.values else None


def of_result(frame: Frame, shelf: Shelf, item: Found) -> Found:
    """A test that is written out in a cell of its own column, with its groups and what the legend says of it."""
    claim = item.claim
    if (
        claim.kind not in _WRITTEN
        or claim.groups
        or len(item.columns) != 1
        or item.columns[0] in frame.roles
        or item.rows
    ):
        return item
    if not any(piece.shape == "result" for piece in frame.pieces(item.row, item.columns[0])):
        return item
    name = frame.sheet.column_header(item.columns[0]).text
    bundle = Bundle(item.columns, (), name=name)
    beside = [
        other for other in shelf.of(rows_of_test(frame, item.row, bundle)) if other.claim.id != claim.id
    ]
    link, _ = linked(frame, beside, item.row, bundle, claim.values, claim.kind)
    stated = said_of(claim.kind, claim.stated, frame.legend.stated)
    kind: ClaimKind = (
        "rank-test" if claim.kind == "z-test" and "rank-test" in frame.legend.stated else claim.kind
    )
    if kind == "rank-test":
        stated = tuple(dict.fromkeys((*stated, *said_of(kind, (), frame.legend.stated))))
    made = replace(
        claim, kind=kind, stated=stated, group=None if generic(name) else claim.group, groups=link.groups, link=link.basis,
        link_confidence=link.confidence,
    )  # fmt: skip
    return replace(item, claim=made)


_WRITTEN = frozenset(("t-test", "F-test", "chi2-test", "z-test", "rank-test"))


def joined(frame: Frame, kept: Sequence[Found], test: Found, bundle: Bundle, numbers: Numbers) -> Found:
    """The test with the p of its own column, and with its groups."""
    values = {**test.claim.values, **numbers.values}
    columns = (*test.columns, *(c for c in numbers.columns if c not in test.columns))
    link, _ = linked(
        frame, [item for item in kept if item is not test], test.row, bundle, values, test.claim.kind
    )
    claim = test.claim
    made = claim_of(
        frame, claim.kind, values, test.row, columns, outcome=claim.outcome, group=claim.group,
        stated=said_of(claim.kind, claim.stated, (*numbers.stated, *frame.legend.stated)), interval_of=claim.interval_of,
        notes=claim.notes, groups=link.groups, link=link.basis, link_confidence=link.confidence,
    )  # fmt: skip
    return replace(made, claim=replace(made.claim, confidence=claim.confidence))
