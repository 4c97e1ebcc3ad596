"""A p that belongs to no single result: one of several told together, or that of a legend."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from recheck.reading.items import Assignment
from recheck.reading.numerals import Line
from recheck.reading.tokens import words

_DIVIDING = words("and or vs versus . , / ; & while respectively")
_OF_ALL = words("both all each every any")


def of_several(items: Sequence[Assignment], line: Line) -> list[Assignment]:
    """The assignments, each p marked that tells of several results.

    `t(40) = 1.21 … and … t(40) = 2.86, p = .23 and p = .007`: two statistics, then two p in a row;
    and `both p > .49`.
    """
    found = list(items)
    waiting, at = 0, 0
    while at < len(found):
        if found[at].part == "p":
            after = _row(found, at, line)
            if waiting > 1 and after - at > 1:
                found[at:after] = [replace(item, several=True) for item in found[at:after]]
            elif line.at(found[at].first - 1).low in _OF_ALL:
                found[at] = replace(found[at], several=True)
            waiting, at = 0, after
        else:
            waiting += found[at].part == "statistic"
            at += 1
    return found


def _row(items: Sequence[Assignment], at: int, line: Line) -> int:
    """Index after the p that stand in a row, nothing but dividing words between them."""
    after = at + 1
    while after < len(items) and items[after].part == "p":
        between = line.tokens[items[after - 1].after : items[after].first]
        if any(token.low not in _DIVIDING for token in between):
            break
        after += 1
    return after


_CORRECTED = words(
    "corrected corr cor adjusted adj bonferroni bonf holm fdr fwe fwer tukey sidak šidák hochberg scheffé dunnett"
)


def corrected(line: Line, item: Assignment) -> bool:
    """Whether the words in or right behind a p say that it is corrected: `p(corr) = .06`, `p = .06 (Bonferroni)`, `p = .06, corrected`."""
    at, behind = item.after, []
    while line.at(at).text in ("(", "[", ",", "-") or line.at(at).low in _CORRECTED:
        behind.append(line.at(at).low)
        at += 1
    inside = [token.low for token in line.tokens[item.first + 1 : item.after]]
    return not _CORRECTED.isdisjoint((*behind, *inside))


_OTHER_P = words("trend interaction heterogeneity het linearity homogeneity")


def of_another_test(line: Line, item: Assignment) -> bool:
    """Whether a p is that of a trend, an interaction or of heterogeneity, and so not that of an interval: `P for trend = 0.2`."""
    near = [*line.tokens[item.first + 1 : item.after], *line.tokens[item.after : item.after + 2]]
    return any(token.low in _OTHER_P for token in near)


_MARKS = frozenset("*†‡§¶#")
_LETTERS = frozenset("abcde")


def marked(line: Line, item: Assignment) -> bool:
    """Whether a mark of a legend stands before a p: `*p < .05`, `; a p < .01`; one behind a number (`4.9* p = .03`) does not count."""
    before, closer = line.at(item.first - 1), line.at(item.first - 2)
    if before.text in _MARKS:
        at = item.first - 1
        while line.at(at - 1).text in _MARKS and not line.at(at).spaced:
            at -= 1
        return line.at(at).spaced or line.at(at - 1).text in ("(", "[", ";", ",")
    lettered = before.kind == "word" and before.text in _LETTERS and item.printed.relation != "="
    return lettered and closer.text in (";", "(", "[", ".")


_TELLING = words(
    "but although though however this that it the effect difference association relation relationship trend slope change was is did does "
    "not reach reached failed to statistical statistically significant significance only marginally although and which"
)


def told_behind(line: Line, current: Sequence[Assignment], item: Assignment) -> bool:
    """Whether words tell that a p belongs to the result before it: `(β = −0.73), but this effect was not significant (p = .089)`."""
    between = [
        t for t in line.tokens[current[-1].after : item.first] if t.text not in (")", "(", "]", "[", ",")
    ]
    told = {token.low for token in between}
    return (
        bool(told & {"this", "that", "it", "which"})
        and told <= _TELLING
        and any(other.part in ("statistic", "estimate", "effect") for other in current)
        and not any(other.part == "p" for other in current)
    )
