"""Word documents made for the tests, in the bakery scenario."""

from __future__ import annotations

import io
import zipfile
from collections.abc import Sequence
from xml.sax.saxutils import escape

import docx
from docx.opc.constants import CONTENT_TYPE as CT
from docx.opc.constants import RELATIONSHIP_TYPE as RT
from docx.opc.packuri import PackURI
from docx.opc.part import Part
from docx.oxml.parser import parse_xml

from recheck.documents import open_document
from recheck.model import Document

SPACES = (
    'xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main" '
    'xmlns:m="http://schemas.openxmlformats.org/officeDocument/2006/math" '
    'xmlns:mc="http://schemas.openxmlformats.org/markup-compatibility/2006" '
    'xmlns:wps="http://schemas.microsoft.com/office/word/2010/wordprocessingShape" '
    'xmlns:v="urn:schemas-microsoft-com:vml" xmlns:o="urn:schemas-microsoft-com:office:office"'
)


def r(text: str, properties: str = "") -> str:
    """A run; `properties` is the inside of its `w:rPr`."""
    return f'<w:r><w:rPr>{properties}</w:rPr><w:t xml:space="preserve">{escape(text)}</w:t></w:r>'


def p(*inside: str, style: str = "", properties: str = "") -> str:
    """A paragraph of runs in XML; text without a tag becomes a run."""
    runs = "".join(part if part.startswith("<") else r(part) for part in inside)
    named = f'<w:pStyle w:val="{style}"/>' if style else ""
    return f"<w:p><w:pPr>{named}{properties}</w:pPr>{runs}</w:p>"


def tc(text: str, properties: str = "", paragraph: str = "") -> str:
    """A cell; every line of the text is a paragraph, and XML stands as it is."""
    if text.startswith("<"):
        inside = text + ("" if text.endswith("</w:p>") else "<w:p/>")
    else:
        inside = "".join(p(line, properties=paragraph) if line else "<w:p/>" for line in text.split("\n"))
    return f"<w:tc><w:tcPr>{properties}</w:tcPr>{inside}</w:tc>"


def tr(*cells: str, properties: str = "") -> str:
    """A row of cells; what is none becomes one."""
    made = "".join(cell if cell.startswith(("<w:tc>", "<w:sdt>")) else tc(cell) for cell in cells)
    return f"<w:tr><w:trPr>{properties}</w:trPr>{made}</w:tr>"


def tbl(*rows: str | Sequence[str]) -> str:
    """A table of rows."""
    made = "".join(row if isinstance(row, str) else tr(*row) for row in rows)
    return f"<w:tbl><w:tblPr/>{made}</w:tbl>"


def math(inside: str) -> str:
    """An equation; text without a tag becomes its run."""
    return f"<m:oMath>{mr(inside)}</m:oMath>"


def mr(inside: str) -> str:
    """A run of an equation, one for each letter or number as Word sets them; XML stands as it is."""
    return inside if inside.startswith("<") else f"<m:r><m:t>{escape(inside)}</m:t></m:r>"


def docx_bytes(
    *body: str, styles: str = "", footnotes: str = "", endnotes: str = "", header: str = "", title: str = ""
) -> bytes:
    """A document with these elements as its body, saved by python-docx."""
    document = docx.Document()
    document.core_properties.title = title
    elements = parse_xml(f"<w:body {SPACES}>{''.join(body)}</w:body>")
    for at, element in enumerate(list(elements)):
        document.element.body.insert(at, element)
    for element in parse_xml(f"<w:styles {SPACES}>{styles}</w:styles>"):
        document.styles.element.append(element)
    for what, inside, kind, relation in (
        ("footnotes", footnotes, CT.WML_FOOTNOTES, RT.FOOTNOTES),
        ("endnotes", endnotes, CT.WML_ENDNOTES, RT.ENDNOTES),
    ):
        if inside:
            blob = f"<w:{what} {SPACES}>{inside}</w:{what}>".encode()
            part = Part(PackURI(f"/word/{what}.xml"), kind, blob, document.part.package)
            document.part.relate_to(part, relation)
    if header:
        document.sections[0].header.paragraphs[0].text = header
    stream = io.BytesIO()
    document.save(stream)
    return stream.getvalue()


def opened_docx(*body: str, **parts: str) -> Document:
    """The document that is read of these elements."""
    return open_document(docx_bytes(*body, **parts), name="bench.docx")


def repacked(data: bytes, changes: dict[str, bytes | None]) -> bytes:
    """The same container with some members replaced, added, or (None) left out."""
    stream = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(data)) as old, zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as new:
        for name in old.namelist():
            if name not in changes:
                new.writestr(name, old.read(name))
        for name, content in changes.items():
            if content is not None:
                new.writestr(name, content)
    return stream.getvalue()


def grid(document: Document, at: int = 0) -> list[list[str]]:
    """The rows of a table as text, a cell where it begins."""
    table = document.tables[at]
    rows = [[""] * table.columns for _ in range(table.rows)]
    for cell in table.cells:
        rows[cell.row][cell.column] = cell.text
    return rows
