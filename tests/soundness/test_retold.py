"""A number that is told differently in two places is noticed, and called wrong only where both are surely one result."""

from __future__ import annotations

import numpy as np
import pytest

from tests.soundness.auditing import audit_document
from tests.soundness.retold_wrong import WRONG


@pytest.mark.parametrize("name", sorted(WRONG))
def test_differing_repeats_are_noticed(name: str) -> None:
    drawn = [WRONG[name](np.random.default_rng([23, i])) for i in range(40)]
    samples = [sample for sample in drawn if sample is not None]
    verdicts = []
    for sample in samples:
        (outcome,) = audit_document([sample])
        verdicts.append({f.verdict for f in outcome.findings if f.check == "told-twice"} - {"agrees"})
    missed = [s.text for s, found in zip(samples, verdicts, strict=True) if not found]
    assert len(samples) > 15 and len(missed) <= 0.1 * len(samples), "\n\n".join(missed)
    sure = sum("inconsistent" in found for found in verdicts)
    assert sure > len(samples) / 2 if name == "means in the text" else sure == 0
