"""What was not read, in plain sentences."""

from __future__ import annotations

from recheck.reading.notes import LEFT_OUT, TOO_LONG, notes_of
from recheck.reading.traps import _TRAPS


def test_each_reason_has_its_words() -> None:
    assert set(_TRAPS) == set(LEFT_OUT)


def test_one_sentence_each_with_right_plurals() -> None:
    notes = notes_of(("references", "aside", "table", "table"), {"level": 1, "other study": 2, TOO_LONG: 1})
    assert notes == (
        "Not read for results: the text of tables, the references.",
        "Left out as no single results of this study: 1 level of significance, 2 results of other studies.",
        "Took too long to read: 1 paragraph.",
    )


def test_nothing_is_said_where_all_was_read() -> None:
    assert notes_of(("aside",), {}) == ()
