"""F against its groups and its source table: published data, and honest analyses of other kinds."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats
from statsmodels.stats.oneway import anova_oneway

from recheck.checks.registry import all_checks
from recheck.model import N_OF_GROUP
from tests.checks.claims import claim, finding
from tests.reference import rows

all_checks()


def groups(*summaries, **stated):
    return [
        claim("group-summary", *stated.get("said", ()), name=f"g{i}", mean=m, sd=s, n=n)
        for i, (m, s, n) in enumerate(summaries)
    ]


def f_test(summaries, said=(), **values):
    return claim("F-test", *said, groups=tuple(g.id for g in summaries), **values)


# R data set PlantGrowth: F(2, 27) = 4.846, p = .01591
PLANTS = groups(("5.032", "0.583", "10"), ("4.661", "0.794", "10"), ("5.526", "0.443", "10"))


@pytest.mark.parametrize(
    ("F", "df1", "df2", "verdict"),
    [
        ("4.85", "2", "27", "agrees"),
        ("4.64", "2", "27", "inconsistent"),
        ("4.64", "2", "26", "unchecked"),  # a covariate
        ("4.64", "1", "27", "unchecked"),  # a contrast
        ("5.18", "2", "17.1", "agrees"),  # R oneway.test: F = 5.181, denominator df = 17.128
        ("4.18", "2", "17.1", "conditional"),
    ],
)
def test_plant_growth(F, df1, df2, verdict):
    assert finding("F-from-groups", f_test(PLANTS, F=F, df1=df1, df2=df2), *PLANTS).verdict == verdict


def test_without_df_the_verdict_is_conditional_at_most():
    assert finding("F-from-groups", f_test(PLANTS, F="4.64"), *PLANTS).verdict == "conditional"
    named = f_test(PLANTS, ("between-groups",), F="4.64")
    assert finding("F-from-groups", named, *PLANTS).verdict == "inconsistent"
    whole = [replace(g, notes=(N_OF_GROUP,)) for g in PLANTS]
    assert finding("F-from-groups", named, *whole).verdict == "conditional"


@pytest.mark.parametrize("word", ["covariate-adjusted", "transformed", "imputed", "weighted"])
def test_another_model_is_unchecked(word):
    test = f_test(PLANTS, (word,), F="4.64", df1="2", df2="27")
    assert finding("F-from-groups", test, *PLANTS).verdict == "unchecked"


def test_repeated_measures_are_unchecked():
    test = f_test(PLANTS, ("repeated",), F="4.64", df1="2", df2="27")
    assert finding("F-from-groups", test, *PLANTS).verdict == "unchecked"


def test_standard_errors_labelled_as_sds_are_named():
    of_se = groups(("5.032", "0.184", "10"), ("4.661", "0.251", "10"), ("5.526", "0.140", "10"))
    found = finding("F-from-groups", f_test(of_se, F="4.85", df1="2", df2="27"), *of_se)
    assert (found.verdict, found.reconciled_by[0].change) == ("inconsistent", "SD → SE")
    open_ = [replace(g, stated=("spread-unlabelled",)) for g in of_se]
    assert (
        finding("F-from-groups", f_test(of_se, F="4.85", df1="2", df2="27"), *open_).verdict == "conditional"
    )


@pytest.mark.parametrize(
    "row", [r for r in rows("one_way_anova") if ";" in r["ns"][1:]], ids=lambda r: r["label"]
)
def test_published_data_agree_however_rounded(row):
    means, sds, ns = (row[c].split(";") for c in ("means", "sds", "ns"))
    if not 3 <= len(ns) <= 12:
        return
    told = groups(
        *((f"{float(m):.2f}", f"{float(s):.2f}", n) for m, s, n in zip(means, sds, ns, strict=True))
    )
    test = f_test(told, F=f"{row.number('F'):.2f}", df1=row["df1"], df2=row["df2"])
    assert finding("F-from-groups", test, *told).verdict == "agrees"


@settings(max_examples=60, deadline=None)
@given(st.integers(0, 10**6), st.integers(3, 6), st.integers(0, 2))
def test_an_honest_one_way_analysis_is_never_flagged(seed, k, decimals):
    rng = np.random.default_rng(seed)
    data = [
        rng.normal(rng.normal(5, 1), rng.uniform(0.5, 3), size=int(rng.integers(2, 30))) for _ in range(k)
    ]
    told = groups(*((f"{d.mean():.{decimals}f}", f"{d.std(ddof=1):.{decimals}f}", str(len(d))) for d in data))
    total = sum(map(len, data))
    F = f"{stats.f_oneway(*data).statistic:.2f}"
    assert (
        finding("F-from-groups", f_test(told, F=F, df1=str(k - 1), df2=str(total - k)), *told).verdict
        == "agrees"
    )
    welch = anova_oneway(data, use_var="unequal")
    df2 = f"{welch.df[1]:.1f}"
    test = f_test(told, F=f"{welch.statistic:.2f}", df1=str(k - 1), df2=df2)
    assert finding("F-from-groups", test, *told).verdict in ("agrees", "conditional", "unchecked")


# Box, Hunter & Hunter (1978), coagulation times: SS 228 (df 3) and 112 (df 20), MS 76.0 and 5.6, F = 13.6
SOURCE = {
    "ss": "228", "df1": "3", "ms": "76.0", "ss_error": "112", "df2": "20", "ms_error": "5.6", "F": "13.6", "ss_total": "340",
}  # fmt: skip


def source(*said, **changed):
    values = {**SOURCE, **changed}
    return claim("F-test", *said, **{k: v for k, v in values.items() if v})


def all_findings(check, of):
    from recheck.checks.registry import Case, find_check

    return [(f.quantity, f.verdict) for f in find_check(check).run(Case(claim=of))]


def test_a_source_table_that_agrees():
    assert all_findings("ms-from-ss", source()) == [("ms", "agrees"), ("ms_error", "agrees")]
    assert finding("F-from-ms", source()).verdict == "agrees"
    assert finding("F-from-ms", source(ms="", ms_error="")).verdict == "agrees"
    assert all_findings("eta2-from-ss", source(eta2=".67")) == [("eta2", "agrees")]
    assert all_findings("eta2-from-ss", source(partial_eta2=".671")) == [("partial_eta2", "agrees")]


def test_a_source_table_that_contradicts_itself():
    assert all_findings("ms-from-ss", source(ms="67.0")) == [("ms", "inconsistent"), ("ms_error", "agrees")]
    assert all_findings("ms-from-ss", source(ms_error="6.5")) == [
        ("ms", "agrees"),
        ("ms_error", "inconsistent"),
    ]
    assert finding("F-from-ms", source(F="16.3")).verdict == "inconsistent"
    assert all_findings("eta2-from-ss", source(eta2=".76")) == [("eta2", "inconsistent")]


def test_another_error_term_is_honest():
    # with several effects F may rest on the mean square of an interaction
    several = {"ss_total": "500", "F": "16.3"}
    assert finding("F-from-ms", source(**several)).verdict == "conditional"
    assert finding("F-from-ms", source(**several, p="< .001")).verdict == "conditional"
    # R 4.2: pf(1.63, 3, 20, lower = F) = .2142: p was looked up with the df of this error row
    assert finding("F-from-ms", source(ss_total="500", F="1.63", p=".214")).verdict == "inconsistent"


def test_eta2_for_partial_eta2_is_conditional():
    assert all_findings("eta2-from-ss", source(ss_total="500", eta2=".67")) == [("eta2", "conditional")]


def test_df_of_several_groups():
    for df2, expected in (("27", "agrees"), ("17.1", "agrees"), ("25", "conditional"), ("72", "conditional")):
        assert finding("df-from-ns", f_test(PLANTS, F="4.85", df1="2", df2=df2), *PLANTS).verdict == expected
    assert all_findings("df-from-ns", f_test(PLANTS, F="4.85", df1="1", df2="27")) == []
    whole = [replace(g, notes=(N_OF_GROUP,)) for g in PLANTS]
    for df2, expected in (("25", "unchecked"), ("72", "conditional")):
        assert finding("df-from-ns", f_test(whole, F="4.85", df1="2", df2=df2), *whole).verdict == expected


def test_a_random_factor_leaves_p_and_eta2_open():
    # F = MS of the flour / MS of the interaction (df 2), p = .2143 by R 4.2: pf(3.67, 2, 2, lower = F)
    row = {
        "ss": "22.0",
        "df1": "2",
        "ms": "11.0",
        "ss_error": "60.0",
        "df2": "30",
        "ms_error": "2.0",
        "F": "3.67",
    }
    of = claim("F-test", **row, p=".214", partial_eta2=".786")
    assert finding("p-from-F", of).verdict == "conditional"
    assert all_findings("eta2-from-ss", of) == [("partial_eta2", "conditional")]
    assert finding("F-from-ms", of).verdict == "conditional"
