"""The one place where numbers and places become text."""

from __future__ import annotations

import math

from recheck.model.passage import LEVELS, Place
from recheck.model.printed import Interval, Printed

MINUS = "−"
A_POINT = 1e-8
"""Relative width below which an interval is a point, but for the guard against errors of computing."""


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
    if math.isclose(low, high, rel_tol=A_POINT):
        return figure((low + high) / 2, digits)
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
    if not any(character.isdigit() for character in printed.text):
        if any(character.isalpha() for character in printed.text):
            return f"{printed.text} ({printed.relation} {printed.value})"
        return f"{printed.relation} {printed.value} ({printed.text})"
    sign = "" if printed.percent is False or "%" in printed.text else "%"
    return f"{printed.relation} {printed.text}{sign}"


def whereabouts(place: Place) -> str:
    """Write where something stands: page, section, line, table, row and column."""
    parts = []
    if place.page is not None:
        parts.append(f"page {place.page}")
    if place.line is not None:
        parts.append(f"line {place.line}")
    if place.section:
        parts.append(f"section “{place.section}”")
    if place.paragraph is not None and place.page is None and place.line is None:
        parts.append(f"paragraph {place.paragraph}")
    parts += [table_name(place)] if place.table else []
    parts += [f"row “{place.row}”"] if place.row else []
    parts += [_columns(place.column)] if place.column else []
    return ", ".join(parts) or "place unknown"


def table_name(place: Place) -> str:
    """Write the table of a place by its label, which mostly holds the word itself."""
    label = place.table or ""
    return f"table {label}" if label.replace(".", "").isdecimal() else label


def _columns(column: str) -> str:
    """Write the columns of a result; what stands over all of them is told once."""
    headings = column.split("; ")
    above = [heading.rpartition(LEVELS)[0] for heading in headings]
    last = [heading.rpartition(LEVELS)[2] for heading in headings]
    if len(headings) == 1:
        return f"column “{column}”"
    if len(set(above)) > 1 or not above[0]:
        return "columns " + ", ".join(f"“{heading}”" for heading in headings)
    return f"columns {', '.join(f'“{heading}”' for heading in last)} under “{above[0]}”"
