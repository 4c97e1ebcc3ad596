"""Misprints in tests of ranks, of variances, of one sample and of pairs, each with the brute-force decision on it."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal

import numpy as np
from scipy import optimize, special, stats

from tests.soundness import computing, raw
from tests.soundness.honest_designs import whole_or_half
from tests.soundness.planted_tables import Planted, Range, Rng, apart, box, misprint
from tests.soundness.rounding import rounded
from tests.soundness.samples import Sample


def figures(x: raw.Values) -> tuple[Decimal, Decimal]:
    """Mean and SD to two decimals."""
    return rounded(float(x.mean()), 2), rounded(computing.sd(x), 2)


def pair_of(rng: Rng) -> tuple[raw.Values, raw.Values, float, str]:
    """Two groups, their U, and a sentence about them that lacks its result."""
    a, b = (np.round(x, 3) for x in raw.plain_groups(rng, 2, 8, 40))
    u = float(stats.mannwhitneyu(a, b, method="asymptotic").statistic)
    told = [f"Mdn = {rounded(float(np.median(x)), 1)}, n = {len(x)}" for x in (a, b)]
    return (
        a,
        b,
        u,
        f"By the Mann-Whitney test rye loaves ({told[0]}) and wheat loaves ({told[1]}) differed or did not",
    )


def u_beyond(rng: Rng) -> tuple[Sample, bool]:
    """U of a larger comparison, beyond the product of both sizes."""
    a, b, _, text = pair_of(rng)
    u = len(a) * len(b) + int(rng.integers(1, 400))
    return Sample(f"{text}, U = {u}, p = .03."), True


def w_beyond(rng: Rng) -> tuple[Sample, bool]:
    """W of signed ranks beyond the sum of all ranks."""
    n = int(rng.integers(6, 40))
    w = n * (n + 1) // 2 + int(rng.integers(1, 200))
    return Sample(f"Bench scores rose (Wilcoxon signed-rank test, W = {w}, n = {n}, p = .02)."), True


def least_z(u: Decimal, n1: int, n2: int) -> float:
    """The least |z| that goes with U: no ties, corrected for continuity."""
    low, high = box(u)
    middle = n1 * n2 / 2
    near = 0.0 if low <= middle <= high else min(abs(low - middle), abs(high - middle))
    return float(max(near - 0.5, 0.0) / np.sqrt(n1 * n2 * (n1 + n2 + 1) / 12))


def z_misprinted(rng: Rng) -> tuple[Sample, bool]:
    """z of U with one misprint."""
    a, b, u, text = pair_of(rng)
    away = u - len(a) * len(b) / 2
    true = away / np.sqrt(len(a) * len(b) * (len(a) + len(b) + 1) / 12)
    z, shown = misprint(rng, abs(rounded(float(true), 2))), whole_or_half(u)
    # No ties make |z| larger than √(N − 1), where it is √(N − 1) times a correlation.
    wrong = box(z)[1] < least_z(shown, len(a), len(b)) - 1e-9 or box(z)[0] > np.sqrt(len(a) + len(b) - 1)
    return Sample(f"{text}, U = {shown}, z = {z}."), bool(wrong)


def p_too_large(rng: Rng) -> tuple[Sample, bool]:
    """p of another comparison beside a U that is far out."""
    a, b, _, text = pair_of(rng)
    n1, n2 = len(a), len(b)
    u = Decimal(int(n1 * n2 * rng.uniform(0.02, 0.15)))
    p = rounded(float(rng.uniform(0.3, 0.9)), 2)
    bound = 1 / max(least_z(u, n1, n2), 1e-9) ** 2
    return Sample(f"{text}, U = {u}, p = {p}."), bool(box(p)[0] > bound)


def described(groups: list[raw.Values]) -> str:
    told = [f"{name} loaves (M = {m}, SD = {s}, n = {len(x)})" for name, x, (m, s) in zip(("Rye", "wheat", "spelt"), groups, map(figures, groups), strict=False)]  # fmt: skip
    return ", ".join(told[:-1]) + f" and {told[-1]}"


def ratio_misprinted(rng: Rng) -> tuple[Sample, bool]:
    """The F ratio of two variances with one misprint."""
    groups = raw.plain_groups(rng, 2, 8, 60)
    (_, s1), (_, s2) = map(figures, groups)
    F = misprint(rng, rounded(computing.sd(groups[0]) ** 2 / computing.sd(groups[1]) ** 2, 2))
    text = f"{described(groups)} had equal variances, F({len(groups[0]) - 1}, {len(groups[1]) - 1}) = {F}."
    ends = [(box(s1)[i] / box(s2)[1 - i]) ** 2 for i in (0, 1)]
    inverse = (box(s2)[0] / box(s1)[1]) ** 2, (box(s2)[1] / box(s1)[0]) ** 2
    wrong = apart(box(F), (ends[0], ends[1]))
    return Sample(text), wrong and not (len(groups[0]) == len(groups[1]) and not apart(box(F), inverse))


def bartlett_range(sds: list[Range], ns: list[int]) -> Range:
    """The range of Bartlett's statistic by bounded searches from many starts."""
    n = np.array(ns, dtype=float)
    k, within = len(ns), n.sum() - len(ns)
    correction = 1 + (np.sum(1 / (n - 1)) - 1 / within) / (3 * (k - 1))

    def K2(logs: np.ndarray) -> float:
        pooled = float(np.sum((n - 1) * np.exp(2 * logs)) / within)
        return float((within * np.log(pooled) - np.sum((n - 1) * 2 * logs)) / correction)

    limits = [(np.log(low), np.log(high)) for low, high in sds]
    starts = [np.array([limit[(at >> i) & 1] for i, limit in enumerate(limits)]) for at in range(2**k)]
    least = min(optimize.minimize(K2, x, bounds=limits).fun for x in starts)
    return float(least) - 1e-6, max(map(K2, starts)) + 1e-9


def bartlett_misprinted(rng: Rng) -> tuple[Sample, bool]:
    """Bartlett's K² with one misprint."""
    groups = raw.plain_groups(rng, int(rng.integers(2, 4)), 8, 60)
    K2 = misprint(rng, rounded(float(stats.bartlett(*groups).statistic), 2))
    text = f"{described(groups)} had equal variances (Bartlett's test, χ²({len(groups) - 1}) = {K2})."
    return Sample(text), apart(
        box(K2), bartlett_range([box(figures(x)[1]) for x in groups], [len(x) for x in groups])
    )


def t_range(mean: Decimal, sd: Decimal, n: int, value: float) -> Range:
    """|t| of one sample at the corners."""
    ends = [(m - value) / (s / np.sqrt(n)) for m in box(mean) for s in box(sd)]
    low, high = min(map(abs, ends)), max(map(abs, ends))
    return (0.0 if min(ends) < 0 < max(ends) else low), high


def one_sample_misprinted(rng: Rng) -> tuple[Sample, bool]:
    """t of one sample against a named value with one misprint in t."""
    (x,) = raw.plain_groups(rng, 1, 8, 60)
    mean, sd = figures(x)
    value = Decimal(int(np.round(x.mean() + rng.normal() * computing.sd(x))))
    n, t = len(x), misprint(rng, abs(rounded(computing.one_sample(x, float(value)).value, 2)))
    text = f"In a one-sample t test bench scores (M = {mean}, SD = {sd}, n = {n}) differed from the target of {value}, t({n - 1}) = {t}."
    return Sample(text), apart(box(t), t_range(mean, sd, n, float(value)))


def paired_misprinted(rng: Rng) -> tuple[Sample, bool]:
    """t of pairs beside mean and SD of the differences with one misprint in t."""
    x = raw.repeated(rng, int(rng.integers(8, 60)), 2)
    gaps = x[:, 0] - x[:, 1]
    if computing.sd(gaps) < 0.05:
        return paired_misprinted(rng)
    mean, sd = figures(gaps)
    n, t = len(gaps), misprint(rng, abs(rounded(computing.one_sample(gaps).value, 2)))
    text = f"Bench scores changed in a paired t test (mean difference = {mean}, SD = {sd}, n = {n}), t({n - 1}) = {t}."
    return Sample(text), apart(box(t), t_range(mean, sd, n, 0.0))


def slope_misprinted(rng: Rng) -> tuple[Sample, bool]:
    """b of two groups with one misprint."""
    groups = raw.plain_groups(rng, 2, 8, 60)
    (m1, s1), (m2, s2) = map(figures, groups)
    test = computing.t_test(groups[0], groups[1], pooled=True)
    b, n = misprint(rng, abs(rounded(test.effect, 2))), [len(x) for x in groups]
    text = f"Rye loaves (M = {m1}, SD = {s1}, n = {n[0]}) and wheat loaves (M = {m2}, SD = {s2}, n = {n[1]}) differed or did not, b = {b}, t({sum(n) - 2}) = {abs(rounded(test.value, 2))}."
    gap = sorted(abs(x - y) for x in box(m1) for y in box(m2))
    implied = (0.0 if m1 == m2 else gap[0], gap[-1])
    return Sample(text), apart(box(b), implied) and apart(box(b), (implied[0] / 2, implied[1] / 2))


def p_of_ratio(rng: Rng) -> tuple[Sample, bool]:
    """p of a ratio of two variances with one misprint."""
    n1, n2 = (int(n) for n in rng.integers(8, 60, 2))
    F = rounded(float(stats.f.rvs(n1 - 1, n2 - 1, random_state=rng)), 2)
    upper = [float(special.fdtrc(n1 - 1, n2 - 1, end)) for end in box(F)]
    p = misprint(rng, rounded(2 * min(upper[0], 1 - upper[0]), 3))
    if p > 1 or not F or min(upper[0], 1 - upper[1]) < 0.001:
        return p_of_ratio(rng)
    text = f"The variances of both ovens differed or did not, F({n1 - 1}, {n2 - 1}) = {F}, p = {p}."
    two = sorted(2 * min(tail, 1 - tail) for tail in upper)
    two_sided = (two[0], 1.0 if upper[1] <= 0.5 <= upper[0] else two[1])
    return Sample(text), apart(box(p), two_sided) and apart(box(p), (upper[1], upper[0]))


DESIGN_PLANTS: Mapping[str, Planted] = {
    "U beyond n1 n2": u_beyond, "W beyond all ranks": w_beyond, "U: z misprint": z_misprinted, "U: p too large": p_too_large,
    "F of variances: misprint": ratio_misprinted, "Bartlett: misprint": bartlett_misprinted,
    "one sample: t misprint": one_sample_misprinted, "paired difference: t misprint": paired_misprinted,
    "F of variances: p misprint": p_of_ratio, "slope of two groups: b misprint": slope_misprinted,
}  # fmt: skip
