"""A claim with the sentence that it stands in."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from hashlib import blake2b

from recheck.model import Claim, ClaimKind, Place


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


def claim_id(kind: ClaimKind, place: Place, quantities: Iterable[str]) -> str:
    """An id made from what a claim holds and where it stands: the same manuscript gives the same ids."""
    told = (kind, place.quote, place.section, place.table, place.row, place.column, *sorted(quantities))
    return blake2b(repr(told).encode(), digest_size=5).hexdigest()
