"""Print all figures of speed as ratios within this one run: `python -m tests.benchmarks [PDF …]`."""

from __future__ import annotations

import sys
from collections.abc import Iterator
from pathlib import Path

from tests.benchmarks import documents_docx, formulas, marked_up, pages, startup
from tests.benchmarks.claims import claims_ratios
from tests.benchmarks.triples import triples_ratio

CORPUS = Path(__file__).resolve().parents[2] / "corpus_demo"


def rows(paths: list[str]) -> Iterator[tuple[str, float, str]]:
    """What is measured, its figure, and the bound that is wanted."""
    yield "recheck --version / import click", startup.version_ratio(), "at most 2"
    yield (
        "audit of a one-page text / import numpy, scipy.special, regex",
        startup.one_page_ratio(),
        "at most 1.6",
    )
    yield "10^6 t, df, p triples / one scipy.special.stdtr call", triples_ratio(), "at most 8"
    for path in paths or sorted(str(path) for path in CORPUS.glob("*.pdf")):
        name, data = Path(path).name, Path(path).read_bytes()
        to_extraction, to_pages = claims_ratios(data)
        yield f"claims and checks / pdfminer extract_pages, {name}", to_extraction, "at most 0.25"
        yield f"claims and checks / glyphs and lines, {name}", to_pages, "for comparison"
    yield from pages.measured(paths)
    yield from documents_docx.measured()
    yield from marked_up.measured()
    # Last: millions of rows would count in the peak memory of the pages.
    yield from formulas.measured()


if __name__ == "__main__":
    for what, figure, wanted in rows(sys.argv[1:]):
        print(f"{figure:8.2f}  {wanted:12}  {what}", flush=True)
