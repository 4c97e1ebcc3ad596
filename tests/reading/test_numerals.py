"""Numbers as manuscripts print them. Conventions are common practice; no source."""

from __future__ import annotations

from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st

from recheck.reading.numerals import printed

READ = [
    # text, value, decimals, relation, the number's own text
    ("−.27", "-0.27", 2, "=", "−.27"),
    ("–0.10", "-0.10", 2, "=", "–0.10"),
    ("- 0.10", "-0.10", 2, "=", "- 0.10"),
    ("+2.5", "2.5", 1, "=", "+2.5"),
    ("< .001", "0.001", 3, "<", ".001"),
    ("= < 0.001", "0.001", 3, "<", "0.001"),
    ("<= .05", "0.05", 2, "≤", ".05"),
    ("⩽ .05", "0.05", 2, "≤", ".05"),
    ("≈ 5", "5", 0, "≈", "5"),
    ("~0.5", "0.5", 1, "≈", "0.5"),
    ("less than .05", "0.05", 2, "<", ".05"),
    (".000", "0.000", 3, "=", ".000"),
    ("4.30", "4.30", 2, "=", "4.30"),
    ("0·001", "0.001", 3, "=", "0·001"),
    (",030", "0.030", 3, "=", ",030"),
    ("2,31", "2.31", 2, "=", "2,31"),
    ("0,031", "0.031", 3, "=", "0,031"),
    ("1,234", "1234", 0, "=", "1,234"),
    ("1,234.5", "1234.5", 1, "=", "1,234.5"),
    ("1.234,5", "1234.5", 1, "=", "1.234,5"),
    ("1,234,567", "1234567", 0, "=", "1,234,567"),
    ("24, 325.26", "24325.26", 2, "=", "24, 325.26"),
    ("1 234", "1234", 0, "=", "1 234"),
    ("1\u2009252.61", "1252.61", 2, "=", "1 252.61"),
    ("1.2 × 10−5", "0.000012", 6, "=", "1.2 × 10−5"),
    ("1.2 × 10⁻⁵", "0.000012", 6, "=", "1.2 × 10⁻⁵"),
    ("1.2x10^-5", "0.000012", 6, "=", "1.2x10^-5"),
    ("1.2·10−5", "0.000012", 6, "=", "1.2·10−5"),
    ("1.2e-5", "0.000012", 6, "=", "1.2e-5"),
    ("1.2E−05", "0.000012", 6, "=", "1.2E−05"),
    ("3 × 10³", "3000", -3, "=", "3 × 10³"),
    ("10⁻⁵", "0.00001", 5, "=", "10⁻⁵"),
    ("7,152¹", "7152", 0, "=", "7,152"),
    (".03*", "0.03", 2, "=", ".03"),
    ("12%", "12", 0, "=", "12"),
    ("𝟎.𝟓", "0.5", 1, "=", "𝟎.𝟓"),
]


@pytest.mark.parametrize(("text", "value", "decimals", "relation", "own"), READ)
def test_number_is_read(text: str, value: str, decimals: int, relation: str, own: str) -> None:
    number = printed(text)
    assert number is not None
    assert (number.value, number.decimals, number.relation, number.text) == (
        Decimal(value), decimals, relation, own,
    )  # fmt: skip


@pytest.mark.parametrize(
    "text", ["", "p", "ns", "3.4.5", "1,23,4", "5 6", "–", "a 5", "5 to 6", "1.2.2024", "v2"]
)
def test_other_texts_are_no_number(text: str) -> None:
    assert printed(text) is None


def test_percent_keeps_its_own_decimals() -> None:
    number = printed("12.50%")
    assert number is not None and number.percent and number.decimals == 2


@given(st.decimals(-9999, 9999, places=3), st.sampled_from(["", "= ", "< ", "> "]), st.sampled_from("-−–"))
def test_what_is_written_is_read_back(value: Decimal, relation: str, minus: str) -> None:
    text = relation + f"{value:.3f}".replace("-", minus)
    number = printed(text)
    assert number is not None and number.value == value and number.decimals == 3


@given(st.text(alphabet="0123456789.,·-−+ eE×x^%()=<>⁻⁵*", max_size=40))
def test_no_text_breaks_the_reader(text: str) -> None:
    number = printed(text)
    assert number is None or number.value.is_finite()
