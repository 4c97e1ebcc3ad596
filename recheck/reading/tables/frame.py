"""One block of a table with everything that is known of it, and the one maker of its claims."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field
from decimal import Decimal

from recheck.model import LEVELS, Claim, ClaimKind, Confidence, Place, Printed, Table
from recheck.reading.context import Setting
from recheck.reading.placed import claim_id
from recheck.reading.tables.courses import without_changes
from recheck.reading.tables.grid import Header, Sheet
from recheck.reading.tables.headings import Told, told
from recheck.reading.tables.legend import Legend
from recheck.reading.tables.roles import (
    Group,
    Role,
    column_roles,
    group_of,
    letters_as_names,
    role_of,
    size_told,
)  # fmt: skip
from recheck.reading.tables.row_sizes import sizes_add_up
from recheck.reading.tables.sizes import sizes_of
from recheck.reading.tables.values import Piece, decimal_comma_of, pieces
from recheck.reading.tokens import words


@dataclass(frozen=True, slots=True, eq=False)
class Frame:
    """A block of a table: its grid, its legend, what its columns are called, how its numbers are written.

    `sizes` holds the n of the group over a column, from its heading, a row of ns or the legend;
    `size_rows` are the rows of ns. `groups_in_rows` tells that the rows are groups, the columns what
    was measured, `letters` holds single letters that are names of rows. `confidence` is what the grid itself allows.
    """

    sheet: Sheet
    legend: Legend
    setting: Setting
    comma: bool
    confidence: Confidence
    roles: Mapping[int, Role]
    groups: Mapping[int, Group]
    sizes: Mapping[int, Printed]
    size_rows: frozenset[int]
    groups_in_rows: bool = False
    letters: frozenset[str] = frozenset()
    _pieces: dict[tuple[int, int], tuple[Piece, ...]] = field(default_factory=dict)
    _labels: dict[tuple[str, ...], tuple[Told, ...]] = field(default_factory=dict)
    _roles: dict[tuple[str, ...], Role | None] = field(default_factory=dict)
    _told: dict[str, bool] = field(default_factory=dict)

    def pieces(self, row: int, column: int) -> tuple[Piece, ...]:
        """The values of a cell, () where it is empty or starts elsewhere."""
        if (row, column) not in self._pieces:
            slot = self.sheet.slot(row, column)
            own = slot is not None and (
                slot.cell.column == column or slot.cell.column not in self.sheet.columns
            )
            self._pieces[row, column] = pieces(slot, self.comma) if slot and own else ()
        return self._pieces[row, column]

    def piece(self, row: int, column: int) -> Piece | None:
        """The only value of a cell, None where it holds none or several."""
        found = self.pieces(row, column)
        return found[0] if len(found) == 1 else None

    def labels(self, row: int, column: int | None = None) -> tuple[Told, ...]:
        """The names of a row, outermost first, each taken apart."""
        path = self.sheet.row_header(row, column).path
        if path not in self._labels:
            self._labels[path] = tuple(
                Told((), text) if text in self.letters else told(text) for text in path
            )
        return self._labels[path]

    def row_role(self, row: int, column: int | None = None) -> Role | None:
        """What the name of a row, or a sub-heading over it, says that its numbers are."""
        header = self.sheet.row_header(row, column)
        if header.last in self.letters:
            header = Header(header.path[:-1])
        if header.path not in self._roles:
            self._roles[header.path] = role_of(header, self.legend)
        return self._roles[header.path]

    def row_name(self, row: int, column: int | None = None) -> str:
        """The name of a row without the words that say what its numbers are."""
        return LEVELS.join(label.name for label in self.labels(row, column) if label.name)

    def once(self, name: str, ask: Callable[[Frame], bool]) -> bool:
        """The answer to a question about the whole block, worked out once."""
        if name not in self._told:
            self._told[name] = ask(self)
        return self._told[name]

    def group(self, column: int) -> Group:
        """The group that a column is about."""
        return self.groups.get(column, Group(""))


@dataclass(frozen=True, slots=True, eq=False)
class Found:
    """A claim with the cells that it was read from: its row (or rows) and its columns."""

    claim: Claim
    row: int
    columns: tuple[int, ...]
    rows: tuple[int, ...] = ()

    @property
    def cells(self) -> tuple[tuple[int, int], ...]:
        """Row and column of each cell that the claim took."""
        return tuple((row, column) for row in self.rows or (self.row,) for column in self.columns)


def frame_of(sheet: Sheet, legend: Legend, setting: Setting) -> Frame:
    """Gather what is known of a block."""
    texts = [
        slot.view.text
        for (row, column), slot in sheet.slots.items()
        if row in sheet.rows and column in sheet.columns
    ]
    groups = {column: group_of(sheet.column_header(column), legend) for column in sheet.columns}
    size_rows, sizes = sizes_of(sheet, legend, groups)
    named = column_roles(sheet, legend)
    roles = without_changes(named, sheet, legend)
    groups |= {
        c: Group(LEVELS.join(sheet.column_header(c).path), groups[c].n) for c in named.keys() - roles.keys()
    }
    # `Q1` over a column looks like the name of a group until the columns beside it tell what it is.
    groups |= {
        c: Group(role.group or "", groups[c].n)
        for c, role in roles.items()
        if role.quantities in (("q1",), ("q3",))
    }
    groups |= {
        c: Group(LEVELS.join(part for part in (group.name, sheet.column_header(c).last) if part), group.n)
        for c, group in groups.items()
        if c not in roles
        and len(sheet.column_header(c).last) == 1
        and not group.name.endswith(sheet.column_header(c).last)
    }
    return Frame(
        sheet, legend, setting, decimal_comma_of(texts, default=setting.decimal_comma),
        "medium" if sheet.table.doubts else "high", roles, groups, sizes, size_rows,
        _groups_in_rows(sheet, legend, groups, roles), _letters_of_rows(sheet),
    )  # fmt: skip


def _told_in_rows(sheet: Sheet, legend: Legend) -> bool:
    """Whether caption or notes give the n of each name that rows have: `(Rye, N = 5)` over rows `Rye`, `Wheat`."""
    names = {told(sheet.row_header(row).last).name for row in sheet.rows if not sheet.is_subheading(row)}
    return len(names) > 1 and all(size_told(legend, (name,)) is not None for name in names)


def _groups_in_rows(
    sheet: Sheet, legend: Legend, groups: Mapping[int, Group], roles: Mapping[int, Role]
) -> bool:
    """Whether the rows are groups: their names have an n of their own, the stub's heading says so, or one test is printed for several rows."""
    if any(group.n is not None for group in groups.values()):
        return False
    with_n = sum(
        any(told(text).n is not None for text in sheet.row_header(row).path[-1:]) for row in sheet.rows
    )
    if with_n > 1 or _told_in_rows(sheet, legend) or sizes_add_up(sheet, roles):
        return True
    centres = [c for c, role in roles.items() if {"mean", "median"} & set(role.quantities)]
    if not centres or any(
        groups[c].name and set(roles[c].quantities) <= {"mean", "sd"} and len(centres) > 1 for c in centres
    ):
        return False
    return heads_groups(sheet) or any(
        _shared(sheet, c, centres[0]) for c, role in roles.items() if _TEST_COLUMNS & set(role.quantities)
    )


def heads_groups(sheet: Sheet) -> bool:
    """Whether the heading over the names of the rows says that they are groups."""
    head = sheet.column_header(sheet.stubs[-1]).last.lower().rstrip("s") if sheet.stubs else ""
    return head in _GROUP_HEADS


_GROUP_HEADS = words("group condition treatment arm cohort gruppe groupe grupo bedingung")
_TEST_COLUMNS = frozenset(("t", "F", "chi2", "z", "p", "u", "w"))


def _letters_of_rows(sheet: Sheet) -> frozenset[str]:
    """Single capitals that name rows: neighbours in the alphabet, or all where no other row is named by a quantity."""
    labels = {sheet.row_header(row).last for row in sheet.rows}
    letters = frozenset(label for label in labels if len(label) == 1 and label.isupper())
    if letters and not any(told(label).whole for label in labels - letters):
        return letters
    return letters_as_names(letters)


def _shared(sheet: Sheet, test: int, centre: int) -> bool:
    """Whether a column of tests prints one for every few rows with a mean, in a spanned cell or beside the first of them."""
    means = [row for row in sheet.rows if sheet.slot(row, centre) and not sheet.is_subheading(row)]
    tests = {
        slot.cell.row
        for row in means
        if (slot := sheet.slot(row, test)) and any(map(str.isdigit, slot.view.text))
    }
    heads = {sheet.row_header(row).path[:-1] for row in means}
    first = {next(row for row in means if sheet.row_header(row).path[:-1] == head) for head in heads}
    return (
        len(means) > 1
        and bool(tests)
        and len(tests) < len(means)
        and tests <= first
        and len(tests) == len(heads)
    )


# -- claims -------------------------------------------------------------------------------------------


def claim_of(
    frame: Frame,
    kind: ClaimKind,
    values: Mapping[str, Printed],
    row: int,
    columns: Sequence[int],
    *,
    rows: Sequence[int] = (),
    outcome: str | None = None,
    group: str | None = None,
    stated: Sequence[str] = (),
    interval_of: str | None = None,
    notes: Sequence[str] = (),
    sure: bool = True,
    groups: tuple[str, ...] = (),
    link: str | None = None,
    link_confidence: Confidence = "high",
    spans: Mapping[tuple[int, int], tuple[int, int]] | None = None,
) -> Found:
    """Make a claim of the cells of `columns` in `row` (or in all of `rows`).

    `sure` is False where the headings leave open what the numbers are. `spans` gives the characters
    of a cell's view that are meant, where the cell holds several values.
    """
    sheet, table = frame.sheet, frame.sheet.table
    place = _place(sheet, table, rows or (row,), columns, spans or {})
    values = {quantity: frame.setting.at_own_level(value) for quantity, value in values.items()}
    background = tuple(word for word in frame.setting.context.background if word not in stated)
    confidence: Confidence = frame.confidence if sure else "medium"
    claim = Claim(
        claim_id(kind, place, values), kind, place, values, tuple(dict.fromkeys(stated)), background, interval_of, confidence,
        groups, link, link_confidence, tuple(notes), _printed(outcome, sheet), _printed(group, sheet),
    )  # fmt: skip
    return Found(claim, row, tuple(columns), tuple(rows))


def _place(
    sheet: Sheet,
    table: Table,
    rows: Sequence[int],
    columns: Sequence[int],
    spans: Mapping[tuple[int, int], tuple[int, int]],
) -> Place:
    """Where the cells stand: the quote is the row's name and what they print."""
    name = sheet.row_header(rows[0], columns[0] if columns else None)
    texts: list[str] = []
    page = box = None
    for row in rows:
        for column in columns:
            slot = sheet.slot(row, column)
            if slot is None:
                continue
            start, end = spans.get((row, column), (0, len(slot.view.text)))
            first, last = slot.view.span(start, max(end, start + 1))
            texts.append(" ".join(slot.cell.passage.text[first:last].split()))
            layout = slot.cell.passage.layout
            if layout is not None:
                its_page, its_box = layout.box(first, last)
                if page in (None, its_page) and its_box is not None:
                    page = its_page
                    box = its_box if box is None else (
                        min(box[0], its_box[0]), min(box[1], its_box[1]), max(box[2], its_box[2]), max(box[3], its_box[3])
                    )  # fmt: skip
    over = list(dict.fromkeys(text for column in columns if (text := sheet.column_header(column).text)))
    label = table.label or next((cell.passage.table for cell in table.cells if cell.passage.table), None)
    return Place(
        quote=" | ".join((*((_printed(name.last, sheet) or "",) if name.last else ()), *texts)), page=page, box=box, section=table.section,
        table=label, row=_printed(name.text, sheet), column="; ".join(_printed(text, sheet) or "" for text in over) or None,
    )  # fmt: skip


def _printed(name: str | None, sheet: Sheet) -> str | None:
    """A name with the dashes that the manuscript prints; None for an empty one."""
    return LEVELS.join(sheet.names.get(part, part) for part in name.split(LEVELS)) if name else None


# -- p and its marks ----------------------------------------------------------------------------------


_NO_P = 10
_P_DECIMALS = 2
"""A number above 1 in a column of p is a misprint that a check tells of; one without decimals is something else."""
NOT_SIGNIFICANT = Decimal("0.05")


def p_values(piece: Piece, legend: Legend) -> dict[str, Printed]:
    """The p of a cell, and the marks beside it with their threshold: `p`, `stars`, or both.

    `ns` is p above the level; {} where the cell prints no p.
    """
    found: dict[str, Printed] = {}
    if piece.shape == "p" and not piece.numbers:
        found["p"] = Printed(piece.text, NOT_SIGNIFICANT, 2, ">")
    elif piece.shape in ("p", "number") and len(piece.numbers) == 1:
        value = piece.numbers[0]
        if (
            not 0 <= value.value < _NO_P
            or value.percent
            or (value.value > 1 and value.decimals < _P_DECIMALS)
        ):
            return {}
        found["p"] = value
    marks = star_of(piece, legend)
    return found | ({"stars": marks} if found and marks else {})


def star_of(piece: Piece, legend: Legend) -> Printed | None:
    """The threshold of the marks after a value, where the legend gives one."""
    if not piece.stars:
        return None
    exact = legend.stars.get(piece.stars)
    return exact or next(
        (
            legend.stars[mark]
            for mark in reversed(list(legend.stars))
            if mark in piece.stars and set(mark) == {"*"} and piece.stars.count("*") == len(mark)
        ),
        None,
    )


def interval_level(frame: Frame, columns: Sequence[int], rows: Sequence[int] = ()) -> dict[str, Printed]:
    """The level that headings, names of rows or the legend print for an interval, as `ci_level`; {} where none does."""
    over = (role.level for column in columns if (role := frame.roles.get(column)) is not None)
    beside = (label.level for row in rows for label in frame.labels(row))
    level = next((level for level in (*over, *beside, frame.legend.level) if level is not None), None)
    return {"ci_level": level} if level is not None else {}
