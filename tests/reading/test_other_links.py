"""Tests of variances, of ranks and of one group: what they are said to be, and which summaries they are linked to."""

import pytest

import recheck

TWO = "Rye (M = 92.4, SD = 6.1, n = 18) and wheat (M = 86.0, SD = 5.8, n = 20)"


def test_of(text, kind):
    (found,) = [c for c in recheck.audit_text(text).claims if c.kind == kind]
    return found


test_of.__test__ = False


@pytest.mark.parametrize(
    ("text", "kind", "said", "linked"),
    [
        (f"{TWO} had equal variances (Levene's F(1, 36) = 0.30, p = .59).", "F-test", {"variance-test", "levene"}, 2),
        (f"{TWO} did not differ in variance, F(17, 19) = 1.11, p = .83.", "F-test", {"variance-test"}, 2),
        (f"{TWO} had equal variances (F(1, 36) = 0.30, p = .59; Levene's test).", "F-test", {"variance-test", "levene"}, 2),
        (f"{TWO}; variances were equal (Bartlett's K-squared = 0.04, df = 1, p = .84).", "chi2-test", {"variance-test", "bartlett"}, 2),
        (f"{TWO}; variances were equal (Bartlett's test, K²(1) = 0.04, p = .84).", "chi2-test", {"variance-test", "bartlett"}, 2),
        ("Levene's test showed equal variances, and height differed between flours, F(2, 57) = 5.1, p = .009.", "F-test", set(), 0),
        ("As variances were unequal, Welch's F(2, 31.2) = 4.1, p = .026, is given.", "F-test", {"welch"}, 0),
        ("In an analysis of variance flour mattered, F(2, 57) = 5.1, p = .009.", "F-test", set(), 0),
        ("Flour explained 12% of the variance in height, F(2, 57) = 5.1, p = .009.", "F-test", set(), 0),
        ("Bartlett's test of sphericity, χ²(45) = 312.4, p < .001, allowed a factor analysis.", "chi2-test", set(), 0),
    ],
)  # fmt: skip
def test_tests_of_variances(text, kind, said, linked):
    found = test_of(text, kind)
    assert set(found.stated) & {"variance-test", "levene", "bartlett", "welch"} == said
    assert len(found.groups) == linked


def test_tests_of_ranks_are_linked_to_two_sized_groups():
    text = "By the Mann-Whitney test rye (Mdn = 92, n = 18) rose higher than wheat (Mdn = 86, n = 20), U = 102, p = .021."
    assert len(test_of(text, "rank-test").groups) == 2
    assert test_of(text.replace(", n = 20", ""), "rank-test").groups == ()
    two = text.replace("p = .021.", "p = .021, and in crumb, U = 99, p = .018.")
    assert [c.groups for c in recheck.audit_text(two).claims if c.kind == "rank-test"] == [(), ()]
    assert (
        "signed-ranks"
        in test_of("Scores rose (Wilcoxon signed-rank test, W = 12, n = 15, p = .01).", "rank-test").stated
    )


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("Loaves (M = 503.2, SD = 8.1, n = 24) exceeded the target of 500 g in a one-sample t test, t(23) = 1.94.", "500"),
        ("Loaves (M = 503.2, SD = 8.1, n = 24) exceeded 500 g in a one-sample t test, t(23) = 1.94.", "500"),
        ("Ratings (M = 5.2, SD = 1.1, n = 24) differed from the scale midpoint of 4, t(23) = 5.34.", "4"),
        ("Panels were above chance (50%), M = 56.2%, SD = 11.0%, t(19) = 2.52.", "50"),
        ("The test value was 4 for ratings (M = 5.2, SD = 1.1, n = 24), t(23) = 5.34.", "4"),
        ("On a scale from 1 to 7 ratings (M = 5.2, SD = 1.1, n = 24) were high in a one-sample t test, t(23) = 5.34.", None),
        ("Ratings (M = 5.2, SD = 1.1, n = 24) exceeded 4 in one mill and the target of 4.5 and the target of 5 elsewhere, one-sample t(23) = 5.34.", None),
        ("Ratings (M = 5.2, SD = 1.1, n = 24) exceeded the midpoint of 4, t(19) = 5.34.", None),
    ],
)  # fmt: skip
def test_the_value_that_a_mean_is_compared_with(text, value):
    printed = test_of(text, "t-test").values.get("comparison_value")
    assert (printed and printed.text.rstrip("%")) == value


@pytest.mark.parametrize(
    ("text", "linked"),
    [
        ("The gain in bench scores (M = 3.2, SD = 4.1, n = 24) was clear, t(23) = 3.82.", 1),
        ("The gain in bench scores (M = 3.2, SD = 4.1, n = 24) was clear, t(52) = 3.82.", 0),
        ("Bench scores (M = 3.2, SD = 4.1, n = 24) were high, t(23) = 3.82.", 0),
        ("After an increase, bench scores (M = 3.2, SD = 4.1, n = 24) were high, t(23) = 3.82.", 0),
        ("Bench scores fell, t(23) = 3.82; the difference within ovens was noted too (M = 3.2, SD = 4.1, n = 24).", 0),
    ],
)  # fmt: skip
def test_a_mean_of_differences(text, linked):
    assert len(test_of(text, "t-test").groups) == linked
