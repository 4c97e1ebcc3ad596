import io

import pytest
from hypothesis import given
from hypothesis.strategies import integers, text

from recheck.reports.look import Look, clean, look_of, shortened
from recheck.reports.terminal import terminal_report
from tests.reports.audits import FULL


class Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


@pytest.fixture
def environment(monkeypatch):
    for name in ("NO_COLOR", "TERM", "COLUMNS"):
        monkeypatch.delenv(name, raising=False)
    return monkeypatch


@pytest.mark.skipif("os.name == 'nt'", reason="colour on Windows depends on the terminal")
def test_a_terminal_gets_colour_unless_told_otherwise(environment):
    assert look_of(Terminal()).colour
    assert not look_of(io.StringIO()).colour
    environment.setenv("TERM", "dumb")
    assert not look_of(Terminal()).colour
    environment.delenv("TERM")
    # https://no-color.org: when present and not an empty string
    environment.setenv("NO_COLOR", "1")
    assert not look_of(Terminal()).colour


@pytest.mark.parametrize(("columns", "width"), [("20", 40), ("72", 72), ("240", 100)])
def test_the_width_is_that_of_the_terminal_within_reason(environment, columns, width):
    environment.setenv("COLUMNS", columns)
    assert look_of(io.StringIO()).width == width


@pytest.mark.parametrize("encoding", ["ascii", "latin-1", "cp1252", "cp437"])
def test_characters_that_an_encoding_lacks_are_spelled_out(encoding):
    data = terminal_report(FULL, everything=True).encode(encoding, "recheck-spelled")
    assert b"p = .010" in data
    assert b"?" not in data.replace(b"page 4?", b"").replace(b"page 5?", b"").replace(b"computed?", b"")


@pytest.mark.parametrize(
    ("character", "spelled"),
    [("−", "-"), ("χ²", "chi2"), ("η", "eta"), ("≤", "<="), ("é", "e"), ("𝑡", "t"), ("ﬁ", "fi"), ("漢", "?")],
)
def test_spellings(character, spelled):
    assert character.encode("ascii", "recheck-spelled").decode() == spelled


@given(text(), integers(10, 60))
def test_shortened_text_fits_and_can_be_shown(words, columns):
    short = shortened(words, columns)
    assert len(short) <= columns
    assert not short or short.isprintable()


@given(text())
def test_cleaning_twice_changes_nothing(words):
    assert clean(clean(words)) == clean(words)


def test_paragraphs_keep_hyphenated_words_and_minus_signs_whole():
    assert Look(40).paragraph("a b-c " * 12, indent=2)[0].startswith("  a b-c")
