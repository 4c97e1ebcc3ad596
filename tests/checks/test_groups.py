"""t against its groups: values from Student's sleep data (1908, Biometrika 6:20) and readings of spreads."""

import pytest

from recheck import audit_text
from recheck.checks.registry import all_checks
from tests.checks.claims import claim, finding

all_checks()
# Sleep data as two independent groups, R 4.2: t = -1.8608 on 18 df pooled, 17.776 Welch.
FIRST = claim("group-summary", name="g1", mean="0.75", sd="1.789", n="10")
SECOND = claim("group-summary", name="g2", mean="2.33", sd="2.002", n="10")
LINKED = ("g1", "g2")


@pytest.mark.parametrize(
    ("t", "df", "verdict"),
    [
        ("−1.86", "18", "agrees"),
        ("1.86", "17.8", "agrees"),
        ("1.68", "18", "inconsistent"),
        ("1.68", "17", "conditional"),
        ("1.95", "15", "unchecked"),
    ],
)
def test_sleep_data(t, df, verdict):
    assert (
        finding("t-from-groups", claim("t-test", groups=LINKED, t=t, df=df), FIRST, SECOND).verdict == verdict
    )


def test_standard_errors_labelled_as_sds_are_named():
    groups = [
        claim("group-summary", name=g.id, mean=str(g.values["mean"].text), sd=se, n="10")
        for g, se in ((FIRST, "0.566"), (SECOND, "0.633"))
    ]
    found = finding("t-from-groups", claim("t-test", groups=LINKED, t="−1.86", df="18"), *groups)
    assert found.verdict == "inconsistent"
    assert found.reconciled_by[0].change == "SD → SE"


def test_unlabelled_spreads_leave_the_reading_open():
    groups = [
        claim("group-summary", "spread-unlabelled", name=g.id, mean=str(g.values["mean"].text), sd=se, n="10")
        for g, se in ((FIRST, "0.566"), (SECOND, "0.633"))
    ]
    found = finding("t-from-groups", claim("t-test", groups=LINKED, t="−1.86", df="18"), *groups)
    assert (found.verdict, found.assumptions[-1]) == ("conditional", "the spread is a standard error")


def test_pairs_need_a_correlation_between_minus_one_and_one():
    # paired t of the sleep data: 4.0621 on 9 df (Student 1908); |t| below 1.32 would need r < -1
    assert (
        finding(
            "t-from-groups", claim("t-test", "paired", groups=LINKED, t="4.06", df="9"), FIRST, SECOND
        ).verdict
        == "agrees"
    )
    assert (
        finding(
            "t-from-groups", claim("t-test", "paired", groups=LINKED, t="1.02", df="9"), FIRST, SECOND
        ).verdict
        == "inconsistent"
    )


@pytest.mark.parametrize(
    ("d", "verdict"), [("0.83", "agrees"), ("0.79", "conditional"), ("0.38", "inconsistent")]
)
def test_d_of_the_sleep_data(d, verdict):
    # d_s = 0.8322, J d_s = 0.7969 (exact gamma correction)
    assert (
        finding(
            "d-from-groups",
            claim("t-test", "independent", groups=LINKED, t="−1.86", df="18", d=d),
            FIRST,
            SECOND,
        ).verdict
        == verdict
    )


@pytest.mark.parametrize("word", ["covariate-adjusted", "transformed", "mixed-model", "weighted"])
def test_another_model_is_unchecked(word):
    found = finding("t-from-groups", claim("t-test", word, groups=LINKED, t="1.68", df="18"), FIRST, SECOND)
    assert found.verdict == "unchecked"


def test_percent_p_is_a_share():
    verdicts = {
        f.check: f.verdict for f in audit_text("The loaves differed, t(28) = 2.20, p = 3.6%.").findings
    }
    assert verdicts["p-from-t"] == "agrees"


def test_a_test_that_is_said_to_be_paired_needs_no_other_name():
    before = claim("group-summary", name="a", mean="18.37", sd="15.70")
    after = claim("group-summary", name="b", mean="10.89", sd="8.83")
    for said, expected in ((("paired",), "inconsistent"), (("repeated",), "conditional")):
        of = claim("t-test", *said, t="1.12", df="50", groups=("a", "b"))
        assert finding("t-from-groups", of, before, after).verdict == expected
