"""Bytes of a text file as a string, with a word on how they were understood."""

from __future__ import annotations

import codecs

from recheck.errors import UnreadableDocument

_BOMS = (
    (codecs.BOM_UTF32_LE, "utf-32"),
    (codecs.BOM_UTF32_BE, "utf-32"),
    (codecs.BOM_UTF8, "utf-8-sig"),
    (codecs.BOM_UTF16_LE, "utf-16"),
    (codecs.BOM_UTF16_BE, "utf-16"),
)
_ORDINARY = b"\t\n\r\f\x1b"
_CONTROLS = bytes(set(range(32)) - set(_ORDINARY))
_CONTAINERS = (
    (b"\x89PNG", "a picture"),
    (b"\xff\xd8\xff", "a picture"),
    (b"{\\rtf", "an RTF document"),
    (b"\x1f\x8b", "a compressed file"),
)
_ADVICE = "save it as PDF or as UTF-8 text"


def decoded(data: bytes, name: str) -> tuple[str, tuple[str, ...]]:
    """Decode text: UTF-8, UTF-16 or UTF-32 with a byte order mark, else Windows-1252 with a note.

    Raises `UnreadableDocument` for bytes that are no text.
    """
    for start, what in _CONTAINERS:
        if data.startswith(start):
            raise UnreadableDocument(name, f"it is {what}, which cannot be read", _ADVICE)
    for mark, encoding in _BOMS:
        if data.startswith(mark):
            return _by_mark(data, encoding, name)
    if b"\0" in data:
        raise _no_text(name)
    controls = (len(data) - len(data.translate(None, _CONTROLS))) / max(len(data), 1)
    try:
        text = data.decode("utf-8")
    except UnicodeDecodeError:
        return _one_byte(data, controls, name)
    # Fonts with a wrong code table leave control characters in text that was copied from a PDF.
    if controls > 0.1:
        raise _no_text(name)
    return text, ()


def _by_mark(data: bytes, encoding: str, name: str) -> tuple[str, tuple[str, ...]]:
    try:
        text = data.decode(encoding)
    except UnicodeDecodeError:
        reason = f"its mark says {encoding.upper().removesuffix('-SIG')} but its bytes do not follow it"
        raise UnreadableDocument(name, reason, "save it again as UTF-8") from None
    if "\0" in text:
        raise _no_text(name)
    return text, ()


def _one_byte(data: bytes, controls: float, name: str) -> tuple[str, tuple[str, ...]]:
    # Bytes 128-159 are letters and quotes in Windows-1252; in compressed data all bytes are alike.
    high = (len(data) - len(data.translate(None, bytes(range(128, 256))))) / len(data)
    if controls > 0.01 or high > 0.4:
        raise _no_text(name)
    try:
        text, encoding = data.decode("cp1252"), "Windows-1252"
    except UnicodeDecodeError:
        text, encoding = data.decode("latin-1"), "Latin-1"
    return text, (f"The text is not valid UTF-8 and was read as {encoding}; symbols may be wrong.",)


def _no_text(name: str) -> UnreadableDocument:
    return UnreadableDocument(name, "it is neither a PDF nor text", _ADVICE)
