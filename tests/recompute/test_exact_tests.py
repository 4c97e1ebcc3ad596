"""Exact tests and exact odds ratios against R, scipy and published values."""

from itertools import product
from math import factorial

import numpy as np
import pytest
from scipy import stats
from scipy.stats import contingency

from recheck.recompute import exact_tests
from tests.reference import rows

R_ROWS = [row for row in rows("r_counts") if row["what"].startswith("fisher")]


@pytest.mark.parametrize("row", R_ROWS, ids=lambda row: row["call"])
def test_matches_r(row):
    counts = np.array([float(x) for x in row["counts"].split()])
    what = row["what"].removeprefix("fisher ")
    if "columns" in what:
        table = counts.reshape(-1, int(what.split()[0])).T
        assert exact_tests.freeman_halton_p(table) == pytest.approx(row.number("value"), rel=1e-7)
        return
    table, rel = counts.reshape(2, 2), 1e-10
    if what == "p.value":
        found = exact_tests.fisher_p(table)
    elif what == "less":
        found, other = exact_tests.fisher_one_sided_p(table), row.number("value")
        found = found if other < 0.5 else other  # R was asked for the lower tail alone
    else:
        # R's own root finding stops at 1e-4 of ψ or 1/ψ.
        ends = exact_tests.odds_ratio_exact(table)
        found = exact_tests.conditional_odds_ratio(table) if what == "estimate" else ends["[2]" in what]
        rel = 1e-2
    assert found == pytest.approx(row.number("value"), rel=rel)


@pytest.mark.parametrize("row", rows("two_by_two"), ids=lambda row: row["label"])
def test_published_tables(row):
    table = np.array(row.numbers("a", "b", "c", "d")).reshape(2, 2)
    assert exact_tests.fisher_p(table) == pytest.approx(row.number("fisher_p"), rel=1e-7)
    if row.has("conditional_or"):
        assert exact_tests.conditional_odds_ratio(table) == pytest.approx(
            row.number("conditional_or"), rel=1e-6
        )


def test_many_tables_at_once_match_scipy_one_by_one():
    tables = np.random.default_rng(5).integers(0, 50, (60, 2, 2))
    p, ratio = exact_tests.fisher_p(tables), exact_tests.conditional_odds_ratio(tables)
    low, high = exact_tests.odds_ratio_exact(tables, 0.9)
    for i, table in enumerate(tables):
        if not (table.sum(axis=0).all() and table.sum(axis=1).all()):
            continue
        found = contingency.odds_ratio(table)
        ends = found.confidence_interval(0.9)
        assert p[i] == pytest.approx(stats.fisher_exact(table).pvalue, rel=1e-9)
        assert (ratio[i], low[i], high[i]) == pytest.approx((found.statistic, *ends), rel=1e-6)


def test_mid_p_leaves_half_of_the_observed_table_out():
    table = [[3, 1], [1, 3]]  # Fisher's tea: P(3) = 16/70, P(4) = 1/70
    assert exact_tests.fisher_mid_p(table) == pytest.approx(2 * (8 + 1) / 70)
    assert exact_tests.fisher_one_sided_p(table) == pytest.approx(17 / 70)


def test_the_median_unbiased_ratio_has_half_of_the_chance_on_either_side():
    table = np.array([[12, 28], [20, 21]])
    ratio = float(exact_tests.median_unbiased_odds_ratio(table))
    below = stats.nchypergeom_fisher(81, 32, 40, ratio)
    assert below.cdf(11) + below.pmf(12) / 2 == pytest.approx(0.5, abs=1e-9)


def test_a_mid_p_interval_is_narrower_and_ends_where_its_tails_say():
    table = np.array([[12, 28], [20, 21]])
    low, high = exact_tests.odds_ratio_exact(table, own=0.5)
    wide_low, wide_high = exact_tests.odds_ratio_exact(table)
    assert wide_low < low < high < wide_high
    lower = stats.nchypergeom_fisher(81, 32, 40, float(low))
    assert lower.sf(12) + lower.pmf(12) / 2 == pytest.approx(0.025, abs=1e-9)


def test_a_large_table_of_many_columns_is_left_alone():
    assert np.isnan(exact_tests.freeman_halton_p(np.full((4, 5), 40), most=10_000))


def _all_tables(rows_left, columns):
    """Every table of these margins, by brute force."""
    if len(columns) == 1:
        yield [rows_left]
        return
    for cells in product(*(range(min(row, columns[0]) + 1) for row in rows_left)):
        if sum(cells) == columns[0]:
            left = tuple(row - cell for row, cell in zip(rows_left, cells, strict=True))
            for rest in _all_tables(left, columns[1:]):
                yield [cells, *rest]


@pytest.mark.parametrize("seed", range(8))
def test_larger_tables_match_all_tables_of_their_margins(seed):
    table = np.random.default_rng(seed).integers(0, 4, (2 + seed % 2, 3)) + np.eye(2 + seed % 2, 3, dtype=int)
    tables = np.array(list(_all_tables(tuple(table.sum(axis=1)), tuple(table.sum(axis=0)))))
    weights = [1 / np.prod([float(factorial(int(cell))) for cell in one.ravel()]) for one in tables]
    own = 1 / np.prod([float(factorial(int(cell))) for cell in table.ravel()])
    expected = sum(w for w in weights if w <= own * (1 + 1e-9)) / sum(weights)
    assert exact_tests.freeman_halton_p(table) == pytest.approx(expected, rel=1e-9)


ALL = (
    "fisher_p", "fisher_one_sided_p", "fisher_mid_p", "conditional_odds_ratio", "median_unbiased_odds_ratio", "odds_ratio_exact",
)  # fmt: skip


@pytest.mark.parametrize("name", ALL)
def test_what_is_no_count_is_unknown_and_leaves_other_tables_alone(name):
    good = [[3, 5], [6, 2]]
    tables = np.array(
        [good, [[np.nan, 2], [3, 4]], [[2.5, 3], [1, 1]], [[-1, 3], [1, 1]], [[np.inf, 1], [1, 1]]]
    )
    found, alone = np.array(getattr(exact_tests, name)(tables)), np.array(getattr(exact_tests, name)(good))
    assert np.array_equal(found[..., 0], alone)
    assert np.isnan(found[..., 1:]).all()
    assert all(np.isnan(exact_tests.freeman_halton_p(table)) for table in tables[1:])


def test_median_unbiased_odds_ratios_at_their_ends():
    """The first count at its greatest is the median of no finite odds ratio; with one table alone every one will do."""
    assert exact_tests.median_unbiased_odds_ratio([[5, 0], [0, 5]]) == np.inf
    assert exact_tests.median_unbiased_odds_ratio([[0, 5], [5, 0]]) == 0
    assert np.isnan(exact_tests.median_unbiased_odds_ratio([[0, 0], [3, 4]]))
