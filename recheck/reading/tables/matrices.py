"""Correlations: triangles of variables by variables, tables of variables by others, coefficients with p and n below."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import LEVELS, N_OF_GROUP, Printed
from recheck.reading.numerals import printed
from recheck.reading.tables.frame import Found, Frame, claim_of, interval_level, star_of
from recheck.reading.tables.headings import told
from recheck.reading.tables.matrix_layout import (
    Matrix,
    below_first,
    matrix_of,
    numbered,
    pieces_of,
    row_part,
    variable,
)
from recheck.reading.tables.row_numbers import not_significant
from recheck.reading.tables.saying import said_of
from recheck.reading.tables.values import Piece
from recheck.reading.tables.whole_matrices import matrices_of
from recheck.reading.views import TIMEOUT


def claims_of(frame: Frame, found: Sequence[Found]) -> list[Found]:
    """The claims of a block with those of its matrix of correlations."""
    matrix = matrix_of(frame)
    if matrix is None:
        return list(found)
    both = _both_sides(frame, matrix)
    made = list(_coefficients(frame, matrix, both))
    made += list(matrices_of(frame, matrix, made, both))
    cells = {(row, column) for row in frame.sheet.rows for column in matrix.columns}
    kept = [_renumbered(_sized(frame, item)) for item in found if not cells & set(item.cells)]
    return [*kept, *made]


def _sized(frame: Frame, item: Found) -> Found:
    """The summary of a variable with the n of all, which the caption prints."""
    size, claim = frame.legend.N or frame.legend.each, item.claim
    if claim.kind != "group-summary" or size is None or {"n", "N"} & set(claim.values):
        return item
    return replace(
        item, claim=replace(claim, values={**claim.values, "n": size}, notes=(*claim.notes, N_OF_GROUP))
    )


def _renumbered(item: Found) -> Found:
    """The summary of a numbered variable under its name alone: `1. Height` is `Height`."""
    outcome = numbered().match(item.claim.outcome or "")
    return (
        replace(item, claim=replace(item.claim, outcome=outcome["name"]))
        if outcome and outcome["name"]
        else item
    )


def _coefficients(frame: Frame, matrix: Matrix, both: str) -> Iterator[Found]:
    for row in frame.sheet.rows:
        if row_part(frame, row) not in ("r", "") or row in frame.size_rows:
            continue
        for column in matrix.columns:
            if matrix.square and matrix.twins.get(column) == row:
                continue
            above = matrix.square and row < matrix.twins[column]
            if above and both == "mirrored":
                continue
            if above and both == "unexplained":
                continue
            made = _coefficient(frame, matrix, row, column, sized=both not in ("two samples",))
            if made is not None:
                yield made


def _both_sides(frame: Frame, matrix: Matrix) -> str:
    """What the side above the diagonal is where both sides are filled: the same again, another sample, or not said."""
    if not matrix.square:
        return ""
    rows = set(matrix.twins.values())
    above: dict[frozenset[int], Printed] = {}
    below: dict[frozenset[int], Printed] = {}
    for column, twin in matrix.twins.items():
        for row in rows:
            piece = next(iter(pieces_of(frame, row, column)), None)
            if row != twin and piece is not None and piece.numbers:
                (above if row < twin else below)[frozenset((row, twin))] = piece.numbers[0]
    shared = set(above) & set(below)
    if not shared:
        return ""
    if all(above[pair].value == below[pair].value for pair in shared):
        return "mirrored"
    text = frame.legend.text
    told_apart = ("above" in text or "upper" in text) and (
        "below" in text or "lower" in text or "under" in text
    )
    return (
        "two samples"
        if told_apart and not regex.search(r"p[- ]values?|partial|\bsignificance", text, timeout=TIMEOUT)
        else "unexplained"
    )


def _coefficient(frame: Frame, matrix: Matrix, row: int, column: int, *, sized: bool) -> Found | None:
    """One coefficient with what stands behind or below it."""
    found = pieces_of(frame, row, column)
    if not found or not found[0].numbers or found[0].label == "(":
        return None
    values = _values(frame, row, column, found)
    if values is None:
        return None
    rows = [row]
    for below in _rows_below(frame, row):
        part = row_part(frame, below)
        piece = frame.piece(below, column)
        if part in ("p", "n") and piece is not None and piece.numbers:
            name = (
                "N"
                if part == "n" and told(frame.sheet.row_header(below).path[-1]).quantities == ("N",)
                else part
            )
            values.setdefault(name, piece.numbers[0])
            rows.append(below)
        elif piece is not None and piece.numbers and _is_p(piece):
            values.setdefault("p", piece.numbers[0])
            rows.append(below)
    notes: tuple[str, ...] = ()
    size = frame.legend.N or frame.legend.each
    if sized and size is not None and not {"n", "N"} & set(values):
        values["N"], notes = size, (N_OF_GROUP,)
    role = frame.roles.get(column)
    if "ci_low" in values:
        values |= interval_level(frame, (column,))
    stated = said_of("correlation", role.stated if role else (), frame.legend.stated)
    outcome = f"{variable(frame, row)} – {matrix.names[column]}"
    made = claim_of(
        frame, "correlation", values, row, (column,), rows=tuple(rows) if len(rows) > 1 else (), outcome=outcome, stated=stated,
        interval_of="r" if "ci_low" in values else None, notes=notes, sure=matrix.sure,
    )  # fmt: skip
    return _under_own_name(frame, matrix, made, row)


def _under_own_name(frame: Frame, matrix: Matrix, made: Found, row: int) -> Found:
    """A coefficient placed in the row of its variable alone, where the first row of the triangle looks like a heading."""
    if not below_first(frame, row, matrix.twins.values()) or made.claim.place.row is None:
        return made
    place = replace(made.claim.place, row=made.claim.place.row.rpartition(LEVELS)[2])
    return replace(made, claim=replace(made.claim, place=place))


def _rows_below(frame: Frame, row: int) -> Iterator[int]:
    """The rows of p and n that follow a row of coefficients."""
    for below in range(row + 1, min(row + 3, frame.sheet.rows.stop)):
        if row_part(frame, below) in ("p", "n") or _unnamed_row(frame, below):
            yield below
        else:
            return


def _unnamed_row(frame: Frame, row: int) -> bool:
    return not any(
        (slot := frame.sheet.slot(row, stub)) is not None and slot.cell.row == row
        for stub in frame.sheet.stubs
    )


def _values(frame: Frame, row: int, column: int, found: Sequence[Piece]) -> dict[str, Printed] | None:
    first = found[0]
    r = first.numbers[0]
    if not -1 <= r.value <= 1 or r.percent or r.relation != "=":
        return None
    values = {"r": r}
    if first.shape == "triple":
        low, high = first.numbers[1:]
        if low.value <= r.value <= high.value:
            values |= {"ci_low": low, "ci_high": high}
    elif first.shape in ("pair(", "pair["):
        _second(frame, values, first.numbers[1])
    if len(found) == _R_P_N and _r_p_n(found):
        values |= {"p": found[1].numbers[0], "n": found[2].numbers[0]}
        found = found[:1]
    for piece in found[1:]:
        slot = frame.sheet.slot(row, column)
        if piece.shape == "p" and not piece.numbers and slot is not None:
            values.setdefault("p", not_significant(slot, piece))
        elif piece.shape == "interval" and len(piece.numbers) == 2:
            values |= {"ci_low": piece.numbers[0], "ci_high": piece.numbers[1]}
        elif piece.numbers and _is_p(piece):
            values.setdefault("p", piece.numbers[0])
        elif (
            piece.shape == "unread"
            and (bound := printed(piece.text.strip("()[] "))) is not None
            and bound.relation != "="
        ):
            values.setdefault("p", bound)
    level = next((level for piece in found if (level := star_of(piece, frame.legend))), None)
    if level is not None:
        values["stars"] = level
        values.setdefault("p", level)
    return values


_R_P_N = 3


def _r_p_n(found: Sequence[Piece]) -> bool:
    """Whether three lines of a cell are r, its p and its n."""
    if not all(len(piece.numbers) == 1 for piece in found):
        return False
    p, n = found[1].numbers[0], found[2].numbers[0]
    return 0 <= p.value <= 1 and p.decimals > 0 and n.decimals == 0 and n.value > _R_P_N


def _second(frame: Frame, values: dict[str, Printed], number: Printed) -> None:
    """The number in brackets behind r: an n where it is whole, a p where the caption says so."""
    text = frame.legend.text
    if number.decimals == 0 and number.value > 3:
        values["n"] = number
    elif 0 <= number.value <= 1 and (
        number.relation != "=" or _p_in_brackets().search(text, timeout=TIMEOUT)
    ):
        values["p"] = number


@cache
def _p_in_brackets() -> regex.Pattern[str]:
    return regex.compile(
        r"\bp[- ]?(?:values?)?\b[^.;]{0,25}(?:brackets|parenthes)|(?:brackets|parenthes)[^.;]{0,25}\bp\b"
    )


def _is_p(piece: Piece) -> bool:
    """Whether the number below an r is its p: with a relation, or in brackets, from 0 to 1."""
    number = piece.numbers[0]
    return (
        len(piece.numbers) == 1
        and 0 <= number.value <= 1
        and (piece.shape == "p" or piece.label == "(")
        and number.decimals >= 2
    )
