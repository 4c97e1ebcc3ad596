from fractions import Fraction

import numpy as np
import pytest
from pytest import approx

from recheck.recompute.granularity import Scores, sd_most, sd_most_any_mean, sd_most_for_mean, spread_limits
from tests.recompute.granularity.brute import ends, pairs
from tests.reference import rows

WITH_LIMITS = [row for row in rows("granularity") if row.has("sd_least", "sd_greatest", "high")]


def test_limits_of_whole_scores_by_listing():
    for n, high in [(n, high) for n in range(2, 7) for high in (1, 2, 3, 5)]:
        variances: dict[int, set[Fraction]] = {}
        for total, squares in pairs(n, high):
            variances.setdefault(total, set()).add((squares - Fraction(total**2, n)) / (n - 1))
        for first in range(n * high + 1):
            for last in range(first, n * high + 1):
                seen = set().union(*(variances[total] for total in range(first, last + 1)))
                limits = spread_limits(Scores(n, 0, high), (Fraction(first, n), Fraction(last, n)))
                assert [limit.squared for limit in limits] == [min(seen), max(seen)], (n, high, first, last)
                for limit in limits:
                    values = [value for value, times in limit.sample for _ in range(times)]
                    middle = Fraction(sum(values), n)
                    assert sum((v - middle) ** 2 for v in values) / (n - 1) == limit.squared
                    assert min(values) >= 0 and max(values) <= high and first <= sum(values) <= last


@pytest.mark.parametrize("row", WITH_LIMITS, ids=lambda row: row["case"])
def test_limits_of_reference_cases(row):
    scores = Scores(int(row["n"]), Fraction(row["low"]), Fraction(row["high"]), int(row["items"]))
    kind = "sd of all" if row["denominator"] == "n" else "sd"
    least, greatest = spread_limits(scores, ends(row["mean"], row["rounding"]), kind)
    assert least.spread == approx(row.number("sd_least"), rel=1e-9)
    assert greatest.spread == approx(row.number("sd_greatest"), rel=1e-9)


@pytest.mark.parametrize(
    "row", [r for r in rows("granularity") if r.has("popoviciu")], ids=lambda row: row["case"]
)
def test_bounds_of_real_scores_against_the_reference(row):
    mean, n, low, high = row.numbers("mean", "n", "low", "high")
    of_all = ((n - 1) / n) ** 0.5 if row["denominator"] == "n" else 1.0
    assert of_all * sd_most_any_mean(n, low, high) == approx(row.number("popoviciu"), rel=1e-9)
    if row.has("bhatia_davis"):
        bound = of_all * sd_most_for_mean(mean, n, low, high)
        assert bound == approx(row.number("bhatia_davis"), rel=1e-9)


def test_most_of_real_scores_is_attained_and_between_the_bounds():
    rng = np.random.default_rng(4)
    for _ in range(300):
        n, mean = int(rng.integers(2, 12)), rng.uniform(0, 6)
        u = n * mean / 6
        p = int(u)
        scores = np.array([6.0] * p + [6 * (u - p)] * (p < n) + [0.0] * (n - p - 1))
        most = sd_most(mean, mean, n, 0, 6)
        assert most == approx(np.std(scores, ddof=1), abs=1e-9)
        assert most <= sd_most_for_mean(mean, n, 0, 6) + 1e-9 <= sd_most_any_mean(n, 0, 6) + 2e-9
        assert np.std(rng.uniform(0, 6, n), ddof=1) <= sd_most(0, 6, n, 0, 6)


def test_most_over_an_interval_of_means_is_that_of_its_best_mean():
    rng = np.random.default_rng(5)
    low = rng.uniform(0, 6, 200)
    high = np.minimum(low + rng.uniform(0, 1, 200), 6)
    n = rng.integers(2, 15, 200)
    grid = low + (high - low) * np.linspace(0, 1, 4001)[:, None]
    assert sd_most(low, high, n, 0, 6) == approx(np.nanmax(sd_most(grid, grid, n, 0, 6), axis=0), rel=2e-3)
    assert np.all(sd_most(low, high, n, 0, 6) >= np.nanmax(sd_most(grid, grid, n, 0, 6), axis=0) - 1e-9)
    assert np.isnan(sd_most(7, 8, 5, 0, 6)) and np.isnan(sd_most(3, 3, 1, 0, 6))


def test_limits_of_means_between_whole_numbers_and_without_a_scale():
    least, greatest = spread_limits(Scores(8, 1, 5), (Fraction(3, 2),) * 2)
    assert least.spread == approx(0.534522483825) and greatest.spread == approx(2**0.5)
    assert spread_limits(Scores(8), (Fraction(3, 2),) * 2)[1].spread == float("inf")
    assert spread_limits(Scores(28), (Fraction("5.185"), Fraction("5.195"))) is None
