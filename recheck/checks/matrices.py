"""Checks of a correlation matrix as a whole."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from recheck.checks.compare import finding_id, reading_doubts, unchecked
from recheck.checks.examples import table
from recheck.checks.matrix_cells import (
    PLAIN_CORRELATIONS,
    Cells,
    Pair,
    can_be,
    cannot_be,
    cells_of,
    key_of,
    question_on,
    tolerance_of,
)
from recheck.checks.registry import Case, check
from recheck.model import N_BY_PAIR, Finding, Implied, Remedy
from recheck.model.figures import printed_text, span
from recheck.reconcile.rounding import ROUNDINGS
from recheck.reconcile.slips import candidates

if TYPE_CHECKING:
    from recheck.recompute.matrices import Definiteness

NAME = "correlation-matrix"
MOST_FREED = 20
MOST_TRIED = 6
"""Coefficients of which slips are tried, and three of which are named."""


@check(
    NAME,
    title="correlations of a table that can stand together",
    kinds=("correlation-matrix",),
    quantity="",
    needs=(),
    beside="three or more correlations among the same variables",
    formula="v'Rv ≥ 0 for every v: no weighted sum of standardised scores has a variance below 0",
    source="Olkin (1981) Psychometrika 46:469-472; Higham (2002) IMA Journal of Numerical Analysis 22:329-343",
    limits="Conditional at most: correlations from different cases (pairwise deletion, several samples), polychoric ones and those corrected for unreliability need not fit together. Rounding is taken into account.",
    agrees=(
        table(
            "Table 2. Correlations of three scores (N = 90).",
            "Score | 1 | 2 | 3",
            "1. Loaf height | – | | ",
            "2. Crumb score | .48 | – | ",
            "3. Crust colour | .12 | .31 | –",
        ),
    ),
    conditional=(
        table(
            "Table 2. Correlations of three scores (N = 90).",
            "Score | 1 | 2 | 3",
            "1. Loaf height | – | | ",
            "2. Crumb score | .88 | – | ",
            "3. Crust colour | .81 | .12 | –",
        ),
    ),
)
def correlation_matrix(case: Case) -> Iterable[Finding]:
    """Tell whether any data can have these correlations; where none can, which of them already cannot stand together."""
    from recheck.recompute.matrices import within_box

    cells = cells_of(case.claim)
    if np.any(cells.low > cells.high):
        yield unchecked(case, NAME, "", "one of the correlations lies outside −1 to 1")
        return
    found = within_box(cells.low, cells.high)
    if found.possible is None:
        yield unchecked(
            case,
            NAME,
            "",
            "whether these correlations can stand together was not decided within the time allowed",
        )
    elif found.possible:
        yield _finding(case, cells, "agrees", can_be(cells), ())
    else:
        yield _at_fault(case, cells, found)


# -- matrices that no data can have -----------------------------------------------------------------------


def _at_fault(case: Case, cells: Cells, found: Definiteness) -> Finding:
    """The finding on a matrix without a fitting one within rounding."""
    from recheck.recompute.matrices import fewest_at_fault

    fewest = fewest_at_fault(cells.low, cells.high, found)
    pairs = [(i, j) for i in fewest for j in fewest if (i, j) in cells.printed]
    alone = _each_alone(cells, pairs, found)
    ranked = sorted(alone or pairs, key=lambda pair: -_times_at_fault(cells, pair))
    worst = ranked[0]
    implied = _allowed(cells, fewest, worst)
    other = next((r.words for r in ROUNDINGS[1:] if not _proved(found, cells_of(case.claim, r))), "")
    message = cannot_be(cells, fewest, worst, implied, other, by_pair=N_BY_PAIR in case.claim.notes)
    finding = _finding(case, cells, "conditional", message, implied, worst)
    return replace(
        finding,
        assumptions=(other or PLAIN_CORRELATIONS, *reading_doubts((case.claim,))),
        reconciled_by=tuple(_remedies(cells, ranked, fewest)),
        question=question_on(case.claim, cells, pairs),
    )


def _proved(found: Definiteness, cells: Cells) -> bool:
    """Tell whether no matrix of other cells can be, by the same certificate or by one of their own."""
    from recheck.recompute.matrices import still_proved, within_box

    return still_proved(found, *cells.box) or within_box(*cells.box).possible is False


def _each_alone(cells: Cells, pairs: Sequence[Pair], found: Definiteness) -> list[Pair]:
    """The coefficients, any value of one of which would let all others stand; those of most weight are tried."""
    from recheck.recompute.matrices import FEW_STEPS, still_proved, within_box

    freed = [(pair, cells.with_cell(pair, -1.0, 1.0).box) for pair in pairs]
    left = [(pair, box) for pair, box in freed if not still_proved(found, *box)]
    return [pair for pair, box in left[:MOST_FREED] if within_box(*box, steps=FEW_STEPS).possible]


def _times_at_fault(cells: Cells, pair: Pair) -> int:
    """In how many triples that cannot be a coefficient takes part."""
    from recheck.recompute.matrices import worst_triples

    return sum(set(pair) <= set(triple) for triple in worst_triples(cells.low, cells.high))


def _allowed(cells: Cells, fewest: Sequence[int], pair: Pair) -> tuple[Implied, ...]:
    """What a coefficient would have to be beside the others at fault: within rounding for three, as printed for more."""
    from recheck.recompute.matrices import entry_bounds, third_correlation_bounds

    i, j = pair
    if len(fewest) == 3:
        (k,) = set(fewest) - {i, j}
        low, high = third_correlation_bounds(
            cells.low[k, i], cells.high[k, i], cells.low[k, j], cells.high[k, j]
        )
    else:
        chosen = np.ix_(fewest, fewest)
        middle = (cells.low[chosen] + cells.high[chosen]) / 2
        low, high = entry_bounds(middle, fewest.index(i), fewest.index(j))
    return () if np.isnan(low) else (Implied(float(low), float(high)),)


def _remedies(cells: Cells, ranked: Sequence[Pair], fewest: Sequence[int]) -> Iterator[Remedy]:
    """Slips in one coefficient that would let all stand together, then the range of the likeliest ones."""
    from recheck.recompute.matrices import FEW_STEPS, within_box, worst_triples

    rows: list[Remedy] = []
    for pair in ranked[:MOST_TRIED]:
        for number, words in candidates(cells.printed[pair]):
            interval = number.interval()
            if number.relation != "=" or words == "one digit wrong" or interval.low > 1 or interval.high < -1:
                continue
            tried = cells.with_cell(pair, interval.low, interval.high)
            if (
                next(worst_triples(*tried.box), None) is None
                and within_box(*tried.box, steps=FEW_STEPS).possible
            ):
                text = f"if {cells.told(pair)} were {number.text} ({words}), all could stand together"
                rows.append(
                    Remedy("slip", key_of(pair), text, change=f"{cells.printed[pair].text} → {number.text}")
                )
    yield from rows[:3]
    for pair in ranked[:3]:
        for allowed in _allowed(cells, fewest, pair):
            text = f"{cells.told(pair)} would have to be {span(allowed.low, allowed.high)}"
            yield Remedy("number", key_of(pair), text, allowed.low, allowed.high)


def _finding(
    case: Case, cells: Cells, verdict: str, message: str, implied: tuple[Implied, ...], pair: Pair | None = None
) -> Finding:  # fmt: skip
    claim, quantity = case.claim, key_of(pair) if pair else ""
    printed = cells.printed[pair] if pair else None
    gap = None
    if printed is not None and implied:
        interval = printed.interval()
        gap = max(0.0, implied[0].low - interval.high, interval.low - implied[0].high) / float(printed.unit)
    return Finding(
        id=finding_id(NAME, (claim,), ""), check=NAME, verdict="agrees" if verdict == "agrees" else "conditional",
        claims=(claim.id,), quantity=quantity, printed=printed_text(printed) if printed else "", implied=implied,
        message=message, place=claim.place, tolerance=tolerance_of(cells), gap=gap, confidence=claim.confidence,
    )  # fmt: skip
