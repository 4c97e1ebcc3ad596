"""R², adjusted R² and the change of R², in rows below coefficients or in columns beside a test: part of the F of their model."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import Printed
from recheck.reading.tables.frame import Found, Frame, claim_of
from recheck.reading.tables.grid import Header
from recheck.reading.tables.headings import told
from recheck.reading.views import TIMEOUT

SHARES = frozenset(("r2", "adjusted_r2", "delta_r2"))
_BESIDE = frozenset(("F", "df", "df1", "df2", "p", "n", "N", "r", "other", "chi2"))
"""What else rows of the fit of a model hold."""


@cache
def _names() -> tuple[tuple[regex.Pattern[str], str], ...]:
    """Names of rows and columns that hold more words than the symbol itself."""
    square = r"R(?:[²2]|\^2|[- ]?squared?)"
    return (
        (regex.compile(rf"(?:total|model|overall)? ?{square}", regex.IGNORECASE), "r2"),
        (regex.compile(rf"adj(?:usted|\.)? ?{square}|{square} ?[(_]?adj(?:usted|\.)?\)?", regex.IGNORECASE), "adjusted_r2"),
        (regex.compile(rf"[Δ∆] ?{square}|{square} ?change|change in {square}|incremental {square}", regex.IGNORECASE), "delta_r2"),
    )  # fmt: skip


@cache
def _share(name: str) -> str | None:
    """The share of variance that a name stands for, None for all else; a pseudo-R² is none."""
    found = told(name)
    if found.whole and len(found.quantities) == 1 and found.quantities[0] in SHARES:
        other = "pseudo-r2" in found.stated or regex.search(
            r"within|between|nagelk|pseudo|marginal|conditional", name, regex.IGNORECASE, timeout=TIMEOUT
        )
        return None if other else found.quantities[0]
    return next((q for pattern, q in _names() if pattern.fullmatch(name.strip(), timeout=TIMEOUT)), None)


def claims_of(frame: Frame, found: Sequence[Found]) -> list[Found]:
    """The claims of a block with the shares of variance of its models: put to their F, else by themselves."""
    claims = list(found)
    for rows in _runs(frame):
        for column in frame.sheet.columns:
            cells = [(row, column) for row in rows]
            claims = _placed(frame, claims, cells, column_wise=True)
    columns = [c for c in frame.sheet.columns if _share(_last(frame.sheet.column_header(c)))]
    if columns:
        for row in frame.sheet.rows:
            claims = _placed(frame, claims, [(row, c) for c in columns], column_wise=False)
    return claims


def _last(header: Header) -> str:
    return header.path[-1] if header.path else ""


def _runs(frame: Frame) -> Iterator[tuple[int, ...]]:
    """Neighbouring rows that tell of the fit of one model, some share of variance among them."""
    run: list[int] = []
    for row in (*frame.sheet.rows, None):
        name = _last(frame.sheet.row_header(row)) if row is not None else ""
        if row is not None and name and (_share(name) or _of_fit(name)):
            run.append(row)
            continue
        if any(_share(_last(frame.sheet.row_header(r))) for r in run):
            yield tuple(run)
        run = []


@cache
def _of_fit(name: str) -> bool:
    label = told(name)
    return label.whole and bool(label.quantities) and set(label.quantities) <= _BESIDE | SHARES


def _placed(
    frame: Frame, claims: list[Found], cells: Sequence[tuple[int, int]], *, column_wise: bool
) -> list[Found]:
    """The claims with the shares of these cells, those of one model."""
    values: dict[str, Printed] = {}
    taken: list[tuple[int, int]] = []
    for row, column in cells:
        header = frame.sheet.row_header(row) if column_wise else frame.sheet.column_header(column)
        name, piece = _share(_last(header)), frame.piece(row, column)
        alone = piece is not None and piece.shape == "number" and len(piece.numbers) == 1
        if (
            name
            and piece is not None
            and alone
            and abs(piece.numbers[0].value) <= (100 if piece.numbers[0].percent else 1)
        ):
            values.setdefault(name, piece.numbers[0])
            taken.append((row, column))
    if not values or any(set(taken) & set(item.cells) for item in claims):
        return claims
    if column_wise:
        near = [item for item in claims if _is_test(item) and set(cells) & set(item.cells)]
    else:
        near = [item for item in claims if _is_test(item) and item.row == cells[0][0]]
    if near:
        return _with_shares(claims, near, values, taken)
    return [*claims, *_alone(frame, values, taken)]


def _is_test(item: Found) -> bool:
    return item.claim.kind == "F-test" and not SHARES & item.claim.values.keys()


def _with_shares(
    claims: list[Found], tests: Sequence[Found], values: Mapping[str, Printed], taken: Sequence[tuple[int, int]]
) -> list[Found]:  # fmt: skip
    """Claims with shares put to the test of the model, and a change of R² to that of its step where there are both."""
    steps = [item for item in tests if item.claim.says("model-step")]
    wholes = [item for item in tests if item not in steps]
    if len(steps) > 1 or len(wholes) > 1:
        return claims
    put: dict[str, dict[str, Printed]] = {}
    for name, value in values.items():
        owner = (steps or wholes) if name == "delta_r2" or not wholes else wholes
        put.setdefault(owner[0].claim.id, {})[name] = value
    if steps and "r2" in values:
        put.setdefault(steps[0].claim.id, {})["r2"] = values["r2"]
    return [_extended(item, put[item.claim.id], taken) if item.claim.id in put else item for item in claims]


def _extended(item: Found, values: Mapping[str, Printed], taken: Sequence[tuple[int, int]]) -> Found:
    """A test with shares of variance; its id stays that of the test."""
    claim = replace(item.claim, values={**values, **item.claim.values})
    rows = tuple(sorted({*(item.rows or (item.row,)), *(row for row, _ in taken)}))
    columns = tuple(sorted({*item.columns, *(column for _, column in taken)}))
    return replace(item, claim=claim, rows=rows if len(rows) > 1 else (), columns=columns)


def _alone(frame: Frame, values: Mapping[str, Printed], taken: Sequence[tuple[int, int]]) -> Iterator[Found]:
    """R² and adjusted R² of a model whose F is not printed."""
    if not {"r2", "adjusted_r2"} <= values.keys():
        return
    rows, columns = tuple(sorted({row for row, _ in taken})), tuple(sorted({c for _, c in taken}))
    outcome = frame.group(columns[0]).name if len(columns) == 1 else frame.row_name(rows[0])
    yield claim_of(
        frame,
        "estimate",
        values,
        rows[0],
        columns,
        rows=rows if len(rows) > 1 else (),
        outcome=outcome or None,
    )
