"""How text looks on a terminal: its width, its colours, its lines, and characters it cannot show."""

from __future__ import annotations

import codecs
import os
import re
import shutil
import textwrap
import unicodedata
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from typing import TextIO

WIDEST = 100
NARROWEST = 40
INDENT = 3
LABEL = 13
RELATION = re.compile(" ([=<>≤≥≈]) ")

# Okabe & Ito (2008), "Color universal design", nearest entries of the 256-colour table.
PALETTE: Mapping[str, str] = {
    "reversal": "1;38;5;166",
    "impossible": "1;38;5;166",
    "inconsistent": "1;38;5;214",
    "conditional": "1;38;5;74",
    "agrees": "38;5;36",
    "heading": "1",
    "label": "2",
}

SPELLED: Mapping[str, str] = {
    "−": "-", "–": "-", "—": "-", "‐": "-", "‑": "-", "“": '"', "”": '"', "‘": "'", "’": "'", "…": "...",
    "≤": "<=", "≥": ">=", "≈": "~", "≠": "!=", "×": "x", "±": "+/-", "·": ".", "∞": "infinity", "²": "2",
    "α": "alpha", "β": "beta", "δ": "delta", "Δ": "Delta", "ε": "epsilon", "η": "eta", "φ": "phi", "χ": "chi",
    "ω": "omega", "█": "#", "░": "=", "│": "|", "─": "-", "═": "=", "┼": "+", "┴": "+", "◄": "<", "►": ">", "�": "?",
}  # fmt: skip
"""How a character is written where the output cannot show it; marks of drawings keep one column."""


@dataclass(frozen=True, slots=True)
class Look:
    """Width in columns, and whether colour may be used beside the words."""

    width: int = 80
    colour: bool = False

    def paint(self, text: str, role: str) -> str:
        """Colour a text by its role; a role without a colour leaves it plain."""
        code = PALETTE.get(role)
        return f"\x1b[{code}m{text}\x1b[0m" if self.colour and code else text

    def rule(self) -> str:
        """A line across the page."""
        return "─" * self.width

    def paragraph(self, text: str, *, indent: int = 0, hanging: int | None = None) -> list[str]:
        """Break a text into lines, the first indented by `indent`, the others by `hanging`.

        No line is broken beside a relation, so that `p = .010` stays whole.
        """
        later = indent if hanging is None else hanging
        lines = textwrap.wrap(
            RELATION.sub("\u00a0\\1\u00a0", clean(text)),
            max(self.width, NARROWEST),
            initial_indent=" " * indent,
            subsequent_indent=" " * later,
            break_on_hyphens=False,
        )
        return [line.replace("\u00a0", " ") for line in lines] or [""]

    def labelled(self, label: str, texts: Iterable[str]) -> list[str]:
        """A label in its own column, and beside it each text from a line of its own; empty ones are left out."""
        lines: list[str] = []
        edge = INDENT + LABEL
        for text in filter(None, texts):
            first, *more = self.paragraph(text, indent=edge)
            named = self.paint(("" if lines else label).ljust(LABEL), "label")
            lines += [" " * INDENT + named + first[edge:], *more]
        return lines


def look_of(stream: TextIO) -> Look:
    """The look that suits a stream: the terminal's width up to 100, colour unless NO_COLOR is set."""
    columns = shutil.get_terminal_size((80, 24)).columns
    colour = (
        stream.isatty()
        and not os.environ.get("NO_COLOR")
        and os.environ.get("TERM") != "dumb"
        and (os.name != "nt" or "WT_SESSION" in os.environ)
    )
    return Look(min(max(columns, NARROWEST), WIDEST), colour)


def clean(text: str) -> str:
    """Make text of a manuscript harmless on a terminal: no control, formatting or lone surrogate codes."""
    spaced = " ".join(text.split())
    if spaced.isprintable():
        return spaced
    return "".join(
        " " if unicodedata.category(character).startswith("Z")
        else "" if unicodedata.category(character) == "Cf"
        else character if character.isprintable()
        else "�"
        for character in spaced
    )  # fmt: skip


def shortened(text: str, columns: int) -> str:
    """Cut the middle out of a long text, so that both its ends stay."""
    text = clean(text)
    if len(text) <= columns:
        return text
    head = (columns - 3) * 2 // 3
    tail = columns - 3 - head
    return f"{text[:head].rstrip()} … {text[-tail:].lstrip()}"


def spell_unencodable(error: UnicodeError) -> tuple[str, int]:
    """Spell out what an encoding lacks, for `codecs.register_error`: `χ` becomes `chi`, `−` becomes `-`."""
    if not isinstance(error, UnicodeEncodeError):
        raise error
    character = error.object[error.start]
    simple = SPELLED.get(character) or unicodedata.normalize("NFKD", character)
    simple = "".join(SPELLED.get(part, part) for part in simple if not unicodedata.combining(part))
    return (simple if simple and simple.isascii() else "?"), error.start + 1


codecs.register_error("recheck-spelled", spell_unencodable)
