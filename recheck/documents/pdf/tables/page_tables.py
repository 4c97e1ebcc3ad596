"""The tables of one page: found, made into grids, and set apart from the text around them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from recheck.documents.pdf.columns import Arrangement
from recheck.documents.pdf.joining import put_together
from recheck.documents.pdf.lines import Line
from recheck.documents.pdf.rules import rules_of
from recheck.documents.pdf.tables.areas import Area, Finder
from recheck.documents.pdf.tables.captions import captions_of
from recheck.documents.pdf.tables.gridding import Grid, Slot, grid_of
from recheck.documents.pdf.tables.notes import note_rows
from recheck.documents.pdf.tables.text_rows import Ground, words_in
from recheck.documents.pdf.words import Words
from recheck.model import Cell, Layout, Passage

CAPTION, NOTE = 1, 2


@dataclass(slots=True, eq=False)
class PageTable:
    """A table of one page.

    `parts` are the regions of its caption and its notes, with what each is; `owners` those of the lines
    of its cells, with the cell of each.
    """

    page: int
    label: str
    continued: bool
    cells: list[Cell]
    rows: int
    columns: int
    header_rows: int
    doubts: list[str]
    edges: tuple[NDArray[np.float64], NDArray[np.float64]]
    top: float
    bottom: float
    height: float
    captioned: bool
    slots: list[Slot]
    parts: dict[int, int] = field(default_factory=dict)
    owners: dict[int, Slot] = field(default_factory=dict)


def page_tables(
    page: int, words: Words, mask: NDArray[np.bool_], host: NDArray[np.intp], arrangement: Arrangement,
    lines: Sequence[Line],
) -> tuple[list[PageTable], Arrangement]:  # fmt: skip
    """The tables of a page and the arrangement of what is left: their words taken out, captions and notes apart.

    `host` tells for each word the one that it is an index of, or itself.
    """
    captions = captions_of(lines)
    drawn = words.glyphs.drawn
    if not captions and not len(drawn):
        return [], arrangement
    rules = rules_of(drawn)
    if not captions and not len(rules.level):
        return [], arrangement
    ground = Ground(words, np.flatnonzero(~mask), host)
    found: list[tuple[Area, Grid]] = []
    for area in Finder(ground, rules, captions, lines).areas():
        grid = grid_of(area, ground, rules)
        if grid is not None and _is_table(area, grid, words):
            found.append((area, grid))
    if not found:
        return [], arrangement
    found.sort(key=lambda pair: (pair[0].top, pair[0].left))
    return _set_apart(page, ground, arrangement, found, lines)


def _is_table(area: Area, grid: Grid, words: Words) -> bool:
    """Whether a grid is a table: with a caption, or with numbers under headers."""
    if area.caption is not None:
        return True
    body = [slot for slot in grid.slots if slot.row >= grid.header_rows and slot.column > 0]
    digits = sum(
        any(48 <= int(c) <= 57 for line in slot.lines for w in line for c in words.codes(int(w)))
        for slot in body
    )
    return len(body) >= 4 and digits >= 0.5 * len(body) and grid.rows - grid.header_rows >= 2


def _set_apart(
    page: int,
    ground: Ground,
    arrangement: Arrangement,
    found: list[tuple[Area, Grid]],
    lines: Sequence[Line],
) -> tuple[list[PageTable], Arrangement]:
    """Give captions and notes regions of their own, in their place in reading order."""
    regions = _Regions(arrangement, ground.words)
    tables = []
    areas = [area for area, _ in found]
    for number, (area, grid) in enumerate(found):
        inside = words_in(area.rows(ground))
        table = _table(page, ground.words, area, grid)
        regions.key[inside] = -1
        for slot in grid.slots:
            for line in slot.lines:
                table.owners[regions.put_cell(line, area)] = slot
        title = _title_words(area, ground, arrangement.regions, inside)
        notes = _note_words(area, ground, areas, lines)
        anchor = regions.anchor(title if len(title) else notes)
        if anchor is not None:
            start = area.title[0] if area.title and area.title[0] < area.top else area.top
            regions.cut(anchor, number, start)
            for chosen, what in ((title, CAPTION), (notes, NOTE)):
                if len(chosen):
                    table.parts[regions.put(anchor, number, what, chosen)] = what
        tables.append(table)
    changed, places = regions.finished()
    for table in tables:
        table.parts = {places[key]: what for key, what in table.parts.items() if key in places}
        table.owners = {places[key]: slot for key, slot in table.owners.items() if key in places}
    return tables, changed


def _table(page: int, words: Words, area: Area, grid: Grid) -> PageTable:
    caption = area.caption
    return PageTable(
        page, caption.label if caption else "", caption is not None and caption.continued,
        [], grid.rows, grid.columns, grid.header_rows, grid.doubts, grid.edges,
        area.top, area.bottom, words.glyphs.height, caption is not None, grid.slots,
    )  # fmt: skip


class _Regions:
    """The regions of a page while some are parted: each has a key by which it is put in order."""

    _STEP, _TABLE, _AFTER, _CELLS = 1000, 10, 5, 10**12

    def __init__(self, arrangement: Arrangement, words: Words) -> None:
        self._old, self._words = arrangement, words
        self.key: NDArray[np.int64] = np.where(arrangement.regions < 0, -1, arrangement.regions * self._STEP)
        self._bounds = {at * self._STEP: bounds for at, bounds in enumerate(arrangement.bounds)}

    def anchor(self, chosen: NDArray[np.intp]) -> int | None:
        """The region in which most of some words stand."""
        regions = self._old.regions[chosen]
        regions = regions[(regions >= 0) & (regions != self._old.around)]
        return int(np.bincount(regions).argmax()) if len(regions) else None

    def cut(self, region: int, number: int, start: float) -> None:
        """Let what stands below a height come after the table of that number."""
        below = (
            (self._old.regions == region)
            & (self.key >= 0)
            & (self.key < self._CELLS)
            & (self._words.base > start)
        )
        below &= (self.key % self._TABLE == 0) | (self.key % self._TABLE == self._AFTER)
        key = region * self._STEP + self._TABLE * (number + 1) + self._AFTER
        self.key[below] = key
        self._bounds[key] = self._old.bounds[region]

    def put(self, region: int, number: int, what: int, chosen: NDArray[np.intp]) -> int:
        """Make some words a region of their own that stands with the table of that number; gives its key."""
        key = region * self._STEP + self._TABLE * (number + 1) + what
        self.key[chosen] = key
        left, right = float(self._words.x0[chosen].min()), float(self._words.x1[chosen].max())
        if what == CAPTION:
            left, right = min(left, self._old.bounds[region][0]), max(right, self._old.bounds[region][1])
        self._bounds[key] = (left, right)
        return key

    def put_cell(self, line: list[int], area: Area) -> int:
        """Make the words of one line of a cell a region of their own, after all text; gives its key."""
        key = self._CELLS + len(self._bounds)
        self.key[line] = key
        self._bounds[key] = (area.left, area.right)
        return key

    def finished(self) -> tuple[Arrangement, dict[int, int]]:
        """The arrangement with its regions numbered anew, and the number of each key."""
        around = self._old.around * self._STEP
        every = [key for key in np.unique(self.key).tolist() if key >= 0 and key != around]
        keys, cells = (
            [key for key in every if key < self._CELLS],
            [key for key in every if key >= self._CELLS],
        )
        places = {key: at for at, key in enumerate([*keys, around, *cells])}
        regions = np.array([places.get(key, -1) for key in self.key.tolist()], np.intp)
        bounds = tuple(self._bounds[key] for key in (*keys, around, *cells))
        columns = (*(self._old.columns[key // self._STEP] for key in keys), *(0,) * (1 + len(cells)))
        return Arrangement(regions, bounds, columns, len(keys)), places


def _title_words(
    area: Area, ground: Ground, old: NDArray[np.intp], inside: NDArray[np.intp]
) -> NDArray[np.intp]:
    """The words of a caption: its column's words in the stretch of the title."""
    if area.caption is None or area.title is None:
        return np.zeros(0, np.intp)
    line = area.caption.line
    words, free = ground.words, ground.free
    base = words.base[ground.host[free]]
    chosen = free[(base > area.title[0]) & (base <= max(area.title[1], line.base + 1))]
    left, right = min(area.left, line.x0) - 3, max(area.right, _caption_end(ground, line)) + 3
    chosen = chosen[(words.x0[chosen] >= left) & (words.x1[chosen] <= right) & (old[chosen] >= 0)]
    own = old[chosen] == line.region
    spread = (words.x0[chosen] >= line.left - 3) & (words.x1[chosen] <= line.right + 3)
    return np.setdiff1d(chosen[own | spread], inside)


def _caption_end(ground: Ground, line: Line) -> float:
    """Where the first line of a caption ends: before the text of another column on the same base line."""
    for row in ground.rows(line.x0, line.x1, line.base - 1.5, line.base + 1.5):
        for chunk in row.chunks(1.2):
            if chunk.x1 > line.x0 + 1:
                return chunk.x1
    return line.x1


def _note_words(area: Area, ground: Ground, areas: Sequence[Area], lines: Sequence[Line]) -> NDArray[np.intp]:
    edges = (area.left, area.top, area.right, area.bottom)
    rows = note_rows(edges, area.rows(ground), ground, lines)
    below = [other.title[0] if other.title else other.top for other in areas if other.top > area.bottom]
    rows = [row for row in rows if row.base < min(below, default=1e9)]
    return words_in(rows)


def with_cells(tables: Sequence[PageTable], lines: Sequence[Line]) -> list[Line]:
    """Put the lines of cells into the tables of their page; gives the other lines."""
    owners = {region: (table, slot) for table in tables for region, slot in table.owners.items()}
    left: list[Line] = []
    parts: dict[int, list[Line]] = {}
    for line in lines:
        if line.region in owners:
            parts.setdefault(id(owners[line.region][1]), []).append(line)
        else:
            left.append(line)
    for table in tables:
        for slot in table.slots:
            if id(slot) in parts:
                text, marks, layout = _cell_text(parts[id(slot)])
                passage = Passage(text=text, kind="table", marks=marks, layout=layout)
                table.cells.append(
                    Cell(passage, slot.row, slot.column, 1, slot.span, slot.heading, slot.indent)
                )
    return left


def _cell_text(lines: list[Line]) -> tuple[str, str, Layout]:
    """The text of a cell: wrapped lines run on, values under one another stay on lines of their own."""
    if len(lines) == 1:
        return put_together(lines)
    groups: list[list[Line]] = []
    for line in lines:
        if groups and not _new_value(groups[-1], line):
            groups[-1].append(line)
        else:
            groups.append([line])
    texts: list[str] = []
    marks: list[str] = []
    pages: list[NDArray[np.int32]] = []
    boxes: list[NDArray[np.float32]] = []
    for group in groups:
        text, mark, layout = put_together(group)
        if texts:
            end = boxes[-1][-1:].copy()
            end[:, 0] = end[:, 2]
            boxes.append(end)
            pages.append(pages[-1][-1:])
        texts.append(text)
        marks.append(mark or " " * len(text))
        boxes.append(layout.boxes)
        pages.append(layout.pages)
    every = " ".join(marks)
    return (
        "\n".join(texts),
        every if every.strip() else "",
        Layout(np.concatenate(pages), np.concatenate(boxes)),
    )


def _new_value(group: list[Line], line: Line) -> bool:
    """Whether a line is another number, not the rest of the one before."""
    before = " ".join(one.text for one in group)
    open_ = before.count("(") > before.count(")") or before.count("[") > before.count("]")
    digits = any(c.isdigit() for c in before) and any(c.isdigit() for c in line.text)
    wordy = sum(c.isalpha() for c in before + line.text) > 3
    if line.text.lstrip().startswith(("(", "[")):
        return False
    return digits and not open_ and not wordy and before.rstrip()[-1:] not in ",;–-±"
