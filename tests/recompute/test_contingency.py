"""Tests of tables of counts against published tables, scipy and statsmodels."""

import numpy as np
import pytest
from scipy import stats

from recheck.recompute import contingency as ct
from recheck.recompute import exact_tests
from recheck.recompute.tails import chi2_tail
from tests.reference import rows


@pytest.mark.parametrize("row", rows("two_by_two"), ids=lambda row: row["label"])
def test_published_two_by_two_tables(row):
    table = np.array(row.numbers("a", "b", "c", "d")).reshape(2, 2)
    chi2, yates = ct.pearson_chi2(table), ct.yates_chi2(table)
    assert chi2 == pytest.approx(row.number("chi2"), rel=1e-12)
    assert chi2_tail(chi2, 1) == pytest.approx(row.number("chi2_p"), rel=1e-9, abs=1e-300)
    assert yates == pytest.approx(row.number("yates"), rel=1e-12)
    assert chi2_tail(yates, 1) == pytest.approx(row.number("yates_p"), rel=1e-9, abs=1e-300)
    assert exact_tests.fisher_p(table) == pytest.approx(row.number("fisher_p"), rel=1e-7, abs=1e-300)


@pytest.mark.parametrize("seed", range(30))
def test_any_table_matches_scipy(seed):
    rng = np.random.default_rng(seed)
    shape = (int(rng.integers(2, 5)), int(rng.integers(2, 5)))
    table = rng.integers(0, 30, size=shape) + np.eye(*shape, dtype=int)
    if not (table.sum(axis=0).all() and table.sum(axis=1).all()):
        pytest.skip("an empty margin")
    pearson = stats.chi2_contingency(table, correction=False)
    assert ct.pearson_chi2(table) == pytest.approx(pearson.statistic, rel=1e-12)
    assert ct.expected_counts(table) == pytest.approx(pearson.expected_freq)
    ratio = stats.chi2_contingency(table, correction=False, lambda_="log-likelihood")
    assert ct.likelihood_ratio_chi2(table) == pytest.approx(ratio.statistic, rel=1e-10)
    assert ct.n_minus_one_chi2(table) == pytest.approx(pearson.statistic * (1 - 1 / table.sum()), rel=1e-12)
    if shape == (2, 2):
        assert ct.yates_chi2(table) == pytest.approx(stats.chi2_contingency(table).statistic, rel=1e-12)
        assert exact_tests.fisher_p(table) == pytest.approx(stats.fisher_exact(table).pvalue, rel=1e-7)


def test_tables_lie_along_the_last_axes():
    tables = np.array([[[10, 20], [20, 10]], [[15, 15], [15, 15]]])
    assert ct.pearson_chi2(tables) == pytest.approx([20 / 3, 0])


def test_an_empty_column_gives_no_number():
    assert np.isnan(ct.pearson_chi2([[5, 0], [7, 0]]))
