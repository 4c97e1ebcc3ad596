"""Whether the next assignment of a sentence belongs to the claim begun: one rule for each part that it plays."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from recheck.reading.items import Assignment
from recheck.reading.listed import of_another_test
from recheck.reading.numerals import Line, part_of_unit
from recheck.reading.tokens import words

Gap = Literal["tight", "loose", "apart"]

_CONNECTING = words(
    "paired unpaired independent samples sample welch welch's student student's t anova and with an a the at is was were effect size sizes of corresponding two tailed one sided exact associated or by "
    "its their value test two-sided uncorrected corrected adjusted bonferroni tukey holm fdr gg greenhouse geisser huynh "
    "feldt for s ms g kg mg cm mm m min h hz years year points ml % cohen cohens hedges partial yielding giving indicating "
    "observed both where as in each group per which had has mean overall model se sd i.e ie such that estimated sided "
    "power respectively however difference age only statistic resulting days hours seconds minutes kcal db μv mv "
    "participants units percent all large small medium moderate very also approximately about μm μg"
)
_TURNS = words(
    "levene levene's shapiro mauchly mauchly's bartlett bartlett's normality sphericity whereas but while although however versus vs than compared unlike"
)


def gap(line: Line, last: Assignment, item: Assignment) -> tuple[Gap, bool]:
    """How closely two assignments stand together, and whether a semicolon divides them."""
    between = list(line.tokens[last.after : item.first])
    semicolon = any(t.text == ";" for t in between)
    words = [t for t in between if t.kind == "word" and t.low not in _CONNECTING]
    numbers = sum(
        t.kind == "num" and not part_of_unit(line, k) and not _of_tails(line, k)
        for k, t in enumerate(between, last.after)
    )
    if last.quantity in ("b", "beta") and [t.text for t in between[:1] + between[2:3]] == ["(", ")"]:
        # `b = 0.42 (0.16), p = .009`: most likely the SE, which nobody names.
        numbers -= 1
    if any(t.low in _TURNS for t in between):
        return "apart", semicolon
    if not words and numbers == 0 and len(between) <= 12:
        return "tight", semicolon
    clause = any(t.low in (",", ";", "and", "but") for t in between[:1])
    inside = not any(t.text in "()[]" for t in between)
    if len(words) <= (4 if inside else 3) and numbers <= 1 and len(between) <= 12 and not clause:
        return "loose", semicolon
    return "apart", semicolon


def _of_tails(line: Line, index: int) -> bool:
    """Whether a number is that of `2-tailed` or `1 sided`."""
    hyphen = line.at(index + 1).text == "-"
    return line.at(index + 1 + hyphen).low in ("tailed", "sided", "tail", "tails")


@dataclass(frozen=True, slots=True)
class Situation:
    """What a rule of joining looks at."""

    current: list[Assignment]
    item: Assignment
    rest: Sequence[Assignment]
    semicolon: bool
    distance: Gap
    line: Line

    def has(self, *parts: str) -> bool:
        """Tell whether the current claim has an item that plays one of these parts."""
        return any(item.part in parts for item in self.current)

    def holds(self, *quantities: str) -> bool:
        """Tell whether the current claim holds one of these quantities."""
        held = {q for item in self.current for q in (item.quantity, *(k for k, _ in item.extra))}
        return bool(held & set(quantities))

    @property
    def divided(self) -> bool:
        """Whether a semicolon divides results here, not the numbers of one result: `t = 2.3; p = .03; d = 0.9`."""
        pairs = zip(self.current, self.current[1:], strict=False)
        return self.semicolon and not any(gap(self.line, one, two)[1] for one, two in pairs)

    @property
    def taken(self) -> bool:
        """Whether the item's own place in the claim is taken."""
        return self.holds(self.item.quantity)

    @property
    def tight(self) -> bool:
        """Whether nothing but connecting words stands between."""
        return self.distance == "tight"

    @property
    def compared(self) -> bool:
        """Whether the claim is the second of two that are set against each other: `42.1 (…) vs 41.5 (…)`."""
        first = self.current[0].first
        return any(
            t.low in ("vs", "versus", "v", "than") for t in self.line.tokens[max(0, first - 3) : first]
        )

    def coming(self, part: str, before: str) -> bool:
        """Tell whether a `part` follows tightly before the next `before` does."""
        last = self.item
        for item in self.rest:
            distance, semicolon = gap(self.line, last, item)
            if distance != "tight" or semicolon or _closes(self.line, last, item) or item.part == before:
                return False
            if item.part == part:
                return True
            last = item
        return False


def _closes(line: Line, last: Assignment, item: Assignment) -> bool:
    """Whether brackets close after one assignment and others open before the next."""
    between = [t.text for t in line.tokens[last.after : item.first]]
    return bool({")", "]"} & set(between)) and bool({"(", "["} & set(between))


_DIFFERENCES = ("difference", "differences", "change", "changes")
_GROUP = ("centre",)
RESULT = ("statistic", "estimate", "effect")


def _statistic(s: Situation) -> bool:
    """A second statistic is another result, except r as effect size, and z beside U."""
    if not s.tight or s.taken:
        return False
    if s.has("statistic"):
        return _beside_statistic(s)
    if s.has(*_GROUP, "spread") and not s.has("estimate"):
        return False
    if s.has("estimate", "effect"):
        if s.holds("p"):
            return not s.coming("p", "statistic")
        of_model = s.item.quantity == "F" and s.holds("r2", "adjusted_r2", "delta_r2")
        return s.has("estimate") or of_model or not s.divided
    if s.holds("p"):
        return not s.coming("p", "statistic") and not (s.has("other") and s.semicolon)
    return True


def _beside_statistic(s: Situation) -> bool:
    names = {item.quantity for item in s.current if item.part == "statistic"}
    if s.item.quantity == "r":
        own_p = s.holds("p") and (s.coming("p", "statistic") or (s.divided and s.current[-1].part == "p"))
        between = {t.low for t in s.line.tokens[s.current[-1].after : s.item.first]}
        between.add(s.line.at(s.item.after).low)
        # `…, p = .03, and r = .41 between height and mass` is a result of its own.
        return not s.item.extra and not own_p and not between & {"and", "between", "with"}
    if s.item.quantity == "z":
        return names <= {"u", "w"} or (names == {"r"} and not s.holds("df", "p"))
    if s.item.quantity in ("u", "w"):
        return names == {"z"}
    return names == {"r"} and not s.holds("df", "p") and s.item.quantity in ("t", "F")


def _centre(s: Situation) -> bool:
    if s.tight and [item.part for item in s.current] == ["spread"] and not s.coming("spread", "centre"):
        return True
    if s.tight and _both_centres(s):
        return True
    return s.tight and not s.has(
        "statistic", "estimate", "effect", "p", "centre", "spread", "interval", "other"
    )


def _both_centres(s: Situation) -> bool:
    """Whether mean and median of one group stand side by side: `mean of 61.2, median of 61, SD of 12`."""
    between = [token.low for token in s.line.tokens[s.current[-1].after : s.item.first]]
    short = s.item.after - s.item.first <= 4 and s.current[-1].after - s.current[-1].first <= 6
    alone = [item.part for item in s.current if item.part != "size"] == ["centre"]
    return alone and not s.taken and short and set(between) <= {",", "and", "/", ";"}


def _spread(s: Situation) -> bool:
    if s.taken or s.holds("spread"):
        return False
    if s.has(*_GROUP):
        return s.tight or s.current[-1].part == "centre"
    if s.item.quantity == "sd" and s.current[-1].part == "estimate" and _behind_unit(s):
        return s.holds("mean_difference") or _of_differences(s)
    if not s.tight:
        return False
    if s.item.quantity == "sd":
        return s.holds("mean_difference") and not s.has("statistic")
    return (s.has("statistic", "estimate", "effect") and not s.semicolon) or s.has("estimate")


def _behind_unit(s: Situation) -> bool:
    """Whether nothing but a unit stands before the brackets that a spread opens: `3.1 mmHg (SD 8.4`."""
    between = s.line.tokens[s.current[-1].after : s.item.first]
    unit = between[:-1]
    return (
        bool(between) and between[-1].text == "(" and len(unit) <= 2 and all(t.kind == "word" for t in unit)
    )


def _of_differences(s: Situation) -> bool:
    """Whether a spread is named that of differences: `rose by 4.2 points (SD of the differences = 6.0`."""
    return any(t.low in _DIFFERENCES for t in s.line.tokens[s.item.first : s.item.after])


def _estimate(s: Situation) -> bool:
    if s.taken or not s.tight or (s.has(*_GROUP, "spread") and not s.has(*RESULT)):
        return False
    if s.has("statistic"):
        if not s.holds("p"):
            return True
        return not (s.divided or s.coming("statistic", "p") or s.coming("p", "statistic"))
    if s.has("estimate", "effect"):
        again = s.has("interval") and (s.semicolon or s.holds("estimate") or s.coming("interval", "estimate"))
        return not s.holds("p") and not again
    if s.holds("p"):
        return not s.coming("p", "estimate") and not s.semicolon
    return True


def _effect(s: Situation) -> bool:
    if s.taken or not s.tight or (s.has(*_GROUP) and not s.has(*RESULT)):
        return False
    if s.has("statistic", "estimate", "effect"):
        apart = s.semicolon or s.item.quantity == "delta_r2"
        return not (s.coming("statistic", "p") and s.holds("p") and apart)
    return not s.holds("p") or not (s.semicolon or s.coming("p", "effect"))


def _p(s: Situation) -> bool:
    if s.holds("p"):
        return False
    if s.has(*_GROUP):
        if s.tight and _of_one_difference(s):
            return True
        return s.tight and s.holds("ci") and not s.compared
    if s.has("statistic"):
        return True
    if of_another_test(s.line, s.item):
        return False
    opened = s.line.at(s.item.first - 1).text == "("
    between = {token.low for token in s.line.tokens[s.current[-1].after : s.item.first]}
    one_clause = opened and not between & {"and", "or", "while", ",", ";"}
    if not s.tight and not (s.has("interval") and s.has("estimate") and one_clause):
        return False
    return s.has("estimate", "effect", "interval", "other", "df")


def _of_one_difference(s: Situation) -> bool:
    """Whether a p stands in the brackets of one number that is a difference or no mean at all: `(M_a−b = 0.3 ± 0.2; p = .12)`, `(M = 2.56: p < .01)`."""
    first, line = s.current[0], s.line
    start = first.first
    while line.at(start - 1).kind == "word" and start > first.first - 3:
        start -= 1
    opened = line.at(start - 1).text in ("(", "[") and line.at(s.item.after).text in (")", "]", ";", ",")
    lone = len(s.current) == 1 and line.at(first.after).text == ":"
    return opened and first.part == "centre" and (lone or ("-" in first.label and not s.has("size")))


def _interval(s: Situation) -> bool:
    if s.holds("ci_low") or s.holds("ci"):
        return False
    if s.item.quantity in ("range", "iqr"):
        return s.tight and s.has(*_GROUP)
    return s.tight or s.has(*RESULT, *_GROUP)


def _size(s: Situation) -> bool:
    if (
        s.has(*_GROUP)
        and s.has("spread")
        and not s.holds("n", "N")
        and s.line.at(s.item.first - 1).text in ("(", "[")
    ):
        return not s.semicolon
    opens = s.line.at(s.item.first - 1).text in ("(", "[")
    if opens and s.rest and s.rest[0].part == "centre" and s.rest[0].first == s.item.after + 1:
        return False
    if s.item.quantity == "other" or (s.holds("u", "w") and s.tight):
        return s.tight and s.has("statistic")
    return s.tight and not s.holds("n", "N") and not (s.semicolon and s.has("p") and not s.has("statistic"))


def _df(s: Situation) -> bool:
    if s.item.quantity == "df12":
        return s.has("statistic") and not s.holds("df", "df1", "df2")
    return (s.has("statistic") and not s.holds("df", "df1", "df2")) or (
        s.item.quantity == "df2" and s.holds("df1")
    )


def _count(s: Situation) -> bool:
    return False


def _other(s: Situation) -> bool:
    return s.tight and s.has("statistic") and not s.taken and not (s.semicolon and s.item.quantity != "mse")


RULES = {
    "statistic": _statistic, "centre": _centre, "spread": _spread, "estimate": _estimate, "effect": _effect,
    "p": _p, "interval": _interval, "size": _size, "df": _df, "count": _count, "other": _other,
}  # fmt: skip
