"""What the caption and the notes of a table say of all its numbers."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from decimal import Decimal
from functools import cache
from types import MappingProxyType

import regex

from recheck.model import Passage, Printed, Table
from recheck.reading.groups import announced_spread
from recheck.reading.numerals import printed
from recheck.reading.views import TIMEOUT, view_of
from recheck.reading.widths import MARGIN, tells_margins
from recheck.reading.wording import stated


@dataclass(frozen=True, slots=True)
class Legend:
    """What is said for the whole table.

    `stars` gives the p below which a mark is set; `spread` what stands after `±` and `brackets` the
    spread in brackets (`sd`, `se` or ""); `ns` the sizes of groups, `each` the one that all groups
    have, `N` that of the whole sample; `forms` every way in which the table is said to print its
    numbers, such as ("mean", "sd") and ("count", "percent"), `signed` those of them that are only told with `±`; `interval` is `ci` where brackets hold
    intervals, `level` their level, `df` the degrees of freedom of all tests, `total` what all percentages are of; `text` is all of it in lower case.
    """

    stars: Mapping[str, Printed] = field(default_factory=dict)
    spread: str = ""
    brackets: str = ""
    ns: Mapping[str, Printed] = field(default_factory=dict)
    N: Printed | None = None
    each: Printed | None = None
    stated: tuple[str, ...] = ()
    abbreviations: Mapping[str, str] = field(default_factory=dict)
    forms: tuple[tuple[str, ...], ...] = ()
    signed: frozenset[tuple[str, ...]] = frozenset()
    df: tuple[Printed, ...] = ()
    interval: str = ""
    level: Printed | None = None
    total: Printed | None = None
    text: str = ""

    @property
    def quantities(self) -> tuple[str, ...]:
        """The one way in which the table prints its numbers, () where it is said to have several or none."""
        return self.forms[0] if len(self.forms) == 1 else ()


def legend_of(table: Table) -> Legend:
    """Read the caption and the notes of a table."""
    passages = [*((table.caption,) if table.caption else ()), *table.notes]
    texts = [_text(passage) for passage in passages]
    whole = " ; ".join(texts)
    spread, brackets = announced_spread(whole)
    told = tuple(_forms(whole))
    forms = tuple(dict.fromkeys(form for form, _ in told))
    bracketed = {form for form, signed in told if not signed}
    for form in bracketed:
        if form[0] == "mean" and form[-1] in ("sd", "se") and not spread and not brackets:
            spread = brackets = form[-1]
    if not spread and not brackets:
        brackets = _alone(whole)
        spread = _after_sign(whole)
    if not spread and tells_margins(whole):
        spread = MARGIN
    sizes = _sizes(whole)
    return Legend(
        stars=_stars(texts), spread=spread, brackets=brackets, ns=sizes.ns, N=sizes.N, each=sizes.each,
        stated=stated(whole), abbreviations=_abbreviations(texts), forms=forms, signed=frozenset(forms) - bracketed, df=_df(whole),
        interval=_interval(whole), level=_level(whole), total=_total(whole), text=whole.lower(),
    )  # fmt: skip


def _text(passage: Passage) -> str:
    """The text as the grammar reads it; a mark in front of a note stays with its note."""
    return view_of(passage).text


# -- stars ------------------------------------------------------------------------------------------


@cache
def _star() -> regex.Pattern[str]:
    """A mark and its threshold, either first: `** p < .01`, `p < .05 (*)`, `*** 0.1%`, `†: P<0.10`."""
    level = r"(?P<level>(?:\d{1,2}(?:[.,]\d)? ?%|0?[.,·]\d{1,5}))"
    mark = r"(?P<mark>\*{1,4}|(?:\* ){1,3}\*|[†‡§¶#+^&]{1,3})"
    back = r"(?P<mark>\*{1,4}|[†‡§¶#]{1,3})"
    p = r"(?:[pP](?:[ -]?[vV]alues?)?|[Ss]ig(?:nifican(?:t|ce))?\.?(?: at)?(?: the)?|[Ss]ignificance(?: level)?)"
    return regex.compile(
        rf"""{mark} [ ]? [:=,)]? [ ]? (?:(?:indicates|denotes|means|is|are|was|correlation[ ]is|=)[ ])? {p}?
               [ ]? (?:(?:of|at|level|the|value)[ ])* (?P<relation>[<≤=])? [ ]? {level} (?!\d)
           | \b{p} [ ]? (?P<relation>[<≤]) [ ]? {level} [ ]? [(=:,]? [ ]? {back} (?![ ]?[:]?[ ]?{p}[ ]?[<≤])""",
        regex.VERBOSE,
    )


def _stars(texts: Sequence[str]) -> Mapping[str, Printed]:
    found: dict[str, Printed] = {}
    for text in texts:
        for match in _star().finditer(text, timeout=TIMEOUT):
            mark = match["mark"].replace(" ", "")
            level = printed(match["level"].replace(",", ".").rstrip("% "))
            if level is None or mark in found or match["relation"] == "=":
                continue
            value = level.value / 100 if "%" in match["level"] else level.value
            if not Decimal(0) < value <= Decimal("0.2"):
                continue
            decimals = level.decimals + 2 * ("%" in match["level"])
            relation = "≤" if match["relation"] == "≤" else "<"
            found[mark] = Printed(mark, value, decimals, relation)  # type: ignore[arg-type]
    return MappingProxyType(_in_order(found))


def _in_order(found: dict[str, Printed]) -> dict[str, Printed]:
    """More stars stand for a smaller p as a rule; the printed levels are taken as they are."""
    return dict(sorted(found.items(), key=lambda item: len(item[0])))


# -- what the cells hold ----------------------------------------------------------------------------


_MEAN = r"\b(?:means?|averages?|M|mean values?|arithmetic means?)\b"
_MEDIAN = r"\b(?:medians?|Mdn)\b"
_COUNT = r"\b(?:n|N|no|numbers?|counts?|frequenc(?:y|ies)|absolute (?:numbers?|frequenc(?:y|ies)))\b\.?"
_RATIO = {
    "or": r"\b(?:(?-i:a?ORs?)|odds ratios?)\b", "hr": r"\b(?:(?-i:a?HRs?)|hazards? ratios?)\b",
    "rr": r"\b(?:(?-i:a?RRs?)|(?:risk|rate|relative) (?:ratios?|risks?))\b",
    "mean_difference": r"\bmean differences?\b", "beta": r"\bβ|\b(?:standardi[sz]ed (?:regression )?coefficients?)\b",
    "b": r"\b(?:unstandardi[sz]ed |regression )?coefficients?\b",
}  # fmt: skip
_SECOND = {
    "sd": r"(?:standard deviations?|SDs?|S\.\s?D\.|s\.\s?d\.|sd|std\.? ?dev\w*)",
    "se": r"(?:standard errors?(?: of (?:the )?means?)?|SEMs?|SEs?|S\.\s?E\.(?:\s?M\.)?|s\.\s?e\.(?:\s?m\.)?)",
    "iqr": r"(?:inter-?quartile (?:ranges?|intervals?)|IQRs?|(?:the )?quartiles|25(?:th)?%? ?(?:percentiles?)? ?(?:-|,|to|and|/|;) ?75(?:th)?%?"
    r"|Q1 ?(?:-|,|to|and|;) ?Q3|(?:first|1st|lower)(?: quartile)? ?(?:-|,|to|and|;) ?(?:third|3rd|upper) quartiles?)",
    "range": r"(?:ranges?|min(?:imum)?\.? ?(?:-|,|to|and|;) ?max(?:imum)?)",
    "ci": r"(?:9\d ?% ?(?:CIs?|C\.I\.|confidence (?:intervals?|limits?))|CIs?|confidence intervals?)",
}
_PERCENT = r"(?:%|per ?cents?|percentages?|proportions?)"
_JOIN = (
    r"(?: values?| scores?)?[ ]?(?:±|\+/-|\+-|[(\[,;]|and|with|or|/)?[ ]?"
    r"(?:±|(?:and|the|their|its|with|[(\[]|±)[ ]?){0,3}(?:(?!inter)\w{4,14} )?[(\[]?"
)


@cache
def _form() -> regex.Pattern[str]:
    seconds = "|".join(f"(?P<{name}>{pattern})" for name, pattern in _SECOND.items())
    ratios = "|".join(f"(?P<of_{name}>{pattern})" for name, pattern in _RATIO.items())
    return regex.compile(
        rf"(?:(?P<mean>{_MEAN})|(?P<median>{_MEDIAN})|{ratios}){_JOIN}(?:{seconds})(?![\w])"
        rf"|(?P<count>{_COUNT})(?: of \w+)?[ ]?(?:[(\[,;/]|and|with)[ ]?(?:in )?[(\[]?{_PERCENT}",
        regex.IGNORECASE,
    )


def _forms(text: str) -> Iterator[tuple[tuple[str, ...], bool]]:
    """`mean ± SD`, `n (%)`, `median (25th–75th percentile)`, each as the quantities it prints, and whether `±` stands between."""
    for match in _form().finditer(text, timeout=TIMEOUT):
        if match["count"] is not None:
            yield ("count", "percent"), False
            continue
        second = next(name for name in _SECOND if match[name] is not None)
        first = next(
            name
            for name in ("mean", "median", *_RATIO)
            if match[name if name in ("mean", "median") else f"of_{name}"]
        )
        if second in ("sd", "se") and first == "median":
            continue
        ends = {"iqr": ("q1", "q3"), "range": ("min", "max"), "ci": ("ci_low", "ci_high")}
        yield (first, *ends.get(second, (second,))), "±" in match[0] or "+/-" in match[0]


@cache
def _in_brackets() -> regex.Pattern[str]:
    return regex.compile(
        rf"(?:(?P<sd>{_SECOND['sd']})|(?P<se>{_SECOND['se']})) (?:are |is |were )?(?:(?:given|shown|reported|presented|displayed) )?"
        r"(?:in|within) (?:\w+ )?(?:parenthes[ei]s|brackets)"
        rf"|parenthes[ei]s (?:are|show|indicate|denote|contain|represent)(?: the)? (?:(?P<sd>{_SECOND['sd']})|(?P<se>{_SECOND['se']}))",
        regex.IGNORECASE,
    )


def _alone(text: str) -> str:
    """`SD in parentheses`, `standard errors are shown in brackets`."""
    match = _in_brackets().search(text, timeout=TIMEOUT)
    if match is None:
        return ""
    return "sd" if match["sd"] is not None else "se"


@cache
def _sign() -> regex.Pattern[str]:
    return regex.compile(
        rf"(?:±|\+/-) ?(?:the |their |its |one |1 )?(?:(?P<sd>{_SECOND['sd']})|(?P<se>{_SECOND['se']}))(?!\w)",
        regex.IGNORECASE,
    )


def _after_sign(text: str) -> str:
    """`presented ± their standard deviations`, where no mean is spoken of."""
    kinds = {"sd" if match["sd"] is not None else "se" for match in _sign().finditer(text, timeout=TIMEOUT)}
    return kinds.pop() if len(kinds) == 1 else ""


@cache
def _interval_words() -> regex.Pattern[str]:
    return regex.compile(
        rf"\b(?P<ci>{_SECOND['ci']})\b[^.;]{{0,30}}(?:in|within) (?:\w+ )?(?:parenthes[ei]s|brackets)"
        rf"|(?:parenthes[ei]s|brackets) (?:are|show|indicate|denote|contain|represent)[^.;]{{0,12}}\b(?P<ci>{_SECOND['ci']})",
        regex.IGNORECASE,
    )


def _interval(text: str) -> str:
    return "ci" if _interval_words().search(text, timeout=TIMEOUT) else ""


@cache
def _levels() -> regex.Pattern[str]:
    return regex.compile(
        r"(?P<level>\d\d(?:\.\d)?) ?% ?(?:CIs?|C\.I\.|confidence (?:intervals?|limits?))", regex.IGNORECASE
    )


def _level(text: str) -> Printed | None:
    """The one level of the table's intervals."""
    found = {match["level"] for match in _levels().finditer(text, timeout=TIMEOUT)}
    return printed(f"{found.pop()}%") if len(found) == 1 else None


@cache
def _shares() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:percentages?|percents?|proportions?|%)(?: values?)? (?:(?:are|is|were|was|refers? to|refer to) )?(?:(?:calculated|computed|based|given|expressed|taken|shares?) )?"
        r"(?:out of|of|on|from|to)(?: all| the| total| a total of| the total of){0,2} (?:[nN] ?= ?)?(?P<total>\d{1,3}(?:[, ]\d{3})+|\d{2,7})(?![\d.]*\d| ?%)",
        regex.IGNORECASE,
    )


def _total(text: str) -> Printed | None:
    """What the notes say that all percentages are of."""
    found = {match["total"] for match in _shares().finditer(text, timeout=TIMEOUT)}
    return printed(found.pop().replace(" ", "").replace(",", "")) if len(found) == 1 else None


# -- sizes, degrees of freedom, abbreviations ---------------------------------------------------------


@dataclass(frozen=True, slots=True)
class _Sizes:
    ns: Mapping[str, Printed]
    N: Printed | None
    each: Printed | None


@cache
def _size() -> regex.Pattern[str]:
    number = r"(?P<number>\d{1,3}(?:[, ]\d{3})+|\d{1,7})(?![\d.,]*\d)"
    return regex.compile(
        rf"(?P<name>[\p{{L}}][\p{{L}}\d '+/-]{{0,40}}?)?[ ]?[,:(\[]?[ ]?\b(?P<sign>[nN])[ ]?=[ ]?{number}"
        r"(?P<each>(?:[ )]{0,2}|(?: [\p{L}-]{2,20}){1,3} )(?:per|in each|for each|each|in both|for both|for all|in all)\b)?"
    )


def _sizes(text: str) -> _Sizes:
    ns: dict[str, Printed] = {}
    each = total = None
    several = False
    for match in _size().finditer(text, timeout=TIMEOUT):
        size = printed(match["number"].replace(" ", "").replace(",", ""))
        if size is None:
            continue
        name = (match["name"] or "").strip().lower()
        for lead in ("and ", "the ", "of ", "in ", "or ", "for "):
            name = name.removeprefix(lead)
        if match["each"]:
            each = each or size
        elif name and name not in _NO_NAMES:
            ns.setdefault(name, size)
        if not match["each"]:
            several = several or (total is not None and total.value != size.value)
            total = total or size
    return _Sizes(MappingProxyType(ns), None if several or each or len(ns) > 1 else total, each)


_NO_NAMES = frozenset(
    ("note", "notes", "total", "sample", "subjects", "participants", "patients", "sample size", "all")
)


@cache
def _degrees() -> regex.Pattern[str]:
    return regex.compile(
        r"\bd\.?f\.?s?(?: for \w+(?: tests?)?)? ?(?:=|is|are|were) ?(?P<one>\d{1,6})(?:, ?(?P<two>\d{1,6}))?(?![\d.])"
    )


def _df(text: str) -> tuple[Printed, ...]:
    """The degrees of freedom that all tests of the table have: `df = 31 for all tests`."""
    found = {(m["one"], m["two"]) for m in _degrees().finditer(text, timeout=TIMEOUT)}
    if len(found) != 1:
        return ()
    values = (printed(text) for text in found.pop() if text)
    return tuple(value for value in values if value is not None)


@cache
def _abbreviation() -> regex.Pattern[str]:
    return regex.compile(
        r"(?:^|[;,.:]|abbreviations?:?) ?(?P<short>[\p{Lu}][\p{L}\d²/-]{0,9})(?: ?[:=,] ?| is | denotes )(?P<long>\p{L}[\p{L}\d '/-]{2,60})"
    )


def _abbreviations(texts: Sequence[str]) -> Mapping[str, str]:
    """`SE, sleep efficiency; BMI: body mass index`."""
    found: dict[str, str] = {}
    for text in texts:
        for match in _abbreviation().finditer(text, overlapped=True, timeout=TIMEOUT):
            found.setdefault(match["short"], match["long"].strip().lower())
    return MappingProxyType(found)
