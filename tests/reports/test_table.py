from dataclasses import replace
from html.parser import HTMLParser

import recheck.auditing
from recheck.model import Audit, Place
from recheck.reports.table import COLUMNS, findings_table, records
from tests.reports.audits import AGREES, EMPTY, FULL, REVERSED, audit


class Cells(HTMLParser):
    def __init__(self) -> None:
        super().__init__()
        self.tags: list[str] = []
        self.texts: list[str] = []

    def handle_starttag(self, tag, attrs):
        self.tags.append(tag)
        self.texts.append("")

    def handle_data(self, data):
        self.texts[-1] += data


def read(html):
    cells = Cells()
    cells.feed(html)
    return cells


def test_one_row_for_each_question_and_one_cell_for_each_column():
    cells = read(findings_table(FULL))
    assert cells.tags.count("tr") == 1 + 3
    assert cells.tags.count("td") == 3 * len(COLUMNS)
    assert "inconsistent (reversal)" in cells.texts


def test_text_of_a_manuscript_is_escaped():
    quote = "<script>alert('p < .05')</script>"
    html = findings_table(audit(replace(REVERSED, place=Place(quote), question=quote)))
    assert "<script" not in html
    assert quote in read(html).texts


def test_nothing_found_and_nothing_read_are_told_apart():
    assert "No discrepancy found." in findings_table(audit(AGREES))
    assert "Nothing to check." in findings_table(EMPTY)


def test_a_table_with_questions_carries_the_caution():
    assert "no evidence of misconduct" in findings_table(FULL)


def test_a_notebook_shows_the_table():
    assert recheck.auditing.__name__ and Audit.notebook_view is not None
    assert FULL._repr_html_() == findings_table(FULL)


def test_records_are_flat_and_alike():
    rows = records(FULL)
    assert [row["rank"] for row in rows] == [1, 2, 3, 4, 5]
    assert len({tuple(row) for row in rows}) == 1
    assert rows[0]["implied_low"] == REVERSED.implied[0].low and rows[3]["implied_low"] is None
    assert all(not isinstance(value, (list, tuple, dict)) for row in rows for value in row.values())
