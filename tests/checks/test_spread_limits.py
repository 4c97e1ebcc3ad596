"""SDs that no scores with such a range, such quartiles or such a median can have."""

import pytest

from recheck.checks.registry import Case, all_checks, find_check
from tests.checks.claims import claim

all_checks()
CHECKS = ("spread-in-range", "spread-from-quartiles", "mean-and-median")


def found(*said, **values):
    case = Case(claim=claim("group-summary", *said, **values))
    findings = [
        f
        for name in CHECKS
        if set(find_check(name).needs) <= values.keys()
        for f in find_check(name).run(case)
    ]
    return [(f.check, f.quantity, f.verdict) for f in findings]


@pytest.mark.parametrize(
    ("values", "expected"),
    [
        # Popoviciu (1935): half of five times 10/2 is the most, √(25 · 2/1) = 7.07 for n = 2.
        ({"sd": "7.0", "min": "0", "max": "10"}, []),
        ({"sd": "8.5", "min": "0", "max": "10"}, [("spread-in-range", "sd", "impossible")]),
        ({"sd": "5.2", "min": "0", "max": "10", "n": "40"}, []),  # ends of up to 10.5 and −0.5
        ({"sd": "5.8", "min": "0", "max": "10", "n": "40"}, [("spread-in-range", "sd", "impossible")]),
        ({"mean": "1.0", "sd": "3.5", "min": "0.0", "max": "10.0", "n": "40"}, [("spread-in-range", "sd", "impossible")]),
        ({"mean": "1.0", "sd": "2.9", "min": "0.0", "max": "10.0", "n": "40"}, []),
        # One value at either end at least: 10/√80 = 1.12; but the scale may be meant.
        ({"sd": "0.9", "min": "0.0", "max": "10.0", "n": "40"}, [("spread-in-range", "sd", "conditional")]),
        ({"sd": "1.2", "min": "0.0", "max": "10.0", "n": "40"}, []),
        ({"se": "5.6", "min": "0.0", "max": "10.0", "n": "4"}, [("spread-in-range", "se", "conditional")]),
        # Ten of forty at 88 or below, ten at 97 or above: 9 √(10/80) = 3.18, with the ends at 88.5 and 96.5 2.83.
        ({"sd": "2.0", "q1": "88", "q3": "97", "n": "40"}, [("spread-from-quartiles", "sd", "impossible")]),
        ({"sd": "2.9", "q1": "88", "q3": "97", "n": "40"}, []),
        ({"sd": "0.5", "iqr": "9.0", "n": "40"}, [("spread-from-quartiles", "sd", "impossible")]),
        ({"sd": "0.5", "q1": "88", "q3": "97", "n": "3"}, []),
        ({"mean": "84.0", "sd": "6.1", "median": "62.0"}, [("mean-and-median", "sd", "impossible")]),
        ({"mean": "84.0", "sd": "6.1", "median": "78.0"}, []),
        ({"mean": "2.0", "sd": "3.46", "median": "0.0", "n": "3"}, []),  # 0, 0, 6
        ({"mean": "2.0", "sd": "2.40", "median": "0.0", "n": "3"}, [("mean-and-median", "sd", "impossible")]),
        ({"mean": "84.0", "se": "1.0", "median": "62.0", "n": "25"}, [("mean-and-median", "se", "conditional")]),
        ({"mean": "84.0", "se": "5.0", "median": "62.0", "n": "25"}, []),
    ],
)  # fmt: skip
def test_spreads_that_no_scores_have(values, expected):
    assert found(**values) == expected


def test_what_is_open_makes_it_a_question():
    values = {"mean": "84.0", "sd": "6.1", "median": "62.0"}
    assert found("spread-unlabelled", **values)[0][2] == "conditional"
    assert found("transformed", **values)[0][2] == "conditional"


def test_an_se_called_sd_is_offered():
    case = Case(claim=claim("group-summary", sd="0.50", q1="88", q3="97", n="40"))
    (finding,) = find_check("spread-from-quartiles").run(case)
    assert [r.change for r in finding.reconciled_by] == ["SD → SE"]
