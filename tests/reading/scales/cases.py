"""Short documents with the scales that their means must be given, kept as plain text in `cases/`.

A case begins with `== name`; each of its lines is a paragraph, `Section | text`. Under them, indented, stands one line for
each mean that has a scale: `5.12: 1..7 whole averaged items=5 summed single prorated inferred ends perhaps`, in any choice; `..20` is
a highest score alone, `perhaps` says that words far off tell of several answers. Every other mean must have nothing.
"""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from recheck.model import AVERAGED_BY, SCALE_ENDS_INFERRED, SCALE_INFERRED, Claim, Document, Passage

HOME = Path(__file__).parent / "cases"
WORDS = {
    "whole-scores": "whole",
    "averaged-scores": "averaged",
    "summed-scores": "summed",
    "single-item": "single",
    "prorated": "prorated",
}


@dataclass(frozen=True)
class ScaleCase:
    """A document, and what its means must be given, by the mean as printed."""

    name: str
    passages: tuple[Passage, ...]
    wanted: tuple[tuple[str, frozenset[str]], ...]

    @property
    def document(self) -> Document:
        """The document of the case."""
        return Document(name="case", format="text", sha256="", passages=self.passages)


def scale_cases() -> list[ScaleCase]:
    """All cases of all files."""
    return [case for path in sorted(HOME.glob("*.txt")) for case in _file(path)]


def _file(path: Path) -> list[ScaleCase]:
    parts = ("\n" + path.read_text(encoding="utf-8")).split("\n== ")
    return [_case(f"{path.stem}: {part.partition(chr(10))[0]}", part.splitlines()[1:]) for part in parts[1:]]


def _case(name: str, lines: list[str]) -> ScaleCase:
    passages, wanted = [], []
    for line in lines:
        if line.startswith("    "):
            mean, _, words = line.strip().partition(": ")
            wanted.append((mean, frozenset(words.split())))
        elif line.strip() and not line.startswith("#"):
            section, _, text = line.partition(" | ")
            passages.append(Passage(text=text, section=section))
    return ScaleCase(name, tuple(passages), tuple(wanted))


def given(claim: Claim) -> frozenset[str]:
    """What a summary was given, in the words of the cases."""
    low, high, items = (
        claim.values[name].text if name in claim.values else ""
        for name in ("scale_min", "scale_max", "items_per_score")
    )
    found = [WORDS[word] for word in claim.stated if word in WORDS]
    found += [f"{low}..{high}"] if low or high else []
    found += [f"items={items}"] if items else []
    found += ["inferred"] if SCALE_INFERRED in claim.notes else []
    told_far_off = any(note.startswith(AVERAGED_BY) for note in claim.notes)
    found += ["perhaps"] if told_far_off and "averaged" not in found else []
    found += ["ends"] if SCALE_ENDS_INFERRED in claim.notes else []
    return frozenset(found)


def told(claims: tuple[Claim, ...]) -> tuple[tuple[str, frozenset[str]], ...]:
    """The means of all summaries that were given anything, in reading order."""
    means = [(claim.values["mean"].text, given(claim)) for claim in claims if "mean" in claim.values]
    return tuple((mean, words) for mean, words in means if words)
