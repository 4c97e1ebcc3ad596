"""Confidence intervals in all their spellings, and intervals that are none."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

from recheck.reading.numerals import Line, Number, number_at, piece
from recheck.reading.spellings import spelled_at
from recheck.reading.tokens import words


@dataclass(frozen=True, slots=True)
class Interval:
    """Two ends in a line, the level if it is printed, and the index after them."""

    low: Number
    high: Number
    after: int
    level: Number | None = None
    quantity: str = "ci"
    stated: tuple[str, ...] = ()
    belongs: str = ""
    several: bool = False


def interval_at(line: Line, index: int) -> Interval | None:
    """The interval announced at `index`: `95% CI [a, b]`, `CI95% = a, b`, `(a to b)` after its name."""
    starts = line.at(index).low in ("q", "p", "25")
    named = _named_quartiles(line, index) if starts else None
    if named:
        return named
    past = _quartiles(line, index) if starts else None
    if past:
        at, _ = _to_ends(line, past)
        ends = ends_at(line, at)
        return Interval(ends[0], ends[1], ends[2], quantity="iqr") if ends else None
    level, at = _level(line, index)
    if level is not None:
        at += line.at(at).text == "-"
        while line.at(at).low in _METHODS and at < index + 6:
            at += 1
    spelled = spelled_at(line, at)
    if spelled is None or spelled.symbol.part != "interval":
        return None
    at = spelled.after
    if level is None:
        level, at = _level_after(line, at)
    at, belongs = _to_ends(line, at)
    ends = ends_at(line, at) or _named_ends(line, at)
    if ends is None:
        return None
    low, high, after = ends
    listed = line.at(after).low in ("and", "vs") and ends_at(line, after + 1) is not None
    return Interval(
        low, high, after, level, spelled.symbol.quantity, spelled.symbol.stated, belongs,
        listed or spelled.symbol.several,
    )  # fmt: skip


def _quartiles(line: Line, index: int) -> int | None:
    """Index after `Q1–Q3`, `Q1, Q3`, `P25–P75`, `25th–75th percentile`, `25th and 75th percentiles`."""
    first = _quartile(line, index, "1", "25")
    if first is None or line.at(first).low not in ("-", ",", "to", "and", "/", "through"):
        return None
    after = _quartile(line, first + 1, "3", "75")
    if after is None:
        return None
    return after + (
        line.at(after).low in ("percentile", "percentiles", "centile", "centiles", "quantile", "quantiles")
    )


def _named_quartiles(line: Line, index: int) -> Interval | None:
    """`Q1 = 3.1, Q3 = 5.6`."""
    at = _quartile(line, index, "1", "25") if line.at(index).kind == "word" else None
    low = number_at(line, at + (line.at(at).text in ("=", ":"))) if at else None
    at = (
        _quartile(line, low.after + (line.at(low.after).low in (",", ";", "and")), "3", "75") if low else None
    )
    high = number_at(line, at + (line.at(at).text in ("=", ":"))) if at else None
    return Interval(low, high, high.after, quantity="iqr") if low and high else None


def _quartile(line: Line, index: int, letter: str, percentile: str) -> int | None:
    """Index after `Q1`, `P25` or `25th`."""
    token, following = line.at(index), line.at(index + 1)
    if token.kind == "word":
        number = letter if token.low == "q" else percentile
        fits = token.low in ("q", "p") and following.text == number and not following.spaced
        return index + 2 if fits else None
    if token.text != percentile or following.low not in ("th", "%", "percentile"):
        return None
    return index + 2


_METHODS = words(
    "bootstrap bootstrapped bca percentile profile wald simultaneous exact two sided - bias corrected accelerated "
    "likelihood asymptotic robust parametric tukey bonferroni adjusted"
)


def _level(line: Line, index: int) -> tuple[Number | None, int]:
    """A level such as `95%` before the word."""
    if line.at(index).kind != "num":
        return None, index
    number = number_at(line, index)
    if number is None or not Decimal(50) <= number.value < 100:
        return None, index
    return number, number.after + (line.at(number.after).low == "percent")


def _level_after(line: Line, index: int) -> tuple[Number | None, int]:
    """A level behind the word: `CI95%`, `CI 95%`, `CI (95%)`, `CI_95`."""
    opened = line.at(index).text in ("(", "_", "[", ".")
    number, after = _level(line, index + opened)
    if number is None:
        return None, index
    if opened and line.at(index).text == ".":
        return (number, after) if not line.at(index + 1).spaced else (None, index)
    if opened and line.at(index).text in ("(", "["):
        if not number.percent or line.at(after).text not in (")", "]"):
            return None, index
        return number, after + 1
    if number.percent or not line.at(index).spaced:
        return number, after
    return None, index


_FILLERS = words(
    "of for the was were is from ranged ranging between difference mean in a an around about on limits bounds "
    "lower upper effect estimate differences ci cis slope"
)


def _to_ends(line: Line, index: int) -> tuple[int, str]:
    """Pass over `(CI)`, `for the difference`, `:`, `=`; tell what the interval is said to belong to."""
    belongs = ""
    for _ in range(9):
        token = line.at(index)
        if token.kind == "rel" and token.text in ("=", "≈"):
            index += 1
            break
        if token.text in (":", ","):
            index += 1
        elif token.text in ("(", "[") and (past := _named_again(line, index)):
            index = past
        elif (
            token.low in ("for", "of")
            and (owner := spelled_at(line, index + 1))
            and owner.symbol.part != "interval"
        ):
            belongs = owner.symbol.quantity
            index = owner.after
        elif token.kind == "word" and token.low in _FILLERS:
            belongs = "difference" if token.low.startswith("difference") else belongs
            index += 1
        else:
            break
    return index, belongs


def _two_hyphens(line: Line, index: int) -> bool:
    """Whether two hyphens alike stand for one dash: `1.2--1.9`; in `−0.1–−0.5` a dash and a minus differ."""
    first, second = line.at(index), line.at(index + 1)
    if first.text != "-" or second.text != "-" or second.spaced:
        return False
    return line.view.printed_text(first.start, first.end) == line.view.printed_text(second.start, second.end)


def _named_again(line: Line, index: int) -> int | None:
    """Index after brackets that only name the interval once more: `(CI)`, `[confidence interval]`."""
    at = index + 1
    while line.at(at).low in (
        "ci",
        "cis",
        "iqr",
        "confidence",
        "interval",
        "intervals",
        "interquartile",
        "range",
    ):
        at += 1
    return at + 1 if at > index + 1 and line.at(at).text in (")", "]") else None


def ends_at(line: Line, index: int) -> tuple[Number, Number, int] | None:
    """Two ends with or without brackets: `[a, b]`, `(a to b)`, `(a; b)`, `a–b`, `a, b`."""
    opened = line.at(index).text in ("(", "[", "{")
    at = index + opened
    if line.at(at).low in ("from", "between"):
        at += 1
    halves = _one_token(line, at) if opened else None
    if halves:
        return halves
    low = number_at(line, at)
    if low is None:
        return None
    at = low.after + (line.at(low.after).kind == "word" and line.at(low.after).low in _UNITS)
    separator = line.at(at)
    if separator.low not in (",", ";", "to", "-", "and", "through", "/", ":", "|"):
        return None
    if separator.text == "," and line.at(at + 1).low in ("to", "and"):
        at += 1
    high = number_at(line, at + 1)
    if high is not None and high.value < low.value and _two_hyphens(line, at):
        high = number_at(line, at + 2)
    if high is None:
        return None
    after = high.after
    if opened:
        after += line.at(after).kind == "word" and line.at(after).low in _UNITS
        if line.at(after).text not in (")", "]", "}"):
            return (low, high, after) if line.at(after).text in (",", ";") else None
        after += 1
    return low, high, after


def _named_ends(line: Line, index: int) -> tuple[Number, Number, int] | None:
    """`LL = 0.02, UL = 1.30`, `lower = 0.02, upper = 1.30`."""
    index += line.at(index).text in ("(", "[")
    low = (
        number_at(line, index + 2)
        if line.at(index).low in _LOWER and line.at(index + 1).kind == "rel"
        else None
    )
    if low is None:
        return None
    at = low.after + (line.at(low.after).text in (",", ";"))
    high = number_at(line, at + 2) if line.at(at).low in _UPPER and line.at(at + 1).kind == "rel" else None
    return (low, high, high.after) if high else None


_LOWER = words("ll lower low llci lcl lb")
_UPPER = words("ul upper high ulci ucl ub")
_UNITS = words("g kg mg cm mm m s ms min h points years months days kcal ml l %")


def _one_token(line: Line, index: int) -> tuple[Number, Number, int] | None:
    """`[1,5]`, `[0,0.09]`: two ends that the comma makes look like one number."""
    token, sign = line.at(index), 1
    at = index
    if token.text == "-":
        token, sign, at = line.at(index + 1), -1, index + 1
    if token.kind != "num" or token.text.count(",") != 1 or line.at(at + 1).text not in (")", "]"):
        return None
    first, second = token.text.split(",")
    if not first or not second:
        return None
    low = piece(line, first, token.start, at + 1, sign)
    return low, piece(line, second, token.end - len(second), at + 1), at + 2
