"""Pages: what is shown, what is the article, tables with captions and notes."""

from __future__ import annotations

import pytest

from recheck.documents import open_document
from recheck.reading import read as claims_of
from tests.documents.markup.marking import MATHML, grid, page, read, said
from tests.documents.pdf.making import containing, texts

ROWS = "<tr><th>Bench</th><th>Height</th></tr><tr><td>North</td><td>52.1</td></tr>"


def test_only_what_is_shown():
    document = read(
        page(
            "<style>p{}</style><script>var t = 1;</script><template><p>no</p></template><noscript>no</noscript><p hidden>no</p>"
            "<p style='display: none'>no</p><span class='sr-only'>no</span><p style='color:red' aria-hidden='true'>Yes<!-- no --> it&nbsp;is.</p>"
            "<svg><text>no</text></svg><button>no</button><details><summary>More</summary><p>Open.</p></details>"
        )
    )
    assert texts(document) == ["Yes it is.", "More", "Open."]


def test_headings_sections_lists_and_code():
    document = read(
        page(
            "<h1>Rye loaves</h1><p class='author'>P. Krume</p><p>Abstract</p><p>We baked.</p><h2>Methods<a class='headerlink' href='#m'>¶</a></h2>"
            "<p>First,<br>mix.</p><ul><li>Wait.<li>Bake.</ul><dl><dt>SD</dt><dd>standard deviation</dd></dl><div>Loose <b>text</b><p>apart</p>and on.</div>"
            "<blockquote>Said.</blockquote><pre><code>t.test(x)\nt = 2.1</code></pre>"
        )
    )
    assert said(document) == [
        ("heading", "Rye loaves"), ("body", "P. Krume"), ("heading", "Abstract"), ("body", "We baked."), ("heading", "Methods"),
        ("body", "First,\nmix."), ("body", "Wait."), ("body", "Bake."), ("body", "SD standard deviation"), ("body", "Loose text"),
        ("body", "apart"), ("body", "and on."), ("body", "Said."), ("aside", "t.test(x)\nt = 2.1"),
    ]  # fmt: skip
    assert (document.title, document.format, document.reader) == ("Rye loaves", "html", "lxml")
    assert containing(document, "Wait").section == "Methods" and containing(document, "Wait").paragraph == 4


def test_what_surrounds_the_article():
    text = "".join(
        f"<p>The loaves of day {day} rose well and were scored by the panel.</p>" for day in range(20)
    )
    around = (
        "<header class='site-header'><a>Annals of Crust</a></header><nav><ul><li>Home</li></ul></nav><div id='toc'><li>Results</li></div>"
        "{}<aside>Read also: t(9) = 2.0</aside><footer>Made with flour</footer>"
    )
    document = read(page(around.format(f"<div class='content'>{text}</div>")))
    assert len(texts(document)) == 20
    assert texts(document, "aside") == [
        "Annals of Crust",
        "Results",
        "Read also: t(9) = 2.0",
        "Made with flour",
    ]
    document = read(page(around.format(f"<main>{text}</main>")))
    assert len(texts(document)) == 20 and not texts(document, "aside")
    document = read(page(f"<div class='sidebar'>{text}</div><main><p>Short.</p></main>"))
    assert len(texts(document)) == 21


def test_references_and_footnotes():
    document = read(
        page(
            "<h2>Results</h2><p>It rose<sup><a href='#fn1'>1</a></sup>.</p><h2>References</h2><ol><li>Krume 2019.</li></ol><h2>Appendix</h2><p>More.</p>"
            "<div id='refs'><div class='csl-entry'><div class='csl-left-margin'>1. </div><div class='csl-right-inline'>Laib 2020.</div></div></div>"
            "<section class='footnotes' role='doc-endnotes'><ol><li><p>At night.<a class='footnote-back'>↩︎</a></p></li></ol></section>"
        )
    )
    assert said(document)[1:] == [
        ("body", "It rose1."), ("heading", "References"), ("references", "Krume 2019."), ("heading", "Appendix"), ("body", "More."),
        ("references", "1. Laib 2020."), ("note", "At night."),
    ]  # fmt: skip
    assert document.passages[1].marks == "       ^ "


@pytest.mark.parametrize(
    ("told", "notes"),
    [
        ("P by Fisher’s exact test.", 1),
        ("P values are from χ² tests.", 1),
        ("P values calculated using Fisher’s exact test.", 1),
        ("Proofing by the oven took longer.", 0),
    ],
)
def test_what_p_rests_on_is_a_note_below_a_table(told, notes):
    grid_ = "<table><caption>Table 1. Faults</caption><tr><th>Fault<th>n<th>P</tr><tr><td>Split<td>18<td>.04</tr></table>"
    (table,) = read(page(f"{grid_}<p>{told}</p><p>The loaves rose.</p>")).tables
    assert len(table.notes) == notes


def test_a_table_with_everything():
    document = read(
        page(
            "<h2>Results</h2><table><caption>Table&nbsp;1: Heights</caption><colgroup><col></colgroup><thead><tr><th rowspan=2>Bench<th colspan='2'>Height</tr><tr><th>Rye<sup>a</sup><th>Spelt</tr></thead>"
            "<tfoot><tr><td colspan='100%'><sup>a</sup> Overnight.</td></tr></tfoot>"
            "<tbody><tr><td colspan='3'>First week</td></tr><tr><td>&nbsp;&nbsp;&nbsp;North</td><td>52.1<br>(4.3)</td><td></td></tr>"
            "<tr><td style='padding-left: 2em'>South</td><td>50</td><td>49<span style='display:none'>7</span></td></tr><tr><th scope=row>Total</th><td>51</td><td>50</td></tr></tbody></table>"
            "<p>Note. Values are means.</p><p><sup>b</sup> Not baked.</p><p>The loaves rose.</p>"
        )
    )
    (table,) = document.tables
    assert (table.label, table.header_rows, table.section) == ("Table 1", 2, "Results")
    assert table.caption is not None and table.caption.text == "Table 1: Heights"
    assert grid(table) == [
        ["Bench", "Height", ""], ["", "Ryea", "Spelt"], ["First week", "", ""], ["North", "52.1\n(4.3)", ""], ["South", "50", "49"], ["Total", "51", "50"],
    ]  # fmt: skip
    assert [cell.indent for cell in table.cells if cell.column == 0] == [0, 0, 1, 2, 0]
    assert [note.text for note in table.notes] == ["a Overnight.", "Note. Values are means.", "b Not baked."]
    assert [p for p in document.passages if p.table == "Table 1"] == [table.caption, *table.notes]
    assert document.passages[table.before - 1] is table.caption
    assert document.passages[-1].text == "The loaves rose." and document.passages[-1].kind == "body"
    heads = [cell.text for cell in table.cells if cell.heading]
    assert heads == ["Bench", "Height", "Ryea", "Spelt", "Total"]


@pytest.mark.parametrize(
    ("around", "label", "caption"),
    [
        ("<p>Table 2. Heights of loaves</p>{}", "Table 2", "Table 2. Heights of loaves"),
        ("<p>Table 2 heights by bench</p>{}", "Table 2", "Table 2 heights by bench"),
        ("{}<p>Table 2: Heights</p><p>It rose.</p>", "Table 2", "Table 2: Heights"),
        ("<figure><figcaption>Table 2: Heights</figcaption><div>{}</div></figure>", "Table 2", "Table 2: Heights"),
        ("<figure>{}<figcaption>Table 2: Heights</figcaption></figure>", "Table 2", "Table 2: Heights"),
        ("<h3>Table 2.</h3><div class='caption'><p>Heights</p></div>{}", "Table 2", "Table 2. Heights"),
        ("<p><b>Table 2</b></p><p><i>Heights</i></p>{}", "Table 2", "Table 2. Heights"),
        ("<div class='table-wrap'><span>Table 2</span><div>Heights</div><div>{}</div></div>", "Table 2", "Table 2. Heights"),
        ("<p>Table 2</p>{}", "Table 2", "Table 2"), ("<p>Table 2 shows the heights.</p>{}", "", None), ("<p>The heights follow.</p>{}", "", None),
    ],
)  # fmt: skip
def test_captions(around, label, caption):
    document = read(page(f"<h2>Results</h2>{around.format(f'<table>{ROWS}</table>')}"))
    (table,) = document.tables
    assert (table.label, table.caption and table.caption.text) == (label, caption)
    assert table.cells[0].passage.table == (label or "unlabelled table 1")
    assert table.header_rows == 1 and table.cells[0].passage.section == "Results"


def test_each_of_two_tables_takes_its_own_caption():
    table = f"<table>{ROWS}</table>"
    above = read(page(f"<p>Table 1. A</p>{table}<p>Table 2. B</p>{table}")).tables
    below = read(page(f"{table}<p>Table 1. A</p>{table}<p>Table 2. B</p>")).tables
    assert [t.label for t in above] == ["Table 1", "Table 2"]
    assert [t.label for t in below] == ["Table 1", "Table 2"]


def test_notes_below_a_table():
    notes = "<div class='table-notes'><p>M = mean.</p><p>Baked in May.</p></div>"
    document = read(
        page(
            f"<p>Table 1. A</p><table>{ROWS}</table>{notes}<p>* p &lt; .05. ** p &lt; .01.</p><p>Note that it rose.</p>"
        )
    )
    assert [note.text for note in document.tables[0].notes] == [
        "M = mean.",
        "Baked in May.",
        "* p < .05. ** p < .01.",
    ]
    assert texts(document) == ["Note that it rose."]


def test_tables_that_only_arrange_a_page_are_text():
    text = "<p>" + "The loaves rose well and were scored by the panel. " * 20 + "t(22) = 1.71.</p>"
    for table in (
        f"<table><tr><td>{text}</td></tr></table>", f"<table><tr><td>Menu</td><td>{text}</td></tr></table>",
        f"<table role='presentation'><tr><td>t(22) = 1.71</td><td>{text}</td></tr></table>",
        f"<table><tr><td><h2>Results</h2>{text}</td><td>Side</td></tr></table>",
    ):  # fmt: skip
        document = read(page(table))
        assert not document.tables and any("t(22) = 1.71" in t for t in texts(document))
    nested = read(page(f"<table><tr><td><p>Rye.</p><table>{ROWS}</table></td><td>Side</td></tr></table>"))
    assert [grid(t) for t in nested.tables] == [[["Bench", "Height"], ["North", "52.1"]]] and texts(
        nested
    ) == ["Rye.", "Side"]


@pytest.mark.parametrize(
    "formula",
    [
        r"<span class='math inline'>\(F(1, 38) = 3.20, p = .082\)</span>", r"<span class='math inline'>F(1, 38) = 3.20, p = .082</span>",
        "<span class='math inline'><em>F</em>(1, 38) = 3.20, <em>p</em> = .082</span>", "$F(1, 38) = 3.20, p = .082$",
        r"<span class='MathJax_Preview'></span><span class='MathJax'><nobr>F(1,38)=3.20</nobr></span><script type='math/tex'>F(1, 38) = 3.20, p = .082</script>",
        f"<span class='katex'><span class='katex-mathml'><math {MATHML}><semantics><mrow><mi>F</mi><mo>(</mo><mn>1</mn><mo>,</mo><mn>38</mn><mo>)</mo><mo>=</mo><mn>3.20</mn><mo>,</mo><mi>p</mi><mo>=</mo><mn>.082</mn></mrow><annotation encoding='application/x-tex'>F(1, 38) = 3.20, p = .082</annotation></semantics></math></span><span class='katex-html' aria-hidden='true'><span>F(1,38)=3.20</span></span></span>",
        f"<mjx-container><mjx-math></mjx-math><mjx-assistive-mml><math {MATHML}><mi>F</mi><mo>(</mo><mn>1</mn><mo>,</mo><mn>38</mn><mo>)</mo><mo>=</mo><mn>3.20</mn><mtext>, </mtext><mi>p</mi><mo>=</mo><mn>.082</mn></math></mjx-assistive-mml></mjx-container>",
        "<i>F</i><sub>1,38</sub> = 3.20, <i>p</i> = .082",
    ],
)  # fmt: skip
def test_formulas_are_read_once(formula):
    document = read(page(f"<p>The loaves differed, {formula}.</p>"))
    (claim,) = claims_of(document).claims
    assert claim.kind == "F-test"
    assert {q: v.text for q, v in claim.values.items()} == {"F": "3.20", "df1": "1", "df2": "38", "p": ".082"}
    assert not document.notes


@pytest.mark.parametrize(
    ("written", "text", "marks"),
    [
        ("χ<span style='vertical-align: super; font-size:60%'>2</span> = 4", "χ2 = 4", " ^    "),
        ("t<span style='vertical-align:sub'>22</span> = 1", "t22 = 1", " __    "),
        ("p = <del>.04</del><ins>.03</ins>", "p = .03", ""), ("at <d-math>\\chi^2</d-math>", r"at \(\chi^2\)", ""),
    ],
)  # fmt: skip
def test_inline_marks(written, text, marks):
    passage = read(page(f"<p>{written}</p>")).passages[0]
    assert (passage.text, passage.marks) == (text, marks)


def test_double_breaks_end_a_paragraph_and_terms_stand_with_their_words():
    document = read(
        page(
            "First line<br>goes on.<br>\n<br>The next.<dl><dt><sup>a</sup></dt><dd><p>Overnight.</p></dd><dt>SD</dt></dl>"
        )
    )
    assert texts(document) == ["First line\ngoes on.", "The next.", "a Overnight.", "SD"]
    assert document.passages[2].marks == "^           "


def test_a_caption_without_its_table_is_told():
    document = read(
        page("<figure><figcaption>Table 2: Heights</figcaption><a href='t2.html'>Full size</a></figure>")
    )
    assert document.notes == ("The file holds the caption but not the cells of Table 2.",)


def test_formulas_that_are_images_are_counted():
    document = read(page("<p>It was <img class='math' src='a.png' alt='x'> then.</p>"))
    assert document.notes == ("1 formula is an image and was not read.",)


@pytest.mark.parametrize(
    ("data", "note"),
    [
        ("<html><meta charset='iso-8859-1'><p>Höhe ± 1.2 – χ".replace("χ", "µ").encode("cp1252"), False),
        ("<html><meta http-equiv='Content-Type' content='text/html; charset=windows-1252'><p>Höhe ± 1.2 – µ".encode("cp1252"), False),
        ("<html><p>Höhe ± 1.2 – µ".encode(), False), ("<html><p>Höhe ± 1.2 – µ".encode("utf-16"), False), ("\ufeff<html><p>Höhe ± 1.2 – µ".encode(), False),
        ("<html><meta charset='utf-8'><p>Höhe ± 1.2 – µ".encode("cp1252"), True), ("<html><meta charset='utf-16'><p>Höhe ± 1.2 – µ".encode(), False),
        ("<html><meta charset='no-such'><p>Höhe &plusmn; 1.2 &ndash; &#181;".encode(), False), ("<html><p>Höhe ± 1.2 &#150; µ".encode(), False),
    ],
)  # fmt: skip
def test_encodings_of_pages(data, note):
    document = read(data)
    assert texts(document) == ["Höhe ± 1.2 – µ"]
    assert bool(document.notes) == note


@pytest.mark.parametrize(
    "data",
    [
        "<p>The loaves rose.</p>", "<div><h2>Results</h2>\n\n<p>The loaves rose.</p></div>", "<!-- saved -->\n<table><tr><td>1<td>2</tr></table>",
        "<?xml version='1.0' encoding='utf-8'?><!DOCTYPE html PUBLIC '-//W3C//DTD XHTML 1.0 Strict//EN' 'x.dtd'><html xmlns='http://www.w3.org/1999/xhtml'><body><p>The loaves rose.</p></body></html>",
        "<article><h1>Rye</h1><p>The loaves rose.</p></article>", "  \n<HTML><BODY>The loaves rose.</BODY></HTML>", "<head><title>x</title></head><p>The loaves rose.</p>",
    ],
)  # fmt: skip
def test_pages_are_told_by_content(data):
    assert open_document(data.encode(), name="loaf.txt").format == "html"


@pytest.mark.parametrize(
    "data",
    [
        "<div align='center'>\n\n# Rye\n\n</div>\n\nThe loaves rose, t(22) = 1.71.", "<p>A line.</p>\n\nThe loaves rose.\n\nAnd fell.", "# Rye\n\n<table><tr><td>1</td></tr></table>",
        "The loaves rose, p <.05 and <b>more</b>.", "<.05 is the level.", "<sup>a</sup> Note: p < .05", "<!-- a comment -->\nThe loaves rose.",
    ],
)  # fmt: skip
def test_text_with_tags_stays_text(data):
    assert open_document(data.encode(), name="loaf.html").format in ("text", "markdown")


def test_a_title_that_spans_the_head_is_the_caption():
    head = (
        "<thead><tr><td colspan='2'>Table 3. Heights</td></tr><tr><th>Bench</th><th>Height</th></tr></thead>"
    )
    (table,) = read(page(f"<table>{head}<tbody><tr><td>North</td><td>52.1</td></tr></tbody></table>")).tables
    assert (table.label, table.header_rows, table.rows) == ("Table 3", 1, 2)
    assert table.caption is not None and table.caption.text == "Table 3. Heights"
