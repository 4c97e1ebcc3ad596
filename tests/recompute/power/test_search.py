"""Roots of increasing functions, and the whole numbers above them."""

import numpy as np
import pytest

from recheck.recompute.power.search import root, whole_from


def test_roots_of_a_known_function():
    target = np.array([0.5, 2.0, 9.0, 1e6, 1e13, -1.0, np.nan])
    found = root(lambda x: x**2, target, 1.0, 1e6)
    assert found[:4] == pytest.approx([1.0, np.sqrt(2), 3.0, 1e3], rel=1e-12)
    assert np.isnan(found).tolist() == [False] * 4 + [True, False, True]
    assert found[5] == 1.0


def test_a_function_that_is_unknown_beyond_twice_the_root():
    found = root(lambda x: np.where(x > 11, np.nan, x), [5.5, 3.0], 1.0, 1e9)
    assert found == pytest.approx([5.5, 3.0], rel=1e-12)


def test_the_whole_number_is_the_first_that_reaches():
    def rises(n):
        return np.asarray(n) / 10

    for target, whole in ((0.31, 4), (0.3, 3), (0.3000001, 4)):
        assert float(whole_from(rises, target, root(rises, target, 1.0, 1e6))) == whole
    assert np.isnan(whole_from(rises, np.nan, np.array(np.nan)))
