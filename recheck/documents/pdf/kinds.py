"""What each block of a page is: heading, caption, note, table, figure or running text."""

from __future__ import annotations

from itertools import pairwise

from recheck.documents.pdf.blocks import Block, Type, is_prose
from recheck.documents.pdf.joining import is_finished
from recheck.documents.sections import captioned, is_named_section, opens_references, unnumbered
from recheck.model import PassageKind


def classified(blocks: list[Block], type_: Type) -> list[Block]:
    """Say what each block is: heading, caption, note, table, figure or running text."""
    beside = _narrow_pages(blocks)
    small_below = _all_small_below(blocks, type_)
    for at, block in enumerate(blocks):
        first = block.lines[0]
        side_note = (
            first.page in beside and first.column == 0 and first.right - first.left < beside[first.page]
        )
        block.kind = _kind(
            blocks, at, type_, bottom=small_below[at], beside=side_note and first.size < 0.94 * type_.size
        )
    _absorb_headers(blocks)
    for before, block, after in zip(blocks, blocks[1:], blocks[2:], strict=False):
        # The name of an axis, set large.
        if block.kind == "heading" and before.kind in ("table", "figure") and after.kind == "caption":
            block.kind = "figure"
    return _with_whole_captions(blocks, type_)


def _absorb_headers(blocks: list[Block]) -> None:
    """Count the header of a table, and what is left of its last row, as the table."""
    for order in (blocks, blocks[::-1]):
        for block, table in pairwise(order):
            if table.kind != "table" or block.kind not in ("body", "figure") or len(block.lines) > 4:
                continue
            upper, lower = (block, table) if order is blocks else (table, block)
            step = lower.lines[0].base - upper.lines[-1].base
            close = _same_column(upper, lower) and 0 < step < 2.2 * block.lines[0].size
            if (
                close
                and not any(is_prose(line) for line in block.lines)
                and block.text.rstrip()[-1:] not in ".:"
            ):
                block.kind = "table"


def _with_whole_captions(blocks: list[Block], type_: Type) -> list[Block]:
    """Join to a caption the lines that go on directly below it: its text after a bold beginning."""
    found: list[Block] = []
    for block in blocks:
        if (
            found
            and found[-1].table is None
            and found[-1].kind == "caption"
            and block.kind in ("body", "note", "caption", "figure")
        ):
            above, below = found[-1].lines[-1], block.lines[0]
            step = below.base - above.base
            near = _same_column(found[-1], block) and 0 < step < 1.4 * type_.distance(above.size)
            smaller = below.size < 0.94 * type_.size or not is_finished(above, found[-1].text)
            if (
                near
                and smaller
                and abs(above.size - below.size) < 0.06 * above.size
                and not captioned(block.text)
            ):
                found[-1].take_in(block)
                continue
        found.append(block)
    return found


def _narrow_pages(blocks: list[Block]) -> dict[int, float]:
    """For pages with two columns the width below which the first is one of side notes."""
    second = {block.lines[0].page: block.lines[0] for block in blocks if block.lines[0].column == 1}
    return {page: 0.6 * (line.right - line.left) for page, line in second.items()}


def _all_small_below(blocks: list[Block], type_: Type) -> list[bool]:
    """For each block whether it and all below it in its column are smaller than the text above them."""
    flags = [False] * len(blocks)
    below = True
    for at in range(len(blocks) - 1, -1, -1):
        block = blocks[at]
        if at + 1 < len(blocks) and not _same_column(block, blocks[at + 1]):
            below = True
        size = max(line.size for line in block.lines)
        below = below and size < 0.94 * type_.size and block.kind != "table"
        flags[at] = below
    return flags


def _same_column(one: Block, other: Block) -> bool:
    return one.lines[-1].page == other.lines[0].page and one.lines[-1].column == other.lines[0].column


def _kind(blocks: list[Block], at: int, type_: Type, *, bottom: bool, beside: bool) -> PassageKind:
    block = blocks[at]
    if block.table is not None:
        return block.kind
    first, text = block.lines[0], block.text.strip()
    set_apart = abs(first.size - type_.size) > 0.05 * type_.size or first.bold > 0.1 or first.italic > 0.5
    caption = captioned(text, sure=set_apart)
    if caption is not None and (block.kind == "body" or len(block.lines) == 1):
        return "caption"
    if block.kind == "table":
        return "table"
    following = blocks[at + 1] if at + 1 < len(blocks) else None
    if _is_heading(block, type_) or (following is not None and _is_plain_heading(block, following, type_)):
        return "heading"
    if at and blocks[at - 1].kind == "caption" and len(blocks[at - 1].text.split()) <= 3:
        # "Table 2" on a line of its own, its title on the next.
        return "caption"
    if text.startswith(("Note.", "Notes.", "Note:", "Notes:")):
        return "note"
    if beside or (bottom and first.size < 0.94 * type_.size and _is_note(blocks, at, type_)):
        return "note"
    return "figure" if _is_scattered(block, type_) else "body"


def _is_note(blocks: list[Block], at: int, type_: Type) -> bool:
    """Whether a small block at a column's foot stands under other text."""
    block = blocks[at]
    above = [other for other in blocks[max(at - 12, 0) : at] if _same_column(other, block)]
    beneath = [other for other in blocks[at : at + 12] if _same_column(block, other)]
    height = beneath[-1].lines[-1].base - block.lines[0].base
    larger = any(
        abs(other.lines[0].size - type_.size) < 0.06 * type_.size and len(other.text) > 80 for other in above
    )
    return larger and height < 300 and len(block.text) > 12


def _is_heading(block: Block, type_: Type) -> bool:
    text, first = block.text.strip(), block.lines[0]
    if len(block.lines) > 3 or len(text) > 160 or not any(c.isalpha() for c in text):
        return False
    if is_named_section(text) or opens_references(text):
        return True
    if text[-1] in ".,;:" or not unnumbered(text)[:1].isupper() or len(text) < 3 or ";" in text:
        return False
    if any(gap > 1.7 for line in block.lines for gap in line.gaps):
        return False
    larger = min(line.size for line in block.lines) > 1.06 * type_.size
    bold = min(line.bold for line in block.lines) > 0.8 and not type_.bold and first.size > 0.94 * type_.size
    capitals = text.isupper() and len(text) > 5 and first.size > 0.8 * type_.size
    slanted = (
        min(line.italic for line in block.lines) > 0.8 and len(text) < 90 and first.size > 0.94 * type_.size
    )
    return larger or bold or capitals or slanted


def _is_plain_heading(block: Block, following: Block, type_: Type) -> bool:
    """Whether a short line without other marks of a heading stands directly over running text."""
    line, below = block.lines[0], following.lines[0]
    text = block.text.strip()
    return (
        len(block.lines) == 1
        and 4 <= len(text) < 90
        and text[0].isupper()
        and text[-1] not in ".,;:"
        and len(text.split()) <= 10
        and not any(c.isdigit() or c in "=<>≤≥±%" for c in text)
        and line.size > 0.8 * type_.size
        and below.page == line.page
        and below.region == line.region
        and below.base - line.base < 3 * line.size
        and following.kind == "body"
        and below.text[:1].isupper()
        and below.x1 - below.x0 > 0.75 * (below.right - below.left)
        and abs(below.size - type_.size) < 0.06 * type_.size
    )


def _is_scattered(block: Block, type_: Type) -> bool:
    """Whether a block is the text of a figure: labels and numbers, no sentence."""
    text = block.text
    words = text.split()
    letters, digits = sum(c.isalpha() for c in text), sum(c.isdigit() for c in text)
    if letters < 3 and digits >= letters and not any(c in "=<>≤≥" for c in text):
        return True
    first = block.lines[0]
    odd = abs(first.size - type_.size) > 0.05 * type_.size
    per_line = len(words) / len(block.lines)
    return odd and per_line < 5 and not text.rstrip().endswith(".") and len(text) < 200
