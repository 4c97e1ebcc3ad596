"""Effects without a test and the two groups that they compare."""

from __future__ import annotations

import pytest

from recheck.documents import text_document
from recheck.reading import read


@pytest.mark.parametrize(
    "text",
    [
        "Bench scores rose from 4.1 (SD 1.0, n = 18) to 5.2 (SD 1.1, n = 18), d = 1.05.",
        "The score was 4.1 (SD 1.0, n = 18) before the course and 5.2 (SD 1.1, n = 18) at its end, d = 1.05.",
    ],
)
def test_the_same_bakers_at_two_times(text: str) -> None:
    (found,) = (c for c in read(text_document(text, name="loaves.md")).claims if c.kind == "estimate")
    assert len(found.groups) == 2 and found.says("repeated")


def linked(text: str) -> tuple[list[str], str]:
    """The means that the only effect of a text is linked to, and how surely."""
    claims = read(text_document(text, name="loaves.md")).claims
    means = {claim.id: claim.values["mean"].text for claim in claims if claim.kind == "group-summary"}
    (found,) = (claim for claim in claims if claim.kind in ("comparison", "estimate"))
    return [means[group] for group in found.groups], found.link_confidence


@pytest.mark.parametrize(
    "text",
    [
        "Steamed loaves rose higher (M = 92.4, SD = 6.1, n = 18) than dry ones (M = 86.0, SD = 5.8, n = 18), d = 1.08.",
        "Height was 92.4 mm (SD 6.1) with steam (n = 18) and 86.0 mm (SD 5.8) without (n = 18), a difference of 6.4 mm (95% CI 2.4 to 10.4).",
        "Steamed loaves were higher (92.4 ± 6.1 mm, n = 18, vs 86.0 ± 5.8 mm, n = 18; mean difference 6.4 mm, 95% CI 2.4 to 10.4).",
        "Height was 92.4 mm (SD 6.1; n = 18) with steam and 86.0 mm (SD 5.8; n = 18) without. The mean difference was 6.4 mm (95% CI 2.4 to 10.4).",
    ],
)
def test_two_groups_before_an_effect(text: str) -> None:
    assert linked(text) == (["92.4", "86.0"], "medium")


@pytest.mark.parametrize(
    "text",
    [
        "Height was 92.4 mm (SD 6.1) with steam and 86.0 mm (SD 5.8) without; after four weeks the mean difference was 2.4 mm (95% CI 0.4 to 4.4).",
        "Height was 92.4 mm (SD 6.1) with steam and 86.0 mm (SD 5.8) without. When the flour was controlled, the mean difference was 4.1 mm (95% CI 0.4 to 7.8).",
        "Height was 92.4 mm (SD 6.1) with steam, 86.0 mm (SD 5.8) without and 88.1 mm (SD 6.0) in tins; d = 1.08.",
        "The mean difference was 6.4 mm (95% CI 2.4 to 10.4). Height was 92.4 mm (SD 6.1) with steam and 86.0 mm (SD 5.8) without.",
    ],
)
def test_an_effect_that_may_be_about_something_else(text: str) -> None:
    assert linked(text)[0] == []
