"""Plausible misprints: which one would turn the right number into the printed one."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import replace
from decimal import Decimal
from itertools import pairwise

from recheck.model import Printed, Remedy, shown
from recheck.reconcile.readings import ELSEWHERE, Numbers, is_exact

MINUS = "−"
SIGNS = "-−–+"
SMALLEST_TURNED = Decimal("0.05")
"""`p > .001` says nothing: below the usual level no author writes a lower bound."""
SIGNED = frozenset(("mean", "mean_difference", "ci_low", "ci_high", "b", "estimate", "rd"))
THRESHOLDS = frozenset(Decimal(text) for text in ("0.1", "0.05", "0.01", "0.005", "0.001", "0.0001"))
"""Values that p is commonly printed to lie below (common practice, no source)."""
DIGITS = "0123456789"
GROUP_NUMBERS = {
    f"{name}{i}": (name, str(i))
    for i in range(1, 41)
    for name in ("mean", "sd", "se", "n", "median", "min", "max", "count", "percent", "total")
}
"""Names of the numbers of groups, each with its quantity and its group: `sd2` is the SD of the second."""


def candidates(printed: Printed) -> Iterator[tuple[Printed, str]]:
    """Yield what the number may have been before the slip, with the slip's name; likeliest first."""
    seen = {(printed.value, printed.relation)}
    texts = (*_swapped(printed), *_moved(printed), *_dropped(printed), *_wrong(printed))
    turned = replace(printed, text=_turned(printed.text), value=-printed.value)
    sign = ((turned, "sign lost" if printed.value > 0 else "sign added"),)
    numbers = ((_with_digits(printed, text), words) for text, words in texts if _printable(text))
    for number, words in (*_relations(printed), *sign, *numbers):
        key = (number.value, number.relation)
        if key not in seen:
            seen.add(key)
            yield number, words


def _turned(text: str) -> str:
    return text.lstrip(SIGNS) if text[:1] in SIGNS else MINUS + text


def _printable(text: str) -> bool:
    """Tell whether digits could stand so in a manuscript: no idle zero in front, not all zeros."""
    return bool(text.strip("0.")) and not (text[0] == "0" and text[1:2].isdigit())


def _with_digits(printed: Printed, text: str) -> Printed:
    """The same number with other digits, its sign kept."""
    negative = printed.value < 0
    if printed.text.lstrip(SIGNS).startswith((".", ",")):
        text = text.removeprefix("0")
    value = -Decimal(text) if negative else Decimal(text)
    return replace(printed, text=MINUS + text if negative else text, value=value, decimals=_decimals(text))


def _decimals(text: str) -> int:
    return len(text.partition(".")[2])


def _digits(printed: Printed) -> str:
    """The digits with their point, as a plain decimal without sign, leading zero as printed."""
    text = f"{abs(printed.value):f}" if printed.decimals >= 0 else f"{abs(printed.value):.0f}"
    return text.removeprefix("0") if printed.text.lstrip(SIGNS).startswith((".", ",")) else text


def _relations(printed: Printed) -> list[tuple[Printed, str]]:
    other = {"<": ">", ">": "<", "≤": "≥", "≥": "≤"}.get(printed.relation)
    if other and printed.value >= SMALLEST_TURNED:
        return [(replace(printed, relation=other), f"{printed.relation} for {other}")]  # type: ignore[arg-type]
    if printed.relation == "=" and printed.value in THRESHOLDS:
        return [(replace(printed, relation="<"), "= for <")]
    return []


def _swapped(printed: Printed) -> Iterator[tuple[str, str]]:
    text = _digits(printed)
    places = [i for i, character in enumerate(text) if character.isdigit()]
    for i, j in pairwise(places):
        if text[i] != text[j]:
            yield text[:i] + text[j] + text[i + 1 : j] + text[i] + text[j + 1 :], "digits swapped"


def _moved(printed: Printed) -> Iterator[tuple[str, str]]:
    for shift in (1, -1):
        value = abs(printed.value).scaleb(shift)
        decimals = max(0, printed.decimals - shift)
        yield f"{value:.{decimals}f}", "decimal point moved"


def _dropped(printed: Printed) -> Iterator[tuple[str, str]]:
    text = _digits(printed)
    for i, character in enumerate(text):
        if character.isdigit() and i + 1 < len(text) and text[i + 1] == character:
            yield text[:i] + text[i + 1 :], "a digit doubled"


def _wrong(printed: Printed) -> Iterator[tuple[str, str]]:
    text = _digits(printed)
    for i, character in enumerate(text):
        if character.isdigit():
            for digit in "0123456789":
                if digit != character:
                    yield text[:i] + digit + text[i + 1 :], "one digit wrong"


def slip_remedies(
    numbers: Numbers, mended: Callable[[str, Printed], bool], *, most: int = 4
) -> tuple[Remedy, ...]:
    """Single slips that would reconcile the numbers, swapped digits before single wrong digits.

    `mended` tells whether all agree with one number, by its name, corrected. A number of which more
    than one single digit could be wrong is not named so: the interval that it must lie in says it better.
    """
    found: list[Remedy] = []
    for name, printed in numbers.items():
        wrong: list[Remedy] = []
        for number, words in candidates(printed):
            if len(wrong) > 1:
                break
            if not _sensible(name, printed, number, words) or not mended(name, number):
                continue
            remedy = _remedy(name, printed, number, words)
            (wrong if words == "one digit wrong" else found).append(remedy)
        if len(wrong) == 1:
            found.append(wrong[0])
    found.sort(key=lambda remedy: "one digit wrong" in remedy.text)
    return tuple(found[:most])


def _sensible(name: str, printed: Printed, number: Printed, words: str) -> bool:
    """Tell whether a correction leaves a number of its kind.

    A relation turned is a slip of p alone, a sign lost one of numbers that can have either, a
    decimal point moved one of numbers that have one.
    """
    if number.relation != printed.relation:
        return name == "p"
    if words.startswith("sign "):
        return name.rstrip(DIGITS) in SIGNED
    return not is_exact(name, printed) or (words != "decimal point moved" and number.value >= 1)


def _remedy(name: str, printed: Printed, number: Printed, words: str) -> Remedy:
    now, then = _written(printed), _written(number)
    if printed.value > 0 and printed.text[:1] in SIGNS[:3] and then[:1] not in SIGNS:
        then = printed.text[0] + then
    text = f"if {label(name)} were {then} instead of {now} ({words}), the numbers would agree"
    return Remedy("slip", name, text, change=f"{now} → {then}")


def _written(printed: Printed) -> str:
    return printed.text if printed.relation == "=" else f"{printed.relation} {printed.text}"


def unit_of(quantity: str) -> str:
    """What a numbered quantity belongs to: a group has a mean, a cell of a table a count."""
    return "cell" if quantity in ("count", "percent", "total") else "group"


def label(name: str) -> str:
    """Write the name of a number of a claim: `sd2` is the SD of the second group."""
    if name in GROUP_NUMBERS:
        quantity, group = GROUP_NUMBERS[name]
        return f"the {shown(quantity)} of {unit_of(quantity)} {group}"
    base = name.removesuffix(ELSEWHERE)
    return shown(name) if base == name else f"{shown(base)}{ELSEWHERE}"
