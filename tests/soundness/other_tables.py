"""Honest tables that the plain formulas do not give: other spreads, other tests, other percentages, silent text."""

from __future__ import annotations

import numpy as np
import statsmodels.api as sm  # type: ignore[import-untyped]
from scipy import stats

from tests.soundness import computing, raw
from tests.soundness.hand import one
from tests.soundness.honest_risks import OTHER_RISK_TABLES
from tests.soundness.honest_tables import chi2_by
from tests.soundness.samples import Generator, Sample
from tests.soundness.tabling import (
    BLOCKS,
    SCORES,
    STAR_NOTE,
    TRAITS,
    alone,
    draw_design,
    markdown,
    p_cell,
    scores,
    share,
    stars,
    table_hand,
)

Rng = np.random.Generator


def standard_errors(rng: Rng) -> Sample:
    """Means with ± that is an SE, said in the note or not at all, beside t or F."""
    hand, design = table_hand(rng), draw_design(rng, high=60)
    rows = []
    for name in rng.permutation(SCORES)[:2]:
        data = scores(rng, list(design.sizes), "normal")
        places = int(rng.choice([1, 2]))
        cells = []
        for x in data:
            m, s = (
                hand.rounded(float(x.mean()), places),
                hand.rounded(computing.sd(x) / np.sqrt(len(x)), places),
            )
            cells.append(f"{hand.number(m)} ± {hand.number(s)}")
        test = computing.one_way(data) if len(data) > 2 else computing.t_test(data[0], data[1], pooled=True)
        rows.append([str(name), *cells, hand.number(hand.rounded(test.value, 2)), p_cell(hand, test.p)])
    note = one(rng, ["", "", "Values are means ± SE.", "Data are mean ± SEM."])
    head = ["", *design.headed(), "F" if len(design.sizes) > 2 else "t", "p"]
    return alone(markdown("Table 1. Scores by group.", head, rows, [note] if note else []))


def groups_in_rows(rng: Rng) -> Sample:
    """Groups in rows with n, M and SD in columns, and one F or t in the note or caption."""
    hand, design = table_hand(rng), draw_design(rng, high=80)
    data = scores(rng, design.answered(rng))
    welch = len(data) == 2 and rng.random() < 0.4
    test = computing.one_way(data) if len(data) > 2 else computing.t_test(data[0], data[1], pooled=not welch)
    if not computing.finite(test.value, test.p):
        return groups_in_rows(rng)
    rows = []
    for name, x in zip(design.names, data, strict=True):
        m, s = hand.rounded(float(x.mean()), 2), hand.rounded(computing.sd(x), 2)
        rows.append([name, str(len(x)), hand.number(m), hand.number(s)])
    told = hand.statistic("F" if len(data) > 2 else "t", test.value, test.df)
    note = f"{told.text}, {hand.p(test.p).text}."
    return alone(markdown("Table 1. Bench score by group.", ["Group", "n", "M", "SD"], rows, [note]))


def adjusted_groups(rng: Rng) -> Sample:
    """Raw M and SD of two groups beside the t or F of an analysis with covariates, said in the text or not."""
    hand, design = table_hand(rng), draw_design(rng, most=2, high=80)
    show_df = rng.random() < 0.6
    rows = []
    for name in rng.permutation(SCORES)[:3]:
        ns = design.answered(rng)
        data = scores(rng, ns)
        x = np.concatenate([d * float(rng.uniform(0, 0.5)) + rng.normal(size=len(d)) for d in data])
        y = np.concatenate(data)
        codes = np.repeat([0.0, 1.0], ns)
        test = computing.f_by_dropping(np.column_stack([np.ones(len(y)), x, codes]), y, [2])
        if not computing.finite(test.value, test.p):
            continue
        cells = [
            f"{hand.number(hand.rounded(float(d.mean()), 2))} ({hand.number(hand.rounded(computing.sd(d), 2))})"
            for d in data
        ]
        df = [f"1, {int(test.df[1])}"] if show_df else []
        rows.append([str(name), *cells, hand.number(hand.rounded(test.value, 2)), *df, p_cell(hand, test.p)])
    head = ["", *(f"{h}, M (SD)" for h in design.headed()), "F", *(["df"] if show_df else []), "p"]
    said = one(
        rng,
        [
            "",
            "Analyses were adjusted for age.\n\n",
            "We used analyses of covariance with the score before training.\n\n",
        ],
    )
    if not show_df and not said:
        said = "Analyses were adjusted for age.\n\n"
    return (
        alone(said + markdown("Table 2. Scores of the two groups.", head, rows))
        if rows
        else adjusted_groups(rng)
    )


def adjusted_means(rng: Rng) -> Sample:
    """Means adjusted for a covariate with t or F of it, as caption, heading or note say."""
    hand, design = table_hand(rng), draw_design(rng, most=2, low=10, high=60)
    rows = []
    for name in rng.permutation(SCORES)[:3]:
        data = scores(rng, list(design.sizes), "normal")
        covariates = [d * float(rng.uniform(0.1, 0.6)) + rng.normal(size=len(d)) for d in data]
        test, means = computing.ancova(data, covariates)
        if not computing.finite(test.value, test.p, *means):
            continue
        cells = [
            f"{hand.number(hand.rounded(float(m), 2))} ({hand.number(hand.rounded(computing.sd(d), 2))})"
            for m, d in zip(means, data, strict=True)
        ]
        t = float(np.sqrt(test.value))
        rows.append([str(name), *cells, hand.number(hand.rounded(t, 2)), p_cell(hand, test.p)])
    where = int(rng.integers(3))
    caption = (
        "Table 2. Scores, estimated marginal means (SD)." if where == 0 else "Table 2. Scores of the groups."
    )
    label = "adjusted M (SD)" if where == 1 else "M (SD)"
    notes = ["Means are adjusted for the score before training."] if where == 2 else []
    head = ["", *(f"{h}, {label}" for h in design.headed()), "t", "p"]
    return alone(markdown(caption, head, rows, notes)) if rows else adjusted_means(rng)


def other_percentages(rng: Rng) -> Sample:
    """Percentages of the row, of the whole table, weighted, or made to sum to 100."""
    hand, design = table_hand(rng), draw_design(rng)
    name = one(rng, list(BLOCKS))
    categories = BLOCKS[name]
    table = np.array(
        [rng.multinomial(n, rng.dirichlet(np.full(len(categories), 4.0))) for n in design.sizes]
    ).T
    kind = one(rng, ["row", "whole", "weighted", "hundred"])
    places = int(rng.choice([0, 1]))
    cells = np.empty(table.shape, dtype=object)
    if kind == "hundred":
        for j, column in enumerate(table.T):
            exact = 100 * 10**places * column / column.sum()
            floors = np.floor(exact)
            for i in np.argsort(floors - exact)[: round(float(100 * 10**places - floors.sum()))]:
                floors[i] += 1
            for i, units in enumerate(floors):
                cells[i, j] = f"{column[i]} ({hand.number(hand.rounded(units / 10**places, places))})"
    else:
        base = {"row": table.sum(axis=1, keepdims=True), "whole": table.sum()}.get(
            kind, table.sum(axis=0, keepdims=True)
        )
        weights = rng.uniform(0.6, 1.5, size=table.shape) if kind == "weighted" else np.ones(table.shape)
        shares = 100 * table * weights / np.maximum(base, 1)
        for i, j in np.ndindex(table.shape):
            cells[i, j] = f"{table[i, j]} ({hand.number(hand.rounded(float(shares[i, j]), places))})"
    rows = [[f"{name}, n (%)", *([""] * len(design.sizes))]]
    rows += [[f"  {c}", *map(str, row)] for c, row in zip(categories, cells, strict=True)]
    note = {"weighted": ["Percentages are weighted."], "row": ["Percentages are of rows."]}.get(kind, [])
    return alone(
        markdown(
            "Table 1. Loaves by group.",
            ["", *design.headed()],
            rows,
            note if rng.random() < 0.7 or kind == "weighted" else [],
        )
    )


def corrected_stars(rng: Rng) -> Sample:
    """Raw p with stars of Bonferroni-corrected ones, or corrected p with stars of the raw ones; the note says so."""
    hand = table_hand(rng)
    k = int(rng.integers(3, 7))
    rows = []
    for name in rng.permutation(SCORES)[:k]:
        df, p = int(rng.integers(10, 90)), float(np.exp(rng.uniform(np.log(0.0005), 0)))
        t = float(stats.t.isf(p / 2, df))
        shown, starred = (p, min(p * k, 1)) if rng.random() < 0.5 else (min(p * k, 1), min(p * k, 1))
        rows.append(
            [str(name), hand.number(hand.rounded(t, 2)), str(df), p_cell(hand, shown) + stars(starred)]
        )
    note = one(rng, ["Stars after Bonferroni correction.", "p values are Bonferroni-corrected."])
    return alone(
        markdown("Table 3. Training effects.", ["Score", "t", "df", "p"], rows, [f"{STAR_NOTE} {note}"])
    )


def contingency(rng: Rng) -> Sample:
    """A table of counts with margins and χ² below it, of Pearson or another."""
    hand = table_hand(rng)
    rows, columns = int(rng.integers(2, 4)), int(rng.integers(2, 4))
    table = np.array(
        [
            rng.multinomial(int(rng.integers(20, 150)), rng.dirichlet(np.full(columns, 3.0)))
            for _ in range(rows)
        ]
    )
    if np.any(table.sum(axis=0) == 0):
        return contingency(rng)
    kind = one(rng, ["pearson", "pearson", "yates", "ratio"])
    found = stats.chi2_contingency(
        table, correction=kind == "yates", lambda_="log-likelihood" if kind == "ratio" else None
    )
    names, heads = ["Rye", "Wheat", "Spelt"][:rows], ["Dark", "Medium", "Light"][:columns]
    body = [[name, *map(str, row), str(row.sum())] for name, row in zip(names, table, strict=True)]
    body.append(["Total", *map(str, table.sum(axis=0)), str(table.sum())])
    told = hand.statistic("chi2", float(found.statistic), (float(found.dof),))
    note = f"{told.text}, {hand.p(float(found.pvalue)).text}."
    return alone(
        markdown("Table 4. Crust by flour (numbers of loaves).", ["Flour", *heads, "Total"], body, [note])
    )


def repeated_source(rng: Rng) -> Sample:
    """A source table of repeated measures: its error is the residual of subjects by time, sphericity corrected or not."""
    hand = table_hand(rng)
    n, k = int(rng.integers(8, 40)), int(rng.integers(3, 6))
    x = raw.repeated(rng, n, k)
    test, epsilons = computing.repeated_measures(x)
    centred = x - x.mean(axis=1, keepdims=True) - x.mean(axis=0) + x.mean()
    error, effect = float(np.sum(centred**2)), n * float(np.sum((x.mean(axis=0) - x.mean()) ** 2))
    subjects = k * float(np.sum((x.mean(axis=1) - x.mean()) ** 2))
    if not computing.finite(test.value, test.p) or error < 1e-6:
        return repeated_source(rng)
    e = epsilons["gg"] if rng.random() < 0.5 else 1.0
    df = ((k - 1) * e, (k - 1) * (n - 1) * e)
    p = (
        float(stats.f.sf(test.value, *df))
        if rng.random() < 0.7
        else float(stats.f.sf(test.value, (k - 1) * epsilons["gg"], (k - 1) * (n - 1) * epsilons["gg"]))
    )

    def row(name: str, ss: float, d: float, *more: str) -> list[str]:
        told = str(round(d)) if e == 1.0 or name == "Subjects" else hand.number(hand.rounded(d, 2))
        return [
            name,
            hand.number(hand.rounded(ss, 2)),
            told,
            hand.number(hand.rounded(ss / d, 2)),
            *(more or ("", "")),
        ]

    rows = [
        row("Subjects", subjects, n - 1), row("Time", effect, df[0], hand.number(hand.rounded(test.value, 2)), p_cell(hand, p)),
        row("Error (time)", error, df[1]),
    ]  # fmt: skip
    return alone(
        markdown(
            "Table 5. Repeated-measures analysis of variance.", ["Source", "SS", "df", "MS", "F", "p"], rows
        )
    )


def odds(rng: Rng) -> Sample:
    """Counts of two groups with an adjusted or exact OR, its CI and p in the same row."""
    hand = table_hand(rng)
    rows = []
    ns = rng.integers(30, 200, size=2)
    for name in rng.permutation(TRAITS)[:3]:
        z, group = rng.normal(size=int(ns.sum())), np.repeat([0.0, 1.0], ns)
        y = (
            rng.random(len(z))
            < 1 / (1 + np.exp(-(rng.normal() * 0.5 + 0.6 * z + rng.normal() * 0.5 * group)))
        ).astype(float)
        counts = [int(y[group == g].sum()) for g in (1.0, 0.0)]
        fit = sm.Logit(y, sm.add_constant(np.column_stack([group, z]))).fit(disp=False)
        low, high = np.exp(fit.conf_int()[1])
        cells = [share(hand, c, int(n), "n (%)", 1) for c, n in zip(counts, ns[::-1], strict=True)]
        joint = "; " if hand.comma else ", "
        ratio = f"{hand.number(hand.rounded(float(np.exp(fit.params[1])), 2))} ({joint.join(hand.number(hand.rounded(float(v), 2)) for v in (low, high))})"
        rows.append([f"{name}, n (%)", *cells, ratio, p_cell(hand, float(fit.pvalues[1]))])
    head = [
        "",
        f"Trained (n = {ns[1]})",
        f"Untrained (n = {ns[0]})",
        one(rng, ["Adjusted OR (95% CI)", "OR (95% CI)"]),
        "p",
    ]
    return alone(markdown("Table 6. Traits by group.", head, rows))


def long_counts(rng: Rng) -> Sample:
    """Several groups with χ² for trend, or with the last category left out, the df not printed."""
    hand, design = table_hand(rng), draw_design(rng)
    name = one(rng, list(BLOCKS))
    categories = BLOCKS[name]
    ns = design.answered(rng)
    table = np.array([rng.multinomial(n, rng.dirichlet(np.full(len(categories), 4.0))) for n in ns]).T
    if np.any(table.sum(axis=1) == 0):
        return long_counts(rng)
    if rng.random() < 0.5:
        chi2, df = (
            float(stats.chi2_contingency(table, correction=False).statistic),
            (len(table) - 1) * (len(ns) - 1),
        )
    else:
        chi2, df = chi2_by(rng, np.array([table[0], table[1:].sum(axis=0)], dtype=float))
    shown = len(categories) if rng.random() < 0.5 else len(categories) - 1
    rows = [
        [
            f"{name}, n (%)",
            *([""] * len(ns)),
            hand.number(hand.rounded(chi2, 2)),
            p_cell(hand, float(stats.chi2.sf(chi2, df))),
        ]
    ]
    for c, row in list(zip(categories, table, strict=True))[:shown]:
        rows.append(
            [f"  {c}", *(share(hand, int(v), n, "n (%)", 1) for v, n in zip(row, ns, strict=True)), "", ""]
        )
    return alone(markdown("Table 7. Loaves by group.", ["", *design.headed(), "χ²", "p"], rows))


def list_of_r(rng: Rng) -> Sample:
    """Correlations with one score and their p in rows, Pearson or Spearman, n not printed, answers missing."""
    hand = table_hand(rng)
    n, spearman = int(rng.integers(12, 300)), rng.random() < 0.3
    y = rng.normal(size=n)
    rows = []
    for name in (*SCORES, *TRAITS)[: int(rng.integers(4, 12))]:
        x = rng.normal(size=n) + rng.normal() * 0.3 * y
        if rng.random() < 0.3:
            x = np.round(x)
        there = rng.random(n) > float(rng.choice([0, 0, 0.1, 0.3]))
        test = stats.spearmanr(x[there], y[there]) if spearman else stats.pearsonr(x[there], y[there])
        if computing.finite(float(test.statistic)):
            r = hand.number(hand.rounded(float(test.statistic), int(rng.choice([2, 2, 3]))), True)
            rows.append([name, r, p_cell(hand, float(test.pvalue))])
    return alone(markdown("Table 8. Correlations with loaf volume.", ["Measure", "r", "p"], rows))


OTHER_TABLES: dict[str, Generator] = {
    "standard errors in a table": standard_errors, "groups in rows": groups_in_rows, "adjusted tests beside groups": adjusted_groups,
    "adjusted means": adjusted_means,
    "other percentages": other_percentages, "corrected stars": corrected_stars, "contingency table": contingency,
    "repeated source table": repeated_source, "odds beside counts": odds, "categories with chi2": long_counts,
    "list of r": list_of_r, **OTHER_RISK_TABLES,
}  # fmt: skip
