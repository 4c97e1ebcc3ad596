"""Clauses of a sentence, their subjects, and the phrases before brackets."""

from __future__ import annotations

import pytest

from recheck.reading.clauses import clauses, names_a_group, phrase_before, subject_of


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("Loaf height differed, whereas softness did not.", ["Loaf height differed, whereas", " softness did not."]),
        ("Height (t(34) = 2.2; p = .03) differed; softness did not.", ["Height (t(34) = 2.2; p = .03) differed;", " softness did not."]),
        ("Height (t(34) = 2.2) and softness (t(34) = 1.1) differed.", ["Height (t(34) = 2.2) and", " softness (t(34) = 1.1) differed."]),
        ("Rye and wheat differed.", ["Rye and wheat differed."]),
    ],
)  # fmt: skip
def test_clauses(text: str, parts: list[str]) -> None:
    assert [text[a:b] for a, b in clauses(text)] == parts


@pytest.mark.parametrize(
    ("clause", "subject"),
    [
        ("Loaf height was greater with rye", "Loaf height"),
        ("The mean loaf height was 92.4", "loaf height"),
        ("After a week, loaf height differed", "loaf height"),
        ("crumb softness did not", "crumb softness"),
        ("Tasting scores were higher", "Tasting scores"),
        ("Rye loaves were taller", None),
        ("Rye loaves were higher", None),
        ("Rye differed from wheat", None),
        ("The groups differed", None),
        ("We found that loaves were higher", None),
        ("There was a difference", None),
        ("Height and softness were lower", None),
        ("The change was larger", None),
    ],
)
def test_subject(clause: str, subject: str | None) -> None:
    assert subject_of(clause) == subject


@pytest.mark.parametrize(
    ("text", "phrase"),
    [
        ("higher in the rye group (M", ("rye group", "in")),
        ("than rye (M", ("rye", "than")),
        ("The rye group (M", ("rye group", "")),
        ("one two three four five six (M", ("", "")),
        ("no bracket M", ("", "")),
    ],
)
def test_phrase_before_a_bracket(text: str, phrase: tuple[str, str]) -> None:
    assert phrase_before(text, len(text) - 1) == phrase


@pytest.mark.parametrize(
    ("phrase", "group"),
    [("rye group", True), ("trained apprentices", True), ("apprentices", False), ("34 apprentices", False), ("three other groups", False), ("loaf height", False)],
)  # fmt: skip
def test_names_of_groups(phrase: str, group: bool) -> None:
    assert names_a_group(phrase) is group
