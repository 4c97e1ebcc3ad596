"""What headings say that numbers are, and which numbers they fit."""

from __future__ import annotations

import pytest

from recheck.model import Cell, Passage
from recheck.reading.tables.grid import Header
from recheck.reading.tables.legend import Legend
from recheck.reading.tables.roles import column_roles, group_of, matched, role_of
from recheck.reading.tables.slots import Slot, slot_view
from recheck.reading.tables.values import Piece, pieces
from tests.reading.tables.drawn import frame, sheet


def piece(text: str) -> Piece:
    passage = Passage(text=text, kind="table")
    return pieces(Slot(Cell(passage, 0, 0), slot_view(passage), 0, 0), False)[0]


@pytest.mark.parametrize(
    ("path", "quantities", "group"),
    [
        (("Rye (n = 24)", "Mean (SD)"), ("mean", "sd"), "Rye"),
        (("Odds ratio (SE)", "Burnt crust"), ("or", "se"), "Burnt crust"),
        (("95% CI", "Lower"), ("ci_low",), None),
        (("Rye", "95% CI", "High"), ("ci_high",), "Rye"),
        (("Group difference", "Mean"), ("mean_difference",), None),
        (("Rye", "n = 24", "n (%)"), ("count", "percent"), "Rye"),
    ],
)
def test_roles_of_headings(path: tuple[str, ...], quantities: tuple[str, ...], group: str | None) -> None:
    role = role_of(Header(path), Legend())
    assert role is not None
    assert role.quantities == quantities
    assert role.group == group


def test_low_and_high_are_groups_where_no_interval_stands_over_them() -> None:
    assert role_of(Header(("Hydration", "Low")), Legend()) is None


def test_letters_that_the_notes_explain_otherwise() -> None:
    header = Header(("SE (min)",))
    assert role_of(header, Legend()) is not None
    assert role_of(header, Legend(abbreviations={"SE": "shaping effort"})) is None


def test_groups_have_their_name_and_size() -> None:
    group = group_of(Header(("Rye (n = 24)", "Mean (SD)")), Legend())
    assert group.name == "Rye" and group.n is not None and group.n.value == 24
    assert group_of(Header(("Rye",)), Legend()).n is None


def test_letters_that_only_number_the_columns() -> None:
    found = sheet("| Basin | A | B | C | D | E | F |\n| Salt | 1.2 | 1.4 | 1.1 | 1.0 | 1.7 | 1.3 |")
    assert column_roles(found, Legend()) == {}
    sexes = sheet("| Trait | M | F |\n| Height | 11.2 | 10.4 |")
    assert column_roles(sexes, Legend()) == {}
    tested = sheet("| Trait | M | SD | F | p |\n| Height | 11.2 | 1.4 | 5.1 | .031 |")
    assert sorted(column_roles(tested, Legend())) == [1, 2, 3, 4]


def test_a_letter_beside_other_letters_may_still_be_a_statistic() -> None:
    found = sheet("| Trait | A | Control | F | p |\n| Height | 11.2 | 10.1 | 5.1 | .031 |")
    assert sorted(column_roles(found, Legend())) == [3, 4]


def test_letters_of_rows_are_names_where_no_row_is_a_quantity() -> None:
    assert frame("| Group | M | SD |\n| Low salt | 5.1 | 1.1 |\n| B | 4.4 | 0.9 |").labels(2)[0].name == "B"
    assert frame("| Statistic | Rye |\n| M | 5.1 |\n| SD | 1.1 |").labels(1)[0].quantities == ("mean",)


def test_p_of_exact_tests_under_the_name_of_chi_square() -> None:
    found = sheet("| Trait | chi square (Fisher's exact) |\n| Burnt | 0.123 |\n| Pale | 1 |")
    assert column_roles(found, Legend())[1].quantities == ("p",)


@pytest.mark.parametrize(
    ("text", "quantities", "names"),
    [
        ("11.2 (1.3)", ("mean", "sd"), ["mean", "sd"]),
        ("21 (72.4)", ("count", "percent"), ["count", "percent"]),
        ("54.5% (46)", ("percent", "count"), ["percent", "count"]),
        ("0.73 [0.54, 0.92]", ("or", "ci_low", "ci_high"), ["or", "ci_low", "ci_high"]),
        ("35 (1–102)", ("median", "q1", "q3"), ["median", "q1", "q3"]),
        ("35 (12)", ("median", "q1", "q3"), ["median", "iqr"]),
        ("41.4 ± 10.2 (68)", ("mean", "sd"), ["mean", "sd", "n"]),
        ("12/34 (35%)", ("count", "percent"), ["count", "total", "percent"]),
        ("37.9 (range: 18.7–72.5)", ("mean",), ["mean", "min", "max"]),
        ("5.1 (SE 1.2)", ("mean", "sd"), ["mean", "se"]),
    ],
)
def test_numbers_under_their_names(text: str, quantities: tuple[str, ...], names: list[str]) -> None:
    found = matched(piece(text), quantities)
    assert found is not None and list(found) == names


@pytest.mark.parametrize(
    ("text", "quantities"),
    [
        ("12.5 (1.3)", ("count", "percent")),
        ("12 (134)", ("count", "percent")),
        ("12 (34%)", ("mean", "sd")),
        ("11.2 ± 1.3", ("median", "q1", "q3")),
        ("0.73 [0.92, 0.54]", ("or", "ci_low", "ci_high")),
        ("11.2", ("mean", "sd")),
        ("34/12", ("count", "percent")),
        ("–", ("mean",)),
    ],
)
def test_numbers_that_do_not_fit_their_names(text: str, quantities: tuple[str, ...]) -> None:
    assert matched(piece(text), quantities) is None


def test_a_count_above_its_total_is_kept_where_the_heading_says_what_it_is() -> None:
    assert matched(piece("34/12 (35%)"), ("count", "total", "percent")) is not None
