"""Where a table holds a matrix of correlations: which columns, and which row is the same variable as each."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import cache

import regex

from recheck.model import LEVELS
from recheck.reading.numerals import printed
from recheck.reading.tables.frame import Frame
from recheck.reading.tables.headings import told
from recheck.reading.tables.values import Piece
from recheck.reading.views import TIMEOUT


@dataclass(frozen=True, slots=True)
class Matrix:
    """The columns of coefficients, the name of each, and the row of the same variable where there is one."""

    columns: tuple[int, ...]
    names: Mapping[int, str]
    twins: Mapping[int, int]
    square: bool
    sure: bool


@cache
def numbered() -> regex.Pattern[str]:
    """A variable with its number, or the number alone: `1. Height`, `(2)`."""
    return regex.compile(r"\(?(?P<number>\d{1,2})[.):]*(?:\s+(?P<name>\S.*)|$)")


@cache
def _correlation_words() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:inter-?)?correlat(?:ions?|ed|es)\b|\bcorrelation (?:coefficients?|matrix)|\bpearson|\bspearman|\bzero-order|\br values",
        regex.IGNORECASE,
    )


@cache
def _other_matrices() -> regex.Pattern[str]:
    return regex.compile(
        r"intra-?class|factor loading|component loading|loadings of|concordance|canonical corr|phylogenetic|kappa|fst\b|linkage disequilib|semipartial"
        r"|tetrachoric|genetic correlation|heritab|multiple correlation|regression coefficient|path coefficient|matthews|cophenetic|autocorrel"
        r"|kendall|tau[- ]?b|odds ratio|distance|similarit|coefficients? of variation|p[- ]values? (?:of|for) (?:the )?correlation",
        regex.IGNORECASE,
    )


def matrix_of(frame: Frame) -> Matrix | None:
    """The matrix of a block, None where its columns are something else."""
    text = frame.legend.text
    heads = " ".join(frame.sheet.column_header(column).text for column in frame.sheet.columns)
    words = _correlation_words().search(text, timeout=TIMEOUT) or _correlation_words().search(
        heads, timeout=TIMEOUT
    )
    if not words or _other_matrices().search(text, timeout=TIMEOUT):
        return None
    rows = {_key(_unnumbered(frame.sheet.row_header(row).last)) for row in frame.sheet.rows}
    free = [
        c
        for c in frame.sheet.columns
        if _may_hold_r(frame, c) or _key(_unnumbered(frame.sheet.column_header(c).last)) in rows
    ]
    twins = _twins(frame, free)
    square = len(set(twins.values())) >= 2 or (len(twins) == 1 and len(free) == 1)
    columns = [c for c in free if c in twins] if square else free
    like = [_like_r(frame, column) for column in columns]
    if True not in like or False in like or (not square and not _told_of_r(frame, columns)):
        return None
    names = {column: _name(frame, column, twins) for column in columns}
    return Matrix(tuple(columns), names, twins if square else {}, square, square or bool(words))


def _may_hold_r(frame: Frame, column: int) -> bool:
    """A column without a name for its numbers, or one of whose cells each is an r beside others of the kind."""
    role = frame.roles.get(column)
    if role is None:
        return True
    header = frame.sheet.column_header(column)
    alone = role.quantities == ("r",) and role.group is None and not role.name
    return bool(numbered().fullmatch(header.last.strip())) or (
        role.quantities[:1] == ("r",)
        and not alone
        and role.group is not None
        and set(role.quantities) <= {"r", "ci_low", "ci_high", "p", "n"}
        and not _p_beside(frame, column)
    )


def _p_beside(frame: Frame, column: int) -> bool:
    """Whether columns of p belong to those of r: then each row is a list, not a matrix."""
    roles = [frame.roles.get(c) for c in (column + 1, column + 2)]
    return any(role is not None and role.quantities == ("p",) for role in roles[:1])


def _twins(frame: Frame, columns: Sequence[int]) -> dict[int, int]:
    """For each column the row of the same variable, by number or by name."""
    numbers: dict[str, int] = {}
    names: dict[str, int] = {}
    for row in frame.sheet.rows:
        path = frame.sheet.row_header(row).path
        for label in path[-1:] or ():
            match = numbered().match(label.strip())
            if match:
                numbers.setdefault(match["number"], row)
            names.setdefault(_key(match["name"] if match and match["name"] else label), row)
    found: dict[int, int] = {}
    for column in columns:
        head = frame.sheet.column_header(column).last.strip()
        match = numbered().fullmatch(head)
        if match and match["number"] in numbers:
            found[column] = numbers[match["number"]]
        elif _key(head) in names and _key(head):
            found[column] = names[_key(head)]
    return found


def _unnumbered(label: str) -> str:
    match = numbered().match(label.strip())
    return match["name"] if match and match["name"] else label


def _key(text: str) -> str:
    return "".join(char for char in text.lower() if char.isalnum())


def _like_r(frame: Frame, column: int) -> bool | None:
    """Whether all numbers of a column can be correlations: from −1 to 1, most with two decimals or more; None for an empty one."""
    values = []
    for row in frame.sheet.rows:
        if row_part(frame, row) not in ("r", ""):
            continue
        found = pieces_of(frame, row, column)
        if found and found[0].shape in ("result", "count%", "fraction", "fraction%", "pair±"):
            return False
        if found and found[0].numbers:
            values.append(found[0].numbers[0])
    inside = [v for v in values if -1 <= v.value <= 1 and not v.percent]
    fine = [v for v in inside if v.decimals >= 2 or v.value in (0, 1)]
    return len(inside) == len(values) and len(fine) >= 0.7 * len(values) if values else None


@cache
def _with_bound() -> regex.Pattern[str]:
    """`.73** (< .001)`, `.41 (p = .03)`: a coefficient with its p in brackets."""
    number = r"[-+−]?(?:\d{0,3}[.,·]\d+|\d)"
    return regex.compile(
        rf"(?P<r>{number}) ?(?P<stars>[*†‡]*) ?[(\[](?:p ?)?(?P<p>[=<>≤≥] ?{number})[)\]](?P<after>[*†‡]*)"
    )


def pieces_of(frame: Frame, row: int, column: int) -> tuple[Piece, ...]:
    """The values of a cell; a p with a relation in brackets is read too."""
    found = frame.pieces(row, column)
    slot = frame.sheet.slot(row, column)
    if len(found) != 1 or found[0].shape not in ("unread", "result") or slot is None:
        return found
    match = _with_bound().fullmatch(slot.view.text.strip(), timeout=TIMEOUT)
    if match is None:
        return found
    page, box = slot.view.box(found[0].start, found[0].end)
    numbers = [printed(match["r"]), printed(match["p"].removeprefix("=").strip())]
    placed = tuple(replace(number, page=page, box=box) for number in numbers if number is not None)
    return (
        (replace(found[0], shape="pair(", numbers=placed, stars=match["stars"] + match["after"]),)
        if len(placed) == len(numbers)
        else found
    )


def _told_of_r(frame: Frame, columns: Sequence[int]) -> bool:
    """Whether the heading or caption of a table of variables by others says that all its numbers are correlations."""
    if all((role := frame.roles.get(c)) is not None and role.quantities[:1] == ("r",) for c in columns):
        return True
    parts = {part for row in frame.sheet.rows if (part := row_part(frame, row))}
    if parts and parts <= {"r", "p", "n"}:
        return True
    text = frame.legend.text
    spread = any(
        frame.roles.get(c) is not None
        for c in frame.sheet.columns
        if c not in columns and not _harmless(frame, c)
    )
    return not spread and bool(
        regex.search(
            r"correlations? (?:coefficients? )?(?:\([^)]{0,30}\b[rρ]\w?\b[^)]{0,60}\)|between|among|of|with|matrix)|(?:pearson|spearman)",
            text,
            timeout=TIMEOUT,
        )
    )


def _harmless(frame: Frame, column: int) -> bool:
    role = frame.roles.get(column)
    return role is None or set(role.quantities) <= {"mean", "sd", "n", "N", "other", "min", "max", "median"}


def _name(frame: Frame, column: int, twins: Mapping[int, int]) -> str:
    if column in twins:
        return variable(frame, twins[column])
    role = frame.roles.get(column)
    head = role.group if role is not None and role.group else frame.sheet.column_header(column).text
    match = numbered().fullmatch(head.strip())
    return match["name"] if match and match["name"] else head


def below_first(frame: Frame, row: int, variables: Iterable[int]) -> bool:
    """Whether the row's outer name is that of one of these rows which holds no number, the first of a triangle."""
    path = frame.sheet.row_header(row).path
    return len(path) > 1 and any(
        frame.sheet.row_header(r).path[-1:] == path[:1] for r in variables if frame.sheet.is_subheading(r)
    )


def variable(frame: Frame, row: int) -> str:
    """The name of a row without its number and without the words for the coefficient."""
    path, inner = frame.sheet.row_header(row).path, below_first(frame, row, frame.sheet.rows)
    own = (told(path[-1]).name if inner else frame.row_name(row)) or frame.sheet.row_header(row).last
    parts = []
    for part in own.split(LEVELS):
        match = numbered().match(part.strip())
        parts.append(match["name"] if match and match["name"] else part)
    return LEVELS.join(part for part in parts if part)


def row_part(frame: Frame, row: int) -> str:
    """What a row of its own below a coefficient holds: `r`, `p`, `n`; `other` for means and the like; "" where its name says nothing."""
    path = frame.sheet.row_header(row).path
    label = told(path[-1]) if path else None
    if label is None or not label.quantities or not label.whole:
        return ""
    only = label.quantities[0]
    if numbered().match(path[-1]):
        return ""
    return {"r": "r", "p": "p", "n": "n", "N": "n", "count": "n"}.get(only, "other")
