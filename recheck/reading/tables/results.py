"""Cells that hold a whole result (`t(31) = 2.10, p = .044`), read as prose with their row and column as place."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace

from recheck.model import Claim
from recheck.reading.behind import UNLABELLED
from recheck.reading.tables.frame import Found, Frame, claim_of, interval_level
from recheck.reading.tokens import DIGITS
from recheck.reading.views import View

ReadText = Callable[[View], Sequence[Claim]]
"""Reads the claims of a text as prose."""

_LONGEST = 300
"""Characters of a cell that is a result; longer ones are reports of other studies as a rule."""


def told_in_cells(frame: Frame, found: Sequence[Found], read_text: ReadText) -> list[Found]:
    """The claims of cells with symbols of their own, where no heading has named their numbers already."""
    taken = {cell for item in found for cell in item.cells}
    sheet = frame.sheet
    claims: list[Found] = []
    for row in sheet.rows:
        for column in (*sheet.columns, *sheet.stubs[1:]):
            slot = sheet.slot(row, column)
            if slot is None or (row, column) in taken or not sheet.starts(row, column):
                continue
            text = slot.view.text
            if len(text) > _LONGEST or DIGITS.isdisjoint(text):
                continue
            if any(piece.shape == "result" for piece in frame.pieces(row, column)):
                claims += [_at_cell(frame, claim, row, column) for claim in read_text(slot.view)]
    return claims


def _at_cell(frame: Frame, claim: Claim, row: int, column: int) -> Found:
    role = frame.roles.get(column)
    values, notes, sure = dict(claim.values), claim.notes, claim.confidence == "high"
    if UNLABELLED in notes and role is not None and "ci_low" in role.quantities:
        # `RR 0.77 (0.25 to 2.38)` under `Relative effect (95% CI)`: the heading says what prose would have to.
        notes, sure = tuple(note for note in notes if note != UNLABELLED), len(notes) == 1
        values |= interval_level(frame, (column,))
    made = claim_of(
        frame, claim.kind, values, row, (column,), outcome=claim.outcome or frame.row_name(row, column),
        group=claim.group or frame.group(column).name, stated=claim.stated, interval_of=claim.interval_of, notes=notes,
    )  # fmt: skip
    confidence = made.claim.confidence if sure else claim.confidence
    return replace(made, claim=replace(made.claim, confidence=confidence))
