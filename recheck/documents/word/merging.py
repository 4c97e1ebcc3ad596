"""Tables of Word documents as rows of cells; frames that only look like tables are told apart."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace

from recheck.documents.grids import Spanned, depths
from recheck.documents.pieces import Grid, is_note_text
from recheck.documents.sections import captioned
from recheck.documents.word.inline import Paragraph
from recheck.documents.word.package import MC, Element, W
from recheck.documents.word.styles import PLAIN, VAL, is_on
from recheck.model import Passage

Block = Paragraph | Grid

_HOLDERS = frozenset(W + name for name in ("sdt", "sdtContent", "customXml", "ins", "moveTo"))
_LONG_CELL = 400
_LONGEST_STUB = 40
_TWO_POINTS = 40


@dataclass(frozen=True, slots=True, eq=False)
class WordCell:
    """A cell as Word lists it; `above` says that it goes on with the one above it."""

    blocks: tuple[Block, ...]
    column: int
    columns: int = 1
    rows: int = 1
    above: bool = False

    @property
    def paragraphs(self) -> list[Paragraph]:
        """What the cell prints, tables within it laid out in lines."""
        return [paragraph for block in self.blocks for paragraph in _flat(block)]


Row = list[WordCell]


def rows_of(table: Element, read: Callable[[Element], tuple[Block, ...]]) -> tuple[list[Row], int]:
    """Give the rows of a table with merged cells put together, and the number of rows of its head."""
    rows: list[Row] = []
    heads: list[bool] = []
    for element in _children(table, f"{W}tr"):
        properties = element.find(f"{W}trPr")
        if properties is not None and properties.find(f"{W}del") is not None:
            continue
        rows.append(_row(element, properties, read))
        heads.append(_is_head(properties))
    header_rows = next((at for at, head in enumerate(heads) if not head), len(heads))
    return _merged(rows), header_rows if header_rows < len(rows) else 0


def _children(element: Element, tag: str) -> Iterator[Element]:
    for child in element:
        if child.tag == tag:
            yield child
        elif child.tag in _HOLDERS:
            yield from _children(child, tag)
        elif child.tag == f"{MC}AlternateContent" and len(child):
            yield from _children(child[0], tag)


def _is_head(properties: Element | None) -> bool:
    if properties is None:
        return False
    look = properties.find(f"{W}cnfStyle")
    if look is not None and (look.get(f"{W}firstRow") == "1" or (look.get(VAL) or "").startswith("1")):
        return True
    return is_on(properties.find(f"{W}tblHeader"))


def _row(element: Element, properties: Element | None, read: Callable[[Element], tuple[Block, ...]]) -> Row:
    column = _number(properties, "gridBefore", 0)
    row: Row = [WordCell((), 0, column)] if column else []
    for cell in _children(element, f"{W}tc"):
        own = cell.find(f"{W}tcPr")
        width = _number(own, "gridSpan", 1)
        if own is not None and own.find(f"{W}cellDel") is not None:
            continue
        beside = None if own is None else own.find(f"{W}hMerge")
        if beside is not None and beside.get(VAL) != "restart" and row:
            row[-1] = replace(row[-1], columns=row[-1].columns + width)
        else:
            merge = None if own is None else own.find(f"{W}vMerge")
            above = merge is not None and merge.get(VAL) != "restart"
            row.append(WordCell(read(cell), column, width, above=above))
        column += width
    return row


def _number(properties: Element | None, name: str, default: int) -> int:
    found = None if properties is None else properties.find(W + name)
    try:
        return default if found is None else min(max(int(found.get(VAL) or default), default), 1000)
    except ValueError:
        return default


def _merged(rows: list[Row]) -> list[Row]:
    """Let a cell reach down over those that go on with it."""
    open_: dict[tuple[int, int], tuple[int, int]] = {}
    found: list[Row] = []
    for row in rows:
        kept: Row = []
        now: dict[tuple[int, int], tuple[int, int]] = {}
        for cell in row:
            key = (cell.column, cell.columns)
            start = open_.get(key) if cell.above else None
            if start is None:
                now[key] = (len(found), len(kept))
                kept.append(cell)
                continue
            now[key] = start
            first = found[start[0]][start[1]]
            found[start[0]][start[1]] = replace(first, rows=first.rows + 1)
        found.append(kept)
        open_ = now
    return found


def framed(rows: list[Row]) -> bool:
    """Tell whether a table is only a frame: one row, one column, around other tables, or for columns of prose."""
    if len(rows) < 2 or max(len(row) for row in rows) < 2:
        return True
    total = inner = long = 0
    for cell in (cell for row in rows for cell in row):
        for block in cell.blocks:
            size = sum(len(paragraph.text) for paragraph in _flat(block))
            total += size
            inner += size * isinstance(block, Grid)
            long += size * (size > _LONG_CELL)
    return 2 * inner > total or 2 * long > total


def grid_of(rows: list[Row], header_rows: int) -> Iterator[Block]:
    """Yield the grid, with a caption or notes that stand in rows of their own before and after it."""
    width = max(cell.column + cell.columns for row in rows for cell in row)
    first, last = 0, len(rows)
    while first < last - 1 and _is_whole(rows[first], width) and _captioned(rows[first]):
        yield from rows[first][0].blocks
        first += 1
    notes: list[Block] = []
    while last > first + 1 and _noted(rows[last - 1], width):
        last -= 1
        notes[:0] = [replace(paragraph, note=True) for paragraph in rows[last][0].paragraphs]
    yield _grid(rows[first:last], max(header_rows - first, 0))
    yield from notes


def _is_whole(row: Row, width: int) -> bool:
    """Whether nothing but one cell over the whole width prints anything."""
    return _is_alone(row) and row[0].columns == width > 1


def _is_alone(row: Row) -> bool:
    return bool(row) and [cell for cell in row if cell.blocks] == row[:1]


def _captioned(row: Row) -> bool:
    return captioned(row[0].paragraphs[0].text, sure=True) == "table"


def _noted(row: Row, width: int) -> bool:
    """Whether a row is a note: it reads like one, over the whole width or in its first cell and too long for a stub."""
    if not _is_alone(row):
        return False
    first = row[0].paragraphs[0]
    whole = row[0].columns == width > 1 or len(first.text) > _LONGEST_STUB
    return whole and is_note_text(first.text, first.marks)


def _grid(rows: Sequence[Row], header_rows: int) -> Grid:
    stubs = (row[0] for row in rows if row and row[0].column == 0 and row[0].blocks)
    known = depths(map(_indent, stubs), step=_TWO_POINTS)
    spanned: list[tuple[Spanned, ...]] = []
    for at, row in enumerate(rows):
        cells: list[Spanned] = []
        for cell in row:
            depth = known.get(_indent(cell), 0) if cell.column == 0 else 0
            cells.append(Spanned(_passage(cell), cell.rows, cell.columns, at < header_rows, depth))
        spanned.append(tuple(cells))
    return Grid(tuple(spanned), header_rows)


def _indent(cell: WordCell) -> int:
    return cell.paragraphs[0].indent if cell.paragraphs else 0


def _passage(cell: WordCell) -> Passage:
    paragraphs = cell.paragraphs
    text = "\n".join(paragraph.text for paragraph in paragraphs)
    marks = ""
    if any(paragraph.marks for paragraph in paragraphs):
        marks = " ".join(paragraph.marks or " " * len(paragraph.text) for paragraph in paragraphs)
    return Passage(text, "table", marks=marks)


def _flat(block: Block) -> Iterator[Paragraph]:
    if not isinstance(block, Grid):
        yield block
        return
    for row in block.rows:
        text = " ".join(cell.passage.text for cell in row if cell.passage.text)
        if text:
            yield Paragraph(text, "", PLAIN)
