"""Columns, lines and what surrounds them, on drawn pages; both engines must agree on each."""

from __future__ import annotations

import random
from collections import Counter

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.documents.pdf.making import (
    BOLD,
    PROSE,
    ROMAN,
    SYMBOL,
    containing,
    line,
    opened,
    pdf,
    prose,
    quoted,
    rich,
    texts,
    wrapped,
)

ENGINES = ("pdfium", "pdfminer")
RESULT = "Loaf height rose after the training, t(22) = 2.31, p = .031, and stayed high."


@pytest.fixture(params=ENGINES)
def engine(request):
    return request.param


def head(canvas, number, side="left"):
    line(canvas, 60, 40, "BENCH SCORING OF SOURDOUGH", size=8)
    line(canvas, 60 if side == "left" else 520, 810, str(number), size=8)


def test_two_columns_are_read_one_after_the_other(engine):
    def page(canvas):
        line(canvas, 60, 80, "Overnight proofing and the height of rye loaves in two bakeries", BOLD, 16)
        wrapped(canvas, 60, 120, 475, "Abstract. " + PROSE)
        end = wrapped(canvas, 60, 220, 225, PROSE)
        wrapped(canvas, 60, end, 225, "Left column: " + RESULT)
        # The right column is off the grid of the left one.
        end = wrapped(canvas, 310, 223.5, 225, "Right column: " + RESULT)
        wrapped(canvas, 310, end + 8, 225, PROSE)

    document = opened(pdf(page), reader=engine)
    everything = quoted(document.passages)
    assert everything.index("Abstract.") < everything.index("Left column") < everything.index("Right column")
    for side in ("Left", "Right"):
        assert RESULT in containing(document, f"{side} column").text
    assert document.title == "Overnight proofing and the height of rye loaves in two bakeries"


def test_three_columns(engine):
    def page(canvas):
        for at in range(3):
            end = wrapped(canvas, 50 + 170 * at, 80, 150, f"Column {at} begins. " + PROSE)
            wrapped(canvas, 50 + 170 * at, end, 150, f"Result {at}: t(22) = 2.3{at}, p = .031, it ends.")

    everything = quoted(opened(pdf(page), reader=engine).passages)
    places = [everything.index(f"{word} {at}") for at in range(3) for word in ("Column", "Result")]
    assert places == sorted(places)
    assert "t(22) = 2.31, p = .031" in everything


def test_a_text_goes_on_over_columns_and_pages(engine):
    def first(canvas):
        head(canvas, 1)
        end = wrapped(canvas, 60, 80, 225, PROSE)
        wrapped(
            canvas, 60, end, 225, "The panels agreed with each other and the mean score of the rye loaves was"
        )
        end = wrapped(
            canvas, 310, 80, 225, "higher than that of the spelt loaves, t(38) = 2.71, p = .010. " + PROSE
        )
        wrapped(canvas, 310, end, 225, "Their crumb was scored in the same way and gave a difference of M =")

    def second(canvas):
        head(canvas, 2, "right")
        end = wrapped(canvas, 60, 80, 225, "1.35 points, t(38) = 2.02, p = .050. " + PROSE)
        wrapped(canvas, 60, end, 225, PROSE, indent=12)
        wrapped(canvas, 310, 80, 225, PROSE)

    document = opened(pdf(first, second), reader=engine)
    assert "was higher than that of the spelt loaves, t(38) = 2.71" in quoted(document.passages)
    passage = containing(document, "a difference of M = 1.35 points")
    start = passage.text.index("1.35 points")
    assert passage.place(start, start + 4).page == 2
    assert passage.place(start - 12, start - 2).page == 1
    assert not any("BENCH SCORING" in text for text in texts(document))
    assert any("BENCH SCORING" in text for text in texts(document, "aside"))


def test_line_numbers_in_the_margin_and_in_the_gutter(engine):
    def page(first):
        def draw(canvas):
            for row in range(30):
                y = 90 + 20 * row
                for column, x in enumerate((70, 320)):
                    number = first + row + 30 * column
                    canvas.setFont(ROMAN, 6)
                    canvas.drawRightString(x - 8, 842 - y, str(number))
                    words = prose(first + row + 7 * column).split()[:8]
                    wrapped(canvas, x, y, 218, " ".join(words) + " 12 benches.", size=9)
            if first == 61:
                wrapped(canvas, 70, 700, 218, RESULT, size=9)

        return draw

    document = opened(pdf(page(1), page(61), page(121)), reader=engine)
    body = " ".join(texts(document))
    assert RESULT in body
    assert not any(str(number) in body for number in (17, 29, 45, 58, 77, 103, 139, 150))
    assert body.count("12 benches") == 180


def test_running_heads_and_page_numbers_on_alternating_sides(engine):
    def page(number):
        def draw(canvas):
            if number % 2:
                line(canvas, 60, 40, f"Miller and Crumb {number + 210}", size=8)
            else:
                line(canvas, 380, 40, f"{number + 210} The height of rye loaves", size=8)
            line(canvas, 290, 815, f"{number} of 8", size=8)
            end = wrapped(canvas, 60, 80, 475, prose(number) + " " + RESULT)
            wrapped(canvas, 60, end, 475, prose(number + 3))

        return draw

    document = opened(pdf(*[page(number) for number in range(1, 9)]), reader=engine)
    body = " ".join(texts(document))
    assert "Miller and Crumb" not in body and "height of rye loaves" not in body and "of 8" not in body
    assert len(texts(document, "aside")) == 16


def test_raised_and_lowered_characters_are_marked(engine):
    def page(canvas):
        wrapped(canvas, 60, 80, 475, PROSE)
        end = rich(
            canvas, 60, 200, ("The crusts differed, ", ROMAN, 10, 0), ("χ", SYMBOL, 10, 0), ("2", ROMAN, 7, 4)
        )
        end = rich(canvas, end, 200, ("(1) = 4.20, and in the test ", ROMAN, 10, 0), ("t", ROMAN, 10, 0))
        end = rich(
            canvas, end, 200, ("22", ROMAN, 7, -2), (" = 1.71 with ", ROMAN, 10, 0), ("η", SYMBOL, 10, 0)
        )
        rich(canvas, end, 200, ("2", ROMAN, 7, 4))
        end = rich(
            canvas,
            end,
            200,
            ("p", ROMAN, 7, -2.5),
            (" = .12 among the loaves", ROMAN, 10, 0),
            ("3", ROMAN, 6, 4),
        )
        line(canvas, end, 200, ".")
        wrapped(canvas, 60, 212, 475, PROSE)

    passage = containing(opened(pdf(page), reader=engine), "crusts differed")
    for text, marks in (("χ2(1)", " ^   "), ("t22 =", " __  "), ("η2p =", " ^_  "), ("loaves3.", "      ^ ")):
        start = passage.text.index(text)
        assert passage.marks[start : start + len(text)] == marks
    assert len(passage.marks) == len(passage.text) == len(passage.layout.pages) == len(passage.layout.boxes)


def test_rotated_text_is_dropped_and_a_rotated_page_is_turned(engine):
    def sidebar(canvas):
        canvas.saveState()
        canvas.rotate(90)
        canvas.setFont(ROMAN, 20)
        canvas.drawString(200, -30, "Author manuscript of the bakers")
        canvas.restoreState()
        wrapped(canvas, 60, 80, 475, PROSE + " " + RESULT)

    def landscape(canvas):
        canvas.translate(595, 0)
        canvas.rotate(90)
        for row, text in enumerate((RESULT, "The second line follows the first.")):
            canvas.setFont(ROMAN, 10)
            canvas.drawString(100, 500 - 12 * row, text)

    document = opened(pdf(sidebar, landscape), reader=engine)
    assert "Author manuscript" not in quoted(document.passages)
    passage = containing(document, "second line")
    assert passage.text == RESULT + " The second line follows the first."
    page, (left, top, right, bottom) = passage.place(0, len(RESULT)).page, passage.place(0, len(RESULT)).box
    # Read turned, but placed as the page is shown: the line runs up the page.
    assert page == 2 and bottom - top > 250 > 20 > right - left


@pytest.mark.parametrize("rotation", [0, 90, 180, 270])
def test_boxes_are_those_of_the_page_as_shown(engine, rotation):
    def page(canvas):
        canvas.setCropBox((50, 100, 550, 800))
        canvas.setPageRotation(rotation)
        line(canvas, 70, 100, RESULT)

    document = opened(pdf(page, size=(800, 800)), reader=engine)
    passage = containing(document, "Loaf height")
    left, top, right, bottom = passage.place(0, len(passage.text)).box
    # In page space the line starts at x = 70 and stands on y = 700; the crop box is 500 x 700 at (50, 100).
    near = {0: (left, bottom), 90: (left, top), 180: (right, top), 270: (right, bottom)}[rotation]
    expected = {0: (20, 100), 90: (600, 20), 180: (480, 600), 270: (100, 480)}[rotation]
    assert near == pytest.approx(expected, abs=4)


def test_text_printed_twice_is_read_once(engine):
    def page(canvas):
        for shift in (0, 0.25):
            wrapped(canvas, 60 + shift, 80, 475, PROSE + " " + RESULT)
        line(canvas, 60, 300, "balloon bottle coffee access 1.11 and 22.2 77", BOLD)

    document = opened(pdf(page), reader=engine)
    assert quoted(document.passages).count("t(22) = 2.31, p = .031") == 1
    assert "balloon bottle coffee access 1.11 and 22.2 77" in quoted(document.passages)


def test_control_characters_of_a_wrong_font_table_are_kept(engine):
    def page(canvas):
        line(canvas, 60, 80, "The loaves rose, F(1,44) 5 3.18, p @ .05, as the panel said on that day.")

    data = pdf(page, pageCompression=0)
    assert data.count(b"p @ .05") == 1
    data = data.replace(b"p @ .05", b"p \x03 .05")
    assert "p \x03 .05" in quoted(opened(data, reader=engine).passages)


def test_both_engines_give_the_same_characters():
    def page(number):
        def draw(canvas):
            line(canvas, 60, 60, f"{number}. Overnight proofing", BOLD, 16)
            wrapped(canvas, 60, 80, 225, prose(number) + " " + RESULT)
            wrapped(canvas, 310, 80, 225, RESULT + " – café ± 0.5 × “3” §4 " + prose(number + 4))

        return draw

    one, other = (opened(pdf(page(1), page(2)), reader=engine) for engine in ENGINES)
    assert [(p.kind, p.text, p.marks, p.section) for p in one.passages] == [
        (p.kind, p.text, p.marks, p.section) for p in other.passages
    ]
    for first, second in zip(one.passages, other.passages, strict=True):
        assert abs(first.layout.boxes[:, [0, 2]] - second.layout.boxes[:, [0, 2]]).max() < 1


def test_the_same_file_gives_the_same_document():
    def page(canvas):
        wrapped(canvas, 60, 80, 225, PROSE)
        wrapped(canvas, 310, 80, 225, PROSE + RESULT)

    data = pdf(page, page)
    assert [p.text for p in opened(data).passages] == [p.text for p in opened(data).passages]


@settings(max_examples=25, deadline=None)
@given(st.integers(0, 10**6), st.integers(1, 400))
def test_no_character_is_lost_or_doubled(seed, count):
    chance = random.Random(seed)
    labels = [
        (
            chance.choice(("ab", "17", "c", "2.5", "loaf", "x")),
            chance.uniform(40, 540),
            chance.uniform(60, 800),
            chance.choice((3, 4, 7, 10, 10, 30)),
        )
        for _ in range(count)
    ]

    def page(canvas):
        for text, x, y, size in labels:
            line(canvas, x, y, text, size=size)

    found = Counter(quoted(opened(pdf(page)).passages))
    drawn = Counter("".join(text for text, *_ in labels))
    # Two labels may happen to lie on one another; then one of them is read.
    assert all(found[char] <= drawn[char] for char in drawn)
    assert sum(found[char] for char in drawn) >= 0.97 * sum(drawn.values()) - 2


def test_indices_on_a_page_scanned_askew(engine):
    """The line drifts until an index shares the row of the text after it; that text is not raised with it."""

    def draw(canvas):
        line(canvas, 60, 40, "Bench scores", BOLD, 16)
        canvas.rotate(0.6)
        end = rich(canvas, 60, 90, ("Rye: ", ROMAN, 10, 0), ("χ", SYMBOL, 10, 0), ("2", ROMAN, 6.8, 3.5))
        rest = "(1) = .02, p = .89, and the share of the loaves of rye fell again when the cellar had been cooled down"
        rich(canvas, end, 90, (rest, ROMAN, 10, 0))
        wrapped(canvas, 60, 104, 475, prose(1), leading=14)

    passage = containing(opened(pdf(draw), reader=engine), "(1) = .02")
    at = passage.text.index("(1) = .02")
    assert passage.marks[at - 1] == "^"
    assert set(passage.marks[at:]) == {" "}
