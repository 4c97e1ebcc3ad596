"""One line of a cell, read from its first token on: number, spread, share, interval, marks, unit."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from recheck.model import Printed
from recheck.reading.numerals import Line, Number, number_at, relation_at, whole
from recheck.reading.symbols import find
from recheck.reading.tables.divided import divided
from recheck.reading.tables.slots import Slot
from recheck.reading.tokens import Token, tokens, words


@dataclass(frozen=True, slots=True)
class Piece:
    """One value of a cell.

    `shape` is one of `number`, `pair(` and `pair[` (a (b)), `pair±` (a ± b), `pair±(` (a ± b (c)),
    `pair±-` (a ± b (c–d)), `count%` (a (b%)), `fraction` (a/b), `fraction%` (a/b (c%)), `interval`
    (a–b), `triple` (a (b–c)), `p` (a number with a relation, or `ns`), `result` (symbols with
    numbers, to be read as prose), `reference`, `dash`, `words`, `unread`. `stars` are the marks after
    it, `label` the words inside its brackets (`range`, `iqr`, `sd`, `se`, `ci`, `n`),
    or `per` after a number per unit (`1.2/y`), which is a rate or a slope. `n` is a size printed behind
    a value in its cell. `start` and `end` count characters of the slot's view.
    """

    shape: str
    numbers: tuple[Printed, ...] = ()
    stars: str = ""
    text: str = ""
    label: str = ""
    start: int = 0
    end: int = 0
    n: Printed | None = None

    @property
    def has_value(self) -> bool:
        """Whether the piece prints numbers that a heading can name."""
        return bool(self.numbers) and self.shape not in ("result", "unread", "reference", "words")


_NO_VALUE = words("na n/a ref reference referent nd nr ns none nil excluded")
_REFERENCE = words("ref reference referent referenz baseline")
_MARKS = frozenset("*†‡§¶#&^+")
_LABELS = {
    "range": "range", "ranges": "range", "min": "range", "minimum": "range", "iqr": "iqr", "iq": "iqr", "interquartile": "iqr", "sd": "sd",
    "se": "se", "sem": "se", "ci": "ci", "n": "n", "cl": "ci",
}  # fmt: skip
_SEPARATORS = frozenset((",", ";", "-", "to", "and", "/", ":", "≈"))


class LineReader:
    """Reads one line of a cell; `start` and `end` are its characters in the view."""

    __slots__ = ("at", "end", "line", "per", "slot", "start")

    def __init__(self, slot: Slot, start: int, end: int, comma: bool) -> None:
        self.slot = slot
        self.line = Line(slot.view, divided(tokens(slot.view, start, end), comma), comma)
        self.start, self.end, self.at = start, end, 0
        self.per = False

    def pieces(self) -> list[Piece]:
        """The values of the line in their order, or one piece that says why there is none."""
        line = self.line
        if not line.tokens:
            return []
        alone = self._alone()
        if alone:
            return [self._piece(alone, 0, len(line.tokens))]
        if self._is_result():
            return [self._piece("result", 0, len(line.tokens))]
        found: list[Piece] = []
        while self.at < len(line.tokens):
            first = self.at
            piece = self._value()
            if piece is None or self.at == first:
                return [
                    self._piece(
                        "unread" if any(t.kind == "num" for t in line.tokens) else "words",
                        0,
                        len(line.tokens),
                    )
                ]
            pair = self._listed(found, piece)
            if pair:
                return [pair]
            found.append(piece)
            while self._separates(self.at) and self.at < len(line.tokens):
                self.at += 1
        return found

    def _separates(self, at: int) -> bool:
        """Whether a sign stands between two values of a cell; a slash does where it has spaces around it."""
        token = self.line.at(at)
        return token.text in (",", ";", "|") or (
            token.text == "/" and token.spaced and self.line.at(at + 1).spaced
        )

    def _listed(self, found: list[Piece], piece: Piece) -> Piece | None:
        """`0.79, 1.55`: two numbers in order that a comma or a semicolon divides and that fill the cell."""
        if len(found) != 1 or self.at < len(self.line.tokens) or {found[0].shape, piece.shape} != {"number"}:
            return None
        first, second = found[0].numbers[0], piece.numbers[0]
        between = self.line.view.text[found[0].end : piece.start].strip()
        if between not in (",", ";") or first.value > second.value or first.percent != second.percent:
            return None
        text = self.line.view.printed_text(found[0].start, piece.end)
        return Piece("interval", (first, second), piece.stars, text, between, found[0].start, piece.end)

    def _piece(
        self,
        shape: str,
        first: int,
        after: int,
        numbers: Sequence[Number | Printed] = (),
        stars: str = "",
        label: str = "",
    ) -> Piece:
        line = self.line
        start, end = line.at(first).start, line.at(after - 1).end
        printed = tuple(n if isinstance(n, Printed) else n.printed(line) for n in numbers)
        return Piece(shape, printed, stars, line.view.printed_text(start, end), label, start, end)

    def _alone(self) -> str:
        """A cell that holds no number: dashes, `NA`, `ns`, words."""
        tokens_ = self.line.tokens
        text = "".join(t.low for t in tokens_).strip("().[] ")
        if all(t.kind == "sign" for t in tokens_) and not any(t.text in ("<", ">") for t in tokens_):
            return "dash"
        if text in ("ns", "n.s", "n.s."):
            return "p"
        if text in _NO_VALUE:
            return "dash"
        return "" if any(t.kind == "num" for t in tokens_) else "words"

    def _is_result(self) -> bool:
        """Whether symbols stand before their numbers: `t(31) = 2.10, p = .044`, `OR 1.5 (95% CI 1.2–1.9)`."""
        line = self.line
        for index, token in enumerate(line.tokens):
            if (
                token.kind == "rel"
                and index
                and not (index > 1 and line.at(index - 1).text in ("n", "N"))
                and (line.at(index - 1).kind == "word" or line.at(index - 1).text in (")", "]", "%"))
            ):
                inside = line.at(index - 2).text in ("(", "[") and line.at(index - 1).low in _LABELS
                if not inside:
                    return True
            if (
                index == 0
                and token.kind == "word"
                and find((token.text,))
                and line.at(1).kind == "num"
                and len(line.tokens) > 2
            ):
                return True
        return False

    # -- one value

    def _value(self) -> Piece | None:
        line, first = self.line, self.at
        self.per = False
        relation, at = relation_at(line, first)
        if line.at(at).text in ("(", "["):
            return self._bracketed_first(first, at, relation is not None)
        number = self._number(at)
        if number is None:
            return None
        self.at = number.after
        if relation and relation != "=":
            stars = self._stars()
            printed = number.printed(line, relation)
            return self._piece("p", first, self.at, (printed,), stars)
        stars = self._stars()
        second = self._second(number)
        if second:
            shape, numbers, label = second
            stars += self._stars()
            after = self.at
            size = self._size()
            made = self._piece(shape, first, after, numbers, stars, "per" if self.per else label)
            return replace(made, n=size.printed(line), end=line.at(self.at - 1).end) if size else made
        return self._piece("number", first, self.at, (number,), stars)

    def _size(self) -> Number | None:
        """`n = 24` behind a value, in brackets or behind a semicolon."""
        line = self.line
        at = self.at + (line.at(self.at).text in (";", ",", "(", "["))
        if line.at(at).text not in ("n", "N") or line.at(at + 1).text not in ("=", ":"):
            return None
        number = number_at(line, at + 2, grouped=True)
        if number is None or number.decimals or number.percent:
            return None
        self.at = number.after + (line.at(number.after).text in (")", "]"))
        return number

    def _number(self, at: int) -> Number | None:
        return number_at(self.line, at, grouped=self._groups(at))

    def _groups(self, at: int) -> bool:
        """A space groups thousands in a cell only where it is the only space between digits."""
        tokens_ = self.line.tokens
        pair = self.line.at(at).text.isdigit() and self.line.at(at + 1).text[:3].isdigit()
        return pair and len(tokens_) <= at + 3

    def _stars(self) -> str:
        """Marks and footnote letters after a value; units are passed over."""
        line = self.line
        found = ""
        while True:
            token = line.at(self.at)
            if token.text == "+" and line.at(self.at + 1).text in ("/", "-"):
                return found
            if token.text and set(token.text) <= _MARKS:
                found += token.text
            elif token.kind == "sup" or token.text in ("%", "°"):
                pass
            elif token.kind == "word" and line.at(self.at + 1).kind != "rel" and self._is_note_or_unit(token):
                power = line.at(self.at + 1)
                self.at += power.kind == "num" and not power.spaced and len(power.text) == 1
            elif token.text == "/" and line.at(self.at + 1).kind == "word":
                self.per = self.per or line.at(self.at - 1).kind == "num"
            elif (
                token.text == ","
                and line.at(self.at + 1).kind == "word"
                and len(line.at(self.at + 1).text) == 1
                and not token.spaced
            ):
                pass
            elif token.text in ("(", "[") and self._closed_words(self.at):
                self.at = self._closed_words(self.at)
                continue
            else:
                return found
            self.at += 1

    def _is_note_or_unit(self, token: Token) -> bool:
        if token.low in ("to", "and", "vs", "or", "per", "of", "x"):
            return token.low == "per"
        return True

    def _closed_words(self, at: int) -> int:
        """The index after brackets that hold no digit, 0 where there are none: `(reference)`, `(a)`."""
        line = self.line
        close = ")" if line.at(at).text == "(" else "]"
        index = at + 1
        while (
            line.at(index).kind in ("word", "sign", "sup") and line.at(index).text != close and index < at + 5
        ):
            index += 1
        words_only = index > at + 1 and line.at(index).text == close
        referred = any(t.low in _REFERENCE for t in line.tokens[at:index])
        starred = all(set(t.text) <= _MARKS for t in line.tokens[at + 1 : index])
        return index + 1 if words_only and not referred and (starred or index == at + 2) else 0

    def _second(self, number: Number) -> tuple[str, list[Number], str] | None:
        """What follows the first number: a spread, a share, an interval."""
        line = self.line
        token = line.at(self.at)
        if token.text == "±" or (token.text == "+" and line.at(self.at + 1).text in ("-", "/")):
            return self._plus_minus(number)
        if token.text in ("(", "["):
            return self._in_brackets(number)
        divides = token.low in ("/", "of") and line.at(self.at + 1).kind == "num"
        if divides and line.at(self.at - 1).kind == "num":
            return self._fraction(number)
        if token.low in ("-", "to", "≈") and (other := self._number(self.at + 1)) is not None:
            if token.text == "-" and line.at(other.after).text == "-":
                return None
            self.at = other.after
            self._stars()
            return "interval", [number, other], ""
        return None

    def _plus_minus(self, number: Number) -> tuple[str, list[Number], str] | None:
        line = self.line
        at = self.at + 1
        while line.at(at).text in ("-", "/", "+"):
            at += 1
        spread = self._number(at)
        if spread is None or line.at(spread.after).text == "±":
            return None
        self.at = spread.after
        back = self.at
        self._stars()
        if line.at(self.at).text in ("(", "[") and (inside := self._inside(self.at)):
            numbers, label, after = inside
            if len(numbers) <= 2:
                self.at = after
                return ("pair±(" if len(numbers) == 1 else "pair±-"), [number, spread, *numbers], label
        self.at = back
        return "pair±", [number, spread], ""

    def _in_brackets(self, number: Number) -> tuple[str, list[Number], str] | None:
        line = self.line
        bracket = line.at(self.at).text
        inner = self.at + 1
        if any(t.low in _REFERENCE for t in line.tokens[inner : inner + 2]):
            self.at = len(line.tokens)
            return "reference", [number], ""
        inside = self._inside(self.at)
        if inside is None:
            return None
        numbers, label, after = inside
        self.at = after
        if line.at(inner).text == "±":
            return ("pair±", [number, *numbers], label) if len(numbers) == 1 else None
        if len(numbers) == 2:
            return "triple", [number, *numbers], label
        second = numbers[0]
        if label in ("", "n") and second.percent and not number.percent and number.decimals == 0:
            return "count%", [whole(number), second], label
        return f"pair{bracket}", [number, second], label

    def _inside(self, opening: int) -> tuple[list[Number], str, int] | None:
        """One or two numbers in brackets, what the words before them say, and the index after the brackets."""
        line = self.line
        close = ")" if line.at(opening).text == "(" else "]"
        at, label = opening + 1, ""
        if (
            line.at(at).kind == "num"
            and line.at(at + 1).text == "%"
            and line.at(at + 2).low in ("ci", "cl", "confidence")
        ):
            at += 2
        while (
            line.at(at).kind == "word"
            or line.at(at).text in (":", "=", "±", ".")
            or (line.at(at).text == "-" and line.at(at + 1).kind == "word")
        ):
            label = label or _LABELS.get(line.at(at).low, "")
            if (
                line.at(at).kind == "word"
                and not label
                and line.at(at).low not in ("quartile", "range", "interval")
            ):
                return None
            at += 1
        if line.at(at).text == ",":
            at += 1
        first = self._number_or_bound(at)
        if first is None:
            return None
        numbers, at = [first], first.after
        if line.at(at).low in _SEPARATORS and line.at(at).text != close:
            second = self._number_or_bound(at + 1)
            if second is None:
                return None
            numbers.append(second)
            at = second.after
        while (
            line.at(at).kind in ("sup",)
            or line.at(at).text in ("%",)
            or (line.at(at).text and set(line.at(at).text) <= _MARKS)
        ):
            at += 1
        if line.at(at).kind == "word" and line.at(at + 1).text == close:
            at += 1
        if line.at(at).text != close:
            return None
        return numbers, label, at + 1

    def _number_or_bound(self, at: int) -> Number | None:
        return self._number(at)

    def _fraction(self, number: Number) -> tuple[str, list[Number], str] | None:
        line = self.line
        total = self._number(self.at + 1)
        if total is None or line.at(total.after).text == "/":
            return None
        self.at = total.after
        if number.decimals or total.decimals:
            number, total = whole(number), whole(total)
        self._stars()
        if line.at(self.at).text in ("(", "[") and (inside := self._inside(self.at)) and len(inside[0]) == 1:
            self.at = inside[2]
            return "fraction%", [number, total, *inside[0]], inside[1]
        if line.at(self.at).kind == "num" and line.at(self.at).spaced and line.at(self.at + 1).text == "%":
            share = self._number(self.at)
            if share is not None:
                self.at = share.after
                return "fraction%", [number, total, share], ""
        return "fraction", [number, total], ""

    def _bracketed_first(self, first: int, at: int, related: bool) -> Piece | None:
        """A cell whose own brackets hold it: `(0.9–1.7)`, `(4.5)`, `[−0.1, 0.3]`."""
        inside = self._inside(at)
        if related or inside is None:
            return None
        numbers, label, after = inside
        self.at = after
        stars = self._stars()
        shape = "interval" if len(numbers) == 2 else "number"
        return self._piece(shape, first, self.at, numbers, stars, label or "(")
