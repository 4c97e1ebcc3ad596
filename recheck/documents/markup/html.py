"""Pages in HTML or XHTML: the article that a browser shows becomes a document."""

from __future__ import annotations

import codecs
import hashlib
import re

from lxml import etree

from recheck.documents.markup.assembly import Assembly
from recheck.documents.markup.html_flow import Flow
from recheck.documents.markup.html_parts import tables_of
from recheck.documents.markup.kinds import MARKS_OF_ENCODINGS
from recheck.documents.markup.names import LOCAL, whole_text
from recheck.documents.markup.shown import article_of
from recheck.errors import UnreadableDocument
from recheck.model import Document

_CHARSET = re.compile(
    rb"""<meta[^>]{0,200}?charset\s*=\s*["']?\s*([A-Za-z0-9._:-]{1,40})|^\s*<\?xml[^>]{0,200}?encoding\s*=\s*["']([A-Za-z0-9._-]{1,40})""",
    re.IGNORECASE,
)
_LOOKED_AT = 8192
_ADVICE = "save the page again, or give the article as PDF"


def html_document(data: bytes, *, name: str) -> Document:
    """Read a page. `data` are its bytes in the encoding that it declares.

    Raises `UnreadableDocument` for a page without text.
    """
    source, notes = _as_utf8(data)
    page, left = parsed_html(source)
    if page is None:
        raise UnreadableDocument(name, "it is HTML without any element", _ADVICE)
    article, whole = article_of(page)
    assembly = Assembly()
    flow = Flow(assembly, whole)
    flow.run(article)
    tables_of(flow.drafts, assembly)
    if not assembly.passages and not assembly.tables:
        raise UnreadableDocument(name, "it is a page that shows no text", _ADVICE)
    return Document(
        name=name, format="html", sha256=hashlib.sha256(data).hexdigest(), passages=tuple(assembly.passages), words=assembly.words(),
        title=_title(page, assembly), reader="lxml", notes=(*notes, *left, *assembly.notes()), tables=tuple(assembly.tables),
    )  # fmt: skip


def parsed_html(source: bytes) -> tuple[etree._Element | None, tuple[str, ...]]:
    """Parse a page in UTF-8, as browsers do whatever its faults; nothing is loaded from elsewhere.

    Gives the root, None where there is none, and a note where the parser gave up before the end.
    """
    parser = etree.HTMLParser(
        encoding="utf-8", recover=True, no_network=True, remove_comments=True, remove_pis=True, huge_tree=True
    )
    try:
        root = etree.fromstring(source, parser)
    except etree.XMLSyntaxError:
        return None, ()
    left = any(entry.level_name == "FATAL" for entry in parser.error_log)
    return root, ("The page is nested too deeply to be read whole; something is missing.",) if left else ()


def _as_utf8(data: bytes) -> tuple[bytes, tuple[str, ...]]:
    """The page in UTF-8, and a note where its bytes are not in the encoding that it declares."""
    for mark, encoding in MARKS_OF_ENCODINGS:
        if data.startswith(mark):
            return data.decode(encoding, "replace").removeprefix("\ufeff").encode("utf-8", "replace"), ()
    declared = _CHARSET.search(data[:_LOOKED_AT])
    said = (declared[1] or declared[2]).decode().lower() if declared else "utf-8"
    # Browsers read both names of the smaller set as the larger one, and UTF-16 in a readable tag as UTF-8.
    encoding = {
        "iso-8859-1": "cp1252",
        "latin-1": "cp1252",
        "latin1": "cp1252",
        "us-ascii": "utf-8",
        "ascii": "utf-8",
    }.get(said, said)
    if encoding.startswith(("utf-16", "utf-32", "ucs-2")) or not _is_known(encoding):
        encoding = "utf-8"
    try:
        text = data.decode(encoding)
    except UnicodeDecodeError:
        if encoding != "utf-8":
            return data.decode(encoding, "replace").encode(), (
                f"The text is not valid {said.upper()} as it says; symbols may be wrong.",
            )
        note = "The text is not valid UTF-8 and was read as Windows-1252; symbols may be wrong."
        return data.decode("cp1252", "replace").encode(), (note,)
    return data if encoding in ("utf-8", "utf8") else text.encode("utf-8", "replace"), ()


def _is_known(encoding: str) -> bool:
    try:
        return codecs.lookup(encoding)._is_text_encoding
    except LookupError:
        return False


def _title(page: etree._Element, assembly: Assembly) -> str | None:
    """The title that the page states for indexers, its first heading, or that of the window."""
    for meta in page.iter("meta"):
        if (meta.get("name") or "").lower() in ("citation_title", "dc.title") and (
            meta.get("content") or ""
        ).strip():
            return " ".join((meta.get("content") or "").split())
    for passage in assembly.passages:
        if passage.kind == "heading":
            return " ".join(passage.text.split())
    title = next(page.iter("title"), None)
    text = " ".join(whole_text(title).split()) if title is not None and LOCAL[title.tag] else ""
    return text or None
