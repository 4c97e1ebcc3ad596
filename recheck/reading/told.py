"""Claims of prose and of tables under the names of their outcomes and groups."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property

from recheck.model import LEVELS, Claim, Passage, Table
from recheck.reading.clauses import clauses
from recheck.reading.matching import (
    CONDITIONS,
    FUNCTION_WORDS,
    GENERIC_STEMS,
    LEFT_OUT,
    Key,
    Vocabulary,
    Word,
    abbreviations,
    terms,
    words_of,
)
from recheck.reading.naming_outcomes import About, Told, about
from recheck.reading.placed import Placed
from recheck.reading.referring import Reference, figures, key_of, references

_OPENING = 24
"""Characters within which a sentence opens with its reference: `As shown in Table 2`, `Table 2 shows`."""


@dataclass(frozen=True, eq=False)
class Entry:
    """A claim of a table: the key of the table, and the keys of its outcome and its group, outermost level first."""

    claim: Claim
    table: str
    outcome: tuple[Key, ...]
    group: tuple[Key, ...]

    @property
    def row(self) -> tuple[str, str | None]:
        """The row that it stands in."""
        return self.table, self.claim.place.row

    @cached_property
    def said(self) -> frozenset[str]:
        """All stems of its row's and its column's headings."""
        return frozenset(word.stem for text in self._headings for word in words_of(text))

    @cached_property
    def words(self) -> frozenset[str]:
        """The stems of its row's and its column's names, without units and statistics."""
        parts = (part for text in self._headings for part in text.split(LEVELS))
        return frozenset(stem for part in parts for stem in terms(part) if stem not in LEFT_OUT)

    @property
    def _headings(self) -> list[str]:
        place = self.claim.place
        return [text for text in (place.row, place.column, self.claim.outcome, self.claim.group) if text]


@dataclass(frozen=True, eq=False)
class Sentence:
    """A sentence with all tables that it refers to, those of them that were read, and its words outside numbers and references."""

    text: str
    words: Sequence[Word]
    referred: tuple[Reference, ...]
    here: tuple[Reference, ...]

    @property
    def table(self) -> str | None:
        """The only table that the sentence refers to."""
        keys = {reference.key for reference in self.referred}
        return keys.pop() if len(keys) == 1 else None

    @cached_property
    def stems(self) -> frozenset[str]:
        """All its words."""
        return frozenset(word.stem for word in self.words)

    @cached_property
    def foreign(self) -> frozenset[str]:
        """Those of its words that not every report of results uses."""
        return frozenset(s for s in self.stems if s not in GENERIC_STEMS and not s.endswith("ly"))

    def refers(self, at: int, table: str) -> bool:
        """Whether the clause at a place, or the opening of the sentence, plainly refers to a table, and no clause to another."""
        plain = [reference for reference in self.here if reference.plain]
        if not plain or self.table != table:
            return False
        own = next((c for c in clauses(self.text) if c[0] <= at < c[1]), (0, len(self.text)))
        return any(own[0] <= r.start < own[1] or r.start < _OPENING for r in plain)


@dataclass(frozen=True, slots=True, eq=False)
class Item:
    """A claim of prose with what it is about, and its sentence."""

    placed: Placed
    passage: Passage
    about: About
    sentence: Sentence

    @property
    def claim(self) -> Claim:
        """The claim itself."""
        return self.placed.claim

    @property
    def here(self) -> tuple[Reference, ...]:
        """The tables that its sentence refers to."""
        return self.sentence.here


@dataclass(frozen=True, slots=True, eq=False)
class Names:
    """All names of a document's tables, and the words of the caption and notes of each table that alone has its label.

    `modelled` are tables that speak of a model: their means may be adjusted ones.
    """

    outcomes: Vocabulary
    groups: Vocabulary
    entries: Mapping[str, Sequence[Entry]] = field(default_factory=dict)
    words: Mapping[str, frozenset[str]] = field(default_factory=dict)
    rows: Mapping[tuple[str, str | None], frozenset[str]] = field(default_factory=dict)
    modelled: frozenset[str] = frozenset()

    def known(self, entry: Entry) -> frozenset[str]:
        """The words of a table that hold of one of its rows: of caption and notes, and of the headings of that row's cells."""
        return self.words.get(entry.table, frozenset()) | self.rows.get(entry.row, frozenset())


def names_of(claims: Iterable[Claim], tables: Sequence[Table], texts: Iterable[str]) -> Names:
    """Index the claims of tables; `texts` are the passages, which define abbreviations."""
    entries: dict[str, list[Entry]] = defaultdict(list)
    for claim in claims:
        key = key_of(claim.place.table or "")
        entries[key].append(
            Entry(claim, key, _levels(claim.outcome), tuple(map(_plain_group, _levels(claim.group))))
        )
    told = [entry for found in entries.values() for entry in found]
    legends = [note.text for table in tables for note in (*table.notes, table.caption) if note is not None]
    short = abbreviations((*texts, *legends), legends) if told else {}
    outcomes = Vocabulary((e.outcome[-1] for e in told if e.outcome and _wordy(e.outcome[-1])), short)
    groups = Vocabulary((level for e in told for level in e.group), short)
    rows: dict[tuple[str, str | None], frozenset[str]] = {}
    for entry in told:
        rows[entry.row] = rows.get(entry.row, frozenset()) | entry.said
    modelled = frozenset(key_of(table.label) for table in tables if _speaks_of_model(table))
    return Names(outcomes, groups, entries, _words(tables, entries), rows, modelled)


def _wordy(key: Key) -> bool:
    """Whether a name has a word: a row that is called `20` cannot be looked for in a text."""
    return any(char.isalpha() for stem in key for char in stem)


def _levels(label: str | None) -> tuple[Key, ...]:
    return tuple(key for part in (label or "").split(LEVELS) if (key := terms(part)))


_MODELS = frozenset(
    ("adjusted", "adjusting", "adjustment", "marginal", "imputed", "imputation", "weighted", "transformed", "log", "covariate", "covariates",
     "ancova", "mixed", "robust", "bootstrap", "bootstrapped", "model", "models", "controlling", "lsmeans", "emm", "emms", "estimated", "predicted")
)  # fmt: skip


def _speaks_of_model(table: Table) -> bool:
    """Whether caption, notes or headings speak of a model, in whatever words."""
    texts = [p.text for p in (table.caption, *table.notes) if p is not None]
    texts += [cell.text for cell in table.cells if any(char.isalpha() for char in cell.text)]
    return any(
        word.strip("(),.;:").lower() in _MODELS for text in texts for word in text.replace("-", " ").split()
    )


_OF_PEOPLE = frozenset(("group", "condition", "arm", "cohort"))


def _plain_group(key: Key) -> Key:
    """A group's name without the word for it: `rye group` is rye."""
    return tuple(stem for stem in key if stem not in _OF_PEOPLE) or key


def _words(tables: Sequence[Table], entries: Mapping[str, Sequence[Entry]]) -> dict[str, frozenset[str]]:
    found: dict[str, frozenset[str]] = {}
    twice: set[str] = set()
    for table in tables:
        key = key_of(table.label)
        if key in found:
            twice.add(key)
        texts = [p.text for p in (table.caption, *table.notes) if p is not None]
        found[key] = _said_of_all(frozenset(w.stem for text in texts for w in words_of(text)))
    return {key: known for key, known in found.items() if key in entries and key not in twice}


def _said_of_all(told: frozenset[str]) -> frozenset[str]:
    """The words of a caption and notes that hold of all cells: of conditions, one alone; numbers never."""
    conditions = told & CONDITIONS
    plain = frozenset(word for word in told if not word[:1].isdigit())
    return plain if len(conditions) == 1 else plain - conditions


def items_of(placed: Sequence[Placed], passages: Sequence[Passage], names: Names) -> list[Item]:
    """Every claim of prose with what it is about, in reading order; `passage` of a claim counts `passages`.

    A sentence that takes longer than its patterns may names nothing.
    """
    by_sentence: dict[tuple[int, int], list[Placed]] = defaultdict(list)
    for item in placed:
        by_sentence[item.passage, item.sentence].append(item)
    found: list[Item] = []
    for (number, _), group in by_sentence.items():
        ordered = sorted(group, key=lambda p: p.start)
        try:
            found += _sentence(ordered, passages[number], names)
        except TimeoutError:
            found += [Item(p, passages[number], About(), Sentence(p.text, (), (), ())) for p in ordered]
    return found


_OF_ONE = ("group-summary", "count")
_OF_SCORES = ("group-summary", "t-test", "F-test", "rank-test", "comparison")


def _sentence(group: Sequence[Placed], passage: Passage, names: Names) -> list[Item]:
    text = group[0].text
    told = [
        Told(
            _first_number(text, p.start - p.at),
            p.end - p.at,
            p.claim.kind in _OF_ONE,
            p.claim.kind in _OF_SCORES,
        )
        for p in group
    ]
    referred = tuple(references(text))
    aside = [*((t.start, t.end) for t in told), *((r.start, r.end) for r in referred), *figures(text)]
    found = words_of(_without(text, aside))
    sentence = Sentence(text, found, referred, tuple(r for r in referred if r.key in names.entries))
    subjects = about(text, found, told, names.outcomes, names.groups)
    return [Item(p, passage, a, sentence) for p, a in zip(group, subjects, strict=True)]


_SHORT = 9
"""Characters before the number in which no name has room beside `mean` or `M =`."""


def _first_number(text: str, start: int) -> int:
    """Where the numbers of a claim begin: `mean loaf height was 92.4` names its outcome before them."""
    if any(char.isdigit() for char in text[start : start + _SHORT]):
        return start
    digit = next((at for at in range(start, len(text)) if text[at].isdigit()), start)
    named = any(
        w.stem not in LEFT_OUT and w.stem not in FUNCTION_WORDS and len(w.stem) > 2
        for w in words_of(text[start:digit])
    )
    return digit if named else start


def _without(text: str, spans: Iterable[tuple[int, int]]) -> str:
    """A text with spaces in place of some of its characters."""
    for start, end in spans:
        text = f"{text[:start]}{' ' * (end - start)}{text[end:]}"
    return text
