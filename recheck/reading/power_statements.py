"""Power statements: the level, the power, the effect and the number of cases that belong together."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import cache

import regex

from recheck.model import Claim, Confidence, Printed
from recheck.reading.context import Setting
from recheck.reading.numerals import Line
from recheck.reading.placed import Placed, claim_id
from recheck.reading.power_mentions import SIZES, Mention, listed, mentions, wanted
from recheck.reading.power_patterns import (
    PLANNING,
    achieved,
    computed,
    of_devices,
    others,
    planned,
    sensitivity,
    smallest,
    topic,
)
from recheck.reading.quoting import Sentence, of_earlier_work
from recheck.reading.tokens import DIGITS, Spans, tokens
from recheck.reading.views import TIMEOUT, View
from recheck.reading.wording import stated

EFFECTS = (
    "d_z", "d", "delta", "f2", "f", "cohens_w", "h", "r", "partial_eta2", "r2", "effect_size", "ratio_effect",
)  # fmt: skip
"""Effects by the trust that their spelling deserves."""
PAIRS = (("mean_difference", "sd"), ("proportion1", "proportion2"))
REACH = 2
"""Sentences on either side that may hold what a power statement lacks."""
SEVERAL = "several values are told together"
APART = "put together from neighbouring sentences"


@dataclass(frozen=True, slots=True, eq=False)
class Told:
    """A sentence with its numbers; `several` says that it tells several powers or effects together."""

    order: int
    start: int
    end: int
    text: str
    found: tuple[Mention, ...]
    several: bool = False

    def of(self, *roles: str) -> list[Mention]:
        """The numbers of any of the roles."""
        return [mention for mention in self.found if mention.role in roles]


def speaks_of_power(text: str) -> bool:
    """Tell whether a passage may hold a power statement at all."""
    return not DIGITS.isdisjoint(text) and bool(topic().search(text, timeout=TIMEOUT))


def power_statements(view: View, spans: Spans, number: int, setting: Setting) -> Iterator[Placed]:
    """The power statements of a passage; nothing of those that tell of other people's work or of an example.

    Raises TimeoutError where a pattern takes too long.
    """
    if not speaks_of_power(view.text):
        return
    told = [_told(view, order, span, setting) for order, span in enumerate(spans)]
    used: set[int] = set()
    for sentence in told:
        if sentence.order in used or not _states(sentence) or _of_others(sentence, view, spans):
            continue
        whole = [sentence, *_beside(sentence, told, used)]
        used |= {one.order for one in whole}
        near = " ".join(one.text for one in told[max(sentence.order - 1, 0) : sentence.order + 2])
        placed = _claim(whole, near, view, number, setting)
        if placed is not None:
            yield placed


def _told(view: View, order: int, span: tuple[int, int], setting: Setting) -> Told:
    start, end = span
    text = view.text[start:end]
    if DIGITS.isdisjoint(text) or not any(word in text.lower() for word in PLANNING):
        return Told(order, start, end, text, ())
    line = Line(view, tokens(view, start, end), setting.decimal_comma)
    found = mentions(line, start, end)
    together = [
        m for m in found if m.role in (*EFFECTS, *SIZES, "power") and listed(m, found, view.text[:end])
    ]
    several = any(mention.role in ("power", *EFFECTS) for mention in together)
    single = [mention for mention in found if mention not in together]
    return Told(order, start, end, text, tuple(wanted(single, line, start, end)), several)


def _states(sentence: Told) -> bool:
    """Whether a sentence prints a power; a power beside a test's statistic is that of its result."""
    if sentence.several or not sentence.of("power") or _tested(sentence.text):
        return False
    return not of_devices().search(sentence.text, timeout=TIMEOUT)


def _tested(text: str) -> bool:
    return bool(
        regex.search(
            r"\b[tF]\ ?\(\ ?\d|χ²\ ?\(\ ?\d|(?<![Cc]ritical\ )\bt\ ?=\ ?-?\d",
            text,
            regex.VERBOSE,
            timeout=TIMEOUT,
        )
    )


def _of_others(sentence: Told, view: View, spans: Spans) -> bool:
    """Whether the statement is an example or that of another study."""
    whole = Sentence(sentence.text, sentence.text.lower(), Line(view, ()), sentence.start)
    if whole.ours:
        return False
    if of_earlier_work(whole) or others().search(sentence.text, timeout=TIMEOUT):
        return True
    return any(
        match["year"][0] in "(["
        and not sentence.text[: match.start()].strip(" (")
        and _reports(sentence.text[match.end() :])
        for match in whole.citations
    )


def _reports(rest: str) -> bool:
    return bool(
        regex.match(
            r"[\])\ ]*(?:\p{L}+\ )?(?:found|reported|had|used|needed|required|estimated|calculated|recommend\w*|show\w*|state\w*|planned|computed|concluded|wrote)\b",
            rest,
            regex.VERBOSE,
        )
    )


def _beside(sentence: Told, told: Sequence[Told], used: set[int]) -> list[Told]:
    """The sentences around one that go on about the same plan, nearest first."""
    found: list[Told] = []
    for step in (-1, 1):
        for far in range(1, REACH + 1):
            order = sentence.order + step * far
            if not 0 <= order < len(told) or order in used or told[order].several or told[order].of("power"):
                break
            text = told[order].text.lower()
            if _tested(told[order].text) or not any(word in text for word in PLANNING):
                break
            found.append(told[order])
    return found


def _claim(whole: Sequence[Told], near: str, view: View, number: int, setting: Setting) -> Placed | None:
    """The claim of the sentences that tell of one plan, the first of them before all; what it lacks is taken from the nearest.

    `near` is the text of the sentence with those beside it.
    """
    held = _held(whole)
    if held is None:
        return None
    values, parts, notes = held
    sized = bool(set(values) & set(SIZES)) and "alpha" in values
    if "power" not in values or not (sized or set(values) & {*EFFECTS, "mean_difference", "proportion1"}):
        return None
    used = [one for one in whole if one is whole[0] or set(one.found) & set(parts)]
    text = " ".join(one.text for one in sorted(used, key=lambda one: one.order))
    start, end = min(part.start for part in parts), max(part.end for part in parts)
    first, last = view.span(start, end)
    place = view.passage.place(first, last)
    said, named = _said(text, near, values), _named(values)
    confidence: Confidence = "medium" if len(used) > 1 else "high"
    claim = Claim(
        claim_id("power", place, named), "power", place, named, said,
        tuple(word for word in setting.context.background if word not in said), confidence=confidence,
        notes=(*notes, APART) if len(used) > 1 else notes,
    )  # fmt: skip
    return Placed(claim, number, whole[0].order, start, end, whole[0].text, (first, last), whole[0].start)


Held = tuple[dict[str, Printed], list[Mention], tuple[str, ...]]


def _held(whole: Sequence[Told]) -> Held | None:
    """Role by role the number of the nearest sentence that has it; None where a power or an effect has several values."""
    values: dict[str, Printed] = {}
    parts: list[Mention] = []
    notes: list[str] = []
    for one in whole:
        own, before = not parts, dict(values)
        for role in dict.fromkeys(mention.role for mention in one.found):
            if role in values or (not own and _has(before, role)):
                continue
            same = one.of(role)
            if len({mention.printed.value for mention in same}) > 1:
                if role in ("power", *EFFECTS, *SIZES):
                    return None
                notes.append(SEVERAL)
                continue
            values[role] = same[0].printed
            parts.append(same[0])
    return values, parts, tuple(dict.fromkeys(notes))


def _has(values: Mapping[str, Printed], role: str) -> bool:
    """Whether the own sentence holds a number of the same sort already."""
    sorts: tuple[tuple[str, ...], ...] = (
        (*EFFECTS, "mean_difference", "sd", "proportion1", "proportion2"),
        SIZES,
    )
    if role == "sd" and "mean_difference" in values and not set(values) & set(EFFECTS):
        return False
    if role == "mean_difference" and "sd" in values and not set(values) & set(EFFECTS):
        return False
    return any(role in sort and set(values) & set(sort) for sort in sorts)


def _named(values: Mapping[str, Printed]) -> dict[str, Printed]:
    """The numbers by the names of their quantities: one effect, and whole pairs alone."""
    named = dict(values)
    _with_symbols(named)
    for first, second in PAIRS:
        if not {first, second} <= named.keys():
            named.pop(first, None), named.pop(second, None)
    effects = [name for name in EFFECTS if name in named]
    for name in effects[1:]:
        if name != "r":
            named.pop(name)
    if effects and effects[0] not in ("effect_size", "ratio_effect"):
        for pair in PAIRS:
            if set(pair) <= named.keys() and effects[0] != "d":
                named.pop(pair[0]), named.pop(pair[1])
    if "between" in named:
        named["r"] = named.pop("between")
    if "size" in named:
        _placed_size(named)
    named.pop("ratio_effect", None)
    named.pop("r2", None)
    return named


def _with_symbols(named: dict[str, Printed]) -> None:
    """δ is a difference beside its SD, else a standardised one; n₁ and n₂ are the size of each where they are alike."""
    delta = named.pop("delta", None)
    if delta is not None:
        named.setdefault("mean_difference" if "sd" in named else "d", delta)
    first, second = named.pop("n1", None), named.pop("n2", None)
    if first is None or second is None:
        return
    if first.value == second.value:
        named.setdefault("n", first)
    elif not {"n", "N"} & named.keys():
        named["N"] = Printed(f"{first.text} + {second.text}", first.value + second.value, 0)
        told = Printed(f"{second.text} / {first.text}", second.value / first.value, 0)
        named.setdefault("ratio", told)


def _placed_size(named: dict[str, Printed]) -> None:
    """A number of cases that is not said to be all: the total, where it is a multiple of a group's or stands alone."""
    size, each, ratio = named.pop("size"), named.get("n"), named.get("ratio")
    unequal = ratio is not None and ratio.value != 1
    alone = each is None and not unequal
    if alone or (each is not None and size.value > each.value and size.value % each.value == 0):
        named.setdefault("N", size)


_DESIGNS: Mapping[str, str] = {
    "independent": r"\bindependent|\bunpaired|\btwo[\ -]sample|\bStudent's\ t|\bbetween\ (?:the\ )?(?:two\ )?(?:groups|arms|conditions)|\btwo[\ -]group|\btwo\ (?:[\p{L}-]+\ )?(?:groups|arms)|\bparallel[\ -]group",
    "paired": r"\bpaired\b|\bmatched|\bdependent[\ -](?:samples?|t)|\bwithin-(?:subject|participant)s?\ t|\bpairs\b|\bdifference\ between\ two\ dependent",
    "one-sample": r"\b(?:one|single)[\ -]sample|\bdifference\ from\ (?:a\ )?constant|\bagainst\ (?:zero|a\ constant|chance)",
    "between-groups": r"\bone[\ -]way|\bbetween-(?:subject|group|participant)s?",
    "repeated": r"\brepeated|\bwithin-(?:subject|participant)s?(?!\ t)|\bcross-?over|\bmixed(?:[\ -]design)?\ (?:ANOVA|analysis\ of\ variance)|\bRM-?\ ?ANOVA|\bwithin-between",
    "adjusted-p": r"\d\ ?/\ ?\d{1,3}\ ?=\ ?0?\.0",
    "clustered": r"\bcluster|\bintra-?class|\bICC\b|\bdesign\ effect|\bnested\b|\bvariance\ inflation",
    "simulated": r"\bsimulat|\bMonte\ Carlo|\bsimr\b",
    "sequential": r"\binterim|\bsequential|\bO'Brien|\badaptive\ design|\bspending",
    "interaction": r"\binteraction|\b\d\ ?[×x]\ ?\d\b|\bfactorial|\bmain\ effects\ and\ interactions",
    "equivalence": r"\bnon-?\ ?inferior|\bequivalen|\bTOST|\bmargin\b|\bsuperiority\ margin",
    "survival": r"\blog-?\ ?rank|\bsurvival|\bhazard|\bCox\b|\btime[\ -]to[\ -]event|\bperson-years|\bincidence\ rate",
    "other-effect": r"\bodds\ ratio|\brisk\ ratio|\brate\ ratio|\brelative\ risk|\bOR\ |\bRR\ |\bSNPs?\b|\ballele|\bgenotyp|\bAUC\b|\bsensitivity\ of\ \d|\bkappa|\bRMSEA|\bprecision\b|\bwidth\b|\bmediat|\bindirect\ effect|\bMANOVA|\blogistic|\bPoisson|\bpercentage\ points?\b",
}  # fmt: skip
_OF_TRIAL = ("clustered", "sequential", "simulated", "equivalence", "survival")
_T_TEST = r"\bt[\ -]tests?\b|\bt[\ -]statistic|\bStudent"
_ANOVA = r"\bANOVA|\banalys[ei]s\ of\ variance|\bF[\ -]tests?"
_CORRELATION = r"\bcorrelat|\bPearson"
_REGRESSION = r"\bregression|\bpredictors?\b"
_CHI2 = r"\bchi-?\ ?squared?|χ²"


def _said(text: str, near: str, values: Mapping[str, Printed]) -> tuple[str, ...]:
    """What the statement says of its test, its numbers and its direction.

    Of the design of the whole trial the sentences beside it may tell.
    """
    said = dict.fromkeys(stated(text))
    for word in ("independent", "paired", "one-sample", "between-groups", "repeated"):
        said.pop(word, None)
    for word, pattern in _DESIGNS.items():
        # `OR` is an odds ratio, `or` is none.
        flags = regex.VERBOSE if word == "other-effect" else regex.VERBOSE | regex.IGNORECASE
        if regex.search(pattern, near if word in _OF_TRIAL else text, flags, timeout=TIMEOUT):
            said[word] = None
    for word, pattern in (("t-test-named", _T_TEST), ("anova-named", _ANOVA), ("correlation-named", _CORRELATION),
                          ("regression-named", _REGRESSION), ("chi2-named", _CHI2)):  # fmt: skip
        if regex.search(pattern, text, regex.VERBOSE | regex.IGNORECASE, timeout=TIMEOUT):
            said[word] = None
    if "between" in values:
        said["repeated" if "paired" not in said else "paired"] = None
    if "ratio_effect" in values or "r2" in values:
        said["other-effect"] = None
    if {"one-tailed", "two-tailed"} <= said.keys():
        said.pop("one-tailed"), said.pop("two-tailed")
    if {"independent", "paired"} <= said.keys() and "d_z" in values:
        said.pop("independent")
    said |= dict.fromkeys(_direction(text))
    if "n" in values or ({"n1", "n2"} <= values.keys() and values["n1"].value == values["n2"].value):
        said["per-group"] = None
    elif {"n1", "n2"} <= values.keys():
        said |= {"in-total": None, "independent": None}
    elif "N" in values:
        said["in-total"] = None
    return tuple(said)


def _direction(text: str) -> tuple[str, ...]:
    if sensitivity().search(text, timeout=TIMEOUT):
        return ("effect-detectable",)
    if achieved().search(text, timeout=TIMEOUT):
        return ("power-achieved",)
    if computed().search(text, timeout=TIMEOUT) and not planned().search(text, timeout=TIMEOUT):
        return ("power-achieved",)
    if smallest().search(text, timeout=TIMEOUT):
        return ("effect-detectable",)
    return ("n-required",)


def without_their_numbers(placed: Sequence[Placed], powers: Sequence[Placed]) -> list[Placed]:
    """The other claims without those that hold nothing but numbers of a power statement: an assumed effect is no result."""

    def inside(item: Placed) -> bool:
        texts = {printed.text for printed in item.claim.values.values()}
        return _planned(item) or any(
            item.passage == power.passage and item.start < power.end and power.start < item.end
            and texts <= {part for printed in power.claim.values.values() for part in _parts(printed.text)}
            for power in powers
        )  # fmt: skip

    return [item for item in placed if not inside(item)]


@cache
def _plans() -> regex.Pattern[str]:
    """What speaks of planning a study."""
    return regex.compile(
        r"(?i)\bpower(?:ed)?\ (?:analys\w+|calculation\w*|to\ (?:detect|find|show)|(?:of|for)\ \d)|\b(?:sufficient|enough|adequate|statistical|high)\ power\b"
        r"|\bsensitivity\ (?:power\ )?(?:analys|calculation)|\bsample\ size\ (?:calculation|estimation|planning)|\bminimum\ detectable"
    )


def _planned(item: Placed) -> bool:
    """Whether an effect without a p or an interval is one that a plan assumes: `sensitivity analysis showed that d = 0.40 could be detected`."""
    values = set(item.claim.values)
    lone = item.claim.kind == "estimate" and bool(values) and values <= {*EFFECTS, "g", "eta2", "omega2"}
    return lone and _plans().search(item.text, timeout=TIMEOUT) is not None


def _parts(text: str) -> tuple[str, ...]:
    """A number as it is printed, and those that it was reckoned from: `15 − 10`, `64 + 32`."""
    return (text, *regex.split(r"\ [−+/]\ ", text))


def in_reading_order(
    claims: Sequence[Claim], placed: Sequence[Placed], powers: Sequence[Placed]
) -> tuple[Claim, ...]:
    """All claims with the power statements where they stand among those of the text."""
    at = {item.claim.id: (item.passage, item.start) for item in placed if item.passage >= 0}
    ordered: list[Claim] = []
    waiting = sorted(powers, key=lambda item: (item.passage, item.start))
    for claim in claims:
        here = at.get(claim.id)
        while here is not None and waiting and (waiting[0].passage, waiting[0].start) < here:
            ordered.append(waiting.pop(0).claim)
        ordered.append(claim)
    return (*ordered, *(item.claim for item in waiting))


def numbered(powers: Sequence[Placed], claims: Sequence[Claim]) -> list[Placed]:
    """Statements that are printed alike in one section get ids of their own."""
    seen = {claim.id for claim in claims}
    found = []
    for item in powers:
        name, times = item.claim.id, 1
        while name in seen:
            times += 1
            name = f"{item.claim.id}-{times}"
        seen.add(name)
        found.append(item if name == item.claim.id else replace(item, claim=replace(item.claim, id=name)))
    return found
