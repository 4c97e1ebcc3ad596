"""Where tables stand on a page: under or over a caption, between rules, or by rows of numbers alone."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from recheck.documents.pdf.lines import Line
from recheck.documents.pdf.rules import Rules
from recheck.documents.pdf.tables.captions import Caption
from recheck.documents.pdf.tables.notes import starts_note
from recheck.documents.pdf.tables.row_kinds import in_line, is_head, is_numbers, is_tabular
from recheck.documents.pdf.tables.row_runs import TALLEST_TITLE, run_of
from recheck.documents.pdf.tables.text_rows import Ground, Row, is_wordy
from recheck.documents.sections import captioned

_LEAST_WIDTH = 60.0


@dataclass(slots=True, eq=False)
class Area:
    """A table's place in the level frame: edges, rules across it from the top, its caption.

    `title` is the stretch (from, to) in which the caption stands.
    """

    left: float
    right: float
    top: float
    bottom: float
    full: list[float] = field(default_factory=list)
    caption: Caption | None = None
    title: tuple[float, float] | None = None

    def rows(self, ground: Ground) -> list[Row]:
        """The rows of words inside."""
        return ground.rows(self.left, self.right, self.top, self.bottom)


@dataclass(slots=True, eq=False)
class Finder:
    """Looks for tables on one page."""

    ground: Ground
    rules: Rules
    captions: list[Caption]
    lines: Sequence[Line]

    def areas(self) -> list[Area]:
        """The areas of tables, those with captions first."""
        found: list[Area] = []
        for caption in self.captions:
            area = self._of_caption(caption, found)
            if area is not None:
                found.append(area)
        found += self._between_rules(found)
        return found + self._at_top(found)

    def _at_top(self, taken: Sequence[Area]) -> list[Area]:
        """The rest of a table of the page before: rows of numbers at the top of a page, a rule under the last."""
        if not len(self.ground.free):
            return []
        for left, right, bottom in self._across(-1e9, 1e9):
            rows = self.ground.rows(left, right, -1e9, bottom)
            if rows and bottom - rows[-1].base < 1.6 * rows[-1].size and all(is_numbers(row) for row in rows):
                area = Area(left, right, rows[0].base - rows[0].size, bottom + 0.1, [])
                return [] if _overlaps(area, taken) else [area]
        return []

    def _of_caption(self, caption: Caption, taken: Sequence[Area]) -> Area | None:
        below, above = self._under(caption), self._over(caption)
        below = None if below is None or _overlaps(below, taken) else below
        above = None if above is None or _overlaps(above, taken) else above
        if below is not None and above is not None:
            down = below.top - caption.line.base
            up = caption.line.base - above.bottom
            return above if up < 0.5 * down else below
        return below or above or self._by_rows(caption, taken)

    def _under(self, caption: Caption) -> Area | None:
        """The table whose first rule follows the caption."""
        line = caption.line
        reach = line.base + TALLEST_TITLE * 1.35 * line.size
        stop = min(
            (c.line.base for c in self.captions if c.line.base > line.base + 2 and _beside(c.line, line)),
            default=1e9,
        )
        for left, right, top in self._across(line.base - 0.2 * line.size, min(reach, stop - 4)):
            if right < line.x0 + 5 or left > max(line.x1, line.right) - 5:
                continue
            area = self._down(left, right, top)
            if area is None:
                continue
            between = self.ground.rows(left, right, line.base + 2, top)
            if sum(is_tabular(row) for row in between) > 1:
                return None
            area.caption, area.title = caption, (line.base - 0.7 * line.size, top)
            return area
        return None

    def _over(self, caption: Caption) -> Area | None:
        """The table whose last rule the caption follows directly."""
        line = caption.line
        for left, right, bottom in reversed(
            self._across(line.base - 4.5 * line.size, line.base - 0.5 * line.size)
        ):
            if right < line.x0 + 5 or left > line.x1 - 5:
                continue
            between = self.ground.rows(left, right, bottom, line.base - 2)
            noted = between and starts_note(between[0], self.ground)
            if not noted and any(is_wordy(row, right - left) for row in between):
                continue
            area = self._up(left, right, bottom)
            if area is not None:
                end = self._title_end(caption, area)
                area.caption, area.title = caption, (line.base - 0.7 * line.size, end)
            return area
        return None

    def _title_end(self, caption: Caption, area: Area) -> float:
        """How far down a caption under its table goes."""
        line = caption.line
        base = line.base
        for row in self.ground.rows(min(area.left, line.x0), max(area.right, line.x1), base + 2, base + 120):
            if row.base - base > 1.5 * line.size or abs(row.size - line.size) > 0.4:
                break
            base = row.base
        return base + 0.3 * line.size

    def _across(self, top: float, bottom: float) -> list[tuple[float, float, float]]:
        """Rules between two heights, pieces side by side taken as one, from the top."""
        level = self.rules.level
        inside = level[(level[:, 2] > top) & (level[:, 2] < bottom)]
        found: list[list[float]] = []
        for left, right, at in inside.tolist():
            near = [rule for rule in found if abs(rule[2] - at) < 1.5 and -2 < left - rule[1] < 14]
            if near:
                near[0][1] = max(near[0][1], right)
            else:
                found.append([left, right, at])
        return [(a, b, c) for a, b, c in found if b - a > _LEAST_WIDTH]

    def _down(self, left: float, right: float, top: float) -> Area | None:
        """Follow rules of about the same width down the page as long as rows of a table stand between."""
        area = Area(left, right, top, top, [top])
        for a, b, at in self._across(top + 2, 1e9):
            if not _same_span(a, b, area):
                if (
                    at - area.bottom < 60
                    and a <= area.left + 4
                    and b >= area.right - 4
                    and len(area.full) == 1
                ):
                    area.left, area.right = a, b
                else:
                    continue
            rows = self.ground.rows(area.left, area.right, area.bottom, at)
            if self._ends(rows, area, at):
                break
            if not rows and len(area.full) == 1:
                area.top = at
                area.full = []
            area.full.append(at)
            area.bottom = at
        return self._checked(area)

    def _up(self, left: float, right: float, bottom: float) -> Area | None:
        """The same upwards from the last rule."""
        area = Area(left, right, bottom, bottom, [bottom])
        for a, b, at in reversed(self._across(-1e9, bottom - 2)):
            if not _same_span(a, b, area):
                continue
            rows = self.ground.rows(area.left, area.right, at, area.top)
            if self._ends(rows, area, at):
                break
            area.full.insert(0, at)
            area.top = at
        return self._checked(area)

    def _ends(self, rows: Sequence[Row], area: Area, at: float) -> bool:
        """Whether what stands before a rule is no part of the table."""
        width = area.right - area.left
        if not rows:
            return abs(at - area.bottom) > 30 and abs(area.top - at) > 30
        if any(
            area.left - 5 <= c.line.x0 <= area.right and rows[0].base - 2 <= c.line.base <= rows[-1].base + 2
            for c in self.captions
        ):
            return True
        if starts_note(rows[0], self.ground) and all(len(row.chunks(1.2)) == 1 for row in rows):
            return True
        wordy = sum(is_wordy(row, width) for row in rows)
        tabular = sum(is_tabular(row) for row in rows)
        return (wordy >= 2 and wordy > tabular) or (
            len(rows) > 1 and not tabular and len(area.full) > 1 and wordy > 0
        )

    def _checked(self, area: Area) -> Area | None:
        """The area with what stands beyond its rules, if it holds rows of a table."""
        self._with_rows_below(area)
        if area.bottom - area.top < 8:
            return None
        self._beyond_edges(area)
        self._with_rows_above(area)
        rows = area.rows(self.ground)
        return area if sum(is_tabular(row) for row in rows) >= 1 and len(rows) >= 2 else None

    def _with_rows_below(self, area: Area) -> None:
        """Take in rows that go on below the last rule, where it stands under the head alone."""
        base = area.full[-1] if area.full else area.top
        last, missed = area.bottom, 0
        for row in self.ground.rows(area.left, area.right, area.bottom, area.bottom + 700):
            room = 2.6 * row.size
            if (
                row.base - base > room
                or is_wordy(row, area.right - area.left)
                or starts_note(row, self.ground)
            ):
                break
            if self._is_caption(row):
                break
            base = row.base
            if len(area.full) > 2 and not is_numbers(row) and not in_line(row, area.rows(self.ground)[-6:]):
                break
            if is_tabular(row):
                last, missed = row.base + 0.3 * row.size, 0
            elif (missed := missed + 1) > 2:
                break
        area.bottom = max(area.bottom, last)

    def _with_rows_above(self, area: Area) -> None:
        """Take in the head where it stands on the first rule, not under it."""
        base, found = area.top, 0
        inner = area.left + 0.12 * (area.right - area.left)
        for row in reversed(self.ground.rows(area.left, area.right, area.top - 60, area.top)):
            piece = found and row.left > inner and len(row.texts) < 5 and base - row.base < 1.3 * row.size
            if base - row.base > (2.0 if found else 1.6) * row.size or not (is_head(row) or piece):
                break
            if is_wordy(row, area.right - area.left) or self._is_caption(row):
                break
            base, found = row.base, found + 1
            area.top = row.base - row.size

    def _is_caption(self, row: Row) -> bool:
        return any(abs(caption.line.base - row.base) < 2 for caption in self.captions)

    def _beyond_edges(self, area: Area) -> None:
        """Widen an area to cells that stand in its rows beyond its rules, unless they are a column of text."""
        inside = [
            line
            for line in self.lines
            if area.top < line.base <= area.bottom and line.x1 > area.left and line.x0 < area.right
        ]
        right = max((line.x1 for line in inside), default=area.right)
        left = min((line.x0 for line in inside), default=area.left)
        if right > area.right + 3 and self._are_cells(area, area.right + 3.1, right, len(inside)):
            area.right = right
        if left < area.left - 3 and self._are_cells(area, left, area.left - 3.1, len(inside)):
            area.left = left

    def _are_cells(self, area: Area, left: float, right: float, count: int) -> bool:
        """Whether what stands beside the rows of a table is short, and not text."""
        words = self.ground.between(left, right, area.top, area.bottom)
        wordy = sum(len(texts) > 6 and sum(map(str.islower, texts)) > 3 for texts in words.values())
        if len(words) < max(2, 0.2 * count) or wordy > 0.4 * len(words):
            return False
        # Cells share the base lines of the table; another column of the page has its own, and its own rules.
        own = [row.base for row in area.rows(self.ground)]
        shared = sum(any(abs(base - other) < 1.5 for other in own) for base in words)
        level = self.rules.level
        apart = (level[:, 0] >= left - 2) & (level[:, 1] <= right + 2)
        apart &= (
            (level[:, 2] > area.top - 20)
            & (level[:, 2] < area.bottom + 20)
            & (level[:, 1] - level[:, 0] > _LEAST_WIDTH)
        )
        return shared >= 0.8 * len(words) and not apart.any()

    def _between_rules(self, taken: Sequence[Area]) -> list[Area]:
        """Tables without a caption: three rules of one width or more, rows of numbers between them."""
        found: list[Area] = []
        for left, right, top in self._across(-1e9, 1e9):
            if any(
                area.top - 3 <= top <= area.bottom + 3 and area.left < right and left < area.right
                for area in (*taken, *found)
            ):
                continue
            area = self._down(left, right, top)
            if (
                area is None
                or len(self._across(area.top - 2, area.bottom + 2)) < 2
                or _overlaps(area, (*taken, *found))
            ):
                continue
            if self._numbers(area) and not self._is_figure(area):
                found.append(area)
        return found

    def _numbers(self, area: Area) -> bool:
        rows = [row for row in area.rows(self.ground) if is_tabular(row)]
        with_numbers = [
            row
            for row in rows
            if sum(c.numeric for c in row.chunks(0.9)) >= 1 and any(t.isalpha() for t in row.texts[:2])
        ]
        return len(with_numbers) >= 2 and 2 * len(with_numbers) >= len(rows)

    def _is_figure(self, area: Area) -> bool:
        """Whether the caption of a figure follows directly, or the area is one box with text scattered in it."""
        return any(
            0 < line.base - area.bottom < 60
            and line.x0 < area.right
            and line.x1 > area.left
            and captioned(line.text, sure=True) == "figure"
            for line in self.lines
        )

    def _by_rows(self, caption: Caption, taken: Sequence[Area]) -> Area | None:
        """The table without rules whose rows follow a caption, or stand over it."""
        line = caption.line
        left, right = self._window(caption)
        below = run_of(
            self.ground.rows(left, right, line.base + 2, line.base + 720),
            self.ground,
            right - left,
            self._captions_at(),
        )
        above = run_of(
            list(reversed(self.ground.rows(left, right, line.base - 500, line.base - 2))),
            self.ground,
            right - left,
            self._captions_at(),
        )
        for rows, down in ((below, True), (above, False)):
            if len([row for row in rows if is_tabular(row)]) < 2:
                continue
            top, bottom = min(row.base for row in rows), max(row.base for row in rows)
            size = rows[0].size
            area = Area(
                min(r.left for r in rows), max(r.right for r in rows), top - size, bottom + 0.3 * size, []
            )
            if _overlaps(area, taken):
                continue
            area.caption = caption
            end = top - 0.9 * size if down else self._title_end(caption, area)
            area.title = (line.base - 0.7 * line.size, end)
            return area
        return None

    def _window(self, caption: Caption) -> tuple[float, float]:
        """The width in which rows are looked for: that of the caption's column, or of lines across the page."""
        line = caption.line
        below = [
            other
            for other in self.lines
            if 0 < other.base - line.base < 8 * line.size and other.x0 < line.x1 and other.x1 > line.x0
        ]
        left = min([line.left, *(other.left for other in below)]) - 2
        right = max([line.right, line.x1, *(max(other.right, other.x1) for other in below)])
        return left, right

    def _captions_at(self) -> set[int]:
        return {round(caption.line.base) for caption in self.captions}


def _same_span(left: float, right: float, area: Area) -> bool:
    """Whether a rule is about as wide as the table."""
    width = area.right - area.left
    shared = min(right, area.right) - max(left, area.left)
    return shared > 0.9 * width and right - left < 1.12 * width


def _beside(one: Line, other: Line) -> bool:
    return one.x0 < max(other.x1, other.right) and one.x1 > min(other.x0, other.left)


def _overlaps(area: Area, others: Sequence[Area]) -> bool:
    return any(
        area.top < other.bottom - 1
        and other.top < area.bottom - 1
        and area.left < other.right
        and other.left < area.right
        for other in others
    )
