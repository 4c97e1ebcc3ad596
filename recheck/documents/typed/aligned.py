"""Words set in columns by spaces or tabs: which stand under one another."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise

import regex

from recheck.documents.typed.cells import Typed

_TOKEN = regex.compile(r"\S+(?: \S+)*")

Column = tuple[int, int]


@dataclass(frozen=True, slots=True)
class Token:
    """Words with single spaces between them, from `start` up to `end` of their line."""

    text: str
    start: int
    end: int


def tokens_of(line: str) -> list[Token]:
    """What stands on a line, parted where two or more spaces stand."""
    return [Token(match[0], *match.span()) for match in _TOKEN.finditer(line.expandtabs(8).rstrip())]


def columns_of(rows: Sequence[Sequence[Token]]) -> Iterator[list[Column]]:
    """Yield the columns that the rows with most tokens share, if these stand under one another; then those of rows with fewer.

    What stands beside all of them, such as a first column without a heading, is a column too.
    """
    for full in sorted({len(row) for row in rows if len(row) > 1}, reverse=True):
        shared = [(10**9, 0)] * full
        for row in rows:
            if len(row) == full:
                shared = [
                    (min(low, token.start), max(high, token.end))
                    for (low, high), token in zip(shared, row, strict=True)
                ]
        columns = sorted(shared + _beside(rows, shared))
        if all(one[1] < other[0] for one, other in pairwise(columns)):
            yield columns


def _beside(rows: Sequence[Sequence[Token]], columns: Sequence[Column]) -> list[Column]:
    """The columns that words make to the left of all others, and to the right."""
    words = [token for row in rows for token in row]
    sides = (
        [token for token in words if token.end < columns[0][0]],
        [token for token in words if token.start > columns[-1][1]],
    )
    return [(min(t.start for t in side), max(t.end for t in side)) for side in sides if side]


def cut_at(line: str, columns: Sequence[Column]) -> list[Token]:
    """The tokens of a line whose columns are ruled: cut where these begin, if no word stands across; else where spaces part it."""
    line = line.expandtabs(8).rstrip()
    starts = [start for start, _ in columns]
    if any(line[start - 1 : start].strip() for start in starts[1:]):
        return tokens_of(line)
    found = []
    for start, end in zip([0, *starts[1:]], [*starts[1:], len(line)], strict=True):
        words = line[start:end].strip()
        if words:
            first = start + len(line[start:end]) - len(line[start:end].lstrip())
            found.append(Token(words, first, first + len(words)))
    return found


def spread(
    tokens: Sequence[Token], columns: Sequence[Column], groups: Sequence[Column], below: Sequence[Token]
) -> list[Token]:
    """Headings over several columns, widened to what they stand over.

    `groups` are the lines ruled under them, `below` the headings on the next line. Without lines, each is
    taken to span one round of the headings that recur below (M, SD, M, SD), or an equal share in whose
    middle it stands.
    """
    if groups:
        return [_widened(token, groups) for token in tokens]
    shared = [column for column in columns[1:] if any(map(column_holds(column), below))]
    alone = [column for column in columns if column not in shared]
    over = [token for token in tokens if not any(column_holds(column)(token) for column in alone)]
    names = [next(t.text for t in below if column_holds(column)(t)) for column in shared]
    shares = [(cells[0][0], cells[-1][1]) for cells in _shares(names, shared, len(over))]
    if len(shares) != len(over) or not all(map(_stands_over, over, shares)):
        return list(tokens)
    wide = {token: _widened(token, [own]) for token, own in zip(over, shares, strict=True)}
    return [wide.get(token, token) for token in tokens]


def _shares(names: Sequence[str], columns: Sequence[Column], count: int) -> list[Sequence[Column]]:
    """The columns under each of so many headings: rounds of names that recur, and what is left for a last one; else equal shares."""
    for times in range(count, max(count - 2, 1), -1):
        start, length = _recurring(names, times)
        if length:
            ends = [start + at * length for at in range(times + 1)]
            rounds = [columns[low:high] for low, high in pairwise(ends)]
            return rounds if times == count else [*rounds, columns[ends[-1] :] or columns[-1:]]
    length, rest = divmod(len(columns), max(count, 1))
    return [] if rest or length < 2 else [columns[at * length :][:length] for at in range(count)]


def _recurring(names: Sequence[str], times: int) -> tuple[int, int]:
    """Where the longest round of names that comes so many times on end begins, and its length; length 0 for none."""
    for length in range(len(names) // times, 1, -1):
        for start in range(len(names) - times * length + 1):
            rounds = {tuple(names[start + at * length :][:length]) for at in range(times)}
            if len(rounds) == 1:
                return start, length
    return 0, 0


def _stands_over(token: Token, share: Column) -> bool:
    """Whether a heading begins where its share begins, or stands in its middle."""
    low, high = share
    middle = (token.start + token.end - low - high) / 2
    return abs(token.start - low) <= 1 or abs(middle) <= 1.5 + 0.1 * (high - low)


def _widened(token: Token, groups: Sequence[Column]) -> Token:
    middle = (token.start + token.end) / 2
    for low, high in groups:
        if low <= middle <= high:
            return Token(token.text, min(low, token.start), max(high, token.end))
    return token


def column_holds(column: Column) -> Callable[[Token], bool]:
    """Tell of tokens whether they stand in a column, at least in part."""
    low, high = column
    return lambda token: token.start < high and token.end > low


def flush_right(rows: Sequence[Sequence[Token]], column: Column) -> bool:
    """Tell whether the words of a column end, and do not begin, at one place."""
    words = [row[0] for row in rows if row and row[0].start < column[1]]
    return len({token.end for token in words}) == 1 < len({token.start for token in words})


def row_of(
    tokens: Sequence[Token], columns: Sequence[Column], line: int, *, indented: bool
) -> list[Typed] | None:
    """Put the tokens of a line into columns; None where two fall into one, or one stands between two."""
    cells: list[Typed] = []
    at = 0
    for token in tokens:
        under = [n for n, (low, high) in enumerate(columns) if token.start < high and token.end > low]
        if not under:
            nearest = min(range(len(columns)), key=lambda n: _distance(token, columns[n]))
            if _distance(token, columns[nearest]) > 2:
                return None
            under = [nearest]
        if under[0] < at:
            return None
        cells += [Typed("", line) for _ in range(at, under[0])]
        indent = token.start - columns[0][0] if under[0] == 0 and indented else 0
        cells.append(Typed(token.text, line, len(under), max(indent, 0)))
        at = under[-1] + 1
    return cells + [Typed("", line) for _ in range(at, len(columns))]


def _distance(token: Token, column: Column) -> int:
    return max(column[0] - token.end, token.start - column[1], 0)
