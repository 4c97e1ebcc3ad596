"""Captions of tables among the lines of a page."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import regex

from recheck.documents.pdf.lines import Line
from recheck.documents.sections import caption_label, captioned

_CONTINUED = regex.compile(r"\bcont(?:inued|['’]?d|\.)", regex.IGNORECASE)


@dataclass(frozen=True, slots=True, eq=False)
class Caption:
    """The line with which a caption begins."""

    line: Line
    label: str
    continued: bool


def captions_of(lines: Sequence[Line]) -> list[Caption]:
    """The lines of a page with which captions of tables may begin."""
    found = []
    for line in lines:
        start = line.text.lstrip()[:40].lower()
        if "tab" not in start or (
            captioned(line.text, sure=True) is None and not _CONTINUED.search(line.text[:40])
        ):
            continue
        label = caption_label(line.text)
        if "Table" in label:
            found.append(Caption(line, label, bool(_CONTINUED.search(line.text[:60]))))
    return found
