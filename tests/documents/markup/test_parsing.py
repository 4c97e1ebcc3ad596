"""XML that is hostile, damaged or in odd encodings."""

from __future__ import annotations

import threading
import time
import tracemalloc
from http.server import BaseHTTPRequestHandler, HTTPServer

import pytest

from recheck.documents import open_document
from recheck.errors import UnreadableDocument
from tests.documents.markup.marking import jats, page, read
from tests.documents.pdf.making import quoted

RESULT = "<p>The loaves differed, t(22) = 1.71, p = .101.</p>"


def refusal(data: bytes) -> str:
    with pytest.raises(UnreadableDocument) as caught:
        open_document(data, name="bench.xml")
    message = str(caught.value)
    assert "\n" not in message and message.endswith(".")
    return message


def test_entities_within_entities_are_never_expanded():
    bomb = '<!ENTITY a0 "loaf">' + "".join(f'<!ENTITY a{n} "{f"&a{n - 1};" * 10}">' for n in range(1, 10))
    head = f'<?xml version="1.0"?><!DOCTYPE article [{bomb}]>'
    tracemalloc.start()
    start = time.perf_counter()
    document = read(jats(f"<p>So many: &a9; and &a0;.</p>{RESULT}", head=head))
    assert time.perf_counter() - start < 1
    assert tracemalloc.get_traced_memory()[1] < 20 * 2**20
    tracemalloc.stop()
    assert "t(22) = 1.71" in quoted(document.passages)
    assert "So many: &a9; and loaf." in quoted(document.passages)
    assert any("name that is not known" in note for note in document.notes)


def test_attributes_do_not_expand_entities_either():
    head = '<!DOCTYPE article [<!ENTITY a "x"><!ENTITY b "' + "&a;" * 1000 + '">]>'
    assert "t(22)" in quoted(read(jats(f'<p id="{"&b;" * 50}">Loaf.</p>{RESULT}', head=head)).passages)


def test_files_of_the_machine_are_not_read(tmp_path):
    (tmp_path / "secret.txt").write_text("the recipe")
    for kind in ("SYSTEM", 'PUBLIC "-//X//Y"'):
        head = f'<!DOCTYPE article [<!ENTITY leak {kind} "file://{tmp_path}/secret.txt">]>'
        text = quoted(read(jats(f"<p>Look: &leak;</p>{RESULT}", head=head)).passages)
        assert "recipe" not in text and "Look: &leak;" in text
    included = f'<p><xi:include xmlns:xi="http://www.w3.org/2001/XInclude" href="file://{tmp_path}/secret.txt" parse="text"/></p>'
    assert "recipe" not in quoted(read(jats(included + RESULT)).passages)


def test_nothing_is_fetched():
    asked = []

    class Handler(BaseHTTPRequestHandler):
        def do_GET(self):
            asked.append(self.path)
            self.send_response(404)
            self.end_headers()

        def log_message(self, *_):
            pass

    server = HTTPServer(("127.0.0.1", 0), Handler)
    thread = threading.Thread(target=server.serve_forever, daemon=True)
    thread.start()
    where = f"http://127.0.0.1:{server.server_port}"
    head = f'<?xml version="1.0"?><!DOCTYPE article PUBLIC "-//NLM//DTD" "{where}/a.dtd" [<!ENTITY % p SYSTEM "{where}/p.ent">%p;<!ENTITY e SYSTEM "{where}/e.txt">]>'
    read(jats(f"<p>&e;</p>{RESULT}", head=head))
    read(
        page(
            f'<link rel="stylesheet" href="{where}/a.css"><img src="{where}/b.png"><iframe src="{where}/c"></iframe>{RESULT}'
        )
    )
    server.shutdown()
    thread.join()
    server.server_close()
    assert asked == []


def test_deep_and_wide_files_are_bounded():
    deep = "<sec>" * 4000 + RESULT + "</sec>" * 4000
    start = time.perf_counter()
    for data in (
        jats(deep), jats("<p>" + "<italic>" * 900 + "t(22) = 1.71" + "</italic>" * 900 + "</p>"),
        page("<div>" * 5000 + RESULT), page("<b>" * 5000 + "t(22) = 1.71"),
        page("<table><tr><td>" * 400 + "t(22) = 1.71"),
        jats("<p>" + "<mml:math><mml:mrow>" + "<mml:msup>" * 800 + "t(22) = 1.71" + "</mml:msup>" * 800 + "</mml:mrow></mml:math></p>"),
    ):  # fmt: skip
        try:
            document = read(data)
        except UnreadableDocument as error:
            assert "shows no text" in str(error)
            continue
        assert "t(22) = 1.71" in quoted(document.passages) or "missing" in document.notes[0]
    assert time.perf_counter() - start < 10


def test_spans_that_ask_for_too_much_are_cut():
    table = '<table><tr><td rowspan="60000" colspan="900">A</td><td>B</td></tr><tr><td>C</td></tr></table>'
    assert read(jats(f"<table-wrap><label>Table 1</label>{table}</table-wrap>")).tables[0].rows == 2


@pytest.mark.parametrize(
    ("written", "wanted"),
    [
        ("t(22) &#61; 1.71&nbsp;cm", "t(22) = 1.71 cm"),
        (
            "&chi;&sup2; &equals; 3.84, &minus;2.1 &plusmn; 0.3 &le; &thinsp;4 &times; 5",
            "χ² = 3.84, −2.1 ± 0.3 ≤ 4 × 5",
        ),
        ("&eegr; and &agr;, &thetas;, &hArr;, &lt; .05 &amp; more", "η and α, θ, ⇔, < .05 & more"),
        ("the &#150; dash&#146;s", "the – dash’s"),
    ],
)
@pytest.mark.parametrize(
    "head", ["", '<!DOCTYPE article PUBLIC "-//NLM//DTD JATS" "JATS-archivearticle1.dtd">']
)
def test_named_characters_come_out_right_without_a_dtd(head, written, wanted):
    document = read(jats(f"<p>{written}</p>", head=head))
    assert document.passages[-1].text == wanted
    assert not document.notes


def test_a_file_may_define_characters_itself_and_unknown_names_are_told():
    head = '<!DOCTYPE article [<!ENTITY crumb "χ²">]>'
    assert read(jats("<p>&crumb; = 3.84</p>", head=head)).passages[-1].text == "χ² = 3.84"
    document = read(jats("<p>&crust; = 3.84</p>"))
    assert document.passages[-1].text == "&crust; = 3.84"
    assert document.notes


@pytest.mark.parametrize(
    "encoding",
    ["utf-8", "utf-8-sig", "utf-16", "utf-16-le", "utf-16-be", "utf-32", "iso-8859-1", "windows-1252"],
)
def test_encodings_of_xml(encoding):
    declared = encoding.removesuffix("-sig").removesuffix("-le").removesuffix("-be")
    head = f'<?xml version="1.0" encoding="{declared}"?>'
    data = jats("<p>Höhe ± 1.2</p>", head=head).decode().encode(encoding)
    document = read(data)
    assert document.passages[-1].text == "Höhe ± 1.2"
    assert document.format == "jats" and not document.notes


def test_a_declaration_that_is_wrong():
    text = jats("<p>Höhe – 1.2</p>", head='<?xml version="1.0" encoding="UTF-16"?>')
    assert read(text).passages[-1].text == "Höhe – 1.2"
    document = read(jats("<p>Höhe – 1.2</p>").decode().encode("cp1252"))
    assert document.passages[-1].text == "Höhe – 1.2"
    assert "Windows-1252" in document.notes[0]


def test_a_bare_sign_does_not_lose_a_relation():
    document = read(jats("<p>Crust & crumb differed, p < .05 and p <.01 and 3 <4.</p><p>t(22) = 1.71</p>"))
    assert document.passages[-2].text == "Crust & crumb differed, p < .05 and p <.01 and 3 <4."
    assert "not well formed" in document.notes[0]


def test_a_file_that_is_cut_off_is_read_as_far_as_it_goes():
    whole = jats(RESULT * 30)
    document = read(whole[: len(whole) // 2])
    assert "t(22) = 1.71" in quoted(document.passages)
    assert "as far as it is sound" in document.notes[0]


def test_damage_at_any_place_gives_a_document_or_one_sentence():
    whole = jats(
        RESULT * 3 + "<table-wrap><label>Table 1</label><table><tr><td>1</td></tr></table></table-wrap>"
    )
    for at in range(5, len(whole), 11):
        for data in (whole[:at], whole[:at] + b"\x00\xff\x13<&]]>" + whole[at + 5 :], whole[at:]):
            try:
                read(data)
            except UnreadableDocument as error:
                assert "\n" not in str(error)


def test_other_xml_is_refused_by_its_root():
    message = refusal(b'<?xml version="1.0"?><recipe><flour>rye</flour></recipe>')
    assert "root element recipe" in message
    assert "article" in refusal(
        b'<?xml version="1.0"?><article><title>A book</title><para>Loaf</para></article>'
    )
    assert "svg" in refusal(b'<svg xmlns="http://www.w3.org/2000/svg"><text>t(22)</text></svg>')
    assert "not well formed" in refusal(b'<?xml version="1.0"?><<<<')
