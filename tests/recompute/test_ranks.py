"""Spearman's rho against all permutations and the published critical values."""

from itertools import permutations

import numpy as np
import pytest

from recheck.recompute import ranks
from recheck.recompute.ranks import spearman_two_sided
from recheck.recompute.tails import r_two_sided


@pytest.mark.parametrize("n", (2, 3, 5, 7))
def test_exact_p_counts_the_permutations(n):
    own = np.arange(n)
    squares = np.array([((own - other) ** 2).sum() for other in permutations(range(n))])
    rho = 1 - 6 * squares / (n**3 - n)
    for value in np.unique(rho):
        share = np.mean(np.abs(rho) >= abs(value) - 1e-12)
        assert spearman_two_sided(value, n) == pytest.approx(min(share, 1.0), abs=1e-12)


@pytest.mark.parametrize(
    ("n", "rho", "alpha"),
    # Two-sided critical values of Zar (1972), J. Am. Stat. Assoc. 67:578-580, Table 1 (from memory).
    [(5, 1.000, 0.05), (6, 0.886, 0.05), (7, 0.786, 0.05), (8, 0.738, 0.05), (9, 0.700, 0.05), (7, 0.929, 0.01),
     (8, 0.881, 0.01), (9, 0.833, 0.01), (10, 0.648, 0.05), (12, 0.587, 0.05), (15, 0.521, 0.05), (20, 0.447, 0.05),
     (30, 0.362, 0.05)],
)  # fmt: skip
def test_published_critical_values(n, rho, alpha):
    step = 12 / (n**3 - n)
    lattice = 1 - step * np.floor((1 - rho - 0.0005) / step + 1)  # the least attainable rho that prints so
    assert spearman_two_sided(lattice, n) <= alpha * 1.01
    assert spearman_two_sided(lattice - step, n) > alpha * 0.99


@pytest.mark.parametrize(("n", "error"), [(10, 1.2e-3), (12, 4e-4), (13, 2.4e-4)])
def test_the_series_comes_close_to_the_exact_p(n, error):
    exact = ranks._exact_tail(n)
    rho = 1 - 12 * np.arange(len(exact)) / (n**3 - n)
    upper = rho >= 0
    two_sided = np.minimum(2 * exact[upper], 1)
    assert np.abs(spearman_two_sided(rho[upper], n) - two_sided).max() < error


def test_the_series_tends_to_the_t_approximation():
    assert spearman_two_sided(0.07, 900) == pytest.approx(float(r_two_sided(0.07, 898)), rel=1e-3)


def test_p_falls_with_the_size_of_rho_and_ignores_its_sign():
    rho = np.linspace(-1, 1, 401)
    for n in (4, 9, 12, 40):
        p = spearman_two_sided(rho, n)
        assert np.allclose(p, p[::-1])
        assert np.all(np.diff(p[200:]) <= 1e-12)
        assert p[200] == 1


def test_edges_and_shapes():
    assert np.isnan(spearman_two_sided([1.2, 0.5, np.nan], [9, 1, 9])).all()
    assert spearman_two_sided(0.5, 8).shape == ()
    assert spearman_two_sided(np.array([[0.2], [0.6]]), np.array([5, 9, 30])).shape == (2, 3)
