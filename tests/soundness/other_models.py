"""Honest results of another model, with a text that is silent about it or says it elsewhere."""

from __future__ import annotations

from hypothesis import strategies as st

from tests.soundness.honest_designs import DESIGNS
from tests.soundness.honest_risks import OTHER_RISKS
from tests.soundness.other_adjusted import OTHER_ADJUSTED
from tests.soundness.other_counts import OTHER_COUNTS
from tests.soundness.other_effects import OTHER_EFFECTS
from tests.soundness.other_f import OTHER_F
from tests.soundness.other_rounding import OTHER_ROUNDING
from tests.soundness.other_scores import OTHER_SCORES
from tests.soundness.other_t import OTHER_T
from tests.soundness.samples import Generator, Sample, make

OTHER_MODELS: dict[str, Generator] = {
    **OTHER_T,
    **OTHER_ADJUSTED,
    **OTHER_F,
    **OTHER_COUNTS,
    **OTHER_EFFECTS,
    **OTHER_ROUNDING,
    **OTHER_SCORES,
    **DESIGNS,
    **OTHER_RISKS,
}


@st.composite
def other_samples(draw: st.DrawFn) -> Sample:
    """Hypothesis draws which model and which seed; numpy draws the data."""
    name = draw(st.sampled_from(sorted(OTHER_MODELS)))
    return make(name, OTHER_MODELS[name], draw(st.integers(0, 2**32 - 1)))
