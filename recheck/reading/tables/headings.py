"""One heading of a table taken apart: which numbers it announces, and what it is otherwise the name of."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import lru_cache

from recheck.model import Passage, Printed
from recheck.reading.numerals import Line, number_at, piece
from recheck.reading.tables.heading_symbols import symbol_at
from recheck.reading.tables.heading_words import (
    BARE,
    EFFECTS,
    FIRST,
    KINDS,
    LAST,
    PEOPLE,
    QUALIFIERS,
    UNITS,
    UPPER,
    plain_words,
    spelled_out,
    tidied,
    unit_alone,
)  # fmt: skip
from recheck.reading.tokens import Token, tokens, words
from recheck.reading.views import view_of
from recheck.reading.wording import stated


@dataclass(frozen=True, slots=True)
class Told:
    """What one heading says.

    `quantities` in the order in which its cells print them; `name` what is left without the words
    that say so; `whole` tells that nothing is left; `percent_unit` that a `%` stands as a unit;
    `n`, `df` and `level` (that of an interval) are printed in the heading itself.
    """

    quantities: tuple[str, ...]
    name: str
    n: Printed | None = None
    df: tuple[Printed, ...] = ()
    stated: tuple[str, ...] = ()
    whole: bool = False
    percent_unit: bool = False
    level: Printed | None = None


@lru_cache(maxsize=4096)
def told(text: str) -> Told:
    """Take one heading apart.

    `Age, years, mean (SD)` announces a mean and an SD of `Age, years`; `Rye (n = 24)` announces
    nothing and is the name `Rye` with its n.
    """
    text = view_of(Passage(text=text)).text.strip()
    if text.lower() in _NO_HEADINGS or len(text) > _LONGEST:
        return Told((), text)
    view = view_of(Passage(text=plain_words(text)))
    line = Line(view, tokens(view, 0, len(view.text)))
    return _Parser(line).told()


_LONGEST = 300
"""Characters of a heading; what is longer is prose."""
_NO_HEADINGS = words("overall total")
"""What names a group where it stands alone, and only qualifies elsewhere."""


_SHARES = (["(", "%", ")"], ["[", "%", "]"])
"""What follows the n of `Women n (%)`."""


@dataclass(frozen=True, slots=True)
class _Found:
    quantity: str
    first: int
    after: int
    stated: tuple[str, ...] = ()


class _Parser:
    """Reads the tokens of one heading segment by segment; commas and brackets divide them."""

    __slots__ = ("df", "level", "line", "n", "names", "percents", "units", "used")

    def __init__(self, line: Line) -> None:
        self.line = line
        self.used: list[_Found] = []
        self.names: set[int] = set()
        self.n: Printed | None = None
        self.level: Printed | None = None
        self.df: tuple[Printed, ...] = ()
        self.percents: list[tuple[int, bool]] = []
        self.units = False

    def told(self) -> Told:
        segments = list(_segments(self.line.tokens))
        for first, after in segments:
            self._segment(first, after)
        self._percent(len(segments))
        self._minutes()
        self.used.sort(key=lambda found: found.first)
        spread_after = [k for k, f in enumerate(self.used) if f.quantity in ("sd", "se")]
        quantities = [f.quantity for f in self.used]
        if spread_after == [0] and self._after_sign(self.used[0].first):
            quantities.insert(0, "mean")
        name = self._name()
        if (
            self.n is not None
            and not {"n", "N"} & set(quantities)
            and not name
            and len(self.used) == 1
            and len(self.line.at(self.used[0].first).text) == 1
        ):
            # `B (n = 26)`: a letter with a size of its own is the name of a group.
            name, quantities = self.line.at(self.used[0].first).text, []
        if quantities and (
            (set(quantities) <= BARE and unit_alone().fullmatch(name))
            or (set(quantities) <= {"low", "high"} and name)
        ):
            # `HR (bpm)`, `t (s)`: a number without a unit has none; `Education: high` is a name.
            name, quantities = self.line.view.text, []
        if "percent" in quantities:
            quantities = ["count" if q in ("n", "N") else q for q in quantities]
        said = tuple(dict.fromkeys(word for found in self.used for word in found.stated))
        spoken = stated(self.line.view.text) if quantities else ()
        return Told(
            spelled_out(quantities), name, self.n, self.df, tuple(dict.fromkeys((*said, *spoken))),
            not name and bool(quantities), self.units, self.level,
        )  # fmt: skip

    def _segment(self, first: int, after: int) -> None:
        """Read one segment: all of its symbols where it holds nothing else, else those at its ends."""
        found: list[_Found] = []
        rest: list[int] = []
        at = first
        while at < after:
            size = self._size(at, after)
            if size:
                at = size
                continue
            level = self._level(at)
            symbol = symbol_at(self.line, level, after)
            if symbol and len(self.line.at(at).text) == 1 and self._letter_of_name(at, symbol.after):
                symbol = None
            if symbol and at > first and self.line.at(at - 1).low in ("of", "for") and (found or self.used):
                # What a spread or an interval is that of: `SD of differences`, `95% CI for Exp(B)`.
                rest += range(at, symbol.after) if len(self.line.at(at).text) > 1 else ()
                at = symbol.after
            elif symbol:
                self.df = self.df or symbol.df
                found.append(_Found(symbol.quantity, at, symbol.after, symbol.stated))
                at = symbol.after
            elif self.line.at(at).text == "%":
                self.percents.append((at, first == at and after == at + 1))
                at += 1
            else:
                rest.append(at)
                at += 1
        self._settle(found, rest, first, after)

    def _letter_of_name(self, at: int, after: int) -> bool:
        """Whether a letter is part of a name: `Group B`, `β:α`, `Q/R`."""
        before, letter = self.line.at(at - 1), self.line.at(at).text
        kind = letter.isupper() and letter not in "PN" and before.low in KINDS
        behind = self.line.at(after)
        return (
            (kind and not self._spread_follows(after))
            or ":" in (before.text, behind.text)
            or (before.text == "/" and _capitals(self.line.at(at - 2).text, letter))
            or (behind.text == "/" and _capitals(letter, self.line.at(after + 1).text))
        )

    def _settle(self, found: list[_Found], rest: list[int], first: int, after: int) -> None:
        line = self.line
        beside = bool(found) or bool(self.used)
        counted = any(f.quantity in ("n", "N", "count") for f in (*found, *self.used)) or bool(self.percents)
        heavy = [
            k for k in rest
            if line.at(k).kind in ("word", "num")
            and not (beside and line.at(k).low in QUALIFIERS)
            and not (counted and line.at(k).low in PEOPLE)
            and not (line.at(k).kind == "num" and beside)
        ]  # fmt: skip
        if not heavy:
            if found and self._unit(found, first):
                self.names.update(range(first, after))
                return
            self.used += found
            if not found:
                if self._df_in(first, after):
                    return
                self.names.update(k for k in rest if line.at(k).kind in ("word", "num") and not beside)
                self.names.update(rest if not beside else ())
            return
        for item in found:
            if self._strong(item, first, after, heavy):
                self.used.append(item)
            else:
                self.names.update(range(item.first, item.after))
        self.names.update(rest)

    def _unit(self, found: list[_Found], first: int) -> bool:
        """Whether a letter behind a name is its unit: `Weight, g`, `Rest (h)`; not the `d` of `Effect size, d`."""
        texts = {self.line.at(item.first).text for item in found}
        named = [self.line.at(k).low for k in self.names if self.line.at(k).kind == "word"]
        return first > 0 and len(texts) == 1 and texts <= UNITS and bool(named) and not EFFECTS & set(named)

    def _df_in(self, first: int, after: int) -> bool:
        """Degrees of freedom in the brackets after a statistic: `t (df = 31)`, `F (2, 57)`."""
        if self.used and self.used[-1].quantity in ("n", "N") and after - first == 1:
            number = number_at(self.line, first)
            if number is not None and number.decimals == 0 and self.n is None:
                self.n = number.printed(self.line)
            return number is not None
        if not self.used or self.used[-1].quantity not in ("t", "F", "chi2", "r"):
            return False
        places = [
            k
            for k in range(first, after)
            if self.line.at(k).kind == "num" and self.line.at(k - 1).text not in ("=", ":")
        ]
        self.df = (*self.df, *(df for k in places for df in self._df_at(k)))
        return bool(places or self.df)

    def _df_at(self, at: int) -> tuple[Printed, ...]:
        """The df of one number; `F(2,57)` holds both in one."""
        token = self.line.at(at)
        if self.used[-1].quantity == "F" and token.text.count(",") == 1:
            head, tail = token.text.split(",")
            parts = (
                piece(self.line, head, token.start, at + 1),
                piece(self.line, tail, token.end - len(tail), at + 1),
            )
            return tuple(part.printed(self.line) for part in parts)
        number = number_at(self.line, at)
        return (number.printed(self.line),) if number is not None else ()

    def _strong(self, item: _Found, first: int, after: int, heavy: Sequence[int]) -> bool:
        """Whether a symbol beside other words still says what the numbers are."""
        word = self.line.at(item.first)
        long = len(word.text) > 1 or item.after - item.first > 1
        if self._after_sign(item.first) or (item.quantity == "mean" and self.line.at(item.after).text == "±"):
            return True
        if (
            item.quantity in ("sd", "se")
            and long
            and item.first == first
            and self.line.at(item.after).low == "of"
        ):
            return True
        if word.text == "M" and item.after == after and self._spread_follows(after):
            return True
        if (
            item.quantity in ("n", "N")
            and item.after == after
            and [self.line.at(after + k).text for k in (0, 1, 2)] in _SHARES
        ):
            return True
        if not long:
            return word.text in ("β", "χ") or (
                word.low == "p" and item.first == first and self.line.at(item.after).low == "for"
            )
        if word.text.isupper() and word.text in UPPER and item.first > heavy[0]:
            return item.after == after
        if item.quantity in ("n", "N", "count"):
            return item.first == first and self._people(item.after, after)
        if (
            item.quantity in ("chi2", "p", "t", "F", "z", "r2", "partial_eta2", "eta2")
            and item.first == first
        ):
            return True
        if item.first == first or self._all_light(first, item.first):
            return word.low in FIRST
        return item.after == after and word.low in LAST

    def _spread_follows(self, at: int) -> bool:
        """Whether brackets with a spread stand at `at`: `New recipe M (SD)`."""
        inside = symbol_at(self.line, at + 1, at + 4) if self.line.at(at).text in ("(", "[") else None
        return inside is not None and inside.quantity in ("sd", "se")

    def _all_light(self, first: int, at: int) -> bool:
        return all(self.line.at(k).low in QUALIFIERS for k in range(first, at))

    def _people(self, at: int, after: int) -> bool:
        return self.line.at(at).low == "of" and any(
            self.line.at(k).low in PEOPLE for k in range(at + 1, min(after, at + 4))
        )

    def _size(self, at: int, after: int) -> int:
        """`n = 24`, `N=34`, `df = 31`: the index after it, or 0."""
        line = self.line
        low = line.at(at).text
        of_df = low.lower() in ("df", "dfs")
        if low not in ("n", "N") and not of_df:
            return 0
        past = at + 1
        if line.at(past).text not in ("=", ":"):
            return 0
        number = number_at(line, past + 1, grouped=True)
        if number is None or number.after > after + 4 or (not of_df and number.percent):
            return 0
        if of_df:
            self.df = (*self.df, number.printed(line))
        elif self.n is None:
            self.n = number.printed(line)
        end = number.after
        glued = line.at(end)
        if glued.kind == "word" and len(glued.text) == 1 and not glued.spaced:
            end += 1
        return end

    def _level(self, at: int) -> int:
        """Pass over the level of an interval: the 95 and the % of `95% CI`."""
        line = self.line
        if line.at(at).kind == "num":
            sign = line.at(at + 1).text == "%"
            if line.at(at + 1 + sign).low in ("ci", "cis", "confidence", "ic", "c"):
                number = number_at(line, at)
                self.level = number.printed(line) if number is not None else None
                return at + 1 + sign
        return at

    def _after_sign(self, at: int) -> bool:
        return self.line.at(at - 1).text == "±"

    def _percent(self, segments: int) -> None:
        """A `%` is a share of people only beside their number, or where it is the whole heading."""
        for at, _ in self.percents:
            counted = any(f.quantity in ("n", "N", "count", "shares") for f in self.used)
            if counted or (segments == 1 and not self.names) or (not self.names and not self.used):
                self.used.append(_Found("percent", at, at + 1))
            else:
                self.units = True
                self.names.add(at)

    def _minutes(self) -> None:
        """`min` beside a name and no `max` are minutes."""
        ends = [f for f in self.used if f.quantity in ("min", "max")]
        if self.names and [f.quantity for f in ends] == ["min"]:
            self.names.update(range(ends[0].first, ends[0].after))
            self.used.remove(ends[0])

    def _name(self) -> str:
        """The heading without the words that tell of its numbers."""
        kept = sorted(self.names)
        parts: list[str] = []
        for index, token in enumerate(self.line.tokens):
            if token.kind == "sup" and self._footnote(index):
                continue
            if index in self.names or token.text in _DIVIDING or (token.text == "-" and token.spaced):
                parts.append((" " if token.spaced else "") + token.text)
        return tidied("".join(parts)) if kept else ""

    def _footnote(self, at: int) -> bool:
        """Whether a raised number is a mark, not the power of a unit (`m²`, `kg/m²`, `s⁻¹`)."""
        token, before = self.line.at(at), self.line.at(at - 1)
        if token.text[0] in "⁻⁺":
            return False
        return (
            token.text == "¹"
            or token.text[0] in "⁰⁴⁵⁶⁷⁸⁹"
            or before.kind == "num"
            or token.spaced
            or len(before.text) > _LONGEST_UNIT
        )


_LONGEST_UNIT = 3


def _capitals(first: str, second: str) -> bool:
    return len(first) == len(second) == 1 and first.isalpha() and (first + second).isupper()


def _segments(line_tokens: Sequence[Token]) -> Iterator[tuple[int, int]]:
    """First and last token of each run between commas, brackets, slashes and bars."""
    start = 0
    for index, token in enumerate(line_tokens):
        # A dash with spaces around it divides as a comma does: `Male sex — no. (%)`.
        dash = (
            token.text == "-"
            and token.spaced
            and index + 1 < len(line_tokens)
            and line_tokens[index + 1].spaced
        )
        divides = token.text in _DIVIDING or dash
        if divides:
            if index > start:
                yield start, index
            start = index + 1
    if len(line_tokens) > start:
        yield start, len(line_tokens)


_DIVIDING = frozenset("()[],;:|")
