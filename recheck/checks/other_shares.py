"""Checks of ω², ε², f and f² against F, of η² against t, and of f against η² or R²."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from itertools import product

from recheck.checks.compare import Comparison, judge
from recheck.checks.groups import unsigned
from recheck.checks.registry import Case, check
from recheck.checks.source_rows import from_source
from recheck.checks.variance_shares import AT_MOST, SMALLER, UNEQUAL, other_model
from recheck.model import Claim, Finding, Interval, Printed, shown
from recheck.reconcile.readings import Box, Way

NAMES = ("omega2", "epsilon2", "f", "f2")
LESS = "{name} is that of the total, of repeated measures or by another formula, which is smaller"
UP_TO_ETA2 = "{name} is by another formula, which may give all up to η²"
SQUARED = "what is called f is f²"
ROOT = "what is called f² is f"
ONE_EFFECT = "both speak of the same share of variance (partial, whole, adjusted or added)"
PLAIN_F = "F is that of the very effect and of one error term"


def _omega2(F: float, df1: float, df2: float) -> float:
    return df1 * (F - 1) / (df1 * F + df2 + 1)


def _epsilon2(F: float, df1: float, df2: float) -> float:
    return df1 * (F - 1) / (df1 * F + df2)


def _f2(F: float, df1: float, df2: float) -> float:
    return df1 * F / df2


def _f(F: float, df1: float, df2: float) -> float:
    return math.sqrt(df1 * F / df2)


def _eta2(F: float, df1: float, df2: float) -> float:
    return df1 * F / (df1 * F + df2)


FORMULAS: dict[str, Callable[[float, float, float], float]] = {
    "omega2": _omega2, "epsilon2": _epsilon2, "f": _f, "f2": _f2,
}  # fmt: skip
"""Each rises with F, moves away from 0 with df1 and towards it with df2: so the corners of a box bound it."""


def _corners(formula: Callable[[float, float, float], float], box: Box) -> Interval:
    F, df1, df2 = box["F"].within(0.0, math.inf), box["df1"], box["df2"].within(1e-9, math.inf)
    values = [formula(*point) for point in product((F.low, F.high), (df1.low, df1.high), (df2.low, df2.high))]
    return Interval(min(values), max(values))


def _of(name: str, box: Box) -> Interval:
    """The value; an estimate below 0 is often printed as 0."""
    found = _corners(FORMULAS[name], box)
    return Interval(found.low, max(found.high, 0.0)) if name in ("omega2", "epsilon2") else found


@check(
    "shares-from-F",
    title="ω², ε², f and f² against F and its df",
    kinds=("F-test",),
    quantity="omega2",
    needs=("F", "df1", "df2"),
    beside="ω², ε², f or f²",
    formula="ω² = df1 (F − 1)/(df1 F + df2 + 1), ε² = df1 (F − 1)/(df1 F + df2), f² = df1 F/df2",
    source="Keren & Lewis (1979) Educational and Psychological Measurement 39:119-128; Kelley (1935) PNAS 21:554-559; Cohen (1988) Statistical Power Analysis, ch. 8",
    limits="ω² and ε² are at most partial η², f and f² at most those of partial η²: only excess contradicts. Welch's F, mixed models and robust tests are not rebuilt.",
    agrees=("Flour mattered, F(2, 57) = 4.20, p = .020, ω2 = .10.",),
    conditional=("Flour mattered, F(2, 57) = 4.20, p = .020, ω2 = .03.",),
    inconsistent=("Flour mattered, F(2, 57) = 4.20, p = .020, ω2 = .31.",),
)  # fmt: skip
def shares_from_F(case: Case) -> Iterable[Finding]:
    """Compare the printed effect with that of F; a smaller one is of another denominator."""
    claim = case.claim
    if from_source(claim) or claim.values["df1"].number <= 0 or claim.values["df2"].number <= 0:
        return
    for name in NAMES:
        if name not in claim.values:
            continue
        numbers = {n: claim.values[n] for n in (name, "F", "df1", "df2")}
        doubts = (PLAIN_F,) if claim.values["df2"].decimals > 0 or claim.suggests("mixed-model") else ()
        bounds = Interval(-math.inf, 1.0) if name in ("omega2", "epsilon2") else Interval(0.0, math.inf)
        yield judge(
            case,
            Comparison(
                "shares-from-F", name, numbers, tuple(_ways(claim, name)), bounds=bounds, doubts=doubts,
                excuses=other_model(claim),
            ),
        )  # fmt: skip


def _ways(claim: Claim, name: str) -> Iterator[Way]:
    yield Way(lambda box: (_of(name, box),))
    if name in ("f", "f2"):
        other, words = ("f2", SQUARED) if name == "f" else ("f", ROOT)
        yield Way(lambda box: (_of(other, box),), (words,))
    least = -math.inf if name in ("omega2", "epsilon2") else 0.0
    yield Way(
        lambda box: (Interval(least, _of(name, box).high),), (LESS.format(name=shown(name)),), alone=True
    )
    if name in ("omega2", "epsilon2"):
        words = UP_TO_ETA2.format(name=shown(name))
        yield Way(
            lambda box: (Interval(_of(name, box).low, _corners(_eta2, box).high),), (words,), alone=True
        )
    if not claim.says("repeated", "paired", "pooled") and claim.values["df2"].decimals <= 0:
        yield Way(lambda box: (Interval(least, _of(name, _unequal(box)).high),), (UNEQUAL,), alone=True)


def _unequal(box: Box) -> Box:
    """Where the classical F and df2 may lie beside Welch's; see `variance_shares`."""
    F, df2 = box["F"].within(0.0, math.inf), box["df2"]
    return {**box, "F": Interval(F.low / 5, F.high * 3), "df2": Interval(df2.low, df2.high * 8)}


@check(
    "eta2-from-t",
    title="η² and partial η² against t and df",
    kinds=("t-test",),
    quantity="partial_eta2",
    needs=("t", "df"),
    beside="η², partial η² or ω²",
    formula="partial η² = t²/(t² + df)",
    source="Cohen (1973) Educational and Psychological Measurement 33:107-112, with F = t²",
    limits="Only excess contradicts where the share may be of the total. Welch's t, mixed models and robust tests are not rebuilt.",
    agrees=("Steam helped, t(34) = 3.23, p = .003, η2 = .23.",),
    inconsistent=("Steam helped, t(34) = 3.23, p = .003, η2 = .52.",),
)
def eta2_from_t(case: Case) -> Iterable[Finding]:
    """Compare the printed share of variance with that of t."""
    claim = case.claim
    if claim.values["df"].number <= 0 or claim.says("multi-regression"):
        return
    for name in ("partial_eta2", "eta2", "omega2"):
        if name not in claim.values:
            continue
        numbers = {name: claim.values[name], "t": unsigned(claim.values["t"]), "df": claim.values["df"]}
        excuses = other_model(claim)
        doubts = (PLAIN_F,) if claim.values["df"].decimals > 0 or claim.suggests("mixed-model") else ()
        yield judge(
            case,
            Comparison(
                "eta2-from-t", name, numbers, tuple(_t_ways(name)), bounds=Interval(-math.inf, 1.0), doubts=doubts,
                excuses=excuses,
            ),
        )  # fmt: skip


def _t_ways(name: str) -> Iterator[Way]:
    formula = _omega2 if name == "omega2" else _eta2

    def exact(box: Box) -> tuple[Interval, ...]:
        found = _corners(formula, _as_F(box))
        return (Interval(found.low, max(found.high, 0.0)),)

    def less(box: Box) -> tuple[Interval, ...]:
        return (Interval(-math.inf, _corners(_eta2, _as_F(box)).high),)

    yield Way(exact)
    words = (
        LESS.format(name=shown(name)) if name == "omega2" else SMALLER if name == "partial_eta2" else AT_MOST
    )
    yield Way(less, (words,), alone=True)


def _as_F(box: Box) -> Box:
    t = box["t"].absolute()
    return {"F": Interval(t.low**2, t.high**2), "df1": Interval(1.0, 1.0), "df2": box["df"]}


@check(
    "f-from-eta2",
    title="f or f² against partial η², η² or R²",
    kinds=("F-test", "t-test"),
    quantity="f",
    needs=(),
    beside="f or f², and partial η², η² or R²",
    formula="f² = share/(1 − share)",
    source="Cohen (1988) Statistical Power Analysis, ch. 8 and 9",
    limits="The share may be whole where f is partial, adjusted or added: the verdict is conditional at most.",
    agrees=("Flour mattered, F(2, 57) = 4.20, p = .020, f = 0.38, ηp2 = .13.",),
    conditional=("Flour mattered, F(2, 57) = 4.20, p = .020, f = 0.38, ηp2 = .23.",),
)
def f_from_eta2(case: Case) -> Iterable[Finding]:
    """Compare f with the share of variance beside it."""
    values = case.claim.values
    share = next((n for n in ("partial_eta2", "r2", "eta2") if n in values), None)
    name = next((n for n in ("f", "f2") if n in values), None)
    if name is None or share is None or not 0 <= values[share].number < 1:
        return

    def squared(box: Box) -> Interval:
        s = box[share].within(0.0, 1 - 1e-9)
        return Interval(s.low / (1 - s.low), s.high / (1 - s.high))

    def root(box: Box) -> Interval:
        return Interval(math.sqrt(squared(box).low), math.sqrt(squared(box).high))

    plain, other, words = (root, squared, SQUARED) if name == "f" else (squared, root, ROOT)
    numbers: dict[str, Printed] = {name: values[name], share: values[share]}
    ways = (Way(lambda box: (plain(box),)), Way(lambda box: (other(box),), (words,)))
    yield judge(
        case,
        Comparison("f-from-eta2", name, numbers, ways, bounds=Interval(0.0, math.inf), doubts=(ONE_EFFECT,)),
    )
