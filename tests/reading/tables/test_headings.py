"""Headings taken apart."""

from __future__ import annotations

import pytest

from recheck.reading.symbols import HEADINGS
from recheck.reading.tables.headings import told


@pytest.mark.parametrize(
    ("text", "quantities", "name"),
    [
        ("Mean (SD)", ("mean", "sd"), ""),
        ("Mean ± SEM", ("mean", "se"), ""),
        ("Loaf height ± SD", ("mean", "sd"), "Loaf height"),
        ("Age, years, mean (SD)", ("mean", "sd"), "Age, years"),
        ("Weight, mean (s.d.), kg", ("mean", "sd"), "Weight, kg"),
        ("Mean age in years (SD)", ("mean", "sd"), "age in years"),
        ("Height, cm, median [IQR]", ("median", "q1", "q3"), "Height, cm"),
        ("Median (Q1–Q3)", ("median", "q1", "q3"), ""),
        ("Median (25th–75th percentile)", ("median", "q1", "q3"), ""),
        ("Rest in hours (median and range)", ("median", "min", "max"), "Rest in hours"),
        ("Rye flour, n (%)", ("count", "percent"), "Rye flour"),
        ("Women n (%)", ("count", "percent"), "Women"),
        ("Rye LS mean (SE)", ("mean", "se"), "Rye"),
        ("Geometric mean (95% CI)", ("mean", "ci_low", "ci_high"), ""),
        ("No. (%) of loaves", ("count", "percent"), ""),
        ("n/N (%)", ("count", "total", "percent"), ""),
        ("Number of bakers", ("n",), ""),
        ("Number of folds per dough", (), "Number of folds per dough"),
        ("Burnt loaves (%)", (), "Burnt loaves (%)"),
        ("OR (95% CI)", ("or", "ci_low", "ci_high"), ""),
        ("Adjusted OR", ("or",), ""),
        ("Success versus failure (95% CI)", ("ci_low", "ci_high"), "Success versus failure"),
        ("Mean difference (95% CI)", ("mean_difference", "ci_low", "ci_high"), ""),
        ("P value for trend", ("p",), "for trend"),
        ("Sig. (2-tailed)", ("p",), ""),
        ("Pr(>|t|)", ("p",), ""),
        ("Exp(B)", ("or",), ""),
        ("95% C.I. for Exp(B)", ("ci_low", "ci_high"), ""),
        ("OR (IC à 95 %)", ("or", "ci_low", "ci_high"), ""),
        ("95 %-KI", ("ci_low", "ci_high"), ""),
        ("s.s.", ("ss",), ""),
        ("m.s.", ("ms",), ""),
        ("v.r.", ("F",), ""),
        ("F pr.", ("p",), ""),
        ("F2,57", ("F",), ""),
        ("Valid %", ("percent",), ""),
        ("Speed (m s−1)", (), "Speed (m s-1)"),
        ("β coefficient", ("beta",), ""),
        ("Std. Error", ("se",), ""),
        ("adj. R2", ("adjusted_r2",), ""),
        ("Partial η²", ("partial_eta2",), ""),
        ("SS", ("ss",), ""),
        ("Rye (n = 24)", (), "Rye"),
        ("No", (), "No"),
        ("Total", (), "Total"),
        ("Group A", (), "Group A"),
        ("Group B (n = 26)", (), "Group B"),
        ("Condition F", (), "Condition F"),
        ("B (n = 26)", (), "B"),
        ("Bake time (min)", (), "Bake time (min)"),
        ("Rest, min, mean (SD)", ("mean", "sd"), "Rest, min"),
        ("Weight, g", (), "Weight, g"),
        ("Heat in kJ/min/m²", (), "Heat in kJ/min/m²"),
        ("Sex (M/F)", (), "Sex (male/female)"),
        ("M184V", (), "M184V"),
        ("Range of motion", (), "Range of motion"),
        ("Missing", (), "Missing"),
        ("F1 score (%)", (), "F1 score (%)"),
        ("Overall¹", (), "Overall"),
    ],
)
def test_quantities_and_names(text: str, quantities: tuple[str, ...], name: str) -> None:
    found = told(text)
    assert (found.quantities, found.name) == (quantities, name)


def test_sizes_degrees_of_freedom_and_levels() -> None:
    size = told("Control, N = 5,575").n
    assert size is not None and size.value == 5575
    assert [df.value for df in told("t (df = 31)").df] == [31]
    assert [df.value for df in told("F(2, 57)").df] == [2, 57]
    level = told("OR (90% CI)").level
    assert level is not None and level.value == 90


def test_what_a_heading_says_of_its_test() -> None:
    assert told("Paired t (48)").stated == ("paired",)
    assert told("Wilcoxon test (p)").stated == ("rank-test",)


@pytest.mark.parametrize(("text", "quantity"), [(text, symbol.quantity) for text, symbol in HEADINGS])
def test_each_spelling_of_headings_is_found(text: str, quantity: str) -> None:
    spans = {"ci": "ci_low", "iqr": "q1", "range": "min"}
    printed = f"{text} (%)" if text in ("No", "no") else text
    found = told(printed).quantities
    expected = "count" if text in ("No", "no") else spans.get(quantity, quantity)
    assert found[:1] == (expected,)


@pytest.mark.parametrize(
    "text",
    [
        "HR (bpm)", "RR (mmHg)", "t (s)", "P (mg/kg)", "F (Hz)", "Power (W)", "β-carotene", "d'", "d prime", "Education: high", "C/N",
        "T cells", "Vitamin C", "P300 latency", "n-back accuracy", "IL-6", "pH", "MS patients", "Dough R", "Rye B", "Standard drinks per week",
        "Rate per min", "Range of motion", "Number of siblings", "Difference score", "Body fat (%)", "Smoking (yes/no)", "Race/ethnicity", "T1",
        "F2", "Q3", "Class A", "Model 1", "Upper limb", "Lower back pain", "Risk aversion", "U/L", "Percent body fat", "Min. rest",
    ],
)  # fmt: skip
def test_names_that_are_no_quantities(text: str) -> None:
    assert told(text).quantities == ()
