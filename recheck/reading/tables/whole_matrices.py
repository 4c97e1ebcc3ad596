"""A triangle of correlations as one claim: all its coefficients by row and column of its variables."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import N_BY_PAIR, Claim, Printed
from recheck.reading.placed import claim_id
from recheck.reading.tables.frame import Found, Frame, claim_of
from recheck.reading.tables.matrix_layout import Matrix, variable
from recheck.reading.tables.saying import said_of
from recheck.reading.views import TIMEOUT

FEWEST = 3
"""Variables; two have one correlation, which is a claim by itself."""
MOST = 40
SIDES = {"below": "below the diagonal", "above": "above the diagonal"}


@cache
def _no_variable() -> regex.Pattern[str]:
    return regex.compile(
        r"alpha|\bα|reliab|\bomega\b|\bω|\bAVE\b|\bCR\b|\bVIF\b|\bICC\b|skew|kurt|range|\bmin|\bmax|median|communalit|eigenvalue",
        regex.IGNORECASE,
    )


def matrices_of(frame: Frame, matrix: Matrix, made: Sequence[Found], both: str) -> Iterator[Found]:
    """The matrix that coefficients of a square make up; where its two sides are two samples, one for each."""
    if not matrix.square:
        return
    for side in ("below", "above"):
        held = [item for item in made if both != "two samples" or _side(matrix, item) == side]
        rows = _rows(frame, matrix, held)
        if FEWEST <= len(rows) <= MOST and len(held) > 1:
            claim = _matrix(frame, matrix, rows, held, SIDES[side] if both == "two samples" else None)
            if claim is not None:
                yield claim
        if both != "two samples":
            return


def _side(matrix: Matrix, item: Found) -> str:
    return "above" if item.row < matrix.twins[item.columns[0]] else "below"


def _rows(frame: Frame, matrix: Matrix, held: Sequence[Found]) -> list[int]:
    """The rows of the variables: those with a column of their own, and the last one, which may have none."""
    own = set(matrix.twins.values())
    names = {variable(frame, row) for row in own}
    last = [
        row
        for row in dict.fromkeys(item.row for item in held)
        if row not in own
        and row > max(own)
        and (name := variable(frame, row)) not in names
        and not _no_variable().search(name, timeout=TIMEOUT)
    ]
    used = {row for item in held for row in (item.row, matrix.twins[item.columns[0]])}
    return sorted((own | set(last[:1])) & used)


def _matrix(
    frame: Frame, matrix: Matrix, rows: Sequence[int], held: Sequence[Found], group: str | None
) -> Found | None:
    values: dict[str, Printed] = {}
    columns = tuple(dict.fromkeys(item.columns[0] for item in held))
    for item in held:
        pair = (item.row, matrix.twins[item.columns[0]])
        if set(pair) <= set(rows):
            one, two = sorted((rows.index(row) + 1 for row in pair), reverse=True)
            values.setdefault(f"r({one},{two})", item.claim.values["r"])
    if len(values) < FEWEST:
        return None
    made = claim_of(
        frame, "correlation-matrix", {**values, **_size(held)}, rows[0], columns, rows=rows, group=group,
        stated=said_of("correlation", (), frame.legend.stated), sure=matrix.sure,
        notes=(N_BY_PAIR,) if len(_sizes(held)) > 1 else (),
    )  # fmt: skip
    return replace(made, claim=_named(frame, made.claim, tuple(variable(frame, row) for row in rows)))


def _size(held: Sequence[Found]) -> Mapping[str, Printed]:
    """The number of cases where it is the same for all coefficients."""
    sizes = _sizes(held)
    return sizes[0] if len(sizes) == 1 else {}


def _sizes(held: Sequence[Found]) -> list[dict[str, Printed]]:
    """The different numbers of cases of the coefficients, each once."""
    found: list[dict[str, Printed]] = []
    for item in held:
        size = {name: v for name, v in item.claim.values.items() if name in ("n", "N")}
        if size not in found:
            found.append(size)
    return found


def _named(frame: Frame, claim: Claim, variables: tuple[str, ...]) -> Claim:
    """The claim with the names of its variables, quoted by the caption: all its cells make too long a quote."""
    caption = frame.sheet.table.caption
    quote = " ".join(caption.text.split()) if caption is not None else "; ".join(variables)
    place = replace(claim.place, quote=quote, row=None, column=None)
    return replace(
        claim, id=claim_id(claim.kind, place, (*claim.values, claim.group or "")), place=place, variables=variables
    )  # fmt: skip
