"""The nouns of recheck: plain data, no statistics."""

from recheck.model.claim import (
    N_OF_GROUP,
    P_IN_WORDS,
    STATED,
    TOTAL_OF_GROUP,
    Claim,
    ClaimKind,
    Confidence,
    Context,
    Reading,
    SameResult,
)
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
from recheck.model.passage import LEVELS, Layout, Passage, PassageKind, Place
from recheck.model.printed import Box, Interval, Printed, Relation
from recheck.model.quantities import EFFECTS_ON_RISK, QUANTITIES, RATIOS, shown
from recheck.model.table import Cell, Table

__all__ = [
    "DISCREPANT", "EFFECTS_ON_RISK", "LEVELS", "N_OF_GROUP", "P_IN_WORDS", "QUANTITIES", "RATIOS", "STATED", "TOTAL_OF_GROUP", "VERDICTS", "Audit", "Box", "Cell", "Claim", "ClaimKind", "Confidence", "Context",
    "Document", "DocumentFacts", "Finding", "Implied", "Interval", "Layout", "Passage", "PassageKind", "Place",
    "Printed", "Reading", "Relation", "Remedy", "SameResult", "Settings", "Table", "Verdict", "shown",
]  # fmt: skip
