"""What `±` stands for where it is no spread: half the width of an interval, or several standard errors."""

from __future__ import annotations

from functools import cache

import regex

from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

MARGIN = "margin"
"""The word for what stands after `±` and is neither SD nor SE; nothing is computed from it."""

_LEVEL = r"(?:\(?\d\d(?:\.\d)?\ ?%\)?[ -]?)"
_WIDTH = rf"""(?:{_LEVEL}?(?:confidence|credible|fiducial|uncertainty|prediction)[ -](?:limits?|intervals?|bounds?|levels?|ranges?) | {_LEVEL}?(?:c\.?i\.?s?|c\.?l\.?s?|ci95|ci95%)(?!\w)
    | {_LEVEL}\ ?(?:limits?|error\ limits?) | (?:expanded|combined)\ uncertaint(?:y|ies) | margins?\ of\ error
    | (?:1\.96|1\.645|2(?:\.58)?|two|three|3)\ ?(?:×|x|\*|times)?\ ?(?:the\ |their\ )?(?:sems?|ses?|s\.e\.m?\.?|standard\ errors?)(?!\w))"""
_ELSEWHERE = words(
    "figure figures fig bar bars plotted plot plots graph graphs panel whiskers computed calculated compute calculate defined "
    "outliers outlier excluded agreement bland-altman limits formula"
)
"""Words of sentences that speak of a drawing, or of how an interval is made."""


@cache
def _told() -> regex.Pattern[str]:
    """`mean ± 95% CI`, `± denotes 95% confidence limits`, `errors are 2 SE`, `(± half the 95% confidence interval)`."""
    return regex.compile(
        rf"""(?:±|\+/-|\+-|plus[ ]or[ ]minus|plus[- ]minus)\ ?\)?\ ?(?:(?:the|their|its|half|of|a|an|half-?widths?)\ )*{_WIDTH}
        | (?:(?:±|plus[- ](?:or[- ])?minus)(?:\ (?:signs?|values?|terms?|figures?|limits?))?\)? | \b(?:uncertainties|errors|error\ (?:limits|terms)|limits)(?:\ (?:after|behind|following|given)[^.;±]{{0,12}}±?\)?)?)
          \ (?:are|is|were|was|shows?|gives?|denotes?|represents?|indicates?|stands?\ for|refers?\ to|means?)\ (?:(?:the|their|its|half|of|given|as|a|an|half-?widths?)\ )*{_WIDTH}
        | \bmeans?\b[^.;±\d]{{0,40}}\b(?:with|followed\ by)\ (?:(?:the|their|its|half|half-?widths?|of)\ )*{_LEVEL}confidence\ (?:limits|intervals)\ ?\(±\)""",
        regex.VERBOSE | regex.IGNORECASE,
    )


def tells_margins(text: str) -> bool:
    """Whether a text says that half the width of an interval, or a multiple of a spread, stands after `±`."""
    low = text.lower()
    if not any(sign in low for sign in ("±", "+/-", "+-", "plus", "errors", "limits", "uncertaint")):
        return False
    for match in _told().finditer(low, timeout=TIMEOUT):
        sentence = (
            low[low.rfind(". ", 0, match.start()) + 1 : match.start()] + low[match.end() :].split(". ")[0]
        )
        if not _ELSEWHERE.intersection(word.strip("(),;:.") for word in sentence.split()):
            return True
    return False
