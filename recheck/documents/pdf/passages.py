"""Blocks become passages: texts that go on elsewhere are joined, sections named, references told."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from recheck.documents.pdf.blocks import Block, is_prose
from recheck.documents.pdf.joining import goes_on, is_finished, put_together
from recheck.documents.pdf.lines import Line
from recheck.documents.sections import closes_references, looks_like_reference, opens_references, states_title
from recheck.model import Passage

_LOOK_AHEAD = 40


def passages_of(blocks: list[Block], labels: Sequence[str] = ()) -> Iterator[tuple[Block, Passage]]:
    """Yield the blocks that are left when texts are joined, in reading order, each with its passage.

    `labels` are the names of the tables, in the order of their numbers.
    """
    _tell_references(blocks)
    joined = _joined(blocks)
    section: str | None = None
    for paragraph, block in enumerate(joined, start=1):
        text, marks, layout = put_together(block.lines)
        if not text.strip():
            continue
        if block.kind == "heading":
            section = text.strip()
        yield block, Passage(
            text=text, kind=block.kind, section=section, paragraph=paragraph, marks=marks, layout=layout,
            table=None if block.table is None else labels[block.table],
        )  # fmt: skip


def _joined(blocks: list[Block]) -> list[Block]:
    """Join each text with the block in which it goes on, past notes, figures and tables."""
    taken = [False] * len(blocks)
    found = []
    for at, block in enumerate(blocks):
        if taken[at]:
            continue
        found.append(block)
        if (
            block.table is not None
            or block.kind not in ("body", "references", "note")
            or not any(_is_filled(line) for line in block.lines)
        ):
            continue
        last = at
        while (following := _continuation(blocks, taken, block, last)) is not None:
            block.take_in(blocks[following])
            taken[following] = True
            last = following
    return found


def _continuation(blocks: list[Block], taken: list[bool], block: Block, at: int) -> int | None:
    end = block.lines[-1]
    if is_finished(end, block.text):
        return None
    full = end.x1 > end.right - max(0.16 * (end.right - end.left), 3 * end.size)
    passed, likely = 0, None
    for following in range(at + 1, min(at + _LOOK_AHEAD, len(blocks))):
        other = blocks[following]
        first = other.lines[0]
        elsewhere = _elsewhere(end, first)
        if first.page > end.page + 2 or (other.kind == "heading" and not elsewhere):
            return likely
        if taken[following] or other.kind != block.kind or other.table is not None:
            continue
        if goes_on(end, block.text, first, full=full and elsewhere and not passed):
            if not first.text.lstrip()[:1].isupper() or (is_prose(first) and first.italic < 0.8):
                return following
            likely = following
        passed += 1
        if _stops_search(other, end) and not (
            full and elsewhere and is_finished(other.lines[-1], other.text)
        ):
            return likely
    return likely


def _stops_search(other: Block, end: Line) -> bool:
    """Whether a block is running text of its own, not a label, a note or a row that is passed by."""
    same_size = abs(other.lines[0].size - end.size) < 0.06 * end.size
    return same_size and sum(is_prose(line) for line in other.lines) > 1


def _is_filled(line: Line) -> bool:
    """Whether a line has most of its column's width and no gap, as text has and labels have not."""
    return line.x1 - line.x0 > 0.6 * (line.right - line.left) and not line.gaps


def _elsewhere(end: Line, first: Line) -> bool:
    return first.page != end.page or first.region != end.region


def _tell_references(blocks: list[Block]) -> None:
    """Mark the list of references: what follows its heading, or a run of entries without one."""
    inside = False
    run: list[Block] = []
    for block in blocks:
        if block.kind == "heading":
            inside = opens_references(block.text) or (inside and not closes_references(block.text))
        elif inside and block.table is None and _is_listed(block):
            block.kind = "references"
        if block.kind == "body" and looks_like_reference(block.text):
            run.append(block)
        elif block.kind == "body":
            _mark_run(run)
            run = []
    _mark_run(run)


def _is_listed(block: Block) -> bool:
    """Whether a block that follows the heading of the references belongs to them, whatever its type."""
    if block.kind in ("body", "figure"):
        return True
    letters = sum(c.isalpha() for c in block.text)
    if block.kind == "note":
        return not block.text.lstrip().startswith("Note")
    # Entries that are justified loosely can look like rows.
    return block.kind == "table" and letters > 0.6 * len(block.text)


def _mark_run(run: list[Block]) -> None:
    if len(run) >= 6:
        for block in run:
            block.kind = "references"


def title_of(metadata: str, blocks: Sequence[Block]) -> str | None:
    """The title in the file's metadata if it reads like one, else the largest text of the first page."""
    stated = " ".join(metadata.split())
    if states_title(stated):
        return stated
    first = [block for block in blocks if block.lines[0].page == 1 and len(block.text.strip()) > 6][:15]
    first = [block for block in first if block.kind in ("heading", "body") and len(block.text) < 400]
    if not first:
        return None
    size = max(block.lines[0].size for block in first)
    largest = next(block for block in first if block.lines[0].size > 0.97 * size)
    return put_together(largest.lines)[0].strip() or None
