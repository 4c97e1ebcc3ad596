"""What the other rows of a table tell about one row: honest tables (statsmodels) and one misprint among them."""

from dataclasses import replace

import numpy as np
import statsmodels.api as sm

from recheck.checks.running import run_checks
from recheck.model import Place, Settings
from tests.checks.claims import claim


def verdicts(check, rows, kind="regression", *said, interval_of=None):
    claims = [
        replace(
            claim(kind, *said, name=f"r{i}", interval_of=interval_of, **values),
            place=Place(f"row {i}", table="Table 3", row=f"x{i}"),
        )
        for i, values in enumerate(rows)
    ]
    return [f.verdict for f in run_checks(claims, Settings()) if f.check == check]


RIGHT = [
    {"beta": "0.250", "se": "0.050", "t": "5.00"},
    {"beta": "0.150", "se": "0.050", "t": "3.00"},
    {"beta": "−0.120", "se": "0.040", "t": "−3.00"},
]


def test_a_beta_is_compared_where_other_rows_show_that_the_se_is_its_own():
    wrong = {"beta": "0.253", "se": "0.056", "t": "5.81"}
    assert verdicts("t-from-b", [*RIGHT, wrong]) == ["agrees"] * 3 + ["conditional"]
    assert verdicts("t-from-b", [wrong]) == ["unchecked"]


def test_a_standardized_beta_beside_the_se_of_b_is_not_compared():
    rng = np.random.default_rng(3)
    x = rng.normal(size=(80, 3)) * (1.0, 5.0, 20.0)
    fit = sm.OLS(x @ (1.0, 0.2, -0.1) + rng.normal(size=80) * 3, sm.add_constant(x)).fit()
    scale = x.std(axis=0) / (fit.model.endog.std())
    rows = [
        {"beta": f"{b * s:.2f}", "se": f"{se:.2f}", "t": f"{t:.2f}"}
        for b, s, se, t in zip(fit.params[1:], scale, fit.bse[1:], fit.tvalues[1:], strict=True)
    ]
    assert set(verdicts("t-from-b", rows)) == {"unchecked"}


def test_counts_of_the_row_tell_how_skewed_the_interval_of_a_ratio_may_be():
    def centre(*counts):
        place = Place("Split crust", table="Table 2", row="Split crust")
        told = {"rr": "0.58", "ci_low": "0.27", "ci_high": "2.25", "ci_level": "95"}  # 0.27 to 1.25 is right
        rows = [claim("estimate", interval_of="rr", **told)]
        rows += [claim("count", name=f"c{n}", count=str(n), total="200") for n in counts]
        found = run_checks([replace(row, place=place) for row in rows], Settings())
        return [f.verdict for f in found if f.check == "ratio-centre"]

    assert centre() == ["unchecked"]
    assert centre(10, 17) == ["conditional"]


def test_weights_told_elsewhere_are_no_excuse_where_all_other_rows_fit_the_counts():
    def shares(*told):
        rows = [
            replace(
                claim("count", name=f"w{i}", count=c, percent=p, total="400"),
                place=Place(f"row {i}", table="Table 1", row=f"x{i}"), background=("weighted",),
            )
            for i, (c, p) in enumerate(told)
        ]  # fmt: skip
        return [f.verdict for f in run_checks(rows, Settings()) if f.check == "percent-from-count"]

    fitting = [("100", "25.0"), ("90", "22.5"), ("30", "7.5")]
    assert shares(*fitting, ("154", "39.5")) == ["agrees"] * 3 + ["conditional"]
    assert set(shares(("100", "26.1"), ("90", "20.4"), ("154", "39.5"))) == {"unchecked"}


def odds(ratio, low, high, p):
    return {"or": ratio, "ci_low": low, "ci_high": high, "ci_level": "95", "p": p}


def test_profile_intervals_of_a_table_do_not_tell_p():
    skewed = [odds("1.27", "0.92", "1.63", ".06"), odds("0.80", "0.50", "1.70", ".30")]
    other = odds("0.58", "0.31", "1.08", ".03")  # Wald's p of this interval is .09
    assert verdicts("p-from-ci", [other], "estimate", interval_of="or") == ["conditional"]
    assert verdicts("p-from-ci", [*skewed, other], "estimate", interval_of="or")[-1] == "unchecked"


def test_one_method_behind_many_rows_is_no_question_for_each():
    other = odds("0.58", "0.31", "1.08", ".03")
    assert verdicts("p-from-ci", [other] * 3, "estimate", interval_of="or") == ["unchecked"] * 3


def test_a_ratio_is_denied_by_its_counts_where_another_row_is_given_by_them():
    def row(name, ratio, *counts):
        place = Place(name, table="Table 2", row=name)
        groups = [
            replace(claim("count", name=f"{name}{k}", count=str(k), total=str(n)), place=place, group=f"g{n}")
            for k, n in counts
        ]
        told = claim("estimate", "crude", name=name, groups=tuple(g.id for g in groups), **{"or": ratio})
        return [replace(told, place=place), *groups]

    wrong = row("Split crust", "0.55", (17, 139), (31, 140))
    right = row("Dark crust", "0.68", (40, 139), (52, 140))
    for rows, expected in ((wrong, ["conditional"]), ([*wrong, *right], ["inconsistent", "agrees"])):
        found = run_checks(rows, Settings())
        assert [f.verdict for f in found if f.check == "ratio-from-counts"] == expected
