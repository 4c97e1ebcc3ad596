from fractions import Fraction
from math import floor

import numpy as np
import pytest

from recheck.recompute.granularity import Scores, find_scores, means_possible, share_of_means_detectable
from tests.recompute.granularity.brute import ends, roundings
from tests.reference import rows


@pytest.mark.parametrize(
    "row", [r for r in rows("granularity") if r.has("grim")], ids=lambda row: row["case"]
)
def test_reference_cases_of_grim(row):
    low, high = ends(row["mean"], row["rounding"])
    # The touch that leaves an end out is finer than the slack of floats.
    touch = Fraction(1, 10**6)
    open_low, open_high = low.denominator > 10**9, high.denominator > 10**9
    found = means_possible(
        float(low + touch * open_low), float(high - touch * open_high), row.number("n"), row.number("items")
    )
    assert found == (row["grim"] == "pass")


@pytest.mark.parametrize("decimals", [0, 1, 2, 3])
def test_rows_answer_as_the_exact_engine(decimals):
    n = np.arange(1, 130, 3 if decimals == 3 else 1)[:, None]
    units = np.arange(0, 10**decimals)
    half = 0.5 / 10**decimals
    found = means_possible(2 + units / 10**decimals - half, 2 + units / 10**decimals + half, n)
    for i, size in enumerate(n[:, 0]):
        printed = {
            p % 10**decimals
            for total in range(size)
            for p in roundings(Fraction(total * 10**decimals, int(size)))
        }
        assert set(np.flatnonzero(found[i])) == printed


def test_share_that_can_be_found_by_counting():
    for decimals in (0, 1, 2):
        for answers in range(1, 130):
            printed = {
                p % 10**decimals
                for total in range(answers)
                for p in roundings(Fraction(total * 10**decimals, answers))
            }
            share = 1 - len(printed) / 10**decimals
            assert share_of_means_detectable(answers, decimals) == pytest.approx(share, abs=1e-12)
    assert share_of_means_detectable(14, 2, 2) == share_of_means_detectable(28, 2)


def test_a_useless_test_says_so():
    """Two decimals tell nothing of 100 whole scores or more (Brown & Heathers 2017, common limit of GRIM)."""
    assert share_of_means_detectable(np.array([100, 250]), 2).tolist() == [0.0, 0.0]
    assert share_of_means_detectable(99, 2) > 0
    assert share_of_means_detectable(20, 2) == pytest.approx(0.8)


def test_many_rows_agree_with_single_answers():
    rng = np.random.default_rng(8)
    n, items = rng.integers(1, 60, 300), rng.integers(1, 4, 300)
    mean = [floor(100 * x) for x in rng.uniform(1, 7, 300)]
    low, high = ([Fraction(2 * m + side, 200) for m in mean] for side in (-1, 1))
    found = means_possible([float(x) for x in low], [float(x) for x in high], n, items)
    exact = [
        find_scores(Scores(int(a), items=int(b)), (x, y)).possible
        for a, b, x, y in zip(n, items, low, high, strict=True)
    ]
    assert found.tolist() == exact
