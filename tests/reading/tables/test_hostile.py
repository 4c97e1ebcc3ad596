"""Whatever stands in a table: no fault, no pattern without end, no visible time for a large one."""

from __future__ import annotations

import time

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.documents.grids import Spanned, table_of
from recheck.model import Context, Passage, Table
from recheck.reading.context import Setting
from recheck.reading.tables.headings import told
from recheck.reading.tables.legend import legend_of
from recheck.reading.tables.reading import read_table
from tests.reading.tables.drawn import table

SIGNS = st.text(alphabet="0123456789.,·-−–±()[]%*†/<=> \n±nNpMSDtFrOCIaβχ²¹", max_size=24)
WORDS = st.sampled_from(["", "M", "SD", "n (%)", "95% CI", "Lower", "p", "Rye (n = 24)", "t(31)", "F(2, 57)", "Mean ± SD", "n/N", "ref", "Group B", "r", "1"])  # fmt: skip
CELL = st.tuples(
    st.one_of(SIGNS, WORDS, st.text(max_size=8)), st.integers(0, 3), st.integers(1, 3), st.booleans()
)


@given(st.lists(st.lists(CELL, max_size=5), max_size=6), SIGNS, SIGNS, st.integers(0, 3))
@settings(max_examples=150, deadline=None)
def test_no_table_is_a_fault(
    rows: list[list[tuple[str, int, int, bool]]], caption: str, note: str, head: int
) -> None:
    cells = [
        [
            Spanned(Passage(text=text, kind="table"), down, right, heading)
            for text, down, right, heading in row
        ]
        for row in rows
    ]
    drawn = table_of(
        cells,
        header_rows=head,
        caption=Passage(text=caption, kind="caption"),
        notes=(Passage(text=note, kind="note"),),
    )
    for item in read_table(drawn, Setting(Context())).found:
        assert item.claim.values and item.claim.place.quote


@pytest.mark.parametrize(
    "text",
    ["mean (", "means ± ", "* ", "p < .05 * ", "n = 5, ", "OR or ", "A, b; ", "SD in ", "95% CI ", "Low. "],
)
def test_long_legends_and_headings_take_no_time(text: str) -> None:
    start = time.process_time()
    long = text * 3000
    legend_of(Table((), 0, 0, notes=(Passage(text=long, kind="note"),)))
    told(long)
    assert time.process_time() - start < 2


@pytest.mark.parametrize("text", ["1.2 ", "1.2 (", "- ", "1* ", "1/", "1,2,", "1 ± ", "((", "1 (2) n = "])
def test_long_cells_take_no_time(text: str) -> None:
    start = time.process_time()
    read_table(table(f"| V | Rye (n = 5) |\n| x | {text * 1500} |"), Setting(Context()))
    assert time.process_time() - start < 1


def test_a_table_of_a_hundred_rows_adds_no_visible_time() -> None:
    head = "|".join(["Variable", *(f"Group {k} (n = {20 + k}), mean (SD)" for k in range(19))])
    rows = ("|".join([f"Outcome {r}", *(f"{r}.{c}1 (1.{c}2)" for c in range(19))]) for r in range(100))
    drawn = table("\n".join((head, *rows)), head=1)
    read_table(drawn, Setting(Context()))
    start = time.process_time()
    found = read_table(drawn, Setting(Context())).found
    assert len(found) == 1900
    # About 0.15 s on a machine of 2 GHz; the limit leaves room for slower ones.
    assert time.process_time() - start < 1
