"""The hand of one author: how one person prints statistics throughout a text."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from contextvars import ContextVar
from dataclasses import dataclass, replace
from decimal import Decimal

import numpy as np

from tests.soundness.rounding import HALF_EVEN, HALF_UP, rounded
from tests.soundness.samples import Piece, Told

SYMBOLS = {
    "plain": {
        "t": ["t"], "F": ["F"], "r": ["r"], "z": ["z", "Z"], "chi2": ["χ²", "χ2", "chi-square", "X2"],
        "p": ["p", "p", "P"], "d": ["d", "Cohen's d", "Cohen’s d"], "g": ["g", "Hedges' g", "Hedges’ g"],
        "d_z": ["dz", "d_z"], "eta2": ["η²", "η2", "eta squared"], "d_av": ["dav", "d_av"], "d_rm": ["drm", "d_rm"],
        "partial_eta2": ["ηp²", "η²p", "partial η²", "partial eta squared", "ηp2"],
        "omega2": ["ω²"], "epsilon2": ["ε²"], "phi": ["φ", "phi"], "cramers_v": ["V", "Cramér's V"],
        "b": ["b", "B"], "se": ["SE"], "beta": ["β"], "or": ["OR"], "delta": ["Glass's Δ"],
    },
    "markdown": {
        "t": ["*t*", "_t_"], "F": ["*F*", "_F_"], "r": ["*r*", "_r_"], "z": ["*z*"], "chi2": ["χ²", "χ^2^", "*χ*²"],
        "p": ["*p*", "_p_"], "d": ["*d*", "_d_"], "g": ["*g*"], "d_z": ["*d*~z~"], "eta2": ["η²"],
        "partial_eta2": ["η²~p~", "*η*~p~²"],
    },
    "math": {"t": ["𝑡"], "F": ["𝐹"], "r": ["𝑟"], "z": ["𝑧"], "chi2": ["𝜒2", "𝜒²"], "p": ["𝑝"], "d": ["𝑑"]},
    "tex": {
        "chi2": [r"\chi^2"], "eta2": [r"\eta^2"], "partial_eta2": [r"\eta_p^2", r"\eta^2_p"],
        "d_z": ["d_z"], "omega2": [r"\omega^2"], "phi": [r"\phi"], "beta": [r"\beta"], "or": ["OR"], "se": ["SE"],
        "cramers_v": ["V", "V_C"], "epsilon2": [r"\epsilon^2"], "d_av": ["d_{av}"], "d_rm": ["d_{rm}"],
        "delta": [r"\Delta"],
    },
}  # fmt: skip
BOUNDED = {"p", "r", "eta2", "partial_eta2", "omega2", "epsilon2", "phi", "cramers_v", "beta"}


def one(rng: np.random.Generator, choices: Sequence[str]) -> str:
    """Draw one of several spellings."""
    return choices[int(rng.integers(len(choices)))]


@dataclass(frozen=True, slots=True)
class Hand:
    """The habits of one author; `rng` draws what varies from result to result."""

    rng: np.random.Generator
    comma: bool
    letters: str
    minus: str
    leading_zero: bool
    equals: str
    separator: str
    df_style: str
    p_first: bool
    wrap: str
    group_style: str
    ci_style: str
    how: str
    places: dict[str, int]

    def number(self, value: Decimal, bounded: bool = False) -> str:
        """Write one rounded number."""
        text = f"{abs(value):f}"
        if bounded and not self.leading_zero and text.startswith("0.") and abs(value) < 1:
            text = text[1:]
        if value.is_signed():
            text = self.minus + text
        return text.replace(".", ",") if self.comma else text

    def rounded(self, value: float, decimals: int) -> Decimal:
        """Round in the way of this author's program; a zero keeps no sign half of the time."""
        result = rounded(value, decimals, self.how)
        return abs(result) if not result and self.rng.random() < 0.5 else result

    def symbol(self, quantity: str) -> str:
        """One spelling of a quantity's symbol in this author's letters."""
        table = SYMBOLS[self.letters].get(quantity)
        if table is None:
            single = self.letters == "tex" and len(quantity) == 1
            table = [quantity] if single else SYMBOLS["plain"].get(quantity, [quantity])
        return one(self.rng, table)

    def relation(self, sign: str) -> str:
        """Write = or < with this author's spaces."""
        return self.equals.replace("=", sign)

    def told(self, quantity: str, value: Decimal, symbol: str | None = None) -> Piece:
        """`symbol = number` for a value that is already as printed."""
        name = self.symbol(quantity) if symbol is None else symbol
        text = f"{name}{self.relation('=')}{self.number(value, quantity in BOUNDED)}"
        return Piece(text, {quantity: ("=", value)})

    def effect(self, quantity: str, value: float, symbol: str | None = None) -> Piece:
        """An effect size or another single number."""
        return self.told(quantity, self.rounded(value, self.places["effect"]), symbol)

    def statistic(self, quantity: str, value: float, df: Sequence[float | Decimal], extra: str = "") -> Piece:
        """A test statistic with its degrees of freedom."""
        return self.statistic_told(quantity, self.rounded(value, self.places["statistic"]), df, extra)

    def statistic_told(
        self,
        quantity: str,
        value: Decimal,
        df: Sequence[float | Decimal],
        extra: str = "",
        symbol: str | None = None,
    ) -> Piece:
        """A test statistic that is already as printed."""
        name = self.symbol(quantity) if symbol is None else symbol
        dfs = [d if isinstance(d, Decimal) else self.degrees(d) for d in df]
        values: dict[str, Told] = {quantity: ("=", value)}
        keys = ("df",) if quantity != "F" else ("df1", "df2")
        values.update({key: ("=", d) for key, d in zip(keys, dfs, strict=False)})
        number = self.relation("=") + self.number(value, quantity in BOUNDED)
        return Piece(self._with_df(name, dfs, extra, number, quantity), values)

    def degrees(self, df: float) -> Decimal:
        """A whole df as such, a fractional one to this author's decimals."""
        return Decimal(int(df)) if float(df).is_integer() else self.rounded(df, self.places["df"])

    def _with_df(self, name: str, dfs: list[Decimal], extra: str, number: str, quantity: str) -> str:
        if not dfs:
            return name + number
        joint = "; " if self.comma else one(self.rng, [", ", ","])
        inner = joint.join(self.number(d) for d in dfs)
        style = self.df_style
        if style == "after" and len(dfs) == 1 and not extra:
            return f"{name}{number}{self.separator}df{self.relation('=')}{inner}"
        if style == "named" and len(dfs) == 1 and not extra:
            return f"{name}(df{self.relation('=')}{inner}){number}"
        if style == "bracket":
            return f"{name}[{inner}{extra}]{number}"
        if (
            style == "subscript"
            and quantity in ("t", "F")
            and not self.comma
            and all(math.isfinite(d) and d == int(d) for d in dfs)
        ):
            low = f"_{{{inner}}}" if self.letters == "tex" else inner.replace(", ", ",")
            return f"{name}{low}{number}"
        gap = " " if style == "spaced" else ""
        return f"{name}{gap}({inner}{extra}){number}"

    def p(self, p: float, alpha: float = 0.05) -> Piece:
        """The p in one of the ways it is printed; each is true of the computed p."""
        decimals, draw = self.places["p"], self.rng.random()
        thresholds = [a for a in (0.001, 0.01, 0.05) if p < a]
        if thresholds and draw < 0.2:
            return self.p_bound("<", Decimal(str(self.rng.choice(thresholds))))
        if p > alpha and draw < 0.08:
            return self.p_bound(">", Decimal(str(self.rng.choice([a for a in (0.05, 0.10, 0.25) if p > a]))))
        if p > alpha and draw < 0.14:
            return Piece(one(self.rng, ["ns", "n.s.", "not significant"]))
        value = self.rounded(p, decimals)
        if not value:
            return self._tiny_p(p, value)
        if value == 1 and p < 1 and draw < 0.6:
            return (
                self.p_bound(">", Decimal(1) - Decimal(1).scaleb(-decimals))
                if p > 1 - 10**-decimals
                else self.p_told(value)
            )
        return self.p_told(value)

    def p_told(self, value: Decimal) -> Piece:
        """A p that is already as printed, with an equals sign."""
        if self.letters == "plain" and self.rng.random() < 0.06:
            text = f"{one(self.rng, ['p-value', 'p value', 'P value'])}{self.relation('=')}{self.number(value, True)}"
            return Piece(text, {"p": ("=", value)})
        return self.told("p", value)

    def p_bound(self, sign: str, value: Decimal) -> Piece:
        """A p told as a bound; some write ≤ for <."""
        if sign == "<" and self.rng.random() < 0.05:
            sign = "≤"
        shown = r"\leq" if sign == "≤" and self.letters == "tex" else sign
        text = f"{self.symbol('p')}{self.relation(shown)}{self.number(value, True)}"
        return Piece(text, {"p": (sign, value)})

    def _tiny_p(self, p: float, value: Decimal) -> Piece:
        """A p that rounds to nothing: below a bound, all zeros, or in powers of ten."""
        draw = self.rng.random()
        if draw < 0.6:
            bound = Decimal(1).scaleb(-max(2, self.places["p"]))
            if p < bound:
                return self.p_bound("<", bound)
        if draw < 0.8 or p < 1e-300:
            return self.told("p", abs(value))
        mantissa, exponent = f"{p:.1e}".split("e")
        power = int(exponent)
        value = Decimal(mantissa).scaleb(power)
        mantissa = mantissa.replace(".", ",") if self.comma else mantissa
        shown = {
            "tex": rf"{mantissa} \times 10^{{{power}}}", "markdown": f"{mantissa} × 10^{power}^",
        }.get(self.letters, one(self.rng, [f"{mantissa}e{power:03d}", f"{mantissa} × 10−{abs(power)}", f"{mantissa}×10^{power}"]))  # fmt: skip
        return Piece(f"{self.symbol('p')}{self.relation('=')}{shown}", {"p": ("=", value)})

    def interval(self, low: float, high: float, level: float = 0.95) -> Piece:
        """A confidence interval."""
        ends = [self.rounded(v, self.places["ci"]) for v in (low, high)]
        return self.interval_told(ends[0], ends[1], level)

    def interval_told(self, low: Decimal, high: Decimal, level: float = 0.95) -> Piece:
        """A confidence interval whose ends are already as printed."""
        a, b, percent = (
            self.number(low),
            self.number(high),
            f"{level * 100:g}" + (r"\%" if self.letters == "tex" else "%"),
        )
        joint = "; " if self.comma else ", "
        shown = {
            "square": f"{percent} CI [{a}{joint}{b}]", "to": f"{percent} CI {a} to {b}",
            "equals": f"{percent} CI = [{a}{joint}{b}]", "colon": f"{percent} CI: {a} to {b}",
            "round": f"{percent} CI ({a}{joint}{b})", "semicolon": f"{percent} CI [{a}; {b}]",
        }[self.ci_style]  # fmt: skip
        return Piece(shown, {"ci_low": ("=", low), "ci_high": ("=", high)})

    def group(self, mean: float, spread: float, n: int | None, label: str = "SD") -> Piece:
        """A group's mean and spread, and its size where `n` is given, without outer brackets."""
        m, s = self.rounded(mean, self.places["mean"]), self.rounded(spread, self.places["sd"])
        return self.group_told(m, s, n, label)

    def group_told(self, mean: Decimal, spread: Decimal, n: int | None, label: str = "SD") -> Piece:
        """A group's figures that are already as printed."""
        m, s, e = self.number(mean), self.number(spread), self.relation("=")
        joint = "; " if self.comma else ", "
        size = "" if n is None else f"{joint}n{e}{n}"
        word = {"markdown": "*M*", "math": "𝑀"}.get(self.letters, "M")
        shown = {
            "full": f"{word}{e}{m}{joint}{label}{e}{s}{size}",
            "mean": f"mean{e}{m}{joint}{label}{e}{s}{size}",
            "words": f"mean {m}{joint}{label} {s}{size}",
            "nested": f"{word}{e}{m} [{label}{e}{s}]{size}",
            "plusminus": f"{m} ± {s}{size}",
            "n-first": f"n{e}{n}{joint}{word}{e}{m}{joint}{label}{e}{s}" if n else f"{word}{e}{m}{joint}{label}{e}{s}",
        }[self.group_style]  # fmt: skip
        values: dict[str, Told] = {"mean": ("=", mean), label.lower(): ("=", spread)}
        return Piece(shown, values | ({} if n is None else {"n": ("=", Decimal(n))}))

    def join(self, statistic: Piece, p: Piece, *others: Piece) -> Piece:
        """Put the parts of one result beside each other in this author's order."""
        head = [p, statistic] if self.p_first and p.values else [statistic, p]
        parts = [*head, *others]
        text = self.separator.join(piece.text for piece in parts)
        values = {key: told for piece in parts for key, told in piece.values.items()}
        if self.letters == "tex":
            # An author in TeX sets the whole result in mathematics; words stay outside.
            text = f"${text}$" if self.rng.random() < 0.5 else rf"\({text}\)"
        return Piece(text, values)

    def bracket(self, piece: Piece) -> str:
        """The result as it hangs on a sentence: in brackets, or after a comma."""
        return {"paren": f" ({piece.text})", "bracket": f" [{piece.text}]"}.get(self.wrap, f", {piece.text}")


_author: ContextVar[Hand | None] = ContextVar("author", default=None)


@contextmanager
def written_by(hand: Hand) -> Iterator[None]:
    """Let one author write all that is drawn inside: a document keeps to one way of printing."""
    token = _author.set(hand)
    try:
        yield
    finally:
        _author.reset(token)


def draw_hand(rng: np.random.Generator) -> Hand:
    """The author at work, or a new one."""
    author = _author.get()
    return new_hand(rng) if author is None else replace(author, rng=rng)


def new_hand(rng: np.random.Generator) -> Hand:
    """Draw an author."""
    comma = rng.random() < 0.12
    letters = one(rng, ["plain"] * 7 + ["markdown", "math", "tex"])
    how = HALF_UP if rng.random() < 0.5 else HALF_EVEN
    places = {
        "statistic": int(rng.choice([0, 1, 2, 2, 2, 2, 3, 3, 4])), "df": int(rng.choice([0, 1, 1, 2, 2])),
        "p": int(rng.choice([2, 2, 3, 3, 3, 4])), "mean": int(rng.choice([0, 1, 1, 2, 2, 2, 3, 4])),
        "effect": int(rng.choice([1, 2, 2, 2, 3])), "ci": int(rng.choice([1, 2, 2, 2, 3])),
    }  # fmt: skip
    places["sd"] = (
        places["mean"] if rng.random() < 0.7 else max(0, min(4, places["mean"] + int(rng.choice([-1, 1]))))
    )
    return Hand(
        rng=rng, comma=comma, letters=letters,
        minus="-" if letters == "tex" else one(rng, ["-", "−", "−", "–"]),
        leading_zero=comma or rng.random() < 0.4,
        equals=one(rng, [" = "] * 5 + ["=", "=", " =", "\u2009=\u2009", "\u00a0=\u00a0"]) if letters != "tex" else " = ",
        separator="; " if comma else one(rng, [", ", ", ", ", ", "; ", " , "]),
        df_style=one(rng, ["paren"] * 5 + ["spaced", "bracket", "named", "after", "subscript"]),
        p_first=bool(rng.random() < 0.12), wrap=one(rng, ["none", "none", "paren", "bracket"]),
        group_style=one(rng, ["full"] * 4 + ["mean", "words", "nested", "plusminus", "n-first"]),
        ci_style=one(rng, ["square", "square", "to", "equals", "colon", "round", "semicolon"]),
        how=how, places=places,
    )  # fmt: skip
