"""Paragraphs and grids in reading order become passages and tables: captions and notes find their table."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from functools import cache

import regex

from recheck.documents.grids import Spanned, table_of
from recheck.documents.sections import (
    caption_label,
    captioned,
    closes_references,
    looks_like_reference,
    opens_references,
    unlabelled,
)
from recheck.model import Passage, PassageKind, Table

_NOTE = (
    r"\W{0,3}(?:(?i:(?:table\s+)?(?:foot)?notes?\b\s*[.:—–-]|abbreviations?\b|legend\s*:|source\s*:|"
    r"(?:all\s+|unless\s.{0,40},\s*)?(?:values|data|numbers|figures|entries|cells|estimates|coefficients|scores|percentages)\b"
    r"[^.]{0,60}?\b(?:are|represent|were|indicate|show|refer|expressed|presented|reported|given)\b[^.]{0,60}?"
    r"(?:\b(?:means?|medians?|n|numbers?|percent(?:ages?)?|sd|se|sem|iqr|frequenc\w+|counts?|standard\w*|odds|ratios?|"
    r"unstandardi[sz]ed|adjusted|missing|available)\b|[±%(]))|"
    r"(?:[*∗⁎]{1,4}\s?|[†‡§¶#^]{1,3}\s*)(?:p\s*[<=≤]|P\s*[<=≤]|sig)|[*∗⁎]{1,4}(?=[^\W\d_]{3})|[†‡§¶#]{1,3}\s*(?=\w)|"
    r"[*∗⁎]{1,4}\s+(?i:[^.]{0,60}?\b(?:values?|data|compared|adjusted|differ\w*|means?|medians?|sd|se|ci|versus|vs|tests?)\b)|"
    r"[a-h]\s(?=[A-Z][a-z])|[nN]\s*=\s*\d|[pP]\s*[<=≤]|[pP]s?\s+(?:by|from|according\s+to|based\s+on|obtained|calculated|computed)\s|"
    r"[pP][ -]?values?\s+(?:are|were|is|from|in|for|by|not|based|refer|adjusted|"
    r"correspond|derive|come|compare|test|show|indicate|denote|obtained|calculated|computed)\b|"
    r"(?:(?:[Rr]obust|[Cc]lustered)\s+)?(?i:standard\s+(?:errors?|deviations?)|ses?|sds?|95\s?%\s+cis?|confidence\s+intervals?|"
    r"[tz][ -](?:statistics?|values?)|percentages|ranges?|interquartile\s+ranges?|iqrs?|ns?)\s[^.]{0,60}?(?i:\bin\s+(?:parenthes|brackets|italics|the\s+cells)|"
    r"\b(?:are|is)\s+(?:given|shown|printed|in|below|between))|"
    r"(?:[A-Z][A-Za-z]*[A-Z][\w-]*|[MNFtnpr])\s*(?:[:=]|,(?=\s[a-z]))\s*[^\d\s,;=][^,;=.]{2,60}(?:[;,.]|$))"
)
"""How texts below a table begin that speak of it: "Note.", "* p < .05", "Values are …", "SD, standard deviation;"."""


@cache
def _note() -> regex.Pattern[str]:
    """Compiled when the first table is met: it takes a tenth of a second."""
    return regex.compile(_NOTE)


_MARKED = regex.compile(r"(?:[a-z]|\d{1,2})[.):]?\s?(?=\S)")
_BARE_LABEL = regex.compile(r"\W*\w+\s*[A-Z]{0,2}[.-]?[\dIVX]+(?:[.-]\d+)?[a-z]?\s*[.:]?\W*")
_PLAIN_CAPTION = regex.compile(
    r"Table\s+[A-Z]{0,2}[.-]?\d{1,3}[a-z]?\s+(?!(?:and|or|to|shows?|presents?|lists?|gives?|reports?|contains?|provides?|"
    r"summari[sz]es|displays?|describes?|compares?|is|was|are|in|below|above)\b)[a-z]"
)
_MOST_NOTES = 12
_LONGEST_NOTE = 3000
_LONGEST_CAPTION = 1500


@dataclass(frozen=True, slots=True, eq=False)
class Grid:
    """Rows of cells as a file lists them; `caption` where it is one with the rows."""

    rows: tuple[tuple[Spanned, ...], ...]
    header_rows: int = 0
    doubts: tuple[str, ...] = ()
    caption: str = ""


@dataclass(frozen=True, slots=True, eq=False)
class Piece:
    """A paragraph or a grid.

    `level` is that of a heading. `small` says that the type is smaller than that of running text.
    """

    text: str = ""
    marks: str = ""
    kind: PassageKind = "body"
    level: int = 0
    line: int | None = None
    small: bool = False
    grid: Grid | None = None


@dataclass(frozen=True, slots=True, eq=False)
class _Role:
    """What a piece is to the table at index `table`."""

    table: int
    kind: PassageKind


def assembled(pieces: Sequence[Piece]) -> tuple[tuple[Passage, ...], tuple[Table, ...]]:
    """Give passages and tables; a table knows how many passages stand before it."""
    pieces = _with_whole_captions(pieces)
    roles = _roles(pieces)
    labels = _labels(pieces, roles)
    names = _names(pieces, labels)
    passages: list[Passage] = []
    grids: list[tuple[int, Grid, str | None, int]] = []
    belonging: dict[int, dict[str, list[Passage]]] = {}
    for at, (piece, kind, section, paragraph) in enumerate(_placed(pieces, roles)):
        if piece.grid is not None:
            grids.append((at, piece.grid, section, len(passages)))
            continue
        role = roles.get(at)
        label = names[role.table] if role else None
        passage = Passage(
            piece.text, kind, section, paragraph, piece.line, piece.marks,
            table=label or (_lone_label(piece.text) if kind == "caption" else None),
        )  # fmt: skip
        passages.append(passage)
        if role:
            belonging.setdefault(role.table, {}).setdefault(role.kind, []).append(passage)
    return tuple(passages), tuple(
        _table(grid, (labels.get(at, ""), names[at]), belonging.get(at, {}), section, before)
        for at, grid, section, before in grids
    )


def _lone_label(caption: str) -> str | None:
    """The label of a table whose rows stand elsewhere, or are a picture."""
    return caption_label(caption) or None if captioned(caption, sure=True) == "table" else None


def _labels(pieces: Sequence[Piece], roles: dict[int, _Role]) -> dict[int, str]:
    captions = {role.table: pieces[at].text for at, role in roles.items() if role.kind == "caption"}
    return {table: caption_label(text) for table, text in captions.items()}


def _names(pieces: Sequence[Piece], labels: dict[int, str]) -> dict[int, str]:
    """The name under which each table's cells are found: its label, or a number among those without one."""
    grids = [at for at, piece in enumerate(pieces) if piece.grid is not None]
    without = [at for at in grids if not labels.get(at)]
    numbered = {at: unlabelled(number) for number, at in enumerate(without, start=1)}
    return {at: numbered.get(at) or labels[at] for at in grids}


def _table(
    grid: Grid, names: tuple[str, str], belonging: dict[str, list[Passage]], section: str | None, before: int
) -> Table:
    label, name = names
    rows = [
        [cell._replace(passage=replace(cell.passage, table=name, section=section)) for cell in row]
        for row in grid.rows
    ]
    table = table_of(
        rows, label=label, caption=next(iter(belonging.get("caption", ())), None),
        notes=tuple(belonging.get("note", ())), header_rows=grid.header_rows, section=section, before=before,
    )  # fmt: skip
    return replace(table, doubts=(*table.doubts, *grid.doubts)) if grid.doubts else table


def _placed(
    pieces: Sequence[Piece], roles: dict[int, _Role]
) -> Iterator[tuple[Piece, PassageKind, str | None, int | None]]:
    """Each piece with its kind, its section and the number of its paragraph."""
    section: str | None = None
    in_references, level, paragraph = False, 0, 0
    listed = _unheaded_references(pieces)
    for at, piece in enumerate(pieces):
        kind = roles[at].kind if at in roles else piece.kind
        if kind == "heading":
            section = piece.text.strip()
            if opens_references(section):
                in_references, level = True, piece.level
            elif closes_references(section) or 0 < piece.level <= level:
                in_references = False
        elif at not in roles and kind in ("body", "note") and (in_references or at in listed):
            kind = "references"
        paragraph += kind != "heading" and piece.grid is None
        yield piece, kind, section, paragraph or None


def _unheaded_references(pieces: Sequence[Piece]) -> set[int]:
    """Runs of at least six entries of a list that has no heading."""
    found: set[int] = set()
    run: list[int] = []
    for at, piece in enumerate([*pieces, Piece(kind="heading")]):
        if piece.kind == "body" and piece.grid is None and looks_like_reference(piece.text):
            run.append(at)
            continue
        if len(run) >= 6:
            found.update(run)
        run = []
    return found


def _is_table_caption(piece: Piece) -> bool:
    """Whether a piece is the caption of a table, or one in a caption's style that does not say of what."""
    if piece.grid is not None or len(piece.text) > _LONGEST_CAPTION:
        return False
    what = captioned(piece.text, sure=True)
    return what == "table" or (what is None and (piece.kind == "caption" or _is_plain_caption(piece.text)))


def _is_plain_caption(text: str) -> bool:
    """Whether a short line begins with the number of a table and goes on in small letters, not as a sentence."""
    match = _PLAIN_CAPTION.match(text)
    return match is not None and len(text) < 200 and not text.rstrip().endswith(".")


def _with_whole_captions(pieces: Sequence[Piece]) -> list[Piece]:
    """Join "Table 2" on a line of its own with the title on the next."""
    found: list[Piece] = []
    for at, piece in enumerate(pieces):
        bare = found and _is_table_caption(found[-1]) and _BARE_LABEL.fullmatch(found[-1].text)
        follows = at + 1 < len(pieces) and (pieces[at + 1].grid is not None or _is_note(pieces[at + 1]))
        title = (
            piece.grid is None
            and 3 < len(piece.text) < 600
            and not _is_note(piece)
            and not _is_table_caption(piece)
        )
        if bare and title and follows:
            found[-1] = _joined(found[-1], piece)
        else:
            found.append(piece)
    return found


def _joined(label: Piece, title: Piece) -> Piece:
    ends = 1
    if label.line is not None and title.line is not None:
        ends = max(title.line - label.line - label.text.count("\n"), 1)
    marks = ""
    if label.marks or title.marks:
        marks = (label.marks or " " * len(label.text)) + " " * ends + (title.marks or " " * len(title.text))
    return replace(label, text=label.text + "\n" * ends + title.text, marks=marks, kind="caption")


def _is_note(piece: Piece) -> bool:
    """Whether a paragraph next to a table reads or looks like a note on it."""
    if piece.grid is not None or piece.kind in ("heading", "caption", "aside", "references"):
        return False
    if piece.kind == "note" or is_note_text(piece.text, piece.marks):
        return True
    return piece.small and len(piece.text) < 1200


def is_note_text(text: str, marks: str) -> bool:
    """Tell whether a text reads like a note on a table, or begins with a raised mark."""
    if len(text) < _LONGEST_NOTE and _note().match(text, timeout=1.0):
        return True
    return marks[:1] == "^" and _MARKED.match(text) is not None


def _roles(pieces: Sequence[Piece]) -> dict[int, _Role]:
    """Which pieces are the caption or a note of which table."""
    roles: dict[int, _Role] = {}
    grids = [at for at, piece in enumerate(pieces) if piece.grid is not None]
    above_first = _captions_stand_above(pieces, grids)
    for at in grids:
        above = _caption_above(pieces, at, roles)
        below = _caption_below(pieces, at, roles)
        ends = at
        if above is not None and (above_first or below is None):
            roles[above] = _Role(at, "caption")
            for between in range(above + 1, at):
                roles[between] = _Role(at, "note")
        elif below is not None and (not above_first or not _leads_to_grid(pieces, below)):
            roles[below] = _Role(at, "caption")
            ends = below
        _take_notes(pieces, at, ends, roles)
    return roles


def _caption_above(pieces: Sequence[Piece], at: int, roles: dict[int, _Role]) -> int | None:
    """The caption directly above a table, or with only notes and one short line between."""
    allowed = 1
    for above in range(at - 1, max(at - 4, -1), -1):
        piece = pieces[above]
        if above in roles or piece.grid is not None:
            return None
        if _is_table_caption(piece):
            return above
        if not _is_note(piece):
            if not allowed or not _is_line(piece):
                return None
            allowed -= 1
    return None


def _is_line(piece: Piece) -> bool:
    """Whether a piece is a short line that ends no sentence, such as "(N = 40)"."""
    return piece.kind == "body" and len(piece.text) < 120 and piece.text.rstrip()[-1:] not in ".:;,?"


def _caption_below(pieces: Sequence[Piece], at: int, roles: dict[int, _Role]) -> int | None:
    below = at + 1
    found = below < len(pieces) and below not in roles and _is_table_caption(pieces[below])
    return below if found else None


def _leads_to_grid(pieces: Sequence[Piece], caption: int) -> bool:
    """Whether a table stands right under a caption."""
    return caption + 1 < len(pieces) and pieces[caption + 1].grid is not None


def _captions_stand_above(pieces: Sequence[Piece], grids: Sequence[int]) -> bool:
    """Whether captions of this document stand above their tables, by those that stand between no two tables."""
    above = below = 0
    for at in grids:
        over = at > 0 and _is_table_caption(pieces[at - 1])
        under = at + 1 < len(pieces) and _is_table_caption(pieces[at + 1])
        above += over and not (at > 1 and pieces[at - 2].grid is not None)
        below += under and not _leads_to_grid(pieces, at + 1)
    return above >= below


def _take_notes(pieces: Sequence[Piece], at: int, ends: int, roles: dict[int, _Role]) -> None:
    for below in range(ends + 1, min(ends + 1 + _MOST_NOTES, len(pieces))):
        if below in roles or not _is_note(pieces[below]):
            return
        roles[below] = _Role(at, "note")
