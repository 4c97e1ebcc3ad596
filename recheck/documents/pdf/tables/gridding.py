"""An area of a page made into a grid: head, rows, and the words of each cell."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import pairwise

import numpy as np
import regex
from numpy.typing import NDArray

from recheck.documents.pdf.rules import Rules, side_by_side
from recheck.documents.pdf.tables.areas import Area
from recheck.documents.pdf.tables.body_lines import Line, line_of
from recheck.documents.pdf.tables.edges import NARROWEST, Columns, columns_of
from recheck.documents.pdf.tables.heads import Headed, headed
from recheck.documents.pdf.tables.notes import starts_note
from recheck.documents.pdf.tables.rows import JOINED, rows_joined
from recheck.documents.pdf.tables.text_rows import Ground, Row, is_numeric

NARROW = "two columns stand so close that they may be one"
TWO_NUMBERS = "two numbers stand in one cell"
ACROSS = "a number stands across the space between two columns"

_PLAIN_NUMBER = regex.compile(r"[<>=≤≥]?\s*[-+−–]?\p{Nd}*[.,·]?\p{Nd}+%?(?:\*+)?")
_YEAR = regex.compile(r"(?:19|20)\d\d(?:[–-]\d{2,4})?")


@dataclass(slots=True, eq=False)
class Slot:
    """A cell before it is text: its words line by line."""

    row: int
    column: int
    lines: list[list[int]]
    span: int = 1
    heading: bool = False
    indent: int = 0


@dataclass(slots=True, eq=False)
class Grid:
    """The cells of one area, and what is doubtful about them."""

    slots: list[Slot]
    rows: int
    columns: int
    header_rows: int
    edges: tuple[NDArray[np.float64], NDArray[np.float64]]
    doubts: list[str] = field(default_factory=list)


def grid_of(area: Area, ground: Ground, rules: Rules) -> Grid | None:
    """Put the words of an area into rows and columns; None where they make no grid."""
    rows = area.rows(ground)
    rows = _without_notes(rows, area, ground)
    if len(rows) < 2:
        return None
    inner = _inner_rules(area, rules)
    count = _ruled_head(rows, inner.full)
    columns = columns_of(_body_of(rows, count), inner.upright)
    if columns is not None and not count:
        count = _head_count(rows, columns)
        columns = columns_of(_body_of(rows, count), inner.upright)
    if columns is None or count >= len(rows):
        return None
    columns = _with_empty_columns(columns, rows[:count])
    head = headed(rows[:count], columns, inner.partial)
    return _put_together(rows[count:], head, columns, inner)


@dataclass(frozen=True, slots=True, eq=False)
class _Inner:
    """The rules inside an area: heights of those across it, partial ones, places between columns, band edges."""

    full: list[float]
    partial: list[tuple[float, float, float]]
    upright: list[float]
    bands: list[float]


def _inner_rules(area: Area, rules: Rules) -> _Inner:
    width, height = area.right - area.left, area.bottom - area.top
    level = rules.level[(rules.level[:, 2] > area.top - 2) & (rules.level[:, 2] < area.bottom + 2)]
    level = level[(level[:, 0] < area.right) & (level[:, 1] > area.left)]
    full: set[float] = set()
    partial: list[tuple[float, float, float]] = []
    for left, right, at in level.tolist():
        # A rule under all headers but that of the labels is no rule under the head.
        if (
            left < area.left + max(8, 0.04 * width)
            and min(right, area.right) - max(left, area.left) > 0.85 * width
        ):
            full.add(at)
        elif right - left > 6:
            partial.append((left, right, at))
    upright = [
        at for at, top, bottom in rules.upright.tolist()
        if area.left + 2 < at < area.right - 2 and min(bottom, area.bottom) - max(top, area.top) > 0.5 * height
    ]  # fmt: skip
    bands = side_by_side(rules.bands)
    wide = (bands[:, 2] - bands[:, 0] > 0.5 * width) & (bands[:, 3] - bands[:, 1] < 0.5 * height)
    wide &= (bands[:, 1] > area.top - 4) & (bands[:, 3] < area.bottom + 4)
    edges = sorted({round(float(y), 1) for band in bands[wide] for y in (band[1], band[3])})
    return _Inner(sorted(full), partial, sorted(upright), edges)


def _without_notes(rows: list[Row], area: Area, ground: Ground) -> list[Row]:
    """The rows up to a note that stands inside the last rule; the area is cut there too."""
    for at in range(len(rows) - 1, 0, -1):
        row = rows[at]
        if len(row.chunks(1.2)) == 1 and starts_note(row, ground) and not is_numeric(row.text):
            rest = rows[at:]
            if all(len(other.chunks(1.2)) == 1 for other in rest) and row.left < area.left + 30:
                area.bottom = rows[at - 1].base + 0.3 * rows[at - 1].size
                rows = rows[:at]
    return rows


def _ruled_head(rows: Sequence[Row], full: Sequence[float]) -> int:
    """How many rows stand over the rule under the head; 0 where rules do not tell."""
    between = [sum(row.base <= at for row in rows) for at in full]
    cuts = sorted({count for count in between if 0 < count < len(rows)})
    if not cuts or cuts[0] > 8 or (len(cuts) > 0.6 * len(rows) and len(rows) > 4):
        return 0
    first = cuts[0]
    if first == 1 and len(cuts) > 1 and len(rows[0].chunks(0.9)) == 1 and len(rows) > 3:
        # A title inside the top rule: the head goes on to the next one.
        return cuts[1] if cuts[1] <= 5 else first
    return first


def _body_of(rows: Sequence[Row], head: int) -> list[Row]:
    """The rows that show the columns: those with several cells, after the head."""
    body = [row for row in rows[head:] if len(row.chunks(NARROWEST)) >= 2]
    edge = min((row.left - NARROWEST * row.size for row in body), default=0.0)
    # Where numbers are set lower than their labels, the labels stand on lines of their own.
    labels = [row for row in rows[head:] if row.right < edge]
    numbers = [row for row in body if _share(row) >= 0.5]
    if head:
        chosen = numbers if 3 * len(numbers) >= len(body) and len(numbers) > 1 else body
        return [*labels, *(chosen or body)]
    return [*labels, *(numbers if len(numbers) >= 2 else body)]


def _share(row: Row) -> float:
    """The share of numbers among the cells of a row, its label left out."""
    chunks = row.chunks(NARROWEST)
    rest = chunks[1:] if not chunks[0].numeric else chunks
    return sum(chunk.numeric for chunk in rest) / max(len(rest), 1)


def _head_count(rows: Sequence[Row], columns: Columns) -> int:
    """How many rows at the top are the head, where no rule tells: those over the first row of numbers."""
    lines = [line_of(row, columns) for row in rows]
    if _is_data(lines[0]) and not _counts_up(lines[0]):
        return 0
    first = next(
        (
            at
            for at in range(1, len(lines))
            if _is_data(lines[at])
            or _is_set_lower(lines[at - 1], lines[at])
            or (at + 1 < len(lines) and _is_set_higher(lines[at], lines[at + 1]))
        ),
        1,
    )
    while first > 1 and set(lines[first - 1].cells) <= {0}:
        first -= 1
    return min(first, 8)


def _is_data(line: Line) -> bool:
    rest = {at for at in line.cells if at}
    return (
        bool(line.label)
        and bool(line.numbers)
        and 2 * len(line.numbers) >= len(rest)
        and not is_numeric(line.label)
    )


def _is_set_lower(before: Line, line: Line) -> bool:
    """Whether a line holds the numbers of a label of two lines, set in the middle of them."""
    return set(before.cells) == {0} and not line.label and len(line.numbers) == len(line.cells)


def _is_set_higher(line: Line, after: Line) -> bool:
    """Whether a line holds the numbers of the label below it, that an index has moved down a little."""
    close = after.row.base - line.row.base < 0.5 * line.row.size
    return close and set(after.cells) == {0} and not line.label and len(line.numbers) == len(line.cells)


def _counts_up(line: Line) -> bool:
    """Whether the numbers of a line are names of columns: years, 1 2 3 …, (1) (2) …"""
    texts = [line.cells[at].strip("().") for at in sorted(line.numbers)]
    if all(_YEAR.fullmatch(text) for text in texts):
        return True
    return len(texts) > 1 and texts == [
        str(int(texts[0]) + at) if texts[0].isdigit() else "" for at in range(len(texts))
    ]


def _with_empty_columns(columns: Columns, head: Sequence[Row]) -> Columns:
    """Add the columns that have a header and no cell: the last one of a triangle of correlations."""
    if not head:
        return columns
    row = head[-1]
    chunks = row.chunks(0.8)
    cuts, lefts, rights = columns.cuts.tolist(), columns.lefts.tolist(), columns.rights.tolist()
    for at, chunk in enumerate(chunks):
        room = 0.4 * row.size
        if any(chunk.x0 < b + room and chunk.x1 > a - room for a, b in zip(lefts, rights, strict=True)):
            continue
        place = int(np.searchsorted(lefts, chunk.x0))
        sides = [place - 1, place]
        owned = [
            not 0 <= side < len(lefts)
            or any(
                other is not chunk and other.x0 < rights[side] + room and other.x1 > lefts[side] - room
                for other in chunks
            )
            for side in sides
        ]
        if not all(owned) or (place == 0 and at == 0):
            continue
        lefts.insert(place, chunk.x0)
        rights.insert(place, chunk.x1)
        cuts = [(rights[i] + lefts[i + 1]) / 2 for i in range(len(lefts) - 1)]
    if len(lefts) == len(columns):
        return columns
    return Columns(np.array(cuts), np.array(lefts), np.array(rights), columns.crossing, columns.narrow)


def _put_together(body: Sequence[Row], head: Headed, columns: Columns, inner: _Inner) -> Grid | None:
    lines = [line_of(row, columns) for row in body]
    joined, guessed = rows_joined(lines, [*inner.full, *inner.bands])
    count = len(head.levels)
    slots = [
        Slot(at, one.column, one.lines, one.span, heading=True)
        for at, level in enumerate(head.levels) for one in level.heads
    ]  # fmt: skip
    doubts = list(dict.fromkeys(head.doubts))
    if guessed:
        doubts.append(JOINED)
    if columns.narrow:
        doubts.append(NARROW)
    for at, members in enumerate(joined):
        cells, said = _cells([body[i] for i in members], count + at, columns)
        slots += cells
        doubts += [doubt for doubt in said if doubt not in doubts]
    _indent(slots, body, joined, count, columns)
    return Grid(slots, count + len(joined), len(columns), count, (columns.lefts, columns.rights), doubts)


def _cells(rows: Sequence[Row], at: int, columns: Columns) -> tuple[list[Slot], list[str]]:
    """The cells of one row of the table from its lines."""
    found: dict[int, Slot] = {}
    doubts: list[str] = []
    for row in rows:
        place = columns.of(row)
        span = dict.fromkeys(place, 1)
        chunks = row.chunks(NARROWEST)
        if (
            len(rows) == 1
            and len(chunks) == 1
            and place[0] > 0
            and not chunks[0].numeric
            and _is_label(row.text)
        ):
            # A sub-heading set in the middle of the table.
            return [Slot(at, 0, [row.words], len(columns))], doubts
        for chunk in chunks:
            inside = place[chunk.first : chunk.after]
            first, last = min(inside), max(inside)
            if first == last:
                continue
            if not chunk.numeric and _is_label(chunk.text):
                others = {*place[: chunk.first], *place[chunk.after :]}
                place[chunk.first : chunk.after] = [first] * len(inside)
                span[first] = last - first + 1 if others.isdisjoint(range(first, last + 1)) else 1
            elif any(is_numeric(text) for text in row.texts[chunk.first : chunk.after]) and not _cut_between(
                row, chunk.first, chunk.after, columns
            ):
                doubts.append(ACROSS)
        for column in sorted(set(place)):
            mine = [i for i, other in enumerate(place) if other == column]
            slot = found.setdefault(column, Slot(at, column, []))
            slot.lines.append([row.words[i] for i in mine])
            slot.span = max(slot.span, span.get(column, 1))
            if column and _two_numbers(row, mine):
                doubts.append(TWO_NUMBERS)
    _clear_spans(found)
    return [found[column] for column in sorted(found)], doubts


def _clear_spans(found: dict[int, Slot]) -> None:
    for column, slot in found.items():
        after = [other for other in found if other > column]
        if after:
            slot.span = max(1, min(slot.span, min(after) - column))


def _is_label(text: str) -> bool:
    letters = sum(c.isalpha() for c in text)
    return letters > sum(c.isdigit() for c in text)


def _cut_between(row: Row, first: int, after: int, columns: Columns) -> bool:
    """Whether each cut that a run of words spans lies between two of them."""
    for cut in columns.cuts.tolist():
        if any(row.x0[i] < cut - 0.5 and row.x1[i] > cut + 0.5 for i in row.own if first <= i < after):
            return False
    return True


def _two_numbers(row: Row, mine: Sequence[int]) -> bool:
    """Whether two numbers stand in a cell with a space between them and nothing that makes them one."""
    for one, two in pairwise(mine):
        if two != one + 1 or row.x0[two] - row.x1[one] < 0.34 * row.size:
            continue
        if _PLAIN_NUMBER.fullmatch(row.texts[one]) and _PLAIN_NUMBER.fullmatch(row.texts[two]):
            return True
    return False


def _indent(
    slots: list[Slot], body: Sequence[Row], joined: list[list[int]], count: int, columns: Columns
) -> None:
    """Say how far the labels of rows are moved in, unless they are centred."""
    starts: dict[int, tuple[float, float]] = {}
    for at, members in enumerate(joined):
        row = body[members[0]]
        mine = [i for i, column in enumerate(columns.of(row)) if column == 0]
        if mine:
            starts[count + at] = row.x0[mine[0]], max(row.x1[i] for i in mine)
    if len(starts) < 2:
        return
    edges = np.array(list(starts.values()))
    size = float(np.median([row.size for row in body]))
    if (
        np.std(edges.mean(axis=1)) < 0.3 * size < 0.6 * np.std(edges[:, 0])
        or np.std(edges[:, 1]) < 0.3 * size
    ):
        return
    levels: list[float] = []
    for x in sorted(edges[:, 0].tolist()):
        if not levels or x - levels[-1] > 0.45 * size:
            levels.append(x)
    for slot in slots:
        if slot.column == 0 and slot.row in starts:
            slot.indent = int(np.searchsorted(levels, starts[slot.row][0] + 0.1)) - 1
