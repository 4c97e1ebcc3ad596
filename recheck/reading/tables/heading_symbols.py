"""The symbols of headings: those of prose where they stand by themselves, and the words that only tables use."""

from __future__ import annotations

from dataclasses import dataclass

from recheck.model import Printed
from recheck.reading.degrees import Values, subscript_df
from recheck.reading.numerals import Line
from recheck.reading.spellings import Spelled, spelled_at
from recheck.reading.symbols import Symbol, heading
from recheck.reading.tokens import words


@dataclass(frozen=True, slots=True)
class HeadingSymbol:
    """What a symbol of a heading stands for, the index after it, and what it says besides."""

    quantity: str
    after: int
    stated: tuple[str, ...] = ()
    df: tuple[Printed, ...] = ()


_SHORT_OTHER = 2


def symbol_at(line: Line, at: int, limit: int) -> HeadingSymbol | None:
    """The symbol of a heading that starts at `at` and ends before `limit`; none that is part of a name (`β-carotene`, `d'`)."""
    found = _symbol(line, at, limit)
    if found is None:
        return None
    behind, then = line.at(found.after), line.at(found.after + 1)
    hyphened = behind.text == "-" and not behind.spaced and then.kind == "word" and not then.spaced
    scored = found.quantity == "mean_difference" and behind.low in ("score", "scores")
    return None if hyphened or scored or behind.text == "'" else found


def _symbol(line: Line, at: int, limit: int) -> HeadingSymbol | None:
    token = line.at(at)
    if token.kind != "word" or (at and not token.spaced and line.at(at - 1).kind in ("num", "sub", "word")):
        return None
    if at and line.at(at - 1).text == "-" and not token.spaced:
        return None
    if token.text in ("No", "no") and line.at(at + 1).text not in (".", "(", "[", ",", "%", "of", "/"):
        return None
    if (
        line.at(at).text == "n"
        and line.at(at + 1).text == "/"
        and line.at(at + 2).text == "N"
        and at + 3 <= limit
    ):
        return HeadingSymbol("shares", at + 3)
    own = _longest(line, at, limit)
    lowered: Values = ()
    prose = spelled_at(line, at)
    if prose and _plain(line, at, prose) and prose.after <= limit and (own is None or prose.after > own[1]):
        symbol, after, said = prose.symbol, prose.after, (*prose.symbol.stated, *prose.stated)
        lowered = subscript_df(line, prose) or ()
    elif own:
        symbol, after, said = own[0], own[1], own[0].stated
    else:
        return None
    if symbol.quantity == "mean" and line.at(after - 1).low in ("age", "score", "scores"):
        after = at + 1
    if symbol.quantity == "other" and len(line.at(at).text) < _SHORT_OTHER:
        return None
    if symbol.part == "other" and symbol.quantity not in ("ss", "ms", "mse", "other"):
        return None
    return HeadingSymbol(
        symbol.quantity, after, said, tuple(value for name, value in lowered if name in ("df", "df1", "df2"))
    )


_SUBSCRIPTS = words(
    "adj adjusted corr corrected bonf bonferroni fdr holm tukey value int interaction trend s pb z av rm p g partial change"
)


def _plain(line: Line, at: int, spelled: Spelled) -> bool:
    """Whether a symbol stands by itself: not `M184V`, `t₀`, `P_total`, `Missing`."""
    if spelled.glued or (spelled.label and spelled.label.lower() not in _SUBSCRIPTS):
        return False
    quantity = spelled.symbol.quantity
    if quantity in ("df", "df1", "df2") or (quantity == "chi2" and line.at(at).text[0] in "χXcC"):
        return True
    if quantity in ("t", "F") and _lowered_df(line, spelled):
        return True
    if len(line.at(at).text) > 1:
        return not any(
            t.kind == "num" and not t.spaced and t.text != "2"
            for t in (line.at(k) for k in range(at + 1, spelled.after + 1))
        )
    beside = [line.at(k) for k in range(at + 1, spelled.after + 1)]
    squared = line.at(at).text in "Rrη"
    return not any(
        t.kind == "sub" or (t.kind == "num" and not t.spaced and not (squared and t.text == "2"))
        for t in beside
    )


_LEAST_DF = 3


def _lowered_df(line: Line, spelled: Spelled) -> bool:
    """Whether df are lowered beside a statistic: `t₄₈`, `F₂,₅₇`; `T1`, `t₂` are points in time."""
    values = [value for _, value in subscript_df(line, spelled) or ()]
    lowered = all(token.kind == "sub" for token in spelled.numbers)
    if spelled.symbol.quantity == "F":
        return lowered and len(values) > 1
    return lowered and spelled.text == "t" and len(values) == 1 and values[0].value >= _LEAST_DF


def _longest(line: Line, at: int, limit: int) -> tuple[Symbol, int] | None:
    best: tuple[Symbol, int] | None = None
    spelling: list[str] = []
    index = at
    while index < limit and len(spelling) < 5:
        token = line.at(index)
        if token.kind != "word":
            break
        spelling.append(token.text)
        index += 1
        symbol = heading(tuple(spelling))
        if symbol:
            best = symbol, index
        while index < limit and (line.at(index).text in ("-", ".", "'") or line.at(index).kind == "sup"):
            index += 1
            if best and best[1] == index - 1 and line.at(index - 1).text == ".":
                best = best[0], index
    return best
