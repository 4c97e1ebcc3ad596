"""A total beside the groups that it is made of; and what only looks like one."""

import numpy as np
import pytest

import recheck
from recheck.checks.examples import table

CAPTION = "Table 1. Height of loaves in mm, mean (SD)."
HEAD = " | Trained (n = 18) | Untrained (n = 20) | {} (n = {})"
CHECKS = ("total-mean", "total-sd", "total-quantiles")


def verdicts(text):
    return {f.check: f.verdict for f in recheck.audit_text(text).findings if f.check in CHECKS}


@pytest.mark.parametrize(
    "name", ["Total", "All", "Overall", "All loaves", "Whole sample", "Both groups", "Total sample"]
)
def test_names_of_a_total(name):
    text = table(CAPTION, HEAD.format(name, 38), "Height | 92.4 (6.1) | 90.1 (5.4) | 91.2 (5.8)")
    assert verdicts(text) == {"total-mean": "agrees", "total-sd": "agrees"}


def test_sizes_that_do_not_add_up_are_no_total():
    text = table(CAPTION, HEAD.format("Total", 41), "Height | 92.4 (6.1) | 90.1 (5.4) | 99.2 (1.8)")
    assert verdicts(text) == {}


def test_a_column_that_is_no_group_is_left_alone():
    head = " | Trained (n = 18) | Untrained (n = 20) | Difference (n = 38)"
    assert verdicts(table(CAPTION, head, "Height | 92.4 (6.1) | 90.1 (5.4) | 2.3 (0.8)")) == {}


def test_groups_of_two_factors_are_no_parts_of_one_total():
    rows = (
        "Rye | 18 | 92.4 | 6.1",
        "Wheat | 20 | 90.1 | 5.4",
        "Morning | 19 | 91.0 | 5.9",
        "Evening | 19 | 91.4 | 5.6",
    )
    assert verdicts(table("Table 1. Height.", " | n | M | SD", *rows, "Total | 38 | 99.9 | 1.0")) == {}


@pytest.mark.parametrize(
    ("total", "expected"),
    [
        ("91.2 | 5.8", ("agrees", "agrees")),
        ("91.8 | 5.8", ("inconsistent", "agrees")),
        ("91.2 | 4.8", ("agrees", "inconsistent")),
    ],
)
def test_groups_in_rows_with_their_own_ns(total, expected):
    rows = ("Rye | 18 | 92.4 | 6.1", "Wheat | 20 | 90.1 | 5.4", f"Total | 38 | {total}")
    found = verdicts(table("Table 1. Height.", " | n | M | SD", *rows))
    assert (found["total-mean"], found["total-sd"]) == expected


def test_ns_in_headers_leave_room_for_missing_cases():
    # All 18 and 20 give 91.2; ten and twenty of them 90.9: anything from 90.1 to 92.4 can be.
    for mean, verdict in (("91.6", "conditional"), ("92.6", "inconsistent")):
        text = table(CAPTION, HEAD.format("Total", 38), f"Height | 92.4 (6.1) | 90.1 (5.4) | {mean} (5.8)")
        assert verdicts(text)["total-mean"] == verdict


def test_a_stated_weighting_excuses():
    text = table(
        "Table 1. Weighted means (SD) of height.",
        HEAD.format("Total", 38),
        "Height | 92.4 (6.1) | 90.1 (5.4) | 94.6 (5.8)",
    )
    assert verdicts(text)["total-mean"] == "unchecked"


def test_the_implied_sd_of_a_total_is_attained():
    rng = np.random.default_rng(4)
    parts = [rng.normal(90, 5, 18), rng.normal(94, 6, 20)]
    rows = [
        f"{name} | {len(x)} | {x.mean():.2f} | {x.std(ddof=1):.2f}"
        for name, x in zip(("Rye", "Wheat"), parts, strict=True)
    ]
    whole = np.concatenate(parts)
    text = table(
        "Table 1. Height.", " | n | M | SD", *rows, f"All | 38 | {whole.mean():.2f} | {whole.std(ddof=1):.2f}"
    )
    (finding,) = [f for f in recheck.audit_text(text).findings if f.check == "total-sd"]
    assert finding.verdict == "agrees"
    assert finding.implied[0].low < whole.std(ddof=1) < finding.implied[0].high
    assert finding.implied[0].high - finding.implied[0].low < 0.03


SECTORS = (
    "Morning shift | 210 | 51.2 | 12.1",
    "Evening shift | 418 | 40.1 | 7.2",
    "Total | 628 | 41.4 | 8.4",
)


@pytest.mark.parametrize(
    ("caption", "head"),
    [
        ("Hours of work (population-weighted).", "n"),
        ("Hours of work. Estimates use survey weights.", "n"),
        ("Hours of work; n unweighted.", "n"),
        ("Hours of work.", "Unweighted n"),
        ("Hours of work, age-standardised.", "n"),
        ("Hours of work, standardised to the bakers of all regions.", "n"),
        ("Hours of work, adjusted for age.", "n"),
        ("Hours of work: values predicted by the model. Predicted means.", "n"),
        ("Hours of work, pooled estimates.", "n"),
        ("Hours of work; missing values were imputed.", "n"),
    ],
)
def test_means_that_are_weighted_adjusted_or_modelled_are_not_rebuilt(caption, head):
    text = table(f"Table 1. {caption}", f" | {head} | Mean | SD", *SECTORS)
    assert set(verdicts(text).values()) <= {"unchecked"}


def test_an_adjusted_mean_is_known_by_its_head():
    for head in ("Adjusted mean", "Weighted mean", "Predicted mean"):
        text = table("Table 1. Hours of work.", f" | n | {head} | SD", *SECTORS)
        assert set(verdicts(text).values()) <= {"unchecked"}


@pytest.mark.parametrize(
    "caption",
    ["Hours of work.", "Hours of work. P values are adjusted by Holm's method.", "Weight of loaves."],
)
def test_other_words_excuse_no_total(caption):
    text = table(f"Table 1. {caption}", " | n | Mean | SD", *SECTORS)
    assert verdicts(text) == {"total-mean": "inconsistent", "total-sd": "inconsistent"}


@pytest.mark.parametrize(
    ("sd", "words"), [("9.7", "plain mean of the groups' SDs"), ("7.8", "of the groups' means")]
)
def test_a_row_of_plain_means_may_tell_plain_means_of_sds_or_their_spread(sd, words):
    # By hand: (12.1 + 7.2)/2 = 9.65, and (51.2 − 40.1)/√2 = 7.85.
    text = table("Table 1. Hours of work.", " | n | Mean | SD", *SECTORS[:2], f"Total | 628 | 45.7 | {sd}")
    (finding,) = [f for f in recheck.audit_text(text).findings if f.check == "total-sd"]
    assert (finding.verdict, words in finding.message) == ("conditional", True)


@pytest.mark.parametrize(
    "told",
    [
        ("We trained 70 apprentices (mean age = {} years, SD = 3.1): 40 women (M = 22.1, SD = 3.0) and 30 men (M = 23.4, SD = 3.1)."),
        ("Seventy apprentices took part (mean age {}, SD = 3.1), 40 women (mean age 22.1, SD = 3.0) and 30 men (mean age 23.4, SD = 3.1)."),
        ("The sample of apprentices (M = {}, SD = 3.1, n = 70), of whom women (M = 22.1, SD = 3.0, n = 40) were fewer than men (M = 23.4, SD = 3.1, n = 30), was large."),
    ],
)  # fmt: skip
def test_a_total_told_in_a_text(told):
    # By hand: (40 · 22.1 + 30 · 23.4)/70 = 22.66.
    for mean, expected in (("22.7", "agrees"), ("24.8", "conditional")):
        assert verdicts(told.format(mean))["total-mean"] == expected


@pytest.mark.parametrize(
    "told",
    [
        "Untrained apprentices (M = 5.1, SD = 1.0, n = 60) rated below those with one (M = 4.2, SD = 1.1, n = 30) or two lessons (M = 3.9, SD = 1.0, n = 30).",
        "We trained 70 apprentices (mean age = 34.7 years, SD = 3.1): ratings of 40 women (M = 4.1, SD = 1.0) and 30 men (M = 4.4, SD = 1.1) differed.",
    ],
)
def test_ns_that_add_up_make_no_total_by_themselves(told):
    assert verdicts(told) == {}
