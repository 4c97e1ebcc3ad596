"""Tests of the text and a table of one outcome, which its caption alone names."""

from __future__ import annotations

import pytest

from recheck.documents import text_document
from recheck.reading import read

TABLE = """
Table 2. Firmness of the crumb by storage

| Storage | n | M | SD |
|---|---|---|---|
| Cold | 20 | 5.2 | 1.0 |
| Room | 19 | 5.6 | 1.1 |
| Warm | 20 | 6.4 | 0.9 |
| Total | 59 | 5.7 | 1.1 |
"""
FITS = "A one-way ANOVA on firmness was significant, F(2, 56) = 7.42, p = .001."


def means(text: str) -> list[list[str]]:
    """The means that each test of a text is linked to."""
    claims = read(text_document(text, name="loaves.md")).claims
    told = {claim.id: claim.values["mean"].text for claim in claims if claim.kind == "group-summary"}
    return [[told[group] for group in claim.groups] for claim in claims if claim.kind in ("F-test", "t-test")]


@pytest.mark.parametrize("text", [FITS + "\n" + TABLE, TABLE + "\n" + FITS])
def test_rows_of_the_table_whose_caption_names_the_outcome(text: str) -> None:
    assert means(text) == [["5.2", "5.6", "6.4"]]


@pytest.mark.parametrize(
    "sentence",
    [
        "A one-way ANOVA on colour was significant, F(2, 56) = 7.42, p = .001.",
        "A one-way ANOVA on firmness was significant, F(2, 50) = 7.42, p = .001.",
        "After week 4 firmness differed, F(2, 56) = 7.42, p = .001.",
        "Firmness rose in each group, F(3, 56) = 7.42, p < .001.",
    ],
)
def test_another_result_gets_none(sentence: str) -> None:
    assert means(f"{sentence}\n{TABLE}") == [[]]


def test_two_tests_that_fit_get_none() -> None:
    again = "Firmness differed between ovens too, F(2, 56) = 3.31, p = .044."
    assert means(f"{FITS} {again}\n{TABLE}") == [[], []]


def test_two_tables_that_fit_give_none() -> None:
    assert means(FITS + "\n" + TABLE + "\n" + TABLE.replace("Table 2", "Table 3").replace("5.6", "5.8")) == [
        []
    ]
