"""Text put together from the pieces of a marked-up file, raised and lowered pieces marked."""

from __future__ import annotations

import re

BASE, RAISED, LOWERED = " ", "^", "_"
_SPACE = re.compile(r"[ \t\n\r\f]+")
_AROUND_BREAK = re.compile(r" ?\x0b[ \x0b]*")
_BREAK = "\x0b"


class Runs:
    """Collects the text of one paragraph or cell.

    White space of the file is one space, as a browser shows it; `line_break` gives a line's end.
    """

    __slots__ = ("_marked", "_marks", "_parts")

    def __init__(self) -> None:
        self._parts: list[str] = []
        self._marks: list[str] = []
        self._marked = False

    def add(self, text: str, mark: str = BASE) -> None:
        """Append text as it stands in the file; `mark` is `^` for raised, `_` for lowered text."""
        if text:
            self._parts.append(text)
            self._marks.append(mark)
            self._marked = self._marked or mark != BASE

    def line_break(self) -> None:
        """Append a line's end."""
        self._parts.append(_BREAK)
        self._marks.append(BASE)

    def finished(self) -> tuple[str, str]:
        """Give the text without outer space, and its marks ("" where nothing is raised or lowered)."""
        text = "".join(self._parts)
        marks = ""
        if self._marked:
            marks = "".join(mark * len(part) for part, mark in zip(self._parts, self._marks, strict=True))
        text, marks = _collapsed(text, marks, _SPACE, " ")
        if _BREAK in text:
            text, marks = _collapsed(text, marks, _AROUND_BREAK, "\n")
        return _stripped(text, marks)


def _collapsed(text: str, marks: str, pattern: re.Pattern[str], new: str) -> tuple[str, str]:
    if not marks:
        return pattern.sub(new, text), ""
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
