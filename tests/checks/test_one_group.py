"""t of one sample and of pairs against their own mean and SD: Student's sleep data and Darwin's maize."""

import pytest

from recheck.checks.registry import Case, all_checks, find_check
from recheck.model import EXACT_VALUE, OF_DIFFERENCES
from tests.checks.claims import claim

all_checks()

# Student (1908): differences of 1.58 with SD 1.23, n = 10, t = 4.062. Fisher (1935), maize: 2.617, 4.718, n = 15, t = 2.148.


def verdicts(check, test, *groups):
    return [f.verdict for f in find_check(check).run(Case(claim=test, groups=groups))]


@pytest.mark.parametrize(
    ("t", "said", "n", "expected"),
    [
        ("4.06", ("paired",), "10", "agrees"), ("−4.06", ("paired",), "10", "agrees"), ("4.60", ("paired",), "10", "inconsistent"),
        ("4.60", (), "10", "inconsistent"), ("4.60", ("paired",), "12", "unchecked"),
    ],
)  # fmt: skip
def test_differences_with_the_test(t, said, n, expected):
    test = claim("t-test", *said, t=t, df="9", mean_difference="1.58", sd="1.23", n=n)
    assert verdicts("t-from-difference", test) == ([expected] if expected != "unchecked" or said else [])


def test_an_sd_of_unknown_kind_is_left_alone():
    # Without words and n it may be the pooled SD of two groups.
    assert (
        verdicts("t-from-difference", claim("t-test", t="4.60", df="9", mean_difference="1.58", sd="1.23"))
        == []
    )
    other = claim("t-test", "independent", t="4.60", df="9", mean_difference="1.58", sd="1.23", n="10")
    assert verdicts("t-from-difference", other) == []


@pytest.mark.parametrize(
    ("t", "said", "value", "n", "expected"),
    [
        ("1.94", ("one-sample",), "500", "24", "agrees"), ("2.94", ("one-sample",), "500", "24", "inconsistent"),
        ("1.70", ("one-sample",), "500", "24", "conditional"),  # 499.6 to 500.4 may be printed as 500
        ("2.94", (), "500", "24", "conditional"), ("2.94", ("one-sample",), "500", None, "conditional"),
    ],
)  # fmt: skip
def test_one_sample_against_a_named_value(t, said, value, n, expected):
    sizes = {} if n is None else {"n": n}
    group = claim("group-summary", name="g", mean="503.2", sd="8.1", **sizes)
    test = claim("t-test", *said, groups=("g",), t=t, df="23", comparison_value=value)
    assert verdicts("t-from-one-group", test, group) == [expected]


def test_a_mean_of_differences_is_tested_against_zero():
    from dataclasses import replace

    group = claim("group-summary", name="g", mean="2.617", sd="4.718", n="15")
    for t, expected in (("2.148", "agrees"), ("2.841", "conditional")):
        test = replace(claim("t-test", groups=("g",), t=t, df="14"), notes=(OF_DIFFERENCES,))
        assert verdicts("t-from-one-group", test, group) == [expected]
    assert verdicts("t-from-one-group", claim("t-test", groups=("g",), t="2.841", df="14"), group) == []


def test_standard_errors_are_taken_as_such():
    # Fisher (1935): 20.93 eighths of an inch with an SE of 9.75: t = 2.148.
    group = claim("group-summary", name="g", mean="20.93", se="9.75", n="15")
    test = claim("t-test", "one-sample", groups=("g",), t="2.148", df="14", comparison_value="0")
    assert verdicts("t-from-one-group", test, group) == ["agrees"]


def test_a_midpoint_is_not_rounded():
    from dataclasses import replace

    group = claim("group-summary", name="g", mean="4.2", sd="1.04", n="50")
    test = claim("t-test", "one-sample", groups=("g",), t="9.52", df="49", comparison_value="3")
    # 4.2 against 2.8 gives 9.52: 3 may stand for 2.8, the midpoint of a scale does not.
    assert verdicts("t-from-one-group", test, group) == ["conditional"]
    exact = replace(test, notes=(EXACT_VALUE,))
    assert verdicts("t-from-one-group", exact, group) == ["inconsistent"]


@pytest.mark.parametrize(
    ("name", "t", "notes", "expected"),
    [
        ("mean_difference", "4.06", (OF_DIFFERENCES,), ["agrees"]), ("mean_difference", "4.60", (OF_DIFFERENCES,), ["conditional"]),
        ("estimate", "4.60", (OF_DIFFERENCES,), ["conditional"]), ("estimate", "4.60", (), []),
    ],
)  # fmt: skip
def test_words_alone_tell_of_differences(name, t, notes, expected):
    from dataclasses import replace

    test = replace(claim("t-test", t=t, df="9", sd="1.23", **{name: "1.58"}), notes=notes)
    assert verdicts("t-from-difference", test) == expected
