"""No honest result is called impossible or inconsistent; implied ends are attained; misprints are found."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings

from tests.soundness.auditing import audit_document, outcomes
from tests.soundness.honest import HONEST, honest_samples
from tests.soundness.honest_alone import EFFECTS_ALONE
from tests.soundness.honest_conversions import EFFECT_CONVERSIONS
from tests.soundness.honest_effects import EFFECT_INTERVALS
from tests.soundness.honest_granularity import GRANULARITY
from tests.soundness.honest_power import HONEST_POWER
from tests.soundness.honest_spreads import HONEST_SPREADS
from tests.soundness.honest_tables import HONEST_TABLES
from tests.soundness.other_models import OTHER_MODELS, other_samples
from tests.soundness.other_tables import OTHER_TABLES
from tests.soundness.planted import PLANTS, plant
from tests.soundness.planted_designs import DESIGN_PLANTS
from tests.soundness.planted_effects import EFFECT_PLANTS
from tests.soundness.planted_granularity import GRANULARITY_PLANTS
from tests.soundness.planted_matrices import MATRIX_PLANTS
from tests.soundness.planted_power import POWER_PLANTS
from tests.soundness.planted_risks import RISK_PLANTS
from tests.soundness.planted_spreads import SPREAD_PLANTS
from tests.soundness.planted_tables import TABLE_PLANTS
from tests.soundness.samples import Generator, Sample
from tests.soundness.sharpness import GROUP_CHECKS, STATISTICS, unattained, unattained_by_groups
from tests.soundness.traps import TRAPS

QUICK = settings(max_examples=30, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))


@pytest.mark.parametrize(
    ("generators", "each"),
    [
        (HONEST, 36),
        (OTHER_MODELS, 20),
        (TRAPS, 14),
        (HONEST_TABLES, 15),
        (OTHER_TABLES, 12),
        (HONEST_SPREADS, 12),
        (GRANULARITY, 12),
        (EFFECT_INTERVALS, 10),
        (EFFECT_CONVERSIONS, 15),
        (HONEST_POWER, 12),
        (EFFECTS_ALONE, 20),
    ],
    ids=[
        "plain",
        "other models",
        "traps",
        "tables",
        "other tables",
        "spreads",
        "granularity",
        "effect intervals",
        "effect conversions",
        "power",
        "effects alone",
    ],
)
def test_honest_results_are_never_flagged(generators: Mapping[str, Generator], each: int) -> None:
    drawn = outcomes(generators, each * len(generators), seed=11)
    flagged = [outcome.report() for outcome in drawn if outcome.flagged or outcome.faults]
    assert not flagged, "\n\n".join(flagged)


def test_most_honest_results_are_read() -> None:
    read = [o.read for o in outcomes(HONEST, 15 * len(HONEST), seed=5) if o.sample.facts]
    assert np.mean(read) > 0.95


@QUICK
@given(honest_samples())
def test_any_honest_result_alone(sample: Sample) -> None:
    (outcome,) = audit_document([sample])
    assert not outcome.flagged and not outcome.faults, outcome.report()


@QUICK
@given(other_samples())
def test_any_honest_result_of_another_model_alone(sample: Sample) -> None:
    (outcome,) = audit_document([sample])
    assert not outcome.flagged and not outcome.faults, outcome.report()


def test_ends_of_the_implied_p_are_attained() -> None:
    seen = 0
    for outcome in outcomes(HONEST, 15 * len(HONEST), seed=3):
        claims = {claim.id: claim for claim in outcome.claims}
        for finding in outcome.findings:
            claim = claims.get(finding.claims[0]) if finding.check.startswith("p-from-") else None
            if claim and claim.kind in STATISTICS and finding.check == f"p-from-{STATISTICS[claim.kind][0]}":
                seen += 1
                assert not unattained(claim, finding)
    assert seen > 50


def test_ends_of_what_groups_imply_are_attained() -> None:
    seen = 0
    names = ("d denominators", "t from printed figures")
    for outcome in outcomes({name: OTHER_MODELS[name] for name in names}, 60, seed=4):
        claims = {claim.id: claim for claim in outcome.claims}
        for finding in outcome.findings:
            if finding.check in GROUP_CHECKS and finding.verdict in ("agrees", "conditional"):
                claim, *groups = (claims[i] for i in finding.claims if i in claims)
                if len(groups) == 2 and not any(g.says("spread-unlabelled") for g in groups):
                    seen += 1
                    assert not unattained_by_groups(claim, (groups[0], groups[1]), finding)
    assert seen > 20


@pytest.mark.parametrize("name", sorted(name for name, kind in PLANTS.items() if kind.promised))
def test_misprints_against_the_plain_readings_are_noticed(name: str) -> None:
    drawn = [plant(name, np.random.default_rng([17, i])) for i in range(24)]
    wrong = [sample for sample, contradicted in drawn if contradicted]
    passed = [s.text for s in wrong if audit_document([s])[0].verdict not in ("flagged", "conditional")]
    assert len(passed) <= 0.1 * len(wrong), "\n".join(passed)


def test_most_honest_tables_are_read() -> None:
    read = [o.read for o in outcomes(HONEST_TABLES, 10 * len(HONEST_TABLES), seed=5) if o.sample.facts]
    assert np.mean(read) > 0.9


@pytest.mark.parametrize(
    "name",
    sorted(
        {
            **TABLE_PLANTS,
            **SPREAD_PLANTS,
            **DESIGN_PLANTS,
            **GRANULARITY_PLANTS,
            **EFFECT_PLANTS,
            **MATRIX_PLANTS,
            **POWER_PLANTS,
            **RISK_PLANTS,
        }
    ),
)
def test_other_misprints_are_noticed(name: str) -> None:
    drawn = [
        {
            **TABLE_PLANTS,
            **SPREAD_PLANTS,
            **DESIGN_PLANTS,
            **GRANULARITY_PLANTS,
            **EFFECT_PLANTS,
            **MATRIX_PLANTS,
            **POWER_PLANTS,
            **RISK_PLANTS,
        }[name](np.random.default_rng([19, i]))
        for i in range(16)
    ]
    wrong = [sample for sample, contradicted in drawn if contradicted]
    passed = [s.text for s in wrong if audit_document([s])[0].verdict not in ("flagged", "conditional")]
    assert len(passed) <= 0.1 * len(wrong), "\n".join(passed)
