"""Ratios and differences with their interval and p: one claim for each."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache

import regex

from recheck.model import EFFECTS_ON_RISK, LEVELS, Printed
from recheck.reading.tables.blocks import COMPARISONS
from recheck.reading.tables.frame import Found, Frame, claim_of, interval_level, star_of
from recheck.reading.tables.saying import marks_compare
from recheck.reading.tables.summaries import own_names
from recheck.reading.tables.units import Unit
from recheck.reading.views import TIMEOUT

_MAIN = (*sorted(COMPARISONS), "estimate")
_KEPT = (*_MAIN, "se", "sd", "ci_low", "ci_high", "p", "stars", "n", "N")


def estimates_of(frame: Frame, unit: Unit) -> Iterator[Found]:
    """The estimate that a unit prints, where an interval, a standard error or a p stands beside it, or counts beside a ratio."""
    if unit.family != "estimate":
        return
    values = {name: value for name, value in unit.values.items() if name in _KEPT}
    main = next((name for name in values if name in _MAIN), None)
    if main is None or {"b", "beta", "intercept"} & set(unit.values):
        return
    values |= _starred(frame, unit, values)
    counted = main in EFFECTS_ON_RISK and main != "hr" and _beside_counts(frame, unit)
    if not counted and not {"ci_low", "ci_high", "se", "p"} & set(values):
        return
    if main == "mean_difference" and "se" in values and _of_the_mean(frame, unit):
        values.pop("se")
    values.pop("sd", None)
    if not counted and not {"ci_low", "ci_high", "se", "p"} & set(values):
        return
    if "ci_low" in values:
        values |= interval_level(frame, unit.columns, unit.rows)
    yield claim_of(
        frame, "estimate", values, unit.rows[0], unit.columns, rows=unit.rows, outcome=LEVELS.join(label.name for label in own_names(frame, unit) if label.name),
        group=unit.group, stated=_stated(frame, unit), interval_of=main if "ci_low" in values else None, sure=unit.sure, spans=unit.spans,
    )  # fmt: skip


def _beside_counts(frame: Frame, unit: Unit) -> bool:
    """Whether the row of a ratio prints counts with their share or their total, which it can be held against."""
    shapes = [piece.shape for column in frame.sheet.columns for piece in frame.pieces(unit.rows[0], column)]
    return any(shape in ("count%", "fraction", "fraction%") for shape in shapes)


def _of_the_mean(frame: Frame, unit: Unit) -> bool:
    """Whether an SE stands under `standard error of the mean`: that of what was measured, not of the difference."""
    heads = [
        frame.sheet.column_header(cell.column).last.lower() for cell in unit.cells if "se" in cell.values
    ]
    return any("of mean" in head or "of the mean" in head for head in heads) and not any(
        "difference" in head for head in heads
    )


def _starred(frame: Frame, unit: Unit, values: dict[str, Printed]) -> dict[str, Printed]:
    """The marks beside the estimate with the p that they stand for, where no p is printed that is the p."""
    marks = next(
        (mark for cell in unit.cells if (mark := star_of(cell.piece, frame.legend)) is not None), None
    )
    if marks is None or "stars" in values or marks_compare(frame.legend.text):
        return {}
    return {"stars": marks} if "p" in values else {"p": marks, "stars": marks}


def _stated(frame: Frame, unit: Unit) -> list[str]:
    said = [word for cell in unit.cells for word in cell.stated]
    heads = " ".join(frame.sheet.column_header(column).text for column in unit.columns).lower()
    if "adjusted" in heads.replace("unadjusted", "") or "aor" in heads.split() or "ahr" in heads.split():
        said.append("covariate-adjusted")
    said += [word for word in frame.legend.stated if word in _OF_MODELS]
    return [*said, *_tests_of_counts(frame, unit)]


def _tests_of_counts(frame: Frame, unit: Unit) -> list[str]:
    """The tests of counts that caption or notes name, for a p beside a ratio or a difference of risks."""
    if "p" not in unit.values or not EFFECTS_ON_RISK & unit.values.keys():
        return []
    said = [word for word in frame.legend.stated if word in _OF_COUNTS]
    if not said and _chi2().search(frame.legend.text, timeout=TIMEOUT):
        return ["chi2-named"]
    return said


_OF_COUNTS = ("fisher-exact", "yates", "uncorrected-chi2", "likelihood-ratio")


@cache
def _chi2() -> regex.Pattern[str]:
    return regex.compile(
        r"(?:\bchi[- ]?squared?|χ ?(?:2|²)|\bchi ?2)[- ](?:tests?|statistics?|analys[ei]s)\b"
    )


_OF_MODELS = frozenset(
    (
        "covariate-adjusted",
        "mixed-model",
        "imputed",
        "weighted",
        "robust",
        "bootstrap",
        "bayesian",
        "multi-regression",
    )
)
