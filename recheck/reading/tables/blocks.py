"""What a whole block of a table tells of each of its cells."""

from __future__ import annotations

from recheck.model import EFFECTS_ON_RISK
from recheck.reading.tables.frame import Frame
from recheck.reading.tables.headings import told

COMPARISONS = EFFECTS_ON_RISK | {"mean_difference"}
COEFFICIENTS = frozenset(("b", "beta", "intercept", "estimate"))


def speaks_of_intervals(frame: Frame) -> bool:
    """Whether caption or notes say that brackets hold confidence intervals."""
    return frame.legend.interval == "ci" or any("ci_low" in form for form in frame.legend.forms)


def speaks_of_estimates(frame: Frame) -> bool:
    """Whether headings or the legend speak of coefficients, ratios or differences."""
    estimates = COEFFICIENTS | COMPARISONS | {"r2", "adjusted_r2"}
    return any(set(role.quantities) & estimates for role in frame.roles.values()) or any(
        word in frame.legend.text for word in ("regression", "odds ratio", "hazard ratio", "coefficient")
    )


def has_constant(frame: Frame) -> bool:
    """Whether a row is that of a model: its constant or its R²."""
    return frame.once("constant", _has_constant)


def _has_constant(frame: Frame) -> bool:
    names = [frame.sheet.row_header(row).last.strip() for row in frame.sheet.rows]
    return any(name.lower() in ("constant", "(constant)", "(intercept)") for name in names) or any(
        set(told(name).quantities) & {"intercept", "r2", "adjusted_r2"} for name in names if name
    )


_ENOUGH = 4


def nothing_but_pairs(frame: Frame) -> bool:
    """Whether a whole block prints `24.1 (3.2)`: positive, most with decimals, no marks, no `%`."""
    found = [
        piece
        for row in frame.sheet.rows
        for column in frame.sheet.columns
        for piece in frame.pieces(row, column)
        if piece.shape != "dash"
    ]
    pairs = [piece for piece in found if piece.shape in ("pair(", "pair[") and not piece.stars]
    positive = all(n.value > 0 and not n.percent for piece in pairs for n in piece.numbers)
    decimals = sum(piece.numbers[0].decimals > 0 for piece in pairs)
    return len(found) >= _ENOUGH and len(pairs) == len(found) and positive and 3 * decimals >= 2 * len(pairs)
