"""Claims: printed numbers that the authors assert together."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from recheck.model.passage import Place
from recheck.model.printed import Printed

ClaimKind = Literal[
    "t-test", "F-test", "chi2-test", "correlation", "z-test", "rank-test", "group-summary",
    "comparison", "estimate", "regression", "count", "two-by-two", "power", "correlation-matrix",
]  # fmt: skip
Confidence = Literal["high", "medium", "low"]

STATED = {
    "two-tailed": "a two-sided test",
    "one-tailed": "a one-sided test",
    "independent": "two independent groups",
    "pooled": "equal variances, pooled",
    "welch": "unequal variances (Welch)",
    "paired": "the same units measured twice",
    "one-sample": "one sample against a fixed value",
    "between-groups": "a design without repeated measures",
    "repeated": "a design with repeated measures",
    "corrected-df": "degrees of freedom corrected for sphericity (Greenhouse–Geisser, Huynh–Feldt)",
    "adjusted-p": "p adjusted for several tests (Bonferroni, Holm, Tukey, false discovery rate)",
    "adjusted-p-post-hoc": "p of post hoc comparisons adjusted for several tests",
    "equivalence": "a test of equivalence or non-inferiority",
    "covariate-adjusted": "means or tests adjusted for covariates (ANCOVA)",
    "mixed-model": "a mixed (multilevel) model",
    "survival": "a survival analysis (log-rank test, Cox model)",
    "heterogeneity": "a test of heterogeneity (Cochran's Q)",
    "imputed": "multiple imputation",
    "transformed": "scores transformed before the analysis",
    "weighted": "weights",
    "robust": "robust standard errors",
    "bootstrap": "a bootstrap",
    "permutation": "a permutation or exact test",
    "bayesian": "a Bayesian analysis",
    "contrast": "a contrast on the error term of a larger analysis",
    "marginal": "estimated marginal means",
    "within-subject-se": "a spread normalised within subjects",
    "rank-test": "a test of ranks",
    "signed-ranks": "a test of signed ranks, of pairs",
    "variance-test": "a test of equal variances",
    "levene": "Levene's test of equal variances, or Brown and Forsythe's, which needs the single scores",
    "bartlett": "Bartlett's test of equal variances",
    "spearman": "a rank correlation",
    "partial": "a partial correlation",
    "disattenuated": "a correlation corrected for unreliability or between latent variables",
    "yates": "the continuity correction",
    "uncorrected-chi2": "Pearson's χ² without continuity correction",
    "likelihood-ratio": "a likelihood-ratio test",
    "fisher-exact": "Fisher's exact test",
    "multi-regression": "a regression with several predictors",
    "model-step": "a step of a regression, what it adds",
    "pseudo-r2": "an R² of another kind (Nagelkerke, McFadden, marginal, conditional and the like)",
    "model-fit": "the fit of a model (structural equations, nested models)",
    "spread-unlabelled": "a spread that is not said to be SD or SE",
    "effect-size-r": "r as the effect size of a test",
    "glass-delta": "d by the SD of one group",
    "n-required": "a sample size planned for a power",
    "power-achieved": "the power of a given sample",
    "effect-detectable": "the effect that a given sample detects",
    "per-group": "the size of each group",
    "in-total": "the size of all groups together",
    "t-test-named": "a t test",
    "anova-named": "an analysis of variance",
    "correlation-named": "a correlation",
    "regression-named": "a regression",
    "chi2-named": "a χ² test",
    "clustered": "clusters or nested units",
    "simulated": "a simulation",
    "sequential": "interim analyses",
    "interaction": "several factors or an interaction",
    "other-effect": "an effect of another kind (odds ratio, mediation, precision and the like)",
    "inferred": "put together from numbers that stand apart",
    "matched": "groups matched to each other",
    "crude": "an analysis without covariates",
    "rates": "rates, events over the time that cases were watched",
    "whole-scores": "scores are whole numbers (answers on a scale with whole steps, points, counts)",
    "single-item": "one answer a person",
    "averaged-scores": "scores averaged over items, trials, raters or the like",
    "summed-scores": "scores summed over items",
    "prorated": "scores of missing items prorated or imputed",
}
"""What a manuscript can say of a result, in the words that reports use for it."""


P_IN_WORDS = "p is told in words"
"""The note of a claim whose p is told by `significant` or `not significant` alone."""

N_OF_GROUP = "n is that of the whole group"
"""The note of a claim whose n comes from a header, a caption or a note: of this variable some cases may be missing."""

SIZES_IN_WORDS = "the sizes of the two groups are told in words of the sentence"
"""The note of a test of ranks whose `n1` and `n2` are printed without n: `24 growers and 21 buyers`."""

FEWER_CASES = "the df of its test are fewer than these n give"
"""The note of a summary whose test shows that not all of the n that is printed beside it have a value."""

SUM_OF_GROUPS = "its n is the sum of those of the groups that follow"
"""The note of a summary after which a text tells the groups that it is made of."""

OF_DIFFERENCES = "the mean beside the test is one of differences"
"""The note of a t test with one group summary, before which a difference, a change or a gain is named."""

EXACT_VALUE = "the value that the mean is compared with is exact"
"""The note of a t test against the midpoint of a scale, or a level of chance that is a round share."""

SCALE_INFERRED = "the scale is told near by, not of this outcome by name"
"""The note of a summary whose scale, and whether its scores are whole numbers, was not told of its own outcome in so many words."""

AVERAGED_BY = "perhaps an average: "
"""Begins the note of a summary that quotes the words for which its scores may be averages."""

SCALE_ENDS_INFERRED = "the ends of the scale are not printed; it is taken to begin at 1"
"""The note of a summary whose scale is told by its number of points alone: how wide it is is sure, where it begins is not."""

SCORES_ASKED = "what the scores are was said by the reader of the manuscript, not read in it"
"""The note of a summary whose scale and whole numbers were stated with the request for the audit."""

N_BY_PAIR = "n differs from pair to pair"
"""The note of a correlation matrix whose coefficients rest on different numbers of cases."""

TOTAL_OF_GROUP = "the total is the group's n"
"""The note of a count whose total is the size of its group, not printed in its own cell."""


@dataclass(frozen=True, slots=True, eq=False)
class Claim:
    """One result, group summary or comparison as the manuscript prints it.

    `values` maps the name of a quantity to its printed number. `stated` holds keys of `STATED`
    said of this claim, `background` those said for the document elsewhere. `interval_of` names the
    quantity that `ci_low` and `ci_high` belong to, where that is sure. `groups` are ids of linked
    group summaries, in the order in which they are printed; `link` says on what ground, and
    `link_confidence` how sure that is (`confidence` speaks of the claim's own numbers alone).
    `outcome` names what was measured and `group` whom a summary or a count is about, in the
    manuscript's words, where a table or the text says so. A `correlation-matrix` has its coefficients
    in `values` as `r(3,1)`, row and column of the names in `variables`, counted from 1, the greater first.
    """

    id: str
    kind: ClaimKind
    place: Place
    values: Mapping[str, Printed]
    stated: tuple[str, ...] = ()
    background: tuple[str, ...] = ()
    interval_of: str | None = None
    confidence: Confidence = "high"
    groups: tuple[str, ...] = ()
    link: str | None = None
    link_confidence: Confidence = "high"
    notes: tuple[str, ...] = field(default=())
    outcome: str | None = None
    group: str | None = None
    variables: tuple[str, ...] = ()

    def says(self, *words: str) -> bool:
        """Tell whether any of the words is stated of this claim itself."""
        return any(word in self.stated for word in words)

    def suggests(self, *words: str) -> bool:
        """Tell whether any of the words is stated of this claim or for the whole document."""
        return any(word in self.stated or word in self.background for word in words)


@dataclass(frozen=True, slots=True)
class Context:
    """What the document says once for all its tests."""

    alpha: Printed | None = None
    background: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class SameResult:
    """Two claims that tell one result, by their ids in reading order.

    `sure` says that outcome, groups and statistic are surely the same; `basis` on what ground, in words.
    """

    claims: tuple[str, str]
    sure: bool
    basis: str


@dataclass(frozen=True, slots=True, eq=False)
class Reading:
    """Everything that was read from one document."""

    claims: tuple[Claim, ...]
    context: Context = Context()
    notes: tuple[str, ...] = ()
    same: tuple[SameResult, ...] = ()
