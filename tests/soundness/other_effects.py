"""Honest effect sizes and intervals by other formulas than the first that comes to mind."""

from __future__ import annotations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw, sentences
from tests.soundness.computing import Test, Values, finite, pooled_sd, sd
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.honest import descriptives_only, facts
from tests.soundness.other_t import compared
from tests.soundness.samples import Generator, Piece, Sample


def two(rng: np.random.Generator) -> tuple[Hand, Values, Values, Test]:
    """An author, two ordinary groups, and their pooled t."""
    a, b = raw.plain_groups(rng)
    return draw_hand(rng), a, b, computing.t_test(a, b, pooled=True)


def with_t(hand: Hand, test: Test, *extras: Piece) -> Piece:
    """The t, its p and what stands beside them."""
    return hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p), *extras)


def other_d(a: Values, b: Values, t: float) -> dict[str, float]:
    """What is called d of two independent groups, by its denominators."""
    gap, n1, n2 = float(a.mean() - b.mean()), len(a), len(b)
    biased = np.sqrt((np.var(a) * n1 + np.var(b) * n2) / (n1 + n2))
    return {
        "control": gap / sd(b), "other": gap / sd(a), "mean-sd": gap / ((sd(a) + sd(b)) / 2),
        "rms": gap / float(np.sqrt((sd(a) ** 2 + sd(b) ** 2) / 2)), "biased": gap / float(biased),
        "df": 2 * t / float(np.sqrt(n1 + n2 - 2)), "n": 2 * t / float(np.sqrt(n1 + n2)),
        "all": gap / sd(np.concatenate([a, b])), "corrected": gap / pooled_sd(a, b) * computing.hedges_j(n1 + n2 - 2),
    }  # fmt: skip


def d_denominators(rng: np.random.Generator) -> Sample:
    """d by the SD of one group, the mean or root-mean-square SD, N below, 2t/√df, 2t/√N."""
    hand, a, b, test = two(rng)
    choices = other_d(a, b, test.value)
    kind = one(rng, [k for k in choices if k != "all"])
    if kind in ("control", "other") and rng.random() < 0.4:
        extra = hand.effect("delta", choices[kind])
    else:
        extra = hand.effect("d", choices[kind] if rng.random() < 0.8 else abs(choices[kind]))
    return compared(hand, a, b, with_t(hand, test, extra))


def lone_d(rng: np.random.Generator) -> Sample:
    """The same beside t and df alone."""
    hand, a, b, test = two(rng)
    choices = other_d(a, b, test.value)
    kind = one(rng, [k for k in choices if k != "all"])
    result = with_t(hand, test, hand.effect("d", choices[kind]))
    return Sample(sentences.lone(hand, result, "the starters were compared"), facts(result))


def welch_d(rng: np.random.Generator) -> Sample:
    """d with the pooled or the root-mean-square SD beside Welch's t."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    test = computing.t_test(a, b, pooled=False)
    value = test.effect / pooled_sd(a, b) if rng.random() < 0.5 else other_d(a, b, test.value)["rms"]
    return compared(hand, a, b, with_t(hand, test, hand.effect("d", value)))


def approximate_g(rng: np.random.Generator) -> Sample:
    """g with the approximate factor, of another d (root-mean-square SD, 2t/√df), or without any factor."""
    hand, a, b, test = two(rng)
    df, d = len(a) + len(b) - 2, test.effect / pooled_sd(a, b)
    other = other_d(a, b, test.value)
    factor = 1 - 3 / (4 * df - 1)
    value = [d * factor, d, other["rms"] * factor, other["df"] * factor][rng.integers(4)]
    return compared(hand, a, b, with_t(hand, test, hand.effect("g", float(value))))


def paired_d(rng: np.random.Generator) -> Sample:
    """d of a paired design: d_z, d_av, d_rm, by the SD before, by the pooled SD, 2t/√df, g of d_z."""
    hand = draw_hand(rng)
    n = int(rng.integers(6, 80))
    x = raw.repeated(rng, n, 2)
    a, b = x[:, 0], x[:, 1]
    test = computing.one_sample(a - b)
    if not finite(test.value, test.p) or min(sd(a), sd(b)) < 1e-9:
        return descriptives_only(hand, [a, b])
    gap, r = test.effect, float(np.corrcoef(a, b)[0, 1])
    values = {
        "d_z": gap / sd(a - b), "d_av": gap / ((sd(a) + sd(b)) / 2),
        "d_rm": gap / sd(a - b) * np.sqrt(2 * (1 - r)), "pre": gap / sd(a), "pooled": gap / pooled_sd(a, b),
        "two-t": 2 * test.value / np.sqrt(n - 1), "g": gap / sd(a - b) * computing.hedges_j(n - 1),
        "over-df": test.value / np.sqrt(n - 1),
    }  # fmt: skip
    kind = one(rng, list(values))
    name = kind if kind in ("d_z", "d_av", "d_rm", "g") and rng.random() < 0.5 else "d"
    result = with_t(hand, test, hand.effect(name, float(values[kind])))
    pair = [hand.group(float(v.mean()), sd(v), n if rng.random() < 0.4 else None) for v in (a, b)]
    said = one(rng, ["", "", " in a paired t test"])
    text = f"Bench scores were compared{said} before ({pair[0].text}) and after training ({pair[1].text}){hand.bracket(result)}."
    return Sample(text, facts(result))


def bootstrap_interval(rng: np.random.Generator) -> Sample:
    """A percentile bootstrap interval of the difference beside t; stated half of the time."""
    hand, a, b, test = two(rng)
    draws = [rng.choice(g, (600, len(g))).mean(axis=1) for g in (a, b)]
    low, high = np.quantile(draws[0] - draws[1], [0.025, 0.975])
    interval = hand.interval(float(low), float(high))
    if rng.random() < 0.5:
        return compared(hand, a, b, with_t(hand, test, interval))
    where = one(rng, ["text", "method"])
    if where == "method":
        method = "Confidence intervals are percentile bootstrap intervals with 5,000 samples."
        return compared(hand, a, b, with_t(hand, test, interval), method=method)
    named = Piece(interval.text.replace("CI", "bootstrap CI", 1), interval.values)
    return compared(hand, a, b, with_t(hand, test, named))


def widened_interval(rng: np.random.Generator) -> Sample:
    """An interval widened for several comparisons and called 95% CI, p adjusted or not."""
    hand, a, b, test = two(rng)
    tests = int(rng.integers(2, 7))
    half = stats.t.ppf(1 - 0.025 / tests, test.df[0]) * test.error
    interval = hand.interval(test.effect - half, test.effect + half)
    p = min(1.0, test.p * tests)
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(p), interval)
    method = one(rng, [
        "Pairwise comparisons were Bonferroni-adjusted.", "We applied a Bonferroni correction to p values and intervals.",
    ])  # fmt: skip
    return compared(hand, a, b, result, method=method)


def normal_interval(rng: np.random.Generator) -> Sample:
    """A difference ± 1.96 SE beside a t with few df."""
    hand, a, b, test = two(rng)
    half = 1.959963984540054 * test.error
    return compared(hand, a, b, with_t(hand, test, hand.interval(test.effect - half, test.effect + half)))


def interval_of_d(rng: np.random.Generator) -> Sample:
    """d with an exact or an approximate interval beside t and p: the ends need not meet p."""
    hand, a, b, test = two(rng)
    n1, n2 = len(a), len(b)
    d = test.effect / pooled_sd(a, b)
    if rng.random() < 0.4:
        low, high = computing.noncentral_d(test.value, n1, n2)
    else:
        half = 1.959963984540054 * np.sqrt((n1 + n2) / (n1 * n2) + d * d / (2 * (n1 + n2)))
        low, high = d - half, d + half
    if not finite(low, high):
        return descriptives_only(hand, [a, b])
    return compared(hand, a, b, with_t(hand, test, hand.effect("d", d), hand.interval(low, high)))


def interval_of_means(rng: np.random.Generator) -> Sample:
    """Each mean with its own interval, in place of the SD, and the t of both."""
    hand, a, b, test = two(rng)
    shown = []
    for g in (a, b):
        half = stats.t.ppf(0.975, len(g) - 1) * sd(g) / np.sqrt(len(g))
        mean = hand.number(hand.rounded(float(g.mean()), hand.places["mean"]))
        shown.append(f"{mean}, {hand.interval(float(g.mean()) - half, float(g.mean()) + half).text}")
    result = with_t(hand, test)
    text = f"Mean loaf height was {shown[0]} with rye and {shown[1]} with wheat{hand.bracket(result)}."
    return Sample(text, facts(result))


def interval_of_eta2(rng: np.random.Generator) -> Sample:
    """η² with its exact 90% interval, which may leave it out."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, int(rng.integers(2, 5)))
    test = computing.one_way(groups)
    low, high = computing.noncentral_eta2(test.value, int(test.df[0]), int(test.df[1]))
    if not finite(low, high, test.p):
        return descriptives_only(hand, groups)
    effect = hand.effect(one(rng, ["eta2", "partial_eta2"]), test.effect)
    result = hand.join(
        hand.statistic("F", test.value, test.df), hand.p(test.p), effect, hand.interval(low, high, 0.90)
    )
    return Sample(sentences.several_groups(hand, [], result), facts(result))


def standard_errors(rng: np.random.Generator) -> Sample:
    """Means ± SE where nothing says SE, or M and SE named, with the t of both."""
    hand, a, b, test = two(rng)
    label = one(rng, ["SE", "SEM"])
    pieces = [
        hand.group(float(g.mean()), sd(g) / np.sqrt(len(g)), len(g) if rng.random() < 0.6 else None, label)
        for g in (a, b)
    ]
    result = with_t(hand, test)
    names = sentences.draw_pair(rng)
    text = sentences.two_groups(hand, names, (pieces[0], pieces[1]), result, a.mean() > b.mean())
    return Sample(text, facts(result))


OTHER_EFFECTS: dict[str, Generator] = {
    "d denominators": d_denominators, "d beside t alone": lone_d, "d beside Welch's t": welch_d,
    "g approximate": approximate_g, "d paired": paired_d, "bootstrap CI": bootstrap_interval,
    "Bonferroni CI": widened_interval, "CI by 1.96": normal_interval, "CI of d": interval_of_d,
    "CI of each mean": interval_of_means, "CI of eta squared": interval_of_eta2, "SE for spread": standard_errors,
}  # fmt: skip
