"""Outcomes that a clause asks for: `how satisfied they were` is satisfaction."""

from __future__ import annotations

from functools import cache

import regex

from recheck.reading.matching import Key, terms
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

_NOUNS = {
    "satisfied": "satisfaction", "confident": "confidence", "certain": "certainty", "anxious": "anxiety", "difficult": "difficulty", "hard": "difficulty", "easy": "ease",
    "hungry": "hunger", "thirsty": "thirst", "proud": "pride", "angry": "anger", "stressed": "stress", "motivated": "motivation", "interested": "interest", "bored": "boredom",
    "safe": "safety", "strong": "strength", "warm": "warmth", "likely": "likelihood", "intense": "intensity", "severe": "severity", "painful": "pain", "guilty": "guilt",
    "competent": "competence", "important": "importance", "pleasant": "pleasantness", "aroused": "arousal", "excited": "excitement", "frustrated": "frustration", "engaged": "engagement",
    "depressed": "depression", "attractive": "attractiveness", "afraid": "fear", "liked": "liking", "like": "liking", "enjoyed": "enjoyment", "enjoy": "enjoyment", "trusted": "trust", "trust": "trust",
    "supported": "support", "committed": "commitment", "exhausted": "exhaustion", "involved": "involvement", "loyal": "loyalty", "curious": "curiosity", "familiar": "familiarity", "useful": "usefulness",
}  # fmt: skip
"""What an adjective or a verb asks for, where no ending tells it."""
_ENDINGS = (
    ("able", "ability"),
    ("ible", "ibility"),
    ("ent", "ence"),
    ("ant", "ance"),
    ("y", "iness"),
    ("", "ness"),
)
_NO_NAMES = words("many often long old far few frequently tall large big heavy high much well each the a")


@cache
def _how() -> regex.Pattern[str]:
    """`how satisfied they were`, `how confident in baking the apprentices felt`, `how much they liked the loaf`, `how sour the crumb was`."""
    return regex.compile(
        r"\bhow (?:much (?:they|he or she|participants|apprentices|bakers|people) (?P<verb>\p{L}+)|(?P<what>\p{L}+)(?: \p{L}+){1,6}? (?:were|was|felt|found|is|are|had been))\b",
        regex.IGNORECASE,
    )


def asked_how(text: str) -> tuple[tuple[Key, str], ...]:
    """The outcome of the only clause with `how` of a text, by its noun and as it stands."""
    found = list(_how().finditer(text, timeout=TIMEOUT))
    if len(found) != 1:
        return ()
    word = (found[0]["verb"] or found[0]["what"]).lower()
    if word in _NO_NAMES:
        return ()
    names = dict.fromkeys((_noun(word), word))
    return tuple((key, name) for name in names if (key := terms(name)))


def _noun(word: str) -> str:
    """The noun of an adjective."""
    if word in _NOUNS:
        return _NOUNS[word]
    ending, noun = next(pair for pair in _ENDINGS if word.endswith(pair[0]))
    return word.removesuffix(ending) + noun
