"""Clauses of a sentence around the numbers that were read in it, and the noun phrases at their edges."""

from __future__ import annotations

from collections.abc import Sequence
from functools import cache
from itertools import pairwise

import regex

from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

Spans = Sequence[tuple[int, int]]


@cache
def _joint() -> regex.Pattern[str]:
    """What divides clauses."""
    return regex.compile(
        r";|,? (?:whereas|while|but|although|though)\b|, (?:and|yet|with|as)\b|(?<=[)\]\d%]) and(?= (?:the )?\p{L})"
    )


def clauses(text: str) -> list[tuple[int, int]]:
    """Start and end of each clause; what divides words within brackets divides no clauses."""
    cuts = [
        m.end() for m in _joint().finditer(text, timeout=TIMEOUT) if not _within_brackets(text, m.start())
    ]
    return [pair for pair in pairwise((0, *cuts, len(text))) if pair[0] < pair[1]]


def _within_brackets(text: str, at: int) -> bool:
    opened = text.count("(", 0, at) + text.count("[", 0, at)
    return opened > text.count(")", 0, at) + text.count("]", 0, at)


_DETERMINERS = words("the a an our their its this these those both all each mean average median overall")
_VERBS = words("was were is are differed differ differs did does")
_COMPARED = words(
    "higher greater lower larger smaller longer shorter smallest larger largest highest lowest differ differed differs different "
    "comparable similar equal unaffected increased decreased reduced"
)
"""Words behind the subject that compare what was measured; `taller` and `faster` compare loaves and bakers."""
_PLURAL = words(
    "scores ratings times heights levels rates values errors counts weights marks lengths widths volumes temperatures thresholds "
    "latencies accuracies percentages numbers responses measurements symptoms"
)
"""Plurals that name an outcome; others are mostly people or things."""
_NO_OUTCOMES = words(
    "we it they there he she this that these those result results analysis analyses test tests anova anovas effect effects difference "
    "differences participants participant subjects patients apprentices bakers children adults students people women men group groups "
    "condition conditions comparison comparisons interaction one both neither no all samples respondents which who what estimate estimates "
    "change changes increase decrease reduction latter former data information model models association associations correlation most least lowest highest also "
    "significantly percent two three four several other ratio odds p values value"
)
_GROUP_WORDS = words(
    "group groups condition conditions arm arms cohort cohorts controls participants patients subjects apprentices bakers children adults "
    "students women men girls boys"
)
_STOPS = words(
    "in for of by than among with from between and or to on at the a an was were is are had has scored while whereas but as per vs versus "
    "did rose fell than into under during after before within across"
)


_COUNTED = words(
    "other remaining all both two three four five six seven eight nine ten several many few some such those these"
)


@cache
def _lead() -> regex.Pattern[str]:
    """Words that lead a clause in: `After a week, …`, `However, …`."""
    return regex.compile(
        r"\s*(?:(?:after|in|at|before|during|by|on|with|without|among|across|as|per)\b[^,()]{1,60}"
        r"|however|again|moreover|furthermore|overall|finally|thus|also|here|similarly|likewise|and|then), ",
        regex.IGNORECASE,
    )


def subject_of(clause: str) -> str | None:
    """The noun phrase before the first verb of a clause, where it can name an outcome: `Loaf height` in `Loaf height was …`.

    None for pronouns, people, tests, lists and anything long.
    """
    lead = _lead().match(clause, timeout=TIMEOUT)
    told = (clause[lead.end() :] if lead else clause).split()
    at = next((k for k, word in enumerate(told[:8]) if word.lower() in _VERBS), None)
    if at is None:
        return None
    rest = [word.lower().strip(",;") for word in told[at : at + 5]]
    from_another = "from" in rest[:3]
    given = rest[1:2] and rest[1][:1].isdigit()
    unlike = rest[:2] in (["did", "not"], ["does", "not"])
    if from_another or not (given or unlike or _COMPARED.intersection(rest)):
        return None
    before = told[:at]
    while before and before[0].lower() in _DETERMINERS:
        before = before[1:]
    plain = [w.lower() for w in before]
    good = 0 < len(before) <= 5 and all(w.replace("-", "").isalpha() for w in plain)
    if not good or _NO_OUTCOMES.intersection(plain) or "and" in plain or "or" in plain:
        return None
    if plain[-1].endswith("s") and not plain[-1].endswith(("ss", "us", "is")) and plain[-1] not in _PLURAL:
        return None
    # `In rye loaves was …`: a phrase that starts with a preposition is no subject.
    return None if plain[0] in _STOPS or plain[-1] in _STOPS else " ".join(before)


def phrase_before(text: str, at: int) -> tuple[str, str]:
    """The noun phrase that ends where a bracket opens, and the word before it: (`rye group`, `in`).

    Two empty texts where no bracket opens there or the phrase is longer than four words.
    """
    before = text[:at].rstrip()
    if before[-1:] not in ("(", "["):
        return "", ""
    told = before[:-1].rstrip().split(" ")
    found: list[str] = []
    for word in reversed(told[-6:]):
        low = word.lower().strip(",;")
        if low in _STOPS or low != word.lower():
            lead = low if low in _STOPS else ""
            if lead in ("the", "a", "an"):
                rest = told[: len(told) - len(found) - 1]
                lead = rest[-1].lower() if rest and rest[-1].lower() in _STOPS else ""
            return (" ".join(reversed(found)), lead) if found else ("", "")
        if not word.replace("-", "").replace("'", "").isalnum() or len(found) == 4:
            return "", ""
        found.append(word)
    whole = len(told) == len(found)
    return (" ".join(reversed(found)), "") if whole and found else ("", "")


def names_a_group(phrase: str) -> bool:
    """Whether a phrase ends with a word for a group: `rye group`, `trained apprentices`; not `34 apprentices`."""
    told = phrase.lower().split()
    plain = phrase.replace(" ", "").replace("-", "").replace("'", "").isalpha() and not _COUNTED.intersection(
        told
    )
    return plain and len(told) > 1 and told[-1] in _GROUP_WORDS
