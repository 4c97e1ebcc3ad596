"""Tests of the text and their groups: in the sentence, in the paragraph, in the row of a table."""

from __future__ import annotations

import pytest

from recheck.documents import text_document
from recheck.model import Claim, Reading
from recheck.reading import read

TABLE = """
Table 2. Outcomes by flour, mean (SD).

| Outcome | Rye (n = 18) | Wheat (n = 18) |
|---|---|---|
| Loaf height (mm) | 92.4 (6.1) | 86.0 (5.8) |
| Crumb softness | 5.24 (1.10) | 4.81 (1.30) |
| Oven spring (OS) | 3.10 (0.90) | 3.60 (0.95) |
"""
THREE = """
Table 3. Loaf height by flour, mean (SD).

| Outcome | Rye (n = 18) | Wheat (n = 18) | Spelt (n = 18) |
|---|---|---|---|
| Loaf height | 92.4 (6.1) | 86.0 (5.8) | 88.1 (6.0) |
"""
WITH_TOTAL = """
Table 4. Loaf height by flour, mean (SD).

| Outcome | All (n = 36) | Rye (n = 18) | Wheat (n = 18) |
|---|---|---|---|
| Loaf height | 89.2 (6.7) | 92.4 (6.1) | 86.0 (5.8) |
"""
WEEKS = """
Table 2. Loaf height by flour, mean (SD).

| Outcome | Rye (n = 18) | Wheat (n = 18) |
|---|---|---|
| Week 1 | | |
| Loaf height | 92.4 (6.1) | 86.0 (5.8) |
| Week 4 | | |
| Loaf height | 94.4 (6.1) | 91.0 (5.8) |
"""
COUNTS = """
Table 1. Bakers by flour, n (%).

| | Rye (n = 34) | Wheat (n = 30) |
|---|---|---|
| Burnt loaves | 12 (35.3) | 6 (20.0) |
| Men | 20 (58.8) | 14 (46.7) |
"""


def reading(text: str) -> Reading:
    return read(text_document(text, name="loaves.md"))


def test_of(text: str) -> tuple[Claim, list[str]]:
    """The only test of the prose, and the means of its groups."""
    claims = reading(text).claims
    by_id = {claim.id: claim for claim in claims}
    (found,) = (c for c in claims if c.kind in ("t-test", "F-test") and c.place.row is None)
    return found, [by_id[group].values["mean"].text for group in found.groups]


test_of.__test__ = False  # type: ignore[attr-defined]


@pytest.mark.parametrize(
    "sentence",
    [
        "Loaf height was greater with rye than with wheat, t(34) = 3.23, p = .003 (Table 2).",
        "Loaf heights differed between rye and wheat, t(34) = 3.23, p = .003 (see Table 2).",
        "As shown in Table 2, loaf height was greater with rye than with wheat, t(34) = 3.23, p = .003.",
        "The height of the loaf was greater with rye than with wheat (t(34) = 3.23, p = .003; Table 2).",
        "The loaf-height differed, F(1, 34) = 10.4, p = .003 (Table 2, Figure 1).",
        "Table 2 shows that loaf height was greater with rye, t(34) = 3.23, p = .003.",
    ],
)
def test_row_of_the_table_that_the_sentence_names(sentence: str) -> None:
    found, means = test_of(f"{sentence}\n{TABLE}")
    assert means == ["92.4", "86.0"]
    assert found.link == "the row “Loaf height (mm)” of Table 2, which the sentence names"
    assert found.link_confidence == "high"
    assert found.outcome is not None and "height" in found.outcome.lower()


def test_abbreviation_of_an_outcome() -> None:
    text = f"Bakers measured oven spring (OS) too. OS was smaller with rye than with wheat, t(34) = 1.62, p = .11 (Table 2).\n{TABLE}"
    assert test_of(text)[1] == ["3.10", "3.60"]


@pytest.mark.parametrize(
    "sentence",
    [
        "Crumb softness is given too (Table 2), but loaf height was greater with rye than with wheat, t(34) = 2.23, p = .032.",
        "The bakers of the north found that loaf height differed, t(34) = 2.23, p = .032 (Table 2).",
    ],
)
def test_a_sentence_that_may_speak_of_something_else_is_not_sure(sentence: str) -> None:
    found, means = test_of(f"{sentence}\n{TABLE}")
    assert means == ["92.4", "86.0"]
    assert found.link_confidence == "medium"


@pytest.mark.parametrize(
    "sentence",
    [
        "Loaf height was greater with rye than with wheat, t(34) = 2.23, p = .032.",  # no table is named
        "Final loaf height was greater with rye than with wheat, t(34) = 2.23, p = .032 (Table 2).",
        "Loaf height gain was greater with rye than with wheat, t(34) = 2.23, p = .032 (Table 2).",
        "Loaf height increased more with rye than with wheat, t(34) = 2.23, p = .032 (Table 2).",
        "In week 4, loaf height differed between rye and wheat, t(34) = 2.23, p = .032 (Table 2).",
        "Among women, loaf height differed between rye and wheat, t(34) = 2.23, p = .032 (Table 2).",
        "Loaf height differed, t(34) = 2.23, p = .032 (baseline values are given in Table 2).",
        "Loaf height differed, unlike in Table 2, t(34) = 2.23, p = .032.",
        "Loaf height differed, t(34) = 2.23, p = .032 (see Table 2 of Baker, 2012).",
        "Loaf height and colour differed, t(34) = 2.23, p = .032 (Table 2).",
        "Crust colour differed between rye and wheat, t(34) = 2.23, p = .032 (Table 2).",
        "Loaf height differed, t(34) = 2.23, p = .032 (Table 7).",
    ],
)
def test_another_result_gets_no_row(sentence: str) -> None:
    found, means = test_of(f"{sentence}\n{TABLE}")
    assert means == [] and found.link is None


@pytest.mark.parametrize(
    "caption", ["Outcomes, adjusted for age", "Estimated marginal means", "Log-transformed outcomes"]
)
def test_a_table_of_another_model_is_not_sure(caption: str) -> None:
    text = "Loaf height was greater with rye than with wheat, t(34) = 3.23, p = .003 (Table 2)."
    found, _ = test_of(f"{text}\n{TABLE.replace('Outcomes by flour', caption)}")
    assert found.link_confidence == "medium"


def test_two_tests_of_one_row_are_not_sure_of_it() -> None:
    text = (
        "Loaf height was greater with rye than with wheat, t(34) = 3.23, p = .003 (Table 2). Bakers rested.\n\n"
        f"Loaf height differed between rye and wheat, t(34) = 2.23, p = .032 (Table 2).\n{TABLE}"
    )
    tests = [c for c in reading(text).claims if c.kind == "t-test"]
    assert [c.link_confidence for c in tests] == ["medium", "medium"]


def test_row_under_one_of_two_headings() -> None:
    assert test_of(f"Loaf height differed, t(34) = 3.23 (Table 2).\n{WEEKS}")[1] == []
    assert test_of(f"In week 4, loaf height differed, t(34) = 1.71 (Table 2).\n{WEEKS}")[1] == [
        "94.4",
        "91.0",
    ]


def test_groups_of_an_anova() -> None:
    found, means = test_of(f"Loaf height differed, F(2, 51) = 5.30, p = .008 (Table 3).\n{THREE}")
    assert means == ["92.4", "86.0", "88.1"]
    assert found.link_confidence == "high"


def test_two_of_three_groups_are_those_that_are_named() -> None:
    text = f"Loaf height was greater with rye than with spelt, t(34) = 2.13, p = .040 (Table 3).\n{THREE}"
    found, means = test_of(text)
    assert means == ["92.4", "88.1"] and found.link_confidence == "medium"
    assert test_of(f"Loaf height differed, t(34) = 2.13, p = .040 (Table 3).\n{THREE}")[1] == []


def test_a_column_of_everyone_is_no_group() -> None:
    assert test_of(f"Loaf height differed, t(34) = 3.23 (Table 4).\n{WITH_TOTAL}")[1] == ["92.4", "86.0"]


@pytest.mark.parametrize(
    ("sentence", "counts", "confidence"),
    [
        (
            "Burnt loaves were told of more often with rye, χ²(1) = 1.86, p = .173 (Table 1).",
            ["12", "6"],
            "medium",
        ),
        (
            "Burnt loaves did not differ between rye and wheat, χ²(1) = 1.86, p = .173 (Table 1).",
            ["12", "6"],
            "high",
        ),
        ("Burnt loaves did not differ between rye and wheat, χ²(3) = 1.86, p = .602 (Table 1).", [], "high"),
        ("Burnt loaves did not differ between rye and wheat, χ²(1) = 1.86, p = .173.", [], "high"),
    ],
)
def test_counts_of_the_row(sentence: str, counts: list[str], confidence: str) -> None:
    claims = reading(f"{sentence}\n{COUNTS}").claims
    (test,) = (c for c in claims if c.kind == "chi2-test")
    by_id = {claim.id: claim for claim in claims}
    assert [by_id[g].values["count"].text for g in test.groups] == counts
    assert test.link_confidence == confidence


def test_table_that_the_paragraph_names() -> None:
    text = f"Table 2 shows all outcomes. The bakers rested. Loaf height differed, t(34) = 3.23, p = .003.\n{TABLE}"
    found, means = test_of(text)
    assert means == ["92.4", "86.0"] and found.link_confidence == "medium"
    assert found.link is not None and "paragraph" in found.link


def test_all_groups_of_a_sentence_for_an_anova() -> None:
    text = "Rye (M = 5.0, SD = 1.1), spelt (M = 4.6, SD = 1.0) and wheat (M = 4.1, SD = 1.2) differed, F(2, 57) = 3.30, p = .044."
    found, means = test_of(text)
    assert means == ["5.0", "4.6", "4.1"]
    assert found.link == "the only 3 group summaries in the same sentence"
    other = text.replace("F(2, 57)", "F(3, 76)")
    assert test_of(other)[1] == []


def test_summaries_of_the_outcome_in_the_paragraph() -> None:
    text = (
        "Loaf height was greater in the rye group (M = 92.4, SD = 6.1) than in the wheat group (M = 86.0, SD = 5.8). "
        "Crumb softness was lower in the rye group (M = 4.2, SD = 1.1) than in the wheat group (M = 4.9, SD = 1.2). "
        "Loaf height differed between the rye group and the wheat group, t(34) = 3.23, p = .003."
    )
    found, means = test_of(text)
    assert means == ["92.4", "86.0"] and found.link_confidence == "medium"
    assert test_of(text.replace("Loaf height differed", "After a week, loaf height differed"))[1] == []


@pytest.mark.parametrize(
    ("sentence", "names"),
    [
        ("Loaf height was greater in the rye group (M = 5.0, SD = 1.6) than in the wheat group (M = 4.1, SD = 1.2).",
         [("Loaf height", "rye group"), ("Loaf height", "wheat group")]),
        ("Apprentices in the control group (M = 5.0, SD = 1.6, n = 34) baked more.", [(None, "control group")]),
        ("The bakers rested (M = 5.0, SD = 1.6).", [(None, None)]),
        ("We found a change (M = 5.0, SD = 1.6).", [(None, None)]),
        ("The three other groups (M = 5.0, SD = 1.6) did not.", [(None, None)]),
    ],
)  # fmt: skip
def test_names_of_summaries_without_a_table(
    sentence: str, names: list[tuple[str | None, str | None]]
) -> None:
    claims = [c for c in reading(sentence).claims if c.kind == "group-summary"]
    assert [(c.outcome, c.group) for c in claims] == names


@pytest.mark.parametrize(
    ("sentence", "groups"),
    [
        (
            "Loaf height was M = 92.4 (SD = 6.1) with rye and M = 86.0 (SD = 8.5) with wheat.",
            ["rye", "wheat"],
        ),
        (
            "Loaf height was M = 92.4, SD = 6.1 and M = 86.0, SD = 8.5 with rye and wheat, respectively.",
            [None, None],
        ),
        ("Loaf height with rye and wheat (M = 92.4, SD = 6.1; M = 86.0, SD = 8.5) differed.", [None, None]),
        ("Loaf height with rye + malt (M = 92.4, SD = 6.1) rose.", [None]),
        ("Compared to rye, loaf height was lower (M = 86.0, SD = 8.5).", [None]),
        ("The rye group scored lower (M = 86.0, SD = 8.5).", ["rye"]),
    ],
)
def test_groups_that_a_table_names(sentence: str, groups: list[str | None]) -> None:
    claims = [
        c for c in reading(f"{sentence}\n{TABLE}").claims if c.kind == "group-summary" and c.place.row is None
    ]
    assert [c.group for c in claims] == groups


@pytest.mark.parametrize(
    ("sentence", "outcomes"),
    [
        (
            "We found t(34) = 2.23 for loaf height and t(34) = 1.10 for crumb softness (Table 2).",
            ["loaf height", "crumb softness"],
        ),
        (
            "Loaf height differed (t(34) = 2.23), whereas crumb softness did not (t(34) = 1.10).",
            ["Loaf height", "crumb softness"],
        ),
        (
            "Loaf height (t(34) = 2.23), colour (t(34) = 1.40) and mass (t(34) = 1.10) differed.",
            ["Loaf height", None, None],
        ),
        (
            "Loaf height and crumb softness differed (t(34) = 2.23 and t(34) = 1.10, respectively).",
            [None, None],
        ),
    ],
)
def test_outcomes_of_several_tests(sentence: str, outcomes: list[str | None]) -> None:
    claims = [c for c in reading(f"{sentence}\n{TABLE}").claims if c.kind == "t-test"]
    assert [c.outcome for c in claims] == outcomes
