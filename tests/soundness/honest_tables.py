"""Honest tables: baseline tables, tests in rows, analyses of variance, regressions, correlations, counts."""

from __future__ import annotations

import warnings

import numpy as np
from scipy import stats
from statsmodels.stats.oneway import anova_oneway  # type: ignore[import-untyped]

from tests.soundness import computing, raw
from tests.soundness.hand import Hand, one
from tests.soundness.honest_matrices import MATRICES
from tests.soundness.honest_models import MODEL_TABLES
from tests.soundness.honest_risks import RISK_TABLES
from tests.soundness.raw import Values
from tests.soundness.samples import Generator, Sample
from tests.soundness.tabling import (
    BLOCKS,
    SCORES,
    STAR_NOTE,
    TRAITS,
    Design,
    alone,
    draw_design,
    markdown,
    p_cell,
    scores,
    share,
    stars,
    summary,
    table_hand,
)

Rng = np.random.Generator


def p_of_scores(rng: Rng, data: list[Values]) -> float:
    """p of one of the tests that authors choose among without saying so."""
    ranks = rng.random() < 0.35
    with warnings.catch_warnings(), np.errstate(all="ignore"):
        warnings.simplefilter("ignore")
        if len(data) == 2:
            if ranks:
                return float(stats.mannwhitneyu(data[0], data[1]).pvalue)
            return float(stats.ttest_ind(*data, equal_var=bool(rng.random() < 0.6)).pvalue)
        if ranks:
            return float(stats.kruskal(*data).pvalue)
        if rng.random() < 0.3:
            return float(anova_oneway(data, use_var="unequal").pvalue)
        return float(stats.f_oneway(*data).pvalue)


def p_of_counts(rng: Rng, table: Values) -> float:
    """p of one of the tests of a table of counts."""
    if np.any(table.sum(axis=0) == 0) or np.any(table.sum(axis=1) == 0):
        return float("nan")
    draw = rng.random()
    if table.shape == (2, 2) and draw < 0.3:
        return float(stats.fisher_exact(table).pvalue)
    if draw < 0.4:
        return float(stats.chi2_contingency(table, correction=False, lambda_="log-likelihood").pvalue)
    if draw < 0.5 and table.shape[0] > 2:
        columns = [np.repeat(np.arange(len(table)), column.astype(int)) for column in table.T]
        return float(stats.kruskal(*columns).pvalue)
    return float(stats.chi2_contingency(table, correction=bool(draw < 0.75)).pvalue)


SILENT = ("", "", "Values are mean (SD) or n (%).", "P by t test or Mann–Whitney test, χ² or Fisher’s exact test, as appropriate.")  # fmt: skip


def baseline(rng: Rng) -> Sample:
    """A baseline table: scores, traits and categories of the groups, with missing answers and any p."""
    hand, design = table_hand(rng), draw_design(rng)
    style, percent = one(rng, ["()", "()", "±"]), int(rng.choice([0, 1, 1, 2]))
    rows: list[list[str]] = []
    facts = []
    for name in rng.permutation(SCORES)[: int(rng.integers(1, 4))]:
        data = scores(rng, design.answered(rng))
        places = int(rng.choice([0, 1, 1, 2]))
        cells = [summary(hand, x, style, places) for x in data]
        facts += [fact for _, fact in cells]
        label = f"{name}, mean {'± SD' if style == '±' else '(SD)'}"
        rows.append([label, *(cell for cell, _ in cells), p_cell(hand, p_of_scores(rng, data))])
    for name in rng.permutation(TRAITS)[: int(rng.integers(1, 4))]:
        rows.append(trait_row(rng, hand, design, str(name), percent))
    if rng.random() < 0.7:
        rows += block_rows(rng, hand, design, percent)
    note = one(rng, SILENT)
    caption = "Table 1. Characteristics of the apprentices at the start."
    return alone(markdown(caption, ["", *design.headed(), "p"], rows, [note] if note else []), facts)


def trait_row(rng: Rng, hand: Hand, design: Design, name: str, places: int) -> list[str]:
    """A trait as count and percentage of those who answered, of the group, or of all with the trait."""
    ns = design.answered(rng)
    share_of = float(rng.uniform(0.02, 0.7))
    counts = [int(rng.binomial(n, share_of)) for n in ns]
    style = one(rng, ["n (%)", "n (%)", "n (%) signed", "n/N (%)", "%"])
    base: list[int] = list(ns if style == "n/N (%)" or rng.random() < 0.7 else design.sizes)
    if style == "n (%)" and rng.random() < 0.05 and any(c > 0 for c in counts):
        base = [int(np.sum(counts))] * len(ns)
    cells = [share(hand, c, n, style, places) for c, n in zip(counts, base, strict=True)]
    p = p_of_counts(rng, np.array([counts, [n - c for n, c in zip(ns, counts, strict=True)]], dtype=float))
    label = {"n/N (%)": "n/N (%)", "%": "%"}.get(style, "n (%)")
    return [f"{name}, {label}", *cells, p_cell(hand, p)]


def block_rows(rng: Rng, hand: Hand, design: Design, places: int) -> list[list[str]]:
    """A variable of several categories, exclusive, or several answers to a person."""
    name = one(rng, list(BLOCKS))
    categories = BLOCKS[name]
    ns = design.answered(rng)
    several = rng.random() < 0.2
    if several:
        columns = [[int(rng.binomial(n, 0.5)) for _ in categories] for n in ns]
    else:
        columns = [list(rng.multinomial(n, rng.dirichlet(np.full(len(categories), 4.0)))) for n in ns]
    table = np.array(columns, dtype=float).T
    p = p_of_counts(rng, table) if not several else float(rng.uniform(0, 1))
    base = ns if rng.random() < 0.7 else design.sizes
    first = [f"{name}, n (%)", *([""] * len(ns)), p_cell(hand, p)]
    rest = [
        [f"  {c}", *(share(hand, int(v), n, "n (%)", places) for v, n in zip(row, base, strict=True)), ""]
        for c, row in zip(categories, table, strict=True)
    ]
    return [first, *rest]


def two_group_rows(rng: Rng) -> Sample:
    """Scores of two groups in rows with t, df and p; pooled, Welch or paired, df shown or not."""
    hand, design = table_hand(rng), draw_design(rng, most=2, high=80)
    welch, paired = rng.random() < 0.4, rng.random() < 0.15
    show_df, show_n = rng.random() < 0.7, rng.random() < 0.4
    rows, facts = [], []
    for name in rng.permutation(SCORES)[: int(rng.integers(1, 4))]:
        ns = design.answered(rng)
        if paired:
            x = raw.repeated(rng, ns[0], 2)
            data, test = [x[:, 0], x[:, 1]], computing.one_sample(x[:, 0] - x[:, 1])
        else:
            data = scores(rng, ns)
            test = computing.t_test(data[0], data[1], pooled=not welch)
        if not computing.finite(test.value, test.p):
            continue
        places = int(rng.choice([1, 2, 2]))
        cells = [summary(hand, x, "()", places) for x in data]
        facts += [fact for _, fact in cells]
        shown = [
            f"{cell}; n = {len(x)}" if show_n and not paired else cell
            for (cell, _), x in zip(cells, data, strict=True)
        ]
        t = hand.number(hand.rounded(test.value, max(hand.places["statistic"], 2)))
        df = [hand.number(hand.degrees(test.df[0]))] if show_df else []
        star = stars(test.p) if rng.random() < 0.3 else ""
        rows.append([str(name), *shown, t, *df, p_cell(hand, test.p) + star])
    head = ["", *(f"{n}, M (SD)" for n in (("Before", "After") if paired else design.headed())), "t", *(["df"] if show_df else []), "p"]  # fmt: skip
    note = one(rng, ["", "", "By Welch’s t test." if welch else "By independent-samples t test."]) if not paired else one(rng, ["", "By paired t test."])  # fmt: skip
    notes = [n for n in (note, STAR_NOTE) if n]
    if not rows:
        return two_group_rows(rng)
    return alone(markdown("Table 2. Scores of the two groups.", head, rows, notes), facts)


def several_group_rows(rng: Rng) -> Sample:
    """Scores of several groups with F: classical, Welch's, of a covariate, or of repeated measures."""
    hand, design = table_hand(rng), draw_design(rng, high=80)
    while len(design.names) < 3:
        design = draw_design(rng, high=80)
    kind = one(rng, ["classical", "classical", "welch", "bf", "ancova", "repeated"])
    show_df = rng.random() < 0.6
    rows, facts = [], []
    for name in rng.permutation(SCORES)[: int(rng.integers(1, 4))]:
        ns = design.answered(rng) if kind != "repeated" else [design.sizes[0]] * len(design.names)
        data, F, df, p = f_by(rng, kind, ns)
        if not computing.finite(F, p, *df):
            continue
        cells = [summary(hand, x, "()", int(rng.choice([1, 2]))) for x in data]
        facts += [fact for _, fact in cells]
        told = hand.number(hand.rounded(F, max(hand.places["statistic"], 2)))
        dfs = [", ".join(hand.number(hand.degrees(d)) for d in df)] if show_df and not hand.comma else []
        rows.append([str(name), *(cell for cell, _ in cells), told, *dfs, p_cell(hand, p)])
    heads = design.headed() if kind != "repeated" else list(design.names)
    head = ["", *(f"{h}, M (SD)" for h in heads), "F", *(["df"] if show_df and not hand.comma else []), "p"]
    return (
        alone(markdown("Table 2. Scores by group.", head, rows), facts) if rows else several_group_rows(rng)
    )


def f_by(rng: Rng, kind: str, ns: list[int]) -> tuple[list[Values], float, tuple[float, ...], float]:
    """Data with F, its df and p by one kind of analysis."""
    if kind == "repeated":
        x = raw.repeated(rng, ns[0], len(ns))
        test, _ = computing.repeated_measures(x)
        return list(x.T), test.value, test.df, test.p
    data = scores(rng, ns)
    with warnings.catch_warnings(), np.errstate(all="ignore"):
        warnings.simplefilter("ignore")
        if kind in ("welch", "bf"):
            found = anova_oneway(data, use_var="unequal" if kind == "welch" else "bf")
            df = (found.df_num, found.df_denom)
            return data, float(found.statistic), tuple(map(float, df)), float(found.pvalue)
        if kind == "ancova":
            covariates = [d * float(rng.uniform(0, 0.6)) + rng.normal(size=len(d)) for d in data]
            y, x = np.concatenate(data), np.concatenate(covariates)
            codes = np.repeat(np.arange(len(ns)), ns)[:, None] == np.arange(1, len(ns))
            design = np.column_stack([np.ones(len(y)), x, codes.astype(float)])
            test = computing.f_by_dropping(design, y, list(range(2, design.shape[1])))
            return data, test.value, test.df, test.p
    test = computing.one_way(data)
    return data, test.value, test.df, test.p


def chi2_rows(rng: Rng) -> Sample:
    """Traits of two or more groups with χ² and p: Pearson, Yates, N − 1, likelihood ratio, trend, McNemar."""
    hand, design = table_hand(rng), draw_design(rng)
    show_df = rng.random() < 0.6
    rows = []
    for name in rng.permutation(TRAITS)[: int(rng.integers(1, 4))]:
        ns = design.answered(rng)
        counts = [int(rng.binomial(n, float(rng.uniform(0.1, 0.6)))) for n in ns]
        table = np.array([counts, [n - c for n, c in zip(ns, counts, strict=True)]], dtype=float)
        if np.any(table.sum(axis=1) == 0):
            continue
        chi2, df = chi2_by(rng, table)
        style = one(rng, ["n (%)", "n/N (%)"])
        cells = [share(hand, c, n, style, int(rng.choice([0, 1]))) for c, n in zip(counts, ns, strict=True)]
        told = hand.number(hand.rounded(chi2, max(hand.places["statistic"], 2)))
        p = p_cell(hand, float(stats.chi2.sf(chi2, df)))
        rows.append([f"{name}, {style}", *cells, told, *([str(df)] if show_df else []), p])
    head = ["", *design.headed(), "χ²", *(["df"] if show_df else []), "p"]
    return alone(markdown("Table 6. Traits of the loaves.", head, rows)) if rows else chi2_rows(rng)


def chi2_by(rng: Rng, table: Values) -> tuple[float, int]:
    """χ² of one of the tests that go by this name, with its df."""
    kind = one(rng, ["pearson", "pearson", "yates", "n-1", "ratio", "trend"])
    df = table.shape[1] - 1
    if kind == "trend" and df > 1:
        position = np.arange(table.shape[1])
        x, y = np.repeat(position, table.sum(axis=0).astype(int)), np.concatenate([[1] * int(a) + [0] * int(b) for a, b in table.T])  # fmt: skip
        return float((len(x) - 1) * np.corrcoef(x, y)[0, 1] ** 2), 1
    if kind == "ratio":
        return float(stats.chi2_contingency(table, correction=False, lambda_="log-likelihood").statistic), df
    chi2 = float(stats.chi2_contingency(table, correction=kind == "yates").statistic)
    return chi2 * (1 - 1 / table.sum()) if kind == "n-1" and df == 1 else chi2, df


def paired_counts(rng: Rng) -> Sample:
    """A trait before and after with McNemar's χ², the text silent."""
    hand = table_hand(rng)
    n = int(rng.integers(20, 150))
    cells = rng.multinomial(n, rng.dirichlet([4, 2, 3, 5]))
    both, only_first, only_second, _ = (int(c) for c in cells)
    if only_first + only_second == 0:
        return paired_counts(rng)
    chi2 = (only_first - only_second) ** 2 / (only_first + only_second)
    row = [
        "Split crust, n (%)",
        *(share(hand, c, n, "n (%)", 1) for c in (both + only_first, both + only_second)),
    ]
    row += [hand.number(hand.rounded(chi2, 2)), p_cell(hand, float(stats.chi2.sf(chi2, 1)))]
    return alone(
        markdown("Table 6. Loaves by time.", ["", f"Before (n = {n})", f"After (n = {n})", "χ²", "p"], [row])
    )


def told_again(rng: Rng) -> Sample:
    """One t test in the abstract, the text and a table, with its own decimals in each place."""
    a, b = raw.plain_groups(rng, 2, 8, 60)
    test = computing.t_test(a, b, pooled=True)
    if not computing.finite(test.value, test.p):
        return told_again(rng)
    name = one(rng, ["loaf height", "crumb score", "bench score"])
    df, swapped = int(test.df[0]), rng.random() < 0.2
    texts = []
    for start in ("Abstract", "Results"):
        hand = table_hand(rng)
        result = hand.join(
            hand.statistic("t", -test.value if swapped else test.value, (float(df),)), hand.p(test.p)
        )
        texts.append(
            f"{start}\n\nTrained and untrained apprentices differed or not in {name} (Table 1), {result.text}."
        )
    hand = table_hand(rng)
    cells = [summary(hand, x, "()", int(rng.choice([0, 1, 2])))[0] for x in (a, b)]
    head = ["Score", f"Trained (n = {len(a)}), M (SD)", f"Untrained (n = {len(b)}), M (SD)", "t", "df", "p"]
    t = hand.number(hand.rounded(test.value, int(rng.choice([1, 2, 3]))))
    row = [name.capitalize(), *cells, t, str(df), p_cell(hand, test.p)]
    return alone(
        "\n\n".join([*texts, markdown("Table 1. Scores of trained and untrained apprentices.", head, [row])])
    )


HONEST_TABLES: dict[str, Generator] = {
    "baseline table": baseline, "two groups in rows": two_group_rows, "several groups in rows": several_group_rows,
    **MODEL_TABLES, **RISK_TABLES, **MATRICES,
    "counts in rows": chi2_rows, "paired counts": paired_counts, "told again in a table": told_again,
}  # fmt: skip
