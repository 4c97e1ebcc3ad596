"""Counts: percentages, and χ² and p of published tables (tests/reference/two_by_two.csv, percent_counts.csv)."""

from dataclasses import replace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from recheck import audit_text
from recheck.checks.registry import Case, all_checks, find_check
from recheck.checks.running import run_checks
from recheck.model import TOTAL_OF_GROUP, Place, Settings
from tests.checks.claims import claim, finding
from tests.reference import rows

all_checks()


def counts(table, totals=True, notes=()):
    """Count claims of a table: categories down, groups across, each with the total of its group."""
    sums = [sum(column) for column in zip(*table, strict=True)]
    return [
        replace(
            claim("count", name=f"c{i}{j}", count=str(value), **({"total": str(sums[j])} if totals else {})),
            outcome=f"category {i}", group=f"group {j}", notes=notes,
        )
        for i, row in enumerate(table)
        for j, value in enumerate(row)
    ]  # fmt: skip


def first_row(table, **changes):
    """The first category alone, with the totals of both groups: `12/30`."""
    return counts(table, **changes)[: len(table[0])]


def judged(check, of, told):
    case = Case(claim=replace(of, groups=tuple(c.id for c in told)), groups=tuple(told))
    (found,) = find_check(check).run(case)
    return found


def verdict(check, of, told):
    return judged(check, of, told).verdict


@pytest.mark.parametrize("row", [r for r in rows("percent_counts") if r["count"]], ids=lambda r: r["label"])
def test_published_and_constructed_percentages(row):
    found = finding(
        "percent-from-count", claim("count", percent=row["percent"], count=row["count"], total=row["total"])
    )
    if row["rounded"] == "yes":
        assert found.verdict == "agrees"
    elif row["rounded_or_cut"] == "yes":
        assert found.verdict in ("agrees", "conditional")  # a tie is within half a unit
    else:
        assert found.verdict == "inconsistent"


def test_a_percentage_of_the_group_may_have_missing_cases():
    wrong = {"percent": "35", "count": "12", "total": "40"}
    assert finding("percent-from-count", claim("count", **wrong)).verdict == "inconsistent"
    of_group = replace(claim("count", **wrong), notes=(TOTAL_OF_GROUP,))
    found = finding("percent-from-count", of_group)
    assert found.verdict == "conditional"
    assert (found.reconciled_by[-1].low, found.reconciled_by[-1].high) == (34, 34)
    assert "of 34" in found.reconciled_by[-1].text


def test_all_categories_of_fewer_cases_have_missing_ones():
    def shares(*told):
        rows = [
            replace(
                claim("count", name=f"b{i}", count=c, percent=p, total="40"),
                outcome=f"Crust | category {i}", group="Rye", notes=(TOTAL_OF_GROUP,), place=Place(c, table="Table 1"),
            )
            for i, (c, p) in enumerate(told)
        ]  # fmt: skip
        return [f.verdict for f in run_checks(rows, Settings()) if f.check == "percent-from-count"]

    # 12, 15 and 9 of 36 answers: 33.3, 41.7 and 25.0 %
    assert shares(("12", "33.3"), ("15", "41.7"), ("9", "25.0")) == ["unchecked"] * 3
    assert shares(("12", "30.0"), ("18", "54.0"), ("10", "25.0")) == ["agrees", "conditional", "agrees"]


def test_percentages_that_were_made_to_sum_to_a_hundred():
    third = replace(claim("count", percent="34", count="10", total="30"), notes=(TOTAL_OF_GROUP,))
    assert finding("percent-from-count", third).verdict == "conditional"


def test_weighted_percentages_are_not_rebuilt():
    assert (
        finding(
            "percent-from-count", claim("count", "weighted", percent="35", count="12", total="40")
        ).verdict
        == "unchecked"
    )


def test_a_count_above_its_own_total_is_impossible():
    of = claim("count", count="41", total="40")
    assert finding("count-in-total", of).verdict == "impossible"
    assert finding("count-in-total", replace(of, notes=(TOTAL_OF_GROUP,))).verdict == "conditional"
    assert not list(find_check("count-in-total").run(Case(claim=claim("count", count="40", total="40"))))


@given(total=st.integers(1, 2000), share=st.floats(0, 1), decimals=st.integers(0, 2))
def test_an_honest_percentage_agrees(total, share, decimals):
    count = round(share * total)
    of = claim("count", percent=f"{100 * count / total:.{decimals}f}", count=str(count), total=str(total))
    assert finding("percent-from-count", of).verdict == "agrees"


@pytest.mark.parametrize(
    "row",
    [r for r in rows("two_by_two") if min(r.numbers("a", "b", "c", "d")) > 0],
    ids=lambda row: row["label"],
)
def test_published_two_by_two_tables(row):
    a, b, c, d = (int(x) for x in row.numbers("a", "b", "c", "d"))
    told = first_row([[a, c], [b, d]])
    for name, expected in (("chi2", "agrees"), ("yates", "conditional")):
        printed = f"{row.number(name):.2f}"
        if f"{row.number('chi2'):.1f}" != f"{row.number('yates'):.1f}" or name == "chi2":
            assert verdict("chi2-from-counts", claim("chi2-test", chi2=printed, df="1"), told) == expected
    corrected = claim("chi2-test", "yates", chi2=f"{row.number('yates'):.2f}", df="1")
    assert verdict("chi2-from-counts", corrected, told) == "agrees"
    for name in ("chi2_p", "yates_p", "fisher_p"):
        p = f"{row.number(name):.3f}"
        assert verdict("p-from-counts", claim("estimate", p=p), told) == "agrees"
    exact = claim("estimate", "fisher-exact", p=f"{row.number('fisher_p'):.4f}")
    assert verdict("p-from-counts", exact, told) == "agrees"


# Vitamin C and colds: 17 of 139 v 31 of 140, χ² = 4.81, p = .028 (Agresti 2002, from memory)
COLDS = [[17, 31], [122, 109]]


@pytest.mark.parametrize(
    ("values", "expected"),
    [
        ({"chi2": "4.81", "df": "1"}, "agrees"),
        ({"chi2": "4.14", "df": "1"}, "conditional"),  # with the continuity correction
        ({"chi2": "8.41", "df": "1"}, "inconsistent"),
        ({"chi2": "8.41", "df": "2"}, "unchecked"),
        ({"chi2": "8.41"}, "inconsistent"),
    ],
)
def test_chi2_of_one_row(values, expected):
    assert verdict("chi2-from-counts", claim("chi2-test", **values), first_row(COLDS)) == expected


def test_missing_cases_pairs_and_strata_are_honest():
    wrong = claim("chi2-test", chi2="8.41", df="1")
    whole = first_row(COLDS, notes=(TOTAL_OF_GROUP,))
    assert verdict("chi2-from-counts", wrong, whole) == "conditional"
    stated = replace(wrong, values={**wrong.values, "N": claim("count", N="279").values["N"]})
    assert verdict("chi2-from-counts", stated, whole) == "inconsistent"
    paired = replace(wrong, stated=("paired",))
    assert verdict("chi2-from-counts", paired, first_row(COLDS)) == "unchecked"
    balanced = first_row([[17, 31], [123, 109]])
    assert verdict("chi2-from-counts", wrong, balanced) == "conditional"  # may be McNemar's
    for word in ("survival", "mixed-model"):
        assert (
            verdict("chi2-from-counts", replace(wrong, background=(word,)), first_row(COLDS)) == "conditional"
        )
        assert verdict("chi2-from-counts", replace(wrong, stated=(word,)), first_row(COLDS)) == "unchecked"
    weighted = replace(wrong, background=("weighted",))
    assert verdict("chi2-from-counts", weighted, first_row(COLDS)) == "unchecked"


# R data set HairEyeColor, hair by eye over both sexes: χ² = 138.29 on 9 df
HAIR = [[68, 20, 15, 5], [119, 84, 54, 29], [26, 17, 14, 14], [7, 94, 10, 16]]


def test_a_block_of_categories_makes_a_table():
    for totals in (True, False):
        told = counts(HAIR, totals)
        assert verdict("chi2-from-counts", claim("chi2-test", chi2="138.29", df="9"), told) == "agrees"
        assert verdict("chi2-from-counts", claim("chi2-test", chi2="183.29", df="9"), told) == "inconsistent"
        # R: likelihood ratio 146.44 (MASS::loglm)
        assert verdict("chi2-from-counts", claim("chi2-test", chi2="146.44", df="9"), told) == "conditional"


def test_without_margins_df_or_percentages_tell_that_all_is_there():
    wrong = claim("chi2-test", chi2="183.29")
    assert verdict("chi2-from-counts", wrong, counts(HAIR, totals=False)) == "conditional"
    square = [[17, 31], [122, 109]]
    assert (
        verdict("chi2-from-counts", claim("chi2-test", chi2="8.41"), counts(square, totals=False))
        == "conditional"
    )
    told = counts(square, totals=False)
    shares = [
        replace(c, values={**c.values, "percent": claim("count", percent=p).values["percent"]})
        for c, p in zip(told, ("12.2", "22.1", "87.8", "77.9"), strict=True)
    ]
    assert verdict("chi2-from-counts", claim("chi2-test", chi2="8.41"), shares) == "inconsistent"


def test_categories_that_do_not_make_up_the_groups():
    told = counts(HAIR)[:12]
    assert verdict("chi2-from-counts", claim("chi2-test", chi2="99.99", df="6"), told) == "conditional"
    more = [
        replace(c, values={**c.values, "total": claim("count", total="90").values["total"]})
        for c in counts(HAIR)
    ]
    assert verdict("chi2-from-counts", claim("chi2-test", chi2="99.99", df="9"), more) == "unchecked"


def test_percentages_stand_for_all_counts_behind_them():
    told = [
        replace(claim("count", name=f"c{j}", percent=p, total=n), outcome="Cold", group=f"group {j}")
        for j, (p, n) in enumerate((("12", "139"), ("22", "140")))
    ]
    found = judged("chi2-from-counts", claim("chi2-test", chi2="4.81", df="1"), told)
    assert found.verdict == "agrees"
    # 16 or 17 of 139 (11.5 to 12.5 %), 31 of 140 alone
    low, high = (
        stats.chi2_contingency([[a, 31], [139 - a, 109]], correction=False).statistic for a in (17, 16)
    )
    assert (found.implied[0].low, found.implied[0].high) == pytest.approx((low, high), rel=1e-8)
    assert verdict("chi2-from-counts", claim("chi2-test", chi2="14.8", df="1"), told) == "conditional"


def test_a_p_without_a_named_test_is_conditional_at_most():
    for p, expected in (
        ("0.028", "agrees"),
        ("0.21", "unchecked"),
        ("0.98", "conditional"),
        ("< .00001", "conditional"),
    ):
        assert verdict("p-from-counts", claim("estimate", p=p), first_row(COLDS)) == expected
    named = claim("chi2-test", p="0.98")
    assert verdict("p-from-counts", named, first_row(COLDS)) == "inconsistent"
    assert verdict("p-from-counts", named, first_row(COLDS, notes=(TOTAL_OF_GROUP,))) == "conditional"
    assert (
        verdict("p-from-counts", replace(named, background=("adjusted-p",)), first_row(COLDS)) == "unchecked"
    )


def test_many_categories_may_be_tested_for_trend():
    assert verdict("p-from-counts", claim("estimate", p="0.9"), counts(HAIR)) == "unchecked"


@settings(deadline=None)
@given(st.lists(st.integers(0, 40), min_size=4, max_size=4), st.integers(0, 3))
def test_an_honest_table_is_never_flagged(cells, decimals):
    a, b, c, d = cells
    if min(a + b, c + d, a + c, b + d) == 0:
        return
    told = first_row([[a, b], [c, d]])
    for correction in (True, False):
        result = stats.chi2_contingency([[a, b], [c, d]], correction=correction)
        of = claim("chi2-test", chi2=f"{result.statistic:.{decimals}f}", df="1")
        assert verdict("chi2-from-counts", of, told) in ("agrees", "conditional")
        p = claim("chi2-test", p=f"{result.pvalue:.{decimals}f}")
        assert verdict("p-from-counts", p, told) in ("agrees", "conditional")


def block(columns, n=40):
    """Counts of the categories of one variable of a table, a list for each group."""
    return [
        replace(
            claim("count", name=f"b{i}{j}", count=str(value), total=str(n)),
            outcome=f"Crust | category {i}", group=f"group {j}",
            place=Place("12 (30)", table="Table 1"),
        )
        for j, column in enumerate(columns)
        for i, value in enumerate(column)
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("columns", "expected"),
    [
        (([12, 18, 10], [21, 18, 10]), ["conditional"]),
        (([12, 18, 10], [11, 18, 11]), []),
        (([12, 18, 10], [12, 18, 11]), []),  # one more may be the rounding of weighted counts
        (([12, 18, 10], [2, 18, 10]), []),  # fewer: cases are missing
        (([30, 28, 20], [21, 18, 10]), []),  # several answers were possible
    ],
)
def test_categories_of_a_block(columns, expected):
    found = [f for f in run_checks(block(columns), Settings()) if f.check == "categories-in-group"]
    assert [f.verdict for f in found] == expected
    assert all(len(f.claims) == 3 for f in found)


def test_a_chi2_of_a_sentence_is_compared_with_its_two_counts():
    told = "Rye loaves split in 12/40 and wheat loaves in 20/41 cases, χ²(1, N = 81) = {}, p = .084."
    for shown, expected in (("2.99", "agrees"), ("9.29", "conditional")):
        found = [f for f in audit_text(told.format(shown)).findings if f.check == "chi2-from-counts"]
        assert [f.verdict for f in found] == [expected]


def test_fishers_p_of_a_larger_table_is_worked_out():
    # R 4.2.2: fisher.test(matrix(c(20, 12, 15, 22, 11, 9), 2))$p.value = 0.1906
    told = counts([[20, 15, 11], [12, 22, 9]])
    assert verdict("p-from-counts", claim("chi2-test", "fisher-exact", p=".191", df="2"), told) == "agrees"
    assert verdict("p-from-counts", claim("chi2-test", "fisher-exact", p=".911", df="2"), told) != "agrees"
