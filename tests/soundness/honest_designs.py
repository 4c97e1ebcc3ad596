"""Honest tests of ranks, of variances, of one sample and of pairs, in many hands and by many programs."""

from __future__ import annotations

from decimal import Decimal

import numpy as np
from scipy import stats

from tests.soundness import computing, raw, sentences
from tests.soundness.computing import Values, finite, sd
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.samples import Generator, Piece, Sample

Rng = np.random.Generator


def sized(hand: Hand, x: Values, with_n: bool = True) -> Piece:
    """Median, or mean and SD, of a group with its n."""
    if hand.rng.random() < 0.5:
        return hand.group(float(x.mean()), sd(x), len(x) if with_n else None)
    median = hand.number(hand.rounded(float(np.median(x)), hand.places["mean"]))
    joint = "; " if hand.comma else ", "
    label = one(hand.rng, ["Mdn", "median"])
    return Piece(f"{label} = {median}" + (f"{joint}n = {len(x)}" if with_n else ""))


def whole_or_half(value: float) -> Decimal:
    """U and W as they are printed."""
    return Decimal(int(value)) if float(value).is_integer() else Decimal(str(round(value, 1)))


def tie_sum(x: Values) -> float:
    counts = np.unique(x, return_counts=True)[1].astype(float)
    return float(np.sum(counts**3 - counts))


def shuffled_p(rng: Rng, a: Values, b: Values) -> float:
    """An exact p among ties, by shuffling."""
    ranks = stats.rankdata(np.concatenate([a, b]))
    middle = len(a) * (len(ranks) + 1) / 2
    observed = abs(ranks[: len(a)].sum() - middle)
    drawn = np.array([abs(rng.permutation(ranks)[: len(a)].sum() - middle) for _ in range(800)])
    return float((np.sum(drawn >= observed - 1e-9) + 1) / 801)


def result_of(hand: Hand, statistic: Piece, p: float, z: float | None) -> Piece:
    """The statistic with p, between them z where it is printed."""
    shown_z = [] if z is None else [hand.statistic("z", z, ())]
    return hand.join(statistic, hand.p(min(p, 1.0)), *shown_z)


def mann_whitney(rng: Rng) -> Sample:
    """Two independent groups by U, or by W as U or as a sum of ranks; p normal, exact, shuffled or one-tailed."""
    hand = draw_hand(rng)
    a, b = raw.groups(rng, 2)
    every = np.concatenate([a, b])
    if len(np.unique(every)) < 2:
        return Sample(f"No test was possible ({sized(hand, a).text}).")
    u = float(stats.mannwhitneyu(a, b, method="asymptotic").statistic)
    n1, n2, N = len(a), len(b), len(every)
    spread = float(np.sqrt(n1 * n2 / 12 * (N + 1 - tie_sum(every) / (N * (N - 1)))))
    away = u - n1 * n2 / 2
    corrected = float(np.sign(away) * max(abs(away) - 0.5 * rng.integers(0, 2), 0) / spread)
    p = float(2 * stats.norm.sf(abs(corrected)))
    z = corrected if rng.random() < 0.4 else None
    draw = rng.random()
    if draw < 0.25 and n1 < 50 and n2 < 50 and not tie_sum(every):
        p = float(stats.mannwhitneyu(a, b, method="exact").pvalue)
    elif draw < 0.4 and p > 0.02:
        p = shuffled_p(rng, a, b)
    elif draw < 0.5:
        p /= 2
    name, value = "u", min(u, n1 * n2 - u) if rng.random() < 0.6 else u
    test = one(rng, ["a Mann-Whitney test", "the Mann–Whitney U test", "a Wilcoxon rank-sum test"])
    if "Wilcoxon" in test:
        name, value = "w", u if rng.random() < 0.5 else u + n1 * (n1 + 1) / 2
    symbol = {"u": "U", "w": "W"}[name]
    statistic = hand.statistic_told(name, whole_or_half(value), [], symbol=symbol)
    names = sentences.draw_pair(rng)
    pair = sized(hand, a), sized(hand, b)
    text = f"By {test} the {names[0]} ({pair[0].text}) and the {names[1]} ({pair[1].text}) were compared{hand.bracket(result_of(hand, statistic, p, z))}."
    return Sample(text.replace("..", "."))


def signed_ranks(rng: Rng) -> Sample:
    """Pairs by W; ties, pairs without a difference (left out, or ranked by Pratt), sums of all signed ranks."""
    hand = draw_hand(rng)
    n = int(rng.integers(6, 60))
    x = raw.repeated(rng, n, 2)
    gaps = np.round(x[:, 0] - x[:, 1], 9)
    pratt = rng.random() < 0.2
    kept = gaps[gaps != 0]
    if len(kept) < 5:
        return Sample(f"Scores hardly changed ({sized(hand, x[:, 0]).text}).")
    ranked = stats.rankdata(np.abs(gaps if pratt else kept))
    signs = np.sign(gaps if pratt else kept)
    up, down = float(ranked[signs > 0].sum()), float(ranked[signs < 0].sum())
    squares = float(np.sum(ranked[signs != 0] ** 2))
    away = max(abs(up - down) / 2 - 0.25 * rng.integers(0, 2), 0)
    z = float(np.sign(up - down) * away / np.sqrt(squares / 4))
    p = float(2 * stats.norm.sf(abs(z)))
    if len(kept) == n and not tie_sum(np.abs(kept)) and n <= 50 and rng.random() < 0.5:
        p = float(stats.wilcoxon(kept, mode="exact").pvalue)
    value = (min(up, down), up, up - down)[rng.choice(3, p=(0.5, 0.4, 0.1))]
    printed_n = n if pratt or rng.random() < 0.6 else len(kept)
    size = f"N = {printed_n}" if rng.random() < 0.5 else f"n = {printed_n}"
    symbol = one(rng, ["W", "V"])
    statistic = hand.statistic_told("w", whole_or_half(value), [], symbol=symbol)
    result = result_of(hand, statistic, p, z if rng.random() < 0.4 else None)
    tail = hand.bracket(
        Piece(f"{result.text}{'; ' if hand.comma else ', '}{size}") if hand.letters != "tex" else result
    )
    text = f"Bench scores before and after training were compared with a Wilcoxon signed-rank test{tail}."
    return Sample(text)


def of_variances(hand: Hand, groups: list[Values]) -> tuple[str, Piece] | None:
    """A test of equal variances by name, with its numbers."""
    rng = hand.rng
    kind = (
        one(rng, ["ratio", "bartlett", "levene", "median"])
        if len(groups) == 2
        else one(rng, ["bartlett", "levene", "median"])
    )
    if min(map(sd, groups)) < 1e-6:
        return None
    if kind == "ratio":
        a, b = groups if rng.random() < 0.5 else groups[::-1]
        F, df = float(sd(a) ** 2 / sd(b) ** 2), (len(a) - 1.0, len(b) - 1.0)
        upper = float(stats.f.sf(F, *df))
        p = 2 * min(upper, 1 - upper) if rng.random() < 0.7 else upper
        name = one(
            rng,
            [
                "an F test of equal variances",
                "the variance ratio test",
                "an F test for the equality of variances",
            ],
        )
        return name, hand.join(hand.statistic("F", F, df), hand.p(p))
    if kind == "bartlett":
        found = stats.bartlett(*groups)
        symbol = one(rng, ["χ²", "K²"])
        statistic = hand.statistic_told(
            "chi2", hand.rounded(float(found.statistic), hand.places["statistic"]),
            [Decimal(len(groups) - 1)] if rng.random() < 0.8 else [], symbol=symbol,
        )  # fmt: skip
        return "Bartlett’s test", hand.join(statistic, hand.p(float(found.pvalue)))
    found = stats.levene(*groups, center="mean" if kind == "levene" else "median")
    df = (len(groups) - 1.0, float(sum(map(len, groups)) - len(groups)))
    name = one(
        rng,
        [
            "Levene’s test",
            "Levene's test of homogeneity of variance",
            "Levene’s test for equality of variances",
        ],
    )
    return name, hand.join(hand.statistic("F", float(found.statistic), df), hand.p(float(found.pvalue)))


def equal_variances(rng: Rng) -> Sample:
    """A test of variances beside the groups' means and SDs, alone or with the test of means behind it."""
    hand = draw_hand(rng)
    groups = raw.groups(rng, int(rng.integers(2, 5)), 4)
    found = of_variances(hand, groups)
    if found is None or not finite(*(float(g.mean()) for g in groups)):
        return Sample("No test was possible.")
    name, piece = found
    listed = [
        f"{flour} loaves ({hand.group(float(g.mean()), sd(g), len(g)).text})"
        for flour, g in zip(sentences.NAMES, groups, strict=False)
    ]
    joined = ", ".join(listed[:-1]) + f" and {listed[-1]}"
    draw = rng.random()
    if draw < 0.4:
        return Sample(
            f"{joined[0].upper()}{joined[1:]} had much the same variances by {name}{hand.bracket(piece)}.".replace(
                "..", "."
            )
        )
    if draw < 0.7 or len(groups) > 2:
        return Sample(
            f"The variances of {joined} were compared with {name}{hand.bracket(piece)}.".replace("..", ".")
        )
    test = computing.t_test(groups[0], groups[1], pooled=bool(rng.random() < 0.6))
    if not finite(test.value, test.p):
        return Sample("No test was possible.")
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p))
    text = f"{joined[0].upper()}{joined[1:]} had equal variances by {name} ({piece.text}), and their heights differed or did not{hand.bracket(result)}."
    return Sample(text.replace("..", "."))


def one_sample_named(rng: Rng) -> Sample:
    """One sample against a value that the sentence names in one of several ways, rounded at times."""
    hand = draw_hand(rng)
    x = raw.groups(rng, 1)[0]
    decimals = int(rng.integers(0, 3))
    printed = hand.rounded(x.mean() + rng.normal() * (sd(x) + 0.01), decimals)
    exact = float(printed) + (
        float(rng.uniform(-0.49, 0.49)) * 10.0**-decimals if rng.random() < 0.2 else 0.0
    )
    test = computing.one_sample(x, exact)
    if not finite(test.value, test.p):
        return Sample("No test was possible.")
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p))
    group = hand.group(float(x.mean()), sd(x), len(x) if rng.random() < 0.7 else None)
    target = hand.number(printed)
    phrases = [f"the target of {target}", f"the test value ({target})", f"{target}"]
    if exact == float(printed):
        phrases.append(f"the scale midpoint of {target}")
    phrase = one(rng, phrases)
    said = one(
        rng,
        [
            "In a one-sample t test",
            "In a one-sample t test",
            "On a scale from 1 to 9, by a one-sample t test",
            "On average",
        ],
    )
    text = f"{said}, bench scores ({group.text}) differed from {phrase} or did not{hand.bracket(result)}."
    return Sample(text.replace("..", "."))


def paired_difference(rng: Rng) -> Sample:
    """A paired t with the mean and SD of the differences, which the sentence calls a difference or a gain."""
    hand = draw_hand(rng)
    n = raw.size(rng, 3)
    x = raw.repeated(rng, n, 2)
    gaps = x[:, 1] - x[:, 0]
    test = computing.one_sample(gaps)
    if not finite(test.value, test.p) or not test.error:
        return Sample("No test was possible.")
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p))
    joint = "; " if hand.comma else ", "
    m, s = (hand.number(hand.rounded(v, hand.places["mean"])) for v in (float(gaps.mean()), sd(gaps)))
    size = f"{joint}n = {n}" if rng.random() < 0.5 else ""
    draw = rng.random()
    if draw < 0.4:
        told = f"Bench scores rose (mean difference = {m}{joint}SD = {s}{size})"
    elif draw < 0.7:
        told = f"The gain in bench scores (M = {m}{joint}SD = {s}{size}) was clear"
    else:
        after = hand.group(float(x[:, 1].mean()), sd(x[:, 1]), n)
        told = f"After an increase over the course, bench scores ({after.text}) were higher than before"
    said = one(rng, ["", " in a paired t test"])
    return Sample(f"{told}{said}{hand.bracket(result)}.".replace("..", "."))


def groups_with_difference(rng: Rng) -> Sample:
    """An independent t with the mean difference and the pooled SD beside it, or SDs of changes in each group."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng, 2, 8, 60)
    test = computing.t_test(a, b, pooled=True)
    if not finite(test.value, test.p):
        return Sample("No test was possible.")
    joint = "; " if hand.comma else ", "
    m = hand.number(hand.rounded(test.effect, hand.places["mean"]))
    s = hand.number(hand.rounded(computing.pooled_sd(a, b), hand.places["mean"]))
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p))
    return Sample(
        f"The ovens differed or did not (mean difference = {m}{joint}SD = {s}){hand.bracket(result)}."
    )


def slope_of_groups(rng: Rng) -> Sample:
    """b, SE and t of a predictor of two groups in any coding, of scores as they are or standardized."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng, 2, 8, 60)
    first, second = ((0, 1), (1, 0), (0.5, -0.5), (-1, 1), (1, 2))[int(rng.integers(5))]
    y, x = (
        np.concatenate([a, b]),
        np.concatenate([np.full(len(a), float(first)), np.full(len(b), float(second))]),
    )
    if rng.random() < 0.15:
        y = (y - y.mean()) / (np.std(y, ddof=1) or 1.0)
    fit = stats.linregress(x, y)
    if not fit.stderr or not finite(fit.slope / fit.stderr):
        return Sample("No test was possible.")
    t = fit.slope / fit.stderr
    shown = [hand.effect("b", float(fit.slope)), hand.effect("se", float(fit.stderr), "SE")]
    test = hand.join(hand.statistic("t", float(t), (float(len(y) - 2),)), hand.p(float(fit.pvalue)))
    listed = hand.separator.join(piece.text for piece in (*shown, test))
    pair = hand.group(float(a.mean()), sd(a), len(a)), hand.group(float(b.mean()), sd(b), len(b))
    return Sample(
        f"Rye loaves ({pair[0].text}) and wheat loaves ({pair[1].text}) differed or did not, {listed}."
    )


def with_total(rng: Rng) -> Sample:
    """A t of two groups with N beside it; some cases are missing from N's count or from the test."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng, 2, 8, 60)
    test = computing.t_test(a, b, pooled=bool(rng.random() < 0.6))
    if not finite(test.value, test.p):
        return Sample("No test was possible.")
    N = len(a) + len(b) + int(rng.choice([0, 0, 0, 1, 5]))
    result = hand.join(
        hand.statistic("t", test.value, test.df, f", N = {N}" if not hand.comma else ""), hand.p(test.p)
    )
    pair = hand.group(float(a.mean()), sd(a), len(a)), hand.group(float(b.mean()), sd(b), len(b))
    return Sample(sentences.two_groups(hand, sentences.draw_pair(rng), pair, result, a.mean() > b.mean()))


def other_w(rng: Rng) -> Sample:
    """A W or U of another kind beside two groups: Shapiro and Wilk's, Brunner and Munzel's."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng, 2, 8, 40)
    if min(len(np.unique(a)), len(np.unique(b))) < 3:
        return Sample("No test was possible.")
    names = sentences.draw_pair(rng)
    pair = sized(hand, a), sized(hand, b)
    both = f"the {names[0]} ({pair[0].text}) and the {names[1]} ({pair[1].text})"
    if rng.random() < 0.5:
        found = stats.shapiro(np.concatenate([a - a.mean(), b - b.mean()]))
        statistic = hand.statistic_told("w", hand.rounded(float(found.statistic), 2), [], symbol="W")
        return Sample(
            f"Scores of {both} were nearly normal (Shapiro-Wilk test, {hand.join(statistic, hand.p(float(found.pvalue))).text})."
        )
    found = stats.brunnermunzel(a, b)
    if not finite(float(found.statistic), float(found.pvalue)):
        return Sample("No test was possible.")
    statistic = hand.statistic_told("w", hand.rounded(float(found.statistic), 2), [], symbol="W")
    return Sample(
        f"A nonparametric Brunner-Munzel test compared {both}{hand.bracket(hand.join(statistic, hand.p(float(found.pvalue))))}."
    )


DESIGNS: dict[str, Generator] = {
    "Mann-Whitney": mann_whitney, "signed ranks": signed_ranks, "equal variances": equal_variances,
    "one sample, value named": one_sample_named, "paired difference": paired_difference,
    "difference with pooled SD": groups_with_difference, "slope of two groups": slope_of_groups, "t with N": with_total, "W of another kind": other_w,
}  # fmt: skip
