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


def test_five_for_equals_without_spaces() -> None:
    found = claims(
        "Crusts were lighter (39.1 [SD 9.9] vs 45.0 [SD 12.1]; difference 25.9, 95% CI 29.9 to 21.9; p50.0041).",
        "Days were 6.262.0 with steam and 7.762.1 without (t524.01, df5117, P50.0001).",
        "Fewer burnt (v254.81, df51, P50.028; OR 0.38, 95% CI 0.16–0.91).",
    )
    difference, first, second, t, chi2 = found[2:7]
    assert [difference.values[q].number for q in ("mean_difference", "ci_low", "ci_high")] == [
        -5.9,
        -9.9,
        -1.9,
    ]
    assert [(c.values["mean"].text, c.values["sd"].text) for c in (first, second)] == [
        ("6.2", "2.0"),
        ("7.7", "2.1"),
    ]
    assert (t.values["t"].number, t.values["df"].number) == (-4.01, 117)
    assert (chi2.values["chi2"].text, chi2.values["df"].text, chi2.values["p"].text) == ("4.81", "1", "0.028")
    assert all(claim.confidence != "high" for claim in (difference, t, chi2))


def test_five_for_equals_beside_lowered_df() -> None:
    found = claims(
        "Loaves rose, F2,33 5 6.30, P 5 0.005; t35 5 3.86, P 5 0.0005; χ2 5 3.27, d.f. 5 2, P 5 0.195.",
        "The mean change 5 1.21, 95% CI [0.78, 1.65].",
    )
    assert values(found) == [
        [("F", "=", "6.30"), ("df1", "=", "2"), ("df2", "=", "33"), ("p", "=", "0.005")],
        [("t", "=", "3.86"), ("df", "=", "35"), ("p", "=", "0.0005")],
        [("chi2", "=", "3.27"), ("df", "=", "2"), ("p", "=", "0.195")],
        [
            ("mean_difference", "=", "1.21"),
            ("ci_low", "=", "0.78"),
            ("ci_high", "=", "1.65"),
            ("ci_level", "=", "95"),
        ],
    ]


def test_a_single_spaceless_five_makes_a_turned_interval_doubtful() -> None:
    found = claims("The difference was 25.9 (95% CI 29.9 to 21.9; p50.0041).")
    assert all(claim.confidence == "low" for claim in found if "ci_low" in claim.values)
    plain = claims("The difference was 25.9 (95% CI 29.9 to 21.9; p = .0041).")
    assert plain[0].confidence == "high"


def test_quarter_sign_with_its_minus_less_greater_eta_and_plus_minus() -> None:
    found = claims(
        "Loaves rose, t(62.17) ¼ À3.90, p o .001; F(1, 63) ¼ 5.37, p ¼ .024, Z2p ¼ .079; r(63) ¼ À.55, p o .001.",
        "Crusts did not (t¼0.01, df¼117, P40.05), (w2¼4.81, df¼1, P¼0.028), and days were 6.272.0.",
    )
    plain = claims(
        "Loaves rose, t(62.17) = -3.90, p < .001; F(1, 63) = 5.37, p = .024, η2p = .079; r(63) = -.55, p < .001.",
        "Crusts did not (t=0.01, df=117, P>0.05), (χ2=4.81, df=1, P=0.028), and days were 6.2±2.0.",
    )
    assert [{(q, v.value) for q, v in claim.values.items()} for claim in found] == [
        {(q, v.value) for q, v in claim.values.items()} for claim in plain
    ]
    assert all(claim.confidence == "high" for claim in found)


def test_the_word_to_is_no_t_that_is_less() -> None:
    found = claims(
        "Crumb was 8.1 and 7.2, mean difference 0.9 (95% CI 0.3 to 1.5), P¼0.004, from 3 to 5.",
        "Ovens differed (w2¼4.81, df¼1, P¼0.028), flours did (Po0.001, t¼4.01, df¼117).",
    )
    assert [claim.kind for claim in found] == ["comparison", "chi2-test", "t-test"]
    assert found[0].values["ci_high"].text == "1.5"


def test_a_lowered_df_and_a_lowered_word_before_the_sign() -> None:
    text = "Loaves rose, v23 5 14.9, P 5 0.002; t(23) 5 6.02, padj , .001; F(1, 44) 5 3.18, p 5 .081."
    marks = list(" " * len(text))
    at, word = text.index("v23"), text.index("adj")
    marks[at + 1 : at + 3] = "^_"
    marks[word : word + 3] = "___"
    passages = (Passage(text=text, marks="".join(marks)),)
    chi2, t, _ = read(Document(name="d", format="pdf", sha256="", passages=passages)).claims
    assert {q: v.text for q, v in chi2.values.items()} == {"chi2": "14.9", "df": "3", "p": "0.002"}
    assert (t.values["p"].relation, t.values["p"].text) == ("<", ".001") and t.says("adjusted-p")


def test_french_capitals_and_oxygen_pressures_are_left_alone() -> None:
    text = "À 25 °C le P50 moyen était de 26.6 (SD = 2.1, n = 12), t(22) = 2.31, p = .030."
    assert all(claim.confidence == "high" and not claim.notes for claim in claims(text))


def test_one_stray_sign_is_no_table() -> None:
    found = claims(
        "The loaves rose, t(22) = 2.31, p = .030.", "In group 5 5.2 loaves were sold, p , .05 or not."
    )
    assert len(found) == 1 and not found[0].notes


def test_a_document_in_order_is_left_alone() -> None:
    assert all(claim.confidence == "high" and not claim.notes for claim in claims(*PLAIN))
