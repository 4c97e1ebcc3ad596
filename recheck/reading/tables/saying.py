"""What a table says of its tests, kept to what concerns each kind of test."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from functools import cache

import regex

from recheck.model import ClaimKind
from recheck.reading.views import TIMEOUT

_EXCLUSIVE = (
    ("independent", "paired"),
    ("one-tailed", "two-tailed"),
    ("welch", "pooled"),
    ("between-groups", "repeated"),
)
_MEANS = frozenset(
    ("independent", "pooled", "welch", "paired", "one-sample", "equivalence", "contrast", "marginal")
)
_ONLY: dict[str, frozenset[str]] = {
    **{
        word: frozenset(("t-test", "F-test", "comparison", "estimate", "z-test", "rank-test"))
        for word in _MEANS
    },
    "rank-test": frozenset(("rank-test", "z-test", "chi2-test", "estimate")),
    "spearman": frozenset(("correlation",)),
    "partial": frozenset(("correlation",)),
    "disattenuated": frozenset(("correlation",)),
    "corrected-df": frozenset(("F-test",)),
    "between-groups": frozenset(("F-test", "estimate")),
    "repeated": frozenset(("F-test", "t-test", "estimate")),
    "yates": frozenset(("chi2-test", "estimate")),
    "uncorrected-chi2": frozenset(("chi2-test", "estimate")),
    "fisher-exact": frozenset(("chi2-test", "estimate")),
    "likelihood-ratio": frozenset(("chi2-test", "estimate")),
    "multi-regression": frozenset(("regression", "estimate", "F-test")),
    "glass-delta": frozenset(("t-test", "estimate", "comparison")),
    "effect-size-r": frozenset(("t-test", "rank-test", "z-test", "F-test")),
    "within-subject-se": frozenset(),
    "spread-unlabelled": frozenset(),
    "inferred": frozenset(),
}
"""Kinds of claims that a statement of the caption or the notes can be about; a statement without an entry is about all."""


def said_of(
    kind: ClaimKind, own: Iterable[str], table: Iterable[str], *, several: bool = False
) -> tuple[str, ...]:
    """What is said of a claim: by its own headings, and by the caption and notes where it can be meant.

    Two words of the table that exclude each other tell of different tests, so neither is taken.
    `several` marks an omnibus test, which adjusted comparisons of pairs are not said of.
    """
    own = tuple(own)
    shared = [
        word for word in table if kind in _ONLY.get(word, (kind,)) and not _contradicted(word, own, table)
    ]
    said = dict.fromkeys((*own, *shared))
    if several:
        said.pop("adjusted-p-post-hoc", None)
        if "adjusted-p" not in own:
            said.pop("adjusted-p", None)
    return tuple(said)


def _contradicted(word: str, own: Sequence[str], table: Iterable[str]) -> bool:
    heard = {*own, *table}
    return any(word in pair and set(pair) <= heard for pair in _EXCLUSIVE)


@cache
def _comparing() -> regex.Pattern[str]:
    return regex.compile(
        r"[*†‡§¶#](?:[^.;]|\.\d){0,40}?(?:p|significan\w+)(?:[^.;]|\.\d){0,30}?(?:\bcompared (?:with|to)\b|\bversus\b|\bvs\b|\bdifferent from\b|\brelative to\b|\bin comparison (?:with|to)\b)"
    )


def marks_compare(text: str) -> bool:
    """Whether a legend says that its marks compare with another row or group: `* P < .05 compared with rye`.

    They are no p of the estimate beside which they stand.
    """
    return bool(_comparing().search(text, timeout=TIMEOUT))


_TESTS_OF_MEANS = (
    (r"\b(?:mann|wilcoxon|kruskal|friedman|rank[- ]?sum|signed[- ]?rank|non-?parametric)", "rank-test"),
    (r"\bpaired\b|\brelated[- ]samples?\b", "paired"),
    (r"(?<!paired )(?<!paired student's )\bt[- ]?tests?\b|\bstudent", "independent"),
    (r"\bwelch", "welch"),
    (r"\banova\b|\banalys[ei]s of variance\b", "between-groups"),
)


def tests_named(text: str) -> tuple[str, ...]:
    """The tests of means and ranks that a caption or a note names, as what is stated of a p without a test of its own."""
    found = dict.fromkeys(
        word for pattern, word in _TESTS_OF_MEANS if regex.search(pattern, text, timeout=TIMEOUT)
    )
    if "paired" in found:
        found.pop("independent", None)
    if "repeated" in text:
        found.pop("between-groups", None)
    return tuple(found)
