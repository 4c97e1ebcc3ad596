"""What was not read, told in one or two sentences a document."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from recheck.model import PassageKind

KINDS: dict[PassageKind, str] = {
    "table": "the text of tables",
    "figure": "the text of figures",
    "references": "the references",
}
"""Passages that are not read for results; running heads and line numbers interest nobody."""

TOO_LONG = "too long"

LEFT_OUT: dict[str, tuple[str, str]] = {
    "several": ("summary of several results", "summaries of several results"),
    "legend": ("legend of marks", "legends of marks"),
    "critical": ("critical value", "critical values"),
    "level": ("level of significance", "levels of significance"),
    "plan": ("value of a plan or an example", "values of plans or examples"),
    "assumption": ("test of an assumption", "tests of assumptions"),
    "rule": ("rule of thumb", "rules of thumb"),
    "credible": ("interval that is no confidence interval", "intervals that are no confidence intervals"),
    "equation": ("equation", "equations"),
    "curve": ("constant or fit of a curve", "constants or fits of curves"),
    "setting": ("setting with its tolerance", "settings with their tolerance"),
    "other study": ("result of another study", "results of other studies"),
}
"""Why numbers are no results of this study: one such place, several such places."""


def notes_of(kinds: Iterable[PassageKind], left: Mapping[str, int]) -> tuple[str, ...]:
    """One sentence for the passages that were not read, one for the numbers that were left out.

    `kinds` are those of the passages that have digits; `left` counts reasons, the keys of `LEFT_OUT` and `TOO_LONG`.
    """
    skipped = set(kinds)
    unread = [words for kind, words in KINDS.items() if kind in skipped]
    notes = [f"Not read for results: {', '.join(unread)}."] if unread else []
    told = [counted(left[reason], *forms) for reason, forms in LEFT_OUT.items() if left.get(reason)]
    if told:
        notes.append(f"Left out as no single results of this study: {', '.join(told)}.")
    if left.get(TOO_LONG):
        notes.append(f"Took too long to read: {counted(left[TOO_LONG], 'paragraph', 'paragraphs')}.")
    return tuple(notes)


def counted(count: int, one: str, several: str) -> str:
    """A count with its noun."""
    return f"{count} {one if count == 1 else several}"
