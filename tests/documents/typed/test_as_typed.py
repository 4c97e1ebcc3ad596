"""Plain text as it is typed or exported: numbered lines, wide spacing, columns abreast."""

from __future__ import annotations

import textwrap

import pytest

from recheck.documents import text_document
from recheck.documents.typed.abreast import stretches
from recheck.documents.typed.as_typed import HELD, as_typed
from tests.documents.pdf.making import PROSE

RESULT = "The trained bench baked higher loaves than before, t(40) = 2.95, p = .005, on nearly all days."
LINES = textwrap.wrap(f"{PROSE} {RESULT} {PROSE}", 46)


def whole(text):
    return " ".join(" ".join(passage.text.split()) for passage in text_document(text).passages)


def test_line_numbers_are_set_aside():
    numbered = "\n".join(f"{number:>4} {line}" for number, line in enumerate(LINES, start=7))
    assert RESULT in whole(numbered)
    assert " 9 " not in whole(numbered)


@pytest.mark.parametrize(
    "text",
    [
        "\n".join(f"{n} 4.{n} 5.{n}" for n in range(1, 12)),
        "\n".join(f"{year} saw another harvest of rye and spelt" for year in (1990, 1994, 2003, 2004, 2011, 2012)),
        "3 loaves rose and the others fell.\n4 of them were rye loaves.",
    ],
)  # fmt: skip
def test_numbers_that_number_no_lines_stay(text):
    assert as_typed(text.split("\n")) == text.split("\n")


def test_blank_lines_after_every_line_part_nothing():
    passages = text_document("\n\n".join(LINES)).passages
    found = next(passage for passage in passages if RESULT in " ".join(passage.text.split()))
    start = found.text.index("t(40)")
    wanted = next(at for at, line in enumerate(LINES) if "t(40)" in line)
    assert found.place(start, start + 5).line == 2 * wanted + 1
    assert HELD not in found.text


def test_short_paragraphs_stay_apart():
    text = "\n\n".join(f"On day {day} the loaves of the bench rose." for day in "abcdefghij")
    assert len(text_document(text).passages) == 10


def test_columns_abreast_are_read_one_after_the_other():
    other = textwrap.wrap(PROSE, 40)[: len(LINES)]
    rows = [f"{left:<52}{right}" for left, right in zip(LINES, other, strict=False)]
    text = "Bench scores\n\n" + "\n".join(rows) + "\n" + "\n".join(LINES[len(rows) :])
    parts = [part.first for part in stretches(text.split("\n"))]
    assert parts[:3] == [0, 2, 2]
    assert RESULT[:60] in whole(text).replace("- ", "-")
    assert " ".join(other) in whole(text)


def test_a_table_of_two_columns_is_left_alone():
    rows = [f"loaf {letter:<10}{number}.5" for number, letter in enumerate("abcdefghijkl")]
    assert [part.lines for part in stretches(rows)] == [rows]
