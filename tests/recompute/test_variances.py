"""Tests of equal variances against published results, R, scipy on raw data, and searches over boxes."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import optimize, stats

from recheck.recompute import variances as va
from tests.recompute.boxes import SHARES, at, holds, intervals
from tests.reference import rows

SD = intervals(0.05, 9, 0.8)
N = st.integers(2, 40)
BOX = settings(max_examples=120, deadline=None)


@pytest.mark.parametrize("row", rows("variance_tests"), ids=lambda row: row["label"])
def test_published_tests_of_variances(row):
    sds, ns = (np.array([float(x) for x in row[name].split(";")]) for name in ("sds", "ns"))
    K2, df, p = va.bartlett(sds, ns)
    assert (float(K2), float(df), float(p)) == pytest.approx(row.numbers("K2", "df", "p"), rel=1e-9)
    assert va.variance_ratio(sds.max(), sds.min()) == pytest.approx(row.number("largest_ratio"), rel=1e-12)


def test_nist_ratio_of_two_variances():
    # NIST/SEMATECH e-Handbook, 1.3.5.9: F = 1.123037, its p recomputed in scipy 1.17.
    (row,) = (row for row in rows("variance_tests") if "NIST ceramic" in row["label"])
    s1, s2 = (float(x) for x in row["sds"].split(";"))
    assert float(va.variance_ratio(s1, s2)) == pytest.approx(1.123037, abs=1e-6)
    assert float(va.variance_ratio_p(va.variance_ratio(s1, s2), 240, 240)) == pytest.approx(
        0.370383159877, rel=1e-9
    )


def test_variance_tests_of_r():
    for row in (row for row in rows("r_designs") if row["kind"] == "variance_ratio"):
        x = row.given()
        ratio = va.variance_ratio(x["sd1"], x["sd2"])
        assert ratio == pytest.approx(row.number("statistic"), rel=1e-12)
        assert va.variance_ratio_p(ratio, x["n1"], x["n2"]) == pytest.approx(row.number("p"), rel=1e-10)
        assert row["df"] == f"{x['n1'] - 1:g};{x['n2'] - 1:g}"
    for row in (row for row in rows("r_designs") if row["kind"] == "bartlett"):
        x = row.lists()
        found = [float(y) for y in va.bartlett(x["sds"], x["ns"])]
        assert found == pytest.approx(row.numbers("statistic", "df", "p"), rel=1e-9)


@settings(max_examples=50, deadline=None)
@given(st.lists(st.lists(st.integers(1, 60), min_size=2, max_size=9), min_size=2, max_size=5))
def test_bartlett_of_raw_data(groups):
    groups = [[*g, max(g) + 1] for g in groups]
    K2, _, p = va.bartlett([np.std(g, ddof=1) for g in groups], [len(g) for g in groups])
    # The library's p is nan where its statistic is 0 but for rounding.
    expected = max(float(stats.bartlett(*[np.array(g, dtype=float) for g in groups]).statistic), 0.0)
    upper = stats.chi2.sf(expected, len(groups) - 1)
    assert (float(K2), float(p)) == pytest.approx((expected, upper), rel=1e-7, abs=1e-10)


@BOX
@given(s1=SD, n1=N, s2=SD, n2=N, u=SHARES, v=SHARES)
def test_bounds_of_the_ratio_and_of_its_p(s1, n1, s2, n2, u, v):
    F = float(va.variance_ratio(at(s1, u), at(s2, v)))
    assert holds(va.variance_ratio_bounds(*s1, *s2), F)
    low, high = va.variance_ratio_p_bounds(*s1, n1, *s2, n2)
    assert holds((low, high), float(va.variance_ratio_p(F, n1, n2)), slack=1e-14)
    grid = va.variance_ratio_p(np.geomspace((s1[0] / s2[1]) ** 2, (s1[1] / s2[0]) ** 2, 2000), n1, n2)
    assert (float(low), float(high)) == pytest.approx((grid.min(), grid.max()), rel=0.02)


@BOX
@given(boxes=st.lists(st.tuples(SD, N, SHARES), min_size=2, max_size=4))
def test_bounds_of_bartlett(boxes):
    low, high = np.array([b[0] for b in boxes]).T
    ns = np.array([b[1] for b in boxes])
    bounds = va.bartlett_bounds(low, high, ns)
    inside = np.array([at(b[0], b[2]) for b in boxes])
    assert holds(bounds, float(va.bartlett(inside, ns)[0]), slack=1e-9)
    start = [np.log((low + high) / 2), np.log(low), np.log(high)]
    limits = list(zip(np.log(low), np.log(high), strict=True))
    found = [
        optimize.minimize(lambda u: float(va.bartlett(np.exp(u), ns)[0]), x, bounds=limits).fun for x in start
    ]
    assert float(bounds[0]) == pytest.approx(min(found), rel=1e-4, abs=1e-5)


def test_limits_of_bartlett():
    assert va.bartlett([0.0, 1.0], [5, 5])[0] == np.inf
    assert np.isnan(va.bartlett([0.0, 0.0], [5, 5])[0])
    assert va.bartlett_bounds([1.0, 1.05], [1.1, 1.2], [9, 9])[0] == 0
    with pytest.raises(ValueError, match="at most 12 groups"):
        va.bartlett_bounds([1.0] * 13, [2.0] * 13, [5] * 13)


@BOX
@given(F=intervals(0.01, 6, 3.0), n1=N, n2=N, u=SHARES)
def test_bounds_of_p_over_an_interval_of_the_ratio(F, n1, n2, u):
    dfs = n1 - 1, n2 - 1
    p = min(1.0, 2 * min(stats.f.sf(at(F, u), *dfs), stats.f.cdf(at(F, u), *dfs)))
    bounds = va.p_of_ratio_bounds(*F, n1, n2)
    assert holds(bounds, p, slack=1e-12)
    inside = F[0] <= stats.f.median(*dfs) <= F[1]
    ends = [va.variance_ratio_p(end, n1, n2) for end in F]
    assert float(bounds[1]) == pytest.approx(1.0 if inside else max(ends), rel=1e-9)
    assert float(bounds[0]) == pytest.approx(min(ends), rel=1e-12)
