"""Source tables of an analysis of variance: SS, df, MS and F of each effect, with the error term that belongs to it."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cache

import regex

from recheck.model import Printed
from recheck.reading.tables.bundles import Bundle, bundles_of
from recheck.reading.tables.frame import Found, Frame, claim_of
from recheck.reading.tables.roles import Role
from recheck.reading.tables.row_numbers import Numbers, cell_numbers, numbers_of
from recheck.reading.tables.saying import said_of
from recheck.reading.tables.shelf import without
from recheck.reading.views import TIMEOUT


def claims_of(frame: Frame, found: Sequence[Found]) -> list[Found]:
    """The claims of a block, with one for each effect whose F stands over an error row."""
    kept = list(found)
    for bundle in bundles_of(frame):
        held = bundle.quantities
        if "F" not in held or not held & {"df", "df1", "ss", "ms"}:
            continue
        made: list[Found] = []
        errors: list[tuple[int, int]] = []
        for block in _blocks(frame, bundle):
            effects, terms = _read_block(frame, bundle, block)
            made += effects
            errors += terms
        kept = without(kept, made, errors)
    return [*kept, *_of_traits(frame, kept)]


@dataclass(frozen=True, slots=True)
class _Line:
    row: int
    numbers: Numbers
    part: str

    def value(self, name: str) -> Printed | None:
        """A printed number of the row."""
        return self.numbers.values.get(name)

    @property
    def df(self) -> Printed | None:
        """The df of an effect, or of an error term."""
        return self.value("df") or self.value("df1")


@cache
def _error() -> regex.Pattern[str]:
    return regex.compile(
        r"(?:.*\b(?:error|residuals?|unexplained)\b.*|within(?:[- ]?(?:groups?|cells?|treatments?|samples?|variance))?|.*\(within(?: groups?)?\)"
        r"|(?:s|subjects?|participants?)(?: ?/ ?.*| within .*)|deviations?(?: from .*)?)[\s:.)*]*",
        regex.IGNORECASE,
    )


@cache
def _total() -> regex.Pattern[str]:
    return regex.compile(
        r"(?P<corrected>corrected |adjusted )?total(?: \(?corrected\)?)?[\s:.]*", regex.IGNORECASE
    )


def _blocks(frame: Frame, bundle: Bundle) -> Iterator[list[_Line]]:
    """Rows of one analysis: up to its total, the next sub-heading that starts one, or a new outcome."""
    block: list[_Line] = []
    outer: tuple[str, ...] | None = None
    for row in frame.sheet.rows:
        path = frame.sheet.row_header(row).path
        over = path[:-1] if not frame.sheet.is_subheading(row) else path
        # Effects within and between subjects stand under headings of their own within one analysis.
        changed = outer is not None and over != outer
        if block and changed and _closed(block):
            yield block
            block = []
        outer = over
        if frame.sheet.is_subheading(row):
            continue
        block.append(_Line(row, numbers_of(frame, row, bundle), _part(path[-1] if path else "")))
        if block[-1].part == "total" and not _total_follows(frame, row):
            yield block
            block, outer = [], None
    if block:
        yield block


def _closed(block: Sequence[_Line]) -> bool:
    """Whether the rows so far are an analysis of their own: their last effect has its error term."""
    return block[-1].part in ("error", "total")


def _total_follows(frame: Frame, row: int) -> bool:
    path = frame.sheet.row_header(row + 1).path if row + 1 in frame.sheet.rows else ()
    return bool(path) and _part(path[-1]) == "total"


def _part(name: str) -> str:
    if _total().fullmatch(name.strip(), timeout=TIMEOUT):
        return "total"
    return "error" if _error().fullmatch(name.strip(), timeout=TIMEOUT) else "effect"


def _read_block(
    frame: Frame, bundle: Bundle, block: Sequence[_Line]
) -> tuple[list[Found], list[tuple[int, int]]]:
    """The claims of the effects of one analysis, and the cells of its error terms; none of either without such terms."""
    errors = [
        line for line in block if line.part == "error" and line.value("F") is None and line.df is not None
    ]
    if not errors:
        return [], []
    total = _sum_of_squares(block)
    made = [
        _effect(frame, bundle, line, _term(line, block, errors), total, len(errors) == 1)
        for line in block
        if line.part == "effect" and line.value("F") is not None
    ]
    return made, [(line.row, column) for line in errors for column in bundle.columns]


def _sum_of_squares(block: Sequence[_Line]) -> Printed | None:
    """The total sum of squares, the corrected one where both are printed."""
    totals = [line.value("ss") for line in block if line.part == "total" and line.value("ss") is not None]
    return totals[-1] if totals else None


def _term(effect: _Line, block: Sequence[_Line], errors: Sequence[_Line]) -> _Line | None:
    """The error term of an effect: the first below it. None where its mean square fits another row better.

    A nested factor, or the whole plots of a split plot, are tested against another row than the error.
    """
    below = [line for line in errors if line.row > effect.row]
    if not below:
        return None
    term = below[0]
    if _quotient_fits(effect, term):
        return term
    rivals = [
        line
        for line in block
        if line not in (effect, term) and line.part != "total" and _quotient_fits(effect, line)
    ]
    return None if rivals else term


_SLACK = 0.02
"""Relative difference up to which a quotient of rounded mean squares is taken for the printed F."""


def _quotient_fits(effect: _Line, term: _Line) -> bool:
    upper, lower, F = _mean_square(effect), _mean_square(term), effect.value("F")
    if upper is None or not lower or F is None:
        return upper is None
    return abs(upper / lower - F.number) <= _SLACK * max(abs(F.number), 0.5)


def _mean_square(line: _Line) -> float | None:
    ms, ss, df = line.value("ms"), line.value("ss"), line.df
    if ms is not None:
        return ms.number
    return ss.number / df.number if ss is not None and df is not None and df.number else None


def _effect(
    frame: Frame, bundle: Bundle, line: _Line, term: _Line | None, total: Printed | None, only: bool
) -> Found:
    """The claim of one effect, with df and squares of its error term."""
    values = dict(line.numbers.values)
    df = values.pop("df", None)
    if df is not None:
        values.setdefault("df1", df)
    several_ss = sum("ss" in role.quantities for role in frame.roles.values()) > 1
    if several_ss:
        values.pop("ss", None)
    rows = [line.row]
    if term is not None and term.df is not None:
        values.setdefault("df2", term.df)
        for name, own in (("ss_error", "ss"), ("ms_error", "ms")):
            value = term.value(own)
            if value is not None and not (several_ss and own == "ss"):
                values[name] = value
        rows.append(term.row)
    if total is not None and "ss" in values:
        values["ss_total"] = total
    stated = said_of("F-test", line.numbers.stated, frame.legend.stated, several=True)
    made = claim_of(
        frame, "F-test", values, line.row, line.numbers.columns, outcome=frame.row_name(line.row) or frame.sheet.row_header(line.row).last, stated=stated,
        interval_of=line.numbers.ends_of, notes=line.numbers.notes, sure=term is None or only or _quotient_fits(line, term),
    )  # fmt: skip
    return Found(made.claim, line.row, made.columns)


# -- effects in rows, what was measured in columns ----------------------------------------------------------


@cache
def _holds_F() -> regex.Pattern[str]:
    return regex.compile(r"\bf[- ](?:values?|ratios?|statistics?|tests?)\b|\bf and p[- ]values?\b")


def _of_traits(frame: Frame, kept: Sequence[Found]) -> Iterator[Found]:
    """Bare F values with their marks, one column for each outcome, where the caption says that they are F values."""
    columns = [column for column in frame.sheet.columns if column not in frame.roles]
    degrees = [
        c
        for c in frame.sheet.columns
        if (role := frame.roles.get(c)) and role.quantities in (("df",), ("df1",))
    ]
    others = set(frame.sheet.columns) - set(columns) - set(degrees)
    if not columns or len(degrees) > 1 or others or not _holds_F().search(frame.legend.text, timeout=TIMEOUT):
        return
    role = Role(("F",), df=())
    for row in frame.sheet.rows:
        own = cell_numbers(frame, row, degrees[0], Role(("df1",))) if degrees else {}
        for column in columns if own or not degrees else ():
            given = cell_numbers(frame, row, column, role)
            if "F" not in given or (len(frame.pieces(row, column)) > 1 and "p" not in given):
                continue
            if "stars" in given:
                given.setdefault("p", given["stars"])
            used = (column, *(degrees if own else ()))
            made = claim_of(
                frame, "F-test", {**given, **own}, row, used, outcome=frame.sheet.column_header(column).last,
                group=frame.row_name(row), stated=said_of("F-test", (), frame.legend.stated, several=True),
            )  # fmt: skip
            yield Found(made.claim, row, (column,))
