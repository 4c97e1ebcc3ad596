"""Misprints planted into intervals of effect sizes, each with a brute-force decision by scipy's distributions."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from decimal import Decimal

import numpy as np
from scipy import stats

from tests.soundness import computing, raw
from tests.soundness.honest_effects import lambda_chi2, lambda_F, noncentral
from tests.soundness.planted_tables import apart, box, misprint
from tests.soundness.rounding import rounded
from tests.soundness.samples import Sample

Rng = np.random.Generator
Planted = Callable[[Rng], tuple[Sample, bool]]
Ends = tuple[float, float]


def _misprinted(rng: Rng, ends: Ends, decimals: int = 2) -> tuple[list[Decimal], int] | None:
    """Both ends as printed, one of them with a digit wrong, and which; None where they would change places."""
    if not np.isfinite(ends).all():
        return None
    printed = [rounded(e, decimals) for e in ends]
    at = int(rng.integers(2))
    if not printed[at]:
        return None
    printed[at] = misprint(rng, printed[at])
    return (printed, at) if printed[0] < printed[1] else None


def _denied(printed: Decimal, ends: list[Ends], at: int) -> bool:
    """Tell whether a printed end shares nothing with the range of that end by any of the methods."""
    return all(apart(box(printed), low_or_high) for low_or_high in _ranges(ends, at))


def _ranges(ends: list[Ends], at: int) -> list[Ends]:
    """The range of one end from its values at the two ends of the box, method by method."""
    return [
        (min(first[at], second[at]), max(first[at], second[at]))
        for first, second in zip(ends[::2], ends[1::2], strict=True)
    ]


def interval_of_d(rng: Rng) -> tuple[Sample, bool]:
    """d of two groups with its exact or normal interval, a digit of one end wrong."""
    while True:
        a, b = raw.plain_groups(rng, 2, 8, 60)
        test = computing.t_test(a, b, pooled=True)
        n1, n2, d = len(a), len(b), test.effect / computing.pooled_sd(a, b)
        k, N = np.sqrt(1 / n1 + 1 / n2), n1 + n2

        def exact(x: float, k: float = k, N: int = N) -> Ends:
            low, high = noncentral(x / k, N - 2, 0.95)
            return low * k, high * k

        def normal(x: float, k: float = k, N: int = N) -> Ends:
            half = 1.959963984540054 * float(np.sqrt(k * k + x * x / (2 * N)))
            return x - half, x + half

        changed = _misprinted(rng, exact(d) if rng.random() < 0.5 else normal(d))
        if changed and float(changed[0][0]) < d < float(changed[0][1]):
            break
    (low, high), at = changed
    span = box(rounded(d, 2))
    ends = [method(x) for method in (exact, normal) for x in span]
    told = [
        f"(M = {rounded(float(g.mean()), 2)}, SD = {rounded(computing.sd(g), 2)}, n = {len(g)})"
        for g in (a, b)
    ]
    text = (
        f"Steamed loaves {told[0]} were compared with dry ones {told[1]}, t({N - 2}) = {rounded(test.value, 2)}, "
        f"d = {rounded(d, 2)}, 95% CI [{low}, {high}]."
    )
    return Sample(text), _denied(changed[0][at], ends, at)


def interval_of_eta2(rng: Rng) -> tuple[Sample, bool]:
    """Partial η² with its exact 90% interval, a digit of one end wrong."""
    while True:
        groups = raw.plain_groups(rng, 3, 10, 60)
        test = computing.one_way(groups)
        df1, df2 = test.df
        F = rounded(test.value, 2)

        def exact(x: float, df1: float = df1, df2: float = df2) -> Ends:
            low, high = (lambda_F(x, df1, df2, share) for share in (0.95, 0.05))
            return low / (low + df1 + df2 + 1), high / (high + df1 + df2 + 1)

        changed = _misprinted(rng, exact(test.value)) if 1 < test.value < 40 else None
        if changed and float(changed[0][1]) < 1:
            break
    (low, high), at = changed
    text = f"The flours differed, F({df1:.0f}, {df2:.0f}) = {F}, partial η² = {rounded(test.effect, 2)}, 90% CI [{low}, {high}]."
    return Sample(text), _denied(changed[0][at], [exact(x) for x in box(F)], at)


def interval_of_r(rng: Rng) -> tuple[Sample, bool]:
    """A correlation with its interval by Fisher's z, a digit of one end wrong."""
    while True:
        n = int(rng.integers(15, 150))
        x = rng.standard_normal((n, 2)) + rng.standard_normal((n, 1)) * 0.7
        found = stats.pearsonr(x[:, 0], x[:, 1])
        r, half = float(found.statistic), 1.959963984540054 / np.sqrt(n - 3)

        def fisher(x: float, half: float = half) -> Ends:
            return float(np.tanh(np.arctanh(x) - half)), float(np.tanh(np.arctanh(x) + half))

        changed = _misprinted(rng, fisher(r))
        if changed and -1 < float(changed[0][0]) < r < float(changed[0][1]) < 1:
            break
    (low, high), at = changed
    text = f"Height and crumb were related, r({n - 2}) = {rounded(r, 2)}, 95% CI [{low}, {high}]."
    return Sample(text), _denied(changed[0][at], [fisher(e) for e in box(rounded(r, 2))], at)


def interval_of_v(rng: Rng) -> tuple[Sample, bool]:
    """φ of a 2 x 2 table with its exact interval, a digit of one end wrong."""
    while True:
        N = int(rng.integers(60, 300))
        chi2 = float(stats.ncx2.rvs(1, float(rng.uniform(3, 25)), random_state=rng))

        def exact(x: float, N: int = N) -> Ends:
            low, high = (float(np.sqrt(lambda_chi2(x, 1, share) / N)) for share in (0.975, 0.025))
            return low, high

        changed = _misprinted(rng, exact(chi2)) if chi2 > 1 else None
        if changed and float(changed[0][1]) < 1:
            break
    (low, high), at = changed
    printed, phi = rounded(chi2, 2), rounded(float(np.sqrt(chi2 / N)), 2)
    text = f"Collapse differed between ovens, χ2(1, N = {N}) = {printed}, φ = {phi}, 95% CI [{low}, {high}]."
    return Sample(text), _denied(changed[0][at], [exact(x) for x in box(printed)], at)


EFFECT_PLANTS: Mapping[str, Planted] = {
    "CI of d: digit wrong": interval_of_d, "CI of η²: digit wrong": interval_of_eta2,
    "CI of r: digit wrong": interval_of_r, "CI of φ: digit wrong": interval_of_v,
}  # fmt: skip
