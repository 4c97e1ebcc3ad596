"""Honest documents in which text, abstract and tables tell one result twice, or two results that look alike."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from scipy import stats

from tests.soundness import computing, raw
from tests.soundness.computing import Values, sd
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.linking_traps import tested
from tests.soundness.samples import Generator, Piece, Sample
from tests.soundness.sentences import NAMES

OUTCOMES = ("Loaf height", "Crumb softness", "Oven spring", "Tasting score", "Shaping time")
REFERRING = ("(Table 2)", "(see Table 2)", "(cf. Table 2)", "as shown in Table 2", "[Table 2]")


@dataclass(frozen=True, slots=True)
class Row:
    """A row of a table: its name and the raw scores of each group, none for a sub-heading."""

    name: str
    groups: Sequence[Values] = ()


def cell(hand: Hand, x: Values) -> str:
    """Mean and SD as a cell prints them."""
    mean, spread = hand.rounded(float(x.mean()), hand.places["mean"]), hand.rounded(sd(x), hand.places["sd"])
    return f"{hand.number(mean)} ({hand.number(spread)})"


def table(
    hand: Hand, caption: str, columns: Sequence[str], rows: Sequence[Row], label: str = "Table 2"
) -> str:
    """A pipe table of means and SDs with its caption above."""
    lines = [
        f"{label}. {caption}, mean (SD).",
        "",
        f"| Outcome | {' | '.join(columns)} |",
        "|---" * (len(columns) + 1) + "|",
    ]
    for row in rows:
        cells = [cell(hand, x) for x in row.groups] or [""] * len(columns)
        lines.append(f"| {row.name} | {' | '.join(cells)} |")
    return "\n".join(lines)


def drawn(rng: np.random.Generator, n: int | None = None) -> tuple[Values, Values]:
    """Two plain groups, of n each where it is given."""
    a, b = raw.plain_groups(rng)
    if n is not None:
        a, b = np.resize(a, n) + rng.normal(0, 0.2, n), np.resize(b, n) + rng.normal(0, 0.2, n)
    return a, b


def heads(hand: Hand, names: Sequence[str], groups: Sequence[Values]) -> list[str]:
    """Column headings, with the sizes most of the time."""
    with_n = hand.rng.random() < 0.8
    return [
        f"{name.title()} (n = {len(x)})" if with_n else name.title()
        for name, x in zip(names, groups, strict=True)
    ]


def compared(
    hand: Hand, outcome: str, result: Piece, refer: str, verb: str = "was greater or smaller"
) -> str:
    """A sentence that tells a test and refers to the table."""
    if refer.startswith("as"):
        return f"A{refer[1:]}, {outcome.lower()} {verb} with rye than with wheat{hand.bracket(result)}."
    return f"{outcome} {verb} with rye than with wheat{hand.bracket(result)} {refer}."


def rows_of(rng: np.random.Generator, own: str, groups: Sequence[Values]) -> list[Row]:
    """The row of an outcome among those of others, measured on the same loaves."""
    others = [name for name in OUTCOMES if name != own][: int(rng.integers(0, 3))]
    rows = [
        Row(name, [x[rng.permutation(len(x))] * 1.7 + rng.normal(0, 1, len(x)) for x in groups])
        for name in others
    ]
    rows.insert(int(rng.integers(len(rows) + 1)), Row(own, groups))
    return rows


def text_and_table(rng: np.random.Generator) -> Sample:
    """A test in the text, its groups in a table; the means often again in the text, rounded further."""
    hand = draw_hand(rng)
    groups, own = drawn(rng), one(rng, list(OUTCOMES))
    result = tested(hand, computing.t_test(*groups, pooled=True))
    text = compared(hand, own, result, one(rng, list(REFERRING)))
    if rng.random() < 0.6:
        text += f" {means_again(hand, own, groups)}"
    shown = table(hand, "Outcomes by flour", heads(hand, NAMES[:2], groups), rows_of(rng, own, groups))
    return Sample(f"{text}\n\n{shown}\n", (dict(result.values),), alone=True)


def means_again(
    hand: Hand, own: str, groups: Sequence[Values], refer: str = "(Table 2)", label: str = "SD"
) -> str:
    """The means and spreads of two groups in a sentence, with at most as many decimals as the table has."""
    fewer = int(hand.rng.integers(0, 2))
    spreads = [sd(x) / (np.sqrt(len(x)) if label == "SE" else 1) for x in groups]
    told = []
    for x, spread in zip(groups, spreads, strict=True):
        mean = hand.rounded(float(x.mean()), max(0, hand.places["mean"] - fewer))
        width = hand.rounded(float(spread), max(0, hand.places["sd"] - fewer))
        told.append(f"M = {hand.number(mean)}, {label} = {hand.number(width)}")
    return f"{own} was compared between rye ({told[0]}) and wheat ({told[1]}) {refer}."


def another_time(rng: np.random.Generator) -> Sample:
    """The table tells of one week, the text of another, with the same loaves."""
    hand = draw_hand(rng)
    first, own = drawn(rng), one(rng, list(OUTCOMES))
    later = tuple(x * rng.uniform(0.8, 1.3) + rng.normal(0, 1, len(x)) for x in first)
    result = tested(hand, computing.t_test(*later, pooled=True))
    text = one(rng, [
        f"In week 4, {own.lower()} was greater or smaller with rye than with wheat{hand.bracket(result)} (Table 2 gives week 1).",
        f"After four weeks {own.lower()} differed{hand.bracket(result)}; for the start see Table 2.",
        f"The loaves were baked again after four weeks (the first week is shown in Table 2). {own} differed{hand.bracket(result)}.",
        f"{own} at the end of training differed between rye and wheat{hand.bracket(result)} (baseline: Table 2).",
        means_again(hand, f"In week 4, {own.lower()}", later),
        means_again(hand, f"After training {own.lower()}", later, "(Table 2: before training)"),
    ])  # fmt: skip
    shown = table(
        hand, "Outcomes in week 1 by flour", heads(hand, NAMES[:2], first), rows_of(rng, own, first)
    )
    return Sample(f"{text}\n\n{shown}\n", alone=True)


def gains(rng: np.random.Generator) -> Sample:
    """The table tells of final scores, the test of the gains."""
    hand = draw_hand(rng)
    before, own = drawn(rng), one(rng, list(OUTCOMES))
    after = tuple(x + rng.normal(rng.normal(0.5, 0.5), 1, len(x)) for x in before)
    result = tested(hand, computing.t_test(after[0] - before[0], after[1] - before[1], pooled=True))
    text = one(rng, [
        f"{own} increased more or less with rye than with wheat{hand.bracket(result)} (Table 2).",
        f"{own} gains differed between rye and wheat{hand.bracket(result)} (Table 2).",
        f"The gain in {own.lower()} differed between rye and wheat{hand.bracket(result)} (see Table 2).",
        f"Changes in {own.lower()} were compared{hand.bracket(result)} (Table 2).",
    ])  # fmt: skip
    shown = table(hand, "Final outcomes by flour", heads(hand, NAMES[:2], after), rows_of(rng, own, after))
    return Sample(f"{text}\n\n{shown}\n", alone=True)


def other_loaves(rng: np.random.Generator) -> Sample:
    """Another trial, the completers, or a subgroup of the same size beside the table of the first."""
    hand = draw_hand(rng)
    n, own = int(rng.integers(10, 60)), one(rng, list(OUTCOMES))
    first, second = drawn(rng, n), drawn(rng, n)
    result = tested(hand, computing.t_test(*second, pooled=True))
    text = one(rng, [
        f"In the second trial, {own.lower()} differed between rye and wheat{hand.bracket(result)}, unlike in the first (Table 2).",
        f"Among loaves baked at night, {own.lower()} differed between rye and wheat{hand.bracket(result)} (all loaves: Table 2).",
        f"Without the burnt loaves, {own.lower()} differed between rye and wheat{hand.bracket(result)} (see Table 2 for all).",
        means_again(hand, f"Among trained apprentices {own.lower()}", second),
        means_again(hand, f"Per protocol, {own.lower()}", second, "(intention to treat: Table 2)"),
    ])  # fmt: skip
    shown = table(hand, "Outcomes by flour", heads(hand, NAMES[:2], first), rows_of(rng, own, first))
    return Sample(f"{text}\n\n{shown}\n", alone=True)


def other_scale(rng: np.random.Generator) -> Sample:
    """The text tells in centimetres or with standard errors what the table tells in millimetres with SDs."""
    hand = draw_hand(rng)
    groups, own = drawn(rng), one(rng, list(OUTCOMES))
    small = tuple(x / 10 for x in groups)
    text = one(
        rng,
        [
            means_again(hand, own, groups, label="SE"),
            means_again(hand, f"In centimetres, {own.lower()}", small),
        ],
    )
    shown = table(
        hand, "Outcomes by flour", heads(hand, NAMES[:2], groups), rows_of(rng, f"{own} (mm)", groups)
    )
    return Sample(f"{text}\n\n{shown}\n", alone=True)


def two_times_in_a_table(rng: np.random.Generator) -> Sample:
    """A table with the same outcomes under two sub-headings, and a text that tells the time a sentence earlier."""
    hand = draw_hand(rng)
    first, own = drawn(rng), one(rng, list(OUTCOMES))
    later = tuple(x + rng.normal(0.3, 1, len(x)) for x in first)
    times = one(rng, ["Week 1,Week 4", "Before training,After training", "Trial 1,Trial 2"]).split(",")
    at = int(rng.integers(2))
    result = tested(hand, computing.t_test(*(first, later)[at], pooled=True))
    said = one(rng, [f"{times[at]} came next. ", f"We turn to {times[at].lower()}. ", ""])
    lead = f"{times[at]}: " if not said else ""
    text = (
        f"{said}{lead}{own} was greater or smaller with rye than with wheat{hand.bracket(result)} (Table 2)."
    )
    if rng.random() < 0.5:
        text += f" {means_again(hand, own, (first, later)[at])}"
    rows = [Row(times[0]), Row(own, first), Row(times[1]), Row(own, later)]
    if rng.random() < 0.3:
        rows = [Row(f"{own}, {times[0].lower()}", first), Row(f"{own}, {times[1].lower()}", later)]
    shown = table(hand, "Outcomes by flour", heads(hand, NAMES[:2], first), rows)
    return Sample(f"{text}\n\n{shown}\n", alone=True)


def namesakes(rng: np.random.Generator) -> Sample:
    """Outcomes whose names hold one another, and groups of two factors."""
    hand = draw_hand(rng)
    groups = drawn(rng)
    names = [
        "Loaf height",
        one(rng, ["Final loaf height", "Loaf height gain", "Loaf height ratio", "Height"]),
    ]
    others = tuple(x * 0.6 + rng.normal(0, 1, len(x)) for x in groups)
    at = int(rng.integers(2))
    result = tested(hand, computing.t_test(*(groups, others)[at], pooled=True))
    text = compared(hand, names[at], result, "(Table 2)")
    if rng.random() < 0.5:
        text += f" {means_again(hand, names[at], (groups, others)[at])}"
    left = [int(k) for k in rng.permutation(2)[: int(rng.integers(1, 3))]]
    rows = [Row(names[k], (groups, others)[k]) for k in left]
    shown = table(hand, "Outcomes by flour", heads(hand, NAMES[:2], groups), rows)
    return Sample(f"{text}\n\n{shown}\n", alone=True)


def split_columns(rng: np.random.Generator) -> Sample:
    """Columns for two groups of men and of women, a text about one of them or about all."""
    hand = draw_hand(rng)
    parts = [drawn(rng), drawn(rng)]
    own = one(rng, list(OUTCOMES))
    at = int(rng.integers(3))
    chosen = parts[at] if at < 2 else tuple(np.concatenate([parts[0][k], parts[1][k]]) for k in (0, 1))
    who = ("Among women, ", "Among men, ", "In all apprentices, ")[at]
    result = tested(hand, computing.t_test(*chosen, pooled=True))
    text = (
        f"{who}{own.lower()} was greater or smaller with rye than with wheat{hand.bracket(result)} (Table 2)."
    )
    if rng.random() < 0.5:
        text += f" {means_again(hand, who + own.lower(), chosen)}"
    columns = ["Women, rye", "Women, wheat", "Men, rye", "Men, wheat"]
    shown = table(hand, "Outcomes by flour and sex", columns, [Row(own, [*parts[0], *parts[1]])])
    return Sample(f"{text}\n\n{shown}\n", alone=True)


def abstract_and_results(rng: np.random.Generator) -> Sample:
    """An abstract that tells one of several results of the text again, with fewer decimals or a bound for p."""
    hand = draw_hand(rng)
    n = int(rng.integers(10, 60))
    names = list(OUTCOMES[: int(rng.integers(2, 5))])
    pairs = [drawn(rng, n) for _ in names]
    tests = [computing.t_test(*pair, pooled=True) for pair in pairs]
    results = [tested(hand, t) for t in tests]
    told = tests[int(rng.integers(len(tests)))]
    short = hand.number(
        hand.rounded(
            told.value, int(rng.integers(1, hand.places["statistic"] + 1)) if hand.places["statistic"] else 0
        )
    )
    p = tested(hand, told).text if rng.random() < 0.5 else f"t({int(told.df[0])}) = {short}"
    body = " ".join(
        f"{name} was compared between rye and wheat{hand.bracket(r)}."
        for name, r in zip(names, results, strict=True)
    )
    text = f"# Abstract\n\nRye and wheat were compared ({p}).\n\n# Results\n\n{body}\n"
    return Sample(text, tuple(dict(r.values) for r in results), alone=True)


def shares(rng: np.random.Generator) -> Sample:
    """Counts with percentages of all in a table, and of those who answered in the text."""
    hand = draw_hand(rng)
    ns = [int(rng.integers(20, 90)) for _ in range(2)]
    left = [int(rng.integers(0, n // 4 + 1)) for n in ns]
    hits = [int(rng.integers(1, n - k)) for n, k in zip(ns, left, strict=True)]
    whole = [f"{h} ({hand.number(hand.rounded(100 * h / n, 1))})" for h, n in zip(hits, ns, strict=True)]
    valid = [
        f"{h} ({hand.number(hand.rounded(100 * h / (n - k), 1))}%)"
        for h, n, k in zip(hits, ns, left, strict=True)
    ]
    text = one(rng, [
        f"Of those who answered, {valid[0]} rye and {valid[1]} wheat bakers burnt a loaf (Table 2).",
        f"A loaf was burnt by {valid[0]} with rye and {valid[1]} with wheat who answered (Table 2).",
        f"Burnt loaves were told of by {hits[0]} of {ns[0] - left[0]} with rye (Table 2).",
    ])  # fmt: skip
    shown = (
        f"Table 2. Bakers by flour, n (%).\n\n| | Rye (n = {ns[0]}) | Wheat (n = {ns[1]}) |\n|---|---|---|\n"
        f"| Burnt loaves | {whole[0]} | {whole[1]} |\n| Men | {ns[0] // 2} ({hand.number(hand.rounded(100 * (ns[0] // 2) / ns[0], 1))}) "
        f"| {ns[1] // 3} ({hand.number(hand.rounded(100 * (ns[1] // 3) / ns[1], 1))}) |\n"
    )
    return Sample(f"{text}\n\n{shown}", alone=True)


def share_test(rng: np.random.Generator) -> Sample:
    """χ² of two shares told in the text, of all bakers or of those who answered, by one of three formulas."""
    hand = draw_hand(rng)
    ns = [int(rng.integers(15, 90)) for _ in range(2)]
    hits = [int(rng.integers(1, n)) for n in ns]
    left = [int(rng.integers(0, n - h)) if rng.random() < 0.3 else 0 for h, n in zip(hits, ns, strict=True)]
    counts = np.array([[h, n - k - h] for h, n, k in zip(hits, ns, left, strict=True)], dtype=float)
    if (counts.sum(axis=0) == 0).any() or (counts.sum(axis=1) == 0).any():
        return Sample("Nobody burnt a loaf.")
    value = stats.chi2_contingency(counts, correction=bool(rng.random() < 0.4)).statistic
    value *= (counts.sum() - 1) / counts.sum() if rng.random() < 0.2 else 1
    result = hand.join(hand.statistic("chi2", float(value), (1.0,)), hand.p(float(stats.chi2.sf(value, 1))))
    cells = [f"{h} ({hand.number(hand.rounded(100 * h / n, 1))})" for h, n in zip(hits, ns, strict=True)]
    text = one(rng, [
        f"Burnt loaves differed or did not between rye and wheat{hand.bracket(result)} (Table 2).",
        f"As shown in Table 2, burnt loaves were told of more or less often with rye{hand.bracket(result)}.",
    ])  # fmt: skip
    shown = (
        f"Table 2. Bakers by flour, n (%).\n\n| | Rye (n = {ns[0]}) | Wheat (n = {ns[1]}) |\n|---|---|---|\n"
        f"| Burnt loaves | {cells[0]} | {cells[1]} |\n"
    )
    return Sample(f"{text}\n\n{shown}", (dict(result.values),), alone=True)


def adjusted_means(rng: np.random.Generator) -> Sample:
    """The table tells of means adjusted for age, the text of a plain t test."""
    hand = draw_hand(rng)
    groups, own = drawn(rng), one(rng, list(OUTCOMES))
    adjusted = tuple(x + shift for x, shift in zip(groups, rng.normal(0, 1, 2), strict=True))
    result = tested(hand, computing.t_test(*groups, pooled=True))
    text = compared(hand, own, result, one(rng, list(REFERRING)))
    caption = one(
        rng,
        [
            "Outcomes by flour, adjusted for age",
            "Estimated marginal means of outcomes by flour",
            "Adjusted outcomes by flour",
        ],
    )
    shown = table(hand, caption, heads(hand, NAMES[:2], groups), rows_of(rng, own, adjusted))
    return Sample(f"{text}\n\n{shown}\n", alone=True)


RETOLD: dict[str, Generator] = {
    "text and table": text_and_table, "table of another time": another_time, "gains beside final scores": gains,
    "table of other loaves": other_loaves, "another scale or spread": other_scale, "two times in a table": two_times_in_a_table,
    "names within names": namesakes, "columns of men and women": split_columns, "abstract and results": abstract_and_results,
    "shares of those who answered": shares, "test of shares": share_test,
    "table of adjusted means": adjusted_means,
}  # fmt: skip
