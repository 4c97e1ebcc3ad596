"""The symbols that manuscripts print, with all their spellings, and the quantities they stand for."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache, lru_cache
from typing import Literal

from recheck.reading.tokens import words

Part = Literal[
    "statistic", "centre", "spread", "estimate", "effect", "p", "size", "df", "interval", "count", "other"
]
"""What a quantity does in a claim: `centre` is a mean or median, `size` an n, `estimate` a coefficient,
a difference or a ratio, `effect` an effect size, `other` what stands beside a result and is no result."""


@dataclass(frozen=True, slots=True)
class Symbol:
    """What a spelling stands for.

    `several` marks plurals (`ps`, `Fs`), that tell of several results at once; `bare` allows a number
    without a relation (`SD 1.2`, `OR 1.5`); `worded` allows words before the number (`mean of 3.9`).
    `stated` holds what the spelling itself says of the claim.
    """

    quantity: str
    part: Part
    stated: tuple[str, ...] = ()
    several: bool = False
    bare: bool = False
    worded: bool = False


def _family(part: Part, *, stated: tuple[str, ...] = (), bare: bool = False, worded: bool = False,
            several: bool = False, **spellings: str) -> list[tuple[str, Symbol]]:  # fmt: skip
    """One row a spelling; spellings are divided by `|`."""
    return [
        (text, Symbol(quantity.rstrip("_"), part, stated, several, bare, worded))
        for quantity, texts in spellings.items()
        for text in texts.split("|")
    ]


# Words of up to three letters, or with a capital inside, are taken with their case, longer ones in any case.
# A hyphen may stand for a space, and a possessive s is passed over. Squares (`η²`, `R2`), subscripts (`η²p`,
# `r_s`, `d_z`) and numbers (`df1`, `BF10`) are read after the name, not listed here.
SPELLINGS: list[tuple[str, Symbol]] = [
    *_family("statistic", stated=("paired",), t="tpaired|tpair"),
    *_family("statistic", stated=("welch",), t="tWelch|twelch|Welch t"),
    *_family("statistic", t="t|T|tStudent|tstudent|Student t|t value|t statistic|t test|t ratio|t score"),
    *_family(
        "statistic",
        F="F|f|F value|F statistic|F test|F ratio|ANOVA F",
        chi2="chi square|chi squared|Chi square|Chi squared|Chi sq|chisq|chi sq|chisquare|khi|X|x|v|c|w|χ|chi|Chi"
        "|Wald χ|Pearson χ|Wald|Wald statistic|K|K squared|Bartlett K|Bartlett K squared|Bartlett χ",
        z="z|Z|z value|z statistic|z score|Wald z|Wald Z|z test|z ratio",
        r="r|R|Pearson r",
        u="U|Mann-Whitney U",
        w="W|Wilcoxon W|V",
    ),
    *_family(
        "statistic",
        bare=True,
        worded=True,
        r="Pearson correlation|Pearson correlation coefficient|correlation coefficient|correlation",
    ),
    *_family("statistic", chi2="Q|QM|QE|Qm|Qe|QB|QW|Qb|Qw|Qbetween|Qwithin"),
    *_family("statistic", stated=("rank-test",), chi2="Cochran Q|Cochrans Q"),
    *_family("statistic", stated=("rank-test",), chi2="H|Kruskal-Wallis H|Kruskal-Wallis χ"),
    *_family("statistic", stated=("likelihood-ratio",), chi2="G|LR χ|likelihood ratio χ"),
    *_family("statistic", stated=("model-fit",), chi2="Δχ"),
    *_family("statistic", stated=("model-step",), F="ΔF|Fchange|F change|Fchg|F chg|F for change|Finc|change in F|incremental F"),
    *_family(
        "statistic",
        stated=("spearman",),
        r="rs|rS|ρ|rho|Spearman r|Spearman rho|Spearman ρ|Spearman rs|Spearman correlation|Spearman rank correlation"
        "|Spearman correlation coefficient|Spearman rank correlation coefficient|rank correlation coefficient",
    ),
    *_family("statistic", several=True, t="ts|t's|t values", F="Fs|F's|F values", chi2="χs",
             z="zs|Zs|z values|z scores", r="correlations|correlation coefficients|Rs|r's"),
    *_family("p", p="p|P|p value|P value|pvalue|p val|sig|Sig|probability value", bare=True),
    *_family(
        "p",
        stated=("adjusted-p",),
        p="padj|pbonf|pBonf|pBonferroni|ptukey|pTukey|pholm|pHolm|pfdr|pFDR|pcorr|pcorrected|pcor|adjusted p|corrected p"
        "|adjusted p value|corrected p value|Bonferroni-corrected p|Bonferroni p"
        "|Tukey p|Holm p|FDR p|pFWE|pFWER|pHB",
    ),
    *_family("p", several=True, p="ps|Ps|p's|P's|p values|P values|pvalues"),
    *_family("centre", mean="M|EMM|x̄|X̄|x̅|X̅|ȳ|Ȳ|mean|average|mean value|mean score|mean age|M age", bare=True, worded=True),
    *_family("centre", median="Mdn|Md|median|Median", bare=True, worded=True),
    *_family("centre", several=True, mean="Ms|M's|means|averages|mean values|mean scores", median="medians|Mdns"),
    *_family(
        "spread",
        bare=True,
        worded=True,
        sd="SD|Sd|sd|StD|St Dev|StDev|std|standard deviation|std dev|stdev|σ",
        se="SE|SEM|se|sem|SEs|Se|StdErr|standard error|standard error of the mean|standard error of mean|std error|std err",
    ),
    # ET, DE, DT, DS, DP, MW: French, Spanish, Italian, Portuguese and German manuscripts.
    *_family("spread", sd="ET|DE|DT|DS|DP|écart-type|écart type|desviación estándar|desviación típica|desvio padrão"
             "|Standardabweichung|Deviazione standard"),
    *_family("centre", mean="MW|moyenne|Mittelwert|media|média|promedio"),
    *_family("spread", se="SE B|SE b|SE β|SEB|SEb|SE beta|SE of b|SE of B|SE of the slope|SE of the mean"),
    *_family("spread", several=True, sd="SDs|standard deviations|sds", se="SEMs|standard errors"),
    *_family("spread", se_difference="SED|SEdiff|SE diff|standard error of the difference"),
    *_family("size", n="n", N="N"),
    *_family("size", several=True, n="ns", N="Ns"),
    *_family("df", df="df|DF|degrees of freedom|degree of freedom|dof", df1="dfn", df2="dfd"),
    *_family("df", several=True, df="dfs"),
    *_family(
        "estimate",
        bare=True,
        or_="OR|aOR|AOR|ORadj|crude OR|OR adj",
        rr="RR|aRR|ARR|IRR|PR|adjusted RR",
        hr="HR|aHR|AHR",
        mean_difference="MD|Mdiff|MDiff|MD diff|difference of means"
        "|difference|mean of the differences|mean of differences|difference between means|mean differences|M diff|MDdiff|diff|Diff"
        "|difference in mean|ΔM",
    ),
    *_family(
        "estimate",
        bare=True,
        worded=True,
        or_="odds ratio|adjusted odds ratio|crude odds ratio|unadjusted odds ratio",
        rr="risk ratio|relative risk|rate ratio|prevalence ratio|incidence rate ratio|adjusted relative risk|adjusted risk ratio",
        hr="hazard ratio|hazards ratio|adjusted hazard ratio",
        rd="risk difference",
    ),
    *_family("estimate", bare=True, worded=True, mean_difference="mean difference|difference in means|mean diff"
             "|mean change|average change|mean increase|mean decrease|mean gain|mean reduction|mean improvement"),
    *_family("estimate", bare=True, b="estimated coefficient|regression coefficient|path coefficient|estimated slope"),
    *_family("estimate", b="b|B|coefficient|coef|slope", estimate="Estimate|estimate|est|Est", beta="β|beta|Beta|bs", intercept="intercept"),
    *_family("estimate", several=True, b="Bs", beta="βs|betas", or_="ORs|odds ratios", hr="HRs|hazard ratios", rr="RRs"),
    *_family(
        "effect",
        d="d|Cohen d|Cohens d|ds|effect size d|Cohen ds",
        d_z="dz|Cohen dz|dZ",
        d_av="dav|Cohen dav",
        d_rm="drm|Cohen drm",
        g="g|Hedges g|Hedge g|gs|ghedges",
        eta2="h|eta squared|η|eta",
        partial_eta2="partial eta squared|ηp|pη|partial η|eta p|np|pes"
        "|partial eta|ηP|ηpartial|gp|hp|ɳp|ŋp|ῃp",
        generalized_eta2="generalized eta squared|generalised eta squared"
        "|ηG|ηg|ges|generalized η|generalised η|eta G|gG|hG",
        omega2="omega squared|omega|ω|ωp|partial ω|partial omega squared",
        epsilon2="epsilon squared|epsilon|ε",
        f="Cohen f",
        r_pb="rpb|point-biserial r|point biserial r",
        phi="φ|phi|phi coefficient",
        cramers_v="Cramer V|Cramér V|Cramers V|Cramer φ|Cramér φ|φc|φC",
        r2="R squared|R square|r squared|Rsq|RSquared|coefficient of determination",
        adjusted_r2="adjusted R squared|adjusted R square|Radj|adjusted R|adj R",
        delta="Glass Δ|Glass delta",
    ),
    *_family("effect", stated=("pseudo-r2",), r2="Nagelkerke R|Nagelkerkes R|pseudo R|pseudo R squared|McFadden R|McFadden pseudo R|Cox and Snell R"
             "|Tjur R|marginal R|conditional R"),
    *_family("effect", stated=("model-step",), delta_r2="ΔR|ΔR squared|ΔR square|R squared change|R square change|change in R|change in R squared|increment in R|incremental R|Rchange"),
    *_family("effect", several=True, partial_eta2="ηps|ηs"),
    *_family(
        "effect",
        bare=True,
        worded=True,
        auc="AUC|AUROC|AUCs|area under the curve|area under the ROC curve|area under curve|area under the receiver operating characteristic curve"
        "|area under the receiver operating curve|C statistic|c statistic|C index|c index|concordance index",
        icc="ICC|ICCs|intraclass correlation|intraclass correlation coefficient|intra-class correlation|intraclass r|intraclass coefficient"
        "|intra-class correlation coefficient|intra-class coefficient",
        kappa="κ|kappa|Cohen kappa|Cohens kappa|Cohen κ|Fleiss kappa|Fleiss κ|weighted kappa|weighted κ|kappa value|kappa coefficient"
        "|kappa statistic|k value|k statistic|κ value|κ coefficient|κ statistic|kappa score",
        tau="τ|Kendall tau|Kendall τ|Kendall rank correlation|Kendall rank correlation coefficient",
        bf10="BF|Bayes factor",
    ),
    *_family("effect", several=True, bf10="BFs|Bayes factors"),
    *_family("effect", tau="τb|tau|tau b|Kendall tau b|Kendall τb|Kendall τ b"),
    *_family("other", mse="MSE|MSe|mean square error|mean squared error|mean square"),
    *_family("other", several=True, mse="MSEs"),
    *_family("other", alpha="α|alpha|significance level", power="power"),
    *_family(
        "other",
        other="AIC|BIC|CFI|TLI|RMSEA|SRMR|NFI|GFI|VIF|λ|lambda|Λ|I|MS|SS|rtt|KR|test-retest r"
        "|concordance correlation|concordance correlation coefficient"
        "|canonical correlation|multiple correlation|Matthews correlation coefficient|cophenetic correlation"
        "|pMCMC|logBF|RT|ER|C|D|S|A|E|L|J|k|m|y|q|ELPD|LOOIC|PPV|NPV|sensitivity|specificity",
    ),
    *_family("interval", ci="CI|CIs|IC|KI|confidence interval|confidence limits|confidence intervals|CI's|Conf Int|conf int"),
    *_family("interval", stated=("bayesian",), ci="CrI|CrIs|HDI|HDIs|HPD|HPDI|HPDs|credible interval|credible intervals|PI"
             "|highest density interval|credibility interval|posterior interval|ETI|CRI|PPI|UI"
             "|prediction interval|limits of agreement|LoA|tolerance interval|reference range|CrL"),
    *_family("interval", range="range|Range|age range|ranging|range of"),
    *_family("interval", iqr="IQR|interquartile range|inter-quartile range|quartiles|interquartile interval"),
]  # fmt: skip


# What only the headings of tables say: a word such as `No.` or `Number` is no symbol in prose.
HEADINGS: list[tuple[str, Symbol]] = [
    *_family("size", n="No|no|Nr|nr|Num|number|numbers|sample size|obs|observations|total n|total N|n obs|valid N|valid n",
             count="count|counts|frequency|freq|absolute frequency|absolute number|Häufigkeit|Anzahl|effectif|effectifs",
             percent="percent|per cent|percentage|percentages|pct|relative frequency|Prozent|pourcentage"),
    *_family("centre", stated=("marginal",), mean="LS mean|LS means|least squares mean|least squares means|EMM|EMMs|marginal mean|marginal means"
             "|estimated marginal mean|estimated marginal means|EM mean|EM means"),
    *_family("centre", stated=("covariate-adjusted",), mean="adjusted mean|adjusted means"),
    *_family("centre", stated=("transformed",), mean="geometric mean|geometric means|GM"),
    *_family("centre", mean="Mean|means|averages|X̅|x̅|Mean value|mean values|mean scores", median="medians"),
    *_family("spread", sd="standard deviations|SDs|Std|Std Dev|Std dev|Std Deviation|Std Dev", se="standard errors|SEs|Std err|Std Err|Std Error|Std Error Mean|S E"),
    *_family("interval", q1="first quartile|lower quartile", q3="third quartile|upper quartile",
             min="min|Min|minimum|lowest", max="max|Max|maximum|highest",
             ci_low="LL|LCL|lower limit|lower bound|LLCI|CI low|CI lower|lower CI|low CI|CI LL|lower CL|LB|LCI",
             ci_high="UL|UCL|upper limit|upper bound|ULCI|CI high|CI upper|upper CI|high CI|CI UL|upper CL|UB|UCI",
             low="lower|low|Low|from", high="upper|high|to",
             ci="CIs|confidence intervals|C I|conf interval|CL|confidence limits"),
    *_family("p", p="p values|P values|probability|significance|Pr|sig level|Prob|asymp sig|exact sig|p level|P level"),
    *_family("p", stated=("permutation",), p="p perm|P perm|p permutation|Pperm|pperm|P(perm)|p MC|P MC"),
    *_family("statistic", F="F values|F statistics", t="t values|t statistics|tvalue|t stat|t Stat", chi2="χ value|chi square value"
             "|Pearson chi square|chi square statistic|χ statistic|Wald χ value",
             z="z values|Z value|Z score|Z statistic|z stat", u="U value|U statistic"),
    *_family("estimate", b="unstandardized coefficient|unstandardised coefficient|regression coefficient|coefficients|coeff|slopes"
             "|unstandardized B|unstandardised B|unstandardized b|regression coefficients|B coefficient|b coefficient|slope of regression line",
             beta="standardized coefficient|standardised coefficient|standardized beta|standardised beta|standardized coefficients"
             "|β coefficient|beta coefficient|std beta|standardized β|standardised β|Std Coef|β value",
             estimate="estimates|parameter estimate|parameter estimates|effect estimate|point estimate|coefficient estimate",
             or_="ORa|OR a|adj OR|OR crude|Exp B|ExpB", hr="HRs|adj HR|HR adj", rr="RRs|adj RR",
             mean_difference="differences|mean differences|difference between groups|between group difference|group difference"
             "|adjusted mean difference|adjusted difference|WMD"),
    *_family("other", ss="SS|sum of squares|Sum of squares|sums of squares|type III sum of squares|Type III sum of squares|type III SS|type II SS|type I SS|Sum Sq|SSQ|Seq SS|Adj SS|adjusted SS|sequential SS",
             ms="MS|mean square|mean squares|Mean Sq|Adj MS|Seq MS|adjusted MS"),
    *_family("df", df="d f|Df|degrees freedom|DFs", df1="num df|numDF|Num df|Num DF|numerator df|NumDF|df num|df numerator|NDF|ndf|df between|hypothesis df"
             "|df effect|df hypothesis|effect df", df2="den df|denDF|Den df|Den DF|denominator df|DenDF|df den|df denominator|DDF|ddf|df within|error df|df error"
             "|residual df|df residual"),
    *_family("effect", partial_eta2="partial η|ηp|partial eta squared", d="Cohen d|effect size d|ES d", other="effect size|ES|SMD|standardized mean difference|standardised mean difference|standardized difference|standardised difference"),
]  # fmt: skip


@cache
def _headings() -> tuple[dict[tuple[str, ...], Symbol], int]:
    exact = {
        tuple(key_of(word) for word in text.replace("-", " ").split()): symbol for text, symbol in HEADINGS
    }
    return exact, max(len(key) for key in exact)


def heading(words: tuple[str, ...]) -> Symbol | None:
    """The symbol that exactly this spelling stands for in headings of tables alone."""
    found, longest = _headings()
    return found.get(tuple(key_of(word) for word in words)) if len(words) <= longest else None


GLUED = ("Mean", "EMM", "SEM", "SD", "SE", "M")
"""Symbols that stand in front of a word without a space where the word was a subscript: `Mage`, `SDcontrol`."""

_NO_SUBSCRIPTS = words(
    "en an ale ales odel odels ass ax ay ost ore inimum aximum ost onth onths onday ethod ethods easure easures "
    "ixed edian iddle ode oderate other others arch id il ild eta ulti ultiple aterial aterials ajor inor any "
    "icro acro emory orning ind is et ix ole iss aster ajority agnitude ean eans dn d s se ix ap atch ae ade ake "
    "at ark"
)


@cache
def _lexicon() -> tuple[dict[tuple[str, ...], Symbol], dict[str, int]]:
    """Spellings as tuples of words, and for each first word the length of its longest spelling."""
    exact: dict[tuple[str, ...], Symbol] = {}
    longest: dict[str, int] = {}
    for text, symbol in SPELLINGS:
        words = tuple(text.replace("-", " ").replace("–", " ").split())
        key = tuple(key_of(word) for word in words)
        exact[key] = symbol
        longest[key[0]] = max(longest.get(key[0], 0), len(key))
    return exact, longest


@lru_cache(maxsize=8192)
def key_of(word: str) -> str:
    """The form under which a word is looked up: short ones with their case, long ones without."""
    word = word.replace(".", "")
    if len(word) > 3 and word.endswith(("'s", "'")):
        word = word.rstrip("s").rstrip("'")
    return word if len(word) <= 3 or word[1:] != word[1:].lower() else word.lower()


def longest_spelling(word: str) -> int:
    """How many words the longest spelling has that starts with this one; 0 if none does."""
    return _lexicon()[1].get(key_of(word), 0)


def find(words: tuple[str, ...]) -> Symbol | None:
    """The symbol with exactly this spelling."""
    return _lexicon()[0].get(tuple(key_of(word) for word in words))


def glued(word: str) -> tuple[Symbol, str] | None:
    """A symbol with its subscript printed as one word: `Mage`, `SDage`, `MRye`; no abbreviation (`MAF`)."""
    if word[0] not in "MSE" or not word.isalpha():
        return None
    for head in GLUED:
        tail = word[len(head) :]
        if (
            not tail
            or not word.startswith(head)
            or tail[1:] != tail[1:].lower()
            or (len(tail) < 3 and tail[0].isupper())
        ):
            continue
        symbol = None if head == "M" and tail.lower() in _NO_SUBSCRIPTS else find((head,))
        if symbol:
            return symbol, tail
    return None
