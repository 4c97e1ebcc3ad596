"""Containers that are no Word document, or that would unpack to too much, get one sentence."""

from __future__ import annotations

import io
import struct
import time
import tracemalloc
import zipfile

import pytest

from recheck.documents import open_document
from recheck.documents.word import unpacking
from recheck.errors import UnreadableDocument
from tests.documents.word.making import SPACES, docx_bytes, p, repacked, tbl

WHOLE = docx_bytes(p("The loaves rose, t(22) = 1.71, p = .101."))


def refusal(data: bytes, name: str = "bench.docx") -> str:
    with pytest.raises(UnreadableDocument) as caught:
        open_document(data, name=name)
    message = str(caught.value)
    assert message.startswith(name) and "\n" not in message and message.endswith(".") and "; " in message
    return message


def container(members: dict[str, bytes]) -> bytes:
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, content in members.items():
            archive.writestr(name, content)
    return stream.getvalue()


@pytest.mark.parametrize(
    ("members", "said"),
    [
        ({"mimetype": b"application/vnd.oasis.opendocument.text", "content.xml": b"<a/>"}, "(ODT)"),
        ({"mimetype": b"application/vnd.oasis.opendocument.spreadsheet"}, "without running text"),
        ({"mimetype": b"application/epub+zip", "OEBPS/a.xhtml": b"<a/>"}, "EPUB"),
        ({"[Content_Types].xml": b"<Types/>", "xl/workbook.xml": b"<a/>"}, "XLSX"),
        ({"[Content_Types].xml": b"<Types/>", "ppt/presentation.xml": b"<a/>"}, "PPTX"),
        ({"Index/Document.iwa": b"x"}, "iWork"),
        ({"loaf.txt": b"The loaves rose."}, "without a Word document"),
        ({}, "without a Word document"),
    ],
)
def test_other_containers(members, said):
    assert said in refusal(container(members))


@pytest.mark.parametrize(
    ("stream", "said"),
    [("EncryptedPackage", "locked with a password"), ("WordDocument", "(DOC)"), ("Workbook", "no text")],
)
def test_old_office_documents(stream, said):
    head = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + bytes(504)
    assert said in refusal(head + stream.encode("utf-16-le") + bytes(400))


def test_a_locked_container():
    data = bytearray(WHOLE)
    at = 0
    while (at := data.find(b"PK\x01\x02", at)) >= 0:
        data[at + 8] |= 1
        at += 4
    assert "locked with a password" in refusal(bytes(data))


def test_a_cut_off_container_at_any_place():
    for at in range(4, len(WHOLE), max(len(WHOLE) // 40, 1)):
        assert "damaged or cut off" in refusal(WHOLE[:at])


def test_damage_at_any_place_gives_a_document_or_one_sentence():
    for at in range(4, len(WHOLE), max(len(WHOLE) // 60, 1)):
        damaged = WHOLE[:at] + b"\x00\xff\x13" * 9 + WHOLE[at + 27 :]
        try:
            open_document(damaged, name="bench.docx")
        except UnreadableDocument as error:
            assert "\n" not in str(error)


def test_damaged_main_text():
    for content in (b"", b"<w:document", b"<a/>", f"<w:document {SPACES}/>".encode()):
        assert "main text is damaged" in refusal(repacked(WHOLE, {"word/document.xml": content}))


@pytest.mark.parametrize(
    "part", ["_rels/.rels", "word/_rels/document.xml.rels", "[Content_Types].xml", "word/styles.xml"]
)
@pytest.mark.parametrize("content", [None, b"<broken"])
def test_text_is_read_although_other_parts_are_damaged(part, content):
    document = open_document(repacked(WHOLE, {part: content}))
    assert document.passages[0].text == "The loaves rose, t(22) = 1.71, p = .101."
    assert all("damaged" in note for note in document.notes)


def measured(data: bytes) -> tuple[str, float, float]:
    """The refusal, the seconds it took, and the most memory in MiB that Python held meanwhile."""
    tracemalloc.start()
    start = time.process_time()
    message = refusal(data)
    seconds = time.process_time() - start
    peak = tracemalloc.get_traced_memory()[1] / 2**20
    tracemalloc.stop()
    return message, seconds, peak


def bomb(name: str, mebibytes: int) -> bytes:
    stream = io.BytesIO(WHOLE)
    with (
        zipfile.ZipFile(stream, "a", zipfile.ZIP_DEFLATED, compresslevel=1) as archive,
        archive.open(name, "w") as file,
    ):
        for _ in range(mebibytes):
            file.write(b" " * 2**20)
    return stream.getvalue()


def test_a_bomb_is_refused_before_it_is_unpacked():
    message, seconds, peak = measured(bomb("word/header9.xml", 150))
    assert "more than 96 MiB" in message and seconds < 1 and peak < 20


def test_a_directory_that_lies_about_the_size_unpacks_no_more_than_it_says():
    data = bytearray(bomb("word/header9.xml", 150))
    at = data.find(b"PK\x01\x02")
    while b"header9" not in data[at + 46 : at + 70]:
        at = data.find(b"PK\x01\x02", at + 4)
    extra = struct.unpack_from("<H", data, at + 30)[0]
    struct.pack_into("<L", data, at + 24, 1000)
    assert extra == 0
    message, seconds, peak = measured(bytes(data))
    assert "damaged" in message and seconds < 1 and peak < 20


def test_too_many_members(monkeypatch):
    monkeypatch.setattr(unpacking, "MOST_MEMBERS", 10)
    assert "more than 10 files" in refusal(WHOLE)


def test_pictures_are_counted_but_not_unpacked(monkeypatch):
    monkeypatch.setattr(unpacking, "MOST_UNPACKED", 2**20)
    assert "more than 1 MiB" in refusal(bomb("word/media/image1.png", 2))


def with_entities(*entities: str) -> bytes:
    main = f"<!DOCTYPE a [{''.join(entities)}]><w:document {SPACES}><w:body>{p('Rye ')}<w:p><w:r><w:t>&a9;</w:t></w:r></w:p>"
    return repacked(WHOLE, {"word/document.xml": f"{main}</w:body></w:document>".encode()})


def test_entities_are_not_expanded(tmp_path):
    (tmp_path / "secret").write_text("secret")
    grown = [f'<!ENTITY a{n} "{f"&a{n - 1};" * 10}">' for n in range(1, 10)]
    message, seconds, peak = measured(with_entities('<!ENTITY a0 "loaf">', *grown))
    assert "damaged" in message and seconds < 1 and peak < 20
    for entity in ('<!ENTITY a9 "loaf">', f'<!ENTITY a9 SYSTEM "{(tmp_path / "secret").as_uri()}">'):
        assert [passage.text for passage in open_document(with_entities(entity)).passages] == ["Rye"]


def test_nesting_without_end():
    table = "<w:p/>"
    for _ in range(400):
        table = tbl((f"<w:p/>{table}",))
    main = f"<w:document {SPACES}><w:body>{table}</w:body></w:document>"
    assert "damaged" in refusal(repacked(WHOLE, {"word/document.xml": main.encode()}))
    deep = "<w:sdt><w:sdtContent>" * 110 + p("Deep.") + "</w:sdtContent></w:sdt>" * 110
    assert open_document(docx_bytes(deep)).passages[0].text == "Deep."
    powers = "<m:sSup><m:e>" * 110 + "<m:r><m:t>x</m:t></m:r>" + "</m:e></m:sSup>" * 110
    assert open_document(docx_bytes(f"<w:p><m:oMath>{powers}</m:oMath></w:p>")).passages[0].text == "x"
