"""Scales in the names of a table's rows and columns: `Crumb score (1-7)`, `PHQ-9 [0-27]`, `Pain (VAS, 0-100 mm)`."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import cache

import regex

from recheck.model import LEVELS, Claim, Passage
from recheck.reading.scales.described import Scale, sentence_scales
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT, View, view_of

_LEAD = r"(?:(?:possible |score |scoring |theoretical )?(?:range|scale|score|scored|rated|points?|NRS|VAS|numeric rating scale|visual analogue scale|likert|min(?:imum)?-max(?:imum)?)[ :=,;]{1,2}(?:from |of )?)?"


@cache
def _range() -> regex.Pattern[str]:
    """`(1-7)`, `[range 0-27]`, `(0 to 10 points)`, `, 0-100`."""
    ends = r"(?P<low>[-+]?\d{1,2}) ?(?:-|to|--) ?(?P<high>\+?\d{1,3})"
    return regex.compile(
        rf"[(\[]{_LEAD}{ends}(?: ?(?:points?|scale|scores?|mm|cm|likert|likert scale|rating scale|NRS|VAS|worst|best)?)(?:[;,][^()\[\]]{{1,60}})?[)\]]|[,:] {_LEAD}{ends}(?: points?| scale)?$",
        regex.IGNORECASE,
    )


_NO_SCORES = words(
    "age ages aged year years yr yrs yo month months week weeks day days hour hours h min minutes s time times duration height weight bmi length width volume temperature dose "
    "n no range ci iqr percentile quartile stage grade class level levels period phase visit trial block session wave item items page pages quantile percentiles order rank"
)
"""Words of names whose brackets hold no scale: ages, times, ranges that were observed."""
_DENIED_VALUES = frozenset(("min", "max", "q1", "q3", "median", "percent"))


@dataclass(frozen=True, slots=True)
class Labelled:
    """The scale of a name; `bare` tells that the name only prints two numbers, `own` that it is that of the outcome."""

    scale: Scale
    bare: bool
    own: bool


def label_scales(claim: Claim) -> Iterator[Labelled]:
    """The scales that the names of a summary's row or column tell, that of its outcome first."""
    place = claim.place
    own = frozenset((claim.outcome or "").split(LEVELS))
    texts = dict.fromkeys(text for text in (claim.outcome, claim.group, place.row, place.column) if text)
    parts = dict.fromkeys(
        part for text in texts for part in text.split(LEVELS) if any(char.isdigit() for char in part)
    )
    for part in parts:
        view = view_of(Passage(text=part))
        if told := next(sentence_scales(view, (view.text,), 0, 0, -1), None):
            yield Labelled(told, False, part in own)
        elif _DENIED_VALUES.isdisjoint(claim.values) and (told := _bare(view)):
            yield Labelled(told, True, part in own)


def _plain(text: str) -> list[str]:
    return [word.strip("(),.;:[]").lower() for word in text.split()]


def _bare(view: View) -> Scale | None:
    """Two numbers alone: the ends of a scale, of which it is not said in what steps it goes."""
    match = _range().search(view.text, timeout=TIMEOUT)
    name = view.text[: match.start()] if match else ""
    if match is None or not any(char.isalpha() for char in name) or not _NO_SCORES.isdisjoint(_plain(name)):
        return None
    # Written out, it is read by the patterns of the text.
    spoken = view_of(
        Passage(text=f"{name.strip()} (possible range {view.text[match.start('low') : match.end('high')]})")
    )
    found = next(sentence_scales(spoken, (spoken.text,), 0, 0, -1), None)
    return replace(found, quote=" ".join(view.text.split())) if found else None
