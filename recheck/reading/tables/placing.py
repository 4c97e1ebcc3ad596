"""The claims of a document's tables, put among those of its text in reading order."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import replace

from recheck.model import Document, Table
from recheck.reading.context import Setting
from recheck.reading.glyphs import Repairs, cell_doubted, cell_repaired
from recheck.reading.notes import TOO_LONG
from recheck.reading.placed import Placed
from recheck.reading.tables.frame import Found
from recheck.reading.tables.reading import TableReading, read_table
from recheck.reading.tables.results import ReadText
from recheck.reading.tables.unfolding import unfolded


def with_tables(
    placed: Sequence[Placed], document: Document, kinds: Sequence[str], setting: Setting, repairs: Repairs, left: Counter[str],
    read_text: ReadText,
) -> tuple[list[Placed], tuple[str, ...]]:  # fmt: skip
    """All claims in reading order, and a note for each table with numbers that nothing names.

    `kinds` are those of the passages that are read; a table stands behind as many of them as come before it.
    """
    found: list[tuple[int, int, Placed]] = [(item.passage, 0, item) for item in placed]
    notes: list[str] = []
    unnamed: Counter[str] = Counter()
    for number, table in enumerate(document.tables):
        before = sum(passage.kind in kinds for passage in document.passages[: table.before])
        try:
            table = unfolded(table)
            mended = _repaired(table, repairs)
            read = read_table(mended, setting, read_text)
        except TimeoutError:
            left[TOO_LONG] += 1
            continue
        texts = _changed(table, mended)
        found += [(before, -1, _placed(item, number, repairs, texts)) for item in read.found]
        notes += _note(table, read)
        unnamed[table.label] += read.unnamed
    found.sort(key=lambda entry: entry[:2])
    return [item for _, _, item in found], (*notes, *_unnamed(+unnamed))


_Texts = dict[tuple[int, int], tuple[str, str]]


def _placed(item: Found, number: int, repairs: Repairs, texts: _Texts) -> Placed:
    """A claim of a cell; its passage is none of the text's."""
    claim = item.claim
    if repairs.table or repairs.minus_is_digit:
        claim = cell_doubted(claim, repairs, [texts[cell] for cell in item.cells if cell in texts])
    return Placed(claim, -1 - number, item.row, 0, 0, claim.place.quote)


def _changed(table: Table, mended: Table) -> _Texts:
    """The cells whose signs were put right: their texts before and after."""
    if mended is table:
        return {}
    pairs = zip(table.cells, mended.cells, strict=True)
    return {(old.row, old.column): (old.text, new.text) for old, new in pairs if old.text != new.text}


def _repaired(table: Table, repairs: Repairs) -> Table:
    """The table with the signs of a wrong code table put right in its cells too."""
    if not repairs.table:
        return table
    return replace(
        table,
        cells=tuple(replace(cell, passage=cell_repaired(cell.passage, repairs)) for cell in table.cells),
    )


def _note(table: Table, read: TableReading) -> Iterator[str]:
    if read.too_large:
        yield f"{table.label or 'A table without a label'} is too large to be read ({table.rows} rows, {table.columns} columns)."


def _unnamed(numbers: Counter[str]) -> Iterator[str]:
    """One note on all numbers that nothing names, by table."""
    tables = [label or "tables without a label" for label in numbers]
    if len(tables) == 1:
        where, (number,) = tables[0], numbers.values()
        yield (
            f"1 number in {where} has no heading that says what it is."
            if number == 1
            else f"{number} numbers in {where} have no heading that says what they are."
        )
    elif tables:
        parts = [f"{where} ({number})" for where, number in zip(tables, numbers.values(), strict=True)]
        yield (
            f"{numbers.total()} numbers have no heading that says what they are: "
            f"in {', '.join(parts[:-1])} and {parts[-1]}."
        )
