"""What captions and notes say of all numbers."""

from __future__ import annotations

import pytest

from recheck.model import Passage, Table
from recheck.reading.tables.legend import Legend, legend_of


def legend(*notes: str, caption: str = "") -> Legend:
    return legend_of(
        Table(
            (), 0, 0, caption=Passage(text=caption, kind="caption") if caption else None,
            notes=tuple(Passage(text=note, kind="note") for note in notes),
        )
    )  # fmt: skip


@pytest.mark.parametrize(
    ("note", "stars"),
    [
        ("* p < .05. ** p < .01. *** p < .001.", {"*": "0.05", "**": "0.01", "***": "0.001"}),
        ("*P<0·05; **P<0·01", {"*": "0.05", "**": "0.01"}),
        ("∗∗∗ 0.1%, ∗∗ 1%, ∗ 5%", {"*": "0.05", "**": "0.01", "***": "0.001"}),
        ("† p < .10, * p < .05", {"†": "0.10", "*": "0.05"}),
        ("p < .05 (*), p < .01 (**)", {"*": "0.05", "**": "0.01"}),
        ("* significant at the 5% level", {"*": "0.05"}),
        ("* Scored by two bakers.", {}),
    ],
)
def test_stars(note: str, stars: dict[str, str]) -> None:
    found = legend(note).stars
    assert {mark: float(value.value) for mark, value in found.items()} == {
        mark: float(p) for mark, p in stars.items()
    }


@pytest.mark.parametrize(
    ("note", "forms"),
    [
        ("Values are mean ± SD.", (("mean", "sd"),)),
        ("Data are means (standard error).", (("mean", "se"),)),
        ("Data are n (%) or mean (SD).", (("count", "percent"), ("mean", "sd"))),
        (
            "Values as either median (interquartile range), mean (SD), or n (percent)",
            (("median", "q1", "q3"), ("mean", "sd"), ("count", "percent")),
        ),
        ("Skewed data are expressed as median (25th-75th percentile).", (("median", "q1", "q3"),)),
        ("Median (Q1, Q3); n (%)", (("median", "q1", "q3"), ("count", "percent"))),
        ("* Median (range)", (("median", "min", "max"),)),
        ("Odds ratios with 95% confidence intervals.", (("or", "ci_low", "ci_high"),)),
        ("All doughs rested for an hour.", ()),
    ],
)
def test_forms(note: str, forms: tuple[tuple[str, ...], ...]) -> None:
    assert legend(note).forms == forms


def test_what_stands_after_the_sign_and_in_brackets() -> None:
    assert legend("Values are means ± SE.").spread == "se"
    assert legend("Heights are presented ± their standard deviations.").spread == "sd"
    assert legend(caption="Mean heights (SD in parentheses)").brackets == "sd"
    assert legend("95% confidence intervals are shown in brackets.").interval == "ci"
    assert legend("Frequencies in parentheses").interval == ""


def test_sizes() -> None:
    found = legend("Rye, N = 5; Wheat, N = 7.")
    assert {name: value.value for name, value in found.ns.items()} == {
        "rye": 5,
        "wheat": 7,
    } and found.N is None
    each = legend(caption="Loaf heights (n = 20 per group)").each
    assert each is not None and each.value == 20
    whole = legend(caption="Bakers of the study (N = 129)").N
    assert whole is not None and whole.value == 129


def test_degrees_of_freedom_levels_tests_and_abbreviations() -> None:
    assert [df.value for df in legend("df = 31 for all tests").df] == [31]
    level = legend("OR, odds ratio; 90% CI").level
    assert level is not None and level.value == 90
    assert "welch" in legend("p values from Welch's t tests").stated
    assert legend("SE, shaping effort; BMI: body mass index").abbreviations == {
        "SE": "shaping effort",
        "BMI": "body mass index",
    }
