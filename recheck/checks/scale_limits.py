"""Checks of means and spreads against the scale of their scores: these hold for averages and fractions too."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from math import isnan

from recheck.checks.compare import doubted, impossible, unchecked
from recheck.checks.registry import Case, check
from recheck.checks.whole_scores import (
    Scored,
    are_whole,
    is_change,
    named,
    numbers_of,
    plain,
    scale_words,
    scored,
)
from recheck.checks.wording import stands_for
from recheck.model import Claim, Finding, Interval, Printed, Remedy, shown
from recheck.model.figures import figure
from recheck.reconcile.rounding import PLAIN, ROUNDINGS, Rounding
from recheck.reconcile.slips import slip_remedies

GUARD = 1e-9
OF_ONE = "the score is one answer on that scale, or an average of such, neither a sum nor recoded"


@check(
    "mean-on-scale",
    title="mean against the ends of the scale",
    kinds=("group-summary",),
    quantity="mean",
    needs=("mean",),
    beside="the ends of the scale on which the scores lie",
    formula="lowest score ≤ mean ≤ highest score",
    source="by definition",
    limits="Nothing is said of means on their scale, nor of changes. Adjusted and transformed means may leave it.",
    impossible=(
        "Sourness was rated with a single item from 1 (none) to 7 (strong). The sourness of the rye loaves was fair (M = 7.42, SD = 1.10, n = 28). The sourness of the wheat loaves was lower (M = 4.25, SD = 1.10, n = 28).",
    ),
)
def mean_on_scale(case: Case) -> Iterable[Finding]:
    """Find means off the scale of their scores."""
    claim = case.claim
    told, mean = scored(claim), plain(claim.values.get("mean"))
    if mean is None or not (told.low or told.high) or is_change(claim):
        return
    scale = Interval(
        told.low.number if told.low else -float("inf"), told.high.number if told.high else float("inf")
    )
    if any(rounding.interval(mean).meets(scale) for rounding in ROUNDINGS):
        return
    if told.excuse and not claim.says("averaged-scores"):
        yield unchecked(case, "mean-on-scale", "mean", told.excuse)
        return
    text = f"{named(mean, 'mean')} is printed for scores{scale_words(told)}: no mean of such scores lies off their scale."
    numbers = {"mean": mean}
    slips = slip_remedies(numbers, lambda _, number: number.interval().meets(scale))
    found = impossible(case, "mean-on-scale", "mean", text, scale, remedies=slips)
    found = replace(found, tolerance=stands_for({"mean": mean}))
    yield _weighed(
        found, told, claim, (), above=mean.value > 0 and bool(told.high) and mean.number > scale.high
    )


@check(
    "sd-on-scale",
    title="SD or SE against the scale and the mean",
    kinds=("group-summary",),
    quantity="",
    needs=("mean",),
    uses=("n", "N"),
    beside="SD or SE; the scale on which the scores lie, or how many points it has",
    formula="SD ≤ greatest SD of n scores on the scale with that mean: all but one at its ends; about √((high − mean)(mean − low) n / (n − 1)) ≤ (high − low)/2 × √(n / (n − 1))",
    source="Bhatia & Davis (2000) American Mathematical Monthly 107:353-357; Popoviciu (1935) Mathematica (Cluj) 9:129-145; exact for n scores",
    limits="An upper bound alone, for whole scores and others. Without n that of two scores is taken.",
    impossible=(
        "Sourness was rated with a single item from 1 (none) to 7 (strong). The sourness of the rye loaves was fair (M = 6.21, SD = 3.10, n = 28).",
    ),
    agrees=(
        "The crumb was marked on a visual analogue scale from 0 to 10. The crumb of the rye loaves was fair (M = 6.21, SD = 3.10, n = 28).",
    ),
)
def sd_on_scale(case: Case) -> Iterable[Finding]:
    """Compare a spread with the greatest that scores on the scale can have."""
    claim = case.claim
    asked = _asked(claim)
    if asked is None or is_change(claim):
        return
    most = asked.most(asked.mean)
    if most is None:
        return
    if asked.low(asked.spread) > most:
        if asked.told.excuse and not claim.says("averaged-scores"):
            yield unchecked(case, "sd-on-scale", asked.quantity, asked.told.excuse)
        else:
            yield _too_large(case, asked, most)
    elif asked.told.low and not (are_whole(claim) or asked.told.excuse):
        text = f"{named(asked.spread, asked.quantity)} is no more than scores{asked.scale} with this mean can have, {asked.bound(most)}."
        yield replace(
            impossible(case, "sd-on-scale", asked.quantity, text, Interval(0.0, most)), verdict="agrees", gap=None,
            question="", assumptions=(), tolerance=stands_for(asked.numbers),
        )  # fmt: skip


@dataclass(frozen=True, slots=True)
class Asked:
    """A spread with the mean and the scale that it is held against; `ends` are those of the scale, or as wide apart."""

    told: Scored
    quantity: str
    mean: Printed
    spread: Printed
    ends: tuple[float, float]
    numbers: Mapping[str, Printed]

    @property
    def n(self) -> int | None:
        """How many scores, if there are enough for a spread."""
        return self.told.n if self.told.n and self.told.n > 1 else None

    @property
    def scale(self) -> str:
        """The scale in words."""
        if self.told.low and self.told.high:
            return scale_words(self.told)
        return f" on a scale of {figure(self.ends[1] - self.ends[0] + 1)} points"

    def bound(self, most: float) -> str:
        """The greatest spread in words."""
        return figure(most) + ("" if self.n else " for as few as two scores")

    def low(self, spread: Printed, rounding: Rounding = PLAIN) -> float:
        """The least true value behind a printed spread."""
        return rounding.interval(spread).low

    def most(self, mean: Printed, rounding: Rounding = PLAIN) -> float | None:
        """The greatest spread of such scores, outward by the error of computing; None where no mean lies on the scale."""
        from recheck.recompute.granularity import sd_most, sd_most_any_mean

        low, high = self.ends
        if self.n is None or self.told.low is None:
            most = float(sd_most_any_mean(self.n or 2, low, high))
        else:
            means = rounding.interval(mean)
            most = float(sd_most(means.low, means.high, self.n, low, high))
        shrunk = most / (self.n or 1) ** 0.5 if self.quantity == "se" else most
        return None if isnan(most) else shrunk * (1 + GUARD)


def _asked(claim: Claim) -> Asked | None:
    """The spread and its scale; None where one of them is not told, or nothing follows."""
    quantity = "sd" if "sd" in claim.values else "se"
    told, mean, spread = scored(claim), plain(claim.values.get("mean")), plain(claim.values.get(quantity))
    if mean is None or spread is None or told.width is None:
        return None
    ends = claim.values["scale_min"].number, claim.values["scale_max"].number
    asked = Asked(told, quantity, mean, spread, ends, numbers_of(claim, quantity, "mean", "n"))
    return None if ends[0] >= ends[1] or (quantity == "se" and asked.n is None) else asked


def _too_large(case: Case, asked: Asked, most: float) -> Finding:
    quantity, spread = asked.quantity, asked.spread
    text = (
        f"{named(spread, quantity)} is printed with {named(asked.mean, 'mean').lower()}, but scores{asked.scale} with this mean "
        f"have an {shown(quantity)} of {asked.bound(most)} at most, with all but one of them at the ends."
    )

    def mended(name: str, number: Printed) -> bool:
        limit = most if name == quantity else asked.most(number)
        return limit is not None and asked.low(number if name == quantity else spread) <= limit

    slips = slip_remedies({quantity: spread, "mean": asked.mean}, mended)
    words = f"{shown(quantity)} would have to be {figure(most)} or less"
    number = Remedy("number", quantity, words, 0.0, most)
    found = impossible(case, "sd-on-scale", quantity, text, Interval(0.0, most), remedies=(*slips, number))
    found = replace(found, tolerance=stands_for(asked.numbers))
    for rounding in ROUNDINGS[1:]:
        limit = asked.most(asked.mean, rounding)
        if limit is not None and asked.low(spread, rounding) <= limit:
            return _read(found, rounding.words)
    # The fewer the scores, the larger their SD may be; but never larger than that of two at the ends.
    two = float(asked.ends[1] - asked.ends[0]) / 2**0.5
    any_size = quantity == "sd" and asked.low(spread) > two * (1 + GUARD)
    return _weighed(found, asked.told, case.claim, () if any_size else asked.told.of_size, above=True)


def _read(found: Finding, words: str) -> Finding:
    return replace(
        found, verdict="conditional", assumptions=(*found.assumptions, words),
        message=f"{found.message} The numbers agree if {words}, which the text does not say.",
        reconciled_by=(Remedy("reading", found.quantity, f"the numbers agree if {words}"), *found.reconciled_by),
    )  # fmt: skip


def _weighed(found: Finding, told: Scored, claim: Claim, of_size: tuple[str, ...], *, above: bool) -> Finding:
    """Impossible, or conditional where what it hangs on is not told in so many words."""
    left_open = not told.single and not (above and claim.says("averaged-scores"))
    doubts = (*told.doubts, *of_size, *((OF_ONE,) if left_open else ()))
    return doubted(found, "; and if ".join(doubts)) if doubts else found
