"""Formulas as the reading room takes them."""

from __future__ import annotations

import pytest
from lxml import etree

from recheck.documents.markup.mathml import add_math
from recheck.documents.runs import Runs
from recheck.reading import read
from tests.documents.markup.marking import MATHML, page
from tests.documents.markup.marking import read as opened


def told(inner: str) -> tuple[str, str]:
    runs = Runs()
    add_math(etree.fromstring(f"<math {MATHML}>{inner}</math>"), runs)
    return runs.finished()


@pytest.mark.parametrize(
    ("inner", "text", "marks"),
    [
        ("<mi>F</mi><mo>&#x2061;</mo><mo>(</mo><mn>1</mn><mo>,</mo><mn>38</mn><mo>)</mo><mo>=</mo><mn>3.2</mn>", "F(1,38) = 3.2", ""),
        ("<msup><mi>χ</mi><mn>2</mn></msup><mo>=</mo><mn>4</mn>", "χ2 = 4", " ^    "),
        ("<msubsup><mi>η</mi><mi>p</mi><mn>2</mn></msubsup><mo>=</mo><mn>.12</mn>", "ηp2 = .12", " _^      "),
        ("<msubsup><mover accent='true'><mi>η</mi><mo>^</mo></mover><mi>p</mi><mn>2</mn></msubsup>", "η\u0302p2", "  _^"),
        ("<msub><mi>t</mi><mrow><mo>(</mo><mn>22</mn><mo>)</mo></mrow></msub>", "t(22)", " ____"),
        ("<mover><mi>x</mi><mo>¯</mo></mover>", "x\u0304", ""), ("<mover><mi>X</mi><mo stretchy='true'>‾</mo></mover>", "X\u0304", ""),
        ("<mfrac><mn>1</mn><mn>2</mn></mfrac>", "1/2", ""), ("<mfrac><mrow><mi>a</mi><mo>+</mo><mi>b</mi></mrow><mi>n</mi></mfrac>", "(a+b)/n", ""),
        ("<msqrt><mi>n</mi></msqrt>", "√n", ""), ("<msqrt><mi>n</mi><mo>-</mo><mn>1</mn></msqrt>", "√(n-1)", ""), ("<mroot><mi>n</mi><mn>3</mn></mroot>", "3√n", "^  "),
        ("<mfenced><mn>1</mn><mn>38</mn></mfenced>", "(1,38)", ""), ("<mfenced open='[' close=']' separators=';'><mn>1</mn><mn>2</mn></mfenced>", "[1;2]", ""),
        ("<semantics><mrow><mi>p</mi></mrow><annotation encoding='application/x-tex'>p</annotation></semantics>", "p", ""),
        ("<mi>a</mi><mspace width='1em'/><mi>b</mi><mphantom><mn>9</mn></mphantom>", "a b", ""), ("<mstyle><mpadded><mn>4</mn></mpadded></mstyle>", "4", ""),
        ("<mtext>mean&#xA0;</mtext><mo>=</mo><mn>2</mn>", "mean = 2", ""), ("<munderover><mo>∑</mo><mi>i</mi><mi>n</mi></munderover>", "∑in", " _^"),
        ("<mtable><mtr><mtd><mi>a</mi></mtd><mtd><mi>b</mi></mtd></mtr><mtr><mtd><mi>c</mi></mtd></mtr></mtable>", "a b\nc", ""),
        ("<mmultiscripts><mi>F</mi><mn>1</mn><none/></mmultiscripts>", "F1", " _"),
    ],
)  # fmt: skip
def test_shapes(inner, text, marks):
    assert told(inner) == (text, marks)


PIECES = {
    "F-test": (
        "<mi>F</mi><mo>(</mo><mn>1</mn><mo>,</mo><mn>38</mn><mo>)</mo><mo>=</mo><mn>3.2</mn><mo>,</mo><mi>p</mi><mo>=</mo><mn>.08</mn><mo>,</mo>"
        "<msubsup><mi>η</mi><mi>p</mi><mn>2</mn></msubsup><mo>=</mo><mn>.08</mn>",
        {"F": "3.2", "df1": "1", "df2": "38", "p": ".08", "partial_eta2": ".08"},
    ),
    "t-test": ("<msub><mi>t</mi><mn>22</mn></msub><mo>=</mo><mo>−</mo><mn>1.71</mn><mo>,</mo><mi>p</mi><mo>&lt;</mo><mo>.</mo><mn>05</mn>", {"t": "−1.71", "df": "22", "p": ".05"}),
    "chi2-test": ("<msup><mi>χ</mi><mn>2</mn></msup><mfenced><mn>1</mn></mfenced><mo>=</mo><mn>3.84</mn><mtext>, </mtext><mi>p</mi><mo>=</mo><mn>.05</mn>", {"chi2": "3.84", "df": "1", "p": ".05"}),
}  # fmt: skip


@pytest.mark.parametrize("kind", PIECES)
def test_the_reading_room_understands_formulas_in_pieces(kind):
    inner, values = PIECES[kind]
    (claim,) = read(opened(page(f"<p>The loaves differed, <math {MATHML}>{inner}</math>.</p>"))).claims
    assert claim.kind == kind
    assert {quantity: printed.text for quantity, printed in claim.values.items()} == values
