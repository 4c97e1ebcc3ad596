"""ZIP containers: what they hold, told and taken out without unpacking more than is safe."""

from __future__ import annotations

import io
import zipfile
import zlib
from collections.abc import Iterator, Mapping

from recheck.documents.word.containers import AS_DOCX
from recheck.errors import UnreadableDocument

MOST_MEMBERS = 10_000
MOST_UNPACKED = 2**30
MOST_XML = 96 * 2**20
"""Bytes of all XML parts of a container together; that of a book of a thousand pages is a fifth of it."""

_CHUNK = 2**18
_WORD_MAIN = ("wordprocessingml.document.main", "ms-word.document.macro", "wordprocessingml.template.main",
              "ms-word.template.macro")  # fmt: skip
_MIMETYPES = {
    b"application/vnd.oasis.opendocument.text": ("it is an OpenDocument text (ODT)", AS_DOCX),
    b"application/vnd.oasis.opendocument": ("it is an OpenDocument file without running text", AS_DOCX),
    b"application/epub+zip": ("it is an EPUB book", "save it as PDF or HTML"),
}
_FOLDERS = {
    "xl/": ("it is a spreadsheet (XLSX)", "give the manuscript itself as DOCX or PDF"),
    "ppt/": ("it is a slide show (PPTX)", "give the manuscript itself as DOCX or PDF"),
    "Index/": ("it is an Apple iWork document", AS_DOCX),
}


def word_parts(data: bytes, name: str) -> dict[str, bytes]:
    """Unpack the XML parts of a Word document, by their names; pictures and the like stay packed.

    Nothing is unpacked before the directory is found to be within bounds, and no member beyond the
    size that the directory states. Raises `UnreadableDocument` for any other container.
    """
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            members = archive.infolist()
            _check_bounds(members, name)
            _check_kind(archive, name)
            parts = dict(_unpacked(archive, members))
    except (zipfile.BadZipFile, zlib.error, EOFError, OSError, ValueError):
        raise _damaged(name) from None
    except NotImplementedError:
        raise UnreadableDocument(
            name, "it is packed in a way that is not known", "save it again with Word or LibreOffice"
        ) from None
    if not _is_word(parts):
        raise UnreadableDocument(
            name, "it is a ZIP container without a Word document", "unpack it and give the files in it"
        )
    return parts


def packed(parts: Mapping[str, bytes]) -> bytes:
    """Put parts into a ZIP container as they are, uncompressed."""
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_STORED) as archive:
        for name, content in parts.items():
            archive.writestr(zipfile.ZipInfo(name), content)
    return stream.getvalue()


def _damaged(name: str) -> UnreadableDocument:
    return UnreadableDocument(
        name, "it is a ZIP container that is damaged or cut off", "download it again or save it anew"
    )


def _check_bounds(members: list[zipfile.ZipInfo], name: str) -> None:
    unpacked = sum(member.file_size for member in members)
    xml = sum(member.file_size for member in members if _is_xml(member.filename))
    if len(members) > MOST_MEMBERS:
        reason = f"it is a ZIP container of more than {MOST_MEMBERS} files"
    elif unpacked > MOST_UNPACKED or xml > MOST_XML:
        limit = MOST_XML if xml > MOST_XML else MOST_UNPACKED
        reason = f"it would unpack to more than {limit // 2**20} MiB"
    else:
        return
    raise UnreadableDocument(name, reason, "give the part with the article, or save it as PDF")


def _check_kind(archive: zipfile.ZipFile, name: str) -> None:
    names = archive.namelist()
    if any(member.flag_bits & 1 for member in archive.infolist()):
        raise UnreadableDocument(
            name, "it is a ZIP container locked with a password", "unpack it and give the files in it"
        )
    if any(part.startswith("word/") for part in names):
        return
    if "mimetype" in names:
        with archive.open("mimetype") as file:
            mimetype = file.read(200)
        for start, (reason, advice) in _MIMETYPES.items():
            if mimetype.startswith(start):
                raise UnreadableDocument(name, reason, advice)
    for folder, (reason, advice) in _FOLDERS.items():
        if any(part.startswith(folder) for part in names):
            raise UnreadableDocument(name, reason, advice)


def _is_xml(part: str) -> bool:
    return part.lower().endswith((".xml", ".rels"))


def _unpacked(archive: zipfile.ZipFile, members: list[zipfile.ZipInfo]) -> Iterator[tuple[str, bytes]]:
    # Read in pieces: a single call of `read` would inflate all that a lying directory hides.
    for member in members:
        if _is_xml(member.filename):
            with archive.open(member) as file:
                pieces = []
                while piece := file.read(_CHUNK):
                    pieces.append(piece)
            yield member.filename.replace("\\", "/").lstrip("/"), b"".join(pieces)


def _is_word(parts: Mapping[str, bytes]) -> bool:
    types = parts.get("[Content_Types].xml", b"")
    return any(kind.encode() in types for kind in _WORD_MAIN) or "word/document.xml" in parts
