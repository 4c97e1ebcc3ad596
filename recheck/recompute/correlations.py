"""Partial correlations from three correlations, and their range over a box.

Variables are 1 and 2, for which 3 is held constant; r12, r13 and r23 run from -1 to 1.
"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Bounds, Floats, floats, quotient, together, where_known


def partial_r(r12: ArrayLike, r13: ArrayLike, r23: ArrayLike) -> Floats:
    """Correlation of 1 and 2 with 3 held constant, (r12 - r13 r23) / sqrt((1 - r13²)(1 - r23²)).

    Beyond 1 in size where no data have these three correlations; nan where r13 or r23 is 1 in size and
    the numerator 0. Source: Yule (1907), Proceedings of the Royal Society A 79:182-193.
    """
    r12, r13, r23 = floats(r12, r13, r23)
    left = (1 - r13) * (1 + r13) * ((1 - r23) * (1 + r23))
    return quotient(r12 - r13 * r23, np.sqrt(left))


def semipartial_r(r12: ArrayLike, r13: ArrayLike, r23: ArrayLike) -> Floats:
    """Correlation of 1 with what 3 leaves of 2, (r12 - r13 r23) / sqrt(1 - r23²).

    Its square is the R² that 2 adds to 3 as predictors of 1. Source: Cohen & Cohen (1983), Applied Multiple
    Regression/Correlation Analysis for the Behavioral Sciences, 3.4.
    """
    r12, r13, r23 = floats(r12, r13, r23)
    return quotient(r12 - r13 * r23, np.sqrt((1 - r23) * (1 + r23)))


def partial_r_bounds(
    r12_low: ArrayLike, r12_high: ArrayLike, r13_low: ArrayLike, r13_high: ArrayLike,
    r23_low: ArrayLike, r23_high: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of the partial correlation over a box, among what data can have; nan where data can have none of it.

    It rises with r12. Its derivative in r13 has the sign of r12 r13 - r23 (in r23 that of r12 r23 - r13), so
    for r12 >= 0 it falls and then rises along every line: the greatest value is at a corner. For r12 < 0 it
    rises and then falls, with its top at r13 = r23 / r12 or the end nearest to that, and inside it turns only
    at r13 = r23 = 0, which is a saddle; so the greatest value is at the top of an edge. The least follows from
    partial(-r12, -r13, r23) = -partial(r12, r13, r23). Cut to -1 and 1, which are attained where the box
    reaches beyond them, as it is continuous between.
    """
    r12_low, r12_high, r13_low, r13_high, r23_low, r23_high = together(
        r12_low, r12_high, r13_low, r13_high, r23_low, r23_high
    )
    high = _most(r12_high, r13_low, r13_high, r23_low, r23_high)
    low = -_most(-r12_low, -r13_high, -r13_low, r23_low, r23_high)
    none = (low > 1) | (high < -1)
    bounds = np.where(none, np.nan, np.maximum(low, -1.0)), np.where(none, np.nan, np.minimum(high, 1.0))
    return where_known(bounds, r12_low, r12_high, r13_low, r13_high, r23_low, r23_high)


def _most(r12: Floats, r13_low: Floats, r13_high: Floats, r23_low: Floats, r23_high: Floats) -> Floats:
    """The greatest partial correlation over intervals of r13 and r23."""
    tops = _tops(r12, r13_low, r13_high, r23_low, r23_high)
    return np.asarray(np.fmax.reduce([partial_r(r12, r13, r23) for r13, r23 in tops]))


def _tops(
    r12: Floats, r13_low: Floats, r13_high: Floats, r23_low: Floats, r23_high: Floats
) -> Iterator[tuple[Floats, Floats]]:
    """Corners and the turning points of edges, moved into the intervals."""
    for r13 in (r13_low, r13_high):
        yield r13, r23_low
        yield r13, r23_high
        yield r13, np.clip(np.nan_to_num(quotient(r13, r12)), r23_low, r23_high)
    for r23 in (r23_low, r23_high):
        yield np.clip(np.nan_to_num(quotient(r23, r12)), r13_low, r13_high), r23
