"""The numbers of a sentence that speaks of power, each with what it is."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from decimal import Decimal
from functools import cache

import regex

from recheck.model import Printed, Relation
from recheck.reading.frequencies import NUMBER_WORDS
from recheck.reading.numerals import Line, number_at, relation_at, whole
from recheck.reading.power_patterns import COUNTED, NUMBER, inflated, needed, obtained, patterns
from recheck.reading.views import TIMEOUT

SIZES = ("n", "N", "size", "n1", "n2")
COUNTS = (*SIZES, "k", "predictors", "df", "df1")

LEAST = {role: 1 if role in ("predictors", "df", "df1") else 2 for role in COUNTS}
NEAR = 60
"""Characters within which a number may be said to allow for losses."""


@dataclass(frozen=True, slots=True)
class Mention:
    """A number with its role; `start` and `end` count characters of the view, `alone` those of the number itself."""

    role: str
    printed: Printed
    start: int
    end: int
    alone: tuple[int, int]


def mentions(line: Line, start: int, end: int) -> list[Mention]:
    """The numbers of the sentence from `start` up to `end` of the view that a power statement can hold, in their order."""
    taken: list[tuple[int, int]] = []
    found: list[Mention] = []
    for role, pattern in patterns(line.view.text[start:end]):
        for match in pattern.finditer(line.view.text, start, end, timeout=TIMEOUT, overlapped=False):
            mention = _mention(role, match, line)
            if mention is None or any(a < mention.alone[1] and mention.alone[0] < b for a, b in taken):
                continue
            taken.append(mention.alone)
            found.append(mention)
    found += _proportions(line, start, end, taken)
    found += _means(line, start, end, found)
    found.sort(key=lambda mention: mention.alone)
    return [mention for mention in found if mention.role != "aside"]


def _mention(role: str, match: regex.Match[str], line: Line) -> Mention | None:
    groups = match.re.groupindex
    if "g" in groups and match["g"]:
        printed = _counted(match["g"])
        return (
            Mention(role, printed, *match.span(), match.span("g")) if printed.value >= LEAST[role] else None
        )
    if "w" in groups and match["w"]:
        return _worded(role, match)
    alone = match.span("v")
    printed_ = _printed(line, alone[0])
    if printed_ is None:
        return None
    role, printed = _settled(role, printed_)
    return Mention(role, printed, *match.span(), alone) if role else None


def _worded(role: str, match: regex.Match[str]) -> Mention | None:
    """A number of cases in words; one below ten is a number of groups, of days or of pages rather."""
    text = match["w"]
    value = _value(text.lower())
    if value < FEWEST_IN_WORDS:
        return None
    return Mention(role, Printed(text, Decimal(value), 0), *match.span(), match.span("w"))


FEWEST_IN_WORDS = 10


def _value(text: str) -> int:
    """`fifty-two`, `a hundred and twenty`."""
    hundreds, hundred, rest = text.rpartition("hundred") if "hundred" in text else ("", "", text)
    value = 100 * NUMBER_WORDS.get(hundreds.strip(), 1) if hundred else 0
    return value + sum(NUMBER_WORDS.get(word, 0) for word in rest.replace("-", " ").split())


def _counted(text: str) -> Printed:
    value = COUNTED.index(text) + 1 if text in COUNTED else int(text)
    return Printed(text, Decimal(value), 0)


def _printed(line: Line, start: int) -> Printed | None:
    """The number whose first character is at `start`, with the relation before it and a `per cent` behind it."""
    index = next((i for i, token in enumerate(line.tokens) if token.start == start), None)
    number = None if index is None else number_at(line, index)
    if index is None or number is None or number.value < 0:
        return None
    relation = _relation(line, index)
    per_cent = line.at(number.after).low == "percent" or (
        line.at(number.after).low == "per" and line.at(number.after + 1).low == "cent"
    )
    printed = whole(number).printed(line, relation)
    return replace(printed, percent=True) if per_cent else printed


def _relation(line: Line, index: int) -> Relation:
    """The relation that ends before the number; `=` where there is none."""
    for back in (1, 2):
        sign, after = relation_at(line, index - back)
        if sign and after == index:
            return sign
    return "="


def _settled(role: str, printed: Printed) -> tuple[str, Printed]:
    """Role and number where the number can have that role, else an empty role; complements are turned."""
    share = printed.value / 100 if printed.percent else printed.value
    if role in ("power", "beta", "confidence", "alpha"):
        return _share(role, share, printed)
    if role in COUNTS:
        fits = printed.decimals == 0 and not printed.percent and printed.value >= LEAST[role]
        # `at least 64` are the 64 that are needed.
        return (role, replace(printed, relation="=")) if fits else ("", printed)
    if role in ("aside", "ratio", "between", "ratio_effect"):
        return role, printed
    most = 1 if role in ("r", "partial_eta2", "r2") else 100_000
    fits = 0 < printed.value < most and not printed.percent
    return (role, printed) if fits else ("", printed)


def _share(role: str, share: Decimal, printed: Printed) -> tuple[str, Printed]:
    least, most = {
        "power": ("0.05", "1"),
        "beta": ("0.005", "0.6"),
        "confidence": ("0.8", "0.9999"),
        "alpha": ("0.00001", "0.25"),
    }[role]
    if not Decimal(least) <= share < Decimal(most) or (not printed.percent and printed.decimals < 1):
        return "", printed
    if role in ("power", "alpha"):
        return role, printed
    whole_ = Decimal(100) if printed.percent else Decimal(1)
    other = replace(printed, text=f"{whole_} − {printed.text}", value=whole_ - printed.value)
    return ("power" if role == "beta" else "alpha"), other


def _proportions(line: Line, start: int, end: int, taken: Sequence[tuple[int, int]]) -> Iterator[Mention]:
    """The two percentages that are compared: those that are nothing else, where there are just two."""
    text = line.view.text
    free: list[tuple[Printed, int, int]] = []
    for index, token in enumerate(line.tokens):
        if token.kind != "num" or not start <= token.start < end:
            continue
        number = number_at(line, index)
        if number is None or any(a < number.end and number.start < b for a, b in taken):
            continue
        printed = _printed(line, token.start)
        decimal = 0 < number.value < 1 and any(
            word in text[start:end].lower() for word in ("proportion", "rate", "probabilit")
        )
        if printed and (printed.percent or decimal) and 0 < printed.value < 100:
            free.append((printed, number.start, number.end))
    if len(free) != 2 or not _compared(text, start, (free[0][1], free[0][2]), (free[1][1], free[1][2]), end):
        return
    for role, (printed, first, last) in zip(("proportion1", "proportion2"), free, strict=True):
        yield Mention(role, printed, first, last, (first, last))


def _means(line: Line, start: int, end: int, found: Sequence[Mention]) -> Iterator[Mention]:
    """The difference of two means that are told in its place, beside an SD: `to detect 10 against 15 mm (SD 8)`."""
    roles = {mention.role for mention in found}
    if "sd" not in roles or roles & {"mean_difference", "d", "d_z", "effect_size", "f", "r", "delta"}:
        return
    text = line.view.text
    pairs = list(_two_means().finditer(text, start, end, timeout=TIMEOUT))
    if len(pairs) != 1 or any(m.alone[0] < pairs[0].end() and pairs[0].start() < m.alone[1] for m in found):
        return
    first, second = (_printed(line, pairs[0].start(name)) for name in ("one", "other"))
    if first is None or second is None or first.percent or second.percent or first.value == second.value:
        return
    larger, smaller = sorted((first, second), key=lambda printed: printed.value, reverse=True)
    decimals = max(first.decimals, second.decimals)
    told = Printed(f"{larger.text} − {smaller.text}", larger.value - smaller.value, decimals)
    yield Mention("mean_difference", told, *pairs[0].span(), (pairs[0].start("one"), pairs[0].end("other")))


@cache
def _two_means() -> regex.Pattern[str]:
    return regex.compile(
        rf"""(?<one>{NUMBER})(?!\ ?[-%])(?:\ (?!and\b|to\b)[\p{{L}}/°²³]{{1,12}}){{0,4}}\ (?:vs\.?|versus|against|compared\ (?:with|to)|rather\ than|as\ opposed\ to|and)\ (?:an?\ |the\ |mean\ |of\ |in\ ){{0,3}}
            (?<other>{NUMBER})(?!\ ?(?:-|%|{_OF_CASES}))""",
        regex.VERBOSE,
    )


_OF_CASES = r"participants?|subjects?|patients?|people|groups?|arms?|conditions?|per\b|in\ each|weeks?|months?|years?|days?|times?"
_CHANGED = r"(?:absolute|relative|differences?|reductions?|increases?|improvements?|decreases?|changes?|margin|points?|coefficient|variation|CV)\b"


def _compared(text: str, start: int, first: tuple[int, int], second: tuple[int, int], end: int) -> bool:
    """Whether both percentages are shares of the same sort: neither a change nor a coefficient of variation."""
    before = text[start : first[0]]
    between, behind = (part.lstrip(" %") for part in (text[first[1] : second[0]], text[second[1] : end]))
    if regex.search(rf"\b{_CHANGED}[^,;]{{0,25}}$", between, timeout=TIMEOUT) and " from " not in between:
        return False
    if any(
        regex.match(rf"-?(?:percentage )?{_CHANGED}", part, timeout=TIMEOUT) for part in (between, behind)
    ):
        return False
    if regex.search(r"\bvariation (?:\(CV\) )?(?:of|was|=) ?$", before, timeout=TIMEOUT):
        return False
    joined = r"\(?(?:in [\w ]{2,30} )?,? ?(?:vs\.?|versus|to|and|against|or|compared (?:with|to)) ?(?:[\w-]+ ){0,3}"
    return bool(regex.fullmatch(joined, between, timeout=TIMEOUT)) or any(
        word in text[start:end].lower() for word in _SHARES
    )


_SHARES = (
    "proportion", "rate", "prevalen", "inciden", "risk", "probabil", "success", "respon", "fail", "percent", "share", "cure", "mortality",
    "surviv", "split", "would", "event", "frequenc", "% of",
)  # fmt: skip
"""What says that percentages are shares of cases."""


def listed(mention: Mention, found: Sequence[Mention], text: str) -> bool:
    """Whether a number is one of several that are told together: `.34, .48 and .60`, `20, 30 and 40`."""
    taken = {other.alone[0] for other in found}
    first, last = mention.alone
    behind = regex.match(rf"(?:, and|,| and| or) (?P<v>{NUMBER})(?! ?-)", text[last:], timeout=TIMEOUT)
    before = regex.search(rf"(?P<v>{NUMBER})(?:, and|,| and| or) $", text[:first], timeout=TIMEOUT)
    others = [(last + behind.start("v"), behind["v"])] if behind else []
    others += [(before.start("v"), before["v"])] if before else []
    return any(at not in taken and _alike(text[first:last], other) for at, other in others)


def _alike(one: str, other: str) -> bool:
    """Whether two numbers are printed in one way: per cent, with decimals, or whole."""
    return [(mark in one) for mark in "%.,"] == [(mark in other) for mark in "%.,"]


def wanted(found: Sequence[Mention], line: Line, start: int, end: int) -> list[Mention]:
    """Without the numbers of cases that were had, or that allow for losses, where a calculation tells what is needed."""
    text = line.view.text
    left = [m for m in found if m.role not in SIZES or not _other_size(m, text, start, end)]
    for role in SIZES:
        same = [m for m in left if m.role == role]
        if len({m.printed.value for m in same}) > 1:
            said = [m for m in same if needed().search(_clause(text, *m.alone, start, end), timeout=TIMEOUT)]
            # Without one that is said to be needed nobody can tell which it is.
            kept = said if len({m.printed.value for m in said}) == 1 else []
            left = [m for m in left if m.role != role or m in kept]
    return left


def _other_size(mention: Mention, text: str, start: int, end: int) -> bool:
    first, last = mention.alone
    before, behind = text[start:first], text[last:end]
    if inflated().search(before, timeout=TIMEOUT):
        return True
    loss = inflated().search(behind, timeout=TIMEOUT)
    # `64 were needed, and 72 to allow for losses`: another number stands between.
    if loss and loss.start() < NEAR and not regex.search(r"\d(?![\d.,]* ?%)", behind[: loss.start()]):
        return True
    if regex.search(
        r"\bas (?:determined|calculated|indicated|suggested|estimated|required|recommended)\b",
        behind,
        timeout=TIMEOUT,
    ):
        return False
    clause = _clause(text, first, last, start, end)
    return bool(obtained().search(clause, timeout=TIMEOUT))


@cache
def _stop() -> regex.Pattern[str]:
    return regex.compile(r"[,;:()]\ |[()]|\ (?:and|but|so|which|while|because|based)\ ", regex.VERBOSE)


def _clause(text: str, first: int, last: int, start: int, end: int) -> str:
    """The clause around a number: up to the next comma, semicolon, bracket, or `and`, `but`, `so`."""
    begin = start
    for match in _stop().finditer(text, start, first, timeout=TIMEOUT):
        begin = match.end()
    after = _stop().search(text, last, end, timeout=TIMEOUT)
    return text[begin : after.start() if after else end]
