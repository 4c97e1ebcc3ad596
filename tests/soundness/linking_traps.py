"""Honest paragraphs with more groups and tests than one: which figures belong to which test?"""

from __future__ import annotations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw
from tests.soundness.computing import Test, Values, finite, sd
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.samples import Generator, Piece, Sample
from tests.soundness.sentences import NAMES


def summary(hand: Hand, x: Values, with_n: bool) -> Piece:
    """A group's figures."""
    return hand.group(float(x.mean()), sd(x), len(x) if with_n else None)


def tested(hand: Hand, test: Test) -> Piece:
    """A t with its p."""
    return hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p))


def pairs_of_three(rng: np.random.Generator) -> Sample:
    """Three groups in one sentence and two or three pairwise t after them."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, 3)
    with_n = bool(rng.random() < 0.7)
    listed = [f"{name} ({summary(hand, g, with_n).text})" for name, g in zip(NAMES, groups, strict=False)]
    tests = {(i, j): computing.t_test(groups[i], groups[j], pooled=True) for i, j in ((0, 1), (0, 2), (1, 2))}
    chosen = list(tests)[: int(rng.integers(1, 4))] if rng.random() < 0.5 else list(tests)[::-1]
    results = [tested(hand, tests[pair]) for pair in chosen]
    verb = one(rng, ["differed from", "and", "rose higher or lower than"])
    compared = "; ".join(
        f"{NAMES[i]} {verb} {NAMES[j]}{hand.bracket(r)}" for (i, j), r in zip(chosen, results, strict=True)
    )
    joint = one(rng, [". In pairs, ", "; ", ". "])
    start = f"Loaf height was noted for {listed[0]}, {listed[1]} and {listed[2]}"
    return Sample(f"{start}{joint}{compared}.", tuple(dict(r.values) for r in results))


def before_and_after(rng: np.random.Generator) -> Sample:
    """Two groups before and after training: four summaries, an interaction, tests within each group."""
    hand = draw_hand(rng)
    ns = [int(rng.integers(8, 50)) for _ in range(2)]
    first, second = (raw.repeated(rng, n, 2) for n in ns)
    gains = [x[:, 1] - x[:, 0] for x in (first, second)]
    between = computing.t_test(gains[0], gains[1], pooled=True)
    within = [computing.one_sample(g) for g in gains]
    if not finite(between.value, *(w.value for w in within)):
        return Sample("Hardly any apprentice changed.")
    with_n = bool(rng.random() < 0.5)
    cells = [summary(hand, x[:, j], with_n).text for x in (first, second) for j in (0, 1)]
    f = hand.join(hand.statistic("F", between.value**2, (1.0, between.df[0])), hand.p(between.p))
    results = [tested(hand, w) for w in within]
    text = (
        f"Trained apprentices rose from ({cells[0]}) to ({cells[1]}){hand.bracket(results[0])}, untrained ones from "
        f"({cells[2]}) to ({cells[3]}){hand.bracket(results[1])}; the gains were compared{hand.bracket(f)}."
    )
    return Sample(text, tuple(dict(r.values) for r in (*results, f)))


def two_sentences(rng: np.random.Generator) -> Sample:
    """Groups in one sentence, a test of another outcome next, the test of these groups last."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    n1, n2 = len(a), len(b)
    other = computing.t_test(rng.standard_normal(n1), rng.standard_normal(n2) + 0.5, pooled=True)
    own = computing.t_test(a, b, pooled=True)
    with_n = bool(rng.random() < 0.7)
    start = f"Loaf height was noted with rye ({summary(hand, a, with_n).text}) and wheat ({summary(hand, b, with_n).text})."
    results = [tested(hand, other), tested(hand, own)]
    sentences = [
        f"Crumb scores differed or did not{hand.bracket(results[0])}.",
        f"Heights differed or did not{hand.bracket(results[1])}.",
    ]
    keep = [0, 1] if rng.random() < 0.5 else [0]
    text = " ".join([start, *(sentences[i] for i in keep)])
    return Sample(text, tuple(dict(results[i].values) for i in keep))


def whole_sample(rng: np.random.Generator) -> Sample:
    """Age of all, and of a few left out, before the groups and their test."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    age = 20 + rng.gamma(4, 3, len(a) + len(b))
    test = computing.t_test(a, b, pooled=True)
    result = tested(hand, test)
    ages = hand.group(float(age.mean()), sd(age), len(age) if rng.random() < 0.5 else None)
    groups = [summary(hand, g, bool(rng.random() < 0.6)) for g in (a, b)]
    start = one(rng, [
        f"Apprentices ({ages.text} years of age) baked with rye ({groups[0].text}) or wheat ({groups[1].text})",
        f"The mean age was given ({ages.text}). Heights were noted with rye ({groups[0].text}) and wheat ({groups[1].text})",
        f"Heights were noted with rye ({groups[0].text}) and wheat ({groups[1].text}) by apprentices aged ({ages.text})",
    ])  # fmt: skip
    return Sample(f"{start}{hand.bracket(result)}.", (dict(result.values),))


def two_outcomes_respectively(rng: np.random.Generator) -> Sample:
    """Two t of two outcomes told at once after the figures of one of them."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    test = computing.t_test(a, b, pooled=True)
    other = computing.t_test(rng.standard_normal(len(a)), rng.standard_normal(len(b)), pooled=True)
    shown = [hand.number(hand.rounded(t.value, 2)) for t in (test, other)]
    ps = [hand.number(hand.rounded(t.p, 3), bounded=True) for t in (test, other)]
    groups = [summary(hand, g, with_n=True).text for g in (a, b)]
    text = (
        f"Rye ({groups[0]}) and wheat ({groups[1]}) were compared on height and crumb, t({int(test.df[0])}) = {shown[0]} and "
        f"{shown[1]}, p = {ps[0]} and {ps[1]}, respectively."
    )
    return Sample(text)


def correlation_of_groups(rng: np.random.Generator) -> Sample:
    """Two measures of the same loaves with their correlation, and a paired t."""
    hand = draw_hand(rng)
    n = int(rng.integers(8, 80))
    x = raw.repeated(rng, n, 2)
    if min(np.ptp(x[:, 0]), np.ptp(x[:, 1])) < 1e-9:
        return Sample("All loaves were alike.")
    found = stats.pearsonr(x[:, 0], x[:, 1])
    r = hand.join(hand.statistic("r", float(found.statistic), (float(n - 2),)), hand.p(float(found.pvalue)))
    paired = computing.one_sample(x[:, 0] - x[:, 1])
    if not finite(paired.value, paired.p):
        return Sample("All loaves were alike.")
    t = tested(hand, paired)
    groups = [summary(hand, x[:, j], bool(rng.random() < 0.3)).text for j in (0, 1)]
    text = (
        f"Height in the morning ({groups[0]}) and in the evening ({groups[1]}) went together{hand.bracket(r)} "
        f"and differed or did not{hand.bracket(t)}."
    )
    return Sample(text, (dict(r.values), dict(t.values)))


def told_twice(rng: np.random.Generator) -> Sample:
    """The same result in a summary and in the results, with other decimals and another way of p."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    test = computing.t_test(a, b, pooled=True)
    long = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p))
    short = hand.rounded(test.value, max(0, hand.places["statistic"] - 1))
    p = "p < .05" if test.p < 0.05 else "p > .05"
    p = p.replace(".", ",") if hand.comma else p
    brief = f"t({int(test.df[0])}) = {hand.number(short)}{hand.separator}{p}"
    groups = [summary(hand, g, with_n=True).text for g in (a, b)]
    text = (
        f"We report that rye and wheat were compared ({brief}).\n\n"
        f"Loaves of rye ({groups[0]}) and of wheat ({groups[1]}) were compared on height{hand.bracket(long)}."
    )
    return Sample(text, (dict(long.values),), alone=True)


def several_factors(rng: np.random.Generator) -> Sample:
    """A two-way ANOVA with the marginal figures of both factors and all F in one sentence."""
    hand = draw_hand(rng)
    n = int(rng.integers(5, 40))
    cells = [[g[:n] for g in raw.plain_groups(rng, 2, n, n + 9)] for _ in range(2)]
    tests = computing.two_way(cells)
    rows = [np.concatenate(row) for row in cells]
    columns = [np.concatenate([cells[0][j], cells[1][j]]) for j in (0, 1)]
    with_n = bool(rng.random() < 0.5)
    row, column = (
        f"({summary(hand, pair[0], with_n).text}) and ({summary(hand, pair[1], with_n).text})"
        for pair in (rows, columns)
    )
    results = [
        hand.join(hand.statistic("F", t.value, t.df), hand.p(t.p), hand.effect("partial_eta2", t.effect))
        for t in tests
    ]
    text = (
        f"Rye and wheat {row} differed or did not{hand.bracket(results[0])}, as did steam and dry heat "
        f"{column}{hand.bracket(results[1])}; both together{hand.bracket(results[2])}."
    )
    return Sample(text, tuple(dict(r.values) for r in results))


def without_sd(rng: np.random.Generator) -> Sample:
    """Means in the sentence of the test, the SD of something else near by."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    test = computing.t_test(a, b, pooled=True)
    m = [hand.number(hand.rounded(float(g.mean()), 2)) for g in (a, b)]
    gains = a[: min(len(a), len(b))] - b[: min(len(a), len(b))]
    result = tested(hand, test)
    text = (
        f"Loaves of rye (M = {m[0]}) and wheat (M = {m[1]}) were compared{hand.bracket(result)}; the difference within "
        f"ovens was noted as well ({summary(hand, gains, with_n=False).text})."
    )
    return Sample(text, (dict(result.values),))


LINKING_TRAPS: dict[str, Generator] = {
    "pairs of three groups": pairs_of_three, "before and after, two groups": before_and_after,
    "test of another outcome": two_sentences, "age of the whole sample": whole_sample,
    "two outcomes respectively": two_outcomes_respectively, "correlation and paired t": correlation_of_groups,
    "told twice": told_twice, "factors with marginal figures": several_factors, "means without SD": without_sd,
}  # fmt: skip
