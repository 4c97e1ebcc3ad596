"""Plain text and Markdown: paragraphs, headings, tables, each with its line."""

from __future__ import annotations

import hashlib
from collections.abc import Iterator
from dataclasses import dataclass, replace

import regex

from recheck.documents.abreast import stretches
from recheck.documents.markup import without_markup
from recheck.documents.sections import (
    captioned,
    closes_references,
    is_named_section,
    looks_like_reference,
    opens_references,
    unnumbered,
)
from recheck.documents.typed import as_typed
from recheck.model import Document, Passage, PassageKind

_ATX = regex.compile(r" {0,3}(#{1,6})[ \t]+(.*?)(?:[ \t]+#+)?[ \t]*(?:\{[^{}]*\})?[ \t]*")
_UNDERLINE = regex.compile(r" {0,3}(?:={3,}|-{3,})[ \t]*")
_FENCE = regex.compile(r" {0,3}(```+|~~~+)")
_RULE = regex.compile(r"\s*+\|?+\s*+:?-{2,}+:?\s*+(?:\|\s*+:?-{2,}+:?\s*+)*+\|?\s*+")
_BULLET = regex.compile(r"\s*(?:[-*+•]|\d{1,3}[.)])\s+\S")
_GAP = regex.compile(r"\S(?:\t| {3,})(?=\S)")
_FOOTNOTE = regex.compile(r"\[\^[^\]\s]+\]:\s*")
_STATEMENT = regex.compile(r"[=<>≤≥±]|\d\.\d|\d%|[.?!;:,]$")
_TITLE = regex.compile(r"title:\s*[\"']?(.*?)[\"']?\s*")


@dataclass(frozen=True, slots=True)
class _Block:
    """Some lines that belong together; `level` is that of a heading."""

    text: str
    line: int
    kind: PassageKind = "body"
    level: int = 0


def text_document(
    text: str,
    *,
    name: str = "text",
    format: str = "text",
    data: bytes | None = None,
    notes: tuple[str, ...] = (),
) -> Document:
    """Read plain text or Markdown.

    An empty `format` is decided by content. `data` are the bytes that the digest is taken of, those
    of `text` as UTF-8 if none are given. Lines are counted from 1 as an editor counts them.
    """
    digest = hashlib.sha256(text.encode("utf-8", "surrogatepass") if data is None else data).hexdigest()
    lines = _lines(text)
    blocks = _headed(
        [
            replace(block, line=block.line + stretch.first)
            for stretch in stretches(lines)
            for block in _blocks(stretch.lines)
        ]
    )
    return Document(
        name=name,
        format=format or ("markdown" if any(block.level for block in blocks) else "text"),
        sha256=digest,
        passages=tuple(_passages(blocks)),
        words=len(text.split()),
        title=_title(blocks, lines),
        reader="text",
        notes=notes,
    )


def _lines(text: str) -> list[str]:
    text = text.removeprefix("\ufeff").replace("\r\n", "\n").replace("\r", "\n").replace("\f", " ")
    return as_typed(_without_comments(text).split("\n"))


def _without_comments(text: str) -> str:
    """Take HTML comments away and leave their line ends; one that is never closed is text."""
    parts, at = [], 0
    while (start := text.find("<!--", at)) >= 0 and (end := text.find("-->", start)) >= 0:
        parts += [text[at:start], "\n" * text.count("\n", start, end)]
        at = end + 3
    return "".join([*parts, text[at:]])


def _blocks(lines: list[str]) -> Iterator[_Block]:
    """Cut lines into blocks; what a blank line or Markdown separates is apart."""
    at = _front_matter_end(lines)
    if at:
        yield _Block("\n".join(lines[:at]), 1, "aside")
    while at < len(lines):
        if not lines[at].strip():
            at += 1
            continue
        block, at = _next_block(lines, at)
        yield block


def _front_matter_end(lines: list[str]) -> int:
    if lines[0].rstrip() != "---":
        return 0
    for at, line in enumerate(lines[1:200], start=1):
        if line.rstrip() in ("---", "..."):
            return at + 1
    return 0


def _next_block(lines: list[str], at: int) -> tuple[_Block, int]:
    line = lines[at]
    if fence := _FENCE.match(line):
        end = at + 1
        while end < len(lines) and not lines[end].lstrip().startswith(fence[1]):
            end += 1
        return _Block("\n".join(lines[at : end + 1]), at + 1, "aside"), end + 1
    if heading := _ATX.fullmatch(line):
        return _Block(heading[2], at + 1, "heading", len(heading[1])), at + 1
    if at + 1 < len(lines) and _UNDERLINE.fullmatch(lines[at + 1]) and "|" not in line:
        return _Block(line.strip(), at + 1, "heading", 1 if "=" in lines[at + 1] else 2), at + 2
    if opens_references(line):
        return _Block(line.strip(), at + 1, "heading"), at + 1
    end = at + 1
    while end < len(lines) and not _starts_block(lines, end):
        end += 1
    return _paragraph(lines[at:end], at + 1), end


def _starts_block(lines: list[str], at: int) -> bool:
    line = lines[at]
    if not line.strip() or _FENCE.match(line) or _ATX.fullmatch(line):
        return True
    if at + 1 < len(lines) and _UNDERLINE.fullmatch(lines[at + 1]) and not lines[at - 1].strip():
        return True
    return bool(_BULLET.match(line)) and bool(_BULLET.match(lines[at - 1]))


def _paragraph(lines: list[str], number: int) -> _Block:
    if all(line.lstrip().startswith(">") for line in lines):
        lines = [line.lstrip()[1:] for line in lines]
    text = "\n".join(lines)
    if _is_table(lines):
        return _Block(text, number, "table")
    if note := _FOOTNOTE.match(text):
        return _Block(text[note.end() :], number, "note")
    return _Block(text, number, "caption" if captioned(text.lstrip("*_ ")) else "body")


def _is_table(lines: list[str]) -> bool:
    if any("|" in line and _RULE.fullmatch(line) for line in lines):
        return True
    if len(lines) < 2:
        return False
    piped = sum(line.count("|") >= 2 for line in lines)
    spaced = sum(len(_GAP.findall(line.strip())) >= 2 for line in lines)
    return max(piped, spaced) >= max(2, 0.7 * len(lines))


def _headed(blocks: list[_Block]) -> list[_Block]:
    """Find the headings of plain text: a short line by itself that states nothing."""
    last = len(blocks) - 1
    return [
        replace(block, kind="heading") if at < last and _is_plain_heading(block) else block
        for at, block in enumerate(blocks)
    ]


def _is_plain_heading(block: _Block) -> bool:
    line = block.text.strip().strip("*_").strip()
    if block.kind != "body" or "\n" in line or len(line) > 90:
        return False
    if is_named_section(line):
        return True
    name = unnumbered(line)
    if _STATEMENT.search(name) or any(c.isdigit() for c in name) or (_BULLET.match(line) and name == line):
        return False
    return len(name.split()) <= 12 and name[:1].isupper()


def _passages(blocks: list[_Block]) -> Iterator[Passage]:
    section: str | None = None
    in_references, level, paragraph = False, 0, 0
    listed = _unheaded_references(blocks)
    for at, block in enumerate(blocks):
        text, marks = (block.text, "") if block.kind == "aside" else without_markup(block.text)
        kind = block.kind
        if kind == "heading":
            section = text.strip()
            if opens_references(section):
                in_references, level = True, block.level
            elif closes_references(section) or 0 < block.level <= level:
                in_references = False
        elif kind in ("body", "note") and (in_references or at in listed):
            kind = "references"
        paragraph += kind != "heading"
        yield Passage(
            text=text, kind=kind, section=section, paragraph=paragraph or None, line=block.line, marks=marks
        )


def _unheaded_references(blocks: list[_Block]) -> set[int]:
    """Runs of at least six entries of a list that has no heading."""
    found: set[int] = set()
    run: list[int] = []
    for at, block in enumerate([*blocks, _Block("", 0, "heading")]):
        if block.kind == "body" and looks_like_reference(block.text):
            run.append(at)
            continue
        if len(run) >= 6:
            found.update(run)
        run = []
    return found


def _title(blocks: list[_Block], lines: list[str]) -> str | None:
    for line in lines[: _front_matter_end(lines)]:
        if match := _TITLE.fullmatch(line):
            return match[1] or None
    headings = [block for block in blocks if block.kind == "heading" and block.level]
    if not headings:
        return blocks[0].text.strip() if blocks and blocks[0].kind == "heading" else None
    return without_markup(headings[0].text)[0].strip() or None
