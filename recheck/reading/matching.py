"""Words of the text against names in tables: case, plurals, hyphens and abbreviations do not matter."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from functools import cache, lru_cache
from typing import NamedTuple
from unicodedata import category

import regex

from recheck.reading.alike import TABLE
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT

Key = tuple[str, ...]
"""A name as its stems in order."""

FUNCTION_WORDS = words(
    "a an the of in on for to by with at from and or as per between among within than that this these those its their his her our "
    "both each all is are was were be been had has have did do does were s"
)
STATISTICS = words(
    "mean means average sd se sem std standard deviation deviations error errors median iqr range min max minimum maximum n "
    "number percent percentage m mdn ci interquartile ± + - value values p t f z r d g u df chi2 χ χ2 χ² η η2 η² test statistic M N F U Z W"
)
UNITS = words(
    "mm cm m km ml l dl cl g kg mg μg ug s sec secs ms min mins h hr hrs hour minute second year yr yrs day score scores point points % kcal kj "
    "kpa mmhg hz db °c unit cm2 cm3 m2 bpm w j v mv"
)


class Word(NamedTuple):
    """A word of a text: its stem, and where it stands."""

    stem: str
    start: int
    end: int


@lru_cache(maxsize=20_000)
def stem(word: str) -> str:
    """A word without its plural or genitive ending, in lower case; a capital alone stays one: `oven A`."""
    if len(word) == 1:
        return word
    low = word.lower().removesuffix("'s").rstrip("'")
    if len(low) > 4 and low.endswith("ies"):
        return low[:-3] + "y"
    if len(low) > 4 and low.endswith(("sses", "xes", "ches", "shes")):
        return low[:-2]
    if len(low) > 3 and low.endswith("s") and not low.endswith(("ss", "us", "is")):
        return low[:-1]
    return low


def words_of(text: str) -> list[Word]:
    """The words of a text with their stems, in order."""
    apart = text.translate(_apart())
    found: list[Word] = []
    at = 0
    for word in apart.split():
        start = apart.index(word, at)
        at = start + len(word)
        found.append(Word(stem(word), start, at))
    if found and found[0].stem == "A" and len(found) > 1:
        found[0] = Word("a", found[0].start, found[0].end)
    return found


@cache
def _apart() -> dict[int, str]:
    """A space for every sign that divides words; `%`, `°` and `±` are words."""
    signs = (code for code in range(0x3000) if category(chr(code))[0] in "PSC" and chr(code) not in "%°±")
    return dict.fromkeys(signs, " ")


@cache
def _brackets() -> regex.Pattern[str]:
    return regex.compile(r"[(\[]([^()\[\]]{0,60})[)\]]")


@lru_cache(maxsize=4_000)
def terms(label: str) -> Key:
    """What a label names, as stems: `Loaf height (mm), mean ± SD` is loaf, height.

    Statistics, units and sizes are left out; brackets are kept where they hold anything else, for
    `Height (week 2)` is not `Height (week 4)`.
    """
    plain = label.translate(TABLE)
    plain = _brackets().sub(_kept, plain, timeout=TIMEOUT)
    first, *parts = plain.split(",")
    plain = " ".join((first, *(part for part in parts if not _idle(part))))
    found = [word.stem for word in words_of(plain) if word.stem not in FUNCTION_WORDS]
    while len(found) > 1 and found[-1] in _SIGNS:
        found.pop()
    return tuple(w for w in found if w not in _STATISTIC_STEMS) or tuple(found)


def _idle(text: str) -> bool:
    """Whether a part of a label only says in what unit or by which statistic."""
    return all(word.stem in LEFT_OUT or word.stem in FUNCTION_WORDS for word in words_of(text))


_SIGNS = words("mm cm km ml dl cl kg mg μg ug ms sec min hr kcal kj kpa mmhg hz db °c cm2 cm3 m2 bpm %")
_STATISTIC_STEMS = frozenset(stem(word) for word in STATISTICS)
LEFT_OUT = frozenset(stem(word) for word in STATISTICS | UNITS)
"""Words of labels that name no outcome and no group."""


def _kept(match: regex.Match[str]) -> str:
    """A bracket of a label, or nothing where it holds a unit, a statistic, a size or an abbreviation."""
    inner = match[1].strip()
    found = [word.stem for word in words_of(inner)]
    abbreviation = len(found) == 1 and any(char.isupper() for char in inner[1:])
    sized = "=" in inner or inner.replace(",", "").isdigit() or not any(char.isalpha() for char in inner)
    return " " if abbreviation or sized or _idle(inner) else f" {inner} "


@dataclass(frozen=True, slots=True)
class Mention:
    """A name in a text: its key, where it stands, and whether it stands alone.

    `exact` is false where a word beside it may make it another name: `loaf height gain` is not
    `loaf height`.
    """

    key: Key
    start: int
    end: int
    exact: bool


class Vocabulary:
    """Names that can be looked for in a text, each a set of stems."""

    def __init__(self, keys: Iterable[Key], short: Mapping[str, Key]) -> None:
        """Take the names as `terms` gives them, and what abbreviations stand for."""
        self._by_stem: dict[str, list[Key]] = {}
        self._short = {stem(k): v for k, v in short.items()}
        named = [key for key in dict.fromkeys(keys) if key]
        times = Counter(part for key in named for part in key)
        for key in named:
            # Under its rarest stem a name is looked at in the fewest texts.
            self._by_stem.setdefault(min(key, key=times.__getitem__), []).append(key)
        known = set(named)
        for name, long in self._short.items():
            if long in known:
                self._by_stem.setdefault(name, []).append(long)

    def __bool__(self) -> bool:
        """Whether there is any name."""
        return bool(self._by_stem)

    def mentions(self, text: str, found: Sequence[Word]) -> list[Mention]:
        """Every name in the words of a text, the longest where several overlap."""
        if not self._by_stem:
            return []
        stems = {word.stem for word in found}
        seen: list[Mention] = []
        for name in stems.intersection(self._by_stem):
            for key in self._by_stem[name]:
                if self._short.get(name) == key:
                    seen += [self._at(text, found, k, k, key) for k, w in enumerate(found) if w.stem == name]
                if stems.issuperset(key):
                    seen += [self._at(text, found, *span, key) for span in _windows(found, key)]
        return _longest(seen)

    def _at(self, text: str, found: Sequence[Word], first: int, last: int, key: Key) -> Mention:
        start, end = found[first].start, found[last].end
        return Mention(key, start, end, _alone(text, found, first, last))


def _windows(found: Sequence[Word], key: Key) -> Iterable[tuple[int, int]]:
    """First and last word of every shortest run that holds all stems of a name, and function words beside them."""
    wanted = set(key)
    last_seen: dict[str, int] = {}
    for at, word in enumerate(found):
        if word.stem not in wanted:
            if word.stem not in FUNCTION_WORDS:
                last_seen.clear()
            continue
        last_seen[word.stem] = at
        if len(last_seen) == len(wanted):
            yield min(last_seen.values()), at
            last_seen.clear()


def _longest(seen: Sequence[Mention]) -> list[Mention]:
    """Mentions that no longer one holds, in order."""
    ordered = sorted(seen, key=lambda m: (m.start, -(m.end - m.start), -len(m.key)))
    kept: list[Mention] = []
    for mention in ordered:
        if not kept or mention.start >= kept[-1].end:
            kept.append(mention)
        elif len(mention.key) > len(kept[-1].key):
            kept[-1] = mention
    return kept


_BESIDE = FUNCTION_WORDS | words(
    "mean average overall higher lower greater smaller larger better worse less more taller shorter longer faster slower "
    "differ differed difference difference show showed score scored rose fell increase increased decrease decreased change changed vary varied "
    "compare compared significantly significant only but while whereas if when where who which also on group groups "
    "condition conditions arm arms did than versus vs participants participant respectively there we it effect effects "
    "regarding concerning measured reached remained depend depended how both"
)
BESIDE_STEMS = frozenset(stem(word) for word in _BESIDE)
"""Words that may stand beside a name without being part of it."""
FOLLOWING = BESIDE_STEMS | {"not"}
"""Those that may follow it: `not trained` is not `trained`, but `loaf height not …` is `loaf height`."""


_GENERIC = _BESIDE | words(
    "table tables fig figure figures see shown shows given gives presented reported listed shown result results analysis analyses test tests "
    "t-test t anova way one two three sample samples independent student student's welch's welch paired unpaired unequal equal variances "
    "revealed indicated found find confirmed statistically reliable reliably slightly markedly clearly much more "
    "value values level levels statistic statistics mean means sd se n m moreover furthermore however "
    "thus therefore hence finally also instance expected hypothesis hypothesised hypothesized predicted "
    "had did we our observed obtained yielded produced used using compare comparing comparison comparisons pairwise effect size sizes "
    "large small medium moderate strong weak cohen's cohen hedges hedges' d g eta omega confidence interval intervals ci "
    "were was been being have having there here such so both either neither nor all any same different similar similarly "
    "can seen no not data evidence total difference differences significance nonsignificant non ns variable variables outcome outcomes measure measures "
    "ratio odds risk hazard association associated correlated correlation correlations "
    "participant participants patient patients apprentice apprentices baker bakers subject subjects individual individuals people "
    "it they them themselves are is be to into over under up down out"
)
CONDITIONS = frozenset(
    stem(word)
    for word in words(
        "before after during without except excluding including under first second third "
        "again further later earlier initial initially final finally pre post baseline follow-up followup follow week weeks day days month months "
        "year years session sessions visit block phase trial wave time men women male female boys girls young old older younger change changes changed "
        "gain gains increase increased decrease decreased rise rose fell fall improve improved improvement decline declined drop dropped "
        "reduction reduced difference-score adjusted unadjusted corrected raw controlling controlled model regression interaction main trend "
        "per protocol intention treat completers all total subset subgroup half third quarter morning evening night log"
    )
)
"""Words that say when, under what condition or of whom a number is true: a result with one is not the same without."""
_RESTRICTING = words("within when where while who whom whose which if only among")
GENERIC_STEMS = frozenset(stem(word) for word in _GENERIC - _RESTRICTING) - CONDITIONS
"""Words that any report of a result may use: they restrict nothing and name nothing of their own."""


_JOINING = ("+", "&", "×", "*", "±")


def _alone(text: str, found: Sequence[Word], first: int, last: int) -> bool:
    """Whether no word beside a name may be part of a longer name."""
    before = text[: found[first].start].rstrip(" ")
    after = text[found[last].end :].lstrip(" ")
    if after[:1] in _JOINING or before[-1:] in _JOINING:
        return False
    left = (
        first == 0
        or not (before[-1:].isalnum() or before[-1:] in ("-", "/", "%"))
        or found[first - 1].stem in BESIDE_STEMS
    )
    right = (
        last == len(found) - 1
        or not (after[:1].isalnum() or after[:1] in ("-", "/"))
        or found[last + 1].stem in FOLLOWING
    )
    return left and right


@cache
def _short() -> regex.Pattern[str]:
    """An abbreviation in brackets, where a text introduces it: `loaf height (LH)`."""
    return regex.compile(r"(?<=\p{L} )\((\p{Lu}[\p{L}\d-]{1,7})\)")


@cache
def _key() -> regex.Pattern[str]:
    """An abbreviation of a legend: `LH, loaf height;`, `LH = loaf height`, `LH: loaf height`."""
    return regex.compile(
        r"(?<![\p{L}\d])(\p{Lu}[\p{L}\d-]{1,7})(?: ?[=:] ?|, )(\p{L}[\p{L} -]{3,50})(?=[;.,]|$)"
    )


_REACH = 90
"""Characters before an abbreviation in brackets that may spell it out."""


def abbreviations(texts: Iterable[str], legends: Iterable[str]) -> dict[str, Key]:
    """What abbreviations stand for, where a text or a legend defines them with words of the same initials.

    One that is defined in two ways is left out.
    """
    found: dict[str, set[Key]] = {}
    for text in texts:
        for match in _short().finditer(text, timeout=TIMEOUT):
            words_before = text[max(0, match.start() - _REACH) : match.start()].split()
            _spelt_out(match[1], words_before, found, last=True)
    for text in legends:
        for match in _key().finditer(text, timeout=TIMEOUT):
            _spelt_out(match[1], match[2].split(), found, last=False)
    return {name: meanings.pop() for name, meanings in found.items() if len(meanings) == 1}


def _spelt_out(name: str, long: Sequence[str], found: dict[str, set[Key]], *, last: bool) -> None:
    """Note the words whose initials are the letters of an abbreviation: the last ones, or all."""
    letters = [char.lower() for char in name if char.isalpha()]
    parts = [part for word in long for part in word.split("-") if part]
    count = len(letters)
    own = parts[-count:] if last else parts
    if count > 1 and [p[0].lower() for p in own] == letters:
        found.setdefault(name, set()).add(terms(" ".join(own)))
