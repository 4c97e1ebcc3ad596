"""Brute force: do printed figures contradict each other under the plain readings?

Simple code of its own, apart from the package: every figure is a box of half a unit each way, and
each relation is walked over the corners and a grid of that box.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal
from itertools import product

import numpy as np
from scipy import stats

Range = tuple[float, float]


@dataclass(frozen=True, slots=True)
class Figures:
    """What one result prints: `test` names the statistic; `numbers` hold it as `statistic`, and
    `df`, `df1`, `df2`, `p`, `m1 s1 n1 m2 s2 n2`, `d`, `low`, `high` where printed."""

    test: str
    numbers: dict[str, Decimal]
    relation: str = "="

    def changed(self, relation: str = "", **numbers: Decimal) -> Figures:
        """The same result with some numbers printed otherwise."""
        return Figures(self.test, {**self.numbers, **numbers}, relation or self.relation)

    def with_number(self, name: str, value: Decimal) -> Figures:
        """The same result with the number of that name printed otherwise."""
        return Figures(self.test, {**self.numbers, name: value}, self.relation)

    def box(self, name: str) -> Range:
        """The true values that a printed number can stand for."""
        value = self.numbers[name]
        half = Decimal(1).scaleb(int(value.as_tuple().exponent)) / 2
        return float(value - half), float(value + half)

    def has(self, *names: str) -> bool:
        """Tell whether all these are printed."""
        return all(name in self.numbers for name in names)


def apart(a: Range, b: Range) -> bool:
    """Tell whether two ranges share no point, with a hair's breadth for floating point."""
    hair = 1e-9 * max(abs(a[0]), abs(b[0]), 1e-12)
    return a[1] < b[0] - hair or b[1] < a[0] - hair


def printed_p(figures: Figures) -> Range:
    """What the printed p allows."""
    value = float(figures.numbers["p"])
    low, high = {"<": (0.0, value), ">": (value, 1.0)}.get(figures.relation, figures.box("p"))
    return max(0.0, low), min(1.0, high)


def two_tailed(figures: Figures) -> Range:
    """The two-tailed p over a grid of the statistic's box (the upper tail for F and χ²)."""
    low, high = figures.box("statistic")
    grid = np.abs(np.append(np.linspace(low, high, 201), 0.0 if low < 0 < high else low))
    if figures.test == "r":
        grid = np.minimum(grid, 1 - 1e-15)
    n = {k: float(v) for k, v in figures.numbers.items()}
    if figures.test == "t":
        p = 2 * stats.t.sf(grid, n["df"])
    elif figures.test == "r":
        p = 2 * stats.t.sf(grid * np.sqrt(n["df"] / (1 - grid**2)), n["df"])
    elif figures.test == "z":
        p = 2 * stats.norm.sf(grid)
    elif figures.test == "F":
        p = stats.f.sf(grid, n["df1"], n["df2"])
    else:
        p = stats.chi2.sf(grid, n["df"])
    return float(np.min(p)), float(np.max(p))


def p_contradicted(figures: Figures) -> bool:
    """Neither the two-tailed nor a one-tailed p of the statistic is the printed one."""
    low, high = two_tailed(figures)
    readings = [(low, high)]
    if figures.test in ("t", "r", "z"):
        readings += [(low / 2, high / 2), (1 - high / 2, 1 - low / 2)]
    return all(apart(printed_p(figures), reading) for reading in readings)


def corners(figures: Figures) -> Iterator[tuple[float, float, float, float]]:
    """Corners of the box of both means and SDs, and a point without any difference if it has one."""
    boxes = [figures.box(name) for name in ("m1", "s1", "m2", "s2")]
    boxes[1], boxes[3] = (tuple(max(0.0, v) for v in boxes[i]) for i in (1, 3))  # type: ignore[assignment]
    yield from product(*boxes)
    if boxes[0][0] <= boxes[2][1] and boxes[2][0] <= boxes[0][1]:
        same = max(boxes[0][0], boxes[2][0])
        for s1, s2 in product(boxes[1], boxes[3]):
            yield same, s1, same, s2


def group_ranges(figures: Figures) -> dict[str, Range]:
    """|t| pooled and Welch, |d| and the pooled standard error over the corners."""
    n1, n2 = float(figures.numbers["n1"]), float(figures.numbers["n2"])
    rows = []
    for m1, s1, m2, s2 in corners(figures):
        gap = abs(m1 - m2)
        pooled = np.sqrt(((n1 - 1) * s1**2 + (n2 - 1) * s2**2) / (n1 + n2 - 2))
        error = pooled * np.sqrt(1 / n1 + 1 / n2)
        welch = np.sqrt(s1**2 / n1 + s2**2 / n2)
        with np.errstate(all="ignore"):
            rows.append([np.float64(gap) / error, np.float64(gap) / welch, np.float64(gap) / pooled, error])
    table = np.nan_to_num(np.array(rows), nan=0.0, posinf=np.inf)
    low, high = table.min(axis=0), table.max(axis=0)
    return {name: (float(low[i]), float(high[i])) for i, name in enumerate(("pooled", "welch", "d", "error"))}


def absolute(box: Range) -> Range:
    """The range of absolute values."""
    if box[0] <= 0 <= box[1]:
        return 0.0, max(-box[0], box[1])
    return min(abs(box[0]), abs(box[1])), max(abs(box[0]), abs(box[1]))


def groups_contradicted(figures: Figures) -> bool:
    """The printed |t| is neither pooled nor Welch of the printed groups."""
    ranges, t = group_ranges(figures), absolute(figures.box("statistic"))
    return apart(t, ranges["pooled"]) and apart(t, ranges["welch"])


def d_contradicted(figures: Figures) -> bool:
    """The printed |d| is not that of the groups, nor t times the root of the inverse sizes."""
    d = absolute(figures.box("d"))
    n1, n2 = float(figures.numbers["n1"]), float(figures.numbers["n2"])
    scale = np.sqrt(1 / n1 + 1 / n2)
    low, high = absolute(figures.box("statistic"))
    from_t = apart(d, (low * scale, high * scale))
    return from_t and (not figures.has("m1") or apart(d, group_ranges(figures)["d"]))


def interval_contradicted(figures: Figures) -> bool:
    """The interval is out of order, off the difference, of another width, or denies its own p."""
    low, high = figures.box("low"), figures.box("high")
    if low[0] > high[1]:
        return True
    m1, m2 = figures.box("m1"), figures.box("m2")
    middle = ((low[0] + high[0]) / 2, (low[1] + high[1]) / 2)
    gap = absolute((m1[0] - m2[1], m1[1] - m2[0]))
    if figures.has("gap"):
        told = absolute(figures.box("gap"))
        if apart(told, gap):
            return True
        gap = (max(gap[0], told[0]), min(gap[1], told[1]))
    factor = stats.t.ppf(0.975, float(figures.numbers["df"]))
    half = ((high[0] - low[1]) / 2, (high[1] - low[0]) / 2)
    error = group_ranges(figures)["error"]
    if apart(absolute(middle), gap) or apart(half, (factor * error[0], factor * error[1])):
        return True
    p = printed_p(figures)
    holds_zero, without_zero = low[1] < 0 < high[0], low[0] > 0 or high[1] < 0
    return (holds_zero and p[1] < 0.05) or (without_zero and p[0] > 0.05)


def out_of_range(figures: Figures) -> bool:
    """r beyond one, p beyond one, a negative SD, no degrees of freedom."""
    n = figures.numbers
    beyond = figures.test == "r" and abs(n["statistic"]) > 1
    beyond = beyond or n.get("df", 1) < 1
    return bool(beyond or n.get("p", 0) > 1 or min(n.get("s1", 0), n.get("s2", 0)) < 0)


def contradicted(figures: Figures) -> bool:
    """Tell whether the plain readings leave no way for all figures to be true together."""
    if out_of_range(figures):
        return True
    checks = [p_contradicted(figures)]
    if figures.has("m1", "n1") and figures.test == "t":
        checks.append(groups_contradicted(figures))
    if figures.has("d", "n1"):
        checks.append(d_contradicted(figures))
    if figures.has("low", "m1"):
        checks.append(interval_contradicted(figures))
    return any(checks)
