"""Word documents: what is printed, in reading order."""

from __future__ import annotations

import io
import zipfile

import pytest

from recheck.documents import open_document
from tests.documents.word.making import SPACES, docx_bytes, math, opened_docx, p, r, repacked, tbl, tc

SUPER = '<w:vertAlign w:val="superscript"/>'
SUB = '<w:vertAlign w:val="subscript"/>'


def only(*body: str, **parts: str):
    """The one passage of a document."""
    (passage,) = opened_docx(*body, **parts).passages
    return passage


def told(document):
    return [(passage.kind, passage.section, passage.paragraph, passage.text) for passage in document.passages]


def test_paragraphs_headings_and_places():
    document = opened_docx(
        p("Overnight proofing of rye loaves", style="Title"),
        p("Results", style="Heading1"),
        p("The loaves rose, t(22) = 1.71, p = .101."),
        p(""),
        p("Crumb", style="Heading2"),
        p("First.", style="ListBullet"),
        p("Figure 1. Heights of the loaves."),
    )
    assert told(document) == [
        ("heading", "Overnight proofing of rye loaves", None, "Overnight proofing of rye loaves"),
        ("heading", "Results", None, "Results"),
        ("body", "Results", 1, "The loaves rose, t(22) = 1.71, p = .101."),
        ("heading", "Crumb", 1, "Crumb"),
        ("body", "Crumb", 2, "First."),
        ("caption", "Crumb", 3, "Figure 1. Heights of the loaves."),
    ]
    assert (document.format, document.reader) == ("docx", "python-docx")
    assert document.title == "Overnight proofing of rye loaves" and document.words == 23


def style(key, name, inside="", based="", kind="paragraph"):
    based = f'<w:basedOn w:val="{based}"/>' if based else ""
    return f'<w:style w:type="{kind}" w:styleId="{key}"><w:name w:val="{name}"/>{based}{inside}</w:style>'


@pytest.mark.parametrize(
    "styles",
    [
        style("berschrift3", "Überschrift 3"),
        style("Own", "Own", based="Heading2"),
        style("Own", "Own", "<w:pPr><w:outlineLvl w:val='1'/></w:pPr>"),
        style("JBL_heading1", "JBL_2.1_heading1"),
    ],
)
def test_styles_of_headings(styles):
    key = styles.split('styleId="')[1].split('"')[0]
    passages = opened_docx(p("Crumb and crust", style=key), p("They rose."), styles=styles).passages
    assert [passage.kind for passage in passages] == ["heading", "body"]


def test_a_style_based_on_itself_ends():
    styles = style("A", "A", based="B") + style("B", "B", based="A")
    assert only(p("They rose.", style="A"), styles=styles).kind == "body"


def test_bold_lines_are_headings_if_they_state_nothing():
    bold = "<w:b/>"
    passages = opened_docx(
        p(r("Tasting panel", bold)),
        p(r("The mean was 5.1.", bold)),
        p(r("M = 5.1", bold)),
        p("Discussion"),
        p("They rose."),
    ).passages
    assert [passage.kind for passage in passages] == ["heading", "body", "body", "heading", "body"]


@pytest.mark.parametrize(
    ("runs", "text", "marks"),
    [
        ((r("χ"), r("2", SUPER), r("(1)")), "χ2(1)", " ^   "),
        ((r("t"), r("22", '<w:position w:val="-6"/>')), "t22", " __"),
        ((r("t"), r("22", '<w:position w:val="-1"/>')), "t22", ""),
        ((r("η²ₚ = 1"),), "η2p = 1", " ^_    "),
        ((r("t"), r("22", '<w:rStyle w:val="Low"/>')), "t22", " __"),
        ((r("p = "), r("9", "<w:vanish/>"), r(".04")), "p = .04", ""),
        ((r("p = "), r("9", '<w:vanish w:val="0"/>')), "p = 9", ""),
        ((r("h", '<w:rFonts w:ascii="Symbol" w:hAnsi="Symbol"/>'), r("2 = .1")), "η2 = .1", ""),
        ((r("\uf063\uf0b3 5"),), "χ≥ 5", ""),
        (('<w:r><w:sym w:font="Symbol" w:char="F068"/></w:r>',), "η", ""),
        (('<w:r><w:sym w:font="Symbol" w:char="00A3"/></w:r>', r(" .05")), "≤ .05", ""),
        (('<w:r><w:sym w:font="Symbol" w:char="F02D"/><w:t>3</w:t></w:r>',), "−3", ""),
        (('<w:r><w:t>r = </w:t><w:noBreakHyphen/><w:t>.30</w:t></w:r>',), "r = -.30", ""),
        (("<w:r><w:t>loaf</w:t><w:softHyphen/><w:t>height</w:t></w:r>",), "loafheight", ""),
        (("<w:r><w:t>a</w:t><w:tab/><w:t>b</w:t><w:br/><w:t>c</w:t></w:r>",), "a b\nc", ""),
        ((r("M\u00a0=\u20095"),), "M = 5", ""),
        ((r("rye", "<w:caps/>"),), "rye", ""),
        (("<w:hyperlink><w:r><w:t>link</w:t></w:r></w:hyperlink>",), "link", ""),
        (("<w:smartTag><w:r><w:t>tag</w:t></w:r></w:smartTag>",), "tag", ""),
        (("<w:sdt><w:sdtPr/><w:sdtContent><w:r><w:t>5.1</w:t></w:r></w:sdtContent></w:sdt>",), "5.1", ""),
        (('<w:fldSimple w:instr="REF a"><w:r><w:t>Table 2</w:t></w:r></w:fldSimple>',), "Table 2", ""),
    ],
)  # fmt: skip
def test_what_runs_print(runs, text, marks):
    low = style("Low", "Low", f"<w:rPr>{SUB}</w:rPr>", kind="character")
    passage = only(p(*runs), styles=low)
    assert (passage.text, passage.marks) == (text, marks)


def field(code, result):
    def char(kind):
        return f'<w:r><w:fldChar w:fldCharType="{kind}"/></w:r>'

    return (
        f"{char('begin')}<w:r><w:instrText>{code}</w:instrText></w:r>{char('separate')}{result}{char('end')}"
    )


def test_fields_keep_their_result_alone():
    nested = field("CITE " + field("QUOTE", r("hidden")), r("Miller"))
    assert only(p(r("by "), nested, r(" in rye"))).text == "by Miller in rye"
    never_closed = '<w:r><w:fldChar w:fldCharType="begin"/></w:r>' + field("X", r("lost"))
    assert only(p(never_closed), p("The next one.")).text == "The next one."


def test_a_field_over_several_paragraphs():
    start = '<w:r><w:fldChar w:fldCharType="begin"/></w:r><w:r><w:instrText>BIB</w:instrText></w:r>'
    start += '<w:r><w:fldChar w:fldCharType="separate"/></w:r>'
    end = '<w:r><w:fldChar w:fldCharType="end"/></w:r>'
    document = opened_docx(p(start, r("One.")), p(r("Two."), end), p(r("Three.")))
    assert [passage.text for passage in document.passages] == ["One.", "Two.", "Three."]


def test_tracked_changes_are_taken():
    new = "<w:ins w:id='1'><w:r><w:t>.036</w:t></w:r></w:ins>"
    old = "<w:del w:id='2'><w:r><w:delText>.36</w:delText></w:r></w:del>"
    gone = "<w:moveFrom w:id='3'><w:r><w:t>never</w:t></w:r></w:moveFrom>"
    come = "<w:moveTo w:id='3'><w:r><w:t>here</w:t></w:r></w:moveTo>"
    assert only(p(r("p = "), old, new, r(", "), gone, come)).text == "p = .036, here"


def test_a_deleted_end_of_a_paragraph_joins_it_to_the_next():
    deleted = "<w:rPr><w:del w:id='1'/></w:rPr>"
    document = opened_docx(p("t(28) = 2.20, ", properties=deleted), p("p = .036."), p("More."))
    assert [passage.text for passage in document.passages] == ["t(28) = 2.20, p = .036.", "More."]
    assert only(p("The last one.", properties=deleted)).text == "The last one."
    (heading, _) = opened_docx(p(properties=deleted), p("Crumb", style="Heading1"), p("More.")).passages
    assert (heading.text, heading.kind) == ("Crumb", "heading")


def test_text_boxes_are_read_once_after_their_paragraph():
    box = f"<w:txbxContent>{p('In the box, p = .04.')}</w:txbxContent>"
    drawing = f"<w:drawing><wps:wsp><wps:txbx>{box}</wps:txbx></wps:wsp></w:drawing>"
    shape = f"<w:pict><v:shape><v:textbox>{box}</v:textbox></v:shape></w:pict>"
    both = (
        f'<w:r><mc:AlternateContent><mc:Choice Requires="wps">{drawing}</mc:Choice>'
        f"<mc:Fallback>{shape}</mc:Fallback></mc:AlternateContent></w:r>"
    )
    for run in (both, f"<w:r>{shape}</w:r>"):
        texts = [passage.text for passage in opened_docx(p(r("Before."), run, r(" After."))).passages]
        assert texts == ["Before. After.", "In the box, p = .04."]


def test_content_controls_around_blocks():
    held = f"<w:sdt><w:sdtPr/><w:sdtContent>{p('Held.')}{tbl(('a', '1'), ('b', '2'))}</w:sdtContent></w:sdt>"
    document = opened_docx(held, p("Free."))
    assert [passage.text for passage in document.passages] == ["Held.", "Free."]
    assert len(document.tables) == 1


def test_a_prompt_is_no_text():
    prompt = "<w:sdt><w:sdtPr><w:showingPlcHdr/></w:sdtPr><w:sdtContent><w:r><w:t>Click</w:t></w:r></w:sdtContent></w:sdt>"
    around = (
        "<w:sdt><w:sdtPr><w:showingPlcHdr/></w:sdtPr><w:sdtContent>" + p("Click") + "</w:sdtContent></w:sdt>"
    )
    assert only(around, p(r("Loaves."), prompt)).text == "Loaves."


NOTE = '<w:r><w:rPr><w:vertAlign w:val="superscript"/></w:rPr><w:{}Reference w:id="{}"/></w:r>'


def test_notes_follow_what_they_hang_on():
    notes = f'<w:footnote w:type="separator" w:id="0">{p("----")}</w:footnote>'
    notes += f'<w:footnote w:id="1">{p(r("See p = .04."))}</w:footnote>'
    end = f'<w:endnote w:id="1">{p("The cellar was warm.")}</w:endnote>'
    document = opened_docx(
        p(r("N = 7"), NOTE.format("footnote", 1), r(" loaves"), NOTE.format("endnote", 1), r(".")),
        p("More."),
        footnotes=notes,
        endnotes=end,
    )
    assert [(passage.kind, passage.text) for passage in document.passages] == [
        ("body", "N = 7 loaves."),
        ("note", "See p = .04."),
        ("body", "More."),
        ("note", "The cellar was warm."),
    ]


def test_headers_stand_aside_and_references_are_told():
    document = opened_docx(
        p("References", style="Heading1"),
        p("Miller, A. (2001). Crumb, t(30) = 2.04. Bench Letters, 3, 1-9."),
        p("Appendix", style="Heading1"),
        p("More loaves."),
        header="Bench scoring",
    )
    kinds = [passage.kind for passage in document.passages]
    assert kinds == ["heading", "references", "heading", "body", "aside"]


def test_a_plain_line_opens_the_references():
    document = opened_docx(
        p("They rose."), p("References"), p("Miller, A. (2001). Crumb. Bench Letters, 3, 1-9.")
    )
    assert [passage.kind for passage in document.passages] == ["body", "heading", "references"]


def test_documents_with_macros_templates_and_other_names_of_parts():
    data = docx_bytes(p("They rose."))
    main = b"application/vnd.openxmlformats-officedocument.wordprocessingml.document.main+xml"
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        types, rels, text = (
            archive.read(name) for name in ("[Content_Types].xml", "_rels/.rels", "word/document.xml")
        )
    macros = types.replace(main, b"application/vnd.ms-word.document.macroEnabled.main+xml")
    assert open_document(repacked(data, {"[Content_Types].xml": macros})).passages[0].text == "They rose."
    changes = {
        "[Content_Types].xml": types.replace(b"/word/document.xml", b"/text/main.xml"),
        "_rels/.rels": rels.replace(b"word/document.xml", b"text/main.xml"),
        "text/main.xml": text,
        "word/document.xml": None,
    }
    assert open_document(repacked(data, changes)).passages[0].text == "They rose."


def test_title_from_the_properties_if_it_reads_like_one():
    body = (p("A study of rye", style="Heading1"), p("They rose."))
    assert opened_docx(*body, title="Rye loaves in the cellar").title == "Rye loaves in the cellar"
    assert opened_docx(*body, title="Microsoft Word - final.docx").title == "A study of rye"
    large = p(r("Loaves and benches", '<w:sz w:val="40"/>'))
    assert opened_docx(large, p("They rose in the night.")).title == "Loaves and benches"


def numbering(text, form="decimal"):
    level = (
        f'<w:lvl w:ilvl="0"><w:start w:val="2"/><w:numFmt w:val="{form}"/><w:lvlText w:val="{text}"/></w:lvl>'
    )
    lists = f'<w:abstractNum w:abstractNumId="90">{level}</w:abstractNum>'
    lists += '<w:num w:numId="91"><w:abstractNumId w:val="90"/></w:num>'
    return f"<w:numbering {SPACES}>{lists}</w:numbering>".encode()


LISTED = '<w:numPr><w:ilvl w:val="0"/><w:numId w:val="91"/></w:numPr>'


@pytest.mark.parametrize(
    ("text", "form", "captions"),
    [
        ("Table %1.", "decimal", ["Table 2. Heights", "Table 3. Scores"]),
        ("Table %1", "upperRoman", ["Table II Heights", "Table III Scores"]),
        ("%1.", "decimal", ["Heights", "Scores"]),
    ],
)
def test_words_before_numbered_paragraphs(text, form, captions):
    direct = docx_bytes(p("Heights", properties=LISTED), p("Scores", properties=LISTED))
    styles = style("Lettered", "Lettered", f"<w:pPr>{LISTED}</w:pPr>")
    styled = docx_bytes(p("Heights", style="Lettered"), p("Scores", style="Lettered"), styles=styles)
    for data in (direct, styled):
        document = open_document(repacked(data, {"word/numbering.xml": numbering(text, form)}))
        assert [passage.text for passage in document.passages] == captions


def test_pictured_equations_are_counted():
    ole = '<w:r><w:object><o:OLEObject ProgID="Equation.DSMT4"/></w:object></w:r>'
    document = opened_docx(p(r("We found "), ole))
    assert "1 equation is kept as" in document.notes[0]


def test_equations_stand_in_the_line():
    passage = only(p(r("An effect, "), math("F(1,38)=3.2,MSE=1.7,p=.04"), r(".")))
    assert passage.text == "An effect, F(1,38) = 3.2, MSE = 1.7, p = .04."


def test_strict_documents_are_read():
    data = docx_bytes(p(r("t(22) = 1.71")), tbl(("a", "1"), ("b", "2")))
    old = b"http://schemas.openxmlformats.org/wordprocessingml/2006/main"
    changes = {}
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        for name in archive.namelist():
            if name.endswith((".xml", ".rels")):
                content = archive.read(name).replace(old, b"http://purl.oclc.org/ooxml/wordprocessingml/main")
                changes[name] = content.replace(
                    b"http://schemas.openxmlformats.org/officeDocument/2006/",
                    b"http://purl.oclc.org/ooxml/officeDocument/",
                )
    document = open_document(repacked(data, changes))
    assert document.passages[0].text == "t(22) = 1.71" and len(document.tables) == 1


def test_relations_to_what_is_not_there_do_no_harm():
    data = docx_bytes(p("They rose."))
    rels = (
        b'<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId9" '
        b'Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/image" Target="NULL"/></Relationships>'
    )
    assert (
        open_document(repacked(data, {"word/_rels/document.xml.rels": rels})).passages[0].text == "They rose."
    )
    assert open_document(repacked(data, {"word/styles.xml": b"<broken"})).passages[0].text == "They rose."


def test_a_cell_within_a_paragraph_and_odd_children_are_passed_by():
    odd = "<w:bookmarkStart w:id='1' w:name='a'/><w:proofErr w:type='spellStart'/><!-- a remark --><w:permStart w:id='2'/>"
    assert only(p(odd, r("They rose."))).text == "They rose."
    assert tc("x").startswith("<w:tc>")
