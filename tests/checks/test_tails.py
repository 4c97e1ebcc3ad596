"""p against its statistic: implied ends from R, and what each reading makes of it."""

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import stats

from recheck.checks.registry import all_checks
from recheck.model import N_OF_GROUP
from tests.checks.claims import claim, finding

all_checks()


def test_implied_ends_match_r():
    found = finding("p-from-t", claim("t-test", t="2.20", df="28", p=".010"))
    # R 4.2.2: 2 * pt(-c(2.205, 2.195), 28)
    assert (found.implied[0].low, found.implied[0].high) == pytest.approx((0.03583566, 0.03661912), rel=1e-6)
    assert found.verdict == "inconsistent"


@pytest.mark.parametrize(
    ("p", "verdict"),
    [
        (".036", "agrees"),
        (".0362", "agrees"),
        ("< .05", "agrees"),
        ("> .05", "conditional"),  # one-tailed in the wrong direction: p = .982
        (".018", "conditional"),
        (".035", "conditional"),
        (".35", "inconsistent"),
        (".001", "inconsistent"),
    ],
)
def test_p_from_t(p, verdict):
    assert finding("p-from-t", claim("t-test", t="2.20", df="28", p=p)).verdict == verdict


def test_stated_tails_close_the_other_reading():
    assert (
        finding("p-from-t", claim("t-test", "two-tailed", t="2.20", df="28", p=".018")).verdict
        == "inconsistent"
    )
    assert finding("p-from-t", claim("t-test", "one-tailed", t="2.20", df="28", p=".018")).verdict == "agrees"


def test_adjusted_p_may_be_larger_and_never_smaller():
    assert (
        finding("p-from-t", claim("t-test", "adjusted-p", t="2.20", df="28", p=".108")).verdict == "unchecked"
    )
    assert (
        finding("p-from-t", claim("t-test", "adjusted-p", t="2.20", df="28", p=".004")).verdict
        == "inconsistent"
    )


def test_smallest_p_of_a_program_is_a_floor():
    assert finding("p-from-t", claim("t-test", t="9.20", df="28", p=".0001")).verdict == "conditional"
    assert finding("p-from-t", claim("t-test", t="9.20", df="28", p=".000")).verdict == "agrees"


@pytest.mark.parametrize(
    ("p", "alpha", "reversal"),
    [(".36", 0.05, True), (".36", 0.01, False), (".003", 0.05, False), (".003", 0.01, True)],
)
def test_reversal_needs_both_sides_of_alpha(p, alpha, reversal):
    found = finding("p-from-t", claim("t-test", "two-tailed", t="2.20", df="28", p=p), alpha=alpha)
    assert found.verdict == "inconsistent"
    assert found.reversal is reversal


def test_doubtful_reading_is_conditional_at_most():
    doubtful = replace(
        claim("t-test", t="2.20", df="28", p=".36"), confidence="medium", notes=("a glyph was inferred",)
    )
    found = finding("p-from-t", doubtful)
    assert (found.verdict, found.reversal) == ("conditional", False)
    assert "a glyph was inferred" in found.message


def test_sphericity_is_a_reading_of_repeated_measures_alone():
    assert (
        finding("p-from-F", claim("F-test", F="3.40", df1="2", df2="57", p=".055")).verdict == "conditional"
    )
    assert (
        finding("p-from-F", claim("F-test", "corrected-df", F="3.40", df1="2", df2="57", p=".055")).verdict
        == "agrees"
    )
    assert (
        finding("p-from-F", claim("F-test", "between-groups", F="3.40", df1="2", df2="57", p=".055")).verdict
        == "inconsistent"
    )


def test_r_with_n_for_df():
    # R 4.2.2: r = .36, df = 30 gives .0430; df = 28 gives .0507
    assert finding("p-from-r", claim("correlation", r=".36", df="30", p=".043")).verdict == "agrees"
    found = finding("p-from-r", claim("correlation", r=".36", df="30", p=".051"))
    assert (found.verdict, found.assumptions) == ("conditional", ("the number in brackets is n, not df",))


@given(t=st.floats(-8, 8), df=st.integers(1, 500), tails=st.sampled_from((1, 2)))
def test_rounding_alone_is_never_inconsistent(t, df, tails):
    p = tails * stats.t.sf(abs(t), df)
    found = finding("p-from-t", claim("t-test", t=f"{t:.2f}", df=str(df), p=f"{p:.3f}"))
    assert found.verdict in ("agrees", "conditional")


@given(F=st.floats(0.01, 30), df1=st.integers(1, 6), df2=st.integers(2, 300))
def test_rounded_F_is_never_inconsistent(F, df1, df2):
    p = stats.f.sf(F, df1, df2)
    found = finding("p-from-F", claim("F-test", F=f"{F:.2f}", df1=str(df1), df2=str(df2), p=f"{p:.3f}"))
    assert found.verdict == "agrees"


GROUPS = [claim("group-summary", name=f"g{i}", mean="5.0", sd="1.0", n="15") for i in range(3)]


@pytest.mark.parametrize(
    ("p", "verdict"),
    [(".036", "agrees"), (".046", "agrees"), (".018", "conditional"), (".36", "conditional")],
)
def test_df_that_are_not_printed_come_from_the_groups(p, verdict):
    # R 4.2: 2 * pt(-2.20, 28) = .0362; with Welch's fewest df, 2 * pt(-2.20, 14) = .0451
    assert finding("p-from-t", claim("t-test", t="2.20", p=p), *GROUPS[:2]).verdict == verdict


def test_without_df_and_groups_nothing_is_compared():
    for kind, name, of in (
        ("t-test", "t", "p-from-t"),
        ("F-test", "F", "p-from-F"),
        ("chi2-test", "chi2", "p-from-chi2"),
    ):
        found = finding(of, claim(kind, p=".36", **{name: "2.20"}))
        assert (found.verdict, "not printed" in found.message) == ("unchecked", True)


def test_F_without_df_has_those_of_its_groups():
    # R 4.2: pf(4.1, 2, 42, lower = F) = .0237
    assert finding("p-from-F", claim("F-test", F="4.10", p=".024"), *GROUPS).verdict == "agrees"
    assert finding("p-from-F", claim("F-test", F="4.10", p=".24"), *GROUPS).verdict == "conditional"
    many = [replace(g, notes=(N_OF_GROUP,)) for g in GROUPS]
    assert finding("p-from-F", claim("F-test", F="4.10", p=".028"), *many).verdict == "agrees"


def test_chi2_without_df_has_those_of_its_table():
    counts = [
        replace(claim("count", name=f"c{j}", count=c, total="60"), outcome="Split", group=f"group {j}")
        for j, c in enumerate(("12", "24", "30"))
    ]
    # R 4.2: pchisq(12.1, 2, lower = F) = .00236
    assert finding("p-from-chi2", claim("chi2-test", chi2="12.1", p=".002"), *counts).verdict == "agrees"
    assert finding("p-from-chi2", claim("chi2-test", chi2="12.1", p=".20"), *counts).verdict == "conditional"


def test_two_rare_readings_are_not_combined():
    # R: pf(17.28, 1, 4, lower = FALSE) = .01418; the χ² tail with the floor of .001 would hold .001
    wrong = claim("F-test", F="17.28", df1="1", df2="4", p=".001")
    assert finding("p-from-F", wrong).verdict == "inconsistent"
    floored = claim("F-test", F="47.28", df1="1", df2="40", p=".001")
    assert finding("p-from-F", floored).verdict == "conditional"


def test_heterogeneity_has_no_exact_p():
    # R: pchisq(14.4, 5, lower = FALSE) = .01326
    told = {"chi2": "14.4", "df": "5", "p": ".007"}
    assert finding("p-from-chi2", claim("chi2-test", **told)).verdict == "conditional"
    assert finding("p-from-chi2", claim("chi2-test", "heterogeneity", **told)).verdict == "inconsistent"
