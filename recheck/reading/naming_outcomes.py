"""What a claim of prose is about: the outcome that was measured and the group, in the manuscript's words."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cache, cached_property

import regex

from recheck.reading.clauses import clauses, names_a_group, phrase_before, subject_of
from recheck.reading.matching import FOLLOWING, LEFT_OUT, Mention, Vocabulary, Word, terms
from recheck.reading.views import TIMEOUT


@dataclass(frozen=True, slots=True)
class Name:
    """A name as the text has it: its words, its key, and whether it surely is the claim's own."""

    text: str
    key: tuple[str, ...]
    sure: bool


@dataclass(frozen=True, slots=True)
class About:
    """What one claim of a sentence is about; `groups` are all that its clause names, `named` the words of all outcomes of the sentence."""

    outcome: Name | None = None
    group: Name | None = None
    groups: tuple[tuple[str, ...], ...] = ()
    named: frozenset[str] = frozenset()


@dataclass(frozen=True, slots=True)
class Told:
    """A claim in its sentence: where it stands there, whether it sums up one group, whether it compares or sums up scores."""

    start: int
    end: int
    summary: bool
    compares: bool = True


def about(
    text: str, found: Sequence[Word], told: Sequence[Told], outcomes: Vocabulary, groups: Vocabulary
) -> list[About]:
    """What each claim of a sentence is about; `told` in the order of the sentence, `found` its words outside them."""
    if not (outcomes or any(one.compares for one in told)):
        return [About()] * len(told)
    scene = _scene(text, found, told, outcomes, groups)
    grouped = _groups(scene)
    named = [_outcome(scene, at) for at in range(len(told))]
    words = frozenset(stem for mention in scene.outcomes if mention.exact for stem in mention.key)
    return [
        About(
            outcome,
            group,
            tuple(dict.fromkeys(m.key for m in scene.groups if _holds(scene.clause(at), m))),
            words,
        )
        for at, (outcome, group) in enumerate(zip(named, grouped, strict=True))
    ]


@dataclass(frozen=True)
class _Scene:
    """A sentence with the names and the claims in it."""

    text: str
    told: Sequence[Told]
    outcomes: Sequence[Mention]
    groups: Sequence[Mention]
    clauses: Sequence[tuple[int, int]]
    words: Sequence[Word]

    def clause(self, at: int) -> tuple[int, int]:
        """The clause in which a claim stands."""
        return self._clauses_of_claims[at]

    @cached_property
    def _clauses_of_claims(self) -> list[tuple[int, int]]:
        whole = (0, len(self.text))
        return [next((c for c in self.clauses if c[0] <= t.start < c[1]), whole) for t in self.told]

    def region(self, at: int) -> tuple[int, int]:
        """What stands between the claim before and this one, within the clause."""
        before = self.told[at - 1].end if at else 0
        return max(before, self.clause(at)[0]), self.told[at].start

    @cached_property
    def after(self) -> Sequence[Mention | None]:
        """The outcome right behind each claim: `t(34) = 2.20 for loaf height`."""
        return [_after(self, at, self.outcomes) for at in range(len(self.told))]

    @cached_property
    def listed(self) -> bool:
        """Whether names and numbers are told in two lists."""
        return "respectively" in self.text.lower()


def _scene(
    text: str, found: Sequence[Word], told: Sequence[Told], outcomes: Vocabulary, groups: Vocabulary
) -> _Scene:
    named = outcomes.mentions(text, found)
    whom = [
        m for m in groups.mentions(text, found) if not any(m.start < o.end and o.start < m.end for o in named)
    ]
    return _Scene(text, told, named, whom, _joined(text, clauses(text), whom), found)


def _joined(text: str, parts: Sequence[tuple[int, int]], groups: Sequence[Mention]) -> list[tuple[int, int]]:
    """The clauses, with those together of which the second begins with a group: `… in rye (M = …) and in wheat (M = …)`."""
    found: list[tuple[int, int]] = []
    for start, end in parts:
        first = next((m for m in groups if start <= m.start < end), None)
        opens = first is not None and _opening().fullmatch(text, start, first.start, timeout=TIMEOUT)
        if found and opens and text[:start].endswith("and"):
            found[-1] = (found[-1][0], end)
        else:
            found.append((start, end))
    return found


@cache
def _opening() -> regex.Pattern[str]:
    return regex.compile(r" ?(?:in |for |with |among |of |those )*(?:the )?")


def _holds(span: tuple[int, int], mention: Mention) -> bool:
    return span[0] <= mention.start < span[1]


def _name(text: str, mention: Mention, sure: bool = True) -> Name:
    return Name(" ".join(text[mention.start : mention.end].split()), mention.key, sure and mention.exact)


@cache
def _just_after() -> regex.Pattern[str]:
    return regex.compile(
        r"[)\]]?(?: ?(?:mm|cm|m|g|kg|ml|l|s|ms|min|h|hours?|minutes?|seconds?|days?|years?|points?|%))?,? ?[(\[]?"
        r"(?:in|for|on|of|with|among|from)? ?(?:the |their |its )?",
        regex.IGNORECASE,
    )


@cache
def _just_before() -> regex.Pattern[str]:
    return regex.compile(
        r"(?: (?:group|condition|arm|apprentice|baker|participant|patient|subject|loave|loaf|loaves|cohort|sample|children|adult)s?)?"
        r"(?: (?:was|were|had|scored|a mean of|at))?[,:]? ?[(\[]?(?:a )?(?:mean of )?"
    )


def _after(scene: _Scene, at: int, mentions: Sequence[Mention]) -> Mention | None:
    """The name right behind a claim: `(M = …) in the rye group`."""
    end = scene.told[at].end
    later = next((m for m in mentions if m.start >= end), None)
    if later is None or not _just_after().fullmatch(scene.text, end, later.start, timeout=TIMEOUT):
        return None
    return later


def _before(scene: _Scene, at: int, mentions: Sequence[Mention]) -> Mention | None:
    """The name right before a claim: `in the rye group (M = …`."""
    start = scene.told[at].start
    earlier = next((m for m in reversed(mentions) if m.end <= start), None)
    if earlier is None or not _just_before().fullmatch(scene.text, earlier.end, start, timeout=TIMEOUT):
        return None
    return earlier


def _outcome(scene: _Scene, at: int) -> Name | None:
    """The outcome of a claim: named right behind it, the only one before it, or the only one of its clause."""
    keys = {m.key for m in scene.outcomes}
    if not keys:
        return _spoken_outcome(scene, at)
    if scene.listed and len(keys) > 1:
        return None
    after = scene.after
    own = after[at]
    if own is not None and _attached(scene, at, own):
        return _outcome_name(scene, at, own)
    taken = {id(m) for k, m in enumerate(after) if m is not None and k != at and _attached(scene, k, m)}
    free = [m for m in scene.outcomes if id(m) not in taken] if len(keys) > 1 else scene.outcomes
    for span in (scene.region(at), scene.clause(at)):
        near = [m for m in free if _holds(span, m) and m.start < scene.told[at].start]
        if near:
            return _outcome_name(scene, at, near[-1]) if len({m.key for m in near}) == 1 else None
    return _elsewhere(scene, at, after) if len(keys) == 1 else None


def _elsewhere(scene: _Scene, at: int, after: Sequence[Mention | None]) -> Name | None:
    """The one outcome of a sentence, told behind all groups of a clause (`A (…) than B (…) on loaf height`) or in another clause."""
    later = next(
        (m for k, m in enumerate(after) if k > at and m is not None and _attached(scene, k, m)), None
    )
    if later is not None and _holds(scene.clause(at), later):
        return _outcome_name(scene, 0, later)
    first = scene.outcomes[0]
    return _name(scene.text, first, sure=False) if first.end <= scene.told[at].start else None


def _attached(scene: _Scene, at: int, mention: Mention) -> bool:
    """Whether `for` or `on` leads from a claim to the name behind it."""
    return bool({"for", "on"} & set(scene.text[scene.told[at].end : mention.start].lower().split()))


def _outcome_name(scene: _Scene, at: int, mention: Mention) -> Name:
    """An outcome, sure where it is not one of several and no other thing is named between the claim before and this one."""
    before = scene.text[max(0, mention.start - _REACH) : mention.start]
    one_of_list = _listed_before().search(before, timeout=TIMEOUT) or _listed_after().match(
        scene.text, mention.end, timeout=TIMEOUT
    )
    led = one_of_list and _led().search(before, timeout=TIMEOUT)
    foreign = at and _names_more(scene, scene.told[at - 1].end, scene.told[at].start)
    return _name(scene.text, mention, sure=not ((one_of_list and not led) or foreign or scene.listed))


_REACH = 24
"""Characters before a name in which what leads it in is looked for."""


def _names_more(scene: _Scene, start: int, end: int) -> bool:
    """Whether a stretch of the sentence has a word that belongs to no known name and may be one."""
    between = (
        w
        for w in scene.words
        if start <= w.start < end and w.stem not in FOLLOWING and w.stem not in LEFT_OUT
    )
    named = (*scene.outcomes, *scene.groups)
    return any(not any(m.start <= w.start < m.end for m in named) for w in between)


@cache
def _listed_before() -> regex.Pattern[str]:
    return regex.compile(r"\p{L},? (?:and|or|&) (?:the |mean )?$")


@cache
def _listed_after() -> regex.Pattern[str]:
    return regex.compile(
        r",? (?:and|or|&) (?!in |with |for |was |were |had )|, (?!with |in |for |but |however|t\(|F\()"
    )


@cache
def _led() -> regex.Pattern[str]:
    """A preposition that leads a name in: `for loaf height, rye and wheat differed`."""
    return regex.compile(
        r"\b(?:[Ff]or|[Oo]n|[Ii]n|[Rr]egarding|[Cc]oncerning|[Aa]s to|[Oo]f) (?:the |mean )?$"
    )


def _spoken_outcome(scene: _Scene, at: int) -> Name | None:
    """The outcome where no table names it: the subject of the clause."""
    if not scene.told[at].compares:
        return None
    start, end = scene.clause(at)
    subject = subject_of(scene.text[start:end])
    if subject is None or names_a_group(subject):
        return None
    key = terms(subject)
    return Name(subject, key, sure=True) if key else None


def _groups(scene: _Scene) -> list[Name | None]:
    """The group of each summary; all of a sentence are named in one manner, or none is."""
    numbers = [k for k, t in enumerate(scene.told) if t.summary]
    found: list[Name | None] = [None] * len(scene.told)
    if scene.listed:
        return found
    for find in (_before, _after):
        mentions = {k: _single(scene, find(scene, k, scene.groups)) for k in numbers}
        if numbers and all(mentions.values()) and _each_its_own(list(mentions.values())):
            for k, mention in mentions.items():
                found[k] = _name(scene.text, mention) if mention else None
            return found
    for k in numbers:
        found[k] = _beside(scene, k) or _spoken_group(scene, k, numbers)
    names = [f.key for f in found if f is not None]
    # One name for two summaries of a sentence belongs to one of them at most.
    return found if len(set(names)) == len(names) else [None] * len(found)


def _single(scene: _Scene, mention: Mention | None) -> Mention | None:
    """A group that is not told together with another one: in `with rye and wheat (M = …)` neither is the summary's."""
    if mention is None:
        return None
    gaps = (
        (m.end, mention.start) if m.end <= mention.start else (mention.end, m.start)
        for m in scene.groups
        if m is not mention
    )
    together = any(_and().fullmatch(scene.text, *gap, timeout=TIMEOUT) for gap in gaps if gap[0] <= gap[1])
    return None if together else mention


@cache
def _and() -> regex.Pattern[str]:
    return regex.compile(r",? ?(?:and|or|&|/|vs\.?|versus|,|\+)? ?(?:the |with |in |for )?")


def _each_its_own(mentions: Sequence[Mention | None]) -> bool:
    return len({id(m) for m in mentions}) == len(mentions)


def _beside(scene: _Scene, at: int) -> Name | None:
    """A group right before or behind a summary, where only one stands so near; or the subject of its clause."""
    before, after = (_single(scene, find(scene, at, scene.groups)) for find in (_before, _after))
    if (before is None) != (after is None):
        mention = before or after
        return _name(scene.text, mention) if mention else None
    start, end = scene.region(at)
    near = [m for m in scene.groups if start <= m.start < end]
    lead = scene.text[scene.clause(at)[0] : near[0].start].strip().lower() if near else ""
    if (
        before is None
        and len(near) == 1
        and lead in ("", "the", "and the", "and", "those in the", "apprentices in the")
    ):
        return _name(scene.text, near[0])
    return None


_OF_GROUPS = frozenset(("in", "for", "than", "among", "with", "from", "by", "and", "of"))


def _spoken_group(scene: _Scene, at: int, summaries: Sequence[int]) -> Name | None:
    """The group where no table names it: `in the rye group (M = …)`, `higher in A (…) than in B (…)`."""
    if scene.groups:
        return None
    phrase, lead = phrase_before(scene.text, scene.told[at].start)
    if not phrase:
        return None
    compared = len(summaries) > 1 and lead in _OF_GROUPS and not phrase.lower().split()[-1].endswith("ly")
    if not (names_a_group(phrase) or (compared and _set_against(scene, summaries))):
        return None
    key = terms(phrase)
    return Name(phrase, key, sure=names_a_group(phrase)) if key else None


def _set_against(scene: _Scene, summaries: Sequence[int]) -> bool:
    """Whether the last two summaries of a sentence are compared by `than`."""
    first, last = scene.told[summaries[0]], scene.told[summaries[-1]]
    return len(summaries) == 2 and " than " in scene.text[first.end : last.start]
