"""The coefficients of a correlation matrix as intervals, and what reports say of them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np

from recheck.model import Claim, Implied, Printed
from recheck.model.figures import MINUS, figure, printed_text, span
from recheck.recompute.arrays import Floats
from recheck.reconcile.rounding import PLAIN, Rounding

Pair = tuple[int, int]

PLAIN_CORRELATIONS = (
    "all are plain correlations of the same cases (pairwise deletion of missing cases, polychoric or tetrachoric "
    "correlations, those corrected for unreliability, and several samples in one table need not fit together)"
)


@dataclass(frozen=True, slots=True, eq=False)
class Cells:
    """The printed coefficients of a matrix with what each stands for; missing cells are all from −1 to 1."""

    names: tuple[str, ...]
    printed: Mapping[Pair, Printed]
    low: Floats
    high: Floats

    @property
    def box(self) -> tuple[Floats, Floats]:
        """The lower and the upper ends."""
        return self.low, self.high

    def with_cell(self, pair: Pair, low: float, high: float) -> Cells:
        """The matrix with another interval for one coefficient."""
        lows, highs = self.low.copy(), self.high.copy()
        for i, j in (pair, pair[::-1]):
            lows[i, j], highs[i, j] = max(low, -1.0), min(high, 1.0)
        return replace(self, low=lows, high=highs)

    def told(self, pair: Pair) -> str:
        """Both variables of a coefficient with the coefficient."""
        one, two = sorted(pair)
        r = f" {printed_text(self.printed[pair])}" if pair in self.printed else ""
        return f"{self.names[one]} with {self.names[two]}{r}"


def cells_of(claim: Claim, rounding: Rounding = PLAIN) -> Cells:
    """The coefficients of a claim as a box."""
    size = len(claim.variables)
    low, high = np.full((size, size), -1.0), np.full((size, size), 1.0)
    np.fill_diagonal(low, 1.0)
    printed: dict[Pair, Printed] = {}
    for i in range(size):
        for j in range(i):
            number = claim.values.get(f"r({i + 1},{j + 1})")
            if number is not None:
                printed[i, j] = number
                interval = rounding.interval(number)
                low[i, j] = low[j, i] = max(interval.low, -1.0)
                high[i, j] = high[j, i] = min(interval.high, 1.0)
    return Cells(claim.variables, printed, low, high)


def _eigenvalue(cells: Cells) -> float | None:
    """The smallest eigenvalue of the matrix as printed; None where cells are missing."""
    from recheck.recompute.matrices import smallest_eigenvalue

    size = len(cells.names)
    if len(cells.printed) < size * (size - 1) // 2:
        return None
    matrix = np.eye(size)
    for (i, j), number in cells.printed.items():
        matrix[i, j] = matrix[j, i] = number.number
    return float(smallest_eigenvalue(matrix))


def can_be(cells: Cells) -> str:
    """One sentence on a matrix that data can have."""
    eigenvalue = _eigenvalue(cells)
    start = f"The {len(cells.printed)} correlations of {len(cells.names)} variables can stand together"
    if eigenvalue is None:
        return f"{start}; of the missing ones any value was allowed."
    if eigenvalue < 0:
        return f"{start} within rounding; as printed their smallest eigenvalue is {figure(eigenvalue, 3)}."
    return f"{start}; their smallest eigenvalue is {figure(eigenvalue, 3)}."


def cannot_be(
    cells: Cells,
    fewest: Sequence[int],
    worst: Pair,
    implied: tuple[Implied, ...],
    other: str,
    *,
    by_pair: bool,
) -> str:
    """What is at fault, its proof, and what must hold for it to be a contradiction."""
    names = [cells.names[i] for i in fewest]
    eigenvalue = _eigenvalue(cells)
    told = (
        f"as printed their smallest eigenvalue is {figure(eigenvalue, 3)}, and "
        if eigenvalue is not None
        else ""
    )
    parts = [
        f"No data can have these {len(cells.printed)} correlations together: {told}no matrix within rounding of them is free of negative ones."
    ]
    inside = [cells.told((i, j)) for i in fewest for j in fewest if (i, j) in cells.printed]
    if len(fewest) < len(cells.names) or len(fewest) == 3:
        parts.append(
            f"Already {len(names)} variables cannot stand so: {_listed(inside) if len(inside) <= 6 else _listed(names)}."
        )
    if implied:
        others = "the other two" if len(fewest) == 3 else "the others as printed"
        parts.append(
            f"Beside {others} {cells.told(worst)} would have to be {span(implied[0].low, implied[0].high)}."
        )
    parts.append(_proof(cells, fewest))
    if other:
        parts.append(f"They can stand together if {other}, which the text does not say.")
    else:
        missing = "The printed n differ from pair to pair, which can do it. " if by_pair else ""
        parts.append(f"{missing}That is a contradiction only if {PLAIN_CORRELATIONS}.")
    return " ".join(filter(None, parts))


def _proof(cells: Cells, fewest: Sequence[int]) -> str:
    """The certificate in words: weights of standardised scores whose sum would have a variance below 0."""
    from recheck.recompute.matrices import most_over_box, within_box

    chosen = np.ix_(fewest, fewest)
    low, high = cells.low[chosen], cells.high[chosen]
    vectors = within_box(low, high).vectors
    if vectors is None or len(vectors) > 1:
        return ""
    vector = vectors[0] * np.sign(vectors[0][np.argmax(np.abs(vectors[0]))])
    for digits in (100, 1000, 10000):
        weights = np.rint(vector * digits)
        most = float(most_over_box(weights, low, high)) / digits**2
        if most < 0:
            terms = (
                f"{figure(w / digits, 5)} × {cells.names[i]}"
                for w, i in zip(weights, fewest, strict=True)
                if w
            )
            text = " + ".join(terms).replace(f"+ {MINUS}", f"{MINUS} ")
            return (
                f"Proof: the standardised scores {text} would have a variance of {figure(most, 3)} at most."
            )
    return ""


def question_on(claim: Claim, cells: Cells, pairs: Sequence[Pair]) -> str:
    """A neutral question to the authors."""
    told = _listed([cells.told(pair) for pair in pairs[:6]]) + (" and others" if len(pairs) > 6 else "")
    where = f"“{claim.place.quote}”" + (f" on page {claim.place.page}" if claim.place.page else "")
    return f"Could you check the correlations of {told} in {where}, and say whether all were computed from the same cases?"


def tolerance_of(cells: Cells) -> str:
    """What each coefficient stands for, in words."""
    number = next(iter(cells.printed.values()))
    missing = len(cells.names) * (len(cells.names) - 1) // 2 - len(cells.printed)
    text = f"each r stands for half a unit of its last digit each way (r = {number.text} for {span(number.interval().low, number.interval().high, 12)})"
    return text + (f"; {missing} that are not printed may be anything from −1 to 1" if missing else "")


def _listed(items: Sequence[str]) -> str:
    """Join words as a sentence does."""
    return " and ".join(filter(None, (", ".join(items[:-1]), *items[-1:])))


def key_of(pair: Pair) -> str:
    """The name of a coefficient in its claim."""
    return f"r({pair[0] + 1},{pair[1] + 1})"
