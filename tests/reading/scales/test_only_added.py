"""Scales only add to what is read: ids, numbers, words and order of the claims stay."""

from __future__ import annotations

from decimal import Decimal

import pytest

from recheck.model import Claim, Document, Passage
from recheck.reading import read, reader
from tests.reading.passages import cases, document
from tests.reading.scales.cases import WORDS, scale_cases

ADDED = {"scale_min", "scale_max", "items_per_score"}


def plain(claim: Claim) -> tuple[object, ...]:
    """A claim without what scales may add."""
    values = tuple((name, value) for name, value in claim.values.items() if name not in ADDED)
    stated = tuple(word for word in claim.stated if word not in WORDS)
    return claim.id, claim.kind, values, stated, claim.groups, claim.outcome, claim.group, claim.confidence


@pytest.fixture
def unscaled(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(reader, "_scaled", lambda placed, claims, *more: (claims, ()))


def documents() -> list[Document]:
    return [*(document(case.text) for case in cases()), *(case.document for case in scale_cases())]


@pytest.fixture(scope="module")
def scaled() -> list[list[tuple[object, ...]]]:
    return [[plain(claim) for claim in read(one).claims] for one in documents()]


def test_nothing_else_changes(scaled: list[list[tuple[object, ...]]], unscaled: None) -> None:
    assert scaled == [[plain(claim) for claim in read(one).claims] for one in documents()]


def test_ends_have_their_printed_text_and_items_their_word() -> None:
    text = "Trust was rated from −2 (low) to +2 (high), averaged across the five items (M = 0.41, SD = 0.90)."
    (claim,) = read(Document("d", "text", "", (Passage(text=text),))).claims
    ends = {name: (claim.values[name].text, claim.values[name].value) for name in sorted(ADDED)}
    assert ends == {
        "items_per_score": ("five", Decimal(5)),
        "scale_max": ("+2", Decimal(2)),
        "scale_min": ("−2", Decimal(-2)),
    }


def test_the_words_that_tell_the_scale_are_quoted() -> None:
    text = "Sourness was rated on a 7-point scale (1 = none, 7 = strong). Sourness was 4.41 (SD = 0.90)."
    (claim,) = read(Document("d", "text", "", (Passage(text=text),))).claims
    assert "scale: “7-point scale (1 = none, 7 = strong)”" in claim.notes
