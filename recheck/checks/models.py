"""Models that group summaries cannot rebuild, by what the text says of them."""

from __future__ import annotations

from collections.abc import Sequence

from recheck.model import STATED, Claim

FOREIGN = (
    "covariate-adjusted", "mixed-model", "imputed", "transformed", "weighted", "robust", "bootstrap", "bayesian", "contrast",
    "marginal", "within-subject-se", "rank-test", "multi-regression", "disattenuated",
)  # fmt: skip
"""What makes means and SDs another model's than that of the plain two-group test."""


BESIDE_FITTING_DF = ("imputed", "transformed", "weighted", "robust", "within-subject-se")
"""Of those, what leaves the df of the plain two-group test as they are."""


def foreign_model(claims: Sequence[Claim], *, fitted: bool = False) -> str:
    """Say which model the summaries may belong to, as stated of them or for the document; else ''.

    `fitted` says that the printed df are exactly those of the plain design for the printed group
    sizes, or that the sentence names the plain test: then a covariate, a mixed model or a contrast
    that the document speaks of elsewhere is not this test's.
    """
    said = [word for word in FOREIGN if any(claim.says(word) for claim in claims)]
    if said:
        return f"summaries cannot rebuild {STATED[said[0]]}"
    possible: tuple[str, ...] = BESIDE_FITTING_DF if fitted else FOREIGN
    if any(claim.kind in ("t-test", "F-test") and claim.values.keys() & {"t", "F"} for claim in claims):
        # t and F are no statistics of ranks, whatever the document tests elsewhere.
        possible = tuple(word for word in possible if word != "rank-test")
    spoken = [word for word in possible if any(word in claim.background for claim in claims)]
    if spoken:
        return f"the document speaks of {STATED[spoken[0]]}, which summaries cannot rebuild"
    return ""
