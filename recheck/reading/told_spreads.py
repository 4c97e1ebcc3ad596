"""The SDs of all groups that are told in one list beside a test of equal variances."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import Printed
from recheck.reading.group_sizes import Told
from recheck.reading.numerals import Line, printed
from recheck.reading.views import TIMEOUT

MOST = 12


@cache
def _list() -> regex.Pattern[str]:
    """`SDs were 2.1, 3.3 and 4.0 (n = 20 each)`, `the SDs of the two lines (0.41 and 0.62; n = 12 each)`, `… (ns = 20, 18 and 21)`."""
    number = r"\d+\.\d+"
    joint = r"(?:,\ and\ |,\ |\ and\ |\ vs\.?\ |\ versus\ |;\ |/)"
    return regex.compile(
        rf"""\b(?:SDs|[Ss]tandard\ deviations)\b [^.;,\d]{{0,50}}? [\ (=:] (?P<sd>{number})(?:{joint}(?P<sd>{number}))+ (?![\d.]*\d)
        [^.\d=]{{0,25}}? \b[nN]s?\ ?=\ ? (?: (?P<each>\d{{1,4}})\ (?:each|per\ \w+|in\ each|in\ both) | (?P<n>\d{{1,4}})(?:{joint}(?P<n>\d{{1,4}}))+ ) (?![\d.]*\d)""",
        regex.VERBOSE,
    )


def with_told_spreads(told: Sequence[Told], text: str, start: int, before: str) -> list[Told]:
    """The drafts of a sentence; its only test, one of equal variances, gets the SDs and ns that it, or the sentence before, lists.

    `text` is the sentence, `start` where it begins, `before` the sentence before. Nothing is added where group summaries stand in it.
    """
    tests = [at for at, (_, name) in enumerate(told) if name is not None]
    if len(tests) != 1:
        return list(told)
    draft, name = told[tests[0]]
    if name is None or "variance-test" not in name.stated or name.kind not in ("F-test", "chi2-test"):
        return list(told)
    found = _values(draft.line, text, start)
    if not found and before:
        found = _values(draft.line, before, draft.line.view.text.rfind(before, 0, start))
    return [
        (other, replace(own, values={**own.values, **found}) if own is not None and at == tests[0] else own)
        for at, (other, own) in enumerate(told)
    ]


def _values(line: Line, text: str, start: int) -> dict[str, Printed]:
    matches = list(_list().finditer(text, timeout=TIMEOUT))
    if len(matches) != 1 or start < 0:
        return {}
    (match,) = matches
    sds = match.spans("sd")
    ns = match.spans("each") * len(sds) if match["each"] else match.spans("n")
    if len(sds) != len(ns) or len(sds) > MOST:
        return {}
    found: dict[str, Printed] = {}
    for i, (sd, n) in enumerate(zip(sds, ns, strict=True), 1):
        for key, (first, after) in ((f"sd{i}", sd), (f"n{i}", n)):
            number = printed(text[first:after])
            if number is None:
                return {}
            page, box = line.view.box(start + first, start + after)
            found[key] = replace(number, page=page, box=box)
    return found
