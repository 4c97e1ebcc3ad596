"""The column of ns that counts for all outcomes of a row: `Rye | 18 | 92.4 (6.1) | 800 (20)`."""

from __future__ import annotations

from collections.abc import Mapping

from recheck.model import Printed
from recheck.reading.tables.grid import Sheet
from recheck.reading.tables.headings import told
from recheck.reading.tables.roles import Role
from recheck.reading.tables.values import pieces
from recheck.reading.tokens import words

_EVERYONE = words("total all overall everyone combined together sum sample")
_PEOPLE = words(
    "men women male males female females boys girls control controls intervention treatment treated placebo cases patients "
    "before after pre post pretest posttest baseline experimental group arm condition total all"
)
"""Words of columns that show some of a row's cases, or other ones: the row's n is not theirs."""


def size_column(sheet: Sheet, roles: Mapping[int, Role]) -> int | None:
    """The only column of ns, under no heading that ties it to other columns."""
    found = [c for c, role in roles.items() if role.quantities in (("n",), ("N",)) and not role.group]
    return found[0] if len(found) == 1 else None


def size_of_row(sheet: Sheet, column: int, row: int) -> Printed | None:
    """The whole number that a row prints in the column of ns."""
    slot = sheet.slot(row, column)
    found = pieces(slot, False) if slot is not None and slot.cell.row == row else ()
    value = found[0].numbers[0] if len(found) == 1 and found[0].shape == "number" else None
    whole = value is not None and value.decimals == 0 and value.value > 0 and not value.percent
    return value if whole else None


def sizes_add_up(sheet: Sheet, roles: Mapping[int, Role]) -> bool:
    """Whether the ns of two or more rows make up that of the only row named as their total: then rows are groups."""
    column = size_column(sheet, roles)
    if column is None:
        return False
    sizes = {row: n for row in sheet.rows if (n := size_of_row(sheet, column, row)) is not None}
    everyone = [row for row in sizes if _names(sheet.row_header(row).last) & _EVERYONE]
    rest = [n.value for row, n in sizes.items() if row not in everyone]
    return len(everyone) == 1 and len(rest) > 1 and sum(rest) == sizes[everyone[0]].value


def of_row_alone(heading: str) -> bool:
    """Whether a column may show all cases of a row: its heading names no group and no time."""
    return not _names(heading) & _PEOPLE


def _names(text: str) -> set[str]:
    return set(told(text).name.lower().replace("(", " ").replace(")", " ").split())
