"""Rows that hold several rows on lines of their cells."""

from __future__ import annotations

from recheck.reading.tables.unfolding import unfolded
from tests.reading.tables.drawn import claims, table, told_of


def test_lines_of_names_and_values_side_by_side_are_rows() -> None:
    found = claims("| Flour | Loaves (n = 30) |\n| Rye\\nWheat | 12 (40.0%)\\n18 (60.0%) |", head=1)
    assert [(claim.outcome, told_of(claim)) for claim in found] == [
        ("Rye", "count 12, percent 40.0, total 30"), ("Wheat", "count 18, percent 60.0, total 30"),
    ]  # fmt: skip


def test_a_first_line_without_values_stands_over_the_others() -> None:
    found = claims(
        "| Trait | Rye (n = 30) | Spelt (n = 30) | p |\n| Crust\\nPale\\nDark | 12 (40.0)\\n18 (60.0) | 15 (50.0)\\n15 (50.0) | .44 |",
        note="Values are n (%).", head=1,
    )  # fmt: skip
    counts = [claim for claim in found if claim.kind == "count"]
    assert [claim.outcome for claim in counts] == ["Crust | Pale"] * 2 + ["Crust | Dark"] * 2


def test_wrapped_text_is_one_row() -> None:
    drawn = table("| Trait | Rye |\n| Height of\\nthe loaf | 11.2\\n(1.3) |", head=1)
    assert unfolded(drawn).rows == 2
    (claim,) = claims("| Trait | Rye, mean (SD) |\n| Height of\\nthe loaf | 11.2\\n(1.3) |", head=1)
    assert told_of(claim) == "mean 11.2, sd 1.3"


def test_two_values_beside_one_name_stay_in_their_cell() -> None:
    drawn = table("| Trait | Rye |\n| Height | 62 ± 12\\n57 (43–84) |", head=1)
    assert unfolded(drawn) is drawn
