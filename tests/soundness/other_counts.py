"""Honest results of counts and ranks by another test than the statistic suggests."""

from __future__ import annotations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw, sentences
from tests.soundness.computing import Values, finite
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.honest_counts import draw_table
from tests.soundness.samples import Generator, Piece, Sample


def counted(hand: Hand, table: Values, result: Piece, told: bool) -> Sample:
    """A 2 × 2 table, in words where `told`, with its result."""
    if told:
        rows = " and ".join(
            f"{r[0]} of {r.sum()} {w} loaves" for r, w in zip(table, ("rye", "wheat"), strict=True)
        )
        text = f"A split crust was found in {rows}{hand.bracket(result)}."
    else:
        text = f"Split crusts depended on the flour or not{hand.bracket(result)}."
    return Sample(text.replace("..", "."), (dict(result.values),))


def small_table(rng: np.random.Generator) -> Values:
    """A 2 × 2 table of 20 to 500."""
    n = int(rng.choice([12, 20, 40, 80, 250]))
    return draw_table(rng, 2, 2, max(8, n // 2), n + 1)


def other_p_of_table(rng: np.random.Generator) -> Sample:
    """Pearson's χ² of a 2 × 2 table with the p of Fisher, Yates, N − 1 or the likelihood ratio."""
    hand, table = draw_hand(rng), small_table(rng)
    plain = stats.chi2_contingency(table, correction=False)
    n = int(table.sum())
    ps = {
        "fisher": stats.fisher_exact(table)[1],
        "yates": stats.chi2_contingency(table, correction=True).pvalue,
        "n-1": stats.chi2.sf(plain.statistic * (n - 1) / n, 1),
        "ratio": stats.chi2_contingency(table, correction=False, lambda_="log-likelihood").pvalue,
    }
    p = float(ps[one(rng, list(ps))])
    extra = "" if hand.comma else one(rng, ["", f", N = {n}"])
    result = hand.join(hand.statistic("chi2", plain.statistic, (1.0,), extra), hand.p(p))
    return counted(hand, table, result, told=bool(rng.random() < 0.5))


def other_chi2(rng: np.random.Generator) -> Sample:
    """χ² by Yates, N − 1 or the likelihood ratio with its own p and φ of the plain one."""
    hand, table = draw_hand(rng), small_table(rng)
    plain = stats.chi2_contingency(table, correction=False)
    n = int(table.sum())
    yates = stats.chi2_contingency(table, correction=True).statistic
    ratio = stats.chi2_contingency(table, correction=False, lambda_="log-likelihood").statistic
    value = float([yates, plain.statistic * (n - 1) / n, ratio][rng.integers(3)])
    phi = float(np.sqrt(plain.statistic / n))
    effects = [hand.effect("phi", phi)] if rng.random() < 0.5 else []
    extra = "" if hand.comma else one(rng, ["", f", N = {n}"])
    result = hand.join(
        hand.statistic("chi2", value, (1.0,), extra), hand.p(float(stats.chi2.sf(value, 1))), *effects
    )
    return counted(hand, table, result, told=bool(rng.random() < 0.5))


def monte_carlo(rng: np.random.Generator) -> Sample:
    """χ² of a small r × c table with an exact or simulated p, stated or silent."""
    hand = draw_hand(rng)
    table = draw_table(rng, int(rng.integers(2, 4)), int(rng.integers(3, 5)), 6, 25)
    plain = stats.chi2_contingency(table, correction=False)
    draws = stats.random_table(table.sum(axis=1), table.sum(axis=0)).rvs(1999, random_state=rng)
    expected = plain.expected_freq
    simulated = np.sum((draws - expected) ** 2 / expected, axis=(1, 2))
    p = (1 + int(np.sum(simulated >= plain.statistic - 1e-9))) / 2000
    result = hand.join(hand.statistic("chi2", plain.statistic, (float(plain.dof),)), hand.p(p))
    said = one(rng, ["", " by Fisher's exact test", " (p simulated)"])
    return Sample(
        f"The choice of crust was compared{said}{hand.bracket(result)}.".replace("..", "."),
        (dict(result.values),),
    )


def mcnemar(rng: np.random.Generator) -> Sample:
    """McNemar's χ² of pairs beside the two shares, which say nothing of it."""
    hand = draw_hand(rng)
    n = int(rng.integers(30, 200))
    both = rng.multinomial(n, rng.dirichlet([5, 2, 2, 5]))
    b, c = int(both[1]), int(both[2])
    if b + c == 0:
        return Sample("No taster changed the choice.")
    value = (abs(b - c) - 1) ** 2 / (b + c) if rng.random() < 0.5 else (b - c) ** 2 / (b + c)
    result = hand.join(hand.statistic("chi2", value, (1.0,)), hand.p(float(stats.chi2.sf(value, 1))))
    shares = f"{both[0] + b} of {n} tasters before and {both[0] + c} of {n} after the change"
    return Sample(
        f"Sour loaves were liked by {shares}{hand.bracket(result)}.".replace("..", "."),
        (dict(result.values),),
    )


def unpooled_z(rng: np.random.Generator) -> Sample:
    """z of two proportions with the unpooled error, beside their counts."""
    hand = draw_hand(rng)
    (x1, y1), (x2, y2) = draw_table(rng, 2, 2, 20, 200)
    n1, n2 = x1 + y1, x2 + y2
    p1, p2 = x1 / n1, x2 / n2
    error = np.sqrt(p1 * (1 - p1) / n1 + p2 * (1 - p2) / n2)
    if not error:
        return Sample("All loaves split.")
    z = float((p1 - p2) / error)
    result = hand.join(hand.statistic("z", z, ()), hand.p(float(2 * stats.norm.sf(abs(z)))))
    return Sample(
        f"Crusts split in {x1}/{n1} and {x2}/{n2} loaves{hand.bracket(result)}.".replace("..", "."),
        (dict(result.values),),
    )


def mann_whitney(rng: np.random.Generator) -> Sample:
    """U and z of ranks, ties and continuity in z or not, with the normal or the exact p."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng, 2, 4, 25)
    n1, n2 = len(a), len(b)
    u = float(stats.mannwhitneyu(a, b, method="asymptotic").statistic)
    _, ties = np.unique(np.concatenate([a, b]), return_counts=True)
    n = n1 + n2
    variance = n1 * n2 / 12 * (n + 1 - np.sum(ties**3 - ties) / (n * (n - 1)))
    if variance <= 0:
        return Sample("All loaves were scored alike.")
    z = (u - n1 * n2 / 2) / np.sqrt(variance)
    exact = bool(rng.random() < 0.4)
    p = stats.mannwhitneyu(a, b, method="exact" if exact and max(ties) == 1 else "asymptotic").pvalue
    named = bool(rng.random() < 0.7)
    u_shown = (
        f"U{hand.relation('=')}{hand.number(hand.rounded(u, 1))}{hand.separator}"
        if rng.random() < 0.7
        else ""
    )
    effect = [hand.effect("r", z / np.sqrt(n))] if rng.random() < 0.3 else []
    parts = hand.join(hand.statistic("z", float(z), ()), hand.p(float(p)), *effect)
    result = Piece(u_shown + parts.text, parts.values)
    said = " by the Mann-Whitney test" if named or not u_shown else ""
    groups = (
        [hand.group(float(g.mean()), computing.sd(g), len(g)) for g in (a, b)] if rng.random() < 0.5 else []
    )
    means = f" (rye {groups[0].text}; wheat {groups[1].text})" if groups else ""
    values = {k: v for k, v in parts.values.items() if k in ("z", "p")}
    return Sample(
        f"Crumb ranks were compared{said}{means}{hand.bracket(result)}.".replace("..", "."), (values,)
    )


def wilcoxon(rng: np.random.Generator) -> Sample:
    """z of signed ranks with the exact p, beside means before and after."""
    hand = draw_hand(rng)
    n = int(rng.integers(6, 40))
    x = raw.repeated(rng, n, 2)
    gaps = x[:, 0] - x[:, 1]
    gaps = gaps[gaps != 0]
    m = len(gaps)
    if m < 5:
        return Sample("Hardly any apprentice changed.")
    ranks = stats.rankdata(np.abs(gaps))
    w = float(ranks[gaps > 0].sum())
    z = (w - m * (m + 1) / 4) / np.sqrt(np.sum(ranks**2) / 4)
    tied = len(np.unique(np.abs(gaps))) < m
    p = 2 * stats.norm.sf(abs(z)) if tied else stats.wilcoxon(gaps, method="exact").pvalue
    result = hand.join(hand.statistic("z", float(z), ()), hand.p(float(p)))
    groups = [hand.group(float(c.mean()), computing.sd(c), n) for c in x.T]
    text = f"Wilcoxon's signed-rank test compared scores before ({groups[0].text}) and after training ({groups[1].text}){hand.bracket(result)}."
    return Sample(text.replace("..", "."), (dict(result.values),))


def kruskal(rng: np.random.Generator) -> Sample:
    """Kruskal and Wallis's H or Friedman's χ² with the groups' M and SD beside it."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, int(rng.integers(3, 5)), 5, 40)
    if rng.random() < 0.6:
        value, p = stats.kruskal(*groups)
        symbol = one(rng, ["H", "H", "χ²"])
    else:
        x = raw.repeated(rng, int(rng.integers(6, 40)), len(groups))
        groups = list(x.T)
        value, p = stats.friedmanchisquare(*groups)
        symbol = "χ²"
    if not finite(float(value), float(p)):
        return Sample("All flours were scored alike.")
    shown = hand.statistic_told(
        "chi2", hand.rounded(float(value), 2), (float(len(groups) - 1),), symbol=symbol
    )
    result = hand.join(shown, hand.p(float(p)))
    pieces = (
        [hand.group(float(g.mean()), computing.sd(g), len(g)) for g in groups] if rng.random() < 0.6 else []
    )
    return Sample(
        sentences.several_groups(hand, pieces, result), (dict(result.values),) if symbol != "H" else ()
    )


OTHER_COUNTS: dict[str, Generator] = {
    "other p beside chi2": other_p_of_table, "other chi2 beside counts": other_chi2,
    "simulated p beside chi2": monte_carlo, "McNemar": mcnemar, "unpooled z": unpooled_z,
    "Mann-Whitney z": mann_whitney, "Wilcoxon z": wilcoxon, "Kruskal-Wallis, Friedman": kruskal,
}  # fmt: skip
