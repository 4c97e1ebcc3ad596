"""Places, ids, linking, passages that are not read, and hostile texts."""

from __future__ import annotations

import time

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.model import Document, Layout, Passage, Reading
from recheck.reading import read

TEXT = "Trained loaves were higher, t(22) = 2.31, p = .030, than others."


def reading(*passages: Passage) -> Reading:
    return read(Document(name="d", format="text", sha256="", passages=passages))


def test_quote_and_boxes_stand_where_the_numbers_do() -> None:
    boxes = np.array([[i, 0, i + 1, 10] for i in range(len(TEXT))], dtype=np.float32)
    layout = Layout(np.full(len(TEXT), 3, dtype=np.int32), boxes)
    claim = reading(Passage(text=TEXT, layout=layout)).claims[0]
    start = TEXT.index("2.31")
    assert claim.place.quote == "t(22) = 2.31, p = .030" and claim.place.page == 3
    assert claim.values["t"].box == (start, 0, start + 4, 10)


def test_raised_and_lowered_marks() -> None:
    text = "Heights: F1,38 = 4.107, p = .050; n = 361 loaves; χ21 = 4.50, p = .034."
    marks = [" "] * len(text)
    for piece, mark in (("1,38", "_"), ("7,", "^"), ("1 loaves", "^")):
        at = text.index(piece)
        for k in range(at, at + len(piece.split()[0].rstrip(",") if mark == "^" else piece)):
            marks[k] = mark
    at = text.index("χ21")
    marks[at + 1], marks[at + 2] = "^", "_"
    first, second = reading(Passage(text=text, marks="".join(marks))).claims
    assert {k: v.text for k, v in first.values.items()} == {
        "F": "4.10", "df1": "1", "df2": "38", "p": ".050", "n": "36",
    }  # fmt: skip
    assert {k: v.text for k, v in second.values.items()} == {"chi2": "4.50", "df": "1", "p": ".034"}


def test_lowered_df_with_their_brackets() -> None:
    text = "Heights: F(1, 26) = 6.45; p = .017; t(13) = 4.43, p = .001."
    marks = text
    for lowered in ("(1,", "26)", "(13)"):
        marks = marks.replace(lowered, "_" * len(lowered))
    marks = "".join(mark if mark == "_" else " " for mark in marks)
    first, second = reading(Passage(text=text, marks=marks)).claims
    assert {k: v.text for k, v in first.values.items()} == {"F": "6.45", "df1": "1", "df2": "26", "p": ".017"}
    assert {k: v.text for k, v in second.values.items()} == {"t": "4.43", "df": "13", "p": ".001"}


@pytest.mark.parametrize(
    "text",
    [
        "In the original study, loaves rose, t(38) = 3.41, p = .21, but replications were mixed.",
        "Our result contrasts with that of a recent meta-analysis (g = 0.42, 95% CI [0.55, 0.61]).",
    ],
)
def test_results_of_earlier_work_are_doubted(text: str) -> None:
    claim = reading(Passage(text=text)).claims[0]
    assert claim.confidence != "high" and claim.notes


def test_a_footnote_mark_is_not_part_of_n() -> None:
    text = "Heights were taken (M = 4.10, SD = 1.20, n = 361)."
    marks = " " * (text.index("361") + 2) + "^" + " " * 2
    claim = reading(Passage(text=text, marks=marks)).claims[0]
    assert claim.values["n"].text == "36"


def test_lowered_words_are_subscripts() -> None:
    text = "Ages were alike (Mage = 20.6, SDage = 2.45)."
    marks = "".join(
        "_" if text[max(0, k - 3) : k + 3].find("age") >= 0 and c in "age" else " "
        for k, c in enumerate(text)
    )
    claim = reading(Passage(text=text, marks=marks)).claims[0]
    assert {k: v.text for k, v in claim.values.items()} == {"mean": "20.6", "sd": "2.45"}


@pytest.mark.parametrize("kind", ["references", "table", "figure"])
def test_kinds_that_are_not_read_are_told(kind: str) -> None:
    found = reading(Passage(text=TEXT, kind=kind))  # type: ignore[arg-type]
    assert not found.claims and any(kind in note for note in found.notes)


def test_running_heads_are_not_told() -> None:
    found = reading(Passage(text=TEXT, kind="aside"))
    assert not found.claims and not found.notes


@pytest.mark.parametrize("kind", ["body", "heading", "caption", "note"])
def test_kinds_that_are_read(kind: str) -> None:
    assert len(reading(Passage(text=TEXT, kind=kind)).claims) == 1  # type: ignore[arg-type]


def test_ids_are_stable_and_unique() -> None:
    passages = (Passage(text=TEXT), Passage(text=TEXT), Passage(text=TEXT.replace("2.31", "2.32")))
    first, second = reading(*passages), reading(*passages)
    ids = [claim.id for claim in first.claims]
    assert ids == [claim.id for claim in second.claims] and len(set(ids)) == 3


def test_notes_count_what_was_left_out() -> None:
    found = reading(
        Passage(text="All others were alike, all ps > .31."), Passage(text="* p < .05, ** p < .01.")
    )
    assert not found.claims
    assert found.notes == ("Left out as no single results of this study: 2 legends of marks.",)


def test_what_is_not_read_is_one_sentence() -> None:
    kinds = ("references", "figure", "table", "aside", "table")
    found = reading(*(Passage(text=TEXT, kind=kind) for kind in kinds))  # type: ignore[arg-type]
    assert found.notes == ("Not read for results: the text of tables, the text of figures, the references.",)


PAIR = "Trained apprentices (M = 5.0, SD = 1.1) baked higher loaves than others (M = 4.2, SD = 1.3)."


def test_link_to_the_sentence_before() -> None:
    found = reading(
        Passage(text=f"{PAIR} This difference in loaves was significant, t(38) = 2.10, p = .042.")
    )
    test = next(claim for claim in found.claims if claim.kind == "t-test")
    assert test.groups == tuple(claim.id for claim in found.claims if claim.kind == "group-summary")
    assert test.link and (test.confidence, test.link_confidence) == ("high", "medium")


def test_no_link_where_three_compete() -> None:
    more = PAIR.replace("others", "masters (M = 5.5, SD = 1.0) and others")
    found = reading(Passage(text=f"{more} The first two differed, t(38) = 2.10, p = .042."))
    assert all(not claim.groups for claim in found.claims)


def test_no_link_to_ages() -> None:
    text = "Loaves differed between trained (Mage = 30.1, SD = 8.2) and other bakers (Mage = 29.4, SD = 7.9), t(38) = 2.10, p = .042."
    assert all(not claim.groups for claim in reading(Passage(text=text)).claims)


def test_two_tests_with_a_pair_each() -> None:
    text = (
        "Height (M = 5.0, SD = 1.1 vs. M = 4.2, SD = 1.3), t(38) = 2.10, p = .042, and "
        "mass (M = 710, SD = 60 vs. M = 690, SD = 55), t(38) = 1.10, p = .278, were compared."
    )
    tests = [claim for claim in reading(Passage(text=text)).claims if claim.kind == "t-test"]
    assert [len(test.groups) for test in tests] == [2, 2] and not set(tests[0].groups) & set(tests[1].groups)


SIZE = 16_000
HOSTILE = {
    "digits": "1", "digits apart": "1 ", "brackets": "(", "t brackets": "t(", "commas": "1,1,", "signs": "± ",
    "pairs": "1 ± 1 ", "spaces": " ", "p": "p = ", "summaries": "M = 1, SD = 1 ", "F": "F(1, ", "intervals": "95% CI [",
    "levels": "95% CI ", "letters": "a", "means": "mean of ", "dots": ".", "points": "1.", "minus": "-", "SD": "SD ",
    "codes": "p , .05 ", "fives": "F(1,1) 5 .1 ", "TeX": "\\chi{", "dollars": "$", "stars": "*a", "lines": "_t",
    "entities": "&lt;", "tags": "</i", "citations": "Aa et al. (2012) ", "names": "Baker and ", "capitals": "A. ",
    "several p": "p p p p ", "fractions": "1/1 ", "counts": "12 of 34 bakers (35%) ", "of": "of ", "percentages": "1% (", "ns": "n = 1 (",
    "number words": "twenty-one of ", "medians": "median [", "quartiles": "25th-75th ", "ranges": "Q1–Q3 ", "together": "M = 1.1 and ",
    "doubled": "d = 1.1 (1.1), 95% CI [1, 2] ([1, 2]), ", "contrasts": "EMM a-b-", "numbered": "[1] ", "subscripts": "_{", "powers said": "^{",
    "open TeX": "\\hat{\\", "nested": "<sub><i>", "many stars": "**", "tildes": "~a~", "factors": "BF > 3* ", "agreement": "kappa for these 8 ",
    "ratios": "odds ratio for a a, 1; ", "mixed points": "1.1.", "mixed commas": "1,1.1,", "glued levels": "1.1,95%", "hyphens": "a-",
    "raised": "²", "lists": "r = .1, ", "thousands": "= 1 000", "powers": "1 × 10 × ", "levels said": "significant alpha ",
}  # fmt: skip


@pytest.mark.parametrize("name", HOSTILE)
def test_no_text_takes_long(name: str) -> None:
    piece = HOSTILE[name]
    text = piece * (SIZE // len(piece))
    start = time.perf_counter()
    short = reading(Passage(text=text[: SIZE // 8]))
    early = time.perf_counter() - start
    start = time.perf_counter()
    reading(Passage(text=text))
    late = time.perf_counter() - start
    # Eight times the text may take eight times as long, not sixty-four times; the rest is noise.
    assert late < 25 * early + 1.0
    assert short.claims is not None


@pytest.mark.parametrize("piece", ["9", "(", ",", ".", "p ", "* ", "<i>_{", "\\hat{"])
def test_a_paragraph_of_200_kb_takes_no_long(piece: str) -> None:
    start = time.perf_counter()
    reading(Passage(text=f"Loaves rose, {piece * (200_000 // len(piece))}, t(22) = 2.31, p = .030."))
    assert time.perf_counter() - start < 20


@settings(max_examples=60, deadline=None)
@given(
    st.lists(
        st.sampled_from(
            [*"tFpMrnχη=<>±()[],;:.-−%*²₂ ", "SD", "CI", "95", ".05", "2.31", "1,38", " and ", "vs"]
        ),
        max_size=60,
    )
)
def test_no_text_breaks_the_reader(pieces: list[str]) -> None:
    found = reading(Passage(text="".join(pieces)))
    for claim in found.claims:
        assert claim.values and claim.place.quote
