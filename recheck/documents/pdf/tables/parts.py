"""Tables of a document: those of its pages put together, with captions and notes from its passages."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from recheck.documents.pdf.blocks import Block
from recheck.documents.pdf.tables.page_tables import CAPTION, PageTable
from recheck.documents.sections import caption_label, captioned, unlabelled
from recheck.model import Cell, Passage, Table


@dataclass(slots=True, eq=False)
class Paged:
    """A table and the stretches of pages on which it stands."""

    name: str
    parts: list[PageTable]


def joined_tables(found: Sequence[PageTable]) -> list[Paged]:
    """Put stretches of one table on successive pages together; tables without a label are numbered."""
    tables: list[Paged] = []
    count = 0
    for part in found:
        last = tables[-1] if tables else None
        if last is not None and _goes_on(last.parts[-1], part):
            last.parts.append(part)
            continue
        if not part.label:
            count += 1
        tables.append(Paged(part.label or unlabelled(count), [part]))
    return tables


def _goes_on(before: PageTable, part: PageTable) -> bool:
    """Whether a stretch is the next page of the table before it, column for column."""
    if part.page != before.page + 1 or part.columns != before.columns:
        return False
    if part.captioned and not (part.label == before.label and (part.continued or _same_head(before, part))):
        return False
    if not part.captioned and (part.top > 0.25 * part.height or before.bottom < 0.6 * before.height):
        return False
    return _same_head(before, part) if part.header_rows else _same_columns(before, part)


def _same_head(before: PageTable, part: PageTable) -> bool:
    return before.header_rows == part.header_rows and _head(before) == _head(part)


def _head(part: PageTable) -> list[tuple[int, int, str]]:
    return [(c.row, c.column, c.text) for c in part.cells if c.row < part.header_rows]


def _same_columns(before: PageTable, part: PageTable) -> bool:
    middles = [(left + right) / 2 for left, right in (before.edges, part.edges)]
    return bool(np.abs(middles[0] - middles[1])[1:].max(initial=0.0) < 12)


def marked(blocks: list[Block], tables: Sequence[Paged]) -> list[Block]:
    """The blocks, those marked that are captions or notes of tables."""
    owner = {
        (part.page, region): (number, what)
        for number, table in enumerate(tables) for part in table.parts for region, what in part.parts.items()
    }  # fmt: skip
    found: list[Block] = []
    for block in blocks:
        key = block.lines[0].page, block.lines[0].region
        known = owner.get(key)
        if known is not None:
            block.table = known[0]
            block.kind = "caption" if known[1] == CAPTION else "note"
            last = found[-1].lines[-1] if found else None
            if last is not None and block.kind == "caption" and (last.page, last.region) == key:
                # Label and title on lines of their own are one caption.
                found[-1].take_in(block)
                continue
        found.append(block)
    return found


def tables_of(tables: Sequence[Paged], told: Sequence[tuple[Block, Passage]]) -> tuple[Table, ...]:
    """The tables with their captions and notes, which are passages of the document too."""
    return tuple(_table(number, paged, told) for number, paged in enumerate(tables))


def _table(number: int, paged: Paged, told: Sequence[tuple[Block, Passage]]) -> Table:
    mine = [(at, passage) for at, (block, passage) in enumerate(told) if block.table == number]
    captions = [passage for _, passage in mine if passage.kind == "caption"]
    first = paged.parts[0]
    before = mine[0][0] + bool(captions) if mine else _place(first, told)
    section = mine[0][1].section if mine else (told[before - 1][1].section if before else None)
    doubts = dict.fromkeys(doubt for part in paged.parts for doubt in part.doubts)
    cells = tuple(_all_cells(paged, section))
    return Table(
        cells, max((c.row + c.row_span for c in cells), default=0), first.columns, label=first.label,
        caption=captions[0] if captions else None,
        notes=tuple(passage for _, passage in mine if passage.kind == "note"),
        header_rows=first.header_rows, section=section, before=before, doubts=tuple(doubts),
    )  # fmt: skip


def _place(part: PageTable, told: Sequence[tuple[Block, Passage]]) -> int:
    """The number of passages before a table without caption and notes: those of earlier pages, and those above it."""
    before = 0
    for at, (block, _) in enumerate(told, start=1):
        line = block.lines[0]
        if line.page < part.page or (line.page == part.page and line.base < part.top):
            before = at
    return before


def _all_cells(paged: Paged, section: str | None) -> Iterator[Cell]:
    """The cells of all stretches under one another; a head that is printed again is left out."""
    rows = 0
    for number, part in enumerate(paged.parts):
        skipped = part.header_rows if number else 0
        for cell in part.cells:
            if cell.row >= skipped:
                held = cell.passage
                passage = Passage(
                    text=held.text, kind="table", section=section, marks=held.marks, layout=held.layout, table=paged.name
                )  # fmt: skip
                row = cell.row + rows - skipped
                yield Cell(
                    passage, row, cell.column, cell.row_span, cell.column_span, cell.heading, cell.indent
                )
        rows += part.rows - skipped


def unread(tables: Sequence[Paged], told: Iterable[tuple[Block, Passage]]) -> Iterator[str]:
    """Say which tables were left out: their captions are there, their rows and columns are not.

    On a page with a table without a caption the caption may belong to that one.
    """
    unlabelled = {part.page for table in tables for part in table.parts if not table.parts[0].label}
    for block, passage in told:
        page = block.lines[0].page
        if block.table is not None or block.kind != "caption" or page in unlabelled:
            continue
        if captioned(passage.text, sure=True) == "table":
            name = caption_label(passage.text)
            yield f"{name} on page {page} could not be put into rows and columns; it was left out."
