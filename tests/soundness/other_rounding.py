"""Honest figures that were rounded, cut or worked out by hand in other ways."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from scipy import stats

from tests.soundness import computing, sentences
from tests.soundness.computing import pooled_sd, sd
from tests.soundness.hand import Hand, one
from tests.soundness.honest import facts
from tests.soundness.other_effects import two, with_t
from tests.soundness.other_t import compared
from tests.soundness.rounding import TRUNCATE, padded, rounded_twice
from tests.soundness.samples import Generator, Piece, Sample


def with_places(hand: Hand, **places: int) -> Hand:
    """The same author with other numbers of decimals."""
    return replace(hand, places={**hand.places, **places})


def coarse_groups(rng: np.random.Generator) -> Sample:
    """M and SD to no or one decimal; t, p and d as the program gave them."""
    hand, a, b, test = two(rng)
    hand = with_places(hand, mean=int(rng.integers(0, 2)), sd=int(rng.integers(0, 2)), statistic=3, effect=3)
    extras = [hand.effect("d", test.effect / pooled_sd(a, b))] if rng.random() < 0.6 else []
    return compared(hand, a, b, with_t(hand, test, *extras))


def rounded_figures(
    hand: Hand, a: computing.Values, b: computing.Values
) -> tuple[float, float, float, float]:
    """Means and SDs as printed, for an author who works on with them."""
    m = [float(hand.rounded(float(g.mean()), hand.places["mean"])) for g in (a, b)]
    s = [float(hand.rounded(sd(g), hand.places["sd"])) for g in (a, b)]
    return m[0], m[1], s[0], s[1]


def d_from_printed(rng: np.random.Generator) -> Sample:
    """d worked by hand from the printed M and SD, beside the program's t."""
    hand, a, b, test = two(rng)
    m1, m2, s1, s2 = rounded_figures(hand, a, b)
    n1, n2 = len(a), len(b)
    spread = np.sqrt(((n1 - 1) * s1**2 + (n2 - 1) * s2**2) / (n1 + n2 - 2))
    rms = np.sqrt((s1**2 + s2**2) / 2)
    below = spread if rng.random() < 0.6 else rms
    if not below:
        return compared(hand, a, b, with_t(hand, test))
    return compared(hand, a, b, with_t(hand, test, hand.effect("d", float((m1 - m2) / below))))


def interval_from_printed(rng: np.random.Generator) -> Sample:
    """The difference and its interval worked from the printed M, SD and n, beside the program's t."""
    hand, a, b, test = two(rng)
    m1, m2, s1, s2 = rounded_figures(hand, a, b)
    n1, n2 = len(a), len(b)
    spread = np.sqrt(((n1 - 1) * s1**2 + (n2 - 1) * s2**2) / (n1 + n2 - 2))
    half = stats.t.ppf(0.975, n1 + n2 - 2) * spread * np.sqrt(1 / n1 + 1 / n2)
    shown = hand.number(hand.rounded(m1 - m2, hand.places["mean"]))
    extras = (Piece(f"mean difference = {shown}"), hand.interval(m1 - m2 - half, m1 - m2 + half))
    return compared(hand, a, b, with_t(hand, test, *extras))


def rounded_twice_p(rng: np.random.Generator) -> Sample:
    """Numbers copied from a table with one or two more digits and rounded again."""
    hand, a, b, test = two(rng)
    p = rounded_twice(test.p, hand.places["p"], hand.places["p"] + 1)
    t = rounded_twice(test.value, hand.places["statistic"], hand.places["statistic"] + 1)
    if not p:
        return compared(hand, a, b, with_t(hand, test))
    shown = hand.statistic_told(
        "t", t if rng.random() < 0.5 else hand.rounded(test.value, hand.places["statistic"]), test.df
    )
    result = hand.join(shown, hand.told("p", p))
    return compared(hand, a, b, result)


def truncated(rng: np.random.Generator) -> Sample:
    """An author who cuts digits off: everywhere, or of p alone."""
    hand, a, b, test = two(rng)
    cutting = replace(hand, how=TRUNCATE)
    if rng.random() < 0.5:
        extras = [cutting.effect("d", test.effect / pooled_sd(a, b))] if rng.random() < 0.4 else []
        return compared(cutting, a, b, with_t(cutting, test, *extras))
    return compared(hand, a, b, hand.join(hand.statistic("t", test.value, test.df), cutting.p(test.p)))


def padded_zeros(rng: np.random.Generator) -> Sample:
    """A figure that was rounded to one decimal and printed with two."""
    hand, a, b, test = two(rng)
    if rng.random() < 0.5:
        result = hand.join(hand.statistic_told("t", padded(test.value, 2, 1), test.df), hand.p(test.p))
        return compared(hand, a, b, result)
    result = with_t(hand, test)
    first, second = (
        hand.group_told(padded(float(g.mean()), 2, 1), padded(sd(g), 2, 1), len(g)) for g in (a, b)
    )
    text = sentences.two_groups(hand, sentences.draw_pair(rng), (first, second), result, a.mean() > b.mean())
    return Sample(text, facts(result))


def t_from_printed(rng: np.random.Generator) -> Sample:
    """t and p worked from the printed M and SD, and from the rounded t in its turn."""
    hand, a, b, _ = two(rng)
    m1, m2, s1, s2 = rounded_figures(hand, a, b)
    n1, n2 = len(a), len(b)
    df = n1 + n2 - 2
    spread = np.sqrt(((n1 - 1) * s1**2 + (n2 - 1) * s2**2) / df)
    if not spread:
        return compared(hand, a, b, Piece("no test"))
    t = hand.rounded(float((m1 - m2) / (spread * np.sqrt(1 / n1 + 1 / n2))), hand.places["statistic"])
    result = hand.join(
        hand.statistic_told("t", t, (float(df),)), hand.p(float(2 * stats.t.sf(abs(float(t)), df)))
    )
    return compared(hand, a, b, result)


def mixed_sides(rng: np.random.Generator) -> Sample:
    """p told twice: against alpha in words and with its digits, at the edge of .05."""
    hand, _, _, test = two(rng)
    word = "significantly" if test.p < 0.05 else "not significantly"
    result = with_t(hand, test)
    text = f"The starters differed {word}{hand.bracket(result)}.".replace("..", ".")
    return Sample(text, facts(result))


def edge_of_alpha(rng: np.random.Generator) -> Sample:
    """A t whose p is just above or below .05, with a p of two decimals, a bound, or a word."""
    hand, _, _, _ = two(rng)
    df = int(rng.integers(4, 120))
    p = 0.05 + float(rng.uniform(-0.004, 0.004))
    t = float(stats.t.isf(p / 2, df)) * float(rng.choice([-1, 1]))
    result = hand.join(hand.statistic("t", t, (float(df),)), hand.p(p))
    word = one(rng, ["", " significantly" if p < 0.05 else " or not, not significantly"])
    return Sample(f"The starters differed{word}{hand.bracket(result)}.".replace("..", "."), facts(result))


OTHER_ROUNDING: dict[str, Generator] = {
    "coarse M and SD": coarse_groups, "d from printed figures": d_from_printed,
    "CI from printed figures": interval_from_printed, "rounded twice": rounded_twice_p, "truncated": truncated,
    "padded zeros": padded_zeros, "t from printed figures": t_from_printed, "words and p": mixed_sides,
    "edge of alpha": edge_of_alpha,
}  # fmt: skip
