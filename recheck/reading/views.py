"""A passage as the grammar sees it: look-alike characters, spaces and markup made one, places kept."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import cache

import regex

from recheck.model import Passage
from recheck.model.printed import Box
from recheck.reading.alike import FLAT, LOWERED, RAISED, TABLE

TIMEOUT = 2.0
"""Seconds that one pattern may take over one passage."""


@dataclass(frozen=True, slots=True, eq=False)
class View:
    """The text that the grammar reads, and for each of its characters the one in the passage.

    `at` has one entry more than `text`: the end of the passage.
    """

    text: str
    at: Sequence[int]
    passage: Passage

    def span(self, start: int, end: int) -> tuple[int, int]:
        """The characters of the passage that stand for those from `start` up to `end`."""
        first, last = self.at[start], self.at[max(end - 1, start)]
        return first, max(last + 1, first)

    def printed_text(self, start: int, end: int) -> str:
        """The passage's own text there, white space collapsed."""
        first, last = self.span(start, end)
        return " ".join(self.passage.text[first:last].split())

    def box(self, start: int, end: int) -> tuple[int | None, Box | None]:
        """Page and box of those characters, where the passage has a layout."""
        layout = self.passage.layout
        return layout.box(*self.span(start, end)) if layout else (None, None)


def view_of(passage: Passage) -> View:
    """The passage as the grammar reads it."""
    text = passage.text.translate(TABLE)
    at: Sequence[int] = range(len(text) + 1)
    if passage.marks.strip():
        text, at = _with_marks(text, passage.marks, at)
    if "\\" in text or "$" in text or "_{" in text or "^{" in text:
        text, at = _replaced(text, at, _tex(), _from_tex)
    if "&" in text and ";" in text:
        text, at = _replaced(text, at, _entity(), _from_entity)
    for sign, pattern, function in _MARKUP:
        if sign in text:
            text, at = _replaced(text, at, pattern(), function)
    if "(" in text and not _LOWERED_DIGITS.isdisjoint(text):
        text = _in_brackets().sub(_on_base_line, text, timeout=TIMEOUT)
    if "  " in text or not _FILLERS.isdisjoint(text):
        text, at = _replaced(text, at, _filler(), _from_filler)
    return View(text, at, passage)


_Match = regex.Match[str]
_LOWERED_DIGITS = frozenset(LOWERED.values())


@cache
def _in_brackets() -> regex.Pattern[str]:
    """Degrees of freedom that are lowered although they stand in brackets, or together with these: `F₍₁,₂₆₎`."""
    return regex.compile(r"(?<=[\p{L}²⁰-⁹] ?)\((?=[^)]*[₀-₉])(?:[₀-₉.,·;= ]|df){1,24}\)")


def _on_base_line(match: _Match) -> str:
    return match[0].translate(FLAT)


def _replaced(
    text: str, at: Sequence[int], pattern: regex.Pattern[str], function: Callable[[_Match], str]
) -> tuple[str, Sequence[int]]:
    """Replace every match, and keep for each new character where it came from."""
    parts: list[str] = []
    places: list[int] = []
    last = 0
    for match in pattern.finditer(text, timeout=TIMEOUT):
        new = function(match)
        start, end = match.span()
        if new == match[0]:
            continue
        parts += (text[last:start], new)
        places += at[last:start]
        # A sign stands where its markup starts; several characters where they are found again, else at its end.
        again = match[0].find(new[1:]) if len(new) > 1 else 1
        first = start + again - 1 if again > 0 else max(start, end - len(new))
        places += [at[min(first + k, end - 1)] for k in range(len(new))]
        last = end
    if not parts:
        return text, at
    parts.append(text[last:])
    places += at[last:]
    return "".join(parts), places


def _with_marks(text: str, marks: str, at: Sequence[int]) -> tuple[str, Sequence[int]]:
    """Write raised and lowered digits as such, and put `_` before a lowered word."""
    parts: list[str] = []
    places: list[int] = []
    last = 0
    for match in _marked().finditer(marks, timeout=TIMEOUT):
        start, end = match.span()
        run = text[start:end]
        table = RAISED if match[0][0] == "^" else LOWERED
        new = "".join(table.get(char, char) for char in run)
        lowered_word = table is LOWERED and run[0].isalpha() and start > 0 and text[start - 1].isalnum()
        parts += (text[last:start], "_" if lowered_word else "", new)
        places += [*at[last:start], *([at[start]] if lowered_word else []), *at[start:end]]
        last = end
    parts.append(text[last:])
    places += at[last:]
    return "".join(parts), places


@cache
def _marked() -> regex.Pattern[str]:
    return regex.compile(r"\^+|_+(?: _+)*")


_FILLERS = frozenset(
    "\u0302\u0303\u030c^ﬀﬁﬂﬃﬄﬅ\u00ad\u200b\u200c\u200d\u200e\u200f\u2060\u2061\u2062\u2063\u2064\ufeff"
)


@cache
def _filler() -> regex.Pattern[str]:
    """Runs of spaces, hats, characters without width, ligatures, powers written with a caret."""
    return regex.compile(
        r"[ ]{2,}|(?<=[ηωεχβ])[\u0302\u0303\u030c]|[\u00ad\u200b-\u200f\u2060-\u2064\ufeff]|[ﬀ-ﬅ]|\^[({]?(-?\d{1,3})[)}^]?"
    )


_LIGATURES = dict(zip("ﬀﬁﬂﬃﬄﬅ", ("ff", "fi", "fl", "ffi", "ffl", "st"), strict=True))


def _from_filler(match: _Match) -> str:
    found = match[0]
    if found[0] == " ":
        return " "
    if found[0] == "^":
        return "".join(RAISED[char] for char in match[1])
    return _LIGATURES.get(found, "")


_TEX_SIGNS = {
    "chi": "χ", "eta": "η", "beta": "β", "alpha": "α", "omega": "ω", "rho": "ρ", "phi": "φ", "varphi": "φ",
    "Delta": "Δ", "delta": "δ", "mu": "μ", "sigma": "σ", "epsilon": "ε", "varepsilon": "ε", "pm": "±",
    "times": "×", "cdot": "·", "leq": "≤", "le": "≤", "geq": "≥", "ge": "≥", "lt": "<", "gt": ">",
    "approx": "≈", "sim": "≈", "simeq": "≈", "neq": "≠", "leqslant": "≤", "geqslant": "≥", "lambda": "λ",
    "tau": "τ", "kappa": "κ", "quad": " ", "qquad": " ", "bar": "", "overline": "", "infty": "∞",
}  # fmt: skip


@cache
def _tex() -> regex.Pattern[str]:
    return regex.compile(
        r"""\\(?P<name>[A-Za-z]{1,16})[ ]?(?P<open>\{?)   # \chi, \hat{
        |\\(?P<sign>[()\[\],;:!%&_\#{}$ ])               # \( \, \%
        |\^\{?(?P<power>-?\d{1,3})\}?                    # ^2 ^{-5}
        |_\{(?P<sub>[^{}]{0,30})\}                       # _{1, 38}
        |[{}$]""",
        regex.VERBOSE,
    )


def _from_tex(match: _Match) -> str:
    if match["name"]:
        bar = "X" if match["name"] in ("bar", "overline") and match["open"] else ""
        return bar + _TEX_SIGNS.get(match["name"], "")
    if match["sign"]:
        return {"%": "%", "&": "&", "_": "_", "#": "#"}.get(
            match["sign"], " " if match["sign"] in ",;: " else ""
        )
    if match["power"]:
        return "".join(RAISED[char] for char in match["power"])
    if match["sub"] is not None:
        return "_" + match["sub"].replace(" ", "")
    return ""


@cache
def _entity() -> regex.Pattern[str]:
    return regex.compile(r"&(?:#\d{1,6}|#x[0-9A-Fa-f]{1,6}|[A-Za-z]{2,8}\d{0,2});")


def _from_entity(match: _Match) -> str:
    from html import unescape

    return unescape(match[0]).translate(TABLE)


@cache
def _tag() -> regex.Pattern[str]:
    return regex.compile(r"<(/?)(i|em|b|strong|sub|sup|span|mark|u)\b[^<>]{0,60}>", regex.IGNORECASE)


def _from_tag(match: _Match) -> str:
    name, closing = match[2].lower(), match[1]
    return "" if closing else {"sub": "_", "sup": "^"}.get(name, "")


@cache
def _emphasis() -> regex.Pattern[str]:
    """A symbol between markers of emphasis: `_t_(22)`, `*p* = .03`, `**F**`."""
    return regex.compile(r"(?<![\w*])([*_]{1,3})(\p{L}[\p{L}\p{M}\d²^ ~-]{0,16})\1(?![\p{L}*])")


def _from_emphasis(match: _Match) -> str:
    return match[2]


@cache
def _lowered() -> regex.Pattern[str]:
    """A subscript between tildes, which stand for `≈` here: `F~(1,26)~ = 6.45`, `t~13~ = 2.1`."""
    return regex.compile(r"(?<=[\p{L}²*_^])≈([\w(][\w.,; =)]{0,16})≈(?=[*_]? ?[=<>≤≥(])")


def _from_lowered(match: _Match) -> str:
    return "_" + match[1]


_MARKUP: tuple[tuple[str, Callable[[], regex.Pattern[str]], Callable[[_Match], str]], ...] = (
    ("</", _tag, _from_tag),
    ("*", _emphasis, _from_emphasis),
    ("_", _emphasis, _from_emphasis),
    ("≈", _lowered, _from_lowered),
)
