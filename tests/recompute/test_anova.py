"""One-way ANOVA from summaries against certified values, scipy and statsmodels on raw data, searches over boxes."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import optimize, stats
from statsmodels.stats.oneway import anova_oneway

from recheck.recompute import anova, anova_box
from recheck.recompute.tails import f_tail
from tests.recompute.boxes import SHARES, at, holds, intervals
from tests.reference import rows

BOX = settings(max_examples=120, deadline=None)
GROUP = st.tuples(intervals(-5, 5, 2.0), intervals(0.1, 4, 0.5), st.integers(2, 40))
GROUPS = st.lists(GROUP, min_size=2, max_size=6)


def listed(row, column):
    return np.array([float(x) for x in row[column].split(";")])


def split(groups):
    means, sds, ns = (np.array(part, dtype=float) for part in zip(*groups, strict=True))
    return (*means.T, *sds.T, ns)


@pytest.mark.parametrize("row", rows("one_way_anova"), ids=lambda row: row["label"])
def test_certified_and_published_F(row):
    F = anova.f_one_way(listed(row, "means"), listed(row, "sds"), listed(row, "ns"))
    assert pytest.approx(row.number("F"), rel=1e-12) == F
    if row.number("p") > 1e-300:
        assert f_tail(F, row.number("df1"), row.number("df2")) == pytest.approx(row.number("p"), rel=1e-9)
    if row["source"].startswith("NIST"):
        assert pytest.approx(float(row["printed"]), rel=1e-13) == F


@pytest.mark.parametrize("seed", range(12))
def test_unequal_variances_match_statsmodels(seed):
    rng = np.random.default_rng(seed)
    data = [rng.normal(0, 1 + i, size=int(rng.integers(4, 20))) for i in range(int(rng.integers(2, 6)))]
    summaries = [np.array(x) for x in zip(*((d.mean(), d.std(ddof=1), len(d)) for d in data), strict=True)]
    for theirs, ours in (("unequal", anova.f_welch), ("bf", anova.f_brown_forsythe)):
        expected = anova_oneway(data, use_var=theirs)
        F, df2 = ours(*summaries)
        # statsmodels gives F* with the df of Mehrotra (1997) for its p; the denominator's df are second
        df = expected.df[1] if theirs == "unequal" else expected.df_denom
        assert (float(F), float(df2)) == pytest.approx((expected.statistic, df), rel=1e-10)
    assert anova.f_one_way(*summaries) == pytest.approx(stats.f_oneway(*data).statistic, rel=1e-10)


def test_tables_are_read_along_the_last_axis():
    means = np.array([[1.0, 2.0, 4.0], [1.0, 1.0, 1.0]])
    F = anova.f_one_way(means, np.ones(3), np.full(3, 5.0))
    assert F.shape == (2,) and F[1] == 0
    low, high = anova.f_one_way_bounds(means - 0.1, means + 0.1, 0.9, 1.1, np.full(3, 5.0))
    assert low.shape == (2,) and low[1] == 0 and high[1] > 0


@BOX
@given(GROUPS, st.data())
def test_every_point_of_a_box_lies_in_the_bounds(groups, data):
    m_low, m_high, s_low, s_high, ns = split(groups)
    shares = [data.draw(st.tuples(SHARES, SHARES)) for _ in groups]
    means = np.array([at(g[0], s[0]) for g, s in zip(groups, shares, strict=True)])
    sds = np.array([at(g[1], s[1]) for g, s in zip(groups, shares, strict=True)])
    box = (m_low, m_high, s_low, s_high, ns)
    assert holds(anova.f_one_way_bounds(*box), float(anova.f_one_way(means, sds, ns)), 1e-12)
    assert holds(anova.f_brown_forsythe_bounds(*box), float(anova.f_brown_forsythe(means, sds, ns)[0]), 1e-12)
    welch, df2 = anova.f_welch_bounds(*box)
    F, df = anova.f_welch(means, sds, ns)
    assert holds(welch, float(F), 1e-12) and holds(df2, float(df), 1e-12)


@BOX
@given(GROUPS)
def test_ends_are_attained_as_searches_confirm(groups):
    m_low, m_high, s_low, s_high, ns = split(groups)
    low, high = anova.f_one_way_bounds(m_low, m_high, s_low, s_high, ns)

    def height(centre):
        return float(np.sum(ns * (np.clip(centre, m_low, m_high) - centre) ** 2))

    # the means nearest to a centre, and the centre sought by Brent's method: a point of the box
    found = optimize.minimize_scalar(
        height,
        bounds=(m_low.min(), m_high.max()),
        method="bounded",
        options={"xatol": 1e-13, "maxiter": 2000},
    )
    least = float(anova.f_one_way(np.clip(found.x, m_low, m_high), s_high, ns))
    assert low <= least * (1 + 1e-9) + 1e-12
    # means a millionth apart lose digits, and the bounds widen by as much
    assert low == pytest.approx(least, rel=1e-8, abs=1e-9)
    bounds = list(zip(m_low, m_high, strict=True))
    corners = np.array(np.meshgrid(*bounds, indexing="ij")).reshape(len(ns), -1).T
    most = max(float(anova.f_one_way(corner, s_low, ns)) for corner in corners)
    assert high == pytest.approx(most, rel=1e-8)


@BOX
@given(GROUPS)
def test_the_least_sum_of_squares_is_that_of_a_quadratic_programme(groups):
    m_low, m_high, _, _, ns = split(groups)
    low, _ = anova.ss_between_bounds(m_low, m_high, ns)
    bounds = list(zip(m_low, m_high, strict=True))
    found = optimize.minimize(
        lambda m: float(anova.ss_between(m, ns)), (m_low + m_high) / 2, bounds=bounds, method="L-BFGS-B",
        options={"ftol": 1e-15, "gtol": 1e-12},
    )  # fmt: skip
    assert low <= found.fun * (1 + 1e-9) + 1e-12
    assert low == pytest.approx(found.fun, rel=1e-5, abs=1e-8)


def test_F_is_not_monotone_in_a_mean():
    # the middle mean moves through the others' mean: least inside, greatest at an end
    low, high = anova.ss_between_bounds([0.0, 1.0, 4.0], [0.0, 3.0, 4.0], [10.0, 10.0, 10.0])
    assert low == pytest.approx(80.0)  # means 0, 2, 4
    assert high == pytest.approx(10 * (25 / 9 + 4 / 9 + 49 / 9))  # means 0, 1, 4


def test_large_means_lose_nothing():
    ns, half = np.full(3, 10.0), 0.05
    means = np.array([1e9 + 0.3, 1e9 + 0.4, 1e9 + 0.5])
    low, high = anova.ss_between_bounds(means - half, means + half, ns)
    exact = anova.ss_between_bounds(np.array([0.25, 0.35, 0.45]), np.array([0.35, 0.45, 0.55]), ns)
    assert low <= exact[0] and high >= exact[1]
    assert high == pytest.approx(float(exact[1]), rel=1e-5)


def test_too_many_groups_are_refused():
    with pytest.raises(ValueError, match="at most 12 groups"):
        anova.ss_between_bounds(np.zeros(13), np.ones(13), np.ones(13))


@BOX
@given(groups=GROUPS)
def test_one_box_in_plain_floats_is_the_same(groups):
    means, sds, ns = (tuple(part) for part in zip(*groups, strict=True))
    expected = [float(end) for end in anova.f_one_way_bounds(*split(groups))]
    assert anova_box.f_one_way_range(means, sds, ns) == pytest.approx(expected, rel=1e-10, abs=1e-12)


def test_one_box_without_spread():
    means, ns = ((1.0, 1.1), (2.0, 2.1)), (5, 5)
    assert anova_box.f_one_way_range(means, ((0.0, 0.1), (0.0, 0.1)), ns)[1] == np.inf
    assert np.isnan(anova_box.f_one_way_range(((1.0, 1.0),) * 2, ((0.0, 0.0),) * 2, ns)[0])


@BOX
@given(st.lists(st.tuples(intervals(-5, 5, 2.0), st.integers(2, 40)), min_size=2, max_size=6))
def test_points_nearest_to_their_own_mean(groups):
    ends, ns = np.array([pair for pair, _ in groups]).T, np.array([n for _, n in groups], dtype=float)
    points = anova.nearest_to_their_mean(*ends, ns)
    assert points == pytest.approx(np.clip(np.average(points, weights=ns), *ends), abs=1e-9)
    box = tuple((float(low), float(high)) for low, high in ends.T)
    bounds = [float(end) for end in anova.ss_between_bounds(*ends, ns)]
    assert anova_box.ss_between_range(box, tuple(ns)) == pytest.approx(bounds, rel=1e-9, abs=1e-12)


def test_one_row_without_spread_leaves_the_other_rows_alone():
    """The upper end of Welch's F was infinite in all rows where one of them had an SD that may be 0."""
    means, ns = np.array([[4.0, 5.0, 6.0]] * 2), np.array([12.0, 9.0, 20.0])
    sds = np.array([[1.0, 1.5, 0.8], [0.004, 1.5, 0.8]])
    F, df2 = anova.f_welch_bounds(means - 0.05, means + 0.05, sds - 0.005, sds + 0.005, ns)
    alone = anova.f_welch_bounds(means[0] - 0.05, means[0] + 0.05, sds[0] - 0.005, sds[0] + 0.005, ns)
    assert (F[0][0], F[1][0], df2[0][0], df2[1][0]) == (*alone[0], *alone[1])
    assert np.isinf(F[1][1])
