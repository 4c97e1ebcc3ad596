"""What the blocks of a page are, and how their lines are put together."""

from __future__ import annotations

import pytest

from tests.documents.pdf.making import (
    BOLD,
    PROSE,
    containing,
    line,
    opened,
    pdf,
    prose,
    quoted,
    texts,
    wrapped,
)

RESULT = "Loaf height rose after the training, t(22) = 2.31, p = .031, and stayed high."


def article(canvas):
    """Section, text, table, figure, footnote on one page."""
    line(canvas, 60, 70, "2.1 Loaf height", BOLD, 12)
    end = wrapped(canvas, 60, 90, 475, prose(0) + " The mean of the trained bench was")
    line(canvas, 60, 330, "Table 1. Loaf height in cm by bench.", BOLD, 9)
    for row, cells in enumerate(
        (("Bench", "n", "M", "SD"), ("rye", "12", "9.41", "1.20"), ("spelt", "12", "8.20", "1.31"))
    ):
        for column, cell in enumerate(cells):
            line(canvas, 60 + 110 * column, 350 + 13 * row, cell, size=9)
    wrapped(
        canvas,
        60,
        410,
        475,
        "9.41 cm and thus higher than that of the others, t(22) = 2.36, p = .027. " + prose(2),
    )
    line(canvas, 200, 520, "0  2  4  6  8", size=7)
    line(canvas, 60, 550, "Figure 2. Height of the loaves before and after the training.", BOLD, 9)
    wrapped(canvas, 60, 580, 475, prose(3))
    wrapped(
        canvas,
        60,
        760,
        475,
        "1 The cellar was too warm on the third day, so its loaves were left out.",
        size=8,
    )
    assert end < 300


def test_kinds_of_blocks():
    document = opened(pdf(article))
    assert texts(document, "heading") == ["2.1 Loaf height"]
    assert [text[:8] for text in texts(document, "caption")] == ["Table 1.", "Figure 2"]
    assert [cell.text for cell in document.tables[0].cells if cell.row == 1] == ["rye", "12", "9.41", "1.20"]
    assert texts(document, "note")[0].startswith("1 The cellar")
    assert all(p.section == "2.1 Loaf height" for p in document.passages)


def test_a_result_is_joined_around_a_table():
    passage = containing(opened(pdf(article)), "t(22) = 2.36")
    assert "The mean of the trained bench was 9.41 cm and thus higher" in passage.text
    assert passage.kind == "body"


@pytest.mark.parametrize(
    ("first", "second", "joined"),
    [
        ("the loaves were signifi-", "cantly higher than before", "were significantly higher"),
        ("the score of the trained group was M = -", "0.35 and lower than before", "M = -0.35 and"),
        ("the score of the trained group was M = \u2013", "0.35 and lower than before", "M = \u20130.35 and"),
        ("the difference had a 95% CI = [-", "0.35, 0.12] and thus held zero", "CI = [-0.35, 0.12] and"),
        ("the loaves were scored on a 7-", "point scale by all the tasters", "on a 7-point scale"),
        ("the df of the test by Greenhouse-", "Geisser were smaller than before", "Greenhouse-Geisser were"),
        ("the means were compared by a t-", "test of the two benches in May", "by a t-test of"),
        ("the loaves were then compared (", "M = 5.00) with those of spelt", "compared (M = 5.00) with"),
        ("the score rose from 3.1 to 3.9, p", "= .021, in the trained group of", "p = .021, in"),
    ],
)
def test_lines_are_put_together(first, second, joined):
    def page(canvas):
        end = wrapped(canvas, 60, 80, 300, prose(1).rstrip("."))
        for row, text in enumerate((first, second)):
            line(canvas, 60, end + 12 * row, text)
        wrapped(canvas, 60, end + 24, 300, "and " + prose(2))

    for engine in ("pdfium", "pdfminer"):
        assert joined in " ".join(texts(opened(pdf(page), reader=engine)))


def test_the_list_of_references_is_told_from_the_text():
    def page(canvas):
        end = wrapped(canvas, 60, 80, 475, prose(0) + " " + RESULT)
        line(canvas, 60, end + 20, "References", BOLD, 12)
        y = end + 40
        for name in ("Crumb", "Miller", "Oven"):
            y = wrapped(
                canvas, 60, y, 475, f"{name}, A. B. (2014). Rye, t(30) = 9.99, p = .5. Bench Letters, 3, 1-9."
            )
        line(canvas, 60, y + 20, "Appendix A", BOLD, 12)
        wrapped(canvas, 60, y + 40, 475, prose(5))

    document = opened(pdf(page))
    assert "t(30) = 9.99" in " ".join(texts(document, "references"))
    assert "t(30)" not in " ".join(texts(document))
    assert containing(document, prose(5)[:30]).kind == "body"
    assert containing(document, prose(5)[:30]).section == "Appendix A"


def test_references_without_a_heading():
    def page(canvas):
        end = wrapped(canvas, 60, 80, 475, prose(0))
        for at in range(8):
            text = f"{at + 1}. Miller{'abcdefgh'[at]}, A. B. ({1990 + at}). Crumb of loaves baked at night. Bench Letters, 3, 1-9."
            wrapped(canvas, 60, end + 20 + 16 * at, 475, text)

    document = opened(pdf(page))
    assert "Crumb of loaves baked" not in " ".join(texts(document))


def test_a_sentence_that_begins_like_a_caption_stays_in_the_text():
    def page(canvas):
        end = wrapped(canvas, 60, 80, 475, prose(0))
        wrapped(
            canvas,
            60,
            end,
            475,
            "Figure 2 shows that the loaves rose, t(22) = 1.71, p = .101. " + PROSE,
            indent=12,
        )

    assert containing(opened(pdf(page)), "Figure 2 shows").kind == "body"


def test_paragraphs_are_parted_by_indents_and_by_gaps():
    def page(canvas):
        end = wrapped(canvas, 60, 80, 300, prose(0), indent=14)
        end = wrapped(canvas, 60, end, 300, prose(1), indent=14)
        wrapped(canvas, 60, end + 9, 300, prose(2))

    assert len(texts(opened(pdf(page)))) == 3


def test_double_spaced_manuscripts():
    def page(number):
        def draw(canvas):
            line(canvas, 72, 40, "SOURDOUGH BENCHES", size=12)
            line(canvas, 510, 40, str(number), size=12)
            text = prose(number) + " " + RESULT + " " + prose(number + 2).rstrip(".")
            wrapped(canvas, 72, 80, 450, text, size=12, leading=24, indent=36)

        return draw

    document = opened(pdf(*[page(number) for number in range(1, 5)], size=(612, 792)))
    assert sum(RESULT in text for text in texts(document)) == 4
    assert not any("SOURDOUGH" in text for text in texts(document))


def test_a_loosely_justified_line_of_results_is_no_row():
    """A line of four long words is spaced wide and evenly: text, though it is mostly numbers."""

    def draw(canvas):
        end = wrapped(canvas, 60, 60, 290, prose(1) + " The trained bench was higher than the other bench")
        words = ("[M(SD)=3.82(1.28)],", "t(35)=-3.06,", "p=.004,", "d=-1.01,")
        room = (290 - sum(canvas.stringWidth(word, "Times-Roman", 10) for word in words)) / 3
        x = 60.0
        for word in words:
            line(canvas, x, end, word)
            x += canvas.stringWidth(word, "Times-Roman", 10) + room
        line(canvas, 60, end + 12, "95%CI[-1.70, -0.32].")
        wrapped(canvas, 60, end + 24, 290, prose(2), indent=10)

    passage = containing(opened(pdf(draw)), "t(35)=-3.06, p=.004, d=-1.01, 95%CI")
    assert passage.kind == "body"


@pytest.mark.parametrize("ending", ["method.", "results.", "references."])
def test_the_last_word_of_a_paragraph_is_no_heading(ending):
    def draw(canvas):
        end = wrapped(canvas, 60, 60, 300, prose(1).rstrip(".") + " and were not filled in by any other")
        line(canvas, 60, end, ending)
        wrapped(canvas, 60, end + 12, 300, prose(2) + " " + RESULT, indent=10)

    document = opened(pdf(draw))
    assert not texts(document, "heading", "references")
    assert f"by any other {ending}" in quoted(document.passages)
