"""Counts without percentages, percentages without counts, and the results that they are told with."""

from __future__ import annotations

import pytest

from recheck.documents.typed.text import text_document
from recheck.model import Claim
from recheck.reading import read


def claims(text: str) -> tuple[Claim, ...]:
    return read(text_document(text, name="d")).claims


def counted(text: str) -> list[dict[str, str]]:
    return [{k: v.text for k, v in c.values.items()} for c in claims(text) if c.kind == "count"]


@pytest.mark.parametrize(
    "told",
    [
        "Crusts split in 12/40 steamed and 20/41 dry loaves (OR = 0.45, 95% CI 0.18 to 1.13).",
        "Crusts split in 12 of 40 steamed and 20 of the 41 dry loaves (OR = 0.45, 95% CI 0.18 to 1.13).",
        "Odds of a split were lower with steam (12 out of 40) than without (20 out of 41), odds ratio 0.45 (95% CI 0.18-1.13).",
        "Crusts split in 12/40 steamed and 20/41 dry loaves, χ²(1, N = 81) = 2.99, p = .084.",
        "Crusts split in 12 of 40 steamed and 20 of 41 dry loaves (Fisher’s exact p = .11).",
        "Rates of split crusts were 12/40 and 20/41; the unadjusted OR was 0.45 (95% CI 0.18 to 1.13).",
        "Crusts split less often with steam (12/40 vs 20/41; absolute difference −19%, 95% CI −40% to 2%).",
    ],
)
def test_fractions_are_counts_beside_a_ratio_or_a_chi2_of_two_shares(told: str) -> None:
    assert counted(told) == [{"count": "12", "total": "40"}, {"count": "20", "total": "41"}]


def test_a_count_may_be_told_in_words() -> None:
    told = "Twenty-nine of the 34 steamed and twelve of the 33 dry loaves split (RR = 2.35, 95% CI 1.46 to 3.77)."
    assert counted(told) == [{"count": "Twenty-nine", "total": "34"}, {"count": "twelve", "total": "33"}]


@pytest.mark.parametrize(
    "told",
    [
        "Steam at 3/4 of its pressure and 1/2 of the time did little (OR = 0.95, 95% CI 0.8 to 1.2).",
        "On 12/10 and on 20/11 the ovens were cold (OR = 0.45, 95% CI 0.18 to 1.13).",
        "Scores of 12 of 40 points and 20 of 41 points were common (OR = 0.45, 95% CI 0.18 to 1.13).",
        "Crusts split in 12/40 steamed and 20/41 dry loaves, t(79) = 2.99.",
        "Crusts split in 12/40 steamed and 20/41 dry loaves (Fisher’s z = 0.4, p = .08).",
    ],
)
def test_other_fractions_are_none(told: str) -> None:
    assert counted(told) == []


@pytest.mark.parametrize(
    "told",
    [
        "In all, 37.5% of the 40 apprentices passed.",
        "Of the 40 apprentices, 37.5% passed.",
        "Among 40 bakers, 37.5% had rye.",
    ],
)
def test_a_percentage_of_a_total_of_cases_is_read(told: str) -> None:
    assert counted(told) == [{"percent": "37.5", "total": "40"}]


@pytest.mark.parametrize(
    "told",
    [
        "In all, 37.5% of the 40 trials were correct.",
        "On average 37.5% of the 40 apprentices passed.",
        "The loaf had lost 37.5% of 40 g.",
        "Of the 40 apprentices, those who stayed, 37.5%, passed.",
        "An increase of 37.5% of the 40 mean scores was seen.",
    ],
)
def test_a_percentage_of_something_else_is_not(told: str) -> None:
    assert counted(told) == []


def linked(text: str, *kinds: str) -> list[tuple[int, str, tuple[str, ...]]]:
    return [
        (len(c.groups), c.link_confidence, c.stated)
        for c in claims(text)
        if c.kind in (kinds or ("estimate",))
    ]


def test_a_ratio_has_the_two_counts_of_its_sentence() -> None:
    told = "Crusts split in 12/40 (30%) steamed and 20/41 (49%) dry loaves (unadjusted OR = 0.45; adjusted OR = 0.47)."
    plain, adjusted = linked(told)
    assert plain == (2, "medium", ("crude",))
    assert adjusted[0] == 2 and "covariate-adjusted" in adjusted[2]


def test_each_of_two_ratios_has_the_counts_before_it() -> None:
    told = (
        "Crusts split in 12/40 (30%) steamed and 20/41 (49%) dry loaves (OR = 0.45) and were dark in 5/40 (12%) "
        "and 9/41 (22%) (OR = 0.51)."
    )
    found = [c for c in claims(told) if c.kind == "estimate"]
    assert len({c.groups for c in found}) == 2 and all(len(c.groups) == 2 for c in found)


@pytest.mark.parametrize(
    "told",
    [
        "Of 200 tasters, 120 (60%) preferred rye and 80 (40%) wheat (OR = 1.5, 95% CI 1.1 to 2.0).",
        "Crusts split in 12/40 (30%), 20/41 (49%) and 10/40 (25%) loaves (OR = 0.45, 95% CI 0.18 to 1.13).",
    ],
)
def test_other_counts_are_not_linked(told: str) -> None:
    assert linked(told) == [(0, "high", ())]


def test_mcnemars_test_has_the_numbers_of_changes() -> None:
    told = "In all, 12 tasters changed from sour to sweet and 3 from sweet to sour (McNemar's test, χ²(1) = 5.40, p = .020)."
    assert counted(told) == [{"count": "12"}, {"count": "3"}]
    assert linked(told, "chi2-test") == [(2, "medium", ("paired",))]


TABLE = """Table 2. Faults by oven.

| Fault | {heads} |
|---|---|---|---|
{rows}
"""


def test_a_ratio_of_a_table_has_the_two_counts_of_its_row() -> None:
    text = TABLE.format(
        heads="Steamed, n/N (%) | Dry, n/N (%) | Crude OR (95% CI)",
        rows="| Split crust | 12/40 (30.0) | 20/41 (48.8) | 0.45 (0.18 to 1.13) |",
    )
    assert linked(text) == [(2, "high", ("crude",))]


def test_a_ratio_of_a_category_has_the_counts_of_the_reference() -> None:
    text = TABLE.format(
        heads="Split, n (%) | Whole, n (%) | OR (95% CI)",
        rows="| Oven | | | |\n| Steamed | 12 (37.5) | 28 (57.1) | 1 |\n| Dry | 20 (62.5) | 21 (42.9) | 2.22 (0.89 to 5.53) |",
    )
    assert linked(text) == [(4, "medium", ())]


@pytest.mark.parametrize(
    ("caption", "confidence"), [("Values are n/N.", "high"), ("Faults that were seen.", "medium")]
)
def test_fractions_of_a_table_are_counts_beside_a_ratio(caption: str, confidence: str) -> None:
    text = TABLE.format(
        heads="Steamed | Dry | OR (95% CI)", rows="| Split crust | 12/40 | 20/41 | 0.45 (0.18 to 1.13) |"
    ).replace("Faults by oven.", f"Faults by oven. {caption}")
    assert counted(text) == [{"count": "12", "total": "40"}, {"count": "20", "total": "41"}]
    assert {c.confidence for c in claims(text) if c.kind == "count"} == {confidence}
    assert linked(text)[0][0] == 2


def test_fractions_that_count_two_kinds_are_none() -> None:
    text = TABLE.format(
        heads="Steamed | Dry | OR (95% CI)", rows="| Rye/wheat | 12/40 | 20/41 | 0.45 (0.18 to 1.13) |"
    )
    assert counted(text) == []


def test_a_difference_in_percentage_points_has_the_counts_of_its_row() -> None:
    text = TABLE.format(
        heads="Steamed, n/N (%) | Dry, n/N (%) | Absolute difference, % (95% CI)",
        rows="| Split crust | 12/40 (30.0) | 20/41 (48.8) | −18.8 (−39.7 to 2.1) |",
    )
    assert linked(text) == [(2, "high", ())]


def test_a_lone_p_has_the_only_two_counts_of_its_sentence() -> None:
    told = "Crusts split in 12 of 40 steamed loaves (30%) and in 20 of 41 dry ones (49%; p = .11)."
    assert linked(told) == [(2, "medium", ())]


def test_a_ratio_without_an_interval_is_read_beside_counts_alone() -> None:
    rows = "| Split crust | 12/40 (30.0) | 20/41 (48.8) | 0.45 |"
    assert linked(TABLE.format(heads="Steamed, n/N (%) | Dry, n/N (%) | Crude OR", rows=rows)) == [
        (2, "high", ("crude",))
    ]
    rows = "| Split crust | 4.1 | 5.2 | 0.45 |"
    assert linked(TABLE.format(heads="Height | Width | Crude OR", rows=rows)) == []


@pytest.mark.parametrize(
    "told",
    [
        "21 apprentices changed to rye and 6 to wheat (McNemar χ²(1) = 8.33).",
        "Before training 20 and after it 35 of 60 apprentices weighed the flour; 21 changed to weighing and 6 to the cup (McNemar χ²(1) = 8.33).",
        "21 changed from wheat to rye and 6 from rye to wheat (McNemar χ²(1) = 8.33).",
    ],
)
def test_changes_of_mcnemars_test(told: str) -> None:
    assert counted(told) == [{"count": "21"}, {"count": "6"}]
