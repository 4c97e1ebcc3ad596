"""One result in two places: what is a difference, what is only another way to print the same."""

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from recheck.checks.registry import Case, Twin, all_checks, find_check
from recheck.checks.running import run_checks
from recheck.model import Place, SameResult, Settings
from tests.checks.claims import claim

all_checks()


def compared(first, second, sure=True):
    """Verdict and quantity of each finding."""
    twins = (Twin(second, sure, "same outcome and groups"),)
    case = Case(claim=first, settings=Settings(), twins=twins)
    return list(find_check("told-twice").run(case))


def verdicts(first, second, sure=True):
    return [(f.quantity, f.verdict) for f in compared(first, second, sure)]


HERE = claim("t-test", t="2.20", df="28", p=".036", d="0.83")


@pytest.mark.parametrize(
    ("elsewhere", "found"),
    [
        ({"t": "2.20", "df": "28", "p": ".036"}, [("t", "agrees")]),
        ({"t": "−2.2", "df": "28", "p": "< .05"}, [("t", "agrees")]),
        ({"t": "2.196", "p": ".04"}, [("t", "agrees")]),
        ({"t": "2.02", "df": "28"}, [("t", "inconsistent")]),
        ({"t": "2.1", "df": "28"}, [("t", "conditional")]),  # cut off, not rounded
        ({"t": "2.21", "df": "28"}, [("t", "conditional")]),  # 2.205 rounded to even here, up there
        ({"t": "2.2", "p": ".04"}, [("t", "agrees")]),
        ({"t": "2.20", "p": ".018"}, [("p", "conditional")]),  # one-tailed here, two-tailed there
        ({"t": "2.20", "p": "> .10"}, [("p", "inconsistent")]),
        ({"t": "2.20", "df": "26"}, [("df", "inconsistent")]),
        ({"t": "2.20", "df": "27.3"}, [("df", "conditional")]),
        ({"t": "3.02", "df": "31"}, [("t", "conditional"), ("df", "conditional")]),
        ({"F": "2.20"}, []),
    ],
)
def test_a_t_test_told_again(elsewhere, found):
    assert verdicts(HERE, claim("t-test", name="c2", **elsewhere)) == found


def test_what_is_not_surely_the_same_is_conditional():
    (found,) = compared(HERE, claim("t-test", name="c2", t="2.02", df="28"), sure=False)
    assert found.verdict == "conditional"
    assert "same outcome and groups" in found.message


def test_words_give_both_numbers_and_both_places():
    second = replace(
        claim("t-test", name="c2", t="2.02", df="28"), place=Place("t = 2.02", table="Table 2", row="Height")
    )
    (found,) = compared(HERE, second)
    assert "t = 2.20 is printed in" in found.message
    assert (
        "t = 2.02 in “t = 2.02” (Table 2, row “Height”): printed differently in two places" in found.message
    )
    assert found.claims == ("c", "c2")
    assert any("digits swapped" in remedy.text for remedy in found.reconciled_by)


def test_other_cases_are_honest():
    first = claim("group-summary", mean="4.21", sd="1.10", n="40")
    assert verdicts(first, claim("group-summary", name="c2", mean="4.35", sd="1.10", n="38")) == [
        ("mean", "conditional"),
        ("n", "conditional"),
    ]
    assert verdicts(first, claim("group-summary", name="c2", mean="4.35", sd="1.10", n="40")) == [
        ("mean", "inconsistent")
    ]


def test_unlabelled_spreads_may_be_of_two_kinds():
    first = claim("group-summary", "spread-unlabelled", mean="4.21", sd="0.17")
    assert verdicts(first, claim("group-summary", name="c2", mean="4.21", sd="1.10")) == [
        ("sd", "conditional")
    ]


def test_an_interval_may_be_that_of_the_opposite_difference():
    first = claim(
        "comparison", interval_of="mean_difference", mean_difference="6.4", ci_low="2.4", ci_high="10.4"
    )
    again = claim("comparison", name="c2", interval_of="mean_difference", mean_difference="−6.4", ci_low="−10.4",
                  ci_high="−2.4")  # fmt: skip
    assert verdicts(first, again) == [("mean_difference", "agrees")]
    wrong = replace(
        again, values={**again.values, "ci_low": claim("comparison", ci_low="−14.0").values["ci_low"]}
    )
    assert verdicts(first, wrong) == [("ci_high", "inconsistent")]


def test_a_ratio_may_be_turned_round():
    first = claim("estimate", interval_of="or", **{"or": "0.50", "ci_low": "0.28", "ci_high": "0.90"})
    turned = claim(
        "estimate", name="c2", interval_of="or", **{"or": "2.00", "ci_low": "1.11", "ci_high": "3.57"}
    )
    assert {v for _, v in verdicts(first, turned)} == {"conditional"}


def test_run_checks_pairs_claims_by_id():
    second = claim("t-test", name="c2", t="2.02", df="28")
    same = (SameResult(("c", "c2"), True, "same words"), SameResult(("c", "gone"), True, "same words"))
    found = [f for f in run_checks([HERE, second], Settings(), same=same) if f.check == "told-twice"]
    assert [(f.quantity, f.verdict) for f in found] == [("t", "inconsistent")]


@given(value=st.floats(0.01, 50), first=st.integers(0, 3), second=st.integers(0, 3))
def test_another_rounding_is_no_difference(value, first, second):
    one, other = (claim("t-test", name=str(d), t=f"{value:.{d}f}") for d in (first, second))
    assert verdicts(one, other) == [("t", "agrees")]
