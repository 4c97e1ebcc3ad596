"""Results of other people: citations, and the sentences that tell what others found."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cache, cached_property

import regex

from recheck.reading.claims import Draft
from recheck.reading.numerals import Line
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT


@dataclass(frozen=True)
class Sentence:
    """A sentence as the traps look at it: its text, in lower case too, its tokens, its start in the view, the sentence before."""

    text: str
    low: str
    line: Line
    start: int
    before: str = ""
    known: dict[tuple[str, ...], bool] = field(default_factory=dict)

    def says(self, words: tuple[str, ...]) -> bool:
        """Tell whether the sentence has one of the words; each list is looked for once."""
        if words not in self.known:
            self.known[words] = any(word in self.low for word in words)
        return self.known[words]

    @cached_property
    def citations(self) -> list[regex.Match[str]]:
        """All citations of the sentence."""
        return list(_cited().finditer(self.text, timeout=TIMEOUT))

    @cached_property
    def own(self) -> bool:
        """Whether the sentence speaks of the manuscript's own work too."""
        return self.ours or _any(f" {self.low} ", _COMPARING)

    @cached_property
    def ours(self) -> bool:
        """Whether the sentence says that its results are the authors' own."""
        return _any(f" {self.low} ", _OURS)


@cache
def _cited() -> regex.Pattern[str]:
    """A citation: `Baker (2012)`, `(Baker et al., 2012)`, `Baker and Loaf [12]`, `Baker et al., in press`."""
    return regex.compile(
        r"\p{Lu}[\p{L}'-]{1,24}(?:,? (?:and|&) \p{Lu}[\p{L}'-]{1,24}| et al\.?| and colleagues)?"
        r"(?:'s)?,? ?(?P<year>[(\[]?(?:19|20)\d\d[a-z]?\b|\[\d{1,3}[\d, -]{0,12}\]"
        r"|[(]?(?:[Ii]n[ -]press|[Aa]ccepted|[Ss]ubmitted|in prep|personal communication)\b)"
    )


_VERBS = ("found", "reported", "report ", "observed", "showed", "shown", "obtained", "estimated", "demonstrated", "documented",
          "reveal", "shows", "reports", "finds", "presents", "lists", "concluded", "noted", "described", "yielded", "indicated", "suggested", "measured", "published")  # fmt: skip
_OURS = (" we ", " our ", "present study", "current study", "this study", "present experiment", "current experiment", " us ",
         "in the present")  # fmt: skip
_COMPARING = ("replicat", "consistent with", "in line with", "similar to", "following ", "using ", "used ", "according to",
              "in contrast to", "contrary to", "unlike", "as in ", "scale", "questionnaire", "adapted", "developed by", "in keeping with",
              "agree with", "agreement with", "compared with earlier", "compared to earlier", "extend")  # fmt: skip
_EARLIER = ("previous", "prior ", "earlier", "past ", "meta-analy", "meta analy", "literature", "original study", "original effect",
            "other studies", "other authors", "elsewhere", "systematic review", "et al")  # fmt: skip
_OTHERS = ("they found", "they reported", "they observed", "they showed", "the authors found", "the authors reported",
           "these authors", "their results", "their study", "their meta-analysis")  # fmt: skip


def quoted(draft: Draft, sentence: Sentence) -> bool:
    """Results of other people: a citation with a verb of reporting, or right beside the numbers."""
    low = f" {sentence.low} "
    if low.lstrip().startswith(_OTHERS):
        return True
    own = sentence.own
    start, end = draft.line.at(draft.first).start, draft.line.at(draft.after - 1).end
    is_tested = tested(draft)
    found = False
    if not is_tested and not sentence.ours and _going_on(sentence):
        return True
    if (
        not is_tested
        and not own
        and not draft.part("centre")
        and _cited_behind(sentence.text[end - sentence.start :])
    ):
        return True
    for match in sentence.citations:
        found = True
        before = sentence.text[: match.start()].rstrip()
        narrative = match["year"][0] in "([" and not before.endswith(("(", ";", "e.g.,"))
        # A sentence that starts with its citation tells what those authors did.
        reach = 60 if before else len(low)
        if narrative and not own and _any(low[match.end() : match.end() + reach], _VERBS):
            return True
        if _method(match[0]) and own:
            continue
        precedes = match.end() + sentence.start <= start
        if narrative and not own and precedes and _source().search(before.lower()):
            return True
        if not sentence.ours and is_tested and _closing(draft, match, sentence):
            return True
        if (not own or not is_tested) and _beside(
            draft.line.view.text, start, end, match.start() + sentence.start, match.end() + sentence.start
        ):
            return True
    if not sentence.ours and _numbered_study(sentence, end - sentence.start):
        return True
    if own or (is_tested and not found):
        return False
    return (
        sentence.says(_EARLIER)
        and (found or sentence.says(("meta-analy", "previous", "literature", "earlier")))
        and (sentence.says(_VERBS) or sentence.says(("meta-analy", "average effect", "overall effect")))
    )


@cache
def _behind() -> regex.Pattern[str]:
    return regex.compile(r"[ )]{0,2}\[(?:\d{1,3}(?:[,-] ?\d{1,3}){0,9}\]|[\p{Ll} ]{3,40}\[\d)")


def _cited_behind(text: str) -> bool:
    """Whether a numbered citation stands right behind the numbers: `R² = .21 [7]`, `r = .19 [data of [34]]`."""
    return "[" in text[:3] and bool(_behind().match(text, timeout=TIMEOUT))


@cache
def _same_subject() -> regex.Pattern[str]:
    """A sentence that goes on about what the one before told."""
    return regex.compile(
        r"""(?:they|(?:this|that|the\ latter|their|his|her|its)\ (?:[\w-]+\ )?(?:estimates?|effects?|values?|stud(?:y|ies)|results?|findings?
        |analys[ei]s|meta-analys[ei]s|trial|sample|authors?)|(?:the|these)\ authors)\b""",
        regex.VERBOSE,
    )


def _going_on(sentence: Sentence) -> bool:
    """Whether a sentence goes on about the earlier work that the one before cites: `This estimate was further reduced to g = .05`."""
    before = sentence.before
    if not before or _same_subject().match(sentence.low, timeout=TIMEOUT) is None:
        return False
    cited = " et al" in before or bool(_cited().search(before, timeout=TIMEOUT))
    return cited and not _any(f" {before.lower()} ", _OURS)


def _method(citation: str) -> bool:
    """Whether a citation is that of an effect size's definition, as in `Cohen's d (Cohen, 1988) was 0.5`."""
    return citation.startswith(
        ("Cohen", "Hedges", "Glass", "Lakens", "Cumming", "Rosenthal", "Borenstein", "Morris")
    )


@cache
def _before() -> regex.Pattern[str]:
    """What may stand between a citation and the numbers that it gives."""
    return regex.compile(
        r"[)\]]?,? ?(?:was|were|is|of|reported|found|observed|estimated|:|,|;)? ?(?:a|an)? ?[(\[]?"
    )


def _beside(text: str, start: int, end: int, first: int, last: int) -> bool:
    """Tell whether a citation stands in the brackets of the numbers, or directly before or after them."""
    if first >= end:
        between = text[end:first].lstrip(" )]%")
        opened = between.startswith("(") or between.startswith(";")
        names_only = not any(char.isdigit() or char in ")=<>" for char in between)
        return (opened and names_only and len(between) < 120) or between in (
            "by ",
            ", ",
            "in ",
            "from ",
            "; ",
        )
    if last <= start:
        return bool(_before().fullmatch(text[last:start], timeout=TIMEOUT))
    return False


def _numbered_study(sentence: Sentence, end: int) -> bool:
    """`In a trial of coached bakers scores rose by 9.0 points (P = 0.02),[2] …`: a study, its numbers, its number."""
    if _study().match(sentence.low, timeout=TIMEOUT) is None:
        return False
    return _number().search(sentence.text, end, timeout=TIMEOUT) is not None


@cache
def _number() -> regex.Pattern[str]:
    """A numbered citation: `[2]`, `[3, 7-9]`, or the raised number behind a stop."""
    return regex.compile(
        r"\[\d{1,3}(?:[,-] ?\d{1,3}){0,9}\]|[\p{Ll}.,;)][⁰¹²³⁴-⁹]{1,3}(?:,[⁰¹²³⁴-⁹]{1,3}){0,5}(?= |$)"
    )


@cache
def _study() -> regex.Pattern[str]:
    return regex.compile(
        r"""(?:(?:however|indeed|moreover|for\ example|for\ instance|similarly|likewise),?\ )?(?:(?:in|from|by)\ )?
        (?:an?|one|another|two|the\ only|some|several|the\ largest)\ (?:[\w-]+\ ){0,4}
        (?:stud(?:y|ies)|trials?|surveys?|cohorts?|reviews?|meta-analys[ei]s|series|audits?|experiments?|reports?)\b
        |[\w'-]{2,25}\ (?:et\ al\.?|and\ (?:colleagues|co-?workers))\ (?:\w+\ )?(?:found|reported|showed|observed|described|demonstrated)\b""",
        regex.VERBOSE,
    )


@cache
def _bracket() -> regex.Pattern[str]:
    """What may stand between the numbers and a citation that is the whole of the brackets behind them."""
    return regex.compile(
        r"(?:[)\]]? ?[(\[]|[;,] )(?:(?:\p{L}|[',.&;-]| |\d{4}[a-z]?\b){0,80}[,;] )?(?:\p{Lu}[\p{L}'-]+,? (?:and|&) )?"
    )


def _closing(draft: Draft, citation: regex.Match[str], sentence: Sentence) -> bool:
    """Whether the brackets right behind the numbers hold a citation and nothing else: `p = .02 (Crumb & Crust, 2014)`.

    `(cf. Crumb, 2014)` and `(replicating Crumb, 2014)` tell whom the result is compared with.
    """
    text = sentence.text
    end = draft.line.at(draft.after - 1).end - sentence.start
    between, behind = text[end : citation.start()], text[citation.end() : citation.end() + 1]
    return (
        citation.start() >= end
        and behind in (")", "]", ";", ",")
        and bool(_bracket().fullmatch(between, timeout=TIMEOUT))
        and not any(word in between.lower() for word in _COMPARED)
    )


_COMPARED = words("cf see also repl compar like unlike consist contra after follow method test using")
"""Beginnings of brackets that tell whom a result is compared with, or whose method was used."""


def of_earlier_work(sentence: Sentence) -> bool:
    """Whether the sentence opens by naming earlier work, without a citation: `In the original study, …`."""
    return not sentence.ours and bool(_opening().match(sentence.low, timeout=TIMEOUT))


@cache
def _source() -> regex.Pattern[str]:
    """Whose numbers they are: `Table 2 of`, `the trial by`, before a citation."""
    return regex.compile(
        r"\b(?:tables?|fig(?:ures?|s?\.)|stud(?:y|ies)|trials?|results?|findings?|experiments?|meta-analys[ei]s|reviews?|work|papers?"
        r"|reports?|estimates?|effects?|samples?|data|cohorts?)(?: \d{1,2}[a-z]?)? (?:of|by|from|in)$"
    )


def beside_earlier_work(draft: Draft, sentence: Sentence) -> bool:
    """Whether the words right before the numbers name earlier work: `that of a recent meta-analysis (g = 0.42 …`."""
    if not sentence.says(_EARLIER_WORDS):
        return False
    start = draft.line.at(draft.first).start - sentence.start
    return bool(_named().search(sentence.low[max(0, start - 90) : start], timeout=TIMEOUT))


_EARLIER_WORDS = (
    "recent",
    "previous",
    "earlier",
    "prior",
    "past",
    "published",
    "original",
    "seminal",
    "former",
)


@cache
def _named() -> regex.Pattern[str]:
    return regex.compile(
        r"""\b(?:recent|previous|earlier|prior|past|published|original|seminal|former)\ (?:[\w-]+\ ){0,2}?
        (?:stud(?:y|ies)|work|research|trials?|meta-analys[ei]s|reviews?|reports?|papers?|literature|findings?|estimates?|results?)
        (?:\ (?:of|on|in|with|among)(?:\ [\w-]+){1,4})?(?:\ (?:was|were|is|of|gave|found))?,?\ ?[(\[]?$""",
        regex.VERBOSE,
    )


@cache
def _opening() -> regex.Pattern[str]:
    return regex.compile(
        r"""(?:(?:however|indeed|yet|moreover|thus|but|and|for\ example|for\ instance|for\ comparison|by\ comparison),?\ )?
        (?:(?:in|from|by|among|across|according\ to)\ )?
        (?:(?:the|a|an|one|another|two|three|some|several|many|most|much|their|his|her|that|those|these|only)\ ){0,2}
        (?:[\w-]+\ )?
        (?:original|earlier|previous|prior|past|seminal|classic|published|former|first\ published)\ (?:[\w-]+\ ){0,2}?
        (?:stud(?:y|ies)|works?|research|experiments?|trials?|reports?|papers?|articles?|authors?|investigations?|findings?
          |evidence|literature|surveys?|replications?|meta-analys[ei]s|reviews?|results?)\b""",
        regex.VERBOSE,
    )


def _any(text: str, words: tuple[str, ...]) -> bool:
    return any(word in text for word in words)


def tested(draft: Draft) -> bool:
    """Tell whether a statistic stands with its degrees of freedom or its p."""
    statistic = draft.part("statistic")
    return statistic is not None and (bool(statistic.extra) or draft.get("df", "p", "n", "N") is not None)
