"""The engines of whole numbers, each by itself, against listings of all samples."""

from collections import Counter
from decimal import Decimal
from fractions import Fraction
from itertools import combinations_with_replacement

import pytest

from recheck.recompute.granularity.bitsets import exhaust
from recheck.recompute.granularity.edges import near_widest
from recheck.recompute.granularity.extremes import (
    evenest,
    greatest_squares,
    least_squares,
    sum_of_squares,
    widest,
)
from recheck.recompute.granularity.problem import Problem, TooLarge, near_ones
from recheck.recompute.granularity.scores import exact, outward
from recheck.recompute.granularity.search import search


def _samples(count: int, low: int, high: int):
    return [Counter(sample) for sample in combinations_with_replacement(range(low, high + 1), count)]


def _total(sample: Counter) -> int:
    return sum(value * times for value, times in sample.items())


@pytest.mark.parametrize(("count", "low", "high"), [(1, -1, 2), (3, -2, 3), (4, 0, 3), (5, -1, 1), (3, 2, 2)])
def test_evenest_and_widest_are_the_extremes_of_all_samples(count, low, high):
    for total in range(count * low, count * high + 1):
        squares = [
            sum(v * v * times for v, times in s.items())
            for s in _samples(count, low, high)
            if _total(s) == total
        ]
        for extreme, found, value in (
            (evenest(count, total), least_squares(count, total), min(squares)),
            (widest(count, total, low, high), greatest_squares(count, total, low, high), max(squares)),
        ):
            assert sum_of_squares(extreme) == found == value
            assert _total(extreme) == total
            assert sum(extreme.values()) == count


def test_both_engines_find_what_there_is_and_nothing_else():
    for count, low, high in ((3, -3, 2), (4, -2, 4), (5, -1, 3)):
        there = {(_total(s), sum_of_squares(s)) for s in _samples(count, low, high)}
        for total in range(count * low, count * high + 1):
            for squares in range(total % 2, count * 16 + 1, 2):
                problem = Problem(count, total, squares, squares, low, high)
                for found in (search(problem), exhaust(problem)):
                    assert (found is not None) == ((total, squares) in there), problem
                    if found is not None:
                        assert (_total(found), sum_of_squares(found)) == (total, squares)
                        assert sum(found.values()) == count
                        assert low <= min(+found) <= max(+found) <= high


def test_samples_near_the_widest():
    count, top = 5, 4
    there = {(_total(s), sum_of_squares(s)) for s in _samples(count, 0, top)}
    for total in range(count * top + 1):
        for squares in range(total % 2, count * top * top + 1, 2):
            found = near_widest(count, total, range(squares, squares + 1, 2), top)
            assert (found is not None) == ((total, squares) in there)
            assert found is None or (_total(found), sum_of_squares(found)) == (total, squares)
    with pytest.raises(TooLarge):
        near_widest(300, 15_000, range(700_000, 760_000, 2), 100, most_pairs=50)


def test_ones_and_noughts():
    for total in range(-4, 5):
        for squares in range(total % 2, 6, 2):
            there = any(_total(s) == total and sum_of_squares(s) == squares for s in _samples(4, -1, 1))
            assert (near_ones(4, total, squares, squares) is not None) == there


def test_a_float_is_the_decimal_that_was_printed():
    assert exact(5.185) == exact(Decimal("5.185")) == Fraction(5185, 1000)
    assert Fraction(5.185) != exact(5.185)


@pytest.mark.parametrize("middle", [Fraction(-7), Fraction(9, 2), Fraction(6), Fraction(23, 3), Fraction(40)])
def test_members_of_a_range_come_nearest_first(middle):
    members = list(outward(range(3, 12), middle))
    distances = [abs(member - middle) for member in members]
    assert sorted(members) == list(range(3, 12))
    assert distances == sorted(distances)
    assert list(outward(range(0), middle)) == []
