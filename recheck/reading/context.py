"""What a document says once for all its results: the level, the model, what `±` stands for."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from functools import cache

import regex

from recheck.model import Context, Printed
from recheck.reading.groups import announced_spread
from recheck.reading.medians import announced_ends
from recheck.reading.numerals import Line, number_at, relation_at
from recheck.reading.tokens import DIGITS, Spans, tokens, words
from recheck.reading.views import TIMEOUT, View
from recheck.reading.widths import MARGIN, tells_margins
from recheck.reading.wording import background, pairs_alone


@dataclass(frozen=True, slots=True)
class Setting:
    """The context, with what the reader itself needs of it.

    `plus_minus` and `in_brackets` are what an unlabelled spread is said to be (`margin`: no spread at all), `behind_medians` what
    stands in brackets behind a median (`iqr`, `range`, ""); `by_permutation` tells that its F may be
    those of a permutational analysis (PERMANOVA); `credible` tells
    that the document's intervals are credible intervals, also where it writes CI; `pairs_alone`
    that all its corrections for several tests are those of comparisons of pairs.
    """

    context: Context
    plus_minus: str = ""
    in_brackets: str = ""
    credible: bool = False
    decimal_comma: bool = False
    pairs_alone: bool = False
    behind_medians: str = ""
    by_permutation: bool = False

    def at_own_level(self, value: Printed) -> Printed:
        """A p told in words at the document's own level: `ns` is larger than that, `significant` smaller.

        Where that level is above .05 `ns` is only known to be larger than .05: the level may be that of some tests.
        """
        alpha = self.context.alpha
        if value.text[:1].isalpha() and value.relation in "<>" and alpha is not None:
            share = alpha.value / 100 if alpha.percent else alpha.value
            if value.relation == ">" and share > value.value:
                return value
            return replace(value, value=share, decimals=alpha.decimals + 2 * alpha.percent)
        return value


def setting_of(views: Sequence[View], spans: Sequence[Spans]) -> Setting:
    """Read the context of a document from its passages and the spans of their sentences."""
    comma = decimal_comma(view.text for view in views)
    alpha, notes = _alpha(zip(views, spans, strict=True), comma)
    signs, brackets, ends = _announced(views)
    whole = " ".join(view.text for view in views if tells(view)).lower()
    credible = (
        "credible interval" in whole or "credibility interval" in whole or "highest-density interval" in whole
    )
    spoken = background(whole)
    return Setting(
        Context(alpha, spoken, tuple(notes)), signs, brackets,
        credible and "confidence interval" not in whole, comma, "adjusted-p-post-hoc" in spoken and pairs_alone(whole),
        ends, any(name in whole for name in ("permanova", "adonis", "permutational anova", "permutational multivariate")),
    )  # fmt: skip


_NOT_HERE = ("introduction", "background", "discussion", "limitations", "conclusion", "literature", "acknowledg", "references",
             "funding", "author", "conflict", "competing", "abstract", "general discussion", "theor")  # fmt: skip


def tells(view: View) -> bool:
    """Introductions and discussions speak of other studies too: what they say is not taken for this one."""
    section = (view.passage.section or "").lower().lstrip("0123456789. ")
    return not section.startswith(_NOT_HERE)


@cache
def _decimals() -> regex.Pattern[str]:
    return regex.compile(
        r"""(?:[=<>≤≥±] | \b(?:[Mm]eans?|[Mm]edian|M|SD|SE)\b)\ ?-?(?:
            (?P<comma>0?,\d+ | \d+,(?:\d{1,2}|0\d{2}|\d{4,}))  # 2,1  0,102  1,05  112,4848: no thousands
            | (?P<point>\d*[.·]\d+)
        )(?![.,]?\d)""",
        regex.VERBOSE,
    )


def decimal_comma(texts: Iterable[str]) -> bool:
    """Tell whether a document writes decimals with a comma after its relation signs, or after `mean` and `SD`."""
    return mostly_commas(texts, _decimals(), default=False)


def mostly_commas(texts: Iterable[str], decimals: regex.Pattern[str], *, default: bool) -> bool:
    """Tell whether most numbers that a pattern finds in its groups `comma` and `point` are written with a comma; `default` where it finds none."""
    commas = points = 0
    for text in texts:
        for match in decimals.finditer(text, timeout=TIMEOUT):
            commas += match["comma"] is not None
            points += match["point"] is not None
    return commas > points if commas or points else default


def _announced(views: Sequence[View]) -> tuple[str, str, str]:
    """The one meaning of `±`, of brackets after a mean and after a median that the document announces, "" if none or two."""
    signs: set[str] = set()
    brackets: set[str] = set()
    ends: set[str] = set()
    margins = False
    for view in views:
        low = view.text.lower()
        # What a caption or a note says of `±` is said of its own table.
        margins = margins or (view.passage.kind == "body" and tells_margins(low))
        if "median" in low:
            ends.add(announced_ends(low))
        if "±" not in low and "mean" not in low:
            continue
        sign, bracket = announced_spread(view.text)
        signs.add(sign)
        brackets.add(bracket)
    return MARGIN if margins else _only(signs), _only(brackets), _only(ends)


def in_paragraph(view: View, spans: Spans) -> str | None:
    """What the sentences of one paragraph say stands after `±`: "" where they differ, None where none tells."""
    text = view.text
    if "±" not in text and "+/" not in text:
        return None
    kinds = {announced_spread(text[start:end])[0] for start, end in spans} - {""}
    if tells_margins(text):
        return MARGIN
    return _only(kinds) if kinds else None


def _only(kinds: set[str]) -> str:
    kinds = kinds - {""}
    return kinds.pop() if len(kinds) == 1 else ""


@cache
def _level() -> regex.Pattern[str]:
    """Sentences that may set a level of significance."""
    return regex.compile(
        r"\b(?:alpha|significan(?:t|ce)\b.{0,60}?(?:level|threshold|set|consider|deem|accept|defin|criteri|regard)"
        r"|(?:level|threshold|consider|deem|accept|criteri|regard|set|defin|declar|taken|judg)\w*\b.{0,80}?significan)|α",
        regex.IGNORECASE | regex.DOTALL,
    )


_NO_LEVEL = ("cronbach", "reliab", "internal consist", "mcdonald", "krippendorff", "omega")
_SPECIAL = ("bonferroni", "corrected", "adjusted", "post hoc", "post-hoc", "interim", "one-tailed", "one-sided", "power",
            "exploratory", "pairwise", "multiple comparisons", "sample size", "interaction", "cluster", "voxel")  # fmt: skip


def _alpha(views: Iterable[tuple[View, Spans]], comma: bool) -> tuple[Printed | None, list[str]]:
    """The level for the main tests, with a note where the document gives several."""
    found: list[tuple[Printed, bool]] = []
    for view, spans in views:
        lowered = view.text.lower()
        if view.passage.kind == "heading" or not (
            "signific" in lowered or "alpha" in lowered or "α" in lowered
        ):
            continue
        for start, end in spans:
            text = view.text[start:end]
            low = text.lower()
            if DIGITS.isdisjoint(text) or any(word in low for word in _NO_LEVEL):
                continue
            if not _level().search(text, timeout=TIMEOUT):
                continue
            level = _level_in(Line(view, tokens(view, start, end), comma), low)
            if level is not None:
                found.append((level, any(word in low for word in _SPECIAL)))
    return _chosen(found)


def _chosen(found: list[tuple[Printed, bool]]) -> tuple[Printed | None, list[str]]:
    main = [level for level, special in found if not special] or [level for level, _ in found]
    if not main:
        return None, []
    counts = Counter(level.interval() if level.percent else level.value for level in main)
    values = {_share(level) for level in main}
    if len(values) > 1:
        printed = ", ".join(dict.fromkeys(level.text for level in main))
        return None, [f"Several levels of significance are stated ({printed}); none is taken for all tests."]
    del counts
    return main[0], []


def _share(level: Printed) -> float:
    return level.number / 100 if level.percent else level.number


_AFTER = words(
    "alpha α level significance threshold p set than at significant values value cutoff criterion ps"
)


def _level_in(line: Line, low: str) -> Printed | None:
    """The number that a sentence sets as the level."""
    for index, token in enumerate(line.tokens):
        if token.kind != "num" or line.at(index - 1).text in ("-", "+"):
            continue
        number = number_at(line, index)
        if number is None:
            continue
        if line.at(index - 1).text == "=" and line.at(index - 2).low == "p":
            continue
        value = float(number.value) / (100 if number.percent else 1)
        if not 0.0005 <= value <= 0.2 or (value >= 0.01 and not number.percent and number.decimals < 1):
            continue
        near = {t.low for t in line.tokens[max(0, index - 7) : index]}
        if near & _AFTER and not near & {"power", "beta", "β", "cronbach"} and _sets(line, index, low):
            return number.printed(line)
    return None


def _sets(line: Line, index: int, low: str) -> bool:
    """`alpha = .05` and `p < .05 was considered significant` set a level; `p < .05` after a result does not."""
    near = {t.low for t in line.tokens[max(0, index - 7) : index]}
    if near & {"alpha", "α", "level", "threshold", "cutoff", "criterion"}:
        return True
    relation, _ = relation_at(line, index - 1)
    if relation == "=":
        return False
    return any(
        word in low
        for word in ("considered", "deemed", "regarded", "set at", "set to", "was accepted", "taken as", "defined as",
                     "significance was", "level of significance", "declared", "threshold", "taken to indicate", "criterion")
    )  # fmt: skip
