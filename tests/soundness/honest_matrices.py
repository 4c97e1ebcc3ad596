"""Honest correlation matrices and fits of regressions, by every model that a text may be silent about."""

from __future__ import annotations

import numpy as np
import statsmodels.api as sm  # type: ignore[import-untyped]
from scipy import special, stats

from tests.soundness import computing
from tests.soundness.hand import Hand, one
from tests.soundness.raw import Values
from tests.soundness.samples import Generator, Piece, Sample
from tests.soundness.sentences import lone
from tests.soundness.tabling import STAR_NOTE, alone, markdown, stars, table_hand

Rng = np.random.Generator
VARIABLES = (
    "Loaf height", "Crumb score", "Crust colour", "Proofing time", "Hydration", "Oven heat", "Rye share", "Salt",
    "Acidity", "Age", "Training", "Shaping score",
)  # fmt: skip


# -- matrices ---------------------------------------------------------------------------------------------


def related(rng: Rng, n: int, k: int) -> Values:
    """Scores with a common part; now and then one is the sum of others, or two are nearly the same."""
    x: Values = rng.normal(size=(n, k)) + rng.normal(size=(n, 1)) * float(rng.uniform(0, 2))
    if rng.random() < 0.25:
        x[:, 0] = x[:, 1:].sum(axis=1)
    if rng.random() < 0.2:
        x[:, 1] = x[:, 2] + rng.normal(size=n) * 0.05
    return np.round(x, 1) if rng.random() < 0.3 else x


def r_cell(hand: Hand, r: float, n: int, places: int, starred: bool) -> str:
    """One coefficient as tables print it."""
    t = abs(r) * np.sqrt((n - 2) / max(1 - r * r, 1e-12))
    mark = stars(float(2 * stats.t.sf(t, n - 2))) if starred else ""
    return hand.number(hand.rounded(r, places), True) + mark


def triangle(
    rng: Rng, hand: Hand, coefficients: Values, ns: Values, x: Values, rows_named: list[str]
) -> Sample:
    """The lower triangle, with means and SDs or reliabilities as authors like."""
    k, places = len(coefficients), int(rng.choice([2, 2, 2, 3]))
    starred, summaries = rng.random() < 0.5, rng.random() < 0.5
    diagonal = one(rng, ["–", "1", "", "(.84)"])
    rows = []
    for i, name in enumerate(rows_named):
        own = [
            hand.number(hand.rounded(float(v), 2)) for v in (np.nanmean(x[:, i]), np.nanstd(x[:, i], ddof=1))
        ]
        cells = [r_cell(hand, float(coefficients[i, j]), int(ns[i, j]), places, starred) for j in range(i)]
        rows.append([name, *(own if summaries else []), *cells, diagonal, *([""] * (k - i - 1))])
    head = ["", *(["M", "SD"] if summaries else []), *(str(i + 1) for i in range(k))]
    caption = "Table 1. " + ("Means, standard deviations and correlations" if summaries else "Correlations")
    return alone(markdown(f"{caption} of the scores.", head, rows, [STAR_NOTE] if starred else []))


def named(rng: Rng, k: int) -> list[str]:
    """Numbered names of so many variables."""
    return [f"{i + 1}. {name}" for i, name in enumerate(rng.permutation(VARIABLES)[:k])]


def complete(rng: Rng) -> Sample:
    """Correlations of complete data, sometimes of fewer cases than variables."""
    k = int(rng.integers(3, 10))
    n = int(rng.integers(4, 12)) if rng.random() < 0.2 else int(rng.integers(12, 200))
    x = related(rng, n, k)
    r = np.atleast_2d(stats.spearmanr(x).statistic) if rng.random() < 0.3 else np.corrcoef(x.T)
    return triangle(rng, table_hand(rng), r, np.full((k, k), n), x, named(rng, k))


def pairwise(rng: Rng) -> Sample:
    """Answers are missing, other cases for each pair: such a matrix may well be indefinite."""
    k, n = int(rng.integers(3, 9)), int(rng.integers(10, 60))
    x = related(rng, n, k)
    x[rng.random((n, k)) < rng.uniform(0.05, 0.4)] = np.nan
    r, ns = np.eye(k), np.full((k, k), n)
    for i in range(k):
        for j in range(i):
            both = ~np.isnan(x[:, i] + x[:, j])
            if both.sum() < 4 or min(x[both, i].std(), x[both, j].std()) == 0:
                return pairwise(rng)
            r[i, j], ns[i, j] = np.corrcoef(x[both, i], x[both, j])[0, 1], both.sum()
    return triangle(rng, table_hand(rng), r, ns, x, named(rng, k))


def corrected(rng: Rng) -> Sample:
    """Coefficients corrected for unreliability, each cut at 1 as programs do, without a word of it."""
    k, n = int(rng.integers(3, 7)), int(rng.integers(20, 150))
    x = related(rng, n, k)
    reliability = np.sqrt(rng.uniform(0.5, 0.95, size=k))
    r = np.clip(np.corrcoef(x.T) / np.outer(reliability, reliability), -1, 1)
    return triangle(rng, table_hand(rng), r, np.full((k, k), n), x, named(rng, k))


def two_samples(rng: Rng) -> Sample:
    """One sample below the diagonal, another above it."""
    k, hand, names = int(rng.integers(3, 7)), table_hand(rng), named(rng, 7)
    below, above = (np.corrcoef(related(rng, int(rng.integers(15, 120)), k).T) for _ in range(2))
    rows = [
        [
            names[i],
            *(
                "–"
                if i == j
                else hand.number(hand.rounded(float((below if i > j else above)[i, j]), 2), True)
                for j in range(k)
            ),
        ]
        for i in range(k)
    ]
    note = "Note. Apprentices are below the diagonal, masters above the diagonal."
    caption = "Table 2. Correlations of the scores."
    return alone(markdown(caption, ["", *(str(i + 1) for i in range(k))], rows, [note]))


# -- fits of regressions ----------------------------------------------------------------------------------


def share_piece(hand: Hand, name: str, value: float, places: int) -> Piece:
    """`R² = .34` as this author prints it."""
    spelled = {
        "r2": ["R²", "R2"],
        "adjusted_r2": ["adjusted R²", "R²adj", "adj. R²"],
        "delta_r2": ["ΔR²", "R² change"],
    }
    printed = hand.rounded(value, places)
    if hand.rng.random() < 0.1 and name == "r2":
        percent = hand.rounded(100 * value, max(places - 2, 0))
        return Piece(f"R²{hand.relation('=')}{hand.number(percent)}%", {"r2": ("=", percent)})
    text = f"{one(hand.rng, spelled[name])}{hand.relation('=')}{hand.number(printed, True)}"
    return Piece(text, {name: ("=", printed)})


def fitted(rng: Rng) -> tuple[sm.regression.linear_model.RegressionResultsWrapper, int, int]:
    """A linear regression with its number of cases and of predictors."""
    n, k = int(rng.integers(12, 250)), int(rng.integers(1, 6))
    x = rng.normal(size=(n, k)) + rng.normal(size=(n, 1)) * 0.5
    y = x @ rng.normal(0, 0.4, size=k) + rng.standard_t(5, size=n)
    return sm.OLS(y, sm.add_constant(x)).fit(), n, k


def result(hand: Hand, shares: list[Piece], F: float, df1: int, df2: int, p: float) -> Piece:
    """Shares of variance and F in either order."""
    test = hand.statistic("F", F, (df1, df2))
    if hand.rng.random() < 0.5:
        return hand.join(test, hand.p(p), *shares)
    text = hand.separator.join([*(s.text for s in shares), test.text, hand.p(p).text])
    return Piece(text, {key: told for piece in (*shares, test) for key, told in piece.values.items()})


def whole_model(rng: Rng) -> Sample:
    """R², adjusted R² or both with the F of the model; rarely the adjusted one under the name of R²."""
    hand, (fit, _, k) = table_hand(rng), fitted(rng)
    places = int(rng.choice([2, 2, 3]))
    shown = one(rng, ["r2", "both", "both", "adjusted_r2", "mislabelled"])
    shares = []
    if shown in ("r2", "both"):
        shares.append(share_piece(hand, "r2", fit.rsquared, places))
    if shown in ("both", "adjusted_r2"):
        shares.append(share_piece(hand, "adjusted_r2", fit.rsquared_adj, places))
    if shown == "mislabelled":
        shares.append(share_piece(hand, "r2", max(fit.rsquared_adj, 0.0), places))
    piece = result(hand, shares, fit.fvalue, k, int(fit.df_resid), fit.f_pvalue)
    return Sample(lone(hand, piece, "the model of loaf height was fitted"), (piece.values,))


def silent_model(rng: Rng) -> Sample:
    """F by robust or clustered standard errors, by weights, or of a fit without intercept, and not a word of it."""
    hand, kind = table_hand(rng), one(rng, ["HC1", "HC3", "clustered", "weights", "no intercept"])
    n, k = int(rng.integers(20, 200)), int(rng.integers(1, 5))
    x = rng.normal(size=(n, k)) + 0.5
    y = 0.3 + x @ rng.normal(0, 0.5, size=k) + rng.normal(size=n) * (0.5 + np.abs(x[:, 0]))
    full = x if kind == "no intercept" else sm.add_constant(x)
    if kind == "weights":
        fit = sm.WLS(y, full, weights=rng.uniform(0.2, 2, size=n)).fit()
    elif kind == "clustered":
        groups = rng.integers(0, 12, size=n)
        fit = sm.OLS(y, full).fit(cov_type="cluster", cov_kwds={"groups": groups}, use_t=True)
    else:
        fit = sm.OLS(y, full).fit(**({"cov_type": kind, "use_t": True} if kind.startswith("HC") else {}))
    df2 = 11 if kind == "clustered" else int(fit.df_resid)
    F, p = float(np.squeeze(fit.fvalue)), float(np.squeeze(fit.f_pvalue))
    if not computing.finite(F, p):
        return silent_model(rng)
    shares = [share_piece(hand, "r2", fit.rsquared, 2), share_piece(hand, "adjusted_r2", fit.rsquared_adj, 2)]
    piece = result(hand, shares[: int(rng.integers(1, 3))], F, k, df2, float(stats.f.sf(F, k, df2)))
    return Sample(lone(hand, piece, "the model of loaf height was fitted"))


def adjusted_otherwise(rng: Rng) -> Sample:
    """The adjusted R² of one of the other formulas, with or without F."""
    hand, (fit, n, k) = table_hand(rng), fitted(rng)
    left, r2 = n - k - 1, float(fit.rsquared)
    kind = one(rng, ["wherry", "olkin-pratt", "stein", "usual"])
    if left < 5:
        return adjusted_otherwise(rng)
    value = {
        "wherry": 1 - (1 - r2) * (n - 1) / (n - k),
        "olkin-pratt": 1
        - (n - 3) / left * (1 - r2) * float(special.hyp2f1(1, 1, min(left / 2 + 1, 50), 1 - r2)),
        "stein": 1 - (1 - r2) * (n - 1) / left * (n - 2) / (left - 1) * (n + 1) / n,
        "usual": float(fit.rsquared_adj),
    }[kind]
    if kind == "olkin-pratt" and left > 98:
        return adjusted_otherwise(rng)
    shares = [share_piece(hand, "r2", r2, 2), share_piece(hand, "adjusted_r2", value, 2)]
    if rng.random() < 0.4:
        text = f"The model of loaf height was fitted ({hand.separator.join(s.text for s in shares)})."
        return Sample(text)
    piece = result(hand, shares, fit.fvalue, k, left, fit.f_pvalue)
    return Sample(lone(hand, piece, "the model of loaf height was fitted"), (piece.values,))


def step(rng: Rng) -> Sample:
    """A step of a hierarchical regression: what it adds, R² with it, F of the change or of the whole model."""
    hand = table_hand(rng)
    n, before, added = int(rng.integers(20, 200)), int(rng.integers(1, 4)), int(rng.integers(1, 3))
    x = rng.normal(size=(n, before + added))
    y = x @ rng.normal(0, 0.4, size=before + added) + rng.normal(size=n)
    first, full = sm.OLS(y, sm.add_constant(x[:, :before])).fit(), sm.OLS(y, sm.add_constant(x)).fit()
    F, p, df1 = full.compare_f_test(first)
    shares = [share_piece(hand, "delta_r2", full.rsquared - first.rsquared, int(rng.choice([2, 3])))]
    if rng.random() < 0.6:
        shares.insert(0, share_piece(hand, "r2", full.rsquared, 2))
    if rng.random() < 0.25:
        F, p, df1 = full.fvalue, full.f_pvalue, before + added
    piece = result(hand, shares, float(F), int(df1), int(full.df_resid), float(p))
    return Sample(lone(hand, piece, "step 2 added to the model of loaf height"), (piece.values,))


def one_predictor(rng: Rng) -> Sample:
    """r or t of one predictor with R², of the simple model or of one with further predictors."""
    hand, n = table_hand(rng), int(rng.integers(12, 200))
    x = rng.normal(size=(n, 3))
    y = x @ np.array([0.5, 0.3, 0.2]) + rng.normal(size=n)
    simple, full = sm.OLS(y, sm.add_constant(x[:, :1])).fit(), sm.OLS(y, sm.add_constant(x)).fit()
    model = simple if rng.random() < 0.6 else full
    share = share_piece(hand, "r2", model.rsquared, 2)
    if rng.random() < 0.5:
        test = stats.spearmanr(x[:, 0], y) if rng.random() < 0.2 else stats.pearsonr(x[:, 0], y)
        piece = hand.join(
            hand.statistic("r", float(test.statistic), (n - 2,)), hand.p(float(test.pvalue)), share
        )
    else:
        t = hand.statistic("t", float(model.tvalues[1]), (int(model.df_resid),))
        piece = hand.join(t, hand.p(float(model.pvalues[1])), share)
    return Sample(lone(hand, piece, "proofing time predicted loaf height"))


def fit_table(rng: Rng) -> Sample:
    """Models in columns or in rows with R², adjusted R², F and df."""
    hand, rows = table_hand(rng), []
    for i in range(int(rng.integers(1, 4))):
        fit, _, k = fitted(rng)
        cells = [hand.number(hand.rounded(float(v), 2), True) for v in (fit.rsquared, fit.rsquared_adj)]
        rows.append(
            [
                f"Model {i + 1}",
                *cells,
                hand.number(hand.rounded(fit.fvalue, 2)),
                str(k),
                str(int(fit.df_resid)),
            ]
        )
    head = ["Model", "R²", "Adjusted R²", "F", "df1", "df2"]
    if rng.random() < 0.5:
        return alone(markdown("Table 3. Models of loaf height.", head, rows))
    turned = [list(column) for column in zip(head, *rows, strict=True)]
    return alone(markdown("Table 3. Regression models of loaf height.", turned[0], turned[1:]))


def predictor_table(rng: Rng) -> Sample:
    """Coefficients with β, plain or partial r and R², after a table of means and SDs of the same or of more cases."""
    hand, n, k = table_hand(rng), int(rng.integers(20, 150)), int(rng.integers(2, 5))
    names = [str(name) for name in rng.permutation(VARIABLES)[: k + 1]]
    x = related(rng, n, k + 1) * rng.uniform(0.5, 8, size=k + 1)
    kept = rng.random(n) < float(rng.choice([1, 1, 0.8]))
    kept[: k + 4] = True
    y, used = x[kept, 0], x[kept, 1:]
    try:
        fit = sm.OLS(y, sm.add_constant(used)).fit()
    except np.linalg.LinAlgError:
        return predictor_table(rng)
    if np.linalg.cond(np.corrcoef(used.T)) > 1e6:
        return predictor_table(rng)
    betas = fit.params[1:] * used.std(axis=0) / y.std()
    both = one(rng, ["plain", "partial"])
    rs = [np.corrcoef(y, used[:, j])[0, 1] for j in range(k)]
    if both == "partial":
        left = int(fit.df_resid)
        rs = [float(t / np.sqrt(t * t + left)) for t in fit.tvalues[1:]]

    def cell(value: float, bounded: bool = False) -> str:
        return hand.number(hand.rounded(float(value), 2), bounded)

    described = [[f"{name}", cell(x[:, j].mean()), cell(x[:, j].std(ddof=1))] for j, name in enumerate(names)]
    rows = [
        [names[j + 1], cell(rs[j], True), cell(fit.params[j + 1]), cell(fit.bse[j + 1]), cell(betas[j], True)]
        for j in range(k)
    ]
    tables = [
        markdown("Table 1. Description of the scores.", ["", "M", "SD"], described),
        markdown(f"Table 2. Regression of {names[0].lower()}.", ["Predictor", "r" if both == "plain" else "partial r", "b", "SE", "β"], rows),
    ]  # fmt: skip
    note = f"Note. R² = {cell(fit.rsquared, True)}, F({k}, {int(fit.df_resid)}) = {cell(fit.fvalue)}."
    return alone("\n\n".join([*tables, note]))


def partial_told(rng: Rng) -> Sample:
    """Three correlations and the partial one, of the same or of other cases, of one control or of two."""
    hand, n = table_hand(rng), int(rng.integers(15, 150))
    x = related(rng, n, 4)
    kind = one(rng, ["plain", "plain", "two controls", "other cases", "semipartial"])
    r = np.corrcoef(x.T)
    some = x[: max(10, int(n * 0.8))] if kind == "other cases" else x
    held = sm.add_constant(some[:, 2:4] if kind == "two controls" else some[:, 2:3])
    one_left, two_left = (
        some[:, j] - held @ np.linalg.lstsq(held, some[:, j], rcond=None)[0] for j in (0, 1)
    )
    if min(one_left.std(), two_left.std()) < 1e-6:
        return partial_told(rng)
    value = float(np.corrcoef(some[:, 0] if kind == "semipartial" else one_left, two_left)[0, 1])
    a, b, c, part = (hand.number(hand.rounded(float(v), 2), True) for v in (r[0, 1], r[0, 2], r[1, 2], value))
    text = (
        f"Height went with crumb score (r = {a}), height with hydration (r = {b}), and crumb score with hydration (r = {c}). "
        f"The partial correlation of height and crumb score was r = {part}."
    )
    return Sample(text, alone=True)


MATRICES: dict[str, Generator] = {
    "matrix, complete": complete, "matrix, pairwise": pairwise, "matrix, corrected": corrected,
    "matrix, two samples": two_samples, "fits in a table": fit_table, "predictors": predictor_table,
}  # fmt: skip
FITS: dict[str, Generator] = {
    "R² of a model": whole_model, "R² of a silent model": silent_model, "R² adjusted otherwise": adjusted_otherwise,
    "R² of a step": step, "R² of one predictor": one_predictor, "partial r": partial_told,
}  # fmt: skip
