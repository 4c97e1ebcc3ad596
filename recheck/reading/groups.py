"""Means with their spread: numbers that only the SD beside them tells to be a mean, and what `±` stands for."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from itertools import pairwise

from recheck.model import Printed
from recheck.reading.items import ESTIMATE, MEAN, MEDIAN, NEXT_TO_INTERVAL, SPREADS, Assignment
from recheck.reading.numerals import Line, Number, number_at, part_of_unit
from recheck.reading.tokens import words

_NOT_UNITS = words("and or whereas while but vs versus than to from with without")


def with_means(
    items: Sequence[Assignment], line: Line, announced: str, elsewhere: str = ""
) -> list[Assignment]:
    """Add the means that stand without a symbol before their SD, and pairs such as `5.00 (1.65)`.

    `announced` is the spread that the sentence says stands in brackets, "" where it says none;
    `elsewhere` what the document says.
    """
    found: list[Assignment] = []
    for item in items:
        if item.part == "spread" and not item.several and found and _own_spread(found[-1], item, line):
            found[-1] = replace(found[-1], several=False)
        if item.part == "spread" and not item.several and not _has_mean(found, item, line):
            mean = number_before(line, item, found[-1].after if found else 0)
            if mean:
                found.append(mean)
        if item.quantity == "ci" and not item.several and not _has_centre(found, item, line):
            number = _estimate_before(line, item, found[-1].after if found else 0)
            if number:
                found.append(_as_the_one_before(number, found))
        found.append(item)
        pair = _in_brackets(line, item, announced)
        if pair:
            found.append(pair)
    pairs = _announced_pairs(line, found, announced) if announced else _compared_pairs(line, found, elsewhere)
    return sorted((*found, *pairs), key=lambda item: item.first) if pairs else found


def _has_centre(found: Sequence[Assignment], interval: Assignment, line: Line) -> bool:
    """Tell whether the assignment before takes the interval."""
    if not found:
        return False
    between = line.tokens[found[-1].after : interval.first]
    return len(between) <= 6 and not any(t.kind == "num" and len(t.text) > 1 for t in between)


def _estimate_before(line: Line, interval: Assignment, stop: int) -> Assignment | None:
    """The number before an interval that nobody names, where it may be the estimate: it, or its
    negative, lies in the interval and is printed as finely."""
    number = number_before(line, interval, stop) if interval.label in ("", "difference") else None
    if number is None:
        return None
    ends = dict(interval.extra)
    low, high, value = ends["ci_low"], ends["ci_high"], number.printed.value
    inside = low.value <= value <= high.value or low.value <= -value <= high.value
    if not inside or (number.printed.decimals == 0 and min(low.decimals, high.decimals) > 0):
        return None
    loose = line.at(number.first - 1).kind != "rel"
    if any(t.low in _AGAINST for t in line.tokens[max(stop, number.first - 3) : number.first]):
        return replace(number, doubt="medium", loose=loose)
    return replace(number, symbol=ESTIMATE, doubt="medium", notes=(NEXT_TO_INTERVAL,), loose=loose)


def _as_the_one_before(number: Assignment, found: Sequence[Assignment]) -> Assignment:
    """`a median of 14.2 (95% CI …) versus 10.6 (95% CI …)`: what is set against a median is a median."""
    named = next((item for item in reversed(found) if item.part in _NAMED), None)
    return (
        replace(number, symbol=MEDIAN)
        if number.symbol is MEAN and named and named.quantity == "median"
        else number
    )


_NAMED = ("centre", "estimate", "effect", "statistic")
_AGAINST = words("vs versus v than")


def _own_spread(mean: Assignment, spread: Assignment, line: Line) -> bool:
    """Whether one of several means has its spread right behind it: `means of 5.0 (SD = 1.6) and 4.2 (SD = 1.5)`."""
    between = [token.text for token in line.tokens[mean.after : spread.first]]
    return mean.part == "centre" and mean.several and between in (["("], ["["])


def _has_mean(found: Sequence[Assignment], spread: Assignment, line: Line) -> bool:
    """Tell whether the assignment before takes the spread."""
    if not found:
        return False
    last = found[-1]
    if last.part in ("centre", "estimate", "effect", "statistic"):
        return not any(t.kind == "num" for t in line.tokens[last.after : spread.first])
    if last.part == "size" and len(found) > 1 and found[-2].part == "centre":
        return True
    return last.part == "spread" and last.quantity != spread.quantity


def number_before(line: Line, spread: Assignment, stop: int) -> Assignment | None:
    """The number that directly precedes `(SD = 1.2)`, with its unit between them."""
    at, words, opened = spread.first - 1, 0, False
    while at >= stop:
        token = line.at(at)
        if part_of_unit(line, at):
            at -= 1
            continue
        scale = _scale(line, at) if token.kind == "num" else None
        if scale is not None:
            at = scale
            continue
        if token.kind == "num":
            signed = line.at(at - 1).text == "-"
            if line.at(at + 1).text == ")" and line.at(at - 1 - signed).text == "(":
                return None
            return _mean_at(line, at, stop, opened or spread.printed.percent)
        if token.kind == "word":
            words += 1
            hyphened = not token.spaced and line.at(at - 1).text == "-"
            if token.low in _NOT_UNITS and not hyphened and not (token.low in ("with", "and") and words <= 3):
                return None
        elif token.text in ("(", "["):
            if opened:
                return None
            opened = True
        elif token.text not in (",", "%", "°", "/", ")", "-", "·", "^") and token.kind not in ("sup", "sub"):
            return None
        if words > 6:
            return None
        at -= 1
    return None


def _scale(line: Line, at: int) -> int | None:
    """Index before the words that make a number the end of a scale: `out of 7`, `from 1 to 5`, `of 10 items`, `on a 7-point scale`."""
    one, two, three = (line.at(at - k).low for k in (1, 2, 3))
    following = line.at(at + 1).low
    if following == "-" and line.at(at + 2).low in ("point", "item", "level", "step"):
        return at - 1
    if one == "of" and two in ("out", "maximum", "minimum", "max", "total"):
        return at - 3
    if one == "possible":
        return at - 2 - (two == "a") - (line.at(at - 2 - (two == "a")).low == "of")
    if one == "of" and following in _ITEMS:
        return at - 2
    if one in ("to", "-", "and") and line.at(at - 2).kind == "num" and three in _SPANS:
        return at - 3 - (three != "scale")
    return at - 2 if one == "/" and line.at(at - 2).kind == "num" else None


_ITEMS = words("items points questions trials words tasks answers statements possible sentences pictures")
_SPANS = words("from between scale range of")


def _mean_at(line: Line, at: int, stop: int, opened: bool) -> Assignment | None:
    first = (
        at - 1
        if line.at(at - 1).text in ("-", "+") and line.at(at - 2).kind in ("word", "rel", "sign")
        else at
    )
    before = line.at(first - 1)
    if first < stop or before.kind == "num" or before.text in ("/", "-"):
        return None
    if before.low in (
        "experiment",
        "study",
        "figure",
        "table",
        "n",
        "item",
        "day",
        "week",
        "session",
        "chapter",
    ):
        return None
    number = number_at(line, first)
    if number is None or (number.decimals == 0 and not opened):
        return None
    told = {t.low for t in line.tokens[max(stop, first - 5) : first]}
    letters = before.kind == "rel" and line.at(first - 2).kind == "word" and len(line.at(first - 2).text) <= 2
    symbol = ESTIMATE if told & _NO_MEANS or (letters and line.at(first - 2).text.islower()) else MEAN
    return Assignment(symbol, number.printed(line), first, number.after, loose=True)


_NO_MEANS = words(
    "difference differences change slope coefficient estimate increase decrease increased decreased gain reduction effect "
    "gained lost by reduced"
)


def _in_brackets(line: Line, item: Assignment, announced: str) -> Assignment | None:
    """`M = 5.00 (1.65)`: a spread without a label, or with the one announced."""
    if item.quantity != "mean" or item.several:
        return None
    at = item.after
    while line.at(at).kind == "word" and at < item.after + 2 and line.at(at).low not in _NOT_UNITS:
        at += 1
    number = _bracketed(line, at)
    if (
        number is None
        or (
            number.decimals == 0
            and (item.printed.decimals > 0 or (line.at(at).text == "[" and not announced))
        )
        or number.percent != item.printed.percent
    ):
        return None
    kind = _spread_word(item.announced) or announced
    return Assignment(SPREADS[kind], number.printed(line), at, number.after + 1, loose=True)


def _bracketed(line: Line, index: int) -> Number | None:
    if line.at(index).text not in ("(", "["):
        return None
    number = number_at(line, index + 1)
    if number is None or number.value < 0 or line.at(number.after).text not in (")", "]"):
        return None
    return number


def _announced_pairs(line: Line, items: Sequence[Assignment], announced: str) -> list[Assignment]:
    """Every `5.00 (1.65)` of a sentence that says `mean (SD)`."""
    taken = {k for item in items for k in range(item.first, item.after)}
    pairs: list[Assignment] = []
    for at, token in enumerate(line.tokens):
        if token.kind != "num" or at in taken:
            continue
        number = number_at(line, at)
        if number is None or line.at(at - 1).kind == "rel" or line.at(at - 1).low in _NUMBERED:
            continue
        after = number.after + (
            line.at(number.after).kind == "word" and line.at(number.after).low not in _NOT_UNITS
        )
        spread = _bracketed(line, after)
        if spread is None or spread.percent or (spread.decimals == 0 and number.decimals > 0):
            continue
        first = at - 1 if line.at(at - 1).text == "-" and line.at(at - 1).spaced else at
        signed = number_at(line, first) or number
        pairs.append(Assignment(MEAN, signed.printed(line), first, number.after, loose=True))
        pairs.append(
            Assignment(SPREADS[announced], spread.printed(line), after, spread.after + 1, loose=True)
        )
    return pairs


_NUMBERED = words(
    "section table figure fig experiment study version chapter equation eq model item step sample"
)


def _compared_pairs(line: Line, items: Sequence[Assignment], elsewhere: str) -> list[Assignment]:
    """`5.0 (1.6) vs 4.2 (1.5)` where nothing in the sentence says what they are.

    They are means where the first number of such a pair has been read as one (`the mean was 5.0 (1.6) in rye and 4.2 (1.5) in
    wheat`), or where the document says what stands in brackets behind means and two pairs are set against each other.
    """
    means = [i for i in items if i.quantity == "mean" and i.printed.decimals > 0 and not i.several]
    seeds = [(m, s) for m, s in pairwise(items) if m in means and _of(m, s, line)]
    if not seeds and not elsewhere:
        return []
    kind = seeds[0][1].quantity if seeds else elsewhere
    pairs = _announced_pairs(line, items, kind if kind in SPREADS else "")
    alike = [
        (mean, spread)
        for mean, spread in zip(pairs[::2], pairs[1::2], strict=True)
        if mean.printed.decimals > 0 and spread.printed.decimals > 0 and not mean.printed.percent
    ]
    shapes = {(m.printed.decimals, s.printed.decimals) for m, s in (*seeds, *alike)}
    if len(shapes) != 1 or not (seeds or _set_against(line, alike)):
        return []
    return [replace(item, doubt="medium") for pair in alike for item in pair]


def _of(mean: Assignment, spread: Assignment, line: Line) -> bool:
    """Whether a spread without a label stands in brackets of its own behind its mean."""
    bracket = line.at(spread.first).text == "(" and spread.loose
    return (
        spread.part == "spread" and bracket and spread.first - mean.after <= 2 and spread.printed.decimals > 0
    )


def _set_against(line: Line, pairs: Sequence[tuple[Assignment, Assignment]]) -> bool:
    """Whether words of comparing stand between the first two pairs, and no other number does."""
    if len(pairs) < 2:
        return False
    between = line.tokens[pairs[0][1].after : pairs[1][0].first]
    told = any(token.low in ("vs", "versus", "v", "compared", "than", "and", "to") for token in between)
    return told and len(between) <= 14 and not any(token.kind == "num" for token in between)


_SPREAD_WORDS = (
    ("se", ("sem", "standard error", "se", "s.e.m", "s.e.")),
    ("sd", ("standard deviation", "sd", "s.d.")),
)


def _spread_word(text: str) -> str:
    """`sd` or `se` where the text names one of them, else ""."""
    for kind, names in _SPREAD_WORDS:
        for word in names:
            at = text.find(word)
            end = at + len(word)
            if at >= 0 and not text[at - 1 : at].isalpha() and not text[end : end + 1].isalpha():
                return kind
    return ""


_MEANS = ("mean", "means", "average", "averages", "m")
_JOINED = ("±", "+/-", "+-", "(±", "(+/-", "(", "[", "and", "(and")


def announced_spread(text: str) -> tuple[str, str]:
    """What a text says stands after `±` and in brackets: `mean ± SD`, `M (SE)`, `means and standard errors`.

    A pair: the spread after `±`, the spread in brackets; each `sd`, `se` or "".
    """
    text = text.lower()
    after_sign, in_brackets = "", ""
    for mean in _MEANS:
        at = text.find(mean)
        while at >= 0:
            end = at + len(mean)
            bounded = not text[at - 1 : at].isalpha() and not text[end : end + 1].isalpha()
            rest = text[end : end + 34].lstrip() if bounded else ""
            for sign in _JOINED:
                if rest.startswith(sign):
                    kind = _spread_word(rest[len(sign) : len(sign) + 22].lstrip()[:18])
                    starts = rest[len(sign) :].lstrip().startswith(("s", "±"))
                    if kind and starts and "±" not in sign and "+" not in sign and sign != "and":
                        in_brackets = in_brackets or kind
                    elif kind and starts:
                        after_sign = after_sign or kind
            at = text.find(mean, end)
    return after_sign, in_brackets


_EACH = words("group groups condition conditions arm arms cell cells sample")


def size_of_each(items: Sequence[Assignment], line: Line) -> tuple[Printed | None, list[Assignment]]:
    """The n that a sentence gives once for each of its groups, and the assignments without it.

    `n = 20 in each group`, `20 per group`, `24 bakers per condition`.
    """
    items = [
        item for item in items if not (item.part == "size" and line.at(item.first - 1).low in ("both", "all"))
    ]
    for item in items:
        if item.part == "size" and not item.several and _of_each(line, item.after, words=0):
            return item.printed, [other for other in items if other is not item]
    for at, token in enumerate(line.tokens):
        if token.kind == "num" and token.text.isdigit() and _of_each(line, at + 1, words=2):
            number = number_at(line, at)
            if number and line.at(at - 1).kind not in ("rel", "num"):
                return number.printed(line), list(items)
    return None, list(items)


def _of_each(line: Line, index: int, words: int) -> bool:
    for at in range(index, index + words + 1):
        low = line.at(at).low
        if low == "per" or (low == "each" and at == index):
            alone = low == "each" and line.at(at + 1).kind != "word"
            return alone or line.at(at + 1).low in _EACH
        if low == "in" and line.at(at + 1).low in ("each", "both", "every"):
            return line.at(at + 2).low in _EACH
        if line.at(at).kind != "word":
            return False
    return False
