"""Tests of equal variances, told apart from tests of means by the words around their numbers."""

from __future__ import annotations

from functools import cache

import regex

from recheck.reading.claims import Draft
from recheck.reading.views import TIMEOUT

_REACH = 160
"""Characters before a result in which its test is looked for."""


@cache
def _of_variances() -> regex.Pattern[str]:
    """What names a test of variances: `Levene's test`, `equality of variances`, `the variances of rye and wheat differed`."""
    return regex.compile(
        r"""levene | (?<!pillai-)(?<!pillai[ ])bartlett | fligner | (?:equal|unequal|homogen\w*|heterogen\w*)\ (?:of\ (?:the\ )?)?(?:error\ )?variances?
        | (?:equality|inequality|ratio|comparison|difference|homogeneity|heterogeneity)\ (?:of|in|between)\ (?:the\ )?(?:error\ |two\ |both\ |group\ )?varianc\w+
        | variance\ ratio | homoge?n?e?oscedastic\w* | homoscedastic\w*
        | \bvariances?\b [^;,]{0,90}? \b(?:differ\w*|equal|unequal|similar|alike|homogeneous|heterogeneous|larger|smaller|greater)\b
        | \b(?:sds|standard\ deviations)\b [^;,.]{0,60}? \b(?:differ\w*|equal|unequal|similar|homogeneous|heterogeneous)\b
        | differ\w*\ in\ (?:their\ )?varianc\w+ | \bvariances\b""",
        regex.VERBOSE,
    )


@cache
def _of_means() -> regex.Pattern[str]:
    """What names a test of something else, or turns to it."""
    return regex.compile(
        r"""\bt[- ]tests? | \bt(?=\ ?\() | anova\b | analys[ei]s\ of\ (?:co)?variance | student | welch | mann | wilcoxon | kruskal | \beffects?\b | interaction
        | regress | correlat | \bdiffer\w* | \b(?:higher|lower|taller|better|worse|faster|slower|rose|fell|scored)\b | \bmeans?\b""",
        regex.VERBOSE,
    )


@cache
def _no_test() -> regex.Pattern[str]:
    """What speaks of variances and of no test of them."""
    return regex.compile(
        r"varian\w+ (?:explained|accounted|inflation)|(?:explain\w*|account\w* for|% of|percent of|proportion of)(?: the)? varian"
    )


def of_variances(draft: Draft) -> tuple[str, ...]:
    """What a draft of F or χ² says where it is a test of equal variances: `variance-test` and the test's name; else nothing."""
    statistic = draft.get("F", "chi2")
    if statistic is None or draft.get("t"):
        return ()
    start, end = draft.line.at(draft.first).start, draft.line.at(draft.after - 1).end
    text = draft.line.view.text
    begin = draft.line.tokens[0].start
    # The name of the statistic may hold that of the test: `Bartlett's K² = …`.
    named_to = draft.line.at(statistic.after - 1).end
    before = _outside_brackets(text[max(begin, start - _REACH) : named_to].lower())
    behind = regex.match(
        r"[ ,;:]{0,3}(?:by|in|using|with|of)? ?(?:levene|bartlett)", text[end : end + 40].lower()
    )
    if _no_test().search(before, timeout=TIMEOUT) or "spheric" in before:
        return ()
    told = _last(_of_variances(), before)
    if behind is None and (told < 0 or told < _last(_of_means(), before)):
        return ()
    named = before + (behind[0] if behind else "")
    if "bartlett" in named:
        return ("variance-test", "bartlett")
    if statistic.quantity == "chi2":
        return ()
    return ("variance-test", "levene") if "levene" in named or "forsythe" in named else ("variance-test",)


def _last(pattern: regex.Pattern[str], text: str) -> int:
    """Where the last match ends; −1 where there is none."""
    return max(
        (match.end() for match in pattern.finditer(text, overlapped=True, timeout=TIMEOUT)), default=-1
    )


def _outside_brackets(text: str) -> str:
    """The text with closed brackets blanked: what they hold is about something else."""
    return regex.sub(r"\([^()]*\)", lambda match: " " * len(match[0]), text, timeout=TIMEOUT)
