"""U and W against sizes, z and p: R's own figures, ties, and what is left alone."""

import pytest

from recheck.checks.registry import Case, all_checks, find_check
from recheck.model import N_OF_GROUP, SIZES_IN_WORDS
from tests.checks.claims import claim, finding
from tests.reference import rows

all_checks()


def sized(n1, n2, notes=()):
    from dataclasses import replace

    return [
        replace(claim("group-summary", name=f"g{i}", median="5", n=str(n)), notes=notes)
        for i, n in ((1, n1), (2, n2))
    ]


def u_test(n1, n2, *said, notes=(), **values):
    groups = sized(n1, n2, notes)
    return claim("rank-test", "rank-test", *said, groups=tuple(g.id for g in groups), **values), groups


def verdict(check, n1, n2, *said, notes=(), **values):
    test, groups = u_test(n1, n2, *said, notes=notes, **values)
    found = list(find_check(check).run(Case(claim=test, groups=tuple(groups))))
    return found[0].verdict if found else "nothing"


@pytest.mark.parametrize(
    "row",
    [r for r in rows("r_designs") if r["kind"] in ("u_normal", "u_exact") and "wilcox.test" in r["call"]],
)
def test_p_of_r_agrees(row):
    x = row.given()
    n1, n2 = int(x["n1"]), int(x["n2"])
    found = verdict("p-from-ranks", n1, n2, u=f"{row.number('statistic'):g}", p=f"{row.number('p'):.4f}")
    many = x["ties"] > 0.25 * (n1 + n2) ** 3
    assert found == "agrees" or (many and found == "conditional")


@pytest.mark.parametrize(
    "row",
    [r for r in rows("r_designs") if r["kind"] in ("w_normal", "w_exact") and "wilcox.test" in r["call"]],
)
def test_p_of_signed_ranks_of_r_agrees(row):
    p, n = f"{row.number('p'):.3f}", f"{row.given()['n']:g}"
    test = claim("rank-test", "rank-test", "signed-ranks", w=f"{row.number('statistic'):g}", n=n, p=p)
    assert finding("p-from-ranks", test).verdict == "agrees"


@pytest.mark.parametrize(
    ("values", "expected"),
    [
        ({"u": "168"}, "nothing"), ({"u": "169"}, "conditional"), ({"u": "273"}, "conditional"), ({"u": "300"}, "impossible"),
        ({"w": "246"}, "nothing"), ({"w": "300"}, "impossible"), ({"u": "0"}, "nothing"), ({"u": "300.25"}, "nothing"),
    ],
)  # fmt: skip
def test_range_of_u_and_w(values, expected):
    # n1 n2 = 168; sums of ranks reach 246 and 273; a statistic of quarters is none of ranks.
    assert verdict("rank-statistic-range", 12, 14, **values) == expected


def test_range_where_the_total_alone_is_printed():
    assert (
        finding("rank-statistic-range", claim("rank-test", "rank-test", u="900", N="38")).verdict
        == "impossible"
    )
    assert not list(
        find_check("rank-statistic-range").run(Case(claim("rank-test", "rank-test", u="361", N="38")))
    )


def test_missing_cases_narrow_the_range_alone():
    assert verdict("rank-statistic-range", 12, 14, notes=(N_OF_GROUP,), u="300") == "impossible"
    assert verdict("z-from-ranks", 12, 14, notes=(N_OF_GROUP,), u="45", z="1.20") == "conditional"


@pytest.mark.parametrize(
    ("z", "expected"),
    [("-2.01", "agrees"), ("1.98", "agrees"), ("2.20", "agrees"), ("3.10", "conditional"), ("1.70", "inconsistent"), ("5.50", "inconsistent")],
)  # fmt: skip
def test_ties_only_enlarge_z(z, expected):
    # U = 45 of 12 and 14: 39 / 19.44 = 2.006 without, 1.980 with correction for continuity; |z| never exceeds √25.
    assert verdict("z-from-ranks", 12, 14, u="45", z=z) == expected


def test_w_of_equal_groups_may_be_that_of_pairs():
    # R 4.2.2: 2 * psignrank(25, 15) = .04791; as a U of 15 and 15 it would be far out.
    assert verdict("p-from-ranks", 15, 15, w="25", p=".048") == "agrees"


def test_another_w_is_left_alone():
    assert verdict("p-from-ranks", 15, 15, w="3.00", p=".020") == "nothing"
    assert verdict("p-from-ranks", 15, 15, u="45", p=".30", z="1.2") == "nothing"


def test_pairs_without_difference_leave_doubt():
    test = claim("rank-test", "rank-test", "signed-ranks", w="20", n="15", p=".60")
    assert finding("p-from-ranks", test).verdict == "conditional"


def test_sizes_told_with_the_test_itself():
    from dataclasses import replace

    test = claim("rank-test", "rank-test", u="45", z="−1.20", n1="12", n2="14")
    found = find_check("z-from-ranks").run(Case(test))
    assert [f.verdict for f in found] == ["inconsistent"]
    for note in (N_OF_GROUP, SIZES_IN_WORDS):
        found = find_check("z-from-ranks").run(Case(replace(test, notes=(note,))))
        assert [f.verdict for f in found] == ["conditional"]


def test_an_exact_p_is_named_before_a_reading_of_rounding():
    test = claim("rank-test", "rank-test", u="53", z="−1.10", p=".291")
    (found,) = find_check("p-from-z").run(Case(test))
    assert found.verdict == "conditional" and "exact or continuity-corrected" in found.message
