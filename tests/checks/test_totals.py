"""Totals against group sizes and df, and whether pooling matters; facts of the trade."""

import pytest

import recheck
from recheck.checks.registry import Case, all_checks, find_check
from tests.checks.claims import claim

all_checks()


def groups(*summaries):
    return [
        claim("group-summary", name=f"g{i}", mean=m, sd=s, n=n) for i, (m, s, n) in enumerate(summaries, 1)
    ]


PAIR = groups(("92.4", "6.1", "18"), ("86.0", "5.8", "18"))


@pytest.mark.parametrize(
    ("said", "df", "N", "expected"),
    [
        ((), "34", "36", ["agrees"]), ((), "34", "40", ["conditional"]), ((), "34", "35", ["conditional"]),
        (("paired",), "17", "36", []), ((), "51", "36", []), (("contrast",), "34", "40", []),
    ],
)  # fmt: skip
def test_total_of_two_groups(said, df, N, expected):
    test = claim("t-test", *said, groups=("g1", "g2"), t="3.23", df=df, N=N)
    found = find_check("N-from-sizes").run(Case(claim=test, groups=tuple(PAIR)))
    assert [f.verdict for f in found] == expected


def test_total_of_three_groups():
    three = groups(("92.4", "6.1", "20"), ("86.0", "5.8", "22"), ("88.2", "6.4", "19"))
    for N, expected in (("61", "agrees"), ("60", "conditional")):
        test = claim("F-test", groups=tuple(g.id for g in three), F="5.80", df1="2", df2="58", N=N)
        (found,) = find_check("N-from-sizes").run(Case(claim=test, groups=tuple(three)))
        assert found.verdict == expected


def test_df_within_n():
    for df, expected in (("35", []), ("34", []), ("36", ["conditional"])):
        found = find_check("df-within-N").run(Case(claim=claim("t-test", t="2.1", df=df, N="36")))
        assert [f.verdict for f in found] == expected
    assert not list(
        find_check("df-within-N").run(Case(claim=claim("t-test", "mixed-model", t="2.1", df="99", N="36")))
    )


def message(sd2, n2, t):
    text = f"Rye loaves (M = 92.4, SD = 3.1, n = 18) rose higher than wheat loaves (M = 86.0, SD = {sd2}, n = {n2}), t({16 + n2}) = {t}."
    (found,) = [f for f in recheck.audit_text(text).findings if f.check == "t-from-groups"]
    return found.message


def test_a_contradiction_says_whether_pooling_matters():
    # scipy: pooled t = 3.38, Welch 2.82 on 10.6 df with 9 loaves of SD 6.4; equal n: 3.82 by either.
    assert "Pooling makes a difference to t here" in message("6.4", 9, "1.20")
    assert "Pooling makes no difference to t here" in message("6.4", 18, "1.20")
    assert "variance ratio of 4.06 to 4.47" in message("6.4", 18, "1.20")
    assert "Pooling" not in message("6.4", 18, "3.82")


def test_two_groups_of_twelve_have_22_df():
    # Common practice, no source.
    text = "Rye loaves (M = 92.4, SD = 6.1, n = 12) rose higher than wheat loaves (M = 86.0, SD = 5.8, n = 12), t({}) = 2.63."
    for df, expected in ((22, "agrees"), (23, "conditional"), (24, "conditional")):
        found = {f.check: f.verdict for f in recheck.audit_text(text.format(df)).findings}
        assert found["df-from-ns"] == expected
