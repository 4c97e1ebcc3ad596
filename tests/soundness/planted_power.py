"""Power statements with something wrong, each with the decision whether any usual method gives what is printed."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping

import numpy as np
from scipy import optimize

from tests.soundness.hand import Hand, draw_hand
from tests.soundness.honest_power import REQUIRED, Words, lone_effect, power_of_t, t_plan, worded
from tests.soundness.power_plans import PLANS, Plan, Rng, by_noncentral_t, first_whole, two_groups
from tests.soundness.rounding import rounded
from tests.soundness.samples import Sample

Planted = Callable[[Rng], tuple[Sample, bool]]


def said_in_full(rng: Rng, hand: Hand, name: str) -> Plan:
    """A plan whose printed n will say all that matters: only such can be contradicted."""
    while True:
        plan = PLANS[name](rng, hand)
        if plan.target <= 0.95 and (math.isnan(plan.about) or plan.about > 12):
            return plan


def written(rng: Rng, hand: Hand, plan: Plan, each: int) -> tuple[Sample, Words]:
    """The statement with a size of each group; drawn again until the tails are said."""
    while True:
        words = worded(rng, hand, plan, each, each * plan.groups)
        if not plan.sided or "sided" in words.alpha + words.level or "tailed" in words.alpha + words.level:
            break
    template = REQUIRED[int(rng.integers(5))]
    return Sample(template(plan, words, lone_effect(rng, plan)), (words.values,)), words


def needed(plan: Plan) -> float:
    """The least size of a group that any method gives: the normal approximation's, or the exact one's."""
    if not math.isnan(plan.about):
        return plan.about if math.isnan(plan.least) else plan.least
    return first_whole(plan.power_of, plan.target - 0.005, 4 if plan.groups > 1 else 12) - 1.5


def too_few(name: str) -> Planted:
    """An n that is 20 to 50% too small."""

    def draw(rng: Rng) -> tuple[Sample, bool]:
        hand = draw_hand(rng)
        plan = said_in_full(rng, hand, name)
        each = max(int(needed(plan) * rng.uniform(0.5, 0.8)), 3)
        return written(rng, hand, plan, each)[0], each < 0.85 * needed(plan) - 1

    return draw


def one_tailed_n(rng: Rng) -> tuple[Sample, bool]:
    """The n of the one-sided test beside the words of the two-sided one."""
    hand = draw_hand(rng)
    plan = said_in_full(rng, hand, "t")
    while plan.tails == 1:
        plan = said_in_full(rng, hand, "t")
    one_sided = first_whole(lambda n: _one_sided(plan, n), plan.target, 3)
    sample, _ = written(rng, hand, plan, one_sided)
    return sample, one_sided < 0.97 * needed(plan) - 1


def _one_sided(plan: Plan, n: float) -> float:
    """The same test with one tail."""
    shown = plan.values.get("d")
    d = float(shown[1]) if shown else float(plan.values["mean_difference"][1] / plan.values["sd"][1])
    return by_noncentral_t(d, n, n, plan.alpha, 1)


def group_for_total(rng: Rng) -> tuple[Sample, bool]:
    """The n of each group printed as that of all."""
    hand = draw_hand(rng)
    plan = said_in_full(rng, hand, "t")
    each = first_whole(plan.power_of, plan.target, 3)
    while True:
        words = worded(rng, hand, plan, each, each)
        if "N" in words.values:
            break
    return Sample(REQUIRED[0](plan, words, lone_effect(rng, plan)), (words.values,)), True


def another_effect(rng: Rng) -> tuple[Sample, bool]:
    """A large effect's n beside a smaller effect."""
    hand = draw_hand(rng)
    plan = two_groups(rng, hand)
    while "d" not in plan.values or float(plan.values["d"][1]) > 0.8 or plan.about < 12:
        plan = two_groups(rng, hand)
    each = max(math.ceil(needed(plan) / 1.5**2), 3)
    return written(rng, hand, plan, each)[0], each < 0.9 * needed(plan) - 1


def wrong_power(rng: Rng) -> tuple[Sample, bool]:
    """An achieved power that is off by a tenth or more."""
    hand = draw_hand(rng)
    plan, each, total, d = t_plan(rng, hand)
    power = power_of_t(plan, d, each)
    off = power + float(rng.choice([-1, 1])) * rng.uniform(0.1, 0.3)
    if not 0.07 < off < 0.98 or each < 15:
        return wrong_power(rng)
    words = worded(rng, hand, plan, each, total, round(off, 2))
    number = (
        words.powerful.removeprefix("a power of ")
        .removeprefix("a statistical power of ")
        .removesuffix(" power")
    )
    text = f"Post hoc, the achieved power of {plan.test} was {number} ({plan.effects[0]}, {words.size}, {words.alpha})."
    unit = 10.0 ** plan.values.get("d", plan.values.get("d_z", ("", rounded(d, 2))))[1].as_tuple().exponent
    ends = sorted(power_of_t(plan, max(d + half * unit, 1e-3), each) for half in (-0.5, 0.5))
    return Sample(text, (words.values,)), off < ends[0] - 0.02 or off > ends[1] + 0.02


def wrong_effect(rng: Rng) -> tuple[Sample, bool]:
    """A detectable effect that is a fifth to a half off."""
    hand = draw_hand(rng)
    plan, each, total, _ = t_plan(rng, hand)
    if power_of_t(plan, 8.0, each) < plan.target or each < 15:
        return wrong_effect(rng)
    exact = float(optimize.brentq(lambda d: power_of_t(plan, d, each) - plan.target, 1e-6, 8.0))
    d = rounded(exact * float(rng.choice([rng.uniform(0.5, 0.8), rng.uniform(1.25, 2)])), 2)
    words = worded(rng, hand, plan, each, total)
    name = "d_z" if "d_z" in plan.values else "d"
    shown = f"{'dz' if name == 'd_z' else 'd'} = {hand.number(d)}"
    text = f"A sensitivity power analysis for {plan.test} ({words.alpha}, {words.power}, {words.size}) gave {shown}."
    return Sample(text, ({**words.values, name: ("=", d)},)), abs(float(d) - exact) > 0.05 + 0.1 * exact


POWER_PLANTS: Mapping[str, Planted] = {
    **{f"power, {name}: n too small": too_few(name) for name in PLANS},
    "power, t: one-tailed n": one_tailed_n, "power, t: n of a group as total": group_for_total,
    "power, t: n of another effect": another_effect, "power achieved: wrong": wrong_power, "effect detectable: wrong": wrong_effect,
}  # fmt: skip
"""Each gives a text and whether the planted error shows."""


def drawn(name: str, seed: int) -> tuple[Sample, bool]:
    """One text with one error."""
    return POWER_PLANTS[name](np.random.default_rng([23, seed]))
