"""Tables of coefficients: one claim for each, with its standard error, statistic, p and interval."""

from __future__ import annotations

from collections.abc import Sequence
from functools import cache

import regex

from recheck.model import EFFECTS_ON_RISK, RATIOS, ClaimKind, Printed
from recheck.reading.tables.blocks import COEFFICIENTS, has_constant
from recheck.reading.tables.bundles import STATISTICS, Bundle, bundles_of
from recheck.reading.tables.frame import Found, Frame, claim_of, star_of
from recheck.reading.tables.headings import told
from recheck.reading.tables.row_numbers import Numbers, numbers_of
from recheck.reading.tables.saying import marks_compare, said_of
from recheck.reading.tables.shelf import without
from recheck.reading.views import TIMEOUT

_FIT = frozenset(("r2", "adjusted_r2", "delta_r2", "F", "n", "N", "other", "p", "df", "df1", "df2", "chi2"))


def claims_of(frame: Frame, found: Sequence[Found]) -> list[Found]:
    """The claims of a block with those of its coefficients; rows below that tell of the fit are none."""
    kept = list(found)
    for bundle in bundles_of(frame):
        if not _is_regression(bundle):
            continue
        rows = (row for row in frame.sheet.rows if row not in frame.size_rows and not _of_fit(frame, row))
        kept = without(kept, [made for row in rows if (made := _coefficient(frame, row, bundle)) is not None])
    return [*kept, *_below_each_other(frame, kept)]


def _is_regression(bundle: Bundle) -> bool:
    held = bundle.quantities
    if held & COEFFICIENTS:
        return bool(held & (STATISTICS | {"se", "p", "ci_low"}))
    return bool(held & EFFECTS_ON_RISK) and bool(held & (STATISTICS - {"r"}))


def _coefficient(frame: Frame, row: int, bundle: Bundle) -> Found | None:
    """One row's coefficient; None where it has no number beside it that says how sure it is."""
    numbers = numbers_of(frame, row, bundle)
    values = {
        name: value for name, value in numbers.values.items() if name not in ("n", "N", "other", "ss", "ms")
    }
    if not values.keys() & (COEFFICIENTS | EFFECTS_ON_RISK) or not values.keys() - COEFFICIENTS - set(RATIOS):
        return None
    if "estimate" in values and "b" not in values:
        values["b"] = values.pop("estimate")
        numbers.ends_of = "b" if numbers.ends_of == "estimate" else numbers.ends_of
    if "stars" in values and marks_compare(frame.legend.text):
        values = {
            name: value for name, value in values.items() if name != "stars" and value is not values["stars"]
        }
    ratio = next((name for name in ("or", "hr", "rr") if name in values), None)
    kind: ClaimKind = "regression" if values.keys() & COEFFICIENTS else "estimate"
    return claim_of(
        frame, kind, values, row, numbers.columns, outcome=_predictor(frame, row), group=bundle.group,
        stated=said_of(kind, numbers.stated, frame.legend.stated), interval_of=_owner(numbers, values, ratio),
        notes=numbers.notes,
    )  # fmt: skip


def _predictor(frame: Frame, row: int) -> str:
    """The name of a coefficient; that of the constant is a word for a quantity too."""
    return frame.row_name(row) or frame.sheet.row_header(row).last


def _owner(numbers: Numbers, values: dict[str, Printed], ratio: str | None) -> str | None:
    """What the interval belongs to; beside b and OR only where heading or place leave no doubt.

    An interval without an end below 0 around the ratio, far from b, is that of the ratio, and the other way round.
    """
    if "ci_low" not in values:
        return None
    candidates = [
        name for name in ("b", "estimate", "beta", "or", "hr", "rr", "mean_difference") if name in values
    ]
    inside = [name for name in candidates if _holds(values, name)]
    if numbers.ends_of in inside:
        return numbers.ends_of
    if len(candidates) == 1:
        return candidates[0]
    if numbers.ends_of is None and len(inside) == 1:
        return inside[0]
    return numbers.ends_of if ratio is None else None


def _holds(values: dict[str, Printed], name: str) -> bool:
    return (
        values["ci_low"].value <= values[name].value <= values["ci_high"].value
        if "ci_high" in values
        else False
    )


def _of_fit(frame: Frame, row: int) -> bool:
    """Whether a row tells how well the model fits: `R²`, `F(3, 76)`, `N`, `AIC`."""
    path = frame.sheet.row_header(row).path
    label = told(path[-1]) if path else None
    return label is not None and bool(label.quantities) and label.whole and set(label.quantities) <= _FIT


# -- models side by side ----------------------------------------------------------------------------------


@cache
def _se_in_brackets() -> regex.Pattern[str]:
    return regex.compile(
        r"(?:standard errors?|\bs\.?e\.?s?\b)[^.;]{0,40}(?:parenthes[ei]s|brackets)|(?:parenthes[ei]s|brackets)[^.;]{0,30}(?:standard errors?|\bs\.?e\.?s?\b)"
        r"|(?:coefficients?|estimates?|\bb\b|\bβ\b) ?(?:\(|and |with )(?:(?:robust|clustered) )?(?:standard errors?|\bs\.?e\.?\b)",
        regex.IGNORECASE,
    )


def _below_each_other(frame: Frame, kept: Sequence[Found]) -> list[Found]:
    """Coefficients of models in columns, `0.42** (0.15)` in one cell or with the standard error in the row below."""
    legend = frame.legend
    if not _se_in_brackets().search(legend.text, timeout=TIMEOUT):
        return []
    if not _speaks_of_models(legend.text) and not has_constant(frame):
        return []
    if "odds" in legend.text or "hazard" in legend.text or "ratio" in legend.text:
        return []
    taken = {cell for item in kept for cell in item.cells}
    name = (
        "beta"
        if regex.search(r"β|(?<!un)standardi[sz]ed (?:regression )?coef", legend.text, timeout=TIMEOUT)
        else "b"
    )
    made = []
    for row in frame.sheet.rows:
        for column in frame.sheet.columns:
            if column in frame.roles or (row, column) in taken or _of_fit(frame, row):
                continue
            item = _stacked(frame, row, column, name)
            if item is not None:
                made.append(item)
    return made


def _speaks_of_models(text: str) -> bool:
    return any(word in text for word in ("regress", "coefficient", "model", "estimates"))


def _stacked(frame: Frame, row: int, column: int, name: str) -> Found | None:
    """One coefficient and its standard error."""
    found = frame.pieces(row, column)
    if not found or not found[0].has_value:
        return None
    first = found[0]
    rows: tuple[int, ...] = ()
    if first.shape in ("pair(", "pair["):
        b, se = first.numbers
    elif first.shape == "number" and first.label != "(":
        below = found[1:] or (frame.pieces(row + 1, column) if row + 1 in frame.sheet.rows else ())
        if (
            len(below) != 1
            or below[0].label != "("
            or below[0].shape != "number"
            or not (len(found) > 1 or _row_of_se(frame, row + 1))
        ):
            return None
        b, se = first.numbers[0], below[0].numbers[0]
        rows = (row,) if len(found) > 1 else (row, row + 1)
    else:
        return None
    if se.value < 0 or (se.decimals == 0 and b.decimals > 0):
        return None
    level = next((level for piece in found if (level := star_of(piece, frame.legend))), None)
    values = {name: b, "se": se, **({"p": level, "stars": level} if level else {})}
    return claim_of(
        frame, "regression", values, row, (column,), rows=rows, outcome=_predictor(frame, row), group=frame.group(column).name,
        stated=said_of("regression", (), frame.legend.stated),
    )  # fmt: skip


def _row_of_se(frame: Frame, row: int) -> bool:
    """Whether all numbers of a row stand in brackets; its own name is none or tells how the predictor is coded."""
    found = [piece for column in frame.sheet.columns for piece in frame.pieces(row, column)]
    return bool(found) and all(piece.label == "(" or not piece.numbers for piece in found)
