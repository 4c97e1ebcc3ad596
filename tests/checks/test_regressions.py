"""Rows of regression tables: R data set mtcars, statsmodels on drawn data, and honest readings."""

import numpy as np
import pytest
import statsmodels.api as sm
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.checks.registry import Case, all_checks, find_check
from tests.checks.claims import claim, finding

all_checks()

# R 4.2, lm(mpg ~ wt, mtcars): b = −5.3445, SE 0.5591, t = −9.559 on 30 df, p = 1.29e-10, CI −6.486 to −4.203
SLOPE = {"b": "−5.34", "se": "0.56", "t": "−9.56", "df": "30", "p": "< .001"}
# R 4.2, glm(am ~ wt, binomial, mtcars): b = −4.024, SE 1.436, z = −2.801, p = .00509
LOGIT = {"b": "−4.024", "se": "1.436", "z": "−2.801", "p": ".005"}


def row(*said, interval_of=None, base=SLOPE, **changed):
    values = {k: v for k, v in {**base, **changed}.items() if v}
    return claim("regression", *said, interval_of=interval_of, **values)


def verdicts(check, of):
    return [(f.quantity, f.verdict) for f in find_check(check).run(Case(claim=of))]


@pytest.mark.parametrize(
    ("check", "of", "expected"),
    [
        ("t-from-b", row(), ("t", "agrees")),
        ("t-from-b", row(t="−6.59"), ("t", "inconsistent")),
        ("t-from-b", row(t="91.4"), ("t", "conditional")),  # Wald's statistic under the letter t
        ("t-from-b", row("robust", t="−6.59"), ("t", "conditional")),
        ("t-from-b", row(base=LOGIT), ("z", "agrees")),
        ("t-from-b", row(base=LOGIT, z="−2.108"), ("z", "inconsistent")),
        ("t-from-b", row(base=LOGIT, z="", chi2="7.85"), ("chi2", "agrees")),
        ("t-from-b", row(base=LOGIT, z="", chi2="9.85"), ("chi2", "conditional")),  # a likelihood ratio
        ("p-from-t", row(p=".02"), ("p", "inconsistent")),
        ("p-from-z", row(base=LOGIT, p=".05"), ("p", "inconsistent")),
        ("p-from-b", row(t="", df=""), ("p", "agrees")),
        ("p-from-b", row(df="", p=".2"), ("p", "conditional")),
        ("p-from-b", row(t="", p=".2"), ("p", "inconsistent")),
        ("ci-from-b", row(ci_low="−6.49", ci_high="−4.20", ci_level="95"), ("ci_low", "agrees")),
        ("ci-from-b", row(ci_low="−9.46", ci_high="−4.20", ci_level="95"), ("ci_low", "inconsistent")),
        ("ci-from-b", row(ci_low="−6.44", ci_high="−4.24", ci_level="95", se="0.5591"), ("ci_low", "conditional")),
        ("ratio-from-b", row(base=LOGIT, **{"or": "0.018"}), ("or", "agrees")),
        ("ratio-from-b", row(base=LOGIT, **{"or": "0.081"}), ("or", "conditional")),
        ("ratio-from-b", row(base=LOGIT, **{"or": "55.9"}), ("or", "conditional")),
    ],
)  # fmt: skip
def test_rows_of_mtcars(check, of, expected):
    assert verdicts(check, of) == [expected]


def test_the_implied_t_has_the_sign_of_the_printed_one():
    (found,) = find_check("t-from-b").run(Case(claim=row(t="−6.59")))
    assert found.implied[0].high < 0
    assert found.reconciled_by[-1].high < 0
    assert "t = −6.59 stands for −6.595 to −6.585" in found.tolerance


def test_a_sign_by_coding_is_no_contradiction():
    assert verdicts("t-from-b", row(t="9.56")) == [("t", "agrees")]


def test_a_difference_over_its_own_se():
    pair = {"mean_difference": "0.42", "se_difference": "0.25", "df": "22"}
    assert verdicts("t-from-b", claim("t-test", **pair, t="1.68")) == [("t", "agrees")]
    assert verdicts("t-from-b", claim("t-test", **pair, t="2.58")) == [("t", "inconsistent")]


def test_both_ends_have_one_level():
    # −0.063 ± 1.645 × 0.025: −0.104 to −0.022
    base = {"b": "−0.063", "se": "0.025", "z": "−2.52", "p": ".012"}
    (found,) = find_check("ci-from-b").run(Case(claim=row(base=base, ci_low="−0.104", ci_high="−0.022")))
    assert "90%" in found.message
    (found,) = find_check("ci-from-b").run(Case(claim=row(base=base, ci_low="−0.113", ci_high="−0.022")))
    assert found.verdict == "conditional"
    assert "90%" not in found.message
    off = row("bootstrap", base=base, ci_low="−0.113", ci_high="−0.022")
    assert verdicts("ci-from-b", off) == [("ci_high", "unchecked")]


def test_a_coefficient_that_its_ratio_proves():
    # exp(−0.41) = 0.664; exp(−0.41 ∓ 1.96 × 0.24): 0.415 to 1.062; z = 1.71, p = .087
    base = {
        "beta": "−0.41",
        "se": "0.24",
        "or": "0.66",
        "ci_low": "0.41",
        "ci_high": "1.06",
        "ci_level": "95",
    }
    of = row("two-tailed", base=base, interval_of="or", p=".02")
    for check in ("p-from-b", "p-from-ci"):
        (found,) = find_check(check).run(Case(claim=of))
        assert found.verdict == "conditional"
        assert "profile" not in found.message
    right = row("two-tailed", base=base, interval_of="or", p=".087")
    assert verdicts("p-from-b", right) == [("p", "agrees")]


# exp(−4.024 ∓ 1.959964 × 1.436): 0.00107 to 0.298
ODDS = {"base": LOGIT, "interval_of": "or", "ci_low": "0.0011", "ci_high": "0.298", "ci_level": "95"}


def test_an_odds_ratio_that_its_interval_and_b_deny():
    wrong = row(**ODDS, **{"or": "0.108"})
    assert verdicts("ratio-from-b", wrong) == [("or", "inconsistent")]
    assert verdicts("ratio-centre", wrong) == [("or", "conditional")]
    assert verdicts("ratio-centre", row(**ODDS, **{"or": "0.018"})) == [("or", "agrees")]


def test_stars_above_what_p_allows():
    for p, stars, expected in (
        (".008", "< 0.01", "agrees"), (".010", "< 0.01", "agrees"), (".03", "< 0.01", "inconsistent"),
        (".018", "< 0.01", "conditional"), ("< .001", "< 0.01", "agrees"), ("> .20", "< 0.05", "inconsistent"),
    ):  # fmt: skip
        assert finding("p-from-stars", claim("t-test", p=p, stars=stars)).verdict == expected
    adjusted = claim("t-test", "adjusted-p", p=".03", stars="< 0.01")
    assert finding("p-from-stars", adjusted).verdict == "conditional"


@settings(max_examples=40, deadline=None)
@given(st.integers(0, 10**6), st.integers(1, 3))
def test_an_honest_row_is_never_flagged(seed, decimals):
    rng = np.random.default_rng(seed)
    n = int(rng.integers(12, 120))
    x = sm.add_constant(rng.normal(size=(n, 2)))
    fit = sm.OLS(x @ rng.normal(size=3) + rng.normal(size=n), x).fit()
    low, high = fit.conf_int()[1]
    told = {
        "b": fit.params[1], "se": fit.bse[1], "t": fit.tvalues[1], "ci_low": low, "ci_high": high,
    }  # fmt: skip
    values = {k: f"{v:.{decimals}f}" for k, v in told.items()}
    values |= {"p": f"{fit.pvalues[1]:.3f}", "ci_level": "95"}
    if rng.random() < 0.5:
        values["df"] = str(int(fit.df_resid))
    of = row(base=values)
    for check in ("t-from-b", "p-from-b", "ci-from-b", "p-from-t"):
        if set(find_check(check).needs) <= values.keys():
            assert {v for _, v in verdicts(check, of)} <= {"agrees", "conditional"}
