"""What follows a symbol: its relation and number, directly or after words, alone or in a list."""

from __future__ import annotations

from recheck.model import Relation
from recheck.reading.intervals import interval_at
from recheck.reading.numerals import Line, Number, number_at, relation_at
from recheck.reading.spellings import spelled_at
from recheck.reading.symbols import Symbol
from recheck.reading.tokens import words

_LINKS = words(
    "of was were is are for value statistic equal to being the at as score ratio found interaction trend"
)
_AT_LAST = words(
    "change difference differences of was were is are at as averaged equals equaled equalled equal to value score"
)


def value_after(line: Line, index: int, symbol: Symbol) -> tuple[Number, Relation, bool] | None:
    """The number after a symbol, its relation, and whether a relation sign is missing."""
    if symbol.quantity == "chi2" and line.at(index).low in ("with", "without", "yates", "corrected", "after"):
        index = _past_correction(line, index)
    spread = index + (line.at(index).text in (":", "=") or line.at(index).low == "of")
    if symbol.part == "spread" and line.at(spread).text == "±":
        number = number_at(line, spread + 1)
        return (number, "=", False) if number else None
    relation, after = relation_at(line, index)
    if relation is not None and symbol.part == "size":
        chained = spelled_at(line, after)
        if chained and chained.symbol.part == "size":
            return value_after(line, chained.after, symbol)
    if relation is not None:
        number = number_at(line, after)
        return (number, relation, False) if number else None
    if line.at(index).kind == "rel":
        return None
    comma = line.at(index).text == "," and symbol.bare and symbol.part in ("spread", "estimate", "centre")
    if line.at(index).text == ":" or comma:
        number = number_at(line, index + 1)
        whole = number is not None and symbol.part == "centre" and comma and number.decimals == 0
        return (number, "=", True) if number and not whole else None
    most = 8 if symbol.worded else 3
    return _after_words(line, index, symbol, most) or _after_comma(line, index, symbol, most)


_CORRECTION = words("with without after yates yates' ' s yates's for continuity correction corrected the a")


def _past_correction(line: Line, index: int) -> int:
    """Index after `with Yates' correction`, where the relation of a χ² follows it."""
    at = index
    while line.at(at).low in _CORRECTION and at < index + 8:
        at += 1
    return at if line.at(at).kind == "rel" else index


def _after_comma(line: Line, index: int, symbol: Symbol, most: int) -> tuple[Number, Relation, bool] | None:
    """A ratio behind words and a comma, where its interval follows: `hazard ratio for high/low steam, 2.2; 95% CI 1.4 to 3.3`."""
    if symbol.part != "estimate" or not symbol.worded or line.at(index).low not in ("for", "of", "in"):
        return None
    for at in range(index, index + most + 1):
        token = line.at(at)
        if token.text in (",", ":"):
            number = number_at(line, at + 1)
            behind = line.at(number.after).text in (";", ",", "(", "[") if number else False
            return (number, "=", True) if number and behind and interval_at(line, number.after + 1) else None
        if token.kind != "word" and token.text not in ("/", "-", "'"):
            return None
    return None


def _after_words(line: Line, index: int, symbol: Symbol, most: int) -> tuple[Number, Relation, bool] | None:
    """The number after up to `most` words: `t value of 2.31`, `mean loaf height was 12.3`, `p for trend = .02`."""
    for after in range(index, index + most + 1):
        token = line.at(after)
        number = number_at(line, after)
        if number and _counts_units(line, index, after, number, symbol):
            continue
        if number:
            return (number, "=", True) if _linked(line, index, after, symbol) else None
        relation, past = relation_at(line, after)
        if relation is not None and after > index:
            number = number_at(line, past)
            return (number, relation, False) if number else None
        hyphen = (
            token.text == "-"
            and not token.spaced
            and line.at(after + 1).kind == "word"
            and (after > index or symbol.part == "centre")
        )
        if not hyphen and not _passed_over(line, after, symbol):
            return None
    return None


def _counts_units(line: Line, index: int, after: int, number: Number, symbol: Symbol) -> bool:
    """Whether a number between a worded symbol and its own counts units: `the coefficient for these 8 bakers was 0.92`."""
    before, behind = line.at(after - 1), line.at(number.after)
    told = before.low in ("these", "those", "the", "all", "both", "our") and behind.kind == "word"
    return symbol.part == "effect" and symbol.worded and after > index and number.decimals == 0 and told


def _linked(line: Line, index: int, after: int, symbol: Symbol) -> bool:
    """Whether a number without a relation sign belongs to the symbol: directly behind it, or after `of` or `was`."""
    token = line.at(after)
    if after > index:
        return line.at(after - 1).low in _AT_LAST and (token.spaced or token.text not in "-+")
    return symbol.bare and (token.spaced or line.at(index - 1).text == "(")


def _passed_over(line: Line, index: int, symbol: Symbol) -> bool:
    """Whether a word may stand between a symbol and its number; another symbol may not."""
    token = line.at(index)
    if token.kind != "word" or (not symbol.worded and token.low not in _LINKS):
        return False
    return token.low in ("age", "score", "a") or spelled_at(line, index) is None


def goes_on(line: Line, number: Number) -> bool:
    """Tell whether a list or a range follows: `.41 and 1.92`, `.34 to .92`, `2.1, 2.3`."""
    after = number.after
    token = line.at(after)
    if token.text == "," and line.at(after + 1).text in ("and", "or"):
        after, token = after + 1, line.at(after + 1)
    if token.low == "vs" and line.at(after + 1).text == ".":
        after += 1
    if (
        token.low not in ("and", "or", "to", "vs", "versus", "through", "-", ",", "/", "&")
        or token.text == "OR"
    ):
        return False
    related = token.low in ("and", "or", "vs", "versus", "&") and line.at(after + 1).kind == "rel"
    following = number_at(line, after + 1 + related)
    if following is None or interval_at(line, after + 1) or line.at(following.after).text == "±":
        return False
    alike = (following.decimals > 0) == (number.decimals > 0)
    if token.text == ",":
        return alike and following.decimals > 0
    if token.low in ("and", "or") and number.decimals == 0:
        return alike and line.at(following.after).kind != "word"
    return alike
