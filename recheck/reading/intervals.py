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
        elif (
            token.text in ("(", "[")
            and line.at(index + 1).low in ("ci", "cis")
            and line.at(index + 2).text in (")", "]")
        ):
            index += 3
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
