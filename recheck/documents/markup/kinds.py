"""Which markup language a file is written in, told by its content."""

from __future__ import annotations

import re
from codecs import BOM_UTF8, BOM_UTF16_BE, BOM_UTF16_LE, BOM_UTF32_BE, BOM_UTF32_LE
from typing import Literal

from recheck.model import Document

Markup = Literal["xml", "html", ""]

MARKS_OF_ENCODINGS = (
    (BOM_UTF32_LE, "utf-32"), (BOM_UTF32_BE, "utf-32"), (BOM_UTF8, "utf-8-sig"),
    (BOM_UTF16_LE, "utf-16"), (BOM_UTF16_BE, "utf-16"), (b"<\0", "utf-16-le"), (b"\0<", "utf-16-be"),
)  # fmt: skip
"""What files begin with, and the encoding that it tells; XML in UTF-16 may lack the mark but begins with `<`."""

_SKIPPED = re.compile(rb"\s+|<!--.*?-->|<\?.*?\?>", re.DOTALL)
DOCTYPE = re.compile(
    rb"<!doctype\s+([\w:.-]{1,100})(?:[^<>\[\]\"']|\"[^\"]{0,1000}\"|'[^']{0,1000}'){0,2000}(?:\[.*?\]\s*)?>",
    re.IGNORECASE | re.DOTALL,
)
_ELEMENT = re.compile(rb"<([A-Za-z_][\w:.-]{0,100})(?=[\s/>])")
_PARTS = re.compile(rb"<(?:[\w.-]+:)?(?:front|front-stub|body|back)[\s>]")
_MARKDOWN = re.compile(rb"^(?:#{1,6} |```|~~~|\|[ :-]*-{3}|[^\n<]{1,200}\n(?:={3,}|-{3,})\s*$)", re.MULTILINE)
_BLANK_LINES = re.compile(rb"\n[ \t\r]*\n\s*")
_LOOKED_AT = 2**20
"""Bytes at the start of a file in which its first element has to stand: licences in comments can be long."""
_LOOSE = 0.2
"""Share of a page in paragraphs that begin without a tag above which it is Markdown with tags in it."""

_PAGE = (b"html", b"head", b"body")
_ARTICLE = (b"article", b"pmc-articleset", b"sub-article", b"response")
_BLOCK = (
    b"div", b"p", b"table", b"section", b"main", b"article", b"h1", b"h2", b"h3", b"ul", b"ol", b"header", b"figure",
    b"meta", b"title", b"link", b"style", b"script", b"blockquote", b"center", b"nav", b"span", b"base",
)  # fmt: skip


def markup_of(data: bytes) -> Markup:
    """Tell the markup language of a file that begins with its first element, "" for any other text."""
    head = _single_bytes(data[:_LOOKED_AT])
    doctype, element = _beginning(head)
    if doctype == b"html" or element in _PAGE:
        return "html"
    if head.lstrip()[:5].lower() == b"<?xml" or doctype:
        return "xml"
    if element in _ARTICLE and _PARTS.search(head):
        return "xml"
    if element in _BLOCK:
        return "html" if _is_page(_single_bytes(data)) else ""
    closing = b"</" + element + b">"
    return "xml" if element and data[-400:].lower().rstrip().endswith(closing) else ""


def markup_document(data: bytes, name: str) -> Document | None:
    """Read JATS XML or HTML; None for a file in neither. Raises `UnreadableDocument`."""
    markup = markup_of(data)
    if markup == "xml":
        from recheck.documents.markup.jats import jats_document
        from recheck.documents.markup.parsing import parsed_xml

        root, notes = parsed_xml(data, name)
        return jats_document(root, name=name, data=data, notes=notes)
    if markup == "html":
        from recheck.documents.markup.html import html_document

        return html_document(data, name=name)
    return None


def _single_bytes(data: bytes) -> bytes:
    """A file without byte order mark, UTF-16 and UTF-32 made single bytes."""
    for mark, encoding in MARKS_OF_ENCODINGS:
        if data.startswith(mark):
            text = data[: len(data) // 4 * 4] if encoding != "utf-8-sig" else data
            return text.decode(encoding, "replace").lstrip("\ufeff").encode("utf-8", "replace")
    return data


def _beginning(head: bytes) -> tuple[bytes, bytes]:
    """The names in the document type and in the first tag of a file, in small letters; empty where it begins otherwise."""
    at, doctype = 0, b""
    while True:
        if match := _SKIPPED.match(head, at):
            at = match.end()
        elif not doctype and (match := DOCTYPE.match(head, at)):
            at, doctype = match.end(), match[1].lower()
        else:
            break
    match = _ELEMENT.match(head, at)
    return doctype, match[1].lower() if match else b""


def _is_page(data: bytes) -> bool:
    """Whether a text that begins with a tag is a part of a page, and not Markdown with tags in it."""
    if not data.rstrip().endswith(b">") or _MARKDOWN.search(data):
        return False
    blocks = _BLANK_LINES.split(data.strip())
    loose = sum(len(block) for block in blocks if not block.startswith(b"<"))
    return loose <= _LOOSE * len(data)
