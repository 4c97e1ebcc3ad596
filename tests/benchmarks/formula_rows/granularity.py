"""Rows of the granularity of means: bare arithmetic, for no special function is needed."""

import numpy as np

from tests.benchmarks.formula_rows.row import Row

ROWS = {
    "granularity.rows.means_possible": Row(
        "mean1- mean1+ n k",
        lambda a, b, n, k: np.floor(b * (n * k)) >= np.ceil(a * (n * k)),
    ),
    "granularity.limits.sd_most_any_mean": Row("n low high", lambda n, a, b: (b - a) / 2 * np.sqrt(n / (n - 1))),
    "granularity.limits.sd_most_for_mean": Row(
        "share n low high", lambda m, n, a, b: np.sqrt(np.abs((b - m) * (m - a)) * n / (n - 1))
    ),
}  # fmt: skip

EXEMPT = {
    "granularity.limits.sd_most": "an extremum with six candidates; no special function",
    "granularity.rows.share_of_means_detectable": "whole numbers alone; its cost is that of the greatest common divisor",
    "granularity.answers.*": "exact engine for one question: fractions and whole numbers",
    "granularity.bitsets.*": "exact engine for one question: fractions and whole numbers",
    "granularity.edges.*": "exact engine for one question: fractions and whole numbers",
    "granularity.extremes.*": "exact engine for one question: fractions and whole numbers",
    "granularity.problem.*": "exact engine for one question: fractions and whole numbers",
    "granularity.scores.*": "exact engine for one question: fractions and whole numbers",
    "granularity.search.*": "exact engine for one question: fractions and whole numbers",
    "granularity.limits.spread_limits": "exact engine for one question: fractions and whole numbers",
}
