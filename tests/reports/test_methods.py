from types import SimpleNamespace

import pytest

from recheck.checks.registry import all_checks
from recheck.model import STATED, VERDICTS
from recheck.ranking import RULE
from recheck.reports.look import Look
from recheck.reports.methods import TOPICS, method_text, methods_list, ranking_text, words_text


def squeezed(text):
    return " ".join(text.split())


def a_check(name, module, **more):
    facts = {
        "title": f"title of {name}",
        "kinds": ("t-test", "F-test"),
        "quantity": "p",
        "needs": ("t", "df"),
    }
    facts |= {
        "formula": "p = 2 P(T > |t|)",
        "source": "Student (1908)",
        "limits": "No permutation p.",
        **more,
    }
    return SimpleNamespace(name=name, run=SimpleNamespace(__module__=module), **{"beside": "", **facts})


def test_the_list_names_every_check_once_under_its_family():
    checks = [a_check("one", "recheck.reports.words"), a_check("two", "recheck.reports.look")]
    lines = methods_list(checks, Look()).splitlines()
    assert lines[0] == "The words that reports use for verdicts, kinds of claims and places"
    assert lines[1].split() == ["one", "title", "of", "one"]
    assert [line.split()[0] for line in lines if line.startswith("  ")] == ["one", "two", *TOPICS]


def test_one_check_is_told_with_examples_by_verdict():
    check = a_check(
        "one", "recheck.reports.words", agrees=("t(28) = 2.20, p = .036",), inconsistent=("p = .010",)
    )
    text = method_text(check, Look())
    assert "t-tests and F-tests" in text
    assert [word for word in VERDICTS if f"   {word} " in text] == ["inconsistent", "agrees"]


def test_what_a_check_does_not_declare_is_left_out():
    assert "judges" not in method_text(a_check("one", "recheck.reports.words", quantity=""), Look())


@pytest.mark.parametrize("check", all_checks(), ids=lambda check: check.name)
def test_every_registered_check_can_be_explained(check):
    text = squeezed(method_text(check, Look(60)))
    for part in (check.name, check.title, check.formula, check.source, check.limits):
        assert squeezed(part) in text


def test_the_whole_list_fits_the_width():
    text = methods_list(all_checks(), Look(72))
    assert max(map(len, text.splitlines())) <= 72
    assert all(f"  {check.name} " in text for check in all_checks())


def test_no_check_has_the_name_of_another_page():
    assert not {check.name for check in all_checks()} & set(TOPICS)


def test_the_ranking_rule_keeps_its_words_and_numbering():
    text = ranking_text(RULE, Look(60))
    assert squeezed(RULE) in squeezed(text)
    assert [line[:2] for line in text.splitlines() if line[:1].isdigit()] == [f"{k}." for k in range(1, 6)]


def test_every_word_of_reports_is_explained():
    text = words_text(["a number was rounded twice"], Look())
    assert all(f"   {verdict} " in text for verdict in (*VERDICTS, "reversal"))
    assert all(f"  {word} " in text for word in STATED)
    assert "a number was rounded twice (conditional)" in text
