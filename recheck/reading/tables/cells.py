"""What the numbers of one value of a cell are called: by its row, its column, the legend, or its shape."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import cache
from typing import Literal

import regex

from recheck.model import Printed
from recheck.reading.tables.bare_shares import bare_share
from recheck.reading.tables.blocks import (
    COMPARISONS,
    has_constant,
    nothing_but_pairs,
    speaks_of_estimates,
    speaks_of_intervals,
)
from recheck.reading.tables.frame import Frame, p_values
from recheck.reading.tables.roles import Role, fits, matched
from recheck.reading.tables.values import Piece
from recheck.reading.views import TIMEOUT
from recheck.reading.widths import MARGIN

Source = Literal["heading", "legend", "shape"]

_OF_GROUPS = frozenset(
    (
        "mean",
        "median",
        "sd",
        "se",
        "q1",
        "q3",
        "iqr",
        "min",
        "max",
        "count",
        "percent",
        "total",
        "n",
        "N",
        "ci_low",
        "ci_high",
    )
)
TESTS = frozenset((
    "t", "F", "chi2", "z", "r", "u", "w", "df", "df1", "df2", "p", "d", "g", "delta", "eta2", "partial_eta2", "generalized_eta2",
    "omega2", "epsilon2", "f", "f2", "phi", "cramers_v", "r2", "adjusted_r2", "delta_r2", "ss", "ms", "mse", "d_z", "d_av", "d_rm", "r_pb", "se_difference",
))  # fmt: skip
"""Quantities whose columns and rows other layouts read."""


@dataclass(frozen=True, slots=True)
class Cell:
    """The numbers of one value of a cell under their names.

    `source` says what named them; `spread_told` that an SD is said to be one (or an SE), not only a spread.
    """

    values: Mapping[str, Printed]
    row: int
    column: int
    piece: Piece
    source: Source
    spread_told: bool = True
    stated: tuple[str, ...] = ()
    n: Printed | None = None


def named_cell(frame: Frame, row: int, column: int, piece: Piece) -> Cell | None:
    """The numbers of a value under the names that row, column, legend or its shape give; None where nothing does.

    The row's own label wins over the column, and the legend speaks where neither does.
    """
    cell = _named(frame, row, column, piece) if piece.has_value else None
    if cell is None or piece.n is None or "n" in cell.values:
        return cell
    return replace(cell, values={**cell.values, "n": piece.n})


def _named(frame: Frame, row: int, column: int, piece: Piece) -> Cell | None:
    role = frame.roles.get(column)
    own = frame.row_role(row, column)
    own = _of_column(own, role)
    if role is not None and (role.quantities == ("other",) or _of_tests(role)):
        return _under(frame, row, column, piece, role)
    if own is not None and (own.quantities == ("other",) or _of_tests(own)):
        return None
    for candidate in _ordered(frame, row, own, role):
        cell = _under(frame, row, column, piece, candidate)
        if cell is not None:
            return cell
    return _by_legend(frame, row, column, piece, own, role) or _by_shape(frame, row, column, piece, own, role)


def _of_column(own: Role | None, role: Role | None) -> Role | None:
    """What a sub-heading such as `Mean (SD), mean difference` says of one column: of a group, or of the effect with its interval."""
    effects = [q for q in own.quantities if q in COMPARISONS] if own else []
    groups = [q for q in own.quantities if q not in COMPARISONS] if own else []
    if own is None or not effects or not {"mean", "median", "count", "percent"} & set(groups):
        return own
    ends = ("ci_low", "ci_high")
    if role is not None and role.quantities == ends:
        return replace(own, quantities=(effects[0], *ends))
    return replace(own, quantities=tuple(groups))


def _of_tests(role: Role) -> bool:
    return set(role.quantities) <= TESTS


def _ordered(frame: Frame, row: int, own: Role | None, role: Role | None) -> list[Role]:
    """Row before column, except where the column holds one quantity and the row only begins with such a word (`Mean pressure`)."""
    labels = frame.labels(row)
    whole = bool(labels) and labels[-1].whole
    first, second = own, role
    if role is not None and role.name.lower() in _MISSING_DATA:
        return [role]
    if (
        role is not None
        and own is not None
        and not whole
        and (len(role.quantities) == 1 or set(role.quantities) & COMPARISONS)
    ):
        first, second = role, own
    return [candidate for candidate in (first, second) if candidate is not None]


_MISSING_DATA = frozenset(
    ("missing", "missing data", "missing values", "unknown", "not available", "no data")
)
"""Names of columns that count what a variable lacks, whatever the row says of its values."""


def _under(frame: Frame, row: int, column: int, piece: Piece, role: Role) -> Cell | None:
    quantities = role.quantities
    if quantities == ("p",):
        values = p_values(piece, frame.legend)
        return Cell(values, row, column, piece, "heading", stated=role.stated, n=role.n) if values else None
    if piece.shape == "fraction" and _of_two_kinds(frame, row, column):
        return None
    values_ = matched(piece, quantities)
    if values_ is not None and not (piece.label == "per" and "mean" in values_):
        return Cell(values_, row, column, piece, "heading", stated=role.stated, n=role.n)
    if quantities[:1] == ("mean",) and len(quantities) == 1:
        return _with_spread(frame, row, column, piece, "heading", role.stated)
    bare: dict[str, Printed] | None = None
    if quantities == ("mean", "sd") and piece.shape == "number":
        bare = {"mean": piece.numbers[0]}
    if quantities == ("ci_low", "ci_high") and piece.shape == "triple":
        bare = dict(zip(("estimate", *quantities), piece.numbers, strict=True))
    if bare is not None:
        if not fits(bare, piece.numbers[0]):
            return None
        return Cell(bare, row, column, piece, "heading", stated=role.stated, n=role.n)
    if (
        len(quantities) == 1
        and quantities[0] in COMPARISONS
        and piece.shape == "triple"
        and speaks_of_intervals(frame)
    ):
        values_ = matched(piece, (*quantities, "ci_low", "ci_high"))
        return Cell(values_, row, column, piece, "legend", stated=role.stated, n=role.n) if values_ else None
    if quantities == ("median",) and piece.shape == "triple":
        ends = next((form[1:] for form in frame.legend.forms if form[0] == "median" and len(form) == 3), None)
        values_ = matched(piece, ("median", *ends)) if ends else None
        return Cell(values_, row, column, piece, "heading", stated=role.stated, n=role.n) if values_ else None
    if {"count", "percent"} <= set(quantities) and piece.shape == "number" and piece.numbers[0].decimals == 0:
        values = {"percent" if piece.numbers[0].percent else "count": piece.numbers[0]}
        return Cell(values, row, column, piece, "heading", stated=role.stated, n=role.n)
    return None


@cache
def _two_kinds() -> regex.Pattern[str]:
    return regex.compile(r"(?<![\p{L}\d])\p{L}{1,12} ?/ ?\p{L}{1,12}(?!\p{L}|/)")


def _of_two_kinds(frame: Frame, row: int, column: int) -> bool:
    """Whether `3/7` counts two kinds (`F/M`, `yes/no`), as a name with a slash says; `n/N` is a share of a total."""
    texts = (frame.sheet.row_header(row, column).text, frame.sheet.column_header(column).text)
    return any(
        match[0].replace(" ", "") != "n/N"
        for text in texts
        for match in _two_kinds().finditer(text, timeout=TIMEOUT)
    )


def _with_spread(
    frame: Frame, row: int, column: int, piece: Piece, source: Source, stated: tuple[str, ...] = ()
) -> Cell | None:
    """A mean and what stands after `±` or in brackets, whatever the legend or the document calls that."""
    if piece.shape not in ("pair±", "pair±(", "pair(", "pair[") or piece.label == "per":
        return None
    legend, setting = frame.legend, frame.setting
    sign = piece.shape.startswith("pair±")
    kind = piece.label if piece.label in ("sd", "se") else ""
    kind = kind or (
        (legend.spread or setting.plus_minus) if sign else (legend.brackets or setting.in_brackets)
    )
    mean, spread, *n = piece.numbers
    if kind == MARGIN:
        return Cell({"mean": mean}, row, column, piece, source, stated=stated)
    values = {"mean": mean, kind or "sd": spread} | ({"n": n[0]} if n else {})
    if not fits(values, mean) or (spread.decimals == 0 and mean.decimals > 0 and not sign):
        return None
    return Cell(values, row, column, piece, source, bool(kind), stated)


def _by_legend(
    frame: Frame, row: int, column: int, piece: Piece, own: Role | None, role: Role | None
) -> Cell | None:
    """The one form that the legend offers for this shape."""
    if piece.label == "per":
        return None
    if role is not None and not set(role.quantities) <= _OF_GROUPS:
        return None
    fitting = [
        form for form in frame.legend.forms if _shape_fits(frame, piece, form) and matched(piece, form)
    ]
    if not fitting and piece.shape in ("pair(", "pair[") and frame.legend.brackets and not frame.legend.forms:
        # A standard error in brackets is that of a coefficient where the table tells of a regression.
        of_coefficient = frame.legend.brackets == "se" and (speaks_of_estimates(frame) or has_constant(frame))
        fitting = [] if of_coefficient else [("mean", frame.legend.brackets)]
    if not fitting and piece.shape in ("pair±", "pair±(") and frame.legend.spread not in ("", MARGIN):
        fitting = [("mean", frame.legend.spread)]
    if len(fitting) > 1:
        # A pair under `median (IQR) or mean (SD)` is the latter: the former prints two ends.
        fitting = [form for form in fitting if len(form) == len(piece.numbers)] or fitting
    if len(fitting) > 1 and piece.shape in ("pair(", "pair["):
        fitting = _told_apart(frame, column, piece, fitting)
    if not fitting and piece.shape == "triple" and frame.legend.interval == "ci" and role is None:
        fitting = [("estimate", "ci_low", "ci_high")]
    if len(fitting) != 1:
        return None
    form = fitting[0]
    if own is not None and own.quantities == ("median",) and form[0] != "median":
        return None
    values = matched(piece, form)
    return Cell(values, row, column, piece, "legend") if values else None


def _shape_fits(frame: Frame, piece: Piece, form: tuple[str, ...]) -> bool:
    second = form[-1]
    if piece.shape in ("pair±", "pair±("):
        return second in ("sd", "se")
    if piece.shape in ("count%", "fraction", "fraction%"):
        return "count" in form
    if piece.shape in ("pair(", "pair[") and form in frame.legend.signed:
        # Told with `±` but printed in brackets: only decimals show that it is no count with its share.
        return all(number.decimals > 0 for number in piece.numbers)
    return not (piece.shape == "pair(" and second == "percent" and piece.numbers[0].decimals > 0)


def _told_apart(
    frame: Frame, column: int, piece: Piece, fitting: list[tuple[str, ...]]
) -> list[tuple[str, ...]]:
    """A count with its share, or a mean with its SD: the group's n or decimals tell."""
    first, second = piece.numbers
    if first.percent or second.percent:
        return [form for form in fitting if "percent" in form]
    n = frame.sizes.get(column)
    if first.decimals > 0:
        return [form for form in fitting if "count" not in form]
    if n is not None and n.value > 0 and first.value <= n.value:
        share = 100 * first.value / n.value
        if abs(share - second.value) <= second.unit:
            return [form for form in fitting if "percent" in form]
    return []


def _by_shape(
    frame: Frame, row: int, column: int, piece: Piece, own: Role | None, role: Role | None
) -> Cell | None:
    """What the shape alone tells: `a ± b` is a mean with a spread, `12 (34%)` a count with its share.

    `24.1 (3.2)` is taken for a mean with a spread only where nothing in the table speaks of coefficients or shares.
    """
    if piece.shape == "count%":
        values = dict(zip(("count", "percent"), piece.numbers, strict=True))
        return Cell(values, row, column, piece, "heading") if fits(values, piece.numbers[0]) else None
    if _counted(frame, row, column, piece):
        values = dict(zip(("count", "percent"), piece.numbers, strict=True))
        return Cell(values, row, column, piece, "heading" if _in_percent(frame, row) else "shape")
    if piece.shape == "fraction%" and not piece.numbers[0].decimals:
        found = matched(piece, ("count", "total", "percent"))
        return Cell(found, row, column, piece, "heading") if found else None
    share = bare_share(frame, row, column, piece)
    if share is not None and not _of_two_kinds(frame, row, column):
        return Cell(share[0], row, column, piece, "heading" if share[1] else "shape")
    if any(_names_others(r) for r in (role, own)):
        return None
    if piece.label in ("sd", "se"):
        return _with_spread(frame, row, column, piece, "heading")
    if speaks_of_estimates(frame):
        return None
    if piece.shape in ("pair±", "pair±("):
        return _with_spread(
            frame,
            row,
            column,
            piece,
            "legend" if frame.legend.spread or frame.setting.plus_minus else "shape",
        )
    if piece.shape in ("pair(", "pair[") and (
        _like_a_mean(frame, piece) or frame.once("pairs", nothing_but_pairs)
    ):
        return _with_spread(frame, row, column, piece, "shape")
    return None


def _counted(frame: Frame, row: int, column: int, piece: Piece) -> bool:
    """Whether `12 (34.3)` is a count with its share of the group's n: the two agree to the last digit."""
    n = frame.sizes.get(column)
    if piece.shape not in ("pair(", "pair[") or n is None or n.value == 0:
        return False
    count, share = piece.numbers
    if count.decimals or count.percent or not 0 <= count.value <= n.value or not 0 <= share.value <= _WHOLE:
        return False
    labelled = _in_percent(frame, row)
    # Some cases may be missing, so a share that is said to be one may be a little larger than that of the whole group.
    slack = share.unit + (share.value / _MISSING if labelled else 0)
    return (share.decimals > 0 or labelled) and abs(_WHOLE * count.value / n.value - share.value) <= slack


_MISSING = 20
_WHOLE = 100


def _in_percent(frame: Frame, row: int) -> bool:
    return any(label.percent_unit for label in frame.labels(row))


def _names_others(role: Role | None) -> bool:
    """Whether a role names numbers that a mean with its spread is not; `(N)` behind a name is a unit."""
    return (
        role is not None
        and "mean" not in role.quantities
        and not (role.name and set(role.quantities) <= {"n", "N"})
    )


def _like_a_mean(frame: Frame, piece: Piece) -> bool:
    first, second = piece.numbers
    if (
        first.percent
        or second.percent
        or piece.stars
        or first.decimals == 0
        or second.decimals == 0
        or second.value <= 0
    ):
        return False
    if abs(first.decimals - second.decimals) > 1 or any("percent" in form for form in frame.legend.forms):
        return False
    return "mean" in frame.legend.text or bool(
        {"t", "F", "p"} & {q for r in frame.roles.values() for q in r.quantities}
    )
