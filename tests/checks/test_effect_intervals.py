"""Intervals of effect sizes: published methods agree or are conditional, what no method gives is inconsistent."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

import recheck
from recheck.checks.registry import all_checks
from tests.checks.claims import claim, finding
from tests.soundness.honest_effects import d_methods, lambda_F

all_checks()

GROUPS = (
    claim("group-summary", name="a", mean="92.4", sd="6.1", n="18"),
    claim("group-summary", name="b", mean="86.0", sd="5.8", n="18"),
)
TEST = {"t": "3.23", "df": "34", "ci_level": "95"}


def verdict(low, high, *said, name="d", value="1.08", groups=GROUPS, **values):
    of = claim(
        "t-test", *said, interval_of=name, **{name: value, "ci_low": low, "ci_high": high, **TEST, **values}
    )
    return finding("ci-of-d", of, *groups).verdict


@pytest.mark.parametrize("level", (0.90, 0.95, 0.99))
def test_every_published_method_is_accepted(level):
    # d = 1.0766 is that of t = 3.23 with 18 a group.
    for how, (name, value, low, high) in d_methods(3.23 / 3, 18, 18, level).items():
        found = verdict(
            f"{low:.2f}", f"{high:.2f}", name=name, value=f"{value:.2f}", ci_level=f"{100 * level:.0f}"
        )
        usual = ("exact", "large-z", "exact-g", "large-g-z", "J2-g-z")
        assert found == ("agrees" if how in usual else found)
        assert found in ("agrees", "conditional"), how


@pytest.mark.parametrize(
    ("low", "high", "said", "expected"),
    [
        ("0.37", "1.77", (), "agrees"),
        ("0.45", "1.77", (), "conditional"),  # a bootstrap could have it
        ("0.37", "3.77", (), "inconsistent"),
        ("0.37", "3.77", ("bootstrap",), "unchecked"),
        ("0.37", "3.77", ("welch",), "conditional"),
        ("2.37", "10.43", (), None),  # leaves d out: told by ci-holds-estimate
    ],
)
def test_what_is_no_published_interval(low, high, said, expected):
    of = claim("t-test", *said, interval_of="d", d="1.08", ci_low=low, ci_high=high, **TEST)
    found = list(_run(of))
    assert [f.verdict for f in found] == ([expected] if expected else [])


def _run(of):
    from recheck.checks.registry import Case, find_check

    return find_check("ci-of-d").run(Case(claim=of, groups=GROUPS))


def test_the_interval_of_the_raw_difference_beside_d_is_no_error():
    # Scores with an SD of 2: difference 1.0, SE 0.46, t(74) = 2.18; d = 0.50.
    found = verdict("0.09", "1.91", groups=(), value="0.50", t="2.18", df="74")
    assert found == "unchecked"


def test_pairs():
    low, high = (
        x / np.sqrt(24) for x in (0.7788, 5.0474)
    )  # R: see tests/reference/r_effects.csv, t = 2.94, df = 23
    assert (
        verdict(f"{low:.2f}", f"{high:.2f}", "paired", name="d_z", value="0.60", t="2.94", df="23", groups=())
        == "agrees"
    )
    assert (
        verdict("-0.60", "1.03", "paired", name="d_z", value="0.60", t="2.94", df="23", groups=())
        == "inconsistent"
    )


def share(low, high, *said, name="partial_eta2", value=".13", level="90", **values):
    numbers = {"F": "4.20", "df1": "2", "df2": "57", "ci_level": level, **values}
    of = claim("F-test", *said, interval_of=name, **{name: value, "ci_low": low, "ci_high": high, **numbers})
    return finding("ci-of-eta2", of).verdict


@pytest.mark.parametrize(
    ("low", "high", "level", "expected"),
    [
        (".01", ".25", "90", "agrees"),
        (".00", ".28", "95", "agrees"),
        (".01", "1.00", "95", "conditional"),  # one-sided
        (".01", ".26", "90", "conditional"),  # over the error df
        (".01", ".60", "90", "inconsistent"),
    ],
)
def test_intervals_of_eta2(low, high, level, expected):
    assert share(low, high, level=level) == expected


def test_an_interval_that_leaves_out_its_estimate_is_no_error():
    # F(3, 56) = 0.05: even the central F has more than 5% below it.
    numbers = {"F": "0.05", "df1": "3", "df2": "56"}
    assert share("0", "0", value=".00", **numbers) == "agrees"
    text = "The flours did not differ, F(3, 56) = 0.95, p = .423, ηp2 = .048, 90% CI [.00, .12]."
    assert not [f for f in recheck.audit_text(text).findings if f.verdict in ("inconsistent", "impossible")]


@settings(max_examples=20, deadline=None)
@given(
    F=st.floats(0.5, 30), df1=st.integers(1, 5), df2=st.integers(8, 200), level=st.sampled_from((0.9, 0.95))
)
def test_rounding_alone_never_contradicts_eta2(F, df1, df2, level):
    ends = [lambda_F(F, df1, df2, p) for p in ((1 + level) / 2, (1 - level) / 2)]
    low, high = (x / (x + df1 + df2 + 1) for x in ends)
    if not np.isfinite(high):
        return
    eta2 = df1 * F / (df1 * F + df2)
    found = share(
        f"{low:.2f}", f"{high:.2f}", value=f"{eta2:.2f}", level=f"{100 * level:.0f}",
        F=f"{F:.2f}", df1=str(df1), df2=str(df2),
    )  # fmt: skip
    assert found == "agrees"


@settings(max_examples=20, deadline=None)
@given(r=st.floats(-0.9, 0.9), n=st.integers(8, 300))
def test_rounding_alone_never_contradicts_r(r, n):
    ends = [np.tanh(np.arctanh(r) + side * stats.norm.ppf(0.975) / np.sqrt(n - 3)) for side in (-1, 1)]
    numbers = {"ci_low": f"{ends[0]:.2f}", "ci_high": f"{ends[1]:.2f}", "ci_level": "95"}
    assert (
        finding("ci-of-r", claim("correlation", r=f"{r:.2f}", df=str(n - 2), **numbers)).verdict == "agrees"
    )


@pytest.mark.parametrize(
    ("low", "high", "expected"),
    [
        (".17", ".61", "agrees"),
        (".21", ".62", "agrees"),
        (".19", ".56", "conditional"),
        (".36", ".42", "inconsistent"),
    ],
)
def test_intervals_of_phi(low, high, expected):
    # φ² = 12.4 / 80; .21 and .62 have df added to λ (Smithson 2003); .19 and .56 are by Fisher's z.
    values = {
        "chi2": "12.4",
        "df": "1",
        "N": "80",
        "phi": ".39",
        "ci_low": low,
        "ci_high": high,
        "ci_level": "95",
    }
    assert finding("ci-of-v", claim("chi2-test", interval_of="phi", **values)).verdict == expected
