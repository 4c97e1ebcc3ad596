"""The nouns of recheck: plain data, no statistics."""

from recheck.model.claim import (
    AVERAGED_BY,
    EXACT_VALUE,
    FEWER_CASES,
    N_BY_PAIR,
    N_OF_GROUP,
    OF_DIFFERENCES,
    P_IN_WORDS,
    SCALE_ENDS_INFERRED,
    SCALE_INFERRED,
    SCORES_ASKED,
    SIZES_IN_WORDS,
    STATED,
    SUM_OF_GROUPS,
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
    ScoreRule,
    Settings,
    Verdict,
)
from recheck.model.passage import LEVELS, Layout, Passage, PassageKind, Place
from recheck.model.printed import Box, Interval, Printed, Relation
from recheck.model.quantities import EFFECTS_ON_RISK, QUANTITIES, RATIOS, shown
from recheck.model.table import Cell, Table

__all__ = [
    "AVERAGED_BY", "DISCREPANT", "EFFECTS_ON_RISK", "EXACT_VALUE", "FEWER_CASES", "LEVELS", "N_BY_PAIR", "N_OF_GROUP", "OF_DIFFERENCES", "P_IN_WORDS", "QUANTITIES", "RATIOS", "SCALE_ENDS_INFERRED", "SCALE_INFERRED", "SCORES_ASKED", "SIZES_IN_WORDS", "STATED", "SUM_OF_GROUPS", "TOTAL_OF_GROUP", "VERDICTS", "Audit", "Box", "Cell", "Claim", "ClaimKind", "Confidence", "Context",
    "Document", "DocumentFacts", "Finding", "Implied", "Interval", "Layout", "Passage", "PassageKind", "Place",
    "Printed", "Reading", "Relation", "Remedy", "SameResult", "ScoreRule", "Settings", "Table", "Verdict", "shown",
]  # fmt: skip
