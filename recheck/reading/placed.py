"""A claim with the sentence that it stands in."""

from __future__ import annotations

from dataclasses import dataclass

from recheck.model import Claim


@dataclass(frozen=True, slots=True)
class Placed:
    """A claim with the passage and sentence it stands in, and its characters in the view.

    `passage` is below 0 for claims of a table's cells, which stand in no sentence. `at` is where the
    sentence begins in the view; `span` counts characters of the passage.
    """

    claim: Claim
    passage: int
    sentence: int
    start: int
    end: int
    text: str
    span: tuple[int, int] = (0, 0)
    at: int = 0
