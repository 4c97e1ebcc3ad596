"""The whole way from the bytes of a PDF to a document."""

from __future__ import annotations

import hashlib
from collections.abc import Callable, Collection
from dataclasses import replace
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from recheck.documents.pdf import pdfium
from recheck.documents.pdf.blocks import blocks_of, type_of
from recheck.documents.pdf.columns import Arrangement, agreed_gutters, arranged, gutters_of
from recheck.documents.pdf.furniture import furniture
from recheck.documents.pdf.glyphs import Engine, Glyphs, Unopened, sideways, upright
from recheck.documents.pdf.joining import put_together
from recheck.documents.pdf.kinds import classified
from recheck.documents.pdf.lines import Line, hosts_of, lines_of
from recheck.documents.pdf.mending import mended
from recheck.documents.pdf.passages import passages_of, title_of
from recheck.documents.pdf.ruled_columns import ruled_gutters
from recheck.documents.pdf.tables.captions import captions_of
from recheck.documents.pdf.tables.page_tables import PageTable, page_tables, with_cells
from recheck.documents.pdf.tables.parts import joined_tables, marked, tables_of, unread
from recheck.documents.pdf.words import Words, words_of
from recheck.errors import UnreadableDocument
from recheck.model import Document, Passage

_REGIONS = 10_000
"""More than a page has regions."""


def pdf_document(
    data: bytes,
    *,
    name: str,
    reader: Literal["auto", "pdfium", "pdfminer"] = "auto",
    pages: Collection[int] | None = None,
) -> Document:
    """Read a PDF with the engine asked for; `auto` is pdfium, then pdfminer where pdfium fails.

    Raises `UnreadableDocument` for a file that is locked, damaged or has no text layer.
    """
    engine, used = _read(data, name, reader, pages)
    lines, surroundings, found = pages_read(engine.pages)
    if not lines and not surroundings and pages is None:
        raise UnreadableDocument(name, "it has no text layer (a scan of images)", "run OCR first")
    type_ = type_of(lines)
    tables = joined_tables(found)
    blocks = classified(marked(blocks_of(lines, type_), tables), type_)
    title = title_of(engine.title, blocks)
    told = list(passages_of(blocks, [table.name for table in tables]))
    passages = (*(passage for _, passage in told), *_asides(surroundings))
    return Document(
        name=name,
        format="pdf",
        sha256=hashlib.sha256(data).hexdigest(),
        passages=passages,
        pages=engine.count,
        words=sum(len(passage.text.split()) for passage in passages if passage.kind != "aside"),
        title=title,
        reader=used,
        notes=(*_notes(data, engine, used, reader), *unread(tables, told)),
        tables=tables_of(tables, told),
    )


def pages_read(pages: list[Glyphs]) -> tuple[list[Line], list[Line], list[PageTable]]:
    """The lines of all pages outside tables in reading order, those that surround the text, and the tables."""
    turned = [upright(glyphs) for glyphs in pages]
    words = [words_of(level) for _, level in turned]
    masks = furniture(words)
    chosen = [np.flatnonzero(~mask) for mask in masks]
    own = [
        gutters_of(page, mine) or ruled_gutters(page, mine) for page, mine in zip(words, chosen, strict=True)
    ]
    agreed = agreed_gutters(own)
    lines: list[Line] = []
    surroundings: list[Line] = []
    tables: list[PageTable] = []
    for glyphs, (shown, level), page, mask, mine, gutters in zip(
        pages, turned, words, masks, chosen, own, strict=True
    ):
        arrangement = arranged(page, mine, gutters, agreed).with_surroundings(mask, level.width)
        found, around, own_tables = _page(shown, page, mask, arrangement)
        lines += found
        surroundings += around
        tables += own_tables
        for turn, part in enumerate(sideways(glyphs), start=1):
            found, own_tables = _sideways(part, turn)
            lines += found
            tables += own_tables
    return lines, surroundings, tables


def _page(
    shown: Glyphs, words: Words, mask: NDArray[np.bool_], arrangement: Arrangement
) -> tuple[list[Line], list[Line], list[PageTable]]:
    """The lines of one page outside tables, those that surround the text, and the tables."""
    host = hosts_of(words, arrangement)
    lines = lines_of(shown, words, arrangement, host)
    tables, changed = page_tables(shown.page, words, mask, host, arrangement, lines)
    if tables:
        lines = with_cells(tables, lines_of(shown, words, changed, host))
    around = [line for line in lines if line.region == changed.around]
    return [line for line in lines if line.region != changed.around], around, tables


def _sideways(part: tuple[Glyphs, Glyphs], turn: int) -> tuple[list[Line], list[PageTable]]:
    """A table that is set sideways on a page, with its caption and notes; other such text is left out."""
    shown, level = part
    words = words_of(level)
    mask = np.zeros(len(words), dtype=bool)
    arrangement = arranged(words, np.flatnonzero(~mask), [], []).with_surroundings(mask, level.width)
    lines, _, tables = _page(shown, words, mask, arrangement)
    if not captions_of(lines):
        return [], []
    # Regions are numbered anew here: they must not be taken for those of the page's other text.
    shift = turn * _REGIONS
    for table in tables:
        table.parts = {region + shift: what for region, what in table.parts.items()}
    return [replace(line, region=line.region + shift) for line in lines], tables


def _read(
    data: bytes, name: str, reader: Literal["auto", "pdfium", "pdfminer"], pages: Collection[int] | None
) -> tuple[Engine, str]:
    attempts = [reader] if reader != "auto" else ["pdfium", "pdfminer"]
    for content in (data, None):
        if content is None and (content := mended(data)) is None:
            break
        for used in attempts:
            try:
                engine = _engine(used)(content, pages)
            except Unopened as error:
                if error.locked:
                    raise _locked(name) from None
                continue
            if engine.count:
                return engine, used
    raise UnreadableDocument(name, "the PDF is damaged or was cut off", "download or export it again")


def _engine(reader: str) -> Callable[[bytes, Collection[int] | None], Engine]:
    if reader == "pdfium":
        return pdfium.read
    # Most files never need the second engine, and importing it takes a tenth of a second.
    from recheck.documents.pdf import miner

    return miner.read


def _locked(name: str) -> UnreadableDocument:
    return UnreadableDocument(name, "the PDF is encrypted and needs a password", "save a copy without one")


def _asides(lines: list[Line]) -> list[Passage]:
    found = []
    for line in lines:
        text, marks, layout = put_together([line])
        found.append(Passage(text=text, kind="aside", marks=marks, layout=layout))
    return found


def _notes(data: bytes, engine: Engine, used: str, asked: str) -> tuple[str, ...]:
    notes = []
    if used == "pdfminer" and asked == "auto":
        notes.append("The first PDF reader could not open the file; it was read by pdfminer.six.")
    if b"%%EOF" not in data[-2048:]:
        notes.append("The file seems to be cut off at its end; what could be read was read.")
    if engine.failed:
        notes.append(f"Damaged and not read: page {_listed(engine.failed)}.")
    empty = [glyphs.page for glyphs in engine.pages if not len(glyphs) and glyphs.page not in engine.failed]
    if empty:
        lost = "Lost or without" if b"%%EOF" not in data[-2048:] else "Without"
        notes.append(f"{lost} a text layer, so not read: page {_listed(empty)}.")
    return tuple(notes)


def _listed(numbers: Collection[int]) -> str:
    return ", ".join(str(number) for number in numbers)
