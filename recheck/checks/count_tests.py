"""Checks of a χ² or a p against the counts of its groups."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from dataclasses import replace

import numpy as np

from recheck.checks.compare import Comparison, judge, unchecked
from recheck.checks.designs import whole
from recheck.checks.examples import table
from recheck.checks.groups import link_doubts
from recheck.checks.p_values import ONE_TAILED, judge_p, loosely
from recheck.checks.registry import Case, check
from recheck.checks.risk_tables import excuses_of
from recheck.checks.tabulated import Layout, Tables, laid_out, tables_of
from recheck.checks.tails import other_chi2
from recheck.model import STATED, Claim, Finding, Interval
from recheck.recompute import contingency
from recheck.recompute.arrays import Floats
from recheck.recompute.exact_tests import fisher_one_sided_p, fisher_p, freeman_halton_p
from recheck.recompute.tails import chi2_tail
from recheck.reconcile.readings import Box, Way, box_of

YATES = "χ² has the continuity correction"
N_MINUS_ONE = "χ² has N − 1 for N"
RATIO = "χ² is that of the likelihood ratio"
PEARSON = "χ² is Pearson's"
FISHER = "p is that of Fisher's exact test"
BOTH_SIDES = "p is two-tailed"
ALL_CASES = "all cases of the groups entered the test"
NOT_PAIRED = "the groups are independent, not the same units counted twice"
STATISTICS: dict[str, tuple[Callable[[Tables], Tables], str]] = {
    PEARSON: (contingency.pearson_chi2, ""),
    YATES: (contingency.yates_chi2, "yates"),
    N_MINUS_ONE: (contingency.n_minus_one_chi2, ""),
    RATIO: (contingency.likelihood_ratio_chi2, "likelihood-ratio"),
}
FOREIGN_TO_COUNTS = (
    "paired", "repeated", "weighted", "imputed", "mixed-model", "covariate-adjusted", "multi-regression", "permutation", "survival",
    "robust", "bayesian",
)  # fmt: skip

OF_OTHER_TESTS = ("mixed-model", "multi-regression", "covariate-adjusted", "survival")
"""Models with a χ² of their own, which a document that speaks of them may print beside counts."""


def _layout(case: Case) -> Layout | str | None:
    """The counts that a test is linked to, as a table."""
    if any(group.kind != "count" for group in case.groups):
        return None
    layout = laid_out(case.groups)
    if not isinstance(layout, Layout):
        return layout
    N = whole(case.claim.values.get("N"))
    named = N is not None and sum(layout.sizes) == N
    # A category left out of a table without margins would give other df.
    margins = any(name.startswith("total") for name in layout.numbers)
    fitted = "df" in case.claim.values and not margins and len(layout.cells) > 1
    return replace(layout, complete=True) if layout.exact and (named or fitted) else layout


def _foreign(claim: Claim) -> tuple[str, ...]:
    said = [word for word in FOREIGN_TO_COUNTS if claim.says(word)]
    said += [word for word in ("weighted", "imputed") if word in claim.background]
    return tuple(f"counts alone cannot rebuild {STATED[word]}" for word in said[:1])


def _doubts(case: Case, layout: Layout) -> tuple[str, ...]:
    """What must hold beside the counts for a difference to be a contradiction."""
    claim = case.claim
    doubts = list(link_doubts(case))
    if not layout.complete:
        doubts.append(ALL_CASES)
    if not layout.exact:
        doubts.append("counts are those behind the printed percentages")
    spoken = [word for word in OF_OTHER_TESTS if word in claim.background]
    if spoken and not claim.says("uncorrected-chi2", "yates", "fisher-exact"):
        doubts.append(f"the test is not one of {STATED[spoken[0]]}, of which the document speaks")
    if (
        layout.shape == (2, 2)
        and layout.sizes[0] == layout.sizes[1]
        and not claim.says("independent", "between-groups")
    ):
        doubts.append(NOT_PAIRED)
    return tuple(doubts)


@check(
    "chi2-from-counts",
    title="χ² against the counts of its groups",
    kinds=("chi2-test",),
    quantity="chi2",
    needs=("chi2",),
    beside="linked counts, or percentages with totals, of two or more groups",
    formula="χ² = Σ (count − expected)² / expected, expected = row total × column total / N",
    source="Pearson (1900) Philosophical Magazine 50:157-175; Yates (1934) Suppl. J. R. Stat. Soc. 1:217-235; E. S. Pearson (1947) Biometrika 34:139-167; Wilks (1938) Ann. Math. Stat. 9:60-62",
    limits="Only where the printed df are those of the table. Tests of trend, of pairs (McNemar) and of strata are not rebuilt.",
    agrees=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | χ²(1) | p",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | 4.81 | .028",
        ),
    ),
    conditional=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | χ²(1) | p",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | 4.14 | .028",
        ),
    ),
    inconsistent=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | χ²(1) | p",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | 8.41 | .028",
        ),
    ),
)
def chi2_from_counts(case: Case) -> Iterable[Finding]:
    """Compare χ² with that of the table of counts, by each formula that goes by this name."""
    claim, name = case.claim, "chi2-from-counts"
    layout = _layout(case)
    claims = (claim, *case.groups)
    if layout is None:
        return
    reason = layout if isinstance(layout, str) else _other_df(claim, layout)
    if reason or isinstance(layout, str):
        yield unchecked(case, name, "chi2", reason, claims)
        return
    numbers = {"chi2": claim.values["chi2"], **layout.numbers}
    ways = tuple(_chi2_ways(claim, layout))
    doubts = _doubts(case, layout)
    if "df" not in claim.values and layout.shape != (2, 2):
        doubts = (*doubts, "this is the test of independence, not one of trend (its df are not printed)")
    yield judge(
        case,
        Comparison(
            name, "chi2", numbers, ways, claims, bounds=Interval(0.0, math.inf), doubts=doubts, excuses=_foreign(claim),
        ),
    )  # fmt: skip


def _other_df(claim: Claim, layout: Layout) -> str:
    """Say why the printed df are not those of the table; '' where they are."""
    df, (rows, columns) = claim.values.get("df"), layout.shape
    expected = (rows - 1) * (columns - 1)
    if df is None or df.value == expected:
        return ""
    return f"df {df.text} are not those of a table of {rows} × {columns} ({expected}): categories were joined, or it is a test of trend"


def _chi2_ways(claim: Claim, layout: Layout) -> Iterator[Way]:
    """χ² by each formula; the one that the text names first, else Pearson's."""
    for words in _formulas(claim, layout):
        values = _values(layout, STATISTICS[words][0])
        if _is_stated(claim, words):
            yield Way(values, (), (words,) if words != PEARSON else ())
        else:
            yield Way(values, (words,))


def _formulas(claim: Claim, layout: Layout) -> list[str]:
    """Formulas for the statistic of such a table, the stated one first."""
    two_by_two = layout.shape == (2, 2)
    possible = [w for w in STATISTICS if two_by_two or w not in (YATES, N_MINUS_ONE)]
    if claim.says("uncorrected-chi2"):
        possible = [w for w in possible if w != YATES]
    return sorted(possible, key=lambda words: not _is_stated(claim, words))


def _is_stated(claim: Claim, words: str) -> bool:
    """Tell whether a formula is the one that the text names; Pearson's where it names none."""
    named = [w for w, (_, key) in STATISTICS.items() if key and claim.suggests(key)]
    return words in named if named else words == PEARSON


def _values(layout: Layout, statistic: Callable[[Tables], Tables]) -> Callable[[Box], tuple[Interval, ...]]:
    """The range of a statistic over all tables that the printed numbers can stand for."""

    def implied(box: Box) -> tuple[Interval, ...]:
        tables = tables_of(box, layout)
        if tables is None:
            return ()
        values = statistic(tables)
        values = values[np.isfinite(values)]
        return (Interval(float(values.min()), float(values.max())),) if len(values) else ()

    return implied


@check(
    "p-from-counts",
    title="p, printed without a statistic, against the counts of its groups",
    kinds=("estimate", "chi2-test"),
    quantity="p",
    needs=("p",),
    beside="linked counts, or percentages with totals, of two or more groups",
    formula="p = P(X > χ²) with (rows − 1)(columns − 1) df; Fisher's exact p of a table of 2 × 2",
    source="Pearson (1900) Philosophical Magazine 50:157-175; Yates (1934) Suppl. J. R. Stat. Soc. 1:217-235; Fisher (1935) J. R. Stat. Soc. 98:39-82",
    limits="Conditional at most where the test is not named; tests of trend, ranks, pairs and strata are not rebuilt.",
    agrees=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | p",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | .028",
        ),
    ),
    conditional=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | p",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | .97",
        ),
    ),
    unchecked=(
        table(
            "Table 4. Loaves by oven.",
            " | Steamed | Dry | p",
            "Split crust, n/N (%) | 17/139 (12.2) | 31/140 (22.1) | .12",
        ),
    ),
)
def p_from_counts(case: Case) -> Iterable[Finding]:
    """Compare a p that stands alone with those of the usual tests of the table of counts."""
    claim, name = case.claim, "p-from-counts"
    of_ratio = bool(claim.values.keys() & {"or", "rr", "rd"})
    beside_interval = of_ratio and "ci_low" in claim.values
    named = claim.kind == "chi2-test" or claim.says("fisher-exact", "yates", "uncorrected-chi2")
    if (beside_interval and not named) or claim.values.keys() & {
        "chi2",
        "z",
        "t",
        "F",
        "u",
        "w",
        "hr",
        "b",
        "r",
    }:
        return
    layout = _layout(case)
    if layout is None:
        return
    claims = (claim, *case.groups)
    if isinstance(layout, str):
        yield unchecked(case, name, "p", layout, claims)
        return
    numbers = {"p": claim.values["p"], **layout.numbers}
    one = list(_one_sided(claim, layout))
    both = [_both_sided(claim, way) for way in _p_ways(claim, layout)]
    # Beside Fisher's test one side is likelier than another test.
    ways = [*one, *both] if claim.says("one-tailed", "fisher-exact") else [*both, *one]
    excuses, doubts = _foreign(claim) + excuses_of(case) * of_ratio, list(_doubts(case, layout))
    if not named:
        doubts.append("p is that of a test of independence (no test is named)")
    elif beside_interval:
        doubts.append("p is that of the test named, not of the ratio's interval")
    ordered = layout.shape[0] > 2 and not named
    if ordered or ((not named or not layout.complete) and loosely(claim.values["p"], numbers, ways)):
        why = (
            "no test is named, so p may be that of another one" if not named else "some cases may be missing"
        )
        excuses = (*excuses, why)
    yield judge_p(case, name, ways, numbers, claims=claims, doubts=tuple(doubts), excuses=excuses)


def _p_ways(claim: Claim, layout: Layout) -> Iterator[Way]:
    """p by each test of the table: the named one of a χ², else any of the usual ones.

    A note names tests for all rows of its table ("χ² or Fisher's exact test, as appropriate").
    """
    df = (layout.shape[0] - 1) * (layout.shape[1] - 1)
    fisher = claim.says("fisher-exact")
    bare = claim.kind != "chi2-test" and not (fisher and not claim.place.table)
    for words in _formulas(claim, layout):
        plain = (words in (PEARSON, YATES)) if bare else (_is_stated(claim, words) and not fisher)
        chi2 = _values(layout, STATISTICS[words][0])
        yield Way(_tail_of(chi2, df), () if plain else (words,), (words,) if plain else ())
    if layout.shape == (2, 2):
        plain = fisher or bare
        yield Way(lambda box: _fisher(box, layout), () if plain else (FISHER,), (FISHER,) if plain else ())
    loose = "p is an exact one" if df > 1 else "p is that of another test of the same table"
    pearson = _values(layout, contingency.pearson_chi2)

    def others(box: Box) -> tuple[Interval, ...]:
        return tuple(other_chi2(chi2, df == 1) for chi2 in pearson(box))

    larger = _freeman_halton(layout) if fisher and df > 1 else None
    if larger is not None:
        yield Way(lambda _: (larger,), (), (FISHER,))
    stated = df > 1 and fisher and larger is None
    yield Way(_tail_of(others, df), () if stated else (loose,), (FISHER,) if stated else ())


def _one_sided(claim: Claim, layout: Layout) -> Iterator[Way]:
    """Half the tail of χ² with 1 df, and Fisher's p of one side."""
    said = claim.says("one-tailed")
    if (layout.shape[0] - 1) * (layout.shape[1] - 1) != 1 or (claim.suggests("two-tailed") and not said):
        return
    unstated, given = ((), (ONE_TAILED,)) if said else ((ONE_TAILED,), ())
    fisher = claim.says("fisher-exact")
    if layout.shape == (2, 2) and (fisher or said):
        yield Way(lambda box: _fisher(box, layout, fisher_one_sided_p), unstated, (*given, FISHER))
    pearson = _tail_of(_values(layout, contingency.pearson_chi2), 1)
    other = (PEARSON,) if fisher and not claim.place.table else ()
    yield Way(
        lambda box: tuple(Interval(i.low / 2, i.high / 2) for i in pearson(box)), (*unstated, *other), given
    )


def _both_sided(claim: Claim, way: Way) -> Way:
    """A way to a two-sided p, as an assumption where the p is called one-sided."""
    return replace(way, unstated=(*way.unstated, BOTH_SIDES)) if claim.says("one-tailed") else way


def _tail_of(chi2: Callable[[Box], tuple[Interval, ...]], df: int) -> Callable[[Box], tuple[Interval, ...]]:
    def implied(box: Box) -> tuple[Interval, ...]:
        return tuple(Interval(float(chi2_tail(i.high, df)), float(chi2_tail(i.low, df))) for i in chi2(box))

    return implied


MOST_EXACT = 100
"""Tables behind percentages up to which Fisher's p of each is worked out."""


def _fisher(box: Box, layout: Layout, p_of: Callable[[Tables], Floats] = fisher_p) -> tuple[Interval, ...]:
    tables = tables_of(box, layout)
    if tables is None or len(tables) > MOST_EXACT:
        return ()
    found = p_of(tables)
    return (Interval(float(found.min()), float(found.max())),)


MOST_STEPS = 200_000
"""Steps of the exact test of a larger table, about a twentieth of a second."""


def _freeman_halton(layout: Layout) -> Interval | None:
    """Fisher's exact p of a larger table whose counts are all printed; None where it takes too long."""
    tables = tables_of(box_of(layout.numbers), layout)
    if tables is None or len(tables) > 1:
        return None
    p = freeman_halton_p(tables[0], most=MOST_STEPS)
    return None if math.isnan(p) else Interval(p, p)
