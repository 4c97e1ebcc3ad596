"""Models that group summaries cannot rebuild, by what the text says of them."""

from __future__ import annotations

from collections.abc import Sequence

from recheck.model import STATED, Claim

FOREIGN = (
    "covariate-adjusted", "mixed-model", "imputed", "weighted", "robust", "bootstrap", "bayesian", "contrast",
    "marginal", "within-subject-se", "rank-test", "multi-regression", "disattenuated",
)  # fmt: skip
"""What makes means and SDs another model's than that of the plain two-group test."""


def foreign_model(claims: Sequence[Claim]) -> str:
    """Say which model the summaries may belong to, as stated of them or for the document; else ''."""
    said = [word for word in FOREIGN if any(claim.says(word) for claim in claims)]
    if said:
        return f"summaries cannot rebuild {STATED[said[0]]}"
    spoken = [word for word in FOREIGN if any(word in claim.background for claim in claims)]
    if spoken:
        return f"the document speaks of {STATED[spoken[0]]}, which summaries cannot rebuild"
    return ""
