"""Tables on drawn PDF pages: every cell at its place with its text; both engines must agree on each."""

from __future__ import annotations

import pytest

from tests.documents.pdf.making import (
    ITALIC,
    PROSE,
    ROMAN,
    SYMBOL,
    line,
    opened,
    pdf,
    prose,
    rich,
    texts,
    wrapped,
)
from tests.documents.pdf.tabling import Drawn, band, grid, spans, the_table, wanted

MINUS = "\u2212"
BASELINE = [
    ("Characteristic", "Trained (n = 24)", "Untrained (n = 22)", "p"),
    ("Age, years", "31.4 (8.2)", "29.9 (7.6)", ".52"),
    ("Loaves a week", "12.1 (3.4)", "11.8 (2.9)", ".74"),
    ("Loaf height, cm", "9.41 (1.20)", "8.52 (1.31)", ".021"),
    ("Crumb score", "5.2 (0.9)", "4.6 (1.1)", ".048"),
]


@pytest.fixture(params=["pdfium", "pdfminer"])
def engine(request):
    return request.param


def page_with(draw, caption="Table 1. Apprentices before the training.", notes=(), size=9):
    """A page with a paragraph, a caption, a table that `draw` draws, notes, and a paragraph."""

    def page(canvas):
        end = wrapped(canvas, 60, 60, 475, prose(1))
        if caption:
            line(canvas, 60, end + 20, caption, size=size)
        end = draw(canvas, end + 42)
        for at, note in enumerate(notes):
            line(canvas, 60, end + 4 + 10 * at, note, size=8)
        wrapped(canvas, 60, end + 40 + 10 * len(notes), 475, prose(4))

    return page


def test_three_rules(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc")
    notes = ("Note. Values are mean (SD).", "* p < .05.")
    document = opened(pdf(page_with(lambda c, y: drawn.draw(c, y, BASELINE), notes=notes)), reader=engine)
    table = the_table(document)
    assert grid(table) == wanted(BASELINE)
    assert (table.label, table.header_rows, table.doubts) == ("Table 1", 1, ())
    assert table.caption in document.passages and table.caption.table == "Table 1"
    assert table.caption.text == "Table 1. Apprentices before the training."
    assert " ".join(note.text for note in table.notes) == " ".join(notes)
    assert all(note in document.passages and note.kind == "note" for note in table.notes)
    assert document.passages[table.before - 1] is table.caption
    assert not texts(document, "table") and len(texts(document)) == 2


def test_cells_keep_their_boxes(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc")
    table = the_table(opened(pdf(page_with(lambda c, y: drawn.draw(c, y, BASELINE))), reader=engine))
    cell = next(cell for cell in table.cells if cell.text == "8.52 (1.31)")
    place = cell.passage.place(0, 4)
    left, top, right, bottom = place.box
    assert place.page == 1 and place.table == "Table 1" and place.quote == "8.52"
    assert 365 < left < right < 390 and 6 < bottom - top < 12


@pytest.mark.parametrize("align", ["lccc", "lrrr", "llll", "lddd"])
@pytest.mark.parametrize("rules", [(0, 1, -1), (1, -1), (1,), (), range(-1, 6)])
def test_rules_and_alignments(engine, align, rules):
    rows = [
        ("Bench", "Mean", "SD", "Range"),
        ("rye", "9.41", "1.20", "7.1 to 11.9"),
        ("spelt", "10.52", "1.31", "6.8 to 13.0"),
        ("wheat", "8.9", "0.98", "6.0 to 10.4"),
        ("oat and rye", f"{MINUS}0.70", "11.42", "5.9 to 9.9"),
    ]
    drawn = Drawn((60, 240, 330, 420), align, rules=tuple(rules))
    table = the_table(opened(pdf(page_with(lambda c, y: drawn.draw(c, y, rows))), reader=engine))
    assert grid(table) == wanted(rows)
    assert (table.header_rows, table.doubts) == (1, ())


@pytest.mark.parametrize("rules", [True, False])
def test_headers_over_several_columns(engine, rules):
    rows = [
        (None, "Before", None, None, "After", None, None),
        ("Score", "M", "SD", "n", "M", "SD", "n"),
        ("Crumb", "4.6", "1.1", "24", "5.2", "0.9", "23"),
        ("Crust", "5.0", "1.3", "24", "5.1", "1.2", "24"),
        ("Aroma", "3.9", "0.8", "22", "4.4", "1.0", "21"),
    ]
    drawn = Drawn((60, 200, 250, 300, 370, 420, 470), "lcccccc", rules=(0, 2, -1))

    def draw(canvas, y):
        end = drawn.draw(canvas, y, [("",) * 7, *rows[1:]])
        drawn.cell(canvas, 2, y, "Before")
        drawn.cell(canvas, 5, y, "After")
        if rules:
            drawn.rule(canvas, y + 3, 190, 310)
            drawn.rule(canvas, y + 3, 360, 480)
        return end

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert grid(table) == wanted(rows)
    assert spans(table) == {"Before": 3, "After": 3}
    assert (table.header_rows, table.doubts) == (2, ())


def test_headers_of_two_lines_are_one(engine):
    rows = [
        ("", "Loaf", "Mean crumb", ""),
        ("Bench", "height (cm)", "score (1–7)", "n"),
        ("rye", "9.41", "5.2", "24"),
        ("spelt", "8.52", "4.6", "22"),
        ("wheat", "8.90", "4.9", "25"),
    ]
    drawn = Drawn((60, 220, 340, 450), "lccc", rules=(0, 2, -1))
    table = the_table(opened(pdf(page_with(lambda c, y: drawn.draw(c, y, rows))), reader=engine))
    assert grid(table) == [["Bench", "Loaf height (cm)", "Mean crumb score (1–7)", "n"], *wanted(rows[2:])]
    assert table.header_rows == 1


def test_sub_headings_and_indented_rows(engine):
    rows = [
        ("Variable", "Trained", "Untrained", "p"),
        ("Sex, n (%)", None, None, ".61"),
        ("Female", "12 (50.0)", "13 (59.1)", None),
        ("Male", "12 (50.0)", "9 (40.9)", None),
        ("Shift", None, None, None),
        ("Morning", "20 (83.3)", "15 (68.2)", ".23"),
        ("Night", "4 (16.7)", "7 (31.8)", None),
        ("Age, years", "31.4 (8.2)", "29.9 (7.6)", ".52"),
    ]
    drawn = Drawn((60, 260, 380, 500), "lccc", indents={2: 12, 3: 12, 5: 12, 6: 12})
    table = the_table(opened(pdf(page_with(lambda c, y: drawn.draw(c, y, rows))), reader=engine))
    assert grid(table) == wanted(rows) and table.doubts == ()
    labels = {cell.row: cell.indent for cell in table.cells if cell.column == 0}
    assert labels == {0: 0, 1: 0, 2: 1, 3: 1, 4: 0, 5: 1, 6: 1, 7: 0}


def test_labels_and_cells_of_several_lines(engine):
    rows = [
        ("Measure", "Estimate (95% CI)", "p"),
        ("Height of the loaf after", "0.89 (0.14,", ".021"),
        ("proofing overnight (cm)", "1.64)", None),
        ("Crumb score", "0.60 (0.01, 1.19)", ".048"),
        ("Share of loaves that were", "1.10 (0.80, 1.51)", ".56"),
        ("sold", None, None),
    ]
    drawn = Drawn((60, 260, 450), "llr")
    heights = [0, 18, 28, 46, 64, 74]

    def draw(canvas, y):
        for at, row in zip(heights, rows, strict=True):
            for column, text in enumerate(row):
                if text:
                    drawn.cell(canvas, column, y + at, text)
        for at in (-10, 6, 80):
            drawn.rule(canvas, y + at)
        return y + 90

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert grid(table) == [
        ["Measure", "Estimate (95% CI)", "p"],
        ["Height of the loaf after proofing overnight (cm)", "0.89 (0.14, 1.64)", ".021"],
        ["Crumb score", "0.60 (0.01, 1.19)", ".048"],
        ["Share of loaves that were sold", "1.10 (0.80, 1.51)", ".56"],
    ]


def test_standard_errors_stay_rows_of_their_own(engine):
    rows = [
        ("", "(1)", "(2)"),
        ("Training", "0.412***", "0.398**"),
        (None, "(0.101)", "(0.122)"),
        ("Proofing hours", f"{MINUS}0.021", "0.033*"),
        (None, "(0.018)", "(0.016)"),
        ("Constant", "3.905***", "3.771***"),
        (None, "(0.220)", "(0.241)"),
        ("Observations", "46", "46"),
    ]
    drawn = Drawn((60, 300, 420), "lcc")
    table = the_table(opened(pdf(page_with(lambda c, y: drawn.draw(c, y, rows))), reader=engine))
    assert grid(table) == wanted(rows) and table.doubts == ()


def test_a_triangle_of_correlations(engine):
    names = ("1. Height", "2. Crumb", "3. Crust", "4. Aroma")
    values = (".41**", ".30*", ".12", f"{MINUS}.08", ".55***", ".27*")
    rows = [("Variable", "M", "SD", "1", "2", "3", "4")]
    for at, name in enumerate(names):
        mine = values[at * (at - 1) // 2 : at * (at + 1) // 2]
        rows.append((name, f"{5 + at}.1", f"1.{at}2", *mine, *[None] * (4 - len(mine))))
    drawn = Drawn((60, 180, 230, 290, 350, 410, 470), "llldddl")
    table = the_table(opened(pdf(page_with(lambda c, y: drawn.draw(c, y, rows))), reader=engine))
    assert grid(table) == wanted(rows) and table.doubts == ()


def test_narrow_gaps_between_columns(engine):
    """Gaps of 0.6 em: wider than any space within a cell, narrower than most gaps of a table."""
    rows = [("Bench", "M (SD)", "M (SD)", "M (SD)")]
    rows += [
        (f"bench {at}", f"{at}.41 (1.2{at})", f"{at}.52 (1.3{at})", f"{at}.60 (0.9{at})")
        for at in range(1, 8)
    ]

    def draw(canvas, y):
        width = canvas.stringWidth("1.41 (1.21)", ROMAN, 9)
        step = width + 0.6 * 9
        drawn = Drawn((60, 110, 110 + step, 110 + 2 * step), "llll", right=300)
        return drawn.draw(canvas, y, rows)

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert grid(table) == wanted(rows)


def test_parts_of_one_number_stay_together(engine):
    rows = [
        ("Outcome", "Trained", "Untrained", "OR (95% CI)", "p"),
        ("Sold", "12/24 (50.0)", "9/22 (40.9)", "1.5 (1.2–1.9)", "< 0.001"),
        ("Burnt", "2/24 (8.3)", "3/22 (13.6)", "0.6 (0.1–3.8)", "0.56"),
        ("Height", "9.4 ± 1.2", "8.5 ± 1.3", "0.9 (0.2 to 1.6)", "= 0.02"),
        ("Weight", "812.3 ± 40.1", "798.0 ± 38.8", f"{MINUS}1.1 ({MINUS}2.0, {MINUS}0.2)", "0.02"),
    ]
    drawn = Drawn((60, 200, 300, 410, 500), "lcccl")
    table = the_table(opened(pdf(page_with(lambda c, y: drawn.draw(c, y, rows))), reader=engine))
    assert grid(table) == wanted(rows) and table.doubts == ()


def test_every_cell_ruled_and_rows_shaded(engine):
    rows = BASELINE
    drawn = Drawn((64, 260, 390, 520), "lccc", rules=range(-1, 6), leading=16)

    def ruled(canvas, y):
        end = drawn.draw(canvas, y, rows)
        for x in (60, 200, 325, 455, 535):
            canvas.line(x, 842 - (y - 12.8), x, 842 - (end - 16 + 6.4))
        return end

    def shaded(canvas, y):
        for at in range(1, 5, 2):
            band(canvas, 60, y + 16 * at - 11, 535, y + 16 * at + 5)
        return Drawn((64, 260, 390, 520), "lccc", rules=(), leading=16).draw(canvas, y, rows)

    for draw in (ruled, shaded):
        table = the_table(opened(pdf(page_with(draw)), reader=engine))
        assert grid(table) == wanted(rows) and table.doubts == ()


def test_rules_drawn_as_thin_boxes_cell_by_cell(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc", rules=())

    def draw(canvas, y):
        for height in (y - 10, y + 4, y + 54):
            for left, right in ((60, 200), (200, 325), (325, 455), (455, 535)):
                canvas.rect(left, 842 - height, right - left, 0.5, stroke=0, fill=1)
        return drawn.draw(canvas, y, BASELINE)

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert grid(table) == wanted(BASELINE) and table.header_rows == 1


def test_a_caption_below(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc")

    def page(canvas):
        end = wrapped(canvas, 60, 60, 475, prose(1))
        end = drawn.draw(canvas, end + 30, BASELINE)
        line(canvas, 60, end + 8, "Table 3: Apprentices before the training.", size=9)
        wrapped(canvas, 60, end + 40, 475, prose(4))

    table = the_table(opened(pdf(page), reader=engine))
    assert grid(table) == wanted(BASELINE)
    assert table.label == "Table 3" and table.caption.text.startswith("Table 3:")


@pytest.mark.parametrize("rules", [(0, 1, -1), ()])
def test_in_one_of_two_columns(engine, rules):
    rows = [
        ("Bench", "M", "SD"),
        ("rye", "9.41", "1.20"),
        ("spelt", "8.52", "1.31"),
        ("wheat", "8.90", "0.98"),
    ]
    drawn = Drawn((60, 180, 240), "lcc", right=285, rules=rules)

    def page(canvas):
        end = wrapped(canvas, 60, 80, 225, PROSE)
        line(canvas, 60, end + 10, "Table 2. Height of the loaves (cm).", size=9)
        end = drawn.draw(canvas, end + 30, rows)
        wrapped(canvas, 60, end + 20, 225, "Left column goes on. " + PROSE)
        wrapped(canvas, 310, 80, 225, "Right column begins. " + PROSE + " " + PROSE + " " + PROSE)

    document = opened(pdf(page), reader=engine)
    assert grid(the_table(document)) == wanted(rows)
    body = " ".join(texts(document))
    assert body.index("Left column goes on") < body.index("Right column begins") and "9.41" not in body


def test_across_two_columns(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc")

    def page(canvas):
        line(canvas, 60, 70, "Table 2. Apprentices before the training.", size=9)
        end = drawn.draw(canvas, 92, BASELINE)
        wrapped(canvas, 60, end + 30, 225, "Left column begins. " + PROSE + " " + PROSE)
        wrapped(canvas, 310, end + 30, 225, "Right column begins. " + PROSE + " " + PROSE)

    document = opened(pdf(page), reader=engine)
    assert grid(the_table(document)) == wanted(BASELINE)
    assert "9.41" not in " ".join(texts(document))


def test_on_a_rotated_page(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc")

    def landscape(canvas):
        canvas.translate(595, 0)
        canvas.rotate(90)
        canvas._pagesize = (842, 595)
        line(canvas, 60, 80, "Table 2. Apprentices before the training.", size=9)
        end = drawn.draw(canvas, 100, BASELINE)
        line(canvas, 60, end + 4, "Note. Values are mean (SD).", size=8)
        canvas._pagesize = (595, 842)

    table = the_table(opened(pdf(landscape), reader=engine))
    assert grid(table) == wanted(BASELINE) and table.notes[0].text == "Note. Values are mean (SD)."
    left, top, right, bottom = (
        next(c for c in table.cells if c.text == "9.41 (1.20)").passage.place(0, 11).box
    )
    # Read turned, but placed as the page is shown: the cell runs up the page.
    assert bottom - top > 30 > 12 > right - left


@pytest.mark.parametrize("again", ["label", "head", "nothing"])
def test_over_two_pages(engine, again):
    rows = [("Bench", "M", "SD", "n")]
    rows += [
        (
            f"bench {'abcdefghijklmnopqrstuvwxyz'[at % 26]}{at}",
            f"{at % 7 + 1}.4{at % 10}",
            f"1.{at % 9}2",
            str(20 + at),
        )
        for at in range(50)
    ]
    drawn = Drawn((60, 260, 390, 500), "lddr", rules=(0, 1, -1))

    def first(canvas):
        end = wrapped(canvas, 60, 60, 475, prose(1))
        line(canvas, 60, end + 20, "Table 2. All benches.", size=9)
        drawn.draw(canvas, end + 40, rows[:41])

    def second(canvas):
        y = 70.0
        if again == "label":
            line(canvas, 60, y, "Table 2 (continued)", size=9)
            y += 20
        if again == "nothing":
            end = Drawn(drawn.edges, drawn.align, rules=(-1,)).draw(canvas, y, rows[41:])
        else:
            end = drawn.draw(canvas, y, [rows[0], *rows[41:]])
        wrapped(canvas, 60, end + 40, 475, prose(4))

    table = the_table(opened(pdf(first, second), reader=engine))
    assert grid(table) == wanted(rows)
    assert (table.header_rows, table.doubts) == (1, ())
    assert {int(cell.passage.layout.pages[0]) for cell in table.cells} == {1, 2}


def test_a_hundred_rows(engine):
    rows = [("Bench", "M (SD)", "Median [IQR]", "n (%)")]
    rows += [
        (f"bench {at} rye", f"{at % 7}.41 (1.{at % 90 + 10})", f"{at % 9} [2, 11]", f"{at} ({at / 4:.1f})")
        for at in range(100)
    ]
    drawn = Drawn((60, 260, 390, 500), "lccc", leading=7, size=6)
    table = the_table(opened(pdf(page_with(lambda c, y: drawn.draw(c, y, rows[:95]))), reader=engine))
    assert grid(table) == wanted(rows[:95])


def test_raised_marks_stay_with_their_cells(engine):
    def draw(canvas, y):
        drawn = Drawn((60, 260, 390), "lcc", rules=())
        for height in (y - 10, y + 4, y + 42):
            drawn.rule(canvas, height)
        for at, row in enumerate(
            (("Bench", "M", "SD"), ("rye", "", "1.20"), ("spelt", "", "1.31"), ("oat", "8.90", "0.98"))
        ):
            for column, text in enumerate(row):
                drawn.cell(canvas, column, y + 12 * at, text)
        rich(canvas, 252, y + 12, ("9.41", ROMAN, 9, 0), ("a", ROMAN, 6, 3))
        rich(canvas, 250, y + 24, ("-8.52", ROMAN, 9, 0), ("**", ROMAN, 6, 3))
        return y + 50

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert [row[1] for row in grid(table)] == ["M", "9.41a", "-8.52**", "8.90"]
    marks = {cell.text: cell.passage.marks for cell in table.cells}
    assert marks["9.41a"] == "    ^" and marks["-8.52**"] == "     ^^" and marks["1.20"] == ""


def test_without_a_caption_rules_and_numbers_tell(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc")
    document = opened(pdf(page_with(lambda c, y: drawn.draw(c, y, BASELINE), caption="")), reader=engine)
    table = the_table(document)
    assert grid(table) == wanted(BASELINE) and table.label == "" and table.caption is None
    assert table.cells[0].passage.table == "unlabelled table 1"
    assert document.passages[table.before - 1].text == prose(1)


def test_what_is_no_table(engine):
    def page(canvas):
        for at, text in enumerate(("0", "2", "4", "6", "8")):
            line(canvas, 100, 200 - 25 * at, text, size=7)
            canvas.line(108, 842 - 200 + 25 * at, 300, 842 - 200 + 25 * at)
            line(canvas, 120 + 40 * at, 215, f"day {at}", size=7)
        line(canvas, 60, 240, "Figure 1. Height of the loaves by day.", size=9)
        canvas.line(60, 842 - 270, 535, 842 - 270)
        line(canvas, 60, 285, "Anna Crumb, Bakery of the North", ITALIC, 9)
        line(canvas, 320, 285, "Otto Miller, Bakery of the South", ITALIC, 9)
        canvas.line(60, 842 - 295, 535, 842 - 295)
        end = wrapped(
            canvas, 60, 320, 475, "Table 2 shows that the loaves rose, t(22) = 1.71, p = .101. " + PROSE
        )
        wrapped(canvas, 60, end + 12, 475, PROSE)

    document = opened(pdf(page), reader=engine)
    assert document.tables == ()
    assert any("t(22) = 1.71, p = .101" in text for text in texts(document))


def test_what_could_not_be_read_is_said(engine):
    def page(canvas):
        end = wrapped(canvas, 60, 60, 475, prose(1))
        line(canvas, 60, end + 20, "Table 4. A table that was put in as a picture.", size=9)
        canvas.rect(60, 842 - end - 160, 475, 120, stroke=0, fill=1)
        wrapped(canvas, 60, end + 190, 475, prose(4))

    document = opened(pdf(page), reader=engine)
    assert document.tables == ()
    assert document.notes == ("Table 4 on page 1 could not be put into rows and columns; it was left out.",)


def test_pages_read_alone_give_the_same_table(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc")
    data = pdf(
        lambda c: wrapped(c, 60, 60, 475, prose(1)), page_with(lambda c, y: drawn.draw(c, y, BASELINE))
    )
    whole, part = opened(data, reader=engine), opened(data, reader=engine, pages={2})
    assert grid(the_table(whole)) == grid(the_table(part)) == wanted(BASELINE)


def test_symbols_and_signs(engine):
    def draw(canvas, y):
        drawn = Drawn((60, 260, 390), "lcc", rules=())
        for height in (y - 10, y + 4, y + 30):
            drawn.rule(canvas, height)
        drawn.cell(canvas, 0, y, "Path")
        rich(canvas, 250, y, ("β", SYMBOL, 9, 0), (" (SE)", ROMAN, 9, 0))
        rich(canvas, 380, y, ("χ", SYMBOL, 9, 0), ("2", ROMAN, 6, 3))
        for at, row in enumerate(
            (("Height", f"{MINUS}0.12 (0.05)", "4.20"), ("Crumb", "0.31 (0.10)", "9.61")), start=1
        ):
            for column, text in enumerate(row):
                drawn.cell(canvas, column, y + 12 * at, text)
        return y + 40

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert grid(table) == [
        ["Path", "β (SE)", "χ2"],
        ["Height", f"{MINUS}0.12 (0.05)", "4.20"],
        ["Crumb", "0.31 (0.10)", "9.61"],
    ]
    assert table.cells[2].passage.marks == " ^"


def test_a_table_set_sideways_among_upright_text(engine):
    drawn = Drawn((60, 200, 300, 370), "lccc", right=385)

    def page(canvas):
        end = wrapped(canvas, 60, 60, 475, prose(1) + " " + PROSE)
        wrapped(canvas, 60, end + 440, 475, prose(4) + " " + PROSE)
        canvas.translate(330, 180)
        canvas.rotate(90)
        canvas._pagesize = (842, 200)
        line(canvas, 60, 40, "Table 2. Apprentices before the training.", size=9)
        drawn.draw(canvas, 62, BASELINE)
        canvas._pagesize = (595, 842)

    def stamped(canvas):
        wrapped(canvas, 60, 60, 475, prose(1))
        canvas.rotate(90)
        canvas.setFont(ROMAN, 18)
        canvas.drawString(
            100,
            -40,
            "Manuscript of the bakery, day 3, 1.21 (0.4), 2.33 (0.6), not for sale at all in any shop",
        )

    document = opened(pdf(page, stamped), reader=engine)
    assert grid(the_table(document)) == wanted(BASELINE)
    assert document.tables[0].caption.text.startswith("Table 2.") and document.notes == ()
    assert not any("not for sale" in text for text in texts(document))


def test_columns_that_may_be_one_are_doubted(engine):
    """A gap of half an em in every row: a column's edge or a wide space, nothing tells."""
    rows = [("Bench", "n", "Mean")] + [(f"bench {at}", f"{at}{at}", f"{at}.41") for at in range(1, 8)]

    def draw(canvas, y):
        edge = 120 + canvas.stringWidth("Mean", ROMAN, 9) / 2
        drawn = Drawn((60, edge, edge + 0.48 * 9), "lrl", right=200, rules=())
        for height in (y - 10, y + 4, y + 90):
            drawn.rule(canvas, height)
        return drawn.draw(canvas, y, rows)

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert table.doubts


def test_numbers_set_in_the_middle_of_a_label_of_two_lines(engine):
    drawn = Drawn((60, 260, 390), "lcc", rules=())

    def draw(canvas, y):
        for at, row in enumerate(
            (
                ("Measure", "M (SD)", "p"),
                ("Height of the loaf", "9.41 (1.20)", ".021"),
                ("Crumb score of the", "5.2 (0.9)", ".048"),
            )
        ):
            top = y + 30 * at
            drawn.cell(canvas, 0, top, row[0])
            if at:
                drawn.cell(canvas, 0, top + 10, ("", "Wheat and rye", "Tasting panel")[at])
            for column in (1, 2):
                drawn.cell(canvas, column, top + (5 if at else 0), row[column])
        for height in (y - 10, y + 8, y + 78):
            drawn.rule(canvas, height)
        return y + 90

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert grid(table)[1:] == [
        ["Height of the loaf Wheat and rye", "9.41 (1.20)", ".021"],
        ["Crumb score of the Tasting panel", "5.2 (0.9)", ".048"],
    ]
    assert table.doubts == ()


def test_a_head_over_the_first_rule(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc", rules=(1, -1))
    draw = page_with(lambda c, y: drawn.draw(c, y, BASELINE), caption="Table 1")
    table = the_table(opened(pdf(draw), reader=engine))
    assert grid(table) == wanted(BASELINE) and table.caption.text == "Table 1" and table.header_rows == 1


def test_a_note_wider_than_its_table(engine):
    rows = [
        ("Bench", "M", "SD"),
        ("rye", "9.41*", "1.20"),
        ("spelt", "8.52", "1.31"),
        ("wheat", "8.90", "0.98"),
    ]
    drawn = Drawn((60, 160, 220), "llr", right=222)
    note = "Note. Heights in cm after the training; all benches baked for a week. *p < .05. **p < .01. ***p < .001."
    document = opened(pdf(page_with(lambda c, y: drawn.draw(c, y, rows), notes=(note,))), reader=engine)
    table = the_table(document)
    assert grid(table) == wanted(rows) and [one.text for one in table.notes] == [note]


def test_two_tables_below_one_another(engine):
    drawn = Drawn((60, 260, 390, 520), "lccc")

    def draw(canvas, y):
        end = drawn.draw(canvas, y, BASELINE)
        line(canvas, 60, end + 2, "* p < .05.", size=8)
        line(canvas, 60, end + 28, "Table 2. The same after the training.", size=9)
        return drawn.draw(canvas, end + 50, BASELINE[:3])

    document = opened(pdf(page_with(draw, notes=("Note. Values are mean (SD).",))), reader=engine)
    one, two = document.tables
    assert grid(one) == wanted(BASELINE) and grid(two) == wanted(BASELINE[:3])
    assert [note.text for note in one.notes] == ["* p < .05."]
    assert [note.text for note in two.notes] == ["Note. Values are mean (SD)."]
    assert (one.label, two.label) == ("Table 1", "Table 2") and one.before < two.before


def test_heads_alike_at_the_top_of_many_pages_are_no_running_heads(engine):
    """Captions and heads of tables that come again at one height belong to their tables."""

    def page(number):
        def draw(canvas):
            line(canvas, 60, 40, "BENCH SCORING OF SOURDOUGH", size=8)
            line(canvas, 60, 60, f"Table {number}", size=9)
            drawn = Drawn((60, 200, 260, 320, 380, 440), "lccccc")
            rows = [
                ("Path", "B", "SE", "z", "p", "beta"),
                *(
                    (f"{name} {number}", "0.16", "0.05", "3.20", ".001", "0.27")
                    for name in ("rye", "oat", "spelt")
                ),
            ]
            end = drawn.draw(canvas, 80, rows)
            wrapped(canvas, 60, end + 30, 475, prose(number))

        return draw

    tables = opened(pdf(*[page(number) for number in range(1, 5)]), reader=engine).tables
    assert [table.label for table in tables] == ["Table 1", "Table 2", "Table 3", "Table 4"]
    assert all(grid(table)[0] == ["Path", "B", "SE", "z", "p", "beta"] for table in tables)


def test_text_in_two_columns_under_a_caption_is_no_table(engine):
    def page(canvas):
        line(canvas, 60, 60, "Table 1. A caption whose table is a picture.", size=9)
        wrapped(canvas, 60, 90, 225, PROSE + " Left. " + PROSE)
        wrapped(canvas, 310, 90, 225, PROSE + " Right. " + PROSE)

    document = opened(pdf(page), reader=engine)
    assert document.tables == () and len(document.notes) == 1
    assert "Left." in " ".join(texts(document)) and "Right." in " ".join(texts(document))


def test_a_value_that_runs_on_below_and_a_row_without_a_name(engine):
    rows = [
        ("Bench", "M (SD)", "p"),
        ("rye", "10.0", ".021"),
        ("", "(1.8)", ""),
        ("spelt", "9.4 (1.7)", ".048"),
        ("wheat", "9.9 (2.1)", ".11"),
        ("oat", "9.6 (2.0)", ".52"),
    ]
    drawn = Drawn((60, 260, 390), "lll")
    table = the_table(opened(pdf(page_with(lambda c, y: drawn.draw(c, y, rows))), reader=engine))
    assert grid(table) == [["Bench", "M (SD)", "p"], ["rye", "10.0 (1.8)", ".021"], *wanted(rows[3:])]

    def bottom(canvas, y):
        for at, (row, step) in enumerate(zip(rows, (0, 24, 14, 48, 72, 96), strict=True)):
            for column, text in enumerate(("", "10.0 ± 0.2", "") if at == 2 else row):
                drawn.cell(canvas, column, y + step, text)
        for height in (y - 10, y + 4, y + 102):
            drawn.rule(canvas, height)
        return y + 110

    assert the_table(opened(pdf(page_with(bottom)), reader=engine)).doubts


def test_two_tables_side_by_side_with_little_text(engine):
    left, right = BASELINE[:4], [("Flour", "n", "p"), ("Rye", "41", ".04"), ("Wheat", "37", ".31")]
    one = Drawn((60, 150, 205, 260), "lccc", left=55, right=285, size=6)
    two = Drawn((315, 430, 500), "lcc", left=310, right=540, size=6)

    def page(canvas):
        line(canvas, 60, 60, "Table 1. Apprentices before the training, by bench", size=8)
        one.draw(canvas, 80, left)
        line(canvas, 315, 66, "Table 2. Doughs that were baked", size=8)
        two.draw(canvas, 86, right)

    first, second = opened(pdf(page), reader=engine).tables
    assert (grid(first), grid(second)) == (wanted(left), wanted(right))
    assert (first.label, second.label) == ("Table 1", "Table 2")
    assert first.caption.text == "Table 1. Apprentices before the training, by bench"


def test_wrapped_cells_at_the_bottom_of_their_rows(engine):
    """Lines of one row stand closer than rows: the name is beside the last line of the values."""
    drawn = Drawn((60, 220, 330, 420), "llll", rules=())
    heights = (0, 20, 29, 49, 58, 78, 87)
    lines = [
        ("Trait", "Rye", "Wheat", "p"),
        (None, "0.43 \u00b1", "0.48 \u00b1", None), ("Growth", "0.02 (7)", "0.02 (6)", ".003"),
        (None, "11.3 \u00b1", "12.8 \u00b1", None), ("Yield", "0.47 (7)", "0.41 (8)", ".011"),
        ("Lactate,", "32.4 \u00b1", "34.0 \u00b1", None), ("mmol", "1.57 (6)", "1.74 (7)", ".27"),
    ]  # fmt: skip

    def draw(canvas, y):
        for height, row in zip(heights, lines, strict=True):
            for column, text in enumerate(row):
                if text:
                    drawn.cell(canvas, column, y + height, text)
        for height in (-9, 6, 92):
            drawn.rule(canvas, y + height)
        return y + 100

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert grid(table)[1:] == [
        ["Growth", "0.43 \u00b1 0.02 (7)", "0.48 \u00b1 0.02 (6)", ".003"],
        ["Yield", "11.3 \u00b1 0.47 (7)", "12.8 \u00b1 0.41 (8)", ".011"],
        ["Lactate, mmol", "32.4 \u00b1 1.57 (6)", "34.0 \u00b1 1.74 (7)", ".27"],
    ]
    assert table.doubts == ()


def test_a_header_over_sub_headers_that_repeat(engine):
    drawn = Drawn((60, 200, 260, 340, 400, 480), "lccccc", rules=(0, 2, -1))
    rows = [
        ("Flour", None, None, None, None, None), (None, "n", "%", "n", "%", "All"),
        ("White", "15", "33.3", "29", "40.8", "44"), ("Mixed", "15", "33.3", "24", "33.8", "39"),
        ("Rye", "15", "33.3", "18", "25.4", "33"),
    ]  # fmt: skip

    def draw(canvas, y):
        end = drawn.draw(canvas, y, rows)
        for x, text in ((248, "Coast"), (388, "Plain")):
            line(canvas, x, y, text, size=9)
        return end

    table = the_table(opened(pdf(page_with(draw)), reader=engine))
    assert {name: spans(table)[name] for name in ("Coast", "Plain")} == {"Coast": 2, "Plain": 2}
