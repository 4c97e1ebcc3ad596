"""Checks of whole scores and of scales on claims written by hand."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.checks.registry import Case, find_check
from recheck.checks.running import run_checks
from recheck.confirming import confirm
from recheck.model import (
    AVERAGED_BY,
    N_OF_GROUP,
    SCALE_ENDS_INFERRED,
    SCALE_INFERRED,
    SCORES_ASKED,
    Reading,
    Settings,
)
from tests.checks.claims import claim

SCALE = {"scale_min": "1", "scale_max": "7"}


def found(check, *stated, notes=(), background=(), outcome=None, **values):
    """The findings of a check on a summary of scores from 1 to 7."""
    summary = replace(
        claim("group-summary", *stated, **{**SCALE, **values}), notes=notes, background=background, outcome=outcome
    )  # fmt: skip
    return list(find_check(check).run(Case(claim=summary)))


def one(check, *stated, **rest):
    (finding,) = found(check, *stated, **rest)
    return finding


ONE = ("whole-scores", "single-item")
GRIM = {"mean": "5.19", "sd": "1.10", "n": "28"}


def test_a_mean_that_no_whole_scores_have_is_impossible_and_the_nearest_are_named():
    """Brown & Heathers (2017): 28 whole scores have means of 5.18 and 5.21 (145 and 146 over 28), none of 5.19."""
    finding = one("mean-of-whole-scores", *ONE, **GRIM)
    assert finding.verdict == "impossible"
    assert "no 28 whole numbers from 1 to 7 have a mean that rounds to 5.19" in finding.message
    assert "5.18 (145/28) and 5.21 (146/28)" in finding.message
    assert [i.low for i in finding.implied] == pytest.approx([145 / 28, 146 / 28])
    assert finding.gap == pytest.approx((5.185 - 145 / 28) / 0.01)
    assert any(r.quantity == "n" and "26, 27, 31, 32" in r.text for r in finding.reconciled_by)
    assert any(
        r.quantity == "items_per_score" and "average of 3, 4, 5 answers" in r.text
        for r in finding.reconciled_by
    )


def test_a_possible_mean_comes_with_scores_and_with_the_power_of_the_test():
    finding = one("mean-of-whole-scores", *ONE, mean="5.21", n="28")
    assert finding.verdict == "agrees"
    assert "5 (22 times) and 6 (6 times)" in finding.message
    assert "72% of all means with two decimals could be told to be impossible" in finding.tolerance


def test_a_useless_test_says_so():
    finding = one("mean-of-whole-scores", *ONE, mean="5.21", n="250")
    assert finding.verdict == "unchecked"
    assert (
        "with n = 250 and two decimals every mean is possible, so this check cannot find anything"
        in finding.message
    )


@pytest.mark.parametrize(
    ("stated", "rest", "words"),
    [
        (("whole-scores",), {}, "average of 3 answers"),
        (ONE, {"notes": (N_OF_GROUP,)}, "all 28 of the group answered"),
        (ONE, {"notes": (SCALE_INFERRED,)}, "scale told near by"),
        (ONE, {"background": ("imputed",)}, "imputation"),
        ((*ONE, "inferred"), {}, "same scores"),
    ],
)
def test_what_the_text_leaves_open_is_no_more_than_conditional(stated, rest, words):
    finding = one("mean-of-whole-scores", *stated, **GRIM, **rest)
    assert finding.verdict == "conditional"
    assert words in finding.message


@pytest.mark.parametrize(
    "stated",
    [
        ("whole-scores", "averaged-scores"),
        (*ONE, "covariate-adjusted"),
        (*ONE, "imputed"),
        (*ONE, "prorated"),
        (*ONE, "marginal"),
    ],
)
def test_scores_that_cannot_be_rebuilt_are_unchecked(stated):
    finding = one("mean-of-whole-scores", *stated, **GRIM)
    assert finding.verdict == "unchecked"
    assert not found("sd-of-whole-scores", *stated, **GRIM)


def test_nothing_is_said_of_scores_that_nobody_calls_whole():
    assert not found("mean-of-whole-scores", **GRIM) and not found("sd-of-whole-scores", **GRIM)


def test_items_averaged_in_a_score_are_counted_and_never_more_than_conditional():
    assert (
        one("mean-of-whole-scores", "whole-scores", "averaged-scores", items_per_score="3", **GRIM).verdict
        == "agrees"
    )
    finding = one(
        "mean-of-whole-scores", "whole-scores", "averaged-scores", mean="5.19", n="14", items_per_score="2"
    )
    assert finding.verdict == "conditional"
    assert "everyone answered all 2 items" in finding.message


def test_a_mean_that_was_cut_off_is_conditional():
    """17/8 = 2.125, 5/3 = 1.666… cut off to 1.66."""
    finding = one("mean-of-whole-scores", *ONE, mean="1.66", n="3")
    assert finding.verdict == "conditional"
    assert "rounded" in finding.message or "cut off" in finding.message


def test_a_total_beside_the_mean_may_be_that_of_all():
    finding = one("mean-of-whole-scores", *ONE, mean="5.19", sd="1.10", N="28")
    assert finding.verdict == "conditional" and "N = 28 is the number of these scores" in finding.message


def test_another_reader_must_have_read_the_same_n():
    first = claim("group-summary", *ONE, **SCALE, **GRIM)
    other = claim("group-summary", mean="5.19", sd="1.10", n="23")
    for seen, verdict in ((first, "impossible"), (other, "unchecked")):
        findings = confirm(run_checks((first,), Settings()), (first,), lambda _, seen=seen: Reading((seen,)))
        assert {f.check: f.verdict for f in findings}["mean-of-whole-scores"] == verdict


def test_the_word_of_the_reader_counts_as_that_of_the_text():
    assert one("mean-of-whole-scores", "whole-scores", notes=(SCORES_ASKED,), **GRIM).verdict == "impossible"


def test_a_scale_of_points_without_ends_leaves_the_mean_free_but_not_the_width():
    rest = {"notes": (SCALE_ENDS_INFERRED,)}
    assert not found("mean-on-scale", *ONE, mean="0.25", n="28", **rest)
    assert one("sd-on-scale", *ONE, mean="0.25", sd="3.30", n="28", **rest).verdict == "impossible"
    assert not found("sd-on-scale", *ONE, mean="0.25", sd="3.00", n="28", **rest)


def test_an_sd_that_goes_with_no_whole_scores_of_the_mean():
    """Squares summing to 48 + … for n = 5 and sum 15 are odd: SD 0.71 (47) and 1.00 (49) exist, 0.87 (48) does not."""
    finding = one("sd-of-whole-scores", *ONE, mean="3.00", sd="0.87", n="5")
    assert finding.verdict == "impossible"
    assert [i.low for i in finding.implied] == [0.71, 1.00]
    assert "even or odd" in finding.message


def test_an_sd_below_the_least_of_a_mean_between_whole_numbers():
    """Mean 1.50 of 8 whole scores: SD 0.53 at least (reference table, row of SD 0)."""
    finding = one("sd-of-whole-scores", *ONE, mean="1.50", sd="0.20", n="8")
    assert finding.verdict == "impossible" and finding.implied[0].low == 0.53


def test_an_sd_with_n_below_is_a_reading():
    """Scores 1 and 3 twice each: SD 1.15 with n - 1, 1.00 with n; no other has 1.00 with mean 2.00 and n = 4."""
    finding = one("sd-of-whole-scores", *ONE, mean="2.00", sd="1.00", n="4")
    assert finding.verdict == "conditional" and "n, not n − 1" in finding.message


def test_a_standard_error_is_checked_as_one():
    assert one("sd-of-whole-scores", *ONE, mean="3.00", se="0.39", n="5").verdict != "agrees"
    assert one("sd-of-whole-scores", *ONE, mean="3.00", se="0.45", n="5").verdict == "agrees"


def test_an_unlabelled_spread_may_be_a_standard_error():
    finding = one("sd-of-whole-scores", *ONE, "spread-unlabelled", mean="3.00", sd="0.45", n="5")
    assert finding.verdict == "conditional" and "standard error" in finding.message


def test_an_impossible_mean_is_told_once():
    assert not found("sd-of-whole-scores", *ONE, **GRIM)


def test_means_off_their_scale():
    assert one("mean-on-scale", *ONE, mean="7.42", n="28").verdict == "impossible"
    assert one("mean-on-scale", "whole-scores", mean="23.42", n="28").verdict == "conditional"
    assert one("mean-on-scale", *ONE, "marginal", mean="7.42", n="28").verdict == "unchecked"
    assert not found("mean-on-scale", *ONE, mean="7.00", n="28")
    assert not found("mean-on-scale", *ONE, mean="-0.42", n="28", outcome="Change in sourness")


def test_sds_beyond_what_a_scale_allows():
    """Bhatia & Davis (2000): √((7 - 6.21)(6.21 - 1) 28/27) = 2.066; whole ends allow 2.004."""
    finding = one("sd-on-scale", *ONE, mean="6.21", sd="3.10", n="28")
    assert finding.verdict == "impossible" and finding.implied[0].high == pytest.approx(2.004, abs=1e-3)
    assert one("sd-on-scale", mean="6.21", sd="3.10", n="28").verdict == "conditional"
    assert one("sd-on-scale", mean="6.21", sd="1.10", n="28").verdict == "agrees"
    assert (
        one("sd-on-scale", *ONE, mean="6.21", sd="3.10", n="28", notes=(N_OF_GROUP,)).verdict == "conditional"
    )
    assert (
        one("sd-on-scale", *ONE, mean="6.21", sd="5.10", n="28", notes=(N_OF_GROUP,)).verdict == "impossible"
    )
    assert not found("sd-of-whole-scores", *ONE, mean="6.21", sd="3.10", n="28")


def test_sds_beyond_a_scale_without_n():
    """Two scores 6 apart have an SD of 4.24; no scores from 1 to 7 have more."""
    summary = claim("group-summary", *ONE, **SCALE, mean="4.00", sd="4.30")
    (finding,) = find_check("sd-on-scale").run(Case(claim=summary))
    assert finding.verdict == "impossible"


def test_a_spread_unlabelled_or_averaged_scores_against_the_scale():
    assert (
        one("sd-on-scale", *ONE, "spread-unlabelled", mean="6.21", sd="3.10", n="28").verdict == "conditional"
    )
    assert (
        one("sd-on-scale", "whole-scores", "averaged-scores", mean="6.21", sd="3.10", n="28").verdict
        == "impossible"
    )


@settings(max_examples=150, deadline=None, derandomize=True)
@given(st.lists(st.integers(1, 7), min_size=2, max_size=80), st.integers(0, 3), st.booleans())
def test_figures_of_a_sample_agree_or_say_that_nothing_can_be_found(scores, decimals, by_numpy):
    x = np.array(scores)
    mean, sd = float(x.mean()), float(x.std(ddof=1))
    if by_numpy:
        mean, sd = float(np.round(mean, decimals)), float(np.round(sd, decimals))
    values = {"mean": f"{mean:.{decimals}f}", "sd": f"{sd:.{decimals}f}", "n": str(len(scores))}
    for check in ("mean-of-whole-scores", "sd-of-whole-scores", "mean-on-scale", "sd-on-scale"):
        verdicts = {finding.verdict for finding in found(check, *ONE, **values)}
        assert verdicts <= {"agrees", "unchecked"}


def test_words_that_hint_at_averages_are_quoted():
    finding = one(
        "mean-of-whole-scores", *ONE, "averaged-scores", notes=(f"{AVERAGED_BY}“six loaves”",), **GRIM
    )
    assert finding.verdict == "unchecked"
    assert "“six loaves”" in finding.message and "--scores" in finding.message


def test_words_far_off_that_hint_at_averages_leave_a_doubt():
    finding = one("mean-of-whole-scores", *ONE, notes=(f"{AVERAGED_BY}“six loaves”",), **GRIM)
    assert finding.verdict == "conditional"
