"""A table of the neutral notation, written as the formats hold tables."""

from __future__ import annotations

import io
from collections.abc import Callable
from html import escape
from itertools import groupby

import docx
import regex
from docx.oxml.ns import qn
from docx.shared import Pt

from recheck.documents import open_document
from recheck.documents.grids import Spanned, table_of
from recheck.documents.runs import Runs
from recheck.model import Document, Passage
from tests.reading.tables.cases import Spot, TableCase
from tests.reading.tables.paged import pdf_file

_PIECE = regex.compile(
    r"\^\{(?P<up>[^}]*)\}|_\{(?P<down>[^}]*)\}|(?P<break>//)|(?P<text>(?:(?!\^\{|_\{|//).)+)"
)
_SYMBOL = regex.compile(r"(?<![\w*'’])(t|F|p|r|n|N|M|SD|SE|d|z|U)(?![\w*'’])")

BEFORE = "The bakers were told nothing of the flour until the last loaf had been cut."
AFTER = "After the tasting the panel went home."


def pieces(text: str) -> list[tuple[str, str]]:
    """(what, text) of the parts of a cell: "up", "down", "break" or "text"."""
    return [(match.lastgroup or "", match[match.lastgroup or 0]) for match in _PIECE.finditer(text)]


def caption_of(case: TableCase) -> tuple[str, str]:
    """Label and title: `Table 1.` and the rest."""
    match = regex.match(r"(Table \w+)[.:]? *(.*)", case.caption)
    return (match[1], match[2]) if match else ("", case.caption)


def document_of(case: TableCase, kind: str) -> Document:
    """The document that a case becomes when it is opened in one of the formats."""
    if kind == "grid":
        return _grid(case)
    return open_document(WRITERS[kind](case), name=f"table.{kind}")


def _grid(case: TableCase) -> Document:
    """No file at all: the table as a reader hands it on."""
    label, title = caption_of(case)
    rows = [
        [_spanned(spot, case, label) for spot in case.spots if spot.row == row] for row in range(case.rows)
    ]
    caption = Passage(text=f"{label}. {title}" if label else title, kind="caption", table=label or None)
    notes = tuple(Passage(text=_flat(note), kind="note", table=label or None) for note in case.notes)
    table = table_of(rows, label=label, caption=caption, notes=notes, header_rows=case.head, before=1)
    passages = (Passage(text=BEFORE), caption, *notes, Passage(text=AFTER))
    return Document(name="table.grid", format="grid", sha256="", passages=passages, tables=(table,))


def _spanned(spot: Spot, case: TableCase, label: str) -> Spanned:
    runs = Runs()
    for what, text in pieces(spot.text):
        if what == "break":
            runs.line_break()
        else:
            runs.add(text, {"up": "^", "down": "_"}.get(what, " "))
    text, marks = runs.finished()
    passage = Passage(text=text, marks=marks, kind="table", table=label or None)
    return Spanned(passage, spot.rows, spot.columns, spot.row < case.head, spot.indent)


def _flat(text: str) -> str:
    return "".join("\n" if what == "break" else piece for what, piece in pieces(text))


def _tagged(text: str, up: str, down: str, slanted: str, line_end: str) -> str:
    """Text with tags of one markup language; the usual symbols are set in italics."""
    parts = []
    for what, piece in pieces(text):
        if what == "break":
            parts.append(line_end)
        elif what == "text":
            parts.append(_SYMBOL.sub(rf"<{slanted}>\1</{slanted}>", escape(piece)))
        else:
            tag = up if what == "up" else down
            parts.append(f"<{tag}>{escape(piece)}</{tag}>")
    return "".join(parts)


def _cells(case: TableCase, row: int, write: Callable[[Spot], str], *, all_heads: bool) -> str:
    cells = []
    for spot in (spot for spot in case.spots if spot.row == row):
        tag = "th" if row < case.head and all_heads else "td"
        spans = (f' rowspan="{spot.rows}"' if spot.rows > 1 else "") + (
            f' colspan="{spot.columns}"' if spot.columns > 1 else ""
        )
        cells.append(f"<{tag}{spans}>{write(spot)}</{tag}>")
    return f"<tr>{''.join(cells)}</tr>"


def _body(case: TableCase, write: Callable[[Spot], str], *, all_heads: bool) -> str:
    rows = [_cells(case, row, write, all_heads=all_heads) for row in range(case.rows)]
    return f"<thead>{''.join(rows[: case.head])}</thead><tbody>{''.join(rows[case.head :])}</tbody>"


def jats(case: TableCase) -> bytes:
    """An article of the journals' own XML, with one table-wrap."""

    def write(spot: Spot) -> str:
        return "\u2003" * spot.indent + _tagged(spot.text, "sup", "sub", "italic", "<break/>")

    label, title = caption_of(case)
    notes = "".join(
        f"<fn><p>{_tagged(note, 'sup', 'sub', 'italic', '<break/>')}</p></fn>" for note in case.notes
    )
    foot = f"<table-wrap-foot>{notes}</table-wrap-foot>" if notes else ""
    wrap = (
        f'<table-wrap id="t1"><label>{label}</label><caption><p>{_tagged(title, "sup", "sub", "italic", "")}</p></caption>'
        f"<table>{_body(case, write, all_heads=True)}</table>{foot}</table-wrap>"
    )
    text = (
        '<?xml version="1.0" encoding="UTF-8"?><article><front><article-meta><title-group><article-title>Loaves'
        "</article-title></title-group></article-meta></front><body><sec><title>Results</title>"
        f"<p>{BEFORE}</p>{wrap}<p>{AFTER}</p></sec></body></article>"
    )
    return text.encode()


def html(case: TableCase) -> bytes:
    """A page with one table."""

    def write(spot: Spot) -> str:
        return "&nbsp;&nbsp;" * spot.indent + _tagged(spot.text, "sup", "sub", "em", "<br>")

    label, title = caption_of(case)
    notes = "".join(
        f'<p class="table-note">{_tagged(note, "sup", "sub", "em", "<br>")}</p>' for note in case.notes
    )
    text = (
        "<!DOCTYPE html><html><head><title>Loaves</title></head><body><article><h2>Results</h2>"
        f"<p>{BEFORE}</p><table><caption>{label}. {_tagged(title, 'sup', 'sub', 'em', '')}</caption>"
        f"{_body(case, write, all_heads=True)}</table>{notes}<p>{AFTER}</p></article></body></html>"
    )
    return text.encode()


def markdown(case: TableCase) -> bytes:
    """A pipe table under its caption."""

    def write(text: str) -> str:
        tagged = _tagged(text, "sup", "sub", "em", " ").replace("*", "\\*")
        return (
            regex.sub(r"</?em>", "*", tagged).replace("&lt;", "<").replace("&gt;", ">").replace("&#x27;", "'")
        )

    rows = [[""] * case.columns for _ in range(case.rows)]
    for spot in case.spots:
        rows[spot.row][spot.column] = "&nbsp;&nbsp;" * spot.indent + write(spot.text)
    lines = ["| " + " | ".join(row) + " |" for row in rows]
    # A pipe table has one head row: further ones stand in its body.
    lines.insert(1, "|" + "---|" * case.columns)
    label, title = caption_of(case)
    parts = [
        "# Results",
        BEFORE,
        f"**{label}.** {write(title)}",
        "\n".join(lines),
        *map(write, case.notes),
        AFTER,
    ]
    return ("\n\n".join(parts) + "\n").encode()


def text(case: TableCase) -> bytes:
    """A table of aligned columns, as typed text holds it."""
    rows = [[""] * case.columns for _ in range(case.rows)]
    for spot in case.spots:
        rows[spot.row][spot.column] = "  " * spot.indent + _flat(spot.text)
    widths = [max(len(row[column]) for row in rows) for column in range(case.columns)]
    typed = [
        "   ".join(cell.ljust(width) for cell, width in zip(row, widths, strict=True)).rstrip()
        for row in rows
    ]
    rule = "-" * max(map(len, typed))
    label, title = caption_of(case)
    grid = "\n".join([rule, *typed[: case.head], rule, *typed[case.head :], rule])
    parts = [BEFORE, f"{label}. {_flat(title)}\n{grid}", *map(_flat, case.notes), AFTER]
    return ("\n\n".join(parts) + "\n").encode()


def word(case: TableCase) -> bytes:
    """A word processor's file."""
    file = docx.Document()
    file.add_heading("Results", 1)
    file.add_paragraph(BEFORE)
    label, title = caption_of(case)
    _write(file.add_paragraph(style="Caption"), f"{label}. {title}")
    table = file.add_table(case.rows, case.columns)
    for spot in case.spots:
        cell = table.cell(spot.row, spot.column)
        if spot.rows > 1 or spot.columns > 1:
            cell = cell.merge(table.cell(spot.row + spot.rows - 1, spot.column + spot.columns - 1))
        paragraph = cell.paragraphs[0]
        if spot.indent:
            paragraph.paragraph_format.left_indent = Pt(10 * spot.indent)
        _write(paragraph, spot.text)
    for row in range(case.head):
        properties = table.rows[row]._tr.get_or_add_trPr()
        properties.append(properties.makeelement(qn("w:tblHeader"), {}))
    for note in case.notes:
        _write(file.add_paragraph(), note)
    file.add_paragraph(AFTER)
    stream = io.BytesIO()
    file.save(stream)
    return stream.getvalue()


def _write(paragraph: docx.text.paragraph.Paragraph, text: str) -> None:
    for what, piece in pieces(text):
        if what == "break":
            paragraph.add_run().add_break()
            continue
        slanted = [
            (bool(key), "".join(group))
            for key, group in groupby(_SYMBOL.splititer(piece), key=_SYMBOL.fullmatch)
        ]
        for is_symbol, part in slanted if what == "text" else [(False, piece)]:
            run = paragraph.add_run(part)
            run.italic = is_symbol or None
            if what in ("up", "down"):
                setattr(run.font, "superscript" if what == "up" else "subscript", True)


WRITERS: dict[str, Callable[[TableCase], bytes]] = {
    "jats": jats, "html": html, "markdown": markdown, "text": text, "docx": word, "pdf": pdf_file,
}  # fmt: skip
