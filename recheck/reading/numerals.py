"""Printed numbers: sign, separators, powers of ten, relation."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from decimal import Decimal

from recheck.model import Passage, Printed, Relation
from recheck.reading.alike import FLAT
from recheck.reading.tokens import NOTHING, Token, tokens
from recheck.reading.views import View, view_of

RELATION_WORDS: dict[tuple[str, ...], Relation] = {
    ("less", "than"): "<", ("smaller", "than"): "<", ("below",): "<", ("under",): "<", ("lower", "than"): "<",
    ("greater", "than"): ">", ("larger", "than"): ">", ("more", "than"): ">", ("above",): ">",
    ("higher", "than"): ">", ("exceeding",): ">",
    ("equal", "to"): "=", ("equals",): "=", ("equal",): "=", ("at", "least"): "≥", ("at", "most"): "≤",
    ("approximately",): "≈", ("about",): "≈",
}  # fmt: skip
_SIGNS: dict[str, Relation] = {"=": "=", "<": "<", ">": ">", "≤": "≤", "≥": "≥", "≈": "≈", "==": "="}


@dataclass(frozen=True, slots=True)
class Line:
    """The tokens of one sentence, with the view they come from; without `shares` it has no percent sign."""

    view: View
    tokens: Sequence[Token]
    decimal_comma: bool = False
    shares: bool = True

    def at(self, index: int) -> Token:
        """The token at `index`, or one that is nothing where there is none."""
        return self.tokens[index] if 0 <= index < len(self.tokens) else NOTHING


@dataclass(frozen=True, slots=True)
class Number:
    """A number in a line: its value, its last decimal place, its characters, the index after it."""

    value: Decimal
    decimals: int
    start: int
    end: int
    after: int
    percent: bool = False
    ambiguous: bool = False

    def printed(self, line: Line, relation: Relation = "=") -> Printed:
        """The number as it stands in the manuscript, with its place."""
        page, box = line.view.box(self.start, self.end)
        text = line.view.printed_text(self.start, self.end)
        return Printed(text, self.value, self.decimals, relation, self.percent, page, box)


def printed(text: str) -> Printed | None:
    """Read a text that is one number, such as `< .001`, `−.27`, `24, 325.26` or `1.2 × 10−5`.

    None where the text is no number, or more than one. Stars and raised marks after it are passed over.
    """
    view = view_of(Passage(text=text))
    line = Line(view, tokens(view, 0, len(view.text)))
    relation, index = relation_at(line, 0)
    number = number_at(line, index)
    if number is None:
        return None
    rest = line.tokens[number.after :]
    if any(t.kind != "sup" and t.text not in ("*", "†", "‡", "§") for t in rest):
        return None
    return number.printed(line, relation or "=")


def part_of_unit(line: Line, index: int) -> bool:
    """Whether a number belongs to a unit: the 1.73 and the 2 of `ml/min/1.73 m2`, the 2 of `g m−2`."""
    token, before = line.at(index), line.at(index - 1)
    if token.kind != "num":
        return False
    if before.text == "-" and not token.spaced and not before.spaced:
        return line.at(index - 2).kind == "word" and token.text.isdigit() and len(token.text) == 1
    attached = before.kind == "word" and not token.spaced and token.text.isdigit() and len(token.text) == 1
    return attached or (before.text == "/" and not token.spaced)


def relation_at(line: Line, index: int) -> tuple[Relation | None, int]:
    """The relation at `index` (`=`, `= <`, `less than`) and the index after it."""
    token = line.at(index)
    if token.kind == "rel":
        signs = token.text
        after = index + 1
        if line.at(after).kind == "rel":
            signs += line.at(after).text
            after += 1
        return _one_relation(signs), after
    if token.kind == "word":
        for words, relation in RELATION_WORDS.items():
            if token.low == words[0] and all(line.at(index + k).low == w for k, w in enumerate(words)):
                return relation, index + len(words)
    return None, index


def _one_relation(signs: str) -> Relation | None:
    """`<=` is at most; `= <` and `=<` are the sign beside the `=`."""
    if signs in ("<=", ">="):
        return "≤" if signs[0] == "<" else "≥"
    telling = [sign for sign in signs if sign != "="]
    if not telling:
        return "="
    return _SIGNS.get(telling[0]) if len(telling) == 1 else None


def number_at(line: Line, index: int, *, grouped: bool = False) -> Number | None:
    """The number that starts at `index`, with its sign, or None.

    With `grouped` a space may group its thousands also where no relation stands before it.
    """
    first, sign = index, 1
    if line.at(index).text in ("-", "+"):
        sign = -1 if line.at(index).text == "-" else 1
        index += 1
    if line.at(index).kind != "num":
        return None
    text, after = _spaced_out(line, index, grouped)
    mantissa, power, after = _scientific(line, text, after)
    plain = _plain(mantissa, line.decimal_comma)
    if plain is None:
        return None
    digits, ambiguous = plain
    value = (sign * Decimal(digits)).scaleb(power)
    decimals = len(digits.partition(".")[2]) - power
    percent = line.at(after).text == "%"
    start, end = line.at(first).start, line.at(after - 1).end
    return Number(value, decimals, start, end, after + percent, percent, ambiguous)


def whole(number: Number) -> Number:
    """The number of a quantity that counts: what looks like three decimals (`1,200`, `1.200`) groups thousands."""
    if (
        number.decimals != 3
        or number.percent
        or number.end - number.start not in (5, 6, 7)
        or abs(number.value) < 1
    ):
        return number
    return replace(number, value=(number.value * 1000).to_integral_value(), decimals=0, ambiguous=False)


def piece(line: Line, text: str, start: int, after: int, sign: int = 1) -> Number:
    """A number that is part of one token, such as each half of `1,38`; `start` counts characters."""
    digits = text.replace(",", "").replace("·", ".")
    value = sign * Decimal(digits)
    return Number(value, len(digits.partition(".")[2]), start - (sign < 0), start + len(text), after)


def _spaced_out(line: Line, index: int, grouped: bool) -> tuple[str, int]:
    """Digits of a number that is printed with a space after its thousands: `1 234`, `24, 325.26`."""
    text, after = line.at(index).text, index + 1
    if not (text.isdigit() and len(text) <= 3 and text[0] != "0"):
        return text, after
    related = line.at(index - 1).kind in ("rel", "end")
    comma = line.at(after).text == "," and not line.at(after).spaced
    tail = line.at(after + comma)
    if tail.kind != "num" or not tail.spaced or not tail.text[:3].isdigit() or tail.text[3:4].isdigit():
        return text, after
    thousands, _, decimals = tail.text.partition(".")
    if len(thousands) != 3 or (comma and not (related and decimals)):
        return text, after
    first, _ = line.view.span(tail.start - 1, tail.start)
    thin = line.view.passage.text[first] in "\u00a0\u2007\u2009\u202f"
    if comma or related or thin or grouped:
        return text + tail.text, after + comma + 1
    return text, after


def _scientific(line: Line, text: str, after: int) -> tuple[str, int, int]:
    """Mantissa, power of ten, and the index after both: `1.2 × 10−5`, `1.2e-5`, `10⁻⁵`."""
    following = line.at(after)
    if following.low == "e" and not following.spaced:
        power, past = _exponent(line, after + 1)
        return (text, power, past) if power is not None else (text, 0, after)
    if following.text in ("×", "x", "X", "*", "·") and line.at(after + 1).text == "10":
        power, past = _exponent(line, after + 2)
        return (text, power, past) if power is not None else (text, 0, after)
    if text.endswith("·10") or text == "10":
        mantissa = text[:-3] or "1"
        raised = following.kind == "sup"
        of_p = line.at(after - 3).low == "p" and line.at(after - 2).kind == "rel"
        if raised or len(text) > 2 or (of_p and following.text == "-" and not following.spaced):
            power, past = _exponent(line, after)
            if power is not None:
                return mantissa, power, past
    return text, 0, after


def _exponent(line: Line, index: int) -> tuple[int | None, int]:
    """A power of ten, raised or fallen to the base line."""
    token = line.at(index)
    if token.kind == "sup":
        flat = token.text.translate(FLAT)
        return (int(flat), index + 1) if flat.lstrip("-").isdigit() and len(flat) < 5 else (None, index)
    sign = {"-": -1, "+": 1}.get(token.text)
    digits = line.at(index + (sign is not None))
    if digits.kind == "num" and digits.text.isdigit() and len(digits.text) <= 3 and sign is not None:
        return sign * int(digits.text), index + 2
    return None, index


def _plain(text: str, decimal_comma: bool) -> tuple[str, bool] | None:
    """Digits with a decimal point, and whether a comma or point might as well group thousands."""
    if len(text) > 40:
        return None
    if "·" in text:
        text = text.replace("·", ".") if text.count("·") == 1 and "." not in text else ""
    marks = "".join(char for char in text if char in ",.")
    if not marks:
        return (text, False) if text else None
    if len(marks) == 1:
        head, tail = text.split(marks)
        if len(tail) == 3 and 1 <= len(head) <= 3 and head[0] != "0":
            if marks == ",":
                return (f"{head}.{tail}", True) if decimal_comma else (head + tail, False)
            return f"{head}.{tail}", decimal_comma
        return f"{head or '0'}.{tail}", False
    groups = text.replace(",", ".").split(".")
    decimal = len(set(marks)) == 2
    if decimal and marks.count(marks[-1]) != 1:
        return None
    whole = groups[:-1] if decimal else groups
    if not 1 <= len(whole[0]) <= 3 or any(len(group) != 3 for group in whole[1:]):
        return None
    return "".join(whole) + (f".{groups[-1]}" if decimal else ""), False
