"""What JATS marks and what becomes of it."""

from __future__ import annotations

import pytest

from recheck.documents import open_document
from recheck.errors import UnreadableDocument
from tests.documents.markup.marking import grid, jats, read, said
from tests.documents.pdf.making import containing, texts

TABLE = """<table-wrap id="t1"><object-id>x</object-id><label>Table 1.</label><caption><title>Heights of loaves.</title><p>Values are mean (SD).</p></caption>
<table><thead><tr><th rowspan="2">Bench</th><th colspan="2">Height, mm</th></tr><tr><th>Rye<xref ref-type="table-fn" rid="f1">a</xref></th><th>Spelt</th></tr></thead>
<tbody><tr><td>North</td><td>52.1 (4.3)<sup>*</sup></td><td>48.0<break/>(3.9)</td></tr>
<tr><td>\u2003Upper shelf</td><td colspan="2"><p>50.5</p><p>n = 12</p></td></tr></tbody></table>
<table-wrap-foot><fn id="f1"><label>a</label><p>Proofed overnight.</p></fn><fn><label>*</label><p><italic>p</italic> &lt; .05.</p></fn><p>SD, standard deviation.</p></table-wrap-foot></table-wrap>"""


def test_the_parts_of_an_article_in_order():
    document = read(
        jats(
            "<sec><title>Methods</title><sec><label>2.1</label><title>Panel</title><p>Twelve tasters came.</p></sec><p>All were bakers.</p></sec>"
            "<sec><title>Results</title><p>The loaves rose.</p></sec>",
            abstract="<abstract><sec><title>Aim</title><p>To bake.</p></sec></abstract><abstract abstract-type='summary'><title>In short</title><p>We baked.</p></abstract>",
            back="<ack><p>To the miller.</p></ack><app-group><app><title>Appendix A</title><p>More loaves.</p></app></app-group>"
            "<fn-group><fn><label>1</label><p>No conflict.</p></fn></fn-group>"
            "<ref-list><title>References</title><ref><label>1</label><element-citation><name><surname>Krume</surname></name><year>2019</year></element-citation></ref></ref-list>",
            more="<floats-group><fig><label>Figure 1</label><caption><p>An oven.</p></caption></fig></floats-group>"
            "<sub-article><front-stub><title-group><article-title>Letter</article-title></title-group></front-stub><body><p>Reviewer: t(9) = 2.0.</p></body></sub-article>",
        )
    )
    assert said(document) == [
        ("heading", "Heights of rye loaves"), ("heading", "Abstract"), ("heading", "Aim"), ("body", "To bake."),
        ("heading", "In short"), ("body", "We baked."), ("heading", "Methods"), ("heading", "2.1 Panel"), ("body", "Twelve tasters came."),
        ("body", "All were bakers."), ("heading", "Results"), ("body", "The loaves rose."), ("body", "To the miller."),
        ("heading", "Appendix A"), ("body", "More loaves."), ("note", "1 No conflict."), ("heading", "References"),
        ("references", "1 Krume 2019"), ("caption", "Figure 1. An oven."), ("aside", "Letter"), ("aside", "Reviewer: t(9) = 2.0."),
    ]  # fmt: skip
    assert (document.title, document.format, document.reader) == ("Heights of rye loaves", "jats", "lxml")
    assert len(document.sha256) == 64 and document.words > 40
    assert containing(document, "Twelve").section == "2.1 Panel"
    assert containing(document, "All were").section == "Methods"
    assert [containing(document, words).paragraph for words in ("To bake", "Twelve", "The loaves")] == [
        1,
        3,
        5,
    ]
    assert containing(document, "miller").section == "Acknowledgments"


def test_a_table_with_everything():
    document = read(jats(f"<sec><title>Results</title><p>See Table 1.</p>{TABLE}<p>After it.</p></sec>"))
    (table,) = document.tables
    assert (table.label, table.rows, table.columns, table.header_rows, table.section) == (
        "Table 1",
        4,
        3,
        2,
        "Results",
    )
    assert (
        table.caption is not None
        and table.caption.text == "Table 1. Heights of loaves. Values are mean (SD)."
    )
    assert grid(table) == [
        ["Bench", "Height, mm", ""], ["", "Ryea", "Spelt"], ["North", "52.1 (4.3)*", "48.0\n(3.9)"], ["Upper shelf", "50.5\nn = 12", ""],
    ]  # fmt: skip
    assert [note.text for note in table.notes] == [
        "a Proofed overnight.",
        "* p < .05.",
        "SD, standard deviation.",
    ]
    assert [note.marks[:1] for note in table.notes] == ["^", "", ""]
    assert [cell.indent for cell in table.cells if cell.column == 0] == [0, 0, 1]
    raised = {cell.text: cell.passage.marks for cell in table.cells if cell.passage.marks}
    assert raised == {"Ryea": "   ^", "52.1 (4.3)*": " " * 10 + "^"}
    assert all(cell.heading == (cell.row < 2) for cell in table.cells)
    place = table.cells[-1].passage.place(0, 4)
    assert (place.table, place.section) == ("Table 1", "Results")
    before = [passage.text for passage in document.passages[: table.before]]
    assert before[-2:] == ["See Table 1.", table.caption.text]
    assert document.passages[-1].text == "After it."
    assert [passage for passage in document.passages if passage.table == "Table 1"] == [
        table.caption,
        *table.notes,
    ]


def test_tables_of_other_shapes():
    body = (
        "<sec><p>One.</p><table><tr><td>Z</td></tr></table>tail<p>Two <array><tbody><tr><td>Y</td></tr></tbody></array> three.</p></sec>"
        "<table-wrap><label>Table 2</label><table><tr><td>A</td></tr></table><table><tr><td>B</td></tr></table></table-wrap>"
        "<table-wrap><label>Table 3</label><alternatives><graphic/><table><tr><th>C</th><td>1</td></tr></table></alternatives></table-wrap>"
        "<table-wrap><label>Table 4</label><caption><p>Crusts.</p></caption><graphic/></table-wrap>"
        "<table-wrap><table><tr><td>D</td></tr></table></table-wrap>"
        "<p>Text with a table <table-wrap><label>Table 5</label><table><tr><td>E</td></tr></table></table-wrap> in the middle.</p>"
    )
    document = read(jats(body))
    assert [(table.label, grid(table)) for table in document.tables] == [
        ("", [["Z"]]), ("", [["Y"]]), ("Table 2", [["A"]]), ("Table 2", [["B"]]), ("Table 3", [["C", "1"]]), ("", [["D"]]), ("Table 5", [["E"]]),
    ]  # fmt: skip
    assert document.tables[5].cells[0].passage.table == "unlabelled table 3"
    assert texts(document)[:2] == ["One.", "tail"] and "Two three." in texts(document)
    assert "Text with a table in the middle." in texts(document)
    assert document.notes == ("1 table is an image and was not read: Table 4.",)
    assert [cell.heading for cell in document.tables[4].cells] == [True, False]


def test_a_group_of_tables_and_notes_within_cells():
    group = (
        "<table-wrap-group><label>Table 6</label><caption><p>Heights.</p></caption><table-wrap><label>A</label><caption><p>Rye.</p></caption>"
        "<table><tr><td>52<fn><label>b</label><p>Cold.</p></fn></td></tr></table></table-wrap></table-wrap-group><p>After.</p>"
    )
    document = read(jats(f"<sec><title>Results</title>{group}</sec>"))
    (table,) = document.tables
    assert (table.label, table.caption and table.caption.text) == ("Table 6 A", "Table 6 A. Heights. Rye.")
    assert [(note.text, note.marks) for note in table.notes] == [("b Cold.", "^      ")]
    assert (grid(table), document.passages[-1].section) == ([["52"]], "Results")


def test_tables_by_columns_and_entries():
    wrap = """<table-wrap><label>Table 1</label><oasis:table xmlns:oasis="http://docs.oasis-open.org/ns/oasis-exchange/table"><oasis:tgroup cols="3">
    <oasis:colspec colname="c1"/><oasis:colspec colname="c2"/><oasis:colspec colname="c3"/>
    <oasis:thead><oasis:row><oasis:entry morerows="1">Bench</oasis:entry><oasis:entry namest="c2" nameend="c3">Height</oasis:entry></oasis:row>
    <oasis:row><oasis:entry>M</oasis:entry><oasis:entry>SD</oasis:entry></oasis:row></oasis:thead>
    <oasis:tbody><oasis:row><oasis:entry>North</oasis:entry><oasis:entry>52</oasis:entry><oasis:entry>4</oasis:entry></oasis:row></oasis:tbody></oasis:tgroup></oasis:table></table-wrap>"""
    (table,) = read(jats(wrap)).tables
    assert grid(table) == [["Bench", "Height", ""], ["", "M", "SD"], ["North", "52", "4"]]
    assert table.header_rows == 2


@pytest.mark.parametrize(
    ("written", "text", "marks"),
    [
        ("<italic>t</italic><sub>22</sub> = 1.71", "t22 = 1.71", " __       "),
        ("χ<sup>2</sup>(1) = 3.8", "χ2(1) = 3.8", " ^         "),
        ("7 loaves<sup><xref ref-type='bibr'>3</xref></sup> rose", "7 loaves3 rose", "        ^     "),
        ("N = 72<xref ref-type='fn'>1</xref> rose", "N = 721 rose", "      ^     "),
        (
            "rose.<xref ref-type='bibr'>12</xref> And fell <xref ref-type='bibr'>4</xref>.",
            "rose.12 And fell 4.",
            "     ^^          ^ ",
        ),
        (
            "by Krume (<xref ref-type='bibr'>2019</xref>) and <xref ref-type='bibr'>2020</xref>",
            "by Krume (2019) and 2020",
            "",
        ),
        ("as told [<xref ref-type='bibr'>3</xref>] before", "as told [3] before", ""),
        ("one<break/>two\n   <bold>three</bold>", "one\ntwo three", ""),
        ("p&#xA0;=&#x2009;.03", "p = .03", ""),
        ("<named-content>M</named-content> = 3 <inline-graphic/>", "M = 3", ""),
    ],
)
def test_inline_marks(written, text, marks):
    passage = read(jats(f"<p>{written}</p>")).passages[-1]
    assert (passage.text, passage.marks) == (text, marks)


def test_formulas_are_read_once():
    tex = r"<tex-math><![CDATA[\documentclass[12pt]{minimal} \usepackage{amsmath} \begin{document}$$F(1, 38) = 3.2$$\end{document}]]></tex-math>"
    math = "<mml:math><mml:mi>F</mml:mi><mml:mo>=</mml:mo><mml:mn>3.2</mml:mn></mml:math>"
    for formula, text in (
        (f"<alternatives>{tex}{math}<graphic/></alternatives>", "It was F = 3.2 then."),
        (math, "It was F = 3.2 then."), (f"<alternatives><graphic/>{tex}</alternatives>", "It was $$F(1, 38) = 3.2$$ then."),
        (r"<tex-math>\chi^2 = 4</tex-math>", r"It was \(\chi^2 = 4\) then."), ("<italic>x</italic> = 2", "It was x = 2 then."),
    ):  # fmt: skip
        document = read(jats(f"<p>It was <inline-formula>{formula}</inline-formula> then.</p>"))
        assert (document.passages[-1].text, document.notes) == (text, ())
    document = read(
        jats(
            "<p>It was <inline-formula><inline-graphic/></inline-formula> then <disp-formula><label>(1)</label><graphic/></disp-formula>.</p>"
        )
    )
    assert document.passages[-1].text == "It was then ."
    assert document.notes == ("2 formulas are images and were not read.",)
    document = read(jats(f"<sec><p>So:</p><disp-formula><label>(1)</label>{math}</disp-formula></sec>"))
    assert texts(document) == ["So:", "F = 3.2"]


def test_lists_boxes_quotations_and_notes_within_paragraphs():
    document = read(
        jats(
            "<p>Three steps:<list><list-item><label>1.</label><p>Mix.</p></list-item><list-item><p>Wait.</p><list><list-item><p>Long.</p></list-item></list></list-item></list>and bake.<fn><label>2</label><p>At night.</p></fn></p>"
            "<boxed-text><title>Key points</title><p>Rise, t(9) = 2.1.</p></boxed-text><disp-quote><p>It rose.</p></disp-quote>"
            "<def-list><def-item><term>SD</term><def><p>standard deviation</p></def></def-item></def-list><code>t.test(x)</code>"
            "<supplementary-material><label>Table S1.</label><caption><p>More heights.</p></caption></supplementary-material>"
        )
    )
    assert said(document)[1:] == [
        ("body", "Three steps:"), ("body", "1. Mix."), ("body", "Wait."), ("body", "Long."), ("body", "and bake."), ("note", "2 At night."),
        ("heading", "Key points"), ("body", "Rise, t(9) = 2.1."), ("body", "It rose."), ("body", "SD: standard deviation"),
        ("aside", "t.test(x)"), ("caption", "Table S1. More heights."),
    ]  # fmt: skip
    assert containing(document, "Rise").section == "Key points"


@pytest.mark.parametrize("name", ["loaf.pdf", "loaf.html", "loaf"])
@pytest.mark.parametrize(
    "head",
    [
        "\ufeff<?xml version='1.0'?>", "<article-free/>"[:0] + "<!-- a licence\n<html> -->", "<?xml-stylesheet href='a.xsl'?>\n\n",
        "<!DOCTYPE article PUBLIC '-//NLM//DTD Journal Publishing DTD v2.3 20070202//EN' 'journalpublishing.dtd' [<!ENTITY f SYSTEM 'f.gif'>]>",
    ],
)  # fmt: skip
def test_the_format_is_told_by_content(head, name):
    document = open_document(jats("<p>Loaves.</p>", head=head), name=name)
    assert document.format == "jats" and document.passages[-1].text == "Loaves."


def test_namespaces_envelopes_and_undeclared_prefixes():
    plain = jats("<p>Loaves.</p>").decode().removeprefix('<?xml version="1.0"?>')
    spaced = plain.replace("<article ", '<article xmlns="https://jats.nlm.nih.gov/ns/archiving/1.3/" ')
    assert read(spaced).passages[-1].text == "Loaves."
    document = read(f"<pmc-articleset>{plain}{plain}</pmc-articleset>")
    assert document.passages[-1].text == "Loaves." and document.notes == (
        "The file holds 2 articles; the first one was read.",
    )
    assert read(f"<?xml version='1.0'?><OAI-PMH><record>{spaced}</record></OAI-PMH>").format == "jats"
    undeclared = plain.replace('xmlns:mml="http://www.w3.org/1998/Math/MathML" ', "").replace(
        "Loaves.", "<mml:math><mml:mi>x</mml:mi></mml:math>"
    )
    assert read(undeclared).passages[-1].text == "x"


def test_an_article_without_parts_is_refused():
    with pytest.raises(UnreadableDocument, match="JATS"):
        open_document(b"<?xml version='1.0'?><pmc-articleset/>", name="bench.xml")


def test_translated_abstracts_stand_beside_the_article():
    document = read(jats("<p>x</p>", abstract="<trans-abstract><p>t(9) = 2,1.</p></trans-abstract>"))
    assert ("aside", "t(9) = 2,1.") in said(document)
