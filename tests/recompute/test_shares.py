"""Counts behind a percentage, against every count there is."""

from decimal import ROUND_DOWN, ROUND_HALF_EVEN, ROUND_HALF_UP, Decimal

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from recheck.recompute import shares
from tests.reference import rows


def _units(text: str) -> tuple[int, int]:
    decimals = len(text.partition(".")[2])
    return int(Decimal(text).scaleb(decimals)), decimals


@pytest.mark.parametrize("row", rows("percent_counts"), ids=lambda row: f"{row['label']} {row['percent']}")
def test_published_percentages(row):
    units, decimals = _units(row["percent"])
    total, count = int(row["total"]), row["count"]
    first, last = shares.counts_of_percent(units, decimals, total)
    cut_first, cut_last = shares.counts_of_percent(units, decimals, total, cut=True)
    own = (lambda a, b: a <= int(count) <= b) if count else (lambda a, b: a <= b)
    # A tie may go down to the even digit: that is the second column of the reference.
    assert own(cut_first, cut_last) == (row["rounded_or_cut"] == "yes")
    if row["rounded"] == "yes":
        assert own(first, last)
        fitting = row["counts_that_fit"]
        ends = fitting.split("..") if ".." in fitting else [fitting.split()[0], fitting.split()[-1]]
        assert (first, last) == (int(ends[0]), int(ends[1]))


@given(total=st.integers(1, 300), decimals=st.integers(0, 2), data=st.data())
def test_the_counts_are_all_that_any_rounding_prints_so(total, decimals, data):
    units = data.draw(st.integers(0, 100 * 10**decimals))
    place = Decimal(1).scaleb(-decimals)
    printed = Decimal(units).scaleb(-decimals)
    fits: dict[bool, list[int]] = {True: [], False: []}
    for count in range(total + 1):
        exact = Decimal(100 * count) / Decimal(total)
        rounded = {exact.quantize(place, rounding=how) for how in (ROUND_HALF_UP, ROUND_HALF_EVEN)}
        # Both ends of the interval are closed: a tie may go either way.
        tie = abs(200 * 10**decimals * count - 2 * units * total) == total
        fits[False] += [count] * (printed in rounded or tie)
        fits[True] += [count] * (
            printed in rounded or tie or exact.quantize(place, rounding=ROUND_DOWN) == printed
        )
    for cut, counts in fits.items():
        first, last = shares.counts_of_percent(units, decimals, total, cut=cut)
        assert list(range(int(first), int(last) + 1)) == counts


def test_arrays_broadcast():
    first, last = shares.counts_of_percent([333, 335], 1, [[24], [30]])
    assert first.shape == last.shape == (2, 2)
    assert shares.total_that_allows([333, 335], 1, [[24], [30]]).tolist() == [[True, False], [True, False]]
    assert shares.percent_of([7, 0], [8, 0])[0] == 87.5 and np.isnan(shares.percent_of(0, 0))
