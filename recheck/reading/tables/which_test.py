"""Which statistic a column holds that serves tests of several kinds: `t/χ²`, or `Statistic` beside the name of the test."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.reading.tables.frame import Found, Frame
from recheck.reading.tables.roles import Role
from recheck.reading.tables.shapes import NAMES_TESTS
from recheck.reading.views import TIMEOUT

OPEN = "statistic"
"""The quantity of such a column, until a row settles it."""
_OF_MEANS = frozenset(("t", "F", "z", "u", "w"))
_STATISTICS = _OF_MEANS | {"chi2"}


@cache
def _head() -> regex.Pattern[str]:
    return regex.compile(
        r"(?:test )?(?:statistics?|values?)(?: values?)?|test result|statistic", regex.IGNORECASE
    )


def with_open_columns(frame: Frame) -> Mapping[int, Role]:
    """The roles of the columns, those for several kinds of tests under the open quantity."""
    roles = dict(frame.roles)
    for column in frame.sheet.columns:
        role = roles.get(column)
        if role is None and _head().fullmatch(
            frame.sheet.column_header(column).last.strip(" .*"), timeout=TIMEOUT
        ):
            if any(_named_test(frame, row) for row in frame.sheet.rows):
                roles[column] = Role((OPEN,))
        elif role is not None and len(role.quantities) > 1 and set(role.quantities) <= _STATISTICS:
            roles[column] = replace(role, quantities=(OPEN,))
    return roles


def settled(frame: Frame, kept: Sequence[Found], row: int, column: int) -> tuple[str, ...]:
    """The statistic of the column in a row, () where nothing tells: by the name of the test, else by what the row holds."""
    role = frame.roles.get(column)
    if role is None:
        return _named_test(frame, row)
    held = {item.claim.kind for item in kept if item.row == row}
    options = set(role.quantities)
    if "group-summary" in held:
        options &= _OF_MEANS
    elif "count" in held:
        options &= {"chi2"}
    return tuple(options) if len(options) == 1 else ()


@cache
def _tests() -> tuple[tuple[regex.Pattern[str], str], ...]:
    names = (
        (r"(?:\w+ ){0,3}t(?:[- ]?tests?)?|student'?s?(?: t)?(?:[- ]?test)?|welch.*", "t"),
        (r"(?:pearson'?s? )?(?:χ²?|chi)(?:.*square.*)?2?(?:[- ]?tests?)?", "chi2"),
        (r"f(?:[- ]?tests?)?|(?:one-way )?anova", "F"),
        (r"(?:mann.{1,3}whitney )?u(?:[- ]?tests?)?|mann.{1,3}whitney(?:[- ]?tests?)?", "u"),
    )
    return tuple((regex.compile(pattern, regex.IGNORECASE), quantity) for pattern, quantity in names)


def _named_test(frame: Frame, row: int) -> tuple[str, ...]:
    """The statistic of the test that a column of names gives for a row."""
    sheet = frame.sheet
    for column in range(sheet.table.columns):
        slot = sheet.slot(row, column)
        head = sheet.column_header(column).last.strip(" .*†")
        if slot is None or not NAMES_TESTS.fullmatch(head, timeout=TIMEOUT):
            continue
        name = slot.view.text.strip(" .*†")
        return tuple(quantity for pattern, quantity in _tests() if pattern.fullmatch(name, timeout=TIMEOUT))[
            :1
        ]
    return ()
