"""The same result in two places; results that merely resemble each other give no sure pair."""

from __future__ import annotations

import pytest

from recheck.documents import text_document
from recheck.model import Claim, SameResult
from recheck.reading import read

TABLE = """
Table 2. Outcomes by flour, mean (SD).

| Outcome | Rye (n = 18) | Wheat (n = 18) |
|---|---|---|
| Loaf height (mm) | 92.4 (6.1) | 86.0 (5.8) |
| Crumb softness | 5.24 (1.10) | 4.81 (1.30) |
"""
TESTS = """
Table 2. Outcomes by flour, mean (SD) and t test.

| Outcome | Rye (n = 18) | Wheat (n = 18) | t(34) | p |
|---|---|---|---|---|
| Loaf height (mm) | 92.4 (6.1) | 86.0 (5.8) | 3.23 | .003 |
| Crumb softness | 5.24 (1.10) | 4.81 (1.30) | 1.07 | .292 |
"""
COUNTS = """
Table 1. Bakers by flour, n (%).

| | Rye (n = 34) | Wheat (n = 30) |
|---|---|---|
| Burnt loaves | 12 (35.3) | 6 (20.0) |
"""


def pairs(text: str) -> list[tuple[SameResult, Claim, Claim]]:
    """All pairs of a text, with their claims."""
    found = read(text_document(text, name="loaves.md"))
    by_id = {claim.id: claim for claim in found.claims}
    return [(same, *(by_id[i] for i in same.claims)) for same in found.same]


@pytest.mark.parametrize(
    "sentence",
    [
        "Loaf height was greater with rye (M = 92.4, SD = 6.1) than with wheat (M = 86.0, SD = 8.5; Table 2).",
        "As shown in Table 2, mean loaf height was 92.4 (SD = 6.1) with rye and 86.0 (SD = 8.5) with wheat.",
        "Loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
    ],
)
def test_means_of_the_table_that_the_sentence_names(sentence: str) -> None:
    found = pairs(f"{sentence}\n{TABLE}")
    assert len(found) == 2
    same, text, cell = next(p for p in found if p[1].values["sd"].text == "8.5")
    assert same.sure and cell.values["sd"].text == "5.8"
    assert (
        "oaf height” of “wheat” and the row “Loaf height (mm)” of Table 2, which the sentence names"
        in same.basis
    )
    assert text.place.row is None and cell.place.row == "Loaf height (mm)"


@pytest.mark.parametrize(
    "sentence",
    [
        "After a week, loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
        "Among women, loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
        "Without burnt loaves, loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
        "Per protocol, loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
        "Adjusted loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
        "In trial 2, loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
        "Loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (baseline: Table 2).",
        "Loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat, unlike in Table 2.",
        "Northern loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
        "For steamed ovens, loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
        "Loaf height ratio was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2).",
        "Loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat.",
        "Loaf height was M = 92.4 (SD = 6.1) in the south and M = 86.0 (SD = 8.5) in the north (Table 2).",
        "Loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Tables 2 and 3).",
    ],
)
def test_what_may_be_another_result_is_never_sure(sentence: str) -> None:
    assert not any(same.sure for same, *_ in pairs(f"{sentence}\n{TABLE}"))


def test_se_and_median_are_no_sd_and_mean() -> None:
    text = "Loaf height was M = 92.4 (SE = 1.4) with rye and Mdn = 87 with wheat (Table 2)."
    for _, one, two in pairs(f"{text}\n{TABLE}"):
        assert "mean" in {*one.values} & {*two.values}
        assert "sd" not in one.values or "sd" not in two.values


def test_two_rows_of_one_name_are_not_told_apart() -> None:
    two = TABLE.replace("| Crumb softness |", "| Loaf height (mm) |")
    text = "Loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2)."
    assert [p[1].values["mean"].text for p in pairs(f"{text}\n{two}")] == ["92.4"]


def test_a_cell_told_in_full_is_not_what_resembles_it() -> None:
    """Two weeks told in neighbouring sentences: the table has the first."""
    text = (
        "Loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 5.8) with wheat (Table 2). The ovens were mended. "
        "Loaf height was M = 92.4 (SD = 7.7) with rye and M = 86.0 (SD = 8.5) with wheat (Table 2)."
    )
    found = pairs(f"{text}\n{TABLE}")
    assert sorted(p[1].values["sd"].text for p in found) == ["5.8", "6.1"]


@pytest.mark.parametrize(
    ("told", "sure"),
    [("t(34) = 3.32, p = .003", False), ("t(34) = 3.23, p = .008", True), ("t(43) = 3.23, p = .003", True)],
)
def test_test_of_the_row(told: str, sure: bool) -> None:
    found = pairs(f"Loaf height was greater with rye than with wheat, {told} (Table 2).\n{TESTS}")
    assert len(found) == 1
    same, _, cell = found[0]
    assert same.sure is sure and cell.values["t"].text == "3.23"


def test_models_must_be_the_same() -> None:
    text = "Loaf height was greater with rye than with wheat, Welch's t(33.9) = 3.23, p = .008 (Table 2)."
    assert not any(same.sure for same, *_ in pairs(f"{text}\n{TESTS}"))


def test_counts_need_the_same_total() -> None:
    told = "Burnt loaves were told of by 12 (38.7%) with rye and 6 (20.0%) with wheat (Table 1)."
    assert not any(same.sure for same, *_ in pairs(f"{told}\n{COUNTS}") if "total" in same.basis)


RESULTS = "# Results\n\nLoaf height was compared between rye and wheat, t(46) = 2.31, p = .025, d = 0.67. Crumb softness was, t(46) = 1.31, p = .197."


@pytest.mark.parametrize(
    ("abstract", "partner"),
    [
        ("Rye loaves rose higher, t(46) = 2.31, p = .025.", "2.31"),
        ("Rye loaves rose higher, t(46) = 2.3, p = .025.", "2.31"),
        ("Rye loaves rose higher, t(46) = 2.13, p = .025.", "2.31"),
        ("Rye loaves rose higher, t(46) = 2.31, p = .052.", "2.31"),
        ("Rye loaves rose higher, t(44) = 2.77, p = .008.", None),
        ("Rye loaves rose higher, t(46) = 1.99, p = .052.", None),
        ("Rye loaves rose higher, F(1, 46) = 2.31, p = .135.", None),
    ],
)
def test_abstract_and_results(abstract: str, partner: str | None) -> None:
    found = pairs(f"# Abstract\n\n{abstract}\n\n{RESULTS}\n")
    assert [two.values["t"].text for _, _, two in found] == ([partner] if partner else [])
    assert not any(same.sure for same, *_ in found)


def test_parts_of_an_abstract_stand_before_the_introduction() -> None:
    text = (
        "# Findings\n\nRye loaves rose higher, t(46) = 2.13, p = .025.\n\n# Introduction\n\nBakers bake.\n\n"
        + RESULTS
    )
    assert [two.values["t"].text for _, _, two in pairs(f"{text}\n")] == ["2.31"]
    assert pairs(f"{text}\n".replace("Introduction", "Methods")) == []


def test_a_full_match_leaves_no_place_for_one_that_resembles() -> None:
    text = "# Abstract\n\nCrumb softness did not differ, t(46) = 1.31, p = .197.\n\n# Results\n\n"
    text += "Loaf height was compared, t(46) = 1.32, p = .197. Crumb softness was, t(46) = 1.31, p = .197.\n"
    assert [two.values["t"].text for _, _, two in pairs(text)] == ["1.31"]


def test_two_that_resemble_it_give_no_pair() -> None:
    text = "# Abstract\n\nCrumb softness did not differ, t(46) = 1.31, p = .197.\n\n# Results\n\n"
    text += "Loaf height was compared, t(46) = 1.35, p = .197. Oven spring was, t(46) = 1.38, p = .197.\n"
    assert pairs(text) == []


def test_many_alike_claims_give_few_pairs() -> None:
    body = " ".join(f"Loaf height was compared, t(46) = 2.31, p = .025 (batch {k})." for k in range(80))
    assert len(pairs(f"# Abstract\n\nThey differed, t(46) = 2.31, p = .025.\n\n# Results\n\n{body}\n")) == 1
