"""Rules and bands that are drawn on a page: both engines must give the same."""

from __future__ import annotations

import numpy as np
import pytest
from pytest import approx
from reportlab.lib.colors import Color

from recheck.documents.pdf import miner, pdfium
from recheck.documents.pdf.rules import MOST_PATHS, rules_of
from tests.documents.pdf.making import line, pdf


@pytest.fixture(params=[pdfium, miner], ids=["pdfium", "pdfminer"])
def drawn(request):
    def read(draw, **options):
        return rules_of(request.param.read(pdf(draw, **options)).pages[0].drawn)

    return read


def test_lines_boxes_and_bands(drawn):
    def page(canvas):
        line(canvas, 60, 60, "Loaves")
        canvas.line(60, 742, 535, 742)
        canvas.line(100, 742, 100, 600)
        canvas.rect(60, 700, 475, 0.6, stroke=0, fill=1)
        canvas.setFillColor(Color(0.9, 0.9, 0.9))
        canvas.rect(60, 640, 475, 14, stroke=0, fill=1)
        canvas.line(60, 500, 300, 560)
        canvas.circle(300, 300, 40)

    rules = drawn(page)
    assert rules.level == approx(np.array([(60, 535, 100), (60, 535, 141.7)]), abs=0.5)
    assert rules.upright == approx(np.array([(100, 100, 242)]), abs=0.5)
    assert rules.bands == approx(np.array([(60, 188, 535, 202)]), abs=0.5)


def test_pieces_are_joined_and_neighbours_are_not(drawn):
    def page(canvas):
        line(canvas, 60, 60, "Loaves")
        for left in (60, 160, 260):
            canvas.line(left, 742, left + 100, 742)
        canvas.line(60, 700, 150, 700)
        canvas.line(156, 700, 250, 700)

    assert drawn(page).level == approx(np.array([(60, 360, 100), (60, 150, 142), (156, 250, 142)]), abs=0.5)


def test_a_stroked_box_has_four_sides_and_turned_pages_turn_them(drawn):
    def page(canvas):
        canvas.setPageRotation(90)
        line(canvas, 60, 60, "Loaves")
        canvas.rect(100, 100, 200, 300)

    rules = drawn(page)
    assert rules.level == approx(np.array([(100, 400, 100), (100, 400, 300)]), abs=0.5)
    assert len(rules.upright) == 2


def test_lines_inside_a_form_are_read_and_those_of_a_figure_are_not(drawn):
    def page(count):
        def draw(canvas):
            line(canvas, 60, 60, "Loaves")
            canvas.beginForm("inside")
            for at in range(count):
                canvas.line(60, 100 + at * 0.5, 300, 100 + at * 0.5)
            canvas.endForm()
            canvas.translate(10, 20)
            canvas.doForm("inside")

        return draw

    assert drawn(page(1)).level == approx(np.array([(70, 310, 722)]), abs=0.5)
    assert not len(drawn(page(MOST_PATHS + 1)).level)
