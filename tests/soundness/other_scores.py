"""Honest tests of other scores than those whose means and SDs are printed, or told in another order."""

from __future__ import annotations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw, sentences
from tests.soundness.computing import finite, pooled_sd, sd
from tests.soundness.hand import draw_hand, one
from tests.soundness.honest import descriptives_only, facts
from tests.soundness.other_effects import two, with_t
from tests.soundness.other_t import compared
from tests.soundness.samples import Generator, Piece, Sample


def transformed(rng: np.random.Generator) -> Sample:
    """t on the logarithm or the root of scores whose raw M and SD are printed, as the method says."""
    hand = draw_hand(rng)
    n1, n2 = int(rng.integers(10, 70)), int(rng.integers(10, 70))
    a, b = np.exp(rng.normal(2, 0.8, n1)), np.exp(rng.normal(2 + rng.normal() * 0.4, 0.8, n2))
    change, method = (
        (np.log, "Shaping times were log-transformed before analysis; raw values are reported."),
        (np.log, "Because times were skewed, tests were run on the natural logarithm of the scores."),
        (np.sqrt, "Scores were square-root transformed for all tests."),
    )[rng.integers(3)]
    test = computing.t_test(change(a), change(b), pooled=True)
    return compared(hand, a, b, with_t(hand, test), method=method)


def without_outliers(rng: np.random.Generator) -> Sample:
    """A test without outliers beside the figures of all, as the sentence says; df are smaller."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng, 2, 20, 80)
    kept = [np.sort(g)[1 : len(g) - int(rng.integers(1, 3))] for g in (a, b)]
    test = computing.t_test(kept[0], kept[1], pooled=True)
    if not finite(test.value, test.p):
        return descriptives_only(hand, [a, b])
    names = sentences.draw_pair(rng)
    pair = (hand.group(float(a.mean()), sd(a), len(a)), hand.group(float(b.mean()), sd(b), len(b)))
    start = one(rng, ["Without outliers", "After removal of extreme scores", ""])
    result = with_t(hand, test)
    text = sentences.two_groups(hand, names, pair, result, a.mean() > b.mean(), start)
    return Sample(text, facts(result))


def f_with_d(rng: np.random.Generator) -> Sample:
    """F of two groups with d, or with g, or with r of the effect."""
    hand, a, b, test = two(rng)
    d = test.effect / pooled_sd(a, b)
    df = test.df[0]
    kind = one(rng, ["d", "g", "r"])
    value = {
        "d": abs(d),
        "g": abs(d) * computing.hedges_j(df),
        "r": abs(test.value) / np.sqrt(test.value**2 + df),
    }[kind]
    f = hand.statistic("F", test.value**2, (1.0, df))
    result = hand.join(f, hand.p(test.p), hand.effect(kind, float(value)))
    return compared(hand, a, b, result)


def other_direction(rng: np.random.Generator) -> Sample:
    """The difference and its interval taken the other way round than t."""
    hand, a, b, test = two(rng)
    half = stats.t.ppf(0.975, test.df[0]) * test.error
    shown = hand.number(hand.rounded(-test.effect, hand.places["ci"]))
    extras = [Piece(f"mean difference = {shown}"), hand.interval(-test.effect - half, -test.effect + half)]
    return compared(hand, a, b, with_t(hand, test, *extras[int(rng.integers(2)) :]))


def other_level(rng: np.random.Generator) -> Sample:
    """A 90% or 99% interval of the difference beside p."""
    hand, a, b, test = two(rng)
    level = float(rng.choice([0.8, 0.9, 0.99, 0.999]))
    half = stats.t.ppf(0.5 + level / 2, test.df[0]) * test.error
    interval = hand.interval(test.effect - half, test.effect + half, level)
    return compared(hand, a, b, with_t(hand, test, interval))


def t_and_f(rng: np.random.Generator) -> Sample:
    """The same comparison told as t and as F."""
    hand, a, b, test = two(rng)
    f = hand.join(hand.statistic("F", test.value**2, (1.0, test.df[0])), hand.p(test.p))
    sample = compared(hand, a, b, with_t(hand, test))
    return Sample(
        f"{sample.text} An analysis of variance gave the same{hand.bracket(f)}.",
        (*sample.facts, dict(f.values)),
    )


def pairs_with_losses(rng: np.random.Generator) -> Sample:
    """A paired t where some apprentices lack one of the two scores: n differ, df belong to neither."""
    hand = draw_hand(rng)
    n = int(rng.integers(12, 70))
    x = raw.repeated(rng, n, 2)
    first, second = rng.random(n) < 0.9, rng.random(n) < 0.9
    both = first & second
    if both.sum() < 4:
        return descriptives_only(hand, [x[:, 0]])
    test = computing.one_sample(x[both, 0] - x[both, 1])
    if not finite(test.value, test.p) or not test.error:
        return descriptives_only(hand, [x[:, 0]])
    a, b = x[first, 0], x[second, 1]
    pair = [hand.group(float(v.mean()), sd(v), len(v)) for v in (a, b)]
    result = with_t(hand, test)
    said = one(rng, ["", " by a paired t test"])
    text = f"Bench scores were compared{said} before ({pair[0].text}) and after training ({pair[1].text}){hand.bracket(result)}."
    return Sample(text.replace("..", "."), facts(result))


OTHER_SCORES: dict[str, Generator] = {
    "transformed scores": transformed, "without outliers": without_outliers, "F with d": f_with_d,
    "other direction": other_direction, "other level of CI": other_level, "t and F": t_and_f,
    "pairs with losses": pairs_with_losses,
}  # fmt: skip
