"""Lines put together: what a hyphen or dash at a line's end is, and whether a text goes on."""

from __future__ import annotations

import numpy as np
import regex

from recheck.documents.characters import BASE, RAISED, as_text, made_plain, mark_string
from recheck.documents.pdf.lines import SPACE, Line
from recheck.model import Layout

_HYPHENS = "-\u2010\u00ad"
_DASHES = "\u2212\u2012\u2013\u2014\ufe63\uff0d"
_OPENING = "([{«“‘"
_RELATIONS = "=<>≤≥≈~±×∼"
_ABBREVIATED = regex.compile(
    r"(?:\b(?:vs|e\.g|i\.e|cf|al|ca|approx|resp|figs?|eqs?|eqn|refs?|nos?|vol|pp?|dr|mr|mrs|ms|prof|exps?|st|incl|max|min|sec)"
    r"|\b[A-Z])\.$",
    regex.IGNORECASE,
)
_CLOSERS = "\"'”’»)]}*†‡§"


def put_together(lines: list[Line]) -> tuple[str, str, Layout]:
    """The text of some lines, its marks and layout; one character has one mark and one box."""
    if len(lines) == 1 and lines[0].text.isascii():
        line = lines[0]
        layout = Layout(pages=np.full(len(line.codes), line.page, np.int32), boxes=line.boxes)
        return line.text, mark_string(line.marks), layout
    codes, marks, boxes, pages = [], [], [], []
    for at, line in enumerate(lines):
        last = len(line.codes)
        link = _link(line.text, lines[at + 1].text) if at + 1 < len(lines) else ""
        if link == "drop":
            last = len(line.text.rstrip()) - 1
        codes.append(line.codes[:last])
        marks.append(line.marks[:last])
        boxes.append(line.boxes[:last])
        pages.append(np.full(last, line.page, np.int32))
        if link == " ":
            end = line.boxes[-1:].copy()
            end[:, 0] = end[:, 2]
            codes.append(np.array([SPACE], np.uint32))
            marks.append(np.array([BASE], np.uint8))
            boxes.append(end)
            pages.append(np.array([line.page], np.int32))
    every = np.concatenate(codes)
    plain_codes, plain_marks, source = made_plain(every, np.concatenate(marks))
    layout = Layout(pages=np.concatenate(pages)[source], boxes=np.concatenate(boxes)[source])
    return as_text(plain_codes), mark_string(plain_marks), layout


def joined_text(lines: list[Line]) -> str:
    """The text of some lines for looking at, before normalisation."""
    parts = []
    for at, line in enumerate(lines):
        link = _link(line.text, lines[at + 1].text) if at + 1 < len(lines) else ""
        parts.append(line.text.rstrip()[:-1] if link == "drop" else line.text + link)
    return "".join(parts)


def _link(text: str, following: str) -> str:
    """What stands between two lines: a space, nothing, or (`drop`) not even the hyphen before."""
    end, start = text.rstrip(), following.lstrip()
    if not end or not start:
        return " "
    last, before = end[-1], end[-2:-1]
    if last in _HYPHENS:
        if last == "\u00ad" or (before.isalpha() and start[0].islower() and not _is_symbolic(end)):
            return "drop"
        # After a space a hyphen is a minus before a number, else a dash between words.
        return "" if before.strip() or _is_number(start) else " "
    if last in _DASHES:
        return "" if before.strip() or _is_number(start) or end[-3:-2] in _RELATIONS + _OPENING + "," else " "
    if last in _OPENING or (last == "/" and before.isalnum()):
        return ""
    return " "


def _is_symbolic(end: str) -> bool:
    """Whether a hyphen belongs to a compound that keeps it: p-, t-, F-, Non-, a name in capitals."""
    word = end[:-1].split()[-1].lstrip("".join(_OPENING)) if end[:-1].split() else ""
    return len(word) == 1 or (len(word) > 1 and word.isupper())


def _is_number(text: str) -> bool:
    return text[0].isdigit() or (text[0] in ".·" and text[1:2].isdigit())


def is_finished(line: Line, text: str) -> bool:
    """Whether a text that ends with this line ends with a sentence."""
    end = _without_trailing_marks(line)
    if not end:
        return True
    bare = end.rstrip(_CLOSERS)
    if not bare or bare[-1] not in ".!?:;…":
        return False
    if bare[-1] in ".…" and _ABBREVIATED.search(bare[-12:]) and end == bare:
        return False
    return text[-400:].count("(") <= text[-400:].count(")") or bare[-1] in "!?"


def _without_trailing_marks(line: Line) -> str:
    """The line's text without the footnote and citation marks raised at its end."""
    end = len(line.text)
    while end and (line.marks[end - 1] == RAISED or line.text[end - 1] == " "):
        end -= 1
    return line.text[:end] if end else line.text.strip()


def goes_on(before: Line, text: str, after: Line, *, full: bool) -> bool:
    """Whether a text goes on with the line `after`; `full` says that its last line is filled."""
    start = after.text.lstrip()
    if not start or abs(before.size - after.size) > 0.06 * before.size:
        return False
    if is_finished(before, text):
        return False
    first = start[0]
    if not first.isalpha() and sum(c.isalpha() for c in start) < 0.4 * len(start) and "=" not in start:
        return False
    if first.islower() or first.isdigit() or first in _RELATIONS + _DASHES + _HYPHENS + ".,;:)]%*/&+|":
        return True
    if first.isupper() or first in _OPENING or first.isalpha():
        return full or text.rstrip()[-1:] in _HYPHENS + _DASHES + ",(["
    return full
