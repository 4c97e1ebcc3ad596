"""Neighbouring assignments of a sentence, put together to claims."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Literal

from recheck.reading.items import NEXT_TO_INTERVAL, Assignment
from recheck.reading.joining import RESULT, RULES, Situation, gap
from recheck.reading.listed import marked, of_several, told_behind
from recheck.reading.numerals import Line


@dataclass(frozen=True, slots=True)
class Draft:
    """Assignments that belong together, before they are judged and named."""

    items: tuple[Assignment, ...]
    line: Line
    inferred: bool = False

    @property
    def first(self) -> int:
        """Index of the first token."""
        return self.items[0].first

    @property
    def after(self) -> int:
        """Index after the last token."""
        return max(item.after for item in self.items)

    def get(self, *quantities: str) -> Assignment | None:
        """The first item with one of these quantities."""
        return next((item for item in self.items if item.quantity in quantities), None)

    def part(self, *parts: str) -> Assignment | None:
        """The first item that plays one of these parts."""
        return next((item for item in self.items if item.part in parts), None)


def drafts(items: Sequence[Assignment], line: Line) -> Iterator[Draft]:
    """Put the assignments of a line together."""
    items = of_several(items, line)
    current: list[Assignment] = []
    inferred = False
    for index, item in enumerate(items):
        if current:
            joins = _joins(current, item, items[index + 1 :], line)
            if joins is None:
                yield Draft(tuple(current), line, inferred)
                current, inferred = _carried(current, item, line), False
            elif joins == "loose":
                inferred = True
        current.append(item)
    if current:
        yield Draft(tuple(current), line, inferred)


def _carried(current: list[Assignment], item: Assignment, line: Line) -> list[Assignment]:
    """An effect size with an interval of its own stands in a claim of its own as well."""
    last = current[-1]
    second = item.quantity == "ci" and last.part in ("effect", "estimate") and len(current) > 1
    return [last] if second and gap(line, last, item)[0] == "tight" else []


def _colons(line: Line) -> int:
    """How many brackets of the line have a colon behind them."""
    return sum(t.text == ":" and line.at(at - 1).text in (")", "]") for at, t in enumerate(line.tokens))


def _joins(
    current: list[Assignment], item: Assignment, rest: Sequence[Assignment], line: Line
) -> Literal["tight", "loose"] | None:
    """Whether an assignment belongs to the current claim, and how surely."""
    distance, semicolon = gap(line, current[-1], item)
    if distance == "apart" and item.quantity == "ci" and NEXT_TO_INTERVAL in current[-1].notes:
        distance = "loose"
    if distance == "apart" and item.part == "p" and told_behind(line, current, item):
        return "loose"
    if distance == "apart" or (item.part != "interval" and any(other.part == "count" for other in current)):
        return None
    # An n in brackets of its own belongs to what stands before it, unless each group has one and a colon:
    # `Rye (n = 20): 5.1 ± 1.1; wheat (n = 24): …`.
    sizes_only = all(other.part == "size" for other in current)
    between = [t.text for t in line.tokens[current[-1].after : item.first]]
    closed = bool({")", "]"} & set(between)) and not (
        item.part == "centre" and between[1:] == [":"] and _colons(line) > 1
    )
    if sizes_only and item.part != "size" and closed:
        return None
    if item.part == "p" and marked(line, item):
        return None
    p_only = all(other.part == "p" for other in current)
    if p_only and item.part in RESULT and _left_behind(line, current[-1], item, semicolon):
        return None
    rule = RULES[item.part]
    if not rule(Situation(current, item, rest, semicolon, distance, line)):
        return None
    return "tight" if distance == "tight" or item.part == "size" else "loose"


def _left_behind(line: Line, p: Assignment, item: Assignment, semicolon: bool) -> bool:
    """Whether a p belongs to the words before it, not to the result that follows.

    `B did not differ from C (p = .71), F(2, 57) = 6.88`: its brackets are closed; or words follow a semicolon.
    """
    depth = 0
    between = line.tokens[p.after : item.first]
    for token in between:
        depth += (token.text in ("(", "[")) - (token.text in (")", "]"))
        if depth < 0:
            return True
    return semicolon and any(token.kind == "word" for token in between)
