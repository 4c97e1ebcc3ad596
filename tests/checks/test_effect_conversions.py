"""Effect sizes of other names beside their test: what each formula gives, and what only excess contradicts."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from recheck.checks.registry import Case, all_checks, find_check
from tests.checks.claims import claim, finding

all_checks()


@pytest.mark.parametrize(
    ("name", "value", "expected"),
    [
        ("omega2", ".10", "agrees"),  # 2 × 3.2 / (2 × 4.2 + 58) = .0964
        ("omega2", ".03", "conditional"),  # of the total
        ("omega2", ".12", "conditional"),  # between ω² and η²
        ("omega2", ".31", "inconsistent"),
        ("epsilon2", ".10", "agrees"),  # 6.4 / 65.4 = .0979
        ("f", "0.38", "agrees"),  # √(8.4 / 57) = .384
        ("f", "0.15", "conditional"),  # f²
        ("f", "0.60", "conditional"),  # beside a Welch F up to three times as small
        ("f", "2.31", "inconsistent"),
        ("f2", "0.15", "agrees"),
    ],
)
def test_shares_of_F(name, value, expected):
    of = claim("F-test", F="4.20", df1="2", df2="57", **{name: value})
    assert finding("shares-from-F", of).verdict == expected


def test_an_F_below_one_is_printed_with_a_share_of_zero_or_less():
    for value in ("-.01", "0", ".00"):
        assert (
            finding("shares-from-F", claim("F-test", F="0.60", df1="2", df2="57", omega2=value)).verdict
            == "agrees"
        )


def test_other_models_are_not_rebuilt():
    of = claim("F-test", "mixed-model", F="4.20", df1="2", df2="57", omega2=".31")
    assert finding("shares-from-F", of).verdict == "unchecked"


@pytest.mark.parametrize(
    ("value", "expected"), [(".23", "agrees"), (".12", "conditional"), (".52", "inconsistent")]
)
def test_eta2_of_t(value, expected):
    assert finding("eta2-from-t", claim("t-test", t="3.23", df="34", eta2=value)).verdict == expected


@settings(max_examples=30, deadline=None)
@given(seed=st.integers(0, 10**6), n=st.integers(5, 60), m=st.integers(5, 60))
def test_the_correlation_with_the_group_is_never_contradicted(seed, n, m):
    """r of scipy on raw scores, and η² = r²."""
    rng = np.random.default_rng(seed)
    scores, group = rng.standard_normal(n + m), np.repeat([1.0, 0.0], [n, m])
    r, t = stats.pearsonr(scores, group).statistic, stats.ttest_ind(scores[:n], scores[n:]).statistic
    numbers = {"t": f"{t:.2f}", "df": str(n + m - 2)}
    assert finding("r-from-t", claim("t-test", r_pb=f"{r:.2f}", **numbers)).verdict == "agrees"
    assert finding("eta2-from-t", claim("t-test", eta2=f"{r * r:.3f}", **numbers)).verdict == "agrees"


@pytest.mark.parametrize(
    ("value", "expected"),
    [(".48", "agrees"), ("-.48", "agrees"), (".63", "conditional"), (".28", "inconsistent")],
)
def test_r_of_t(value, expected):
    assert finding("r-from-t", claim("t-test", t="3.23", df="34", r_pb=value)).verdict == expected


def test_r_of_paired_measures_is_no_effect_size():
    assert (
        list(find_check("r-from-t").run(Case(claim=claim("t-test", "paired", t="3.23", df="34", r=".81"))))
        == []
    )


@pytest.mark.parametrize(
    ("value", "expected"), [("1.08", "agrees"), ("0.55", "agrees"), ("0.21", "conditional")]
)
def test_d_of_F(value, expected):
    assert finding("d-from-F", claim("F-test", F="10.43", df1="1", df2="34", d=value)).verdict == expected


@pytest.mark.parametrize(
    ("chi2", "df", "name", "value", "expected"),
    [
        ("12.4", "1", "phi", ".39", "agrees"),
        ("12.4", "1", "phi", "-.39", "agrees"),
        ("10.9", "1", "phi", ".39", "conditional"),  # χ² with Yates' correction
        ("12.4", "1", "phi", ".93", "inconsistent"),
        ("12.4", "4", "cramers_v", ".28", "agrees"),  # three by three: √(12.4 / 160)
        ("12.4", "4", "cramers_v", ".23", "conditional"),  # corrected for bias (Bergsma 2013)
        ("12.4", "4", "cramers_v", ".37", "conditional"),  # the contingency coefficient
        ("12.4", "4", "cramers_v", ".72", "inconsistent"),
    ],
)
def test_v_of_chi2(chi2, df, name, value, expected):
    assert (
        finding("v-from-chi2", claim("chi2-test", chi2=chi2, df=df, N="80", **{name: value})).verdict
        == expected
    )


@pytest.mark.parametrize(
    ("values", "expected"),
    [
        ({"f": "0.38", "partial_eta2": ".13"}, "agrees"),
        ({"f": "0.15", "partial_eta2": ".13"}, "conditional"),  # f²
        ({"f2": "0.25", "r2": ".20"}, "agrees"),
        ({"f2": "0.75", "r2": ".20"}, "conditional"),
    ],
)
def test_f_beside_a_share(values, expected):
    assert finding("f-from-eta2", claim("F-test", F="4.20", df1="2", df2="57", **values)).verdict == expected


@pytest.mark.parametrize(
    ("r", "expected"), [(".48", "agrees"), (".35", "conditional"), (".08", "conditional")]
)
def test_d_beside_r(r, expected):
    assert finding("d-against-r", claim("t-test", t="3.23", df="34", d="1.08", r_pb=r)).verdict == expected
