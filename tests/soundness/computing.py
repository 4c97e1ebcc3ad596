"""The statistics of raw data that scipy has no quick call for; held to statsmodels in test_computing."""

from __future__ import annotations

import warnings
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy import optimize, stats

Values = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Test:
    """A statistic with its degrees of freedom, p, and what the printing may need beside it."""

    __test__ = False

    value: float
    df: tuple[float, ...]
    p: float
    effect: float = float("nan")
    error: float = float("nan")


def finite(*values: float) -> bool:
    """Tell whether every value can be printed."""
    return bool(np.all(np.isfinite(values)))


def ratio(part: float, whole: float) -> float:
    """A share, not a number where there is nothing to share."""
    return part / whole if whole > 0 else float("nan")


def sd(x: Values) -> float:
    return float(np.std(x, ddof=1)) if len(x) > 1 else float("nan")


def pooled_sd(a: Values, b: Values) -> float:
    ss = (len(a) - 1) * np.var(a, ddof=1) + (len(b) - 1) * np.var(b, ddof=1)
    return float(np.sqrt(ss / (len(a) + len(b) - 2)))


def hedges_j(df: float) -> float:
    """The exact small-sample factor of Hedges (1981), J. Educ. Stat. 6:107-128."""
    from scipy.special import gammaln

    return float(np.exp(gammaln(df / 2) - gammaln((df - 1) / 2)) / np.sqrt(df / 2))


def t_test(a: Values, b: Values, pooled: bool) -> Test:
    """Student's or Welch's t with the standard error of the difference as `error`.

    Data whose spread is lost in the last bits of the mean give no t: no program computes it well.
    """
    if max(sd(a), sd(b)) < 1e-9 * max(1.0, abs(float(a.mean()))):
        return Test(float("nan"), (float("nan"),), float("nan"))
    with np.errstate(all="ignore"), warnings.catch_warnings():
        warnings.simplefilter("ignore", RuntimeWarning)  # of a group without any variance
        result = stats.ttest_ind(a, b, equal_var=pooled)
        difference = float(a.mean() - b.mean())
        value = float(result.statistic)
    error = difference / value if finite(value) and value else float("nan")
    return Test(value, (float(result.df),), float(result.pvalue), difference, error)


def one_sample(x: Values, mu: float = 0.0) -> Test:
    with np.errstate(all="ignore"), warnings.catch_warnings():
        warnings.simplefilter("ignore", RuntimeWarning)  # of scores without any variance
        result = stats.ttest_1samp(x, mu)
    error = sd(x) / np.sqrt(len(x))
    return Test(
        float(result.statistic), (float(result.df),), float(result.pvalue), float(x.mean() - mu), error
    )


def _residual_ss(design: Values, y: Values) -> float:
    beta = np.linalg.lstsq(design, y, rcond=None)[0]
    return float(np.sum((y - design @ beta) ** 2))


def f_by_dropping(design: Values, y: Values, columns: list[int]) -> Test:
    """F of some columns of a linear model given all others (type III); effect is partial η²."""
    full = _residual_ss(design, y)
    less = _residual_ss(np.delete(design, columns, axis=1), y)
    df1, df2 = len(columns), len(y) - design.shape[1]
    with np.errstate(all="ignore"):
        value = float(np.float64((less - full) / df1) / (full / df2))
    return Test(value, (df1, df2), float(stats.f.sf(value, df1, df2)), ratio(less - full, less), full / df2)


def one_way(groups: list[Values]) -> Test:
    """One-way ANOVA; `effect` is η², `error` the mean square within."""
    every = np.concatenate(groups)
    df = (len(groups) - 1, len(every) - len(groups))
    with np.errstate(all="ignore"):
        result = stats.f_oneway(*groups)
        within = sum(float(np.sum((g - g.mean()) ** 2)) for g in groups)
        total = float(np.sum((every - every.mean()) ** 2))
    eta2 = ratio(total - within, total)
    return Test(float(result.statistic), df, float(result.pvalue), eta2, within / df[1] if df[1] else np.nan)


def two_way(cells: list[list[Values]]) -> tuple[Test, Test, Test]:
    """Two-way ANOVA between subjects, type III sums of squares: A, B and their interaction."""
    rows = [(i, j, y) for i, row in enumerate(cells) for j, cell in enumerate(row) for y in cell]
    a, b = len(cells), len(cells[0])
    y = np.array([r[2] for r in rows])

    def effect_code(level: Values, count: int) -> Values:
        codes: Values = np.vstack([np.eye(count - 1), -np.ones(count - 1)])
        chosen: Values = codes[level.astype(int)]
        return chosen

    code_a = effect_code(np.array([r[0] for r in rows]), a)
    code_b = effect_code(np.array([r[1] for r in rows]), b)
    both = (code_a[:, :, None] * code_b[:, None, :]).reshape(len(y), -1)
    design = np.hstack([np.ones((len(y), 1)), code_a, code_b, both])
    ends = np.cumsum([1, a - 1, b - 1, (a - 1) * (b - 1)])
    first, second, third = (f_by_dropping(design, y, list(range(ends[k], ends[k + 1]))) for k in range(3))
    return first, second, third


def repeated_measures(x: Values) -> tuple[Test, dict[str, float]]:
    """Within-subject F of columns with the epsilons of Greenhouse-Geisser and Huynh-Feldt."""
    n, k = x.shape
    centred = x - x.mean(axis=1, keepdims=True) - x.mean(axis=0) + x.mean()
    between = n * float(np.sum((x.mean(axis=0) - x.mean()) ** 2))
    error = float(np.sum(centred**2))
    df = (k - 1, (k - 1) * (n - 1))
    with np.errstate(all="ignore"):
        value = float(np.float64(between / df[0]) / (error / df[1]))
    covariance = np.cov(x, rowvar=False)
    centring = np.eye(k) - 1 / k
    s = centring @ covariance @ centring
    gg = float(np.trace(s) ** 2 / ((k - 1) * np.sum(s * s))) if np.any(s) else 1.0
    left = (k - 1) * (n - 1 - (k - 1) * gg)
    hf = (n * (k - 1) * gg - 2) / left if left else 1.0
    test = Test(value, df, float(stats.f.sf(value, *df)), ratio(between, between + error), error / df[1])
    return test, {"gg": gg, "hf": float(min(max(hf, gg), 1.0)), "lower": 1 / (k - 1)}


def ancova(groups: list[Values], covariates: list[Values]) -> tuple[Test, list[float]]:
    """F of the groups given one covariate, and the means adjusted to its grand mean."""
    y, x = np.concatenate(groups), np.concatenate(covariates)
    member = np.concatenate([np.full(len(g), i) for i, g in enumerate(groups)])
    dummies = np.eye(len(groups))[member]
    design = np.hstack([np.ones((len(y), 1)), dummies[:, 1:], x[:, None]])
    test = f_by_dropping(design, y, list(range(1, len(groups))))
    slope = float(np.linalg.lstsq(np.hstack([dummies, x[:, None]]), y, rcond=None)[0][-1])
    adjusted = [
        float(g.mean() - slope * (c.mean() - x.mean())) for g, c in zip(groups, covariates, strict=True)
    ]
    return test, adjusted


def logistic(x: Values, y: Values, steps: int = 60) -> tuple[float, float]:
    """Slope of a logistic regression on one predictor and its Wald standard error."""
    design = np.column_stack([np.ones_like(x), x])
    beta = np.zeros(2)
    with np.errstate(all="ignore"):
        for _ in range(steps):
            mu = 1 / (1 + np.exp(-design @ beta))
            information = design.T @ (design * (mu * (1 - mu))[:, None])
            if not np.all(np.isfinite(information)) or np.linalg.cond(information) > 1e10:
                return float("nan"), float("nan")
            step = np.linalg.solve(information, design.T @ (y - mu))
            beta += step
            if np.max(np.abs(step)) < 1e-12:
                break
    return float(beta[1]), float(np.sqrt(np.linalg.inv(information)[1, 1]))


def noncentral_d(t: float, n1: int, n2: int, level: float = 0.95) -> tuple[float, float]:
    """Exact confidence limits of d from the noncentral t distribution (Steiger & Fouladi 1997)."""
    df, scale = n1 + n2 - 2, np.sqrt(1 / n1 + 1 / n2)
    tail = (1 - level) / 2

    def limit(share: float) -> float:
        return float(optimize.brentq(lambda nc: stats.nct.cdf(t, df, nc) - share, t - 8, t + 8))

    try:
        return limit(1 - tail) * scale, limit(tail) * scale
    except ValueError:  # the noncentral t of scipy gives out far from zero
        return float("nan"), float("nan")


def noncentral_eta2(f: float, df1: int, df2: int, level: float = 0.90) -> tuple[float, float]:
    """Exact confidence limits of (partial) η² from the noncentral F distribution (Steiger 2004)."""
    tail = (1 - level) / 2

    def limit(share: float) -> float:
        if stats.f.cdf(f, df1, df2) < share:
            return 0.0
        nc = optimize.brentq(lambda v: stats.ncf.cdf(f, df1, df2, v) - share, 1e-9, 20 * df1 * f + 100)
        return float(nc / (nc + df1 + df2 + 1))

    try:
        return limit(1 - tail), limit(tail)
    except ValueError:  # the noncentral F of scipy gives out far from zero
        return float("nan"), float("nan")
