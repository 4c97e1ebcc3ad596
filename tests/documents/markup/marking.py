"""Articles in JATS and HTML written for the tests, in the bakery scenario."""

from __future__ import annotations

from recheck.documents import open_document
from recheck.model import Document, Table

MATHML = 'xmlns="http://www.w3.org/1998/Math/MathML"'


DECLARED = '<?xml version="1.0"?>'


def jats(body: str, *, abstract: str = "", back: str = "", more: str = "", head: str = DECLARED) -> bytes:
    """An article around a body; `more` follows the back matter, `head` stands before the root."""
    text = (
        f"{head}"
        '<article xmlns:mml="http://www.w3.org/1998/Math/MathML" xmlns:xlink="http://www.w3.org/1999/xlink">'
        "<front><journal-meta><journal-title>Annals of Crust</journal-title></journal-meta><article-meta>"
        "<title-group><article-title>Heights of <italic>rye</italic> loaves</article-title></title-group>"
        f"<contrib-group><contrib><name><surname>Krume</surname></name></contrib></contrib-group>{abstract}"
        f"</article-meta></front><body>{body}</body><back>{back}</back>{more}</article>"
    )
    return text.encode()


def page(body: str, *, head: str = "<title>Heights of rye loaves</title>") -> bytes:
    """A page around a body."""
    return (
        f"<!DOCTYPE html><html><head><meta charset='utf-8'>{head}</head><body>{body}</body></html>".encode()
    )


def read(data: bytes | str) -> Document:
    """The document that a marked-up file becomes."""
    return open_document(data if isinstance(data, bytes) else data.encode(), name="bench")


def said(document: Document) -> list[tuple[str, str]]:
    """Kind and text of every passage, in order."""
    return [(passage.kind, passage.text) for passage in document.passages]


def grid(table: Table) -> list[list[str]]:
    """The texts of a table by row and column; a merged cell is told at its first place, "" where none begins."""
    rows = [["" for _ in range(table.columns)] for _ in range(table.rows)]
    for cell in table.cells:
        rows[cell.row][cell.column] = cell.text
    return rows
