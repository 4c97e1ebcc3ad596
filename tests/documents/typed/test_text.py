"""Plain text and Markdown: blocks, markup, lines."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from recheck.documents import open_document, text_document

ARTICLE = """---
title: "Benches and loaves"
---

# Benches

The loaves *rose*, _t_(22) = 1.71,
*p* = .101, and η²p = .12.

## Results

<!-- a remark
over two lines -->
- First, χ^2^(1) = 3.84.
- Second, H~0~ was kept.

| Bench | M |
|-------|---|
| rye   | 9 |

```
t(99) = 9.99
```

[^1]: The cellar was warm.

References
Miller, A. (2001). Crumb, t(30) = 2.04. Bench Letters, 3, 1-9.

Appendix
========

More loaves were baked.
"""


def passages(text):
    return text_document(text).passages


def test_blocks_of_markdown():
    found = [(p.kind, p.line, p.text.split("\n")[0]) for p in passages(ARTICLE)]
    assert found == [
        ("aside", 1, "---"),
        ("heading", 5, "Benches"),
        ("body", 7, "The loaves rose, t(22) = 1.71,"),
        ("heading", 10, "Results"),
        ("body", 14, "- First, χ2(1) = 3.84."),
        ("body", 15, "- Second, H0 was kept."),
        ("aside", 21, "```"),
        ("note", 25, "The cellar was warm."),
        ("heading", 27, "References"),
        ("references", 28, "Miller, A. (2001). Crumb, t(30) = 2.04. Bench Letters, 3, 1-9."),
        ("heading", 30, "Appendix"),
        ("body", 33, "More loaves were baked."),
    ]
    assert [table.before for table in text_document(ARTICLE).tables] == [6]
    assert text_document(ARTICLE).title == "Benches and loaves"
    assert open_document(ARTICLE.encode()).format == "markdown"


def test_lines_are_counted_inside_a_passage():
    passage = passages(ARTICLE)[2]
    start = passage.text.index("p = .101")
    place = passage.place(start, start + 8)
    assert (place.line, place.section, place.quote, place.page) == (8, "Benches", "p = .101", None)


@pytest.mark.parametrize(
    ("written", "read", "marks"),
    [
        ("χ^2^(1)", "χ2(1)", " ^   "),
        ("t~22~ = 2", "t22 = 2", " __    "),
        ("η<sup>2</sup><sub>p</sub> = 1", "η2p = 1", " ^_    "),
        ("η²ₚ = 1", "η2p = 1", " ^_    "),
        ("𝑡(22) = 1", "t(22) = 1", ""),
        ("M = 5&nbsp;cm", "M = 5 cm", ""),
        ("p &lt; .05", "p < .05", ""),
        (r"p \< .05 and 3 \* 4", "p < .05 and 3 * 4", ""),
        (r"t(40) \= 1.10 and 2.5 \+ 3", "t(40) = 1.10 and 2.5 + 3", ""),
        ("a [link](https://bench.org) here", "a link here", ""),
        ("**M** = 5 and ***p*** = .1", "M = 5 and p = .1", ""),
        ("Δ*M* = 5", "ΔM = 5", ""),
        ("about 2½ loaves", "about 2½ loaves", ""),
        ("soft\u00adhyphen", "softhyphen", ""),
    ],
)
def test_markup_goes_and_marks_stay(written, read, marks):
    passage = passages(written + "\n\nand more.")[0]
    assert (passage.text, passage.marks) == (read, marks)


@pytest.mark.parametrize(
    "text",
    [
        "*p < .05, **p < .01, ***p < .001.",
        "3 * 4 * 5 loaves and a_b_c.",
        "p <.05 and x> 3 hold; a < b > c.",
        r"We found \(F(2, 61) = 3.40\) and $t$ = 2.",
        "The range was 3^rd and ~5 loaves ~6.",
        "p \x03 .05 and F(1,44) 5 3.18.",
    ],
)
def test_what_only_looks_like_markup_stays(text):
    assert passages(text)[0].text == text


def test_headings_of_plain_text():
    text = (
        "Benches and loaves\n\nThe loaves rose.\n\nResults\n\nt(28) = 2.20, p = .036\n\n2.1 Crumb\n\nM = 5\n"
    )
    assert [p.kind for p in passages(text)] == ["heading", "body", "heading", "body", "heading", "body"]
    assert passages("The mean was 5 loaves")[0].kind == "body"
    assert passages("Group A")[0].kind == "body"


def test_line_ends_of_other_systems():
    for end in ("\r\n", "\r"):
        found = passages(f"# Loaves{end}{end}The loaves rose,{end}p = .03.{end}")
        assert [p.line for p in found] == [1, 3]
        assert found[1].place(found[1].text.index("p"), len(found[1].text)).line == 4


@given(st.text(st.sampled_from("t(2) =.5\n\n*_p#|-`<>^~&;é²𝑡"), max_size=120))
def test_nothing_breaks_and_lines_hold(text):
    lines = text.split("\n")
    for passage in passages(text):
        assert not passage.marks or len(passage.marks) == len(passage.text)
        assert 1 <= passage.line <= passage.line + passage.text.count("\n") <= len(lines)


@given(
    st.lists(
        st.sampled_from(["The loaves rose, p = .03.", "", "# Results", "- one", "Text\nmore"]), max_size=9
    )
)
def test_a_passage_stands_where_its_line_says(blocks):
    text = "\n\n".join(blocks)
    lines = text.split("\n")
    for passage in passages(text):
        assert lines[passage.line - 1].lstrip("# ") == passage.text.split("\n")[0]


def test_a_paragraph_of_megabytes_takes_no_time():
    document = text_document("Loaves " + " ".join(["x" + " " * 50] * 20_000))
    assert len(document.passages) == 1
