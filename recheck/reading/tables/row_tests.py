"""Tests in the columns and rows of a table, linked to the summaries and counts beside them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace

from recheck.model import EFFECTS_ON_RISK, LEVELS, N_OF_GROUP, ClaimKind, Printed
from recheck.reading.tables.blocks import COEFFICIENTS
from recheck.reading.tables.bundles import Bundle, bundles_of
from recheck.reading.tables.compared import Link
from recheck.reading.tables.contingency import rows_of_test
from recheck.reading.tables.frame import Found, Frame, claim_of
from recheck.reading.tables.links import as_group, linked
from recheck.reading.tables.meant import meant
from recheck.reading.tables.row_numbers import Numbers, kind_of, numbers_of
from recheck.reading.tables.saying import said_of, tests_named
from recheck.reading.tables.shelf import Shelf
from recheck.reading.tables.which_test import OPEN, settled
from recheck.reading.tables.written import joined, of_result, result_beside


def claims_of(frame: Frame, found: Sequence[Found]) -> list[Found]:
    """The claims of a block with those of its columns of tests; `found` holds what was read of the other columns."""
    shelf = Shelf(found)
    for given in bundles_of(frame):
        bundle = meant(frame, given)
        if bundle is None or bundle.quantities & (COEFFICIENTS | EFFECTS_ON_RISK):
            continue
        kept = shelf.all()
        matrix = {column for item in kept if item.claim.kind == "correlation" for column in item.columns}
        if set(bundle.columns) <= matrix:
            continue
        done = {cell for item in kept if item.claim.kind in _TESTED for cell in item.cells}
        for row in frame.sheet.rows:
            if row not in frame.size_rows and not any((row, column) in done for column in bundle.columns):
                _read_row(frame, shelf, row, bundle)
    return [of_result(frame, shelf, item) for item in shelf.all()]


_TESTED = frozenset(("F-test", "regression", "correlation", "t-test", "chi2-test", "z-test", "rank-test"))


def _read_row(frame: Frame, shelf: Shelf, row: int, given: Bundle) -> None:
    """Put the test of one row on the shelf."""
    bundle = _settled(frame, shelf.of((row,)), row, given)
    numbers = numbers_of(frame, row, bundle)
    if not numbers.values:
        return
    rows = rows_of_test(frame, row, bundle)
    shelf.replace(rows, _with_row(frame, shelf.of(rows), row, bundle, numbers))


def _with_row(frame: Frame, kept: list[Found], row: int, bundle: Bundle, numbers: Numbers) -> list[Found]:
    """What is known of the rows of a test, with the test itself."""
    beside = result_beside(kept, row, bundle, numbers)
    if beside is not None:
        own = {(row, column) for column in numbers.columns}
        others = [item for item in kept if not own & set(item.cells)]
        return [joined(frame, others, item, bundle, numbers) if item is beside else item for item in others]
    owner = _owner_of_p(kept, row, numbers)
    if owner is not None:
        return [_compared(frame, kept, item, bundle) if item is owner else item for item in kept]
    kind = kind_of(numbers.values, (*numbers.stated, *frame.legend.stated))
    if kind is None:
        return kept
    link, members = linked(frame, kept, row, bundle, numbers.values, kind)
    kept = [as_group(frame, item) if item in members else item for item in kept]
    test = _test(frame, row, bundle, numbers, kind, link, names_groups=bool(members))
    taken = set(test.cells)
    kept = [item for item in kept if item.row != row or not taken & set(item.cells)]
    return [*_with_size_of_pairs(kept, test, frame), test]


def _owner_of_p(kept: Sequence[Found], row: int, numbers: Numbers) -> Found | None:
    """The estimate with an interval that has taken the p of its row already."""
    cells = {(row, column) for column in numbers.columns}
    if set(numbers.values) - {"p", "stars"}:
        return None
    return next((item for item in kept if "ci_low" in item.claim.values and cells <= set(item.cells)), None)


def _compared(frame: Frame, kept: Sequence[Found], item: Found, bundle: Bundle) -> Found:
    """An estimate of a difference with the two groups of its row."""
    claim = item.claim
    if claim.groups or claim.interval_of not in ("mean_difference", "estimate"):
        return item
    others = [other for other in kept if other is not item]
    link, _ = linked(frame, others, item.row, bundle, claim.values, "comparison")
    linked_claim = replace(claim, groups=link.groups, link=link.basis, link_confidence=link.confidence)
    return replace(item, claim=linked_claim) if link.groups else item


def _settled(frame: Frame, kept: Sequence[Found], row: int, bundle: Bundle) -> Bundle:
    """The bundle with the statistic that its column of several kinds holds in this row."""
    if OPEN not in bundle.quantities:
        return bundle
    roles = tuple(
        replace(role, quantities=settled(frame, kept, row, column) or ("other",))
        if role.quantities == (OPEN,)
        else role
        for column, role in bundle.parts
    )
    return replace(bundle, roles=roles)


def _test(
    frame: Frame,
    row: int,
    bundle: Bundle,
    numbers: Numbers,
    kind: ClaimKind,
    link: Link,
    *,
    names_groups: bool,
) -> Found:
    """The claim of one row's test; where the rows are groups, their own name is not that of its outcome."""
    values, notes = _sized(frame, numbers.values, kind, bundle)
    if kind != "correlation" and "r" in values:
        numbers.stated.append("effect-size-r")
    # `A × B` is made of letters that are symbols elsewhere.
    outcome = frame.row_name(row) or frame.sheet.row_header(row).last
    return claim_of(
        frame, kind, values, row, numbers.columns, outcome=outcome.rpartition(LEVELS)[0] if names_groups else outcome,
        group=bundle.group if kind == "correlation" else None,
        stated=_said(frame, kind, numbers, link, several=_omnibus(values, link)),
        interval_of=numbers.ends_of, notes=(*numbers.notes, *notes, *((link.note,) if link.note else ())),
        groups=link.groups, link=link.basis, link_confidence=link.confidence,
    )  # fmt: skip


def _said(frame: Frame, kind: ClaimKind, numbers: Numbers, link: Link, *, several: bool) -> tuple[str, ...]:
    """What is said of a test; of a p alone also the tests that the notes name, which it may come from."""
    stated = said_of(kind, numbers.stated, frame.legend.stated, several=several)
    if kind != "estimate":
        return stated
    if link.of_counts:
        return tuple(word for word in stated if word not in _OF_MEANS)
    if link.groups:
        stated = tuple(word for word in stated if word not in ("fisher-exact", "yates", "uncorrected-chi2"))
    return tuple(dict.fromkeys((*stated, *tests_named(frame.legend.text))))


_OF_MEANS = frozenset(("rank-test", "paired", "independent", "welch", "pooled", "between-groups", "repeated"))


def _omnibus(values: Mapping[str, Printed], link: Link) -> bool:
    df1 = values.get("df1")
    return len(link.groups) > 2 or (df1 is not None and df1.value != 1)


def _with_size_of_pairs(kept: list[Found], test: Found, frame: Frame) -> list[Found]:
    """The summaries of a paired test with the N of the caption, which is that of each measurement."""
    size, df = frame.legend.N, test.claim.values.get("df")
    if (
        not test.claim.says("paired")
        or size is None
        or df is None
        or df.value != size.value - 1
        or len(test.claim.groups) != 2
    ):
        return kept
    return [
        replace(item, claim=replace(item.claim, values={**item.claim.values, "n": size}, notes=(*item.claim.notes, N_OF_GROUP)))
        if item.claim.id in test.claim.groups and not {"n", "N"} & set(item.claim.values) else item
        for item in kept
    ]  # fmt: skip


def _sized(
    frame: Frame, values: Mapping[str, Printed], kind: ClaimKind, bundle: Bundle
) -> tuple[dict[str, Printed], tuple[str, ...]]:
    """A correlation or a χ² with the n that the heading, the caption or a note prints for all of them."""
    values = dict(values)
    if kind not in ("correlation", "chi2-test") or {"n", "N"} & set(values):
        return values, ()
    own = next((role.n for role in bundle.roles if role.n), None)
    legend = frame.legend
    size = own or legend.N or legend.each
    if size is None or (kind == "chi2-test" and (own is not None or legend.N is None)):
        return values, ()
    values["n" if own is not None else "N"] = size
    return values, (N_OF_GROUP,)
