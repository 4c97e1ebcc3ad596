"""Checks of power statements: n, power and effect against each other."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace

from recheck.checks.compare import Comparison, judge, unchecked
from recheck.checks.power_designs import Effect, two_means
from recheck.checks.power_readings import Taken, exact, foreign, left_open, middle, tests_of, understandings
from recheck.checks.registry import Case, check
from recheck.model import Finding, Interval, Printed
from recheck.reconcile.readings import MOST_UNSTATED, Box, Way, box_of

METHODS = "noncentral t, F or χ², exact r or Fisher's z, the normal approximation with or without corrections, with both tails or one counted"
SOURCE = "Cohen (1988) Statistical Power Analysis for the Behavioral Sciences, 2nd ed.; Guenther (1981) American Statistician 35:243-244; Casagrande, Pike & Smith (1978) Biometrics 34:483-486"
LIMITS = (
    "Not for repeated measures with more than one score a unit, covariates, clusters, survival, equivalence, simulations or "
    "interim analyses. A sample larger than needed is no discrepancy."
)
MORE = "a sample larger than needed is no discrepancy"
ROUNDED_UP = 2
"""Cases a group that rounding up, up to an even number, or one case for safety add."""
PLANNED = {
    "alpha": Interval(0.0005, 0.1), "power": Interval(0.5, 0.999), "d": Interval(0.05, 2.5), "d_z": Interval(0.05, 2.5),
    "effect_size": Interval(0.05, 2.5), "f": Interval(0.03, 1.5), "f2": Interval(0.005, 1.5), "r": Interval(0.03, 0.95),
    "cohens_w": Interval(0.03, 2.0), "partial_eta2": Interval(0.001, 0.8),
}  # fmt: skip
"""What anybody plans with (common practice, no source): a misprint would have been of such a number."""
NO_SIZE = "no n that is said to be needed is printed with it"
MOST_GROUPS = 9
LOPSIDED = 3.0
"""How much larger one of two groups may honestly be where only N is printed (common practice, no source)."""
ALMOST_ONE = 1 - 1e-9


@check(
    "power-sample-size",
    title="n of a power analysis against its effect, level and power",
    kinds=("power",),
    quantity="n",
    needs=("power",),
    beside="an effect size (d, f, f², r, w), or a difference with its SD, or two proportions; a required n, of a group or in all",
    formula=f"the smallest n with P(reject | effect, n, α) ≥ power; {METHODS}",
    source=SOURCE,
    limits=LIMITS,
    agrees=(
        "A power analysis for an independent t test (d = 0.5, two-sided α = .05, power = .80) indicated 64 apprentices per group.",
        "To detect a difference of 0.7 SD with 80% power at the two-sided 5% level, 33 apprentices per arm (66 in total) were needed.",
        "A power analysis for a one-way ANOVA with three groups (f = 0.25, α = .05, 1 − β = .95) asked for a total sample of N = 252.",
    ),
    conditional=(
        "A power analysis for a t test (d = 0.5, α = .05, power = .80) indicated 51 apprentices per group.",
        "A power analysis for an independent t test (d = 0.5, two-sided α = .05, power = .80) indicated 64 apprentices in total.",
    ),
    inconsistent=(
        "A power analysis for an independent t test (d = 0.5, two-sided α = .05, power = .80) indicated 46 apprentices per group.",
    ),
    unchecked=(
        "A power analysis for a repeated-measures ANOVA (f = 0.25, α = .05, power = .80, three groups) indicated a total sample of N = 24.",
    ),
)
def sample_size(case: Case) -> Iterable[Finding]:
    """Compare a required n with the least that any of the usual methods asks for."""
    claim = case.claim
    if not claim.says("n-required"):
        return
    if not claim.values.keys() & {"n", "N"}:
        yield unchecked(case, "power-sample-size", "n", foreign(claim) or NO_SIZE)
        return
    yield _finding(case, "power-sample-size", "n" if "n" in claim.values else "N", _size_ways)


@check(
    "power-total",
    title="all cases of a power analysis against the cases of each group",
    kinds=("power",),
    quantity="N",
    needs=("power", "n", "N"),
    beside="the number of groups, or a test of two",
    formula="N = k n, k groups of n",
    source="by definition",
    limits="Never more than conditional: groups may be unequal, and N may allow for losses.",
    agrees=(
        "To detect d = 0.7 with 80% power in an independent t test, 33 apprentices per arm (66 in total) were needed.",
    ),
    conditional=(
        "To detect d = 0.7 with 80% power in an independent t test, 33 apprentices per arm (99 in total) were needed.",
    ),
)
def total(case: Case) -> Iterable[Finding]:
    """Compare the size of all groups together with the size of each."""
    values = case.claim.values
    k = int(values["k"].value) if "k" in values else 2
    numbers = {"n": values["n"], "N": values["N"]}

    def all_of(groups: int) -> Callable[[Box], tuple[Interval, ...]]:
        return lambda box: (Interval(groups * box["n"].low, groups * box["n"].high),)

    two = case.claim.says("t-test-named", "independent")
    ways = [Way(all_of(k), given=(f"{k} groups",), alone=True)]
    if "k" not in values:
        words = {m: (f"there are {m} groups",) for m in range(3, MOST_GROUPS)}
        ways += [
            Way(all_of(m), said, alone=True) if two else Way(all_of(m), given=said, alone=True)
            for m, said in words.items()
        ]
    doubts = ("the groups are equal, and N allows for no losses",)
    yield judge(case, Comparison("power-total", "N", numbers, ways, doubts=doubts))


@check(
    "power-achieved",
    title="power of a given sample against its n, effect and level",
    kinds=("power",),
    quantity="power",
    needs=("power",),
    beside="an effect size, or a difference with its SD, or two proportions; n of a group or in all",
    formula=f"power = P(reject | effect, n, α); {METHODS}",
    source=SOURCE,
    limits=LIMITS,
    agrees=(
        "Post hoc, the achieved power of the independent t test was .62 (d = 0.40, 64 apprentices per group, two-sided α = .05).",
    ),
    conditional=(
        "Post hoc, the achieved power of the independent t test was .73 (d = 0.40, 64 apprentices per group, α = .05).",
    ),
    inconsistent=(
        "Post hoc, the achieved power of the independent t test was .92 (d = 0.40, 64 apprentices per group, two-sided α = .05).",
    ),
    unchecked=(
        "The achieved power of the mixed model was .62 (d = 0.40, 64 apprentices per group, two-sided α = .05).",
    ),
)
def achieved_power(case: Case) -> Iterable[Finding]:
    """Compare a power that was computed for a sample at hand with what its n and the effect give."""
    if case.claim.says("power-achieved") and case.claim.values.keys() & {"n", "N"}:
        yield _finding(case, "power-achieved", "power", _power_ways)


@check(
    "power-detectable-effect",
    title="the effect that a given sample can detect against its n, level and power",
    kinds=("power",),
    quantity="d",
    needs=("power",),
    beside="an effect size; n of a group or in all",
    formula=f"the effect at which P(reject | effect, n, α) = power; {METHODS}",
    source=SOURCE,
    limits=LIMITS,
    agrees=(
        "A sensitivity power analysis for an independent t test (two-sided α = .05, power = .80, N = 60) gave d = 0.74.",
    ),
    conditional=(
        "A sensitivity power analysis for an independent t test (α = .05, power = .80, N = 60) gave d = 0.65.",
    ),
    inconsistent=(
        "A sensitivity power analysis for an independent t test (two-sided α = .05, power = .80, N = 60) gave d = 0.47.",
    ),
    unchecked=(
        "A sensitivity power analysis for an ANCOVA (two-sided α = .05, power = .80, N = 60) gave d = 0.63.",
    ),
)
def detectable_effect(case: Case) -> Iterable[Finding]:
    """Compare the smallest effect that a sample is said to detect with what its n and the power give."""
    claim = case.claim
    names = [name for name in ("d_z", "d", "f2", "f", "cohens_w", "r", "effect_size") if name in claim.values]
    if claim.says("effect-detectable") and names and claim.values.keys() & {"n", "N"}:
        yield _finding(case, "power-detectable-effect", names[0], _effect_ways)


Ways = Callable[[Taken, str, str, Box], Sequence[Way]]


def _finding(case: Case, name: str, quantity: str, ways: Ways) -> Finding:
    claim = case.claim
    reason = foreign(claim) or _size_missing(case)
    tests = tests_of(claim)
    if reason or isinstance(tests, str):
        return unchecked(case, name, quantity, reason or str(tests))
    size = "n" if "n" in claim.values else "N"
    used = dict.fromkeys(("alpha", "power", *tests[0].numbers, size))
    numbers: dict[str, Printed] = {key: exact(claim.values[key]) for key in used if key in claim.values}
    printed = box_of(numbers)
    followed = [
        _planned(way, printed)
        for taken in understandings(case, tests)
        for way in ways(taken, size, quantity, printed)
    ]
    doubts = left_open(case)
    if quantity not in ("n", "N") and size == "N" and tests[0].design.groups != 1 and not tests[0].two_means:
        doubts = (*doubts, "the groups are equal")
    return judge(case, Comparison(name, quantity, numbers, followed, doubts=doubts))


def _planned(way: Way, printed: Box) -> Way:
    """The same way, but for a corrected number that nobody plans with."""

    def implied(box: Box) -> tuple[Interval, ...]:
        changed = (name for name in PLANNED if name in box and box[name] != printed[name])
        return way.implied(box) if all(PLANNED[name].holds(middle(box[name])) for name in changed) else ()

    return replace(way, implied=implied)


def _size_missing(case: Case) -> str:
    """Why the printed size says nothing of a design."""
    ratio = case.claim.values.get("ratio")
    if "n" in case.claim.values and ratio is not None and ratio.value != 1:
        return "the groups are unequal, and the n of one of them is printed"
    return ""


def _share(interval: Interval) -> Interval:
    return interval.within(1e-9, ALMOST_ONE)


def _size_ways(taken: Taken, size: str, _: str, printed: Box) -> Sequence[Way]:
    """Any size that is large enough; only one that fits closely, where the text names another test or size."""
    design, times = taken.test.design, taken.times

    def least(box: Box) -> float:
        """The fewest cases; nan where the numbers are those of no plan."""
        effect, alpha, power = taken.effect(box), taken.level(box), _share(box["power"])
        if not _sensible(effect, alpha):
            return math.nan
        rounded, plain = design.fewest(effect, (power.low, middle(power)), alpha, taken.tails)
        nearest = plain - 0.5
        if not (math.isfinite(rounded) and math.isfinite(nearest)):
            return math.nan
        return math.ceil(max(min(rounded, nearest), 1.0) * times - 1e-9)

    def most(box: Box) -> float:
        found = design.n(taken.effect(box), middle(_share(box["power"])), taken.level(box), taken.tails).high
        return (math.ceil(found - 1e-9) + ROUNDED_UP) * times if math.isfinite(found) else math.nan

    def close(box: Box) -> tuple[Interval, ...]:
        low = least(box)
        high = math.nan if math.isnan(low) else most(box)
        return () if math.isnan(high) else (Interval(low, high),)

    def enough(box: Box) -> tuple[Interval, ...]:
        low = least(box)
        return () if math.isnan(low) else (Interval(low, math.inf),)

    if taken.close:
        return (Way(close, taken.unstated, taken.given, costly=True, alone=True),)
    low = least(printed)
    larger = not math.isnan(low) and middle(printed[size]) >= low and middle(printed[size]) > most(printed)
    return (Way(enough, taken.unstated, (*taken.given, MORE) if larger else taken.given, alone=True),)


def _sensible(effect: Effect, alpha: float) -> bool:
    return 0 < alpha < 1 and all(part >= 0 for part in effect) and any(effect)


def _power_ways(taken: Taken, size: str, _: str, __: Box) -> Sequence[Way]:
    """The power by every method; an effect that was rounded gives a range."""
    design = taken.test.design

    def implied(box: Box) -> tuple[Interval, ...]:
        n, alpha = middle(box[size]) / taken.times, taken.level(box)
        lows, highs = _ends(taken, box)
        if (n < 2 and design.groups != 1) or not all(_sensible(effect, alpha) for effect in (lows, highs)):
            return ()
        low, high = (design.power(effect, n, alpha, taken.tails) for effect in (lows, highs))
        ends = (low.low, high.high)
        return () if any(math.isnan(end) for end in ends) else (Interval(min(ends), max(ends)),)

    return _with_unequal(taken, implied, lambda one: _power_ways(one, size, "", {}))


def _ends(taken: Taken, box: Box) -> tuple[Effect, Effect]:
    """The effect as printed, twice; or the smallest and the largest that were rounded to it."""
    exact_, high = taken.test.effect(box)
    if not taken.rounded:
        return exact_, exact_
    mirrored = tuple(max(2 * value - end, 1e-9) for value, end in zip(exact_, high, strict=True))
    return mirrored, high


def _effect_ways(taken: Taken, size: str, quantity: str, _: Box) -> Sequence[Way]:
    """The detectable effect by every method, for all powers that round to the printed one."""
    design = taken.test.design
    if design.effect is None or taken.rounded:
        return ()
    detect = design.effect

    def implied(box: Box) -> tuple[Interval, ...]:
        n, power, alpha = middle(box[size]) / taken.times, _share(box["power"]), taken.level(box)
        ends = [detect((n,), end, alpha, taken.tails) for end in (power.low, power.high)]
        low, high = ends[0].low, ends[1].high
        if quantity == "f" or (quantity == "effect_size" and not design.sided and design.groups != 1):
            low, high = math.sqrt(low), math.sqrt(high)
        return () if math.isnan(low) or math.isnan(high) else (Interval(low, high),)

    return _with_unequal(taken, implied, lambda one: _effect_ways(one, size, quantity, {}))


Implied = Callable[[Box], tuple[Interval, ...]]


def _with_unequal(taken: Taken, implied: Implied, again: Callable[[Taken], Sequence[Way]]) -> Sequence[Way]:
    """The way itself; where N is that of two groups of any size, also all between equal groups and `LOPSIDED` to one."""
    plain = Way(implied, taken.unstated, taken.given, alone=True)
    if taken.times != 2 or not taken.test.two_means or len(taken.unstated) >= MOST_UNSTATED:
        return (plain,)
    test = replace(taken.test, design=two_means(LOPSIDED), two_means=False)
    (other,) = again(replace(taken, test=test, times=1 + LOPSIDED))

    def between(box: Box) -> tuple[Interval, ...]:
        ends = (*implied(box), *other.implied(box))
        return (Interval(min(end.low for end in ends), max(end.high for end in ends)),) if ends else ()

    unequal = (*taken.unstated, f"the groups are unequal, up to {LOPSIDED:g} to 1")
    return (plain, Way(between, unequal, taken.given, costly=True, alone=True))
