"""The head of a table: which columns each header stands over, and what is one header in two lines."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import accumulate

import numpy as np
import regex

from recheck.documents.pdf.tables.edges import Columns
from recheck.documents.pdf.tables.text_rows import Row

_PARTED = 0.45
_FAR = 1.1
_LOOSE = 1.5
"""Lines of one header follow one another more closely, in em."""

_CLOSE = 0.3
"""Word spaces are narrower in type that is not justified; headers of neighbours may come as close as that."""


@dataclass(slots=True, eq=False)
class Head:
    """A header: first column, number of columns, its words line by line."""

    column: int
    span: int
    lines: list[list[int]]
    x0: float
    x1: float
    text: str


@dataclass(slots=True, eq=False)
class Level:
    """Headers side by side, from left to right."""

    heads: list[Head]
    base: float = 0.0

    def at(self, column: int) -> Head | None:
        """The header over a column."""
        return next((head for head in self.heads if head.column <= column < head.column + head.span), None)


@dataclass(slots=True, eq=False)
class Headed:
    """The levels of a head, outermost first, and what is doubtful about them."""

    levels: list[Level] = field(default_factory=list)
    doubts: list[str] = field(default_factory=list)


SPANS = "which columns a header stands over is not sure"


def headed(rows: Sequence[Row], columns: Columns, under: Sequence[tuple[float, float, float]]) -> Headed:
    """Put the rows of a head over the columns; `under` are rules under headers: left, right, height."""
    found = Headed()
    slots = _Slots(columns)
    for row in reversed(rows):
        below = found.levels[0] if found.levels else None
        heads = _heads(row, columns)
        ruled = _widened(heads, row, below, slots, under)
        tiled = "" if ruled or below is None else _tiled(heads, below, slots, row)
        spanning = ruled or bool(tiled) or any(head.span > 1 for head in heads)
        if below is None or (spanning and _covers(heads, below)):
            if (
                (
                    spanning
                    and not ruled
                    and not tiled
                    and below is not None
                    and not _stands_over(heads, slots)
                )
                or tiled == "guess"
                or (not ruled and below is not None and _may_be_wider(heads, below))
            ):
                found.doubts.append(SPANS)
            found.levels.insert(0, Level(heads, row.base))
        elif _is_apart(heads, below, row) or not _put_on_top(heads, below):
            found.levels.insert(0, Level(heads, row.base))
            found.doubts.append(SPANS)
        found.levels[0].base = row.base
        slots.widen(heads)
    return found


class _Slots:
    """The edges of each column, its header included."""

    def __init__(self, columns: Columns) -> None:
        self.lefts, self.rights = columns.lefts.copy(), columns.rights.copy()

    def widen(self, heads: Sequence[Head]) -> None:
        for head in heads:
            if head.span == 1:
                self.lefts[head.column] = min(self.lefts[head.column], head.x0)
                self.rights[head.column] = max(self.rights[head.column], head.x1)

    def middle(self, first: int, last: int) -> float:
        return float(self.lefts[first] + self.rights[last]) / 2


def _heads(row: Row, columns: Columns) -> list[Head]:
    """The headers of one row, each over the columns that it overlaps."""
    pieces = _pieces(row, columns)
    heads: list[Head] = []
    for first, after in pieces:
        x0, x1 = row.x0[first], max(row.x1[first:after])
        over = _overlapped(x0, x1, columns)
        if heads and over[0] < heads[-1].column + heads[-1].span:
            over = [at for at in over if at >= heads[-1].column + heads[-1].span]
            if not over:
                heads[-1].lines[0] = heads[-1].lines[0] + row.words[first:after]
                heads[-1].x1 = x1
                continue
        text = " ".join(row.texts[first:after])
        heads.append(Head(over[0], over[-1] - over[0] + 1, [row.words[first:after]], x0, x1, text))
    return heads


def _pieces(row: Row, columns: Columns) -> list[tuple[int, int]]:
    """Cut a row of headers where a gap lies in a strip between columns, or is wide."""
    cuts = [0]
    reach = list(accumulate(row.x1, max))
    for at in range(1, len(row.words)):
        start, end = reach[at - 1], row.x0[at]
        gap = (end - start) / row.size
        strip = (columns.rights[:-1] < end + 0.1) & (columns.lefts[1:] > start - 0.1)
        if (
            gap > _FAR
            or (gap > _PARTED and bool(strip.any()))
            or (gap > _CLOSE and _each(row, cuts[-1], at, columns))
        ):
            cuts.append(at)
    return list(zip(cuts, [*cuts[1:], len(row.words)], strict=True))


def _each(row: Row, first: int, at: int, columns: Columns) -> bool:
    """Whether two neighbours close to each other are each centred over a column of their own."""
    before = "".join(row.texts[first:at])
    if before.count("(") > before.count(")") or before.count("[") > before.count("]"):
        return False
    middle = (row.x0[first] + row.x1[at - 1]) / 2
    last = at
    while last + 1 < len(row.words) and row.x0[last + 1] - row.x1[last] < _PARTED * row.size:
        last += 1
    other = (row.x0[at] + row.x1[last]) / 2
    middles = (columns.lefts + columns.rights) / 2
    one, two = int(np.abs(middles - middle).argmin()), int(np.abs(middles - other).argmin())
    return one != two and max(abs(middles[one] - middle), abs(middles[two] - other)) < 0.35 * row.size


def _overlapped(x0: float, x1: float, columns: Columns) -> list[int]:
    """The columns that a header overlaps by a fair part of either, or else the nearest."""
    shared = np.minimum(columns.rights, x1) - np.maximum(columns.lefts, x0)
    narrower = np.minimum(columns.rights - columns.lefts, x1 - x0)
    over = np.flatnonzero(shared > 0.3 * np.maximum(narrower, 1.0))
    if len(over):
        return list(range(int(over[0]), int(over[-1]) + 1))
    away = np.maximum(columns.lefts - x1, x0 - columns.rights)
    return [int(away.argmin())]


def _widened(
    heads: list[Head], row: Row, below: Level | None, slots: _Slots,
    under: Sequence[tuple[float, float, float]],
) -> bool:  # fmt: skip
    """Let headers reach as far as the rules under them; tells whether there are any."""
    if below is None:
        return False
    bottom = min((float(row.base) + 3.2 * row.size,))
    near = [(a, b) for a, b, y in under if row.base - 0.3 * row.size < y < bottom]
    ruled = False
    for head in heads:
        for a, b in near:
            others = sum(a - 2 <= (other.x0 + other.x1) / 2 <= b + 2 for other in heads)
            if others == 1 and a - 2 <= (head.x0 + head.x1) / 2 <= b + 2:
                middles = (slots.lefts + slots.rights) / 2
                over = np.flatnonzero((middles > a - 1) & (middles < b + 1))
                if len(over):
                    head.column, head.span = int(over[0]), len(over)
                    ruled = True
    return ruled


def _tiled(heads: list[Head], below: Level, slots: _Slots, row: Row) -> str:
    """Let headers reach over the columns between them if each then stands in the middle of its own.

    Gives "" if they do not, "sure", or "guess".
    """
    base, size = row.base, row.size
    over = [head for head in heads if head.column > 0]
    if not over or not below.heads or all(_begins_with(head, below) for head in over):
        return ""
    if _over_repeats(over, below, slots, size):
        return "sure"
    if any(_is_open(head, below) for head in over):
        return ""
    last = max(len(slots.lefts) - 1, 0)
    columns = [c for c in range(1, last + 1) if below.at(c) is not None or any(h.column == c for h in over)]
    middles = np.array([(head.x0 + head.x1) / 2 for head in over])
    groups: list[list[int]] = [[] for _ in over]
    for column in columns:
        groups[int(np.abs(middles - slots.middle(column, column)).argmin())].append(column)
    found = [_centred(head, group, slots, size) for head, group in zip(over, groups, strict=True)]
    alike = [_over_alike(run, group, below) for run, group in zip(found, groups, strict=True)]
    best = [one or two for one, two in zip(alike, found, strict=True)]
    if any(group is None or (len(group) < 2 and below.at(group[0]) is not None) for group in best):
        return ""
    if all(group is not None and len(group) < 2 for group in best):
        return ""
    # One header alone over the middle one of three may as well be the first line of that one.
    if len(over) == 1 and len(best[0] or ()) % 2 and below.base - base < 1.3 * size:
        return ""
    for head, group in zip(over, best, strict=True):
        if group:
            head.column, head.span = group[0], len(group)
    return "guess" if any(alike) else "sure"


def _over_repeats(over: Sequence[Head], below: Level, slots: _Slots, size: float) -> bool:
    """Let headers reach over what repeats under them: "n", "%", "n", "%" under two; tells whether it does."""
    under = [head for head in below.heads if head.column > 0]
    texts = [head.text for head in under]
    above = [head for head in over if below.at(head.column) is not None]
    count = len(texts) // max(len(above), 1)
    under, texts = under[: count * len(above)], texts[: count * len(above)]
    if len(above) < 2 or count < 2 or texts != texts[:count] * len(above) or len(set(texts[:count])) < 2:
        return False
    places = [head.column for head in under]
    if any(head.span > 1 for head in under) or places != list(range(places[0], places[0] + len(places))):
        return False
    starts = [places[0] + count * at for at in range(len(above))]
    for head, start in zip(above, starts, strict=True):
        middle = (head.x0 + head.x1) / 2
        if not slots.lefts[start] - size < middle < slots.rights[start + count - 1] + size:
            return False
    for head, start in zip(above, starts, strict=True):
        head.column, head.span = start, count
    return True


def _over_alike(run: list[int] | None, group: list[int], below: Level) -> list[int] | None:
    """A wider run around one over whose middle a header stands, where all headers under it are alike.

    A first line that the one in the middle alone has would set it apart from its neighbours.
    """
    if not run or len(group) < len(run) + 2 or group != list(range(group[0], group[-1] + 1)):
        return None
    around = min(run[0] - group[0], group[-1] - run[-1])
    wider = list(range(run[0] - around, run[-1] + around + 1))
    under = [below.at(column) for column in wider]
    shapes = {_shape(head.text) if head else "" for head in under}
    return wider if around and len(shapes) == 1 and "" not in shapes else None


def _may_be_wider(heads: Sequence[Head], below: Level) -> bool:
    """Whether beside the columns of a header, under no other one, numbers of the same kind stand as under it."""
    covered = {c for head in heads for c in range(head.column, head.column + head.span)}
    for head in heads:
        under = [below.at(c) for c in range(head.column, head.column + head.span)]
        sides = [
            below.at(c) for c in (head.column - 1, head.column + head.span) if c > 0 and c not in covered
        ]
        shapes = {_shape(one.text) for one in under if one}
        if head.span > 1 and any(
            one and _shape(one.text) in shapes and "1" in _shape(one.text) for one in sides
        ):
            return True
    return False


def _shape(text: str) -> str:
    """A header with its words and numbers taken out."""
    return regex.sub(r"\p{L}+", "a", regex.sub(r"\p{Nd}+(?:[.,]\p{Nd}+)?", "1", text))


def _is_open(head: Head, below: Level) -> bool:
    """Whether a header goes on in the one under it: "OR (95%" over "CI)", "Mean" over "(SD)"."""
    other = below.at(head.column)
    text = head.text
    if text.count("(") > text.count(")") or text.count("[") > text.count("]") or text[-1:] in "-–/,±":
        return True
    return other is not None and other.text[:1] in ("(", "[", "%")


def _is_apart(heads: Sequence[Head], below: Level, row: Row) -> bool:
    """Whether headers are no first lines of those under them, though which columns they cover is not plain."""
    if any(_is_off(head, below, row.size) for head in heads):
        return True
    fewer = sum(head.column > 0 for head in heads) < sum(head.column > 0 for head in below.heads)
    return fewer and below.base - row.base > _LOOSE * row.size and any(head.column > 0 for head in heads)


def _is_off(head: Head, below: Level, size: float) -> bool:
    """Whether a header stands neither flush with the one under it nor over its middle: over several, perhaps."""
    other = below.at(head.column)
    if head.column == 0 or other is None:
        return False
    middles = abs(head.x0 + head.x1 - other.x0 - other.x1) / 2
    return min(abs(head.x0 - other.x0), abs(head.x1 - other.x1), middles) > 0.8 * size


def _begins_with(head: Head, below: Level) -> bool:
    """Whether a header begins exactly where the one under it does, as the first line of two does."""
    other = below.at(head.column)
    return other is not None and abs(other.x0 - head.x0) < 1.2


def _centred(head: Head, group: list[int], slots: _Slots, size: float) -> list[int] | None:
    """The run of a group's columns over whose middle a header stands best, the widest of several."""
    middle = (head.x0 + head.x1) / 2
    runs = [group[a : b + 1] for a in range(len(group)) for b in range(a, len(group))]
    runs = [run for run in runs if head.column in run and run[-1] - run[0] + 1 == len(run)]
    off = {at: abs(slots.middle(run[0], run[-1]) - middle) for at, run in enumerate(runs)}
    near = [
        (round(off[at] / (0.6 * size)), -len(run), at)
        for at, run in enumerate(runs)
        if off[at] < max(size, 0.1 * float(slots.rights[run[-1]] - slots.lefts[run[0]]))
    ]
    return runs[min(near)[2]] if near else None


def _stands_over(heads: Sequence[Head], slots: _Slots) -> bool:
    """Whether each header over several columns stands in their middle or begins where they begin."""
    for head in heads:
        if head.span > 1:
            left, last = slots.lefts[head.column], head.column + head.span - 1
            off = abs(slots.middle(head.column, last) - (head.x0 + head.x1) / 2)
            if off > 0.15 * (slots.rights[last] - left) and abs(left - head.x0) > 4:
                return False
    return True


def _covers(heads: Sequence[Head], below: Level) -> bool:
    """Whether a header over several columns has more than one header under it."""
    return any(
        len({id(below.at(c)) for c in range(head.column, head.column + head.span) if below.at(c)}) > 1
        for head in heads
        if head.span > 1
    )


def _put_on_top(heads: Sequence[Head], below: Level) -> bool:
    """Count headers as the first lines of those below; False where they do not stand over the same columns."""
    for head in heads:
        under = {id(h): h for c in range(head.column, head.column + head.span) if (h := below.at(c))}
        if len(under) > 1:
            return False
    for head in heads:
        found = next((h for c in range(head.column, head.column + head.span) if (h := below.at(c))), None)
        if found is None:
            below.heads.append(head)
        else:
            found.lines = head.lines + found.lines
            found.text = f"{head.text} {found.text}"
            found.x0, found.x1 = min(found.x0, head.x0), max(found.x1, head.x1)
    below.heads.sort(key=lambda head: head.column)
    return True
