"""Fonts with a wrong code table: inferred from the whole document, noted, and doubted where digits are concerned."""

from __future__ import annotations

from recheck.model import Claim, Document, Passage
from recheck.reading import read

PLAIN = (
    "The loaves rose, F(1, 44) = 3.18, p = .081; t(22) = 1.31, p = .204.",
    "Scores were high (M = 4.20, SD = 1.10, n = 24), r(48) = .45, p < .001.",
    "Crusts differed, F(2, 57) = 4.10, p < .05, but not crumbs, t(57) = 0.40, p > .05.",
)


def claims(*texts: str) -> tuple[Claim, ...]:
    passages = tuple(Passage(text=text, paragraph=i) for i, text in enumerate(texts))
    return read(Document(name="d", format="text", sha256="", passages=passages)).claims


def values(found: tuple[Claim, ...]) -> list[list[tuple[str, str, str]]]:
    return [[(name, v.relation, v.text) for name, v in claim.values.items()] for claim in found]


def coded(table: dict[str, str]) -> list[str]:
    return [text.translate(str.maketrans(table)) for text in PLAIN]


def test_digit_five_for_equals_and_stops_for_less_and_greater() -> None:
    found = claims(*coded({"=": "5", "<": ",", ">": "."}))
    assert values(found) == values(claims(*PLAIN))
    assert all(claim.confidence != "high" and claim.notes for claim in found)


def test_quarter_sign_and_control_characters() -> None:
    found = claims(*coded({"=": "¼", "<": "\x03"}))
    assert values(found) == values(claims(*PLAIN))
    assert all(claim.confidence == "high" and claim.notes for claim in found)


def test_a_sign_that_may_be_less_or_greater_is_not_read() -> None:
    found = claims(*coded({"=": "¼", ">": "\x02"}))
    assert "p" not in found[-1].values


def test_mathematical_look_alikes_need_no_inference() -> None:
    found = claims("The loaves rose, F(1, 44) ⫽ 3.18, p ⬎ .05; ␹2(1) ⫽ 4.20, p ⬍ .05; r(20) ⫽ ⫺.31.")
    plain = claims("The loaves rose, F(1, 44) = 3.18, p > .05; χ2(1) = 4.20, p < .05; r(20) = ⫺.31.")
    assert values(found) == values(plain)
    assert found[2].values["r"].number == -0.31
    assert all(claim.notes for claim in found)


def test_backslash_for_less_and_bracket_for_greater() -> None:
    found = claims(
        "Loaves rose (t(22) = 2.31, P\\0.05), (F(1, 30) = 9.30, P\\0.01) and (t(30) = 4.10, P\\0.001).",
        "Crumbs did not (t(22) = 0.31, P[0.05).",
    )
    assert [claim.values["p"].relation for claim in found] == ["<", "<", "<", ">"]


def test_letter_o_for_less() -> None:
    found = claims(
        "Loaves rose (t(22) = 2.31, Po0.05), (F(1, 30) = 9.30, Po0.01) and (t(30) = 4.10, Po0.001)."
    )
    assert [claim.values["p"].relation for claim in found] == ["<", "<", "<"]


def test_minus_as_two_lowers_confidence() -> None:
    found = claims(
        *coded({"=": "5", "<": ","}), "Salt and height, r(48) 5 2.45, p , .001; t(22) 5 22.31, p , .05."
    )
    r, t = found[-2:]
    assert r.values["r"].number == -0.45 and r.confidence == "low"
    assert t.confidence == "low"


def test_one_stray_sign_is_no_table() -> None:
    found = claims(
        "The loaves rose, t(22) = 2.31, p = .030.", "In group 5 5.2 loaves were sold, p , .05 or not."
    )
    assert len(found) == 1 and not found[0].notes


def test_a_document_in_order_is_left_alone() -> None:
    assert all(claim.confidence == "high" and not claim.notes for claim in claims(*PLAIN))
