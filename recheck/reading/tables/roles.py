"""What the headings of a column, the name of a row and the legend say that a number is."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace

from recheck.model import LEVELS, Printed
from recheck.reading.tables.grid import Header, Sheet
from recheck.reading.tables.headings import Told, told
from recheck.reading.tables.legend import Legend
from recheck.reading.tables.values import Piece
from recheck.reading.tokens import words


@dataclass(frozen=True, slots=True)
class Role:
    """What numbers are called.

    `quantities` in the order in which a cell prints them; `group` the other levels of the heading,
    `name` what is left of the level that names the quantities; `n`, `df` and the `level` of an
    interval as printed in the heading; `sure` tells that nothing was guessed.
    """

    quantities: tuple[str, ...]
    group: str | None = None
    n: Printed | None = None
    df: tuple[Printed, ...] = ()
    stated: tuple[str, ...] = ()
    sure: bool = True
    name: str = ""
    level: Printed | None = None


@dataclass(frozen=True, slots=True)
class Group:
    """Whom a column or a row is about."""

    name: str
    n: Printed | None = None


def role_of(header: Header, legend: Legend) -> Role | None:
    """The role that a heading gives, from its innermost level outwards; None where no level tells one."""
    levels = [told(text) for text in header.path]
    at = next((k for k in range(len(levels) - 1, -1, -1) if _tells(levels, k, header, legend)), None)
    if at is None:
        return None
    quantities = _with_outer(levels, at)
    named = zip(levels, header.path, strict=True)
    others = [name for k, (level, text) in enumerate(named) if k != at and (name := _name(level, text))]
    return Role(
        quantities, LEVELS.join(others) or None, _first_n(levels), next((t.df for t in reversed(levels) if t.df), ()),
        tuple(dict.fromkeys(word for level in levels for word in level.stated)), name=levels[at].name,
        level=next((level.level for level in reversed(levels) if level.level is not None), None),
    )  # fmt: skip


def _tells(levels: Sequence[Told], at: int, header: Header, legend: Legend) -> bool:
    """Whether a level names quantities: not where its letters are explained as something else, nor `Low` without an interval."""
    level = levels[at]
    if not level.quantities or _explained(header.path[at], level, legend):
        return False
    if set(level.quantities) <= {"low", "high"}:
        return any("ci_low" in outer.quantities for outer in levels[:at])
    return not (level.quantities == ("se",) and level.percent_unit)


def _with_outer(levels: Sequence[Told], at: int) -> tuple[str, ...]:
    """The quantities of a level, with what the level over it says of them: `95% CI` over `Lower`."""
    quantities = levels[at].quantities
    if set(quantities) <= {"low", "high"}:
        return tuple(f"ci_{quantity}" for quantity in quantities)
    outer = {q for level in levels[:at] for q in level.quantities}
    if quantities == ("mean",) and "mean_difference" in outer:
        return ("mean_difference",)
    return quantities


_EXPANSIONS = {
    "se": ("standard error", "error", "erreur", "fehler"), "sd": ("standard dev", "deviation", "standardabw", "écart", "desvia"), "or": ("odds",), "rr": ("ratio", "risk"),
    "hr": ("hazard",), "ci_low": ("confidence", "interval"), "mean_difference": ("difference", "change"), "mean": ("mean", "average", "mittel", "moyenne", "media", "durchschnitt"),
    "b": ("coefficient", "regression", "slope", "estimate"), "p": ("prob", "value", "signif"), "n": ("number", "sample", "size", "count"), "N": ("number", "sample", "size", "count"),
    "d": ("cohen", "effect", "standardi"), "t": ("statistic", "student", "value", "test"), "F": ("statistic", "value", "ratio", "test", "anova"),
}  # fmt: skip


def _explained(text: str, level: Told, legend: Legend) -> bool:
    """Whether the notes give the letters of a heading another meaning: `SE, sleep efficiency`; `HR, heart rate`."""
    short = text.split("(")[0].split(",")[0].strip(" *†‡§")
    meaning = legend.abbreviations.get(short)
    if meaning is None or not told(short).quantities:
        return False
    known = _EXPANSIONS.get(level.quantities[0])
    return known is not None and not any(word in meaning for word in known)


def _name(level: Told, text: str) -> str:
    """The name that a level gives besides the one that names the quantities: there a lone capital (`B`) is a group."""
    return level.name or (text if len(text) == 1 and text.isupper() else "")


def _first_n(levels: Sequence[Told]) -> Printed | None:
    return next((level.n for level in reversed(levels) if level.n is not None), None)


def group_of(header: Header, legend: Legend) -> Group:
    """The group that a column is about: its heading without the levels that name quantities, and its n."""
    levels = [told(text) for text in header.path]
    last = len(levels) - 1
    names = [
        _name(level, text) if k < last else level.name
        for k, (level, text) in enumerate(zip(levels, header.path, strict=True))
    ]
    name = LEVELS.join(dict.fromkeys(name for name in names if name))
    n = _first_n(levels)
    if n is None and name:
        n = size_told(legend, (name, *reversed(names)))
    return Group(name, n or legend.each)


def size_told(legend: Legend, names: Sequence[str]) -> Printed | None:
    """The n that caption or notes give for the first of these names, in its own words or at the end of what is told: `working alone (n = 27)`."""
    plain = [name.lower() for name in names if name]
    for name in (*plain, *(name.removeprefix("in ") for name in plain)):
        if name in legend.ns:
            return legend.ns[name]
        ending = [
            n
            for told_, n in legend.ns.items()
            if told_.endswith(f" {name}") and _leads(told_, name) and not _listed(told_, name)
        ]
        if len(legend.ns) > 1 and len(ending) == 1 and len(name) >= _SHORTEST_NAME:
            return ending[0]
    return None


_LEADS = words(
    "the a and or in on with for of by as to from group groups using received given versus vs than were was"
)


def _leads(text: str, name: str) -> bool:
    """Whether the word before a name only leads to it: `working alone`, `in the malt`; not `no malt`, `late treatment`."""
    before = text.removesuffix(name).split()[-1:]
    return bool(before) and (before[0] in _LEADS or before[0].endswith("ing"))


def _listed(text: str, name: str) -> bool:
    """Whether a name only ends a list whose n is that of all: `scores before and after (N = 21)`."""
    before = text.removesuffix(name).split()
    return len(before) > 1 and (before[-1] in ("and", "or", "&") or before[-1].endswith(","))


_SHORTEST_NAME = 3


def column_roles(sheet: Sheet, legend: Legend) -> Mapping[int, Role]:
    """The roles of the columns that have one.

    Letters that only number the columns (`A`, `B`, `C` …, `M` and `F` for the sexes) give none.
    """
    found = {c: role for c in sheet.columns if (role := role_of(sheet.column_header(c), legend)) is not None}
    letters = {c: letter for c in sheet.columns if (letter := _letter(sheet.column_header(c)))}
    tested = any({"p", "df", "df1", "sd"} & set(role.quantities) for role in found.values())
    names = letters_as_names(letters.values()) - (SEXES if tested else frozenset())
    found = {
        c: role
        for c, role in found.items()
        if not _is_letter(letters.get(c, ""), role, names) and not _of_group(sheet, c, role, found, legend)
    }
    found |= _quartiles(sheet, found) | _frequencies(sheet, found)
    return {
        c: replace(role, quantities=("p",)) if _exact(sheet, c, role) else role for c, role in found.items()
    }


_QUARTILES = {"Q1": "q1", "P25": "q1", "Q3": "q3", "P75": "q3"}


def _quartiles(sheet: Sheet, found: Mapping[int, Role]) -> dict[int, Role]:
    """Columns called `Q1` and `Q3` beside a median; with a `Q2` between them they are quarters or questions."""
    heads = {c: sheet.column_header(c) for c in sheet.columns if c not in found}
    ends = {c: _QUARTILES[header.last] for c, header in heads.items() if header.last in _QUARTILES}
    median = any("median" in role.quantities for role in found.values())
    if (
        set(ends.values()) != {"q1", "q3"}
        or not median
        or any(header.last in ("Q2", "Q4") for header in heads.values())
    ):
        return {}
    return {
        c: Role((name,), LEVELS.join(told(text).name for text in heads[c].path[:-1]) or None)
        for c, name in ends.items()
    }


def _frequencies(sheet: Sheet, found: Mapping[int, Role]) -> dict[int, Role]:
    """Columns called `f` right before their percentages, in a table without tests: frequencies, no F."""
    if any({"p", "df", "df1", "df2", "ms"} & set(role.quantities) for role in found.values()):
        return {}
    shares = {c for c, role in found.items() if role.quantities == ("percent",)}
    return {
        c: replace(role, quantities=("count",))
        for c, role in found.items()
        if role.quantities == ("F",) and sheet.column_header(c).last == "f" and c + 1 in shares
    }


def _exact(sheet: Sheet, column: int, role: Role) -> bool:
    """Whether a column of `chi square (Fisher's exact)` prints p: that test has no statistic, and all its numbers are below 1."""
    if role.quantities != ("chi2",) or "fisher-exact" not in role.stated:
        return False
    texts = [slot.view.text.strip(" <*") for row in sheet.rows if (slot := sheet.slot(row, column))]
    return bool(texts) and all(
        text in ("1", "1.0", "1.00", "1.000") or text.startswith(("0.", ".")) for text in texts
    )


def _is_letter(letter: str, role: Role, names: frozenset[str]) -> bool:
    """Whether a role comes from a letter that only names its column."""
    return letter in names and told(letter).quantities == role.quantities


def _of_group(sheet: Sheet, column: int, role: Role, found: Mapping[int, Role], legend: Legend) -> bool:
    """Whether a lone capital over means with their spreads is a group, as the columns beside it are."""
    if (
        len(sheet.column_header(column).last) != 1
        or len(role.quantities) != 1
        or "regress" in legend.text
        or "coefficient" in legend.text
    ):
        return False
    beside = [c for c in sheet.columns if c not in found]
    return _in_pairs(sheet, column) and any(_in_pairs(sheet, c) for c in beside)


def _in_pairs(sheet: Sheet, column: int) -> bool:
    texts = [slot.view.text for row in sheet.rows if (slot := sheet.slot(row, column)) is not None]
    return bool(texts) and all(
        ("(" in text or "±" in text or "[" in text) and text[:1].isdigit() for text in texts
    )


SEXES = frozenset(("M", "F"))


def letters_as_names(letters: Iterable[str]) -> frozenset[str]:
    """Which single capitals only number things: neighbours in the alphabet of which one is no symbol (`A`, `B`), or both sexes."""
    found = {letter for letter in letters if len(letter) == 1 and letter.isupper()}
    names = set(SEXES) if found >= SEXES else set()
    for letter in found:
        run = {letter}
        while beside := {c for c in found - run if {chr(ord(c) - 1), chr(ord(c) + 1)} & run}:
            run |= beside
        if len(run) > 1 and any(not told(c).quantities for c in run):
            names |= run
    return frozenset(names)


def _letter(header: Header) -> str:
    """The single letter that a heading consists of at one of its levels or ends with in brackets, "" where there is none."""
    ends = (level[-2:-1] if level[-3:-2] == "(" and level[-1:] == ")" else level for level in header.path)
    return next((text for end in ends if len(text := end.strip(" .*")) == 1 and text.isalpha()), "")


# -- matching numbers with names ------------------------------------------------------------------------


_PAIRS = frozenset(("pair(", "pair[", "pair±", "count%"))
_PEOPLE = frozenset(("count", "percent", "total"))


def matched(piece: Piece, quantities: Sequence[str]) -> dict[str, Printed] | None:
    """The numbers of a piece under the names that its heading gives, None where they do not fit.

    A count is a whole number, a percentage at most 100, an interval in order; `label` words inside
    the cell (`range`, `SD`) win over the heading.
    """
    names = list(quantities)
    numbers = piece.numbers
    if not piece.has_value or not names:
        return None
    names = _relabelled(piece, names)
    if piece.shape == "count%" and not _PEOPLE & set(names):
        return None
    if piece.shape in ("fraction", "fraction%"):
        return _share(piece, names)
    if piece.shape == "pair±(":
        names = [*names, "n"] if len(names) == 2 else names
    if piece.shape == "pair±" and len(names) > 1 and names[1] not in ("sd", "se"):
        return None
    if len(numbers) == 2 and len(names) == 3 and names[1:] in (["q1", "q3"], ["min", "max"]):
        if names[1:] == ["q1", "q3"] and piece.shape in ("pair(", "pair["):
            return {names[0]: numbers[0], "iqr": numbers[1]}
        return None
    if piece.shape == "number" and list(quantities) == ["q1", "q3"]:
        return {"iqr": numbers[0]}
    if len(numbers) != len(names):
        return None
    values = dict(zip(names, numbers, strict=True))
    if piece.shape == "triple" and _misordered(values):
        return values
    return values if fits(values, numbers[0]) else None


def _misordered(values: Mapping[str, Printed]) -> bool:
    """Whether the ends of a spread that is said to be one stand the wrong way round: a misprint that a check tells of."""
    ends = next((e for e in (("q1", "q3"), ("min", "max")) if e[0] in values), None)
    return ends is not None and values[ends[0]].value > values[ends[1]].value > 0


def _relabelled(piece: Piece, names: list[str]) -> list[str]:
    """Names corrected by words in the cell's own brackets: `37.9 (range: 18.7–72.5)`."""
    inside = {
        "range": ["min", "max"],
        "iqr": ["q1", "q3"],
        "ci": ["ci_low", "ci_high"],
        "sd": ["sd"],
        "se": ["se"],
        "n": ["n"],
    }
    own = inside.get(piece.label)
    if own is None or piece.shape not in ("pair(", "pair[", "triple", "pair±-"):
        return names
    keep = len(piece.numbers) - len(own)
    return [*names[:keep], *own] if len(names) >= keep else names


def _share(piece: Piece, names: Sequence[str]) -> dict[str, Printed] | None:
    """`12/34` and `12/34 (35%)` under `n/N (%)`, `n (%)`, `%` or a heading that counts."""
    if not _PEOPLE & set(names) and set(names) - {"n", "N"}:
        return None
    values = dict(zip(("count", "total", "percent"), piece.numbers, strict=False))
    if {"count", "total"} <= set(names):
        # A heading that says `n/N` is believed; a count above its total is for a check to tell.
        return (
            values if all(fits({name: value}, piece.numbers[0]) for name, value in values.items()) else None
        )
    return values if fits(values, piece.numbers[0]) else None


def fits(values: Mapping[str, Printed], first: Printed) -> bool:
    """Whether numbers can be what they are called."""
    for name, value in values.items():
        if name in ("count", "total", "n", "N") and (value.decimals > 0 or value.value < 0 or value.percent):
            return False
        if name == "percent" and not 0 <= value.value <= 100:
            return False
        if name in ("sd", "se", "iqr") and (value.value < 0 or (value.percent and not first.percent)):
            return False
        if name == "p" and value.value < 0:
            return False
    if {"count", "total"} <= set(values) and values["count"].value > values["total"].value:
        return False
    return all(
        values[low].value <= values[high].value
        for low, high in (("q1", "q3"), ("min", "max"), ("ci_low", "ci_high"))
        if low in values and high in values
    )
