"""The nouns of recheck: plain data, no statistics."""

from recheck.model.claim import P_IN_WORDS, STATED, Claim, ClaimKind, Confidence, Context, Reading
from recheck.model.document import Document
from recheck.model.finding import (
    DISCREPANT,
    VERDICTS,
    Audit,
    DocumentFacts,
    Finding,
    Implied,
    Remedy,
    Settings,
    Verdict,
)
from recheck.model.passage import Layout, Passage, PassageKind, Place
from recheck.model.printed import Box, Interval, Printed, Relation
from recheck.model.quantities import QUANTITIES, shown
from recheck.model.table import Cell, Table

__all__ = [
    "DISCREPANT", "P_IN_WORDS", "QUANTITIES", "STATED", "VERDICTS", "Audit", "Box", "Cell", "Claim", "ClaimKind", "Confidence", "Context",
    "Document", "DocumentFacts", "Finding", "Implied", "Interval", "Layout", "Passage", "PassageKind", "Place",
    "Printed", "Reading", "Relation", "Remedy", "Settings", "Table", "Verdict", "shown",
]  # fmt: skip
