"""What a printed number can stand for, checked against rounding it anew in decimal arithmetic."""

from decimal import ROUND_DOWN, ROUND_HALF_EVEN, ROUND_HALF_UP, Decimal

from hypothesis import given
from hypothesis import strategies as st

from recheck.model import Printed
from recheck.reconcile.rounding import PADDED, PLAIN, ROUNDINGS, TRUNCATED, TWICE

VALUES = st.decimals(min_value=-999, max_value=999, places=7)
PLACES = st.integers(0, 4)


def printed_at(value: Decimal, decimals: int, how: str) -> Printed:
    rounded = value.quantize(Decimal(1).scaleb(-decimals), rounding=how)
    return Printed(str(rounded), rounded, decimals)


@given(VALUES, PLACES, st.sampled_from((ROUND_HALF_UP, ROUND_HALF_EVEN)))
def test_plain_interval_holds_every_value_that_rounds_to_it(value, decimals, how):
    assert PLAIN.interval(printed_at(value, decimals, how)).holds(float(value))


@given(VALUES, PLACES)
def test_truncated_interval_holds_every_value_cut_to_it(value, decimals):
    assert TRUNCATED.interval(printed_at(value, decimals, ROUND_DOWN)).guarded(1e-12).holds(float(value))


@given(VALUES, PLACES, st.sampled_from((ROUND_HALF_UP, ROUND_HALF_EVEN)))
def test_twice_rounded_interval_holds_every_value(value, decimals, how):
    first = value.quantize(Decimal(1).scaleb(-decimals - 1), rounding=how)
    assert TWICE.interval(printed_at(first, decimals, how)).guarded(1e-12).holds(float(value))


@given(VALUES, PLACES)
def test_padded_interval_holds_values_rounded_more_coarsely(value, decimals):
    coarse = value.quantize(Decimal(1).scaleb(-decimals), rounding=ROUND_HALF_UP)
    padded = Printed(f"{coarse}0", coarse, decimals + 1)
    if coarse:
        assert PADDED.interval(padded).guarded(1e-12).holds(float(value))


@given(VALUES, PLACES)
def test_every_reading_contains_the_plain_one(value, decimals):
    printed = printed_at(value, decimals, ROUND_HALF_UP)
    plain = PLAIN.interval(printed)
    for rounding in ROUNDINGS:
        interval = rounding.interval(printed)
        assert interval.low <= plain.low and interval.high >= plain.high


def test_bounds_are_not_widened():
    printed = Printed(".05", Decimal("0.05"), 2, "<")
    assert {rounding.interval(printed) for rounding in ROUNDINGS} == {printed.interval()}
