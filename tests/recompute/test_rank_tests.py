"""Tests of ranks against R, scipy on raw data, published tables and brute force."""

from itertools import combinations, product

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from recheck.recompute import rank_tests as rt
from recheck.recompute.tails import z_two_sided
from tests.reference import rows

N = st.integers(1, 60)
RAW = settings(max_examples=60, deadline=None)


def _of_r(kind):
    return [row for row in rows("r_designs") if row["kind"] == kind]


def test_normal_approximations_of_r():
    for row in _of_r("u_normal"):
        x = row.given()
        z = rt.z_from_u(
            row.number("statistic"), x["n1"], x["n2"], x["ties"], continuity=bool(x["continuity"])
        )
        assert z_two_sided(z) == pytest.approx(row.number("p"), rel=1e-9)
    for row in _of_r("w_normal"):
        x = row.given()
        z = rt.z_from_signed_rank(
            row.number("statistic"), x["n"], x["ties"], continuity=bool(x["continuity"])
        )
        assert z_two_sided(z) == pytest.approx(row.number("p"), rel=1e-9)


def test_exact_p_of_r():
    for row in _of_r("u_exact"):
        x = row.given()
        assert rt.u_exact_p(row.number("statistic"), x["n1"], x["n2"]) == pytest.approx(
            row.number("p"), rel=1e-9
        )
    for row in _of_r("w_exact"):
        p = rt.signed_rank_exact_p(row.number("statistic"), row.given()["n"])
        assert p == pytest.approx(row.number("p"), rel=1e-9)


def test_exact_p_by_brute_force():
    for n1, n2 in ((1, 3), (3, 4), (4, 4)):
        sums = np.array(
            [sum(chosen) - n1 * (n1 + 1) / 2 for chosen in combinations(range(1, n1 + n2 + 1), n1)]
        )
        for u in range(n1 * n2 + 1):
            tail = min(np.mean(sums <= u), np.mean(sums >= u))
            assert rt.u_exact_p(u, n1, n2) == pytest.approx(min(2 * tail, 1))
    signs = np.array(list(product((0, 1), repeat=6))) @ np.arange(1, 7)
    for w in range(22):
        tail = min(np.mean(signs <= w), np.mean(signs >= w))
        assert rt.signed_rank_exact_p(w, 6) == pytest.approx(min(2 * tail, 1))


def test_critical_values_of_the_tables():
    # Mann-Whitney tables (Siegel & Castellan 1988, from memory): two-sided 5%, U <= 23 for 10 and 10, 127 for 20 and 20.
    for n1, n2, u in ((10, 10, 23), (20, 20, 127), (5, 5, 2)):
        assert rt.u_exact_p(u, n1, n2) <= 0.05 < rt.u_exact_p(u + 1, n1, n2)
    # Wilcoxon's table (from memory): two-sided 5%, W <= 8 for 10 pairs, 25 for 15, 52 for 20.
    for n, w in ((10, 8), (15, 25), (20, 52)):
        assert rt.signed_rank_exact_p(w, n) <= 0.05 < rt.signed_rank_exact_p(w + 1, n)


@RAW
@given(
    st.lists(st.integers(1, 9), min_size=2, max_size=20), st.lists(st.integers(1, 9), min_size=2, max_size=20)
)
def test_u_of_raw_data(a, b):
    ranks = stats.rankdata([*a, *b])
    u = rt.u_from_rank_sum(ranks[: len(a)].sum(), len(a))
    assert rt.rank_sum_from_u(u, len(a)) == ranks[: len(a)].sum()
    assert rt.u_range(len(a), len(b))[0] <= u <= rt.u_range(len(a), len(b))[1]
    sets = np.unique([*a, *b], return_counts=True)[1].astype(float)
    ties = float(np.sum(sets**3 - sets))
    if len(sets) == 1:
        return
    for continuity in (True, False):
        found = stats.mannwhitneyu(a, b, method="asymptotic", use_continuity=continuity)
        assert found.statistic == u
        z = rt.z_from_u(u, len(a), len(b), ties, continuity=continuity)
        assert z_two_sided(z) == pytest.approx(found.pvalue, rel=1e-9)
        assert abs(z) >= abs(rt.z_from_u(u, len(a), len(b), continuity=continuity)) - 1e-12


@RAW
@given(n1=N, n2=N, share=st.floats(0, 1), continuity=st.booleans())
def test_z_and_back(n1, n2, share, continuity):
    u = share * n1 * n2
    z = rt.z_from_u(u, n1, n2, continuity=continuity)
    if z:
        assert rt.u_from_z(z, n1, n2, continuity=continuity) == pytest.approx(u, rel=1e-9, abs=1e-9)
    w = share * n1 * (n1 + 1) / 2
    z = rt.z_from_signed_rank(w, n1, continuity=continuity)
    if z:
        assert rt.signed_rank_from_z(z, n1, continuity=continuity) == pytest.approx(w, rel=1e-9, abs=1e-9)


def test_ranges():
    assert [float(x) for x in rt.u_range(12, 14)] == [0, 168]
    assert [float(x) for x in rt.rank_sum_range(3, 4)] == [6, 18]
    assert [float(x) for x in rt.signed_rank_range(15)] == [0, 120]
    assert np.isnan(rt.u_exact_p(13, 3, 4)) and np.isnan(rt.u_exact_p(10, 101, 5))
    assert rt.u_exact_p([2, 2, 3], [5, 4, 5], [5, 6, 5]).shape == (3,)


def test_sds_are_those_of_all_orders_and_signs():
    """Tied ranks too: every choice of group 1, and every pattern of signs."""
    ranks = np.array([1.0, 2.5, 2.5, 5.0, 5.0, 5.0, 7.0])
    ties = (2**3 - 2) + (3**3 - 3)
    sums = [ranks[list(chosen)].sum() for chosen in combinations(range(7), 3)]
    assert rt.u_sd(3, 4, ties) == pytest.approx(np.std(sums), rel=1e-12)
    signed = np.array(list(product((0, 1), repeat=7))) @ ranks
    assert rt.signed_rank_sd(7, ties) == pytest.approx(np.std(signed), rel=1e-12)
    assert rt.z_from_u(rt.u_from_z(1.3, 3, 4, ties), 3, 4, ties) == pytest.approx(1.3)
