"""Word documents (DOCX): passages and tables in reading order."""

from __future__ import annotations

import hashlib
from collections import Counter
from collections.abc import Iterable, Iterator, Sequence

from recheck.documents.pieces import Grid, Piece, assembled
from recheck.documents.sections import (
    captioned,
    is_named_section,
    is_statement,
    opens_references,
    states_title,
    unnumbered,
)
from recheck.documents.word.blocks import Blocks, numbered
from recheck.documents.word.inline import Paragraph
from recheck.documents.word.merging import Block
from recheck.documents.word.numbering import Numbers
from recheck.documents.word.package import WordPackage, word_package
from recheck.documents.word.styles import styles_of
from recheck.errors import UnreadableDocument
from recheck.model import Document, Passage, PassageKind, Table

_LONGEST_HEADING = 250


def docx_document(data: bytes, *, name: str) -> Document:
    """Read a DOCX. Raises `UnreadableDocument`."""
    package = word_package(data, name)
    notes = numbered(package.footnotes, "footnote") | numbered(package.endnotes, "endnote")
    blocks = Blocks(styles_of(package.styles), notes, Numbers(package.numbering))
    try:
        found = [*blocks.of(package.body), *blocks.endnotes()]
        margins = _margins(blocks, package)
    except RecursionError:
        raise UnreadableDocument(
            name, "its tables or equations are nested too deeply", "save it as PDF"
        ) from None
    pieces = [*_pieces(found), *margins]
    passages, tables = assembled(pieces)
    words = sum(len(passage.text.split()) for passage in passages)
    words += sum(len(cell.text.split()) for table in tables for cell in table.cells)
    return Document(
        name=name,
        format="docx",
        sha256=hashlib.sha256(data).hexdigest(),
        passages=passages,
        words=words,
        title=_title(package.title, found, pieces),
        reader="python-docx",
        notes=(*_notes(blocks, package), *_rowless(passages, tables)),
        tables=tables,
    )


def _margins(blocks: Blocks, package: WordPackage) -> list[Piece]:
    """Running heads and feet, each once, set aside."""
    texts = {
        block.text: block.marks
        for root in package.margins
        for block in blocks.of(root)
        if isinstance(block, Paragraph)
    }
    return [Piece(text, marks, "aside") for text, marks in texts.items()]


def _notes(blocks: Blocks, package: WordPackage) -> Iterator[str]:
    if package.damaged:
        yield "The file is damaged: its text was read, what is told of it elsewhere in the file may be missing."
    pictures = blocks.inline.equations
    if pictures:
        what = "1 equation is" if pictures == 1 else f"{pictures} equations are"
        yield f"{what} kept as pictures (Equation Editor, MathType) and cannot be read."
    if blocks.unread:
        yield f"Text inserted from other files was not read ({blocks.unread} times)."


def _rowless(passages: Iterable[Passage], tables: Iterable[Table]) -> Iterator[str]:
    """What is said of captions without a table: many manuscripts hold tables as pictures."""
    known = {table.label for table in tables} | {table.caption.table for table in tables if table.caption}
    captions = (p.table for p in passages if p.kind == "caption" and p.table and p.table not in known)
    names = list(dict.fromkeys(captions))
    if names:
        have = "1 table has" if len(names) == 1 else f"{len(names)} tables have"
        yield f"{have} a caption but no rows here (a picture, or in another file): {', '.join(names[:12])}."


def _pieces(blocks: Sequence[Block]) -> Iterator[Piece]:
    usual = _usual_size(blocks)
    last = len(blocks) - 1
    for at, block in enumerate(blocks):
        if isinstance(block, Grid):
            yield Piece(grid=block)
            continue
        kind = _kind(block)
        if kind == "body" and at < last and _is_bold_heading(block):
            kind = "heading"
        small = 0 < block.size < 0.94 * usual
        level = block.level if kind == "heading" else 0
        yield Piece(block.text, block.marks, kind, level, small=small)


def _usual_size(blocks: Iterable[Block]) -> int:
    """The size of most of the running text."""
    sizes: Counter[int] = Counter()
    for block in blocks:
        if isinstance(block, Paragraph):
            sizes[block.size] += len(block.text)
    return sizes.most_common(1)[0][0] if sizes else 0


_BY_ROLE: dict[str, PassageKind] = {
    "caption": "caption", "note": "note", "contents": "aside", "code": "aside", "references": "references", "title": "heading",
}  # fmt: skip


def _kind(block: Paragraph) -> PassageKind:
    role = block.style.role
    if block.note:
        return "note"
    if role in _BY_ROLE:
        return _BY_ROLE[role]
    if captioned(block.text, sure=block.bold) and len(block.text) < 2000:
        return "caption"
    if block.level and len(block.text) <= _LONGEST_HEADING:
        return "heading"
    return "body"


def _is_bold_heading(block: Paragraph) -> bool:
    """Whether a paragraph without a heading's style is one: the name of a section, or short, bold, and no statement."""
    text = block.text.strip()
    if len(text) > 120 or "\n" in text:
        return False
    if is_named_section(text) or opens_references(text):
        return True
    name = unnumbered(text)
    return block.bold and name[:1].isupper() and not is_statement(name) and len(name.split()) <= 14


def _title(stated: str, blocks: Sequence[Block], pieces: Sequence[Piece]) -> str | None:
    """The title in the file's properties if it reads like one, else one in a title's style, the largest text, a heading at the top."""
    if states_title(stated):
        return " ".join(stated.split())
    paragraphs = [block for block in blocks if isinstance(block, Paragraph)]
    found = [p.text for p in paragraphs if p.style.role == "title"] or _largest(paragraphs)
    found += [p.text for p in pieces[:5] if p.kind == "heading" and not is_named_section(p.text)]
    return " ".join(found[0].split()) if found else None


def _largest(paragraphs: Sequence[Paragraph]) -> list[str]:
    """The largest of the first texts, if it is larger than most of the document."""
    first = [p for p in paragraphs[:15] if 6 < len(p.text) < 400 and not p.note]
    size = max((p.size for p in first), default=0)
    if size <= 1.06 * _usual_size(paragraphs):
        return []
    return [p.text for p in first if p.size == size][:1]
