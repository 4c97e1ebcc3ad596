"""What looks like a result and is none: criteria, quantiles, plans, legends, examples, other people's results."""

from __future__ import annotations

from collections.abc import Callable

from recheck.reading.claims import Draft
from recheck.reading.items import Assignment
from recheck.reading.levels import level
from recheck.reading.quoting import Sentence, quoted, tested
from recheck.reading.tokens import words


def trapped(draft: Draft, sentence: Sentence) -> str | None:
    """Why the numbers are no result of this manuscript, a key of `notes.LEFT_OUT`; None where they are one."""
    for reason, trap in _TRAPS.items():
        if trap(draft, sentence):
            return reason
    return None


def _several(draft: Draft, sentence: Sentence) -> bool:
    core = (
        draft.part("statistic") or draft.part("centre", "estimate", "effect") or draft.part("p", "interval")
    )
    if core is None or core.several:
        return core is not None
    p = draft.get("p")
    if core is p and _of_many(draft, core):
        return True
    whole = bool(core.extra) and p is not None and p.printed.relation == "="
    told = draft.items[1:] if whole else draft.items
    if draft.part("statistic", "p") and any(draft.line.at(i.first - 1).low in _EXTREMES for i in told):
        return True
    before = {t.low for t in draft.line.tokens[max(0, draft.first - 3) : draft.first]}
    return core.printed.relation != "=" and bool(before & {"all", "both", "each", "every", "any", "always"})


def _of_many(draft: Draft, p: Assignment) -> bool:
    """A lone p that is the mean of several, or the bound of all comparisons told before it."""
    before = [t.low for t in draft.line.tokens[max(0, p.first - 14) : p.first]]
    if before[-1:] == ["mean"] or before[-1:] == ["average"]:
        return True
    if p.printed.relation == "=":
        return False
    told = " ".join(before)
    return any(f"{noun} of all" in told or f"all {noun}" in told for noun in _COMPARED)


_COMPARED = (
    "comparison",
    "comparisons",
    "pairwise comparisons",
    "pairs",
    "contrasts",
    "tests",
    "correlations",
)
_EXTREMES = words(
    "largest smallest highest lowest maximum minimum max min strongest weakest biggest maximal minimal"
)

_CRITICAL = (
    "critical",
    "crit",
    "cutoff",
    "threshold",
    "thresholds",
    "criterion",
    "quantile",
    "percentile",
    "cut-off",
)


def _critical(draft: Draft, sentence: Sentence) -> bool:
    """`t_crit = 2.13`, `the critical F(1, 40) is 4.08`, `a threshold of r = .30`."""
    if any(item.label.lower().startswith(("crit", "cut", "thresh", "tab")) for item in draft.items):
        return True
    before = [t.low for t in draft.line.tokens[max(0, draft.first - 8) : draft.first]]
    for stop in (",", ";", "(", "."):
        before = before[len(before) - before[::-1].index(stop) :] if stop in before else before
    return bool(set(before) & set(_CRITICAL)) or before[-1:] == ["than"]


def _legend(draft: Draft, sentence: Sentence) -> bool:
    """`* p < .05, ** p < .01`."""
    factor = draft.get("bf10", "bf01")
    if factor is not None and factor.printed.relation != "=" and draft.line.at(factor.after).text in _STARS:
        return True
    if draft.part("statistic", "estimate", "effect"):
        return False
    p = draft.get("p")
    if p is None:
        return False
    before, closer = draft.line.at(p.first - 1), draft.line.at(p.first - 2)
    if before.text in ("=", ":", ",") or before.low in _MEANING:
        return closer.text in _MARKS or closer.low in ("asterisk", "asterisks", "stars", "letters")
    first = closer.kind == "end" or closer.text in (";", ",", ".")
    if before.text in "abcdef" and before.kind == "word" and first and p.printed.relation != "=":
        return True
    return (
        before.text in _MARKS
        and before.kind != "word"
        and not (before.text in "+#" and before.spaced and draft.line.at(p.first).spaced)
    )


_MARKS = frozenset("*†‡§¶#+abc")
_STARS = frozenset("*†‡§¶#°/")
_MEANING = words("indicates indicate denotes denote represents represent means mean marks mark signifies")


_PLANS = (
    "power analys", "a priori", "a-priori", "sample size calc", "sample-size calc", "sample size estim", "g*power",
    "g power", "gpower", "sample size was", "to detect", "size of interest", "effect of interest", "required sample", "would need", "would be needed",
    "sample size needed", "planned sample", "detectable", "power calc", "statistical power", "80% power",
    "90% power", "95% power", "sample size just", "power of", "equivalence bound",
    "equivalence region", "smallest effect", "power to", "sensitivity power", "we expected",
    "expected effect", "anticipated", "minimum sample", "we assumed", "assuming a", "assuming d", "assumed a", "assumed effect",
    "assumed to be", "personal communication",
)  # fmt: skip
_EXAMPLES = ("for example, if", "for instance, if", "if for instance", "if for example", "if, for instance", "if, for example", "suppose ", "imagine ", "hypothetical example", "hypothetical data",
             "hypothetical stud", "hypothetical result", "would be reported as",
             "for illustration", "fictitious", "a random variable", "drawn from a", "sampled from a", "generated from",
             "generating", "normal distribution with", "prior distribution", "priors ", "gaussian")  # fmt: skip


def _planned(draft: Draft, sentence: Sentence) -> bool:
    """Values of a power analysis or of a simulation; tests with their df are results all the same."""
    if tested(draft) and draft.get("p"):
        return sentence.says(
            (
                "suppose ",
                "imagine ",
                "hypothetical example",
                "hypothetical data",
                "fictitious",
                "would be reported",
                "simulated data",
                "simulated sample",
                "simulated run",
                "in one run",
                "random draw",
                "such draws",
            )
        )
    if sentence.says(_EXAMPLES) or _simulated(sentence):
        return True
    return (
        sentence.says(_PLANS)
        and not draft.part("centre")
        and not (draft.get("t", "F", "chi2") and tested(draft))
    )


def _simulated(sentence: Sentence) -> bool:
    """Whether numbers are drawn by a computer; people who were trained in a simulation give results."""
    return sentence.says(("simulat",)) and not sentence.says(_SIMULATORS)


_SIMULATORS = (
    "simulation group", "simulation arm", "simulation training", "simulation-based", "simulation cent", "simulation session", "simulation course", "simulation class", "simulation condition", "simulation exercise",
    "simulation lab", "simulation suite", "simulation program", "simulation teaching", "simulator", "simulated patient", "simulated driving", "driving simulat", "flight simulat", "simulated work", "simulated shift",
)  # fmt: skip


_ASSUMPTIONS = ("shapiro", "kolmogorov", "levene", "mauchly", "bartlett", "box's m", "normality", "normal distribution", "normally distributed", "homogeneity of varian",
                "equality of varian", "sphericity was", "sphericity assumption", "lilliefors", "anderson-darling",
                "hosmer", "durbin")  # fmt: skip


def _assumption(draft: Draft, sentence: Sentence) -> bool:
    """A test of an assumption, where only its p or its W is printed."""
    return (
        not draft.get("t", "F", "chi2", "z", "r")
        and not draft.part("centre", "estimate")
        and sentence.says(_ASSUMPTIONS)
    )


_RULES_OF_THUMB = ("small", "medium", "large", "strong", "moderate", "weak", "threshold", "criteri", "considered", "rule of thumb",
                   "interpret", "defined", "benchmark", "guideline", "acceptable", "adequate", "good fit", "exceed",
                   "cut-off", "cutoff", "collinear", "exclud", "remov")  # fmt: skip


_CONVENTIONS = ("considered", "interpret", "threshold", "criteri", "defined", "convention", "jeffreys", "cutoff", "cut-off", "indicates",
                "values above", "values below", "denote", "taken as", "regarded", "until", "stopping", " as moderate", " as strong", " as evidence")  # fmt: skip


_DROPPING = ("outlier", "dropped", "were removed", "was removed", "were excluded", "was excluded", "discarded", "were retained",
             "we removed", "we excluded", "were kept", "excluding")  # fmt: skip


def _rule(draft: Draft, sentence: Sentence) -> bool:
    """`r > 0.7`, `small (d = 0.2), medium (d = 0.5)`: rules of thumb."""
    core = draft.part("statistic", "effect", "estimate")
    if (
        core is not None
        and core.quantity == "r"
        and (core.label in ("tt", "xx", "yy", "wg") or _with_unit(draft, core))
    ):
        return True
    if (
        draft.items[0].printed.relation in ("<", ">", "≤", "≥")
        and not draft.part("df")
        and sentence.says(_DROPPING)
    ):
        return not (core and core.extra)
    if core is None or draft.part("p", "interval", "df") or core.extra or draft.get("n", "N"):
        return False
    if core.printed.relation in (">", "≥", "≤") and core.part in ("effect", "estimate"):
        return core.quantity not in ("bf10", "bf01") or sentence.says(_CONVENTIONS)
    if core.quantity in ("bf10", "bf01") and core.printed.relation == "<":
        return sentence.says(_CONVENTIONS)
    if core.printed.relation in ("<", ">", "≤", "≥", "≈"):
        if core.quantity in ("F", "chi2", "t"):
            return core.printed.relation in (">", "≥")
        return sentence.says(_RULES_OF_THUMB)
    sizes = sum(word in sentence.low for word in ("small", "medium", "large", "moderate"))
    return (
        core.part == "effect"
        and sizes >= 2
        and sentence.says(
            (
                "cohen",
                "considered",
                "convention",
                "benchmark",
                "interpret",
                "respectively",
                "represent",
                "corresponds",
                "small (",
                "medium (",
            )
        )
    )


_UNITS = words("m cm mm km μm nm s ms min h g kg mg ml l hz khz years km/h mph pixels px deg degrees")


_RATERS = words("interrater rater intercoder coder intraclass reliability retest intrarater")


def _with_unit(draft: Draft, core: Assignment) -> bool:
    """`r = 0.033 m` is a radius, a worded `correlation of 14.1` no coefficient, agreement of raters no result."""
    if draft.line.at(core.first - 1).low in _RATERS or draft.line.at(core.first - 2).low in _RATERS:
        return True
    if core.printed.percent or draft.line.at(core.after).low in _UNITS:
        return True
    return core.loose and abs(core.printed.value) > 1


def _bayesian(draft: Draft, sentence: Sentence) -> bool:
    """Credible and other intervals that are no confidence intervals."""
    interval = draft.get("ci")
    if interval is None:
        return False
    return "bayesian" in interval.stated or (
        not draft.part("statistic", "p")
        and sentence.says(("credible", "posterior dist", "posterior mean", "hdi"))
    )


def _equation(draft: Draft, sentence: Sentence) -> bool:
    """`F = 2 × precision × recall`, `t1 = 12.5` (a time, not a test)."""
    core = draft.part("statistic")
    last = draft.items[-1]
    follows = draft.line.at(last.after).text
    if follows in ("+", "×", "/", "^", "√", "∑") and draft.line.at(last.after + 1).kind in (
        "word",
        "num",
        "sign",
    ):
        return True
    if core is not None and core.quantity == "t" and not draft.get("p") and core.extra:
        return core.extra[0][1].value <= 3 and draft.line.at(core.first + 1).text.isdigit()
    return False


def _condition(draft: Draft, sentence: Sentence) -> bool:
    """`at 25 ± 1 °C`: a setting with its tolerance, no sample."""
    mean = draft.get("mean")
    if mean is None or not mean.loose or draft.get("n", "N"):
        return False
    line = draft.line
    after = "".join(t.text for t in line.tokens[draft.after : draft.after + 3])
    before = line.at(draft.first - 1).low
    if any(token.low == "ph" for token in line.tokens[max(0, draft.first - 4) : draft.first]):
        return True
    return after.startswith(("°", "º", "℃", "C,", "rpm", "Hz", "psi", "bar", "pH")) or before in (
        "ph",
        "at",
        "temperature",
    )


_CURVES = ("linkage diseq", "(ld)", " ld ", "in ld", "snp", "standard curve", "calibration", "y-intercept", "trend line", "trendline",
           "dilution")  # fmt: skip
_AGREEING = (
    "agree",
    "rater",
    "coder",
    "reliab",
    "kappa",
    "concord",
    "observer",
    "kendall",
    "correl",
    "consisten",
    "reader",
    "cohen",
    "fleiss",
)


def _curve(draft: Draft, sentence: Sentence) -> bool:
    """R² of a calibration or of linkage between genes, that of 0 or 1, and letters that stand for constants: no results."""
    core = draft.part("effect")
    if core is None or draft.part("statistic", "p", "interval", "centre"):
        return False
    if core.quantity == "r2":
        return sentence.says(_CURVES) or core.printed.value in (0, 1)
    return core.quantity in ("kappa", "tau") and not sentence.says(_AGREEING)


_TRAPS: dict[str, Callable[[Draft, Sentence], bool]] = {
    "several": _several,
    "legend": _legend,
    "critical": _critical,
    "level": level,
    "plan": _planned,
    "assumption": _assumption,
    "rule": _rule,
    "credible": _bayesian,
    "equation": _equation,
    "curve": _curve,
    "setting": _condition,
    "other study": quoted,
}
