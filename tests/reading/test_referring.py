"""Tables that a text refers to, and whether it does nothing but refer to them."""

from __future__ import annotations

import pytest

from recheck.reading.referring import figures, key_of, references


@pytest.mark.parametrize(
    ("label", "key"),
    [
        ("Table 2", "2"), ("Table 2.", "2"), ("TABLE IV", "iv"), ("Table S1", "s1"), ("Table A1", "a1"), ("Table 2a", "2a"), ("Tab. 3", "3"),
        ("Supplementary Table 2", "supplementary 2"), ("unlabelled table 3", "unlabelled table 3"), ("", ""),
    ],
)  # fmt: skip
def test_key_of_a_label(label: str, key: str) -> None:
    assert key_of(label) == key


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("Loaves rose, t(34) = 2.20 (Table 2).", [("2", True)]),
        ("Loaves rose (t(34) = 2.20; Table 2).", [("2", True)]),
        ("Loaves rose (t(34) = 2.20, see Table 2).", [("2", True)]),
        ("Loaves rose (Fig. 1, Table 2).", [("2", True)]),
        ("Loaves rose (Table 2, Figure 3).", [("2", True)]),
        ("Table 2 shows that loaves rose.", [("2", True)]),
        ("As shown in Table 2, loaves rose.", [("2", True)]),
        ("As Table 2 shows, loaves rose.", [("2", True)]),
        ("Loaves rose, p = .03, Table 2.", [("2", True)]),
        ("Loaves rose (Tables 2 and 3).", [("2", True), ("3", True)]),
        ("Tables 1-3 show loaves.", [("1", True), ("2", True), ("3", True)]),
        ("Loaves rose (baseline values are given in Table 2).", [("2", False)]),
        ("Loaves rose (baseline: Table 2).", [("2", False)]),
        ("Loaves rose; for the start see Table 2.", [("2", False)]),
        ("Unlike in Table 2, loaves rose.", [("2", False)]),
        ("The loaves of Table 2 rose.", [("2", False)]),
        ("See Table 2 of Baker (2012).", []),
        ("Loaves rose as in Table 3 in [7].", []),
        ("The tables were set for 7.", []),
        ("A timetable 2 hours long.", []),
    ],
)  # fmt: skip
def test_references(text: str, found: list[tuple[str, bool]]) -> None:
    assert [(r.key, r.plain) for r in references(text)] == found


def test_figures() -> None:
    text = "Loaves rose (Figure 1A and B, Figs. 2-3) in 4 figs."
    assert [text[a:b] for a, b in figures(text)] == ["Figure 1A and B", "Figs. 2-3"]


def test_no_text_makes_a_pattern_backtrack() -> None:
    list(references("Table 1, 2, 3, " * 3000))
    list(references("see (" * 3000 + "Table 2"))
    list(figures("Fig. 1, 2 and 3, " * 3000))
