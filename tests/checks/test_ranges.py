"""Single numbers against what their quantity can be, and quantiles in their order (by definition)."""

import pytest

from recheck.checks.registry import Case, all_checks, find_check
from tests.checks.claims import claim

all_checks()


def found(check, *said, kind="group-summary", interval_of=None, **values):
    case = Case(claim=claim(kind, *said, interval_of=interval_of, **values))
    return [(f.quantity, f.verdict) for f in find_check(check).run(case)]


@pytest.mark.parametrize(
    ("values", "expected"),
    [
        ({"median": "41", "q1": "38", "q3": "55"}, []),
        ({"median": "41", "q1": "41", "q3": "41"}, []),
        ({"median": "41", "q1": "46", "q3": "52"}, [("median", "impossible")]),
        ({"median": "−1.23", "q1": "9.96", "q3": "12.25"}, [("median", "impossible")]),
        ({"median": "1.2", "q1": "1", "q3": "1"}, []),  # 1.2 may be the median of quartiles of 0.5 to 1.5
        ({"q1": "89", "q3": "55"}, [("q1", "impossible")]),
        ({"q1": "3", "q3": "−8"}, [("q1", "conditional")]),  # a dash read as a minus
        ({"median": "41", "q3": "55", "min": "40", "max": "50"}, [("q3", "impossible")]),
        ({"mean": "15", "min": "10", "max": "12"}, [("mean", "impossible")]),
        ({"mean": "15", "q1": "10", "q3": "12"}, []),  # a mean may lie outside the quartiles
    ],
)
def test_order_of_quantiles(values, expected):
    assert found("quantile-order", **values) == expected


def test_an_adjusted_mean_may_leave_the_range():
    assert found("quantile-order", "marginal", mean="15", min="10", max="12") == [("mean", "conditional")]


def test_a_negative_end_of_a_ratio_is_asked_for():
    ends = {"ci_low": "−0.04", "ci_high": "1.33"}
    assert found("range", kind="estimate", interval_of="rr", rr="0.70", **ends) == [("ci_low", "conditional")]
    assert found("range", kind="estimate", interval_of="rd", rd="0.70", **ends) == []
