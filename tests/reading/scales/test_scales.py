"""Scales of the text: statements in many wordings, and what is none."""

from __future__ import annotations

import pytest

from recheck.reading import read
from tests.reading.scales.cases import ScaleCase, scale_cases, told

CASES = scale_cases()


@pytest.mark.parametrize("case", CASES, ids=[case.name for case in CASES])
def test_means_are_given_just_the_scales_that_are_told(case: ScaleCase) -> None:
    assert told(read(case.document).claims) == case.wanted
