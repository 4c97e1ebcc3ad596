"""What the readers of tests in tables take apart: links, words of legends, studies of other people."""

from __future__ import annotations

import pytest

from recheck.checks.running import run_checks
from recheck.model import DISCREPANT, Claim, Context, Settings
from recheck.reading import read
from recheck.reading.context import Setting
from recheck.reading.tables import saying
from recheck.reading.tables.bundles import bundles_of, rows_compare
from recheck.reading.tables.foreign import of_other_studies
from recheck.reading.tables.frame import Frame, frame_of
from recheck.reading.tables.grid import sheets_of
from recheck.reading.tables.legend import legend_of
from recheck.reading.tables.saying import marks_compare, said_of
from tests.reading.tables.cases import TableCase, case_of, table_cases
from tests.reading.tables.writers import document_of


def frame(*rows: str, caption: str = "Table 1. Loaves, mean (SD)", notes: tuple[str, ...] = ()) -> Frame:
    """The frame of a table whose first row is its head."""
    table = document_of(case(*rows, caption=caption, notes=notes), "grid").tables[0]
    return frame_of(sheets_of(table)[0], legend_of(table), Setting(Context()))


def case(*rows: str, caption: str = "Table 1. Loaves, mean (SD)", notes: tuple[str, ...] = ()) -> TableCase:
    lines = [f"caption: {caption}", *(f"note: {note}" for note in notes)]
    return case_of("here", ["case", *lines, f"| {rows[0]} |", "|-", *(f"| {row} |" for row in rows[1:])])


def linked(*rows: str, caption: str = "Table 1. Loaves, mean (SD)") -> list[tuple[str | None, ...]]:
    """The groups that each test of a table is linked to."""
    claims = read(document_of(case(*rows, caption=caption), "grid")).claims
    names = {claim.id: claim.group for claim in claims}
    return [tuple(names[one] for one in claim.groups) for claim in claims if is_test(claim)]


def is_test(claim: Claim) -> bool:
    return claim.kind not in ("group-summary", "count")


@pytest.mark.parametrize(
    ("head", "groups"),
    [
        ("p", ("Rye", "Wheat")),
        ("p (Rye vs. wheat)", ("Rye", "Wheat")),
        ("p for trend", ()),
        ("p (adjusted for age)", ()),
        ("p (interaction)", ()),
        ("P value (t-test)", ("Rye", "Wheat")),
    ],
)
def test_a_heading_of_p_may_name_what_is_compared(head: str, groups: tuple[str, ...]) -> None:
    assert linked(
        f"Score | Rye (n = 20) | Wheat (n = 20) | {head}", "Aroma | 5.1 (1.2) | 4.4 (1.1) | .062"
    ) == [groups]


def test_the_whole_sample_is_no_group() -> None:
    for name in ("All", "Total (n = 40)", "Overall", "Whole sample", "All bakers", "Both groups"):
        rows = (
            f"Score | {name} | Rye | Wheat | t | df | p",
            "Aroma | 4.8 (1.2) | 5.1 (1.2) | 4.4 (1.1) | 1.92 | 38 | .062",
        )
        assert linked(*rows) == [("Rye", "Wheat")], name


def test_a_t_of_three_groups_is_linked_to_none() -> None:
    rows = (
        "Score | Rye | Wheat | Spelt | t(38) | p",
        "Aroma | 5.1 (1.2) | 4.4 (1.1) | 4.0 (1.3) | 1.92 | .062",
    )
    assert linked(*rows) == [()]


def test_an_F_of_three_groups_needs_two_df() -> None:
    head = "Score | Rye | Wheat | Spelt | F({}) | p"
    row = "Aroma | 5.1 (1.2) | 4.4 (1.1) | 4.0 (1.3) | 3.52 | .036"
    assert linked(head.format("2, 57"), row) == [("Rye", "Wheat", "Spelt")]
    assert linked(head.format("1, 57"), row) == [()]


def test_bundles_end_where_another_result_begins() -> None:
    found = frame("Score | t | df | p | F | p | d", "Aroma | 2.1 | 38 | .04 | 3.1 | .05 | 0.4")
    assert [bundle.columns for bundle in bundles_of(found)] == [(1, 2, 3), (4, 5, 6)]


def test_rows_of_comparisons_are_told_from_variables() -> None:
    assert rows_compare(frame("Pair | t | p", "rye - wheat | 2.1 | .04", "rye - spelt | 0.3 | .76").sheet)
    assert not rows_compare(frame("Score | t | p", "Aroma | 2.1 | .04", "Bite | 0.3 | .76").sheet)


def test_words_that_exclude_each_other_tell_of_different_tests() -> None:
    assert said_of("t-test", (), ("paired", "independent", "two-tailed")) == ("two-tailed",)
    assert said_of("t-test", ("paired",), ("two-tailed", "rank-test")) == ("paired", "two-tailed")
    assert said_of("F-test", (), ("adjusted-p", "adjusted-p-post-hoc"), several=True) == ()


def test_tests_that_a_note_names() -> None:
    assert saying.tests_named("p values are from student's t-tests or mann–whitney tests") == (
        "rank-test",
        "independent",
    )
    assert saying.tests_named("paired t-tests") == ("paired",)
    assert saying.tests_named("repeated-measures anova") == ()


@pytest.mark.parametrize(
    ("legend", "compares"),
    [
        ("*p < .05 compared with rye.", True),
        ("† p<0.01 vs. baseline", True),
        ("* significantly different from the control, p < 0.05", True),
        ("*p < .05, **p < .01", False),
        ("loaves compared with the standard; *p < .05", False),
    ],
)
def test_marks_that_compare(legend: str, compares: bool) -> None:
    assert marks_compare(legend) is compares


def test_tables_of_other_people_are_told_by_their_names() -> None:
    head = "Study | n | d"
    assert of_other_studies(frame(head, "Miller (2011) | 40 | 0.41", "Crumb et al., 2018 | 96 | 0.22"))
    assert not of_other_studies(frame(head, "Day shift | 40 | 0.41", "Night shift | 96 | 0.22"))
    assert not of_other_studies(frame(head, "Census 2011 | 40 | 0.41", "Night shift | 96 | 0.22"))


@pytest.mark.parametrize("name", [case.name for case in table_cases() if "wrong" not in case.name])
def test_nothing_in_the_tables_is_called_wrong(name: str) -> None:
    # Cases that say so in their name print a wrong number. Those of all others were computed from each other with scipy 1.17 and rounded once.
    document = document_of(next(case for case in table_cases() if case.name == name), "grid")
    findings = run_checks(read(document).claims, Settings())
    assert [finding.message for finding in findings if finding.verdict in DISCREPANT] == []
