"""ZIP and OLE containers, told by their first bytes."""

from __future__ import annotations

from recheck.errors import UnreadableDocument

ZIP_LIMIT = 256 * 2**20
AS_DOCX = "save it as DOCX or PDF"


def is_zip(head: bytes) -> bool:
    """Tell whether bytes begin as those of a ZIP container."""
    return head.startswith((b"PK\x03\x04", b"PK\x05\x06", b"PK\x07\x08"))


def is_ole(head: bytes) -> bool:
    """Tell whether bytes begin as those of an old Office document."""
    return head.startswith(b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1")


def ole_refusal(data: bytes, name: str) -> UnreadableDocument:
    """Say what an old Office document is: the names of its streams tell."""
    if "EncryptedPackage".encode("utf-16-le") in data:
        return UnreadableDocument(
            name, "it is an Office document locked with a password", "save it again without the password"
        )
    if "WordDocument".encode("utf-16-le") in data:
        return UnreadableDocument(name, "it is a Word document of the old kind (DOC)", AS_DOCX)
    return UnreadableDocument(name, "it is an old Office document that is no text", AS_DOCX)
