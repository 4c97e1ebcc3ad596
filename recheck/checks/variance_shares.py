"""Checks of η² and partial η² against the F that they are printed with."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator

from recheck.checks.compare import Comparison, judge
from recheck.checks.p_values import ROUNDED_DF, rounded_df, rounded_df1
from recheck.checks.registry import Case, check
from recheck.checks.source_rows import from_source
from recheck.model import STATED, Claim, Finding, Interval
from recheck.reconcile.readings import Box, Way

SMALLER = "what is called partial η² is the η² of the total or the generalized one, which are smaller"
AT_MOST = "η² of the total and generalized η² are at most partial η²"
OTHER_MODELS = (
    "mixed-model",
    "robust",
    "imputed",
    "welch",
    "rank-test",
    "bayesian",
    "permutation",
    "transformed",
)
"""Analyses whose F and whose share of variance need not come from the same sums of squares."""


@check(
    "eta2-from-F",
    title="η² and partial η² against F and its df",
    kinds=("F-test",),
    quantity="partial_eta2",
    needs=("F", "df1", "df2"),
    beside="partial η², η² or generalized η²",
    formula="partial η² = df1 F / (df1 F + df2); η² and generalized η² are at most that",
    source="Cohen (1973) Educational and Psychological Measurement 33:107-112; Olejnik & Algina (2003) Psychological Methods 8:434-447",
    limits="Corrected and uncorrected df give the same value, as both shrink alike. Welch's F, mixed models and robust tests are not rebuilt. A partial η² that is too small is conditional, as the names are mixed up.",
    agrees=("Flour mattered, F(2, 28) = 9.93, p < .001, ηp2 = .42.", "Flour mattered, F(2, 28) = 9.93, η² = .30."),
    conditional=("Flour mattered, F(2, 28) = 9.93, p < .001, ηp2 = .12.",),
    inconsistent=("Flour mattered, F(2, 28) = 9.93, p < .001, ηp2 = .72.",),
)  # fmt: skip
def eta2_from_F(case: Case) -> Iterable[Finding]:
    """Compare the printed share of variance with that of F; a smaller one is no contradiction where it is not partial."""
    claim = case.claim
    if from_source(claim) or claim.values["df1"].number <= 0 or claim.values["df2"].number <= 0:
        return
    for name in ("partial_eta2", "eta2", "generalized_eta2"):
        if name not in claim.values or claim.values[name].interval().low > 1:
            continue
        numbers = {n: claim.values[n] for n in (name, "F", "df1", "df2")}
        ways = tuple(_ways(claim, partial=name == "partial_eta2"))
        doubts = () if claim.values["df2"].decimals <= 0 or _both_fractional(claim) else (SAME_ANALYSIS,)
        yield judge(
            case,
            Comparison(
                "eta2-from-F", name, numbers, ways, bounds=Interval(0.0, 1.0),
                doubts=doubts, excuses=other_model(claim),
            ),
        )  # fmt: skip


UNEQUAL = "F is one for unequal variances (Welch), the effect size that of the classical analysis"


def _ways(claim: Claim, *, partial: bool) -> Iterator[Way]:
    """The share as printed, then as whole df that were rounded and as an F of another kind allow."""
    yield Way(_share) if partial else Way(_down_from(_share), (), (AT_MOST,))
    if partial:
        yield Way(_down_from(_share), (SMALLER,), alone=True)
    if any(claim.values[name].decimals > 0 for name in ("df1", "df2")):
        return
    if not claim.says("between-groups", "independent"):
        yield _other(_rounded, ROUNDED_DF, partial=partial)
    if not claim.says("repeated", "paired", "pooled"):
        yield _other(_unequal, UNEQUAL, partial=partial)


def _other(change: Callable[[Box], Box], words: str, *, partial: bool) -> Way:
    inner = _share if partial else _down_from(_share)
    return Way(lambda box: inner(change(box)), (words,), alone=True)


def _rounded(box: Box) -> Box:
    """Both df as the fractional ones of a corrected test that were rounded."""
    return {**box, "df1": rounded_df1(box["df1"]), "df2": rounded_df(box["df2"])}


def _unequal(box: Box) -> Box:
    """Where the classical F and df2 may lie beside Welch's.

    Drawn around 2 to 4 normal samples of 5 to 60 with SDs apart by a factor of 1 to 4: in 98 of 100 F
    is a fifth to three times Welch's, and df2 at most eight times.
    """
    F, df2 = box["F"].within(0.0, float("inf")), box["df2"]
    return {**box, "F": Interval(F.low / 5, F.high * 3), "df2": Interval(df2.low, df2.high * 8)}


SAME_ANALYSIS = "F and its effect size come from one analysis (df2 with decimals may be those of another than the effect size)"


def _both_fractional(claim: Claim) -> bool:
    """Tell whether both df have decimals, as those corrected for sphericity do."""
    return all(claim.values[name].decimals > 0 for name in ("df1", "df2"))


def other_model(claim: Claim) -> tuple[str, ...]:
    """Say that the effect size may be of an analysis that F does not rebuild, where the text speaks of one."""
    said = [word for word in OTHER_MODELS if claim.says(word)]
    said += [word for word in ("mixed-model", "imputed", "robust") if claim.suggests(word)]
    return tuple(f"the effect size may be that of {STATED[word]}" for word in said[:1])


def _share(box: Box) -> tuple[Interval, ...]:
    """Partial η²: rises with df1 F and falls with df2."""
    F, df1, df2 = box["F"].within(0.0, float("inf")), box["df1"], box["df2"]
    low, high = max(df1.low, 0.0) * F.low, df1.high * F.high
    most = high / (high + max(df2.low, 0.0)) if high < float("inf") else 1.0
    return (Interval(low / (low + df2.high), most),)


def _down_from(inner: Callable[[Box], tuple[Interval, ...]]) -> Callable[[Box], tuple[Interval, ...]]:
    return lambda box: tuple(Interval(0.0, i.high) for i in inner(box))
