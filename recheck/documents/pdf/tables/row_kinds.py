"""What the rows of a page look like: cells set apart, headers, running text."""

from __future__ import annotations

from collections.abc import Sequence

from recheck.documents.pdf.tables.text_rows import Row, is_numeric

_RESTS = ("(", "[", "=", "±")


def is_tabular(row: Row) -> bool:
    """Whether a row has cells: chunks with wide gaps between them, or numbers set apart."""
    if len(row.chunks(1.1)) >= 2 and not _is_loose(row):
        return True
    chunks = row.chunks(0.5)
    return len(chunks) >= 3 and sum(is_numeric(chunk.text) for chunk in chunks[1:]) >= 0.6 * (len(chunks) - 1)


def in_line(row: Row, above: Sequence[Row]) -> bool:
    """Whether the cells of a row begin where cells of the rows above it begin."""
    starts = [chunk.x0 for other in above for chunk in other.chunks(0.9)]
    chunks = row.chunks(0.9)
    return len(chunks) >= 2 and all(any(abs(chunk.x0 - x) < 2.5 for x in starts) for chunk in chunks)


def is_head(row: Row) -> bool:
    """Whether a row may be headers: several short chunks set apart, no sentence."""
    chunks = row.chunks(0.5)
    return len(chunks) > 1 and all(
        len(chunk.text.split()) < 6 and chunk.text[-1] not in ".,;" for chunk in chunks
    )


def is_numbers(row: Row) -> bool:
    """Whether a row is a label with several numbers set apart."""
    chunks = row.chunks(0.7)
    return len(chunks) >= 3 and sum(chunk.numeric for chunk in chunks[1:]) >= 0.7 * (len(chunks) - 1)


def _is_loose(row: Row) -> bool:
    """Whether a row is text that is justified loosely: many words, all about as far apart."""
    gaps = [b - a for a, b in zip(row.x1, row.x0[1:], strict=False)]
    return (
        len(gaps) > 4
        and max(gaps) - min(gaps) < 0.4 * row.size
        and sum(map(str.isalpha, row.text)) > 0.6 * len(row.text)
    )


def has_prose(row: Row) -> bool:
    """Whether a part of a row is running text."""
    chunks = row.chunks(0.5)
    numbers = sum(chunk.numeric for chunk in chunks)
    return any(
        len(words) > 6 and sum(word.isalpha() and word.islower() for word in words) > 3
        for words in (chunk.text.split() for chunk in (chunks[1:] if numbers > 1 else chunks))
    )


def ends_cells(row: Row, below: Row) -> bool:
    """Whether all that stands in a line is the rest of cells of the line above: "(1.8)" under "10.0"."""
    chunks = row.chunks(0.9)
    for chunk in below.chunks(0.9):
        over = next((one for one in chunks if one.x0 < chunk.x1 + 2 and one.x1 > chunk.x0 - 2), None)
        if over is None or not ends(over.text, chunk.text):
            return False
    return True


def ends(text: str, rest: str) -> bool:
    """Whether a text goes on in the line below it: that begins with a bracket or a sign, or this one is open."""
    return rest.lstrip().startswith(_RESTS) or is_open(text)


def is_open(text: str) -> bool:
    """Whether a text cannot end here: a bracket is open, or a sign joins it to what follows."""
    opened = text.count("(") > text.count(")") or text.count("[") > text.count("]")
    return opened or text.rstrip().endswith(("±", "–", ",", " to", "(", "=", "<"))
