"""Short passages with the claims that must be read from them, kept as plain text in `passages/`.

A passage is one line; the claims that it must give follow it, indented, as

    kind: quantity relation printed text | ... | stated key | interval quantity | groups 2

A passage without such lines must give no claim at all. A line that starts with `#` is a comment.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from pathlib import Path

from recheck.model import Claim, Document, Passage

HOME = Path(__file__).parent / "passages"


@dataclass(frozen=True)
class Expected:
    """One claim as the text file gives it."""

    kind: str
    values: tuple[tuple[str, str, str], ...]
    stated: tuple[str, ...] = ()
    interval_of: str | None = None
    groups: int | None = None


@dataclass(frozen=True)
class Case:
    """A passage, where it is written, and its claims."""

    name: str
    text: str
    claims: tuple[Expected, ...] = field(default=())


def cases() -> list[Case]:
    """All passages of all files."""
    return [case for path in sorted(HOME.glob("*.txt")) for case in _file(path)]


def document(text: str) -> Document:
    """A document of one paragraph."""
    return Document(name="passage.txt", format="text", sha256="", passages=(Passage(text=text),))


def fits(expected: Expected, claim: Claim) -> bool:
    """Tell whether a claim is just what the file expects: kind, values, and no number more."""
    values = {(name, v.relation, v.text) for name, v in claim.values.items()}
    return (
        claim.kind == expected.kind
        and values == set(expected.values)
        and set(expected.stated) <= set(claim.stated)
        and expected.interval_of in (None, claim.interval_of)
        and expected.groups in (None, len(claim.groups))
    )


def _file(path: Path) -> list[Case]:
    found: list[Case] = []
    for number, line in enumerate(path.read_text(encoding="utf-8").splitlines(), 1):
        if not line.strip() or line.startswith("#"):
            continue
        if line.startswith("    "):
            last = found.pop()
            found.append(Case(last.name, last.text, (*last.claims, claim_of(line.strip()))))
        else:
            found.append(Case(f"{path.stem}:{number}", line))
    return found


def claim_of(line: str) -> Expected:
    """The claim that one line of such a file gives."""
    kind, _, rest = line.partition(": ")
    values, stated, interval_of, groups = [], [], None, None
    for part in rest.split(" | "):
        words = part.split(" ", 2)
        if words[0] == "stated":
            stated.append(words[1])
        elif words[0] == "interval":
            interval_of = words[1]
        elif words[0] == "groups":
            groups = int(words[1])
        else:
            values.append((words[0], words[1], words[2]))
    return Expected(kind, tuple(values), tuple(stated), interval_of, groups)
