"""XML parsed so that a file can do no harm: no network, no external DTD, no expansion of entities."""

from __future__ import annotations

import re
from collections import Counter
from html.entities import html5

from lxml import etree

from recheck.documents.markup.kinds import DOCTYPE, MARKS_OF_ENCODINGS
from recheck.errors import UnreadableDocument

_DECLARED = re.compile(rb"""^\s*<\?xml[^>]{0,200}?encoding\s*=\s*["']([A-Za-z0-9._-]{1,40})["']""")
_DECLARATION = re.compile(r"^\s*<\?xml[^>]{0,200}\?>")
_NAMED = re.compile(rb"&(?:([A-Za-z][A-Za-z0-9]{1,40})|#(1[2-5]\d));")
_OWN = re.compile(
    rb"""<!ENTITY\s+([A-Za-z][\w.-]{0,40})\s+(["'])((?:[^"'<&%]|&#x?[0-9A-Fa-f]{1,6};){1,40})\2\s*>"""
)
_ELEMENT = re.compile(rb"<[A-Za-z_]")
_LOOKED_AT = 2**20
_OWN_OF_XML = frozenset((b"amp", b"lt", b"gt", b"quot", b"apos"))
_LOOSE = re.compile(rb"<(?![A-Za-z_/!?:])|&(?!#?[A-Za-z0-9]{1,40};)")
_ADVICE = "save or download it again, or give the article as PDF"

_GREEK_OF_ISO = dict(
    zip(
        [
            "agr",
            "bgr",
            "ggr",
            "dgr",
            "egr",
            "zgr",
            "eegr",
            "thgr",
            "igr",
            "kgr",
            "lgr",
            "mgr",
            "ngr",
            "xgr",
            "ogr",
            "pgr",
            "rgr",
            "sfgr",
            "sgr",
            "tgr",
            "ugr",
            "phgr",
            "khgr",
            "psgr",
            "ohgr",
        ],
        "αβγδεζηθικλμνξοπρςστυφχψω",
        strict=True,
    )
) | {"thetas": "θ", "phis": "φ", "epsis": "ε"}
"""Names of ISO 8879 (sets ISOgrk1 and ISOgrk3) that HTML does not know."""


def parsed_xml(data: bytes, name: str) -> tuple[etree._Element, tuple[str, ...]]:
    """Parse XML; gives the root and notes on what had to be mended.

    The parser never sees a document type: characters by name are put in before, those that the
    file defines itself only where they are short and plain, and every other entity stays as the
    text that it is. Raises `UnreadableDocument` where nothing can be made of the file.
    """
    data, encoding = _as_bytes(data)
    data, own = _without_doctype(data)
    unknown: Counter[str] = Counter()
    data = _NAMED.sub(lambda match: _number(match, own, unknown), data)
    notes: tuple[str, ...] = ()
    if unknown:
        names = ", ".join(sorted(unknown)[:6])
        notes = (
            f"{unknown.total()} characters or inclusions have a name that is not known and stand as {names}.",
        )
    return _parsed(data, encoding, name, notes)


def _without_doctype(data: bytes) -> tuple[bytes, dict[bytes, bytes]]:
    """Take the document type away; gives the characters that it defines. Lines keep their numbers."""
    match = DOCTYPE.search(data[:_LOOKED_AT]) if b"<!" in data[:_LOOKED_AT] else None
    if match is None or _ELEMENT.search(data, 0, match.start()):
        return data, {}
    own = {entity[1]: entity[3] for entity in _OWN.finditer(match[0])}
    return data[: match.start()] + b"\n" * match[0].count(b"\n") + data[match.end() :], own


def _parsed(
    data: bytes, encoding: str | None, name: str, notes: tuple[str, ...]
) -> tuple[etree._Element, tuple[str, ...]]:
    try:
        return _root(etree.fromstring(data, _parser(encoding)), name), notes
    except etree.XMLSyntaxError as error:
        return _mended(data, encoding, name, error, notes)


def _parser(encoding: str | None, recover: bool = False) -> etree.XMLParser:
    return etree.XMLParser(
        encoding=encoding, resolve_entities=False, load_dtd=False, no_network=True, dtd_validation=False,
        attribute_defaults=False, huge_tree=False, remove_comments=True, remove_pis=True, recover=recover,
    )  # fmt: skip


def _root(root: etree._Element | None, name: str) -> etree._Element:
    if root is None:
        raise UnreadableDocument(name, "it is XML without any element", _ADVICE)
    return root


def _as_bytes(data: bytes) -> tuple[bytes, str | None]:
    """Bytes that the parser takes, and the encoding that it must be told if that is not the declared one."""
    for mark, encoding in MARKS_OF_ENCODINGS:
        if data.startswith(mark):
            text = data.decode(encoding, "replace").removeprefix("\ufeff")
            return _DECLARATION.sub("", text, count=1).encode("utf-8", "replace"), "utf-8"
    # A declaration can be left from another encoding: the bytes tell that they are single.
    return data, "utf-8" if _said(data).startswith((b"utf-16", b"ucs-2", b"utf-32", b"iso-10646")) else None


def _said(data: bytes) -> bytes:
    """The encoding that a file declares, in small letters; UTF-8 where it says nothing."""
    declared = _DECLARED.match(data[:300])
    return declared[1].lower() if declared else b"utf-8"


def _says_utf8(data: bytes) -> bool:
    return _said(data) in (b"utf-8", b"utf8", b"us-ascii", b"ascii")


def _is_utf8(data: bytes) -> bool:
    try:
        data.decode("utf-8")
    except UnicodeDecodeError:
        return False
    return True


def _number(match: re.Match[bytes], own: dict[bytes, bytes], unknown: Counter[str]) -> bytes:
    """Write a named character as a number; numbers from 128 to 159 are meant as Windows-1252 has them: `&#150;` is a dash."""
    if match[2]:
        code = int(match[2])
        return (
            f"&#{ord(bytes((code,)).decode('cp1252', 'replace'))};".encode()
            if 128 <= code <= 159
            else match[0]
        )
    if match[1] in _OWN_OF_XML:
        return match[0]
    if match[1] in own:
        return own[match[1]]
    entity = match[1].decode()
    became = html5.get(entity + ";") or _GREEK_OF_ISO.get(entity)
    if became is None:
        unknown[match[0].decode()] += 1
        return b"&amp;" + match[0][1:]
    return "".join(f"&#{ord(char)};" for char in became).encode()


def _mended(
    data: bytes, encoding: str | None, name: str, error: etree.XMLSyntaxError, notes: tuple[str, ...]
) -> tuple[etree._Element, tuple[str, ...]]:
    """Parse a file that is not well formed: in another encoding, bare `<` and `&` as such, then as far as it is sound."""
    if not notes and _says_utf8(data) and not _is_utf8(data):
        note = "The text is not valid UTF-8 and was read as Windows-1252; symbols may be wrong."
        return _parsed(data.decode("cp1252", "replace").encode(), "utf-8", name, (note,))
    data = _LOOSE.sub(lambda match: b"&lt;" if match[0] == b"<" else b"&amp;", data)
    where = f"line {error.lineno}" if error.lineno else "its start"
    try:
        root = etree.fromstring(data, _parser(encoding))
        note = f"The XML is not well formed ({where}): bare < and & were read as such signs."
    except etree.XMLSyntaxError as again:
        where = f"line {again.lineno}" if again.lineno else where
        root = _recovered(data, encoding)
        fault = "nested too deeply" if "depth" in (again.msg or "") else "not well formed"
        note = (
            f"The XML is {fault} ({where}); it was read as far as it is sound, and something may be missing."
        )
    if root is None:
        raise UnreadableDocument(name, f"it is XML that is not well formed ({where})", _ADVICE) from None
    return root, (*notes, note)


def _recovered(data: bytes, encoding: str | None) -> etree._Element | None:
    try:
        return etree.fromstring(data, _parser(encoding, recover=True))
    except etree.XMLSyntaxError:
        return None
