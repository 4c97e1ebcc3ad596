"""What is asked of whole scores, how else it can be understood, and what would do instead."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from recheck.checks.designs import N_BELOW, SE_READING
from recheck.checks.whole_scores import MOST_ANSWERS, Scored, are_whole, is_change, numbers_of, plain, scored
from recheck.model import Claim, Printed, Remedy
from recheck.reconcile.readings import Numbers
from recheck.reconcile.rounding import PLAIN, ROUNDINGS, Rounding
from recheck.reconcile.slips import slip_remedies

if TYPE_CHECKING:
    from recheck.recompute.granularity import Answer
    from recheck.recompute.granularity.scores import Spread

WORK = 200_000_000
"""What is tried for each reading and each correction: a twentieth of a second."""
NEARBY = 10
"""How far off a group size is looked for that would do."""
MOST_STEPS = 40
"""Units of the last digit within which the nearest possible spreads are looked for."""


@dataclass(frozen=True, slots=True)
class Question:
    """Printed numbers and how they are understood: `kind` is the spread that the second one is, if there is one."""

    told: Scored
    numbers: Numbers
    quantity: str
    kind: Spread = "sd"
    rounding: Rounding = PLAIN
    items: int = 0
    on_scale: bool = True

    def answer(self, numbers: Numbers | None = None) -> Answer:
        """Ask the engine whether any scores have these numbers; corrected ones take the place of the printed."""
        from recheck.recompute.granularity import Scores, find_scores

        numbers = numbers or self.numbers
        told, on = self.told, self.on_scale
        scores = Scores(
            int(numbers["n"].value),
            told.low.value if told.low and on else None,
            told.high.value if told.high and on else None,
            self.items or told.items,
        )
        ends = {name: self.rounding.interval(numbers[name]) for name in ("mean", self.quantity)}
        mean = ends["mean"].low, ends["mean"].high
        if self.quantity == "mean":
            return find_scores(scores, mean)
        spread = ends[self.quantity].low, ends[self.quantity].high
        return find_scores(scores, mean, spread, self.kind, work=WORK)


def asked(claim: Claim, quantity: str) -> Question | None:
    """The question behind a summary of whole scores; None where there is none."""
    told = scored(claim)
    numbers = numbers_of(claim, quantity, "mean", "n")
    fit = all(plain(numbers.get(q)) for q in (quantity, "mean")) and told.n is not None and told.n >= 1
    below = quantity != "mean" and fit and numbers[quantity].value < 0
    upside_down = told.low and told.high and told.low.value > told.high.value
    if not are_whole(claim) or not fit or below or upside_down:
        return None
    kind: Spread = "se" if quantity == "se" else "sd"
    return Question(told, numbers, quantity, kind, on_scale=not is_change(claim))


def readings(question: Question, unlabelled: bool) -> Iterator[tuple[str, Question]]:
    """Other honest ways to come to the printed numbers, each with what it assumes; averages stand alone."""
    kinds: list[tuple[str, Question]] = []
    if question.quantity != "mean":
        of_all: Spread = "se of all" if question.kind == "se" else "sd of all"
        kinds = [(N_BELOW, replace(question, kind=of_all))]
        kinds += [(SE_READING, replace(question, kind="se"))] if unlabelled else []
    yield from kinds
    for rounding in ROUNDINGS:
        if rounding.words:
            yield rounding.words, replace(question, rounding=rounding)
            for words, other in kinds:
                yield f"{words}; and if {rounding.words}", replace(other, rounding=rounding)
    if not question.told.single:
        for items in range(2, MOST_ANSWERS + 1):
            yield f"each score is the average of {items} answers", replace(question, items=items)


def step_between(question: Question) -> float:
    """How far apart two neighbouring spreads of such scores are: sums of squares of one sum differ by 2."""
    n, items = question.told.n or 1, question.told.items
    factor = {"sd": n - 1, "sd of all": n, "se": n * (n - 1), "se of all": n * n}[question.kind]
    spread = max(question.numbers[question.quantity].number, float(question.numbers[question.quantity].unit))
    return 1.0 / (spread * factor * items**2)


def next_spread(question: Question, side: int) -> Printed | None:
    """The nearest possible spread on one side, to the printed decimals."""
    printed = question.numbers[question.quantity]
    for steps in range(1, MOST_STEPS + 1):
        value = printed.value + side * steps * printed.unit
        if value < 0:
            return None
        other = replace(printed, value=value, text=f"{value:.{printed.decimals}f}")
        answer = question.answer({**question.numbers, question.quantity: other})
        if answer.possible:
            return other
        if answer.possible is None or answer.ground == ("too small" if side < 0 else "too large"):
            return None
    return None


def slips(question: Question) -> tuple[Remedy, ...]:
    """Single misprints of any of the numbers that would make them possible; where they tell anything."""

    def mended(name: str, number: Printed) -> bool:
        if number.value < (1 if name == "n" else 0):
            return False
        return bool(question.answer({**question.numbers, name: number}).possible)

    return slip_remedies(question.numbers, mended)


def other_sizes(question: Question) -> tuple[Remedy, ...]:
    """The group sizes near the printed one that would do."""
    n = question.told.n or 1
    near = sorted(range(max(1, n - NEARBY), n + NEARBY + 1), key=lambda size: abs(size - n))
    found = [size for size in near if size != n and _fits(question, size)][:4]
    if not found:
        return ()
    text = f"n would have to be {', '.join(map(str, sorted(found)))}, to name the nearest"
    return (Remedy("number", "n", text),)


def _fits(question: Question, size: int) -> bool:
    n = question.numbers["n"]
    other = replace(n, value=n.value * 0 + size, text=str(size))
    return bool(question.answer({**question.numbers, "n": other}).possible)


def other_items(question: Question) -> tuple[Remedy, ...]:
    """The numbers of answers averaged in each score that would do, the fewest first."""
    now = question.told.items
    tried = (items for items in range(1, MOST_ANSWERS + 1) if items != now)
    found = [items for items in tried if replace(question, items=items).answer().possible][:3]
    if not found:
        return ()
    text = (
        f"each score would have to be the average of {', '.join(map(str, found))} answers, to name the fewest"
    )
    return (Remedy("number", "items_per_score", text),)
