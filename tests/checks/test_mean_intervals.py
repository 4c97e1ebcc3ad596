"""Spread and middle of the interval of one group's mean."""

import pytest
from scipy import stats

import recheck
from recheck.checks.examples import table


def verdicts(text, *checks):
    return [(f.check, f.quantity, f.verdict) for f in recheck.audit_text(text).findings if f.check in checks]


def found(text, check):
    return [f for f in recheck.audit_text(text).findings if f.check == check]


@pytest.mark.parametrize(
    ("told", "verdict"),
    [
        ("SD = 6.1, n = 18, 95% CI [89.4, 95.4]", "agrees"),
        ("SD = 6.1, n = 18, 95% CI [89.6, 95.2]", "conditional"),  # by z
        ("SD = 1.44, n = 18, 95% CI [89.4, 95.4]", "conditional"),  # an SE, or another method
        ("SE = 1.44, n = 18, 95% CI [89.4, 95.4]", "agrees"),
        ("SE = 1.44, 95% CI [89.4, 95.4]", "agrees"),
        ("SE = 6.1, n = 18, 95% CI [89.4, 95.4]", "inconsistent"),
        ("SE = 3.14, n = 18, 90% CI [89.4, 95.4]", "inconsistent"),
        ("SE = 1.72, n = 18, 90% CI [89.4, 95.4]", "agrees"),
    ],
)
def test_interval_and_spread(told, verdict):
    assert [
        v for *_, v in verdicts(f"The mean height of rye loaves was M = 92.4 ({told}).", "spread-from-ci")
    ] == [verdict]


def test_the_implied_sd_is_that_of_the_handbook():
    # Cochrane Handbook 6.5.2.2: 30.0 to 34.2 of 25 cases is an SD of 5.09.
    (finding,) = found(
        "The mean height was M = 32.1 (SD = 5.1, n = 25, 95% CI [30.0, 34.2]).", "spread-from-ci"
    )
    low, high = finding.implied[0].low, finding.implied[0].high
    assert low < 5.09 < high
    assert high == pytest.approx(5 * 4.3 / 2 / stats.t.ppf(0.975, 24), rel=1e-7)


def test_a_column_of_ses_called_sd_is_told_as_that_slip():
    rows = ("Rye | 18 | 92.4 | 1.44 | 89.4 to 95.4", "Wheat | 20 | 90.1 | 1.21 | 87.6 to 92.6")
    text = table("Table 1. Height of loaves in mm.", " | n | Mean | SD | 95% CI", *rows)
    findings = [f for f in found(text, "spread-from-ci") if f.quantity == "sd"]
    assert [f.verdict for f in findings] == ["inconsistent"] * 2
    assert all(f.reconciled_by[0].change == "SD → SE" for f in findings)
    lone = table("Table 1. Height of loaves in mm.", " | n | Mean | SD | 95% CI", rows[0])
    (finding,) = [f for f in found(lone, "spread-from-ci") if f.quantity == "sd"]
    assert finding.verdict == "conditional"
    assert finding.reconciled_by[0].change == "SD → SE"


def test_a_mean_off_its_middle_is_asked_for_at_most():
    assert (
        verdicts("The mean height was 94.2 mm (95% CI 89.4 to 95.4).", "mean-centre")[0][2] == "conditional"
    )
    # In the middle of 4 to 16 in logarithms: 8.
    (finding,) = found("The mean count was 8.0 (95% CI 4.0 to 16.0).", "mean-centre")
    assert finding.verdict == "conditional"
    assert "logarithms" in finding.message
