"""Whole correlation matrices: what fits together, what cannot, and who is at fault."""

from __future__ import annotations

import time

import numpy as np
import pytest

import recheck
from recheck.checks.examples import table
from recheck.model import Finding
from tests.reference import rows
from tests.soundness.tabling import markdown

NAMES = (
    "Height", "Crumb", "Crust", "Time", "Salt", "Heat", "Rye", "Age", "Acid", "Yeast",
    "Sugar", "Water", "Steam", "Stone", "Fold", "Rest", "Scale", "Score", "Smell", "Taste",
)  # fmt: skip


def written(matrix: np.ndarray, places: int = 2, caption: str = "Correlations of the scores.") -> str:
    """A triangle as a table; nan is an empty cell."""
    k = len(matrix)
    cells = [["" if np.isnan(r) else f"{r:.{places}f}" for r in row[:i]] for i, row in enumerate(matrix)]
    lines = [[f"{i + 1}. {NAMES[i]}", *cells[i], "–", *([""] * (k - i - 1))] for i in range(k)]
    return markdown(f"Table 1. {caption}", ["", *(str(i + 1) for i in range(k))], lines)


def finding(text: str) -> Finding:
    (found,) = [f for f in recheck.audit_text(text).findings if f.check == "correlation-matrix"]
    return found


@pytest.mark.parametrize(
    "row", rows("correlation_matrices"), ids=[r["label"] for r in rows("correlation_matrices")]
)
def test_published_matrices(row) -> None:
    matrix = np.array([line.split() for line in row["matrix"].split(";")], dtype=float)
    places = len(row["matrix"].split()[0].partition(".")[2])
    if places < 2:
        pytest.skip("coefficients of one decimal are not read as correlations")
    expected = "agrees" if row["semidefinite_within_rounding"] == "yes" else "conditional"
    assert finding(written(matrix, places)).verdict == expected


def test_three_variables_at_fault_are_named_with_the_range_and_the_proof() -> None:
    matrix = np.eye(5)
    matrix[1, 0], matrix[2, 0], matrix[2, 1], matrix[3, :3], matrix[4, :4] = 0.9, 0.9, 0.2, 0.3, 0.1
    found = finding(written(matrix))
    assert found.verdict == "conditional"
    assert (
        "Already 3 variables cannot stand so: Height with Crumb = 0.90, Height with Crust = 0.90 and Crumb with Crust = 0.20"
        in found.message
    )
    # r23 must be at least 2 (.895²) - 1 (Stanley & Wang 1969) where both others are .9.
    low = {remedy.quantity: remedy.low for remedy in found.reconciled_by if remedy.kind == "number"}
    assert low["r(3,2)"] == pytest.approx(2 * 0.895**2 - 1)
    assert "would have a variance of −0.16" in found.message
    assert "same cases" in found.assumptions[0] and "pairwise deletion" in found.message
    assert set(found.question.split("“")[0].split()) >= {"Height", "Crumb", "Crust"}


def test_a_lost_sign_is_named() -> None:
    matrix = np.eye(4)
    matrix[1, 0], matrix[2, :2], matrix[3, :3] = 0.8, 0.8, 0.8
    matrix[3, 1] = -0.8
    found = finding(written(matrix))
    assert "r(4,2)" in [
        r.quantity for r in found.reconciled_by if r.kind == "slip" and r.change == "-0.80 → 0.80"
    ]


def test_four_variables_at_fault_where_no_three_are() -> None:
    matrix = np.eye(5)
    matrix[1, 0], matrix[2, :2], matrix[3, :3] = -0.34, -0.34, -0.34
    matrix[4, :4] = 0.0
    found = finding(written(matrix))
    assert found.verdict == "conditional" and "Already 4 variables cannot stand so" in found.message
    assert "Age" not in found.message


def test_an_empty_cell_may_be_anything() -> None:
    matrix = np.eye(3)
    matrix[1, 0], matrix[2, 0], matrix[2, 1] = 0.9, 0.9, np.nan
    assert not [f for f in recheck.audit_text(written(matrix)).findings if f.check == "correlation-matrix"]
    larger = np.eye(4)
    larger[1, 0], larger[2, 0], larger[2, 1], larger[3, :3] = 0.9, 0.9, np.nan, 0.2
    found = finding(written(larger))
    assert found.verdict == "agrees" and "any value was allowed" in found.message
    assert "1 that are not printed" in found.tolerance


def test_rounding_alone_makes_no_finding() -> None:
    """Longley's data (R: cor(longley)): to two decimals the smallest eigenvalue is -0.0067."""
    (row,) = [r for r in rows("correlation_matrices") if r["label"] == "Longley, rounded to 2 decimals"]
    found = finding(written(np.array([line.split() for line in row["matrix"].split(";")], dtype=float)))
    assert found.verdict == "agrees" and "within rounding" in found.message and "−0.00672" in found.message


def test_each_side_of_the_diagonal_is_a_matrix_of_its_own() -> None:
    text = table(
        "Table 6. Correlations of the three scores",
        " | 1 | 2 | 3",
        "1. Aroma | – | .85 | .80",
        "2. Bite | .21 | – | .05",
        "3. Colour | .30 | .05 | –",
        note="Note. Correlations of the day shift (n = 52) are above the diagonal, of the night shift (n = 47) below it.",
    )
    audit = recheck.audit_text(text)
    verdicts = {
        next(c.group for c in audit.claims if c.id == f.claims[0]): f.verdict
        for f in audit.findings
        if f.check == "correlation-matrix"
    }
    assert verdicts == {"below the diagonal": "agrees", "above the diagonal": "conditional"}


def test_twenty_variables_are_decided_at_once() -> None:
    rng = np.random.default_rng(5)
    matrix = np.corrcoef((rng.normal(size=(60, 20)) + 1.5 * rng.normal(size=(60, 1))).T)
    good, bad = np.round(matrix, 2), np.round(matrix, 2)
    bad[7, 3] = -bad[7, 3]
    for kind, expected in ((good, "agrees"), (bad, "conditional")):
        audit = recheck.audit_text(written(kind))
        (claim,) = [c for c in audit.claims if c.kind == "correlation-matrix"]
        assert len(claim.values) == 190 and claim.variables == NAMES
        start = time.perf_counter()
        assert finding(written(kind)).verdict == expected
        assert time.perf_counter() - start < 4  # half a second on an idle core, reading included
