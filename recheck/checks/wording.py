"""The sentences of findings: printed, implied, assumed. They never accuse."""

from __future__ import annotations

from collections.abc import Sequence

from recheck.model import Claim, Implied, Printed, Verdict, shown
from recheck.model.figures import interval_text, printed_text, span
from recheck.reconcile.readings import Numbers, is_exact
from recheck.reconcile.slips import GROUP_NUMBERS, label, unit_of


def stands_for(numbers: Numbers) -> str:
    """Say which true values each printed number can stand for: the tolerance in words."""
    exact, rounded = [], []
    for name, printed in numbers.items():
        if printed.relation not in ("=", "≈"):
            rounded.append(f"{label(name)} {printed_text(printed)} is read as a bound, end included")
        elif is_exact(name, printed):
            exact.append(label(name))
        else:
            interval = printed.interval()
            rounded.append(f"{label(name)} = {printed.text} stands for {interval_text(interval, 12)}")
    text = "; ".join(rounded)
    return f"{text}; {', '.join(exact)} taken as exact" if exact else text


def _expected(implied: Sequence[Implied]) -> str:
    """The range under the reading that assumes least, and how many others there are."""
    first = implied[0]
    text = (
        f"{span(first.low, first.high)} ({first.assuming})" if first.assuming else span(first.low, first.high)
    )
    more = len(implied) - 1
    return text + (f"; {more} other reading{'s do' if more > 1 else ' does'} not fit either" if more else "")


def inputs(quantity: str, numbers: Numbers) -> str:
    """Name the numbers that one is compared with; a group's mean, SD and n stand together."""
    grouped = any(n in GROUP_NUMBERS for n in numbers)
    rest = [
        f"{label(n)} {printed_text(p)}"
        for n, p in numbers.items()
        if n not in (quantity, "ci_low", "ci_high") and n not in GROUP_NUMBERS and not (grouped and n == "t")
    ]
    if {"ci_low", "ci_high"} <= numbers.keys() - {quantity}:
        rest.append(f"the interval {numbers['ci_low'].text} to {numbers['ci_high'].text}")
    grouped_by: dict[str, list[str]] = {}
    for n, p in numbers.items():
        if n in GROUP_NUMBERS and n != quantity:
            name, i = GROUP_NUMBERS[n]
            grouped_by.setdefault(f"{unit_of(name)} {i}", []).append(f"{shown(name)} {printed_text(p)}")
    rest += [f"{unit} ({', '.join(told)})" for unit, told in grouped_by.items()]
    return " and ".join(rest) if len(rest) <= 2 else ", ".join(rest)


def tell(
    quantity: str, numbers: Numbers, verdict: Verdict, implied: Sequence[Implied],
    given: Sequence[str], unstated: Sequence[str], doubts: Sequence[str],
) -> str:  # fmt: skip
    """One or two sentences: what is printed, what the other numbers imply, what was assumed."""
    others = inputs(quantity, numbers)
    imply = "imply" if ", " in others or " and " in others else "implies"
    printed = f"{label(quantity)} {printed_text(numbers[quantity])}"
    if verdict == "agrees":
        said = f" ({'; '.join(given)})" if given else ""
        return f"{_capital(printed)} agrees with {others}{said}."
    if verdict == "conditional":
        first = implied[0]
        if unstated and all(words in first.assuming for words in unstated):
            # No reading that the text states can be followed: the range told is that of the open one.
            told = f"{_capital(printed)} agrees with {others}, {span(first.low, first.high)},"
            return f"{told} if {'; and if '.join(unstated)}, which the text does not say."
        start = f"{_capital(printed)} is printed, but {others} {imply} {span(first.low, first.high)}."
        if unstated:
            return f"{start} The numbers agree if {'; and if '.join(unstated)}, which the text does not say."
        return f"{start} That is a contradiction only if {'; and if '.join(doubts)}."
    return f"{_capital(printed)} is printed, but {others} {imply} {_expected(implied)}."


def question_for(
    claim: Claim,
    quantity: str,
    printed: Printed,
    implied: Sequence[Implied] = (),
    numbers: Numbers | None = None,
) -> str:
    """A neutral question to the authors about one printed number, and the interval it is compared with."""
    plain = next((row for row in implied if not row.assuming), implied[0] if implied else None)
    where = f"“{claim.place.quote}”" + (f" on page {claim.place.page}" if claim.place.page else "")
    asked = f"{label(quantity)} {printed_text(printed)}"
    if numbers and plain and {"ci_low", "ci_high"} <= numbers.keys() - {quantity}:
        interval = f"the interval {numbers['ci_low'].text} to {numbers['ci_high'].text}"
        expected = f"{label(quantity)} of {span(plain.low, plain.high)}"
        return f"Could you check {interval} and {asked} in {where}? From the interval we expect {expected}; how were they computed?"
    expected = f", where we expect {span(plain.low, plain.high)} from the other numbers" if plain else ""
    return f"Could you check {asked} in {where}{expected}, and say how it was computed?"


def _capital(text: str) -> str:
    """Begin a sentence, leaving symbols such as t and p as they are."""
    first = text.split(" ", 1)[0]
    return text if len(first) <= 3 else text[0].upper() + text[1:]
