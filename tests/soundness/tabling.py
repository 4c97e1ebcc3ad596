"""Tables of honest studies as Markdown: cells, headers, groups with missing cases."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np

from tests.soundness import computing, raw
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.raw import Values
from tests.soundness.samples import Sample, Told

GROUPS: tuple[tuple[str, ...], ...] = (("Trained", "Untrained"), ("Steamed", "Dry"), ("Rye", "Wheat", "Spelt"), ("Short", "Middle", "Long", "Overnight"))  # fmt: skip
SCORES = (
    "Loaf height, mm",
    "Crumb score",
    "Bench score",
    "Shaping time, min",
    "Crust colour",
    "Dough weight, g",
)
TRAITS = ("Left-handed", "Split crust", "Own starter", "Night shift", "Collapsed", "Trained before")
BLOCKS = {
    "Flour": ("Rye", "Wheat", "Spelt", "Oat"),
    "Crust": ("Dark", "Medium", "Light"),
    "School": ("North", "South", "Coast"),
}


def table_hand(rng: np.random.Generator) -> Hand:
    """An author who prints plain letters, as tables do."""
    hand = draw_hand(rng)
    places = {**hand.places, "statistic": max(hand.places["statistic"], 1)}
    return replace(hand, rng=rng, letters="plain", places=places, minus=one(rng, ["−", "-", "–"]))


def markdown(
    caption: str, head: Sequence[str], rows: Sequence[Sequence[str]], notes: Sequence[str] = ()
) -> str:
    """A pipe table with its caption above and its notes below."""
    lines = [" | ".join(head), "|".join(["---"] * len(head)), *(" | ".join(row) for row in rows)]
    body = "\n".join(f"| {line} |" if "---" not in line else f"|{line}|" for line in lines)
    return "\n\n".join([caption, body, *notes])


@dataclass(frozen=True, slots=True)
class Design:
    """Groups of a study: their names, their sizes, and how many answers a variable misses in each."""

    names: tuple[str, ...]
    sizes: tuple[int, ...]
    missing: float

    def answered(self, rng: np.random.Generator) -> list[int]:
        """How many of each group have a value of the next variable."""
        return [max(4, n - int(rng.binomial(n, self.missing))) for n in self.sizes]

    def headed(self) -> list[str]:
        """Column headers with the size of each group."""
        return [f"{name} (n = {n})" for name, n in zip(self.names, self.sizes, strict=True)]


def draw_design(rng: np.random.Generator, *, most: int = 4, low: int = 8, high: int = 150) -> Design:
    """Two to four groups, half of the time of one size, half of the time with missing answers."""
    chosen = [g for g in GROUPS if len(g) <= most]
    names: tuple[str, ...] = chosen[int(rng.integers(len(chosen)))]
    first = int(rng.integers(low, high))
    sizes = [first if rng.random() < 0.4 else int(rng.integers(low, high)) for _ in names]
    if rng.random() < 0.3:
        sizes = [first] * len(sizes)
    return Design(names, tuple(sizes), float(rng.choice([0, 0, 0.03, 0.1])))


def scores(rng: np.random.Generator, ns: list[int], shape: str | None = None) -> list[Values]:
    """Scores of groups of one shape with their own means and spreads."""
    kind = shape or one(rng, ["normal", "normal", "skewed", "likert", "items", "coarse", "counts"])
    return [raw.standard(rng, kind, float(rng.normal(0, 0.4)), float(rng.uniform(0.7, 1.5)), n) for n in ns]


def summary(hand: Hand, x: Values, style: str, places: int) -> tuple[str, Mapping[str, Told]]:
    """A cell with a mean and its SD."""
    m, s = hand.rounded(float(x.mean()), places), hand.rounded(computing.sd(x), places)
    a, b = hand.number(m), hand.number(s)
    cell = f"{a} ± {b}" if style == "±" else f"{a} ({b})"
    return cell, {"mean": ("=", m), "sd": ("=", s)}


def share(hand: Hand, count: int, total: int, style: str, places: int) -> str:
    """A cell with a count and its percentage."""
    percent = hand.number(hand.rounded(100 * count / total, places))
    return {
        "n (%)": f"{count} ({percent})", "n (%) signed": f"{count} ({percent}%)", "n/N (%)": f"{count}/{total} ({percent})",
        "n/N": f"{count}/{total}", "%": f"{percent}%",
    }[style]  # fmt: skip


def p_cell(hand: Hand, p: float) -> str:
    """A p as tables print it: a number, or below a bound."""
    decimals = max(hand.places["p"], 2)
    bound = hand.number(hand.rounded(10.0**-decimals, decimals), True)
    if not np.isfinite(p):
        return "–"
    if p < 10.0**-decimals:
        return f"< {bound}" if hand.rng.random() < 0.7 else f"<{bound}"
    return hand.number(hand.rounded(p, decimals), True)


def stars(p: float) -> str:
    """The stars of the usual note."""
    return "***" if p < 0.001 else "**" if p < 0.01 else "*" if p < 0.05 else ""


STAR_NOTE = "* p < .05, ** p < .01, *** p < .001."


def alone(text: str, facts: Sequence[Mapping[str, Told]] = ()) -> Sample:
    """A table is a document of its own."""
    return Sample(text, tuple(facts), alone=True)
