"""How journals and authors turn a computed value into printed digits."""

from __future__ import annotations

from decimal import ROUND_DOWN, ROUND_HALF_EVEN, ROUND_HALF_UP, Context, Decimal

HALF_UP, HALF_EVEN, TRUNCATE = ROUND_HALF_UP, ROUND_HALF_EVEN, ROUND_DOWN
_WIDE = Context(prec=60)


def rounded(value: float, decimals: int, how: str = HALF_UP) -> Decimal:
    """Round the shortest decimal that stands for `value`, as a program's display does."""
    exact = Decimal(repr(float(value)))
    return exact.quantize(Decimal(1).scaleb(-decimals), rounding=how, context=_WIDE)


def rounded_twice(value: float, decimals: int, first: int) -> Decimal:
    """Round to `first` decimals, as a table shows it, and then again to `decimals`."""
    return rounded(float(rounded(value, first)), decimals)


def padded(value: float, decimals: int, kept: int) -> Decimal:
    """Round to `kept` decimals and fill up with zeros to `decimals` (4.3 becomes 4.30)."""
    return rounded(float(rounded(value, kept)), decimals)
