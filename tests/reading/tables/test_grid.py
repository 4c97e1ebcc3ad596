"""Headings, names of rows, sub-headings and blocks of a table."""

from __future__ import annotations

from recheck.reading.tables.grid import sheet_of, sheets_of
from tests.reading.tables.drawn import sheet, table


def test_rows_before_the_first_numbers_are_headings() -> None:
    found = sheet("""
        |            | Rye <2     | Wheat <2   |
        | Outcome    | M    | SD  | M    | SD  |
        | Height, cm | 11.2 | 1.3 | 10.1 | 1.2 |
    """)
    assert list(found.rows) == [2]
    assert found.columns == (1, 2, 3, 4) and found.stubs == (0,)
    assert found.column_header(2).path == ("Rye", "SD")
    assert found.row_header(2).text == "Height, cm"


def test_a_heading_over_the_first_of_its_columns_alone_reaches_to_the_next() -> None:
    found = sheet("""
        |        | Rye  |     | Wheat |     | p    |
        |        | M    | SD  | M     | SD  |      |
        | Height | 11.2 | 1.3 | 10.1  | 1.2 | .004 |
    """)
    assert found.column_header(2).path == ("Rye", "SD")
    assert found.column_header(4).path == ("Wheat", "SD")
    assert found.column_header(5).path == ("p",)


def test_a_row_of_sizes_continues_the_headings() -> None:
    found = sheet(
        """
        |        | Rye        | Wheat      |
        |        | (n = 24)   | (n = 26)   |
        | Height | 11.2 (1.3) | 10.1 (1.2) |
    """,
        head=1,
    )
    assert list(found.rows) == [2]
    assert found.column_header(1).path == ("Rye", "(n = 24)")


def test_numbers_of_a_matrix_and_years_are_headings() -> None:
    assert list(sheet("|  | 1 | 2 |\n| Aroma | .41 | .12 |").rows) == [1]
    assert list(sheet("|  | 2019 | 2020 |\n| Loaves | 412 | 380 |").rows) == [1]


def test_a_row_with_a_name_alone_is_a_level_over_the_rows_below_it() -> None:
    found = sheet("""
        | Flour   | n  | %  |
        | Kind    |    |    |
        | Rye     | 24 | 48 |
        | Wheat   | 26 | 52 |
        | Oven    |    |    |
        | Deck    | 50 | 100 |
    """)
    assert found.is_subheading(1) and not found.is_subheading(2)
    assert found.row_header(3).path == ("Kind", "Wheat")
    assert found.row_header(5).path == ("Oven", "Deck")


def test_indents_tell_where_a_level_ends() -> None:
    found = sheet("""
        | Trait   | Rye |
        | Kind    |     |
        | \u2003White | 12 |
        | \u2003Dark  | 14 |
        | Weight, g | 812.5 |
    """)
    assert found.row_header(3).path == ("Kind", "Dark")
    assert found.row_header(4).path == ("Weight, g",)


def test_a_name_with_the_p_of_the_rows_below_it_is_a_level() -> None:
    found = sheet("""
        | Trait | Rye (n = 24) | Wheat (n = 26) | p |
        | Crust |    |    | .31 |
        | Pale  | 10 | 13 |     |
        | Dark  | 14 | 13 |     |
    """)
    assert found.is_subheading(1)
    assert found.row_header(2).path == ("Crust", "Pale")


def test_outer_names_are_printed_once() -> None:
    found = sheet("""
        | Flour | Oven | Height |
        | Rye   | Deck | 11.2 |
        |       | Rack | 10.9 |
        | Wheat | Deck | 10.1 |
    """)
    assert found.stubs == (0, 1)
    assert found.row_header(2).path == ("Rye", "Rack")
    assert found.row_header(3).path == ("Wheat", "Deck")


def test_new_headings_start_a_new_block() -> None:
    first, second = sheets_of(
        table("""
        | Dough   | Rye  | Wheat |
        | Loaves  | 412  | 380   |
        | Dough   | Soft | Firm  |
        | Batches | 31   | 18    |
    """)
    )
    assert first.column_header(1).path == ("Rye",)
    assert second.column_header(1).path == ("Soft",) and list(second.rows) == [3]


def test_two_lists_side_by_side_have_their_own_names() -> None:
    found = sheet("""
        | Baker | Score | Baker | Score |
        | Aude  | 5.1   | Bruno | 4.8   |
        | Carla | 5.3   | Dario | 4.1   |
    """)
    assert found.row_header(1, 1).path == ("Aude",)
    assert found.row_header(1, 3).path == ("Bruno",)


def test_raised_letters_are_no_part_of_a_heading() -> None:
    assert sheet("| Trait | p^a |\n| Height | .031 |").column_header(1).path == ("p",)


def test_a_table_of_text_has_no_sheet() -> None:
    assert (
        sheet_of(table("| Step | What to do |\n| Mix | Stir until smooth |\n| Rest | Cover the bowl |"))
        is None
    )


def test_a_row_of_answers_is_no_heading() -> None:
    found = sheets_of(
        table("""
        | Predictor | (1)  | (2)  | (3)  |
        | Steam     | 0.41 | 0.39 | 0.40 |
        | Controls  | No   | No   | Yes  |
        | Loaves    | 385  | 385  | 385  |
    """)
    )
    assert len(found) == 1
