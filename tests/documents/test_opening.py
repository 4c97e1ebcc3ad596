"""Every source that cannot be read gets one sentence."""

from __future__ import annotations

import io
import os
import time
from pathlib import Path

import pytest
from pypdf import PdfReader, PdfWriter

from recheck.documents import open_document
from recheck.errors import UnreadableDocument
from tests.documents.pdf.making import line, locked, opened, pdf, quoted, texts


def page(canvas):
    for row in range(12):
        line(canvas, 72, 100 + 14 * row, "The loaves rose, t(22) = 1.71, p = .101, in the cellar.")


def refusal(source, **options) -> str:
    with pytest.raises(UnreadableDocument) as caught:
        open_document(source, **options)
    message = str(caught.value)
    assert "\n" not in message and message.endswith(".")
    return message


def test_missing_file_directory_and_empty_file(tmp_path):
    assert "no such file" in refusal(tmp_path / "loaf.pdf")
    assert "directory" in refusal(tmp_path)
    (tmp_path / "empty.pdf").write_bytes(b"")
    assert "empty" in refusal(tmp_path / "empty.pdf")
    (tmp_path / "blank.txt").write_text(" \n\n")
    assert "white space" in refusal(tmp_path / "blank.txt")


def test_loop_of_links_and_impossible_names(tmp_path):
    (tmp_path / "a").symlink_to(tmp_path / "b")
    (tmp_path / "b").symlink_to(tmp_path / "a")
    assert "circle" in refusal(tmp_path / "a")
    assert "name" in refusal("loaf\0.pdf")
    assert "too long" in refusal("x" * 5000)
    assert "\\n" in refusal("odd\nname\udcff.pdf")


@pytest.mark.skipif(os.geteuid() == 0, reason="the superuser may read everything")
def test_permission_denied(tmp_path):
    path = tmp_path / "secret.txt"
    path.write_text("The loaves rose.")
    path.chmod(0)
    assert "permitted" in refusal(path)


def test_pipes_and_devices(tmp_path):
    os.mkfifo(tmp_path / "pipe")
    assert "pipe or a device" in refusal(tmp_path / "pipe")
    assert "pipe or a device" in refusal("/dev/zero")


def test_two_gigabytes_of_zeros_are_refused_at_once(tmp_path):
    path = tmp_path / "zeros.pdf"
    with path.open("wb") as file:
        file.truncate(2 * 2**30)
    start = time.perf_counter()
    assert "neither a PDF nor text" in refusal(path)
    assert time.perf_counter() - start < 0.5


def test_too_large(tmp_path):
    path = tmp_path / "long.txt"
    with path.open("wb") as file:
        file.write(b"loaf " * 300)
        file.seek(65 * 2**20)
        file.write(b"end")
    assert "larger than 64 MiB" in refusal(path)


@pytest.mark.parametrize(
    ("data", "said"),
    [
        (b"PK\x03\x04" + bytes(200), "ZIP"),
        (bytes(range(256)) * 20, "neither"),
        (b"\x89PNG\r\n\x1a\n" + bytes(50), "picture"),
        (b"\x7fELF" + bytes(range(1, 250)) * 4, "neither"),
        (b"\xff\xfe" + b"\x00\xd8" * 3, "UTF-16"),
        (b"%PDF-1.7\nnothing more", "damaged"),
        (b"%PDF-1.7\n1 0 obj\n<< >>\nendobj\n", "damaged"),
    ],
)
def test_other_bytes(data, said):
    assert said in refusal(data, name="bench")


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16", "utf-32"])
def test_encodings_with_a_mark(encoding):
    document = open_document("Höhe χ² = 3.84, p = .05".encode(encoding))
    assert document.passages[0].text == "Höhe χ2 = 3.84, p = .05"
    assert not document.notes


def test_other_encodings_are_read_with_a_note():
    document = open_document("The crumb’s score – café loaves – was 5.0 ± 1.2.".encode("cp1252"))
    assert "crumb’s score – café" in document.passages[0].text and "± 1.2" in document.passages[0].text
    assert "Windows-1252" in document.notes[0]


def test_a_stream_and_bytes_are_sources():
    assert open_document(io.BytesIO(b"The loaves rose."), name="-").name == "-"
    assert open_document(b"The loaves rose.").passages[0].text == "The loaves rose."


def test_the_mark_of_a_pdf_may_stand_after_other_bytes():
    assert opened(b"junk\n" * 20 + pdf(page)).format == "pdf"


def test_a_locked_pdf_is_refused_and_an_empty_password_is_tried():
    assert "password" in refusal(locked(page, "crust"), name="locked.pdf")
    assert "password" in refusal(locked(page, "crust"), name="locked.pdf", reader="pdfminer")
    for reader in ("pdfium", "pdfminer"):
        assert "t(22) = 1.71" in quoted(opened(locked(page, ""), reader=reader).passages)


def test_a_scan_has_no_text_layer():
    def picture(canvas):
        canvas.rect(50, 50, 300, 400, fill=1)

    for reader in ("auto", "pdfminer"):
        assert "run OCR first" in refusal(pdf(picture, picture), name="scan.pdf", reader=reader)


def test_pages_without_text_are_named():
    def picture(canvas):
        canvas.rect(50, 50, 300, 400, fill=1)

    assert any("page 2" in note for note in opened(pdf(page, picture)).notes)


def test_a_cut_off_pdf_is_read_as_far_as_it_goes():
    whole = pdf(*[page] * 6, pageCompression=0)
    document = open_document(whole[: int(len(whole) * 0.75)], name="cut.pdf")
    assert "t(22) = 1.71" in quoted(document.passages)
    assert any("cut off" in note for note in document.notes)
    assert "damaged" in refusal(whole[:300], name="cut.pdf")


def test_damage_at_any_place_gives_a_document_or_one_sentence():
    whole = pdf(*[page] * 2)
    for at in range(20, len(whole), max(len(whole) // 40, 1)):
        for data in (whole[:at], whole[:at] + b"\x00\xff\x13" * 9 + whole[at + 27 :]):
            try:
                open_document(data, name="bench.pdf")
            except UnreadableDocument as error:
                assert "\n" not in str(error)


def test_only_the_pages_asked_for_are_read():
    def numbered(number):
        return lambda canvas: line(canvas, 72, 100, f"Loaf number {number} was scored by the panel.")

    data = pdf(*[numbered(n) for n in (1, 2, 3)])
    for reader in ("pdfium", "pdfminer"):
        document = opened(data, reader=reader, pages=[2])
        assert texts(document) == ["Loaf number 2 was scored by the panel."]
        assert document.passages[0].place(0, 4).page == 2
        assert document.pages == 3
    assert opened(data, pages=[9]).passages == ()


def test_title_and_digest(tmp_path):
    writer = PdfWriter(clone_from=PdfReader(io.BytesIO(pdf(page))))
    writer.add_metadata({"/Title": "Overnight proofing of rye loaves"})
    path = tmp_path / "titled.pdf"
    writer.write(path)
    document = open_document(Path(path))
    assert document.title == "Overnight proofing of rye loaves"
    assert open_document(path, reader="pdfminer").title == document.title
    assert len(document.sha256) == 64 and document.words > 100
