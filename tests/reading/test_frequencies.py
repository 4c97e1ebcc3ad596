"""Counts with percentages, medians with quartiles, and results that are told together."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.model import Claim, Document, Passage
from recheck.reading import read

SPELLINGS = (
    "{k} of {n} loaves ({p}%) split.",
    "{k} of the {n} loaves that were left over night ({p}%) split.",
    "Splits were seen in {p}% ({k}/{n}) of the loaves.",
    "Splits ({k}/{n}, {p}%) were rare.",
    "Splits were rare ({p}%; {k} of {n}), t(38) = 2.10, p = .042.",
    "Loaves split in {k}/{n} ({p} %) trials.",
)


def claims(*texts: str) -> tuple[Claim, ...]:
    passages = tuple(Passage(text=text) for text in texts)
    return read(Document(name="d", format="text", sha256="", passages=passages)).claims


@settings(max_examples=60, deadline=None)
@given(
    n=st.integers(6, 950),
    share=st.floats(0, 1),
    decimals=st.integers(0, 2),
    spelling=st.sampled_from(SPELLINGS),
)
def test_a_count_is_read_as_it_is_printed(n: int, share: float, decimals: int, spelling: str) -> None:
    k = round(n * share)
    percent = f"{100 * k / n:.{decimals}f}"
    found = [c for c in claims(spelling.format(k=k, n=n, p=percent)) if c.kind == "count"]
    assert len(found) == 1 and found[0].confidence == "high"
    values = {name: value.text for name, value in found[0].values.items()}
    assert values == {"count": str(k), "total": str(n), "percent": percent}
    assert found[0].values["percent"].percent and not found[0].values["count"].percent


@pytest.mark.parametrize(
    "text",
    [
        "Of the 34 loaves, 12 (35%) split.",
        "There were 12 (35%) of 34 loaves.",
        "About 12 of 34 loaves (35%) split.",
        "By the model's estimate 12 of 34 loaves (38%) split.",
        "The weighted share was 12 of 34 (38%).",
    ],
)
def test_a_percentage_that_may_be_of_another_whole_is_doubted(text: str) -> None:
    (claim,) = claims(text)
    assert claim.kind == "count" and claim.values["total"].text == "34" and claim.confidence == "medium"


def test_unlabelled_brackets_behind_a_median_are_doubted_unless_the_document_says_what_they_hold() -> None:
    text = "The median was 4.2 [3.1, 5.6]."
    (alone,) = claims(text)
    assert alone.confidence == "medium" and set(alone.values) == {"median", "q1", "q3"} and alone.notes
    (told,) = claims("Data are median (IQR).", text)
    assert told.confidence == "high" and set(told.values) == {"median", "q1", "q3"}
    (ranged,) = claims("Data are median (range).", text)
    assert set(ranged.values) == {"median", "min", "max"}


def test_results_told_together_keep_their_order_and_are_doubted() -> None:
    first, second = claims("Both rose, t(38) = 2.10 and 3.40, p = .042 and .002, respectively.")
    assert [c.values["t"].text + " " + c.values["p"].text for c in (first, second)] == [
        "2.10 .042",
        "3.40 .002",
    ]
    assert first.confidence == second.confidence == "medium" and first.id != second.id


def test_an_f_of_a_document_with_permutational_analyses_may_be_one() -> None:
    (plain,) = claims("Yeasts differed, F(1, 22) = 3.4, p = .012.")
    assert not plain.suggests("permutation")
    (other,) = claims("Yeasts were compared by PERMANOVA.", "They differed, F(1, 22) = 3.4, p = .012.")
    assert other.suggests("permutation")
