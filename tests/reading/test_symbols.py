"""Every spelling in the table is found where it is printed, and stands for what the table says."""

from __future__ import annotations

import pytest

from recheck.model import QUANTITIES, Passage
from recheck.reading.numerals import Line
from recheck.reading.spellings import spelled_at
from recheck.reading.symbols import SPELLINGS, Symbol
from recheck.reading.tokens import tokens
from recheck.reading.views import view_of

SQUARED = {"X", "x", "v", "c", "w", "G", "khi", "ε", "epsilon", "ω", "omega", "η", "eta", "np", "h",
           "ΔR", "change in R", "increment in R", "incremental R", "Rchange", "marginal R", "conditional R", "K"}  # fmt: skip
"""Letters that stand for the quantity with a raised 2 alone."""


def line(text: str) -> Line:
    view = view_of(Passage(text=text))
    return Line(view, tokens(view, 0, len(view.text)))


@pytest.mark.parametrize(("text", "symbol"), SPELLINGS, ids=[text for text, _ in SPELLINGS])
def test_each_spelling_is_found(text: str, symbol: Symbol) -> None:
    printed = {"h": "h2p"}.get(text, text + "2" if text in SQUARED else text)
    found = spelled_at(line(f"{printed} (1) = .5"), 0)
    assert found is not None
    # h²p is what a wrong code table makes of η²p.
    assert found.symbol.quantity == {"h": "partial_eta2"}.get(text, symbol.quantity)


def test_no_spelling_is_listed_twice() -> None:
    texts = [text for text, _ in SPELLINGS]
    assert len(set(texts)) == len(texts)


def test_quantities_are_those_of_the_model() -> None:
    inside = {"ci", "range", "iqr", "other"}
    assert {symbol.quantity for _, symbol in SPELLINGS} - set(QUANTITIES) <= inside


@pytest.mark.parametrize(
    ("text", "quantity"),
    [
        ("η²p", "partial_eta2"), ("ηp²", "partial_eta2"), ("ηp2", "partial_eta2"), ("η2p", "partial_eta2"),
        ("η_p²", "partial_eta2"), ("η̂²G", "generalized_eta2"), ("ηG2", "generalized_eta2"), ("η2 G", "generalized_eta2"),
        ("partial η²", "partial_eta2"), ("generalised eta-squared", "generalized_eta2"), ("eta-squared", "eta2"),
        ("χ²", "chi2"), ("χ2", "chi2"), ("χ 2", "chi2"), ("X2", "chi2"), ("Chi-square", "chi2"), ("G²", "chi2"),
        ("R²", "r2"), ("r2", "r2"), ("ΔR²", "delta_r2"), ("R² change", "delta_r2"), ("R²change", "delta_r2"), ("adj. R²", "adjusted_r2"), ("R2adj", "adjusted_r2"), ("R²_adj", "adjusted_r2"), ("adjusted R²", "adjusted_r2"),
        ("f²", "f2"), ("Cohen's f²", "f2"), ("Cohen’s d", "d"), ("Cohen’s dz", "d_z"), ("d_z", "d_z"), ("d_av", "d_av"),
        ("Hedges’ g", "g"), ("Hedge's g", "g"), ("Cramér's V", "cramers_v"), ("Glass’s Δ", "delta"), ("ω²", "omega2"), ("K²", "chi2"), ("Bartlett's K-squared", "chi2"),
        ("s.d.", "sd"), ("S.D.", "sd"), ("std. dev.", "sd"), ("s.e.m.", "se"), ("S.E.", "se"), ("d.f.", "df"),
        ("M_diff", "mean_difference"), ("Mdiff", "mean_difference"), ("SE_diff", "se_difference"), ("r_s", "r"),
        ("df1", "df1"), ("df2", "df2"), ("Mage", "mean"), ("SDage", "sd"), ("M_control", "mean"), ("r_pb", "r_pb"),
    ],
)  # fmt: skip
def test_compound_spellings(text: str, quantity: str) -> None:
    found = spelled_at(line(f"{text} = .5"), 0)
    assert found is not None and found.symbol.quantity == quantity


@pytest.mark.parametrize(
    "text", ["Male", "Model", "MAF", "Max", "May", "tea", "for", "or", "SDSS", "Methods", "pH", "Mode"]
)
def test_other_words_are_no_symbols(text: str) -> None:
    assert spelled_at(line(f"{text} = .5"), 0) is None
