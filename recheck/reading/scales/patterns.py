"""The patterns of expressions that tell a scale."""

from __future__ import annotations

from functools import cache

import regex

Span = tuple[int, int]

COUNTED = {
    "zero": 0, "one": 1, "two": 2, "three": 3, "four": 4, "five": 5, "six": 6, "seven": 7, "eight": 8, "nine": 9, "ten": 10, "eleven": 11,
    "twelve": 12, "thirteen": 13, "fourteen": 14, "fifteen": 15, "sixteen": 16, "eighteen": 18, "twenty": 20, "thirty": 30,
}  # fmt: skip
"""Numbers of points and items that are written as words."""

_N = r"(?:[-+]?\d{1,3}(?:\.\d)?(?![\d.,]*\d| ?%)|(?:zero|one|two|three|four|five|six|seven|eight|nine|ten)\b(?!-))"
_LOW, _HIGH = rf"(?P<low>{_N})", rf"(?P<high>{_N})"
_TO = r" ?(?:to|-|--|and|through|until|up to|\.\.\.?|…) ?"
_QUOTED = r"[\"'“”«][^\"'“”»]{1,60}[\"'“”»]"
_NO_LABEL = r"(?!(?:M|Mdn|S\.?D|S\.?E|S\.?E\.?M|N|CI|IQR|ranges?|interquartile|medians?|means?|standard|p|t|r)(?![\p{L}-])(?! than))"
"""What opens brackets that hold a statistic, not what an end of a scale is called: `from 4.1 (SD 1.0) to 5.2 (SD 1.1)`."""
_SAID_LAST = rf"(?: ?[(\[]{_NO_LABEL}[^()\[\]=]{{1,60}}[)\]]|,? ?{_QUOTED})"
_SAID = rf"(?:{_SAID_LAST}|(?:,| =| :|=|:) ?[\p{{L}}][^()\[\];.\d]{{1,50}}?)"
"""What an end of a scale is called: ` (poor)`, ` = not at all`, `, "never"`."""
_KIND = (
    r"(?:likert|rating|response|hedonic|numeric|numerical|scales?|semantic|agreement|frequency|ordinal|intensity|category|categorical|"
    r"verbal|visual|bipolar|unipolar|satisfaction|liking|items?|format|answer|preference|acceptability|continuum|NRS|VAS)"
)


@cache
def points() -> regex.Pattern[str]:
    """`7-point scale`, `seven-point Likert-type scale`, `5 point response format`."""
    counted = "|".join(COUNTED)
    return regex.compile(
        rf"(?<![\w.])(?P<points>\d{{1,3}}|{counted})(?:- | |-)?(?:points?|pts?|steps?|categor(?:y|ies)|levels?)\b"
        rf"(?:,?(?:[ -][\w'-]{{1,20}}){{0,3}}?[ -]{_KIND}\b)(?:[ -](?:{_KIND})\b){{0,3}}",
        regex.IGNORECASE,
    )


_OF_SCALE = (
    r"(?:scales?|likert(?:[ -]type)?|continuum|sliders?|NRS|VAS|analog(?:ue)?)\b[)\]]? ?[(\[,:;]? ?(?:(?:which|that|and|was|were|is|are|itself|it|values|scores|ratings) ){0,3}"
    r"(?:(?:anchored|scored|scaled|coded|labell?ed|going|running|runs?|ran|extending|ranging|ranged?|ranges|reaching"
    r"|with (?:end ?-?points?|anchors|values|ends|scores|ratings)) )?(?:(?:from|of|between|at|by|with|in the range(?: of)?) )?",
    r"(?:rat(?:ed?|ing|ings)|scored?|scoring|judged|graded?|grading|evaluated?|assessed|answered|anchored|coded|marked|responded)"
    r"(?: [\w'-]{1,15}){0,6}? (?:from|between|at|as) ",
    r"(?:rated|coded|(?<=[(\[])scored) ",
    r"responses? (?:could )?rang(?:ed?|ing) (?:from|between) ",
    r"(?:awarded|gave|assigned|received) (?:from|between) ",
    r"(?:one|single) (?:item|question)(?:,| ?[(\[])? ?(?:rated |scored |scale |range |from )?",
)
_OF_SCORE = (
    r"(?:possible|theoretical|potential|score|scoring) (?:range|scores?|values?|totals?)\b[^.;()\d]{0,24}?(?:[ :=,(]|from |of |between )",
    r"(?:can|could|may|might) (?:theoretically )?(?:range|vary|run|lie|fall|go|reach) ?(?:from |between )?",
    r"(?:scores?|totals?|values|ratings|responses|answers|points) (?:(?:which|that|theoretically|potentially|possibly) ){0,2}"
    r"(?:ranges?|runs?|vary|varies|lies?|go|goes) ?(?:from|between)? ",
    r"(?:ranges?|ranging|runs?|running|varies|varying) (?:from|between) ",
    r"(?<=[(\[,] ?(?:total |score |possible )?)range ?[:=]? ?(?:from )?",
)


@cache
def ends() -> regex.Pattern[str]:
    """Two numbers with what they are called: `1 (poor) to 5 (excellent)`, `0-63`."""
    return regex.compile(
        rf"(?<![\w.,/%])\(?{_LOW}\)?{_SAID}?,?{_TO}\(?{_HIGH}(?![\d:/])\)?(?P<said>{_SAID_LAST})?",
        regex.IGNORECASE,
    )


@cache
def lead() -> regex.Pattern[str]:
    """Words before two numbers that make them the ends of a scale: `rated from `, `possible scores range from `."""
    return regex.compile(
        rf"\b(?:(?P<rated>{'|'.join(_OF_SCALE)})|(?P<scored>{'|'.join(_OF_SCORE)}))$", regex.IGNORECASE
    )


@cache
def before_scale() -> regex.Pattern[str]:
    """`a 0-10 numeric rating scale`, `1 to 7 Likert scale`, `0-100 mm visual analogue scale`."""
    return regex.compile(
        rf"(?<![\w.,-]){_LOW}{_TO}{_HIGH}[ -]?(?:points?|mm|cm)?[ -](?:[\w-]{{2,14}}[ -]){{0,3}}?(?:scales?|likert|NRS|VAS)\b",
        regex.IGNORECASE,
    )


_IS = r"[\"']? ?(?:=|:|(?<= )-(?= )|indicat\w{1,4}|represent\w{0,3}|mean(?:s|ing)|denot\w{1,3}|corresponds? to|being|is|was) ?"


@cache
def anchors() -> regex.Pattern[str]:
    """`1 = not at all, 7 = very much`; `1: poor; 7: good`; the first and the last of a list."""
    said = r"[\p{L}\"'“][^()\[\];=:\d]{0,60}?"
    then = r"(?:[,;]| to| and| -| through) ?(?:(?:to|and|or|where|while|through) )?"
    return regex.compile(
        rf"(?<![\w.=<>≤≥-])(?<![=<>≤≥] ){_LOW}{_IS}{said}{then}(?:\d{{1,3}}{_IS}{said}{then}){{0,9}}{_HIGH}{_IS}(?=[\p{{L}}\"'“])[^()\[\];.,]{{1,60}}",
        regex.IGNORECASE,
    )


@cache
def named_ends() -> regex.Pattern[str]:
    """`(1) to very much (7)`, `1 (poor) to 5 (excellent)`, `(1) Very difficult to (5) very easy`."""
    word = r"[\p{L}\"'“”][\p{L}\"'“” ,/-]{1,60}?"
    end = rf"{_NO_LABEL}[\p{{L}}\"'“”][^()\[\]=]{{1,60}}"
    return regex.compile(
        rf"(?<=[\p{{L}}\"'“”] ?)[(\[]{_LOW}[)\]],? (?:{word} ?[(\[]\d{{1,3}}[)\]],? ){{0,8}}(?:to|through|and(?= [\"“])) {word} ?[(\[]{_HIGH}[)\]]"
        rf"|(?<![\w.=<>-]){_LOW} ?[(\[]{end}[)\]]{_TO}{_HIGH} ?[(\[]{end}[)\]]"
        rf"|(?<![\w.=<>-]){_LOW} ?[(\[]{end}[)\]](?:, \d{{1,3}} ?[(\[]{end}[)\]]){{1,9}},? (?:or|and|to) {_HIGH} ?[(\[]{end}[)\]]"
        rf"|[(\[]{_LOW}[)\]] {word} ?to [(\[]{_HIGH}[)\]] ?[\p{{L}}\"'“]",
        regex.IGNORECASE,
    )


@cache
def analogue() -> regex.Pattern[str]:
    """`a 100-mm visual analogue scale`, `10 cm VAS`: the line's length is its highest value."""
    return regex.compile(
        r"(?<![\w.-])(?P<high>\d{2,3})(?:[ -]|- )?(?P<unit>mm|cm|millimet(?:er|re)s?|centimet(?:er|re)s?)[ -]?(?:long )?(?:horizontal )?(?:(?:visual[ -]?)?analog(?:ue)?|VAS|lines?)\b",
        regex.IGNORECASE,
    )


@cache
def out_of() -> regex.Pattern[str]:
    """`out of 20`, `maximum score of 20`, `max. 20 points`."""
    return regex.compile(
        r"\b(?:out of(?: a(?: possible| maximum(?: of)?| total of)?)?(?: possible| maximum(?: of)?)?|(?:maximum|maximal|max\.?|highest)(?: possible| attainable| achievable| obtainable| total)? ?(?:score|points|mark|number of points|total)?(?: (?:of|is|was|being))?[ :=]{0,3})"
        r" ?(?P<high>\d{1,3})(?![\d.,]*\d|%| ?%)(?= ?(?:points?|marks?|items?|questions?|[).,;]|$| in | for | on | \())",
        regex.IGNORECASE,
    )
