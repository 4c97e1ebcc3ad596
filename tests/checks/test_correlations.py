"""Correlations of one table without n: which of them ask for quite another number of cases."""

from dataclasses import replace

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from recheck.checks.running import run_checks
from recheck.model import Place, Settings
from tests.checks.claims import claim


def found(pairs, **more):
    """Findings on a table of r and p, by the row."""
    rows = [
        replace(
            claim("correlation", name=f"r{i}", r=r, p=p, **more),
            place=Place(f"{r} | {p}", table="Table 1", row=f"row {i}"),
        )
        for i, (r, p) in enumerate(pairs)
    ]
    every = run_checks(rows, Settings())
    return {f.claims[0]: f.verdict for f in every if f.check == "p-among-correlations"}


# n = 130 by R 4.2, 2 * pt(-r * sqrt(128 / (1 - r^2)), 128): .15 .0886, .07 .429, .17 .0532, .02 .821, .30 .0005
HONEST = [("0.15", ".09"), ("−0.07", ".43"), ("0.17", ".05"), ("0.02", ".82"), ("0.30", "< .001")]


def test_a_p_of_quite_another_n_is_conditional():
    assert found(HONEST) == {}
    assert found([*HONEST, ("0.06", ".02")]) == {"r5": "conditional"}
    assert found([*HONEST[:2], ("0.06", ".02")]) == {}  # too few to tell
    assert found([*HONEST, ("0.06", ".02")], n="130") == {}  # n is printed: another check compares


@settings(max_examples=60, deadline=None)
@given(st.integers(0, 10**6), st.integers(4, 12))
def test_honest_correlations_of_one_sample_are_left_alone(seed, k):
    rng = np.random.default_rng(seed)
    n = int(rng.integers(12, 400))
    y = rng.normal(size=n)
    pairs = []
    for _ in range(k):
        x = rng.normal(size=n) + rng.normal() * 0.3 * y
        there = rng.random(n) > rng.choice([0, 0, 0.1, 0.3])
        test = stats.pearsonr(x[there], y[there])
        pairs.append((f"{test.statistic:.2f}".replace("-", "−"), f"{test.pvalue:.3f}"))
    assert found(pairs) == {}
