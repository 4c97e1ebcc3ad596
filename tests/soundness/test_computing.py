"""The generators' own statistics against statsmodels and scipy on the same raw data."""

import numpy as np
import pandas as pd  # type: ignore[import-untyped]
import pytest
import statsmodels.api as sm  # type: ignore[import-untyped]
import statsmodels.formula.api as smf  # type: ignore[import-untyped]
from scipy import stats
from statsmodels.stats.anova import AnovaRM, anova_lm  # type: ignore[import-untyped]

from tests.soundness import computing


@pytest.fixture
def rng() -> np.random.Generator:
    return np.random.default_rng(7)


def test_repeated_measures_agrees_with_statsmodels(rng: np.random.Generator) -> None:
    x = rng.normal(size=(12, 4)) + rng.normal(size=(12, 1))
    frame = pd.DataFrame(x).reset_index().melt(id_vars="index")
    table = AnovaRM(frame, "value", "index", within=["variable"]).fit().anova_table
    test, _ = computing.repeated_measures(x)
    assert test.value == pytest.approx(table["F Value"].iloc[0])
    assert test.p == pytest.approx(table["Pr > F"].iloc[0])


def test_epsilon_is_one_for_two_times_and_small_for_one_odd_column(rng: np.random.Generator) -> None:
    # Box (1954), Ann. Math. Stat. 25:484-498: epsilon lies in [1/(k - 1), 1], and is 1 for k = 2.
    assert computing.repeated_measures(rng.normal(size=(9, 2)))[1]["gg"] == pytest.approx(1)
    odd = rng.normal(size=(200, 4)) * np.array([1, 1, 1, 1000])
    assert computing.repeated_measures(odd)[1]["gg"] == pytest.approx(1 / 3, rel=1e-2)


def test_two_way_agrees_with_statsmodels(rng: np.random.Generator) -> None:
    cells = [[rng.normal(size=int(rng.integers(3, 9))) for _ in range(3)] for _ in range(2)]
    rows = [(i, j, y) for i, row in enumerate(cells) for j, cell in enumerate(row) for y in cell]
    frame = pd.DataFrame(rows, columns=["a", "b", "y"])
    table = anova_lm(smf.ols("y ~ C(a, Sum) * C(b, Sum)", frame).fit(), typ=3)
    ours = [test.value for test in computing.two_way(cells)]
    assert ours == pytest.approx(list(table["F"].iloc[1:4]))


def test_ancova_agrees_with_statsmodels(rng: np.random.Generator) -> None:
    groups = [rng.normal(size=n) for n in (8, 11)]
    covariates = [g * 0.5 + rng.normal(size=len(g)) for g in groups]
    test, adjusted = computing.ancova(groups, covariates)
    y, x = np.concatenate(groups), np.concatenate(covariates)
    frame = pd.DataFrame({"y": y, "x": x - x.mean(), "a": [0] * 8 + [1] * 11})
    fit = smf.ols("y ~ a + x", frame).fit()
    assert test.value == pytest.approx(fit.tvalues["a"] ** 2)
    assert adjusted == pytest.approx([fit.params["Intercept"], fit.params["Intercept"] + fit.params["a"]])


def test_logistic_agrees_with_statsmodels(rng: np.random.Generator) -> None:
    x = rng.normal(size=80)
    y = (rng.random(80) < 1 / (1 + np.exp(-x))).astype(float)
    fit = sm.Logit(y, sm.add_constant(x)).fit(disp=False)
    assert computing.logistic(x, y) == pytest.approx((fit.params[1], fit.bse[1]), rel=1e-5)


def test_one_way_and_t_agree_with_scipy(rng: np.random.Generator) -> None:
    a, b = rng.normal(size=9), rng.normal(size=14)
    t = computing.t_test(a, b, pooled=True)
    assert computing.one_way([a, b]).value == pytest.approx(t.value**2)
    assert t.error == pytest.approx(computing.pooled_sd(a, b) * np.sqrt(1 / 9 + 1 / 14))
    assert computing.one_sample(a).p == pytest.approx(stats.ttest_1samp(a, 0).pvalue)


def test_noncentral_limits_meet_their_definition() -> None:
    low, high = computing.noncentral_d(2.5, 20, 20)
    scale = np.sqrt(1 / 20 + 1 / 20)
    assert stats.nct.sf(2.5, 38, low / scale) == pytest.approx(0.025)
    assert stats.nct.cdf(2.5, 38, high / scale) == pytest.approx(0.025)
    assert computing.noncentral_eta2(0.01, 2, 57) == (0.0, 0.0)
