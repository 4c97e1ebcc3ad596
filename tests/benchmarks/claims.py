"""How long finding claims and checking them takes beside what reading the pages takes."""

from __future__ import annotations

from recheck.checks.running import run_checks
from recheck.documents import open_document
from recheck.model import Settings
from recheck.reading import read
from tests.benchmarks.pages import default_extraction, glyphs_and_lines, interleaved


def claims_ratios(data: bytes, *, rounds: int = 4) -> tuple[float, float]:
    """Reading and checking claims over pdfminer's default extraction, and over our own glyphs and lines."""
    document = open_document(data, name="sample.pdf")

    def claims_and_checks() -> None:
        run_checks(read(document).claims, Settings())

    works = (claims_and_checks, lambda: default_extraction(data), lambda: glyphs_and_lines(data))
    mine, extraction, pages = interleaved(works, rounds)
    return mine / extraction, mine / pages
