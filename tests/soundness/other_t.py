"""Honest t tests of another model than the text lets one think."""

from __future__ import annotations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw, sentences
from tests.soundness.computing import Test, Values, finite, sd
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.honest import SHOW, described, descriptives_only, facts, interval_of_difference
from tests.soundness.samples import Generator, Piece, Sample


def compared(
    hand: Hand, a: Values, b: Values, result: Piece, show: str = "", design: str = "", method: str = ""
) -> Sample:
    """Two groups' raw M and SD with a result; a method paragraph comes before it, if any."""
    rng = hand.rng
    names, show = sentences.draw_pair(rng), show or one(rng, SHOW)
    note = sentences.sizes_note(rng, names, len(a), len(b), show)
    pair = described(hand, a, b, show)
    text = note + sentences.two_groups(hand, names, pair, result, a.mean() > b.mean(), design)
    return Sample(f"{method}\n\n{text}" if method else text, facts(result), alone=bool(method))


def normal_p(rng: np.random.Generator) -> Sample:
    """p from the normal curve behind a printed t with df."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    test = computing.t_test(a, b, pooled=True)
    result = hand.join(
        hand.statistic("t", test.value, test.df), hand.p(float(2 * stats.norm.sf(abs(test.value))))
    )
    if rng.random() < 0.5:
        return Sample(sentences.lone(hand, result, "the effect of the starter was estimated"), facts(result))
    return compared(hand, a, b, result)


def welch_whole_df(rng: np.random.Generator) -> Sample:
    """Welch's t with its df floored, rounded, or replaced by the smaller n − 1; p of either df."""
    hand = draw_hand(rng)
    a, b = raw.groups(rng) if rng.random() < 0.5 else raw.plain_groups(rng)
    test = computing.t_test(a, b, pooled=False)
    if not finite(test.value, test.p) or test.df[0] < 1:
        return descriptives_only(hand, [a, b])
    kind = one(rng, ["floor", "round", "least"])
    whole = {"floor": np.floor(test.df[0]), "round": np.round(test.df[0]), "least": min(len(a), len(b)) - 1}
    df = whole[kind]
    # Who takes the smaller n − 1 by hand looks p up there; a program's df are rounded for print only.
    by_hand = kind == "least" or rng.random() < 0.4
    p = float(2 * stats.t.sf(abs(test.value), df)) if by_hand else test.p
    extras = interval_of_difference(hand, test) if rng.random() < 0.5 else []
    result = hand.join(hand.statistic("t", test.value, (float(df),)), hand.p(p), *extras)
    return compared(hand, a, b, result, design=one(rng, ["", "", "By Welch's t test"]))


def one_tailed(rng: np.random.Generator) -> Sample:
    """A one-tailed p that the text does not call so, in the right or the wrong direction."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    test = computing.t_test(a, b, pooled=bool(rng.random() < 0.7))
    p = test.p / 2 if rng.random() < 0.7 else 1 - test.p / 2
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(p))
    return compared(hand, a, b, result)


def ancova_means(rng: np.random.Generator) -> Sample:
    """Adjusted means printed as M beside raw SD with the t of the ANCOVA (df N − 3)."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    covariates = [
        0.7 * (g - g.mean()) / (sd(g) + 1e-9) + rng.normal(size=len(g)) + rng.normal() * 0.5 for g in (a, b)
    ]
    test, adjusted = computing.ancova([a, b], covariates)
    sign = np.sign(adjusted[0] - adjusted[1])
    result = hand.join(hand.statistic("t", float(sign * np.sqrt(test.value)), (test.df[1],)), hand.p(test.p))
    show = one(rng, ["each", "each", "none"])
    means = adjusted if rng.random() < 0.6 else [float(a.mean()), float(b.mean())]
    first, second = (
        hand.group(m, sd(g), len(g) if show == "each" else None) for m, g in zip(means, (a, b), strict=True)
    )
    note = f"N = {len(a) + len(b)} loaves were scored. " if rng.random() < 0.3 else ""
    text = sentences.two_groups(hand, sentences.draw_pair(rng), (first, second), result, means[0] > means[1])
    return Sample(note + text, facts(result))


def omnibus_contrast(rng: np.random.Generator) -> Sample:
    """A contrast of two of several groups on the error term of all (df N − k)."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, int(rng.integers(3, 6)))
    error = computing.one_way(groups).error
    a, b = groups[:2]
    df = sum(map(len, groups)) - len(groups)
    t = float(a.mean() - b.mean()) / np.sqrt(error * (1 / len(a) + 1 / len(b)))
    extras = [hand.effect("d", float(a.mean() - b.mean()) / np.sqrt(error))] if rng.random() < 0.3 else []
    result = hand.join(
        hand.statistic("t", t, (float(df),)), hand.p(float(2 * stats.t.sf(abs(t), df))), *extras
    )
    note = (
        f"N = {sum(map(len, groups))} loaves of {len(groups)} flours were scored. "
        if rng.random() < 0.3
        else ""
    )
    sample = compared(hand, a, b, result, show=one(rng, ["each", "each", "none"]))
    return Sample(note + sample.text, sample.facts)


METHODS = {
    "bonferroni": "All p values were adjusted by the Bonferroni method.",
    "holm": "Comparisons were corrected for multiple testing after Holm.",
    "fdr": "We controlled the false discovery rate (Benjamini-Hochberg).",
    "sidak": "The Šidák correction was applied to all pairwise comparisons.",
    "tukey": "Pairwise comparisons used Tukey's HSD.",
}


def adjusted_p(rng: np.random.Generator) -> Sample:
    """Three comparisons whose p are adjusted, as the method paragraph says."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, 3, 8, 40)
    kind = one(rng, list(METHODS))
    tests = tukey(groups) if kind == "tukey" else adjusted_tests(groups, kind)
    results = [hand.join(hand.statistic("t", t.value, t.df), hand.p(t.p)) for t in tests]
    sizes = rng.random() < 0.5
    pieces = [hand.group(float(g.mean()), sd(g), len(g) if sizes else None) for g in groups]
    listed = "; ".join(f"{n}: {p.text}" for n, p in zip(sentences.NAMES, pieces, strict=False))
    sentence = "; ".join(
        f"{sentences.NAMES[i]} against {sentences.NAMES[j]}{hand.bracket(r)}"
        for (i, j), r in zip(TRIPLE, results, strict=True)
    )
    text = f"{METHODS[kind]}\n\nLoaf heights were, {listed}. Pairwise comparisons followed: {sentence}."
    return Sample(text, tuple(dict(r.values) for r in results), alone=True)


TRIPLE = ((0, 1), (0, 2), (1, 2))


def tukey(groups: list[Values]) -> list[Test]:
    """Comparisons on the common error term, p of the studentized range."""
    error, df = computing.one_way(groups).error, sum(map(len, groups)) - 3
    tests = []
    for i, j in TRIPLE:
        spread = np.sqrt(error * (1 / len(groups[i]) + 1 / len(groups[j])))
        t = float((groups[i].mean() - groups[j].mean()) / spread)
        tests.append(Test(t, (float(df),), float(stats.studentized_range.sf(abs(t) * np.sqrt(2), 3, df))))
    return tests


def adjusted_tests(groups: list[Values], kind: str) -> list[Test]:
    """Pooled t of each pair with p adjusted for the three."""
    plain = [computing.t_test(groups[i], groups[j], pooled=True) for i, j in TRIPLE]
    adjusted = adjust([min(t.p, 1 - 1e-12) for t in plain], kind)
    return [Test(t.value, t.df, p) for t, p in zip(plain, adjusted, strict=True)]


def adjust(p: list[float], kind: str) -> list[float]:
    """Adjust p for several tests (Bonferroni, Holm 1979, Benjamini & Hochberg 1995, Šidák 1967)."""
    from statsmodels.stats.multitest import multipletests  # type: ignore[import-untyped]

    name = {"bonferroni": "bonferroni", "holm": "holm", "fdr": "fdr_bh", "sidak": "sidak"}[kind]
    return [float(v) for v in multipletests(p, method=name)[1]]


def coincide(df: float, a: Values, b: Values) -> bool:
    """Tell whether fractional df are by chance those of a plain test of these groups.

    Nothing in a silent text would then tell the models apart, so such draws are left out.
    """
    plain = (len(a) + len(b) - 2, computing.t_test(a, b, pooled=False).df[0], min(len(a), len(b)) - 1)
    return min(abs(df - other) for other in plain) <= 1


def satterthwaite(rng: np.random.Generator) -> Sample:
    """A comparison within a mixed model: fractional df, model error, raw M and SD of two times."""
    hand = draw_hand(rng)
    n = int(rng.integers(10, 60))
    x = raw.repeated(rng, n, int(rng.integers(3, 5)))
    test, epsilon = computing.repeated_measures(x)
    if not finite(test.value) or test.error < 1e-9:
        return descriptives_only(hand, [x[:, 0]])
    t = float(x[:, 0].mean() - x[:, 1].mean()) / np.sqrt(2 * test.error / n)
    df = float(test.df[1] * epsilon["gg"] * rng.uniform(0.93, 1.0))
    if coincide(df, x[:, 0], x[:, 1]):
        return satterthwaite(rng)
    result = hand.join(hand.statistic("t", t, (df,)), hand.p(float(2 * stats.t.sf(abs(t), df))))
    return compared(hand, x[:, 0], x[:, 1], result, show=one(rng, ["each", "none", "none"]))


def permutation(rng: np.random.Generator) -> Sample:
    """A permutation p beside t, as the method paragraph says."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng, 2, 5, 20)
    test = computing.t_test(a, b, pooled=True)
    every = np.concatenate([a, b])
    shuffled = rng.permuted(np.tile(every, (999, 1)), axis=1)
    gaps = np.abs(shuffled[:, : len(a)].mean(axis=1) - shuffled[:, len(a) :].mean(axis=1))
    p = (1 + int(np.sum(gaps >= abs(test.effect) - 1e-12))) / 1000
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(p))
    method = "All p values come from permutation tests with 999 random orders."
    return compared(hand, a, b, result, method=method)


def missing_cases(rng: np.random.Generator) -> Sample:
    """Cases dropped from the test: df below N − 2, while n or N are those who took part."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    kept_a, kept_b = (
        a[: max(4, int(len(a) * rng.uniform(0.8, 1)))],
        b[: max(4, int(len(b) * rng.uniform(0.8, 1)))],
    )
    test = computing.t_test(kept_a, kept_b, pooled=True)
    if not finite(test.value):
        return descriptives_only(hand, [a, b])
    result = hand.join(
        hand.statistic("t", test.value, test.df), hand.p(test.p), *interval_of_difference(hand, test)
    )
    names, total = sentences.draw_pair(rng), len(a) + len(b)
    note = one(rng, [
        f"A total of N = {total} apprentices took part. ", f"There were {total} apprentices (N = {total}). ",
        f"The {names[0]} had n = {len(a)} and the {names[1]} n = {len(b)} apprentices. ",
    ])  # fmt: skip
    pair = described(hand, kept_a, kept_b, "none")
    if rng.random() < 0.3:
        # A table of all who took part, beside a test of those with all measures.
        pair = described(hand, a, b, "each")
    text = sentences.two_groups(hand, names, pair, result, kept_a.mean() > kept_b.mean())
    return Sample(note + text, facts(result))


def normalised_spread(rng: np.random.Generator) -> Sample:
    """Means with ± the standard error normalised within subjects (Morey 2008), and a paired t."""
    hand = draw_hand(rng)
    n = int(rng.integers(8, 60))
    x = raw.repeated(rng, n, 2)
    test = computing.one_sample(x[:, 0] - x[:, 1])
    if not finite(test.value, test.p):
        return descriptives_only(hand, [x[:, 0]])
    centred = x - x.mean(axis=1, keepdims=True) + x.mean()
    spread = [sd(centred[:, j]) * np.sqrt(2) / np.sqrt(n) for j in range(2)]
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p))
    m = [hand.number(hand.rounded(float(x[:, j].mean()), hand.places["mean"])) for j in range(2)]
    s = [hand.number(hand.rounded(v, hand.places["sd"])) for v in spread]
    note = one(rng, ["", f"All {n} apprentices baked twice. "])
    text = f"{note}Bench scores were {m[0]} ± {s[0]} before and {m[1]} ± {s[1]} after training{hand.bracket(result)}."
    return Sample(text, facts(result))


def marginal_means(rng: np.random.Generator) -> Sample:
    """A main effect of a 2 × 2 design with marginal or cell figures (df N − 4)."""
    hand = draw_hand(rng)
    n = int(rng.integers(6, 40))
    cells = [g[:n] for g in raw.plain_groups(rng, 4, n, n + 20)]
    first, _, _ = computing.two_way([cells[:2], cells[2:]])
    a, b = np.concatenate(cells[:2]), np.concatenate(cells[2:])
    sign = np.sign(a.mean() - b.mean())
    statistic = (
        hand.statistic("F", first.value, first.df) if rng.random() < 0.6
        else hand.statistic("t", float(sign * np.sqrt(first.value)), first.df[1:])
    )  # fmt: skip
    result = hand.join(statistic, hand.p(first.p))
    if rng.random() < 0.5:
        return compared(hand, a, b, result, show=one(rng, ["each", "none", "total"]))
    spreads = [np.sqrt((np.var(x, ddof=1) + np.var(y, ddof=1)) / 2) for x, y in (cells[:2], cells[2:])]
    pooled_cells = [
        hand.group(float(g.mean()), float(s), len(g) if n % 2 else None)
        for g, s in zip((a, b), spreads, strict=True)
    ]
    pair = (pooled_cells[0], pooled_cells[1])
    text = sentences.two_groups(hand, sentences.draw_pair(rng), pair, result, a.mean() > b.mean())
    return Sample(text, facts(result))


def absolute_t(rng: np.random.Generator) -> Sample:
    """t without its sign, or of the other order, beside a signed d or interval."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    test = computing.t_test(a, b, pooled=True)
    d = test.effect / computing.pooled_sd(a, b)
    t = abs(test.value) if rng.random() < 0.6 else -test.value
    extras = [hand.effect("d", d)] if rng.random() < 0.5 else interval_of_difference(hand, test)
    result = hand.join(hand.statistic("t", t, test.df), hand.p(test.p), *extras)
    return compared(hand, a, b, result)


def robust_error(rng: np.random.Generator) -> Sample:
    """t with a heteroscedasticity-consistent error (HC3) and df N − 2, as the method paragraph says."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    error = np.sqrt(sum(float(np.sum((g - g.mean()) ** 2)) / (len(g) - 1) ** 2 for g in (a, b)))
    df = len(a) + len(b) - 2
    t = float(a.mean() - b.mean()) / error
    result = hand.join(hand.statistic("t", t, (float(df),)), hand.p(float(2 * stats.t.sf(abs(t), df))))
    method = one(
        rng,
        [
            "All models used robust standard errors (HC3).",
            "Standard errors are heteroscedasticity-consistent (HC3).",
        ],
    )
    return compared(hand, a, b, result, method=method)


OTHER_T: dict[str, Generator] = {
    "normal p behind t": normal_p, "Welch df whole": welch_whole_df, "one-tailed silent": one_tailed,
    "ANCOVA t": ancova_means, "contrast on omnibus error": omnibus_contrast, "adjusted p": adjusted_p,
    "Satterthwaite df": satterthwaite, "permutation p": permutation, "missing cases": missing_cases,
    "within-subject SE": normalised_spread, "marginal means": marginal_means, "sign conventions": absolute_t,
    "robust SE": robust_error,
}  # fmt: skip
