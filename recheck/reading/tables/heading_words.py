"""Spellings that headings have besides words: spans such as `25th–75th percentile`, and what they stand for."""

from __future__ import annotations

from collections.abc import Sequence
from functools import cache

import regex

from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

QUALIFIERS = words(
    "adjusted unadjusted crude paired unpaired related unrelated independent student student's students welch welch's two one tailed sided "
    "tail value values statistic statistics test coefficient ratio of the and or in with for exact score total overall observed level "
    "their its a at multivariable multivariate univariate univariable standardized standardised unstandardized unstandardised "
    "pearson pearson's fisher fisher's asymptotic asymp sig raw mann whitney kruskal wallis wilcoxon anova log rank based on "
    "respectively as to group corrected bonferroni within each per mantel haenszel"
)
"""Words that may stand beside a symbol without naming anything."""
PEOPLE = words(
    "patients participants subjects individuals people persons respondents observations animals rats mice students "
    "volunteers bakers apprentices tasters panellists panelists loaves cases eyes samples specimens"
)
"""What a number of is a size: `Number of loaves`."""
FIRST = words(
    "mean means ls least emm emms em marginal estimated geometric gm average averages median interquartile inter odds hazard hazards risk rate relative adjusted aor ahr arr "
    "difference differences coefficient slope slopes standardized standardised unstandardized regression p coefficients"
)
"""Words that open a heading and say what its numbers are: `Mean age`."""
LAST = words(
    "mean means ls least emm emms em marginal estimated geometric adjusted median sd s.d sem se s.e std standard iqr range interquartile ci confidence or hr rr aor percent percentage "
    "percentages number average"
)
"""Words that do so at its end: `Loaf height SD`."""
UPPER = frozenset(("OR", "HR", "RR", "SE", "SD", "CI", "IRR", "PR", "ARR", "MD"))
"""Abbreviations that do so in capitals alone."""
UNITS = frozenset("gdhmslkWVTKJA")
"""Letters that are units behind a name."""
EFFECTS = words(
    "effect size sizes cohen cohen's hedges hedges' es test tests statistic wilcoxon mann whitney kruskal student student's"
)
"""Words before a letter that is an effect size or a statistic."""
KINDS = words(
    "group groups condition arm sample class site team type phase block batch study experiment panel cohort recipe plan dough flour "
    "form version school centre center cluster category stage level treatment line strain variety method plot test vitamin hepatitis"
)
"""Words whose letter names one of several: `Group B`."""


BARE = frozenset(
    ("t", "F", "z", "r", "chi2", "p", "d", "g", "or", "rr", "hr", "u", "w", "r2", "n", "N", "df")
)
"""Quantities that have no unit."""


@cache
def unit_alone() -> regex.Pattern[str]:
    """A unit in brackets and nothing else: `(bpm)`, `(mg/kg)`."""
    base = r"(?:[kcmμnpdMG]?(?:g|m|s|l|L|Hz|Pa|J|W|V|A|mol|M|B|N|K|T|eq|U|cal)|bpm|mmHg|min|hrs?|h|days?|d|weeks?|years?|yrs?|y|°C?|IU|beats|breaths|inch)"
    return regex.compile(rf"\({base}(?:[/·. ]?{base})?[\w/⁻¹²³ .·-]{{0,6}}\)")


def plain_words(text: str) -> str:
    """The heading with such spellings written as words that the table of symbols has."""
    for pattern, plain in _canonical():
        text = pattern.sub(plain, text, timeout=TIMEOUT)
    return text


@cache
def _canonical() -> tuple[tuple[regex.Pattern[str], str], ...]:
    """Spellings of spans that are not words: `25th–75th percentile`, `Q1, Q3`, `min–max`, `+/−`."""
    low = r"(?:25 ?(?:th|%)?|Q1|q1|P25|p25|(?:1st|[Ff]irst|[Ll]ower) quartile)(?: ?(?:percentiles?|centiles?|quartiles?))?"
    high = r"(?:75 ?(?:th|%)?|Q3|q3|P75|p75|(?:3rd|[Tt]hird|[Uu]pper) quartile)(?: ?(?:percentiles?|centiles?|quartiles?))?"
    join = r" ?(?:[-,;/:~≈]|to|and|&) ?"
    return (
        (regex.compile(r"\+ ?/ ?-|\+-|\(±\)"), "±"),
        (regex.compile(r"\b(?:M ?[/:] ?F|F ?[/:] ?M|m ?[/:] ?f|f ?[/:] ?m)\b"), "male/female"),
        (regex.compile(r"\b[XxMm](?=±| ±)"), "Mean "),
        (regex.compile(rf"\b{low}{join}(?:the )?{high}", regex.IGNORECASE), "IQR"),
        (
            regex.compile(
                rf"\b(?:min|minimum)\.?{join}(?:max|maximum)\b\.?|\blowest{join}highest\b", regex.IGNORECASE
            ),
            "range",
        ),
        (regex.compile(r"\b(?:Exp|exp|EXP) ?\( ?[BbβΒ] ?\)"), "ExpB"),
        (regex.compile(r"\bPr(?:ob)?\.? ?(?:\( ?)?> ?\|?(?:[tzF]|χ²|Chi ?Sq)\|?(?: ?\))?"), "p"),
        (regex.compile(r"\(([12])-t\)"), r"(\1-tailed)"),
        (regex.compile(r"\b[dD][fF]_?\(?(num|den|effect|error|between|within|residual)\b\)?"), r"df \1"),
        (regex.compile(r"\b(?:df|d\.f\.|DF)_?₁"), "df1"),
        (regex.compile(r"\b(?:df|d\.f\.|DF)_?₂"), "df2"),
        (regex.compile(r"(?<=\d) ?% ?(?:CI|C\.I\.|[Cc]onfidence [Ii]ntervals?)"), "% CI"),
        # French and German: `IC à 95 %`, `95 %-KI`.
        (
            regex.compile(r"\b(?:IC|KI) ?(?:à |de |zu )?(\d\d(?:[.,]\d)?) ?%|\b(\d\d) ?%[ -]?(?:KI|IC)\b"),
            r"\1\2% CI",
        ),
        (regex.compile(r"(?<=% CI) (?:for|of) (?:the )?(?:ExpB|OR|HR|RR)\b"), ""),
        # GenStat: sum of squares, mean square, variance ratio and the probability of F.
        (regex.compile(r"^s\.s\.$"), "SS"),
        (regex.compile(r"^m\.s\.$"), "MS"),
        (regex.compile(r"^v\.r\.$"), "F"),
        (regex.compile(r"^F ?pr(?:ob)?\.?$"), "p"),
        # Typed text lowers nothing.
        (regex.compile(r"^F ?(\d{1,2}),[ ]?(\d{1,4})$"), r"F(\1, \2)"),
        (regex.compile(r"\b[Vv]alid (?=%|[Pp]er ?cent)"), ""),
    )


_SPANS = {
    "shares": ("count", "total"),
    "iqr": ("q1", "q3"),
    "range": ("min", "max"),
    "ci": ("ci_low", "ci_high"),
}


def spelled_out(quantities: Sequence[str]) -> tuple[str, ...]:
    """Spans as their two ends, each quantity once; the end of a CI alone where it is named."""
    found: list[str] = []
    if len(set(quantities)) > 1:
        quantities = [q for q in quantities if q != "other"]
    if "mean_difference" in quantities and not _has_own_spread(quantities):
        quantities = [q for q in quantities if q != "mean"]
    if {"ci", "sd"} <= set(quantities) and {"b", "beta"} & set(quantities):
        # `β (SD) (95% CI)`: the unit of β, no number of its own.
        quantities = [q for q in quantities if q != "sd"]
    ends = {"ci_low", "ci_high"} & set(quantities)
    for quantity in quantities:
        if quantity == "ci" and ends:
            continue
        if quantity in ("low", "high"):
            if "ci" not in quantities and len(quantities) > 1:
                continue
            quantity = f"ci_{quantity}" if "ci" in quantities else quantity
        found += _SPANS.get(quantity, (quantity,))
    if {"low", "high"} & set(quantities) and "ci" in quantities:
        found = [q for q in found if q not in ("ci_low", "ci_high")]
        found += [f"ci_{q}" for q in quantities if q in ("low", "high")]
    return tuple(dict.fromkeys(found))


@cache
def _loose_ends() -> regex.Pattern[str]:
    return regex.compile(
        r"[(\[][\s,;:]*[)\]]|^[\s,;:)\]±*†‡§¶#-]+|[\s,;:(\[±*†‡§¶#-]+$|\s+(?=[)\],;:])|[,;:](?=\s*[,;:)\]])|(?<=[(\[])[\s,;:]+"
    )


def _has_own_spread(quantities: Sequence[str]) -> bool:
    """Whether a mean with its spread is told before a difference: `Mean (SD), mean difference`."""
    at = quantities.index("mean") if "mean" in quantities else len(quantities)
    return at < quantities.index("mean_difference") and bool({"sd", "se"} & set(quantities[at + 1 : at + 2]))


def tidied(text: str) -> str:
    """A name without the empty brackets, commas and marks that what was taken out leaves behind."""
    for _ in range(4):
        new = _loose_ends().sub("", text, timeout=TIMEOUT)
        if new == text:
            break
        text = new
    return " ".join(text.split())
