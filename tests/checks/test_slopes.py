"""b and SE of a predictor of two groups: R's figures of its own data, in three codings."""

import pytest

import recheck
from recheck.checks.registry import Case, all_checks, find_check
from tests.checks.claims import claim
from tests.reference import rows

all_checks()


@pytest.mark.parametrize("row", [row for row in rows("r_designs") if row["kind"] == "binary_slope"])
def test_slopes_of_r(row):
    x = row.given()
    groups = [
        claim(
            "group-summary",
            name=f"g{i}",
            mean=f"{x[f'mean{i}']:.2f}",
            sd=f"{x[f'sd{i}']:.2f}",
            n=f"{x[f'n{i}']:g}",
        )
        for i in (1, 2)
    ]
    test = claim(
        "t-test",
        groups=("g1", "g2"),
        b=f"{x['b']:.2f}",
        se=f"{x['se']:.2f}",
        t=f"{row.number('statistic'):.2f}",
        df=row["df"],
    )
    found = find_check("slope-from-groups").run(Case(claim=test, groups=tuple(groups)))
    expected = "agrees" if abs(x["code1"] - x["code2"]) == 1 else "conditional"
    assert [f.verdict for f in found] == [expected, expected]


def test_a_paired_t_tells_the_correlation_that_it_implies():
    # Student's sleep data: SDs 1.789 and 2.002, difference -1.58, t = 4.062: r = .795.
    text = "Sleep with the first drug (M = 0.75, SD = 1.789, n = 10) and the second (M = 2.33, SD = 2.002, n = 10) differed in a paired t test, t(9) = 4.06."
    (found,) = [f for f in recheck.audit_text(text).findings if f.check == "t-from-groups"]
    assert found.verdict == "agrees" and "correlate at 0.79" in found.message
