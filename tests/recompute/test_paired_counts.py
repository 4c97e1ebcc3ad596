"""McNemar's tests and matched odds ratios against R, statsmodels and published values."""

import numpy as np
import pytest
from scipy import stats
from statsmodels.stats.contingency_tables import mcnemar

from recheck.recompute import paired_counts
from tests.reference import rows

R = {
    "mcnemar TRUE": paired_counts.mcnemar_chi2_corrected, "mcnemar FALSE": paired_counts.mcnemar_chi2,
    "mcnemar exact": paired_counts.mcnemar_exact_p,
}  # fmt: skip


@pytest.mark.parametrize("row", [r for r in rows("r_counts") if r["what"] in R], ids=lambda row: row["call"])
def test_matches_r(row):
    _, b, c, _ = (float(x) for x in row["counts"].split())
    assert R[row["what"]](b, c) == pytest.approx(row.number("value"), rel=1e-12)


def test_the_approval_of_the_prime_minister():
    # Agresti (2002) Categorical Data Analysis, 10.1: 794, 150, 86, 570; z² = 17.36 (from memory).
    assert paired_counts.mcnemar_chi2(150, 86) == pytest.approx(17.36, abs=0.005)
    # difference -.0413 with SE .0095 (from memory: .0413 and .00955)
    assert paired_counts.paired_difference_se(150, 86, 1600) == pytest.approx(0.0095, abs=5e-5)


def test_matches_statsmodels():
    b, c = np.random.default_rng(6).integers(1, 40, (2, 20))
    for one, two in zip(b, c, strict=True):
        table = [[10, one], [two, 10]]
        assert paired_counts.mcnemar_exact_p(one, two) == pytest.approx(mcnemar(table, exact=True).pvalue)
        assert paired_counts.mcnemar_chi2(one, two) == pytest.approx(mcnemar(table, False, False).statistic)


def test_mid_p_is_the_exact_p_less_the_observed_split():
    # Fagerland, Lydersen & Laake (2013): for b = 1, c = 7 exact p .0703, mid-p .0391 (airway data; from memory).
    assert paired_counts.mcnemar_exact_p(1, 7) == pytest.approx(0.0703, abs=5e-5)
    assert paired_counts.mcnemar_mid_p(1, 7) == pytest.approx(0.0391, abs=5e-5)


def test_the_matched_odds_ratio_has_these_intervals():
    ratio, se = paired_counts.matched_odds_ratio(12, 3), paired_counts.matched_log_se(12, 3)
    assert (ratio, se) == (pytest.approx(4.0), pytest.approx(np.sqrt(1 / 12 + 1 / 3)))
    assert paired_counts.matched_wald(12, 3) == pytest.approx(
        (4 / np.exp(1.959963984540054 * se), 4 * np.exp(1.959963984540054 * se))
    )
    exact = stats.binomtest(12, 15).proportion_ci()
    assert paired_counts.matched_exact(12, 3) == pytest.approx(
        (exact.low / (1 - exact.low), exact.high / (1 - exact.high))
    )


def test_where_no_pair_changed_there_is_no_test():
    assert np.isnan(paired_counts.mcnemar_exact_p(0, 0)) and np.isnan(paired_counts.mcnemar_chi2(0, 0))
