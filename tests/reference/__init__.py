"""Published values to test against; README.md says where they come from and how to read them."""

from __future__ import annotations

import csv
from functools import cache
from pathlib import Path

HERE = Path(__file__).parent


class Reference(dict[str, str]):
    """One row: `row["source"]` is text as it stands, `row.number("t")` a float, nan where it is empty."""

    def number(self, column: str) -> float:
        return float(self[column] or "nan")

    def numbers(self, *columns: str) -> tuple[float, ...]:
        return tuple(self.number(column) for column in columns)

    def has(self, *columns: str) -> bool:
        return all(self[column] for column in columns)

    def given(self) -> dict[str, float]:
        """The `inputs` of a conversion by name."""
        pairs = (pair.split("=") for pair in self["inputs"].split(";"))
        return {name: float(value) for name, value in pairs}

    def lists(self) -> dict[str, list[float]]:
        """The `inputs` by name where each is one number or several, one for each group."""
        pairs = (pair.split("=") for pair in self["inputs"].split(";"))
        return {name: [float(x) for x in value.split()] for name, value in pairs}


@cache
def rows(table: str) -> tuple[Reference, ...]:
    """All rows of one table, in its order."""
    with (HERE / f"{table}.csv").open(encoding="utf-8", newline="") as lines:
        return tuple(Reference(row) for row in csv.DictReader(lines))


def half_unit(printed: str) -> float:
    """Half a unit of the last digit of a printed number."""
    digits = printed.lstrip("-").partition(".")[2]
    return 0.5000001 * 10.0 ** -len(digits)
