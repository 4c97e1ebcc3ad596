"""Strategies and helpers for boxes: intervals, and points inside them."""

from __future__ import annotations

import numpy as np
from hypothesis import strategies as st

SHARES = st.sampled_from((0.0, 0.0, 0.25, 0.5, 0.77, 1.0)) | st.floats(0, 1)
"""How far into an interval a point lies; corners come often."""
INSIDE = 1e-9
"""Relative widening that every caller applies to computed ends."""


def intervals(low: float, high: float, width: float = 1.0) -> st.SearchStrategy[tuple[float, float]]:
    """Intervals that start from `low` to `high` and are up to `width` wide, or points."""
    starts = st.floats(low, high).map(lambda x: round(x, 6))
    widths = st.just(0.0) | st.floats(0, width).map(lambda x: round(x, 6))
    return st.tuples(starts, widths).map(lambda pair: (pair[0], pair[0] + pair[1]))


def at(interval: tuple[float, float], share: float) -> float:
    """The point of an interval that lies `share` of its width from its low end."""
    low, high = interval
    return min(max(low + share * (high - low), low), high)


def holds(bounds: tuple[np.ndarray, np.ndarray], value: float, slack: float = 0.0) -> bool:
    """Tell whether a value lies in computed bounds, as widened for use."""
    low, high = float(bounds[0]), float(bounds[1])
    if np.isinf(value):
        return value in (low, high)
    return low - abs(value) * INSIDE - slack <= value <= high + abs(value) * INSIDE + slack
