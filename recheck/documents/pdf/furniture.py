"""What surrounds the text of a page: line numbers, running heads, page numbers, banners."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence

import numpy as np
import regex
from numpy.typing import NDArray

from recheck.documents.characters import as_text
from recheck.documents.pdf.words import Words

_NUMBER = regex.compile(r"[0-9]+")
_CAPTIONED = ("table", "figure", "supplementarytable", "supplementaryfigure")
_EDGE_ROWS = 4
_SAME_HEIGHT = 4.0
_SAME_EDGE = 1.6


def furniture(pages: Sequence[Words]) -> list[NDArray[np.bool_]]:
    """For each page which of its words are furniture."""
    masks = _line_numbers(pages)
    recurring = _recurring(pages, masks)
    return [numbers | heads for numbers, heads in zip(masks, recurring, strict=True)]


def _line_numbers(pages: Sequence[Words]) -> list[NDArray[np.bool_]]:
    """Rising whole numbers that stand by themselves under one another, also in a gutter."""
    masks = [np.zeros(len(words), dtype=bool) for words in pages]
    alone = [_lone_numbers(words) for words in pages]
    edges: list[tuple[int, float]] = []
    for words, mask, (members, values) in zip(pages, masks, alone, strict=True):
        for side, edge, group in _rising(words, members, values, least=6):
            if _beside_cells(words, group):
                continue
            mask[group] = True
            edges.append((side, edge))
    for words, mask, (members, values) in zip(pages, masks, alone, strict=True):
        # The last page may have two lines only: there the place of the column decides.
        for side, edge, group in _rising(words, members, values, least=1):
            if any(side == other and abs(edge - known) < _SAME_EDGE for other, known in edges):
                mask[group] = True
    return masks


def _lone_numbers(words: Words) -> tuple[NDArray[np.intp], NDArray[np.int64]]:
    """Words of one to four digits with space on both sides, and their values."""
    if not len(words):
        return np.zeros(0, np.intp), np.zeros(0, np.int64)
    codes = words.glyphs.codes[words.order]
    digit = np.minimum.reduceat((codes >= 48) & (codes <= 57), words.starts)
    room = np.full(len(words) + 1, np.inf)
    same = words.rows[1:] == words.rows[:-1]
    room[1:-1][same] = ((words.x0[1:] - words.x1[:-1]) / words.size[1:])[same]
    # In a narrow gutter the numbers touch the text and differ from it in size alone.
    small, large = np.minimum(words.size[1:], words.size[:-1]), np.maximum(words.size[1:], words.size[:-1])
    room[1:-1][same & (small < 0.8 * large)] = np.inf
    lone = digit & (words.ends - words.starts <= 4) & (room[:-1] > 0.45) & (room[1:] > 0.45)
    members = np.flatnonzero(lone)
    return members, np.array([int(as_text(words.codes(at))) for at in members.tolist()], np.int64)


def _rising(
    words: Words, members: NDArray[np.intp], values: NDArray[np.int64], *, least: int
) -> list[tuple[int, float, NDArray[np.intp]]]:
    """Groups with a common right (1) or left (0) edge whose values rise by one step down the page."""
    found = []
    for side, edges in ((1, words.x1[members]), (0, words.x0[members])):
        order = np.argsort(edges, kind="stable")
        cuts = np.flatnonzero(np.diff(edges[order]) > _SAME_EDGE / 2) + 1
        for part in np.split(order, cuts):
            if len(part) < least:
                continue
            part = part[np.argsort(words.base[members[part]], kind="stable")]
            steps = np.diff(values[part])
            usual = int(np.median(steps)) if len(steps) else 1
            rising = usual in (1, 2, 5, 10) and np.mean(steps == usual) >= 0.75 if len(steps) else least == 1
            if rising and _stands_clear(words, members[part]):
                found.append((side, float(np.median(edges[part])), members[part]))
    return found


def _stands_clear(words: Words, group: NDArray[np.intp]) -> bool:
    """Whether hardly any other word stands over or under a column of numbers: labels of rows share theirs."""
    left, right = float(words.x0[group].min()), float(words.x1[group].max())
    sharing = int(((words.x0 < right) & (words.x1 > left)).sum()) - len(group)
    return sharing <= max(2, 0.35 * len(group))


def _beside_cells(words: Words, group: NDArray[np.intp]) -> bool:
    """Whether most numbers of a column share their row with a few words only, as in a table."""
    others = np.bincount(words.rows)[words.rows[group]] - 1
    return bool(np.mean((others > 0) & (others < 5)) > 0.5)


def _recurring(pages: Sequence[Words], taken: Sequence[NDArray[np.bool_]]) -> list[NDArray[np.bool_]]:
    """Rows at the head or foot that come again at the same height on other pages."""
    masks = [np.zeros(len(words), dtype=bool) for words in pages]
    seen: dict[str, list[tuple[int, float, str, NDArray[np.intp]]]] = defaultdict(list)
    for at, (words, mask) in enumerate(zip(pages, taken, strict=True)):
        for members in _edge_rows(words, mask):
            text = "".join(as_text(words.codes(word)) for word in members.tolist()).lower()
            if text.startswith(_CAPTIONED) or _is_row(words, members):
                continue
            pattern = _NUMBER.sub("#", text)
            seen[pattern].append((at, float(words.base[members[0]]), text, members))
    for pattern, found in seen.items():
        for members_of in _same_height(found):
            if _is_furniture(pattern, members_of, len(pages)):
                for at, _, _, members in members_of:
                    masks[at][members] = True
    return masks


def _is_row(words: Words, members: NDArray[np.intp]) -> bool:
    """Whether a row has so many parts that it is the head of a table: running heads have three at most."""
    gaps = words.x0[members[1:]] - words.x1[members[:-1]]
    return int((gaps > 0.9 * words.size[members[1:]]).sum()) > 3


def _edge_rows(words: Words, taken: NDArray[np.bool_]) -> list[NDArray[np.intp]]:
    """The words of the outermost rows of a page, each row by itself."""
    free = np.flatnonzero(~taken)
    if not len(free):
        return []
    parts = np.split(free, np.flatnonzero(np.diff(words.rows[free])) + 1)
    if len(parts) <= 2 * _EDGE_ROWS:
        return parts
    return parts[:_EDGE_ROWS] + parts[-_EDGE_ROWS:]


def _same_height(
    found: list[tuple[int, float, str, NDArray[np.intp]]],
) -> list[list[tuple[int, float, str, NDArray[np.intp]]]]:
    groups: list[list[tuple[int, float, str, NDArray[np.intp]]]] = []
    for row in sorted(found, key=lambda row: (row[1], row[0])):
        if groups and row[1] - groups[-1][-1][1] < _SAME_HEIGHT:
            groups[-1].append(row)
        else:
            groups.append([row])
    return groups


def _is_furniture(pattern: str, found: list[tuple[int, float, str, NDArray[np.intp]]], pages: int) -> bool:
    count = len({at for at, *_ in found})
    if count < (2 if pages <= 6 else 3):
        return False
    if sum(c.isalpha() for c in pattern) >= 3:
        return True
    if "#" not in pattern or len(pattern.replace("#", "")) > 6:
        return False
    # A page number ("4", "- 4 -", "4 of 11") keeps its distance from the place of its page in the file.
    offsets = [int(_NUMBER.findall(text)[0]) - at for at, _, text, _ in found]
    return max(offsets.count(offset) for offset in offsets) >= 0.6 * len(offsets)
