"""Finding a symbol at a place: its words, its square, its subscript."""

from __future__ import annotations

from dataclasses import dataclass, replace

from recheck.reading.alike import FLAT
from recheck.reading.numerals import Line
from recheck.reading.symbols import Symbol, find, glued, longest_spelling
from recheck.reading.tokens import Token


@dataclass(frozen=True, slots=True)
class Spelled:
    """A symbol as it is printed: `after` is the index after it, `numbers` what is lowered beside it."""

    symbol: Symbol
    text: str
    after: int
    label: str = ""
    numbers: tuple[Token, ...] = ()
    stated: tuple[str, ...] = ()
    glued: bool = False


NUMBERED = Symbol("other", "size")
"""`n1 = 14`, `n2 = 11`: sizes of single groups beside a test."""

OTHER = Symbol("other", "other")
"""What looks like a quantity and is none that a claim holds: `ΔR` without its square."""

_SQUARES = frozenset(
    (
        "g",
        "chi2",
        "eta2",
        "partial_eta2",
        "generalized_eta2",
        "omega2",
        "epsilon2",
        "r",
        "F",
        "f",
        "r2",
        "adjusted_r2",
        "delta_r2",
    )
)
_NEEDS_SQUARE = frozenset(("X", "x", "G", "ε", "epsilon", "omega", "v", "c", "w", "h", "khi"))
_NEEDS_SQUARE_OR_OTHER = frozenset(
    ("ΔR", "change in R", "Rchange", "increment in R", "incremental R", "marginal R", "conditional R", "K")
)
_NEEDS_DF = frozenset(("v", "c", "w"))
"""What a wrong code table makes of χ; only `v2(1)` with its degrees of freedom is taken for it."""
_LOWERED = frozenset(("t", "F", "chi2", "r", "n", "N", "df"))


def spelled_at(line: Line, index: int) -> Spelled | None:
    """The symbol that starts at `index`, or None."""
    if line.at(index).kind != "word":
        return None
    base = _words(line, index) or _glued(line, index)
    return _tail(line, base) if base else None


def _words(line: Line, index: int) -> Spelled | None:
    """The longest spelling in the table that starts at `index`."""
    first = line.at(index).text
    most = longest_spelling(first)
    words: list[str] = []
    best: Spelled | None = None
    at = index
    while len(words) < most:
        token = line.at(at)
        if token.kind != "word" or (words and not token.spaced and line.at(at - 1).text not in "-'."):
            break
        words.append(token.text)
        at += 1
        symbol = find(tuple(words))
        if symbol:
            best = Spelled(symbol, token.text if len(words) == 1 else " ".join(words), at)
        if line.at(at).text in ("-", "'", ".") and line.at(at + 1).kind == "word":
            at += 1
    return best


def _glued(line: Line, index: int) -> Spelled | None:
    found = glued(line.at(index).text)
    if found is None:
        return None
    symbol, tail = found
    if tail.lower() in ("diff", "difference") and symbol.quantity == "mean":
        symbol = replace(symbol, quantity="mean_difference", part="estimate")
    return Spelled(symbol, line.at(index).text, index + 1, tail, glued=True)


def _tail(line: Line, base: Spelled) -> Spelled | None:
    """Read the square, the subscript and lowered numbers that follow the name of a symbol."""
    after, squared, label = base.after, False, base.label
    numbers: list[Token] = []
    quantity = base.symbol.quantity
    for _ in range(5):
        token = line.at(after)
        if token.kind == "sup" and (not token.spaced or token.text == "²"):
            squared = squared or (token.text[0] == "²" and quantity in _SQUARES)
        elif (
            token.text[:1] == "2"
            and token.kind == "num"
            and quantity in _SQUARES
            and not squared
            and _is_square(line, after, base)
        ):
            squared = True
            if len(token.text) > 1:
                numbers.append(token._replace(text=token.text[1:], start=token.start + 1))
        elif token.kind == "sub" or (token.kind == "num" and not token.spaced and quantity in _LOWERED):
            numbers.append(token)
        elif token.kind == "num" and not token.spaced and base.text[0] in "QH":
            return None
        elif token.kind == "num" and not token.spaced and base.text in ("BF", "I", "ICC"):
            label = token.text if base.text == "BF" else label
        elif quantity in ("t", "F", "chi2") and _apart(line, after, squared):
            numbers.append(token)
        elif (token.text == "|" and not token.spaced and not numbers) or (
            token.text == "_" and not token.spaced and line.at(after + 1).text in ("(", "[")
        ):
            pass
        elif token.text == "_" and not token.spaced and line.at(after + 1).kind in ("word", "num"):
            after += 1
            label = _subscript(line, after, label, numbers)
            while (
                line.at(after + 1).text == "-"
                and line.at(after + 2).kind == "word"
                and not line.at(after + 2).spaced
            ):
                label += f"-{line.at(after + 2).text}"
                after += 2
        elif _is_subscript(line, after, squared or base.symbol.part == "effect"):
            label = token.text
        else:
            break
        after += 1
    if after != base.after:
        base = replace(base, after=after, label=label, numbers=tuple(numbers))
    return _resolved(line, base, squared)


def _apart(line: Line, index: int, squared: bool) -> bool:
    """Whether a lowered number fell to the base line behind a space: `t 22 = 2.31`, `χ2 3 = 8.4`, `F 1,38 = 4.1`."""
    token, following = line.at(index), line.at(index + 1)
    whole = token.kind == "num" and token.spaced and token.text.replace(",", "").isdigit()
    return whole and following.kind == "rel" and (squared or token.text != "2")


def _is_square(line: Line, index: int, base: Spelled) -> bool:
    """Whether a `2` after a symbol is its exponent: `χ2(1)`, `R 2 = .31`."""
    token, following = line.at(index), line.at(index + 1)
    if token.text != "2" and not (
        base.symbol.quantity == "chi2" and token.text.isdigit() and len(token.text) == 2
    ):
        return False
    if not token.spaced:
        return base.symbol.quantity != "F" or base.text == "f"
    return (
        following.kind in ("rel", "sub")
        or following.text in ("(", "[", "_")
        or following.low in ("p", "g", "adj", "change")
    )


def _subscript(line: Line, index: int, label: str, numbers: list[Token]) -> str:
    token = line.at(index)
    if token.kind == "num":
        numbers.append(token)
        return label
    return f"{label} {token.text}".strip()


def _is_subscript(line: Line, index: int, after_square: bool) -> bool:
    """Whether a short word after a square is a subscript: `η2p`, `R²adj`, `η2 p =`."""
    token = line.at(index)
    if token.kind != "word" or not after_square or len(token.text) > 8:
        return False
    if not token.spaced:
        return True
    following = line.at(index + 1)
    if following.text == "2" and following.spaced:
        following = line.at(index + 2)
    return (
        token.low in ("p", "g", "adj", "partial", "change") and following.kind == "rel" and token.text != "P"
    )


_ADJUSTED = ("adj", "bonf", "corr", "cor", "fdr", "tukey", "holm", "fwe", "hb", "bh", "sidak", "scheffe")
_ONE_SIDED = ("one", "1-tailed", "1")
_VARIANTS = {
    ("eta2", "p"): "partial_eta2", ("eta2", "partial"): "partial_eta2", ("eta2", "part"): "partial_eta2",
    ("eta2", "g"): "generalized_eta2", ("eta2", "gen"): "generalized_eta2", ("eta2", "generalized"): "generalized_eta2",
    ("d", "z"): "d_z", ("d", "av"): "d_av", ("d", "avg"): "d_av", ("d", "rm"): "d_rm", ("r", "pb"): "r_pb",
    ("r2", "adj"): "adjusted_r2", ("r2", "adjusted"): "adjusted_r2",
    ("r2", "change"): "delta_r2", ("r2", "chg"): "delta_r2", ("r2", "inc"): "delta_r2", ("r2", "Δ"): "delta_r2", ("r2", "δ"): "delta_r2",
    ("mean", "diff"): "mean_difference", ("mean", "d"): "mean_difference", ("mean", "difference"): "mean_difference",
    ("se", "diff"): "se_difference", ("se", "difference"): "se_difference", ("mse", "e"): "mse",
    ("phi", "c"): "cramers_v", ("bf10", "01"): "bf01", ("df", "1"): "df1", ("df", "2"): "df2",
}  # fmt: skip
_PARTS = {
    "mean_difference": "estimate",
    "r_pb": "effect",
    "r2": "effect",
    "adjusted_r2": "effect",
    "delta_r2": "effect",
}


def _resolved(line: Line, spelled: Spelled, squared: bool) -> Spelled | None:
    """Settle the quantity by square and subscript."""
    symbol, label = spelled.symbol, spelled.label.lower()
    quantity, stated = symbol.quantity, list(spelled.stated)
    of_g_test = spelled.text == "G" and any(
        t.low == "df" for t in line.tokens[spelled.after : spelled.after + 7]
    )
    if not squared and (
        (spelled.text in _NEEDS_SQUARE and not of_g_test)
        or (spelled.text in ("η", "ω", "eta", "np") and not label)
    ):
        return None
    if spelled.text in _NEEDS_SQUARE_OR_OTHER and not squared:
        return replace(spelled, symbol=OTHER)
    if spelled.text in _NEEDS_DF and line.at(spelled.after).text not in ("(", "["):
        return None
    if squared:
        quantity = {"r": "r2", "F": "f2", "f": "f2", "g": "eta2"}.get(quantity, quantity)
    if squared and spelled.text in ("g", "h") and label not in ("p", "g"):
        return None
    quantity = _VARIANTS.get((quantity, label), quantity)
    if quantity in ("n", "N") and spelled.numbers:
        return replace(spelled, symbol=NUMBERED)
    if quantity == "bf10" and spelled.numbers:
        quantity = _VARIANTS.get(("bf10", spelled.numbers[0].text.translate(FLAT)), "bf10")
    if quantity == "df" and spelled.numbers:
        quantity = _VARIANTS.get(("df", spelled.numbers[0].text), "df")
    if quantity == "r" and label in ("s", "rho", "spearman"):
        stated.append("spearman")
    if quantity == "r" and label in ("p", "partial", "part", "sp"):
        stated.append("partial")
    if quantity == "p" and label.startswith(_ADJUSTED):
        stated.append("adjusted-p")
    if quantity == "p" and label.startswith(_ONE_SIDED):
        stated.append("one-tailed")
    part = _PARTS.get(quantity, "effect" if quantity == "f2" else symbol.part)
    if quantity != symbol.quantity or part != symbol.part:
        symbol = replace(symbol, quantity=quantity, part=part)  # type: ignore[arg-type]
    if symbol is spelled.symbol and not stated:
        return spelled
    return replace(spelled, symbol=symbol, stated=tuple(stated))
