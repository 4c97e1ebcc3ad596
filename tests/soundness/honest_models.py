"""Honest tables of models: sources of variance, coefficients, correlations."""

from __future__ import annotations

import warnings

import numpy as np
import statsmodels.api as sm  # type: ignore[import-untyped]
from scipy import stats

from tests.soundness import computing
from tests.soundness.hand import one
from tests.soundness.samples import Generator, Sample
from tests.soundness.tabling import (
    SCORES,
    STAR_NOTE,
    alone,
    draw_design,
    markdown,
    p_cell,
    scores,
    stars,
    table_hand,
)

Rng = np.random.Generator


def source_table(rng: Rng) -> Sample:
    """An ANOVA source table: one-way, two-way (unbalanced), or with a random factor below."""
    hand = table_hand(rng)
    places, kind = int(rng.choice([1, 2, 3])), one(rng, ["one-way", "two-way", "random"])

    def line(name: str, ss: float, df: int, below: float | None, p_df: int, errors: float) -> list[str]:
        ms = ss / df
        cells = [name, hand.number(hand.rounded(ss, places)), str(df), hand.number(hand.rounded(ms, places))]
        if below is None:
            return [*cells, "", "", ""]
        F = ms / below
        eta = hand.number(hand.rounded(ss / (ss + errors), 2 if rng.random() < 0.5 else 3), True)
        return [*cells, hand.number(hand.rounded(F, 2)), p_cell(hand, float(stats.f.sf(F, df, p_df))), eta]

    if kind == "one-way":
        data = scores(rng, list(draw_design(rng, high=40).sizes), "normal")
        test = computing.one_way(data)
        n, k = sum(map(len, data)), len(data)
        within = test.error * (n - k)
        between = test.value * test.error * (k - 1)
        rows = [
            line("Flour", between, k - 1, test.error, n - k, within),
            line("Error", within, n - k, None, 0, 0),
        ]
        rows.append(
            ["Total", hand.number(hand.rounded(between + within, places)), str(n - 1), "", "", "", ""]
        )
    else:
        a, b, n = int(rng.integers(2, 4)), int(rng.integers(2, 4)), int(rng.integers(4, 15))
        ss = rng.chisquare([a - 1, b - 1, (a - 1) * (b - 1), a * b * (n - 1)]) * rng.uniform(1, 6, size=4)
        df = (a - 1, b - 1, (a - 1) * (b - 1), a * b * (n - 1))
        error = ss[3] / df[3]
        below = (ss[2] / df[2], df[2], ss[2]) if kind == "random" else (error, df[3], ss[3])
        rows = [
            line("Flour", ss[0], df[0], *below),
            line("Oven", ss[1], df[1], error, df[3], ss[3]),
            line("Flour × oven", ss[2], df[2], error, df[3], ss[3]),
            line("Error", ss[3], df[3], None, 0, 0),
        ]
    head = [
        "Source",
        "SS",
        "df",
        "MS",
        "F",
        "p",
        "partial η²" if rng.random() < 0.7 or kind != "one-way" else "η²",
    ]
    return alone(markdown("Table 3. Analysis of variance of loaf height.", head, rows))


def regression(rng: Rng) -> Sample:
    """Linear or logistic regression in rows, plain or robust SE, Wald or other p, with or without a CI."""
    hand = table_hand(rng)
    n = int(rng.integers(25, 300))
    names = [
        str(x) for x in rng.permutation(["Proofing time", "Oven heat", "Hydration", "Age", "Rye share"])[:3]
    ]
    x = sm.add_constant(rng.normal(size=(n, 3)))
    beta = rng.normal(0, 0.5, size=4)
    logistic = rng.random() < 0.4
    places = int(rng.choice([2, 2, 3]))
    with warnings.catch_warnings(), np.errstate(all="ignore"):
        warnings.simplefilter("ignore")
        if logistic:
            fit = sm.Logit((rng.random(n) < 1 / (1 + np.exp(-x @ beta))).astype(float), x).fit(disp=False)
        else:
            robust = rng.random() < 0.25
            fit = sm.OLS(x @ beta + rng.standard_t(5, size=n), x).fit(
                cov_type="HC3" if robust else "nonrobust"
            )
    if not computing.finite(*fit.params, *fit.bse) or np.max(fit.bse) > 20:
        return regression(rng)
    shows_ci = rng.random() < 0.6
    rows = []
    for i, name in enumerate(["(Intercept)", *names]):
        values = [fit.params[i], fit.bse[i]]
        cells = [name, *(hand.number(hand.rounded(float(v), places)) for v in values)]
        t = float(fit.tvalues[i])
        cells.append(hand.number(hand.rounded(t * t if logistic else t, 2)))
        low, high = (float(v) for v in fit.conf_int()[i])
        if logistic:
            cells.append(hand.number(hand.rounded(float(np.exp(fit.params[i])), places)))
            low, high = float(np.exp(low)), float(np.exp(high))
        if shows_ci:
            joint = " to " if not hand.comma else "; "
            cells.append(joint.join(hand.number(hand.rounded(v, places)) for v in (low, high)))
        rows.append([*cells, p_cell(hand, float(fit.pvalues[i]))])
    middle = ["Wald", "OR"] if logistic else ["t"]
    head = ["Predictor", "b", "SE", *middle, *(["95% CI"] if shows_ci else []), "p"]
    what = "Logistic regression of a split crust" if logistic else "Regression of loaf height"
    return alone(markdown(f"Table 4. {what}.", head, rows))


def correlations(rng: Rng) -> Sample:
    """The lower triangle of a correlation matrix with stars; answers missing pair by pair."""
    hand = table_hand(rng)
    n, k = int(rng.integers(12, 200)), int(rng.integers(3, 6))
    x = rng.normal(size=(n, k)) + rng.normal(size=(n, 1)) * float(rng.uniform(0, 1))
    gone = rng.random((n, k)) < float(rng.choice([0, 0, 0.08]))
    spearman = rng.random() < 0.25
    names = [f"{i + 1}. {name.split(',')[0]}" for i, name in enumerate(rng.permutation(SCORES)[:k])]
    rows = []
    for i, name in enumerate(names):
        cells = []
        for j in range(i):
            both = ~(gone[:, i] | gone[:, j])
            test = (
                stats.spearmanr(x[both, i], x[both, j])
                if spearman
                else stats.pearsonr(x[both, i], x[both, j])
            )
            r = hand.number(hand.rounded(float(test.statistic), 2), True)
            cells.append(r + stars(float(test.pvalue)))
        rows.append([name, *cells, *(["–"] if i < k else []), *([""] * (k - i - 1))])
    caption = f"Table 5. {'Spearman correlations' if spearman else 'Correlations'} of the scores (N = {n})."
    return alone(markdown(caption, ["", *(str(i + 1) for i in range(k))], rows, [STAR_NOTE]))


MODEL_TABLES: dict[str, Generator] = {
    "source table": source_table, "regression table": regression, "correlation matrix": correlations,
}  # fmt: skip
