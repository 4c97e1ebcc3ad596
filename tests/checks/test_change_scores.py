"""Changes beside the two measures that they are the difference of."""

import pytest

import recheck
from recheck.checks.examples import table

CHECKS = ("change-from-measures", "sd-of-change")


def verdicts(head, *rows):
    text = table("Table 1. Bench scores, mean (SD).", head, *rows)
    return [(f.check, f.verdict) for f in recheck.audit_text(text).findings if f.check in CHECKS]


@pytest.mark.parametrize(
    "head",
    [
        "Before | After | Change",
        "Baseline | Follow-up | Change from baseline",
        "Baseline | 12 weeks | Change",
        "Pre-test | Post-test | Gain",
        "T1 | T2 | Gain score",
        "T0 | T1 | Change",
        "Week 0 | Week 12 | Change",
        "Pre | Post | Δ",
    ],
)
def test_names_of_times(head):
    found = verdicts(
        f" | {head}",
        "Trained (n = 18) | 4.2 (1.1) | 5.0 (1.2) | 0.8 (0.9)",
        "Untrained (n = 20) | 4.1 (1.1) | 4.3 (1.2) | 0.2 (0.9)",
    )
    assert sorted(found) == [("change-from-measures", "agrees")] * 2 + [("sd-of-change", "agrees")] * 2


def test_a_fall_may_be_printed_without_its_sign():
    assert ("change-from-measures", "agrees") in verdicts(
        " | Before | After | Reduction", "Time (n = 18) | 5.0 (1.1) | 4.2 (1.2) | 0.8 (0.9)"
    )


def test_a_change_that_is_none_is_asked_for():
    found = verdicts(" | Before | After | Change", "Trained (n = 18) | 4.2 (1.1) | 5.0 (1.2) | 1.8 (2.9)")
    assert sorted(found) == [("change-from-measures", "conditional"), ("sd-of-change", "conditional")]


def test_more_than_two_times_do_not_say_which_change_is_meant():
    assert (
        verdicts(
            " | Before | After | Follow-up | Change",
            "Trained (n = 18) | 4.2 (1.1) | 5.0 (1.2) | 4.9 (1.2) | 0.1 (0.9)",
        )
        == []
    )
