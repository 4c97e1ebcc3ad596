"""Misprints planted into honest tables, each with the brute-force decision whether the plain readings deny it."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from decimal import Decimal
from itertools import product

import numpy as np
from scipy import optimize, stats

from tests.soundness import computing, raw
from tests.soundness.planted import swapped, wrong_digit
from tests.soundness.rounding import rounded
from tests.soundness.samples import Sample
from tests.soundness.tabling import STAR_NOTE, markdown, stars

Rng = np.random.Generator
Planted = Callable[[Rng], tuple[Sample, bool]]
Range = tuple[float, float]


def box(value: Decimal) -> Range:
    """What a printed number stands for: half a unit of its last digit each way."""
    half = float(Decimal(1).scaleb(int(value.as_tuple().exponent))) / 2
    return float(value) - half, float(value) + half


def apart(printed: Range, implied: Range) -> bool:
    """Tell whether two ranges share nothing, a hair aside."""
    hair = 1e-9 * max(1.0, *(abs(x) for x in (*printed, *implied) if np.isfinite(x)))
    return printed[0] > implied[1] + hair or implied[0] > printed[1] + hair


def misprint(rng: Rng, value: Decimal) -> Decimal:
    """One digit wrong, or two swapped."""
    changed = swapped(rng, value) if rng.random() < 0.5 else None
    return changed if changed is not None and changed != value else wrong_digit(rng, value)


def F_range(means: list[Range], sds: list[Range], ns: list[int]) -> Range:
    """The range of a one-way F by corners and a bounded search."""
    n = np.array(ns, dtype=float)

    def between(m: np.ndarray) -> float:
        return float(np.sum(n * (m - np.sum(n * m) / n.sum()) ** 2))

    k, within = (
        len(ns),
        [sum((m - 1) * max(s[i], 0.0) ** 2 for m, s in zip(ns, sds, strict=True)) for i in (0, 1)],
    )
    most = max(between(np.array(corner)) for corner in product(*means))
    start = np.array([sum(m) / 2 for m in means])
    least = optimize.minimize(between, start, bounds=means, method="L-BFGS-B").fun
    scale = (n.sum() - k) / (k - 1)
    return scale * least / within[1], scale * most / within[0] if within[0] else float("inf")


def F_of_groups(rng: Rng) -> tuple[Sample, bool]:
    """F of three groups with one misprint in F."""
    data = raw.plain_groups(rng, 3, 8, 60)
    test = computing.one_way(data)
    F = misprint(rng, rounded(test.value, 2))
    m, s = ([rounded(v, 2) for v in values] for values in zip(*((float(x.mean()), computing.sd(x)) for x in data), strict=True))  # fmt: skip
    head = ["", *(f"{name} (n = {len(x)})" for name, x in zip(("Rye", "Wheat", "Spelt"), data, strict=True))]
    head.append(f"F({int(test.df[0])}, {int(test.df[1])})")
    text = markdown("Table 1. Loaf height in mm, mean (SD).", head, [["Height", *(f"{a} ({b})" for a, b in zip(m, s, strict=True)), str(F)]])  # fmt: skip
    implied = F_range([box(x) for x in m], [box(x) for x in s], [len(x) for x in data])
    return Sample(text), apart(box(F), implied)


def t_of_row(rng: Rng) -> tuple[Sample, bool]:
    """p of a t test in a table row with one misprint in p."""
    a, b = raw.plain_groups(rng, 2, 8, 60)
    test = computing.t_test(a, b, pooled=True)
    if not computing.finite(test.p) or test.p < 0.002:
        return t_of_row(rng)
    t, df, p = rounded(test.value, 2), int(test.df[0]), misprint(rng, rounded(test.p, 3))
    if p > 1:
        return t_of_row(rng)
    cells = [f"{rounded(float(x.mean()), 2)} ({rounded(computing.sd(x), 2)})" for x in (a, b)]
    head = ["", f"Trained (n = {len(a)}), M (SD)", f"Untrained (n = {len(b)}), M (SD)", "t", "df", "p"]
    text = markdown("Table 1. Bench scores.", head, [["Bench score", *cells, str(t), str(df), str(p)]])
    low, high = sorted(abs(x) for x in box(t))
    low = 0.0 if box(t)[0] < 0 < box(t)[1] else low
    return Sample(text), apart(box(p), (2 * stats.t.sf(high, df), 2 * stats.t.sf(low, df)))


def percentage(rng: Rng) -> tuple[Sample, bool]:
    """A percentage of n/N with one misprint."""
    n = int(rng.integers(20, 400))
    count = int(rng.integers(1, n))
    percent = misprint(rng, rounded(100 * count / n, 1))
    text = markdown(
        "Table 2. Loaves.", ["", "Steamed"], [["Split crust, n/N (%)", f"{count}/{n} ({percent})"]]
    )
    return Sample(text), apart(box(percent), (100 * count / n, 100 * count / n))


def chi2_of_counts(rng: Rng) -> tuple[Sample, bool]:
    """χ² of two groups, counts printed as n/N, with one misprint in χ²."""
    ns = rng.integers(25, 200, size=2)
    counts = [int(rng.binomial(n, rng.uniform(0.2, 0.7))) for n in ns]
    table = np.array([counts, [int(n) - c for n, c in zip(ns, counts, strict=True)]])
    if ns[0] == ns[1] or not np.all(table.sum(axis=1)):
        return chi2_of_counts(rng)
    true = float(stats.chi2_contingency(table, correction=False).statistic)
    chi2 = misprint(rng, rounded(true, 2))
    cells = [f"{c}/{n}" for c, n in zip(counts, ns, strict=True)]
    text = markdown(
        "Table 2. Loaves by oven.", ["", "Steamed", "Dry", "χ²(1)"], [["Split crust, n/N", *cells, str(chi2)]]
    )
    return Sample(text), apart(box(chi2), (true, true))


def mean_square(rng: Rng) -> tuple[Sample, bool]:
    """A one-way source table with one misprint in a mean square."""
    data = raw.plain_groups(rng, int(rng.integers(3, 5)), 8, 30)
    test = computing.one_way(data)
    k, n = len(data), sum(map(len, data))
    ms = [rounded(test.value * test.error, 2), rounded(test.error, 2)]
    ss = [rounded(float(test.value * test.error * (k - 1)), 2), rounded(float(test.error * (n - k)), 2)]
    df = [k - 1, n - k]
    at = int(rng.integers(2))
    ms[at] = misprint(rng, ms[at])
    rows = [[name, str(ss[i]), str(df[i]), str(ms[i]), str(rounded(test.value, 2)) if not i else ""] for i, name in enumerate(("Flour", "Error"))]  # fmt: skip
    rows.append(["Total", str(ss[0] + ss[1]), str(n - 1), "", ""])
    text = markdown("Table 3. Analysis of variance of loaf height.", ["Source", "SS", "df", "MS", "F"], rows)
    implied = tuple(x / df[at] for x in box(ss[at]))
    return Sample(text), apart(box(ms[at]), (implied[0], implied[1]))


def coefficient(rng: Rng) -> tuple[Sample, bool]:
    """A row of a regression with one misprint in t."""
    n = int(rng.integers(20, 200))
    x = rng.normal(size=n)
    fit = stats.linregress(x, x * rng.normal() + rng.normal(size=n))
    b, se, t = (
        rounded(fit.slope, 3),
        rounded(fit.stderr, 3),
        misprint(rng, rounded(fit.slope / fit.stderr, 2)),
    )
    text = markdown("Table 4. Regression of loaf height.", ["Predictor", "b", "SE", "t"], [["Hydration", str(b), str(se), str(t)]])  # fmt: skip
    (b_low, b_high), (se_low, se_high) = sorted(abs(v) for v in box(b)), box(se)
    b_low = 0.0 if box(b)[0] < 0 < box(b)[1] else b_low
    t_low, t_high = sorted(abs(v) for v in box(t))
    return Sample(text), apart((t_low, t_high), (b_low / se_high, b_high / max(se_low, 1e-12)))


def too_many_stars(rng: Rng) -> tuple[Sample, bool]:
    """A p with stars that its note gives to smaller ones."""
    df, p = int(rng.integers(10, 90)), float(rng.uniform(0.012, 0.8))
    shown, true = rounded(p, 3), stars(p)
    more = "**" if true == "*" else "*" if rng.random() < 0.5 else "**"
    t = rounded(float(stats.t.isf(p / 2, df)), 2)
    text = markdown("Table 5. Bench scores.", ["Score", "t", "df", "p"], [["Height", str(t), str(df), f"{shown}{more}"]], [STAR_NOTE])  # fmt: skip
    return Sample(text), box(shown)[0] > {"*": 0.05, "**": 0.01}[more]


def stars_of_r(rng: Rng) -> tuple[Sample, bool]:
    """A correlation with more stars than its r and N allow."""
    n, r = int(rng.integers(20, 120)), float(rng.uniform(0.05, 0.3))
    shown = rounded(r, 2)
    text = markdown(f"Table 6. Correlations (N = {n}).", ["", "1", "2"], [["1. Height", "–", ""], ["2. Crumb", f"{shown}**", "–"]], [STAR_NOTE])  # fmt: skip
    high = box(shown)[1]
    p = 2 * stats.t.sf(high * np.sqrt((n - 2) / (1 - high**2)), n - 2)
    return Sample(text), bool(p > 0.01)


TABLE_PLANTS: Mapping[str, Planted] = {
    "F of groups: misprint": F_of_groups, "t in a row: p misprint": t_of_row, "n/N (%): misprint": percentage,
    "χ² of n/N: misprint": chi2_of_counts, "source table: MS misprint": mean_square, "b, SE, t: misprint": coefficient,
    "too many stars at p": too_many_stars, "too many stars at r": stars_of_r,
}  # fmt: skip
