"""p without its statistic against group summaries: Student's sleep data, PlantGrowth, and tests of ranks."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from recheck.checks.registry import all_checks
from recheck.model import N_OF_GROUP
from tests.checks.claims import claim, finding

all_checks()

# Student (1908): two groups of ten, p = .0792 pooled, .0794 Welch; PlantGrowth: p = .0159
SLEEP = [("0.75", "1.789", "10"), ("2.33", "2.002", "10")]
PLANTS = [("5.032", "0.583", "10"), ("4.661", "0.794", "10"), ("5.526", "0.443", "10")]


def groups(summaries, *said, notes=()):
    return [
        replace(claim("group-summary", *said, name=f"g{i}", mean=m, sd=s, n=n), notes=notes)
        for i, (m, s, n) in enumerate(summaries)
    ]


def verdict(p, told, *said, kind="estimate"):
    return finding("p-from-groups", claim(kind, *said, groups=tuple(g.id for g in told), p=p), *told).verdict


@pytest.mark.parametrize(
    ("p", "said", "kind", "expected"),
    [
        (".079", (), "estimate", "agrees"),
        (".040", (), "estimate", "unchecked"),
        (".0000001", (), "estimate", "unchecked"),  # spreads above half the mean: perhaps skewed
        (".079", ("independent",), "estimate", "agrees"),
        (".040", ("independent",), "estimate", "conditional"),  # one-tailed
        (".40", ("independent",), "estimate", "inconsistent"),
        (".40", ("welch",), "estimate", "inconsistent"),
        (".40", (), "t-test", "inconsistent"),
        (".40", ("paired",), "estimate", "inconsistent"),
        (".003", ("paired",), "estimate", "agrees"),
        (".40", ("rank-test",), "estimate", "unchecked"),
        (".40", ("covariate-adjusted",), "estimate", "unchecked"),
    ],
)
def test_sleep_data(p, said, kind, expected):
    assert verdict(p, groups(SLEEP), *said, kind=kind) == expected


def test_missing_cases_are_honest():
    whole = groups(SLEEP, notes=(N_OF_GROUP,))
    assert verdict(".12", whole, "independent") == "unchecked"
    assert verdict(".0000001", whole, "independent") == "conditional"


@pytest.mark.parametrize(
    ("p", "said", "expected"),
    [
        (".016", (), "agrees"),
        (".16", (), "unchecked"),
        (".98", (), "conditional"),
        (".16", ("between-groups",), "inconsistent"),
        (".16", ("repeated",), "unchecked"),
    ],
)
def test_plant_growth(p, said, expected):
    assert verdict(p, groups(PLANTS), *said) == expected


def test_skewed_scores_leave_more_open():
    skewed = [("12.0", "15.0", "30"), ("30.0", "28.0", "30")]
    assert verdict(".25", groups(skewed)) == "unchecked"


@settings(max_examples=60, deadline=None)
@given(st.integers(0, 10**6), st.sampled_from(("normal", "rating", "lognormal")), st.booleans())
def test_ranks_behind_an_unnamed_p_are_rarely_even_conditional(seed, kind, welch):
    rng = np.random.default_rng(seed)
    sizes = rng.integers(8, 60, size=2)
    draw = {
        "normal": lambda n: rng.normal(10 + rng.normal(), 2, size=n),
        "rating": lambda n: rng.integers(1, 6, size=n) + rng.integers(0, 2),
        "lognormal": lambda n: np.exp(rng.normal(rng.normal(0, 0.4), 1, size=n)),
    }[kind]
    data = [draw(int(n)) for n in sizes]
    told = groups([(f"{d.mean():.1f}", f"{d.std(ddof=1):.1f}", str(len(d))) for d in data])
    plain = stats.ttest_ind(*data, equal_var=not welch).pvalue
    assert verdict(f"{plain:.3f}", told) == "agrees"
    ranks = stats.mannwhitneyu(*data).pvalue
    assert verdict(f"{ranks:.3f}", told) in ("agrees", "conditional", "unchecked")
