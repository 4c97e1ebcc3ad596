"""McNemar's test against the numbers of changes, with figures of R (tests/reference/r_counts.csv)."""

from dataclasses import replace

import pytest

from recheck.checks.registry import Case, all_checks, find_check
from tests.checks.claims import claim
from tests.reference import rows

all_checks()


def judged(check, of, *numbers):
    told = tuple(
        replace(claim("count", name=f"c{i}", count=str(x)), group=None) for i, x in enumerate(numbers)
    )
    found = list(
        find_check(check).run(Case(claim=replace(of, groups=tuple(c.id for c in told)), groups=told))
    )
    return found[0].verdict if found else None


@pytest.mark.parametrize(
    "row", [r for r in rows("r_counts") if r["what"].startswith("mcnemar")], ids=lambda r: r["call"]
)
def test_figures_of_r_agree(row):
    _, b, c, _ = (int(x) for x in row["counts"].split())
    exact = row["what"].endswith("exact")
    name, check = ("p", "p-from-changes") if exact else ("chi2", "chi2-from-changes")
    of = claim("chi2-test", "paired", **{name: f"{row.number('value'):.4f}"})
    assert judged(check, of, b, c) == "agrees"


def test_another_chi2_and_another_p_are_conditional():
    of = replace(claim("chi2-test", "paired", chi2="4.50", p=".200"), link_confidence="medium")
    assert judged("chi2-from-changes", of, 12, 3) == "conditional"
    assert judged("p-from-changes", of, 12, 3) == "conditional"


def test_nothing_is_said_of_other_tests():
    assert judged("chi2-from-changes", claim("chi2-test", chi2="5.40"), 12, 3) is None
    assert judged("chi2-from-changes", claim("chi2-test", "paired", chi2="5.40"), 12, 3, 4) is None
