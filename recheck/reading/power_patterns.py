"""The spellings of a power statement: one table of patterns, each with what its number is.

Patterns read a sentence of a `View`. `v` is the number of the role, `g` a number that may be a word.
They are tried in this order, and a number belongs to the first that takes it.
"""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

import regex

NUMBER = r"(?<![\p{L}\d.,])(?:\d{1,3}(?:,\d{3})+(?!\d)|\d+(?:[.,·]\d+)?(?![\d])|(?<!\d)[.·]\d+)(?:\ ?%|\ ?per\ ?cent\b)?+"
_V = rf"(?P<v>{NUMBER})"
COUNTED = ("one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten")
_COUNT = rf"(?:{'|'.join(COUNTED)}|\d{{1,2}})"
_G = rf"(?P<g>{'|'.join(COUNTED)}|\d{{1,2}})"
_ONES = r"one|two|three|four|five|six|seven|eight|nine"
_TENS = r"twenty|thirty|forty|fifty|sixty|seventy|eighty|ninety"
_BELOW_100 = rf"(?:(?:{_TENS})(?:[\ -](?:{_ONES}))?|ten|eleven|twelve|(?:thir|four|fif|six|seven|eigh|nine)teen|{_ONES})"
IN_WORDS = (
    rf"(?<![\p{{L}}-])(?i:(?:(?:a|{_ONES})\ hundred(?:\ (?:and\ )?{_BELOW_100})?|{_BELOW_100}))(?![\p{{L}}-])"
)
_N = rf"(?:{_V}|(?P<w>{IN_WORDS}))"
LINKS = (
    r"(?:[\ ,]*(?:=|:|≥|>|≤|<|≈|of|was|were|is|are|at|to|level|set|being|as|about|approximately|around|least|equal|equals|fixed"
    r"|desired|minimum|estimated|estimate|assumed|a|an|the|be|kept|held|value|criterion|threshold|rate|probability|prob\.?|error|err"
    r"|up|more|greater|than|exceeding|over|only|roughly|some|for)(?![\p{L}])){0,6}[\ ,(\[]{0,2}"
)
_TAILS = r"(?:[\ (]{0,2}(?:two|one|2|1)[\ -](?:sided|tailed)\)?)?"
_OF_POWER = (
    r"(?:\ ?[(\[,]?\ ?(?:1\ ?-\ ?β|1\ ?-\ ?beta|β|beta)(?:\ err(?:or)?\ prob(?:ability)?\.?)?[)\],]?)?"
)
_OF_ALPHA = r"(?:\ ?[(\[,]?\ ?(?:α|alpha)(?:\ err(?:or)?\ prob(?:ability)?\.?)?[)\],]?)?"

_PEOPLE = (
    r"(?:participants?|subjects?|patients?|people|persons?|individuals|volunteers|adults|children|students|respondents|apprentices"
    r"|bakers|tasters|loaves|doughs?|batches|women|men|cases|observations|animals|mice|rats|pairs|dyads|responses|users|workers"
    r"|teachers|pupils|families|eyes|teeth|hips|knees|units|replicates|samples|rolls|starters|panellists|panelists|judges|controls)"
)
_WHO = r"(?:\ (?!of\b|and\b|or\b|to\b|with\b|for\b|in\b|were\b|was\b|per\b|each\b|we\b|points?\b|weeks?\b|days?\b|months?\b|years?\b)[\p{L}-]{2,20}){0,3}"
_GROUP = r"(?:treatment\ |study\ |experimental\ |randomi[sz]ed\ )?(?:groups?|arms?|conditions?|cells?|samples?|recipes?|ovens?|flours?|treatments?|batch|teams?|cohorts?|centres?\ and\ arm)\b"
_IN_ONE = rf"(?:\ [\p{{L}}-]+){{0,3}}?\ (?:in|to|for|on)\ (?:the\ |an?\ )[\p{{L}}-]+(?:\ [\p{{L}}-]+)?(?:\ {_GROUP})?"
_IN_OTHER = (
    rf"(?:\ [\p{{L}}-]+){{0,3}}?\ (?:in|to|for|on)\ (?:the\ |an?\ )(?:[\p{{L}}-]+\ ){{0,2}}(?:{_GROUP}|one\b)"
)
_AND = r"(?:,?\ and\ |\ vs\.?\ |\ versus\ )(?:at\ least\ )?"
_NEEDED = r"(?:needed|required|necessary|sufficient|adequate|enough|requested|called\ for|suggested|recommended|indicated|planned|to\ be)"

ROLES: tuple[tuple[str, str], ...] = (
    # What belongs to no power statement although it looks so.
    ("aside", rf"{_V}(?=\ ?/\ ?\d{{1,3}}\ ?=)"),
    ("aside", rf"\b(?i:noncentrality|critical)\b[^;,.=]{{0,25}}=\ ?{_V}"),
    ("aside", rf"\b(?i:actual)\ power{LINKS}{_V}"),
    ("aside", rf"{_V}\ ?(?:%|per\ cent)?(?:\ or\ more|\ expected|\ anticipated|\ possible)?\ (?:drop-?\ ?outs?|attrition|loss|losses|lost|withdraw\w*|non-?\ ?(?:response|compliance|adherence)|exclu\w+|oversampling|missing)"),
    ("aside", rf"(?:drop-?\ ?outs?|attrition|loss(?:es)?\ to\ follow-?\ ?up|withdrawals?|exclusions?|non-?response|missing\ data|inflat\w+|oversampl\w+)(?:\ \(?rates?\)?|\ proportion)?{LINKS}{_V}"),
    ("aside", rf"(?:confidence\ intervals?|\bCIs?|version|v\.)[\ ,=:]{{0,3}}[(\[]?{_V}"),
    ("aside", rf"{_V}\ (?:confidence\ intervals?|CIs?\b)"),
    # Power.
    ("beta", rf"(?<!1\ -\ )(?<!1-)(?<!1\ -)(?:\btype[\ -](?:ii|II|2)\ error(?:\ rate|\ probability)?{_OF_POWER}|(?<![\p{{L}}])β(?:\ err(?:or)?\ prob(?:ability)?\.?)?|\bbeta(?![\p{{L}}]))\ ?(?:=|of|was|is|set\ (?:at|to)|at|:|\ )\ ?{_V}"),
    ("power", rf"\b(?i:power(?:ed)?)(?:\ levels?|\ analysis\ with)?(?:\ (?:of|for)\ (?:the|this|our|an?|each)(?:\ [\p{{L}}-]+){{1,5}}?)?{_OF_POWER}{LINKS}{_V}(?!\ (?:(?:two|one)-|significance|level|alpha|α|type))"),
    ("power", rf"\b(?i:power)\ (?:of|for|to)\ (?:[^.;,()]|[.,]\d){{1,70}}?\ (?:was|is|were|would\ be|equalled|amounted\ to)(?:\ (?:only|just|about|approximately|thus|at\ least|over|above))?\ {_V}"),
    ("power", rf"{_V}(?:\ or\ (?:more|greater|higher|better))?[\ -](?:\(?statistical\)?\ |nominal\ |target\ )?power\b"),
    ("power", rf"(?<![\p{{L}}])1\ ?-\ ?(?:β|beta)(?:\ err(?:or)?\ prob(?:ability)?\.?)?\)?\ ?[=:]?\ ?(?:of\ )?{_V}"),
    ("power", rf"{_V}\ (?:chance|probability|likelihood)\ (?:of|to|that)\ (?:detect|find|reject|show)"),
    ("power", rf"\bwith\ (?:a\ )?probability\ of\ (?:at\ least\ )?{_V}(?=[^.]{{0,80}}$|\ to\ detect|,)"),
    # The level.
    ("alpha", rf"(?<![\p{{L}}])(?:α|[Aa]lpha|[Ss]ignificance)(?:[\ -]level)?{LINKS}[.\d]+\ ?/\ ?\d{{1,3}}\ ?=\ ?{_V}"),
    ("alpha", rf"(?<![\p{{L}}])(?:α|[Aa]lpha)(?:[\ -](?:level|error|value|err))?(?:\ prob(?:ability)?\.?)?{_TAILS}{LINKS}{_V}"),
    ("alpha", rf"\b(?i:significance)(?:[\ -](?:level|threshold|criterion))?{_OF_ALPHA}{_TAILS}{LINKS}{_V}"),
    ("alpha", rf"\b(?i:level)\ of\ (?:statistical\ )?significance{_OF_ALPHA}{_TAILS}{LINKS}{_V}"),
    ("alpha", rf"\b(?i:type)[\ -](?:i|I|1)[\ -]error(?:\ rate|\ probability)?{_OF_ALPHA}{_TAILS}{LINKS}{_V}"),
    ("alpha", rf"{_V}{_TAILS}[\ -](?:\(?α\)?\ |alpha\ |significance\ |probability\ )?(?:significance|level|alpha|type[\ -](?:I|1|i)\ error)\b"),
    ("alpha", rf"(?<![\p{{L}}])[pP](?:[\ -]values?)?\ ?(?:<|=|≤|of|at)\ ?{_V}"),
    ("confidence", rf"{_V}\ (?:level\ of\ )?confidence\b"),
    ("confidence", rf"\bconfidence(?:\ level)?{LINKS}{_V}"),
    # The design.
    ("df1", rf"\bnumerator(?:\ df|\ degrees\ of\ freedom)?{LINKS}{_V}"),
    ("df", rf"{_V}\ degrees?\ of\ freedom"),
    ("df", rf"\b(?:df|degrees\ of\ freedom)\ ?(?:=|of|:)?\ ?{_V}"),
    ("predictors", rf"\b(?:predictors|covariates\ and\ predictors)\ ?(?:=|:)\ ?{_V}"),
    ("predictors", rf"\bnumber\ of\ (?:tested\ )?(?:predictors|independent\ variables){LINKS}{_V}"),
    ("predictors", rf"{_G}\ (?:tested\ |independent\ |continuous\ )?(?:predictors?|predictor\ variables?|independent\ variables?|explanatory\ variables?)\b"),
    ("k", rf"\b(?:number\ of\ groups|groups|k)\ ?(?:=|:)\ ?{_V}"),
    ("k", rf"\bnumber\ of\ (?:groups|conditions|arms){LINKS}{_V}"),
    ("k", rf"{_G}\ (?:independent\ |equal(?:ly\ sized)?\ |parallel\ |experimental\ |between-subjects?\ |separate\ |treatment\ |study\ )*(?:groups|conditions|arms|levels)\b"),
    ("ratio", rf"(?:{_V}\ ?[:∶]\ ?1\b)(?!\d)|\b1\ ?[:∶]\ ?{_V}(?=\ (?:allocation|ratio|randomi))|\ballocation\ ratio(?:\ N2/N1)?\ ?(?:=|of)\ ?{_V}"),
    # The effect.
    ("d_z", rf"(?<![\p{{L}}'])(?:Cohen's\ )?d_?z\)?\ ?{LINKS}{_V}"),
    ("d", rf"(?<![\p{{L}}'])(?:Cohen's\ )?d(?:_?(?:s|av|rm))?\)?\ ?{LINKS}{_V}"),
    ("delta", rf"(?<![\p{{L}}'])(?:Cohen's\ )?[δΔ]\)?\ ?{LINKS}{_V}"),
    ("d", rf"(?<![\p{{L}}'])(?:Hedges'?s?'?\ )?g\)?\ ?(?:=|≥|:|of)\ ?{_V}"),
    ("f2", rf"(?<![\p{{L}}'])(?:Cohen's\ )?f(?:²|2|₂)\)?\ ?{LINKS}{_V}"),
    ("f", rf"(?<![\p{{L}}'])(?:Cohen's\ )?f\)?\ ?{LINKS}{_V}"),
    ("cohens_w", rf"(?<![\p{{L}}'])(?:Cohen's\ )?w\)?\ ?(?:=|≥|:|of)\ ?{_V}"),
    ("h", rf"(?<![\p{{L}}'])(?:Cohen's\ )?h\)?\ ?(?:=|≥|:|of)\ ?{_V}"),
    ("partial_eta2", rf"(?:η_?p?²_?p?|η2_?p?|ηp2|\beta(?:[\ -]|_p)?(?:squared|2|²))\)?\ ?{LINKS}{_V}"),
    ("between", rf"\b(?i:correlation|r)(?:\ coefficient)?\ (?:among|between|of|across)\ (?:the\ )?(?:repeated|pre|baseline|before|measure|time|two\ measure|paired|retention)[^.;]{{0,60}}?(?:=|of|was|at)\ ?(?:r\ ?=\ ?|ρ\ ?=\ ?)?{_V}"),
    ("r2", rf"(?<![\p{{L}}'])R(?:²|2)\ ?{LINKS}{_V}"),
    ("r", rf"(?<![\p{{L}}'])(?:Pearson's\ )?[rρ]\)?\ ?(?:=|≥|>|≈|:|of|as\ small\ as)\ ?{_V}"),
    ("r", rf"\bcorrelations?(?:\ coefficients?)?(?:\ of)?(?:\ at\ least)?\ ?(?:=|≥)?\ ?(?:\(?[rρ]\ ?=\ ?)?{_V}"),
    ("ratio_effect", rf"\b(?i:odds|hazards?|risk|rate)\ ratios?(?:\ \(\p{{L}}+\))?{LINKS}{_V}|\b(?:OR|HR|RR)\ ?(?:=|of|≥)?\ ?{_V}"),
    ("d", rf"\bstandardi[sz]ed\ (?:mean\ )?(?:difference|effect(?:\ size)?)(?:\ between\ [\p{{L}}\ ]{{3,30}})?(?:\ \(\p{{L}}+\))?{LINKS}{_V}"),
    ("d", rf"{_V}[\ -](?:SDs?\b|SD\ |standard\ deviations?\b|pooled\ standard\ deviations?\b)(?!\ (?:of|=))"),
    ("effect_size", rf"\b(?i:effect)(?:[\ -]sizes?)(?:\ \([^)0-9]{{1,24}}\))?{LINKS}{_V}"),
    ("effect_size", rf"{_V}\ effect\ size\b"),
    ("sd", rf"(?<![\p{{L}}'])σ\ ?=\ ?{_V}"),
    ("sd", rf"(?:\b(?:SD|SDs|s\.d\.)|\bstandard\ deviations?(?:\ \(SD\))?)(?:\ (?:of|for|in)\ (?!about|approx)(?:the\ )?(?:[\p{{L}}-]+\ ){{1,5}}?(?:=|of|was|is|at|to\ be))?{LINKS}{_V}"),
    ("mean_difference", rf"\b(?:difference|change|increase|improvement|decrease|reduction|gain|effect|benefit)s?(?:\ (?:in|between|of|from)\ (?:the\ |mean\ )?(?:[\p{{L}}-]+\ ){{1,6}}?)?(?:\ ?(?:=|of|was|is|as\ small\ as|at\ least|about|or\ more|by)){{0,3}}\ ?{_V}(?!\ ?(?:%|per\ cent|SD|standard)|(?:\ [\p{{L}}-]+){{0,3}}\ (?:per|in\ each|for\ each|each)\b|(?:\ [\p{{L}}-]+)?\ {_PEOPLE})"),
    ("mean_difference", rf"{_V}(?:[\ -](?!to\b|and\b|or\b)[\p{{L}}/°²³]{{1,12}})?[\ -](?:(?:mean|average|between-group|point)\ )?(?:difference|change|increase|improvement|decrease|reduction)\b"),
    # Sizes.
    ("n1", rf"\b(?i:sample\ size)\ (?:of\ )?group\ 1\ ?(?:=|:)\ ?{_V}"),
    ("n2", rf"\b(?i:sample\ size)\ (?:of\ )?group\ 2\ ?(?:=|:)\ ?{_V}"),
    ("n1", rf"(?<![\p{{L}}])n_?(?:1|₁)\ ?=\ ?{_V}"),
    ("n2", rf"(?<![\p{{L}}])n_?(?:2|₂)\ ?=\ ?{_V}"),
    ("n1", rf"{_V}(?={_IN_ONE}{_AND}{NUMBER}{_IN_OTHER})"),
    ("n2", rf"(?<={NUMBER}{_IN_ONE}{_AND}){_V}(?={_IN_OTHER})"),
    ("n", rf"\b(?:2|[Tt]wo)\ ?[×x]\ ?{_N}(?=[.,;)]|\ (?:[\p{{L}}-]+\ ){{0,2}}{_PEOPLE}|$)"),
    ("n", rf"{_N}(?:\ \(?[\p{{L}}-]{{2,20}}\)?){{0,4}}?\ ?(?:/|\b(?:per|in\ each|for\ each|in\ either|in\ every|for\ every|to\ each|each\ in|in\ both|within\ each|each\ for)\b)[\ -]?(?:of\ the\ )?(?:{_COUNT}\ )?(?:[\p{{L}}-]+\ )?{_GROUP}"),
    ("n", rf"\b(?:per|each|every|in\ each|for\ each)[\ -](?:[\p{{L}}-]+\ )?{_GROUP}(?:'s)?(?:\ (?:must|should|would|needs?|needed|requires?|required|to|have|has|include|includes|contain|consist|be|at|least|a|minimum|size|sizes|of|is|was|had|did|comprise|comprised|had\ to|\d?))*\ ?(?:[,:=]\ ?|\(\ ?(?=n\ ?=))?(?:n\ ?=\ ?)?{_V}"),
    ("n", rf"\bgroup\ sizes?(?:\ (?:of|was|were|is|should\ be|would\ be|required))*\ ?=?\ ?{_V}"),
    ("n", rf"\b(?:{'|'.join(COUNTED)}|both|equal)\ {_GROUP}\ of\ (?:at\ least\ )?(?:size\ )?{_V}"),
    ("n", rf"{_N}{_WHO}\ each\b"),
    ("N", rf"(?<![\p{{L}}])N\ ?(?:=|≥|>|of|:)\ ?{_V}"),
    ("N", rf"\b(?:total|overall|combined|whole|entire|full)(?:\ (?:of|number|sample|size|N|n|for|the|required|minimum|study|would|be|is|was|were|both|all|{_PEOPLE[3:-1]}))*\ ?(?:\(?\ ?[Nn]\ ?)?(?:=|:|≥)?\ ?(?:at\ least\ |about\ )?{_V}"),
    ("N", rf"{_N}{_WHO}\ (?:in\ (?:total|all)|overall|altogether|total)\b"),
    ("size", rf"(?<![\p{{L}}_])n\ ?(?:=|≥|>|of|:)\ ?{_V}"),
    ("size", rf"\bsample(?:\ sizes?)?(?:\ (?:of|was|is|should|would|be|required|needed|to|at|least|a|minimum|estimated|calculated|as|necessary|recommended))*\ ?=?\ ?(?:n\ ?=\ ?)?{_V}"),
    ("size", rf"\b(?:need(?:s|ed)?|requir(?:e|es|ed|ing)|minimum\ of|at\ least|suggested|indicated|recommended|asked\ for|called\ for|calls\ for|yielded|gave)(?:\ (?:to|a|an|minimum|of|at|least|about|that|we|test|recruit|the|total|n))*\ ?(?:n\ ?=\ ?)?{_V}(?=\ {_PEOPLE}|(?:\ [\p{{L}}-]+)?\ {_PEOPLE}|\ (?:were|are|would|is)\ {_NEEDED})"),
    ("size", rf"{_N}{_WHO}\ (?:(?:would|will|should|must|had|have|has)\ )?(?:have\ )?(?:been|be|are|were|is|was|to\ be)?\ ?(?:at\ least\ )?{_NEEDED}\b"),
    ("size", rf"\bsample\ size\b(?:[^.;]|\.\d){{0,140}}?\b(?:is|was|were|yielded|gives|gave)\ (?:at\ least\ |calculated\ (?:as|to\ be)\ |n\ ?=\ ?)?{_V}(?=\ {_PEOPLE}|[.;,]|$|\ \()"),
    ("size", rf"{_N}(?=(?:\ [\p{{L}}-]+){{0,2}}\ {_PEOPLE}\b)"),
)  # fmt: skip
"""Role and pattern. `aside` numbers belong to nothing; `beta` and `confidence` are complements of power and alpha;
`size` is a number of cases that is not said to be that of a group or of all."""


HINTS: dict[str, tuple[str, ...]] = {
    "beta": ("β", "beta", "rror"), "alpha": ("α", "lpha", "ignif", "level", "rror", "p", "P"), "confidence": ("onfidence",),
    "df1": ("umerator",), "df": ("df", "degree"), "predictors": ("redictor", "variable"), "k": ("group", "condition", "arm", "level", "k"),
    "ratio": (":", "∶", "ratio"), "delta": ("δ", "Δ"), "partial_eta2": ("η", "eta"), "between": ("orrelation",), "r2": ("R",),
    "ratio_effect": ("ratio", "OR", "HR", "RR"), "effect_size": ("ffect",), "sd": ("SD", "s.d.", "deviation", "σ"),
    "mean_difference": ("difference", "change", "increase", "improvement", "decrease", "reduction", "gain", "effect", "benefit"),
    "n1": ("n", "1"), "N": ("N", "otal", "verall", "ombined", "whole", "ntire", "full", "all"),
}  # fmt: skip
"""Of a role's patterns none finds anything without one of these: compiling all takes a tenth of a second."""


def patterns(text: str) -> Iterator[tuple[str, regex.Pattern[str]]]:
    """Role and compiled pattern of all that may be in a text, in the order of trial."""
    for role, pattern in ROLES:
        if any(hint in text for hint in HINTS.get(role, ("",))):
            yield role, _compiled(pattern)


@cache
def _compiled(pattern: str) -> regex.Pattern[str]:
    return regex.compile(pattern, regex.VERBOSE)


@cache
def topic() -> regex.Pattern[str]:
    """What a passage must speak of to be read for power statements."""
    return regex.compile(
        r"\bpower(?:ed)?\b|1\ ?-\ ?(?:β|beta)|type[\ -](?:ii|2)\ error|(?:β|\bbeta)\ ?(?:=|of|at|was|set|[.\d])|\bchance\ (?:of|to)\ (?:detect|find)"
        r"|\bprobability\ of\ (?:at\ least\ )?[.\d]",
        regex.IGNORECASE | regex.VERBOSE,
    )


PLANNING = (
    "power", "sample size", "effect size", "to detect", "alpha", "α", "significance level", "level of significance", "assum",
    "required", "needed", "necessary", "difference of", "standard deviation", "1 - β", "1-β", "β =", "expected", "anticipat",
    "per group", "each group", "per arm", "each arm", "in total", "sensitivity", "g*power", "two-sided", "two-tailed", "one-tailed",
    "one-sided", "calculation", "sample of", "allocation",
)  # fmt: skip
"""What a sentence speaks of that may be part of a power statement in the sentence beside it."""


@cache
def inflated() -> regex.Pattern[str]:
    """What makes the number of cases behind it larger than the calculation asks for."""
    return regex.compile(
        r"\b(?:allow(?:ing|ed)?\ for|account(?:ing|ed)?\ for|to\ account|compensat\w+|drop-?\ ?outs?|attrition|withdraw\w*|loss(?:es)?\b|lost\ to"
        r"|inflat\w+|oversampl\w+|over-?recruit\w*|non-?\ ?(?:response|compliance|adherence)|exclu\w+|adjust(?:ing|ed)\ for\ loss|missing|buffer)",
        regex.IGNORECASE | regex.VERBOSE,
    )


@cache
def obtained() -> regex.Pattern[str]:
    """What makes a number of cases the one that was had, not the one that was needed."""
    return regex.compile(
        r"\b(?:recruit\w*|enrol\w*|invited?|collect\w*|tested|final|actual(?:ly)?|took\ part|participated|complet\w+|randomi[sz]ed|approached"
        r"|aimed|planned\ to|decided|therefore|hence|exceed\w*|preregistered|stopp\w+|screened|eligible|ended\ up|stud(?:y|ies)\ (?:with|of)|had\ (?:been|only))\b",
        regex.IGNORECASE | regex.VERBOSE,
    )


@cache
def achieved() -> regex.Pattern[str]:
    """What says that the power was computed for a sample at hand."""
    return regex.compile(
        r"\b(?:achieved|observed|post[\ -]?hoc|retrospective|obtained|attained)\ (?:statistical\ )?power"
        r"|\bpower\ (?:achieved|attained|obtained|reached)|\bpost[\ -]?hoc\ (?:power\ )?(?:analys|calculation)",
        regex.IGNORECASE | regex.VERBOSE,
    )


@cache
def computed() -> regex.Pattern[str]:
    """What may say so, where nothing says that a size is needed."""
    return regex.compile(
        r"\b(?:yielded|resulted\ in|resulting)\ (?:a\ |an\ )?(?:statistical\ )?power|\bpower\ (?:was|is)\ (?:calculated|computed|estimated|found)\ (?:to\ be|as|at)",
        regex.IGNORECASE | regex.VERBOSE,
    )


@cache
def planned() -> regex.Pattern[str]:
    """What says that a size is needed."""
    return regex.compile(
        r"\ba\ priori|\ba-priori|\b(?:need|requir|necess|minimum|suggest|recommend|indicat|target)|\bwould\b|\bplan",
        regex.IGNORECASE,
    )


@cache
def sensitivity() -> regex.Pattern[str]:
    """What says that the effect was computed which a sample at hand can detect."""
    return regex.compile(
        r"\bsensitivity\ (?:power\ )?(?:analys|calculation|power)|\b(?:minimum|minimal|minimally|smallest|least)\ (?:effect\ )?(?:size\ )?detectable"
        r"|\bdetectable\ (?:effect|difference|correlation)|\bMDES?\b"
        r"|\beffects?\ (?:size\ )?(?:that|which)\ (?:\p{L}+\ ){1,4}(?:could|can)\ be\ detected",
        regex.IGNORECASE | regex.VERBOSE,
    )


@cache
def smallest() -> regex.Pattern[str]:
    """What may say so, where nothing says that the power was computed."""
    return regex.compile(
        r"\b(?:smallest|minimum|minimal)\ (?:\p{L}+\ )?(?:effect|difference|correlation)(?!\ sizes?\ of\ interest|\ of\ interest)",
        regex.IGNORECASE | regex.VERBOSE,
    )


@cache
def needed() -> regex.Pattern[str]:
    """What says of one of several sizes that it is the one that is needed."""
    return regex.compile(
        r"\b(?:need|requir|necess|suggest|indicat|suffic|minimum|recommend|yield|ask|call)\w*",
        regex.IGNORECASE,
    )


@cache
def of_devices() -> regex.Pattern[str]:
    """Power that no test has: of an oven, of a signal, of a model to predict."""
    return regex.compile(
        r"\bpower\ of\ (?:the|an?|each|this|our)\ (?:\p{L}+\ )?(?:ovens?|kneaders?|mixers?|motors?|engines?|machines?|devices?|lasers?|lamps?|batter(?:y|ies)|heaters?"
        r"|microwaves?|mills?|fans?|signals?|bands?|lens(?:es)?)\b"
        r"|\d\ ?(?:[kKMm]?W|[kKMm]?W/\S{1,6}|watts?|kilowatts?|dB|hp)\b"
        r"|\b(?i:peak|laser|heating|motor|oven|explanatory|predictive|discriminat\w+|muscle|spectral|theta|gamma|band|relative|absolute|purchasing|horse|aerobic)\ power\b"
        r"|\bpower\ (?:law|function|output|spectr\w+|transform\w*|supply|curve)",
        regex.VERBOSE,
    )


@cache
def others() -> regex.Pattern[str]:
    """Examples, and what is said of other people's work."""
    return regex.compile(
        r"\b(?:for\ example|for\ instance|suppose|imagine|hypothetical|fictitious|for\ illustration|median\ power|average\ power|mean\ power|typical)\b"
        r"|\b(?:original|previous|earlier|prior|past|published|their|most|many|those|these)\ (?:\p{L}+\ )?(?:stud(?:y|ies)|trials?|experiments?|authors?|reports?|samples?|work|articles?|papers?)"
        r"\ (?:had|has|have|was|were|reported|used|needed|required|planned|claimed|found|based|only)\b",
        regex.IGNORECASE | regex.VERBOSE,
    )
