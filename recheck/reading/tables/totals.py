"""What the shares of counts are of: the group's n, a row of totals, the row's own n, or what a block adds up to."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from decimal import Decimal

from recheck.model import Printed
from recheck.reading.tables.frame import Frame
from recheck.reading.tables.summaries import group_size
from recheck.reading.tables.units import Unit

_MEASURED = 3
"""Cells of a column or a block from which it shows whether its shares are those of one total."""
_WHOLE = 100
_TOTALS = frozenset(("total", "sum", "all", "overall", "gesamt", "summe", "total général", "grand total"))
_UNKNOWN = (
    "unknown", "missing", "not available", "n missing", "missing data", "not known", "not recorded", "no data", "missing values",
)  # fmt: skip


def count_of(values: Mapping[str, Printed]) -> Printed | None:
    """The number of a count unit that is counted, whatever its heading calls it."""
    return values.get("count") or values.get("n") or values.get("N")


def is_total(frame: Frame, unit: Unit) -> bool:
    """Whether a unit is the sum of its column: a row `Total` with 100 %."""
    name = frame.sheet.row_header(unit.rows[0], unit.columns[0]).last.lower().strip(" .:*")
    percent = unit.values.get("percent")
    return name in _TOTALS and percent is not None and abs(percent.value - _WHOLE) <= percent.unit


def totals_of(frame: Frame, people: Sequence[Unit]) -> Mapping[int, Printed]:
    """The total of each unit of `people` (by its position) that prints none in its cells."""
    open_ = [k for k, unit in enumerate(people) if "total" not in unit.values]
    if not open_ or _of_those_who_answered(frame):
        return {}
    of_group = _by_group(frame, people, open_)
    found = dict(of_group)
    for more in (_by_row(frame, people, open_), _by_total_row(frame, people, open_), _by_legend(frame, people, open_),
                 _by_sums(frame, people, open_)):  # fmt: skip
        found = {**more, **found}
    return found


@dataclass(frozen=True, slots=True)
class _Shared:
    """A count and its share, and the position of their unit."""

    at: int
    count: Printed
    percent: Printed

    def fits(self, total: Printed) -> bool:
        """Whether the share is that of the count in a total."""
        if total.value == 0:
            return False
        return abs(_WHOLE * self.count.value / total.value - self.percent.value) <= self.percent.unit


def _shared(people: Sequence[Unit], at: int) -> _Shared | None:
    values = people[at].values
    count, percent = count_of(values), values.get("percent")
    return _Shared(at, count, percent) if count is not None and percent is not None else None


def _blocks(
    frame: Frame, people: Sequence[Unit], open_: Iterable[int]
) -> dict[tuple[object, ...], list[int]]:
    """The units of one column under one sub-heading."""
    blocks: dict[tuple[object, ...], list[int]] = defaultdict(list)
    for at in open_:
        unit = people[at]
        outer = frame.sheet.row_header(unit.rows[0], unit.columns[0]).path[:-1]
        blocks[unit.columns[0], outer].append(at)
    return blocks


def _by_group(frame: Frame, people: Sequence[Unit], open_: Sequence[int]) -> dict[int, Printed]:
    """The group's n, less those of whom a row of the block says that nothing is known, where the shares do not refute it."""
    found: dict[int, Printed] = {}
    unknown = _unknown(frame)
    blocks = _blocks(frame, people, open_)
    fits: dict[int, list[bool]] = defaultdict(list)
    for (column, outer), block in blocks.items():
        for at in block:
            size, own = group_size(frame, people[at]), _shared(people, at)
            if size is None:
                continue
            missing = unknown.get((column, outer))
            if missing is not None and missing.value < size.value:
                rest = _less(size, missing)
                shares = [s for k in block if (s := _shared(people, k)) is not None]
                size = rest if 2 * sum(s.fits(rest) for s in shares) > len(shares) else size
            found[at] = size
            if own is not None:
                fits[people[at].columns[0]].append(own.fits(size))
    refuted = {column for column in fits if _refutes(column, fits)}
    lost = {
        at
        for block in blocks.values()
        for at in block
        if at in found and _refuted_block(people, block, found)
    }
    return {
        at: total
        for at, total in found.items()
        if people[at].columns[0] not in refuted and at not in lost and _within(people[at], total)
    }


def _within(unit: Unit, total: Printed) -> bool:
    count = count_of(unit.values)
    return count is not None and count.value <= total.value


def _refutes(column: int, fits: Mapping[int, list[bool]]) -> bool:
    """Whether the shares of a column are of something else than the group's n: of the row, or of those who answered.

    Honest tables print both kinds; a total that most cells contradict is no total. One or two cells
    do not tell by themselves: there the other columns do.
    """
    own = fits[column]
    if 2 * sum(own) >= len(own):
        return False
    return len(own) >= _MEASURED or not any(any(fits[other]) for other in fits if other != column)


def _refuted_block(people: Sequence[Unit], block: Sequence[int], totals: Mapping[int, Printed]) -> bool:
    """Whether no share of a block is that of its total: they are of a part of the group."""
    shares = [s for at in block if at in totals and (s := _shared(people, at)) is not None]
    return len(shares) >= _MEASURED and not any(s.fits(totals[s.at]) for s in shares)


def _unknown(frame: Frame) -> dict[tuple[object, ...], Printed]:
    """The numbers beside rows such as `Unknown`, by column and sub-heading."""
    found: dict[tuple[object, ...], Printed] = {}
    for row in frame.sheet.rows:
        path = frame.sheet.row_header(row).path
        if not path or path[-1].lower().strip(" .:*()") not in _UNKNOWN:
            continue
        for column in frame.sheet.columns:
            piece = frame.piece(row, column)
            if piece is not None and piece.shape == "number" and piece.numbers[0].decimals == 0:
                found[column, path[:-1]] = piece.numbers[0]
    return found


def _less(size: Printed, missing: Printed) -> Printed:
    value = size.value - missing.value
    return replace(size, text=str(value), value=value)


def _by_row(frame: Frame, people: Sequence[Unit], open_: Sequence[int]) -> dict[int, Printed]:
    """The n that a column of no group prints for the row, where most shares are of it."""
    columns = [
        c
        for c, role in frame.roles.items()
        if role.quantities in (("n",), ("N",)) and not frame.group(c).name
    ]
    if len(columns) != 1:
        return {}
    found: dict[int, Printed] = {}
    for at in open_:
        piece = frame.piece(people[at].rows[0], columns[0]) if columns[0] not in people[at].columns else None
        if piece is not None and piece.shape == "number" and _within(people[at], piece.numbers[0]):
            found[at] = piece.numbers[0]
    return _believed(people, found)


def _believed(people: Sequence[Unit], found: Mapping[int, Printed]) -> dict[int, Printed]:
    """Totals that more than half of the shares fit."""
    shares = [s for at in found if (s := _shared(people, at)) is not None]
    return dict(found) if shares and 2 * sum(s.fits(found[s.at]) for s in shares) > len(shares) else {}


def _by_total_row(frame: Frame, people: Sequence[Unit], open_: Sequence[int]) -> dict[int, Printed]:
    """The count of the one row `Total` at the end of a column."""
    sums: dict[int, list[Unit]] = defaultdict(list)
    for unit in people:
        if is_total(frame, unit):
            sums[unit.columns[0]].append(unit)
    found: dict[int, Printed] = {}
    for at in open_:
        own = sums.get(people[at].columns[0], [])
        total = count_of(own[0].values) if len(own) == 1 and people[at].rows[0] < own[0].rows[0] else None
        if total is not None and _within(people[at], total):
            found[at] = total
    return found


def _by_legend(frame: Frame, people: Sequence[Unit], open_: Sequence[int]) -> dict[int, Printed]:
    """The total that a note gives: `Percentages are of all 9,153 loaves`."""
    total = frame.legend.total
    if total is None:
        return {}
    return _believed(people, {at: total for at in open_ if _within(people[at], total)})


_BLOCKS = 2


def _by_sums(frame: Frame, people: Sequence[Unit], open_: Sequence[int]) -> dict[int, Printed]:
    """What several blocks of a column all add up to, or one block of which all shares are of its sum."""
    blocks = {
        key: shares
        for key, block in _blocks(frame, people, open_).items()
        if len(shares := [s for at in block if (s := _shared(people, at)) is not None]) == len(block) > 1
    }
    sums: dict[object, list[Decimal]] = defaultdict(list)
    for (column, _), shares in blocks.items():
        sums[column].append(sum((s.count.value for s in shares), Decimal(0)))
    found: dict[int, Printed] = {}
    for (column, _), shares in blocks.items():
        value = sum((s.count.value for s in shares), Decimal(0))
        total = Printed(str(value), value, 0)
        fitting = sum(s.fits(total) for s in shares)
        if (sums[column].count(value) >= _BLOCKS and 2 * fitting >= len(shares)) or (
            len(shares) >= _MEASURED and fitting == len(shares)
        ):
            found |= {s.at: total for s in shares}
    return found


def _of_those_who_answered(frame: Frame) -> bool:
    """Whether the legend says that shares leave out missing answers, whose number is not printed."""
    text = frame.legend.text
    return any(
        words in text
        for words in (
            "non-missing",
            "nonmissing",
            "valid response",
            "valid percent",
            "available data",
            "missing data excluded",
            "excluding missing",
        )
    )
