"""Very many triples at once: codes, ends, shapes."""

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.recompute.bounds import p_from_t_bounds
from recheck.recompute.tails import t_two_sided
from recheck.recompute.triples import AGREES, NEITHER, NOT_COMPARABLE, ONE_TAILED, check_t_triples


def test_codes_of_known_triples():
    # R 4.2: 2 * pt(-2.2, 28) = 0.03622706, pt(-2.2, 28) = 0.01811353.
    t = np.array([2.20, -2.20, 2.20, 2.20, 2.20, np.nan, 2.20])
    df = np.array([28, 28, 28, 28, 28, 28, 0])
    p = np.array([0.036, 0.036, 0.018, 0.982, 0.010, 0.036, 0.036])
    low, high, codes = check_t_triples(t - 0.005, t + 0.005, df, p - 0.0005, p + 0.0005)
    expected = [AGREES, AGREES, ONE_TAILED, ONE_TAILED, NEITHER, NOT_COMPARABLE, NOT_COMPARABLE]
    assert codes.tolist() == expected
    assert codes.dtype == np.uint8
    assert low[0] < 0.03622706 < high[0]


@settings(max_examples=100, deadline=None)
@given(t=st.floats(-40, 40), df=st.floats(0.5, 1e5), decimals=st.integers(0, 4))
def test_a_rounded_triple_always_agrees(t, df, decimals):
    half = 0.5 * 10.0**-decimals
    p = float(t_two_sided(t, df))
    t_low, p_low = round(t, decimals) - half, round(p, decimals) - half
    low, high, code = check_t_triples(t_low, t_low + 2 * half, df, p_low, p_low + 2 * half)
    assert code == AGREES
    assert low * (1 - 1e-9) <= p <= high * (1 + 1e-9)


def test_ends_are_those_of_the_bounds_in_every_chunk():
    rng = np.random.default_rng(1)
    t, df = rng.uniform(-6, 6, 50_000), rng.integers(1, 300, 50_000)
    low, high, codes = check_t_triples(t - 0.005, t + 0.005, df, 0.0, 1.0)
    size = np.abs(t)
    expected = p_from_t_bounds(size - 0.005, size + 0.005, df, df)
    assert np.allclose(low, expected[0], rtol=1e-12)
    assert np.allclose(high, expected[1], rtol=1e-12)
    assert not codes.any()


def test_triples_broadcast():
    low, high, codes = check_t_triples(1.995, 2.005, np.array([[5], [50]]), np.array([0.04, 0.09, 0.5]), 0.6)
    assert low.shape == high.shape == codes.shape == (2, 3)
    low, high, codes = check_t_triples(1.995, 2.005, 12, 0.065, 0.07)
    assert codes.shape == ()
