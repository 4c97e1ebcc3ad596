"""Expressions that tell a scale, and near misses."""

from __future__ import annotations

import pytest

from recheck.reading.scales.pieces import pieces_of, value_of


def told(text: str) -> list[str]:
    """Lowest and highest value, and points, of each expression of a text."""
    spans = [(p.low, p.high, p.points) for p in pieces_of(text)]
    return ["/".join(text[slice(*span)] if span else "" for span in three) for three in spans]


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("on a 7-point scale", "//7"),
        ("on a seven-point Likert-type scale", "//seven"),
        ("on a 5 point response format", "//5"),
        ("on a 7-point scale ranging from 0 (never) to 6 (every day)", "0/6/7"),
        ("on an 11-point numeric rating scale (0 = none, 10 = worst)", "0/10/11"),
        ("rated from 1 (poor) to 5 (excellent)", "1/5/"),
        ("scored between 0 and 4", "0/4/"),
        ("on a scale of 1-10", "1/10/"),
        ("a 0-10 numeric rating scale", "0/10/"),
        ("scores range from 0 to 21", "0/21/"),
        ("(possible range 0-63)", "0/63/"),
        ("(theoretical range: 10 to 40)", "10/40/"),
        ("total scores can vary from 0 to 27", "0/27/"),
        ("a 100-mm visual analogue scale", "/100/"),
        ("a visual analogue scale (0-100)", "0/100/"),
        ("(1 = poor, 7 = good)", "1/7/"),
        ("(1: poor, 7: good)", "1/7/"),
        ("1 = raw, 2 = underdone, 3 = done, 4 = burnt", "1/4/"),
        ('from "not at all" (1) to "very much" (7)', "1/7/"),
        ("where 1 means weak and 9 means strong", "1/9/"),
        ("out of 20.", "/20/"),
        ("a maximum score of 30 points", "/30/"),
    ],
)
def test_expression_is_read(text: str, expected: str) -> None:
    assert told(f"Sourness was told {text}") == [expected]


@pytest.mark.parametrize(
    "text",
    [
        "Ages ranged from 18 to 65.",
        "Scores ranged from 2 to 9 in our sample.",
        "Loaves rose from 4 to 9 cm.",
        "A rise of 3 points was seen.",
        "A 2-point increase was seen.",
        "F1 scores range from 65.6% to 76.2%.",
        "Height was 4.1 (SD = 0.5), t(18) = 2.31, p = .033.",
        "See Table 1 and Figure 7 for the scale.",
        "Bakers worked from 4 to 9 in the morning.",
        "On days 1 to 7 the loaves were weighed.",
        "We rated (1) rye and (2) wheat.",
        "The correlation ranged from 0 to 1.",
        "Between 1 and 7 loaves were sold at large scale.",
        "Three out of four bakers agreed.",
        "Bench scores rose from 4.1 (SD = 1.0, n = 18) to 5.2 (SD = 1.1, n = 18).",
        "Bench scores fell from 12 (IQR 9–15) to 8 (IQR 5–11).",
        "Softness ratings went from 3 (SE 0.2) to 4 (SE 0.3).",
    ],
)
def test_near_miss_tells_nothing(text: str) -> None:
    assert told(text) == []


def test_numbers_in_words() -> None:
    assert [int(value_of(word)) for word in ("seven", "Ten", "-3", "+3", "20")] == [7, 10, -3, 3, 20]
    with pytest.raises(ValueError, match="many"):
        value_of("many")
