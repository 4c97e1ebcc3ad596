"""Tables of Markdown and plain text."""

from __future__ import annotations

import time

import pytest
from hypothesis import given
from hypothesis import strategies as st

from recheck.documents import open_document, text_document
from tests.documents.word.making import grid


def the_table(text):
    (table,) = text_document(text).tables
    return table


def headed(table):
    return [cell.text for cell in table.cells if cell.heading]


PIPES = """# Results

**Table 2.** Heights of the loaves (mm)

| Flour | Steam (n = 18) | *t*(33) | *p* |
|:------|:--------------:|--------:|-----|
| Rye   | 92.4 (6.1)     | 3.23    | **.003** |
|       | 1 \\| 2         | χ^2^    | 5<sup>a</sup> |

Note. M (SD).
* p < .05.

They rose.
"""


def test_a_table_with_pipes():
    document = text_document(PIPES)
    (table,) = document.tables
    assert grid(document) == [
        ["Flour", "Steam (n = 18)", "t(33)", "p"],
        ["Rye", "92.4 (6.1)", "3.23", ".003"],
        ["", "1 | 2", "χ2", "5a"],
    ]
    assert (table.label, table.header_rows, table.section, table.before) == ("Table 2", 1, "Results", 2)
    assert table.caption is not None and table.caption.text == "Table 2. Heights of the loaves (mm)"
    assert [note.text for note in table.notes] == ["Note. M (SD).\n* p < .05."]
    assert not table.doubts
    assert {cell.text: cell.passage.marks for cell in table.cells if cell.passage.marks} == {
        "χ2": " ^",
        "5a": " ^",
    }
    cell = next(cell for cell in table.cells if cell.text == "92.4 (6.1)")
    assert cell.passage.place(0, 4).line == 7
    assert (cell.passage.kind, cell.passage.table, cell.passage.section) == ("table", "Table 2", "Results")
    assert [passage.kind for passage in document.passages] == ["heading", "caption", "note", "body"]


@pytest.mark.parametrize(
    ("text", "cells"),
    [
        ("a | b\n--|--\n1 | 2\n", [["a", "b"], ["1", "2"]]),
        ("a | b |\n:-:|-:|\n1 | 2 |\n", [["a", "b"], ["1", "2"]]),
        ("|a|b|\n|-|-|\n|1|2|\n", [["a", "b"], ["1", "2"]]),
        ("|a|b|\n|-+-|\n|1|2|\n", [["a", "b"], ["1", "2"]]),
        ("|a|b|\n|-|-|\n|1|\n|1|2|\n", [["a", "b"], ["1", ""], ["1", "2"]]),
        ("They rose.\n|a|b|\n|-|-|\n|1|2|\nThey fell.\n", [["a", "b"], ["1", "2"]]),
        ("| | b |\n|-|-|\n|M<br>SD|2|\n", [["", "b"], ["M\nSD", "2"]]),
        ("| n | `a` |\n|-|-|\n|[x](http://a.b)|2|\n", [["n", "a"], ["x", "2"]]),
        ("| Flour | M |\n|---|---|\n| &lt; 5 | *p* \\* |\n", [["Flour", "M"], ["< 5", "p *"]]),
    ],
)
def test_ways_to_write_pipes(text, cells):
    document = text_document(text)
    assert grid(document) == cells and document.tables[0].header_rows == 1


def test_a_head_may_be_empty_or_missing():
    assert the_table("| | |\n|-|-|\n|a|1|\n").header_rows == 0
    bare = the_table("|-|-|\n|a|1|\n|b|2|\n")
    assert (bare.header_rows, bare.rows) == (0, 2)
    unruled = the_table("| a | 1 |\n| b | 2 |\n")
    assert unruled.rows == 2 and "rules off" in unruled.doubts[0]


@pytest.mark.parametrize(
    "text",
    [
        "The absolute value |t| > 2 holds.\nA second line |x|.\n",
        "| a | b |\n\nThey rose.\n",
        "They rose | fell.\n---\n\nMore.\n",
        "---\n\nThey rose.\n\n---\n\nThey fell.\n",
        "```\n| a | b |\n|---|---|\n| 1 | 2 |\n```\n",
        "A  B  C\n",
    ],
)
def test_what_only_looks_like_a_table(text):
    assert not text_document(text).tables


@pytest.mark.parametrize("stub", ["&nbsp;&nbsp;rye", "&emsp;rye", "\u00a0\u00a0rye", "   rye"])
def test_stubs_moved_in(stub):
    table = the_table(f"| Flour | M |\n|---|---|\n| All | 1 |\n| {stub} | 2 |\n| Oat | 3 |\n")
    assert [(c.text, c.indent) for c in table.cells if c.column == 0 and c.row] == [
        ("All", 0),
        ("rye", 1),
        ("Oat", 0),
    ]


def test_a_column_set_flush_right_is_not_moved_in():
    table = the_table("| Flour | M |\n|------:|--:|\n|   Rye | 1 |\n| Spelt | 2 |\n")
    assert all(cell.indent == 0 for cell in table.cells)


@pytest.mark.parametrize(
    "text",
    ["Table: Heights {#tbl:h}\n\n{}", ": Heights {{#tbl-h}}\n\n{}", "{}\n\n: Heights", "{}\n: Heights"],
)
def test_captions_with_a_colon(text):
    table = the_table(
        "They rose.\n\n" + text.replace("{}", "|a|b|\n|-|-|\n|1|2|").replace("{{", "{").replace("}}", "}")
    )
    assert table.caption is not None and table.caption.text == "Heights" and table.label == ""


def test_the_lines_of_a_caption_on_two_lines():
    document = text_document("Text.\n\n**Table 3**\n\n*Heights of loaves*\n\n|a|b|\n|-|-|\n|1|2|\n")
    caption = document.tables[0].caption
    assert caption is not None and caption.text == "Table 3\n\nHeights of loaves"
    assert caption.place(9, 16).line == 5


DRAWN = """Table: Heights

+-------+---------+------+
| Flour | M       | SD   |
+:======+========:+======+
| rye   | 5.1     | 1.2  |
| dark  |         |      |
+-------+---------+------+
| spelt | 4.9 and more   |
+-------+---------+------+
"""


def test_a_drawn_table():
    table = the_table(DRAWN)
    assert [(c.text, c.row, c.column, c.column_span) for c in table.cells] == [
        ("Flour", 0, 0, 1), ("M", 0, 1, 1), ("SD", 0, 2, 1), ("rye\ndark", 1, 0, 1), ("5.1", 1, 1, 1), ("1.2", 1, 2, 1),
        ("spelt", 2, 0, 1), ("4.9 and more", 2, 1, 2),
    ]  # fmt: skip
    assert headed(table) == ["Flour", "M", "SD"] and not table.doubts
    assert table.cells[3].passage.place(4, 8).line == 7


def test_a_table_drawn_with_lines_between_head_and_body_alone():
    for text in (
        "+---+---+\n| a | b |\n+---+---+\n| 1 | 2 |\n| 3 | 4 |\n+---+---+\n",
        "┌───┬───┐\n│ a │ b │\n├───┼───┤\n│ 1 │ 2 │\n│ 3 │ 4 │\n└───┴───┘\n",
        "╔═══╦═══╗\n║ a ║ b ║\n╠═══╬═══╣\n║ 1 ║ 2 ║\n║ 3 ║ 4 ║\n╚═══╩═══╝\n",
    ):
        document = text_document(text)
        assert grid(document) == [["a", "b"], ["1", "2"], ["3", "4"]] and document.tables[0].header_rows == 1


def test_a_drawn_table_with_cells_over_rows_is_left_unread():
    text = "+---+---+\n| a | b |\n+   +---+\n|   | 2 |\n+---+---+\n"
    document = text_document(text)
    assert not document.tables and [passage.kind for passage in document.passages] == ["table"]


SIMPLE = """  Flour     Height   Score
-------     ------   ------
    rye     12.1     5.1 (1.2)
  spelt    123.4     4.9

Table: Loaves

They rose.
"""


def test_columns_under_dashes():
    document = text_document(SIMPLE)
    assert grid(document) == [
        ["Flour", "Height", "Score"],
        ["rye", "12.1", "5.1 (1.2)"],
        ["spelt", "123.4", "4.9"],
    ]
    (table,) = document.tables
    assert table.header_rows == 1 and not table.doubts and table.caption is not None
    assert all(cell.indent == 0 for cell in table.cells)


MULTILINE = """-------------------------------------------
 Flour      Height          Score of
            (mm)            the panel
---------- --------------- ----------------
 Rye, with  12.0            5.1 (1.2)
 seeds

 Spelt      11.0            4.9 (1.1)
-------------------------------------------
"""


def test_rows_of_several_lines():
    assert grid(text_document(MULTILINE)) == [
        ["Flour", "Height\n(mm)", "Score of\nthe panel"],
        ["Rye, with\nseeds", "12.0", "5.1 (1.2)"],
        ["Spelt", "11.0", "4.9 (1.1)"],
    ]


SPACED = """Table 2. Heights in mm, mean (SD)

                           Oven
Measure            Steam (n = 18)    Dry (n = 17)      t      p
----------------------------------------------------------------
Height
  before            92.4 (6.1)        86.0 (5.8)     3.23   .003
  after             95.1 (6.0)        88.0 (5.5)     3.65   .001
Crumb score          5.1 (1.2)         4.9 (1.1)     0.51   .61
* p < .05.  M and SD are shown.

The loaves rose in the cellar and were cut by another baker.
"""


def test_columns_set_by_spaces():
    document = text_document(SPACED)
    (table,) = document.tables
    assert grid(document)[1:] == [
        ["Measure", "Steam (n = 18)", "Dry (n = 17)", "t", "p"],
        ["Height", "", "", "", ""],
        ["before", "92.4 (6.1)", "86.0 (5.8)", "3.23", ".003"],
        ["after", "95.1 (6.0)", "88.0 (5.5)", "3.65", ".001"],
        ["Crumb score", "5.1 (1.2)", "4.9 (1.1)", "0.51", ".61"],
    ]
    assert [cell.indent for cell in table.cells if cell.column == 0 and cell.row > 1] == [0, 1, 1, 0]
    assert (table.label, table.header_rows, len(table.notes)) == ("Table 2", 2, 1)
    assert table.doubts == ("its columns were inferred from the spaces between them",)
    assert [passage.kind for passage in document.passages] == ["caption", "note", "body"]


@pytest.mark.parametrize("ruled", [True, False])
def test_headings_over_several_columns(ruled):
    over = "             Coached          Control\n"
    rule = "           ------------    ------------\n" if ruled else ""
    text = over + rule + "Score      M       SD      M       SD\n"
    text += "Crumb      5.1     1.2     4.9     1.1\nCrust      4.1     1.0     3.9     0.9\n"
    found = {cell.text: (cell.column, cell.column_span) for cell in the_table(text).cells if cell.row == 0}
    assert found["Coached"] == (1, 2) and found["Control"] == (3, 2)


def test_headings_over_rounds_of_columns_and_one_of_their_own():
    text = """                 Steam          Dry
            M      SD     M      SD     t      p
--------------------------------------------------
Crumb       5.1    1.2    4.9    1.1    0.61   .55
Crust       4.1    1.0    3.9    0.9    0.74   .46
"""
    table = the_table(text)
    found = {cell.text: (cell.column, cell.column_span) for cell in table.cells if cell.row < 2}
    assert found["Steam"] == (1, 2) and found["Dry"] == (3, 2) and found["t"] == (5, 1)
    assert (table.columns, table.header_rows) == (7, 2)


def test_a_first_column_without_a_heading_and_rows_that_are_not_full():
    text = """             1           2
---------------------------------
1. Height    1
2. Volume    .52 (88)    1
3. Acidity   −.17 (85)   .09 (84)
"""
    assert grid(text_document("They rose.\n\n" + text)) == [
        ["", "1", "2"], ["1. Height", "1", ""], ["2. Volume", ".52 (88)", "1"], ["3. Acidity", "−.17 (85)", ".09 (84)"],
    ]  # fmt: skip


def test_columns_set_by_tabs():
    document = text_document("They rose.\n\nFlour\tM\tSD\nRye\t5.1\t1.2\nSpelt\t\t1.1\n")
    assert grid(document) == [["Flour", "M", "SD"], ["Rye", "5.1", "1.2"], ["Spelt", "", "1.1"]]
    assert not document.tables[0].doubts
    uneven = the_table("Flour\tM\tSD\nRye\t5.1\n")
    assert "different numbers" in uneven.doubts[0]


@pytest.mark.parametrize(
    "text",
    [
        "            Df Sum Sq Mean Sq F value\nbench        2  10.33   5.166   4.846 0.0159\nrest        27  28.78   1.066\n",
        "Rye   5.1   1.2\n   Spelt    4.9   1.1\n  Oat  4.7          1.0\n",
    ],
)
def test_columns_that_cannot_be_told_are_left_unread(text):
    document = text_document("They rose.\n\n" + text)
    assert not document.tables and document.passages[1].kind in ("table", "body")


INSERTED = """They rose.

<table class="loaves">
<caption>Table 4. Heights</caption>
<thead>
<tr><th rowspan=2>Flour</th><th colspan=2>Oven</th></tr>
<tr><th>Steam</th><th>Dry</th></tr>
</thead>

<tr><td>All</td><td>92.4 (6.1)</td><td><b>86.0</b><sup>a</sup></td></tr>
<tr><td>&nbsp;&nbsp;rye</td><td>p &lt; .05</td>
<td>4.9</td></tr>
</table>
Note. M (SD).
"""


def test_a_table_in_html():
    document = text_document(INSERTED)
    (table,) = document.tables
    assert grid(document) == [
        ["Flour", "Oven", ""], ["", "Steam", "Dry"], ["All", "92.4 (6.1)", "86.0a"], ["rye", "p < .05", "4.9"],
    ]  # fmt: skip
    assert (table.label, table.header_rows, len(table.notes)) == ("Table 4", 2, 1)
    assert [cell.indent for cell in table.cells if cell.column == 0] == [0, 0, 1]
    assert {cell.text: cell.passage.line for cell in table.cells}["4.9"] == 12
    assert {cell.text: cell.passage.marks for cell in table.cells}["86.0a"] == "    ^"
    assert not text_document("They rose.\n\n<table>\n<tr><td>1</td>\n").tables


def test_two_tables_in_a_row():
    text = "Table 1. A\n\n|a|b|\n|-|-|\n|1|2|\n\nTable 2. B\n\n|c|d|\n|-|-|\n|3|4|\n\nNote. More.\n"
    tables = text_document(text).tables
    assert [(table.label, len(table.notes)) for table in tables] == [("Table 1", 0), ("Table 2", 1)]


def test_a_file_opens_with_its_tables():
    document = open_document(PIPES.encode())
    assert document.tables[0].label == "Table 2" and document.format == "markdown"


@given(st.text(st.sampled_from("ab1.|-+=: \t\n*─│"), max_size=160))
def test_nothing_breaks_and_lines_hold(text):
    lines = text.split("\n")
    for table in text_document(text).tables:
        places = [
            (c.row + d, c.column + r)
            for c in table.cells
            for d in range(c.row_span)
            for r in range(c.column_span)
        ]
        assert len(places) == len(set(places))
        for cell in table.cells:
            assert cell.passage.line is not None and 1 <= cell.passage.line <= len(lines)
            assert not cell.passage.marks or len(cell.passage.marks) == len(cell.text)


@given(
    st.lists(
        st.lists(st.sampled_from(["", "5.1", "M (SD)", "a b", "<.001"]), min_size=3, max_size=3),
        min_size=1,
        max_size=5,
    )
)
def test_cells_come_back_as_they_were_written(rows):
    rows = [["Flour", "M", "p"], *rows]
    text = "\n".join("| " + " | ".join(row) + " |" for row in [rows[0], ["---"] * 3, *rows[1:]])
    assert grid(text_document(text)) == rows


@pytest.mark.parametrize(
    "line", ["a   b   c", "|a|b", "| a | b |", "+--+--+", "-----", "a\tb", "   x\n---- ----", "|-|-|"]
)
def test_a_file_of_nothing_but_such_lines_takes_little_time(line):
    start = time.process_time()
    text_document("\n".join([line] * 6000))
    text_document("\n\n".join([line, "one   two"] * 3000))
    assert time.process_time() - start < 4
