"""Checks of a group that is all others of its table together against those others."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from functools import cache

import regex

from recheck.checks.compare import Comparison, judge
from recheck.checks.examples import table
from recheck.checks.registry import Case, check
from recheck.checks.surroundings import exact, model_of, of_group, printed_n
from recheck.model import LEVELS, SUM_OF_GROUPS, Claim, Finding, Interval, Printed
from recheck.recompute import combining
from recheck.recompute.anova import MOST_GROUPS, ss_between_bounds
from recheck.reconcile.readings import Box, Numbers, Way, box_of


@cache
def _whole() -> regex.Pattern[str]:
    """What the column or row of all groups together is called."""
    return regex.compile(
        r"""(?:grand\s+)?(?:total|overall|all|combined|pooled|both|whole|entire|full|everyone)\b
    (?:[\s-]+(?:sample|group|groups|cohort|population|study|participants|patients|subjects|respondents|loaves|cases|bakers|
        apprentices|tasters|total|combined|together))*""",
        regex.VERBOSE | regex.IGNORECASE,
    )


@cache
def _size() -> regex.Pattern[str]:
    """A size behind a name."""
    return regex.compile(r"\s*[,(\[]?\s*[nN]\s*=.*$")


PLAIN_MEAN = "the total is the plain mean of the groups' means, whatever their sizes"
SUM = "the total is the sum of the groups, not all of their cases together"
MISSING = "not all cases of the groups have a value of this variable"
POPULATION = "the SDs have n, not n − 1, in their denominators"
MEAN_SD = "the SD of the total is the plain mean of the groups' SDs"
SD_OF_MEANS = "the SD of the total is the one of the groups' means, not of all cases"
TOLD = "these groups are all of the total, and all these numbers are of one variable (their ns add up)"
WITHIN = "the SD of the total is the one within the groups"


@dataclass(frozen=True, slots=True)
class Whole:
    """A total with the groups that make it up: their ns add up to its n exactly."""

    total: Claim
    parts: tuple[Claim, ...]

    @property
    def ns(self) -> tuple[int, ...]:
        """The sizes of the groups."""
        return tuple(printed_n(part) or 0 for part in self.parts)

    @property
    def of_groups(self) -> bool:
        """Whether the sizes may be those of whole groups, of which some cases lack the variable."""
        return any(of_group(claim) for claim in (self.total, *self.parts))

    def numbers(self, *names: str) -> Numbers:
        """The numbers of the total by their own names, those of the groups numbered."""
        own = {name: self.total.values[name] for name in names}
        parts = {
            f"{name}{i}": part.values[name] for i, part in enumerate(self.parts, 1) for name in (*names, "n")
        }
        return {**own, **parts, "n": self.total.values["n"]}


def whole_of(case: Case, *names: str) -> Whole | None:
    """The groups that a total is made of: all others of its row or column, where their ns add up to its own."""
    claim, n = case.claim, printed_n(case.claim)
    if n is None or not exact(claim, *names):
        return None
    if not claim.place.table:
        return _told_whole(case, *names)
    if not _is_whole(claim):
        return None
    others = [c for c in case.block if c.id != claim.id and not _is_whole(c)]
    parts = [c for c in others if _same_row(c, claim)] or [c for c in others if _same_columns(c, claim)]
    if not 2 <= len(parts) <= MOST_GROUPS or max(Counter(map(_named, parts)).values()) > 1:
        return None
    whole = Whole(claim, tuple(parts))
    return (
        whole if all(whole.ns) and sum(whole.ns) == n and all(exact(part, *names) for part in parts) else None
    )


MOST_TOLD = 5
"""Groups of a text that may follow their total at most."""


def _told_whole(case: Case, *names: str) -> Whole | None:
    """In a text that says so: the summaries that follow one at once, where their ns add up to its own and all may be of one variable."""
    claim, n = case.claim, printed_n(case.claim)
    if SUM_OF_GROUPS not in claim.notes:
        return None
    at = next((i for i, c in enumerate(case.block) if c.id == claim.id), None)
    parts: list[Claim] = []
    for other in case.block[at + 1 : at + 1 + MOST_TOLD] if at is not None else ():
        if printed_n(other) is None or not _of_one_variable(claim, other, names):
            return None
        parts.append(other)
        if len(parts) > 1 and sum(printed_n(part) or 0 for part in parts) == n:
            return Whole(claim, tuple(parts))
    return None


def _of_one_variable(total: Claim, part: Claim, names: tuple[str, ...]) -> bool:
    """Whether a group may be one of a total's: printed as finely, of no other outcome, and its mean not far away."""
    if not exact(part, *names) or (total.outcome and part.outcome and total.outcome != part.outcome):
        return False
    if any(total.values[name].decimals != part.values[name].decimals for name in names):
        return False
    sds = [c.values["sd"].number for c in (total, part) if "sd" in c.values]
    apart = abs(total.values[names[0]].number - part.values[names[0]].number)
    return bool(sds) and apart <= FARTHEST * max(sds)


FARTHEST = 2.0
"""SDs that the mean of a total and of one of its groups are apart at most, where only their ns tell that they belong together."""


def _named(claim: Claim) -> str:
    """The innermost name of the group, that of the row where no group is told, without its n."""
    name = (claim.group or claim.place.row or "").rpartition(LEVELS)[2]
    return _size().sub("", name, timeout=1.0).strip()


def _is_whole(claim: Claim) -> bool:
    return _whole().fullmatch(_named(claim), timeout=1.0) is not None


def _above(name: str | None) -> str:
    return (name or "").rpartition(LEVELS)[0]


def _same_row(one: Claim, other: Claim) -> bool:
    """Tell whether two summaries are of one outcome in one row, in columns of groups of one level."""
    if not one.group or one.outcome != other.outcome or one.place.row != other.place.row:
        return False
    return _above(one.group) == _above(other.group)


def _same_columns(one: Claim, other: Claim) -> bool:
    """Tell whether two summaries stand in the same columns, in rows of groups of one level, or called by the group alone."""
    if one.group and one.outcome != other.outcome:
        return False
    return one.place.column == other.place.column and _above(one.place.row) == _above(other.place.row)


def _ends(box: Box, name: str, k: int) -> tuple[list[float], list[float]]:
    intervals = [box[f"{name}{i}"] for i in range(1, k + 1)]
    return [i.low for i in intervals], [i.high for i in intervals]


def _judged(case: Case, whole: Whole, name: str, quantity: str, numbers: Numbers, ways: list[Way]) -> Finding:
    claims = (whole.total, *whole.parts)
    excuses = [model for claim in claims if (model := model_of(claim))][:1]
    doubts: tuple[str, ...] = ()
    if not whole.total.place.table:
        # Heads are counted in a text, and missing values of some are too common to be a finding.
        doubts, missing = (TOLD,), [way for way in ways if MISSING in way.unstated]
        ways = [way for way in ways if MISSING not in way.unstated]
        box = box_of(numbers)
        excuses += [MISSING for way in missing if any(i.meets(box[quantity]) for i in way.implied(box))]
    return judge(
        case, Comparison(name, quantity, numbers, ways, claims, excuses=tuple(excuses), doubts=doubts)
    )


@check(
    "total-mean",
    title="mean of all groups together against their means and ns",
    kinds=("group-summary",),
    quantity="mean",
    needs=("mean", "n"),
    beside="all groups of the same table or told after their total, their ns adding up to the total's",
    formula="mean = Σ n M/Σ n",
    source="by definition",
    limits="Only where the ns add up exactly. Where they are those of whole groups, missing cases may move the mean within the range of the groups' means. Conditional at most in a text, where the groups follow their total. Weighted, adjusted and modelled means are not rebuilt.",
    agrees=(
        table(
            "Table 1. Height of loaves in mm, mean (SD).",
            " | Trained (n = 18) | Untrained (n = 20) | Total (n = 38)",
            "Height | 92.4 (6.1) | 90.1 (5.4) | 91.2 (5.8)",
        ),
    ),
    conditional=(
        table(
            "Table 1. Height of loaves in mm, mean (SD).",
            " | Trained (n = 18) | Untrained (n = 20) | Total (n = 38)",
            "Height | 92.4 (6.1) | 90.1 (5.4) | 91.9 (5.8)",
        ),
    ),
    inconsistent=(
        table(
            "Table 1. Height of loaves in mm, mean (SD).",
            " | Trained (n = 18) | Untrained (n = 20) | Total (n = 38)",
            "Height | 92.4 (6.1) | 90.1 (5.4) | 94.2 (5.8)",
        ),
    ),
)
def total_mean(case: Case) -> Iterable[Finding]:
    """Compare the mean of a total with those of its groups."""
    whole = whole_of(case, "mean")
    if whole is None:
        return
    k, ns = len(whole.parts), whole.ns

    def weighted(box: Box, sizes: tuple[int, ...] = ns) -> tuple[Interval, ...]:
        low, high = combining.union_mean_bounds(*_ends(box, "mean", k), sizes)
        return (Interval(float(low), float(high)),)

    def added(box: Box) -> tuple[Interval, ...]:
        lows, highs = _ends(box, "mean", k)
        return (Interval(sum(lows), sum(highs)),)

    ways = [Way(weighted), Way(lambda box: weighted(box, (1,) * k), (PLAIN_MEAN,)), Way(added, (SUM,))]
    ways += [Way(_extremes("mean", k), (MISSING,))] if whole.of_groups else []
    yield _judged(case, whole, "total-mean", "mean", whole.numbers("mean"), ways)


def _extremes(name: str, k: int) -> Callable[[Box], tuple[Interval, ...]]:
    """From the least to the largest of the groups."""

    def implied(box: Box) -> tuple[Interval, ...]:
        lows, highs = _ends(box, name, k)
        return (Interval(min(lows), max(highs)),)

    return implied


@check(
    "total-sd",
    title="SD of all groups together against their means, SDs and ns",
    kinds=("group-summary",),
    quantity="sd",
    needs=("mean", "sd", "n"),
    beside="all groups of the same table or told after their total, their ns adding up to the total's",
    formula="SD² (N − 1) = Σ (n − 1) SD² + Σ n (M − mean)²",
    source="Higgins, Li & Deeks, Cochrane Handbook for Systematic Reviews of Interventions, 6.5.2.10",
    limits="As for the mean of a total; where cases may be missing, only an SD that no numbers of them explain is inconsistent.",
    agrees=(
        table(
            "Table 1. Height of loaves in mm, mean (SD).",
            " | Trained (n = 18) | Untrained (n = 20) | Total (n = 38)",
            "Height | 92.4 (6.1) | 90.1 (5.4) | 91.2 (5.8)",
        ),
    ),
    inconsistent=(
        table(
            "Table 1. Height of loaves in mm, mean (SD).",
            " | Trained (n = 18) | Untrained (n = 20) | Total (n = 38)",
            "Height | 92.4 (6.1) | 90.1 (5.4) | 91.2 (1.8)",
        ),
    ),
)
def total_sd(case: Case) -> Iterable[Finding]:
    """Compare the SD of a total with what its groups imply."""
    whole = whole_of(case, "mean", "sd")
    if whole is None or any(part.says("spread-unlabelled") for part in (whole.total, *whole.parts)):
        return
    k, ns = len(whole.parts), whole.ns

    def within(box: Box) -> tuple[Interval, ...]:
        low, high = combining.pooled_sd_of_bounds(*_ends(box, "sd", k), ns)
        return (Interval(float(low), float(high)),)

    ways = [
        Way(lambda box: _union(box, ns)), Way(lambda box: _union(box, ns, 1.0), (POPULATION,)), Way(within, (WITHIN,)),
        Way(lambda box: _mean_sd(box, k), (MEAN_SD,)), Way(lambda box: _of_means(box, k), (SD_OF_MEANS,)),
    ]  # fmt: skip
    ways += [Way(lambda box: _anyhow(box, k, sum(ns)), (MISSING,))] if whole.of_groups else []
    numbers: dict[str, Printed] = dict(whole.numbers("mean", "sd"))
    del numbers["mean"]
    yield _judged(case, whole, "total-sd", "sd", numbers, ways)


def _union(box: Box, ns: tuple[int, ...], taken: float = 0.0) -> tuple[Interval, ...]:
    """The SD of all; with `taken` 1, of SDs that have n in their denominators: those with n − 1 times √((n − 1)/n)."""
    k, total = len(ns), sum(ns)
    grown = [math.sqrt(n / (n - taken)) for n in ns]
    lows, highs = ([s * g for s, g in zip(ends, grown, strict=True)] for ends in _ends(box, "sd", k))
    low, high = combining.union_sd_bounds(*_ends(box, "mean", k), lows, highs, ns)
    shrunk = math.sqrt((total - taken) / total)
    return (Interval(float(low) * shrunk, float(high) * shrunk),)


def _mean_sd(box: Box, k: int) -> tuple[Interval, ...]:
    """The plain mean of the SDs, as of a row that averages each column of its table."""
    lows, highs = _ends(box, "sd", k)
    return (Interval(sum(lows) / k, sum(highs) / k),)


def _of_means(box: Box, k: int) -> tuple[Interval, ...]:
    """The SD of the groups' means, each taken as one case."""
    low, high = ss_between_bounds(*_ends(box, "mean", k), [1.0] * k)
    return (Interval(math.sqrt(float(low) / (k - 1)), math.sqrt(float(high) / (k - 1))),)


def _anyhow(box: Box, k: int, total: int) -> tuple[Interval, ...]:
    """The SD of a total of which up to half of the cases may be missing, in whatever groups.

    SD² (N − 1) lies between (N − k) times the least and (N − 1) times the largest SD² within a group, and
    between the groups at most N R²/4 come to it, R the range of their means (Popoviciu 1935).
    """
    (m_low, m_high), (s_low, s_high) = _ends(box, "mean", k), _ends(box, "sd", k)
    fewest = max(total / 2, k + 1.0)
    least = max(min(s_low), 0.0) * math.sqrt((fewest - k) / (fewest - 1))
    apart = (max(m_high) - min(m_low)) ** 2 / 4 * fewest / (fewest - 1)
    return (Interval(least, math.sqrt(max(s_high) ** 2 + apart)),)


QUANTILES = ("median", "min", "max")


@check(
    "total-quantiles",
    title="median, minimum and maximum of all groups together against theirs",
    kinds=("group-summary",),
    quantity="",
    needs=("n",),
    beside="all groups of the same table, their ns adding up to the total's",
    formula="least median ≤ median ≤ largest median; minimum = least minimum; maximum = largest maximum",
    source="by definition",
    limits="As for the mean of a total.",
    agrees=(
        table(
            "Table 1. Time of proofing in min, median (range).",
            " | Trained (n = 18) | Untrained (n = 20) | Total (n = 38)",
            "Proofing | 62 (41 to 90) | 71 (44 to 96) | 66 (41 to 96)",
        ),
    ),
    inconsistent=(
        table(
            "Table 1. Time of proofing in min, median (range).",
            " | Trained (n = 18) | Untrained (n = 20) | Total (n = 38)",
            "Proofing | 62 (41 to 90) | 71 (44 to 96) | 76 (41 to 96)",
        ),
    ),
)
def total_quantiles(case: Case) -> Iterable[Finding]:
    """Compare median and extremes of a total with those of its groups: missing cases change neither relation."""
    for name in QUANTILES:
        whole = whole_of(case, name) if name in case.claim.values else None
        if whole is None:
            continue
        numbers = {n: printed for n, printed in whole.numbers(name).items() if n.startswith(name)}
        k = len(whole.parts)
        way = Way(_extremes(name, k) if name == "median" else _extreme(name, k))
        yield _judged(case, whole, "total-quantiles", name, numbers, [way])


def _extreme(name: str, k: int) -> Callable[[Box], tuple[Interval, ...]]:
    """The least minimum or the largest maximum of the groups."""
    pick = min if name == "min" else max

    def implied(box: Box) -> tuple[Interval, ...]:
        lows, highs = _ends(box, name, k)
        return (Interval(pick(lows), pick(highs)),)

    return implied
