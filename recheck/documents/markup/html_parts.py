"""Captions and notes of the tables of a page, found among the passages about them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import regex

from recheck.documents.grids import Spanned, depths, table_of
from recheck.documents.markup.assembly import Assembly
from recheck.documents.markup.html_tables import DraftCell, DraftTable
from recheck.documents.markup.stubs import LEAST_STEP
from recheck.documents.sections import caption_label, captioned
from recheck.model import Passage

_LABEL_ALONE = regex.compile(
    r"\s*Tab(?:le|\.)?\s*[A-Z]{0,2}[.-]?(?:\d{1,3}(?:[.-]\d{1,2})?[a-z]?|[IVX]{1,5})\s*[.:|–—]?\s*",
    regex.IGNORECASE,
)
_NOTE = regex.compile(
    r"""\s*(?:(?:table\s+)?notes?\s*[.:—–]|notes?\s*$|abbreviations?\b|legend\s*[.:]|key\s*:|sources?\s*:
    |(?:values|data|numbers|figures|results|entries|cells)\s+(?:are|represent|given|shown|presented|reported|in)\b(?!\s+available)
    |ps?(?:[\ -]?values?)?\s+(?:(?:are|is|were|was)\s+)?(?:(?:obtained|calculated|computed)\s+)?(?:by|from|with|using|according\s+to|based\s+on|those\s+of)\b
    |[*∗†‡§¶‖#]|[a-z]\)\s|p\s*[<=≤]|n\s*\(%\)|M\s*=\s*mean|SD\s*[:=,]|CI\s*[:=,])""",
    regex.VERBOSE | regex.IGNORECASE,
)
_MOST_NOTES = 30
_LONGEST_LINE = 160
_SAYS = regex.compile(
    r"\b(?:shows?|presents?|lists?|gives?|contains?|reports?|summari[sz]es?|displays?|describes?|provides?|is|are|was|were|has|below)\b|[.:;]\s*$"
)
"""Words of a sentence about a table, and ends of a text that goes on in it."""


def tables_of(drafts: Sequence[DraftTable], assembly: Assembly) -> None:
    """Find caption and notes of each table and put the tables into the assembly; passages change their kind.

    Captions of tables that the page does not hold (pictures, links to another page) are told.
    """
    passages = assembly.passages
    if not _are_below(drafts, passages):
        for draft in drafts:
            if draft.caption is None and _is_caption_above(draft.before - 1, passages):
                draft.caption = draft.before - 1
    for draft in drafts:
        if draft.caption is None:
            _caption_below(draft, drafts, passages)
    for draft in drafts:
        _put(draft, assembly)
    known = {table.label for table in assembly.tables}
    for passage in passages:
        if passage.kind == "caption" and passage.table is None and captioned(passage.text) == "table":
            label = caption_label(passage.text)
            if label not in known:
                assembly.absent_tables.append(label)


def _are_below(drafts: Sequence[DraftTable], passages: Sequence[Passage]) -> bool:
    """Whether a page sets captions below its tables: all have one there, and not all have one above."""
    bare = [draft for draft in drafts if draft.caption is None]
    after = [max([draft.before - 1, *draft.notes]) + 1 for draft in bare]
    return all(at < len(passages) and captioned(passages[at].text) == "table" for at in after) and not all(
        _is_caption_above(draft.before - 1, passages) for draft in bare
    )


def _is_caption_above(at: int, passages: Sequence[Passage]) -> bool:
    if at < 0 or not _may_caption(passages[at]):
        return False
    text = passages[at].text
    return captioned(text) == "table" or _names_table(text) or (at > 0 and _is_label(passages[at - 1]))


def _label_above(draft: DraftTable, passages: Sequence[Passage]) -> str:
    """The label that stands alone above a caption which lacks one."""
    at = draft.caption
    if at is None or at < 1 or caption_label(passages[at].text):
        return ""
    return passages[at - 1].text.strip() if _is_label(passages[at - 1]) else ""


def _may_caption(passage: Passage) -> bool:
    return passage.kind in ("body", "caption")


def _names_table(text: str) -> bool:
    """Whether a line right above a table names it without any point: "Table 6 adjusted heights"."""
    return (
        len(text) <= _LONGEST_LINE
        and text[:1] == "T"
        and bool(caption_label(text))
        and _SAYS.search(text, timeout=1.0) is None
    )


def _is_label(passage: Passage) -> bool:
    return _may_caption(passage) and _LABEL_ALONE.fullmatch(passage.text) is not None


def _caption_below(draft: DraftTable, drafts: Sequence[DraftTable], passages: list[Passage]) -> None:
    at = max([draft.before - 1, *draft.notes]) + 1
    taken = {other.caption for other in drafts}
    if (
        at < len(passages)
        and at not in taken
        and captioned(passages[at].text) == "table"
        and _may_caption(passages[at])
    ):
        draft.caption = at


def _put(draft: DraftTable, assembly: Assembly) -> None:
    passages = assembly.passages
    above = _label_above(draft, passages)
    caption = None if draft.caption is None else passages[draft.caption]
    label = caption_label(above or (caption.text if caption else ""))
    name = assembly.table_name(label)
    if caption is not None and draft.caption is not None:
        caption = replace(caption, kind="caption", table=name)
        passages[draft.caption] = caption
        if above:
            passages[draft.caption - 1] = replace(passages[draft.caption - 1], kind="caption", table=name)
            start = f"{above.rstrip('.: ')}. "
            marks = " " * len(start) + caption.marks if caption.marks else ""
            caption = replace(caption, text=start + caption.text, marks=marks)
    _take_notes(draft, passages)
    for at in draft.notes:
        passages[at] = replace(passages[at], kind="note", table=name)
    assembly.tables.append(
        table_of(
            _spanned(draft, name), label=label, caption=caption, notes=tuple(passages[at] for at in draft.notes),
            header_rows=draft.header_rows, section=draft.section, before=draft.before,
        )
    )  # fmt: skip


def _take_notes(draft: DraftTable, passages: Sequence[Passage]) -> None:
    """Add the paragraphs right below that begin as notes do."""
    at = max([draft.before - 1, *draft.notes, draft.caption if draft.caption is not None else -1]) + 1
    for passage in passages[at : at + _MOST_NOTES]:
        raised = passage.marks[:1] == "^" and len(passage.text) > 2
        if passage.kind != "body" or not (raised or _NOTE.match(passage.text, timeout=1.0)):
            return
        draft.notes.append(at)
        at += 1


def _spanned(draft: DraftTable, name: str) -> list[list[Spanned]]:
    ranks = depths((row[0].moved for row in draft.rows[draft.header_rows :]), step=LEAST_STEP)
    rows = []
    for number, row in enumerate(draft.rows):
        rank = ranks[row[0].moved] if number >= draft.header_rows else 0
        rows.append([_cell(cell, rank if at == 0 else 0, draft.section, name) for at, cell in enumerate(row)])
    return rows


def _cell(cell: DraftCell, indent: int, section: str | None, name: str) -> Spanned:
    passage = Passage(cell.text, "table", section, None, None, cell.marks, None, name)
    return Spanned(passage, cell.row_span, cell.column_span, cell.heading, indent)
