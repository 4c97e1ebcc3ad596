"""Counts with their percentages: `12 of 34 (35%)`, `35% (12/34)`, `12 bakers (35%)`, `n = 12, 35%`."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal

from recheck.model import Confidence
from recheck.reading.items import COUNT, Assignment
from recheck.reading.numerals import Line, Number, number_at, whole
from recheck.reading.spellings import spelled_at
from recheck.reading.tokens import words

_LABELS = words(
    "table tables fig figs figure figures experiment experiments study studies day days week weeks month months year years "
    "session sessions item items question questions block trial group groups level grade stage class type phase version chapter "
    "section equation no nr number quartile tertile quintile decile dose step model hypothesis sample part site cohort "
    "age aged ages score scores scored scoring rated rating ratings rate mean means median average sd se by than least most over under "
    "above below exceeding between ratio odds fraction score's ph weight height temperature volume factor version page pp vol lot batch"
)
"""Words before a number that make it a label, a size or a limit, and no count of units."""
_UNITS = words(
    "g kg mg μg ng cm mm m μm nm km ml l dl μl s ms sec min mins h hr hrs hours hour minutes seconds days day weeks week months month "
    "years year yrs y older younger old hz khz kcal kj j w v mv °c c f k pa kpa mmhg bpm rpm db mol mmol point points percent % ppm "
    "times fold st nd rd th pixels px degrees usd eur dollars euros marks cal calories to or scale part parts"
)
"""Words behind a number that say that it was measured."""
_GROUPS = words("group groups sample cohort site day week month year")
_NAMED_GROUPS = words("group groups sample cohort arm")
_BARE = words("in the of for from to and or a an each every per by this that our study")
_SHARES = words(
    "more less fewer out none half most all some any many few neither either each both quarter third thirds quarters"
)
"""Words whose `of` stands before a total: `none of 12 (0%)`, but not `a total of 12 (35%)`."""
_OF_ALL = words("the a total all of these those our its their")
_WHOLE = words(
    "of the total sample cohort all participants patients subjects cases respondents population group whole entire those"
)


def count_at(line: Line, index: int, first: Number) -> Assignment | None:
    """The count whose first number, the count itself or its percentage, stands at `index`."""
    if line.at(index).kind != "num":
        return None
    if first.percent:
        return _percent_first(line, index, first)
    count = whole(first)
    if count.decimals or not may_count(line, index, count):
        return None
    total = total_behind(line, count.after)
    if total is None:
        return _alone(line, index, count)
    size, after = total
    end = past_words(line, after, 6)
    percent = _percent(line, end, whole=False) or _unbracketed(line, after)
    if percent is None or count.value > size.value or measured(line, after) or no_fraction(line, index):
        return None
    return _count(line, index, count, size, percent)


_ONES = ("one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "eleven", "twelve", "thirteen",
         "fourteen", "fifteen", "sixteen", "seventeen", "eighteen", "nineteen", "twenty")  # fmt: skip
_TENS = ("thirty", "forty", "fifty", "sixty", "seventy", "eighty", "ninety")
NUMBER_WORDS = {
    **{word: value for value, word in enumerate(_ONES, 1)},
    **{word: 10 * value for value, word in enumerate(_TENS, 3)},
}


def number_in_words(line: Line, index: int) -> tuple[int, int] | None:
    """`Fifteen`, `twenty-five`: its value and the index after it."""
    if line.at(index - 1).text == "-" or line.at(index).low not in NUMBER_WORDS:
        return None
    value, after = NUMBER_WORDS[line.at(index).low], index + 1
    if value >= 20 and line.at(after).text == "-" and NUMBER_WORDS.get(line.at(after + 1).low, 10) < 10:
        value, after = value + NUMBER_WORDS[line.at(after + 1).low], after + 2
    return value, after


def count_in_words(line: Line, index: int) -> Assignment | None:
    """`Fifteen of 18 bakers (83.3%)`, `twenty-five bakers (83%)`: a count in words."""
    told = number_in_words(line, index)
    if told is None:
        return None
    value, after = told
    total = total_behind(line, after)
    percent = _percent(line, past_words(line, total[1] if total else after, 5), whole=total is None)
    alone = total is None and (value == 1 or line.at(index - 1).low in _LABELS or measured(line, after))
    if percent is None or alone or (total is not None and value > total[0].value):
        return None
    words_ = Number(Decimal(value), 0, line.at(index).start, line.at(after - 1).end, after)
    return _count(line, index, words_, total[0] if total else None, percent)


def sized_count(line: Line, index: int, size: Number) -> Assignment | None:
    """`n = 12 (35%)`, `n = 12, 35%`, `n = 12; 35.3%`: `size` is the number of the n that starts at `index`."""
    total = total_behind(line, size.after)
    after = total[1] if total else size.after
    percent = _percent(line, after, whole=total is None) or _unbracketed(line, after)
    return (
        _count(line, index, size, total[0] if total else None, percent)
        if percent and not size.decimals
        else None
    )


def _unbracketed(line: Line, index: int) -> tuple[Number, int] | None:
    """A percentage behind a sign, in brackets that close behind it: `(12/34, 35%)`, `(n = 12; 35%)`, `12/34 = 35%`."""
    sign = line.at(index).text
    number = number_at(line, index + 1) if sign in (",", ";", ":", "=") else None
    if number is None or not number.percent or not 0 <= number.value <= 100:
        return None
    closed = sign == "=" or line.at(number.after).text in (")", "]")
    return (number, number.after) if closed else None


def may_count(line: Line, index: int, count: Number) -> bool:
    """Whether a whole number may count units: no label, no year, no end of a range, no part of another number."""
    token, before = line.at(index), line.at(index - 1)
    if not token.spaced and before.text not in ("(", "[", "end", "") and before.kind != "end":
        return False
    if before.kind in ("rel", "num") or before.text in (
        "-",
        "/",
        "±",
        "$",
        "€",
        "£",
        "#",
        ":",
        "×",
        "*",
        "+",
    ):
        return before.text == ":" and token.spaced
    second = line.at(index - 2)
    numbered = second.low if before.text == "." else before.low
    if numbered in _LABELS and not _behind_group(line, index, numbered):
        return False
    if _totals(line, index) or (before.low == "in" and second.kind == "num"):
        return False
    fractions = line.at(index + 1).text == "/" == line.at(index - 3).text
    ranged = before.low in ("to", "and", "or") and second.kind == "num" and not fractions
    return not ranged and not (before.low == "in" and _is_year(count))


def _behind_group(line: Line, index: int, label: str) -> bool:
    """Whether a number behind `group` counts its members, not the groups: `in the trained group 65 of 210`, `group 12/34`.

    Or one behind `by` those who did it, not by how much: `passed by 29 of 34 apprentices`.
    """
    if label == "by":
        return line.at(index + 1).low in ("of", "out") and total_behind(line, index + 1) is not None
    if line.at(index + 1).text == "/":
        return label in _GROUPS
    named = line.at(index - 2).kind == "word" and line.at(index - 2).low not in _BARE
    return label in _NAMED_GROUPS and named and total_behind(line, index + 1) is not None


def _totals(line: Line, index: int) -> bool:
    """Whether a number behind `of` is the total of a count before it, or no number of units: `two of the 12`, `a score of 12`."""
    at = index - 1
    while line.at(at).low in _OF_ALL and line.at(at).low != "of" and at > index - 4:
        at -= 1
    part = line.at(at - 1)
    told = part.low in _LABELS or part.low in _SHARES or part.low in NUMBER_WORDS or part.kind == "num"
    return line.at(at).low == "of" and told


def _is_year(number: Number) -> bool:
    return 1900 <= number.value < 2100 and number.end - number.start == 4


def total_behind(line: Line, index: int) -> tuple[Number, int] | None:
    """The total behind a count: `of 34`, `out of the 34`, `of a total of 34`, `/34`."""
    if line.at(index).text == "/":
        number = number_at(line, index + 1)
        number = whole(number) if number else None
        plain = number is not None and line.at(index + 1).kind == "num" and not number.percent
        # A third or three quarters is a share, no count.
        return (
            (number, number.after) if number and plain and not number.decimals and number.value > 5 else None
        )
    at = index + (line.at(index).low == "out")
    if line.at(at).low != "of":
        return None
    at += 1
    while line.at(at).low in _OF_ALL and at < index + 6:
        at += 1
    number = number_at(line, at)
    if number is None or line.at(at).kind != "num" or number.percent:
        return None
    number = whole(number)
    return None if number.decimals or measured(line, number.after) else (number, number.after)


def measured(line: Line, index: int) -> bool:
    """Whether a unit stands behind a number."""
    return line.at(index).low in _UNITS or line.at(index).text in ("°", "-")


def past_words(line: Line, index: int, most: int) -> int:
    """Index after up to `most` words without a number or a stop among them."""
    at = index
    while at < index + most and (line.at(at).kind == "word" or line.at(at).text in ("-", "'")):
        at += 1
    return at


def no_fraction(line: Line, index: int) -> bool:
    """Whether `12/34` is a date, a ratio or an acuity."""
    if line.at(index + 1).text != "/":
        return False
    near = {token.low for token in line.tokens[max(0, index - 8) : index]}
    return line.at(index - 1).low in ("on", "since", "until", "dated") or bool(near & _FRACTIONS)


_FRACTIONS = words("acuity snellen vision ratio ratios odds dilution diluted")


def _percent(line: Line, index: int, *, whole: bool = True) -> tuple[Number, int] | None:
    """A percentage that has its brackets to itself or shares them with an interval or a p: `(35%)`, `(35%; 95% CI …`.

    With `whole` words may say that it is that of the whole sample: `(35% of the sample)`.
    """
    if line.at(index).text not in ("(", "["):
        return None
    number = number_at(line, index + 1)
    if number is None or not number.percent or not 0 <= number.value <= 100:
        return None
    at = number.after
    while whole and line.at(number.after).low == "of" and line.at(at).low in _WHOLE and at < number.after + 5:
        at += 1
    if line.at(at).text in (")", "]"):
        return number, at + 1
    more = line.at(at).text in (",", ";") and at == number.after
    if more and (spelled_at(line, at + 1) or _is_level(line, at + 1)):
        return number, number.after
    return None


def _is_level(line: Line, index: int) -> bool:
    """Whether the level of an interval stands here: `95% CI`."""
    number = number_at(line, index)
    spelled = spelled_at(line, number.after) if number else None
    return spelled is not None and spelled.symbol.part == "interval"


def _alone(line: Line, index: int, count: Number) -> Assignment | None:
    """A count without its total: `12 (35%)`, `12 bakers (35%)`; with it behind: `12 (35%) of 34`."""
    at = past_words(line, count.after, 5)
    between = line.tokens[count.after : at]
    if any(token.low in _UNITS for token in between) or (not between and _is_year(count)):
        return None
    alone = line.at(index - 1).text in ("(", "[") and not between and line.at(count.after).text in (",", ";")
    percent = _percent(line, at) or (_unbracketed(line, count.after) if alone else None)
    if percent is None:
        return None
    total = total_behind(line, percent[1]) if line.at(percent[1]).text != "/" else None
    if total and total[0].value >= count.value and line.at(percent[1]).low == "of":
        # `12 (35%) of 20 loaves` may tell the percentage of a larger whole.
        return replace(_count(line, index, count, total[0], (percent[0], total[1])), doubt="medium")
    return _count(line, index, count, None, percent)


def _percent_first(line: Line, index: int, percent: Number) -> Assignment | None:
    """`35% (12/34)`, `35% (12 of 34 loaves)`, `(35%; 12/34)`."""
    at = past_words(line, percent.after, 6)
    if line.at(index - 1).low == "by" or (
        line.at(index - 1).low == "of" and line.at(index - 2).low in _CHANGES
    ):
        return None
    if any(token.low in _LEVELS for token in line.tokens[percent.after : at]):
        return None
    opened = line.at(at).text in ("(", "[")
    if not opened and not (
        line.at(percent.after).text in (",", ";") and line.at(index - 1).text in ("(", "[")
    ):
        return None
    at = (at if opened else percent.after) + 1
    named = spelled_at(line, at)
    if named and named.symbol.part == "size" and line.at(named.after).kind == "rel":
        at = named.after + 1
    count = number_at(line, at)
    count = whole(count) if count and line.at(at).kind == "num" else None
    if count is None or count.decimals or count.percent:
        return None
    if opened and line.at(count.after).text in (")", "]") and line.at(count.after + 1).low == "of":
        # `67% (87) of the 130 loaves`
        behind = total_behind(line, count.after + 1)
        fits = behind is not None and count.value <= behind[0].value and percent.value <= 100
        found = _count(line, index, count, behind[0], (percent, behind[1])) if behind and fits else None
        return replace(found, doubt="medium") if found else None
    total = total_behind(line, count.after)
    if total is None or total[0].value < count.value or percent.value > 100:
        return None
    after = past_words(line, total[1], 5)
    if line.at(after).text not in (")", "]", ",", ";"):
        return None
    return _count(
        line, index, count, total[0], (percent, after + opened * (line.at(after).text in (")", "]")))
    )


PARTLY = words("these those them whom which who remaining latter former rest other others")


def with_whole(items: Sequence[Assignment], line: Line) -> list[Assignment]:
    """The assignments, counts without a total given the one that opens the sentence: `Of the 34 bakers, 12 (35%) came`."""
    if not any(item.part == "count" for item in items):
        return list(items)
    first, other = line.at(0).low, line.at(0).low in _OPENERS
    if first not in ("of", "among", "out") and not other:
        return list(items)
    total = _opening(line) if other or first == "among" else total_behind(line, 0)
    at = past_words(line, total[1], 8) if total else 0
    # Only English puts a comma there for sure: `Von den 34 Betrieben kamen 12 (35 %)`.
    if total is None or (line.at(at).text != "," and not other):
        return list(items)
    counted = {k for item in items if item.part == "count" for k in range(item.first, item.after)}
    found = []
    for item in items:
        between = [t for k, t in enumerate(line.tokens[at : item.first], at) if k not in counted]
        told = [*between, *line.tokens[item.first : item.after + 3]]
        nested = any(t.kind == "num" or t.text == ";" for t in between) or any(t.low in PARTLY for t in told)
        named = any(name == "total" for name, _ in item.extra)
        if item.part == "count" and not named and not nested and item.printed.value <= total[0].value:
            extra = (*item.extra, ("total", total[0].printed(line)))
            item = replace(item, extra=extra, doubt="medium", notes=(*item.notes, _WHOLE_NOTE))
        found.append(item)
    return found


_OPENERS = words("von unter sur parmi de del dos das dei delle")
"""`Of` and `among` at the head of a German, French, Spanish, Portuguese or Italian sentence."""
_THE = words("den diesen insgesamt allen les ces los las estos estas os as i le gli")
_WHOLE_NOTE = "the total is the number that opens the sentence"


def _opening(line: Line) -> tuple[Number, int] | None:
    at = 1
    while (line.at(at).low in _OF_ALL or line.at(at).low in _THE) and at < 5:
        at += 1
    number = number_at(line, at) if line.at(at).kind == "num" else None
    number = whole(number) if number else None
    plain = number is not None and not number.percent and not number.decimals
    return (number, number.after) if number and plain and not measured(line, number.after) else None


_CHANGES = words(
    "increase decrease reduction rise fall gain loss change drop decline improvement growth power confidence hydration"
)
_LEVELS = words(
    "ci confidence power level credible interval solution increase decrease reduction rise improvement"
)
_ROUGHLY = words("about approximately around roughly nearly almost circa ca over")
_MODELLED = words(
    "average averaged mean median typical typically kaplan meier cumulative actuarial weighted adjusted standardized standardised "
    "estimated estimate model imputed extrapolated projected"
)
"""Words of a sentence whose percentages may be no plain shares of the counts beside them."""


def _count(
    line: Line, index: int, count: Number, total: Number | None, percent: tuple[Number, int]
) -> Assignment:
    extra = [("percent", percent[0].printed(line))]
    doubt: Confidence = "high"
    if total is not None:
        extra.append(("total", total.printed(line)))
        modelled = any(token.low in _MODELLED for token in line.tokens)
        doubt = "medium" if modelled or line.at(index - 1).low in _ROUGHLY else "high"
    printed = replace(count.printed(line), percent=False)
    return Assignment(COUNT, printed, index, percent[1], tuple(extra), loose=True, doubt=doubt)
