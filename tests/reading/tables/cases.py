"""Small tables with the claims that must be read from them, written once and rendered into every format.

A case in `cases/*.txt` begins with `== name`. Then come, in this order,

    caption: Table 1. Loaf height by flour.
    note: Values are mean (SD).
    also: pdf                         further formats in which this case is run
    not: text                         formats in which it is not
    | Flour | Height |                the grid; a line of dashes ends the head
    |-------|--------|
    | ..Rye | 4.1 (0.3) |             `..` moves a cell in, `<` joins it to its left, `^` to the cell above
        group-summary: mean = 4.1 | sd = 0.3 | outcome Rye

In a cell `//` breaks the line, `^{2}` raises and `_{p}` lowers. A claim is written as in the passages; it may
also name its `outcome`, its `group` (`>` divides levels of a name) and, divided by `;`, the groups of the summaries it is linked to (`of A ; B`).
Claims in `caption:` and `note:` count as well. A case without claims must give none.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from functools import cache
from pathlib import Path

from recheck.model import Claim
from tests.reading.passages import Expected, claim_of, fits

HOME = Path(__file__).parent / "cases"
MARKED_UP = ("grid", "jats", "html", "docx")


@dataclass(frozen=True)
class Spot:
    """A cell of the neutral notation with what it spans."""

    text: str
    row: int
    column: int
    rows: int = 1
    columns: int = 1
    indent: int = 0


@dataclass(frozen=True)
class Wanted:
    """A claim that a table must give; None where the case does not say."""

    expected: Expected
    outcome: str | None = None
    group: str | None = None
    of: tuple[str, ...] | None = None


@dataclass(frozen=True)
class TableCase:
    """One table: what is printed, how it is marked, and its claims."""

    name: str
    caption: str = ""
    notes: tuple[str, ...] = ()
    spots: tuple[Spot, ...] = ()
    rows: int = 0
    columns: int = 0
    head: int = 0
    also: tuple[str, ...] = ()
    never: tuple[str, ...] = ()
    claims: tuple[Wanted, ...] = field(default=())

    @property
    def spanned(self) -> bool:
        """Whether a cell reaches over several rows or columns."""
        return any(spot.rows > 1 or spot.columns > 1 for spot in self.spots)

    @property
    def formats(self) -> tuple[str, ...]:
        """The formats in which the case is run: all that can hold it."""
        plain = not self.spanned and not any("//" in spot.text for spot in self.spots)
        names = (*MARKED_UP, *(("markdown",) if plain else ()), *self.also)
        return tuple(name for name in names if name not in self.never)


@cache
def table_cases() -> tuple[TableCase, ...]:
    """All tables of all files."""
    return tuple(case for path in sorted(HOME.glob("*.txt")) for case in _file(path))


def wanted_fits(wanted: Wanted, claim: Claim, claims: Sequence[Claim]) -> bool:
    """Tell whether a claim is just what the case expects."""
    if not fits(wanted.expected, claim):
        return False
    if any(
        name is not None and _plain(name) != _plain(own)
        for name, own in ((wanted.outcome, claim.outcome), (wanted.group, claim.group))
    ):
        return False
    known = {other.id: other.group for other in claims}
    return wanted.of is None or tuple(known.get(one) for one in claim.groups) == wanted.of


def _plain(name: str | None) -> str:
    """A name with one kind of dash: the reader writes them as hyphens."""
    return (name or "").replace("–", "-").replace("−", "-")


def _file(path: Path) -> list[TableCase]:
    blocks = path.read_text(encoding="utf-8").split("\n== ")
    return [case_of(path.stem, block.splitlines()) for block in blocks[1:]]


def case_of(stem: str, lines: list[str]) -> TableCase:
    """The case that some lines of a file give; the first of them is its name."""
    said: dict[str, list[str]] = {"caption": [], "note": [], "also": [], "not": []}
    grid, head, claims = [], 0, []
    for line in lines[1:]:
        if line.startswith("|-"):
            head = len(grid)
        elif line.startswith("|"):
            grid.append([cell.strip() for cell in line.strip()[1:-1].split("|")])
        elif line.startswith("    "):
            claims.append(_wanted(line.strip()))
        elif line.strip() and not line.startswith("#"):
            key, _, rest = line.partition(":")
            said[key].append(rest.strip())
    widths = {len(row) for row in grid}
    assert len(widths) == 1, (stem, lines[0], sorted(widths))
    return TableCase(
        f"{stem}:{lines[0].strip()}", " ".join(said["caption"]), tuple(said["note"]), _spots(grid), len(grid),
        widths.pop(), head, tuple(" ".join(said["also"]).split()), tuple(" ".join(said["not"]).split()), tuple(claims),
    )  # fmt: skip


def _spots(grid: list[list[str]]) -> tuple[Spot, ...]:
    found = []
    for row, texts in enumerate(grid):
        for column, text in enumerate(texts):
            if text in ("<", "^"):
                continue
            across, down = 1, 1
            while column + across < len(texts) and texts[column + across] == "<":
                across += 1
            while row + down < len(grid) and grid[row + down][column] == "^":
                down += 1
            depth = (len(text) - len(text.lstrip("."))) // 2 if text.startswith("..") else 0
            found.append(Spot(text[2 * depth :].strip(), row, column, down, across, depth))
    return tuple(found)


def _wanted(line: str) -> Wanted:
    kind, _, rest = line.partition(": ")
    kept, own = [], {}
    for part in rest.split(" | "):
        word, _, said = part.partition(" ")
        if word in ("outcome", "group", "of"):
            own[word] = said.replace(" > ", " | ")
        else:
            kept.append(part)
    of = tuple(name.strip() for name in own["of"].split(";") if name.strip()) if "of" in own else None
    return Wanted(claim_of(f"{kind}: {' | '.join(kept)}"), own.get("outcome"), own.get("group"), of)
