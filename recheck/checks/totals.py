"""Checks of group sizes and df against a total that is printed with the test."""

from __future__ import annotations

from collections.abc import Iterable

from recheck.checks.compare import finding_id, lowest, unchecked
from recheck.checks.designs import whole
from recheck.checks.groups import fit_of
from recheck.checks.registry import Case, check
from recheck.checks.several import fit_one_way, several_of
from recheck.checks.sizes import FEWER, only_if
from recheck.model import N_OF_GROUP, Claim, Finding, Implied
from recheck.model.figures import printed_text
from recheck.recompute.anova import MOST_GROUPS
from recheck.reconcile.readings import box_of


@check(
    "N-from-sizes",
    title="total N of a test against the sizes of its groups",
    kinds=("t-test", "F-test"),
    quantity="N",
    needs=("N",),
    beside="two or more linked groups with n that are tested against each other",
    formula="N = n1 + n2 + …",
    source="by definition of a partition",
    limits="Never worse than conditional: cases may be missing, or belong to none of these groups.",
    agrees=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23, N = 36.",
    ),
    conditional=(
        "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 3.23, N = 63.",
    ),
)
def n_from_sizes(case: Case) -> Iterable[Finding]:
    """Compare N with the sum of the sizes of groups that the df show to be all of the test."""
    claim, groups = case.claim, case.groups
    sizes = [whole(group.values.get("n")) for group in groups]
    N = whole(claim.values["N"])
    known = [n for n in sizes if n is not None]
    if N is None or len(known) < 2 or len(known) != len(groups) or not _partition(case):
        return
    total, claims, printed = sum(known), (claim, *groups), claim.values["N"]
    listed = ", ".join(map(str, known[:-1])) + f" and {known[-1]}"
    finding = Finding(
        id=finding_id("N-from-sizes", claims, "N"), check="N-from-sizes", verdict="agrees",
        claims=tuple(c.id for c in claims), quantity="N", printed=printed_text(printed),
        implied=(Implied(total, total, "", (total,)),), place=claim.place, confidence=lowest(claims),
        message=f"N {printed_text(printed)} is the sum of groups of {listed}.",
    )  # fmt: skip
    if total == N:
        yield finding
    elif total > N and any(N_OF_GROUP in group.notes for group in groups):
        yield unchecked(case, "N-from-sizes", "N", FEWER, claims)
    else:
        why = (
            "N counts cases that are in none of these groups, or that are missing from this test"
            if total < N
            else "N leaves out cases that these groups count"
        )
        message = f"N {printed_text(printed)} is printed; groups of {listed} imply {total}."
        yield only_if(finding, case, why, message=message, tolerance="sizes taken as exact")


def _partition(case: Case) -> bool:
    """Tell whether the groups are surely all of the test, each case in one of them: independent, and the df fit."""
    claim: Claim = case.claim
    if claim.says("paired", "repeated", "one-sample", "variance-test", "contrast"):
        return False
    if len(case.groups) == 2:
        fit = fit_of(case)
        return fit is not None and not fit.reason and fit.design == "independent"
    several = several_of(case.groups) if len(case.groups) <= MOST_GROUPS else None
    if several is None or "df2" not in claim.values:
        return False
    return not fit_one_way(claim, several, box_of(several.numbers)).reason


@check(
    "df-within-N",
    title="df of a t test against N",
    kinds=("t-test",),
    quantity="df",
    needs=("df", "N"),
    formula="df ≤ N − 1 (one sample or pairs), ≤ N − 2 (two groups)",
    source="Fisher (1925) Statistical Methods for Research Workers",
    limits="Never worse than conditional: in a mixed model df may count observations. Fewer df are honest, as cases may be missing.",
    conditional=("The loaves differed, t(58) = 3.23, N = 36, p = .002.",),
)
def df_within_n(case: Case) -> Iterable[Finding]:
    """Find df that N cases do not have."""
    claim = case.claim
    N, printed = whole(claim.values["N"]), claim.values["df"]
    if N is None or N < 2 or printed.interval().low <= N - 1 or claim.says("mixed-model", "imputed"):
        return
    finding = Finding(
        id=finding_id("df-within-N", (claim,), "df"), check="df-within-N", verdict="conditional", claims=(claim.id,),
        quantity="df", printed=printed_text(printed), implied=(Implied(0, N - 1, ""),), place=claim.place,
        confidence=claim.confidence, message="",
    )  # fmt: skip
    message = f"df {printed_text(printed)} is printed; N = {N} allows {N - 1} at most."
    why = "N counts something else than the observations of this test"
    yield only_if(finding, case, why, message=message, tolerance="N taken as exact")
