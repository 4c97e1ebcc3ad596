"""Honest power statements: n by every usual method, in many wordings; powers achieved and effects detectable."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from decimal import Decimal

import numpy as np
from scipy import optimize

from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.power_plans import (
    PLANS,
    Plan,
    Rng,
    by_noncentral_t,
    first_whole,
    pairs,
    told,
    two_groups,
)
from tests.soundness.rounding import rounded
from tests.soundness.samples import Generator, Sample, Told

WHO = ["apprentices", "loaves", "participants", "bakers"]
UNITS = ["group", "arm", "condition"]


@dataclass(frozen=True, slots=True)
class Words:
    """The parts of a statement as one author words them, with the numbers that they print."""

    alpha: str
    level: str
    power: str
    powerful: str
    size: str
    values: dict[str, Told]


def in_per_cent(value: float) -> Decimal:
    return Decimal(f"{value * 100:g}")


def alpha_words(rng: Rng, hand: Hand, plan: Plan, values: dict[str, Told]) -> tuple[str, str]:
    """The level in two forms: within a list, and after `at`."""
    sided = ""
    if plan.sided and (plan.tails == 1 or rng.random() < 0.6):
        sided = (
            one(rng, ["one-sided", "one-tailed"])
            if plan.tails == 1
            else one(rng, ["two-sided", "two-tailed"])
        )
    before, behind = (f"{sided} ", f" ({sided})") if sided else ("", "")
    if rng.random() < 0.35:
        per_cent = in_per_cent(plan.alpha)
        values["alpha"] = told(per_cent)
        number = hand.number(per_cent)
        listed = [
            f"a {before}significance level of {number}%",
            f"{before}alpha of {number}%",
            f"a type I error of {number}%{behind}",
        ]
        return one(rng, listed), one(
            rng, [f"the {before}{number}% level", f"a {before}significance level of {number}%"]
        )
    level = Decimal(f"{plan.alpha:g}")
    values["alpha"] = told(level)
    number = hand.number(level, True)
    listed = [
        f"{before}α = {number}",
        f"alpha = {number}{behind}",
        f"an alpha level of {number}{behind}",
        f"a {before}alpha of {number}",
    ]
    return one(rng, listed), one(
        rng,
        [
            f"α = {number}{behind}",
            f"a {before}significance level of {number}",
            f"an alpha of {number}{behind}",
        ],
    )


def power_words(
    rng: Rng, hand: Hand, plan: Plan, values: dict[str, Told], power: float | None = None
) -> tuple[str, str]:
    """The power in two forms: within a list, and before `to detect`."""
    power = plan.target if power is None else power
    if rng.random() < 0.45:
        per_cent = in_per_cent(power)
        values["power"] = told(per_cent)
        number = hand.number(per_cent)
        return one(
            rng, [f"a power of {number}%", f"{number}% power", f"power set at {number}%"]
        ), f"{number}% power"
    share = rounded(power, 2)
    values["power"] = told(share)
    number = hand.number(share, True)
    listed = [f"power = {number}", f"a power of {number}", f"1 − β = {number}", f"power (1 − β) = {number}"]
    return one(rng, listed), one(rng, [f"a power of {number}", f"a statistical power of {number}"])


def size_words(rng: Rng, plan: Plan, each: int, total: int, values: dict[str, Told]) -> str:
    """The size, of each group or of all."""
    who, unit = one(rng, WHO), one(rng, UNITS)
    if plan.groups == 1:
        values["N"] = told(Decimal(total))
        return one(
            rng, [f"a total of {total} {who}", f"{total} {who}", f"a sample of {total} {who}", f"N = {total}"]
        )
    if rng.random() < 0.6:
        values["n"] = told(Decimal(each))
        more = f" ({total} in total)" if rng.random() < 0.3 and total == each * plan.groups else ""
        return (
            one(
                rng,
                [
                    f"{each} {who} per {unit}",
                    f"{each} {who} in each {unit}",
                    f"n = {each} per {unit}",
                    f"{each} per {unit}",
                ],
            )
            + more
        )
    values["N"] = told(Decimal(total))
    return one(
        rng,
        [
            f"a total of {total} {who}",
            f"{total} {who} in total",
            f"N = {total}",
            f"a total sample of {total} {who}",
        ],
    )


def worded(rng: Rng, hand: Hand, plan: Plan, each: int, total: int, power: float | None = None) -> Words:
    """All parts but the effect."""
    values = dict(plan.values)
    alpha, level = alpha_words(rng, hand, plan, values)
    listed, powerful = power_words(rng, hand, plan, values, power)
    return Words(alpha, level, listed, powerful, size_words(rng, plan, each, total, values), values)


def sizes(rng: Rng, plan: Plan) -> tuple[int, int]:
    """Size of each group and of all: exact or approximate, rounded up, up to even, for safety, or one short as in Cohen's tables."""
    least = 3 if plan.groups > 1 else 10 if plan.test.startswith("a multiple") else 4
    exact = (
        first_whole(plan.power_of, plan.target, least)
        if math.isnan(plan.about) or rng.random() < 0.6
        else math.ceil(plan.about)
    )
    each = max(exact, 2)
    how = rng.random()
    if how < 0.1:
        each += each % 2
    elif how < 0.2:
        each += 1
    elif how < 0.3:
        each = math.ceil(each / 10) * 10
    total = each * plan.groups
    if how > 0.9 and plan.groups > 1 and each > 20:
        # The size of all is looked for as a whole, as some programs do.
        total = max(
            first_whole(lambda N: plan.power_of(N / plan.groups), plan.target, least * plan.groups), 4
        )
    return each, total


REQUIRED: tuple[Callable[[Plan, Words, str], str], ...] = (
    lambda p, w, e: f"A power analysis for {p.test} ({e}, {w.alpha}, {w.power}) indicated {w.size}.",
    lambda p, w, e: f"To detect {e} with {w.powerful} at {w.level}, {w.size} were needed for {p.test}.",
    lambda p, w, e: f"Assuming {e}, {w.alpha} and {w.power}, {w.size} are required for {p.test}.",
    lambda p, w, e: f"For {p.test}, {w.size} are required to detect {e} with {w.powerful} at {w.level}.",
    lambda p, w, e: (
        f"An a priori power analysis with {w.alpha}, {w.power} and {e} showed that {w.size} would be needed for {p.test}."
    ),
    lambda p, w, e: f"Sample size: {p.test}, {w.alpha}, {w.power}, {e}; required: {w.size}.",
    lambda p, w, e: (
        f"We planned {p.test} and expected {e}. With {w.alpha} and {w.power}, {w.size} were required. "
        "Allowing for 10% dropout, some more were recruited."
    ),
    lambda p, w, e: f"For {p.test} the study needs {w.size} to have {w.powerful} to detect {e} at {w.level}.",
    lambda p, w, e: f"With {w.size}, {p.test} has {w.powerful} to detect {e} ({w.level}).",
    lambda p, w, e: (
        f"The sample size was based on {e}. In {p.test} with {w.alpha}, {w.size} give {w.powerful}."
    ),
)


def lone_effect(rng: Rng, plan: Plan) -> str:
    return one(rng, list(plan.effects))


def required(name: str) -> Generator:
    """An n that was planned, of one sort of test."""

    def draw(rng: np.random.Generator) -> Sample:
        hand = draw_hand(rng)
        plan = PLANS[name](rng, hand)
        each, total = sizes(rng, plan)
        words = worded(rng, hand, plan, each, total)
        template = REQUIRED[int(rng.integers(len(REQUIRED)))]
        return Sample(template(plan, words, lone_effect(rng, plan)), (words.values,))

    return draw


def t_plan(rng: Rng, hand: Hand) -> tuple[Plan, int, int, float]:
    """A t test by d with a sample at hand: sizes and d."""
    while True:
        plan = (two_groups if rng.random() < 0.7 else pairs)(rng, hand)
        shown = plan.values.get("d") or plan.values.get("d_z")
        if shown is not None:
            each = int(rng.integers(8, 150))
            return plan, each, each * plan.groups, float(shown[1])


def power_of_t(plan: Plan, d: float, each: int) -> float:
    return by_noncentral_t(d, each, each if plan.groups == 2 else None, plan.alpha, plan.tails)


def achieved(rng: np.random.Generator) -> Sample:
    """The power of a given sample for an effect that may be printed rounded."""
    hand = draw_hand(rng)
    plan, each, total, d = t_plan(rng, hand)
    power = power_of_t(plan, d, each)
    if not 0.06 < power < 0.99:
        return achieved(rng)
    words = worded(rng, hand, plan, each, total, round(power, 2))
    effect = next(e for e in plan.effects if "d = " in e or "dz = " in e or "d_z" in e or " = " in e)
    number = (
        words.powerful.removeprefix("a power of ")
        .removeprefix("a statistical power of ")
        .removesuffix(" power")
    )
    text = one(rng, [
        f"Post hoc, the achieved power of {plan.test} was {number} ({effect}, {words.size}, {words.alpha}).",
        f"A post hoc power analysis ({effect}, {words.size}, {words.alpha}) yielded a power of {number} for {plan.test}.",
        f"With {words.size} the achieved power for {effect} was {number} in {plan.test} ({words.alpha}).",
    ])  # fmt: skip
    return Sample(text, (words.values,))


def detectable(rng: np.random.Generator) -> Sample:
    """The smallest effect that a given sample detects."""
    hand = draw_hand(rng)
    plan, each, total, _ = t_plan(rng, hand)
    if power_of_t(plan, 8.0, each) < plan.target:
        return detectable(rng)
    exact = float(optimize.brentq(lambda d: power_of_t(plan, d, each) - plan.target, 1e-6, 8.0))
    d = rounded(exact, 2)
    words = worded(rng, hand, plan, each, total)
    name = "d_z" if "d_z" in plan.values else "d"
    values: Mapping[str, Told] = {**words.values, name: told(d)}
    shown = f"{'dz' if name == 'd_z' else 'd'} = {hand.number(d)}"
    text = one(rng, [
        f"A sensitivity power analysis for {plan.test} ({words.alpha}, {words.power}, {words.size}) gave {shown}.",
        f"With {words.size}, the smallest detectable effect of {plan.test} was {shown} ({words.alpha}, {words.power}).",
        f"A sensitivity analysis showed that {words.size} can detect {shown} with {words.powerful} at {words.level} in {plan.test}.",
    ])  # fmt: skip
    return Sample(text, (values,))


def unequal(rng: np.random.Generator) -> Sample:
    """The power of two groups of different size, of which N alone is printed."""
    hand = draw_hand(rng)
    plan, each, _, d = t_plan(rng, hand)
    if plan.groups != 2:
        return unequal(rng)
    more = int(each * rng.uniform(1, 2.5))
    power = by_noncentral_t(d, each, more, plan.alpha, plan.tails)
    if not 0.06 < power < 0.99:
        return unequal(rng)
    words = worded(rng, hand, plan, each, each, round(power, 2))
    values = {name: number for name, number in words.values.items() if name not in ("n", "N")}
    number = (
        words.powerful.removeprefix("a power of ")
        .removeprefix("a statistical power of ")
        .removesuffix(" power")
    )
    total = each + more
    text = f"Post hoc, the achieved power of {plan.test} was {number} ({plan.effects[0]}, N = {total}, {words.alpha})."
    return Sample(text, ({**values, "N": told(Decimal(total))},))


HONEST_POWER: dict[str, Generator] = {
    **{f"power analysis: {name}": required(name) for name in PLANS},
    "power achieved": achieved, "effect detectable": detectable, "power of unequal groups": unequal,
}  # fmt: skip
