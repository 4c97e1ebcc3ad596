"""What a text says of how a score comes about: averaged or summed, over how many items, in whole steps or not."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

import regex

from recheck.reading.scales.patterns import COUNTED, Span
from recheck.reading.views import TIMEOUT


@dataclass(frozen=True, slots=True)
class Hints:
    """What one sentence says of scores.

    `averaged` tells that something is averaged, or that there is more than one answer to a score; `of_items` that these are
    items and not loaves, trials or judges; `number` is where the number of items stands; `judges` how many people score one thing, in the text's
    words; `near` that words say so which count only beside the scale itself; `multiple` that there are several items, whatever becomes of them; `uneven` that not all steps are whole;
    `moved` that scores were put on another scale, such as z-scores. `why` are the words that tell of averages.
    """

    averaged: bool = False
    summed: bool = False
    multiple: bool = False
    single: bool = False
    prorated: bool = False
    uneven: bool = False
    of_items: bool = False
    number: Span | None = None
    judges: str = ""
    near: bool = False
    moved: bool = False
    why: str = ""

    def __bool__(self) -> bool:
        """Whether the sentence says anything."""
        return self != NOTHING


NOTHING = Hints()

_COUNT = r"(?P<number>\d{1,3}|" + "|".join(word for word, value in COUNTED.items() if value > 1) + r")"
_THINGS = r"(?:items?|questions?|statements?|answers?|responses?|ratings?|scores?|questionnaire items?)"


_FIGURE = r" ?(?:only |about |around |roughly |just |close to |at |out at )?[-+]?\d+(?:[.,]\d| ?[(\[]| ?±)"
"""The mean itself, behind a verb: `boredom averaged 2.37`."""


@cache
def _averaged() -> regex.Pattern[str]:
    return regex.compile(
        rf"\b(?:averag(?:ed|ing)(?!{_FIGURE})|(?:an|the|their|its|simple) averages? (?:of|over|across|score|rating)|means? (?:across|over|per|rating per|score per)"
        r"|mean (?:of|over|across) (?:the|all|these|those|its|his|her|their|both|two|three|four|five|six|seven|eight|nine|ten|\d+)\b"
        r"|mean (?:item|scale|composite|subscale) scores?|(?:individual|participant|personal|subject) means?|means? (?:was|were) (?:computed|calculated|formed|taken|used)"
        r"|(?:comput|calculat|form|tak|us|creat)(?:ed|ing) (?:the |a |an )?(?:mean|average)s?\b(?! and| ±| \()"
        r"|mean (?:scores?|ratings?|values?|responses?|judge?ments?|answers?) (?:(?:was|were) (?:computed|calculated|formed|taken|used)|per|for each|over|across)|(?:are|is|were|as) (?:the )?means? (?:of|over|across)"
        r"|pooled(?! (?:sd|standard|varian|estimat|error|analys|odds|effect|model|within-))|composites?|aggregat\w+|collaps(?:ed|ing)|combined (?:into|to|in)|(?:ratings?|scores?|marks|answers) of (?:the )?(?:both|two|three|all) (?:\w+ ){0,2}?were combined)\b",
        regex.IGNORECASE,
    )


_SOME = _COUNT.replace("?P<number>", "?:")
_ONES = (
    r"(?:participants?|apprentices?|panell?ists?|patients?|subjects?|persons?|child|children|students?|respondents?|bakers?|raters?|judges?|tasters?|attributes?|items?|questions?|statements?|dimensions?|groups?|"
    r"conditions?|aspects?|criteri(?:on|a)|qualit(?:y|ies)|characteristics?|propert(?:y|ies)|features?|variables?|outcomes?|measures?|points?|scales?|ends?)\b"
)
"""What there is one of to a score: who gives it, what is asked for, and the group."""
_RATERS = (
    r"(?!panel|team|jury|family|class|couple|dyad|pair|household)\p{L}+ (?:also |then |again )?"
    r"(?:answered|rated|gave|indicated|reported|judged|evaluated|graded|responded|was asked|marked|ticked|chose|assigned|told)\b"
)
"""Somebody by what he does: `each pupil answered`."""
_NO_THINGS = r"(?:worth|were|was|rated|scored|on|from|ranging|using|with|correct|of|answered|judged|evaluated|graded|coded|consist\w*|anchored|time points?|measured|assessed)\b"


@cache
def _near() -> regex.Pattern[str]:
    """What makes a score of something else than one whole answer, where it stands beside the scale."""
    return regex.compile(
        r"\b(?:factor scores?|z-?scor\w+|standardi[sz]ed (?:scores?|to|within|across)|indices|index|latent|percent(?:age)?s?|residuals?|log-?transform\w*|trials|blocks|repeatedly|occasions|sessions|daily"
        r"|stimuli|pictures|photographs|images|videos?|clips|vignettes|scenarios|faces|excerpts|interviewees|targets"
        rf"|(?:each|every|both) (?!{_ONES}|{_RATERS}|{_NO_THINGS})\p{{L}}+|each of (?:(?:the|these|those|their|his|her|{_SOME}) ){{1,2}}(?!{_ONES})\p{{L}}+"
        rf"|per (?!cent\b|se\b|{_ONES})\p{{L}}+|ecological momentary|diary|over the (?:course|period)|throughout the day|last (?:\d+|two|three|four|seven) (?:days|hours|weeks))\b",
        regex.IGNORECASE,
    )


@cache
def _several() -> regex.Pattern[str]:
    """Several things that one person scored, or several people who scored one thing: `each apprentice rated six loaves`."""
    many = rf"(?:{_COUNT.replace('?P<number>', '?P<many>')}|several|all|multiple|both|a series of|a set of|every)"
    people = r"(?:independent |trained |blinded |blind |expert |experienced |different |master |other )*(?:judges|raters|assessors|observers|tasters|panell?ists|coders|experts|examiners|bakers|assistants|investigators|clinicians|reviewers)"
    return regex.compile(
        rf"\b(?:(?:rat|tast|scor|evaluat|judg|assess|grad|test|complet|sampl|view|receiv|perform)(?:ed|ing|e|es|s)?(?: a total of| the| each of(?: the)?)? {many}(?! ?[-%]) (?!point|minutes|hours|days|weeks|items?\b|questions?\b|times as)(?:[\w-]+ ){{0,3}}?(?!participants|persons|people|subjects|patients)\p{{L}}{{2,}}s\b"
        rf"|(?:by|from|of|between) (?P<judges>{_COUNT.replace('?P<number>', '')}|several|both|multiple) {people}"
        r"|(?:replicates?|replicated|duplicates?|triplicates?|repetitions|twice|(?:three|four|five|several) times))\b",
        regex.IGNORECASE,
    )


@cache
def _items() -> regex.Pattern[str]:
    return regex.compile(
        rf"(?<![\w.-])(?:{_COUNT}[- ](?!points?\b|steps?\b)(?:[\w-]+ ){{0,3}}?(?:items?|questions?|statements?|adjectives)\b|(?P<some>items|questions|statements|subscales?|inventory|questionnaire|adjectives|facets|Cronbach|McDonald|internal consistenc\w+|reliabilit\w+))|(?P<alpha>[αω] ?[=>≥])"
    )


@cache
def _averaged_items() -> regex.Pattern[str]:
    """`the mean of eight items`, `averaged across the 5 items`, `five items were averaged`."""
    between = r"(?: [\w-]+){0,3}?"
    return regex.compile(
        rf"\b(?:mean|average|averag(?:ed|ing)|scores?)(?: (?:of|across|over|from|for|scores?|the|all|responses?|ratings?|to|these|those|its|their|both)){{1,5}} {_COUNT}{between}[ -]{_THINGS}\b"
        rf"|\b{_COUNT}{between}[ -](?:items?|questions?|statements?|ratings?)(?: [\w,()=.αω-]+){{0,9}}? (?:averag(?:ed|ing)|mean (?:score|was|of))",
        regex.IGNORECASE,
    )


@cache
def _summed() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:summ(?:ed|ing)|sum[- ]scores?|sums? of|summation|total(?:led|ed|ling)? scores?|total(?:led|ed)\b|added (?:up|together)|adding (?:up|the)|total sum|overall sum|sum total)\b",
        regex.IGNORECASE,
    )


@cache
def _single() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:single|one|1)[ -](?:(?:global|overall|face-valid|self-report(?:ed)?|rating|numeric|hedonic|simple|closed|direct|(?:\d{1,3}|\w+)-point|likert(?:-type)?|rating-scale) ){0,3}(?:item|question|statement)\b(?! ?s\b)"
        rf"|\b(?:gave|give|assigned|awarded|made|provided|recorded|noted|returned|received|entered|given) (?:\p{{L}}+ ){{0,3}}?(?:one|a single) (?:{_WHOLE}|overall |global |final ){{0,2}}(?:scores?|ratings?|marks?|grades?|number|answer|value)\b"
        rf"|\b(?:one|a single) {_WHOLE}(?:score|rating|mark|grade|answer|value)\b"
        r"|\b(?:scores?|ratings?|marks?|grades?|values|answers) (?:were|was|are|is)(?: all| always| only)? (?:whole numbers?|integers?)\b",
        regex.IGNORECASE,
    )


_WHOLE = r"(?:whole[ -]number |whole[ -]point |whole |integer )"


@cache
def _moved() -> regex.Pattern[str]:
    """Scores put on another scale than that of the answers: `z-standardised`, `converted to T scores`, `mean-centred`."""
    return regex.compile(
        r"\b(?:z-?(?: |-)?(?:standardi[sz]\w+|transform\w+|scor(?:es?|ed|ing)\b)|T[ -]scores?\b|stanines?|percentile ranks?|POMP\b|(?:mean|grand-mean|group-mean)?[ -]?cent(?:re|er)ed\b(?! around the| at the midpoint)|ipsati[sz]ed|log(?:10)?-?(?: |-)?transformed"
        r"|(?:was|were|been|and|then|be) (?:then |first |subsequently |afterwards |linearly |again )?(?:standardi[sz]ed(?! (?:test|questionnaire|instrument|interview|procedure|protocol|scale|measure|instruction|form|task|item|version|lab|condition)\w*)|rescaled|re-scaled|normali[sz]ed|converted|transformed)"
        r"|standardi[sz]ed (?:with|against|within|across|by) )",
        regex.IGNORECASE,
    )


@cache
def _prorated() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:pro-?rated|prorat\w+|person[- ]mean (?:imputation|substitution)|mean (?:imputation|substitution)|missing (?:items?|answers?|responses?|values?)[^.;]{0,40}(?:replaced|imputed|substituted|estimated))\b",
        regex.IGNORECASE,
    )


@cache
def _uneven() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:half[- ](?:points?|steps?|scores?|marks?|units?|grades?)|halves|half of a point|(?:increments?|steps|intervals|multiples) of (?:one half|a half|half|a quarter|0?[.·]\d+)|0?[.·]\d+[ -](?:points?|units?|steps?|increments?)"
        r"|decimals? (?:were|was|places?|numbers?|scores?|values?|allowed|permitted)|fractions?|visual[- ]?analog(?:ue)?|\w*VAS\b|sliders?|slid(?:e|ing)\b|analog(?:ue)? scales?|unmarked line|continuous (?:line|scale|rating|slider)|line scale|unstructured|mm line|cm line|magnitude estimation)",
        regex.IGNORECASE,
    )


@cache
def _again() -> regex.Pattern[str]:
    """Several things or occasions anywhere in a document: `six loaves were served`, `answered on five evenings`."""
    many = rf"(?:{_SOME}|several|all|both|each|every|multiple)"
    return regex.compile(
        rf"\b(?:on|in|over|across|during|after|at|for|within|of) (?:(?:the|each of the|the end of) )?{many} (?:[\w-]+ ){{0,2}}?(?:days?|evenings?|mornings?|nights?|weeks?|months?|shifts?|lessons?|occasions?|sessions?|visits?|batch(?:es)?|bakes?|rounds?|blocks?|trials?)\b"
        rf"|\b{many} (?:[\w-]+ ){{0,2}}?(?:loaves|loaf|breads?|slices?|samples?|wines?|products?|portions?|stimuli|stimulus|dishes|specimens?|pictures?|images?|photographs?|vignettes?|scenarios?|cakes?|rolls?|assessors|judges|raters)\b"
        r"|\b(?:repeated|retest\w*|re-test\w*|replicat\w+|duplicate|triplicate)\b",
        regex.IGNORECASE,
    )


@cache
def _rating() -> regex.Pattern[str]:
    """Words of people who rate; what was assessed or evaluated may be a height, too."""
    return regex.compile(
        r"\b(?:rat(?:e|ed|ings?|ers?)\b|scor|tast|judg|assessors|answer|question|asked|served|items?\b|panel)",
        regex.IGNORECASE,
    )


def several_told(text: str) -> str:
    """The words of a sentence about ratings that tell of several things or occasions, "" for none."""
    if _rating().search(text, timeout=TIMEOUT) is None:
        return ""
    match = _again().search(text, timeout=TIMEOUT)
    return _clip(match[0]) if match else ""


SIGNS = (
    "averag", "mean", "pooled", "percent", "residual", "transform", "daily", "diary", "momentary", "last ", "composite", "aggregat", "collaps", "combined", "index", "indices", "factor score", "z-sc", "standardi", "latent", "rate", "tast", "scor", "evaluat", "judg", "assess", "trial", "block", "replicat", "duplicat",
    "triplicat", "session", "twice", "times", "daily", " per ", "each ", "item", "question", "statement", "cronbach", "α", "reliab", "consisten", "summ", "total", "sum", "single", "half", "halves", "step", "increment", "decimal", "visual", "vas",
    "slid", "analog", "cent", "convert", "t score", "t-score", "rescal", "re-scal", "normali", "percentile", "stanine", "ipsati", "pomp", "whole", "integer", "prorat", "pro-rat", "missing", "imputation", "substitution", "0.",
)  # fmt: skip
"""One of them stands in every sentence that says anything of the kind, in lower case."""


def hints_of(text: str) -> Hints:
    """What a sentence says of how scores come about."""
    averaged = _averaged().search(text, timeout=TIMEOUT)
    several = _several().search(text, timeout=TIMEOUT)
    items = _items().search(text, timeout=TIMEOUT)
    exact = _averaged_items().search(text, timeout=TIMEOUT)
    near = _near().search(text, timeout=TIMEOUT)
    single = _single().search(text, timeout=TIMEOUT) is not None
    numbered = exact or (items if items and items["number"] else None)
    count = numbered["number"].lower() if numbered else ""
    only_one = count in ("1", "one")
    return Hints(
        averaged=averaged is not None or exact is not None or (several is not None and not several["judges"]),
        summed=_summed().search(text, timeout=TIMEOUT) is not None,
        multiple=items is not None and not (single or only_one),
        single=single,
        near=near is not None,
        prorated=_prorated().search(text, timeout=TIMEOUT) is not None,
        uneven=_uneven().search(text, timeout=TIMEOUT) is not None,
        of_items=exact is not None or (averaged is not None and items is not None and several is None),
        number=numbered.span("number") if numbered and not only_one else None,
        judges=several["judges"].lower() if several and several["judges"] else "",
        moved=_moved().search(text, timeout=TIMEOUT) is not None,
        why=next((_clip(match[0]) for match in (averaged, exact, several, near, items) if match), ""),
    )


def _clip(words: str) -> str:
    """Words of a text for a note."""
    return " ".join(words.split())[:60].strip(" ,;:")
