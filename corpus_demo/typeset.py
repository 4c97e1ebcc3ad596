"""Turn filled-in prose into a two-column paper or a numbered, double-spaced manuscript as PDF.

The markup is a line of Markdown: `*italic*`, `**bold**`, `^raised^`, `~lowered~`; blocks stand
apart by blank lines and start with `#`, `##`, `###`, `>` (a reference) or `@name`. Only the fonts
that every PDF viewer has are used; characters that Times lacks come from Symbol.
"""

from __future__ import annotations

import html
from collections.abc import Mapping, Sequence
from pathlib import Path

import regex
from reportlab.graphics.shapes import Drawing, Line, Rect, String
from reportlab.lib.colors import Color, black
from reportlab.lib.pagesizes import A4
from reportlab.lib.styles import ParagraphStyle
from reportlab.pdfgen.canvas import Canvas
from reportlab.platypus import (
    BaseDocTemplate,
    Flowable,
    Frame,
    FrameBreak,
    KeepTogether,
    NextPageTemplate,
    PageTemplate,
    Paragraph,
    Spacer,
    Table,
    TableStyle,
)

Block = tuple[str, str]
STAR = "\ue000"
"""Stands for a star that is no markup while markup is read."""
WIDTH, HEIGHT = A4
MARKS = (
    (r"\*\*(.+?)\*\*", r"<b>\1</b>"),
    (r"\*(.+?)\*", r"<i>\1</i>"),
    (r"\^(.+?)\^", r"<super rise=3.2 size=6.4>\1</super>"),
    (r"~(.+?)~", r"<sub rise=1.8 size=6.4>\1</sub>"),
    # The Greek letters and the minus sign are in Symbol alone among the standard fonts.
    (r"([Α-ω−≤≥]+)", r'<font name="Symbol">\1</font>'),
)


def blocks(prose: str) -> list[Block]:
    """Split filled-in prose into (kind, text)."""
    found = []
    for block in prose.strip().split("\n\n"):
        match = regex.match(r"(#{1,3}|>|@\w+)\s+(.*)", block, regex.DOTALL)
        found.append((match[1], match[2]) if match else ("body", block))
    return found


def plain(text: str) -> str:
    """Take the inline markup out of a text; `\\*` is a star."""
    stars = text.replace(r"\*", STAR)
    found = regex.sub(
        r"\*\*(.+?)\*\*|\*(.+?)\*|\^(.+?)\^|~(.+?)~", lambda m: next(filter(None, m.groups())), stars
    )
    return found.replace(STAR, "*")


def two_columns(prose: str, path: Path, *, head: str, figure: Flowable) -> None:
    """Set a conference paper: title and abstract across, then two columns."""
    parts = blocks(prose)
    footnote = next(text for kind, text in parts if kind == "@footnote")
    top = [p for p in parts if p[0] in ("#", "@authors", "@affiliation", "@abstract", "@keywords")]
    rest = [p for p in parts if p not in top and p[0] != "@footnote"]
    across = [_paragraph(kind, text, PAPER) for kind, text in top]
    story: list[Flowable] = [*across, NextPageTemplate("later"), FrameBreak()]
    for kind, text in rest:
        if kind == "@table":
            story.append(_table(text))
        elif kind == "@figure":
            story.append(KeepTogether([Spacer(1, 6), figure, _paragraph(kind, text, PAPER)]))
        else:
            story.append(_paragraph(kind, text, PAPER))
    document = _Paper(path, title=plain(top[0][1]), author=plain(top[1][1]))
    document.lay_out(head, footnote, sum(_height(p, WIDTH - 2 * MARGIN - 40) for p in across))
    document.build(story)


def manuscript(prose: str, path: Path, *, head: str) -> None:
    """Set a submitted manuscript: one column, double-spaced, every line numbered."""
    parts = blocks(prose)
    document = BaseDocTemplate(
        str(path), pagesize=A4, invariant=1, title=plain(parts[0][1]), author=plain(parts[1][1])
    )

    def furnish(canvas: Canvas, _: object) -> None:
        canvas.setFont("Times-Roman", 9)
        canvas.drawString(80, HEIGHT - 40, head)
        canvas.drawCentredString(WIDTH / 2, 34, f"Page {canvas.getPageNumber()}")

    frame = Frame(80, 56, WIDTH - 142, HEIGHT - 112, 0, 0, 0, 0)
    document.addPageTemplates(PageTemplate("all", [frame], onPage=furnish))
    document.build([_paragraph(kind, text, MANUSCRIPT, NumberedParagraph) for kind, text in parts])


class NumberedParagraph(Paragraph):
    """A paragraph that writes the running number of each of its lines in the margin."""

    def draw(self) -> None:
        """Draw the text, then the numbers; the count goes on from page to page."""
        super().draw()
        count = getattr(self.canv, "_lines_so_far", 0)
        self.canv.setFont("Times-Roman", 8)
        for line in range(len(self.blPara.lines)):
            y = self.height - self.style.fontSize - line * self.style.leading
            self.canv.drawRightString(-18, y, str(count + line + 1))
        self.canv._lines_so_far = count + len(self.blPara.lines)


def _table(text: str) -> Flowable:
    caption, *rows = text.split("\n")
    table = Table([row.split("|") for row in rows], hAlign="LEFT", colWidths=(80, 72, 72), rowHeights=12)
    table.setStyle(TableStyle([
        ("FONT", (0, 0), (-1, -1), "Times-Roman", 8.6), ("ALIGN", (1, 0), (-1, -1), "CENTER"),
        ("LINEABOVE", (0, 0), (-1, 0), 0.8, black), ("LINEBELOW", (0, 0), (-1, 0), 0.4, black),
        ("LINEBELOW", (0, -1), (-1, -1), 0.8, black), ("TOPPADDING", (0, 0), (-1, -1), 1),
        ("BOTTOMPADDING", (0, 0), (-1, -1), 2),
    ]))  # fmt: skip
    return KeepTogether([Spacer(1, 6), _paragraph("@figure", caption, PAPER), table, Spacer(1, 9)])


def bars(
    heights: Mapping[str, Sequence[tuple[float, float]]], names: Sequence[str], *, unit: str, top: float
) -> Drawing:
    """Draw grouped bars with whiskers: for each group its (mean, SD) by name."""
    width, height, base = 225.0, 128.0, 26.0
    scale = (height - base - 8) / top
    drawing = Drawing(width, height)
    drawing.add(Line(26, base, width - 4, base, strokeWidth=0.6))
    drawing.add(Line(26, base, 26, height - 6, strokeWidth=0.6))
    for tick in range(0, int(top) + 1, 20):
        y = base + tick * scale
        drawing.add(Line(23, y, 26, y, strokeWidth=0.6))
        drawing.add(String(20, y - 2.5, str(tick), fontName="Helvetica", fontSize=6.5, textAnchor="end"))
    drawing.add(String(30, height - 10, unit, fontName="Helvetica", fontSize=6.5))
    step = (width - 36) / len(names)
    for place, name in enumerate(names):
        middle = 28 + step * (place + 0.5)
        drawing.add(String(middle, base - 9, name, fontName="Helvetica", fontSize=6.5, textAnchor="middle"))
        for column, values in enumerate(heights.values()):
            _bar(drawing, middle + (column - 1) * 18, base, scale, values[place], column)
    for column, group in enumerate(heights):
        drawing.add(Rect(70 + 60 * column, 4, 7, 7, fillColor=_shade(column), strokeWidth=0.4))
        drawing.add(String(80 + 60 * column, 5, group, fontName="Helvetica", fontSize=6.5))
    return drawing


def _bar(
    drawing: Drawing, x: float, base: float, scale: float, value: tuple[float, float], column: int
) -> None:
    mean, sd = value
    drawing.add(Rect(x, base, 16, mean * scale, fillColor=_shade(column), strokeColor=black, strokeWidth=0.4))
    drawing.add(Line(x + 8, base + (mean - sd) * scale, x + 8, base + (mean + sd) * scale, strokeWidth=0.6))
    for end in (mean - sd, mean + sd):
        drawing.add(Line(x + 5, base + end * scale, x + 11, base + end * scale, strokeWidth=0.6))


def _shade(column: int) -> Color:
    level = (0.9, 0.6)[column]
    return Color(level, level, level)


MARGIN, GUTTER = 52.0, 20.0


class _Paper(BaseDocTemplate):
    """Two columns under running heads; the first page has a block across and a footnote."""

    def __init__(self, path: Path, **facts: str) -> None:
        super().__init__(str(path), pagesize=A4, invariant=1, **facts)

    def lay_out(self, head: str, footnote: str, block_height: float) -> None:
        column = (WIDTH - 2 * MARGIN - GUTTER) / 2
        right = MARGIN + column + GUTTER
        bottom, top = 62.0, HEIGHT - 66
        note = _paragraph("@footnote", footnote, PAPER)
        note_height = _height(note, column)
        below = top - block_height - 10

        def furnish(canvas: Canvas, _: object) -> None:
            page = canvas.getPageNumber()
            canvas.setFont("Times-Italic", 8.5)
            shown = head if page % 2 else "Brandauer, Marchwick and Falkenrath"
            canvas.drawCentredString(WIDTH / 2, HEIGHT - 46, shown)
            canvas.setFont("Times-Roman", 8.5)
            canvas.drawCentredString(WIDTH / 2, 36, str(page + 140))
            if page == 1:
                canvas.setLineWidth(0.4)
                canvas.line(MARGIN, bottom + note_height + 4, MARGIN + 70, bottom + note_height + 4)
                note.drawOn(canvas, MARGIN, bottom)

        lifted = bottom + note_height + 12
        self.addPageTemplates([
            PageTemplate("first", [
                Frame(MARGIN + 20, below, WIDTH - 2 * MARGIN - 40, block_height + 10, 0, 0, 0, 0),
                Frame(MARGIN, lifted, column, below - lifted, 0, 0, 0, 0),
                Frame(right, bottom, column, below - bottom, 0, 0, 0, 0),
            ], onPage=furnish),
            PageTemplate("later", [
                Frame(x, bottom, column, top - bottom, 0, 0, 0, 0) for x in (MARGIN, right)
            ], onPage=furnish),
        ])  # fmt: skip


def _paragraph(
    kind: str, text: str, styles: Mapping[str, ParagraphStyle], maker: type[Paragraph] = Paragraph
) -> Paragraph:
    marked = html.escape(text, quote=False)
    for pattern, replacement in MARKS:
        marked = regex.sub(pattern, replacement, marked)
    return maker(marked, styles[kind])


def _height(paragraph: Paragraph, width: float) -> float:
    height = paragraph.wrap(width, HEIGHT)[1]
    return float(height + paragraph.getSpaceBefore() + paragraph.getSpaceAfter())


def _style(size: float, leading: float, font: str = "Times-Roman", **more: object) -> ParagraphStyle:
    return ParagraphStyle(f"{font}{size}", fontName=font, fontSize=size, leading=leading, **more)


JUSTIFIED, CENTRED = 4, 1
PAPER = {
    "#": _style(17, 20, "Times-Bold", alignment=CENTRED, spaceAfter=8),
    "@authors": _style(11, 14, alignment=CENTRED),
    "@affiliation": _style(9.5, 12, "Times-Italic", alignment=CENTRED, spaceAfter=9),
    "@abstract": _style(9, 11, alignment=JUSTIFIED, spaceAfter=3),
    "@keywords": _style(9, 11, alignment=JUSTIFIED, spaceAfter=6),
    "##": _style(11, 13, "Times-Bold", spaceBefore=9, spaceAfter=3, keepWithNext=1),
    "###": _style(9.8, 12, "Times-BoldItalic", spaceBefore=5, spaceAfter=2, keepWithNext=1),
    "body": _style(9.6, 11.8, alignment=JUSTIFIED, spaceAfter=4),
    "@figure": _style(8.4, 10, spaceBefore=3, spaceAfter=8),
    "@footnote": _style(7.8, 9.4),
    ">": _style(8.4, 10, leftIndent=10, firstLineIndent=-10, spaceAfter=2),
}
DOUBLE = 22.5
MANUSCRIPT = {
    "#": _style(14, DOUBLE, "Times-Bold"),
    "@authors": _style(11.5, DOUBLE),
    "@affiliation": _style(11.5, DOUBLE, "Times-Italic"),
    "@abstract": _style(11.5, DOUBLE),
    "##": _style(12.5, DOUBLE, "Times-Bold", keepWithNext=1),
    "###": _style(11.5, DOUBLE, "Times-Italic", keepWithNext=1),
    "body": _style(11.5, DOUBLE),
    ">": _style(11.5, DOUBLE, leftIndent=14, firstLineIndent=-14),
}
