"""Sentences of the bakery around results; they say the design, or leave it open."""

from __future__ import annotations

import numpy as np

from tests.soundness.hand import Hand, one
from tests.soundness.samples import Piece

PAIRS = (
    ("rye starter", "wheat starter"), ("long proof", "short proof"), ("trained group", "untrained group"),
    ("steamed oven", "dry oven"), ("cold-fermented batch", "warm-fermented batch"), ("new recipe", "old recipe"),
)  # fmt: skip
NAMES = ("rye", "wheat", "spelt", "barley", "oat")
OUTCOMES = ("Loaf height", "Crumb score", "Bench score", "Shaping time", "Crust colour")
INDEPENDENT = (
    "An independent-samples t test showed the following", "By Student's t test", "In a two-sample t test",
    "With an unpaired t-test",
)  # fmt: skip


def sizes_note(rng: np.random.Generator, names: tuple[str, str], n1: int, n2: int, show: str) -> str:
    """A sentence before the result that tells the group sizes, the total, or nothing."""
    if show == "before":
        return f"There were {n1} loaves in the {names[0]} and {n2} in the {names[1]}. "
    if show == "before-n":
        return f"We compared the {names[0]} (n = {n1}) with the {names[1]} (n = {n2}). "
    if show == "total":
        return one(
            rng,
            [
                f"All {n1 + n2} loaves were scored (N = {n1 + n2}). ",
                f"The panel scored N = {n1 + n2} loaves. ",
            ],
        )
    return ""


def draw_pair(rng: np.random.Generator) -> tuple[str, str]:
    """The names of two groups."""
    return PAIRS[int(rng.integers(len(PAIRS)))]


def two_groups(
    hand: Hand, names: tuple[str, str], groups: tuple[Piece, Piece], result: Piece, up: bool, design: str = ""
) -> str:
    """One sentence that compares two groups; `up` tells whether the first mean is the higher."""
    rng, (first, second) = hand.rng, groups
    outcome = OUTCOMES[int(rng.integers(len(OUTCOMES)))]
    word = "higher" if up else "lower"
    start = f"{design}, {outcome.lower()}" if design else outcome
    template = int(rng.integers(4))
    tail = hand.bracket(result)
    if template == 0:
        text = f"{start} was {word} in the {names[0]} ({first.text}) than in the {names[1]} ({second.text}){tail}."
    elif template == 1:
        text = f"{start} was compared between the {names[0]} ({first.text}) and the {names[1]} ({second.text}){tail}."
    elif template == 2:
        text = f"The {names[0]} ({first.text}) and the {names[1]} ({second.text}) were compared on {outcome.lower()}{tail}."
        text = f"{design}: {text}" if design else text
    else:
        text = f"{start}: {names[0]}, {first.text}; {names[1]}, {second.text}{tail}."
    return text.replace("..", ".")


def several_groups(hand: Hand, groups: list[Piece], result: Piece, design: str = "", note: str = "") -> str:
    """One sentence with the figures of several groups and one result."""
    listed = [f"{name} ({piece.text})" for name, piece in zip(NAMES, groups, strict=False)]
    outcome = one(hand.rng, OUTCOMES)
    start = f"{design}, {outcome.lower()}" if design else outcome
    joined = ", ".join(listed[:-1]) + f" and {listed[-1]}" if listed else ""
    if not joined:
        return f"{note}{start} differed little or much between flours{hand.bracket(result)}."
    return f"{note}{start} by flour: {joined}{hand.bracket(result)}.".replace("..", ".")


def lone(hand: Hand, result: Piece, subject: str, design: str = "") -> str:
    """A result without group figures."""
    start = f"{design}: {subject}" if design else subject[0].upper() + subject[1:]
    return f"{start}{hand.bracket(result)}.".replace("..", ".")
