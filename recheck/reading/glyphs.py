"""Fonts with a wrong code table: `F(1,44) 5 3.18, p , .05` where `F(1,44) = 3.18, p < .05` is printed.

A document keeps to one such table. It is inferred from all its passages: a sign is taken for a relation
only where it stands in the place of one again and again, and the true signs do not.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from decimal import Decimal
from functools import cache

import regex

from recheck.model import Claim, Confidence, Passage, Printed
from recheck.reading.alike import MISCODED
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

LEAST = 3
"""How often a sign must stand in the place of a relation before it is taken for one."""

_PLAIN = "5,.$#o467[\\"
"""Signs that mean themselves as a rule; all others in the place of a relation are strange already."""


@dataclass(frozen=True, slots=True)
class Repairs:
    """The code table of a document, and the characters of each passage that were replaced by it.

    `places[i]` maps a position in passage i to the sign that the file has there. `minus_is_digit`
    tells that the 2 before a number may be a minus.
    """

    table: Mapping[str, str] = field(default_factory=dict)
    places: Mapping[int, Mapping[int, str]] = field(default_factory=dict)
    minus_is_digit: bool = False


@cache
def _strange() -> regex.Pattern[str]:
    """A quick look for anything that may be a misread relation."""
    return regex.compile(
        r"[\x00-\x08\x0e-\x1f\ue000-\uf8ff\ufffd¼½þ]|[ ][5,.$#][ ][-−2]?\d*\.\d|\b[pP] ?[o4\\\[5,.]0?\.\d"
    )


@cache
def _context() -> regex.Pattern[str]:
    """A symbol, the sign in the place of its relation, and the number after it."""
    return regex.compile(
        r"""(?:\b(?P<p>[pP](?:adj|corr|bonf|fdr|holm|tukey)?)
              |(?P<stat>(?:\b[tFr]|[χ²2v]|\b[zZ])[ ]?[(\[][\d., =dfNn]{1,24}[)\]]
                |\b[tF]\d[\d.,]{0,12}(?=[ ]5[ ]) | (?:χ|\b[vwcxX])[2²](?:\d{1,2}(?=[ ]))?(?=[ ]?[5¼]))
              |\b(?P<symbol>M|Mean|SD|S\.D\.|SE|S\.E\.|SEM|n|N|df|d\.f\.|d|r|t|F|z|Z|β|b|OR|CI|MSE|[ηghZ][p²2]{1,2}))
            (?: [ ]?(?P<sign>[=<>≤≥≈]) | (?P<tight>5|(?(p)[o4\\\[]|(?(stat)[o4\\\[]|(?!)))|(?(p)[,.](?=0?\.\d)|(?!)))
              | [ ](?P<spaced>[5,.$\#]|(?(p)[o4]|(?(stat)[o4]|(?!))))[ ]
              | [ ]?(?P<odd>[^\w\s.,;:()\[\]\-−–*%/'"’]|[¼½þ]) )
            [ ]?(?P<number>[-−–2À\x00-\x1f]?(?:\d+\.\d+|\.\d+|\d+))""",
        regex.VERBOSE,
    )


def repaired(passages: Sequence[Passage]) -> tuple[tuple[Passage, ...], Repairs]:
    """The passages with misread relations put right, their length unchanged, and what was replaced."""
    texts = [passage.text for passage in passages]
    if not any(_strange().search(text, timeout=TIMEOUT) for text in texts):
        return tuple(passages), Repairs()
    table = _table(texts)
    if not table:
        return tuple(passages), Repairs(minus_is_digit=_fives(texts) > 0)
    places: dict[int, dict[int, str]] = {}
    found = []
    for index, passage in enumerate(passages):
        text, replaced = _rewritten(passage.text, table)
        if replaced:
            places[index] = replaced
            passage = replace(passage, text=text)
        found.append(passage)
    digits = _minus_is_digit(found) or (table.get("5") == "=" and not _has_minus(texts))
    return tuple(found), Repairs(table, places, digits)


def _fives(texts: Sequence[str]) -> int:
    """How often a 5 without spaces stands for the `=` of a p: `P50.028` cannot be a p as it stands."""
    return sum(len(regex.findall(r"\b[pP]50?\.\d{2,}", text, timeout=TIMEOUT)) for text in texts)


def _has_minus(texts: Sequence[str]) -> bool:
    """Whether the document prints a true minus before a number."""
    return any(regex.search(r"[ =(\[][−–]0?\.?\d", text, timeout=TIMEOUT) for text in texts)


_LEVELS = frozenset(Decimal(text) for text in (".05", ".01", ".001", ".005", ".0001", ".10", ".025"))


def _table(texts: Sequence[str]) -> dict[str, str]:
    """The signs that stand for relations in this document."""
    signs: Counter[str] = Counter()
    after_statistic: Counter[str] = Counter()
    of_p: dict[str, list[Decimal]] = {}
    for text in texts:
        for match in _context().finditer(text, timeout=TIMEOUT):
            sign = match["sign"] or match["tight"] or match["spaced"] or match["odd"]
            signs[sign] += 1
            after_statistic[sign] += match["stat"] is not None
            if match["p"] is not None:
                of_p.setdefault(sign, []).append(_number(match["number"]))
    table: dict[str, str] = {}
    equal = _equal(signs, after_statistic, _fives(texts))
    if equal:
        table[equal] = "="
    for sign, numbers in of_p.items():
        if sign not in "=<>≤≥≈$#" and sign not in table:
            relation = _relation_of_p(sign, numbers, signs, bool(table))
            if relation:
                table[sign] = relation
    if table:
        table |= {
            sign: relation for sign, relation in (("$", "≥"), ("#", "≤")) if signs[sign] and sign not in table
        }
    return table


def _number(text: str) -> Decimal:
    return Decimal(
        "0" + text.lstrip("-−–2") if text.lstrip("-−–2").startswith(".") else text.strip("-−–") or "0"
    )


def _equal(signs: Counter[str], after_statistic: Counter[str], fives: int) -> str | None:
    """The sign that stands for `=`: often, after statistics too, and `=` itself hardly ever."""
    strange = [(count, sign) for sign, count in signs.items() if sign not in "=<>≤≥≈,.[\\o4"]
    if not strange:
        return None
    count, sign = max(strange)
    enough = count >= LEAST and (after_statistic[sign] > 0 or sign not in _PLAIN or fives > 1)
    return sign if enough and signs["="] * 5 <= count else None


def _relation_of_p(sign: str, numbers: list[Decimal], signs: Counter[str], known: bool) -> str | None:
    """Whether a sign after p stands for `<` or `>`: what follows `<` are levels."""
    levels = sum(number in _LEVELS for number in numbers)
    if len(numbers) < (1 if known else LEAST) or any(number > 1 for number in numbers):
        return None
    greater = sign in ".[4"
    true_sign = ">" if greater else "<"
    if signs[true_sign] * 5 > len(numbers) and signs[true_sign] > 0:
        return None
    if greater:
        return ">"
    # `p > .05` is as common as `p < .05`: only levels below that tell which of the two a strange sign is.
    telling = sign in ",\\o\x03" or any(number <= Decimal("0.01") for number in numbers)
    return "<" if telling and levels * 3 >= len(numbers) * 2 else None


def _rewritten(text: str, table: Mapping[str, str]) -> tuple[str, dict[int, str]]:
    """Replace the signs of the table where they stand in the place of a relation."""
    replaced: dict[int, str] = {}
    for match in _context().finditer(text, overlapped=True, timeout=TIMEOUT):
        for group in ("tight", "spaced", "odd"):
            if match[group] is not None and match[group] in table:
                replaced[match.start(group)] = match[group]
    # A sign that is no letter, digit or stop means a relation wherever it stands.
    for sign in table:
        if sign not in _PLAIN:
            replaced |= {at: sign for at, char in enumerate(text) if char == sign}
    if "=" in table.values():
        for match in _loose(table.get("5") == "=").finditer(text, timeout=TIMEOUT):
            replaced[match.start("five")] = "5"
    chars = list(text)
    for at, sign in replaced.items():
        chars[at] = table[sign]
    if "=" in table.values():
        _beside_equals(chars, replaced, coded="67"["5" not in table])
    return "".join(chars), replaced


@cache
def _loose(fives: bool) -> regex.Pattern[str]:
    """A word, a 5 that stands alone, and a number with decimals: `mean change 5 1.21`."""
    return regex.compile(r"(?<=\p{L}[²2).]? )(?P<five>5)(?= [-−–]?\d*\.\d)" if fives else r"(?!)(?P<five>)")


def _beside_equals(chars: list[str], replaced: dict[int, str], coded: str) -> None:
    """Put right what such fonts code beside their `=`: a minus, `±`, χ and η; in place.

    `coded` is the digit that stands for `±`.
    """
    text = "".join(chars)
    for name, sign in (("minus", "-"), ("chi", "χ"), ("eta", "η"), ("both", "±")):
        for match in _codes(coded).finditer(text, overlapped=True, timeout=TIMEOUT):
            at = match.start(name)
            if at >= 0:
                replaced[at] = text[at]
                chars[at] = sign


@cache
def _codes(coded: str) -> regex.Pattern[str]:
    sides = "|".join(
        rf"(?<=(?<![\d.])\d{{1,4}}\.\d{{{k}}} ?)(?P<both>{coded})(?= ?\d{{1,4}}\.\d{{{k}}}(?!\d|\.\d))"
        for k in (1, 2, 3)
    )
    return regex.compile(
        rf"(?P<minus>[À\x01])(?=\d|\.\d) | (?<![\w])(?P<chi>[vwcxX])(?=[2²](?:\d{{1,2}}\ )?\ ?[=(\[]) "
        rf"| (?<![\w])(?P<eta>Z)(?=(?:[2²]p?|p[2²])\ ?=) | {sides.replace(' ', '[ ]')}",
        regex.VERBOSE,
    )


@cache
def _correlations() -> regex.Pattern[str]:
    return regex.compile(r"\br(?: ?\(\d+\))? = (?P<number>2?\.\d+)")


def _minus_is_digit(passages: Sequence[Passage]) -> bool:
    """Whether a `2` before a number may be a minus: correlations such as `r = 2.45` say so."""
    return any(
        match["number"].startswith("2")
        for p in passages
        for match in _correlations().finditer(p.text, timeout=TIMEOUT)
    )


def doubted(claim: Claim, span: tuple[int, int], passage: Passage, index: int, repairs: Repairs) -> Claim:
    """The claim with a note on each sign that was read by another code, and less confidence where it may be a digit."""
    start, end = span
    places = repairs.places.get(index, {})
    signs = {places[at]: passage.text[at] for at in range(start, end) if at in places} if places else {}
    strange = sorted(MISCODED.intersection(passage.text[start:end]))
    if not signs and not strange and not repairs.minus_is_digit:
        return claim
    notes = [f"the file has {_shown(sign)} where {relation!r} is printed" for sign, relation in signs.items()]
    notes += [f"the file has {_shown(sign)} for another sign" for sign in strange]
    confidence: Confidence = claim.confidence
    digits = not any(sign not in _PLAIN and relation == "=" for sign, relation in repairs.table.items())
    if digits and any(sign in _PLAIN for sign in signs) and confidence == "high":
        confidence = "medium"
    values = dict(claim.values)
    if repairs.minus_is_digit:
        for name, value in claim.values.items():
            if (
                name not in _UNSIGNED
                and value.text.startswith("2")
                and len(value.text) > 1
                and value.decimals > 0
            ):
                values[name], note = _signed(name, value)
                notes.append(note)
                confidence = "low"
        values |= _ordered(values, claim.interval_of)
    return replace(claim, values=values, notes=(*claim.notes, *notes), confidence=confidence)


def cell_repaired(passage: Passage, repairs: Repairs) -> Passage:
    """A cell of a table by the code table that the document's text has; its length is unchanged."""
    text, replaced = _rewritten(passage.text, repairs.table)
    lone = _RELATION_FIRST.match(text)
    if lone and lone["sign"] in repairs.table:
        text = text[: lone.start("sign")] + repairs.table[lone["sign"]] + text[lone.end("sign") :]
    return replace(passage, text=text) if replaced or text != passage.text else passage


_RELATION_FIRST = regex.compile(r"^(?P<sign>[^\w\s.;:()\[\]%*/'\"−–-]) ?0?\.\d")
"""A sign in front of a number that fills its cell: the `,` of `, .001`."""


def cell_doubted(claim: Claim, repairs: Repairs, texts: Sequence[tuple[str, str]]) -> Claim:
    """The claim of a table's cells, doubted as one of the text is; `texts` are its cells before and after the repair."""
    before, after = ("".join(side) for side in zip(*texts, strict=True)) if texts else ("", "")
    places = {at: sign for at, sign in enumerate(before) if after[at] != sign}
    return doubted(claim, (0, len(after)), Passage(text=after), 0, replace(repairs, places={0: places}))


_UNSIGNED = words("F chi2 p sd se n N df df1 df2 or rr hr ci_level u w r2 partial_eta2")
"""What a minus never stands before."""


def _shown(sign: str) -> str:
    return repr(sign) if sign.isprintable() else f"U+{ord(sign):04X}"


def _ordered(values: Mapping[str, Printed], interval_of: str | None) -> dict[str, Printed]:
    """The ends of an interval that is in order only if the 2 before them is a minus, and its estimate: `29.9 to 21.9`."""
    low, high = values.get("ci_low"), values.get("ci_high")
    if low is None or high is None or low.value <= high.value or not low.text.startswith("2"):
        return {}
    ends = {"ci_low": _negative(low)}
    if high.text.startswith("2") and _negative(high).value >= ends["ci_low"].value:
        ends["ci_high"] = _negative(high)
    own = values.get(interval_of or "")
    if interval_of and own is not None and own.text.startswith("2") and own.value > high.value:
        ends[interval_of] = _negative(own)
    return ends


def _negative(value: Printed) -> Printed:
    """The number behind its first digit, taken for a minus."""
    return (
        replace(value, value=-Decimal(value.text[1:]))
        if value.text[1:2].isdigit() or value.text[1:2] == "."
        else value
    )


def _signed(name: str, value: Printed) -> tuple[Printed, str]:
    """A correlation above 1 that starts with the digit for a minus is negative, and so are t, z and d above 20;
    elsewhere both may be meant.
    """
    note = f"the 2 of {value.text} may be a minus"
    if name == "r" and value.value > 1:
        return replace(value, value=-(value.value - 2)), note
    if name in ("t", "z", "d", "g") and value.value >= 20:
        return _negative(value), note
    return value, note
