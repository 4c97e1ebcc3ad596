"""Lines gathered into blocks: paragraphs, headings, captions, tables."""

from __future__ import annotations

from collections import Counter, defaultdict
from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import pairwise

import numpy as np
import regex

from recheck.documents.pdf.joining import is_finished, joined_text
from recheck.documents.pdf.lines import Line
from recheck.documents.sections import captioned, is_named_section, opens_references
from recheck.model import PassageKind

_LISTED = regex.compile(r"(?:\[\d{1,3}\]|\d{1,3}[.)])\s+\p{Lu}|[•▪–] ")


@dataclass(slots=True, eq=False)
class Block:
    """Lines that belong together, in order; `lines` may grow when a text goes on elsewhere.

    `table` is the number of the table of which the block is a caption or a note.
    """

    lines: list[Line]
    kind: PassageKind = "body"
    text: str = ""
    section: str | None = None
    table: int | None = None

    def take_in(self, other: Block) -> None:
        """Go on with the lines of another block."""
        self.lines = self.lines + other.lines
        self.text = joined_text(self.lines)


@dataclass(frozen=True, slots=True)
class Type:
    """How the running text of a document is set: size and usual distance of lines by size, points."""

    size: float
    leading: dict[int, float] = field(default_factory=dict)
    bold: bool = False

    def distance(self, size: float) -> float:
        """The usual distance of base lines at a font size."""
        return self.leading.get(round(2 * size), 1.2 * size)


def type_of(lines: Sequence[Line]) -> Type:
    """Measure the running text of a document."""
    weight: Counter[float] = Counter()
    steps: defaultdict[int, list[float]] = defaultdict(list)
    bold: Counter[bool] = Counter()
    for line in lines:
        if not line.gaps:
            weight[round(2 * line.size) / 2] += len(line.text)
            bold[line.bold > 0.8] += len(line.text)
    for one, other in pairwise(lines):
        step = other.base - one.base
        alike = one.page == other.page and one.region == other.region and abs(one.size - other.size) < 0.3
        if alike and 0.9 * one.size < step < 3.5 * one.size and not one.gaps:
            steps[round(2 * one.size)].append(step)
    leading = {size: _usual(found) for size, found in steps.items() if len(found) >= 3}
    size = max(weight, key=lambda size: (weight[size], size)) if weight else 10.0
    return Type(size, leading, bold[True] > bold[False])


def _usual(steps: list[float]) -> float:
    """The most frequent distance of lines; the smaller where two are as frequent."""
    rounded = Counter(round(step * 2) / 2 for step in steps)
    usual = min(rounded, key=lambda step: (-rounded[step], step))
    return float(np.median([step for step in steps if abs(step - usual) < 0.8]))


def blocks_of(lines: Sequence[Line], type_: Type) -> list[Block]:
    """Gather lines into blocks, tables apart from text; the blocks keep the order of the lines."""
    tabular = _tabular(lines, type_)
    blocks: list[Block] = []
    for at, line in enumerate(lines):
        if at and tabular[at] == tabular[at - 1] and not _parted(lines, at, type_, tabular[at]):
            blocks[-1].lines.append(line)
        else:
            blocks.append(Block([line], "table" if tabular[at] else "body"))
    for block in blocks:
        block.text = joined_text(block.lines)
    return blocks


def _is_row(line: Line) -> bool:
    """Whether a line looks like a row of a table: wide gaps, numbers with gaps, or a dotted leader."""
    if ". . . ." in line.text or "....." in line.text:
        return True
    wide = [gap for gap in line.gaps if gap > 1.7]
    if _is_loose(line, wide):
        return False
    if len(wide) >= 2 or (wide and max(wide) > 4 and len(line.text.split()) < 9):
        return True
    digits = sum(c.isdigit() for c in line.text)
    return len(line.gaps) >= 2 and digits > 0.3 * len(line.text)


def _is_loose(line: Line, wide: list[float]) -> bool:
    """Whether a line is running text of a few long words, justified loosely: "[M = 3.82], t(35) = −3.06, p = .004,"."""
    if line.x1 - line.x0 <= 0.9 * (line.right - line.left):
        return False
    if len(wide) == line.text.count(" ") and sum(c.isalpha() for c in line.text) > 0.6 * len(line.text):
        return True
    even = len(line.gaps) == line.text.count(" ") > 0 and max(line.gaps) - min(line.gaps) < 0.2
    return even and any(word[-1] in ",;" for word in line.text.split())


def is_prose(line: Line) -> bool:
    """Whether a line is surely running text: most of its column filled, in words, without gaps."""
    words = line.text.split()
    lower = sum(word[:1].isalpha() and word.islower() for word in words)
    return (
        not line.gaps
        and len(words) >= 6
        and lower >= 3
        and line.x1 - line.x0 > 0.6 * (line.right - line.left)
    )


def _tabular(lines: Sequence[Line], type_: Type) -> list[bool]:
    """Which lines belong to tables: rows, and the few lines between rows that are no prose."""
    rows = [_is_row(line) for line in lines]
    found = [False] * len(lines)
    last = -9
    for at, row in enumerate(rows):
        if not row:
            continue
        between = range(max(last + 1, 0), at)
        close = (
            at - last <= 4 and lines[last].region == lines[at].region and lines[last].page == lines[at].page
        )
        if close and not any(is_prose(lines[i]) or captioned(lines[i].text) for i in between):
            found[last : at + 1] = [True] * (at + 1 - last)
        elif ". . . ." in lines[at].text or (
            len([gap for gap in lines[at].gaps if gap > 1.7]) >= 3
            and any(c.isdigit() for c in lines[at].text)
        ):
            found[at] = True
        last = at
    return found


def _parted(lines: Sequence[Line], at: int, type_: Type, tabular: bool) -> bool:
    """Whether a new block begins with the line `at`."""
    before, line = lines[at - 1], lines[at]
    if before.page != line.page or before.region != line.region:
        return True
    step, usual = line.base - before.base, type_.distance(max(before.size, line.size))
    if tabular:
        return step > 2.5 * usual
    if abs(line.size - before.size) > 0.06 * before.size or step > 1.9 * usual or step < 0:
        return True
    ended = is_finished(before, before.text)
    changes = (line.bold > 0.8) != (before.bold > 0.8) and min(len(line.text), len(before.text)) > 3
    if changes and (ended or not _fills(lines, at - 1)):
        return True
    if opens_references(before.text) or (_names_section(line) and not _ends_text(before, line, ended)):
        return True
    if step > 1.28 * usual + 0.8:
        return ended or not line.text[:1].islower()
    if captioned(line.text) and (ended or not _fills(lines, at - 1)):
        return True
    if not ended:
        return (_is_centred(before) and not _is_centred(line)) or _is_label(before, line)
    return _is_indented(lines, at) or not _fills(lines, at - 1) or _LISTED.match(line.text) is not None


def _names_section(line: Line) -> bool:
    return opens_references(line.text) or is_named_section(line.text)


def _ends_text(before: Line, line: Line, ended: bool) -> bool:
    """Whether the name of a section is the end of the sentence above it: "… in the Supplementary / Methods."."""
    return line.text.rstrip()[-1:] == "." and not ended and (line.bold > 0.8) == (before.bold > 0.8)


def _is_label(before: Line, line: Line) -> bool:
    """Whether a short line without a full stop stands over a text that begins anew: a plain heading."""
    return (
        before.x1 < before.left + 0.55 * (before.right - before.left)
        and len(before.text) < 70
        and before.text[:1].isupper()
        and line.text[:1].isupper()
        and line.x1 > before.x1 + 4 * line.size
        and not any(c in "=<>≤≥,;" for c in before.text)
    )


def _is_centred(line: Line) -> bool:
    left, right, width = line.x0 - line.left, line.right - line.x1, line.right - line.left
    return left > 0.12 * width and abs(left - right) < 0.1 * width


def _near(lines: Sequence[Line], at: int) -> list[Line]:
    line = lines[at]
    return [
        other
        for other in lines[max(at - 4, 0) : at + 5]
        if other.region == line.region and other.page == line.page and abs(other.size - line.size) < 0.5
    ]


def _fills(lines: Sequence[Line], at: int) -> bool:
    """Whether a line runs to the right edge of the lines about it, give or take a longer word."""
    edge = max(other.x1 for other in _near(lines, at))
    return lines[at].x1 > edge - max(0.16 * (lines[at].right - lines[at].left), 3 * lines[at].size)


def _is_indented(lines: Sequence[Line], at: int) -> bool:
    """Whether a line begins further in than its neighbours, as the first line of a paragraph does."""
    line, near = lines[at], _near(lines, at)
    left = min(other.x0 for other in near)
    return 0.7 * line.size < line.x0 - left < 5 * line.size and lines[at - 1].x0 < line.x0 - 0.5 * line.size
