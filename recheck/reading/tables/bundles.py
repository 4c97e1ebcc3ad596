"""Neighbouring columns that tell one result together: its statistic, df, p, effect size, interval."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import cache

import regex

from recheck.model import EFFECTS_ON_RISK
from recheck.reading.tables.blocks import COEFFICIENTS
from recheck.reading.tables.frame import Frame
from recheck.reading.tables.grid import Sheet
from recheck.reading.tables.roles import Role
from recheck.reading.tables.which_test import OPEN, with_open_columns
from recheck.reading.views import TIMEOUT

STATISTICS = frozenset(("t", "F", "chi2", "z", "r", "u", "w"))
EFFECTS = frozenset((
    "d", "g", "delta", "d_z", "d_av", "d_rm", "r_pb", "eta2", "partial_eta2", "generalized_eta2", "omega2", "epsilon2", "f", "f2",
    "phi", "cramers_v",
))  # fmt: skip
DIFFERENCES = frozenset(("mean_difference", "se_difference"))
DEGREES = frozenset(("df", "df1", "df2"))
ENDS = frozenset(("ci_low", "ci_high"))
_OPENING = (
    frozenset((OPEN,)) | STATISTICS | COEFFICIENTS | EFFECTS_ON_RISK | EFFECTS | DIFFERENCES | DEGREES | {"p"}
)
_JOINING = _OPENING | ENDS | {"se", "n", "N", "other", "r2", "ss", "ms"}


@dataclass(frozen=True, slots=True)
class Bundle:
    """Columns of one result, with the role of each; `group` and `name` are what their headings name besides."""

    columns: tuple[int, ...]
    roles: tuple[Role, ...]
    group: str | None = None
    name: str = ""

    @property
    def quantities(self) -> frozenset[str]:
        """All that its columns hold."""
        return frozenset(q for role in self.roles for q in role.quantities)

    @property
    def parts(self) -> Iterator[tuple[int, Role]]:
        """Column and role of each."""
        return zip(self.columns, self.roles, strict=True)


def bundles_of(frame: Frame) -> tuple[Bundle, ...]:
    """The results that the columns of a block hold side by side, from left to right.

    Where the rows are comparisons, an estimate is a difference.
    """
    sheet = frame.sheet
    roles = {column: _p_of_test(frame, column, role) for column, role in with_open_columns(frame).items()}
    if any("estimate" in role.quantities for role in roles.values()) and rows_compare(sheet):
        roles = {column: _as_difference(role) for column, role in roles.items()}
    found: list[list[int]] = []
    current: list[int] = []
    for column in sheet.columns:
        role = roles.get(column)
        if role is not None and not _has_cells(sheet, column):
            continue
        if role is not None and _sd_of_differences(sheet, column, current, roles):
            roles[column] = replace(role, quantities=("sd",))
            current.append(column)
        elif role is None or not set(role.quantities) <= _JOINING:
            found.append(current)
            current = []
        elif current and (not _joins(current, column, roles) or _p_before(current, column, roles)):
            found.append(current)
            current = [column]
        else:
            current.append(column)
    found.append(current)
    return tuple(bundle for columns in found if (bundle := _bundle(columns, roles)) is not None)


def _sd_of_differences(sheet: Sheet, column: int, current: Sequence[int], roles: Mapping[int, Role]) -> bool:
    """Whether a column right behind a mean difference holds the SD of the same differences, as its headings say, and a t follows."""
    if (
        roles[column].quantities not in (("sd",), ("sd", "mean_difference"))
        or not current
        or roles[current[-1]].quantities != ("mean_difference",)
    ):
        return False
    following = [roles[c] for c in range(column + 1, column + _NEAR) if c in roles]
    heading = sheet.column_header(column).text.lower()
    tested = any("t" in role.quantities for role in following)
    return tested and any(word in heading for word in ("difference", "change", "gain"))


def _has_cells(sheet: Sheet, column: int) -> bool:
    return any(sheet.starts(row, column) and sheet.slot(row, column) for row in sheet.rows)


def _joins(current: list[int], column: int, roles: Mapping[int, Role]) -> bool:
    """Whether a column tells of the same result as those before it."""
    new = roles[column]
    before = [roles[c] for c in current]
    held = {q for role in before for q in role.quantities}
    told = set(new.quantities)
    if told & held - {"other", "ss"}:
        return False
    if _groups_differ(before[-1], new, told):
        return False
    if told & {"n", "N"} and held & {"n", "N"}:
        return False
    if told & EFFECTS_ON_RISK and not held & COEFFICIENTS and held & (STATISTICS | EFFECTS | {"p"}):
        return False
    main = held & (STATISTICS | {OPEN})
    if not told & (STATISTICS | {OPEN}) or not main:
        return _se_has_owner(told, held)
    # U and W are given with their z; r after another statistic is its effect size; a Wald χ² stands beside b,
    # and a predictor's own correlation before it.
    of_predictor = main == {"r"} and {"b", "se"} <= held
    return (
        bool(main <= {"u", "w"} and told & {"z", "r"}) or (told == {"r"} and "r" not in main) or of_predictor
    )


def _p_before(current: list[int], column: int, roles: Mapping[int, Role]) -> bool:
    """Whether a statistic behind a p has a p of its own: `F | Sig. | t | df | Sig. (2-tailed)`, the first being Levene's."""
    held = {q for c in current for q in roles[c].quantities}
    following = [roles[c] for c in range(column + 1, column + _NEAR) if c in roles]
    return (
        held <= {"p"} | DEGREES
        and "p" in held
        and bool(set(roles[column].quantities) & STATISTICS)
        and any("p" in role.quantities for role in following)
    )


_NEAR = 4


def _groups_differ(last: Role, new: Role, told: set[str]) -> bool:
    if new.group is None:
        # An interval or a p that no group stands over belongs to all groups before it, unless they had nothing of the kind.
        return last.group is not None and not told <= (ENDS | {"p"} | DEGREES | EFFECTS)
    return last.group != new.group


def _se_has_owner(told: set[str], held: set[str]) -> bool:
    return "se" not in told or bool(held & (COEFFICIENTS | DIFFERENCES | EFFECTS_ON_RISK))


def _bundle(columns: list[int], roles: Mapping[int, Role]) -> Bundle | None:
    """A bundle without the ends that belong to no result: sizes, and what opens none."""
    squares = {"ss", "ms"} if any("F" in roles[column].quantities for column in columns) else set()
    while (
        columns
        and not set(roles[columns[0]].quantities) & (_OPENING | squares)
        and not _sizes_first(columns, roles)
    ):
        columns = columns[1:]
    kept = tuple(roles[column] for column in columns)
    if not any(set(role.quantities) & (_OPENING - DEGREES) for role in kept):
        return None
    telling = [
        role
        for role in kept
        if set(role.quantities) & (STATISTICS | COEFFICIENTS | EFFECTS_ON_RISK | DIFFERENCES | {OPEN})
    ] or list(kept)
    group = next((role.group for role in telling if role.group), None)
    name = next((role.name for role in (*telling, *kept) if role.name), "")
    return Bundle(tuple(columns), kept, group, name)


def _sizes_first(columns: list[int], roles: Mapping[int, Role]) -> bool:
    """Whether an n before the statistic is that of the row: `n | r | p`."""
    following = [q for c in columns[1:3] for q in roles[c].quantities]
    return set(roles[columns[0]].quantities) <= {"n", "N"} and "r" in following


@cache
def _comparison() -> regex.Pattern[str]:
    return regex.compile(r"\S (?:vs\.?|versus|v\.|[-–−—]|minus|compared (?:with|to)) \S")


def rows_compare(sheet: Sheet) -> bool:
    """Whether most rows are comparisons of two groups: `Rye vs. wheat`, `rye - wheat`."""
    names = [sheet.row_header(row).last for row in sheet.rows if not sheet.is_subheading(row)]
    compared = sum(bool(_comparison().search(name, timeout=TIMEOUT)) for name in names)
    return compared >= 1 and 2 * compared >= len(names)


def _p_of_test(frame: Frame, column: int, role: Role) -> Role:
    """`P value (t-test)`, `ANOVA F, p`: where the cells hold one number each, all from 0 to 1, it is the p."""
    rest = set(role.quantities) - {"p"}
    if "p" not in role.quantities or len(rest) != 1 or not rest <= STATISTICS:
        return role
    found = [piece for row in frame.sheet.rows for piece in frame.pieces(row, column) if piece.numbers]
    single = all(len(piece.numbers) == 1 and 0 <= piece.numbers[0].value <= 1 for piece in found)
    return replace(role, quantities=("p",)) if found and single else role


def _as_difference(role: Role) -> Role:
    return replace(
        role, quantities=tuple("mean_difference" if q == "estimate" else q for q in role.quantities)
    )
