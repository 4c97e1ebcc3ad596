"""Groups put together and split off again: R on its own datasets, numpy on raw data, searches over boxes."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.recompute import combining
from tests.recompute.boxes import at, holds, intervals
from tests.reference import Reference, rows

GROUPED = ("union_mean", "union_sd", "pooled_sd", "rest_mean", "rest_sd")


@pytest.mark.parametrize(
    "row",
    [r for r in rows("r_spreads") if r["output"] in GROUPED],
    ids=lambda r: f"{r['label']}: {r['call']}",
)
def test_groups_as_r_puts_them_together(row: Reference):
    given = row.lists()
    value = {
        "union_mean": lambda means, sds, ns: combining.union_mean(means, ns),
        "union_sd": combining.union_sd,
        "pooled_sd": lambda means, sds, ns: combining.pooled_sd_of(sds, ns),
        "rest_mean": lambda mean, sd, n, mean_part, sd_part, n_part: combining.rest_mean(mean, n, mean_part, n_part),
        "rest_sd": combining.rest_sd,
    }[row["output"]](**given)  # fmt: skip
    assert float(np.squeeze(value)) == pytest.approx(row.number("value"), rel=1e-12)


def test_the_handbook_formula_for_two_groups():
    # Higgins, Li & Deeks, Cochrane Handbook for Systematic Reviews of Interventions, table 6.5.a, as it stands there.
    n1, m1, s1, n2, m2, s2 = 27, 4.1, 1.3, 41, 5.2, 0.9
    top = (n1 - 1) * s1**2 + (n2 - 1) * s2**2 + n1 * n2 / (n1 + n2) * (m1**2 + m2**2 - 2 * m1 * m2)
    assert combining.union_sd([m1, m2], [s1, s2], [n1, n2]) == pytest.approx(np.sqrt(top / (n1 + n2 - 1)))


@settings(max_examples=100, deadline=None)
@given(
    seed=st.integers(0, 10**6),
    ns=st.lists(st.integers(2, 30), min_size=2, max_size=5),
    origin=st.sampled_from((0.0, 37.0, 1e6)),
)
def test_union_and_rest_of_raw_data(seed, ns, origin):
    rng = np.random.default_rng(seed)
    parts = [rng.normal(origin + rng.normal(0, 2), rng.uniform(0.5, 3), n) for n in ns]
    means, sds = [x.mean() for x in parts], [x.std(ddof=1) for x in parts]
    whole, rest = np.concatenate(parts), np.concatenate(parts[1:])
    assert combining.union_mean(means, ns) == pytest.approx(whole.mean(), rel=1e-12)
    assert combining.union_sd(means, sds, ns) == pytest.approx(whole.std(ddof=1), rel=1e-8)
    total = whole.mean(), whole.std(ddof=1), len(whole)
    assert combining.rest_mean(total[0], total[2], means[0], ns[0]) == pytest.approx(rest.mean(), rel=1e-9)
    assert combining.rest_sd(*total, means[0], sds[0], ns[0]) == pytest.approx(rest.std(ddof=1), rel=1e-5)


@settings(max_examples=100, deadline=None)
@given(
    means=st.lists(intervals(-5, 5), min_size=2, max_size=4),
    seed=st.integers(0, 10**6),
    share=st.integers(0, 3),
)
def test_boxes_of_unions_and_rests(means, seed, share):
    rng = np.random.default_rng(seed)
    k = len(means)
    ns = rng.integers(2, 40, k).astype(float)
    sd_low = rng.uniform(0, 3, k)
    sd_high = sd_low + rng.choice([0.0, 0.05, 0.6], k)
    low, high = np.array(means).T
    m = np.array([at(i, float(rng.choice([0, 1, rng.random()]))) for i in means])
    s = sd_low + (sd_high - sd_low) * rng.choice([0.0, 1.0, rng.random()], k)
    box = combining.union_sd_bounds(low, high, sd_low, sd_high, ns)
    assert holds(box, float(combining.union_sd(m, s, ns)), slack=1e-12)
    assert holds(combining.union_mean_bounds(low, high, ns), float(combining.union_mean(m, ns)), slack=1e-12)
    assert holds(
        combining.pooled_sd_of_bounds(sd_low, sd_high, ns), float(combining.pooled_sd_of(s, ns)), slack=1e-12
    )
    n, part = ns[0] + ns[1] + 3, ns[1]
    total = (low[0], high[0], sd_low[0] + 1, sd_high[0] + 1)
    box = combining.rest_sd_bounds(*total, n, low[1], high[1], sd_low[1], sd_high[1], part)
    found = float(combining.rest_sd(m[0], s[0] + 1, n, m[1], s[1], part))
    if not np.isnan(found):
        assert holds(box, found, slack=1e-7)
    box = combining.rest_mean_bounds(low[0], high[0], n, low[1], high[1], part)
    assert holds(box, float(combining.rest_mean(m[0], n, m[1], part)), slack=1e-12)


def test_there_may_be_no_rest():
    assert np.isnan(combining.rest_sd(5.0, 1.0, 10, 5.0, 3.0, 8))  # more spread in the part than in all
    assert np.isnan(combining.rest_sd(5.0, 1.0, 10, 5.0, 1.0, 9))  # one case has no SD
    assert combining.rest_mean(5.0, 10, 4.0, 9) == pytest.approx(14.0)
    low, high = combining.rest_sd_bounds(5, 5, 0.95, 1.05, 10, 5, 5, 0.95, 1.25, 8)
    assert low == 0 and high > 1


def test_unions_broadcast_over_leading_axes():
    assert combining.union_sd(np.zeros((4, 3)), np.ones(3), [5, 6, 7]).shape == (4,)
