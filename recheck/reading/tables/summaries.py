"""Group summaries: means, medians, spreads and sizes of a row, one claim for each group."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from recheck.model import LEVELS, N_OF_GROUP, Printed
from recheck.reading.tables.frame import Found, Frame, claim_of, heads_groups, interval_level
from recheck.reading.tables.headings import Told
from recheck.reading.tables.modelled import modelled
from recheck.reading.tables.roles import size_told
from recheck.reading.tables.row_sizes import of_row_alone, size_column, size_of_row
from recheck.reading.tables.units import Unit

_CENTRES = ("mean", "median")
_OF_MEANS = frozenset((
    "covariate-adjusted", "marginal", "mixed-model", "imputed", "transformed", "weighted", "robust", "bootstrap", "bayesian",
    "within-subject-se",
))  # fmt: skip
"""What caption or notes say of means: such a mean, or its spread, is not the plain one of its group."""
_KEPT = ("mean", "sd", "se", "median", "q1", "q3", "iqr", "min", "max", "n", "N", "ci_low", "ci_high")


def summaries_of(frame: Frame, unit: Unit) -> Iterator[Found]:
    """The summary that a unit prints: a centre with a spread, a span, an interval or an n."""
    if unit.family not in ("summary", "people"):
        return
    values = {name: value for name, value in unit.values.items() if name in _KEPT}
    if not any(name in values for name in _CENTRES):
        return
    if "n" not in values and {"N", "count"} & set(unit.values):
        values["n"] = values.pop("N") if "N" in values else unit.values["count"]
    own_spread = {"sd", "se", "q1", "q3", "iqr", "min", "max", "ci_low", "ci_high"} & set(values)
    size, notes = _size(frame, unit, values)
    if size is not None:
        values["n"] = size
    if not own_spread and not ("mean" in values and ("n" in values or "N" in values)):
        return
    stated = [word for cell in unit.cells for word in cell.stated]
    stated += [word for word in frame.legend.stated if word in _OF_MEANS]
    stated += [word for word in modelled(frame.legend.text, _heads(frame, unit)) if word not in stated]
    if not all(cell.spread_told for cell in unit.cells):
        stated.append("spread-unlabelled")
    if "ci_low" in values:
        values |= interval_level(frame, unit.columns, unit.rows)
    centre = next(name for name in _CENTRES if name in values)
    outcome, group = names_of(frame, unit)
    yield claim_of(
        frame, "group-summary", values, unit.rows[0], unit.columns, rows=unit.rows, outcome=outcome, group=group,
        stated=stated, notes=notes, sure=unit.sure, spans=unit.spans,
        interval_of=centre if "ci_low" in values else None,
    )  # fmt: skip


def _heads(frame: Frame, unit: Unit) -> str:
    """What stands over the columns of a unit and before its row."""
    heads = (frame.sheet.column_header(column).text for column in unit.columns)
    return " ; ".join((frame.sheet.row_header(unit.rows[0], unit.columns[0]).text, *heads))


def _size(frame: Frame, unit: Unit, values: dict[str, Printed]) -> tuple[Printed | None, tuple[str, ...]]:
    """The n of the group, where the row and its cells print none."""
    if {"n", "N"} & set(values):
        return None, ()
    labels = frame.labels(unit.rows[0], unit.columns[0])
    if labels and labels[-1].n is not None:
        return labels[-1].n, ()
    of_group = group_size(frame, unit) or _told_of_row(frame, unit) or _in_own_column(frame, unit)
    return (of_group, (N_OF_GROUP,)) if of_group is not None else (None, ())


def _told_of_row(frame: Frame, unit: Unit) -> Printed | None:
    """The n that caption or notes give for the group that the row is named by."""
    labels = frame.labels(unit.rows[0], unit.columns[0])
    return size_told(frame.legend, (labels[-1].name,)) if labels and frame.groups_in_rows else None


def _in_own_column(frame: Frame, unit: Unit) -> Printed | None:
    """The n that a column of its own prints for a row that is a group, whatever was measured."""
    column = size_column(frame.sheet, frame.roles)
    if column is None or len(unit.rows) > 1 or not (frame.groups_in_rows or heads_groups(frame.sheet)):
        return None
    alone = all(of_row_alone(text) for c in unit.columns for text in frame.sheet.column_header(c).path)
    return size_of_row(frame.sheet, column, unit.rows[0]) if alone else None


def group_size(frame: Frame, unit: Unit) -> Printed | None:
    """The n of the group: over its rows (`Rye (n = 24)` as a sub-heading), else over its column."""
    over = (
        label.n for label in reversed(frame.labels(unit.rows[0], unit.columns[0])[:-1]) if label.n is not None
    )
    return next(over, None) or next((frame.sizes[c] for c in unit.columns if c in frame.sizes), None)


def own_names(frame: Frame, unit: Unit) -> list[Told]:
    """The names of a unit's row; one that looks like a quantity but did not name its numbers is a name (`High`, `SE (%)`, `Intercept`)."""
    path = frame.sheet.row_header(unit.rows[0], unit.columns[0]).path
    told_ = frame.labels(unit.rows[0], unit.columns[0])
    return [
        label
        if len(unit.rows) > 1 or not label.quantities or not _BY_COLUMN.isdisjoint(label.quantities)
        or set(label.quantities) & set(unit.values)
        else replace(label, name=text)
        for label, text in zip(told_, path, strict=True)
    ]  # fmt: skip


_BY_COLUMN = frozenset(("mean", "count", "percent", "n", "N"))
"""What a row's name says of some of its columns at least, even where others hold something else: `Age, mean (SD)` with a difference."""


def names_of(frame: Frame, unit: Unit) -> tuple[str, str]:
    """What was measured, and on whom: the row and the column, or the other way round where the rows are groups."""
    told_ = own_names(frame, unit)
    # A sub-heading with an n is a group, and the columns beside it are its times or conditions.
    over = [label.name for label in told_[:-1] if label.name and label.n is not None]
    labels = [label.name for label in told_ if label.name and label.name not in over]
    column = LEVELS.join((*over, *((unit.group,) if unit.group else ())))
    if not labels and not over and not any(group.n is not None for group in frame.groups.values()):
        return unit.group, ""
    if not frame.groups_in_rows or over:
        return LEVELS.join(labels), column
    return LEVELS.join((*labels[:-1], *((column,) if column else ()))), labels[-1] if labels else ""
