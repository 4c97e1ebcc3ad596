"""Checks of percentages: against the counts that they can be, and their confidence intervals."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable
from dataclasses import replace

import numpy as np

from recheck.checks.compare import Comparison, doubted, judge
from recheck.checks.designs import whole
from recheck.checks.interval_choice import Ends, Method, judge_interval
from recheck.checks.intervals import ends, level_of
from recheck.checks.registry import Case, check
from recheck.checks.risk_tables import NONE_MISSING, range_of
from recheck.checks.tabulated import counts_behind
from recheck.model import STATED, TOTAL_OF_GROUP, Claim, Finding, Interval, Remedy
from recheck.recompute import proportions
from recheck.reconcile.readings import Box, Way, box_of

PLAIN_SHARE = "the percentage is the plain share of so many cases, each counted once (no average, weights or missing answers)"
FOREIGN = ("weighted", "imputed", "marginal", "mixed-model", "covariate-adjusted", "survival", "bayesian")
NEAR = 12
"""How many totals away those are looked for of which the percentage could be one."""


@check(
    "percent-of-total",
    title="percentage, printed without its count, against its total",
    kinds=("count",),
    quantity="percent",
    needs=("percent", "total"),
    formula="percentage = 100 k / total for a whole number k",
    source="Brown & Heathers (2017) Soc. Psychol. Personal. Sci. 8:363-369, for answers of 0 and 1",
    limits="Conditional at most: answers may be missing, and averages of percentages are none of the whole. Nothing is said where every percentage of so many decimals is one of the total.",
    agrees=("In all, 37.5% of the 40 apprentices passed.",),
    conditional=("In all, 36.4% of the 40 apprentices passed.",),
)
def percent_of_total(case: Case) -> Iterable[Finding]:
    """Look for a count that is the printed percentage of its total."""
    claim = case.claim
    percent, total = claim.values["percent"], whole(claim.values["total"])
    if "count" in claim.values or not total or total >= 100 * 10**percent.decimals or percent.relation != "=":
        return
    numbers = {"percent": replace(percent, percent=True), "total": claim.values["total"]}

    def implied(box: Box) -> tuple[Interval, ...]:
        n = int(box["total"].low)
        near = range(math.floor(n * box["percent"].low / 100), math.ceil(n * box["percent"].high / 100) + 1)
        shares = [100 * k / n for k in near if 0 <= k <= n] if n > 0 else []
        shares.sort(key=lambda share: abs(share - percent.number))
        return tuple(Interval(share, share) for share in shares)

    doubts = (PLAIN_SHARE, *((NONE_MISSING,) if TOTAL_OF_GROUP in claim.notes else ()))
    found = judge(
        case,
        Comparison(
            "percent-of-total", "percent", numbers, (Way(implied),), doubts=doubts, excuses=_foreign(claim)
        ),
    )
    if found.verdict == "conditional" and (more := _totals_near(box_of(numbers)["percent"], total)):
        found = replace(found, reconciled_by=(*found.reconciled_by, more))
    yield found


def _foreign(claim: Claim) -> tuple[str, ...]:
    said = [word for word in FOREIGN if claim.says(word)] + [
        w for w in ("weighted", "imputed") if w in claim.background
    ]
    return tuple(f"the percentage may be that of {STATED[word]}" for word in said[:1])


def _totals_near(percent: Interval, total: int) -> Remedy | None:
    """The nearest totals of which the percentage could be one: cases may be missing, or the total be that of another group."""
    near = range(max(1, total - NEAR), total + NEAR + 1)
    fits = sorted((n for n in near if counts_behind(percent, n)), key=lambda n: abs(n - total))[:4]
    if not fits:
        return None
    told = ", ".join(f"{n} ({counts_behind(percent, n)[0]} of {n})" for n in sorted(fits))
    return Remedy("number", "total", f"totals near by that would do: {told}", min(fits), max(fits))


METHODS: tuple[tuple[str, Callable[..., tuple[np.ndarray, np.ndarray]]], ...] = (
    ("Wald's", proportions.wald),
    ("Wilson's", proportions.wilson),
    ("Clopper and Pearson's", proportions.clopper_pearson),
    ("Agresti and Coull's", proportions.agresti_coull),
    ("Wilson's with continuity correction", proportions.wilson_corrected),
    ("Jeffreys's", proportions.jeffreys),
    ("that of the logit", proportions.logit),
    ("the mid-P one", proportions.mid_p),
    ("Wald's with continuity correction", proportions.wald_corrected),
)
KINDS = "Wald's, Wilson's, Clopper and Pearson's, Agresti and Coull's, Jeffreys's, logit, mid-P"


@check(
    "ci-of-percent",
    title="confidence interval of a percentage against its count and total",
    kinds=("count",),
    quantity="ci_low",
    needs=("ci_low", "ci_high", "total"),
    beside="the count, or the percentage",
    formula="p ∓ z √(p(1 − p)/n); Wilson's, Clopper and Pearson's, Agresti and Coull's, Jeffreys's, the logit's and the mid-P interval",
    source="Newcombe (1998) Stat. Med. 17:857-872; Brown, Cai & DasGupta (2001) Stat. Sci. 16:101-133; Clopper & Pearson (1934) Biometrika 26:404-413; Wilson (1927) J. Am. Stat. Assoc. 22:209-212",
    limits="Conditional at most: the method is seldom named, and cases drawn in clusters or with weights have other intervals.",
    agrees=("A split crust was found in 31/140 loaves (22.1%, 95% CI 15.6% to 29.9%).",),
    conditional=("A split crust was found in 31/140 loaves (22.1%, 95% CI 19.1% to 25.2%).",),
)
def interval_of_percent(case: Case) -> Iterable[Finding]:
    """Compare the interval of a percentage with those of the usual methods."""
    claim = case.claim
    total, (low, high) = whole(claim.values["total"]), ends(claim)
    told = [name for name in ("count", "percent") if name in claim.values][:1]
    if not total or not told or claim.interval_of not in (None, "percent") or low.value > high.value:
        return
    numbers = {"ci_low": low, "ci_high": high, told[0]: claim.values[told[0]], "total": claim.values["total"]}
    level, known = level_of(claim)
    unit = 1.0 if high.value <= 1 and not high.percent and not _small(claim) else 100.0
    found = judge_interval(
        case, "ci-of-percent", numbers, tuple(_method(w, f, level, unit) for w, f in METHODS), claims=(claim,),
        bounds=Interval(0.0, unit), kinds=KINDS, excuses=_foreign(claim) or _resampled(claim),
        doubts=(NONE_MISSING,) if TOTAL_OF_GROUP in claim.notes else (),
    )  # fmt: skip
    yield (
        found
        if known or found.verdict == "agrees"
        else doubted(found, "the interval is a 95% one (no level is printed)")
    )


def _small(claim: Claim) -> bool:
    """Tell whether the percentage itself lies below 1, so that ends below 1 may be percentages too."""
    percent = claim.values.get("percent")
    return percent is not None and percent.value <= 1


def _resampled(claim: Claim) -> tuple[str, ...]:
    return ("the interval may come from a bootstrap",) if claim.suggests("bootstrap") else ()


def _method(
    words: str, formula: Callable[..., tuple[np.ndarray, np.ndarray]], level: float, unit: float
) -> Method:
    def both(box: Box) -> Ends:
        total = box["total"].low
        if "count" in box:
            counts = np.array([box["count"].low])
        else:
            counts = np.array(counts_behind(box["percent"], int(total)), dtype=float)
        if not len(counts) or counts.max() > total:
            return (), ()
        low, high = formula(counts, total, level)
        return range_of(unit * low), range_of(unit * high)

    return Method(words, both)
