"""Honest results of two risks: odds ratios, risk ratios, differences and shares with intervals by any method."""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np
from scipy.stats import contingency
from statsmodels.stats.contingency_tables import StratifiedTable, Table2x2, mcnemar  # type: ignore[import-untyped]
from statsmodels.stats.proportion import (  # type: ignore[import-untyped]
    confint_proportions_2indep,
    proportion_confint,
)

from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.raw import Values
from tests.soundness.samples import Generator, Piece, Sample
from tests.soundness.tabling import GROUPS, TRAITS, alone, markdown, table_hand

Rng = np.random.Generator
Estimate = tuple[float, float, float]


def two_risks(rng: Rng, low: int = 12, high: int = 200, least: int = 1) -> Values:
    """Counts [[a, b], [c, d]] of two groups, none below `least`."""
    while True:
        n1 = int(rng.integers(low, high))
        n2 = n1 if rng.random() < 0.3 else int(rng.integers(low, high))
        p = float(rng.uniform(0.05, 0.9))
        q = float(np.clip(p * np.exp(rng.normal(0, 0.6)), 0.03, 0.95))
        a, c = int(rng.binomial(n1, p)), int(rng.binomial(n2, q))
        table: Values = np.array([[a, n1 - a], [c, n2 - c]])
        if table.min() >= least:
            return table


def odds_ratio(rng: Rng, t: Values) -> Estimate:
    """An odds ratio by one of the programs in use: Wald, ½ added, conditional exact, score."""
    draw = rng.random()
    if draw < 0.15:
        found = contingency.odds_ratio(t)
        return float(found.statistic), *(float(x) for x in found.confidence_interval())
    if draw < 0.25:
        half = Table2x2(t + 0.5)
        return float(half.oddsratio), *(float(x) for x in half.oddsratio_confint())
    plain = Table2x2(t)
    method = "score" if draw < 0.35 else "logit"
    ends = confint_proportions_2indep(
        t[0, 0], t[0].sum(), t[1, 0], t[1].sum(), method=method, compare="odds-ratio"
    )
    return float(plain.oddsratio), float(ends[0]), float(ends[1])


def risk_ratio(rng: Rng, t: Values) -> Estimate:
    """A risk ratio with its interval by one of the methods in use."""
    method = one(rng, ["log", "log", "log", "score", "log-adjusted"])
    counts = (t[0, 0], t[0].sum(), t[1, 0], t[1].sum())
    ends = confint_proportions_2indep(*counts, method=method, compare="ratio")
    return float(Table2x2(t).riskratio), float(ends[0]), float(ends[1])


def difference(rng: Rng, t: Values) -> Estimate:
    """A risk difference with its interval by one of the methods in use."""
    method = one(rng, ["wald", "wald", "newcomb", "agresti-caffo"])
    counts = (t[0, 0], t[0].sum(), t[1, 0], t[1].sum())
    ends = confint_proportions_2indep(*counts, method=method, compare="diff")
    return counts[0] / counts[1] - counts[2] / counts[3], float(ends[0]), float(ends[1])


RATIOS: dict[str, tuple[Callable[[Rng, Values], Estimate], tuple[str, ...]]] = {
    "or": (odds_ratio, ("OR", "odds ratio", "crude OR", "unadjusted OR", "OR")),
    "rr": (risk_ratio, ("RR", "relative risk", "risk ratio", "crude RR")),
}


def told_counts(hand: Hand, t: Values, names: Sequence[str], style: str) -> str:
    """Two counts with their totals in the middle of a sentence."""
    rng, places = hand.rng, int(hand.rng.choice([0, 1, 1, 2]))
    parts = []
    for row, name in zip(t, names, strict=True):
        n, share = row.sum(), hand.number(hand.rounded(100 * row[0] / row.sum(), places))
        parts.append(
            {
                "of": f"{row[0]} of {n} {name} loaves ({share}%)", "slash": f"{row[0]}/{n} ({share}%) {name} loaves",
                "bare": f"{row[0]}/{n} {name} loaves", "words": f"{row[0]} out of {n} {name} loaves",
                "first": f"{share}% ({row[0]}/{n}) of the {name} loaves",
            }[style]
        )  # fmt: skip
    return one(rng, [" and ", " versus ", " compared with ", " against "]).join(parts)


def ratio_told(rng: Rng) -> Sample:
    """A ratio in prose, the groups in either order, by any method."""
    hand = draw_hand(rng)
    name = one(rng, ["or", "rr"])
    compute, labels = RATIOS[name]
    t = two_risks(rng)
    value, low, high = compute(rng, t if rng.random() < 0.6 else t[::-1])
    label = one(rng, labels)
    ends = hand.interval(low, high)
    shown = Piece(f"{label}{hand.relation('=')}{hand.number(hand.rounded(value, hand.places['effect']))}")
    text = told_counts(hand, t, ("rye", "wheat"), one(rng, ["of", "slash", "bare", "words", "first"]))
    result = f"{shown.text}{hand.separator}{ends.text}"
    return Sample(f"A split crust was found in {text} ({result}).")


def difference_told(rng: Rng) -> Sample:
    """A risk difference in prose, as a share, in per cent or in percentage points."""
    hand, t = draw_hand(rng), two_risks(rng)
    value, low, high = difference(rng, t)
    if rng.random() < 0.4:
        value, low, high = -value, -high, -low
    unit = one(rng, ["%", "points", ""])
    if unit:
        value, low, high = 100 * value, 100 * low, 100 * high
    places = 1 if unit else 3
    numbers = [
        hand.number(hand.rounded(x, places)) + ("%" if unit == "%" else "") for x in (value, low, high)
    ]
    label = "difference" if unit == "points" else "risk difference"
    tail = " percentage points" if unit == "points" else ""
    joint = "; " if hand.comma else ", "
    text = told_counts(hand, t, ("rye", "wheat"), one(rng, ["of", "slash", "first"]))
    return Sample(
        f"A split crust was found in {text} ({label} {numbers[0]}{tail}{joint}95% CI {numbers[1]} to {numbers[2]})."
    )


def share_told(rng: Rng) -> Sample:
    """One share with its interval by any method, or without its count."""
    hand = draw_hand(rng)
    n = int(rng.integers(10, 400))
    k = int(rng.integers(1, n))
    method = one(rng, ["normal", "wilson", "beta", "agresti_coull", "jeffreys"])
    low, high = (100 * float(x) for x in proportion_confint(k, n, method=method))
    places = int(rng.choice([0, 1, 1, 2]))
    share, a, b = (
        hand.number(hand.rounded(x, places)) for x in (100 * k / n, max(low, 0.0), min(high, 100.0))
    )
    told = [
        f"A split crust was found in {k} of {n} loaves ({share}%, 95% CI {a}% to {b}%).",
        f"A split crust was found in {k}/{n} loaves ({share}%; 95% CI {a}-{b}).",
        f"In all, {share}% of the {n} apprentices passed.",
        f"Of the {n} apprentices, {share}% passed.",
    ]
    return Sample(one(rng, told))


def missing_share(rng: Rng) -> Sample:
    """Shares of those who answered, of a larger number that is told; averages of shares; weighted ones."""
    hand = draw_hand(rng)
    n = int(rng.integers(12, 90))
    answered = n - int(rng.integers(1, 6))
    share = hand.number(hand.rounded(100 * int(rng.integers(1, answered)) / answered, 1))
    each = hand.number(hand.rounded(100 * float(rng.binomial(12, 0.6, size=n).mean()) / 12, 1))
    told = [
        f"Of the {n} apprentices, {share}% passed.", f"In all, {share}% of the {n} apprentices liked rye.",
        f"Tasters chose rye on {each}% of the 12 trials.", f"Rye was chosen in {each}% of all {n} tasters' choices.",
    ]  # fmt: skip
    return Sample(one(rng, told))


def stratified(rng: Rng) -> Sample:
    """A Mantel–Haenszel or a matched ratio beside the raw counts, which the text does or does not say."""
    hand = draw_hand(rng)
    tables = [two_risks(rng, 20, 120) for _ in range(3)]
    pooled = StratifiedTable([table.astype(float) for table in tables])
    low, high = pooled.oddsratio_pooled_confint()
    whole = np.sum(tables, axis=0)
    said = one(rng, ["", "", "stratified ", "adjusted "])
    value = hand.number(hand.rounded(float(pooled.oddsratio_pooled), 2))
    ends = hand.interval(float(low), float(high))
    text = told_counts(hand, whole, ("rye", "wheat"), one(rng, ["of", "slash", "bare"]))
    return Sample(f"A split crust was found in {text} ({said}OR = {value}, {ends.text}).")


def changes(rng: Rng) -> Sample:
    """McNemar's test with the numbers of those who changed, by any of its forms."""
    hand = draw_hand(rng)
    b, c = (int(x) for x in rng.integers(1, 40, 2))
    corrected = bool(rng.random() < 0.5)
    found = mcnemar([[10, b], [c, 10]], exact=False, correction=corrected)
    p = float(mcnemar([[10, b], [c, 10]], exact=True).pvalue) if rng.random() < 0.3 else float(found.pvalue)
    result = hand.join(hand.statistic("chi2", float(found.statistic), (1.0,)), hand.p(p))
    told = one(rng, [f"In all, {b} tasters changed from sour to sweet and {c} from sweet to sour",
                     f"{b} tasters switched to rye and {c} switched to wheat"])  # fmt: skip
    return Sample(f"{told} (McNemar's test, {result.text}).".replace("..", "."), (dict(result.values),))


RISKS: dict[str, Generator] = {
    "ratio of two risks": ratio_told, "difference of two risks": difference_told, "share with interval": share_told,
    "McNemar with changes": changes,
}  # fmt: skip
OTHER_RISKS: dict[str, Generator] = {"shares of fewer": missing_share, "stratified ratio": stratified}


def _cell(hand: Hand, low: float, high: float, value: float, places: int) -> str:
    a, b, m = (hand.number(hand.rounded(x, places)) for x in (low, high, value))
    joint = (
        one(hand.rng, [" to ", "; ", " – "]) if hand.comma or low < 0 else one(hand.rng, [" to ", ", ", "–"])
    )
    return f"{m} ({a}{joint}{b})"


def risk_table(rng: Rng) -> Sample:
    """Rows of outcomes with the counts of two groups and a ratio or a difference, crude or not said."""
    hand = table_hand(rng)
    names = GROUPS[int(rng.integers(2))]
    kind = one(rng, ["or", "rr", "rd"])
    style = one(rng, ["n/N (%)", "n (%)"])
    sizes = [int(x) for x in rng.integers(15, 200, 2)]
    rows = []
    for trait in rng.permutation(TRAITS)[: int(rng.integers(1, 5))]:
        events = [int(rng.integers(1, n)) for n in sizes]
        t = np.array([[e, n - e] for e, n in zip(events, sizes, strict=True)])
        if kind == "rd":
            value, low, high = (100 * x for x in difference(rng, t))
        else:
            value, low, high = RATIOS[kind][0](rng, t if rng.random() < 0.5 else t[::-1])
        cells = [
            f"{e}/{n} ({hand.number(hand.rounded(100 * e / n, 1))})" if style == "n/N (%)"
            else f"{e} ({hand.number(hand.rounded(100 * e / n, 1))})"
            for e, n in zip(events, sizes, strict=True)
        ]  # fmt: skip
        rows.append([str(trait), *cells, _cell(hand, low, high, value, 1 if kind == "rd" else 2)])
    label = {"or": ["OR", "Odds ratio", "Crude OR", "Unadjusted OR"], "rr": ["RR", "Risk ratio", "Crude RR"],
             "rd": ["Risk difference, %", "Risk difference"]}[kind]  # fmt: skip
    heads = [
        f"{n}, n/N (%)" if style == "n/N (%)" else f"{n} (n = {size}), n (%)"
        for n, size in zip(names, sizes, strict=True)
    ]
    return alone(
        markdown("Table 2. Faults by group.", ["Fault", *heads, f"{one(rng, label)} (95% CI)"], rows)
    )


def reference_table(rng: Rng) -> Sample:
    """Categories with their events, and ratios against the first of them: crude ones, and adjusted ones beside them."""
    hand = table_hand(rng)
    events = bool(rng.random() < 0.5)
    rows: list[list[str]] = []
    adjusted = bool(rng.random() < 0.5)
    for block, levels in (("Flour", ("Rye", "Wheat", "Spelt")), ("Oven", ("Stone", "Steel"))):
        rows.append([f"**{block}**", "", "", *([""] * adjusted)])
        tables = [two_risks(rng, 20, 150)[0] for _ in levels]
        columns = np.sum(tables, axis=0)
        for i, (level, own) in enumerate(zip(levels, tables, strict=True)):
            of = [own.sum(), own.sum()] if events else list(columns)
            shown = [hand.number(hand.rounded(100 * x / n, 1)) for x, n in zip(own, of, strict=True)]
            cells = (
                [f"{own[0]}/{own.sum()} ({shown[0]})"]
                if events
                else [f"{x} ({s})" for x, s in zip(own, shown, strict=True)]
            )
            ratios = ["1 (ref.)"] * (1 + adjusted) if not i else []
            if i:
                value, low, high = odds_ratio(rng, np.array([own, tables[0]]))
                ratios = [_cell(hand, low, high, value, 2)]
                if adjusted:
                    shift = float(np.exp(rng.normal(0, 0.2)))
                    ratios.append(_cell(hand, low * shift, high * shift, value * shift, 2))
            rows.append([f"  {level}", *cells, *ratios])
    heads = ["Split, n/N (%)"] if events else ["Split, n (%)", "Whole, n (%)"]
    crude = (
        one(rng, ["Crude OR", "Unadjusted OR"]) if adjusted else one(rng, ["OR", "Crude OR", "Univariate OR"])
    )
    labels = [f"{crude} (95% CI)", *(["Adjusted OR (95% CI)"] * adjusted)]
    return alone(markdown("Table 3. What goes with a split crust.", ["", *heads, *labels], rows))


def other_ratio_table(rng: Rng) -> Sample:
    """Ratios that are called crude beside counts that do not give them: of matched pairs, with weights, of rates."""
    hand = table_hand(rng)
    n = int(rng.integers(30, 150))
    both, b, c = (int(x) for x in rng.multinomial(n, rng.dirichlet([4, 3, 3, 4]))[:3])
    if not min(b, c):
        return other_ratio_table(rng)
    kind = one(rng, ["pairs", "weights", "rates"])
    counts = [(both + b, n), (both + c, n)]
    said, label = "", one(rng, ["Crude OR", "Unadjusted OR"])
    value, half = b / c, 1.96 * float(np.sqrt(1 / b + 1 / c))
    if kind == "pairs":
        said = one(
            rng, ["", "Cases and controls were matched for age.", "We used conditional logistic regression."]
        )
    if kind != "pairs":
        t = two_risks(rng)
        counts = [(int(row[0]), int(row.sum())) for row in t]
        shift = float(np.exp(rng.normal(0, 0.3)))
        value, half = float(Table2x2(t).riskratio) * shift, half
        said = "All analyses used sampling weights." if kind == "weights" else ""
        label = (
            "Unadjusted OR" if kind == "weights" else one(rng, ["Crude rate ratio", "Crude IRR", "Crude RR"])
        )
    cells = [f"{k}/{m} ({hand.number(hand.rounded(100 * k / m, 1))})" for k, m in counts]
    cell = _cell(hand, value * float(np.exp(-half)), value * float(np.exp(half)), value, 2)
    heads = ["Fault", "Steamed, n/N (%)", "Dry, n/N (%)", f"{label} (95% CI)"]
    body = markdown("Table 2. Faults by oven.", heads, [["Split crust", *cells, cell]])
    return alone(f"# Methods\n\n{said}\n\n# Results\n\n{body}" if said else body)


OTHER_RISK_TABLES: dict[str, Generator] = {"crude ratios of other models": other_ratio_table}
RISK_TABLES: dict[str, Generator] = {
    "ratios beside counts": risk_table,
    "ratios against a reference": reference_table,
}
