"""The designs of power analyses: what n, power or effect each of the usual methods gives.

The computing is imported when a design is first asked: few manuscripts have a power statement.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from typing import SupportsFloat

from recheck.model import Interval

Effect = tuple[float, ...]
Sized = Callable[[Effect, float, float, int], Interval]
"""(effect, power or n, alpha, tails) to the smallest and the largest value that the usual methods give."""
Fewest = Callable[[Effect, Sequence[float], float, int], tuple[float, ...]]
"""(effect, powers, alpha, tails) to the smallest n that any of the usual methods asks for, for each power."""


@dataclass(frozen=True, slots=True)
class PowerDesign:
    """A test whose power can be rebuilt from an effect size.

    Sizes are those of one group (of all cases where `groups` is 1); all groups together have `groups` times as
    many, which for unequal groups is the sum of the ratios. `fewest` is the quick lower end of `n`; `effect` is
    None where no single number is the effect.
    """

    words: str
    groups: float
    sided: bool
    fewest: Fewest
    n: Sized
    power: Sized
    effect: Sized | None


def _hull(*values: float) -> Interval:
    return Interval(min(values), max(values))


def _each(values: Iterable[SupportsFloat]) -> tuple[float, ...]:
    return tuple(float(value) for value in values)


def two_means(ratio: float = 1.0) -> PowerDesign:
    """The t test of two independent groups, the second `ratio` times as large; the effect is d."""

    def fewest(effect: Effect, powers: Sequence[float], alpha: float, tails: int) -> tuple[float, ...]:
        from recheck.recompute.power.normal import normal_n

        return _each(normal_n(effect[0], powers, alpha, ratio=ratio, tails=tails))

    def n(effect: Effect, power: float, alpha: float, tails: int) -> Interval:
        from recheck.recompute.power.t_tests import two_sample_t_n

        exact = float(two_sample_t_n(effect[0], power, alpha, ratio=ratio, tails=tails))
        return _hull(*fewest(effect, (power,), alpha, tails), exact)

    def power(effect: Effect, n: float, alpha: float, tails: int) -> Interval:
        from recheck.recompute.power.normal import z_power
        from recheck.recompute.power.t_tests import two_sample_t_power

        shift = effect[0] * (n * ratio / (1 + ratio)) ** 0.5
        exact = (
            float(two_sample_t_power(effect[0], n, n * ratio, alpha, tails=tails, far_tail=far))
            for far in (True, False)
        )
        return _hull(*exact, float(z_power(shift, alpha, tails=tails)))

    def detectable(_: Effect, power: float, alpha: float, tails: int, n: float) -> Interval:
        from recheck.recompute.power.normal import z_shift
        from recheck.recompute.power.t_tests import two_sample_t_detectable

        exact = float(two_sample_t_detectable(n, n * ratio, power, alpha, tails=tails))
        return _hull(exact, float(z_shift(power, alpha, tails=tails)) * ((1 + 1 / ratio) / n) ** 0.5)

    return PowerDesign("two independent groups", 1 + ratio, True, fewest, n, power, _at(detectable))


def one_mean(words: str) -> PowerDesign:
    """The t test of one group, or of the differences of pairs; the effect is d or d_z."""

    def fewest(effect: Effect, powers: Sequence[float], alpha: float, tails: int) -> tuple[float, ...]:
        from recheck.recompute.power.normal import normal_n_one_sample

        return _each(normal_n_one_sample(effect[0], powers, alpha, tails=tails))

    def n(effect: Effect, power: float, alpha: float, tails: int) -> Interval:
        from recheck.recompute.power.t_tests import one_sample_t_n

        exact = float(one_sample_t_n(effect[0], power, alpha, tails=tails))
        return _hull(*fewest(effect, (power,), alpha, tails), exact)

    def power(effect: Effect, n: float, alpha: float, tails: int) -> Interval:
        from recheck.recompute.power.normal import z_power
        from recheck.recompute.power.t_tests import one_sample_t_power

        exact = (
            float(one_sample_t_power(effect[0], n, alpha, tails=tails, far_tail=far)) for far in (True, False)
        )
        return _hull(*exact, float(z_power(effect[0] * n**0.5, alpha, tails=tails)))

    def detectable(_: Effect, power: float, alpha: float, tails: int, n: float) -> Interval:
        from recheck.recompute.power.normal import z_shift
        from recheck.recompute.power.t_tests import one_sample_t_detectable

        exact = float(one_sample_t_detectable(n, power, alpha, tails=tails))
        return _hull(exact, float(z_shift(power, alpha, tails=tails)) / n**0.5)

    return PowerDesign(words, 1.0, True, fewest, n, power, _at(detectable))


def _at(detectable: Callable[[Effect, float, float, int, float], Interval]) -> Sized:
    """The effect that n cases detect, as a function of (n,), power, alpha and tails."""

    def effect(n: Effect, power: float, alpha: float, tails: int) -> Interval:
        return detectable((), power, alpha, tails, n[0])

    return effect


def linear_model(words: str, df1: int, parameters: int, groups: int) -> PowerDesign:
    """An F test of fixed effects; the effect is f². Sizes are those of a group where there are several."""

    def fewest(effect: Effect, powers: Sequence[float], alpha: float, _: int) -> tuple[float, ...]:
        from recheck.recompute.power.f_tests import fixed_effects_n

        return _each(fixed_effects_n(effect[0], powers, df1, parameters, alpha) / groups)

    def n(effect: Effect, power: float, alpha: float, tails: int) -> Interval:
        return _hull(*fewest(effect, (power,), alpha, tails))

    def power(effect: Effect, n: float, alpha: float, _: int) -> Interval:
        from recheck.recompute.power.f_tests import f_power, fixed_effects_power

        N = n * groups
        # Cohen (1988) takes f² (df1 + df2 + 1) also where df1 is not the number of all predictors.
        own = float(f_power(effect[0] * (df1 + N - parameters + 1), df1, N - parameters, alpha))
        return _hull(own, float(fixed_effects_power(effect[0], N, df1, parameters, alpha)))

    def detectable(_: Effect, power: float, alpha: float, __: int, n: float) -> Interval:
        from recheck.recompute.power.f_tests import fixed_effects_detectable

        N = n * groups
        found = float(fixed_effects_detectable(N, power, df1, parameters, alpha))
        return _hull(found, found * N / (df1 + N - parameters + 1))

    return PowerDesign(words, groups, False, fewest, n, power, _at(detectable))


def correlation() -> PowerDesign:
    """The test that a correlation is 0; the effect is r."""

    def each(n: float, rho: float, alpha: float, tails: int) -> Interval:
        from recheck.recompute.power import correlations as of_r

        return _hull(
            float(of_r.exact_r_power(rho, n, alpha, tails=tails)),
            float(of_r.fixed_r_power(rho, n, alpha, tails=tails)),
            float(of_r.fisher_r_power(rho, n, alpha, tails=tails)),
        )

    def fewest(effect: Effect, powers: Sequence[float], alpha: float, tails: int) -> tuple[float, ...]:
        from recheck.recompute.power.correlations import r_n
        from recheck.recompute.power.normal import z_shift

        # Fisher's z without its far tail, by hand: a fixed predictor asks for less, but for large r.
        fixed = _each(r_n(effect[0], powers, alpha, method="fixed", tails=tails))
        shifts = _each(z_shift(powers, alpha, tails=tails))
        size = math.atanh(effect[0]) if effect[0] < 1 else math.inf
        return tuple(min(n, (z / size) ** 2 + 3) for n, z in zip(fixed, shifts, strict=True))

    def n(effect: Effect, power: float, alpha: float, tails: int) -> Interval:
        from recheck.recompute.power.correlations import r_n

        exact = float(r_n(effect[0], power, alpha, tails=tails))
        fisher = float(r_n(effect[0], power, alpha, method="fisher", tails=tails))
        return _hull(*fewest(effect, (power,), alpha, tails), exact, fisher)

    def power(effect: Effect, n: float, alpha: float, tails: int) -> Interval:
        return each(n, effect[0], alpha, tails)

    def detectable(_: Effect, power: float, alpha: float, tails: int, n: float) -> Interval:
        from recheck.recompute.power.correlations import r_detectable

        return _hull(
            *(
                float(r_detectable(n, power, alpha, method=m, tails=tails))
                for m in ("exact", "fixed", "fisher")
            )
        )

    return PowerDesign("a correlation of two variables", 1.0, True, fewest, n, power, _at(detectable))


def frequencies(df: int) -> PowerDesign:
    """The χ² test of a table or of goodness of fit; the effect is w."""

    def fewest(effect: Effect, powers: Sequence[float], alpha: float, _: int) -> tuple[float, ...]:
        from recheck.recompute.power.chi2_tests import chi2_n

        return _each(chi2_n(effect[0], powers, df, alpha))

    def n(effect: Effect, power: float, alpha: float, tails: int) -> Interval:
        return _hull(*fewest(effect, (power,), alpha, tails))

    def power(effect: Effect, n: float, alpha: float, _: int) -> Interval:
        from recheck.recompute.power.chi2_tests import chi2_power

        return _hull(float(chi2_power(effect[0], n, df, alpha)))

    def detectable(_: Effect, power: float, alpha: float, __: int, n: float) -> Interval:
        from recheck.recompute.power.chi2_tests import chi2_detectable

        return _hull(float(chi2_detectable(n, power, df, alpha)))

    return PowerDesign(f"a χ² test with {df} df", 1.0, False, fewest, n, power, _at(detectable))


def two_proportions(ratio: float = 1.0) -> PowerDesign:
    """The comparison of two independent proportions; the effect is the pair of them, as shares of 1."""

    def sizes(effect: Effect, powers: Sequence[float], alpha: float, tails: int) -> list[tuple[float, ...]]:
        from recheck.recompute.power import proportions as of_p

        p1, p2 = effect
        plain = [
            of_p.proportions_n(*pair, powers, alpha, ratio=ratio, spread=spread, tails=tails)
            for spread in of_p.SPREADS
            for pair in ((p1, p2), (p2, p1))
        ]
        corrected = [of_p.continuity_corrected_n(n, p1 - p2, ratio=ratio) for n in plain]
        arcsine = of_p.arcsine_n(of_p.cohens_h(p1, p2), powers, alpha, ratio=ratio, tails=tails)
        return [_each(found) for found in (arcsine, *plain, *corrected)]

    def fewest(effect: Effect, powers: Sequence[float], alpha: float, tails: int) -> tuple[float, ...]:
        return tuple(min(column) for column in zip(*sizes(effect, powers, alpha, tails), strict=True))

    def n(effect: Effect, power: float, alpha: float, tails: int) -> Interval:
        return _hull(*(found[0] for found in sizes(effect, (power,), alpha, tails)))

    def power(effect: Effect, n: float, alpha: float, tails: int) -> Interval:
        from recheck.recompute.power import proportions as of_p

        p1, p2 = effect
        # n with continuity correction is about n + (1 + ratio) / (ratio |p1 - p2|): so many cases less count.
        less = max(n - (1 + ratio) / ratio / max(abs(p1 - p2), 1e-9), 0.01)
        return _hull(
            *(
                float(of_p.proportions_power(*pair, m, m * ratio, alpha, spread=spread, tails=tails))
                for spread in of_p.SPREADS
                for pair in ((p1, p2), (p2, p1))
                for m in (n, less)
            ),
            float(of_p.arcsine_power(of_p.cohens_h(p1, p2), n, n * ratio, alpha, tails=tails)),
        )

    return PowerDesign("two independent proportions", 1 + ratio, True, fewest, n, power, None)
