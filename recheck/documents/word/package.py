"""A Word document's parts: the main text, styles, notes, what its relations lead to."""

from __future__ import annotations

import io
import posixpath
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from docx.exceptions import PythonDocxError
from docx.opc.constants import RELATIONSHIP_TYPE as RT
from docx.opc.exceptions import OpcError
from docx.opc.part import Part
from docx.oxml.parser import parse_xml
from docx.package import Package
from lxml import etree

from recheck.documents.word.unpacking import packed, word_parts
from recheck.errors import UnreadableDocument

W = "{http://schemas.openxmlformats.org/wordprocessingml/2006/main}"
M = "{http://schemas.openxmlformats.org/officeDocument/2006/math}"
MC = "{http://schemas.openxmlformats.org/markup-compatibility/2006}"

Element = Any
"""An element of lxml."""

_OFFICE = b"http://schemas.openxmlformats.org/officeDocument/2006/"
_STRICT = (
    # ISO/IEC 29500-1:2016 against its Part 4: the same names under other addresses.
    (b"http://purl.oclc.org/ooxml/wordprocessingml/main", b"http://schemas.openxmlformats.org/wordprocessingml/2006/main"),
    (b"http://purl.oclc.org/ooxml/drawingml/", b"http://schemas.openxmlformats.org/drawingml/2006/"),
    (b"http://purl.oclc.org/ooxml/officeDocument/", _OFFICE),
)  # fmt: skip


@dataclass(frozen=True, slots=True, eq=False)
class WordPackage:
    """The parts that are read, as lxml elements; None or empty where the document has none.

    `damaged` says that the relations between them could not be followed.
    """

    body: Element
    styles: Element | None
    footnotes: Element | None
    endnotes: Element | None
    numbering: Element | None
    margins: tuple[Element, ...] = ()
    title: str = ""
    damaged: bool = False


def word_package(data: bytes, name: str) -> WordPackage:
    """Open a DOCX. Raises `UnreadableDocument`."""
    parts = {path: _transitional(content) for path, content in word_parts(data, name).items()}
    opened = _opened(parts)
    if opened is None:
        return _by_names(parts, name)
    main, body = opened
    return WordPackage(
        body,
        styles=_related(main, RT.STYLES),
        footnotes=_related(main, RT.FOOTNOTES),
        endnotes=_related(main, RT.ENDNOTES),
        numbering=_related(main, RT.NUMBERING),
        margins=tuple(_margins(main)),
        title=_title(main),
    )


def _by_names(parts: Mapping[str, bytes], name: str) -> WordPackage:
    """The parts by the names that Word gives them, where the relations between them are damaged."""
    main = _parsed(parts.get("word/document.xml"))
    body = None if main is None else main.find(f"{W}body")
    if body is None:
        raise _damaged(name)
    return WordPackage(
        body,
        styles=_parsed(parts.get("word/styles.xml")),
        footnotes=_parsed(parts.get("word/footnotes.xml")),
        endnotes=_parsed(parts.get("word/endnotes.xml")),
        numbering=_parsed(parts.get("word/numbering.xml")),
        damaged=True,
    )


def _parsed(content: bytes | None) -> Element | None:
    try:
        return None if content is None else parse_xml(content)
    except etree.XMLSyntaxError:
        return None


def _opened(parts: Mapping[str, bytes]) -> tuple[Part, Element] | None:
    """The main part and its body; None where python-docx cannot open the parts, or there is no text."""
    try:
        package = Package.open(io.BytesIO(packed(_loose_ends_cut(parts))))
        main = package.part_related_by(RT.OFFICE_DOCUMENT)
        root = _root(main)
    except (KeyError, ValueError, TypeError, AttributeError, etree.XMLSyntaxError, OpcError, PythonDocxError):
        return None
    body = None if root is None else root.find(f"{W}body")
    return None if body is None else (main, body)


def _damaged(name: str) -> UnreadableDocument:
    return UnreadableDocument(
        name, "it is a Word document whose main text is damaged", "open it with Word and save it again"
    )


def _transitional(content: bytes) -> bytes:
    if b"purl.oclc.org/ooxml" not in content:
        return content
    for strict, usual in _STRICT:
        content = content.replace(strict, usual)
    return content


def _loose_ends_cut(parts: Mapping[str, bytes]) -> dict[str, bytes]:
    """Leave out relations to what is not among the parts: pictures, or what a program forgot to pack."""
    return {
        path: _kept_relations(path, content, parts) if path.endswith(".rels") else content
        for path, content in parts.items()
    }


def _kept_relations(path: str, content: bytes, parts: Mapping[str, bytes]) -> bytes:
    try:
        root = etree.fromstring(content, etree.XMLParser(resolve_entities=False, no_network=True))
    except etree.XMLSyntaxError:
        return content
    base = posixpath.dirname(posixpath.dirname(path))
    for relation in list(root):
        target = relation.get("Target") or ""
        external = relation.get("TargetMode") == "External"
        whole = posixpath.normpath(posixpath.join("/", base, target)).lstrip("/")
        if external or whole not in parts:
            root.remove(relation)
    return etree.tostring(root)


def _root(part: Part) -> Element | None:
    element = getattr(part, "element", None)
    return parse_xml(part.blob) if element is None else element


def _related(part: Part, kind: str) -> Element | None:
    """The root of a part that the main text refers to; a damaged one is taken for none."""
    try:
        return _root(part.part_related_by(kind))
    except (KeyError, ValueError, etree.XMLSyntaxError):
        return None


def _margins(main: Part) -> list[Element]:
    found = []
    for relation in main.rels.values():
        if relation.reltype in (RT.HEADER, RT.FOOTER) and not relation.is_external:
            try:
                found.append(_root(relation.target_part))
            except etree.XMLSyntaxError:
                continue
    return found


def _title(main: Part) -> str:
    try:
        return main.package.core_properties.title or ""
    except (KeyError, ValueError, AttributeError):
        return ""
