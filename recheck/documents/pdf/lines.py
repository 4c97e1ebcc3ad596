"""Lines of a page: words of one region on one base line, with what is raised or lowered beside them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from recheck.documents.characters import BASE, LOWERED, RAISED, as_text
from recheck.documents.pdf.columns import Arrangement
from recheck.documents.pdf.glyphs import BOLD, ITALIC, Glyphs
from recheck.documents.pdf.indices import hosts, pairs
from recheck.documents.pdf.words import Words, space_gap

SPACE = 0x20
_LINE_LENGTH = 20000.0
"""Longer in points than any page is wide: the PDF format allows 14400."""


@dataclass(frozen=True, slots=True, eq=False)
class Line:
    """One line: n characters, spaces included, with their marks and boxes as shown on the page.

    `x0`, `x1`, `base`, `size` (of most characters), `left` and `right` (the column's edges) are
    points in the frame in which lines are level. `gaps` are the spaces wider than 1.2 em, in em;
    `bold` and `italic` shares of the characters.
    """

    page: int
    region: int
    column: int
    codes: NDArray[np.uint32]
    marks: NDArray[np.uint8]
    boxes: NDArray[np.float32]
    text: str
    x0: float
    x1: float
    base: float
    size: float
    left: float
    right: float
    gaps: tuple[float, ...]
    bold: float
    italic: float


def hosts_of(words: Words, arrangement: Arrangement) -> NDArray[np.intp]:
    """For each word of a page the one that it is an index of, or itself."""
    chosen = np.flatnonzero(arrangement.regions >= 0)
    if not len(chosen):
        return np.arange(len(words))
    return hosts(words, chosen, arrangement.regions == arrangement.around)


def lines_of(shown: Glyphs, words: Words, arrangement: Arrangement, host: NDArray[np.intp]) -> list[Line]:
    """Set the words of a page in lines, in reading order; words of region -1 are left out."""
    chosen = np.flatnonzero(arrangement.regions >= 0)
    if not len(chosen):
        return []
    host = np.where(arrangement.regions[host] >= 0, host, np.arange(len(words)))
    regions = arrangement.regions[host]
    line = _line_numbers(words, chosen, host, regions)
    _adopt_strays(words, chosen, line, regions)
    marks = _marks(words, chosen, line, host)
    return _cut(shown, words, arrangement, _ordered(shown, words, line, marks))


def _line_numbers(
    words: Words, chosen: NDArray[np.intp], host: NDArray[np.intp], regions: NDArray[np.intp]
) -> NDArray[np.intp]:
    """Number the lines in reading order; an index has the line of its host. -1 for words left out."""
    main = chosen[host[chosen] == chosen]
    order = main[np.lexsort((words.x0[main], words.base[main], regions[main]))]
    base, size = words.base[order], words.size[order]
    new = np.ones(len(order), dtype=bool)
    new[1:] = (regions[order[1:]] != regions[order[:-1]]) | (
        base[1:] - base[:-1] > 0.22 * np.minimum(size[1:], size[:-1])
    )
    line = np.full(len(words), -1, np.intp)
    line[order] = np.cumsum(new) - 1
    line[chosen] = line[host[chosen]]
    return line


def _adopt_strays(
    words: Words, chosen: NDArray[np.intp], line: NDArray[np.intp], regions: NDArray[np.intp]
) -> None:
    """Give a line of one or two characters to the line that it overlaps: tall brackets, far indices."""
    length = np.bincount(line[chosen], weights=(words.ends - words.starts)[chosen])
    short = length[line[chosen]] <= 3
    strays, others = chosen[short], chosen[~short]
    if not len(strays) or not len(others):
        return
    one, near = pairs(words, strays, others, 0.7)
    stray = strays[one]
    reach = np.maximum(words.size[near], words.size[stray])
    away = np.abs(words.base[near] - words.base[stray])
    fits = (regions[near] == regions[stray]) & (away < 0.7 * reach)
    fits &= (words.x0[near] < words.x1[stray] + reach) & (words.x1[near] > words.x0[stray] - reach)
    order = np.flatnonzero(fits)[np.argsort(-away[fits], kind="stable")]
    adopted = line.copy()
    adopted[stray[order]] = line[near[order]]
    line[strays] = adopted[strays]


def _marks(
    words: Words, chosen: NDArray[np.intp], line: NDArray[np.intp], host: NDArray[np.intp]
) -> NDArray[np.uint8]:
    """Which words are raised or lowered against their host, or the main words of their line."""
    marks = np.full(len(words), BASE, np.uint8)
    rise = words.base[host] - words.base
    size = words.size[host]
    hung = host != np.arange(len(words))
    marks[hung & (rise > 0.1 * size)] = RAISED
    marks[hung & (rise < -0.04 * size)] = LOWERED
    return marks


@dataclass(frozen=True, slots=True, eq=False)
class _Order:
    """The characters of all lines in reading order: their words, their places among the glyphs.

    `gap` is the room before each in em, `space` whether that is a space, `start` where lines begin.
    """

    owner: NDArray[np.intp]
    place: NDArray[np.intp]
    mark: NDArray[np.uint8]
    frame: NDArray[np.float32]
    gap: NDArray[np.float32]
    space: NDArray[np.bool_]
    start: NDArray[np.intp]


def _ordered(shown: Glyphs, words: Words, line: NDArray[np.intp], marks: NDArray[np.uint8]) -> _Order:
    """Sort the characters of every line and find the spaces."""
    owner = np.repeat(np.arange(len(words)), words.ends - words.starts)
    inside = line[owner] >= 0
    owner, place = owner[inside], words.order[inside]
    mark = marks[owner]
    frame = words.glyphs.boxes[place]
    key = np.where(mark == BASE, frame[:, 0], _stack_keys(words, marks, line)[owner])
    order = np.lexsort((np.arange(len(owner)), np.where(mark == LOWERED, 1, 0), key, line[owner]))
    owner, place, mark, frame = owner[order], place[order], mark[order], frame[order]
    number, size = line[owner], shown.sizes[place]
    start = np.flatnonzero(np.diff(number, prepend=-1))
    gap = _gaps(frame, number, start)
    larger = np.maximum(size, np.roll(size, 1))
    space = words.spaced[inside][order] & (gap > -0.3 * larger)
    space[1:] |= gap[1:] > space_gap(shown.codes[place], shown.styles[place], size)
    space[start] = False
    return _Order(owner, place, mark, frame, (gap / larger).astype(np.float32), space, start)


def _stack_keys(words: Words, marks: NDArray[np.uint8], line: NDArray[np.intp]) -> NDArray[np.float32]:
    """Where each word sorts: one stacked under a raised word directly after it."""
    keys = words.x0.copy()
    raised, lowered = np.flatnonzero(marks == RAISED), np.flatnonzero(marks == LOWERED)
    if not len(raised) or not len(lowered):
        return keys
    # Both on one long axis, line after line, so that neighbours on it are neighbours in a line.
    axis = line * _LINE_LENGTH + words.x0.astype(np.float64)
    raised = raised[np.argsort(axis[raised], kind="stable")]
    after = np.searchsorted(axis[raised], axis[lowered])
    before = np.maximum(after - 1, 0)
    after = np.minimum(after, len(raised) - 1)
    nearer = np.abs(axis[raised[before]] - axis[lowered]) <= np.abs(axis[raised[after]] - axis[lowered])
    partner = raised[np.where(nearer, before, after)]
    stacked = np.abs(axis[partner] - axis[lowered]) < 0.45 * words.size[lowered]
    np.minimum.at(keys, partner[stacked], words.x0[lowered[stacked]])
    keys[lowered[stacked]] = keys[partner[stacked]]
    return keys


def _gaps(
    frame: NDArray[np.float32], number: NDArray[np.intp], start: NDArray[np.intp]
) -> NDArray[np.float32]:
    """The room before each character: from the rightmost edge of its line so far."""
    # Lines are laid one after another on a long axis so that one running maximum serves them all.
    shift = number * _LINE_LENGTH
    edge = np.maximum.accumulate(frame[:, 2] + shift)
    gap = np.zeros(len(frame), np.float64)
    gap[1:] = frame[1:, 0] + shift[1:] - edge[:-1]
    gap[start] = 0.0
    return gap.astype(np.float32)


@dataclass(frozen=True, slots=True, eq=False)
class _Text:
    """All lines of a page one after another, spaces put in; line i begins at `cuts[i]`."""

    text: str
    codes: NDArray[np.uint32]
    marks: NDArray[np.uint8]
    boxes: NDArray[np.float32]
    cuts: list[int]


def _spaced(shown: Glyphs, order: _Order) -> _Text:
    """Put the spaces in: each has the right edge of the character before it as its box."""
    at = np.flatnonzero(order.space)
    codes = np.insert(shown.codes[order.place], at, SPACE)
    # A space between two raised characters is raised with them: "1, 2" stays one index.
    alike = order.mark[at] == order.mark[at - 1]
    marks = np.insert(order.mark, at, np.where(alike, order.mark[at], BASE))
    boxes = shown.boxes[order.place]
    put = boxes[at - 1].copy()
    put[:, 0] = put[:, 2]
    cuts = order.start + np.searchsorted(at, order.start, side="left")
    return _Text(
        as_text(codes), codes, marks, np.insert(boxes, at, put, axis=0), [*cuts.tolist(), len(codes)]
    )


def _cut(shown: Glyphs, words: Words, arrangement: Arrangement, order: _Order) -> list[Line]:
    """Cut the ordered characters of a page into lines, each with its measures."""
    spaced, start, place = _spaced(shown, order), order.start, order.place
    styles, sizes, base = shown.styles[place], shown.sizes[place].tolist(), words.base[order.owner].tolist()
    limits = [*start.tolist(), len(place)]
    length = np.diff(limits)
    bold = (np.add.reduceat((styles & BOLD) > 0, start) / length).tolist()
    italic = (np.add.reduceat((styles & ITALIC) > 0, start) / length).tolist()
    x0 = np.minimum.reduceat(order.frame[:, 0], start).tolist()
    x1 = np.maximum.reduceat(order.frame[:, 2], start).tolist()
    regions = np.maximum.reduceat(arrangement.regions[order.owner], start).tolist()
    on_base, gaps = (order.mark == BASE).tolist(), order.gap.tolist()
    lines = []
    for at, region in enumerate(regions):
        inside, part = range(limits[at], limits[at + 1]), slice(spaced.cuts[at], spaced.cuts[at + 1])
        main = [i for i in inside if on_base[i]] or list(inside)
        left, right = arrangement.bounds[region]
        lines.append(
            Line(
                page=shown.page, region=region, column=arrangement.columns[region],
                codes=spaced.codes[part], marks=spaced.marks[part], boxes=spaced.boxes[part],
                text=spaced.text[part], x0=x0[at], x1=x1[at],
                base=_middle(base, main), size=_middle(sizes, main), left=left, right=right,
                gaps=tuple(gap for gap in gaps[limits[at] : limits[at + 1]] if gap > 1.2),
                bold=bold[at], italic=italic[at],
            )
        )  # fmt: skip
    return lines


def _middle(values: list[float], chosen: list[int]) -> float:
    """The median of the chosen values, the lower one of two."""
    return sorted([values[i] for i in chosen])[(len(chosen) - 1) // 2]
