"""Power statements: what agrees by some usual method, what only under another reading, what by none."""

from __future__ import annotations

import pytest

import recheck
from recheck.model import Finding

FULL = "A power analysis for an independent t test (two-sided α = {alpha}, power = {power}, d = {d}) indicated {n} apprentices per group."


def the(text: str) -> Finding:
    """The one finding on the one power statement of a text."""
    found = [
        f
        for f in recheck.audit_text(text).findings
        if f.check.startswith("power-") and f.check != "power-total"
    ]
    assert len(found) == 1, found
    return found[0]


def full(n: int, d: str = "0.50", power: str = ".80", alpha: str = ".05") -> Finding:
    return the(FULL.format(n=n, d=d, power=power, alpha=alpha))


@pytest.mark.parametrize(
    ("n", "d", "power"),
    [
        (64, "0.50", ".80"),  # exact noncentral t; Cohen (1988), Table 2.4.1
        (63, "0.50", ".80"),  # normal approximation: 62.79
        (65, "0.50", ".80"),  # one case for safety
        (33, "0.70", ".80"),  # common practice, no source: exact 33 gives .7997
        (34, "0.70", ".80"),
        (393, "0.20", ".80"),  # Cohen (1988), Table 2.4.1; exact 394
        (85, "0.50", ".90"),  # Cohen (1988), Table 2.4.1; exact 86
        (17, "1.00", ".80"),
        (70, "0.50", ".80"),  # larger than needed
        (128, "0.50", ".80"),
    ],
)
def test_n_by_any_usual_method_agrees(n: int, d: str, power: str):
    assert full(n, d, power).verdict == "agrees"


def test_a_larger_n_is_told_to_be_larger():
    assert "larger than needed" in full(90).message
    assert "larger than needed" not in full(64).message


@pytest.mark.parametrize("n", [46, 55, 58])
def test_n_smaller_than_by_any_method_contradicts(n: int):
    found = full(n)
    assert found.verdict == "inconsistent"
    # Normal approximation for power .795: 62.0 a group.
    assert found.implied[0].low == pytest.approx(62)


def test_remedies_are_numbers_that_somebody_plans_with():
    remedies = full(46).reconciled_by
    assert [r.change for r in remedies if r.kind == "slip"] == ["46 → 64"]
    # d = 0.60 would do: R 4.2: power.t.test(delta=.6, power=.795)$n = 44.4
    assert any(r.quantity == "n" and r.low == pytest.approx(62) for r in remedies)


def test_one_tailed_n_is_recognised_only_where_the_tails_are_not_said():
    # R 4.2: power.t.test(delta=.5, power=.8, alternative="one.sided")$n = 50.1508
    assert full(51).verdict == "inconsistent"
    unsaid = the(
        "A power analysis for an independent t test (α = .05, power = .80, d = 0.50) indicated 51 apprentices per group."
    )
    assert unsaid.verdict == "conditional" and "one-sided" in unsaid.message
    one = the(
        "A power analysis for an independent t test (one-sided α = .05, power = .80, d = 0.50) indicated 51 apprentices per group."
    )
    assert one.verdict == "agrees"


@pytest.mark.parametrize(
    ("n", "verdict"), [(64, "conditional"), (128, "agrees"), (126, "agrees"), (100, "inconsistent")]
)
def test_size_of_a_group_given_as_that_of_all(n: int, verdict: str):
    found = the(
        f"An independent t test with d = 0.50, a two-sided α of .05 and a power of .80 requires {n} apprentices in total."
    )
    assert found.verdict == verdict
    assert ("size of each group" in found.message) == (verdict == "conditional")


def test_paired_n_beside_the_words_of_two_groups():
    # R 4.2: power.t.test(delta=.5, power=.8, type="paired")$n = 33.3671
    found = full(34)
    assert found.verdict == "conditional" and "measured twice" in found.message


def test_an_effect_may_have_been_rounded():
    # d up to 0.55: R 4.2: power.t.test(delta=.55, power=.8)$n = 52.87
    found = the(
        "A power analysis for an independent t test (two-sided α = .05, power = .80, d = 0.5) indicated 54 apprentices per group."
    )
    assert found.verdict == "conditional" and "rounded" in found.message


@pytest.mark.parametrize(
    "left_out",
    [
        "A power analysis (two-sided α = .05, power = .80, d = 0.50) indicated 46 apprentices per group.",
        "A power analysis for an independent t test (α = .05, power = .80, d = 0.50) indicated 36 apprentices per group.",
        "A power analysis for an independent t test (two-sided, power = .80, d = 0.50) indicated 46 apprentices per group.",
        "A power analysis for an independent t test (two-sided α = .05, power = .80, d = 0.50) indicated 46 apprentices.",
    ],
    ids=["test", "tails", "level", "group or all"],
)
def test_what_is_left_out_keeps_a_small_n_from_contradicting(left_out: str):
    assert the(left_out).verdict == "conditional"


@pytest.mark.parametrize(
    ("design", "reason"),
    [
        ("a repeated-measures ANOVA with three groups (f = 0.25, α = .05, power = .80)", "repeated"),
        ("an ANCOVA with three groups (f = 0.25, α = .05, power = .80)", "covariates"),
        ("a mixed model (d = 0.5, α = .05, power = .80)", "mixed"),
        (
            "a cluster-randomised comparison (d = 0.5, α = .05, power = .80, intraclass correlation 0.05)",
            "clusters",
        ),
        ("a log-rank test (hazard ratio of 0.6, α = .05, power = .80)", "survival"),
        ("a non-inferiority test (d = 0.5, α = .05, power = .80)", "non-inferiority"),
        ("a t test with interim analyses (d = 0.5, α = .05, power = .80)", "interim"),
        ("a Wilcoxon rank-sum test (d = 0.5, α = .05, power = .80)", "ranks"),
        ("a Monte Carlo simulation (d = 0.5, α = .05, power = .80)", "simulation"),
        ("a 2 × 3 factorial ANOVA (f = 0.25, α = .05, power = .80, six groups)", "factors"),
        ("an ANOVA (f = 0.25, α = .05, power = .80)", "number of groups"),
        ("a multiple regression (f² = 0.15, α = .05, power = .80)", "number of predictors"),
        ("a t test (α = .05, power = .80)", "no effect size"),
        ("an independent t test with 2:1 allocation (d = 0.5, α = .05, power = .80)", "unequal"),
    ],
)
def test_what_cannot_be_rebuilt_is_unchecked_with_its_reason(design: str, reason: str):
    found = the(f"A power analysis for {design} indicated 20 apprentices per group.")
    assert found.verdict == "unchecked" and reason in found.message


@pytest.mark.parametrize(
    ("text", "verdict"),
    [
        # Faul et al. (2007): 252 (from memory); 84 groups of three.
        ("one-way ANOVA with three groups (f = 0.25, α = .05, 1 − β = .95) suggested a total sample of N = 252", "agrees"),
        ("one-way ANOVA with three groups (f = 0.25, α = .05, 1 − β = .95) suggested a total sample of N = 159", "inconsistent"),
        # Cohen (1992): 85 by his table, 84 exact, 82 with a fixed predictor.
        ("Pearson correlation (r = .30, two-sided α = .05, power = .80) suggested a sample of 85", "agrees"),
        ("Pearson correlation (r = .30, two-sided α = .05, power = .80) suggested a sample of 82", "agrees"),
        ("Pearson correlation (r = .30, two-sided α = .05, power = .80) suggested a sample of 60", "inconsistent"),
        # Cohen (1992): 67.
        ("multiple regression with two predictors (f² = .15, α = .05, power = .80) suggested a total sample of 67", "agrees"),
        ("multiple regression with two predictors (f² = .15, α = .05, power = .80) suggested a total sample of 55", "conditional"),
        ("multiple regression with two predictors (f² = .15, α = .05, power = .80) suggested a total sample of 40", "inconsistent"),
        # Cohen (1992): 87; exact 88.
        ("chi-square test (w = .30, df = 1, α = .05, power = .80) suggested a total sample of 87", "agrees"),
        ("chi-square test (w = .30, df = 1, α = .05, power = .80) suggested a total sample of 60", "inconsistent"),
        # 90 by unpooled variances, 93 by Fleiss, 103 with continuity correction.
        ("chi-square test (30% against 50%, two-sided α = .05, power = .80) suggested 90 loaves per group", "agrees"),
        ("chi-square test (30% against 50%, two-sided α = .05, power = .80) suggested 103 loaves per group", "agrees"),
        ("chi-square test (30% against 50%, two-sided α = .05, power = .80) suggested 60 loaves per group", "inconsistent"),
        # R 4.2: power.t.test(delta=.5, power=.8, type="paired")$n = 33.3671
        ("paired t test (dz = 0.50, two-sided α = .05, power = .80) suggested 34 pairs", "agrees"),
        ("paired t test (dz = 0.50, two-sided α = .05, power = .80) suggested 24 pairs", "inconsistent"),
        ("independent t test (difference of 5 mm, SD 10 mm, two-sided α = .05, power = 90%) suggested 86 loaves per group", "agrees"),
        ("independent t test (difference of 5 mm, SD 10 mm, two-sided α = .05, power = 90%) suggested 64 loaves per group", "conditional"),
    ],
)  # fmt: skip
def test_other_designs(text: str, verdict: str):
    assert the(f"A power analysis for a {text}.").verdict == verdict


@pytest.mark.parametrize(
    ("power", "verdict"),
    [(".61", "agrees"), (".62", "agrees"), (".72", "inconsistent"), (".91", "inconsistent")],
)
def test_achieved_power(power: str, verdict: str):
    # R 4.2: power.t.test(n=64, delta=.4, strict=TRUE)$power = 0.6144; delta .395: .6043, .405: .6243.
    text = f"The achieved power of the independent t test was {power} (d = 0.40, n = 64 per group, two-sided α = .05)."
    assert the(text).verdict in (verdict, "conditional" if verdict == "agrees" else verdict)


@pytest.mark.parametrize(
    ("d", "verdict"),
    [("0.74", "agrees"), ("0.73", "agrees"), ("0.90", "inconsistent"), ("0.60", "inconsistent")],
)
def test_detectable_effect(d: str, verdict: str):
    # R 4.2: power.t.test(n=30, power=.8)$delta = 0.7356
    text = f"A sensitivity power analysis for an independent t test (30 apprentices per group, two-sided α = .05, power = .80) gave d = {d}."
    assert the(text).verdict == verdict


def test_twelve_a_group():
    # Common practice, no source: with 12 a group 80% power needs a d of about 1.2, and a d of 0.7 has a power below .40.
    assert full(12, "0.70").verdict == "inconsistent"
    assert full(12, "1.20").verdict == "agrees"
    assert full(66, "0.70").verdict == "agrees"
    total = "An independent t test with d = 0.70, a two-sided α of .05 and a power of .80 requires {} apprentices in total."
    assert the(total.format(66)).verdict == the(total.format(68)).verdict == "agrees"


def test_the_level_of_the_document_serves_where_the_statement_has_none():
    text = (
        "A p below .01 was considered significant in all tests.\n\n"
        "A power analysis for an independent t test (two-sided, power = .80, d = 0.50) indicated 96 apprentices per group."
    )
    found = the(text)
    assert found.verdict == "agrees" and "0.01" in found.message


@pytest.mark.parametrize(
    ("total", "groups", "verdict"),
    [
        (66, "", "agrees"),
        (99, "", "agrees"),
        (99, " of three groups", "agrees"),
        (70, "", "conditional"),
        (33, "", "conditional"),
    ],
)
def test_all_cases_are_those_of_the_groups_together(total: int, groups: str, verdict: str):
    text = f"To detect d = 0.7 with 80% power, 33 apprentices per arm{groups} ({total} in total) were needed."
    (found,) = [f for f in recheck.audit_text(text).findings if f.check == "power-total"]
    assert found.verdict == verdict


def test_unequal_groups_lower_the_power_of_a_total():
    # statsmodels 0.14: TTestIndPower().power(.5, 26, .05, ratio=3) = 0.5899; equal groups of 52: 0.7141.
    text = "Post hoc, the achieved power of the independent t test was {} (d = 0.50, N = 104, two-sided α = .05)."
    assert the(text.format(".71")).verdict == "agrees"
    unequal = the(text.format(".65"))
    assert unequal.verdict == "conditional" and "unequal" in unequal.message
    assert the(text.format(".45")).verdict == "inconsistent"
