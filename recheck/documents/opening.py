"""Opening a source: what it is, whether it can be read, and who reads it."""

from __future__ import annotations

import errno
import os
import stat
from collections.abc import Collection
from pathlib import Path
from typing import BinaryIO, Literal

from recheck.documents.decoding import decoded
from recheck.documents.markup.kinds import markup_document, markup_of
from recheck.documents.typed.text import text_document
from recheck.documents.word.containers import ZIP_LIMIT, is_ole, is_zip, ole_refusal
from recheck.errors import UnreadableDocument
from recheck.model import Document

Reader = Literal["auto", "pdfium", "pdfminer"]

HEAD = 1024
PDF_LIMIT = 512 * 2**20
TEXT_LIMIT = 64 * 2**20

_REASONS = {
    errno.ENOENT: ("there is no such file", "check the path"),
    errno.ENOTDIR: ("a part of the path is not a directory", "check the path"),
    errno.EACCES: ("reading it is not permitted", "change its permissions or copy it"),
    errno.EPERM: ("reading it is not permitted", "change its permissions or copy it"),
    errno.ELOOP: ("its symbolic links run in a circle", "give the path of the file itself"),
    errno.ENAMETOOLONG: ("the name is too long for a file", "check the path"),
    errno.EISDIR: ("it is a directory", "give the files in it one by one"),
}


def open_document(
    source: str | Path | bytes | BinaryIO,
    *,
    name: str | None = None,
    reader: Reader = "auto",
    pages: Collection[int] | None = None,
) -> Document:
    """Read a PDF, DOCX, JATS XML, HTML, text or Markdown source; its content tells the format, not its name.

    `pages` (from 1) restricts a PDF to those pages. `reader` names the engine for PDF; `auto` is
    pdfium, and pdfminer for files that pdfium cannot open. Raises `UnreadableDocument`.
    """
    name = shown_name(name if name is not None else _own_name(source))
    data = _content(source, name)
    if is_pdf(data[:HEAD]):
        from recheck.documents.pdf.document import pdf_document

        return pdf_document(data, name=name, reader=reader, pages=pages)
    if is_zip(data):
        from recheck.documents.word.document import docx_document

        return docx_document(data, name=name)
    if is_ole(data):
        raise ole_refusal(data, name)
    if (marked_up := markup_document(data, name)) is not None:
        return marked_up
    text, notes = decoded(data, name)
    return text_document(text, name=name, format="", data=data, notes=notes)


def is_pdf(head: bytes) -> bool:
    """Tell whether a file that begins so is a PDF: readers allow junk before the mark."""
    return b"%PDF-" in head[:HEAD]


def shown_name(name: str) -> str:
    """A file's name fit for one line of a message: odd bytes and line ends are escaped."""
    return "".join(
        c if c.isprintable() else c.encode("unicode_escape", "surrogatepass").decode() for c in name
    )


def _own_name(source: object) -> str:
    if isinstance(source, (str, Path)):
        return os.fsdecode(source)
    own = getattr(source, "name", None)
    return own if isinstance(own, str) else "document"


def _content(source: str | Path | bytes | BinaryIO, name: str) -> bytes:
    """All bytes of a source, refused early if they are none, too many or of no known kind."""
    if isinstance(source, bytes):
        return _checked(source, name)
    if not isinstance(source, (str, Path)):
        return _checked(_drawn(source, name), name)
    try:
        _check_kind(Path(source).stat(), name)
        with Path(source).open("rb") as file:
            return _checked(_drawn(file, name), name)
    except OSError as error:
        fallback = (
            f"the system cannot read it ({error.strerror or 'unknown error'})",
            "copy the file and try again",
        )
        reason, advice = _REASONS.get(error.errno or 0, fallback)
        raise UnreadableDocument(name, reason, advice) from None
    except ValueError:
        raise UnreadableDocument(name, "the name cannot be that of a file", "check the path") from None


def _check_kind(status: os.stat_result, name: str) -> None:
    if stat.S_ISDIR(status.st_mode):
        raise UnreadableDocument(name, *_REASONS[errno.EISDIR])
    if not stat.S_ISREG(status.st_mode):
        raise UnreadableDocument(
            name, "it is a pipe or a device, not a file", "give a file, or - for standard input"
        )


def _drawn(file: BinaryIO, name: str) -> bytes:
    """Read a stream, its first bytes first: a huge file of no known kind is never read whole."""
    head = file.read(HEAD)
    if not head:
        return b""
    if is_pdf(head):
        limit, kind = PDF_LIMIT, "PDF"
    elif is_zip(head) or is_ole(head):
        limit, kind = ZIP_LIMIT, "an Office document"
    else:
        limit, kind = TEXT_LIMIT, "text"
        if b"\0" in head and not markup_of(head):
            decoded(head[: len(head) // 4 * 4], name)
    data = head + file.read(limit + 1 - len(head))
    if len(data) > limit:
        raise UnreadableDocument(
            name,
            f"it is larger than {limit // 2**20} MiB, the limit for {kind}",
            "give the part with the article",
        )
    return data


def _checked(data: bytes, name: str) -> bytes:
    if not data.strip():
        reason = "it holds only white space" if data else "the file is empty (0 bytes)"
        raise UnreadableDocument(name, reason, "check that it was saved or downloaded whole")
    return data
