"""Risks, proportions, pairs and shares of counts."""

from __future__ import annotations

import numpy as np
from scipy import special

from tests.benchmarks.formula_rows.row import Column, Row

FOUR = "n1 n2 n N"
"""Four counts of a table: any numbers will do."""
ONE = "k N"
"""A count and its total."""


def _z() -> float:
    return float(special.ndtri(0.975))


def _log_se(a: Column, b: Column, c: Column, d: Column) -> Column:
    return np.sqrt(1 / a + 1 / b + 1 / c + 1 / d)


def _log_risk_se(a: Column, b: Column, c: Column, d: Column) -> Column:
    return np.sqrt(b / (a * (a + b)) + d / (c * (c + d)))


def _difference_se(a: Column, b: Column, c: Column, d: Column) -> Column:
    n1, n2 = a + b, c + d
    return np.sqrt(a * b / n1**3 + c * d / n2**3)


def _difference(a: Column, b: Column, c: Column, d: Column) -> Column:
    return a / (a + b) - c / (c + d)


def _log_ends(ratio: Column, se: Column) -> tuple[Column, Column]:
    half = _z() * se
    return ratio * np.exp(-half), ratio * np.exp(half)


def _ends(middle: Column, half: Column) -> tuple[Column, Column]:
    return middle - half, middle + half


def _wilson(k: Column, n: Column) -> tuple[Column, Column]:
    p, z2 = k / n, _z() ** 2
    half = _z() * np.sqrt(z2 + 4 * n * p * (1 - p))
    return (2 * n * p + z2 - half) / (2 * (n + z2)), (2 * n * p + z2 + half) / (2 * (n + z2))


def _newcombe(a: Column, b: Column, c: Column, d: Column) -> tuple[Column, Column]:
    (l1, u1), (l2, u2), p1, p2 = _wilson(a, a + b), _wilson(c, c + d), a / (a + b), c / (c + d)
    return p1 - p2 - np.hypot(p1 - l1, u2 - p2), p1 - p2 + np.hypot(u1 - p1, p2 - l2)


def _halves(function):  # type: ignore[no-untyped-def]
    return lambda a, b, c, d: function(a + 0.5, b + 0.5, c + 0.5, d + 0.5)


def _wald(k: Column, n: Column) -> tuple[Column, Column]:
    p = k / n
    return _ends(p, _z() * np.sqrt(p * (1 - p) / n))


def _beta_ends(k: Column, n: Column, more: float, other: float) -> tuple[Column, Column]:
    return special.betaincinv(k + more, n - k + other, 0.025), special.betainccinv(
        k + other, n - k + more, 0.025
    )


def _expected(counts: Column) -> Column:
    return counts.sum(axis=1, keepdims=True) * counts.sum(axis=0, keepdims=True) / counts.sum()


TWO = 2
"""One table of very many rows and two columns, as long as the columns of the other formulas."""

ROWS: dict[str, Row] = {
    "contingency.expected_counts": Row("n1", _expected, groups=TWO),
    "risks.odds_ratio": Row(FOUR, lambda a, b, c, d: a * d / (b * c)),
    "risks.log_odds_ratio_se": Row(FOUR, _log_se),
    "risks.risk_ratio": Row(FOUR, lambda a, b, c, d: a * (c + d) / (c * (a + b))),
    "risks.log_risk_ratio_se": Row(FOUR, _log_risk_se),
    "risks.risk_difference": Row(FOUR, _difference),
    "risks.risk_difference_se": Row(FOUR, _difference_se),
    "risks.number_needed_to_treat": Row(FOUR, lambda a, b, c, d: 1 / np.abs(_difference(a, b, c, d))),
    "risks.with_half": Row(FOUR, lambda a, b, c, d: (a + 0.5, b + 0.5, c + 0.5, d + 0.5)),
    "risks.z_pooled": Row(
        FOUR,
        lambda a, b, c, d: _difference(a, b, c, d)
        / np.sqrt((a + c) / (a + b + c + d) * (b + d) / (a + b + c + d) * (1 / (a + b) + 1 / (c + d))),
    ),
    "risks.z_unpooled": Row(FOUR, lambda a, b, c, d: _difference(a, b, c, d) / _difference_se(a, b, c, d)),
    "risk_intervals.odds_ratio_wald": Row(
        FOUR, lambda a, b, c, d: _log_ends(a * d / (b * c), _log_se(a, b, c, d))
    ),
    "risk_intervals.odds_ratio_wald_half": Row(
        FOUR, _halves(lambda a, b, c, d: _log_ends(a * d / (b * c), _log_se(a, b, c, d)))
    ),
    "risk_intervals.risk_ratio_wald": Row(
        FOUR, lambda a, b, c, d: _log_ends(a * (c + d) / (c * (a + b)), _log_risk_se(a, b, c, d))
    ),
    "risk_intervals.risk_ratio_wald_half": Row(
        FOUR, _halves(lambda a, b, c, d: _log_ends(a * (c + d) / (c * (a + b)), _log_risk_se(a, b, c, d)))
    ),
    "risk_intervals.risk_ratio_rates": Row(
        FOUR, lambda a, b, c, d: _log_ends(a * (c + d) / (c * (a + b)), np.sqrt(1 / a + 1 / c))
    ),
    "risk_intervals.difference_wald": Row(
        FOUR, lambda a, b, c, d: _ends(_difference(a, b, c, d), _z() * _difference_se(a, b, c, d))
    ),
    "risk_intervals.difference_wald_corrected": Row(
        FOUR,
        lambda a, b, c, d: _ends(
            _difference(a, b, c, d), _z() * _difference_se(a, b, c, d) + (1 / (a + b) + 1 / (c + d)) / 2
        ),
    ),
    "risk_intervals.difference_agresti_caffo": Row(
        FOUR,
        lambda a, b, c, d: _ends(
            _difference(a + 1, b + 1, c + 1, d + 1), _z() * _difference_se(a + 1, b + 1, c + 1, d + 1)
        ),
    ),
    "risk_intervals.difference_newcombe": Row(FOUR, _newcombe),
    "proportions.critical_z": Row("share", lambda level: special.ndtri((1 + level) / 2)),
    "proportions.wald": Row(ONE, _wald),
    "proportions.wald_corrected": Row(ONE, _wald),
    "proportions.wilson": Row(ONE, _wilson),
    "proportions.wilson_corrected": Row(ONE, _wilson),
    "proportions.agresti_coull": Row(ONE, lambda k, n: _wald(k + 1.92, n + 3.84)),
    "proportions.clopper_pearson": Row(ONE, lambda k, n: _beta_ends(k, n, 0, 1), size=10**5),
    "proportions.jeffreys": Row(ONE, lambda k, n: _beta_ends(k, n, 0.5, 0.5), size=10**5),
    "proportions.logit": Row(
        ONE,
        lambda k, n: [special.expit(x) for x in _ends(np.log(k / (n - k)), _z() * np.sqrt(n / (k * (n - k))))],
    ),
    "paired_counts.mcnemar_chi2": Row("n1 n2", lambda b, c: (b - c) ** 2 / (b + c)),
    "paired_counts.mcnemar_chi2_corrected": Row(
        "n1 n2", lambda b, c: np.maximum(np.abs(b - c) - 1, 0) ** 2 / (b + c)
    ),
    "paired_counts.mcnemar_exact_p": Row(
        "n1 n2", lambda b, c: 2 * special.betainc(np.maximum(b, c), np.minimum(b, c) + 1, 0.5)
    ),
    "paired_counts.mcnemar_mid_p": Row(
        "n1 n2",
        lambda b, c: 2 * special.betainc(np.maximum(b, c), np.minimum(b, c) + 1, 0.5)
        - np.exp(special.gammaln(b + c + 1) - special.gammaln(b + 1) - special.gammaln(c + 1)),
    ),
    "paired_counts.matched_odds_ratio": Row("n1 n2", lambda b, c: b / c),
    "paired_counts.matched_log_se": Row("n1 n2", lambda b, c: np.sqrt(1 / b + 1 / c)),
    "paired_counts.matched_wald": Row("n1 n2", lambda b, c: _log_ends(b / c, np.sqrt(1 / b + 1 / c))),
    "paired_counts.matched_exact": Row(
        "n1 n2", lambda b, c: [p / (1 - p) for p in _beta_ends(b, b + c, 0, 1)], size=10**5
    ),
    "paired_counts.paired_difference_se": Row(
        "n1 n2 N", lambda b, c, n: np.sqrt(b + c - (b - c) ** 2 / n) / n
    ),
    "shares.percent_of": Row(ONE, lambda k, n: 100 * k / n),
}  # fmt: skip

_OF_TABLES = "one number of a whole table, the sum of a bare numpy expression over its expected counts"
EXEMPT: dict[str, str] = {
    "contingency.pearson_chi2": _OF_TABLES,
    "contingency.n_minus_one_chi2": _OF_TABLES,
    "contingency.likelihood_ratio_chi2": _OF_TABLES,
    "contingency.yates_chi2": _OF_TABLES,
    "shares.counts_of_percent": "whole numbers, which no special function gives",
    "shares.total_that_allows": "whole numbers, which no special function gives",
    "proportions.mid_p": "root finding: 160 tails of the binomial",
    "score_intervals.*": "root finding: 120 likeliest tables with the ratio or the difference that is tested",
    "exact_tests.*": "sums over all tables of the same margins, at each step of a root finding where one is needed",
}
