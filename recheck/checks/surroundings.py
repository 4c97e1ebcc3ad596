"""What stands around a group summary: whose n it is, the summaries beside it, and what they show of a method."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import lru_cache

import regex

from recheck.checks.designs import whole
from recheck.checks.registry import Case
from recheck.model import N_OF_GROUP, STATED, Claim, Interval, Printed
from recheck.reconcile.readings import Numbers, Way, agrees_as_printed, box_of

MODELS = (
    "covariate-adjusted", "mixed-model", "imputed", "transformed", "weighted", "robust", "bootstrap", "bayesian",
    "marginal", "within-subject-se", "clustered",
)  # fmt: skip
"""What makes the SE or the interval of a mean another one than that of the plain scores of its group."""
OWN_SCORES = "{} comes from the plain scores of this group, not from a model (marginal means, clusters, repeated measures)"
SOME_MISSING = "some of the n cases have no value of this variable"
FEWEST_LEFT = 2 / 3
"""Share of the n cases that have a value at least, where n stands beside the numbers themselves."""
PROOF = 2
"""Other summaries of the same kind beside one that must show a method before it is believed of that one."""
PRECISE = 0.1
"""Relative width up to which an implied spread can show a method at all."""


def printed_n(claim: Claim) -> int | None:
    """The n of a summary as a whole number of at least two, None where none is printed."""
    n = whole(claim.values.get("n"))
    return n if n is not None and n >= 2 else None


def of_group(claim: Claim) -> bool:
    """Tell whether the n is that of a whole group, of which some may lack this variable: from a header or a row's name."""
    if N_OF_GROUP in claim.notes:
        return True
    n, row = claim.values.get("n"), claim.place.row
    return (
        n is not None
        and row is not None
        and bool(regex.search(rf"[nN]\s*=\s*{regex.escape(n.text)}", row, timeout=1.0))
    )


def exact(claim: Claim, *names: str) -> bool:
    """Tell whether all these numbers are printed, as equalities and none as a percentage beside others that are not."""
    printed = [claim.values.get(name) for name in names]
    return all(p is not None and p.relation in ("=", "≈") for p in printed) and (
        len({p.percent for p in printed if p is not None}) <= 1
    )


def model_of(claim: Claim, *, proved: bool = False) -> str:
    """Say which model the spread may belong to, as stated of the summary or, unless `proved` otherwise, for the document."""
    words = [word for word in MODELS if claim.says(word)]
    if words:
        return f"summaries cannot rebuild {STATED[words[0]]}"
    spoken = [word for word in MODELS if word in claim.background]
    if spoken and not proved:
        return f"the document speaks of {STATED[spoken[0]]}, which summaries cannot rebuild"
    return ""


def beside(case: Case, *names: str) -> tuple[Claim, ...]:
    """The other summaries of the same table or passage that print the same quantities."""
    return tuple(c for c in case.block if c.id != case.claim.id and exact(c, *names))


@dataclass(frozen=True, slots=True)
class Shown:
    """How many of the summaries beside one surely follow a formula, and how many do not."""

    fitting: int
    unfit: int

    @property
    def proved(self) -> bool:
        """Whether the formula is the method of these summaries: two or more fit it, and few do not."""
        return self.fitting >= PROOF and self.fitting > self.unfit


Told = Callable[[Claim], tuple[Numbers, Way] | None]
"""What a check reads from a summary: its numbers and the plain way to one of them; None where it lacks some."""


def shown_by(claims: Sequence[Claim], quantity: str, read: Told) -> Shown:
    """What other summaries show of a formula; those too coarsely printed to tell are left out."""
    found = [_fits(claim, quantity, read) for claim in claims]
    return Shown(found.count(True), found.count(False))


@lru_cache(maxsize=1024)
def _fits(claim: Claim, quantity: str, read: Told) -> bool | None:
    """Tell whether a summary surely follows a formula or surely does not; None where it is too coarse, or lacks numbers."""
    told = read(claim)
    if told is None:
        return None
    numbers, way = told
    if not agrees_as_printed(quantity, numbers, (way,)):
        return False
    return True if _precise(numbers[quantity], way, numbers) else None


def _precise(printed: Printed, way: Way, numbers: Numbers) -> bool:
    """Tell whether an agreement says something: printed and implied number are both known to a tenth."""
    return all(_narrow(interval) for interval in (printed.interval(), *way.implied(box_of(numbers))))


def _narrow(interval: Interval) -> bool:
    return interval.low > 0 and interval.high - interval.low <= PRECISE * interval.low
