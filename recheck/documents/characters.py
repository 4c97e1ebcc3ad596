"""Characters made plain one by one, so that each keeps its place."""

from __future__ import annotations

import unicodedata
from functools import cache

import numpy as np
from numpy.typing import NDArray

BASE, RAISED, LOWERED = 0, 1, 2
MARKS = " ^_"

_SOFT_HYPHEN = 0xAD
_DROPPED = {_SOFT_HYPHEN, 0x200B, 0x2060, 0xFEFF, 0xFFFE, 0xFFFF, 0}


@cache
def plain(code: int) -> tuple[str, int]:
    """What stands for a character after NFKC, and the mark that it carries in itself.

    `²` is a raised 2. Fractions and characters whose compatible form begins with a space (a lone
    accent) stay: `2½` must not become `21⁄2`.
    """
    if code in _DROPPED:
        return "", BASE
    if 0xD800 <= code < 0xE000 or code > 0x10FFFF:
        return "\ufffd", BASE
    char = chr(code)
    form = unicodedata.decomposition(char)
    if form.startswith("<fraction>"):
        return char, BASE
    mark = RAISED if form.startswith("<super>") else LOWERED if form.startswith("<sub>") else BASE
    became = unicodedata.normalize("NFKC", char)
    if unicodedata.category(char) in ("Zs", "Zl", "Zp"):
        return " ", BASE
    if not became or became[0] == " ":
        return char, BASE
    return became, mark


def made_plain(
    codes: NDArray[np.uint32], marks: NDArray[np.uint8]
) -> tuple[NDArray[np.uint32], NDArray[np.uint8], NDArray[np.intp]]:
    """Normalise code points; gives new codes, new marks and for each the index of its source.

    A character keeps the mark that its place on the line gave it; else the one it carries itself.
    """
    odd = np.flatnonzero((codes > 0x7E) | (codes == 0))
    if not len(odd):
        return codes, marks, np.arange(len(codes))
    counts = np.ones(len(codes), dtype=np.intp)
    replaced = [plain(int(code)) for code in codes[odd]]
    counts[odd] = [len(text) for text, _ in replaced]
    source = np.repeat(np.arange(len(codes)), counts)
    new_codes, new_marks = codes[source], marks[source]
    starts = np.cumsum(counts) - counts
    for at, (text, mark) in zip(starts[odd].tolist(), replaced, strict=True):
        for offset, char in enumerate(text):
            new_codes[at + offset] = ord(char)
            if mark and new_marks[at + offset] == BASE:
                new_marks[at + offset] = mark
    return new_codes, new_marks, source


def as_text(codes: NDArray[np.uint32]) -> str:
    """Code points as a string."""
    return codes.astype("<u4").tobytes().decode("utf-32-le", "replace")


def as_codes(text: str) -> NDArray[np.uint32]:
    """A string as code points."""
    return np.frombuffer(text.encode("utf-32-le", "surrogatepass"), dtype="<u4").astype(np.uint32)


def mark_string(marks: NDArray[np.uint8]) -> str:
    """Marks as a string of the same length, empty if nothing is raised or lowered."""
    if not marks.any():
        return ""
    return "".join(MARKS[mark] for mark in marks.tolist())


def plain_text(text: str, marks: str = "") -> tuple[str, str]:
    """A string and its marks with every character made plain."""
    if text.isascii():
        return text, marks
    held = np.zeros(len(text), dtype=np.uint8)
    if marks:
        held = np.array([MARKS.index(mark) for mark in marks], dtype=np.uint8)
    codes, found, _ = made_plain(as_codes(text), held)
    return as_text(codes), mark_string(found)
