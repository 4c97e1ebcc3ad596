"""Published intervals of a standardized mean difference, from d, the factor d / t and the level."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from recheck.recompute.arrays import Floats
from recheck.recompute.intervals import critical_t

Ends = tuple[Floats, Floats]
Method = Callable[[Floats, Floats, float], Ends]
"""Both ends from the printed effect, the factor k = d / t, and the level."""
Term = Callable[[Floats, Floats], Floats]
"""What is added to k² for the variance of d, from d and k."""


@dataclass(frozen=True, slots=True)
class Setting:
    """What an interval is made from.

    `total` is the number of observations, `factor` d / t where the group sizes tell it, `smaller` the df of
    single SDs that d may be divided by, `correction` J of g; `corrected` says that g is printed.
    """

    df: float
    total: float
    factor: float | None
    smaller: tuple[float, ...]
    correction: float
    corrected: bool = False


def noncentral(df: float) -> Method:
    """k times the ends of the noncentrality. Source: Steiger & Fouladi (1997), as in `recompute.effect_intervals`."""

    def method(d: Floats, k: Floats, level: float) -> Ends:
        from recheck.recompute.effect_intervals import noncentral_t_ci

        low, high = noncentral_t_ci(d / k, df, level)
        return k * low, k * high

    return method


def symmetric(df: float, term: Term) -> Method:
    """d ∓ c √(k² + a term), c the quantile of t with df (infinite: of the normal distribution)."""

    def method(d: Floats, k: Floats, level: float) -> Ends:
        half = float(critical_t(level, df)) * np.sqrt(k * k + term(d, k))
        return d - half, d + half

    return method


def over(size: float) -> Term:
    """d² / (2 size), the usual second term of the variance; see `recompute.effect_variances` for the sources."""
    return lambda d, k: d * d / (2 * size)


def usual(setting: Setting) -> tuple[Method, ...]:
    """The exact interval and the large-sample one of d; of g J times both, and the large-sample one of g itself."""
    both = noncentral(setting.df), symmetric(math.inf, over(setting.total))
    return (*(_of_g(m, setting.correction) for m in both), both[1]) if setting.corrected else both


def swapped(setting: Setting) -> tuple[Method, ...]:
    """The interval of d beside a printed g, or that of g beside a printed d."""
    J = setting.correction
    both = noncentral(setting.df), symmetric(math.inf, over(setting.total))
    if setting.corrected:
        return tuple(_rescaled(method, 1 / J, 1.0) for method in both)
    return (*(_rescaled(method, 1.0, J) for method in both), _rescaled(both[1], J, 1.0))


def others(setting: Setting) -> tuple[Method, ...]:
    """Other published variances, each with z and with t, and the interval of the difference over the SD."""
    found = [symmetric(df, term) for term in _terms(setting) for df in (math.inf, setting.df)]
    found += [noncentral(df) for df in setting.smaller if df >= 2]
    if setting.corrected:
        found += [_of_g(method, setting.correction) for method in found]
    return tuple(found)


def _terms(setting: Setting) -> list[Term]:
    df, square = setting.df, setting.correction**2
    sizes = {df, setting.total, setting.total - 3.94, setting.total - 1, *setting.smaller}
    terms = [over(size) for size in sorted(sizes) if size > 0]
    terms += [lambda d, k: d * d * k * k / 2, lambda d, k: np.zeros_like(d)]
    if df > 2:
        terms.append(lambda d, k: np.asarray((1 - (df - 2) / (df * square)) * d * d))
        terms.append(lambda d, k: np.asarray(2 / (df - 2) * k * k + (df / (df - 2) - 1 / square) * d * d))
    return terms


def _of_g(method: Method, J: float) -> Method:
    """J times the interval of d = g / J."""
    return _rescaled(method, 1 / J, J)


def _rescaled(method: Method, before: float, after: float) -> Method:
    def rescaled(d: Floats, k: Floats, level: float) -> Ends:
        low, high = method(d * before, k, level)
        return low * after, high * after

    return rescaled
