"""What the reader of a manuscript says of its scores."""

from __future__ import annotations

import pytest

from recheck.model import SCORES_ASKED, Document, Passage, Reading
from recheck.reading import read
from recheck.reading.scales import score_rule
from tests.reading.scales.cases import given

TEXT = (
    "Crumb score was higher after training (M = 5.12, SD = 1.20, n = 24). "
    "Sourness was rated from 1 to 9 and did not change (M = 3.41, SD = 0.90, n = 22)."
)


def reading(*rules: str) -> Reading:
    document = Document(name="d", format="text", sha256="", passages=(Passage(text=TEXT),))
    return read(document, tuple(score_rule(rule) for rule in rules))


@pytest.mark.parametrize(
    ("rule", "crumb", "sourness"),
    [
        ("crumb score: 1..7", "1..7 whole", "1..9 whole"),
        ("Crumb: 1-7", "1..7 whole", "1..9 whole"),
        ("crumb scores: 1 to 7", "1..7 whole", "1..9 whole"),
        ("crumb: 0..10, 5 items", "0..10 whole averaged items=5", "1..9 whole"),
        ("crumb: 1..7, 1 item", "1..7 whole single", "1..9 whole"),
        ("crumb: 0..100, not whole", "0..100", "1..9 whole"),
        ("crumb: whole", "whole", "1..9 whole"),
        ("crumb: -3..3", "-3..3 whole", "1..9 whole"),
        ("*: whole", "whole", "whole"),
        ("sourness: 0..10, not whole", "", "0..10"),
    ],
)
def test_what_is_said_replaces_what_is_read(rule: str, crumb: str, sourness: str) -> None:
    one, two = reading(rule).claims
    assert (given(one), given(two)) == (frozenset(crumb.split()), frozenset(sourness.split()))


def test_the_rule_is_noted_on_its_summary() -> None:
    one, two = reading("crumb score: 1..7").claims
    assert SCORES_ASKED in one.notes and SCORES_ASKED not in two.notes


def test_a_name_wins_over_all() -> None:
    one, two = reading("*: whole", "crumb: 1..7").claims
    assert given(one) == {"1..7", "whole"} and given(two) == {"whole"}


def test_a_name_that_is_nowhere_is_told() -> None:
    assert any("aroma: 0..9" in note for note in reading("aroma: 0..9").notes)
    assert not reading("crumb: 1..7").notes


@pytest.mark.parametrize(
    ("rule", "told"),
    [
        ("crumb", "does not say"),
        ("crumb:", "does not say"),
        (": 1..7", "does not say"),
        ("", "does not say"),
        ("crumb: 7..1", "above the lowest"),
        ("crumb: 1..1", "above the lowest"),
        ("crumb: 1..7, 0 items", "1 or more"),
        ("crumb: often", "says nothing of scores"),
        ("crumb: 1..7, 2..9", "again"),
        ("crumb: not whole, 3 items", "not whole"),
    ],
)
def test_what_cannot_be_understood_is_told_in_one_sentence(rule: str, told: str) -> None:
    with pytest.raises(ValueError, match=told) as caught:
        score_rule(rule)
    assert "\n" not in str(caught.value) and str(caught.value).endswith(".")
