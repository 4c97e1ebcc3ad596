"""Auditing samples: many paragraphs by one author in one document, each finding led back to its sample."""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

import numpy as np

import recheck
from recheck.model import DISCREPANT, Audit, Claim, Finding, Place
from tests.soundness.hand import new_hand, written_by
from tests.soundness.samples import Generator, Sample, Told, make


@dataclass(frozen=True, slots=True, eq=False)
class Outcome:
    """One sample with what was read and found in it."""

    sample: Sample
    claims: tuple[Claim, ...]
    findings: tuple[Finding, ...]

    @property
    def read(self) -> bool:
        """Tell whether each fact stands in one claim, number by number as printed."""
        return all(any(told_in(claim, fact) for claim in self.claims) for fact in self.sample.facts)

    @property
    def flagged(self) -> tuple[Finding, ...]:
        """Findings that call an honest result wrong."""
        return tuple(f for f in self.findings if f.verdict in DISCREPANT)

    @property
    def faults(self) -> tuple[Finding, ...]:
        """Checks that broke down over an honest result."""
        return tuple(f for f in self.findings if "recheck failed here" in f.message)

    @property
    def verdict(self) -> str:
        """The worst verdict of the sample; `unchecked` where nothing was compared."""
        verdicts = {f.verdict for f in self.findings}
        if self.flagged:
            return "flagged"
        return next((v for v in ("conditional", "agrees") if v in verdicts), "unchecked")

    def report(self) -> str:
        """The text with what is held against it."""
        told = "\n".join(
            f"  {f.verdict} {f.check} {f.quantity}: {f.message}" for f in (*self.flagged, *self.faults)
        )
        return f"[{self.sample.name}, seed {self.sample.seed}] {self.sample.text}\n{told}"


def told_in(claim: Claim, fact: Mapping[str, Told]) -> bool:
    """Tell whether a claim holds every printed number of a fact."""
    for quantity, (relation, value) in fact.items():
        printed = claim.values.get(quantity)
        if printed is None or printed.value != value or printed.relation != relation:
            return False
    return True


def audit_document(samples: Sequence[Sample]) -> list[Outcome]:
    """Audit samples as the paragraphs of one document and share out the findings by line."""
    starts, line = [], 1
    for sample in samples:
        starts.append(line)
        line += sample.text.count("\n") + 2
    audit: Audit = recheck.audit_text("\n\n".join(sample.text for sample in samples) + "\n")

    def owner(place: Place) -> int:
        return bisect_right(starts, place.line or 1) - 1

    return [
        Outcome(
            sample,
            tuple(c for c in audit.claims if owner(c.place) == at),
            tuple(f for f in audit.findings if owner(f.place) == at),
        )
        for at, sample in enumerate(samples)
    ]


def documents(
    generators: Mapping[str, Generator], count: int, seed: int, size: int = 20
) -> Iterator[tuple[Sample, ...]]:
    """Draw `count` samples in turn from the generators, bundled as documents by one author each.

    What says something of a whole document stands alone in one.
    """
    names = list(generators)
    for first in range(0, count, size):
        batch: list[Sample] = []
        with written_by(new_hand(np.random.default_rng([seed, first]))):
            for at in range(first, min(first + size, count)):
                name = names[at % len(names)]
                sample = make(name, generators[name], seed * 1_000_003 + at)
                if sample.alone:
                    yield (sample,)
                else:
                    batch.append(sample)
        if batch:
            yield tuple(batch)


def outcomes(generators: Mapping[str, Generator], count: int, seed: int, size: int = 20) -> Iterator[Outcome]:
    """Audit `count` samples."""
    for document in documents(generators, count, seed, size):
        yield from audit_document(document)
