"""Tables of Word documents: cells, spans, captions, notes."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.documents.word.making import grid, math, opened_docx, p, r, tbl, tc, tr

HEAD = ("Flour", "Steam (n = 18)", "Dry (n = 17)")
ROWS = (HEAD, ("Rye", "92.4 (6.1)", "86.0 (5.8)"), ("Spelt", "90.2 (5.5)", "87.1 (6.0)"))
CAPTION = "Table 2. Heights of the loaves (mm)."


def merged(kind=""):
    value = f' w:val="{kind}"' if kind else ""
    return f"<w:vMerge{value}/>"


def wide(columns):
    return f'<w:gridSpan w:val="{columns}"/>'


def spans(document, at=0):
    return {
        cell.text: (cell.row, cell.column, cell.row_span, cell.column_span)
        for cell in document.tables[at].cells
        if cell.text
    }


def test_a_table_with_its_caption_and_notes():
    document = opened_docx(
        p("Results", style="Heading1"),
        p("They rose."),
        p(CAPTION),
        tbl(*ROWS),
        p("Note. M (SD) are shown."),
        p("* p < .05."),
        p("The panel scored them."),
    )
    (table,) = document.tables
    assert grid(document) == [list(row) for row in ROWS]
    assert (table.rows, table.columns, table.label, table.section, table.before) == (
        3,
        3,
        "Table 2",
        "Results",
        3,
    )
    assert table.caption is document.passages[2] and table.notes == document.passages[3:5]
    assert [passage.kind for passage in document.passages] == [
        "heading",
        "body",
        "caption",
        "note",
        "note",
        "body",
    ]
    assert [passage.table for passage in document.passages[2:5]] == ["Table 2"] * 3
    cell = table.cells[4].passage
    assert (cell.text, cell.kind, cell.table, cell.section) == ("92.4 (6.1)", "table", "Table 2", "Results")
    assert table.header_rows == 0 and not table.doubts


@pytest.mark.parametrize(
    ("paragraphs", "caption"),
    [
        ((p("Table 2"), p("Heights of the loaves")), "Table 2\nHeights of the loaves"),
        ((p(r("Table 2", "<w:b/>")), p(r("Heights", "<w:i/>"))), "Table 2\nHeights"),
        ((p("TABLE 2 Heights of the loaves"),), "TABLE 2 Heights of the loaves"),
        ((p("Table 2 - Heights"),), "Table 2 - Heights"),
        ((p("Table 2 heights of the loaves"),), "Table 2 heights of the loaves"),
        ((p("Table 2. Heights."), p("Values are mean (SD).")), "Table 2. Heights."),
        ((p("Table 2. Heights."), p("(forty loaves)")), "Table 2. Heights."),
        ((p("Table 2. Heights.", style="Heading2"),), "Table 2. Heights."),
    ],
)
def test_captions_above(paragraphs, caption):
    (table,) = opened_docx(*paragraphs, tbl(*ROWS)).tables
    assert table.caption is not None
    assert (table.label, table.caption.text, table.caption.kind) == ("Table 2", caption, "caption")


def test_a_sentence_about_a_table_is_no_caption():
    document = opened_docx(p("Table 2 shows the heights of the loaves."), tbl(*ROWS))
    assert document.tables[0].caption is None and document.passages[0].kind == "body"
    assert document.tables[0].cells[0].passage.table == "unlabelled table 1"


def test_a_caption_without_rows_is_told():
    document = opened_docx(
        p("Table 1. Heights."), tbl(*ROWS), p("Table 2. Scores."), p("They rose."), p("Figure 1. Loaves.")
    )
    assert [passage.table for passage in document.passages] == ["Table 1", "Table 2", None, None]
    assert document.notes == (
        "1 table has a caption but no rows here (a picture, or in another file): Table 2.",
    )


def test_captions_below():
    document = opened_docx(
        p("They rose."), tbl(*ROWS), p("Table 1. Heights."), p("Note. Rye."),
        p("More."), tbl(*ROWS), p("Table 2. Scores."), p("The end."),
    )  # fmt: skip
    assert [table.label for table in document.tables] == ["Table 1", "Table 2"]
    assert [len(table.notes) for table in document.tables] == [1, 0]


def test_captions_between_tables_go_with_the_custom_of_the_document():
    above = opened_docx(
        tbl(*ROWS), p("Table 2. Heights."), tbl(*ROWS), p("Text."), p("Table 3. More."), tbl(*ROWS)
    )
    assert [table.label for table in above.tables] == ["", "Table 2", "Table 3"]
    below = opened_docx(
        p("Text."), tbl(*ROWS), p("Table 1. Heights."), tbl(*ROWS), p("Table 2. More."), p("End.")
    )
    assert [table.label for table in below.tables] == ["Table 1", "Table 2"]


@pytest.mark.parametrize(
    "note",
    [
        p("Note. M (SD) are shown."),
        p("Notes: rye loaves only"),
        p("Values are mean (SD), n = 20 per cell."),
        p("Abbreviations: SD, standard deviation."),
        p("SD = standard deviation; CI = confidence interval."),
        p(r("a", '<w:vertAlign w:val="superscript"/>'), r("Adjusted for flour.")),
        p("a Adjusted for flour."),
        p("*p < .05. **p < .01."),
        p("† Compared with dry ovens."),
        p("* Plus–minus values are means and standard deviations."),
        p("Standard errors in parentheses."),
        p("P values are from Fisher’s exact test."),
        p("P by Fisher’s exact test."),
        p("N = 412 doughs."),
        p(r("Loaves of the first trial alone", '<w:sz w:val="16"/>')),
    ],
)
def test_notes_below(note):
    text = p("The panel scored the loaves in the cellar on the next day.")
    document = opened_docx(text, p(CAPTION), tbl(*ROWS), note, text)
    assert len(document.tables[0].notes) == 1 and document.passages[-1].kind == "body"


@pytest.mark.parametrize(
    "text",
    [
        "However, the apprentices, who baked at noon, did better.",
        "Results of the second trial are shown in Table 3.",
        "A second panel scored them.",
        "In the cellar, the loaves rose.",
    ],
)
def test_text_below_a_table_is_no_note(text):
    document = opened_docx(p(CAPTION), tbl(*ROWS), p(text))
    assert not document.tables[0].notes and document.passages[-1].kind == "body"


def test_merged_cells():
    document = opened_docx(
        tbl(
            (tc("Flour", merged("restart")), tc("Oven", wide(2)), tc("p", merged("restart"))),
            (tc("", merged()), "Steam", "Dry", tc("", merged())),
            ("Rye", "92.4", "86.0", ".003"),
        )
    )
    assert spans(document) == {
        "Flour": (0, 0, 2, 1), "Oven": (0, 1, 1, 2), "p": (0, 3, 2, 1), "Steam": (1, 1, 1, 1), "Dry": (1, 2, 1, 1),
        "Rye": (2, 0, 1, 1), "92.4": (2, 1, 1, 1), "86.0": (2, 2, 1, 1), ".003": (2, 3, 1, 1),
    }  # fmt: skip


def test_rows_that_begin_late_and_cells_merged_the_old_way():
    late = tr("Steam", "Dry", properties='<w:gridBefore w:val="1"/>')
    old = tr("Rye", tc("92.4", '<w:hMerge w:val="restart"/>'), tc("", "<w:hMerge/>"))
    found = spans(opened_docx(tbl(late, old)))
    assert found == {"Steam": (0, 1, 1, 1), "Dry": (0, 2, 1, 1), "Rye": (1, 0, 1, 1), "92.4": (1, 1, 1, 2)}


def test_a_merge_that_goes_on_from_nothing_is_a_cell():
    document = opened_docx(tbl((tc("Rye", merged()), "1"), ("Spelt", "2")))
    assert grid(document) == [["Rye", "1"], ["Spelt", "2"]]


@pytest.mark.parametrize(
    "mark", ["<w:tblHeader/>", '<w:cnfStyle w:val="100000000000"/>', '<w:cnfStyle w:firstRow="1"/>']
)
def test_head_rows(mark):
    (table,) = opened_docx(tbl(tr(*ROWS[0], properties=mark), *ROWS[1:])).tables
    assert table.header_rows == 1
    assert [cell.heading for cell in table.cells] == [True] * 3 + [False] * 6


def test_a_head_is_never_the_whole_table():
    whole = [tr(*row, properties="<w:tblHeader/>") for row in ROWS]
    assert opened_docx(tbl(*whole)).tables[0].header_rows == 0


def test_paragraphs_marks_and_equations_in_cells():
    raised = p(r("5"), r("a", '<w:vertAlign w:val="superscript"/>'))
    document = opened_docx(tbl(("M\n(SD)", raised), ("χ²", f"<w:p>{math('p<.001')}</w:p>")))
    assert grid(document) == [["M\n(SD)", "5a"], ["χ2", "p < .001"]]
    assert [cell.passage.marks for cell in document.tables[0].cells] == ["", " ^", " ^", ""]


@pytest.mark.parametrize(
    "moved",
    [
        lambda depth: tc("rye", paragraph=f'<w:ind w:left="{100 + 240 * depth}"/>'),
        lambda depth: tc("rye", paragraph=f'<w:ind w:start="100" w:firstLine="{240 * depth}"/>'),
        lambda depth: tc(
            "rye", paragraph=f'<w:numPr><w:ilvl w:val="{depth - 1}"/></w:numPr>' if depth else ""
        ),
        lambda depth: tc("\u00a0" * 3 * depth + "rye"),
        lambda depth: tc("   " * depth + "rye"),
        lambda depth: tc(f"<w:p><w:r>{'<w:tab/>' * depth}<w:t>rye</w:t></w:r></w:p>"),
    ],
)
def test_indents_of_the_first_column(moved):
    document = opened_docx(tbl(*[(moved(depth), "9.1") for depth in (0, 1, 2, 1, 0)]))
    table = document.tables[0]
    assert [cell.indent for cell in table.cells if cell.column == 0] == [0, 1, 2, 1, 0]
    assert {cell.text for cell in table.cells} == {"rye", "9.1"}
    assert all(cell.indent == 0 for cell in table.cells if cell.column)


def test_centred_stubs_are_not_moved_in():
    cells = (tc("Rye", paragraph='<w:ind w:left="400"/><w:jc w:val="center"/>'), "1")
    assert opened_docx(tbl(cells, ("Spelt", "2"))).tables[0].cells[0].indent == 0


def test_frames_are_no_tables():
    inner = tbl(*ROWS)
    for frame in (tbl((f"{p('Figure 1. Loaves.')}{inner}<w:p/>",)), tbl((p("Left."), f"{inner}<w:p/>"))):
        document = opened_docx(frame)
        assert len(document.tables) == 1 and grid(document) == [list(row) for row in ROWS]
    equation = opened_docx(tbl(("", f"<w:p>{math('t(22)=1.71')}</w:p>", "(1)")))
    assert not equation.tables and [x.text for x in equation.passages] == ["t(22) = 1.71", "(1)"]
    long = "The apprentices baked four loaves on each of the mornings. " * 9
    prose = opened_docx(tbl(("Abstract", long), ("Keywords", "rye, spelt")))
    assert not prose.tables and len(prose.passages) == 4


def test_a_small_table_within_a_cell_is_told_in_lines():
    document = opened_docx(tbl(HEAD, ("Rye", f"{tbl(('5', '6'), ('7', '8'))}<w:p/>", "86.0 (5.8)"), ROWS[2]))
    assert len(document.tables) == 1 and grid(document)[1] == ["Rye", "5 6\n7 8", "86.0 (5.8)"]


def test_captions_and_notes_in_rows_of_their_own():
    first, last = tr(tc(CAPTION, wide(3))), tr(tc("Note. M (SD) are shown.", wide(3)))
    document = opened_docx(tbl(first, tr(*HEAD, properties="<w:tblHeader/>"), *ROWS[1:], last))
    (table,) = document.tables
    assert (
        table.label == "Table 2"
        and table.rows == 3
        and [note.text for note in table.notes] == ["Note. M (SD) are shown."]
    )
    beside = opened_docx(tbl(*ROWS, ("Note. M (SD) are shown for all of the loaves.", "", "")))
    assert (beside.tables[0].rows, len(beside.tables[0].notes)) == (3, 1)
    heading = opened_docx(tbl(HEAD, tr(tc("Second trial", wide(3))), *ROWS[1:]))
    assert heading.tables[0].rows == 4


def test_deleted_rows_and_cells_are_left_out_and_new_ones_kept():
    gone = tr("Oat", "1", "2", properties="<w:del w:id='1'/>")
    new = tr("Emmer", "3", "4", properties="<w:ins w:id='2'/>")
    cell = tr("Rye", tc("9", "<w:cellDel w:id='3'/>"), "92.4", "86.0")
    assert grid(opened_docx(tbl(HEAD, gone, new, cell)))[1:] == [["Emmer", "3", "4"], ["Rye", "92.4", "86.0"]]


def test_rows_and_cells_in_content_controls():
    held = f"<w:sdt><w:sdtContent>{tr('Rye', '1')}</w:sdtContent></w:sdt>"
    cell = f"<w:tr><w:sdt><w:sdtContent>{tc('Spelt')}</w:sdtContent></w:sdt>{tc('2')}</w:tr>"
    assert grid(opened_docx(tbl(held, cell))) == [["Rye", "1"], ["Spelt", "2"]]


def test_a_footnote_in_a_cell_is_a_note_of_the_table():
    mark = '<w:r><w:footnoteReference w:id="1"/></w:r>'
    rows = (("Rye", f"<w:p>{r('5.1')}{mark}</w:p>"), ("Spelt", "4.9"))
    document = opened_docx(tbl(*rows), footnotes=f'<w:footnote w:id="1">{p("One loaf fell.")}</w:footnote>')
    assert grid(document)[0] == ["Rye", "5.1"]
    assert [note.text for note in document.tables[0].notes] == ["One loaf fell."]


def test_absurd_spans_are_bounded():
    document = opened_docx(tbl((tc("a", wide(10**9)), "b"), ("c", tc("d", wide("x")))))
    assert document.tables[0].columns == 1001


@settings(max_examples=25, deadline=None)
@given(st.data(), st.integers(2, 5), st.integers(2, 5))
def test_cells_stand_where_they_were_written(data, height, width):
    """Rows cut into spans at random, some going on below: every cell keeps its place and none overlap."""
    rows, want, above = [], {}, {}
    for row in range(height):
        cells, column = [], 0
        while column < width:
            columns = data.draw(st.integers(1, width - column))
            goes_on = (column, columns) in above and data.draw(st.booleans())
            if goes_on:
                name = above[column, columns]
                want[name] = (*want[name][:2], want[name][2] + 1, columns)
                cells.append(tc("", wide(columns) + merged()))
            else:
                name = f"{row}/{column}"
                want[name] = (row, column, 1, columns)
                cells.append(tc(name, wide(columns) + merged("restart")))
            above = {key: value for key, value in above.items() if value != name} | {(column, columns): name}
            column += columns
        above = {key: name for key, name in above.items() if want[name][0] + want[name][2] == row + 1}
        rows.append(cells)
    document = opened_docx(tbl(*rows))
    assert not document.tables or spans(document) == want
