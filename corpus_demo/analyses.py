"""The tests that the invented authors ran, each from raw data to named numbers.

Every function takes raw data and returns unrounded numbers by name; scipy.stats computes the
tests that it has, sums of squares by hand the two it lacks. Rounding is done elsewhere, once.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray
from scipy import stats

Data = NDArray[np.float64]
Counts = NDArray[np.int64]
Numbers = dict[str, float]


def summary(data: Data, suffix: str = "") -> Numbers:
    """Mean, SD (n − 1 in the denominator) and n of one group."""
    return {f"m{suffix}": data.mean(), f"sd{suffix}": data.std(ddof=1), f"n{suffix}": len(data)}


def two_groups(first: Data, second: Data, *, equal_variances: bool = True) -> Numbers:
    """Student's (or Welch's) t test, the difference with its 95% CI, and d by the pooled SD."""
    test = stats.ttest_ind(first, second, equal_var=equal_variances)
    ci = test.confidence_interval(0.95)
    n1, n2 = len(first), len(second)
    squares = (n1 - 1) * first.var(ddof=1) + (n2 - 1) * second.var(ddof=1)
    difference = first.mean() - second.mean()
    return {
        **summary(first, "1"), **summary(second, "2"), "difference": difference,
        "lo": ci.low, "hi": ci.high, "t": test.statistic, "df": test.df, "p": test.pvalue,
        "d": difference / np.sqrt(squares / (n1 + n2 - 2)),
    }  # fmt: skip


def paired(before: Data, after: Data) -> Numbers:
    """The paired t test of after against before, with the change and its 95% CI."""
    test = stats.ttest_rel(after, before)
    ci = test.confidence_interval(0.95)
    change = after - before
    return {
        **summary(before, "1"), **summary(after, "2"), "difference": change.mean(),
        "sd": change.std(ddof=1), "n": len(change), "lo": ci.low, "hi": ci.high,
        "t": test.statistic, "df": test.df, "p": test.pvalue, "d": change.mean() / change.std(ddof=1),
    }  # fmt: skip


def one_way(groups: Sequence[Data]) -> Numbers:
    """One-way analysis of variance with η²."""
    test = stats.f_oneway(*groups)
    everything = np.concatenate(groups)
    between = sum(len(g) * (g.mean() - everything.mean()) ** 2 for g in groups)
    summaries: Numbers = {}
    for i, group in enumerate(groups, 1):
        summaries |= summary(group, str(i))
    return {
        **summaries, "n": len(everything), "F": test.statistic, "df1": len(groups) - 1,
        "df2": len(everything) - len(groups), "p": test.pvalue, "eta2": between / ((everything - everything.mean()) ** 2).sum(),
    }  # fmt: skip


def omnibus_contrast(groups: Sequence[Data], first: int, second: int) -> Numbers:
    """Tukey's comparison of two of several equal groups: t on the error df of them all."""
    p = stats.tukey_hsd(*groups).pvalue[first, second]
    error_df = sum(len(g) - 1 for g in groups)
    mse = sum((len(g) - 1) * g.var(ddof=1) for g in groups) / error_df
    difference = groups[first].mean() - groups[second].mean()
    se = np.sqrt(mse * (1 / len(groups[first]) + 1 / len(groups[second])))
    return {"t": difference / se, "df": error_df, "p": p, "difference": difference}


def two_way(cells: Data) -> dict[str, Numbers]:
    """Balanced two-way analysis of variance of cells with shape (rows, columns, n)."""
    rows, columns, n = cells.shape
    grand = cells.mean()
    row_means, column_means, cell_means = cells.mean(axis=(1, 2)), cells.mean(axis=(0, 2)), cells.mean(axis=2)
    squares = {
        "rows": columns * n * ((row_means - grand) ** 2).sum(),
        "columns": rows * n * ((column_means - grand) ** 2).sum(),
        "interaction": n * ((cell_means - row_means[:, None] - column_means + grand) ** 2).sum(),
    }
    df1 = {"rows": rows - 1, "columns": columns - 1, "interaction": (rows - 1) * (columns - 1)}
    df2 = rows * columns * (n - 1)
    error = ((cells - cell_means[:, :, None]) ** 2).sum()
    return {name: _f_test(squares[name], df1[name], error, df2) for name in squares}


def repeated(scores: Data) -> Numbers:
    """Repeated-measures analysis of variance of scores with shape (people, conditions).

    p is that of the Greenhouse–Geisser correction (Greenhouse and Geisser 1959); df are nominal.
    """
    people, conditions = scores.shape
    grand = scores.mean()
    effect = people * ((scores.mean(axis=0) - grand) ** 2).sum()
    residual = scores - scores.mean(axis=0) - scores.mean(axis=1, keepdims=True) + grand
    df1, df2 = conditions - 1, (conditions - 1) * (people - 1)
    centre = np.eye(conditions) - 1 / conditions
    covariance = centre @ np.cov(scores.T) @ centre
    epsilon = np.trace(covariance) ** 2 / (df1 * (covariance**2).sum())
    result = _f_test(effect, df1, (residual**2).sum(), df2)
    corrected = stats.f.sf(result["F"], epsilon * df1, epsilon * df2)
    return {**result, "p": float(corrected), "epsilon": float(epsilon), "n": people}


def collapsed(table: Counts) -> Numbers:
    """Pearson's χ² without continuity correction of a table (groups, [collapsed, stood])."""
    test = stats.chi2_contingency(table, correction=False)
    smaller = min(table.shape) - 1
    counts = {f"c{i}": int(row[0]) for i, row in enumerate(table, 1)}
    totals = {f"n{i}": int(row.sum()) for i, row in enumerate(table, 1)}
    percents = {f"percent{i}": 100 * row[0] / row.sum() for i, row in enumerate(table, 1)}
    return {
        **counts, **totals, **percents, "chi2": test.statistic, "df": test.dof, "p": test.pvalue,
        "n": int(table.sum()), "v": np.sqrt(test.statistic / table.sum() / smaller),
    }  # fmt: skip


def correlation(first: Data, second: Data) -> Numbers:
    """Pearson's r with its p and 95% CI (Fisher's z)."""
    test = stats.pearsonr(first, second)
    ci = test.confidence_interval(0.95)
    return {"r": test.statistic, "df": len(first) - 2, "n": len(first), "p": test.pvalue,
            "lo": ci.low, "hi": ci.high}  # fmt: skip


def cronbach_alpha(items: Data) -> float:
    """Cronbach's α of scores with shape (people, items)."""
    count = items.shape[1]
    within = items.var(axis=0, ddof=1).sum() / items.sum(axis=1).var(ddof=1)
    return float(count / (count - 1) * (1 - within))


def power_of_t(d: float, n: int) -> float:
    """Power of a two-sided t test at .05 with n in each of two groups (noncentral t)."""
    df, noncentrality = 2 * n - 2, d * np.sqrt(n / 2)
    limit = stats.t.ppf(0.975, df)
    upper, lower = stats.nct.sf(limit, df, noncentrality), stats.nct.cdf(-limit, df, noncentrality)
    return float(upper + lower)


def n_of_t(d: float, power: float) -> int:
    """The least n in each of two groups with that power of a two-sided t test at .05."""
    return next(n for n in range(2, 10**6) if power_of_t(d, n) >= power)


def standard_error(data: Data) -> Numbers:
    """Mean, SD, n and the standard error of the mean."""
    return {**summary(data), "se": data.std(ddof=1) / np.sqrt(len(data))}


def odds_ratio(table: Counts) -> Numbers:
    """The odds ratio of the first group against the second with its 95% CI (log scale, Woolf 1955)."""
    (a, b), (c, d) = table.tolist()
    ratio, spread = a * d / (b * c), stats.norm.ppf(0.975) * np.sqrt(1 / a + 1 / b + 1 / c + 1 / d)
    return {"or": ratio, "lo": ratio * np.exp(-spread), "hi": ratio * np.exp(spread)}


def risk_ratio(table: Counts) -> Numbers:
    """The risk ratio of the first group against the second with its 95% CI and Wald p (log scale, Katz 1978)."""
    (a, b), (c, d) = table.tolist()
    ratio = (a / (a + b)) / (c / (c + d))
    se = np.sqrt(1 / a - 1 / (a + b) + 1 / c - 1 / (c + d))
    spread = stats.norm.ppf(0.975) * se
    p = 2 * stats.norm.sf(abs(np.log(ratio)) / se)
    return {"rr": ratio, "lo": ratio * np.exp(-spread), "hi": ratio * np.exp(spread), "p": float(p)}


def regression(outcome: Data, predictors: Sequence[Data]) -> list[Numbers]:
    """Least squares: for the intercept and each predictor b, its SE, t and p; R² and F with the first."""
    design = np.column_stack([np.ones(len(outcome)), *predictors])
    inverse = np.linalg.inv(design.T @ design)
    b = inverse @ design.T @ outcome
    residual = outcome - design @ b
    df2, df1 = len(outcome) - design.shape[1], len(predictors)
    se = np.sqrt(residual @ residual / df2 * np.diag(inverse))
    r2 = 1 - residual @ residual / ((outcome - outcome.mean()) ** 2).sum()
    rows: list[Numbers] = [
        {"b": b[i], "se": se[i], "t": b[i] / se[i], "p": 2 * stats.t.sf(abs(b[i] / se[i]), df2)}
        for i in range(len(b))
    ]
    f = r2 / df1 / ((1 - r2) / df2)
    rows[0] |= {"r2": r2, "F": f, "df1": df1, "df2": df2, "pF": stats.f.sf(f, df1, df2), "n": len(outcome)}
    return rows


def _f_test(effect: float, df1: int, error: float, df2: int) -> Numbers:
    value = (effect / df1) / (error / df2)
    return {
        "F": float(value), "df1": df1, "df2": df2, "p": float(stats.f.sf(value, df1, df2)),
        "partial_eta2": float(effect / (effect + error)), "ss": float(effect), "ms": float(effect / df1),
        "ss_error": float(error), "ms_error": float(error / df2),
    }  # fmt: skip
