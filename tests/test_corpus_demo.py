"""The demo articles: audits find what was planted and nothing else, and the articles can be made again.

The truth comes from outside the package: raw data analysed with scipy.stats, one printed number
changed (corpus_demo/plants.py).
"""

from __future__ import annotations

import json
import subprocess
import sys
import zipfile
from functools import cache
from pathlib import Path
from typing import Any

import pypdfium2
import pytest

import recheck
from recheck.model import DISCREPANT, VERDICTS, Audit, Claim, Finding, Place

DEMO = Path(__file__).parents[1] / "corpus_demo"
TRUTH: dict[str, dict[str, Any]] = json.loads((DEMO / "truth.json").read_text(encoding="utf-8"))
PLANTED = [(name, plant) for name, article in TRUTH.items() for plant in article["planted"]]
TESTS = ("t-test", "F-test", "chi2-test", "correlation", "regression")


@cache
def audit_of(name: str) -> Audit:
    return recheck.audit(DEMO / name)


def squeezed(text: str) -> str:
    """A text without spaces, markup and the difference between raised and plain figures."""
    return "".join(text.split()).translate(str.maketrans({"*": "", "~": "", "²": "2"}))


def claims_of(name: str, finding: Finding) -> list[Claim]:
    return [claim for claim in audit_of(name).claims if claim.id in finding.claims]


def concerns(name: str, finding: Finding, plant: dict[str, Any]) -> bool:
    """Tell whether a finding stands at a planted error: same page or line, overlapping words."""
    wanted = squeezed(plant["printed"])
    for place in (finding.place, *(claim.place for claim in claims_of(name, finding))):
        quote = squeezed(place.quote)
        if _near(place, plant) and (wanted in quote or quote in wanted or "table" in plant):
            return True
    return False


def _near(place: Place, plant: dict[str, Any]) -> bool:
    """Tell whether a place is the page, line, section or table row of a plant."""
    if "page" in plant:
        return place.page == plant["page"]
    if "line" in plant:
        return abs((place.line or 0) - plant["line"]) <= 1
    if "table" in plant:
        whole = place.row is None
        return place.table == plant["table"] and (whole or plant["row"] in place.row)
    return place.section == plant["section"] and place.table is None


def shown(plant: tuple[str, dict[str, Any]]) -> str:
    return f"{Path(plant[0]).stem}-{plant[1]['quantity']}"


@pytest.mark.parametrize(("name", "plant"), PLANTED, ids=map(shown, PLANTED))
def test_planted_error_is_found_where_it_stands(name: str, plant: dict[str, Any]) -> None:
    found = [f for f in audit_of(name).findings if concerns(name, f, plant)]
    owed = [f for f in found if f.verdict == plant["verdict"] and f.quantity == plant["quantity"]]
    assert owed, [(f.verdict, f.quantity, f.message) for f in found]
    assert any(f.reversal for f in found) == plant["reversal"]


@pytest.mark.parametrize("name", TRUTH)
def test_nothing_else_is_flagged(name: str) -> None:
    planted = TRUTH[name]["planted"]
    for finding in audit_of(name).findings:
        if finding.verdict in (*DISCREPANT, "conditional"):
            worst = [p["verdict"] for p in planted if concerns(name, finding, p)]
            assert worst, (finding.verdict, finding.message, finding.place)
            # What follows from the same wrong number may not be called worse than the error itself.
            assert VERDICTS.index(finding.verdict) >= min(map(VERDICTS.index, worst)), finding.message


@pytest.mark.parametrize("name", TRUTH)
def test_every_result_is_read_once_and_no_other(name: str) -> None:
    read = [claim.place.quote for claim in audit_of(name).claims if claim.kind in TESTS]
    assert len(read) == TRUTH[name]["results"], read


def test_planted_errors_come_in_many_kinds() -> None:
    assert {plant["verdict"] for _, plant in PLANTED} == {"impossible", "inconsistent", "conditional"}
    assert len({plant["quantity"] for _, plant in PLANTED}) >= 7
    assert len(PLANTED) >= 16


def test_readme_tells_what_is_planted() -> None:
    text = (DEMO / "README.md").read_text(encoding="utf-8")
    for name, plant in PLANTED:
        named = ("page", "line", "section", "table")
        place = next(f"{name} {plant[name]}" for name in named if name in plant).replace(
            "table Table", "Table"
        )
        printed = plant["printed"].replace("|", r"\|")
        assert f"| `{name}`, {place} | `{printed}` |" in text


def text_of(path: Path) -> str:
    if path.suffix == ".docx":
        return zipfile.ZipFile(path).read("word/document.xml").decode()
    if path.suffix != ".pdf":
        return path.read_text(encoding="utf-8")
    return "\f".join(page.get_textpage().get_text_range() for page in pypdfium2.PdfDocument(path))


def test_articles_can_be_made_again(tmp_path: Path) -> None:
    subprocess.run([sys.executable, "-B", DEMO / "make.py", tmp_path], check=True, timeout=60)
    made = sorted(path.name for path in tmp_path.iterdir())
    assert made == sorted([*TRUTH, "truth.json"])
    for name in made:
        # Another zlib may pack a PDF differently; what it shows is the same.
        same_bytes = (tmp_path / name).read_bytes() == (DEMO / name).read_bytes()
        assert same_bytes or text_of(tmp_path / name) == text_of(DEMO / name)
