"""Claims of tables among those of the text."""

from __future__ import annotations

from dataclasses import replace

from recheck.model import Document, Passage, Reading, Table
from recheck.reading import read
from tests.reading.tables.drawn import table


def reading(*texts: str, tables: tuple[Table, ...]) -> Reading:
    passages = tuple(Passage(text=text) for text in texts)
    return read(Document("loaves.txt", "text", "0", passages, tables=tables))


HEIGHTS = """
    | Outcome | Rye (n = 24), M (SD) | Wheat (n = 26), M (SD) |
    | Height  | 11.2 (1.3)  | 10.1 (1.2) |
"""


def test_a_table_stands_where_the_file_has_it() -> None:
    found = reading(
        "Rye rose higher, t(48) = 3.10, p = .003.", "The crust did not differ, t(48) = 0.31, p = .76.",
        tables=(replace(table(HEIGHTS), before=1),),
    )  # fmt: skip
    assert [claim.kind for claim in found.claims] == ["t-test", "group-summary", "group-summary", "t-test"]


def test_ids_are_unique_and_come_again() -> None:
    twice = (table(HEIGHTS), table(HEIGHTS))
    ids = [claim.id for claim in reading(tables=twice).claims]
    assert len(set(ids)) == 4
    assert ids == [claim.id for claim in reading(tables=twice).claims]


def test_numbers_that_nothing_names_are_counted() -> None:
    found = reading(tables=(table("| Oven | Left | Right |\n| Deck | 12.1 | 13.4 |"),))
    assert found.claims == ()
    assert "2 numbers in Table 1 have no heading that says what they are." in found.notes


def test_numbers_that_nothing_names_are_told_once_for_all_tables() -> None:
    """A note for each table would bury the findings of a paper with many tables."""
    text = "| Oven | Left | Right |\n| Deck | 12.1 | 13.4 |"
    tables = (table(text), replace(table(text), label="Table 2"), replace(table(text), label=""))
    (note,) = reading(tables=tables).notes
    assert (
        note == "6 numbers have no heading that says what they are: "
        "in Table 1 (2), Table 2 (2) and tables without a label (2)."
    )


def test_a_table_without_end_is_left_out_with_a_note() -> None:
    rows = "\n".join("|".join(["x", *["1.2"] * 299]) for _ in range(70))
    (note,) = reading(tables=(table(rows),)).notes
    assert note == "Table 1 is too large to be read (70 rows, 300 columns)."


def test_signs_of_a_wrong_code_table_are_put_right_in_cells_too() -> None:
    texts = (
        "Rye rose higher, F(1,44) 5 3.18, p 5 .081.", "Wheat was lower, t(23) 5 6.41, p , .05, and t(23) 5 3.90, p , .001.",
        "The mean was 12.3 6 4.5 and M 5 3.20, SD 5 1.10.",
    )  # fmt: skip
    cells = table("| Outcome | Rye, mean 6 SD | p |\n| Height | 12.30 6 4.50 | , .001 |")
    found = [claim for claim in reading(*texts, tables=(cells,)).claims if claim.place.table]
    assert [value.text for value in found[0].values.values()] == ["12.30", "4.50"]
    assert found[0].confidence == "medium" and any("'±'" in note for note in found[0].notes)
    assert found[1].values["p"].relation == "<"


def test_whole_results_in_cells_are_read_as_prose() -> None:
    drawing = "| Comparison | Height |\n| Rye – wheat | t(48) = 3.10, p = .003 |\n| Rye – spelt | OR 1.5 (95% CI 1.2–1.9) |"
    first, second = reading(tables=(table(drawing),)).claims
    assert first.kind == "t-test" and first.place.row == "Rye – wheat" and first.place.column == "Height"
    assert second.kind == "estimate" and second.outcome == "Rye – spelt"
