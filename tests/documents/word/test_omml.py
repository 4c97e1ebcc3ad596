"""Equations of Word documents as a line of text."""

from __future__ import annotations

import pytest

from recheck.auditing import audit
from tests.documents.word.making import docx_bytes, math, mr, opened_docx, p, r


def e(inside):
    return f"<m:e>{mr(inside)}</m:e>"


def part(name, inside):
    return f"<m:{name}>{mr(inside)}</m:{name}>"


def sub(base, low):
    return f"<m:sSub>{e(base)}{part('sub', low)}</m:sSub>"


def sup(base, high):
    return f"<m:sSup>{e(base)}{part('sup', high)}</m:sSup>"


def accent(base, sign=None):
    stated = f'<m:accPr><m:chr m:val="{sign}"/></m:accPr>' if sign else ""
    return f"<m:acc>{stated}{e(base)}</m:acc>"


def delimited(*inside, **settings):
    stated = "".join(f'<m:{name} m:val="{value}"/>' for name, value in settings.items())
    return f"<m:d><m:dPr>{stated}</m:dPr>{''.join(e(one) for one in inside)}</m:d>"


HATTED = f"<m:limUpp>{e('η')}{part('lim', '^')}</m:limUpp>"


@pytest.mark.parametrize(
    ("inside", "text", "marks"),
    [
        (mr("t(22)=1.71"), "t(22) = 1.71", ""),
        (mr("p<.001"), "p < .001", ""),
        (mr("t") + mr("(") + mr("22") + mr(")") + mr("=") + mr("−1.71"), "t(22) = −1.71", ""),
        (mr("F(1,38)=3.2,MSE=1.7"), "F(1,38) = 3.2, MSE = 1.7", ""),
        (sub("t", "22") + mr("=2"), "t22 = 2", " __    "),
        (sup("χ", "2") + mr("(1)=3.84"), "χ2(1) = 3.84", " ^          "),
        (f"<m:sSubSup>{e('η')}{part('sub', 'p')}{part('sup', '2')}</m:sSubSup>", "ηp2", " _^"),
        (f"<m:sSubSup>{e(HATTED)}{part('sub', 'G')}{part('sup', '2')}</m:sSubSup>", "η̂G2", "  _^"),
        (f"<m:sPre>{part('sub', '2')}{part('sup', '3')}{e('x')}</m:sPre>", "23x", "_^ "),
        (accent("p"), "p̂", ""),
        (accent("x", "¯"), "x̄", ""),
        (accent("y", "\u0303"), "ỹ", ""),
        ('<m:bar><m:barPr><m:pos m:val="top"/></m:barPr>' + e("x") + "</m:bar>", "x̄", ""),
        ('<m:bar><m:barPr><m:pos m:val="bot"/></m:barPr>' + e("x") + "</m:bar>", "x", ""),
        (f"<m:f>{part('num', '12')}{part('den', '34')}</m:f>", "12/34", ""),
        (f"<m:f>{part('num', 'a+b')}{part('den', 'c')}</m:f>", "(a+b)/c", ""),
        (f'<m:f><m:fPr><m:type m:val="noBar"/></m:fPr>{part("num", "n")}{part("den", "k")}</m:f>', "n k", ""),
        (mr("t") + delimited("22"), "t(22)", ""),
        (delimited("0.2", "0.4", begChr="[", endChr="]", sepChr=","), "[0.2,0.4]", ""),
        (delimited("x", begChr="|", endChr="|"), "|x|", ""),
        (delimited("x", begChr="{", endChr=""), "{x", ""),
        (f"<m:rad><m:deg/>{e('n')}</m:rad>", "√n", ""),
        (f"<m:rad>{part('deg', '3')}{e('n+1')}</m:rad>", "3√(n+1)", "^      "),
        (f'<m:nary><m:naryPr><m:chr m:val="∑"/></m:naryPr>{part("sub", "i")}{part("sup", "n")}{e("x")}</m:nary>', "∑inx", " _^ "),
        (f"<m:func>{part('fName', 'log')}{e('x')}</m:func>", "log x", ""),
        (f"<m:limLow>{e('lim')}{part('lim', 'n')}</m:limLow>", "limn", "   _"),
        (f"<m:eqArr>{e('t&=2')}{e('p&=.04')}</m:eqArr>", "t = 2\np = .04", ""),
        (f"<m:m><m:mr>{e('1')}{e('.3')}</m:mr><m:mr>{e('.3')}{e('1')}</m:mr></m:m>", "1 .3\n.3 1", ""),
        (f"<m:box>{e('p')}</m:box><m:borderBox>{e('q')}</m:borderBox>", "pq", ""),
        (f"<m:groupChr>{e('x')}</m:groupChr>", "x", ""),
        (f'<m:phant><m:phantPr><m:show m:val="0"/></m:phantPr>{e("x")}</m:phant>' + mr("y"), "y", ""),
        ("<w:ins>" + mr("p=.04") + "</w:ins><w:del>" + mr("p=.4") + "</w:del>", "p = .04", ""),
        (mr("𝑡(22)=2"), "t(22) = 2", ""),
    ],
)  # fmt: skip
def test_forms(inside, text, marks):
    (passage,) = opened_docx(p(math(inside))).passages
    assert (passage.text, passage.marks) == (text, marks)


def test_equations_that_stand_by_themselves():
    alone = f"<m:oMathPara>{math('t(22)=1.71')}{math('p=.101')}</m:oMathPara>"
    for body in (alone, p(alone)):
        (passage,) = opened_docx(body).passages
        assert passage.text == "t(22) = 1.71\np = .101"


def claims(*body):
    return [
        (claim.kind, {name: value.text for name, value in claim.values.items()})
        for claim in audit(docx_bytes(*body), name="bench.docx").claims
    ]


@pytest.mark.parametrize(
    "eta",
    [f"<m:sSubSup>{e(HATTED)}{part('sub', 'G')}{part('sup', '2')}</m:sSubSup>", sub(sup("η", "2"), "G")],
)
def test_a_result_in_equations_is_a_claim(eta):
    body = p(
        r("The loaves differed, "), math("F(1,38)=3.20"), r(", "), math("MSE=1.70"), r(", "), math("p=.082"),
        r(", "), math(eta + mr("=.03")), r("."),
    )  # fmt: skip
    values = {"F": "3.20", "df1": "1", "df2": "38", "mse": "1.70", "p": ".082", "generalized_eta2": ".03"}
    assert claims(body) == [("F-test", values)]


def test_a_result_in_one_equation_without_spaces_is_a_claim():
    inside = mr("t") + delimited("22") + mr("=2.31,p=.031,d=0.94")
    assert claims(p(r("The crumb differed, "), math(inside), r("."))) == [
        ("t-test", {"t": "2.31", "df": "22", "p": ".031", "d": "0.94"})
    ]
