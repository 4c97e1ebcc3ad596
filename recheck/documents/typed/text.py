"""Plain text and Markdown: paragraphs, headings, tables, each with its line."""

from __future__ import annotations

import hashlib
from collections.abc import Iterator
from dataclasses import replace

import regex

from recheck.documents.pieces import Piece, assembled
from recheck.documents.sections import captioned, is_named_section, is_statement, opens_references, unnumbered
from recheck.documents.typed.abreast import stretches
from recheck.documents.typed.as_typed import as_typed
from recheck.documents.typed.drawn_tables import is_border
from recheck.documents.typed.inline import without_markup
from recheck.documents.typed.tables import Tables
from recheck.model import Document

_ATX = regex.compile(r" {0,3}(#{1,6})[ \t]+(.*?)(?:[ \t]+#+)?[ \t]*(?:\{[^{}]*\})?[ \t]*")
_UNDERLINE = regex.compile(r" {0,3}(?:={3,}|-{3,})[ \t]*")
_FENCE = regex.compile(r" {0,3}(```+|~~~+)")
_RULE = regex.compile(r"\s*+\|?+\s*+:?-{2,}+:?\s*+(?:\|\s*+:?-{2,}+:?\s*+)*+\|?\s*+")
_BULLET = regex.compile(r"\s*(?:[-*+•]|\d{1,3}[.)])\s+\S")
_GAP = regex.compile(r"\S(?:\t| {3,})(?=\S)")
_FOOTNOTE = regex.compile(r"\[\^[^\]\s]+\]:\s*")
_COLON = regex.compile(r"(?:[Tt]able)?:\s+(?=\S)")
_ATTRIBUTES = regex.compile(r"\s*\{[#.][^{}]{0,200}\}\s*$")
_PIPES = regex.compile(r"\s*\|.*\|\s*$")
_CAPTION_LINES = 3
_TITLE = regex.compile(r"title:\s*[\"']?(.*?)[\"']?\s*")


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
    found = [piece for stretch in stretches(lines) for piece in _pieces(stretch.lines, stretch.first)]
    pieces = [_without_markup(piece) for piece in _headed(list(_with_captions(found)))]
    passages, tables = assembled(pieces)
    marked = any(piece.level for piece in pieces)
    return Document(
        name=name,
        format=format or ("markdown" if marked or any(map(_PIPES.match, lines)) else "text"),
        sha256=digest,
        passages=passages,
        words=len(text.split()),
        title=_title(pieces, lines),
        reader="text",
        notes=notes,
        tables=tables,
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


def _pieces(lines: list[str], first: int) -> Iterator[Piece]:
    """Cut lines into pieces, their markup still on them; what a blank line or Markdown separates is apart.

    `first` is the number of lines before them.
    """
    tables = Tables(lines, first + 1)
    at = 0 if first else _front_matter_end(lines)
    if at:
        yield Piece("\n".join(lines[:at]), kind="aside", line=1)
    while at < len(lines):
        if not lines[at].strip():
            at += 1
            continue
        start = at
        if (table := tables.at(at)) is not None:
            grid, at = table
            if grid.caption:
                yield Piece(grid.caption, kind="caption", line=start + 1 + first)
            yield Piece(grid=grid, line=start + 1 + first)
            continue
        piece, at = _next_piece(lines, at, tables)
        yield replace(piece, line=start + 1 + first)


def _front_matter_end(lines: list[str]) -> int:
    if lines[0].rstrip() != "---":
        return 0
    for at, line in enumerate(lines[1:200], start=1):
        if line.rstrip() in ("---", "..."):
            return at + 1
    return 0


def _next_piece(lines: list[str], at: int, tables: Tables) -> tuple[Piece, int]:
    line = lines[at]
    if fence := _FENCE.match(line):
        end = at + 1
        while end < len(lines) and not lines[end].lstrip().startswith(fence[1]):
            end += 1
        return Piece("\n".join(lines[at : end + 1]), kind="aside"), end + 1
    if heading := _ATX.fullmatch(line):
        return Piece(heading[2], kind="heading", level=len(heading[1])), at + 1
    if at + 1 < len(lines) and _UNDERLINE.fullmatch(lines[at + 1]) and not _is_row(line):
        return Piece(line.strip(), kind="heading", level=1 if "=" in lines[at + 1] else 2), at + 2
    if opens_references(line):
        return Piece(line.strip(), kind="heading"), at + 1
    end = at + 1
    in_caption = captioned(line.lstrip("*_ "), sure=True) == "table"
    while end < len(lines) and not _starts_piece(lines, end, tables):
        if in_caption and end - at <= _CAPTION_LINES and tables.at(end) is not None:
            break
        end += 1
    return _paragraph(lines[at:end]), end


def _is_row(line: str) -> bool:
    """Whether a line is divided as the head of a table is, and no heading although it is underlined."""
    return "|" in line or _GAP.search(line.strip()) is not None


def _starts_piece(lines: list[str], at: int, tables: Tables) -> bool:
    line = lines[at]
    if not line.strip() or _FENCE.match(line) or _ATX.fullmatch(line) or tables.begins(at):
        return True
    if at + 1 < len(lines) and _UNDERLINE.fullmatch(lines[at + 1]) and not lines[at - 1].strip():
        return True
    return bool(_BULLET.match(line)) and bool(_BULLET.match(lines[at - 1]))


def _paragraph(lines: list[str]) -> Piece:
    if all(line.lstrip().startswith(">") for line in lines):
        lines = [line.lstrip()[1:] for line in lines]
    text = "\n".join(lines)
    if _is_table(lines):
        return Piece(text, kind="table")
    if note := _FOOTNOTE.match(text):
        return Piece(text[note.end() :], kind="note")
    return Piece(text, kind="caption" if captioned(text.lstrip("*_ ")) else "body")


def _with_captions(pieces: list[Piece]) -> Iterator[Piece]:
    """Tell captions that Pandoc marks by a colon, above or below a table."""
    for at, piece in enumerate(pieces):
        mark = _COLON.match(piece.text) if piece.kind == "body" and piece.grid is None else None
        beside = pieces[max(at - 1, 0) : at + 2] if mark else ()
        if mark and any(other.grid is not None for other in beside):
            text = _ATTRIBUTES.sub("", piece.text[mark.end() :])
            yield replace(piece, text=text, kind="caption")
        else:
            yield piece


def _without_markup(piece: Piece) -> Piece:
    if piece.kind == "aside" or piece.grid is not None:
        return piece
    text, marks = without_markup(piece.text)
    return replace(piece, text=text, marks=marks)


def _is_table(lines: list[str]) -> bool:
    if any(is_border(line) or ("|" in line and _RULE.fullmatch(line)) for line in lines):
        return True
    if len(lines) < 2:
        return False
    piped = sum(line.count("|") >= 2 for line in lines)
    spaced = sum(len(_GAP.findall(line.strip())) >= 2 for line in lines)
    return max(piped, spaced) >= max(2, 0.7 * len(lines))


def _headed(pieces: list[Piece]) -> list[Piece]:
    """Find the headings of plain text: a short line by itself that states nothing."""
    last = len(pieces) - 1
    return [
        replace(piece, kind="heading") if at < last and _is_plain_heading(piece) else piece
        for at, piece in enumerate(pieces)
    ]


def _is_plain_heading(piece: Piece) -> bool:
    line = piece.text.strip().strip("*_").strip()
    if piece.kind != "body" or piece.grid is not None or "\n" in line or len(line) > 90:
        return False
    if is_named_section(line):
        return True
    name = unnumbered(line)
    if is_statement(name) or any(c.isdigit() for c in name) or (_BULLET.match(line) and name == line):
        return False
    return len(name.split()) <= 12 and name[:1].isupper()


def _title(pieces: list[Piece], lines: list[str]) -> str | None:
    for line in lines[: _front_matter_end(lines)]:
        if match := _TITLE.fullmatch(line):
            return match[1] or None
    headings = [piece for piece in pieces if piece.kind == "heading" and piece.level]
    if not headings:
        return pieces[0].text.strip() if pieces and pieces[0].kind == "heading" else None
    return headings[0].text.strip() or None
