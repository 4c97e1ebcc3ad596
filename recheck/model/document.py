"""A manuscript that was opened: its passages and tables, each with its place."""

from __future__ import annotations

from dataclasses import dataclass, field

from recheck.model.passage import Passage
from recheck.model.table import Table


@dataclass(frozen=True, slots=True, eq=False)
class Document:
    """A manuscript that was opened: its passages in reading order, its tables, and what is known of the file.

    A cell of a table is no passage of its own; caption and notes are.
    """

    name: str
    format: str
    sha256: str
    passages: tuple[Passage, ...]
    pages: int | None = None
    words: int = 0
    title: str | None = None
    reader: str = ""
    notes: tuple[str, ...] = field(default=())
    tables: tuple[Table, ...] = ()
