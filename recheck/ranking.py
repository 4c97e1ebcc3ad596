"""The order of findings, decided in one place."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from recheck.model import VERDICTS, Finding

RULE = """\
Findings are ranked worst first:
1. reversals: inconsistent, and printed and implied p lie strictly on opposite sides of the
   significance level under every reading tried;
2. impossible: no data whatever can give the printed value;
3. inconsistent: the printed numbers cannot all be true under any reading that the text leaves open;
4. conditional: they agree only under a reading that the text does not state;
5. agrees, then unchecked.
Within a tier: by confidence of the reading (high, medium, low), then by the gap between the printed
and the implied interval in units of the last printed digit (widest first), then by place."""

_CONFIDENCE = {"high": 0, "medium": 1, "low": 2}


def rank(findings: Iterable[Finding]) -> tuple[Finding, ...]:
    """Sort findings by the rule and number them from 1."""
    ordered = sorted(enumerate(findings), key=lambda item: (*_key(item[1]), item[0]))
    return tuple(replace(finding, rank=i) for i, (_, finding) in enumerate(ordered, 1))


def _key(finding: Finding) -> tuple[int, int, int, float]:
    gap = finding.gap if finding.gap is not None else 0.0
    return (not finding.reversal, VERDICTS.index(finding.verdict), _CONFIDENCE[finding.confidence], -gap)
