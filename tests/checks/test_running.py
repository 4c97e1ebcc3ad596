"""One fault loses one check on one claim, and what is missing is named."""

from dataclasses import replace

import pytest

from recheck.checks import registry
from recheck.checks.running import run_checks
from recheck.model import Place, Settings
from tests.checks.claims import claim


def test_a_fault_is_one_unchecked_finding(monkeypatch):
    def fails(case):
        raise ZeroDivisionError("no reason")

    checks = tuple(replace(c, run=fails) if c.name == "p-from-t" else c for c in registry.all_checks())
    monkeypatch.setattr("recheck.checks.running.all_checks", lambda: checks)
    found = run_checks([claim("t-test", t="2.20", df="28", p=".036", d="0.8")], Settings())
    verdicts = {f.check: f.verdict for f in found}
    assert verdicts["p-from-t"] == "unchecked"
    assert verdicts["d-from-t"] == "agrees"
    assert "no reason" in next(f.message for f in found if f.check == "p-from-t")


def test_missing_df_is_named():
    (found,) = run_checks([claim("t-test", t="2.20", p=".036")], Settings())
    assert (found.verdict, found.check) == ("unchecked", "p-from-t")
    assert "df" in found.message


def test_ids_are_stable():
    claims = [claim("t-test", t="2.20", df="28", p=".036")]
    first = run_checks(claims, Settings())
    again = run_checks(claims, Settings())
    assert [f.id for f in first] == [f.id for f in again]


def rows_of(*ts, spread="0.31"):
    return [
        replace(
            claim("regression", name=f"row {i}", b="0.84", se=spread, t=t),
            place=Place(f"0.84 | {spread} | {t}", table="Table 1", row=f"row {i}"),
        )
        for i, t in enumerate(ts)
    ]


@pytest.mark.parametrize(
    ("ts", "verdicts"),
    [
        (("2.71", "2.70", "4.21"), ["agrees", "agrees", "inconsistent"]),
        (("4.71", "4.70", "4.21"), ["conditional"] * 3),
        (("4.71", "4.70", "4.21", "2.71"), ["conditional"] * 3 + ["agrees"]),
        (("4.71", "4.70"), ["inconsistent"] * 2),
    ],
)
def test_most_rows_of_a_table_are_not_misprints(ts, verdicts):
    found = run_checks(rows_of(*ts), Settings())
    assert [f.verdict for f in found if f.check == "t-from-b"] == verdicts
    conditional = [f for f in found if f.verdict == "conditional"]
    assert all("most of its rows do not fit" in f.message for f in conditional)
