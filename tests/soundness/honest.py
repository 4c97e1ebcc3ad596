"""Honest results of the plain models: raw data, computed, rounded and printed in many hands."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
from hypothesis import strategies as st
from scipy import stats

from tests.soundness import computing, raw, sentences
from tests.soundness.computing import Test, Values, finite
from tests.soundness.hand import Hand, draw_hand, one, written_by
from tests.soundness.honest_counts import COUNTS
from tests.soundness.honest_matrices import FITS
from tests.soundness.honest_risks import RISKS
from tests.soundness.samples import Generator, Piece, Sample, Told, make

SHOW = ("each", "each", "each", "before", "before-n", "total", "none")


def facts(piece: Piece) -> tuple[Mapping[str, Told], ...]:
    """The one fact of a text with one result."""
    return (dict(piece.values),) if piece.values else ()


def described(hand: Hand, a: Values, b: Values, show: str) -> tuple[Piece, Piece]:
    """Both groups' figures, with n where it is shown in each."""
    first, second = (
        hand.group(float(x.mean()), computing.sd(x), len(x) if show == "each" else None) for x in (a, b)
    )
    return first, second


def descriptives_only(hand: Hand, groups: list[Values]) -> Sample:
    """What is printed where a statistic does not exist."""
    pieces = [hand.group(float(g.mean()), computing.sd(g) if len(g) > 1 else 0.0, len(g)) for g in groups]
    return Sample(sentences.several_groups(hand, pieces, Piece("no test was possible")))


def effects_of_t(hand: Hand, a: Values, b: Values, test: Test) -> list[Piece]:
    """Some of the effect sizes that belong to a t of two independent groups."""
    rng, (t, n1, n2) = hand.rng, (test.value, len(a), len(b))
    d = float(a.mean() - b.mean()) / computing.pooled_sd(a, b)
    chosen = []
    if rng.random() < 0.35:
        chosen.append(hand.effect("d", d))
    elif rng.random() < 0.15 and n1 + n2 > 3:
        chosen.append(hand.effect("g", d * computing.hedges_j(n1 + n2 - 2)))
    elif rng.random() < 0.1:
        eta2 = t**2 / (t**2 + test.df[0])
        chosen.append(hand.effect(one(rng, ["eta2", "partial_eta2"]), eta2))
    return chosen


def interval_of_difference(hand: Hand, test: Test) -> list[Piece]:
    """The CI of the mean difference that goes with a t, with or without the difference."""
    if hand.rng.random() > 0.35 or not finite(test.error):
        return []
    half = stats.t.ppf(0.975, test.df[0]) * test.error
    piece = hand.interval(test.effect - half, test.effect + half)
    if hand.rng.random() < 0.6:
        label = one(hand.rng, ["mean difference", "difference", "MD"])
        shown = hand.number(hand.rounded(test.effect, hand.places["ci"]))
        return [Piece(f"{label} = {shown}", {}), piece]
    return [piece]


def two_sample(rng: np.random.Generator, pooled: bool) -> Sample:
    """Student's or Welch's t of two groups."""
    hand = draw_hand(rng)
    a, b = raw.groups(rng)
    test = computing.t_test(a, b, pooled)
    if not finite(test.value, test.p):
        return descriptives_only(hand, [a, b])
    show = one(rng, SHOW)
    extras = interval_of_difference(hand, test)
    extras += effects_of_t(hand, a, b, test) if pooled else []
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p), *extras)
    designs = (
        ("", "", *sentences.INDEPENDENT)
        if pooled
        else ("", "By Welch's t test", "With unequal variances (Welch)")
    )
    names = sentences.draw_pair(rng)
    note = sentences.sizes_note(rng, names, len(a), len(b), show)
    pair = described(hand, a, b, show)
    return Sample(
        note + sentences.two_groups(hand, names, pair, result, a.mean() > b.mean(), one(rng, designs)),
        facts(result),
    )


def pooled_t(rng: np.random.Generator) -> Sample:
    return two_sample(rng, pooled=True)


def welch_t(rng: np.random.Generator) -> Sample:
    return two_sample(rng, pooled=False)


def lone_t(rng: np.random.Generator) -> Sample:
    """A t with df and p and at most an effect size, without the groups."""
    hand = draw_hand(rng)
    a, b = raw.groups(rng)
    test = computing.t_test(a, b, pooled=bool(rng.random() < 0.7))
    if not finite(test.value, test.p):
        return descriptives_only(hand, [a, b])
    extras = effects_of_t(hand, a, b, test) if float(test.df[0]).is_integer() else []
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p), *extras)
    return Sample(
        sentences.lone(hand, result, "the loaves of both bakeries differed or did not"), facts(result)
    )


def paired_t(rng: np.random.Generator) -> Sample:
    """A paired t of apprentices before and after training; half of the texts do not say so."""
    hand = draw_hand(rng)
    n = raw.size(rng)
    x = raw.repeated(rng, n, 2)
    test = computing.one_sample(x[:, 0] - x[:, 1])
    if not finite(test.value, test.p) or not test.error:
        return descriptives_only(hand, [x[:, 0], x[:, 1]])
    extras = interval_of_difference(hand, test)
    if rng.random() < 0.3:
        name = one(rng, ["d_z", "d"])
        extras.append(hand.effect(name, test.value / np.sqrt(n)))
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p), *extras)
    first, second = described(hand, x[:, 0], x[:, 1], one(rng, ["each", "none", "none"]))
    note = one(rng, ["", f"All {n} apprentices were scored twice. ", f"N = {n} apprentices took part. "])
    said = one(rng, ["", "", " by a paired t test", " (paired-samples t test)"])
    text = (
        f"{note}Bench scores were compared{said} before training ({first.text}) and after training "
        f"({second.text}){hand.bracket(result)}."
    )
    return Sample(text, facts(result))


def one_sample_t(rng: np.random.Generator) -> Sample:
    """A one-sample t against a fixed value, with the CI of the mean at times."""
    hand = draw_hand(rng)
    x = raw.groups(rng, 1)[0]
    mu = float(np.round(x.mean() + rng.normal() * (computing.sd(x) + 0.01), int(rng.integers(0, 2))))
    test = computing.one_sample(x, mu)
    if not finite(test.value, test.p):
        return descriptives_only(hand, [x])
    extras = [hand.effect("d", test.value / np.sqrt(len(x)))] if rng.random() < 0.4 else []
    if rng.random() < 0.3:
        half = stats.t.ppf(0.975, test.df[0]) * test.error
        extras.append(hand.interval(x.mean() - half, x.mean() + half))
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p), *extras)
    group = hand.group(float(x.mean()), computing.sd(x), len(x) if rng.random() < 0.5 else None)
    said = one(rng, ["", " in a one-sample t test"])
    target = hand.number(hand.rounded(mu, 1))
    text = f"Loaf weight ({group.text}) was compared with the target of {target}{said}{hand.bracket(result)}."
    return Sample(text, facts(result))


def one_way_f(rng: np.random.Generator) -> Sample:
    """One-way ANOVA with two to five flours."""
    hand = draw_hand(rng)
    groups = raw.groups(rng, int(rng.integers(2, 6)))
    test = computing.one_way(groups)
    if not finite(test.value, test.p):
        return descriptives_only(hand, groups)
    extras = []
    if rng.random() < 0.5:
        extras.append(hand.effect(one(rng, ["eta2", "partial_eta2", "eta2"]), test.effect))
    if rng.random() < 0.15:
        extras.append(hand.effect("MSE", test.error, "MSE"))
    result = hand.join(hand.statistic("F", test.value, test.df), hand.p(test.p), *extras)
    total = sum(map(len, groups))
    show = one(rng, ["each", "none", "total", "lone"])
    pieces = [
        hand.group(float(g.mean()), computing.sd(g), len(g) if show == "each" else None) for g in groups
    ]
    note = f"N = {total} loaves were scored. " if show == "total" else ""
    design = one(rng, ["", "", "In a one-way ANOVA"])
    text = sentences.several_groups(hand, [] if show == "lone" else pieces, result, design, note)
    values = {k: v for k, v in result.values.items() if k != "MSE"}
    return Sample(text, (values,))


def two_way_f(rng: np.random.Generator) -> Sample:
    """A two-way ANOVA between subjects: three F in one paragraph."""
    hand = draw_hand(rng)
    a, b = int(rng.integers(2, 4)), int(rng.integers(2, 4))
    low = int(rng.integers(2, 25))
    balanced = rng.random() < 0.6
    flat = raw.plain_groups(rng, a * b, 4, 25)
    cut = min(map(len, flat)) if balanced else max(low, 3)
    cells = [[flat[i * b + j][: max(cut, 2)] for j in range(b)] for i in range(a)]
    tests = computing.two_way(cells)
    if not finite(*(v for t in tests for v in (t.value, t.p, t.effect))):
        return descriptives_only(hand, flat[:2])
    results = [
        hand.join(
            hand.statistic("F", t.value, t.df),
            hand.p(t.p),
            *([hand.effect("partial_eta2", t.effect)] if rng.random() < 0.5 else []),
        )
        for t in tests
    ]
    n = sum(len(c) for row in cells for c in row)
    note = one(rng, ["", f"N = {n} loaves were baked. ", f"A {a} × {b} between-subjects ANOVA was run. "])
    text = (
        f"{note}The effect of flour{hand.bracket(results[0])}, the effect of oven{hand.bracket(results[1])} and "
        f"their interaction{hand.bracket(results[2])} were tested."
    )
    return Sample(text, tuple(dict(r.values) for r in results))


def repeated_f(rng: np.random.Generator) -> Sample:
    """A within-subject F: sphericity assumed, or corrected with the corrected df printed."""
    hand = draw_hand(rng)
    n, k = int(rng.integers(3, 50)), int(rng.integers(2, 6))
    x = raw.repeated(rng, n, k)
    test, epsilons = computing.repeated_measures(x)
    if not finite(test.value, test.p, test.effect) or test.error < 1e-12:
        return descriptives_only(hand, [x[:, 0]])
    df, p, said = test.df, test.p, ""
    if rng.random() < 0.4 and k > 2:
        epsilon = epsilons[one(rng, ["gg", "hf"])]
        df = tuple(d * epsilon for d in test.df)
        p = float(stats.f.sf(test.value, *df))
        said = one(rng, ["", " (Greenhouse-Geisser corrected)", " with corrected degrees of freedom"])
    effect = [hand.effect("partial_eta2", test.effect)] if rng.random() < 0.5 else []
    result = hand.join(hand.statistic("F", test.value, df), hand.p(p), *effect)
    note = one(rng, ["", f"All {n} apprentices were scored {k} times. "])
    text = f"{note}Bench scores over the {k} weeks of training were compared{said}{hand.bracket(result)}."
    return Sample(text, facts(result))


def correlation(rng: np.random.Generator) -> Sample:
    """Pearson's r with df or n, up to perfect correlations."""
    hand = draw_hand(rng)
    n = raw.size(rng, 3)
    x = raw.repeated(rng, n, 2)
    y = x[:, 0] * float(rng.choice([1, -2])) + 3 if rng.random() < 0.04 else x[:, 1]
    if np.ptp(x[:, 0]) == 0 or np.ptp(y) == 0:
        return descriptives_only(hand, [x[:, 0]])
    found = stats.pearsonr(x[:, 0], y)
    r, p = float(found.statistic), float(found.pvalue)
    extras = []
    if rng.random() < 0.25 and n > 4 and abs(r) < 0.9999:
        half = 1.959963984540054 / np.sqrt(n - 3)
        extras.append(hand.interval(np.tanh(np.arctanh(r) - half), np.tanh(np.arctanh(r) + half)))
    df = (float(n - 2),) if rng.random() < 0.7 else ()
    result = hand.join(hand.statistic("r", r, df), hand.p(p), *extras)
    note = f"N = {n} loaves were measured. " if rng.random() < 0.3 else ""
    text = f"{note}Loaf height and crumb score were correlated{hand.bracket(result)}."
    return Sample(text, facts(result))


def slope(rng: np.random.Generator) -> Sample:
    """A simple regression: b, SE, t, p, and at times the F and R² of the same line."""
    hand = draw_hand(rng)
    n = raw.size(rng, 4)
    x = raw.repeated(rng, n, 2)
    if np.ptp(x[:, 0]) == 0 or np.ptp(x[:, 1]) == 0:
        return descriptives_only(hand, [x[:, 0]])
    line = stats.linregress(x[:, 0], x[:, 1])
    if not finite(line.slope, line.stderr, line.pvalue) or line.stderr < 1e-9:
        return descriptives_only(hand, [x[:, 0]])
    t = line.slope / line.stderr
    b, se = hand.effect("b", line.slope), hand.effect("se", line.stderr, "SE")
    half = stats.t.ppf(0.975, n - 2) * line.stderr
    extras = [b, se] + ([hand.interval(line.slope - half, line.slope + half)] if rng.random() < 0.3 else [])
    df = (float(n - 2),) if rng.random() < 0.8 else ()
    result = hand.join(hand.statistic("t", t, df), hand.p(line.pvalue))
    shown = hand.separator.join(piece.text for piece in extras)
    text = f"Proofing time predicted loaf height or not, {shown}, {result.text}."
    return Sample(text, facts(result))


def compound(rng: np.random.Generator) -> Sample:
    """Two or three honest results after each other in one paragraph."""
    names = list(SINGLE)
    with written_by(draw_hand(rng)):
        parts = [SINGLE[one(rng, names)](rng) for _ in range(int(rng.integers(2, 4)))]
    return Sample(" ".join(part.text for part in parts), tuple(f for part in parts for f in part.facts))


SINGLE: dict[str, Generator] = {
    "pooled t": pooled_t, "welch t": welch_t, "lone t": lone_t, "paired t": paired_t,
    "one-sample t": one_sample_t, "one-way F": one_way_f, "two-way F": two_way_f,
    "repeated F": repeated_f, "correlation": correlation, "slope": slope, **COUNTS, **RISKS, **FITS,
}  # fmt: skip
HONEST: dict[str, Generator] = {**SINGLE, "compound": compound}


@st.composite
def honest_samples(draw: st.DrawFn) -> Sample:
    """Hypothesis draws which generator and which seed; numpy draws the data."""
    name = draw(st.sampled_from(sorted(HONEST)))
    return make(name, HONEST[name], draw(st.integers(0, 2**32 - 1)))
