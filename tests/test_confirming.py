"""A finding stands only where a second reading holds the same numbers."""

from dataclasses import replace

import pytest

from recheck.checks.running import run_checks
from recheck.confirming import confirm
from recheck.errors import UnreadableDocument
from recheck.model import Place, Reading, Settings
from tests.checks.claims import claim, printed

FIRST = replace(claim("t-test", t="2.20", df="28", p=".36"), place=Place("t(28) = 2.20, p = .36", page=3))


def confirmed(*seen, claims=(FIRST,)):
    found = run_checks(claims, Settings())
    return confirm(found, claims, lambda pages: Reading(tuple(seen)))


def test_same_numbers_confirm():
    (found,) = confirmed(claim("t-test", t="2.20", df="28", p=".36", d="0.8"))
    assert (found.verdict, found.reversal) == ("inconsistent", True)


def test_another_number_leaves_it_unchecked_with_both_readings():
    other = replace(claim("t-test", t="2.20", df="28", p=".036"), place=Place("t(28) = 2.20, p = .036"))
    (found,) = confirmed(other)
    assert (found.verdict, found.reversal) == ("unchecked", False)
    assert "p = .36" in found.message and "p = .036" in found.message


def test_no_such_result_leaves_it_unchecked():
    (found,) = confirmed()
    assert found.verdict == "unchecked"
    assert "no such result" in found.message


def test_numbers_that_the_finding_does_not_rest_on_may_differ():
    first = replace(FIRST, values={**FIRST.values, "g": printed("0.8")})
    found = confirmed(claim("t-test", t="2.20", df="28", p=".36", g="0.3"), claims=(first,))
    assert {f.check: f.verdict for f in found}["p-from-t"] == "inconsistent"


def test_pages_are_read_before_the_whole_document():
    asked = []

    def second(pages):
        asked.append(pages)
        return Reading((FIRST,)) if pages is None else Reading(())

    (found,) = confirm(run_checks((FIRST,), Settings()), (FIRST,), second)
    assert found.verdict == "inconsistent"
    assert asked == [[2, 3, 4], None]


def test_a_second_engine_that_fails_confirms_nothing():
    def second(pages):
        raise UnreadableDocument("a.pdf", "it is damaged", "save it again")

    (found,) = confirm(run_checks((FIRST,), Settings()), (FIRST,), second)
    assert found.verdict == "unchecked"


@pytest.mark.parametrize("verdict", ["agrees"])
def test_what_agrees_is_not_read_again(verdict):
    fine = claim("t-test", t="2.20", df="28", p=".036")
    found = confirm(run_checks((fine,), Settings()), (fine,), lambda pages: pytest.fail("read again"))
    assert found[0].verdict == verdict
