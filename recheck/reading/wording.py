"""Words that change how a result is read: the test, the design, the correction, the model."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

# Stems are looked for at the start of a word, in lower case; a stem that ends in a space is a whole word.
STEMS: dict[str, tuple[str, ...]] = {
    "two-tailed": ("two-tailed", "two tailed", "two-sided", "two sided", "2-tailed", "2-sided"),
    "one-tailed": ("one-tailed", "one tailed", "one-sided", "one sided", "1-tailed", "1-sided", "directional test"),
    "independent": (
        "independent-sample", "independent sample", "independent t-", "independent t test", "independent-t", "unpaired", "two-sample t",
        "two sample t", "two independent", "independent-group", "independent group", "independent-measures",
        "independent student",
    ),
    "pooled": ("pooled variance", "equal variances assumed", "assuming equal variance", "pooled-variance"),
    "welch": (
        "welch", "unequal variance", "satterthwaite", "equal variances not assumed", "unequal-variance",
        "equal variance was not assumed", "without assuming equal variance", "not assuming equal variance",
    ),
    "paired": (
        "paired t-", "paired t test", "paired t(", "paired t (", "paired-t", "paired-sample", "paired sample", "paired student", "paired two", "paired test",
        "paired (", "paired wilcoxon", "paired comparison", "dependent t-", "dependent t test", "dependent-sample", "dependent sample",
        "matched-pair", "matched pair", "related-sample", "related sample", "related t-", "related t test", "repeated-measures t-",
        "repeated measures t-", "correlated sample", "within-subject t-", "within-subjects t-", "within-participants t-",
        "student's paired",
    ),
    "matched": ("conditional logistic", "matched control", "matched case", "matched group", "matched sample", "matched cohort", "matched design",
                "matched for", "matched on", "matched by", "were matched", "was matched", "age-matched", "sex-matched", "gender-matched",
                "age- and sex-matched", "propensity score", "propensity-score", "individually matched", "frequency matched"),
    "one-sample": ("one-sample", "one sample t", "single-sample t", "single sample t"),
    "between-groups": (
        "between-subject", "between subject", "between-group", "between-participant", "one-way anova",
        "one-way analysis of variance", "one-way between", "factorial anova", "two-way anova", "one way anova",
    ),
    "repeated": (
        "repeated-measure", "repeated measure", "within-subject", "within subject", "within-participant",
        "rm-anova", "rm anova", "rmanova", "mixed anova", "mixed-design", "mixed design", "split-plot",
        "crossover", "cross-over",
    ),
    "corrected-df": ("greenhouse-geisser", "greenhouse and geisser", "greenhouse & geisser", "greenhouse geisser", "huynh",
                     "sphericity correct", "gg-correct", "correction for nonsphericity"),
    "equivalence": ("equivalence test", "tost", "two one-sided", "non-inferiority", "noninferiority",
                    "statistically equivalent", "equivalence bound", "test of equivalence"),
    "covariate-adjusted": (
        "ancova", "analysis of covariance", "analyses of covariance", "covariate", "controlling for", "controlled for",
        "adjusting for", "adjusted for", "adjusted mean", "partialling out", "partialing out", "mancova", "covarying",
        "covaried",
    ),
    "mixed-model": (
        "mixed model", "mixed-model", "mixed effect", "mixed-effect", "multilevel", "multi-level", "random intercept",
        "random effect", "random-effect", "hierarchical linear", "lmer", "glmm", "lme4", "gee ", "random slope",
        "generalized estimating", "generalised estimating", "nlme", "proc mixed", "lmm ", "lmms", "linear mixed",
    ),
    "survival": (
        "log-rank", "log rank", "logrank", "kaplan-meier", "cox regression", "cox proportional", "proportional hazard",
        "proportional-hazard", "survival analys",
    ),
    "heterogeneity": ("heterogeneity chi", "heterogeneity χ", "heterogeneity p", "p for heterogeneity", "p heterogeneity", "phet", "p het ",
        "test for heterogeneity", "test of heterogeneity", "heterogeneity test", "cochran's q", "cochran’s q", "cochran q"),
    "imputed": ("imputed", "imputation"),
    "transformed": (
        "log-transform", "log transform", "ln-transform", "ln transform", "logarithm", "log10", "log-10", "square-root transform",
        "square root transform", "root-transform", "root transform", "arcsine", "arcsin", "logit-transform", "logit transform",
        "box-cox", "rank-transform", "rank transform", "inverse-transform", "inverse transform", "reciprocal transform",
        "reciprocals of", "were transformed", "was transformed", "transformed before", "transformed prior", "transformed for",
        "transformed scores", "transformed values", "transformed data", "transformed times", "log-scale", "log scale",
        "normalising transform", "normalizing transform", "power transform", "transformations were", "transformation was",
    ),
    "weighted": (
        "weighted least", "weighted regression", "weighted analys", "weighted by", "weighted data", "weighted estimat",
        "weighted mean", "survey weight", "sampling weight", "inverse probability", "inverse-probability", "weights were",
        "post-stratif", "population-weighted", "survey-weighted", "design-weighted", "weighted to ", "weighted for ", "weighted using",
        "weighted sample", "weighted percent", "weighted n ", "weighted frequenc", "weighted count", "sample weight", "design weight",
        "calibration weight", "raking weight", "weights from ", "weighting factor", "weighting procedure", "complex survey", "complex sampl",
    ),
    "robust": (
        "robust standard", "robust se", "robust varian", "robust estimat", "robust regress", "robust chi", "robust maximum",
        "robust test", "scaled chi", "satorra", "robust t-", "robust anova", "sandwich estimat", "heteroskedastic",
        "heteroscedasticity-consistent", "clustered standard error", "cluster-robust", "yuen", "trimmed mean",
    ),
    "bootstrap": ("bootstrap", "bias-corrected and accelerated", "bca "),
    "permutation": ("permutation", "permuted", "randomization test", "randomisation test", "monte carlo", "permanova", "permutational",
                    "pseudo-f", "adonis", "p(perm", "p (perm"),
    "bayesian": ("bayesian", "credible interval", "posterior distribution", "posterior mean", "posterior median",
                 "posterior prob", "posterior estimate", "highest density", "highest-density", "hdi ", "bayes factor"),
    "contrast": (
        "planned contrast", "contrasts ", "orthogonal contrast", "polynomial contrast", "linear contrast", "simple contrast",
        "contrast analys", "contrast test", "contrast cod", "contrast show", "contrast reveal", "a contrast ", "the contrast ",
        "simple effect", "simple main effect", "planned comparison",
    ),
    "marginal": ("marginal mean", "least-squares mean", "least squares mean", "ls mean", "lsmean", "emmean",
                 "estimated mean", "emm ", "emms"),
    "within-subject-se": ("cousineau", "morey", "loftus", "within-subject standard error", "within-subjects se",
                          "within-subject error", "normalised within", "normalized within"),
    "rank-test": ("mann-whitney", "mann whitney", "wilcoxon", "kruskal", "friedman", "signed-rank", "signed rank",
                  "rank-sum", "rank sum", "nonparametric", "non-parametric"),
    "signed-ranks": ("signed-rank", "signed rank", "wilcoxon matched", "wilcoxon's matched", "paired wilcoxon", "wilcoxon paired",
                     "wilcoxon test for paired"),
    "spearman": ("spearman", "rank correlation", "rank-order correlation"),
    "partial": ("partial correlation", "partial r", "semi-partial", "semipartial", "part correlation"),
    "disattenuated": ("disattenuat", "corrected for attenuation", "corrected for unreliability", "latent variable",
                      "latent correlation", "latent factor"),
    "yates": ("yates' ", "yates's", "yates corr", "yates-corr", "yates cont", "continuity correct", "continuity-correct"),
    "uncorrected-chi2": ("without yates", "without continuity", "without a continuity", "no continuity correction",
                         "no yates", "uncorrected chi", "uncorrected pearson", "uncorrected χ"),
    "likelihood-ratio": ("likelihood ratio", "likelihood-ratio", "log-likelihood", "g-test", "deviance"),
    "fisher-exact": ("fisher's exact", "fisher exact", "fisher-exact", "fishers exact"),
    "multi-regression": ("multiple regression", "multiple linear regression", "multivariable", "multivariate regression",
                         "hierarchical regression", "stepwise regression", "regression model", "logistic regression",
                         "linear regression", "cox "),
    "model-fit": ("model fit", "rmsea", "cfi ", "srmr", "tli ", "structural equation", "confirmatory factor",
                  "measurement invariance", "path model", "fit indices", "nested model"),
    "effect-size-r": ("effect size r", "r effect size", "rosenthal"),
    "glass-delta": ("glass's", "glass' ", "glass delta", "glass δ"),
}  # fmt: skip

_ADJUSTING = (
    "bonferroni", "holm-", "holm correct", "holm's", "holm method", "holm adj", "holm post", "holm proc", "holm step",
    "tukey hsd", "tukey's", "tukey test", "tukey adj", "tukey-adj", "tukey corr", "tukey post", "tukey-kramer", "tukey method",
    "tukey multiple", "tukey's hsd", "sidak", "šidák", "scheff", "benjamini", "hochberg", "false discovery", "fdr",
    "family-wise", "familywise", "corrected for multiple", "adjusted for multiple", "correction for multiple",
    "corrections for multiple", "correcting for multiple", "adjusting for multiple", "multiple comparison correct",
    "adjusted p", "p-adjusted", "corrected p", "dunnett", "games-howell", "games howell", "newman-keuls", "dunn's",
    "corrected for the number of", "multiplicity", "adjustment for multiple", "hommel", "p-values were adjusted",
    "p values were adjusted", "p values were corrected", "p-values were corrected", "multiple-comparison correct",
)  # fmt: skip
_OF_PAIRS = ("tukey", "dunnett", "games", "newman", "dunn's")
"""Corrections that are made for comparisons of pairs alone: an omnibus F has none of them."""
_OF_TESTS = ("multiple", "family", "false", "type i", "spheric", "number of", "violation", "inflat")
_POST_HOC = ("post hoc", "post-hoc", "posthoc", "pairwise", "pair-wise", "follow-up", "followed up", "multiple comparison",
             "simple effect", "simple main effect", "subsequent comparison")  # fmt: skip
_NEGATIONS = (
    "no ",
    "not ",
    "without ",
    "nor ",
    "never ",
    "neither ",
    "rather than ",
    "instead of ",
    "un",
    "non-",
    "non",
)
_UNDONE = (" not applied", " not used", " not needed", " not necessary", " not required", " not performed", " not corrected",
           " not made", " not adjusted", " unnecessary")  # fmt: skip
_NEAR = 150
"""Characters around a correction within which post hoc comparisons are looked for: about a sentence."""


def stated(text: str) -> tuple[str, ...]:
    """Keys of `STATED` that the text says, in their order; negated ones are left out."""
    return _stated(text, background=False)


def background(text: str) -> tuple[str, ...]:
    """What a whole document says of all its tests.

    A word that speaks of something else is left out: permutations of clusters or features, the
    bootstrap of a mediation or of a tree, a Bayesian information criterion.
    """
    return _stated(text, background=True)


def pairs_alone(text: str) -> bool:
    """Whether all corrections that a text speaks of are made for comparisons of pairs alone (Tukey, Dunnett)."""
    text = _plain(text)
    made = [stem for stem in _ADJUSTING if next(_said(text, stem), None) is not None]
    return bool(made) and all(stem.startswith(_OF_PAIRS) for stem in made)


def _plain(text: str) -> str:
    return text.lower().replace("–", "-").replace("’", "'") + " "


def _stated(text: str, *, background: bool) -> tuple[str, ...]:
    text = _plain(text)
    starts = {word[:3] for word in text.translate(_APART).split()}
    by_start = _by_start()
    found = {
        key
        for start in starts.intersection(by_start)
        for key, stem in by_start[start]
        if any(not (background and _of_else(text, at, key)) for at in _said(text, stem))
    }
    if _ADJUSTED in found:
        found.remove(_ADJUSTED)
        found |= {_of_what(text, at, stem) for stem in _ADJUSTING for at in _said(text, stem)}
    return tuple(key for key in (*STEMS, "adjusted-p", "adjusted-p-post-hoc") if key in found)


_ADJUSTED = "adjusted"


_APART = str.maketrans(dict.fromkeys("-/()[]{}.,;:'\"“”*_=<>+%&", " "))


@cache
def _by_start() -> dict[str, list[tuple[str, str]]]:
    """All stems by the first letters of their first word: most texts have few of them."""
    table: dict[str, list[tuple[str, str]]] = {}
    for key, stems in (*STEMS.items(), (_ADJUSTED, _ADJUSTING)):
        for stem in stems:
            start = stem.translate(_APART).split()[0][:3]
            table.setdefault(start, []).append((key, stem))
    return table


def _said(text: str, stem: str) -> Iterator[int]:
    """Where the stem starts a word and is not negated."""
    at = text.find(stem)
    while at >= 0:
        starts = at == 0 or not text[at - 1].isalpha()
        negated = text[max(0, at - 14) : at].rstrip("-").endswith(_NEGATIONS)
        if starts and not negated and not _undone(text, at, stem):
            yield at
        at = text.find(stem, at + 1)


_ELSE = {
    "permutation": "cluster|importance|entropy|voxel|permanova|permutational multivariate|tfce|null model",
    "bootstrap": "indirect effect|mediat|aggregat|bagging|bootstrap support|phylogen|cross-valid|clades",
    "bayesian": "information criteri|bayesian optimi|bayesian network|bayes factor",
    "transformed": "fourier|wavelet|fisher|coordinates|figure|y-axis|x-axis",
}
"""What a word of the first column speaks of where one of the second stands in its sentence: not of the t tests."""
_OF_ALL = "p value|p-value|all test|all analys|all comparison|all stat|t test|t-test|f test|f-test|anova"


def _of_else(text: str, at: int, key: str) -> bool:
    """Whether the sentence around a word says that it speaks of something else than the tests."""
    if key not in _ELSE:
        return False
    sentence = text[text.rfind(". ", 0, at) + 1 : (text.find(". ", at) + 1 or len(text))]
    of_all = any(word in sentence for word in _OF_ALL.split("|"))
    return not of_all and any(word in sentence for word in _ELSE[key].split("|"))


def _of_what(text: str, at: int, stem: str) -> str:
    """Whether a correction is said of post hoc comparisons."""
    if stem.startswith(_OF_PAIRS):
        return "adjusted-p-post-hoc"
    near = text[max(0, at - _NEAR) : at + _NEAR]
    return "adjusted-p-post-hoc" if any(stem in near for stem in _POST_HOC) else "adjusted-p"


def _undone(text: str, at: int, stem: str) -> bool:
    """`Bonferroni correction was not applied` says that there is none; `adjusted for multiple tests` names no covariate."""
    rest = text[at + len(stem) : at + len(stem) + 45]
    clause = rest.split(".")[0].split(",")[0].split(";")[0]
    if stem.endswith(" for") and any(word in clause[:30] for word in _OF_TESTS):
        return True
    return any(word in clause for word in _UNDONE)
