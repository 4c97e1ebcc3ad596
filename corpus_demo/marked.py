"""Write filled-in prose as a JATS article, an HTML page or a Word document."""

from __future__ import annotations

import datetime
import html
from collections.abc import Callable, Iterator
from pathlib import Path

import docx
import regex
from docx.table import Table as WordTable
from docx.text.paragraph import Paragraph
from tables import Box, Grid, grid_of
from typeset import STAR, Block, blocks, plain

_INLINE = regex.compile(r"\*\*(.+?)\*\*|\*(.+?)\*|\^(.+?)\^|~(.+?)~|\[(\d+)\]")
_JATS = ("bold", "italic", "sup", "sub")
_HTML = ("strong", "em", "sup", "sub")
_SECTIONS = ("##", "###")


def jats(prose: str, path: Path) -> None:
    """Write a JATS article (NISO Z39.96) with one level of sections."""
    parts = _parts(prose)
    title, authors, affiliation, abstract = (parts.pop(0)[1] for _ in range(4))
    names = "".join(
        f'<contrib contrib-type="author"><name><surname>{last}</surname><given-names>{first}</given-names></name></contrib>'
        for first, last in (name.split(" ", 1) for name in authors.split(", "))
    )
    front = (
        f"<front><article-meta><title-group><article-title>{_escaped(title, _JATS)}</article-title></title-group>"
        f"<contrib-group>{names}</contrib-group><aff>{affiliation}</aff>"
        f"<abstract><p>{_escaped(abstract, _JATS)}</p></abstract></article-meta></front>"
    )
    body, back = _jats_body(parts)
    text = (
        '<?xml version="1.0" encoding="UTF-8"?>\n<!DOCTYPE article PUBLIC "-//NLM//DTD JATS (Z39.96) Journal Publishing DTD v1.2 20190208//EN" '
        f'"JATS-journalpublishing1.dtd">\n<article article-type="research-article">\n{front}\n<body>{body}</body>\n{back}</article>\n'
    )
    path.write_text(text, encoding="utf-8")


def _jats_body(parts: list[Block]) -> tuple[str, str]:
    body, references, opened = [], [], False
    for kind, text in parts:
        if kind in _SECTIONS and text != "References":
            body.append(f"{'</sec>' if opened else ''}\n<sec><title>{text}</title>")
            opened = True
        elif kind == "@table":
            body.append(_jats_table(grid_of(text)))
        elif kind == "@note":
            body[-1] = body[-1].replace(
                "</table-wrap>",
                f"<table-wrap-foot><p>{_escaped(text, _JATS)}</p></table-wrap-foot></table-wrap>",
            )
        elif kind == ">":
            references.append(f"<ref><mixed-citation>{_escaped(text, _JATS)}</mixed-citation></ref>")
        elif kind == "body":
            body.append(f"<p>{_escaped(text, _JATS)}</p>")
    listed = f"<back><ref-list><title>References</title>{''.join(references)}</ref-list></back>\n"
    return "\n".join([*body, "</sec>\n"]), listed if references else ""


def _jats_table(grid: Grid) -> str:
    return (
        f"<table-wrap><label>{grid.label}</label><caption><title>{_escaped(grid.caption, _JATS)}</title></caption>"
        f"{_rows(grid, _JATS)}</table-wrap>"
    )


def page(prose: str, path: Path) -> None:
    """Write an article page with a menu, a footer and a style sheet around the article."""
    parts = _parts(prose)
    menu = "".join(f"<li><a href='#'>{text}</a></li>" for kind, text in parts if kind == "##")
    text = (
        f'<!DOCTYPE html>\n<html lang="en"><head><meta charset="utf-8"><title>{plain(parts[0][1])}</title>\n'
        "<style>table { border-top: 1px solid } caption { text-align: left }</style></head>\n"
        f"<body><nav><ul>{menu}</ul></nav>\n<main>\n{''.join(_html_parts(parts))}</main>\n"
        "<footer>Port Leaven Papers on Bread, issue 3</footer></body></html>\n"
    )
    path.write_text(text, encoding="utf-8")


def _html_parts(parts: list[Block]) -> Iterator[str]:
    levels = {"#": "h1", "##": "h2", "###": "h3"}
    for kind, text in parts:
        if kind == "@table":
            grid = grid_of(text)
            caption = f"<caption>{grid.label}. {_escaped(grid.caption, _HTML)}</caption>"
            yield _rows(grid, _HTML).replace("<table>", f"<table>{caption}", 1) + "\n"
        elif kind in levels:
            yield f"<{levels[kind]}>{_escaped(text, _HTML)}</{levels[kind]}>\n"
        else:
            yield f"<p>{_escaped(text, _HTML)}</p>\n"


def _rows(grid: Grid, tags: tuple[str, ...]) -> str:
    head = "".join(f"<tr>{''.join(_cell(box, 'th', tags) for box in row)}</tr>\n" for row in grid.head)
    body = "".join(f"<tr>{''.join(_cell(box, 'td', tags) for box in row)}</tr>\n" for row in grid.body)
    return f"<table>\n<thead>{head}</thead>\n<tbody>{body}</tbody></table>"


def _cell(box: Box, tag: str, tags: tuple[str, ...]) -> str:
    rows = f' rowspan="{box.rows}"' if box.rows > 1 else ""
    columns = f' colspan="{box.columns}"' if box.columns > 1 else ""
    return f"<{tag}{rows}{columns}>{_escaped(box.text, tags)}</{tag}>"


def word(prose: str, path: Path) -> None:
    """Write a Word document: styles for title and headings, merged cells, raised and lowered runs."""
    document = docx.Document()
    day = datetime.datetime(2026, 3, 2, tzinfo=datetime.UTC)
    document.core_properties.created = document.core_properties.modified = day
    parts = _parts(prose)
    document.core_properties.title = plain(parts[0][1])
    for kind, text in parts:
        if kind == "@table":
            grid = grid_of(text)
            _runs(document.add_paragraph(style="Caption"), f"{grid.label}. {grid.caption}")
            _fill(document.add_table(len(grid.head) + len(grid.body), _width(grid)), grid)
        elif kind.startswith("#"):
            document.add_heading(text, len(kind) - 1)
        else:
            _runs(document.add_paragraph(), text)
    document.save(str(path))


def _width(grid: Grid) -> int:
    return max(sum(box.columns for box in row) for row in grid.head + grid.body)


def _fill(table: WordTable, grid: Grid) -> None:
    taken: set[tuple[int, int]] = set()
    for row, boxes in enumerate(grid.head + grid.body):
        column = 0
        for box in boxes:
            while (row, column) in taken:
                column += 1
            taken |= {
                (row + down, column + right) for down in range(box.rows) for right in range(box.columns)
            }
            cell = table.cell(row, column)
            if box.rows > 1 or box.columns > 1:
                cell = cell.merge(table.cell(row + box.rows - 1, column + box.columns - 1))
            _runs(cell.paragraphs[0], box.text)


def _runs(paragraph: Paragraph, text: str) -> None:
    """Add a text run by run: bold, italic, raised, lowered, or as it stands."""
    text, last = text.replace(r"\*", STAR), 0
    for match in _INLINE.finditer(text):
        paragraph.add_run(text[last : match.start()].replace(STAR, "*"))
        bold, italic, raised, lowered, citation = match.groups()
        run = paragraph.add_run(bold or italic or raised or lowered or citation)
        run.bold, run.italic = bool(bold) or None, bool(italic) or None
        if raised or citation:
            run.font.superscript = True
        if lowered:
            run.font.subscript = True
        last = match.end()
    paragraph.add_run(text[last:].replace(STAR, "*"))


def _parts(prose: str) -> list[Block]:
    return [(kind, text.strip()) for kind, text in blocks(prose)]


def _escaped(text: str, tags: tuple[str, ...]) -> str:
    """Write inline markup as tags, citations as raised numbers."""

    def tagged(match: regex.Match[str]) -> str:
        at = next(i for i, group in enumerate(match.groups()) if group)
        tag = tags[at] if at < len(tags) else "sup"
        return f"<{tag}>{match[at + 1]}</{tag}>"

    escaped = html.escape(text.replace(r"\*", STAR), quote=False)
    return _INLINE.sub(tagged, escaped).replace(STAR, "*")


WRITERS: dict[str, Callable[[str, Path], None]] = {".xml": jats, ".html": page, ".docx": word}
