"""Text put together from the pieces of a marked-up file, raised and lowered pieces marked."""

from __future__ import annotations

import re
from itertools import groupby

BASE, RAISED, LOWERED = " ", "^", "_"
_SPACES = re.compile(" {2,}")
_HARD = re.compile("[\t\n\r\f\u00a0\u1680\u2000-\u200a\u2028\u2029\u202f\u205f\u3000]")
_AROUND_BREAK = re.compile(r" ?\x0b[ \x0b]*")
_BREAK = "\x0b"


class Runs:
    """Collects the text of one paragraph or cell.

    White space of the file, hard and thin spaces too, is one space; `line_break` gives a line's end.
    `parts` are the pieces so far; text on the base line may be appended to them directly.
    """

    __slots__ = ("_marked", "parts")

    def __init__(self) -> None:
        self.parts: list[str] = []
        self._marked: list[tuple[int, str]] = []

    def add(self, text: str, mark: str = BASE) -> None:
        """Append text as it stands in the file; `mark` is `^` for raised, `_` for lowered text."""
        if text:
            if mark != BASE:
                self._marked.append((len(self.parts), mark))
            self.parts.append(text)

    def add_marked(self, text: str, marks: str) -> None:
        """Append text that was finished before, with its marks."""
        if not marks:
            self.add(text)
            return
        start = 0
        for mark, run in groupby(marks):
            end = start + len(list(run))
            self.add(text[start:end], mark)
            start = end

    def line_break(self) -> None:
        """Append a line's end."""
        self.parts.append(_BREAK)

    def ends_line(self) -> bool:
        """Tell whether nothing but white space follows a line's end."""
        for part in reversed(self.parts):
            if part == _BREAK:
                return True
            if not part.isspace():
                return False
        return False

    def leading(self) -> str:
        """The white space that the text begins with, as it stands in the file."""
        text = ""
        for part in self.parts:
            bare = part.lstrip()
            text += part[: len(part) - len(bare)]
            if bare:
                break
        return text

    def finished(self) -> tuple[str, str]:
        """Give the text without outer space, and its marks ("" where nothing is raised or lowered)."""
        text = "".join(self.parts)
        if not self._marked:
            if _BREAK not in text:
                return _spaced(text), ""
            return "\n".join(filter(None, (" ".join(line.split()) for line in text.split(_BREAK)))), ""
        text, marks = _alone(_plain(text), self._marks())
        if _BREAK in text:
            text, marks = _collapsed(text, marks, _AROUND_BREAK, "\n")
        return _stripped(text, marks)

    def _marks(self) -> str:
        marks = []
        last = 0
        for at, mark in self._marked:
            marks += [BASE * sum(map(len, self.parts[last:at])), mark * len(self.parts[at])]
            last = at + 1
        marks.append(BASE * sum(map(len, self.parts[last:])))
        return "".join(marks)


def _plain(text: str) -> str:
    """Text with a plain space for each white space, the break apart; looking for others is faster than replacing them."""
    text = text.replace("\n", " ")
    if "\t" in text or "\r" in text or "\f" in text or (not text.isascii() and _HARD.search(text)):
        return _HARD.sub(" ", text)
    return text


def _spaced(text: str) -> str:
    text = _plain(text)
    return " ".join(text.split()) if "  " in text else text.strip()


def _alone(text: str, marks: str) -> tuple[str, str]:
    return _collapsed(text, marks, _SPACES, " ") if "  " in text else (text, marks)


def _collapsed(text: str, marks: str, pattern: re.Pattern[str], new: str) -> tuple[str, str]:
    parts: list[str] = []
    kept: list[str] = []
    last = 0
    for match in pattern.finditer(text):
        start, end = match.span()
        parts += (text[last:start], new)
        kept += (marks[last:start], BASE)
        last = end
    return "".join([*parts, text[last:]]), "".join([*kept, marks[last:]])


def _stripped(text: str, marks: str) -> tuple[str, str]:
    inner = text.strip(" \n")
    start = text.find(inner)
    return inner, marks[start : start + len(inner)]
