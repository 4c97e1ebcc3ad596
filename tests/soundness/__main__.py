"""The long run: `python -m tests.soundness --count 100000` and what became of every generator."""

from __future__ import annotations

import argparse
import sys
import time
from collections import Counter
from collections.abc import Callable, Mapping
from functools import partial

import numpy as np

from tests.soundness.auditing import audit_document, outcomes
from tests.soundness.honest import HONEST
from tests.soundness.honest_alone import EFFECTS_ALONE
from tests.soundness.honest_conversions import EFFECT_CONVERSIONS
from tests.soundness.honest_effects import EFFECT_INTERVALS
from tests.soundness.honest_granularity import GRANULARITY
from tests.soundness.honest_power import HONEST_POWER
from tests.soundness.honest_spreads import HONEST_SPREADS
from tests.soundness.honest_tables import HONEST_TABLES
from tests.soundness.other_models import OTHER_MODELS
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
from tests.soundness.traps import TRAPS

COLUMNS = ("texts", "read", "agrees", "conditional", "unchecked", "flagged")


def honest_run(generators: Mapping[str, Generator], count: int, seed: int, shown: int) -> int:
    """Print a row for each generator and the first texts wrongly flagged; give their number."""
    rows: dict[str, Counter[str]] = {name: Counter() for name in generators}
    flagged: Counter[tuple[str, str]] = Counter()
    for outcome in outcomes(generators, count, seed):
        row = rows[outcome.sample.name]
        row.update(["texts", outcome.verdict])
        row["read"] += outcome.read
        for finding in outcome.flagged:
            kind = (outcome.sample.name, finding.check)
            flagged[kind] += 1
            if flagged[kind] <= shown:
                print(outcome.report())
    print(f"\n{'honest results':36}" + "".join(f"{c:>12}" for c in COLUMNS))
    for name, row in rows.items():
        print(f"{name:36}" + "".join(f"{row[c]:>12}" for c in COLUMNS))
    total = sum((row for row in rows.values()), Counter[str]())
    print(f"{'all':36}" + "".join(f"{total[c]:>12}" for c in COLUMNS))
    for (name, check), number in flagged.most_common():
        print(f"  flagged: {name}, {check}: {number}")
    return total["flagged"]


def planted_run(count: int, seed: int, shown: int) -> None:
    """Print for each kind of misprint what became of it, and some that were missed."""
    columns = ("planted", "contradicted", "flagged", "conditional", "missed", "flagged beyond")
    missed: dict[str, list[str]] = {}
    print(f"\n{'planted misprints':36}" + "".join(f"{c:>16}" for c in columns))
    plants: dict[str, Callable[[np.random.Generator], tuple[Sample, bool]]] = {
        **{name: partial(plant, name) for name in PLANTS},
        **TABLE_PLANTS,
        **SPREAD_PLANTS,
        **DESIGN_PLANTS,
        **GRANULARITY_PLANTS,
        **EFFECT_PLANTS,
        **MATRIX_PLANTS,
        **POWER_PLANTS,
        **RISK_PLANTS,
    }
    for name, planted in plants.items():
        row: Counter[str] = Counter()
        for first in range(0, count, 20):
            drawn = [planted(np.random.default_rng([seed, first + i])) for i in range(min(20, count - first))]
            samples = [Sample(s.text, s.facts, name=name) for s, _ in drawn]
            for sample, (_, wrong) in zip(samples, drawn, strict=True):
                (outcome,) = audit_document([sample])
                verdict = outcome.verdict if outcome.verdict in ("flagged", "conditional") else "missed"
                row.update(["planted", *(["contradicted", verdict] if wrong else [])])
                if not wrong and verdict == "flagged":
                    row["flagged beyond"] += 1
                    missed.setdefault(f"{name}: flagged beyond the plain readings", []).append(
                        outcome.report()
                    )
                if wrong and verdict != "flagged":
                    missed.setdefault(f"{name}: {verdict}", []).append(sample.text)
        print(f"{name:36}" + "".join(f"{row[c]:>16}" for c in columns))
    for kind, texts in missed.items():
        print(f"\n{kind}")
        for text in texts[:shown]:
            print(f"  {text}")


def main() -> int:
    """Run as asked; 1 where an honest result was called wrong."""
    parser = argparse.ArgumentParser(prog="python -m tests.soundness", description=__doc__)
    parser.add_argument("--count", type=int, default=10_000, help="honest texts in all")
    parser.add_argument("--planted", type=int, default=200, help="misprints of each kind")
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--only", help="one generator of honest results, by its name")
    parser.add_argument("--shown", type=int, default=2, help="texts shown of each kind")
    asked = parser.parse_args()
    generators = {
        **HONEST,
        **OTHER_MODELS,
        **TRAPS,
        **HONEST_TABLES,
        **OTHER_TABLES,
        **HONEST_SPREADS,
        **GRANULARITY,
        **EFFECT_INTERVALS,
        **EFFECT_CONVERSIONS,
        **HONEST_POWER,
        **EFFECTS_ALONE,
    }
    if asked.only:
        generators = {asked.only: generators[asked.only]}
    start = time.perf_counter()
    flagged = honest_run(generators, asked.count, asked.seed, asked.shown)
    if asked.planted:
        planted_run(asked.planted, asked.seed, asked.shown)
    print(f"\n{time.perf_counter() - start:.0f} seconds; {flagged} honest texts flagged")
    return 1 if flagged else 0


if __name__ == "__main__":
    sys.exit(main())
