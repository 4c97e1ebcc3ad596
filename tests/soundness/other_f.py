"""Honest F tests and correlations of another model than the text lets one think."""

from __future__ import annotations

from itertools import permutations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw, sentences
from tests.soundness.computing import Test, finite, sd
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.honest import descriptives_only, facts
from tests.soundness.samples import Generator, Piece, Sample


def f_result(hand: Hand, test: Test, *extras: Piece, p: float | None = None) -> Piece:
    """An F with its p and what stands beside it."""
    return hand.join(hand.statistic("F", test.value, test.df), hand.p(test.p if p is None else p), *extras)


def gg_nominal(rng: np.random.Generator) -> Sample:
    """The corrected p of a repeated measures F beside its nominal df."""
    hand = draw_hand(rng)
    n, k = int(rng.integers(6, 50)), int(rng.integers(3, 7))
    x = raw.repeated(rng, n, k)
    test, epsilons = computing.repeated_measures(x)
    if not finite(test.value) or test.error < 1e-12:
        return descriptives_only(hand, [x[:, 0]])
    epsilon = epsilons[one(rng, ["gg", "gg", "hf", "lower"])]
    p = float(stats.f.sf(test.value, *(d * epsilon for d in test.df)))
    extras = [hand.effect("partial_eta2", test.effect)] if rng.random() < 0.4 else []
    result = f_result(hand, test, *extras, p=p)
    pieces = [hand.group(float(c.mean()), sd(c), None) for c in x.T] if rng.random() < 0.4 and k < 6 else []
    return Sample(sentences.several_groups(hand, pieces, result), facts(result))


def gg_rounded_df(rng: np.random.Generator) -> Sample:
    """The corrected p with corrected df that are rounded to whole numbers."""
    hand = draw_hand(rng)
    x = raw.repeated(rng, int(rng.integers(6, 50)), int(rng.integers(3, 7)))
    test, epsilons = computing.repeated_measures(x)
    if not finite(test.value) or test.error < 1e-12:
        return descriptives_only(hand, [x[:, 0]])
    df = tuple(d * epsilons["gg"] for d in test.df)
    corrected = Test(test.value, tuple(float(np.round(d)) for d in df), float(stats.f.sf(test.value, *df)))
    result = f_result(hand, corrected)
    return Sample(
        sentences.lone(hand, result, "bench scores changed over the weeks or did not"), facts(result)
    )


def repeated_with_groups(rng: np.random.Generator) -> Sample:
    """A repeated measures F with each time's M and SD; nothing says that times repeat."""
    hand = draw_hand(rng)
    n, k = int(rng.integers(5, 50)), int(rng.integers(2, 5))
    x = raw.repeated(rng, n, k)
    test, _ = computing.repeated_measures(x)
    if not finite(test.value) or test.error < 1e-12:
        return descriptives_only(hand, [x[:, 0]])
    shown = n if rng.random() < 0.4 else None
    pieces = [hand.group(float(c.mean()), sd(c), shown) for c in x.T]
    effect = one(rng, ["", "eta2", "partial_eta2"])
    extras = [hand.effect(effect, test.effect)] if effect else []
    result = f_result(hand, test, *extras)
    note = f"N = {n} tasters scored all loaves. " if rng.random() < 0.3 else ""
    return Sample(sentences.several_groups(hand, pieces, result, "", note), facts(result))


def ancova_f(rng: np.random.Generator) -> Sample:
    """The F of an ANCOVA (df N − k − 1) beside raw or adjusted means and raw SD."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, int(rng.integers(2, 5)))
    covariates = [
        0.7 * (g - g.mean()) / (sd(g) + 1e-9) + rng.normal(size=len(g)) + rng.normal() * 0.5 for g in groups
    ]
    test, adjusted = computing.ancova(groups, covariates)
    means = adjusted if rng.random() < 0.6 else [float(g.mean()) for g in groups]
    shown = rng.random() < 0.5
    pieces = [hand.group(m, sd(g), len(g) if shown else None) for m, g in zip(means, groups, strict=True)]
    extras = [hand.effect("partial_eta2", test.effect)] if rng.random() < 0.4 else []
    result = f_result(hand, test, *extras)
    note = f"N = {sum(map(len, groups))} loaves were scored. " if rng.random() < 0.3 else ""
    return Sample(sentences.several_groups(hand, pieces, result, "", note), facts(result))


def welch_f(rng: np.random.Generator) -> Sample:
    """Welch's one-way F (1951) with its fractional, floored or rounded second df."""
    from statsmodels.stats.oneway import anova_oneway  # type: ignore[import-untyped]

    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, int(rng.integers(2, 5)), 5, 50)
    found = anova_oneway(groups, use_var="unequal", welch_correction=True)
    df2 = [float(found.df_denom), float(np.floor(found.df_denom)), float(np.round(found.df_denom))][
        rng.integers(3)
    ]
    test = Test(float(found.statistic), (len(groups) - 1.0, df2), float(found.pvalue))
    shown = rng.random() < 0.6
    pieces = [hand.group(float(g.mean()), sd(g), len(g) if shown else None) for g in groups]
    result = f_result(hand, test)
    return Sample(
        sentences.several_groups(hand, pieces, result, one(rng, ["", "By Welch's ANOVA"])), facts(result)
    )


def classical_eta2(rng: np.random.Generator) -> Sample:
    """η² of the total sum of squares beside an F of a larger design: smaller than F and df imply."""
    hand = draw_hand(rng)
    n = int(rng.integers(5, 30))
    cells = [[g[:n] for g in raw.plain_groups(rng, 3, n, n + 10)] for _ in range(2)]
    tests = computing.two_way(cells)
    every = np.concatenate([c for row in cells for c in row])
    total = float(np.sum((every - every.mean()) ** 2))
    share = tests[1].value * tests[1].df[0] * tests[1].error / total
    name = one(rng, ["eta2", "eta2", "generalized"])
    effect = hand.effect("eta2", share) if name == "eta2" else hand.effect("generalized_eta2", share, "η²G")
    result = f_result(hand, tests[1], effect)
    return Sample(sentences.lone(hand, result, "the flours differed or did not"), facts(result))


def other_shares(rng: np.random.Generator) -> Sample:
    """ω² and ε² of a one-way F, negative ones among them, or a partial η² that is called η²."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, int(rng.integers(2, 5)), 5, 50)
    test, n = computing.one_way(groups), sum(map(len, groups))
    df1 = test.df[0]
    omega2 = df1 * (test.value - 1) / (df1 * (test.value - 1) + n)
    epsilon2 = df1 * (test.value - 1) / (df1 * test.value + test.df[1])
    name, value = (("omega2", omega2), ("epsilon2", epsilon2))[rng.integers(2)]
    value = max(0.0, value) if rng.random() < 0.5 else value
    result = f_result(hand, test, hand.effect(name, float(value)))
    return Sample(sentences.several_groups(hand, [], result), facts(result))


def multivariate(rng: np.random.Generator) -> Sample:
    """The multivariate test of repeated measures: exact F with df (k − 1, n − k + 1)."""
    hand = draw_hand(rng)
    n, k = int(rng.integers(8, 50)), int(rng.integers(3, 5))
    x = raw.repeated(rng, n, k)
    gaps = np.diff(x, axis=1)
    covariance = np.cov(gaps, rowvar=False)
    if np.linalg.cond(covariance) > 1e9:
        return descriptives_only(hand, [x[:, 0]])
    mean = gaps.mean(axis=0)
    hotelling = n * float(mean @ np.linalg.solve(covariance, mean))
    df = (k - 1.0, float(n - k + 1))
    value = hotelling * df[1] / (df[0] * (n - 1))
    p = float(stats.f.sf(value, *df))
    effect = value * df[0] / (value * df[0] + df[1])
    result = f_result(hand, Test(value, df, p), hand.effect("partial_eta2", effect))
    pieces = [hand.group(float(c.mean()), sd(c), None) for c in x.T] if rng.random() < 0.4 else []
    note = one(rng, ["", f"All {n} apprentices were scored {k} times. "])
    return Sample(sentences.several_groups(hand, pieces, result, "", note), facts(result))


def one_tailed_f(rng: np.random.Generator) -> Sample:
    """F with one df above and a one-tailed p, half of what the tail of F gives."""
    hand = draw_hand(rng)
    test = computing.one_way(raw.plain_groups(rng, 2))
    result = f_result(hand, test, p=test.p / 2)
    return Sample(sentences.lone(hand, result, "the planned comparison was made"), facts(result))


def r_with_n(rng: np.random.Generator) -> Sample:
    """r(30) where 30 is n, so that p has 28 degrees of freedom."""
    hand = draw_hand(rng)
    n = int(rng.integers(6, 120))
    x = raw.repeated(rng, n, 2)
    if min(np.ptp(x[:, 0]), np.ptp(x[:, 1])) < 1e-9:
        return descriptives_only(hand, [x[:, 0]])
    found = stats.pearsonr(x[:, 0], x[:, 1])
    result = hand.join(hand.statistic("r", float(found.statistic), (float(n),)), hand.p(float(found.pvalue)))
    note = f"N = {n} loaves were measured. " if rng.random() < 0.3 else ""
    return Sample(
        note + sentences.lone(hand, result, "height went with crumb score or did not"), facts(result)
    )


def rank_p(first: computing.Values, second: computing.Values, r: float, exact: bool) -> float:
    """p of a rank correlation: over all orders of up to seven loaves, else by the t approximation."""
    n = len(first)
    if exact and n <= 7:
        a, b = (stats.zscore(stats.rankdata(v)) for v in (first, second))
        orders = np.array(list(permutations(b)))
        return float(np.mean(np.abs(orders @ a / n) >= abs(r) - 1e-12))
    return float(stats.spearmanr(first, second).pvalue)


def spearman(rng: np.random.Generator) -> Sample:
    """A rank correlation with its exact p if small, called so by its symbol or not at all."""
    hand = draw_hand(rng)
    n = int(rng.integers(5, 8)) if rng.random() < 0.5 else int(rng.integers(8, 60))
    x = raw.repeated(rng, n, 2)
    if min(np.ptp(x[:, 0]), np.ptp(x[:, 1])) < 1e-9:
        return descriptives_only(hand, [x[:, 0]])
    r = float(stats.spearmanr(x[:, 0], x[:, 1]).statistic)
    p = rank_p(x[:, 0], x[:, 1], r, exact=bool(rng.random() < 0.8))
    df = f"({n - 2})" if rng.random() < 0.6 else ""
    symbol = one(rng, ["rs", "r_s", "ρ", "rho", "r", "Spearman's r"])
    shown = f"{symbol}{df}{hand.relation('=')}{hand.number(hand.rounded(r, 2), True)}"
    result = Piece(f"{shown}{hand.separator}{hand.p(p).text}")
    subject = one(rng, ["Height went with crumb score or did not", "Ranks of height and crumb were compared"])
    return Sample(f"{subject}{hand.bracket(result)}.".replace("..", "."))


def partial_r(rng: np.random.Generator) -> Sample:
    """A partial correlation with df n − 3, N beside it; the text calls it partial or not."""
    hand = draw_hand(rng)
    n = int(rng.integers(8, 100))
    x = rng.standard_normal((n, 3)) + rng.standard_normal((n, 1)) * 0.7
    residual = [x[:, j] - np.polyval(np.polyfit(x[:, 2], x[:, j], 1), x[:, 2]) for j in range(2)]
    r = float(np.corrcoef(residual[0], residual[1])[0, 1])
    t = r * np.sqrt((n - 3) / (1 - r * r))
    result = hand.join(hand.statistic("r", r, (float(n - 3),)), hand.p(float(2 * stats.t.sf(abs(t), n - 3))))
    said = one(rng, ["", "controlling for flour, "])
    note = f"N = {n} loaves were measured. " if rng.random() < 0.5 else ""
    return Sample(
        note + sentences.lone(hand, result, f"{said}height went with crumb score or did not"), facts(result)
    )


def one_tailed_r(rng: np.random.Generator) -> Sample:
    """A one-tailed p of r."""
    hand = draw_hand(rng)
    n = int(rng.integers(6, 120))
    x = rng.standard_normal((n, 2)) + rng.standard_normal((n, 1)) * 0.5
    found = stats.pearsonr(x[:, 0], x[:, 1])
    result = hand.join(
        hand.statistic("r", float(found.statistic), (float(n - 2),)), hand.p(float(found.pvalue) / 2)
    )
    return Sample(sentences.lone(hand, result, "height went with crumb score or did not"), facts(result))


OTHER_F: dict[str, Generator] = {
    "Greenhouse-Geisser p, nominal df": gg_nominal, "Greenhouse-Geisser df whole": gg_rounded_df,
    "repeated F with M and SD": repeated_with_groups, "ANCOVA F": ancova_f, "Welch F": welch_f,
    "classical eta squared": classical_eta2, "omega and epsilon squared": other_shares,
    "multivariate F": multivariate, "one-tailed F": one_tailed_f, "r(n)": r_with_n, "Spearman exact p": spearman,
    "partial r": partial_r, "one-tailed r": one_tailed_r,
}  # fmt: skip
