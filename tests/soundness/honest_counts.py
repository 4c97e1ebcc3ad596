"""Honest results of counts: χ² of tables, goodness of fit, two proportions, a logistic slope."""

from __future__ import annotations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw
from tests.soundness.computing import finite
from tests.soundness.hand import draw_hand, one
from tests.soundness.samples import Generator, Piece, Sample


def draw_table(
    rng: np.random.Generator, rows: int, columns: int, low: int = 8, high: int = 250
) -> raw.Values:
    """Counts of a table whose rows may differ in their shares; no row or column is empty."""
    while True:
        shares = rng.dirichlet(np.full(columns, 3.0))
        other = rng.dirichlet(np.full(columns, 3.0)) if rng.random() < 0.6 else shares
        drawn = [
            rng.multinomial(int(rng.integers(low, high)), shares if i % 2 else other) for i in range(rows)
        ]
        table: raw.Values = np.array(drawn)
        if np.all(table.sum(axis=0) > 0):
            return table


def chi2_table(rng: np.random.Generator) -> Sample:
    """Pearson's χ² of an r × c table, with φ or V at times."""
    hand = draw_hand(rng)
    rows, columns = int(rng.integers(2, 5)), int(rng.integers(2, 5))
    table = draw_table(rng, rows, columns)
    found = stats.chi2_contingency(table, correction=False)
    n = int(table.sum())
    extra = one(rng, ["", f", N = {n}", f", n = {n}"]).replace(", ", "; " if hand.comma else ", ")
    effects = []
    if rng.random() < 0.4:
        size = np.sqrt(found.statistic / n / (min(rows, columns) - 1))
        two_by_two = rows == columns == 2
        effects.append(hand.effect("phi" if two_by_two else "cramers_v", float(size)))
    result = hand.join(
        hand.statistic("chi2", found.statistic, (float(found.dof),), extra), hand.p(found.pvalue), *effects
    )
    text = f"The choice of crust depended on the flour or not{hand.bracket(result)}."
    return Sample(text, (dict(result.values),))


def chi2_fit(rng: np.random.Generator) -> Sample:
    """χ² of goodness of fit."""
    hand = draw_hand(rng)
    counts = rng.multinomial(int(rng.integers(10, 400)), rng.dirichlet(np.full(int(rng.integers(2, 6)), 4.0)))
    found = stats.chisquare(counts)
    result = hand.join(
        hand.statistic("chi2", found.statistic, (float(len(counts) - 1),)), hand.p(found.pvalue)
    )
    text = f"The tasters' first choices were spread evenly or not over the loaves{hand.bracket(result)}."
    return Sample(text, (dict(result.values),))


def chi2_counts(rng: np.random.Generator) -> Sample:
    """A 2 × 2 table told in words with its χ²."""
    hand = draw_hand(rng)
    table = draw_table(rng, 2, 2)
    found = stats.chi2_contingency(table, correction=False)
    result = hand.join(hand.statistic("chi2", found.statistic, (1.0,)), hand.p(found.pvalue))
    told = " and ".join(
        f"{row[0]} of {row.sum()} ({hand.number(hand.rounded(100 * row[0] / row.sum(), 1))}%) {name} loaves"
        for row, name in zip(table, ("rye", "wheat"), strict=True)
    )
    return Sample(f"A split crust was found in {told}{hand.bracket(result)}.", (dict(result.values),))


def two_proportions(rng: np.random.Generator) -> Sample:
    """z of two proportions with the pooled standard error."""
    hand = draw_hand(rng)
    (x1, y1), (x2, y2) = draw_table(rng, 2, 2)
    n1, n2 = x1 + y1, x2 + y2
    p1, p2, share = x1 / n1, x2 / n2, (x1 + x2) / (n1 + n2)
    z = (p1 - p2) / np.sqrt(share * (1 - share) * (1 / n1 + 1 / n2))
    result = hand.join(hand.statistic("z", float(z), ()), hand.p(float(2 * stats.norm.sf(abs(z)))))
    text = f"The shares of split loaves were {x1}/{n1} and {x2}/{n2}{hand.bracket(result)}."
    return Sample(text, (dict(result.values),))


def logistic(rng: np.random.Generator) -> Sample:
    """A Wald z, or its square as χ², of a logistic slope with b and SE or the odds ratio and CI."""
    hand = draw_hand(rng)
    n = int(rng.integers(20, 400))
    x = rng.standard_normal(n)
    y = (rng.random(n) < 1 / (1 + np.exp(-(0.3 + rng.normal() * x)))).astype(float)
    b, se = computing.logistic(x, y)
    if not finite(b, se) or se > 50:
        return chi2_fit(rng)
    z = b / se
    test = hand.statistic("z", z, ()) if rng.random() < 0.6 else hand.statistic("chi2", z * z, (1.0,))
    result = hand.join(test, hand.p(float(2 * stats.norm.sf(abs(z)))))
    if rng.random() < 0.5:
        shown = [hand.effect("b", b), hand.effect("se", se, "SE")]
    else:
        half = 1.959963984540054 * se
        shown = [
            hand.effect("or", float(np.exp(b))),
            hand.interval(float(np.exp(b - half)), float(np.exp(b + half))),
        ]
    listed = hand.separator.join(piece.text for piece in shown)
    return Sample(
        f"Proofing time predicted a split crust or not, {listed}, {result.text}.", (dict(result.values),)
    )


def descriptives(rng: np.random.Generator) -> Sample:
    """Means and spreads alone, zero variance and huge means among them."""
    hand = draw_hand(rng)
    listed: list[Piece] = []
    drawn = raw.groups(rng, int(rng.integers(1, 4)))
    for values in drawn:
        se = rng.random() < 0.2
        spread = computing.sd(values) / (np.sqrt(len(values)) if se else 1)
        listed.append(hand.group(float(values.mean()), spread, len(values), "SE" if se else "SD"))
    rated = all(np.all((v >= 1) & (v <= 7) & (v == np.round(v))) for v in drawn)
    scale = " on a scale from 1 to 7" if rated else ""
    text = (
        f"Scores were noted{scale}: "
        + "; ".join(f"batch {i + 1}, {p.text}" for i, p in enumerate(listed))
        + "."
    )
    return Sample(text)


COUNTS: dict[str, Generator] = {
    "chi2 table": chi2_table, "chi2 fit": chi2_fit, "chi2 counts": chi2_counts,
    "two proportions": two_proportions, "logistic": logistic, "descriptives": descriptives,
}  # fmt: skip
