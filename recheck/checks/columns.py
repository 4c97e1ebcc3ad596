"""What the other rows of a table tell about one row: a column misread, an SE of something else, profile intervals."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Iterable, Sequence
from dataclasses import replace

from recheck.checks.coefficients import SAME_COEFFICIENT
from recheck.checks.compare import doubted
from recheck.checks.counts import UNWEIGHTED
from recheck.checks.interval_tests import PROFILE
from recheck.checks.intervals import NEED_NOT_BE_SYMMETRIC
from recheck.model import DISCREPANT, Finding

FEW_ROWS = 3
"""Discrepant rows of a table from which on they can be more than misprints."""
PROOF = 2
"""Rows of a table that must show a thing before it is believed of the others."""
COLUMNS = "the columns of the table hold what their headings say (most of its rows do not fit)"
OTHER_SE = "β may be standardized beside the SE of another number: other rows of the table do not fit either"
OTHER_WEIGHTS = "the percentage may be one of weighted counts, of which the document speaks"
OF_COUNTS = "ratio-from-counts"
SAME_GROUPS = (
    "the ratio compares the two groups whose counts stand in its row (no other row of the table shows it)"
)
PROFILES = "the intervals of this table are not all symmetric in logarithms (profile or exact ones), so they do not tell p"
MIXED = "p and interval of several rows of this table come from different methods, so the interval does not tell p"


def by_columns(findings: Sequence[Finding]) -> tuple[Finding, ...]:
    """The findings, those of tables judged in the light of their other rows."""
    return _doubting_columns(_doubting_ratios(_other_methods(_unproved(findings))))


def _tables(findings: Iterable[Finding], counted: Callable[[Finding], bool]) -> Counter[tuple[str, str]]:
    """How many findings of each check and table are counted."""
    return Counter((f.check, f.place.table) for f in findings if f.place.table and counted(f))


def _doubting_columns(findings: Sequence[Finding]) -> tuple[Finding, ...]:
    """Findings of one check on a table of which most rows do not fit are conditional.

    One wrong row among many is a misprint; where most are wrong, it is likelier that a column was
    misunderstood. SDs and SEs that change places in the whole table are the exception: that reconciles all.
    """
    wrong = _tables(findings, _wrong)
    fitting = _tables(
        findings, lambda f: f.verdict == "agrees" or (f.verdict in DISCREPANT and not _wrong(f))
    )
    doubtful = {key for key, rows in wrong.items() if rows >= FEW_ROWS and rows > fitting[key]}
    return tuple(
        doubted(f, COLUMNS) if (f.check, f.place.table or "") in doubtful and _wrong(f) else f
        for f in findings
    )


def _doubting_ratios(findings: Sequence[Finding]) -> tuple[Finding, ...]:
    """A ratio that the counts of its row do not give is conditional where no other row shows that they do in this table.

    A table of two sexes may print the ratio of each risk factor for something else.
    """
    shown = _tables(findings, lambda f: f.check == OF_COUNTS and f.verdict == "agrees")
    return tuple(
        doubted(f, SAME_GROUPS)
        if f.check == OF_COUNTS and f.verdict in DISCREPANT and not shown[OF_COUNTS, f.place.table or ""]
        else f
        for f in findings
    )


def _wrong(finding: Finding) -> bool:
    """Tell whether a finding is a discrepancy that a spread with the wrong label does not explain."""
    relabelled = any(remedy.change in ("SD → SE", "SE → SD") for remedy in finding.reconciled_by)
    return finding.verdict in DISCREPANT and not relabelled


TO_BE_PROVED = {SAME_COEFFICIENT: OTHER_SE, UNWEIGHTED: OTHER_WEIGHTS}
"""Doubts that speak only where other rows dispel them, each with the reason why nothing is compared where they do not."""


def _unproved(findings: Sequence[Finding]) -> tuple[Finding, ...]:
    """What other rows must show: that the SE beside β is its own, that percentages are those of the counts."""
    fitting = _tables(findings, lambda f: f.verdict == "agrees")
    unfit = _tables(findings, lambda f: f.verdict != "agrees")

    def proved(finding: Finding) -> bool:
        key = (finding.check, finding.place.table or "")
        return fitting[key] >= PROOF and fitting[key] > unfit[key]

    def reason(finding: Finding) -> str:
        found = [why for doubt, why in TO_BE_PROVED.items() if doubt in finding.assumptions]
        return found[0] if found and not proved(finding) else ""

    return tuple(_unchecked(f, why) if (why := reason(f)) else f for f in findings)


def _other_methods(findings: Sequence[Finding]) -> tuple[Finding, ...]:
    """A p that needs a profile interval is not compared where other rows show, or need, the same."""
    seen = _tables(findings, lambda f: f.verdict == "unchecked" and NEED_NOT_BE_SYMMETRIC in f.message)
    skewed = {table for (_, table), rows in seen.items() if rows >= PROOF}
    needed = _tables(findings, lambda f: f.verdict == "conditional" and PROFILE in f.assumptions)

    def reason(finding: Finding) -> str:
        if not (finding.verdict == "conditional" and PROFILE in finding.assumptions):
            return ""
        if finding.place.table in skewed:
            return PROFILES
        return MIXED if needed[finding.check, finding.place.table or ""] >= FEW_ROWS else ""

    return tuple(_unchecked(f, why) if (why := reason(f)) else f for f in findings)


def _unchecked(finding: Finding, reason: str) -> Finding:
    return replace(
        finding, verdict="unchecked", message=f"Not checked: {reason}.", question="", gap=None,
        assumptions=(), reconciled_by=(), tolerance="",
    )  # fmt: skip
