"""Checks of an analysis of variance: F against its groups, and the rows of its source table."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from recheck.checks.compare import NOT_NEGATIVE, Comparison, judge, unchecked
from recheck.checks.examples import table
from recheck.checks.groups import link_doubts
from recheck.checks.models import foreign_model
from recheck.checks.p_values import ROUNDED_DF, rounded_df
from recheck.checks.registry import Case, check
from recheck.checks.several import Several, fit_one_way, several_of, turned
from recheck.checks.source_rows import (
    OTHER_ERROR,
    PRINTED_ERROR,
    alone_in_table,
    mean_square,
    p_fits_error,
    ratio,
    square,
)
from recheck.model import DISCREPANT, Claim, Finding, Interval, Remedy, shown
from recheck.recompute.anova import MOST_GROUPS
from recheck.reconcile.readings import Box, Way, agrees_as_printed, box_of

ROWS = ("F-test",)


def _source(effect: str, *, total: str = "340.0") -> str:
    """An example of a source table with this row of an effect."""
    return table(
        "Table 2. Analysis of variance of loaf height.",
        "Source | SS | df | MS | F | p | η²",
        effect,
        "Error | 112.0 | 20 | 5.6 |  |  | ",
        f"Total | {total} | 23 |  |  |  | ",
    )


@check(
    "F-from-groups",
    title="F against the means, SDs and ns of three or more groups",
    kinds=ROWS,  # type: ignore[arg-type]
    quantity="F",
    needs=("F",),
    beside="three or more linked groups, each with mean, SD or SE, and n",
    formula="F = (Σ n (M − M̄)² / (k − 1)) / (Σ (n − 1) SD² / (N − k)), with k − 1 and N − k df",
    source="Fisher (1925) Statistical Methods for Research Workers; Welch (1951) Biometrika 38:330-336; Brown & Forsythe (1974) Technometrics 16:129-132",
    limits="Only where the printed df are k − 1 and N − k, or Welch's; covariates, repeated measures and factorial designs are not rebuilt.",
    agrees=(
        table(
            "Table 1. Loaf height in mm, mean (SD), by flour.",
            " | Rye (n = 20) | Wheat (n = 22) | Spelt (n = 19) | F(2, 58) | p",
            "Height | 92.4 (6.1) | 86.0 (5.8) | 88.2 (6.4) | 5.80 | .005",
        ),
        "Rye loaves (M = 92.4, SD = 6.1, n = 20), wheat loaves (M = 86.0, SD = 5.8, n = 22) and spelt loaves (M = 88.2, SD = 6.4, n = 19) differed in height, F(2, 58) = 5.80, p = .005.",
    ),
    inconsistent=(
        table(
            "Table 1. Loaf height in mm, mean (SD), by flour.",
            " | Rye (n = 20) | Wheat (n = 22) | Spelt (n = 19) | F(2, 58) | p",
            "Height | 92.4 (6.1) | 86.0 (5.8) | 88.2 (6.4) | 8.50 | .005",
        ),
    ),
    unchecked=(
        table(
            "Table 1. Loaf height in mm, mean (SD), by flour.",
            " | Rye (n = 20) | Wheat (n = 22) | Spelt (n = 19) | F(2, 57) | p",
            "Height | 92.4 (6.1) | 86.0 (5.8) | 88.2 (6.4) | 5.80 | .005",
        ),
    ),
)
def f_from_groups(case: Case) -> Iterable[Finding]:
    """Compare F with what the groups imply under each one-way analysis that the df fit."""
    claim, name = case.claim, "F-from-groups"
    if not 3 <= len(case.groups) <= MOST_GROUPS or claim.says("variance-test"):
        return
    several = several_of(case.groups)
    if several is None:
        return
    claims = (claim, *case.groups)
    if several.impossible:
        yield unchecked(case, name, "F", "a spread below 0 is printed for one of the groups", claims)
        return
    fit = fit_one_way(claim, several, box_of(several.numbers))
    if fit.reason:
        yield unchecked(case, name, "F", fit.reason, claims)
        return
    foreign = foreign_model(claims, fitted=fit.sure)
    found = judge(
        case,
        Comparison(
            name, "F", {"F": claim.values["F"], **several.numbers}, fit.ways, claims, bounds=NOT_NEGATIVE,
            doubts=(*fit.doubts, *link_doubts(case)), excuses=(foreign,) if foreign else (),
        ),
    )  # fmt: skip
    if found.verdict in DISCREPANT:
        found = replace(found, reconciled_by=(*_spread_slip(claim, several), *found.reconciled_by))
    yield found


def _spread_slip(claim: Claim, several: Several) -> tuple[Remedy, ...]:
    """The slip of a wrong label: standard errors printed as SDs, or the other way round."""
    other = turned(several)
    if other is None:
        return ()
    ways = fit_one_way(claim, other, box_of(other.numbers)).ways
    if not agrees_as_printed("F", {"F": claim.values["F"], **other.numbers}, ways):
        return ()
    now, then = shown(several.spread), shown(other.spread)
    text = f"if what is printed as {now} were {then} in all groups, the numbers would agree"
    return (Remedy("slip", several.spread, text, change=f"{now} → {then}"),)


@check(
    "ms-from-ss",
    title="mean square against its sum of squares and df",
    kinds=ROWS,  # type: ignore[arg-type]
    quantity="ms",
    needs=("ms", "ss", "df1"),
    formula="MS = SS / df, in the row of the effect and in that of the error",
    source="Fisher (1925) Statistical Methods for Research Workers",
    limits="df without decimals may be rounded where they are corrected for sphericity.",
    agrees=(_source("Flour | 228.0 | 3 | 76.0 | 13.57 | < .001 | .67"),),
    inconsistent=(_source("Flour | 228.0 | 3 | 67.0 | 13.57 | < .001 | .67"),),
)
def ms_from_ss(case: Case) -> Iterable[Finding]:
    """Compare each printed mean square with its sum of squares over its df."""
    values = case.claim.values
    for ms, ss, df in (("ms", "ss", "df1"), ("ms_error", "ss_error", "df2")):
        if ms in values and ss in values and df in values and values[df].number > 0:
            yield _meansquare(case, ms, ss, df)


def _meansquare(case: Case, ms: str, ss: str, df: str) -> Finding:
    claim = case.claim
    numbers = {name: claim.values[name] for name in (ms, ss, df)}
    ways = [Way(lambda box: ratio(box, ss, df))]
    if numbers[df].decimals <= 0 and claim.suggests("corrected-df", "repeated"):
        ways.append(Way(lambda box: ratio({**box, df: rounded_df(box[df])}, ss, df), (ROUNDED_DF,)))
    excuses = _pooled_ss(claim)
    return judge(case, Comparison("ms-from-ss", ms, numbers, ways, bounds=NOT_NEGATIVE, excuses=excuses))


def _pooled_ss(claim: Claim) -> tuple[str, ...]:
    """Why sums of squares need not be those behind the mean squares."""
    if claim.suggests("imputed"):
        return ("sums of squares are pooled over imputed data sets",)
    return ()


@check(
    "F-from-ms",
    title="F against the mean squares of its source table",
    kinds=ROWS,  # type: ignore[arg-type]
    quantity="F",
    needs=("F",),
    beside="the mean square, or SS and df, of the effect and of its error",
    formula="F = MS / MS of the error",
    source="Fisher (1925) Statistical Methods for Research Workers",
    limits="With random factors F has another mean square below: conditional, unless p follows from the df of the error row, or the table has one effect alone.",
    agrees=(_source("Flour | 228.0 | 3 | 76.0 | 13.57 | < .001 | .67"),),
    inconsistent=(_source("Flour | 228.0 | 3 | 76.0 | 15.37 | < .001 | .67"),),
    conditional=(_source("Flour | 228.0 | 3 | 76.0 | 15.37 | < .001 | .67", total="403.0"),),
)
def f_from_ms(case: Case) -> Iterable[Finding]:
    """Compare F with the ratio of the printed mean squares."""
    claim = case.claim
    effect, error = square(claim, "ms", "ss", "df1"), square(claim, "ms_error", "ss_error", "df2")
    if effect is None or error is None:
        return
    numbers = {name: claim.values[name] for name in ("F", *effect, *error)}

    def implied(box: Box) -> tuple[Interval, ...]:
        squares = {"top": mean_square(box, effect), "bottom": mean_square(box, error)}
        return ratio(squares, "top", "bottom")

    doubts = () if alone_in_table(claim) or p_fits_error(claim) else (PRINTED_ERROR,)
    excuses = _pooled_ss(claim)
    yield judge(
        case,
        Comparison(
            "F-from-ms", "F", numbers, (Way(implied),), bounds=NOT_NEGATIVE, doubts=doubts, excuses=excuses
        ),
    )


@check(
    "eta2-from-ss",
    title="η² and partial η² against the sums of squares",
    kinds=ROWS,  # type: ignore[arg-type]
    quantity="partial_eta2",
    needs=("ss",),
    beside="η² with the total SS, or partial η² with the SS of the error",
    formula="η² = SS / SS total; partial η² = SS / (SS + SS of the error)",
    source="Fisher (1925) Statistical Methods for Research Workers; Cohen (1973) Educational and Psychological Measurement 33:107-112",
    limits="A η² that fits the formula of the partial one is conditional, as programs mix up the two names.",
    agrees=(_source("Flour | 228.0 | 3 | 76.0 | 13.57 | < .001 | .67"),),
    inconsistent=(_source("Flour | 228.0 | 3 | 76.0 | 13.57 | < .001 | .76"),),
)
def eta2_from_ss(case: Case) -> Iterable[Finding]:
    """Compare shares of variance with the sums of squares of the table."""
    values = case.claim.values
    formulas = {"eta2": (_whole_share, _part_share), "partial_eta2": (_part_share, _whole_share)}
    words = {
        _whole_share: "SS is divided by the total SS",
        _part_share: "SS is divided by itself and that of the error",
    }
    needs = {_whole_share: ("ss", "ss_total"), _part_share: ("ss", "ss_error")}
    for quantity, (first, second) in formulas.items():
        if quantity not in values or not values.keys() >= set(needs[first]):
            continue
        names = [n for n in ("ss", "ss_error", "ss_total") if n in values]
        numbers = {n: values[n] for n in (quantity, *names)}
        ways = [Way(first)]
        if values.keys() >= set(needs[second]):
            ways.append(Way(second, (words[second],)))
        if (
            quantity == "partial_eta2"
            and not alone_in_table(case.claim)
            and {"F", "df1", "df2"} <= values.keys()
        ):
            numbers |= {n: values[n] for n in ("F", "df1", "df2")}
            ways.append(Way(_share_of_F, (OTHER_ERROR,)))
        yield judge(
            case,
            Comparison("eta2-from-ss", quantity, numbers, ways, bounds=Interval(0.0, 1.0), excuses=_pooled_ss(case.claim)),
        )  # fmt: skip


def _share_of_F(box: Box) -> tuple[Interval, ...]:
    """Partial η² = df1 F / (df1 F + df2) with the df of any row from 1 up to those of the error."""
    F, df1, df2 = box["F"].within(0.0, float("inf")), box["df1"], box["df2"]
    low, high = df1.low * F.low, df1.high * F.high
    return (Interval(low / (low + max(df2.high, 1.0)), high / (high + min(df2.low, 1.0))),)


def _whole_share(box: Box) -> tuple[Interval, ...]:
    return ratio(box, "ss", "ss_total")


def _part_share(box: Box) -> tuple[Interval, ...]:
    """SS / (SS + SS of the error): rises with the first and falls with the second."""
    a, b = box["ss"].within(0.0, float("inf")), box["ss_error"].within(0.0, float("inf"))
    low = a.low / (a.low + b.high) if a.low + b.high > 0 else 0.0
    return (Interval(low, a.high / (a.high + b.low) if a.high + b.low > 0 else 1.0),)
