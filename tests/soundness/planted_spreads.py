"""Misprints planted into honest spreads, totals and changes, each with the brute-force decision whether the plain readings deny it."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal
from itertools import product

import numpy as np
from scipy import stats

from tests.soundness import computing, raw
from tests.soundness.planted_tables import Planted, Range, Rng, apart, box, misprint
from tests.soundness.raw import Values
from tests.soundness.rounding import rounded
from tests.soundness.samples import Sample
from tests.soundness.tabling import markdown

NAMES = ("Rye", "Wheat", "Spelt", "Oat")


def drawn(rng: Rng, groups: int) -> list[Values]:
    """Groups of moderate size with plain scores that vary."""
    data = raw.plain_groups(rng, groups, 10, 60)
    return data if all(computing.sd(x) > 0.3 for x in data) else drawn(rng, groups)


def mean_sd(x: Values) -> tuple[Decimal, Decimal]:
    """Mean and SD to two decimals."""
    return rounded(float(x.mean()), 2), rounded(computing.sd(x), 2)


def se_of_a_row(rng: Rng) -> tuple[Sample, bool]:
    """An SE beside SD and n with one misprint, among others that are right."""
    data = drawn(rng, 4)
    rows, wrong = [], int(rng.integers(4))
    denied = False
    for i, (name, x) in enumerate(zip(NAMES, data, strict=True)):
        (m, s), n = mean_sd(x), len(x)
        se = rounded(computing.sd(x) / np.sqrt(n), 2)
        if i == wrong:
            se = misprint(rng, se)
            denied = apart(box(se), tuple(v / np.sqrt(n) for v in box(s)))  # type: ignore[arg-type]
        rows.append([name, str(n), str(m), str(s), str(se)])
    return Sample(markdown("Table 1. Height in mm.", ["", "n", "M", "SD", "SE"], rows)), denied


def spread_of(low: Decimal, high: Decimal, n: int) -> Range:
    """SDs that go with an interval of a mean by t."""
    a, b = box(low), box(high)
    factor = np.sqrt(n) / (2 * stats.t.ppf(0.975, n - 1))
    return factor * (b[0] - a[1]), factor * (b[1] - a[0])


def sd_of_an_interval(rng: Rng) -> tuple[Sample, bool]:
    """An SD beside the interval of its mean with one misprint, among others that are right."""
    data = drawn(rng, 4)
    rows, wrong, denied = [], int(rng.integers(4)), False
    for i, (name, x) in enumerate(zip(NAMES, data, strict=True)):
        (m, s), n = mean_sd(x), len(x)
        half = stats.t.ppf(0.975, n - 1) * computing.sd(x) / np.sqrt(n)
        low, high = rounded(float(x.mean()) - half, 2), rounded(float(x.mean()) + half, 2)
        if i == wrong:
            s = misprint(rng, s)
            denied = apart(box(s), spread_of(low, high, n))
        rows.append([name, str(n), str(m), str(s), f"{low} to {high}"])
    return Sample(markdown("Table 1. Height in mm.", ["", "n", "M", "SD", "95% CI"], rows)), denied


def se_called_sd(rng: Rng) -> tuple[Sample, bool]:
    """A column of SEs headed SD, beside the intervals of the means."""
    rows, denied = [], False
    for name, x in zip(NAMES, drawn(rng, 3), strict=False):
        m, n = float(x.mean()), len(x)
        se = computing.sd(x) / np.sqrt(n)
        half = stats.t.ppf(0.975, n - 1) * se
        low, high, s = rounded(m - half, 2), rounded(m + half, 2), rounded(se, 2)
        denied |= apart(box(s), spread_of(low, high, n))
        rows.append([name, str(n), str(rounded(m, 2)), str(s), f"{low} to {high}"])
    return Sample(markdown("Table 1. Height in mm.", ["", "n", "M", "SD", "95% CI"], rows)), denied


def se_of_prose(rng: Rng) -> tuple[Sample, bool]:
    """An SE beside the interval of its mean in a sentence, with one misprint."""
    (x,) = drawn(rng, 1)
    n = len(x)
    se = computing.sd(x) / np.sqrt(n)
    half = stats.t.ppf(0.975, n - 1) * se
    m = float(x.mean())
    low, high, printed = rounded(m - half, 2), rounded(m + half, 2), misprint(rng, rounded(se, 2))
    text = f"Rye loaves rose most (M = {rounded(m, 2)}, SE = {printed}, 95% CI [{low}, {high}], n = {n})."
    return Sample(text), apart(box(printed), tuple(v / np.sqrt(n) for v in spread_of(low, high, n)))  # type: ignore[arg-type]


def total(rng: Rng, slot: int) -> tuple[Sample, bool]:
    """Groups in rows with their own n and all together, its mean (slot 0) or SD (slot 1) misprinted."""
    data = drawn(rng, int(rng.choice([2, 3])))
    ns = [len(x) for x in data]
    told = [mean_sd(x) for x in data]
    whole = [*mean_sd(np.concatenate(data))]
    whole[slot] = misprint(rng, whole[slot])
    rows = [[name, str(n), str(m), str(s)] for name, n, (m, s) in zip(NAMES, ns, told, strict=False)]
    rows.append(["Total", str(sum(ns)), *map(str, whole)])
    text = markdown("Table 1. Height in mm.", ["", "n", "M", "SD"], rows)
    means = [union(ns, corner) for corner in product(*(box(m) for m, _ in told))]
    if slot == 0:
        return Sample(text), apart(box(whole[0]), (min(means)[0], max(means)[0]))
    between = [b for _, b in means]
    within = [
        sum((n - 1) * max(box(s)[i], 0.0) ** 2 for n, (_, s) in zip(ns, told, strict=True)) for i in (0, 1)
    ]
    # Between groups a corner gives the most; the least is no less than that of the midpoints less the width.
    low = np.sqrt(max(within[0] + min(between) - 0.02 * sum(ns), 0.0) / (sum(ns) - 1))
    return Sample(text), apart(
        box(whole[1]), (float(low), float(np.sqrt((within[1] + max(between)) / (sum(ns) - 1))))
    )


def union(ns: list[int], means: tuple[float, ...]) -> tuple[float, float]:
    """Mean of all, and the sum of squares between groups."""
    centre = sum(n * m for n, m in zip(ns, means, strict=True)) / sum(ns)
    return centre, sum(n * (m - centre) ** 2 for n, m in zip(ns, means, strict=True))


def mean_of_total(rng: Rng) -> tuple[Sample, bool]:
    return total(rng, 0)


def sd_of_total(rng: Rng) -> tuple[Sample, bool]:
    return total(rng, 1)


def change(rng: Rng) -> tuple[Sample, bool]:
    """A mean change with one misprint, beside the means before and after."""
    n = int(rng.integers(10, 60))
    x = raw.repeated(rng, n, 2)
    (a, s), (b, r), (c, q) = mean_sd(x[:, 0]), mean_sd(x[:, 1]), mean_sd(x[:, 1] - x[:, 0])
    c = misprint(rng, c)
    row = [f"Trained (n = {n})", f"{a} ({s})", f"{b} ({r})", f"{c} ({q})"]
    text = markdown("Table 1. Bench score, mean (SD).", ["", "Before", "After", "Change"], [row])
    (a0, a1), (b0, b1) = box(a), box(b)
    denied = apart(box(c), (b0 - a1, b1 - a0)) and apart(box(-c), (b0 - a1, b1 - a0))
    return Sample(text), denied


def sd_in_range(rng: Rng) -> tuple[Sample, bool]:
    """An SD whose decimal point moved, beside minimum and maximum."""
    (x,) = drawn(rng, 1)
    m, s = mean_sd(x)
    low, high = rounded(float(x.min()), 2), rounded(float(x.max()), 2)
    s = s.scaleb(1).quantize(Decimal("0.1"))
    text = f"Heights varied (M = {m}, SD = {s}, range {low} to {high}, n = {len(x)})."
    (a, _), (_, b), (m0, m1) = box(low), box(high), box(m)
    nearest = min(max((a + b) / 2, m0), m1)
    return Sample(text), apart(
        box(s), (0.0, float(np.sqrt((b - nearest) * (nearest - a) * len(x) / (len(x) - 1))))
    )


def median_far_off(rng: Rng) -> tuple[Sample, bool]:
    """A median with its first digit wrong, beside mean and SD."""
    (x,) = drawn(rng, 1)
    m, s = mean_sd(x)
    median = rounded(float(np.median(x)), 2) + int(rng.choice([-1, 1])) * 10 * (1 + int(float(s) // 5))
    text = markdown(
        "Table 1. Height.",
        ["", "n", "Mean", "SD", "Median"],
        [["Rye", str(len(x)), str(m), str(s), str(median)]],
    )
    return Sample(text), abs(float(m - median)) - 0.01 > float(s) + 0.005


SPREAD_PLANTS: Mapping[str, Planted] = {
    "SE beside SD and n: misprint": se_of_a_row, "SD beside CI: misprint": sd_of_an_interval,
    "SD column holds SEs": se_called_sd, "SE beside CI: misprint": se_of_prose, "total: mean misprint": mean_of_total,
    "total: SD misprint": sd_of_total, "change: misprint": change, "SD beside range: point moved": sd_in_range,
    "median far from mean": median_far_off,
}  # fmt: skip
