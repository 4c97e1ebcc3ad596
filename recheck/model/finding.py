"""Findings: the outcome of a check on a claim, with its evidence."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import ClassVar, Literal

from recheck.model.claim import Claim, Confidence
from recheck.model.passage import Place

Verdict = Literal["impossible", "inconsistent", "conditional", "agrees", "unchecked"]
VERDICTS: tuple[Verdict, ...] = ("impossible", "inconsistent", "conditional", "agrees", "unchecked")
DISCREPANT: tuple[Verdict, ...] = ("impossible", "inconsistent")


@dataclass(frozen=True, slots=True)
class Implied:
    """What the other numbers say that a printed one must be, under one reading.

    `integers` holds the only whole numbers possible, where the quantity is one.
    `assuming` names the reading in words; empty for the claim as it stands.
    """

    low: float
    high: float
    assuming: str = ""
    integers: tuple[int, ...] = ()


@dataclass(frozen=True, slots=True)
class Remedy:
    """One thing that would reconcile a discrepancy."""

    kind: Literal["reading", "slip", "number"]
    quantity: str
    text: str
    low: float | None = None
    high: float | None = None
    change: str | None = None


@dataclass(frozen=True, slots=True)
class Finding:
    """The outcome of one check, with everything that a report shows of it."""

    id: str
    check: str
    verdict: Verdict
    claims: tuple[str, ...]
    quantity: str
    printed: str
    implied: tuple[Implied, ...]
    message: str
    place: Place
    tolerance: str = ""
    question: str = ""
    gap: float | None = None
    reversal: bool = False
    confidence: Confidence = "high"
    assumptions: tuple[str, ...] = ()
    reconciled_by: tuple[Remedy, ...] = ()
    rank: int = 0


@dataclass(frozen=True, slots=True)
class DocumentFacts:
    """What is known of an audited file."""

    name: str
    format: str
    sha256: str
    pages: int | None
    words: int
    title: str | None


@dataclass(frozen=True, slots=True)
class ScoreRule:
    """What the reader of a manuscript says of the scores of one outcome, `*` for all.

    `low` and `high` are the ends of the scale, `items` the number of answers that one score averages,
    `whole` tells that answers are whole numbers, `text` is what was said.
    """

    outcome: str
    low: int | None
    high: int | None
    items: int | None
    whole: bool
    text: str


@dataclass(frozen=True, slots=True)
class Settings:
    """How an audit was asked for; `scores` is what was said of scores with the request."""

    alpha: float = 0.05
    alpha_source: Literal["default", "stated", "asked"] = "default"
    reader: Literal["auto", "pdfium", "pdfminer"] = "auto"
    rounding: str = "half up or half to even"
    scores: tuple[ScoreRule, ...] = ()


@dataclass(frozen=True, slots=True, eq=False)
class Audit:
    """A finished audit of one document: claims in reading order, findings ranked.

    `notebook_view` writes an audit as HTML where a notebook shows one; None until something sets it.
    """

    notebook_view: ClassVar[Callable[[Audit], str] | None] = None

    document: DocumentFacts
    settings: Settings
    claims: tuple[Claim, ...]
    findings: tuple[Finding, ...]
    notes: tuple[str, ...] = ()

    def summary(self) -> dict[str, int]:
        """Count claims, claims checked, and findings by verdict."""
        checked = {c for f in self.findings if f.verdict != "unchecked" for c in f.claims}
        counts = {"claims": len(self.claims), "checked": len(checked & {c.id for c in self.claims})}
        counts["reversals"] = sum(f.reversal for f in self.findings)
        for verdict in VERDICTS:
            counts[verdict] = sum(f.verdict == verdict for f in self.findings)
        return counts

    def __repr__(self) -> str:
        counts = ", ".join(f"{verdict}: {n}" for verdict, n in self.summary().items() if n)
        return f"<Audit of {self.document.name}; {counts or 'nothing to check'}>"

    @property
    def discrepant(self) -> bool:
        """Tell whether anything is impossible or inconsistent."""
        return any(finding.verdict in DISCREPANT for finding in self.findings)

    def _repr_html_(self) -> str | None:
        view = type(self).notebook_view
        return None if view is None else view(self)
