"""Checks of rank tests: U and W against the sizes of their groups, z and p against both."""

from __future__ import annotations

import math
from collections.abc import Iterable

from recheck.checks.compare import Comparison, doubted, impossible, judge
from recheck.checks.designs import MISSING, whole
from recheck.checks.groups import unsigned
from recheck.checks.p_values import judge_p
from recheck.checks.ranked import NO_ZEROS, NORMAL, RANK_SUM, Sizes, p_ways, sizes_of, z_ways
from recheck.checks.registry import Case, check
from recheck.model import Claim, Finding, Interval, Printed, Remedy, shown
from recheck.model.figures import printed_text, span
from recheck.recompute import rank_tests as ranks
from recheck.reconcile.readings import Way


@check(
    "rank-statistic-range",
    title="U and W within the range that the sizes of their groups allow",
    kinds=("rank-test",),
    quantity="u",
    needs=(),
    beside="two linked groups with n, or N; of a test of signed ranks its n",
    formula="0 ≤ U ≤ n1 n2, so U ≤ N²/4; 0 ≤ W of signed ranks ≤ n(n + 1)/2; rank sum ≤ n1 n2 + n1(n1 + 1)/2",
    source="Mann & Whitney (1947) Annals of Mathematical Statistics 18:50-60; Wilcoxon (1945) Biometrics Bulletin 1:80-83",
    limits="A sum of ranks that is printed as U is conditional.",
    conditional=(
        "By the Mann-Whitney test rye loaves (Mdn = 92, n = 12) rose higher than wheat loaves (Mdn = 86, n = 14), U = 213, p = .009.",
    ),
    impossible=(
        "By the Mann-Whitney test rye loaves (Mdn = 92, n = 12) rose higher than wheat loaves (Mdn = 86, n = 14), U = 475, p = .048.",
        "Scores rose (Wilcoxon signed-rank test, W = 132, n = 15, p = .01).",
    ),
)
def rank_statistic_range(case: Case) -> Iterable[Finding]:
    """Find a U or W that no samples of these sizes give."""
    claim = case.claim
    for name in ("u", "w"):
        limits = _limits(case, name) if _counts_ranks(claim, name) else None
        if limits is None:
            continue
        printed = claim.values[name]
        most, words, sums, doubts = limits
        interval = printed.interval()
        # What is below 0 is a signed sum of signed ranks, or another statistic.
        if interval.low <= most:
            continue
        text = f"{shown(name)} {printed_text(printed)} is printed, but {words} allow {span(0.0, most)}."
        if sums and any(low <= interval.high and interval.low <= high for low, high in sums):
            doubts = (*doubts, "it is U, not the sum of the ranks of one group")
            remedies: tuple[Remedy, ...] = (Remedy("reading", name, f"the numbers agree if {RANK_SUM}"),)
        else:
            remedies = ()
        found = impossible(case, "rank-statistic-range", name, text, Interval(0.0, most), remedies=remedies)
        for doubt in doubts:
            found = doubted(found, doubt)
        yield found


def _limits(case: Case, name: str) -> tuple[float, str, list[tuple[float, float]], tuple[str, ...]] | None:
    """The greatest value, what it follows from, the ranges of rank sums that may be printed for it, and doubts."""
    claim, sizes = case.claim, sizes_of(case)
    if sizes is not None and sizes.pairs:
        most = float(ranks.signed_rank_range(sizes.n1)[1])
        return most, f"{sizes.n1} pairs", [], _of_size(sizes.doubts)
    if sizes is not None:
        sums = [_ends(ranks.rank_sum_range(a, b)) for a, b in ((sizes.n1, sizes.n2), (sizes.n2, sizes.n1))]
        u_most = float(ranks.u_range(sizes.n1, sizes.n2)[1])
        most = u_most if name == "u" else max(u_most, *(high for _, high in sums))
        doubts = _of_size(sizes.doubts)
        return most, f"groups of {sizes.n1} and {sizes.n2}", sums if name == "u" else [], doubts
    N = whole(claim.values.get("N"))
    if (
        N is None
        or N < 2
        or not claim.says("rank-test")
        or name != "u"
        or claim.says("signed-ranks", "paired")
    ):
        return None
    half = N // 2
    sums = [(0.0, float(ranks.rank_sum_range(N - 1, 1)[1]))]
    return float(half * (N - half)), f"two groups of {N} in all", sums, ()


def _of_size(doubts: tuple[str, ...]) -> tuple[str, ...]:
    """The doubts that a statistic beyond its range leaves: fewer cases would only narrow the range."""
    return tuple(doubt for doubt in doubts if doubt not in (MISSING, NO_ZEROS))


def _ends(bounds: tuple[object, object]) -> tuple[float, float]:
    return float(bounds[0]), float(bounds[1])  # type: ignore[arg-type]


@check(
    "z-from-ranks",
    title="z of a rank test against its U or W and the sizes of its groups",
    kinds=("rank-test",),
    quantity="z",
    needs=("z",),
    beside="U or W; two linked groups with n, or the n of a test of signed ranks",
    formula="|z| = (|U − n1 n2/2| − c) / √(n1 n2 (N + 1)/12), signed ranks (|W − n(n + 1)/4| − c) / √(n(n + 1)(2n + 1)/24); c 0, or ½ for continuity",
    source="Mann & Whitney (1947) Annals of Mathematical Statistics 18:50-60; Wilcoxon (1945) Biometrics Bulletin 1:80-83; Lehmann (1975) Nonparametrics, for ties",
    limits="Ties only enlarge |z|: a larger one is conditional, a smaller one a contradiction.",
    agrees=(
        "By the Mann-Whitney test rye loaves (Mdn = 92, n = 12) rose higher than wheat loaves (Mdn = 86, n = 14), U = 45.5, z = −1.98, p = .048.",
    ),
    conditional=(
        "By the Mann-Whitney test rye loaves (Mdn = 92, n = 12) rose higher than wheat loaves (Mdn = 86, n = 14), U = 45.5, z = −2.98, p = .003.",
    ),
    inconsistent=(
        "By the Mann-Whitney test rye loaves (Mdn = 92, n = 12) rose higher than wheat loaves (Mdn = 86, n = 14), U = 45.5, z = −1.38, p = .168.",
    ),
)
def z_from_ranks(case: Case) -> Iterable[Finding]:
    """Compare |z| with the normal approximation of U or W."""
    found = _statistic(case)
    if found is None:
        return
    sizes, name, printed = found
    z = case.claim.values["z"]
    numbers = {
        "z": unsigned(z),
        name: printed,
        **sizes.numbers,
    }
    ways = [
        Way(lambda box, way=way: (way(box),), words, (NORMAL,) if not words else ())  # type: ignore[misc]
        for way, words in z_ways(sizes, name)
    ]
    yield judge(
        case,
        Comparison(
            "z-from-ranks", "z", numbers, ways, sizes.claims, bounds=Interval(0.0, math.inf),
            doubts=sizes.doubts, excuses=_excuses(case.claim),
        ),
    )  # fmt: skip


def _excuses(claim: Claim) -> tuple[str, ...]:
    words = {
        "weighted": "scores are weighted",
        "imputed": "scores are imputed",
        "bootstrap": "the test is a bootstrap",
    }
    return tuple(reason for word, reason in words.items() if claim.says(word))


def _counts_ranks(claim: Claim, name: str) -> bool:
    """Tell whether a printed U or W is a count of pairs or a sum of ranks: whole or half, W of a named test.

    `W = 3.00` is the studentized statistic of another test of ranks.
    """
    printed = claim.values.get(name)
    if printed is None or printed.relation != "=" or (2 * printed.value) % 1:
        return False
    return name == "u" or (claim.says("rank-test") and printed.decimals <= 1)


def _statistic(case: Case) -> tuple[Sizes, str, Printed] | None:
    """The sizes, and the U or W that belongs to them."""
    sizes, values = sizes_of(case), case.claim.values
    if sizes is None or max(sizes.n1, sizes.n2) < 2:
        return None
    name = "w" if "w" in values else "u"
    limits = _limits(case, name)
    if not _counts_ranks(case.claim, name) or (sizes.pairs and name != "w") or limits is None:
        return None
    printed = values[name]
    within = -limits[0] <= printed.interval().high and printed.interval().low <= limits[0]
    return (sizes, name, printed) if within else None


@check(
    "p-from-ranks",
    title="p of a rank test against its U or W and the sizes of its groups",
    kinds=("rank-test",),
    quantity="p",
    needs=("p",),
    beside="U or W without z; two linked groups with n, or the n of a test of signed ranks",
    formula="p = 2 P(Z > |z|), z as from the ranks; or the exact two-sided tail of U or W by counting",
    source="Mann & Whitney (1947) Annals of Mathematical Statistics 18:50-60; Wilcoxon (1945) Biometrics Bulletin 1:80-83",
    limits="Ties make p smaller by the normal approximation, and may make an exact p larger: conditional, up to the bound of Chebyshev's inequality.",
    agrees=(
        "By the Mann-Whitney test rye loaves (Mdn = 92, n = 12) rose higher than wheat loaves (Mdn = 86, n = 14), U = 45, p = .047.",
    ),
    conditional=(
        "By the Mann-Whitney test rye loaves (Mdn = 92, n = 12) rose higher than wheat loaves (Mdn = 86, n = 14), U = 45, p = .007.",
    ),
    inconsistent=(
        "By the Mann-Whitney test rye loaves (Mdn = 92, n = 12) rose higher than wheat loaves (Mdn = 86, n = 14), U = 25, p = .30.",
    ),
)
def p_from_ranks(case: Case) -> Iterable[Finding]:
    """Compare p with the normal approximation and with the exact distribution of U or W."""
    claim = case.claim
    found = _statistic(case)
    if found is None or "z" in claim.values:
        return
    sizes, name, printed = found
    ways = list(p_ways(sizes, name, claim))
    numbers = {"p": claim.values["p"], name: printed, **sizes.numbers}
    yield judge_p(
        case, "p-from-ranks", ways, numbers, claims=sizes.claims, doubts=sizes.doubts, excuses=_excuses(claim)
    )
