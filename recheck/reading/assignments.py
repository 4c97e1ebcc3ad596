"""Assignments: a symbol, its subscript, its degrees of freedom, a relation and a number."""

from __future__ import annotations

from dataclasses import replace
from decimal import Decimal

from recheck.model import Printed, Relation
from recheck.reading.behind import df_behind, plus_minus, two_df, unlabelled
from recheck.reading.degrees import Values, bracketed_df, closing, fallen_df, subscript_df
from recheck.reading.following import goes_on, value_after
from recheck.reading.fractions import with_fractions
from recheck.reading.frequencies import NUMBER_WORDS, count_at, count_in_words, sized_count, with_whole
from recheck.reading.intervals import interval_at
from recheck.reading.items import DF, MEAN, Assignment, P
from recheck.reading.numerals import Line, Number, number_at, whole
from recheck.reading.settling import SHARES, by_number, no_symbol, no_value, settled
from recheck.reading.spellings import Spelled, spelled_at
from recheck.reading.symbols import Symbol
from recheck.reading.tokens import words


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
    return with_fractions(with_whole(found, line) if line.shares else found, line)


def _at(line: Line, index: int) -> list[Assignment]:
    token = line.at(index)
    if token.kind == "num" or token.text in ("-", "+"):
        return _number_first(line, index)
    if token.kind != "word":
        return []
    if line.shares and token.low in NUMBER_WORDS and (told := count_in_words(line, index)):
        return [told]
    if (
        token.low in ("q", "p")
        and line.at(index + 1).text in ("1", "25")
        and (found := _interval(line, index))
    ):
        return found
    spelled = spelled_at(line, index)
    if spelled is None:
        return []
    if spelled.symbol.part == "interval":
        return _interval(line, index) or _width(line, index, spelled)
    return _symbol_first(line, index, spelled)


def _number_first(line: Line, index: int) -> list[Assignment]:
    """`95% CI [a, b]`, `5.00 ± 1.65`, `22 degrees of freedom`."""
    interval = _interval(line, index)
    if interval:
        return interval
    number = number_at(line, index)
    if number is None:
        return []
    token = line.at(index)
    count = count_at(line, index, number) if line.shares else None
    if count:
        return [count]
    glued = line.at(index - 1).kind == "word" and not token.spaced
    spread = None if glued else plus_minus(line, number.after)
    if spread:
        mean = Assignment(MEAN, number.printed(line), index, number.after, loose=True)
        return [mean, spread]
    both = _on_two_df(line, number)
    if both:
        return [both]
    spelled = spelled_at(line, number.after)
    if spelled and spelled.symbol.quantity == "df" and line.at(spelled.after).kind != "rel":
        return [Assignment(DF, number.printed(line), index, spelled.after, loose=True)]
    return []


def _on_two_df(line: Line, first: Number) -> Assignment | None:
    """`F = 5.34 on 1 and 38 df`."""
    if line.at(first.after).low not in ("and", ",", "&"):
        return None
    second = number_at(line, first.after + 1)
    spelled = spelled_at(line, second.after) if second else None
    start = first.after - 1
    start -= line.at(start - 1).low == "on"
    named = any(t.text == "F" for t in line.tokens[max(0, start - 8) : start])
    if second is None or spelled is None or spelled.symbol.quantity != "df" or not named:
        return None
    extra = (("df1", first.printed(line)), ("df2", second.printed(line)))
    return Assignment(Symbol("df12", "df"), second.printed(line), start, spelled.after, extra, loose=True)


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


def _width(line: Line, index: int, spelled: Spelled) -> list[Assignment]:
    """`IQR = 2.5`, `interquartile range of 16`: quartiles told by their distance."""
    at = spelled.after
    at += 3 * (line.at(at).text in ("(", "[") and line.at(at + 1).low == "iqr")
    at += line.at(at).low in ("=", ":", "of", "was", "were", "is", ",")
    number = number_at(line, at) if spelled.symbol.quantity == "iqr" else None
    if number is None or number.value < 0 or (number.decimals == 0 and at == spelled.after):
        return []
    return [Assignment(spelled.symbol, number.printed(line), index, number.after, loose=at == spelled.after)]


def _symbol_first(line: Line, index: int, spelled: Spelled) -> list[Assignment]:
    """`t(22) = 1.71`, `M = 5.00`, `p < .001`; with what belongs to the number itself behind it."""
    beside = _beside_symbol(line, spelled)
    # χ²/df is a ratio of its own.
    if beside is None or (spelled.symbol.part == "df" and line.at(index - 1).text == "/"):
        return []
    df, announced, after = beside
    symbol = settled(line, spelled, df)
    if no_symbol(line, index, spelled):
        return []
    value = value_after(line, after, symbol)
    if value is None:
        missing = _not_significant(line, index, after, symbol)
        return [missing] if missing else []
    number, relation, loose = value
    if symbol.part == "other" and number.percent and line.shares:
        count = count_at(line, number.after - 2, number)
        if count:
            return [count]
    number = whole(number) if symbol.part == "size" else number
    if no_value(line, spelled, symbol, (number, relation, loose), after):
        return []
    symbol = by_number(line, index, spelled, symbol, number)
    both = _sizes_of_two(line, symbol, number)
    if both and relation == "=":
        return [Assignment(Symbol("sizes", "size"), number.printed(line, relation), index, both)]
    item = Assignment(
        symbol, number.printed(line, relation), index, number.after, df or (), spelled.label + _contrast(line, spelled),
        symbol.stated + spelled.stated, symbol.several or goes_on(line, number) or _plural(spelled, df, relation), loose or spelled.glued, announced,
    )  # fmt: skip
    return _with_what_follows(line, item, number)


def _sizes_of_two(line: Line, symbol: Symbol, number: Number) -> int | None:
    """Index after the sizes of two groups in one: `n = 17, 18;`, `n = 17 and 18)`; neither is that of the result."""
    if symbol.part != "size" or line.at(number.after).low not in (",", "and", "&"):
        return None
    second = number_at(line, number.after + 1)
    plain = (
        second is not None
        and line.at(number.after + 1).kind == "num"
        and not (second.percent or second.decimals)
    )
    stops = (";", ")", "]", "respectively", *(() if line.at(number.after).text == "," else (",",)))
    ends = second is not None and line.at(second.after).text in stops
    return second.after if second is not None and plain and ends else None


def _with_what_follows(line: Line, item: Assignment, number: Number) -> list[Assignment]:
    """The assignment with the df, the count, the spread or the interval behind its number."""
    df_after = df_behind(line, item)
    if df_after:
        item = replace(item, extra=(("df", df_after[0]),), after=df_after[1], doubt="medium")
    if item.quantity == "df":
        return [two_df(line, item) or item]
    if item.part == "size" and item.printed.relation == "=":
        count = sized_count(line, item.first, number)
        return [item, count] if count else [item]
    following = plus_minus(line, number.after) or unlabelled(line, item)
    if following is None:
        return [item]
    if following.part == "interval":
        item = replace(item, several=False)
    elif item.part == "other" or item.quantity in SHARES:
        # A mean of several coefficients with its spread.
        item = replace(item, symbol=MEAN, loose=True)
    return [item, following]


def _contrast(line: Line, spelled: Spelled) -> str:
    """The rest of a subscript that names two conditions: `M_rye-wheat = 0.3`, `EMM rye - wheat = 0.3`."""
    at = spelled.after
    while line.at(at).kind == "word" or line.at(at).text == "-":
        at += 1
        if at > spelled.after + 4:
            return ""
    told = line.tokens[spelled.after : at] if line.at(at).kind == "rel" else ()
    return "".join(token.text for token in told) if any(token.text == "-" for token in told[:-1]) else ""


def _plural(spelled: Spelled, df: Values | None, relation: Relation) -> bool:
    """`rs > .30` tells of several correlations; `rs = .30` is one of ranks."""
    return spelled.text in ("rs", "ds", "gs", "bs") and df is None and relation != "="


def _beside_symbol(line: Line, spelled: Spelled) -> tuple[Values | None, str, int] | None:
    """Degrees of freedom beside a symbol, words in brackets after it, and the index after both.

    None where brackets of another kind follow: then no number belongs to the symbol.
    """
    symbol, after = spelled.symbol, spelled.after
    df = subscript_df(line, spelled)
    if line.at(after).text == "." and line.at(after + 1).kind == "rel":
        after += 1
    if line.at(after).text not in ("(", "["):
        lone = symbol.quantity == "F" and spelled.numbers and df is None
        fallen = fallen_df(line, spelled) if lone else None
        if fallen:
            return fallen.values, "", fallen.after
        return None if lone else (df, "", after)
    bracket = bracketed_df(line, after, symbol) if symbol.part == "statistic" else None
    if bracket and (df is None or _numbered(df, bracket.values)):
        return bracket.values, "", bracket.after
    if bracket and df and bracket.values and {name for name, _ in bracket.values} <= {"n", "N"}:
        return (*df, *bracket.values), "", bracket.after
    if symbol.quantity == "icc" and (end := closing(line, after, most=6)):
        # `ICC(2,1) = .85`: the model of the coefficient.
        return df, "", end + 1
    past = _words_in_brackets(line, after, symbol)
    if past:
        return df, " ".join(t.low for t in line.tokens[after:past]), past
    if symbol.bare and line.at(after + 1).kind == "num":
        named = len(spelled.text) > 4 and symbol.part in ("estimate", "statistic")
        return df, "", after + named
    return None


def _numbered(lowered: Values, bracketed: Values) -> bool:
    """Whether a lowered 1 or 2 only numbers the test, its df standing in brackets: `t1(31)` by subjects, `t2(47)` by items."""
    return any(name == "df" for name, _ in bracketed) and [value.text for _, value in lowered] in (
        ["1"],
        ["2"],
    )


def _words_in_brackets(line: Line, index: int, symbol: Symbol) -> int | None:
    """Index after brackets that hold words alone, such as `(two-tailed)`, `(SD)` or `(95% CI)`."""
    end = closing(line, index, most=9)
    if end is None:
        return None
    inside = line.tokens[index + 1 : end]
    if any(t.kind == "rel" for t in inside) or not any(t.kind == "word" for t in inside):
        return None
    if symbol.part == "p":
        return end + 1 if all(t.kind != "word" or t.low in _OF_P for t in inside) else None
    numbers = sum(t.kind == "num" for t in inside)
    level = numbers == 1 and any(t.text == "%" for t in inside)
    return end + 1 if numbers == 0 or level else None


_OF_P = words(
    "two one tailed sided tail side t exact perm permutation adj adjusted corrected corr bonf bonferroni fdr holm tukey "
    "uncorrected unadjusted asymptotic mc fisher trend interaction value het sig f chi z"
)


def _not_significant(line: Line, index: int, after: int, symbol: Symbol) -> Assignment | None:
    """`p = n.s.`: larger than the level, whatever that is."""
    if symbol.part != "p" or line.at(after).kind != "rel":
        return None
    return ns_at(line, after + 1, index)


def ns_at(line: Line, index: int, first: int) -> Assignment | None:
    """`ns`, `n.s.` or `not significant` at `index`, standing in the place of p."""
    token = line.at(index)
    size = 1
    if token.low == "not" and line.at(index + 1).low in ("significant", "sig"):
        size = 2
    elif token.low != "ns" or token.kind != "word":
        return None
    if line.at(index + size).kind in ("rel", "num", "word"):
        return None
    start, end = token.start, line.at(index + size - 1).end
    page, box = line.view.box(start, end)
    # The level itself is put in where the document's alpha is known.
    value = Printed(line.view.printed_text(start, end), Decimal("0.05"), 2, ">", page=page, box=box)
    return Assignment(P, value, first, index + size, notes=("not significant is read as p > alpha",))
