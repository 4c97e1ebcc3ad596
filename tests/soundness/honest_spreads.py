"""Honest spreads: SD, SE, intervals, ranges, quartiles, totals and changes, by plain and by other honest methods."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from scipy import stats

from tests.soundness import computing, raw
from tests.soundness.hand import Hand, one
from tests.soundness.raw import Values
from tests.soundness.samples import Generator, Sample
from tests.soundness.tabling import GROUPS, SCORES, alone, draw_design, markdown, scores, table_hand

Rng = np.random.Generator
QUARTILES = ("linear", "weibull", "hazen", "median_unbiased", "averaged_inverted_cdf", "closest_observation")
WHOLES = ("Total", "All", "Overall", "All loaves", "Whole sample", "Combined", "Total sample")


def shown(hand: Hand, value: float, places: int) -> str:
    """A rounded number as this author prints it."""
    return hand.number(hand.rounded(value, places))


def interval_cell(hand: Hand, low: float, high: float, places: int, style: str) -> str:
    """A cell with an interval."""
    a, b = shown(hand, low, places), shown(hand, high, places)
    return {"to": f"{a} to {b}", "square": f"[{a}, {b}]", "round": f"({a}; {b})"}[style]


def summary_columns(rng: Rng, hand: Hand, places: int) -> dict[str, Callable[[Values], str]]:
    """Columns of a table of descriptives with how each is computed; a quantile by any of its definitions."""
    method, style = one(rng, QUARTILES), one(rng, ["to", "square", "round"])
    level = 0.95

    def sem(x: Values) -> float:
        return float(computing.sd(x) / np.sqrt(len(x)))

    def quantile(x: Values, share: float) -> str:
        return shown(hand, float(np.quantile(x, share, method=method)), places)

    def interval(x: Values) -> str:
        half = stats.t.ppf((1 + level) / 2, len(x) - 1) * sem(x)
        return interval_cell(hand, float(x.mean()) - half, float(x.mean()) + half, places, style)

    return {
        "SD": lambda x: shown(hand, computing.sd(x), places), "SE": lambda x: shown(hand, sem(x), places),
        "95% CI": interval, "Min": lambda x: shown(hand, float(x.min()), places),
        "Max": lambda x: shown(hand, float(x.max()), places), "Median": lambda x: shown(hand, float(np.median(x)), places),
        "Q1": lambda x: quantile(x, 0.25), "Q3": lambda x: quantile(x, 0.75),
    }  # fmt: skip


def descriptives(rng: Rng) -> Sample:
    """Groups in rows with n, mean and some of SD, SE, interval, range and quartiles; raw data of any shape."""
    hand, names = table_hand(rng), GROUPS[int(rng.integers(len(GROUPS)))]
    places = int(rng.choice([0, 1, 2, 2, 3]))
    shape = one(rng, list(raw.SHAPES))
    data = [
        raw.standard(rng, shape, float(rng.normal(0, 0.5)), float(rng.uniform(0.5, 2)), n)
        for n in raw.sizes(rng, len(names))
    ]
    columns = summary_columns(rng, hand, places)
    kept = [name for name in columns if rng.random() < 0.6] or ["SD"]
    for pair in (("Min", "Max"), ("Q1", "Q3")):
        kept = [k for k in kept if k not in pair] + ([*pair] if any(k in pair for k in kept) else [])
    # At times the n is that of the whole group, of which some have no value.
    lost = [
        int(rng.binomial(len(x) // 4, 0.4)) if "Min" not in kept and rng.random() < 0.1 else 0 for x in data
    ]
    rows = [[name, str(len(x) + more), shown(hand, float(x.mean()), places), *(columns[k](x) for k in kept)] for name, x, more in zip(names, data, lost, strict=True)]  # fmt: skip
    head = ["Group", "n", one(rng, ["Mean", "M"]), *kept]
    return alone(markdown(f"Table 1. {one(rng, list(SCORES))} by group.", head, rows))


def variables_in_rows(rng: Rng) -> Sample:
    """Variables in rows of one sample: mean (SD), median (IQR) and range, with cases missing from its n."""
    hand, n = table_hand(rng), int(rng.integers(6, 200))
    rows, method = [], one(rng, QUARTILES)
    for name in rng.permutation(SCORES)[:4]:
        (x,) = scores(rng, [max(4, n - int(rng.binomial(n, 0.05)))])
        places = int(rng.choice([0, 1, 2]))
        q1, m, q3 = (shown(hand, float(np.quantile(x, q, method=method)), places) for q in (0.25, 0.5, 0.75))
        spread = f"{shown(hand, float(x.mean()), places)} ({shown(hand, computing.sd(x), places)})"
        span = f"{shown(hand, float(x.min()), places)} to {shown(hand, float(x.max()), places)}"
        rows.append([str(name), spread, f"{m} ({q1}, {q3})", span])
    head = ["", "Mean (SD)", "Median (IQR)", "Range"]
    return alone(markdown(f"Table 1. The {n} loaves (N = {n}).", head, rows))


def other_errors(rng: Rng) -> Sample:
    """Raw SDs beside SEs or intervals that come from a model: pooled, clustered, within subjects, bootstrap, logarithms."""
    hand, design = table_hand(rng), draw_design(rng, high=int(rng.choice([14, 60])))
    kind = one(rng, ["pooled", "pooled", "clustered", "within", "bootstrap", "log"])
    data = scores(rng, list(design.sizes), "skewed" if kind == "log" else "normal")
    if kind != "log" and rng.random() < 0.3:
        data[-1] = np.round(data[-1].mean()) + 0.1 * (data[-1] - data[-1].mean())  # a group at the ceiling
    N, k = sum(design.sizes), len(data)
    pooled = float(np.sqrt(sum((len(x) - 1) * x.var(ddof=1) for x in data) / (N - k)))
    rows, places = [], int(rng.choice([1, 2]))
    for name, x in zip(design.names, data, strict=True):
        m, n = float(x.mean()), len(x)
        se, df = {
            "pooled": (pooled / np.sqrt(n), N - k), "clustered": (computing.sd(x) * np.sqrt(float(rng.uniform(1.2, 4)) / n), 7),
            "within": (computing.sd(x) * float(rng.uniform(0.2, 0.8)) / np.sqrt(n), n - 1),
        }.get(kind, (computing.sd(x) / np.sqrt(n), n - 1))  # fmt: skip
        half = stats.t.ppf(0.975, df) * se
        low, high = m - half, m + half
        if kind == "bootstrap":
            means = rng.choice(x, (1000, n)).mean(axis=1)
            low, high = np.quantile(means, (0.025, 0.975))
        if kind == "log":
            logs = np.log(x)
            half = stats.t.ppf(0.975, n - 1) * logs.std(ddof=1) / np.sqrt(n)
            low, high = np.exp(logs.mean() - half), np.exp(logs.mean() + half)
            m = float(np.exp(logs.mean()))
        cells = [shown(hand, m, places), shown(hand, computing.sd(x), places), shown(hand, float(se), places)]
        rows.append([name, str(n), *cells, interval_cell(hand, float(low), float(high), places, "to")])
    if len(rows) > 3 and rng.random() < 0.4:
        del rows[int(rng.integers(len(rows)))]  # a group that entered the model is not shown
    head = ["Group", "n", "Mean", "SD", "SE", "95% CI"]
    drop = [3] if rng.random() < 0.4 else [4] if kind in ("bootstrap", "log") or rng.random() < 0.5 else []
    keep = [i for i in range(6) if i not in drop]
    return alone(
        markdown("Table 1. Height.", [head[i] for i in keep], [[row[i] for i in keep] for row in rows])
    )


def told_in_prose(rng: Rng) -> Sample:
    """One or two groups in a sentence with SD, SE or both, n, and the interval of the mean by t, z or a pooled SD."""
    hand = table_hand(rng)
    data = raw.groups(rng, int(rng.choice([1, 2])), 3)
    pooled = float(
        np.sqrt(sum((len(x) - 1) * x.var(ddof=1) for x in data) / (sum(map(len, data)) - len(data)))
    )
    method = one(rng, ["t", "t", "z", "pooled"])
    told = []
    for name, x in zip(("rye", "wheat"), data, strict=False):
        n, s = len(x), pooled if method == "pooled" else computing.sd(x)
        c = stats.norm.ppf(0.975) if method == "z" else stats.t.ppf(0.975, n - 1)
        half = c * s / np.sqrt(n)
        m, places = float(x.mean()), hand.places["mean"]
        parts = [
            f"SD = {shown(hand, computing.sd(x), places)}",
            f"SE = {shown(hand, float(s / np.sqrt(n)), places)}",
            f"n = {n}",
        ]
        parts = [p for p in parts if rng.random() < 0.7]
        low, high = shown(hand, m - half, places), shown(hand, m + half, places)
        if rng.random() < 0.7:
            parts.append(one(rng, [f"95% CI [{low}; {high}]", f"95% CI {low} to {high}"]))
        if rng.random() < 0.3:
            parts.append(
                f"range {shown(hand, float(x.min()), places)} to {shown(hand, float(x.max()), places)}"
            )
        told.append(
            f"{name} loaves (M = {shown(hand, m, places)}, {', '.join(parts)})" if parts else f"{name} loaves"
        )
    return Sample(f"Heights were measured of {' and of '.join(told)}.", alone=True)


def total_columns(rng: Rng) -> Sample:
    """Groups and their total in columns: raw data of all, some with values missing, n in the header; or adjusted by hand."""
    hand, design = table_hand(rng), draw_design(rng, high=80)
    rows = []
    plain = rng.random() < 0.15
    for name in rng.permutation(SCORES)[:4]:
        data, places = scores(rng, design.answered(rng)), int(rng.choice([0, 1, 1, 2]))
        union = np.concatenate(data)
        pairs = [(float(x.mean()), computing.sd(x)) for x in data]
        total = float(np.mean([m for m, _ in pairs])) if plain else float(union.mean())
        cells = [
            f"{shown(hand, m, places)} ({shown(hand, s, places)})"
            for m, s in (*pairs, (total, computing.sd(union)))
        ]
        rows.append([str(name), *cells])
    whole = f"{one(rng, list(WHOLES))} (N = {sum(design.sizes)})"
    head = ["", *design.headed(), whole]
    if rng.random() < 0.4:
        head = ["", whole, *design.headed()]
        rows = [[row[0], row[-1], *row[1:-1]] for row in rows]
    return alone(markdown("Table 1. Loaves by group, mean (SD).", head, rows))


def total_rows(rng: Rng) -> Sample:
    """Groups and their total in rows, each with its own n; at times the groups of two factors, one after the other."""
    hand, design = table_hand(rng), draw_design(rng, high=80)
    data, places = scores(rng, list(design.sizes)), int(rng.choice([1, 2]))
    union = np.concatenate(data)
    told = [(name, x, len(x)) for name, x in zip(design.names, data, strict=True)]
    if rng.random() < 0.3:
        cut = int(rng.integers(3, len(union) - 3))
        mixed = rng.permutation(union)
        told += [("Morning", mixed[:cut], cut), ("Evening", mixed[cut:], len(mixed) - cut)]
    told.append((one(rng, ["Total", "All", "Overall"]), union, len(union)))
    method = one(rng, QUARTILES[:1])
    rows = [
        [
            name, str(n), shown(hand, float(x.mean()), places), shown(hand, computing.sd(x), places),
            shown(hand, float(np.quantile(x, 0.5, method=method)), places), shown(hand, float(x.min()), places),
            shown(hand, float(x.max()), places),
        ]
        for name, x, n in told
    ]  # fmt: skip
    return alone(
        markdown("Table 1. Height by group.", ["Group", "n", "Mean", "SD", "Median", "Min", "Max"], rows)
    )


WEIGHTED = (
    "Height by group (population-weighted).|n", "Height by group; sampling weights were applied.|n", "Height by group.|Unweighted n",
    "Height by group, standardised to the flours of all mills.|n", "Height by group. Means are weighted by the loaves sold.|n",
    "Height by group; n is unweighted, means and SDs are weighted.|n", "Height by group, post-stratified.|n", "Age-standardised height by group.|n",
    "Height by group, design-weighted means.|n", "Height by group. Estimates use calibration weights.|n",
)  # fmt: skip


def weighted_totals(rng: Rng) -> Sample:
    """Groups and their total in rows, each group weighted by its share of another population; n as counted."""
    hand, design = table_hand(rng), draw_design(rng, high=80)
    data, places = scores(rng, list(design.sizes)), int(rng.choice([1, 2]))
    shares = rng.dirichlet(np.ones(len(data)))
    means, variances = np.array([x.mean() for x in data]), np.array([x.var() for x in data])
    mean = float(shares @ means)
    spread = float(np.sqrt(shares @ (variances + (means - mean) ** 2)))
    told = [
        (name, len(x), float(x.mean()), computing.sd(x)) for name, x in zip(design.names, data, strict=True)
    ]
    told.append((one(rng, ["Total", "All", "Overall"]), sum(map(len, data)), mean, spread))
    rows = [[name, str(n), shown(hand, m, places), shown(hand, s, places)] for name, n, m, s in told]
    caption, head = one(rng, list(WEIGHTED)).split("|")
    return alone(markdown(f"Table 1. {caption}", ["Group", head, "Mean", "SD"], rows))


def totals_in_prose(rng: Rng) -> Sample:
    """All apprentices and the groups that they are made of, n before the brackets or in them; of some the age is not known."""
    hand, places = table_hand(rng), int(rng.choice([1, 2]))
    data = [rng.normal(24, 4, int(rng.integers(5, 90))) + float(rng.normal(0, 2)) for _ in range(2)]
    known = [x[rng.random(len(x)) < (1.0 if rng.random() < 0.7 else 0.95)] for x in data]
    known = [k if len(k) > 2 else x for k, x in zip(known, data, strict=True)]
    told = [
        f"M = {shown(hand, float(x.mean()), places)}, SD = {shown(hand, computing.sd(x), places)}"
        for x in (np.concatenate(known), *known)
    ]
    N, n1, n2 = sum(map(len, data)), *map(len, data)
    sentence = one(
        rng,
        [
            f"We trained {N} apprentices ({told[0]}): {n1} women ({told[1]}) and {n2} men ({told[2]}).",
            f"In all, {N} apprentices took part ({told[0]}), {n1} women ({told[1]}) and {n2} men ({told[2]}).",
            f"The sample of {N} bakers ({told[0]}) comprised {n1} masters ({told[1]}) and {n2} novices ({told[2]}).",
            f"Age of the {N} bakers ({told[0]}) was that of {n1} women ({told[1]}) and {n2} men ({told[2]}) alike.",
        ],
    )
    return Sample(sentence, alone=True)


def changes(rng: Rng) -> Sample:
    """Scores before and after with the change, of all cases or of those that have both."""
    hand, places = table_hand(rng), int(rng.choice([1, 2]))
    rows = []
    for name in ("Trained", "Untrained"):
        n = int(rng.integers(8, 60))
        x = raw.repeated(rng, n, 2)
        kept = rng.random(n) < (1.0 if rng.random() < 0.6 else 0.85)
        if kept.sum() < 4:
            kept[:] = True
        change = (x[:, 1] - x[:, 0])[kept] * (-1 if rng.random() < 0.2 else 1)
        columns = (x[:, 0], x[kept, 1], change)
        rows.append([f"{name} (n = {n})", *(f"{shown(hand, float(c.mean()), places)} ({shown(hand, computing.sd(c), places)})" for c in columns)])  # fmt: skip
    first, last, change_ = one(rng, ["Before|After|Change", "Baseline|Follow-up|Mean change", "Pre-test|Post-test|Gain", "T1|T2|Difference"]).split("|")  # fmt: skip
    return alone(markdown("Table 1. Bench score, mean (SD).", ["", first, last, change_], rows))


def scale_ranges(rng: Rng) -> Sample:
    """Means and SDs of answers beside the ends of their scale, few of which were chosen."""
    hand, rows = table_hand(rng), []
    n = int(rng.integers(10, 200))
    for name in ("Crumb", "Crust", "Smell"):
        x = np.clip(
            np.round(float(rng.uniform(2, 6)) + float(rng.uniform(0.05, 1.5)) * rng.standard_normal(n)), 1, 7
        )
        rows.append(
            [name, str(n), shown(hand, float(x.mean()), 2), shown(hand, computing.sd(x), 2), "1", "7"]
        )
    return alone(
        markdown("Table 1. Scores on scales from 1 to 7.", ["", "n", "Mean", "SD", "Min", "Max"], rows)
    )


HONEST_SPREADS: dict[str, Generator] = {
    "descriptives": descriptives, "variables in rows": variables_in_rows, "spreads in prose": told_in_prose,
    "total columns": total_columns, "total rows": total_rows, "changes": changes,
    "SE and CI of other models": other_errors, "ends of scales": scale_ranges,
    "weighted totals": weighted_totals, "totals in prose": totals_in_prose,
}  # fmt: skip
