"""Correlation matrices over rounding intervals: is any matrix within the box positive semidefinite?

A printed matrix is a box, `low` and `high` of shape (k, k), symmetric, 1 on the diagonal; a missing
cell is [-1, 1]. Whatever the cases and variables, the correlations of complete data form a positive
semidefinite matrix. Either one is exhibited within the box, or a certificate proves that there is none.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from itertools import combinations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Bounds, Floats, floats, together

SHORT = 2**20
"""Vectors of certificates are rounded to whole multiples of its inverse, so that sums of products are exact."""
START = {0: 1e-2, 40: 1e-3, 120: 1e-5, 400: 1e-7}
"""From which step on a witness is sought with no eigenvalue below what. A wide margin is soon met where there is
room; what is nearer to singular than the last one may stay undecided."""
STEPS, FEW_STEPS = 3000, 150
LOOK = 10


@dataclass(frozen=True, slots=True, eq=False)
class Definiteness:
    """What is known of a box: `possible` True, False, or None where it was not decided.

    `witness` is a correlation matrix within the box. `vectors` of shape (m, k), rows v with the sum of
    v'Rv at most `most` < 0 for every R of the box, prove that there is none; mostly one row does.
    """

    possible: bool | None
    witness: Floats | None = None
    vectors: Floats | None = None
    most: float = 0.0


def smallest_eigenvalue(matrices: ArrayLike) -> Floats:
    """Smallest eigenvalue of symmetric matrices, shape (..., k, k) to (...); to 1e-14 k absolute.

    Source: Golub & Van Loan (1996), Matrix Computations, ch. 8.
    """
    (matrices,) = floats(matrices)
    return np.asarray(np.linalg.eigvalsh(matrices)[..., 0])


def third_correlation_bounds(
    r12_low: ArrayLike, r12_high: ArrayLike, r13_low: ArrayLike, r13_high: ArrayLike
) -> Bounds:
    """Range of r23 over intervals of r12 and r13, all within -1 to 1: r12 r13 ∓ sqrt((1-r12²)(1-r13²)).

    With angles a = arccos r12, b = arccos r13 that is cos(a + b) to cos(a - b). So r23 is largest where
    a and b are nearest (1 where the intervals meet) and smallest where a + b is nearest to π (-1 where
    a + b can be π): both ends are attained. Source: Stanley & Wang (1969), Educational and Psychological
    Measurement 29:579-581.
    """
    r12_low, r12_high, r13_low, r13_high = together(r12_low, r12_high, r13_low, r13_high)
    a_low, a_high = np.arccos(r12_high), np.arccos(r12_low)
    b_low, b_high = np.arccos(r13_high), np.arccos(r13_low)
    apart = np.maximum(0.0, np.maximum(a_low - b_high, b_low - a_high))
    total = np.clip(np.pi, a_low + b_low, a_high + b_high)
    return np.asarray(np.cos(total)), np.asarray(np.cos(apart))


def triple_excess(low12: ArrayLike, high12: ArrayLike, low13: ArrayLike, high13: ArrayLike,
                  low23: ArrayLike, high23: ArrayLike) -> Floats:  # fmt: skip
    """How far r23 lies outside what r12 and r13 allow over a box of three correlations; 0 where it does not.

    Angles of three vectors satisfy a <= b + c and its permutations, and a + b + c <= 2π; these are linear
    in the angles, so the feasible set is convex and its projection on r23 is the interval of
    `third_correlation_bounds`: the box holds a positive semidefinite matrix exactly where the excess is 0.
    """
    least, most = third_correlation_bounds(low12, high12, low13, high13)
    return np.maximum(0.0, np.maximum(np.subtract(low23, most), np.subtract(least, high23)))


def worst_triples(low: ArrayLike, high: ArrayLike, guard: float = 1e-9) -> Iterator[tuple[int, int, int]]:
    """Triples of variables, whose three intervals no data can have, the worst first, by `triple_excess`.

    Takes all k (k-1) (k-2) / 6 of them at once.
    """
    low, high = floats(low, high)
    if len(low) < 3:
        return
    i, j, m = np.array(list(combinations(range(len(low)), 3))).T
    excess = triple_excess(low[i, j], high[i, j], low[i, m], high[i, m], low[j, m], high[j, m])
    for at in np.argsort(-excess, kind="stable"):
        if not excess[at] > guard:
            return
        yield int(i[at]), int(j[at]), int(m[at])


def entry_bounds(matrix: ArrayLike, row: int, column: int) -> Bounds:
    """Range of one entry given all others, which are exact; nan where no value will do.

    With the two variables last, the others having matrix A and correlations x and y with them, the entry
    lies within x'A⁺y ∓ sqrt((1 - x'A⁺x)(1 - y'A⁺y)): its partial correlation is from -1 to 1.
    Source: Olkin (1981), Psychometrika 46:469-472.
    """
    (matrix,) = floats(matrix)
    others = [k for k in range(len(matrix)) if k not in (row, column)]
    inner = np.linalg.pinv(matrix[np.ix_(others, others)], hermitian=True)
    x, y = matrix[others, row], matrix[others, column]
    spare_x, spare_y = 1 - x @ inner @ x, 1 - y @ inner @ y
    middle = np.asarray(x @ inner @ y)
    inside = spare_x >= 0 and spare_y >= 0 and smallest_eigenvalue(matrix[np.ix_(others, others)]) > -1e-12
    half = np.sqrt(spare_x * spare_y) if inside else np.nan
    return np.asarray(middle - half), np.asarray(middle + half)


def within_box(low: ArrayLike, high: ArrayLike, *, steps: int = STEPS) -> Definiteness:
    """Decide whether a box of shape (k, k) holds a positive semidefinite matrix.

    The squared distance of a matrix B of the box to the cone of matrices with no eigenvalue below a
    margin is convex, its gradient Lipschitz with constant 1; it is minimised over the box by projected
    gradients with momentum (with steps of one and no momentum these are Higham's alternating
    projections). Either an iterate of the box has no negative eigenvalue and is the witness, or the negative
    part Z of B, which tends to the normal of a separating plane, proves by `most_over_box` that there is
    none. Both are checked, so the answer does not rest on convergence; None where neither came
    about in so many `steps`, or where an end is nan. Sources: Higham (2002), IMA Journal of Numerical Analysis 22:329-343; Beck & Teboulle
    (2009), SIAM Journal on Imaging Sciences 2:183-202; O'Donoghue & Candès (2015), Foundations of
    Computational Mathematics 15:715-732 for the restart.
    """
    low, high = floats(low, high)
    if np.isnan(low + high).any():
        return Definiteness(None)
    box = ahead = (low + high) / 2
    weight, margin = 1.0, 0.0
    for step in range(steps):
        if step in START:
            ahead, weight, margin = box, 1.0, START[step]
        values, vectors = np.linalg.eigh(box)
        if values[0] >= 0:
            return Definiteness(True, witness=box)
        if step % LOOK == 0:
            proof = _proof(values, vectors, low, high)
            if proof is not None:
                return Definiteness(False, vectors=proof[0], most=proof[1])
        nearest = np.clip(ahead + _lacking(ahead, margin), low, high)
        grown = (1 + np.sqrt(1 + 4 * weight**2)) / 2
        momentum = 0.0 if np.sum((ahead - nearest) * (nearest - box)) > 0 else (weight - 1) / grown
        box, ahead, weight = nearest, nearest + momentum * (nearest - box), grown if momentum else 1.0
    return Definiteness(None)


def _lacking(matrix: Floats, margin: float) -> Floats:
    """What must be added to reach the nearest matrix with no eigenvalue below the margin."""
    values, vectors = np.linalg.eigh(matrix)
    return np.asarray((vectors * np.maximum(margin - values, 0.0)) @ vectors.T)


def _proof(values: Floats, vectors: Floats, low: Floats, high: Floats) -> tuple[Floats, float] | None:
    """One vector, else several, that prove by exact sums that the box holds no semidefinite matrix."""
    negative = values < 0
    several = (vectors[:, negative] * np.sqrt(-values[negative] / -values[0])).T
    for tried in (vectors[:, :1].T, several):
        normal = tried.T @ tried
        if np.sum(np.maximum(low * normal, high * normal)) >= 0:
            continue
        short = np.rint(tried * SHORT)
        most = most_over_box(short, low, high) / SHORT**2
        if most < 0:
            return np.asarray(short / SHORT), float(most)
    return None


def most_over_box(vectors: ArrayLike, low: ArrayLike, high: ArrayLike) -> Fraction:
    """The greatest sum of v'Rv over the rows v of `vectors`, R in the box, in exact arithmetic.

    It is the sum of Z_ii and 2 Z_ij times the end of the interval on the side of its sign, Z = sum of
    vv': the certificates of `within_box`. `vectors` hold whole numbers up to 2**20; ends inside -1 to 1 are first moved outward by one unit
    in the last place, by more than which the double nearest to a decimal cannot be off.
    """
    whole = [[int(x) for x in row] for row in np.atleast_2d(np.asarray(vectors, dtype=np.float64))]
    low, high = floats(low, high)
    low, high = (np.clip(np.nextafter(ends, side), -1.0, 1.0) for ends, side in ((low, -2.0), (high, 2.0)))
    total = Fraction(sum(x * x for row in whole for x in row))
    for i, j in combinations(range(len(low)), 2):
        product = sum(row[i] * row[j] for row in whole)
        total += 2 * product * Fraction(float(high[i, j] if product > 0 else low[i, j]))
    return total


def still_proved(found: Definiteness, low: ArrayLike, high: ArrayLike) -> bool:
    """Tell by `most_over_box` whether the certificate of one box is one of another box of the same variables too."""
    if found.vectors is None:
        return False
    low, high = floats(low, high)
    normal = found.vectors.T @ found.vectors
    if np.sum(np.maximum(low * normal, high * normal)) >= 0:
        return False
    return most_over_box(np.rint(found.vectors * SHORT), low, high) < 0


def fewest_at_fault(low: ArrayLike, high: ArrayLike, found: Definiteness) -> tuple[int, ...]:
    """Variables whose correlations alone no data can have; for a box whose certificate was found.

    The worst three (`worst_triples`), else what is left when variables are left out one by one, those of least weight in
    the certificate first, as long as `FEW_STEPS` prove the others to be at fault; so each that is left is
    needed, as far as was looked.
    """
    low, high = floats(low, high)
    for triple in worst_triples(low, high):
        chosen = np.ix_(triple, triple)
        if within_box(low[chosen], high[chosen]).possible is False:
            return triple
    if found.vectors is None:
        return tuple(range(len(low)))
    kept, vectors = list(range(len(low))), found.vectors
    for k in np.argsort(np.sum(vectors**2, axis=0), kind="stable"):
        rest = [i for i in kept if i != k]
        chosen = np.ix_(rest, rest)
        proof = Definiteness(False, vectors=vectors[:, [kept.index(i) for i in rest]])
        if not still_proved(proof, low[chosen], high[chosen]):
            proof = within_box(low[chosen], high[chosen], steps=FEW_STEPS)
        if len(rest) >= 3 and proof.possible is False and proof.vectors is not None:
            kept, vectors = rest, proof.vectors
    return tuple(kept)
