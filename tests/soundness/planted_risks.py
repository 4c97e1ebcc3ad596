"""Misprints planted into ratios, differences and shares beside their counts, each with a brute-force decision."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from decimal import Decimal

import numpy as np
from scipy.stats import contingency
from statsmodels.stats.contingency_tables import Table2x2  # type: ignore[import-untyped]
from statsmodels.stats.proportion import (  # type: ignore[import-untyped]
    confint_proportions_2indep,
    proportion_confint,
)

from tests.soundness.honest_risks import two_risks
from tests.soundness.planted_tables import apart, box, misprint
from tests.soundness.raw import Values
from tests.soundness.rounding import rounded
from tests.soundness.samples import Sample
from tests.soundness.tabling import markdown

Rng = np.random.Generator
Planted = Callable[[Rng], tuple[Sample, bool]]
BEYOND = 0.12
"""Ends are denied where they lie this much of the interval's width beyond those of every method tried here."""


def _changed(rng: Rng, value: Decimal) -> Decimal:
    """One digit wrong, so that something is left to be printed."""
    while True:
        other = misprint(rng, value)
        if other and other != value:
            return other


def _ratios(t: Values) -> dict[str, float]:
    plain = Table2x2(t)
    return {"OR": float(plain.oddsratio), "RR": float(plain.riskratio)}


def _wald(t: Values, name: str) -> str:
    method, compare = {"OR": ("logit", "odds-ratio"), "RR": ("log", "ratio")}[name]
    counts = (t[0, 0], t[0].sum(), t[1, 0], t[1].sum())
    low, high = confint_proportions_2indep(*counts, method=method, compare=compare)
    return f"{rounded(float(low), 2)} to {rounded(float(high), 2)}"


def _row(t: Values, head: str, cell: str, *right: tuple[Values, str]) -> Sample:
    rows = []
    for fault, (table, shown) in zip(("Split crust", "Dark crust"), ((t, cell), *right), strict=False):
        counts = [f"{row[0]}/{row.sum()} ({rounded(100 * row[0] / row.sum(), 1)})" for row in table]
        rows.append([fault, *counts, shown])
    heads = ["", "Steamed, n/N (%)", "Dry, n/N (%)", head]
    return Sample(markdown("Table 2. Faults by oven.", heads, rows), alone=True)


def _denied(printed: Decimal, value: float) -> bool:
    return all(apart(box(printed), (x, x)) for x in (value, 1 / value))


def ratio_in_row(rng: Rng) -> tuple[Sample, bool]:
    """A crude ratio with a digit wrong beside the counts of its row."""
    t = two_risks(rng)
    name = str(rng.choice(["OR", "RR"]))
    value = _ratios(t)[name]
    shown = _changed(rng, rounded(value, 2))
    other = two_risks(rng)
    right = f"{rounded(_ratios(other)[name], 2)} ({_wald(other, name)})"
    told = _row(t, f"Crude {name} (95% CI)", f"{shown} ({_wald(t, name)})", (other, right))
    return told, _denied(shown, value)


def ratio_in_sentence(rng: Rng) -> tuple[Sample, bool]:
    """A ratio in prose with one of the counts misprinted."""
    t = two_risks(rng)
    value = rounded(_ratios(t)["OR"], 2)
    told = t.copy()
    told[0, 0] = int(_changed(rng, Decimal(int(t[0, 0]))))
    total = int(t[0].sum())
    if not 0 < told[0, 0] < total:
        return ratio_in_sentence(rng)
    text = (
        f"Crusts split in {told[0, 0]}/{total} steamed and {t[1, 0]}/{t[1].sum()} dry loaves (OR = {value})."
    )
    other = float(told[0, 0] * t[1, 1]) / float((total - told[0, 0]) * t[1, 0])
    return Sample(text), _denied(value, other)


def wrong_label(rng: Rng) -> tuple[Sample, bool]:
    """A risk ratio called an odds ratio, or the other way round."""
    t = two_risks(rng)
    ratios = _ratios(t)
    name, other = ("OR", "RR") if rng.random() < 0.5 else ("RR", "OR")
    shown = rounded(ratios[other], 2)
    cell = f"{shown} ({_wald(t, other)})"
    return _row(t, f"Crude {name} (95% CI)", cell), bool(shown) and _denied(shown, ratios[name])


def _ends(t: Values) -> list[tuple[float, float]]:
    counts = (t[0, 0], t[0].sum(), t[1, 0], t[1].sum())
    found = [
        confint_proportions_2indep(*counts, method=m, compare="odds-ratio")
        for m in ("logit", "logit-adjusted", "score")
    ]
    exact = contingency.odds_ratio(t).confidence_interval()
    return [*((float(a), float(b)) for a, b in found), (float(exact.low), float(exact.high))]


def interval_in_row(rng: Rng) -> tuple[Sample, bool]:
    """The interval of a crude odds ratio with a digit of its upper end wrong."""
    t = two_risks(rng, least=4)
    low, high = (rounded(x, 2) for x in _ends(t)[0])
    shown = _changed(rng, high)
    if shown <= low:
        return interval_in_row(rng)
    value = rounded(_ratios(t)["OR"], 2)
    highs = [b for _, b in _ends(t)]
    width = max(highs) - min(a for a, _ in _ends(t))
    denied = apart(box(shown), (min(highs) - BEYOND * width, max(highs) + BEYOND * width))
    return _row(t, "Crude OR (95% CI)", f"{value} ({low} to {shown})"), denied


def difference_in_sentence(rng: Rng) -> tuple[Sample, bool]:
    """A risk difference in prose with a digit wrong."""
    t = two_risks(rng)
    shares = [float(row[0] / row.sum()) for row in t]
    value = 100 * abs(shares[0] - shares[1])
    shown = _changed(rng, rounded(value, 1))
    told = " and ".join(
        f"{row[0]}/{row.sum()} ({rounded(100 * row[0] / row.sum(), 1)}%) {name}"
        for row, name in zip(t, ("rye", "wheat"), strict=True)
    )
    by_hand = abs(float(rounded(100 * shares[0], 1)) - float(rounded(100 * shares[1], 1)))
    denied = all(apart(box(shown), (x, x)) for x in (value, by_hand))
    return Sample(f"Crusts split in {told} loaves (risk difference {shown}%)."), denied


def share_interval(rng: Rng) -> tuple[Sample, bool]:
    """The interval of a share with a digit of its lower end wrong."""
    n = int(rng.integers(20, 300))
    k = int(rng.integers(3, n - 3))
    methods = ("normal", "wilson", "beta", "agresti_coull", "jeffreys")
    ends = [[100 * float(x) for x in proportion_confint(k, n, method=method)] for method in methods]
    shown = _changed(rng, rounded(ends[1][0], 1))
    if shown > rounded(ends[1][1], 1):
        return share_interval(rng)
    lows = [low for low, _ in ends]
    more = BEYOND * (ends[1][1] - ends[1][0]) + 50 / n
    share = rounded(100 * k / n, 1)
    text = f"A split crust was found in {k} of {n} loaves ({share}%, 95% CI {shown}% to {rounded(ends[1][1], 1)}%)."
    return Sample(text), apart(box(shown), (min(lows) - more, max(lows) + more))


def share_of_total(rng: Rng) -> tuple[Sample, bool]:
    """A percentage that no count of its total is."""
    n = int(rng.integers(8, 90))
    shown = _changed(rng, rounded(100 * int(rng.integers(1, n)) / n, 1))
    if shown > 100:
        return share_of_total(rng)
    low, high = box(shown)
    fits = any(low - 1e-9 <= 100 * k / n <= high + 1e-9 for k in range(n + 1))
    return Sample(f"In all, {shown}% of the {n} apprentices passed."), not fits


def mcnemar_chi2(rng: Rng) -> tuple[Sample, bool]:
    """McNemar's χ² with a digit wrong beside the numbers of changes."""
    b, c = (int(x) for x in rng.integers(3, 60, 2))
    values = [(b - c) ** 2 / (b + c), (max(abs(b - c) - 1, 0)) ** 2 / (b + c)]
    shown = _changed(rng, rounded(values[0] or 0.12, 2))
    text = f"In all, {b} tasters changed from sour to sweet and {c} from sweet to sour (McNemar's test, χ²(1) = {shown})."
    return Sample(text), all(apart(box(shown), (x, x)) for x in values)


RISK_PLANTS: Mapping[str, Planted] = {
    "crude ratio beside counts: misprint": ratio_in_row, "ratio in prose: count misprinted": ratio_in_sentence,
    "OR for RR": wrong_label, "CI of a crude OR: misprint": interval_in_row,
    "risk difference: misprint": difference_in_sentence, "CI of a share: misprint": share_interval,
    "share of a total: misprint": share_of_total, "McNemar's χ²: misprint": mcnemar_chi2,
}  # fmt: skip
