"""What one row prints in the columns of one result."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from functools import cache

import regex

from recheck.model import EFFECTS_ON_RISK, OF_DIFFERENCES, ClaimKind, Printed
from recheck.reading.numerals import printed
from recheck.reading.tables.blocks import COEFFICIENTS
from recheck.reading.tables.bundles import (
    DEGREES,
    DIFFERENCES,
    EFFECTS,
    ENDS,
    STATISTICS,
    Bundle,
)
from recheck.reading.tables.frame import NOT_SIGNIFICANT, Frame, interval_level, p_values, star_of
from recheck.reading.tables.grid import Slot
from recheck.reading.tables.headings import told
from recheck.reading.tables.legend import Legend
from recheck.reading.tables.roles import Role, matched
from recheck.reading.tables.values import Piece
from recheck.reading.views import TIMEOUT

_OWNERS = COEFFICIENTS | EFFECTS_ON_RISK | EFFECTS | DIFFERENCES | {"r"}


@dataclass(slots=True)
class Numbers:
    """The numbers of one result as they are gathered from its cells.

    `columns` are those whose cells gave a number, `ends_of` the quantity that an interval belongs to.
    """

    values: dict[str, Printed] = field(default_factory=dict)
    columns: list[int] = field(default_factory=list)
    ends_of: str | None = None
    stated: list[str] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)

    def put(self, values: dict[str, Printed], column: int) -> None:
        """Add numbers; a quantity that is there stays."""
        for name, value in values.items():
            self.values.setdefault(name, value)
        if column not in self.columns:
            self.columns.append(column)


def numbers_of(frame: Frame, row: int, bundle: Bundle) -> Numbers:
    """Read the cells of a bundle in a row; what its headings do not explain is left out."""
    found = Numbers()
    last = ""
    for column, role in bundle.parts:
        if not frame.sheet.starts(row, column):
            continue
        given = cell_numbers(frame, row, column, role)
        if not given:
            continue
        found.put(given, column)
        found.stated += role.stated
        if "p" in given and "perm" in frame.sheet.column_header(column).last.lower():
            found.stated.append("permutation")
        if "ci_low" in given and found.ends_of is None:
            found.ends_of = _owner(given, role, last)
        named = [q for q in given if q in _OWNERS]
        last = named[-1] if named else (last if set(given) <= _PASSED else "")
    complete(found, bundle.roles, frame)
    if {"sd", "mean_difference"} <= found.values.keys():
        found.notes.append(OF_DIFFERENCES)
    return found


_PASSED = ENDS | DEGREES | {"se", "p", "stars"}
"""What may stand between a number and its interval: `difference | SE | p | 95% CI`."""


def _owner(given: dict[str, Printed], role: Role, last: str) -> str | None:
    """What an interval belongs to: the number in its own cell, the one its heading names, or the one right before it."""
    own = [q for q in given if q in _OWNERS]
    return own[0] if own else _named_owner(role.name) or last or None


@cache
def _owner_names() -> tuple[tuple[regex.Pattern[str], str], ...]:
    return (
        (regex.compile(r"\bOR\b|odds|Exp ?\(?B", regex.IGNORECASE), "or"),
        (regex.compile(r"\bHR\b|hazard"), "hr"),
        (regex.compile(r"difference"), "mean_difference"),
        (regex.compile(r"β|\bbeta\b"), "beta"),
        (regex.compile(r"\b[bB]\b"), "b"),
        (regex.compile(r"\bd\b"), "d"),
    )


def _named_owner(name: str) -> str | None:
    return next(
        (quantity for pattern, quantity in _owner_names() if pattern.search(name, timeout=TIMEOUT)), None
    )


# -- one cell -------------------------------------------------------------------------------------------


def cell_numbers(frame: Frame, row: int, column: int, role: Role) -> dict[str, Printed]:
    """The numbers of a cell under the names of its column, with the level that its stars stand for."""
    quantities = role.quantities
    slot = frame.sheet.slot(row, column)
    if slot is None:
        return {}
    if set(quantities) <= DEGREES:
        return _degrees(slot, quantities, frame.comma)
    found = frame.pieces(row, column)
    given: dict[str, Printed] = {}
    if len(found) == 1 and found[0].shape == "result":
        given = _with_symbol(slot, found[0], quantities)
    elif len(found) > 1 and len(found) == len(quantities):
        # One number a line, or divided by commas: `2.10, .036` under `t, p`.
        for piece, name in zip(found, quantities, strict=True):
            given.update(matched(piece, (name,)) or {})
    elif found and not found[0].numbers and found[0].shape == "p":
        return {"p": not_significant(slot, found[0])} if quantities == ("p",) else {}
    elif found:
        given = _matched(found[0], quantities) or {}
        marked = _ns_behind(slot) if given and "p" not in given else None
        if marked is not None:
            given["p"] = marked
    given = {name: value for name, value in given.items() if not (value.percent and name in _NEVER_PERCENT)}
    level = next((level for piece in found if (level := star_of(piece, frame.legend))), None)
    return given | {"stars": level} if given and level else given


_NEVER_PERCENT = STATISTICS | {"p"}


@cache
def _repeated() -> regex.Pattern[str]:
    """A number whose cell repeats the symbol of its heading: `p = .031`, `P<0.001`, `t = −2.10`."""
    return regex.compile(r"(?P<symbol>\p{L}{1,3}²?) ?(?P<number>[=<>≤≥] ?[-+]?[\d.,·]+)[*†‡§ ]*")


def _with_symbol(slot: Slot, piece: Piece, quantities: Sequence[str]) -> dict[str, Printed]:
    match = _repeated().fullmatch(slot.view.text.strip(), timeout=TIMEOUT)
    if match is None or len(quantities) != 1 or told(match["symbol"]).quantities != tuple(quantities):
        return {}
    number = printed(match["number"].removeprefix("=").strip())
    if number is None or (quantities[0] == "p" and not 0 <= number.value <= 1):
        return {}
    page, box = slot.view.box(piece.start, piece.end)
    return {quantities[0]: replace(number, page=page, box=box)}


def _matched(piece: Piece, quantities: Sequence[str]) -> dict[str, Printed] | None:
    """The numbers of a piece, also where df stand in brackets behind a statistic: `2.10 (31)`, `3.40 (2, 57)`."""
    if not piece.has_value:
        return None
    first = quantities[0]
    if first == "F" and piece.shape == "triple" and quantities[1:] and set(quantities[1:]) <= DEGREES:
        return dict(zip(("F", "df1", "df2"), piece.numbers, strict=True))
    if len(quantities) == 1 and piece.shape in ("pair(", "pair[") and first in ("t", "chi2"):
        # Without df in the heading a whole number in brackets is left alone: it may be an n.
        return {first: piece.numbers[0]}
    if piece.shape == "p" and len(quantities) == 1:
        return {first: piece.numbers[0]}
    if quantities == ("p",) and piece.shape == "number":
        return {name: value for name, value in p_values(piece, Legend()).items() if name == "p"}
    return matched(piece, quantities)


def not_significant(slot: Slot, piece: Piece) -> Printed:
    """`ns`, which is read as a p above the level."""
    page, box = slot.view.box(piece.start, piece.end)
    text = slot.view.printed_text(piece.start, piece.end).strip("()[] ")
    return Printed(text, NOT_SIGNIFICANT, 2, ">", page=page, box=box)


@cache
def _ns() -> regex.Pattern[str]:
    return regex.compile(r"(?<=[\d)*] ?)[(\[]?(?P<ns>[nN]\.?[sS])\.?[)\]]?$")


def _ns_behind(slot: Slot) -> Printed | None:
    """The `ns` behind a number, on the line or raised."""
    passage = slot.cell.passage
    match = _ns().search(passage.text.strip(), timeout=TIMEOUT)
    if match is None:
        return None
    page, box = passage.layout.box(*match.span("ns")) if passage.layout else (None, None)
    return Printed(match["ns"], NOT_SIGNIFICANT, 2, ">", page=page, box=box)


@cache
def _df_cell() -> regex.Pattern[str]:
    number = r"\d{1,6}(?:\.\d{1,3})?"
    return regex.compile(rf"[(\[]?(?P<one>{number})(?:(?: ?[,;/|] ?| )(?P<two>{number}))?[)\]]?")


def _degrees(slot: Slot, quantities: Sequence[str], comma: bool) -> dict[str, Printed]:
    """`48`, `47.3`, `2, 57`, `2/57`, `(2, 57)`."""
    text = slot.view.text.strip()
    if comma and "," in text and ", " not in text:
        text = text.replace(",", ".")
    match = _df_cell().fullmatch(text, timeout=TIMEOUT)
    if match is None:
        return {}
    page, box = slot.view.box(0, len(slot.view.text))
    values = [printed(match[name]) for name in ("one", "two") if match[name]]
    numbers = [replace(value, page=page, box=box) for value in values if value is not None]
    names = ("df1", "df2") if len(numbers) == 2 else tuple(quantities)
    return dict(zip(names, numbers, strict=False))


# -- df, p and stars ------------------------------------------------------------------------------------


def complete(found: Numbers, roles: Sequence[Role], frame: Frame) -> None:
    """Put in the df and the level that a heading or a note prints for all rows, and the p that stars alone tell."""
    values = found.values
    values.pop("other", None)
    if not values:
        return
    if "ci_low" in values:
        level = next((role.level for role in roles if role.level), None)
        values.update({"ci_level": level} if level else interval_level(frame, found.columns))
    if "mean_difference" in values and "se" in values and not values.keys() & COEFFICIENTS:
        values["se_difference"] = values.pop("se")
    if "stars" in values and "p" not in values:
        values["p"] = values["stars"]
    statistic = next((name for name in ("t", "F", "chi2", "r") if name in values), None)
    if statistic is None:
        return
    role = next((role for role in roles if statistic in role.quantities), None)
    for source in (role.df if role else (), frame.legend.df):
        _put_df(values, statistic, source)
    if statistic == "F" and "df" in values and "df2" not in values:
        # A table with one df for each F names that of the effect; that of the error is not in its row.
        values.setdefault("df1", values.pop("df"))
    if statistic == "chi2" and role is not None and role.n is not None:
        values.setdefault("N", role.n)


def _put_df(values: dict[str, Printed], statistic: str, given: tuple[Printed, ...]) -> None:
    if not given or DEGREES & set(values):
        return
    if statistic == "F" and len(given) == 2:
        values["df1"], values["df2"] = given
    elif statistic == "chi2" or (statistic in ("t", "r") and len(given) == 1):
        values["df"] = given[0]


_KINDS: tuple[tuple[str, ClaimKind], ...] = (
    ("t", "t-test"), ("F", "F-test"), ("chi2", "chi2-test"), ("u", "rank-test"), ("w", "rank-test"), ("z", "z-test"), ("r", "correlation"),
)  # fmt: skip


def kind_of(values: dict[str, Printed], stated: Sequence[str]) -> ClaimKind | None:
    """The kind of claim that a row's numbers make; None where they say nothing that can be checked or looked up."""
    held = set(values)
    if held & COEFFICIENTS:
        return "regression"
    for quantity, kind in _KINDS:
        if quantity in held:
            return _test_kind(kind, held, stated)
    if held & DIFFERENCES:
        return "comparison" if "mean_difference" in held and len(held - {"n", "N"}) > 1 else None
    # An effect size alone says nothing that could be held against another number.
    return "estimate" if held & {"p", "ci_low"} else None


def _test_kind(kind: ClaimKind, held: set[str], stated: Sequence[str]) -> ClaimKind | None:
    if kind == "z-test" and "rank-test" in stated:
        return "rank-test"
    if kind == "rank-test" and "w" in held and "p" not in held:
        return None
    alone = not held - {"z", "u", "w"}
    return None if alone else kind
