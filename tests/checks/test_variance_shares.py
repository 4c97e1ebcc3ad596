"""η² beside F: values of statsmodels' anova_lm on drawn data, and what each name allows."""

import numpy as np
import pandas as pd
import pytest
import statsmodels.formula.api as smf
from hypothesis import given, settings
from hypothesis import strategies as st
from statsmodels.stats.anova import anova_lm

from recheck.checks.registry import all_checks
from tests.checks.claims import claim, finding

all_checks()

# 2 × 9.93 / (2 × 9.93 + 28) = .41496
F_TEST = {"F": "9.93", "df1": "2", "df2": "28"}


def verdict(*said, **values):
    return finding("eta2-from-F", claim("F-test", *said, **{**F_TEST, **values})).verdict


@pytest.mark.parametrize(
    ("values", "expected"),
    [
        ({"partial_eta2": ".41"}, "agrees"),
        ({"partial_eta2": ".42"}, "agrees"),  # F = 9.935 gives .41505
        ({"partial_eta2": ".12"}, "conditional"),  # the smaller η² under the name of the partial one
        ({"partial_eta2": ".52"}, "conditional"),  # the effect size beside a Welch F
        ({"partial_eta2": ".72"}, "inconsistent"),
        ({"eta2": ".30"}, "agrees"),
        ({"eta2": ".72"}, "inconsistent"),
        ({"generalized_eta2": ".30"}, "agrees"),
        ({"partial_eta2": ".41", "df1": "1.60", "df2": "22.40"}, "agrees"),  # Greenhouse–Geisser shrinks both
        ({"partial_eta2": ".52", "df2": "22.4"}, "conditional"),  # df2 alone: Welch's or Satterthwaite's
    ],
)
def test_what_each_name_allows(values, expected):
    assert verdict(**values) == expected


def test_shares_of_other_models_are_not_rebuilt():
    for said in ("mixed-model", "robust", "welch", "imputed"):
        assert verdict(said, partial_eta2=".72") == "unchecked"


@settings(max_examples=25, deadline=None)
@given(st.integers(0, 10**6), st.integers(1, 3))
def test_an_honest_two_way_design_is_never_flagged(seed, decimals):
    rng = np.random.default_rng(seed)
    data = {name: rng.integers(0, k, 60) for name, k in (("flour", 3), ("oven", 2))}
    data["height"] = rng.normal(size=60) + 0.5 * data["flour"] * rng.normal()
    rows = anova_lm(smf.ols("height ~ C(flour) + C(oven)", pd.DataFrame(data)).fit(), typ=2)
    ss, error = rows["sum_sq"]["C(flour)"], rows["sum_sq"]["Residual"]
    told = {"F": f"{rows['F']['C(flour)']:.2f}", "df1": "2", "df2": f"{rows['df']['Residual']:.0f}"}
    for name, value in (("partial_eta2", ss / (ss + error)), ("eta2", ss / rows["sum_sq"].sum())):
        assert verdict(**told, **{name: f"{value:.{decimals}f}"}) == "agrees"


def test_a_design_that_is_said_leaves_no_welch_test():
    assert verdict("between-groups", "pooled", partial_eta2=".52") == "inconsistent"
    assert verdict("repeated", "corrected-df", partial_eta2=".62") == "inconsistent"
