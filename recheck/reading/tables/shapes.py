"""What a cell of a table looks like, before anything is known of its heading."""

from __future__ import annotations

from functools import cache

import regex

from recheck.reading.tokens import DIGITS
from recheck.reading.views import TIMEOUT


@cache
def _numeric() -> regex.Pattern[str]:
    """A cell that starts with a number: `12.3 (4.5)`, `< .001`, `−2.46`, `(0.9–1.7)`, `$ 12`."""
    return regex.compile(r"^[(\[<>≤≥=≈~$£€ ]*[-+±]?[ ]?(?:\d|[.·,]\d)")


@cache
def _empty() -> regex.Pattern[str]:
    return regex.compile(r"^[-.…/*†‡§¶# ]*$|^n\.?/?a\.?$|^(?:ref|reference|n\.?s\.?)\.?$", regex.IGNORECASE)


@cache
def size_only() -> regex.Pattern[str]:
    """`n = 24` and nothing else."""
    return regex.compile(r"^\(?\[?[nN] ?[=:] ?[\d, ]+\w?\)?\]?$")


@cache
def _size() -> regex.Pattern[str]:
    """The n of a group beside its name, the df of a test in the heading of its column."""
    return regex.compile(r"[nN] ?= ?\d[\d, ]*|\(d\.?f\.? ?= ?\d[\d, ]*\)")


@cache
def _level() -> regex.Pattern[str]:
    """`95% CI`, which starts with a number but is a heading."""
    return regex.compile(r"[(\[]?\d\d(?:\.\d)? ?% ?(?:CI|C\.I\.|CrI|confidence|credib)", regex.IGNORECASE)


@cache
def compound() -> regex.Pattern[str]:
    """A cell that can be no heading: a number with decimals, a pair, an interval, a share."""
    return regex.compile(r"\d[.·]\d|\d ?[±(\[]|\d ?%|^-\d|^[<>≤≥]? ?[.,·]\d")


PERCENT = regex.compile(r"\d{1,3} ?%")
"""Shares over columns (`1%`, `2%` of salt) are headings too."""
YEAR = regex.compile(r"(?:19|20)\d\d")
"""Years over columns are headings, though they are numbers."""


_BRACKETS = frozenset("±([")
MARKS = frozenset("*†‡§¶# ,")
"""What a cell of footnote marks alone consists of."""


def kind_of(text: str) -> str:
    """`number`, `words`, `none` for what holds no value (a dash, `ref`), or "" for an empty cell."""
    if not text:
        return ""
    if _empty().match(text, timeout=TIMEOUT):
        return "none"
    if size_only().match(text, timeout=TIMEOUT):
        return "words"
    if _numeric().match(text, timeout=TIMEOUT) and not _level().match(text, timeout=TIMEOUT):
        letters, digits = sum(map(str.isalpha, text)), sum(map(str.isdigit, text))
        return "words" if letters > max(4, 2 * digits) and not _BRACKETS.intersection(text) else "number"
    rest = _size().sub("", text, timeout=TIMEOUT) if "=" in text else text
    if "=" in rest and not DIGITS.isdisjoint(rest):
        return "number"
    return "words" if any(map(str.isalnum, text)) else "none"


NAMES_TESTS = regex.compile(r"(?:statistical |type of |kind of )?tests?(?: used| type)?", regex.IGNORECASE)
"""The heading of a column that names the test of each row."""
NAMES_LEVELS = regex.compile(
    r"levels?|categor(?:y|ies)|sub-?groups?|months?|weeks?|days?|visits?|waves?|sessions?|time ?-?points?|follow-?ups?"
    r"|(?:months?|weeks?|days?) (?:of|after|since) \w+(?: \w+)?",
    regex.IGNORECASE,
)
"""The heading of a column that tells the level or the time of each row."""
JUDGES = regex.compile(
    r"^(?:certainty|quality of|strength of|GRADE\b|importance|risk of bias)", regex.IGNORECASE
)
"""The heading of a column that judges the evidence of each row."""
