"""Checks of degrees of freedom against printed sample sizes; dropping cases is honest."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from recheck.checks.compare import finding_id, lowest, unchecked
from recheck.checks.designs import PAIRED, POOLED, WELCH, welch_df, whole
from recheck.checks.groups import fit_of, linked_groups
from recheck.checks.registry import Case, check
from recheck.checks.several import ONE_WAY, fit_one_way, several_of
from recheck.checks.wording import question_for
from recheck.model import Finding, Implied, Remedy
from recheck.model.figures import printed_text, span
from recheck.recompute.anova import MOST_GROUPS
from recheck.reconcile.readings import box_of

FEWER = "fewer cases entered than the whole groups hold, as the df show"


@check(
    "df-from-ns",
    title="df of a test of two or more groups against their sizes",
    kinds=("t-test", "F-test"),
    quantity="df",
    needs=(),
    beside="df; two or more linked groups with n",
    formula="pooled: df = n1 + n2 − 2; Welch: Satterthwaite df, from min(n1, n2) − 1 to n1 + n2 − 2; pairs: df = n − 1; k groups: df2 = N − k beside df1 = k − 1",
    source="Satterthwaite (1946) Biometrics Bulletin 2:110-114; Fisher (1925) Statistical Methods for Research Workers",
    limits="Never worse than conditional: cases may be missing, and a covariate or a larger error term changes df. Fewer df than whole groups have, their n printed in a heading, are unchecked.",
    agrees=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23.",
    ),
    conditional=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(43) = 3.23.",
    ),
)
def df_from_ns(case: Case) -> Iterable[Finding]:
    """Compare the printed df with those of the designs that the two group sizes allow."""
    claim = case.claim
    name = "df" if "df" in claim.values else "df2"
    if len(case.groups) > 2:
        yield from _several(case)
        return
    if name not in claim.values or (name == "df2" and "df1" not in claim.values):
        return
    if name == "df2" and claim.values["df1"].value != 1:
        return
    linked, fit = linked_groups(case), fit_of(case)
    if linked is None or fit is None or linked[0].n1 is None or linked[0].n2 is None:
        return
    groups, claims = linked
    n1, n2 = linked[0].n1, linked[0].n2
    total, welch = n1 + n2 - 2, welch_df(box_of(groups.numbers), groups)
    implied = [
        Implied(total, total, POOLED, (total,)),
        Implied(welch.low, welch.high, WELCH),
    ]
    if n1 == n2:
        implied.append(Implied(n1 - 1, n1 - 1, PAIRED, (n1 - 1,)))
    printed = claim.values[name]
    finding = Finding(
        id=finding_id("df-from-ns", claims, name), check="df-from-ns", verdict="agrees", claims=tuple(c.id for c in claims),
        quantity=name, printed=printed_text(printed), implied=tuple(implied), place=claim.place, confidence=lowest(claims),
        message=f"df {printed_text(printed)} fits groups of {n1} and {n2}.",
    )  # fmt: skip
    if not fit.reason:
        yield finding
        return
    if groups.of_whole and printed.number < total:
        yield unchecked(case, "df-from-ns", name, FEWER, claims)
        return
    yield _other_df(finding, case, n1, n2)


def _several(case: Case) -> Iterable[Finding]:
    """df2 of an analysis of variance of three or more groups; another df1 belongs to another comparison."""
    claim = case.claim
    if claim.says("variance-test"):
        return
    several = several_of(case.groups) if len(case.groups) <= MOST_GROUPS else None
    if several is None or "df2" not in claim.values or "df1" not in claim.values:
        return
    if claim.values["df1"].value != several.size - 1 or claim.says("paired", "repeated"):
        return
    printed, claims = claim.values["df2"], (claim, *case.groups)
    expected = several.total - several.size
    finding = Finding(
        id=finding_id("df-from-ns", claims, "df2"), check="df-from-ns", verdict="agrees", claims=tuple(c.id for c in claims),
        quantity="df2", printed=printed_text(printed), implied=(Implied(expected, expected, ONE_WAY, (expected,)),),
        place=claim.place, confidence=lowest(claims),
        message=f"df2 {printed_text(printed)} fits {several.size} groups of {several.total} in all.",
    )  # fmt: skip
    if not fit_one_way(claim, several, box_of(several.numbers)).reason:
        yield finding
        return
    fewer = printed.number < expected
    if fewer and several.of_whole:
        yield unchecked(case, "df-from-ns", "df2", FEWER, claims)
        return
    why = (
        "cases are missing, covariates take up df, or the error term belongs to another model"
        if fewer
        else "more units entered the test than these groups hold, or it belongs to another model"
    )
    message = f"df2 {printed_text(printed)} is printed; {several.size} groups of {several.total} in all imply {expected}."
    yield only_if(finding, case, why, message=message, tolerance="group sizes taken as exact")


def _other_df(finding: Finding, case: Case, n1: int, n2: int) -> Finding:
    """df that fit no plain two-group design: missing cases or a larger model."""
    printed = case.claim.values[finding.quantity]
    total = n1 + n2 - 2
    if printed.number < total:
        why = (
            f"cases are missing, or the error term belongs to another model (n = {n1} and {n2} give {total})"
        )
    else:
        why = f"more units entered the test than the {n1 + n2} of the two groups, or it belongs to another model"
    implied = "; or ".join(f"{span(row.low, row.high)} ({row.assuming})" for row in finding.implied)
    return only_if(
        finding,
        case,
        why,
        message=f"df {printed_text(printed)} is printed; groups of {n1} and {n2} imply {implied}.",
        tolerance="group sizes taken as exact; df without decimals also as a rounded or floored fractional one",
    )


def only_if(finding: Finding, case: Case, why: str, *, message: str, tolerance: str) -> Finding:
    """The finding as a conditional one: df and sizes agree only for a reason that the text does not state."""
    printed = case.claim.values[finding.quantity]
    value = printed.number
    return replace(
        finding,
        verdict="conditional",
        message=f"{message} They agree only if {why}.",
        tolerance=tolerance,
        gap=min(max(row.low - value, value - row.high, 0.0) for row in finding.implied),
        assumptions=(why,),
        question=question_for(case.claim, finding.quantity, printed, finding.implied),
        reconciled_by=(Remedy("reading", finding.quantity, f"the numbers agree if {why}"),),
    )


@check(
    "r-df-from-n",
    title="df of a correlation against its n",
    kinds=("correlation",),
    quantity="df",
    needs=("df",),
    beside="n",
    formula="df = n − 2",
    source="Fisher (1915) Biometrika 10:507-521",
    limits="Never worse than conditional: cases may be missing.",
    agrees=("Height rose with proofing time, r(48) = .30, n = 50, p = .034.",),
    conditional=("Height rose with proofing time, r(58) = .30, n = 50, p = .020.",),
)
def r_df_from_n(case: Case) -> Iterable[Finding]:
    """Compare the df of a correlation with the n printed beside it."""
    claim = case.claim
    n, df = whole(claim.values.get("n") or claim.values.get("N")), whole(claim.values["df"])
    if n is None or df is None:
        return
    printed = claim.values["df"]
    finding = Finding(
        id=finding_id("r-df-from-n", (claim,), "df"), check="r-df-from-n", verdict="agrees", claims=(claim.id,),
        quantity="df", printed=printed_text(printed), implied=(Implied(n - 2, n - 2, "", (n - 2,)),), place=claim.place,
        confidence=claim.confidence, message=f"df {printed_text(printed)} fits n = {n}.",
    )  # fmt: skip
    if df == n - 2:
        yield finding
        return
    why = (
        "the number in brackets is n, not df"
        if df == n
        else "cases are missing or covariates take up df"
        if df < n - 2
        else "more units entered than n"
    )
    message = f"df {printed_text(printed)} is printed; n = {n} implies {n - 2}."
    yield only_if(finding, case, why, message=message, tolerance="n and df taken as exact")
