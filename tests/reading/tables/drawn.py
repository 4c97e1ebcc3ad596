"""Small tables drawn in text: a line for each row, `|` between cells, `<2` behind a cell over two columns."""

from __future__ import annotations

import re

from recheck.documents.grids import Spanned, table_of
from recheck.model import Claim, Context, Passage, Table
from recheck.reading.context import Setting
from recheck.reading.tables.frame import Frame, frame_of
from recheck.reading.tables.grid import Sheet, sheet_of
from recheck.reading.tables.legend import legend_of
from recheck.reading.tables.reading import read_table


def table(drawing: str, *, caption: str = "", note: str = "", head: int = 0) -> Table:
    """The table; `\\n` in a cell stands for a line's end, `x^a` for a raised letter."""
    rows = [
        [_cell(text) for text in line.strip().strip("|").split("|")] for line in drawing.strip().splitlines()
    ]
    return table_of(
        rows, label="Table 1", header_rows=head, caption=Passage(text=caption, kind="caption", table="Table 1") if caption else None,
        notes=(Passage(text=note, kind="note", table="Table 1"),) if note else (),
    )  # fmt: skip


def _cell(text: str) -> Spanned:
    text = text[1:] if text.startswith(" ") else text
    text = text.rstrip(" ")
    span = re.search(r" ?<(\d)$", text)
    text = (text[: span.start()] if span else text).replace("\\n", "\n")
    marks = "".join("^" if k and text[k - 1] == "^" else " " for k, char in enumerate(text) if char != "^")
    plain = text.replace("^", "")
    passage = Passage(text=plain, kind="table", table="Table 1", marks=marks if "^" in marks else "")
    return Spanned(passage, column_span=int(span[1]) if span else 1)


def sheet(drawing: str, *, head: int = 0) -> Sheet:
    """The first block of the table."""
    found = sheet_of(table(drawing, head=head))
    assert found is not None
    return found


def frame(drawing: str, *, caption: str = "", note: str = "", head: int = 0) -> Frame:
    """The first block with its legend and roles."""
    drawn = table(drawing, caption=caption, note=note, head=head)
    found = sheet_of(drawn)
    assert found is not None
    return frame_of(found, legend_of(drawn), Setting(Context()))


def claims(drawing: str, *, caption: str = "", note: str = "", head: int = 0) -> list[Claim]:
    """The claims of the table."""
    read = read_table(table(drawing, caption=caption, note=note, head=head), Setting(Context()))
    return [item.claim for item in read.found]


def told_of(claim: Claim) -> str:
    """The numbers of a claim in one line: `mean 5.1, sd 1.2`."""
    return ", ".join(
        f"{name} {'' if value.relation == '=' else value.relation}{value.text}"
        for name, value in sorted(claim.values.items())
    )
