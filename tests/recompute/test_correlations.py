"""Partial correlations against residuals in R, and their range over boxes against grids."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings

from recheck.recompute.correlations import partial_r, partial_r_bounds, semipartial_r
from tests.recompute.boxes import intervals
from tests.reference import Reference, rows

ROWS = rows("r_partial")
correlations = intervals(-0.95, 0.9, 0.05)


@pytest.mark.parametrize("row", ROWS, ids=[row["label"] for row in ROWS])
def test_correlations_of_residuals(row: Reference) -> None:
    three = row.numbers("r12", "r13", "r23")
    assert float(partial_r(*three)) == pytest.approx(row.number("partial_r"), rel=1e-12)
    assert float(semipartial_r(*three)) == pytest.approx(row.number("semipartial_r"), rel=1e-12)


def test_what_no_data_have() -> None:
    assert partial_r(0.2, 0.9, 0.9) < -1
    assert np.isnan(partial_r_bounds(0.2, 0.2, 0.9, 0.9, 0.9, 0.9)).all()
    low, high = partial_r_bounds(0.6, 0.65, 0.9, 0.9, 0.9, 0.9)
    assert low == -1 and high == pytest.approx(float(partial_r(0.65, 0.9, 0.9)))


@settings(max_examples=200, deadline=None)
@given(correlations, correlations, correlations)
def test_ends_are_attained(
    r12: tuple[float, float], r13: tuple[float, float], r23: tuple[float, float]
) -> None:
    low, high = (float(end) for end in partial_r_bounds(*r12, *r13, *r23))
    grid = np.meshgrid(*(np.linspace(*ends, 21) for ends in (r12, r13, r23)))
    inside = partial_r(*grid)
    inside = inside[np.abs(inside) <= 1]
    if np.isnan(low):
        assert not inside.size
        return
    if inside.size:
        assert low <= inside.min() + 1e-12 and inside.max() <= high + 1e-12
        assert inside.min() - low < 0.15 and high - inside.max() < 0.15


def test_a_top_on_an_edge() -> None:
    """With r12 = -.5 and r23 up to .3 it lies at r23 = .3, r13 = r23 / r12 = -.6: -sqrt((.25 - .09) / .91)."""
    _, high = partial_r_bounds(-0.5, -0.5, -0.9, 0.4, 0.1, 0.3)
    assert float(high) == pytest.approx(-np.sqrt(0.16 / 0.91))
