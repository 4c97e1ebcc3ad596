"""The one place where numbers become text."""

from __future__ import annotations

import math

from recheck.model.printed import Interval, Printed

MINUS = "−"


def figure(value: float, digits: int = 4) -> str:
    """Write a computed number with so many significant digits, never in more than twelve characters."""
    if math.isinf(value):
        return "∞" if value > 0 else MINUS + "∞"
    if value == 0:
        return "0"
    size = abs(value)
    if size < 1e-4 or size >= 1e7:
        mantissa, _, exponent = f"{size:.{max(digits - 2, 1)}e}".partition("e")
        text = f"{mantissa}e{int(exponent)}".replace("-", MINUS)
    else:
        decimals = max(0, digits - 1 - math.floor(math.log10(size)))
        text = f"{size:.{decimals}f}"
        if "." in text:
            text = text.rstrip("0").rstrip(".")
    return MINUS + text if value < 0 else text


def span(low: float, high: float, digits: int = 4) -> str:
    """Write an interval; its two ends get as many digits as it takes to tell them apart."""
    if math.isinf(high) and math.isinf(low):
        return "any value"
    if math.isinf(high):
        return f"{figure(low, digits)} or more"
    if math.isinf(low):
        return f"{figure(high, digits)} or less"
    for more in range(digits, digits + 6):
        first, last = figure(low, more), figure(high, more)
        if first != last:
            return f"{first} to {last}"
    return figure(low, digits)


def interval_text(interval: Interval, digits: int = 4) -> str:
    """Write an interval in words."""
    return span(interval.low, interval.high, digits)


def printed_text(printed: Printed) -> str:
    """Write a printed number with its relation, as it stands."""
    if printed.text[:1].isalpha():
        return f"{printed.text} ({printed.relation} {printed.value})"
    sign = "" if printed.percent is False or "%" in printed.text else "%"
    return f"{printed.relation} {printed.text}{sign}"
