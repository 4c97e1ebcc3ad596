"""Documents in which a number is told differently in two places."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

import numpy as np

from tests.soundness import computing
from tests.soundness.computing import sd
from tests.soundness.hand import draw_hand, one
from tests.soundness.retold import OUTCOMES, drawn, heads, rows_of, table
from tests.soundness.samples import Sample
from tests.soundness.sentences import NAMES


def wrong_in_text(rng: np.random.Generator) -> Sample | None:
    """Means and SDs of a table told again in the text, one of the numbers with a wrong digit."""
    hand = replace(draw_hand(rng), rng=rng)
    groups, own = drawn(rng), one(rng, list(OUTCOMES))
    names = [
        hand.number(hand.rounded(float(f(x)), hand.places[k]))
        for x in groups
        for f, k in ((np.mean, "mean"), (sd, "sd"))
    ]
    at = int(rng.integers(4))
    wrong = _other_digit(rng, names[at])
    if wrong is None:
        return None
    told = [*names[:at], wrong, *names[at + 1 :]]
    text = one(rng, [
        f"{own} was M = {told[0]} (SD = {told[1]}) with rye and M = {told[2]} (SD = {told[3]}) with wheat (Table 2).",
        f"{own} was greater or smaller with rye (M = {told[0]}, SD = {told[1]}) than with wheat (M = {told[2]}, SD = {told[3]}; Table 2).",
        f"As shown in Table 2, mean {own.lower()} was {told[0]} (SD = {told[1]}) with rye and {told[2]} (SD = {told[3]}) with wheat.",
    ])  # fmt: skip
    shown = table(hand, "Outcomes by flour", heads(hand, NAMES[:2], groups), rows_of(rng, own, groups))
    return Sample(f"{text}\n\n{shown}\n", alone=True)


def wrong_in_abstract(rng: np.random.Generator) -> Sample | None:
    """A result of the text told again in the abstract, its t or its p with a wrong digit."""
    hand = replace(draw_hand(rng), rng=rng, letters="plain")
    test = computing.t_test(*drawn(rng, int(rng.integers(10, 60))), pooled=True)
    told = [hand.number(hand.rounded(test.value, 2)), hand.number(hand.rounded(test.p, 3), bounded=True)]
    at = int(rng.integers(2))
    wrong = _other_digit(rng, told[at])
    if test.p < 0.0095 or abs(test.value) < 0.1 or wrong is None:
        return None
    again = [wrong if k == at else number for k, number in enumerate(told)]
    df, joint = int(test.df[0]), "; " if hand.comma else ", "
    text = (
        f"# Abstract\n\nRye and wheat differed or did not, t({df}) = {again[0]}{joint}p = {again[1]}.\n\n"
        f"# Results\n\nLoaf height was compared between rye and wheat, t({df}) = {told[0]}{joint}p = {told[1]}.\n"
    )
    return Sample(text, alone=True)


def _other_digit(rng: np.random.Generator, number: str) -> str | None:
    """The number with one of its digits changed by two or more; None where it has a single one."""
    places = [at for at, char in enumerate(number) if char.isdigit()]
    if len(places) < 2:
        return None
    at = places[int(rng.integers(len(places)))]
    digit = (int(number[at]) + int(rng.integers(2, 9))) % 10
    return number[:at] + str(digit) + number[at + 1 :]


WRONG: dict[str, Callable[[np.random.Generator], Sample | None]] = {
    "means in the text": wrong_in_text,
    "result in the abstract": wrong_in_abstract,
}
