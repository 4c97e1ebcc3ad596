"""Tests of equal variances: published data, printed, and what is not Bartlett's or the ratio."""

import pytest

import recheck
from recheck.checks.registry import Case, all_checks, find_check
from recheck.model import DISCREPANT
from tests.checks.claims import claim
from tests.reference import rows

all_checks()


def groups(sds, ns, *said):
    return [
        claim("group-summary", *said, name=f"g{i}", mean="5", sd=s, n=n)
        for i, (s, n) in enumerate(zip(sds, ns, strict=True))
    ]


def run(check, test, *told):
    return [f.verdict for f in find_check(check).run(Case(claim=test, groups=told))]


@pytest.mark.parametrize("row", rows("variance_tests"), ids=lambda row: row["label"])
def test_published_bartlett(row):
    told = groups([f"{float(s):.3f}" for s in row["sds"].split(";")], row["ns"].split(";"))
    for shift, expected in ((0.0, "agrees"), (2.0, "inconsistent")):
        test = claim(
            "chi2-test", "variance-test", "bartlett", chi2=f"{row.number('K2') + shift:.2f}", df=row["df"]
        )
        assert run("bartlett-from-groups", test, *told) == [expected]


def test_sds_listed_beside_the_test_are_conditional_at_most():
    # NIST e-Handbook 1.3.5.9, as below.
    told = {"sd1": "65.55", "n1": "240", "sd2": "61.85", "n2": "240"}
    for F, expected in (("1.123", "agrees"), ("1.321", "conditional")):
        test = claim("F-test", "variance-test", F=F, df1="239", df2="239", **told)
        assert run("F-of-variances", test) == [expected]
    other = claim("F-test", "variance-test", F="1.321", df1="1", df2="239", **told)
    assert run("F-of-variances", other) == ["unchecked"]


def test_ratio_in_either_order():
    # NIST e-Handbook 1.3.5.9: F = 1.123037 of SDs 65.54909 and 61.85425, 240 each.
    told = groups(["65.55", "61.85"], ["240", "240"])
    for F, expected in (("1.123", "agrees"), ("0.890", "agrees"), ("1.321", "inconsistent")):
        test = claim("F-test", "variance-test", F=F, df1="239", df2="239")
        assert run("F-of-variances", test, *told) == [expected]


def test_levene_and_other_df_are_not_rebuilt():
    told = groups(["6.1", "4.8"], ["18", "20"])
    assert run(
        "F-of-variances", claim("F-test", "variance-test", "levene", F="1.6", df1="1", df2="36"), *told
    ) == ["unchecked"]
    assert run("F-of-variances", claim("F-test", "variance-test", F="1.6", df1="1", df2="36"), *told) == [
        "unchecked"
    ]
    assert run("F-of-variances", claim("F-test", F="9.9", df1="17", df2="19"), *told) == []


@pytest.mark.parametrize(
    "text",
    [
        "Rye loaves (M = 92.4, SD = 6.1, n = 18) and wheat loaves (M = 86.0, SD = 5.8, n = 20) had equal variances (Levene’s F(1, 36) = 0.30, p = .59).",
        "Rye loaves (M = 92.4, SD = 6.1, n = 18) and wheat loaves (M = 86.0, SD = 5.8, n = 20) had equal variances, F(17, 19) = 1.11, p = .83.",
        "Rye loaves (M = 92.4, SD = 6.1, n = 18) and wheat loaves (M = 86.0, SD = 5.8, n = 20) did not differ in variance (F(1, 36) = 0.30, p = .59, Levene’s test).",
    ],
)
def test_a_test_of_variances_is_no_test_of_means(text):
    findings = recheck.audit_text(text).findings
    assert not [
        f for f in findings if f.verdict in DISCREPANT or f.check in ("F-from-two-groups", "df-from-ns")
    ]


def test_means_behind_a_test_of_variances_are_still_tested():
    text = (
        "Rye loaves (M = 92.4, SD = 6.1, n = 18) and wheat loaves (M = 86.0, SD = 5.8, n = 20) had equal variances "
        "(Levene’s F(1, 36) = 0.30, p = .59) and differed in height, t(36) = 2.31, p = .027."
    )
    found = {f.check: f.verdict for f in recheck.audit_text(text).findings}
    assert found["t-from-groups"] == "inconsistent"
    assert found["F-of-variances"] == "unchecked"


def test_p_of_a_ratio_may_take_both_tails():
    # R 4.2.2: 2 * pf(1.9, 29, 34, lower = FALSE) = .0733; one tail .0367.
    for p, expected in ((".073", "agrees"), (".037", "agrees"), (".60", "inconsistent")):
        text = f"The variances of both ovens differed, F(29, 34) = 1.90, p = {p}."
        found = {f.check: f.verdict for f in recheck.audit_text(text).findings}
        assert found["p-from-F"] == expected
