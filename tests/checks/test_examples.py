"""Every check is a declaration: its texts are filled, and its examples get the verdicts they are listed under."""

import pytest

import recheck
from recheck.checks.registry import all_checks, find_check
from recheck.errors import UnknownCheck
from recheck.model import QUANTITIES, VERDICTS

CASES = [
    (check.name, verdict, example)
    for check in all_checks()
    for verdict in VERDICTS
    for example in getattr(check, verdict)
]


@pytest.mark.parametrize(("name", "verdict", "example"), CASES)
def test_example_gets_its_verdict(name, verdict, example):
    findings = recheck.audit_text(example).findings
    verdicts = {finding.check: finding.verdict for finding in reversed(findings)}  # the worst of each check
    assert verdicts.get(name) == verdict, [(f.check, f.verdict, f.message) for f in findings]


@pytest.mark.parametrize("example", [c for c in CASES if c[1] == "agrees"])
def test_an_example_that_agrees_raises_nothing_else(example):
    findings = recheck.audit_text(example[2]).findings
    assert not [f for f in findings if f.verdict in ("impossible", "inconsistent")]


@pytest.mark.parametrize("check", all_checks(), ids=lambda check: check.name)
def test_declaration_is_complete(check):
    assert check.title and check.formula and check.source and check.limits and check.kinds
    assert check.run.__doc__
    assert set(check.needs) <= set(QUANTITIES)
    assert any(getattr(check, verdict) for verdict in VERDICTS)


def test_names_are_unique_and_found():
    names = [check.name for check in all_checks()]
    assert len(names) == len(set(names))
    assert find_check(names[0]).name == names[0]


def test_unknown_name_is_answered_with_near_ones():
    with pytest.raises(UnknownCheck, match="p-from-t"):
        find_check("p-from-tt")
