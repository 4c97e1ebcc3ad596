"""Assignments: a symbol, its subscript, its degrees of freedom, a relation and a number."""

from __future__ import annotations

from dataclasses import dataclass, field, replace

from recheck.model import Confidence, Printed, Relation
from recheck.reading.degrees import bracketed_df, closing, subscript_df
from recheck.reading.intervals import ends_at, interval_at
from recheck.reading.numerals import Line, Number, number_at, piece, relation_at
from recheck.reading.spellings import Spelled, spelled_at
from recheck.reading.symbols import Symbol


@dataclass(frozen=True, slots=True)
class Assignment:
    """One quantity with its printed number, on the tokens from `first` up to `after` of its line.

    `extra` holds what stands in its brackets (df, n, the ends of an interval); `several` marks a
    number that tells of more than one result; `loose` one without a relation sign.
    """

    symbol: Symbol
    printed: Printed
    first: int
    after: int
    extra: tuple[tuple[str, Printed], ...] = ()
    label: str = ""
    stated: tuple[str, ...] = ()
    several: bool = False
    loose: bool = False
    announced: str = ""
    doubt: Confidence = "high"
    notes: tuple[str, ...] = field(default=())

    @property
    def quantity(self) -> str:
        """The name of the quantity."""
        return self.symbol.quantity

    @property
    def part(self) -> str:
        """What the quantity does in a claim."""
        return self.symbol.part


P = Symbol("p", "p")
MEAN = Symbol("mean", "centre")
CI = Symbol("ci", "interval")
DF = Symbol("df", "df")
SPREADS = {"sd": Symbol("sd", "spread"), "se": Symbol("se", "spread"), "": Symbol("spread", "spread")}


def assignments(line: Line) -> list[Assignment]:
    """Every assignment of the line, in the order in which they are printed."""
    found: list[Assignment] = []
    index, size = 0, len(line.tokens)
    while index < size:
        group = _at(line, index)
        if group:
            found += group
            index = max(item.after for item in group)
        else:
            index += 1
    return found


def _at(line: Line, index: int) -> list[Assignment]:
    token = line.at(index)
    if token.kind == "num" or token.text in ("-", "+"):
        return _number_first(line, index)
    if token.kind != "word":
        return []
    spelled = spelled_at(line, index)
    if spelled is None:
        return []
    if spelled.symbol.part == "interval":
        return _interval(line, index)
    return _symbol_first(line, index, spelled)


def _number_first(line: Line, index: int) -> list[Assignment]:
    """`95% CI [a, b]`, `5.00 ± 1.65`, `22 degrees of freedom`."""
    interval = _interval(line, index)
    if interval:
        return interval
    number = number_at(line, index)
    if number is None:
        return []
    spread = plus_minus(line, number.after)
    if spread:
        mean = Assignment(MEAN, number.printed(line), index, number.after, loose=True)
        return [mean, spread]
    spelled = spelled_at(line, number.after)
    if spelled and spelled.symbol.quantity == "df" and line.at(spelled.after).kind != "rel":
        return [Assignment(DF, number.printed(line), index, spelled.after, loose=True)]
    return []


def _interval(line: Line, index: int) -> list[Assignment]:
    interval = interval_at(line, index)
    if interval is None:
        return []
    low = interval.low.printed(line)
    extra = [("ci_low", low), ("ci_high", interval.high.printed(line))]
    if interval.level:
        extra.append(("ci_level", replace(interval.level.printed(line), percent=True)))
    symbol = Symbol(interval.quantity, "interval", interval.stated)
    return [
        Assignment(
            symbol, low, index, interval.after, tuple(extra), label=interval.belongs,
            several=interval.several, stated=interval.stated,
        )
    ]  # fmt: skip


def plus_minus(line: Line, index: int) -> Assignment | None:
    """The spread after a `±` at `index`, with the label that directly follows it."""
    index += line.at(index).text in ("°", "º")
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
    if number is None or number.value < 0:
        return None
    after = number.after + (line.at(number.after).text in ("°", "º"))
    if not (named and named.symbol.part == "spread"):
        opened = line.at(after).text == "("
        named = spelled_at(line, after + opened)
        if named and named.symbol.part == "spread" and line.at(named.after).kind not in ("rel", "num"):
            after = named.after + (opened and line.at(named.after).text == ")")
        else:
            named = None
    kind = named.symbol.quantity if named and named.symbol.quantity in SPREADS else ""
    return Assignment(SPREADS[kind], number.printed(line), index, after, loose=True)


def _symbol_first(line: Line, index: int, spelled: Spelled) -> list[Assignment]:
    symbol, after = spelled.symbol, spelled.after
    extra, announced = (), ""
    df = subscript_df(line, spelled)
    if line.at(after).text == "." and line.at(after + 1).kind == "rel":
        after += 1
    if symbol.quantity == "F" and spelled.numbers and df is None and line.at(after).text not in ("(", "["):
        return []
    bracket = None
    if line.at(after).text in ("(", "["):
        bracket = bracketed_df(line, after, symbol) if symbol.part == "statistic" and df is None else None
        if bracket:
            df, after = bracket.values, bracket.after
        else:
            past = _words_in_brackets(line, after, symbol)
            if past is None and not (symbol.bare and line.at(after + 1).kind == "num"):
                return []
            if past is None and len(spelled.text) > 4 and symbol.part in ("estimate", "statistic"):
                after += 1
            announced = " ".join(t.low for t in line.tokens[after:past]) if past else ""
            after = past or after
    symbol = _settled(line, spelled, df)
    extra = df or ()
    value = _value(line, after, symbol)
    if value is None:
        missing = _not_significant(line, index, after, symbol)
        return [missing] if missing else []
    number, relation, loose = value
    if loose and symbol.part in ("p", "centre") and number.decimals < 2 - (symbol.part == "centre"):
        return []
    item = Assignment(
        symbol, number.printed(line, relation), index, number.after, extra, spelled.label,
        symbol.stated + spelled.stated, symbol.several or goes_on(line, number), loose, announced,
    )  # fmt: skip
    if symbol.quantity == "df":
        return _two_df(line, item)
    following = plus_minus(line, number.after) or _unlabelled(line, item)
    return [item, following] if following else [item]


def _two_df(line: Line, item: Assignment) -> list[Assignment]:
    """`df = 1, 38` beside an F."""
    sign, token = line.at(item.after), line.at(item.after - 1)
    if not any(t.text in ("F", "f") for t in line.tokens[max(0, item.first - 12) : item.first]):
        return [item]
    if token.text.count(",") == 1:
        first, second = token.text.split(",")
        one, two = piece(line, first, token.start, item.after), piece(line, second, token.end - len(second), item.after)
    else:
        one_, two_ = number_at(line, item.after - 1), number_at(line, item.after + 1)
        if sign.text not in (",", "/", "&", "and", ";") or one_ is None or two_ is None or two_.percent:
            return [item]
        one, two = one_, two_
    extra = (("df1", one.printed(line)), ("df2", two.printed(line)))
    return [replace(item, symbol=Symbol("df12", "df"), extra=extra, after=two.after, several=False)]


def _unlabelled(line: Line, item: Assignment) -> Assignment | None:
    """`r(48) = .31 [.04, .54]`, `OR = 1.5 (1.2–1.9)`: an interval around the number before it."""
    ratio = item.quantity in ("or", "rr", "hr") or "ci" in item.announced.split()
    brackets = ("[", "(") if ratio else ("[",)
    fit = item.part in ("estimate", "effect") or item.quantity == "r"
    if not fit or item.printed.relation != "=" or line.at(item.after).text not in brackets:
        return None
    ends = ends_at(line, item.after)
    if ends is None or not ends[0].value <= item.printed.value <= ends[1].value:
        return None
    low, high, after = ends
    extra = (("ci_low", low.printed(line)), ("ci_high", high.printed(line)))
    notes = ("the interval in brackets is not labelled as a confidence interval",)
    doubt: Confidence = "high" if "ci" in item.announced.split() else "medium"
    return Assignment(CI, extra[0][1], item.after, after, extra, doubt=doubt, notes=notes if doubt == "medium" else ())


def _settled(line: Line, spelled: Spelled, df: tuple[tuple[str, Printed], ...] | None) -> Symbol:
    """`f` with two df is F; `T` and `H` without df are neither t nor the H of Kruskal and Wallis."""
    symbol, text = spelled.symbol, spelled.text
    if text == "f":
        return symbol if df and len(df) > 1 else replace(symbol, quantity="f", part="effect")
    if text in ("T", "H") and not df and not _df_follows(line, spelled.after):
        return Symbol("other", "other")
    return symbol


def _df_follows(line: Line, index: int) -> bool:
    """Whether degrees of freedom are named within a few tokens: `H = 7.00, df = 1`."""
    return any(t.low == "df" for t in line.tokens[index : index + 7])


def _words_in_brackets(line: Line, index: int, symbol: Symbol) -> int | None:
    """Index after brackets that hold words alone, such as `(two-tailed)`, `(SD)` or `(95% CI)`."""
    end = closing(line, index, most=9)
    if end is None:
        return None
    inside = line.tokens[index + 1 : end]
    if any(t.kind == "rel" for t in inside) or not any(t.kind == "word" for t in inside):
        return None
    numbers = sum(t.kind == "num" for t in inside)
    level = numbers == 1 and any(t.text == "%" for t in inside)
    return end + 1 if numbers == 0 or level or symbol.part == "p" else None


_LINKS = frozenset("of was were is are for value statistic equal to being the at as score ratio found".split())
_AT_LAST = frozenset("of was were is are at as averaged equals equaled equalled equal to value score".split())


def _value(line: Line, index: int, symbol: Symbol) -> tuple[Number, Relation, bool] | None:
    """The number after a symbol, its relation, and whether a relation sign is missing."""
    relation, after = relation_at(line, index)
    if relation is not None and symbol.part == "size":
        chained = spelled_at(line, after)
        if chained and chained.symbol.part == "size":
            return _value(line, chained.after, symbol)
    if relation is not None:
        number = number_at(line, after)
        return (number, relation, False) if number else None
    if line.at(index).kind == "rel":
        return None
    comma = line.at(index).text == "," and symbol.bare and symbol.part in ("spread", "estimate")
    if line.at(index).text == ":" or comma:
        number = number_at(line, index + 1)
        if number:
            return number, "=", True
        return None
    most = 8 if symbol.worded else 3
    return _after_words(line, index, symbol, most)


def _after_words(line: Line, index: int, symbol: Symbol, most: int) -> tuple[Number, Relation, bool] | None:
    after = index
    while after - index <= most:
        token = line.at(after)
        number = number_at(line, after)
        if number and after > index and token.text in ("-", "+") and not token.spaced:
            return None
        if number:
            direct = after == index
            linked = not direct and line.at(after - 1).low in _AT_LAST
            return (number, "=", True) if linked or (direct and symbol.bare and token.spaced) else None
        relation, past = relation_at(line, after)
        if relation is not None and after > index:
            number = number_at(line, past)
            return (number, relation, False) if number else None
        if token.text == "-" and not token.spaced and line.at(after + 1).kind == "word" and after > index:
            after += 1
            continue
        if token.kind != "word" or (not symbol.worded and token.low not in _LINKS | {"interaction", "trend"}):
            return None
        if spelled_at(line, after) and token.low not in ("age", "score", "a"):
            return None
        after += 1
    return None


def goes_on(line: Line, number: Number) -> bool:
    """Tell whether a list or a range follows: `.41 and 1.92`, `.34 to .92`, `2.1, 2.3`."""
    after = number.after
    token = line.at(after)
    if token.text == "," and line.at(after + 1).low in ("and", "or"):
        after, token = after + 1, line.at(after + 1)
    if token.low not in ("and", "or", "to", "vs", "versus", "through", "-", ",", "/", "&"):
        return False
    following = number_at(line, after + 1)
    if following is None or interval_at(line, after + 1) or line.at(following.after).text == "±":
        return False
    alike = (following.decimals > 0) == (number.decimals > 0)
    if token.text == ",":
        return alike and following.decimals > 0
    if token.low in ("and", "or") and number.decimals == 0:
        return alike and line.at(following.after).kind != "word"
    return alike


def _not_significant(line: Line, index: int, after: int, symbol: Symbol) -> Assignment | None:
    """`p = n.s.`: larger than the level, whatever that is."""
    if symbol.part != "p" or line.at(after).kind != "rel":
        return None
    return ns_at(line, after + 1, index)


def ns_at(line: Line, index: int, first: int) -> Assignment | None:
    """`ns`, `n.s.` or `not significant` at `index`, standing in the place of p."""
    token = line.at(index)
    words = 1
    if token.low == "not" and line.at(index + 1).low in ("significant", "sig"):
        words = 2
    elif token.low != "ns" or token.kind != "word":
        return None
    if line.at(index + words).kind in ("rel", "num", "word"):
        return None
    from decimal import Decimal

    start, end = token.start, line.at(index + words - 1).end
    page, box = line.view.box(start, end)
    # The level itself is put in where the document's alpha is known.
    value = Printed(line.view.printed_text(start, end), Decimal("0.05"), 2, ">", page=page, box=box)
    return Assignment(P, value, first, index + words, notes=("not significant is read as p > alpha",))
