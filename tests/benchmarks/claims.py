"""How long finding claims and checking them takes beside getting glyphs and lines from the pages."""

from __future__ import annotations

from recheck.checks.running import run_checks
from recheck.documents import open_document
from recheck.model import Context, Settings
from recheck.reading import read
from tests.benchmarks.pages import glyphs_and_lines, interleaved


def claims_ratio(data: bytes, *, rounds: int = 4) -> float:
    """Reading and checking the claims of a PDF over its glyphs and lines."""
    document = open_document(data, name="sample.pdf")

    def claims_and_checks() -> None:
        run_checks(read(document).claims, Context(), Settings())

    mine, pages = interleaved((claims_and_checks, lambda: glyphs_and_lines(data)), rounds)
    return mine / pages
