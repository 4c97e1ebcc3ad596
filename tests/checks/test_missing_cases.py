"""Sizes that a test shows to be too large for a variable."""

from __future__ import annotations

from dataclasses import replace

import pytest

from recheck.checks.missing_cases import with_fewer_cases
from recheck.checks.running import run_checks
from recheck.model import FEWER_CASES, Settings
from tests.checks.claims import claim

ONE = ("whole-scores", "single-item")
SCALE = {"scale_min": "1", "scale_max": "7"}


def told(df, *, kind="t-test", sds=("1.05", "1.02"), sizes=("48", "48")):
    """Two summaries of scores and their test."""
    first = replace(claim("group-summary", *ONE, mean="5.09", sd=sds[0], n=sizes[0], **SCALE), id="a")
    second = replace(claim("group-summary", *ONE, mean="5.69", sd=sds[1], n=sizes[1], **SCALE), id="b")
    values = {"df": df} if kind == "t-test" else {"df1": "1", "df2": df}
    test = claim(kind, **values, **({"t": "-2.95"} if kind == "t-test" else {"F": "8.70"}))
    return [first, second, replace(test, id="t", groups=("a", "b"))]


def fewer(*args, **rest):
    return [FEWER_CASES in c.notes for c in with_fewer_cases(told(*args, **rest))]


@pytest.mark.parametrize("kind", ["t-test", "F-test"])
def test_fewer_df_than_the_sizes_give_tell_of_missing_cases(kind):
    assert fewer("89", kind=kind) == [True, True, False]


@pytest.mark.parametrize("df", ["94", "47", "93", "93.9", "120"])
def test_df_of_plain_designs_tell_of_none(df):
    """n1 + n2 - 2; pairs; Welch (1947) rounded down, or with decimals; more than there can be is another matter."""
    assert fewer(df) == [False, False, False]


def test_a_mean_beside_such_a_test_is_conditional():
    def verdict(df):
        findings = run_checks(told(df), Settings())
        return next(
            f.verdict for f in findings if f.check == "mean-of-whole-scores" and "5.09" in f.place.quote
        )

    assert verdict("94") == "impossible"
    assert verdict("89") == "conditional"
