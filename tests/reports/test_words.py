from decimal import Decimal
from typing import get_args

import pytest

from recheck.model import VERDICTS, ClaimKind, Implied, Place, Printed
from recheck.model.figures import printed_text, whereabouts
from recheck.reports.words import KINDS, MEANING, counted, implied_range, listed


def test_every_verdict_and_every_kind_has_its_words():
    assert tuple(MEANING) == VERDICTS
    assert set(KINDS) == set(get_args(ClaimKind))


@pytest.mark.parametrize(
    ("place", "words"),
    [
        (Place("q", page=4, section="Results", paragraph=7), "page 4, section “Results”"),
        (Place("q", line=12), "line 12"),
        (Place("q", paragraph=3), "paragraph 3"),
        (
            Place("q", page=2, table="Table 1", row="Height", column="p"),
            "page 2, Table 1, row “Height”, column “p”",
        ),
        (Place("q", table="2"), "table 2"),
        (Place("q", table="Tab. S.1"), "Tab. S.1"),
        (Place("q", table="unlabelled table 2", row="Crumb"), "unlabelled table 2, row “Crumb”"),
        (
            Place("q", table="Table 3", column="Adjusted | OR; Adjusted | 95% CI; Adjusted | p"),
            "Table 3, columns “OR”, “95% CI”, “p” under “Adjusted”",
        ),
        (
            Place("q", table="Table 3", column="Rye | n; Rye | Mean; SD"),
            "Table 3, columns “Rye | n”, “Rye | Mean”, “SD”",
        ),
        (Place("q", column="t(48); p"), "columns “t(48)”, “p”"),
        (Place("q"), "place unknown"),
    ],
)
def test_places_in_words(place, words):
    assert whereabouts(place) == words


@pytest.mark.parametrize(
    ("text", "words"),
    [("**", "< 0.01 (**)"), ("significant", "significant (< 0.01)"), (".003", "< .003")],
)
def test_printed_numbers_in_words(text, words):
    assert printed_text(Printed(text, Decimal("0.003" if text == ".003" else "0.01"), 2, "<")) == words


@pytest.mark.parametrize(
    ("numbers", "words"),
    [
        ((12,), "12"),
        ((12, 14), "12 or 14"),
        ((12, 13, 14, 15), "12 to 15 (whole numbers)"),
        (tuple(range(10, 40, 3)), "10, 13, 16, 19, 22, 25 … 37 (10 whole numbers)"),
    ],
)
def test_whole_numbers_in_words(numbers, words):
    assert implied_range(Implied(numbers[0], numbers[-1], integers=numbers)) == words


def test_counts_and_lists():
    assert counted(1, "test", "tests") == "1 test"
    assert counted(4210, "word", "words") == "4,210 words"
    assert [listed("a"), listed("ab"), listed("abc", last="or"), listed("")] == [
        "a",
        "a and b",
        "a, b or c",
        "",
    ]
