"""Power by the normal approximation: of means, and of effects on any scale with a known standard error."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, together


def z_power(shift: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2, far_tail: bool = True) -> Floats:
    """Power of a z test whose statistic has mean `shift` and variance 1. Increasing in |shift| and alpha.

    Source: Armitage, Berry & Matthews (2002) Statistical Methods in Medical Research, 4th ed., 4.6 (from memory).
    """
    shift, alpha = together(shift, alpha)
    if tails == 2:
        shift = np.abs(shift)
    critical = -special.ndtri(alpha / tails)
    near = special.ndtr(shift - critical)
    return np.asarray(near + special.ndtr(-shift - critical) if tails == 2 and far_tail else near)


def z_shift(power: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2) -> Floats:
    """z of alpha plus z of the power: the shift that a z test detects with the power (`z_power`, far tail dropped), at least 0."""
    power, alpha = together(power, alpha)
    return np.asarray(np.maximum(special.ndtri(power) - special.ndtri(alpha / tails), 0.0))


def normal_n(
    d: ArrayLike, power: ArrayLike, alpha: ArrayLike = 0.05, *, ratio: ArrayLike = 1.0, tails: int = 2
) -> Floats:
    """The n of the first of two groups by the normal approximation: (1 + 1 / ratio) (z_alpha + z_power)² / d².

    Source: Altman (1991) Practical Statistics for Medical Research, 15.3 (from memory).
    """
    d, power, alpha, ratio = together(d, power, alpha, ratio)
    with np.errstate(divide="ignore"):
        return np.asarray((1 + 1 / ratio) * (z_shift(power, alpha, tails=tails) / d) ** 2)


def normal_n_one_sample(d: ArrayLike, power: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2) -> Floats:
    """The n of one group, or of pairs with d_z, by the normal approximation: (z_alpha + z_power)² / d². Source: as for `normal_n`."""
    d, power, alpha = together(d, power, alpha)
    with np.errstate(divide="ignore"):
        return np.asarray((z_shift(power, alpha, tails=tails) / d) ** 2)


def guenther_n(
    d: ArrayLike, power: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2, samples: int = 2
) -> Floats:
    """The normal approximation's n with the correction for the estimated SD: plus z_alpha² / 4 in each of two groups, z_alpha² / 2 in one.

    Source: Guenther (1981), The American Statistician 35:243-244.
    """
    plain = normal_n if samples == 2 else normal_n_one_sample
    d, power, alpha = together(d, power, alpha)
    return np.asarray(plain(d, power, alpha, tails=tails) + special.ndtri(alpha / tails) ** 2 / (2 * samples))
