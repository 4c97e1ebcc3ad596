"""Columns of a change beside the two measures that it lies between: `Before | After | Difference`, each a mean with its SD."""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache

import regex

from recheck.reading.tables.grid import Sheet
from recheck.reading.tables.legend import Legend
from recheck.reading.tables.roles import Role
from recheck.reading.views import TIMEOUT


@cache
def _times() -> tuple[regex.Pattern[str], regex.Pattern[str]]:
    """Headings of the first and of the last measure."""
    return (
        regex.compile(
            r"\b(?:before|baseline|pre(?:[- ]?test|[- ]?training)?|initial|start)\b", regex.IGNORECASE
        ),
        regex.compile(
            r"\b(?:after|post(?:[- ]?test|[- ]?training)?|follow[- ]?up|final|end)\b", regex.IGNORECASE
        ),
    )


def without_changes(roles: Mapping[int, Role], sheet: Sheet, legend: Legend) -> dict[int, Role]:
    """The roles of the columns, without `mean difference` over means and SDs of a change.

    Only where the caption or the notes say that the table prints means with their SD and nothing else, and one heading
    names a first and one a last measure: a difference between groups is printed with its SE as a rule.
    """
    found = dict(roles)
    if legend.forms != (("mean", "sd"),):
        return found
    heads = [sheet.column_header(column).text for column in sheet.columns]
    if not all(any(time.search(head, timeout=TIMEOUT) for head in heads) for time in _times()):
        return found
    for column, role in roles.items():
        cells = [sheet.slot(row, column) for row in sheet.rows]
        texts = [
            slot.view.text for slot in cells if slot is not None and any(c.isdigit() for c in slot.view.text)
        ]
        pairs = bool(texts) and all("±" in text or "(" in text for text in texts)
        if role.quantities == ("mean_difference",) and pairs:
            del found[column]
    return found
