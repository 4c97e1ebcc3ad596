"""Lines of plain text as manuscripts are typed: numbered at their left, or with a blank line after each."""

from __future__ import annotations

from itertools import pairwise

import regex

_NUMBERED = regex.compile(r"[ \t]*(\d{1,5})(?:[ \t]+(?=\S)|[ \t]*$)")
_SENTENCE_END = regex.compile(r"[.?!:;][\"'”’)\]]*\s*$")
_LEAST = 6
_MOST_BETWEEN = 4

HELD = "\u200b"
"""Put in a blank line that parts nothing, so that lines are still counted as the file has them; dropped with markup."""


def as_typed(lines: list[str]) -> list[str]:
    """The same number of lines without line numbers, and without blank lines that only space the text."""
    return _closed_up(_without_numbers(lines))


def _without_numbers(lines: list[str]) -> list[str]:
    """Blank out whole numbers that rise by one from line to line, six at least, before lines of words."""
    found = list(lines)
    for run in _runs(lines):
        worded = sum(len(regex.findall(r"\p{L}{2,}", lines[at])) >= 3 for at in run)
        if len(run) < _LEAST or worded < 0.5 * len(run):
            continue
        for at in run:
            match = _NUMBERED.match(lines[at])
            end = match.end() if match else 0
            found[at] = " " * (end > 0 and lines[at][:1] in " \t") + lines[at][end:]
    return found


def _runs(lines: list[str]) -> list[list[int]]:
    runs: list[list[int]] = []
    last = 0
    for at, line in enumerate(lines):
        match = _NUMBERED.match(line)
        if match is None:
            continue
        value = int(match[1])
        if runs and value == last + 1 and at - runs[-1][-1] <= _MOST_BETWEEN:
            runs[-1].append(at)
        else:
            runs.append([at])
        last = value
    return runs


def _closed_up(lines: list[str]) -> list[str]:
    """Hold the blank lines inside paragraphs of a text that has one after every line."""
    worded = [at for at, line in enumerate(lines) if line.strip()]
    if len(worded) < _LEAST or not _is_spaced(lines, worded):
        return lines
    found = list(lines)
    usual = sorted(len(lines[at].rstrip()) for at in worded)[len(worded) // 2]
    for one, other in pairwise(worded):
        if other - one == 2 and _goes_on(lines[one], lines[other], usual):
            found[one + 1] = HELD
    return found


def _is_spaced(lines: list[str], worded: list[int]) -> bool:
    """Whether nearly all lines stand alone and most break off in the middle of a sentence."""
    apart = [other - one == 2 for one, other in pairwise(worded)]
    broken = [not _SENTENCE_END.search(lines[at]) for at in worded]
    long = [len(lines[at].split()) >= 5 for at in worded]
    return sum(apart) >= 0.8 * len(apart) and sum(broken) > 0.5 * len(broken) and sum(long) > 0.7 * len(long)


def _goes_on(line: str, following: str, usual: int) -> bool:
    """Whether a text goes on over a blank line: its line is full, and neither side is a heading or a list."""
    if following.lstrip()[:1] in ("#", "|", ">") or line.lstrip()[:1] in ("#", "|"):
        return False
    if len(line.rstrip()) < 0.7 * usual:
        return False
    return not _SENTENCE_END.search(line) or len(line.rstrip()) > 0.85 * usual
