"""Linking tests that do not compare two means to the summaries of their sentence: of variances, of ranks, of one group."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace
from functools import cache

import regex

from recheck.model import EXACT_VALUE, OF_DIFFERENCES, Claim, Printed
from recheck.reading.numerals import printed
from recheck.reading.placed import Placed
from recheck.reading.views import TIMEOUT

Sentences = Mapping[tuple[int, int], Sequence[Placed]]
_SAME = "the only {} in the same sentence"


def of_variances(claim: Claim) -> bool:
    """Whether a test is one of equal variances."""
    return claim.says("variance-test")


def with_variances(tests: Iterable[Placed], summaries: Sentences) -> dict[str, Claim]:
    """Tests of equal variances with all groups of their sentence: two, or one more than the df of Bartlett's test."""
    found = {}
    for test in tests:
        claim = test.claim
        df = claim.values.get("df") if claim.kind == "chi2-test" else claim.values.get("df1")
        here = summaries.get((test.passage, test.sentence), ())
        by_df = claim.says("bartlett", "levene") and df is not None
        if len(here) >= 2 and len(here) == (df.value + 1 if by_df and df is not None else 2):
            found[claim.id] = _linked(claim, here, _SAME.format(f"{len(here)} group summaries"))
    return found


def with_sizes(tests: Iterable[Placed], sized: Sentences) -> dict[str, Claim]:
    """Tests of ranks, each alone in its sentence, with the two groups whose sizes stand there."""
    by_place: dict[tuple[int, int], list[Placed]] = {}
    for test in tests:
        by_place.setdefault((test.passage, test.sentence), []).append(test)
    found = {}
    for place, own in by_place.items():
        here = sized.get(place, ())
        if len(own) == 1 and len(here) == 2:
            found[own[0].claim.id] = _linked(own[0].claim, here, _SAME.format("two groups with their sizes"))
    return found


def with_one_group(test: Placed, here: Sequence[Placed]) -> Claim | None:
    """A t test with the only summary of its sentence, and what that mean is compared with, where the sentence tells it."""
    if len(here) != 1:
        return None
    claim, summary = test.claim, here[0]
    n, df = summary.claim.values.get("n"), claim.values.get("df")
    if n is not None and df is not None and df.value != n.value - 1:
        return None
    claim = _linked(claim, here, _SAME.format("group summary"))
    value, exact = _compared_with(test)
    if value is not None and value.percent == summary.claim.values["mean"].percent:
        notes = (*claim.notes, EXACT_VALUE) if exact else claim.notes
        return replace(claim, values={**claim.values, "comparison_value": value}, notes=notes)
    before = test.text[: max(summary.start - test.at, 0)]
    sure = summary.start < test.start and (n is not None or claim.says("paired"))
    if sure and _of_differences().search(before, timeout=TIMEOUT):
        return replace(claim, notes=(*claim.notes, OF_DIFFERENCES))
    return claim if claim.says("paired", "one-sample") else None


def _linked(claim: Claim, groups: Sequence[Placed], basis: str) -> Claim:
    ids = tuple(item.claim.id for item in groups)
    return replace(claim, groups=ids, link=basis, link_confidence="high")


@cache
def _named_value() -> regex.Pattern[str]:
    """A value that a mean is compared with, named as such: `the target of 500 g`, `chance (50%)`, `test value = 4`."""
    return regex.compile(
        r"""\b(?:(?:test|reference|comparison|target|neutral|hypothesi[sz]ed|criterion|standard|norm\w*)\ (?:value|mean|weight|height|score|level|point)
        | (?:the|a)\ (?:\w+\ )?(?:standard|benchmark|reference)
        | target | chance(?:\ (?:level|performance))? | (?:scale(?:'s)?\ |theoretical\ )?mid-?point(?:\ of\ the\ (?:\S+\ ){0,2}scale)? | population\ mean | μ0? | norm )
        (?:\ (?:of|was|is|at|level\ of))? \ ?[(=:,]?\ ?(?:of\ )?(?P<value>[-−]?\d+(?:[.,]\d+)?\ ?%?)(?![\d.,]*\d)""",
        regex.VERBOSE | regex.IGNORECASE,
    )


@cache
def _plain_value() -> regex.Pattern[str]:
    """The like without a name, for a sentence that says that it is a test of one sample: `differed from 4`."""
    return regex.compile(
        r"""\b(?:differ\w*(?:\ (?:significantly|reliably|clearly))?\ from | (?:tested\ )?against | compared\ (?:with|to) | exceed\w* | above | below
        | (?:greater|higher|lower|less|larger|smaller|more)\ than)\ (?:(?:the|a)\ value\ (?:of\ )?)?(?P<value>[-−]?\d+(?:[.,]\d+)?\ ?%?)
        (?!\ ?(?:to|-|–)\ ?\d)(?=\ ?(?:[,.;)(]|$|%|(?:in|on|by|with|when|using|g|mm|cm|points?)\b))""",
        regex.VERBOSE | regex.IGNORECASE,
    )


@cache
def _of_differences() -> regex.Pattern[str]:
    """Words right before a mean that make it one of differences: `the mean gain in bench scores (M = 3.2`."""
    return regex.compile(
        r"\b(?:differences?|changes?|gains?|improvements?|increases?|decreases?|reductions?|difference scores?)\b(?:(?! to )[^;.,]){0,45}$",
        regex.IGNORECASE,
    )


def _compared_with(test: Placed) -> tuple[Printed | None, bool]:
    """The one value that the sentence says the mean is compared with, and whether it is exact; None where there are none or several."""
    patterns = [_named_value()]
    if test.claim.says("one-sample"):
        patterns.append(_plain_value())
    for pattern in patterns:
        found = {match["value"]: match[0] for match in pattern.finditer(test.text, timeout=TIMEOUT)}
        if len(found) == 1:
            ((text, whole),) = found.items()
            value = printed(text.replace(" ", ""))
            return value, value is not None and _exact(whole.lower(), value)
        if found:
            return None, False
    return None, False


_CHANCES = frozenset((5, 10, 20, 25, 50))
"""Percentages that are one half, quarter, fifth, tenth or twentieth; of three answers chance is no such number."""


def _exact(words: str, value: Printed) -> bool:
    """Whether a value is not rounded: the midpoint of a scale in halves, one answer of two, four, five, ten or twenty by chance."""
    if "midpoint" in words or "mid-point" in words or "neutral" in words:
        return (2 * value.value) % 1 == 0
    return "chance" in words and (value.value if value.percent else 100 * value.value) in _CHANCES


def with_differences(tests: Iterable[Placed]) -> dict[str, Claim]:
    """Tests with a mean and SD of their own that are called those of differences before them in the sentence."""
    found = {}
    for test in tests:
        claim = test.claim
        own = {"sd", "t"} <= claim.values.keys() and {"mean_difference", "estimate"} & claim.values.keys()
        if own and _paired_words().search(test.text[: test.end - test.at], timeout=TIMEOUT):
            found[claim.id] = replace(claim, notes=(*claim.notes, OF_DIFFERENCES))
    return found


@cache
def _paired_words() -> regex.Pattern[str]:
    """What is told of differences within pairs alone: `SD of the differences`, `mean of the differences`, `mean change`."""
    return regex.compile(
        r"""\b(?:sd|s\.d\.|standard\ deviation)\ of\ (?:the\ |their\ )?(?:paired\ |individual\ )?(?:differences?|changes?|gains?|improvements?)\b
        | \bmeans?\ of\ (?:the\ |their\ |all\ )?(?:paired\ |individual\ |\d+\ )?differences\b
        | \b(?:mean|average)\ (?:paired\ |individual\ |within-\w+\ )?(?:changes?|gains?|improvements?|increases?|decreases?|reductions?|rises?|falls?|drops?)\b(?!\ (?:differed|in\ the\ difference))""",
        regex.VERBOSE | regex.IGNORECASE,
    )
