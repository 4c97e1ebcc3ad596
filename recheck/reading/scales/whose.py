"""Which outcomes a sentence gives a scale: `sourness and crumb were rated …`, `rated the loaf for sourness …`, `PHQ-9 (range 0-27)`."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from itertools import pairwise

import regex

from recheck.reading.matching import FUNCTION_WORDS, LEFT_OUT, Key, terms
from recheck.reading.scales.asked_how import asked_how
from recheck.reading.scales.pieces import Piece
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

OF_SCORES = frozenset(
    ("score", "rating", "scale", "level", "questionnaire", "inventory", "subscale", "total", "rated", "scored", "self-rated", "self", "reported", "perceived", "perception",
     "judgement", "judgment", "measure", "intensity", "degree", "severity", "variable", "overall-score", "instrument", "test", "point", "task", "item", "subjective", "current", "general", "vas", "nrs", "likert")
)  # fmt: skip
"""Stems that may stand beside an outcome's name without making it another one: `sourness rating` is sourness."""

_THINGS = words(
    "visual analogue analog numeric numerical verbal hedonic likert slider coded correct incorrect right wrong yes no loaf bread sample product item statement question response answer participant apprentice baker panellist panelist person people subject patient student child "
    "adult rater judge assessor they we it he she one each all both this that these those stimulus picture image face video trial word sentence scale score rating "
    "questionnaire measure variable attribute outcome dimension following aspect other same point value category level option format end test anchor aim study "
    "data result group condition experiment likert type first second third last number us them who which what there here researcher expert half time day week "
    "range ranging month page text table figure section part procedure task session block set list total range minimum maximum mean average median sd sum "
    "single global closed direct two three four five six seven eight nine ten twelve twenty several multiple"
)
"""What is scored, who scores, and words that name no outcome by themselves."""


@dataclass(frozen=True, slots=True)
class Whose:
    """The outcomes of a scale by their keys, each with its words; `before` tells that the sentence before has to be asked."""

    names: tuple[tuple[Key, str], ...] = ()
    before: bool = False


_NP = r"[\p{L}\d][\p{L}\d'\"/ ,()&-]*?"
_AUX = r"(?:was|were|is|are|has been|have been|had been|being|been)"
_ADV = r"(?: (?:then|also|each|all|both|again|always|first|subsequently|independently|separately|individually|subjectively|visually|finally|similarly|likewise|once|only|usually|blindly|be))*"
_DONE = (
    r"(?:rated|scored|measured|assessed|evaluated|judged|recorded|quantified|graded|indicated|reported|expressed|estimated|marked|determined|tested|captured|"
    r"operationali[sz]ed|gauged|ranked|answered|obtained|collected|made|given|provided|taken|noted|coded|asked|enquired|elicited|surveyed|addressed|examined|(?:the |an? )?(?:mean|average|sum|composite|total)\b)"
)
_TO_DO = r"to (?:rate|score|judge|assess|evaluate|indicate|report|measure|grade|express|mark|estimate|state)"
_DO = (
    rf"(?:{_TO_DO}"
    r"|(?:rated|scored|judged|assessed|evaluated|indicated|reported|measured|graded|expressed|marked|estimated|stated|rate|indicate))"
)
_ON = r"(?:on|using|from|with|by|via|as|at|between|along|through|according|where|in|into|before|after|during|when|immediately|once|twice|how)"


@cache
def _passive() -> regex.Pattern[str]:
    """`Sourness and crumb colour were rated`."""
    return regex.compile(
        rf"(?:^|[.;:] |, (?:and |while |whereas |then )?|[(\[]|\b(?:while|whereas|and|that|then) )(?P<name>{_NP})(?:,? which)? {_AUX}{_ADV} {_DONE}\b",
        regex.IGNORECASE,
    )


@cache
def _active() -> regex.Pattern[str]:
    """`rated the sourness of the crumb`, `rated each loaf for sourness`, `indicated their satisfaction`."""
    return regex.compile(
        rf"(?<!\b(?:was|were|is|are|been|be|each|self) )\b{_DO} (?P<name>{_NP})(?=,? {_ON}\b| ?[(\[]|,? (?:a|an|the)? ?\d|, |$)",
        regex.IGNORECASE,
    )


@cache
def _asked() -> regex.Pattern[str]:
    """`a 7-point scale was used to rate sourness`, `a scale for sourness`, `on a scale from 1 to 7, apprentices rated the crumb at`: the outcome behind the scale."""
    end = rf"(?=[.,;(]| (?:{_ON}|was|were|is|a mean)\b|$)"
    return regex.compile(
        rf"(?:used|employed|applied|served|administered)(?: by [\w ]{{3,30}})? (?:{_TO_DO} |for (?:assessing |measuring |rating |scoring )?|when rating )(?P<name>{_NP}){end}"
        rf"|^[^.;,()]{{0,30}}?(?:scales?|likert|NRS|VAS|items?|format)\b(?: (?:ratings?|scores?))? (?:of|for) (?P<name>{_NP}){end}"
        rf"|^ ?{_TO_DO} (?P<name>{_NP}){end}"
        rf"|^[^.;()]{{0,12}}, [\w ]{{2,40}}? (?:rated|scored|judged|graded|reported|indicated|stated|expressed|evaluated|marked|assessed) (?P<name>{_NP}){end}",
        regex.IGNORECASE,
    )


@cache
def _ranging() -> regex.Pattern[str]:
    """`Crumb scores range`, `The knowledge test ranges`, `The sourness scale ran`, `scores on the knowledge test can range`."""
    return regex.compile(
        rf"(?:^|[.;] |, (?:and |with |where |while )?|: |\b(?:with|and|where) )(?P<name>{_NP}),?(?: (?:could|can|may|might|which|that|theoretically|potentially|thus|therefore|then|had|has|have|with|a|possible|total))*"
        r"(?: (?:rang(?:e|es|ed|ing)|r[ua]n(?:s|ning)?|var(?:y|ies|ied|ying)|li?e?s?|go(?:es)?|extend(?:s|ed|ing)?|span(?:s|ned|ning)?|was|were|is|are|of|on))?(?: (?:a|the|from|between|scale|scores?|totals?|of|at|:))*[ :,(]*$",
        regex.IGNORECASE,
    )


@cache
def _led() -> regex.Pattern[str]:
    """What was scored, and as to what: `each loaf for sourness`, `the bread in terms of its crumb`."""
    return regex.compile(
        r"^(?:.*? )??(?:for|on|in terms of|with (?:regard|respect) to|regarding|concerning|as to) (?P<name>.+)$",
        regex.IGNORECASE,
    )


@cache
def _heads() -> regex.Pattern[str]:
    return regex.compile(
        r"^(?:(?:the|a|an|their|its|his|her|our|each|of|all|possible|total|overall|mean|average|self-reported|self-rated|perceived|current|general|subjective|participants'?|apprentices'?|both|how much|scores?|ratings?|rating|scoring|levels?|degrees?|"
        r"intensit(?:y|ies)|extent|amount|severity|judge?ments?|perceptions?|perception|values?|responses?|measures?|answers?|points|to|on|for|in|from|with|and|also|then|finally|second|first|next|similarly|here|in addition|additionally|further|furthermore|moreover|secondly|thirdly|lastly|likewise|again),? )+",
        regex.IGNORECASE,
    )


@cache
def _between() -> regex.Pattern[str]:
    return regex.compile(r", (?:and|or) |, | and | or | & |; | as well as ")


@cache
def _short() -> regex.Pattern[str]:
    """An abbreviation or a citation in brackets: `the Patient Health Questionnaire (PHQ-9; Baker, 2001)`."""
    return regex.compile(
        r" ?[(\[](?P<short>\p{Lu}[\p{L}\d]*\p{Lu}[\p{L}\d]*(?:-?[\p{Lu}\d]{1,4})*)?[^()\[\]]*[)\]]?"
    )


_SAID_BY_SELF = frozenset(
    ("reported", "report", "rated", "scored", "rating", "assessed", "assessment", "perceived", "score")
)


def canonical(key: Key) -> Key:
    """A key without the words that every score's name may have: `sourness rating` and `rated sourness` are sourness."""
    # `self-rated sourness` is sourness, but self-efficacy is not efficacy.
    own = any(one == "self" and two not in _SAID_BY_SELF for one, two in pairwise(key))
    kept = tuple(stem for stem in key if stem not in OF_SCORES or (own and stem == "self"))
    return kept if kept and not all(stem in LEFT_OUT for stem in kept) else ()


def whose(text: str, piece: Piece, start: int = 0) -> Whose:
    """The outcomes that a scale is given by its sentence, from `start` on (the end of the scale before it)."""
    told_at = min(span[0] for span in (piece.low, piece.high, piece.points) if span is not None)
    before = text[start:told_at]
    bracketed, instrument = _named_in_front(text, piece, start)
    if bracketed and not instrument:
        return Whose(bracketed)
    before = _summaries().sub("", before, timeout=TIMEOUT) if "=" in before else before
    names = _verbal(before) or _asked_on(before) or asked_how(before) or _labelled(before)
    if not names:
        behind = _asked().search(text[piece.end : piece.end + 160], timeout=TIMEOUT)
        names = _names(behind["name"]) if behind else ()
    if not names and (
        ranging := _ranging().search(text[start : max(piece.start, start)] or before, timeout=TIMEOUT)
    ):
        names = _names(ranging["name"])
    names = names or measure_told(before)
    names = (*names, *bracketed)
    if names:
        return Whose(tuple(dict.fromkeys((*names, *_instrument(before)))))
    short = _instrument(before)
    return Whose(short, before=not short and _points_back(before))


@cache
def _summaries() -> regex.Pattern[str]:
    """Brackets that hold numbers of a result: ` (M = 5.19, SD = 1.10)`."""
    return regex.compile(r" ?[(\[](?=[^()\[\]]*\b(?:M|SD|SE|n|N|mean|Mdn) ?=)[^()\[\]]*[)\]]")


def _verbal(text: str) -> tuple[tuple[Key, str], ...]:
    """The outcomes of the last verb of scoring of a text, in its longest phrase that names only outcomes."""
    found: dict[int, list[str]] = {}
    for match in _passive().finditer(text, overlapped=True, timeout=TIMEOUT):
        found.setdefault(match.end(), []).append(match["name"])
    for match in _active().finditer(text, overlapped=True, timeout=TIMEOUT):
        found.setdefault(match.start("name") - 1, []).append(match["name"])
    for verb in sorted(found, reverse=True):
        for phrase in sorted(found[verb], key=len, reverse=True):
            if names := _names(phrase):
                return names
    return ()


@cache
def _consists() -> regex.Pattern[str]:
    """`The quiz had twenty questions`, `The knowledge test consisted of ten items`."""
    return regex.compile(
        rf"^(?:[^,;.]{{1,40}}, )?(?P<name>{_NP}) (?:had|has|have|consist(?:s|ed)? of|compris(?:es|ed?)|contain(?:s|ed)?|includ(?:es|ed?)|was made up of|involve[ds]?|posed|asked|used) (?:a total of )?"
        r"(?:\d{1,3}|\p{L}+(?:-\p{L}+)?) (?:[\w-]+ ){0,3}?(?:items|questions|statements|problems|exercises|tasks|points)\b",
        regex.IGNORECASE,
    )


def measure_told(text: str) -> tuple[tuple[Key, str], ...]:
    """The measure of which a sentence tells how many questions it has."""
    match = _consists().search(text, timeout=TIMEOUT)
    return _names(match["name"]) if match else ()


@cache
def _question_on() -> regex.Pattern[str]:
    """`one question on boredom,`, `a single item about trust in the dough from`, `a rating of crumb`."""
    return regex.compile(
        r"\b(?:(?:item|question|statement|single-item measure|one-item measure) (?:on|about|of)|(?:item|question|statement|measure|scores?|ratings?|marks?|grades?) for|(?:item|question|statement|measure) (?:regarding|concerning|assessing|measuring|addressing|tapping|capturing|asking about|that asked about)) "
        rf"(?P<name>{_NP})(?=,? {_ON}\b| ?[(\[]|,|$|,? (?:was|were|is|answered|rated|scored|that|which)\b)",
        regex.IGNORECASE,
    )


def _asked_on(text: str) -> tuple[tuple[Key, str], ...]:
    """What the last question that a text names is about."""
    match = next(reversed(list(_question_on().finditer(text, timeout=TIMEOUT))), None)
    return _names(match["name"]) if match else ()


def named_before(text: str) -> tuple[tuple[Key, str], ...]:
    """The outcome that a sentence is about, for a scale that the next one tells: `Fatigue was assessed with the …`."""
    return tuple(dict.fromkeys((*_verbal(text), *_instrument(text))))


def _instrument(text: str) -> tuple[tuple[Key, str], ...]:
    """The abbreviation of the last instrument that a text names: `the Patient Health Questionnaire (PHQ-9)`."""
    short = [
        m
        for m in _short().finditer(text, timeout=TIMEOUT)
        if m["short"] and text[: m.start()].rstrip()[-1:].isalpha()
    ]
    key = canonical(terms(short[-1]["short"])) if short else ()
    return ((key, short[-1]["short"]),) if key else ()


def _points_back(before: str) -> bool:
    """Whether the subject of a sentence is no outcome but one told before: `Scores can range`, `Responses were given on`."""
    first = [word.lower().strip(",") for word in before.split()[:6]]
    return any(word in _BACK for word in first[:4])


_BACK = words(
    "scores score responses response items item it answers answer ratings rating questions total possible questionnaire scale this these each they all both its"
)


@cache
def _bracket() -> regex.Pattern[str]:
    return regex.compile(r"[(\[][^()\[\]]*$")


def _named_in_front(text: str, piece: Piece, start: int) -> tuple[tuple[tuple[Key, str], ...], bool]:
    """The name before the bracket that tells the scale, and whether it is that of an instrument.

    `sourness (1 = none, 9 = strong)`, `crumb score (7-point scale)`, `was rated on the Borg scale (6-20)`.
    """
    lead = text[start : piece.start]
    opened = _bracket().search(lead, timeout=TIMEOUT)
    if opened is None:
        return (), False
    phrase = _phrase_back(lead[: opened.start()].rstrip())
    inside = opened[0].lower()
    # `knowledge (ten items, each scored from 0 to 2)` speaks of the items.
    names = _names(phrase) if phrase and len(inside) < 60 else ()
    short = _opening_short().match(opened[0], timeout=TIMEOUT)
    key = canonical(terms(short["short"])) if short and names else ()
    used = phrase.lower().endswith(
        ("scale", "questionnaire", "inventory", "index", "instrument", "checklist")
    )
    return ((*names, (key, short["short"])) if short and key else names), used


@cache
def _told_of() -> regex.Pattern[str]:
    """`Crumb quality: 1 = poor`, `The primary outcome was pain, measured on`, `For crumb quality, judges awarded`."""
    return regex.compile(
        rf"^(?P<name>[\p{{L}}][\p{{L}} '-]{{2,50}}): |\boutcomes?(?: measures?| variables?)? (?:was|is|were|are) (?P<name>{_NP})(?=,? {_ON}\b|, | ?[(\[]|,? (?:which|that|rated|scored|measured|judged|assessed)\b)"
        rf"|^For (?P<name>{_NP}), [^,;()]{{3,40}} (?:awarded|gave|assigned|received)\b",
        regex.IGNORECASE,
    )


def _labelled(text: str) -> tuple[tuple[Key, str], ...]:
    """The outcome that a sentence opens with, or calls an outcome."""
    match = _told_of().search(text, timeout=TIMEOUT)
    return _names(match["name"]) if match else ()


@cache
def _opening_short() -> regex.Pattern[str]:
    return regex.compile(r"[(\[](?P<short>\p{Lu}[\p{L}\d]*\p{Lu}[\p{L}\d]*(?:-?[\p{Lu}\d]{1,4})*)[;,:]")


_STOP = FUNCTION_WORDS | words(
    "coded rated scored measured assessed evaluated judged using used via rate score how very we they apprentices participants included completed answered include includes including "
    "is was were are been be on at which who whose not than more less about because if when while where whereas but then also both either such through e.g i.e namely felt feel"
)


def _phrase_back(text: str) -> str:
    """The last words of a text that may name an outcome, up to five."""
    found: list[str] = []
    for word in reversed(text.split(" ")[-6:]):
        plain = word.strip("\"'“”")
        if (
            not plain
            or (plain.lower() in _STOP and not (plain.lower() == "of" and found))
            or plain[-1] in ".,;:)]"
        ):
            break
        found.append(plain)
        if word[:1] in "(\"'“[":
            break
    while found and found[-1].lower() in ("of", "the"):
        found.pop()
    return " ".join(reversed(found)) if len(found) <= 5 else ""


def _names(phrase: str) -> tuple[tuple[Key, str], ...]:
    """The outcomes that a noun phrase names, () where one of them is no name."""
    short = [m["short"] for m in _short().finditer(phrase, timeout=TIMEOUT) if m["short"]]
    plain = _short().sub("", phrase, timeout=TIMEOUT).strip(" ,;:-\"'")
    led = _led().match(plain, timeout=TIMEOUT)
    if led:
        head = plain[: led.start("name")].lower()
        thing = not _key_of(
            regex.sub(
                r" (?:for|on|in terms of|with (?:regard|respect) to|regarding|concerning|as to) $", "", head
            )
        )
        plain = led["name"] if thing or " for " in head or "terms" in head else plain
    parts = [part for part in _between().split(plain, timeout=TIMEOUT) if part.strip()]
    found: list[tuple[Key, str]] = []
    for part in parts:
        name = _heads().sub("", part.strip(" ,;:\"'-") + " ", timeout=TIMEOUT).strip()
        key = _key_of(name)
        if key:
            found.append((key, name))
        elif len(parts) > 1 and not _idle(part):
            return ()
    found += (
        [(canonical(terms(name)), name) for name in short if canonical(terms(name))]
        if len(found) == 1 or not parts
        else []
    )
    if not found and short:
        found = [(canonical(terms(name)), name) for name in short]
    return tuple(dict.fromkeys(found))


def _idle(part: str) -> bool:
    return all(
        word.lower() in _STOP or word.lower() in ("each", "all", "its", "their") for word in part.split()
    )


def _key_of(name: str) -> Key:
    """The key of a name, () where it is too long, a person, a thing or a number."""
    key = canonical(terms(name))
    good = (
        0 < len(key) <= 5 and len(name.split()) <= 8 and any(char.isalpha() for stem in key for char in stem)
    )
    if not good or (key[0] in _THINGS and len(key) == 1) or all(stem in _THINGS for stem in key):
        return ()
    told = _disposed().sub(r"\1", name, timeout=TIMEOUT)
    return (
        ()
        if _DENIED.intersection(told.lower().split()) or _GROUPS.intersection(name.lower().split())
        else key
    )


@cache
def _disposed() -> regex.Pattern[str]:
    """Names that hold a verb: `willingness to recommend`, `readiness to bake`."""
    return regex.compile(
        r"\b((?:un)?willingness|intentions?|intent|readiness|ability|inability|tendency|motivation|desire|likelihood|propensity|wish|urge|reluctance|confidence|commitment|sensitivity|resistance|adherence|attitudes?|openness|attachment|exposure|access) to\b",
        regex.IGNORECASE,
    )


_GROUPS = words(
    "group groups condition conditions arm arms cohort cohorts sample samples participants patients controls apprentices bakers"
)
_DENIED = words(
    "was were is are who which that how they we i you whether if because answered responded did had has have be been not n't than when what from using use used to by"
)
