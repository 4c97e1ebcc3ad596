"""Power analyses as programs do them, by scipy.stats alone, and the ways in which authors write them down."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal

import numpy as np
from scipy import stats

from tests.soundness.hand import Hand, one
from tests.soundness.samples import Told

Rng = np.random.Generator
ALPHAS = (0.05, 0.05, 0.05, 0.05, 0.01, 0.025, 0.1, 0.001)
POWERS = (0.8, 0.8, 0.8, 0.9, 0.95, 0.85, 0.99, 0.7)


@dataclass(frozen=True, slots=True)
class Plan:
    """A test with its assumed effect: what was decided before n was looked for.

    `power_of` gives the power for a size of one group (of all cases where `groups` is 1), `about` the
    size by the normal approximation where there is one, `least` the smallest of several. `effects` is how it is printed, with its numbers.
    """

    test: str
    groups: int
    sided: bool
    tails: int
    alpha: float
    target: float
    power_of: Callable[[float], float]
    about: float
    effects: tuple[str, ...]
    values: dict[str, Told]
    least: float = math.nan


def by_noncentral_t(
    d: float, n1: float, n2: float | None, alpha: float, tails: int, far: bool = True
) -> float:
    """Power of a t test of one or two groups."""
    df = n1 - 1 if n2 is None else n1 + n2 - 2
    shift = d * math.sqrt(n1 if n2 is None else n1 * n2 / (n1 + n2))
    critical = stats.t.isf(alpha / tails, df)
    power = float(stats.nct.sf(critical, df, shift))
    if tails == 2 and far:
        other = float(stats.nct.cdf(-critical, df, shift))
        power += other if math.isfinite(other) else 0.0
    return power


def by_noncentral_F(f2: float, N: float, df1: int, parameters: int, alpha: float) -> float:
    """Power of an F test of fixed effects."""
    df2 = N - parameters
    return float(stats.ncf.sf(stats.f.isf(alpha, df1, df2), df1, df2, f2 * N))


def first_whole(power_of: Callable[[float], float], target: float, least: int) -> int:
    """The smallest whole number with the power."""
    high = max(least, 2)
    while power_of(high) < target:
        high *= 2
    low = max(least - 1, high // 2)
    while high - low > 1:
        middle = (low + high) // 2
        low, high = (low, middle) if power_of(middle) >= target else (middle, high)
    return high


def z_sum(plan_alpha: float, target: float, tails: int) -> float:
    """Sum of the normal quantiles of alpha and of the power."""
    return float(stats.norm.isf(plan_alpha / tails) + stats.norm.ppf(target))


def drawn(rng: Rng) -> tuple[int, float, float]:
    """Tails, alpha and power."""
    tails = 1 if rng.random() < 0.2 else 2
    return tails, float(rng.choice(ALPHAS)), float(rng.choice(POWERS))


def told(value: Decimal) -> Told:
    """A number as printed."""
    return "=", value


def two_groups(rng: Rng, hand: Hand) -> Plan:
    """The independent t test, by d or by a difference and its SD."""
    tails, alpha, target = drawn(rng)
    d = (
        Decimal(int(rng.integers(20, 130))).scaleb(-2)
        if rng.random() < 0.5
        else Decimal(int(rng.integers(2, 13))).scaleb(-1)
    )
    number = hand.number(d)
    symbol = hand.symbol("d") if hand.letters != "tex" else "d"
    effects: tuple[str, ...] = (
        f"{symbol} = {number}", f"Cohen's d of {number}", f"an effect size of d = {number}", f"a standardised mean difference of {number}",
        f"a difference of {number} SD", f"an effect of {number} standard deviations", f"an effect size (Cohen's d) of {number}",
    )  # fmt: skip
    values = {"d": told(d)}
    size = float(d)
    if rng.random() < 0.35:
        gap, sd = Decimal(int(rng.integers(2, 20))), Decimal(int(rng.integers(5, 40)))
        while not 0.2 <= gap / sd <= 1.3:
            gap, sd = Decimal(int(rng.integers(2, 20))), Decimal(int(rng.integers(5, 40)))
        effects = (
            f"a mean difference of {gap} mm (SD {sd} mm)", f"a difference of {gap} points between the groups with a standard deviation of {sd} points",
            f"a mean difference of {gap} mm and an SD of {sd} mm", f"a difference in height of {gap} mm, assuming a common SD of {sd} mm",
        )  # fmt: skip
        values, size = {"mean_difference": told(gap), "sd": told(sd)}, float(gap) / float(sd)
    test = one(rng, ["an independent-samples t test", "a two-sample t test", "an unpaired t-test", "Student's t test of two independent groups", "an independent t-test"])  # fmt: skip
    far = rng.random() < 0.7
    return Plan(
        test, 2, True, tails, alpha, target, lambda n: by_noncentral_t(size, n, n, alpha, tails, far),
        2 * (z_sum(alpha, target, tails) / size) ** 2, effects, values,
    )  # fmt: skip


def pairs(rng: Rng, hand: Hand) -> Plan:
    """The paired t test by d_z, or a one-sample test by d."""
    tails, alpha, target = drawn(rng)
    d = Decimal(int(rng.integers(20, 110))).scaleb(-2)
    number, size = hand.number(d), float(d)
    if rng.random() < 0.6:
        test = one(rng, ["a paired t test", "a paired-samples t-test", "a t test of dependent samples"])
        effects, values = (f"dz = {number}", f"an effect of d_z = {number}"), {"d_z": told(d)}
    else:
        test = one(rng, ["a one-sample t test", "a single-sample t-test"])
        effects, values = (f"d = {number}", f"an effect size of d = {number}"), {"d": told(d)}
    return Plan(
        test, 1, True, tails, alpha, target, lambda n: by_noncentral_t(size, n, None, alpha, tails),
        (z_sum(alpha, target, tails) / size) ** 2, effects, values,
    )  # fmt: skip


def several_groups(rng: Rng, hand: Hand) -> Plan:
    """One-way analysis of variance by Cohen's f or η²."""
    _, alpha, target = drawn(rng)
    k = int(rng.integers(3, 6))
    word = one(rng, [str(k), ["three", "four", "five"][k - 3]])
    test = one(
        rng, [f"a one-way ANOVA with {word} groups", f"a one-way between-subjects ANOVA ({word} groups)"]
    )
    f = Decimal(int(rng.integers(10, 60))).scaleb(-2)
    number = hand.number(f)
    return Plan(
        test, k, False, 2, alpha, target, lambda n: by_noncentral_F(float(f) ** 2, n * k, k - 1, k, alpha), math.nan,
        (f"f = {number}", f"an effect size of f = {number}", f"Cohen's f of {number}"), {"f": told(f)},
    )  # fmt: skip


def predictors(rng: Rng, hand: Hand) -> Plan:
    """Multiple regression by f²."""
    _, alpha, target = drawn(rng)
    p = int(rng.integers(2, 9))
    f2 = Decimal(int(rng.integers(3, 40))).scaleb(-2)
    number = hand.number(f2)
    return Plan(
        f"a multiple regression with {p} predictors", 1, False, 2, alpha, target,
        lambda N: by_noncentral_F(float(f2), N, p, p + 1, alpha) if p + 1 < N else 0.0, math.nan,
        (f"f² = {number}", f"an effect of f2 = {number}"), {"f2": told(f2)},
    )  # fmt: skip


def correlated(rng: Rng, hand: Hand) -> Plan:
    """A correlation, by Fisher's z or by the t of a fixed predictor."""
    tails, alpha, target = drawn(rng)
    r = Decimal(int(rng.integers(10, 65))).scaleb(-2)
    rho = float(r)
    fixed = rho / math.sqrt(1 - rho * rho)

    def power_of(n: float) -> float:
        critical = stats.t.isf(alpha / tails, n - 2)
        return float(stats.nct.sf(critical, n - 2, fixed * math.sqrt(n)))

    about = (z_sum(alpha, target, tails) / math.atanh(rho)) ** 2 + 3
    number = hand.number(r, True)
    return Plan(
        one(rng, ["a Pearson correlation", "the correlation of height and crumb score"]), 1, True, tails, alpha, target,
        power_of, about, (f"r = {number}", f"a correlation of {number}", f"a correlation of r = {number}"), {"r": told(r)},
    )  # fmt: skip


def tables(rng: Rng, hand: Hand) -> Plan:
    """A χ² test by Cohen's w."""
    _, alpha, target = drawn(rng)
    df = int(rng.integers(1, 6))
    w = Decimal(int(rng.integers(10, 60))).scaleb(-2)
    critical = stats.chi2.isf(alpha, df)
    return Plan(
        f"a chi-square test (df = {df})", 1, False, 2, alpha, target,
        lambda N: float(stats.ncx2.sf(critical, df, N * float(w) ** 2)), math.nan,
        (f"w = {hand.number(w)}",), {"cohens_w": told(w)},
    )  # fmt: skip


def shares(rng: Rng, hand: Hand) -> Plan:
    """Two proportions by one of the approximations; with continuity correction, or exact, n is larger."""
    tails, alpha, target = drawn(rng)
    first, second = (int(x) for x in rng.choice(np.arange(5, 96, 5), 2, replace=False))
    p1, p2 = first / 100, second / 100
    za, zb = float(stats.norm.isf(alpha / tails)), float(stats.norm.ppf(target))
    mean = (p1 + p2) / 2
    pooled, apart = 2 * mean * (1 - mean), p1 * (1 - p1) + p2 * (1 - p2)
    h = 2 * math.asin(math.sqrt(p1)) - 2 * math.asin(math.sqrt(p2))
    formulas = (
        (za * math.sqrt(pooled) + zb * math.sqrt(apart)) ** 2 / (p1 - p2) ** 2,
        (za + zb) ** 2 * apart / (p1 - p2) ** 2,
        (za + zb) ** 2 * pooled / (p1 - p2) ** 2,
        2 * ((za + zb) / h) ** 2,
    )
    about = formulas[int(rng.integers(4))]
    if rng.random() < 0.3:
        about = about / 4 * (1 + math.sqrt(1 + 4 / (about * abs(p1 - p2)))) ** 2
    return Plan(
        one(rng, ["a chi-square test of two proportions", "the comparison of two proportions"]), 2, True, tails, alpha, target,
        lambda n: float(n >= about), about,
        (f"{first}% against {second}% split loaves", f"a change in the rate of splits from {first}% to {second}%",
         f"a success rate of {first}% in the steam group and {second}% in the dry group"),
        {"proportion1": told(Decimal(first)), "proportion2": told(Decimal(second))},
        min(formulas),
    )  # fmt: skip


PLANS = {
    "t": two_groups, "paired t": pairs, "F": several_groups, "regression": predictors, "r": correlated, "χ²": tables,
    "proportions": shares,
}  # fmt: skip
