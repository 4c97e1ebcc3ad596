"""Rows of the source table of an analysis of variance: mean squares, and which row F is tested against."""

from __future__ import annotations

import numpy as np

from recheck.checks.p_values import as_interval
from recheck.model import Claim, Interval
from recheck.recompute import bounds
from recheck.recompute.arrays import Floats, quotient_bounds
from recheck.reconcile.readings import Box, box_of

OTHER_ERROR = "F is tested against another row of the table, as with random factors"
PRINTED_ERROR = "F is tested against the error row that is printed"


def ratio(box: Box, top: str, bottom: str) -> tuple[Interval, ...]:
    """The range of one number over another that is not negative."""
    a, b = box[top], box[bottom]
    ends = quotient_bounds(*(np.asarray(x) for x in (a.low, a.high, max(b.low, 0.0), max(b.high, 0.0))))
    return (as_interval(ends),)


def square(claim: Claim, ms: str, ss: str, df: str) -> tuple[str, ...] | None:
    """Names of the numbers that give a mean square: itself, else SS and df."""
    values = claim.values
    if ms in values:
        return (ms,)
    return (ss, df) if ss in values and df in values and values[df].number > 0 else None


def mean_square(box: Box, names: tuple[str, ...]) -> Interval:
    """A mean square, as printed or from SS and df."""
    return box[names[0]] if len(names) == 1 else ratio(box, *names)[0]


def from_source(claim: Claim) -> bool:
    """Tell whether a claim is the row of a source table, its error taken from another row."""
    return "ms_error" in claim.values or "ss_error" in claim.values


def alone_in_table(claim: Claim) -> bool:
    """Tell whether SS has two parts alone, the effect and the error: then F can have no other error."""
    values = claim.values
    if not {"ss", "ss_error", "ss_total"} <= values.keys():
        return False
    parts = [values[n].interval() for n in ("ss", "ss_error")]
    whole = Interval(parts[0].low + parts[1].low, parts[0].high + parts[1].high)
    return whole.meets(values["ss_total"].interval())


def F_fits_error(claim: Claim) -> bool:
    """Tell whether F is the ratio of the printed mean squares."""
    effect, error = square(claim, "ms", "ss", "df1"), square(claim, "ms_error", "ss_error", "df2")
    if effect is None or error is None or "F" not in claim.values:
        return False
    box = box_of({name: claim.values[name] for name in ("F", *effect, *error)})
    squares = {"top": mean_square(box, effect), "bottom": mean_square(box, error)}
    return any(box["F"].meets(found) for found in ratio(squares, "top", "bottom"))


def p_fits_error(claim: Claim) -> bool:
    """Tell whether p follows from F with the df of the printed error, and from no error of half its df or fewer."""
    values = claim.values
    if not {"F", "p", "df1", "df2"} <= values.keys():
        return False
    if values["p"].relation != "=" or values["p"].number <= 0.001:
        return False
    df1, df2 = values["df1"].number, values["df2"].number
    if df1 <= 0 or df2 <= 0:
        return False
    F, printed = values["F"].interval().within(0.0, float("inf")), values["p"].interval()

    def fits(error_dfs: Floats) -> bool:
        low, high = bounds.p_from_F_bounds(F.low, F.high, df1, df1, error_dfs, error_dfs)
        return bool(np.any((low <= printed.high) & (printed.low <= high)))

    return fits(np.asarray(df2)) and not fits(np.arange(1.0, df2 / 2 + 1))
