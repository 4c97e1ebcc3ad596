"""Several results told together in one order: `M = 5.0 and 4.2 (SD = 1.6 and 1.5)`, `d = 0.3 (0.4), p = .02 (.01)`."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

from recheck.reading.claims import Draft
from recheck.reading.intervals import ends_at
from recheck.reading.items import MEAN, Assignment
from recheck.reading.numerals import Line, number_at, relation_at

TOGETHER = "several results are told together here, their numbers in one order"


@dataclass(frozen=True, slots=True)
class _Row:
    """One assignment for each of the results, all from one place, and the index after them.

    `named` is false where no symbol stands before the numbers.
    """

    items: tuple[Assignment, ...]
    after: int
    named: bool = True


def in_parallel(items: Sequence[Assignment], line: Line) -> tuple[list[Assignment], list[Draft]]:
    """The assignments that stand alone, and a draft for each of the results that are told together."""
    rest: list[Assignment] = []
    found: list[Draft] = []
    at = 0
    while at < len(items):
        rows = _lists(items, at, line) or _doubled(items, at, line) or _spreads(items, at, line)
        if rows:
            found += _drafts(rows, line)
            at += sum(row.named for row in rows)
        else:
            rest.append(items[at])
            at += 1
    return rest, found


def _drafts(rows: Sequence[_Row], line: Line) -> Iterator[Draft]:
    first, after = rows[0].items[0].first, max(row.after for row in rows)
    for told in zip(*(row.items for row in rows), strict=True):
        yield Draft(
            tuple(
                replace(item, several=False, doubt="medium", first=first, after=after, notes=(TOGETHER,))
                for item in told
            ),
            line,
        )


_CORE = ("centre", "statistic", "estimate", "effect")
_BESIDE = {"centre": ("spread",), "statistic": ("p", "effect"), "estimate": ("p", "spread"), "effect": ("p",)}


def _lists(items: Sequence[Assignment], at: int, line: Line) -> list[_Row]:
    """Lists of equal length that stand side by side from `at` on; none where there is only one."""
    first = items[at]
    row = _list_at(line, first) if first.part in _CORE and first.several else None
    if row is None:
        return []
    rows = [row]
    for item in items[at + 1 : at + 4]:
        fits = item.part in _BESIDE[first.part] and item.quantity not in {r.items[0].quantity for r in rows}
        between = line.tokens[rows[-1].after : item.first]
        stops = (".",) if first.part == "centre" else (";", ".")
        near = len(between) <= 3 and not any(t.kind == "num" or t.text in stops for t in between)
        following = _list_at(line, item) if fits and near else None
        if following is None or len(following.items) != len(row.items):
            break
        rows.append(following)
    behind = line.tokens[rows[-1].after : rows[-1].after + 9]
    told = first.part == "centre" or any(token.low == "respectively" for token in behind)
    return rows if len(rows) > 1 and told else []


def _list_at(line: Line, item: Assignment) -> _Row | None:
    """All numbers of a list such as `.41 and 1.92`, `2.1, 3.4, and 1.0`, `.03 and < .001`."""
    if not item.several:
        return None
    told, at = [item], item.after
    while len(told) < 12:
        past = at + (line.at(at).text == ",")
        past += line.at(past).low in ("and", "&", "vs", "versus") or (past == at and line.at(at).text == "/")
        past += line.at(past - 1).low == "vs" and line.at(past).text == "."
        relation, number_starts = relation_at(line, past)
        number = number_at(line, number_starts) if past > at else None
        if number is None or number.percent != item.printed.percent:
            break
        told.append(replace(item, printed=number.printed(line, relation or item.printed.relation)))
        at = number.after
    alike = len({one.printed.decimals > 0 for one in told}) == 1
    return _Row(tuple(told), at) if len(told) > 1 and alike else None


def _doubled(items: Sequence[Assignment], at: int, line: Line) -> list[_Row]:
    """Results of a second kind in brackets behind each number: `d = 0.3 (0.4), 95% CI [.1, .5] ([.2, .6])`."""
    if items[at].part not in ("estimate", "statistic", "effect") or items[at].several:
        return []
    rows: list[_Row] = []
    for item in items[at : at + 6]:
        between = line.tokens[rows[-1].after : item.first] if rows else ()
        if len(between) > 2 or any(token.text not in (",", ";") for token in between):
            break
        row = _behind(line, item)
        if row is None:
            break
        rows.append(row)
    parts = {row.items[0].part for row in rows}
    return rows if len(rows) > 1 and "interval" in parts else []


def _spreads(items: Sequence[Assignment], at: int, line: Line) -> list[_Row]:
    """`5.0 and 4.2 cm (SD = 1.6 and 1.5)`: the means that nobody names before a list of their spreads."""
    row = _list_at(line, items[at]) if items[at].part == "spread" else None
    if row is None or line.at(items[at].first - 1).text not in ("(", "["):
        return []
    end = items[at].first - 1
    end -= line.at(end - 1).kind == "word"
    means: list[Assignment] = []
    while len(means) < len(row.items):
        number = number_at(line, end - 1) if line.at(end - 1).kind == "num" else None
        if (
            number is None
            or number.decimals == 0
            or number.after != end
            or line.at(end - 2).text in ("-", "/", "=")
        ):
            return []
        means.insert(0, Assignment(MEAN, number.printed(line), end - 1, end, loose=True))
        end -= 1
        end -= line.at(end - 1).low == "and"
        end -= line.at(end - 1).text == ","
    if items[at - 1].after > means[0].first and at:
        return []
    return [_Row(tuple(means), means[-1].after, named=False), row]


def _behind(line: Line, item: Assignment) -> _Row | None:
    """An assignment and the second number, or the second interval, in brackets right behind it."""
    if line.at(item.after).text not in ("(", "["):
        return None
    if item.part == "interval":
        inner = item.after + (line.at(item.after + 1).text in ("(", "["))
        ends = ends_at(line, inner)
        if ends is None or len(item.extra) < 2:
            return None
        low, high, after = ends
        values = (("ci_low", low.printed(line)), ("ci_high", high.printed(line)), *item.extra[2:])
        second = replace(item, printed=values[0][1], extra=values)
        return _Row((item, second), after + (inner > item.after))
    relation, at = relation_at(line, item.after + 1)
    number = number_at(line, at)
    if number is None or line.at(number.after).text not in (")", "]") or item.extra:
        return None
    alike = number.decimals == item.printed.decimals or item.part == "p"
    second = replace(item, printed=number.printed(line, relation or item.printed.relation))
    return _Row((item, second), number.after + 1) if alike else None
