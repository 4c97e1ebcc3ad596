"""Raw data of many shapes: what bakers, tasters and apprentices could really have measured."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Values = NDArray[np.float64]
SHAPES = ("normal", "normal", "skewed", "likert", "likert", "counts", "items", "huge", "tight", "coarse")


def size(rng: np.random.Generator, low: int = 2) -> int:
    """A group size: tiny, small, middling or large."""
    bounds = ((low, 5), (6, 30), (6, 30), (20, 120), (100, 900))[rng.integers(5)]
    return max(low, int(rng.integers(bounds[0], bounds[1] + 1)))


def sizes(rng: np.random.Generator, groups: int, low: int = 2) -> list[int]:
    """Sizes of several groups, equal half of the time, else up to ninefold apart."""
    first = size(rng, low)
    if rng.random() < 0.5:
        return [first] * groups
    return [max(low, int(first * rng.uniform(1 / 3, 3))) for _ in range(groups)]


def standard(rng: np.random.Generator, shape: str, shift: float, spread: float, n: int) -> Values:
    """n scores of one shape, moved by `shift` standard deviations and spread by a factor."""
    x = rng.standard_normal(n) * spread + shift
    if shape == "skewed":
        return np.exp(0.8 * x + 2)
    if shape == "likert":
        return np.clip(np.round(4 + 1.4 * x), 1, 7)
    if shape == "counts":
        return rng.poisson(np.exp(np.clip(1 + 0.6 * x, -5, 6))).astype(float)
    if shape == "items":
        return np.round(np.clip(4 + 1.2 * x, 1, 7) * 5) / 5
    if shape == "huge":
        return 1_250_000 + 0.8 * x
    if shape == "tight":
        return 37 + 0.004 * x
    if shape == "coarse":
        return np.round(100 + 15 * x)
    return 10 + 2.5 * x


def effect(rng: np.random.Generator) -> float:
    """A true effect in standard deviations, from none to enormous."""
    return float(rng.choice([0, 0, 0.2, 0.4, 0.6, 0.8, 1.2, 3.0, 12.0]) * rng.choice([-1, 1]))


def groups(rng: np.random.Generator, count: int = 2, low: int = 2) -> list[Values]:
    """Independent groups of one shape, with their own sizes, means and spreads."""
    shape = str(rng.choice(SHAPES))
    unequal = rng.random() < 0.4
    drawn = []
    for n in sizes(rng, count, low):
        spread = float(rng.choice([0.1, 0.5, 1, 2, 5])) if unequal else 1.0
        values = standard(rng, shape, effect(rng), spread, n)
        drawn.append(np.full(n, np.round(values[0])) if rng.random() < 0.02 else values)
    return drawn


def plain_groups(rng: np.random.Generator, count: int = 2, low: int = 10, high: int = 80) -> list[Values]:
    """Independent groups as most papers have them: moderate sizes, effects and spreads."""
    shape = str(rng.choice(["normal", "skewed", "likert", "coarse", "items"]))
    equal = rng.random() < 0.5
    n = int(rng.integers(low, high + 1))
    ns = [n if equal else int(rng.integers(low, high + 1)) for _ in range(count)]
    return [standard(rng, shape, float(rng.normal(0, 0.6)), float(rng.uniform(0.7, 1.5)), m) for m in ns]


def repeated(rng: np.random.Generator, n: int, times: int, spread: float = 1.0) -> Values:
    """Scores of n apprentices at several times, shape (n, times); spreads and correlations vary."""
    shape = str(rng.choice(["normal", "skewed", "likert", "coarse", "items"]))
    share = float(rng.choice([0.0, 0.3, 0.6, 0.8, 0.95, 0.999]))
    person = rng.standard_normal(n)
    columns = []
    for _ in range(times):
        own = rng.standard_normal(n) * spread * float(rng.uniform(0.4, 2.5) if rng.random() < 0.5 else 1)
        latent = np.sqrt(share) * person + np.sqrt(1 - share) * own + 0.4 * rng.normal()
        columns.append(shaped(shape, latent))
    return np.stack(columns, axis=1)


def shaped(shape: str, x: Values) -> Values:
    """Turn latent scores into those that are written down."""
    if shape == "skewed":
        return np.exp(0.8 * x + 2)
    if shape == "likert":
        return np.clip(np.round(4 + 1.4 * x), 1, 7)
    if shape == "items":
        return np.round(np.clip(4 + 1.2 * x, 1, 7) * 5) / 5
    if shape == "coarse":
        return np.round(100 + 15 * x)
    return 10 + 2.5 * x
