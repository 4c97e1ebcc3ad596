"""All samples of a few whole scores, by listing them; and ends of printed numbers under each rounding."""

from __future__ import annotations

from fractions import Fraction
from functools import cache
from itertools import combinations_with_replacement

Printed = tuple[int, int]
"""Mean and SD in units of their last digit."""
A_TOUCH = Fraction(1, 10**12)
"""Less than any mean or squared SD of a few scores can lie from a tie without being one: leaves an end out."""


@cache
def pairs(n: int, high: int) -> frozenset[tuple[int, int]]:
    """(sum, sum of squares) of every sample of n whole numbers from 0 to `high`."""
    samples = combinations_with_replacement(range(high + 1), n)
    return frozenset((sum(s), sum(v * v for v in s)) for s in samples)


def roundings(value: Fraction) -> set[int]:
    """The whole numbers that a value rounds to, both at a tie."""
    low = (value + Fraction(1, 2)).__floor__()
    return {low, low - 1} if 2 * value == 2 * low - 1 else {low}


def root_roundings(square: Fraction) -> set[int]:
    """The whole numbers that the root of a fraction rounds to, both at a tie."""
    near = round(float(square) ** 0.5)
    half = Fraction(1, 2)
    return {
        r for r in range(max(near - 1, 0), near + 2) if max(r - half, Fraction(0)) ** 2 <= square <= (r + half) ** 2
    }  # fmt: skip


def printed_pairs(n: int, high: int, decimals: int, denominator: int, items: int = 1) -> set[Printed]:
    """Mean and SD as printed, of every sample of n scores of `items` answers from 0 to high/items."""
    unit = Fraction(10**decimals)
    found = set()
    for total, squares in pairs(n, high):
        square = (squares - Fraction(total * total, n)) / (denominator * items**2)
        means = roundings(Fraction(total, n * items) * unit)
        found |= {(mean, sd) for mean in means for sd in root_roundings(square * unit**2)}
    return found


def ends(text: str, rounding: str) -> tuple[Fraction, Fraction]:
    """What a printed number stands for under one rounding; an end that is left out is moved in by a touch."""
    value, unit = Fraction(text), Fraction(1, 10 ** len(text.partition(".")[2]))
    half, away = unit / 2, -1 if text.startswith("-") else 1
    if rounding == "half either way":
        return value - half, value + half
    if rounding == "half even":
        inward = A_TOUCH if int(value / unit) % 2 else Fraction(0)
        return value - half + inward, value + half - inward
    near, far = (value - away * half, value + away * (half - A_TOUCH))
    if rounding == "cut off":
        near, far = value, value + away * (unit - A_TOUCH)
    return min(near, far), max(near, far)
