"""Checks of r as the effect size of a t, of d against F(1, df), of d against r, and of φ and V against χ²."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from dataclasses import replace

from recheck.checks.compare import Comparison, judge
from recheck.checks.designs import whole
from recheck.checks.effects import Sizes, effect_of, t_ways
from recheck.checks.groups import linked_groups, unsigned
from recheck.checks.models import foreign_model
from recheck.checks.registry import Case, check
from recheck.checks.variance_shares import other_model
from recheck.model import Claim, Finding, Interval, shown
from recheck.reconcile.readings import Box, Way

BY_TOTAL = "r is t/√(t² + N), which d/√(d² + 4) of equal groups amounts to"
BY_Z = "r is z/√N, z that of p"
BISERIAL = "r is the biserial correlation, or made from d as if the groups were of equal size"
OTHER_R = "r is the effect size of this t, not the correlation of two measures"
CORRECTED = "χ² is corrected for continuity, {name} is not"
NOT_DIVIDED = "V is not divided by k − 1"
LESS_BIAS = "V is corrected for bias"
OF_PEARSON = "χ² is that of a likelihood-ratio test, {name} that of Pearson's"
CONTINGENCY = "what is printed is the contingency coefficient"


@check(
    "r-from-t",
    title="r as an effect size against t and df",
    kinds=("t-test",),
    quantity="r_pb",
    needs=("t", "df"),
    beside="point-biserial r, or r told as the effect size",
    formula="|r| = |t|/√(t² + df)",
    source="Rosenthal (1991) Meta-Analytic Procedures for Social Research, from memory; Lakens (2013) Frontiers in Psychology 4:863",
    limits="Biserial correlations and r by z or N are readings. A correlation of paired measures is none of these.",
    agrees=("Steam helped, t(34) = 3.23, p = .003, r = .48.",),
    conditional=("Steam helped, t(34) = 3.23, p = .003, rpb = .65.",),
    inconsistent=("An independent-samples t test showed a difference, t(34) = 3.23, p = .003, rpb = .28.",),
)
def r_from_t(case: Case) -> Iterable[Finding]:
    """Compare |r| with |t| and df."""
    claim = case.claim
    name = "r_pb" if "r_pb" in claim.values else "r"
    if (
        name not in claim.values
        or (name == "r" and not claim.says("effect-size-r"))
        or claim.values["df"].number <= 0
    ):
        return
    numbers = {name: unsigned(claim.values[name]), "t": unsigned(claim.values["t"]), "df": claim.values["df"]}
    doubts = (OTHER_R,) if name == "r" else ()
    yield judge(
        case,
        Comparison(
            "r-from-t", name, numbers, tuple(_r_ways()), bounds=Interval(0.0, 1.0), doubts=doubts,
            excuses=other_model(claim),
        ),
    )  # fmt: skip


def _r_ways() -> Iterator[Way]:
    yield Way(lambda box: (_r_of(box, 0.0),))
    yield Way(lambda box: (_r_of(box, 2.0),), (BY_TOTAL,))
    yield Way(_r_by_z, (BY_Z,))
    # The factor of the biserial one, √(p q)/φ(z), runs from 1.25 to 2.1 for shares of 50 to 5% in one group.
    yield Way(
        lambda box: (Interval(_r_of(box, 0.0).low, min(_r_of(box, 0.0).high * 2.1, 1.0)),),
        (BISERIAL,),
        alone=True,
    )


def _r_of(box: Box, more: float) -> Interval:
    """Rises with |t|, falls with df."""
    t, df = box["t"].absolute(), box["df"]
    return Interval(
        t.low / math.sqrt(t.low**2 + df.high + more) if t.low else 0.0,
        t.high / math.sqrt(t.high**2 + df.low + more),
    )


def _r_by_z(box: Box) -> tuple[Interval, ...]:
    from recheck.recompute.tails import t_tail, z_quantile

    t, df = box["t"].absolute(), box["df"]
    low, high = (float(z_quantile(t_tail(x, freedom))) for x, freedom in ((t.low, df.low), (t.high, df.high)))
    return (Interval(low / math.sqrt(df.high + 2), high / math.sqrt(df.low + 1)),)


@check(
    "d-from-F",
    title="d or g against F with one numerator df",
    kinds=("F-test",),
    quantity="d",
    needs=("F", "df1", "df2"),
    beside="d or g",
    formula="|d| = √F √(1/n1 + 1/n2); for pairs √(F/n)",
    source="Lakens (2013) Frontiers in Psychology 4:863, with t = √F",
    limits="F may be of a larger design, whose error is another: the verdict is conditional at most.",
    agrees=("Steam helped, F(1, 34) = 10.43, p = .003, d = 1.08.",),
    conditional=("Steam helped, F(1, 34) = 10.43, p = .003, d = 0.38.",),
)
def d_from_F(case: Case) -> Iterable[Finding]:
    """Compare |d| with √F as with t, where the groups themselves are not linked."""
    claim, name = case.claim, effect_of(case.claim)
    df2 = whole(claim.values["df2"])
    if name is None or claim.values["df1"].number != 1 or df2 is None or df2 < 2 or linked_groups(case):
        return

    def carried(way: Way) -> Way:
        def implied(box: Box) -> tuple[Interval, ...]:
            F = box["F"].within(0.0, math.inf)
            return way.implied({**box, "t": Interval(math.sqrt(F.low), math.sqrt(F.high))})

        return replace(way, implied=implied)

    numbers = {name: unsigned(claim.values[name]), **{n: claim.values[n] for n in ("F", "df1", "df2")}}
    foreign = foreign_model((claim,))
    ways = tuple(carried(way) for way in t_ways(claim, name, Sizes(None, None, df2 + 2)))
    yield judge(
        case,
        Comparison(
            "d-from-F", name, numbers, ways, bounds=Interval(0.0, math.inf),
            doubts=("F is that of two groups or of pairs, and of nothing else",), excuses=(foreign,) if foreign else (),
        ),
    )  # fmt: skip


@check(
    "d-against-r",
    title="d against r of the same result",
    kinds=("t-test", "F-test", "estimate", "comparison"),
    quantity="d",
    needs=("d",),
    beside="point-biserial r, or r told as the effect size",
    formula="|d| = |r| √(N(N − 2)/(n1 n2))/√(1 − r²), 2 for groups of equal size",
    source="McGrath & Meyer (2006) Psychological Methods 11:386-401; Borenstein et al. (2009) Introduction to Meta-Analysis, ch. 7",
    limits="Groups of unequal size give a larger d; the verdict is conditional at most.",
    agrees=("Steam helped, t(34) = 3.23, p = .003, d = 1.08, r = .48.",),
    conditional=("Steam helped, t(34) = 3.23, p = .003, d = 1.08, r = .28.",),
)
def d_against_r(case: Case) -> Iterable[Finding]:
    """Compare |d| with |r| for groups of equal size, then of any."""
    claim = case.claim
    name = "r_pb" if "r_pb" in claim.values else "r"
    if (
        name not in claim.values
        or (name == "r" and not claim.says("effect-size-r"))
        or abs(claim.values[name].number) >= 1
    ):
        return

    def times(low: float, high: float) -> Way:
        def implied(box: Box) -> tuple[Interval, ...]:
            r = box[name].absolute().within(0.0, 1 - 1e-9)
            a, b = (x / math.sqrt((1 - x) * (1 + x)) for x in (r.low, r.high))
            return (Interval(a * low, b * high),)

        unstated = () if high < 2.1 else ("the groups are of unequal size, or d of pairs",)
        return Way(implied, unstated, alone=bool(unstated))

    numbers = {"d": unsigned(claim.values["d"]), name: unsigned(claim.values[name])}
    doubts = ("both are effect sizes of the same two groups",)
    # N(N − 2)/(n1 n2) is 4 less than 8/N below for equal groups, and 11 for shares of 1 to 9; d_z is half of d_s.
    ways = (times(1.9, 2.0), times(1.0, 3.5))
    yield judge(
        case, Comparison("d-against-r", "d", numbers, ways, bounds=Interval(0.0, math.inf), doubts=doubts)
    )


@check(
    "v-from-chi2",
    title="φ or Cramér's V against χ² and N",
    kinds=("chi2-test",),
    quantity="cramers_v",
    needs=("chi2", "df"),
    beside="φ or V, and N",
    formula="V = √(χ²/(N (k − 1))), k the smaller number of rows or columns; φ the same with k = 2",
    source="Cramér (1946) Mathematical Methods of Statistics, ch. 21; Bergsma (2013) Journal of the Korean Statistical Society 42:323-328",
    limits="k is tried for all tables of these df. A corrected χ² beside an uncorrected V, and V corrected for bias, are readings.",
    agrees=("Collapse differed, χ2(1, N = 80) = 12.4, p < .001, φ = .39.",),
    conditional=("Collapse differed, χ2(1, N = 80) = 12.4, p < .001, φ = .43.",),
    inconsistent=("Collapse differed, χ2(1, N = 80) = 12.4, p < .001, φ = .93.",),
)
def v_from_chi2(case: Case) -> Iterable[Finding]:
    """Compare |φ| or V with χ² and N."""
    claim = case.claim
    name = next((n for n in ("phi", "cramers_v") if n in claim.values), None)
    total = next((n for n in ("N", "n") if n in claim.values), None)
    df = whole(claim.values["df"])
    if name is None or total is None or df is None or df < 1 or claim.values[total].number < 2:
        return
    numbers = {
        name: unsigned(claim.values[name]),
        "chi2": claim.values["chi2"],
        "df": claim.values["df"],
        total: claim.values[total],
    }
    doubts = ("n is the number of all cases",) if total == "n" else ()
    said = [
        w for w in ("likelihood-ratio", "fisher-exact", "weighted", "imputed", "mixed-model") if claim.says(w)
    ]
    excuses = (f"{shown(name)} may not be that of the printed χ² ({said[0]})",) if said else ()
    yield judge(
        case,
        Comparison(
            "v-from-chi2", name, numbers, tuple(_v_ways(claim, name, total, df)), bounds=Interval(0.0, 1.0),
            doubts=doubts, excuses=excuses,
        ),
    )  # fmt: skip


def _v_ways(claim: Claim, name: str, total: str, df: int) -> Iterator[Way]:
    sides = [1] if name == "phi" else [s for s in range(1, math.isqrt(df) + 1) if df % s == 0]

    def root(box: Box, side: int) -> Interval:
        chi2, N = box["chi2"].within(0.0, math.inf), box[total]
        return Interval(math.sqrt(chi2.low / (N.high * side)), math.sqrt(chi2.high / (N.low * side)))

    yield Way(lambda box: tuple(root(box, side) for side in sides))
    if df == 1 and not claim.says("uncorrected-chi2"):
        words = CORRECTED.format(name=shown(name))
        yield Way(lambda box: (Interval(root(box, 1).low, _uncorrected(box, total)),), (words,), alone=True)
    if not claim.says("uncorrected-chi2"):
        words = OF_PEARSON.format(name=shown(name))
        yield Way(lambda box: tuple(_of_pearson(root(box, side)) for side in sides), (words,), alone=True)
    if df > 1:
        yield Way(
            lambda box: (root(box, 1),), (NOT_DIVIDED if name == "cramers_v" else "φ is of a larger table",)
        )
    yield Way(
        lambda box: tuple(_without_bias(root(box, 1), box[total].low, df, side) for side in sides),
        (LESS_BIAS,),
    )
    yield Way(lambda box: (_contingency(root(box, 1)),), (CONTINGENCY,))


def _of_pearson(root: Interval) -> Interval:
    """V of Pearson's χ² from the root of a likelihood-ratio χ² over N.

    Drawn around 2 x 2 tables of 8 to 200 cases with shares of .08 to .92 the one is 0.77 to 1.75 times the other.
    """
    return Interval(root.low / math.sqrt(1.75), root.high / math.sqrt(0.77))


def _uncorrected(box: Box, total: str) -> float:
    """The most φ may be beside a χ² with Yates' correction: √χ² grows by N √N/(2 √(products of the margins)).

    The product of the margins is N⁴/16 for even ones; a tenth in one group and one outcome gives 0.0081 N⁴.
    """
    chi2, N = box["chi2"].within(0.0, math.inf), box[total].low
    return (math.sqrt(chi2.high) + 1 / (2 * math.sqrt(0.0081 * N))) / math.sqrt(N)


def _without_bias(phi: Interval, N: float, df: int, side: int) -> Interval:
    """V corrected for bias; rises with φ. Source: Bergsma (2013)."""
    rows, columns = side + 1, df // side + 1
    least = min(rows - (rows - 1) ** 2 / (N - 1), columns - (columns - 1) ** 2 / (N - 1)) - 1
    ends = [math.sqrt(max(x * x - df / (N - 1), 0.0) / max(least, 1e-9)) for x in (phi.low, phi.high)]
    return Interval(ends[0], ends[1])


def _contingency(phi: Interval) -> Interval:
    """Pearson's coefficient √(χ²/(χ² + N)); rises with φ."""
    return Interval(phi.low / math.hypot(1, phi.low), phi.high / math.hypot(1, phi.high))
