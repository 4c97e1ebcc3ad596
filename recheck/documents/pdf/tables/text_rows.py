"""Rows of words in a window of a page, as a table needs them: no columns of text, no lines put together."""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Sequence
from dataclasses import dataclass, field
from functools import lru_cache
from itertools import accumulate, pairwise

import numpy as np
import regex
from numpy.typing import NDArray

from recheck.documents.characters import as_text
from recheck.documents.pdf.glyphs import BOLD
from recheck.documents.pdf.words import Words

_NUMBER = regex.compile(r"[<>=≤≥≈~±+\-−–—(\[\"'“]*\p{Nd}*[.,·]?\p{Nd}")
_DASHES = frozenset("-−–—…/")
_STARS = frozenset("*∗⁎†‡§#·")
_ALIKE = 0.3
_PADDING = 3.0


@dataclass(frozen=True, slots=True, eq=False)
class Chunk:
    """Words of one row without a wide gap between them: their places in the row, edges in points."""

    first: int
    after: int
    x0: float
    x1: float
    text: str

    @property
    def numeric(self) -> bool:
        """Whether it is a number, several, or what stands for a missing one."""
        return is_numeric(self.text)


@dataclass(frozen=True, slots=True, eq=False)
class Row:
    """Words on one base line, from left to right, what is raised and lowered beside them included.

    `anchors` says for each word beside which it stands: that of an index or of stars, or itself;
    `bold` speaks of the first word.
    """

    words: list[int]
    texts: list[str]
    x0: list[float]
    x1: list[float]
    base: float
    size: float
    anchors: list[int]
    bold: bool
    _chunks: dict[float, list[Chunk]] = field(default_factory=dict)

    @property
    def own(self) -> list[int]:
        """The places of the words that are no index and no stars."""
        return [at for at, anchor in enumerate(self.anchors) if at == anchor]

    def chunks(self, gap: float) -> list[Chunk]:
        """The row cut where a gap is wider than so many em."""
        if gap not in self._chunks:
            self._chunks[gap] = self._cut(gap * self.size)
        return self._chunks[gap]

    def _cut(self, room: float) -> list[Chunk]:
        reach = list(accumulate(self.x1, max))
        cuts = [at for at in range(1, len(reach)) if self.x0[at] - reach[at - 1] > room]
        edges = [0, *cuts, len(reach)]
        return [
            Chunk(a, b, self.x0[a], max(self.x1[a:b]), " ".join(self.texts[a:b])) for a, b in pairwise(edges)
        ]

    @property
    def text(self) -> str:
        """The words with spaces between them."""
        return " ".join(self.texts)

    @property
    def left(self) -> float:
        """Where the row begins."""
        return self.x0[0]

    @property
    def right(self) -> float:
        """Where the row ends."""
        return max(self.x1)


class Ground:
    """The words of one page from which tables are made; `free` are those that are no furniture.

    `host` tells for each word the one that it is an index of, or itself.
    """

    def __init__(self, words: Words, free: NDArray[np.intp], host: NDArray[np.intp]) -> None:
        self.words, self.free, self.host = words, free, host
        self._hosts: list[int] = self.host.tolist()
        self._x0: list[float] = words.x0.astype(np.float64).tolist()
        self._x1: list[float] = words.x1.astype(np.float64).tolist()
        self._base: list[float] = words.base.astype(np.float64).tolist()
        self._size: list[float] = words.size.astype(np.float64).tolist()
        text = as_text(words.glyphs.codes[words.order])
        self._texts = [text[a:b] for a, b in zip(words.starts.tolist(), words.ends.tolist(), strict=True)]
        styles = words.glyphs.styles[words.order[words.starts]] if len(words) else np.zeros(0, np.uint8)
        self._bold: list[bool] = ((styles & BOLD) > 0).tolist()
        base = words.base.astype(np.float64)[self.host]
        self._order = free[np.argsort(base[free], kind="stable")]
        self._middle = ((words.x0.astype(np.float64) + words.x1) / 2)[self._order]
        self._height = base[self._order]
        self._reach = _ALIKE * words.size.astype(np.float64)[self.host][self._order]
        self._beside = [
            host != at or _STARS.issuperset(text)
            for at, (host, text) in enumerate(zip(self._hosts, self._texts, strict=True))
        ]
        self._known: dict[tuple[int, int], tuple[list[float], list[Row]]] = {}

    def is_raised(self, word: int) -> bool:
        """Whether a word is an index above the line of its host."""
        host = self._hosts[word]
        return host != word and self._base[host] > self._base[word]

    def rows(self, left: float, right: float, top: float, bottom: float) -> list[Row]:
        """The rows of the words whose middle stands in a window, give or take a few points, and whose base line is below its top."""
        # Windows that differ by a few points hold the same words.
        key = (round(left / 4), round(right / 4))
        if key not in self._known:
            rows = self._rows(left - _PADDING, right + _PADDING)
            self._known[key] = [row.base for row in rows], rows
        bases, rows = self._known[key]
        return rows[bisect_right(bases, top) : bisect_right(bases, bottom)]

    def between(self, left: float, right: float, top: float, bottom: float) -> dict[float, list[str]]:
        """The words whose middle stands exactly in a window, by their base line."""
        inside = (self._middle >= left) & (self._middle <= right)
        inside &= (self._height > top) & (self._height <= bottom)
        found: dict[float, list[str]] = {}
        for at, base in zip(self._order[inside].tolist(), self._height[inside].tolist(), strict=True):
            found.setdefault(round(base, 1), []).append(self._texts[at])
        return found

    def _rows(self, left: float, right: float) -> list[Row]:
        """Gather words into rows by the base line of the word on which each hangs, from the top."""
        inside = np.flatnonzero((self._middle >= left) & (self._middle <= right))
        height, reach = self._height[inside], self._reach[inside]
        new = np.flatnonzero(np.diff(height) > np.minimum(reach[1:], reach[:-1])) + 1
        chosen, edges = self._order[inside].tolist(), [0, *new.tolist(), len(inside)]
        return [self._row(chosen[a:b]) for a, b in pairwise(edges) if a < b]

    def _row(self, part: list[int]) -> Row:
        part = sorted(part, key=lambda at: self._x0[at])
        texts = [self._texts[at] for at in part]
        main = sorted(self._base[self._hosts[at]] for at in part)
        sizes = sorted(self._size[self._hosts[at]] for at in part)
        x0, x1 = [self._x0[at] for at in part], [self._x1[at] for at in part]
        size = sizes[len(sizes) // 2]
        anchors = self._anchors(part, texts, x0, x1, size)
        return Row(part, texts, x0, x1, main[len(main) // 2], size, anchors, self._bold[part[0]])

    def _anchors(
        self, part: list[int], texts: list[str], x0: list[float], x1: list[float], size: float
    ) -> list[int]:
        anchors = list(range(len(part)))
        if not any(self._beside[word] for word in part):
            return anchors
        for at, word in enumerate(part):
            if self._hosts[word] != word:
                anchors[at] = part.index(self._hosts[word]) if self._hosts[word] in part else at
            elif at and _STARS.issuperset(texts[at]) and x0[at] - x1[at - 1] < 0.7 * size:
                anchors[at] = anchors[at - 1]
        return anchors


@lru_cache(maxsize=4096)
def is_numeric(text: str) -> bool:
    """Whether a cell's text is a number, numbers with signs and stars, or a dash."""
    digits = sum(map(str.isdigit, text))
    if not digits:
        return 0 < len(text) <= 3 and _DASHES.issuperset(text)
    letters = sum(map(str.isalpha, text))
    return letters <= digits and (letters <= 2 or _NUMBER.match(text) is not None)


def is_wordy(row: Row, width: float) -> bool:
    """Whether a row is running text: words that fill most of a width, without a gap."""
    if len(row.texts) < 6 or row.right - row.left <= 0.6 * width:
        return False
    lower = sum(text[:1].isalpha() and text.islower() for text in row.texts)
    return lower >= 3 and len(row.chunks(1.2)) == 1


def words_in(rows: Sequence[Row]) -> NDArray[np.intp]:
    """The words of some rows."""
    return np.array([word for row in rows for word in row.words], np.intp)
