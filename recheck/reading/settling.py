"""What a symbol stands for once its degrees of freedom, its number and the words around it are known."""

from __future__ import annotations

from dataclasses import replace

from recheck.model import EFFECTS_ON_RISK, Relation
from recheck.reading.degrees import Values
from recheck.reading.intervals import interval_at
from recheck.reading.items import ESTIMATE
from recheck.reading.numerals import Line, Number
from recheck.reading.spellings import Spelled
from recheck.reading.symbols import Symbol
from recheck.reading.tokens import words

OTHER = Symbol("other", "other")
SHARES = frozenset(("auc", "icc", "kappa", "tau"))
"""Coefficients that lie between −1 and 1."""


def settled(line: Line, spelled: Spelled, df: Values | None) -> Symbol:
    """`f` with two df is F; `T` and `H` without df are neither t nor the H of Kruskal and Wallis."""
    symbol, text = spelled.symbol, spelled.text
    if text == "f" and symbol.quantity != "f2":
        return symbol if df and len(df) > 1 else replace(symbol, quantity="f", part="effect")
    if (text in _NEED_DF or text.startswith("Q")) and not df and not _df_follows(line, spelled.after):
        return OTHER
    return symbol


_NEED_DF = ("T", "H", "Wald", "Wald statistic", "Cochran's Q", "Cochrans Q")
"""Symbols that stand for much else where no degrees of freedom stand beside them."""


def _df_follows(line: Line, index: int) -> bool:
    """Whether degrees of freedom are named within a few tokens: `H = 7.00, df = 1`."""
    return any(t.low == "df" for t in line.tokens[index : index + 7])


def no_symbol(line: Line, index: int, spelled: Spelled) -> bool:
    """Whether letters are the unit of the number before (`0.18 SD per loaf`), or a mean in German only with its SD (`MW = 0.57`)."""
    following = line.at(spelled.after)
    if spelled.symbol.part == "spread" and line.at(index - 1).kind == "num" and len(spelled.text) < 4:
        return (
            following.kind not in ("rel", "num") and following.text not in (":", ",") and not spelled.numbers
        )
    if spelled.text == "MW":
        return not any(t.text in ("SD", "SE", "SEM", "SA", "±") for t in line.tokens[index : index + 12])
    return False


def no_value(
    line: Line, spelled: Spelled, symbol: Symbol, value: tuple[Number, Relation, bool], after: int
) -> bool:
    """Whether the number behind a symbol is none of its values; `after` is where the symbol ends."""
    number, _, loose = value
    if symbol.quantity == "power" and abs(number.value) > 1 and not number.percent:
        # `Peak power was 312 ± 45 W`
        return True
    if symbol.part == "spread" and line.at(number.after).text in ("±", "+"):
        return True
    return loose and _too_loose(line, spelled, symbol, number, after)


_LEAST_DECIMALS = {"p": 2, "centre": 1, "statistic": 1, "effect": 1}


def _too_loose(line: Line, spelled: Spelled, symbol: Symbol, number: Number, after: int) -> bool:
    """Whether a number without a relation sign is no value: `Moisture was 5.3%`, `the mean of 3 loaves`."""
    if spelled.glued and spelled.text[1:2].islower() and not spelled.text.startswith("Mean"):
        return True
    if symbol.worded and symbol.quantity in EFFECTS_ON_RISK and not _sure(line, after, number):
        return True
    if symbol.quantity == "b" and number.decimals == 0:
        return True
    if symbol.quantity == "median" and _ends_phrase(line, number.after):
        return False
    return number.decimals < _LEAST_DECIMALS.get(symbol.part, 0)


def by_number(line: Line, index: int, spelled: Spelled, symbol: Symbol, number: Number) -> Symbol:
    """The symbol at `index` as its number and the words before it show."""
    before = line.at(index - 1).low
    if symbol.quantity == "mean" and [line.at(index - 2).low, before] == ["by", "a"]:
        return replace(symbol, quantity="mean_difference", part="estimate")
    if spelled.text.lower() in ("difference", "diff") and (number.percent or before in _OTHER_MEANS):
        return ESTIMATE
    if symbol.quantity == "mean_difference" and before in ("standardized", "standardised"):
        return ESTIMATE
    if symbol.quantity == "rd" and abs(number.value) > 1 and not number.percent:
        # `3.1 percentage points`, `31 per 1000`: no share.
        return ESTIMATE
    if spelled.text == "V" and abs(number.value) <= 1:
        near = {t.low for t in line.tokens[max(0, index - 4) : index]}
        return OTHER if near & _TRACES else Symbol("cramers_v", "effect")
    if symbol.quantity in SHARES and abs(number.value) > (100 if number.percent else 1):
        # The area under a curve of concentrations, a time constant.
        return OTHER
    return symbol


_TRACES = words("pillai pillai's trace wilks manova pillai-bartlett bartlett")
_OTHER_MEANS = words(
    "median risk rate proportion percentage relative standardized standardised geometric log"
)


def _sure(line: Line, index: int, number: Number) -> bool:
    """A whole number behind several words is a ratio only where an interval follows: `the odds ratio of burning was 2 (95% CI …`."""
    near = line.tokens[index : number.after - 1]
    opened = line.at(number.after).text in ("(", "[", ",", ";")
    return (
        len(near) <= 1 or number.decimals > 0 or (opened and interval_at(line, number.after + 1) is not None)
    )


def _ends_phrase(line: Line, index: int) -> bool:
    """Whether a number counts nothing: a stop, a comma or brackets stand behind it, a unit passed over."""
    if line.at(index + 1).text in ("(", "["):
        index += line.at(index).kind == "word"
    return line.at(index).kind == "end" or line.at(index).text in ("(", "[", ",", ";", ")", "]", ".")
