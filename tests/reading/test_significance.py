"""A p that is told in words alone."""

from __future__ import annotations

import pytest

from recheck.model import Claim, Document, Passage
from recheck.reading import read


def read_claim(*texts: str) -> Claim:
    passages = tuple(Passage(text=text) for text in texts)
    found = read(Document(name="d", format="text", sha256="", passages=passages)).claims
    return next(claim for claim in found if claim.kind != "group-summary")


@pytest.mark.parametrize(
    ("text", "relation"),
    [
        ("The loaves differed significantly, t(28) = 2.20.", "<"),
        ("The effect of steam, F(1, 28) = 4.90, was significant.", "<"),
        ("The loaves did not rise, but differed significantly, t(28) = 2.20.", "<"),
        ("The loaves did not differ significantly, t(28) = 1.20.", ">"),
        ("There was no significant difference between rye and wheat, t(28) = 1.20.", ">"),
        ("The difference was non-significant (t(28) = 1.20).", ">"),
        ("The correlation failed to reach significance, r(28) = .10.", ">"),
    ],
)
def test_one_word_tells_of_one_test(text: str, relation: str) -> None:
    claim = read_claim(text)
    assert claim.values["p"].relation == relation and claim.values["p"].number == 0.05
    assert claim.confidence == "high" and "p is told in words" in claim.notes


@pytest.mark.parametrize(
    "text",
    [
        "The effect was significant for rye, t(28) = 2.20, but not significant for wheat.",
        "Rye was marginally significant, t(28) = 1.80.",
        "Following the significant interaction, rye did not exceed wheat, t(28) = 1.20.",
        "The change was clinically significant, t(28) = 1.20.",
        "Rye and wheat differed significantly, t(28) = 2.20, t(30) = 2.40.",
        "Loaves rose, t(28) = 1.20.",
        "Although rye did not rise significantly in one week, it did after six, t(28) = 2.90.",
        "The difference between loaves, which were not significantly older, was large, t(28) = 3.30.",
    ],
)
def test_other_words_tell_nothing(text: str) -> None:
    assert "p" not in read_claim(text).values


def test_a_printed_p_stands() -> None:
    assert read_claim("The loaves differed significantly, t(28) = 2.20, p = .036.").values["p"].text == ".036"


def test_the_level_of_the_document_counts() -> None:
    claim = read_claim("The significance level was .01.", "The loaves differed significantly, t(28) = 2.90.")
    assert claim.values["p"].number == 0.01
