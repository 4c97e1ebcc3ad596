"""A p that is told in words alone: `the loaves differed significantly, t(28) = 2.20`."""

from __future__ import annotations

from dataclasses import replace
from decimal import Decimal
from functools import cache

import regex

from recheck.model import P_IN_WORDS, Printed, Relation
from recheck.reading.claims import Draft
from recheck.reading.naming import Named
from recheck.reading.quoting import Sentence
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

_TESTS = frozenset(("t-test", "F-test", "chi2-test", "correlation", "z-test"))
_NEAR_BEFORE, _NEAR_BEHIND = 90, 40
"""Characters before and behind a test within which the word must stand."""

_DOUBTFUL = (
    "margin", "trend", "clinical", "borderline", "approach", "nearly", "almost", "tended", "not only", "significance level",
    "level of significance", "bonferroni", "correct", "adjust", "one-tailed", "one-sided", "if ", "whether", "would",
)  # fmt: skip


def told_in_words(draft: Draft, name: Named, sentence: Sentence) -> Named:
    """The claim with the p that its sentence tells by one word, where it holds one test without a p.

    `significant` is p below the level, `not significant` p above it; the level itself is put in later.
    """
    if name.kind not in _TESTS or "p" in name.values or not {"df", "df2"} & set(name.values):
        return name
    relation = _relation(draft, sentence)
    if relation is None:
        return name
    text = "significant" if relation == "<" else "not significant"
    p = Printed(text, Decimal("0.05"), 2, relation)
    return replace(name, values={**name.values, "p": p}, notes=(*name.notes, P_IN_WORDS))


_TURNING = words("but although though while whereas however it did yet")
_RELATIVE = words("although though while whereas which who whose that despite")
"""Words that put `significant` into another clause than the test."""


@cache
def _words() -> regex.Pattern[str]:
    return regex.compile(
        r"(?<![\w-])(?P<none>non-?|in)?significant(?:ly)?\b|(?<=\breach(?:ed)? (?:statistical )?)significance\b"
    )


@cache
def _negated() -> regex.Pattern[str]:
    """A negation in the clause before the word."""
    return regex.compile(
        r"(?:\b(?:not|no|nor|neither|never|none|without|failed|cannot)\b|n't\b)[^,;:()]{0,60}$"
    )


def _relation(draft: Draft, sentence: Sentence) -> Relation | None:
    """What all the words near the test say, None where there are none or they differ."""
    low = sentence.low
    if sentence.says(_DOUBTFUL):
        return None
    start = draft.line.at(draft.first).start - sentence.start
    end = draft.line.at(draft.after - 1).end - sentence.start
    said: set[Relation] = set()
    for match in _words().finditer(low, timeout=TIMEOUT):
        between = low[match.end() : start] if match.end() <= start else low[end : match.start()]
        near = _NEAR_BEFORE if match.end() <= start else _NEAR_BEHIND
        attribute = low[: match.start()].endswith(("the ", "this ", "that ", "these ", "more ", "most "))
        turns = not _TURNING.isdisjoint(between.replace(",", " ").split()) or between.count(",") > 1
        related = not _RELATIVE.isdisjoint(low[: match.start()].split()[-5:])
        if len(between) > near or ";" in between or attribute or turns or related:
            return None
        negated = match["none"] or _negated().search(low[: match.start()], timeout=TIMEOUT)
        said.add(">" if negated else "<")
    return said.pop() if len(said) == 1 else None
