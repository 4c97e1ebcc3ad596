"""What reading PDF pages costs, as ratios to the engines alone, and its memory."""

from __future__ import annotations

import ctypes
import gc
import io
import random
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Sequence
from pathlib import Path

import pypdfium2
import pypdfium2.raw as raw
from pdfminer.high_level import extract_pages
from reportlab.pdfgen.canvas import Canvas

from recheck.documents.pdf import pdfium
from recheck.documents.pdf.document import pages_read

WORDS = [
    "loaf", "height", "crumb", "panel", "apprentice", "bench", "trial", "dough", "starter", "score",
    "oven", "hydration", "before", "after", "training", "tasting", "rye", "spelt", "the", "of", "and",
    "in", "was", "rated", "higher", "than", "by", "judges", "each", "week",
]  # fmt: skip


def sample_pdf(pages: int, *, columns: int = 2) -> bytes:
    """An article of the bakery scenario: two columns, running head, page numbers, results with indices."""
    chance = random.Random(20260101)
    stream = io.BytesIO()
    canvas = Canvas(stream, pagesize=(595, 842), invariant=True)
    for number in range(1, pages + 1):
        canvas.setFont("Times-Roman", 8)
        canvas.drawString(60, 805, "Bench scoring of sourdough")
        canvas.drawRightString(535, 805, str(number))
        for column in range(columns):
            _column(canvas, chance, 60 + column * 247, 475 if columns == 1 else 228)
        canvas.showPage()
    canvas.save()
    return stream.getvalue()


def _column(canvas: Canvas, chance: random.Random, left: float, width: float) -> None:
    for row in range(56):
        text = canvas.beginText(left, 775 - 12.5 * row)
        text.setFont("Times-Roman", 10)
        line = ""
        while canvas.stringWidth(line, "Times-Roman", 10) < width - 70:
            line += chance.choice(WORDS) + " "
        text.textOut(line)
        if row % 4 == 0:
            text.textOut("F")
            text.setFont("Times-Roman", 7)
            text.setRise(-2)
            text.textOut("2,61")
            text.setRise(0)
            text.setFont("Times-Roman", 10)
            text.textOut(f" = {chance.uniform(0.1, 9):.2f}")
        canvas.drawText(text)


def glyphs_and_lines(data: bytes) -> int:
    """Read all glyphs and set them in lines, as an audit does; gives the number of lines."""
    return len(pages_read(pdfium.read(data).pages)[0])


def bare_loop(data: bytes) -> int:
    """The per-character calls of `pypdfium2` that carry the same facts, and nothing else."""
    document = pypdfium2.PdfDocument(data)
    box, count = raw.FS_RECTF(), 0
    for index in range(len(document)):
        page = raw.FPDF_LoadPage(document.raw, index)
        text = raw.FPDFText_LoadPage(page)
        for at in range(raw.FPDFText_CountChars(text)):
            raw.FPDFText_GetUnicode(text, at)
            raw.FPDFText_GetLooseCharBox(text, at, ctypes.byref(box))
            raw.FPDFText_GetTextObject(text, at)
            count += 1
        raw.FPDFText_ClosePage(text)
        raw.FPDF_ClosePage(page)
    document.close()
    return count


def default_extraction(data: bytes) -> int:
    """The default page analysis of `pdfminer.six`."""
    return sum(1 for page in extract_pages(io.BytesIO(data)) for _ in page)


def loop_ratio(data: bytes, *, rounds: int = 5) -> float:
    """Time of glyphs and lines over that of the bare loop; at most 1.6 is wanted."""
    ours, bare = interleaved((lambda: glyphs_and_lines(data), lambda: bare_loop(data)), rounds)
    return ours / bare


def extraction_ratio(data: bytes, *, rounds: int = 2) -> float:
    """Time of pdfminer's default extraction over that of glyphs and lines; at least 3 is wanted."""
    ours, theirs = interleaved((lambda: glyphs_and_lines(data), lambda: default_extraction(data)), rounds)
    return theirs / ours


def interleaved(works: Sequence[Callable[[], object]], rounds: int) -> list[float]:
    """The shortest time of each piece of work, in turns, so that a busy machine slows all alike."""
    best = [float("inf")] * len(works)
    for _ in range(rounds):
        for at, work in enumerate(works):
            gc.collect()
            start = time.perf_counter()
            work()
            best[at] = min(best[at], time.perf_counter() - start)
    return best


_PEAK = """
import resource, sys
from recheck.documents import open_document
document = open_document(sys.argv[1])
print(document.pages, resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024)
"""


def peak_memory(data: bytes) -> float:
    """Peak resident memory in MiB of a process that opens a PDF; under 300 is wanted for 60 pages."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "article.pdf"
        path.write_bytes(data)
        done = subprocess.run(
            [sys.executable, "-c", _PEAK, str(path)], capture_output=True, text=True, check=True, timeout=120
        )
    return float(done.stdout.split()[1])


def measured(paths: Sequence[str] = ()) -> list[tuple[str, float, str]]:
    """All figures of this module: what, the figure, and the bound wanted."""
    rows = []
    samples = [("two columns", sample_pdf(12)), ("one column", sample_pdf(12, columns=1))]
    samples += [(Path(path).name, Path(path).read_bytes()) for path in paths]
    for name, data in samples:
        rows.append((f"glyphs and lines / bare loop, {name}", loop_ratio(data), "at most 1.6"))
        rows.append(
            (f"pdfminer extract_pages / glyphs and lines, {name}", extraction_ratio(data), "at least 3")
        )
    rows.append(("peak memory of 60 pages, MiB", peak_memory(sample_pdf(60)), "under 300"))
    return rows


if __name__ == "__main__":
    for what, figure, wanted in measured(sys.argv[1:]):
        print(f"{what}: {figure:.2f} ({wanted})")
