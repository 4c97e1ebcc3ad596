"""What stands behind a printed number and belongs to it: a spread, an interval without a name, degrees of freedom."""

from __future__ import annotations

from dataclasses import replace

from recheck.model import Confidence, Printed
from recheck.reading.intervals import ends_at
from recheck.reading.items import CI, SPREADS, Assignment
from recheck.reading.numerals import Line, Number, number_at, piece
from recheck.reading.spellings import spelled_at
from recheck.reading.symbols import Symbol


def plus_minus(line: Line, index: int) -> Assignment | None:
    """The spread after a `±` at `index`, with the label that directly follows it."""
    index += line.at(index).text in ("°", "º")
    bracket = line.at(index).text == "(" and line.at(index + 1).text == "±"
    index += bracket
    sign = line.at(index)
    after = index + 1
    if sign.text == "+" and line.at(index + 1).text in ("/", "-"):
        while line.at(after).text in ("/", "-") and after < index + 3:
            after += 1
    elif sign.text != "±":
        return None
    named = spelled_at(line, after)
    if named and named.symbol.part == "spread":
        after = named.after + (line.at(named.after).kind == "rel")
    number = number_at(line, after)
    if number is None or (number.value < 0 and line.at(after + 1).spaced):
        return None
    after = number.after + (line.at(number.after).text in ("°", "º"))
    after += bracket and line.at(after).text == ")"
    if not (named and named.symbol.part == "spread"):
        opened = line.at(after).text == "("
        named = spelled_at(line, after + opened)
        if named and named.symbol.part == "spread" and line.at(named.after).kind not in ("rel", "num"):
            after = named.after + (opened and line.at(named.after).text == ")")
        else:
            named = None
    kind = named.symbol.quantity if named and named.symbol.quantity in SPREADS else ""
    return Assignment(SPREADS[kind], number.printed(line), index, after, loose=True)


def two_df(line: Line, item: Assignment) -> Assignment | None:
    """`df = 1, 38` beside an F."""
    if not any(t.text in ("F", "f") for t in line.tokens[max(0, item.first - 12) : item.first]):
        return None
    token = line.at(item.after - 1)
    if token.text.count(",") == 1:
        first, second = token.text.split(",")
        one: Number | None = piece(line, first, token.start, item.after)
        two: Number | None = piece(line, second, token.end - len(second), item.after)
    elif line.at(item.after).low in (",", "/", "&", "and", ";"):
        one, two = number_at(line, item.after - 1), number_at(line, item.after + 1)
    else:
        return None
    if one is None or two is None or two.percent:
        return None
    extra = (("df1", one.printed(line)), ("df2", two.printed(line)))
    return replace(item, symbol=Symbol("df12", "df"), extra=extra, after=two.after, several=False)


UNLABELLED = "the interval in brackets is not labelled as a confidence interval"
"""Note on a claim: a table's heading may label it after all."""


def unlabelled(line: Line, item: Assignment) -> Assignment | None:
    """`r(48) = .31 [.04, .54]`, `OR = 1.5 (1.2–1.9)`: an interval around the number before it."""
    ratio = item.quantity in ("or", "rr", "hr", "auc") or "ci" in item.announced.split()
    brackets = ("[", "(") if ratio else ("[",)
    if ratio and item.loose and line.at(item.after).text == "," and (behind := _behind_comma(line, item)):
        return behind
    fit = item.part in ("estimate", "effect") or item.quantity == "r"
    if not fit or item.printed.relation != "=" or line.at(item.after).text not in brackets:
        return None
    ends = ends_at(line, item.after)
    if ends is None or not ends[0].value <= item.printed.value <= ends[1].value:
        return None
    low, high, after = ends
    extra = (("ci_low", low.printed(line)), ("ci_high", high.printed(line)))
    notes = (UNLABELLED,)
    doubt: Confidence = "high" if "ci" in item.announced.split() else "medium"
    return Assignment(
        CI, extra[0][1], item.after, after, extra, doubt=doubt, notes=notes if doubt == "medium" else ()
    )


def _behind_comma(line: Line, item: Assignment) -> Assignment | None:
    """`(OR 1.5, 1.2 to 1.9)`: ends without brackets behind a ratio that they hold."""
    ends = ends_at(line, item.after + 1)
    if ends is None or line.at(ends[2]).text not in (")", "]", ",", ";"):
        return None
    low, high, after = ends
    spread_out = line.tokens[item.after + 1 : after]
    if not low.value < item.printed.value < high.value or not any(t.low in ("to", "-") for t in spread_out):
        return None
    extra = (("ci_low", low.printed(line)), ("ci_high", high.printed(line)))
    return Assignment(CI, extra[0][1], item.after, after, extra, doubt="medium", notes=(UNLABELLED,))


def df_behind(line: Line, item: Assignment) -> tuple[Printed, int] | None:
    """`t = 2.73 (58)`: degrees of freedom in brackets behind the value."""
    at = item.after
    if (
        item.quantity not in ("t", "chi2")
        or item.extra
        or line.at(at).text != "("
        or line.at(at + 2).text != ")"
    ):
        return None
    number = number_at(line, at + 1) if line.at(at + 1).text.replace(".", "", 1).isdigit() else None
    return (number.printed(line), at + 3) if number and number.value >= 1 else None
