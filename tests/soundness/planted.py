"""Plausible misprints planted into honest results, each with the brute-force decision on it."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from decimal import Decimal
from itertools import pairwise

import numpy as np
from scipy import stats

from tests.soundness import computing, raw, sentences
from tests.soundness.deciding import Figures, contradicted
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.rounding import rounded
from tests.soundness.samples import Sample

Rng = np.random.Generator
Slip = Callable[[Rng, Figures], Figures | None]


def draw_t(rng: Rng) -> Figures:
    """An independent t test with groups, d and interval, printed to two decimals, p to three."""
    a, b = raw.plain_groups(rng, 2, 8, 60)
    test = computing.t_test(a, b, pooled=True)
    if not computing.finite(test.value, test.error):
        return draw_t(rng)
    half = stats.t.ppf(0.975, test.df[0]) * test.error
    two = {
        "statistic": test.value, "m1": float(a.mean()), "s1": computing.sd(a), "m2": float(b.mean()),
        "s2": computing.sd(b), "d": test.effect / computing.pooled_sd(a, b),
        "low": test.effect - half, "gap": test.effect, "high": test.effect + half,
    }  # fmt: skip
    numbers = {name: rounded(value, 2) for name, value in two.items()}
    numbers |= {"df": Decimal(int(test.df[0])), "n1": Decimal(len(a)), "n2": Decimal(len(b))}
    return with_p(Figures("t", numbers), test.p)


def draw_other(rng: Rng) -> Figures:
    """An r, z, F or χ² with its df, printed to two decimals, p to three."""
    kind = one(rng, ["r", "z", "F", "chi2"])
    n = int(rng.integers(10, 120))
    if kind == "r":
        x = rng.standard_normal((n, 2)) + rng.standard_normal((n, 1)) * 0.6
        found = stats.pearsonr(x[:, 0], x[:, 1])
        return with_p(
            Figures("r", {"statistic": rounded(found.statistic, 2), "df": Decimal(n - 2)}), found.pvalue
        )
    p = float(np.exp(rng.uniform(np.log(0.002), 0)))
    if kind == "z":
        return with_p(Figures("z", {"statistic": rounded(float(stats.norm.isf(p / 2)), 2)}), p)
    k = int(rng.integers(1, 5))
    if kind == "F":
        numbers = {"statistic": rounded(float(stats.f.isf(p, k, n)), 2), "df1": Decimal(k), "df2": Decimal(n)}
        return with_p(Figures("F", numbers), p)
    return with_p(
        Figures("chi2", {"statistic": rounded(float(stats.chi2.isf(p, k)), 2), "df": Decimal(k)}), p
    )


def with_p(figures: Figures, p: float) -> Figures:
    """Print p with three decimals, or below .001."""
    if p < 0.0005:
        return figures.changed("<", p=Decimal("0.001"))
    return figures.changed("=", p=rounded(p, 3))


def wrong_digit(rng: Rng, value: Decimal) -> Decimal:
    """The same number with one digit of it wrong."""
    text = f"{value:f}"
    places = [i for i, c in enumerate(text) if c.isdigit() and not (i == 0 and c == "0")]
    at = places[int(rng.integers(len(places)))]
    other = one(rng, [c for c in "0123456789" if c != text[at]])
    return Decimal(text[:at] + other + text[at + 1 :])


def swapped(rng: Rng, value: Decimal) -> Decimal | None:
    """The same number with two neighbouring digits swapped, across the point too."""
    text = f"{value:f}"
    digits = [i for i, c in enumerate(text) if c.isdigit()]
    pairs = [(i, j) for i, j in pairwise(digits) if text[i] != text[j] and (i or text[j] != "0")]
    if not pairs:
        return None
    i, j = pairs[int(rng.integers(len(pairs)))]
    letters = list(text)
    letters[i], letters[j] = letters[j], letters[i]
    return Decimal("".join(letters))


def change(name: str, how: Callable[[Rng, Decimal], Decimal | None]) -> Slip:
    """A slip in one number."""

    def slip(rng: Rng, figures: Figures) -> Figures | None:
        if name not in figures.numbers or (name == "p" and figures.relation != "="):
            return None
        value = how(rng, figures.numbers[name])
        return None if value is None or value == figures.numbers[name] else figures.with_number(name, value)

    return slip


def p_of_other_df(rng: Rng, figures: Figures) -> Figures | None:
    """p looked up with one df more or less."""
    df = float(figures.numbers["df"]) + float(rng.choice([-1, 1]))
    p = 2 * stats.t.sf(abs(float(figures.numbers["statistic"])), df)
    other = with_p(figures, float(p))
    return None if other == figures else other


def wrong_side(rng: Rng, figures: Figures) -> Figures | None:
    """`p < .05` printed for a p above it."""
    if figures.relation == "<" or not Decimal("0.055") < figures.numbers["p"] < Decimal("0.6"):
        return None
    return figures.changed("<", p=Decimal("0.05"))


def sign_lost(rng: Rng, figures: Figures) -> Figures | None:
    """The minus of an end of the interval is gone."""
    names = [n for n in ("low", "high") if figures.numbers[n] < 0]
    if not names:
        return None
    name = one(rng, names)
    return figures.with_number(name, -figures.numbers[name])


def ends_swapped(rng: Rng, figures: Figures) -> Figures | None:
    """Both ends of the interval change places."""
    return figures.changed(low=figures.numbers["high"], high=figures.numbers["low"])


def interval_moved(rng: Rng, figures: Figures) -> Figures | None:
    """An interval of another comparison, which leaves the difference out."""
    gap = 2 * (figures.numbers["high"] - figures.numbers["low"])
    return figures.changed(low=figures.numbers["low"] + gap, high=figures.numbers["high"] + gap)


def beyond_one(rng: Rng, figures: Figures) -> Figures | None:
    """r with its decimal point moved or a digit before it."""
    if figures.test != "r" or abs(figures.numbers["statistic"]) < Decimal("0.11"):
        return None
    value = figures.numbers["statistic"]
    return figures.changed(statistic=value + (1 if value > 0 else -1))


@dataclass(frozen=True, slots=True)
class Plant:
    """A kind of misprint: the result that it is planted in, the slip, and what is shown beside.

    `promised` kinds have to be noticed nearly always; the others are counted in the long run alone.
    """

    draw: Callable[[Rng], Figures]
    slip: Slip
    shows: tuple[str, ...] = ()
    promised: bool = True


PLANTS: Mapping[str, Plant] = {
    "t: p digit wrong": Plant(draw_t, change("p", wrong_digit)),
    "t: p digits swapped": Plant(draw_t, change("p", swapped)),
    "t: p of another df": Plant(draw_t, p_of_other_df),
    "t: < on the wrong side": Plant(draw_t, wrong_side),
    "t: digits swapped": Plant(draw_t, change("statistic", swapped)),
    "t: digit wrong, groups shown": Plant(draw_t, change("statistic", wrong_digit), ("groups",)),
    "t: df wrong": Plant(draw_t, change("df", wrong_digit)),
    "r, z, F, chi2: p digit wrong": Plant(draw_other, change("p", wrong_digit)),
    "r, z, F, chi2: digits swapped": Plant(draw_other, change("statistic", swapped)),
    "r, z, F, chi2: < on the wrong side": Plant(draw_other, wrong_side),
    "groups: SD digits swapped": Plant(draw_t, change("s1", swapped), ("groups",)),
    "groups: mean digit wrong": Plant(draw_t, change("m2", wrong_digit), ("groups",)),
    "groups: df wrong": Plant(draw_t, change("df", wrong_digit), ("groups",)),
    "groups: negative SD": Plant(draw_t, change("s1", lambda _, v: -v), ("groups",)),
    "d doubled": Plant(draw_t, change("d", lambda _, v: 2 * v), ("groups", "d")),
    "d digit wrong": Plant(draw_t, change("d", wrong_digit), ("groups", "d")),
    "CI: sign lost": Plant(draw_t, sign_lost, ("groups", "ci")),
    "CI: ends swapped": Plant(draw_t, ends_swapped, ("groups", "ci")),
    "CI of a difference: sign lost": Plant(draw_t, sign_lost, ("groups", "gap", "ci")),
    "CI of a difference: digit wrong": Plant(draw_t, change("high", wrong_digit), ("groups", "gap", "ci")),
    "CI of a difference: leaves it out": Plant(draw_t, interval_moved, ("groups", "gap", "ci")),
    "difference: digit wrong": Plant(draw_t, change("gap", wrong_digit), ("groups", "gap", "ci")),
    "CI: leaves the difference out": Plant(draw_t, interval_moved, ("groups", "ci")),
    "CI: digit wrong": Plant(draw_t, change("high", wrong_digit), ("groups", "ci"), promised=False),
    "r above 1": Plant(draw_other, beyond_one),
    "p above 1": Plant(draw_t, change("p", lambda _, v: v + 1)),
}


def told(hand: Hand, figures: Figures, shows: tuple[str, ...]) -> Sample:
    """Write a result down; what is not shown is left out of the text."""
    n = figures.numbers
    dfs = [n["df1"], n["df2"]] if figures.test == "F" else [n["df"]] if "df" in n else []
    p = hand.p_told(n["p"]) if figures.relation == "=" else hand.p_bound("<", n["p"])
    extras = [hand.told("d", n["d"])] if "d" in shows else []
    extras += [hand.told("mean_difference", n["gap"], "mean difference")] if "gap" in shows else []
    extras += [hand.interval_told(n["low"], n["high"])] if "ci" in shows else []
    result = hand.join(hand.statistic_told(figures.test, n["statistic"], dfs), p, *extras)
    said = (dict(result.values),)
    if n.get("s1", 0) < 0 and hand.group_style == "plusminus":
        hand = replace(hand, group_style="full")  # nobody writes ± before a minus
    if "groups" not in shows:
        return Sample(sentences.lone(hand, result, "the batches were compared"), said)
    first, second = (hand.group_told(n[f"m{i}"], n[f"s{i}"], int(n[f"n{i}"])) for i in (1, 2))
    design = one(hand.rng, ["", *sentences.INDEPENDENT])
    names = sentences.draw_pair(hand.rng)
    text = sentences.two_groups(hand, names, (first, second), result, n["m1"] > n["m2"], design)
    return Sample(text, said)


def hidden(figures: Figures, shows: tuple[str, ...]) -> Figures:
    """The figures without those that the text does not show."""
    drop = set()
    if "groups" not in shows:
        drop |= {"m1", "s1", "n1", "m2", "s2", "n2"}
    drop |= {"d", "gap"} - set(shows)
    if "ci" not in shows:
        drop |= {"low", "high"}
    return Figures(
        figures.test, {k: v for k, v in figures.numbers.items() if k not in drop}, figures.relation
    )


def plant(name: str, rng: Rng) -> tuple[Sample, bool]:
    """A text with one misprint, and whether the plain readings are contradicted by it."""
    kind = PLANTS[name]
    while True:
        figures = hidden(kind.draw(rng), kind.shows)
        if contradicted(figures):  # the honest figures themselves, two at a time rounded by hand
            raise AssertionError(f"brute force denies honest figures: {figures}")
        changed = kind.slip(rng, figures)
        if changed is not None:
            break
    hand = replace(draw_hand(rng), rng=rng, letters="plain", minus="−")
    return told(hand, changed, kind.shows), contradicted(changed)
