"""What opening a Word document costs beside python-docx, which only parses it and gives its text."""

from __future__ import annotations

import io
import random

import docx
from docx.oxml.parser import parse_xml
from docx.oxml.table import CT_Tbl

from recheck.documents import open_document
from tests.benchmarks.pages import WORDS, interleaved

_SPACE = 'xmlns:m="http://schemas.openxmlformats.org/officeDocument/2006/math"'
_EQUATION = f"<m:oMath {_SPACE}><m:r><m:t>F</m:t></m:r><m:r><m:t>(2,61)=3.40</m:t></m:r></m:oMath>"


def sample_docx(pages: int, *, table_rows: int = 12) -> bytes:
    """An article of the bakery scenario: headings, paragraphs in runs, indices, equations, a table every third page."""
    chance = random.Random(20260101)
    document = docx.Document()
    document.add_heading("Bench scoring of sourdough", 0)
    for page in range(pages):
        document.add_heading(f"Trial {page + 1}", 1)
        for _ in range(4):
            _paragraph(document, chance)
        if page % 3 == 0:
            document.add_paragraph(f"Table {page // 3 + 1}. Heights of the loaves (mm).")
            _table(document, chance, table_rows)
    stream = io.BytesIO()
    document.save(stream)
    return stream.getvalue()


def _paragraph(document: docx.document.Document, chance: random.Random) -> None:
    paragraph = document.add_paragraph()
    for _ in range(6):
        paragraph.add_run(" ".join(chance.choice(WORDS) for _ in range(20)) + ", ")
        paragraph.add_run("t").italic = True
        paragraph.add_run("22").font.subscript = True
        paragraph.add_run(f" = {chance.uniform(0.1, 9):.2f}. ")
    paragraph._p.append(parse_xml(_EQUATION))


def _table(document: docx.document.Document, chance: random.Random, rows: int) -> None:
    table = document.add_table(rows + 1, 5)
    element: CT_Tbl = table._tbl
    for at, row in enumerate(element.tr_lst):
        for column, cell in enumerate(row.tc_lst):
            text = f"{chance.uniform(1, 99):.1f} ({chance.uniform(1, 9):.1f})"
            cell.p_lst[0].add_r().text = chance.choice(WORDS) if at == 0 or column == 0 else text


def bare_text(data: bytes) -> int:
    """Parse with python-docx and take the text of all paragraphs and cells; gives their number."""
    document = docx.Document(io.BytesIO(data))
    texts = [paragraph.text for paragraph in document.paragraphs]
    texts += [cell.text for table in document.tables for row in table.rows for cell in row.cells]
    return len(texts)


def docx_ratio(data: bytes, *, rounds: int = 4) -> float:
    """Time of opening over that of python-docx alone; under 3 is wanted for 30 pages."""
    ours, bare = interleaved(
        (lambda: open_document(data, name="sample.docx"), lambda: bare_text(data)), rounds
    )
    return ours / bare


def measured() -> list[tuple[str, float, str]]:
    """All figures of this module: what, the figure, and the bound wanted."""
    return [
        ("opening / python-docx alone, 30 pages of DOCX", docx_ratio(sample_docx(30)), "under 3"),
        (
            "opening / python-docx alone, 100-row tables",
            docx_ratio(sample_docx(3, table_rows=100)),
            "under 3",
        ),
    ]


if __name__ == "__main__":
    for what, figure, wanted in measured():
        print(f"{what}: {figure:.2f} ({wanted})")
