"""Degrees of freedom beside a statistic: in brackets, lowered, or named."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace

from recheck.model import Printed
from recheck.reading.alike import FLAT
from recheck.reading.numerals import Line, number_at, piece, whole
from recheck.reading.spellings import Spelled, spelled_at
from recheck.reading.symbols import Symbol
from recheck.reading.tokens import Token, words

Values = tuple[tuple[str, Printed], ...]


@dataclass(frozen=True, slots=True)
class Bracket:
    """Degrees of freedom and sample size in brackets, and the index after them."""

    values: Values
    after: int


_CLOSES = {"(": ")", "[": "]", "{": "}"}


def closing(line: Line, index: int, most: int) -> int | None:
    """Index of the bracket that closes the one at `index`, among the next `most` tokens."""
    close, open_ = _CLOSES.get(line.at(index).text), line.at(index).text
    depth = 0
    for at in range(index, min(index + most + 1, len(line.tokens))):
        text = line.at(at).text
        depth += (text == open_) - (text == close)
        if depth == 0:
            return at
    return None


def bracketed_df(line: Line, index: int, symbol: Symbol) -> Bracket | None:
    """Read `(22)`, `(1, 38.4)`, `[1,12]`, `(df = 22)`, `(1, N = 120)`; None for brackets of another kind."""
    end = closing(line, index, most=16)
    if end is None or end == index + 1:
        return None
    plain: list[Printed] = []
    named: list[tuple[str, Printed]] = []
    at = index + 1
    while at < end:
        token = line.at(at)
        if token.text in (",", ";", "/", "&"):
            at += 1
            continue
        spelled = spelled_at(line, at)
        name, past = "", at
        if spelled and spelled.symbol.quantity in ("df", "df1", "df2", "n", "N"):
            name, past = spelled.symbol.quantity, spelled.after
            past += line.at(past).kind == "rel" or line.at(past).text == ":"
        elif token.kind == "word" and _harmless(token):
            at += 1
            continue
        pieces, past = _numbers(line, past, end, symbol, counted=name in ("n", "N"))
        if not pieces:
            return None
        if name in ("", "df"):
            plain += pieces
        else:
            named += [(name, piece) for piece in pieces]
        at = past
    values = _named(symbol.quantity, plain)
    return None if values is None else Bracket((*values, *named), end + 1)


_HARMLESS = words(
    "two tailed one sided welch paired independent unpaired corrected gg and tail side sample samples "
    "student pooled uncorrected adjusted robust"
)


def _harmless(token: Token) -> bool:
    return token.low in _HARMLESS or token.low == "-"


def _numbers(line: Line, index: int, end: int, symbol: Symbol, *, counted: bool) -> tuple[list[Printed], int]:
    """One number, or the several that one token such as `1,38` or `3.63,1252.61` holds.

    t and r have one df only: the comma of `t(46,12)` is a decimal sign.
    """
    token = line.at(index)
    if token.text == "-" and line.at(index - 1).kind == "word":
        return [], index
    if token.kind != "num":
        return [], index
    one_df = symbol.quantity in ("t", "r")
    if one_df and not line.decimal_comma and _two_in_one(token.text):
        return [], index
    pieces = None if one_df or counted else _split(token.text, line, index, end)
    if pieces is None:
        number = number_at(line, index, grouped=True)
        number = whole(number) if number and counted else number
        return ([number.printed(line)], number.after) if number and number.value >= 0 else ([], index)
    return list(_pieces(line, token, pieces)), index + 1


def _two_in_one(text: str) -> bool:
    """Whether `1,58` is no number of a document with decimal points: a t has one df, and 58 may be meant."""
    return text.count(",") == 1 and len(text.partition(",")[2].partition(".")[0]) != 3


def _split(text: str, line: Line, index: int, end: int) -> list[str] | None:
    """Split `1,38` at its comma, unless the comma groups thousands or is a decimal sign.

    Beside another number in the brackets it is one of these: `(3.63, 1,252.61)`, `(1,5; 38,4)`.
    """
    if "," not in text:
        return None
    first, _, rest = text.partition(",")
    inside = [*line.tokens[index + 1 : end], *line.tokens[max(0, index - 2) : index]]
    return None if any(t.kind == "num" for t in inside) else [first, rest]


def _pieces(line: Line, token: Token, pieces: Iterable[str]) -> Iterable[Printed]:
    start = token.start
    for text in pieces:
        yield piece(line, text, start, 0).printed(line)
        start += len(text) + 1


def _named(quantity: str, numbers: list[Printed]) -> Values | None:
    """Name the unlabelled numbers of a bracket by the statistic before it."""
    if quantity in ("u", "w", "z"):
        return ()
    if quantity == "F":
        if len(numbers) == 2:
            return (("df1", numbers[0]), ("df2", numbers[1]))
        return () if not numbers else None
    if quantity == "chi2" and len(numbers) == 2 and numbers[1].decimals == 0:
        return (("df", numbers[0]), ("N", numbers[1]))
    if len(numbers) == 1:
        return (("df", numbers[0]),)
    return () if not numbers else None


def subscript_df(line: Line, spelled: Spelled) -> Values | None:
    """Degrees of freedom lowered beside the symbol, or glued to it: `t₂₂`, `F₁,₃₈`, `t22`."""
    quantity = spelled.symbol.quantity
    if not spelled.numbers or quantity not in ("t", "F", "chi2", "r"):
        return None
    if spelled.text[0] in "QH" and any(token.kind == "num" for token in spelled.numbers):
        # Q1 is a quartile, H1 a hypothesis.
        return None
    pieces: list[Printed] = []
    for token in spelled.numbers:
        start = token.start
        for text in token.text.replace(";", ",").split(","):
            flat = text.translate(FLAT).strip()
            if not flat.replace(".", "", 1).replace("·", "", 1).isdigit():
                return None
            number = piece(line, flat, start + len(text) - len(flat), 0)
            pieces.append(replace(number.printed(line), text=flat))
            start += len(text) + 1
    return _named(quantity, pieces)


def fallen_df(line: Line, spelled: Spelled) -> Bracket | None:
    """`F1, 38 = 4.20`, `F1/38 = 4.20`: lowered df on the base line, divided by a sign, the relation behind them."""
    first, at = spelled.numbers[0], spelled.after
    two = number_at(line, at + 1) if line.at(at).text in (",", "/", ";") else None
    if len(spelled.numbers) != 1 or two is None or two.value < 1 or line.at(two.after).kind != "rel":
        return None
    flat = first.text.translate(FLAT)
    if not flat.isdigit() or len(flat) > 3:
        return None
    one = piece(line, flat, first.start, 0).printed(line)
    return Bracket((("df1", replace(one, text=flat)), ("df2", two.printed(line))), two.after)
