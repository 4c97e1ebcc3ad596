"""What checks of rank tests share: the sizes behind U and W, and the ways from them to z and p."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from dataclasses import dataclass

from recheck.checks.designs import MISSING, whole
from recheck.checks.groups import link_doubts
from recheck.checks.p_values import ONE_TAILED
from recheck.checks.registry import Case
from recheck.model import N_OF_GROUP, SIZES_IN_WORDS, Claim, Interval
from recheck.recompute import rank_tests as ranks
from recheck.recompute.tails import z_two_sided
from recheck.reconcile.readings import Box, Numbers, Way

RANK_SUM = "it is the sum of ranks of one group (Wilcoxon's W), not U"
IN_WORDS = "the numbers of cases that the sentence tells are the sizes of the two groups"
UNNAMED = "this is the test of Mann and Whitney, or Wilcoxon's of two groups (it is not named)"
NO_ZEROS = "no pair was left out for want of a difference"
SIGNED_SUM = "W is the sum of all signed ranks, not that of the positive ones"
MANY_TIES = "most ranks are tied"
EXACT_WITH_TIES = "p is an exact one among tied ranks"
FEW_TIES = 1 / math.sqrt(1 - 1 / 4)
"""How much ties enlarge z where scores take two values, each half of the time; rating scales of more points do less."""
NORMAL = "the normal approximation, with or without correction for continuity and for ties"
NOWHERE = Interval(math.nan, math.nan)
"""What a sense implies in which the printed number cannot be."""
EXACT = "the exact distribution without ties"


@dataclass(frozen=True, slots=True)
class Sizes:
    """The sizes behind a test of ranks, as printed numbers: of two groups, or of pairs in `n1` alone."""

    numbers: Numbers
    n1: int
    n2: int
    claims: tuple[Claim, ...]
    doubts: tuple[str, ...]

    @property
    def pairs(self) -> bool:
        """Whether the test is one of signed ranks."""
        return self.n2 == 0


def sizes_of(case: Case) -> Sizes | None:
    """The sizes of a test of ranks, where they are surely known; None else."""
    claim = case.claim
    if claim.says("signed-ranks", "paired", "one-sample"):
        return _pairs_of(case)
    if claim.says("repeated"):
        return None
    if len(case.groups) == 2:
        told = [group.values.get("n") for group in case.groups]
    else:
        told = [claim.values.get("n1"), claim.values.get("n2")]
    n1, n2 = (whole(size) for size in told)
    if n1 is None or n2 is None or min(n1, n2) < 1:
        return None
    numbers = {f"n{i}": size for i, size in enumerate(told, 1) if size is not None}
    doubts = list(link_doubts(case))
    if SIZES_IN_WORDS in claim.notes:
        doubts.append(IN_WORDS)
    if any(N_OF_GROUP in holder.notes for holder in (claim, *case.groups)):
        doubts.append(MISSING)
    if not claim.says("rank-test"):
        doubts.append(UNNAMED)
    return Sizes(numbers, n1, n2, (claim, *case.groups), tuple(doubts))


def _pairs_of(case: Case) -> Sizes | None:
    """The number of pairs: printed with the test, or the common n of both measures."""
    claim = case.claim
    if not claim.says("signed-ranks"):
        return None
    name = next((name for name in ("n", "N") if whole(claim.values.get(name)) is not None), None)
    if name is not None:
        return Sizes({name: claim.values[name]}, int(claim.values[name].value), 0, (claim,), (NO_ZEROS,))
    found = [group.values["n"] for group in case.groups if whole(group.values.get("n")) is not None]
    if len(found) != 2 or found[0].value != found[1].value:
        return None
    whole_group = any(N_OF_GROUP in group.notes for group in case.groups)
    doubts = (*link_doubts(case), *((MISSING,) if whole_group else ()), NO_ZEROS)
    return Sizes({"n1": found[0]}, int(found[0].value), 0, (claim, *case.groups), doubts)


ZOf = Callable[[Box], Interval]


def z_ways(sizes: Sizes, name: str) -> Iterator[tuple[ZOf, tuple[str, ...]]]:
    """|z| by each sense that U or W may have, with few ties; then with any number of them."""
    senses = list(_senses(sizes, name))
    for sense, words in senses:
        yield (lambda box, sense=sense: sense(box, FEW_TIES)), words  # type: ignore[misc]
    for sense, words in senses:
        yield (lambda box, sense=sense: sense(box, math.inf)), (*words, MANY_TIES)  # type: ignore[misc]
    if sizes.pairs:
        yield (lambda box: _fewer_pairs(box, sizes.n1)), ("some pairs without a difference were left out",)


def _senses(sizes: Sizes, name: str) -> Iterator[tuple[Callable[[Box, float], Interval], tuple[str, ...]]]:
    n1, n2 = sizes.n1, sizes.n2
    if sizes.pairs or (name == "w" and n1 == n2):
        # Of two equal groups `Wilcoxon's test` may as well be that of pairs.
        yield (lambda box, ties: _signed_z(box[name], n1, ties)), ()
    if sizes.pairs:
        yield (lambda box, ties: _signed_z(_positive_part(box[name], n1), n1, ties)), (SIGNED_SUM,)
        return
    if name == "u":
        yield (lambda box, ties: _u_z(box[name], n1, n2, ties)), ()
        return
    # W is U in some programs, the sum of the ranks of either group in others.
    for shift in (0.0, n1 * (n1 + 1) / 2, n2 * (n2 + 1) / 2):

        def of_sum(box: Box, ties: float, shift: float = shift) -> Interval:
            w = box[name]
            return _u_z(Interval(w.low - shift, w.high - shift), n1, n2, ties)

        yield of_sum, ()


def _positive_part(signed: Interval, n: int) -> Interval:
    """The sum of the positive ranks from the sum of all signed ones."""
    total = n * (n + 1) / 2
    return Interval((signed.low + total) / 2, (signed.high + total) / 2)


def _u_z(u: Interval, n1: int, n2: int, ties: float) -> Interval:
    """|z| from the corrected one of the U nearest to its mean to the plain one of the farthest, times the ties' factor."""
    if u.high < 0 or u.low > n1 * n2:
        return NOWHERE
    mean, most = n1 * n2 / 2, math.sqrt(n1 + n2 - 1)
    near, far = _distances(u, mean)
    low = abs(float(ranks.z_from_u(mean + near, n1, n2, continuity=True)))
    high = abs(float(ranks.z_from_u(mean + far, n1, n2)))
    return Interval(low, max(high, min(high * ties, most) if high else high))


def _signed_z(w: Interval, n: int, ties: float) -> Interval:
    """The like for signed ranks: a smaller or a larger W counts alike."""
    if w.high < 0 or w.low > n * (n + 1) / 2:
        return NOWHERE
    mean, most = n * (n + 1) / 4, math.sqrt(n)
    near, far = _distances(w, mean)
    low = abs(float(ranks.z_from_signed_rank(mean + near, n, continuity=True)))
    high = abs(float(ranks.z_from_signed_rank(mean + far, n)))
    return Interval(low, max(high, min(high * ties, most) if high else high))


def _fewer_pairs(box: Box, n: int) -> Interval:
    """|z| over all numbers of pairs down to the fewest that give W, any of them tied."""
    w = box["w"]
    found = [_signed_z(w, m, FEW_TIES) for m in range(2, n + 1) if m * (m + 1) / 2 >= w.low]
    return (
        Interval(min(i.low for i in found), max(i.high for i in found))
        if found
        else Interval(math.nan, math.nan)
    )


def _distances(statistic: Interval, mean: float) -> tuple[float, float]:
    """Least and greatest distance of a statistic from its mean."""
    around = Interval(statistic.low - mean, statistic.high - mean).absolute()
    return around.low, around.high


def p_ways(sizes: Sizes, name: str, claim: Claim) -> Iterator[Way]:
    """Ways to p: by the normal approximation, by counting, and by any distribution as narrow as that of tied ranks."""
    tails = ((1.0, ()),) if claim.suggests("two-tailed") else ((1.0, ()), (0.5, (ONE_TAILED,)))
    for factor, mark in tails:
        for z_of, words in z_ways(sizes, name):
            yield Way(_by_normal(z_of, factor), (*words, *mark), () if words or mark else (NORMAL,))
        for exact in _exact(sizes, name):
            yield Way(_scaled(exact, factor), mark, () if mark else (EXACT,))
    for z_of, words in z_ways(sizes, name):
        if not words:
            yield Way(_chebyshev(z_of), (EXACT_WITH_TIES,))


def _by_normal(z_of: ZOf, factor: float) -> Callable[[Box], tuple[Interval, ...]]:
    def implied(box: Box) -> tuple[Interval, ...]:
        z = z_of(box)
        return (Interval(factor * float(z_two_sided(z.high)), factor * float(z_two_sided(z.low))),)

    return implied


def _exact(sizes: Sizes, name: str) -> Iterator[ZOf]:
    """The exact p over the printed statistic, for each sense that it may have; none for large groups."""
    if max(sizes.n1, sizes.n2) > ranks.MOST_EXACT:
        return
    n1, n2 = sizes.n1, sizes.n2
    if sizes.pairs or (name == "w" and n1 == n2):
        mean = n1 * (n1 + 1) / 4
        yield lambda box: _exact_range(box[name], mean, lambda w: float(ranks.signed_rank_exact_p(w, n1)))
    if sizes.pairs:
        return
    for shift in (0.0,) if name == "u" else (0.0, n1 * (n1 + 1) / 2, n2 * (n2 + 1) / 2):

        def of_u(box: Box, shift: float = shift) -> Interval:
            u = Interval(box[name].low - shift, box[name].high - shift)
            return _exact_range(u, n1 * n2 / 2, lambda x: float(ranks.u_exact_p(x, n1, n2)))

        yield of_u


def _exact_range(statistic: Interval, mean: float, p: Callable[[float], float]) -> Interval:
    """p at the whole values on and around the statistic: half a unit of tie either way is a step of the exact p."""
    if statistic.high < 0 or statistic.low > 2 * mean:
        return NOWHERE
    near, far = _distances(statistic, mean)
    ends = [max(mean - far - 0.5, 0.0), max(min(mean - near + 0.5, mean), 0.0)]
    return Interval(p(math.floor(ends[0])), p(math.floor(ends[1])))


def _scaled(p_of: ZOf, factor: float) -> Callable[[Box], tuple[Interval, ...]]:
    def implied(box: Box) -> tuple[Interval, ...]:
        p = p_of(box)
        return (Interval(factor * p.low, factor * p.high),)

    return implied


def _chebyshev(z_of: ZOf) -> Callable[[Box], tuple[Interval, ...]]:
    """p of any distribution with the variance of U or less: at most 1/z²."""

    def implied(box: Box) -> tuple[Interval, ...]:
        z = z_of(box)
        if math.isnan(z.low):
            return ()
        return (Interval(0.0, min(1.0, 1 / z.low**2) if z.low else 1.0),)

    return implied
