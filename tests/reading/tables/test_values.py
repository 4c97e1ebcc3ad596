"""What single cells print."""

from __future__ import annotations

import pytest

from recheck.model import Cell, Passage
from recheck.reading.tables.slots import Slot, slot_view
from recheck.reading.tables.values import decimal_comma_of, pieces


def read(text: str, comma: bool = False, marks: str = "") -> list[tuple[str, list[float]]]:
    passage = Passage(text=text, kind="table", marks=marks)
    slot = Slot(Cell(passage, 0, 0), slot_view(passage), 0, 0)
    return [(piece.shape, [float(n.value) for n in piece.numbers]) for piece in pieces(slot, comma)]


@pytest.mark.parametrize(
    ("text", "shape", "numbers"),
    [
        ("11.2", "number", [11.2]),
        ("−.24", "number", [-0.24]),
        ("3·4", "number", [3.4]),
        ("1,412", "number", [1412]),
        ("24 325", "number", [24325]),
        ("11.2 (1.3)", "pair(", [11.2, 1.3]),
        ("11.2 [1.3]", "pair[", [11.2, 1.3]),
        ("11.2 ± 1.3", "pair±", [11.2, 1.3]),
        ("11.2 +/- 1.3", "pair±", [11.2, 1.3]),
        ("11.2 (± 1.3)", "pair±", [11.2, 1.3]),
        ("11.2 ± 1.3 (24)", "pair±(", [11.2, 1.3, 24]),
        ("112 ± 4 (98–130)", "pair±-", [112, 4, 98, 130]),
        ("12 (34%)", "count%", [12, 34]),
        ("6,280 (69%)", "count%", [6280, 69]),
        ("55/926", "fraction", [55, 926]),
        ("55/926 (5.9%)", "fraction%", [55, 926, 5.9]),
        ("12 of 34 (35%)", "fraction%", [12, 34, 35]),
        ("1.2–1.9", "interval", [1.2, 1.9]),
        ("(0.9 to 1.7)", "interval", [0.9, 1.7]),
        ("−3.72 to −1.21", "interval", [-3.72, -1.21]),
        ("0.79, 1.55", "interval", [0.79, 1.55]),
        ("0.73 [0.54, 0.92]", "triple", [0.73, 0.54, 0.92]),
        ("0.46(0.40,0.52)*", "triple", [0.46, 0.40, 0.52]),
        ("39 (25; 56)", "triple", [39, 25, 56]),
        ("5 (12,25)", "triple", [5, 12, 25]),
        ("< .001", "p", [0.001]),
        ("ns", "p", []),
        ("–", "dash", []),
        ("NA", "dash", []),
        ("1.0 (reference)", "reference", [1]),
        ("2F/6M", "unread", []),
        ("17±5±2", "unread", []),
        ("No loaves", "words", []),
        ("t(31) = 2.10, p = .044", "result", []),
        ("OR 1.5 (95% CI 1.2–1.9)", "result", []),
    ],
)
def test_shapes(text: str, shape: str, numbers: list[float]) -> None:
    assert read(text) == [(shape, numbers)]


def test_decimal_commas() -> None:
    assert read("8,1 (7,3–9,8)", comma=True) == [("triple", [8.1, 7.3, 9.8])]
    assert read("1.234,5 (12,3)", comma=True) == [("pair(", [1234.5, 12.3])]
    assert decimal_comma_of(["8,1", "7,25", "12"], default=False)
    assert not decimal_comma_of(["8.1", "1,412", "0.5"], default=True)
    assert decimal_comma_of(["8", "12"], default=True)


def test_several_values_in_a_cell() -> None:
    assert read("62 ± 12\n57 (43–84)") == [("pair±", [62, 12]), ("triple", [57, 43, 84])]
    assert read("10 (67%) (41%–85%)") == [("count%", [10, 67]), ("interval", [41, 85])]


def test_units_and_footnotes_are_no_part_of_a_number() -> None:
    assert read("37.3 years (11.5)") == [("pair(", [37.3, 11.5])]
    assert read("116 loaves/m3 (IQR: 54–189)") == [("triple", [116, 54, 189])]
    assert read("12.3a,b") == [("number", [12.3])]
    assert read("58b", marks="  ^") == [("number", [58])]
    assert read("7,1521", marks="     ^") == [("number", [7152])]


def test_marks_words_in_brackets_and_sizes_are_kept() -> None:
    def piece(text: str):  # type: ignore[no-untyped-def]
        passage = Passage(text=text, kind="table")
        return pieces(Slot(Cell(passage, 0, 0), slot_view(passage), 0, 0), False)[0]

    assert piece(".52**").stars == "**" and piece("1.05 (0.01) *†").stars == "*†"
    assert piece("37.9 (range: 18.7–72.5)").label == "range" and piece("5.1 (SD 1.2)").label == "sd"
    assert piece("−0.08/day ± 0.06").label == "per"
    sized = piece("11.42 (1.31); n = 24")
    assert sized.n is not None and sized.n.value == 24 and sized.shape == "pair("
