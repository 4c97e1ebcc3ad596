"""Checks of a test statistic against the two groups' mean, SD and n."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import replace
from functools import lru_cache

from recheck.checks.compare import Comparison, judge, unchecked
from recheck.checks.designs import Fit, Groups, fit_designs, groups_of
from recheck.checks.models import foreign_model
from recheck.checks.pairing import correlation_told
from recheck.checks.pooling import pooled_or_welch
from recheck.checks.registry import Case, check
from recheck.model import DISCREPANT, Claim, Finding, Interval, Printed, Remedy, shown
from recheck.reconcile.readings import Box, Way, agrees_as_printed, box_of


@lru_cache(maxsize=4)
def linked_groups(case: Case) -> tuple[Groups, tuple[Claim, ...]] | None:
    """The two summaries whose means a test compares, with all claims involved."""
    if len(case.groups) != 2 or case.claim.says("variance-test") or case.claim.kind == "rank-test":
        return None
    groups = groups_of(*case.groups)
    return (groups, (case.claim, *case.groups)) if groups else None


@lru_cache(maxsize=4)
def fit_of(case: Case) -> Fit | None:
    """The designs that the df fit, for the two groups of a test; None where there are not two."""
    linked = linked_groups(case)
    return None if linked is None else fit_designs(case.claim, linked[0], box_of(linked[0].numbers))


def link_doubts(case: Case) -> tuple[str, ...]:
    """What is inferred about the link between a test and its groups."""
    if case.claim.link_confidence == "high":
        return ()
    what = "test" if case.claim.kind.endswith("-test") else "result"
    return (
        f"the groups belong to this {what} ({case.claim.link or 'put together from different sentences'})",
    )


def _judge_statistic(case: Case, name: str, quantity: str, squared: bool) -> Iterable[Finding]:
    linked, fit = linked_groups(case), fit_of(case)
    if linked is None or fit is None:
        return
    groups, claims = linked
    if groups.impossible:
        yield unchecked(case, name, quantity, "a spread below 0 is printed for one of the groups", claims)
        return
    if fit.reason:
        yield unchecked(case, name, quantity, fit.reason, claims)
        return
    foreign = foreign_model(claims, fitted=fit.sure)
    numbers = {quantity: unsigned(case.claim.values[quantity]), **groups.numbers}
    comparison = Comparison(
        check=name,
        quantity=quantity,
        numbers=numbers,
        ways=_followed(fit.ways, squared=squared),
        claims=claims,
        bounds=Interval(0.0, float("inf")),
        doubts=(*fit.doubts, *link_doubts(case)),
        excuses=(foreign,) if foreign else (),
    )
    finding = judge(case, comparison)
    if finding.verdict in DISCREPANT:
        finding = replace(
            finding, reconciled_by=(*_spread_slip(case, groups, quantity, squared), *finding.reconciled_by)
        )
    if finding.verdict in ("conditional", "inconsistent") and fit.design != "paired":
        told = pooled_or_welch(box_of(groups.numbers), groups)
        finding = replace(finding, message=f"{finding.message} {told}".rstrip())
    told = correlation_told(finding, case.claim, groups) if quantity == "t" else ""
    yield replace(finding, message=f"{finding.message} {told}".rstrip())


def _followed(ways: Iterable[Way], *, squared: bool) -> tuple[Way, ...]:
    """Ways to t, or to F as its square."""
    return tuple(replace(way, implied=_squared(way)) if squared else way for way in ways)


def _spread_slip(case: Case, groups: Groups, quantity: str, squared: bool) -> tuple[Remedy, ...]:
    """The slip of a wrong label: standard errors printed as SDs, or the other way round."""
    other = {"sd": "se", "se": "sd"}
    if groups.spreads[0] != groups.spreads[1] or groups.unlabelled:
        return ()
    now, then = groups.spreads[0], other[groups.spreads[0]]
    renamed = {k.replace(now, then) if k.startswith(now) else k: v for k, v in groups.numbers.items()}
    turned = replace(groups, numbers=renamed, spreads=(then, then))
    numbers = {**renamed, quantity: unsigned(case.claim.values[quantity])}
    ways = _followed(fit_designs(case.claim, turned, box_of(renamed)).ways, squared=squared)
    if not agrees_as_printed(quantity, numbers, ways):
        return ()
    text = f"if what is printed as {shown(now)} were {shown(then)} in both groups, the numbers would agree"
    return (Remedy("slip", now, text, change=f"{shown(now)} → {shown(then)}"),)


def unsigned(printed: Printed) -> Printed:
    """The printed number without its sign: which group is subtracted is the authors' choice."""
    return replace(printed, value=abs(printed.value))


def _squared(way: Way) -> Callable[[Box], tuple[Interval, ...]]:
    def implied(box: Box) -> tuple[Interval, ...]:
        return tuple(Interval(i.low**2, i.high**2) for i in way.implied(box))

    return implied


@check(
    "t-from-groups",
    title="t against the means, SDs and ns of its two groups",
    kinds=("t-test",),
    quantity="t",
    needs=("t",),
    beside="two linked groups, each with mean and SD or SE; n of each, else whole df",
    formula="t = (M1 − M2) / SE; pooled SE = √(s²(1/n1 + 1/n2)), Welch SE = √(s1²/n1 + s2²/n2), paired SE = √((s1² + s2² − 2 r s1 s2)/n), −1 ≤ r ≤ 1",
    source="Fisher (1925) Applications of Student's distribution, Metron 5:90-104; Welch (1938) Biometrika 29:350-362; Satterthwaite (1946) Biometrics Bulletin 2:110-114",
    limits="Only where the printed df fit the design; adjusted means, mixed models and contrasts are not rebuilt.",
    agrees=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23.",
    ),
    inconsistent=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 2.23.",
    ),
    unchecked=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(51) = 2.93.",
    ),
)
def t_from_groups(case: Case) -> Iterable[Finding]:
    """Compare |t| with what the two groups imply under each design that the df fit."""
    yield from _judge_statistic(case, "t-from-groups", "t", squared=False)


@check(
    "F-from-two-groups",
    title="F with one numerator df against the means, SDs and ns of its two groups",
    kinds=("F-test",),
    quantity="F",
    needs=("F",),
    beside="two linked groups, each with mean and SD or SE; n of each, else whole df",
    formula="F(1, df) = t(df)², t as from two groups",
    source="Fisher (1925) Statistical Methods for Research Workers",
    limits="As for t; a factor of a larger design has an error term of its own.",
    agrees=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), F(1, 34) = 10.4.",
    ),
    inconsistent=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), F(1, 34) = 4.1.",
    ),
)
def f_from_two_groups(case: Case) -> Iterable[Finding]:
    """Compare F with the squared t that the two groups imply."""
    df1 = case.claim.values.get("df1")
    if df1 is None or df1.value == 1:
        yield from _judge_statistic(case, "F-from-two-groups", "F", squared=True)


@check(
    "difference-from-means",
    title="mean difference against the two means",
    kinds=("t-test", "comparison"),
    quantity="mean_difference",
    needs=("mean_difference",),
    beside="two linked groups, each with mean and SD or SE",
    formula="difference = M1 − M2",
    source="common practice, no source",
    limits="Adjusted differences are not those of the printed means. The sign is the authors' choice.",
    agrees=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), mean difference = 6.4, t(34) = 3.23.",
    ),
    inconsistent=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), mean difference = 4.6, t(34) = 3.23.",
    ),
)
def difference_from_means(case: Case) -> Iterable[Finding]:
    """Compare a printed mean difference with the printed means."""
    linked, fit = linked_groups(case), fit_of(case)
    if linked is None or fit is None:
        return
    groups, claims = linked
    numbers = {
        "mean_difference": unsigned(case.claim.values["mean_difference"]),
        "mean1": groups.numbers["mean1"],
        "mean2": groups.numbers["mean2"],
    }

    def implied(box: Box) -> tuple[Interval, ...]:
        a, b = box["mean1"], box["mean2"]
        return (a.minus(b).absolute(),)

    foreign = foreign_model(claims, fitted=fit.sure and not fit.reason)
    sure = not fit.reason and not fit.doubts and groups.n1 is not None and groups.n2 is not None
    doubts = (
        *link_doubts(case),
        *(() if sure else ("the difference is that of the same cases, unadjusted",)),
    )
    yield judge(
        case,
        Comparison(
            "difference-from-means", "mean_difference", numbers, (Way(implied),), claims,
            bounds=Interval(0.0, float("inf")), doubts=doubts, excuses=(foreign,) if foreign else (),
        ),
    )  # fmt: skip
