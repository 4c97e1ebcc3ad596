"""The words that reports use for verdicts, kinds of claims and places."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping

from recheck.model import Audit, ClaimKind, Implied, Verdict
from recheck.model.figures import span

MEANING: Mapping[Verdict, str] = {
    "impossible": "no data whatever can give this printed value",
    "inconsistent": "the printed numbers cannot all be true under any reading that the text leaves open",
    "conditional": "the numbers agree only under a reading that the text does not state; it is named",
    "agrees": "the numbers agree as printed",
    "unchecked": "something is missing, or summaries cannot rebuild the model; the reason is named",
}

REVERSAL = (
    "an inconsistent p where the printed and the implied p lie on opposite sides of alpha "
    "under every reading tried"
)

ROUNDED = (
    "all true values within half a unit of its last digit, both ends included, which covers rounding half up "
    "and half to even; after < or > all values on that side; an n and a whole df are exact"
)

CAUTION = (
    "A discrepancy is a question to the authors and no evidence of misconduct: a misprint, rounding or an "
    "unstated choice of analysis may explain it. What follows from it is for the journal's own integrity "
    "procedures and a qualified statistician to decide."
)

KINDS: Mapping[ClaimKind, tuple[str, str]] = {
    "t-test": ("t-test", "t-tests"),
    "F-test": ("F-test", "F-tests"),
    "chi2-test": ("χ² test", "χ² tests"),
    "correlation": ("correlation", "correlations"),
    "z-test": ("z-test", "z-tests"),
    "rank-test": ("rank test", "rank tests"),
    "group-summary": ("group summary", "group summaries"),
    "comparison": ("comparison", "comparisons"),
    "estimate": ("estimate", "estimates"),
    "regression": ("regression", "regressions"),
    "count": ("count", "counts"),
    "two-by-two": ("two-by-two table", "two-by-two tables"),
    "power": ("power statement", "power statements"),
    "correlation-matrix": ("correlation matrix", "correlation matrices"),
}


def counted(number: int, one: str, many: str) -> str:
    """Write a count with its noun."""
    return f"{number:,} {one if number == 1 else many}"


def listed(items: Iterable[str], *, last: str = "and") -> str:
    """Join words as a sentence does."""
    words = list(items)
    if len(words) < 2:
        return "".join(words)
    return f"{', '.join(words[:-1])} {last} {words[-1]}"


def kinds_read(audit: Audit) -> str:
    """Write how many claims of each kind were read, the most frequent first."""
    kinds = Counter(claim.kind for claim in audit.claims)
    return listed(counted(number, *KINDS[kind]) for kind, number in kinds.most_common())


def implied_range(implied: Implied) -> str:
    """Write what is implied: an interval, or the only whole numbers possible."""
    numbers = implied.integers
    if not numbers:
        return span(implied.low, implied.high)
    if len(numbers) > 2 and numbers[-1] - numbers[0] == len(numbers) - 1:
        return f"{numbers[0]} to {numbers[-1]} (whole numbers)"
    if len(numbers) > 8:
        return f"{', '.join(map(str, numbers[:6]))} … {numbers[-1]} ({len(numbers)} whole numbers)"
    return listed(map(str, numbers), last="or")
