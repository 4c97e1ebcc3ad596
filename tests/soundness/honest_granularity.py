"""Honest means and SDs of whole scores, and of scores that only look whole: averaged, prorated, half, adjusted, missing."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from decimal import Decimal

import numpy as np

from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.raw import Values
from tests.soundness.rounding import HALF_EVEN, HALF_UP, TRUNCATE, rounded
from tests.soundness.samples import Generator, Sample, Told
from tests.soundness.tabling import markdown

Rng = np.random.Generator
OUTCOMES = (
    "sourness",
    "crumb softness",
    "crust colour",
    "bench confidence",
    "satisfaction with the training",
    "aroma",
)
SCALES = ((1, 5), (1, 7), (1, 9), (0, 10), (0, 3), (1, 4), (0, 6), (1, 10), (-3, 3))
SUBJECTS = ("rye loaves", "wheat loaves", "trained group", "untrained group")


@dataclass(frozen=True, slots=True)
class Shown:
    """Mean and SD of one group as printed."""

    mean: Decimal
    sd: Decimal
    n: int

    def facts(self) -> dict[str, Told]:
        return {"mean": ("=", self.mean), "sd": ("=", self.sd), "n": ("=", Decimal(self.n))}


def printer(rng: Rng, hand: Hand) -> Hand:
    """An author with one to three decimals, in plain letters."""
    places = {**hand.places, "mean": int(rng.choice([1, 2, 2, 2, 3])), "sd": int(rng.choice([1, 2, 2, 2, 3]))}
    style = one(rng, ["full", "full", "mean", "words", "n-first"])
    return replace(
        hand, rng=rng, letters="plain", places=places, group_style=style, how=one(rng, [HALF_UP, HALF_EVEN])
    )


def rounded_by(rng: Rng, value: float, decimals: int, how: str) -> Decimal:
    """Round as programs do: the shown decimal, the binary double by format, or numpy."""
    way = int(rng.integers(3))
    if way == 0:
        return rounded(value, decimals, how)
    text = f"{value:.{decimals}f}" if way == 1 else f"{np.round(value, decimals):.{decimals}f}"
    return Decimal(text) + 0


def scores(rng: Rng, n: int, low: int, high: int) -> Values:
    """Whole scores of one group: bell-shaped, skewed, split between the ends, or all but alike."""
    kind = one(rng, ["bell", "bell", "bell", "skew", "split", "alike"])
    share = {
        "bell": rng.beta(4, 4, n), "skew": rng.beta(1, 5, n), "split": (rng.random(n) < 0.5) * 1.0, "alike": np.full(n, 0.4),
    }[kind]  # fmt: skip
    drawn = np.rint(low + share * (high - low))
    if kind == "alike" and rng.random() < 0.7:
        drawn[0] += 1
    return np.clip(drawn, low, high)


def summary(rng: Rng, hand: Hand, x: Values, n: int | None = None, ddof: int = 1) -> Shown:
    """Mean and SD as this author prints them."""
    mean = rounded_by(rng, float(np.mean(x)), hand.places["mean"], hand.how)
    return Shown(mean, rounded_by(rng, float(np.std(x, ddof=ddof)), hand.places["sd"], hand.how), n or len(x))


def ends_told(rng: Rng, low: int, high: int) -> str:
    """The scale in words."""
    return one(
        rng,
        [
            f"from {low} (not at all) to {high} (very)", f"on a scale from {low} to {high}",
            f"on a {high - low + 1}-point scale ({low} = not at all, {high} = very)", f"on a {high - low + 1}-point scale",
        ],
    )  # fmt: skip


def told(rng: Rng, hand: Hand, outcome: str, method: str, groups: Sequence[Shown]) -> Sample:
    """A method sentence and a result sentence with one or two groups."""
    pieces = [hand.group_told(g.mean, g.sd, g.n).text for g in groups]
    subjects = [str(s) for s in rng.permutation(SUBJECTS)]
    text = f"{method} {outcome.capitalize()} was scored in the {subjects[0]} ({pieces[0]})"
    if len(pieces) > 1:
        text += f" and in the {subjects[1]} ({pieces[1]})"
    return Sample(f"{text}.", tuple(g.facts() for g in groups), alone=True)


def start(rng: Rng) -> tuple[Hand, str, int, int, list[int]]:
    """An author, an outcome, a scale and the sizes of one or two groups."""
    low, high = SCALES[int(rng.integers(len(SCALES)))]
    sizes = [int(rng.integers(3, 90)) for _ in range(int(rng.integers(1, 3)))]
    return printer(rng, draw_hand(rng)), one(rng, OUTCOMES), low, high, sizes


def rated(rng: Rng, outcome: str, low: int, high: int, how: str = "") -> str:
    """A sentence that tells the rating, and how the score came about where `how` says it."""
    who = one(
        rng,
        [
            "Apprentices rated {}",
            "The tasters rated {}",
            "Each apprentice rated {}",
            "We asked the apprentices to rate {}",
        ],
    )
    return f"{who.format(outcome)}{how} {ends_told(rng, low, high)}."


def single_item(rng: Rng) -> Sample:
    """One whole answer a person, said so."""
    hand, outcome, low, high, sizes = start(rng)
    how = one(rng, [" with a single item", " by one question", " on a single item"])
    groups = [summary(rng, hand, scores(rng, n, low, high)) for n in sizes]
    return told(rng, hand, outcome, rated(rng, outcome, low, high, how), groups)


def truncated(rng: Rng) -> Sample:
    """One whole answer a person; the figures are cut off, or the SD has n below it, or mean and SD were rounded twice."""
    hand, outcome, low, high, sizes = start(rng)
    groups = []
    kind = one(rng, ["cut", "n below", "twice"])
    for n in sizes:
        x = scores(rng, n, low, high)
        g = summary(rng, hand, x, ddof=0 if kind == "n below" else 1)
        if kind == "cut":
            g = Shown(
                *(
                    rounded(float(v), hand.places[w], TRUNCATE)
                    for v, w in ((x.mean(), "mean"), (x.std(ddof=1), "sd"))
                ),
                n,
            )
        if kind == "twice":
            g = Shown(
                *(
                    rounded(float(rounded(float(v), hand.places[w] + 1)), hand.places[w])
                    for v, w in ((x.mean(), "mean"), (x.std(ddof=1), "sd"))
                ),
                n,
            )
        groups.append(g)
    return told(rng, hand, outcome, rated(rng, outcome, low, high, " with a single item"), groups)


def averaged_silently(rng: Rng) -> Sample:
    """Each score is the mean of several loaves, trials or raters; the text does not say so."""
    hand, outcome, low, high, sizes = start(rng)
    k = int(rng.integers(2, 9))
    groups = [
        summary(rng, hand, np.mean([scores(rng, n, low, high) for _ in range(k)], axis=0)) for n in sizes
    ]
    return told(rng, hand, outcome, rated(rng, outcome, low, high), groups)


def averaged_items(rng: Rng) -> Sample:
    """Items averaged, said so; some answers are missing, or scores were stored with two decimals."""
    hand, outcome, low, high, sizes = start(rng)
    k = int(rng.integers(2, 7))
    groups = []
    for n in sizes:
        answers = np.array([scores(rng, n, low, high) for _ in range(k)])
        if rng.random() < 0.5:
            answers[0, rng.random(n) < 0.1] = np.nan
        x = np.nanmean(answers, axis=0)
        groups.append(summary(rng, hand, np.round(x, 2) if rng.random() < 0.4 else x))
    how = one(
        rng,
        [
            f" with {k} items that were averaged",
            f" by the mean of {k} items",
            f" with {k} questions, averaged into one score,",
        ],
    )
    return told(rng, hand, outcome, rated(rng, outcome, low, high, how), groups)


def several_loaves(rng: Rng) -> Sample:
    """Averages over loaves or sessions, hinted at in another sentence."""
    hand, outcome, low, high, sizes = start(rng)
    k = int(rng.integers(2, 7))
    groups = [
        summary(rng, hand, np.mean([scores(rng, n, low, high) for _ in range(k)], axis=0)) for n in sizes
    ]
    hint = one(
        rng,
        [
            "Ratings were averaged over the loaves.",
            f"Each of them tasted {k} loaves.",
            f"This was done in {k} sessions.",
            "The mean of all trials was used.",
        ],
    )
    return told(rng, hand, outcome, f"{rated(rng, outcome, low, high)} {hint}", groups)


def averaged_far_off(rng: Rng) -> Sample:
    """One question a time, but several times: told in a paragraph of its own, before or behind the measure."""
    hand, outcome, low, high, sizes = start(rng)
    k = int(rng.integers(2, 7))
    groups = [
        summary(rng, hand, np.mean([scores(rng, n, low, high) for _ in range(k)], axis=0)) for n in sizes
    ]
    far = one(
        rng,
        [
            f"Each taster was served {k} loaves, one at a time.",
            f"The question was answered on {k} evenings.",
            "It was asked at the end of each lesson.",
            f"Scores are means of {k} assessors.",
            "A mean score was computed for each taster.",
            "Data of all sessions were pooled.",
            "Values are means over days.",
            "For each apprentice the mean over all shifts was used.",
            f"Each taster rated the loaves on {k} days.",
            "The tasters gave one score to every loaf of a batch.",
            "The assessors repeated the tasting a week later.",
        ],
    )
    how = one(rng, [" with a single item", " by one question", " on a single item"])
    sample = told(rng, hand, outcome, rated(rng, outcome, low, high, how), groups)
    text = f"{far}\n\n{sample.text}" if rng.random() < 0.5 else f"{sample.text}\n\n{far}"
    return replace(sample, text=text)


def half_points(rng: Rng) -> Sample:
    """Half points were allowed."""
    hand, outcome, low, high, sizes = start(rng)
    groups = [summary(rng, hand, scores(rng, n, 2 * low, 2 * high) / 2) for n in sizes]
    return told(rng, hand, outcome, f"{rated(rng, outcome, low, high)} Half points were allowed.", groups)


def analogue(rng: Rng) -> Sample:
    """Marks on a line, up to its ends."""
    hand, outcome, _, _, sizes = start(rng)
    high = int(rng.choice([10, 100]))
    groups = [summary(rng, hand, np.clip(rng.normal(0.6, 0.5, n), 0, 1) * high) for n in sizes]
    return told(
        rng,
        hand,
        outcome,
        f"Apprentices marked {outcome} on a visual analogue scale from 0 to {high}.",
        groups,
    )


def sum_score(rng: Rng) -> Sample:
    """Answers added up: a whole number with the limits of the sum."""
    hand, outcome, low, high, sizes = start(rng)
    k = int(rng.integers(3, 25))
    groups = [
        summary(rng, hand, np.sum([scores(rng, n, low, high) for _ in range(k)], axis=0)) for n in sizes
    ]
    how = one(
        rng,
        [
            f"{k} items, each from {low} to {high}, were summed",
            f"{k} questions scored {low} to {high} were added up (possible range {k * low} to {k * high})",
        ],
    )
    return told(rng, hand, outcome, f"For {outcome}, {how}.", groups)


def sum_left_open(rng: Rng) -> Sample:
    """Sums of items of which only the scale of the items is told."""
    hand, outcome, low, high, sizes = start(rng)
    k = int(rng.integers(3, 9))
    groups = [
        summary(rng, hand, np.sum([scores(rng, n, low, high) for _ in range(k)], axis=0)) for n in sizes
    ]
    return told(rng, hand, outcome, rated(rng, outcome, low, high), groups)


def change(rng: Rng) -> Sample:
    """Changes of scores, off the scale of the scores."""
    hand, outcome, low, high, sizes = start(rng)
    groups = [summary(rng, hand, scores(rng, n, low, high) - scores(rng, n, low, high)) for n in sizes]
    sample = told(
        rng, hand, f"the change in {outcome}", rated(rng, outcome, low, high, " with a single item"), groups
    )
    return replace(sample, facts=())


def adjusted(rng: Rng) -> Sample:
    """Means adjusted for a covariate, or of imputed scores, which need lie on no grid."""
    hand, outcome, low, high, sizes = start(rng)
    said = one(
        rng,
        [
            "Means are adjusted for age.",
            "Missing scores were imputed by multiple imputation.",
            "Estimated marginal means are given.",
        ],
    )
    groups = [summary(rng, hand, scores(rng, n, low, high) + rng.normal(0, 0.3)) for n in sizes]
    return told(rng, hand, outcome, f"{rated(rng, outcome, low, high)} {said}", groups)


def missing_in_table(rng: Rng) -> Sample:
    """A table whose columns tell the size of the group, of which not all answered."""
    hand, outcome, low, high, _ = start(rng)
    sizes = [int(rng.integers(8, 90)) for _ in range(2)]
    cells = []
    for n in sizes:
        x = scores(rng, max(3, n - int(rng.binomial(n, 0.1))), low, high)
        g = summary(rng, hand, x)
        cells.append(f"{hand.number(g.mean)} ({hand.number(g.sd)})")
    head = ["", *(f"{name} (n = {n})" for name, n in zip(("Trained", "Untrained"), sizes, strict=True))]
    method = rated(rng, outcome, low, high, " with a single item")
    return Sample(
        f"{method}\n\n" + markdown("Table 2. Scores, M (SD).", head, [[outcome.capitalize(), *cells]]),
        alone=True,
    )


def shares(rng: Rng) -> Sample:
    """Scores of 0 and 1."""
    hand, outcome, _, _, sizes = start(rng)
    groups = [summary(rng, hand, (rng.random(n) < rng.uniform(0.05, 0.95)) * 1.0) for n in sizes]
    return told(
        rng, hand, outcome, f"Apprentices answered one question on {outcome} (0 = no, 1 = yes).", groups
    )


GRANULARITY: dict[str, Generator] = {
    "single item": single_item, "single item, other rounding": truncated, "averaged silently": averaged_silently,
    "averaged items": averaged_items, "several loaves": several_loaves, "averaged, told far off": averaged_far_off, "half points": half_points, "analogue scale": analogue,
    "sum score": sum_score, "sum left open": sum_left_open, "change of scores": change, "adjusted scores": adjusted,
    "missing in a table": missing_in_table, "scores of 0 and 1": shares,
}  # fmt: skip
