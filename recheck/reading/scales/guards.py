"""Summaries that are not those of a score: other units, changes, ages, and names that stand too far off."""

from __future__ import annotations

from functools import cache

import regex

from recheck.model import Claim
from recheck.reading.matching import BESIDE_STEMS, FOLLOWING, stem
from recheck.reading.scales.patterns import Span
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

_UNITS = r"(?:mm|cm|m|km|ml|l|g|kg|mg|µg|μg|ms|s|sec|seconds?|min|minutes?|hours?|h|days?|weeks?|months?|years?|yrs?|%|°C?|kcal|kJ|Hz|dB|mmHg|bpm|€|\$|£|euros?|dollars?|cm2|cm3|m2|times|trials|percent)"


@cache
def _unit_of_label() -> regex.Pattern[str]:
    return regex.compile(rf"[(\[,/] ?(?:in )?{_UNITS}(?:[)\]]|$|,|;| ?/)", regex.IGNORECASE)


@cache
def _unit_behind() -> regex.Pattern[str]:
    return regex.compile(rf"^ ?-?{_UNITS}(?![\w-])", regex.IGNORECASE)


def units_of(quote: str) -> frozenset[str]:
    """The units in which a scale is read off: the millimetres of a line."""
    return frozenset(unit for unit in ("mm", "cm") if regex.search(rf"\b\d* ?-?{unit}\b", quote))


def has_unit(text: str, claim: Claim | None = None) -> str:
    """The unit that a name of a table holds, or that the text of a claim prints behind its mean, "" for none."""
    if claim is None:
        found = _unit_of_label().search(text, timeout=TIMEOUT)
        return found[0].strip("[]()/,; ") if found else ""
    mean = claim.values["mean"].text
    spread = claim.values.get("sd") or claim.values.get("se")
    for printed in (mean, *([spread.text] if spread else [])):
        plain = printed.replace("−", "-")
        at = text.find(plain)
        behind = _unit_behind().match(text[at + len(plain) :], timeout=TIMEOUT) if at >= 0 else None
        if behind is not None:
            return behind[0].strip(" -")
    return ""


_CHANGE = words("change changes changed gain gains gained improvement improvements increase increases decrease decreases decline declines reduction reductions difference differences δ delta diff z-score z-scores slope slopes correlation ratio percent percentage % log rank ranks loss")  # fmt: skip


def changes(name: str) -> bool:
    """Whether a name of a table is that of a change, a difference or a share, not of a score."""
    return (
        any(word.strip("(),.;:[]").lower() in _CHANGE for word in name.replace("/", " ").split())
        or "Δ" in name
    )


@cache
def _change_in() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?<!not )(?<!to )(?<!no )(?:changes?|gains?|improvements?|increases?|decreases?|declines?|reductions?|differences?|loss)(?: scores?)? (?:in|of|from|between|was|were|averaged|[(\[])|\b(?:increased|decreased|improved|declined|reduced|rose|fell|dropped|changed|differed|gained|lost)(?: \w+){0,4} by\b",
        regex.IGNORECASE,
    )


def of_change(claim: Claim, before: str = "") -> bool:
    """Whether a summary may be that of a change or a difference, or of an age."""
    quote = claim.place.quote.lower()
    if (
        any(word in quote.split("=")[0] for word in ("change", "diff", "age", "gain", "δ", "rt"))
        and len(quote.split("=")[0]) < 24
    ):
        return True
    return bool(before) and _change_in().search(before[-300:], timeout=TIMEOUT) is not None


_BEFORE_NAME = words(
    "rated scored judged reported perceived felt found evaluated assessed gave had showed self self-rated self-reported higher lower more less greater their mean average total subjective current general overall for of in on and the"
)
_AFTER_NAME = words(
    "rated scored judged found felt rating ratings score scores scale test questionnaire inventory level levels vas nrs judgments judgements averaged ranged remained improved worsened in among at after before with increased decreased dropped rose fell"
)


def stands_alone(text: str, name: str, start: int) -> bool:
    """Whether a name is no part of a longer one: `crumb` in `crumb height` is another outcome."""
    at = text.rfind(name, 0, start)
    at = text.find(name) if at < 0 else at
    if at < 0:
        return False
    before, after = text[:at].rstrip(), text[at + len(name) :].lstrip(" ")
    left, right = before.split(" ")[-1].lower(), after.split(" ")[0].lower().strip(".,;:()")
    joined = text[at - 1 : at] in ("-", "/") or after[:1] in ("-", "/", "×", "*", "+")
    open_left = not left[-1:].isalpha() or left in _BEFORE_NAME or stem(left) in BESIDE_STEMS
    open_right = not after[:1].isalpha() or right in _AFTER_NAME or stem(right) in FOLLOWING
    return open_left and open_right and not joined


_FOREIGN = words(
    "older younger age aged ages years year months old taller height weight volume time times minutes seconds hours days duration faster slower latency reaction accuracy correct percent percentage "
    "income bmi experience education number numbers count counts baked weighed frequency frequencies trials correlated correlation effect d"
)
_LEADS = words(
    "in for among the those than by with that of from between to at on as compared versus vs a an after before during when who whose under"
)


def apart(text: str, name: str, start: int) -> bool:
    """Whether words between a name and the numbers may name something else: `sourness and baked taller loaves (M = …`."""
    at = text.rfind(name, 0, start) if name else 0
    if at < 0:
        return False
    between = regex.sub(r"[(\[][^()\[\]]*[)\]]", " ", text[at + len(name) : start])
    told = [word.strip("(),.;:[]\"'").lower() for word in between.split()]
    if not _FOREIGN.isdisjoint(told):
        return True
    if not name:
        return False
    return any(_goes_on(part) for part in regex.split(r"\b(?:and|but|while|whereas)\b|;", between)[1:])


def _goes_on(part: str) -> bool:
    """Whether a part behind `and` may have a verb and an outcome of its own."""
    told = [word.strip("(),.;:[]\"'").lower() for word in part.split()]
    told = [word for word in told if word and word not in ("m", "mean", "=", "n", "sd", "x")]
    return bool(told) and told[0] not in _LEADS and len(told) > 3


@cache
def _only_words_of_means() -> regex.Pattern[str]:
    return regex.compile(
        r"[ ,;:()\[\]\"']*(?:(?:scale|scales|likert|likert-type|with|a|an|the|mean|means|of|was|were|and|average|averages|score|scores|rating|ratings|averaged|at|M|their|its|on|overall|group|sample|is|points?|where|in|all|being|higher|indicating|indicates|more|better|worse|very|good|bad|excellent|poor|not|much|extremely|agree|disagree|strongly|completely|numeric|hedonic|response|format)[ ,;:()\[\]=\"']*){0,10}",
        regex.IGNORECASE,
    )


def tells_beside(text: str, scale: Span, numbers: Span) -> bool:
    """Whether nothing but words of scales and means stands between a scale and the numbers of a summary."""
    between = text[scale[1] : numbers[0]] if scale[1] <= numbers[0] else text[numbers[1] : scale[0]]
    if scale[1] > numbers[0] and scale[0] < numbers[1]:
        return True
    return len(between) <= 80 and _only_words_of_means().fullmatch(between, timeout=TIMEOUT) is not None
