"""What the reader of a manuscript says of its scores: `crumb score: 1..7`, `knowledge: 0..20, 5 items`, `*: whole`."""

from __future__ import annotations

from collections.abc import Sequence
from decimal import Decimal
from functools import cache

import regex

from recheck.model import Printed, ScoreRule
from recheck.reading.matching import Key, terms
from recheck.reading.scales.described import Scale
from recheck.reading.scales.hints import Hints
from recheck.reading.scales.whose import canonical
from recheck.reading.views import TIMEOUT

FORM = "write NAME: LOWEST..HIGHEST, such as “crumb score: 1..7”, “knowledge: 0..20, 5 items”, “liking: 0..100, not whole” or “*: whole”"


@cache
def _range() -> regex.Pattern[str]:
    return regex.compile(r"(?P<low>[-−]?\d{1,6}) ?(?:\.\.|…|-|–|to) ?(?P<high>[-−+]?\d{1,6})")


@cache
def _items() -> regex.Pattern[str]:
    return regex.compile(r"(?P<items>\d{1,3}) items?", regex.IGNORECASE)


def score_rule(text: str) -> ScoreRule:
    """Read what is said of the scores of one outcome. Raises `ValueError` with one sentence that says what is wrong."""
    name, colon, said = text.rpartition(":")
    name, parts = " ".join(name.split()), [" ".join(part.split()) for part in said.split(",")]
    if not colon or not name or not any(parts):
        raise ValueError(f"“{text}” does not say which scores are what: {FORM}.")
    if name != "*" and not key_of(name):
        raise ValueError(f"“{name}” names no outcome: {FORM}.")
    low = high = items = None
    whole: bool | None = None
    for part in parts:
        ends = _range().fullmatch(part, timeout=TIMEOUT)
        number = _items().fullmatch(part, timeout=TIMEOUT)
        if ends and low is None:
            low, high = (int(ends[end].replace("−", "-")) for end in ("low", "high"))
        elif number and items is None:
            items = int(number["items"])
        elif part.lower() in ("whole", "not whole") and whole is None:
            whole = part.lower() == "whole"
        else:
            raise ValueError(f"“{part}” in “{text}” says nothing of scores, or again what was said: {FORM}.")
    if low is not None and high is not None and low >= high:
        raise ValueError(f"The highest score in “{text}” must be above the lowest (got {low}..{high}).")
    if items is not None and not items >= 1:
        raise ValueError(f"The number of items in “{text}” must be 1 or more (got {items}).")
    if whole is False and items is not None:
        raise ValueError(
            f"“{text}” counts items whose answers are not whole: leave out the items or “not whole”."
        )
    return ScoreRule(name, low, high, items, whole is not False, f"{name}: {', '.join(parts)}")


def key_of(name: str) -> Key:
    """The key under which the name of an outcome is looked for."""
    return canonical(terms(name)) or terms(name)


def asked_scales(rules: Sequence[ScoreRule]) -> dict[Key, Scale]:
    """The scales that were asked for, by the key of their outcome; that of all outcomes is `()`. A later rule replaces an earlier one."""
    return {() if rule.outcome == "*" else key_of(rule.outcome): _scale(rule) for rule in rules}


def _scale(rule: ScoreRule) -> Scale:
    items = rule.items if rule.items is not None and rule.items > 1 else None
    hints = Hints(averaged=items is not None, single=rule.items == 1, of_items=items is not None)
    return Scale(
        names=() if rule.outcome == "*" else (key_of(rule.outcome),), low=_number(rule.low), high=_number(rule.high), stepped=rule.whole, of_items=False, hints=hints,
        items=_number(items), quote=rule.text, passage=-1, sentence=-1, span=(0, 0), asked=True,
    )  # fmt: skip


def _number(value: int | None) -> Printed | None:
    return None if value is None else Printed(str(value), Decimal(value), 0)
