"""Spreads that stand in brackets on the line below their means: put beside them, as `3.91 (0.11)`."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from functools import cache

import numpy as np
import regex

from recheck.model import Cell, Layout, Passage, Table
from recheck.reading.tables.headings import told
from recheck.reading.tables.legend import Legend
from recheck.reading.tables.slots import slot_view
from recheck.reading.views import TIMEOUT

_MODELS = ("regress", "coefficient", "estimate", "model", "odds", "hazard")
_OF_GROUPS = frozenset(("mean", "n", "N", "p", "t", "F"))


@cache
def _mean() -> regex.Pattern[str]:
    return regex.compile(r"-?\d*[.,]?\d+ ?\p{Ll}{0,3}")


@cache
def _spread() -> regex.Pattern[str]:
    return regex.compile(r"[(\[] ?\d*[.,]?\d+ ?[)\]]")


def folded(table: Table, legend: Legend) -> Table:
    """The table with rows of bracketed spreads joined to the rows of means above them.

    Only where the notes say that brackets hold an SD or SE and nothing speaks of a model, whose
    coefficients are printed in the same way.
    """
    if legend.brackets not in ("sd", "se") or any(word in legend.text for word in _MODELS):
        return table
    places = {(cell.row, cell.column): cell for cell in table.cells}
    below = [row for row in range(1, table.rows) if _spreads_of(places, table, row)]
    if not below or any(cell.row_span > 1 for cell in table.cells) or _names_models(table):
        return table
    cells: list[Cell] = []
    for cell in table.cells:
        if cell.row in below:
            continue
        under = places.get((cell.row + 1, cell.column)) if cell.row + 1 in below else None
        passage = _joined(cell.passage, under.passage) if under and under.text.strip() else cell.passage
        cells.append(replace(cell, passage=passage, row=cell.row - sum(row < cell.row for row in below)))
    return replace(table, cells=tuple(cells), rows=table.rows - len(below))


def _spreads_of(places: Mapping[tuple[int, int], Cell], table: Table, row: int) -> bool:
    """Whether a row without a name holds a spread under each number of the row above, and nothing else."""
    if _text(places.get((row, 0))):
        return False
    spreads = [c for c in range(1, table.columns) if _text(places.get((row, c)))]
    return (
        bool(spreads)
        and bool(_text(places.get((row - 1, 0))))
        and all(_spread().fullmatch(_text(places[row, c]), timeout=TIMEOUT) for c in spreads)
        and all(_mean().fullmatch(_text(places.get((row - 1, c))), timeout=TIMEOUT) for c in spreads)
    )


def _text(cell: Cell | None) -> str:
    return slot_view(cell.passage).text.strip() if cell is not None else ""


def _names_models(table: Table) -> bool:
    """Whether a heading or the name of a row is that of a coefficient, a constant or a fit."""
    named = [
        told(_text(cell)) for cell in table.cells if cell.column == 0 or cell.row < max(1, table.header_rows)
    ]
    return any(
        (label.quantities and not set(label.quantities) <= _OF_GROUPS) or "constant" in label.name.lower()
        for label in named
    )


def _joined(first: Passage, second: Passage) -> Passage:
    """Two cells in one, each character with its own mark and place."""
    layout = None
    if first.layout is not None and second.layout is not None and len(first.layout.pages):
        # The space between them stands at the end of the first, without width.
        end = first.layout.boxes[-1:].copy()
        end[:, 0] = end[:, 2]
        layout = Layout(
            np.concatenate((first.layout.pages, first.layout.pages[-1:], second.layout.pages)),
            np.concatenate((first.layout.boxes, end, second.layout.boxes)),
        )
    marks = f"{_marks(first)} {_marks(second)}" if first.marks or second.marks else ""
    return replace(first, text=f"{first.text} {second.text}", marks=marks, layout=layout)


def _marks(passage: Passage) -> str:
    return passage.marks or " " * len(passage.text)
