"""Group summaries, counts and estimates of small tables."""

from __future__ import annotations

from recheck.documents.grids import Spanned, table_of
from recheck.model import N_OF_GROUP, TOTAL_OF_GROUP, Context, Passage
from recheck.reading.context import Setting
from recheck.reading.tables.reading import read_table
from tests.reading.tables.drawn import claims, told_of


def test_the_row_wins_over_the_column() -> None:
    found = claims("""
        |                  | Rye (n = 24) | Wheat (n = 26) |
        |                  | n (%)        | n (%)          |
        | Age, mean (SD)   | 41.2 (8.3)   | 40.7 (9.0)     |
        | Night shift      | 6 (25.0)     | 13 (50.0)      |
    """)
    assert [claim.kind for claim in found] == ["group-summary", "group-summary", "count", "count"]
    assert told_of(found[0]) == "mean 41.2, n 24, sd 8.3" and N_OF_GROUP in found[0].notes
    assert told_of(found[3]) == "count 13, percent 50.0, total 26" and TOTAL_OF_GROUP in found[3].notes
    assert (found[3].outcome, found[3].group) == ("Night shift", "Wheat")
    assert (found[0].outcome, found[0].confidence) == ("Age", "high")


def test_places_name_table_row_and_column() -> None:
    (claim,) = claims("|  | Rye (n = 24) |\n| Height, mean (SD) | 11.2 (1.3) |")
    assert claim.place.table == "Table 1" and claim.place.row == "Height, mean (SD)"
    assert claim.place.column == "Rye (n = 24)" and claim.place.quote == "Height, mean (SD) | 11.2 (1.3)"


def test_parts_in_columns_of_their_own() -> None:
    first, second = claims("""
        |        | Rye <3          | Wheat <3        |
        |        | n  | M    | SD  | n  | M    | SD  |
        | Height | 24 | 11.2 | 1.3 | 25 | 10.1 | 1.2 |
    """)
    assert told_of(first) == "mean 11.2, n 24, sd 1.3" and first.group == "Rye" and not first.notes
    assert told_of(second) == "mean 10.1, n 25, sd 1.2" and second.group == "Wheat"


def test_parts_in_rows_of_their_own() -> None:
    found = claims("""
        | Trait  | Rye (n = 24) | Wheat (n = 26) |
        | Height |      |      |
        | Mean   | 11.2 | 10.1 |
        | SD     | 1.3  | 1.2  |
    """)
    assert [told_of(claim) for claim in found] == ["mean 11.2, n 24, sd 1.3", "mean 10.1, n 26, sd 1.2"]
    assert found[0].outcome == "Height" and found[0].group == "Rye"


def test_groups_in_rows() -> None:
    first, second = claims("""
        | Flour          | M    | SD  |
        | Rye (n = 24)   | 11.2 | 1.3 |
        | Wheat (n = 26) | 10.1 | 1.2 |
    """)
    assert told_of(first) == "mean 11.2, n 24, sd 1.3" and first.group == "Rye"
    assert second.group == "Wheat"


def test_a_row_of_sizes() -> None:
    found = claims("""
        | Trait         | Rye        | Wheat      |
        | No. of loaves | 24         | 26         |
        | Height, mean (SD) | 11.2 (1.3) | 10.1 (1.2) |
    """)
    assert [told_of(claim) for claim in found] == ["mean 11.2, n 24, sd 1.3", "mean 10.1, n 26, sd 1.2"]


def test_the_legend_speaks_where_row_and_column_are_silent() -> None:
    note = "Data are expressed as mean ± SE or number (%). Skewed data are median (25th-75th percentile)."
    found = claims(
        """
        | Trait  | Value         |
        | Height | 11.2 ± 0.3    |
        | Burnt  | 12 (9.3)      |
        | Rest   | 35 (12–102)   |
    """,
        caption="Loaves (N = 129)", note=note,
    )  # fmt: skip
    assert [told_of(claim) for claim in found] == [
        "mean 11.2, n 129, se 0.3",
        "count 12, percent 9.3, total 129",
        "median 35, n 129, q1 12, q3 102",
    ]


def test_an_unlabelled_spread_says_so() -> None:
    (claim,) = claims("| Trait | Rye |\n| Height | 11.2 ± 1.3 |")
    assert claim.stated == ("spread-unlabelled",) and claim.confidence == "medium"
    (labelled,) = claims("| Trait | Rye |\n| Height | 11.2 (SD 1.3) |")
    assert labelled.stated == () and labelled.confidence == "high"


def test_what_may_be_a_count_is_no_mean() -> None:
    assert claims("| Trait | Rye | Wheat |\n| Burnt | 12 (34) | 11 (31) |") == []
    assert (
        claims("| Trait | Rye | Wheat |\n| Burnt | 12 (34) | 11 (31) |", note="Data are n (%) or mean (SD).")
        == []
    )


def test_coefficients_are_no_means() -> None:
    drawing = "| Predictor | Model 1 | Model 2 |\n| Rye | 0.24 (0.03)** | 0.21 (0.03)** |\n| Salt | 0.14 (0.05)* | 0.11 (0.05) |"
    assert all(
        claim.kind != "group-summary"
        for claim in claims(drawing, note="Coefficients of a linear regression.")
    )


def test_counts_in_columns_of_their_own_and_shares() -> None:
    found = claims("""
        | Oven | n  | %    | Burnt, n/N (%) |
        | Deck | 24 | 48.0 | 3/24 (12.5)    |
        | Rack | 26 | 52.0 | 1/26 (3.8)     |
    """)
    assert [told_of(claim) for claim in found] == [
        "count 24, percent 48.0", "count 3, percent 12.5, total 24", "count 26, percent 52.0", "count 1, percent 3.8, total 26",
    ]  # fmt: skip


def test_shares_of_something_else_than_the_group_get_no_total() -> None:
    found = claims("""
        | Oven | Rye (n = 40) | Wheat (n = 40) |
        | Deck, n (%) | 10 (33.3)    | 20 (66.7)      |
        | Rack, n (%) | 12 (40.0)    | 18 (60.0)      |
        | Tin, n (%)  | 18 (90.0)    | 2 (10.0)       |
    """)
    assert len(found) == 6 and all("total" not in claim.values for claim in found)


def test_whole_numbers_that_add_up_to_their_groups_are_counts() -> None:
    drawing = """
        | Crust | | Rye (n = 24) | Wheat (n = 26) |
        | Colour | Pale | 10 | 13 |
        |        | Dark | 14 | {} |
    """
    assert [claim.kind for claim in claims(drawing.format(13))] == ["count"] * 4
    assert claims(drawing.format(12)) == []


def test_estimates_with_their_interval_and_p_in_neighbouring_cells() -> None:
    (claim,) = claims("""
        | Trait | n   | aOR | Burnt versus pale (95% CI) | p     |
        | Steam | 161 | 1.7 | (1.2–2.5)                  | 0.004 |
    """)
    assert claim.kind == "estimate" and claim.interval_of == "or"
    assert told_of(claim) == "ci_high 2.5, ci_level 95, ci_low 1.2, n 161, or 1.7, p 0.004"
    assert claim.says("covariate-adjusted") and claim.outcome == "Steam"


def test_intervals_in_two_columns() -> None:
    (claim,) = claims(
        "|  | HR | 95% CI <2 | p |\n|  |  | Low | High |  |\n| Steam | 1.76 | 1.13 | 2.74 | 0.013 |"
    )
    assert told_of(claim) == "ci_high 2.74, ci_level 95, ci_low 1.13, hr 1.76, p 0.013"


def test_a_reference_has_no_estimate() -> None:
    found = claims("| Flour | OR (95% CI) |\n| Rye | 1.0 (reference) |\n| Wheat | 1.4 (1.1–1.8) |")
    assert [claim.outcome for claim in found] == ["Wheat"]


def test_marks_are_the_p_of_an_estimate() -> None:
    (claim,) = claims("| Flour | OR (SE) |\n| Wheat | 1.41 (0.11)** |", note="* p < .05, ** p < .01")
    assert told_of(claim) == "or 1.41, p <**, se 0.11, stars <**"


def test_what_the_caption_says_of_the_model_is_stated_of_its_means() -> None:
    drawing = "| Trait | Rye |\n| Height, mean (SD) | 11.2 (1.3) |"
    (plain,) = claims(drawing)
    (adjusted,) = claims(drawing, caption="Estimated marginal means, adjusted for proofing time")
    assert not plain.stated and adjusted.says("covariate-adjusted") and adjusted.says("marginal")


def test_the_n_of_a_row_is_that_of_all_its_groups() -> None:
    first, second = claims(
        "| Oven | n | Before M ± SD | After M ± SD |\n| Deck | 18 | 41.2 ± 6.1 | 44.9 ± 6.4 |"
    )
    assert told_of(first) == "mean 41.2, n 18, sd 6.1" and told_of(second) == "mean 44.9, n 18, sd 6.4"
    assert (second.outcome, second.group) == ("Deck", "After")


def test_two_kinds_in_one_cell_are_no_share() -> None:
    assert claims("| Trait | Bakers (n = 10) |\n| Sex (F/M), number | 3/7 |") == []


def test_quartiles_in_columns_of_their_own() -> None:
    (claim,) = claims("| Rest | Median | Q1 | Q3 |\n| Bulk, min | 35 | 12 | 102 |")
    assert told_of(claim) == "median 35, q1 12, q3 102"
    assert claims("| Answer | Q1 | Q2 | Q3 |\n| Score | 4.1 | 3.9 | 4.4 |") == []


def test_groups_as_sub_headings() -> None:
    found = claims("""
        | Measure          | Before     | After      |
        | Coached (n = 24) |            |            |
        | Height, mean (SD) | 11.2 (1.3) | 12.0 (1.4) |
        | Burnt, n (%)     | 6 (25.0)   | 3 (12.5)   |
        | Control (n = 26) |            |            |
        | Height, mean (SD) | 11.0 (1.2) | 11.1 (1.3) |
    """)
    assert told_of(found[0]) == "mean 11.2, n 24, sd 1.3" and N_OF_GROUP in found[0].notes
    assert (found[0].outcome, found[0].group) == ("Height", "Coached | Before")
    assert told_of(found[2]) == "count 6, percent 25.0, total 24"
    assert told_of(found[4]) == "mean 11.0, n 26, sd 1.2" and found[4].group == "Control | Before"


def test_missing_values_are_counted_whatever_the_row_says() -> None:
    first, second = claims("| | Rye (n = 24) | Missing, n (%) |\n| Age, mean (SD) | 41.2 (8.3) | 2 (8.3) |")
    assert first.kind == "group-summary" and second.kind == "count"


def test_a_cell_over_two_rows_is_read_once() -> None:
    cells = [["Oven", "Height, mean (SD)"], ["Deck", "11.2 (1.3)"], ["Rack"]]
    rows = [
        [Spanned(Passage(text=text, kind="table"), row_span=2 if "(1" in text else 1) for text in row]
        for row in cells
    ]
    assert len(read_table(table_of(rows, header_rows=1), Setting(Context())).found) == 1


def test_a_sub_heading_that_tells_of_groups_and_of_the_effect() -> None:
    found = claims("""
        | Outcome | Rye (n = 61) | Wheat (n = 59) | Effect (95% CI) |
        | Mean (SD), mean difference | | | |
        | Height  | 38.3 (6.9) | 34.2 (8.0) | 4.1 (1.4 to 6.8) |
        | n (%), risk ratio | | | |
        | Burnt   | 22 (36) | 32 (54) | 0.66 (0.44 to 1.00) |
    """)
    assert told_of(found[0]) == "mean 38.3, n 61, sd 6.9"
    assert "mean_difference 4.1" in told_of(found[2]) and "rr 0.66" in told_of(found[5])
    assert [claim.kind for claim in found[3:5]] == ["count", "count"]


def test_a_standard_error_in_brackets_is_that_of_a_coefficient_where_the_table_tells_of_a_model() -> None:
    note = "Standard errors in parentheses. * p < .10, ** p < .05, *** p < .01."
    body = "|  | (1) | (2) |\n| Rye share | 0.015 (0.010) | 0.014 (0.010) |\n| Steam | −0.017*** (0.003) | −0.010** (0.004) |"
    for caption, last in (
        ("Regression of loaf height.", ""),
        ("Loaf height.", "\n| Constant | 0.579*** (0.007) | 0.264*** (0.011) |"),
    ):
        found = claims(body + last, caption=caption, note=note)
        assert {claim.kind for claim in found} == {"regression"}
        assert told_of(found[0]) == "b 0.015, se 0.010"
        assert found[2].values["b"].text == "−0.017" and found[2].values["stars"].text == "***"


def test_a_standard_error_in_brackets_is_that_of_a_mean_elsewhere() -> None:
    text = "|  | Rye | Wheat |\n| Height | 11.2 (0.3) | 10.1 (0.2) |"
    found = claims(text, caption="Loaf height.", note="Standard errors in parentheses.")
    assert [told_of(claim) for claim in found] == ["mean 11.2, se 0.3", "mean 10.1, se 0.2"]


def test_one_column_of_ns_for_all_outcomes_of_a_group() -> None:
    found = claims("""
        | Flour | n  | Height, M (SD) | Weight, M (SD) |
        | Rye   | 18 | 92.4 (6.1)     | 800 (20)       |
        | Wheat | 20 | 86.0 (5.8)     | 790 (22)       |
        | Total | 38 | 89.0 (6.7)     | 795 (21)       |
    """)
    assert [told_of(claim) for claim in found[:2]] == ["mean 92.4, n 18, sd 6.1", "mean 800, n 18, sd 20"]
    assert (found[0].outcome, found[0].group) == ("Height", "Rye")
    assert all(N_OF_GROUP in claim.notes for claim in found)


def test_an_n_of_a_row_is_not_that_of_some_of_its_cases() -> None:
    boys = "| {} | N  | Boys, M (SD) | Girls, M (SD) |\n| North | 38 | 9.4 (6.1) | 8.0 (2.0) |\n| South | 40 | 8.0 (5.8) | 7.9 (2.2) |\n"
    flours = "| {} | N  | Rye, M (SD) | Wheat, M (SD) |\n| Height | 38 | 9.4 (6.1) | 8.0 (2.0) |\n| Weight | 40 | 8.0 (5.8) | 7.9 (2.2) |\n"
    texts = boys.format("School") + "| Total | 78 | 8.7 (6.0) | 8.0 (2.1) |", flours.format("Trait")
    assert not any("n" in claim.values for text in texts for claim in claims(text))


def test_a_difference_beside_its_two_measures_is_a_mean_with_its_sd() -> None:
    text = "| | Before | After | {} |\n| Trained (n = 18) | 4.2 (1.1) | 5.0 (1.2) | 0.8 (0.9) |"
    for heading in ("Difference", "Mean change", "Mean difference", "Change"):
        found = claims(text.format(heading), caption="Bench scores, mean (SD).")
        assert [told_of(claim) for claim in found][2:] == ["mean 0.8, n 18, sd 0.9"]
        assert heading in (found[2].outcome, found[2].group)


def test_a_difference_between_groups_has_no_sd() -> None:
    text = "| | Trained (n = 18) | Untrained (n = 20) | Difference |\n| Quiz | 4.2 (1.1) | 5.0 (1.2) | 0.8 (0.4) |"
    assert len(claims(text, caption="Bench scores, mean (SD).")) == 2


def test_half_an_interval_is_no_spread() -> None:
    text = "| | Rye | Wheat |\n| Height | 11.2 ± 0.3 | 10.1 ± 0.2 |"
    for note in ("Values are means ± 95% CI.", "± denotes the 95% confidence limits."):
        assert not any({"sd", "se"} & claim.values.keys() for claim in claims(text, note=note))
