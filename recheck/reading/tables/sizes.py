"""How many are in the groups over the columns of a table: rows of ns, headings, caption and notes."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from recheck.model import Printed
from recheck.reading.tables.grid import Sheet, Slot
from recheck.reading.tables.headings import told
from recheck.reading.tables.legend import Legend
from recheck.reading.tables.roles import Group
from recheck.reading.tables.values import pieces
from recheck.reading.tokens import words


def sizes_of(
    sheet: Sheet, legend: Legend, groups: Mapping[int, Group]
) -> tuple[frozenset[int], Mapping[int, Printed]]:
    """The rows of ns, and the n over each column."""
    sizes = {column: group.n for column, group in groups.items() if group.n is not None}
    rows: set[int] = set()
    for row in list(sheet.rows)[:_ROWS_OF_SIZES]:
        path = sheet.row_header(row).path
        label = told(path[0]) if len(path) == 1 else None
        if label and (
            (label.whole and label.quantities in (("n",), ("N",))) or (label.n is not None and not label.name)
        ):
            own = {c: value for c in sheet.columns if (value := _whole(sheet.slot(row, c))) is not None}
            if own:
                rows.add(row)
                sizes = own | sizes
    if legend.N is not None and not sizes:
        names = {name for group in groups.values() if (name := group.name.lower())}
        everyone = [c for c in sheet.columns if groups[c].name.lower() in _EVERYONE]
        for column in sheet.columns if len(names) <= 1 or measured_again(names) else everyone:
            sizes[column] = legend.N
    return frozenset(rows), sizes


def measured_again(names: Iterable[str]) -> bool:
    """Whether groups are the same people at several times, as most of their names say."""
    names = list(names)
    times = [name for name in names if not _TIMES.isdisjoint(name.lower().replace("-", " ").split())]
    return len(times) > 1 and 2 * len(times) >= len(names)


_ROWS_OF_SIZES = 4
_TIMES = words(
    "before after pre post pretest posttest baseline follow followup day week weeks month months time session year years pretraining t1 t2 t3"
)
"""Words of columns that show the same people again: the one N of the table is that of each."""
_EVERYONE = frozenset(
    (
        "total",
        "all",
        "overall",
        "total sample",
        "whole sample",
        "full sample",
        "all patients",
        "all participants",
        "value",
        "values",
    )
)


def _whole(slot: Slot | None) -> Printed | None:
    found = pieces(slot, False) if slot else ()
    value = (
        found[0].numbers[0] if len(found) == 1 and found[0].shape in ("number", "pair(", "count%") else None
    )
    return (
        value if value is not None and value.decimals == 0 and value.value > 0 and not value.percent else None
    )
