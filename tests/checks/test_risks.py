"""Ratios, differences and shares against the counts of published tables (tests/reference/two_by_two.csv)."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.stats import contingency
from statsmodels.stats.proportion import confint_proportions_2indep, proportion_confint

import recheck
from recheck.checks.examples import table
from recheck.checks.registry import Case, all_checks, find_check
from recheck.model import TOTAL_OF_GROUP
from tests.checks.claims import claim
from tests.reference import rows

all_checks()

TABLES = [row for row in rows("two_by_two") if row.has("or")]


def groups(a, b, c, d, *notes):
    """Count claims of two groups."""
    told = ((a, a + b, "group 1"), (c, c + d, "group 2"))
    return [
        replace(claim("count", name=name, count=str(count), total=str(total)), group=name, notes=tuple(notes))
        for count, total, name in told
    ]


def judged(check, of, told, **changes):
    """The only finding of a check, None where it says nothing."""
    of = replace(of, groups=tuple(c.id for c in told), **changes)
    found = list(find_check(check).run(Case(claim=of, groups=tuple(told))))
    return found[0] if found else None


def verdict(check, of, told, **changes):
    found = judged(check, of, told, **changes)
    return found and found.verdict


def counts_of(row):
    return [int(x) for x in row.numbers("a", "b", "c", "d")]


@pytest.mark.parametrize("row", TABLES, ids=lambda row: row["label"])
@pytest.mark.parametrize("name", ["or", "rr"])
def test_published_ratios_agree_either_way_round(row, name):
    told, value = groups(*counts_of(row)), row.number(name)
    for shown in (value, 1 / value):
        of = claim("estimate", "crude", **{name: f"{shown:.3f}"})
        assert verdict("ratio-from-counts", of, told) == "agrees"


@pytest.mark.parametrize("row", TABLES, ids=lambda row: row["label"])
@pytest.mark.parametrize(("name", "check"), [("or", "ratio"), ("rr", "ratio"), ("rd", "risk-difference")])
def test_published_wald_intervals_agree(row, name, check):
    if row["label"] == "Lady tasting tea" and name == "rd":
        pytest.skip("the interval runs beyond 1")
    ends = {f"ci_{end}": f"{row.number(f'{name}_{end}'):.5f}" for end in ("low", "high")}
    of = claim("estimate", "crude", interval_of=name, **{name: f"{row.number(name):.5f}"}, **ends)
    found = judged(f"{check}-ci-from-counts", of, groups(*counts_of(row)))
    assert found.verdict == "agrees" and "Wald" in found.assumptions[0]


def test_the_conditional_estimate_of_an_exact_test_is_a_reading():
    # R 4.2.2: fisher.test(matrix(c(12, 28, 20, 21), 2, byrow = TRUE)): .4546 with .1626 to 1.2270; plain OR .45
    table = (8, 3, 2, 9)
    exact = contingency.odds_ratio(np.reshape(table, (2, 2)))
    of = claim("estimate", "crude", **{"or": f"{exact.statistic:.2f}"})
    found = judged("ratio-from-counts", of, groups(*table))
    assert found.verdict == "conditional" and "conditional estimate" in found.assumptions[-1]


CRUDE = claim("estimate", "crude", **{"or": "0.63"})
"""Another ratio than that of 12 of 40 and 20 of 41, which is 0.45."""


def test_a_wrong_crude_ratio_is_inconsistent_and_one_digit_is_named():
    found = judged("ratio-from-counts", CRUDE, groups(12, 28, 20, 21))
    assert found.verdict == "inconsistent" and not found.reversal


def test_a_risk_ratio_called_odds_ratio_is_told_as_a_slip():
    found = judged("ratio-from-counts", claim("estimate", "crude", **{"or": "0.615"}), groups(12, 28, 20, 21))
    assert found.verdict == "inconsistent"
    assert found.reconciled_by[0].change == "OR → RR"


@pytest.mark.parametrize(
    ("of", "told", "changes"),
    [
        (replace(CRUDE, stated=()), groups(12, 28, 20, 21), {}),  # nobody calls it crude
        (CRUDE, groups(12, 28, 20, 21, TOTAL_OF_GROUP), {}),  # cases may be missing
        (CRUDE, groups(12, 28, 20, 21), {"link_confidence": "medium"}),
        (CRUDE, groups(12, 28, 20, 20), {}),  # may be pairs
        (CRUDE, [replace(g, group=f"{g.group} cases") for g in groups(12, 28, 20, 21)], {}),  # may be matched
        (claim("estimate", "crude", rr="0.83"), groups(12, 28, 20, 21), {}),  # may be one of rates
    ],
)
def test_what_the_text_leaves_open_is_conditional_at_most(of, told, changes):
    assert verdict("ratio-from-counts", of, told, **changes) == "conditional"


@pytest.mark.parametrize("word", ["covariate-adjusted", "weighted", "rates", "paired", "survival"])
def test_other_models_are_not_rebuilt(word):
    of = replace(CRUDE, stated=(word,))
    assert verdict("ratio-from-counts", of, groups(12, 28, 20, 21)) == "unchecked"


def test_a_document_with_adjusted_results_may_mean_them_here():
    of = replace(CRUDE, stated=(), background=("covariate-adjusted",))
    assert verdict("ratio-from-counts", of, groups(12, 28, 20, 21)) == "unchecked"
    assert (
        verdict("ratio-from-counts", replace(of, stated=("crude",)), groups(12, 28, 20, 21)) == "inconsistent"
    )


def test_four_counts_are_groups_and_events():
    told = [
        replace(claim("count", name=f"c{i}", count=str(x)), group=f"g{i}")
        for i, x in enumerate((12, 20, 28, 21))
    ]
    assert verdict("ratio-from-counts", claim("estimate", **{"or": "0.45"}), told) == "agrees"


@pytest.mark.parametrize(
    ("rd", "expected"),
    [("0.188", "agrees"), ("18.8", "agrees"), ("−18.8", "agrees"), ("19.8", "conditional")],
)
def test_a_difference_is_a_share_or_in_percentage_points(rd, expected):
    assert (
        verdict("risk-difference-from-counts", claim("estimate", rd=rd), groups(12, 28, 20, 21)) == expected
    )


def test_an_interval_of_another_ratio_is_not_compared():
    of = replace(
        CRUDE,
        values={**CRUDE.values, **claim("estimate", ci_low="0.3", ci_high="1.2").values},
        interval_of="or",
    )
    assert judged("ratio-ci-from-counts", of, groups(12, 28, 20, 21)) is None


COUNT = st.integers(1, 120)


@settings(max_examples=60, deadline=None)
@given(
    a=COUNT,
    b=COUNT,
    c=COUNT,
    d=COUNT,
    decimals=st.integers(1, 3),
    method=st.sampled_from(["logit", "logit-adjusted"]),
)
def test_an_honest_odds_ratio_is_never_denied(a, b, c, d, decimals, method):
    low, high = confint_proportions_2indep(a, a + b, c, c + d, method=method, compare="odds-ratio")
    shown = {"or": a * d / (b * c), "ci_low": low, "ci_high": high}
    of = claim("estimate", "crude", interval_of="or", **{k: f"{v:.{decimals}f}" for k, v in shown.items()})
    for check in ("ratio-from-counts", "ratio-ci-from-counts"):
        assert verdict(check, of, groups(a, b, c, d)) in ("agrees", "conditional", None)


@settings(max_examples=60, deadline=None)
@given(
    n=st.integers(3, 400),
    share=st.floats(0, 1),
    method=st.sampled_from(["normal", "wilson", "beta", "agresti_coull", "jeffreys"]),
)
def test_an_honest_interval_of_a_share_agrees(n, share, method):
    count = min(max(round(n * share), 1), n - 1)
    low, high = (100 * float(x) for x in proportion_confint(count, n, method=method))
    ends = {"ci_low": f"{max(low, 0):.1f}", "ci_high": f"{min(high, 100):.1f}", "ci_level": "95"}
    of = claim(
        "count",
        count=str(count),
        total=str(n),
        percent=f"{100 * count / n:.1f}",
        interval_of="percent",
        **ends,
    )
    assert verdict("ci-of-percent", of, []) == "agrees"


def test_an_interval_far_from_every_method_is_conditional():
    of = claim("count", count="31", total="140", ci_low="19.1", ci_high="25.2", ci_level="95")
    assert verdict("ci-of-percent", of, []) == "conditional"


@pytest.mark.parametrize(
    "row",
    [r for r in rows("percent_counts") if not r["count"]],
    ids=lambda r: f"{r['percent']} of {r['total']}",
)
def test_published_and_constructed_percentages_without_their_count(row):
    found = judged("percent-of-total", claim("count", percent=row["percent"], total=row["total"]), [])
    if found is None:  # every percentage of so many decimals is one of the total
        assert int(row["total"]) >= 100
    elif row["rounded"] == "yes":
        assert found.verdict == "agrees"
    elif row["rounded_or_cut"] == "no":
        assert found.verdict == "conditional"


def test_totals_that_would_do_are_named():
    found = judged("percent-of-total", claim("count", percent="36.4", total="40"), [])
    assert any("33 (12 of 33)" in remedy.text for remedy in found.reconciled_by)


FAULTS = (
    " | Steam (n = 102) | Dry (n = 99) | RR (95% CI) | P",
    "Split | 18 (17.6%) | 19 (19.2%) | 0.92 (0.51 to 1.65) | .856",
)


@pytest.mark.parametrize(
    "note",
    ["P by Fisher’s exact test.", "P values from chi-square tests.", "P by χ² test with Yates’ correction."],
)
def test_p_of_a_named_test_is_not_told_by_the_interval_of_its_ratio(note):
    found = {
        f.check: f.verdict
        for f in recheck.audit_text(table(f"Table 2. Faults of loaves. {note}", *FAULTS)).findings
    }
    assert found["p-from-ci"] == "unchecked"


def test_fishers_p_beside_a_ratio_is_that_of_its_counts():
    # scipy.stats.fisher_exact([[18, 84], [19, 80]]).pvalue = 0.85595
    for p, expected in ((".856", "agrees"), (".0856", "conditional")):
        rows_ = (FAULTS[0], FAULTS[1].replace(".856", p))
        text = table("Table 2. Faults of loaves. P by Fisher’s exact test.", *rows_)
        assert {f.check: f.verdict for f in recheck.audit_text(text).findings}["p-from-counts"] == expected


@pytest.mark.parametrize(
    ("methods", "crude"),
    [
        ("Odds ratios are crude.", True),
        ("All ratios are reported unadjusted. P values were not adjusted for multiple testing.", True),
        ("Odds ratios are crude; adjusted ratios came from a logistic model.", False),
        ("Odds ratios are given with their intervals.", False),
    ],
)
def test_a_document_may_call_its_ratios_crude_once(methods, crude):
    told = "Crusts split in 12/60 steamed and 27/60 dry loaves (OR = 0.41, 95% CI 0.14 to 0.69)."
    (of,) = [c for c in recheck.audit_text(f"{methods}\n\n{told}").claims if "or" in c.values]
    assert of.says("crude") == crude


def test_a_named_fisher_test_of_a_text_is_no_other():
    # scipy.stats.fisher_exact([[3, 17], [11, 9]]).pvalue = 0.01870, alternative="less" 0.00935; Pearson's p is 0.0080
    told = (("p = .019", "agrees"), ("one-sided p = .009", "agrees"), ("p = .009", "conditional"),
            ("p = .008", "conditional"), ("p = .5", "conditional"), ("one-sided p = .019", "conditional"))  # fmt: skip
    for p, expected in told:
        text = f"Crusts split in 3 of 20 steamed and 11 of 20 dry loaves (Fisher’s exact test, {p})."
        assert {f.check: f.verdict for f in recheck.audit_text(text).findings}["p-from-counts"] == expected
