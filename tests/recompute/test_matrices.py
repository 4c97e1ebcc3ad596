"""Matrices of correlations: published ones, data of every kind, planted contradictions, and boxes by brute force."""

from __future__ import annotations

from itertools import combinations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.typing import NDArray

from recheck.recompute import matrices
from tests.reference import Reference, rows

ROWS = rows("correlation_matrices")
ONE_THIRD = 1 / 3


def box(printed: NDArray[np.float64], decimals: int) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """What a matrix of printed correlations stands for."""
    half = 0.5 * 10.0**-decimals
    low, high = np.clip(printed - half, -1, 1), np.clip(printed + half, -1, 1)
    np.fill_diagonal(low, 1.0)
    np.fill_diagonal(high, 1.0)
    return low, high


def printed(row: Reference) -> tuple[NDArray[np.float64], int]:
    lines = [line.split() for line in row["matrix"].split(";")]
    return np.array(lines, dtype=float), len(lines[0][0].partition(".")[2])


def draw(rng: np.random.Generator, size: int, decimals: int) -> NDArray[np.float64]:
    """Correlations of complete data, every third time of fewer cases than variables, rounded."""
    cases = int(
        rng.integers(3, size) if size > 3 and rng.random() < ONE_THIRD else rng.integers(size, 6 * size)
    )
    scores = rng.normal(size=(cases, size)) + rng.uniform(0, 2) * rng.normal(size=(cases, 1))
    return np.round(np.corrcoef(scores.T), decimals)


@pytest.mark.parametrize("row", ROWS, ids=[row["label"] for row in ROWS])
def test_published_matrices(row: Reference) -> None:
    matrix, decimals = printed(row)
    least = row.number("least_eigenvalue")
    assert float(matrices.smallest_eigenvalue(matrix)) == pytest.approx(least, abs=1e-13)
    found = matrices.within_box(*box(matrix, decimals))
    assert found.possible is (row["semidefinite_within_rounding"] == "yes")


@pytest.mark.parametrize(
    "row", [r for r in ROWS if r["weights"]], ids=[r["label"] for r in ROWS if r["weights"]]
)
def test_published_certificates(row: Reference) -> None:
    matrix, decimals = printed(row)
    weights = np.array([float(x) for x in row["weights"].split()]) * 1000
    exact = float(matrices.most_over_box(np.rint(weights), matrix, matrix)) / 1e6
    assert exact == pytest.approx(weights @ matrix @ weights / 1e6, abs=1e-12) and exact < 0
    within = float(matrices.most_over_box(np.rint(weights), *box(matrix, decimals))) / 1e6
    spread = 0.5 * 10.0**-decimals * (np.sum(np.abs(weights)) ** 2 - np.sum(weights**2)) / 1e6
    if (
        row["semidefinite_within_rounding"] == "no"
        and np.abs(matrix[~np.eye(len(matrix), dtype=bool)]).max() < 1
    ):
        assert within == pytest.approx(exact + spread, abs=1e-9) and within < 0


@pytest.mark.parametrize("size", [3, 4, 7, 15])
@pytest.mark.parametrize("decimals", [1, 2, 3])
def test_correlations_of_data_are_possible_and_the_witness_says_so(size: int, decimals: int) -> None:
    rng = np.random.default_rng([size, decimals])
    for _ in range(12):
        low, high = box(draw(rng, size, decimals), decimals)
        found = matrices.within_box(low, high)
        assert found.possible and found.witness is not None
        assert np.all((low <= found.witness) & (found.witness <= high))
        assert matrices.smallest_eigenvalue(found.witness) > -1e-12
        assert not list(matrices.worst_triples(low, high))


@pytest.mark.parametrize("size", [3, 5, 9, 20])
def test_a_lost_sign_is_proved_by_exact_sums(size: int) -> None:
    rng = np.random.default_rng(size)
    for _ in range(8):
        scores = rng.normal(size=(60, size)) + 1.8 * rng.normal(size=(60, 1))
        matrix = np.round(np.corrcoef(scores.T), 2)
        matrix[0, 1] = matrix[1, 0] = -matrix[0, 1]
        low, high = box(matrix, 2)
        found = matrices.within_box(low, high)
        assert found.possible is False and found.vectors is not None and found.most < 0
        whole = found.vectors * matrices.SHORT
        assert matrices.most_over_box(whole, low, high) < 0
        assert {0, 1} <= set(matrices.fewest_at_fault(low, high, found))
        # No matrix of the box can have a quadratic form above what is proved.
        for _ in range(20):
            inside = rng.uniform(low, high)
            inside = np.tril(inside) + np.tril(inside, -1).T
            assert np.sum((found.vectors @ inside) * found.vectors) <= found.most + 1e-12


def test_fault_beyond_any_three_variables() -> None:
    """Four variables at -.34 each: every three of them can be (-.34 > -1/2), the four cannot (-.34 < -1/3)."""
    matrix = np.where(np.eye(5) == 1, 1.0, -0.34)
    matrix[4, :4] = matrix[:4, 4] = 0.0
    low, high = box(matrix, 2)
    assert not list(matrices.worst_triples(low, high))
    assert matrices.fewest_at_fault(low, high, matrices.within_box(low, high)) == (0, 1, 2, 3)


def test_missing_cells_may_be_anything() -> None:
    low, high = box(np.array([[1, 0.9, 0.9], [0.9, 1, 0.2], [0.9, 0.2, 1]]), 2)
    assert matrices.within_box(low, high).possible is False
    low[1, 2] = low[2, 1] = -1.0
    high[1, 2] = high[2, 1] = 1.0
    assert matrices.within_box(low, high).possible


r = st.integers(-100, 100).map(lambda x: x / 100)


@settings(max_examples=150, deadline=None)
@given(r, r, r, st.sampled_from([0.0, 0.005, 0.05]))
def test_three_by_closed_form_and_by_search(r12: float, r13: float, r23: float, half: float) -> None:
    """The closed form, the smallest eigenvalue of single matrices, and the search agree."""
    matrix = np.array([[1, r12, r13], [r12, 1, r23], [r13, r23, 1.0]])
    low, high = np.clip(matrix - half, -1, 1), np.clip(matrix + half, -1, 1)
    np.fill_diagonal(low, 1.0)
    np.fill_diagonal(high, 1.0)
    excess = float(
        matrices.triple_excess(low[0, 1], high[0, 1], low[0, 2], high[0, 2], low[1, 2], high[1, 2])
    )
    if half == 0:
        # det = 1 + 2 r12 r13 r23 - r12² - r13² - r23² (closed form for three variables).
        det = 1 + 2 * r12 * r13 * r23 - r12**2 - r13**2 - r23**2
        assert (excess > 1e-9) == (det < -1e-12)
    found = matrices.within_box(low, high).possible
    if abs(excess) > 1e-6:
        assert found is False
    elif excess == 0 and half:
        assert found is not False


@settings(max_examples=100, deadline=None)
@given(r, r, st.floats(0, 0.1), st.floats(0, 0.1))
def test_ends_of_the_third_correlation_are_attained(
    r12: float, r13: float, half12: float, half13: float
) -> None:
    ends = [np.clip([x - h, x + h], -1, 1) for x, h in ((r12, half12), (r13, half13))]
    low, high = matrices.third_correlation_bounds(*ends[0], *ends[1])
    grid12, grid13 = np.meshgrid(np.linspace(*ends[0], 41), np.linspace(*ends[1], 41))
    half = np.sqrt((1 - grid12**2) * (1 - grid13**2))
    least, most = np.min(grid12 * grid13 - half), np.max(grid12 * grid13 + half)
    assert low <= least + 1e-9 and most <= high + 1e-9
    assert least - low < 0.01 and high - most < 0.01


def test_one_entry_given_all_others() -> None:
    """The ends make the determinant 0, and for three variables are those of the closed form."""
    rng = np.random.default_rng(3)
    for size in (3, 4, 6):
        matrix = np.corrcoef(rng.normal(size=(30, size)).T)
        low, high = matrices.entry_bounds(matrix, 0, 2)
        assert low < matrix[0, 2] < high
        for end in (low, high):
            moved = matrix.copy()
            moved[0, 2] = moved[2, 0] = float(end)
            assert np.linalg.det(moved) == pytest.approx(0, abs=1e-12)
        if size == 3:
            closed = matrices.third_correlation_bounds(matrix[0, 1], matrix[0, 1], matrix[1, 2], matrix[1, 2])
            assert (float(low), float(high)) == pytest.approx(tuple(map(float, closed)))


def test_one_entry_where_the_others_cannot_be() -> None:
    matrix = np.array([[1, 0.9, 0.9, 0], [0.9, 1, 0.2, 0], [0.9, 0.2, 1, 0], [0, 0, 0, 1.0]])
    assert np.isnan(matrices.entry_bounds(matrix, 0, 3)[0])


def test_all_triples_are_looked_at() -> None:
    rng = np.random.default_rng(8)
    matrix = np.round(rng.uniform(-1, 1, size=(7, 7)), 2)
    matrix = np.tril(matrix, -1) + np.tril(matrix, -1).T + np.eye(7)
    low, high = box(matrix, 2)
    named = set(matrices.worst_triples(low, high))
    for triple in combinations(range(7), 3):
        chosen = np.ix_(triple, triple)
        assert (matrices.within_box(low[chosen], high[chosen]).possible is False) == (triple in named)


def test_a_certificate_is_one_of_the_boxes_within():
    wide = box(np.array([[1, 0.9, 0.9], [0.9, 1, 0.1], [0.9, 0.1, 1]]), 1)
    found = matrices.within_box(*wide)
    assert found.possible is False
    assert matrices.still_proved(found, *box(np.array([[1, 0.9, 0.9], [0.9, 1, 0.1], [0.9, 0.1, 1]]), 2))
    possible = box(np.array([[1, 0.9, 0.9], [0.9, 1, 0.7], [0.9, 0.7, 1]]), 1)
    assert not matrices.still_proved(found, *possible)
    assert not matrices.still_proved(matrices.within_box(*possible), *possible)


def test_an_unknown_cell_decides_nothing():
    cells = np.array([[1, np.nan, 0.2], [np.nan, 1, 0.3], [0.2, 0.3, 1]])
    assert matrices.within_box(cells, cells).possible is None
    assert list(matrices.worst_triples(cells, cells)) == []
