"""Assignments: a symbol, its subscript, its degrees of freedom, a relation and a number."""

from __future__ import annotations

from dataclasses import replace
from decimal import Decimal

from recheck.model import Confidence, Printed, Relation
from recheck.reading.degrees import Values, bracketed_df, closing, subscript_df
from recheck.reading.following import goes_on, value_after
from recheck.reading.intervals import ends_at, interval_at
from recheck.reading.items import CI, DF, MEAN, SPREADS, Assignment, P
from recheck.reading.numerals import Line, Number, number_at, piece, whole
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


def _symbol_first(line: Line, index: int, spelled: Spelled) -> list[Assignment]:
    """`t(22) = 1.71`, `M = 5.00`, `p < .001`; with what belongs to the number itself behind it."""
    beside = _beside_symbol(line, spelled)
    # χ²/df is a ratio of its own.
    if beside is None or (spelled.symbol.part == "df" and line.at(index - 1).text == "/"):
        return []
    df, announced, after = beside
    symbol = _settled(line, spelled, df)
    value = value_after(line, after, symbol)
    if value is None:
        missing = _not_significant(line, index, after, symbol)
        return [missing] if missing else []
    number, relation, loose = value
    number = whole(number) if symbol.part == "size" else number
    if symbol.quantity == "mean" and [t.low for t in line.tokens[max(0, index - 2) : index]] == ["by", "a"]:
        symbol = replace(symbol, quantity="mean_difference", part="estimate")
    if spelled.text.lower() in ("difference", "diff") and (
        number.percent or line.at(index - 1).low in _OTHER_MEANS
    ):
        symbol = Symbol("estimate", "estimate")
    if symbol.quantity == "rd" and abs(number.value) > 1 and not number.percent:
        # `3.1 percentage points`, `31 per 1000`: no share.
        symbol = Symbol("estimate", "estimate")
    if spelled.text == "V" and abs(number.value) <= 1:
        near = {t.low for t in line.tokens[max(0, index - 4) : index]}
        symbol = Symbol("other", "other") if near & _TRACES else Symbol("cramers_v", "effect")
    if symbol.part == "spread" and line.at(number.after).text in ("±", "+"):
        return []
    if loose and symbol.worded and symbol.quantity in _RATIOS and not _sure(line, after, number):
        return []
    if loose and number.decimals < {"p": 2, "centre": 1, "statistic": 1}.get(symbol.part, 0):
        return []
    item = Assignment(
        symbol, number.printed(line, relation), index, number.after, df or (), spelled.label,
        symbol.stated + spelled.stated, symbol.several or goes_on(line, number) or _plural(spelled, df, relation), loose or spelled.glued, announced,
    )  # fmt: skip
    df_after = _df_behind(line, item)
    if df_after:
        item = replace(item, extra=(("df", df_after[0]),), after=df_after[1], doubt="medium")
    if symbol.quantity == "df":
        return [_two_df(line, item) or item]
    following = plus_minus(line, number.after) or _unlabelled(line, item)
    return [item, following] if following else [item]


_TRACES = words("pillai pillai's trace wilks manova pillai-bartlett bartlett")
_RATIOS = frozenset(("or", "rr", "hr", "rd"))


def _sure(line: Line, index: int, number: Number) -> bool:
    """A whole number behind several words is a ratio only where an interval follows: `the odds ratio of burning was 2 (95% CI …`."""
    near = line.tokens[index : number.after - 1]
    opened = line.at(number.after).text in ("(", "[", ",", ";")
    return (
        len(near) <= 1 or number.decimals > 0 or (opened and interval_at(line, number.after + 1) is not None)
    )


_OTHER_MEANS = words(
    "median risk rate proportion percentage relative standardized standardised geometric log"
)


def _plural(spelled: Spelled, df: Values | None, relation: Relation) -> bool:
    """`rs > .30` tells of several correlations; `rs = .30` is one of ranks."""
    return spelled.text in ("rs", "ds", "gs", "bs") and df is None and relation != "="


def _df_behind(line: Line, item: Assignment) -> tuple[Printed, int] | None:
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
        return None if lone else (df, "", after)
    bracket = bracketed_df(line, after, symbol) if symbol.part == "statistic" else None
    if bracket and (df is None or _numbered(df, bracket.values)):
        return bracket.values, "", bracket.after
    if bracket and df and bracket.values and {name for name, _ in bracket.values} <= {"n", "N"}:
        return (*df, *bracket.values), "", bracket.after
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


def _two_df(line: Line, item: Assignment) -> Assignment | None:
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
    return Assignment(
        CI, extra[0][1], item.after, after, extra, doubt=doubt, notes=notes if doubt == "medium" else ()
    )


def _settled(line: Line, spelled: Spelled, df: tuple[tuple[str, Printed], ...] | None) -> Symbol:
    """`f` with two df is F; `T` and `H` without df are neither t nor the H of Kruskal and Wallis."""
    symbol, text = spelled.symbol, spelled.text
    if text == "f":
        return symbol if df and len(df) > 1 else replace(symbol, quantity="f", part="effect")
    if text in ("T", "H", "Wald", "Wald statistic") and not df and not _df_follows(line, spelled.after):
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
