"""Honest effects and differences of two groups that are told without a test, by many models that the text is silent about."""

from __future__ import annotations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw
from tests.soundness.hand import draw_hand, one
from tests.soundness.honest import descriptives_only
from tests.soundness.honest_effects import d_methods
from tests.soundness.other_t import compared
from tests.soundness.samples import Generator, Piece, Sample


def effect_alone(rng: np.random.Generator) -> Sample:
    """d or g with one of its published intervals, beside the two groups and no test."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    d = computing.t_test(a, b, pooled=True).effect / computing.pooled_sd(a, b)
    choices = d_methods(d, len(a), len(b), 0.95)
    name, value, low, high = choices[one(rng, list(choices))]
    if not computing.finite(value, low, high):
        return descriptives_only(hand, [a, b])
    pieces = [hand.effect(name, value)] + ([hand.interval(low, high)] if rng.random() < 0.6 else [])
    return compared(hand, a, b, _joined(pieces))


def difference_alone(rng: np.random.Generator) -> Sample:
    """A mean difference with its interval: pooled, Welch's, normal, of pairs, adjusted for a covariate, or by a bootstrap."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    gap, how = float(a.mean() - b.mean()), one(rng, ["pooled", "welch", "normal", "adjusted", "bootstrap"])
    if how == "bootstrap":
        draws = [float(rng.choice(a, len(a)).mean() - rng.choice(b, len(b)).mean()) for _ in range(300)]
        low, high = (float(x) for x in np.percentile(draws, [2.5, 97.5]))
    else:
        found = stats.ttest_ind(a, b, equal_var=how != "welch").confidence_interval()
        half = float(found.high - found.low) / 2 * (rng.uniform(0.5, 1.0) if how == "adjusted" else 1.0)
        gap += float(rng.normal(0, 0.3)) * half if how == "adjusted" else 0.0
        low, high = gap - half, gap + half
        if how == "normal":
            se = float(np.sqrt(np.var(a, ddof=1) / len(a) + np.var(b, ddof=1) / len(b)))
            low, high = gap - 1.96 * se, gap + 1.96 * se
    if not computing.finite(low, high):
        return descriptives_only(hand, [a, b])
    return compared(hand, a, b, _joined([hand.effect("mean_difference", gap), hand.interval(low, high)]))


def _joined(pieces: list[Piece]) -> Piece:
    """The parts of a result without a test; what was read of it is not asked for here."""
    return Piece(", ".join(piece.text for piece in pieces), {})


EFFECTS_ALONE: dict[str, Generator] = {
    "effect without a test": effect_alone,
    "difference without a test": difference_alone,
}
