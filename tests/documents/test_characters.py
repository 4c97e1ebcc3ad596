"""Normalisation of single characters. Compatible forms: Unicode Character Database, UAX #15."""

from __future__ import annotations

import unicodedata

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from recheck.documents.characters import as_codes, as_text, made_plain, mark_string, plain


@pytest.mark.parametrize(
    ("char", "became", "mark"),
    [
        ("²", "2", 1), ("₂", "2", 2), ("⁻", "\u2212", 1), ("𝑝", "p", 0), ("𝜂", "η", 0), ("ﬁ", "fi", 0), ("…", "...", 0),
        ("½", "½", 0), ("´", "´", 0), ("\u00a0", " ", 0), ("\u2009", " ", 0), ("\u00ad", "", 0), ("\u2212", "\u2212", 0),
        ("\x03", "\x03", 0), ("µ", "μ", 0), ("＝", "=", 0), ("\u2011", "\u2010", 0),
    ],
)  # fmt: skip
def test_plain(char, became, mark):
    assert plain(ord(char)) == (became, mark)


@given(st.text(max_size=60))
def test_every_character_keeps_its_source(text):
    codes = as_codes(text)
    new, marks, source = made_plain(codes, np.zeros(len(codes), np.uint8))
    assert len(new) == len(marks) == len(source)
    assert (np.diff(source) >= 0).all()
    for code, at in zip(new.tolist(), source.tolist(), strict=True):
        assert chr(code) in plain(ord(text[at]))[0]
    assert len(mark_string(marks)) in (0, len(as_text(new)))


@given(st.text(st.characters(min_codepoint=32, max_codepoint=126), max_size=40))
def test_plain_text_stays(text):
    codes = as_codes(text)
    assert (
        as_text(made_plain(codes, np.zeros(len(codes), np.uint8))[0])
        == unicodedata.normalize("NFKC", text)
        == text
    )


def test_a_mark_of_the_page_wins_over_that_of_the_character():
    codes = as_codes("x²")
    assert made_plain(codes, np.array([0, 2], np.uint8))[1].tolist() == [0, 2]
