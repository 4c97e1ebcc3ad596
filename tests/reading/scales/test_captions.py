"""Tables whose caption alone names the outcome."""

from __future__ import annotations

from pathlib import Path

import pytest

import recheck
from tests.reading.scales.cases import told

METHODS = (
    "## Methods\n\nSatisfaction with the course was rated with a single item from 1 (none) to 7 (strong).\n"
)
ROWS = "| Group | n | M | SD |\n|---|---|---|---|\n| Trained | 28 | 5.21 | 1.10 |\n| Untrained | 28 | 4.21 | 1.10 |\n"


def scales(caption: str, path: Path) -> list[frozenset[str]]:
    source = path / "satisfaction.md"
    source.write_text(f"{METHODS}\n## Results\n\nTable 1. {caption}\n\n{ROWS}", encoding="utf-8")
    return [words for _, words in told(recheck.audit(str(source)).claims)]


@pytest.mark.parametrize(
    "caption",
    [
        "Satisfaction with the course.",
        "Satisfaction with the course by training",
        "Mean satisfaction with the course in both groups.",
        "Ratings of satisfaction with the course",
    ],
)
def test_the_outcome_of_a_caption_has_its_scale(caption: str, tmp_path: Path) -> None:
    assert scales(caption, tmp_path) == [frozenset(("1..7", "whole", "single"))] * 2


@pytest.mark.parametrize("caption", ["Knowledge by training.", "Satisfaction with the course and knowledge."])
def test_another_outcome_has_none(caption: str, tmp_path: Path) -> None:
    assert scales(caption, tmp_path) == []
